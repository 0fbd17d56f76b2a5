"""AISC 360-16, allowable strength design: pin-connected plates (D5), bearing (J7) and pins.

Depends on: rules.model, rules.common, aisc.bars.
"""

from __future__ import annotations

from math import pi

from rigdesign.hardware.rules.aisc.bars import OMEGA, OMEGA_RUPTURE, plastic_moment
from rigdesign.hardware.rules.common import (
    BEARING,
    DISHING,
    FRACTURE,
    NET_TENSION,
    PIN_BENDING,
    PIN_SHEAR,
    TEAR_OUT,
    judge,
    not_negative,
    pin_moment,
    pin_working,
    round_modulus,
)
from rigdesign.hardware.rules.model import PinState, PlateHole, Result, Working

EXTRA_WIDTH = 0.016
"""be = 2 t + 16 mm (0.63 in) is the most width that counts on each side of a hole, D5.1."""

EXTENSION = 1.33
"""Least clear steel beyond the hole over the effective width, D5.2."""


def _working(hole: PlateHole, *more: tuple[str, float, str]) -> Working:
    return (("P", hole.load, "N"), ("n", hole.count, ""), ("t", hole.thickness, "m"), *more)


def _rupture(check: str, clause: str, hole: PlateHole, be: float) -> Result:
    """Tension rupture on a width be on each side: P ≤ n Fu (2 t be)/2.00."""
    load, t = not_negative(hole.load), hole.thickness
    Fu = hole.material.fu(t)
    working = _working(hole, ("be", be, "m"), ("Fu", Fu, "Pa"), ("Ω", OMEGA_RUPTURE, ""))
    return judge(check, clause, load, hole.count * Fu * 2 * t * be / OMEGA_RUPTURE, "N", working)


def net_tension(hole: PlateHole) -> Result:
    """Tension beside the hole: P ≤ n Fu (2 t be)/2.00, be the clear width, 2 t + 16 mm at most.

    Source: AISC 360-16, D5.1(a).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    return _rupture(NET_TENSION, "AISC 360 D5.1(a)", hole, min(hole.side, 2 * hole.thickness + EXTRA_WIDTH))


def fracture(hole: PlateHole) -> Result:
    """Steel beyond the hole: P ≤ n Fu (2 t be)/2.00 with be = a/1.33.

    D5.2 asks for a ≥ 1.33 be.  Where the plate ends sooner, the effective width that goes with a is taken instead.
    Source: AISC 360-16, D5.2 with D5.1(a).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    return _rupture(FRACTURE, "AISC 360 D5.2", hole, hole.beyond / EXTENSION)


def dishing(hole: PlateHole) -> Result:
    """Dishing of a thin plate: P ≤ n Fu (2 t be)/2.00 with the most width that counts, be = 2 t + 16 mm.

    That limit on the width is what D5.1 has against it; this tells how near it is.  Source: AISC 360-16, D5.1(a).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    return _rupture(DISHING, "AISC 360 D5.1(a), 2t + 16 mm", hole, 2 * hole.thickness + EXTRA_WIDTH)


def tear_out(hole: PlateHole) -> Result:
    """Tear-out on two planes: P ≤ n 0.6 Fu Asf/2.00, Asf = 2 t (a + d/2).  Source: AISC 360-16, D5.1(b).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, a, d = not_negative(hole.load), hole.thickness, hole.beyond, hole.pin
    Fu = hole.material.fu(t)
    area = 2 * t * (a + d / 2) if a > 0 and d <= hole.hole else 0.0
    working = _working(
        hole, ("a", a, "m"), ("d", d, "m"), ("Asf", area, "m²"), ("Fu", Fu, "Pa"), ("Ω", OMEGA_RUPTURE, "")
    )
    return judge(TEAR_OUT, "AISC 360 D5.1(b)", load, hole.count * 0.6 * Fu * area / OMEGA_RUPTURE, "N", working)


def bearing(hole: PlateHole) -> Result:
    """Bearing of the pin on the plate: P ≤ n 1.8 Fy d t/2.00, Fy that of the plate.  Source: AISC 360-16, J7(a).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, d = not_negative(hole.load), hole.thickness, hole.pin
    Fy = hole.material.fy(t)
    working = _working(hole, ("d", d, "m"), ("Fy", Fy, "Pa"), ("Ω", OMEGA_RUPTURE, ""))
    limit = hole.count * 1.8 * Fy * d * t / OMEGA_RUPTURE if d <= hole.hole else 0.0
    return judge(BEARING, "AISC 360 J7(a)", load, limit, "N", working)


def pin_shear(pin: PinState) -> Result:
    """Shear of the pin on each of two planes: F/2 ≤ 0.6 Fy A/1.67.  Source: AISC 360-16, chapter G (from memory).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, area = not_negative(pin.load), pi * pin.pin**2 / 4
    Fy = pin.material.fy(pin.pin)
    working = (*pin_working(pin), ("A", area, "m²"), ("Fy", Fy, "Pa"), ("Ω", OMEGA, ""))
    return judge(PIN_SHEAR, "AISC 360 G1", load / 2, 0.6 * Fy * area / OMEGA, "N", working)


def pin_bending(pin: PinState) -> Result:
    """Bending of the pin as a round bar: M ≤ Mp/1.67, Mp = Fy Z ≤ 1.6 Fy S, Z = d³/6; M = F/8 (b + 4c + 2a).

    Source: AISC 360-16, F11.1 (from memory); M after EN 1993-1-8, Figure 3.11.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    moment, S, Z = pin_moment(pin), round_modulus(pin.pin), pin.pin**3 / 6
    Fy = pin.material.fy(pin.pin)
    nominal = plastic_moment(Fy, Z, S)
    working = (*pin_working(pin), ("Z", Z, "m³"), ("S", S, "m³"), ("Fy", Fy, "Pa"), ("Ω", OMEGA, ""))
    return judge(PIN_BENDING, "AISC 360 F11.1", moment, nominal / OMEGA, "N·m", working)
