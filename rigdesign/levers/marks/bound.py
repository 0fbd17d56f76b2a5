"""How few different pieces there can be at all: a bound that knows the tolerance alone.

Two pieces can only be alike if some holes are within the tolerance of both.  Pieces that are pairwise so form a clique;
no more than one clique can share a mark, so the fewest cliques that cover all pieces are a lower bound.  For free pads
it can be reached as far as the tolerance goes: boxes with sides along the axes that overlap pairwise have a point in
common.
"""

from __future__ import annotations

from itertools import islice

import networkx as nx
import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.keep.standing import only_tree
from rigdesign.levers.marks.alike import SAME, outer_holes
from rigdesign.levers.marks.trials import Groups, Trials
from rigdesign.pads.surface.quiet import quiet

CLIQUES = 20_000
"""No more cliques than this are listed; with more, the bound comes from pieces that are pairwise too far apart."""

NODES = 2_000
"""Nodes of the search for the fewest cliques."""


def could_be_alike(trials: Trials) -> NDArray[np.bool_]:
    """Which pieces some holes within the tolerance of both could make alike, (n, n)."""
    pieces = only_tree(trials.rig).pieces
    holes = [outer_holes(piece) for piece in pieces]
    result = np.eye(len(pieces), dtype=bool)
    for i, one in enumerate(holes):
        for j in range(i):
            other = holes[j]
            # outer holes over pads that stay never move against one another
            still = not trials.rig.plan.may_move and _on_pads(trials, i) and _on_pads(trials, j)
            alike = one.shape == other.shape and (
                bool(np.abs((one - one[0]) - (other - other[0])).max() <= SAME) if still else True
            )
            if alike:
                alike = bool(np.abs(one - other).max() <= 2 * _reach(trials) + SAME)
            result[i, j] = result[j, i] = alike
    return result


def _reach(trials: Trials) -> float:
    """How far a hole can move at most [m]: whole steps where all holes are on them."""
    return trials.reach * trials.step if trials.rig.plan.may_move else trials.tolerance


def _on_pads(trials: Trials, row: int) -> bool:
    return all(end < 0 for end in trials.branches.ends[row])


def fewest_groups(compatible: NDArray[np.bool_]) -> tuple[int, Groups]:
    """Return a proven least number of groups of pieces that are pairwise `compatible` (n, n), and groups found."""
    graph = nx.from_numpy_array(compatible & ~np.eye(len(compatible), dtype=bool))
    cliques = [tuple(sorted(clique)) for clique in islice(nx.find_cliques(graph), CLIQUES + 1)]
    if len(cliques) > CLIQUES:
        return _apart(compatible), ()
    cliques.sort()
    covers = np.zeros((len(compatible), len(cliques)))
    for k, clique in enumerate(cliques):
        covers[list(clique), k] = 1.0
    # imported late: most rigs keep their marks as drilled
    from scipy.optimize import Bounds, LinearConstraint, milp

    with quiet():
        found = milp(
            np.ones(len(cliques)),
            integrality=np.ones(len(cliques)),
            bounds=Bounds(0, 1),
            constraints=LinearConstraint(covers, 1.0, np.inf),
            options={"node_limit": NODES},
        )
    bound = _apart(compatible)
    if found.mip_dual_bound is not None:
        bound = max(bound, int(np.ceil(found.mip_dual_bound - 1e-6)))
    chosen = [] if found.x is None else [cliques[k] for k in np.flatnonzero(found.x > 0.5)]
    return bound, _each_once(chosen)


def _apart(compatible: NDArray[np.bool_]) -> int:
    """Number of pieces that are pairwise not compatible, found one after the other, those with few fellows first."""
    left, count = np.ones(len(compatible), bool), 0
    for row in np.argsort(compatible.sum(axis=1), kind="stable"):
        if left[row]:
            count += 1
            left &= ~compatible[row]
    return count


def _each_once(cliques: list[tuple[int, ...]]) -> Groups:
    """Every piece in the first of the cliques that hold it."""
    seen: set[int] = set()
    groups = []
    for clique in cliques:
        own = tuple(row for row in clique if row not in seen)
        seen |= set(own)
        if own:
            groups.append(own)
    return tuple(groups)
