"""From the file's tables to the frozen Brief: what concerns several keys at once."""

from __future__ import annotations

import math
from pathlib import PurePath
from typing import Literal

from rigdesign.brief.context import Context, between
from rigdesign.brief.hardware import hardware
from rigdesign.brief.keep import kept
from rigdesign.brief.layout import AcceptanceTable, Bands, BriefFile, JackTable, LeversTable
from rigdesign.brief.loads import load, stretch
from rigdesign.brief.messages import is_plan
from rigdesign.brief.model import (
    Acceptance,
    BandRule,
    Brief,
    Grouping,
    JackRules,
    LeverRules,
    PadRules,
    Quantity,
    Region,
    Source,
    Specimen,
)
from rigdesign.brief.pads import pads
from rigdesign.brief.specimen import specimen
from rigdesign.display import show
from rigdesign.words import DEFAULT_CLEARANCE, DEFAULT_MOMENT_BAND, DEFAULT_SHARE, DEFAULT_TORSION_BAND

_SIDES: tuple[Literal["under", "over"], ...] = ("under", "over")
_ALONG: tuple[Quantity, ...] = ("moment", "shear", "torsion")
_ACROSS: tuple[Quantity, ...] = ("moment across", "shear across")


def build(file: BriefFile, context: Context) -> Brief:
    """Return the brief; raise InputError where its keys contradict each other or a table cannot be used."""
    piece = specimen(file.specimen, context)
    loads = tuple(load(entry, number, piece, context) for number, entry in enumerate(file.load))
    rules = pads(file.pads, piece, context)
    steel = hardware(file.hardware, rules, file.levers.plates is True, piece, context)
    keep = kept(file.keep, context)
    name = context.places.name
    return Brief(
        title=file.title or PurePath(name).stem,
        specimen=piece,
        loads=loads,
        peak=file.test.peak,
        pads=rules,
        levers=_levers(file.levers, rules, piece, context),
        jack=_jack(file.jack, piece, context),
        acceptance=_acceptance(file.acceptance, piece, context),
        source=Source(name, context.texts.used()),  # after all that reads tables
        hardware=steel,
        keep=keep,
    )


def _levers(table: LeversTable, rules: PadRules, piece: Specimen, context: Context) -> LeverRules:
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
        _check_grouping(table.grouping, table.plates is True, rules, context)
    default = DEFAULT_CLEARANCE if piece.is_surface else 0.0
    return LeverRules(
        drill_step=table.drill_step,
        ratio_limit=table.ratio_limit,
        shortest_arm=table.shortest_arm,
        longest=longest,
        tiers=table.tiers,
        grouping=table.grouping,
        plates=table.plates is True,
        pair=table.pair or "any",
        clearance=default if table.clearance is None else table.clearance,
    )


def _check_grouping(grouping: Grouping, plates: bool, rules: PadRules, context: Context) -> None:
    """Raise BriefError unless the grouping names every pad, and three together only where there can be plates."""
    if not plates and _widest(grouping) > 2:
        remedy = "write plates = true for three-point plates" if is_plan(context.raw) else ""
        what = "every lever joins two, and this group holds 3"
        raise context.error(what, "levers", "grouping", limit="such as [[1, 2], [3, [4, 5]]]", remedy=remedy)
    named = sorted(_leaves(grouping))
    count = rules.count if isinstance(rules.count, int) else named[-1]
    left_out = [pad for pad in range(1, count + 1) if pad not in named]
    if left_out:
        raise context.error(
            f"the grouping leaves out pad {left_out[0]}", "levers", "grouping", limit=f"pads 1 to {count}"
        )
    if named[-1] > count:
        raise context.error(f"the grouping names pad {named[-1]}, and there are {count} pads", "levers", "grouping")


def _leaves(grouping: Grouping) -> list[int]:
    return [pad for item in grouping for pad in ([item] if isinstance(item, int) else _leaves(item))]


def _widest(grouping: Grouping) -> int:
    """Return how many the largest group joins."""
    return max(len(grouping), *(1 if isinstance(item, int) else _widest(item) for item in grouping))


def _jack(table: JackTable, piece: Specimen, context: Context) -> JackRules:
    """Return where the jack can stand."""
    if table.at is not None and table.step is not None:
        raise context.error("the jack has a place or a step, not both", "jack", "step", remedy='delete "at" or "step"')
    if table.at is None:
        return JackRules(None, table.step)
    at = context.station(table.at.x, piece, "jack", "at", what="the jack")
    if table.at.y is None or piece.outline is None:
        return JackRules(at, None)
    least, most = float(piece.outline.y.min()), float(piece.outline.y.max())
    if not least <= table.at.y <= most:
        limit = f"y from {between(least, most)}"
        raise context.error("the jack stands beside the specimen", "jack", "at", limit=limit)
    return JackRules(at, None, table.at.y)


def _acceptance(table: AcceptanceTable | None, piece: Specimen, context: Context) -> Acceptance:
    """Return the band rules; without [acceptance] the defaults on the moment, and on a surface on the torsion."""
    if table is None:
        return _defaults(piece)
    rules = _rules(table, "peak") + _across(table)
    regions = []
    for index, region in enumerate(table.region):
        path = ("acceptance", "region", index)
        start_x, end_x = stretch(region.from_, region.to, piece, context, *path)
        # a region overrides what it names; what percentages are of holds on where it does not say
        named = _rules(region, table.of or "peak")
        if not named:
            remedy = f"give {_bands_of(piece)}, or delete it"
            raise context.error("the region names no band", *path, remedy=remedy)
        regions.append(Region(f"region {index + 1}", start_x, end_x, named))
    if not rules and not regions and table.share is None:
        remedy = f"give {_bands_of(piece)}, or delete the table"
        raise context.error("[acceptance] names no band", "acceptance", remedy=remedy)
    is_panel = any(rule.quantity in _ACROSS for rule in rules)
    share = DEFAULT_SHARE if table.share is None and is_panel else table.share
    return Acceptance(rules, tuple(regions), False, share, table.share is None and is_panel)


def _defaults(piece: Specimen) -> Acceptance:
    """Return the bands that hold where the brief names none."""
    amounts: list[tuple[Quantity, float]] = [("moment", DEFAULT_MOMENT_BAND)]
    if piece.is_surface:
        amounts.append(("torsion", DEFAULT_TORSION_BAND))
    rules = tuple(BandRule(quantity, side, amount, False, "peak") for quantity, amount in amounts for side in _SIDES)
    return Acceptance(rules, (), True)


def _bands_of(piece: Specimen) -> str:
    """Return the keys of bands for advice."""
    return "moment, shear or torsion" if piece.is_surface else "moment or shear"


def _rules(table: Bands, of: Literal["peak", "local"]) -> tuple[BandRule, ...]:
    """Return the rules that a table of bands names: one a quantity and side."""
    rules = []
    for quantity in _ALONG:
        for side in _SIDES:
            amount = getattr(table, f"{quantity}_{side}") or getattr(table, quantity)
            if amount is not None:
                rules.append(BandRule(quantity, side, amount.value, amount.absolute, table.of or of))
    return tuple(rules)


def _across(table: AcceptanceTable) -> tuple[BandRule, ...]:
    """Return the rules for shear and moment cut the other way, which share one percentage a side."""
    rules = []
    for quantity in _ACROSS:
        for side in _SIDES:
            amount = getattr(table, f"across_{side}") or table.across
            if amount is not None:
                rules.append(BandRule(quantity, side, amount.value, False, table.of or "peak"))
    return tuple(rules)
