"""A rig that exists, checked again: `assess`."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING, overload

if TYPE_CHECKING:
    from rigdesign.brief.model import Brief
    from rigdesign.checks.hardware.model import HardwareCheck
    from rigdesign.checks.model import Check
    from rigdesign.hardware.model import Hardware
    from rigdesign.levers.model import Rig


@overload
def assess(rig: Rig, holes: Path | None = None, brief: Brief | None = None, hardware: None = None) -> Check: ...


@overload
def assess(rig: Rig, holes: Path | None = None, brief: Brief | None = None, *, hardware: Hardware) -> HardwareCheck: ...


def assess(
    rig: Rig, holes: Path | None = None, brief: Brief | None = None, hardware: Hardware | None = None
) -> HardwareCheck | Check:
    """Return the check of a rig that exists: as it is, with other holes, against another brief's target, or both.

    Parameters
    ----------
    rig
        The rig, as `read_rig` gives it.
    holes
        A table of holes (the layout of holes.csv) to take instead of the rig's own.
    brief
        A brief to take instead of the rig's own: its target, bands and limits.
    hardware
        The rig's hardware, as `read_rig_with_hardware` gives it, to be checked as well.  It stays as it is, whatever
        the brief: its strength, space and weight are what is checked.

    Raises
    ------
    TableError
        Where the table of holes cannot be used.
    """
    from rigdesign.checks import check, check_with_holes, recheck

    if brief is not None:
        checked = recheck(rig, brief)
        result = check_with_holes(checked.rig, holes) if holes is not None else checked
    else:
        result = check_with_holes(rig, holes) if holes is not None else check(rig)
    if hardware is None:
        return result
    from rigdesign.checks.hardware import check_hardware

    return check_hardware(result, replace(hardware, rig=result.rig))
