"""SI floats as text for people: a fitting unit, a sensible number of digits, SI or US customary.

No digit in front of the decimal point is ever rounded away: "1214 lbf", never "1210 lbf".  Negative values carry a
true minus sign, as in tables and figures.

Depends on: words.
"""

from __future__ import annotations

import math
from typing import Literal

from rigdesign.words import INCH, POUND_FORCE

System = Literal["SI", "us"]

# per kind: unit as shown, what one of it is in SI, from which value on it is used (in that unit)
_Steps = tuple[tuple[str, float, float], ...]
_SI: dict[str, _Steps] = {
    "length": (("mm", 1e-3, 0.0), ("m", 1.0, 0.1)),
    "force": (("N", 1.0, 0.0), ("kN", 1e3, 1.0), ("MN", 1e6, 1.0)),
    "mass": (("kg", 1.0, 0.0), ("t", 1e3, 10.0)),
    "mass per length": (("kg/m", 1.0, 0.0),),
    "density": (("kg/m³", 1.0, 0.0),),
    "running load": (("N/m", 1.0, 0.0), ("kN/m", 1e3, 1.0), ("MN/m", 1e6, 1.0)),
    "moment": (("N·m", 1.0, 0.0), ("kN·m", 1e3, 1.0), ("MN·m", 1e6, 1.0)),
    "pressure": (("Pa", 1.0, 0.0), ("kPa", 1e3, 1.0), ("MPa", 1e6, 1.0), ("GPa", 1e9, 1.0)),
    "running torque": (("N·m/m", 1.0, 0.0), ("kN·m/m", 1e3, 1.0)),
    "angle": (("deg", math.pi / 180, 0.0),),
    "time": (("s", 1.0, 0.0),),
    "fraction": (("%", 0.01, 0.0),),
}
_US: dict[str, _Steps] = {
    "length": (("in", INCH, 0.0),),
    "force": (("lbf", POUND_FORCE, 0.0), ("kip", 1e3 * POUND_FORCE, 10.0)),
    "mass": (("lb", 0.45359237, 0.0),),
    "mass per length": (("lb/ft", 0.45359237 / 0.3048, 0.0),),
    "density": (("lb/in³", 0.45359237 / INCH**3, 0.0),),
    "running load": (("lbf/in", POUND_FORCE / INCH, 0.0),),
    "moment": (("in·lbf", POUND_FORCE * INCH, 0.0), ("in·kip", 1e3 * POUND_FORCE * INCH, 100.0)),
    "pressure": (("psi", POUND_FORCE / INCH**2, 0.0), ("ksi", 1e3 * POUND_FORCE / INCH**2, 1.0)),
    "running torque": (("in·lbf/in", POUND_FORCE, 0.0),),
    "angle": _SI["angle"],
    "time": _SI["time"],
    "fraction": _SI["fraction"],
}
# lengths are places of holes and pads: a fixed number of decimals reads better than a fixed number of digits
_DECIMALS = {"m": 3, "in": 2}


def show(value: float, kind: str, system: System = "SI", *, digits: int = 3, unit: str | None = None) -> str:
    """Return an SI value with unit for people.

    Parameters
    ----------
    value
        The value in SI; a fraction for kind "fraction", which is shown as a percentage.
    kind
        A name of `rigdesign.units.KINDS`.
    system
        "SI" or "us" (US customary).
    digits
        Significant digits; stations in m always have 3 decimals, in inches 2.
    unit
        One of the units this kind is shown in; by default the one that fits the size.

    Examples
    --------
    >>> show(5400.0, "force"), show(1.3581, "length"), show(-0.0123, "fraction"), show(5400.0, "force", "us")
    ('5.40 kN', '1.358 m', '−1.23 %', '1214 lbf')
    >>> show(0.0, "moment"), show(float("inf"), "force"), show(1.25, "length", unit="mm")
    ('0 N·m', 'no limit', '1250 mm')
    """
    if math.isnan(value):
        return "not a number"
    if math.isinf(value):
        return "no limit" if value > 0 else "−no limit"
    steps = {"SI": _SI, "us": _US}[system][kind]
    if value == 0:
        base = [name for name, factor, _ in steps if factor == 1.0] or [steps[0][0]]
        return f"0 {unit or base[0]}"
    if unit is not None:
        name, factor = next((name, factor) for name, factor, _ in steps if name == unit)
        return f"{_number(value / factor, name, digits)} {name}"
    name, factor = steps[0][:2]
    for other, bigger, start in steps[1:]:
        # rounded first, so that 999.96 N becomes 1.00 kN and not 1000 N
        if abs(float(f"{value / bigger:.{digits - 1}e}")) >= start:
            name, factor = other, bigger
    return f"{_number(value / factor, name, digits)} {name}"


def counted(number: int, word: str) -> str:
    """A number with its noun.

    >>> counted(1, "pad"), counted(12, "lever")
    ('1 pad', '12 levers')
    """
    return f"{number} {word}" if number == 1 else f"{number} {word}s"


def _number(value: float, unit: str, digits: int) -> str:
    """Format a number with so many significant digits, or the fixed decimals of its unit."""
    decimals = _DECIMALS.get(unit)
    if decimals is None:
        magnitude = math.floor(math.log10(abs(float(f"{value:.{digits - 1}e}"))))
        decimals = max(digits - 1 - magnitude, 0)
    elif abs(value) < 10.0**-decimals:
        return _number(value, "", digits)
    text = f"{abs(value):.{digits - 1}e}" if decimals > 9 else f"{abs(value):.{decimals}f}"
    return f"−{text}" if value < 0 else text


def show_steel(value: float) -> str:
    """Return a steel estimate in words: four digits, more where more stand before the decimal point.

    >>> show_steel(28.7061), show_steel(59869.6)
    ('28.71 N^(2/3)·m^(5/3)', '59870 N^(2/3)·m^(5/3)')
    """
    return f"{value:.4g} N^(2/3)·m^(5/3)" if abs(value) < 1e4 else f"{value:.0f} N^(2/3)·m^(5/3)"
