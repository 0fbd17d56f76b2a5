"""The specimen as drawings show it: its loaded surface and how it is held, from the side and in plan."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.report.sheets.paper import HATCH, MEDIUM, OUTLINE, THIN, Paper
from rigdesign.report.sheets.views import View
from rigdesign.target.curve import Floats

DEPTH = 5.0
"""The strip that stands for the specimen is so deep on the paper [mm]: how deep it is, the brief does not say."""


def surface_line(brief: Brief, side: int) -> Floats:
    """Return the loaded surface seen from the side: x [m] and height [m], (n, 2), its lowest line where y counts."""
    specimen, given = brief.specimen, brief.hardware.surface
    left, right = specimen.left, specimen.right
    if given is None or given.x.size == 0:
        return np.array([[left, 0.0], [right, 0.0]])
    x, height = given.x, side * given.z
    if given.y.size:
        x = np.unique(given.x)
        height = np.array([float((side * given.z)[given.x == at].min()) for at in x])
    inside = x[(x > left) & (x < right)]
    places = np.concatenate([[left], inside, [right]])
    return np.column_stack([places, np.interp(places, x, height)])


def draw_side(paper: Paper, view: View, brief: Brief, side: int) -> float:
    """Draw the specimen from the side; return the paper's height of its far face [mm]."""
    line = view.points(surface_line(brief, side))
    far = line.copy()
    far[:, 1] -= view.rise * DEPTH
    paper.shape(np.concatenate([line, far[::-1]]), HATCH, order=1.5)
    paper.shape(np.concatenate([line, far[::-1]]), 0.0, fill="none", hatch="/////", order=1.6)
    paper.path(line, weight=OUTLINE, order=2.8)
    paper.path(far, weight=HATCH, dash="phantom", order=2.0)
    if not brief.specimen.supports:
        _clamp(paper, float(line[0, 0]), float(min(line[0, 1], far[0, 1])))
    for station in brief.specimen.supports:
        height = float(np.interp(view.x(station), far[:, 0], far[:, 1]))
        _support(paper, view.x(station), height, view.rise)
    return float(far[:, 1].min() if view.rise > 0 else far[:, 1].max())


def _clamp(paper: Paper, x: float, low: float) -> None:
    """How a cantilever is held at its root."""
    corners = ((x - 3.5, low - 3.0), (x, low - 3.0), (x, low + DEPTH + 3.0), (x - 3.5, low + DEPTH + 3.0))
    paper.shape(corners, 0.0, fill="none", hatch="\\\\\\\\", order=2.0)
    paper.line(corners[1], corners[2], weight=OUTLINE)


def _support(paper: Paper, x: float, y: float, rise: float) -> None:
    """A support on the far side of the specimen."""
    foot = y - rise * 3.6
    paper.shape(((x, y), (x - 2.2, foot), (x + 2.2, foot)), THIN, order=2.9)
    paper.line((x - 3.4, foot), (x + 3.4, foot), weight=MEDIUM)


def draw_plan(paper: Paper, view: View, brief: Brief) -> None:
    """Draw the specimen in plan in phantom lines, its outline or its ends, and its reference axis."""
    specimen = brief.specimen
    if specimen.outline is not None:
        corners = np.column_stack([specimen.outline.x, specimen.outline.y])
        paper.path(view.points(np.concatenate([corners, corners[:1]])), weight=THIN, dash="phantom")
        axis = specimen.reference_axis
        paper.path(view.points(np.column_stack([axis.x, axis.y])), weight=HATCH, dash="chain")
    else:
        half = max(0.75 * (brief.pads.width or brief.pads.length), 0.05)
        corners = np.array([[specimen.left, -half], [specimen.right, -half], [specimen.right, half],
                            [specimen.left, half], [specimen.left, -half]])  # fmt: skip
        paper.path(view.points(corners), weight=THIN, dash="phantom")
        paper.line(view.at(specimen.left, 0.0), view.at(specimen.right, 0.0), weight=HATCH, dash="chain")
    _held(paper, view, brief)


def _held(paper: Paper, view: View, brief: Brief) -> None:
    """Where the specimen is held, as lines across it in plan."""
    specimen = brief.specimen
    if specimen.outline is not None:
        low, high = float(specimen.outline.y.min()), float(specimen.outline.y.max())
    else:
        half = max(0.75 * (brief.pads.width or brief.pads.length), 0.05)
        low, high = -half, half
    for station in specimen.supports or (specimen.left,):
        x = view.x(station)
        bottom, top = sorted((view.y(low), view.y(high)))
        paper.line((x, bottom - 2.0), (x, top + 2.0), weight=MEDIUM, dash="dashed")
