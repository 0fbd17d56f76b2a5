"""EN 1993 (2005): links, in tension and in compression.  Every load is multiplied by the factor on loads γF first.

Depends on: rules.model, rules.common, en.bars.
"""

from __future__ import annotations

from math import inf, pi, sqrt

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
from rigdesign.hardware.rules.en.bars import GAMMA_M0, GAMMA_M1, GAMMA_M2, reduction
from rigdesign.hardware.rules.model import Result, RodState, StrapState

CURVE_C = 0.49
"""Imperfection factor of buckling curve c: struts of solid section (EN 1993-1-1, Tables 6.1 and 6.2)."""


def rod_yield(rod: RodState, load_factor: float) -> Result:
    """Tension of a threaded rod: NEd ≤ As fy/γM0; threaded all along, the stress area is its whole section.

    Source: EN 1993-1-1, 6.2.3.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, fy = not_negative(rod.load), rod.material.fy(rod.root)
    working = (
        ("F", load, "N"),
        ("γF", load_factor, ""),
        ("As", rod.stress_area, "m²"),
        ("fy", fy, "Pa"),
        ("γM0", GAMMA_M0, ""),
    )
    return judge(ROD_YIELD, "EN 1993-1-1 6.2.3", load * load_factor, rod.stress_area * fy / GAMMA_M0, "N", working)


def rod_rupture(rod: RodState, load_factor: float) -> Result:
    """Tension at the thread: NEd ≤ 0.9 fub As/γM2.  Source: EN 1993-1-8, Table 3.4.

    Raises
    ------
    ValueError
        Where the load is negative.

    Examples
    --------
    An M16 rod of grade 8.8:

    >>> from rigdesign.hardware.model import Material
    >>> steel = Material("8.8", (0.1,), (640e6,), (800e6,), 210e9, 7850.0, "ISO 898-1")
    >>> round(rod_rupture(RodState(20e3, 156.7e-6, 0.01355, 0.5, 0.0, steel, False), 1.5).limit / 1e3, 2)
    90.26
    """
    load, fub = not_negative(rod.load), rod.material.fu(rod.root)
    working = (
        ("F", load, "N"),
        ("γF", load_factor, ""),
        ("As", rod.stress_area, "m²"),
        ("fub", fub, "Pa"),
        ("γM2", GAMMA_M2, ""),
    )
    limit = 0.9 * fub * rod.stress_area / GAMMA_M2
    return judge(ROD_RUPTURE, "EN 1993-1-8 Table 3.4", load * load_factor, limit, "N", working)


def strut(rod: RodState) -> tuple[float, float, float, float]:
    """Area A [m²], Euler load Ncr [N], slenderness λ and reduction χ of a rod of its root diameter between its pins.

    Ncr = π² E I/L², λ = √(A fy/Ncr), χ by curve c.  Source: EN 1993-1-1, 6.3.1.

    Raises
    ------
    ZeroDivisionError
        Where the rod has no length.
    """
    area, inertia = pi * rod.root**2 / 4, pi * rod.root**4 / 64
    critical = pi**2 * rod.material.modulus * inertia / rod.length**2
    slenderness = sqrt(area * rod.material.fy(rod.root) / critical)
    return area, critical, slenderness, reduction(slenderness, CURVE_C)


def rod_buckling(rod: RodState, load_factor: float) -> Result:
    """A compressed rod as a strut between its pins: NEd ≤ χ A fy/γM1.  Source: EN 1993-1-1, 6.3.1.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, fy = not_negative(rod.load), rod.material.fy(rod.root)
    area, critical, slenderness, chi = strut(rod)
    working = (
        ("F", load, "N"),
        ("γF", load_factor, ""),
        ("A", area, "m²"),
        ("L", rod.length, "m"),
        ("Ncr", critical, "N"),
        ("λ", slenderness, ""),
        ("χ", chi, ""),
        ("fy", fy, "Pa"),
        ("γM1", GAMMA_M1, ""),
    )
    return judge(ROD_BUCKLING, "EN 1993-1-1 6.3.1", load * load_factor, chi * area * fy / GAMMA_M1, "N", working)


def rod_both(rod: RodState, load_factor: float) -> Result:
    """A compressed rod with its load off centre by e: NEd/(χ A fy/γM1) + k NEd e/(Wel fy/γM1) ≤ 1, k = 1/(1 − NEd/Ncr).

    Infinite where NEd reaches Ncr.  Source: EN 1993-1-1, 6.3.3, with k on the safe side of both its annexes.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, fy = not_negative(rod.load) * load_factor, rod.material.fy(rod.root)
    area, critical, _, chi = strut(rod)
    modulus = round_modulus(rod.root)
    k = 1 / (1 - load / critical) if load < critical else inf
    axial = load / (chi * area * fy / GAMMA_M1)
    use = axial + k * load * rod.eccentricity / (modulus * fy / GAMMA_M1) if load < critical else inf
    working = (
        ("NEd", load, "N"),
        ("NEd/Nb,Rd", axial, ""),
        ("Ncr", critical, "N"),
        ("k", k, ""),
        ("e", rod.eccentricity, "m"),
        ("Wel", modulus, "m³"),
        ("fy", fy, "Pa"),
        ("γM1", GAMMA_M1, ""),
    )
    return judge(ROD_BOTH, "EN 1993-1-1 6.3.3", use, 1.0, "", working)


def strap_yield(strap: StrapState, load_factor: float) -> Result:
    """Tension of a strap on its whole section: NEd ≤ w t fy/γM0.  Source: EN 1993-1-1, 6.2.3.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t = not_negative(strap.load), strap.thickness
    fy = strap.material.fy(t)
    working = (
        ("F", load, "N"),
        ("γF", load_factor, ""),
        ("w", strap.width, "m"),
        ("t", t, "m"),
        ("fy", fy, "Pa"),
        ("γM0", GAMMA_M0, ""),
    )
    return judge(STRAP_YIELD, "EN 1993-1-1 6.2.3", load * load_factor, strap.width * t * fy / GAMMA_M0, "N", working)


def strap_rupture(strap: StrapState, load_factor: float) -> Result:
    """Tension of a strap beside its hole: NEd ≤ 0.9 (w − d) t fu/γM2.  Source: EN 1993-1-1, 6.2.3.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t, width = not_negative(strap.load), strap.thickness, strap.width - strap.hole
    fu = strap.material.fu(t)
    working = (
        ("F", load, "N"),
        ("γF", load_factor, ""),
        ("w − d", width, "m"),
        ("t", t, "m"),
        ("fu", fu, "Pa"),
        ("γM2", GAMMA_M2, ""),
    )
    return judge(STRAP_RUPTURE, "EN 1993-1-1 6.2.3", load * load_factor, 0.9 * width * t * fu / GAMMA_M2, "N", working)
