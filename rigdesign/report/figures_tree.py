"""The tree in elevation: pads at their true stations, levers tier by tier, every number in a mark of its kind.

The tree of a plan rig is drawn branch by branch, pads at equal distances: seen from the side its levers would hide each
other.
"""

from __future__ import annotations

from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.patches import Rectangle

from rigdesign.checks.model import Check
from rigdesign.display import System, counted
from rigdesign.report.figures_parts import MARK, arrow, directions, holes, mark, specimen_strip
from rigdesign.report.figures_sheet import GREY, INK, PALE, new_sheet, paper, spread, styled, text_width
from rigdesign.report.scales import scale
from rigdesign.report.tree_layout import (
    FOOT,
    HEAD,
    JACK_ARROW,
    MARGIN,
    Bar,
    Label,
    Layout,
    plan_sheet,
)

SPECIMEN_DEPTH = 6.0
"""Depth of the specimen's strip on the sheet [mm]."""


@styled
def elevation(check: Check, system: System = "SI") -> Figure:
    """Return the sheet of the tree of a checked rig (one jack): A4 to 12 pads, A3 to 40, longer beyond."""
    layout = plan_sheet(check, system)
    plan = check.rig.plan
    tree = check.rig.trees[0]
    title = f"{plan.target.brief.title}: the tree"
    jack = f"{layout.frame.loads.show(tree.force)} {layout.frame.loads.unit}"
    brief = plan.target.brief
    figure = new_sheet(layout.size, title, _words(check, jack, system))
    axes = paper(figure)
    side = _Side(check, layout)
    low, high = sorted((side.y(0.0), side.y(-SPECIMEN_DEPTH)))
    if brief.specimen.is_surface:
        left, right = layout.frame.at(brief.specimen.left), layout.frame.at(brief.specimen.right)
        axes.add_patch(Rectangle((left, low), right - left, high - low, facecolor=PALE, edgecolor=INK, linewidth=0.8))
    else:
        specimen_strip(axes, brief, layout.frame.at, low, high)
    _pads(axes, check, layout, side, system)
    for bar in layout.bars:
        _lever(axes, bar, layout, side)
    _jack(axes, layout, side, f"jack {jack}, {_action(check)}", check)
    _key(axes, layout, system, brief.specimen.is_surface)
    if not brief.specimen.is_surface:
        directions(axes, layout.size[0] - 28.0, layout.size[1] - 20.0)
    return figure


def _words(check: Check, jack: str, system: System) -> str:
    """The line beneath the title: what there is, where the jack stands, and what is to scale."""
    tree, place = check.rig.trees[0], scale("length", 1.0, system)
    n_pads, n_levers = check.rig.plan.n_pads, len(tree.pieces)
    if not check.rig.plan.target.brief.specimen.is_surface:
        return (
            f"{counted(n_pads, 'pad')}, {counted(n_levers, 'lever')}, jack {jack} at x = {place.show(tree.jack.x)} "
            f"{place.unit}; seen along the y axis, stations to scale, heights not"
        )
    n_plates = sum(piece.kind == "plate" for piece in tree.pieces)
    parts = [counted(n_pads, "pad"), counted(n_levers - n_plates, "lever"), counted(n_plates, "plate")]
    at = f"x = {place.show(tree.jack.x)}, y = {place.show(tree.jack.y)} {place.unit}"
    return (
        f"{', '.join(parts)}, jack {jack} at {at}; "
        "who hangs with whom, branch by branch; nothing is to scale here, see the plan"
    )


class _Side:
    """Turns reach into a height on the paper: the tree is above the specimen or below it."""

    def __init__(self, check: Check, layout: Layout) -> None:
        pull = check.rig.plan.target.brief.pads.action == "pull"
        self.up = 1.0 if (check.rig.trees[0].force > 0) == pull else -1.0
        used = layout.far_side + layout.jack_reach + JACK_ARROW
        spare = max(0.0, layout.size[1] - HEAD - FOOT - used) / 2
        low = FOOT + spare
        self.face = low + layout.far_side if self.up > 0 else low + JACK_ARROW + layout.jack_reach

        self.edge = "top" if self.up > 0 else "bottom"

    def y(self, reach: float) -> float:
        return self.face + self.up * reach


def _pads(axes: Axes, check: Check, layout: Layout, side: _Side, system: System) -> None:
    rig, frame = check.rig, layout.frame
    is_surface = rig.plan.target.brief.specimen.is_surface
    half = 1.6 if is_surface else rig.plan.target.brief.pads.length / 2 * frame.mm_per_m
    place = scale("length", 1.0, system)
    line = frame.line + 0.5
    written = _written(layout, line)
    tops = _hanging_from(layout)
    rows = {f"F [{frame.loads.unit}]": [frame.loads.show(float(force)) for force in check.statics.pad_force]}
    rows[f"x [{place.unit}]"] = [place.show(float(x)) for x in rig.pad_x]
    if is_surface:
        rows[f"y [{place.unit}]"] = [place.show(float(y)) for y in rig.pad_y]
    near = -SPECIMEN_DEPTH - 3.0
    reaches = [near]
    for texts in list(rows.values())[:-1]:
        reaches.append(reaches[-1] - 2.0 - max(text_width(text, frame.font) for text in texts))
    _row_heads(axes, side, reaches, list(rows))
    for k, x in enumerate(layout.pad_x):
        low, high = sorted((side.y(0.0), side.y(1.4)))
        axes.add_patch(Rectangle((x - half, low), 2 * half, high - low, facecolor=INK, edgecolor=INK, linewidth=0.4))
        height = 3.0 + MARK / 2 + layout.pad_rows[k] * (MARK + 0.8)
        top = tops.get(f"pad {k + 1}", layout.jack_reach)
        axes.plot([x, x], [side.y(1.4), side.y(top)], color=INK, linewidth=0.7, zorder=2)
        mark(axes, "pad", k + 1, x, side.y(height))
        axes.plot([x, written[k]], [side.y(-SPECIMEN_DEPTH), side.y(near + 0.4)], color=GREY, linewidth=0.4)
        for texts, reach in zip(rows.values(), reaches, strict=True):
            axes.text(written[k], side.y(reach), texts[k], size=frame.font, rotation=90, ha="center", va=side.edge)


def _written(layout: Layout, line: float) -> list[float]:
    """Where the numbers of each pad stand along the sheet: under it, moved apart where pads crowd."""
    order = sorted(range(len(layout.pad_x)), key=lambda k: layout.pad_x[k])
    apart = spread([layout.pad_x[k] for k in order], line, line / 2 + 1.0, layout.size[0] - line / 2 - 1.0)
    return [place for _, place in sorted(zip(order, apart, strict=True))]


def _row_heads(axes: Axes, side: _Side, reaches: list[float], heads: list[str]) -> None:
    """Say at the left margin what the rows of numbers under the pads are."""
    for reach, head in zip(reaches, heads, strict=True):
        axes.text(2.5, side.y(reach), head, size=7, ha="left", va=side.edge, color=INK)


def _hanging_from(layout: Layout) -> dict[str, float]:
    """Reach of the hole that each pad or lever hangs in, by its name."""
    return {name: bar.reach for bar in layout.bars for name, _ in bar.ends}


def _lever(axes: Axes, bar: Bar, layout: Layout, side: _Side) -> None:
    places = [x for _, x in bar.ends]
    y = side.y(bar.reach)
    if bar.is_plate:
        size = max(places) - min(places) + 2.4, 1.8
        axes.add_patch(
            Rectangle((min(places) - 1.2, y - 0.9), *size, facecolor=PALE, edgecolor=INK, linewidth=0.9, zorder=3)
        )
    else:
        axes.plot([min(places), max(places)], [y, y], color=INK, linewidth=1.8, solid_capstyle="round", zorder=3)
    holes(axes, places, y)
    top = _hanging_from(layout).get(f"lever {bar.number}", layout.jack_reach)
    axes.plot([bar.pivot_x, bar.pivot_x], [y, side.y(top)], color=INK, linewidth=0.7, zorder=2)
    mark(axes, "lever", bar.number, bar.pivot_x, y)
    for label in bar.labels:
        _text(axes, label, side, layout.frame.font)


def _text(axes: Axes, label: Label, side: _Side, font: float) -> None:
    axes.text(
        label.x, side.y(label.reach), label.text, size=font, rotation=90 if label.upright else 0,
        ha="center", va="center", color=INK, zorder=6,
    )  # fmt: skip


def _action(check: Check) -> str:
    way = "up" if check.rig.trees[0].force > 0 else "down"
    return f"{check.rig.plan.target.brief.pads.action}ing {way}"


def _jack(axes: Axes, layout: Layout, side: _Side, words: str, check: Check) -> None:
    y = side.y(layout.jack_reach)
    up = 1.0 if check.rig.trees[0].force > 0 else -1.0
    tail, head = sorted((y + side.up * MARK, y + side.up * (MARK + 8.0)), reverse=up < 0)
    arrow(axes, (layout.jack_x, tail), (layout.jack_x, head), 1.2)
    mark(axes, "jack", 1, layout.jack_x, y)
    right = layout.jack_x < layout.size[0] * 0.7
    shift = MARK if right else -MARK
    axes.text(layout.jack_x + shift, y, words, size=8, weight="bold", ha="left" if right else "right", va="center")


def _key(axes: Axes, layout: Layout, system: System, is_surface: bool) -> None:
    y = FOOT - 9.5
    loads, arms, length = layout.frame.loads.unit, layout.frame.arms.unit, scale("length", 1.0, system).unit
    items = [("pad", "pad"), ("lever", "lever or plate" if is_surface else "lever, at its pivot"), ("jack", "jack")]
    x = MARGIN
    for kind, words in items:
        mark(axes, kind, 1, x, y)
        axes.text(x + 4.0, y, words, size=7, va="center")
        x += 11.0 + 1.45 * len(words)
    axes.plot([x - 1.5, x + 3.0], [y, y], color=INK, linewidth=1.8)
    holes(axes, [x - 1.5, x + 3.0], y)
    words = (
        f"at a lever: arms to its end holes A and B [{arms}], then its load [{loads}]    "
        f"at a pad: its force [{loads}], then its x [{length}]"
    )
    if is_surface:
        words = (
            f"bar: lever, broad: plate; arms to A and B, distances to A, B and C [{arms}], then the load [{loads}]    "
            f"at a pad: its force [{loads}], its x and y [{length}]"
        )
    axes.text(x + 6.0, y, words, size=7, va="center")
