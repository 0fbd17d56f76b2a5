"""From the file's [specimen] to Specimen, with its weight."""

from __future__ import annotations

from dataclasses import replace
from typing import TypeVar

import numpy as np

from rigdesign.brief.context import Context, frozen, not_all_zero, not_negative, running, table_stations
from rigdesign.brief.layout import SpecimenTable
from rigdesign.brief.model import Specimen, Weight
from rigdesign.brief.surface.loads import check_weight_line
from rigdesign.brief.surface.specimen import check_supports, surface
from rigdesign.display import show

T = TypeVar("T")

LEAST_SPAN = 1e-8
"""Of the distance from x = 0: a shorter specimen has stations that floats hold to less than 1e-8 of its span."""

_NOTHING = frozen(np.empty(0))


def specimen(table: SpecimenTable, context: Context) -> Specimen:
    """Return the specimen; raise InputError where its keys contradict each other."""
    if table.support == "cantilever":
        _only(table, context, needs=("root", "tip"), bars=("ends", "supports"))
        left, right = _given(table.root), _given(table.tip)
        if not left < right:
            limit = f"more than {show(left, 'length', unit='m')}, the root"
            raise context.error("the tip must lie outboard of the root", "specimen", "tip", limit=limit)
    else:
        _only(table, context, needs=("ends", "supports"), bars=("root", "tip"))
        left, right = map(float, _given(table.ends))
        if not left < right:
            raise context.error("the two ends must be in order of x", "specimen", "ends")
    if not right - left > LEAST_SPAN * max(abs(left), abs(right)):
        key = "tip" if table.support == "cantilever" else "ends"
        limit = f"a span of more than {LEAST_SPAN:g} of its distance from x = 0"
        what = "the specimen is too short for where it stands, so that stations on it could not be told apart"
        raise context.error(what, "specimen", key, limit=limit, remedy="count x from nearer by")
    bare = Specimen(table.support, left, right, (), None, 1 if table.gravity == "with" else -1)
    if table.outline is None:
        return replace(bare, supports=_supports(table, bare, context), weight=_weight(table, bare, context))
    return _surface(table, bare, context)


def _surface(table: SpecimenTable, bare: Specimen, context: Context) -> Specimen:
    """Return a specimen that is given by its outline."""
    piece = surface(table, bare, context)
    piece = replace(piece, supports=_supports(table, piece, context))
    check_supports(piece, context)
    weight = _weight(table, piece, context)
    if weight is None:
        if table.weight_line is not None:
            what, remedy = '"weight_line" goes with the weight', "give weight or point_masses, or delete it"
            raise context.error(what, "specimen", "weight_line", value="", remedy=remedy)
        return piece
    check_weight_line(table.weight_line, weight, piece, context)
    return replace(piece, weight=weight, weight_line=table.weight_line)


def _supports(table: SpecimenTable, bare: Specimen, context: Context) -> tuple[float, ...]:
    """Return the stations of two supports, in order, none for a cantilever."""
    if table.support == "cantilever":
        return ()
    path = ("specimen", "supports")
    first, second = (context.station(float(x), bare, *path, what="a support") for x in _given(table.supports))
    if not first < second:
        raise context.error("the two supports must be in order of x", *path)
    return first, second


def _given(value: T | None) -> T:
    """Return a value that `_only` found to be there."""
    assert value is not None
    return value


def _only(table: SpecimenTable, context: Context, *, needs: tuple[str, ...], bars: tuple[str, ...]) -> None:
    """Raise BriefError unless the keys that this kind of support needs, and none that it bars, are given."""
    for key in bars:
        if getattr(table, key) is not None:
            what, remedy = (
                f'"{key}" does not go with support = "{table.support}"',
                f"give {' and '.join(needs)} instead",
            )
            raise context.error(what, "specimen", key, remedy=remedy)
    for key in needs:
        if getattr(table, key) is None:
            raise context.error(f'support = "{table.support}" needs the key "{key}"', "specimen")


def _weight(table: SpecimenTable, bare: Specimen, context: Context) -> Weight | None:
    """Return the specimen's mass along the span, None where the brief gives none."""
    if table.weight is None and table.point_masses is None:
        return None
    x, mass, point_x, point_mass = _NOTHING, _NOTHING, _NOTHING, _NOTHING
    if table.weight is not None:
        kinds = {"x": "length", "mass": "mass per length"}
        rows = context.table(table.weight, ("specimen", "weight"), kinds, repeats="jump")
        x, mass = running(rows, "mass", bare), rows["mass"]
        not_negative(rows, "mass")
    if table.point_masses is not None:
        kinds = {"x": "length", "mass": "mass"}
        rows = context.table(table.point_masses, ("specimen", "point_masses"), kinds)
        point_x, point_mass = table_stations(rows, bare), rows["mass"]
        not_negative(rows, "mass")
        not_all_zero(rows, "mass")
    return Weight(x, mass, point_x, point_mass)
