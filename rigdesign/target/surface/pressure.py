"""A pressure over the outline, as a load in plan."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.brief.model import Outline, PressureLoad
from rigdesign.target.curve import Floats
from rigdesign.target.plan_load import Direction, Projected, Projection, Sums
from rigdesign.target.surface.clip import Triangles, clipped
from rigdesign.target.surface.mesh import carried_on, covered_pieces, mesh_of
from rigdesign.target.surface.strips import strips_of

if TYPE_CHECKING:
    from shapely import Polygon

# An edge that turns this little along the direction, per length, stands on one cut: the slope of the load jumps there.
_SQUARE = 1e-9
_SAME_BREAK = 1e-10


@dataclass(frozen=True)
class Pressure(Projected):
    """A pressure linear over triangles inside the outline; those of `covered` lie between the map's points, those of
    `beyond` outside them.

    V, M and T of it are exact to 1e-9 of what its total would bring.
    """

    covered: Triangles
    beyond: Triangles
    outline: Outline

    @cached_property
    def triangles(self) -> Triangles:
        """All triangles."""
        return Triangles.joined(self.covered, self.beyond)

    @cached_property
    def share_beyond(self) -> float:
        """The part of ∫|p| dA that rests on values beyond the outermost points, as a fraction."""
        sizes = [float((2.0 * part.along_z - part.force).sum()) for part in (self.covered, self.beyond)]
        return sizes[1] / sum(sizes) if sum(sizes) > 0 else 0.0

    @cached_property
    def by_sign(self) -> tuple[float, float]:
        """What the positive and what the negative pressures bring [N]: two numbers, ≥ 0 and ≤ 0."""
        along = float(self.triangles.along_z.sum())
        return along, float(self.triangles.force.sum()) - along

    def _project(self, direction: Direction) -> Projection:
        a_x, a_y = direction
        x, y = self.triangles.corners[:, :, 0], self.triangles.corners[:, :, 1]
        s, n = x * a_x + y * a_y, y * a_x - x * a_y
        return Projection(*strips_of(s, n, self.triangles.values, self.triangles.sign, self._breaks(s, n, direction)))

    def _breaks(self, s: Floats, n: Floats, direction: Direction) -> Floats:
        """Where the load or its slope jumps: at corners of the outline, and at edges of triangles that stand on a cut.

        Where a corner inside the outline passes a cut, the pressure is continuous, and so are the load and its slope.
        """
        corners = self.outline.x * direction.a_x + self.outline.y * direction.a_y
        step, across = np.abs(s - np.roll(s, 1, axis=1)), np.abs(n - np.roll(n, 1, axis=1))
        standing = s[step <= _SQUARE * across]
        low, high = float(corners.min()), float(corners.max())
        inner = np.sort(np.concatenate([corners, standing]))
        inner = inner[(inner > low) & (inner < high)]
        found = np.concatenate([[low], inner, [high]])
        close = _SAME_BREAK * (high - low)
        kept = found[np.append(True, np.diff(found) > close)]
        if high - kept[-1] <= close:
            kept = kept[:-1] if kept.size > 1 else kept
        return np.append(kept, high)

    @cached_property
    def sums(self) -> Sums:
        """Sum and first moments."""
        part = self.triangles
        # ∫ p r dA of a triangle: its area over 12 times (Σp Σr + Σ p r)
        weight = part.values.sum(axis=1, keepdims=True) + part.values
        first = (part.area[:, None, None] / 12.0 * weight[:, :, None] * part.corners).sum(axis=(0, 1))
        return Sums(float(part.force.sum()), float(first[0]), float(first[1]))

    def inside(self, areas: Sequence[Polygon]) -> Floats:
        """Force [N] in each of the areas (k,)."""
        import shapely

        part = self.triangles
        polygons = shapely.polygons(part.corners)
        force = part.force
        tree = shapely.STRtree(polygons)
        result = np.zeros(len(areas))
        for number, area in enumerate(areas):
            shapely.prepare(area)
            near = np.sort(tree.query(area))
            whole = shapely.covers(area, polygons[near])
            cut = near[~whole]
            common = shapely.intersection(polygons[cut], area)
            result[number] = force[near[whole]].sum() + _force_of(part, cut, common)
        return result


def _force_of(triangles: Triangles, which: np.ndarray, common: np.ndarray) -> float:
    """∫ p dA over parts `common` (k,) of triangles `which` (k,): area times the pressure at the centroid."""
    import shapely

    area = shapely.area(common)
    real = np.flatnonzero(area > 0)
    centroid = shapely.get_coordinates(shapely.centroid(common[real]))
    corners, values = triangles.corners[which[real]], triangles.values[which[real]]
    u, v, r = corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0], centroid - corners[:, 0]
    twice = u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0]
    second = (r[:, 0] * v[:, 1] - r[:, 1] * v[:, 0]) / twice
    third = (u[:, 0] * r[:, 1] - u[:, 1] * r[:, 0]) / twice
    pressure = values[:, 0] + second * (values[:, 1] - values[:, 0]) + third * (values[:, 2] - values[:, 0])
    pressure = np.clip(pressure, values.min(axis=1), values.max(axis=1))
    return float((triangles.sign[which[real]] * area[real] * pressure).sum())


def pressure_over(load: PressureLoad, outline: Outline) -> Pressure:
    """Return a pressure map over an outline, its `times` included.

    Raises
    ------
    BriefError
        If the points span no area, or two of them stand at one place with different pressures.

    Examples
    --------
    >>> deck = Outline(np.array([0.0, 3.0, 3.0, 0.0]), np.array([0.0, 0.0, 2.0, 2.0]))
    >>> rising = PressureLoad(deck.x, deck.y, np.array([0.0, 90.0, 90.0, 0.0]), 1.0, "")
    >>> [round(value, 9) for value in pressure_over(rising, deck).sums]
    [270.0, 540.0, 270.0]
    """
    import shapely

    hull = shapely.convex_hull(shapely.multipoints(np.column_stack([load.x, load.y])))
    # the distance to a convex area is greatest at a corner of the outline
    reach = float(shapely.distance(hull, shapely.points(outline.x, outline.y)).max())
    mesh = mesh_of(replace(load, pressure=load.times * load.pressure), reach)
    covered = clipped(covered_pieces(mesh), outline.polygon)
    size = float(np.hypot(np.ptp(outline.x), np.ptp(outline.y)))
    # points on a border that rounding has bent stand inside the hull by no more than this part of the outline's size
    beyond = clipped(carried_on(mesh, reach + 0.01 * size), outline.polygon)
    return Pressure(covered, beyond, outline)
