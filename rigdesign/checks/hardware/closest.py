"""The pairs of members that come closest, of all solids in all states of turning.

Between all pairs of members, then of solids, lower bounds come first, all at once: how far apart they lie along some
directions.  Distances are worked out in the order of these bounds, and only while they can be among the nearest.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from rigdesign.checks.hardware.distance import distances
from rigdesign.checks.hardware.solids import Member
from rigdesign.checks.hardware.turned import Moves, Whole, states
from rigdesign.target.curve import Floats

N_DIRECTIONS = 12
"""Level directions along which members are first held apart, 15° from one to the next."""
FIRST_LOT, MOST_ROWS = 24, 40_000
"""Pairs of members in the first lot, which doubles from lot to lot; most pairs of solids worked on at once."""

DIGITS = 9
"""Decimals of distances in m: what rounding may change from process to process does not show."""

_ANGLES = np.arange(N_DIRECTIONS) * math.pi / N_DIRECTIONS
_DIRECTIONS = np.vstack([np.column_stack([np.cos(_ANGLES), np.sin(_ANGLES), np.zeros(N_DIRECTIONS)]), [[0, 0, 1]]])


@dataclass(frozen=True)
class Pair:
    """Two members, by their index, and their least distance [m]."""

    first: int
    second: int
    distance: float


def nearest(listed: tuple[Member, ...], turn: float, count: int, *, beside: bool = False) -> tuple[Pair, ...]:
    """Return the `count` pairs of members that come closest with every lever turned by up to `turn` [rad].

    Nearest first, of equal ones those that are listed first; `turn` 0 is the rig at rest.  Distances are good to
    1e-9 m, and each that is listed has been worked out; all pairs left out are proven to be no nearer than the last.
    With `beside`, of the links that sit side by side in one piece, else of all other members.
    """
    moves = Moves(listed, turn)
    which = moves.beside if beside else moves.apart
    return _Search(_Items(listed, turn), moves, count).answer(*np.nonzero(which))


class _Items:
    """All solids in all states of their members, in one table, a row each: the index of the member and of the state.

    `corners` (m, k, 3) [m] are seen from the member's place; a solid of fewer corners repeats its last one.  `low`,
    `high` (m, 13) are their reach along the level directions and upwards.  `start` (n + 1,) are the
    members' first rows.
    """

    def __init__(self, listed: tuple[Member, ...], turn: float) -> None:
        most = max(len(solid) for member in listed for solid in member.solids)
        owner, state, corners = [], [], []
        for i, member in enumerate(listed):
            solids = np.array([np.vstack([s, np.repeat(s[-1:], most - len(s), axis=0)]) for s in member.solids])
            for j, matrix in enumerate(states(member, turn)):
                corners.append(solids @ matrix)
                owner += [i] * len(solids)
                state += [j] * len(solids)
        self.owner, self.state, self.corners = np.array(owner), np.array(state), np.concatenate(corners)
        reach = np.stack([self.corners @ direction for direction in _DIRECTIONS], axis=-1)
        self.low, self.high = reach.min(axis=1), reach.max(axis=1)
        self.start = np.searchsorted(self.owner, np.arange(len(listed) + 1))


class _Search:
    """Pairs in the order of a lower bound of their distance, until none that is left can be among the nearest."""

    def __init__(self, items: _Items, moves: Moves, count: int) -> None:
        self.items, self.moves, self.count = items, moves, count
        self.found: list[tuple[float, int, int]] = []

    @property
    def worst(self) -> float:
        """Distance that a pair must not exceed to be listed."""
        return self.found[self.count - 1][0] if len(self.found) >= self.count else math.inf

    def answer(self, first: Whole, second: Whole) -> tuple[Pair, ...]:
        bound = self._member_bounds(first, second)
        order = np.argsort(bound, kind="stable")
        done, size = 0, FIRST_LOT
        while done < order.size and bound[order[done]] <= self.worst:
            lot = order[done : done + size]
            lot = lot[bound[lot] <= self.worst]
            self._work(first[lot], second[lot])
            done, size = done + size, 2 * size
        return tuple(Pair(i, j, distance) for distance, i, j in self.found[: self.count])

    def _member_bounds(self, first: Whole, second: Whole) -> Floats:
        items, moves = self.items, self.moves
        starts = items.start[:-1]
        low, high = np.minimum.reduceat(items.low, starts), np.maximum.reduceat(items.high, starts)
        boxes = np.stack([moves.low[first, second], moves.high[first, second]], axis=1)
        shift = moves.place[second] - moves.place[first]
        return _bounds(low[first], high[first], low[second], high[second], shift, boxes)

    def _work(self, first: Whole, second: Whole) -> None:
        """Find the distances of a lot of pairs of members, as far as they matter."""
        for pairs in self._in_lots(first, second):
            one, two = first[pairs], second[pairs]
            best = np.full(one.size, np.inf)
            for pair, a, b in self._rows(one, two):
                self._improve(best, (one, two), pair, a, b)
            known = np.flatnonzero(np.isfinite(best))
            self.found += [(round(float(best[i]), DIGITS), int(one[i]), int(two[i])) for i in known]
            self.found = sorted(self.found)[: self.count]

    def _improve(self, best: Floats, members: tuple[Whole, Whole], pair: Whole, a: Whole, b: Whole) -> None:
        """Lower the distance `best` of each pair of members, in place, to those of its solids a and b."""
        boxes, shifts = self._movement(members[0][pair], members[1][pair], a)
        bound = _bounds(self.items.low[a], self.items.high[a], self.items.low[b], self.items.high[b], shifts, boxes)
        # the likeliest rows of each pair first: what they give spares most of the others
        order = np.lexsort((bound, pair))
        rank = np.arange(order.size) - np.searchsorted(pair[order], pair[order])
        for start, stop in ((0, 1), (1, 8), (8, order.size)):
            rows = order[(rank >= start) & (rank < stop)]
            rows = rows[bound[rows] <= np.minimum(best[pair[rows]], self.worst)]
            if rows.size:
                limit = np.minimum(best[pair[rows]], self.worst)
                corners = self.items.corners
                moved = boxes[rows] + shifts[rows, None, :]
                result = distances(corners[a[rows]], corners[b[rows]], moved, limit)
                np.minimum.at(best, pair[rows], np.where(result <= limit, result, np.inf))

    def _in_lots(self, first: Whole, second: Whole) -> Iterator[slice]:
        """Slices of the pairs, each of at most so many pairs of solids that it fits into memory."""
        size = np.diff(self.items.start)
        rows = np.cumsum(size[first] * size[second])
        start = 0
        while start < first.size:
            before = rows[start - 1] if start else 0
            stop = max(int(np.searchsorted(rows, before + MOST_ROWS, side="right")), start + 1)
            yield slice(start, stop)
            start = stop

    def _rows(self, first: Whole, second: Whole) -> Iterator[tuple[Whole, Whole, Whole]]:
        """Every solid in every state of the one against every one of the other: which pair, and the two items.

        In parts that fit into memory: long levers have thousands of solids.
        """
        size = np.diff(self.items.start)
        ends = np.cumsum(size[first] * size[second])
        for start in range(0, int(ends[-1]), MOST_ROWS):
            row = np.arange(start, min(start + MOST_ROWS, int(ends[-1])))
            pair = np.searchsorted(ends, row, side="right")
            wide = size[second][pair]
            inside = row - (ends[pair] - size[first][pair] * wide)
            yield pair, self.items.start[first][pair] + inside // wide, self.items.start[second][pair] + inside % wide

    def _movement(self, first: Whole, second: Whole, item: Whole) -> tuple[Floats, Floats]:
        """Of each row the box (m, 2, 3) that stays open, and the shift (m, 3) from the one's place to the other's."""
        moves = self.moves
        boxes = np.stack([moves.low[first, second], moves.high[first, second]], axis=1)
        own, moved = moves.own_turn(first, second, self.items.state[item])
        return boxes - own, moves.place[second] - moves.place[first] + moved


def _bounds(
    low_one: Floats, high_one: Floats, low_two: Floats, high_two: Floats, shift: Floats, boxes: Floats
) -> Floats:
    """Lower bounds (m,) of distances, from the reach (m, 13) along each direction: the widest level gap, the rise."""
    moved = shift[:, None, :] + boxes
    middle, half = moved.mean(axis=1), 0.5 * (moved[:, 1] - moved[:, 0])
    along, about = middle @ _DIRECTIONS.T, half @ np.abs(_DIRECTIONS.T)
    gap = np.maximum(low_two + along - about - high_one, low_one - along - about - high_two)
    gap = np.maximum(gap, 0.0)
    # a hair less, so that rounding never leaves out what touches the limit
    return np.asarray(np.hypot(gap[:, :-1].max(axis=1), gap[:, -1]) - 1e-12)
