"""Laws of targets in plan: a shifted or a turned plan has the same V, M and T, a mirrored one the other torsion."""

from __future__ import annotations

from dataclasses import replace
from itertools import pairwise

import numpy as np
from factories import LEFT, RIGHT, array
from hypothesis import given, settings
from hypothesis import strategies as st
from plan_targets import KINKED, PLANFORM, line, make_surface, towards
from scipy.integrate import trapezoid

from rigdesign.brief.model import Line, Outline, Specimen
from rigdesign.target.closed import ClosedForm, Elliptical
from rigdesign.target.line_load import LineLoad
from rigdesign.target.plan_load import Direction, PlanLoad, loads_at
from rigdesign.target.plan_points import PlanPoints
from rigdesign.target.plan_stations import smooth_stretches
from rigdesign.target.plan_sum import PlanSum
from rigdesign.target.surface.pressure import pressure_over

# Loads of some 10 kN over some 3 m: rounding of plans shifted by up to 50 m stays far below.
CLOSE = 1e-7
X = np.linspace(LEFT, RIGHT, 23)
CUTS = st.sampled_from(["square to x", "square to axis"])
SEEDS = st.integers(0, 10_000)
SIDES = ("inboard", "outboard")


def load_of(seed: int, place, outline: Outline) -> PlanLoad:
    """Random pressures and forces, each place moved by `place(x, y)`; a pressure map on no grid."""
    from plan_targets import pressure_map

    rng = np.random.default_rng(seed)
    x, y = rng.uniform(LEFT, RIGHT, (2, 12)), rng.uniform(-0.8, 0.3, (2, 12))
    pressure = pressure_over(pressure_map(*place(x[0], y[0]), rng.uniform(-500.0, 2000.0, 12)), outline)
    return PlanSum((pressure, PlanPoints(*place(x[1], y[1]), rng.uniform(-300.0, 900.0, 12))), (1.0, -0.7))


def moved(specimen: Specimen, place) -> Specimen:
    """The specimen with its axis and outline moved; it must still run root to tip along x."""
    axis, edge = specimen.reference_axis, specimen.outline
    x, y = place(axis.x, axis.y)
    return replace(specimen, left=float(x[0]), right=float(x[-1]), axis=Line(array(x), array(y)),
                   outline=Outline(*place(edge.x, edge.y)))  # fmt: skip


def values(load: PlanLoad, specimen: Specimen, x) -> np.ndarray:
    quantities = ("shear", "moment", "torsion")
    return np.array([loads_at(load, specimen, quantity, x, side) for quantity in quantities for side in SIDES])


@settings(max_examples=25, deadline=None)
@given(SEEDS, CUTS, st.floats(-50, 50), st.floats(-50, 50))
def test_a_shifted_plan(seed, cut, by_x, by_y):
    specimen = make_surface(axis=KINKED, cut=cut)

    def shift(x, y):
        return x + by_x, y + by_y

    there = moved(specimen, shift)
    here = values(load_of(seed, lambda x, y: (x, y), PLANFORM), specimen, X[1:-1])
    found = values(load_of(seed, shift, there.outline), there, X[1:-1] + by_x)
    assert np.abs(found - here).max() < CLOSE


@settings(max_examples=25, deadline=None)
@given(SEEDS, st.floats(-35, 50))
def test_a_turned_plan_cut_square_to_its_axis(seed, degrees):
    """Stations move along with the axis; it may turn as long as it still runs outward along x."""
    specimen = make_surface(axis=KINKED, cut="square to axis")
    a_x, a_y = towards(degrees)

    def turn(x, y):
        return x * a_x - y * a_y, x * a_y + y * a_x

    there = moved(specimen, turn)
    stations = X[np.abs(X - KINKED.x[1]) > 1e-3][1:-1]
    here = values(load_of(seed, lambda x, y: (x, y), PLANFORM), specimen, stations)
    found = values(load_of(seed, turn, there.outline), there, turn(stations, KINKED.at(stations))[0])
    assert np.abs(found - here).max() < CLOSE


@settings(max_examples=25, deadline=None)
@given(SEEDS, CUTS)
def test_a_mirrored_plan(seed, cut):
    """y for −y: the same V and M, T turned round."""
    specimen = make_surface(axis=KINKED, cut=cut)

    def mirror(x, y):
        return x, -y

    there = moved(specimen, mirror)
    there = replace(there, outline=Outline(there.outline.x[::-1], there.outline.y[::-1]))
    here = values(load_of(seed, lambda x, y: (x, y), PLANFORM), specimen, X)
    found = values(load_of(seed, mirror, there.outline), there, X)
    assert np.abs(found[:4] - here[:4]).max() < CLOSE
    assert np.abs(found[4:] + here[4:]).max() < CLOSE


@settings(max_examples=40, deadline=None)
@given(st.floats(-180, 180), st.floats(-3, 3), st.floats(-180, 180))
def test_a_turned_line_load_seen_along_a_turned_direction(degrees, slope, seen):
    """A load on a straight line, turned: spread thinner or thicker per x, yet seen along its turned direction it is the
    same (where the line still runs outward along x).
    """
    a_x, a_y = towards(degrees)
    along = np.array([a_x - slope * a_y, a_y + slope * a_x])
    if along[0] < 0.05:
        return
    straight = line((0.0, 0.0), (2.0, 2.0 * slope))
    turned = line((0.0, 0.0), (float(2.0 * along[0]), float(2.0 * along[1])))
    here = LineLoad(ClosedForm(Elliptical(), 0.0, 2.0, 5400.0), straight)
    there = LineLoad(ClosedForm(Elliptical(), 0.0, float(2.0 * along[0]), 5400.0), turned)
    b = towards(seen)
    b_turned = Direction(b.a_x * a_x - b.a_y * a_y, b.a_x * a_y + b.a_y * a_x)
    one, other = here.along(b), there.along(b_turned)
    s = np.linspace(-7.0, 7.0, 30)
    assert np.abs(one.force.moment_beyond(s) - other.force.moment_beyond(s)).max() < CLOSE
    assert abs(one.turning.total - other.turning.total) < CLOSE


@settings(max_examples=25, deadline=None)
@given(SEEDS, CUTS)
def test_moment_has_the_slope_of_shear(seed, cut):
    """dM/ds = −V along a straight axis, s along the cut's own direction."""
    specimen = make_surface(cut=cut)
    axis = specimen.reference_axis
    stretch = 1.0 if cut == "square to x" else float(np.hypot(np.diff(axis.x), np.diff(axis.y))[0] / np.diff(axis.x)[0])
    load = load_of(seed, lambda x, y: (x, y), PLANFORM)
    ends = smooth_stretches(load, specimen, "moment")
    for start, end in pairwise(ends):
        x = np.linspace(start, end, 201)
        shear = loads_at(load, specimen, "shear", x, "outboard")
        shear[-1] = loads_at(load, specimen, "shear", x[-1:], "inboard")[0]
        fall = loads_at(load, specimen, "moment", x[:1], "outboard")[0]
        fall -= loads_at(load, specimen, "moment", x[-1:], "inboard")[0]
        # of the trapezoid rule, on moments of some thousand N·m
        assert abs(fall - trapezoid(shear, x) * stretch) < 0.05
