"""A rig that exists, checked again: `assess`."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from rigdesign.brief.model import Brief
    from rigdesign.checks.model import Check
    from rigdesign.levers.model import Rig


def assess(rig: Rig, holes: Path | None = None, brief: Brief | None = None) -> Check:
    """Return the check of a rig that exists: as it is, with other holes, against another brief's target, or both.

    Parameters
    ----------
    rig
        The rig, as `read_rig` gives it.
    holes
        A table of holes (the layout of holes.csv) to take instead of the rig's own.
    brief
        A brief to take instead of the rig's own: its target, bands and limits.

    Raises
    ------
    TableError
        Where the table of holes cannot be used.
    """
    from rigdesign.checks import check, check_with_holes, recheck

    if brief is not None:
        checked = recheck(rig, brief)
        return check_with_holes(checked.rig, holes) if holes is not None else checked
    return check_with_holes(rig, holes) if holes is not None else check(rig)
