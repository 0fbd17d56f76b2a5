"""Least distances of convex solids against closed forms and against solvers of other kinds.

Closed forms: the distance of two skew lines is |(q − p)·(d × e)| / |d × e| (H. S. M. Coxeter, Introduction to
Geometry, 2nd ed., 1969, §12; from memory), of a point and a box that of the point cut off at the box.  Solvers: bounded
least squares by an active set in the boxes' own coordinates (C. L. Lawson and R. J. Hanson, Solving Least Squares
Problems, 1974, the method BVLS of SciPy), and the linear programme of a plane between two sets of points.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.optimize import linprog, lsq_linear
from scipy.spatial.transform import Rotation

from rigdesign.checks.hardware.distance import distance, distances
from rigdesign.checks.hardware.shapes import SIDES, box, cylinder

WITHIN = 1e-9  # m, what the distance is said to be good to
PRISM = 1 / math.cos(math.pi / SIDES) - 1  # how far a prism of so many sides reaches beyond its cylinder, of the radius


def boxes_apart(middle, turn, half):
    """Distance of two boxes by bounded least squares: of the points m + R t with |t| ≤ h, those nearest each other."""
    system = np.hstack([turn[0].T, -turn[1].T])
    bound = np.concatenate(half)
    found = lsq_linear(system, middle[1] - middle[0], (-bound, bound), method="bvls", tol=1e-15)
    return float(np.linalg.norm(system @ found.x - (middle[1] - middle[0])))


def plane_between(first, second):
    """Half the widest gap, along the axes, that a plane n·x = c with |n_i| ≤ 1 leaves between two sets; 0 for none."""
    rows = np.vstack([
        np.column_stack([first, -np.ones(len(first)), np.ones(len(first))]),
        np.column_stack([-second, np.ones(len(second)), np.ones(len(second))]),
    ])  # fmt: skip
    found = linprog([0, 0, 0, 0, -1], rows, np.zeros(len(rows)), bounds=[(-1, 1)] * 3 + [(None, None), (0, None)])
    return -float(found.fun)


def random_boxes(seed, n, spread):
    rng = np.random.default_rng(seed)
    for _ in range(n):
        middle = rng.uniform(-spread, spread, (2, 3))
        turn = Rotation.random(2, random_state=rng).as_matrix()
        # flats, bars and blocks: sizes over three decades
        half = 10.0 ** rng.uniform(-2.5, 0.3, (2, 3))
        yield middle, turn, half


def corners(middle, turn, half):
    return middle + box(turn, tuple(-half), tuple(half))


def test_turned_boxes_agree_with_bounded_least_squares():
    every = list(random_boxes(7, 300, 1.2))
    first = np.array([corners(m[0], r[0], h[0]) for m, r, h in every])
    second = np.array([corners(m[1], r[1], h[1]) for m, r, h in every])
    expected = np.array([boxes_apart(*each) for each in every])
    assert (expected > 0.01).sum() > 150
    assert (expected < 1e-9).sum() > 20
    # below 1e-7 the other solver cannot tell a touch from an overlap
    assert distances(first, second) == pytest.approx(expected, abs=1e-7)


def test_an_overlap_is_found_where_no_plane_lies_between():
    for middle, turn, half in random_boxes(11, 120, 1.0):
        first, second = corners(middle[0], turn[0], half[0]), corners(middle[1], turn[1], half[1])
        gap = plane_between(first, second)
        found = distance(first, second)
        # a plane that leaves 2 × gap along n with |n| ≤ √3 proves at least 2/√3 × gap
        assert found >= 2 / math.sqrt(3) * gap - WITHIN
        assert (found > 1e-8) == (gap > 1e-9)


@pytest.mark.parametrize(
    ("low", "high", "expected"),
    [
        ((0.7, 0.1, 0.1), (0.9, 0.2, 0.2), 0.2),  # face to face
        ((0.7, 0.6, 0.0), (0.9, 0.9, 0.1), math.hypot(0.2, 0.2)),  # edge to edge
        ((0.7, 0.5, 0.5), (1.0, 0.8, 0.9), math.sqrt(0.04 + 0.01 + 0.04)),  # corner to corner
        ((0.5, 0.0, 0.0), (0.9, 0.2, 0.2), 0.0),  # faces touch
        ((0.5, 0.4, 0.3), (0.9, 0.6, 0.6), 0.0),  # corners touch
        ((0.1, 0.1, 0.1), (0.2, 0.2, 0.2), 0.0),  # one inside the other
        ((0.2, -0.3, 0.1), (0.3, 0.9, 0.2), 0.0),  # one through the other
        ((0.1, 0.1, 0.35), (0.2, 0.2, 0.35), 0.05),  # a flat one without thickness
        ((0.1, 0.9, 0.35), (0.1, 0.9, 0.35), math.hypot(0.5, 0.05)),  # a point
    ],
)
def test_boxes_along_the_axes(low, high, expected):
    fixed = box(np.eye(3), (0, 0, 0), (0.5, 0.4, 0.3))
    other = box(np.eye(3), low, high)
    assert distance(fixed, other) == pytest.approx(expected, abs=WITHIN)
    assert distance(other, fixed) == pytest.approx(expected, abs=WITHIN)
    far = np.array([812.0, -455.0, 33.0])
    # 1e-12 of the place is what its own rounding leaves
    assert distance(fixed + far, other + far) == pytest.approx(expected, abs=2e-9)


def test_crossing_cylinders_are_as_far_apart_as_their_axes_less_their_radii():
    rng = np.random.default_rng(5)
    for _ in range(60):
        d, e = rng.normal(size=(2, 3))
        normal = np.cross(d, e) / np.linalg.norm(np.cross(d, e))
        apart, radii = rng.uniform(0.2, 0.5), rng.uniform(0.01, 0.09, 2)
        p = rng.uniform(-1, 1, 3)
        q = p + apart * normal + 0.2 * d - 0.1 * e
        assert abs((q - p) @ normal) == pytest.approx(apart)
        found = distance(cylinder(p - 3 * d, p + 3 * d, radii[0]), cylinder(q - 3 * e, q + 3 * e, radii[1]))
        exact = apart - radii.sum()
        # prisms about the cylinders are never farther apart, nor nearer by more than their corners
        assert exact - PRISM * radii.sum() - WITHIN <= found <= exact + WITHIN


def test_parallel_and_coaxial_cylinders():
    up = np.array([0.0, 0.0, 1.0])
    first = cylinder(0 * up, 2 * up, 0.1)
    aside = np.array([0.31, 0.0, 0.0])
    found = distance(first, cylinder(aside + 0.5 * up, aside + 3 * up, 0.05))
    assert 0.16 - PRISM * 0.15 - WITHIN <= found <= 0.16 + WITHIN
    assert distance(first, cylinder(2.3 * up, 4 * up, 0.05)) == pytest.approx(0.3, abs=WITHIN)
    assert distance(first, cylinder(0.3 * up, 0.4 * up, 0.01)) == 0.0
