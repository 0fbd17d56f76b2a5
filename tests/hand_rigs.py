"""Rigs put together by hand for tests of what comes after the levers stage: trees drilled exactly, without a search.

Import with ``from hand_rigs import make_rig``.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from itertools import pairwise
from typing import Any

import numpy as np
from factories import make_brief
from numpy.typing import ArrayLike

from rigdesign.brief.model import Brief
from rigdesign.levers.model import Hole, Jack, Piece, Rig, Tree
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.target import build_target
from rigdesign.target.model import Target

# who hangs with whom, by pad number: (1, (2, 3)) is pad 1 on a lever with the lever of pads 2 and 3
Group = Any


def halves(first: int, last: int) -> Group:
    """Group pads `first` to `last` by halving, unequally where their number is odd."""
    if first == last:
        return first
    middle = (first + last) // 2
    return (halves(first, middle), halves(middle + 1, last))


def make_tree(x: ArrayLike, force: ArrayLike, group: Group | None = None, jack: int = 1) -> Tree:
    """A tree whose levers (groups of two) and plates (groups of three, in line: not solvable) carry these forces."""
    x, force = np.asarray(x, dtype=float), np.asarray(force, dtype=float)
    pieces: list[Piece] = []

    def hang(group: Group, parent: str, tier: int) -> tuple[str, float, float]:
        if isinstance(group, int):
            return f"pad {group}", float(x[group - 1]), float(force[group - 1])
        place = len(pieces)
        number = place + 1
        pieces.append(None)  # type: ignore[arg-type]
        ends = [hang(part, f"lever {number}", tier + 1) for part in group]
        load = sum(f for _, _, f in ends)
        pivot = sum(at * f for _, at, f in ends) / load
        holes = [Hole("pivot", parent, 0.0, 0.0, pivot, 0.0)]
        holes += [
            Hole(name, joins, at - pivot, 0.0, at, 0.0) for name, (joins, at, _) in zip("ABC", ends, strict=False)
        ]
        pieces[place] = Piece(number, "lever" if len(ends) == 2 else "plate", tier, parent, tuple(holes))
        return f"lever {number}", pivot, load

    carries, at, total = hang(group if group is not None else halves(1, x.size), f"jack {jack}", 1)
    return Tree(Jack(jack, at, 0.0, carries), total, tuple(pieces))


def make_plan(target: Target, x: ArrayLike, force: ArrayLike) -> PadPlan:
    """A plan that wants these forces; its proof is made up."""
    x, force = np.asarray(x, dtype=float), np.asarray(force, dtype=float)
    proof = Proof(0.61, 0.52, 0.0031, "a made-up proof", "no search", 0.12, 0.34, 0.6)
    return PadPlan(target, x, 0 * x, force, 1.01 * force, float(x @ force / force.sum()), 0.0, True, proof, ())


def make_rig(
    x: ArrayLike, force: ArrayLike, brief: Brief | None = None, group: Group | None = None, target: Target | None = None
) -> Rig:
    """A rig with one tree whose pads at `x` [m] carry `force` [N], against the brief's target."""
    target = target if target is not None else build_target(brief if brief is not None else make_brief())
    x = np.asarray(x, dtype=float)
    tree = make_tree(x, force, group)
    return Rig(make_plan(target, x, force), x, np.zeros(x.size), (tree,), "by hand", ())


def with_hole(rig: Rig, lever: int, hole: str, **changes: float) -> Rig:
    """The rig with one hole of one lever changed: ``with_hole(rig, 2, "A", u=-0.31)``."""

    def changed(piece: Piece) -> Piece:
        holes = [replace(h, **changes) if (piece.number, h.name) == (lever, hole) else h for h in piece.holes]
        return replace(piece, holes=tuple(holes))

    trees = [replace(tree, pieces=tuple(changed(piece) for piece in tree.pieces)) for tree in rig.trees]
    return replace(rig, trees=tuple(trees))


def with_brief(rig: Rig, brief: Brief) -> Rig:
    """The rig with another brief and its target, forces as they are."""
    return replace(rig, plan=replace(rig.plan, target=build_target(brief)))


def lumped(target: Target, edges: Sequence[float]) -> tuple[np.ndarray, np.ndarray]:
    """Places and forces of strips between the edges, lumped at their centroids, by a fine midpoint sum.

    Written apart from the package's own hand method; good to about 1e-7 for smooth loads.
    """
    places, forces = [], []
    for low, high in pairwise(edges):
        grid = np.linspace(low, high, 20001)
        middle, width = 0.5 * (grid[1:] + grid[:-1]), np.diff(grid)
        load = target.net.running(middle, "outboard") * width
        places.append(float(load @ middle / load.sum()))
        forces.append(float(load.sum()))
    return np.array(places), np.array(forces)
