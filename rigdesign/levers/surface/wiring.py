"""Who hangs with whom in plan: levers and plates with their ends in the order A, B (, C).

A is the most inboard end: that of least x and, among ends less than a drill step apart along x, that of least y.  A, B
and C run counter-clockwise.  Pieces stand tier by tier from the jack, inboard to outboard inside a tier.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Grouping
from rigdesign.levers.surface.nodes import Maker, Node
from rigdesign.target.curve import Floats

NEAR = 1e-7
"""Pivots whose places agree to this part of the extent are level: rounding must not number the pieces."""


@dataclass(frozen=True)
class Branches:
    """Pieces and what hangs from their ends: a piece by its row, a pad p by −1 − p (rows and pads from 0).

    `ends` holds two names a lever, three a plate; `tier` (n_pieces,) is 1 for the piece on the jack.  Without pieces
    the one pad hangs on the jack itself.
    """

    n_pads: int
    ends: tuple[tuple[int, ...], ...]
    tier: tuple[int, ...]

    @property
    def n_pieces(self) -> int:
        """Number of levers and plates."""
        return len(self.ends)

    @property
    def n_plates(self) -> int:
        """Number of plates."""
        return sum(len(ends) == 3 for ends in self.ends)

    @property
    def depth(self) -> int:
        """Number of tiers."""
        return max(self.tier, default=0)

    @property
    def top(self) -> int:
        """What hangs on the jack."""
        return 0 if self.ends else -1

    def upward(self) -> Iterator[tuple[int, tuple[int, ...]]]:
        """Rows and their ends from the pads to the jack."""
        for row in range(self.n_pieces - 1, -1, -1):
            yield row, self.ends[row]

    def downward(self) -> Iterator[tuple[int, tuple[int, ...]]]:
        """Rows and their ends from the jack to the pads."""
        yield from enumerate(self.ends)

    def pads_under(self, node: int) -> NDArray[np.int64]:
        """Pads (from 0) under a piece's row, or the pad itself for −1 − pad; in order."""
        found, waiting = [], [node]
        while waiting:
            node = waiting.pop()
            if node < 0:
                found.append(-1 - node)
            else:
                waiting.extend(self.ends[node])
        return np.array(sorted(found), dtype=np.int64)


def branches_of(root: Node, n_pads: int, step: float) -> Branches:
    """Number the pieces of a tree; `step` is the drill step in extents."""
    ends: list[tuple[int, ...]] = []
    tiers: list[int] = []
    level, tier = [root] if root.kids else [], 1
    while level:
        level.sort(key=lambda node: (round(node.x / NEAR), node.y))
        kids = [in_frame_order(node.kids, step) for node in level]
        below = [kid for three in kids for kid in three if kid.kids]
        below.sort(key=lambda node: (round(node.x / NEAR), node.y))
        row = {id(node): len(ends) + len(level) + k for k, node in enumerate(below)}
        ends += [tuple(row[id(kid)] if kid.kids else -1 - kid.pad for kid in three) for three in kids]
        tiers += [tier] * len(level)
        level, tier = below, tier + 1
    return Branches(n_pads, tuple(ends), tuple(tiers))


def in_frame_order(kids: tuple[Node, ...], step: float) -> tuple[Node, ...]:
    """Ends of a piece in the order A, B (, C)."""
    inboard = min(kid.x for kid in kids)
    first = min((kid for kid in kids if kid.x <= inboard + step), key=lambda kid: (round(kid.y / NEAR), kid.x))
    others = [kid for kid in kids if kid is not first]
    if len(others) == 2 and _turn(first, *others) < 0:
        others.reverse()
    return (first, *others)


def _turn(p: Node, q: Node, r: Node) -> float:
    return (q.x - p.x) * (r.y - p.y) - (q.y - p.y) * (r.x - p.x)


def node_of_grouping(maker: Maker, grouping: Grouping | int) -> Node:
    """The tree that a grouping describes: nested groups of two or three, by pad number from 1.

    Raises ValueError where a group holds another number, or where the pads are not named once each.
    """
    named = _named(grouping)
    count = maker.field.n_pads
    unknown = sorted(pad for pad in named if not 1 <= pad <= count)
    if unknown:
        raise ValueError(f"pad {unknown[0]} is named, the pads are 1 to {count}")
    if len(named) != count or len(set(named)) != count:
        missing = sorted(set(range(1, count + 1)) - set(named))
        twice = sorted({pad for pad in named if named.count(pad) > 1})
        what = f"named twice: pad {twice[0]}" if twice else f"not named: pad {missing[0]}"
        raise ValueError(f"every pad must be named once, but {what}")

    def node(group: Grouping | int) -> Node:
        if isinstance(group, int):
            return maker.pad(group - 1)
        return maker.piece(tuple(node(part) for part in group))

    return node(grouping)


def _named(grouping: Grouping | int) -> list[int]:
    if isinstance(grouping, int):
        return [grouping]
    if len(grouping) not in (2, 3):
        raise ValueError(f"a lever joins two things and a plate three, and a group holds {len(grouping)}")
    return [pad for part in grouping for pad in _named(part)]


@dataclass(frozen=True)
class Planned:
    """Pieces before drilling, pivots at force centroids: `load` [N], `x`, `y` [m], all (n_pieces,)."""

    load: Floats
    x: Floats
    y: Floats

    @classmethod
    def of(cls, branches: Branches, x: Floats, y: Floats, force: Floats) -> Planned:
        """Pieces over pads at x, y [m] with `force` [N] > 0, all (n_pads,)."""
        size = branches.n_pieces
        planned = cls(np.zeros(size), np.zeros(size), np.zeros(size))
        for row in range(size):
            under = branches.pads_under(row)
            load, near = force[under], under[0]
            total = load.sum()
            planned.load[row] = total
            planned.x[row] = x[near] + (load * (x[under] - x[near])).sum() / total
            planned.y[row] = y[near] + (load * (y[under] - y[near])).sum() / total
        return planned

    def place(self, end: int, x: Floats, y: Floats) -> tuple[float, float]:
        """Place of a piece's pivot or of a pad [m]."""
        return (float(self.x[end]), float(self.y[end])) if end >= 0 else (float(x[-1 - end]), float(y[-1 - end]))
