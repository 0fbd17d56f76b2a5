"""Parts of the pads stage, each against another way to the same number."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
import shapely
from factories import band_rules, make_acceptance, make_brief, point_loads, shape_load, two_supports
from shapely.geometry import Polygon

from rigdesign.brief.model import Brief, Region
from rigdesign.pads.convex import HalfPlanes, cut_all, half_planes, hulls
from rigdesign.pads.linear import LinearPath
from rigdesign.pads.lines import LineSets, Places
from rigdesign.pads.path import fewest_lines, least_use_path, lower_hull
from rigdesign.pads.tube import Tube, build_tube
from rigdesign.target import build_target
from rigdesign.target.bands import bands
from rigdesign.target.internal import points_beyond, reactions

DECK = make_brief(
    specimen=two_supports(0.0, 0.8, 5.1, 6.0),
    loads=(
        shape_load("linear", None, start=-900.0, end=-2100.0, start_x=0.0, end_x=6.0),
        point_loads(2.7, -800.0),
    ),
    acceptance=make_acceptance(0.04, 0.2, regions=(Region("region 1", 1.0, 3.0, band_rules("moment", 0.005, 0.03)),)),
)
WING = make_brief(acceptance=make_acceptance(0.02, 0.12))


@pytest.mark.parametrize("brief", [DECK, WING], ids=["deck", "wing"])
def test_tube_judges_as_target_and_bands_do(brief: Brief) -> None:
    """Band use of a displaced rig, by target and reactions at 4 000 places, both sides of every pad and jump."""
    target = build_target(brief)
    specimen = brief.specimen
    length = specimen.right - specimen.left
    x = specimen.left + length * np.array([0.07, 0.31, 0.52, 0.88])
    force = target.net.total * np.array([0.2, 0.35, 0.25, 0.2])
    at, react = reactions(specimen, float(force.sum()), float(force @ x))
    loads_x, loads = np.concatenate([x, at]), np.concatenate([force, react])
    stations = np.unique(
        np.concatenate([np.linspace(specimen.left, specimen.right, 4001), x, at, target.total.breaks, [1.0, 3.0]])
    )
    stations = stations[(stations >= specimen.left) & (stations <= specimen.right)]
    worst = 0.0
    for side in ("inboard", "outboard"):
        shear, moment = points_beyond(stations, loads_x, loads, side)
        for quantity, rig in (("shear", shear), ("moment", moment)):
            band = bands(target)[quantity]
            error = rig - band.value(stations, side)
            below, above = band.widths(stations, side)
            worst = max(worst, float(np.max(np.where(error < 0, -error / below, error / above))))
    sign = np.sign(target.resultant)
    tube = build_tube(target, float(force @ x / force.sum()), 4, 400)
    # the tube reads the target at the pads from its stations, 1/1600 of the span apart
    assert float(tube.use(x, sign * force)) == pytest.approx(worst, rel=2e-3)
    batch = tube.use(np.stack([x, x + 0.01]), sign * force)
    assert batch[0] == pytest.approx(float(tube.use(x, sign * force)), rel=1e-12)
    assert batch[1] != batch[0]


def test_path_under_a_region_keeps_the_tube_and_beats_a_grid() -> None:
    """A lower edge that jumps: the path holds it, and pads on a fine grid reach it from above, never below."""
    target = build_target(replace(DECK, acceptance=replace(DECK.acceptance, rules=DECK.acceptance.rules[:2])))
    jack_x = target.net.first_moment / target.net.total
    tube = build_tube(target, jack_x, 6, 400)
    path, least = least_use_path(tube, 6, 0.0, 6.0)
    assert path is not None
    assert path.x.size == 6
    assert float(tube.use(path.x, path.force)) == pytest.approx(path.use, rel=1e-4)
    grid = np.linspace(0.0, 6.0, 73)
    coarse = build_tube(target, jack_x, grid.size, 6, extra=grid)
    sets = LineSets(coarse, Places(grid, 0.0, np.inf, 0.0), 6)
    assert sets.reach(least * 0.98, 6) is None
    assert sets.reach(least * 1.4, 6) is not None


def test_fewest_lines_grow_as_the_band_narrows() -> None:
    target = build_target(make_brief(acceptance=make_acceptance(0.02, None)))
    tube = build_tube(target, target.centroid, 12, 200)
    lines = {use: fewest_lines(tube, use, 0.2, 3.4, 40) for use in (2.0, 1.0, 0.5, 0.1, 0.02)}
    counts = [len(found) - 1 for found in lines.values() if found is not None]
    assert len(counts) == 5
    assert counts == sorted(counts)
    assert counts[0] < counts[-1]
    # a band four times narrower wants twice the pads, nearly
    assert counts[3] == pytest.approx(counts[1] * np.sqrt(10), abs=1.5)


def test_lower_hull_of_points_by_another_library() -> None:
    rng = np.random.default_rng(4)
    x = np.sort(rng.uniform(0, 5, 60))
    y = (x - 2) ** 2 + rng.uniform(0, 0.8, 60)
    hull_x, hull_y = lower_hull(x, y)
    assert (np.interp(x, hull_x, hull_y) <= y + 1e-12).all()
    assert (np.diff(np.diff(hull_y) / np.diff(hull_x)) > 0).all()
    assert set(zip(hull_x, hull_y, strict=True)) <= set(zip(x, y, strict=True))


def test_cutting_polygons_leaves_the_area_that_overlay_leaves() -> None:
    rng = np.random.default_rng(5)
    for _ in range(30):
        corners = [np.array(shapely.MultiPoint(rng.normal(size=(7, 2))).convex_hull.exterior.coords)[:-1] for _ in "ab"]
        stack, index = cut_all(corners[0][None], half_planes(corners[1][None]))
        wanted = Polygon(corners[0]).intersection(Polygon(corners[1])).area
        assert (Polygon(stack[0]).area if index.size else 0.0) == pytest.approx(wanted, abs=1e-9)


def test_cutting_never_loses_a_point_or_a_segment() -> None:
    point = np.array([[[0.3, 0.7]]])
    segment = np.array([[[0.0, 0.0], [1.0, 0.0]]])
    planes = HalfPlanes(np.array([[[1.0, 0.0]]]), np.array([[0.3]]))
    assert cut_all(point, planes)[1].size == 1
    np.testing.assert_allclose(cut_all(segment, planes)[0][0].max(axis=0), [0.3, 0.0], atol=1e-12)
    assert cut_all(point, HalfPlanes(planes.normal, planes.offset - 1e-6))[1].size == 0


def test_hulls_are_of_each_owner_alone() -> None:
    points = np.array([[0, 0], [1, 0], [0, 1], [0.2, 0.2], [5, 5], [6, 5]], dtype=float)
    stack, owners = hulls(points, np.array([3, 3, 3, 3, 7, 7]))
    np.testing.assert_array_equal(owners, [3, 7])
    assert Polygon(stack[0]).area == pytest.approx(0.5)
    np.testing.assert_allclose(np.sort(stack[1][:2, 0]), [5, 6])


@pytest.fixture(name="model")
def _model() -> tuple[Tube, LinearPath]:
    target = build_target(WING)
    tube = build_tube(target, target.centroid, 5, 400)
    x = np.array([0.45, 1.0, 1.55, 2.2, 3.0])
    lever = x - x.mean()
    share = np.array([1400.0, 1300.0, 1150.0, 950.0, 600.0])
    force = share + (tube.total * tube.jack_x - share @ x) * lever / (lever @ lever)
    force *= tube.total / force.sum()
    force += (tube.total * tube.jack_x - force @ x) * lever / (lever @ lever)
    return tube, LinearPath(tube, x, force)


def test_linear_path_starts_at_its_own_pads(model: tuple[Tube, LinearPath]) -> None:
    tube, path = model
    x, force = path.pads(path.start)
    np.testing.assert_allclose(x, path.x, atol=1e-12)
    assert force.sum() == pytest.approx(tube.total, rel=1e-12)
    assert force @ x == pytest.approx(tube.total * tube.jack_x, rel=1e-12)
    rows, constant, width = path.edges()
    assert float(np.max((rows @ path.start + constant) / width)) == pytest.approx(float(tube.use(x, force)), rel=2e-3)


def test_linear_forces_and_deviations_have_the_right_slopes(model: tuple[Tube, LinearPath]) -> None:
    """Against differences of the true forces for small random moves that keep the ends on their lines."""
    tube, path = model
    ends, values = path.ends()
    rng = np.random.default_rng(6)
    for _ in range(5):
        u = path.start + 1e-4 * rng.normal(size=10)
        u += np.linalg.lstsq(ends, values - ends @ u, rcond=None)[0]
        _, force = path.pads(u)
        matrix, constant = path.forces()
        # second order in moves of 1e-4 of a pitch
        np.testing.assert_allclose(matrix @ u + constant, force, atol=1e-5 * tube.total)
