"""Pressure maps: against areas cut by shapely, nearest values found place by place, and laws of symmetry."""

from __future__ import annotations

import numpy as np
import pytest
import shapely
from plan_targets import PLANFORM, beyond, outline, pressure_map, scattered_map, towards
from scipy.interpolate import LinearNDInterpolator

from rigdesign.brief.model import PressureLoad
from rigdesign.errors import BriefError
from rigdesign.target.plan_load import ALONG_X, ALONG_Y
from rigdesign.target.surface.pressure import pressure_over

SIDES = ("inboard", "outboard")
# what the pressures of the maps here add up to [N]: V, M and T are promised to 1e-9 of it
SIZE = 3000.0
NOTCHED = outline((0.2, -0.9), (3.4, -0.9), (3.4, 0.5), (2.4, 0.5), (2.3, -0.4), (1.1, -0.3), (1.0, 0.5), (0.2, 0.5))


def over(load: PressureLoad, area=PLANFORM):
    return pressure_over(load, area)


@pytest.mark.parametrize("area", [PLANFORM, NOTCHED], ids=["planform", "notched"])
@pytest.mark.parametrize("degrees", [0.0, 90.0, 24.0, 203.0])
def test_shear_is_the_pressure_beyond_the_cut(area, degrees):
    found, direction = over(scattered_map(60), area), towards(degrees)
    seen = found.along(direction)
    for s in np.linspace(seen.force.breaks[0], seen.force.breaks[-1], 9):
        half = shapely.Polygon(beyond(direction, float(s)))
        assert seen.force.force_beyond(np.array([s]), "inboard")[0] == pytest.approx(
            found.inside([half])[0], abs=1e-9 * SIZE
        )


@pytest.mark.parametrize("area", [PLANFORM, NOTCHED], ids=["planform", "notched"])
@pytest.mark.parametrize("degrees", [0.0, 90.0, 24.0, 203.0])
def test_whole_sums_from_the_strips_and_from_the_triangles(area, degrees):
    found, direction = over(scattered_map(200), area), towards(degrees)
    seen, (force, first_x, first_y) = found.along(direction), found.sums
    assert seen.force.total == pytest.approx(force, rel=1e-12)
    assert seen.force.first_moment == pytest.approx(first_x * direction.a_x + first_y * direction.a_y, rel=1e-11)
    assert seen.turning.total == pytest.approx(first_y * direction.a_x - first_x * direction.a_y, rel=1e-11)


@pytest.mark.parametrize("degrees", [0.0, 24.0])
def test_moment_and_turning_are_integrals_of_what_runs(degrees):
    """Gauss's rule between the corners' cuts integrates quadratics and cubics exactly."""
    seen = over(scattered_map(40)).along(towards(degrees))
    node, weight = np.polynomial.legendre.leggauss(6)
    for start in np.linspace(seen.force.breaks[0], seen.force.breaks[-1], 5)[:-1]:
        knots = np.append(start, seen.force.knots[seen.force.knots > start])
        half = np.diff(knots)[:, None] / 2.0
        s = ((knots[:-1] + knots[1:])[:, None] / 2.0 + half * node).ravel()
        share = (half * weight).ravel()
        w, turning = seen.force.running(s, "outboard"), seen.turning.running(s, "outboard")
        at = np.array([start])
        assert seen.force.force_beyond(at, "outboard")[0] == pytest.approx((w * share).sum(), abs=1e-9 * SIZE)
        assert seen.force.moment_beyond(at)[0] == pytest.approx((w * share * (s - start)).sum(), abs=1e-9 * SIZE)
        assert seen.turning.force_beyond(at, "outboard")[0] == pytest.approx((turning * share).sum(), abs=1e-9 * SIZE)


def test_nothing_beyond_the_tip_and_all_of_it_before_the_root():
    found = over(scattered_map(40))
    seen, x = found.along(ALONG_X), np.array([3.4, 5.0])
    assert seen.force.force_beyond(x, "outboard").tolist() == [0.0, 0.0]
    assert seen.force.running(x, "outboard").tolist() == [0.0, 0.0]
    before = np.array([-1.0])
    assert seen.force.force_beyond(before, "inboard")[0] == pytest.approx(found.sums.force, rel=1e-13)
    assert seen.force.moment_beyond(before)[0] == pytest.approx(found.sums.first_x + found.sums.force, rel=1e-13)


def nearest_value(load: PressureLoad, places: np.ndarray) -> np.ndarray:
    """The map's value at places (n, 2), those beyond its points moved to the nearest place of their hull."""
    points = np.column_stack([load.x, load.y])
    hull = shapely.convex_hull(shapely.multipoints(points))
    at = shapely.points(places)
    lines = shapely.shortest_line(at, hull)
    moved = shapely.get_coordinates(shapely.get_point(lines, 1))
    # a hair inside, so that rounding does not put a place of the border beside all triangles
    middle = np.array(hull.centroid.coords[0])
    return LinearNDInterpolator(points, load.pressure)(middle + (moved - middle) * (1.0 - 1e-9))


def test_values_between_and_beyond_the_points():
    """Each triangle's own corners have the value that the map has there by another road."""
    load = scattered_map(25)
    triangles = over(load).triangles
    # just inside each corner, so that the corner's own triangle is meant
    inward = triangles.corners + 1e-7 * (triangles.corners.mean(axis=1, keepdims=True) - triangles.corners)
    expected = nearest_value(load, inward.reshape(-1, 2)).reshape(-1, 3)
    assert triangles.values == pytest.approx(expected, abs=1e-3)  # pressures of 1000 Pa, slopes up to 1e4 Pa/m
    assert triangles.area.sum() == pytest.approx(PLANFORM.polygon.area, rel=1e-12)


def test_share_beyond_the_points():
    """A uniform pressure known on a third of a rectangle."""
    deck = outline((0.0, 0.0), (3.0, 0.0), (3.0, 2.0), (0.0, 2.0))
    third = over(pressure_map([1.0, 2.0, 2.0, 1.0], [0.0, 0.0, 2.0, 2.0], [-500.0] * 4), deck)
    assert third.share_beyond == pytest.approx(2.0 / 3.0, rel=1e-12)
    assert third.sums.force == pytest.approx(-3000.0, rel=1e-12)
    whole = over(pressure_map([0.0, 3.0, 3.0, 0.0], [0.0, 0.0, 2.0, 2.0], [-500.0] * 4), deck)
    assert whole.share_beyond == 0.0


def test_beyond_a_corner_the_corner_holds_and_beyond_an_edge_its_own_place():
    """Points on a unit square with p = x; the outline reaches one further on all sides."""
    field = over(pressure_map([0.0, 1.0, 1.0, 0.0], [0.0, 0.0, 1.0, 1.0], [0.0, 1.0, 1.0, 0.0]),
                 outline((-1.0, -1.0), (2.0, -1.0), (2.0, 2.0), (-1.0, 2.0)))  # fmt: skip
    areas = [shapely.box(x, y, x + 1, y + 1) for x in (-1, 0, 1) for y in (-1, 0, 1)]
    assert field.inside(areas) == pytest.approx([0, 0, 0, 0.5, 0.5, 0.5, 1, 1, 1], abs=1e-12)


def test_a_grid_keeps_its_symmetry():
    """Cells are not split along a diagonal: mirrored values give mirrored sums, in any order of the rows."""
    x, y = (axis.ravel() for axis in np.meshgrid([0.2, 1.1, 2.5, 3.4], [-0.9, -0.2, 0.5], indexing="ij"))
    p = np.array([5.0, 90.0, 20.0, 7.0, -40.0, 66.0, 31.0, 8.0, 2.0, 19.0, 54.0, 12.0])
    deck = outline((0.2, -0.9), (3.4, -0.9), (3.4, 0.5), (0.2, 0.5))
    order = np.random.default_rng(2).permutation(p.size)
    plain = over(pressure_map(x, y, p), deck).sums
    mixed = over(pressure_map(x[order], y[order], p[order]), deck).sums
    mirrored = over(pressure_map(x, -0.4 - y, p), deck).sums
    assert mixed == pytest.approx(plain, rel=1e-13)
    assert mirrored.force == pytest.approx(plain.force, rel=1e-12)
    assert mirrored.first_x == pytest.approx(plain.first_x, rel=1e-12)
    assert mirrored.first_y == pytest.approx(-0.4 * plain.force - plain.first_y, rel=1e-11)


def test_a_grid_with_rounded_coordinates_is_still_a_grid():
    x, y = (axis.ravel() for axis in np.meshgrid([0.2, 1.1, 3.4], [-0.9, -0.2, 0.5], indexing="ij"))
    p = np.arange(9.0) ** 2
    deck = outline((0.2, -0.9), (3.4, -0.9), (3.4, 0.5), (0.2, 0.5))
    nudged = x + np.random.default_rng(4).uniform(-1e-13, 1e-13, 9)
    found, exact = over(pressure_map(nudged, y, p), deck), over(pressure_map(x, y, p), deck)
    assert found.covered.sign.size == exact.covered.sign.size == 16
    assert found.sums == pytest.approx(exact.sums, rel=1e-10)


def test_points_on_a_line_that_rounding_has_bent():
    """A swept edge with coordinates of three decimals: every point of it counts beyond it, not the hull's few alone."""
    x = np.linspace(0.2, 3.4, 41)
    edge, rows = 0.40 - 0.222 * (x - 0.2), [0.0, -0.2, -0.45]
    place_x, place_y = np.round(np.tile(x, 3), 3), np.round(np.concatenate([edge + row for row in rows]) - 0.1, 3)
    along = np.sqrt(np.maximum(1.0 - ((x - 0.2) / 3.2) ** 2, 0.0))
    bent = over(pressure_map(place_x, place_y, 800.0 * np.tile(along, 3)))
    # nothing is counted twice where the border bends inward, and nothing left out
    assert bent.triangles.area.sum() == pytest.approx(PLANFORM.polygon.area, rel=1e-12)
    # the pressure depends on x almost alone, and so does the load of the strip beyond the leading edge
    strip = shapely.Polygon([(0.2, 0.4), (0.2, 0.31), (3.4, -0.4), (3.4, -0.31)])
    width = 0.09
    expected = 800.0 * np.pi / 4.0 * 3.2 * width
    # off by the slope of the edge (the nearest place is a little inboard) and by the map's coarse steps
    assert bent.inside([strip])[0] == pytest.approx(expected, rel=0.01)


def test_both_signs_are_told_apart():
    deck = outline((0.0, 0.0), (4.0, 0.0), (4.0, 1.0), (0.0, 1.0))
    along, against = over(
        pressure_map([0.0, 4.0, 4.0, 0.0], [0.0, 0.0, 1.0, 1.0], [-100.0, 300.0, 300.0, -100.0]), deck
    ).by_sign
    # p = 100 (x − 1): below zero over the first metre
    assert along == pytest.approx(450.0, rel=1e-12)
    assert against == pytest.approx(-50.0, rel=1e-12)


def test_breaks_are_where_the_running_load_or_its_slope_jumps():
    """The columns of a grid stand on cuts square to x and bend the running load there; aslant only corners do."""
    x, y = (axis.ravel() for axis in np.meshgrid([0.2, 1.1, 2.5, 3.4], [-0.9, -0.2, 0.5], indexing="ij"))
    found = over(pressure_map(x, y, x**2 + 3 * y**3 + 10.0))
    assert found.along(ALONG_X).force.breaks == pytest.approx([0.2, 1.1, 2.5, 3.4])
    assert found.along(ALONG_Y).force.breaks == pytest.approx([-0.85, -0.62, -0.31, -0.2, 0.40])
    slanted = found.along(towards(24.0)).force.breaks
    assert slanted.size == 4


def test_more_points_than_are_followed_one_by_one():
    """Between the cuts kept, V and T of a rough map stay within what is promised; at them they are exact."""
    load = scattered_map(9000)
    found = over(load)
    seen = found.along(ALONG_X)
    assert seen.force.knots.size < 5000 < load.x.size
    kept = seen.force.knots[[1000, 2500]]
    between = kept + 0.37 * np.diff(seen.force.knots)[[1000, 2500]]
    for x, allowed in [*((x, 1e-12) for x in kept), *((x, 1e-9) for x in between)]:
        half = shapely.Polygon(beyond(ALONG_X, float(x)))
        at = np.array([x])
        assert seen.force.force_beyond(at, "outboard")[0] == pytest.approx(found.inside([half])[0], abs=allowed * SIZE)
    assert seen.turning.total == pytest.approx(found.sums.first_y, rel=1e-11)


def test_areas_share_a_pressure_out():
    found = over(scattered_map(80))
    areas = [shapely.box(0, -1, 1.55, -0.1), shapely.box(1.55, -1, 4, -0.1), shapely.box(0, -0.1, 4, 1)]
    parts = found.inside(areas)
    assert parts.sum() == pytest.approx(found.sums.force, rel=1e-12)
    assert (parts > 100.0).all()
    assert found.inside([shapely.box(10, 10, 11, 11)]).tolist() == [0.0]


def test_times():
    load = scattered_map(30)
    plain = over(load)
    turned = over(pressure_map(load.x, load.y, load.pressure, times=-1.5))
    assert turned.sums.force == pytest.approx(-1.5 * plain.sums.force, rel=1e-12)
    assert turned.by_sign == pytest.approx((0.0, -1.5 * plain.by_sign[0]), abs=1e-9)


@pytest.mark.parametrize(
    ("x", "y", "pressure", "words"),
    [
        ([0.0, 1.0, 2.0], [0.0, 0.5, 1.0], [1.0, 2.0, 3.0], "spans no area: 3 points, all on one line"),
        ([0.3, 1.0], [0.0, 0.5], [1.0, 2.0], "spans no area: 2 points"),
        ([0.3, 1.0, 0.4, 0.3], [0.0, 0.5, -0.3, 0.0], [1.0, 2.0, 3.0, 4.0],
         "two pressures stand at one place: 1 Pa and 4 Pa at x = 0.3 m, y = 0 m"),
    ],
)  # fmt: skip
def test_maps_that_cannot_be_used(x, y, pressure, words):
    with pytest.raises(BriefError) as caught:
        over(pressure_map(x, y, pressure))
    assert words in str(caught.value)
    assert caught.value.remedy


def test_a_row_given_twice_counts_once():
    x, y, p = [0.3, 3.0, 0.4], [0.0, 0.5, -0.3], [100.0, 200.0, 300.0]
    once, twice = over(pressure_map(x, y, p)), over(pressure_map([*x, 0.3], [*y, 0.0], [*p, 100.0]))
    assert twice.sums == pytest.approx(once.sums, rel=1e-12)
