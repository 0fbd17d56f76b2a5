"""The tables of the hardware and its part of summary.json: columns that scripts rely on, and values of the check."""

from __future__ import annotations

import csv
import io
import json
import math
from dataclasses import replace

import pytest
from hand_results import alike, line_result, plan_result, steel_weight

from rigdesign.hardware.model import Shortfall
from rigdesign.record.hardware_json import hardware_from_json
from rigdesign.record.rig_json import rig_to_json
from rigdesign.report.lists import drill_rows, link_rows
from rigdesign.report.tables import summary, table_files
from rigdesign.report.tables_hardware import cut_list_csv, strength_csv

HEADS = {
    "parts.csv": ["mark", "kind", "quantity", "section", "material", "length_m", "mass_kg", "total_kg", "members"],
    "strength.csv": [
        "piece", "check", "clause", "load_N", "value", "limit", "unit", "utilisation", "mark", "working",
    ],
    "links.csv": [
        "link", "from", "to", "length_m", "load_N", "swing_deg", "from_hole", "to_hole", "mark", "kind", "size",
        "material", "peak_load_N", "adjust_m", "upper_fitting", "lower_fitting", "upper_pin", "lower_pin", "mass_kg",
    ],
    "pins.csv": ["pin", "diameter_mm", "length_mm", "grip_mm", "material", "quantity", "mass_kg", "where"],
    "tare.csv": [
        "pad", "share", "tare_N", "force_20pct_N", "force_40pct_N", "force_60pct_N", "force_80pct_N",
        "force_100pct_N", "force_150pct_N",
    ],
    "cut_list.csv": [
        "section", "material", "bar", "mark", "length_m", "count", "offcut_m", "bar_m", "kerf_m", "note",
    ],
    "drill_list.csv": ["mark", "hole", "from_datum_mm", "across_mm", "diameter_mm", "pin_mm", "note"],
    "masses.csv": ["member", "mark", "mass_kg", "x_m", "y_m", "height_m", "u_m", "v_m"],
}  # fmt: skip


def read(result, name):
    return list(csv.DictReader(io.StringIO(table_files(result)[name].decode())))


def test_columns_are_those_that_are_published():
    files = table_files(line_result())
    for name, head in HEADS.items():
        assert files[name].decode().splitlines()[0].split(",") == head, name


def test_a_rig_without_hardware_has_none_of_these_tables():
    files = table_files(line_result().check)
    assert not set(HEADS) & set(files)
    assert "mark" not in files["levers.csv"].decode().splitlines()[0]
    assert "mass_kg" not in json.loads(files["summary.json"])


def test_levers_say_their_mark():
    result = alike(line_result(), "lever 3", "lever 4")
    assert [row["mark"] for row in read(result, "levers.csv")] == ["L1", "L2", "L3", "L3"]


def test_links_name_what_they_join_with_holes_apart():
    result = line_result()
    rows = read(result, "links.csv")
    assert (rows[0]["from"], rows[0]["to"], rows[0]["from_hole"], rows[0]["to_hole"]) == (
        "jack 1", "lever 1", "", "pivot",
    )  # fmt: skip
    assert (rows[4]["from"], rows[4]["to"], rows[4]["from_hole"], rows[4]["to_hole"]) == ("lever 2", "pad 3", "B", "")
    for row, known in zip(rows, link_rows(result), strict=True):
        assert float(row["load_N"]) == pytest.approx(known.load, rel=1e-11)
        assert float(row["swing_deg"]) == pytest.approx(math.degrees(known.swing), rel=1e-11)


def test_tare_at_every_step_beside_the_share():
    result = line_result()
    rows = read(result, "tare.csv")
    for k, row in enumerate(rows):
        assert int(row["pad"]) == k + 1
        assert float(row["share"]) == pytest.approx(result.check.statics.share[k], rel=1e-11)
        assert float(row["tare_N"]) == pytest.approx(result.tare.pad_tare[k], rel=1e-11)
        assert float(row["force_60pct_N"]) == pytest.approx(result.tare.step(0.6).pad_force[k], rel=1e-11)
        assert float(row["force_150pct_N"]) == pytest.approx(result.tare.step(1.5).pad_force[k], rel=1e-11)


def test_strength_rows_say_unit_clause_and_working():
    result = line_result()
    rows = read(result, "strength.csv")
    for row, known in zip(rows, result.strength, strict=True):
        assert row["piece"] == known.piece
        assert float(row["utilisation"]) == pytest.approx(known.utilisation, rel=1e-11)
        assert row["unit"] == known.unit
        assert row["clause"]
        assert len(row["working"].split("; ")) == len(known.working)
    assert {row["mark"] for row in rows if row["piece"] == "lever 2"} == {"L2"}


def test_a_check_that_nothing_passes_says_so_in_words():
    result = line_result()
    row = replace(result.strength[0], utilisation=math.inf, value=math.inf)
    text = strength_csv(replace(result, strength=(row,))).decode().splitlines()[1]
    assert text.count("infinite") == 2


def test_drill_list_in_millimetres():
    result = plan_result()
    for row, known in zip(read(result, "drill_list.csv"), drill_rows(result), strict=True):
        assert float(row["from_datum_mm"]) == pytest.approx(1000 * known.along, abs=1e-6)
        assert float(row["across_mm"]) == pytest.approx(1000 * known.across, abs=1e-6)
        assert float(row["diameter_mm"]) == pytest.approx(1000 * known.diameter, abs=1e-9)


def test_cut_list_numbers_bars_and_leaves_nothing_out():
    result = line_result()
    rows = read(result, "cut_list.csv")
    assert sum(int(row["count"]) for row in rows) == 2 * 4
    assert {row["bar"] for row in rows} == {str(k + 1) for k in range(len({row["bar"] for row in rows}))}
    for row in rows:
        # what is cut from one bar, its kerfs and its offcut make the bar
        same = [other for other in rows if (other["section"], other["bar"]) == (row["section"], row["bar"])]
        cuts = sum(int(other["count"]) for other in same)
        used = sum(int(other["count"]) * float(other["length_m"]) for other in same)
        assert used + cuts * float(row["kerf_m"]) + float(row["offcut_m"]) == pytest.approx(6.0, abs=1e-3)


def test_what_is_longer_than_a_bar_is_listed_without_one():
    result = line_result()
    bodies = {
        name: replace(body, section=replace(body.section, bar=0.9)) for name, body in result.hardware.bodies.items()
    }
    short = replace(result, hardware=replace(result.hardware, bodies=bodies))
    rows = list(csv.DictReader(io.StringIO(cut_list_csv(short).decode())))
    long = [row for row in rows if row["note"] == "longer than a bar"]
    assert {row["mark"] for row in long} == {"L1", "L2"}
    assert {row["bar"] for row in long} == {""}
    assert sum(int(row["count"]) for row in rows) == 8


def test_the_summary_of_the_hardware():
    result = line_result()
    data = json.loads(table_files(result)["summary.json"])
    hardware = result.hardware
    assert data["mass_kg"] == pytest.approx(steel_weight(result) / 9.80665)
    heaviest = max(hardware.bodies, key=lambda name: hardware.masses[name].mass)
    assert data["heaviest_lever"] == int(heaviest.split()[1]) == 1
    assert data["heaviest_lever_kg"] == pytest.approx(hardware.masses[heaviest].mass)
    assert data["part_marks"] == 4
    assert data["counterweights_kg"] == 3.1
    assert data["utilisation_max"] == pytest.approx(result.utilisation)
    most = max(result.strength, key=lambda row: row.utilisation)
    assert (data["utilisation_max_piece"], data["utilisation_max_check"]) == (most.piece, most.check)
    assert data["height_m"] == result.space.total
    assert data["headroom_m"] == 2.5
    nearest = min(result.space.closest, key=lambda pair: pair.distance)
    assert data["clearance_least_m"] == nearest.distance
    assert data["clearance_between"] == [nearest.first, nearest.second]
    assert abs(data["tare_N"]) == pytest.approx(steel_weight(result))
    assert data["own_weight_band_use"] == result.tare.step(1.0).band_use
    assert data["moment_error_with_weight"] == result.tare.step(1.0).errors["moment"]
    assert [step["level"] for step in data["steps"]] == [0.2, 0.4, 0.6, 0.8, 1.0, 1.5]
    assert len(data["findings"]) == len(result.findings) > len(result.check.findings)
    assert list(data)[-1] == "findings"


def test_the_summary_s_verdict_is_that_of_rig_and_hardware():
    result = line_result()
    regions = tuple(replace(row, accepted=None if row.use is None else True) for row in result.check.regions)
    good = replace(result, check=replace(result.check, regions=regions, findings=()), findings=())
    assert summary(good)["verdict"] == "accepted"
    failing = replace(good, findings=tuple(f for f in result.findings if f.stage == "strength"))
    assert good.check.accepted
    assert summary(failing)["verdict"] == "not accepted"
    assert json.loads(rig_to_json(failing))["check"]["verdict"] == "not accepted"


def test_shortfalls_are_named_and_no_headroom_is_null():
    result = plan_result()
    short = replace(result.hardware, shortfalls=(Shortfall("lever 1", "bending at the pivot", 1.4, "deeper"),))
    data = summary(replace(result, hardware=short))
    assert data["shortfalls"] == ["lever 1: bending at the pivot"]
    assert data["headroom_m"] is None
    assert "torsion_error_with_weight" in data


def test_rig_json_of_a_checked_rig_holds_its_hardware():
    result = line_result()
    data = json.loads(rig_to_json(result))
    assert list(data)[-2:] == ["hardware", "check"]
    again = hardware_from_json(json.dumps(data), result.check.rig)
    assert again.masses == result.hardware.masses
    assert again.links == result.hardware.links
