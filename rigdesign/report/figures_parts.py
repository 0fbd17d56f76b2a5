"""Pieces that more than one drawing shows: marks with numbers, the specimen's strip, arrows, the directions of x and z.

All are drawn in millimetres on the paper.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

from matplotlib.axes import Axes
from matplotlib.patches import Polygon, Rectangle

from rigdesign.brief.model import Brief
from rigdesign.report.figures_sheet import GREY, INK, PALE, SMALLEST_FONT

MARK = 4.4
"""Size of the marks that hold the numbers [mm]."""

_SHAPES = {"pad": ("o", 1.0), "lever": ("s", 0.92), "jack": ("h", 1.5)}


def mark(axes: Axes, kind: str, number: int, x: float, y: float) -> None:
    """Draw a number in the mark of its kind: a circle for pads, a square for levers, six corners for jacks."""
    shape, part = _SHAPES[kind]
    size = MARK / 25.4 * 72.0 * part
    wide = len(str(number)) > 2  # three digits need more room than the mark has
    axes.plot([x], [y], shape, color="white", markeredgecolor=INK, markersize=size, markeredgewidth=0.8, zorder=5)
    text = axes.text(x, y - 0.08, str(number), size=SMALLEST_FONT, ha="center", va="center_baseline", zorder=6)
    if wide:
        text.set_bbox({"facecolor": "white", "edgecolor": "none", "pad": 0.4})


def holes(axes: Axes, places: Sequence[float], y: float) -> None:
    """Draw end holes of a lever at these x."""
    style: Any = {"color": "white", "markeredgecolor": INK, "markersize": 2.6, "markeredgewidth": 0.7}
    axes.plot(places, [y] * len(places), "o", zorder=4, **style)


def arrow(axes: Axes, tail: tuple[float, float], head: tuple[float, float], width: float, color: str = INK) -> None:
    """Draw an arrow from tail to head."""
    style = {
        "arrowstyle": "-|>,head_width=0.18,head_length=0.36",
        "color": color,
        "lw": width,
        "shrinkA": 0,
        "shrinkB": 0,
    }
    axes.annotate("", head, tail, arrowprops=style, zorder=3)


def directions(axes: Axes, x: float, y: float) -> None:
    """Draw the directions of x and z from this corner."""
    for end, name, across, up in (((x + 9.0, y), "x", 2.0, 0.0), ((x, y + 9.0), "z", 0.0, 2.0)):
        arrow(axes, (x, y), end, 0.8)
        axes.text(end[0] + across, end[1] + up, name, size=7, ha="center", va="center")


def specimen_strip(axes: Axes, brief: Brief, at: Callable[[float], float], low: float, high: float) -> None:
    """Draw the specimen as a strip with its keep-outs hatched, and how it is held."""
    specimen = brief.specimen
    left, right = at(specimen.left), at(specimen.right)
    axes.add_patch(Rectangle((left, low), right - left, high - low, facecolor=PALE, edgecolor=INK, linewidth=0.8))
    for start, end in brief.pads.keep_out:
        box: Any = (at(start), low), at(end) - at(start), high - low
        axes.add_patch(Rectangle(*box, fill=False, hatch="xxxx", edgecolor=GREY, linewidth=0))
    if not specimen.supports:
        box = (left - 3.0, low - 2.0), 3.0, high - low + 4.0
        axes.add_patch(Rectangle(*box, facecolor="white", edgecolor=INK, hatch="////", linewidth=0.8))
    for station in specimen.supports:
        x = at(station)
        corners = [(x, high - 0.8), (x - 2.2, low + 0.8), (x + 2.2, low + 0.8)]
        axes.add_patch(Polygon(corners, facecolor="white", edgecolor=INK, linewidth=0.8))
