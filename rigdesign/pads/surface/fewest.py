"""How many hard points in plan the bands need at least, before any are chosen."""

from __future__ import annotations

import numpy as np

from rigdesign.pads.surface.choice import INFEASIBLE, fewest, largest
from rigdesign.pads.surface.given import PROVEN, choice_of
from rigdesign.pads.surface.jumps import jump_limits
from rigdesign.pads.surface.places import given_places, usable_points
from rigdesign.pads.surface.sparse import SparseChoice
from rigdesign.pads.surface.states import pads_needed
from rigdesign.target.model import Target

NODES = 2_000
"""Nodes of branch and bound on the number of pads: a bound that it leaves open is only where the counting starts."""


def fewest_hard_points(target: Target, jack: tuple[float, float]) -> int:
    """Return a number of pads that no choice of hard points within the bands goes below.

    One more than there are hard points where no choice keeps the bands.  `jack` is where the jack stands, x, y [m].
    """
    usable = usable_points(target.brief)
    x, y = (places[usable] for places in given_places(target.brief))
    choice = choice_of(target, jack, x, y, 1)
    if x.size <= PROVEN:
        return fewest(choice, 1.0, NODES)
    jumps = jump_limits(choice)
    top = np.minimum(largest(choice), jumps.at(1.0))
    relaxed = SparseChoice(choice).solve(top, use=1.0, jumps=jumps, relaxed=True)
    if relaxed.x is None:
        return x.size + 1 if relaxed.status == INFEASIBLE else 1
    return max(1, int(np.ceil(relaxed.fun - 1e-6)), pads_needed(choice, 1.0, top))
