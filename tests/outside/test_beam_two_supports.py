"""Shear and moment of targets on two supports with overhangs.

Sources
-------
sympy's `sympy.physics.continuum_mechanics.beam.Beam`, which solves for the reactions and integrates by singularity
functions, and anastruct, a general plane-frame solver; both are packages for the tests only.
Least greatest moment under a uniform load, supports 0.2071 L from the ends: Hicks, T. G., *Civil Engineering Formulas*,
Table 2.3; exactly a = (√2 − 1) L/2.

Signs.  sympy's beam counts loads downward when positive, so ours go in with their sign turned; its shear is then minus
ours and its bending moment is ours: V = Σ F and M = Σ F (x_i − x), everything outboard of the station.
"""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest
import sympy as sp
from factories import make_brief, point_loads, shape_load, table_load, two_supports
from scipy.optimize import minimize_scalar
from sympy.physics.continuum_mechanics.beam import Beam

from rigdesign.target import build_target
from rigdesign.target.internal import reactions

LENGTH, A, B = 7.2, 0.9, 5.6
POINTS = [(0.3, -420.0), (2.6, 900.0), (6.8, -1300.0)]
START, END = 2.0, 6.5  # of the linear load
W_START, W_END = -400.0, -2200.0
UNIFORM = -3500.0

SPECIMEN = two_supports(0.0, A, B, LENGTH)
LOADS = (
    shape_load("uniform", UNIFORM * LENGTH, start_x=0.0, end_x=LENGTH),
    shape_load("linear", None, start=W_START, end=W_END, start_x=START, end_x=END),
    point_loads([x for x, _ in POINTS], [f for _, f in POINTS]),
)
STATIONS = np.array([0.11, 0.7, 1.3, 2.31, 3.0, 4.4, 5.2, 5.9, 6.63, 7.05])


@pytest.fixture(scope="module")
def by_sympy():
    """Reactions, V and M as functions, our signs: +z is sympy's upward, so loads go in turned."""
    ra, rb, x = sp.symbols("ra rb x")
    number = sp.Rational
    beam = Beam(number(str(LENGTH)), 1, 1, variable=x)
    a, b = number(str(A)), number(str(B))
    beam.apply_load(-ra, a, -1)
    beam.apply_load(-rb, b, -1)
    beam.apply_load(number(str(-UNIFORM)), 0, 0)
    start, end = number(str(START)), number(str(END))
    slope = number(str(W_END - W_START)) / (end - start)
    beam.apply_load(-number(str(W_START)), start, 0, end=end)
    beam.apply_load(-slope, start, 1, end=end)
    for at, force in POINTS:
        beam.apply_load(-number(str(force)), number(str(at)), -1)
    beam.bc_deflection = [(a, 0), (b, 0)]
    beam.solve_for_reaction_loads(ra, rb)
    found = beam.reaction_loads
    return float(found[ra]), float(found[rb]), beam.shear_force(), beam.bending_moment(), x


def _values(expression, symbol, stations):
    """Evaluate singularity functions away from their jumps."""
    plain = expression.rewrite(sp.Piecewise)
    return np.array([float(plain.subs(symbol, sp.Rational(str(s)))) for s in stations])


def test_against_sympy(by_sympy):
    ra, rb, shear, moment, x = by_sympy
    target = build_target(make_brief(specimen=SPECIMEN, loads=LOADS))
    at, force = reactions(SPECIMEN, target.total.total, target.total.first_moment)
    assert at.tolist() == [A, B]
    assert force == pytest.approx([ra, rb], rel=1e-12)
    scale_v, scale_m = target.shear_peak, target.moment_peak
    assert target.shear(STATIONS, "outboard") == pytest.approx(-_values(shear, x, STATIONS), abs=1e-12 * scale_v)
    assert target.moment(STATIONS) == pytest.approx(_values(moment, x, STATIONS), abs=1e-12 * scale_m)


def test_point_loads_against_a_frame_solver():
    from anastruct import SystemElements

    stations = sorted({0.0, A, B, LENGTH, *(x for x, _ in POINTS)})
    frame = SystemElements(EA=1e9, EI=1e5)
    for start, end in pairwise(stations):
        frame.add_element(location=[[start, 0.0], [end, 0.0]])
    frame.add_support_hinged(stations.index(A) + 1)
    frame.add_support_roll(stations.index(B) + 1)
    for at, force in POINTS:
        frame.point_load(stations.index(at) + 1, Fy=force)
    frame.solve()

    target = build_target(make_brief(specimen=SPECIMEN, loads=LOADS[2:]))
    at, force = reactions(SPECIMEN, target.total.total, target.total.first_moment)
    # The solver's node results hold what the nodes do to the supports: our reactions turned.
    solved = [frame.get_node_results_system(stations.index(x) + 1)["Fy"] for x in at]
    assert np.abs(force) == pytest.approx(np.abs(solved), rel=1e-6)  # a stiffness solution, not a closed form
    for i in range(1, len(stations)):
        element = frame.get_element_results(element_id=i, verbose=True)
        middle = np.array([(stations[i - 1] + stations[i]) / 2])
        assert abs(target.shear(middle, "outboard")[0]) == pytest.approx(
            abs(float(np.mean(element["Q"]))), abs=1e-6 * target.shear_peak
        )
        ends = target.moment(np.array(stations[i - 1 : i + 1]))
        solved_ends = np.array([element["M"][0], element["M"][-1]])
        assert np.abs(ends) == pytest.approx(np.abs(solved_ends), abs=1e-6 * target.moment_peak)


def test_least_greatest_moment_of_a_uniform_beam():
    """0.2071 L: found by moving the supports, and the moment over them equal to that between them."""
    length, total = 6.0, -9000.0

    def greatest(overhang):
        specimen = two_supports(0.0, overhang, length - overhang, length)
        load = shape_load("uniform", total, start_x=0.0, end_x=length)
        return build_target(make_brief(specimen=specimen, loads=(load,))).moment_peak

    best = minimize_scalar(greatest, bounds=(0.5, 2.5), method="bounded", options={"xatol": 1e-10})
    assert best.x / length == pytest.approx(0.2071, abs=5e-5)  # the source's digits
    assert best.x / length == pytest.approx((np.sqrt(2) - 1) / 2, abs=1e-7)  # the kink of a minimum, not its bottom
    assert greatest(best.x) == pytest.approx(abs(total) * best.x**2 / length / 2, rel=1e-6)


def test_nothing_is_left_beyond_either_end():
    table = table_load([0.4, 3.0, 3.0, 6.9], [-120.0, -800.0, -300.0, 260.0])
    target = build_target(make_brief(specimen=SPECIMEN, loads=(table, *LOADS)))
    ends = np.array([0.0, LENGTH])
    assert target.shear(ends[:1], "inboard")[0] == pytest.approx(0.0, abs=1e-12 * target.shear_peak)
    assert target.moment(ends) == pytest.approx([0.0, 0.0], abs=1e-12 * target.moment_peak)
