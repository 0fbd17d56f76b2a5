"""Pieces of the drawings: places true to scale, hidden lines, mirrored parts, tables that break over pages."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hand_hardware import make_hardware_for
from numpy.typing import NDArray
from sheet_cases import case, checked, line_rig

from rigdesign.checks import check
from rigdesign.checks.hardware import check_hardware
from rigdesign.levers.model import Piece, Rig
from rigdesign.report.figures_sheet import styled
from rigdesign.report.sheets.arrange_elevation import elevation_sheet, levels
from rigdesign.report.sheets.arrange_plan import plan_sheet
from rigdesign.report.sheets.frame import FIELD, draw_frame
from rigdesign.report.sheets.paper import Box, Paper
from rigdesign.report.sheets.part_facts import detailed_parts
from rigdesign.report.sheets.rigging import rigging_sheets
from rigdesign.report.sheets.sizes import Sizes
from rigdesign.report.sheets.tables import Table, draw_table, table_sheets
from rigdesign.report.sheets.texts import broken, shortened, text_width
from rigdesign.report.sheets.views import fitted, rise_of, seen_words


def circles(paper: Paper) -> NDArray[np.float64]:
    """Centres (n, 2) of all circles on a page [mm]."""
    paths = [path for paths in paper._shapes.values() for path in paths if path.codes is not None and 4 in path.codes]
    return np.array([path.get_extents().get_points().mean(axis=0) for path in paths])


def near(places: NDArray[np.float64], x: float, y: float) -> float:
    """Distance [mm] from x, y to the nearest of the places."""
    return float(np.hypot(places[:, 0] - x, places[:, 1] - y).min())


@pytest.mark.parametrize(("name", "way"), [("line 12", 1.0), ("below", -1.0), ("plates", 1.0)])
def test_elevation_shows_every_pin_where_it_is(name: str, way: float) -> None:
    """Pins of pads, cells and jacks lie at their stations and heights, to the scale that the sheet says."""
    result = case(name)
    paper, _, scale = elevation_sheet(result, Sizes())
    mm = 1000.0 / float(scale.split(":")[1])
    found, hardware = circles(paper), result.hardware
    assert rise_of(result) == way
    jack = hardware.rig.trees[0].jack
    pin = hardware.heights["jack 1"]
    pads = [(float(x), pad.pin_height) for x, pad in zip(result.check.rig.pad_x, hardware.pads, strict=True)]
    top = pin + hardware.stacks[0].cell.length + hardware.stacks[0].machine.standing
    expected = np.array([*pads, (jack.x, pin), (jack.x, top)])
    # where the first pad is on the paper is the sheet's own choice: any circle from which all others follow
    spots = mm * (expected - expected[0]) * np.array([1.0, way])
    offs = [max(near(found, *(start + spot)) for spot in spots) for start in found]
    assert min(offs) < 0.01


def test_elevation_is_upside_down_where_gravity_acts_along_z() -> None:
    """The rig of a specimen that hangs inverted, pulled against z, is drawn above it: the ground is at the bottom."""
    rig = line_rig(3, sign=-1.0)
    brief = rig.plan.target.brief
    turned = replace(brief, specimen=replace(brief.specimen, gravity=1))
    plan = replace(rig.plan, target=replace(rig.plan.target, brief=turned))
    result = checked(replace(rig, plan=plan))
    assert result.hardware.side == -1
    assert rise_of(result) == 1.0
    assert seen_words(result) == ("seen along −y, z downwards", "seen from below, against z")


def test_heights_are_those_of_the_hardware() -> None:
    """Every tier once, the pads' pins, cell and jack."""
    result = case("line 12")
    rows = {words: height for height, words, _ in levels(result)}
    for piece in result.hardware.pieces:
        assert rows[f"tier {piece.tier}"] == pytest.approx(result.hardware.heights[piece.name], abs=1e-5)
    stack = result.hardware.stacks[0]
    low = result.hardware.heights["jack 1"]
    assert rows["pin of the cell"] == pytest.approx(low, abs=1e-5)
    assert rows["far pin of the jack"] == pytest.approx(low + stack.cell.length + stack.machine.standing, abs=1e-5)


def test_headroom_is_drawn_where_the_brief_has_one() -> None:
    """As a line with its height in words."""
    rig = line_rig(3)
    brief = rig.plan.target.brief
    low = replace(brief, hardware=replace(brief.hardware, headroom=3.456))
    plan = replace(rig.plan, target=replace(rig.plan.target, brief=low))
    words = [text.words for text in elevation_sheet(checked(replace(rig, plan=plan)), Sizes())[0].texts]
    assert "headroom 3456" in words
    assert not [text for text in elevation_sheet(checked(rig), Sizes())[0].texts if "headroom" in text.words]


def length(lines: list[NDArray[np.float64]]) -> float:
    """Length of lines through points [mm]."""
    return float(sum(np.hypot(*np.diff(line, axis=0).T).sum() for line in lines))


def test_plan_draws_every_edge_once_and_dashes_what_lies_beneath() -> None:
    """Edges of profiles and footprints come to their perimeters, seen and hidden parts together.

    Hidden are the footprints' inner short sides where both profiles cross them, and nothing of the lever, which lies
    over all else.
    """
    result = case("line 2")
    paper, _, scale, _ = plan_sheet(result, Sizes(), [])
    mm = 1000.0 / float(scale.split(":")[1])
    seen = length([line for (_, dash, order), lines in paper._lines.items() for line in lines
                   if dash == "solid" and order == 3.0])  # fmt: skip
    hidden = length([line for (_, dash, order), lines in paper._lines.items() for line in lines
                     if dash == "dashed" and order == 2.5])  # fmt: skip
    body = result.hardware.bodies["lever 1"]
    a, b = result.hardware.pieces[0].ends
    steel = 2 * 2 * (b.u - a.u + 2 * body.overhang + body.section.width)
    pads = 2 * 2 * (0.12 + 0.06)
    # each profile ends inside the footprints, so it crosses one edge of each; the ends of edges under it are short
    crossed = 2 * 2 * body.section.width
    assert (seen + hidden) / mm == pytest.approx(steel + pads, abs=0.4 / mm * 8)
    assert hidden / mm == pytest.approx(crossed, rel=0.02)


def mirrored(rig: Rig) -> Rig:
    """The rig with lever 3 as the mirror image of lever 2: places do not matter here, arms do."""

    def changed(piece: Piece) -> Piece:
        if piece.number != 3:
            return piece
        a, b = rig.trees[0].pieces[1].ends
        holes = (piece.pivot, replace(piece.ends[0], u=-b.u), replace(piece.ends[1], u=-a.u))
        return replace(piece, holes=holes)

    tree = rig.trees[0]
    return replace(rig, trees=(replace(tree, pieces=tuple(changed(piece) for piece in tree.pieces)),))


def test_mirrored_marks_name_each_other() -> None:
    """Of levers with one steel and arms the other way round, and of no others."""
    rig = mirrored(line_rig(4))
    hardware = make_hardware_for(rig)
    same = {name: replace(hardware.bodies["lever 2"], piece=name) for name in ("lever 2", "lever 3")}
    result = case("line 2")
    result = replace(result, check=check(line_rig(4)), hardware=replace(hardware, bodies={**hardware.bodies, **same}))
    parts = {part.row.mark: part.mirror for part in detailed_parts(result)}
    assert parts == {"L1": "", "L2": "L3", "L3": "L2"}
    plain = check_hardware(check(line_rig(4)), make_hardware_for(line_rig(4)))
    assert {part.mirror for part in detailed_parts(plain)} == {""}


ROWS = tuple((str(k), "flat 80×10", f"lever {k} and much that is said of it, " * (k % 3)) for k in range(1, 200))
TABLE = Table("Trial", ("number", "section", "words"), ROWS, "rll", 2, ("a note",))


def test_long_tables_break_over_sheets_with_their_headings() -> None:
    """Every row once and in order, headings on every sheet, the note at the end alone."""
    papers = [paper for paper, _, _ in table_sheets([TABLE])]
    assert len(papers) > 2
    seen: list[int] = []
    for paper in papers:
        words = [text.words for text in paper.texts]
        assert {"number", "section", "words"} <= set(words)
        seen += [int(word) for word in words if word.isdigit()]
        assert words[0] == ("Trial" if paper is papers[0] else "Trial, continued")
        assert ("a note" in words) == (paper is papers[-1])
    assert seen == list(range(1, 200))


def test_narrow_tables_stand_in_blocks_and_short_ones_share_a_sheet() -> None:
    """Three blocks of one table below another; the sheet is named after both."""
    narrow = Table("Narrow", ("a", "b"), tuple((str(k), "x" * 40) for k in range(60)), "rl")
    short = Table("Short", ("a",), (("one",), ("two",)), "l")
    empty = Table("Empty", ("a",), (), "l")
    pages = list(table_sheets([short, empty, narrow]))
    assert [name for _, name, _ in pages] == ["Short, narrow"]
    heads = [text for text in pages[0][0].texts if text.words == "b"]
    assert len(heads) > 2
    assert len({round(text.y, 3) for text in heads}) == 1


def test_a_table_that_hardly_fits_is_not_begun() -> None:
    """Nothing is drawn into a room without place for three rows."""
    paper = Paper()
    assert draw_table(paper, Box(30.0, 60.0, 370.0, 20.0), TABLE, 0) == (0, 0.0)
    assert paper.texts == []


def test_words_are_broken_and_cut_to_their_room() -> None:
    """No line is wider than asked; a single long word loses its end."""
    words = "weigh every part before it is hung and write it down, " + "x" * 60
    lines = broken(words, 30.0, 7.0)
    assert all(text_width(line, 7.0) <= 30.0 for line in lines)
    assert " ".join(lines[:-1]) == words.rsplit(" ", 1)[0]
    assert lines[-1].endswith("…")
    assert shortened("short", 30.0, 7.0) == "short"


def test_views_keep_their_room_and_scale() -> None:
    """At the largest round scale that fits, in the middle of the room; heights downwards where asked."""
    room = Box(10.0, 20.0, 200.0, 100.0)
    view = fitted(room, (1.0, 3.9), (-0.5, 0.4), rise=-1.0)
    assert view.ratio == 15.0
    assert view.x(1.0) >= room.left
    assert view.x(3.9) <= room.right
    assert view.y(-0.5) > view.y(0.4)
    assert (view.x(1.0) + view.x(3.9)) / 2 == pytest.approx(room.middle[0])
    assert (view.y(-0.5) + view.y(0.4)) / 2 == pytest.approx(room.middle[1])
    assert view.x(2.0) - view.x(1.0) == pytest.approx(1000.0 / 15.0)


def test_rigging_sheet_says_why_a_rig_is_not_accepted() -> None:
    """Each failure with its object, first of all."""
    paper = next(rigging_sheets(case("plates"), Sizes()))[0]
    assert paper.texts[0].words == "NOT ACCEPTED – do not build"
    assert any("lever 1: fouls lever 2 when turned" in text.words for text in paper.texts)


def test_long_titles_stay_in_their_cell() -> None:
    """On one line in smaller letters, on two, or cut after two."""
    from rigdesign.report.sheets.frame import BLOCK, Facts, Sheet

    for title in ("Skimmer", "Estuary skimmer, starboard foil in its hard turn", "A very long name of a rig " * 8):
        paper = Paper()
        styled(draw_frame)(paper, Sheet("Tier 1", "1:10", 1, 2), Facts(title, "A", "S355", True, Sizes()))
        own = [text for text in paper.texts if text.bold and text.words[:5] == title[:5]]
        assert own
        assert max(text.box[2] for text in own) < BLOCK.right
        assert FIELD.low == BLOCK.high
