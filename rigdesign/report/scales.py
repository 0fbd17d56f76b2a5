"""Units on axes, in drawings and in tables: one unit for a whole column, chosen from its largest value.

A column or an axis reads better in one unit than with a prefix for each number, so the choice is made once from the
largest magnitude.  SI by default; "us" gives US customary units.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Literal

from rigdesign.display import System
from rigdesign.words import INCH, POUND_FORCE

Kind = Literal["length", "arm", "force", "moment", "running load", "pressure"]

# (unit, SI value of one, smallest magnitude in that unit for which it is used), the largest unit first
_UNITS: dict[System, dict[Kind, tuple[tuple[str, float, float], ...]]] = {
    "SI": {
        "length": (("m", 1.0, 0.0),),
        "arm": (("mm", 1e-3, 0.0),),
        "force": (("MN", 1e6, 10.0), ("kN", 1e3, 10.0), ("N", 1.0, 0.0)),
        "moment": (("MN·m", 1e6, 10.0), ("kN·m", 1e3, 10.0), ("N·m", 1.0, 0.0)),
        "running load": (("kN/m", 1e3, 10.0), ("N/m", 1.0, 0.0)),
        "pressure": (("MPa", 1e6, 1.0), ("kPa", 1e3, 1.0), ("Pa", 1.0, 0.0)),
    },
    "us": {
        "length": (("in", INCH, 0.0),),
        "arm": (("in", INCH, 0.0),),
        "force": (("kip", 1e3 * POUND_FORCE, 100.0), ("lbf", POUND_FORCE, 0.0)),
        "moment": (("in·kip", 1e3 * POUND_FORCE * INCH, 1000.0), ("in·lbf", POUND_FORCE * INCH, 0.0)),
        "running load": (("lbf/in", POUND_FORCE / INCH, 0.0),),
        "pressure": (("psi", POUND_FORCE / INCH**2, 0.0),),
    },
}


@dataclass(frozen=True)
class Scale:
    """One unit: its name, its size in SI, and the decimals that show the largest value with enough digits."""

    unit: str
    size: float
    decimals: int

    def show(self, value: float) -> str:
        """The value as text without its unit, a true minus sign before negative ones.

        >>> scale("force", 12_345.0).show(-987.0)
        '−0.987'
        """
        text = f"{value / self.size:.{self.decimals}f}"
        return text.replace("-", "−") if float(text) != 0.0 else text.lstrip("-")


def scale(kind: Kind, largest: float, system: System = "SI", digits: int = 4) -> Scale:
    """Return the scale for values of this kind whose largest magnitude is `largest` [SI].

    `digits` is the number of significant digits wanted for the largest value; lengths are shown to 1 mm or 0.01 in,
    arms to 1 mm or 0.01 in.

    >>> scale("force", 980.0).unit, scale("force", 36_700.0).unit, scale("moment", 9_000.0, "us").unit
    ('N', 'kN', 'in·lbf')
    """
    unit, size = next((name, size) for name, size, least in _UNITS[system][kind] if abs(largest) / size >= least)
    if kind in ("length", "arm"):
        return Scale(unit, size, {"m": 3, "mm": 0, "in": 2}[unit])
    whole = math.floor(math.log10(abs(largest) / size)) + 1 if largest else 1
    # a column in kN holds values of some 100 N as well: one digit more
    decimals = max(0, digits - whole) + (1 if size > _UNITS[system][kind][-1][1] else 0)
    return Scale(unit, size, min(decimals, 4))


def arm_scale(step: float, system: System = "SI") -> Scale:
    """Return the scale for arms drilled on `step` [m]: with the decimals that the step needs, at most three more."""
    base = scale("arm", 1.0, system)
    for more in range(4):
        shown = round(step / base.size, base.decimals + more)
        if shown > 0 and abs(shown * base.size - step) <= 1e-6 * step:
            return Scale(base.unit, base.size, base.decimals + more)
    return Scale(base.unit, base.size, base.decimals + 2)
