"""Matters of limits: exit code 1, what binds, and the best that was found."""

from __future__ import annotations

import json

import pytest
from journey import SMALL, changed

PADS = "[pads]\n"
WITH_WEIGHT = SMALL.replace('tip     = "1.7 m"', 'tip     = "1.7 m"\nweight = "weight.csv"\ngravity = "with"')
HARD_POINTS = changed(SMALL, places='places = "hard points"\nstations = "0.3, 0.8, 1.3 m"')

NO_RIG = {
    "pads that cannot fit": (SMALL.replace(PADS, '[pads]\nlength = "400 mm"\n'), ["0.400 m", "5 pads", "4 pads fit"]),
    "more pads than hard points": (HARD_POINTS, ["5", "3", "hard points"]),
    "pads too weak for the total": (SMALL.replace(PADS, '[pads]\nlargest_force = "300 N"\n'), ["300 N", "1.90 kN"]),
    "a net target the other way": (WITH_WEIGHT, ["gravity"]),
}


@pytest.mark.parametrize("name", NO_RIG)
def test_no_rig_at_all_says_what_binds_and_writes_nothing(rigdesign, here, name):
    text, words = NO_RIG[name]
    (here / "fin.toml").write_text(text)
    (here / "weight.csv").write_text("x [m],mass [kg/m]\n0.1,240\n1.7,160\n")
    ended = rigdesign("design", "fin.toml")
    assert ended.code == 1
    assert ended.err == ""
    assert "No rig" in ended.out
    assert "What binds:" in ended.out
    assert "Nothing was written." in ended.out
    for word in words:
        assert word in ended.out
    assert not (here / "fin_rig").exists()
    answer = json.loads(rigdesign("design", "fin.toml", "--json").out)
    assert answer["verdict"] == "no rig"
    assert answer["limit"]


def test_bands_too_narrow_write_the_best_rig_as_not_accepted(rigdesign, here):
    (here / "fin.toml").write_text(changed(SMALL, moment='moment = "0.3 %"'))
    ended = rigdesign("design", "fin.toml", "--no-figures")
    assert ended.code == 1
    assert "Not accepted" in ended.out
    assert "Proven" in ended.out
    summary = json.loads((here / "fin_rig" / "summary.json").read_text())
    assert summary["verdict"] == "not accepted"
    assert summary["band_use"] > 1
    # five pads cannot do it, and that is proven
    assert summary["band_use_least"] > 1


def test_a_study_in_which_nothing_is_accepted(rigdesign, here):
    (here / "fin.toml").write_text(changed(SMALL, moment='moment = "0.3 %"'))
    ended = rigdesign("study", "fin.toml", "--pads", "2..4", "--json")
    assert ended.code == 1
    answer = json.loads(ended.out)
    assert answer["fewest_accepted"] is None
    assert [row["verdict"] for row in answer["rows"]] == ["not accepted"] * 3


def test_no_lever_within_the_ratio_limit(rigdesign, here):
    limits = '[levers]\nshortest_arm = "450 mm"\n\n[acceptance]'
    (here / "fin.toml").write_text(SMALL.replace("[acceptance]", limits))
    ended = rigdesign("design", "fin.toml")
    assert ended.code == 1
    assert "450 mm" in ended.out
