"""Triangles with a linear pressure seen along a direction, as polynomials between cuts.

On a cut at s a triangle has a chord, and pressure times chord is quadratic in s between the triangle's corners, times n
cubic.  Between two neighbouring knots, the cuts through all corners, the whole is one polynomial; it is found from its
moments against Legendre's polynomials, each the sum of the triangles' own integrals by Gauss's rule, all exact.
Nothing is extrapolated and nothing cancels, whatever the shape of the triangles.

Where there are too many corners, knots stand closer together than anything changes, and fewer of them will do: the
polynomials then have the exact force and first moments of each strip, and are the nearest ones between its ends.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.target.curve import Floats, Side

# Knots nearer than this part of the load's length are one.
_SAME_KNOT = 1e-11
# All corners are knots up to so many, and up to so many meetings of triangles and strips; else evenly spread ones.
_MOST_KNOTS = 6000
_MOST_MEETINGS = 12_000_000
_SPREAD_KNOTS = (4096, 2048, 1024, 512)
# So many meetings of triangles and strips are worked on at once (about 200 MB).
_AT_ONCE = 400_000
# Legendre's polynomials of 1 − 2u in powers of u, which counts from the outboard end of a strip (0) to its inboard (1)
_IN_POWERS = np.array([[1.0, 0.0, 0.0, 0.0], [1.0, -2.0, 0.0, 0.0], [1.0, -6.0, 6.0, 0.0], [1.0, -12.0, 30.0, -20.0]])


@dataclass(frozen=True)
class Strips:
    """A quantity spread over s: between `knots` (k + 1,) [m] the polynomial Σ a_j u^j, u = (s_right − s)/width.

    `a` is (degree + 1, k).  Force and moment are summed from the outboard end.  `breaks` are where the value or its
    slope jumps, ends included.
    """

    knots: Floats
    a: Floats
    breaks: Floats

    @cached_property
    def _width(self) -> Floats:
        return np.diff(self.knots)

    @cached_property
    def _force_at(self) -> Floats:
        """Sum outboard of each knot (k + 1,)."""
        own = self._width * (self.a / np.arange(1, self.a.shape[0] + 1)[:, None]).sum(axis=0)
        return np.append(np.cumsum(own[::-1])[::-1], 0.0)

    @cached_property
    def _moment_at(self) -> Floats:
        """First moment of what lies outboard of each knot about it (k + 1,)."""
        j = np.arange(self.a.shape[0])[:, None]
        own = self._width**2 * (self.a / ((j + 1) * (j + 2))).sum(axis=0)
        return np.append(np.cumsum((own + self._force_at[1:] * self._width)[::-1])[::-1], 0.0)

    def _strip(self, s: Floats, side: Side) -> tuple[NDArray[np.intp], Floats]:
        found = np.searchsorted(self.knots, s, side="left" if side == "inboard" else "right") - 1
        strip = np.clip(found, 0, self._width.size - 1)
        return strip, (self.knots[strip + 1] - np.clip(s, self.knots[0], self.knots[-1])) / self._width[strip]

    def _sum(self, strip: NDArray[np.intp], u: Floats, divisors: Floats) -> Floats:
        result = np.zeros(u.shape)
        for row, divisor in zip(self.a[::-1], divisors[::-1], strict=True):
            result = result * u + row[strip] / divisor
        return result

    def running(self, s: Floats, side: Side) -> Floats:
        """Amount per length; running load [N/m] of a load."""
        strip, u = self._strip(s, side)
        first, last = self.knots[0], self.knots[-1]
        inside = (s > first) & (s <= last) if side == "inboard" else (s >= first) & (s < last)
        return np.where(inside, self._sum(strip, u, np.ones(self.a.shape[0])), 0.0)

    def force_beyond(self, s: Floats, side: Side) -> Floats:
        """Sum of what lies beyond s [N]."""
        strip, u = self._strip(s, side)
        own = self._width[strip] * u * self._sum(strip, u, np.arange(1.0, self.a.shape[0] + 1))
        return np.asarray(self._force_at[strip + 1] + own)

    def moment_beyond(self, s: Floats) -> Floats:
        """First moment about s of what lies beyond s [N·m]."""
        strip, u = self._strip(s, "outboard")
        j = np.arange(self.a.shape[0])
        t = self._width[strip] * u
        own = t * t * self._sum(strip, u, (j + 1.0) * (j + 2.0))
        moment = self._moment_at[strip + 1] + t * self._force_at[strip + 1] + own
        return np.asarray(moment + self.total * np.maximum(self.knots[0] - s, 0.0))

    @property
    def total(self) -> float:
        """Sum of the whole [N]."""
        return float(self._force_at[0])

    @property
    def first_moment(self) -> float:
        """First moment about s = 0 [N·m]."""
        return float(self._moment_at[0] + self._force_at[0] * self.knots[0])

    @property
    def points(self) -> tuple[Floats, Floats]:
        """Nothing acts at single stations."""
        return np.empty(0), np.empty(0)


@dataclass(frozen=True)
class _Halves:
    """Triangles cut in two by the cut through their middle corner, m in all: from `low` to `high` (m,), s [m].

    Each reaches from one edge to another: n and pressure on both edges at low and at high, (2 edges, 2 ends, m).
    """

    low: Floats
    high: Floats
    n: Floats
    p: Floats
    sign: Floats

    def at(self, which: NDArray[np.intp], s: Floats) -> tuple[Floats, Floats]:
        """Return ∫ p dn and ∫ n p dn over the chords of halves `which` (j,) at s (i, j)."""
        low, high = self.low[which], self.high[which]
        part = (s - low) / (high - low)
        n, p = self.n[:, :, which], self.p[:, :, which]
        n_1, n_2 = (n[k, 0] + part * (n[k, 1] - n[k, 0]) for k in range(2))
        p_1, p_2 = (p[k, 0] + part * (p[k, 1] - p[k, 0]) for k in range(2))
        chord = self.sign[which] * np.abs(n_2 - n_1)
        turning = chord * (n_1 * (2.0 * p_1 + p_2) + n_2 * (p_1 + 2.0 * p_2)) / 6.0
        return chord * (p_1 + p_2) / 2.0, turning


def _halves(s: Floats, n: Floats, p: Floats, sign: Floats) -> _Halves:
    """Triangles with corners s, n [m] and pressure p, all (k, 3), cut in two."""
    order = np.argsort(s, axis=1, kind="stable")
    s, n, p = (np.take_along_axis(values, order, axis=1).T for values in (s, n, p))
    with np.errstate(divide="ignore", invalid="ignore"):
        part = np.where(s[2] > s[0], (s[1] - s[0]) / (s[2] - s[0]), 0.0)
    # the point of the long edge on the cut through the middle corner
    n_long, p_long = n[0] + part * (n[2] - n[0]), p[0] + part * (p[2] - p[0])
    n_halves = [[[n[0], n_long], [n[0], n[1]]], [[n_long, n[2]], [n[1], n[2]]]]
    p_halves = [[[p[0], p_long], [p[0], p[1]]], [[p_long, p[2]], [p[1], p[2]]]]
    halves = _Halves(
        low=np.concatenate([s[0], s[1]]),
        high=np.concatenate([s[1], s[2]]),
        n=np.concatenate(np.array(n_halves), axis=-1),
        p=np.concatenate(np.array(p_halves), axis=-1),
        sign=np.concatenate([sign, sign]),
    )
    real = np.flatnonzero(halves.high > halves.low)
    return _Halves(halves.low[real], halves.high[real], halves.n[:, :, real], halves.p[:, :, real], halves.sign[real])


def strips_of(s: Floats, n: Floats, p: Floats, sign: Floats, breaks: Floats) -> tuple[Strips, Strips]:
    """Return the force and the turning of triangles with a linear pressure.

    Parameters
    ----------
    s, n
        Their corners along and to the left of the direction (k, 3) [m].
    p
        The pressure at the corners (k, 3) [Pa].
    sign
        +1 or −1 of each triangle (k,).
    breaks
        Where the whole load or its slope may jump (m,), ends included.
    """
    halves = _halves(s, n, p, sign)
    knots = _knots(s, halves, breaks)
    first, count = _meetings(halves, knots)
    force, turning = np.zeros((3, knots.size - 1)), np.zeros((4, knots.size - 1))
    ends = np.cumsum(count)
    start = 0
    while start < count.size:
        done = ends[start - 1] if start else 0
        stop = max(int(np.searchsorted(ends, done + _AT_ONCE, side="right")), start + 1)
        which = np.repeat(np.arange(start, stop), count[start:stop])
        strip = first[which] + np.arange(which.size) - np.repeat(ends[start:stop] - count[start:stop] - done,
                                                                 count[start:stop])  # fmt: skip
        _add(halves, knots, which, strip, force, turning)
        start = stop
    return _fitted(knots, force, breaks), _fitted(knots, turning, breaks)


def _knots(s: Floats, halves: _Halves, breaks: Floats) -> Floats:
    """The cuts (k + 1,) between which the load is one polynomial: all corners or, of too many, evenly spread ones."""
    every = _distinct(np.concatenate([s.ravel(), breaks]))
    low, high = every[0], every[-1]
    if every.size <= _MOST_KNOTS and _meetings(halves, every)[1].sum() <= _MOST_MEETINGS:
        return every
    for number in _SPREAD_KNOTS:
        spread = _distinct(np.concatenate([np.linspace(low, high, number + 1), breaks]))
        if _meetings(halves, spread)[1].sum() <= _MOST_MEETINGS:
            break
    return spread


def _distinct(s: Floats) -> Floats:
    """Stations sorted, those within rounding of the one before left out; the last is kept."""
    s = np.unique(s)
    if s.size < 3:
        return s
    first = np.append(True, np.diff(s) > _SAME_KNOT * (s[-1] - s[0]))
    kept = s[first]
    kept[-1] = s[-1]
    return np.asarray(kept)


def _meetings(halves: _Halves, knots: Floats) -> tuple[NDArray[np.intp], NDArray[np.intp]]:
    """The first strip that each half meets (m,), and how many (m,)."""
    last = knots.size - 2
    first = np.clip(np.searchsorted(knots, halves.low, side="right") - 1, 0, last)
    until = np.clip(np.searchsorted(knots, halves.high, side="left") - 1, 0, last)
    return first, np.maximum(until - first + 1, 1)


def _add(
    halves: _Halves, knots: Floats, which: NDArray[np.intp], strip: NDArray[np.intp], force: Floats, turning: Floats
) -> None:
    """Add the Legendre moments of halves `which` (j,) in strips `strip` (j,) to those of the whole, (degree + 1, k)."""
    node, weight = np.polynomial.legendre.leggauss(4)
    low = np.maximum(halves.low[which], knots[strip])
    high = np.maximum(np.minimum(halves.high[which], knots[strip + 1]), low)
    s = (low + high) / 2.0 + node[:, None] * (high - low) / 2.0
    load, turned = halves.at(which, s)
    share = weight[:, None] * (high - low) / 2.0
    load, turned = load * share, turned * share
    xi = 2.0 * (s - knots[strip]) / (knots[strip + 1] - knots[strip]) - 1.0
    legendre = (np.ones(xi.shape), xi, 1.5 * xi**2 - 0.5, 2.5 * xi**3 - 1.5 * xi)
    for k, values in enumerate(legendre):
        if k < 3:
            force[k] += np.bincount(strip, (load * values).sum(axis=0), force.shape[1])
        turning[k] += np.bincount(strip, (turned * values).sum(axis=0), turning.shape[1])


def _fitted(knots: Floats, moments: Floats, breaks: Floats) -> Strips:
    """The polynomials with these Legendre moments (degree + 1, k)."""
    degrees = moments.shape[0]
    factor = (2.0 * np.arange(degrees) + 1.0)[:, None] / np.diff(knots)
    # no BLAS product: how that sums depends on where in memory its arrays happen to lie
    powers = (_IN_POWERS[:degrees, :degrees, None] * (factor * moments)[:, None, :]).sum(axis=0)
    return Strips(knots, powers, breaks)
