"""Links: what each joins, its length, its loads and its pins."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.hardware.model import End
from rigdesign.report.lists.members import material_of, place
from rigdesign.report.lists.model import LinkRow
from rigdesign.report.lists.pins import pin_rows_of
from rigdesign.target.curve import Floats

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck


def link_rows(result: HardwareCheck) -> tuple[LinkRow, ...]:
    """Return a row a link, in the order of their numbers."""
    hardware = result.hardware
    pins = {where: row.mark for row in pin_rows_of(hardware) for where in row.places}
    load, held = link_loads(result, 1.0), _held_loads(result)
    return tuple(
        LinkRow(
            number=link.number,
            mark=hardware.marks[link.name],
            kind=link.kind,
            size=link.size,
            material=material_of(link),
            upper=place(link.upper),
            lower=place(link.lower),
            length=link.length,
            adjust=link.adjust,
            load=float(load[k]),
            peak_load=math.copysign(held.get(link.name, abs(float(load[k]))), float(load[k])),
            swing=float(result.space.swings[k]),
            upper_end=fitting_words(link.upper),
            lower_end=fitting_words(link.lower),
            upper_pin=pins.get(place(link.upper), ""),
            lower_pin=pins.get(place(link.lower), ""),
            mass=link.mass,
        )
        for k, link in enumerate(hardware.links)
    )


def link_loads(result: HardwareCheck, level: float) -> Floats:
    """Return what each link carries at a step, own weight among it [N], (n_links,), tension positive.

    Of its two ends the one with more counts.
    """
    loads, side = result.loads, result.hardware.side
    jack = result.tare.step(level).jack[list(loads.tree)]
    upper = side * (loads.link_rate * jack + loads.upper_fixed)
    lower = side * (loads.link_rate * jack + loads.lower_fixed)
    return np.where(np.abs(upper) >= np.abs(lower), upper, lower)


def _held_loads(result: HardwareCheck) -> dict[str, float]:
    """What the strength of each link is held at, as the check has it [N], by the link's name."""
    held: dict[str, float] = {}
    for row in result.strength:
        held[row.piece] = max(held.get(row.piece, 0.0), abs(row.load))
    return held


def fitting_words(end: End) -> str:
    """What a link ends in, in short: "eye 25 thick", "fork, cheeks 12 thick", "stud", "loop"."""
    if end.fitting == "eye":
        return f"eye {1e3 * end.inner:.4g} mm thick"
    if end.fitting == "fork":
        return f"fork, cheeks {1e3 * end.outer:.4g} mm thick"
    return end.fitting
