"""Where a curve of the target is largest, and where it changes sign.

Between two neighbouring breaks a curve is smooth, so its largest values stand at the breaks (on either side) or where
its slope changes sign.  Each smooth stretch is sampled, every change of sign between two samples is closed in on to the
last digit, and the best of all is taken.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.target.curve import Curve, Floats, Side

Function = Callable[[Floats, Side], Floats]

# Samples are shared out so that one table of a million rows costs no more than a single pass over it.
_SAMPLES = 4096
_MOST_PER_STRETCH = 16
_ROUNDS = 100
# Values that agree to this fraction are the same peak; the most inboard station is then named.
_TIE = 1e-12


@dataclass(frozen=True)
class Parts:
    """A load split by the sign of the load: its stretches, root to tip.

    `start`, `end` [m] and `force` [N] are (n,); the force of a stretch is never zero, and the signs of neighbours
    differ.  A point load that stands against its surroundings is a stretch without length.
    """

    start: Floats
    end: Floats
    force: Floats

    def of_sign(self, sign: float) -> Parts:
        """The stretches whose load acts along `sign`."""
        kept = self.force * sign > 0
        return Parts(self.start[kept], self.end[kept], self.force[kept])

    @property
    def gross(self) -> float:
        """Σ |force| [N]: what the load would add up to if all of it acted the same way."""
        return float(np.abs(self.force).sum())


def stretches(breaks: Floats, left: float, right: float, more: Floats) -> Floats:
    """Return the ends (k,) [m] of the smooth stretches of a span: its ends, the breaks on it, and `more` stations."""
    inside = breaks[(breaks > left) & (breaks < right)]
    return np.unique(np.concatenate([[left, right], inside, more]))


def peak(value: Function, slope: Function, edges: Floats) -> tuple[float, float]:
    """Return the largest |value| and its station, over smooth stretches between `edges` (k,) [m].

    `slope` is the derivative of `value` or a multiple of it.  Exact to rounding where the slope changes sign no more
    than once between two samples.
    """
    x = _samples(edges)
    size, steep = np.abs(_values(value, x)), np.abs(_values(slope, x))
    ends = np.abs(value(edges[:1], "inboard"))
    best = max(float(size.max()), float(ends.max()))
    # A bracket can hold more than its ends by at most its width times the slope; twice that, as slopes are samples.
    width = np.diff(x, axis=1)
    reach = np.maximum(size[:, :-1], size[:, 1:]) + 2.0 * width * np.maximum(steep[:, :-1], steep[:, 1:])
    inner = _roots(slope, x, reach >= best)
    stations = np.concatenate([edges[:1], x.ravel(), inner])
    sizes = np.concatenate([ends, size.ravel(), np.abs(value(inner, "outboard"))])
    largest = float(sizes.max())
    return largest, float(stations[sizes >= largest * (1.0 - _TIE)].min())


def crossings(function: Function, edges: Floats) -> Floats:
    """Return the stations (k,) [m], sorted, where a function changes sign inside the stretches between `edges`."""
    return np.unique(_roots(function, _samples(edges)))


def signed_parts(curve: Curve, left: float, right: float) -> Parts:
    """Return the load of a curve between `left` and `right` [m], split where it changes sign."""
    edges = stretches(curve.breaks, left, right, np.empty(0))
    x = _samples(edges)
    ends = np.unique(np.concatenate([edges, _roots(curve.running, x)]))
    running = curve.force_beyond(ends[:-1], "outboard") - curve.force_beyond(ends[1:], "inboard")
    at, force = curve.points
    start, end = np.concatenate([ends[:-1], at]), np.concatenate([ends[1:], at])
    return _merged(start, end, np.concatenate([running, force]))


def _merged(start: Floats, end: Floats, force: Floats) -> Parts:
    """Sort pieces of load root to tip and join neighbours of one sign; what is rounding of the rest is dropped."""
    order = np.lexsort((end, start))
    start, end, force = start[order], end[order], force[order]
    real = np.abs(force) > 1e-14 * np.abs(force).sum()
    start, end, force = start[real], end[real], force[real]
    if not force.size:
        return Parts(start, end, force)
    first = np.flatnonzero(np.append(True, np.sign(force[1:]) != np.sign(force[:-1])))
    return Parts(start[first], np.maximum.reduceat(end, first), np.add.reduceat(force, first))


def _samples(edges: Floats) -> Floats:
    """Stations (stretches, samples) [m] from one end of each stretch to the other."""
    count = int(np.clip(_SAMPLES // max(edges.size - 1, 1), 1, _MOST_PER_STRETCH))
    part = np.arange(count + 1) / count
    x = edges[:-1, None] + np.diff(edges)[:, None] * part
    x[:, -1] = edges[1:]
    return np.asarray(x)


def _values(function: Function, x: Floats) -> Floats:
    """Values at samples (stretches, samples); the ends of a stretch count to the stretch."""
    result = function(x.ravel(), "outboard").reshape(x.shape)
    result[:, -1] = function(x[:, -1], "inboard")
    return result


def _roots(function: Function, x: Floats, wanted: NDArray[np.bool_] | None = None) -> Floats:
    """Stations (k,) where the function changes sign between neighbouring samples of a stretch (in the wanted pairs).

    The straight line through the ends of each bracket gives the next guess (exact at once where the function is
    straight); an end that stays twice counts half, so that both ends close in.
    """
    f = _values(function, x)
    changes = np.sign(f[:, :-1]) * np.sign(f[:, 1:]) < 0
    row, column = np.nonzero(changes if wanted is None else changes & wanted)
    a, b, fa, fb = x[row, column], x[row, column + 1], f[row, column], f[row, column + 1]
    tight = 1e-15 * np.maximum(np.abs(a), np.abs(b))
    stayed = np.zeros(a.size)
    c = a
    for _ in range(_ROUNDS):
        c = np.clip(a + (b - a) * (fa / (fa - fb)), a, b)
        fc = function(c, "outboard")
        if np.all((np.minimum(c - a, b - c) <= tight) | (fc == 0)):
            break
        left = np.sign(fc) == np.sign(fa)
        a, b = np.where(left, c, a), np.where(left, b, c)
        fa = np.where(left, fc, np.where(stayed < 0, fa / 2, fa))
        fb = np.where(left, np.where(stayed > 0, fb / 2, fb), fc)
        stayed = np.where(left, 1.0, -1.0)
    return c
