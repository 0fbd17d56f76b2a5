"""Distances of many pairs of solids at once: moves, limits, degenerate shapes, and the other road."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import nnls
from scipy.spatial.transform import Rotation

from rigdesign.checks.hardware import distance as module
from rigdesign.checks.hardware.distance import CLOSED, distance, distances, slow_distance
from rigdesign.checks.hardware.shapes import box, cylinder, prism

STILL = np.zeros((2, 3))
places = st.floats(-2.0, 2.0, allow_nan=False)
sizes = st.floats(1e-3, 1.5)


def turned_box(size, angles, middle):
    turn = Rotation.from_euler("xyz", angles).as_matrix()
    return np.array(middle) + box(turn, tuple(-0.5 * np.array(size)), tuple(0.5 * np.array(size)))


def hulls_apart(first, second):
    """By weights on both sets, each summing to 1 by a heavy row, and made to do so exactly after that."""
    heavy = 1e3
    rows = np.zeros((5, len(first) + len(second)))
    rows[:3, : len(first)], rows[:3, len(first) :] = first.T, -second.T
    rows[3, : len(first)], rows[4, len(first) :] = heavy, heavy
    weights, _ = nnls(rows, np.array([0, 0, 0, heavy, heavy]))
    one, two = weights[: len(first)], weights[len(first) :]
    return float(np.linalg.norm(one @ first / one.sum() - two @ second / two.sum()))


solids = st.builds(turned_box, st.tuples(sizes, sizes, sizes), st.tuples(places, places, places),
                   st.tuples(places, places, places))  # fmt: skip


@settings(max_examples=60, deadline=None)
@given(solids, solids)
def test_turned_boxes_by_another_road(first, second):
    # 1e-6: the heavy rows above give way a little first
    assert distance(first, second) == pytest.approx(hulls_apart(first, second), abs=1e-6)
    assert distance(first, second) == pytest.approx(slow_distance(first, second, STILL), abs=1e-9)


@settings(max_examples=40, deadline=None)
@given(solids, solids, st.tuples(places, places, places), st.tuples(sizes, sizes, sizes))
def test_moves_are_those_of_the_box_of_displacements(first, second, low, size):
    """A solid that may move within a box is the hull of its corners at the box's corners."""
    moves = np.array([low, np.add(low, size)])
    spread = np.vstack(
        [second + np.array([moves[i, 0], moves[j, 1], moves[k, 2]]) for i in (0, 1) for j in (0, 1) for k in (0, 1)]
    )
    found = float(distances(first[None], second[None], moves[None])[0])
    assert found == pytest.approx(distance(first, spread), abs=1e-9)
    assert found == pytest.approx(slow_distance(first, second, moves), abs=1e-9)


def test_what_is_proven_beyond_its_limit_is_left_at_a_lower_bound():
    rng = np.random.default_rng(2)
    first = np.array(
        [turned_box(rng.uniform(0.01, 1, 3), rng.uniform(0, 3, 3), rng.uniform(-2, 2, 3)) for _ in range(80)]
    )
    second = np.array(
        [turned_box(rng.uniform(0.01, 1, 3), rng.uniform(0, 3, 3), rng.uniform(-2, 2, 3)) for _ in range(80)]
    )
    exact = distances(first, second)
    limit = np.full(80, 1.4)
    found = distances(first, second, beyond=limit)
    near = exact <= limit
    assert 20 < near.sum() < 70
    assert found[near] == pytest.approx(exact[near], abs=1e-9)
    assert (found[~near] > limit[~near]).all()
    assert (found[~near] <= exact[~near] + 1e-12).all()
    assert (found[~near] < exact[~near] - 1e-6).any()


def test_what_does_not_close_is_worked_out_the_other_way(monkeypatch):
    first, second = turned_box((1, 0.2, 0.3), (0.3, 0.2, 1), (0, 0, 0)), turned_box((0.4, 1, 1), (2, 1, 0), (1.5, 1, 1))
    exact = distance(first, second)
    monkeypatch.setattr(module, "MOST_STEPS", 1)
    called = []
    monkeypatch.setattr(module, "slow_distance", lambda *pair: called.append(pair) or slow_distance(*pair))
    assert distance(first, second) == pytest.approx(exact, abs=1e-9)
    assert len(called) == 1


@pytest.mark.parametrize("gap", [0.0, CLOSED / 4, 1e-6, 1e-3])
def test_flats_that_all_but_touch(gap):
    """Long flats side by side, as the levers of one tier are: many corners are equally near."""
    first = box(np.eye(3), (-2, 0, -0.06), (2, 0.01, 0.06))
    second = first + np.array([0.3, 0.01 + gap, 0.02])
    assert distance(first, second) == pytest.approx(gap, abs=1e-9)


def test_points_lines_and_repeated_corners():
    point, line = np.zeros((5, 3)), np.array([[1.0, -1, 0], [1, 2, 0], [1, 2, 0]])
    assert distance(point, line) == pytest.approx(1.0, abs=1e-9)
    assert distance(point, point + np.array([0, 0, 0.3])) == pytest.approx(0.3, abs=1e-9)
    assert distance(line, line + np.array([0, 0.5, 0])) == 0.0
    assert distances(np.empty((0, 8, 3)), np.empty((0, 8, 3))).shape == (0,)


def test_cylinders_are_circumscribed_and_prisms_are_extruded():
    start, end = np.array([0.2, -0.1, 0.4]), np.array([0.5, 0.7, 0.3])
    made = cylinder(start, end, 0.08)
    along = (end - start) / np.linalg.norm(end - start)
    off = (made - start) - np.outer((made - start) @ along, along)
    assert np.linalg.norm(off, axis=1) == pytest.approx(np.full(32, 0.08 / np.cos(np.pi / 16)))
    # the middle of every side touches the cylinder
    middles = 0.5 * (off[:16] + np.roll(off[:16], 1, axis=0))
    assert np.linalg.norm(middles, axis=1) == pytest.approx(np.full(16, 0.08))
    outline = np.array([[0.0, 0.0], [0.4, 0.1], [0.1, 0.3]])
    axes = Rotation.from_euler("z", 0.4).as_matrix().T
    block = prism(outline, axes, -0.01, 0.02)
    assert block @ axes.T == pytest.approx(np.vstack([np.c_[outline, [-0.01] * 3], np.c_[outline, [0.02] * 3]]))
