"""One wing described four ways: its pressure, running load and line, table of V, M and T, running load and torque.

The wing has a constant chord c and is swept; its pressure is p0 (1 − (x/L)²) · 2 (1 − η), η the distance behind the
leading edge over the chord.  Strip by strip that is a parabolic running load p0 c (1 − (x/L)²) a third of the chord
behind the leading edge.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from factories import array, internal_load, shape_load
from plan_targets import line, outline, pressure_map, surface_target, torque_load

from rigdesign.brief.model import InternalLoad
from rigdesign.target import Target

SPAN, CHORD, P0 = 3.0, 0.8, 900.0
WING = outline((0.0, -0.5), (SPAN, -1.1), (SPAN, -0.3), (0.0, 0.3))
AXES = {"straight": line((0.0, 0.05), (SPAN, -0.4)), "kinked": line((0.0, 0.05), (1.2, -0.02), (SPAN, -0.5))}
TOTAL = P0 * CHORD * SPAN * 2.0 / 3.0


def loaded(*loads, axis) -> Target:
    return surface_target(*loads, outline=WING, axis=axis, left=0.0, right=SPAN)


def lead(x):
    """Where the running load acts: a third of the chord behind the leading edge."""
    return 0.3 - 0.2 * x - CHORD / 3.0


def by_pressure(axis) -> Target:
    x, eta = (a.ravel() for a in np.meshgrid(np.linspace(0, SPAN, 121), np.linspace(0, 1, 21), indexing="ij"))
    pressure = P0 * (1.0 - (x / SPAN) ** 2) * 2.0 * (1.0 - eta)
    return loaded(pressure_map(x, 0.3 - 0.2 * x - CHORD * eta, pressure), axis=axis)


def by_line(axis) -> Target:
    load = replace(
        shape_load("parabolic", TOTAL, start_x=0.0, end_x=SPAN), line=line((0.0, lead(0.0)), (SPAN, lead(SPAN)))
    )
    return loaded(load, axis=axis)


def table(axis, rows: int) -> InternalLoad:
    """V, M and T as the stress office would print them, from the closed forms with t = L − x."""
    x = np.linspace(0.0, SPAN, rows)
    w = P0 * CHORD
    shear = w * (2.0 * SPAN / 3.0 - x + x**3 / (3.0 * SPAN**2))
    moment = w * (SPAN**2 / 4.0 - 2.0 * SPAN * x / 3.0 + x**2 / 2.0 - x**4 / (12.0 * SPAN**2))
    # the line is straight, so ∫ lead dF = lead(x) V − 0.2 M
    torsion = (lead(x) - axis.at(x)) * shear - 0.2 * moment
    return replace(internal_load(x, shear, moment), torsion=array(torsion))


def by_table(axis) -> Target:
    return loaded(table(axis, 61), axis=axis)


def by_torque(axis) -> Target:
    x = np.linspace(0.0, SPAN, 121)
    torque = P0 * CHORD * (1.0 - (x / SPAN) ** 2) * (lead(x) - axis.at(x))
    return loaded(shape_load("parabolic", TOTAL, start_x=0.0, end_x=SPAN), torque_load(x, torque), axis=axis)
