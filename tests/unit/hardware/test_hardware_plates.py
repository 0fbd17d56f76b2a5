"""Three-point plates: the worst line through the pivot, by sampling, and the thinnest plate."""

import numpy as np
import pytest
from factories import make_hardware

from rigdesign.hardware.catalogue import sections
from rigdesign.hardware.plates import PlateTask, edge_radius, outline, size_plate, worst_line
from rigdesign.hardware.sizing import make_shop

HOLES = np.array([[0.0, 0.0], [-0.30, -0.05], [0.22, -0.12], [0.06, 0.28]])


def loads():
    """Point loads in balance about the pivot, which carries their sum."""
    system = np.vstack([np.ones(3), HOLES[1:].T])
    points = np.linalg.solve(system, [6000.0, 0.0, 0.0])
    assert np.all(points > 0)
    return np.concatenate([[6000.0], points])


def task():
    return PlateTask(HOLES, loads(), np.array([0.016, 0.010, 0.010, 0.012]))


def test_the_outline_keeps_its_distance_from_every_hole():
    from shapely import Point, Polygon

    corners = outline(HOLES, 0.03)
    plate = Polygon(corners)
    assert plate.exterior.is_ccw
    for u, v in HOLES:
        assert plate.contains(Point(u, v))
        assert plate.exterior.distance(Point(u, v)) >= 0.03 - 1e-9


def test_the_worst_line_is_that_of_a_fine_sampling():
    asked = task()
    corners = outline(HOLES, 0.03)
    moment, width = worst_line(asked, corners, asked.rods)
    from shapely import LineString, Point, Polygon
    from shapely.ops import unary_union

    steel = Polygon(corners).difference(
        unary_union([Point(u, v).buffer(d / 2, 256) for (u, v), d in zip(HOLES, asked.rods, strict=True)])
    )
    ratios = []
    for angle in np.linspace(0, np.pi, 1441, endpoint=False):
        along, normal = np.array([np.cos(angle), np.sin(angle)]), np.array([-np.sin(angle), np.cos(angle)])
        arms = HOLES[1:] @ normal
        ratios.append(
            float(np.maximum(arms, 0) @ asked.loads[1:]) / steel.intersection(LineString([-along, along])).length
        )
    # the sampling misses the exact angle by at most 0.06 degrees and shapely's circles are polygons
    assert moment / width == pytest.approx(max(ratios), rel=2e-3)


def test_the_thinnest_plate_that_passes():
    hardware = make_hardware()
    shop, stock = make_shop(hardware), sections(hardware, "plate")
    found = size_plate(task(), stock, shop)
    assert found.failure is None
    assert found.radius == edge_radius(task().rods)
    thinner = tuple(s for s in stock if s.depth < found.section.depth)
    assert size_plate(task(), thinner, shop).failure is not None
