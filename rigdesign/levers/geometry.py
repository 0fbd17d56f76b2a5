"""Holes and pieces of a drilled tree."""

from __future__ import annotations

from rigdesign.levers.drilled import Drilled
from rigdesign.levers.model import Hole, HoleName, Jack, Piece, Tree
from rigdesign.levers.wiring import Wiring

DUST = 12
"""Decimals of a metre to which whole steps are rounded: enough for 1/128 in; 0.30000000000000004 m becomes 0.3 m."""


def build_tree(wiring: Wiring, drilled: Drilled, step: float, force: float) -> Tree:
    """Tree of one jack that pulls `force` [N], signed, with holes as they are drilled.

    Arms that are whole numbers of `step` [m] are so exactly; the others are as long as the pads' places make them.
    """
    hung = drilled.hung
    parents = {int(end): f"lever {row + 1}" for row in range(wiring.n_levers) for end in wiring.ends[row]}
    pieces = tuple(_piece(wiring, drilled, step, row, parents.get(row, "jack 1")) for row in range(wiring.n_levers))
    jack = Jack(1, float(hung.jack_x[0]), 0.0, "lever 1" if wiring.n_levers else "pad 1")
    return Tree(jack, force, pieces)


def _piece(wiring: Wiring, drilled: Drilled, step: float, row: int, parent: str) -> Piece:
    hung, steps = drilled.hung, drilled.steps[row]
    a = round(int(steps[0]) * step, DUST)
    b = round(int(steps[1]) * step, DUST) if steps.size == 2 else float(hung.b[0, row])
    holes = [Hole("pivot", parent, 0.0, 0.0, float(hung.pivot[0, row]), 0.0)]
    names: tuple[HoleName, HoleName] = ("A", "B")
    for name, u, end in zip(names, (-a, b), wiring.ends[row], strict=True):
        below = int(end)
        joins = f"lever {below + 1}" if below >= 0 else f"pad {-below}"
        place = hung.pivot[0, below] if below >= 0 else hung.pad_x[0, -1 - below]
        holes.append(Hole(name, joins, u, 0.0, float(place), 0.0))
    return Piece(row + 1, "lever", int(wiring.tier[row]), parent, tuple(holes))
