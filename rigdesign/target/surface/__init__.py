"""Loads over an area: pressure maps on a specimen with an outline.

What comes in: a `PressureLoad` and the specimen's outline.
What goes out: a `Pressure`, a load in plan like all others.
Depends on: brief (its data model), errors, the curves and plan loads of the target stage; shapely, scipy.

Words
    map             points in plan with a pressure each
    covered area    the area that the points span; beyond it each place has the value of its nearest place
    pieces          convex parts of the plan, a linear pressure on each, which together cover the outline
    strip           what lies between two neighbouring cuts of one direction

How
    mesh            points become triangles with a linear pressure, and pieces that carry it on beyond them
    clip            pieces are cut off at the outline and taken apart into triangles
    strips          triangles seen along a direction: polynomials between the cuts through their corners
    pressure        the load itself
"""
