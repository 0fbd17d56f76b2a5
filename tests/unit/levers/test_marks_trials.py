"""What rows of steps are worth in the search for few part marks."""

from __future__ import annotations

import numpy as np
import pytest
from test_marks_few import free_rig, spaced_rig

from rigdesign.checks import check
from rigdesign.levers.marks.exact import Exact
from rigdesign.levers.marks.trials import Trials

ALONE = ((0,), (1,), (2,), (3,), (4,), (5,), (6,))


def test_a_row_is_worth_its_band_use():
    trials = Trials(spaced_rig(), 0.03, 0.9)
    assert trials.values(trials.drilled[None], ALONE)[0] == pytest.approx(check(spaced_rig()).band_use, rel=1e-3)
    assert trials.use_before == pytest.approx(check(spaced_rig()).band_use, rel=1e-6)


def test_outer_holes_that_follow_what_moves_below_keep_the_tolerance_too():
    """Lever 2 has 4 mm to spare, and the pivots below it move apart: its arm to B grows by what they move."""
    trials = Trials(spaced_rig(), 0.004, 10.0)
    levers = spaced_rig().trees[0].pieces
    below = [int(hole.joins.split()[1]) - 1 for hole in levers[1].ends]
    row = trials.drilled.copy()
    row[below[1]] += 4
    assert np.isfinite(trials.values(row[None], ALONE)[0])
    row[below[0]] -= 4
    assert trials.values(row[None], ALONE)[0] == np.inf
    again = trials.drilled.copy()
    again[below[1]] += 5
    assert trials.values(again[None], ALONE)[0] == np.inf


def test_pieces_that_must_be_alike_are():
    trials = Trials(spaced_rig(), 0.05, 10.0)
    low = [k for k, ends in enumerate(trials.branches.ends) if all(end < 0 for end in ends)]
    groups = (tuple(low[:2]), *((k,) for k in range(7) if k not in low[:2]))
    assert trials.drilled[low[0]] != trials.drilled[low[1]]
    assert trials.values(trials.drilled[None], groups)[0] == np.inf
    row = trials.drilled.copy()
    row[low[0]] = row[low[1]]
    assert np.isfinite(trials.values(row[None], groups)[0])


def test_what_many_stations_do_not_accept_is_not_accepted(monkeypatch):
    trials = Trials(free_rig(), 0.02, 0.9)
    assert trials.is_accepted(trials.drilled, ())
    monkeypatch.setattr(Exact, "use", lambda *_: 0.91)
    assert not trials.is_accepted(trials.drilled, ())


def test_shares_of_pads_are_not_left(monkeypatch):
    trials = Trials(free_rig(), 0.02, 0.9)
    assert trials.is_accepted(trials.drilled, ())
    monkeypatch.setattr(Exact, "shares_missed", lambda *_: 0.01)
    assert not trials.is_accepted(trials.drilled, ())


def test_the_reach_is_whole_steps():
    assert [Trials(free_rig(), tolerance, 1.0).reach for tolerance in (0.0009, 0.001, 0.0199)] == [0, 1, 19]
