"""How high a rig stands, how near its members come to each other, and how far its links swing."""

from __future__ import annotations

import math
from typing import Literal

import numpy as np

from rigdesign.checks.hardware.closest import Pair, nearest
from rigdesign.checks.hardware.model import Clearance, Space
from rigdesign.checks.hardware.solids import Member, members
from rigdesign.hardware.model import Hardware, Link
from rigdesign.target.curve import Floats

N_CLOSEST = 10
"""So many pairs are listed at rest, and so many with the levers turned."""


def space(hardware: Hardware) -> Space:
    """Return heights [m], the closest pairs of members at rest and turned, and the links' swings [rad].

    Members are solids of true size in three dimensions (`solids`); `turned` says how they move and which pairs count.
    The specimen itself is there as its pads alone.
    """
    rules = hardware.rig.plan.target.brief.hardware
    listed = members(hardware)
    rest = _clearances(listed, nearest(listed, 0.0, N_CLOSEST), "at rest")
    turned = _clearances(listed, nearest(listed, rules.turn, N_CLOSEST), "turned")
    levels = heights(hardware)
    return Space(
        heights=levels,
        total=levels[-1][1],
        closest=tuple(sorted((*rest, *turned), key=lambda clearance: clearance.distance)),
        required=rules.clearance,
        swings=swings(hardware, rules.turn),
    )


def side_by_side(hardware: Hardware) -> tuple[Clearance, ...]:
    """Return the links in two holes of one piece that come closest [m], nearest first, with the levers turned."""
    listed, turn = members(hardware), hardware.rig.plan.target.brief.hardware.turn
    return tuple(_clearances(listed, nearest(listed, turn, N_CLOSEST, beside=True), "turned"))


def _clearances(
    listed: tuple[Member, ...], pairs: tuple[Pair, ...], state: Literal["at rest", "turned"]
) -> list[Clearance]:
    return [Clearance(listed[p.first].name, listed[p.second].name, p.distance, state) for p in pairs]


def heights(hardware: Hardware) -> tuple[tuple[str, float], ...]:
    """Return the levels of the rig [m] over the plane z = 0, in rising order; of several at one level the highest.

    The jack's upper pin is shown at half its stroke.
    """
    levels = {"pad pins": max(pad.pin_height for pad in hardware.pads)}
    for piece in hardware.pieces:
        name, height = f"tier {piece.tier}", hardware.heights[piece.name]
        levels[name] = max(levels.get(name, height), height)
    lower = [hardware.heights[stack.jack] for stack in hardware.stacks]
    upper = [
        height + stack.cell.length + stack.machine.standing
        for height, stack in zip(lower, hardware.stacks, strict=True)
    ]
    levels |= {"jack's lower pin": max(lower), "jack's upper pin": max(upper)}
    return tuple(sorted(levels.items(), key=lambda level: level[1]))


def swings(hardware: Hardware, turn: float) -> Floats:
    """Return the largest angle of each link [rad], (n_links,): its upper piece turns by `turn`, its lower end stays.

    The upper pin moves towards the pivot by r (1 − cos φ), r being its arm: the angle is atan(r (1 − cos φ) / length).
    """
    arms: dict[tuple[str, str], float] = {
        (piece.name, hole.name): math.hypot(hole.u - piece.pivot.u, hole.v - piece.pivot.v)
        for piece in hardware.pieces
        for hole in piece.ends
    }
    return np.array([_swing(link, arms.get((link.upper.to, link.upper.at), 0.0), turn) for link in hardware.links])


def _swing(link: Link, arm: float, turn: float) -> float:
    return math.atan2(arm * (1 - math.cos(turn)), max(link.length, 0.0))
