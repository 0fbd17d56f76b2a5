"""ASME BTH-1 (2017): levers and plates in bending.

Allowable stresses of 3-2.3 over the design factor Nd.  Their numbers are quoted from memory; those of rectangular bars
are the slenderness limits of AISC 360 F11, those of channels the classical allowable stresses of beams.

Depends on: hardware.model, rules.model, rules.common.
"""

from __future__ import annotations

from math import pi, sqrt

from rigdesign.hardware.model import Section
from rigdesign.hardware.rules.common import (
    BENDING,
    BUCKLING,
    PLATE_BENDING,
    PUNCHING,
    SHEAR,
    clear_depth,
    judge,
    lever_forces,
    net_section,
    not_negative,
    shear_area,
    wall,
)
from rigdesign.hardware.rules.model import Bar, PlateBending, Result

SQRT3 = sqrt(3.0)


def rectangular_bar_stress(Fy: float, E: float, Nd: float, Lb: float, d: float, t: float) -> float:
    """Allowable bending stress [Pa] of an upright rectangular bar, depth d and thickness t [m], unbraced over Lb [m].

    With s = Lb d/t²:  s ≤ 0.08 E/Fy: 1.25 Fy/Nd;  up to 1.9 E/Fy: (1.52 − 0.274 s Fy/E) Fy/Nd, 1.25 Fy/Nd at most;
    beyond: 1.9 E/(s Nd).  Cb = 1 and C_LTB = 1: the moment is taken as even, the ends of Lb as braced.
    Source: ASME BTH-1, 3-2.3, solid rectangular bars (from memory); AISC 360, F11.

    Raises
    ------
    ZeroDivisionError
        Where Fy, E, Nd or t is zero.

    Examples
    --------
    A stocky bar and a slender one of S355, Nd = 2:

    >>> round(rectangular_bar_stress(355e6, 210e9, 2, 0.1, 0.080, 0.010) / 1e6, 3)
    221.875
    >>> round(rectangular_bar_stress(355e6, 210e9, 2, 3.0, 0.080, 0.010) / 1e6, 3)
    83.125
    """
    slenderness = Lb * d / t**2
    most = 1.25 * Fy / Nd
    if slenderness <= 0.08 * E / Fy:
        return most
    if slenderness <= 1.9 * E / Fy:
        return min(most, (1.52 - 0.274 * slenderness * Fy / E) * Fy / Nd)
    return 1.9 * E / (slenderness * Nd)


def channel_stress(Fy: float, E: float, Nd: float, Lb: float, section: Section) -> float:
    """Allowable bending stress [Pa] of a channel about its strong axis, unbraced over Lb [m].

    Lb ≤ Lp = min(1.76 ry √(E/Fy), 0.67 E Af/(Fy d)): 1.10 Fy/Nd; beyond: 0.66 E Af/(Nd Lb d), Fy/Nd at most; Af is the
    area of the compressed flange.  Cb = 1, C_LTB = 1.  Source: ASME BTH-1, 3-2.3 (from memory).

    Raises
    ------
    ZeroDivisionError
        Where Fy, E, Nd or the section's depth is zero.
    """
    flange = section.width * section.flange / section.depth
    braced = min(1.76 * sqrt(section.inertia_weak / section.area * E / Fy), 0.67 * E * flange / Fy)
    if Lb <= braced:
        return 1.10 * Fy / Nd
    return min(Fy, 0.66 * E * flange / Lb) / Nd


def hollow_stress(Fy: float, E: float, Nd: float, Lb: float, section: Section) -> float:
    """Allowable bending stress [Pa] of a hollow section about its strong axis, unbraced over Lb [m].

    Lb ≤ Lp = 0.13 E ry √(J A)/Mp: 1.10 Fy/Nd; from there down in a straight line to 0.70 Fy/Nd at
    Lr = 2 E ry √(J A)/(0.7 Fy S); beyond: as 1/Lb.  The limits are those of AISC 360-16 F7.4, over Nd (from memory):
    BTH-1 says little of hollow sections.

    Raises
    ------
    ZeroDivisionError
        Where Fy, E, Nd or a modulus of the section is zero.
    """
    stiff = E * sqrt(section.inertia_weak * section.torsion)  # E ry √(J A), as ry = √(Iy/A)
    braced = 0.13 * stiff / (Fy * section.plastic)
    if Lb <= braced:
        return 1.10 * Fy / Nd
    elastic = 2 * stiff / (0.7 * Fy * section.modulus)
    if Lb <= elastic:
        return (1.10 - 0.40 * (Lb - braced) / (elastic - braced)) * Fy / Nd
    return 0.70 * Fy * elastic / Lb / Nd


def compactness(section: Section, Fy: float, E: float) -> float:
    """What the walls allow, as a multiple of Fy: 1.25 a solid bar, 1.10 compact, 1 not compact, 0 slender.

    Flange over thickness of a channel 0.38 √(E/Fy) and 0.83 √(E/Fy), of a hollow section 1.12 √ and 1.40 √; web 3.76 √
    and 5.70 √.  Slender walls are beyond the rules.  Source: ASME BTH-1, 3-2.3 and its table of width-thickness ratios,
    after AISC (from memory).

    Raises
    ------
    ZeroDivisionError
        Where a wall of a channel or hollow section or Fy is zero.
    """
    if section.kind == "flat":
        return 1.25
    root = sqrt(E / Fy)
    hollow = section.kind == "hollow"
    flange = (section.width - (2 * section.web if hollow else 0)) / section.flange / root
    web = clear_depth(section) / section.web / root
    compact, slender = (1.12, 1.40) if hollow else (0.38, 0.83)
    if flange > slender or web > 5.70:
        return 0.0
    return 1.0 if flange > compact or web > 3.76 else 1.10


def bending(bar: Bar, Nd: float) -> Result:
    """Bending stress at the pivot on the net section: fb = M/W_net ≤ 1.25 Fy/Nd (flats), 1.10 Fy/Nd (compact shapes).

    Source: ASME BTH-1, 3-2.3 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    *_, moment = lever_forces(bar)
    _, modulus, _ = net_section(bar)
    section, material = bar.section, bar.material
    Fy = material.fy(wall(section))
    factor = compactness(section, Fy, material.modulus)
    working = (
        ("P", bar.load, "N"),
        ("a", bar.a, "m"),
        ("b", bar.b, "m"),
        ("M", moment, "N·m"),
        ("W_net", modulus, "m³"),
        ("Fy", Fy, "Pa"),
        ("Nd", Nd, ""),
        ("Fb Nd/Fy", factor, ""),
    )
    stress = moment / modulus if modulus > 0 else 0.0
    limit = factor * Fy / Nd if modulus > 0 else 0.0
    return judge(BENDING, "BTH-1 3-2.3", stress, limit, "Pa", working)


def shear(bar: Bar, Nd: float) -> Result:
    """Mean shear stress beside the largest hole: fv = V/A_v ≤ Fy/(√3 Nd), V the larger of the end forces.

    For h/t ≤ 2.45 √(E/Fy); more slender webs are beyond the rule.  Source: ASME BTH-1, 3-2.3.6 (from memory).

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    force_a, force_b, _ = lever_forces(bar)
    area, section = shear_area(bar), bar.section
    Fy = bar.material.fy(wall(section))
    slender = clear_depth(section) / section.web > 2.45 * sqrt(bar.material.modulus / Fy)
    force = max(force_a, force_b)
    working = (("V", force, "N"), ("A_v", area, "m²"), ("Fy", Fy, "Pa"), ("Nd", Nd, ""))
    stress = force / area if area > 0 else 0.0
    limit = Fy / (SQRT3 * Nd) if area > 0 and not slender else 0.0
    return judge(SHEAR, "BTH-1 3-2.3.6", stress, limit, "Pa", working)


def buckling(bar: Bar, Nd: float) -> Result:
    """Lateral-torsional buckling: fb = M/W of the whole section against the allowable stress over the unbraced length.

    Each profile by itself between places where it is held: the help of its twin is not counted.
    Source: ASME BTH-1, 3-2.3 (from memory); see `rectangular_bar_stress`, `channel_stress`, `hollow_stress`.

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    *_, moment = lever_forces(bar)
    section, material, Lb = bar.section, bar.material, bar.braced
    Fy, E = material.fy(wall(section)), material.modulus
    modulus = bar.count * section.modulus
    if section.kind == "flat":
        limit = rectangular_bar_stress(Fy, E, Nd, Lb, section.depth, section.web)
        shown = ("Lb d/t²", Lb * section.depth / section.web**2, "")
    elif section.kind == "channel":
        limit = channel_stress(Fy, E, Nd, Lb, section)
        shown = ("Lb d/Af", Lb * section.depth / (section.width * section.flange), "")
    elif section.kind == "hollow":
        limit = hollow_stress(Fy, E, Nd, Lb, section)
        shown = ("E ry √(J A)", E * sqrt(section.inertia_weak * section.torsion), "N·m²")
    else:
        raise ValueError(f"a lever is made of flats, channels or a hollow section, not of a {section.kind}")
    working = (("M", moment, "N·m"), ("W", modulus, "m³"), ("Lb", Lb, "m"), shown, ("Fy", Fy, "Pa"), ("Nd", Nd, ""))
    return judge(BUCKLING, "BTH-1 3-2.3", moment / modulus, limit, "Pa", working)


def plate_bending(plate: PlateBending, Nd: float) -> Result:
    """A plate bent flat: fb = 6 M/(w t²) ≤ 1.25 Fy/Nd.  Source: ASME BTH-1, 3-2.3, solid bars (from memory).

    Raises
    ------
    ValueError
        Where the moment is negative.
    """
    moment, t, width = not_negative(plate.moment), plate.thickness, plate.width
    Fy = plate.material.fy(t)
    modulus = width * t**2 / 6
    working = (("M", moment, "N·m"), ("w", width, "m"), ("t", t, "m"), ("Fy", Fy, "Pa"), ("Nd", Nd, ""))
    stress = moment / modulus if modulus > 0 else 0.0
    return judge(PLATE_BENDING, "BTH-1 3-2.3", stress, 1.25 * Fy / Nd if modulus > 0 else 0.0, "Pa", working)


def punching(plate: PlateBending, Nd: float) -> Result:
    """Shear of a plate about the washer: P ≤ π d_m t Fy/(√3 Nd), d_m the washer's diameter.

    Source: ASME BTH-1, 3-2.3.6 (from memory), on the cylinder under the washer's rim.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t = not_negative(plate.load), plate.thickness
    Fy = plate.material.fy(t)
    area = pi * plate.washer * t if plate.washer > plate.hole else 0.0
    working = (("P", load, "N"), ("d_m", plate.washer, "m"), ("t", t, "m"), ("Fy", Fy, "Pa"), ("Nd", Nd, ""))
    return judge(PUNCHING, "BTH-1 3-2.3.6", load, area * Fy / (SQRT3 * Nd), "N", working)
