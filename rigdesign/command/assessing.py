"""A rig that exists, checked again with its hardware where it has any."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from rigdesign import chain

if TYPE_CHECKING:
    from pathlib import Path

    from rigdesign.brief.model import Brief
    from rigdesign.checks.hardware.model import HardwareCheck
    from rigdesign.checks.model import Check
    from rigdesign.hardware.model import Hardware
    from rigdesign.levers.model import Rig


def assessed(rig: Rig, hardware: Hardware | None, holes: Path | None, brief: Brief | None) -> HardwareCheck | Check:
    """Return the check of a rig as it is, with other holes, or against another brief; of its steel too where known.

    The steel stays as it is, whatever the brief: its strength, space and weight are what is checked.

    Raises
    ------
    TableError
        Where the table of holes cannot be used.
    """
    check = chain.assess(rig, holes, brief)
    if hardware is None:
        return check
    from rigdesign.checks.hardware import check_hardware

    return check_hardware(check, replace(hardware, rig=check.rig))
