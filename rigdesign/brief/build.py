"""From the file's tables to the frozen Brief: what concerns several keys at once."""

from __future__ import annotations

import math
from pathlib import PurePath
from typing import Literal

import numpy as np

from rigdesign.brief.context import Context, frozen, table_stations
from rigdesign.brief.layout import AcceptanceTable, Bands, BriefFile, JackTable, LeversTable, PadsTable
from rigdesign.brief.loads import load, stretch
from rigdesign.brief.model import (
    Acceptance,
    BandRule,
    Brief,
    Floats,
    Grouping,
    JackRules,
    LeverRules,
    PadRules,
    Region,
    Source,
    Specimen,
)
from rigdesign.brief.specimen import specimen
from rigdesign.display import show
from rigdesign.words import DEFAULT_MOMENT_BAND, MOST_PADS

_SIDES: tuple[Literal["under", "over"], ...] = ("under", "over")
_QUANTITIES: tuple[Literal["moment", "shear"], ...] = ("moment", "shear")


def build(file: BriefFile, context: Context) -> Brief:
    """Return the brief; raise InputError where its keys contradict each other or a table cannot be used."""
    piece = specimen(file.specimen, context)
    loads = tuple(load(entry, number, piece, context) for number, entry in enumerate(file.load))
    pads = _pads(file.pads, piece, context)
    name = context.places.name
    return Brief(
        title=file.title or PurePath(name).stem,
        specimen=piece,
        loads=loads,
        peak=file.test.peak,
        pads=pads,
        levers=_levers(file.levers, pads, context),
        jack=_jack(file.jack, piece, context),
        acceptance=_acceptance(file.acceptance, piece, context),
        source=Source(name, context.texts.used()),
    )


def _pads(table: PadsTable, piece: Specimen, context: Context) -> PadRules:
    """Return what [pads] asks for."""
    stations = _stations(table, piece, context)
    largest = math.inf if table.largest_force is None else table.largest_force
    if not largest > table.least_force:
        raise context.error(
            "the largest force must be more than the least force",
            "pads",
            "largest_force",
            limit=f"more than {show(table.least_force, 'force')}, least_force",
        )
    if table.largest_pressure is not None and (table.length is None or table.width is None):
        raise context.error(
            "a largest pressure needs the footprint",
            "pads",
            "largest_pressure",
            remedy="give length and width of the pads",
        )
    return PadRules(
        count=_count(table, stations, context),
        places=table.places,
        stations=stations,
        length=table.length or 0.0,
        width=table.width,
        gap=table.gap,
        largest_force=largest,
        least_force=table.least_force,
        largest_pressure=math.inf if table.largest_pressure is None else table.largest_pressure,
        keep_out=_keep_out(table, piece, context),
        action=table.action,
        aim=table.aim,
        ease=table.ease,
    )


def _stations(table: PadsTable, piece: Specimen, context: Context) -> Floats:
    """Return the stations of fixed pads or hard points (n,) [m], empty for free places."""
    given = [key for key in ("stations", "table") if getattr(table, key) is not None]
    if table.places == "free":
        if given:
            raise context.error(
                f'places = "free" goes without "{given[0]}"',
                "pads",
                given[0],
                remedy='write places = "fixed" or "hard points", or delete it',
            )
        return frozen(np.empty(0))
    if len(given) != 1:
        what = f'places = "{table.places}" needs the stations once'
        raise context.error(what, "pads", "places", limit='"stations" or "table", and not both', value="")
    if table.table is not None:
        x = table_stations(context.table(table.table, ("pads", "table"), {"x": "length"}), piece)
    else:
        listed = () if table.stations is None else table.stations
        x = frozen(np.array([context.station(float(x), piece, "pads", "stations") for x in listed]))
        if np.any(np.diff(x) <= 0):
            raise context.error("the stations must be in order of x, each once", "pads", "stations")
    if x.size > MOST_PADS:
        what, limit = f"{x.size} stations are more than can be designed for", f"up to {MOST_PADS}"
        remedy = 'name fewer, or write places = "free"'
        raise context.error(what, "pads", given[0], limit=limit, remedy=remedy)
    return x


def _count(table: PadsTable, stations: Floats, context: Context) -> int | Literal["fewest"]:
    """Return the number of pads, or "fewest"."""
    if table.places == "fixed":
        if table.count is not None and table.count != stations.size:
            what, remedy = (
                "fixed pads are as many as there are stations",
                'delete "count", or write places = "hard points"',
            )
            raise context.error(what, "pads", "count", limit=f"{stations.size}", remedy=remedy)
        return int(stations.size)
    if table.count is None:
        raise context.error('the key "count" is missing', "pads", value="", limit='a whole number, or "fewest"')
    return table.count


def _keep_out(table: PadsTable, piece: Specimen, context: Context) -> tuple[tuple[float, float], ...]:
    """Return the keep-outs in order of x."""
    pairs = []
    for number, (start, end) in enumerate(table.keep_out, start=1):
        start, end = (context.station(x, piece, "pads", "keep_out", what=f"keep-out {number}") for x in (start, end))
        if not start < end:
            raise context.error(f"the two stations of keep-out {number} must be in order of x", "pads", "keep_out")
        pairs.append((start, end))
    return tuple(sorted(pairs))


def _levers(table: LeversTable, pads: PadRules, context: Context) -> LeverRules:
    """Return what [levers] asks for."""
    longest = math.inf if table.longest is None else table.longest
    if longest < 2 * table.shortest_arm:
        raise context.error(
            "the longest lever must hold two of the shortest arms",
            "levers",
            "longest",
            limit=f"{show(2 * table.shortest_arm, 'length')} or more",
        )
    if table.grouping is not None:
        _check_grouping(table.grouping, pads, context)
    return LeverRules(table.drill_step, table.ratio_limit, table.shortest_arm, longest, table.tiers, table.grouping)


def _check_grouping(grouping: Grouping, pads: PadRules, context: Context) -> None:
    """Raise BriefError unless the grouping names every pad from 1 to the number of pads."""
    named = sorted(_leaves(grouping))
    count = pads.count if isinstance(pads.count, int) else named[-1]
    left_out = [pad for pad in range(1, count + 1) if pad not in named]
    if left_out:
        raise context.error(
            f"the grouping leaves out pad {left_out[0]}", "levers", "grouping", limit=f"pads 1 to {count}"
        )
    if named[-1] > count:
        raise context.error(f"the grouping names pad {named[-1]}, and there are {count} pads", "levers", "grouping")


def _leaves(grouping: Grouping) -> list[int]:
    return [pad for item in grouping for pad in ([item] if isinstance(item, int) else _leaves(item))]


def _jack(table: JackTable, piece: Specimen, context: Context) -> JackRules:
    """Return where the jack can stand."""
    if table.at is not None and table.step is not None:
        raise context.error("the jack has a place or a step, not both", "jack", "step", remedy='delete "at" or "step"')
    at = None if table.at is None else context.station(table.at, piece, "jack", "at", what="the jack")
    return JackRules(at, table.step)


def _acceptance(table: AcceptanceTable | None, piece: Specimen, context: Context) -> Acceptance:
    """Return the band rules; without [acceptance] the default on the moment."""
    if table is None:
        return Acceptance(
            tuple(BandRule("moment", side, DEFAULT_MOMENT_BAND, False, "peak") for side in _SIDES), (), True
        )
    rules = _rules(table, "peak")
    regions = []
    for index, region in enumerate(table.region):
        path = ("acceptance", "region", index)
        start_x, end_x = stretch(region.from_, region.to, piece, context, *path)
        # a region overrides what it names; what percentages are of holds on where it does not say
        named = _rules(region, table.of or "peak")
        if not named:
            raise context.error("the region names no band", *path, remedy="give moment or shear, or delete it")
        regions.append(Region(f"region {index + 1}", start_x, end_x, named))
    if not rules and not regions:
        raise context.error(
            "[acceptance] names no band", "acceptance", remedy="give moment or shear, or delete the table"
        )
    return Acceptance(rules, tuple(regions), False)


def _rules(table: Bands, of: Literal["peak", "local"]) -> tuple[BandRule, ...]:
    """Return the rules that a table of bands names: one a quantity and side."""
    rules = []
    for quantity in _QUANTITIES:
        for side in _SIDES:
            amount = getattr(table, f"{quantity}_{side}") or getattr(table, quantity)
            if amount is not None:
                rules.append(BandRule(quantity, side, amount.value, amount.absolute, table.of or of))
    return tuple(rules)
