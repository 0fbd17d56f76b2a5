"""Checked hardware for tests of what comes after the check: a line rig and a surface, made by hand, unequal throughout.

Import with ``from hand_results import line_result``.
"""

from __future__ import annotations

from dataclasses import replace
from functools import cache

import numpy as np
from factories import make_brief, make_hardware, make_pads
from hand_hardware import make_hardware_for
from hand_plan_rigs import make_plan_rig, plan_brief
from hand_rigs import make_rig

from rigdesign.checks import check
from rigdesign.checks.hardware import check_hardware
from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.hardware.model import Hardware

PAD_X = (0.31, 0.9, 1.72, 2.3, 2.9)
PAD_FORCE = (410.0, 520.0, 333.0, 250.0, 170.0)


def result_of(hardware: Hardware) -> HardwareCheck:
    """The check of hardware and of its rig."""
    return check_hardware(check(hardware.rig), hardware)


@cache
def line_result(build: str = "twin flats", links: str = "rod") -> HardwareCheck:
    """Five pads on four levers, with a counterweight, at a peak of 150 %; the bands are far too narrow for it."""
    brief = make_brief(pads=make_pads(count=5), hardware=make_hardware(headroom=2.5), peak=1.5)
    rig = make_rig(PAD_X, PAD_FORCE, brief)
    return result_of(make_hardware_for(rig, build, links, counterweights={"lever 2": {"A": 3.1}}, pad_mass=1.3))


@cache
def plan_result(build: str = "twin flats", links: str = "rod") -> HardwareCheck:
    """Five pads of a surface on two levers and a three-point plate."""
    rig = make_plan_rig(
        [0.5, 0.9, 1.4, 2.1, 2.6], [0.1, -0.3, 0.05, -0.2, -0.5], [310.0, 220.0, 260.0, 140.0, 90.0],
        brief=plan_brief(), group=((1, 2), (3, 4, 5)),
    )  # fmt: skip
    return result_of(make_hardware_for(rig, build, links))


def alike(result: HardwareCheck, *names: str) -> HardwareCheck:
    """The result with members that share the first one's mark."""
    marks = dict(result.hardware.marks)
    marks |= dict.fromkeys(names, marks[names[0]])
    return replace(result, hardware=replace(result.hardware, marks=marks))


def steel_weight(result: HardwareCheck) -> float:
    """All that hangs on the cells [N]."""
    return 9.80665 * float(np.sum([mass.mass for mass in result.hardware.masses.values()]))
