"""Steps of the test with own weight: best jack force, errors, slack pads, zeros, remedies."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import band_rules, make_acceptance, make_brief, make_pads, make_specimen, make_weight, shape_load
from hand_hardware import hung_weight, make_hardware_for
from hand_plan_rigs import accept, make_plan_rig, plan_brief, pressure, surface
from hand_rigs import lumped, make_rig, make_tree

from rigdesign.brief.model import Acceptance
from rigdesign.checks import check
from rigdesign.checks.hardware.loads import hanging, own_weight
from rigdesign.checks.hardware.remedies import remedies
from rigdesign.checks.hardware.tare import lowest, sampled, steps, weighed
from rigdesign.checks.hardware.zeros import zeros
from rigdesign.checks.whole import band_use
from rigdesign.hardware.balance import counterweights
from rigdesign.hardware.model import Mass
from rigdesign.target import build_target

WEIGHT = make_weight([0.2, 3.4], [20.0, 5.0], [2.0], [8.0])
SIDED = Acceptance(band_rules("moment", 0.02, 0.04) + band_rules("shear", 0.15, 0.12), (), defaulted=False)
PLAN_X, PLAN_Y = np.array([0.5, 1.1, 1.7, 2.6, 3.1]), np.array([0.1, -0.2, 0.1, -0.3, -0.4])


def line_brief(times=1.0, total=5400.0, **specimen):
    made = make_specimen(**{"weight": WEIGHT, **specimen})
    return make_brief(specimen=made, loads=(shape_load(total=total, times=times),), acceptance=SIDED)


def line_rig(brief=None, **changes):
    target = build_target(line_brief() if brief is None else brief)
    x, force = lumped(target, np.linspace(0.2, 3.4, 8))
    return make_rig(x, force, target=target, **changes)


def plan_brief_of(times=1.0):
    load = pressure(900.0, -150.0, 200.0, times)
    return plan_brief(specimen=surface(weight=WEIGHT), loads=(load,), acceptance=accept(0.1, 0.3, 0.2, across=0.4))


def plan_rig():
    target = build_target(plan_brief_of())
    force = target.net.total * np.array([0.3, 0.25, 0.2, 0.15, 0.1])
    return make_plan_rig(PLAN_X, PLAN_Y, force, target=target, group=((1, 2, 3), (4, 5)))


def of(rig, masses=None, found=None):
    hardware = make_hardware_for(rig)
    masses = hardware.masses if masses is None else masses
    return weighed(sampled(check(rig) if found is None else found), hanging(rig), own_weight(rig, masses))


def weightless(rig):
    return dict.fromkeys(make_hardware_for(rig).masses, Mass(0.0, 0.0, 0.0))


def test_lowest_of_many_lines_against_a_fine_search():
    random = np.random.default_rng(7)
    for _ in range(60):
        slope, start = random.normal(size=(2, random.integers(2, 40)))
        slope[:2] = abs(slope[0]), -abs(slope[1])
        found = lowest(slope, start, float(random.normal()))
        grid = np.linspace(found - 30, found + 30, 60001)
        fine = (start[:, None] + slope[:, None] * grid).max(axis=0)
        # convex: no place of a fine grid about it lies lower
        assert (start + slope * found).max() <= fine.min() + 1e-12


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_lines_that_all_go_one_way_leave_the_first_factor(sign):
    assert lowest(sign * np.array([1.0, 2.0]), np.zeros(2), 0.7) == 0.7
    assert lowest(np.empty(0), np.empty(0), 0.3) == 0.3


@pytest.mark.parametrize("build", [line_rig, plan_rig], ids=["line", "plan"])
def test_without_weight_a_step_is_the_check(build):
    rig = build()
    found = check(rig)
    step = of(rig, weightless(rig), found).step_at(1.0, 1.0)
    assert step.pad_force == pytest.approx(found.statics.pad_force, rel=1e-14)
    assert step.band_use == pytest.approx(found.band_use, rel=1e-12)
    # in plan every station is sampled a ten-thousand-millionth of the span off itself
    assert step.errors == {q: pytest.approx(error.peak, rel=1e-8) for q, error in found.errors.items()}
    assert step.slack == ()


@pytest.mark.parametrize("level", [0.2, 0.6, 1.0, 1.4])
@pytest.mark.parametrize(("build", "brief"), [(line_rig, line_brief), (plan_rig, plan_brief_of)], ids=["line", "plan"])
def test_a_step_is_judged_as_its_own_target_would_be(build, brief, level):
    """The same pad forces against a brief whose load is the step's: another road to the same band use."""
    rig = build()
    step = of(rig).step(level)
    own = build_target(brief(times=level))
    use = band_use(own, rig.pad_x, rig.pad_y, step.pad_force)
    # the check looks for peaks between stations too, which are those of the rig without weight here
    assert step.band_use == pytest.approx(use, rel=2e-4)
    assert step.band_use <= use * (1 + 1e-9)


def test_errors_of_a_step_are_of_its_own_target():
    rig = line_rig()
    step = of(rig).step(0.4)
    own = replace(rig, plan=replace(rig.plan, target=build_target(line_brief(times=0.4))))
    jack = float(step.jack[0])
    # the pads' own forces as a rig without weight would have them
    tree = make_tree(rig.pad_x, step.pad_force)
    found = check(replace(own, trees=(tree,)))
    assert step.errors == {q: pytest.approx(error.peak, rel=2e-4) for q, error in found.errors.items()}
    assert jack == pytest.approx(step.pad_force.sum() + hung_weight(make_hardware_for(rig)), rel=1e-12)


@pytest.mark.parametrize("build", [line_rig, plan_rig], ids=["line", "plan"])
def test_no_jack_force_about_the_best_does_better(build):
    ready = of(build())
    for level in (0.2, 1.0):
        best = ready.best_factor(level)
        use = ready.step_at(level, best).band_use
        assert use == ready.step(level).band_use
        for off in (-1e-2, -1e-4, 1e-4, 1e-2):
            assert ready.step_at(level, best + off).band_use > use


def test_where_no_band_is_asked_the_resultant_is_met():
    brief = replace(line_brief(), acceptance=make_acceptance(None, None))
    rig = line_rig(brief)
    step = of(rig).step(0.6)
    target = rig.plan.target
    assert step.pad_force.sum() == pytest.approx(0.6 * target.total.total - target.gravity.total, rel=1e-12)
    assert step.band_use == 0.0


def test_steps_are_those_of_practice_and_the_peak():
    ready = of(line_rig())
    assert [step.level for step in steps(ready, 1.5)] == [0.2, 0.4, 0.6, 0.8, 1.0, 1.5]
    assert [step.level for step in steps(ready, 1.0)] == [0.2, 0.4, 0.6, 0.8, 1.0]
    assert [step.level for step in steps(ready, 0.9)] == [0.2, 0.4, 0.6, 0.8, 0.9, 1.0]


def test_pads_under_heavy_steel_hang_slack():
    """Two pads, a lever that is all weight at end 2: at little load its side still pushes on the specimen."""
    brief = make_brief(specimen=make_specimen(), pads=make_pads(count=2))
    rig = make_rig([1.0, 2.0], [3240.0, 2160.0], brief)
    masses = weightless(rig) | {"lever 1": Mass(100.0, 0.6, 0.0), "link 3": Mass(5.0, 0.0, 0.0)}
    ready = of(rig, masses)
    step = ready.step_at(1.0, 0.1)
    # a pull of 540 N; the pivot stands 0.4 m from end A, the centre right over end B
    weight = 9.80665 * 100
    second = (540.0 - weight) * 0.4 - weight * 0.6
    assert step.pad_force == pytest.approx([540.0 - weight - second, second - 5 * 9.80665], rel=1e-12)
    assert step.slack == (2,)
    assert ready.step_at(1.0, 0.5).slack == ()
    # the link's own weight is no pull on the pad: slack as soon as the lower end carries nothing
    edge = (weight + 5 * 9.80665) / 0.4 / 5400.0
    assert ready.step_at(1.0, edge * (1 + 1e-6)).slack == ()
    assert ready.step_at(1.0, edge * (1 - 1e-6)).slack == (2,)


def test_a_pushing_tree_is_slack_where_its_links_pull():
    specimen = make_specimen()
    brief = make_brief(specimen=specimen, pads=make_pads(count=2, action="push"), loads=(shape_load(total=-5400.0),))
    rig = make_rig([1.0, 2.0], [-3240.0, -2160.0], brief)
    ready = of(rig)
    assert ready.step(0.2).slack == ()
    assert ready.step_at(1.0, -0.5).slack == (1, 2)


@pytest.mark.parametrize(
    ("total", "action", "hangs"),
    [(5400.0, "pull", True), (5400.0, "push", True), (-5400.0, "pull", False), (-5400.0, "push", False)],
    ids=["pulled from above", "pushed from below", "pulled from below", "pushed from above"],
)
def test_three_zeros(total, action, hangs):
    brief = replace(line_brief(total=total), pads=make_pads(action=action))
    rig = line_rig(brief)
    hardware = make_hardware_for(rig)
    (zero,) = zeros(of(rig))
    weight = hung_weight(hardware)
    specimen = -float(rig.plan.target.gravity.total)
    assert specimen == pytest.approx(9.80665 * (12.5 * 3.2 + 8.0))
    assert (zero.jack, zero.apart) == ("jack 1", 0.0)
    if hangs:
        assert zero.hung == pytest.approx(weight)
        assert zero.supported == pytest.approx(weight + specimen)
    else:
        assert zero.hung is None
        assert zero.supported is None


def test_without_a_weight_table_nobody_knows_when_the_specimen_is_supported():
    rig = line_rig(line_brief(weight=None))
    (zero,) = zeros(of(rig))
    assert zero.supported is None
    assert zero.hung == pytest.approx(hung_weight(make_hardware_for(rig)))


@pytest.mark.parametrize("build", [line_rig, plan_rig], ids=["line", "plan"])
def test_counterweights_give_back_what_the_rig_does_without_weight(build):
    rig = build()
    hardware = make_hardware_for(rig)
    ready = of(rig)
    levers, whole = remedies(hardware, ready)
    assert (levers.kind, whole.kind) == ("balanced levers", "counterweights")
    # pads then share all weight as they share the jack's force, so the best jack force undoes it
    best = of(rig, weightless(rig)).step(1.0)
    assert whole.band_use == pytest.approx(best.band_use, rel=1e-9)
    assert whole.errors == {q: pytest.approx(error, rel=1e-9) for q, error in best.errors.items()}
    assert whole.total == pytest.approx(sum(mass for _, _, mass in whole.masses))
    assert levers.total > 0
    alone = counterweights(rig, hardware.masses, hardware.links, whole=False)
    assert levers.masses == tuple((name, hole, mass) for name, holes in alone.items() for hole, mass in holes.items())
    assert levers.band_use != pytest.approx(ready.step(1.0).band_use, rel=1e-3)


def test_members_are_held_at_the_even_jack_force_or_at_the_steps_own():
    rig = line_rig()
    target, found = rig.plan.target, check(rig)
    ready = of(rig, found=replace(found, band_use=0.9))
    even = 1.5 * target.total.total - target.gravity.total + hung_weight(make_hardware_for(rig))
    assert ready.held_at(1.5, 1.05) == pytest.approx([1.05 * even])
    best = float(ready.step(1.5).jack[0])
    assert best != pytest.approx(even, rel=1e-5)
    assert ready.held_at(1.5, 1.0) == pytest.approx([max(best, even)])
    assert ready.held_at(1.5, 0.5) == pytest.approx([best])
    # out of its bands whatever the jack does, the rig is held at what its load asks for
    out = of(rig, found=replace(found, band_use=1.1))
    assert out.held_at(1.5, 0.5) == pytest.approx([0.5 * even])
