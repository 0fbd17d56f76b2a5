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
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import cuts_at, reaction_loads, reactions_in_plan

CELLS = 21
"""Cells a quantity, over the width of its band, in which partial rigs compete."""
PARTS = np.array([1.0, 0.85, 0.7, 0.55, 0.4, 0.25])
"""Forces that a pad is tried with, of the most that it can carry."""
SETS = 6
"""Sets of pads that are handed on at most."""

SIDES: tuple[Side, Side] = ("inboard", "outboard")
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
    place_of = np.searchsorted(stations, choice.x - 1e-9 * choice.balance.size)
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


def walls_of(choice: Choice, use: float) -> tuple[Floats, dict[tuple[Quantity, Side], Walls]]:
    """Stations, root to tip, and what the pads alone must keep between there."""
    rows, even, specimen = choice.rows, choice.balance, choice.rows.specimen
    blocks = [block for block in rows.blocks if block.quantity in QUANTITIES]
    stations = np.unique(np.concatenate([choice.x, *(block.at for block in blocks)]))
    # a station beside a place by rounding is the same one
    stations = stations[np.append(True, np.diff(stations) > 1e-8 * even.size)]
    answer = reactions_in_plan(specimen, even.total, even.total * even.x, even.total * even.y)
    walls: dict[tuple[Quantity, Side], Walls] = {}
    for quantity in QUANTITIES:
        for side in SIDES:
            low, high = np.full(stations.size, -np.inf), np.full(stations.size, np.inf)
            for block in blocks:
                if block.quantity == quantity and (block.side == side or quantity == "moment"):
                    cuts = cuts_at(specimen, quantity, block.at, block.side)
                    wanted = block.wanted - reaction_loads(specimen, quantity, cuts, answer)
                    at = np.clip(np.searchsorted(stations, block.at - 1e-8 * even.size), 0, stations.size - 1)
                    np.maximum.at(low, at, wanted - use * block.below)
                    np.minimum.at(high, at, wanted + use * block.above)
            walls[quantity, side] = Walls(low, high)
        # a station without a row on one side has no jump there: what holds on the other side holds on both
        one, other = walls[quantity, "inboard"], walls[quantity, "outboard"]
        for mine, others in ((one, other), (other, one)):
            bare = np.isinf(mine.low) & np.isinf(mine.high)
            mine.low[bare], mine.high[bare] = others.low[bare], others.high[bare]
    return stations, walls


def _values(now: _Partial, x: float, y_axis: float) -> dict[Quantity, Floats]:
    return {"shear": now.v, "torsion": now.y - y_axis * now.v, "moment": now.k - x * now.v}


def _within(
    now: _Partial, walls: dict[tuple[Quantity, Side], Walls], k: int, x: float, y_axis: float, side: Side
) -> np.ndarray:
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
    walls: dict[tuple[Quantity, Side], Walls],
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


def _best_of_cells(
    rigs: _Partial, walls: dict[tuple[Quantity, Side], Walls], k: int, x: float, y_axis: float
) -> np.ndarray:
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
