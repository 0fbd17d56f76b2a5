"""Errors of pads that stay, as rows of a matrix over their bands: bands, and shares where pads are judged by them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.pads.model import LEAST_SHARE
from rigdesign.pads.surface.error_rows import error_rows
from rigdesign.pads.surface.shares import tributary_shares
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

EVEN = 480
"""Stations along the span, besides all jumps."""

BLOCK = 4_000_000
"""Most numbers in one block of rigs that are judged together: keeps memory small."""


@dataclass(frozen=True)
class Sight:
    """Rows `matrix` (m, n_pads) [1/N] and constants (m,): a rig's band use is the largest of matrix · force − constant.

    Forces are multiplied by the sign of the target, so that they are positive.
    """

    matrix: Floats
    constant: Floats

    def use(self, force: Floats) -> Floats:
        """Band use of forces (k, n_pads) [N], (k,)."""
        block = max(1, BLOCK // max(1, self.matrix.size))
        parts = [
            # no BLAS product: how that sums depends on where in memory its arrays happen to lie
            (np.einsum("kn,mn->km", force[start : start + block], self.matrix) - self.constant).max(axis=1, initial=0.0)
            for start in range(0, len(force), block)
        ]
        return np.concatenate(parts) if parts else np.zeros(0)


def sight_of(target: Target, x: Floats, y: Floats) -> Sight:
    """The rows of pads at x, y (n_pads,) [m] under a target."""
    rows = error_rows(target, x, y, EVEN)
    matrix = rows.matrix(x, y)
    parts = [matrix / rows.above[:, None], -matrix / rows.below[:, None]]
    constants = [rows.wanted / rows.above, -rows.wanted / rows.below]
    accepted = target.brief.acceptance.share
    if accepted is not None:
        own = shares(target, x, y)
        width = accepted * np.maximum(np.abs(own), LEAST_SHARE * abs(float(own.mean())))
        parts += [np.diag(1.0 / width), np.diag(-1.0 / width)]
        constants += [own / width, -own / width]
    return Sight(np.concatenate(parts), np.concatenate(constants))


def shares(target: Target, x: Floats, y: Floats) -> Floats:
    """What of the net target is nearest to each pad [N], (n_pads,), multiplied by the target's sign."""
    return (1.0 if target.resultant >= 0 else -1.0) * tributary_shares(target, x, y)
