"""Figures of plan rigs: what lies in plan is drawn in plan, to a scale that is written on the sheet.

    labels          places for labels, clear of one another and, where it can be, of what is drawn
    frame           from metres in plan to millimetres on the paper, at a round scale
    ground          outline, reference axis, keep-outs, supports and hard points
    pieces          pads, levers and plates as they are drawn in plan
    pressure_map    the net load over the outline as contours, running loads and point loads upon it
    figures_plan    the sheet of the whole rig: pads with their forces, and a panel for each tier
    figures_load    the sheets of the target, and of the load with the pads' shares
    branches        the tree of a plan rig laid out branch by branch, for the sheet of the tree

Everything is drawn in millimetres of the sheet, x to the right, y up, z towards the reader.

Depends on: what the stage report depends on, and its sheets and scales.
"""
