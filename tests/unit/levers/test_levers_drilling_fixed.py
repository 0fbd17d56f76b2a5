"""Drilling under pads that stay: pivots on the step, the jack near its place, and no better choice by brute force."""

from __future__ import annotations

import itertools

import numpy as np
import pytest
from factories import LEFT, RIGHT, table_load, two_supports
from lever_plans import arms, best_plan, brief_of, plan_by_hand

from rigdesign.findings import Refusal
from rigdesign.levers import Rig, build_rig
from rigdesign.levers.descent import Descended
from rigdesign.levers.drilling_fixed import NEAR_EQUAL, _words, drill_fixed
from rigdesign.levers.grouping import group_pads
from rigdesign.levers.hanging import hang_fixed
from rigdesign.levers.judging import build_judge
from rigdesign.pads.tube import build_tube


def fixed_plan(count, step, **changes):
    """The optimum of free pads, its places held."""
    return best_plan(brief_of(count, levers={"drill_step": step}, **changes), count, may_move=False)


@pytest.mark.parametrize(
    ("count", "step", "shear"), [(3, 0.02, None), (4, 0.03, 0.1), (5, 0.05, None), (5, 0.013, 0.12)]
)
def test_no_better_pivots_by_brute_force(count, step, shear):
    """Every choice of pivots up to three steps around the ones found: none has a lower band use by more than what
    counts as equal, and none of the equals brings the jack closer."""
    plan = fixed_plan(count, step, shear=shear)
    wiring, tube = group_pads(plan), build_tube(plan.target, plan.jack_x, count)
    drilled = drill_fixed(plan, wiring, tube)
    moves = np.array(list(itertools.product(range(-3, 4), repeat=wiring.n_levers)))
    hung = hang_fixed(wiring, drilled.steps[:, 0] + moves, step, plan.x, tube.total)
    use = build_judge(tube).use(hung.pad_x, hung.pad_force)
    shorter, longer = np.minimum(hung.a, hung.b), np.maximum(hung.a, hung.b)
    use[((shorter <= 0) | (longer > 5.0 * (1 + 1e-9) * shorter)).any(axis=1)] = np.inf
    # 0.1 % for the stations that the quick judge does not look at
    assert drilled.use <= use.min() * (1 + NEAR_EQUAL + 1e-3)
    equal = use <= use.min() * (1 + NEAR_EQUAL / 2)
    away = np.abs(hung.jack_x - plan.jack_x)
    assert abs(drilled.hung.jack_x[0] - plan.jack_x) <= away[equal].min() + 1e-9


@pytest.mark.parametrize("step", [0.001, 0.025])
def test_pads_stay_and_pivots_are_on_the_step(step):
    plan = fixed_plan(9, step, shear=0.12)
    rig = build_rig(plan)
    assert isinstance(rig, Rig)
    np.testing.assert_array_equal(rig.pad_x, plan.x)
    a, b = arms(rig)
    np.testing.assert_allclose(a / step, np.rint(a / step), rtol=1e-9)
    pieces = rig.trees[0].pieces
    for piece in pieces:
        pivot, inboard, outboard = piece.holes
        assert pivot.x == pytest.approx(inboard.x - inboard.u, abs=1e-12)
        assert outboard.x - inboard.x == pytest.approx(outboard.u - inboard.u, abs=1e-12)
    assert rig.trees[0].jack.x == pieces[0].pivot.x
    # at worst half a step away, unless that costs band use
    assert abs(rig.trees[0].jack.x - plan.jack_x) <= 0.5 * step + 1e-9 or step > 0.001
    assert np.all(b > 0)


def test_one_millimetre_costs_little():
    """Twelve pads that stay, 1 mm: no more than a jack half a step off its place costs by itself."""
    plan = fixed_plan(12, 0.001)
    tube = build_tube(plan.target, plan.jack_x, 12)
    before = float(tube.use(plan.x[None], plan.force[None])[0])
    displaced = tube.total * 0.0005 / (0.02 * plan.target.moment_peak)
    assert drill_fixed(plan, group_pads(plan), tube).use <= before + displaced


def test_two_supports():
    """The jack off the resultant changes the reactions; the drilled rig is judged with them."""
    brief = brief_of(
        6,
        levers={"drill_step": 0.02},
        specimen=two_supports(LEFT, 0.6, 2.9, RIGHT),
        loads=(table_load([0.2, 1.0, 1.0, 3.4], [-2600.0, -1900.0, -1200.0, -300.0]),),
    )
    plan = best_plan(brief, 6, may_move=False)
    rig = build_rig(plan)
    assert isinstance(rig, Rig)
    assert rig.trees[0].force == pytest.approx(plan.target.net.total)
    assert rig.trees[0].force < 0
    assert abs(rig.trees[0].jack.x - plan.jack_x) <= 0.021


def test_limits_hold_and_a_step_without_room_is_refused():
    """A ratio limit of 1.2 and 135 mm between the pads: 60 to 75 mm keeps it, no multiple of 50 mm does."""
    x, force = [1.0, 1.135], [2700.0, 2700.0]
    limits = {"ratio_limit": 1.2, "shortest_arm": 0.055}
    rig = build_rig(plan_by_hand(brief_of(2, levers={"drill_step": 0.01, **limits}), x, force, may_move=False))
    assert isinstance(rig, Rig)
    a, b = arms(rig)
    assert max(a[0], b[0]) / min(a[0], b[0]) <= 1.2
    refusal = build_rig(plan_by_hand(brief_of(2, levers={"drill_step": 0.05, **limits}), x, force, may_move=False))
    assert isinstance(refusal, Refusal)
    assert "whole drill steps" in refusal.text
    assert refusal.limit == "drill_step 50 mm"


def test_what_rounding_leaves_of_the_jacks_distance_is_not_said():
    words = [_words(count, 7, Descended(np.array([3]), 0.2, 7, True), away) for count, away in ((1, 9e-16), (3, 8e-4))]
    assert words[0].startswith("drilling: 1 place of the jack tried, 7 rigs")
    assert words[0].endswith("the jack stands where it was planned")
    assert words[1].startswith("drilling: 3 places")
    assert words[1].endswith("the jack stands 0.8 mm from where it was planned")
