"""General arrangement in elevation: the whole rig at one scale, stations beneath it, heights beside it."""

from __future__ import annotations

from math import isfinite

import numpy as np

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.report.figures_parts import MARK
from rigdesign.report.figures_sheet import spread
from rigdesign.report.lists import centres
from rigdesign.report.sheets import side_views, specimen_views
from rigdesign.report.sheets.detail_levers import centre_symbol
from rigdesign.report.sheets.dimensions import height_column, running_row
from rigdesign.report.sheets.frame import FIELD
from rigdesign.report.sheets.labels import label_levers
from rigdesign.report.sheets.marks import draw_mark
from rigdesign.report.sheets.paper import BODY, HATCH, HEAD, THIN, Paper
from rigdesign.report.sheets.sizes import Sizes, scale_words
from rigdesign.report.sheets.steel import place_of, reach_along_x, top_height
from rigdesign.report.sheets.texts import text_width
from rigdesign.report.sheets.views import View, fitted, is_up, rise_of, seen_words

HEIGHTS_ROOM = 62.0
"""Room for the column of heights at the right [mm]."""
STATIONS_ROOM = 42.0
"""Room for pads' marks and their stations beyond the specimen's far face [mm]."""
MARK_ROOM = 9.5
"""Room for a jack's mark before its text [mm]."""
MOST_STATIONS = 110
"""Beyond so many pads their stations are only in the schedule of pads."""


def elevation_sheet(result: HardwareCheck, sizes: Sizes) -> tuple[Paper, str, str]:
    """Return the sheet, its name and its scale."""
    paper = Paper()
    view = _view(result)
    brief = result.check.rig.plan.target.brief
    far = specimen_views.draw_side(paper, view, brief, result.hardware.side)
    keep_off_specimen(paper, view, result)
    _draw_rig(paper, view, result)
    bottom = _stations(paper, view, result, sizes, far)
    heights_at = _heights(paper, view, result, sizes)
    _headroom(paper, view, result, sizes, heights_at)
    _jacks(paper, view, result, sizes)
    _centres(paper, view, result, sizes)
    label_levers(paper, view, result, result.hardware.pieces)
    seen, _ = seen_words(result)
    paper.text(FIELD.left + 5, FIELD.high - 6, f"elevation, {seen}, {scale_words(view.ratio)}", HEAD, bold=True)
    paper.text(FIELD.left + 5, FIELD.high - 11.5, _words(result), BODY)
    _directions(paper, result, FIELD.left + 8, min(bottom + 6, FIELD.low + 8) if view.rise > 0 else FIELD.low + 8)
    return paper, "General arrangement, elevation", scale_words(view.ratio)


def _words(result: HardwareCheck) -> str:
    rig = result.check.rig
    pieces = result.hardware.pieces
    plates = sum(piece.kind == "plate" for piece in pieces)
    parts = [f"{rig.pad_x.size} pads", f"{len(pieces) - plates} levers", f"{plates} plates",
             f"{len(result.hardware.links)} links"]  # fmt: skip
    return ", ".join(_one(part) for part in parts if not part.startswith("0 ")) + "; true to scale at rest"


def _one(words: str) -> str:
    return words.removesuffix("s") if words.startswith("1 ") else words


def _view(result: HardwareCheck) -> View:
    """The scale and place of the view: x over all steel, heights from the specimen to the jack's anchor."""
    hardware, brief = result.hardware, result.check.rig.plan.target.brief
    spans = [reach_along_x(hardware, piece) for piece in hardware.pieces]
    half = brief.pads.length / 2
    low = min([brief.specimen.left, *(a for a, _ in spans), float(result.check.rig.pad_x.min()) - half])
    high = max([brief.specimen.right, *(b for _, b in spans), float(result.check.rig.pad_x.max()) + half])
    surface = specimen_views.surface_line(brief, hardware.side)[:, 1]
    bottom, top = float(min(surface.min(), 0.0)), top_height(result)
    if isfinite(brief.hardware.headroom):
        top = max(top, brief.hardware.headroom)
    rise = rise_of(result)
    near, far = specimen_views.DEPTH + STATIONS_ROOM, 9.0
    below, above = (near, far) if rise > 0 else (far + 4.0, near + 8.0)
    rows = 13.0 + 4.2 * len(hardware.stacks)
    room = FIELD.less(12.0, below, HEIGHTS_ROOM, above + rows)
    return fitted(room, (low, high), (bottom, top), rise)


def _draw_rig(paper: Paper, view: View, result: HardwareCheck) -> None:
    side_views.draw_pads(paper, view, result)
    side_views.draw_links(paper, view, result, result.hardware.links)
    side_views.draw_pieces(paper, view, result, result.hardware.pieces)
    side_views.draw_stacks(paper, view, result)


def keep_off_specimen(paper: Paper, view: View, result: HardwareCheck) -> None:
    """Later labels keep off the strip that stands for the specimen."""
    line = view.points(specimen_views.surface_line(result.check.rig.plan.target.brief, result.hardware.side))
    for part in (0.0, 0.5, 1.0):
        paper.keep_off(line - np.array([0.0, part * view.rise * specimen_views.DEPTH]))


def _stations(paper: Paper, view: View, result: HardwareCheck, sizes: Sizes, far: float) -> float:
    """Marks of the pads on the specimen's far side, and their x in running dimensions; return the lowest place."""
    rig, away = result.check.rig, -view.rise
    places = [view.x(float(x)) for x in rig.pad_x]
    order = sorted(range(len(places)), key=lambda k: (places[k], k))
    rows = max(1, int(np.ceil(len(places) * (MARK + 0.8) / max(max(places) - min(places), 60.0))))
    base = far + away * (10.0 if rig.plan.target.brief.specimen.supports else 6.0)
    for row in range(rows):
        members = order[row::rows]
        wanted = [places[k] for k in members]
        apart = spread(wanted, MARK + 0.8, FIELD.left + 4, FIELD.right - HEIGHTS_ROOM + 8)
        y = base + away * row * (MARK + 1.0)
        for k, at in zip(members, apart, strict=True):
            paper.line((places[k], far + away * 0.6), (at, y - away * MARK / 2), weight=HATCH)
            draw_mark(paper, "pad", k + 1, at, y)
    line = base + away * (rows * (MARK + 1.0) + 2.0)
    if len(places) > MOST_STATIONS:
        paper.text(FIELD.left + 12, line, "stations: see the schedule of pads", BODY)
        return line
    root = rig.plan.target.brief.specimen.left
    features = [(view.x(root), sizes.length(root), line)]
    stations = {round(float(rig.pad_x[k]), 5): places[k] for k in order}
    features += [(place, sizes.length(x), line - away * 1.5) for x, place in stations.items() if abs(x - root) > 1e-5]
    edges = FIELD.left + 14, FIELD.right - HEIGHTS_ROOM + 14
    used = running_row(paper, features, line, away, edges, datum=abs(root) < 1e-9)
    paper.text(max(FIELD.left + 2, view.x(root) - 14.0), line, f"x [{sizes.unit}]", BODY)
    return line + away * used


def _heights(paper: Paper, view: View, result: HardwareCheck, sizes: Sizes) -> float:
    """The column of heights over z = 0 at the right; return where its line stands."""
    hardware = result.hardware
    right = max(
        [view.x(result.check.rig.plan.target.brief.specimen.right)]
        + [view.x(reach_along_x(hardware, piece)[1]) for piece in hardware.pieces]
    )
    line = min(right + 9.0, FIELD.right - HEIGHTS_ROOM + 8)
    features = []
    for height, words, names in levels(result):
        start = max(_right_edge(view, result, name) for name in names) if names else line - 8.0
        features.append((view.y(height), f"{sizes.length(height)}  {words}", min(start, line - 3.0)))
    height_column(paper, features, line, (FIELD.low + 4, FIELD.high - 4), view.y(0.0))
    return line


def _right_edge(view: View, result: HardwareCheck, name: str) -> float:
    """Where on the paper the steel of a member ends at the right [mm]."""
    if name.startswith("lever"):
        piece = next(piece for piece in result.hardware.pieces if piece.name == name)
        return view.x(reach_along_x(result.hardware, piece)[1])
    return view.x(place_of(result.hardware, name, "")[0])


def levels(result: HardwareCheck) -> list[tuple[float, str, tuple[str, ...]]]:
    """Return the heights to be dimensioned [m], what they are of, and the members there; from the specimen up."""
    hardware = result.hardware
    found: dict[tuple[float, str], list[str]] = {}
    for pad in hardware.pads:
        found.setdefault((round(pad.pin_height, 5), "pins of pads"), []).append(f"pad {pad.pad}")
    pins = list(found)
    if len(pins) > 2:  # on an uneven surface the lowest and the highest will do
        for key in sorted(pins)[1:-1]:
            del found[key]
    for piece in hardware.pieces:
        words = f"tier {piece.tier}"
        found.setdefault((round(hardware.heights[piece.name], 5), words), []).append(piece.name)
    for stack in hardware.stacks:
        low = hardware.heights[stack.jack]
        joint = low + stack.cell.length
        found.setdefault((round(low, 5), "pin of the cell"), []).append(stack.jack)
        found.setdefault((round(joint, 5), "cell to jack"), []).append(stack.jack)
        found.setdefault((round(joint + stack.machine.standing, 5), "far pin of the jack"), []).append(stack.jack)
    result_rows = [(height, words, tuple(names)) for (height, words), names in sorted(found.items())]
    if result.space.total > max(height for height, _, _ in result_rows) + 1e-3:
        result_rows.append((result.space.total, "highest part of the rig", (hardware.stacks[0].jack,)))
    return [(0.0, "z = 0", ()), *result_rows]


def _headroom(paper: Paper, view: View, result: HardwareCheck, sizes: Sizes, line: float) -> None:
    headroom = result.check.rig.plan.target.brief.hardware.headroom
    if not isfinite(headroom):
        return
    y = view.y(headroom)
    paper.line((FIELD.left + 6, y), (line, y), weight=THIN, dash="phantom")
    words = f"headroom {sizes.length(headroom)}"
    paper.text(FIELD.left + 8, y + 2.0, words, BODY)


def _jacks(paper: Paper, view: View, result: HardwareCheck, sizes: Sizes) -> None:
    """The mark of every jack, with its station and its greatest force, beside it."""
    hardware = result.hardware
    top = result.tare.steps[-1] if result.tare.steps else None
    for row, (tree, stack) in enumerate(zip(hardware.rig.trees, hardware.stacks, strict=True)):
        lines = [f"{stack.machine.name}, x = {sizes.length(tree.jack.x)}"]
        if top is not None:
            lines.append(f"{sizes.force(abs(float(top.jack[row])))} at {100 * top.level:.0f} % of the load")
        lines.append(f"load cell: {stack.cell.name}")
        size = max(text_width(words, BODY) for words in lines) + MARK_ROOM, 3.2 * len(lines)
        middle = hardware.heights[stack.jack] + stack.cell.length + 0.6 * stack.machine.standing
        start = 0.13 * stack.machine.standing * view.mm + 3.0
        x, y = paper.board.place(*view.at(tree.jack.x, middle), *size, start, 3.0)
        left = x - size[0] / 2
        draw_mark(paper, "jack", tree.jack.number, left + 4.0, y)
        for k, words in enumerate(lines):
            paper.text(left + MARK_ROOM, y - 3.2 * (k - (len(lines) - 1) / 2), words, BODY)


def _centres(paper: Paper, view: View, result: HardwareCheck, sizes: Sizes) -> None:
    """Mass and centre of mass of each tree: in words at the top, and by a quartered disc at its place."""
    trees = [centre for centre in centres(result) if centre.name.startswith("tree")]
    for k, centre in enumerate(trees):
        at = view.at(centre.x, centre.height)
        centre_symbol(paper, *at, 1.7)
        paper.take(*at, 3.8, 3.8)
        place = f"x = {sizes.length(centre.x)}, height {sizes.length(centre.height)}"
        words = f"{centre.name}: {sizes.mass(centre.mass)} without jack and cell, its centre of mass at {place}"
        row = FIELD.high - 16.6 - 4.2 * k
        centre_symbol(paper, FIELD.left + 6.3, row, 1.3)
        paper.text(FIELD.left + 9.5, row, words, BODY)


def _directions(paper: Paper, result: HardwareCheck, x: float, y: float) -> None:
    """Arrows of x and z."""
    up = 1.0 if is_up(result) else -1.0
    base = y if up > 0 else y + 11.0
    paper.line((x, base), (x + 9.0, base), weight=THIN)
    paper.arrow((x + 10.0, base), 0.0)
    paper.line((x, base), (x, base + up * 9.0), weight=THIN)
    paper.arrow((x, base + up * 10.0), up * np.pi / 2)
    paper.text(x + 11.0, base, "x", BODY)
    paper.text(x + 1.5, base + up * 10.0, "z", BODY)
