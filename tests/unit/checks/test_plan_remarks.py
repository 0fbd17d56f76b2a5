"""Remarks of plan rigs: space between footprints and pieces, plates, shares pad by pad, bands by quantity, the jack."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from factories import array, make_levers, make_pads
from hand_plan_rigs import accept, line, make_plan_rig, outline, panel, plan_brief, pressure, surface
from hand_rigs import with_hole

from rigdesign.brief.model import JackRules
from rigdesign.checks import check

X = np.array([0.4, 0.45, 1.0, 1.1, 1.6, 1.65])
Y = np.array([-0.2, 0.4, -0.15, 0.45, -0.25, 0.35])
FORCE = np.array([330.0, 420.0, 390.0, 410.0, 440.0, 410.0])
GROUP = ((1, 2), (3, 4), (5, 6))
WIDE = accept(9.0, 9.0, 9.0)


def brief(**changes):
    """A panel 2 m by 1.2 m with pads 120 × 80 mm, bands so wide that nothing breaks them."""
    return plan_brief(panel(), **{"acceptance": WIDE, "loads": (pressure(1000.0),), **changes})


def pads(**changes):
    return make_pads(width=0.08, places="fixed", **changes)


def levers(**changes):
    return replace(make_levers(), plates=True, **changes)


def found(x=X, y=Y, force=FORCE, group=GROUP, **changes):
    return check(make_plan_rig(x, y, force, brief(**changes), group))


def of_stage(checked, stage):
    return [finding for finding in checked.findings if finding.stage == stage]


def the_failure(checked, stage="space"):
    """The one failure of a stage, numbered 1."""
    (failure,) = [finding for finding in of_stage(checked, stage) if finding.severity == "failure"]
    assert not checked.accepted
    return failure


def test_pads_and_pieces_that_keep_clear_leave_nothing_to_say():
    assert of_stage(found(), "space") == []
    assert found().accepted


def test_a_footprint_off_the_outline_is_named_with_how_far():
    y = Y + np.array([0, 0, 0, 0.23, 0, 0])
    failure = the_failure(found(y=y))
    # the pad's upper edge is 40 mm above 0.68 m, the outline at 0.70 m
    assert (failure.name, failure.object, failure.value) == ("space 1", "pad 4", "by 20.0 mm")
    assert "off the outline" in failure.text
    at_the_edge = found(y=Y + np.array([0, 0, 0, 0.21, 0, 0]))
    assert of_stage(at_the_edge, "space") == []


def test_a_footprint_over_a_notch_is_off_the_outline_though_its_corners_are_on_it():
    notched = outline(((0, -0.5), (2, -0.5), (2, 0.7), (1.11, 0.7), (1.1, 0.41), (1.09, 0.7), (0, 0.7)))
    checked = check(make_plan_rig(X, Y, FORCE, plan_brief(panel(outline=notched), acceptance=WIDE), GROUP))
    assert the_failure(checked).object == "pad 4"
    assert the_failure(checked).value == "over a notch of it"


def test_a_turned_footprint_reaches_farther():
    y = Y + np.array([0, 0, 0, 0.21, 0, 0])
    failure = the_failure(found(y=y, pads=replace(pads(), turn=np.radians(30.0))))
    # half the height of 120 × 80 mm turned by 30°: 60 sin 30° + 40 cos 30° = 64.64 mm, 24.64 mm more than 40 mm
    assert (failure.object, failure.value) == ("pad 4", "by 24.6 mm")


def test_the_edge_is_kept():
    rules = replace(pads(), edge=0.05)
    assert of_stage(found(pads=rules), "space") == []
    failure = the_failure(found(y=Y + np.array([0, 0, 0, 0.18, 0, 0]), pads=rules))
    assert (failure.object, failure.value, failure.limit) == ("pad 4", "30.0 mm", "edge 50.0 mm")


def test_keep_outs_are_kept_clear():
    stretch = found(pads=pads(keep_out=((1.13, 1.30),)))
    failure = the_failure(stretch)
    assert (failure.object, failure.value) == ("pad 4", "1.040 m to 1.160 m")
    assert "keep-out from x = 1.130 m to 1.300 m" in failure.text
    hatch = outline(((0.9, -0.13), (1.2, -0.1), (1.1, 0.42)), "hatch")
    failure = the_failure(found(pads=replace(pads(), keep_out_areas=(hatch,))))
    assert 'area "hatch"; so too pad' in failure.text
    assert {failure.object, failure.text[-5:]} == {"pad 3", "pad 4"}
    beside = outline(((1.16, -0.4), (1.4, -0.4), (1.4, 0.6), (1.16, 0.6)), "hatch")
    assert of_stage(found(pads=replace(pads(), keep_out_areas=(beside,))), "space") == []


def test_the_gap_is_that_between_footprints():
    y = np.array([-0.2, 0.4, -0.15, 0.45, -0.25, -0.12])
    # 80 mm wide and 130 mm apart along y, side by side along x: 50 mm clear
    failure = the_failure(found(y=y, group=((1, 2), (3, 4), (5, 6)), pads=pads(gap=0.06)))
    assert (failure.object, failure.value, failure.limit) == ("pad 5 and pad 6", "50.0 mm", "60.0 mm")
    assert of_stage(found(y=y, pads=pads(gap=0.05)), "space") == []
    over = found(y=np.array([-0.2, 0.4, -0.15, 0.45, -0.25, -0.20]), pads=pads(gap=0.0))
    assert "overlap" in the_failure(over).text


def test_pieces_of_one_tier_that_cross_or_come_close_are_named():
    crossing = found(group=((1, 4), (2, 3), (5, 6)))
    failure = the_failure(crossing)
    assert failure.text == "a lever and a lever of tier 2 cross"
    assert failure.object == "lever 2 and lever 3"
    # the same two levers in different tiers do not meet
    assert of_stage(found(group=((1, 4), (6, (5, (2, 3))))), "space") == []


def test_the_clearance_is_measured_between_centre_lines():
    x, y = np.array([0.4, 0.4, 0.9, 0.9]), np.array([-0.2, 0.4, -0.2, 0.4])
    force = np.full(4, 600.0)
    group = ((1, 2), (3, 4))
    assert of_stage(found(x, y, force, group, levers=levers(clearance=0.5)), "space") == []
    failure = the_failure(found(x, y, force, group, levers=levers(clearance=0.51)))
    assert (failure.value, failure.limit) == ("0.500 m", "clearance 0.510 m")
    # a plate is the whole of its triangle
    x, y = np.array([0.4, 0.4, 1.2, 0.6, 0.8]), np.array([-0.3, 0.5, 0.1, 0.05, 0.2])
    failure = the_failure(found(x, y, np.full(5, 480.0), ((1, 3, 2), (4, 5))))
    assert "a plate and a lever of tier 2 cross" in failure.text


def test_a_plate_whose_pivot_is_outside_its_triangle_is_named():
    rig = make_plan_rig(X[:3], Y[:3], FORCE[:3], brief(), (1, 3, 2))
    plate = rig.trees[0].pieces[0]
    far = max(plate.ends, key=lambda hole: hole.joins)
    moved = with_hole(rig, 1, "pivot", u=plate.pivot.u - 1.2 * far.u, v=plate.pivot.v - 1.2 * far.v)
    checked = check(moved)
    first, second = [f for f in of_stage(checked, "statics") if f.severity == "failure"]
    assert (first.object, first.limit) == ("lever 1", "above 0 %")
    assert f"hole {far.name} would have to act against" in first.text
    assert second.object == far.joins
    assert "that of every plate inside its triangle" in second.remedy
    assert checked.statics.share.min() < 0


def test_a_plate_that_is_nearly_a_line_is_refused():
    x, y = np.array([0.4, 1.0, 1.6]), np.array([0.1, 0.1 + 0.059, 0.1])
    failure = the_failure(found(x, y, np.full(3, 800.0), (1, 2, 3)), "statics")
    assert failure.object == "lever 1"
    # 59 mm over 1.2 m
    assert failure.value == "least height 59.0 mm, 4.92 % of its longest side"
    assert of_stage(found(x, y + np.array([0, 0.002, 0]), np.full(3, 800.0), (1, 2, 3)), "space") == []
    wider = found(x, y + np.array([0, 0.002, 0]), np.full(3, 800.0), (1, 2, 3))
    assert not any("one line" in finding.text for finding in wider.findings)


def test_a_plate_s_unequal_points_are_a_note_and_its_reaches_are_its_arms():
    x, y, force = X[:3], Y[:3], np.array([100.0, 500.0, 450.0])
    checked = found(x, y, force, (1, 3, 2))
    (note,) = [f for f in of_stage(checked, "practice") if "unequally" in f.text]
    assert (note.severity, note.value) == ("note", "the largest share is 5 times the smallest")
    assert not [
        f for f in of_stage(found(x, y, np.array([100.0, 390.0, 300.0]), (1, 3, 2)), "practice") if "unequ" in f.text
    ]
    plate = checked.rig.trees[0].pieces[0]
    shortest = min(np.hypot(hole.u, hole.v) for hole in plate.ends)
    short = found(x, y, force, (1, 3, 2), levers=levers(shortest_arm=shortest * 1.01))
    assert the_failure(short, "practice").text == "the shortest arm is too short"
    side = max(np.hypot(p.x - q.x, p.y - q.y) for p in plate.ends for q in plate.ends)
    long = found(x, y, force, (1, 3, 2), levers=levers(longest=side * 0.99))
    assert the_failure(long, "practice").text == "the plate is too long"


def test_a_panel_s_pads_are_judged_one_by_one():
    x, y = np.array([0.5, 0.5, 1.5, 1.5]), np.array([-0.2, 0.4, -0.2, 0.4])
    group = ((1, 2), (3, 4))
    # the same shear, moment and torsion along the span, but 20 % of two pads' shares are on the other two
    force = np.array([480.0, 720.0, 720.0, 480.0])
    kept = found(x, y, force, group, acceptance=accept(9.0, 9.0, 9.0, share=0.2))
    assert kept.accepted
    broken = found(x, y, force, group, acceptance=accept(9.0, 9.0, 9.0, share=0.19))
    failure = the_failure(broken, "statics")
    assert failure.object == "pad 1"
    assert failure.text.endswith("as it does not under its load; so too pad 2, pad 3 and pad 4")
    assert failure.value == "480 N for a share of 600 N, 20.0 % off"
    assert failure.limit == "19.0 % of the share"
    assert found(x, y, force, group).accepted


def test_bands_by_quantity_are_said_with_what_they_are_fractions_of():
    tight = accept(9.0, 9.0, 0.05, across=0.01)
    checked = found(y=Y + 0.03, acceptance=tight)
    texts = {finding.object: finding for finding in of_stage(checked, "statics") if finding.severity == "failure"}
    across = [f for f in of_stage(checked, "statics") if f.severity == "failure" and "across at y = " in f.text]
    assert len(across) == 2
    assert set(texts) == {"whole span", "whole width"}
    torsion = texts["whole span"]
    assert "of the torsion at" in torsion.text
    peak = checked.rig.plan.target.torsion_peak
    assert torsion.value.endswith(f"{100 * checked.errors['torsion'].peak:.1f} % of the peak target torsion")
    assert checked.errors["torsion"].reference == peak
    assert "more pads" in torsion.remedy
    # pads at the centres of their shares but for 50 mm along y, which the jack stands off as well
    x, y = np.array([0.5, 0.5, 1.5, 1.5]), np.array([-0.15, 0.45, -0.15, 0.45])
    checked = found(x, y, np.full(4, 600.0), ((1, 2), (3, 4)), acceptance=tight)
    failures = [f for f in of_stage(checked, "statics") if f.severity == "failure" and "torsion" in f.text]
    assert all("jack's place alone" in failure.remedy for failure in failures)
    assert failures


def test_the_jack_s_place_in_plan_is_told_with_what_it_costs():
    (remark,) = [f for f in of_stage(found(), "statics") if f.object == "jack 1"]
    checked = found()
    assert f"{abs(checked.jack_offset) * 1e3:.3g}" in remark.text
    assert "inboard" in remark.text or "outboard" in remark.text
    assert "y of the resultant" in remark.text
    cost = abs(checked.jack_offset_y) * 2400.0
    assert f"a torsion about the x direction of {cost:.3g} N·m" in remark.text
    told = found(jack=JackRules(at=1.0, step=None, at_y=0.1))
    assert 'another "at"' in next(f for f in of_stage(told, "statics") if f.object == "jack 1").remedy


def test_what_is_not_checked_says_so():
    assert any(f.text.startswith("not checked: links that pass pieces of other tiers") for f in found().findings)


def test_turns_given_place_by_place_turn_the_footprints():
    rules = replace(pads(stations=array(X)), y=array(Y), turns=array(np.radians([0, 0, 0, 90, 0, 0])))
    y = Y + np.array([0, 0, 0, 0.2, 0, 0])
    rules = replace(rules, y=array(y))
    # turned by 90° pad 4 is 120 mm along y: 0.65 + 0.06 m
    assert the_failure(found(y=y, pads=rules)).value == "by 10.0 mm"
    swept = plan_brief(surface(axis=line((0.2, 0.05), (3.4, -0.40))), acceptance=WIDE)
    assert check(make_plan_rig(X, Y, FORCE, swept, GROUP)).across is not None


def test_a_hole_of_a_plate_beside_its_pivot_is_a_warning_where_no_shortest_arm_is_asked_for():
    x, y = X[:3], Y[:3]
    # nearly all of the load on the second point draws the pivot to it
    checked = found(x, y, np.array([20.0, 1500.0, 25.0]), (1, 3, 2), levers=levers(shortest_arm=0.0))
    plate = checked.rig.trees[0].pieces[0]
    near = min(np.hypot(hole.u, hole.v) for hole in plate.ends)
    (warned,) = [f for f in of_stage(checked, "practice") if "pins hardly fit" in f.text]
    assert (warned.severity, warned.object, warned.value) == ("warning", "lever 1", f"{1e3 * near:.1f} mm")
    asked = found(x, y, np.array([20.0, 1500.0, 25.0]), (1, 3, 2), levers=levers(shortest_arm=0.01))
    apart = found(x, y, np.array([100.0, 390.0, 300.0]), (1, 3, 2), levers=levers(shortest_arm=0.0))
    assert not [f for one in (asked, apart) for f in of_stage(one, "practice") if "hardly fit" in f.text]


def test_a_finer_drill_step_is_advised_only_where_drilling_cost_something():
    rig = make_plan_rig(X, Y + 0.03, FORCE, brief(acceptance=accept(9.0, 9.0, 0.05)), GROUP)
    for before, advised in ((0.9, True), (1.0, False)):
        proof = replace(rig.plan.proof, band_use=before * check(rig).band_use)
        checked = check(replace(rig, plan=replace(rig.plan, proof=proof)))
        failures = [f for f in of_stage(checked, "statics") if "more pads" in f.remedy]
        assert failures
        assert all(("drill step" in f.remedy) == advised for f in failures)
