"""Pads, links, levers, plates, cells and jacks as they are seen from the side, each at its true height and size.

What is nearer to the reader is drawn later and hides what is behind it.
"""

from __future__ import annotations

import numpy as np

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.hardware.model import End, Link
from rigdesign.levers.model import Piece
from rigdesign.report.sheets.paper import HATCH, MEDIUM, THIN, Paper
from rigdesign.report.sheets.steel import (
    depth_of,
    direction,
    footprints,
    height_of,
    place_of,
    reach_along_x,
)
from rigdesign.report.sheets.views import View
from rigdesign.target.curve import Floats

_LEAST_ASLANT = 0.12
"""A hole that is seen more aslant than this is only a line and left out."""


def draw_pads(paper: Paper, view: View, result: HardwareCheck) -> None:
    """Draw every pad: a base as long as its footprint, and lugs that hold its pin."""
    hardware = result.hardware
    for pad, corners in zip(hardware.pads, footprints(result), strict=True):
        x, y = place_of(hardware, f"pad {pad.pad}", "")
        low, high = float(corners[:, 0].min()), float(corners[:, 0].max())
        end = hardware.link_above[f"pad {pad.pad}"].lower
        base = min(0.3 * pad.height, 0.025)
        radius = min(max(end.radius, 0.6 * end.pin), 0.45 * (high - low))
        order = 3.0 + near(result, y)
        bottom, top = pad.surface, pad.surface + base
        _block(paper, view, (low, high), (bottom, top), order)
        foot = min(2.2 * radius, 0.48 * (high - low))
        lugs = [(x - foot, top), (x + foot, top), (x + radius, pad.pin_height), (x - radius, pad.pin_height)]
        paper.shape(_rounded(view, lugs, x, pad.pin_height, radius), THIN, order=order)
        paper.circle(*view.at(x, pad.pin_height), end.pin / 2 * view.mm, THIN, order=order + 0.01)


def near(result: HardwareCheck, y: float) -> float:
    """Return a part of an order of drawing for y [m]: what is nearer to the reader lies over the rest."""
    spread = float(np.ptp(result.check.rig.pad_y)) or 1.0
    middle = float(result.check.rig.pad_y.mean())
    towards = -1.0 if result.check.rig.plan.target.brief.specimen.gravity < 0 else 1.0
    return 0.4 * float(np.tanh(towards * (y - middle) / spread)) + 0.4


def _block(
    paper: Paper, view: View, x: tuple[float, float], h: tuple[float, float], order: float, weight: float = THIN
) -> None:
    corners = [(x[0], h[0]), (x[1], h[0]), (x[1], h[1]), (x[0], h[1])]
    paper.shape(view.points(corners), weight, order=order)


def _rounded(view: View, base: list[tuple[float, float]], x: float, h: float, radius: float) -> Floats:
    """A shape whose last two corners are joined by a half circle about x, h."""
    turn = np.linspace(0.0, np.pi, 13)
    arc = np.column_stack([x + radius * np.cos(turn), h + radius * np.sin(turn)])
    return view.points(np.concatenate([np.array(base[:2]), arc]))


def draw_links(paper: Paper, view: View, result: HardwareCheck, links: tuple[Link, ...]) -> None:
    """Draw links: rod, strap or webbing with its fittings at both ends, and the adjuster in its middle."""
    for link in links:
        upper = place_of(result.hardware, link.upper.to, link.upper.at)
        lower = place_of(result.hardware, link.lower.to, link.lower.at)
        high, low = height_of(result.hardware, link.upper.to), height_of(result.hardware, link.lower.to)
        draw_link(paper, view, link, (upper[0], high), (lower[0], low), 2.5 + near(result, lower[1]))


def draw_stub(
    paper: Paper,
    view: View,
    link: Link,
    upper: tuple[float, float],
    lower: tuple[float, float],
    upwards: bool,
    order: float,
) -> None:
    """Draw the part of a link next to a tier: its upper part where the link goes down, its lower where it goes up.

    The far end is broken off.
    """
    half = max(link.width / 2, 0.35 / view.mm)
    strip = [(upper[0] - half, upper[1]), (upper[0] + half, upper[1]), (lower[0] + half, lower[1]),
             (lower[0] - half, lower[1])]  # fmt: skip
    paper.shape(view.points(strip), THIN, order=2.5 + order)
    _fitting(paper, view, link.lower if upwards else link.upper, lower if upwards else upper, 2.5 + order)
    x, y = view.at(*(upper if upwards else lower))
    wide = half * view.mm + 0.9
    paper.path([(x - wide, y - 0.5), (x - 0.3 * wide, y + 0.3), (x + 0.3 * wide, y - 0.3), (x + wide, y + 0.5)],
               weight=THIN, order=4.4)  # fmt: skip


def draw_link(
    paper: Paper, view: View, link: Link, upper: tuple[float, float], lower: tuple[float, float], order: float
) -> None:
    """Draw one link between two pins [m]; fittings in front of a lever lie over it."""
    half = max(link.width / 2, 0.35 / view.mm)
    along = np.array([lower[0] - upper[0], lower[1] - upper[1]])
    length = float(np.hypot(*along)) or 1.0
    along = along / length
    left = np.array([-along[1], along[0]])
    start, end = np.asarray(upper), np.asarray(lower)
    strip = [start + half * left, end + half * left, end - half * left, start - half * left]
    paper.shape(view.points(strip), HATCH if link.kind == "webbing" else THIN, order=order)
    if link.adjust > 0 and link.kind == "rod":
        _body(paper, view, (start + end) / 2, along, left, (min(6 * link.width, 0.4 * length), 1.5 * half), order)
    for fitting, place in ((link.upper, upper), (link.lower, lower)):
        _fitting(paper, view, fitting, place, order)
    paper.line(view.at(*upper), view.at(*lower), weight=HATCH, dash="chain", order=order + 0.02)


def _body(
    paper: Paper, view: View, middle: Floats, along: Floats, left: Floats, size: tuple[float, float], order: float
) -> None:
    """The body of an adjuster: a box about the middle of its link."""
    length, half = size
    corners = [
        middle - length / 2 * along + half * left, middle + length / 2 * along + half * left,
        middle + length / 2 * along - half * left, middle - length / 2 * along - half * left,
    ]  # fmt: skip
    paper.shape(view.points(corners), THIN, order=order + 0.005)


def _fitting(paper: Paper, view: View, end: End, place: tuple[float, float], order: float) -> None:
    if end.fitting == "stud":
        thick = max(end.inner, 0.01)
        for way in (-1.0, 1.0):  # nut and spherical washer on both faces of the plate
            height = place[1] + way * (thick / 2 + 0.4 * end.pin)
            x = place[0] - end.radius, place[0] + end.radius
            _block(paper, view, x, (height - 0.4 * end.pin, height + 0.4 * end.pin), 4.5)
        return
    front = 4.2 if end.fitting in ("fork", "loop") else order + 0.01
    paper.circle(*view.at(*place), end.radius * view.mm, THIN, order=front)
    paper.circle(*view.at(*place), end.pin / 2 * view.mm, THIN, order=front + 0.01)


def draw_pieces(paper: Paper, view: View, result: HardwareCheck, pieces: tuple[Piece, ...]) -> None:
    """Draw levers and plates at their heights with the holes that are seen."""
    for piece in pieces:
        hardware = result.hardware
        x, depth, height = reach_along_x(hardware, piece), depth_of(hardware, piece), hardware.heights[piece.name]
        order = 3.0 + near(result, min(hole.y for hole in piece.holes))
        _block(paper, view, x, (height - depth / 2, height + depth / 2), order, MEDIUM)
        body = hardware.bodies[piece.name]
        if piece.kind == "plate":
            continue
        squeeze = abs(direction(piece)[0])
        if body.build == "twin channels":
            for way in (-1.0, 1.0):
                edge = height + way * (depth / 2 - body.section.flange)
                paper.line(view.at(x[0], edge), view.at(x[1], edge), weight=HATCH, order=order + 0.01)
        if squeeze > _LEAST_ASLANT:
            for hole in piece.holes:
                end = hardware.end_at(piece.name, hole.name)
                at = view.at(hole.x, height)
                paper.circle(*at, end.hole / 2 * view.mm, THIN, order=order + 0.02, squeeze=squeeze)
        paper.line(view.at(x[0] - 0.01, height), view.at(x[1] + 0.01, height), weight=HATCH, dash="chain", order=4.6)


def draw_stacks(paper: Paper, view: View, result: HardwareCheck) -> None:
    """Draw cell and jack of every tree from the lower pin of the cell to the upper pin of the jack."""
    for stack in result.hardware.stacks:
        x, _ = place_of(result.hardware, stack.jack, "")
        low = result.hardware.heights[stack.jack]
        joint = low + stack.cell.length
        top = joint + stack.machine.standing
        half = 0.28 * stack.cell.length
        _block(paper, view, (x - half, x + half), (low + 0.2 * stack.cell.length, joint - 0.2 * stack.cell.length), 3.9)
        wide, rod = 0.12 * stack.machine.standing, 0.05 * stack.machine.standing
        split = joint + 0.25 * stack.machine.standing
        _block(paper, view, (x - rod, x + rod), (joint, split), 3.8)
        _block(paper, view, (x - wide, x + wide), (split, top), 3.9, MEDIUM)
        for pin, height in ((stack.cell.pin, low), (stack.machine.pin, joint), (stack.machine.pin, top)):
            paper.circle(*view.at(x, height), 0.9 * pin * view.mm, THIN, order=4.0)
            paper.circle(*view.at(x, height), 0.5 * pin * view.mm, THIN, order=4.1)
        _anchor(paper, view, x, top, max(2.5 * wide, 0.05))


def _anchor(paper: Paper, view: View, x: float, height: float, half: float) -> None:
    """The structure that a jack hangs on or stands on: a hatched strip beyond its upper pin."""
    left, right = view.x(x - half), view.x(x + half)
    near = view.y(height) + view.rise * 1.2
    far = near + view.rise * 2.5
    paper.shape(((left, near), (right, near), (right, far), (left, far)), HATCH, hatch="/////", order=3.0)
    paper.line((left, near), (right, near), weight=MEDIUM)
