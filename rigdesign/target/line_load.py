"""A running load along a line in plan: `plan_stretch` has the formulas."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.brief.model import Line
from rigdesign.target.curve import Curve, Distribution, Floats, Side
from rigdesign.target.plan_load import ALONG_X, Direction, Projected, Projection, Sums
from rigdesign.target.plan_points import PlanPoints, owners
from rigdesign.target.plan_stretch import LoadedStretch, bent, stretches_seen
from rigdesign.target.sums import NO_CURVE, Combined, Points, Summed

if TYPE_CHECKING:
    from shapely import Polygon


@dataclass(frozen=True)
class _Seen:
    """What the force and the turning of a line load share: its stretches, and where w or its slope jumps."""

    stretches: tuple[LoadedStretch, ...]
    x_breaks: Floats

    @cached_property
    def breaks(self) -> Floats:
        """Where w or its slope jumps, s (k,) [m], sorted, ends included."""
        found = [np.array(stretch.ends) for stretch in self.stretches]
        for one in self.stretches:
            on = self.x_breaks[(self.x_breaks > one.p) & (self.x_breaks < one.q)]
            found.append(one.s_p + one.kappa * (on - one.p))
        return np.unique(np.concatenate([np.empty(0), *found]))

    def _standing(self) -> list[LoadedStretch]:
        return [one for one in self.stretches if one.kappa == 0]


@dataclass(frozen=True)
class SeenForce(_Seen):
    """The running part of a line load seen along a direction, as a curve over s."""

    def running(self, s: Floats, side: Side) -> Floats:
        """Running load [N/m]."""
        return np.asarray(sum((one.at(s, side)[0] for one in self.stretches), np.zeros(s.shape)))

    def force_beyond(self, s: Floats, side: Side) -> Floats:
        """Sum of the load beyond s [N]."""
        return np.asarray(sum((one.force_beyond(s, side) for one in self.stretches), np.zeros(s.shape)))

    def moment_beyond(self, s: Floats) -> Floats:
        """First moment about s of the load beyond s [N·m]."""
        return np.asarray(sum((one.moment_beyond(s) for one in self.stretches), np.zeros(s.shape)))

    @property
    def total(self) -> float:
        """Sum of the load [N]."""
        return float(self.force_beyond(self.breaks[:1], "inboard").sum())

    @property
    def first_moment(self) -> float:
        """First moment of the load about s = 0 [N·m]."""
        first = self.breaks[:1]
        return float((self.moment_beyond(first) + first * self.total).sum())

    @property
    def points(self) -> tuple[Floats, Floats]:
        """The stretches that stand on one cut."""
        s = np.array([one.s_p for one in self._standing()])
        force = np.array([float(one.force_beyond(np.array([-np.inf]), "inboard")[0]) for one in self._standing()])
        gathered = Points.gathered(s, force)
        return gathered.x, gathered.force


@dataclass(frozen=True)
class SeenTurning(_Seen):
    """The running part of a line load times n [m], over s."""

    def running(self, s: Floats, side: Side) -> Floats:
        """Running load times n [N]."""
        pairs = [one.at(s, side) for one in self.stretches]
        return np.asarray(sum((w * n for w, n in pairs), np.zeros(s.shape)))

    def force_beyond(self, s: Floats, side: Side) -> Floats:
        """Sum of the load times n beyond s [N·m]."""
        return np.asarray(sum((one.turning_beyond(s, side) for one in self.stretches), np.zeros(s.shape)))

    @property
    def total(self) -> float:
        """Sum of the load times n [N·m]."""
        return float(self.force_beyond(self.breaks[:1], "inboard").sum())

    @property
    def points(self) -> tuple[Floats, Floats]:
        """The stretches that stand on one cut."""
        s = np.array([one.s_p for one in self._standing()])
        turning = np.array([float(one.turning_beyond(np.array([-np.inf]), "inboard")[0]) for one in self._standing()])
        gathered = Points.gathered(s, turning)
        return gathered.x, gathered.force


@dataclass(frozen=True)
class LineLoad(Projected):
    """A load `curve` over x [N/m, N] that acts along a `line` in plan.

    Along x its force is the curve itself; on y = 0 it turns nothing.

    Examples
    --------
    >>> from rigdesign.target.polynomial import Polynomials
    >>> uniform = Polynomials.from_table(np.array([0.0, 2.0]), np.array([300.0, 300.0]))
    >>> LineLoad(uniform, Line(np.array([0.0, 2.0]), np.array([0.0, 0.5]))).sums
    Sums(force=600.0, first_x=600.0, first_y=150.0)
    """

    curve: Curve
    line: Line

    def _project(self, direction: Direction) -> Projection:
        if direction == ALONG_X and not self.line.y.any():
            return Projection(self.curve, NO_CURVE)
        standing = self._standing.along(direction)
        stretches = stretches_seen(LoadedStretch, self.curve, self.line, direction)
        turning: Distribution = SeenTurning(stretches, self.curve.breaks)
        if self._standing.x.size:
            turning = Summed((turning, standing.turning), (1.0, 1.0))
        if direction == ALONG_X:
            return Projection(self.curve, turning)
        force: Curve = SeenForce(stretches, self.curve.breaks)
        if self._standing.x.size:
            force = Combined((force, standing.force), (1.0, 1.0))
        return Projection(force, turning)

    @cached_property
    def _standing(self) -> PlanPoints:
        """The point loads of the curve."""
        at, force = self.curve.points
        return PlanPoints(at, self.line.at(at), force)

    @property
    def sums(self) -> Sums:
        """Sum and first moments."""
        seen = self.along(ALONG_X)
        return Sums(seen.force.total, seen.force.first_moment, seen.turning.total)

    def inside(self, areas: Sequence[Polygon]) -> Floats:
        """Force [N] in each of the areas (k,)."""
        result = self._standing.inside(areas)
        pieces = self._pieces(areas)
        if pieces.size < 2:
            return result
        middle = (pieces[:-1] + pieces[1:]) / 2.0
        owner = owners(areas, middle, self.line.at(middle))
        running = self.curve.force_beyond(pieces, "outboard") - Points(*self.curve.points).force_beyond(
            pieces, "outboard"
        )
        force = -np.diff(running)
        np.add.at(result, owner[owner >= 0], force[owner >= 0])
        return result

    def _pieces(self, areas: Sequence[Polygon]) -> Floats:
        """Stations (k,) [m] between which the line lies in one area, or in none."""
        import shapely

        breaks = self.curve.breaks
        if breaks.size < 2 or breaks[0] == breaks[-1]:
            return np.empty(0)
        x = bent(self.line, float(breaks[0]), float(breaks[-1]))
        line = shapely.linestrings(x, self.line.at(x))
        crossings = shapely.intersection(line, shapely.boundary(np.array(areas, dtype=object)))
        found = shapely.get_coordinates(crossings)[:, 0]
        return np.unique(np.concatenate([x, np.clip(found, x[0], x[-1])]))
