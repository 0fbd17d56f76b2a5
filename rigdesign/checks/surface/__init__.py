"""What the check of a plan rig adds: loads and stations in plan, space between footprints and pieces, plates.

Statics, curves, verdicts and single figures are those of every rig; see `rigdesign.checks`.

Depends on: brief, target, pads (its geometry in plan), levers, and the rest of the checks.
"""
