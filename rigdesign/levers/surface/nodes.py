"""A tree over the pads as nodes that never change: a tree with another branch shares all its other branches.

Values follow `subsets.py`: steel of all pieces below, `LONELY` for each pad without its partner, `BROKEN` for each
broken limit.  What depends on the place in the tree (tiers, clearance) is no part of a node.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from math import cbrt, hypot

import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.surface.clashes import Shape
from rigdesign.levers.surface.limits import Field, Limits, is_flat
from rigdesign.levers.surface.subsets import BROKEN, LONELY, Items


def pads_of(mask: int) -> list[int]:
    """Pads (from 0) of a mask.

    >>> pads_of(0b1101)
    [0, 2, 3]
    """
    return [pad for pad in range(mask.bit_length()) if mask >> pad & 1]


@dataclass(frozen=True, eq=False, slots=True)
class Node:
    """A pad (no kids) or a piece: the pads under it as a mask, load, force centroid, value and tiers below it."""

    mask: int
    load: float
    x: float
    y: float
    kids: tuple[Node, ...] = ()
    value: float = 0.0
    height: int = 0

    @property
    def pad(self) -> int:
        """Number of the pad, from 0, of a node without kids."""
        return self.mask.bit_length() - 1

    @property
    def shape(self) -> Shape:
        """Outer holes of a piece, before drilling."""
        return tuple((kid.x, kid.y) for kid in self.kids)

    def pieces(self, tier: int = 1) -> Iterator[tuple[Node, int]]:
        """This piece and those below it with their tiers, if this one stands in `tier`; nothing for a pad."""
        waiting = [(self, tier)] if self.kids else []
        while waiting:
            node, tier = waiting.pop()
            yield node, tier
            waiting += [(kid, tier + 1) for kid in node.kids if kid.kids]


@dataclass(frozen=True)
class Maker:
    """Makes nodes within limits."""

    field: Field
    limits: Limits
    partner: NDArray[np.bool_] | None

    def pad(self, index: int) -> Node:
        """The node of a pad."""
        field = self.field
        return Node(1 << index, float(field.share[index]), float(field.x[index]), float(field.y[index]))

    def piece(self, kids: tuple[Node, ...]) -> Node:
        """The piece that joins two or three nodes."""
        load = sum(kid.load for kid in kids)
        x = kids[0].x + sum(kid.load * (kid.x - kids[0].x) for kid in kids) / load
        y = kids[0].y + sum(kid.load * (kid.y - kids[0].y) for kid in kids) / load
        value = sum(kid.value for kid in kids) + self.own_value(kids, x, y)
        mask = 0
        for kid in kids:
            mask |= kid.mask
        return Node(mask, load, x, y, kids, value, 1 + max(kid.height for kid in kids))

    def own_value(self, kids: tuple[Node, ...], x: float, y: float) -> float:
        """Steel of one piece with its pivot at x, y, and what it adds for lonely pads and broken limits."""
        reach = _reach(kids, x, y)
        return self._steel(kids, reach) + BROKEN * self._broken(kids, reach) + LONELY * self._lonely(kids)

    def steel(self, root: Node) -> float:
        """Steel of a tree alone."""
        return sum(self._steel(node.kids, _reach(node.kids, node.x, node.y)) for node, _ in root.pieces())

    def _steel(self, kids: tuple[Node, ...], reach: list[float]) -> float:
        """Steel of one piece."""
        if self.limits.stock is not None and len(kids) == 3:
            load, r = np.array([kid.load for kid in kids]), np.array(reach)
            x, y = np.array([kid.x for kid in kids]), np.array([kid.y for kid in kids])
            return float(self.limits.plate_steel(load, r, x, y))
        pairs = zip(kids, reach, strict=True)
        if self.limits.stock is None:  # the same as `limits.steel`, without arrays: a search asks a million times
            return sum(cbrt((kid.load * r) ** 2) * r for kid, r in pairs)
        return sum(self.limits.stock.side_mass_of(kid.load * r, r) for kid, r in pairs)

    def lonely(self, root: Node) -> int:
        """How many pads of a tree hang without a partner."""
        return sum(self._lonely(node.kids) for node, _ in root.pieces())

    def _broken(self, kids: tuple[Node, ...], reach: list[float]) -> int:
        limits = self.limits
        count = sum((r < limits.shortest) + (r < limits.least) for r in reach)
        if len(kids) == 2:
            count += max(reach) > limits.ratio * min(reach)
        elif bool(is_flat(np.array([kid.x for kid in kids]), np.array([kid.y for kid in kids]))):
            count += 1
        longest = max(hypot(one.x - other.x, one.y - other.y) for one in kids for other in kids)
        return count + (longest > limits.longest)

    def _lonely(self, kids: tuple[Node, ...]) -> int:
        if self.partner is None:
            return 0
        pads = [kid.pad for kid in kids if not kid.kids]
        return sum(not any(self.partner[one, other] for other in pads) for one in pads)

    def nested(self, nest: object, nodes: list[Node]) -> Node:
        """The tree that nested tuples of indices into `nodes` describe."""
        if isinstance(nest, int):
            return nodes[nest]
        assert isinstance(nest, tuple)
        return self.piece(tuple(self.nested(part, nodes) for part in nest))

    def replaced(self, root: Node, branch: Node) -> Node:
        """The tree with another branch over the same pads as `branch`."""
        if root.mask == branch.mask:
            return branch
        kids = tuple(self.replaced(kid, branch) if kid.mask & branch.mask else kid for kid in root.kids)
        return self.piece(kids)


def _reach(kids: tuple[Node, ...], x: float, y: float) -> list[float]:
    """Distances of a piece's ends from its pivot at x, y."""
    return [hypot(kid.x - x, kid.y - y) for kid in kids]


def items_of(nodes: list[Node]) -> Items:
    """Nodes as items for the dynamic programme."""
    x, y, load, value = (np.array([getattr(node, name) for node in nodes]) for name in ("x", "y", "load", "value"))
    height = np.array([node.height for node in nodes])
    return Items(x, y, load, value, height, np.array([not node.kids for node in nodes]))
