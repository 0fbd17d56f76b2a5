"""The path of the pads near given places, linear in small moves of the places and in the errors of its corners.

Unknowns u (2 n,): moves of the places in units of `step`, then errors of the path's ordinates at the moved pads, in
units of `rise`.  Everything here is matrix · u + constant.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from rigdesign.pads.forces import shares
from rigdesign.pads.model import LEAST_SHARE
from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

# Differences of the target's shear, which give its running load, are taken over this part of the mean pitch.
NEAR = 0.02


class Edges(NamedTuple):
    """Rows (k, 2 n), constants (k,), widths (k,): inside where rows · u + constant ≤ band use · width."""

    rows: Floats
    constant: Floats
    width: Floats


class LinearPath:
    """Errors, forces and shares of a path as linear functions of the unknowns."""

    def __init__(self, tube: Tube, x: Floats, force: Floats) -> None:
        """Linearise at places x (n,) [m] with forces (n,) [N]."""
        self.tube, self.x, n = tube, x, x.size
        span = tube.x[-1] - tube.x[0]
        self.step, self.rise = span / n, tube.total * span / (16 * n**2)
        self.slope = np.append(-tube.total + np.concatenate([[0.0], np.cumsum(force)[:-1]]), 0.0)
        self.wanted = np.interp(x, tube.x, tube.moment_wanted)
        self.shear = np.interp(x, tube.x, tube.shear_wanted)
        ordinate = tube.total * (tube.jack_x - x[0]) + np.concatenate([[0.0], np.cumsum(self.slope[1:-1] * np.diff(x))])
        self.start = np.concatenate([np.zeros(n), (ordinate - self.wanted) / self.rise])
        self.moved = np.concatenate([np.eye(n) * self.step, np.zeros((n, n))], axis=1)
        self.lifted = np.concatenate([np.diag(-self.shear * self.step), np.eye(n) * self.rise], axis=1)

    def pads(self, u: Floats) -> tuple[Floats, Floats]:
        """Places (n,) and forces (n,) that the unknowns mean: not linearised, sum and first moment exact."""
        tube, n = self.tube, self.x.size
        x = self.x + self.step * u[:n]
        ordinate = np.interp(x, tube.x, tube.moment_wanted) + self.rise * u[n:]
        ordinate[0], ordinate[-1] = tube.total * (tube.jack_x - x[0]), 0.0
        return x, np.diff(np.concatenate([[-tube.total], np.diff(ordinate) / np.diff(x), [0.0]]))

    def ends(self) -> tuple[Floats, Floats]:
        """Rows (2, 2 n) and values saying that the first corner lies on the first line and the last on zero."""
        tube = self.tube
        first = self.lifted[0] + tube.total * self.moved[0]
        values = np.array([tube.total * (tube.jack_x - self.x[0]) - self.wanted[0], -self.wanted[-1]])
        return np.stack([first, self.lifted[-1]]) / self.rise, values / self.rise

    def slopes(self) -> tuple[Floats, Floats]:
        """Slopes of the n + 1 lines: (n + 1, 2 n) and (n + 1,)."""
        gap = np.diff(self.x)
        turn = self.slope[1:-1, None] * np.diff(self.moved, axis=0)
        zero = np.zeros((1, 2 * self.x.size))
        matrix = np.concatenate([zero, (np.diff(self.lifted, axis=0) - turn) / gap[:, None], zero])
        return matrix, np.concatenate([[-self.tube.total], np.diff(self.wanted) / gap, [0.0]])

    def forces(self) -> tuple[Floats, Floats]:
        """Forces: (n, 2 n) and (n,) [N]."""
        matrix, constant = self.slopes()
        return np.diff(matrix, axis=0), np.diff(constant)

    def deviations(self) -> tuple[Floats, Floats]:
        """Deviation of each force from its pad's share, over that share: (n, 2 n) and (n,)."""
        tube, n = self.tube, self.x.size
        middle = (self.x[1:] + self.x[:-1]) / 2
        reach = NEAR * self.step
        load = (np.interp(middle - reach, tube.x, tube.shear) - np.interp(middle + reach, tube.x, tube.shear)) / (
            2 * reach
        )
        drift = load[:, None] / 2 * (self.moved[1:] + self.moved[:-1])
        zero = np.zeros((1, 2 * n))
        # a pad's share grows with the middle beyond it and shrinks with the middle before it
        grown = np.concatenate([drift, zero]) - np.concatenate([zero, drift])
        matrix, constant = self.forces()
        share = shares(tube, self.x)
        scale = np.maximum(share, LEAST_SHARE * tube.total / n)
        return (matrix - grown) / scale[:, None], (constant - share) / scale

    def edges(self) -> Edges:
        """Both edges of all bands that are judged."""
        parts = []
        if self.tube.is_judged[0]:
            parts += [self._between(), self._corners()]
        if self.tube.is_judged[1]:
            parts += self._steps()
        return Edges(*(np.concatenate([part[i] for part in parts]) for i in range(3)))

    def _between(self) -> Edges:
        """Moment errors at stations between the pads."""
        tube, n = self.tube, self.x.size
        line = np.searchsorted(self.x, tube.x, side="right")
        rows = np.flatnonzero((line > 0) & (line < n))
        k = line[rows]
        t = ((tube.x[rows] - self.x[k - 1]) / (self.x[k] - self.x[k - 1]))[:, None]
        ordinate = (1 - t) * self.lifted[k - 1] + t * self.lifted[k]
        shift = self.slope[k][:, None] * ((1 - t) * self.moved[k - 1] + t * self.moved[k])
        error = (1 - t[:, 0]) * self.wanted[k - 1] + t[:, 0] * self.wanted[k] - tube.moment_wanted[rows]
        return _both(ordinate - shift, error, tube.moment_below[rows], tube.moment_above[rows], self.rise)

    def _corners(self) -> Edges:
        """Moment errors at the moved pads: the unknowns themselves."""
        tube, n = self.tube, self.x.size
        matrix = np.concatenate([np.zeros((n, n)), np.eye(n) * self.rise], axis=1)
        below, above = (np.interp(self.x, tube.x, width) for width in tube.moment_width)
        return _both(matrix, np.zeros(n), below, above, self.rise)

    def _steps(self) -> list[Edges]:
        """Shear errors of each line at its two ends, which move, and at stations between."""
        tube, n = self.tube, self.x.size
        matrix, constant = self.slopes()
        unit, reach = tube.total / n, NEAR * self.step
        fall = np.interp(self.x - reach, tube.x, tube.shear_wanted) - np.interp(
            self.x + reach, tube.x, tube.shear_wanted
        )
        load = (fall / (2 * reach))[:, None] * self.moved
        below, above = (np.interp(self.x, tube.x, width) for width in tube.shear_width)
        parts = [
            _both(load - matrix[lines], -constant[lines] - self.shear, below, above, unit)
            for lines in (slice(0, n), slice(1, n + 1))
        ]
        line = np.searchsorted(self.x, tube.x, side="right")
        error = -constant[line] - tube.shear_wanted
        return [*parts, _both(-matrix[line], error, tube.shear_below, tube.shear_above, unit)]


def _both(matrix: Floats, error: Floats, below: Floats, above: Floats, unit: float) -> Edges:
    """Upper and lower edge of errors matrix · u + error, all divided by `unit`."""
    rows = np.concatenate([matrix, -matrix]) / unit
    return Edges(rows, np.concatenate([error, -error]) / unit, np.concatenate([above, below]) / unit)
