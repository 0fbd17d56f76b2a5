"""Strength rules: what a member may bear under ASME BTH-1, EN 1993 or AISC 360.

In: the state of one member (`rules.model`: a lever's bar, a hole, a pin, a rod, a strap, webbing, a plate), loads as
magnitudes without any design factor.  Out: a `Result` for every check, with its clause and its working in the source's
own symbols.  One pure function a check; `rule_set` gathers those of the rules that the brief chooses.

A utilisation of 1 or less passes.  A state that cannot be (no steel left beside a hole, a pin larger than its hole)
gives an infinite one; a negative load is a ValueError.

Depends on: brief.model_hardware, hardware.model.
"""

from __future__ import annotations

from rigdesign.brief.model_hardware import HardwareRules
from rigdesign.hardware.rules.model import RuleSet


def rule_set(hardware: HardwareRules) -> RuleSet:
    """Return the rules that the brief chooses, with its design factor (BTH-1) or its factor on loads (EN 1993).

    AISC 360 has safety factors of its own.

    Raises
    ------
    ValueError
        Where the rules are none of these.
    """
    # each set is imported when it is used: a run needs one of them
    if hardware.rules == "BTH-1":
        from rigdesign.hardware.rules.bth import Bth

        return Bth(hardware.design_factor)
    if hardware.rules == "EN 1993":
        from rigdesign.hardware.rules.en import En

        return En(hardware.load_factor)
    if hardware.rules == "AISC 360":
        from rigdesign.hardware.rules.aisc import Aisc

        return Aisc()
    raise ValueError(f"no rules called {hardware.rules!r}")
