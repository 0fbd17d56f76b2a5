"""Places from which the search for free pads sets out.

Seen along the span, the best pads on a line say at which stations pads should stand.  Where they stand across, they
should follow the load's own centre there, and spread about it in turn, so that torsion keeps to its curve and a panel
is held across as well: ranks across step through the pads like the hand of a clock.  Besides, pads in rows and columns.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from math import gcd
from typing import TYPE_CHECKING

import numpy as np
from scipy.optimize import linprog

from rigdesign.pads.path import least_use_path
from rigdesign.pads.surface.footprints import half_sizes
from rigdesign.pads.surface.ground import Ground, nearest_rows, rows_at
from rigdesign.pads.surface.moving import Errors
from rigdesign.pads.tube import Tube, build_tube
from rigdesign.target.curve import Curve, Floats
from rigdesign.target.model import Target
from rigdesign.target.plan_load import ALONG_X, ALONG_Y

if TYPE_CHECKING:
    from shapely import Geometry

SPREADS = (1.0, 0.5, 0.0)
"""How far pads spread about the centre of the load, as a part of what the room allows both sides of it."""
SETTLING = 30
"""Most steps in which pads of a start are pushed apart."""
WIDER = (3.0, 2.0, 1.6, 1.3, 1.15, 1.05, 1.0)
"""Lattices on which pads are packed: so many times as wide as the least."""
MOST_PACKED = 20_000
"""Places of a lattice that are looked at."""
CURVE = 2001
"""Stations at which the load is summed up."""


@dataclass(frozen=True)
class Starts:
    """Places for `ground.count` pads of a target under a jack at jack_x [m], apart as the errors ask."""

    target: Target
    ground: Ground
    errors: Errors
    jack_x: float

    def all(self) -> Iterator[tuple[str, Floats, Floats]]:
        """Yield names and places x, y (n,) [m] that keep room and gaps, the most promising kinds first."""
        seen: list[Floats] = []
        for name, x, y in self._raw():
            settled = self._settled(x, y)
            if settled is None:
                continue
            both = np.stack(settled)
            if not any(np.abs(both - other).max() < 1e-3 * self.ground.pitch for other in seen):
                seen.append(both)
                yield name, *settled

    def _raw(self) -> Iterator[tuple[str, Floats, Floats]]:
        n = self.ground.count
        stations = list(self._stations(n))
        for step in _clock_steps(n):
            part = ((step * np.arange(n)) % n + 0.5) / n
            for x in stations:
                for spread in SPREADS if step == _clock_steps(n)[0] else SPREADS[:1]:
                    yield f"clock {step} {spread}", x, self._across(x, part, spread)
        for columns in range(1, n + 1):
            if n % columns == 0:
                yield f"columns {columns}", *self._grid(columns, n // columns)
        packed = self._packed()
        if packed is not None:
            yield "packed", *packed

    def _stations(self, count: int) -> Iterator[Floats]:
        """Stations (count,) [m] of the best pads on a line, and those that each take as much of the load."""
        low, high = self._reach
        tube = build_tube(self.target, self.jack_x, count)
        path, _ = least_use_path(_moment_judged(tube, self.target.moment_peak), count, low, high)
        if path is not None and path.x.size == count:
            yield np.clip(path.x, low, high)
        yield np.clip(self._quantiles(self.target.net, count, self.target.brief.specimen.left), low, high)

    @property
    def _reach(self) -> tuple[float, float]:
        low, _, high, _ = self.ground.room.places.bounds
        return float(low), float(high)

    def _quantiles(self, curve: Curve, count: int, start: float) -> Floats:
        """Where on a curve the middles of so many equal parts of its load lie (count,) [m]."""
        at = np.linspace(curve.breaks[0], curve.breaks[-1], CURVE)
        falling = np.minimum.accumulate(curve.force_beyond(at, "outboard") / curve.total)
        parts = 1.0 - (np.arange(count) + 0.5) / count
        return np.interp(-parts, -falling, at)

    def _across(self, x: Floats, part: Floats, spread: float) -> Floats:
        """Places y (n,) [m]: `part` (n,) of the way across at x (n,), about the load's centre there."""
        low, high = self._limits_across(x)
        centre = np.clip(self._centre(x), low, high)
        reach = np.where(part < 0.5, centre - low, high - centre)
        return np.asarray(centre + spread * (2 * part - 1) * reach)

    def _centre(self, x: Floats) -> Floats:
        """Where the load acts across, y [m], in the stretch about each of the stations x (n,) [m]."""
        seen = self.target.net_plan.along(ALONG_X)
        order = np.argsort(x, kind="stable")
        middle = (x[order][1:] + x[order][:-1]) / 2
        ends = np.concatenate([[-np.inf], middle, [np.inf]])
        ends = np.clip(ends, seen.force.breaks[0] - 1.0, seen.force.breaks[-1] + 1.0)
        force = -np.diff(seen.force.force_beyond(ends, "outboard"))
        turning = -np.diff(seen.turning.force_beyond(ends, "outboard"))
        some = np.abs(force) > 1e-9 * abs(self.target.net.total)
        whole = seen.turning.total / seen.force.total
        result = np.empty(x.size)
        result[order] = np.where(some, turning / np.where(some, force, 1.0), whole)
        return result

    def _limits_across(self, x: Floats) -> tuple[Floats, Floats]:
        """Least and largest y [m] where pads may stand at x (n,) [m]."""
        return _chord(self.ground.room.area, x)

    def _grid(self, columns: int, rows: int) -> tuple[Floats, Floats]:
        """So many columns and rows, where each takes as much of the load as the others."""
        x = next(self._stations(columns))
        across = self.target.net_plan.along(ALONG_Y).force
        low, high = float(across.breaks[0]), float(across.breaks[-1])
        part = (self._quantiles(across, rows, low) - low) / max(high - low, 1e-12)
        every_x, every_part = np.repeat(x, rows), np.tile(part, columns)
        outline = self.target.brief.specimen.outline
        assert outline is not None
        chord_low, chord_high = _chord(outline.polygon, every_x)
        return every_x, chord_low + every_part * (chord_high - chord_low)

    def _packed(self) -> tuple[Floats, Floats] | None:
        """Places on the widest lattice that has enough of them, as far from one another as may be; None if none has."""
        import shapely

        ground, n = self.ground, self.ground.count
        if ground.brief.pads.rows:
            return None
        turn = ground.room.directions[0][0]
        half = half_sizes(ground.brief)
        least = 2 * np.array(half) + ground.gap * 1.000001
        middle = np.array(shapely.get_coordinates(ground.room.area.centroid))[0]
        reach = float(np.hypot(*np.ptp(shapely.get_coordinates(ground.room.area), axis=0)))
        for wider in WIDER:
            pitch = np.maximum(least * wider, 1e-2 * ground.pitch)
            along, across = (np.arange(-k, k + 1) * p for p, k in zip(pitch, np.ceil(reach / pitch), strict=True))
            if along.size * across.size > MOST_PACKED:
                continue
            u, v = (part.ravel() for part in np.meshgrid(along, across, indexing="ij"))
            x = middle[0] + u * np.cos(turn) - v * np.sin(turn)
            y = middle[1] + u * np.sin(turn) + v * np.cos(turn)
            kept = ground.room.allowed(x, y)
            if kept.sum() >= n:
                return _far_apart(x[kept], y[kept], n)
        return None

    # -- pushed apart --------------------------------------------------------------------------------------------------

    def _settled(self, x: Floats, y: Floats) -> tuple[Floats, Floats] | None:
        """The nearest places found that keep room and gaps; None if pads could not be pushed apart."""
        ground, reach = self.ground, self.ground.pitch / 2
        x, y = ground.room.nearest(x, ground.on_rows(x, y))
        for _ in range(SETTLING):
            x, y = self.errors.told_apart(x, y, turned=False)
            y = ground.on_rows(x, y)
            if ground.keeps(x, y):
                return x, y
            if not ground.room.allowed(x, y).all():
                x, y = ground.room.nearest(x, y)
            if ground.keeps(x, y) and self.errors.are_apart(x, y):
                return x, y
            moved = _pushed(ground, x, y, reach)
            if moved is None:
                return None
            x, y = moved
        return None


def _pushed(ground: Ground, x: Floats, y: Floats, reach: float) -> tuple[Floats, Floats] | None:
    """Places after the move of least sum that brings overlapping pads apart as far as `reach` [m] allows."""
    n, limits = x.size, ground.moves(x, y, reach)
    k = limits.least.size
    # unknown: moves, their magnitudes, and what is missing of each limit
    magnitude = np.vstack([np.hstack([sign * np.eye(2 * n), -np.eye(2 * n), np.zeros((2 * n, k))]) for sign in (1, -1)])
    kept = np.hstack([-limits.rows, np.zeros((k, 2 * n)), -np.eye(k)])
    on = np.flatnonzero(np.isfinite(limits.slope))
    held = np.zeros((on.size, 4 * n + k))
    held[np.arange(on.size), on], held[np.arange(on.size), n + on] = -limits.slope[on], 1.0
    wide = np.full(n, np.inf if ground.brief.pads.rows else 1.0)
    low = np.concatenate([limits.low / reach, -wide, np.zeros(2 * n + k)])
    high = np.concatenate([limits.high / reach, wide, np.full(2 * n + k, np.inf)])
    result = linprog(
        np.concatenate([np.zeros(2 * n), np.full(2 * n, 1e-2), np.ones(k)]),
        A_ub=np.vstack([magnitude, kept]),
        b_ub=np.concatenate([np.zeros(4 * n), -limits.least / reach]),
        A_eq=held if on.size else None,
        b_eq=np.zeros(on.size) if on.size else None,
        bounds=np.column_stack([low, high]),
        method="highs",
        options={"primal_feasibility_tolerance": 1e-9},
    )
    if result.status != 0:
        return None
    moved_x, moved_y = x + reach * result.x[:n], y + reach * result.x[n : 2 * n]
    rows = ground.brief.pads.rows
    return moved_x, rows_at(rows, moved_x, nearest_rows(rows, x, y)) if rows else moved_y


def _far_apart(x: Floats, y: Floats, count: int) -> tuple[Floats, Floats]:
    """So many of the places x, y (n,) [m], each as far as can be from those taken before it."""
    taken = [int(np.lexsort((y, x))[0])]
    away = np.hypot(x - x[taken[0]], y - y[taken[0]])
    while len(taken) < count:
        taken.append(int(np.argmax(away)))
        away = np.minimum(away, np.hypot(x - x[taken[-1]], y - y[taken[-1]]))
    return x[taken], y[taken]


def _clock_steps(n: int) -> list[int]:
    """Steps through n ranks that keep neighbours far apart, the best first, two at most.

    >>> _clock_steps(12)
    [5, 7]
    """
    found = []
    for step in range(1, n):
        if gcd(step, n) == 1:
            ranks = (step * np.arange(n)) % n
            away = [(k * k + int(ranks[k]) ** 2, k) for k in range(1, n)]
            back = [(k * k + (n - int(ranks[k])) ** 2, k) for k in range(1, n)]
            found.append((-min(away + back)[0], step))
    return [step for _, step in sorted(found)[:2]] or [1]


def _moment_judged(tube: Tube, peak: float) -> Tube:
    from rigdesign.pads.outcome import moment_alone

    return tube if tube.is_judged[0] else moment_alone(tube, peak)


def _chord(area: Geometry, x: Floats) -> tuple[Floats, Floats]:
    """Least and largest y [m] of an area at x (n,) [m]."""
    import shapely

    low_x, low_y, high_x, high_y = area.bounds
    at = np.clip(x, low_x + 1e-9, high_x - 1e-9)
    ends = np.stack([np.stack([at, np.full(at.size, v)], axis=-1) for v in (low_y - 1.0, high_y + 1.0)], axis=1)
    column = shapely.bounds(shapely.intersection(shapely.linestrings(ends), area)).reshape(-1, 4)
    empty = np.isnan(column[:, 1])
    return np.where(empty, low_y, column[:, 1]), np.where(empty, high_y, column[:, 3])
