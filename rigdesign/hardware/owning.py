"""What the rig's own weight does to the bands, and what the jacks' forces must then be.

At level f of the brief's load, with s the factor on the jacks' forces, a row's error is

    error = s · from_jacks + from_weight + f · less

rows being those by which pads are judged, and bands shrink with f.  The largest of such lines is convex in s.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from rigdesign.hardware.model import Mass
from rigdesign.hardware.wiring import Wired, link_forces, peak_jacks
from rigdesign.pads.surface.error_rows import ErrorRows, error_rows
from rigdesign.target.curve import Floats
from rigdesign.target.plan_load import loads_at
from rigdesign.words import STANDARD_GRAVITY

FACTORS = 3.0
"""The jack's force is looked for up to so many times what it would be without weight, and as far again as twice the
weight of the rig takes it, either way."""

KEPT = 1.0 + 1e-9
"""Band use up to which a rig keeps its bands, rounding allowed for."""

_STEPS = 90
_GOLDEN = (5**0.5 - 1) / 2


def pad_forces(wiring: Wired, masses: Mapping[str, Mass]) -> tuple[Floats, Floats]:
    """Return the pads' forces [N]: what the jacks' forces bring, and what weight brings; (n_pads,) each."""
    rig = wiring.rig
    forces = link_forces(wiring, masses)
    gravity = rig.plan.target.brief.specimen.gravity * STANDARD_GRAVITY
    led, fixed = np.zeros(rig.pad_x.size), np.zeros(rig.pad_x.size)
    for pad in range(rig.pad_x.size):
        link = wiring.above[f"pad {pad + 1}"]
        force = forces[link.name]
        led[pad] = force.rate * rig.trees[link.tree].force
        fixed[pad] = force.lower + gravity * (masses[f"pad {pad + 1}"].mass if f"pad {pad + 1}" in masses else 0.0)
    return led, fixed


@dataclass(frozen=True)
class Bands:
    """The rows by which a rig's pads are judged, made ready for any masses.

    `matrix` (m, n_pads) is what unit forces bring, `gravity` (m,) [N or N·m] what the specimen's weight brings; both
    have the sign of the target.
    """

    wiring: Wired
    rows: ErrorRows
    matrix: Floats
    gravity: Floats

    def use(self, masses: Mapping[str, Mass]) -> float:
        """Return the least band use at the brief's load with the members' weight, over all factors on the jacks."""
        return self._least(masses, 1.0)[1]

    def held_jacks(self, masses: Mapping[str, Mass]) -> list[float]:
        """Return the jacks' forces [N] that members must bear, at the test's peak, overshoot included.

        Those at which the pads together bring what the peak asks of them, times the overshoot; or those of least band
        use at the peak, where these are more and the rig keeps its bands without weight.
        """
        brief = self.wiring.rig.plan.target.brief
        even = [brief.hardware.overshoot * force for force in peak_jacks(self.wiring, masses)]
        if self.use({}) > KEPT:
            return even
        factor = self._least(masses, brief.peak)[0]
        best = [factor * tree.force for tree in self.wiring.rig.trees]
        return best if abs(sum(best)) > abs(sum(even)) else even

    def _least(self, masses: Mapping[str, Mass], level: float) -> tuple[float, float]:
        """The factor of least band use at a level of the brief's load, and that use."""
        sign = 1.0 if self.wiring.rig.plan.target.resultant >= 0 else -1.0
        led, fixed = pad_forces(self.wiring, masses)
        from_jacks = (self.matrix * led).sum(axis=1) * sign
        wanted = level * self.rows.wanted + (level - 1.0) * self.gravity
        from_weight = (self.matrix * fixed).sum(axis=1) * sign - wanted
        above, below = level * self.rows.above, level * self.rows.below

        def use(factor: float) -> float:
            error = factor * from_jacks + from_weight
            return float(np.maximum(error / above, -error / below).max(initial=0.0))

        weight = 2.0 * abs(float(fixed.sum() / led.sum()))
        low, high = -weight, level * FACTORS + weight
        for _ in range(_STEPS):
            first, second = high - _GOLDEN * (high - low), low + _GOLDEN * (high - low)
            if use(first) <= use(second):
                high = second
            else:
                low = first
        factor = (low + high) / 2
        return factor, use(factor)


def bands_of(wiring: Wired) -> Bands:
    """Return the rows by which the pads of a rig are judged."""
    rig = wiring.rig
    target = rig.plan.target
    rows = error_rows(target, rig.pad_x, rig.pad_y)
    sign = 1.0 if target.resultant >= 0 else -1.0
    parts = [loads_at(target.gravity_plan, rows.specimen, one.quantity, one.at, one.side) for one in rows.blocks]
    gravity = sign * np.concatenate([np.empty(0), *parts])
    return Bands(wiring, rows, rows.matrix(rig.pad_x, rig.pad_y), gravity)
