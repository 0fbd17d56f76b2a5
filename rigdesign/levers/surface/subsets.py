"""The best of all trees over a dozen items, by dynamic programming over their subsets.

An item is a pad or a subtree that stays as it is.  The load and the force centroid of a subset do not depend on how it
is joined, so the best tree of a subset is the best split into two (a lever) or three (a plate) of the best trees of
its parts.  Both kinds of piece cost the same sum over the links below them,

    Σ (F r)^(2/3) r      F load of the part, r distance of its centroid from the pivot

since for a lever F_A a = F_B b = P ab/(a+b).

The value of a tree is its steel, plus `LONELY` for each pad that hangs without its partner (see `Limits.pair`), plus
`BROKEN` for each broken limit: fewest broken limits first, then fewest lonely pads, then least steel.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.surface.lattice import Masks, Ring, ring, rings, splits_of
from rigdesign.levers.surface.limits import Limits, is_flat
from rigdesign.target.curve import Floats

BROKEN = 1e8
"""Value of a broken limit: more than all clashes (`repair.CLASH`)."""

LONELY = 100.0
"""Value of a lonely pad: more than all steel, which is below 10 in shares and extents wherever trees are searched."""

TIE = 1e-12
"""Two trees whose values differ by less than this fraction are equal: rounding must not choose between them."""

BLOCK = 500_000
"""Most splits that are looked at at once."""

NOTHING = -1e18
"""Value of what needs nothing of a limit, where the value of a tree is what it needs most of."""


@dataclass(frozen=True)
class Items:
    """What is to be joined: places `x`, `y`, `load`, all (n,); `value` and `height` (tiers) of what hangs below each.

    `is_pad` tells which are single pads.
    """

    x: Floats
    y: Floats
    load: Floats
    value: Floats
    height: NDArray[np.int64]
    is_pad: NDArray[np.bool_]

    @property
    def count(self) -> int:
        """Number of items."""
        return int(self.x.size)

    @cached_property
    def sums(self) -> tuple[Floats, Floats, Floats]:
        """Load and force centroid x, y of every subset, (2^n,) each; those of no item are zero."""
        load, first_x, first_y = (np.zeros(1) for _ in range(3))
        # about the first item: sums of places far from the origin would cost digits
        for x, y, f in zip(self.x - self.x[0], self.y - self.y[0], self.load, strict=True):
            load = np.concatenate([load, load + f])
            first_x, first_y = np.concatenate([first_x, first_x + f * x]), np.concatenate([first_y, first_y + f * y])
        safe = np.where(load > 0, load, 1.0)
        x, y = self.x[0] + first_x / safe, self.y[0] + first_y / safe
        bits = 1 << np.arange(self.count)
        x[bits], y[bits] = self.x, self.y
        return load, x, y


@dataclass(frozen=True)
class Rule:
    """How a tree gets its value.

    `link(load, r)` gives each link's part, any shape; `lever(ratio, length)` and `plate(length)` what a piece adds by
    itself; `whole_plate(load, r, x, y)` takes the place of a plate's links where it is no sum of parts; `join` (np.add
    or np.maximum) makes one value of all.
    """

    link: Callable[[Floats, Floats], Floats]
    lever: Callable[[Floats, Floats], Floats] | None
    plate: Callable[[Floats], Floats] | None
    join: np.ufunc
    whole_plate: Callable[[Floats, Floats, Floats, Floats], Floats] | None = None


def steel_rule(limits: Limits) -> Rule:
    """Steel, and what broken limits add to it."""

    def link(load: Floats, r: Floats) -> Floats:
        steel = limits.steel(load, r)
        return np.asarray(steel + BROKEN * (r < limits.shortest) if limits.shortest > 0 else steel)

    def lever(ratio: Floats, length: Floats) -> Floats:
        return np.where(ratio > limits.ratio, BROKEN, 0.0) + np.where(length > limits.longest, BROKEN, 0.0)

    def plate(length: Floats) -> Floats:
        return np.where(length > limits.longest, BROKEN, 0.0)

    whole = limits.plate_steel if limits.stock is not None else None
    return Rule(link, lever, plate if np.isfinite(limits.longest) else None, np.add, whole)


@dataclass(frozen=True)
class Solved:
    """The best trees of all subsets: `best` (layers, 2^n) values and `pick` (layers, 2^n) their splits.

    With a limit on tiers, layer t holds the best trees of at most t tiers; without, there is one layer.
    """

    problem: Problem
    best: Floats
    pick: NDArray[np.int64]

    @property
    def value(self) -> float:
        """Value of the best tree over all items; infinite where there is none at all."""
        return float(self.best[-1, -1])

    @property
    def nest(self) -> object:
        """The best tree over all items, as nested tuples of item indices."""
        return self.nest_of(len(self.best) - 1, self.best.shape[1] - 1)

    def nest_of(self, layer: int, mask: int) -> object:
        """The best tree of a subset in a layer."""
        if mask & (mask - 1) == 0:
            return mask.bit_length() - 1
        below = max(0, layer - 1)
        return tuple(self.nest_of(below, part) for part in self.problem.parts(mask, int(self.pick[layer, mask])))

    def choices(self, layer: int, mask: int) -> tuple[Floats, NDArray[np.int64]]:
        """Values of all possible splits of a subset, the best first, and the splits."""
        size = mask.bit_count()
        whole = ring(self.problem.items.count, size)
        row = np.flatnonzero(whole.masks == mask)
        values = self.problem.values(whole, row, self.best[max(0, layer - 1)])[0]
        order = np.argsort(values, kind="stable")
        order = order[: np.count_nonzero(np.isfinite(values))]
        return values[order], order


@dataclass(frozen=True)
class Problem:
    """Items to be joined by a rule within limits; `partner` (n, n) tells which pads are each other's partners."""

    items: Items
    limits: Limits
    rule: Rule
    partner: NDArray[np.bool_] | None = None
    noise: Floats | None = None

    def solve(self, tiers: int | None) -> Solved:
        """Find the best tree of every subset, with at most `tiers` tiers above the pads."""
        items = self.items
        layers = 1 if tiers is None else max(0, tiers) + 1
        best = np.full((layers, 1 << items.count), np.inf)
        pick = np.zeros(best.shape, dtype=np.int64)
        for layer in range(layers):
            fits = items.height <= layer if tiers is not None else np.ones(items.count, bool)
            best[layer, 1 << np.arange(items.count)] = np.where(fits, items.value, np.inf)
        for subsets in rings(items.count):
            for rows in self._blocks(subsets):
                own, masks = self._own(subsets, rows), subsets.masks[rows]
                for layer in range(0 if tiers is None else 1, layers):
                    values = self._joined(subsets, rows, best[max(0, layer - 1)], own)
                    least = values.min(axis=1)
                    first = (values <= (least + TIE * np.abs(least))[:, None]).argmax(axis=1)
                    best[layer, masks], pick[layer, masks] = values[np.arange(rows.size), first], first
        return Solved(self, best, pick)

    def _blocks(self, subsets: Ring) -> list[Masks]:
        """The subsets of a ring, so many at a time that memory stays small."""
        table = splits_of(subsets.size)
        splits = len(table.pairs) + (len(table.triples) if self.limits.plates else 0)
        count = subsets.masks.size
        block = max(1, BLOCK // splits)
        return [np.arange(start, min(start + block, count)) for start in range(0, count, block)]

    def values(self, subsets: Ring, rows: Masks, below: Floats) -> Floats:
        """Values of all splits of some subsets of a ring, levers first: (n_rows, n_splits); infinite: not possible."""
        return self._joined(subsets, rows, below, self._own(subsets, rows))

    def parts(self, mask: int, split: int) -> tuple[int, ...]:
        """Masks of the parts of a subset in one of its splits."""
        items = [bit for bit in range(mask.bit_length()) if mask >> bit & 1]
        table = splits_of(len(items))
        count = len(table.pairs)
        local = table.pairs[split] if split < count else table.triples[split - count]
        return tuple(sum(1 << item for j, item in enumerate(items) if int(part) >> j & 1) for part in local)

    def _joined(self, subsets: Ring, rows: Masks, below: Floats, own: tuple[Floats, Floats]) -> Floats:
        """Values of all splits from the best of the parts, (n_rows, n_splits)."""
        link, piece = own
        join = self.rule.join
        table = splits_of(subsets.size)
        part = join(below[subsets.spread[rows]], link)
        values = join(part[:, table.pairs[:, 0]], part[:, table.pairs[:, 1]])
        if self.limits.plates and len(table.triples):
            three = join(join(part[:, table.triples[:, 0]], part[:, table.triples[:, 1]]), part[:, table.triples[:, 2]])
            values = np.concatenate([values, three], axis=1)
        return np.asarray(join(values, piece))

    def _own(self, subsets: Ring, rows: Masks) -> tuple[Floats, Floats]:
        """What links (n_rows, 2^size) and pieces (n_rows, n_splits) add; infinite where they are not possible."""
        load, x, y = (values[subsets.spread[rows]] for values in self.items.sums)
        r = np.hypot(x - x[:, -1:], y - y[:, -1:])
        link = np.where(r < self.limits.least, np.inf, self.rule.link(load, r))
        if self.noise is not None:
            link = link * self.noise[subsets.spread[rows]]
        table = splits_of(subsets.size)
        a, b = r[:, table.pairs[:, 0]], r[:, table.pairs[:, 1]]
        zero = NOTHING if self.rule.join is np.maximum else 0.0
        piece = np.full(a.shape, zero)
        if self.rule.lever is not None:
            with np.errstate(divide="ignore", invalid="ignore"):
                piece = self.rule.lever(np.maximum(a, b) / np.minimum(a, b), a + b)
        if self.limits.plates and len(table.triples):
            x3, y3 = x[:, table.triples], y[:, table.triples]
            plate = np.where(is_flat(x3, y3), np.inf, zero)
            if self.rule.plate is not None:
                plate = self.rule.join(plate, self.rule.plate(_longest_side(x3, y3)))
            if self.rule.whole_plate is not None:
                load3, r3 = load[:, table.triples], r[:, table.triples]
                # what the links of a lever would weigh is taken off again, and only that
                parts = self.limits.steel(load3, r3).sum(axis=-1)
                plate = plate + self.rule.whole_plate(load3, r3, x3, y3) - parts
            piece = np.concatenate([piece, plate], axis=1)
        if self.partner is not None:
            piece = piece + LONELY * self._lonely(subsets, rows)
        return link, piece

    def _lonely(self, subsets: Ring, rows: Masks) -> Floats:
        """How many pads each split leaves on a piece without a partner, (n_rows, n_splits)."""
        assert self.partner is not None
        count, table = self.items.count, splits_of(subsets.size)
        singles = [table.single_pairs, table.single_triples] if self.limits.plates else [table.single_pairs]
        # the item beyond the last stands for "no pad": it is alone with nobody and minds nothing
        partner = np.zeros((count + 1, count + 1), bool)
        partner[:-1, :-1] = self.partner
        is_pad = np.append(self.items.is_pad, False)
        result = []
        for split, position in singles:
            item = np.where(position >= 0, subsets.members[rows][:, position], count)
            lonely = np.zeros(item.shape[:2])
            for one in range(position.shape[1]):
                has = np.zeros(item.shape[:2], bool)
                for other in range(position.shape[1]):
                    if other != one:
                        has |= partner[item[:, :, one], item[:, :, other]]
                lonely += is_pad[item[:, :, one]] & ~has
            values = np.zeros((len(rows), split.size))
            values[:, split] = lonely
            result.append(values)
        return np.concatenate(result, axis=1)


def _longest_side(x: Floats, y: Floats) -> Floats:
    """Longest side of triangles with corners x, y (..., 3); (...)."""
    return np.asarray(np.hypot(x - np.roll(x, 1, axis=-1), y - np.roll(y, 1, axis=-1)).max(axis=-1))


def partners(x: Floats, y: Floats, pair: str) -> NDArray[np.bool_] | None:
    """Which pads are partners, (n, n), for a `pair` of the brief; None for "any".

    "across first": those that lie no less across from one another than along, |dy| ≥ |dx|; "along first": |dx| ≥ |dy|.
    """
    if pair == "any":
        return None
    along, across = np.abs(x[:, None] - x), np.abs(y[:, None] - y)
    result = across >= along if pair == "across first" else along >= across
    np.fill_diagonal(result, False)
    return np.asarray(result)
