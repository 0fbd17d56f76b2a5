"""Pads: how many, where, and how hard each pulls.

In: a `Target` (which holds its `Brief`).  Out: a `PadPlan` with the places, the wanted forces and a `Proof` of how good
they are, or a `Refusal` where limits leave no pads at all.

Whatever the kind of places, the order is the same: first the least band use over everything that has a band, with a
proven lower bound; then, within what `ease` gives up of it (or anywhere inside the bands for `aim = "even"`), forces as
close as possible to each pad's share of the curve.  The sum and the first moment of the forces are exact throughout,
because the path of the pads' moment starts on a fixed line and ends on zero.

    tube      the net target and its bands, as the pads must follow them; judges whole batches of pads at once
    limits    what single pads and neighbours must keep: forces, footprints, keep-outs
    path      free places, one curve: exact optimum by the path of fewest links
    stair     the shear alone: exact bound
    convex    many small convex polygons at once
    lines     given places or cells: proofs by sets of lines
    forces    given places: forces by linear programmes
    search    free places under limits or several bands
    free, hard, fixed   the three kinds of places, each an `Outcome`
    refusals  which limit leaves no pads at all
    plan      from the target to the plan

Depends on: brief, target, display, findings, words.  Knows no files, no printing, no figures.
"""

from __future__ import annotations

from rigdesign.pads.model import PadPlan, Proof
from rigdesign.pads.plan import plan_pads

__all__ = ["PadPlan", "Proof", "plan_pads"]
