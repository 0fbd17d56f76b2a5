"""How places spread in plan: whether they surround a point, or stand in one line."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.pads.surface.footprints import given_places
from rigdesign.pads.surface.places import usable_points
from rigdesign.pads.surface.room import Room
from rigdesign.target.curve import Floats

# Places that are within this part of the span of a line stand in one line.
IN_LINE = 1e-6
# A point this much of the places' own spread outside their hull is still taken for inside: rounding.
ON_HULL = 1e-9


def usable_places(brief: Brief) -> tuple[Floats, Floats]:
    """Return x, y [m] of the places that pads may use; for free pads the corners of the area or rows they may use."""
    if brief.pads.places == "fixed":
        return given_places(brief)
    if brief.pads.places == "hard points":
        x, y = given_places(brief)
        usable = usable_points(brief)
        return x[usable], y[usable]
    import shapely

    at = shapely.get_coordinates(Room(brief).places)
    return at[:, 0], at[:, 1]


@dataclass(frozen=True)
class Outside:
    """How a point lies outside the hull of some places.

    `distance` [m] to the hull, whose nearest point is at `near_x`, `near_y` [m]; `depth` [m] is how far the places
    reach behind there, square to the side of the hull that the point sees.
    """

    distance: float
    near_x: float
    near_y: float
    depth: float


def outside_hull(x: Floats, y: Floats, px: float, py: float) -> Outside | None:
    """Return how the point px, py [m] lies outside the hull of places x, y (n,) [m], n ≥ 1.

    None where it does not: then forces of one sign at the places can have their resultant there.
    """
    from shapely import MultiPoint, Point
    from shapely.ops import nearest_points

    hull = MultiPoint(np.column_stack([x, y])).convex_hull
    near, point = nearest_points(hull, Point(px, py))
    distance = float(near.distance(point))
    if distance <= ON_HULL * max(float(np.hypot(np.ptp(x), np.ptp(y))), distance):
        return None
    out_x, out_y = (px - near.x) / distance, (py - near.y) / distance
    depth = float(-((x - near.x) * out_x + (y - near.y) * out_y).min())
    return Outside(distance, near.x, near.y, depth)


@dataclass(frozen=True)
class OneLine:
    """A line in plan: through x, y [m] along the unit vector a_x, a_y, which does not point to lesser x."""

    x: float
    y: float
    a_x: float
    a_y: float

    def left(self, x: float, y: float) -> float:
        """How far a place x, y [m] is to the left of the line [m]."""
        return (y - self.y) * self.a_x - (x - self.x) * self.a_y


def one_line(x: Floats, y: Floats, span: float) -> OneLine | None:
    """Return the line in which all places x, y (n,) [m] stand; None if they do not, or all stand at one point."""
    middle = np.array([x.mean(), y.mean()])
    away = np.column_stack([x, y]) - middle
    if np.hypot(*away.T).max(initial=0.0) <= IN_LINE * span:
        return None
    a_x, a_y = np.linalg.svd(away, full_matrices=False)[2][0]
    if a_x < 0 or (a_x == 0 and a_y < 0):
        a_x, a_y = -a_x, -a_y
    line = OneLine(float(middle[0]), float(middle[1]), float(a_x), float(a_y))
    off = away[:, 1] * line.a_x - away[:, 0] * line.a_y
    return line if np.abs(off).max() <= IN_LINE * span else None
