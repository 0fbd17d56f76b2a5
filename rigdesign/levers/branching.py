"""Free pads: the best whole arms of all levers at once, by branch and bound from the jack down.

The path of the pads is a chain of lines y = K − S·x (judging.py).  What hangs from one pin is the stretch of pads
between two of these lines; they meet under the pin.  The lever below that pin fixes one more line, the one between
its two halves: it meets the stretch's left line one arm a inboard of the pin and its right line one arm b outboard.
Given the two outer lines, the halves are therefore independent of one another, and the best arms of a stretch are the
best over (a, b) of the worse half, no matter what the rest of the tree does.

A choice is cut off as soon as its line errs to the over side, or its pad to the under side or in shear, by more than
the bound.  Arms are looked for in a window around those that give back the planned line.  When all choices in the
window were followed, the outcome is the best there is in it (for the errors judged here); when there were too many,
the likeliest are followed and the outcome says so.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.hanging import metres
from rigdesign.levers.judging import Judge, Lines
from rigdesign.levers.wiring import Ints, Wiring
from rigdesign.target.curve import Floats

Rows = NDArray[np.intp]
Kept = Callable[[Floats, Floats], NDArray[np.bool_]]


class Pins(NamedTuple):
    """Pins that a stretch hangs from, (k,): load [N], place [m], and the line outboard of the stretch."""

    load: Floats
    place: Floats
    right: Lines

    def taken(self, rows: Rows) -> Pins:
        """Some of the pins."""
        return Pins(self.load[rows], self.place[rows], Lines(self.right.load[rows], self.right.first[rows]))


class Branch(NamedTuple):
    """Best of each pin (k,): band use, infinite where all are cut off, and steps of the levers below (k, levers, 2)."""

    use: Floats
    steps: Ints


@dataclass
class Count:
    """Work done: choices looked at, and whether every choice within the bound was followed."""

    nodes: int = 0
    is_complete: bool = True


@dataclass(frozen=True)
class Search:
    """A search over the arms of one tree.

    `planned` are the lines between neighbouring pads as planned, (n_pads + 1,), the first through the jack and the
    last zero; `planned_x` (n_pads,) [m] the pads.  `pads_kept(x, force)` and `arms_kept(a, b)` tell whether pads
    and levers keep their limits.
    """

    wiring: Wiring
    judge: Judge
    step: float
    planned: Lines
    planned_x: Floats
    displacement: float
    pads_kept: Kept
    arms_kept: Kept

    @cached_property
    def stretches(self) -> Ints:
        """First and last pad under each lever, (n_levers, 2)."""
        return self.wiring.stretches()

    def best(self, row: int, pin: Pins, bound: float, window: int, most: int) -> tuple[float, Ints, Count]:
        """Best arms of a lever and of all below it, hung from one pin.

        Gives the band use, infinite where none is up to `bound`, the steps (levers, 2) in the order of `rows_under`,
        and the work done.  Arms are looked for up to `window` steps to either side of the planned line, and at most
        about `most` choices are followed at each lever.
        """
        count = Count()
        branch = self._lever(row, pin, _Task(bound, window, most, count))
        return float(branch.use[0]), branch.steps[0], count

    def _lever(self, row: int, pins: Pins, task: _Task) -> Branch:
        """Best arms of a lever and of all below it, for each pin."""
        rows = rows_under(self.wiring, row)
        owner, arms, use = self._choices(row, pins, task)
        steps = np.zeros((owner.size, len(rows), 2), dtype=np.int64)
        steps[:, 0] = arms
        below = self.halves(pins.taken(owner), arms)
        alive = np.arange(owner.size)
        # the smaller half first: it cuts choices off for less work
        order = sorted((0, 1), key=lambda side: len(rows_under(self.wiring, int(self.wiring.ends[row, side]))))
        for side in order:
            end = int(self.wiring.ends[row, side])
            if end >= 0 and alive.size:
                branch = self._lever(end, below[side].taken(alive), task)
                column = [rows.index(under) for under in rows_under(self.wiring, end)]
                steps[alive[:, None], column] = branch.steps
                use[alive] = np.maximum(use[alive], branch.use)
                alive = alive[use[alive] <= task.bound]
        return _best_of_each(pins.load.size, owner[alive], use[alive], steps[alive])

    def _choices(self, row: int, pins: Pins, task: _Task) -> tuple[Rows, Ints, Floats]:
        """Choices of arms that the bound leaves: the pin of each (k,), a, b in steps (k, 2), band use so far (k,)."""
        grid, line = self._window(row, pins, task)
        owner = np.repeat(np.arange(pins.load.size), grid.shape[1])
        arms = grid.reshape(-1, 2)
        task.count.nodes += owner.size
        a, b = metres(arms[:, 0], self.step), metres(arms[:, 1], self.step)
        kept = np.flatnonzero((arms.min(axis=1) > 0) & self.arms_kept(a, b))
        owner, arms = owner[kept], arms[kept]
        halves = self.halves(pins.taken(owner), arms)
        middle = halves[0].right
        use = self.judge.line_use(middle, self.displacement)
        use, kept = self._with_pads(row, halves, use, task.bound)
        far = self._distance(Lines(middle.load[kept], middle.first[kept]), line)
        chosen = self._likeliest(owner[kept], far, pins.load.size, task)
        kept = kept[chosen]
        return owner[kept], arms[kept], use[kept]

    def _window(self, row: int, pins: Pins, task: _Task) -> tuple[Ints, int]:
        """Arms around those that give back the planned line (k, choices, 2), and which line that is."""
        line = self._line_of(row)
        load, first = self.planned.load[line], self.planned.first[line]
        left = Lines(pins.right.load + pins.load, pins.right.first + pins.load * pins.place)
        with np.errstate(divide="ignore", invalid="ignore"):
            a = pins.place - (left.first - first) / (left.load - load)
            b = (first - pins.right.first) / (load - pins.right.load) - pins.place
        base = np.floor(np.nan_to_num(np.stack([a, b], axis=1) / self.step, posinf=0.0, neginf=0.0)).astype(np.int64)
        reach = np.arange(1 - task.window, task.window + 1)
        offsets = np.stack(np.meshgrid(reach, reach, indexing="ij"), axis=-1).reshape(1, -1, 2)
        return base[:, None] + offsets, line

    def _line_of(self, row: int) -> int:
        """Index of the line between the two halves of a lever."""
        end = int(self.wiring.ends[row, 1])
        return -1 - end if end < 0 else int(self.stretches[end, 0])

    def halves(self, pins: Pins, arms: Ints) -> tuple[Pins, Pins]:
        """Pins of both halves of levers with `arms` (k, 2)."""
        a, b = arms[:, 0], arms[:, 1]
        outer = pins.load * a / (a + b)
        place = pins.place + b * self.step
        middle = Lines(pins.right.load + outer, pins.right.first + outer * place)
        return Pins(pins.load - outer, pins.place - a * self.step, middle), Pins(outer, place, pins.right)

    def _with_pads(self, row: int, halves: tuple[Pins, Pins], use: Floats, bound: float) -> tuple[Floats, Rows]:
        """Band use with the pads that hang from the lever itself, and which choices the bound and the limits leave."""
        kept = np.flatnonzero(use <= bound)
        for side, pins in enumerate(halves):
            if self.wiring.ends[row, side] < 0 and kept.size:
                load, place, right = pins.taken(kept)
                use[kept] = np.maximum(use[kept], self.judge.pad_use(place, load, right, self.displacement))
                kept = kept[(use[kept] <= bound) & self.pads_kept(place, load)]
        return use, kept

    def _distance(self, line: Lines, planned: int) -> Floats:
        """How far lines lie from the planned one at the two planned pads beside it [N·m]."""
        beside = self.planned_x[planned - 1 : planned + 1]
        far = np.zeros(line.load.size)
        for x in beside:
            far = np.maximum(
                far, np.abs(line.value(x) - (self.planned.first[planned] - self.planned.load[planned] * x))
            )
        return far

    def _likeliest(self, owner: Rows, far: Floats, pins: int, task: _Task) -> Rows:
        """Choices to follow: all, or the nearest to the plan for each pin where there are too many."""
        if owner.size <= task.most:
            return np.arange(owner.size)
        each = max(1, task.most // pins)
        order = np.lexsort((far, owner))
        first = np.searchsorted(owner[order], np.arange(pins))
        rank = np.arange(owner.size) - first[owner[order]]
        chosen = order[rank < each]
        task.count.is_complete &= chosen.size == owner.size
        return chosen


@dataclass(frozen=True)
class _Task:
    """What stays the same during one search."""

    bound: float
    window: int
    most: int
    count: Count


def rows_under(wiring: Wiring, row: int) -> list[int]:
    """Rows of a lever and of all levers below it, the lever first; none for a pad."""
    found, waiting = [], [row] if row >= 0 else []
    while waiting:
        found.append(waiting.pop())
        waiting += [int(end) for end in wiring.ends[found[-1]] if end >= 0]
    return [*found[:1], *sorted(found[1:])]


def _best_of_each(pins: int, owner: Rows, use: Floats, steps: Ints) -> Branch:
    """Least use of each pin, the first of equals."""
    best = np.full(pins, np.inf)
    chosen = np.zeros((pins, *steps.shape[1:]), dtype=np.int64)
    order = np.lexsort((use, owner))
    first = order[np.append(True, np.diff(owner[order]) > 0)] if order.size else order
    best[owner[first]], chosen[owner[first]] = use[first], steps[first]
    return Branch(best, chosen)
