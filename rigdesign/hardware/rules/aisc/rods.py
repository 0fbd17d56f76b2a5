"""AISC 360-16, allowable strength design: links, in tension (D2) and in compression (E3, H1); from memory.

Depends on: rules.model, rules.common, aisc.bars.
"""

from __future__ import annotations

from math import inf, pi

from rigdesign.hardware.rules.aisc.bars import OMEGA, OMEGA_RUPTURE, plastic_moment
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

LEVEL = 1.6
"""α: what loads are multiplied by for second-order effects in allowable strength design, C2.1 and Appendix 8."""


def rod_yield(rod: RodState) -> Result:
    """Tension of a threaded rod: P ≤ Fy As/1.67; threaded all along, the stress area is its gross area.

    Source: AISC 360-16, D2(a).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, Fy = not_negative(rod.load), rod.material.fy(rod.root)
    working = (("P", load, "N"), ("As", rod.stress_area, "m²"), ("Fy", Fy, "Pa"), ("Ω", OMEGA, ""))
    return judge(ROD_YIELD, "AISC 360 D2(a)", load, Fy * rod.stress_area / OMEGA, "N", working)


def rod_rupture(rod: RodState) -> Result:
    """Tension at the thread: P ≤ Fu As/2.00, the stress area As in place of J3.6's 0.75 of the nominal area.

    Source: AISC 360-16, D2(b), J3.6.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, Fu = not_negative(rod.load), rod.material.fu(rod.root)
    working = (("P", load, "N"), ("As", rod.stress_area, "m²"), ("Fu", Fu, "Pa"), ("Ω", OMEGA_RUPTURE, ""))
    return judge(ROD_RUPTURE, "AISC 360 D2(b)", load, Fu * rod.stress_area / OMEGA_RUPTURE, "N", working)


def critical_stress(Fy: float, Fe: float) -> float:
    """Critical stress Fcr [Pa] of a strut of Euler stress Fe: 0.658^(Fy/Fe) Fy for Fy ≤ 2.25 Fe, else 0.877 Fe.

    Source: AISC 360-16, E3.

    Raises
    ------
    ZeroDivisionError
        Where Fe is zero.

    Examples
    --------
    >>> round(critical_stress(355.0, 355.0), 2), round(critical_stress(355.0, 100.0), 1)
    (233.59, 87.7)
    """
    return Fy * 0.658 ** (Fy / Fe) if Fy <= 2.25 * Fe else 0.877 * Fe


def rod_buckling(rod: RodState) -> Result:
    """A compressed rod as a strut between its pins, of its root diameter: P ≤ Fcr A/1.67.  Source: AISC 360-16, E3.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, area = not_negative(rod.load), pi * rod.root**2 / 4
    Fy, slenderness = rod.material.fy(rod.root), 4 * rod.length / rod.root
    Fe = pi**2 * rod.material.modulus / slenderness**2
    critical = critical_stress(Fy, Fe)
    working = (
        ("P", load, "N"),
        ("A", area, "m²"),
        ("Lc/r", slenderness, ""),
        ("Fe", Fe, "Pa"),
        ("Fy", Fy, "Pa"),
        ("Fcr", critical, "Pa"),
        ("Ω", OMEGA, ""),
    )
    return judge(ROD_BUCKLING, "AISC 360 E3", load, critical * area / OMEGA, "N", working)


def rod_both(rod: RodState) -> Result:
    """A compressed rod with its load off centre by e: Pr/Pc + 8/9 Mr/Mc ≤ 1, or Pr/(2 Pc) + Mr/Mc where Pr < 0.2 Pc.

    Mr = P e/(1 − 1.6 P/Pe1), Pe1 = π² E I/L²; infinite where 1.6 P reaches Pe1.  Mc = Mp/1.67 of the root.
    Source: AISC 360-16, H1.1 and Appendix 8.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, area = not_negative(rod.load), pi * rod.root**2 / 4
    Fy, slenderness = rod.material.fy(rod.root), 4 * rod.length / rod.root
    Fe = pi**2 * rod.material.modulus / slenderness**2
    axial = load * OMEGA / (critical_stress(Fy, Fe) * area)
    euler = Fe * area
    capacity = plastic_moment(Fy, rod.root**3 / 6, round_modulus(rod.root)) / OMEGA
    bent = load * rod.eccentricity / (1 - LEVEL * load / euler) / capacity if LEVEL * load < euler else inf
    use = axial + 8 / 9 * bent if axial >= 0.2 else axial / 2 + bent
    working = (
        ("Pr/Pc", axial, ""),
        ("Pe1", euler, "N"),
        ("e", rod.eccentricity, "m"),
        ("Mc", capacity, "N·m"),
        ("Mr/Mc", bent, ""),
    )
    return judge(ROD_BOTH, "AISC 360 H1.1", use, 1.0, "", working)


def strap_yield(strap: StrapState) -> Result:
    """Tension of a strap on its whole section: P ≤ Fy w t/1.67.  Source: AISC 360-16, D2(a).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t = not_negative(strap.load), strap.thickness
    Fy = strap.material.fy(t)
    working = (("P", load, "N"), ("w", strap.width, "m"), ("t", t, "m"), ("Fy", Fy, "Pa"), ("Ω", OMEGA, ""))
    return judge(STRAP_YIELD, "AISC 360 D2(a)", load, Fy * strap.width * t / OMEGA, "N", working)


def strap_rupture(strap: StrapState) -> Result:
    """Tension of a strap beside its hole: P ≤ Fu (w − d) t/2.00.  Source: AISC 360-16, D2(b).

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, width = not_negative(strap.load), strap.thickness, strap.width - strap.hole
    Fu = strap.material.fu(t)
    working = (("P", load, "N"), ("w − d", width, "m"), ("t", t, "m"), ("Fu", Fu, "Pa"), ("Ω", OMEGA_RUPTURE, ""))
    return judge(STRAP_RUPTURE, "AISC 360 D2(b)", load, Fu * width * t / OMEGA_RUPTURE, "N", working)
