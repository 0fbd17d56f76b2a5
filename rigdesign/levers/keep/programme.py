"""Which pivots to move: a mixed-integer programme over pad forces.

Unknown are the forces over their mean, whether each pivot is moved and to which side, and the band use.  Moved pivots
keep the distance from their old holes; a pivot may also be moved by less, in a piece that is made new, which counts as
more than all that are moved.  Bands enter a few rows at a time, the worst first: a programme with fewer rows has more
solutions, so that what it proves impossible is so.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from rigdesign.levers.keep.pivots import Pivot
from rigdesign.levers.keep.sight import Sight
from rigdesign.pads.surface.quiet import quiet
from rigdesign.target.curve import Floats

SIDES = 8
"""Directions in which a plate's pivot may leave its old hole.  A distance is asked of one of them, less what the
direction in between loses, so that nothing is excluded that keeps it."""

NODES = 4_000
"""Nodes that one programme may search."""

SLACK = 1e-7
"""Band use beyond the limit that needs no further row: the solver's own tolerance."""

ROUNDS, ADDED = 60, 24
"""Rounds of rows at most, and rows that one round adds."""

INTEGER = 1e-5
"""What the solver may be off a whole number."""


@dataclass(frozen=True)
class Choice:
    """Forces (n_pads,) [N] in balance with pivots of which some are moved, and their band use.

    `moved` and `near` are rows of pieces: moved with the distance kept, and moved by less.  `bound` is what no choice
    goes below: of the cost where that was sought, or of the band use.  `rows` are the band rows that were needed.
    """

    force: Floats
    use: float
    moved: tuple[int, ...]
    near: tuple[int, ...]
    bound: float
    rows: frozenset[int]

    @property
    def cost(self) -> tuple[int, int]:
        """Pieces to be made new, and pivots moved in old ones."""
        return len(self.near), len(self.moved)


@dataclass(frozen=True)
class Programme:
    """Pads with forces between `least` and `largest` [N] that sum to `total`, judged by `sight`, over old pivots."""

    sight: Sight
    pivots: tuple[Pivot, ...]
    total: float
    least: float
    largest: float

    @property
    def n_pads(self) -> int:
        """Number of pads."""
        return self.sight.matrix.shape[1]

    @property
    def mean(self) -> float:
        """Mean force [N]."""
        return self.total / self.n_pads

    @property
    def price(self) -> int:
        """What a piece made new counts, in moved pivots."""
        return len(self.pivots) + 1

    @cached_property
    def edges(self) -> tuple[Floats, Floats]:
        """Rows (m, n_pads) over forces in means, and constants (m,): within a band use where row · f ≤ use + constant."""
        return self.sight.matrix * self.mean, self.sight.constant

    @cached_property
    def _directions(self) -> tuple[Floats, ...]:
        """Directions (k, 2) in which each pivot may move."""
        turn = 2 * np.pi * np.arange(SIDES) / SIDES
        plate = np.stack([np.cos(turn), np.sin(turn)], axis=1)
        lever = np.array([[1.0, 0.0], [-1.0, 0.0]])
        return tuple(lever if pivot.is_lever else plate for pivot in self.pivots)

    @cached_property
    def starts(self) -> list[int]:
        """Column of each pivot's first side; after its sides stands the column of a piece made new."""
        first, result = self.n_pads, []
        for sides in self._directions:
            result.append(first)
            first += len(sides) + 1
        return [*result, first]

    @property
    def n_columns(self) -> int:
        """Number of unknowns: forces, sides and new pieces of each pivot, band use."""
        return self.starts[-1] + 1

    def least_use(self) -> Choice | None:
        """Forces of least band use whatever pivots they ask for; None where the limits leave no forces."""
        cost = np.zeros(self.n_columns)
        cost[-1] = 1.0
        return self._converged(cost, _Limits(np.inf, np.inf, None), frozenset(), relaxed=True)

    def fewest(self, limit: float, rows: frozenset[int]) -> Choice | None:
        """The cheapest choice within a band use `limit`; None where the search found none."""
        cost = np.zeros(self.n_columns)
        for k, start in enumerate(self.starts[:-1]):
            cost[start : self.starts[k + 1] - 1] = 1.0
            cost[self.starts[k + 1] - 1] = self.price
        return self._converged(cost, _Limits(limit, np.inf, self._reaches(limit, rows)), rows)

    def least_use_within(self, limit: float, most: int, rows: frozenset[int]) -> Choice | None:
        """The choice of least band use among those that cost at most `most`; None where the search found none."""
        cost = np.zeros(self.n_columns)
        cost[-1] = 1.0
        return self._converged(cost, _Limits(limit, most, self._reaches(limit, rows)), rows)

    def _reaches(self, limit: float, rows: frozenset[int]) -> Floats:
        """Largest moment each way and load of each pivot, (n_pieces, 5), over forces within a band use.

        In the pivot's own units: moments over its size and number of pads, loads over the number of pads.
        """
        result = np.zeros((len(self.pivots), 5))
        for k, pivot in enumerate(self.pivots):
            moments, load = self._own(pivot)
            wishes = [moments[0], -moments[0], moments[1], -moments[1], load]
            for index, wish in enumerate(wishes):
                if not np.any(wish):
                    continue
                cost = np.zeros(self.n_columns)
                cost[: self.n_pads] = -wish
                found = self._solve(cost, _Limits(limit, np.inf, None), rows, relaxed=True)
                # beyond what the solver may be off
                result[k, index] = np.abs(wish).sum() * self.n_pads if found is None else -found[1] + 1e-6
        return np.maximum(result, 0.0)

    def _own(self, pivot: Pivot) -> tuple[Floats, Floats]:
        """Rows of a pivot's moments (2, n_pads) and load (n_pads,) in its own units."""
        count = float(pivot.load.sum())
        return pivot.moments / (pivot.size * count), pivot.load / count

    def _converged(
        self, cost: Floats, limits: _Limits, rows: frozenset[int], relaxed: bool = False
    ) -> Choice | None:  # fmt: skip
        """Solve with more and more rows until the solution keeps all; None where there is none."""
        matrix, constant = self.edges
        for _ in range(ROUNDS):
            found = self._solve(cost, limits, rows, relaxed)
            if found is None:
                return None
            x, bound = found
            force = x[: self.n_pads] * (self.n_pads / x[: self.n_pads].sum())
            use = (matrix * force).sum(axis=1) - constant
            worst = float(use.max(initial=0.0))
            if worst <= x[-1] + SLACK:
                break
            rows = rows | _worst_rows(use - x[-1])
        moved, near = self._states(x)
        return Choice(force * self.mean, worst, moved, near, bound, rows)

    def _states(self, x: Floats) -> tuple[tuple[int, ...], tuple[int, ...]]:
        moved, near = [], []
        for k, start in enumerate(self.starts[:-1]):
            end = self.starts[k + 1] - 1
            if x[start:end].sum() > 0.5:
                moved.append(k)
            elif x[end] > 0.5:
                near.append(k)
        return tuple(moved), tuple(near)

    def _solve(self, cost: Floats, limits: _Limits, rows: frozenset[int], relaxed: bool) -> tuple[Floats, float] | None:
        """Unknowns and a bound of the cost, with some band rows; relaxed: every pivot moves freely."""
        from scipy.optimize import Bounds, LinearConstraint, milp

        a, low, high = self._constraints(limits, rows, relaxed)
        least, most = self._bounds(limits, relaxed)
        whole = np.zeros(self.n_columns)
        if not relaxed:
            whole[self.n_pads : -1] = 1.0
        with quiet():
            found = milp(
                cost,
                integrality=whole,
                bounds=Bounds(least, most),
                constraints=LinearConstraint(a, low, high),
                options={"node_limit": NODES, "mip_rel_gap": 1e-6},
            )
        if found.x is None:
            return None
        bound = found.fun if found.mip_dual_bound is None else found.mip_dual_bound
        return found.x, float(bound)

    def _bounds(self, limits: _Limits, relaxed: bool) -> tuple[Floats, Floats]:
        least, most = np.zeros(self.n_columns), np.ones(self.n_columns)
        least[: self.n_pads] = max(self.least, 0.0) / self.mean
        most[: self.n_pads] = self.largest / self.mean if np.isfinite(self.largest) else np.inf
        most[self.n_pads : -1] = 0.0 if relaxed else 1.0
        most[-1] = limits.use
        return least, most

    def _constraints(self, limits: _Limits, rows: frozenset[int], relaxed: bool) -> tuple[Floats, Floats, Floats]:
        """Everything as low ≤ a · unknowns ≤ high."""
        matrix, constant = self.edges
        chosen = np.array(sorted(rows), dtype=np.int64)
        bands = np.zeros((chosen.size, self.n_columns))
        bands[:, : self.n_pads], bands[:, -1] = matrix[chosen], -1.0
        whole = np.zeros((1, self.n_columns))
        whole[0, : self.n_pads] = 1.0 / self.n_pads
        parts = [(whole, np.ones(1), np.ones(1)), (bands, np.full(chosen.size, -np.inf), constant[chosen])]
        for k, pivot in enumerate(self.pivots):
            parts.append(self._range_rows(pivot))
            if not relaxed:
                parts.append(self._state_rows(k, pivot, limits))
        if np.isfinite(limits.cost):
            price = np.zeros((1, self.n_columns))
            for k, start in enumerate(self.starts[:-1]):
                price[0, start : self.starts[k + 1] - 1] = 1.0
                price[0, self.starts[k + 1] - 1] = self.price
            parts.append((price, np.full(1, -np.inf), np.full(1, limits.cost + 0.5)))
        a, low, high = (np.concatenate([part[i] for part in parts]) for i in range(3))
        return a, low, high

    def _range_rows(self, pivot: Pivot) -> tuple[Floats, Floats, Floats]:
        """A lever's pivot stays within what its limits leave."""
        if not pivot.is_lever:
            return np.empty((0, self.n_columns)), np.empty(0), np.empty(0)
        moments, load = self._own(pivot)
        a = np.zeros((2, self.n_columns))
        a[0, : self.n_pads] = moments[0] - pivot.high / pivot.size * load
        a[1, : self.n_pads] = -moments[0] + pivot.low / pivot.size * load
        return a, np.full(2, -np.inf), np.zeros(2)

    def _state_rows(self, k: int, pivot: Pivot, limits: _Limits) -> tuple[Floats, Floats, Floats]:
        """An unmoved pivot is in balance; a moved one keeps the distance on the side that is chosen."""
        assert limits.reaches is not None
        moments, load = self._own(pivot)
        reach, start, end = limits.reaches[k], self.starts[k], self.starts[k + 1] - 1
        sides, n = self._directions[k], self.n_pads
        rows, high = [], []
        for axis in (0,) if pivot.is_lever else (0, 1):
            for sign, most in ((1.0, reach[2 * axis]), (-1.0, reach[2 * axis + 1])):
                row = np.zeros(self.n_columns)
                row[:n] = sign * moments[axis]
                # a side whose direction points the other way needs none of this
                row[start:end] = -most if not pivot.is_lever else np.where(sign * sides[:, 0] > 0, -most, 0.0)
                row[end] = -most
                rows.append(row)
                high.append(0.0)
        distance = pivot.distance / pivot.size * (1.0 if pivot.is_lever else float(np.cos(np.pi / SIDES)))
        for index, side in enumerate(sides):
            against = np.maximum(-side, 0.0) @ reach[[0, 2]] + np.maximum(side, 0.0) @ reach[[1, 3]]
            slack = distance * reach[4] + against
            row = np.zeros(self.n_columns)
            row[:n] = distance * load - side @ moments
            row[start + index] = slack
            rows.append(row)
            high.append(slack)
        one = np.zeros(self.n_columns)
        one[start : end + 1] = 1.0
        rows.append(one)
        high.append(1.0)
        return np.array(rows), np.full(len(rows), -np.inf), np.array(high)


@dataclass(frozen=True)
class _Limits:
    """Largest band use and cost, and how far each pivot's moment can reach (see `Programme._reaches`)."""

    use: float
    cost: float
    reaches: Floats | None


def _worst_rows(excess: Floats) -> frozenset[int]:
    """Rows that exceed more than their neighbours, the worst of them."""
    padded = np.concatenate([[-np.inf], excess, [-np.inf]])
    peak = np.flatnonzero((excess > SLACK) & (excess >= padded[:-2]) & (excess >= padded[2:]))
    return frozenset(int(row) for row in peak[np.argsort(-excess[peak], kind="stable")][:ADDED])
