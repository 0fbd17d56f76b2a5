"""How pads' tributary shares change as pads move, from the load gathered in small cells.

Where pad i moves by δ, the border to its neighbour j moves at a place z on it by δ · (z − p_i) / |p_j − p_i| towards j,
and takes what load it sweeps from j to i.  The load stands on a fine grid of points; those within a point's distance
of a border tell how much load there is along it.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

CELLS = 360
"""Cells in which the load is gathered, about."""
POINTS = 3
"""Points along each side of a cell that share its load."""


@dataclass(frozen=True)
class ShareSlopes:
    """The net load of a target on a grid of points."""

    target: Target

    @cached_property
    def _points(self) -> tuple[Floats, Floats, Floats, float]:
        """Points x, y (m,) [m], their load (m,) [N] times the target's sign, and their distance [m]."""
        import shapely

        outline = self.target.brief.specimen.outline
        assert outline is not None
        low_x, low_y, high_x, high_y = outline.polygon.bounds
        side = float(np.sqrt((high_x - low_x) * (high_y - low_y) / CELLS))
        columns, rows = (max(1, round(size / side)) for size in (high_x - low_x, high_y - low_y))
        x, y = np.linspace(low_x, high_x, columns + 1), np.linspace(low_y, high_y, rows + 1)
        left, lower = (part.ravel() for part in np.meshgrid(x[:-1], y[:-1], indexing="ij"))
        width, height = float(x[1] - x[0]), float(y[1] - y[0])
        boxes = shapely.box(left, lower, left + width, lower + height)
        sign = 1.0 if self.target.resultant >= 0 else -1.0
        load = sign * self.target.net_plan.inside(list(boxes)) / POINTS**2
        part = (np.arange(POINTS) + 0.5) / POINTS
        across, along = np.meshgrid(part, part)
        at_x = (left[:, None] + width * along.ravel()).ravel()
        at_y = (lower[:, None] + height * across.ravel()).ravel()
        return at_x, at_y, np.repeat(load, POINTS**2), max(width, height) / POINTS

    def at(self, x: Floats, y: Floats) -> tuple[Floats, Floats]:
        """Return what the shares of pads at x, y (n,) [m] change by as each moves along x and along y, (n, n) [N/m]."""
        n = x.size
        by_x, by_y = np.zeros((n, n)), np.zeros((n, n))
        if n == 1:
            return by_x, by_y
        at_x, at_y, load, apart = self._points
        square = (at_x[:, None] - x) ** 2 + (at_y[:, None] - y) ** 2
        two = np.argpartition(square, 1, axis=1)[:, :2]
        near = np.take_along_axis(square, two, axis=1)
        between = np.hypot(x[two[:, 0]] - x[two[:, 1]], y[two[:, 0]] - y[two[:, 1]])
        # how far a point is from the border between the two pads nearest to it
        off = np.abs(near[:, 0] - near[:, 1]) / (2 * np.maximum(between, 1e-12))
        close = np.flatnonzero((off < apart) & (between > apart))
        weight = load[close] * (1 - off[close] / apart) / apart / between[close]
        for one, other in ((0, 1), (1, 0)):
            i, j = two[close, one], two[close, other]
            for slopes, pad, at in ((by_x, x, at_x), (by_y, y, at_y)):
                swept = weight * (at[close] - pad[i])
                np.add.at(slopes, (i, i), swept)
                np.add.at(slopes, (j, i), -swept)
        return by_x, by_y
