"""Drilling of free pads: how little it costs, what it keeps, and that the search is as good as it says."""

from __future__ import annotations

import itertools
from dataclasses import replace

import numpy as np
import pytest
from factories import LEFT, RIGHT, make_acceptance, point_loads, shape_load, table_load, two_supports
from lever_plans import arms, best_plan, brief_of, plan_by_hand, uniform_plan

from rigdesign.findings import Refusal
from rigdesign.levers import Rig, build_rig
from rigdesign.levers.arms import Arms, mended, search_arms
from rigdesign.levers.branching import Pins, Search
from rigdesign.levers.drilled import REACH
from rigdesign.levers.drilling_free import drill_free
from rigdesign.levers.grouping import group_pads
from rigdesign.levers.hanging import hang_free
from rigdesign.levers.judging import Lines, build_judge
from rigdesign.levers.wiring import ideal_levers
from rigdesign.pads.limits import violations
from rigdesign.pads.tube import build_tube
from rigdesign.target import build_target


def drilled_use(plan):
    """Band use before and after drilling, judged densely, over the proven least."""
    rig = build_rig(plan)
    assert isinstance(rig, Rig), rig
    tube = build_tube(plan.target, plan.jack_x, plan.n_pads, per_pad=300)
    forces = np.abs(pad_forces(rig))
    return float(tube.use(rig.pad_x[None], forces[None])[0]) / plan.proof.band_use_least


def pad_forces(rig):
    """Pad forces from holes and jack force, by a recursion of its own."""
    tree = rig.trees[0]
    carried = {tree.jack.carries: tree.force}
    for piece in tree.pieces:
        a, b = -piece.ends[0].u, piece.ends[1].u
        carried[piece.ends[0].joins] = carried[piece.name] * b / (a + b)
        carried[piece.ends[1].joins] = carried[piece.name] * a / (a + b)
    return np.array([carried[f"pad {number}"] for number in range(1, rig.plan.n_pads + 1)])


@pytest.mark.parametrize(("count", "step", "most"), [(8, 0.001, 1.02), (16, 0.001, 1.05), (16, 0.025, 2.5)])
@pytest.mark.parametrize("shape", ["uniform", "elliptical"])
def test_least_error_after_drilling(shape, count, step, most):
    """3.2 m: rounding once costs about 1.1 times the least error at 1 mm and 5.8 times at 25 mm (16 pads)."""
    brief = brief_of(count, shape, levers={"drill_step": step})
    plan = uniform_plan(brief, count) if shape == "uniform" else best_plan(brief, count)
    assert drilled_use(plan) <= most


def test_better_than_rounding_once():
    """Arms rounded one by one, as a person would: the search must do far better at 25 mm."""
    plan = best_plan(brief_of(16, levers={"drill_step": 0.025}), 16)
    drilled = drill_free(plan, group_pads(plan), build_tube(plan.target, plan.jack_x, 16))
    wiring, rounded = group_pads(plan), rounded_arms(plan)
    tube = build_tube(plan.target, plan.jack_x, 16)
    hung = hang_free(wiring, rounded[None], 0.025, tube.jack_x, tube.total)
    once = float(tube.use(hung.pad_x, hung.pad_force)[0])
    assert once > 2.5 * drilled.use


def rounded_arms(plan):
    """Each arm of the planned lever rounded on its own."""
    levers = ideal_levers(group_pads(plan), plan.x, np.abs(plan.force))
    step = plan.target.brief.levers.drill_step
    return np.rint(np.stack([levers.a, levers.b], axis=1) / step).astype(int).reshape(-1)


@pytest.mark.parametrize("shear", [None, 0.24])  # a shear band that three pads can keep
@pytest.mark.parametrize(("count", "step"), [(3, 0.02), (4, 0.03)])
def test_no_better_arms_by_brute_force(count, step, shear):
    """Every choice of arms up to two steps around the ones found, all levers at once."""
    plan = best_plan(brief_of(count, shear=shear, levers={"drill_step": step}), count)
    wiring, tube = group_pads(plan), build_tube(plan.target, plan.jack_x, count)
    drilled = drill_free(plan, wiring, tube)
    moves = np.array(list(itertools.product(range(-2, 3), repeat=2 * wiring.n_levers)))
    rows = drilled.steps.reshape(-1) + moves
    hung = hang_free(wiring, rows, step, tube.jack_x, tube.total)
    use = build_judge(tube).use(hung.pad_x, hung.pad_force)
    ratio = np.maximum(hung.a, hung.b) / np.minimum(hung.a, hung.b)
    kept = (ratio <= 5.0 * (1 + 1e-9)).all(axis=1) & (violations(plan.target, hung.pad_x, hung.pad_force) == 0)
    # 0.1 %: the search judges stations between pads more sparsely than the brute force
    assert use[kept].min() >= drilled.use * (1 - 1e-3)


def search_of(plan):
    """A search over the whole tree, and the pin of the jack."""
    wiring, tube = group_pads(plan), build_tube(plan.target, plan.jack_x, plan.n_pads)
    force = plan.force
    planned = Lines(
        np.append(np.cumsum(force[::-1])[::-1], 0.0), np.append(np.cumsum((force * plan.x)[::-1])[::-1], 0.0)
    )
    step = plan.target.brief.levers.drill_step
    free = lambda one, other: np.ones(one.size, dtype=bool)  # noqa: E731
    search = Search(wiring, build_judge(tube), step, planned, plan.x, tube.displacement, free, free)
    return search, Pins(np.array([tube.total]), np.array([tube.jack_x]), Lines(np.zeros(1), np.zeros(1)))


def brute_window(search, pin, row, window):
    """Band use of the best arms in the window below one pin, by plain recursion over every choice.

    Written apart from the search: pads by their own forces, the line by intersecting lines.
    """
    load, x, (s, k) = pin
    ends = search.wiring.ends[row]
    line = -1 - ends[1] if ends[1] < 0 else search.wiring.pads_under(int(ends[1]))[0]
    want_s, want_k = search.planned.load[line], search.planned.first[line]
    a0 = x - ((k + load * x) - want_k) / ((s + load) - want_s)
    b0 = (want_k - k) / (want_s - s) - x
    best = np.inf
    around = [
        range(int(np.floor(e / search.step)) + 1 - window, int(np.floor(e / search.step)) + window + 1)
        for e in (a0, b0)
    ]
    for a, b in itertools.product(*around):
        if min(a, b) <= 0:
            continue
        outer, inner = load * a / (a + b), load * b / (a + b)
        at, to = x - a * search.step, x + b * search.step
        middle = (s + outer, k + outer * to)
        use = search.judge.line_use(Lines(*map(np.array, middle)), 0.0).item()
        for end, half in ((ends[0], (inner, at, middle)), (ends[1], (outer, to, (s, k)))):
            if end < 0:
                right = Lines(np.array(half[2][0]), np.array(half[2][1]))
                use = max(use, search.judge.pad_use(np.array(half[1]), np.array(half[0]), right, 0.0).item())
            elif use < best:
                use = max(use, brute_window(search, half, int(end), window))
        best = min(best, use)
    return best


@pytest.mark.parametrize(("count", "step", "window"), [(5, 0.01, 1), (6, 0.03, 1), (4, 0.02, 2)])
def test_branch_and_bound_equals_brute_force_in_its_window(count, step, window):
    """What is said to be proven is what plain recursion over every choice finds."""
    plan = best_plan(brief_of(count, shear=0.12, levers={"drill_step": step}), count)
    search, jack = search_of(plan)
    tube_total, x = float(jack.load[0]), float(jack.place[0])
    expected = brute_window(search, (tube_total, x, (0.0, 0.0)), 0, window)
    use, _, count_of_work = search.best(0, jack, np.inf, window, 10**6)
    assert count_of_work.is_complete
    assert use == pytest.approx(expected, rel=1e-9)
    # cut off by a bound just above, the outcome stays; by one just below, nothing is left
    assert search.best(0, jack, expected * (1 + 1e-9), window, 10**6)[0] == pytest.approx(expected, rel=1e-9)
    assert search.best(0, jack, expected * (1 - 1e-9), window, 10**6)[0] == np.inf


def test_what_is_proven_is_never_above_what_is_found():
    for count, step in ((6, 0.01), (9, 0.025)):
        plan = best_plan(brief_of(count, levers={"drill_step": step}), count)
        found = search_arms(*search_of(plan), plan.proof.band_use)
        assert found is not None
        assert found.window >= 1
        assert found.least >= plan.proof.band_use_least * (1 - 1e-3)
        assert found.use <= found.least * (1 + 1e-9)
        search, jack = search_of(plan)
        use, _, work = search.best(0, jack, np.inf, found.window, 10**7)
        assert work.is_complete
        assert found.least == pytest.approx(use, rel=1e-9)


def test_pads_that_miss_a_limit_are_cut_off():
    """No pad may stand within 30 mm of where pad 2 was planned."""
    plan = best_plan(brief_of(5, levers={"drill_step": 0.02}), 5)
    search, jack = search_of(plan)
    kept = replace(search, pads_kept=lambda x, force: np.abs(x - plan.x[1]) > 0.03)
    for one in (search, kept):
        _, steps, _ = one.best(0, jack, np.inf, 2, 10**6)
        hung = hang_free(one.wiring, steps.reshape(1, -1), 0.02, float(jack.place[0]), float(jack.load[0]))
        assert (np.abs(hung.pad_x[0] - plan.x[1]).min() > 0.03) == (one is kept)


def test_mending_goes_on_from_a_poor_start():
    """From one choice a lever: better arms are found below single levers, and their band use is what it says."""
    plan = best_plan(brief_of(20, levers={"drill_step": 0.004}), 20)
    search, jack = search_of(plan)
    use, steps, work = search.best(0, jack, np.inf, 1, 1)
    poor = Arms(steps, use, work.nodes, 0, np.inf)
    better = mended(search, jack, poor)
    assert better.use < 0.9 * poor.use
    assert better.nodes > poor.nodes
    hung = hang_free(search.wiring, better.steps.reshape(1, -1), 0.004, float(jack.place[0]), float(jack.load[0]))
    assert search.judge.use(hung.pad_x, hung.pad_force)[0] == pytest.approx(better.use, rel=1e-9)


def test_too_many_choices_are_said_to_be_unproven():
    plan = best_plan(brief_of(12, levers={"drill_step": 0.025}), 12)
    search, jack = search_of(plan)
    use, _, work = search.best(0, jack, np.inf, 2, 20)
    assert np.isfinite(use)
    assert not work.is_complete


# --- what drilling keeps


@pytest.mark.parametrize("step", [0.001, 0.025, 0.0254 / 8])
def test_arms_are_whole_steps_and_the_first_moment_is_exact(step):
    plan = best_plan(brief_of(7, "parabolic", shear=0.15, levers={"drill_step": step}), 7)
    rig = build_rig(plan)
    assert isinstance(rig, Rig)
    for arm in arms(rig):
        np.testing.assert_allclose(arm / step, np.rint(arm / step), rtol=1e-9)
        assert arm.min() > 0
    force = pad_forces(rig)
    assert rig.trees[0].jack.x == plan.jack_x
    assert force.sum() == pytest.approx(plan.target.net.total, rel=1e-12)
    assert (force * rig.pad_x).sum() == pytest.approx(plan.target.net.first_moment, rel=1e-12)


def test_lever_limits_hold_after_drilling():
    """Two pads at a ratio of exactly 3 and an arm of exactly 150 mm: the step inside is taken, not the nearest."""
    brief = brief_of(2, levers={"drill_step": 0.04, "ratio_limit": 3.0, "shortest_arm": 0.15})
    rig = build_rig(plan_by_hand(brief, [0.95, 1.55], [4050.0, 1350.0]))
    assert isinstance(rig, Rig)
    a, b = arms(rig)
    assert b[0] / a[0] <= 3.0
    assert a[0] >= 0.15


def test_the_descent_keeps_the_lever_limits():
    """Even forces on a load that wants them 1.4 to 1: the descent goes there, but no further than the limit."""

    def ratio(limit):
        brief = brief_of(2, "parabolic", levers={"drill_step": 0.01, "ratio_limit": limit})
        target = build_target(brief)
        middle = target.net.first_moment / target.net.total
        rig = build_rig(plan_by_hand(brief, [middle - 0.65, middle + 0.65], [2700.0, 2700.0]))
        assert isinstance(rig, Rig)
        a, b = arms(rig)
        return max(a[0], b[0]) / min(a[0], b[0])

    assert ratio(5.0) > 1.05
    assert 1.0 < ratio(1.05) <= 1.05


def test_pad_limits_hold_after_drilling():
    """Pads planned at the very edge of a keep-out, of the specimen and of the gap stay clear of them."""
    brief = brief_of(
        4,
        levers={"drill_step": 0.02},
        pads={"length": 0.2, "gap": 0.1, "keep_out": ((1.4, 1.9),), "largest_force": 1731.0},
    )
    rig = build_rig(plan_by_hand(brief, [0.3, 1.0, 1.3, 2.0], [1400.0, 1300.0, 1300.0, 1400.0]))
    assert isinstance(rig, Rig)
    assert violations(rig.plan.target, rig.pad_x, pad_forces(rig)) == 0


def test_a_coarse_step_is_refused():
    plan = best_plan(brief_of(16, levers={"drill_step": 0.25}), 16)
    refusal = build_rig(plan)
    assert isinstance(refusal, Refusal)
    assert "an arm would be zero" in refusal.text
    assert refusal.limit == "drill_step 250 mm"
    assert refusal.best.startswith("lever ")
    assert "choose a drill_step below" in refusal.remedy


def test_no_step_inside_the_limits_is_refused():
    """Ratio at most 1.05 with arms of about two and a half steps: 2:2 and 3:3 only, and the lever may be no longer
    than 0.2 m nor its arms shorter than 95 mm."""
    brief = brief_of(2, levers={"drill_step": 0.04, "ratio_limit": 1.05, "longest": 0.2, "shortest_arm": 0.095})
    refusal = build_rig(plan_by_hand(brief, [1.4, 1.595], [2700.0, 2700.0]))
    assert isinstance(refusal, Refusal)
    assert "whole drill steps" in refusal.text


def test_pads_that_are_no_neighbours_are_drilled():
    brief = brief_of(4, levers={"drill_step": 0.02, "grouping": ((1, 3), (2, 4))})
    plan = plan_by_hand(brief, [0.5, 1.05, 1.8, 2.6], [1900.0, 1500.0, 1200.0, 800.0])
    rig = build_rig(plan)
    assert isinstance(rig, Rig)
    assert [hole.joins for hole in rig.trees[0].pieces[1].ends] == ["pad 1", "pad 3"]

    a, b = arms(rig)
    levers = ideal_levers(group_pads(plan), plan.x, plan.force)
    assert np.all(np.abs(np.concatenate([a - levers.a, b - levers.b])) <= (REACH + 1) * 0.02)
    force = pad_forces(rig)
    assert violations(rig.plan.target, rig.pad_x, force) == 0
    tube, rounded = build_tube(plan.target, plan.jack_x, 4), rounded_arms(plan)
    hung = hang_free(group_pads(plan), rounded[None], 0.02, tube.jack_x, tube.total)
    assert tube.use(rig.pad_x, force) < tube.use(hung.pad_x, hung.pad_force)[0]
    assert "arms rounded, then moved" in rig.words


@pytest.mark.parametrize(
    "changes",
    [
        {"loads": (shape_load("sine", -3000.0),)},
        {"loads": (shape_load("linear", None, start=400.0, end=1500.0), point_loads([1.1], [900.0]))},
        {
            "specimen": two_supports(LEFT, 0.6, 2.9, RIGHT),
            "loads": (table_load([0.2, 1.0, 1.0, 3.4], [2600.0, 1900.0, 1200.0, 300.0]),),
        },
    ],
)
def test_other_targets_lose_little(changes):
    """At 1 mm, six pads lose at most 3 % of their band use, whatever the sign, the jumps and the supports."""
    brief = brief_of(6, acceptance=make_acceptance(0.02, None), **changes)
    assert drilled_use(best_plan(brief, 6)) <= 1.03


def test_same_plan_same_rig():
    plan = best_plan(brief_of(10, shear=0.12, levers={"drill_step": 0.01}), 10)
    one, other = build_rig(plan), build_rig(plan)
    assert isinstance(one, Rig)
    assert isinstance(other, Rig)
    assert one.trees == other.trees
    assert one.words == other.words


def test_without_any_band_the_moment_error_counts():
    """Nothing is judged: the arms are those that a moment band would give."""
    rigs = []
    for band in (0.02, None):
        brief = brief_of(6, levers={"drill_step": 0.02}, acceptance=make_acceptance(band, None))
        rigs.append(build_rig(replace(best_plan(brief_of(6), 6), target=build_target(brief))))
    assert rigs[0].trees == rigs[1].trees


def test_pads_that_stand_close_are_drilled_apart():
    """The search that stops at the first place without a better neighbour leaves two of these pads too close."""
    brief = brief_of(12, "parabolic", pads={"length": 3.2 / 14}, levers={"drill_step": 0.02})
    x = [0.3143, 0.5504, 0.788, 1.0297, 1.2754, 1.5307, 1.7964, 2.0741, 2.3798, 2.7423, 3.0571, 3.2857]
    force = [588.3, 593.4, 587.1, 576.2, 562.1, 543.3, 514.4, 481.7, 446.4, 319.7, 147.0, 40.3]
    rig = build_rig(plan_by_hand(brief, x, force))
    assert isinstance(rig, Rig)
    assert violations(rig.plan.target, rig.pad_x, np.abs(pad_forces(rig))) == 0


def test_a_shear_that_cannot_be_kept_is_no_leave_to_spoil_the_moment():
    """A shear band of 1 % is beyond nine pads; the moment keeps its band before drilling and must as drilled."""
    plain = brief_of(9, "parabolic", levers={"drill_step": 0.04})
    brief = replace(plain, acceptance=make_acceptance(moment=0.006, shear=0.01))
    plan = best_plan(plain, 9)
    plan = plan_by_hand(brief, plan.x, plan.force)
    rig = build_rig(plan)
    assert isinstance(rig, Rig)
    tube = build_tube(plan.target, plan.jack_x, 9)
    moment, shear = (replace(tube, is_judged=one) for one in ((True, False), (False, True)))
    planned, drilled = (plan.x[None], plan.force[None]), (rig.pad_x[None], np.abs(pad_forces(rig))[None])
    assert shear.use(*planned)[0] > 5
    assert moment.use(*planned)[0] < 0.7
    assert moment.use(*drilled)[0] <= 1.0 + 1e-9
    assert shear.use(*drilled)[0] <= 1.05 * shear.use(*planned)[0]
