"""Remarks of the stage "space" on the hardware: headroom, clearances in three dimensions, swings of links."""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import pairwise

import numpy as np

from rigdesign.checks.hardware.model import Clearance, Space
from rigdesign.checks.hardware.space import N_CLOSEST, side_by_side
from rigdesign.checks.text import also
from rigdesign.display import show
from rigdesign.findings import Finding
from rigdesign.hardware.model import Hardware

SLACK = 1e-6
"""A height or distance [m] that misses its limit by less than a micrometre keeps it: builders stop right at limits."""
ANGLE_SLACK = 1e-9  # rad
ROOM = 0.002
"""Fittings of links in one lever, which only turn on their pins, are at least so far apart [m]; set here."""
NOT_LOOKED_AT = (
    "not looked at: the specimen's own body beyond its pads, the frame that holds the jacks, hoses, slings, heads of "
    "pins, travel of the jacks; links in one lever, which keep the distance of their holes, need not keep the clearance"
)


def space_remarks(hardware: Hardware, space: Space) -> list[Finding]:
    """Return the remarks on heights, clearances and swings, not numbered yet, in a fixed order."""
    return [*_headroom(hardware, space), *_clearance(space), *_beside(hardware), *_swings(hardware, space)]


def _headroom(hardware: Hardware, space: Space) -> Iterator[Finding]:
    headroom = hardware.rig.plan.target.brief.hardware.headroom
    if space.total <= headroom + SLACK:
        return
    first = next(name for name, height in space.heights if height > headroom + SLACK)
    _, lowest = space.heights[0]
    steps = [f"{name} {show(height - below, 'length')}" for (_, below), (name, height) in pairwise(space.heights)]
    taken = [f"{space.heights[0][0]} {show(lowest, 'length')}", *steps]
    yield Finding(
        "space",
        "failure",
        first,
        f"the rig stands {show(space.total - headroom, 'length')} higher than the headroom, with the jack at half its "
        f"stroke: {first} is the first level that no longer fits. From the specimen's plane up each level takes "
        + ", ".join(taken),
        show(space.total, "length"),
        f"headroom {show(headroom, 'length')}",
        "fewer tiers (plates, or more jacks), shallower levers, shorter links or a shorter jack",
    )


def _clearance(space: Space) -> Iterator[Finding]:
    if not space.closest:
        return
    near = _worst_of_each([c for c in space.closest if c.distance < space.required - SLACK])
    if not near:
        yield Finding(
            "space",
            "note",
            _pair(space.closest[0]),
            f"of all members these come closest, {_where(space.closest[0])}; {NOT_LOOKED_AT}",
            show(space.closest[0].distance, "length"),
            f"clearance {show(space.required, 'length')}",
        )
        return
    worst, rest = near[0], near[1:]
    # only so many pairs are listed in each state: where all are too near there may be further ones
    more = ", and perhaps pairs that are not listed" if len(near) >= N_CLOSEST else ""
    meets = "the two meet" if worst.distance <= SLACK else "the clearance is too small"
    yield Finding(
        "space",
        "failure",
        _pair(worst),
        f"{meets}, {_where(worst)}{also(_pair(c) for c in rest)}{more}; {NOT_LOOKED_AT}",
        show(worst.distance, "length"),
        f"clearance {show(space.required, 'length')}",
        _remedy(worst),
    )


def _beside(hardware: Hardware) -> Iterator[Finding]:
    """Links in one lever, whose distance is that of their holes: their fittings must not touch."""
    near = [clearance for clearance in side_by_side(hardware) if clearance.distance < ROOM - SLACK]
    if near:
        yield Finding(
            "space",
            "failure",
            _pair(near[0]),
            f"the fittings of two links in one lever have no room beside each other{also(_pair(c) for c in near[1:])}",
            show(near[0].distance, "length"),
            f"{show(ROOM, 'length')}, set here",
            "longer arms (shortest_arm), smaller pins, or other pads grouped",
        )


def _worst_of_each(near: list[Clearance]) -> list[Clearance]:
    """The nearest state of each pair, in order."""
    found: dict[tuple[str, str], Clearance] = {}
    for clearance in near:
        found.setdefault((clearance.first, clearance.second), clearance)
    return list(found.values())


def _pair(clearance: Clearance) -> str:
    return f"{clearance.first} and {clearance.second}"


def _where(clearance: Clearance) -> str:
    return "at rest" if clearance.state == "at rest" else "with the levers turned as far as they may"


def _remedy(clearance: Clearance) -> str:
    """What would part two members: arms part two links, heights part levers, places part pads."""
    kinds = {clearance.first.split()[0], clearance.second.split()[0]}
    if "lever" in kinds:
        less = ", or less turning" if clearance.state == "turned" else ""
        return f"longer links (link_length), shallower or shorter levers{less}"
    if "counterweight" in kinds:
        return "longer links (link_length), or balance without counterweights"
    return "move the pads apart, or longer links (link_length)"


def _swings(hardware: Hardware, space: Space) -> Iterator[Finding]:
    limit = hardware.rig.plan.target.brief.hardware.swing
    over = np.flatnonzero(space.swings > limit + ANGLE_SLACK)
    if not over.size:
        return
    worst = int(np.argmax(space.swings))
    link = hardware.links[worst]
    least = link.length * math.tan(float(space.swings[worst])) / math.tan(limit)
    yield Finding(
        "space",
        "failure",
        link.name,
        "the link swings too far when its upper lever turns as far as it may"
        + also(hardware.links[i].name for i in over if i != worst),
        show(float(space.swings[worst]), "angle"),
        f"swing {show(limit, 'angle')}",
        f"a link of at least {show(least, 'length')} pin to pin (link_length), shorter levers, or less turning",
    )
