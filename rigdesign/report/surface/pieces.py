"""Pads, levers and plates as they are drawn in plan.

A tier is told by line style, weight and letter; a part by the number in its mark: circle for pads, square for levers
and plates, six corners for the jack.  Marks stand beside what they name where there is no room on it, with a thin line.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.lines import Line2D
from matplotlib.patches import Circle, PathPatch, Polygon

from rigdesign.brief.model import Brief
from rigdesign.levers.model import Piece, Rig
from rigdesign.report import figures_parts
from rigdesign.report.figures_parts import MARK
from rigdesign.report.figures_sheet import GREY, INK, VERMILION
from rigdesign.report.surface.frame import Frame
from rigdesign.report.surface.ground import path_of
from rigdesign.report.surface.labels import Board
from rigdesign.target.curve import Floats

_STYLES: tuple[Any, ...] = (
    "-",
    (0, (6, 2)),
    (0, (6, 1.5, 1, 1.5)),
    (0, (1, 1.2)),
    (0, (10, 2)),
    (0, (4, 1.2, 1, 1.2, 1, 1.2)),
    (0, (2.5, 1.5)),
)
_WEIGHTS = (2.6, 2.1, 1.8, 1.6, 1.2, 1.1, 1.0)
LARGEST_DISC, SMALLEST_LARGEST = 12.0, 4.0
"""The largest pad force is drawn as a disc between these diameters [mm], by how close the pads stand."""


def tier_style(tier: int) -> dict[str, Any]:
    """Line style and weight of a tier, 1 at the jack."""
    k = (tier - 1) % len(_STYLES)
    return {"linestyle": _STYLES[k], "linewidth": _WEIGHTS[k], "color": INK}


def tier_letter(tier: int) -> str:
    """Letter of a tier, "a" at the jack; "aa" after "z"."""
    letters = "abcdefghijklmnopqrstuvwxyz"
    return letters[(tier - 1) % 26] * ((tier - 1) // 26 + 1)


def tiers(rig: Rig) -> dict[int, list[Piece]]:
    """Return the pieces of all trees by tier, in order."""
    pieces = sorted(
        (piece for tree in rig.trees for piece in tree.pieces), key=lambda piece: (piece.tier, piece.number)
    )
    found: dict[int, list[Piece]] = {}
    for piece in pieces:
        found.setdefault(piece.tier, []).append(piece)
    return found


def draw_piece(axes: Axes, frame: Frame, piece: Piece, board: Board | None = None, filled: bool = False) -> None:
    """Draw a lever as its line from end to end, a plate as its triangle, in the style of its tier, and its holes."""
    x = frame.x([hole.x for hole in piece.ends])
    y = frame.y([hole.y for hole in piece.ends])
    closed = [*range(len(x)), 0] if piece.kind == "plate" else list(range(len(x)))
    if piece.kind == "plate" and filled:
        axes.add_patch(Polygon(np.column_stack([x, y]), facecolor="#E2E2E2", edgecolor="none", zorder=2.6))
    axes.plot(x[closed], y[closed], zorder=3, **tier_style(piece.tier))
    style: Any = {"color": "white", "markeredgecolor": INK, "linestyle": "none"}
    axes.plot(x, y, marker="o", markersize=2.8, markeredgewidth=0.7, zorder=3.5, **style)
    pivot = frame.at(piece.pivot.x, piece.pivot.y)
    axes.plot(*pivot, marker="D", color=INK, markersize=2.6, zorder=3.6)
    if board is not None:
        board.draw_line(x[closed], y[closed])


def mark_beside(axes: Axes, board: Board, kind: str, number: int, place: tuple[float, float], start: float) -> None:
    """Draw the mark of a part near its place on the sheet [mm], and a thin line to it where it stands off."""
    size = MARK * (1.5 if kind == "jack" else 1.0)
    wide = max(size, 2.2 + 1.5 * len(str(number)))
    x, y = board.place(*place, wide, size, start)
    leader(axes, place, (x, y), size / 2)
    figures_parts.mark(axes, kind, number, x, y)


def leader(axes: Axes, place: tuple[float, float], label: tuple[float, float], half: float) -> None:
    """Draw a thin line from a place to its label [mm], which begins `half` from its centre."""
    if np.hypot(label[0] - place[0], label[1] - place[1]) > half + 0.4:
        axes.plot([place[0], label[0]], [place[1], label[1]], color=GREY, linewidth=0.45, zorder=2.4)


def footprints(axes: Axes, frame: Frame, brief: Brief, pad_x: Floats, pad_y: Floats) -> list[Any]:
    """Draw the footprints to scale; return what a key shows of them."""
    if brief.pads.length <= 0 or not brief.pads.width:
        return []
    from rigdesign.pads.surface.footprints import footprints as shapes

    for shape in shapes(brief, pad_x, pad_y):
        axes.add_patch(PathPatch(path_of(shape, frame), fill=False, edgecolor=INK, linewidth=0.7, zorder=2.4))
    return [Line2D([], [], marker="s", color="white", markeredgecolor=INK, linestyle="none", label="footprint")]


def disc_per_newton(frame: Frame, x: Floats, y: Floats, force: Floats) -> float:
    """Return the area of a pad's disc per newton [mm²/N]: area goes with force, and neighbours hardly overlap."""
    at_x, at_y = frame.x(x), frame.y(y)
    far = np.hypot(at_x[:, None] - at_x, at_y[:, None] - at_y)
    np.fill_diagonal(far, np.inf)
    near = float(far.min(initial=np.inf))
    largest = float(np.clip(0.95 * near, SMALLEST_LARGEST, LARGEST_DISC))
    return float(np.pi / 4 * largest**2 / max(float(np.abs(force).max()), 1e-300))


def disc_diameter(force: float, per_newton: float) -> float:
    """Return the diameter [mm] of the disc of a force [N]."""
    return float(2.0 * np.sqrt(abs(force) * per_newton / np.pi))


def discs(axes: Axes, frame: Frame, x: Floats, y: Floats, force: Floats, per_newton: float) -> None:
    """Draw pad forces as discs, their area to scale; what goes against most of them is hatched."""
    way = np.sign(force.sum())
    for px, py, value in zip(frame.x(x), frame.y(y), force, strict=True):
        against = value * way < 0
        axes.add_patch(
            Circle(
                (float(px), float(py)), disc_diameter(float(value), per_newton) / 2, linewidth=0.9, zorder=2.3,
                facecolor="white" if against else "#F6D9C4", edgecolor=VERMILION, hatch="/////" if against else None,
            )
        )  # fmt: skip


def pad_numbers(axes: Axes, frame: Frame, board: Board, x: Floats, y: Floats, diameters: Floats) -> None:
    """Write pad numbers: in the disc of the force where it is large enough, in a mark beside it where it is not."""
    order = np.argsort(-diameters, kind="stable")
    for k in order:
        place = frame.at(x[k], y[k])
        if diameters[k] > MARK + 0.6 and len(str(k + 1)) < 3:
            inside = board.place(*place, MARK, MARK)
            if inside == place:
                axes.text(*place, str(k + 1), size=7, weight="bold", ha="center", va="center_baseline", zorder=6)
                continue
            leader(axes, place, inside, MARK / 2)
            figures_parts.mark(axes, "pad", int(k) + 1, *inside)
            continue
        mark_beside(axes, board, "pad", int(k) + 1, place, diameters[k] / 2 + 0.5)
