"""The checks of ANSI/AISC 360 (2016), allowable strength design, with its own safety factors Ω.

In: a member's state (`rules.model`).  Out: results with their working in the standard's symbols.

D5 and J7 are quoted from published design examples, the rest from memory.  Welds and fatigue are not checked.

Depends on: hardware.model, rules.model, rules.common.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from rigdesign.hardware.rules.aisc import bars, pins, rods
from rigdesign.hardware.rules.common import deflection, webbing_tension
from rigdesign.hardware.rules.model import (
    Bar,
    PinState,
    PlateBending,
    PlateHole,
    Result,
    RodState,
    StrapState,
    WebbingState,
)


@dataclass(frozen=True)
class Aisc:
    """AISC 360 in its allowable-strength form."""

    name: Literal["AISC 360"] = "AISC 360"

    def lever(self, bar: Bar) -> tuple[Result, ...]:
        """Bending on the net section at the pivot, shear, lateral-torsional buckling, deflection."""
        return (
            bars.bending(bar),
            bars.shear(bar),
            bars.buckling(bar),
            deflection(bar),
        )

    def hole(self, hole: PlateHole) -> tuple[Result, ...]:
        """Bearing, tension beside the hole, steel beyond it, tear-out, effective width."""
        return (
            pins.bearing(hole),
            pins.net_tension(hole),
            pins.fracture(hole),
            pins.tear_out(hole),
            pins.dishing(hole),
        )

    def pin(self, pin: PinState) -> tuple[Result, ...]:
        """Shear and bending; AISC 360 asks for no check of both together."""
        return pins.pin_shear(pin), pins.pin_bending(pin)

    def rod(self, rod: RodState) -> tuple[Result, ...]:
        """Tension at the thread, or buckling with eccentricity."""
        if rod.compressed:
            return rods.rod_buckling(rod), rods.rod_both(rod)
        return rods.rod_yield(rod), rods.rod_rupture(rod)

    def strap(self, strap: StrapState) -> tuple[Result, ...]:
        """Tension on the whole section and beside the hole."""
        return rods.strap_yield(strap), rods.strap_rupture(strap)

    def webbing(self, webbing: WebbingState) -> tuple[Result, ...]:
        """The load against the breaking load."""
        return (webbing_tension(webbing),)

    def plate(self, plate: PlateBending) -> tuple[Result, ...]:
        """Bending about the worst line, punching at the washer."""
        return bars.plate_bending(plate), bars.punching(plate)
