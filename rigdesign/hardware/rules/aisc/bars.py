"""AISC 360-16, allowable strength design: levers and plates in bending.

Chapters F (bending) and G (shear), from memory.  Ω = 1.67 on yielding and buckling, 2.00 on rupture; Cb = 1.

Depends on: hardware.model, rules.model, rules.common.
"""

from __future__ import annotations

from math import pi, sqrt

from rigdesign.hardware.model import Material, Section
from rigdesign.hardware.rules.common import (
    BENDING,
    BUCKLING,
    PLATE_BENDING,
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

OMEGA = 1.67
"""Safety factor on yielding and buckling."""

OMEGA_SHEAR = 1.50
"""Safety factor on shear yielding of connected parts, J4.2."""

OMEGA_RUPTURE = 2.00
"""Safety factor on rupture."""


def plastic_moment(Fy: float, Z: float, S: float) -> float:
    """Plastic moment of solid bars Mp = Fy Z ≤ 1.6 Fy S [N·m].  Source: AISC 360-16, F11.1."""
    return Fy * min(Z, 1.6 * S)


def compactness(section: Section, Fy: float, E: float) -> float:
    """Part of a compact section's strength that its walls leave: 1 compact, 0.7 S/Z not compact, 0 slender.

    Flange over thickness of a channel 0.38 √(E/Fy) and 1.0 √, of a hollow section 1.12 √ and 1.40 √; web 3.76 √ and
    5.70 √ of a channel, 2.42 √ and 5.70 √ of a hollow section.  Between both limits the whole reduction is taken, where
    F3 and F7 go in a straight line.  Source: AISC 360-16, Table B4.1b.

    Raises
    ------
    ZeroDivisionError
        Where a wall of a channel or hollow section or Fy is zero.
    """
    if section.kind == "flat":
        return 1.0
    root = sqrt(E / Fy)
    hollow = section.kind == "hollow"
    flange = (section.width - (2 * section.web if hollow else 0)) / section.flange / root
    web = clear_depth(section) / section.web / root
    compact, slender, stocky = (1.12, 1.40, 2.42) if hollow else (0.38, 1.0, 3.76)
    if flange > slender or web > 5.70:
        return 0.0
    return 0.7 * section.modulus / section.plastic if flange > compact or web > stocky else 1.0


def rectangular_bar_moment(Fy: float, E: float, Lb: float, d: float, t: float) -> float:
    """Nominal moment Mn [N·m] of an upright rectangular bar, depth d and thickness t [m], unbraced over Lb [m].

    With s = Lb d/t²:  s ≤ 0.08 E/Fy: Mp;  up to 1.9 E/Fy: (1.52 − 0.274 s Fy/E) My ≤ Mp;  beyond: 1.9 E S/s ≤ Mp.
    Source: AISC 360-16, F11.

    Raises
    ------
    ZeroDivisionError
        Where Fy, E or t is zero.

    Examples
    --------
    >>> round(rectangular_bar_moment(355e6, 210e9, 0.3, 0.080, 0.010) / 1e3, 3)
    5.335
    """
    slenderness, S = Lb * d / t**2, t * d**2 / 6
    most = plastic_moment(Fy, t * d**2 / 4, S)
    if slenderness <= 0.08 * E / Fy:
        return most
    if slenderness <= 1.9 * E / Fy:
        return min(most, (1.52 - 0.274 * slenderness * Fy / E) * Fy * S)
    return min(most, 1.9 * E * S / slenderness)


def channel_moment(Fy: float, E: float, Lb: float, section: Section) -> float:
    """Nominal moment Mn [N·m] of a channel unbraced over Lb [m]: Mp to Lp, in a straight line to 0.7 Fy S at Lr, Fcr S.

    Source: AISC 360-16, F2.2 with c = (ho/2) √(Iy/Cw), rts² = √(Iy Cw)/Sx.

    Raises
    ------
    ZeroDivisionError
        Where the section has no depth or no walls.
    """
    S, J, ho, Iy = section.modulus, section.torsion, section.depth - section.flange, section.inertia_weak
    most = Fy * section.plastic
    Lp = 1.76 * sqrt(Iy / section.area * E / Fy)
    if Lb <= Lp:
        return most
    Cw = channel_warping(section)
    rts = sqrt(sqrt(Iy * Cw) / S)
    twist = J * ho / 2 * sqrt(Iy / Cw) / (S * ho)
    Lr = 1.95 * rts * E / (0.7 * Fy) * sqrt(twist + sqrt(twist**2 + 6.76 * (0.7 * Fy / E) ** 2))
    if Lb <= Lr:
        return most - (most - 0.7 * Fy * S) * (Lb - Lp) / (Lr - Lp)
    slenderness = (Lb / rts) ** 2
    return min(most, pi**2 * E / slenderness * sqrt(1 + 0.078 * twist * slenderness) * S)


def hollow_moment(Fy: float, E: float, Lb: float, section: Section) -> float:
    """Nominal moment Mn [N·m] of a rectangular hollow section unbraced over Lb [m].

    Mp to Lp = 0.13 E ry √(J A)/Mp, in a straight line to 0.7 Fy S at Lr = 2 E ry √(J A)/(0.7 Fy S), as
    1/Lb beyond.  Source: AISC 360-16, F7.4.

    Raises
    ------
    ZeroDivisionError
        Where Fy or a modulus of the section is zero.
    """
    stiff = E * sqrt(section.inertia_weak * section.torsion)  # E ry √(J A), as ry = √(Iy/A)
    most, least = Fy * section.plastic, 0.7 * Fy * section.modulus
    Lp, Lr = 0.13 * stiff / most, 2 * stiff / least
    if Lb <= Lp:
        return most
    return most - (most - least) * (Lb - Lp) / (Lr - Lp) if Lb <= Lr else 2 * stiff / Lb


def steel(bar: Bar) -> tuple[float, float]:
    """Yield strength Fy and modulus E [Pa] of a lever."""
    material: Material = bar.material
    return material.fy(wall(bar.section)), material.modulus


def bending(bar: Bar) -> Result:
    """Bending at the pivot on the net section: M ≤ Mn/1.67, Mn = Fy Z_net, of flats 1.6 Fy S_net at most.

    Source: AISC 360-16, F11.1, F2.1, F7.1.

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    *_, moment = lever_forces(bar)
    _, S, Z = net_section(bar)
    Fy, E = steel(bar)
    flat = bar.section.kind == "flat"
    factor = compactness(bar.section, Fy, E)
    nominal = plastic_moment(Fy, Z, S) if flat else factor * Fy * Z
    working = (
        ("P", bar.load, "N"),
        ("a", bar.a, "m"),
        ("b", bar.b, "m"),
        ("Z_net", Z, "m³"),
        ("S_net", S, "m³"),
        ("Fy", Fy, "Pa"),
        ("Mn", nominal, "N·m"),
        ("Ω", OMEGA, ""),
    )
    return judge(BENDING, "AISC 360 F11.1" if flat else "AISC 360 F2.1, F7.1", moment, nominal / OMEGA, "N·m", working)


def shear(bar: Bar) -> Result:
    """Shear beside the largest hole: V ≤ 0.6 Fy Aw/1.67, and 0.6 Fu Aw/2.00; Aw the net area of the webs, Cv = 1.

    For h/t ≤ 1.10 √(5.34 E/Fy); more slender webs are not covered.  Source: AISC 360-16, G2.1, G4, J4.2.

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    force_a, force_b, _ = lever_forces(bar)
    area, section = shear_area(bar), bar.section
    Fy, E = steel(bar)
    Fu = bar.material.fu(wall(section))
    slender = clear_depth(section) / section.web > 1.10 * sqrt(5.34 * E / Fy)
    limit = 0.0 if slender else 0.6 * area * min(Fy / OMEGA, Fu / OMEGA_RUPTURE)
    force = max(force_a, force_b)
    working = (("V", force, "N"), ("Aw", area, "m²"), ("Fy", Fy, "Pa"), ("Fu", Fu, "Pa"), ("Ω", OMEGA, ""))
    return judge(SHEAR, "AISC 360 G2.1", force, limit, "N", working)


def buckling(bar: Bar) -> Result:
    """Lateral-torsional buckling over the unbraced length: M ≤ Mn/1.67, each profile by itself.

    Source: AISC 360-16, F11.2 (flats), F2.2 (channels), F7.4 (hollow sections).

    Raises
    ------
    ValueError
        Where the load is negative, an arm is not positive, or levers are not made of such a profile.
    """
    *_, moment = lever_forces(bar)
    section, Lb = bar.section, bar.braced
    Fy, E = steel(bar)
    if section.kind == "flat":
        clause, one = "AISC 360 F11.2", rectangular_bar_moment(Fy, E, Lb, section.depth, section.web)
    elif section.kind == "channel":
        clause, one = "AISC 360 F2.2", channel_moment(Fy, E, Lb, section)
    elif section.kind == "hollow":
        clause, one = "AISC 360 F7.4", hollow_moment(Fy, E, Lb, section)
    else:
        raise ValueError(f"a lever is made of flats, channels or a hollow section, not of a {section.kind}")
    nominal = bar.count * min(one, compactness(section, Fy, E) * Fy * section.plastic)
    working = (("M", moment, "N·m"), ("Lb", Lb, "m"), ("Fy", Fy, "Pa"), ("Mn", nominal, "N·m"), ("Ω", OMEGA, ""))
    return judge(BUCKLING, clause, moment, nominal / OMEGA, "N·m", working)


def plate_bending(plate: PlateBending) -> Result:
    """A plate bent flat: M ≤ Fy w t²/4 /1.67.  Source: AISC 360-16, F11.1.

    Raises
    ------
    ValueError
        Where the moment is negative.
    """
    moment, t, width = not_negative(plate.moment), plate.thickness, max(plate.width, 0.0)
    Fy = plate.material.fy(t)
    nominal = plastic_moment(Fy, width * t**2 / 4, width * t**2 / 6)
    working = (("M", moment, "N·m"), ("w", width, "m"), ("t", t, "m"), ("Fy", Fy, "Pa"), ("Ω", OMEGA, ""))
    return judge(PLATE_BENDING, "AISC 360 F11.1", moment, nominal / OMEGA, "N·m", working)


def punching(plate: PlateBending) -> Result:
    """Shear of a plate about the washer: P ≤ 0.6 π dm t · the lesser of Fy/1.50 and Fu/2.00.

    Source: AISC 360-16, J4.2, on the cylinder under the washer's rim.

    Raises
    ------
    ValueError
        Where the load is negative.
    """
    load, t = not_negative(plate.load), plate.thickness
    Fy, Fu = plate.material.fy(t), plate.material.fu(t)
    area = pi * plate.washer * t if plate.washer > plate.hole else 0.0
    working = (("P", load, "N"), ("dm", plate.washer, "m"), ("t", t, "m"), ("Fy", Fy, "Pa"), ("Fu", Fu, "Pa"))
    return judge(PUNCHING, "AISC 360 J4.2", load, 0.6 * area * min(Fy / OMEGA_SHEAR, Fu / OMEGA_RUPTURE), "N", working)
