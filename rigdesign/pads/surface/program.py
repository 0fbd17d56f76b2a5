"""Given places in plan: the forces of least band use, then the most even ones, as linear programmes.

Unknown are the forces over their mean, and the band use.  Rows and moments are divided by their widths and by the span,
so that everything is of the order of one.  What the solver's tolerance leaves of sum and moments is put right after it.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from scipy.optimize import linprog

from rigdesign.pads.forces import WORTH_A_PAD, Forces
from rigdesign.pads.model import LEAST_SHARE
from rigdesign.pads.surface.balance import Balance
from rigdesign.pads.surface.error_rows import ErrorRows
from rigdesign.target.curve import Floats

SOLVER_TOLERANCE = 1e-9
BALANCED = 1e-8
"""Forces that miss the balance by more than this part of the total are no solution."""


@dataclass(frozen=True)
class Programme:
    """Pads at x, y (n,) [m] with forces between `least` and `largest` [N], judged at `rows`."""

    rows: ErrorRows
    balance: Balance
    x: Floats
    y: Floats
    least: float
    largest: float

    @property
    def mean(self) -> float:
        """Mean force [N]."""
        return self.balance.total / self.x.size

    @cached_property
    def _matrix(self) -> Floats:
        return self.rows.matrix(self.x, self.y)

    @cached_property
    def edges(self) -> tuple[Floats, Floats]:
        """Rows a (2 m, n) and constants c (2 m,): inside the bands where a · force/mean − c ≤ band use."""
        rows = self.rows
        over, under = self._matrix / rows.above[:, None], -self._matrix / rows.below[:, None]
        constant = np.concatenate([rows.wanted / rows.above, -rows.wanted / rows.below])
        return np.concatenate([over, under]) * self.mean, constant

    @property
    def _bounds(self) -> list[tuple[float, float | None]]:
        largest = self.largest / self.mean if np.isfinite(self.largest) else None
        return [(max(self.least, 0.0) / self.mean, largest)] * self.x.size

    def least_use(self, near: Floats | None = None, within: float = np.inf) -> Forces | None:
        """Forces of least band use; None if no forces within the limits balance the target at these places.

        With `near` (n,) [N], the pads' shares, forces also keep `within` that part of them.
        """
        a, c = self.edges
        cost = np.append(np.zeros(self.x.size), 1.0)
        bounds = self._bounds
        if near is not None:
            reach = within * np.maximum(near, LEAST_SHARE * self.mean)
            closer = zip(bounds, (near - reach) / self.mean, (near + reach) / self.mean, strict=True)
            bounds = [(max(low, lo), hi if high is None else min(high, hi)) for (low, high), lo, hi in closer]
            if any(high is not None and low > high for low, high in bounds):
                return None
        found = self._solve(cost, np.column_stack([a, -np.ones(c.size)]), c, bounds)
        return None if found is None else self.judged(found)

    def most_even(self, limit: Floats, share: Floats) -> Forces | None:
        """Forces closest to the pads' shares (n,) [N] where each quantity keeps within its band use `limit`.

        `limit` is in the order of the rows' quantities.  Every pad carries something, where that can be.
        """
        a, c = self.edges
        allowed = np.tile(limit[self.rows.quantity], 2)
        scale = np.maximum(share, LEAST_SHARE * self.mean) / self.mean
        n = self.x.size
        near = np.diag(1.0 / scale)
        wanted = share / self.mean / scale
        stacked = np.block([[a, np.zeros((c.size, 1))], [near, -np.ones((n, 1))], [-near, -np.ones((n, 1))]])
        value = np.concatenate([c + allowed, wanted, -wanted])
        cost = np.append(np.zeros(n), 1.0)
        worth = min(max(WORTH_A_PAD, self.least / self.mean), self.largest / self.mean)
        for least in (worth, self.least / self.mean):
            bounds = [(least, high) for _, high in self._bounds]
            found = self._solve(cost, stacked, value, bounds)
            if found is not None:
                return self.judged(found, share)
        return None

    def _solve(self, cost: Floats, a: Floats, b: Floats, bounds: list[tuple[float, float | None]]) -> Floats | None:
        """Forces (n,) [N] of least cost, None where there are none."""
        equal = np.column_stack([self.balance.rows(self.x, self.y) / self.x.size, np.zeros(3)])
        options = {"primal_feasibility_tolerance": SOLVER_TOLERANCE, "dual_feasibility_tolerance": SOLVER_TOLERANCE}
        result = linprog(
            cost,
            A_ub=a,
            b_ub=b,
            A_eq=equal,
            b_eq=np.array([1.0, 0.0, 0.0]),
            bounds=[*bounds, (0, None)],
            method="highs",
            options=options,
        )
        if result.status != 0:
            return None
        force = self.balance.hit(self.x, self.y, result.x[:-1] * self.mean)
        return force if self.balance.left_over(self.x, self.y, force) <= BALANCED else None

    def judged(self, force: Floats, share: Floats | None = None) -> Forces:
        """Return forces (n,) [N] with the band use that the rows see, and how uneven they are against the shares."""
        error = (self._matrix * force).sum(axis=1) - self.rows.wanted
        use = np.maximum(error / self.rows.above, -error / self.rows.below).max(initial=0.0)
        return Forces(force, float(use), np.inf if share is None else unevenness(force, share))

    def uses(self, force: Floats) -> Floats:
        """Return the band use of each quantity of the rows."""
        error = (self._matrix * force).sum(axis=1) - self.rows.wanted
        use = np.maximum(error / self.rows.above, -error / self.rows.below)
        return np.array([use[self.rows.quantity == k].max(initial=0.0) for k in range(len(self.rows.quantities))])


def unevenness(force: Floats, share: Floats) -> float:
    """Return the largest |force − share| over the share among pads, forces positive, both (n,) [N]."""
    least = LEAST_SHARE * float(share.mean())
    return float(np.max(np.abs(force - share) / np.maximum(share, least)))
