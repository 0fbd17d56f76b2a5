"""Free places: bounds, limits, several bands, the jack off the resultant, weight."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import (
    LEFT,
    RIGHT,
    inertia_load,
    make_acceptance,
    make_brief,
    make_pads,
    make_specimen,
    make_weight,
    point_loads,
    shape_load,
    table_load,
    two_supports,
)

from rigdesign.brief.model import Brief, JackRules, Region
from rigdesign.findings import Refusal
from rigdesign.pads import PadPlan, free, plan_pads
from rigdesign.pads.limits import allowed_stretches, fitted, force_limits, most_that_fit, packed, violations, with_room
from rigdesign.pads.stair import fewest_steps
from rigdesign.pads.tube import MOST_BREAKS, build_tube
from rigdesign.target import build_target


def planned(brief: Brief) -> PadPlan:
    plan = plan_pads(build_target(brief))
    assert isinstance(plan, PadPlan), plan
    assert plan.force.sum() == pytest.approx(plan.target.net.total, rel=1e-12)
    assert plan.force @ plan.x == pytest.approx(plan.target.net.total * plan.jack_x, rel=1e-11)
    assert (np.diff(plan.x) > 0).all()
    sign = np.sign(plan.target.resultant)
    assert violations(plan.target, plan.x, sign * plan.force) == pytest.approx(0.0, abs=1e-6)
    assert plan.proof.band_use_least <= plan.proof.band_use_found <= plan.proof.band_use * (1 + 1e-12)
    return plan


def refused(brief: Brief, count: int | None = None) -> Refusal:
    refusal = plan_pads(build_target(brief), count)
    assert isinstance(refusal, Refusal), refusal
    return refusal


def test_two_bands_stay_near_the_bound() -> None:
    plan = planned(make_brief(pads=make_pads(count=8)))
    assert plan.proof.gap < 0.02
    assert plan.proof.evenness < plan.proof.evenness_before


def test_largest_force_binds_and_is_kept() -> None:
    free = planned(make_brief(acceptance=make_acceptance(shear=None)))
    largest = float(np.sort(free.force)[-1]) * 0.97
    brief = make_brief(pads=make_pads(largest_force=largest), acceptance=make_acceptance(shear=None))
    plan = planned(brief)
    assert plan.force.max() <= largest * (1 + 1e-9)
    assert plan.proof.band_use > free.proof.band_use


def test_limits_hold_at_the_peak_of_the_test() -> None:
    free = planned(make_brief(acceptance=make_acceptance(shear=None)))
    largest = float(free.force.max()) * 0.97 * 1.5
    brief = make_brief(peak=1.5, pads=make_pads(largest_force=largest), acceptance=make_acceptance(shear=None))
    assert planned(brief).force.max() * 1.5 <= largest * (1 + 1e-9)


def test_pressure_limit_is_a_force_limit() -> None:
    brief = make_brief(pads=make_pads(width=0.2, largest_pressure=38e3), acceptance=make_acceptance(shear=None))
    assert planned(brief).force.max() <= 38e3 * 0.12 * 0.2 * (1 + 1e-9)


def test_keep_out_moves_pads_off_it() -> None:
    free = planned(make_brief(acceptance=make_acceptance(shear=None)))
    hole = (float(free.x[2]) - 0.05, float(free.x[2]) + 0.07)
    plan = planned(make_brief(pads=make_pads(keep_out=(hole,)), acceptance=make_acceptance(shear=None)))
    assert (np.abs(plan.x - np.mean(hole)) >= (hole[1] - hole[0]) / 2 + 0.06 - 1e-9).all()
    assert plan.proof.band_use > free.proof.band_use


def test_gap_between_footprints_is_kept_at_a_narrow_load() -> None:
    narrow = shape_load("uniform", 5400.0, start_x=1.4, end_x=2.0)
    plan = planned(make_brief(loads=(narrow,), acceptance=make_acceptance(moment=0.05, shear=None)))
    assert np.diff(plan.x).min() >= 0.16 - 1e-9


def test_fewest_comes_out_of_the_same_path() -> None:
    brief = make_brief(pads=make_pads(count="fewest"), acceptance=make_acceptance(moment=0.004, shear=None))
    plan = planned(brief)
    assert plan.proof.band_use <= 1
    one_less = plan_pads(plan.target, plan.n_pads - 1)
    assert isinstance(one_less, PadPlan)
    assert one_less.proof.band_use_least > 1


def test_under_test_forbidden_in_a_region() -> None:
    rules = make_acceptance(0.02, None).rules
    strict = (replace(rules[0], amount=0.0), replace(rules[1], amount=0.03))
    accept = make_acceptance(0.02, None, regions=(Region("region 1", 0.3, 1.6, strict),))
    plan = planned(make_brief(pads=make_pads(count=9), acceptance=accept))
    tube = build_tube(plan.target, plan.jack_x, 9, 200)
    inside = (tube.x > 0.31) & (tube.x < 1.59)
    path = np.maximum(plan.x[None] - tube.x[:, None], 0) @ plan.force
    least = (path - tube.moment)[inside].min() / plan.target.moment_peak
    # no band is narrower than 0.05 % of the peak
    assert least >= -0.0005 * plan.proof.band_use * (1 + 1e-3)


def test_even_aim_keeps_the_bands_and_evens_out_the_forces() -> None:
    closest = planned(make_brief(pads=make_pads(count=8)))
    even = planned(make_brief(pads=make_pads(count=8, aim="even")))
    assert even.proof.band_use <= 1
    assert even.proof.evenness <= closest.proof.evenness


def test_jack_off_the_resultant_costs_moment_at_the_root() -> None:
    brief = make_brief(jack=JackRules(at=1.6, step=None), acceptance=make_acceptance(shear=None))
    plan = planned(brief)
    moved = abs(plan.target.net.total) * (1.6 - plan.target.net.first_moment / plan.target.net.total)
    assert plan.jack_x == 1.6
    assert plan.proof.band_use >= abs(moved) / (0.02 * plan.target.moment_peak) * (1 - 1e-9)


def test_jack_step_takes_the_nearest_place() -> None:
    plan = planned(make_brief(jack=JackRules(at=None, step=0.05), acceptance=make_acceptance(shear=None)))
    resultant = plan.target.net.first_moment / plan.target.net.total
    assert plan.jack_x == pytest.approx(round(resultant / 0.05) * 0.05)
    assert abs(plan.jack_x - resultant) <= 0.025


def test_displaced_jack_on_two_supports_is_judged_with_its_reactions() -> None:
    brief = make_brief(
        specimen=two_supports(0.0, 0.8, 5.1, 6.0),
        loads=(shape_load("uniform", -9000.0, start_x=0.0, end_x=6.0),),
        pads=make_pads(count=5),
        jack=JackRules(at=2.95, step=None),
        acceptance=make_acceptance(moment=0.08, shear=None),
    )
    plan = planned(brief)
    # by hand: the pads and the reactions that answer them, against the target, at one station between the supports
    x = 2.2
    moment_of_pads = float(np.maximum(plan.x - x, 0) @ plan.force)
    right = -float((plan.x - 0.8) @ plan.force) / (5.1 - 0.8)
    rig = moment_of_pads + right * (5.1 - x)
    error = rig - float(plan.target.moment(np.array([x]))[0])
    tube = build_tube(plan.target, plan.jack_x, 5, 40, extra=np.array([x]))
    k = int(np.searchsorted(tube.x, x))
    moved = float(-plan.force @ plan.x) - tube.first_moment
    path = -moment_of_pads - tube.moment[k] + moved * tube.moment_unit[k]
    assert -path == pytest.approx(error, abs=1e-9 * plan.target.moment_peak)


def test_weight_is_brought_by_gravity_not_by_the_pads() -> None:
    specimen = make_specimen(weight=make_weight([0.2, 3.4], [40.0, 20.0]), gravity=-1)
    plan = planned(make_brief(specimen=specimen, acceptance=make_acceptance(shear=None)))
    assert plan.force.sum() == pytest.approx(5400.0 + 96.0 * 9.80665)


def test_a_target_that_changes_sign_is_followed_by_pads_of_one_sign() -> None:
    brief = make_brief(
        loads=(shape_load(), point_loads(1.9, -700.0)), acceptance=make_acceptance(moment=0.05, shear=None)
    )
    plan = planned(brief)
    assert (plan.force > 0).all()


def test_more_pads_than_corners() -> None:
    """Two point loads are matched by two pads; asked for four, the plan still has four that carry something."""
    brief = make_brief(loads=(point_loads([0.9, 2.3], [3000.0, 1000.0]),), pads=make_pads(count=4))
    plan = planned(brief)
    assert plan.n_pads == 4
    assert plan.force.min() > 0


def test_single_pad_sits_under_the_jack() -> None:
    plan = planned(make_brief(pads=make_pads(count=1), acceptance=make_acceptance(shear=None)))
    assert plan.x[0] == pytest.approx(plan.target.centroid)


# -- matters of limits -------------------------------------------------------------------------------------------------


def test_refuses_pads_that_do_not_fit() -> None:
    refusal = refused(make_brief(pads=make_pads(count=40)))
    assert "do not fit" in refusal.text
    assert refusal.best == "20 pads fit"


def test_refuses_pads_too_weak() -> None:
    refusal = refused(make_brief(pads=make_pads(largest_force=500.0)))
    assert "too weak" in refusal.text
    assert "at least 11 pads" in refusal.remedy


def test_refuses_least_force_for_too_many_pads() -> None:
    refusal = refused(make_brief(pads=make_pads(least_force=1000.0)))
    assert "least force" in refusal.text
    assert "at most 5 pads" in refusal.remedy


def test_refuses_a_least_force_above_the_total_whatever_the_count() -> None:
    total = build_target(make_brief()).net.total
    for count in ("fewest", 1):
        refusal = refused(make_brief(pads=make_pads(count=count, least_force=1.01 * total)))
        assert refusal.text == "1 pad cannot carry the least force each"
        assert refusal.remedy == "lower least_force"


def test_a_pad_on_its_least_force_keeps_it_despite_rounding() -> None:
    target = build_target(make_brief(pads=make_pads(least_force=500.0, largest_force=900.0)))
    x = np.array([0.6, 1.4])
    assert violations(target, x, np.array([500.0 * (1 - 1e-12), 900.0 * (1 + 1e-12)])) == 0.0
    assert violations(target, x, np.array([500.0 * (1 - 1e-6), 900.0])) > 0.0


def test_refuses_when_gravity_brings_more_than_the_target() -> None:
    specimen = make_specimen(weight=make_weight([0.2, 3.4], [400.0, 200.0]), gravity=1)
    refusal = refused(make_brief(specimen=specimen))
    assert "other way" in refusal.text


def test_refuses_a_jack_off_the_pads() -> None:
    assert "jack" in refused(make_brief(jack=JackRules(at=0.21, step=None))).text


def test_refuses_more_pads_than_hard_points() -> None:
    brief = make_brief(pads=make_pads(count=6, places="hard points", stations=np.array([0.5, 1.2, 2.0, 2.9])))
    assert "4 usable hard points" in refused(brief).text


def test_refuses_keep_outs_that_leave_nothing() -> None:
    assert "no pad fits" in refused(make_brief(pads=make_pads(keep_out=((0.2, 3.4),)))).text


def test_refuses_hard_points_on_one_side_of_the_resultant() -> None:
    brief = make_brief(pads=make_pads(count=2, places="hard points", stations=np.array([2.0, 2.5, 3.0])))
    assert "jack stands off" in refused(brief).text


# -- parts ------------------------------------------------------------------------------------------------------------


def test_allowed_stretches_keep_half_a_footprint_away() -> None:
    brief = make_brief(pads=make_pads(keep_out=((1.0, 1.2), (1.1, 1.4))))
    np.testing.assert_allclose(allowed_stretches(brief), [[0.26, 0.94], [1.46, 3.34]])


def test_most_that_fit_counts_over_stretches() -> None:
    brief = make_brief(pads=make_pads(length=0.3, gap=0.1, keep_out=((1.0, 1.9),)))
    # centres 0.35 to 0.85: two; 2.05 to 3.25: four
    assert most_that_fit(brief) == 6


def test_fitted_places_are_nearest_and_apart() -> None:
    grid = np.array([0.0, 1.0, 2.0, 2.5, 4.0])
    np.testing.assert_allclose(fitted(np.array([1.9, 2.1, 2.2]), grid, 1.0), [1.0, 2.0, 4.0])
    assert fitted(np.array([1.0, 2.0, 3.0]), grid, 2.5) is None


@pytest.mark.parametrize(("count", "keep_out"), [(8, ()), (4, ()), (7, ((1.0, 1.4),)), (6, ((1.0, 1.35), (2.15, 2.6)))])
def test_pads_that_just_fit_have_a_place(count, keep_out) -> None:
    # stretches of 3.2 m, of 0.8 m and 2.0 m, and three of 0.8 m, all filled
    length = 0.8 if count == 4 else 0.4
    brief = make_brief(pads=make_pads(count=count, length=length, gap=0.0, keep_out=keep_out))
    assert most_that_fit(brief) == count
    plan = planned(brief)
    assert plan.n_pads == count


def test_packed_places_stand_as_far_inboard_as_they_can() -> None:
    stretches = np.array([[0.0, 1.0], [1.2, 1.2], [2.0, 2.95]])
    assert packed(stretches, 0.5, 9, 1e-9).tolist() == [0.0, 0.5, 1.0, 2.0, 2.5]
    assert packed(stretches, 0.5, 3, 1e-9).tolist() == [0.0, 0.5, 1.0]
    # the last one touches the end and is not moved past it
    assert packed(stretches, 0.475 + 1e-12, 9, 1e-9)[-1] == 2.95


def test_violations_name_each_limit() -> None:
    target = build_target(make_brief(pads=make_pads(largest_force=1000.0, least_force=100.0, keep_out=((1.0, 1.2),))))
    x, force = np.array([0.4, 0.8, 2.0]), np.array([500.0, 500.0, 500.0])
    assert violations(target, x, force) == 0
    for bad_x, bad_force in (
        ([0.4, 0.55, 2.0], force),
        ([0.4, 1.1, 2.0], force),
        ([0.2, 0.8, 2.0], force),
        (x, [50.0, 500.0, 500.0]),
        (x, [500.0, 1100.0, 500.0]),
    ):
        assert violations(target, np.array(bad_x), np.array(bad_force)) > 1e-4


def test_stair_with_keep_outs_needs_more() -> None:
    brief = make_brief(loads=(table_load([0.2, 3.4], [1000.0, 1000.0]),), acceptance=make_acceptance(None, 0.1))
    tube = build_tube(build_target(brief), 1.8, 5, 200)
    # five equal steps of 20 % of the peak have errors of 10 %
    assert fewest_steps(tube, 1.001, np.array([[0.2, 3.4]]), 9) == 5
    assert fewest_steps(tube, 1.001, np.array([[0.2, 0.45], [0.6, 3.4]]), 9) == 6


def test_inertia_relief_lowers_the_pads() -> None:
    specimen = make_specimen(weight=make_weight([0.2, 3.4], [40.0, 20.0]), gravity=-1)
    brief = make_brief(
        specimen=specimen, loads=(shape_load(), inertia_load(-3.8)), acceptance=make_acceptance(shear=None)
    )
    # the target is 5400 N − 3.8 m g, and the pads lift m g besides
    assert planned(brief).force.sum() == pytest.approx(5400.0 - 2.8 * 96.0 * 9.80665)


def test_a_table_of_very_many_forces_is_followed_at_its_largest_steps() -> None:
    x = np.linspace(0.2, 3.4, 30_001)
    force = np.full(x.size, 0.1)
    force[17_001] = 900.0
    target = build_target(make_brief(loads=(point_loads(x, force),)))
    tube = build_tube(target, 1.7, 8, 40)
    assert tube.x.size < 3 * MOST_BREAKS
    # both sides of the one large step stand among the stations
    assert np.count_nonzero(tube.x == x[17_001]) == 2
    twice = build_tube(build_target(make_brief(loads=(point_loads(x, 2 * force),))), 1.7, 8, 40)
    assert np.array_equal(tube.x, twice.x)


def test_a_jack_far_from_the_load_is_balanced_all_the_same() -> None:
    """Costly, but not impossible: heavy outer pads and light inner ones."""
    plan = planned(make_brief(jack=JackRules(at=3.0, step=None), acceptance=make_acceptance(shear=None)))
    assert plan.proof.band_use > 10


def test_a_band_that_cannot_be_kept_is_no_leave_to_break_the_other() -> None:
    plan = planned(make_brief(pads=make_pads(count=5), acceptance=make_acceptance(moment=0.02, shear=0.05)))
    assert plan.proof.band_use_least > 1
    tube = build_tube(plan.target, plan.jack_x, 5, 100, extra=plan.x)
    alone = replace(tube, is_judged=(True, False))
    # the tube of the check is finer than that of the search: 1e-3
    assert float(alone.use(plan.x, plan.force)) <= 1 + 1e-3


def test_stair_knows_where_no_pad_may_stand_at_the_ends() -> None:
    """Load beyond the last allowed place: the shear there is all error, whatever the number of pads."""
    brief = make_brief(
        loads=(table_load([0.2, 3.4], [1000.0, 1000.0]),),
        pads=make_pads(keep_out=((2.8, 3.4),)),
        acceptance=make_acceptance(None, 0.1),
    )
    plan = planned(brief)
    # beyond 2.74 m lie 660 N of 3200 N, against a band of 10 % of them
    assert plan.proof.band_use_least == pytest.approx(660 / 320, rel=5e-3)


def test_pads_leave_a_drill_step_of_room_where_there_is_one() -> None:
    """Footprints that barely fit: drilling may shift each by up to a step and must not push two together."""
    roomy = make_brief(pads=make_pads(count=16, length=0.195, gap=0.0), acceptance=make_acceptance(0.05, None))
    stretches, pitch = with_room(roomy, 16)
    assert pitch == pytest.approx(0.196)
    np.testing.assert_allclose(stretches, [[0.2 + 0.0985, 3.4 - 0.0985]])
    tight = make_brief(pads=make_pads(count=8, length=0.4, gap=0.0))
    assert with_room(tight, 8)[1] == pytest.approx(0.4)
    assert np.diff(planned(roomy).x).min() >= 0.196 - 1e-9


def test_a_bound_above_what_was_found_is_said_and_not_smoothed_over(monkeypatch: pytest.MonkeyPatch) -> None:
    brief = make_brief(acceptance=make_acceptance(shear=None))
    assert not planned(brief).findings
    sound = free.least_use_path
    monkeypatch.setattr(free, "least_use_path", lambda *a: (sound(*a)[0], sound(*a)[1] * 1.01))
    found = planned(brief).findings
    assert [finding.severity for finding in found] == ["warning"]
    assert "not to be trusted" in found[0].text


@pytest.mark.parametrize(("gravity", "peak", "factor"), [(-1, 1.5, None), (1, 1.5, None), (1, 1.0, 1.0)])
def test_limits_hold_for_what_pads_bring_at_the_peak(gravity: int, peak: float, factor: float | None) -> None:
    """The specimen feels its target times the peak; what gravity brings of that does not grow with the load."""
    specimen = make_specimen(weight=make_weight([LEFT, RIGHT], [40.0, 40.0]), gravity=gravity)
    rules = make_pads(largest_force=1800.0, least_force=90.0)
    target = build_target(make_brief(specimen=specimen, peak=peak, pads=rules))
    brought = gravity * 40.0 * (RIGHT - LEFT) * 9.80665
    by_hand = (peak * 5400.0 - brought) / (5400.0 - brought)
    assert by_hand == pytest.approx(peak if factor is None else factor, rel=0.2)
    assert target.pads_peak == pytest.approx(by_hand, rel=1e-9)
    assert force_limits(target) == pytest.approx((90.0 / by_hand, 1800.0 / by_hand))
