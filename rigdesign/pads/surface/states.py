"""How many pads a band use needs at least: shear and torsion followed together over all that pads could do.

What stands outboard of a station has a shear V and a turning Z = Σ F (y − σ), with σ near the reference axis.  The
plane of both is cut into cells, and every cell holds the fewest pads that can bring any state inside it, tip to root: a
pad moves a state along (1, y − σ), two or more pads at one station anywhere between the first and the last of them, and
states whose shear or torsion leaves its band drop out.  All rounding is outward, so a number of pads that reaches no
state does not exist.  The moment and the footprints are left out, which can only make the number smaller.  For cuts
square to x.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity
from rigdesign.pads.surface.beam import AllWalls, Walls, station_of, walls_of
from rigdesign.pads.surface.choice_model import Choice, Truths
from rigdesign.pads.surface.error_rows import SIDES
from rigdesign.target.curve import Floats

CELLS, MOST_CELLS = 96, 384
"""Cells over the width of each band where it is narrowest, and the most of them where it is widest: a finer plane
proves a little more, for the square of the work."""
ROUNDING = 1e-9
"""Of the total, or the total times the span: what sums of forces are out by through rounding."""
HAIR, END = 1e-9, 1e-6
"""Of a cell: what rounding may have moved a bound across, and how far the last state may stand beside the one asked."""
NONE = np.int16(20_000)
"""The number of pads of a state that cannot be reached."""
LEAN = 0.5
"""Of the torsion band's width: the most that σ's distance from the axis may skew the window."""

JUDGED: tuple[Quantity, Quantity] = ("shear", "torsion")

Counts = NDArray[np.int16]


@dataclass(frozen=True)
class Plane:
    """Fewest pads (v, z) of states; cell i, l holds V from (v_0 + i) d_v on and Z from (z_0 + l) d_z on [N, N·m]."""

    counts: Counts
    v_0: int
    z_0: int
    sigma: float
    d_v: float
    d_z: float

    def moved(self, v_0: int, z_0: int, shape: tuple[int, int]) -> Plane:
        """The same states seen through another window."""
        counts = np.full(shape, NONE)
        v, z = self.v_0 - v_0, self.z_0 - z_0
        rows = slice(max(v, 0), min(v + self.counts.shape[0], shape[0]))
        columns = slice(max(z, 0), min(z + self.counts.shape[1], shape[1]))
        if rows.start < rows.stop and columns.start < columns.stop:
            counts[rows, columns] = self.counts[rows.start - v : rows.stop - v, columns.start - z : columns.stop - z]
        return replace(self, counts=counts, v_0=v_0, z_0=z_0)

    def edges(self) -> tuple[Floats, Floats]:
        """Lower edges of the cells in V (v,) and in Z (z,)."""
        rows, columns = (np.arange(size, dtype=np.float64) for size in self.counts.shape)
        return (self.v_0 + rows) * self.d_v, (self.z_0 + columns) * self.d_z


def pads_needed(choice: Choice, use: float, top: Floats) -> int:
    """Return a number of pads that no choice within band use `use` goes below; pads carry at most `top` (n,) [N].

    1 where shear and torsion are not both judged along the whole span, for then there is nothing to follow; one more
    than there are places where not even all of them keep it.
    """
    stations, walls = walls_of(choice, use)
    judged: Truths = np.logical_and.reduce([_width(walls[q, side]) < np.inf for q in JUDGED for side in SIDES])
    if choice.rows.specimen.cut != "square to x" or not np.all(judged[station_of(stations, choice.x)]):
        return 1
    stations, axis = stations[judged], choice.rows.specimen.reference_axis.at(stations[judged])
    asked = {key: Walls(wall.low[judged], wall.high[judged]) for key, wall in walls.items()}
    walls = {key: _in_reach(choice, key[0], wall, axis) for key, wall in asked.items()}
    d_v, d_z = (_cell(asked, walls, quantity) for quantity in JUDGED)
    widths = _width(walls["shear", "inboard"]), _width(walls["torsion", "inboard"])
    place_of = station_of(stations, choice.x)
    # the state of nothing at all is a point, at a corner of four cells
    plane = Plane(np.zeros((2, 2), dtype=np.int16), -1, -1, float(axis[-1]), d_v, d_z)
    for k in range(stations.size - 1, -1, -1):
        plane = _window(_sheared(plane, axis[k], float(widths[1][k]), float(widths[0][k])), walls, k, axis[k])
        plane = _pruned(plane, walls["shear", "outboard"], walls["torsion", "outboard"], k, axis[k])
        here = np.flatnonzero(place_of == k)
        if here.size:
            plane = _with_pads(plane, choice.y[here], top[here], choice.least)
            plane = _pruned(plane, walls["shear", "inboard"], walls["torsion", "inboard"], k, axis[k])
        if plane.counts.min() >= NONE:
            return choice.x.size + 1
    return _at_the_end(plane, choice)


def _width(walls: Walls) -> Floats:
    return walls.high - walls.low


def _in_reach(choice: Choice, quantity: Quantity, walls: Walls, axis: Floats) -> Walls:
    """The walls at stations where the axis is at `axis` (m,) [m], no further apart than any pads can come.

    A band with one side alone is as good as infinite on the other.
    """
    total, hair = choice.balance.total, ROUNDING * choice.balance.total
    if quantity == "shear":
        return Walls(np.maximum(walls.low, -hair), np.minimum(walls.high, total + hair))
    arms = np.minimum(choice.y.min() - axis, 0.0), np.maximum(choice.y.max() - axis, 0.0)
    hair *= choice.balance.size
    return Walls(np.maximum(walls.low, total * arms[0] - hair), np.minimum(walls.high, total * arms[1] + hair))


def _cell(asked: AllWalls, walls: AllWalls, quantity: Quantity) -> float:
    """Size of the cells of shear or torsion [N or N·m]: by the narrowest band, and not too many over the widest."""
    narrowest = min(float(_width(asked[quantity, side]).min()) for side in SIDES)
    widest = max(float(_width(walls[quantity, side]).max()) for side in SIDES)
    return max(min(narrowest, widest) / CELLS, widest / MOST_CELLS)


def _window(plane: Plane, walls: AllWalls, k: int, axis: float) -> Plane:
    """The plane seen through a window that holds all that the walls at station k leave."""
    shears = [walls["shear", side] for side in SIDES]
    turns = [walls["torsion", side] for side in SIDES]
    low_v, high_v = min(w.low[k] for w in shears), max(w.high[k] for w in shears)
    lean = sorted(((axis - plane.sigma) * low_v, (axis - plane.sigma) * high_v))
    low_z, high_z = min(w.low[k] for w in turns) + lean[0], max(w.high[k] for w in turns) + lean[1]
    v_0, z_0 = int(np.floor(low_v / plane.d_v)) - 1, int(np.floor(low_z / plane.d_z)) - 1
    shape = int(np.ceil(high_v / plane.d_v)) + 1 - v_0, int(np.ceil(high_z / plane.d_z)) + 1 - z_0
    return plane.moved(v_0, z_0, shape)


def _sheared(plane: Plane, axis: float, width: float, shear: float) -> Plane:
    """The plane with σ at the axis again where it leans too far: every row moves by what its V makes of the change."""
    change = axis - plane.sigma
    if abs(change) * shear <= LEAN * width:
        return plane
    v, _ = plane.edges()
    ends = -change * np.stack([v, v + plane.d_v]) / plane.d_z
    low, high = np.floor(ends.min(axis=0)).astype(int), np.ceil(ends.max(axis=0)).astype(int)
    z_0, columns = plane.z_0 + int(low.min()), plane.counts.shape[1] + int(high.max() - low.min()) + 1
    counts = np.full((v.size, columns), NONE)
    for row in range(v.size):
        for move in range(low[row], high[row] + 1):
            start = move - int(low.min())
            own = counts[row, start : start + plane.counts.shape[1]]
            np.minimum(own, plane.counts[row], out=own)
    return replace(plane, counts=counts, z_0=z_0, sigma=axis)


def _pruned(plane: Plane, shear: Walls, torsion: Walls, k: int, axis: float) -> Plane:
    """The plane without the cells that hold no state inside the walls at station k."""
    v, z = plane.edges()
    inside_v: Truths = (v + plane.d_v >= shear.low[k]) & (v <= shear.high[k])
    lean = (plane.sigma - axis) * np.stack([v, v + plane.d_v])
    low, high = lean.min(axis=0)[:, None] + z, lean.max(axis=0)[:, None] + z + plane.d_z
    inside = inside_v[:, None] & (high >= torsion.low[k]) & (low <= torsion.high[k])
    return replace(plane, counts=np.where(inside, plane.counts, NONE))


def _with_pads(plane: Plane, y: Floats, top: Floats, least: float) -> Plane:
    """The plane after a station with places at y (k,) [m]: none of them used, one, or any two or more."""
    counts = plane.counts.copy()
    for place, most in zip(y, top, strict=True):
        for v, z in _moves(plane, float(place) - plane.sigma, float(most), least):
            _lowered(counts, plane.counts, v, z, 1)
    if y.size > 1:
        _with_several(plane, counts, y - plane.sigma, float(np.sort(top)[-2:].sum()) * (y.size / 2))
    return replace(plane, counts=counts)


def _moves(plane: Plane, arm: float, most: float, least: float) -> set[tuple[int, int]]:
    """Shifts in cells, V and Z, that a pad with this arm can bring about."""
    rows, columns = plane.counts.shape
    parts = max(1, int(np.ceil(abs(arm) * plane.d_v / plane.d_z)))
    step = plane.d_v / parts
    furthest = min(most, rows * plane.d_v, columns * plane.d_z / max(abs(arm), 1e-12))
    g = np.arange(int(least / step * (1 - HAIR)), int(np.ceil(furthest / step)) + 1)
    turned = np.sort(np.stack([g, g + 1]) * (step * arm / plane.d_z), axis=0)
    low, high = np.floor(turned[0] - HAIR).astype(int), np.ceil(turned[1] + HAIR).astype(int)
    return {
        (int(v) + up, z)
        for v, first, last in zip(g // parts, low, high, strict=True)
        for up in (0, 1)
        for z in range(first, last + 1)
    }


def _lowered(counts: Counts, start: Counts, v: int, z: int, pads: int) -> None:
    """Lower the counts to those that the start's states reach by one shift with so many pads more."""
    rows, columns = counts.shape
    if v >= rows or abs(z) >= columns:
        return
    to = counts[v:, max(z, 0) : columns + min(z, 0)]
    of = start[: rows - v, max(-z, 0) : columns + min(-z, 0)]
    np.minimum(to, of + np.int16(pads), out=to)


def _with_several(plane: Plane, counts: Counts, arms: Floats, most: float) -> None:
    """Lower the counts to what two or more pads at one station reach: any turning between the outermost arms."""
    rows = len(counts)
    for v in range(min(rows, int(np.ceil(most / plane.d_v)) + 1)):
        force = np.array([v, v + 1]) * plane.d_v
        low = int(np.floor((force * arms.min()).min() / plane.d_z - HAIR))
        high = int(np.ceil((force * arms.max()).max() / plane.d_z + HAIR))
        reached = _least_within(plane.counts, -high, -low)
        for up in (0, 1):
            if v + up < rows:
                to = counts[v + up :]
                np.minimum(to, reached[: rows - v - up] + np.int16(2), out=to)


def _least_within(counts: Counts, first: int, last: int) -> Counts:
    """Least count of each row among the columns from `first` to `last` cells away."""
    columns = counts.shape[1]
    if first <= 1 - columns and last >= columns - 1:
        return np.broadcast_to(counts.min(axis=1, keepdims=True), counts.shape)
    first, last = max(first, -columns), min(last, columns)
    if first > last:
        return np.full(counts.shape, NONE)
    wide = np.pad(counts, ((0, 0), (max(-first, 0), max(last, 0))), constant_values=NONE)
    least = np.lib.stride_tricks.sliding_window_view(wide, last - first + 1, axis=1).min(axis=-1)
    return np.asarray(least[:, max(first, 0) : max(first, 0) + columns])


def _at_the_end(plane: Plane, choice: Choice) -> int:
    """Fewest pads of the cells that hold the sum and the first moment that the pads must have."""
    total = choice.balance.total
    v, z = total, total * (choice.balance.y - plane.sigma)
    edge_v, edge_z = plane.edges()
    rows = (edge_v <= v + END * plane.d_v) & (edge_v + plane.d_v >= v - END * plane.d_v)
    columns = (edge_z <= z + END * plane.d_z) & (edge_z + plane.d_z >= z - END * plane.d_z)
    found = plane.counts[np.ix_(rows, columns)]
    least = int(found.min()) if found.size else int(NONE)
    return least if least < NONE else choice.x.size + 1
