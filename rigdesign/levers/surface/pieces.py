"""Holes and pieces of a drilled tree in plan."""

from __future__ import annotations

from rigdesign.levers.geometry import DUST
from rigdesign.levers.model import Hole, HoleName, Jack, Piece, Tree
from rigdesign.levers.surface.hanging import HungInPlan
from rigdesign.levers.surface.wiring import Branches

NAMES: tuple[HoleName, HoleName, HoleName] = ("A", "B", "C")


def tree_in_plan(branches: Branches, hung: HungInPlan, force: float) -> Tree:
    """The tree of one jack that pulls `force` [N], signed, with holes as they are drilled (the first row of `hung`).

    What is a whole number of drill steps is so to a picometre.
    """
    parents = {end: f"lever {row + 1}" for row, ends in branches.downward() for end in ends}
    pieces = tuple(_piece(branches, hung, row, parents.get(row, "jack 1")) for row in range(branches.n_pieces))
    jack = Jack(1, float(hung.jack_x[0]), float(hung.jack_y[0]), "lever 1" if branches.n_pieces else "pad 1")
    return Tree(jack, force, pieces)


def _piece(branches: Branches, hung: HungInPlan, row: int, parent: str) -> Piece:
    piece, ends = hung.pieces[row], branches.ends[row]
    holes = [Hole("pivot", parent, 0.0, 0.0, float(piece.x[0]), float(piece.y[0]))]
    for index, end in enumerate(ends):
        u, v = float(piece.u[0, index]), float(piece.v[0, index])
        if end >= 0:
            joins, x, y = f"lever {end + 1}", hung.pieces[end].x[0], hung.pieces[end].y[0]
        else:
            joins, x, y = f"pad {-end}", hung.pad_x[0, -1 - end], hung.pad_y[0, -1 - end]
        # adding zero turns a negative zero, which a table would show, into zero
        holes.append(Hole(NAMES[index], joins, round(u, DUST) + 0.0, round(v, DUST) + 0.0, float(x), float(y)))
    return Piece(row + 1, "plate" if len(ends) == 3 else "lever", branches.tier[row], parent, tuple(holes))
