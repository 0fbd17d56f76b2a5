"""Free places, one curve: the exact optimum as a path of fewest links in a tube.

Words: the *path* is the moment of the pads alone, P(x) = Σ F_i (x_i − x) over x_i > x.  With pads of one sign it is
convex, so it is the largest of its *lines*: the first (slope −R, through the jack on the axis), the last (zero), and
one between each two neighbouring pads.  Pads are the corners.

The path keeps below the tube's upper edge exactly if every line does, hence if every line keeps below the lower
convex hull H of that edge.  It keeps above the lower edge if each station is covered by some line.  So the fewest
pads at band use u come from covering the span from the left, each line reaching as far as any line can: through the
point where its predecessor leaves the tube, and touching H as far to the right as it may.  An exchange argument shows
that no other choice needs fewer lines.  Bisection on u then gives the least band use that N pads allow.

Published: fewest-links paths, Imai & Iri (1987) and Suri (1988); cited from memory, not confirmed.
What is approximate: H is taken from stations, which errs by about w h²/8 for a station distance h; with the default
of 400 stations a pad that is below 2e-5 of the moment error.  Corners are found between stations.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property
from itertools import pairwise

import numpy as np
import shapely

from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

# Stations a pad: enough for 1e-5 of the error; fewer beyond 64 pads, where time counts and 1e-4 is plenty.
FINE, COARSE, MANY = 400, 100, 64
# Bisection stops when the band use is known to this fraction.
BISECT_TOLERANCE = 1e-11
# A line may miss an edge by this fraction of the tube's total moment: far below any load cell, above round-off.
ROUND_OFF = 1e-13


@dataclass(frozen=True)
class Line:
    """y = at + slope · (x − x0)."""

    x0: float
    at: float
    slope: float

    def value(self, x: Floats | float) -> Floats:
        """Ordinate at x (m,)."""
        return np.asarray(self.at + self.slope * (x - self.x0))

    def meets(self, other: Line) -> float:
        """Station at which two lines of different slope meet."""
        gap = float(other.value(self.x0)) - self.at
        return self.x0 + gap / (self.slope - other.slope)


@dataclass(frozen=True)
class Path:
    """Pads `x` [m] and forces `force` [N] (n,), positive, that keep the tube at band use `use`."""

    x: Floats
    force: Floats
    use: float


@dataclass(frozen=True)
class _Edges:
    """Edges of the moment tube at one band use, at distinct stations `x` (m,) [m].

    The lower edge has a value on either side of each station (m,) [N·m], and a slope; the upper edge is given by the
    vertices of its lower convex hull H.  `tolerance` [N·m] is far below any error.
    """

    x: Floats
    low_in: Floats
    low_out: Floats
    slope_in: Floats
    slope_out: Floats
    hull_x: Floats
    hull_y: Floats
    tolerance: float

    @cached_property
    def low(self) -> Floats:
        """The lower edge where both its sides hold (m,)."""
        return np.maximum(self.low_in, self.low_out)

    @cached_property
    def needed(self) -> int:
        """Last station that a line other than zero must cover, −1 if none."""
        positive = np.flatnonzero(self.low > self.tolerance)
        if not positive.size:
            return -1
        last = int(positive[-1])
        return min(last + 1, self.x.size - 1) if self.low_out[last] > self.tolerance else last

    def with_foot(self) -> _Edges:
        """The same with a station where the lower edge goes below the axis for good, unless one stands there."""
        last = self.needed - 1
        if last < 0 or self.low_out[last] <= self.tolerance:
            return self
        foot, _ = self.crossing(Line(self.x[last], 0.0, 0.0), last + 1, upward=True)
        if not self.x[last] < foot < self.x[last + 1]:
            return self
        share = (foot - self.x[last]) / (self.x[last + 1] - self.x[last])
        slope = (1 - share) * self.slope_out[last] + share * self.slope_in[last + 1]
        at = last + 1
        return replace(
            self,
            x=np.insert(self.x, at, foot),
            low_in=np.insert(self.low_in, at, 0.0),
            low_out=np.insert(self.low_out, at, 0.0),
            slope_in=np.insert(self.slope_in, at, slope),
            slope_out=np.insert(self.slope_out, at, slope),
        )

    def below(self, line: Line) -> bool:
        """Whether the line keeps below the upper edge."""
        return bool(np.all(line.value(self.hull_x) <= self.hull_y + self.tolerance))

    def leaves(self, line: Line, after: int) -> int:
        """First station, from index `after` on, at which the line is below the lower edge; else their number."""
        step, n = 256, int(self.x.size)
        while after < n:
            part = slice(after, after + step)
            outside = line.value(self.x[part]) < self.low[part] - self.tolerance
            if outside.any():
                return after + int(np.argmax(outside))
            after, step = after + step, 2 * step
        return n

    def crossing(self, line: Line, index: int, upward: bool = False) -> tuple[float, float]:
        """Point (x, y) at which the line crosses the lower edge between stations `index` − 1 and `index`.

        The line goes out of the tube there, or, `upward`, comes in.  At a jump of the edge it is the station itself.
        """
        a, b = self.x[index - 1], self.x[index]
        sign = -1.0 if upward else 1.0
        above = sign * (float(line.value(a)) - self.low_out[index - 1])
        beneath = sign * (float(line.value(b)) - self.low_in[index])
        if beneath >= -self.tolerance:
            return float(b), float(self.low[index])
        if above <= 0:
            return float(a), float(self.low[index - 1])
        # the edge between stations: a parabola through both values with the target's own curvature there
        h = b - a
        bend = -sign * float(self.slope_in[index] - self.slope_out[index - 1]) / (2 * h)
        x = float(a + _first_root(above, (beneath - above) / h - bend * h, bend, h))
        return x, float(line.value(x))


def _edges_of(tube: Tube, use: float, start: float, end: float) -> _Edges:
    """Edges of a tube at a band use, for pads between `start` and `end` [m]."""
    wanted = tube.moment_wanted
    low = wanted - use * tube.moment_below
    high = wanted + use * tube.moment_above
    first = np.append(True, np.diff(tube.x) > 0)
    last = np.append(first[1:], True)
    x = tube.x[first]
    # a corner can stand no further left than `start` and no further right than `end`
    hull = lower_hull(x, np.minimum(high[first], high[last]))
    hull = _hull_through(*hull, start, tube.total * (tube.jack_x - start))
    hull_x, hull_y = _hull_through(*hull, end, 0.0)
    slope = -tube.shear_wanted
    tolerance = ROUND_OFF * tube.total * (x[-1] - x[0])
    edges = _Edges(x, low[first], low[last], slope[first], slope[last], hull_x, hull_y, tolerance)
    return edges.with_foot()


def _first_root(d0: float, d1: float, d2: float, h: float) -> float:
    """Smallest root in [0, h] of d0 + d1 t + d2 t², which is positive at 0 and negative at h."""
    if abs(d2) * h * h < 1e-9 * abs(d0 - (d0 + d1 * h)):
        return min(max(-d0 / d1, 0.0), h)
    root = np.sqrt(max(d1 * d1 - 4 * d2 * d0, 0.0))
    q = -0.5 * (d1 + np.copysign(root, d1))
    roots = [r for r in (q / d2, d0 / q if q else np.inf) if -1e-12 * h <= r <= h * (1 + 1e-12)]
    return float(min(roots)) if roots else float(-d0 * h / (d1 * h))


def lower_hull(x: Floats, y: Floats) -> tuple[Floats, Floats]:
    """Lower convex hull of points (m,) with distinct, sorted x, as its vertices."""
    if np.all(np.diff(np.diff(y) / np.diff(x)) >= 0):
        return x, y
    ring = shapely.get_coordinates(shapely.convex_hull(shapely.MultiPoint(np.stack([x, y], axis=1))))
    chord = y[0] + (y[-1] - y[0]) * (ring[:, 0] - x[0]) / (x[-1] - x[0])
    lower = np.unique(ring[(ring[:, 1] < chord) | (ring[:, 0] == x[0]) | (ring[:, 0] == x[-1])], axis=0)
    first = np.append(True, np.diff(lower[:, 0]) > 0)
    return lower[first, 0], lower[first, 1]


def _hull_through(x: Floats, y: Floats, at_x: float, at_y: float) -> tuple[Floats, Floats]:
    """Lower hull of a convex chain (m,) and one more point, which may lie at, below or above it."""
    if at_y >= np.interp(at_x, x, y):
        return x, y
    left, right = x < at_x, x > at_x
    lx, ly, rx, ry = x[left], y[left], x[right], y[right]
    if lx.size:
        touch = int(np.argmax((at_y - ly) / (at_x - lx)))
        lx, ly = lx[: touch + 1], ly[: touch + 1]
    if rx.size:
        touch = int(np.argmin((ry - at_y) / (rx - at_x)))
        rx, ry = rx[touch:], ry[touch:]
    return np.concatenate([lx, [at_x], rx]), np.concatenate([ly, [at_y], ry])


def _steepest_reach(edges: _Edges, x: float, y: float) -> Line | None:
    """Line through (x, y) with the largest slope that keeps below the upper edge; None if (x, y) is above the hull."""
    if y > np.interp(x, edges.hull_x, edges.hull_y) + edges.tolerance:
        return None
    right = np.searchsorted(edges.hull_x, x, side="right")
    slopes = (edges.hull_y[right:] - y) / (edges.hull_x[right:] - x)
    return Line(x, y, float(slopes.min())) if slopes.size else None


def _next_line(edges: _Edges, x: float, y: float, index: int) -> tuple[Line, int] | None:
    """Line from (x, y) that covers the longest stretch, and the first station that it does not cover.

    `index` is the first station at or beyond x.  None if no line keeps the tube at (x, y).
    """
    line = _steepest_reach(edges, x, y)
    if line is None:
        return None
    best = line, edges.leaves(line, index)
    pivot = index
    while best[1] < edges.x.size:
        # Where the lower edge is not convex the line may leave the tube before it touches the hull: lift it there.
        out = best[1]
        touch = edges.hull_x[
            np.argmin(edges.hull_y - best[0].value(edges.hull_x) + np.where(edges.hull_x > x, 0, np.inf))
        ]
        if edges.x[out] >= touch or out <= pivot:
            break
        lifted = _steepest_reach(edges, float(edges.x[out]), float(edges.low[out]))
        if lifted is None or lifted.value(x) < y - edges.tolerance or not edges.below(lifted):
            break
        reach = edges.leaves(lifted, index)
        if reach <= out:
            break
        pivot, best = out, (lifted, reach)
    return best


def fewest_lines(tube: Tube, use: float, start: float, end: float, most: int) -> list[Line] | None:
    """Lines of the path with the fewest links at band use `use`, or None if it needs more than `most` pads.

    Pads stand between `start` and `end` [m].
    """
    edges = _edges_of(tube, use, start, end)
    line, last = Line(tube.jack_x, 0.0, -tube.total), Line(edges.x[-1], 0.0, 0.0)
    if not (edges.below(line) and edges.below(last)):
        return None
    lines, out = [line], edges.leaves(line, 0)
    while out <= edges.needed:
        found = _next_line(edges, *edges.crossing(lines[-1], out), out) if out > 0 and len(lines) < most else None
        if found is None or found[1] <= out:
            return None
        lines.append(found[0])
        out = found[1]
    return [*lines, last]


def corners(lines: list[Line]) -> tuple[Floats, Floats]:
    """Pads (n,) [m] and forces (n,) [N] of a path given by its n + 1 lines, left to right."""
    x = [left.meets(right) for left, right in pairwise(lines)]
    return np.array(x), np.diff([line.slope for line in lines])


def least_use_path(tube: Tube, count: int, start: float, end: float) -> tuple[Path | None, float]:
    """Return the path of least moment band use with at most `count` pads, and the proven least band use.

    Pads stand between `start` and `end` [m].  None if no path exists at any band use, as when the jack stands off the
    pads' stretch.
    """
    if not start <= tube.jack_x <= end:
        return None, float("inf")
    low, high = 0.0, 1.0
    best = fewest_lines(tube, high, start, end, count)
    while best is None:
        low, high = high, 2 * high
        if high > 1e9:
            return None, float("inf")
        best = fewest_lines(tube, high, start, end, count)
    while high - low > BISECT_TOLERANCE * high and high > 1e-12:
        middle = (low + high) / 2
        lines = fewest_lines(tube, middle, start, end, count)
        if lines is None:
            low = middle
        else:
            best, high = lines, middle
    return Path(*corners(best), high), low


def fewest_pads(tube: Tube, start: float, end: float, most: int) -> int | None:
    """Fewest pads that keep the moment band (band use 1), or None if more than `most` are needed."""
    lines = fewest_lines(tube, 1.0, start, end, most)
    return None if lines is None else len(lines) - 1
