"""Whether the rig's own weight breaks a band at the brief's load, whatever the jack's force."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from rigdesign.hardware.model import Mass
from rigdesign.hardware.wiring import Wired, link_forces
from rigdesign.pads.surface.error_rows import error_rows
from rigdesign.target.curve import Floats
from rigdesign.words import STANDARD_GRAVITY

FACTORS = (0.0, 3.0)
"""The jack's force is looked for between these parts of what it would be without weight."""

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


def band_use(wiring: Wired, masses: Mapping[str, Mass]) -> float:
    """Return the least band use at the brief's load with the members' weight, over all factors on the jacks' forces."""
    rig = wiring.rig
    target = rig.plan.target
    rows = error_rows(target, rig.pad_x, rig.pad_y)
    sign = 1.0 if target.resultant >= 0 else -1.0
    led, fixed = pad_forces(wiring, masses)
    matrix = rows.matrix(rig.pad_x, rig.pad_y)
    from_jacks, from_weight = (matrix * led).sum(axis=1) * sign, (matrix * fixed).sum(axis=1) * sign - rows.wanted

    def use(factor: float) -> float:
        error = factor * from_jacks + from_weight
        return float(np.maximum(error / rows.above, -error / rows.below).max(initial=0.0))

    # the largest of straight lines is convex in the factor
    low, high = FACTORS
    for _ in range(_STEPS):
        first, second = high - _GOLDEN * (high - low), low + _GOLDEN * (high - low)
        if use(first) <= use(second):
            high = second
        else:
            low = first
    return use((low + high) / 2)
