"""Matters of limits in plan: which limit leaves no pads at all, how close the best comes, and what would help."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.display import counted, show
from rigdesign.findings import Refusal
from rigdesign.pads.limits import force_limits
from rigdesign.pads.refusals import other_way, too_weak
from rigdesign.pads.surface.fitting import most_side_by_side, most_that_fit
from rigdesign.pads.surface.footprints import compatible, given_places
from rigdesign.pads.surface.places import usable_points
from rigdesign.pads.surface.spread import OneLine, Outside, one_line, outside_hull, usable_places
from rigdesign.target.model import Target


def jack_place_in_plan(target: Target) -> tuple[float, float]:
    """Where the jack stands, x, y [m]: the brief's place, the multiples of its step nearest to the resultant, or there.

    A brief's place without y is on the reference axis.
    """
    rules, sums = target.brief.jack, target.net_plan.sums
    if rules.at is not None:
        on_axis = float(target.brief.specimen.reference_axis.at(np.array([rules.at]))[0])
        return rules.at, on_axis if rules.at_y is None else rules.at_y
    x, y = (sums.first_x / sums.force, sums.first_y / sums.force) if sums.force else (0.0, 0.0)
    if rules.step is not None:
        return round(x / rules.step) * rules.step, round(y / rules.step) * rules.step
    return x, y


def whatever_the_count(target: Target, jack_x: float, jack_y: float) -> Refusal | None:
    """Refusal that no number of pads can cure, if there is one; jack_x, jack_y [m] is where the jack stands."""
    return other_way(target) or _no_room(target.brief) or _not_around(target, jack_x, jack_y)


def for_the_count(target: Target, count: int) -> Refusal | None:
    """Refusal of this number of pads, if there is one."""
    brief = target.brief
    places = brief.pads.places
    if places == "free":
        room = _too_wide(brief, count)
    else:
        room = _fixed(brief, count) if places == "fixed" else _hard_points(brief, count)
    return room or too_weak(target, abs(target.net_plan.sums.force), count)


def place_words(x: float, y: float) -> str:
    """A place in plan for people.

    >>> place_words(1.3581, -0.05)
    'x 1.358 m, y −50.0 mm'
    """
    # a millionth of a metre is below anything that is measured on a rig
    return f"x {show(round(x, 6) + 0.0, 'length')}, y {show(round(y, 6) + 0.0, 'length')}"


def _footprint(brief: Brief) -> str:
    pads = brief.pads
    size = f"footprint {show(pads.length, 'length')} by {show(pads.width or 0.0, 'length')}"
    return size + (f", {show(pads.edge, 'length')} from the outline" if pads.edge else "")


def _keeps(brief: Brief) -> str:
    kept_out = bool(brief.pads.keep_out or brief.pads.keep_out_areas)
    return "on the specimen and clear of the keep-outs" if kept_out else "on the specimen"


def _no_room(brief: Brief) -> Refusal | None:
    if usable_places(brief)[0].size:
        return None
    hard = brief.pads.places == "hard points"
    what = "no hard point takes a pad" if hard else "no pad fits"
    return Refusal(
        "pads",
        f"{what} {_keeps(brief)}",
        limit=_footprint(brief),
        best=f"0 of {counted(brief.pads.stations.size, 'hard point')} can be used" if hard else "0 pads fit",
        remedy="make the footprint, its distance from the outline or the keep-outs smaller"
        + (", or move the hard points" if hard else ""),
    )


# -- places that do not surround the jack ------------------------------------------------------------------------------


def _not_around(target: Target, jack_x: float, jack_y: float) -> Refusal | None:
    brief = target.brief
    x, y = usable_places(brief)
    found = outside_hull(x, y, jack_x, jack_y)
    if found is None:
        return None
    line = one_line(x, y, brief.specimen.right - brief.specimen.left)
    if line is not None and abs(line.left(jack_x, jack_y)) > 1e-6 * found.distance:
        return _off_the_line(target, line, jack_x, jack_y)
    return _beside(target, found, jack_x, jack_y)


def _who(brief: Brief) -> str:
    return "the load's centre" if brief.jack.at is None and brief.jack.step is None else "the jack"


def _off_the_line(target: Target, line: OneLine, jack_x: float, jack_y: float) -> Refusal:
    x, y = usable_places(target.brief)
    order = np.argsort((x - line.x) * line.a_x + (y - line.y) * line.a_y, kind="stable")
    first, last = order[0], order[-1]
    off = line.left(jack_x, jack_y)
    left_over = abs(target.net_plan.sums.force * off)
    kind = "torsion" if abs(line.a_x) >= abs(line.a_y) else "moment"
    return Refusal(
        "pads",
        f"every place for a pad stands in one line and {_who(target.brief)} beside it, so no pads can balance the"
        f" {kind} about that line",
        limit=f"places in line from {place_words(x[first], y[first])} to {place_words(x[last], y[last])}",
        best=f"{_who(target.brief)} at {place_words(jack_x, jack_y)}, {show(abs(off), 'length')} off the line:"
        f" {show(left_over, 'moment')} are left over",
        remedy="let pads stand on both sides of the line as well, or move the line under the load's centre",
    )


def _beside(target: Target, found: Outside, jack_x: float, jack_y: float) -> Refusal:
    brief, total = target.brief, target.net_plan.sums.force
    near = place_words(found.near_x, found.near_y)
    # about the side of the hull the others see: what stands behind it must hold the load back
    held = ""
    if found.depth > 1e-6 * found.distance:
        back = -total * found.distance / found.depth
        held = f"; pads would have to bring at least {show(back, 'force')} of the other sign"
    return Refusal(
        "pads",
        f"{_who(brief)} lies outside the area that the places for pads span, so pads of one sign cannot balance it",
        limit=f"nearest place that pads of one sign can balance: {near}",
        best=f"{_who(brief)} at {place_words(jack_x, jack_y)}, {show(found.distance, 'length')} outside{held}",
        remedy=f"let pads stand beyond {near}, split the load between two rigs, add a counterweight, or stand the jack"
        " inside ([jack] at) and accept the error",
    )


# -- numbers of pads ---------------------------------------------------------------------------------------------------


def _too_wide(brief: Brief, count: int) -> Refusal | None:
    fit = most_that_fit(brief)
    if fit is None or count <= fit:
        return None
    return Refusal(
        "pads",
        f"{counted(count, 'pad')} do not fit side by side",
        limit=f"{_footprint(brief)}, gap {show(brief.pads.gap, 'length')}",
        best=f"at most {counted(fit, 'pad')} could fit",
        remedy="use fewer pads, a smaller footprint or a smaller gap",
    )


def _fixed(brief: Brief, count: int) -> Refusal | None:
    places = brief.pads.stations.size
    if count != places:
        return _too_few(count, places, "fixed place", f"ask for {counted(places, 'pad')}, or change the places")
    x, y = given_places(brief)
    clash = np.argwhere(~compatible(brief, x, y))
    if not clash.size:
        return None
    a, b = clash[0]
    more = f"; so are those of {counted(len(clash) // 2 - 1, 'other pair')}" if len(clash) > 2 else ""
    return Refusal(
        "pads",
        f"the footprints of pads {a + 1} and {b + 1} are closer than the gap, or overlap{more}",
        limit=f"{_footprint(brief)}, gap {show(brief.pads.gap, 'length')}",
        best=f"pad {a + 1} at {place_words(x[a], y[a])}, pad {b + 1} at {place_words(x[b], y[b])}",
        remedy="move one of them, or make the footprint or the gap smaller",
    )


def _hard_points(brief: Brief, count: int) -> Refusal | None:
    usable = usable_points(brief)
    if count > usable.size:
        remedy = f"ask for {counted(usable.size, 'pad')} or fewer, or add places"
        return _too_few(count, usable.size, "usable hard point", remedy)
    x, y = given_places(brief)
    fit = most_side_by_side(compatible(brief, x[usable], y[usable]))
    if count <= fit:
        return None
    return Refusal(
        "pads",
        f"{counted(count, 'pad')} do not fit side by side on the hard points",
        limit=f"{_footprint(brief)}, gap {show(brief.pads.gap, 'length')}, {counted(usable.size, 'usable hard point')}",
        best=f"at most {counted(fit, 'pad')} could fit",
        remedy="use fewer pads, a smaller footprint or a smaller gap, or set the hard points wider apart",
    )


def _too_few(count: int, places: int, kind: str, remedy: str) -> Refusal:
    verb = "is" if places == 1 else "are"
    return Refusal(
        "pads",
        f"{counted(count, 'pad')} are asked for, but there {verb} {counted(places, kind)}",
        limit=f"{counted(places, kind)}, keep-outs and the footprint considered",
        best=counted(places, "pad"),
        remedy=remedy,
    )


def unbalanced(target: Target, jack_x: float, jack_y: float, count: int) -> Refusal:
    """No forces within the limits balance the target: name the pad limits that would have to give way."""
    brief, total = target.brief, target.net_plan.sums.force
    least, largest = force_limits(target)
    asked = []
    if np.isfinite(largest):
        asked.append(f"largest pad force {show(largest * target.pads_peak, 'force')} at the peak of the test")
    if least > 0:
        asked.append(f"least pad force {show(least * target.pads_peak, 'force')} at the peak of the test")
    if brief.pads.length + brief.pads.gap > 0:
        asked.append(f"{_footprint(brief)}, gap {show(brief.pads.gap, 'length')}")
    pads = counted(count, "pad")
    text = f"no forces of {pads} within the limits have the target's sum and centre"
    if brief.pads.places == "free":
        # a local search proves nothing of the kind
        text = f"no places were found from which forces of {pads} within the limits have the target's sum and centre"
    return Refusal(
        "pads",
        text,
        limit=", ".join(asked) or "pads of one sign at these places",
        best=f"{show(total, 'force')} at {place_words(jack_x, jack_y)} from {counted(count, 'pad')} of one sign",
        remedy="widen the limits one at a time, change the number of pads, or move places towards the resultant",
    )
