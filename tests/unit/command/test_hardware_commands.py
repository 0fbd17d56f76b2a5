"""Commands on rigs with hardware: what is written, what is said, exit codes, and the same rig assessed again."""

from __future__ import annotations

import csv
import io
import json
import re
from pathlib import Path

import pytest
from journey import SMALL, files_under, runner

from rigdesign.brief import read_brief
from rigdesign.chain import arrange
from rigdesign.report.writing import write

PAGE = (Path(__file__).parents[3] / "docs" / "outputs.md").read_text()
TABLES = ("parts", "strength", "links", "pins", "tare", "cut_list", "drill_list", "masses")


@pytest.fixture(name="rigdesign")
def _rigdesign(capsys, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    return runner(capsys)


@pytest.fixture(name="brief")
def _brief(tmp_path):
    (tmp_path / "fin.toml").write_text(SMALL)
    return tmp_path / "fin.toml"


def test_a_design_is_written_with_what_a_workshop_needs(rigdesign, brief, tmp_path):
    ended = rigdesign("design", brief, "--no-figures")
    assert ended.code == 0
    names = set(files_under(tmp_path / "fin_rig"))
    assert {f"{name}.csv" for name in TABLES} < names
    cutting = sorted(name for name in names if name.startswith("dxf/"))
    rows = csv.DictReader(io.StringIO((tmp_path / "fin_rig" / "parts.csv").read_text()))
    assert cutting == sorted(f"dxf/{row['mark']}.dxf" for row in rows if row["kind"] == "lever")
    assert "drawings.pdf" not in names
    assert ended.out.splitlines()[-1] == f"Written to fin_rig; for the workshop: dxf/ with {len(cutting)} cutting files"
    for heading in ("Hardware", "Parts to make"):
        assert f"\n{heading}\n" in ended.out


def test_json_is_the_summary_and_its_keys_are_documented(rigdesign, brief, tmp_path):
    ended = rigdesign("design", brief, "--json", "--no-figures")
    data = json.loads(ended.out)
    assert data == json.loads((tmp_path / "fin_rig" / "summary.json").read_text())
    documented = set(re.findall(r"\w+", PAGE.split("## summary.json")[1].split("## Tables")[0]))
    assert not set(data) - documented
    assert not {key for step in data["steps"] for key in step} - documented
    assert not {key for zeros in data["zeros"] for key in zeros} - documented


def test_columns_and_keys_of_the_hardware_are_documented(rigdesign, brief, tmp_path):
    rigdesign("design", brief, "--no-figures")
    for name in TABLES:
        (row,) = [line for line in PAGE.splitlines() if line.startswith(f"| {name}.csv |")]
        head = (tmp_path / "fin_rig" / f"{name}.csv").read_text().splitlines()[0].split(",")
        steps = [column for column in head if re.fullmatch(r"force_\d+pct_N", column)]
        assert not set(head) - set(steps) - set(re.findall(r"\w+", row)), name
    hardware = json.loads((tmp_path / "fin_rig" / "rig.json").read_text())["hardware"]
    documented = set(re.findall(r"\w+", PAGE.split("The hardware in rig.json.")[1].split("## summary.json")[0]))
    kinds = [hardware, hardware["bodies"][0], hardware["links"][0], hardware["links"][0]["upper"], hardware["pads"][0]]
    kinds += [hardware["stacks"][0], hardware["stacks"][0]["cell"], next(iter(hardware["masses"].values()))]
    kinds += [next(iter(hardware["materials"].values())), next(iter(hardware["sections"].values()))]
    assert not {key for kind in kinds for key in kind} - documented


def test_a_rig_assessed_again_is_the_same_to_the_last_byte(rigdesign, brief, tmp_path):
    assert rigdesign("design", brief, "--no-figures").code == 0
    assert rigdesign("assess", "fin_rig", "--out", "again", "--no-figures").code == 0
    assert files_under(tmp_path / "again") == files_under(tmp_path / "fin_rig")


def test_steel_of_a_rig_is_checked_against_another_brief(rigdesign, brief, tmp_path):
    """The same steel under twice the load: its own limits, not new steel."""
    rigdesign("design", brief, "--no-figures")
    (tmp_path / "heavy.toml").write_text(SMALL.replace("1.9 kN", "3.8 kN"))
    ended = rigdesign("assess", "fin_rig", "--brief", "heavy.toml", "--json")
    data = json.loads(ended.out)
    assert ended.code == 1
    assert data["verdict"] == "not accepted"
    assert data["utilisation_max"] > 1
    assert data["mass_kg"] == json.loads((tmp_path / "fin_rig" / "summary.json").read_text())["mass_kg"]


def test_a_rig_without_hardware_is_still_read(rigdesign, brief, tmp_path):
    write(arrange(read_brief(brief)), tmp_path / "bare", figures=False)
    ended = rigdesign("assess", "bare", "--json")
    assert ended.code == 0
    assert "mass_kg" not in json.loads(ended.out)


def test_hardware_that_fails_is_not_accepted_and_written_so(rigdesign, brief, tmp_path):
    (tmp_path / "low.toml").write_text(SMALL + '[hardware]\nheadroom = "0.5 m"\n')
    ended = rigdesign("design", "low.toml", "--no-figures")
    assert ended.code == 1
    assert "Not accepted: 5 pads on 4 levers; " in ended.out
    assert json.loads((tmp_path / "low_rig" / "summary.json").read_text())["verdict"] == "not accepted"
    height = next(line for line in ended.out.split("\nHeight:")[1].splitlines())
    assert "to the jack's upper pin" in height
    assert "is missing" in ended.out


@pytest.mark.parametrize(
    ("edit", "message"),
    [
        (
            lambda data: data["hardware"]["bodies"].pop(),
            "hardware.bodies: the hardware lacks what the rig has: lever 4",
        ),
        (
            lambda data: data["hardware"]["links"][1]["upper"].update(pin_m="thick"),
            r"hardware.links\[1\].upper.pin_m: this is not a rig: a value is of the wrong kind",
        ),
    ],
)
def test_hardware_that_was_edited_wrongly_says_where(rigdesign, brief, tmp_path, edit, message):
    rigdesign("design", brief, "--no-figures")
    place = tmp_path / "fin_rig" / "rig.json"
    data = json.loads(place.read_text())
    edit(data)
    place.write_text(json.dumps(data))
    ended = rigdesign("assess", "fin_rig")
    assert ended.code == 2
    assert re.search(r"fin_rig/rig.json, " + message, " ".join(ended.err.split()))
