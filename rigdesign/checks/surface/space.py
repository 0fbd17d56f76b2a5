"""Remarks of the stage "space": what stands in whose way, in plan.

Footprints lie on the outline, clear of its edge, of keep-outs and of one another; pieces of one tier hang side by side
and neither cross nor come closer than the clearance.  Pieces of different tiers hang above one another.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.checks.geometry import laid
from rigdesign.checks.model import Check
from rigdesign.checks.text import also
from rigdesign.display import show
from rigdesign.findings import Finding
from rigdesign.levers.model import Piece
from rigdesign.target.curve import Floats

if TYPE_CHECKING:
    from numpy.typing import NDArray
    from shapely import Geometry

    Shapes = NDArray[np.object_]

SLACK = 1e-8  # m: a pad at its limit must not fail by what turning and rounding its corners costs


def space_remarks(check: Check) -> Iterator[Finding]:
    """Yield the remarks of this stage, not numbered yet, in a fixed order."""
    from rigdesign.pads.surface.places import footprints

    brief = check.rig.plan.target.brief
    shapes = footprints(brief, check.rig.pad_x, check.rig.pad_y)
    yield from _off_outline(brief, shapes)
    yield from _in_stretches(brief, shapes)
    yield from _in_areas(check, shapes)
    yield from _gaps(brief, shapes)
    yield from _pieces(check)


def _failure(where: str, text: str, value: str, limit: str, remedy: str) -> Finding:
    return Finding("space", "failure", where, text, value, limit, remedy)


def _worst(miss: Floats) -> tuple[int, str, str]:
    """The pad that misses a limit most, counted from 0, its name, and the others in words; miss (n_pads,) > 0."""
    worst = int(np.argmax(miss))
    return worst, f"pad {worst + 1}", also(f"pad {i + 1}" for i in np.flatnonzero(miss > 0) if i != worst)


def _off_outline(brief: Brief, shapes: Shapes) -> Iterator[Finding]:
    import shapely

    assert brief.specimen.outline is not None
    outline, edge = brief.specimen.outline.polygon, brief.pads.edge
    on = shapely.covers(outline.buffer(SLACK, join_style="mitre"), shapes)
    left = np.where(on, shapely.distance(outline.exterior, shapes), -_reach(outline, shapes))
    off = np.where(on, 0.0, np.maximum(-left, SLACK))
    if (off > 0).any():
        worst, name, others = _worst(off)
        yield _failure(
            name,
            f"the pad's footprint reaches off the outline{others}",
            f"by {show(float(off[worst]), 'length')}" if -left[worst] > SLACK else "over a notch of it",
            "on the outline",
            "move the pad, turn it or make it smaller",
        )
    near = np.where(on & (edge > 0), edge - left - SLACK, 0.0)
    if (near > 0).any():
        worst, name, others = _worst(near)
        yield _failure(
            name,
            f"the pad's footprint is too close to the outline{others}",
            show(float(max(left[worst], 0.0)), "length"),
            f"edge {show(edge, 'length')}",
            "move the pad inward, turn it or make it smaller",
        )


def _reach(outline: Geometry, shapes: Shapes) -> Floats:
    """How far the corners of each shape lie off the outline [m], (n,)."""
    import shapely

    return np.array([shapely.distance(outline, shapely.points(shapely.get_coordinates(s))).max() for s in shapes])


def _in_stretches(brief: Brief, shapes: Shapes) -> Iterator[Finding]:
    import shapely

    bounds = shapely.bounds(shapes)
    for low, high in brief.pads.keep_out:
        into = np.minimum(bounds[:, 2] - low, high - bounds[:, 0]) - SLACK
        if (into > 0).any():
            worst, name, others = _worst(into)
            stretch = f"{show(low, 'length', unit='m')} to {show(high, 'length', unit='m')}"
            reached = f"{show(float(bounds[worst, 0]), 'length', unit='m')} to " + show(
                float(bounds[worst, 2]), "length", unit="m"
            )
            yield _failure(
                name,
                f"the pad's footprint reaches into the keep-out from x = {stretch}{others}",
                reached,
                "clear of it",
                "move the pad",
            )


def _in_areas(check: Check, shapes: Shapes) -> Iterator[Finding]:
    import shapely

    for area in check.rig.plan.target.brief.pads.keep_out_areas:
        # touching is no overlap
        inner = area.polygon.buffer(-SLACK, join_style="mitre")
        overlap = shapely.intersects(inner, shapes)
        if overlap.any():
            depth = np.where(overlap, SLACK + shapely.area(shapely.intersection(inner, shapes)), 0.0)
            worst, name, others = _worst(depth)
            x, y = check.rig.pad_x[worst], check.rig.pad_y[worst]
            yield _failure(
                name,
                f'the pad\'s footprint reaches into the keep-out area "{area.name}"{others}',
                f"pad at x = {show(float(x), 'length', unit='m')}, y = {show(float(y), 'length', unit='m')}",
                "clear of it",
                "move the pad",
            )


def _gaps(brief: Brief, shapes: Shapes) -> Iterator[Finding]:
    names = [f"pad {i + 1}" for i in range(shapes.size)]
    found = _closest(shapes, brief.pads.gap)
    if found is None:
        return
    first, second, distance, count = found
    others = f"; so too {count - 1} more" if count > 1 else ""
    yield _failure(
        f"{names[first]} and {names[second]}",
        f"the gap between the pads is too small{others}" if distance > 0 else f"the pads overlap or touch{others}",
        show(distance, "length"),
        show(brief.pads.gap, "length"),
        "move the pads apart, turn them, make them smaller or take fewer",
    )


def _closest(shapes: Shapes, apart: float) -> tuple[int, int, float, int] | None:
    """The two shapes that are closest of those nearer than `apart` [m], their distance, and how many such pairs are.

    Shapes that share more than a border are too near whatever is asked.
    """
    import shapely

    tree = shapely.STRtree(shapes)
    first, second = tree.query(shapes, predicate="dwithin", distance=max(apart - SLACK, 0.0))
    first, second = first[first < second], second[first < second]
    distance = shapely.distance(shapes[first], shapes[second])
    if apart <= SLACK:
        shared = _shared(shapes[first], shapes[second])
        first, second, distance = first[shared], second[shared], distance[shared]
    if not first.size:
        return None
    order = np.lexsort((second, first, distance))
    one = order[0]
    return int(first[one]), int(second[one]), float(distance[one]), int(first.size)


def _shared(one: Shapes, other: Shapes) -> NDArray[np.bool_]:
    """Which pairs overlap by more than rounding: by an area, or, where they have none, by anything at all."""
    import shapely

    overlap = shapely.area(shapely.intersection(one, other))
    flat = (shapely.area(one) == 0) | (shapely.area(other) == 0)
    return np.asarray(flat | (overlap > SLACK * np.minimum(shapely.length(one), shapely.length(other))))


def _pieces(check: Check) -> Iterator[Finding]:
    """Pieces of one tier that cross or come too close, a remark for each tier."""
    clearance = check.rig.plan.target.brief.levers.clearance
    every = [piece for tree in check.rig.trees for piece in tree.pieces]
    for tier in range(1, max((piece.tier for piece in every), default=0) + 1):
        here = [piece for piece in every if piece.tier == tier]
        found = _closest(np.array([in_plan(piece) for piece in here], dtype=object), clearance)
        if found is None:
            continue
        first, second, distance, count = found
        others = f"; so too {count - 1} more of tier {tier}" if count > 1 else ""
        one, other = here[first], here[second]
        yield _failure(
            f"{one.name} and {other.name}",
            f"a {one.kind} and a {other.kind} of tier {tier} cross{others}"
            if distance == 0
            else f"a {one.kind} and a {other.kind} of tier {tier} come too close{others}",
            show(distance, "length"),
            f"clearance {show(clearance, 'length')}",
            "group the pads otherwise, move pads, or allow plates or a smaller clearance",
        )


def in_plan(piece: Piece) -> Geometry:
    """Return a piece as drilled in plan: the line between a lever's end pins, the triangle of a plate."""
    from shapely import MultiPoint

    places = [(piece.pivot.x, piece.pivot.y), *(laid(piece, hole) for hole in piece.ends)]
    return MultiPoint(places).convex_hull
