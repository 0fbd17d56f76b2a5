"""The descent over whole numbers, on bowls whose lowest place is known."""

from __future__ import annotations

import numpy as np

from rigdesign.levers.descent import all_pairs, descend, descend_again, moves_of, near_pairs
from rigdesign.levers.wiring import from_grouping


def bowl(rows):
    """A narrow valley along p + q = 7 with its lowest place at (3, 4, −2): single steps across it only climb."""
    p, q, r = rows.T
    return 50.0 * (p + q - 7) ** 2 + (p - 3.0) ** 2 + (r + 2.0) ** 2 + 1.0


def test_pairs_follow_a_valley_where_single_steps_stick():
    stuck = np.array([7, 0, -2])
    single = moves_of(3, np.empty((0, 2), dtype=np.int64))
    assert bowl(stuck + single).min() > bowl(stuck[None])[0]
    found = descend(np.array([7, 0, 3]), moves_of(3, all_pairs(3)), bowl, 10_000)
    assert found.steps.tolist() == [3, 4, -2]
    assert found.value == 1.0
    assert found.is_settled


def test_moves_two_at_a_time_before_it_settles():
    """Single steps alone: the descent must put two of them together to follow the valley."""
    found = descend(np.array([7, 0, 3]), moves_of(3, np.empty((0, 2), dtype=np.int64)), bowl, 10_000)
    assert found.steps.tolist() == [3, 4, -2]


def holes(rows):
    """Two bowls: a broad one around (0, 0) down to 5, and a lower, narrow one around (5, 4) down to 1."""
    return np.minimum(5.0 + (rows**2).sum(axis=1), 1.0 + 9.0 * ((rows - [5, 4]) ** 2).sum(axis=1))


def test_descends_again_from_elsewhere():
    moves = moves_of(2, all_pairs(2), far=2)
    first = descend(np.array([-2, 1]), moves, holes, 10_000)
    assert first.value == 5.0
    again = descend_again(first, moves, holes, 10_000)
    assert again.value == 1.0
    assert again.steps.tolist() == [5, 4]
    assert again.judged > first.judged


def test_work_is_counted_and_bounded():
    moves = moves_of(3, all_pairs(3))
    found = descend(np.array([400, -393, 90]), moves, bowl, 5 * len(moves))
    assert not found.is_settled
    assert found.judged == 1 + 5 * len(moves)


def test_near_pairs_are_those_of_kin():
    """Arms of one lever, of a lever and what hangs from it, and of two that hang side by side."""
    x = np.arange(6.0)
    wiring = from_grouping((((1, 2), 3), ((4, 5), 6)), x, np.ones(6))
    pairs = {tuple(pair) for pair in near_pairs(wiring, 1).tolist()}
    assert pairs == {(0, 1), (0, 2), (1, 2), (1, 3), (2, 4)}
    assert (2, 3) in {tuple(pair) for pair in near_pairs(wiring, 2).tolist()}
