"""Forces at single places in plan: point loads of a brief, the pads of a rig."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.target.curve import Floats, Side
from rigdesign.target.internal import sums_at
from rigdesign.target.plan_load import ALONG_X, ALONG_Y, Direction, Projected, Projection, Sums
from rigdesign.target.sums import NO_CURVE, Points

if TYPE_CHECKING:
    from shapely import Polygon

# Along a slanted direction a place is x a_x + y a_y, which two roads to it round differently: this part of the largest
# coordinate, and never less than this many metres, is one place.
_SAME_PLACE = 1e-12
_LEAST_CLOSE = 1e-14


def closeness(*coordinates: Floats) -> float:
    """Return the distance [m] within which places of these coordinates [m] count as one."""
    return max(_SAME_PLACE * float(max((np.abs(c).max(initial=0.0) for c in coordinates), default=0.0)), _LEAST_CLOSE)


@dataclass(frozen=True)
class NearPoints(Points):
    """Point loads whose stations are rounded: a cut within `close` [m] of one goes through it."""

    close: float = 0.0

    @classmethod
    def near(cls, s: Floats, force: Floats, close: float) -> NearPoints:
        """Return loads (n,) at s (n,) [m] sorted, those within `close` of their neighbour added up."""
        order = np.argsort(s, kind="stable")
        s, force = s[order], force[order]
        first = np.flatnonzero(np.append(True, np.diff(s) > close)) if s.size else np.empty(0, dtype=np.intp)
        return cls(s[first], np.add.reduceat(force, first) if s.size else force, close)

    @cached_property
    def _summed(self) -> tuple[Floats, Floats]:
        return sums_at(self.x, self.force)

    def _beyond(self, x: Floats, side: Side) -> tuple[Floats, Floats]:
        if not self.x.size:
            return np.zeros(x.shape), np.zeros(x.shape)
        if side == "inboard":
            first = np.searchsorted(self.x, x - self.close, side="left")
        else:
            first = np.searchsorted(self.x, x + self.close, side="right")
        shear, moment = self._summed
        distance = self.x[np.minimum(first, self.x.size - 1)] - x
        return shear[first], moment[first] + shear[first] * distance


@dataclass(frozen=True)
class PlanPoints(Projected):
    """Forces [N] at places x, y [m], all (k,), in any order.

    Examples
    --------
    >>> pads = PlanPoints(np.array([1.0, 2.5]), np.array([0.2, -0.1]), np.array([300.0, 500.0]))
    >>> pads.sums
    Sums(force=800.0, first_x=1550.0, first_y=10.0)
    """

    x: Floats
    y: Floats
    force: Floats

    def _project(self, direction: Direction) -> Projection:
        a_x, a_y = direction
        s, n = self.x * a_x + self.y * a_y, self.y * a_x - self.x * a_y
        if direction in (ALONG_X, ALONG_Y):
            force = Points.gathered(s, self.force)
            turning = Points.gathered(s, self.force * n) if n.any() else NO_CURVE
            return Projection(force, turning)
        close = closeness(self.x, self.y)
        return Projection(NearPoints.near(s, self.force, close), NearPoints.near(s, self.force * n, close))

    @property
    def sums(self) -> Sums:
        """Sum and first moments."""
        force = self.force
        return Sums(float(force.sum()), float((force * self.x).sum()), float((force * self.y).sum()))

    def inside(self, areas: Sequence[Polygon]) -> Floats:
        """Force [N] in each of the areas (k,)."""
        result = np.zeros(len(areas))
        owner = owners(areas, self.x, self.y)
        np.add.at(result, owner[owner >= 0], self.force[owner >= 0])
        return result


def owners(areas: Sequence[Polygon], x: Floats, y: Floats) -> np.ndarray:
    """Return the number of the area that each place x, y (n,) [m] lies in, (n,); −1 for none.

    On a common border the first area has it; a place that rounding has put just beside all areas goes to the first
    one that it touches within rounding.
    """
    import shapely

    owner = np.full(x.size, -1)
    places = shapely.points(x, y)
    close = 1e3 * closeness(x, y)
    for reach in (0.0, close):
        for number, area in enumerate(areas):
            free = np.flatnonzero(owner < 0)
            if not free.size:
                return owner
            shapely.prepare(area)
            hit = shapely.intersects(area, places[free]) if reach == 0 else shapely.dwithin(area, places[free], reach)
            owner[free[hit]] = number
    return owner
