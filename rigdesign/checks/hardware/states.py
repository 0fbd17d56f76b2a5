"""What the strength rules are asked: every lever, plate, link, hole and pin as the hardware draws it.

Sizes are those of the hardware, arms those of the rig's holes, loads those of the check.
"""

from __future__ import annotations

from itertools import pairwise

import numpy as np

from rigdesign.checks.hardware.plate_line import worst_line
from rigdesign.checks.measures import arms
from rigdesign.hardware.catalogue import threads, webbings
from rigdesign.hardware.model import Body, End, Hardware, Link
from rigdesign.hardware.rules.model import Bar, PinState, PlateBending, PlateHole, RodState, StrapState, WebbingState
from rigdesign.levers.model import Hole, Piece
from rigdesign.target.curve import Floats

CROOKED, ROD_PLAY = 1 / 500, 0.001
"""A compressed rod acts off its centre line by this part of its length and so many metres of play; common practice."""


def bar(hardware: Hardware, piece: Piece, load: float) -> Bar:
    """A lever as a beam under `load` [N] at its pivot.  Its arms may be negative where its holes are out of order."""
    body = hardware.bodies[piece.name]
    a, b = arms(piece)
    holes = {hole.name: hardware.end_at(piece.name, hole.name).hole for hole in piece.holes}
    return Bar(
        load=load,
        a=a,
        b=b,
        section=body.section,
        count=body.profiles,
        material=body.material,
        pivot_hole=holes["pivot"],
        end_hole=max(holes["A"], holes["B"]),
        side_plate=body.side_plate,
        braced=_braced(piece, body),
        deflection_limit=hardware.rig.plan.target.brief.hardware.deflection,
    )


def _braced(piece: Piece, body: Body) -> float:
    """The largest distance between two neighbours among spacers, pivot and ends [m]; a single profile has but ends."""
    a, b = arms(piece)
    held = [-a, b]
    if body.profiles > 1:
        held += [0.0, *(place - piece.pivot.u for place in body.spacers)]
    return max(right - left for left, right in pairwise(sorted(held)))


def lever_hole(hardware: Hardware, piece: Piece, hole: Hole, load: float) -> PlateHole:
    """The pin at a hole of a lever through its profiles, or through both webs of a hollow section and their plates.

    The load acts square to the lever.  Beside a hole the steel goes to the lever's end or to the next hole's edge.
    """
    body = hardware.bodies[piece.name]
    end = hardware.end_at(piece.name, hole.name)
    others = [
        np.hypot(hole.u - other.u, hole.v - other.v) - hardware.end_at(piece.name, other.name).hole / 2
        for other in piece.holes
        if other is not hole
    ]
    old = body.old_pivots + np.array([piece.pivot.u, piece.pivot.v])
    pivot = hardware.end_at(piece.name, "pivot")
    others += [float(np.hypot(hole.u - u, hole.v - v)) - pivot.hole / 2 for u, v in old]
    beside = float(min(others)) if hole.name == "pivot" else min(float(min(others)), body.overhang)
    return PlateHole(
        load=load,
        count=2,
        thickness=body.section.web + body.side_plate,
        material=body.material,
        pin=end.pin,
        hole=end.hole,
        side=beside - end.hole / 2,
        beyond=(body.section.depth - end.hole) / 2,
        radius=body.section.depth / 2,
        round_edge=False,
    )


def pin(hardware: Hardware, link: Link, end: End, load: float) -> PinState:
    """The pin at one end of a link.  Through a hollow lever it bears on webs and side plates alone."""
    body = hardware.bodies.get(end.to)
    inner = end.inner
    if body is not None and body.build == "hollow section":
        inner = 2 * (body.section.web + body.side_plate)
    return PinState(load, end.pin, link.pin_material, inner, end.outer, end.gap)


def fitting(link: Link, end: End, load: float) -> PlateHole:
    """The eye or the two cheeks of a fork at one end of a link; a strap's eye is the strap itself, cut square."""
    is_strap = link.kind == "strap" and end.fitting == "eye"
    clear = end.radius - end.hole / 2
    return PlateHole(
        load=load,
        count=2 if end.fitting == "fork" else 1,
        thickness=end.outer if end.fitting == "fork" else end.inner,
        material=link.material if is_strap else link.fitting_material,
        pin=end.pin,
        hole=end.hole,
        side=min(clear, (link.width - end.hole) / 2) if is_strap else clear,
        beyond=clear,
        radius=end.radius,
        round_edge=not is_strap,
    )


def lugs(link: Link, end: End, load: float) -> PlateHole:
    """The two lugs of a pad outside a link's eye, with edges as far from the hole as the eye's."""
    clear = end.radius - end.hole / 2
    return PlateHole(
        load, 2, end.outer, link.fitting_material, end.pin, end.hole, clear, clear, end.radius, round_edge=True
    )


def rod(link: Link, load: float, compressed: bool) -> RodState:
    """A threaded rod; its root diameter follows from its nominal diameter and stress area."""
    pitch = (link.thickness - 2 * np.sqrt(link.stress_area / np.pi)) / 0.9382
    return RodState(
        load=load,
        stress_area=link.stress_area,
        root=float(link.thickness - 1.2269 * pitch),
        length=link.length,
        eccentricity=CROOKED * link.length + ROD_PLAY if compressed else 0.0,
        material=link.material,
        compressed=compressed,
    )


def stud(link: Link, end: End, load: float) -> RodState | None:
    """A threaded stud that is not the rod itself, None where it is; its thread is the largest in its diameter."""
    if link.kind == "rod" and abs(end.pin - link.thickness) < 1e-9:
        return None
    thread = [one for one in threads() if one.nominal <= end.pin + 1e-9]
    area, root = (thread[-1].stress_area, thread[-1].root) if thread else (0.0, 0.0)
    return RodState(load, area, root, 0.0, 0.0, link.material, compressed=False)


def strap(link: Link, load: float) -> StrapState:
    """A strap with its larger hole."""
    return StrapState(load, link.width, link.thickness, max(link.upper.hole, link.lower.hole), link.material)


def webbing(link: Link, load: float) -> WebbingState:
    """Webbing by its size in the catalogue; what is not in it bears nothing."""
    return WebbingState(load, next((one.breaking for one in webbings() if one.name == link.size), 0.0))


def plate(hardware: Hardware, piece: Piece, pivot_load: float, loads: Floats) -> PlateBending:
    """A three-point plate under `loads` (3,) [N] at its outer holes, about its worst line, and at its worst washer."""
    body = hardware.bodies[piece.name]
    origin = np.array([piece.pivot.u, piece.pivot.v])
    ends = [hardware.end_at(piece.name, hole.name) for hole in piece.holes]
    line = worst_line(
        np.array([[hole.u, hole.v] for hole in piece.ends]) - origin,
        loads,
        np.array([end.hole for end in ends[1:]]),
        ends[0].hole,
        body.outline - origin,
    )
    punching = [load / end.radius for load, end in zip([pivot_load, *np.abs(loads)], ends, strict=True)]
    worst = int(np.argmax(punching))
    return PlateBending(
        load=float([pivot_load, *np.abs(loads)][worst]),
        moment=line.moment,
        width=line.width,
        thickness=body.section.depth,
        washer=2 * ends[worst].radius,
        hole=ends[worst].hole,
        material=body.material,
    )
