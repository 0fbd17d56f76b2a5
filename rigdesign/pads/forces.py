"""Fixed places: the forces of least band use, then the most even ones, as linear programmes.

Between pads the path P is straight, so it is given by its ordinates at the pads, and the forces are the changes of
its slope.  Unknown are the ordinates' errors against the wanted path, in units of `rise`, so that the programme is
sparse (a station sees its two neighbouring pads alone) and well scaled.  The first and the last line are fixed, so
sum and first moment of the forces are exact whatever the solver's tolerance.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import NamedTuple

import numpy as np
import scipy.sparse as sp
from numpy.typing import NDArray
from scipy.optimize import linprog

from rigdesign.pads.model import LEAST_SHARE
from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

Indices = NDArray[np.int_]

# Even forces are first sought with every pad carrying at least this part of the mean force: no pads that carry nothing.
WORTH_A_PAD = 0.05
# The solver's own feasibility tolerance, in units of `rise` and band use.
SOLVER_TOLERANCE = 1e-9


@dataclass(frozen=True)
class Forces:
    """Forces (n,) [N] of pads at given places, the band use that the programme's stations see, and the evenness."""

    force: Floats
    use: float
    evenness: float


class ErrorRows(NamedTuple):
    """Errors as linear functions, matrix · unknowns + error (k,), with band widths (k,) and a unit to scale by."""

    matrix: sp.csr_array
    error: Floats
    below: Floats
    above: Floats
    unit: float

    def edges(self) -> list[tuple[sp.csr_array, Floats, Floats]]:
        """Upper and lower edge as rows a, constants c, widths w: inside where a · unknowns + c ≤ band use · w."""
        return [
            (self.matrix / self.unit, self.error / self.unit, self.above / self.unit),
            (-self.matrix / self.unit, -self.error / self.unit, self.below / self.unit),
        ]


@dataclass(frozen=True)
class ForceProgramme:
    """Pads at `x` (n,) [m] in a tube whose stations include them; forces between `least` and `largest` [N].

    `share` (n,) [N] is what each pad would carry if it took the target's load nearest to it.
    """

    tube: Tube
    x: Floats
    least: float
    largest: float
    share: Floats

    @property
    def _rise(self) -> float:
        return float(self.tube.total * (self.tube.x[-1] - self.tube.x[0]) / (16 * self.x.size**2))

    @cached_property
    def _wanted(self) -> Floats:
        return np.interp(self.x, self.tube.x, self.tube.moment_wanted)

    @cached_property
    def _ordinates(self) -> tuple[sp.csr_array, Floats]:
        """Path ordinates at the pads as matrix (n, n − 2) of the unknowns and constant (n,)."""
        n = self.x.size
        constant = self._wanted.copy()
        constant[0], constant[-1] = self.tube.total * (self.tube.jack_x - self.x[0]), 0.0
        rows = np.arange(1, n - 1)
        matrix = sp.csr_array((np.full(n - 2, self._rise), (rows, rows - 1)), shape=(n, n - 2))
        return matrix, constant

    @cached_property
    def _slopes(self) -> tuple[sp.csr_array, Floats]:
        """Slopes of the n + 1 lines as matrix (n + 1, n − 2) and constant (n + 1,)."""
        matrix, constant = self._ordinates
        step = np.diff(self.x)
        inner = sp.diags_array(1 / step) @ (matrix[1:] - matrix[:-1])
        zero = sp.csr_array((1, matrix.shape[1]))
        values = np.concatenate([[-self.tube.total], np.diff(constant) / step, [0.0]])
        return sp.vstack([zero, inner, zero], format="csr"), values

    @cached_property
    def _force_rows(self) -> tuple[sp.csr_array, Floats]:
        matrix, constant = self._slopes
        return (matrix[1:] - matrix[:-1]).tocsr(), np.diff(constant)

    @cached_property
    def _use_rows(self) -> tuple[sp.csr_array, Floats, Floats]:
        """Rows a, constants c, widths w such that a·q + c ≤ use·w says "inside the tube", upper and lower edge."""
        tube, blocks = self.tube, []
        line = np.searchsorted(self.x, tube.x, side="right")
        if tube.is_judged[0]:
            blocks.append(self._moment_rows(line))
        if tube.is_judged[1]:
            at_pad = np.isin(tube.x, self.x)
            # at a pad both its lines are judged, each against the target on its own side
            inboard = np.where(at_pad, np.searchsorted(self.x, tube.x, side="left"), line)
            jump = np.append(np.diff(tube.x) == 0, False) | np.append(False, np.diff(tube.x) == 0)
            for rows, lines in (
                (np.flatnonzero(~jump | tube.outboard), line),
                (np.flatnonzero(~jump | ~tube.outboard), inboard),
            ):
                blocks.append(self._shear_rows(rows, lines[rows]))
        edges = [edge for block in blocks for edge in block.edges()]
        return (
            sp.vstack([edge[0] for edge in edges], format="csr"),
            np.concatenate([edge[1] for edge in edges]),
            np.concatenate([edge[2] for edge in edges]),
        )

    def _moment_rows(self, line: Indices) -> ErrorRows:
        tube, n = self.tube, self.x.size
        inner = (line > 0) & (line < n)
        k = np.clip(line, 1, n - 1)
        t = (tube.x - self.x[k - 1]) / (self.x[k] - self.x[k - 1])
        rows = np.arange(tube.x.size)
        weights = sp.csr_array(
            (
                np.concatenate([np.where(inner, 1 - t, 0), np.where(inner, t, 0)]),
                (np.tile(rows, 2), np.concatenate([k - 1, k])),
            ),
            shape=(tube.x.size, n),
        )
        matrix, constant = self._ordinates
        outer = np.where(line == 0, tube.total * (tube.jack_x - tube.x), 0.0)
        error = np.where(inner, weights @ constant, outer) - tube.moment_wanted
        return ErrorRows(weights @ matrix, error, tube.moment_below, tube.moment_above, self._rise)

    def _shear_rows(self, rows: Indices, line: Indices) -> ErrorRows:
        tube = self.tube
        matrix, constant = self._slopes
        error = -constant[line] - tube.shear_wanted[rows]
        unit = tube.total / self.x.size
        return ErrorRows(-matrix[line], error, tube.shear_below[rows], tube.shear_above[rows], unit)

    # -- programmes ----------------------------------------------------------------------------------------------------

    def least_use(self) -> Forces | None:
        """Forces of least band use; None if no forces within the limits balance the target at these places."""
        if self.x.size < 3:
            return self._determinate()
        rows, constant, width = self._use_rows
        q = rows.shape[1]
        force, force_0 = self._force_rows
        a = sp.vstack([sp.hstack([rows, -width[:, None]]), *self._limit_rows(force, 1)], format="csr")
        b = np.concatenate([-constant, *self._limit_values(force_0)])
        found = self._solve(np.append(np.zeros(q), 1.0), a, b)
        return None if found is None else self._result(found[:q], found[q])

    def most_even(self, use: float, ratio: float | None = None) -> Forces | None:
        """Forces closest to the pads' shares within band use `use`: least largest deviation, then least sum.

        `ratio` bounds neighbouring forces' ratio; None leaves it free.  None if there are no such forces.
        """
        if self.x.size < 3:
            only = self._determinate()
            return only if only is not None and only.use <= use * (1 + 1e-9) else None
        rows, constant, width = self._use_rows
        q = rows.shape[1]
        force, force_0 = self._force_rows
        scale = self._share_scale
        blocks = [sp.hstack([rows, sp.csr_array((rows.shape[0], 1))]), *self._limit_rows(force, 1)]
        values = [use * width - constant, *self._limit_values(force_0)]
        if ratio is not None:
            for matrix, value in self._ratio_rows(ratio):
                blocks.append(sp.hstack([matrix, sp.csr_array((matrix.shape[0], 1))]))
                values.append(value)
        for sign in (1.0, -1.0):
            blocks.append(sp.hstack([sp.diags_array(sign / scale) @ force, -np.ones((self.x.size, 1))]))
            values.append(sign * (self.share - force_0) / scale)
        found = self._solve(np.append(np.zeros(q), 1.0), sp.vstack(blocks, format="csr"), np.concatenate(values))
        return None if found is None else self._result(found[:q], None)

    def _ratio_rows(self, ratio: float) -> list[tuple[sp.csr_array, Floats]]:
        force, constant = self._force_rows
        mean = self.tube.total / self.x.size
        return [
            ((force[a] - ratio * force[b]) / mean, (ratio * constant[b] - constant[a]) / mean)
            for a, b in ((slice(1, None), slice(None, -1)), (slice(None, -1), slice(1, None)))
        ]

    @property
    def _share_scale(self) -> Floats:
        return np.maximum(self.share, LEAST_SHARE * self.tube.total / self.x.size)

    def _limit_rows(self, force: sp.csr_array, more: int) -> list[sp.csr_array]:
        mean = self.tube.total / self.x.size
        wide = sp.hstack([force / mean, sp.csr_array((force.shape[0], more))])
        return [-wide, wide] if np.isfinite(self.largest) else [-wide]

    def _limit_values(self, constant: Floats) -> list[Floats]:
        mean = self.tube.total / self.x.size
        values = [(constant - self.least) / mean]
        return [*values, (self.largest - constant) / mean] if np.isfinite(self.largest) else values

    def _solve(self, cost: Floats, a: sp.csr_array, b: Floats) -> Floats | None:
        bounds = [(None, None)] * (cost.size - 1) + [(0, None)]
        options = {"primal_feasibility_tolerance": SOLVER_TOLERANCE, "dual_feasibility_tolerance": SOLVER_TOLERANCE}
        result = linprog(cost, A_ub=a, b_ub=b, bounds=bounds, method="highs", options=options)
        return np.asarray(result.x) if result.status == 0 else None

    def _result(self, q: Floats, use: float | None) -> Forces:
        matrix, constant = self._force_rows
        force = matrix @ q + constant
        if use is None:
            rows, constants, width = self._use_rows
            use = float(np.max((rows @ q + constants) / width))
        return Forces(force, use, evenness(self.tube, self.x, force))

    def _determinate(self) -> Forces | None:
        """One or two pads: sum and first moment leave no choice."""
        tube, x = self.tube, self.x
        if x.size == 1:
            force = np.array([tube.total])
            if abs(x[0] - tube.jack_x) > 1e-9 * (tube.x[-1] - tube.x[0]):
                return None
        else:
            second = tube.total * (tube.jack_x - x[0]) / (x[1] - x[0])
            force = np.array([tube.total - second, second])
        slack = 1e-9 * tube.total
        if force.min() < self.least - slack or force.max() > self.largest + slack:
            return None
        return Forces(force, float(tube.use(x, force)), evenness(tube, x, force))


class Wish(NamedTuple):
    """What even forces are first sought with: a bound on the ratio of neighbours (or none), and a least force [N]."""

    ratio: float | None
    least: float


def wishes(ratio: float, least: float, mean: float) -> tuple[Wish, ...]:
    """Wishes in the order in which they are given up where they cannot be had."""
    worth = max(least, WORTH_A_PAD * mean)
    return Wish(ratio, worth), Wish(None, worth), Wish(None, least)


def shares(tube: Tube, x: Floats) -> Floats:
    """The target's own load nearest to each pad (n,) [N]: split half-way between neighbours."""
    middle = (x[1:] + x[:-1]) / 2
    beyond = np.interp(middle, tube.x, tube.shear)
    return -np.diff(np.concatenate([[tube.total], beyond, [0.0]]))


def evenness(tube: Tube, x: Floats, force: Floats) -> float:
    """Largest deviation of a force (n,) from its pad's share of the curve, over that share."""
    share = shares(tube, x)
    return float(np.max(np.abs(force - share) / np.maximum(share, LEAST_SHARE * tube.total / x.size)))
