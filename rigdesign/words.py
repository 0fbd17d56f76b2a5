"""Constants that lie under everything: physical ones, and the defaults and floors that more than one stage quotes."""

from __future__ import annotations

STANDARD_GRAVITY = 9.80665
"""Standard acceleration of free fall [m/s²] (exact by definition)."""

INCH = 0.0254
"""An inch [m] (exact by definition)."""

POUND_FORCE = 4.4482216152605
"""A pound of force [N] (exact by definition)."""

LOAD_CELL_FLOOR = 0.0025
"""What a load cell can see, as a fraction of its reading; common practice, a cell of 0.25 %."""

BAND_FLOOR = 0.0005
"""No band is narrower than this fraction of the peak of the target's curve."""

TORSION_ARM = 0.01
"""No torsion band is narrower than the target's resultant at this part of the outline's mean width."""

SMALL_TARGET = 0.05
"""Below this fraction of the target's peak the wider side of a band holds for both."""

DEFAULT_MOMENT_BAND = 0.02
"""Band on the moment where the brief has no [acceptance], as a fraction of the peak; common practice."""

DEFAULT_TORSION_BAND = 0.05
"""Band on the torsion of a surface where the brief has no [acceptance], as a fraction of the peak; common practice."""

DEFAULT_SHARE = 0.25
"""How far a pad's force may be from its tributary share of a panel's load where the brief does not say, of that share;
set here."""

DEFAULT_CLEARANCE = 0.03
"""Least clearance in plan between pieces of one tier where the brief does not say [m]; common practice."""

GRADES = ("S235", "S275", "S355", "6082-T6")
"""Grades of which levers, plates, straps and fittings can be made."""

PIN_GRADES = ("S355", "C45", "42CrMo4")
"""Grades of which pins can be made."""

DEFAULT_DESIGN_FACTOR = 2.0
"""Design factor of BTH-1 where the brief does not say: loads well known (category A)."""

OVER_PEOPLE_DESIGN_FACTOR = 3.0
"""The same over people (category B); it may not be less there."""

DEFAULT_LOAD_FACTOR = 1.5
"""Factor on loads of EN 1993 where the brief does not say; set here."""

DEFAULT_MARK_TOLERANCE = 0.010
"""By how much arms may be changed for fewer different parts where the brief does not say [m]; set here."""

LOAD_STEPS = (0.2, 0.4, 0.6, 0.8, 1.0)
"""Steps of the test, of the brief's load, to which its peak is added; common practice."""

MOST_PADS = 1000
"""No rig and no study goes beyond this many pads; a search for more would take hours."""

LARGEST_NUMBER = 1e15
"""Nothing in a brief is larger than this in its SI unit; products of such numbers can still be worked with."""

SMALLEST_TOTAL = 1e-12
"""A target's total below this [N] is taken for a slip of the pen: no pad and no load cell could bring it."""

ROUNDING = 1e-9
"""A place nearer to zero than this [m], or a part smaller than this, is rounding: it is said to be zero."""

SCHEMA_NUMBER = 1
"""Number of the rig.json layout that this version writes and reads."""
