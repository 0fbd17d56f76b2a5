"""Which pieces of a rig are the same part: the same kind with the same holes in the same order."""

from __future__ import annotations

import numpy as np

from rigdesign.levers.model import Piece, Rig
from rigdesign.target.curve import Floats

SAME = 1e-7
"""Holes that agree to this [m] are one: a ten-thousandth of a millimetre, below what any hole is drilled to."""


def alike(rig: Rig) -> tuple[tuple[str, ...], ...]:
    """Return the names of pieces that are alike, group by group in the order of their first pieces.

    Levers are alike whose arms to A and to B agree, plates whose holes agree in their own frames.  A lever turned end
    for end is another part, and so is a mirrored plate.  Pieces that are like no other stand in groups of one.
    """
    pieces = [piece for tree in rig.trees for piece in tree.pieces]
    return tuple(tuple(pieces[k].name for k in group) for group in alike_rows(pieces))


def alike_rows(pieces: list[Piece]) -> list[list[int]]:
    """Indices of pieces that are alike, group by group."""
    groups: list[tuple[Floats, list[int]]] = []
    for k, piece in enumerate(pieces):
        holes = outer_holes(piece)
        for first, members in groups:
            if first.shape == holes.shape and np.abs(first - holes).max() <= SAME:
                members.append(k)
                break
        else:
            groups.append((holes, [k]))
    return [members for _, members in groups]


def outer_holes(piece: Piece) -> Floats:
    """Outer holes of a piece seen from its pivot, u and v [m]: (2, 2) of a lever, (3, 2) of a plate."""
    return np.array([(hole.u - piece.pivot.u, hole.v - piece.pivot.v) for hole in piece.ends])
