"""Sum and first moments of the pads, which every choice of pads in plan must hit exactly."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

FREE = 3
"""So many pads are needed to hit a sum and two moments."""


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
        return self._moved(x, y, force, np.zeros(force.size))

    def hit_within(self, x: Floats, y: Floats, force: Floats, least: float, largest: float) -> Floats:
        """Return the forces (n,) moved onto sum and moments by those of them that no limit holds.

        Limits may be missed where too few pads are left to move.
        """
        held = np.zeros(x.size, bool)
        for _ in range(x.size):
            free, kept = np.where(held, 0.0, force), np.where(held, force, 0.0)
            moved = self._moved(x, y, free, kept)
            inside = np.clip(moved, least, largest)
            if np.array_equal(moved, inside):
                return moved
            more = (moved != inside) & ~held
            if not more.any() or (~(held | more)).sum() < FREE:
                return self.hit(x, y, inside)
            held, force = held | more, inside
        return self.hit(x, y, force)

    def _moved(self, x: Floats, y: Floats, free: Floats, kept: Floats) -> Floats:
        """Forces `free` (n,) moved so that with those kept the sums are hit, each in proportion to itself."""
        rows = self.rows(x, y)
        for _ in range(2):  # the second time takes out the rounding of the first
            left = np.array([self.total, 0.0, 0.0]) - (rows * (free + kept)).sum(axis=1)
            weighed = rows * free
            normal = (weighed[:, None, :] * rows[None, :, :]).sum(axis=2)
            # pads in one line leave one combination of the moments without a say
            free = free + (weighed * np.linalg.lstsq(normal, left, rcond=1e-12)[0][:, None]).sum(axis=0)
        return free + kept


def balance(target: Target, jack_x: float, jack_y: float) -> Balance:
    """Return the balance of the pads under a jack at jack_x, jack_y [m]."""
    specimen = target.brief.specimen
    return Balance(abs(target.net_plan.sums.force), jack_x, jack_y, specimen.right - specimen.left)
