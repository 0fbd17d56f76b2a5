"""A rig that exists as the arrays that drilling works with: who hangs with whom, whole steps, and back to holes.

A line rig is a plan rig with y = 0, so that one hanging serves both.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.errors import InputError
from rigdesign.levers.geometry import DUST
from rigdesign.levers.marks.alike import outer_holes
from rigdesign.levers.model import Hole, Piece, Rig, Tree
from rigdesign.levers.surface.hanging import HungInPlan
from rigdesign.levers.surface.wiring import Branches, Planned
from rigdesign.levers.wiring import Ints
from rigdesign.target.curve import Floats

WHOLE = 1e-6
"""A hole that is nearer than this part of a drill step to a whole number of them is on it."""


def only_tree(rig: Rig) -> Tree:
    """The tree of a rig that has one.

    Raises
    ------
    InputError
        Where the rig has several jacks.
    """
    if len(rig.trees) != 1:
        raise InputError("this is done for rigs with one jack alone", where="rig", value=f"{len(rig.trees)} jacks")
    return rig.trees[0]


def branches_of_rig(rig: Rig) -> Branches:
    """Who hangs with whom in a rig with one tree, its pieces in their order; each stands after what it hangs on.

    Raises
    ------
    InputError
        Where the rig has several jacks.
    """
    tree = only_tree(rig)
    row = {piece.name: k for k, piece in enumerate(tree.pieces)}
    row |= {f"pad {k + 1}": -1 - k for k in range(rig.pad_x.size)}
    ends = tuple(tuple(row[hole.joins] for hole in piece.ends) for piece in tree.pieces)
    return Branches(int(rig.pad_x.size), ends, tuple(piece.tier for piece in tree.pieces))


def steps_of_rig(rig: Rig) -> Ints:
    """The whole drill steps that give a rig's holes, (q,), in the order of `rigdesign.levers.surface.hanging`.

    Raises
    ------
    InputError
        Where a hole is not on the drill step of the rig's own brief.
    """
    step = rig.plan.target.brief.levers.drill_step
    numbers = []
    for piece in only_tree(rig).pieces:
        exact = np.array(_numbers(outer_holes(piece), rig.plan.may_move)) / step
        if np.abs(exact - np.rint(exact)).max() > WHOLE:
            raise InputError("a hole is not on the drill step", where=f"rig, {piece.name}", value=f"{step} m")
        numbers.append(np.rint(exact).astype(np.int64))
    return np.concatenate(numbers) if numbers else np.zeros(0, dtype=np.int64)


def _numbers(holes: Floats, may_move: bool) -> tuple[float, ...]:
    """Lengths [m] that are whole steps in a piece, of holes seen from its pivot."""
    (a_u, a_v), (b_u, _) = holes[:2]
    if len(holes) == 2:
        return (-a_u, b_u) if may_move else (-a_u,)
    return (a_u, b_u, a_v, *holes[2]) if may_move else (-a_u, -a_v)


def directions(rig: Rig) -> Planned:
    """Pivots of a rig as drilled, from which the directions of its pieces in plan follow."""
    pieces = only_tree(rig).pieces
    x, y = (np.array([getattr(piece.pivot, axis) for piece in pieces]) for axis in ("x", "y"))
    return Planned(np.zeros(len(pieces)), x, y)


def rebuilt(rig: Rig, branches: Branches, hung: HungInPlan) -> Rig:
    """The rig with its holes, pads and jack where they hang (first row); numbers, joints and plan stay."""
    tree = only_tree(rig)
    pads = hung.pad_x[0], hung.pad_y[0]
    pieces = tuple(_moved(piece, branches.ends[row], row, hung, pads) for row, piece in enumerate(tree.pieces))
    jack = replace(tree.jack, x=float(hung.jack_x[0]), y=float(hung.jack_y[0]))
    return replace(rig, pad_x=pads[0].copy(), pad_y=pads[1].copy(), trees=(replace(tree, jack=jack, pieces=pieces),))


def _moved(
    piece: Piece, ends: tuple[int, ...], row: int, hung: HungInPlan, pads: tuple[Floats, Floats]
) -> Piece:  # fmt: skip
    here = hung.pieces[row]
    holes = [replace(piece.pivot, u=0.0, v=0.0, x=float(here.x[0]), y=float(here.y[0]))]
    for index, (hole, end) in enumerate(zip(piece.ends, ends, strict=True)):
        x, y = (hung.pieces[end].x[0], hung.pieces[end].y[0]) if end >= 0 else (pads[0][-1 - end], pads[1][-1 - end])
        holes.append(_placed(hole, float(here.u[0, index]), float(here.v[0, index]), float(x), float(y)))
    return replace(piece, holes=tuple(holes))


def _placed(hole: Hole, u: float, v: float, x: float, y: float) -> Hole:
    # adding zero turns a negative zero, which a table would show, into zero
    return replace(hole, u=round(u, DUST) + 0.0, v=round(v, DUST) + 0.0, x=x, y=y)
