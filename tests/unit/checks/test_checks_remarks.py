"""Remarks of the check: break one thing, find exactly that remark."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import (
    band_rules,
    make_acceptance,
    make_brief,
    make_levers,
    make_pads,
    make_weight,
    shape_load,
    two_supports,
)
from hand_rigs import make_rig as hand_rig
from hand_rigs import with_brief, with_hole

from rigdesign.brief.model import JackRules, Region
from rigdesign.checks import check
from rigdesign.checks.measures import hand_pads
from rigdesign.findings import Finding
from rigdesign.levers.model import Rig
from rigdesign.target import build_target

TARGET = build_target(make_brief())
X, FORCE = hand_pads(TARGET.net, 6)
ALWAYS = ["not checked", 'the aim "closest"']


def planned(rig: Rig, band_use: float) -> Rig:
    """The rig with this band use promised by its plan."""
    return replace(rig, plan=replace(rig.plan, proof=replace(rig.plan.proof, band_use=band_use)))


def make_rig(*args: object, **changes: object) -> Rig:
    """A rig by hand whose plan promises so little that drilling cannot have spoiled it."""
    return planned(hand_rig(*args, **changes), np.inf)


def rig(**changes: object) -> Rig:
    """Six strips at their centroids: accepted, and nothing to remark on but what is always said."""
    return make_rig(X, FORCE, make_brief(**changes))


def remarks(rig: Rig) -> list[Finding]:
    """The check's own remarks but those that are always there."""
    return [f for f in check(rig).findings if not f.text.startswith(tuple(ALWAYS))]


def only(rig: Rig) -> Finding:
    found = remarks(rig)
    assert len(found) == 1, [f.text for f in found]
    return found[0]


def test_a_sound_rig_has_only_what_is_always_said():
    found = check(rig())
    assert [f.text.startswith(start) for f, start in zip(found.findings, ALWAYS, strict=True)] == [True, True]
    assert [f.name for f in found.findings] == ["statics 1", "practice 1"]
    assert all(f.severity == "note" for f in found.findings)
    assert found.accepted


def test_earlier_findings_come_first_and_count():
    known = rig()
    earlier = Finding("levers", "failure", "lever 2", "made up")
    found = check(replace(known, findings=(earlier,)))
    assert [f.name for f in found.findings] == ["levers 1", "statics 1", "practice 1"]
    assert not found.accepted


def test_a_broken_band_says_where_how_much_and_of_what():
    region = Region("0.3 m to 1.4 m", 0.3, 1.4, band_rules("shear", 0.05, 0.08))
    known = with_brief(rig(), make_brief(acceptance=make_acceptance(regions=(region,))))
    finding = only(known)
    found = check(known)
    row = next(r for r in found.regions if r.name == region.name and r.quantity == "shear")
    assert (finding.stage, finding.severity, finding.object) == ("statics", "failure", "0.3 m to 1.4 m")
    assert f"{row.use:.3g} times its band" in finding.text
    assert "of the peak target shear" in finding.value
    assert finding.limit.endswith("5.00 % of the peak target shear") or finding.limit.endswith(
        "8.00 % of the peak target shear"
    )
    assert not found.accepted


def test_a_broken_band_of_the_whole_span():
    finding = only(with_brief(rig(), make_brief(acceptance=make_acceptance(moment=0.005))))
    assert finding.object == "whole span"
    assert finding.text.startswith("under-test of the moment at 0.4")
    assert finding.limit.endswith("0.500 % of the peak target moment")


def test_pad_force_above_its_limit_at_the_peak_of_the_test():
    limit = float(FORCE.max()) * 1.2
    assert remarks(rig(pads=make_pads(largest_force=limit))) == []
    finding = only(rig(pads=make_pads(largest_force=limit), peak=1.5))
    assert (finding.stage, finding.severity, finding.object) == ("practice", "failure", "pad 1")
    assert (
        finding.text
        == "the pad force is above largest_force, at 150 % of the brief's load, the peak of the test"
        + ("; so too pad 2, pad 3 and pad 4")
    )


def test_pad_force_below_its_limit():
    finding = only(rig(pads=make_pads(least_force=float(FORCE.min()) * 1.01)))
    assert (finding.severity, finding.object) == ("failure", f"pad {int(np.argmin(FORCE)) + 1}")
    assert finding.text.startswith("the pad force is below least_force")


def test_a_pad_at_its_limit_passes():
    assert remarks(rig(pads=make_pads(largest_force=float(FORCE.max()), least_force=float(FORCE.min())))) == []


def test_pressure_above_its_limit():
    limit = float(FORCE.max()) / (0.12 * 0.2)
    assert remarks(rig(pads=make_pads(width=0.2, largest_pressure=limit))) == []
    finding = only(rig(pads=make_pads(width=0.199, largest_pressure=limit)))
    assert (finding.severity, finding.object) == ("failure", "pad 1")
    assert finding.limit == "47.5 kPa"


def test_footprint_off_the_specimen():
    finding = only(rig(pads=make_pads(length=0.54, gap=-1.0)))
    assert finding.text == "the pad's footprint reaches off the specimen"
    assert finding.object == "pad 1"
    assert finding.limit == "0.200 m to 3.400 m"


def test_places_that_only_drilling_spoiled_ask_for_a_smaller_step():
    known = rig(pads=make_pads(length=0.53, gap=-1.0))
    assert remarks(known) == []

    def moved(by, pads):
        changed = rig(pads=pads)
        drilled = make_rig(X + by, FORCE, make_brief(pads=pads))
        return replace(drilled, plan=replace(drilled.plan, x=changed.plan.x, may_move=True))

    edge = float(X[2]) + 0.06
    gap = float(np.diff(X).min()) - 0.12
    shift = np.array([0.0, 0.0, 0.0, 0.0, 0.0, -0.01])
    for by, pads, words in (
        (-0.003, make_pads(length=0.53, gap=-1.0), "off the specimen"),
        (0.003, make_pads(keep_out=((edge, edge + 0.1),)), "into the keep-out"),
        (shift, make_pads(gap=gap), "gap between"),
    ):
        finding = next(f for f in remarks(moved(by, pads)) if words in f.text)
        assert finding.remedy.startswith("choose a smaller drill step"), words
        stays = moved(by, pads)
        stays = replace(stays, plan=replace(stays.plan, may_move=False))
        assert "drill step" not in next(f for f in remarks(stays) if words in f.text).remedy


def test_footprint_in_a_keep_out():
    edge = float(X[2]) + 0.06
    assert remarks(rig(pads=make_pads(keep_out=((edge, edge + 0.1),)))) == []
    finding = only(rig(pads=make_pads(keep_out=((edge - 0.001, edge + 0.1),))))
    assert finding.object == "pad 3"
    assert finding.text.startswith("the pad's footprint reaches into the keep-out from")


def test_gap_too_small():
    least = float(np.diff(X).min())
    assert remarks(rig(pads=make_pads(gap=least - 0.12))) == []
    finding = only(rig(pads=make_pads(gap=least - 0.12 + 1e-6)))
    assert finding.text == "the gap between the pads is too small"
    nearest = int(np.argmin(np.diff(X)))
    assert finding.object == f"pad {nearest + 1} and pad {nearest + 2}"


def test_lever_limits():
    # pads 1 to 3 as ((1, 2), 3) and 4 to 6 likewise: lever 1, 1.474 m long, holds levers 2 and 4; lever 4 has ratio 3.9
    finding = only(rig(levers=make_levers(ratio_limit=2.0)))
    assert (finding.severity, finding.text.split(";")[0]) == ("failure", "the lever ratio is above ratio_limit")
    finding = only(rig(levers=make_levers(longest=1.4)))
    assert (finding.severity, finding.object) == ("failure", "lever 1")
    assert finding.text == "the lever is too long"
    assert finding.value == "1.474 m"
    finding = only(rig(levers=make_levers(shortest_arm=0.2)))
    assert (finding.severity, finding.text.split(";")[0]) == ("failure", "the shortest arm is too short")
    finding = only(rig(levers=make_levers(tiers=2)))
    assert (finding.severity, finding.value, finding.limit) == ("failure", "3", "2")
    assert remarks(rig(levers=make_levers(tiers=3))) == []


def test_a_ratio_above_four_is_a_note():
    # pad 6 hangs on the topmost lever with the five others: their forces are 11.6 to 1
    group = (((((1, 2), 3), 4), 5), 6)
    known = make_rig(X, FORCE, make_brief(levers=make_levers(ratio_limit=12.0)), group=group)
    high = only(known)
    assert (high.severity, high.object, high.limit) == ("note", "lever 1", "4 by common practice")
    assert "higher than is usual" in high.text
    assert float(high.value) == pytest.approx(FORCE[:5].sum() / FORCE[5], rel=5e-3)
    assert high.text.endswith("; so too lever 2")


def test_a_pad_against_its_jack_and_a_pivot_outside():
    known = with_hole(rig(), 3, "A", u=0.05)
    found = remarks(known)
    wrong = next(f for f in found if "against its jack" in f.text)
    assert (wrong.stage, wrong.severity, wrong.object) == ("statics", "failure", "pad 2")
    assert any(f.value == "the pivot is not between the end pins" for f in found)
    assert not check(known).accepted


def test_a_pad_that_carries_next_to_nothing():
    pads, force = np.append(X[:5], 3.1), np.append(FORCE[:5], 40.0)
    known = make_rig(pads, force, make_brief(acceptance=make_acceptance(0.5, 0.5), levers=make_levers(ratio_limit=99)))
    idle = next(f for f in remarks(known) if "next to nothing" in f.text)
    assert (idle.severity, idle.object) == ("warning", "pad 6")
    assert idle.value.startswith("40.0 N, ")


def test_a_jack_away_from_the_resultant_costs_a_moment():
    target = TARGET
    moved = make_rig(X + 0.0125, FORCE, make_brief())
    found = next(f for f in remarks(moved) if f.object == "jack 1")
    assert found.value == "12.5 mm"
    assert "stands outboard of the resultant; that costs a moment of 67.5 N·m at the root" in found.text
    assert found.severity == "warning"
    assert check(moved).jack_offset == pytest.approx(0.0125)
    # the root's moment error is that couple
    curves = check(moved).curves
    assert curves.error("moment")[0] == pytest.approx(0.0125 * target.net.total, rel=1e-9)
    slight = next(f for f in remarks(make_rig(X - 0.0004, FORCE, make_brief())) if f.object == "jack 1")
    assert slight.severity == "note"
    assert "inboard" in slight.text


def test_links_that_lean():
    finding = next(f for f in remarks(with_hole(rig(), 3, "B", u=0.35)) if "leans" in f.text)
    assert finding.stage == "statics"
    assert finding.object == "lever 3 hole B"
    assert finding.severity == "warning"
    assert "the link from lever 3 hole B to" in finding.text
    held = next(h for h in rig().trees[0].pieces[2].ends if h.name == "B")
    slight = next(f for f in remarks(with_hole(rig(), 3, "B", u=held.u + 0.002)) if "leans" in f.text)
    assert slight.severity == "note"
    assert slight.value == "2.00 mm"


def test_holes_off_line():
    finding = next(f for f in remarks(with_hole(rig(), 2, "pivot", v=0.004)) if "off the line" in f.text)
    assert (finding.severity, finding.object) == ("warning", "lever 2")
    assert finding.value.startswith("4.00 mm, a moment of")


def test_the_band_floor_is_said_where_it_is_applied():
    region = Region("root", 0.2, 1.0, band_rules("moment", 0.0, 0.03))
    found = remarks(with_brief(rig(), make_brief(acceptance=make_acceptance(regions=(region,)))))
    floor = next(f for f in found if "narrower than the least" in f.text)
    assert (floor.severity, floor.object, floor.value) == ("note", "moment", "0 N·m")
    assert "between 0.200 m and 1.000 m" in floor.text
    assert floor.limit.endswith("0.05 % of the peak target moment")


def test_below_what_a_load_cell_sees():
    x, force = hand_pads(TARGET.net, 16)
    found = only(make_rig(x, force, make_brief()))
    assert (found.severity, found.limit) == ("note", "0.250 % of reading")
    assert "smaller than what a load cell sees" in found.text


def test_two_supports_say_who_pays_for_the_jack():
    specimen = two_supports(0.2, 0.7, 2.6, 3.4, weight=make_weight([0.2, 3.4], [9.0, 21.0]))
    brief = make_brief(specimen=specimen, loads=(shape_load("uniform", 6000.0),), acceptance=make_acceptance(0.5, 0.5))
    target = build_target(brief)
    x, force = hand_pads(target.net, 5)
    found = next(f for f in remarks(make_rig(x + 0.03, force, target=target)) if f.object == "jack 1")
    assert "at the supports' expense" in found.text


def test_what_is_left_out_is_said():
    text = next(f.text for f in check(rig()).findings if f.text.startswith("not checked"))
    for word in ("own weight", "friction", "deflection", "strength"):
        assert word in text


def test_statics_that_does_not_close_fails(monkeypatch):
    import rigdesign.checks.statics as module

    monkeypatch.setattr(module, "lever_fractions", lambda a, b: (1.01 * b / (a + b), a / (a + b)))
    texts = [f.text for f in check(rig()).findings if f.severity == "failure"]
    assert sum(text.startswith("the statics does not close") for text in texts) == 3


def test_a_jack_that_the_brief_holds_back_is_told_by_its_key():
    for rules, words in (
        (JackRules(at=1.4, step=None), 'another "at" in [jack]'),
        (JackRules(at=None, step=0.05), 'a smaller "step" in [jack]'),
        (JackRules(at=None, step=None), "a smaller drill step"),
    ):
        moved = make_rig(X + 0.0125, FORCE, make_brief(jack=rules))
        assert words in next(f for f in remarks(moved) if f.object == "jack 1").remedy


def test_more_pads_are_not_advised_where_the_place_of_the_jack_makes_the_error():
    asked = make_acceptance(moment=0.005, shear=None)
    far = next(
        f
        for f in remarks(make_rig(X + 0.03, FORCE, make_brief(acceptance=asked)))
        if "under-test" in f.text or "over-test" in f.text
    )
    assert far.remedy.startswith("the jack's place alone makes more than half of it; let the jack stand")
    close = next(f for f in remarks(make_rig(X, FORCE, make_brief(acceptance=asked))) if "-test" in f.text)
    assert close.remedy.startswith("more pads")


def test_more_pads_are_not_advised_where_a_keep_out_makes_the_error():
    asked = make_acceptance(moment=None, shear=0.005)
    plain = next(f for f in remarks(make_rig(X, FORCE, make_brief(acceptance=asked))) if "of the shear" in f.text)
    assert plain.remedy.startswith("more pads")
    x = float(plain.text.split(" at ")[1].split(" m")[0])
    # the footprint of 120 mm ends where the keep-out starts
    beside = make_pads(keep_out=((x + 0.06, x + 0.1),))
    found = next(
        f for f in remarks(make_rig(X, FORCE, make_brief(acceptance=asked, pads=beside))) if "of the shear" in f.text
    )
    assert found.remedy.startswith(f"the keep-out from {x + 0.06:.3f} m to {x + 0.1:.3f} m binds here")


@pytest.mark.parametrize(
    ("band", "promised", "severity"), [(0.95, 0.6, "warning"), (1.6, 0.5, "note"), (1.6, 0.8, None), (5.0, 0.01, None)]
)
def test_what_drilling_costs_is_remarked_on(band, promised, severity):
    """Bands in units of the error that the rig has; a plan that promised less error than the holes keep."""
    error = check(rig()).moment_error_peak
    known = rig(acceptance=make_acceptance(band * error, None), levers=make_levers(drill_step=0.025))
    found = [f for f in check(planned(known, promised)).findings if "whole drill steps" in f.text]
    assert [f.severity for f in found] == ([severity] if severity else [])
    if severity:
        assert found[0].stage == "practice"
        assert found[0].value == f"band use {1 / band:.3g} as drilled, {promised} before drilling"
        assert found[0].limit == "drill_step 25.0 mm"


def test_a_tree_that_pushes_is_said_to_topple():
    found = only(rig(pads=make_pads(action="push")))
    assert (found.severity, found.object) == ("warning", "rig")
    assert "not stable" in found.text
    assert "guide" in found.remedy


def test_a_lever_built_right_at_its_limit_is_not_too_long():
    lengths = [np.ptp([hole.u for hole in piece.ends]) for piece in rig().trees[0].pieces]
    longest = max(lengths) * (1 - 1e-9)  # the levers stage allows this much above the limit
    assert not remarks(rig(levers=make_levers(longest=longest)))
    assert "too long" in only(rig(levers=make_levers(longest=longest * (1 - 1e-6)))).text
