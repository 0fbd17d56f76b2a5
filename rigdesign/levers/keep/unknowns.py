"""The unknowns of the programme over pivots, and its constraints as rows low ≤ a · unknowns ≤ high.

In this order: pad forces over their mean; for every pivot a whole number for each side to which it may be moved, and
one for a piece made new; the band use; and the misfits between a piece and what hangs from it, which make links lean.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import NamedTuple

import numpy as np

from rigdesign.levers.keep.pivots import Pivot
from rigdesign.target.curve import Floats

SIDES = 8
"""Directions in which a plate's pivot may leave its old hole.  A distance is asked of one of them, less what the
direction in between loses, so that nothing is excluded that keeps it."""


class Rows(NamedTuple):
    """Rows a (k, n_columns) with low ≤ a · unknowns ≤ high, (k,) each."""

    a: Floats
    low: Floats
    high: Floats


def stacked(parts: list[Rows]) -> Rows:
    """All rows in one."""
    return Rows(*(np.concatenate([part[i] for part in parts]) for i in range(3)))


@dataclass(frozen=True)
class Unknowns:
    """The unknowns over some pivots and pads, with so many misfits."""

    pivots: tuple[Pivot, ...]
    n_pads: int
    n_misfits: int

    @cached_property
    def sides(self) -> tuple[Floats, ...]:
        """Directions (k, 2) in which each pivot may move."""
        turn = 2 * np.pi * np.arange(SIDES) / SIDES
        plate = np.stack([np.cos(turn), np.sin(turn)], axis=1)
        lever = np.array([[1.0, 0.0], [-1.0, 0.0]])
        return tuple(lever if pivot.is_lever else plate for pivot in self.pivots)

    @cached_property
    def starts(self) -> list[int]:
        """Column of each pivot's first side, and the column of the band use; a pivot's last column is a new piece."""
        first, result = self.n_pads, []
        for sides in self.sides:
            result.append(first)
            first += len(sides) + 1
        return [*result, first]

    @property
    def use(self) -> int:
        """Column of the band use."""
        return self.starts[-1]

    @property
    def states(self) -> slice:
        """Columns of whole numbers."""
        return slice(self.n_pads, self.use)

    @property
    def count(self) -> int:
        """Number of unknowns."""
        return self.use + 1 + self.n_misfits

    @property
    def price(self) -> int:
        """What a piece made new costs, in moved pivots: more than all of them."""
        return len(self.pivots) + 1

    @cached_property
    def cost(self) -> Floats:
        """Coefficients (count,) of the cost: moved pivots, and new pieces at their price."""
        result = np.zeros(self.count)
        result[self.states] = 1.0
        result[[end - 1 for end in self.starts[1:]]] = self.price
        return result

    def chosen(self, x: Floats) -> tuple[tuple[int, ...], tuple[int, ...]]:
        """Pieces, by row, whose pivots a solution moves with the distance kept, and by less."""
        moved, near = [], []
        for k, start in enumerate(self.starts[:-1]):
            end = self.starts[k + 1] - 1
            if x[start:end].sum() > 0.5:
                moved.append(k)
            elif x[end] > 0.5:
                near.append(k)
        return tuple(moved), tuple(near)

    def total(self) -> Rows:
        """The forces have their mean."""
        a = np.zeros((1, self.count))
        a[0, : self.n_pads] = 1.0 / self.n_pads
        return Rows(a, np.ones(1), np.ones(1))

    def bands(self, matrix: Floats, constant: Floats) -> Rows:
        """Errors over their bands, matrix · forces − constant, keep within the band use."""
        a = np.zeros((constant.size, self.count))
        a[:, : self.n_pads], a[:, self.use] = matrix, -1.0
        return Rows(a, np.full(constant.size, -np.inf), constant)

    def at_most(self, cost: float) -> Rows:
        """The cost is limited."""
        return Rows(self.cost[None], np.full(1, -np.inf), np.full(1, cost + 0.5))

    def ranges(self) -> Rows:
        """Levers' pivots stay within what the limits of levers leave."""
        rows = []
        for pivot in self.pivots:
            if pivot.is_lever:
                moments, load = own_rows(pivot)
                for sign, end in ((1.0, pivot.high), (-1.0, pivot.low)):
                    row = np.zeros(self.count)
                    row[: self.n_pads] = sign * (moments[0] - end / pivot.size * load)
                    rows.append(row)
        a = np.array(rows).reshape(-1, self.count)
        return Rows(a, np.full(len(a), -np.inf), np.zeros(len(a)))

    def misfits(self, rows: Floats) -> Rows:
        """Misfits are at least the sizes of rows (n_misfits, n_pads) · forces."""
        a = np.zeros((2 * len(rows), self.count))
        a[:, : self.n_pads] = np.concatenate([rows, -rows])
        a[:, self.use + 1 :] = -np.tile(np.eye(self.n_misfits), (2, 1))
        return Rows(a, np.full(len(a), -np.inf), np.zeros(len(a)))

    def balances(self, reaches: Floats) -> Rows:
        """Unmoved pivots are in balance, moved ones keep the distance on the side that is chosen.

        `reaches` (n_pieces, 5) are the largest moments +u, −u, +v, −v and the largest load of each pivot.
        """
        return stacked([self._balance(k, pivot, reach) for k, (pivot, reach) in enumerate(self._each(reaches))])

    def _each(self, reaches: Floats) -> list[tuple[Pivot, Floats]]:
        return list(zip(self.pivots, reaches, strict=True))

    def _balance(self, k: int, pivot: Pivot, reach: Floats) -> Rows:
        moments, load = own_rows(pivot)
        start, end, sides, n = self.starts[k], self.starts[k + 1] - 1, self.sides[k], self.n_pads
        rows, high = [], []
        for axis in (0,) if pivot.is_lever else (0, 1):
            for sign, most in ((1.0, reach[2 * axis]), (-1.0, reach[2 * axis + 1])):
                row = np.zeros(self.count)
                row[:n] = sign * moments[axis]
                # a lever's pivot that moves to one side has no moment to the other
                row[start:end] = np.where(sign * sides[:, 0] > 0, -most, 0.0) if pivot.is_lever else -most
                row[end] = -most
                rows.append(row)
                high.append(0.0)
        distance = pivot.distance / pivot.size * (1.0 if pivot.is_lever else float(np.cos(np.pi / SIDES)))
        for index, side in enumerate(sides):
            against = np.maximum(-side, 0.0) @ reach[[0, 2]] + np.maximum(side, 0.0) @ reach[[1, 3]]
            row = np.zeros(self.count)
            row[:n] = distance * load - side @ moments
            row[start + index] = distance * reach[4] + against
            rows.append(row)
            high.append(distance * reach[4] + against)
        one = np.zeros(self.count)
        one[start : end + 1] = 1.0
        return Rows(np.array([*rows, one]), np.full(len(rows) + 1, -np.inf), np.array([*high, 1.0]))


def own_rows(pivot: Pivot) -> tuple[Floats, Floats]:
    """Rows of a pivot's moments (2, n_pads) over its size, and of its load (n_pads,), both over its number of pads."""
    count = float(pivot.load.sum())
    return pivot.moments / (pivot.size * count), pivot.load / count
