"""The target's loads in plan: pressures as filled contours, running loads along their lines, point loads as marks."""

from __future__ import annotations

from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.colors import LinearSegmentedColormap
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.patches import Circle, Patch, PathPatch, Polygon
from matplotlib.ticker import MaxNLocator

from rigdesign.brief.model import (
    Brief,
    CoupleLoad,
    InertiaLoad,
    InternalLoad,
    Line,
    PointLoads,
    PressureLoad,
    ShapeLoad,
    TableLoad,
    TorqueLoad,
)
from rigdesign.display import System
from rigdesign.report.figures_sheet import GREEN, GREY, INK, VERMILION, text_width
from rigdesign.report.scales import scale
from rigdesign.report.surface.frame import Frame
from rigdesign.report.surface.labels import Board
from rigdesign.report.surface.pieces import leader
from rigdesign.target.curve import Floats

PIXELS = 240
"""Places along the longer side at which the pressure is drawn."""
RIBBON = 9.0
"""Height of the largest running load over its line [mm]."""
MOST_LABELS = 12
"""Point loads are labelled up to so many."""
# pale enough for numbers upon it, light to dark with the magnitude; against z it turns to the other hue
_ALONG = ["#F8F8F8", "#D3E5F2", "#A6CCE5", "#78B0D6"]
_AGAINST = ["#DDAE86", "#EBCBB0", "#F4E4D6", "#F8F8F8"]


def pressure_at(load: PressureLoad, brief: Brief, x: Floats, y: Floats) -> Floats:
    """Return a map's pressure [Pa] at places x, y (n,) [m], its `times` included.

    Beyond the map's points each place has the value of the nearest place that they cover.
    """
    import shapely
    from matplotlib.tri import LinearTriInterpolator, Triangulation

    from rigdesign.target.surface.mesh import mesh_of

    assert brief.specimen.outline is not None
    mesh = mesh_of(load, 2.0 * float(np.hypot(np.ptp(brief.specimen.outline.x), np.ptp(brief.specimen.outline.y))))
    inside = LinearTriInterpolator(Triangulation(mesh.x, mesh.y, mesh.triangles), mesh.pressure)(x, y)
    ring = np.append(mesh.border, mesh.border[:1])
    border = shapely.LineString(np.column_stack([mesh.x[ring], mesh.y[ring]]))
    at = np.append(0.0, np.cumsum(np.hypot(np.diff(mesh.x[ring]), np.diff(mesh.y[ring]))))
    nearest = np.interp(shapely.line_locate_point(border, shapely.points(x, y)), at, mesh.pressure[ring])
    return np.asarray(load.times * np.where(np.ma.getmaskarray(inside), nearest, inside.filled(0.0)))


def draw_pressure(axes: Axes, frame: Frame, brief: Brief, clip: PathPatch, system: System) -> tuple[Any, float]:
    """Draw the sum of the pressures as filled contours with their lines; return them and the largest magnitude [Pa].

    Contours stand at round values of the unit that the bar shows.  Returns None and 0 where there is no pressure.
    """
    loads = [load for load in brief.loads if isinstance(load, PressureLoad)]
    outline = brief.specimen.outline
    if not loads or outline is None:
        return None, 0.0
    span = max(float(np.ptp(outline.x)), float(np.ptp(outline.y)))
    n_x, n_y = (max(8, int(PIXELS * float(np.ptp(side)) / span)) for side in (outline.x, outline.y))
    x = np.linspace(float(outline.x.min()), float(outline.x.max()), n_x)
    y = np.linspace(float(outline.y.min()), float(outline.y.max()), n_y)
    at_x, at_y = (side.ravel() for side in np.meshgrid(x, y))
    values = sum(pressure_at(load, brief, at_x, at_y) for load in loads).reshape(n_y, n_x)  # type: ignore[union-attr]
    seen = values[_inside(brief, at_x, at_y).reshape(n_y, n_x)]
    low, high = min(0.0, float(seen.min())), max(0.0, float(seen.max()))
    unit = scale("pressure", max(-low, high), system).size
    levels = unit * np.asarray(MaxNLocator(9).tick_values(low / unit, high / unit))
    drawn = axes.contourf(
        frame.x(x), frame.y(y), values, levels=levels, cmap=_colours(levels), zorder=1.2, extend="both"
    )
    lines = axes.contour(
        frame.x(x), frame.y(y), values, levels=levels, colors=GREY, linewidths=0.4, zorder=1.25, linestyles="solid"
    )
    for contours in (drawn, lines):
        contours.set_clip_path(clip)
    return drawn, max(-low, high)


def _inside(brief: Brief, x: Floats, y: Floats) -> Any:
    import shapely

    assert brief.specimen.outline is not None
    polygon = brief.specimen.outline.polygon
    shapely.prepare(polygon)
    return shapely.covers(polygon, shapely.points(x, y))


def _colours(levels: Floats) -> LinearSegmentedColormap:
    """Colours whose palest is at zero."""
    low, high = float(levels[0]), float(levels[-1])
    zero = -low / (high - low)
    stops: list[tuple[float, str]] = []
    if zero > 0:
        stops += [(zero * k / 3, color) for k, color in enumerate(_AGAINST)]
    if zero < 1:
        stops += [(zero + (1 - zero) * k / 3, color) for k, color in enumerate(_ALONG)][1 if zero > 0 else 0 :]
    return LinearSegmentedColormap.from_list("pressure", stops)


def colour_bar(figure: Figure, frame: Frame, drawn: Any, peak: float, system: System) -> None:
    """Draw the bar that says which shade is which pressure, right of the drawing."""
    unit = scale("pressure", peak, system)
    width, height = (25.4 * side for side in figure.get_size_inches())
    tall = min(70.0, frame.height)
    place = ((frame.left + frame.width + 7.0) / width, (frame.low + (frame.height - tall) / 2) / height)
    axes = figure.add_axes((*place, 4.0 / width, tall / height))
    bar = figure.colorbar(drawn, cax=axes, extendfrac=0.0)
    bar.set_ticks(list(drawn.levels))
    bar.set_ticklabels([f"{level / unit.size:.5g}".replace("-", "−") for level in drawn.levels])
    bar.ax.tick_params(labelsize=7, length=2.0)
    bar.set_label(f"pressure [{unit.unit}], along z where positive", size=7.5)
    bar.outline.set_linewidth(0.5)


def draw_lines(axes: Axes, frame: Frame, brief: Brief, system: System) -> list[Any]:
    """Draw running loads as ribbons over the lines that they act along; return what a key shows of them."""
    curves = _running(brief)
    drawn: list[tuple[Line, Floats, Floats, bool]] = []
    for line, curve, is_weight in curves:
        low, high = float(curve.breaks[0]), float(curve.breaks[-1])
        x = np.unique(np.concatenate([np.linspace(low, high, 160), curve.breaks]))
        side = curve.running(x, "outboard")
        side[-1] = curve.running(x[-1:], "inboard")[0]
        drawn.append((line, x, side, is_weight))
    largest = max((float(np.abs(values).max()) for _, _, values, _ in drawn), default=0.0)
    handles: list[Any] = []
    unit = scale("running load", largest, system)
    for line, x, values, is_weight in drawn:
        color = GREY if is_weight else GREEN
        foot = np.column_stack([frame.x(x), frame.y(line.at(x))])
        top = foot + np.column_stack([np.zeros(x.size), RIBBON * values / (largest or 1.0)])
        ring = np.concatenate([foot, top[::-1]])
        hatch = "...." if is_weight else "||||"
        axes.add_patch(
            Polygon(ring, facecolor="none", edgecolor=color, hatch=hatch, linewidth=0.7, zorder=1.6, alpha=0.8)
        )
        most = unit.show(float(values[np.argmax(np.abs(values))]))
        name = "weight" if is_weight else "running load"
        label = f"{name} over its line, at most {most} {unit.unit}"
        handles.append(Patch(facecolor="none", edgecolor=color, hatch=hatch, linewidth=0.7, label=label))
    return handles


def _running(brief: Brief) -> list[tuple[Line, Any, bool]]:
    """Lines with the curves of the running loads along them, and whether it is gravity's."""
    from rigdesign.target.loads import gravity_curve, load_curve

    specimen = brief.specimen
    found: list[tuple[Line, Any, bool]] = []
    for load in brief.loads:
        if isinstance(load, ShapeLoad | TableLoad):
            found.append((load.line or specimen.reference_axis, load_curve(load, specimen), False))
        elif isinstance(load, InternalLoad):
            found.append((specimen.reference_axis, load_curve(load, specimen), False))
        elif isinstance(load, InertiaLoad) and specimen.weight is not None and specimen.weight.x.size:
            found.append((specimen.weight_line or specimen.reference_axis, load_curve(load, specimen), False))
    if specimen.weight is not None and specimen.weight.x.size:
        found.append((specimen.weight_line or specimen.reference_axis, gravity_curve(brief), True))
    return found


def draw_points(axes: Axes, frame: Frame, board: Board, brief: Brief, system: System) -> list[Any]:
    """Draw point loads as circles, a dot in those towards the reader and a cross in those away, and point couples.

    Few of them are labelled, many are drawn small; returns what a key shows of them.
    """
    handles: list[Any] = []
    points = [load for load in brief.loads if isinstance(load, PointLoads)]
    if points:
        at_x = np.concatenate([load.x for load in points])
        lines = [load.y if load.y.size else brief.specimen.reference_axis.at(load.x) for load in points]
        at_y, force = np.concatenate(lines), np.concatenate([load.times * load.force for load in points])
        few = force.size <= MOST_LABELS
        unit = scale("force", float(np.abs(force).max()), system)
        for x, y, value in zip(at_x, at_y, force, strict=True):
            place = frame.at(x, y)
            _point(axes, place, float(value), 1.5 if few else 0.7)
            if few:
                board.take(*place, 3.0, 3.0)
                _label(axes, board, place, f"{unit.show(float(value))} {unit.unit}", 2.2)
        style: Any = {"color": "white", "markeredgecolor": VERMILION, "linestyle": "none", "marker": "o"}
        words = f"point load (largest {unit.show(float(np.abs(force).max()))} {unit.unit}); dot: +z, cross: −z"
        handles.append(Line2D([], [], label=words, markersize=5, **style))
    return handles + _couples(axes, frame, board, brief, system)


def _couples(axes: Axes, frame: Frame, board: Board, brief: Brief, system: System) -> list[Any]:
    """Draw point couples as diamonds on the axis, running torques as a wavy underline of the key alone."""
    handles: list[Any] = []
    axis = brief.specimen.reference_axis
    couples = [load for load in brief.loads if isinstance(load, CoupleLoad)]
    for load in couples:
        value = load.times * load.couple
        unit = scale("moment", abs(value), system)
        place = frame.at(load.x, float(axis.at(np.array([load.x]))[0]))
        axes.plot(*place, "D", color="white", markeredgecolor=GREEN, markersize=5, zorder=4)
        board.take(*place, 3.0, 3.0)
        _label(axes, board, place, f"couple {unit.show(value)} {unit.unit}", 2.4)
    torques = [load for load in brief.loads if isinstance(load, TorqueLoad)]
    for torque in torques:
        x = np.linspace(torque.x[0], torque.x[-1], 60)
        axes.plot(frame.x(x), frame.y(axis.at(x)), color=GREEN, linewidth=2.2, linestyle=":", zorder=2.1)
    if torques:
        handles.append(Line2D([], [], color=GREEN, linewidth=2.2, linestyle=":", label="running torque"))
    return handles


def _point(axes: Axes, place: tuple[float, float], value: float, radius: float) -> None:
    axes.add_patch(Circle(place, radius, facecolor="white", edgecolor=VERMILION, linewidth=0.9, zorder=4))
    if value > 0:
        axes.add_patch(Circle(place, radius / 3, color=VERMILION, linewidth=0, zorder=4.1))
        return
    reach = radius * 0.7
    for way in (1.0, -1.0):
        ends = [place[0] - reach, place[0] + reach], [place[1] - way * reach, place[1] + way * reach]
        axes.plot(*ends, color=VERMILION, linewidth=0.8, zorder=4.1)


def _label(axes: Axes, board: Board, place: tuple[float, float], words: str, start: float) -> None:
    at = board.place(*place, text_width(words, 6.5), 2.9, start)
    leader(axes, place, at, 4.0)
    text = axes.text(*at, words, size=6.5, ha="center", va="center", zorder=6, color=INK)
    text.set_bbox({"facecolor": "white", "edgecolor": "none", "pad": 0.2, "alpha": 0.7})
