"""Distance between convex polytopes, many pairs at once.

The distance between two convex sets is the distance from the origin to their difference.  A point of the difference is
known by its corners: the algorithm of Gilbert, Johnson and Keerthi (IEEE Journal of Robotics and Automation 4, 1988)
keeps at most four of them, takes the point of their simplex that is nearest to the origin, and asks both sets for the
corner that lies farthest against it.

That corner gives a lower bound on the distance, the simplex an upper one, at every step.  A pair is done when the two
agree, so each answer is proven by itself.  What does not close, by rounding on nearly flat sets, is worked out once
more by another road (`slow_distance`).
"""

from __future__ import annotations

from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from rigdesign.target.curve import Floats

CLOSED = 1e-10
"""Upper and lower bound that agree to this [m] are taken for the distance."""
MOST_STEPS = 48
"""Twice what pairs of boxes and cylinders were ever seen to need."""
FLAT = 1e-13
"""An edge shorter than this part of the largest one is none: its subset adds nothing to its smaller ones."""

_SUBSETS = tuple(tuple(combinations(range(4), size)) for size in (1, 2, 3, 4))


def distance(first: Floats, second: Floats) -> float:
    """Return the least distance of the hulls of two sets of corners, (a, 3) and (b, 3) [m]; 0 where they touch or meet.

    Good to 1e-9 m.

    >>> cube = np.array([[x, y, z] for x in (0, 1) for y in (0, 1) for z in (0, 1)], dtype=float)
    >>> round(distance(cube, cube + [3.0, 2.0, 0.5]), 9)
    2.236067977
    """
    return float(distances(first[None], second[None])[0])


def distances(first: Floats, second: Floats, moves: Floats | None = None, beyond: Floats | None = None) -> Floats:
    """Return the least distances of n pairs of hulls [m], (n,).

    Parameters
    ----------
    first, second
        Corners [m], (n, a, 3) and (n, b, 3); a shape with fewer corners repeats one.
    moves
        (n, 2, 3) [m]: the second of each pair may be moved by anything between these two vectors, axis by axis, and
        what counts is where it comes closest.  None: it stays.
    beyond
        (n,) [m]: a pair that is proven farther apart than this is not worked out; its lower bound is returned, which
        is above its `beyond`.  None: all are.
    """
    # near the origin there are more digits to work with
    middle = first.mean(axis=1, keepdims=True)
    first, second = first - middle, second - middle
    limit = np.full(first.shape[0], np.inf) if beyond is None else beyond
    box = np.zeros((first.shape[0], 2, 3)) if moves is None else moves
    return _Pairs(first, second, box, limit).answer()


class _Pairs:
    """The pairs of one call; `left` are those that are not done yet."""

    def __init__(self, first: Floats, second: Floats, moves: Floats, beyond: Floats) -> None:
        self.first, self.second, self.moves, self.beyond = first, second, moves, beyond
        self.found = np.zeros(first.shape[0])
        self.left = np.arange(first.shape[0])
        self.low = np.zeros(first.shape[0])

    def answer(self) -> Floats:
        start = self.first.mean(axis=1) - self.second.mean(axis=1) - self.moves.mean(axis=1)
        corner = self._corner(start)
        simplex = np.zeros((self.left.size, 4, 3))
        simplex[:, 0] = corner
        held = np.zeros((self.left.size, 4), dtype=bool)
        held[:, 0] = True
        near = corner
        for _ in range(MOST_STEPS):
            corner = self._corner(near)
            keep = self._settle(near, corner)
            if not keep.any():
                return self.found
            near, corner, simplex, held = near[keep], corner[keep], simplex[keep], held[keep]
            free = np.argmin(held, axis=1)
            rows = np.arange(free.size)
            simplex[rows, free] = corner
            held[rows, free] = True
            near, held = _nearest_of_simplex(simplex, held)
        for row in self.left:
            self.found[row] = slow_distance(self.first[row], self.second[row], self.moves[row])
        return self.found

    def _corner(self, along: Floats) -> Floats:
        """The corner of each difference that lies farthest against a direction, (n, 3)."""
        first = _farthest(self.first[self.left], -along)
        second = _farthest(self.second[self.left], along)
        low, high = self.moves[self.left, 0], self.moves[self.left, 1]
        return np.asarray(first - second - np.where(along > 0, high, low))

    def _settle(self, near: Floats, corner: Floats) -> NDArray[np.bool_]:
        """Take note of what is done, and return which of those that were left stay."""
        size = np.sqrt(_dot(near, near))
        low = np.maximum(self.low[self.left], _dot(near, corner) / np.maximum(size, 1e-300))
        self.low[self.left] = low
        far = low > self.beyond[self.left]
        done = far | (size - low <= CLOSED)
        self.found[self.left[done]] = np.where(far, low, np.where(size <= CLOSED, 0.0, size))[done]
        self.left = self.left[~done]
        return ~done


def _dot(a: Floats, b: Floats) -> Floats:
    """Products along the last axis, the same to the last bit in every process, which those of a BLAS are not."""
    return np.asarray(a[..., 0] * b[..., 0] + a[..., 1] * b[..., 1] + a[..., 2] * b[..., 2])


def _farthest(corners: Floats, along: Floats) -> Floats:
    """The corner (n, 3) of each shape (n, k, 3) that lies farthest along its direction (n, 3)."""
    best = np.argmax(_dot(corners, along[:, None]), axis=1)
    return np.asarray(corners[np.arange(best.size), best])


def _nearest_of_simplex(points: Floats, held: NDArray[np.bool_]) -> tuple[Floats, NDArray[np.bool_]]:
    """Return the point nearest to the origin of each simplex (n, 4, 3), and which corners (n, 4) carry it.

    Every subset of corners gives a point of its plane; it counts where it lies inside the subset.  A point is always
    put together from weights that are not negative, so it is one of the simplex however badly the subset is shaped.
    """
    n = points.shape[0]
    best = np.full(n, np.inf)
    near = np.zeros((n, 3))
    carries = np.zeros((n, 4), dtype=bool)
    for subsets in _SUBSETS:
        index = np.array(subsets)
        there = held[:, index].all(axis=2)
        if not there.any():
            break
        rows, which = np.nonzero(there)
        chosen = points[rows[:, None], index[which]]
        weights, inside = _weights(chosen)
        at = (weights[:, :, None] * chosen).sum(axis=1)
        size = np.where(inside, _dot(at, at), np.inf)
        table = np.full(there.shape, np.inf)
        table[rows, which] = size
        first = np.argmin(table, axis=1)
        better = table[np.arange(n), first] < best
        place = np.zeros(there.shape, dtype=np.intp)
        place[rows, which] = np.arange(rows.size)
        took = place[better, first[better]]
        best[better], near[better] = size[took], at[took]
        carries[better] = False
        carries[np.flatnonzero(better)[:, None], index[first[better]]] = weights[took] > 0
    return near, carries


def _weights(points: Floats) -> tuple[Floats, NDArray[np.bool_]]:
    """Weights (m, k) of the point nearest to the origin in the plane of k corners (m, k, 3), and whether none is < 0.

    The edges from the first corner are made square to one another (Gram and Schmidt): the digits that are lost go with
    the subset's shape, not with its square.
    """
    m, k = points.shape[:2]
    base = points[:, 0]
    edges = points[:, 1:] - base[:, None]
    largest = np.sqrt(_dot(edges, edges).max(axis=1)) if k > 1 else np.zeros(m)
    square = np.zeros_like(edges)
    upper = np.zeros((m, k - 1, k - 1))
    sound = np.ones(m, dtype=bool)
    aim = np.zeros((m, k - 1))
    for i in range(k - 1):
        rest = edges[:, i]
        for j in range(i):
            upper[:, j, i] = _dot(square[:, j], rest)
            rest = rest - upper[:, j, i, None] * square[:, j]
        size = np.sqrt(_dot(rest, rest))
        sound &= size > FLAT * largest
        upper[:, i, i] = np.where(size > 0, size, 1.0)
        square[:, i] = rest / upper[:, i, i, None]
        aim[:, i] = -_dot(square[:, i], base)
    weights = np.zeros((m, k))
    for i in range(k - 2, -1, -1):
        known = (upper[:, i, i + 1 :] * weights[:, i + 2 :]).sum(axis=1)
        weights[:, i + 1] = (aim[:, i] - known) / upper[:, i, i]
    weights[:, 0] = 1.0 - weights[:, 1:].sum(axis=1)
    return weights, sound & (weights >= 0).all(axis=1)


def slow_distance(first: Floats, second: Floats, moves: Floats) -> float:
    """Return the distance of one pair by non-negative least squares over all corners of the difference.

    `first` (a, 3), `second` (b, 3), `moves` (2, 3) as in `distances`.  The smallest Σ (λ_i p_i)² with Σ λ_i = 1 is
    that of |Pλ|² + (1ᵀλ − 1)² scaled (Wolfe's problem): with x the answer of the latter, λ = x / Σx.
    """
    from scipy.optimize import nnls

    shifts = np.array(np.meshgrid(*moves.T)).reshape(3, -1).T
    moved = (second[:, None] + shifts).reshape(-1, 3)
    points = (first[:, None] - moved).reshape(-1, 3)
    scale = max(float(np.abs(points).max()), 1e-300)
    system = np.vstack([points.T / scale, np.ones(points.shape[0])])
    weights, _ = nnls(system, np.array([0.0, 0.0, 0.0, 1.0]))
    near = (weights / weights.sum()) @ points
    size = float(np.sqrt(near @ near))
    return 0.0 if size <= CLOSED * max(1.0, scale) else size
