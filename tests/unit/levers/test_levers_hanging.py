"""Where everything hangs and what it carries, against sums done apart."""

from __future__ import annotations

import numpy as np

from rigdesign.levers.hanging import hang_fixed, hang_free
from rigdesign.levers.wiring import from_grouping

X = np.array([0.31, 0.84, 1.46, 2.2, 2.93])
FORCE = np.array([500.0, 900.0, 800.0, 450.0, 700.0])
WIRING = from_grouping(((1, (2, 3)), (4, 5)), X, FORCE)
# levers: 1 joins 1-3 and 4-5; 2 joins pad 1 and 2-3; 3 joins 4 and 5; 4 joins 2 and 3
ARMS = np.array([[600, 520, 430, 210, 390, 310, 300, 280], [601, 520, 431, 209, 392, 311, 299, 281]])


def test_rows_are_the_levers_meant():
    assert WIRING.ends.tolist() == [[1, 2], [-1, 3], [-4, -5], [-2, -3]]


def test_free_pads_by_hand():
    """First row: places and forces from the jack down, done by hand."""
    hung = hang_free(WIRING, ARMS, 0.001, 1.4, 3350.0)
    top = 3350.0 * 520 / 1120, 3350.0 * 600 / 1120
    second = top[0] * 210 / 640, top[0] * 430 / 640
    expected = [
        second[0], second[1] * 280 / 580, second[1] * 300 / 580, top[1] * 310 / 700, top[1] * 390 / 700,
    ]  # fmt: skip
    np.testing.assert_allclose(hung.pad_force[0], expected, rtol=1e-14)
    places = [0.8 - 0.43, 1.01 - 0.3, 1.01 + 0.28, 1.92 - 0.39, 1.92 + 0.31]
    np.testing.assert_allclose(hung.pad_x[0], places, rtol=1e-14)
    np.testing.assert_allclose(hung.pivot[0], [1.4, 0.8, 1.92, 1.01], rtol=1e-14)


def test_free_pads_keep_sum_and_first_moment():
    """Whatever the arms are, the pads' resultant is the jack's."""
    hung = hang_free(WIRING, ARMS, 0.001, 1.4, 3350.0)
    np.testing.assert_allclose(hung.pad_force.sum(axis=1), 3350.0, rtol=1e-14)
    np.testing.assert_allclose((hung.pad_force * hung.pad_x).sum(axis=1), 3350.0 * 1.4, rtol=1e-13)


def test_pads_that_stay_bring_the_jack_over_the_top_pivot():
    steps = np.array([[31, 22, 29, 13], [30, 21, 30, 12]])
    hung = hang_fixed(WIRING, steps, 0.02, X, 3350.0)
    np.testing.assert_array_equal(hung.pad_x, np.tile(X, (2, 1)))
    np.testing.assert_allclose(hung.pivot[0, 3], X[1] + 0.26, rtol=1e-14)
    np.testing.assert_allclose(hung.pivot[0, 1], X[0] + 0.44, rtol=1e-14)
    np.testing.assert_allclose(hung.pivot[0, 2], X[3] + 0.58, rtol=1e-14)
    np.testing.assert_allclose(hung.jack_x, X[0] + np.array([0.44 + 0.62, 0.42 + 0.60]), rtol=1e-14)
    np.testing.assert_allclose((hung.pad_force * X).sum(axis=1), 3350.0 * hung.jack_x, rtol=1e-13)
    pivot = hung.pivot
    ends = [(pivot[:, 1], pivot[:, 2]), (X[0], pivot[:, 3]), (X[3], X[4]), (X[1], X[2])]
    for row, (inboard, outboard) in enumerate(ends):
        np.testing.assert_allclose(hung.a[:, row] + hung.b[:, row], outboard - inboard, rtol=1e-13)
