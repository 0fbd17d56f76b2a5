"""Jacks and load cells to choose from, weakest first."""

from __future__ import annotations

from functools import cache
from typing import Literal

from rigdesign.brief.model_hardware import HardwareRules, MachineRow
from rigdesign.hardware.catalogue.reading import rows
from rigdesign.hardware.model import Machine


def jacks(rules: HardwareRules) -> tuple[Machine, ...]:
    """Return the brief's own jacks, or where it has none the catalogue's generic ones; by force, then by mass."""
    return _in_order(rules.jacks, "jack")


def cells(rules: HardwareRules) -> tuple[Machine, ...]:
    """Return the brief's own load cells, or where it has none the catalogue's generic ones; by force, then by mass."""
    return _in_order(rules.cells, "cell")


def _in_order(own: tuple[MachineRow, ...], kind: Literal["jack", "cell"]) -> tuple[Machine, ...]:
    if not own:
        return _shipped(kind)
    found = (
        Machine(row.name, row.force, row.length, row.stroke, row.mass, row.pin, f"the brief's {kind}s") for row in own
    )
    return tuple(sorted(found, key=lambda machine: (machine.force, machine.mass, machine.name)))


@cache
def _shipped(kind: Literal["jack", "cell"]) -> tuple[Machine, ...]:
    return tuple(
        Machine(
            name=f"{'jack' if kind == 'jack' else 'load cell'} {row['force_kN']} kN",
            force=float(row["force_kN"]) * 1e3,
            length=float(row["length_m"]),
            stroke=float(row["stroke_m"]),
            mass=float(row["mass_kg"]),
            pin=float(row["pin_mm"]) / 1e3,
            source=row["source"],
        )
        for row in rows("machines")
        if row["kind"] == kind
    )
