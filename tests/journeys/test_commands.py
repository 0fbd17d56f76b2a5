"""Each command on a small brief: its words, its files, its exit code."""

from __future__ import annotations

import csv
import json
import subprocess
import sys

import pytest
from journey import SMALL, changed, files_under

CONTRACT = {
    "rig.json", "summary.json", "pads.csv", "levers.csv", "holes.csv", "jacks.csv", "stations.csv", "regions.csv",
    "target.svg", "load_and_pads.svg", "shear_and_moment.svg", "tree.svg",
    "parts.csv", "strength.csv", "links.csv", "pins.csv", "tare.csv", "cut_list.csv", "drill_list.csv", "masses.csv",
    "drawings.pdf", "dxf/L1.dxf", "dxf/L2.dxf", "dxf/L3.dxf", "dxf/L4.dxf",
}  # fmt: skip


@pytest.fixture
def brief(here):
    """The small brief as a file."""
    path = here / "fin.toml"
    path.write_text(SMALL)
    return path


def test_design_answers_in_sentences_and_writes_the_folder(rigdesign, brief, here):
    ended = rigdesign("design", "fin.toml", "--png")
    assert (ended.code, ended.err) == (0, "")
    order = ["Small fin", "Answer", "Accepted: 5 pads on 4 levers", "of peak target moment", "Proven", "By hand",
             "Jack 1 acts up (+z)", "Hardware", "Strength, at", "Height:", "Clearance:", "Own weight:",
             "hangs on", "ratio", "Parts to make", "Findings", "licensed engineer", "Written to"]  # fmt: skip
    text = " ".join(ended.out.split())
    places = [text.index(words) for words in order]
    assert places == sorted(places)
    pictures = {name.replace(".svg", ".png") for name in CONTRACT if name.endswith(".svg")}
    assert set(files_under(here / "fin_rig")) == CONTRACT | pictures


def test_plain_text_where_the_output_is_no_terminal(rigdesign, brief):
    assert "\x1b" not in rigdesign("design", "fin.toml").out


def test_json_is_the_summary(rigdesign, brief, here):
    ended = rigdesign("design", "fin.toml", "--json", "--no-figures")
    assert json.loads(ended.out) == json.loads((here / "fin_rig" / "summary.json").read_text())
    assert not list((here / "fin_rig").glob("*.svg"))


def test_same_brief_same_bytes(rigdesign, brief, here):
    for out in ("first_rig", "second_rig"):
        assert rigdesign("design", "fin.toml", "--out", out, "--png").code == 0
    assert files_under(here / "first_rig") == files_under(here / "second_rig")


def test_same_bytes_in_another_process_with_another_hash_seed(rigdesign, brief, here):
    assert rigdesign("design", "fin.toml", "--out", "first_rig").code == 0
    command = [
        sys.executable,
        "-c",
        "from rigdesign.command import main; main()",
        "design",
        "fin.toml",
        "--out",
        "second_rig",
    ]
    subprocess.run(command, check=True, env={"PYTHONHASHSEED": "12345"}, capture_output=True, cwd=here)
    assert files_under(here / "first_rig") == files_under(here / "second_rig")


def test_replace_takes_the_new_rig(rigdesign, brief, here):
    assert rigdesign("design", "fin.toml", "--no-figures").code == 0
    before = files_under(here / "fin_rig")
    brief.write_text(changed(SMALL, count="count = 6"))
    assert rigdesign("design", "fin.toml", "--no-figures").code == 2
    assert files_under(here / "fin_rig") == before
    assert rigdesign("design", "fin.toml", "--no-figures", "--replace").code == 0
    assert json.loads((here / "fin_rig" / "summary.json").read_text())["pads"] == 6


def test_us_customary_units_on_the_terminal(rigdesign, brief):
    text = rigdesign("design", "fin.toml", "--us").out
    assert "lbf" in text
    assert "in·lbf" in text
    # a finding keeps its value as words: they are those of the rig folder
    answer, _ = text.split("Findings, in SI units")
    assert "kN" not in answer
    parts = answer.split("\nParts to make\n")[1]
    assert " lb " in parts
    assert " kg" not in parts


def test_assess_finds_what_design_found(rigdesign, brief, here):
    designed = json.loads(rigdesign("design", "fin.toml", "--json").out)
    for rig in ("fin_rig", "fin_rig/rig.json"):
        ended = rigdesign("assess", rig, "--json")
        assert ended.code == 0
        assert json.loads(ended.out) == designed


def test_assess_with_holes_as_built(rigdesign, brief, here):
    rigdesign("design", "fin.toml")
    rows = list(csv.DictReader((here / "fin_rig" / "holes.csv").read_text().splitlines()))
    outer = next(row for row in rows if row["lever"] == "1" and row["hole"] == "B")
    outer["u_m"] = repr(float(outer["u_m"]) * 1.2)
    with (here / "built.csv").open("w", newline="") as file:
        writer = csv.DictWriter(file, rows[0])
        writer.writeheader()
        writer.writerows(rows)
    ended = rigdesign("assess", "fin_rig", "--holes", "built.csv", "--out", "built_rig", "--json")
    assert ended.code == 1
    built = json.loads(ended.out)
    designed = json.loads((here / "fin_rig" / "summary.json").read_text())
    assert built["moment_error_peak"] > 3 * designed["moment_error_peak"]
    assert json.loads((here / "built_rig" / "summary.json").read_text()) == built
    # the written rig is the one as built
    assert json.loads(rigdesign("assess", "built_rig", "--json").out)["moment_error_peak"] == pytest.approx(
        built["moment_error_peak"], rel=1e-9
    )


def test_assess_against_another_brief(rigdesign, brief, here):
    rigdesign("design", "fin.toml")
    (here / "more.toml").write_text(changed(SMALL, total='total = "2.1 kN"'))
    ended = rigdesign("assess", "fin_rig", "--brief", "more.toml", "--json")
    assert ended.code == 0
    answer = json.loads(ended.out)
    assert answer["resultant_N"] == pytest.approx(2100.0)
    # the same levers split a larger force in the same way
    assert answer["moment_error_peak"] == pytest.approx(
        json.loads((here / "fin_rig" / "summary.json").read_text())["moment_error_peak"], rel=1e-6
    )


def test_study_marks_the_fewest_accepted(rigdesign, brief, here):
    ended = rigdesign("study", "fin.toml", "--pads", "1..5", "--out", "fin_study")
    assert ended.code == 0
    assert set(files_under(here / "fin_study")) == {"study.csv", "study.json", "study.svg"}
    rows = list(csv.DictReader((here / "fin_study" / "study.csv").read_text().splitlines()))
    assert [row["pads"] for row in rows] == ["1", "2", "3", "4", "5"]
    accepted = [row["pads"] for row in rows if row["verdict"] == "accepted"]
    assert [row["pads"] for row in rows if row["fewest_accepted"] == "yes"] == accepted[:1]
    assert f"The fewest pads that are accepted: {accepted[0]}." in ended.out
    brief.write_text(changed(SMALL, count='count = "fewest"'))
    assert json.loads(rigdesign("design", "fin.toml", "--json").out)["pads"] == int(accepted[0])


def test_target_says_what_is_asked_for(rigdesign, brief, here):
    ended = rigdesign("target", "fin.toml", "--figure", "fin.svg")
    assert ended.code == 0
    assert "1.90 kN" in ended.out
    assert (here / "fin.svg").read_bytes().startswith(b"<?xml")
    answer = json.loads(rigdesign("target", "fin.toml", "--json").out)
    assert answer["resultant_N"] == pytest.approx(1900.0)
    # a triangle, greatest at the root: its resultant stands at a third of its length
    assert answer["centroid_x_m"] == pytest.approx(0.1 + 1.6 / 3)
    assert answer["root_moment_Nm"] == pytest.approx(1900.0 * 1.6 / 3)


def test_schema_accepts_the_brief(rigdesign, brief):
    import tomllib

    import jsonschema

    schema = json.loads(rigdesign("schema").out)
    jsonschema.validate(tomllib.loads(SMALL), schema)
    with pytest.raises(jsonschema.ValidationError):
        jsonschema.validate(tomllib.loads(changed(SMALL, count="cuont = 5")), schema)


def test_help_and_version(rigdesign):
    import rigdesign as package

    assert rigdesign("--version").out == f"rigdesign {package.__version__}\n"
    for command in ("design", "study", "assess", "target", "schema"):
        ended = rigdesign(command, "--help")
        assert ended.code == 0
        assert "Usage: rigdesign " + command in ended.out
        assert command in rigdesign().out


def test_help_loads_nothing_heavy(here):
    code = (
        "import sys; from rigdesign.command import run; run(['--help']);"
        "sys.exit(' '.join({'numpy', 'scipy', 'matplotlib', 'pydantic', 'pint', 'rich'} & set(sys.modules)) or 0)"
    )
    ended = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True)
    assert (ended.returncode, ended.stderr) == (0, "")


def test_the_package_loads_nothing_heavy(here):
    code = (
        "import sys; before = set(sys.modules); import rigdesign;"
        "sys.exit(' '.join({'numpy', 'pydantic', 'click', 'rich'} & (set(sys.modules) - before)) or 0)"
    )
    ended = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True)
    assert (ended.returncode, ended.stderr) == (0, "")


def test_a_reader_that_leaves_stops_nothing(brief, here):
    command = [sys.executable, "-c", "from rigdesign.command import main; main()", "design", "fin.toml", "--no-figures"]
    with subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True) as process:
        assert process.stdout.readline() == "Small fin, gust from the side\n"
        process.stdout.close()
        errors = process.stderr.read()
    assert (process.returncode, errors) == (0, "")
    assert (here / "fin_rig" / "rig.json").is_file()


def test_a_narrow_terminal_breaks_no_word_of_a_table(rigdesign, brief, monkeypatch):
    from rigdesign.command import terminal

    monkeypatch.setattr(terminal, "PLAIN_WIDTH", 40)
    text = rigdesign("design", "fin.toml", "--no-figures").out
    lines = text[text.index("\nLevers") :].splitlines()
    assert any("lever 2" in line and "pad 1" not in line for line in lines)
    sentences = text[: text.index("\nPads")].splitlines()
    assert max(len(line) for line in sentences) <= 40
