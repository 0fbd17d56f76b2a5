"""Which of given places carry pads: a mixed-integer programme with a proven bound.

Unknown are the forces f over their mean, the band use t, and for every place whether it has a pad, z in {0, 1}:

    least t   with   −t ≤ errors over their bands ≤ t,   sum and first moments exact,
                     least · z ≤ f ≤ largest · z,   Σ z = count,   z_i + z_j ≤ 1 where footprints collide.

HiGHS branches and bounds; its work is limited by nodes, never by the clock, so that the same brief gives the same pads.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.pads.surface.choice_model import Choice, Chosen
from rigdesign.pads.surface.jumps import jump_limits
from rigdesign.pads.surface.many import Search
from rigdesign.pads.surface.sparse import SparseChoice
from rigdesign.target.curve import Floats

MEET = 1e-3
"""Found and proven least band use may differ by this fraction: finer than any band is asked for."""
ROOM = 1e-5
"""What a pad can carry is taken at a band use this much above the one found, for the solver's tolerance."""
INFEASIBLE = 2
"""The solver's status where nothing meets the constraints."""


def choose(choice: Choice, nodes: int) -> Chosen:
    """Return the choice of least band use, its bound proven within so many nodes.

    A set of pads found beforehand limits what each pad can carry in any better one, which makes the programme tight.
    """
    jumps = jump_limits(choice)
    search = Search(choice, SparseChoice(choice), jumps, None)
    options: dict[str, float] = {"mip_rel_gap": MEET, "node_limit": nodes}
    relaxed = search.sparse.solve(search.top, use=None, jumps=jumps, relaxed=True)
    if relaxed.status == INFEASIBLE:
        return Chosen(None, np.inf, True)
    start, use = search.by_beam(float(relaxed.fun)) if relaxed.fun is not None else (None, np.inf)
    top = search.top if start is None else search.at(use * (1 + ROOM))
    found = search.sparse.solve(top, use=None, jumps=jumps, options=options)
    if found.status == INFEASIBLE:
        # pads that were found cannot be impossible: then nothing is proven but the relaxation
        return Chosen(None, np.inf, True) if start is None else Chosen(start, float(relaxed.fun), False)
    bound = 0.0 if found.mip_dual_bound is None else max(float(found.mip_dual_bound), 0.0)
    if found.x is None or found.fun > use:
        return Chosen(start, bound, found.status == 0)
    return Chosen(np.flatnonzero(found.x[choice.x.size + 1 : 2 * choice.x.size + 1] > 0.5), bound, found.status == 0)


def fewest(choice: Choice, use: float, nodes: int) -> int:
    """Return a number of pads that no choice within band use `use` goes below, at most n + 1: no choice keeps it."""
    single = replace(choice, count=1)
    found = SparseChoice(single).solve(largest(single), use=use, options={"node_limit": nodes})
    if found.status == INFEASIBLE:
        return choice.x.size + 1
    bound = found.mip_dual_bound
    return 1 if bound is None else max(1, int(np.ceil(bound - 1e-6)))


def largest(choice: Choice) -> Floats:
    """Return the most that each pad can carry [N], (n,): its limit, or what the others leave of the total."""
    left = choice.balance.total - (choice.count - 1) * choice.least
    return np.full(choice.x.size, min(choice.largest, left))
