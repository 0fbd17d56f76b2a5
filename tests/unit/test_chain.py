"""The stages in a row."""

from __future__ import annotations

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_levers, make_pads, shape_load

from rigdesign import chain
from rigdesign.chain import arranging
from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.checks.model import Check
from rigdesign.errors import BriefError
from rigdesign.findings import Refusal


def test_design_goes_from_brief_to_check():
    answer = chain.arrange(make_brief())
    assert isinstance(answer, Check)
    assert answer.accepted
    assert answer.rig.plan.n_pads == 6
    assert answer.statics.pad_force.sum() == pytest.approx(5400.0, rel=1e-12)


def test_a_refusal_of_any_stage_comes_out_as_it_is():
    weak = chain.arrange(make_brief(pads=make_pads(largest_force=500.0)))
    assert isinstance(weak, Refusal)
    assert weak.stage == "pads"
    no_tree = chain.arrange(make_brief(levers=make_levers(longest=0.3)))
    assert isinstance(no_tree, Refusal)
    assert no_tree.stage == "levers"


def test_fewest_is_the_first_count_whose_drilled_rig_is_accepted():
    brief = make_brief(pads=make_pads(count="fewest"))
    answer = chain.arrange(brief)
    assert isinstance(answer, Check)
    rows = chain.study(brief, range(1, answer.rig.plan.n_pads + 1)).rows
    assert [row.accepted for row in rows] == [False] * (len(rows) - 1) + [True]


def test_fewest_takes_one_pad_more_where_drilling_breaks_a_band():
    # holes on 100 mm cost more than the band leaves
    pads, narrow = make_pads(count="fewest", gap=0.0, length=0.02), make_acceptance(moment=0.005, shear=None)
    fine = chain.arrange(make_brief(pads=pads, acceptance=narrow))
    coarse = chain.arrange(make_brief(pads=pads, acceptance=narrow, levers=make_levers(drill_step=0.1)))
    assert isinstance(fine, Check)
    assert isinstance(coarse, Check)
    assert coarse.accepted
    assert coarse.rig.plan.n_pads > fine.rig.plan.n_pads
    assert any(f"fewest before drilling: {fine.rig.plan.n_pads}" in finding.limit for finding in coarse.findings)


def test_fewest_gives_the_best_where_more_pads_do_not_help_either(monkeypatch):
    tried = []

    def never_good(target, count, progress, stock, remarks=()):
        tried.append(count)
        return _Answer(4 if count is None else count)

    monkeypatch.setattr(arranging, "arrange_count", never_good)
    answer = chain.arrange(make_brief(pads=make_pads(count="fewest")))
    assert tried == [None, *range(5, 5 + arranging.MORE_PADS)]
    assert answer.rig.plan.n_pads == 6


class _Answer:
    """A check that is never accepted, best at 6 pads."""

    accepted = False

    def __init__(self, n_pads: int) -> None:
        self.band_use = 1.5 + abs(n_pads - 6)
        self.rig = self.plan = self
        self.n_pads = n_pads


def test_study_keeps_the_order_and_says_the_fewest():
    brief = make_brief()
    study = chain.study(brief, [7, 3, 7, 5])
    assert [row.pads for row in study.rows] == [3, 5, 7]
    accepted = [row.pads for row in study.rows if row.accepted]
    assert study.fewest is not None
    assert study.fewest.pads == min(accepted)
    # a row is what a brief with that count gives
    alone = chain.arrange(make_brief(pads=make_pads(count=5)))
    assert isinstance(alone, Check)
    assert study.rows[1].answer.moment_error_peak == alone.moment_error_peak


def test_study_without_an_accepted_row_has_no_fewest():
    narrow = make_acceptance(moment=0.001)
    assert chain.study(make_brief(acceptance=narrow), [2, 3]).fewest is None


@pytest.mark.parametrize("counts", [[], [0, 3], [-1]])
def test_study_wants_numbers_of_pads(counts):
    with pytest.raises(ValueError, match="1 or more"):
        chain.study(make_brief(), counts)


def test_a_study_of_several_counts_takes_no_prescribed_grouping():
    brief = make_brief(levers=make_levers(grouping=((1, 2), (3, 4))), pads=make_pads(count=4))
    with pytest.raises(BriefError, match=r"\[levers\] grouping: a study compares several .* delete the grouping"):
        chain.study(brief, [4, 5])
    assert isinstance(chain.study(brief, [4]).rows[0].answer, Check)


def test_progress_goes_from_nothing_to_all_and_never_back():
    told = []
    chain.study(make_brief(), [3, 4], lambda part, words: told.append((part, words)))
    parts = [part for part, _ in told]
    assert parts == sorted(parts)
    assert parts[0] >= 0.0
    assert parts[-1] <= 1.0
    assert {words.split(":")[0] for _, words in told} == {"3 pads", "4 pads"}


def test_assess_as_it_is_and_against_another_target():
    answer = chain.arrange(make_brief())
    assert isinstance(answer, Check)
    again = chain.assess(answer.rig)
    np.testing.assert_array_equal(again.statics.pad_force, answer.statics.pad_force)
    other = make_brief(loads=(shape_load("uniform", 8000.0),))
    moved = chain.assess(answer.rig, brief=other)
    assert moved.rig.plan.target.resultant == pytest.approx(8000.0)
    assert moved.statics.share == pytest.approx(answer.statics.share)
    assert moved.moment_error_peak > 10 * answer.moment_error_peak


def test_assess_with_holes_and_another_target_at_once(tmp_path):
    answer = chain.arrange(make_brief())
    assert isinstance(answer, Check)
    lever = answer.rig.trees[0].pieces[0]
    holes = tmp_path / "built.csv"
    holes.write_text(f"lever,hole,u_m,v_m\n1,A,{lever.ends[0].u * 1.1},0.0\n")
    both = chain.assess(answer.rig, holes=holes, brief=make_brief(loads=(shape_load("elliptical", 9000.0),)))
    assert both.rig.plan.target.resultant == pytest.approx(9000.0)
    assert both.statics.share != pytest.approx(answer.statics.share, rel=1e-3)


def test_fewest_that_levers_cannot_join_gives_the_most_that_they_can():
    """Bands that no number of pads keeps ask for as many as fit; the answer is a rig all the same, and says why."""
    brief = make_brief(
        pads=make_pads(count="fewest", length=0.2, gap=0.0),
        levers=make_levers(shortest_arm=0.12),
        acceptance=make_acceptance(moment=0.0005, shear=None),
    )
    answer = chain.arrange(brief)
    assert not isinstance(answer, Refusal)
    assert not answer.accepted
    finding = next(f for f in answer.findings if f.stage == "levers" and f.severity == "failure")
    assert "the bands ask for" in finding.text
    assert "shortest_arm" in finding.limit
    assert finding.value == f"{answer.rig.plan.n_pads} pads"


def test_a_rig_is_assessed_with_its_hardware():
    answer = chain.design(make_brief(pads=make_pads(count=3)))
    assert isinstance(answer, HardwareCheck)
    again = chain.assess(answer.check.rig, hardware=answer.hardware)
    assert again.strength == answer.strength
    assert again.tare.pad_tare == pytest.approx(answer.tare.pad_tare)
    heavier = chain.assess(
        answer.check.rig, brief=make_brief(loads=(shape_load("elliptical", 8100.0),)), hardware=answer.hardware
    )
    assert heavier.utilisation > answer.utilisation
    assert chain.assess(answer.check.rig).rig == answer.check.rig
