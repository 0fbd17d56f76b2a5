"""From the file's [hardware] to HardwareRules: what concerns several keys at once."""

from __future__ import annotations

import math

from rigdesign.brief.context import Context
from rigdesign.brief.hardware_tables import LONGEST_BAR, cells, jacks, loaded_surface, stock
from rigdesign.brief.layout_hardware import HardwareTable
from rigdesign.brief.model import PadRules, Specimen
from rigdesign.brief.model_hardware import HardwareRules
from rigdesign.display import show
from rigdesign.words import (
    DEFAULT_DESIGN_FACTOR,
    DEFAULT_LOAD_FACTOR,
    DEFAULT_MARK_TOLERANCE,
    OVER_PEOPLE_DESIGN_FACTOR,
)


def hardware(table: HardwareTable, rules: PadRules, plates: bool, piece: Specimen, context: Context) -> HardwareRules:
    """Return what [hardware] asks for; `plates` tells whether there may be three-point plates.

    Raise InputError where keys contradict each other or a table cannot be used."""
    _check_rules(table, context)
    _check_links(table, rules, plates, piece, context)
    _check_sizes(table, context)
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
        stock=() if table.stock is None else stock(table.stock, table.build, table.kerf, context),
        jacks=() if table.jacks is None else jacks(table.jacks, context),
        cells=() if table.cells is None else cells(table.cells, context),
        surface=None if table.surface is None else loaded_surface(table.surface, context),
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
    for key, rules in (("design_factor", "BTH-1"), ("over_people", "BTH-1"), ("load_factor", "EN 1993")):
        if getattr(table, key) and table.rules != rules:
            what = f'"{key}" belongs to the rules {rules}, and the rules are {table.rules}'
            raise context.error(what, "hardware", key, remedy=f'delete it, or write rules = "{rules}"')
    if table.over_people and _design_factor(table) < OVER_PEOPLE_DESIGN_FACTOR:
        limit = f"{OVER_PEOPLE_DESIGN_FACTOR:g} or more over people"
        remedy = f"write design_factor = {OVER_PEOPLE_DESIGN_FACTOR:.1f}, or delete it, or over_people"
        raise context.error("the design factor is too small", "hardware", "design_factor", limit=limit, remedy=remedy)


def _check_links(table: HardwareTable, rules: PadRules, plates: bool, piece: Specimen, context: Context) -> None:
    """Raise BriefError where the links cannot do what the pads or a plan rig ask of them."""
    if table.links != "rod" and rules.action == "push":
        what = f'links of {table.links} cannot push, and [pads] action is "push"'
        remedy = 'write links = "rod", or action = "pull"'
        raise context.error(what, "hardware", "links", remedy=remedy)
    if table.links == "strap" and piece.is_surface:
        what = "a flat strap keeps the pins at its ends parallel, and levers of a plan rig run in any direction"
        raise context.error(what, "hardware", "links", remedy='write links = "rod" or "webbing"')
    if table.links != "rod" and "hollow section" in table.build:
        what = f"links of {table.links} lie between two profiles, and a hollow section has none"
        remedy = 'write links = "rod", or build = "twin flats" or "twin channels"'
        raise context.error(what, "hardware", "links", remedy=remedy)
    if table.links == "webbing" and plates:
        what = "three-point plates hang on threaded rods, and [levers] plates is true"
        raise context.error(what, "hardware", "links", remedy='write links = "rod", or plates = false')


def _check_sizes(table: HardwareTable, context: Context) -> None:
    """Raise BriefError where one length must be less than another and is not, or stands without what it belongs to."""
    if not table.play < table.pins[0]:
        limit = f"less than the smallest pin, {show(table.pins[0], 'length')}"
        raise context.error("the play is too large", "hardware", "play", limit=limit)
    if table.bar > LONGEST_BAR:
        raise context.error("the bar is too long", "hardware", "bar", limit=f"up to {show(LONGEST_BAR, 'length')}")
    if not table.kerf < table.bar:
        limit = f"less than the bar, {show(table.bar, 'length')}"
        raise context.error("the kerf is too large", "hardware", "kerf", limit=limit)
    if table.mark_tolerance is not None and table.part_marks != "few":
        remedy = 'delete it, or write part_marks = "few"'
        what = f'"mark_tolerance" belongs to part_marks = "few", and part_marks is "{table.part_marks}"'
        raise context.error(what, "hardware", "mark_tolerance", remedy=remedy)
