"""The sheet of a plan rig: all of it in plan with forces to scale, and a panel for the pieces of each tier."""

from __future__ import annotations

from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.lines import Line2D

from rigdesign.checks.model import Check
from rigdesign.display import System, counted
from rigdesign.levers.model import Piece
from rigdesign.report.figures_parts import arrow
from rigdesign.report.figures_sheet import A3, GREY, INK, new_sheet, paper, styled
from rigdesign.report.scales import Scale, scale
from rigdesign.report.surface import ground, pieces
from rigdesign.report.surface.frame import Frame, bounds, fitted, plan_panel
from rigdesign.report.surface.labels import Board

HEAD, FOOT = 24.0, 12.0
"""Heights kept for the titles and for the caution [mm]."""
KEY = 17.0
"""Height of the key beneath the drawing [mm]."""
TICKS = 12.0
"""Height of numbers and name of an axis [mm]."""
HEADING = 8.0
"""Height of the heading of a tier's panel [mm]."""
LEFT, RIGHT = 22.0, 12.0
"""Margins of the sheet beside the drawing [mm]."""


@styled
def plan_sheet(check: Check, system: System = "SI") -> Figure:
    """Return the sheet in plan of a checked plan rig: A3 wide, as high as its panels need."""
    rig = check.rig
    brief = rig.plan.target.brief
    by_tier = pieces.tiers(rig)
    whole, panels, height = _frames(check, len(by_tier))
    force = scale("force", float(np.abs(check.statics.pad_force).max()), system)
    figure = new_sheet((A3[0], height), f"{brief.title}: the rig in plan", _words(check, whole, system))
    handles = _overview(figure, whole, check, system)
    _key(figure, whole, handles, height)
    _disc_scale(paper(figure), check, whole, force)
    for frame, (tier, members) in zip(panels, by_tier.items(), strict=True):
        _tier(figure, frame, check, tier, members, system)
    return figure


def _frames(check: Check, n_tiers: int) -> tuple[Frame, list[Frame], float]:
    """The frames of the overview and of each tier, and the height of the sheet [mm]."""
    brief = check.rig.plan.target.brief
    x0, y0, x1, y1 = bounds(brief)
    shape = (x1 - x0) / (y1 - y0)
    width = A3[0] - LEFT - RIGHT
    across = 1 if shape > 7.0 else 2 if shape > 2.2 else 3 if shape > 1.0 else 4
    tall, small_tall = (150.0, 110.0) if shape > 1.0 else (190.0, 150.0)
    crowd = max(1.0, (check.rig.plan.n_pads / 40.0) ** 0.5)
    whole = fitted(brief, LEFT, 0.0, width, tall * crowd)
    column = (A3[0] - 20.0) / across
    small = fitted(brief, 0.0, 0.0, column, small_tall * crowd)
    rows = -(-n_tiers // across) if n_tiers else 0
    below = KEY + TICKS + rows * (HEADING + small.height) + FOOT
    height = max(A3[1], HEAD + whole.height + below)
    spare = height - HEAD - whole.height - below
    whole = fitted(brief, LEFT, height - HEAD - spare / 3, width, tall * crowd)
    top = whole.low - TICKS - KEY - spare / 3
    panels = []
    for k in range(n_tiers):
        row, place = divmod(k, across)
        start = top - row * (HEADING + small.height) - HEADING
        panels.append(fitted(brief, 10.0 + place * column, start, column, small_tall * crowd, small.ratio))
    return whole, panels, height


def _words(check: Check, frame: Frame, system: System) -> str:
    rig, tree = check.rig, check.rig.trees[0]
    force, place = scale("force", abs(tree.force), system), scale("length", 1.0, system)
    n_plates = sum(piece.kind == "plate" for piece in tree.pieces)
    parts = [counted(rig.plan.n_pads, "pad"), counted(len(tree.pieces) - n_plates, "lever"), counted(n_plates, "plate")]
    return (
        f"{', '.join(parts)}; jack {force.show(tree.force)} {force.unit} at x = {place.show(tree.jack.x)}, "
        f"y = {place.show(tree.jack.y)} {place.unit}; x to the right, y up, z towards the reader; "
        f"scale 1 : {frame.ratio:g} on a sheet {A3[0]:.0f} mm wide"
    )


def _overview(figure: Figure, frame: Frame, check: Check, system: System) -> list[Any]:
    """Draw everything in plan; return what the key shows."""
    rig = check.rig
    brief = rig.plan.target.brief
    axes = plan_panel(figure, frame, system)
    board = _board(frame)
    ground.outline(axes, frame, brief, board)
    handles = ground.surroundings(axes, frame, brief, board)
    handles += ground.hard_points(axes, frame, brief, rig.pad_x, rig.pad_y)
    handles += pieces.footprints(axes, frame, brief, rig.pad_x, rig.pad_y)
    per_newton = pieces.disc_per_newton(frame, rig.pad_x, rig.pad_y, check.statics.pad_force)
    force = check.statics.pad_force
    pieces.discs(axes, frame, rig.pad_x, rig.pad_y, force, per_newton)
    by_tier = pieces.tiers(rig)
    for members in by_tier.values():
        for piece in members:
            pieces.draw_piece(axes, frame, piece, board)
    diameters = np.array([pieces.disc_diameter(float(value), per_newton) for value in force])
    pieces.pad_numbers(axes, frame, board, rig.pad_x, rig.pad_y, diameters)
    for tree in rig.trees:
        place = frame.at(tree.jack.x, tree.jack.y)  # among the pads, so inside the drawing
        pieces.mark_beside(axes, board, "jack", tree.jack.number, place, 1.5)
    _letters(axes, frame, board, by_tier)
    _direction(paper(figure), frame)
    return handles + [_tier_handle(tier, members) for tier, members in by_tier.items()]


def _board(frame: Frame) -> Board:
    return Board(frame.left + 1.0, frame.low + 1.0, frame.left + frame.width - 1.0, frame.low + frame.height + 1.0)


def _letters(axes: Axes, frame: Frame, board: Board, by_tier: dict[int, list[Piece]]) -> None:
    """Write the letter of its tier at the pivot of each piece."""
    for tier, members in by_tier.items():
        letter = pieces.tier_letter(tier)
        for piece in members:
            place = frame.at(piece.pivot.x, piece.pivot.y)
            at = board.place(*place, 1.4 + 1.0 * len(letter), 2.6, 0.9)
            pieces.leader(axes, place, at, 2.0)
            text = axes.text(*at, letter, size=6.5, style="italic", ha="center", va="center", zorder=6)
            text.set_bbox({"facecolor": "white", "edgecolor": "none", "pad": 0.2, "alpha": 0.8})


def _direction(axes: Axes, frame: Frame) -> None:
    """Draw the directions of x and y in the free corner of the drawing."""
    x, y = A3[0] - 22.0, frame.low + frame.height - 12.0
    for end, name, across, up in (((x + 9.0, y), "x", 2.0, 0.0), ((x, y + 9.0), "y", 0.0, 2.0)):
        arrow(axes, (x, y), end, 0.8)
        axes.text(end[0] + across, end[1] + up, name, size=7, ha="center", va="center")


def _tier_handle(tier: int, members: list[Piece]) -> Any:
    return Line2D(
        [], [], label=f"{pieces.tier_letter(tier)}: tier {tier}, {_counts(members)}", **pieces.tier_style(tier)
    )


def _counts(members: list[Piece]) -> str:
    n_plates = sum(piece.kind == "plate" for piece in members)
    found = [(len(members) - n_plates, "lever"), (n_plates, "plate")]
    return ", ".join(counted(number, name) for number, name in found if number)


def _key(figure: Figure, frame: Frame, handles: list[Any], height: float) -> None:
    """The key beneath the overview, in as many columns as the sheet is wide."""
    figure.legend(
        handles=handles, loc="upper left", bbox_to_anchor=((LEFT + 62.0) / A3[0], (frame.low - TICKS) / height),
        ncols=5, fontsize=7, frameon=False, borderaxespad=0.0, handlelength=3.6, columnspacing=1.6, labelspacing=0.4,
    )  # fmt: skip


def _disc_scale(axes: Axes, check: Check, frame: Frame, unit: Scale) -> None:
    """A disc of a round force as the scale of the pads' discs, left of the key."""
    rig = check.rig
    per_newton = pieces.disc_per_newton(frame, rig.pad_x, rig.pad_y, check.statics.pad_force)
    largest = float(np.abs(check.statics.pad_force).max()) / unit.size
    tens = 10.0 ** np.floor(np.log10(largest))
    shown = next(n * tens for n in (5.0, 2.0, 1.0) if n * tens <= largest * (1 + 1e-9))
    x, y = LEFT + 7.0, frame.low - TICKS - 6.5
    pieces.discs(axes, _Paper(), np.array([x]), np.array([y]), np.array([shown * unit.size]), per_newton)
    words = f"pad force by area:\nthis disc is {shown:g} {unit.unit}"
    axes.text(x + 9.0, y, words, size=7, va="center", linespacing=1.3)


class _Paper(Frame):
    """A frame whose metres are the sheet's millimetres."""

    def __init__(self) -> None:
        super().__init__(0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 1000.0)


def _tier(figure: Figure, frame: Frame, check: Check, tier: int, members: list[Piece], system: System) -> None:
    """Draw the pieces of one tier with their numbers and what hangs in their holes."""
    rig = check.rig
    axes = plan_panel(figure, frame, system, ticks=False)
    board = _board(frame)
    ground.outline(axes, frame, rig.plan.target.brief, board, quiet=True)
    axes.plot(frame.x(rig.pad_x), frame.y(rig.pad_y), ".", color=GREY, markersize=2.5, zorder=2)
    for piece in members:
        pieces.draw_piece(axes, frame, piece, board, filled=True)
    for piece in members:
        pieces.mark_beside(axes, board, "lever", piece.number, frame.at(piece.pivot.x, piece.pivot.y), 1.2)
    for piece in members:
        for hole in piece.ends:
            kind, number = hole.joins.split()
            pieces.mark_beside(axes, board, kind, int(number), frame.at(hole.x, hole.y), 1.0)
    heading = f"{pieces.tier_letter(tier)}: tier {tier}, {_counts(members)}"
    axes.text(frame.left + 4.0, frame.low + frame.height + 4.5, heading, size=8, weight="bold", va="center", color=INK)
