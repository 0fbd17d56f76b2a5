"""Places of pads in plan: which of the brief's can be used, and where free pads could stand.

A place is allowed where its footprint lies on the specimen and clear of keep-outs; two are compatible where their
footprints keep the gap.  `Room` answers repeated questions about one brief without working everything out again.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Brief
from rigdesign.pads.surface.fitting import most_side_by_side, most_that_fit
from rigdesign.pads.surface.footprints import (
    Truths,
    compatible,
    footprints,
    given_places,
    slack,
    turns,
)
from rigdesign.pads.surface.room import Room
from rigdesign.target.curve import Floats

if TYPE_CHECKING:
    from shapely import Geometry

__all__ = [
    "Room",
    "allowed",
    "compatible",
    "footprints",
    "free_candidates",
    "given_places",
    "most_side_by_side",
    "most_that_fit",
    "nearest_allowed",
    "turns",
    "usable_points",
]

# Places of a grid fall into keep-outs; so many grids are tried for the number asked for.
TRIES = 8
# A column of places lower than this part of the usable length is one place.
POINTED = 1e-6


def allowed(brief: Brief, x: Floats, y: Floats) -> Truths:
    """Return which places x, y (n,) [m] can have a pad, whatever the other pads; see `Room.allowed`."""
    return Room(brief).allowed(x, y)


def nearest_allowed(brief: Brief, x: Floats, y: Floats) -> tuple[Floats, Floats]:
    """Return the allowed places nearest to x, y (n,) [m]; see `Room.nearest`."""
    return Room(brief).nearest(x, y)


def usable_points(brief: Brief) -> NDArray[np.intp]:
    """Return the indices (k,) of the brief's places that are allowed, in order."""
    return np.flatnonzero(allowed(brief, *given_places(brief)))


def free_candidates(brief: Brief, about: int) -> tuple[Floats, Floats]:
    """Return about so many allowed places x, y [m] for free pads, by x, then y; none where nothing is allowed.

    On rows they are even along every stretch of a row that can be used, both its ends included.  Anywhere else they
    follow the specimen: even in x, and at each x even from the lowest to the highest place that can be used.
    """
    room = Room(brief)
    if room.places.is_empty:
        return np.empty(0), np.empty(0)
    found = _along_rows(room, about) if brief.pads.rows else _over_area(room, about)
    kept = found[room.allowed(found[:, 0], found[:, 1])]
    order = np.lexsort((kept[:, 1], kept[:, 0]))
    return kept[order, 0], kept[order, 1]


def _along_rows(room: Room, about: int) -> Floats:
    import shapely

    parts = shapely.get_parts(shapely.line_merge(room.places)) if room.places.length else shapely.get_parts(room.places)
    lengths = shapely.length(parts)
    pitch = max(float(lengths.sum()) / max(about - parts.size, 1), slack(room.brief))
    found = []
    for part, length in zip(parts, lengths, strict=True):
        count = 1 if length <= slack(room.brief) else round(float(length) / pitch) + 1
        at = np.linspace(0.0, float(length), max(count, 2)) if length > slack(room.brief) else np.zeros(1)
        found.append(shapely.get_coordinates(shapely.line_interpolate_point(part, at)) if length else _point(part))
    return np.concatenate(found)


def _point(part: Geometry) -> Floats:
    import shapely

    return np.asarray(shapely.get_coordinates(part)[:1])


def _over_area(room: Room, about: int) -> Floats:
    """The grid whose allowed places are closest to `about` in number, among a few finer ones."""
    asked, best, miss = float(about), np.empty((0, 2)), np.inf
    for _ in range(TRIES):
        grid = _grid(room, asked)
        kept = int(room.allowed(grid[:, 0], grid[:, 1]).sum())
        if abs(kept - about) < miss:
            best, miss = grid, abs(kept - about)
        # by half the way on a logarithmic scale: the number kept jumps by whole rows and columns
        asked *= float(np.sqrt(np.clip(about / max(kept, 1), 0.1, 10.0)))
    return best


def _grid(room: Room, about: float) -> Floats:
    """Columns even in x over the allowed area, each even in y between its ends; both ends included."""
    import shapely

    low_x, low_y, high_x, high_y = room.area.bounds
    length, height = high_x - low_x, float(room.area.area) / max(high_x - low_x, slack(room.brief))
    # (length/pitch + 1)(height/pitch + 1) = about, solved for 1/pitch
    both, plus, less = length * height, length + height, max(about, 1.0) - 1.0
    a_pitch = (np.sqrt(plus**2 + 4 * both * less) - plus) / (2 * both) if both else less / max(plus, slack(room.brief))
    columns, rows = round(length * a_pitch) + 1, round(height * a_pitch) + 1
    # the outermost columns stand a hair inside, where rounding cannot lose them
    hair = min(slack(room.brief), length) / 4
    x = np.linspace(low_x + hair, high_x - hair, columns) if columns > 1 else np.array([(low_x + high_x) / 2])
    ends = np.stack([np.stack([x, np.full(x.size, v)], axis=-1) for v in (low_y - 1.0, high_y + 1.0)], axis=1)
    column = shapely.bounds(shapely.intersection(shapely.linestrings(ends), room.area)).reshape(-1, 4)
    part = np.linspace(0.0, 1.0, rows) if rows > 1 else np.array([0.5])
    # at a pointed tip one place stands for a whole column
    pointed = column[:, 3:4] - column[:, 1:2] < POINTED * (high_x - low_x)
    y = column[:, 1:2] + np.where(pointed, 0.5, part) * (column[:, 3:4] - column[:, 1:2])
    grid = np.stack([np.repeat(x, part.size), y.ravel()], axis=-1)
    return np.unique(grid[~np.isnan(grid[:, 1])], axis=0)
