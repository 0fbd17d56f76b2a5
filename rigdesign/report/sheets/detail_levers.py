"""The detail of a lever: side view with running dimensions from its datum end, and the section at its pivot."""

from __future__ import annotations

import numpy as np

from rigdesign.hardware.levers import side_width
from rigdesign.hardware.model import Body
from rigdesign.report.figures_sheet import spread
from rigdesign.report.lists import DrillRow
from rigdesign.report.sheets.dimensions import distance, running_row
from rigdesign.report.sheets.paper import BODY, HATCH, MEDIUM, OUTLINE, SMALL, THIN, Box, Paper
from rigdesign.report.sheets.part_facts import PartFacts
from rigdesign.report.sheets.sections import draw_section
from rigdesign.report.sheets.sizes import Sizes, round_scale, scale_words
from rigdesign.report.sheets.texts import text_width
from rigdesign.report.sheets.views import View

SECTION_ROOM = 58.0
"""Width kept for the section at the right [mm]."""
BELOW, ABOVE = 17.0, 13.0
"""Room for labels of holes below the steel, and for dimensions above it [mm]."""


def draw_lever(paper: Paper, room: Box, part: PartFacts, sizes: Sizes) -> None:
    """Draw a lever's detail into a room of the sheet."""
    side = room.less(2.0, 0.0, SECTION_ROOM, 0.0)
    body = part.body
    length = part.row.length or 0.0
    depth = body.section.depth
    high = side.height - BELOW - ABOVE
    ratio = round_scale(1000.0 * max(length / (side.width - 12.0), depth / high))
    middle = side.low + BELOW + high / 2
    left = side.left + (side.width - 10.0 - length * 1000.0 / ratio) / 2
    view = View(ratio, left, middle, 0.0, 0.0)
    _steel(paper, view, part, length)
    _dimensions(paper, view, side, part, length, sizes)
    _hole_labels(paper, view, side, part, sizes)
    paper.text(room.left, room.high - 1.5, f"side view {scale_words(ratio)}", SMALL)
    draw_section(paper, Box(room.right - SECTION_ROOM + 6.0, room.low, SECTION_ROOM - 6.0, room.height), part, sizes)


def _steel(paper: Paper, view: View, part: PartFacts, length: float) -> None:
    body, half = part.body, part.body.section.depth / 2
    corners = [(0.0, -half), (length, -half), (length, half), (0.0, half)]
    paper.shape(view.points(corners), OUTLINE, order=3.0)
    _edges(paper, view, body, length)
    for hole in part.holes:
        if body.side_plate:
            reach = side_width(hole.diameter) / 2
            box = [(hole.along - reach, -half), (hole.along + reach, -half), (hole.along + reach, half),
                   (hole.along - reach, half)]  # fmt: skip
            paper.shape(view.points(box), THIN, order=3.2)
    paper.line(view.at(-0.0, 0.0), view.at(length, 0.0), weight=HATCH, dash="chain", order=4.0)
    paper.line((view.x(0) - 3, view.low), (view.x(length) + 3, view.low), weight=HATCH, dash="chain", order=4.0)
    for hole in part.holes:
        radius = hole.diameter / 2 * view.mm
        paper.circle(view.x(hole.along), view.low, max(radius, 0.35), MEDIUM, order=4.5)
        cross = max(radius, 0.35) + 1.2
        paper.line((view.x(hole.along), view.low - cross), (view.x(hole.along), view.low + cross), weight=HATCH,
                   order=4.6)  # fmt: skip
    _spacers(paper, view, part)
    _centre(paper, view, part)


def _edges(paper: Paper, view: View, body: Body, length: float) -> None:
    """Edges of flanges and walls: seen on channels, hidden in hollow sections."""
    if body.build == "twin flats":
        return
    inner = body.section.depth / 2 - body.section.flange
    for y in (-inner, inner):
        dash = "solid" if body.build == "twin channels" else "dashed"
        paper.line(view.at(0.0, y), view.at(length, y), weight=HATCH, dash=dash, order=3.1)  # type: ignore[arg-type]


def _spacers(paper: Paper, view: View, part: PartFacts) -> None:
    """Spacers between the profiles, hidden behind the one that is seen."""
    pivot = next(hole for hole in part.holes if hole.hole == "pivot").along
    size = part.body.spacer.tube / 2
    for u in part.body.spacers:
        turn = np.linspace(0.0, 2 * np.pi, 25)
        ring = np.column_stack([pivot + u + size * np.cos(turn), size * np.sin(turn)])
        paper.path(view.points(ring), weight=HATCH, dash="dashed", order=4.0)


def _centre(paper: Paper, view: View, part: PartFacts) -> None:
    """The centre of mass: a quartered disc under the steel, below its place."""
    pivot = next(hole for hole in part.holes if hole.hole == "pivot").along
    x = view.x(pivot + part.mass.u)
    y = view.y(-part.body.section.depth / 2) - 2.6
    centre_symbol(paper, x, y, 1.3)
    paper.line((x, y + 1.3), (x, view.low), weight=HATCH, order=4.0)


def centre_symbol(paper: Paper, x: float, y: float, radius: float) -> None:
    """Draw a centre of mass: a disc with two black quarters."""
    paper.circle(x, y, radius, THIN, order=5.0)
    for start in (0.0, np.pi):
        turn = np.linspace(start, start + np.pi / 2, 7)
        arc = [(x + radius * float(np.cos(t)), y + radius * float(np.sin(t))) for t in turn]
        paper.fill((x, y), *arc)


def _dimensions(paper: Paper, view: View, side: Box, part: PartFacts, length: float, sizes: Sizes) -> None:
    """Running dimensions from the datum end above the steel; its depth at the right."""
    top = view.y(part.body.section.depth / 2)
    features = [(view.x(0.0), "0", top)]
    for hole in part.holes:
        features.append((view.x(hole.along), sizes.length(hole.along), view.low + hole.diameter / 2 * view.mm + 1.2))
    features.append((view.x(length), sizes.length(length), top))
    running_row(paper, features, top + 3.0, 1.0, (side.left - 3.0, side.right + 1.0))
    right = view.x(length)
    start, end = (right, view.y(-part.body.section.depth / 2)), (right, top)
    distance(paper, start, end, sizes.length(part.body.section.depth), 6.0)


def _hole_labels(paper: Paper, view: View, side: Box, part: PartFacts, sizes: Sizes) -> None:
    """Name, diameter and pin of each hole below the steel, and the datum under its end."""
    bottom = view.y(-part.body.section.depth / 2)
    upper = max(side.low + 7.6, bottom - 12.0)
    labels = [("datum", "", view.x(0.0), bottom)]
    for hole in part.holes:
        pin = part.pins.get(hole.hole, "")
        labels.append((_name(hole, pin), sizes.hole(hole.diameter), view.x(hole.along), view.low))
    room = side.left - 3.0, side.right + 2.0
    widths = _label_widths(labels)
    if sum(widths) > room[1] - room[0]:  # those of spacers are in the notes as well
        labels = [label for label in labels if not label[0].startswith("spacer")]
        widths = _label_widths(labels)
    middles = _row([x for _, _, x, _ in labels], widths, *room)
    for (name, size, x, y), at in zip(labels, middles, strict=True):
        paper.text(at, upper, name, BODY, ha="center", bold=name == "datum")
        paper.text(at, upper - 3.4, size, BODY, ha="center")
        foot = upper + 1.8
        if name == "datum":
            paper.fill((x, y), (x - 1.3, y - 2.2), (x + 1.3, y - 2.2))
            paper.line((at, foot), (x, y - 2.2), weight=HATCH)
        else:
            paper.line((at, foot), (x, y), weight=HATCH, order=4.7)


def _label_widths(labels: list[tuple[str, str, float, float]]) -> list[float]:
    return [max(text_width(name, BODY), text_width(size, BODY)) + 2.0 for name, size, _, _ in labels]


def _name(hole: DrillRow, pin: str) -> str:
    return f"{hole.hole}, pin {pin}" if pin else hole.hole


def _row(wanted: list[float], widths: list[float], low: float, high: float) -> list[float]:
    """Return middles of labels beside one another, near the wanted ones, between low and high where they fit."""
    # places of their left edges, each moved back by the widths before it: then they only have to rise
    before = np.concatenate([[0.0], np.cumsum(widths)[:-1]])
    lefts = [x - w / 2 - b for x, w, b in zip(wanted, widths, before, strict=True)]
    moved = np.array(spread(lefts, 0.0, low, high - float(sum(widths))))
    return [float(m + b + w / 2) for m, b, w in zip(moved, before, widths, strict=True)]
