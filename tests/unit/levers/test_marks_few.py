"""Few part marks: what may change, what may not, and against all there is on small rigs."""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from itertools import product

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_levers, make_pads, make_specimen, shape_load, table_load
from lever_plans import arms, best_plan, brief_of, plan_by_hand
from plan_trees import plan_of
from test_marks_bound import partitions

from rigdesign.checks import check
from rigdesign.checks.geometry import leans
from rigdesign.errors import InputError
from rigdesign.levers import build_rig
from rigdesign.levers.marks import alike, few_marks
from rigdesign.levers.marks.few import MARGIN
from rigdesign.levers.marks.trials import Trials
from rigdesign.levers.model import Rig


@cache
def free_rig(count: int = 12, **levers: float) -> Rig:
    """Free pads under an elliptical load, moment and shear judged."""
    rig = build_rig(best_plan(brief_of(count, shear=0.12, levers=dict(levers)), count))
    assert isinstance(rig, Rig)
    return rig


@cache
def spaced_rig() -> Rig:
    """Eight pads that stay, 0.4 m apart, under a load that grows to the tip."""
    x = 0.3 + 0.4 * np.arange(8)
    brief = make_brief(
        specimen=make_specimen(left=0.0, right=3.4),
        loads=(table_load([0.0, 3.4], [900.0, 1500.0]),),
        pads=make_pads(count=8, places="fixed", stations=x, length=0.05, gap=0.0),
        levers=make_levers(drill_step=0.001, ratio_limit=5.0),
        acceptance=make_acceptance(0.05, 0.3),
    )
    force = np.array([430.0, 420.0, 450.0, 490.0, 530.0, 560.0, 600.0, 600.0])
    rig = build_rig(plan_by_hand(brief, x, force, may_move=False))
    assert isinstance(rig, Rig)
    return rig


def holes_of(rig: Rig) -> np.ndarray:
    """All outer holes seen from their pivots [m]."""
    return np.array([(h.u, h.v) for tree in rig.trees for piece in tree.pieces for h in piece.ends])


@pytest.mark.parametrize("tolerance", [0.01, 0.02, 0.06])
def test_free_pads_keep_bands_limits_steps_and_the_first_moment(tolerance):
    rig = free_rig()
    few = few_marks(rig, tolerance)
    before, after = check(rig), check(few.rig)
    assert before.accepted
    assert after.accepted
    assert few.after.different < few.before.different == len(alike(rig))
    assert few.groups == alike(few.rig)
    assert few.least <= few.after.different == len(few.groups)
    # nothing moved further than allowed, and something did
    off = np.abs(holes_of(few.rig) - holes_of(rig)).max()
    assert 0 < off <= tolerance + 1e-9
    a, b = arms(few.rig)
    np.testing.assert_allclose(np.concatenate([a, b]) * 1e3, np.rint(np.concatenate([a, b]) * 1e3), atol=1e-6)
    assert few.rig.trees[0].jack == rig.trees[0].jack
    assert after.jack_offset == pytest.approx(before.jack_offset, abs=1e-12)
    assert after.moment_sum_residual < 1e-12
    assert max(lean.size for lean in leans(few.rig)) < 1e-9


def test_the_figures_are_those_of_the_check():
    few = few_marks(free_rig(), 0.03)
    for tally, checked in ((few.before, check(free_rig())), (few.after, check(few.rig))):
        # the check looks between the stations too: 1e-3 of the band is kept free for that
        assert tally.band_use == pytest.approx(checked.band_use, abs=MARGIN)
        assert tally.moment == pytest.approx(checked.moment_error_peak, rel=1e-2)
        assert tally.shear == pytest.approx(checked.shear_error_peak, rel=1e-6)
        assert tally.torsion is None
    assert f"{few.before.band_use:.3g} before and {few.after.band_use:.3g} after" in few.words
    assert few.rig.words.endswith(few.words)


def test_more_tolerance_and_more_band_give_no_more_marks():
    counts = [few_marks(free_rig(), tolerance).after.different for tolerance in (0.002, 0.01, 0.04)]
    assert counts == sorted(counts, reverse=True)
    assert counts[0] > counts[-1]
    narrow = few_marks(free_rig(), 0.04, limit=1.05 * check(free_rig()).band_use)
    assert check(narrow.rig).band_use <= 1.05 * check(free_rig()).band_use
    assert narrow.after.different > counts[-1]


def test_against_all_partitions_and_all_arms_of_four_pads():
    rig = free_rig(4, drill_step=0.01)
    tolerance, limit = 0.02, 0.98
    trials = Trials(rig, tolerance, limit * (1 - MARGIN))
    drilled = trials.drilled
    every = drilled + np.array(list(product(range(-2, 3), repeat=drilled.size)))
    values = trials.values(every, ())
    best: dict[int, float] = {}
    for groups in partitions([0, 1, 2]):
        same = np.ones(len(every), bool)
        for first, *others in groups:
            for row in others:
                same &= (every[:, trials.columns[first]] == every[:, trials.columns[row]]).all(axis=1)
        good = same & (values <= trials.top)
        if good.any():
            best[len(groups)] = min(best.get(len(groups), np.inf), float(values[good].min()))
    few = few_marks(rig, tolerance, limit)
    assert few.after.different == min(best)
    # a descent is not proven to end in the very best
    assert few.after.band_use <= 1.02 * best[min(best)]


def test_pads_that_stay_keep_their_outer_holes():
    rig = spaced_rig()
    few = few_marks(rig, 0.03)
    assert few.after.different < few.before.different
    assert check(few.rig).accepted
    np.testing.assert_array_equal(few.rig.pad_x, rig.pad_x)
    off = np.abs(holes_of(few.rig) - holes_of(rig))
    assert off.max() <= 0.03 + 1e-9
    # the lowest levers are as long as their pads are apart, their pivots on the step from hole A
    low = [p for p in few.rig.trees[0].pieces if all(h.joins.startswith("pad") for h in p.ends)]
    assert {round(p.ends[1].u - p.ends[0].u, 9) for p in low} == {0.4}
    steps = np.array([-p.ends[0].u / 0.001 for p in few.rig.trees[0].pieces])
    np.testing.assert_allclose(steps, np.rint(steps), atol=1e-6)
    assert max(lean.size for lean in leans(few.rig)) < 1e-9


def test_a_jack_that_the_brief_places_stays():
    rig = spaced_rig()
    brief = rig.plan.target.brief
    at = rig.trees[0].jack.x
    placed = replace(
        rig,
        plan=replace(rig.plan, target=replace(rig.plan.target, brief=replace(brief, jack=replace(brief.jack, at=at)))),
    )
    assert few_marks(placed, 0.03).rig.trees[0].jack.x == pytest.approx(at, abs=1e-9)
    assert few_marks(rig, 0.03).rig.trees[0].jack.x != pytest.approx(at, abs=1e-4)


@pytest.mark.parametrize("may_move", [True, False])
def test_levers_and_plates_in_plan(may_move):
    x = np.array([0.0, 0.05, 0.30, 0.90, 0.96, 1.21, 1.70, 1.76, 2.00])
    y = np.array([-0.2, 0.22, 0.0, -0.21, 0.2, 0.01, -0.22, 0.23, 0.02])
    force = np.array([310.0, 290.0, 400.0, 305.0, 300.0, 410.0, 280.0, 270.0, 380.0])
    if not may_move:
        # triangles that agree exactly
        x, y = np.tile(x[:3], 3) + np.repeat([0.0, 0.9, 1.7], 3), np.tile(y[:3], 3)
    plan = plan_of(
        x, y, force, may_move, plates=True, grouping=((1, 2, 3), ((4, 5, 6), (7, 8, 9))), drill_step=0.002,
        pads={"count": 9, "places": "free" if may_move else "fixed"},
    )  # fmt: skip
    rig = build_rig(plan)
    assert isinstance(rig, Rig)
    few = few_marks(rig, 0.02)
    assert [p.kind for p in rig.trees[0].pieces].count("plate") >= 3
    assert few.after.different < few.before.different
    assert few.after.torsion is not None
    before, after = check(rig), check(few.rig)
    assert after.band_use <= max(1.0, before.band_use)
    broken = [{f.text for f in c.findings if f.severity == "failure" and f.stage != "statics"} for c in (before, after)]
    assert broken[1] <= broken[0]
    assert few.after.torsion == pytest.approx(after.torsion_error_peak, rel=1e-2, abs=1e-6)
    if may_move:
        assert after.moment_sum_residual < 1e-12
    else:
        np.testing.assert_array_equal(few.rig.pad_y, rig.pad_y)


def test_a_rig_that_is_not_accepted_is_not_made_worse():
    rig = build_rig(best_plan(brief_of(5, acceptance=make_acceptance(0.004, None)), 5))
    before = check(rig).band_use
    assert before > 1
    few = few_marks(rig, 0.02)
    assert check(few.rig).band_use <= before * (1 + 1e-6)


def test_where_nothing_can_be_alike_the_rig_stays_as_it_is():
    rig = free_rig(4)
    few = few_marks(rig, 0.0004)
    assert few.rig is rig
    assert few.after == few.before
    assert few.words == "part marks: nothing to make alike within 0.400 mm"
    alone = build_rig(best_plan(brief_of(1, acceptance=make_acceptance(2.0, None)), 1))
    assert few_marks(alone, 0.02).groups == ()


def test_pad_limits_are_kept():
    rig = free_rig()
    largest = float(np.abs(check(rig).statics.pad_force).max()) * 1.001
    brief = rig.plan.target.brief
    held = replace(brief, pads=replace(brief.pads, largest_force=largest))
    limited = replace(rig, plan=replace(rig.plan, target=replace(rig.plan.target, brief=held)))
    assert np.abs(check(few_marks(limited, 0.05).rig).statics.pad_force).max() <= largest * (1 + 1e-9)
    assert np.abs(check(few_marks(rig, 0.05).rig).statics.pad_force).max() > largest


def test_a_downward_load_is_no_different():
    up, down = (build_rig(best_plan(brief_of(8, loads=(shape_load(total=total),)), 8)) for total in (5400.0, -5400.0))
    one, other = few_marks(up, 0.03), few_marks(down, 0.03)
    assert one.groups == other.groups
    np.testing.assert_allclose(holes_of(one.rig), holes_of(other.rig), atol=1e-12)
    assert other.rig.trees[0].force < 0


def test_holes_off_the_step_and_two_jacks_are_refused():
    rig = free_rig(4)
    piece = rig.trees[0].pieces[1]
    off = replace(piece, holes=(*piece.holes[:2], replace(piece.holes[2], u=piece.holes[2].u + 3e-4)))
    tree = replace(rig.trees[0], pieces=(rig.trees[0].pieces[0], off, *rig.trees[0].pieces[2:]))
    with pytest.raises(InputError, match="lever 2: a hole is not on the drill step"):
        few_marks(replace(rig, trees=(tree,)), 0.02)
    with pytest.raises(InputError, match="one jack alone: 2 jacks"):
        few_marks(replace(rig, trees=(rig.trees[0], rig.trees[0])), 0.02)


def test_the_same_rig_gives_the_same_marks_twice():
    one, other = (few_marks(free_rig(), 0.05) for _ in range(2))
    assert one.words == other.words
    np.testing.assert_array_equal(holes_of(one.rig), holes_of(other.rig))
