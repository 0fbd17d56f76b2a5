"""Remarks on a target in plan: its centre, pressures of both signs or carried far, torsion out of proportion."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from rigdesign.brief.model import InternalLoad, PressureLoad, Specimen
from rigdesign.display import show
from rigdesign.findings import Finding, Severity
from rigdesign.target.bands import bands, torsion_least
from rigdesign.target.curve import Floats, Side
from rigdesign.target.model import Target
from rigdesign.target.surface.pressure import Pressure
from rigdesign.words import BAND_FLOOR, ROUNDING, SMALL_TARGET

# What rests on values beyond the outermost points: below the first part it is not worth a word, above the second it
# wants a decision.
_BEYOND_LEAST, _BEYOND_SMALL = 1e-4, 0.02
# Pressure of the other sign, as parts of both signs added up: likewise.
_OTHER_SIGN_LEAST, _OTHER_SIGN_SMALL = 0.001, 0.01
# Pressures of structural tests, from a light sail to a pressed hull plate; common practice, drawn wide.
_PRESSURES = (1.0, 10e6)
# A torsion whose arm is longer than this many widths is more often a slip than a load.
_LONGEST_ARM = 1.0
# Stations at which a band is looked at, besides those where it may jump.
_LOOKED_AT = 201
_SIDES: tuple[Side, ...] = ("inboard", "outboard")


def plan_remarks(target: Target) -> Iterator[Finding]:
    """Yield what is worth a word on a surface's target, not numbered."""
    yield from _centre(target)
    for number, load in enumerate(target.brief.loads, 1):
        part = target.total_plan.parts[number - 1]
        if isinstance(load, PressureLoad) and isinstance(part, Pressure):
            yield from _pressure(part, f"load {number}")
    yield from _arm(target)
    yield from _torsion_band(target)


def _remark(severity: Severity, what: str, text: str, value: str = "", limit: str = "", remedy: str = "") -> Finding:
    return Finding("target", severity, what, text, value, limit, remedy)


def _centre(target: Target) -> Iterator[Finding]:
    """A resultant that acts beside the outline: no jack with pads of one sign can stand there."""
    import shapely

    outline = target.brief.specimen.outline
    if outline is None:
        return
    for load, what in ((target.total_plan, "the target"), (target.net_plan, "what the pads bring")):
        force, first_x, first_y = load.sums
        if force == 0:
            continue
        x, y = first_x / force, first_y / force
        away = float(shapely.distance(outline.polygon, shapely.Point(x, y)))
        if away <= 1e-9 * target.brief.specimen.mean_width:
            continue
        hull = outline.polygon.convex_hull
        text = f"the resultant of {what} acts beside the outline, {show(away, 'length')} from its nearest edge"
        if hull.covers(shapely.Point(x, y)):
            text += "; pads of one sign around it can still carry it"
            remedy = "check that the outline is right; the jack then stands beside the specimen, over no part of it"
        else:
            text += "; pads of one sign cannot carry it, wherever they stand: some would have to act the other way"
            remedy = (
                "check the signs of the loads, their lines and their axis; if they are right, give each sign a rig "
                "of its own"
            )
        yield _remark("warning", "resultant", text, place_in_plan(x, y), "inside the outline", remedy)
        return


def place_in_plan(x: float, y: float) -> str:
    """A place in words: "x = 1.358 m, y = −0.040 m"."""
    at_x, at_y = (show(at if abs(at) > ROUNDING else 0.0, "length", unit="m") for at in (x, y))
    return f"x = {at_x}, y = {at_y}"


def _pressure(part: Pressure, name: str) -> Iterator[Finding]:
    """Values carried beyond the points, pressures of both signs, sizes."""
    share = part.share_beyond
    if share > _BEYOND_LEAST:
        text = (
            "part of the load rests on values beyond the outermost points of the map, each taken from the nearest place"
        )
        value = f"{show(share, 'fraction')} of what its pressures add up to, both signs counted"
        remedy = "ask for a map that reaches the edges of the outline" if share > _BEYOND_SMALL else ""
        severity: Severity = "warning" if share > _BEYOND_SMALL else "note"
        limit = f"{show(_BEYOND_SMALL, 'fraction', digits=1)} before it wants a decision"
        yield _remark(severity, name, text, value, limit, remedy)
    yield from _both_signs(part, name)
    largest = float(np.abs(part.triangles.values).max(initial=0.0))
    low, high = _PRESSURES
    if not low <= largest <= high:
        text = f"its greatest pressure is unusually {'small' if largest < low else 'large'}: a slip of unit?"
        limit = f"{show(low, 'pressure')} to {show(high, 'pressure')} as a rule"
        yield _remark("warning", name, text, show(largest, "pressure"), limit, "check the units of the pressures")


def _both_signs(part: Pressure, name: str) -> Iterator[Finding]:
    along, against = part.by_sign
    gross, other = along - against, min(along, -against)
    if gross <= 0 or other <= _OTHER_SIGN_LEAST * gross:
        return
    way, rest = ("along −z", "along +z") if along >= -against else ("along +z", "along −z")
    text = (f"its pressure changes sign over the surface: {show(other, 'force')} of it acts {way}, against "
            f"{show(gross - other, 'force')} {rest}; pads of one tree all act one way and bring "
            "the difference")  # fmt: skip
    value = f"{show(other / gross, 'fraction')} of what its pressures add up to, both signs counted"
    severity: Severity = "note" if other <= _OTHER_SIGN_SMALL * gross else "warning"
    remedy = "if it is not meant, check the signs of the map; if it is, look at what V, M and T become there"
    yield _remark(severity, name, text, value, "one sign all over", remedy)


def _arm(target: Target) -> Iterator[Finding]:
    """A torsion whose arm about the axis is longer than the specimen is wide."""
    width = target.brief.specimen.mean_width
    arm = target.torsion_peak / abs(target.resultant)
    if arm <= _LONGEST_ARM * width:
        return
    text = (f"the largest torsion is the resultant at an arm of {show(arm, 'length')}, longer than the specimen is "
            "wide: a slip of unit, or a reference axis away from the load")  # fmt: skip
    limit = f"{show(_LONGEST_ARM * width * abs(target.resultant), 'moment')}, the resultant at one mean width"
    remedy = "check the units of torques and torsions, the lines of the loads and the axis"
    yield _remark("warning", "torsion", text, show(target.torsion_peak, "moment"), limit, remedy)


def _torsion_band(target: Target) -> Iterator[Finding]:
    """Where the band on torsion asked for is narrower than the least that is judged."""
    band = bands(target)["torsion"]
    if not band.is_judged:
        return
    ends = np.union1d(band.stretches, band.edges)
    low, high = band.stretches[0], band.stretches[-1]
    x = np.union1d(ends[(ends >= low) & (ends <= high)], np.linspace(low, high, _LOOKED_AT))
    narrow = np.zeros(x.shape, bool)
    asked = np.full(x.shape, np.inf)
    for side in _SIDES:
        under, over = band.under_over(x, side)
        # a small target takes the wider side, so that a narrow one says nothing there
        small = np.abs(band.value(x, side)) < SMALL_TARGET * band.peak
        own = np.where(small, np.maximum(under, over), np.minimum(under, over))
        narrow |= own < band.least
        asked = np.minimum(asked, own)
    if not narrow.any():
        return
    text = (f"between {_station(x[narrow].min())} and {_station(x[narrow].max())} the band asked for is narrower than "
            "the least that is judged; the least is taken there")  # fmt: skip
    rule = "the resultant at 1 % of the outline's mean width"
    if torsion_least(target) < BAND_FLOOR * band.peak:
        rule = "0.05 % of the peak target torsion"
    limit = f"{show(band.least, 'moment')}, {rule}"
    least = float(asked[narrow].min())
    value = show(least if least > ROUNDING * band.least else 0.0, "moment")
    yield _remark("note", "torsion", text, value, limit)


def _station(x: Floats) -> str:
    return show(float(x), "length", unit="m")


def torsion_remarks(load: InternalLoad, name: str, specimen: Specimen) -> Iterator[Finding]:
    """Yield what is odd about the torsion of a table of V, M and T: what is left at its end, and its size."""
    if not load.torsion.size:
        return
    peak = float(np.abs(load.torsion).max())
    at, left = float(load.x[-1]), float(load.torsion[-1])
    if abs(left) > load.torsion_digit + 1e-9 * peak:
        text = (f"a torsion of {show(left, 'moment')} is left at its last row at {show(at, 'length')}; the target "
                "takes it as a couple there")  # fmt: skip
        remedy = "nothing, if there is such a couple"
        if at < specimen.right - 1e-9 * abs(specimen.right):
            remedy += f"; otherwise let the table run to the tip at {show(specimen.right, 'length')}"
        yield _remark("note", name, text, show(left, "moment"), "zero where no couple acts", remedy)
    shear, width = float(np.abs(load.shear).max()), specimen.mean_width
    if shear > 0 and width > 0 and peak > _LONGEST_ARM * width * shear:
        text = (f"its largest torsion is its largest shear at an arm of {show(peak / shear, 'length')}, longer than "
                "the specimen is wide: a slip of unit, or a torsion about another axis")  # fmt: skip
        limit = f"{show(_LONGEST_ARM * width * shear, 'moment')}, the shear at one mean width"
        remedy = "check the unit in the heading of the torsion column, and about which axis it counts"
        yield _remark("warning", name, text, show(peak, "moment"), limit, remedy)
