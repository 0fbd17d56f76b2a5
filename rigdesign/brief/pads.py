"""From the file's [pads] to PadRules: what concerns several keys at once, and the places."""

from __future__ import annotations

import math
from typing import Literal

import numpy as np

from rigdesign.brief.context import Context, frozen, table_stations
from rigdesign.brief.layout import PadsTable
from rigdesign.brief.model import Floats, PadRules, Specimen
from rigdesign.brief.surface.places import Candidates, candidates, keep_out_areas, pad_rows
from rigdesign.display import show
from rigdesign.words import MOST_PADS

_NOTHING = frozen(np.empty(0))


def pads(table: PadsTable, piece: Specimen, context: Context) -> PadRules:
    """Return what [pads] asks for; raise InputError where keys contradict each other or a table cannot be used."""
    _check_limits(table, context)
    if piece.is_surface:
        places, called = candidates(table, piece, context), "places"
    else:
        places, called = Candidates(_stations(table, piece, context), _NOTHING, _NOTHING), "stations"
    return PadRules(
        count=_count(table, places.x.size, called, context),
        places=table.places,
        stations=places.x,
        length=table.length or 0.0,
        width=table.width,
        gap=table.gap,
        largest_force=math.inf if table.largest_force is None else table.largest_force,
        least_force=table.least_force,
        largest_pressure=math.inf if table.largest_pressure is None else table.largest_pressure,
        keep_out=_keep_out(table, piece, context),
        action=table.action,
        aim=table.aim,
        ease=table.ease,
        y=places.y,
        turn="along x" if table.turn is None else table.turn,
        turns=places.turns,
        rows=pad_rows(table, piece, context),
        edge=table.edge or 0.0,
        keep_out_areas=keep_out_areas(table, context),
    )


def _check_limits(table: PadsTable, context: Context) -> None:
    """Raise BriefError where the limits on force or pressure cannot be held to."""
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


def _count(table: PadsTable, given: int, called: str, context: Context) -> int | Literal["fewest"]:
    """Return the number of pads, or "fewest"."""
    if table.places == "fixed":
        if table.count is not None and table.count != given:
            what = f"fixed pads are as many as there are {called}"
            remedy = 'delete "count", or write places = "hard points"'
            raise context.error(what, "pads", "count", limit=str(given), remedy=remedy)
        return int(given)
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
