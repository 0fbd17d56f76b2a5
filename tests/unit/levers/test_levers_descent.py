"""The descent over whole numbers, on bowls whose lowest place is known."""

from __future__ import annotations

import numpy as np

from rigdesign.levers.descent import all_pairs, descend, moves_of, near_pairs
from rigdesign.levers.wiring import from_grouping


def bowl(rows):
    """A narrow valley along p + q = 7 with its lowest place at (3, 4, −2): single steps across it only climb."""
    p, q, r = rows.T
    return 50.0 * (p + q - 7) ** 2 + (p - 3.0) ** 2 + (r + 2.0) ** 2 + 1.0


def test_pairs_follow_a_valley_where_single_steps_stick():
    start = np.array([7, 0, 3])
    single = descend(start, moves_of(3, np.empty((0, 2), dtype=np.int64)), bowl, 10_000)
    both = descend(start, moves_of(3, all_pairs(3)), bowl, 10_000)
    assert single.is_settled
    assert single.value > 10.0
    assert both.steps.tolist() == [3, 4, -2]
    assert both.value == 1.0
    assert both.is_settled


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
