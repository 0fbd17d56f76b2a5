"""Curves: exact integrals, sides at jumps, and relative accuracy near the tip."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from factories import LEFT, RIGHT, make_specimen, point_loads, shape_load, table_load
from scipy.integrate import quad

from rigdesign.errors import BriefError
from rigdesign.target.closed import ClosedForm, Elliptical, Power, Sine
from rigdesign.target.internal import points_beyond
from rigdesign.target.loads import load_curve
from rigdesign.target.polynomial import Polynomials
from rigdesign.target.sums import NO_CURVE, Combined, Points

A, B, TOTAL = 0.7, 3.1, -730.0
CHORD = {"chord_x": np.array([0.2, 1.9, 3.4]), "chord": np.array([1.4, 1.1, 0.3])}
SHAPES = [
    shape_load("uniform", TOTAL, start_x=A, end_x=B),
    shape_load("linear", None, start=-120.0, end=410.0, start_x=A, end_x=B),
    shape_load("triangular", TOTAL, start_x=A, end_x=B),
    shape_load("triangular", TOTAL, greatest="tip", start_x=A, end_x=B),
    shape_load("elliptical", TOTAL, start_x=A, end_x=B),
    shape_load("parabolic", TOTAL, start_x=A, end_x=B),
    shape_load("power", TOTAL, exponent=0.0, start_x=A, end_x=B),
    shape_load("power", TOTAL, exponent=0.4, start_x=A, end_x=B),
    shape_load("power", TOTAL, exponent=3.7, start_x=A, end_x=B),
    shape_load("sine", TOTAL, start_x=A, end_x=B, times=-1.5),
    shape_load("schrenk", TOTAL, start_x=A, end_x=B, **CHORD),
    table_load([A, 1.3, 1.3, 2.0, B], [100.0, 300.0, -50.0, 20.0, 160.0], times=2.0),
]
IDS = [f"{getattr(load, 'shape', 'table')} {i}" for i, load in enumerate(SHAPES)]


def _running(load, x):
    """The formulas of the shapes, written anew."""
    if not hasattr(load, "shape"):
        i = np.searchsorted(load.x, x, side="right") - 1
        part = (x - load.x[i]) / (load.x[i + 1] - load.x[i])
        return load.times * (load.load[i] + part * (load.load[i + 1] - load.load[i]))
    xi = (x - A) / (B - A)
    unit = {
        "uniform": (lambda: 1.0, 1.0),
        "triangular": (lambda: xi if load.greatest == "tip" else 1 - xi, 0.5),
        "elliptical": (lambda: np.sqrt(1 - xi**2), np.pi / 4),
        "parabolic": (lambda: 1 - xi**2, 2 / 3),
        "power": (lambda: (1 - xi) ** load.exponent, 1 / (1 + load.exponent)),
        "sine": (lambda: np.sin(np.pi * xi), 2 / np.pi),
    }
    if load.shape == "linear":
        return load.start + xi * (load.end - load.start)
    if load.shape == "schrenk":
        chord, at_ends = np.interp(x, load.chord_x, load.chord), np.interp([A, B], load.chord_x, load.chord)
        area = (at_ends[0] + 1.1) / 2 * (1.9 - A) + (1.1 + at_ends[1]) / 2 * (B - 1.9)
        return TOTAL / 2 * (chord / area + np.sqrt(1 - xi**2) / (np.pi / 4 * (B - A)))
    shape, area = unit[load.shape]
    return load.times * load.total * shape() / (area * (B - A))


@pytest.mark.parametrize("load", SHAPES, ids=IDS)
def test_running_force_and_moment_against_quadrature(load):
    curve = load_curve(load, make_specimen())
    kinks = [1.3, 1.9, 2.0]
    for x in (A, 1.07, 1.62, 2.45, 3.05):
        inside = [k for k in kinks if k > x]
        force = quad(lambda s: _running(load, s), x, B, points=inside or None, epsabs=1e-11, limit=200)[0]
        moment = quad(lambda s, at=x: _running(load, s) * (s - at), x, B, points=inside or None, epsabs=1e-11)[0]
        at = np.array([x])
        assert curve.running(at, "outboard")[0] == pytest.approx(_running(load, x), rel=1e-12)
        assert curve.force_beyond(at, "outboard")[0] == pytest.approx(force, rel=1e-9, abs=1e-8)  # of the quadrature
        assert curve.moment_beyond(at)[0] == pytest.approx(moment, rel=1e-9, abs=1e-8)


@pytest.mark.parametrize("load", SHAPES, ids=IDS)
def test_no_load_beyond_the_ends(load):
    curve = load_curve(load, make_specimen())
    before, after = np.array([0.1]), np.array([B, 3.3])
    for side in ("inboard", "outboard"):
        assert curve.running(before, side)[0] == 0.0
        assert curve.force_beyond(before, side)[0] == pytest.approx(curve.total, rel=1e-14)
        assert curve.force_beyond(after, side).tolist() == [0.0, 0.0]
    assert curve.moment_beyond(after).tolist() == [0.0, 0.0]
    # a lever arm longer by the distance, and about x = 0
    assert curve.moment_beyond(before)[0] == pytest.approx(curve.first_moment - 0.1 * curve.total, rel=1e-13)
    assert curve.running(np.array([A]), "inboard")[0] == 0.0
    assert curve.running(np.array([B]), "outboard")[0] == 0.0


@pytest.mark.parametrize("load", SHAPES[:11], ids=IDS[:11])
def test_a_shape_carries_its_total(load):
    total = (load.total if load.total is not None else (load.start + load.end) / 2 * (B - A)) * load.times
    assert load_curve(load, make_specimen()).total == pytest.approx(total, rel=1e-14)


@pytest.mark.parametrize("distance", [0.9, 0.3, 1e-2, 1e-4, 1e-7, 1e-10])
@pytest.mark.parametrize("form", [Elliptical(), Power(0.0), Power(0.4), Power(2.5), Sine()], ids=repr)
def test_relative_accuracy_near_the_tip(form, distance):
    """Forty digits against ours: the same to 1e-13 of the value itself, however small it is."""
    with mpmath.workdps(60):
        s = mpmath.mpf(distance)
        shape = {
            Elliptical: lambda u: mpmath.sqrt(u * (2 - u)),
            Power: lambda u: u ** mpmath.mpf(getattr(form, "exponent", 0)),
            Sine: lambda u: mpmath.sin(mpmath.pi * u),
        }[type(form)]
        nodes = [0, s / 1000, s / 10, s]
        first = mpmath.quad(shape, nodes)
        second = mpmath.quad(lambda u: shape(u) * (s - u), nodes)
    at = np.array([distance])
    assert form.value(at)[0] == pytest.approx(float(shape(s)), rel=1e-13, abs=0)
    assert form.first(at)[0] == pytest.approx(float(first), rel=1e-13, abs=0)
    assert form.second(at)[0] == pytest.approx(float(second), rel=1e-13, abs=0)


def test_series_and_closed_form_meet():
    """On both sides of the angle where one takes over from the other: no step beyond the slope's own."""
    for form, s in ((Elliptical(), 1 - np.cos(0.8)), (Sine(), 1.6 / np.pi)):
        near = s * (1 + np.array([-1e-9, 1e-9]))
        step = float(np.diff(near)[0])
        assert np.diff(form.first(near))[0] == pytest.approx(step * form.value(near)[0], rel=1e-6)
        assert np.diff(form.second(near))[0] == pytest.approx(step * form.first(near)[0], rel=1e-6)


def test_table_near_its_tip():
    """The last millimetre of a million times larger load: a triangle's own force and moment, to rounding."""
    curve = Polynomials.from_table(np.array([0.0, 5.0, 6.0]), np.array([1e6, 1e6, 0.0]))
    t = 2.0**-10  # 6 − t and its difference from 6 are exact
    at = np.array([6.0 - t])
    assert curve.force_beyond(at, "inboard")[0] == pytest.approx(1e6 * t**2 / 2, rel=1e-15, abs=0)
    assert curve.moment_beyond(at)[0] == pytest.approx(1e6 * t**3 / 6, rel=1e-15, abs=0)


def test_sides_of_a_jump_in_a_table():
    curve = load_curve(table_load([1.0, 2.0, 2.0, 3.0], [10.0, 40.0, -5.0, 25.0]), make_specimen())
    at = np.array([1.0, 2.0, 3.0])
    assert curve.running(at, "inboard").tolist() == [0.0, 40.0, 25.0]
    assert curve.running(at, "outboard").tolist() == [10.0, -5.0, 0.0]
    assert curve.force_beyond(at, "inboard").tolist() == [35.0, 10.0, 0.0]
    assert curve.breaks.tolist() == [1.0, 2.0, 3.0]


def test_point_loads_count_on_their_inboard_side():
    curve = load_curve(point_loads([2.5, 0.6, 2.5], [300.0, -80.0, 45.0], times=2.0), make_specimen())
    at = np.array([0.6, 1.0, 2.5, 3.0])
    assert curve.force_beyond(at, "inboard").tolist() == [530.0, 690.0, 690.0, 0.0]
    assert curve.force_beyond(at, "outboard").tolist() == [690.0, 690.0, 0.0, 0.0]
    assert curve.moment_beyond(at) == pytest.approx([690 * 1.9, 690 * 1.5, 0.0, 0.0], rel=1e-14)
    assert [part.tolist() for part in curve.points] == [[0.6, 2.5], [-160.0, 690.0]]
    assert (curve.total, curve.first_moment) == (530.0, pytest.approx(690 * 2.5 - 160 * 0.6))


def test_points_beyond_keeps_small_moments():
    """Far from the origin the moment next to the outermost load is still that load times the distance."""
    at, force = np.array([4096.0, 1000.0]), np.array([7.0, 1e6])
    shear, moment = points_beyond(np.array([4096.0 - 2.0**-20]), at, force, "inboard")
    assert (shear[0], moment[0]) == (7.0, 7.0 * 2.0**-20)


def test_sums_and_multiples():
    rng = np.random.default_rng(5)
    parts = tuple(load_curve(load, make_specimen()) for load in (*SHAPES, point_loads([1.3, 2.2], [50.0, -20.0])))
    factors = tuple(rng.uniform(-2, 2, len(parts)))
    whole = Combined(parts, factors)
    x = np.sort(rng.uniform(LEFT, RIGHT, 31))
    for method in ("running", "force_beyond"):
        each = [f * getattr(part, method)(x, "inboard") for part, f in zip(parts, factors, strict=True)]
        assert getattr(whole, method)(x, "inboard") == pytest.approx(np.sum(each, axis=0), rel=1e-12, abs=1e-9)
    each = [f * part.moment_beyond(x) for part, f in zip(parts, factors, strict=True)]
    assert whole.moment_beyond(x) == pytest.approx(np.sum(each, axis=0), rel=1e-12, abs=1e-9)
    assert whole.total == pytest.approx(sum(f * p.total for p, f in zip(parts, factors, strict=True)))
    assert whole.breaks.tolist() == [A, 1.3, 1.9, 2.0, 2.2, B]
    assert whole.points[1] == pytest.approx([factors[-1] * 50.0, factors[-1] * -20.0])


def test_no_load_at_all():
    x = np.array([0.5, 2.0])
    assert NO_CURVE.total == 0.0
    assert NO_CURVE.first_moment == 0.0
    assert NO_CURVE.breaks.size == 0
    assert NO_CURVE.points[0].size == 0
    assert NO_CURVE.force_beyond(x, "inboard").tolist() == [0.0, 0.0]


def test_a_million_rows():
    x = np.linspace(LEFT, RIGHT, 1_000_001)
    curve = Polynomials.from_table(x, 500.0 + 100.0 * np.sin(3 * x))
    exact = 500 * (RIGHT - LEFT) - 100 / 3 * (np.cos(3 * RIGHT) - np.cos(3 * LEFT))
    assert curve.total == pytest.approx(exact, rel=1e-11)  # a million sums: 1e-16 each


def test_gathered_adds_up_and_sorts():
    points = Points.gathered(np.array([3.0, 1.0, 3.0]), np.array([5.0, 2.0, -1.0]))
    assert (points.x.tolist(), points.force.tolist()) == ([1.0, 3.0], [2.0, 4.0])


@pytest.mark.parametrize(
    ("load", "words"),
    [
        (shape_load("schrenk", chord_x=np.array([0.5, 3.4]), chord=np.array([1.0, 0.5])), "does not cover its load"),
        (shape_load("schrenk", chord_x=np.array([0.2, 3.4]), chord=np.array([1.0, -0.5])), "a chord is negative"),
        (shape_load("schrenk", chord_x=np.array([0.2, 3.4]), chord=np.array([0.0, 0.0])), "no area"),
        (table_load([1.0], [50.0]), "two stations"),
        (shape_load("linear", 300.0), "both ends"),
        (shape_load("sine", None), "needs its total"),
    ],
)
def test_loads_that_make_no_curve(load, words):
    with pytest.raises(BriefError, match=words) as caught:
        load_curve(load, make_specimen())
    assert caught.value.where == load.where


def test_a_sine_is_zero_at_both_ends():
    curve = load_curve(shape_load("sine", 500.0, start_x=A, end_x=B), make_specimen())
    assert curve.running(np.array([A]), "outboard")[0] == 0.0
    assert curve.running(np.array([B]), "inboard")[0] == 0.0


def test_closed_form_scales_to_its_total():
    curve = ClosedForm(Elliptical(), 1.0, 3.0, 500.0)
    assert curve.running(np.array([1.0]), "outboard")[0] == pytest.approx(500 / (np.pi / 4 * 2), rel=1e-15)
