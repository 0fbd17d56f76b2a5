"""Pieces of the plan cut off at the outline and taken apart into triangles with a linear pressure."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from rigdesign.target.curve import Floats
from rigdesign.target.surface.mesh import Pieces

if TYPE_CHECKING:
    from shapely import Polygon

# Triangles below this part of the outline's area are the rounding of corners.
_NOTHING = 1e-18


@dataclass(frozen=True)
class Triangles:
    """Triangles in plan: corners (k, 3, 2) [m], pressure at them (k, 3) [Pa], linear between; `sign` (k,) is +1 or −1.

    A piece that is not convex is the sum of triangles about one of its corners, some of which count against it.
    """

    corners: Floats
    values: Floats
    sign: Floats

    @property
    def area(self) -> Floats:
        """Area, signed (k,) [m²]."""
        u, v = self.corners[:, 1] - self.corners[:, 0], self.corners[:, 2] - self.corners[:, 0]
        return np.asarray(self.sign * np.abs(u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0]) / 2.0)

    @property
    def force(self) -> Floats:
        """∫ p dA of each (k,) [N]."""
        return np.asarray(self.area * self.values.mean(axis=1))

    @property
    def along_z(self) -> Floats:
        """What the positive pressures alone bring, of each (k,) [N]."""
        v = np.sort(self.values, axis=1)
        low, mid, high = v.T
        with np.errstate(divide="ignore", invalid="ignore"):
            # one corner above zero: a small triangle there; one below: the whole less a small triangle there
            tip = high**3 / ((high - mid) * (high - low)) / 3.0
            notch = -(low**3) / ((mid - low) * (high - low)) / 3.0
        whole = v.mean(axis=1)
        part = np.where(mid <= 0, tip, whole + notch)
        return np.asarray(self.area * np.where(low >= 0, whole, np.where(high <= 0, 0.0, part)))

    @classmethod
    def joined(cls, first: Triangles, second: Triangles) -> Triangles:
        """Return both together."""
        return cls(
            np.concatenate([first.corners, second.corners]),
            np.concatenate([first.values, second.values]),
            np.concatenate([first.sign, second.sign]),
        )


def clipped(pieces: Pieces, outline: Polygon) -> Triangles:
    """Return the part of the pieces that lies inside the outline."""
    import shapely

    sizes = np.array([len(corners) for corners in pieces.corners])
    every = np.concatenate(pieces.corners)
    rings = shapely.linearrings(every, indices=np.repeat(np.arange(sizes.size), sizes))
    polygons = shapely.polygons(rings)
    shapely.prepare(outline)
    whole = shapely.covers(outline, polygons)
    cut = np.flatnonzero(~whole & shapely.intersects(outline, polygons))
    parts, number = shapely.get_parts(shapely.intersection(polygons[cut], outline), return_index=True)
    areas = shapely.get_type_id(parts) == shapely.GeometryType.POLYGON
    inside = np.concatenate([polygons[whole], parts[areas]])
    piece = np.concatenate([np.flatnonzero(whole), cut[number[areas]]])
    return _taken_apart(inside, piece, pieces, _NOTHING * float(outline.area))


def _taken_apart(polygons: NDArray[np.object_], piece: NDArray[np.intp], pieces: Pieces, least: float) -> Triangles:
    """Triangles about the first corner of each polygon; `piece` tells whose pressure it has."""
    import shapely

    rings = shapely.get_exterior_ring(polygons)
    places, ring = shapely.get_coordinates(rings, return_index=True)
    count = np.bincount(ring, minlength=rings.size) - 1  # the first corner is repeated at the end
    start = np.concatenate([[0], np.cumsum(count + 1)[:-1]]).astype(np.intp)
    each = np.maximum(count - 2, 0)
    owner = np.repeat(np.arange(rings.size), each)
    step = np.arange(owner.size) - np.repeat(np.cumsum(each) - each, each)
    first = start[owner]
    corners = places[np.stack([first, first + step + 1, first + step + 2], axis=1)]
    of = piece[owner]
    away = corners - pieces.origin[of][:, None, :]
    values = pieces.level[of][:, None] + (away * pieces.slope[of][:, None, :]).sum(axis=2)
    values = np.clip(values, pieces.low[of][:, None], pieces.high[of][:, None])
    u, v = corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0]
    twice = u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0]
    turning = np.where(shapely.is_ccw(rings), 1.0, -1.0)[owner]
    kept = np.abs(twice) > 2.0 * least
    return Triangles(corners[kept], values[kept], np.sign(twice * turning)[kept])
