"""Remarks of the stage "statics": is the tree in balance, do the pads follow the target, what is left out."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

import numpy as np

from rigdesign.checks.entry import layout
from rigdesign.checks.geometry import leans
from rigdesign.checks.measures import length
from rigdesign.checks.model import Check, RegionVerdict
from rigdesign.checks.regions import WHOLES, inside, sides
from rigdesign.checks.remedies import band_remedy, jack_remedy
from rigdesign.checks.sampling import by_side
from rigdesign.checks.statics import off_line
from rigdesign.checks.surface.remarks import jack_offset_in_plan, plate_remarks, share_remarks
from rigdesign.checks.text import also, of_quantity, percent
from rigdesign.display import show
from rigdesign.findings import Finding, Severity
from rigdesign.target.bands import Band, bands
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import ACROSS
from rigdesign.words import BAND_FLOOR, LOAD_CELL_FLOOR, SMALL_TARGET

RESIDUAL_LIMIT = 1e-9  # statics of a few thousand pieces closes to 1e-12; more means that the solution is wrong
PLUMB = 1e-6  # m: below what any hole is drilled to
SERIOUS_LEAN = 0.005  # m: half a degree on a link of 0.6 m
IN_LINE = 1e-6  # of a lever's length


def statics_remarks(check: Check) -> Iterator[Finding]:
    """Yield the remarks of this stage, not numbered yet, in a fixed order."""
    yield from _residuals(check)
    yield from plate_remarks(check) if _has_plates(check) else ()
    yield from _wrong_way(check)
    yield from _holes_off_line(check)
    yield from _leaning_links(check)
    yield from _bands_exceeded(check)
    yield from share_remarks(check)
    yield from jack_offset_in_plan(check) if _is_surface(check) else _jack_offset(check)
    yield from _band_floor(check)
    yield from _below_cell(check)
    yield left_out(check)


def _is_surface(check: Check) -> bool:
    return check.rig.plan.target.brief.specimen.is_surface


def _has_plates(check: Check) -> bool:
    return any(piece.kind == "plate" for tree in check.rig.trees for piece in tree.pieces)


def _remark(severity: Severity, where: str, text: str, value: str = "", limit: str = "", remedy: str = "") -> Finding:
    return Finding("statics", severity, where, text, value, limit, remedy)


def _residuals(check: Check) -> Iterator[Finding]:
    left = {
        "ΣF at a pivot, of the jack's force": check.statics.force_residual,
        "ΣM at a pivot, of load times length": check.statics.moment_residual,
        "ΣF of pads against jacks, of the jacks' force": check.sum_residual,
    }
    for words, residual in left.items():
        if not residual <= RESIDUAL_LIMIT:
            yield _remark(
                "failure",
                "rig",
                f"the statics does not close: {words}",
                f"{residual:.2e}",
                f"{RESIDUAL_LIMIT:.0e}",
                "look for holes that nearly coincide",
            )


def _wrong_way(check: Check) -> Iterator[Finding]:
    """Pads that would have to act against their own jack: a pivot that is not between its end pins."""
    share = check.statics.share
    wrong = np.flatnonzero(share <= 0)
    if wrong.size:
        worst = int(wrong[np.argmin(share[wrong])])
        others = also(f"pad {i + 1}" for i in wrong if i != worst)
        yield _remark(
            "failure",
            f"pad {worst + 1}",
            f"the pad would have to act against its jack, or carries nothing{others}",
            f"{percent(float(share[worst]))} of the jack's force",
            "above 0 %",
            "drill the pivot of every lever between its end pins"
            + (", that of every plate inside its triangle" if _has_plates(check) else ""),
        )


def _holes_off_line(check: Check) -> Iterator[Finding]:
    tree = layout(check.rig)
    if not tree.pieces:
        return
    off = np.abs(off_line(tree))
    relative = {
        piece.name: (float(distance), float(distance) / length(piece))
        for piece, distance in zip(tree.pieces, off, strict=True)
        if piece.kind == "lever" and distance > IN_LINE * length(piece)
    }
    if relative:
        worst = max(relative, key=lambda name: relative[name][1])
        tilt = abs(check.statics.piece_load[worst]) * relative[worst][0]
        others = also(name for name in relative if name != worst)
        yield _remark(
            "warning",
            worst,
            f"the pivot is off the line of the end pins; the lever will roll until it hangs below it{others}",
            f"{show(relative[worst][0], 'length')}, a moment of {show(tilt, 'moment')} about the lever's own line",
            "in line",
            "drill the three holes in line",
        )


def _leaning_links(check: Check) -> Iterator[Finding]:
    every = leans(check.rig)
    worst = max(every, key=lambda lean: lean.size)
    if worst.size <= PLUMB:
        return
    specimen = check.rig.plan.target.brief.specimen
    force = float(np.abs(check.rig.jack_forces).sum())
    moment = check.moment_sum_residual * force * (specimen.right - specimen.left)
    kept = check.rig.plan.target.brief.keep is not None
    way = "make the links of the kept rig longer" if kept else "drill the holes as dimensioned"
    yield _remark(
        "warning" if worst.size > SERIOUS_LEAN else "note",
        f"{worst.upper} hole {worst.hole}" if worst.hole else worst.upper,
        f"{worst.where} leans: the holes and the places in plan do not agree; all leans together shift the pads' "
        f"resultant from the jacks' by {show(moment / force, 'length')}, a moment of {show(moment, 'moment')}",
        show(worst.size, "length"),
        "plumb",
        f"{way}, or allow for the spanwise force of leaning links",
    )


def _bands_exceeded(check: Check) -> Iterator[Finding]:
    """One remark for each row that is not accepted; the whole span only where no region already says the same."""
    failed = [row for row in check.regions if row.accepted is False]
    for row in failed:
        said = any(r.quantity == row.quantity and r.use == row.use for r in failed if r.name not in WHOLES)
        if row.name in WHOLES and said:
            continue
        yield _band_exceeded(check, row)


def _band_exceeded(check: Check, row: RegionVerdict) -> Finding:
    quantity = row.quantity
    curves, errors = check.curves_of(quantity), check.errors[quantity]
    peak = errors.reference
    words = f"the {errors.of}" if errors.of.startswith("peak") else errors.of
    mask = np.ones(curves.x.size, bool) if row.name in WHOLES else inside(curves, row.start_x, row.end_x)
    rows = np.flatnonzero(mask)
    worst = int(rows[np.argmax(curves.use(quantity)[rows])])
    side = sides(curves, quantity)
    is_under = bool(side.under[worst] > side.over[worst])
    size = float(side.under[worst] if is_under else side.over[worst])
    band = float(side.band_under[worst] if is_under else side.band_over[worst])
    word = "under-test" if is_under else "over-test"
    at = show(float(curves.x[worst]), "length", unit="m")
    return Finding(
        "statics",
        "failure",
        row.name,
        f"{word} of the {quantity} at {'y = ' if quantity in ACROSS else ''}{at}: {row.use:.3g} times its band",
        f"{of_quantity(size, quantity)}, {percent(size / peak)} of {words}",
        f"{of_quantity(band, quantity)}, {percent(band / peak)} of {words}",
        band_remedy(check, quantity, float(curves.x[worst]), size),
    )


def _jack_offset(check: Check) -> Iterator[Finding]:
    target = check.rig.plan.target
    specimen = target.brief.specimen
    offset = check.jack_offset
    if abs(offset) <= PLUMB:
        return
    moment = abs(offset * target.net.total)
    where = "outboard" if offset > 0 else "inboard"
    seen = moment > LOAD_CELL_FLOOR * target.moment_peak
    held = "at the supports' expense" if specimen.supports else "at the root"
    yield _remark(
        "warning" if seen else "note",
        "jack 1" if len(check.rig.trees) == 1 else "jacks",
        f"the jack stands {where} of the resultant; that costs a moment of {show(moment, 'moment')} {held}, "
        f"{percent(moment / target.moment_peak)} of the peak target moment, which the errors include",
        show(abs(offset), "length"),
        "at the resultant",
        jack_remedy(check),
    )


def _band_floor(check: Check) -> Iterator[Finding]:
    """Say where a band as asked for is narrower than the least that is judged."""
    for quantity, band in bands(check.rig.plan.target).items():
        if quantity == "torsion":
            continue  # its floor follows from the outline, and the target says where it applies
        curves = check.curves_of(quantity)
        # a small target takes the wider side, so that a narrow one says nothing there
        large = np.abs(curves.target[quantity]) >= SMALL_TARGET * band.peak
        asked = np.where(large, by_side(partial(_narrower, band), curves.x, curves.outboard), np.inf)
        narrow = asked < BAND_FLOOR * band.peak
        if narrow.any():
            start, end = curves.x[narrow].min(), curves.x[narrow].max()
            yield _remark(
                "note",
                quantity,
                f"between {show(start, 'length', unit='m')} and {show(end, 'length', unit='m')} the band asked for is "
                "narrower than the least that is judged; the least is taken there",
                of_quantity(float(asked.min()), quantity),
                f"{of_quantity(BAND_FLOOR * band.peak, quantity)}, 0.05 % of the peak target {quantity}",
            )


def _narrower(band: Band, x: Floats, side: Side) -> Floats:
    return np.minimum(*band.under_over(x, side))


def _below_cell(check: Check) -> Iterator[Finding]:
    if check.moment_error_peak < LOAD_CELL_FLOOR:
        yield _remark(
            "note",
            "moment",
            "the largest moment error is smaller than what a load cell sees: on the day, the instruments decide",
            f"{percent(check.moment_error_peak)} of the peak target moment",
            f"{percent(LOAD_CELL_FLOOR)} of reading",
        )


def left_out(check: Check, *, with_hardware: bool = False) -> Finding:
    """Return what no check looks at, of a rig as lines and holes, or with its hardware checked too."""
    if with_hardware:
        parts = "friction in the pins, the specimen's deflection and the swing of links that comes with it, and the "
        parts += "strength of the specimen, of what bears the jacks, and of what joins pads to the specimen"
    else:
        parts = "links that pass pieces of other tiers, " if _is_surface(check) else ""
        parts += "the rig's own weight at the pads, friction in the pins, the specimen's deflection and the swing of "
        parts += "links that comes with it, and the strength of levers, pins, links, pads and specimen"
    return _remark(
        "note",
        "rig",
        f"not checked: {parts}",
        remedy="have them checked by a licensed engineer, by the codes that hold locally, before it is built or loaded",
    )
