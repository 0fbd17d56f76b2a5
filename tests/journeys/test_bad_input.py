"""Bad input of every kind: one plain message that names it, exit code 2, and nothing written."""

from __future__ import annotations

import os
from pathlib import Path

import pytest
from journey import SMALL, changed, files_under

SHAPE = 'shape = "triangular"\ntotal = "1.9 kN"'
WITH_TABLE = SMALL.replace(SHAPE, 'table = "load.csv"')
INTERNAL = SMALL.replace(SHAPE, 'internal = "load.csv"')
TWO_SUPPORTS = INTERNAL.replace(
    'support = "cantilever"\nroot    = "0.1 m"\ntip     = "1.7 m"',
    'support = "two supports"\nends = ["0.1 m", "1.7 m"]\nsupports = ["0.3 m", "1.5 m"]',
)
GOOD_ROWS = "x [m],load [N/m]\n0.1,1200\n0.9,1500\n1.7,0\n"


def refused(rigdesign, here, *arguments):
    """Run the command, hold it to the rules for bad input, and return its message."""
    before = files_under(here)
    ended = rigdesign(*arguments)
    assert ended.code == 2
    assert ended.out == ""
    assert ended.err.count("\n") == 1
    assert ended.err.startswith("rigdesign: ")
    assert "Traceback" not in ended.err
    assert files_under(here) == before
    return ended.err


BRIEFS = {
    "missing key": (SMALL.replace('support = "cantilever"\n', ""), ["[specimen]", "support", "missing"]),
    "unknown key": (changed(SMALL, count="cuont = 5"), ["[pads]", "cuont", "count"]),
    "wrong kind of unit": (changed(SMALL, total='total = "1.9 kN*m"'), ["total", "1.9 kN*m", "force"]),
    "mass for force": (changed(SMALL, total='total = "420 lb"'), ["total", "lb", "lbf"]),
    "bare number": (changed(SMALL, total="total = 1900"), ["total", "1900", "force", "unit"]),
    "not a number": (changed(SMALL, total='total = "nan N"'), ["total", "nan"]),
    "total of zero": (changed(SMALL, total='total = "0 N"'), ["total", "0 N", "zero"]),
    "station off the specimen": (
        changed(SMALL, places='places = "fixed"\nstations = "0.2, 0.6, 0.9, 1.2, 1.9 m"'),
        ["stations", "1.9", "0.1", "1.7"],
    ),
    "not TOML": (SMALL + "\n[pads\n", ["TOML", "line"]),
    "leaves its folder": (SMALL.replace(SHAPE, 'table = "../load.csv"'), ["../load.csv", "folder"]),
    "no such table": (SMALL.replace(SHAPE, 'table = "laod.csv"'), ["laod.csv"]),
    "table is a folder": (SMALL.replace(SHAPE, 'table = "sub"'), ["sub"]),
    "tip inboard of root": (changed(SMALL, tip='tip = "0.05 m"'), ["tip", "0.05 m"]),
}  # fmt: skip


@pytest.mark.parametrize("name", BRIEFS)
def test_a_brief_that_cannot_be_used(rigdesign, here, name):
    text, words = BRIEFS[name]
    (here / "fin.toml").write_text(text)
    (here / "sub").mkdir()
    message = refused(rigdesign, here, "design", "fin.toml")
    for word in ["fin.toml", *words]:
        assert word in message


TABLES = {
    "unsorted rows": ("x [m],load [N/m]\n0.1,1200\n1.2,1500\n0.9,800\n1.7,0\n", ["line 4", "order"]),
    "text for a number": ("x [m],load [N/m]\n0.1,1200\n0.9,much\n1.7,0\n", ["line 3", "much"]),
    "three rows at one x": ("x [m],load [N/m]\n0.1,1200\n0.9,800\n0.9,700\n0.9,600\n1.7,0\n", ["line 5", "0.9"]),
    "NaN": ("x [m],load [N/m]\n0.1,1200\n0.9,nan\n1.7,0\n", ["line 3", "nan"]),
    "empty": ("", ["empty"]),
    "heading alone": ("x [m],load [N/m]\n", ["row"]),
    "heading without a unit": ("x,load [N/m]\n0.1,1200\n1.7,0\n", ["line 1", "unit"]),
    "wrong unit in a heading": ("x [m],load [N]\n0.1,1200\n1.7,0\n", ["load", "[N]"]),
    "missing column": ("x [m]\n0.1\n1.7\n", ["load"]),
    "ragged row": ("x [m],load [N/m]\n0.1,1200\n0.9\n1.7,0\n", ["line 3"]),
    "off the specimen": ("x [m],load [N/m]\n0.1,1200\n2.4,0\n", ["line 3", "2.4"]),
    "sum of zero": ("x [m],load [N/m]\n0.1,500\n1.7,-500\n", ["zero"]),
}


@pytest.mark.parametrize("name", TABLES)
def test_a_table_that_cannot_be_used(rigdesign, here, name):
    rows, words = TABLES[name]
    (here / "fin.toml").write_text(WITH_TABLE)
    (here / "load.csv").write_text(rows)
    message = refused(rigdesign, here, "design", "fin.toml")
    for word in words:
        assert word in message


def test_an_internal_table_on_two_supports(rigdesign, here):
    (here / "fin.toml").write_text(TWO_SUPPORTS)
    (here / "load.csv").write_text("x [m],shear [N],moment [N*m]\n0.1,900,700\n1.7,0,0\n")
    message = refused(rigdesign, here, "design", "fin.toml")
    assert "internal: a table of shear and moment needs a cantilever" in message


def test_text_that_is_not_utf8(rigdesign, here):
    (here / "fin.toml").write_bytes(SMALL.replace("fin", "f\u00ecn").encode("latin-1"))
    assert "UTF-8" in refused(rigdesign, here, "design", "fin.toml")
    (here / "fin.toml").write_text(WITH_TABLE)
    (here / "load.csv").write_bytes(b"x [m],load [N/m]\n0.1,12\xff0\n1.7,0\n")
    message = refused(rigdesign, here, "design", "fin.toml")
    assert "UTF-8" in message
    assert "load.csv" in message


def test_a_brief_that_is_a_folder_or_is_not_there(rigdesign, here):
    (here / "fin").mkdir()
    assert "folder" in refused(rigdesign, here, "design", "fin") or "directory" in refused(
        rigdesign, here, "design", "fin"
    )
    message = refused(rigdesign, here, "design", "fun.toml")
    assert "fun.toml" in message
    assert refused(rigdesign, here, "design", ".") == 'rigdesign: .: the brief is a folder, not a file: "."\n'


def test_a_brief_that_cannot_be_read(rigdesign, here, monkeypatch):
    brief = here / "fin.toml"
    brief.write_text(SMALL)
    brief.chmod(0)
    if os.access(brief, os.R_OK):  # who may read everything, such as the superuser of a container, is refused by hand

        def refuse(self, *_, **__):
            raise PermissionError(13, "Permission denied", str(self))

        monkeypatch.setattr(Path, "read_bytes", refuse)
        monkeypatch.setattr(Path, "open", refuse)
        ended = rigdesign("design", "fin.toml")
        assert (ended.code, ended.out) == (2, "")
        assert "Permission denied" in ended.err or "permission" in ended.err
        return
    assert "ermission" in refused(rigdesign, here, "design", "fin.toml")


def test_a_million_rows_are_fine(rigdesign, here):
    rows = 1_000_000
    (here / "fin.toml").write_text(WITH_TABLE)
    lines = [f"{0.1 + 1.6 * k / (rows - 1):.9f},{1000 - 900 * k / rows:.3f}\n" for k in range(rows)]
    (here / "load.csv").write_text("x [m],load [N/m]\n" + "".join(lines))
    ended = rigdesign("target", "fin.toml", "--json")
    assert ended.code == 0


@pytest.mark.parametrize("command", ["design", "study"])
def test_a_folder_in_the_way_is_left_alone(rigdesign, here, command):
    (here / "fin.toml").write_text(SMALL)
    (here / "fin_rig").mkdir()
    (here / "fin_rig" / "notes.txt").write_text("mine")
    more = ["--pads", "5", "--out", "fin_rig"] if command == "study" else []
    message = refused(rigdesign, here, command, "fin.toml", *more)
    assert "fin_rig" in message
    message = refused(rigdesign, here, command, "fin.toml", "--replace", *more)
    assert "fin_rig" in message


def test_a_file_in_the_way_and_a_folder_that_cannot_be_made(rigdesign, here):
    (here / "fin.toml").write_text(SMALL)
    (here / "taken").write_text("mine")
    for out in ("taken", "taken/rig", "nowhere/at/all/rig"):
        assert "taken" in refused(rigdesign, here, "design", "fin.toml", "--out", out, "--replace") or "nowhere" in out


@pytest.mark.parametrize("call", ["chmod", "rename"])
@pytest.mark.parametrize("more", [["--replace"], ["--out", "other_rig"]], ids=["replacing", "new"])
def test_an_interruption_while_writing_leaves_nothing(rigdesign, here, monkeypatch, call, more):
    (here / "fin.toml").write_text(SMALL)
    assert rigdesign("design", "fin.toml", "--no-figures").code == 0
    before = files_under(here)
    half_written = []

    def interrupted(*_, **__):
        half_written.extend(here.glob(".*/rig.json"))
        monkeypatch.undo()
        raise KeyboardInterrupt

    # the files are written and then given their rights and their name: both are in the middle of it
    monkeypatch.setattr(os, call, interrupted)
    ended = rigdesign(
        "design", here / "fin.toml", "--no-figures", *[here / word if "_" in word else word for word in more]
    )
    assert half_written
    assert ended.code == 130
    assert ended.err.strip() == "rigdesign: interrupted; nothing was written"
    assert files_under(here) == before
    assert sorted(path.name for path in here.iterdir()) == ["fin.toml", "fin_rig"]


def test_a_rig_that_is_none(rigdesign, here):
    (here / "rig.json").write_text('{"hello": 1}')
    assert "rig" in refused(rigdesign, here, "assess", "rig.json")
    (here / "rig.json").write_text("{")
    assert "rig.json" in refused(rigdesign, here, "assess", "rig.json")
    assert "no rig" in refused(rigdesign, here, "assess", "elsewhere")


def test_a_figure_of_no_known_kind(rigdesign, here):
    (here / "fin.toml").write_text(SMALL)
    assert ".svg or .png" in refused(rigdesign, here, "target", "fin.toml", "--figure", "fin.jpeg")
    (here / "fin.svg").write_text("mine")
    assert "exists" in refused(rigdesign, here, "target", "fin.toml", "--figure", "fin.svg")


def test_options_that_are_none(rigdesign, here):
    assert "--help" in refused(rigdesign, here, "design")
    assert "4..24" in refused(rigdesign, here, "study", "fin.toml", "--pads", "4-24")
