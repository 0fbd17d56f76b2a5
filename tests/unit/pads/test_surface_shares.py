"""Tributary shares: by symmetry, by hand, and against the nearest pad of many small loads."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import pytest
import shapely
from factories import make_brief, point_loads, shape_load, table_load, two_supports
from pad_surfaces import line, outline, surface_brief

from rigdesign.brief.model import Brief, Outline, PressureLoad
from rigdesign.pads.forces import shares
from rigdesign.pads.surface.shares import cells, tributary_shares
from rigdesign.pads.tube import build_tube
from rigdesign.target import build_target
from rigdesign.target.curve import Floats
from rigdesign.target.line_load import LineLoad
from rigdesign.target.model import Target
from rigdesign.target.plan_load import PlanLoad, Projection
from rigdesign.target.plan_points import PlanPoints
from rigdesign.target.plan_sum import PlanSum
from rigdesign.target.surface.pressure import pressure_over

PANEL = outline((0.0, 0.0), (1.8, 0.0), (1.8, 1.2), (0.0, 1.2))
SWEPT = outline((0.0, -0.4), (3.2, -0.75), (3.2, -0.45), (1.5, 0.1), (0.0, 0.4))
X = np.array([0.2, 0.25, 0.9, 1.5, 1.6, 2.4, 3.0, 3.1])
Y = np.array([-0.3, 0.3, -0.1, 0.0, -0.4, -0.5, -0.5, -0.7])


@dataclass(frozen=True)
class UniformPressure:
    """The same pressure [Pa] all over an outline: force is area times pressure."""

    outline: Outline
    pressure: float

    def along(self, direction: object) -> Projection:
        raise NotImplementedError

    @property
    def sums(self) -> tuple[float, float, float]:
        polygon = self.outline.polygon
        force = self.pressure * polygon.area
        return force, force * polygon.centroid.x, force * polygon.centroid.y

    def inside(self, areas: Sequence[shapely.Polygon]) -> Floats:
        common = shapely.intersection(np.array(areas, dtype=object), self.outline.polygon)
        return np.asarray(self.pressure * shapely.area(common))


def target_of(brief: Brief, load: PlanLoad) -> Target:
    return Target(brief, load, PlanSum((), ()), load, {}, ())


def pressed(shape: Outline, pressure: float = -800.0) -> Target:
    return target_of(surface_brief(shape), UniformPressure(shape, pressure))  # type: ignore[arg-type]


def grid(shape: Outline, columns: int, rows: int) -> tuple[Floats, Floats]:
    """Places in the middle of equal fields of the outline's box."""
    x = np.linspace(shape.x.min(), shape.x.max(), 2 * columns + 1)[1::2]
    y = np.linspace(shape.y.min(), shape.y.max(), 2 * rows + 1)[1::2]
    return np.repeat(x, rows), np.tile(y, columns)


def points_over(shape: Outline, count: int, seed: int) -> PlanPoints:
    draw = np.random.default_rng(seed)
    x = draw.uniform(shape.x.min(), shape.x.max(), count)
    y = draw.uniform(shape.y.min(), shape.y.max(), count)
    inside = shapely.intersects_xy(shape.polygon, x, y)
    return PlanPoints(x[inside], y[inside], draw.uniform(1.0, 3.0, int(inside.sum())))


@pytest.mark.parametrize("count", [2, 3, 4])
def test_a_square_grid_under_uniform_pressure_shares_evenly(count: int) -> None:
    target = pressed(PANEL)
    share = tributary_shares(target, *grid(PANEL, count, count))
    total = -800.0 * 1.8 * 1.2
    # the spread is rounding: 1e-12 of the total
    np.testing.assert_allclose(share, total / count**2, rtol=0, atol=1e-12 * abs(total))


def test_places_that_mirror_each_other_have_the_same_share() -> None:
    x = np.array([0.2, 0.2, 0.2, 0.9, 0.9, 0.9, 1.6, 1.6, 1.6])
    y = np.array([0.1, 0.6, 1.1] * 3)
    share = tributary_shares(pressed(PANEL), x, y).reshape(3, 3)
    # fields between half-way lines at x 0.55, 1.25 and y 0.35, 0.85
    by_hand = -800.0 * np.outer([0.55, 0.7, 0.55], [0.35, 0.5, 0.35])
    np.testing.assert_allclose(share, by_hand, rtol=1e-12)
    np.testing.assert_allclose(share, share[::-1, ::-1], rtol=0, atol=1e-12 * abs(by_hand.sum()))


def test_every_small_load_goes_to_its_nearest_pad() -> None:
    load = points_over(SWEPT, 4000, 7)
    share = tributary_shares(target_of(surface_brief(SWEPT), load), X, Y)
    nearest = np.argmin(np.hypot(load.x[:, None] - X, load.y[:, None] - Y), axis=1)
    np.testing.assert_allclose(share, np.bincount(nearest, load.force, X.size), rtol=1e-12)
    assert share.min() > 0


def test_shares_follow_the_order_of_the_pads() -> None:
    order = np.array([3, 0, 7, 5, 1, 2, 6, 4])
    target = pressed(SWEPT)
    np.testing.assert_allclose(tributary_shares(target, X[order], Y[order]), tributary_shares(target, X, Y)[order])


def test_a_load_half_way_between_two_rows_is_split() -> None:
    """A running load along y = 0.4 m with rows at 0.1 m and 0.7 m, and points where two and four cells meet."""
    curve = LineLoad(
        build_target(make_brief(loads=(table_load([0.3, 1.5], [100.0, 400.0]),))).total, line((0.0, 0.4), (1.8, 0.4))
    )
    x, y = np.array([0.5, 0.5, 1.3, 1.3]), np.array([0.1, 0.7, 0.1, 0.7])
    share = tributary_shares(target_of(surface_brief(PANEL), curve), x, y)
    # of 300 N what lies inboard of x = 0.9 m: 0.6 m · (100 + 250) / 2 N/m
    np.testing.assert_allclose(share, [52.5, 52.5, 97.5, 97.5], rtol=1e-9)
    between = PlanPoints(np.array([0.9, 0.9]), np.array([0.1, 0.4]), np.array([10.0, 80.0]))
    share = tributary_shares(target_of(surface_brief(PANEL), between), x, y)
    np.testing.assert_allclose(share, [25.0, 20.0, 25.0, 20.0], rtol=1e-12)


def test_a_load_on_a_slanted_border_is_split() -> None:
    """Two rows at equal distance from a slanted line, whose points no border passes exactly."""
    at, ahead = np.array([0.2, 0.7, 1.1]), 0.31
    line_y = 0.1 + 0.37 * at
    slope = np.array([-0.37, 1.0]) / np.hypot(0.37, 1.0)
    middle = np.array([0.65, 0.1 + 0.37 * 0.65])
    x, y = np.column_stack([middle + ahead * slope, middle - ahead * slope])
    share = tributary_shares(target_of(surface_brief(PANEL), PlanPoints(at, line_y, np.ones(3))), x, y)
    np.testing.assert_allclose(share, [1.5, 1.5], rtol=1e-12)


@pytest.mark.parametrize("count", [1, 2, 5])
def test_pads_in_one_line(count: int) -> None:
    x = np.linspace(0.3, 1.5, count)
    target = pressed(PANEL)
    middle = np.concatenate([[0.0], (x[1:] + x[:-1]) / 2, [1.8]])
    np.testing.assert_allclose(tributary_shares(target, x, np.full(count, 0.2)), -960.0 * np.diff(middle), rtol=1e-12)


def test_two_pads_at_one_place_halve_its_share() -> None:
    target = pressed(SWEPT)
    share = tributary_shares(target, np.append(X, X[2]), np.append(Y, Y[2]))
    once = tributary_shares(target, X, Y)
    once[2] /= 2
    np.testing.assert_allclose(share, np.append(once, once[2]), rtol=1e-12)


def test_a_pressure_and_a_line_load_add_up() -> None:
    """A pressure map that rises along x, less twice a point load; the panel split at x = 0.8 m and y = 0.5 m."""
    rising = pressure_over(PressureLoad(PANEL.x, PANEL.y, 500.0 * PANEL.x, 1.0, "map"), PANEL)
    point = PlanPoints(np.array([0.8]), np.array([0.2]), np.array([30.0]))
    load = PlanSum((rising, PlanSum((point, point), (1.0, 1.0))), (1.0, -1.0))
    x, y = np.array([0.5, 0.5, 1.1, 1.1]), np.array([0.2, 0.8, 0.2, 0.8])
    share = tributary_shares(target_of(surface_brief(PANEL), load), x, y)
    # ∫ 500 x dx is 160 N/m up to 0.8 m and 650 N/m from there
    by_hand = [160 * 0.5 - 30, 160 * 0.7, 650 * 0.5 - 30, 650 * 0.7]
    np.testing.assert_allclose(share, by_hand, rtol=1e-12)


def test_pads_off_the_load_have_none_of_it() -> None:
    share = tributary_shares(pressed(PANEL), np.array([0.5, 9.0]), np.array([0.5, 0.5]))
    np.testing.assert_allclose(share, [-800.0 * 2.16, 0.0], atol=1e-12)


@pytest.mark.parametrize("turn", [0.0, 0.7])
def test_shares_go_along_with_a_plan_that_is_shifted_and_turned(turn: float) -> None:
    def moved(x: Floats, y: Floats) -> tuple[Floats, Floats]:
        return 3.0 + x * np.cos(turn) - y * np.sin(turn), -2.0 + x * np.sin(turn) + y * np.cos(turn)

    there = Outline(*moved(SWEPT.x, SWEPT.y))
    np.testing.assert_allclose(
        tributary_shares(pressed(there), *moved(X, Y)), tributary_shares(pressed(SWEPT), X, Y), rtol=1e-12
    )


def test_a_line_rig_has_the_shares_of_its_curve() -> None:
    brief = make_brief(
        specimen=two_supports(0.0, 0.8, 5.1, 6.0),
        loads=(
            shape_load("linear", None, start=-900.0, end=-2100.0, start_x=0.0, end_x=6.0),
            point_loads(2.7, -800.0),
        ),
    )
    target = build_target(brief)
    x = np.array([0.4, 1.9, 2.6, 3.9, 5.3])
    tube = build_tube(target, target.centroid, x.size, 60, extra=np.concatenate([x, (x[1:] + x[:-1]) / 2]))
    share = tributary_shares(target, x, np.zeros(x.size))
    np.testing.assert_allclose(share, tube.sign * shares(tube, x), rtol=1e-9)
    assert share.sum() == pytest.approx(target.resultant, rel=1e-12)
    shuffled = tributary_shares(target, x[::-1], np.zeros(x.size))
    np.testing.assert_array_equal(shuffled, share[::-1])


def test_cells_cover_the_outline_once() -> None:
    found = cells(pressed(SWEPT), X, Y)
    assert shapely.area(found).sum() == pytest.approx(SWEPT.polygon.area, rel=1e-12)
    assert shapely.union_all(found).symmetric_difference(SWEPT.polygon).area < 1e-12
    for cell, x, y in zip(found, X, Y, strict=True):
        assert cell.covers(shapely.Point(x, y)) or not SWEPT.polygon.covers(shapely.Point(x, y))


def test_four_hundred_cells_are_right_too() -> None:
    draw = np.random.default_rng(3)
    x, y = draw.uniform(0, 1.8, 400), draw.uniform(0, 1.2, 400)
    load = points_over(PANEL, 3000, 4)
    nearest = np.argmin(np.hypot(load.x[:, None] - x, load.y[:, None] - y), axis=1)
    share = tributary_shares(target_of(surface_brief(PANEL), load), x, y)
    np.testing.assert_allclose(share, np.bincount(nearest, load.force, 400), rtol=1e-12, atol=1e-12)
