"""The choice of places as a sparse programme.

What pads bring to a station differs from what they bring to the next one by what stands between the two alone.  So
the values at stations are unknowns of their own, tied to their neighbours: shear and torsion by what they lose at a
pad, the moment by its slope, and the slope by what it loses.  A few thousand stations and hundreds of places then make
a programme with a few numbers a row, which branch and bound gets through in seconds.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
import scipy.sparse as sp
from scipy.optimize import Bounds, LinearConstraint, OptimizeResult, milp

from rigdesign.pads.surface.choice_model import Choice, Indices, Truths, cliques
from rigdesign.pads.surface.jumps import JumpLimits
from rigdesign.pads.surface.quiet import quiet
from rigdesign.target.curve import Floats

NEGLIGIBLE = 1e-11
"""Of the largest response: a smaller difference between stations is rounding."""


@dataclass(frozen=True)
class Chain:
    """Values at stations (m,) as unknowns: `ties` · (forces, values, slopes) = 0, with `n_values` and `n_slopes`."""

    ties: sp.csr_array
    n_values: int
    n_slopes: int


@dataclass(frozen=True)
class SparseChoice:
    """The programme over (f, t, z, values, slopes): f forces over their mean, t band use, z which places get pads."""

    choice: Choice

    @property
    def mean(self) -> float:
        """Unit of the forces [N]."""
        return self.choice.balance.total / self.choice.count

    @cached_property
    def _parts(self) -> tuple[list[Chain], list[sp.csr_array], list[Indices]]:
        """Chains, and, row by row of the bands, which of the chain's values it looks at, over and under."""
        rows, choice = self.choice.rows, self.choice
        every = rows.matrix(choice.x, choice.y)
        chains, picks, orders = [], [], []
        at = np.concatenate([block.at for block in rows.blocks])
        outboard = np.concatenate([np.full(block.at.size, block.side == "outboard") for block in rows.blocks])
        for k, quantity in enumerate(rows.quantities):
            own = np.flatnonzero(rows.quantity == k)
            order = own[np.lexsort((outboard[own], at[own]))]
            unit = self.mean * (1.0 if quantity.startswith("shear") else choice.balance.size)
            response = every[order] * (self.mean / unit)
            chain, value_of_row = _chain(response, at[order] / choice.balance.size, quantity.startswith("moment"))
            chains.append(chain)
            pick = sp.csr_array((np.ones(order.size), (np.arange(order.size), value_of_row)),
                                shape=(order.size, chain.n_values))  # fmt: skip
            picks.append(pick * unit)
            orders.append(order)
        return chains, picks, orders

    @cached_property
    def _layout(self) -> tuple[int, list[int]]:
        """Number of unknowns, and where each chain's begin."""
        starts, end = [], 2 * self.choice.x.size + 1
        for chain in self._parts[0]:
            starts.append(end)
            end += chain.n_values + chain.n_slopes
        return end, starts

    @cached_property
    def _fixed_rows(self) -> list[LinearConstraint]:
        """Ties, bands and balance: everything that does not change from question to question."""
        choice, rows = self.choice, self.choice.rows
        n, (size, starts) = choice.x.size, self._layout
        result = []
        for chain, pick, order, start in zip(*self._parts, starts, strict=True):
            own = chain.n_values + chain.n_slopes
            left = sp.hstack([chain.ties[:, :n], sp.csr_array((chain.ties.shape[0], start - n)), chain.ties[:, n:],
                              sp.csr_array((chain.ties.shape[0], size - start - own))], format="csr")  # fmt: skip
            result.append(LinearConstraint(left, 0.0, 0.0))
            for width, sign in ((rows.above[order], 1.0), (rows.below[order], -1.0)):
                asked = np.flatnonzero(np.isfinite(width) & (width < 1e8 * width.min()))
                values = sp.diags_array(1.0 / width[asked]) @ pick[asked]
                use = sp.csr_array((np.full(asked.size, -sign), (np.arange(asked.size), np.full(asked.size, n))),
                                   shape=(asked.size, start))  # fmt: skip
                tail = sp.csr_array((asked.size, size - start - chain.n_values))
                matrix = sp.hstack([use, values, tail], format="csr")
                edge = rows.wanted[order][asked] / width[asked]
                result.append(
                    LinearConstraint(matrix, -np.inf, edge) if sign > 0 else LinearConstraint(matrix, edge, np.inf)
                )
        equal = sp.csr_array(choice.balance.rows(choice.x, choice.y) / choice.count)
        result.append(LinearConstraint(self._padded(equal), [1.0, 0.0, 0.0], [1.0, 0.0, 0.0]))
        apart = cliques(choice.compatible)
        if apart:
            index = [(row, n + 1 + place) for row, clique in enumerate(apart) for place in clique]
            ones = sp.csr_array((np.ones(len(index)), tuple(zip(*index, strict=True))), shape=(len(apart), size))
            result.append(LinearConstraint(ones, -np.inf, 1.0))
        return result

    def _padded(self, matrix: sp.csr_array) -> sp.csr_array:
        return sp.hstack([matrix, sp.csr_array((matrix.shape[0], self._layout[0] - matrix.shape[1]))], format="csr")

    def solve(
        self,
        largest: Floats,
        *,
        use: float | None,
        may: Truths | None = None,
        must: Truths | None = None,
        jumps: JumpLimits | None = None,
        weight: Floats | None = None,
        relaxed: bool = False,
        options: dict[str, float] | None = None,
    ) -> OptimizeResult:
        """Solve for the least band use, or, within a band use `use`, for the fewest pads.

        Parameters
        ----------
        largest
            Most that each place's pad can carry [N], (n,).
        use
            Band use to be kept; None makes it least with `count` pads.
        may, must
            Places that may get pads, all if None, and places that must, (n,).
        jumps
            What jumps allow, to make the programme tight.
        weight
            What a pad at each place counts for, (n,), instead of one.
        relaxed
            Whether parts of pads count, which makes it a linear programme.
        options
            Those of the solver.
        """
        n, size = self.choice.x.size, self._layout[0]
        low, high = np.full(size, -np.inf), np.full(size, np.inf)
        top = largest / self.mean
        low[: 2 * n + 1] = 0.0
        high[:n], high[n + 1 : 2 * n + 1] = top, 1.0
        if may is not None:
            high[n + 1 : 2 * n + 1] = may
        if must is not None:
            low[n + 1 : 2 * n + 1] = must
        cost = np.zeros(size)
        if use is None:
            cost[n] = 1.0
        else:
            low[n] = high[n] = use
            cost[n + 1 : 2 * n + 1] = 1.0 if weight is None else weight
        whole = np.zeros(size)
        whole[n + 1 : 2 * n + 1] = 0.0 if relaxed else 1.0
        constraints = [*self._fixed_rows, *self._place_rows(top, use), *self._jump_rows(use, jumps)]
        with quiet():
            return milp(
                cost, constraints=constraints, bounds=Bounds(low, high), integrality=whole, options=options or {}
            )

    def _place_rows(self, top: Floats, use: float | None) -> list[LinearConstraint]:
        """Forces only where there are pads, within the limits; with the band use open, so many pads."""
        choice, n = self.choice, self.choice.x.size
        one, none = sp.eye_array(n), sp.csr_array((n, 1))
        rows = [LinearConstraint(self._padded(sp.hstack([one, none, -sp.diags_array(top)])), -np.inf, 0.0)]
        if choice.least > 0:
            rows.append(
                LinearConstraint(self._padded(sp.hstack([one, none, -one * (choice.least / self.mean)])), 0.0, np.inf)
            )
        if use is None:
            pads = self._padded(sp.csr_array(np.concatenate([np.zeros(n + 1), np.ones(n)])[None]))
            rows.append(LinearConstraint(pads, choice.count, choice.count))
        return rows

    def _jump_rows(self, use: float | None, jumps: JumpLimits | None) -> list[LinearConstraint]:
        """What the pads at each station can carry together; with the band use open, what all pads can."""
        if jumps is None:
            return []
        n = self.choice.x.size
        limited = np.flatnonzero(np.isfinite(jumps.per_pad))
        if use is None:
            if limited.size < n:
                return []
            row = self._padded(sp.csr_array(np.append(self.mean / jumps.per_pad, -float(self.choice.count))[None]))
            return [LinearConstraint(row, -np.inf, 0.0)]
        if use <= 0:
            return []
        values = np.concatenate([self.mean / (jumps.per_pad[limited] * use), -np.ones(limited.size)])
        where = np.tile(jumps.station[limited], 2), np.concatenate([limited, n + 1 + limited])
        shape = (int(jumps.station.max()) + 1, self._layout[0])
        return [LinearConstraint(sp.csr_array((values, where), shape=shape), -np.inf, 0.0)]


def _chain(response: Floats, at: Floats, has_slope: bool) -> tuple[Chain, np.ndarray]:
    """Values along stations `at` (m,), root to tip, of responses (m, n); and which value each row looks at (m,)."""
    n = response.shape[1]
    close = NEGLIGIBLE * max(float(np.abs(response).max(initial=0.0)), 1e-300)
    new = np.append(True, (np.diff(at) > 0) | (np.abs(np.diff(response, axis=0)).max(axis=1, initial=0.0) > close))
    value_of_row = np.cumsum(new) - 1
    response, at = response[new], at[new]
    m = at.size
    smooth = has_slope and m > 2 and bool(np.all(np.diff(at) > 0))
    step = sp.diags_array([np.ones(m - 1), -np.ones(m - 1)], offsets=[0, 1], shape=(m - 1, m)).tocsr()
    last = sp.csr_array((np.ones(1), ([0], [m - 1])), shape=(1, m))
    anchor = sp.hstack([_sparse(-response[-1:], close), last])
    if not smooth:
        lost = -np.diff(response, axis=0)
        return Chain(sp.vstack([sp.hstack([_sparse(-lost, close), step]), anchor], format="csr"), m, 0), value_of_row
    pitch = np.diff(at)
    slope = -np.diff(response, axis=0) / pitch[:, None]
    # the slope's rounding grows as the pitch shrinks
    lost = np.where(np.abs(np.diff(slope, axis=0)) > 1e-9 * max(float(np.abs(slope).max()), 1e-300),
                    -np.diff(slope, axis=0), 0.0)  # fmt: skip
    none = sp.csr_array((m - 1, n))
    by_slope = sp.hstack([none, step, -sp.diags_array(pitch)])
    change = sp.diags_array([np.ones(m - 2), -np.ones(m - 2)], offsets=[0, 1], shape=(m - 2, m - 1)).tocsr()
    slopes = sp.hstack([sp.csr_array(-lost), sp.csr_array((m - 2, m)), change])
    end = sp.csr_array((np.ones(1), ([0], [m - 2])), shape=(1, m - 1))
    last_slope = sp.hstack([_sparse(-slope[-1:], 0.0), sp.csr_array((1, m)), end])
    first = sp.hstack([anchor, sp.csr_array((1, m - 1))])
    return Chain(sp.vstack([by_slope, slopes, last_slope, first], format="csr"), m, m - 1), value_of_row


def _sparse(matrix: Floats, close: float) -> sp.csr_array:
    return sp.csr_array(np.where(np.abs(matrix) > close, matrix, 0.0))
