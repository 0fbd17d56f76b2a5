"""Tables and summary of the rig folder."""

from __future__ import annotations

import csv
import io
import json
from dataclasses import replace

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_pads, make_weight, shape_load, two_supports
from hand_rigs import lumped, make_rig

from rigdesign.brief.model import Region
from rigdesign.checks import check
from rigdesign.checks.measures import length, ratio, steel_estimate
from rigdesign.report.csv_cells import cell, csv_bytes
from rigdesign.report.tables import summary, table_files

X = np.array([0.5, 0.9, 1.6, 2.0, 2.9])
FORCE = np.array([1300.0, 1100.0, 1700.0, 800.0, 500.0])
PADS = make_pads(length=0.12, width=0.2)
REGION = Region("=1.0 m to 2.0 m", 1.0, 2.0, make_acceptance(0.3, None).rules)


@pytest.fixture(scope="module")
def found():
    acceptance = make_acceptance(0.5, None, (REGION,))
    return check(make_rig(X, FORCE, make_brief(acceptance=acceptance, pads=PADS, peak=1.5)))


@pytest.fixture(scope="module")
def tables(found):
    files = table_files(found)
    return {name: list(csv.DictReader(io.StringIO(files[name].decode()))) for name in files if name.endswith(".csv")}


def test_pads(found, tables):
    rows = tables["pads.csv"]
    assert list(rows[0])[:8] == ["pad", "x_m", "y_m", "force_N", "wanted_N", "share", "pressure_Pa", "lever"]
    assert [row["pad"] for row in rows] == ["1", "2", "3", "4", "5"]
    assert [float(row["x_m"]) for row in rows] == pytest.approx(X)
    assert [float(row["force_N"]) for row in rows] == pytest.approx(FORCE)
    assert [float(row["share"]) for row in rows] == pytest.approx(FORCE / 5400)
    # at the brief's load, not at the peak of the test
    assert [float(row["pressure_Pa"]) for row in rows] == pytest.approx(FORCE / 0.024)
    hangs = {hole.joins: piece.number for piece in found.rig.trees[0].pieces for hole in piece.ends}
    assert [int(row["lever"]) for row in rows] == [hangs[f"pad {i}"] for i in range(1, 6)]
    middles = (X[1:] + X[:-1]) / 2
    specimen = found.rig.plan.target.brief.specimen
    _, nearest = lumped(found.rig.plan.target, [specimen.left, *middles, specimen.right])
    # of the pads as drilled, not what the plan says of them; the midpoint sum is good to 1e-5 at a steep tip
    assert [float(row["share_of_curve_N"]) for row in rows] == pytest.approx(nearest, rel=1e-4)


def test_a_pad_on_the_jack_itself_and_without_width_leaves_cells_empty():
    files = table_files(check(make_rig([1.5], [5400.0], make_brief(acceptance=make_acceptance(0.9, 0.9)))))
    row = next(csv.DictReader(io.StringIO(files["pads.csv"].decode())))
    assert (row["lever"], row["pressure_Pa"]) == ("", "")
    assert files["levers.csv"].decode().count("\n") == 1


def test_levers_and_holes(found, tables):
    pieces = found.rig.trees[0].pieces
    rows = tables["levers.csv"]
    assert list(rows[0]) == ["lever", "tier", "parent", "kind", "x_m", "y_m", "load_N", "length_m", "ratio"]
    assert [row["parent"] for row in rows] == [piece.parent for piece in pieces]
    assert [float(row["ratio"]) for row in rows] == pytest.approx([ratio(piece) for piece in pieces])
    assert [float(row["length_m"]) for row in rows] == pytest.approx([length(piece) for piece in pieces])
    assert float(rows[0]["load_N"]) == pytest.approx(5400.0)
    holes = tables["holes.csv"]
    assert list(holes[0]) == ["lever", "hole", "joins", "u_m", "v_m", "x_m", "y_m"]
    assert [(row["lever"], row["hole"]) for row in holes[:4]] == [
        ("1", "pivot"),
        ("1", "A"),
        ("1", "B"),
        ("2", "pivot"),
    ]
    for row in holes:
        piece = pieces[int(row["lever"]) - 1]
        assert float(row["x_m"]) == pytest.approx(piece.pivot.x + float(row["u_m"]))
    jack = tables["jacks.csv"][0]
    assert (float(jack["x_m"]), float(jack["force_N"])) == pytest.approx((float(X @ FORCE) / 5400, 5400.0))


def test_stations_hold_every_peak(found, tables):
    rows = tables["stations.csv"]
    assert list(rows[0])[:6] == [
        "x_m", "side", "shear_target_N", "shear_rig_N", "moment_target_Nm", "moment_rig_Nm"
    ]  # fmt: skip
    column = {name: np.array([float(row[name] or "inf") for row in rows]) for name in rows[0] if name != "side"}
    target = found.rig.plan.target
    moment = np.abs(column["moment_rig_Nm"] - column["moment_target_Nm"])
    assert moment.max() / target.moment_peak == pytest.approx(found.moment_error_peak, rel=1e-9)
    shear = np.abs(column["shear_rig_N"] - column["shear_target_N"])
    assert shear.max() / target.shear_peak == pytest.approx(found.shear_error_peak, rel=1e-9)
    assert (moment / column["moment_band_below_Nm"]).max() == pytest.approx(found.band_use, rel=1e-9)
    # not judged: no limit, empty cells
    assert np.isinf(column["shear_band_below_N"]).all()
    sides = {x: [row["side"] for row in rows if float(row["x_m"]) == x] for x in X}
    assert all(both == ["inboard", "outboard"] for both in sides.values())


def test_regions(found, tables):
    rows = tables["regions.csv"]
    wanted = ["from_m", "to_m", "quantity", "under", "over", "band_under", "band_over", "use", "verdict"]
    assert set(wanted) <= set(rows[0])
    assert [(row["region"], row["quantity"], row["unit"], row["verdict"]) for row in rows] == [
        ("whole span", "shear", "N", "not judged"),
        ("whole span", "moment", "N*m", "accepted"),
        ("'=1.0 m to 2.0 m", "shear", "N", "not judged"),
        ("'=1.0 m to 2.0 m", "moment", "N*m", "accepted"),
    ]
    assert (rows[0]["use"], rows[0]["band_under"]) == ("", "")
    assert float(rows[3]["band_under"]) == pytest.approx(0.3 * found.rig.plan.target.moment_peak)
    assert (float(rows[3]["from_m"]), float(rows[3]["to_m"])) == (1.0, 2.0)


def test_summary_has_the_keys_and_their_values(found):
    target = found.rig.plan.target
    result = summary(found)
    assert result["resultant_N"] == pytest.approx(5400.0)
    assert result["centroid_x_m"] == pytest.approx(0.2 + 3.2 * 4 / (3 * np.pi))
    assert result["root_moment_Nm"] == pytest.approx(5400 * 3.2 * 4 / (3 * np.pi))
    assert result["moment_about_m"] == 0.2
    assert result["pads_resultant_N"] == pytest.approx(5400.0)
    assert result["pads"] == 5
    assert result["levers"] == 4
    assert result["moment_error_peak"] == found.moment_error_peak
    assert result["moment_error_least"] == 0.0031
    assert (result["band_use"], result["band_use_planned"], result["band_use_least"]) == (found.band_use, 0.61, 0.52)
    share = found.share_of_curve
    assert result["evenness"] == pytest.approx(np.max(np.abs(FORCE - share) / share), rel=1e-9)
    assert result["evenness_planned"] == 0.12
    assert result["shear_error_peak"] == found.shear_error_peak
    assert result["steel_estimate"] == found.steel_estimate
    assert result["verdict"] == "accepted"
    assert result["test_peak"] == 1.5
    assert result["jack_force_at_test_peak_N"] == pytest.approx([8100.0])
    assert result["moment_peak_Nm"] == target.moment_peak
    assert len(result["findings"]) == len(found.findings)
    assert set(result["findings"][0]) == {
        "stage", "number", "severity", "object", "text", "value", "limit", "remedy"
    }  # fmt: skip


def test_summary_of_two_supports_with_weight():
    brief = make_brief(
        specimen=two_supports(0.2, 0.7, 2.6, 3.4, weight=make_weight([0.2, 3.4], [10.0, 10.0])),
        loads=(shape_load("uniform", 6000.0),),
        acceptance=make_acceptance(0.9, 0.9),
    )
    weight = 10.0 * 3.2 * 9.80665
    result = summary(check(make_rig(X, FORCE * (6000 + weight) / 5400, brief)))
    assert result["moment_about_m"] == 0.7
    assert result["root_moment_Nm"] == pytest.approx(6000.0 * (1.8 - 0.7))
    assert result["resultant_N"] == pytest.approx(6000.0)
    assert result["pads_resultant_N"] == pytest.approx(6000.0 + weight)


def test_what_is_infinite_is_null_in_json(found):
    plan = replace(found.rig.plan, proof=replace(found.rig.plan.proof, evenness=float("inf"), band_use_least=0.0))
    result = summary(replace(found, rig=replace(found.rig, plan=plan)))
    assert (result["evenness_planned"], result["band_use_gap"]) == (None, None)
    json.dumps(result, allow_nan=False)


def test_steel_estimate_by_hand():
    rig = make_rig(
        [1.0, 1.5, 2.5], [300.0, 200.0, 100.0], make_brief(acceptance=make_acceptance(0.9, 0.9)), (1, (2, 3))
    )
    found = check(rig)
    # lever 2: 200 and 100 N, 1 m apart; lever 1: 300 N at 1 m against 300 N at 1.8333 m
    below = (300 * (1 / 3) * (2 / 3) / 1.0) ** (2 / 3) * 1.0
    arm = (1.5 + 1 / 3 - 1.0) / 2
    above = (600 * arm * arm / (2 * arm)) ** (2 / 3) * 2 * arm
    assert steel_estimate(rig, found.statics) == pytest.approx(above + below)


@pytest.mark.parametrize("start", ["=", "+", "-", "−", "@", "\t", "\r"])
def test_no_text_acts_as_a_formula(start):
    assert cell(f"{start}cmd|x") == f"'{start}cmd|x"
    assert not csv_bytes(["name"], [[f"{start}1+1"]]).decode().splitlines()[1].startswith((start, f'"{start}'))


def test_the_same_check_gives_the_same_bytes(found):
    again = check(make_rig(X, FORCE, found.rig.plan.target.brief))
    assert table_files(again) == table_files(found)
