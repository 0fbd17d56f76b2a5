"""The target alone, and the target with the pads: running load above, the specimen with its forces beneath."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.patches import Rectangle

from rigdesign.checks.model import Check
from rigdesign.display import System
from rigdesign.report.figures_parts import MARK, arrow, directions, mark, specimen_strip
from rigdesign.report.figures_sheet import (
    A3,
    A4,
    BLUE,
    GREEN,
    GREY,
    INK,
    VERMILION,
    new_sheet,
    panel,
    paper,
    spread,
    styled,
)
from rigdesign.report.scales import Scale, scale
from rigdesign.target.curve import Curve, Floats
from rigdesign.target.model import Target

LEFT, RIGHT = 26.0, 14.0
"""Margins left and right of the specimen [mm]."""
LONGEST_ARROW = 30.0
"""Length of the largest pad force [mm] on A4; on A3 half as much again."""
BACK_SIDE = 26.0
"""Height that resultant and jack take on the far side of the specimen [mm]."""
LOWEST = 15.0
"""Height of the lower edge of the drawing, above key and caution [mm]."""
DEPTH = 6.0
"""Depth of the specimen's strip [mm]."""
STEPS = 800
"""Stations between the ends at which a curve is drawn, besides its breaks."""


@styled
def target_sheet(target: Target, system: System = "SI") -> Figure:
    """Return the picture of the target alone: running load, point loads, shear and moment; in plan for a surface."""
    if target.brief.specimen.is_surface:
        from rigdesign.report.surface.figures_load import target_in_plan

        return target_in_plan(target, system)
    figure = new_sheet(A4, f"{target.brief.title}: the target", _target_words(target, system))
    width = A4[0] - LEFT - RIGHT
    load = panel(figure, LEFT, 138.0, width, 44.0)
    _running(load, target, system)
    x = _stations(target.total, target)
    for bottom, kind in ((80.0, "shear"), (22.0, "moment")):
        axes = panel(figure, LEFT, bottom, width, 44.0)
        _internal(axes, target, kind, x, system)
    return figure


@styled
def load_and_pads(check: Check, system: System = "SI") -> Figure:
    """Return the picture of the target's load with the pads that replace it, forces to scale; in plan for a surface."""
    target = check.rig.plan.target
    if target.brief.specimen.is_surface:
        from rigdesign.report.surface.figures_load import load_and_pads_in_plan

        return load_and_pads_in_plan(check, system)
    size = A4 if check.rig.plan.n_pads <= 16 else A3
    figure = new_sheet(size, f"{target.brief.title}: load and pads", _target_words(target, system))
    low = size[1] * 0.52
    _running(panel(figure, LEFT, low, size[0] - LEFT - RIGHT, size[1] - low - 26.0), target, system)
    axes = paper(figure)
    _pads(axes, check, size, low - 14.0, system)
    directions(axes, size[0] - 22.0, size[1] - 19.0)
    return figure


def _target_words(target: Target, system: System) -> str:
    force = scale("force", abs(target.resultant), system)
    place = scale("length", 1.0, system)
    way = "+z" if target.resultant > 0 else "−z"
    return (
        f"resultant {force.show(abs(target.resultant))} {force.unit} along {way} at x = {place.show(target.centroid)} "
        f"{place.unit}; forces at the brief's load, the test goes to {100 * target.brief.peak:.4g} % of it"
    )


def _stations(curve: Curve, target: Target) -> Floats:
    """Both sides of every break and stations between (n,), each twice: inboard side first."""
    specimen = target.brief.specimen
    even = np.linspace(specimen.left, specimen.right, STEPS)
    breaks = curve.breaks[(curve.breaks >= specimen.left) & (curve.breaks <= specimen.right)]
    return np.repeat(np.unique(np.concatenate([even, breaks, specimen.supports])), 2)


def _two_sided(function: Callable[[Floats, str], Floats], x: Floats) -> Floats:
    values = np.empty_like(x)
    values[0::2] = function(x[0::2], "inboard")
    values[1::2] = function(x[1::2], "outboard")
    return values


def _running(axes: Axes, target: Target, system: System) -> None:
    """Draw the running load, and the point loads as arrows on the zero line."""
    x = _stations(target.total, target)
    total = _two_sided(target.total.running, x)  # type: ignore[arg-type]
    peak = float(np.max(np.abs(total), initial=0.0))
    unit, place = scale("running load", peak, system), scale("length", 1.0, system)
    axes.fill_between(x / place.size, total / unit.size, color=BLUE, alpha=0.15, linewidth=0)
    axes.plot(x / place.size, total / unit.size, color=BLUE, linewidth=1.6, label="running load of the target")
    if target.brief.specimen.weight is not None:
        net = _two_sided(target.net.running, x)  # type: ignore[arg-type]
        own = _two_sided(target.gravity.running, x)  # type: ignore[arg-type]
        axes.plot(x / place.size, net / unit.size, color=GREEN, linestyle="--", label="what the pads bring")
        axes.plot(x / place.size, own / unit.size, color=GREY, linestyle=":", label="what gravity brings")
    axes.axhline(0.0, color=INK, linewidth=0.8)
    _supports(axes, target, place)
    specimen = target.brief.specimen
    axes.set_xlim(specimen.left / place.size, specimen.right / place.size)
    low, high = axes.get_ylim()
    axes.set_ylim(low, high + 0.25 * (high - low))  # room for the legend
    _point_loads(axes, target, place, system)
    axes.set_ylabel(f"w [{unit.unit}]", size=8)
    axes.set_xlabel(f"x [{place.unit}]", size=8, labelpad=1.5)
    axes.legend(loc="upper right", fontsize=7, frameon=False, ncols=4)


def _point_loads(axes: Axes, target: Target, place: Scale, system: System) -> None:
    at, force = target.total.points
    if not at.size:
        return
    largest = float(np.max(np.abs(force)))
    unit = scale("force", largest, system)
    low, high = axes.get_ylim()
    tips = 0.35 * (high - low) * force / largest
    axes.set_ylim(min(low, 1.2 * float(tips.min())), max(high, 1.2 * float(tips.max())))
    for x, tip in zip(at / place.size, tips, strict=True):
        arrow(axes, (x, 0.0), (x, tip), 1.2, VERMILION)
    axes.plot([], [], color=VERMILION, marker="|", label=f"point loads (largest {unit.show(largest)} {unit.unit})")


def _supports(axes: Axes, target: Target, place: Scale) -> None:
    """Mark the supports on the zero line."""
    at = [x / place.size for x in target.brief.specimen.supports]
    axes.plot(at, [0.0] * len(at), "^", color="white", markeredgecolor=INK, markersize=6, zorder=5)


def _internal(axes: Axes, target: Target, kind: str, x: Floats, system: System) -> None:
    """Draw V or M of the target with its peak."""
    place = scale("length", 1.0, system)
    if kind == "shear":
        values, peak, at = _two_sided(target.shear, x), target.shear_peak, target.shear_peak_x  # type: ignore[arg-type]
        unit, name = scale("force", peak, system), "V"
    else:
        values, peak, at = target.moment(x), target.moment_peak, target.moment_peak_x
        unit, name = scale("moment", peak, system), "M"
    axes.plot(x / place.size, values / unit.size, color=BLUE, linewidth=1.6)
    axes.axhline(0.0, color=INK, linewidth=0.8)
    _supports(axes, target, place)
    specimen = target.brief.specimen
    axes.set_xlim(specimen.left / place.size, specimen.right / place.size)
    axes.set_ylabel(f"{name} [{unit.unit}]", size=8)
    axes.set_xlabel(f"x [{place.unit}]", size=8, labelpad=1.5)
    words = f"peak {kind} {unit.show(peak)} {unit.unit} at x = {place.show(at)} {place.unit}"
    axes.set_title(words, size=8, loc="right", pad=2)


def _pads(axes: Axes, check: Check, size: tuple[float, float], top: float, system: System) -> None:
    """Draw the specimen with footprints, pad forces to scale, hard points, resultant and jack; `top` is free height."""
    rig, brief = check.rig, check.rig.plan.target.brief
    mm_per_m = (size[0] - LEFT - RIGHT) / (brief.specimen.right - brief.specimen.left)

    def at(station: float) -> float:
        return LEFT + (float(station) - brief.specimen.left) * mm_per_m

    up = 1.0 if rig.trees[0].force > 0 else -1.0
    pull = brief.pads.action == "pull"
    side = up if pull else -up  # where the pads are: +1 on the upper face
    longest = LONGEST_ARROW * (1.0 if size[1] <= A4[1] else 1.5)
    front_side = longest + MARK + 20.0
    spare = max(0.0, top - LOWEST - front_side - BACK_SIDE) / 2
    middle = LOWEST + spare + (BACK_SIDE if side > 0 else front_side)
    face, back = middle + side * DEPTH / 2, middle - side * DEPTH / 2
    specimen_strip(axes, brief, at, min(face, back), max(face, back))
    for station in brief.pads.stations:
        axes.plot([at(station)] * 2, [back, back - side * 2.2], color=INK, linewidth=0.8)
    _forces(axes, check, at, (face, side, longest), system)
    _resultant(axes, check, at, (back, side, up), system)
    _pad_key(axes, check, size, system)


def _forces(
    axes: Axes,
    check: Check,
    at: Callable[[float], float],
    place: tuple[float, float, float],
    system: System,
) -> None:
    """Pads as footprints and arrows; numbers and forces beyond the longest arrow, moved apart where crowded."""
    face, side, longest = place
    force = check.statics.pad_force
    largest = float(np.max(np.abs(force)))
    unit = scale("force", largest, system)
    half = check.rig.plan.target.brief.pads.length / 2 * (at(1.0) - at(0.0))
    xs = [at(x) for x in check.rig.pad_x]
    written = spread(xs, MARK + 0.4, LEFT - 4.0, 1e6)
    for k, (x, value) in enumerate(zip(xs, force, strict=True)):
        low, high = sorted((face, face + side * 1.4))
        axes.add_patch(Rectangle((x - half, low), 2 * half, high - low, facecolor=INK, linewidth=0))
        near = face + side * 1.8
        far = near + side * max(longest * abs(value) / largest, 1.5)
        pointing = (near, far) if side * value > 0 else (far, near)
        arrow(axes, (x, pointing[0]), (x, pointing[1]), 1.2, VERMILION)
        rim = face + side * (longest + 4.0)
        axes.plot([x, written[k]], [far + side * 0.6, rim], color=GREY, linewidth=0.4)
        mark(axes, "pad", k + 1, written[k], rim + side * MARK / 2)
        edge = "bottom" if side > 0 else "top"
        axes.text(
            written[k], rim + side * (MARK + 1.0), unit.show(float(value)), size=6.5, rotation=90, ha="center", va=edge
        )


def _resultant(
    axes: Axes, check: Check, at: Callable[[float], float], place: tuple[float, float, float], system: System
) -> None:
    """The target's resultant and the jack on the far side of the specimen."""
    back, side, up = place
    target, tree = check.rig.plan.target, check.rig.trees[0]
    force, length = scale("force", abs(target.resultant), system), scale("length", 1.0, system)
    x = at(target.centroid)
    ends = sorted((back - side * 4.0, back - side * 14.0), reverse=up < 0)
    arrow(axes, (x, ends[0]), (x, ends[1]), 2.0, BLUE)
    words = f"target {force.show(target.resultant)} {force.unit} at x = {length.show(target.centroid)} {length.unit}"
    axes.text(x + 3.0, back - side * 9.0, words, size=7.5, va="center", color=INK)
    mark(axes, "jack", 1, at(tree.jack.x), back - side * 19.0)
    words = f"jack {force.show(tree.force)} {force.unit} at x = {length.show(tree.jack.x)} {length.unit}"
    axes.text(at(tree.jack.x) + 5.0, back - side * 19.0, words, size=7.5, va="center")


def _pad_key(axes: Axes, check: Check, size: tuple[float, float], system: System) -> None:
    brief = check.rig.plan.target.brief
    unit = scale("force", float(np.max(np.abs(check.statics.pad_force))), system).unit
    words = [f"circle: pad, with its force [{unit}] as drilled, arrows to scale", "six corners: jack"]
    words += ["black: footprint"] if brief.pads.length > 0 else []
    words += ["crosses: keep-out"] if brief.pads.keep_out else []
    words += ["ticks: hard points"] if brief.pads.places == "hard points" else []
    words += ["ticks: given places"] if brief.pads.places == "fixed" else []
    words += ["triangles: supports"] if brief.specimen.supports else ["hatched wall: held here"]
    axes.text(10.0, 11.0, ";  ".join(words), size=7, va="center")
