"""The target of a surface in plan, alone with its V, M and T, and with the pads that bring it."""

from __future__ import annotations

from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.lines import Line2D

from rigdesign.brief.model import Quantity
from rigdesign.checks.model import Check
from rigdesign.display import System
from rigdesign.report import figures_parts
from rigdesign.report.figures_parts import MARK
from rigdesign.report.figures_sheet import A3, BLUE, INK, new_sheet, panel, styled, text_width
from rigdesign.report.scales import scale
from rigdesign.report.surface import ground, pieces, pressure_map
from rigdesign.report.surface.frame import Frame, fitted, plan_panel
from rigdesign.report.surface.labels import Board
from rigdesign.target.model import Target
from rigdesign.target.plan_load import ALONG_X

LEFT, RIGHT, HEAD = 22.0, 32.0, 26.0
"""Margins of the sheet beside and above the drawing [mm]; the bar of the pressure stands at the right."""
BELOW = 84.0
"""Least height of what stands under the drawing: axis, key, curves or bars of the forces, and the caution [mm]."""
LOWEST = 20.0
"""Height of the lower edge of curves and bars [mm]."""
MOST_NUMBERS = 40
"""Force and share are written at the pads up to so many of them."""
FONT = 6.2
"""Size of force and share at the pads [pt]."""
BORDER = 1e-6
"""Borders between pads that differ by less than this part of the span are one."""
STEPS = 600
_SYMBOL: dict[Quantity, str] = {"shear": "V", "moment": "M", "torsion": "T"}


@styled
def target_in_plan(target: Target, system: System = "SI") -> Figure:
    """Return the picture of a surface's target: its loads in plan with the resultant, V, M and T beneath."""
    figure = new_sheet(A3, f"{target.brief.title}: the target", target_words(target, system))
    frame = _frame(target)
    axes, board, handles = _loads(figure, frame, target, system)
    _resultant(axes, frame, board, target, system)
    handles += pressure_map.draw_points(axes, frame, board, target.brief, system)
    _key(figure, frame, handles)
    width = (A3[0] - LEFT - 12.0 - 2 * 22.0) / 3
    for k, quantity in enumerate(_SYMBOL):
        place = LEFT + k * (width + 22.0), LOWEST, width, _height(frame)
        _internal(panel(figure, *place), target, quantity, system)
    return figure


@styled
def load_and_pads_in_plan(check: Check, system: System = "SI") -> Figure:
    """Return the picture of the net load in plan with the pads' tributary areas, forces and shares."""
    rig, target = check.rig, check.rig.plan.target
    figure = new_sheet(A3, f"{target.brief.title}: load and pads", target_words(target, system))
    frame = _frame(target)
    axes, board, handles = _loads(figure, frame, target, system)
    handles += _cells(axes, frame, board, check)
    handles += pieces.footprints(axes, frame, target.brief, rig.pad_x, rig.pad_y)
    marks = _pads(axes, frame, board, check)
    handles += pressure_map.draw_points(axes, frame, board, target.brief, system)
    if rig.plan.n_pads <= MOST_NUMBERS:
        _numbers(axes, board, check, marks, system)
    _key(figure, frame, handles)
    _bars(panel(figure, LEFT, LOWEST, A3[0] - LEFT - 12.0, _height(frame)), check, system)
    return figure


def target_words(target: Target, system: System) -> str:
    """Return resultant and place of a surface's target in one line."""
    force, place = scale("force", abs(target.resultant), system), scale("length", 1.0, system)
    way = "+z" if target.resultant > 0 else "−z"
    return (
        f"resultant {force.show(abs(target.resultant))} {force.unit} along {way} at x = {place.show(target.centroid)}, "
        f"y = {place.show(target.centroid_y)} {place.unit}; forces at the brief's load, the test goes to "
        f"{100 * target.brief.peak:.4g} % of it; x to the right, y up, z towards the reader"
    )


def _frame(target: Target) -> Frame:
    return fitted(target.brief, LEFT, A3[1] - HEAD, A3[0] - LEFT - RIGHT, A3[1] - HEAD - BELOW)


def _height(frame: Frame) -> float:
    """Height of curves or bars under the drawing, its axis and its key [mm]."""
    return min(frame.low - 38.0 - LOWEST, 95.0)


def _loads(figure: Figure, frame: Frame, target: Target, system: System) -> tuple[Axes, Board, list[Any]]:
    """Draw outline and surroundings with all loads upon them; return what a key shows."""
    brief = target.brief
    axes = plan_panel(figure, frame, system)
    figure.texts[1].set_text(f"{figure.texts[1].get_text()}; scale 1 : {frame.ratio:g} on A3")
    board = Board(frame.left + 1.0, frame.low + 1.0, frame.left + frame.width - 1.0, frame.low + frame.height + 1.0)
    clip = ground.outline(axes, frame, brief, board)
    drawn, peak = pressure_map.draw_pressure(axes, frame, brief, clip, system)
    if drawn is not None:
        pressure_map.colour_bar(figure, frame, drawn, peak, system)
    handles = ground.surroundings(axes, frame, brief, board)
    handles += pressure_map.draw_lines(axes, frame, brief, system)
    return axes, board, handles


def _key(figure: Figure, frame: Frame, handles: list[Any]) -> None:
    figure.legend(
        handles=handles, loc="upper left", bbox_to_anchor=(LEFT / A3[0], (frame.low - 12.0) / A3[1]), ncols=4,
        fontsize=7, frameon=False, borderaxespad=0.0, handlelength=3.2, columnspacing=1.6, labelspacing=0.4,
    )  # fmt: skip


def _resultant(axes: Axes, frame: Frame, board: Board, target: Target, system: System) -> None:
    """Mark the place of the resultant, or say near the edge where it lies that it is beyond the drawing."""
    place = frame.at(target.centroid, target.centroid_y)
    inside = frame.nearest(*place)
    unit = scale("force", abs(target.resultant), system)
    words = f"resultant {unit.show(target.resultant)} {unit.unit}"
    if inside == place:
        axes.plot(*place, "X", color=INK, markeredgecolor="white", markersize=8, zorder=5)
        board.take(*place, 4.0, 4.0)
    else:
        words += ", beyond this drawing"
    at = board.place(*inside, text_width(words, 8.0), 3.6, 3.0)
    text = axes.text(*at, words, size=8, weight="bold", ha="center", va="center", zorder=6)
    text.set_bbox({"facecolor": "white", "edgecolor": "none", "pad": 0.4, "alpha": 0.75})


def _internal(axes: Axes, target: Target, quantity: Quantity, system: System) -> None:
    """Draw V, M or T of the target along the span with its peak."""
    specimen = target.brief.specimen
    even = np.linspace(specimen.left, specimen.right, STEPS)
    turning = target.total_plan.along(ALONG_X).turning
    breaks = np.concatenate([target.total.breaks, turning.breaks, specimen.supports, specimen.reference_axis.x])
    breaks = breaks[(breaks >= specimen.left) & (breaks <= specimen.right)]
    x = np.repeat(np.unique(np.concatenate([even, breaks])), 2)
    values = np.empty_like(x)
    values[0::2] = target.value(quantity, x[0::2], "inboard")
    values[1::2] = target.value(quantity, x[1::2], "outboard")
    peak = target.peaks[quantity]
    unit, place = scale("force" if quantity == "shear" else "moment", peak.value, system), scale("length", 1.0, system)
    axes.plot(x / place.size, values / unit.size, color=BLUE, linewidth=1.6)
    axes.axhline(0.0, color=INK, linewidth=0.8)
    axes.set_xlim(specimen.left / place.size, specimen.right / place.size)
    axes.set_ylabel(f"{_SYMBOL[quantity]} [{unit.unit}]", size=8)
    axes.set_xlabel(f"x [{place.unit}]", size=8, labelpad=1.5)
    words = f"peak {quantity} {unit.show(peak.value)} {unit.unit} at x = {place.show(peak.at)} {place.unit}"
    axes.set_title(words, size=7.5, loc="right", pad=2)


def _cells(axes: Axes, frame: Frame, board: Board, check: Check) -> list[Any]:
    """Draw the borders between the parts of the outline nearest to each pad, each border once."""
    import shapely

    from rigdesign.pads.surface.shares import cells

    rig = check.rig
    areas = cells(rig.plan.target, rig.pad_x, rig.pad_y)
    # neighbours find their common border each for itself: on a fine grid the two are one line
    specimen = rig.plan.target.brief.specimen
    fine = BORDER * (specimen.right - specimen.left)
    borders = shapely.union_all([area.boundary for area in areas if not area.is_empty], grid_size=fine)
    borders = shapely.line_merge(borders)
    style: Any = {"color": INK, "linewidth": 0.9, "linestyle": (0, (3, 2))}
    for line in shapely.get_parts(borders):
        points = frame.points(shapely.get_coordinates(line))
        axes.plot(points[:, 0], points[:, 1], zorder=2.05, **style)
        board.draw_line(points[:, 0], points[:, 1])
    return [Line2D([], [], label="border of what is nearest to a pad: its share of the load", **style)]


def _pads(axes: Axes, frame: Frame, board: Board, check: Check) -> list[tuple[float, float]]:
    """Draw the numbers of pads at their places, or beside where they crowd; return where the marks are [mm]."""
    rig = check.rig
    marks = []
    for k, (x, y) in enumerate(zip(rig.pad_x, rig.pad_y, strict=True)):
        place = frame.at(x, y)
        at = board.place(*place, MARK, MARK, covered=0.0)
        axes.plot(*place, ".", color=INK, markersize=3, zorder=3)
        pieces.leader(axes, place, at, MARK / 2)
        figures_parts.mark(axes, "pad", k + 1, *at)
        marks.append(at)
    return marks


def _numbers(axes: Axes, board: Board, check: Check, marks: list[tuple[float, float]], system: System) -> None:
    """Write the force of each pad and, in brackets, its share near its mark."""
    force, share = check.statics.pad_force, check.share_of_curve
    unit = scale("force", float(max(np.abs(force).max(), np.abs(share).max())), system)
    for k, place in enumerate(marks):
        words = f"{unit.show(float(force[k]))}\n({unit.show(float(share[k]))})"
        wide = max(text_width(line, FONT) for line in words.splitlines())
        at = board.place(*place, wide, 5.4, MARK / 2 + 0.3)
        pieces.leader(axes, place, at, wide)
        text = axes.text(*at, words, size=FONT, ha="center", va="center", zorder=6, linespacing=1.05)
        text.set_bbox({"facecolor": "white", "edgecolor": "none", "pad": 0.2, "alpha": 0.6})


def _bars(axes: Axes, check: Check, system: System) -> None:
    """Draw each pad's force as a bar and its share of the load as a step over it."""
    force, share = check.statics.pad_force, check.share_of_curve
    unit = scale("force", float(max(np.abs(force).max(), np.abs(share).max())), system)
    pads = np.arange(1, force.size + 1)
    axes.bar(
        pads, force / unit.size, width=0.7, color="#BBBBBB", edgecolor=INK, linewidth=0.5, label="force as drilled"
    )
    axes.hlines(
        share / unit.size,
        pads - 0.45,
        pads + 0.45,
        color=BLUE,
        linewidth=1.8,
        label="share: the net load nearest to it",
    )
    axes.axhline(0.0, color=INK, linewidth=0.8)
    axes.set_xlim(0.4, force.size + 0.6)
    step = max(1, -(-force.size // 60))
    axes.set_xticks([int(pad) for pad in pads[::step]])
    axes.set_xlabel("pad", size=8, labelpad=1.0)
    axes.set_ylabel(f"F [{unit.unit}]", size=8)
    axes.grid(False, axis="x")
    axes.legend(loc="lower left", bbox_to_anchor=(0.0, 1.0), ncols=2, fontsize=7, frameon=False, borderaxespad=0.1)
    words = f"in plan, beside each pad: its force, and in brackets its share [{unit.unit}]"
    if force.size <= MOST_NUMBERS:
        axes.set_title(words, size=7.5, loc="right", pad=3, color=INK)
