"""Tables, summary, rig.json, sentences and terminal of plan rigs."""

from __future__ import annotations

import csv
import io
import json
import re
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from hand_plan_rigs import accept, line, make_plan_rig, panel, plan_brief, pressure, surface
from hand_rigs import make_rig, with_hole

from rigdesign.brief import brief_from_source
from rigdesign.brief.model import Source
from rigdesign.chain import Study, StudyRow
from rigdesign.checks import check, check_with_holes
from rigdesign.command.terminal import Terminal
from rigdesign.errors import InputError
from rigdesign.record.rig_json import rig_from_json, rig_to_json
from rigdesign.report.sentences import answer, verdict
from rigdesign.report.study_files import study_csv, study_object
from rigdesign.report.tables import holes_csv, summary, table_files
from rigdesign.target import build_target

X = np.array([0.52, 0.61, 1.43, 1.66, 2.71, 2.93])
Y = np.array([-0.21, 0.33, -0.36, 0.17, -0.52, -0.29])
FORCE = np.array([700.0, 640.0, 450.0, 380.0, 260.0, 150.0])
GROUP = ((1, 2), (3, 4, (5, 6)))
PAGE = (Path(__file__).parents[3] / "docs" / "outputs.md").read_text()
TOML = """\
title = "Paddle of a tidal fence"
[specimen]
support = "cantilever"
root = "0.2 m"
tip = "3.4 m"
outline = "planform.csv"
axis = [["0.2 m", "0.05 m"], ["1.9 m", "-0.1 m"], ["3.4 m", "-0.4 m"]]
[[load]]
pressure = "map.csv"
[pads]
count = 6
places = "fixed"
table = "places.csv"
length = "120 mm"
width = "80 mm"
turn = "along axis"
[levers]
plates = true
[acceptance]
moment = "40 %"
torsion = "90 %"
across = "50 %"
"""
TEXTS = {
    "paddle.toml": TOML,
    "planform.csv": "x [m],y [m]\n0.2,-0.5\n3.4,-0.75\n3.4,-0.15\n0.2,0.6\n",
    "map.csv": "x [m],y [m],pressure [Pa]\n0.2,-0.5,900\n0.2,0.6,1100\n3.4,-0.75,300\n3.4,-0.15,350\n",
    "places.csv": "x [m],y [m]\n" + "".join(f"{x},{y}\n" for x, y in zip(X, Y, strict=True)),
}


@pytest.fixture(scope="module")
def target():
    return build_target(brief_from_source(Source("paddle.toml", TEXTS)))


@pytest.fixture(scope="module")
def found(target):
    force = FORCE * target.net.total / FORCE.sum()
    rig = make_plan_rig(X, Y, force, group=GROUP, target=target)
    # what was planned is not what was drilled
    return check(replace(rig, plan=replace(rig.plan, y=rig.plan.y + 0.004, jack_y=rig.plan.jack_y - 0.002)))


@pytest.fixture(scope="module")
def tables(found):
    files = table_files(found)
    return {name: list(csv.DictReader(io.StringIO(files[name].decode()))) for name in files if name.endswith(".csv")}


def column(rows, name):
    return np.array([float(row[name]) for row in rows])


def test_pads_have_their_places_across_and_their_turns(found, tables):
    rows = tables["pads.csv"]
    assert list(rows[0])[-2:] == ["share_of_curve_N", "turn_deg"]
    assert column(rows, "y_m") == pytest.approx(Y)
    slopes = np.where(X < 1.9, -0.15 / 1.7, -0.3 / 1.5)
    assert column(rows, "turn_deg") == pytest.approx(np.degrees(np.arctan(slopes)))
    assert column(rows, "share_of_curve_N").sum() == pytest.approx(found.rig.plan.target.net.total)


def test_levers_and_holes_hold_plates(found, tables):
    assert [row["kind"] for row in tables["levers.csv"]] == ["lever", "lever", "plate", "lever"]
    plate = tables["levers.csv"][2]
    assert plate["ratio"] == ""
    assert [row["hole"] for row in tables["holes.csv"] if row["lever"] == "3"] == ["pivot", "A", "B", "C"]
    (jack,) = tables["jacks.csv"]
    assert float(jack["y_m"]) == pytest.approx(Y @ FORCE / FORCE.sum())


def test_stations_hold_torsion_and_its_band(found, tables):
    rows = tables["stations.csv"]
    head = ["x_m", "side", "shear_target_N", "shear_rig_N", "moment_target_Nm", "moment_rig_Nm",
            "torsion_target_Nm", "torsion_rig_Nm"]  # fmt: skip
    assert list(rows[0])[:8] == head
    error = np.abs(column(rows, "torsion_rig_Nm") - column(rows, "torsion_target_Nm"))
    assert error.max() / found.errors["torsion"].reference == pytest.approx(found.torsion_error_peak, rel=1e-9)
    assert column(rows, "torsion_band_below_Nm") == pytest.approx(found.curves.below["torsion"])
    assert {row["shear_band_above_N"] for row in rows} == {""}
    assert {row["side"] for row in rows} == {"inboard", "outboard"}


def test_across_holds_what_is_cut_the_other_way(found, tables):
    rows = tables["across.csv"]
    assert column(rows, "y_m") == pytest.approx(found.across.x)
    assert [row["side"] for row in rows[:2]] == ["lesser y", "greater y"]
    # below the outline all of it counts: the resultant, and its first moment about that edge
    sums = found.rig.plan.target.total_plan.sums
    assert float(rows[0]["shear_across_target_N"]) == pytest.approx(sums.force)
    assert float(rows[0]["moment_across_target_Nm"]) == pytest.approx(sums.first_y + 0.75 * sums.force)
    assert float(rows[0]["moment_across_rig_Nm"]) == pytest.approx(found.statics.pad_force @ (Y + 0.75))
    error = np.abs(column(rows, "shear_across_rig_N") - column(rows, "shear_across_target_N"))
    assert error.max() / sums.force == pytest.approx(found.errors["shear across"].peak, rel=1e-9)
    assert column(rows, "moment_across_band_above_Nm")[0] > 0
    units = {row["quantity"]: row["unit"] for row in tables["regions.csv"]}
    assert units == {"shear": "N", "moment": "N*m", "torsion": "N*m", "shear across": "N", "moment across": "N*m"}


def test_summary_has_each_key_beside_its_sibling(found):
    result = summary(found)
    keys = list(result)
    sums = found.rig.plan.target.total_plan.sums
    assert keys[keys.index("centroid_x_m") + 1] == "centroid_y_m"
    assert result["centroid_y_m"] == pytest.approx(sums.first_y / sums.force)
    # about the axis at the root, y = 0.05 m
    assert result["root_torsion_Nm"] == pytest.approx(sums.first_y - 0.05 * sums.force)
    assert result["plates"] == 1
    assert result["levers"] == 4
    assert result["jack_y_m"] == pytest.approx([Y @ FORCE / FORCE.sum()])
    assert result["jack_offset_y_m"] == found.jack_offset_y
    assert result["pads_centroid_y_m"] == pytest.approx(Y @ FORCE / FORCE.sum())
    assert result["torsion_error_peak"] == found.errors["torsion"].peak
    assert result["torsion_error_of"] == "peak target torsion"
    assert result["across_error_peak"] == max(found.errors[q].peak for q in ("shear across", "moment across"))
    # an `across` band brings pads that are judged one by one, within 25 % unless the brief says otherwise
    assert (result["share_error"], result["share_error_pad"]) == (found.evenness, found.uneven_pad)
    assert result["moment_error_by_hand"] is None
    assert keys[-1] == "findings"
    assert not {"centroid_y_m", "torsion_error_peak", "plates"} & set(summary(check(make_rig([1.5], [5400.0]))))


def test_root_torsion_is_about_the_axis_own_direction_where_cuts_are_square_to_it():
    brief = plan_brief(surface(cut="square to axis"))
    found = check(make_plan_rig(X, Y, FORCE, brief, GROUP))
    sums = found.rig.plan.target.total_plan.sums
    along = np.array([3.2, -0.45]) / np.hypot(3.2, 0.45)
    left, ahead = sums.first_y - 0.05 * sums.force, sums.first_x - 0.2 * sums.force
    assert summary(found)["root_torsion_Nm"] == pytest.approx(left * along[0] - ahead * along[1])


def test_the_page_of_outputs_names_every_column_and_key(found):
    names = set(summary(found)) | {"wanted_y_m", "jack_y_m"}
    for name, content in table_files(found).items():
        if name.endswith(".csv"):
            assert name in PAGE
            names |= set(content.decode().splitlines()[0].split(","))
    for name in sorted(names):
        assert re.search(rf"\b{name}\b", PAGE), name


def test_rig_json_there_and_back(found):
    text = rig_to_json(found)
    rig, old = rig_from_json(text), found.rig
    assert (rig.plan.y == old.plan.y).all()
    assert (rig.pad_y == old.pad_y).all()
    assert (rig.plan.jack_x, rig.plan.jack_y) == (old.plan.jack_x, old.plan.jack_y)
    assert rig.trees == old.trees
    assert rig_to_json(check(rig)) == text
    assert json.loads(text)["check"]["torsion_error_peak"] == found.torsion_error_peak


@pytest.mark.parametrize("key", ["wanted_y_m", "jack_y_m"])
def test_a_surface_s_rig_json_without_a_place_across_is_no_rig(found, key):
    text = re.sub(rf'\n *"{key}": [^\n]*', "", rig_to_json(found), count=1)
    with pytest.raises(InputError, match=rf"{key}: this is not a whole rig"):
        rig_from_json(text)


def test_holes_as_built_in_plan(found, tmp_path):
    file = tmp_path / "holes.csv"
    file.write_bytes(holes_csv(found))
    again = check_with_holes(found.rig, file)
    assert (again.statics.pad_force == found.statics.pad_force).all()
    plate = found.rig.trees[0].pieces[2]
    moved = replace(plate.ends[2], v=plate.ends[2].v + 0.01)
    file.write_text(f"lever,hole,u_m,v_m\n3,C,{moved.u},{moved.v}\n")
    built = check_with_holes(found.rig, file)
    expected = check(with_hole(found.rig, 3, "C", v=moved.v)).statics.pad_force
    assert built.statics.pad_force == pytest.approx(expected)
    assert any(f.object == "lever 3 hole C" and f.value == "10.0 mm" for f in built.findings)
    assert any("leans" in f.text for f in built.findings)


def test_the_answer_says_centre_torsion_shares_and_pieces(found):
    lines = answer(found)
    text = "\n".join(lines)
    sums = found.rig.plan.target.total_plan.sums
    assert f"acts at x = {sums.first_x / sums.force:.3f} m, y = " in text
    assert "6 pads bring it by 3 levers and 1 plate in 3 tiers" in text
    torsion = next(one for one in lines if one.startswith("Largest errors of the torsion"))
    assert "per cent of peak target torsion" in torsion
    use = found.curves.use("torsion").max()
    assert f"band use {use:.3f}" in torsion
    across = next(one for one in lines if one.startswith("Largest errors of the shear across"))
    assert "at y = " in across
    shares = next(one for one in lines if one.startswith("Pad by pad"))
    assert f"pad {found.uneven_pad} is farthest" in shares
    assert "beyond the 25.0 % allowed (the default)" in shares
    assert "from its tributary share" in text
    assert "y = " in next(one for one in lines if one.startswith("Jack 1"))
    assert "towards" in next(one for one in lines if one.startswith("Jack 1"))
    assert "By hand" not in text
    # judged nowhere, said nowhere
    plain = answer(check(make_plan_rig(X, Y, FORCE, plan_brief(acceptance=accept(9, 9, None)), GROUP)))
    assert not any("across" in one or "Pad by pad" in one for one in plain)
    assert any(one.startswith("Largest errors of the torsion") and "not judged" in one for one in plain)


def test_the_verdict_names_bands_and_what_else_fails():
    x, y = np.array([0.5, 0.5, 1.5, 1.5]), np.array([-0.2, 0.4, -0.2, 0.4])
    brief = plan_brief(panel(), loads=(pressure(1000.0),), acceptance=accept(9, 9, 0.001, share=0.05))
    words = verdict(check(make_plan_rig(x, y, [480.0, 720.0, 700.0, 500.0], brief)))
    assert words.startswith("Not accepted: 4 pads on 3 levers; torsion over whole span takes")
    assert "the pad's force is too far from its tributary share" in words
    assert words.count("torsion over") == 1


def test_a_torsion_next_to_nothing_is_said_with_what_its_error_is_of():
    x, y = np.array([0.5, 0.5, 1.5, 1.5]), np.array([-0.15, 0.45, -0.15, 0.45])
    brief = plan_brief(panel(axis=line((0.0, 0.1), (2.0, 0.1))), loads=(pressure(1000.0),), acceptance=accept(9, 9, 9))
    lines = answer(check(make_plan_rig(x, y, np.full(4, 600.0), brief)))
    torsion = next(one for one in lines if one.startswith("Largest errors of the torsion"))
    # 2400 N times 1.2 m
    assert "per cent of the resultant times the outline's mean width (2.88 kN·m)" in torsion


def test_the_terminal_shows_places_plates_and_torsion(found, capsys):
    Terminal().check(found)
    out = capsys.readouterr().out
    assert "Levers and plates" in out
    head = next(row for row in out.splitlines() if row.startswith("pad "))
    assert "[m]     [m]" in head
    assert re.search(r"^ +3 +2 +lever 1 .* plate *$", out, re.M)
    assert re.search(r"^whole width +moment across", out, re.M)


def test_a_study_of_a_surface_has_the_torsion_s_error(found, capsys):
    brief = found.rig.plan.target.brief
    study = Study(brief, (StudyRow(6, found),))
    head, row = study_csv(study).decode().splitlines()
    assert head.split(",")[4:6] == ["shear_error_peak", "torsion_error_peak"]
    assert float(row.split(",")[5]) == pytest.approx(found.torsion_error_peak)
    assert study_object(study)["rows"][0]["torsion_error_peak"] == found.torsion_error_peak
    Terminal().study(study)
    out = capsys.readouterr().out
    assert "torsion error" in out
    assert "peak target moment, shear and torsion" in out
