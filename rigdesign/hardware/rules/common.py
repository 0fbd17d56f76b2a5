"""Mechanics that every set of rules shares: forces of a lever, its net section, a pin's moment, how a check is told.

    a lever     F_A = P b/(a + b),  F_B = P a/(a + b),  M = P a b/(a + b) at the pivot
    a pin       M = F/8 (b + 4c + 2a), inner plate b, gap c, outer plates a     (EN 1993-1-8, Figure 3.11)
    net section the hole at mid depth takes t d³/12 of every web; side plates are not counted in bending

Depends on: hardware.model, rules.model.
"""

from __future__ import annotations

from math import inf, pi

from rigdesign.hardware.model import Section
from rigdesign.hardware.rules.model import Bar, PinState, Result, WebbingState, Working

BENDING = "bending at the pivot"
SHEAR = "shear"
BUCKLING = "lateral-torsional buckling"
DEFLECTION = "deflection"
BEARING = "bearing"
NET_TENSION = "tension beside the hole"
FRACTURE = "fracture beyond the hole"
TEAR_OUT = "tear-out"
DISHING = "dishing"
PIN_SHEAR = "pin shear"
PIN_BENDING = "pin bending"
PIN_BOTH = "pin shear and bending"
ROD_YIELD = "rod tension, yield"
ROD_RUPTURE = "rod tension, rupture"
ROD_BUCKLING = "rod buckling"
ROD_BOTH = "rod compression and bending"
STRAP_YIELD = "strap tension, whole section"
STRAP_RUPTURE = "strap tension beside the hole"
WEBBING = "webbing tension"
PLATE_BENDING = "plate bending"
PUNCHING = "punching at the washer"

POISSON = 0.3
"""Poisson's ratio of steel and, near enough, of aluminium: the shear modulus is E/(2 (1 + ν))."""

WEBBING_FACTOR = 7.0
"""Breaking load over permitted load of webbing slings: the coefficient of utilisation of EN 1492-1 (from memory)."""


def judge(check: str, clause: str, value: float, limit: float, unit: str, working: Working) -> Result:
    """Return a check told whole; a limit of nothing, or less, gives an infinite utilisation.

    Examples
    --------
    >>> judge("shear", "a clause", 3.0, 4.0, "N", ()).utilisation
    0.75
    >>> judge("shear", "a clause", 0.0, 0.0, "N", ()).utilisation
    inf
    """
    limit = limit if limit > 0 else 0.0
    return Result(check, clause, value, limit, unit, value / limit if limit else inf, working)


def not_negative(load: float) -> float:
    """Return the load, a magnitude.

    Raises
    ------
    ValueError
        Where it is negative or not a number.
    """
    if not load >= 0:
        raise ValueError(f"a strength check takes the magnitude of a load, not {load!r} N")
    return load


def lever_forces(bar: Bar) -> tuple[float, float, float]:
    """Forces at holes A and B [N] and the moment at the pivot [N·m] of a lever; all magnitudes.

    Raises
    ------
    ValueError
        Where the load is negative or an arm is not positive.

    Examples
    --------
    >>> from types import SimpleNamespace
    >>> lever_forces(SimpleNamespace(load=8000.0, a=0.6, b=0.4))
    (3200.0, 4800.0, 1920.0)
    """
    load, a, b = not_negative(bar.load), bar.a, bar.b
    if not (a > 0 and b > 0):
        raise ValueError(f"a lever's arms are positive, not {a!r} m and {b!r} m")
    force_a = load * b / (a + b)
    return force_a, load - force_a, force_a * a


def webs(section: Section) -> int:
    """How many webs of a profile a pin passes: 2 of a hollow section, 1 of a flat or channel.

    Raises
    ------
    ValueError
        Where levers are not made of such a profile.
    """
    if section.kind == "hollow":
        return 2
    if section.kind in ("flat", "channel"):
        return 1
    raise ValueError(f"a lever is made of flats, channels or a hollow section, not of a {section.kind}")


def clear_depth(section: Section) -> float:
    """Depth [m] in which a hole at mid depth has room: that of a flat, between the flanges of the others."""
    return section.depth if section.kind == "flat" else section.depth - 2 * section.flange


def net_section(bar: Bar) -> tuple[float, float, float]:
    """I [m⁴], W and W_pl [m³] of all profiles at the pivot, less the hole; zeros where the hole leaves no web.

    I_net = I − n t d³/12, W_net = I_net/(h/2), W_pl,net = W_pl − n t d²/4, with n webs of thickness t, hole d, depth h.
    Side plates, which end at the hole's neighbourhood, are not counted.

    Raises
    ------
    ValueError
        Where levers are not made of such a profile.
    """
    section, hole = bar.section, bar.pivot_hole
    steel = bar.count * webs(section) * section.web
    if hole >= clear_depth(section):
        return 0.0, 0.0, 0.0
    inertia = bar.count * section.inertia - steel * hole**3 / 12
    return inertia, 2 * inertia / section.depth, bar.count * section.plastic - steel * hole**2 / 4


def shear_area(bar: Bar) -> float:
    """Area [m²] of all webs over the whole depth less the largest hole; 0 where the hole leaves no web."""
    section, hole = bar.section, max(bar.pivot_hole, bar.end_hole)
    if hole >= clear_depth(section):
        return 0.0
    return bar.count * webs(section) * section.web * (section.depth - hole)


def wall(section: Section) -> float:
    """The thickness [m] by which the strength of a profile's steel is read: its thickest wall."""
    return max(section.web, section.flange)


def channel_warping(section: Section) -> float:
    """Warping constant [m⁶] of a channel with flanges of even thickness.

    C_w = t_f b³ h²/12 · (3 b t_f + 2 h t_w)/(6 b t_f + h t_w), b and h between the middle lines of web and flanges.
    Source: Galambos & Surovek, Structural Stability of Steel (from memory).

    Raises
    ------
    ZeroDivisionError
        Where the channel has neither flanges nor web.
    """
    flange, web = section.flange, section.web
    b, h = section.width - web / 2, section.depth - flange
    return flange * b**3 * h**2 / 12 * (3 * b * flange + 2 * h * web) / (6 * b * flange + h * web)


def deflection(bar: Bar) -> Result:
    """Deflection of a lever's ends against the pivot, over their arms; the larger of both.

    Each arm is a cantilever of the whole bar: δ/a = F_A a²/(3 E I), and so for b.  Without the hole and without shear,
    which on arms of five times the depth and more is below 4 % of it.  At the load without any design factor.
    Source: elastic beam theory; the limit is the brief's.

    Raises
    ------
    ValueError
        Where the load is negative or an arm is not positive.
    """
    force_a, force_b, _ = lever_forces(bar)
    inertia = bar.count * bar.section.inertia
    modulus = bar.material.modulus
    ends = (force_a, bar.a), (force_b, bar.b)
    force, arm = max(ends, key=lambda end: end[0] * end[1] ** 2)
    slope = force * arm**2 / (3 * modulus * inertia)
    working = (("F", force, "N"), ("a", arm, "m"), ("E", modulus, "Pa"), ("I", inertia, "m⁴"), ("δ", slope * arm, "m"))
    return judge(DEFLECTION, "cantilever δ = F a³/(3 E I)", slope, bar.deflection_limit, "", working)


def pin_moment(pin: PinState) -> float:
    """Bending moment [N·m] in the middle of a pin in double shear: M = F/8 (b + 4c + 2a).

    Plates press evenly over their thickness: inner plate b, outer plates a each, gap c on each side.
    Source: EN 1993-1-8, Figure 3.11.

    Raises
    ------
    ValueError
        Where the load is negative.

    Examples
    --------
    The pin of 100 kN through plates of 10, 20, 10 mm with gaps of 2 mm:

    >>> from types import SimpleNamespace
    >>> round(pin_moment(SimpleNamespace(load=100e3, inner=0.020, outer=0.010, gap=0.002)), 6)
    600.0
    """
    return not_negative(pin.load) * (pin.inner + 4 * pin.gap + 2 * pin.outer) / 8


def pin_working(pin: PinState) -> Working:
    """What every check of a pin shows first."""
    return (
        ("F", pin.load, "N"),
        ("d", pin.pin, "m"),
        ("a", pin.outer, "m"),
        ("b", pin.inner, "m"),
        ("c", pin.gap, "m"),
    )


def round_modulus(diameter: float) -> float:
    """Elastic section modulus of a round bar, π d³/32 [m³].

    Examples
    --------
    >>> round(round_modulus(0.030) * 1e9, 3)
    2650.719
    """
    return pi * diameter**3 / 32


def webbing_tension(webbing: WebbingState) -> Result:
    """Load of a webbing sling against its breaking load over 7.

    Source: EN 1492-1, coefficient of utilisation 7 (from memory); the same under every set of rules.

    Raises
    ------
    ValueError
        Where the load is negative.

    Examples
    --------
    >>> webbing_tension(WebbingState(load=5e3, breaking=70e3)).utilisation
    0.5
    """
    limit = webbing.breaking / WEBBING_FACTOR
    working = (("F", webbing.load, "N"), ("MBL", webbing.breaking, "N"), ("factor", WEBBING_FACTOR, ""))
    return judge(WEBBING, "EN 1492-1, factor 7", not_negative(webbing.load), limit, "N", working)
