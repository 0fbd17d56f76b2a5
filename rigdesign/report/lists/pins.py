"""Pins: one at each end of each link but for studs, equal ones under one mark."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from rigdesign.hardware.model import End, Hardware, Material
from rigdesign.report.lists.members import place
from rigdesign.report.lists.model import PinRow

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck


def grip(end: End) -> float:
    """What lies on a pin, gaps among it [m]."""
    return end.inner + 2 * (end.gap + end.outer)


def pin_mass(end: End, material: Material) -> float:
    """Mass of the pin of an end [kg]; 0 for a stud, which has none."""
    return 0.0 if end.fitting == "stud" else math.pi / 4 * end.pin**2 * end.pin_length * material.density


def pin_rows(result: HardwareCheck) -> tuple[PinRow, ...]:
    """Return a row a pin mark, N1 first, in the order in which they come from the jack."""
    return pin_rows_of(result.hardware)


def pin_rows_of(hardware: Hardware) -> tuple[PinRow, ...]:
    """Like `pin_rows`, from the hardware alone."""
    ends: dict[tuple[float, float, str, float], list[End]] = {}
    for link in hardware.links:
        for end in (link.upper, link.lower):
            if end.fitting != "stud":
                key = (round(end.pin, 9), round(end.pin_length, 9), link.pin_material.name, link.pin_material.density)
                ends.setdefault(key, []).append(end)
    return tuple(
        PinRow(
            mark=f"N{number}",
            diameter=pinned[0].pin,
            length=pinned[0].pin_length,
            # of pins of one length the longest grip is told: it must fit too
            grip=max(grip(end) for end in pinned),
            material=material,
            mass=math.pi / 4 * pinned[0].pin ** 2 * pinned[0].pin_length * density,
            places=tuple(place(end) for end in pinned),
        )
        for number, ((_, _, material, density), pinned) in enumerate(ends.items(), start=1)
    )
