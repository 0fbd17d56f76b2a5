"""ASME BTH-1 (2017): pin-connected plates (3-3.3) and pins.

The formulas of 3-3.3 are those that published calculation sheets quote; the rest is from memory.

Depends on: rules.model, rules.common.
"""

from __future__ import annotations

from math import cos, pi, radians, sin, sqrt

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
from rigdesign.hardware.rules.model import PinState, PlateHole, Result, Working

SQRT3 = sqrt(3.0)
TENSION_FACTOR = 1.20
"""What the design factor on rupture is multiplied by in 3-2.1 and 3-3.3."""


def strength_reduction(Dp: float, Dh: float) -> float:
    """Reduction Cr for the play of a pin Dp in its hole Dh: 1 for Dh/Dp ≤ 1.1, else 1 − 0.275 √(1 − Dp²/Dh²).

    Zero where the pin is larger than the hole.  Source: ASME BTH-1, 3-3.3.1.

    Raises
    ------
    ZeroDivisionError
        Where the hole's diameter is zero.

    Examples
    --------
    >>> round(strength_reduction(0.750, 0.875), 7)
    0.8583533
    >>> strength_reduction(25.0, 25.5)
    1.0
    """
    if Dp > Dh:
        return 0.0
    return 1.0 if Dh <= 1.1 * Dp else 1 - 0.275 * sqrt(1 - (Dp / Dh) ** 2)


def effective_width(be: float, t: float, Dh: float, Fy: float, Fu: float) -> float:
    """Effective width b_eff [m] on each side of a hole: the least of be, 4t and 0.6 be (Fu/Fy) √(Dh/be).

    Source: ASME BTH-1, 3-3.3.1.

    Raises
    ------
    ZeroDivisionError
        Where Fy is zero.

    Examples
    --------
    >>> round(effective_width(1.0625, 0.75, 0.875, 36.0, 58.0), 4)
    0.9321
    >>> effective_width(0.0, 0.75, 0.875, 36.0, 58.0)
    0.0
    """
    return min(be, 4 * t, 0.6 * Fu / Fy * sqrt(Dh * be)) if be > 0 else 0.0


def _working(hole: PlateHole, Cr: float, *more: tuple[str, float, str]) -> Working:
    return (
        ("P", hole.load, "N"),
        ("n", hole.count, ""),
        ("t", hole.thickness, "m"),
        ("Dp", hole.pin, "m"),
        ("Dh", hole.hole, "m"),
        ("Cr", Cr, ""),
        *more,
    )


def net_tension(hole: PlateHole, Nd: float) -> Result:
    """Tension beside the hole: P ≤ n Pt, Pt = Cr Fu/(1.20 Nd) 2 t b_eff.

    Source: ASME BTH-1, 3-3.3.1, tensile strength through the pin hole.

    Raises
    ------
    ValueError
        Where the load is negative.

    Examples
    --------
    >>> from rigdesign.hardware.model import Material
    >>> steel = Material("36 ksi", (1.0,), (36.0,), (58.0,), 29e3, 1.0, "an example in inches and kips")
    >>> eye = PlateHole(10.0, 1, 0.75, steel, 0.75, 0.875, 1.0625, 1.0625, 1.5, True)
    >>> round(net_tension(eye, 3.0).limit, 2)
    19.33
    """
    load, t, material = not_negative(hole.load), hole.thickness, hole.material
    Fy, Fu = material.fy(t), material.fu(t)
    Cr = strength_reduction(hole.pin, hole.hole)
    width = effective_width(hole.side, t, hole.hole, Fy, Fu)
    limit = hole.count * Cr * Fu / (TENSION_FACTOR * Nd) * 2 * t * width
    working = _working(hole, Cr, ("be", hole.side, "m"), ("b_eff", width, "m"), ("Fu", Fu, "Pa"), ("Nd", Nd, ""))
    return judge(NET_TENSION, "BTH-1 3-3.3.1 (Pt)", load, limit, "N", working)


def dishing(hole: PlateHole, Nd: float) -> Result:
    """Dishing of a thin plate beyond the pin: P ≤ n Cr Fu/(1.20 Nd) 2 t (4t).

    BTH-1 guards against it by counting no more width than 4t on each side (3-3.3.1); this tells how near that is.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t = not_negative(hole.load), hole.thickness
    Fu = hole.material.fu(t)
    Cr = strength_reduction(hole.pin, hole.hole)
    limit = hole.count * Cr * Fu / (TENSION_FACTOR * Nd) * 2 * t * 4 * t
    working = _working(hole, Cr, ("4t", 4 * t, "m"), ("Fu", Fu, "Pa"), ("Nd", Nd, ""))
    return judge(DISHING, "BTH-1 3-3.3.1 (4t)", load, limit, "N", working)


def fracture(hole: PlateHole, Nd: float) -> Result:
    """Fracture on one plane beyond the hole: P ≤ n Pb, Pb = Cr Fu/(1.20 Nd) [1.13 (R − Dh/2) + 0.92 be/(1 + be/Dh)] t.

    R is from the hole's centre to the plate's edge in the direction of the load.  Source: ASME BTH-1, 3-3.3.2.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, Dh, be, R = not_negative(hole.load), hole.thickness, hole.hole, hole.side, hole.radius
    Fu = hole.material.fu(t)
    Cr = strength_reduction(hole.pin, Dh)
    beyond = R - Dh / 2
    width = 1.13 * beyond + 0.92 * be / (1 + be / Dh) if be > 0 and beyond > 0 else 0.0
    limit = hole.count * Cr * Fu / (TENSION_FACTOR * Nd) * width * t
    working = _working(hole, Cr, ("be", be, "m"), ("R", R, "m"), ("Fu", Fu, "Pa"), ("Nd", Nd, ""))
    return judge(FRACTURE, "BTH-1 3-3.3.2 (Pb)", load, limit, "N", working)


def tear_out(hole: PlateHole, Nd: float) -> Result:
    """Tear-out on two planes: P ≤ n Pv, Pv = 0.70 Fu/(1.20 Nd) Av, Av = 2 [a + (Dp/2)(1 − cos φ) − Z'] t.

    φ = 55° Dp/Dh.  Z' = r − √(r² − ((Dp/2) sin φ)²) is what a round edge of radius r takes from each plane, 0 where the
    edge is straight.  Source: ASME BTH-1, 3-3.3.3; Z' of its commentary.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, Dp, Dh, a = not_negative(hole.load), hole.thickness, hole.pin, hole.hole, hole.beyond
    Fu = hole.material.fu(t)
    angle = 55.0 * Dp / Dh
    half = Dp / 2
    fallen, arc = 0.0, half * sin(radians(angle))
    if hole.round_edge:
        fallen = hole.radius - sqrt(max(hole.radius**2 - arc**2, 0.0))
    fits = a > 0 and Dp <= Dh
    area = 2 * (a + half * (1 - cos(radians(angle))) - fallen) * t if fits else 0.0
    working = (
        ("P", load, "N"),
        ("n", hole.count, ""),
        ("t", t, "m"),
        ("a", a, "m"),
        ("φ", angle, "deg"),
        ("Z'", fallen, "m"),
        ("Av", area, "m²"),
        ("Fu", Fu, "Pa"),
        ("Nd", Nd, ""),
    )
    return judge(
        TEAR_OUT, "BTH-1 3-3.3.3 (Pv)", load, hole.count * 0.70 * Fu / (TENSION_FACTOR * Nd) * area, "N", working
    )


def bearing(hole: PlateHole, Nd: float) -> Result:
    """Bearing of the pin on the plate: P ≤ n Fp Dp t, Fp = 1.25 Fy/Nd, Fy that of the plate.

    For joints that do not turn through many cycles under load.  Source: ASME BTH-1, 3-3.3.4.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t = not_negative(hole.load), hole.thickness
    Fy = hole.material.fy(t)
    fits = hole.pin <= hole.hole
    limit = hole.count * 1.25 * Fy / Nd * hole.pin * t if fits else 0.0
    working = (
        ("P", load, "N"),
        ("n", hole.count, ""),
        ("Dp", hole.pin, "m"),
        ("t", t, "m"),
        ("Fy", Fy, "Pa"),
        ("Nd", Nd, ""),
    )
    return judge(BEARING, "BTH-1 3-3.3.4", load, limit, "N", working)


def pin_shear(pin: PinState, Nd: float) -> Result:
    """Mean shear stress on each of two planes: fv = F/(2A) ≤ Fy/(√3 Nd).  Source: BTH-1, 3-2.3.6 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, area = not_negative(pin.load), pi * pin.pin**2 / 4
    Fy = pin.material.fy(pin.pin)
    working = (*pin_working(pin), ("A", area, "m²"), ("Fy", Fy, "Pa"), ("Nd", Nd, ""))
    return judge(PIN_SHEAR, "BTH-1 3-2.3.6", load / (2 * area), Fy / (SQRT3 * Nd), "Pa", working)


def pin_bending(pin: PinState, Nd: float) -> Result:
    """Bending stress of the pin as a round bar: fb = M/W ≤ 1.25 Fy/Nd, M = F/8 (b + 4c + 2a), W = π d³/32.

    Source: ASME BTH-1, 3-2.3, solid round bars (from memory); M after EN 1993-1-8, Figure 3.11.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    moment, modulus = pin_moment(pin), round_modulus(pin.pin)
    Fy = pin.material.fy(pin.pin)
    working = (*pin_working(pin), ("M", moment, "N·m"), ("W", modulus, "m³"), ("Fy", Fy, "Pa"), ("Nd", Nd, ""))
    return judge(PIN_BENDING, "BTH-1 3-2.3", moment / modulus, 1.25 * Fy / Nd, "Pa", working)


def pin_both(pin: PinState, Nd: float) -> Result:
    """Shear and bending of the pin together: √((fb/Fb)² + (fv/Fv)²) ≤ 1.

    The squared sum of 3-2.5 (from memory), each stress over its own allowable; its root is told, so that it grows as
    the load does.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    Fy = pin.material.fy(pin.pin)
    fb, fv = pin_moment(pin) / round_modulus(pin.pin), 2 * pin.load / (pi * pin.pin**2)
    Fb, Fv = 1.25 * Fy / Nd, Fy / (SQRT3 * Nd)
    working = (("fb", fb, "Pa"), ("Fb", Fb, "Pa"), ("fv", fv, "Pa"), ("Fv", Fv, "Pa"))
    return judge(PIN_BOTH, "BTH-1 3-2.5", sqrt((fb / Fb) ** 2 + (fv / Fv) ** 2), 1.0, "", working)
