"""Running torques and couples along the axis.

About a unit vector b, a couple C beyond a cut square to a brings

    T = C a·b,    M = C (b_x a_y − b_y a_x)

and no force.  b is the x direction, or the axis' own where the cuts are square to the axis (at a kink, of the outboard
stretch).
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.brief.model import Line
from rigdesign.target.curve import Curve, Distribution, Floats, Side
from rigdesign.target.plan_load import ALONG_X, Direction, Projected, Projection, Sums
from rigdesign.target.plan_points import NearPoints, closeness
from rigdesign.target.plan_stretch import Stretch, stretches_seen
from rigdesign.target.sums import NO_CURVE, Points, Summed

if TYPE_CHECKING:
    from shapely import Polygon


@dataclass(frozen=True)
class SeenTorque:
    """The running part of a torque seen along a direction: its part about that direction, over s.

    `parts` (k,) [1] are how much of the torque of each stretch turns about the direction.
    """

    stretches: tuple[Stretch, ...]
    parts: tuple[float, ...]

    def _sum(self, s: Floats, of: Callable[[Stretch], Floats]) -> Floats:
        result = np.zeros(s.shape)
        for stretch, part in zip(self.stretches, self.parts, strict=True):
            result += part * of(stretch)
        return result

    def running(self, s: Floats, side: Side) -> Floats:
        """Running torque [N]."""
        return self._sum(s, lambda one: one.at(s, side)[0])

    def force_beyond(self, s: Floats, side: Side) -> Floats:
        """Sum of the torque beyond s [N·m]."""
        return self._sum(s, lambda one: one.force_beyond(s, side))

    @property
    def total(self) -> float:
        """Sum of the torque [N·m]."""
        return float(self.force_beyond(np.array([-np.inf]), "inboard")[0])

    @cached_property
    def breaks(self) -> Floats:
        """Where the running torque or its slope jumps, s (k,) [m]."""
        found = [np.empty(0)]
        for one in self.stretches:
            x = one.spread.breaks
            on = x[(x > one.p) & (x < one.q)]
            found += [np.array(one.ends), one.s_p + one.kappa * (on - one.p)]
        return np.unique(np.concatenate(found))

    @property
    def points(self) -> tuple[Floats, Floats]:
        """The stretches that stand on one cut."""
        standing = [(one, part) for one, part in zip(self.stretches, self.parts, strict=True) if one.kappa == 0]
        before = np.array([-np.inf])
        s = np.array([one.s_p for one, _ in standing])
        gathered = Points.gathered(
            s, np.array([part * one.force_beyond(before, "inboard")[0] for one, part in standing])
        )
        return gathered.x, gathered.force


@dataclass(frozen=True)
class BendingOf:
    """Couples that bend the specimen at a cut, as a curve without any force: `couples` over s [N·m]."""

    couples: Distribution

    def running(self, s: Floats, side: Side) -> Floats:
        """No running load [N/m]."""
        return np.zeros(s.shape)

    def force_beyond(self, s: Floats, side: Side) -> Floats:
        """No force [N]."""
        return np.zeros(s.shape)

    def moment_beyond(self, s: Floats) -> Floats:
        """The couples beyond s [N·m]; one at s counts."""
        return self.couples.force_beyond(s, "inboard")

    @property
    def total(self) -> float:
        """No force [N]."""
        return 0.0

    @property
    def first_moment(self) -> float:
        """The couples all together [N·m]."""
        return self.couples.total

    @property
    def breaks(self) -> Floats:
        """Where the couples or their slope jump."""
        return self.couples.breaks

    @property
    def points(self) -> tuple[Floats, Floats]:
        """No point loads."""
        return np.empty(0), np.empty(0)


@dataclass(frozen=True)
class Torque(Projected):
    """A torque over x [N·m/m, N·m] on the axis `line`: about x or, `about_axis`, about each stretch."""

    torque: Distribution
    line: Line
    about_axis: bool

    def _project(self, direction: Direction) -> Projection:
        if direction == ALONG_X and not self.about_axis:
            return Projection(NO_CURVE, self.torque)
        a_x, a_y = direction
        turning = self._part(direction, lambda b_x, b_y: a_x * b_x + a_y * b_y)
        bending = self._part(direction, lambda b_x, b_y: b_x * a_y - b_y * a_x)
        return Projection(BendingOf(bending) if bending.breaks.size else NO_CURVE, turning)

    def _part(self, direction: Direction, of: Callable[[Floats, Floats], Floats]) -> Distribution:
        """The torque times what its direction b gives; nothing where that is zero all along."""
        stretches = stretches_seen(Stretch, self.torque, self.line, direction)
        parts = of(*self._about(np.array([one.p for one in stretches])))
        x, couple = self.torque.points
        standing = couple * of(*self._about(x))
        # the part of a torque about its own direction that rounding leaves is none
        parts = np.where(np.abs(parts) > 1e-15, parts, 0.0)
        if not parts.any() and not standing.any():
            return NO_CURVE
        y = self.line.at(x)
        s = x * direction.a_x + y * direction.a_y
        running = SeenTorque(stretches, tuple(parts.tolist()))
        return Summed((running, NearPoints.near(s, standing, closeness(x, y))), (1.0, 1.0))

    def _about(self, x: Floats) -> tuple[Floats, Floats]:
        """The unit vectors b that the torque at stations x (n,) turns about, at a kink of the outboard stretch."""
        if not self.about_axis:
            return np.ones(x.shape), np.zeros(x.shape)
        d_x, d_y = np.diff(self.line.x), np.diff(self.line.y)
        row = np.clip(np.searchsorted(self.line.x, x, side="right") - 1, 0, d_x.size - 1)
        length = np.hypot(d_x, d_y)
        return (d_x / length)[row], (d_y / length)[row]

    @property
    def sums(self) -> Sums:
        """No force; the first moments of the couples."""
        seen = self.along(ALONG_X)
        return Sums(0.0, seen.force.first_moment, seen.turning.total)

    def inside(self, areas: Sequence[Polygon]) -> Floats:
        """No force in any area (k,)."""
        return np.zeros(len(areas))


@dataclass(frozen=True)
class SweepTorque:
    """What a load on a swept axis twists by itself between two stations, cut square to x, as a running torque [N].

    `load` acts on `axis`; T(x) = ∫ (y(s) − y(x)) dF(s) over s > x, so that −dT/dx = y′(x) V(x).
    """

    load: Curve
    turning: Distribution
    axis: Line
    start: float
    end: float

    def running(self, x: Floats, side: Side) -> Floats:
        """y′ V [N]."""
        row = np.searchsorted(self.axis.x, x, side="left" if side == "inboard" else "right") - 1
        slope = np.diff(self.axis.y) / np.diff(self.axis.x)
        on = (x > self.start) & (x <= self.end) if side == "inboard" else (x >= self.start) & (x < self.end)
        force = self.load.force_beyond(x, side)
        return np.where(on, slope[np.clip(row, 0, slope.size - 1)] * force, 0.0)

    def force_beyond(self, x: Floats, side: Side) -> Floats:
        """T [N·m]; continuous, since a point load on the axis has no arm about it."""
        x = np.clip(x, self.start, self.end)
        own = self.turning.force_beyond(x, "outboard") - self.axis.at(x) * self.load.force_beyond(x, "outboard")
        return np.where(x >= self.end, 0.0, own)

    @property
    def total(self) -> float:
        """T at the inboard end [N·m]."""
        return float(self.force_beyond(np.array([self.start]), "inboard")[0])

    @cached_property
    def breaks(self) -> Floats:
        """Where the running torque or its slope jumps."""
        found = np.concatenate([self.load.breaks, self.axis.x, [self.start, self.end]])
        return np.unique(found[(found >= self.start) & (found <= self.end)])

    @property
    def points(self) -> tuple[Floats, Floats]:
        """No couples."""
        return np.empty(0), np.empty(0)
