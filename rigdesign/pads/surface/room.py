"""Where the place of a pad may be, as an area: the outline without the places whose footprint would reach over it.

A footprint about a place crosses an edge of the outline where the place lies in the edge swept by the footprint (turned
round, which a rectangle does not notice).  The swept edge is the convex hull of the footprint at both its ends, and
`edge` grows it all round.  Keep-out areas are swept in the same way.  For one direction of the footprints this is
exact but for arcs, which become 64 corners a turn; where footprints follow a kinked axis each of its stretches has
its own.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.brief.model import Brief, Outline
from rigdesign.pads.surface.footprints import (
    Geometries,
    Truths,
    clear_of,
    corners,
    footprints,
    half_sizes,
    slack,
    turns,
)
from rigdesign.target.curve import Floats

if TYPE_CHECKING:
    from shapely import Geometry, Polygon

# Corners of a quarter of a turn where `edge` rounds a corner.
QUARTER = 16


@dataclass(frozen=True)
class Room:
    """Where pads may stand on the surface of a brief, worked out once: keep one for repeated questions."""

    brief: Brief

    def allowed(self, x: Floats, y: Floats) -> Truths:
        """Return which places x, y (n,) [m] can have a pad, whatever the other pads.

        The footprint lies within the outline, `edge` or more from it, and clear of keep-outs; it may touch.
        """
        import shapely

        brief, near = self.brief, slack(self.brief)
        whole = footprints(brief, x, y)
        result = np.asarray(shapely.covers(self._grown, whole), dtype=bool)
        if brief.pads.edge > near:
            result &= ~np.asarray(shapely.dwithin(self.outline.exterior, whole, brief.pads.edge - near), dtype=bool)
        for area in self._shrunk_keep_outs:
            result &= clear_of(whole, area)
        bounds = shapely.bounds(whole).reshape(-1, 4)
        for start, end in brief.pads.keep_out:
            result &= (bounds[:, 2] <= start + near) | (bounds[:, 0] >= end - near)
        return result

    @cached_property
    def area(self) -> Geometry:
        """The places where a pad may stand: a polygon, several, or an empty one.

        Arcs are drawn by their chords, so that a place within 0.12 % of `edge` of a corner may have to be checked.
        """
        return self._area(1.0)

    @cached_property
    def places(self) -> Geometry:
        """What of the area the pads may use: all of it, or the rows within it."""
        return self._on_rows(self.area)

    def nearest(self, x: Floats, y: Floats) -> tuple[Floats, Floats]:
        """Return the allowed places nearest to x, y (n,) [m], on a row where there are rows; there must be one."""
        near_x, near_y = _nearest(self.places, x, y)
        wrong = ~self.allowed(near_x, near_y)
        if wrong.any():
            near_x[wrong], near_y[wrong] = _nearest(self._safe_places, x[wrong], y[wrong])
        return near_x, near_y

    @cached_property
    def _safe_places(self) -> Geometry:
        # arcs drawn by their tangents keep a little more than `edge`
        return self._on_rows(self._area(1 / np.cos(np.pi / (4 * QUARTER))))

    @cached_property
    def outline(self) -> Polygon:
        """The specimen in plan; a room is there for surfaces alone."""
        assert self.brief.specimen.outline is not None
        return self.brief.specimen.outline.polygon

    @cached_property
    def _grown(self) -> Geometry:
        import shapely

        grown = shapely.buffer(self.outline, slack(self.brief), join_style="mitre")
        shapely.prepare(grown)
        return grown

    @cached_property
    def _shrunk_keep_outs(self) -> tuple[Geometry, ...]:
        import shapely

        near = slack(self.brief)
        areas = (shapely.buffer(one.polygon, -near, join_style="mitre") for one in self.brief.pads.keep_out_areas)
        return tuple(area for area in areas if not area.is_empty)

    def _on_rows(self, area: Geometry) -> Geometry:
        import shapely

        rows = self.brief.pads.rows
        if not rows:
            return area
        lines = [shapely.linestrings(np.column_stack([row.x, row.y])) for row in rows]
        return shapely.union_all(shapely.intersection(np.array(lines, dtype=object), area))

    def _area(self, wider: float) -> Geometry:
        """The allowed area, with `edge` times `wider` as the radius of arcs."""
        import shapely

        parts = []
        for turn, stretch in self.directions:
            forbidden = shapely.union_all(np.concatenate(self._forbidden(turn, wider)))
            parts.append(stretch.difference(forbidden))
        return shapely.union_all(parts)

    @cached_property
    def directions(self) -> list[tuple[float, Geometry]]:
        """Directions of free pads' footprints [rad], each with the part of the outline where it holds."""
        import shapely

        specimen = self.brief.specimen
        if self.brief.pads.turn != "along axis":
            return [(float(turns(self.brief, np.zeros(1), np.zeros(1))[0]), self.outline)]
        low_x, low_y, high_x, high_y = self.outline.bounds
        inner = specimen.reference_axis.x[1:-1]
        edges = [low_x - 1.0, *inner.tolist(), high_x + 1.0]
        middle = np.concatenate([specimen.reference_axis.x[:1], inner])
        return [
            (float(turn), self.outline.intersection(shapely.box(start, low_y - 1.0, end, high_y + 1.0)))
            for turn, start, end in zip(
                turns(self.brief, middle, np.zeros(middle.size)), edges[:-1], edges[1:], strict=True
            )
        ]

    def _forbidden(self, turn: float, wider: float) -> list[Geometries]:
        import shapely

        # less than half the slack stays in all, so that a strip as wide as the footprint keeps places in its middle
        near = slack(self.brief) / 4
        box = corners(np.array([turn]), *half_sizes(self.brief, less=near))[0]
        outline = self.brief.specimen.outline
        assert outline is not None
        rim = swept(outline, box)
        edge = (self.brief.pads.edge - near) * wider
        if edge > 0:
            rim = shapely.buffer(rim, edge, quad_segs=QUARTER)
        _, low, _, high = self.outline.bounds
        reach = float(box[:, 0].max())
        stretches = [shapely.box(a - reach, low - 1.0, b + reach, high + 1.0) for a, b in self.brief.pads.keep_out]
        areas = [[*swept(area, box), area.polygon] for area in self.brief.pads.keep_out_areas]
        return [rim, np.array(stretches, dtype=object), *(np.array(one, dtype=object) for one in areas)]


def swept(outline: Outline, box: Floats) -> Geometries:
    """Return the edges of an outline swept by a convex shape about the origin with corners (k, 2) [m]."""
    import shapely

    ends = np.column_stack([outline.x, outline.y])
    both = np.stack([ends, np.roll(ends, -1, axis=0)], axis=1)
    points = (both[:, :, None, :] + box).reshape(ends.shape[0], -1, 2)
    return np.asarray(shapely.convex_hull(shapely.linestrings(points)), dtype=object)


def _nearest(area: Geometry, x: Floats, y: Floats) -> tuple[Floats, Floats]:
    import shapely

    points = shapely.points(x, y)
    found = shapely.get_coordinates(shapely.shortest_line(points, area)).reshape(-1, 2, 2)[:, 1]
    inside = shapely.intersects(area, points)
    return np.where(inside, x, found[:, 0]), np.where(inside, y, found[:, 1])
