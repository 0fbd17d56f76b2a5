"""Matters of limits: which limit leaves no pads at all, how close the best comes, and what would help."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.display import counted, show
from rigdesign.findings import Refusal
from rigdesign.pads.limits import allowed_stretches, force_limits, least_pitch, most_that_fit, usable_points
from rigdesign.target.model import Target

# Sums that agree to this fraction count as equal: a limit may be met exactly.
EVEN = 1e-9


def whatever_the_count(target: Target, jack_x: float) -> Refusal | None:
    """Refusal that no number of pads can cure, if there is one."""
    return other_way(target) or _no_room(target.brief) or _jack_aside(target.brief, jack_x)


def for_the_count(target: Target, count: int) -> Refusal | None:
    """Refusal of this number of pads, if there is one."""
    brief, total = target.brief, abs(target.net.total)
    return _too_few_places(brief, count) or _too_wide(brief, count) or too_weak(target, total, count)


def other_way(target: Target) -> Refusal | None:
    """Refusal where gravity brings more than the target asks for."""
    if target.net.total * target.resultant > 0 and target.pads_peak > 0:
        return None
    if target.net.total * target.resultant > 0:
        return Refusal(
            "pads",
            "at the peak of the test gravity brings more than the target asks for, so the pads would have to act the "
            "other way",
            limit=f"target at the peak {show(target.brief.peak * target.resultant, 'force')}",
            best=f"gravity brings {show(target.gravity.total, 'force')}",
            remedy="raise [test] peak, or turn the specimen over (gravity)",
        )
    return Refusal(
        "pads",
        "gravity already brings more than the target asks for, so the pads would have to act the other way",
        limit=f"target {show(target.resultant, 'force')}, gravity brings {show(target.gravity.total, 'force')}",
        best=f"the pads would have to bring {show(target.net.total, 'force')}",
        remedy="turn the specimen over (gravity), raise the target, or take weight off with counterweights",
    )


def _no_room(brief: Brief) -> Refusal | None:
    if allowed_stretches(brief).size and (brief.pads.places != "hard points" or usable_points(brief).size):
        return None
    return Refusal(
        "pads",
        "no pad fits on the specimen clear of the keep-outs",
        limit=f"footprint {show(brief.pads.length, 'length')} long",
        best="0 pads fit",
        remedy="shorten the footprint or the keep-outs",
    )


def _jack_aside(brief: Brief, jack_x: float) -> Refusal | None:
    x = usable_points(brief) if brief.pads.places == "hard points" else brief.pads.stations
    x = x if x.size else allowed_stretches(brief).ravel()
    start, end = float(x[0]), float(x[-1])
    if start <= jack_x <= end:
        return None
    return Refusal(
        "pads",
        "the jack stands off the stretch where pads can sit, so pads of one sign cannot balance it",
        limit=f"pads from {show(start, 'length')} to {show(end, 'length')}",
        best=f"jack at {show(jack_x, 'length')}",
        remedy="move the jack, or let pads sit on both sides of it",
    )


def _too_few_places(brief: Brief, count: int) -> Refusal | None:
    if brief.pads.places == "free":
        return None
    fixed = brief.pads.places == "fixed"
    places = brief.pads.stations.size if fixed else usable_points(brief).size
    if count == places or (count < places and not fixed):
        return None
    kind = "fixed places" if fixed else "hard points"
    return Refusal(
        "pads",
        f"{counted(count, 'pad')} are asked for, but there are {places} usable {kind}",
        limit=f"{places} {kind}, keep-outs and the footprint considered",
        best=f"{counted(places, 'pad')}",
        remedy=f"ask for {counted(places, 'pad')}{'' if fixed else ' or fewer'}, or add places",
    )


def _too_wide(brief: Brief, count: int) -> Refusal | None:
    fit = most_that_fit(brief)
    if brief.pads.places != "free" or fit is None or count <= fit:
        return None
    return Refusal(
        "pads",
        f"{counted(count, 'pad')} do not fit side by side",
        limit=f"footprint and gap take {show(least_pitch(brief), 'length')} a pad",
        best=f"{counted(fit, 'pad')} fit",
        remedy="use fewer pads, a shorter footprint or a smaller gap",
    )


def too_weak(target: Target, total: float, count: int) -> Refusal | None:
    """Refusal where so many pads cannot carry `total` [N] between their least and largest forces."""
    least, largest = force_limits(target)
    if count * largest < total * (1 - EVEN):
        return Refusal(
            "pads",
            f"{counted(count, 'pad')} are too weak for the total",
            limit=f"largest pad force {show(largest * target.pads_peak, 'force')} at the peak of the test",
            best=f"{show(count * largest, 'force')} of {show(total, 'force')} at the brief's load",
            remedy=f"use at least {counted(int(np.ceil(total / largest * (1 - EVEN))), 'pad')}, or larger ones",
        )
    if count * least > total * (1 + EVEN):
        most = int(total / least * (1 + EVEN))
        return Refusal(
            "pads",
            f"{counted(count, 'pad')} cannot carry the least force each",
            limit=f"least pad force {show(least * target.pads_peak, 'force')} at the peak of the test",
            best=f"{show(total, 'force')} to share among {counted(count, 'pad')}",
            remedy=f"use at most {counted(most, 'pad')}, or lower least_force" if most else "lower least_force",
        )
    return None


def unbalanced(target: Target, jack_x: float, count: int) -> Refusal:
    """No forces within the limits balance the target: name the pad limits that would have to give way."""
    brief = target.brief
    least, largest = force_limits(target)
    asked = []
    if np.isfinite(largest):
        asked.append(f"largest pad force {show(largest * target.pads_peak, 'force')}")
    if least > 0:
        asked.append(f"least pad force {show(least * target.pads_peak, 'force')}")
    if least_pitch(brief) > 0:
        asked.append(f"footprint and gap {show(least_pitch(brief), 'length')}")
    if brief.pads.keep_out:
        asked.append("keep-outs")
    return Refusal(
        "pads",
        f"no forces of {counted(count, 'pad')} within the limits have the target's sum and centre",
        limit=", ".join(asked) or "pads of one sign at these places",
        best=f"{show(target.net.total, 'force')} at {show(jack_x, 'length')} from {counted(count, 'pad')} of one sign",
        remedy="widen the limits one at a time, change the number of pads, or move places towards the resultant",
    )
