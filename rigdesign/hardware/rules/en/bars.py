"""EN 1993-1-1 (2005): levers and plates in bending.

Every load is multiplied by the factor on loads γF first.  γM0 = 1.0, γM1 = 1.0, γM2 = 1.25, the recommended values.
From memory, but for the formulas that a test cites.

Depends on: hardware.model, rules.model, rules.common.
"""

from __future__ import annotations

from math import inf, pi, sqrt

from rigdesign.hardware.model import Section
from rigdesign.hardware.rules.common import (
    BENDING,
    BUCKLING,
    PLATE_BENDING,
    POISSON,
    PUNCHING,
    SHEAR,
    channel_warping,
    clear_depth,
    judge,
    lever_forces,
    net_section,
    not_negative,
    shear_area,
    wall,
)
from rigdesign.hardware.rules.model import Bar, PlateBending, Result

GAMMA_M0 = 1.0
"""Partial factor on yielding of a section (recommended value)."""

GAMMA_M1 = 1.0
"""Partial factor on buckling (recommended value)."""

GAMMA_M2 = 1.25
"""Partial factor on rupture, pins and bolts (recommended value)."""

CURVE_D = 0.76
"""Imperfection factor of buckling curve d: lateral-torsional buckling of anything but I sections (Table 6.4)."""

SQRT3 = sqrt(3.0)


def section_class(section: Section, fy: float, E: float) -> int:
    """Class of a profile in bending about its strong axis: 2 (plastic), 3 (elastic) or 4 (slender, not covered).

    Web of height c: 83 ε, 124 ε; outstanding flange of a channel: 10 ε, 14 ε; flange of a hollow section: 38 ε, 42 ε;
    ε = √(235 MPa/fy · E/210 GPa).  A flat has no wall that buckles apart from the bar itself: its stability is that of
    6.3.2.  Class 1 is counted among class 2.  Source: EN 1993-1-1, Table 5.2.

    Raises
    ------
    ZeroDivisionError
        Where a wall or fy is zero.
    """
    if section.kind == "flat":
        return 2
    epsilon = sqrt(235e6 / fy * E / 210e9)
    hollow = section.kind == "hollow"
    flange = (section.width - (2 * section.web if hollow else section.web)) / section.flange / epsilon
    web = clear_depth(section) / section.web / epsilon
    plastic, elastic = (38.0, 42.0) if hollow else (10.0, 14.0)
    if flange > elastic or web > 124.0:
        return 4
    return 3 if flange > plastic or web > 83.0 else 2


def critical_moment(E: float, Iz: float, It: float, Iw: float, L: float) -> float:
    """Elastic critical moment [N·m] of a bar of length L [m] under an even moment, its ends held against twist.

    Mcr = (π/L) √(E Iz (G It + π² E Iw/L²)), G = E/(2 (1 + ν)).  Infinite for L = 0.
    Source: elastic stability, as EN 1993-1-1, 6.3.2.2(2) asks for.

    Examples
    --------
    >>> round(critical_moment(210e9, 6.667e-9, 2.457e-8, 0.0, 1.0), 1)
    5236.6
    """
    G = E / (2 * (1 + POISSON))
    return pi / L * sqrt(E * Iz * (G * It + pi**2 * E * Iw / L**2)) if L > 0 else inf


def reduction(slenderness: float, imperfection: float) -> float:
    """Reduction χ of a buckling curve: 1/(Φ + √(Φ² − λ²)), Φ = (1 + α (λ − 0.2) + λ²)/2; 1 for λ ≤ 0.2.

    Source: EN 1993-1-1, 6.3.1.2 and 6.3.2.2.

    Examples
    --------
    >>> reduction(0.15, 0.76)
    1.0
    >>> round(reduction(1.0, 0.49), 4)
    0.5399
    """
    if slenderness <= 0.2:
        return 1.0
    phi = (1 + imperfection * (slenderness - 0.2) + slenderness**2) / 2
    return 1 / (phi + sqrt(phi**2 - slenderness**2))


def shear_resistance(bar: Bar) -> tuple[float, float]:
    """Net shear area [m²] and plastic shear resistance Av fy/(√3 γM0) [N] of all profiles; 0 where webs are slender.

    Of flats and channels the area of the webs, of a hollow section A h/(b + h), less the largest hole.
    Webs beyond 72 ε are not covered.  Source: EN 1993-1-1, 6.2.6.

    Raises
    ------
    ValueError
        Where levers are not made of such a profile.
    """
    section, material = bar.section, bar.material
    area = shear_area(bar)
    fy = material.fy(wall(section))
    if section.kind == "hollow" and area > 0:
        whole = section.area * section.depth / (section.width + section.depth)
        area = bar.count * (whole - 2 * section.web * max(bar.pivot_hole, bar.end_hole))
    slender = clear_depth(section) / section.web > 72 * sqrt(235e6 / fy * material.modulus / 210e9)
    if area <= 0 or (slender and section.kind != "flat"):
        return max(area, 0.0), 0.0
    return area, area * fy / (SQRT3 * GAMMA_M0)


def bending(bar: Bar, load_factor: float) -> Result:
    """Bending at the pivot on the net section: MEd ≤ W fy/γM0, W plastic in class 2, elastic in class 3.

    Where the shear there is more than half of its resistance, fy is reduced by ρ = (2 VEd/Vpl,Rd − 1)².
    Source: EN 1993-1-1, 6.2.5 and 6.2.8.

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    force_a, force_b, moment = lever_forces(bar)
    _, elastic, plastic = net_section(bar)
    section, material = bar.section, bar.material
    fy = material.fy(wall(section))
    kind = section_class(section, fy, material.modulus)
    modulus = {2: plastic, 3: elastic}.get(kind, 0.0)
    force, (_, resistance) = max(force_a, force_b) * load_factor, shear_resistance(bar)
    rho = (max(2 * force / resistance - 1, 0.0)) ** 2 if resistance > 0 else 1.0
    working = (
        ("P", bar.load, "N"),
        ("γF", load_factor, ""),
        ("a", bar.a, "m"),
        ("b", bar.b, "m"),
        ("class", kind, ""),
        ("W_net", modulus, "m³"),
        ("fy", fy, "Pa"),
        ("ρ", rho, ""),
        ("γM0", GAMMA_M0, ""),
    )
    limit = modulus * (1 - rho) * fy / GAMMA_M0
    return judge(BENDING, "EN 1993-1-1 6.2.5", moment * load_factor, limit, "N·m", working)


def shear(bar: Bar, load_factor: float) -> Result:
    """Shear beside the largest hole: VEd ≤ Av fy/(√3 γM0), VEd the larger of the end forces.

    Source: EN 1993-1-1, 6.2.6; see `shear_resistance`.

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    force_a, force_b, _ = lever_forces(bar)
    area, resistance = shear_resistance(bar)
    force = max(force_a, force_b)
    fy = bar.material.fy(wall(bar.section))
    working = (("V", force, "N"), ("γF", load_factor, ""), ("Av", area, "m²"), ("fy", fy, "Pa"), ("γM0", GAMMA_M0, ""))
    return judge(SHEAR, "EN 1993-1-1 6.2.6", force * load_factor, resistance, "N", working)


def buckling(bar: Bar, load_factor: float) -> Result:
    """Lateral-torsional buckling between places that are held: MEd ≤ χLT W fy/γM1, curve d, even moment.

    Each profile by itself: the help of its twin is not counted.  Source: EN 1993-1-1, 6.3.2.2, general case.

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    *_, moment = lever_forces(bar)
    section, material = bar.section, bar.material
    if section.kind not in ("flat", "channel", "hollow"):
        raise ValueError(f"a lever is made of flats, channels or a hollow section, not of a {section.kind}")
    fy, E = material.fy(wall(section)), material.modulus
    modulus = {2: section.plastic, 3: section.modulus}.get(section_class(section, fy, E), 0.0)
    warping = channel_warping(section) if section.kind == "channel" else 0.0
    critical = critical_moment(E, section.inertia_weak, section.torsion, warping, bar.braced)
    slenderness = sqrt(modulus * fy / critical)
    chi = reduction(slenderness, CURVE_D)
    working = (
        ("M", moment, "N·m"),
        ("γF", load_factor, ""),
        ("W", bar.count * modulus, "m³"),
        ("L", bar.braced, "m"),
        ("Mcr", critical, "N·m"),
        ("λLT", slenderness, ""),
        ("χLT", chi, ""),
        ("fy", fy, "Pa"),
        ("γM1", GAMMA_M1, ""),
    )
    limit = bar.count * chi * modulus * fy / GAMMA_M1
    return judge(BUCKLING, "EN 1993-1-1 6.3.2.2", moment * load_factor, limit, "N·m", working)


def plate_bending(plate: PlateBending, load_factor: float) -> Result:
    """A plate bent flat: MEd ≤ (w t²/4) fy/γM0.  Source: EN 1993-1-1, 6.2.5.

    Raises
    ------
    ValueError
        Where the moment is negative.
    """
    moment, t, width = not_negative(plate.moment), plate.thickness, plate.width
    fy = plate.material.fy(t)
    working = (
        ("M", moment, "N·m"),
        ("γF", load_factor, ""),
        ("w", width, "m"),
        ("t", t, "m"),
        ("fy", fy, "Pa"),
        ("γM0", GAMMA_M0, ""),
    )
    limit = max(width, 0.0) * t**2 / 4 * fy / GAMMA_M0
    return judge(PLATE_BENDING, "EN 1993-1-1 6.2.5", moment * load_factor, limit, "N·m", working)


def punching(plate: PlateBending, load_factor: float) -> Result:
    """Shear of a plate about the washer: FEd ≤ 0.6 π dm t fu/γM2, dm the washer's diameter.

    Source: EN 1993-1-8, Table 3.4.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t = not_negative(plate.load), plate.thickness
    fu = plate.material.fu(t)
    working = (
        ("F", load, "N"),
        ("γF", load_factor, ""),
        ("dm", plate.washer, "m"),
        ("t", t, "m"),
        ("fu", fu, "Pa"),
        ("γM2", GAMMA_M2, ""),
    )
    limit = 0.6 * pi * plate.washer * t * fu / GAMMA_M2 if plate.washer > plate.hole else 0.0
    return judge(PUNCHING, "EN 1993-1-8 Table 3.4", load * load_factor, limit, "N", working)
