"""The check of the hardware: strength, space and own weight, by a road of its own.

In: a `Check` of the rig and its `Hardware`, that is sizes, places and masses.  Out: a `HardwareCheck`, which holds
every number on steel that anybody is shown: forces with the rig's own weight, all strength checks with their working,
clearances and heights, the steps of the test, and findings.

The builder of the hardware sizes members from loads that it works out itself.  The check never looks at those.  It
hangs every member's mass on the holes as drilled (`own_weight`), takes the jack forces that meet the target best at
each step, and holds every member to the rules at the peak of the test.

    check_hardware(check, hardware)   everything

Depends on: brief, target, pads, levers, hardware (its model, rules, catalogue and balance), checks, findings, words.
"""

from rigdesign.checks.hardware.loads import own_weight
from rigdesign.checks.hardware.model import HardwareCheck, Loads, StrengthRow
from rigdesign.checks.hardware.whole import check_hardware

__all__ = ["HardwareCheck", "Loads", "StrengthRow", "check_hardware", "own_weight"]
