"""The answer in sentences: every number is the check's, with its unit and what it is of."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_pads, make_specimen, make_weight, shape_load

from rigdesign.chain import arrange
from rigdesign.checks.model import Check
from rigdesign.checks.text import percent
from rigdesign.display import show
from rigdesign.findings import Finding, Refusal
from rigdesign.pads.remarks import proof_remarks
from rigdesign.report.sentences import answer, counted, error_line, finding_lines, refusal_lines, verdict


def checked(**changes) -> Check:
    result = arrange(make_brief(**changes))
    assert isinstance(result, Check)
    return result


def line_with(check: Check, words: str, system="SI") -> str:
    (line,) = [line for line in answer(check, system) if words in line]
    return line


def test_the_verdict_comes_first_and_says_how_much_of_the_band_is_taken():
    check = checked()
    first = answer(check)[0]
    assert first == f"Accepted: 6 pads on 5 levers; the largest error takes {percent(check.band_use)} of its band."


def test_a_rig_beyond_its_band_says_which_and_by_how_much():
    check = checked(acceptance=make_acceptance(moment=0.001, shear=None))
    assert not check.accepted
    assert verdict(check).startswith("Not accepted: 6 pads on 5 levers; moment over whole span takes ")
    assert percent(check.band_use) in verdict(check)


def test_a_rig_that_fails_for_another_reason_names_the_finding():
    failure = Finding("practice", "failure", "pad 3", "carries too much.", number=2)
    check = checked()
    broken = replace(check, findings=(*check.findings, failure))
    assert verdict(broken).endswith("pad 3: carries too much (practice 2).")


def test_a_broken_band_does_not_hide_another_failure():
    check = checked(acceptance=make_acceptance(moment=0.001, shear=None))
    failures = tuple(Finding("practice", "failure", f"pad {k}", "is too near.", number=k) for k in range(1, 6))
    words = verdict(replace(check, findings=(*check.findings, *failures)))
    assert "moment over whole span takes " in words
    assert words.endswith("pad 3: is too near (practice 3); 2 more among the findings.")
    assert "statics" not in words


def test_errors_say_under_and_over_where_and_per_cent_of_what():
    check = checked()
    row = next(region for region in check.regions if region.quantity == "moment")
    peak = check.rig.plan.target.moment_peak
    line = error_line(check, "moment")
    assert f"per cent of peak target moment ({show(peak, 'moment')})" in line
    assert f"{percent(row.under / peak)} under-test at x = {show(row.under_x, 'length')}" in line
    assert f"{percent(row.over / peak)} over-test at x = {show(row.over_x, 'length')}" in line
    assert f"band use {row.use:.3f}" in line


def test_a_quantity_without_a_band_is_not_judged():
    check = checked(acceptance=make_acceptance(shear=None))
    assert error_line(check, "shear").endswith("not judged.")
    assert "band use" in error_line(check, "moment")


def test_a_side_without_error_is_said_in_words():
    # one pad at the resultant lumps the load, which never exceeds the target's moment
    check = checked(pads=make_pads(count=1), acceptance=make_acceptance(moment=0.9, shear=0.9))
    assert "no over-test" in error_line(check, "moment")


def test_the_proof_and_what_drilling_costs():
    check = checked(acceptance=make_acceptance(shear=None))
    proof = check.rig.plan.proof
    line = line_with(check, "Proven")
    assert proof.method in line
    assert f"below a band use of {proof.band_use_least:.3f}" in line
    assert f"{check.band_use / proof.band_use:.3f} times" in line
    assert f"{percent(proof.moment_error_least)} of peak target moment" in line


def test_a_drilled_rig_below_the_bound_says_what_the_bound_is_of():
    free, below = checked(), "below the bound, which holds for the resultant met exactly"
    assert below not in line_with(free, "Proven")
    # four hard points leave no choice, and the jack that drilling moved answers some of the error
    pads = make_pads(count=4, places="hard points", stations=np.array([0.7, 1.2, 1.7, 2.7]), length=0.0, gap=0.0)
    moved = checked(pads=pads, acceptance=make_acceptance(moment=0.05, shear=None))
    assert moved.band_use < moved.rig.plan.proof.band_use_least * 0.999
    assert below in line_with(moved, "Proven")


def test_the_hand_method_stands_beside_the_rig():
    check = checked()
    line = line_with(check, "By hand")
    for number in (check.hand_moment, check.hand_shear, check.moment_error_peak, check.shear_error_peak):
        assert percent(number) in line
    assert "6 strips" in line


@pytest.mark.parametrize(("total", "way"), [(5400.0, "up (+z)"), (-5400.0, "down (−z)")])
def test_the_jack_says_its_way_force_and_place(total, way):
    check = checked(loads=(shape_load("triangular", total),), peak=1.5)
    line = line_with(check, "Jack 1")
    assert f"acts {way} with 5.40 kN, 8.10 kN at the peak of the test" in line
    assert f"x = {show(0.2 + 3.2 / 3, 'length')}" in line
    assert "at the resultant of what the pads bring" in line


def test_a_jack_beside_the_resultant_says_by_how_much():
    check = replace(checked(), jack_offset=-0.0123)
    assert "12.3 mm inboard of the resultant" in line_with(check, "Jack 1")


def test_what_a_load_cell_cannot_see():
    assert "more pads would not show" in line_with(checked(pads=make_pads(count=14, length=0.05)), "load cell")
    assert "cannot see less than 0.250 %" in line_with(checked(pads=make_pads(count=3)), "load cell")


def test_us_customary_units():
    check = checked(specimen=make_specimen(weight=make_weight([0.2, 3.4], [30.0, 8.0])))
    text = " ".join(answer(check, "us"))
    assert "lbf" in text
    assert "kN" not in text
    assert " m," not in text


def test_findings_and_refusals_are_paragraphs():
    finding = Finding("pads", "warning", "pad 2", "is crowded.", "30 mm", "40 mm", "move it.", 3)
    assert finding_lines((finding,)) == ["pads 3 (warning), pad 2: is crowded; 30 mm (limit 40 mm); move it."]
    refusal = Refusal("pads", "they do not fit.", "0.4 m a pad", "", "use fewer")
    assert refusal_lines(refusal) == [
        "No rig (pads): they do not fit.",
        "What binds: 0.4 m a pad.",
        "What would help: use fewer.",
    ]


def test_counting():
    assert (counted(0, "lever"), counted(1, "lever"), counted(2, "lever")) == ("0 levers", "1 lever", "2 levers")


def test_a_bound_of_zero_is_no_proof_and_its_gap_has_no_size():
    check = checked()
    plan = check.rig.plan
    proof = replace(plan.proof, band_use_least=0.0, band_use_found=plan.proof.band_use / 1.25)
    line = line_with(replace(check, rig=replace(check.rig, plan=replace(plan, proof=proof))), "Nothing is proven")
    assert f"the least found is {proof.band_use_found:.3f}, 25.0 % more is given up for even forces" in line
    assert f"to {check.band_use / proof.band_use:.3f} times" in line
    assert "limit" not in line
    (remark,) = proof_remarks(proof)
    assert remark.text == "nothing is proven of how small the band use of so many pads could be"
    assert remark.value == f"{proof.band_use_found:.4g} found"


def test_a_band_just_broken_does_not_read_as_kept():
    check = checked(acceptance=make_acceptance(shear=None))
    regions = tuple(replace(region, use=1.0002, accepted=False) for region in check.regions)
    broken = replace(check, regions=regions)
    assert not broken.accepted
    assert "takes a little more than 100 % of its band" in verdict(broken)
