"""Stage levers: who hangs with whom, and where the holes are drilled.

Comes in: a `PadPlan`, the places and wanted forces of the pads on one jack.

Goes out: a `Rig`, its lever tree with holes as dimensioned, or a `Refusal` that names the limit that leaves no tree.

How:

- Grouping (grouping, neighbours).  Of all binary trees over consecutive pads, the one of least steel within ratio
  limit, shortest arm, longest lever and tiers; by dynamic programming, so it is the least and not a guess.  Steel is
  what levers from a stock weigh (weighing), or an estimate where no stock is given.  A prescribed grouping is obeyed
  and held to the same limits.
- Drilling (drilling_free, drilling_fixed).  The drill step is part of the search, not a rounding after it.  For free
  pads a branch and bound from the jack down (branching) looks for the whole arms of least band use, then a descent
  (descent) finishes; for pads that stay the pivots are searched.  Both judge a rig by its errors (judging) at the
  places that can hold the largest.
- Geometry (geometry).  Pieces with pivot, A and B, in their own frames and in plan.
- Surfaces (surface).  The same for pads in plan: levers in any direction, three-point plates, pieces that keep clear.
- Few different parts (marks), and a rig that is kept with few pivots drilled anew (keep).

Searches are bounded by counted work, so the same plan gives the same rig; what was proven and what was not is in
`Rig.words`.

What a rig then really does is not this stage's to say: the check starts again from holes and jack force.

Depends on: pads (plan, tube, limits), target, brief, findings, errors, display.
"""

from rigdesign.levers.build import build_rig as build_rig
from rigdesign.levers.model import Hole as Hole
from rigdesign.levers.model import Jack as Jack
from rigdesign.levers.model import Piece as Piece
from rigdesign.levers.model import Rig as Rig
from rigdesign.levers.model import Tree as Tree
