"""The whole check of the hardware: its findings, one a cause, their order, and what makes it not accepted."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import band_rules, make_brief, make_hardware, make_pads, make_specimen, make_weight, shape_load
from hand_hardware import hung_weight, make_hardware_for
from hand_plan_rigs import accept, make_plan_rig, panel, plan_brief, pressure
from hand_rigs import lumped, make_rig

from rigdesign.brief.model import Acceptance
from rigdesign.checks import check
from rigdesign.checks.hardware import check_hardware
from rigdesign.errors import InputError
from rigdesign.findings import Finding
from rigdesign.hardware.model import Mass, Shortfall
from rigdesign.target import build_target

WIDE = Acceptance(band_rules("moment", 0.05, 0.05) + band_rules("shear", 0.15, 0.15), (), defaulted=False)


def light_rig(**changes):
    fields = {
        "specimen": make_specimen(weight=make_weight([0.2, 3.4], [12.0, 4.0])),
        "acceptance": WIDE,
        "peak": 1.5,
    }
    brief = make_brief(**{**fields, **changes})
    target = build_target(brief)
    return make_rig(*lumped(target, np.linspace(0.2, 3.4, 9)), target=target)


def found(rig=None, hardware=None, **changes):
    rig = light_rig() if rig is None else rig
    hardware = make_hardware_for(rig) if hardware is None else hardware
    return check_hardware(check(rig), replace(hardware, **changes))


def by_stage(result, stage, severity=None):
    return [f for f in result.findings if f.stage == stage and severity in (None, f.severity)]


def heavier(hardware, piece, mass, u):
    return replace(hardware, masses={**hardware.masses, piece: Mass(mass, u, 0.0)})


def test_a_sound_rig_is_accepted_and_says_what_is_used_most():
    result = found()
    assert result.check.accepted
    assert result.accepted, [f for f in result.findings if f.severity == "failure"]
    assert 0 < result.utilisation < 1
    most, left_out = by_stage(result, "strength")
    worst = max(result.strength, key=lambda row: row.utilisation)
    assert (most.severity, most.object) == ("note", worst.piece)
    assert worst.check in most.text
    assert "design factor of 2" in most.text
    assert most.value == f"{100 * worst.utilisation:.1f} % of what the rules leave"
    assert "welds, fatigue, impact" in left_out.text
    # strength is held at the jack's force of the peak, with overshoot
    target = result.hardware.rig.plan.target
    jack = 1.5 * target.total.total - target.gravity.total + hung_weight(result.hardware)
    assert max(row.load for row in result.strength) == pytest.approx(1.05 * jack)


def test_findings_come_after_those_of_the_check_and_are_numbered_on():
    rig = light_rig()
    more = (Finding("space", "note", "rig", "a made-up remark of the builder"),)
    result = found(rig, findings=more)
    earlier = check(rig).findings
    kept = [f for f in result.findings[: len(earlier)] if not f.text.startswith("not checked")]
    assert kept == [f for f in earlier if not f.text.startswith("not checked")]
    stages = [f.stage for f in result.findings[len(earlier) :]]
    assert stages == sorted(stages, key=["space", "strength", "behaviour"].index)
    assert result.findings[len(earlier)].text == more[0].text
    for stage in set(stages):
        numbers = [f.number for f in result.findings if f.stage == stage]
        assert numbers == list(range(1, len(numbers) + 1))


def test_what_is_checked_now_is_no_longer_called_not_checked():
    before = next(f for f in check(light_rig()).findings if f.text.startswith("not checked"))
    after = next(f for f in found().findings if f.text.startswith("not checked"))
    assert (before.name, before.object) == (after.name, after.object)
    assert "own weight" in before.text
    assert "own weight" not in after.text
    assert "friction in the pins" in after.text


def test_a_weak_lever_is_one_failure_with_its_remedy():
    hardware = make_hardware_for(light_rig())
    body = hardware.bodies["lever 2"]
    some = body.section
    thin = replace(some, inertia=some.inertia / 40, modulus=some.modulus / 40, plastic=some.plastic / 40)
    weak = replace(hardware, bodies={**hardware.bodies, "lever 2": replace(body, section=thin)})
    result = found(hardware=weak)
    (failure,) = by_stage(result, "strength", "failure")
    worst = max((row for row in result.strength if row.piece == "lever 2"), key=lambda row: row.utilisation)
    assert failure.object == "lever 2"
    assert failure.text.startswith(f"{worst.check}, with ")
    assert failure.value == f"utilisation {worst.utilisation:.3g}"
    assert "a larger section" in failure.remedy
    assert not result.accepted
    told = replace(weak, shortfalls=(Shortfall("lever 2", "bending", 3.0, "a flat of 300×20"),))
    (failure,) = by_stage(found(hardware=told), "strength", "failure")
    assert failure.remedy == "a flat of 300×20"


def test_identical_links_that_fail_alike_share_one_failure():
    hardware = make_hardware_for(light_rig())
    thin = {8, 9, 12}
    links = tuple(replace(link, stress_area=0.2e-6) if link.number in thin else link for link in hardware.links)
    marks = {**hardware.marks, **{f"link {n}": "K9" for n in thin}}
    failures = by_stage(found(hardware=replace(hardware, links=links, marks=marks)), "strength", "failure")
    (failure,) = failures
    assert {failure.object, *(f"link {n}" for n in thin if f"link {n}" in failure.text)} == {f"link {n}" for n in thin}
    apart = found(hardware=replace(hardware, links=links))
    assert len(by_stage(apart, "strength", "failure")) == 3


def test_a_shortfall_that_no_check_sees_is_told():
    gap = Shortfall("jack 1", "rated force of every jack to choose from", 1.7, "a jack of 120 kN")
    (failure,) = by_stage(found(shortfalls=(gap,)), "strength", "failure")
    assert (failure.object, failure.value, failure.remedy) == ("jack 1", "utilisation 1.7 as sized", "a jack of 120 kN")
    assert gap.check in failure.text


def test_a_density_of_the_brief_s_own_is_said():
    rig = light_rig(hardware=make_hardware(density=8100.0))
    note = next(f for f in by_stage(found(rig), "strength") if "density" in f.text)
    assert (note.severity, note.value) == ("note", "8100 kg/m³")
    assert not any("density" in f.text for f in found().findings)


def test_own_weight_within_the_bands_is_a_note_with_its_numbers():
    result = found()
    note = by_stage(result, "behaviour")[0]
    step = result.tare.step(1.0)
    assert note.severity == "note"
    assert note.value == f"band use {step.band_use:.3g} with own weight, {result.check.band_use:.3g} without"
    weight = -result.loads.weight[0]
    assert f"{100 * weight / step.pad_force.sum():.3g} % of what the pads bring" in note.text
    assert result.tare.pad_tare == pytest.approx(result.loads.pad_fixed)


def test_own_weight_that_breaks_a_band_is_a_failure_with_its_cure():
    hardware = heavier(make_hardware_for(light_rig()), "lever 1", 300.0, 0.5)
    result = found(hardware=hardware)
    assert result.check.accepted
    (failure,) = by_stage(result, "behaviour", "failure")
    assert failure.text.startswith("the rig's own weight breaks a band")
    levers, whole = result.tare.remedies
    assert whole.band_use < 1 < result.tare.step(1.0).band_use
    assert f"{whole.total:.0f} kg in all, leave a band use of {whole.band_use:.3g}" in failure.remedy
    assert (levers.band_use < 1) == ("levers balanced alone" in failure.remedy)
    assert not result.accepted
    # one cause, one finding: lower steps are not told again
    assert not any("does not scale with the jack" in f.text for f in result.findings)


def test_a_rig_that_fails_without_weight_is_not_blamed_on_it():
    narrow = Acceptance(band_rules("moment", 0.001, 0.001), (), defaulted=False)
    result = found(light_rig(acceptance=narrow))
    assert not result.check.accepted
    assert not by_stage(result, "behaviour", "failure")


def test_lower_steps_are_a_note_that_names_the_worst():
    narrow = Acceptance(band_rules("moment", 0.02, 0.02), (), defaulted=False)
    result = found(light_rig(acceptance=narrow))
    assert result.tare.step(1.0).band_use < 1 < result.tare.step(0.2).band_use
    note = next(f for f in by_stage(result, "behaviour") if "does not scale with the jack" in f.text)
    assert note.severity == "note"
    assert note.value == f"band use {result.tare.step(0.2).band_use:.3g} at 20 %"


def test_slack_links_are_a_warning_that_says_from_when_all_pull():
    hardware = make_hardware_for(light_rig())
    rig = hardware.rig
    lowest_piece = next(p for p in rig.trees[0].pieces if p.ends[1].joins == "pad 8")
    hardware = heavier(hardware, lowest_piece.name, 28.0, lowest_piece.ends[1].u)
    result = found(hardware=hardware)
    slack = [step.level for step in result.tare.steps if step.slack]
    assert slack
    assert max(slack) < 1.0
    (warning,) = [f for f in by_stage(result, "behaviour") if "takes all load off" in f.text]
    assert (warning.severity, warning.object) == ("warning", "pad 8")
    level = float(warning.remedy.split("from ")[1].split(" %")[0]) / 100
    ready = _ready(result)
    assert not ready.slack(ready.best_factor(level) * ready.jack)
    assert ready.slack(ready.best_factor(level - 0.01) * ready.jack) == (8,)


def _ready(result):
    from rigdesign.checks.hardware.loads import hanging
    from rigdesign.checks.hardware.tare import sampled, weighed

    return weighed(sampled(result.check), hanging(result.hardware.rig), result.loads)


def test_links_that_are_slack_at_the_whole_load_are_a_failure():
    hardware = make_hardware_for(light_rig(acceptance=Acceptance((), (), defaulted=False), peak=1.0))
    piece = next(p for p in hardware.rig.trees[0].pieces if p.ends[1].joins == "pad 8")
    result = found(hardware.rig, heavier(hardware, piece.name, 400.0, piece.ends[1].u))
    (failure,) = by_stage(result, "behaviour", "failure")
    assert failure.object == "pad 8"
    assert failure.remedy == "counterweights or lighter levers"


def test_counterweights_that_are_on_are_told_with_their_masses():
    rig = light_rig()
    hardware = make_hardware_for(rig, counterweights={"lever 2": {"A": 3.25}, "lever 5": {"B": 1.5}})
    note = next(f for f in found(rig, hardware).findings if f.text.startswith("counterweights bring"))
    assert note.value == "4.75 kg in all"
    assert "3.25 kg at lever 2 hole A, 1.50 kg at lever 5 hole B" in note.text


def test_three_zeros_are_told_apart():
    result = found()
    (zero,) = result.tare.zeros
    note = by_stage(result, "behaviour")[-1]
    assert note.object == "jack 1"
    assert f"tree hung and pads slack: {zero.hung:.0f} N; specimen just supported: {zero.supported:.0f} N" in note.text
    rig = light_rig(loads=(shape_load(total=-5400.0),), specimen=make_specimen())
    note = by_stage(found(rig), "behaviour")[-1]
    assert "the tree cannot hang on its jack alone" in note.text


def test_pads_judged_by_their_shares_are_judged_with_weight_too():
    brief = plan_brief(specimen=panel(), loads=(pressure(2500.0),), acceptance=accept(0.9, 0.9, 0.9, share=0.1))
    target = build_target(brief)
    x, y = np.array([0.5, 0.5, 1.5, 1.5]), np.array([-0.2, 0.4, -0.2, 0.4])
    rig = make_plan_rig(x, y, target.net.total * np.full(4, 0.25), target=target, group=((1, 2), (3, 4)))
    light = found(rig)
    assert not by_stage(light, "behaviour", "failure")
    result = found(rig, heavier(make_hardware_for(rig), "lever 2", 60.0, 0.3))
    (failure,) = by_stage(result, "behaviour", "failure")
    assert "too far from its tributary share" in failure.text
    assert failure.limit == "10.0 % of the share"


def test_a_pushing_rig_is_warned_of_once():
    rig = light_rig(pads=make_pads(action="push"))
    assert sum("not stable" in f.text for f in found(rig).findings) == 1


@pytest.mark.parametrize(
    ("change", "words"),
    [
        (lambda h: {"links": h.links[:-1]}, "the hardware has not the links of the rig: 14 .accepted: 15"),
        (lambda h: {"links": (h.links[1], h.links[0], *h.links[2:])}, "hardware, link 2: a link joins what"),
        (lambda h: {"bodies": {n: b for n, b in h.bodies.items() if n != "lever 4"}}, "a piece of the rig has no body"),
        (lambda h: {"pads": h.pads[1:]}, "the hardware has not the pads of the rig: 7 .accepted: 8"),
        (lambda h: {"masses": {}}, "hardware, link 1: a member has no mass"),
    ],
    ids=["links", "order", "bodies", "pads", "masses"],
)
def test_hardware_of_another_rig_is_refused(change, words):
    rig = light_rig()
    hardware = make_hardware_for(rig)
    with pytest.raises(InputError, match=words):
        check_hardware(check(rig), replace(hardware, **change(hardware)))


def test_hardware_on_the_other_side_of_the_specimen_is_refused():
    rig = light_rig()
    hardware = make_hardware_for(rig)
    with pytest.raises(InputError, match="stands on the other side of the specimen"):
        check_hardware(check(rig), replace(hardware, side=-hardware.side))


@pytest.mark.parametrize("kind", ["strap", "webbing"])
def test_what_cannot_push_fails_where_it_is_pushed(kind):
    rig = make_rig([0.5, 1.1, 2.0], [1300.0, 900.0, 700.0], brief=make_brief(pads=make_pads(count=3, action="push")))
    result = check_hardware(check(rig), make_hardware_for(rig, links=kind))
    pushed = [row for row in result.strength if row.check == "compression"]
    assert len(pushed) == 5
    assert not result.accepted
