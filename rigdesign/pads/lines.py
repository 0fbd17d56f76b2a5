"""Given hard points: which band uses N of them can reach, proven over sets of lines.

Between two neighbouring pads the path P is a line, and a line is a point in a plane: its ordinate and its slope.  The
tube's edges over a stretch are half planes there, so the lines that keep the tube between pads i and j form a convex
polygon T_ij.  A pad at j turns the line by a slope change equal to its force, which moves the point straight along the
slope axis by any force between the least and the largest.  So the lines that can leave place j after k pads are

    S_k(j) = ∪_i [ S_{k−1}(i) ∩ T_ij ]  +  {(0, F): F_least ≤ F ≤ F_largest},

and N pads can keep the tube exactly if some line of S_{N−1} reaches a last pad that turns it into zero.  This is
dynamic programming over polygons.  The union is replaced by convex hulls, which can only let more lines in: "not
reachable" is a proof, "reachable" is confirmed by a linear programme over the places found.  Where that fails, the
hulls are taken over fewer sets: those only that came by the same last two, three, … places.

Coordinates: η = (line at the place − wanted path) / `rise`, σ = (slope − wanted slope) / `turn`, so that polygons are
round.  The tube is widened by SLACK, far below any tolerance that is reported, against round-off.
"""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

import numpy as np
import shapely
from numpy.typing import NDArray

from rigdesign.pads.convex import HalfPlanes, Indices, cut_all, half_planes, hulls, joined
from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

# The tube is widened by this fraction of the scale of its coordinates.
SLACK = 1e-8
# More sets of lines than this in one step are not followed.
MOST_SETS = 20_000
# Nor is a question answered with more pairs of places, or with more pairs times pads: one near this takes ten seconds.
MOST_PAIRS, MOST_PAIRS_TIMES_PADS = 8_000, 80_000


class TooManySetsError(Exception):
    """The sets of lines, told apart by as many places as asked for, are too many to follow."""


@dataclass(frozen=True)
class Places:
    """Where pads may stand: `x` (n,) [m] sorted; `least`, `largest` force of a pad [N], least `pitch` of two [m]."""

    x: Floats
    least: float
    largest: float
    pitch: float


@dataclass(frozen=True)
class _Arcs:
    """Pairs of places `start`, `end` (k,), and a polygon of lines for each: a stack (k, v, 2).

    `key` (k,) tells sets apart that came by different places before.
    """

    start: Indices
    end: Indices
    stack: Floats
    key: Indices


@dataclass(frozen=True)
class _Sets:
    """A polygon of lines at each of the places `at` (k,), rising: a stack (k, v, 2)."""

    at: Indices
    stack: Floats


class LineSets:
    """Sets of lines over given places for one tube; `reach` answers for one band use."""

    def __init__(self, tube: Tube, places: Places, count: int) -> None:
        """Prepare the gaps between `places`; `count` pads set the scale of the coordinates."""
        self.tube, self.places, self.n = tube, places, places.x.size
        span = tube.x[-1] - tube.x[0]
        self.rise = tube.total * span / (16 * count**2)
        self.turn = tube.total / count
        self.wanted = np.interp(places.x, tube.x, tube.moment_wanted)
        self.wanted_slope = -np.interp(places.x, tube.x, tube.shear_wanted)
        self.largest = min(places.largest, tube.total)
        self.rows = self._gap_rows()

    def _gap_rows(self) -> Indices:
        """Rows of the tube in each gap between neighbouring places (n − 1, r), filled up by repeating the last."""
        at, rows = self.tube.x, []
        for a, b in pairwise(self.places.x):
            first, last = np.searchsorted(at, a, side="left"), np.searchsorted(at, b, side="right")
            # of a jump at an end the side inside the gap counts
            first += int(first + 1 < at.size and at[first + 1] == a)
            last -= int(last - 2 >= first and at[last - 2] == b)
            rows.append(np.arange(first, last))
        most = max((row.size for row in rows), default=1)
        filled = [np.append(row, np.full(most - row.size, row[-1])) for row in rows]
        return np.array(filled, dtype=int).reshape(len(rows), most)

    # -- lines that keep the tube over a stretch --------------------------------------------------------------

    def _slopes(self, use: float) -> tuple[Floats, Floats]:
        """Least and largest slope in each gap (n − 1,): falling, never steeper than −R, the shear band kept."""
        tube, low, high = self.tube, np.full(len(self.rows), -self.tube.total), np.zeros(len(self.rows))
        if tube.is_judged[1]:
            low = np.maximum(low, (-tube.shear_wanted - use * tube.shear_above)[self.rows].max(axis=1))
            high = np.minimum(high, (-tube.shear_wanted + use * tube.shear_below)[self.rows].min(axis=1))
        return low - SLACK * self.turn, high + SLACK * self.turn

    def _planes(self, use: float, at: Indices, gap: Indices) -> HalfPlanes:
        """Half planes, seen from places `at` (k,), of the lines that keep the tube in `gap` (k,)."""
        tube, rows = self.tube, self.rows[gap]
        distance = tube.x[rows] - self.places.x[at][:, None]
        level = self.wanted[at][:, None] + self.wanted_slope[at][:, None] * distance
        slack = SLACK * self.rise
        high = (tube.moment_wanted + use * tube.moment_above)[rows] + slack - level
        low = (tube.moment_wanted - use * tube.moment_below)[rows] - slack - level
        tilt = self.turn * distance / self.rise
        norm = np.hypot(1.0, tilt)
        up = np.stack([1 / norm, tilt / norm], axis=-1)
        along = np.stack([np.zeros(at.size), np.ones(at.size)], axis=-1)[:, None]
        low_s, high_s = self._slopes(use)
        low_s, high_s = (
            (low_s[gap] - self.wanted_slope[at]) / self.turn,
            (high_s[gap] - self.wanted_slope[at]) / self.turn,
        )
        normal = np.concatenate([along, -along, up, -up], axis=1)
        offset = np.concatenate(
            [high_s[:, None], -low_s[:, None], high / (self.rise * norm), -low / (self.rise * norm)], axis=1
        )
        return HalfPlanes(normal, offset)

    def _arcs(self, use: float, pads: int) -> _Arcs:
        """Pairs of places that neighbouring pads can take, and the lines that keep the tube between them."""
        x, huge = self.places.x, 64.0 * self.n * self.n
        everything = np.array([[-huge, -huge], [huge, -huge], [huge, huge], [-huge, huge]])
        start = np.arange(self.n - 1)
        stack, parts = np.repeat(everything[None], start.size, axis=0), []
        for offset in range(1, self.n):
            inside = start + offset < self.n
            start, stack = start[inside], stack[inside]
            stack, left = cut_all(stack, self._planes(use, start, start + offset - 1))
            start = start[left]
            parts.append(_Arcs(start, start + offset, stack, np.zeros(start.size, dtype=int)))
            if not start.size:
                break
            pairs = sum(part.start.size for part in parts)
            if pairs > MOST_PAIRS or pairs * pads > MOST_PAIRS_TIMES_PADS:
                raise TooManySetsError
        start, end = np.concatenate([p.start for p in parts]), np.concatenate([p.end for p in parts])
        far = x[end] - x[start] >= self.places.pitch * (1 - 1e-12)
        start, end, stack = start[far], end[far], joined([p.stack for p in parts])[far]
        order = np.argsort(start, kind="stable")
        return _Arcs(start[order], end[order], stack[order], np.zeros(start.size, dtype=int))

    def _moved(self, stack: Floats, start: Indices, end: Indices) -> Floats:
        """The same lines seen from other places: from `start` (k,) to `end` (k,)."""
        x = self.places.x
        slope = self.wanted_slope[start][:, None] + self.turn * stack[..., 1]
        y = self.wanted[start][:, None] + self.rise * stack[..., 0] + slope * (x[end] - x[start])[:, None]
        eta = (y - self.wanted[end][:, None]) / self.rise
        return np.stack([eta, (slope - self.wanted_slope[end][:, None]) / self.turn], axis=-1)

    # -- first and last pad -----------------------------------------------------------------------------------

    def _kept(self, moment: Floats, shear: float, use: float) -> NDArray[np.bool_]:
        """Where (m,) one given line keeps the tube."""
        tube, slack = self.tube, SLACK * self.rise
        error = moment - tube.moment_wanted
        kept = (error >= -use * tube.moment_below - slack) & (error <= use * tube.moment_above + slack)
        if tube.is_judged[1]:
            error, slack = shear - tube.shear_wanted, SLACK * self.turn
            kept &= (error >= -use * tube.shear_below - slack) & (error <= use * tube.shear_above + slack)
        return np.asarray(kept)

    def _first(self, use: float) -> _Sets:
        """Places that the first pad can take while the first line keeps the tube up to it, and that line there."""
        tube, x = self.tube, self.places.x
        kept = self._kept(tube.total * (tube.jack_x - tube.x), tube.total, use)
        out = tube.x.size if kept.all() else int(np.argmin(kept))
        reach = tube.x[out - 1] if out else -np.inf
        at = np.flatnonzero(x <= reach)
        eta = (tube.total * (tube.jack_x - x[at]) - self.wanted[at]) / self.rise
        sigma = (-tube.total - self.wanted_slope[at]) / self.turn
        return _Sets(at, np.stack([eta, sigma], axis=-1)[:, None])

    def _last(self, use: float) -> _Sets:
        """Places that the last pad can take while zero keeps the tube beyond it, and the lines that it can end."""
        tube, x = self.tube, self.places.x
        kept = self._kept(np.zeros(tube.x.size), 0.0, use)
        into = 0 if kept.all() else tube.x.size - int(np.argmin(kept[::-1]))
        foot = tube.x[into] if into < tube.x.size else np.inf
        at = np.flatnonzero(x >= foot)
        eta = -self.wanted[at] / self.rise
        ends = [
            np.stack([eta, (-f - self.wanted_slope[at]) / self.turn], axis=-1)
            for f in (self.places.least, self.largest)
        ]
        return _Sets(at, np.stack(ends, axis=1))

    # -- dynamic programming over the number of pads ----------------------------------------------------------

    def reach(self, use: float, most: int, exact: bool = True, memory: int = 1) -> tuple[int, ...] | None:
        """Places (indices) of `most` pads, or of the fewest up to `most` unless `exact`, that the sets reach; or None.

        None proves that no such pads keep the tube at this band use.  Sets of lines that came by the same last
        `memory` places are merged into their hull.  Raises `TooManySetsError` if there are more than `MOST_SETS`,
        or more than `MOST_PAIRS` to go through.
        """
        first, last = self._first(use), self._last(use)
        if not first.at.size or not last.at.size:
            return None
        arcs = self._arcs(use, most if exact else 1)
        layers = [_Arcs(first.at, first.at, first.stack, np.zeros(first.at.size, dtype=int))]
        for k in range(1, most + 1):
            if k == most or not exact:
                hit = self._ended(layers[-1], last)
                if hit is not None:
                    return self._retrace(layers, *hit)
            if k < most:
                layers.append(self._step(layers[-1], arcs, memory))
                if not layers[-1].end.size:
                    return None
        return None

    def _turned(self, came: _Arcs, memory: int) -> _Arcs:
        """Lines that leave each place after a pad there turned what came by any allowed force; `end` is the place."""
        turns = [np.array([0.0, force / self.turn]) for force in (self.places.least, self.largest)]
        points = np.concatenate([came.stack + turn for turn in turns], axis=1)
        width = self.n ** (memory - 1)
        group = came.end * width + came.key
        stack, groups = hulls(points.reshape(-1, 2), np.repeat(group, points.shape[1]))
        return _Arcs(groups // width, groups // width, stack, groups % width)

    def _step(self, came: _Arcs, arcs: _Arcs, memory: int) -> _Arcs:
        """Lines that arrive, arc by arc and seen from its end, after one more pad."""
        leaving = self._turned(came, memory)
        first, after = np.searchsorted(arcs.start, leaving.end), np.searchsorted(arcs.start, leaving.end, side="right")
        count = after - first
        if count.sum() > MOST_SETS:
            raise TooManySetsError
        row = np.repeat(np.arange(count.size), count)
        arc = np.arange(row.size) - np.repeat(np.cumsum(count) - count, count) + first[row]
        stack, left = cut_all(leaving.stack[row], half_planes(arcs.stack[arc]))
        row, start, end = row[left], arcs.start[arc[left]], arcs.end[arc[left]]
        key = (leaving.key[row] * self.n + start) % self.n ** (memory - 1)
        return _Arcs(start, end, self._moved(stack, start, end), key)

    def _ended(self, came: _Arcs, last: _Sets) -> tuple[int, Floats] | None:
        """Last place and last line, of those that came, that a last pad can end: the widest choice; None if none."""
        row = np.searchsorted(last.at, came.end)
        can_end = np.flatnonzero(np.isin(came.end, last.at))
        ends = last.stack[row[can_end]]
        eta, sigma = ends[:, 0, 0], ends[..., 1]
        across, along = np.array([1.0, 0.0]), np.array([0.0, 1.0])
        normal = np.broadcast_to(np.stack([across, -across, along, -along]), (can_end.size, 4, 2))
        offset = np.stack([eta, -eta, sigma.max(axis=1), -sigma.min(axis=1)], axis=1) + SLACK
        stack, left = cut_all(came.stack[can_end], HalfPlanes(normal, offset))
        if not left.size:
            return None
        best = int(np.argmax(np.ptp(stack[..., 1], axis=1)))
        return int(came.end[can_end[left[best]]]), stack[best].mean(axis=0)

    # -- the way back -----------------------------------------------------------------------------------------

    def _retrace(self, layers: list[_Arcs], place: int, line: Floats) -> tuple[int, ...]:
        """Places of the pads on one way back from a last line (η, σ) at its last place."""
        pads = [place]
        for k in range(len(layers) - 1, 0, -1):
            into = np.flatnonzero(layers[k].end == pads[-1])
            sets = _shapes(layers[k].stack[into])
            apart = np.round(shapely.distance(sets, shapely.Point(line)), 9)
            best = np.lexsort((-shapely.area(sets), apart))[0]
            start = int(layers[k].start[into[best]])
            near = shapely.get_coordinates(shapely.shortest_line(sets[best], shapely.Point(line)))[0]
            line = self._line_before(near, start, pads[-1], layers[k - 1])
            pads.append(start)
        return tuple(reversed(pads))

    def _line_before(self, line: Floats, start: int, end: int, came: _Arcs) -> Floats:
        """A line that a pad at `start` can turn into `line` (seen from `end`), as near as those that came have one."""
        eta, sigma = self._moved(line[None, None], np.array([end]), np.array([start]))[0, 0]
        least, largest = self.places.least / self.turn, self.largest / self.turn
        before = shapely.LineString([(eta, sigma - least), (eta, sigma - largest - SLACK)])
        into = shapely.convex_hull(shapely.MultiPoint(came.stack[came.end == start].reshape(-1, 2)))
        common = shapely.intersection(before, into)
        if common.is_empty:
            return np.asarray(shapely.get_coordinates(shapely.shortest_line(into, before))[0])
        return np.asarray(shapely.get_coordinates(shapely.centroid(common))[0])


def _shapes(stack: Floats) -> NDArray[np.object_]:
    k, v = stack.shape[:2]
    return np.asarray(
        shapely.convex_hull(shapely.multipoints(stack.reshape(-1, 2), indices=np.repeat(np.arange(k), v)))
    )
