"""The footprint of a pad in plan: a rectangle about its place, turned as the brief asks.

A pad without a width is a strip of none, a pad without a length a line across it or a point: they are shapely's
lines and points, so that distances and overlaps need no cases of their own.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Brief
from rigdesign.pads.limits import TOUCH
from rigdesign.target.curve import Floats
from rigdesign.target.cuts import stretch_at, stretch_directions

if TYPE_CHECKING:
    from shapely import Geometry

Geometries = NDArray[np.object_]
Truths = NDArray[np.bool_]


def slack(brief: Brief) -> float:
    """Lengths [m] that agree to this count as equal: footprints may touch each other, the outline and keep-outs."""
    return TOUCH * (brief.specimen.right - brief.specimen.left)


def given_places(brief: Brief) -> tuple[Floats, Floats]:
    """Return x, y [m] (n,) of the brief's fixed pads or hard points; empty for free places."""
    x = brief.pads.stations
    return x, brief.pads.y if brief.pads.y.size else np.zeros(x.size)


def turns(brief: Brief, x: Floats, y: Floats) -> Floats:
    """Return the directions of the footprints' lengths [rad] at places x, y (n,) [m], counter-clockwise from x.

    Where a table gives them place by place, each place takes that of the nearest place of the table.
    """
    pads = brief.pads
    if pads.turns.size:
        at_x, at_y = given_places(brief)
        return np.asarray(pads.turns[np.argmin(np.hypot(x[:, None] - at_x, y[:, None] - at_y), axis=1)])
    if pads.turn == "along axis":
        a_x, a_y = stretch_directions(brief.specimen)
        return np.asarray(np.arctan2(a_y, a_x)[stretch_at(brief.specimen, x, "outboard")])
    return np.full(x.shape, 0.0 if isinstance(pads.turn, str) else float(pads.turn))


def half_sizes(brief: Brief, less: float = 0.0) -> tuple[float, float]:
    """Return half the length and half the width of a footprint [m], `less` [m] taken off every side."""
    return max(brief.pads.length / 2 - less, 0.0), max((brief.pads.width or 0.0) / 2 - less, 0.0)


def corners(turn: Floats, half_length: float, half_width: float) -> Floats:
    """Return the corners (n, 4, 2) [m] of rectangles about the origin, turned by `turn` (n,), counter-clockwise."""
    along = half_length * np.array([-1.0, 1.0, 1.0, -1.0])
    left = half_width * np.array([-1.0, -1.0, 1.0, 1.0])
    cos, sin = np.cos(turn)[:, None], np.sin(turn)[:, None]
    return np.stack([along * cos - left * sin, along * sin + left * cos], axis=-1)


def footprints(brief: Brief, x: Floats, y: Floats, less: float = 0.0) -> Geometries:
    """Return the footprints of pads at x, y (n,) [m] as shapely geometries (n,), `less` [m] taken off every side.

    They are polygons; lines where length or width is none, points where both are.
    """
    import shapely

    half_length, half_width = half_sizes(brief, less)
    place = np.stack([x, y], axis=-1)
    box = place[:, None, :] + corners(turns(brief, x, y), half_length, half_width)
    if half_length and half_width:
        return np.asarray(shapely.polygons(box), dtype=object)
    if half_length or half_width:
        # corner 0 to corner 2 is the whole of a rectangle without a width or a length
        return np.asarray(shapely.linestrings(box[:, [0, 2]]), dtype=object)
    return np.asarray(shapely.points(place), dtype=object)


def compatible(brief: Brief, x: Floats, y: Floats) -> Truths:
    """Return which pads at x, y (n,) [m] may stand side by side, (n, n): their footprints are `gap` apart or more.

    Footprints may touch where there is no gap, but two pads never share a place.  A pad goes with itself.
    """
    gap, near = brief.pads.gap, slack(brief)
    if gap > near:
        first, second = _pairs(footprints(brief, x, y), "dwithin", distance=gap - near)
    else:
        first, second = _pairs(footprints(brief, x, y, less=near / 2), "intersects")
    result = np.ones((x.size, x.size), bool)
    result[first, second] = False
    np.fill_diagonal(result, True)
    return result


def _pairs(shapes: Geometries, predicate: str, **how: Any) -> NDArray[np.intp]:
    from shapely import STRtree

    if not shapes.size:
        return np.empty((2, 0), dtype=np.intp)
    return np.asarray(STRtree(shapes).query(shapes, predicate=predicate, **how))


def clear_of(shapes: Geometries, area: Geometry) -> Truths:
    """Return which shapes (n,) have no point in common with an area."""
    import shapely

    shapely.prepare(area)
    return ~np.asarray(shapely.intersects(area, shapes), dtype=bool)
