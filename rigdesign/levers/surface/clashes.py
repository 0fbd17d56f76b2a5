"""Which pieces cross or come too close in plan: levers as lines between their outer holes, plates as triangles.

Pieces stand in one tier and meet those of the same tier.  Where links count as well, a pad that hangs in a tier above
the lowest has a link that runs down through all tiers below: a point, which meets the pieces of every one of them.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache
from math import hypot

import numpy as np
from numpy.typing import NDArray

Point = tuple[float, float]
Shape = tuple[Point, ...]

TOUCH = 1e-9
"""Distances that agree to this (in extents, or in m) are equal."""


def clash(one: Shape, other: Shape, clearance: float) -> bool:
    """Whether two shapes cross, touch, or come closer to one another than the clearance.

    >>> clash(((0, 0), (1, 0)), ((0, 0.2), (1, 0.2)), 0.1), clash(((0, 0), (1, 0)), ((0.5, -1), (0.5, 1)), 0.0)
    (False, True)
    """
    reach = max(clearance - TOUCH, TOUCH)
    for axis in (0, 1):
        if min(p[axis] for p in one) - max(p[axis] for p in other) > reach:
            return False
        if min(p[axis] for p in other) - max(p[axis] for p in one) > reach:
            return False
    return _distance(one, other) < reach


@lru_cache(maxsize=200_000)
def _distance(one: Shape, other: Shape) -> float:
    """Distance in plan of two lines or triangles; 0 where they share a place."""
    if _holds(one, other[0]) or _holds(other, one[0]):
        return 0.0
    return min(_between(p, q, r, s) for p, q in _sides(one) for r, s in _sides(other))


def _sides(shape: Shape) -> list[tuple[Point, Point]]:
    if len(shape) == 2:
        return [(shape[0], shape[1])]
    return [(shape[k - 1], shape[k]) for k in range(len(shape))]


def _holds(shape: Shape, point: Point) -> bool:
    """Whether a point lies inside a triangle."""
    if len(shape) == 2:
        return False
    turns = [_turn(p, q, point) for p, q in _sides(shape)]
    return min(turns) > 0 or max(turns) < 0


def _turn(p: Point, q: Point, r: Point) -> float:
    """Twice the area of a triangle, positive where r lies to the left of the line from p to q."""
    return (q[0] - p[0]) * (r[1] - p[1]) - (q[1] - p[1]) * (r[0] - p[0])


def _between(p: Point, q: Point, r: Point, s: Point) -> float:
    """Distance of the lines from p to q and from r to s."""
    if _turn(p, q, r) * _turn(p, q, s) < 0 and _turn(r, s, p) * _turn(r, s, q) < 0:
        return 0.0
    return min(_away(p, r, s), _away(q, r, s), _away(r, p, q), _away(s, p, q))


def _away(point: Point, start: Point, end: Point) -> float:
    """Distance of a point from a line between two points."""
    along = (end[0] - start[0], end[1] - start[1])
    size = along[0] ** 2 + along[1] ** 2
    part = ((point[0] - start[0]) * along[0] + (point[1] - start[1]) * along[1]) / size if size > 0 else 0.0
    part = min(1.0, max(0.0, part))
    return hypot(point[0] - start[0] - part * along[0], point[1] - start[1] - part * along[1])


def meet(tier: int, shape: Shape, other_tier: int, other: Shape) -> bool:
    """Whether two shapes stand in one tier; a point stands in its tier and in all below, and minds no other point.

    >>> meet(2, ((0, 0),), 4, ((0, 0), (1, 0))), meet(2, ((0, 0), (1, 0)), 4, ((0, 0), (1, 0)))
    (True, False)
    """
    if len(shape) == 1:
        return len(other) > 1 and other_tier >= tier
    return tier >= other_tier if len(other) == 1 else tier == other_tier


def clashing_in_tiers(tiers: Sequence[int], shapes: Sequence[Shape], clearance: float) -> list[tuple[int, int]]:
    """Pairs of shapes, each in its tier, that meet and clash, in order; see `meet`."""
    tier, point = np.array(tiers), np.array([len(shape) == 1 for shape in shapes], dtype=bool)
    through = point[:, None] & ~point & (tier >= tier[:, None])
    same = ~point[:, None] & ~point & (tier == tier[:, None])
    return _pairs(shapes, clearance, through | through.T | same)


def clashing(shapes: Sequence[Shape], clearance: float) -> list[tuple[int, int]]:
    """Pairs of shapes of one tier that clash, in order."""
    return _pairs(shapes, clearance, np.ones((len(shapes), len(shapes)), dtype=bool))


def _pairs(shapes: Sequence[Shape], clearance: float, meeting: NDArray[np.bool_]) -> list[tuple[int, int]]:
    if len(shapes) < 2:
        return []
    low = np.array([(min(p[0] for p in shape), min(p[1] for p in shape)) for shape in shapes])
    high = np.array([(max(p[0] for p in shape), max(p[1] for p in shape)) for shape in shapes])
    reach = max(clearance, TOUCH)
    near = ((low[:, None] - high[None] <= reach).all(axis=2)) & ((low[None] - high[:, None] <= reach).all(axis=2))
    pairs = np.argwhere(np.triu(near & meeting, 1)).tolist()
    return [(i, j) for i, j in pairs if clash(shapes[i], shapes[j], clearance)]
