"""Many small convex polygons at once, as padded arrays: cutting by half planes, hulls.

A stack is an array (k, v, 2): k polygons, each with its vertices in order and the last one repeated to fill up.  A
polygon may have shrunk to a segment or a point.  Cutting by half planes never loses a polygon to round-off, which the
general overlay of two polygons can.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np
import shapely
from numpy.typing import NDArray

from rigdesign.target.curve import Floats

Indices = NDArray[np.int_]
# A vertex this far outside a half plane (in the caller's units, of order one) still counts as inside.
ROUND_OFF = 1e-11
# Vertices closer than this are one.
SAME = 1e-10


class HalfPlanes(NamedTuple):
    """Half planes normal · p ≤ offset: normals (k, h, 2), offsets (k, h)."""

    normal: Floats
    offset: Floats


def cut(stack: Floats, normal: Floats, offset: Floats) -> tuple[Floats, Indices]:
    """Cut each polygon by one half plane, normal (k, 2) · p ≤ offset (k,).

    Returns the stack (m, v', 2) of those with something left, and their indices (m,).
    """
    outside = stack[..., 0] * normal[:, :1] + stack[..., 1] * normal[:, 1:] - offset[:, None]
    kept = outside <= ROUND_OFF
    counts = kept.sum(axis=1)
    index = np.flatnonzero(counts)
    hurt = np.flatnonzero(counts[index] < stack.shape[1])
    if not hurt.size:
        return stack[index], index
    rows = index[hurt]
    clipped = _clipped(stack[rows], outside[rows], kept[rows])
    if hurt.size == index.size:
        return clipped, index
    stack = joined([stack[index], clipped[:0]])
    stack[hurt, : clipped.shape[1]] = clipped
    stack[hurt, clipped.shape[1] :] = clipped[:, -1:]
    return stack, index


def _clipped(stack: Floats, outside: Floats, kept: NDArray[np.bool_]) -> Floats:
    """The kept part of polygons that a line crosses: kept vertices, and where edges meet the line."""
    after, after_outside, after_kept = np.roll(stack, -1, 1), np.roll(outside, -1, 1), np.roll(kept, -1, 1)
    crossing = (kept != after_kept) & ~_same(stack, after)
    with np.errstate(divide="ignore", invalid="ignore"):
        t = np.where(crossing, outside / (outside - after_outside), 0.0)
    met = stack + np.clip(t, 0.0, 1.0)[..., None] * (after - stack)
    k, v = kept.shape
    points = np.stack([stack, met], axis=2).reshape(k, 2 * v, 2)
    result = packed(points, np.stack([kept, crossing], axis=2).reshape(k, 2 * v))
    twin = _same(result[:, 1:], result[:, :-1])
    return packed(result, np.concatenate([np.ones((k, 1), bool), ~twin], axis=1)) if twin.any() else result


def _same(a: Floats, b: Floats) -> NDArray[np.bool_]:
    apart = np.abs(a - b)
    return np.asarray(np.maximum(apart[..., 0], apart[..., 1]) < SAME)


def packed(points: Floats, valid: NDArray[np.bool_]) -> Floats:
    """Stack of the valid points (k, v) of each row, in order; every row has at least one."""
    count = valid.sum(axis=1)
    most = int(count.max(initial=1))
    order = np.argsort(~valid, axis=1, kind="stable")[:, :most]
    row = np.arange(len(order))[:, None]
    return np.asarray(points[row, order[row, np.minimum(np.arange(most), count[:, None] - 1)]])


def cut_all(stack: Floats, planes: HalfPlanes) -> tuple[Floats, Indices]:
    """Cut each polygon by all its half planes; what is left, and the indices (m,)."""
    index = np.arange(len(stack))
    for h in range(planes.normal.shape[1]):
        if not index.size:
            break
        stack, left = cut(stack, planes.normal[index, h], planes.offset[index, h])
        index = index[left]
    return stack, index


def half_planes(stack: Floats) -> HalfPlanes:
    """Half planes (k, v) whose common part is each polygon; an edge without length gives one that holds everywhere."""
    edge = np.roll(stack, -1, 1) - stack
    cross = stack[..., 0] * np.roll(stack[..., 1], -1, 1) - stack[..., 1] * np.roll(stack[..., 0], -1, 1)
    turn = np.where(cross.sum(axis=1) < 0, -1.0, 1.0)[:, None]
    normal = np.stack([edge[..., 1] * turn, -edge[..., 0] * turn], axis=-1)
    length = np.linalg.norm(normal, axis=-1)
    normal = np.divide(normal, length[..., None], out=np.zeros_like(normal), where=length[..., None] > ROUND_OFF)
    return HalfPlanes(normal, np.einsum("kvi,kvi->kv", normal, stack))


def hulls(points: Floats, owner: Indices) -> tuple[Floats, Indices]:
    """Convex hull of the points (m, 2) of each owner (m,): a stack, and the owners (k,) in rising order."""
    fresh = np.append(True, (owner[1:] != owner[:-1]) | ~_same(points[1:], points[:-1]))
    points, owner = points[fresh], owner[fresh]
    order = np.argsort(owner, kind="stable")
    owners, index = np.unique(owner[order], return_inverse=True)
    found = shapely.convex_hull(shapely.multipoints(points[order], indices=index))
    at, which = shapely.get_coordinates(found, return_index=True)
    counts = np.bincount(which, minlength=owners.size)
    column = np.arange(at.shape[0]) - np.repeat(np.cumsum(counts) - counts, counts)
    stack = np.zeros((owners.size, int(counts.max(initial=1)), 2))
    valid = np.zeros(stack.shape[:2], dtype=bool)
    stack[which, column], valid[which, column] = at, True
    return packed(stack, valid), owners


def joined(stacks: list[Floats]) -> Floats:
    """One stack of several, padded to the longest."""
    most = max(stack.shape[1] for stack in stacks)
    return np.concatenate(
        [np.concatenate([s, np.repeat(s[:, -1:], most - s.shape[1], axis=1)], axis=1) for s in stacks]
    )
