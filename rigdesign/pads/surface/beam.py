"""Few pads within a band use, found from tip to root: a beam of partial rigs.

A partial rig is what stands outboard of a station: its force, first moments and number of pads.  It goes on as long as
its errors keep within the band use, each place being passed over or given a pad of one of several forces.  Partial rigs
with nearly the same errors compete, and the one with the fewest pads stays.  That finds sets of pads, not the best
forces: these come from a linear programme afterwards.  For cuts square to x.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.brief.model import Quantity
from rigdesign.pads.surface.choice_model import Choice, Indices
from rigdesign.pads.surface.error_rows import SIDES, Block
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import SAME_PLACE, cuts_at, reaction_loads, reactions_in_plan

CELLS = 21
"""Cells a quantity, over the width of its band, in which partial rigs compete."""
PARTS = np.array([1.0, 0.85, 0.7, 0.55, 0.4, 0.25])
"""Forces that a pad is tried with, of the most that it can carry."""
SETS = 6
"""Sets of pads that are handed on at most."""

QUANTITIES: tuple[Quantity, ...] = ("shear", "torsion", "moment")


@dataclass(frozen=True)
class Walls:
    """Bounds of one quantity of the pads alone at the stations (m,), on one side; infinite where nothing is asked."""

    low: Floats
    high: Floats

    def cell(self, k: int, value: Floats) -> Floats:
        """Where values (s,) stand between the walls at station k, −1 to 1."""
        low, high = self.low[k], self.high[k]
        if not np.isfinite(high - low):
            return np.zeros(value.shape)
        return np.asarray((2.0 * value - low - high) / max(high - low, 1e-300))

    def inside(self, k: int, value: Floats) -> np.ndarray:
        """Which values (s,) keep within the walls at station k."""
        return np.asarray((value >= self.low[k]) & (value <= self.high[k]))


AllWalls = dict[tuple[Quantity, Side], Walls]


@dataclass(frozen=True)
class _Partial:
    """Partial rigs (s,): force V [N], first moments K = ΣFx, Y = ΣFy [N·m], number of pads, index in their layer."""

    v: Floats
    k: Floats
    y: Floats
    count: np.ndarray

    def taken(self, rows: np.ndarray) -> _Partial:
        """Some of them."""
        return _Partial(self.v[rows], self.k[rows], self.y[rows], self.count[rows])


def few_pads(choice: Choice, use: float, top: Floats) -> list[Indices]:
    """Return sets of at most `count` places whose pads, carrying at most `top` (n,) [N], about keep a band use."""
    if choice.rows.specimen.cut != "square to x":
        return []
    stations, walls = walls_of(choice, use)
    y_axis = choice.rows.specimen.reference_axis.at(stations)
    place_of = station_of(stations, choice.x)
    now = _Partial(np.zeros(1), np.zeros(1), np.zeros(1), np.zeros(1, dtype=np.int64))
    layers: list[tuple[np.ndarray, np.ndarray]] = []
    for k in range(stations.size - 1, -1, -1):
        kept = np.flatnonzero(_within(now, walls, k, stations[k], y_axis[k], "outboard"))
        now = now.taken(kept)
        layers.append((kept, np.full(kept.size, -1)))
        here = np.flatnonzero(place_of == k)
        if not now.v.size:
            return []
        for place in here:
            now, parent, pad = _grown(choice, now, int(place), top[place], walls, k, y_axis[k], here.size == 1)
            layers.append((parent, pad))
        if here.size:
            kept = np.flatnonzero(_within(now, walls, k, stations[k], y_axis[k], "inboard"))
            now = now.taken(kept)
            layers.append((kept, np.full(kept.size, -1)))
        if not now.v.size:
            return []
    return _sets(choice, now, layers)


def walls_of(choice: Choice, use: float) -> tuple[Floats, AllWalls]:
    """Stations (m,) [m], root to tip, and what the pads alone must keep between there within a band use."""
    blocks = [block for block in choice.rows.blocks if block.quantity in QUANTITIES]
    every = np.sort(np.concatenate([choice.x, *(block.at for block in blocks)]))
    stations = every[np.append(True, np.diff(every) > SAME_PLACE * choice.balance.size)]
    walls: AllWalls = {}
    for quantity in QUANTITIES:
        own = [block for block in blocks if block.quantity == quantity]
        if quantity == "moment":
            walls[quantity, "inboard"] = walls[quantity, "outboard"] = _walls(choice, stations, own, use)
            continue
        inner, outer = (_walls(choice, stations, [b for b in own if b.side == side], use) for side in SIDES)
        # without a place there is no jump: what holds on one side of a station holds on both
        smooth = np.isin(np.arange(stations.size), station_of(stations, choice.x), invert=True)
        walls[quantity, "inboard"], walls[quantity, "outboard"] = (
            Walls(
                np.where(smooth, np.maximum(one.low, other.low), one.low),
                np.where(smooth, np.minimum(one.high, other.high), one.high),
            )
            for one, other in ((inner, outer), (outer, inner))
        )
    return stations, walls


def station_of(stations: Floats, x: Floats) -> Indices:
    """Return which of the stations (m,) each place x (k,) [m], from which they were gathered, stands at, (k,)."""
    return np.asarray(np.searchsorted(stations, x, side="right") - 1)


def _walls(choice: Choice, stations: Floats, blocks: list[Block], use: float) -> Walls:
    """What the rows of some blocks ask at the stations (m,)."""
    even, specimen = choice.balance, choice.rows.specimen
    answer = reactions_in_plan(specimen, even.total, even.total * even.x, even.total * even.y)
    low, high = np.full(stations.size, -np.inf), np.full(stations.size, np.inf)
    for block in blocks:
        cuts = cuts_at(specimen, block.quantity, block.at, block.side)
        wanted = block.wanted - reaction_loads(specimen, block.quantity, cuts, answer)
        at = station_of(stations, block.at)
        np.maximum.at(low, at, wanted - use * block.below)
        np.minimum.at(high, at, wanted + use * block.above)
    return Walls(low, high)


def _values(now: _Partial, x: float, y_axis: float) -> dict[Quantity, Floats]:
    return {"shear": now.v, "torsion": now.y - y_axis * now.v, "moment": now.k - x * now.v}


def _within(now: _Partial, walls: AllWalls, k: int, x: float, y_axis: float, side: Side) -> np.ndarray:
    values = _values(now, x, y_axis)
    result = np.ones(now.v.size, bool)
    for quantity in QUANTITIES:
        result &= walls[quantity, side].inside(k, values[quantity])
    return result


def _grown(
    choice: Choice,
    now: _Partial,
    place: int,
    top: float,
    walls: AllWalls,
    k: int,
    y_axis: float,
    alone: bool,
) -> tuple[_Partial, np.ndarray, np.ndarray]:
    """Partial rigs with and without a pad at a place, the best of each cell: with parents and pads (s,)."""
    x, y = float(choice.x[place]), float(choice.y[place])
    most = np.minimum(top, walls["shear", "inboard"].high[k] - now.v)
    if alone:
        arm, torsion, wall = y - y_axis, now.y - y_axis * now.v, walls["torsion", "inboard"]
        if arm != 0.0:
            most = np.minimum(most, ((wall.high[k] if arm > 0 else wall.low[k]) - torsion) / arm)
    mean = choice.balance.total / choice.count
    able = np.flatnonzero(most > max(choice.least, 1e-3 * mean))
    force = np.maximum((PARTS[:, None] * most[able]).ravel(), choice.least)
    parent = np.concatenate([np.arange(now.v.size), np.tile(able, PARTS.size)])
    pad = np.concatenate([np.full(now.v.size, -1), np.full(force.size, place)])
    more = np.concatenate([np.zeros(now.v.size), force])
    grown = _Partial(
        now.v[parent] + more, now.k[parent] + more * x, now.y[parent] + more * y, now.count[parent] + (more > 0)
    )
    best = _best_of_cells(grown, walls, k, x, y_axis)
    return grown.taken(best), parent[best], pad[best]


def _best_of_cells(rigs: _Partial, walls: AllWalls, k: int, x: float, y_axis: float) -> np.ndarray:
    """The rig with the fewest pads, then the smallest errors, of each cell of errors."""
    values = _values(rigs, x, y_axis)
    places = np.stack([walls[quantity, "inboard"].cell(k, values[quantity]) for quantity in QUANTITIES])
    cell = np.clip(np.floor((places + 1.0) * (CELLS / 2)), -1, CELLS).astype(np.int64) + 1
    key = (cell[0] * (CELLS + 2) + cell[1]) * (CELLS + 2) + cell[2]
    size = np.abs(places).max(axis=0)
    order = np.lexsort((size, rigs.count, key))
    first = np.append(True, np.diff(key[order]) > 0)
    return np.sort(order[first])


def _sets(choice: Choice, now: _Partial, layers: list[tuple[np.ndarray, np.ndarray]]) -> list[Indices]:
    """Places of final rigs with few enough pads whose sum and moments come closest to what they must be."""
    even = choice.balance
    off = np.abs(np.stack([now.v - even.total, (now.k - even.total * even.x) / even.size,
                           (now.y - even.total * even.y) / even.size])).max(axis=0) / even.total  # fmt: skip
    few = np.flatnonzero(now.count <= choice.count)
    found: dict[tuple[int, ...], None] = {}
    for row in few[np.argsort(off[few], kind="stable")][: 8 * SETS]:
        pads, at = [], int(row)
        for parent, pad in reversed(layers):
            if pad[at] >= 0:
                pads.append(int(pad[at]))
            at = int(parent[at])
        found[tuple(sorted(pads))] = None
        if len(found) == SETS:
            break
    return [np.array(pads, dtype=np.intp) for pads in found]
