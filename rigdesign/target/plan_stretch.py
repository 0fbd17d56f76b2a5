"""What is spread along a straight stretch of a line in plan, seen along a direction.

With x from p to q the load is seen along a direction at s = s_p + κ (x − p) and
n = n_p + ν (x − p).  With the curve's own force V(x) and first moment M(x) beyond x everything is in closed form:

    ∫ w dx = V(c) − V(q),    ∫ w (x − c) dx = M(c) − M(q) − (q − c) V(q)        over c < x < q,
    ∫ w dx = V(p) − V(c),    ∫ w (c − x) dx = M(c) − M(p) + (c − p) V(p)        over p < x < c,

the first pair for κ > 0, the second for κ < 0, where the line runs against the direction.  Where κ = 0 the whole
stretch stands on one cut and acts as a point load.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TypeVar

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Line
from rigdesign.target.curve import Curve, Distribution, Floats, Side
from rigdesign.target.plan_load import Direction
from rigdesign.target.plan_points import closeness
from rigdesign.target.sums import Points

# A stretch that turns this little along the direction per length stands on one cut.
_SQUARE = 1e-12


@dataclass(frozen=True)
class Stretch:
    """A straight stretch of something spread along a line, seen along a direction: s from `s_p` at x = `p` by `kappa`
    per x, n from `n_p` by `nu` per x, as far as x = `q`.

    `close` [m] is the distance within which a cut goes through a stretch that stands on one cut.
    """

    spread: Distribution
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
    def _points(self) -> Points:
        return Points(*self.spread.points)

    def _force(self, x: Floats) -> Floats:
        """What is spread outboard of x, single points left out [N]."""
        return self.spread.force_beyond(x, "outboard") - self._points.force_beyond(x, "outboard")

    @cached_property
    def _force_at_ends(self) -> tuple[float, float]:
        at_p, at_q = self._force(np.array([self.p, self.q])).tolist()
        return at_p, at_q

    def _place(self, s: Floats) -> Floats:
        """The x of cuts at s, kept on the stretch; its inboard end where it stands on one cut."""
        if self.kappa == 0:
            return np.full(s.shape, self.p)
        return np.clip(self.p + (s - self.s_p) / self.kappa, self.p, self.q)

    def _stands_beyond(self, s: Floats, side: Side) -> NDArray[np.bool_]:
        """Whether a stretch that stands on one cut lies beyond s."""
        return s <= self.s_p + self.close if side == "inboard" else s < self.s_p - self.close

    def force_beyond(self, s: Floats, side: Side) -> Floats:
        """∫ w of what lies beyond s (n,) [N]."""
        at_p, at_q = self._force_at_ends
        if self.kappa == 0:
            return np.where(self._stands_beyond(s, side), at_p - at_q, 0.0)
        force = self._force(self._place(s))
        return force - at_q if self.kappa > 0 else at_p - force

    def at(self, s: Floats, side: Side) -> tuple[Floats, Floats]:
        """Return w per length of s [N/m] and n [m] at s (n,); w is zero off the stretch and where κ is 0."""
        if self.kappa == 0:
            return np.zeros(s.shape), np.zeros(s.shape)
        low, high = self.ends
        on = (s > low) & (s <= high) if side == "inboard" else (s >= low) & (s < high)
        x = self._place(s)
        turned: Side = "inboard" if side == "outboard" else "outboard"
        w = self.spread.running(x, side if self.kappa > 0 else turned)
        return np.where(on, w / abs(self.kappa), 0.0), self.n_p + self.nu * (x - self.p)


@dataclass(frozen=True)
class LoadedStretch(Stretch):
    """A straight stretch of a line load."""

    spread: Curve

    def _moment(self, x: Floats) -> Floats:
        """First moment about x of the running load outboard of x [N·m]."""
        return self.spread.moment_beyond(x) - self._points.moment_beyond(x)

    @cached_property
    def _moment_at_ends(self) -> tuple[float, float]:
        at_p, at_q = self._moment(np.array([self.p, self.q])).tolist()
        return at_p, at_q

    def _arm(self, s: Floats, side: Side) -> Floats:
        """The integral of w times the distance |x − c| from the cut at x = c, of what lies beyond s [N·m]."""
        (force_p, force_q), (moment_p, moment_q) = self._force_at_ends, self._moment_at_ends
        if self.kappa == 0:
            arm = moment_p - moment_q - (self.q - self.p) * force_q
            return np.where(self._stands_beyond(s, side), arm, 0.0)
        x = self._place(s)
        moment = self._moment(x)
        if self.kappa > 0:
            return np.asarray(moment - moment_q - (self.q - x) * force_q)
        return np.asarray(moment - moment_p + (x - self.p) * force_p)

    def moment_beyond(self, s: Floats) -> Floats:
        """∫ (s' − s) w of what lies beyond s (n,) [N·m]."""
        at = self.s_p + self.kappa * (self._place(s) - self.p)
        force = self.force_beyond(s, "outboard")
        return np.asarray((at - s) * force + abs(self.kappa) * self._arm(s, "outboard"))

    def turning_beyond(self, s: Floats, side: Side) -> Floats:
        """∫ n w of what lies beyond s (n,) [N·m]."""
        outward = -1.0 if self.kappa < 0 else 1.0
        n = self.n_p + self.nu * (self._place(s) - self.p)
        return np.asarray(n * self.force_beyond(s, side) + outward * self.nu * self._arm(s, side))


_S = TypeVar("_S", bound=Stretch)


def stretches_seen(kind: type[_S], spread: Distribution, line: Line, direction: Direction) -> tuple[_S, ...]:
    """Return the straight stretches of a line between the ends of what is spread along it, root to tip."""
    breaks = spread.breaks
    if breaks.size < 2:
        return ()
    x = bent(line, float(breaks[0]), float(breaks[-1]))
    y = line.at(x)
    a_x, a_y = direction
    s, n = x * a_x + y * a_y, y * a_x - x * a_y
    slope = np.diff(y) / np.diff(x)
    kappa, nu = a_x + slope * a_y, slope * a_x - a_y
    kappa[np.abs(kappa) <= _SQUARE * np.hypot(1.0, slope)] = 0.0
    close = closeness(x, y)
    return tuple(
        kind(spread, float(x[k]), float(x[k + 1]), float(s[k]), float(n[k]), float(kappa[k]), float(nu[k]), close)
        for k in range(kappa.size)
    )


def bent(line: Line, start: float, end: float) -> Floats:
    """Return the ends of a stretch of a line and the kinks between them, x (k,) [m]."""
    kinks = line.x[1:-1]
    return np.concatenate([[start], kinks[(kinks > start) & (kinks < end)], [end]])
