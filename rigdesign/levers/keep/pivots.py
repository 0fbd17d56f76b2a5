"""What each pivot of a rig that exists says about pad forces, and forces from shifted pivots.

With P the sum of the forces below a piece and m = Σ F r their moment about its old pivot, r the outer holes seen from
there, the pivot stands in balance at the shift s = m / P.  An unmoved pivot is the linear equation m = 0; a pivot moved
along d by δ or more is the linear inequality m·d ≥ δ P.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from rigdesign.brief.model import LeverRules
from rigdesign.levers.grouping import LIMIT_SLACK
from rigdesign.levers.keep.standing import only_tree
from rigdesign.levers.marks.alike import outer_holes
from rigdesign.levers.model import Rig
from rigdesign.levers.surface.hanging import handed_on
from rigdesign.levers.surface.wiring import Branches
from rigdesign.target.curve import Floats


@dataclass(frozen=True)
class Pivot:
    """The pivot of a piece: outer `holes` (m, 2) [m] seen from it, and `under` (m, n_pads), 1 for pads below a hole.

    `distance` [m] is what a new hole must keep from the old one.  A lever's pivot may shift along u between `low` and
    `high` [m], what its limits leave; both are infinite for a plate.
    """

    name: str
    holes: Floats
    under: Floats
    distance: float
    low: float
    high: float

    @property
    def is_lever(self) -> bool:
        """Whether it has two outer holes."""
        return len(self.holes) == 2

    @cached_property
    def load(self) -> Floats:
        """Row (n_pads,) that gives the piece's load P."""
        return np.asarray(self.under.sum(axis=0))

    @cached_property
    def moments(self) -> Floats:
        """Rows (2, n_pads) that give the moments Σ F u and Σ F v about the old pivot."""
        return np.asarray((self.holes[:, :, None] * self.under[:, None, :]).sum(axis=0))

    @property
    def size(self) -> float:
        """The largest distance of a hole from the pivot [m]."""
        return float(np.hypot(*self.holes.T).max())


def pivots_of(rig: Rig, branches: Branches, rules: LeverRules, distances: dict[str, float]) -> tuple[Pivot, ...]:
    """The pivots of a rig in the order of its pieces, within limits of levers and with distances [m] by piece name."""
    result = []
    for row, piece in enumerate(only_tree(rig).pieces):
        under = np.zeros((len(piece.ends), branches.n_pads))
        for index, end in enumerate(branches.ends[row]):
            under[index, branches.pads_under(end)] = 1.0
        holes = outer_holes(piece)
        low, high = _range(holes, rules)
        result.append(Pivot(piece.name, holes, under, distances[piece.name], low, high))
    return tuple(result)


def _range(holes: Floats, rules: LeverRules) -> tuple[float, float]:
    """How far a lever's pivot may shift either way; not at all limited here for a plate."""
    if len(holes) == 3:
        return -np.inf, np.inf
    a, b = -float(holes[0, 0]), float(holes[1, 0])
    least = max((a + b) / (1 + rules.ratio_limit), rules.shortest_arm) * (1 - LIMIT_SLACK)
    return least - a, b - least


def misfit_rows(rig: Rig, branches: Branches, pivots: tuple[Pivot, ...], force: Floats) -> Floats:
    """Rows (k, n_pads) that give how much nearer or further apart in plan what hangs from a piece gets [m].

    Linear for forces near `force` (n_pads,) [N]: what carries F moves its pivot to Σ F x / Σ F.  Forces count in means.
    """
    mean = float(force.mean())
    places = np.column_stack([rig.pad_x, rig.pad_y])
    moved = {}
    for row, pivot in enumerate(pivots):
        hole = only_tree(rig).pieces[row].pivot
        moved[row] = (places - (hole.x, hole.y)).T * pivot.load * mean / (pivot.load * force).sum()
    rows = []
    for ends in branches.ends:
        first, *others = (moved.get(end, np.zeros((2, branches.n_pads))) for end in ends)
        rows += [row for other in others for row in other - first if np.any(row)]
    return np.array(rows).reshape(-1, branches.n_pads)


def forces_of(branches: Branches, pivots: tuple[Pivot, ...], shifts: Floats, total: float) -> Floats:
    """Pad forces (k, n_pads) [N] of rigs whose pivots are shifted by `shifts` (k, n_pieces, 2) [m]."""
    rows = len(shifts)
    load = {branches.top: np.full(rows, total)}
    for row, ends in branches.downward():
        holes = pivots[row].holes - shifts[:, row, None, :]
        part = handed_on(holes[:, :, 0], holes[:, :, 1])
        for index, end in enumerate(ends):
            load[end] = load[row] * part[:, index]
    return np.stack([load[-1 - pad] for pad in range(branches.n_pads)], axis=1)
