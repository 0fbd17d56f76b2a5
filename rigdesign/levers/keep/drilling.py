"""Moved pivots on the drill step: those of least band use near what the programme wants.

Counted from hole A, a new pivot is a whole number of steps away along the lever, or along u and v of a plate.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import LeverRules
from rigdesign.levers.descent import all_pairs, descend, descend_again, moves_of
from rigdesign.levers.drilled import BROKEN, REACH
from rigdesign.levers.grouping import LIMIT_SLACK
from rigdesign.levers.keep.pivots import Pivot, forces_of
from rigdesign.levers.keep.programme import Choice
from rigdesign.levers.keep.sight import Sight
from rigdesign.levers.surface.hanging import LEAST_PART, handed_on
from rigdesign.levers.surface.wiring import Branches
from rigdesign.levers.wiring import Ints
from rigdesign.pads.limits import TOUCH
from rigdesign.target.curve import Floats

ALL_PAIRS = 24
"""Up to so many numbers the descent tries every pair of them."""

JUDGED, JUDGED_AGAIN = 1_000_000, 250_000
"""Rigs times pads that the descent, and the repeated descents, may judge."""

Value = Callable[[Ints], Floats]


@dataclass(frozen=True)
class Holes:
    """Pivots as drilled: `shifts` (n_pieces, 2) [m] from the old ones, pad forces (n_pads,) [N], rigs judged."""

    shifts: Floats
    force: Floats
    judged: int


@dataclass(frozen=True)
class Drill:
    """What drilling a kept rig needs: pads with forces between `least` and `largest` that sum to `total`, all [N]."""

    branches: Branches
    pivots: tuple[Pivot, ...]
    sight: Sight
    rules: LeverRules
    total: float
    least: float
    largest: float

    def forces(self, shifts: Floats) -> Floats:
        """Pad forces (k, n_pads) [N] of shifts (k, n_pieces, 2) [m]."""
        return forces_of(self.branches, self.pivots, shifts, self.total)

    def undrilled(self) -> Holes:
        """Every pivot where it is."""
        none = np.zeros((len(self.pivots), 2))
        return Holes(none, self.forces(none[None])[0], 1)

    def drilled(self, choice: Choice) -> Holes | None:
        """Pivots on the step near a choice; None where none of those tried keep the limits."""
        numbers = _Numbers.of(self, choice)
        if not numbers.rows:
            return self.undrilled()
        start = numbers.nearest(choice)
        value = self._value(numbers, start)
        moves = moves_of(start.size, all_pairs(start.size) if start.size <= ALL_PAIRS else np.empty((0, 2), np.int64))
        n_pads = self.branches.n_pads
        best = descend(start, moves, value, max(len(moves), JUDGED // n_pads))
        best = descend_again(best, moves, value, max(len(moves), JUDGED_AGAIN // n_pads))
        if not np.isfinite(best.value):
            return None
        shifts = numbers.shifts(best.steps[None])
        return Holes(shifts[0], self.forces(shifts)[0], best.judged)

    def missed(self, force: Floats) -> Floats:
        """How far forces (k, n_pads) [N] miss the limits of the pads, in mean forces; (k,), 0 where kept."""
        low = np.maximum(self.least * (1 - TOUCH) - force, 0.0)
        high = np.maximum(force - self.largest * (1 + TOUCH), 0.0) if np.isfinite(self.largest) else 0.0 * force
        return np.asarray((low + high).sum(axis=1) / force.mean(axis=1))

    def keeps(self, shifts: Floats, rows: tuple[int, ...]) -> NDArray[np.bool_]:
        """Whether pieces `rows` keep ratio limit and shortest arm with shifts (k, n_pieces, 2); (k,)."""
        kept = np.ones(len(shifts), bool)
        for row in rows:
            pivot = self.pivots[row]
            if pivot.is_lever:
                slack = LIMIT_SLACK * pivot.size
                kept &= (shifts[:, row, 0] >= pivot.low - slack) & (shifts[:, row, 0] <= pivot.high + slack)
                continue
            holes = pivot.holes - shifts[:, row, None, :]
            reach = np.hypot(holes[:, :, 0], holes[:, :, 1]).min(axis=1)
            part = handed_on(holes[:, :, 0], holes[:, :, 1])
            kept &= (reach * (1.0 + LIMIT_SLACK) >= self.rules.shortest_arm) & (part > LEAST_PART).all(axis=1)
        return kept

    def _value(self, numbers: _Numbers, start: Ints) -> Value:
        """Band use of numbers near `start`; far larger where pad limits are missed, infinite where a piece's are."""

        def value(rows: Ints) -> Floats:
            result = np.full(len(rows), np.inf)
            shifts = numbers.shifts(rows)
            kept = self.keeps(shifts, numbers.rows) & numbers.keep_distance(shifts)
            kept &= (np.abs(rows - start) <= REACH).all(axis=1)
            if kept.any():
                force = self.forces(shifts[kept])
                missed = self.missed(force)
                result[kept] = self.sight.use(force) + np.where(missed > 0, BROKEN * (1.0 + missed), 0.0)
            return result

        return value


@dataclass(frozen=True)
class _Numbers:
    """Whole steps from hole A of the pivots that are moved: one a lever, two a plate, in the order of `rows`.

    `kept` tells which of these pieces keep the distance, `side` (n_rows,) to which side of a lever's old hole.
    """

    drill: Drill
    rows: tuple[int, ...]
    kept: tuple[bool, ...]
    wanted: Floats

    @classmethod
    def of(cls, drill: Drill, choice: Choice) -> _Numbers:
        """The pivots that a choice moves, and the shifts (n_rows, 2) [m] that it wants."""
        rows = tuple(sorted((*choice.moved, *choice.near)))
        pivots = [drill.pivots[row] for row in rows]
        wanted = np.array([
            (p.moments * choice.force).sum(axis=1) / (p.load * choice.force).sum() for p in pivots
        ]).reshape(-1, 2)  # fmt: skip
        return cls(drill, rows, tuple(row in choice.moved for row in rows), wanted)

    @property
    def _step(self) -> float:
        return self.drill.rules.drill_step

    def _counts(self) -> list[int]:
        return [1 if self.drill.pivots[row].is_lever else 2 for row in self.rows]

    def nearest(self, choice: Choice) -> Ints:
        """The numbers nearest to what a choice wants, no nearer to the old hole than asked."""
        numbers: list[int] = []
        for row, is_kept, wanted in zip(self.rows, self.kept, self.wanted, strict=True):
            pivot = self.drill.pivots[row]
            start = -pivot.holes[0]
            if not pivot.is_lever:
                away = float(np.hypot(*wanted))
                if is_kept and 0 < away < pivot.distance + self._step:
                    wanted = wanted * ((pivot.distance + self._step) / away)
                numbers += [round(float(value) / self._step) for value in start + wanted]
                continue
            number = round(float(start[0] + wanted[0]) / self._step)
            outward = 1 if wanted[0] >= 0 else -1
            while is_kept and outward * (number * self._step - start[0]) < pivot.distance * (1 - LIMIT_SLACK):
                number += outward
            numbers.append(number)
        return np.array(numbers, dtype=np.int64)

    def shifts(self, rows: Ints) -> Floats:
        """Shifts (k, n_pieces, 2) [m] of rows of numbers (k, q)."""
        result = np.zeros((len(rows), len(self.drill.pivots), 2))
        column = 0
        for row, count in zip(self.rows, self._counts(), strict=True):
            start = -self.drill.pivots[row].holes[0]
            result[:, row, :count] = rows[:, column : column + count] * self._step - start[:count]
            column += count
        return result

    def keep_distance(self, shifts: Floats) -> NDArray[np.bool_]:
        """Whether pivots that must keep the distance do, (k,)."""
        kept = np.ones(len(shifts), bool)
        for row, is_kept in zip(self.rows, self.kept, strict=True):
            if is_kept:
                away = np.hypot(shifts[:, row, 0], shifts[:, row, 1])
                kept &= away >= self.drill.pivots[row].distance * (1 - LIMIT_SLACK)
        return kept
