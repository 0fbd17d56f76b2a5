"""The files of a study."""

from __future__ import annotations

import csv
import json

from factories import make_brief, make_pads

from rigdesign.chain import Study, StudyRow, arrange
from rigdesign.checks.model import Check
from rigdesign.findings import Refusal
from rigdesign.report.study_files import COLUMNS, study_csv, study_files, study_object

REFUSAL = Refusal("pads", "=SUM of 9 pads, too many", 'a "footprint" of 400 mm', "8 pads", "use fewer")


def a_study() -> Study:
    rows = [StudyRow(count, arrange(make_brief(pads=make_pads(count=count)))) for count in (2, 4, 6)]
    return Study(make_brief(), (*rows, StudyRow(9, REFUSAL)))


def test_a_row_holds_the_figures_of_its_check():
    study = a_study()
    answer = study.rows[1].answer
    assert isinstance(answer, Check)
    row = study_object(study)["rows"][1]
    assert row["moment_error_peak"] == answer.moment_error_peak
    assert row["band_use_least"] == answer.rig.plan.proof.band_use_least
    assert row["levers"] == 3
    assert row["steel_estimate"] == answer.steel_estimate


def test_a_row_without_a_rig_says_what_binds_and_knows_no_figures():
    row = study_object(a_study())["rows"][-1]
    assert row["verdict"] == "no rig"
    assert row["what_binds"] == '=SUM of 9 pads, too many; a "footprint" of 400 mm'
    assert row["band_use"] is None


def test_the_table_opens_in_a_spreadsheet_as_it_is():
    rows = list(csv.DictReader(study_csv(a_study()).decode().splitlines()))
    assert tuple(rows[0]) == COLUMNS
    assert rows[-1]["what_binds"].startswith("'=SUM of 9 pads, too many")
    assert rows[-1]["band_use"] == ""
    accepted = [row["pads"] for row in rows if row["verdict"] == "accepted"]
    assert [row["pads"] for row in rows if row["fewest_accepted"] == "yes"] == accepted[:1]


def test_json_and_table_agree():
    study = a_study()
    files = study_files(study, png=True)
    assert set(files) == {"study.csv", "study.json", "study.svg", "study.png"}
    assert json.loads(files["study.json"]) == study_object(study)
