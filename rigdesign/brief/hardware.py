"""From the file's [hardware] to HardwareRules: what concerns several keys at once."""

from __future__ import annotations

import math

from rigdesign.brief.context import Context
from rigdesign.brief.layout_hardware import BTH_KEYS, HardwareTable
from rigdesign.brief.model_hardware import HardwareRules
from rigdesign.words import (
    DEFAULT_DESIGN_FACTOR,
    DEFAULT_LOAD_FACTOR,
    DEFAULT_MARK_TOLERANCE,
    OVER_PEOPLE_DESIGN_FACTOR,
)


def hardware(table: HardwareTable, context: Context) -> HardwareRules:
    """Return what [hardware] asks for; raise InputError where keys contradict each other or a table cannot be used."""
    _check_rules(table, context)
    return HardwareRules(
        headroom=math.inf if table.headroom is None else table.headroom,
        clearance=table.clearance,
        builds=table.build,
        grade=table.grade,
        pin_grade=table.pin_grade,
        rules=table.rules,
        design_factor=_design_factor(table),
        load_factor=DEFAULT_LOAD_FACTOR if table.load_factor is None else table.load_factor,
        overshoot=table.overshoot,
        pins=table.pins,
        play=table.play,
        links=table.links,
        link_length=table.link_length or 0.0,
        turn=table.turn,
        swing=table.swing,
        deflection=table.deflection,
        density=table.density,
        pad_mass=table.pad_mass,
        pad_height=table.pad_height,
        stock=(),
        jacks=(),
        cells=(),
        surface=None,
        marks=table.part_marks,
        mark_tolerance=DEFAULT_MARK_TOLERANCE if table.mark_tolerance is None else table.mark_tolerance,
        balance=table.balance,
        bar=table.bar,
        kerf=table.kerf,
        revision=table.revision,
    )


def _design_factor(table: HardwareTable) -> float:
    if table.design_factor is not None:
        return table.design_factor
    return OVER_PEOPLE_DESIGN_FACTOR if table.over_people else DEFAULT_DESIGN_FACTOR


def _check_rules(table: HardwareTable, context: Context) -> None:
    """Raise BriefError where a factor belongs to other rules than those chosen, or is too small over people."""
    for key, rules in (*((key, "BTH-1") for key in BTH_KEYS), ("load_factor", "EN 1993")):
        if getattr(table, key) and table.rules != rules:
            what = f'"{key}" belongs to the rules {rules}, and the rules are {table.rules}'
            remedy = f'delete it, or write rules = "{rules}"'
            raise context.error(what, "hardware", key, remedy=remedy)
