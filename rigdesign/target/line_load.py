"""A running load along a line in plan.

On a straight stretch of the line, x from p to q, the load is seen along a direction at s = s_p + κ (x − p) and
n = n_p + ν (x − p).  With the curve's own force V(x) and first moment M(x) beyond x everything is in closed form:

    ∫ w dx = V(c) − V(q),    ∫ w (x − c) dx = M(c) − M(q) − (q − c) V(q)        over c < x < q,
    ∫ w dx = V(p) − V(c),    ∫ w (c − x) dx = M(c) − M(p) + (c − p) V(p)        over p < x < c,

the first pair for κ > 0, the second for κ < 0, where the line runs against the direction.  Where κ = 0 the whole
stretch stands on one cut and acts as a point load.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.brief.model import Line
from rigdesign.target.curve import Curve, Distribution, Floats, Side
from rigdesign.target.plan_load import ALONG_X, Direction, Projection, Sums
from rigdesign.target.plan_points import PlanPoints, closeness, owners
from rigdesign.target.sums import NO_CURVE, Combined, Points, Summed

if TYPE_CHECKING:
    from shapely import Polygon

# A stretch that turns this little along the direction per length stands on one cut.
_SQUARE = 1e-12


@dataclass(frozen=True)
class Spread:
    """The running part of a curve, its point loads left out."""

    curve: Curve

    @cached_property
    def _points(self) -> Points:
        return Points(*self.curve.points)

    def running(self, x: Floats, side: Side) -> Floats:
        """Running load w [N/m]."""
        return self.curve.running(x, side)

    def force(self, x: Floats) -> Floats:
        """Sum of the running load outboard of x [N]."""
        return self.curve.force_beyond(x, "outboard") - self._points.force_beyond(x, "outboard")

    def moment(self, x: Floats) -> Floats:
        """First moment about x of the running load outboard of x [N·m]."""
        return self.curve.moment_beyond(x) - self._points.moment_beyond(x)


@dataclass(frozen=True)
class Stretch:
    """A straight stretch of a line load seen along a direction: s from `s_p` at x = `p` by `kappa` per x, n likewise.

    `close` [m] is the distance within which a cut goes through a stretch that stands on one cut.
    """

    load: Spread
    p: float
    q: float
    s_p: float
    n_p: float
    kappa: float
    nu: float
    close: float

    @property
    def ends(self) -> tuple[float, float]:
        """Where it begins and ends, s [m], in order."""
        s_q = self.s_p + self.kappa * (self.q - self.p)
        return min(self.s_p, s_q), max(self.s_p, s_q)

    @cached_property
    def _at_ends(self) -> tuple[float, float, float, float]:
        """V and M at p and at q."""
        x = np.array([self.p, self.q])
        force, moment = self.load.force(x), self.load.moment(x)
        return float(force[0]), float(moment[0]), float(force[1]), float(moment[1])

    def sums(self, s: Floats, side: Side) -> tuple[Floats, Floats, Floats]:
        """Return the place x of the cut on the stretch, ∫ w and the integral of w times the distance beyond it."""
        force_p, moment_p, force_q, moment_q = self._at_ends
        if self.kappa == 0:
            beyond = s <= self.s_p + self.close if side == "inboard" else s < self.s_p - self.close
            x = np.full(s.shape, self.p)
            arm = moment_p - moment_q - (self.q - self.p) * force_q
            return x, np.where(beyond, force_p - force_q, 0.0), np.where(beyond, arm, 0.0)
        x = np.clip(self.p + (s - self.s_p) / self.kappa, self.p, self.q)
        force, moment = self.load.force(x), self.load.moment(x)
        if self.kappa > 0:
            return x, force - force_q, moment - moment_q - (self.q - x) * force_q
        return x, force_p - force, moment - moment_p + (x - self.p) * force_p

    def moment_beyond(self, s: Floats) -> Floats:
        """∫ (s' − s) w of what lies beyond s (n,) [N·m]."""
        x, force, arm = self.sums(s, "outboard")
        at = self.s_p + self.kappa * (x - self.p)
        return np.asarray((at - s) * force + abs(self.kappa) * arm)

    def turning_beyond(self, s: Floats, side: Side) -> Floats:
        """∫ n w of what lies beyond s (n,) [N·m]."""
        x, force, arm = self.sums(s, side)
        outward = -1.0 if self.kappa < 0 else 1.0
        return np.asarray((self.n_p + self.nu * (x - self.p)) * force + outward * self.nu * arm)

    def at(self, s: Floats, side: Side) -> tuple[Floats, Floats]:
        """Return w per length of s [N/m] and n [m] at s (n,); w is zero off the stretch and where κ is 0."""
        if self.kappa == 0:
            return np.zeros(s.shape), np.zeros(s.shape)
        low, high = self.ends
        on = (s > low) & (s <= high) if side == "inboard" else (s >= low) & (s < high)
        x = np.clip(self.p + (s - self.s_p) / self.kappa, self.p, self.q)
        turned: Side = "inboard" if side == "outboard" else "outboard"
        w = self.load.running(x, side if self.kappa > 0 else turned)
        return np.where(on, w / abs(self.kappa), 0.0), self.n_p + self.nu * (x - self.p)


@dataclass(frozen=True)
class _Seen:
    """What the force and the turning of a line load share: its stretches, and where w or its slope jumps."""

    stretches: tuple[Stretch, ...]
    x_breaks: Floats

    @cached_property
    def breaks(self) -> Floats:
        """Where w or its slope jumps, s (k,) [m], sorted, ends included."""
        found = [np.array(stretch.ends) for stretch in self.stretches]
        for one in self.stretches:
            on = self.x_breaks[(self.x_breaks > one.p) & (self.x_breaks < one.q)]
            found.append(one.s_p + one.kappa * (on - one.p))
        return np.unique(np.concatenate([np.empty(0), *found]))

    def _standing(self) -> list[Stretch]:
        return [one for one in self.stretches if one.kappa == 0]


@dataclass(frozen=True)
class SeenForce(_Seen):
    """The running part of a line load seen along a direction, as a curve over s."""

    def running(self, s: Floats, side: Side) -> Floats:
        """Running load [N/m]."""
        return np.asarray(sum((one.at(s, side)[0] for one in self.stretches), np.zeros(s.shape)))

    def force_beyond(self, s: Floats, side: Side) -> Floats:
        """Sum of the load beyond s [N]."""
        return np.asarray(sum((one.sums(s, side)[1] for one in self.stretches), np.zeros(s.shape)))

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
        force = np.array([float(one.sums(np.array([-np.inf]), "inboard")[1][0]) for one in self._standing()])
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
class LineLoad:
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

    @cached_property
    def _seen(self) -> dict[Direction, Projection]:
        return {}

    def along(self, direction: Direction) -> Projection:
        """The load seen along a direction."""
        if direction not in self._seen:
            self._seen[direction] = self._project(direction)
        return self._seen[direction]

    def _project(self, direction: Direction) -> Projection:
        if direction == ALONG_X and not self.line.y.any():
            return Projection(self.curve, NO_CURVE)
        standing = self._standing.along(direction)
        stretches = self.stretches(direction)
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

    def stretches(self, direction: Direction) -> tuple[Stretch, ...]:
        """Return the straight stretches that carry load, root to tip, as they are seen along a direction."""
        breaks = self.curve.breaks
        if breaks.size < 2:
            return ()
        kinks = self.line.x[1:-1]
        x = np.concatenate([breaks[:1], kinks[(kinks > breaks[0]) & (kinks < breaks[-1])], breaks[-1:]])
        y = self.line.at(x)
        a_x, a_y = direction
        s, n = x * a_x + y * a_y, y * a_x - x * a_y
        slope = np.diff(y) / np.diff(x)
        kappa, nu = a_x + slope * a_y, slope * a_x - a_y
        kappa[np.abs(kappa) <= _SQUARE * np.hypot(1.0, slope)] = 0.0
        load, close = Spread(self.curve), closeness(x, y)
        return tuple(
            Stretch(load, float(x[k]), float(x[k + 1]), float(s[k]), float(n[k]), float(kappa[k]), float(nu[k]), close)
            for k in range(kappa.size)
        )

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
        force = -np.diff(Spread(self.curve).force(pieces))
        np.add.at(result, owner[owner >= 0], force[owner >= 0])
        return result

    def _pieces(self, areas: Sequence[Polygon]) -> Floats:
        """Stations (k,) [m] between which the line lies in one area, or in none."""
        import shapely

        breaks = self.curve.breaks
        if breaks.size < 2 or breaks[0] == breaks[-1]:
            return np.empty(0)
        kinks = self.line.x[1:-1]
        x = np.concatenate([breaks[:1], kinks[(kinks > breaks[0]) & (kinks < breaks[-1])], breaks[-1:]])
        line = shapely.linestrings(x, self.line.at(x))
        crossings = shapely.intersection(line, shapely.boundary(np.array(areas, dtype=object)))
        found = shapely.get_coordinates(crossings)[:, 0]
        return np.unique(np.concatenate([x, np.clip(found, x[0], x[-1])]))
