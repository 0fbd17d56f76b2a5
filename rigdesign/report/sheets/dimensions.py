"""Dimensions: running rows from one datum, columns of heights, single distances, and labels with their leaders."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from rigdesign.report.figures_sheet import spread
from rigdesign.report.sheets.paper import BODY, HATCH, THIN, Paper, Point
from rigdesign.report.sheets.texts import text_height, text_width

ELBOW = 2.6
"""Room in which a line goes aside to a text that had to move [mm]."""
GAP = 0.8
"""Clear paper between an edge and its extension line, and between a line and its text [mm]."""


def running_row(
    paper: Paper, features: Sequence[tuple[float, str, float]], line: float, way: float, edges: tuple[float, float],
    datum: bool = True, size: float = BODY,
) -> float:  # fmt: skip
    """Draw running dimensions along the paper: each feature its place, its text, and from where its line starts.

    The dimension line lies at `line` [mm], the texts stand upright beyond it, upwards for `way` +1, and within `edges`;
    with `datum` the first feature is where the dimensions start from.  Return how far beyond the line the texts reach.
    """
    order = sorted(features)
    apart = spread([place for place, _, _ in order], text_height(size) + 0.35, edges[0] + 1.5, edges[1] - 1.5)
    paper.line((order[0][0], line), (order[-1][0], line), weight=HATCH)
    for k, ((place, words, start), at) in enumerate(zip(order, apart, strict=True)):
        moved = abs(at - place) > 0.3
        _extension(paper, (place, start + way * GAP), (place, line + way * 0.8))
        if moved:
            paper.line((place, line + way * 0.8), (at, line + way * (ELBOW - 0.4)), weight=HATCH)
        foot = line + way * (ELBOW if moved else 1.4)
        paper.text(at, foot, words, size, ha="center", va="bottom" if way > 0 else "top", upright=True)
        if datum and k == 0:
            paper.circle(place, line, 0.9, THIN)
        else:
            paper.arrow((place, line), 0.0, 1.8)
    longest = max(text_width(words, size) for _, words, _ in order)
    return ELBOW + longest


def height_column(
    paper: Paper, features: Sequence[tuple[float, str, float]], line: float, edges: tuple[float, float], zero: float
) -> None:
    """Draw heights up the paper: each feature its place, its text and where its line starts; `zero` is the datum."""
    order = sorted(features)
    apart = spread([place for place, _, _ in order], text_height(BODY) + 0.3, edges[0] + 1.5, edges[1] - 1.5)
    places = [place for place, _, _ in order]
    paper.line((line, min(places)), (line, max(places)), weight=HATCH)
    for (place, words, start), at in zip(order, apart, strict=True):
        _extension(paper, (start + GAP, place), (line + 0.8, place))
        if abs(at - place) > 0.3:
            paper.line((line + 0.8, place), (line + ELBOW - 0.4, at), weight=HATCH)
        paper.text(line + ELBOW, at, words, BODY)
        if abs(place - zero) < 1e-6:
            paper.circle(line, place, 0.9, THIN)
        else:
            paper.arrow((line, place), np.pi / 2 if place > zero else -np.pi / 2, 1.8)


def _extension(paper: Paper, start: Point, end: Point) -> None:
    """A line from a feature to its dimension; later labels keep off it."""
    paper.line(start, end, weight=HATCH)
    paper.keep_off([start, end])


def distance(paper: Paper, start: Point, end: Point, words: str, off: float, size: float = BODY) -> None:
    """Draw one distance between two points of one height or one place across, `off` [mm] above, or to the right.

    Where the text does not fit between the arrows they point inwards, and the text stands beyond the end.
    """
    flat = abs(start[1] - end[1]) <= abs(start[0] - end[0])
    a, b = (start, end) if (start[0], start[1]) <= (end[0], end[1]) else (end, start)
    line = (max(a[1], b[1]) if off > 0 else min(a[1], b[1])) + off if flat else max(a[0], b[0]) + off
    low, high = (a[0], b[0]) if flat else (a[1], b[1])
    way = np.sign(off)

    def at(along: float, across: float) -> Point:
        return (along, across) if flat else (across, along)

    for point in (a, b):
        along, across = (point[0], point[1]) if flat else (point[1], point[0])
        paper.line(at(along, across + way * GAP), at(along, line + way * 1.0), weight=HATCH)
    wide = text_width(words, size)
    turn = 0.0 if flat else np.pi / 2
    inside = high - low > 5.0
    paper.line(at(low - (0 if inside else 4.0), line), at(high + (0 if inside else 4.0), line), weight=HATCH)
    paper.arrow(at(low, line), turn + (np.pi if inside else 0.0), 1.8)
    paper.arrow(at(high, line), turn + (0.0 if inside else np.pi), 1.8)
    if high - low > wide + 1.0:
        middle = at((low + high) / 2, line + (1.6 if flat else -1.6))
        paper.text(*middle, words, size, ha="center", upright=not flat)
    else:
        beyond = at(high + (4.6 if not inside else 1.0) + wide / 2, line)
        paper.text(*beyond, words, size, ha="center", upright=not flat)


def leader(paper: Paper, target: Point, label: Point, words: str, size: float = BODY) -> None:
    """Write words at a label's place, underlined by a shelf from which a thin line with an arrow goes to its target."""
    wide = text_width(words, size)
    left = label[0] >= target[0]
    foot = label if left else (label[0] + wide, label[1])
    paper.text(label[0], label[1] + 0.4, words, size, va="bottom")
    paper.line((label[0], label[1]), (label[0] + wide, label[1]), weight=HATCH)
    paper.line(foot, target, weight=HATCH)
    paper.arrow(target, float(np.arctan2(target[1] - foot[1], target[0] - foot[0])), 1.8)
