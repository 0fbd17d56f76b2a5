"""Footprints, allowed places, candidates and bounds on how many fit, against hand numbers and brute force."""

from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest
import shapely
from factories import array
from pad_surfaces import hard_points, line, outline, surface_brief

from rigdesign.brief.model import Brief
from rigdesign.pads.surface.fitting import most_side_by_side, most_that_fit
from rigdesign.pads.surface.places import (
    Room,
    allowed,
    compatible,
    footprints,
    free_candidates,
    nearest_allowed,
    turns,
    usable_points,
)

# a skewed surface with a notch in its upper edge, and a kinked axis
NOTCHED = outline((0.0, -0.4), (3.2, -0.35), (3.0, 0.1), (1.9, 0.22), (1.8, 0.0), (1.7, 0.25), (0.0, 0.4))
KINKED = line((0.0, 0.05), (1.1, 0.0), (3.2, -0.3))
PLATE = outline((0.0, 0.0), (2.0, 0.0), (2.0, 1.0), (0.0, 1.0))
HATCH = outline((0.6, -0.15), (0.9, -0.1), (0.75, 0.1))
BRIEFS = {
    "turned": surface_brief(
        NOTCHED, pads={"width": 0.2, "edge": 0.03, "turn": 0.2, "keep_out": ((2.3, 2.4),), "keep_out_areas": (HATCH,)}
    ),
    "along axis": surface_brief(
        NOTCHED, KINKED, pads={"width": 0.15, "turn": "along axis", "keep_out_areas": (HATCH,)}
    ),
    "strips": surface_brief(NOTCHED, pads={"width": None, "edge": 0.02, "turn": 1.1}),
    "rows": surface_brief(
        NOTCHED,
        KINKED,
        pads={
            "width": 0.1,
            "edge": 0.01,
            "turn": "along axis",
            "rows": (line((0.0, 0.2), (3.0, 0.02)), line((0.2, -0.3), (1.5, -0.2), (3.2, -0.3))),
            "keep_out_areas": (HATCH,),
        },
    ),
}


def ids(brief: Brief) -> str:
    return next(name for name, one in BRIEFS.items() if one is brief)


@pytest.fixture(params=BRIEFS.values(), ids=ids)
def brief(request: pytest.FixtureRequest) -> Brief:
    found: Brief = request.param
    return found


def scattered(count: int, seed: int) -> tuple[np.ndarray, np.ndarray]:
    draw = np.random.default_rng(seed)
    return draw.uniform(-0.2, 3.4, count), draw.uniform(-0.5, 0.5, count)


def allowed_by_hand(brief: Brief, x: float, y: float) -> bool:
    """The definition, one place at a time, without slack."""
    shape = footprints(brief, np.array([x]), np.array([y]))[0]
    whole = brief.specimen.outline.polygon  # type: ignore[union-attr]
    low, _, high, _ = shape.bounds
    return (
        shape.within(whole)
        and shape.distance(whole.exterior) >= brief.pads.edge
        and not any(shape.intersects(area.polygon) for area in brief.pads.keep_out_areas)
        and not any(high > a and low < b for a, b in brief.pads.keep_out)
    )


def test_a_footprint_is_turned_about_its_place() -> None:
    brief = surface_brief(PLATE, pads={"length": 0.4, "width": 0.2, "turn": np.pi / 6})
    (shape,) = footprints(brief, array([1.0]), array([0.5]))
    # half the length along 30°, then half the width to its left
    along, left = 0.2 * np.array([np.sqrt(3) / 2, 0.5]), 0.1 * np.array([-0.5, np.sqrt(3) / 2])
    middle = np.array([1.0, 0.5])
    expected = [middle - along - left, middle + along - left, middle + along + left, middle - along + left]
    np.testing.assert_allclose(shapely.get_coordinates(shape)[:4], expected, atol=1e-15)


@pytest.mark.parametrize(
    ("length", "width", "kind"), [(0.1, None, "LineString"), (0.0, 0.1, "LineString"), (0.0, None, "Point")]
)
def test_footprints_without_width_or_length(length: float, width: float | None, kind: str) -> None:
    brief = surface_brief(PLATE, pads={"length": length, "width": width, "turn": 0.3})
    (shape,) = footprints(brief, array([0.7]), array([0.4]))
    assert shape.geom_type == kind
    direction = np.ptp(shapely.get_coordinates(shape), axis=0)
    expected = [0.1 * np.cos(0.3), 0.1 * np.sin(0.3)] if length else [0.1 * np.sin(0.3), 0.1 * np.cos(0.3)]
    if kind != "Point":
        np.testing.assert_allclose(direction, expected, atol=1e-15)


def test_turns_follow_the_axis_stretch_by_stretch() -> None:
    brief = surface_brief(NOTCHED, KINKED, pads={"turn": "along axis"})
    found = turns(brief, array([0.4, 1.1, 2.0]), array([0.1, 0.0, 0.1]))
    first, second = np.arctan2(-0.05, 1.1), np.arctan2(-0.3, 2.1)
    np.testing.assert_allclose(found, [first, second, second], rtol=1e-14)


def test_turns_of_a_table_go_with_its_places() -> None:
    brief = surface_brief(PLATE, pads=hard_points([0.3, 0.3, 1.2], [0.2, 0.7, 0.4], turns=array([0.1, 0.2, 0.3])))
    np.testing.assert_array_equal(turns(brief, array([1.2, 0.3]), array([0.4, 0.7])), [0.3, 0.2])


def test_allowed_is_what_the_words_say(brief: Brief) -> None:
    x, y = scattered(600, 1)
    by_hand = [allowed_by_hand(brief, *place) for place in zip(x, y, strict=True)]
    assert 20 < sum(by_hand) < 500
    np.testing.assert_array_equal(allowed(brief, x, y), by_hand)


def test_footprints_may_touch_but_not_reach_over() -> None:
    more = 1e-6  # far above the slack of 2e-9 m
    pads = {"length": 0.2, "width": 0.1, "edge": 0.03, "keep_out": ((0.8, 0.9),)}
    brief = surface_brief(
        PLATE, pads={**pads, "keep_out_areas": (outline((1.5, 0.2), (1.7, 0.2), (1.7, 0.4), (1.5, 0.4)),)}
    )
    for x, y, to_x, to_y in [
        (0.13, 0.5, -1, 0),  # the outline's left end, 30 mm clear
        (0.4, 0.08, 0, -1),
        (0.7, 0.5, 1, 0),  # a keep-out on the right
        (1.0, 0.5, -1, 0),
        (1.4, 0.3, 1, 0),  # a keep-out area on the right, above and below
        (1.6, 0.45, 0, -1),
        (1.6, 0.15, 0, 1),
    ]:
        at = array([x, x + more * to_x]), array([y, y + more * to_y])
        np.testing.assert_array_equal(allowed(brief, *at), [True, False], err_msg=f"{x}, {y}")


def test_a_footprint_over_a_notch_is_off_the_specimen() -> None:
    slit = outline((0, 0), (2, 0), (2, 1), (1.02, 1), (1.0, 0.3), (0.98, 1), (0, 1))
    brief = surface_brief(slit, pads={"length": 0.2, "width": 0.1})
    # all four corners of the footprint lie on the specimen
    np.testing.assert_array_equal(allowed(brief, array([1.0, 1.0]), array([0.6, 0.2])), [False, True])


def test_usable_points_are_those_allowed() -> None:
    brief = surface_brief(PLATE, pads=hard_points([0.02, 0.3, 0.3, 1.9], [0.5, 0.01, 0.7, 0.4], width=0.1))
    np.testing.assert_array_equal(usable_points(brief), [2, 3])


def test_compatible_pads_keep_the_gap() -> None:
    brief = surface_brief(PLATE, pads={"length": 0.2, "width": 0.1, "gap": 0.04})
    x = array([0.3, 0.54, 0.3, 0.3 + 0.2 + 0.024, 0.3 + 0.2 + 0.0239])
    y = array([0.3, 0.3, 0.4399, 0.3 + 0.1 + 0.032, 0.3 + 0.1 + 0.0319])
    goes = compatible(brief, x, y)
    # 0 and 1 are 40 mm apart, 0 and 2 not quite; past a corner 24 mm and 32 mm make 40 mm
    np.testing.assert_array_equal(goes[0], [True, True, False, True, False])
    np.testing.assert_array_equal(goes, goes.T)


def test_compatible_pads_without_a_gap_may_touch() -> None:
    brief = surface_brief(PLATE, pads={"length": 0.2, "width": 0.1, "gap": 0.0})
    goes = compatible(brief, array([0.3, 0.5, 0.49]), array([0.3, 0.3, 0.39]))
    np.testing.assert_array_equal(goes, [[True, True, False], [True, True, False], [False, False, True]])
    points = surface_brief(PLATE, pads={"length": 0.0, "gap": 0.0})
    goes = compatible(points, array([0.3, 0.3, 0.3]), array([0.2, 0.2, 0.2001]))
    np.testing.assert_array_equal(goes, [[True, False, True], [False, True, True], [True, True, True]])


def test_compatible_is_what_the_words_say(brief: Brief) -> None:
    x, y = free_candidates(brief, 150)
    shapes = footprints(brief, x, y)
    apart = [[i == j or a.distance(b) >= brief.pads.gap for j, b in enumerate(shapes)] for i, a in enumerate(shapes)]
    np.testing.assert_array_equal(compatible(brief, x, y), apart)
    assert not np.all(apart)


def test_the_area_holds_what_is_allowed(brief: Brief) -> None:
    x, y = scattered(3000, 2)
    room = Room(brief)
    ok = room.allowed(x, y)
    inside = shapely.intersects_xy(room.area, x, y)
    np.testing.assert_array_equal(inside, ok)
    assert ok.any()


def test_nearest_places_are_allowed_and_nothing_allowed_is_nearer(brief: Brief) -> None:
    x, y = scattered(200, 3)
    room = Room(brief)
    near_x, near_y = room.nearest(x, y)
    assert room.allowed(near_x, near_y).all()
    if brief.pads.rows:
        # brute force along the rows
        at = np.linspace(0, 1, 4001)
        rows = [shapely.linestrings(np.column_stack([row.x, row.y])) for row in brief.pads.rows]
        places = np.concatenate(
            [shapely.get_coordinates(shapely.line_interpolate_point(row, at, normalized=True)) for row in rows]
        )
        assert (
            max(min(row.distance(shapely.Point(p)) for row in rows) for p in zip(near_x, near_y, strict=True)) < 1e-12
        )
    else:
        places = np.column_stack(scattered(30000, 4))
    places = places[room.allowed(places[:, 0], places[:, 1])]
    brute = np.hypot(x[:, None] - places[:, 0], y[:, None] - places[:, 1]).min(axis=1)
    # 0.12 % of the edge, 36 µm, may be lost at a corner that the edge rounds; brute force is up to 3 cm coarse
    away = np.hypot(x - near_x, y - near_y)
    assert (away - brute).max() < 4e-5
    assert (brute - away).max() < 0.03
    again_x, again_y = nearest_allowed(brief, near_x, near_y)
    np.testing.assert_allclose([again_x, again_y], [near_x, near_y], atol=1e-8)
    kept = room.allowed(x, y) & (not brief.pads.rows)
    np.testing.assert_array_equal(near_x[kept], x[kept])


def test_nothing_is_allowed_within_a_wide_keep_out() -> None:
    hatch = outline((0.4, 0.2), (1.6, 0.2), (1.6, 0.8), (0.4, 0.8))
    room = Room(surface_brief(PLATE, pads={"length": 0.1, "width": 0.1, "keep_out_areas": (hatch,)}))
    near_x, near_y = room.nearest(array([1.0, 1.5]), array([0.55, 0.45]))
    np.testing.assert_allclose([near_x, near_y], [[1.0, 1.65], [0.85, 0.45]], atol=4e-9)
    # 1.9 × 0.9 m of places less 1.3 × 0.7 m about the hatch
    assert room.area.area == pytest.approx(1.9 * 0.9 - 1.3 * 0.7, rel=1e-6)


def test_the_nearest_place_keeps_the_edge_from_a_corner_that_points_inward() -> None:
    """Point pads 0.3 m from a notch's tip: places about it lie on an arc, which the area draws by its chords."""
    notched = outline((0, 0), (2, 0), (2, 1), (1.2, 1), (1.0, 0.5), (0.8, 1), (0, 1))
    room = Room(surface_brief(notched, pads={"length": 0.0, "edge": 0.3}))
    angle = np.linspace(-2.3, -0.8, 40)
    x, y = room.nearest(1.0 + 0.29 * np.cos(angle), 0.5 + 0.15 * np.sin(angle))
    assert room.allowed(x, y).all()
    away = np.hypot(x - 1.0, y - 0.5)[y < 0.4]
    assert away.size > 10
    # the tangents that stand for the arc are at most 0.24 % further off than it
    assert away.max() < 0.3 * 1.0025


def test_candidates_on_a_row_are_even_and_reach_its_ends() -> None:
    keep = {"keep_out": ((1.0, 1.1),), "rows": (line((0.0, 0.2), (2.0, 0.6)),)}
    brief = surface_brief(PLATE, pads={"length": 0.2, "width": 0.1, **keep})
    x, y = free_candidates(brief, 14)
    assert x.size == 14
    np.testing.assert_allclose(y, 0.2 + 0.2 * x, atol=1e-9)
    for low, high in ((0.1, 0.9), (1.2, 1.9)):
        part = x[(x >= low - 1e-6) & (x <= high + 1e-6)]
        assert part.size >= 6
        # both within the slack of 1e-9 of the span
        np.testing.assert_allclose(part, np.linspace(low, high, part.size), atol=4e-9)


@pytest.mark.parametrize("about", [12, 60, 300])
def test_candidates_are_allowed_and_about_so_many(brief: Brief, about: int) -> None:
    x, y = free_candidates(brief, about)
    assert allowed(brief, x, y).all()
    assert 0.7 * about <= x.size <= 1.3 * about
    np.testing.assert_array_equal(np.lexsort((y, x)), np.arange(x.size))
    assert (np.hypot(x[:, None] - x, y[:, None] - y) + 9.0 * np.eye(x.size)).min() > 1e-6


def test_candidates_on_a_plate_are_a_symmetric_grid_up_to_its_ends() -> None:
    brief = surface_brief(PLATE, pads={"length": 0.2, "width": 0.1, "edge": 0.05})
    x, y = free_candidates(brief, 55)
    columns = np.unique(np.round(x, 6))
    np.testing.assert_allclose(columns, np.linspace(0.15, 1.85, columns.size), atol=1e-6)
    assert (y.min(), y.max()) == (pytest.approx(0.1, abs=1e-8), pytest.approx(0.9, abs=1e-8))
    for mirrored in (np.column_stack([2.0 - x, y]), np.column_stack([x, 1.0 - y])):
        away = np.hypot(mirrored[:, :1] - x, mirrored[:, 1:] - y).min(axis=1)
        assert away.max() < 1e-12


def test_candidates_of_a_strip_just_as_wide_as_the_pad() -> None:
    strip = outline((0.0, 0.0), (2.0, 0.0), (2.0, 0.1), (0.0, 0.1))
    x, y = free_candidates(surface_brief(strip, pads={"length": 0.2, "width": 0.1}), 5)
    np.testing.assert_allclose(x, [0.1, 0.55, 1.0, 1.45, 1.9], atol=4e-9)
    np.testing.assert_allclose(y, 0.05, atol=4e-9)
    none, _ = free_candidates(surface_brief(strip, pads={"length": 0.2, "width": 0.101}), 5)
    assert none.size == 0


def test_most_that_fit_counts_strips_and_rows() -> None:
    plate = {"length": 0.2, "width": 0.2, "gap": 0.0}
    # 10 along and 5 across fill the plate
    assert most_that_fit(surface_brief(PLATE, pads=plate)) == 50
    # a strip in which pads stand behind each other: 9 pitches of 240 mm from 0.1 m to 1.9 m are too many, 8 fit
    strip = outline((0.0, 0.0), (2.0, 0.0), (2.0, 0.3), (0.0, 0.3))
    assert most_that_fit(surface_brief(strip, pads={**plate, "gap": 0.04})) == 8
    # on a row at 45° the pitch is √2 · 0.2 m; places from (0.1, 0.1) to (0.9, 0.9)
    row = {"rows": (line((0.0, 0.0), (1.0, 1.0)),)}
    assert most_that_fit(surface_brief(PLATE, pads={**plate, **row})) == 5
    assert most_that_fit(surface_brief(PLATE, pads={**plate, "width": 1.2})) == 0
    assert most_that_fit(surface_brief(PLATE, pads={"length": 0.0, "gap": 0.0})) is None


def test_pads_that_pass_at_a_corner_are_not_forgotten() -> None:
    """Two pads at opposite corners, √(0.75² + 0.75²) of the gap apart: more than the gap, on a plate too small else."""
    small = outline((0.0, 0.0), (0.46, 0.0), (0.46, 0.26), (0.0, 0.26))
    brief = surface_brief(small, pads={"length": 0.2, "width": 0.1, "gap": 0.08})
    x, y = array([0.1, 0.36]), array([0.05, 0.21])
    assert allowed(brief, x, y).all()
    assert compatible(brief, x, y).all()
    bound = most_that_fit(brief)
    assert bound is not None
    assert bound >= 2


def test_nobody_packs_more_than_most_that_fit(brief: Brief) -> None:
    x, y = free_candidates(brief, 700)
    goes = compatible(brief, x, y)
    packed: list[int] = []
    for k in range(x.size):
        if goes[k, packed].all():
            packed.append(k)
    bound = most_that_fit(brief)
    assert bound is not None
    assert len(packed) <= bound
    # a bound of no use would be many times what fits
    assert bound < 3 * len(packed)


def test_rows_pass_a_corner_by_the_gap() -> None:
    """On a row at 45° two pads of 0.2 × 0.1 m with a gap pass where their corners are the gap apart."""
    brief = surface_brief(
        PLATE, pads={"length": 0.2, "width": 0.1, "gap": 0.1, "rows": (line((0.2, 0.2), (0.79, 0.79)),)}
    )
    # by bisection on the footprints themselves
    low, high = 0.0, 1.0
    for _ in range(50):
        middle = (low + high) / 2
        a, b = footprints(brief, array([0.2, 0.2 + middle]), array([0.2, 0.2 + middle]))
        low, high = (middle, high) if a.distance(b) < 0.1 else (low, middle)
    assert most_that_fit(brief) == int(0.59 / high) + 1 == 3


def test_most_side_by_side_is_never_too_few() -> None:
    draw = np.random.default_rng(5)
    for _ in range(40):
        goes = draw.random((8, 8)) < 0.6
        goes = goes | goes.T | np.eye(8, dtype=bool)
        best = max(
            size
            for size in range(1, 9)
            for chosen in combinations(range(8), size)
            if goes[np.ix_(chosen, chosen)].all()
        )
        assert best <= most_side_by_side(goes) <= 8
    blocks = ~np.kron(np.eye(3, dtype=bool), np.ones((4, 4), bool)) | np.eye(12, dtype=bool)
    assert most_side_by_side(blocks) == 3
