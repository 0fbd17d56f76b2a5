"""The tree of a plan rig laid out for its sheet: branch by branch, since in elevation its levers would hide each other.

Pads stand side by side in the order in which they hang, at equal distances; a lever's pivot is drawn in its middle, a
plate's between holes A and B.  Nothing along the sheet is to scale.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.levers.model import Piece, Rig, Tree


def in_branches(rig: Rig) -> Rig:
    """Return the rig with every x along the span replaced by a place on the sheet of its tree.

    The pads of the first tree stand at equal distances from end to end of the specimen; holes keep u and v.
    """
    specimen = rig.plan.target.brief.specimen
    tree = rig.trees[0]
    pieces = {piece.name: piece for piece in tree.pieces}
    order = _hanging(tree.jack.carries, pieces)
    pitch = (specimen.right - specimen.left) / len(order)
    at = {name: specimen.left + (k + 0.5) * pitch for k, name in enumerate(order)}
    for piece in reversed(tree.pieces):  # tier by tier from the jack: what hangs on a piece comes after it
        _place(piece, pieces, at)
    pad_x = np.array([at[f"pad {k}"] for k in range(1, rig.plan.n_pads + 1)])
    moved = tuple(_moved(piece, at) for piece in tree.pieces)
    jack = replace(tree.jack, x=at[tree.jack.carries])
    return replace(rig, pad_x=pad_x, trees=(Tree(jack, tree.force, moved), *rig.trees[1:]))


def _hanging(name: str, pieces: dict[str, Piece]) -> list[str]:
    """Names of the pads that hang on a part, branch by branch."""
    if name not in pieces:
        return [name]
    return [pad for hole in pieces[name].ends for pad in _hanging(hole.joins, pieces)]


def _place(piece: Piece, pieces: dict[str, Piece], at: dict[str, float]) -> float:
    """Place of a piece's pivot from the places of what hangs on it, which are found first."""
    if piece.name not in at:
        ends = [at[hole.joins] if hole.joins in at else _place(pieces[hole.joins], pieces, at) for hole in piece.ends]
        at[piece.name] = (ends[0] + ends[1]) / 2
    return at[piece.name]


def _moved(piece: Piece, at: dict[str, float]) -> Piece:
    places = [at[piece.name], *(at[hole.joins] for hole in piece.ends)]
    return replace(piece, holes=tuple(replace(hole, x=x) for hole, x in zip(piece.holes, places, strict=True)))
