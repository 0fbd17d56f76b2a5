"""Where free pads may move: what the outline, keep-outs, rows and other pads leave them, as linear limits on a move.

A footprint's distance from another one, as a function of its place, is convex, and so never falls faster than its
slope at the start says: a move that keeps the linear limit keeps the gap.  Edges of the room that a pad sees straight
ahead are half planes; so is a corner that stands out towards it.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Brief, Line
from rigdesign.pads.surface.footprints import compatible, footprints, half_sizes, slack, turns
from rigdesign.pads.surface.room import Room
from rigdesign.target.curve import Floats

SEEN = 1e-6
"""Of the span: an edge whose end is nearer than this to the foot of a pad's distance is seen straight ahead."""
APART = 1e-3
"""Where nothing is asked, pads keep apart by this part of their mean pitch: two at one place are one."""


@dataclass(frozen=True)
class MoveLimits:
    """A move (dx, dy) of n pads, stacked (2 n,) [m], keeps the limits if `rows` · move ≥ `least` and low ≤ dx ≤ high.

    On rows dy = `slope` · dx; `slope` is NaN where a pad moves freely.
    """

    rows: Floats
    least: Floats
    low: Floats
    high: Floats
    slope: Floats


@dataclass(frozen=True)
class Ground:
    """Where `count` free pads of a brief may stand and move."""

    brief: Brief
    count: int

    @cached_property
    def room(self) -> Room:
        """The room for one pad."""
        return Room(self.brief)

    @cached_property
    def pitch(self) -> float:
        """Mean distance of pads [m], if they shared the room evenly."""
        area, length = float(self.room.area.area), float(self.room.places.length)
        if self.brief.pads.rows or area <= 0:
            return max(length / self.count, 1e-3 * self._span / self.count)
        return float(np.sqrt(area / self.count))

    @property
    def _span(self) -> float:
        return self.brief.specimen.right - self.brief.specimen.left

    @cached_property
    def gap(self) -> float:
        """Least distance of two footprints [m]."""
        return max(self.brief.pads.gap, APART * self.pitch if self.brief.pads.length == 0 else 0.0)

    def keeps(self, x: Floats, y: Floats) -> bool:
        """Return whether pads at x, y (n,) [m] are all on the room and keep the gap."""
        return bool(self.room.allowed(x, y).all() and compatible(self.brief, x, y).all())

    def on_rows(self, x: Floats, y: Floats) -> Floats:
        """Return y (n,) [m] put onto the nearest rows, at the same x; as it is where there are no rows."""
        rows = self.brief.pads.rows
        return rows_at(rows, x, nearest_rows(rows, x, y)) if rows else y

    def moves(self, x: Floats, y: Floats, reach: float) -> MoveLimits:
        """Return the limits on moves of at most `reach` [m] along x and along y from places that keep everything."""
        n = x.size
        slope, low, high = np.full(n, np.nan), np.full(n, -reach), np.full(n, reach)
        apart, least = self._apart(x, y, reach)
        if not self.brief.pads.rows:
            edge, within = self._edges(x, y, reach)
            return MoveLimits(np.concatenate([apart, edge]), np.concatenate([least, within]), low, high, slope)
        which = nearest_rows(self.brief.pads.rows, x, y)
        for k, row in enumerate(self.brief.pads.rows):
            own = np.flatnonzero(which == k)
            slope[own] = _slopes(row, x[own])
            shrink = np.sqrt(1.0 + slope[own] ** 2)
            ends = self._stretches[k]
            if not ends.size:
                continue
            away = np.maximum(ends[:, 0] - x[own, None], x[own, None] - ends[:, 1])
            mine = ends[np.argmin(away, axis=1)]
            low[own] = np.maximum(np.minimum(mine[:, 0] - x[own], 0.0), -reach / shrink)
            high[own] = np.minimum(np.maximum(mine[:, 1] - x[own], 0.0), reach / shrink)
        return MoveLimits(apart, least, low, high, slope)

    @cached_property
    def _stretches(self) -> list[Floats]:
        """Ends in x (k, 2) [m] of the stretches of each row where a pad may stand."""
        import shapely

        found = []
        for row in self.brief.pads.rows:
            line = shapely.linestrings(np.column_stack([row.x, row.y]))
            parts = shapely.get_parts(shapely.line_merge(shapely.intersection(line, self.room.area)))
            box = shapely.bounds(parts[~shapely.is_empty(parts)]).reshape(-1, 4)
            found.append(box[:, [0, 2]])
        return found

    @cached_property
    def _sides(self) -> tuple[Floats, Floats]:
        """Starts and ends (k, 2) [m] of the edges of the room, which lies to their left."""
        import shapely

        parts = [part for part in shapely.get_parts(self.room.area) if part.geom_type == "Polygon"]
        starts, ends = [np.empty((0, 2))], [np.empty((0, 2))]
        for part in parts:
            oriented = shapely.orient_polygons(part)
            for ring in (oriented.exterior, *oriented.interiors):
                at = shapely.get_coordinates(ring)
                starts.append(at[:-1])
                ends.append(at[1:])
        return np.concatenate(starts), np.concatenate(ends)

    def _edges(self, x: Floats, y: Floats, reach: float) -> tuple[Floats, Floats]:
        """Half planes of the room's edges that pads within reach see."""
        start, end = self._sides
        if not start.size:
            return np.empty((0, 2 * x.size)), np.empty(0)
        side = end - start
        length = np.hypot(side[:, 0], side[:, 1])
        unit = side / length[:, None]
        off = np.stack([x, y], axis=-1)[:, None, :] - start
        along = off[..., 0] * unit[:, 0] + off[..., 1] * unit[:, 1]
        left = off[..., 1] * unit[:, 0] - off[..., 0] * unit[:, 1]
        foot = np.clip(along, 0.0, length)
        away = np.hypot(along - foot, left)
        hair = SEEN * self._span
        ahead = (np.abs(along - foot) <= hair) & (left >= -hair) & (away <= 1.5 * reach)
        pad, edge = np.nonzero(ahead)
        normal = np.stack([-unit[edge, 1], unit[edge, 0]], axis=-1)
        room = left[pad, edge]
        # a corner that stands out: the nearest edge is seen askew
        nearest = np.argmin(away, axis=1)
        each = np.arange(x.size)
        askew = (np.abs(along - foot)[each, nearest] > hair) & (away[each, nearest] <= 1.5 * reach)
        corner = np.flatnonzero(askew)
        towards = off[corner, nearest[corner]] - foot[corner, nearest[corner], None] * unit[nearest[corner]]
        far = away[corner, nearest[corner]]
        pad, room = np.concatenate([pad, corner]), np.concatenate([room, far])
        normal = np.concatenate([normal, towards / far[:, None]])
        rows = np.zeros((pad.size, 2 * x.size))
        rows[np.arange(pad.size), pad] = normal[:, 0]
        rows[np.arange(pad.size), x.size + pad] = normal[:, 1]
        return rows, -np.maximum(room, 0.0)

    def _apart(self, x: Floats, y: Floats, reach: float) -> tuple[Floats, Floats]:
        """Half planes that keep pads within reach of one another apart."""
        first, second, normal, between = self.separations(x, y, reach)
        rows = np.zeros((first.size, 2 * x.size))
        each = np.arange(first.size)
        rows[each, second], rows[each, x.size + second] = normal[:, 0], normal[:, 1]
        rows[each, first], rows[each, x.size + first] = -normal[:, 0], -normal[:, 1]
        return rows, self.gap - between

    def separations(
        self, x: Floats, y: Floats, reach: float
    ) -> tuple[NDArray[np.intp], NDArray[np.intp], Floats, Floats]:
        """Return pairs of pads that moves of `reach` can bring too close: first, second (k,), normal (k, 2), distance.

        The distance [m] is measured along the normal, from first to second; negative where footprints overlap.
        """
        import shapely

        half_length, half_width = half_sizes(self.brief)
        far = 2 * np.hypot(half_length, half_width) + self.gap + 3 * reach
        first, second = np.nonzero(np.triu(np.hypot(x[:, None] - x, y[:, None] - y) <= far, 1))
        step = np.stack([x[second] - x[first], y[second] - y[first]], axis=-1)
        turn = turns(self.brief, x, y)
        shapes = footprints(self.brief, x, y)
        nearest = shapely.get_coordinates(shapely.shortest_line(shapes[first], shapes[second])).reshape(-1, 2, 2)
        tried = [nearest[:, 1] - nearest[:, 0], step]
        for angle in (turn[first], turn[second]):
            tried += [np.stack([np.cos(angle), np.sin(angle)], -1), np.stack([-np.sin(angle), np.cos(angle)], -1)]
        best, normal = np.full(first.size, -np.inf), np.zeros((first.size, 2))
        for way in tried:
            length = np.hypot(way[:, 0], way[:, 1])
            some = length > slack(self.brief)
            unit = np.where(some[:, None], way / np.where(some, length, 1.0)[:, None], 0.0)
            unit = unit * np.where((unit * step).sum(axis=1) < 0, -1.0, 1.0)[:, None]
            between = (unit * step).sum(axis=1)
            for angle in (turn[first], turn[second]):
                cos, sin = np.cos(angle), np.sin(angle)
                between = between - half_length * np.abs(unit[:, 0] * cos + unit[:, 1] * sin)
                between = between - half_width * np.abs(unit[:, 1] * cos - unit[:, 0] * sin)
            better = some & (between > best)
            best, normal = np.where(better, between, best), np.where(better[:, None], unit, normal)
        return first, second, normal, best


def with_room(brief: Brief, step: float) -> Brief:
    """Return the brief with footprints `step` [m] larger all round, so that the drilling has room to shift pads."""
    pads = brief.pads
    width = None if pads.width is None else pads.width + 2 * step
    return replace(brief, pads=replace(pads, length=pads.length + 2 * step, width=width))


def nearest_rows(rows: tuple[Line, ...], x: Floats, y: Floats) -> NDArray[np.intp]:
    """Return which row is nearest across to each of the places x, y (n,) [m]."""
    return np.asarray(np.argmin([np.abs(row.at(x) - y) for row in rows], axis=0))


def rows_at(rows: tuple[Line, ...], x: Floats, which: NDArray[np.intp]) -> Floats:
    """Return y (n,) [m] at x (n,) [m], each of its own row."""
    every = np.stack([row.at(x) for row in rows])
    return np.asarray(every[which, np.arange(x.size)])


def _slopes(row: Line, x: Floats) -> Floats:
    """Slope of a row's stretch at x (n,)."""
    at = np.clip(np.searchsorted(row.x, x, side="right") - 1, 0, row.x.size - 2)
    return np.asarray((np.diff(row.y) / np.diff(row.x))[at])
