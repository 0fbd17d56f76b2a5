"""The section of a lever at its pivot, seen along the lever: profiles, gap, pin, and the link's fitting."""

from __future__ import annotations

import numpy as np

from rigdesign.hardware.model import Body, End
from rigdesign.report.sheets.dimensions import distance
from rigdesign.report.sheets.paper import HATCH, MEDIUM, SMALL, THIN, Box, Paper
from rigdesign.report.sheets.part_facts import PartFacts
from rigdesign.report.sheets.sizes import Sizes, round_scale, scale_words
from rigdesign.report.sheets.views import View
from rigdesign.target.curve import Floats

_STEEL = "//////"


def draw_section(paper: Paper, room: Box, part: PartFacts, sizes: Sizes) -> None:
    """Draw the section into its room, with thickness, gap and overall width below it."""
    body, end = part.body, part.pivot_end
    half_depth = body.section.depth / 2
    wide = max(body.across, end.pin_length) * 1.12
    high = 2 * max(half_depth, end.radius)
    below, above = 15.0, 6.0
    ratio = round_scale(1000.0 * max(wide / (room.width - 8.0), high / (room.height - below - above)))
    view = View(ratio, room.left + room.width / 2, room.low + below + (room.height - below - above) / 2, 0.0, 0.0)
    _fitting(paper, view, body, end)
    for profile in profile_outlines(body):
        _cut(paper, view, profile, end.hole / 2)
    _pin(paper, view, end)
    paper.line(view.at(0.0, -half_depth - 1.6 / view.mm), view.at(0.0, half_depth + 1.6 / view.mm), weight=HATCH,
               dash="chain", order=6.0)  # fmt: skip
    _dimensions(paper, view, body, sizes)
    paper.text(room.left + room.width / 2, room.high - 1.5, f"section at the pivot {scale_words(ratio)}", SMALL,
               ha="center")  # fmt: skip


def profile_outlines(body: Body) -> list[Floats]:
    """Return closed outlines (n, 2) [m] of the steel across (first) and upright (second), each of sharp corners.

    A hollow section comes as its four walls, so that each can be hatched.
    """
    section = body.section
    h, g = section.depth / 2, body.gap / 2
    if body.build == "twin flats":
        right = _rectangle(g, g + section.width, -h, h)
        return [right, right * [-1.0, 1.0]]
    if body.build == "twin channels":
        w, t, f = section.width, section.web, section.flange
        right = np.array([
            (g, -h), (g + w, -h), (g + w, -h + f), (g + t, -h + f), (g + t, h - f), (g + w, h - f), (g + w, h), (g, h)
        ])  # fmt: skip
        return [right, right * [-1.0, 1.0]]
    w, t = section.width / 2, section.web
    walls = [_rectangle(-w, -w + t, -h, h), _rectangle(w - t, w, -h, h),
             _rectangle(-w + t, w - t, -h, -h + t), _rectangle(-w + t, w - t, h - t, h)]  # fmt: skip
    if body.side_plate:
        side = _rectangle(w, w + body.side_plate, -h, h)
        walls += [side, side * [-1.0, 1.0]]
    return walls


def _rectangle(left: float, right: float, low: float, high: float) -> Floats:
    return np.array([(left, low), (right, low), (right, high), (left, high)])


def _cut(paper: Paper, view: View, outline: Floats, radius: float) -> None:
    """Steel that is cut: hatched, its hole in white behind the pin."""
    points = view.points(outline)
    paper.shape(points, MEDIUM, hatch=_STEEL, order=3.0)
    left, right = float(points[:, 0].min()), float(points[:, 0].max())
    low, high = float(points[:, 1].min()), float(points[:, 1].max())
    if low < view.y(0.0) < high and high - low > 2 * radius * view.mm:
        edge = radius * view.mm
        middle = view.y(0.0)
        if outline.shape[0] == 8:  # of a channel only the web is drilled
            web = abs(float(points[4, 0]) - float(points[0, 0]))
            left, right = (left, left + web) if points[0, 0] < points[1, 0] else (right - web, right)
        corners = ((left, middle - edge), (right, middle - edge), (right, middle + edge), (left, middle + edge))
        paper.shape(corners, THIN, order=3.1)


def _fitting(paper: Paper, view: View, body: Body, end: End) -> None:
    """The link's eye between the profiles, or its cheeks outside: not part of the lever, so in phantom lines."""
    if end.fitting == "fork":
        inner = body.across / 2 + end.gap
        for way in (-1.0, 1.0):
            low, high = sorted((way * inner, way * (inner + end.outer)))
            _phantom(paper, view, low, high, end.radius)
        return
    half = end.inner / 2
    _phantom(paper, view, -half, half, end.radius)


def _phantom(paper: Paper, view: View, left: float, right: float, radius: float) -> None:
    corners = _rectangle(left, right, -radius, radius)
    paper.path(view.points(np.concatenate([corners, corners[:1]])), weight=HATCH, dash="phantom", order=2.8)


def _pin(paper: Paper, view: View, end: End) -> None:
    half, radius = end.pin_length / 2, end.pin / 2
    paper.shape(view.points(_rectangle(-half, half, -radius, radius)), THIN, order=3.6)
    paper.line(view.at(-half - 2 / view.mm, 0.0), view.at(half + 2 / view.mm, 0.0), weight=HATCH, dash="chain",
               order=3.8)  # fmt: skip


def _dimensions(paper: Paper, view: View, body: Body, sizes: Sizes) -> None:
    """Thickness above; gap and overall width below."""
    half = body.section.depth / 2
    low, high = view.y(-half), view.y(half)
    across = body.across / 2
    wall = body.section.web if body.build != "twin flats" else body.section.width
    outer = body.gap / 2 + wall if body.profiles == 2 else body.section.width / 2
    distance(paper, (view.x(outer - wall), high), (view.x(outer), high), sizes.length(wall), 2.6)
    if body.profiles == 2:
        distance(paper, (view.x(-body.gap / 2), low), (view.x(body.gap / 2), low), sizes.length(body.gap), -5.5)
    distance(paper, (view.x(-across), low), (view.x(across), low), sizes.length(2 * across), -11.5)
