"""Part marks: identical pieces share one, mirrored ones do not.

Levers have L1, L2, …, plates P1, …, links K1, …, pads D1, …, jacks J1, …; each in the order in which the first piece
of its kind is numbered.  Pieces are identical where everything that a workshop would measure on them is.
"""

from __future__ import annotations

from collections.abc import Hashable, Iterable, Mapping

import numpy as np

from rigdesign.hardware.model import Body, End, JackStack, Link, PadBody
from rigdesign.levers.model import HoleName, Piece

SAME = 1e-7
"""Lengths closer than this [m] are one length on a drawing."""

_LETTERS = {"lever": "L", "plate": "P", "link": "K", "pad": "D", "jack": "J"}


def marks_of(
    pieces: Iterable[Piece],
    bodies: Mapping[str, Body],
    holes: Mapping[str, Mapping[HoleName, float]],
    links: Iterable[Link],
    pads: Iterable[PadBody],
    lugs: Mapping[str, End],
    stacks: Iterable[JackStack],
) -> dict[str, str]:
    """Return the mark of every member by its name.

    `holes` holds the diameters [m] of a piece's holes by piece and hole, `lugs` the end of the link on each pad.
    """
    keyed: list[tuple[str, str, Hashable]] = []
    for piece in pieces:
        kind = "plate" if piece.kind == "plate" else "lever"
        keyed.append((piece.name, kind, _piece_key(piece, bodies[piece.name], holes[piece.name])))
    keyed += [(link.name, "link", _link_key(link)) for link in links]
    keyed += [
        (f"pad {pad.pad}", "pad", (_length(pad.mass), _length(pad.height), _end_key(lugs[f"pad {pad.pad}"])))
        for pad in pads
    ]
    keyed += [(stack.jack, "jack", (stack.machine, stack.cell)) for stack in stacks]
    numbers: dict[tuple[str, Hashable], str] = {}
    counts: dict[str, int] = {}
    marks = {}
    for name, kind, key in keyed:
        if (kind, key) not in numbers:
            counts[kind] = counts.get(kind, 0) + 1
            numbers[kind, key] = f"{_LETTERS[kind]}{counts[kind]}"
        marks[name] = numbers[kind, key]
    return marks


def _piece_key(piece: Piece, body: Body, holes: Mapping[HoleName, float]) -> Hashable:
    places = tuple((_length(hole.u - piece.pivot.u), _length(hole.v - piece.pivot.v)) for hole in piece.ends)
    diameters = tuple(_length(holes[hole.name]) for hole in piece.holes)
    sizes = (body.profiles, _length(body.gap), _length(body.overhang), _length(body.side_plate))
    open_holes = tuple((_length(float(u)), _length(float(v))) for u, v in body.old_pivots)
    return (body.build, body.section.name, body.material.name, sizes, places, diameters, open_holes)


def _link_key(link: Link) -> Hashable:
    return (link.kind, link.size, _length(link.length), link.material.name, _end_key(link.upper), _end_key(link.lower))


def _end_key(end: End) -> Hashable:
    sizes = (end.pin, end.hole, end.pin_length, end.inner, end.outer, end.radius)
    return (end.fitting, *(_length(size) for size in sizes))


def _length(value: float) -> int:
    """A length as a whole number of `SAME`."""
    return int(np.rint(value / SAME))
