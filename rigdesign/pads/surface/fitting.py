"""How many pads fit side by side in plan: upper bounds, so that a number beyond them is refused at once.

Free pads have the least of three bounds.  Areas: footprints grown by half the gap do not overlap, and lie in the usable
part of the outline grown likewise.  Strips: so many fit along times so many across.  Rows: so many fit on each.
"""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Brief, Line
from rigdesign.pads.surface.footprints import Truths, half_sizes, slack
from rigdesign.pads.surface.room import Room
from rigdesign.target.curve import Floats

# Buffers are drawn by chords; this much more makes up for what chords cut off.
ROUND = 1.01


def most_that_fit(brief: Brief) -> int | None:
    """Return a number of free pads that cannot be exceeded, 0 where no place is allowed; None if there is no bound."""
    room = Room(brief)
    if room.places.is_empty:
        return 0
    bounds = [_by_area(room), _by_strips(room), _by_rows(room)]
    known = [bound for bound in bounds if bound is not None]
    return min(known) if known else None


def most_side_by_side(goes: Truths) -> int:
    """Return a number that no choice among n places can exceed, given which of them go together, (n, n).

    Places are gathered, in order, into groups of which no two go together: each group has one pad at most.

    >>> most_side_by_side(np.array([[True, False, True], [False, True, False], [True, False, True]]))
    2
    """
    left = np.ones(goes.shape[0], bool)
    groups = 0
    for first in range(goes.shape[0]):
        if not left[first]:
            continue
        groups += 1
        could = left & ~goes[first]
        left[first] = False
        while could.any():
            other = int(np.argmax(could))
            left[other] = could[other] = False
            could &= ~goes[other]
    return groups


def _by_area(room: Room) -> int | None:
    import shapely

    brief = room.brief
    length, width, gap = brief.pads.length, brief.pads.width or 0.0, brief.pads.gap
    each = length * width + (length + width) * gap + np.pi * gap**2 / 4
    if each <= 0:
        return None
    reach = np.hypot(*half_sizes(brief)) + gap / 2
    inner = shapely.buffer(room.outline, -brief.pads.edge, join_style="mitre")
    ground = shapely.intersection(shapely.buffer(room.places, ROUND * reach), shapely.buffer(inner, ROUND * gap / 2))
    return int(ground.area / each * (1 + 1e-6))


def _by_strips(room: Room) -> int | None:
    """How many footprints fit along times how many across, in their own directions.

    Footprints, grown to the pitch and half open, hold one point each of a grid of points one pitch apart.  Two that
    must stand behind each other keep the whole gap; else they may pass at a corner, with the gap over √2 each way.
    """
    import shapely

    brief, near = room.brief, slack(room.brief)
    turns = {turn for turn, _ in room.directions}
    if len(turns) > 1:
        return None
    turn = turns.pop()
    cos, sin = np.cos(turn), np.sin(turn)
    extent = np.ptp(shapely.get_coordinates(room.places) @ np.array([[cos, -sin], [sin, cos]]), axis=0)
    sizes = (brief.pads.length, brief.pads.width or 0.0)
    count = 1
    for size, across, room_along, room_across in zip(sizes, sizes[::-1], extent, extent[::-1], strict=True):
        behind = room_across < across - near
        pitch = size + brief.pads.gap * (1.0 if behind else np.sqrt(0.5)) - 2 * near
        if pitch <= 0:
            return None
        count *= int(np.floor((room_along + 4 * near) / pitch)) + 1
    return count


def _by_rows(room: Room) -> int | None:
    brief = room.brief
    counts = [_on_row(room, row) for row in brief.pads.rows]
    known = [count for count in counts if count is not None]
    return sum(known) if known and len(known) == len(counts) else None


def _on_row(room: Room, row: Line) -> int | None:
    import shapely

    pitch, near = least_pitch(room, row), slack(room.brief)
    if pitch <= 4 * near:
        return None
    line = shapely.linestrings(np.column_stack([row.x, row.y]))
    ends = []
    for part in shapely.get_parts(shapely.line_merge(shapely.intersection(line, room.area))):
        at = shapely.line_locate_point(line, shapely.points(shapely.get_coordinates(part)))
        ends.append((float(at.min()), float(at.max())))
    count, free_from = 0, -np.inf
    for start, end in sorted(ends):
        first = max(start, free_from)
        if first <= end + near:
            more = int((end - first + 4 * near) / (pitch - near)) + 1
            count, free_from = count + more, first + more * (pitch - near)
    return count


def least_pitch(room: Room, row: Line) -> float:
    """Return the least distance [m] between the places of two pads on a row.

    On a straight row it is where the second footprint, moved along the row, has left the first by the gap.
    """
    pads = room.brief.pads
    sizes = np.array([pads.length, pads.width or 0.0])
    turns = {turn for turn, _ in room.directions}
    if row.x.size > 2 or len(turns) > 1:
        return float(sizes.min() + pads.gap)
    angle = np.arctan2(row.y[1] - row.y[0], row.x[1] - row.x[0]) - turns.pop()
    return _way_out(sizes, pads.gap, np.abs([np.cos(angle), np.sin(angle)]))


def _way_out(sizes: Floats, gap: float, along: Floats) -> float:
    """How far from the middle a ray leaves a box of half sizes `sizes` with `gap` more, rounded, all round it [m]."""
    for k in (0, 1):
        if along[k] > 0:
            way = float((sizes[k] + gap) / along[k])
            if way * along[1 - k] <= sizes[1 - k]:
                return way
    beside = float(along @ sizes)
    return float(beside + np.sqrt(max(beside**2 - float(sizes @ sizes) + gap**2, 0.0)))
