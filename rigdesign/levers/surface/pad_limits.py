"""Limits of the pads that drilling must keep: forces, and, where pads move, outline, keep-outs and gaps."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.surface.wiring import Branches
from rigdesign.pads.limits import TOUCH, force_limits
from rigdesign.pads.model import PadPlan
from rigdesign.pads.surface.footprints import slack, turns
from rigdesign.pads.surface.room import Room
from rigdesign.target.curve import Floats

if TYPE_CHECKING:
    from shapely import Geometry

STEPS_A_TIER = 8
"""A pad is taken to move by no more than so many drill steps for each tier above it."""


@dataclass(frozen=True)
class PadLimits:
    """The limits of the pads of a plan that hang from a tree; pads that stay have those on forces alone."""

    plan: PadPlan
    branches: Branches

    def missed(self, x: Floats, y: Floats, force: Floats) -> Floats:
        """How far rigs with pads at x, y [m] with `force` [N] > 0, (k, n_pads), miss the limits; (k,), 0 where kept.

        Forces count in mean forces and lengths in lengths of the specimen.
        """
        brief = self.plan.target.brief
        least, largest = force_limits(self.plan.target)
        result = np.maximum(least * (1 - TOUCH) - force, 0.0).sum(axis=1)
        if np.isfinite(largest):
            result = result + np.maximum(force - largest * (1 + TOUCH), 0.0).sum(axis=1)
        result = result / force.mean(axis=1)
        if self.plan.may_move:
            span = brief.specimen.right - brief.specimen.left
            result = result + (self._off_room(x, y) + self._too_close(x, y)) / span
        return np.asarray(result)

    @cached_property
    def reach(self) -> float:
        """How far drilling may move a pad [m]."""
        return STEPS_A_TIER * self.branches.depth * self.plan.target.brief.levers.drill_step

    @cached_property
    def _area(self) -> Geometry:
        """Where pads may stand; places on its border count."""
        import shapely

        brief = self.plan.target.brief
        area = shapely.buffer(Room(brief).area, slack(brief), join_style="mitre")
        shapely.prepare(area)
        return area

    @cached_property
    def _near_border(self) -> NDArray[np.intp]:
        """Pads that drilling might move off the allowed area."""
        import shapely

        places = shapely.points(self.plan.x, self.plan.y)
        inside = shapely.contains(self._area, places)
        return np.flatnonzero(~inside | (shapely.distance(self._area.boundary, places) <= self.reach))

    def _off_room(self, x: Floats, y: Floats) -> Floats:
        """Sum of the pads' distances from where they may stand [m], (k,)."""
        import shapely

        result = np.zeros(len(x))
        for pad in self._near_border:
            out = np.flatnonzero(~shapely.intersects_xy(self._area, x[:, pad], y[:, pad]))
            if out.size:
                result[out] += shapely.distance(self._area, shapely.points(x[out, pad], y[out, pad]))
        return result

    @cached_property
    def _pairs(self) -> tuple[NDArray[np.intp], NDArray[np.intp], Floats, Floats]:
        """Pads that might come too close: both, the direction of the first [rad] and the turn of the other from it."""
        plan = self.plan
        pads = plan.target.brief.pads
        turn = turns(plan.target.brief, plan.x, plan.y)
        first, second = np.triu_indices(plan.n_pads, 1)
        away = np.hypot(plan.x[first] - plan.x[second], plan.y[first] - plan.y[second])
        near = away <= np.hypot(pads.length, pads.width or 0.0) + pads.gap + 2 * self.reach
        first, second = first[near], second[near]
        return first, second, turn[first], turn[second] - turn[first]

    def _too_close(self, x: Floats, y: Floats) -> Floats:
        """Sum of what footprints lack of the gap [m], (k,).

        A footprint that is turned against its neighbour counts as the rectangle around it in the neighbour's frame.
        """
        first, second, turn, turned = self._pairs
        if not first.size:
            return np.zeros(len(x))
        pads = self.plan.target.brief.pads
        length, width = pads.length, pads.width or 0.0
        cos, sin = np.abs(np.cos(turned)), np.abs(np.sin(turned))
        reach_u = 0.5 * (length + length * cos + width * sin)
        reach_v = 0.5 * (width + width * cos + length * sin)
        dx, dy = x[:, second] - x[:, first], y[:, second] - y[:, first]
        u = np.abs(dx * np.cos(turn) + dy * np.sin(turn)) - reach_u
        v = np.abs(dy * np.cos(turn) - dx * np.sin(turn)) - reach_v
        apart = np.where(np.maximum(u, v) < 0, np.maximum(u, v), np.hypot(np.maximum(u, 0.0), np.maximum(v, 0.0)))
        lacking = np.maximum(pads.gap - slack(self.plan.target.brief) - apart, 0.0)
        return np.asarray(lacking.sum(axis=1))
