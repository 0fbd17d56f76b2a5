"""Free places under limits or several bands: places refined step by step.

A step linearises the path in its places and ordinates (see `linear`) and solves for the best move inside a trust
region.  It counts only if the true value falls: the band use, or the evenness within a given band use.  At the end the
forces at the places found are those of the linear programme (see `forces`), which keeps every limit exactly.  What is
found is local; the bounds in `free` prove how much better any arrangement could be.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from scipy.optimize import linprog

from rigdesign.pads.forces import ForceProgramme, Forces, evenness, shares
from rigdesign.pads.linear import LinearPath
from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

# The trust region starts at this part of the mean pitch, and the search ends below the other.
FIRST_MOVE, LAST_MOVE = 0.4, 2e-4
# Most steps of one search; each is one programme.
MOST_STEPS = 60
# A step keeps this far inside the band use that it must not exceed, so that its curvature does not spoil it.
INSIDE = 3e-3
# Edges of the bands that are used less than this part of the most used one are left out of a step.
IDLE_EDGE = 0.4
# Smallest gain, as a fraction, that a step must bring.
LEAST_GAIN = 1e-6


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

    def forces(self, x: Floats) -> Forces | None:
        """Best forces of pads at x (n,) [m]; None where the limits leave none."""
        tube = _with_stations(self.tube, x)
        programme = ForceProgramme(tube, x, self.limits.least, self.limits.largest, shares(tube, x))
        return programme.least_use() if self.use_limit is None else programme.most_even(self.use_limit, self.ratio)

    def refine(self, x: Floats) -> Arrangement | None:
        """Best arrangement found from places x (n,); None if its places leave no forces within the limits."""
        began = self.forces(x)
        force = began.force if began is not None else _balanced(self.tube, x)
        best = self._value(x, force) if began is not None else np.inf
        move, pitch = FIRST_MOVE, (self.tube.x[-1] - self.tube.x[0]) / x.size
        for _ in range(MOST_STEPS):
            tried = self._step(x, force, move * pitch)
            value = self._value(*tried) if tried is not None else np.inf
            if tried is not None and value < best * (1 - LEAST_GAIN):
                (x, force), best, move = tried, value, min(1.5 * move, FIRST_MOVE)
            else:
                move /= 4
            if move < LAST_MOVE:
                break
        forces = self.forces(x)
        return None if forces is None else Arrangement(x, forces)

    def _value(self, x: Floats, force: Floats) -> float:
        """Band use, or evenness; infinite where a limit is missed."""
        slack = 1e-6 * self.tube.total / x.size
        if force.min() < self.limits.least - slack or force.max() > self.limits.largest + slack:
            return np.inf
        use = float(self.tube.use(x, force))
        if self.use_limit is None:
            return use
        return evenness(self.tube, x, force) if use <= self.use_limit else np.inf

    def _step(self, x: Floats, force: Floats, reach: float) -> tuple[Floats, Floats] | None:
        """Places and forces after the best linearised move of at most `reach` [m]; None if there is none."""
        model = LinearPath(self.tube, x, force)
        blocks, values = self._band_rows(model)
        for rows, value in self._limit_rows(model):
            blocks.append(np.concatenate([rows, np.zeros((len(rows), 1))], axis=1))
            values.append(value)
        if self.use_limit is not None:
            rows, constant = model.deviations()
            for sign in (1.0, -1.0):
                blocks.append(np.concatenate([sign * rows, -np.ones((len(rows), 1))], axis=1))
                values.append(-sign * constant)
        n = x.size
        low, high = self._moves(x, reach)
        free = [(None, None)] * n
        ends, end_values = model.ends()
        result = linprog(
            np.append(np.zeros(2 * n), 1.0),
            A_ub=np.concatenate(blocks),
            b_ub=np.concatenate(values),
            A_eq=np.concatenate([ends, np.zeros((2, 1))], axis=1),
            b_eq=end_values,
            bounds=[*zip(low / model.step, high / model.step, strict=True), *free, (0, None)],
            method="highs",
        )
        if result.status != 0:
            return None
        tried, force = model.pads(result.x[: 2 * n])
        return (tried, force) if np.all(np.diff(tried) > 0) else None

    def _band_rows(self, model: LinearPath) -> tuple[list[Floats], list[Floats]]:
        """Rows that keep the bands: within the value sought, or within the band use given up for evenness."""
        rows, constant, width = model.edges()
        use = ((rows * model.start).sum(axis=1) + constant) / width
        busy = use > IDLE_EDGE * (self.use_limit or float(use.max()))
        rows, constant, width = rows[busy], constant[busy], width[busy]
        if self.use_limit is None:
            return [np.concatenate([rows, -width[:, None]], axis=1)], [-constant]
        limit = self.use_limit * (1 - INSIDE)
        return [np.concatenate([rows, np.zeros((len(rows), 1))], axis=1)], [limit * width - constant]

    def _limit_rows(self, model: LinearPath) -> list[tuple[Floats, Floats]]:
        """Rows that keep least and largest force, the pitch, and, for evenness, the ratio of neighbours."""
        matrix, constant = model.forces()
        mean = self.tube.total / model.x.size
        matrix, constant = matrix / mean, constant / mean
        rows = [(-matrix, constant - self.limits.least / mean)]
        if np.isfinite(self.limits.largest):
            rows.append((matrix, self.limits.largest / mean - constant))
        rows.append((-np.diff(model.moved, axis=0) / model.step, (np.diff(model.x) - self.limits.pitch) / model.step))
        if self.ratio is not None and self.use_limit is not None:
            for a, b in ((slice(1, None), slice(None, -1)), (slice(None, -1), slice(1, None))):
                rows.append((matrix[a] - self.ratio * matrix[b], self.ratio * constant[b] - constant[a]))
        return rows

    def _moves(self, x: Floats, reach: float) -> tuple[Floats, Floats]:
        """Least and largest move of each pad: within reach, and inside the allowed stretch nearest to it."""
        stretches = self.limits.stretches
        away = np.maximum(stretches[:, 0] - x[:, None], x[:, None] - stretches[:, 1])
        mine = stretches[np.argmin(away, axis=1)]
        low, high = np.maximum(mine[:, 0] - x, -reach), np.minimum(mine[:, 1] - x, reach)
        back = np.where(mine[:, 0] > x, mine[:, 0] - x, mine[:, 1] - x)
        return np.where(low > high, back, low), np.where(low > high, back, high)


def _with_stations(tube: Tube, x: Floats) -> Tube:
    """The tube with the places x (n,) [m] among its stations, so that corners of the path are judged exactly there."""
    new = np.setdiff1d(x, tube.x)
    return tube.with_stations(new) if new.size else tube


def _balanced(tube: Tube, x: Floats) -> Floats:
    """Forces (n,) near the pads' shares with the right sum and first moment, whatever the limits."""
    # sums, not matrix products: those may differ in their last digit from one process to the next
    share = shares(tube, x)
    lever = x - x.mean()
    turn = tube.total * tube.jack_x - (share * x).sum()
    return np.asarray(share + turn * lever / (lever * lever).sum()) if x.size > 1 else share
