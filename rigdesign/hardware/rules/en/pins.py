"""EN 1993-1-8 (2005), 3.13: connections with pins.

Every load is multiplied by the factor on loads γF first.  Pins are not taken as replaceable: the limits of 3.13.2 on
stresses in service are not held.

Depends on: rules.model, rules.common, en.bars.
"""

from __future__ import annotations

from math import pi, sqrt

from rigdesign.hardware.rules.common import (
    BEARING,
    DISHING,
    FRACTURE,
    NET_TENSION,
    PIN_BENDING,
    PIN_BOTH,
    PIN_SHEAR,
    TEAR_OUT,
    judge,
    not_negative,
    pin_moment,
    pin_working,
    round_modulus,
)
from rigdesign.hardware.rules.en.bars import GAMMA_M0, GAMMA_M2, SQRT3
from rigdesign.hardware.rules.model import PinState, PlateHole, Result, Working

THICKNESS = 0.7
"""Least thickness of a plate over √(F γM0/fy), Table 3.9, type B."""


def _working(hole: PlateHole, load_factor: float, *more: tuple[str, float, str]) -> Working:
    return (("F", hole.load, "N"), ("γF", load_factor, ""), ("n", hole.count, ""), ("t", hole.thickness, "m"), *more)


def net_tension(hole: PlateHole, load_factor: float) -> Result:
    """Tension beside the hole: the lesser of type A's width c and of the net section.

    c ≥ F γM0/(2 t fy) + d0/3 gives F ≤ n 2 t fy (c − d0/3)/γM0; the net section F ≤ n 0.9 (2 c t) fu/γM2.
    Source: EN 1993-1-8, Table 3.9; EN 1993-1-1, 6.2.3(2).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, c, d0 = not_negative(hole.load), hole.thickness, hole.side, hole.hole
    fy, fu = hole.material.fy(t), hole.material.fu(t)
    by_width = 2 * t * fy * (c - d0 / 3) / GAMMA_M0
    by_area = 0.9 * 2 * c * t * fu / GAMMA_M2
    working = _working(hole, load_factor, ("c", c, "m"), ("d0", d0, "m"), ("fy", fy, "Pa"), ("fu", fu, "Pa"))
    limit = hole.count * min(by_width, by_area)
    return judge(NET_TENSION, "EN 1993-1-8 Table 3.9 (c)", load * load_factor, limit, "N", working)


def fracture(hole: PlateHole, load_factor: float) -> Result:
    """Steel beyond the hole: type A's a ≥ F γM0/(2 t fy) + 2 d0/3 gives F ≤ n 2 t fy (a − 2 d0/3)/γM0.

    Source: EN 1993-1-8, Table 3.9.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, a, d0 = not_negative(hole.load), hole.thickness, hole.beyond, hole.hole
    fy = hole.material.fy(t)
    working = _working(hole, load_factor, ("a", a, "m"), ("d0", d0, "m"), ("fy", fy, "Pa"), ("γM0", GAMMA_M0, ""))
    limit = hole.count * 2 * t * fy * (a - 2 * d0 / 3) / GAMMA_M0
    return judge(FRACTURE, "EN 1993-1-8 Table 3.9 (a)", load * load_factor, limit, "N", working)


def tear_out(hole: PlateHole, load_factor: float) -> Result:
    """Tear-out on two planes from the hole's edge: F ≤ n (2 a t) fy/(√3 γM0).

    Source: EN 1993-1-8, 3.10.2, with no area in tension.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, a = not_negative(hole.load), hole.thickness, hole.beyond
    fy = hole.material.fy(t)
    working = _working(hole, load_factor, ("a", a, "m"), ("Anv", 2 * a * t, "m²"), ("fy", fy, "Pa"))
    limit = hole.count * 2 * a * t * fy / (SQRT3 * GAMMA_M0)
    return judge(TEAR_OUT, "EN 1993-1-8 3.10.2", load * load_factor, limit, "N", working)


def bearing(hole: PlateHole, load_factor: float) -> Result:
    """Bearing of the pin on the plate: F ≤ n 1.5 t d fy/γM0, fy that of the plate.  Source: EN 1993-1-8, Table 3.10.

    Raises
    ------
    ValueError
        Where the load is negative.

    Examples
    --------
    >>> from rigdesign.hardware.model import Material
    >>> steel = Material("S355", (0.016,), (355e6,), (470e6,), 210e9, 7850.0, "EN 10025-2")
    >>> flat = PlateHole(8e3, 2, 0.010, steel, 0.025, 0.0255, 0.0273, 0.0273, 0.040, False)
    >>> round(bearing(flat, 1.5).limit / 1e3, 2)
    266.25
    """
    load, t = not_negative(hole.load), hole.thickness
    fy = hole.material.fy(t)
    working = _working(hole, load_factor, ("d", hole.pin, "m"), ("fy", fy, "Pa"), ("γM0", GAMMA_M0, ""))
    limit = hole.count * 1.5 * t * hole.pin * fy / GAMMA_M0 if hole.pin <= hole.hole else 0.0
    return judge(BEARING, "EN 1993-1-8 Table 3.10", load * load_factor, limit, "N", working)


def dishing(hole: PlateHole, load_factor: float) -> Result:
    """Dishing of a thin plate: type B's t ≥ 0.7 √(F γM0/fy) gives F ≤ n (t/0.7)² fy/γM0.

    Table 3.9 asks for this where the shape is chosen first; here it is held beside type A, as the guard against a plate
    that is wide enough but thin.  Source: EN 1993-1-8, Table 3.9.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t = not_negative(hole.load), hole.thickness
    fy = hole.material.fy(t)
    working = _working(hole, load_factor, ("d0/t", hole.hole / t, ""), ("fy", fy, "Pa"), ("γM0", GAMMA_M0, ""))
    limit = hole.count * (t / THICKNESS) ** 2 * fy / GAMMA_M0
    return judge(DISHING, "EN 1993-1-8 Table 3.9 (t)", load * load_factor, limit, "N", working)


def pin_shear(pin: PinState, load_factor: float) -> Result:
    """Shear of the pin on each of two planes: F/2 ≤ 0.6 A fup/γM2.  Source: EN 1993-1-8, Table 3.10.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, area = not_negative(pin.load) * load_factor, pi * pin.pin**2 / 4
    fup = pin.material.fu(pin.pin)
    working = (*pin_working(pin), ("γF", load_factor, ""), ("A", area, "m²"), ("fup", fup, "Pa"), ("γM2", GAMMA_M2, ""))
    return judge(PIN_SHEAR, "EN 1993-1-8 Table 3.10", load / 2, 0.6 * area * fup / GAMMA_M2, "N", working)


def pin_bending(pin: PinState, load_factor: float) -> Result:
    """Bending of the pin: F/8 (b + 4c + 2a) ≤ 1.5 Wel fyp/γM0.  Source: EN 1993-1-8, Table 3.10 and Figure 3.11.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    moment, modulus = pin_moment(pin) * load_factor, round_modulus(pin.pin)
    fyp = pin.material.fy(pin.pin)
    working = (
        *pin_working(pin),
        ("γF", load_factor, ""),
        ("Wel", modulus, "m³"),
        ("fyp", fyp, "Pa"),
        ("γM0", GAMMA_M0, ""),
    )
    return judge(PIN_BENDING, "EN 1993-1-8 Table 3.10", moment, 1.5 * modulus * fyp / GAMMA_M0, "N·m", working)


def pin_both(pin: PinState, load_factor: float) -> Result:
    """Shear and bending of the pin together: (MEd/MRd)² + (Fv,Ed/Fv,Rd)² ≤ 1.

    The root of the sum is told, so that it grows as the load does; the sum itself is in the working.
    Source: EN 1993-1-8, Table 3.10.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    bending, shear = pin_bending(pin, load_factor).utilisation, pin_shear(pin, load_factor).utilisation
    total = bending**2 + shear**2
    working = (("MEd/MRd", bending, ""), ("Fv,Ed/Fv,Rd", shear, ""), ("sum of squares", total, ""))
    return judge(PIN_BOTH, "EN 1993-1-8 Table 3.10", sqrt(total), 1.0, "", working)
