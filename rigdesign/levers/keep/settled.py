"""How a rig hangs once pivots are drilled anew: pads stay, outer holes stay in their pieces, and links lean a little.

Left to itself every piece comes to rest with its pivot over the force centroid of what it carries: only then do the
leans of its links pull it neither way.  It turns in plan until they do not turn it either, which is where the
leans, weighed with their forces, are least.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.levers.geometry import DUST
from rigdesign.levers.keep.pivots import Pivot
from rigdesign.levers.keep.standing import only_tree
from rigdesign.levers.model import Hole, Piece, Rig
from rigdesign.levers.surface.wiring import Branches
from rigdesign.pads.model import PadPlan
from rigdesign.target.curve import Floats


def settled(
    old: Rig, branches: Branches, pivots: tuple[Pivot, ...], shifts: Floats, force: Floats, plan: PadPlan
) -> Rig:  # fmt: skip
    """The old rig with pivots shifted by `shifts` (n_pieces, 2) [m] and pads that carry `force` (n_pads,) [N], > 0.

    Its plan becomes `plan`, its jack pulls what the plan's forces sum to and stands over the top pivot.
    """
    tree = only_tree(old)
    place: dict[int, tuple[Floats, float]] = {
        -1 - pad: (np.array([old.pad_x[pad], old.pad_y[pad]]), float(force[pad])) for pad in range(branches.n_pads)
    }
    pieces: dict[int, Piece] = {}
    for row, ends in branches.upward():
        below = np.array([place[end][0] for end in ends])
        load = np.array([place[end][1] for end in ends])
        centre = below[0] + (load[:, None] * (below - below[0])).sum(axis=0) / load.sum()
        place[row] = centre, float(load.sum())
        holes = pivots[row].holes - shifts[row]
        pieces[row] = _laid(tree.pieces[row], holes, centre, _turned(holes, below - centre, load))
    jack_x, jack_y = place[branches.top][0]
    jack = replace(tree.jack, x=float(jack_x), y=float(jack_y))
    total = float(plan.force.sum())
    new = replace(tree, jack=jack, force=total, pieces=tuple(pieces[row] for row in range(branches.n_pieces)))
    return replace(old, plan=plan, trees=(new,), findings=())


def _turned(holes: Floats, below: Floats, load: Floats) -> Floats:
    """Unit vector along u in plan that lays holes (m, 2) nearest to what they join (m, 2), weighed by loads (m,)."""
    dot = float((load[:, None] * holes * below).sum())
    cross = float((load * (holes[:, 0] * below[:, 1] - holes[:, 1] * below[:, 0])).sum())
    size = np.hypot(dot, cross)
    return np.array([dot / size, cross / size + 0.0])


def _laid(piece: Piece, holes: Floats, centre: Floats, along: Floats) -> Piece:
    """A piece with its pivot at `centre` [m] and outer holes as seen from it."""
    new = [replace(piece.pivot, u=0.0, v=0.0, x=float(centre[0]), y=float(centre[1]) + 0.0)]
    for hole, (u, v) in zip(piece.ends, holes, strict=True):
        x, y = centre[0] + along[0] * u - along[1] * v, centre[1] + along[1] * u + along[0] * v
        new.append(_placed(hole, float(u), float(v), float(x), float(y)))
    return replace(piece, holes=tuple(new))


def _placed(hole: Hole, u: float, v: float, x: float, y: float) -> Hole:
    # adding zero turns a negative zero, which a table would show, into zero
    return replace(hole, u=round(u, DUST) + 0.0, v=round(v, DUST) + 0.0, x=x, y=y + 0.0)
