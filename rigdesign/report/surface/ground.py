"""What a drawing in plan stands on: outline, reference axis, keep-outs, supports and hard points."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.lines import Line2D
from matplotlib.patches import Patch, PathPatch
from matplotlib.path import Path

from rigdesign.brief.model import Brief, Line
from rigdesign.report.figures_sheet import GREY, INK
from rigdesign.report.surface.frame import Frame
from rigdesign.report.surface.labels import Board
from rigdesign.target.curve import Floats

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

PAPER = "#F4F4F4"
"""Fill of the outline where no load is drawn on it."""


def path_of(shape: BaseGeometry, frame: Frame) -> Path:
    """Return a polygon of shapely, or several, holes included, as a path on the sheet."""
    parts = [part for part in getattr(shape, "geoms", [shape]) if part.geom_type == "Polygon" and not part.is_empty]
    rings = [ring for part in parts for ring in (part.exterior, *part.interiors)]
    paths = [Path(frame.points(np.asarray(ring.coords)), closed=True) for ring in rings]
    return Path.make_compound_path(*paths) if paths else Path(np.empty((0, 2)))


def outline(axes: Axes, frame: Frame, brief: Brief, board: Board | None = None, quiet: bool = False) -> PathPatch:
    """Draw the outline, `quiet` as a thin grey line, and return its patch (to clip to)."""
    assert brief.specimen.outline is not None
    path = path_of(brief.specimen.outline.polygon, frame)
    color, width = (GREY, 0.6) if quiet else (INK, 1.1)
    patch = PathPatch(path, facecolor=PAPER, edgecolor=color, linewidth=width, zorder=1)
    axes.add_patch(patch)
    if board is not None:
        corners = np.asarray(path.vertices)
        board.draw_line(corners[:, 0], corners[:, 1])
    return patch


def surroundings(axes: Axes, frame: Frame, brief: Brief, board: Board | None = None) -> list[Any]:
    """Draw axis, keep-outs, supports or root over the outline; return what a key shows of them."""
    handles: list[Any] = []
    polyline(axes, frame, brief.specimen.reference_axis, color=INK, linewidth=0.8, linestyle=(0, (9, 2.5, 1.5, 2.5)))
    handles.append(Line2D([], [], color=INK, linewidth=0.8, linestyle=(0, (9, 2.5, 1.5, 2.5)), label="reference axis"))
    if _keep_outs(axes, frame, brief):
        handles.append(Patch(facecolor="white", edgecolor=GREY, hatch="xxxx", linewidth=0.6, label="keep-out"))
    handles.append(_held(axes, frame, brief))
    if board is not None:
        axis = brief.specimen.reference_axis
        board.draw_line(frame.x(axis.x), frame.y(axis.y))
    return handles


def polyline(axes: Axes, frame: Frame, line: Line, **style: Any) -> None:
    """Draw a line in plan."""
    axes.plot(frame.x(line.x), frame.y(line.y), zorder=2, **style)


def _keep_outs(axes: Axes, frame: Frame, brief: Brief) -> bool:
    from shapely import box

    assert brief.specimen.outline is not None
    whole = brief.specimen.outline.polygon
    low, high = float(brief.specimen.outline.y.min()), float(brief.specimen.outline.y.max())
    shapes = [box(start, low, end, high) for start, end in brief.pads.keep_out]
    shapes += [area.polygon for area in brief.pads.keep_out_areas]
    for shape in shapes:
        path = path_of(shape.intersection(whole), frame)
        if np.size(path.vertices):
            axes.add_patch(PathPatch(path, facecolor="white", edgecolor=GREY, hatch="xxxx", linewidth=0.6, zorder=1.5))
    return bool(shapes)


def _held(axes: Axes, frame: Frame, brief: Brief) -> Any:
    """The root as a hatched wall, or the stations of two supports with a triangle where they bear on the axis."""
    specimen = brief.specimen
    stations = specimen.supports or (specimen.left,)
    for station in stations:
        low, high = width_at(brief, station)
        x, y = float(frame.x(station)), frame.y([low, high])
        if not specimen.supports:
            corners = [(x - 3.0, y[0]), (x, y[0]), (x, y[1]), (x - 3.0, y[1])]
            path = Path([*corners, corners[0]], closed=True)
            axes.add_patch(PathPatch(path, facecolor="white", edgecolor=INK, hatch="////", linewidth=0.8))
            continue
        axes.plot([x, x], y, color=GREY, linewidth=1.0, linestyle=(0, (1.5, 1.5)), zorder=1.8)
        bears = frame.at(station, float(specimen.reference_axis.at(np.array([station]))[0]))
        axes.plot(*bears, "^", color="white", markeredgecolor=INK, markersize=6, zorder=2.5)
    if specimen.supports:
        style: Any = {"color": GREY, "linewidth": 1.0, "linestyle": (0, (1.5, 1.5)), "marker": "^"}
        return Line2D([], [], markerfacecolor="white", markeredgecolor=INK, label="support", **style)
    return Patch(facecolor="white", edgecolor=INK, hatch="////", linewidth=0.8, label="held here")


def width_at(brief: Brief, station: float) -> tuple[float, float]:
    """Return least and greatest y [m] of the outline at a station, or of the whole outline where it has none there."""
    from shapely import LineString

    outline = brief.specimen.outline
    assert outline is not None
    low, high = float(outline.y.min()), float(outline.y.max())
    margin = high - low
    cut = outline.polygon.intersection(LineString([(station, low - margin), (station, high + margin)]))
    return (low, high) if cut.is_empty else (float(cut.bounds[1]), float(cut.bounds[3]))


def hard_points(axes: Axes, frame: Frame, brief: Brief, pad_x: Floats, pad_y: Floats) -> list[Any]:
    """Draw given places that no pad took as small crosses; return what a key shows of them.

    `pad_x`, `pad_y` [m] (n_pads,) are the places that are taken.
    """
    x = brief.pads.stations
    if not x.size:
        return []
    y = brief.pads.y if brief.pads.y.size else np.zeros(x.size)
    far = np.hypot(x[:, None] - pad_x, y[:, None] - pad_y).min(axis=1, initial=np.inf)
    free = far > 1e-6
    if not free.any():
        return []
    style: Any = {"color": INK, "linestyle": "none", "marker": "+", "markersize": 4.0, "markeredgewidth": 0.7}
    axes.plot(frame.x(x[free]), frame.y(y[free]), zorder=2.2, **style)
    name = "hard point not used" if brief.pads.places == "hard points" else "given place not used"
    return [Line2D([], [], label=name, **style)]
