"""Small turns of phrase that the remarks share.  Numbers with units come from `rigdesign.display.show`."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Literal

from rigdesign.brief.model import Quantity
from rigdesign.display import System, show
from rigdesign.target.cuts import ACROSS

UNIT_KIND: dict[Quantity, Literal["force", "moment"]] = {
    "shear": "force",
    "moment": "moment",
    "torsion": "moment",
    "shear across": "force",
    "moment across": "moment",
}
MOST_NAMES = 8
NOT_PROVEN = "nothing is proven for a target that the rig was not designed for; 0 is the trivial bound"
"""The proof's method where a rig is checked against another target than its own."""


def percent(fraction: float) -> str:
    """A fraction as a percentage; what lies below a thousandth of a per cent is called that.

    >>> percent(1e-9), percent(0.0), percent(0.125)
    ('below 0.001 %', '0 %', '12.5 %')
    """
    if 0 < abs(fraction) < 1e-5:
        return "below 0.001 %"
    return show(fraction, "fraction")


def of_quantity(value: float, quantity: Quantity) -> str:
    """Shear [N], moment or torsion [N·m] with its unit."""
    return show(value, UNIT_KIND[quantity])


def station(at: float, quantity: Quantity, system: System = "SI") -> str:
    """A station of a quantity's cuts, named x or y.

    >>> station(1.25, "torsion"), station(-0.5, "shear across")
    ('x = 1.250 m', 'y = −0.500 m')
    """
    name = "y" if quantity in ACROSS else "x"
    return f"{name} = {show(at, 'length', system, unit='m' if system == 'SI' else None)}"


def listed(names: Iterable[str]) -> str:
    """Names as a list in a sentence, the end cut off after eight.

    >>> listed(["pad 1", "pad 4"]), listed(["pad 2"]), listed(f"pad {i}" for i in range(1, 12))
    ('pad 1 and pad 4', 'pad 2', 'pad 1, pad 2, pad 3, pad 4, pad 5, pad 6, pad 7, pad 8 and 3 more')
    """
    every = list(names)
    if len(every) > MOST_NAMES:
        return ", ".join(every[:MOST_NAMES]) + f" and {len(every) - MOST_NAMES} more"
    return " and ".join([", ".join(every[:-1]), every[-1]]) if len(every) > 1 else "".join(every)


def also(names: Iterable[str]) -> str:
    """A half-sentence on further objects with the same fault, empty where there are none.

    >>> also(["pad 4"]), also([])
    ('; so too pad 4', '')
    """
    text = listed(names)
    return f"; so too {text}" if text else ""
