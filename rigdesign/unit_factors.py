"""What one unit is in SI, exactly: units.txt read by pint, and the spellings that people use.

Depends on: errors.
"""

from __future__ import annotations

import difflib
import re
from fractions import Fraction
from functools import cache
from importlib import resources
from typing import Any

from rigdesign.errors import InputError

Dimensions = tuple[tuple[str, int], ...]
"""Base dimensions with their powers, in order of their names."""

_FACTOR = re.compile(r"([A-Za-z]+)(?:\^?([1-9]))?")
_SIGNS = str.maketrans(dict[str, str | int | None]({"·": "*", "⋅": "*", "×": "*", "²": "^2", "³": "^3", "°": "deg"}))
_GLUED = {"Nm": "N*m", "kNm": "kN*m", "MNm": "MN*m", "Nmm": "N*mm"}
# full names and shop spellings: not accepted, so that a brief reads the same everywhere, but answered
_SPELLED_OUT = {
    **dict.fromkeys(("inch", "inches", "ins", '"', "″"), "in"),
    **dict.fromkeys(("foot", "feet", "'", "′"), "ft"),
    **dict.fromkeys(("metre", "metres", "meter", "meters"), "m"),
    **dict.fromkeys(("millimetre", "millimetres", "millimeter", "millimeters"), "mm"),
    **dict.fromkeys(("newton", "newtons"), "N"),
    **dict.fromkeys(("kilonewton", "kilonewtons"), "kN"),
    **dict.fromkeys(("kips",), "kip"),
    **dict.fromkeys(("lbs", "pound", "pounds"), "lb (mass) or lbf (force)"),
    **dict.fromkeys(("kgs", "kilo", "kilos", "kilogram", "kilograms"), "kg (mass) or kgf (force)"),
    **dict.fromkeys(("plf",), "lbf/ft"),
    **dict.fromkeys(("pli",), "lbf/in"),
    **dict.fromkeys(("degree", "degrees"), "deg"),
}


@cache
def _registry() -> Any:
    """The pint registry of units.txt, loaded when the first unit is met."""
    import pint

    registry: Any = pint.UnitRegistry(None, non_int_type=Fraction, cache_folder=None)
    registry.load_definitions(resources.files("rigdesign").joinpath("units.txt").read_text("utf-8").splitlines())
    return registry


@cache
def unit_names() -> tuple[str, ...]:
    """Return the name of every known unit, sorted."""
    # asked once: pint adds plurals to its own list as it meets them
    return tuple(sorted(_registry()))


@cache
def unit_factor(unit: str) -> tuple[Fraction, Dimensions]:
    """Return what one `unit` is in SI, exactly, and its dimensions.

    Products are written "N*m", "N·m", "ft-lbf" or "Nm", quotients "lbf/in", powers "m^2", "m²" or "m2".

    Raises
    ------
    InputError
        If it is no known unit; the nearest one is offered.

    Examples
    --------
    >>> unit_factor("psi")[0] == Fraction("4.4482216152605") / Fraction("0.0254") ** 2
    True
    """
    canonical, registry = _canonical(unit), _registry()
    factor, base = registry.get_base_units(registry.parse_units(canonical))
    dimensions = tuple(sorted((name, int(power)) for name, power in base.dimensionality.items()))
    return Fraction(factor), dimensions


def _canonical(unit: str) -> str:
    """Return `unit` as pint reads it, each name checked against the list of known ones."""
    text = unit.translate(_SIGNS).strip()
    # a hyphen, a full stop or a space between names is a product too: ft-lbf, kN.m, lbf ft
    text = re.sub(r"(?<=[A-Za-z0-9])\s*[-. ]\s*(?=[A-Za-z])", "*", re.sub(r"\s*([*/^])\s*", r"\1", text))
    above, slash, below = text.replace("**", "^").partition("/")
    if "/" in below or "*" in below:
        raise InputError("a unit has one division and one unit below it", value=f'"{unit}"', limit='such as "N/m"')
    names = [name for part in above.split("*") for name in _factors(part, unit)]
    return "*".join(names) + (f"/({'*'.join(_factors(below, unit))})" if slash else "")


def _factors(part: str, unit: str) -> list[str]:
    """Return the factors of one part of a unit, glued ones taken apart; raise InputError on an unknown name."""
    match = _FACTOR.fullmatch(part)
    if match is None:
        hint = _SPELLED_OUT.get(part)
        remedy = f"write {hint}" if hint else ""
        raise InputError("this is no unit", value=f'"{unit}"', limit='a unit such as "kN" or "lbf/in"', remedy=remedy)
    name, power = match.groups()
    if name in _GLUED and not power:
        return _GLUED[name].split("*")
    if name not in unit_names():
        raise InputError(f'"{name}" is no known unit', value="" if name == unit else f'"{unit}"', remedy=_nearest(name))
    return [f"{name}**{power}" if power else name]


def _nearest(name: str) -> str:
    """Return the advice that goes with an unknown unit's name."""
    known = unit_names()
    if name in _SPELLED_OUT or name.lower() in _SPELLED_OUT:
        return f"write {_SPELLED_OUT.get(name) or _SPELLED_OUT[name.lower()]}"
    same = [other for other in known if other.lower() == name.lower()]
    near = same or difflib.get_close_matches(name, known, n=1, cutoff=0.5)
    if near:
        return f"did you mean {' or '.join(near)}?"
    return f"the known units are {', '.join(sorted(known, key=str.lower))}, and products and quotients of them"
