"""Pins: one at each end of each link but for studs, equal ones under one mark."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from rigdesign.hardware.model import Hardware, Material
from rigdesign.report.lists.members import place
from rigdesign.report.lists.model import PinRow

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

ROUND = 0.001
"""Pins are cut to whole steps of this length [m]."""


def pin_allowance(diameter: float) -> float:
    """Length of a pin beyond its grip at each end for washer and split pin [m]; a workshop's rule, set here.

    >>> round(pin_allowance(0.020), 6)
    0.013
    """
    return 0.003 + 0.5 * diameter


def pin_length(diameter: float, grip: float) -> float:
    """Overall length of a pin [m]: its grip and the allowance at both ends, up to the next whole step.

    >>> round(pin_length(0.020, 0.0344), 6)
    0.061
    """
    # a grip that comes out a rounding above a whole millimetre does not make the pin longer
    return math.ceil((grip + 2 * pin_allowance(diameter)) / ROUND - 1e-6) * ROUND


def pin_mass(diameter: float, grip: float, material: Material) -> float:
    """Mass of a pin [kg]."""
    return math.pi / 4 * diameter**2 * pin_length(diameter, grip) * material.density


def pin_rows(result: HardwareCheck) -> tuple[PinRow, ...]:
    """Return a row a pin mark, N1 first, in the order in which they come from the jack."""
    return pin_rows_of(result.hardware)


def pin_rows_of(hardware: Hardware) -> tuple[PinRow, ...]:
    """Like `pin_rows`, from the hardware alone."""
    places: dict[tuple[float, float, str, float], list[str]] = {}
    grips: dict[tuple[float, float, str, float], float] = {}
    for link in hardware.links:
        for end in (link.upper, link.lower):
            if end.fitting == "stud":
                continue
            material = link.pin_material
            key = (end.pin, pin_length(end.pin, end.pin_length), material.name, material.density)
            places.setdefault(key, []).append(place(end))
            # of pins that are cut to one length the longest grip is told: it must fit too
            grips[key] = max(grips.get(key, 0.0), end.pin_length)
    return tuple(
        PinRow(
            mark=f"N{number}",
            diameter=diameter,
            length=length,
            grip=grips[diameter, length, material, density],
            material=material,
            mass=math.pi / 4 * diameter**2 * length * density,
            places=tuple(where),
        )
        for number, ((diameter, length, material, density), where) in enumerate(places.items(), start=1)
    )
