"""Levers in plan: trees of levers in any direction and of three-point plates over pads that lie on a surface.

Comes in and goes out: as for every rig, see `rigdesign.levers`.

How:

- Grouping (grouping).  A set of pads has its load and its force centroid however it is joined, so up to a dozen pads
  the tree of least steel is found with proof by dynamic programming over subsets (lattice, subsets).  Beyond,
  branches of a first tree are opened and joined anew (nodes, search), in counted work.
- Crossings (clashes, repair).  Pieces of one tier keep clear of one another in plan, and with a stock the links of pads
  keep clear of what they pass.  Trees are built from the jack
  down, best first, with the best ones that may cross as bound.
- Drilling (hanging, judging, drilling).  All holes on the step at once, by a descent over the largest error over its
  band of the drilled rig.
- Holes and pieces (wiring, pieces), and why there are none (refusals).

Depends on: what the levers of a line share (descent, model), pads (plan, surface.error_rows), brief, findings, errors.
"""
