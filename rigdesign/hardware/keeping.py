"""The hardware of a rig that is kept: the steel that is cut, with pivots drilled anew.

Sections, pins, links, pads, heights, jack and cell stay.  A piece whose pivot moves keeps its old hole, open; where old
and new hole would come too near one another, a new piece of the same sizes takes its place.  A spacer in the way of the
new pin is left out.  Counterweights are worked out anew, as they are easily changed.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from math import hypot

import numpy as np

from rigdesign.display import counted
from rigdesign.findings import Finding
from rigdesign.hardware.balance import counterweights
from rigdesign.hardware.levers import spacer_places
from rigdesign.hardware.marking import marks_of
from rigdesign.hardware.model import Body, Hardware, Mass
from rigdesign.hardware.weighing import lever_mass, plate_mass
from rigdesign.levers.keep.model import Kept, MovedPivot
from rigdesign.levers.model import HoleName, Piece


def keep_hardware(old: Hardware, kept: Kept) -> Hardware:
    """Return the hardware of a rig that is kept, for its new pivots."""
    moved = {pivot.piece: pivot for pivot in kept.moved}
    pieces = {piece.name: piece for tree in kept.rig.trees for piece in tree.pieces}
    bodies, lost = {}, 0
    for name, piece in pieces.items():
        body = replace(old.bodies[name], counterweights={})
        bodies[name] = _drilled(old, body, piece, moved[name]) if name in moved else body
        if name in moved and moved[name].keeps_distance:
            lost += len(body.spacers) - len(bodies[name].spacers)
    holes = _holes(old, pieces)
    masses = dict(old.masses) | _masses(pieces, bodies, holes)
    if any(body.counterweights for body in old.bodies.values()):
        hung = counterweights(kept.rig, masses, old.links, whole=True)
        bodies = {name: replace(body, counterweights=hung.get(name, {})) for name, body in bodies.items()}
        masses |= _masses(pieces, bodies, holes)
    lugs = {link.lower.to: link.lower for link in old.links if link.lower.to.startswith("pad ")}
    return replace(
        old,
        rig=kept.rig,
        bodies=bodies,
        masses=masses,
        marks=marks_of(pieces.values(), bodies, holes, old.links, old.pads, lugs, old.stacks),
        shortfalls=(),
        words="sections, pins, links, jack and load cell are those of the rig that is kept",
        findings=tuple(_remarks(lost)),
    )


def _holes(old: Hardware, pieces: Mapping[str, Piece]) -> dict[str, dict[HoleName, float]]:
    """Diameters of the holes [m] by piece and hole."""
    return {
        name: {hole.name: old.end_at(name, hole.name).hole for hole in piece.holes} for name, piece in pieces.items()
    }


def _drilled(old: Hardware, body: Body, piece: Piece, pivot: MovedPivot) -> Body:
    """The body with a new pivot, its places seen from that."""
    shift = np.array([pivot.new_u - pivot.old_u, pivot.new_v - pivot.old_v])
    outline = body.outline - shift if body.build == "plate" else body.outline
    if not pivot.keeps_distance:
        arms = {hole.name: hypot(hole.u - piece.pivot.u, hole.v - piece.pivot.v) for hole in piece.ends}
        spacers = spacer_places(arms["A"], arms["B"]) if body.spacers else ()
        return replace(body, outline=outline, spacers=spacers, old_pivots=np.empty((0, 2)))
    room = (old.end_at(piece.name, "pivot").hole + body.spacer.tube) / 2
    spacers = tuple(place - float(shift[0]) for place in body.spacers if abs(place - float(shift[0])) > room)
    return replace(body, outline=outline, spacers=spacers, old_pivots=np.vstack([body.old_pivots - shift, -shift]))


def _masses(
    pieces: Mapping[str, Piece], bodies: Mapping[str, Body], holes: Mapping[str, dict[HoleName, float]]
) -> dict[str, Mass]:
    return {
        name: (plate_mass if bodies[name].build == "plate" else lever_mass)(piece, bodies[name], holes[name])
        for name, piece in pieces.items()
    }


def _remarks(lost: int) -> list[Finding]:
    if not lost:
        return []
    text = "stood in the way of pins at new pivots and are left out; their bolts' holes stay"
    return [Finding("strength", "note", "spacers", f"{counted(lost, 'spacer')} {text}", str(lost))]
