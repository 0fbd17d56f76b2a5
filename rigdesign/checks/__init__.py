"""Stage checks: a rig as drilled against its target, by a road of its own.

In: a `Rig`, that is trees with holes and jack forces, pads where they sit, and the target.  Out: a `Check`, which holds
every number that anybody is shown: pad forces and lever loads from statics, V, M and on surfaces T of rig and target by
station, under- and over-test by region with band use and verdict, residuals, single figures and findings.

The builder chooses pivots from wanted pad forces.  The check never looks at those.  It starts from hole positions and
jack forces, cuts every piece free, and closes ΣF and ΣM at every pivot (`solve_statics`).  The curves follow from the
pad forces, from the supports' answer to them, and from gravity (`curves`).

    check(rig)                   the rig as it is
    check_with_holes(rig, file)  with holes as built, from a table in the layout of holes.csv
    recheck(rig, brief)          against another brief's target, bands and limits

A surface is also cut the other way, square to y, its pads are held to their tributary shares where the brief asks for
that, and what stands in whose way in plan is found by geometry (`surface`).

Levers and links are rigid, without weight and without friction, and hang plumb.  What the rig is made of is checked on
top of this, its own weight among it (`hardware`).

Depends on: brief, target, pads and levers (their models), display, findings, errors, words.
"""

from rigdesign.checks.again import check_with_holes, check_with_table, recheck
from rigdesign.checks.model import Check, Curves, RegionVerdict, Statics
from rigdesign.checks.statics import share_matrix, solve_statics
from rigdesign.checks.whole import check

__all__ = [
    "Check",
    "Curves",
    "RegionVerdict",
    "Statics",
    "check",
    "check_with_holes",
    "check_with_table",
    "recheck",
    "share_matrix",
    "solve_statics",
]
