"""Stage: target.

What comes in: a `Brief` (SI, tables read, validated).
What goes out: a `Target`: the load that the specimen must feel, exact along the span and in plan, what gravity already
brings of it, what the pads bring, the peaks of its internal loads, and remarks.  `rigdesign.target.words.echo` says it
in sentences before anything is designed.
Depends on: brief (its data model), display, errors, findings, words.

Words
    running load w      [N/m] at a station x, positive along +z
    point load          [N] at a station; w does not hold it
    curve               a load along the span that integrates itself exactly (`Curve`): w, the force and the first
                        moment beyond any station, its breaks and point loads
    total, gravity, net what the specimen must feel, what its weight brings, and their difference: what the pads bring
    projection          a load in plan seen along a direction (`PlanLoad.along`): its force and what it turns, both over
                        s, the distance along the direction
    side                at a jump, the value just inboard or just outboard of the station

Shear and moment follow the cut square to x: everything outboard of the station counts,

    V(x) = ∫ dF(s),    M(x) = ∫ (s − x) dF(s)    over s > x,

and on two supports their reactions count as well.  dM/dx = −V and dV/dx = −w.  A positive load on a cantilever gives
positive V and M; between two supports M is negative.  In plan, torsion and cuts square to the axis are those of `cuts`.

How
    loads            one [[load]] of the brief, or the weight, becomes a curve
    polynomial       tables, straight lines, parabolas: quadratic pieces counted from their outboard ends
    closed           elliptical, power and sine, written so that nothing cancels near the tip
    internal_table   the load behind a table of V and M: a cubic through M with slope −V between the rows
    sums             point loads; multiples and sums of curves (everything is linear, nothing is sampled)
    internal         V and M of a curve, reactions included
    cuts             where a surface is cut, and what a force anywhere in plan, or a support, brings to a cut
    plan_load        what a load in plan can tell about itself (`PlanLoad`), and V, M and T of it at any station
    plan_stretch,
    line_load        running loads along lines
    plan_points      forces in plan, pads among them
    torque           running torques and couples
    surface          pressure maps
    plan_sum         multiples and sums of loads in plan
    plan_loads       one [[load]] of the brief, or the weight, as a load in plan
    plan_stations    where the internal loads of a load in plan are smooth, and where they are largest
    peaks            largest |V| and |M|, and where a load changes sign, to rounding
    bands            the accepted error as two widths at every station
    table_remarks,
    plan_remarks,
    remarks          what is odd: contradicting tables, envelopes, loads of both signs, uplift, slips of unit or sign
    plan_words,
    words            the target in sentences

Accuracy: all curves are closed forms or exact integrals of what the brief says; force and first moment are summed from
the tip, so that values near it keep their relative accuracy (about 1e-12) and a percentage of a local value means
something.  Pressure maps are exact to 1e-9 of what their pressures add up to.
Nothing is repaired: what a curve leaves out of a table (a couple, which forces cannot make) is a finding.
"""

from rigdesign.target.build import build_target
from rigdesign.target.model import Target

__all__ = ["Target", "build_target"]
