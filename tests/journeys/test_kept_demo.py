"""The wing sail of the demos: few part marks, its cut steel under a second load, the numbers of the README."""

from __future__ import annotations

import csv
import json
import re
import shutil
import subprocess
import sys

import pytest
from journey import ROOT, files_under

from rigdesign.report.writing import read_rig

SAIL = ROOT / "demo_rigs" / "freighter_sail"
CUT = SAIL / "cut_rig"
README = " ".join((ROOT / "README.md").read_text().split())

LEVELLED = 1e-9
"""Holes of the rig that ships and of today's differ by no more than this [m]: rounding of other libraries."""

AS_WRITTEN = 1e-6
"""The drill list is in millimetres with so many decimals that this [m] is more than it rounds."""


def _run(folder, *arguments):
    """The command in a process of its own, once for all tests here."""
    code = "import sys; from rigdesign.command import run; sys.exit(run(sys.argv[1:]))"
    words = [sys.executable, "-c", code, *map(str, arguments)]
    return subprocess.run(words, capture_output=True, text=True, cwd=folder)


@pytest.fixture(scope="module")
def few(tmp_path_factory):
    """The first brief, designed: its folder."""
    folder = tmp_path_factory.mktemp("sail")
    ended = _run(folder, "design", SAIL / "brief.toml", "--out", "few", "--no-figures")
    assert ended.returncode == 0, ended.stdout + ended.stderr
    return folder / "few"


@pytest.fixture(scope="module")
def kept(tmp_path_factory):
    """The second brief, designed on the cut rig: its folder."""
    folder = tmp_path_factory.mktemp("sail")
    ended = _run(folder, "design", SAIL / "new_gust.toml", "--out", "kept", "--no-figures")
    assert ended.returncode == 0, ended.stdout + ended.stderr
    return folder / "kept"


def _summary(folder):
    return json.loads((folder / "summary.json").read_text())


def _finding(summary, stage, object_):
    return next(one for one in summary["findings"] if one["stage"] == stage and one["object"] == object_)["text"]


def _holes(rig):
    return [
        (piece.name, hole.name, hole.joins, (hole.u, hole.v, hole.x, hole.y))
        for tree in rig.trees
        for piece in tree.pieces
        for hole in piece.holes
    ]


def test_the_cut_rig_that_ships_is_what_its_brief_gives_today(few):
    shipped, today = read_rig(CUT), read_rig(few)
    assert shipped.plan.target.brief.title == today.plan.target.brief.title
    for one, other in zip(_holes(shipped), _holes(today), strict=True):
        assert one[:3] == other[:3]
        assert one[3] == pytest.approx(other[3], abs=LEVELLED)
    assert shipped.pad_x == pytest.approx(today.pad_x, abs=LEVELLED)


def test_the_sizes_of_the_cut_rig_are_those_of_today(few):
    """Else the steel that ships would be another than the README tells of: design the brief anew into cut_rig."""
    shipped, today = (json.loads((folder / "rig.json").read_text())["hardware"] for folder in (CUT, few))
    for piece, other in zip(shipped["bodies"], today["bodies"], strict=True):
        assert (piece["piece"], piece["section"]) == (other["piece"], other["section"])
    assert shipped["marks"] == today["marks"]


def test_few_part_marks_cost_what_the_readme_says(few):
    summary = _summary(few)
    assert summary["verdict"] == "accepted"
    text = _finding(summary, "levers", "part marks")
    marks = re.search(r"(\d+) part marks before and (\d+) after", text)
    use = re.search(r"the band use from ([\d.]+) to ([\d.]+)", text)
    assert marks is not None
    assert use is not None
    before, after = int(marks[1]), int(marks[2])
    assert after < before == summary["levers"] == 23
    assert summary["part_marks"] == after
    assert float(use[2]) == pytest.approx(summary["band_use"], abs=5e-4)
    assert float(use[1]) < float(use[2]) < 1
    assert f"levers of {after} part marks instead of {before}, proven the fewest" in README
    assert f"from {float(use[1]):.3f} to {float(use[2]):.3f}" in README
    assert "proven the fewest within the tolerance" in json.loads((few / "rig.json").read_text())["words"]


def test_under_the_second_load_the_cut_rig_is_not_accepted(few):
    ended = _run(few, "assess", CUT, "--brief", SAIL / "new_gust.toml", "--json")
    assert ended.returncode == 1, ended.stderr
    summary = json.loads(ended.stdout)
    assert summary["verdict"] == "not accepted"
    assert summary["band_use"] > 1
    assert f"would take {100 * summary['band_use']:.0f} % of its band" in README


def test_with_one_pivot_moved_it_is(kept):
    summary = _summary(kept)
    assert summary["verdict"] == "accepted"
    old, new = read_rig(CUT), read_rig(kept)
    assert new.pad_x == pytest.approx(old.pad_x, abs=LEVELLED)
    moved = []
    for before, after in zip(old.trees[0].pieces, new.trees[0].pieces, strict=True):
        u, v = before.ends[0], after.ends[0]
        # outer holes keep their distance; a pivot is told by how far it is from hole A
        assert after.ends[1].u - v.u == pytest.approx(before.ends[1].u - u.u, abs=LEVELLED)
        step = (after.pivot.u - v.u) - (before.pivot.u - u.u)
        if abs(step) > LEVELLED:
            moved.append((before.name, abs(step)))
    assert len(moved) == 1
    bodies = {body["piece"]: body for body in json.loads((kept / "rig.json").read_text())["hardware"]["bodies"]}
    assert [name for name, body in bodies.items() if body["old_pivots_m"]] == [moved[0][0]]
    hole = next(row for row in _drilled(kept) if row["hole"] == "old pivot")
    # two hole diameters, the default, from centre to centre
    assert moved[0][1] >= 2 * float(hole["diameter_mm"]) / 1000 - LEVELLED
    told = f"with 1 of its {summary['levers']} pivots moved, by {1000 * moved[0][1]:.0f} mm, "
    assert f"{told}it takes {100 * summary['band_use']:.1f} %, and no fewer would do" in README
    assert "proven: no fewer keep the bands" in json.loads((kept / "rig.json").read_text())["words"]


def _drilled(folder):
    with (folder / "drill_list.csv").open(newline="") as file:
        return list(csv.DictReader(file))


def test_the_drill_list_has_the_old_pivot_and_the_new_one(kept):
    rows = _drilled(kept)
    old = [row for row in rows if row["hole"] == "old pivot"]
    assert len(old) == 1
    assert old[0]["note"].startswith("drilled already")
    new = next(row for row in rows if row["hole"] == "pivot" and row["mark"] == old[0]["mark"])
    first = next(row for row in rows if row["hole"] == "A" and row["mark"] == old[0]["mark"])
    datum = float(first["from_datum_mm"]) / 1000
    for row, folder in ((old[0], CUT), (new, kept)):
        lever = read_rig(folder).trees[0].pieces[0]
        from_a = lever.pivot.u - lever.ends[0].u
        assert float(row["from_datum_mm"]) / 1000 - datum == pytest.approx(from_a, abs=AS_WRITTEN)


def test_the_kept_rig_is_not_written_over(rigdesign, here):
    for path in SAIL.iterdir():
        copy = here / path.name
        shutil.copytree(path, copy) if path.is_dir() else shutil.copy(path, copy)
    (here / "cut_rig" / "summary.json").write_text("{}")
    before = files_under(here / "cut_rig")
    ended = rigdesign("design", "new_gust.toml", "--out", "cut_rig", "--replace", "--no-figures")
    assert (ended.code, ended.out) == (2, "")
    assert "cut_rig: this folder holds the rig that is kept; name another with --out" in ended.err
    assert files_under(here / "cut_rig") == before
