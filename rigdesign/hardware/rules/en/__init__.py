"""The checks of EN 1993-1-1 and EN 1993-1-8 (2005).

In: a member's state (`rules.model`) and the factor on loads γF, by which every load but that of webbing and of the
deflection is multiplied.  Out: results with their working in the standard's symbols.

Partial factors are the recommended ones; a national annex may ask for others.  Formulas of pins and of Table 3.9 are
quoted from published copies, the rest from memory.  Welds and fatigue are not checked.

Depends on: hardware.model, rules.model, rules.common.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from rigdesign.hardware.rules.common import deflection, webbing_tension
from rigdesign.hardware.rules.en import bars, pins, rods
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
class En:
    """EN 1993 at one factor on loads."""

    load_factor: float
    name: Literal["EN 1993"] = "EN 1993"

    def lever(self, bar: Bar) -> tuple[Result, ...]:
        """Bending on the net section at the pivot, shear, lateral-torsional buckling, deflection."""
        return (
            bars.bending(bar, self.load_factor),
            bars.shear(bar, self.load_factor),
            bars.buckling(bar, self.load_factor),
            deflection(bar),
        )

    def hole(self, hole: PlateHole) -> tuple[Result, ...]:
        """Bearing, tension beside the hole, steel beyond it, tear-out, thickness."""
        return (
            pins.bearing(hole, self.load_factor),
            pins.net_tension(hole, self.load_factor),
            pins.fracture(hole, self.load_factor),
            pins.tear_out(hole, self.load_factor),
            pins.dishing(hole, self.load_factor),
        )

    def pin(self, pin: PinState) -> tuple[Result, ...]:
        """Shear, bending, both together."""
        return (
            pins.pin_shear(pin, self.load_factor),
            pins.pin_bending(pin, self.load_factor),
            pins.pin_both(pin, self.load_factor),
        )

    def rod(self, rod: RodState) -> tuple[Result, ...]:
        """Tension at the thread, or buckling with eccentricity."""
        if rod.compressed:
            return rods.rod_buckling(rod, self.load_factor), rods.rod_both(rod, self.load_factor)
        return rods.rod_yield(rod, self.load_factor), rods.rod_rupture(rod, self.load_factor)

    def strap(self, strap: StrapState) -> tuple[Result, ...]:
        """Tension on the whole section and beside the hole."""
        return rods.strap_yield(strap, self.load_factor), rods.strap_rupture(strap, self.load_factor)

    def webbing(self, webbing: WebbingState) -> tuple[Result, ...]:
        """The load against the breaking load."""
        return (webbing_tension(webbing),)

    def plate(self, plate: PlateBending) -> tuple[Result, ...]:
        """Bending about the worst line, punching at the washer."""
        return bars.plate_bending(plate, self.load_factor), bars.punching(plate, self.load_factor)
