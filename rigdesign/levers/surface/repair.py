"""The best tree whose pieces keep clear of one another within each tier: best first, with the best without as bound.

A tree is built from the top piece down.  The dynamic programme over subsets (subsets.py) tells, for every set of items
that is still to be joined, the least value that any tree over it can have; a piece is known in full, place and tier,
as soon as its set is split.  So the unfinished tree of least bound is taken on first, clashes are counted as pieces
appear, and the first finished tree is the best of all.
"""

from __future__ import annotations

import heapq
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import count

import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.surface.clashes import Shape, clash, meet
from rigdesign.levers.surface.nodes import Node
from rigdesign.levers.surface.subsets import Solved
from rigdesign.target.curve import Floats

CLASH = 1e6
"""Value of a pair of pieces that clash: less than a broken limit, more than all lonely pads."""


@dataclass(frozen=True, slots=True)
class _Open:
    """A set still to be joined: its mask, the layer it may be taken from, and its tier."""

    mask: int
    layer: int
    tier: int


@dataclass(frozen=True, slots=True)
class _Part:
    """An unfinished tree: its bound, sets still to be joined, and the pieces so far as a chain."""

    bound: float
    waiting: tuple[_Open, ...]
    shapes: tuple[tuple[int, Shape], ...]
    splits: tuple[tuple[int, tuple[int, ...]], ...]


@dataclass(frozen=True)
class Repaired:
    """The best tree found as nested items, None where none is below the limit; whether that is proven; the work."""

    nest: object | None
    value: float
    is_proven: bool
    looked_at: int


class Repair:
    """The search for one set of items in the top tier `tier`, beside `rest`, the shapes that stay and their tiers.

    With `links`, the links of pads count as well.
    """

    def __init__(
        self,
        solved: Solved,
        nodes: Sequence[Node],
        tier: int = 1,
        rest: Sequence[tuple[int, Shape]] = (),
        clearance: float = 0.0,
        links: bool = False,
    ) -> None:
        """Take the best trees of all sets of the items that `nodes` stand for."""
        self.solved, self.nodes, self.tier, self.clearance = solved, nodes, tier, clearance
        self.rest, self.links = tuple(rest), links
        self._choices: dict[tuple[int, int], tuple[Floats, NDArray[np.int64]]] = {}
        _, self._x, self._y = solved.problem.items.sums

    def best(self, limit: float, most: int) -> Repaired:
        """Find the best tree with a value below `limit`, looking at no more than `most` unfinished ones."""
        layers, full = self.solved.best.shape
        top = _Open(full - 1, layers - 1, self.tier)
        number = count()
        start = _Part(self.solved.value, (top,), (), ())
        queue: list[tuple[float, int, _Part, int]] = [(start.bound, next(number), start, 0)]
        looked_at = 0
        while queue:
            bound, _, part, rank = heapq.heappop(queue)
            if bound >= limit:
                break
            if not part.waiting:
                return Repaired(self._nest(part), bound, True, looked_at)
            if looked_at >= most:
                return Repaired(None, bound, False, looked_at)
            looked_at += 1
            here = part.waiting[-1]
            values, splits = self._splits(here)
            base = part.bound - float(self.solved.best[here.layer, here.mask])
            if rank + 1 < values.size:
                heapq.heappush(queue, (base + float(values[rank + 1]), next(number), part, rank + 1))
            child = self._child(part, base + float(values[rank]), here, int(splits[rank]))
            heapq.heappush(queue, (child.bound, next(number), child, 0))
        return Repaired(None, limit, True, looked_at)

    def _splits(self, here: _Open) -> tuple[Floats, NDArray[np.int64]]:
        key = here.layer, here.mask
        if key not in self._choices:
            self._choices[key] = self.solved.choices(*key)
        return self._choices[key]

    def _child(self, part: _Part, bound: float, here: _Open, split: int) -> _Part:
        """The tree with one more piece, and with what comes below it where that is known."""
        parts = self.solved.problem.parts(here.mask, split)
        new: list[tuple[int, Shape]] = [
            (here.tier, tuple((float(self._x[mask]), float(self._y[mask])) for mask in parts))
        ]
        waiting = part.waiting[:-1]
        for mask in parts:
            if mask & (mask - 1):
                waiting = (*waiting, _Open(mask, max(0, here.layer - 1), here.tier + 1))
            else:
                node = self.nodes[mask.bit_length() - 1]
                new += self._known_shapes(node, here.tier + 1)
        clashes = self._clashes(part.shapes, new)
        return _Part(bound + CLASH * clashes, waiting, (*part.shapes, *new), (*part.splits, (here.mask, parts)))

    def _known_shapes(self, node: Node, tier: int) -> list[tuple[int, Shape]]:
        """Pieces of an item that hangs in a tier, and links of its pads where they count."""
        shapes = [(at, piece.shape) for piece, at in node.pieces(tier)]
        if self.links:
            pads = [(node, tier)] if not node.kids else []
            pads += [(kid, at + 1) for piece, at in node.pieces(tier) for kid in piece.kids if not kid.kids]
            shapes += [(at, ((pad.x, pad.y),)) for pad, at in pads]
        return shapes

    def _clashes(self, shapes: Sequence[tuple[int, Shape]], new: Sequence[tuple[int, Shape]]) -> int:
        result = 0
        for index, (tier, shape) in enumerate(new):
            beside = [other for at, other in (*shapes, *new[:index], *self.rest) if meet(tier, shape, at, other)]
            result += sum(clash(shape, other, self.clearance) for other in beside)
        return result

    def _nest(self, part: _Part) -> object:
        split = dict(part.splits)

        def nest(mask: int) -> object:
            return mask.bit_length() - 1 if mask & (mask - 1) == 0 else tuple(nest(one) for one in split[mask])

        return nest((self.solved.best.shape[1]) - 1)
