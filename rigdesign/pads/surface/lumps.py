"""The net target in lumps, for tributary shares that are near enough to compare exchanges of pads by."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

ALONG, ACROSS = 60, 24
"""Lumps along the span and across the outline's greatest width."""


@dataclass(frozen=True)
class Lumps:
    """Lumps of load at x, y (k,) [m] with forces (k,) [N], times the sign of the target."""

    x: Floats
    y: Floats
    force: Floats

    def shares(self, x: Floats, y: Floats) -> Floats:
        """Return the load of the lumps nearest to each of the pads at x, y (n,) [m], (n,) [N]."""
        away = (self.x[:, None] - x) ** 2 + (self.y[:, None] - y) ** 2
        share = np.zeros(x.size)
        np.add.at(share, np.argmin(away, axis=1), self.force)
        return share


def lumps(target: Target, sign: float) -> Lumps:
    """Return the net target, lumped over a grid of the outline."""
    import shapely

    outline = target.brief.specimen.outline
    assert outline is not None
    low_x, low_y, high_x, high_y = outline.polygon.bounds
    x, y = np.linspace(low_x, high_x, ALONG + 1), np.linspace(low_y, high_y, ACROSS + 1)
    left, lower = (part.ravel() for part in np.meshgrid(x[:-1], y[:-1], indexing="ij"))
    right, upper = (part.ravel() for part in np.meshgrid(x[1:], y[1:], indexing="ij"))
    cells = shapely.intersection(shapely.box(left, lower, right, upper), outline.polygon)
    cells = cells[shapely.area(cells) > 0]
    centre = shapely.centroid(cells)
    force = sign * target.net_plan.inside(list(cells))
    return Lumps(shapely.get_x(centre), shapely.get_y(centre), force)
