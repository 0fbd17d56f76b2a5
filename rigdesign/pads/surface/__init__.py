"""Pads in plan: where they can stand, what is theirs of the load, which are chosen, and what rules them all out.

    footprints  the rectangle of a pad, turned; which pads keep the gap
    room        where a pad may stand, as an area
    places      which of the brief's places can be used; candidates and nearest places for free pads
    fitting     how many can fit
    shares      each pad's tributary share of the load
    spread      whether places surround a point, or stand in one line
    refusals    which limit leaves no pads at all
    remarks     places in one line where torsion has a band
    ground      what the room and other pads leave a free pad that moves
    moving      how errors change as pads move
    refine      places and forces moved together
    starts      where free pads set out from
    free        the search for free pads
    line_bounds what no pads in plan can do better than

Depends on: brief, target, the pads stage's own model and limits, display, findings.  shapely is imported when it is
used, so that a line rig does not wait for it.
"""
