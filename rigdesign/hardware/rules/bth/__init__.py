"""The checks of ASME BTH-1, Design of Below-the-Hook Lifting Devices (2017), static loads.

In: a member's state (`rules.model`) and the design factor Nd: 2.00 of category A, 3.00 of category B or over people.
Out: results with their working in the standard's symbols.

Quoted from published calculation sheets: 3-3.3 (pin-connected plates) and the design factors.  From memory: the rest,
and the numbers of sub-clauses.  Welds and fatigue (3-3.4, 3-4) are not checked.

Depends on: hardware.model, rules.model, rules.common.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from rigdesign.hardware.rules.bth import bars, pins, rods
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
class Bth:
    """BTH-1 at one design factor `Nd`."""

    Nd: float
    name: Literal["BTH-1"] = "BTH-1"

    def lever(self, bar: Bar) -> tuple[Result, ...]:
        """Bending on the net section at the pivot, shear, lateral-torsional buckling, deflection."""
        Nd = self.Nd
        return bars.bending(bar, Nd), bars.shear(bar, Nd), bars.buckling(bar, Nd), deflection(bar)

    def hole(self, hole: PlateHole) -> tuple[Result, ...]:
        """Bearing, tension beside the hole, fracture beyond it, tear-out, dishing."""
        Nd = self.Nd
        return (
            pins.bearing(hole, Nd),
            pins.net_tension(hole, Nd),
            pins.fracture(hole, Nd),
            pins.tear_out(hole, Nd),
            pins.dishing(hole, Nd),
        )

    def pin(self, pin: PinState) -> tuple[Result, ...]:
        """Shear, bending, both together."""
        return pins.pin_shear(pin, self.Nd), pins.pin_bending(pin, self.Nd), pins.pin_both(pin, self.Nd)

    def rod(self, rod: RodState) -> tuple[Result, ...]:
        """Tension at the thread, or buckling with eccentricity."""
        if rod.compressed:
            return rods.rod_buckling(rod, self.Nd), rods.rod_both(rod, self.Nd)
        return rods.rod_yield(rod, self.Nd), rods.rod_rupture(rod, self.Nd)

    def strap(self, strap: StrapState) -> tuple[Result, ...]:
        """Tension on the whole section and beside the hole."""
        return rods.strap_yield(strap, self.Nd), rods.strap_rupture(strap, self.Nd)

    def webbing(self, webbing: WebbingState) -> tuple[Result, ...]:
        """The load against the breaking load."""
        return (webbing_tension(webbing),)

    def plate(self, plate: PlateBending) -> tuple[Result, ...]:
        """Bending about the worst line, punching at the washer."""
        return bars.plate_bending(plate, self.Nd), bars.punching(plate, self.Nd)
