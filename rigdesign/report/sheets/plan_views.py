"""Levers, plates, links and pads in plan, with hidden lines: what lies beneath other steel is dashed.

The reader is at the side of +z.  What is nearer hides what is farther; each outline is cut where it is covered.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence

import numpy as np
from shapely import LineString, Polygon, union_all
from shapely.geometry.base import BaseGeometry

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.hardware.model import Hardware
from rigdesign.levers.model import Piece
from rigdesign.report.sheets.paper import HATCH, MEDIUM, THIN, Paper
from rigdesign.report.sheets.steel import bars, ends_of, footprints, in_plan
from rigdesign.report.sheets.views import View
from rigdesign.target.curve import Floats

_SHORTEST = 0.25
"""Stretches of lines shorter than this on the paper [mm] are not drawn."""


def draw_plan(paper: Paper, view: View, result: HardwareCheck, pieces: Iterable[Piece], pads: Sequence[int]) -> None:
    """Draw pieces and the footprints of pads (rows counted from 0), the nearest to the reader first."""
    hardware = result.hardware
    cover: BaseGeometry = Polygon()
    feet = [Polygon(view.points(corners)) for k, corners in enumerate(footprints(result)) if k in set(pads)]
    levels = _levels(hardware, pieces)
    if hardware.side < 0:
        cover = _outlines(paper, feet, cover, THIN)
    for group in levels:
        shapes = [Polygon(view.points(bar)) for piece in group for bar in bars(hardware, piece)]
        before = cover
        cover = _outlines(paper, shapes, cover, _weight(view, hardware, group))
        for piece in group:
            _details(paper, view, hardware, piece, before)
    if hardware.side > 0:
        _outlines(paper, feet, cover, THIN)


def _levels(hardware: Hardware, pieces: Iterable[Piece]) -> list[list[Piece]]:
    """Pieces by their height, the nearest to the reader first."""
    groups: dict[float, list[Piece]] = {}
    for piece in pieces:
        groups.setdefault(round(hardware.heights[piece.name] * hardware.side, 6), []).append(piece)
    return [groups[z] for z in sorted(groups, reverse=True)]


def _weight(view: View, hardware: Hardware, pieces: Sequence[Piece]) -> float:
    """The width of outlines that leaves white between both edges of the thinnest steel [mm]."""
    thin = min(
        hardware.bodies[piece.name].section.width * view.mm if piece.kind == "lever" else 9.0 for piece in pieces
    )
    return next((weight for weight in (MEDIUM, THIN) if thin > 2.4 * weight), HATCH)


def _outlines(paper: Paper, shapes: Sequence[Polygon], cover: BaseGeometry, weight: float) -> BaseGeometry:
    """Draw outlines, dashed where covered; return what is covered with these shapes."""
    for shape in shapes:
        _stroke(paper, shape.exterior, cover, weight)
    return union_all([cover, *shapes]) if shapes else cover


def _stroke(paper: Paper, line: BaseGeometry, cover: BaseGeometry, weight: float) -> None:
    """Draw a line, dashed and thin where it is covered."""
    if cover.is_empty or not cover.intersects(line):
        for points in _paths(line):
            paper.path(points, weight=weight, order=3.0)
        return
    for points in _paths(line.difference(cover)):
        paper.path(points, weight=weight, order=3.0)
    for points in _paths(line.intersection(cover)):
        paper.path(points, weight=HATCH, dash="dashed", order=2.5)


def _paths(line: BaseGeometry) -> Iterator[Floats]:
    """The stretches of a line that are long enough to be drawn, (n, 2) each."""
    for part in getattr(line, "geoms", [line]):
        if part.geom_type in ("LineString", "LinearRing") and part.length > _SHORTEST:
            yield np.asarray(part.coords)


def _details(paper: Paper, view: View, hardware: Hardware, piece: Piece, cover: BaseGeometry) -> None:
    """Centre line and pins of a lever, holes of a plate, where they are not covered."""
    if piece.kind == "plate":
        for hole in piece.holes:
            radius = max(hardware.end_at(piece.name, hole.name).hole / 2 * view.mm, 0.3)
            turn = np.linspace(0.0, 2 * np.pi, 17)
            at = view.at(hole.x, hole.y)
            ring = np.column_stack([at[0] + radius * np.cos(turn), at[1] + radius * np.sin(turn)])
            _stroke(paper, LineString(ring), cover, THIN)
        return
    low, high = ends_of(hardware, piece)
    reach = 2.0 / view.mm
    axis = view.points(in_plan(piece, np.array([low - reach, high + reach]), np.zeros(2)))
    paper.path(axis, weight=HATCH, dash="chain", order=2.0)
    across = hardware.bodies[piece.name].across
    for hole in piece.holes:
        half = across / 2 + hardware.end_at(piece.name, hole.name).pin
        pin = view.points(in_plan(piece, np.array([hole.u, hole.u]), np.array([-half, half])))
        for points in _paths(LineString(pin).difference(cover)):
            paper.path(points, weight=THIN, order=3.1)
