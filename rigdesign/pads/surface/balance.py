"""Sum and first moments of the pads, which every choice of pads in plan must hit exactly."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.target.curve import Floats
from rigdesign.target.model import Target


@dataclass(frozen=True)
class Balance:
    """What the pads' forces must sum to, `total` [N] > 0, and where their resultant must stand, x, y [m].

    `size` [m] is the specimen's span, by which moments are scaled.
    """

    total: float
    x: float
    y: float
    size: float

    def rows(self, x: Floats, y: Floats) -> Floats:
        """Return (3, n): sum and first moments about the resultant of unit forces at places x, y (n,) [m]."""
        return np.stack([np.ones(x.size), (x - self.x) / self.size, (y - self.y) / self.size])

    def left_over(self, x: Floats, y: Floats, force: Floats) -> float:
        """Return the largest of what is left of sum and moments, as a fraction of the total."""
        left = (self.rows(x, y) * force).sum(axis=1) - np.array([self.total, 0.0, 0.0])
        return float(np.abs(left).max()) / self.total

    def hit(self, x: Floats, y: Floats, force: Floats) -> Floats:
        """Return the forces (n,) moved onto sum and moments exactly, each in proportion to itself."""
        rows = self.rows(x, y)
        for _ in range(2):  # the second time takes out the rounding of the first
            left = np.array([self.total, 0.0, 0.0]) - (rows * force).sum(axis=1)
            weighed = rows * force
            normal = (weighed[:, None, :] * rows[None, :, :]).sum(axis=2)
            # pads in one line leave one combination of the moments without a say
            force = force + (weighed * np.linalg.lstsq(normal, left, rcond=1e-12)[0][:, None]).sum(axis=0)
        return force


def balance(target: Target, jack_x: float, jack_y: float) -> Balance:
    """Return the balance of the pads under a jack at jack_x, jack_y [m]."""
    specimen = target.brief.specimen
    return Balance(abs(target.net_plan.sums.force), jack_x, jack_y, specimen.right - specimen.left)
