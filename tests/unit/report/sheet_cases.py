"""Rigs with hardware by hand, checked, for tests of the drawings: lines of pads, surfaces with levers and plates."""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from typing import Any

import hand_plan_rigs
import numpy as np
from factories import make_brief, make_pads
from hand_hardware import make_hardware_for
from hand_rigs import make_rig

from rigdesign.brief.model import Brief
from rigdesign.checks import check
from rigdesign.checks.hardware import check_hardware
from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.findings import Finding
from rigdesign.levers.model import Rig


def line_rig(count: int, brief: Brief | None = None, sign: float = 1.0) -> Rig:
    """Pads at unequal distances with unequal forces on a cantilever of 3.2 m, grouped by halves."""
    brief = brief or make_brief(pads=make_pads(count=count, length=min(0.12, 2.6 / count)))
    steps = np.arange(count)
    x = np.linspace(0.32, 3.3, count) + 0.02 * np.sin(7 * steps) if count > 1 else np.array([1.4])
    force = 1.4 - 0.9 * steps / max(count - 1, 1)
    return make_rig(x, sign * 5400.0 * force / force.sum(), brief)


def plan_rig(columns: int, rows: int, group: Any = None) -> Rig:
    """Pads in columns and rows of a swept wing, hung on levers and, where the group has threes, plates."""
    x = np.repeat(np.linspace(0.4, 3.1, columns), rows)
    part = (x - 0.2) / 3.2
    across = np.tile(np.linspace(-0.35, 0.35, rows), columns)
    y = across * (1 - 0.4 * part) - 0.3 * part
    force = 900.0 * (1.3 - 0.8 * part) * (1 + 0.2 * y)
    return hand_plan_rigs.make_plan_rig(x, y, force, hand_plan_rigs.plan_brief(title="Rudder $x_1$ & blade"), group)


PLATES = (((1, 2, 4), (3, 5, 6)), ((7, 8, 10), (9, 11, 12)))
"""Twelve pads in four columns of three on four plates and three levers."""


def checked(rig: Rig, accepted: bool | None = None, **changes: Any) -> HardwareCheck:
    """The answer for a rig; `accepted` forces the verdict, whatever the check says."""
    result = check_hardware(check(rig), make_hardware_for(rig, **changes))
    kept = tuple(finding for finding in result.findings if finding.severity != "failure")
    if accepted:
        quiet = replace(result.check, regions=(), findings=())
        return replace(result, check=quiet, findings=kept)
    if accepted is False:
        failure = Finding("space", "failure", "lever 1", "fouls lever 2 when turned", number=9)
        return replace(result, findings=(*kept, failure))
    return result


@cache
def case(name: str) -> HardwareCheck:
    """Return a named case; each is made once."""
    kind, _, count = name.partition(" ")
    if kind == "line":
        return checked(line_rig(int(count)), accepted=True)
    if kind == "plates":
        return checked(plan_rig(4, 3, PLATES), accepted=False)
    if kind == "surface":
        return checked(plan_rig(int(count) // 2, 2), accepted=True)
    if kind == "channels":
        return checked(line_rig(5), accepted=True, build="twin channels", links="strap")
    if kind == "hollow":
        return checked(line_rig(7), accepted=False, build="hollow section", links="webbing")
    if kind == "below":
        return checked(line_rig(6, sign=-1.0), accepted=True)
    raise KeyError(name)
