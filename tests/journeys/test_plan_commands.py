"""Each command on a small plan rig: its words, its files, its exit code."""

from __future__ import annotations

import csv
import json

import pytest
from journey import changed, files_under

PANEL = """
title = "Sluice gate leaf, level difference"

[specimen]
support  = "two supports"
ends     = ["0 m", "2.0 m"]
supports = ["0.2 m", "1.7 m"]
outline  = "leaf.csv"

[[load]]
pressure = "level.csv"

[pads]
places = "fixed"
table  = "places.csv"
length = "150 mm"
width  = "120 mm"

[levers]
plates = true

[acceptance]
moment  = "25 %"
shear   = "60 %"
torsion = "500 N*m"
across  = "30 %"
share   = "60 %"
"""
TABLES = {
    "places.csv": "x [m],y [m]\n" + "".join(f"{x},{y}\n" for x in (0.35, 1.0, 1.65) for y in (-0.4, 0, 0.4)),
    "line.csv": "x [m],y [m]\n" + "".join(f"{0.2 + 0.4 * k},-0.04\n" for k in range(5)),
    "leaf.csv": "x [m],y [m]\n0,-0.6\n2.0,-0.6\n2.0,0.6\n0,0.6\n",
    "level.csv": "x [m],y [m],pressure [Pa]\n0,-0.6,3000\n2.0,-0.6,3000\n2.0,0.6,2000\n0,0.6,2000\n",
}
CONTRACT = {
    "rig.json", "summary.json", "pads.csv", "levers.csv", "holes.csv", "jacks.csv", "stations.csv", "regions.csv",
    "across.csv",
    "parts.csv", "strength.csv", "links.csv", "pins.csv", "tare.csv", "cut_list.csv", "drill_list.csv", "masses.csv",
}  # fmt: skip


@pytest.fixture
def leaf(here):
    """The small panel as files."""
    for name, text in {**TABLES, "leaf.toml": PANEL}.items():
        (here / name).write_text(text)
    return here / "leaf.toml"


def test_design_answers_in_sentences_and_writes_the_folder(rigdesign, leaf, here):
    ended = rigdesign("design", "leaf.toml", "--no-figures")
    assert (ended.code, ended.err) == (0, "")
    order = ["Sluice gate leaf", "Answer", "Accepted: 9 pads on", "Largest errors of the moment",
             "Largest errors of the torsion", "Largest errors of the shear across", "Pad by pad", "Proven",
             "The target's resultant", "Jack 1 acts up (+z)", "Pads", "whole width", "Findings",
             "licensed engineer", "Written to"]  # fmt: skip
    text = " ".join(ended.out.split())
    places = [text.index(words) for words in order]
    assert places == sorted(places)
    files = set(files_under(here / "leaf_rig"))
    assert {name for name in files if not name.startswith("dxf/")} == CONTRACT
    assert "dxf/L1.dxf" in files


def test_the_folder_is_replaced_and_reads_back_to_the_last_digit(rigdesign, leaf, here):
    first = rigdesign("design", "leaf.toml", "--no-figures", "--json")
    summary = json.loads(first.out)
    before = files_under(here / "leaf_rig")
    assert rigdesign("design", "leaf.toml", "--no-figures", "--replace").code == 0
    assert files_under(here / "leaf_rig") == before
    assert json.loads(rigdesign("assess", "leaf_rig", "--json").out) == summary
    assert rigdesign("assess", "leaf_rig", "--out", "again_rig", "--no-figures").code == 0
    assert files_under(here / "again_rig") == before


def test_pads_sum_to_the_target_in_plan(rigdesign, leaf, here):
    """Uniform along x, 3 kPa at one edge and 2 kPa at the other: 6 kN, 40 mm from the middle towards the first."""
    summary = json.loads(rigdesign("design", "leaf.toml", "--no-figures", "--json").out)
    assert summary["resultant_N"] == pytest.approx(6000.0)
    assert (summary["centroid_x_m"], summary["centroid_y_m"]) == pytest.approx((1.0, -0.04))
    rows = list(csv.DictReader((here / "leaf_rig" / "pads.csv").read_text().splitlines()))
    force = [float(row["force_N"]) for row in rows]
    assert sum(force) == pytest.approx(6000.0)
    across = sum(f * float(row["y_m"]) for f, row in zip(force, rows, strict=True)) / 6000.0
    assert across == pytest.approx(-0.04 + summary["jack_offset_y_m"])


def test_holes_as_built_are_taken_in_both_directions(rigdesign, leaf, here):
    rigdesign("design", "leaf.toml", "--no-figures")
    rows = list(csv.DictReader((here / "leaf_rig" / "holes.csv").read_text().splitlines()))
    # across the lever's own line
    moved = next(row for row in rows if row["hole"] == "B")
    (here / "built.csv").write_text(
        f"lever,hole,u_m,v_m\n{moved['lever']},B,{moved['u_m']},{float(moved['v_m']) + 0.02}\n"
    )
    ended = rigdesign("assess", "leaf_rig", "--holes", "built.csv")
    assert ended.code in (0, 1)
    text = " ".join(ended.out.split())
    assert f"lever {moved['lever']} hole B" in text
    assert "20.0 mm" in text


def test_a_study_compares_torsion_too(rigdesign, leaf, here):
    (here / "points.toml").write_text(changed(PANEL, places='places = "hard points"\ncount = 9'))
    ended = rigdesign("study", "points.toml", "--pads", "8,9", "--out", "leaf_study")
    assert ended.code == 0
    head = (here / "leaf_study" / "study.csv").read_text().splitlines()[0]
    assert "torsion_error_peak" in head.split(",")
    assert "torsion error" in ended.out


def test_us_units_are_said_in_plan(rigdesign, leaf, here):
    out = " ".join(rigdesign("design", "leaf.toml", "--no-figures", "--us").out.split())
    assert "acts at x = 39.37 in, y = −1.57 in" in out
    assert "in·lbf" in out


def test_pads_in_one_line_pass_but_for_what_is_cut_across(rigdesign, leaf, here):
    """Shear, moment and torsion along the span accept pads that no panel should have."""
    one_line = changed(PANEL, table='table = "line.csv"', torsion='torsion = "1 kN*m"')
    (here / "row.toml").write_text(one_line)
    ended = rigdesign("design", "row.toml", "--no-figures")
    assert (ended.code, ended.err) == (1, "")
    text = " ".join(ended.out.split())
    assert "shear across over whole width takes" in text
    assert "whole span takes" not in text
    (here / "alone.toml").write_text(changed(one_line, across=""))
    assert rigdesign("design", "alone.toml", "--no-figures").code == 0
