"""ASME BTH-1 (2017): links, in tension and in compression.

Allowable stresses of 3-2.1 (tension), 3-2.2 (compression), 3-2.4 (both with bending) over the design factor Nd; from
memory.

Depends on: rules.model, rules.common.
"""

from __future__ import annotations

from math import inf, pi, sqrt

from rigdesign.hardware.rules.bth.pins import TENSION_FACTOR
from rigdesign.hardware.rules.common import (
    ROD_BOTH,
    ROD_BUCKLING,
    ROD_RUPTURE,
    ROD_YIELD,
    STRAP_RUPTURE,
    STRAP_YIELD,
    judge,
    not_negative,
    round_modulus,
)
from rigdesign.hardware.rules.model import Result, RodState, StrapState


def compressive_stress(Fy: float, E: float, Nd: float, slenderness: float) -> float:
    """Allowable stress Fa [Pa] of a strut of slenderness KL/r.

    With Cc = √(2π²E/Fy) and c = (KL/r)/Cc:  c ≤ 1: (1 − c²/2) Fy/(Nd (1 + 9c/40 − 3c³/40));
    beyond: π²E/(1.15 Nd (KL/r)²).  Source: ASME BTH-1, 3-2.2 (from memory).

    Raises
    ------
    ZeroDivisionError
        Where Fy, E or Nd is zero.

    Examples
    --------
    A stub, and where both branches meet:

    >>> compressive_stress(355e6, 210e9, 2.0, 0.0) / 1e6
    177.5
    >>> limit = sqrt(2 * pi**2 * 210e9 / 355e6)
    >>> round(compressive_stress(355e6, 210e9, 2.0, limit) / 1e6, 3)
    77.174
    >>> round(compressive_stress(355e6, 210e9, 2.0, limit * 1.000001) / 1e6, 3)
    77.174
    """
    c = slenderness / sqrt(2 * pi**2 * E / Fy)
    if c <= 1:
        return (1 - c**2 / 2) * Fy / (Nd * (1 + 9 * c / 40 - 3 * c**3 / 40))
    return pi**2 * E / (1.15 * Nd * slenderness**2)


def rod_yield(rod: RodState, Nd: float) -> Result:
    """Tension of a threaded rod: ft = P/A_s ≤ Fy/Nd; threaded all along, the stress area is its gross area.

    Source: ASME BTH-1, 3-2.1 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, Fy = not_negative(rod.load), rod.material.fy(rod.root)
    working = (("P", load, "N"), ("A_s", rod.stress_area, "m²"), ("Fy", Fy, "Pa"), ("Nd", Nd, ""))
    return judge(ROD_YIELD, "BTH-1 3-2.1", load, rod.stress_area * Fy / Nd, "N", working)


def rod_rupture(rod: RodState, Nd: float) -> Result:
    """Tension at the thread: P ≤ A_s Fu/(1.20 Nd).  Source: ASME BTH-1, 3-2.1 and 3-3.2 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, Fu = not_negative(rod.load), rod.material.fu(rod.root)
    working = (("P", load, "N"), ("A_s", rod.stress_area, "m²"), ("Fu", Fu, "Pa"), ("Nd", Nd, ""))
    return judge(ROD_RUPTURE, "BTH-1 3-2.1", load, rod.stress_area * Fu / (TENSION_FACTOR * Nd), "N", working)


def rod_buckling(rod: RodState, Nd: float) -> Result:
    """A compressed rod as a strut between its pins, of its root diameter d: fa = P/A ≤ Fa, KL/r = 4 L/d.

    Source: ASME BTH-1, 3-2.2 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, area = not_negative(rod.load), pi * rod.root**2 / 4
    Fy, E = rod.material.fy(rod.root), rod.material.modulus
    slenderness = 4 * rod.length / rod.root
    working = (
        ("P", load, "N"),
        ("A", area, "m²"),
        ("L", rod.length, "m"),
        ("KL/r", slenderness, ""),
        ("Fy", Fy, "Pa"),
        ("Nd", Nd, ""),
    )
    return judge(ROD_BUCKLING, "BTH-1 3-2.2", load / area, compressive_stress(Fy, E, Nd, slenderness), "Pa", working)


def rod_both(rod: RodState, Nd: float) -> Result:
    """A compressed rod with its load off centre by e: the larger of fa/Fa + fb/((1 − fa/Fe') Fb) and fa Nd/Fy + fb/Fb.

    fb = P e/W with W = π d³/32 of the root, Fb = 1.25 Fy/Nd, Fe' = π²E/(1.15 Nd (KL/r)²), Cm = 1.  Infinite where
    fa reaches Fe'.  Source: ASME BTH-1, 3-2.4 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, area = not_negative(rod.load), pi * rod.root**2 / 4
    Fy, E = rod.material.fy(rod.root), rod.material.modulus
    slenderness = 4 * rod.length / rod.root
    Fa, Fb = compressive_stress(Fy, E, Nd, slenderness), 1.25 * Fy / Nd
    Fe = pi**2 * E / (1.15 * Nd * slenderness**2)
    fa, fb = load / area, load * rod.eccentricity / round_modulus(rod.root)
    use = max(fa / Fa + fb / ((1 - fa / Fe) * Fb), fa * Nd / Fy + fb / Fb) if fa < Fe else inf
    working = (
        ("fa", fa, "Pa"),
        ("Fa", Fa, "Pa"),
        ("e", rod.eccentricity, "m"),
        ("fb", fb, "Pa"),
        ("Fb", Fb, "Pa"),
        ("Fe'", Fe, "Pa"),
    )
    return judge(ROD_BOTH, "BTH-1 3-2.4", use, 1.0, "", working)


def strap_yield(strap: StrapState, Nd: float) -> Result:
    """Tension of a strap on its whole section: P ≤ w t Fy/Nd.  Source: ASME BTH-1, 3-2.1 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative.

    Examples
    --------
    >>> from rigdesign.hardware.model import Material
    >>> steel = Material("S355", (0.016,), (355e6,), (470e6,), 210e9, 7850.0, "EN 10025-2")
    >>> round(strap_yield(StrapState(10e3, 0.040, 0.008, 0.0165, steel), 2.0).utilisation, 4)
    0.1761
    """
    load, t = not_negative(strap.load), strap.thickness
    Fy = strap.material.fy(t)
    working = (("P", load, "N"), ("w", strap.width, "m"), ("t", t, "m"), ("Fy", Fy, "Pa"), ("Nd", Nd, ""))
    return judge(STRAP_YIELD, "BTH-1 3-2.1", load, strap.width * t * Fy / Nd, "N", working)


def strap_rupture(strap: StrapState, Nd: float) -> Result:
    """Tension of a strap beside its hole: P ≤ (w − d) t Fu/(1.20 Nd).  Source: ASME BTH-1, 3-2.1 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, width = not_negative(strap.load), strap.thickness, strap.width - strap.hole
    Fu = strap.material.fu(t)
    working = (("P", load, "N"), ("w − d", width, "m"), ("t", t, "m"), ("Fu", Fu, "Pa"), ("Nd", Nd, ""))
    return judge(STRAP_RUPTURE, "BTH-1 3-2.1", load, width * t * Fu / (TENSION_FACTOR * Nd), "N", working)
