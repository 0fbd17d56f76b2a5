"""The best of all neighbour groupings, by dynamic programming over stretches of consecutive pads.

A stretch is known by its number of pads and its first (or last) pad.  Tables are kept both ways, `by_first` and
`by_last`, because the inboard parts of all stretches of one length are then a plain slice of the one and the outboard
parts a plain slice of the other: a length is done in a few array operations, and nothing is gathered.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.weighing import StockLine
from rigdesign.levers.wiring import Wiring, from_pairs
from rigdesign.target.curve import Floats

TIE = 1e-12
"""Two groupings whose values differ by less than this fraction are equal: rounding must not choose between them."""

Join = Callable[[Floats, Floats, Floats], Floats]


def added(inboard: Floats, outboard: Floats, own: Floats) -> Floats:
    """Value of a tree as the sum of its levers' values."""
    return inboard + outboard + own


def worst(inboard: Floats, outboard: Floats, own: Floats) -> Floats:
    """Value of a tree as the largest of its levers' values."""
    return np.maximum(np.maximum(inboard, outboard), own)


def stacked(inboard: Floats, outboard: Floats, own: Floats) -> Floats:
    """Value of a tree as its number of tiers; `own` is 1 for a lever that is allowed."""
    return np.maximum(inboard, outboard) + own


@dataclass(frozen=True)
class Table:
    """A value for every stretch: `by_first[n, i]` for n pads from pad i on, `by_last[n, j]` for n pads up to pad j."""

    by_first: NDArray[np.float64]
    by_last: NDArray[np.float64]

    @classmethod
    def filled(cls, n_pads: int, value: float) -> Table:
        """A table that holds one value."""
        return cls(np.full((n_pads + 1, n_pads), value), np.full((n_pads + 1, n_pads), value))

    def put(self, length: int, values: Floats) -> None:
        """Set the values (n_pads − length + 1,) of all stretches of one length."""
        self.by_first[length, : values.size] = values
        self.by_last[length, length - 1 :] = values

    def inboard(self, length: int) -> Floats:
        """Values of the inboard parts, 1 to length − 1 pads, of all stretches of a length: (length − 1, stretches)."""
        return self.by_first[1:length, : self.by_first.shape[1] - length + 1]

    def outboard(self, length: int) -> Floats:
        """Values of the matching outboard parts, (length − 1, stretches)."""
        return self.by_last[length - 1 : 0 : -1, length - 1 :]


@dataclass(frozen=True)
class Stretches:
    """Pads in order with positive forces: `x` [m], `force` [N], both (n_pads,)."""

    x: Floats
    force: Floats

    @cached_property
    def load(self) -> Table:
        """Load of every stretch [N]."""
        return self._tables[0]

    @cached_property
    def centroid(self) -> Table:
        """Force centroid of every stretch [m]."""
        return self._tables[1]

    @cached_property
    def _tables(self) -> tuple[Table, Table]:
        n = self.x.size
        load, centroid = Table.filled(n, 0.0), Table.filled(n, 0.0)
        sums, moments = np.zeros(n), np.zeros(n)
        for length in range(1, n + 1):
            # sums of positive numbers about the stretch's own first pad: nothing cancels
            last = slice(length - 1, n)
            first = slice(0, n - length + 1)
            sums = sums[first] + self.force[last]
            moments = moments[first] + self.force[last] * (self.x[last] - self.x[first])
            load.put(length, sums)
            centroid.put(length, self.x[first] + moments / sums)
        return load, centroid

    def arms(self, length: int) -> tuple[Floats, Floats]:
        """Arms a, b [m] of the lever over every split of every stretch of a length: (length − 1, stretches) each."""
        span = self.centroid.outboard(length) - self.centroid.inboard(length)
        outer = self.load.outboard(length) / (self.load.inboard(length) + self.load.outboard(length))
        return span * outer, span * (1.0 - outer)

    def steel(self, length: int) -> Floats:
        """Steel estimate (P·ab/(a+b))^(2/3)·(a+b) of the same levers."""
        span, bending = self._bending(length)
        return np.cbrt(bending * bending) * span

    def mass(self, length: int, stock: StockLine) -> Floats:
        """Mass of the same levers out of a stock, whose moments are in units of this load times metres."""
        span, bending = self._bending(length)
        return np.asarray(stock.line_mass(bending) * (span + 2 * stock.overhang))

    def _bending(self, length: int) -> tuple[Floats, Floats]:
        """Distance between end holes and bending moment at the pivot P·ab/(a+b) of the same levers."""
        span = self.centroid.outboard(length) - self.centroid.inboard(length)
        inner, outer = self.load.inboard(length), self.load.outboard(length)
        return span, span * inner * outer / (inner + outer)


@dataclass(frozen=True)
class Best:
    """The best tree over all pads: its value (infinite where there is none), and the tree."""

    value: float
    wiring: Wiring | None


def best_tree(
    n_pads: int, own: Callable[[int], Floats], join: Join, tiers: int | None = None, alone: float = 0.0
) -> Best:
    """Find the neighbour grouping of least value with at most `tiers` tiers.

    `own(length)` gives the value of the lever over every split of every stretch of that length, (length − 1,
    n_pads − length + 1), infinite where the lever is not allowed; `join` makes the value of a tree from those of its
    halves and of its lever, and `alone` is the value of a single pad.  Among equals the lower tree is taken, then the
    more balanced, then the one whose inboard part has fewer pads.
    """
    layers = 1 if tiers is None else min(tiers, n_pads - 1) + 1
    value = [Table.filled(n_pads, np.inf) for _ in range(layers)]
    height = [Table.filled(n_pads, 0.0) for _ in range(layers)]
    split = np.zeros((layers, n_pads + 1, n_pads), dtype=np.int64)
    for table in value:
        table.put(1, np.full(n_pads, alone))
    for length in range(2, n_pads + 1):
        lever = own(length)
        for layer in range(0 if tiers is None else 1, layers):
            below = layer if tiers is None else layer - 1
            total = join(value[below].inboard(length), value[below].outboard(length), lever)
            tall = 1.0 + np.maximum(height[below].inboard(length), height[below].outboard(length))
            pick = _choose(total, tall)
            column = np.arange(pick.size)
            value[layer].put(length, total[pick, column])
            height[layer].put(length, tall[pick, column])
            split[layer, length, : pick.size] = pick + 1
    least = float(value[-1].by_first[n_pads, 0])
    if not np.isfinite(least):
        return Best(least, None)
    return Best(least, _traced(n_pads, split, tiers is not None))


def _choose(total: Floats, tall: Floats) -> NDArray[np.int64]:
    """Row of the best split in each column, ties settled by height and balance."""
    pick: NDArray[np.int64] = total.argmin(axis=0)
    least = total[pick, np.arange(pick.size)]
    near = total <= least + TIE * np.abs(least)
    tied = np.flatnonzero((np.count_nonzero(near, axis=0) > 1) & np.isfinite(least))
    if tied.size:
        rows = total.shape[0]
        unbalance = np.abs(2 * np.arange(1, rows + 1) - (rows + 1))[:, None]
        key = np.where(near[:, tied], tall[:, tied] * (2 * rows + 2) + unbalance, np.inf)
        pick[tied] = key.argmin(axis=0)
    return pick


def _traced(n_pads: int, split: NDArray[np.int64], tiered: bool) -> Wiring:
    """The tree that the chosen splits make."""

    def halves(group: object) -> tuple[object, object] | int:
        assert isinstance(group, tuple)
        layer, first, length = group
        if length == 1:
            return int(first)
        inner = int(split[layer, length, first])
        below = layer - 1 if tiered else layer
        return (below, first, inner), (below, first + inner, length - inner)

    return from_pairs(n_pads, (len(split) - 1, 0, n_pads), halves)
