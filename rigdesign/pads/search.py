"""Free places under limits or several bands: places refined step by step from several starts.

The value of a set of places is that of the linear programme over their forces (see `forces`).  A step linearises the
path's ordinates, slopes and errors in the places and solves for the best move inside a trust region; the move counts
only if the programme's value falls.  What is found is local; `bound` proves how much better any arrangement could be.

Unknown in a step: the moves of the places in units of their mean pitch, the errors of the path's ordinates at the
pads in units of `rise`, and the value (band use, or evenness within a given band use).
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import scipy.sparse as sp
from scipy.optimize import linprog

from rigdesign.pads.forces import LEAST_SHARE, ErrorRows, ForceProgramme, Forces, shares
from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

# The trust region starts at this part of the mean pitch, and the search ends below the other.
FIRST_MOVE, LAST_MOVE = 0.4, 2e-4
# Most steps of one search; each is one programme for the move and one for the forces.
MOST_STEPS = 60


@dataclass(frozen=True)
class Limits:
    """Pad limits in the search: forces [N], least pitch [m], and stretches (k, 2) [m] for the pads' centres."""

    least: float
    largest: float
    pitch: float
    stretches: Floats


@dataclass(frozen=True)
class Arrangement:
    """Places (n,) [m] with their forces."""

    x: Floats
    forces: Forces


@dataclass(frozen=True)
class Search:
    """A search for places in one tube: of least band use, or with `use_limit` of most even forces within that use."""

    tube: Tube
    limits: Limits
    use_limit: float | None = None
    ratio: float | None = None

    def value(self, x: Floats) -> tuple[float, Forces | None]:
        """Least band use, or least evenness, of pads at x (n,); infinite where the limits leave no forces."""
        programme = ForceProgramme(
            with_stations(self.tube, x), x, self.limits.least, self.limits.largest, shares(self.tube, x)
        )
        found = programme.least_use() if self.use_limit is None else programme.most_even(self.use_limit, self.ratio)
        if found is None:
            return float("inf"), None
        return (found.use if self.use_limit is None else found.evenness), found

    def refine(self, x: Floats, report: Callable[[int], None] | None = None) -> Arrangement | None:
        """Best places found from x (n,); None if no step reached forces within the limits."""
        best, forces = self.value(x)
        move, span = FIRST_MOVE, self.tube.x[-1] - self.tube.x[0]
        pitch = span / x.size
        for step in range(MOST_STEPS):
            if report:
                report(step)
            tried = self._step(x, forces, move * pitch)
            value, found = self.value(tried) if tried is not None else (np.inf, None)
            if tried is not None and found is not None and value < best * (1 - 1e-7):
                gain = best - value
                x, best, forces = tried, value, found
                move = min(1.5 * move, FIRST_MOVE)
                if gain < 1e-5 * value:
                    move = min(move, 10 * LAST_MOVE)
            else:
                move /= 3
            if move < LAST_MOVE:
                break
        return None if forces is None else Arrangement(x, forces)

    def _step(self, x: Floats, forces: Forces | None, reach: float) -> Floats | None:
        """Places after the best linearised move of at most `reach` [m]; None if the move's programme has no answer."""
        force = forces.force if forces is not None else _balanced(self.tube, x)
        model = _Linear(self.tube, x, force)
        n = x.size
        blocks, values = [], []
        for matrix, constant, width in model.errors():
            if self.use_limit is None:
                blocks.append(sp.hstack([matrix, -width[:, None]]))
                values.append(-constant)
            else:
                blocks.append(sp.hstack([matrix, sp.csr_array((matrix.shape[0], 1))]))
                values.append(self.use_limit * width - constant)
        matrix, constant = model.forces()
        mean = self.tube.total / n
        rows = [(-matrix, constant - self.limits.least)]
        if np.isfinite(self.limits.largest):
            rows.append((matrix, self.limits.largest - constant))
        rows.append((-model.pitch(), np.diff(x) / model.step - self.limits.pitch / model.step))
        for part, value in rows:
            blocks.append(sp.hstack([part / mean if part.shape[0] == n else part, sp.csr_array((part.shape[0], 1))]))
            values.append(value / mean if part.shape[0] == n else value)
        if self.use_limit is not None:
            blocks_even, values_even = model.evenness()
            blocks += blocks_even
            values += values_even
        low, high = self._bounds(x, reach)
        bounds = [*zip(low / model.step, high / model.step, strict=True), *[(None, None)] * n, (0, None)]
        fixed, fixed_values = model.ends()
        cost = np.append(np.zeros(2 * n), 1.0)
        result = linprog(
            cost,
            A_ub=sp.vstack(blocks, format="csr"),
            b_ub=np.concatenate(values),
            A_eq=sp.hstack([fixed, sp.csr_array((2, 1))], format="csr"),
            b_eq=fixed_values,
            bounds=bounds,
            method="highs",
        )
        return x + result.x[:n] * model.step if result.status == 0 else None

    def _bounds(self, x: Floats, reach: float) -> tuple[Floats, Floats]:
        """Least and largest move of each pad: within reach, and inside the allowed stretch nearest to it."""
        stretches = self.limits.stretches
        away = np.maximum(stretches[:, 0] - x[:, None], x[:, None] - stretches[:, 1])
        mine = stretches[np.argmin(away, axis=1)]
        low, high = np.maximum(mine[:, 0] - x, -reach), np.minimum(mine[:, 1] - x, reach)
        outside = low > high
        nearest = np.where(mine[:, 0] > x, mine[:, 0] - x, mine[:, 1] - x)
        return np.where(outside, nearest, low), np.where(outside, nearest, high)


def with_stations(tube: Tube, x: Floats) -> Tube:
    """The tube with the places x (n,) [m] among its stations, so that corners of the path are judged exactly there."""
    new = np.setdiff1d(x, tube.x)
    return tube.with_stations(new) if new.size else tube


def _balanced(tube: Tube, x: Floats) -> Floats:
    """Forces (n,) near the pads' shares with the right sum and first moment, whatever the limits."""
    share = shares(tube, x)
    gap = tube.total * tube.jack_x - share @ x
    lever = x - x.mean()
    return share + gap * lever / (lever @ lever) if x.size > 1 else share


class _Linear:
    """Errors, forces and shares of the path as linear functions of the unknown moves and ordinates."""

    def __init__(self, tube: Tube, x: Floats, force: Floats) -> None:
        """Linearise at places x (n,) [m] with forces (n,) [N]."""
        self.tube, self.x, n = tube, x, x.size
        span = tube.x[-1] - tube.x[0]
        self.step, self.rise = span / n, tube.total * span / (16 * n**2)
        self.slope = np.concatenate([[-tube.total], -tube.total + np.cumsum(force)])
        self.slope[-1] = 0.0
        y = np.zeros(n)
        y[0] = tube.total * (tube.jack_x - x[0])
        for k in range(1, n):
            y[k] = y[k - 1] + self.slope[k] * (x[k] - x[k - 1])
        self.y = y
        self.wanted = np.interp(x, tube.x, tube.moment_wanted)
        self.shear = np.interp(x, tube.x, tube.shear_wanted)
        eye = sp.identity(n, format="csr")
        # unknowns: moves (n) [step], errors of the ordinates at the moved pads (n) [rise]
        self.moved = sp.hstack([eye * self.step, sp.csr_array((n, n))], format="csr")
        falls = sp.diags_array(-self.shear * self.step)
        self.lifted = sp.hstack([falls, eye * self.rise], format="csr")
        self.base = self.wanted

    def pitch(self) -> sp.csr_array:
        """Change of the distances between neighbours (n − 1, 2 n) [step]."""
        return (self.moved[1:] - self.moved[:-1]) / self.step

    def ends(self) -> tuple[sp.csr_array, Floats]:
        """Rows saying that the first corner lies on the first line and the last on zero."""
        tube = self.tube
        first = (self.lifted[:1] + tube.total * self.moved[:1]) / self.rise
        value = (tube.total * (tube.jack_x - self.x[0]) - self.base[0]) / self.rise
        return sp.vstack([first, self.lifted[-1:] / self.rise], format="csr"), np.array(
            [value, -self.base[-1] / self.rise]
        )

    def slopes(self) -> tuple[sp.csr_array, Floats]:
        """Slopes of the n + 1 lines (n + 1, 2 n) and their constants."""
        gap = np.diff(self.x)
        inner = self.slope[1:-1]
        matrix = sp.diags_array(1 / gap) @ (
            self.lifted[1:] - self.lifted[:-1] - sp.diags_array(inner) @ (self.moved[1:] - self.moved[:-1])
        )
        zero = sp.csr_array((1, 2 * self.x.size))
        constant = np.concatenate([[-self.tube.total], np.diff(self.base) / gap, [0.0]])
        return sp.vstack([zero, matrix, zero], format="csr"), constant

    def forces(self) -> tuple[sp.csr_array, Floats]:
        """Forces (n, 2 n) and constants (n,)."""
        matrix, constant = self.slopes()
        return (matrix[1:] - matrix[:-1]).tocsr(), np.diff(constant)

    def errors(self) -> list[tuple[sp.csr_array, Floats, Floats]]:
        """Rows, constants and widths such that rows·u + constant ≤ use·width keeps the tube, both edges."""
        parts: list[ErrorRows] = []
        if self.tube.is_judged[0]:
            parts += [self._stations(), self._corners()]
        if self.tube.is_judged[1]:
            parts += self._steps()
        return [edge for part in parts for edge in part.edges()]

    def _stations(self) -> ErrorRows:
        """Moment error at stations between the pads."""
        tube, n = self.tube, self.x.size
        line = np.searchsorted(self.x, tube.x, side="right")
        rows = np.flatnonzero((line > 0) & (line < n))
        k = line[rows]
        t = (tube.x[rows] - self.x[k - 1]) / (self.x[k] - self.x[k - 1])
        left, right = sp.diags_array(1 - t), sp.diags_array(t)
        slope = sp.diags_array(self.slope[k])
        ordinate = left @ self.lifted[k - 1] + right @ self.lifted[k]
        shift = slope @ (left @ self.moved[k - 1] + right @ self.moved[k])
        error = (1 - t) * self.base[k - 1] + t * self.base[k] - tube.moment_wanted[rows]
        widths = tube.moment_below[rows], tube.moment_above[rows]
        return ErrorRows((ordinate - shift).tocsr(), error, *widths, self.rise)

    def _corners(self) -> ErrorRows:
        """Moment error at the moved pads: the unknown itself."""
        tube, n = self.tube, self.x.size
        matrix = sp.hstack([sp.csr_array((n, n)), sp.identity(n, format="csr") * self.rise], format="csr")
        below, above = (np.interp(self.x, tube.x, width) for width in tube.moment_width)
        return ErrorRows(matrix, np.zeros(n), below, above, self.rise)

    def _steps(self) -> list[ErrorRows]:
        """Shear error of each line at its two ends, which move, and at stations between."""
        tube, n = self.tube, self.x.size
        matrix, constant = self.slopes()
        unit = tube.total / n
        load = np.maximum(-np.gradient(np.interp(self._nearby(), tube.x, tube.shear_wanted), axis=1)[:, 1], 0)
        load = load / (self._nearby()[:, 1] - self._nearby()[:, 0])
        below, above = (np.interp(self.x, tube.x, width) for width in tube.shear_width)
        parts = []
        for lines in (slice(0, n), slice(1, n + 1)):
            rows = -matrix[lines] + sp.diags_array(load) @ self.moved
            parts.append(ErrorRows(rows.tocsr(), -constant[lines] - self.shear, below, above, unit))
        line = np.searchsorted(self.x, tube.x, side="right")
        error = -constant[line] - tube.shear_wanted
        parts.append(ErrorRows(-matrix[line], error, tube.shear_below, tube.shear_above, unit))
        return parts

    def _nearby(self) -> Floats:
        reach = 0.02 * self.step
        return np.asarray(self.x[:, None] + np.array([-reach, 0.0, reach]))

    def evenness(self) -> tuple[list[sp.csr_array], list[Floats]]:
        """Rows that bound each force's deviation from its pad's share by the value sought."""
        tube, n = self.tube, self.x.size
        middle = (self.x[1:] + self.x[:-1]) / 2
        near = middle[:, None] + 0.02 * self.step * np.array([-1.0, 1.0])
        load = -np.diff(np.interp(near, tube.x, tube.shear), axis=1)[:, 0] / (0.04 * self.step)
        drift = sp.diags_array(load / 2) @ (self.moved[1:] + self.moved[:-1])
        zero = sp.csr_array((1, 2 * n))
        # share k = load from the middle before it to the middle after it
        grown = (sp.vstack([drift, zero]) - sp.vstack([zero, drift])).tocsr()
        matrix, constant = self.forces()
        share = shares(tube, self.x)
        scale = np.maximum(share, LEAST_SHARE * tube.total / n)
        blocks, values = [], []
        for sign in (1.0, -1.0):
            blocks.append(sp.hstack([sp.diags_array(sign / scale) @ (matrix - grown), -np.ones((n, 1))]))
            values.append(sign * (share - constant) / scale)
        return blocks, values
