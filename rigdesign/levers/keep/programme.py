"""Which pivots to move: a mixed-integer programme over pad forces.

Moved pivots keep the distance from their old holes; a pivot may also be moved by less, in a piece that is made new,
which costs more than all that are moved.  Bands enter a few rows at a time, the worst first: a programme with fewer
rows has more solutions, so that what it proves impossible is so.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from rigdesign.levers.keep.pivots import Pivot
from rigdesign.levers.keep.sight import Sight
from rigdesign.levers.keep.unknowns import Rows, Unknowns, own_rows, stacked
from rigdesign.pads.surface.quiet import quiet
from rigdesign.target.curve import Floats

NODES = 4_000
"""Nodes that one programme may search."""

SLACK = 1e-7
"""Band use beyond the limit that needs no further row: the solver's own tolerance."""

ROUNDS, ADDED = 60, 24
"""Rounds of rows at most, and rows that one round adds."""

OFF = 1e-6
"""What a largest moment may be off by the solver's tolerance."""

AT_HOME = 1e-9
"""A pivot that forces ask to be nearer to its old hole than this [m] is not moved."""


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


@dataclass(frozen=True)
class Within:
    """What choices are sought among: largest band use and cost, and how far moments reach (see `Unknowns.balances`).

    Without `reaches` every pivot moves freely.  `misfits` (k, n_pads) are rows whose sizes may enter the aim.
    """

    use: float = np.inf
    cost: float = np.inf
    reaches: Floats | None = None
    misfits: Floats | None = None


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
        return int(self.sight.matrix.shape[1])

    @property
    def mean(self) -> float:
        """Mean force [N]."""
        return self.total / self.n_pads

    @cached_property
    def unknowns(self) -> Unknowns:
        """The unknowns, without misfits."""
        return Unknowns(self.pivots, self.n_pads, 0)

    @cached_property
    def edges(self) -> tuple[Floats, Floats]:
        """Rows (m, n_pads) over forces in means, and constants (m,)."""
        return self.sight.matrix * self.mean, self.sight.constant

    def least_use(self) -> Choice | None:
        """Forces of least band use whatever pivots they ask for; None where the limits leave no forces."""
        free = self._converged(self._use_aim(), Within(), frozenset())
        return None if free is None else self._with_pivots(free)

    def fewest(self, within: Within, rows: frozenset[int]) -> Choice | None:
        """The cheapest choice; None where the search found none."""
        return self._converged(self.unknowns.cost, within, rows)

    def least_use_within(self, within: Within, rows: frozenset[int]) -> Choice | None:
        """The choice of least band use; None where the search found none."""
        return self._converged(self._use_aim(), within, rows)

    def plumbest(self, within: Within, rows: frozenset[int]) -> Choice | None:
        """The choice of least sum of misfits; None where the search found none."""
        assert within.misfits is not None
        unknowns = self._unknowns(within)
        aim = np.zeros(unknowns.count)
        aim[unknowns.use + 1 :] = 1.0
        return self._converged(aim, within, rows)

    def reaches(self, limit: float, rows: frozenset[int]) -> Floats:
        """Largest moments each way and load of each pivot over all forces within a band use, (n_pieces, 5)."""
        result = np.zeros((len(self.pivots), 5))
        within = Within(limit)
        constraints = self._constraints(self.unknowns, within, rows)
        for k, pivot in enumerate(self.pivots):
            moments, load = own_rows(pivot)
            for index, wish in enumerate((moments[0], -moments[0], moments[1], -moments[1], load)):
                if np.any(wish) and (index == 4 or not pivot.is_lever):
                    aim = np.zeros(self.unknowns.count)
                    aim[: self.n_pads] = -wish
                    found = self._optimum(aim, self.unknowns, within, constraints)
                    result[k, index] = np.abs(wish).sum() * self.n_pads if found is None else OFF - found[1]
            if pivot.is_lever:
                # within its limits a lever's pivot reaches so far at its largest load
                result[k, :2] = np.array([pivot.high, -pivot.low]) / pivot.size * result[k, 4]
        return np.maximum(result, 0.0)

    def _use_aim(self) -> Floats:
        aim = np.zeros(self.unknowns.count)
        aim[self.unknowns.use] = 1.0
        return aim

    def _unknowns(self, within: Within) -> Unknowns:
        return self.unknowns if within.misfits is None else replace(self.unknowns, n_misfits=len(within.misfits))

    def _with_pivots(self, choice: Choice) -> Choice:
        """The choice with the pivots that its forces ask for."""
        moved: list[int] = []
        near: list[int] = []
        for k, pivot in enumerate(self.pivots):
            away = float(np.hypot(*(pivot.moments * choice.force).sum(axis=1)) / (pivot.load * choice.force).sum())
            if away > AT_HOME:
                (moved if away >= pivot.distance else near).append(k)
        return replace(choice, moved=tuple(moved), near=tuple(near))

    def _converged(self, aim: Floats, within: Within, rows: frozenset[int]) -> Choice | None:
        """Solve with more and more rows until the solution keeps all; None where there is none."""
        matrix, constant = self.edges
        unknowns = self._unknowns(within)
        for _ in range(ROUNDS):
            found = self._solve(aim, within, rows)
            if found is None:
                return None
            x, bound = found
            force = x[: self.n_pads] * (self.n_pads / x[: self.n_pads].sum())
            excess = (matrix * force).sum(axis=1) - constant - x[unknowns.use]
            more = rows | _worst_rows(excess)
            # what the solver leaves of its own rows is its tolerance
            if more == rows:
                break
            rows = more
        use = float((excess + x[unknowns.use]).max(initial=0.0))
        return Choice(force * self.mean, use, *unknowns.chosen(x), bound, rows)

    def _solve(self, aim: Floats, within: Within, rows: frozenset[int]) -> tuple[Floats, float] | None:
        """Unknowns and a bound of the aim, with some band rows; None where there are none or none were found."""
        unknowns = self._unknowns(within)
        constraints = self._constraints(unknowns, within, rows)
        return self._optimum(aim, unknowns, within, constraints)

    def _optimum(
        self, aim: Floats, unknowns: Unknowns, within: Within, constraints: Rows
    ) -> tuple[Floats, float] | None:  # fmt: skip
        """Unknowns of least aim within constraints, and a bound of the aim."""
        # imported late: only a kept rig needs it
        from scipy.optimize import Bounds, LinearConstraint, milp

        least, most = self._bounds(unknowns, within)
        whole = np.zeros(unknowns.count)
        whole[unknowns.states] = 1.0
        # freely moving pivots have no whole numbers at all
        used = np.flatnonzero(most > 0) if within.reaches is None else np.arange(unknowns.count)
        with quiet():
            found = milp(
                aim[used],
                integrality=whole[used],
                bounds=Bounds(least[used], most[used]),
                constraints=LinearConstraint(constraints.a[:, used], constraints.low, constraints.high),
                options={"node_limit": NODES, "mip_rel_gap": 1e-6},
            )
        if found.x is None:
            return None
        x = np.zeros(unknowns.count)
        x[used] = found.x
        return x, float(found.fun if found.mip_dual_bound is None else found.mip_dual_bound)

    def _bounds(self, unknowns: Unknowns, within: Within) -> tuple[Floats, Floats]:
        least, most = np.zeros(unknowns.count), np.full(unknowns.count, np.inf)
        least[: self.n_pads] = max(self.least, 0.0) / self.mean
        most[: self.n_pads] = self.largest / self.mean
        most[unknowns.states] = 0.0 if within.reaches is None else 1.0
        most[unknowns.use] = within.use
        return least, most

    def _constraints(self, unknowns: Unknowns, within: Within, rows: frozenset[int]) -> Rows:
        matrix, constant = self.edges
        chosen = np.array(sorted(rows), dtype=np.int64)
        parts = [unknowns.total(), unknowns.bands(matrix[chosen], constant[chosen]), unknowns.ranges()]
        if within.reaches is not None:
            parts.append(unknowns.balances(within.reaches))
        if np.isfinite(within.cost):
            parts.append(unknowns.at_most(within.cost))
        if within.misfits is not None:
            parts.append(unknowns.misfits(within.misfits))
        return stacked(parts)


def _worst_rows(excess: Floats) -> frozenset[int]:
    """Rows that exceed more than their neighbours, the worst of them."""
    padded = np.concatenate([[-np.inf], excess, [-np.inf]])
    peak = np.flatnonzero((excess > SLACK) & (excess >= padded[:-2]) & (excess >= padded[2:]))
    return frozenset(int(row) for row in peak[np.argsort(-excess[peak], kind="stable")][:ADDED])
