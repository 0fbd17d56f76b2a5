"""Running loads along lines and forces in plan, against the same load lumped into very many forces."""

from __future__ import annotations

import numpy as np
import pytest
import shapely
from plan_targets import line, towards

from rigdesign.target.closed import ClosedForm, Elliptical
from rigdesign.target.line_load import LineLoad
from rigdesign.target.plan_load import ALONG_X, ALONG_Y, Sums
from rigdesign.target.plan_points import PlanPoints
from rigdesign.target.plan_sum import PlanSum
from rigdesign.target.polynomial import Polynomials
from rigdesign.target.sums import NO_CURVE, Combined, Points

# ahead, nearly square to x, far back: along some directions stretches run the other way, along two they stand on a cut
BENT = line((0.0, 0.1), (1.5, 0.4), (2.0, 1.2), (4.0, -3.0))
STANDING = [float(np.degrees(np.arctan2(1.0, -slope))) for slope in (0.2, 1.6)]
DIRECTIONS = [0.0, 90.0, 36.87, -53.0, 143.0, 251.0, *STANDING]
LUMPS = 200_000


def curve():
    """An ellipse, a table with a change of sign, and two point loads, one of them at a kink."""
    table = Polynomials.from_table(np.array([0.2, 1.0, 2.0]), np.array([100.0, -300.0, 50.0]))
    points = Points(np.array([1.3, 2.0]), np.array([200.0, -70.0]))
    return Combined((ClosedForm(Elliptical(), 0.2, 3.4, 5400.0), table, points), (1.0, 1.0, 2.0))


@pytest.fixture(scope="module")
def lumped():
    """The curve's point loads as they are, the rest as lumps."""
    load, points = curve(), Points(*curve().points)
    ends = np.linspace(0.2, 3.4, LUMPS + 1)
    force = -np.diff(load.force_beyond(ends, "outboard") - points.force_beyond(ends, "outboard"))
    x = np.concatenate([(ends[1:] + ends[:-1]) / 2.0, points.x])
    return PlanPoints(x, BENT.at(x), np.concatenate([force, points.force]))


@pytest.mark.parametrize("degrees", DIRECTIONS)
def test_seen_along_any_direction(degrees, lumped):
    load, direction = LineLoad(curve(), BENT), towards(degrees)
    own, other = load.along(direction), lumped.along(direction)
    s = np.linspace(-4.0, 4.0, 81) + 0.0031
    lump = 5400.0 * 1.3 / LUMPS  # a cut through a lump counts all of it or nothing
    for side in ("inboard", "outboard"):
        found, expected = own.force.force_beyond(s, side), other.force.force_beyond(s, side)
        assert found == pytest.approx(expected, abs=2 * lump)
        found, expected = own.turning.force_beyond(s, side), other.turning.force_beyond(s, side)
        assert found == pytest.approx(expected, abs=6 * lump)
    # the lumps' moments are off by the square of their width
    assert own.force.moment_beyond(s) == pytest.approx(other.force.moment_beyond(s), abs=1e-8 * 5400.0)
    assert own.force.total == pytest.approx(other.force.total, rel=1e-12)
    assert own.force.first_moment == pytest.approx(other.force.first_moment, abs=1e-8 * 5400.0)
    assert own.turning.total == pytest.approx(other.turning.total, abs=1e-8 * 5400.0)


@pytest.mark.parametrize("degrees", DIRECTIONS)
def test_what_runs_is_the_slope_of_what_lies_beyond(degrees):
    seen = LineLoad(curve(), BENT).along(towards(degrees))
    s, step = np.linspace(-4.0, 4.0, 81) + 0.0031, 1e-6
    for part in (seen.force, seen.turning):
        slope = (part.force_beyond(s - step, "outboard") - part.force_beyond(s + step, "outboard")) / (2 * step)
        assert part.running(s, "outboard") == pytest.approx(slope, abs=1e-4)  # of the differences


@pytest.mark.parametrize(("degrees", "stretch"), [(STANDING[0], 0), (STANDING[1], 1)])
def test_a_stretch_that_stands_on_a_cut_is_a_point_load(degrees, stretch):
    load, direction = LineLoad(curve(), BENT), towards(degrees)
    seen = load.along(direction)
    x, y = BENT.x[stretch + 1], BENT.y[stretch + 1]
    s = np.array([x * direction.a_x + y * direction.a_y])
    for part in (seen.force, seen.turning):
        at, amount = part.points
        k = int(np.argmin(np.abs(at - s)))
        jump = part.force_beyond(at[k : k + 1], "inboard") - part.force_beyond(at[k : k + 1], "outboard")
        near = np.abs(at - at[k]) < 1e-9
        assert jump[0] == pytest.approx(amount[near].sum(), rel=1e-9)
        assert abs(jump[0]) > 50.0


def test_along_x_it_is_the_curve_itself():
    own = curve()
    assert LineLoad(own, BENT).along(ALONG_X).force is own
    flat = LineLoad(own, line((0.0, 0.0), (4.0, 0.0))).along(ALONG_X)
    assert flat.force is own
    assert flat.turning is NO_CURVE


def test_the_same_object_when_asked_again():
    load = LineLoad(curve(), BENT)
    both = PlanSum((load, load), (1.0, 2.0))
    assert load.along(ALONG_Y) is load.along(ALONG_Y)
    assert both.along(ALONG_Y) is both.along(ALONG_Y)


def test_sums(lumped):
    found = LineLoad(curve(), BENT).sums
    assert found == pytest.approx(lumped.sums, abs=1e-8 * 5400.0)
    twice = PlanSum((LineLoad(curve(), BENT), lumped), (3.0, -1.0)).sums
    assert twice == pytest.approx(Sums(*(2.0 * value for value in found)), abs=1e-7 * 5400.0)


def test_inside_areas(lumped):
    areas = [shapely.box(0, -1, 1.5, 0.33), shapely.box(1.5, -1, 2.6, 1.5), shapely.box(0, 0.33, 1.5, 1)]
    found = LineLoad(curve(), BENT).inside(areas)
    assert found == pytest.approx(lumped.inside(areas), abs=5e-2)  # a lump
    assert abs(found[2]) > 50.0


def test_a_line_along_a_common_border_goes_to_the_first():
    uniform = Polynomials.from_table(np.array([0.0, 2.0]), np.array([150.0, 150.0]))
    load = LineLoad(uniform, line((0.0, 0.3), (2.0, 0.3)))
    low, high = shapely.box(-1, -1, 1.25, 0.3), shapely.box(0.5, 0.3, 3, 2)
    assert load.inside([low, high]) == pytest.approx([187.5, 112.5])
    assert load.inside([high, low]) == pytest.approx([225.0, 75.0])
    assert load.inside([shapely.box(5, 5, 6, 6)]) == pytest.approx([0.0])


def test_forces_on_a_cut_count_inboard_whatever_the_rounding():
    rng = np.random.default_rng(3)
    pads = PlanPoints(rng.uniform(0, 3, 40), rng.uniform(-1, 1, 40), rng.uniform(50, 900, 40))
    direction = towards(-23.7)
    seen = pads.along(direction)
    # the same places by another road: rounded differently
    length = np.hypot(pads.x, pads.y)
    s = length * np.cos(np.arctan2(pads.y, pads.x) - np.arctan2(direction.a_y, direction.a_x))
    jump = seen.force.force_beyond(s, "inboard") - seen.force.force_beyond(s, "outboard")
    assert jump == pytest.approx(pads.force, rel=1e-12)
    n = pads.y * direction.a_x - pads.x * direction.a_y
    jump = seen.turning.force_beyond(s, "inboard") - seen.turning.force_beyond(s, "outboard")
    assert jump == pytest.approx(pads.force * n, abs=1e-9)


def test_forces_at_one_place_are_one_jump():
    pads = PlanPoints(np.array([1.0, 1.0, 2.0]), np.array([0.5, 0.5, 0.0]), np.array([10.0, 30.0, 7.0]))
    at, force = pads.along(towards(20.0)).force.points
    assert at.size == 2
    assert sorted(force.tolist()) == [7.0, 40.0]
    assert PlanPoints(np.empty(0), np.empty(0), np.empty(0)).along(towards(20.0)).force.total == 0.0


def test_forces_in_areas_each_count_once():
    places = PlanPoints(np.array([0.5, 1.0, 1.5, 9.0]), np.array([0.5, 0.5, 0.5, 0.5]), np.array([1.0, 2.0, 4.0, 8.0]))
    left, right = shapely.box(0, 0, 1, 1), shapely.box(1, 0, 2, 1)
    assert places.inside([left, right]).tolist() == [3.0, 4.0]
    assert places.inside([right, left]).tolist() == [6.0, 1.0]
    beside = PlanPoints(np.array([1.0 + 1e-13]), np.array([0.5]), np.array([5.0]))
    assert beside.inside([left]).tolist() == [5.0]  # rounding does not lose a force
