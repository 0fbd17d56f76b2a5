"""Point loads, and curves as multiples and sums of others."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from rigdesign.target.curve import Curve, Distribution, Floats, Side
from rigdesign.target.internal import sums_at, sums_beyond


@dataclass(frozen=True)
class Points:
    """Point loads: `x` [m] (k,), sorted and distinct, `force` [N] (k,).  See `gathered` for loads in any order."""

    x: Floats
    force: Floats

    @classmethod
    def gathered(cls, x: Floats, force: Floats) -> Points:
        """Return the loads sorted by station, those at one station added up."""
        stations, place = np.unique(x, return_inverse=True)
        sums = np.zeros(stations.size)
        np.add.at(sums, place, force)
        return cls(stations, sums)

    def running(self, x: Floats, side: Side) -> Floats:
        """No running load [N/m]."""
        return np.zeros(x.shape)

    def force_beyond(self, x: Floats, side: Side) -> Floats:
        """Sum of the loads outboard of x [N]; one at x counts on its inboard side."""
        return self._beyond(x, side)[0]

    def moment_beyond(self, x: Floats) -> Floats:
        """First moment about x of the loads outboard of x [N·m]."""
        return self._beyond(x, "outboard")[1]

    def _beyond(self, x: Floats, side: Side) -> tuple[Floats, Floats]:
        if not self.x.size:
            return np.zeros(x.shape), np.zeros(x.shape)
        return sums_beyond(x, self.x, self._sums, side)

    @cached_property
    def _sums(self) -> tuple[Floats, Floats]:
        # taken once: a table of a million loads is asked hundreds of times
        return sums_at(self.x, self.force)

    @property
    def total(self) -> float:
        """Sum of the loads [N]."""
        return float(self.force.sum())

    @property
    def first_moment(self) -> float:
        """First moment of the loads about x = 0 [N·m]."""
        return float((self.force * self.x).sum())

    @property
    def breaks(self) -> Floats:
        """Their stations."""
        return self.x

    @property
    def points(self) -> tuple[Floats, Floats]:
        """The loads themselves."""
        return self.x, self.force


@dataclass(frozen=True)
class Summed:
    """Σ factor · part of quantities spread over stations; without parts it is nothing at all."""

    parts: tuple[Distribution, ...]
    factors: tuple[float, ...]

    def running(self, x: Floats, side: Side) -> Floats:
        """Amount per length; running load w [N/m] of loads."""
        result = np.zeros(x.shape)
        for part, factor in zip(self.parts, self.factors, strict=True):
            result += factor * part.running(x, side)
        return result

    def force_beyond(self, x: Floats, side: Side) -> Floats:
        """Sum of the load outboard of x [N]; a point load at x counts on its inboard side."""
        result = np.zeros(x.shape)
        for part, factor in zip(self.parts, self.factors, strict=True):
            result += factor * part.force_beyond(x, side)
        return result

    @cached_property
    def total(self) -> float:
        """Sum of the load [N]."""
        return float(sum(factor * part.total for part, factor in zip(self.parts, self.factors, strict=True)))

    @cached_property
    def breaks(self) -> Floats:
        """Stations (k,) where w or its slope jumps, of all parts."""
        return np.unique(np.concatenate([np.empty(0), *(part.breaks for part in self.parts)]))

    @cached_property
    def points(self) -> tuple[Floats, Floats]:
        """Point loads of all parts, those at one station added up."""
        pairs = [(part.points, factor) for part, factor in zip(self.parts, self.factors, strict=True)]
        x = np.concatenate([np.empty(0), *(at for (at, _), _ in pairs)])
        force = np.concatenate([np.empty(0), *(factor * own for (_, own), factor in pairs)])
        gathered = Points.gathered(x, force)
        return gathered.x, gathered.force


@dataclass(frozen=True)
class Combined(Summed):
    """Σ factor · curve; without parts it is no load at all.

    Examples
    --------
    >>> one = Points(np.array([1.5]), np.array([200.0]))
    >>> both = Combined((one, one), (1.0, -0.25))
    >>> both.total, both.first_moment
    (150.0, 225.0)
    """

    parts: tuple[Curve, ...]

    def moment_beyond(self, x: Floats) -> Floats:
        """First moment about x of the load outboard of x [N·m]."""
        result = np.zeros(x.shape)
        for part, factor in zip(self.parts, self.factors, strict=True):
            result += factor * part.moment_beyond(x)
        return result

    @cached_property
    def first_moment(self) -> float:
        """First moment of the load about x = 0 [N·m]."""
        return float(sum(factor * part.first_moment for part, factor in zip(self.parts, self.factors, strict=True)))


NO_CURVE = Combined((), ())
"""The curve of no load at all."""
