"""Who hangs with whom: a binary tree over the pads as two integer columns.

Levers stand tier by tier from the jack, inboard to outboard inside a tier, so that a lever always stands before what
hangs from it: a walk down the rows goes from the jack to the pads, a walk up them from the pads to the jack.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Grouping
from rigdesign.target.curve import Floats

Ints = NDArray[np.int64]


@dataclass(frozen=True)
class Wiring:
    """Levers and what hangs from their ends.

    `ends` (n_levers, 2) names what hangs from the inboard and the outboard end: a lever by its row, a pad p by −1 − p
    (rows and pads from 0).  `tier` (n_levers,) is 1 for the lever on the jack.  Without levers the one pad hangs on
    the jack itself.
    """

    n_pads: int
    ends: Ints
    tier: Ints

    @property
    def n_levers(self) -> int:
        """Number of levers."""
        return len(self.ends)

    @property
    def depth(self) -> int:
        """Number of tiers."""
        return int(self.tier.max(initial=0))

    @property
    def is_neighbourly(self) -> bool:
        """Whether every lever joins two stretches of consecutive pads, the inboard one at its inboard end."""
        stretches = self.stretches()
        for row, (inboard, outboard) in enumerate(self.ends):
            first, second = self._stretch(stretches, inboard), self._stretch(stretches, outboard)
            if stretches[row, 1] - stretches[row, 0] + 1 != self.pads_under(row).size or first[1] + 1 != second[0]:
                return False
        return True

    def stretches(self) -> Ints:
        """First and last pad (from 0) under each lever, (n_levers, 2)."""
        result = np.empty((self.n_levers, 2), dtype=np.int64)
        for row in range(self.n_levers - 1, -1, -1):
            ends = [self._stretch(result, end) for end in self.ends[row]]
            result[row] = min(end[0] for end in ends), max(end[1] for end in ends)
        return result

    @staticmethod
    def _stretch(stretches: Ints, end: int) -> tuple[int, int]:
        return (-1 - end, -1 - end) if end < 0 else (int(stretches[end, 0]), int(stretches[end, 1]))

    def pads_under(self, node: int) -> Ints:
        """Pads (from 0) under a lever's row, or the pad itself for −1 − pad; in order."""
        found, waiting = [], [int(node)]
        while waiting:
            node = waiting.pop()
            if node < 0:
                found.append(-1 - node)
            else:
                waiting.extend(int(end) for end in self.ends[node])
        return np.array(sorted(found), dtype=np.int64)

    def upward(self) -> Iterator[tuple[int, int, int]]:
        """Rows from the pads to the jack: lever, what hangs inboard, what hangs outboard."""
        for row in range(self.n_levers - 1, -1, -1):
            yield row, int(self.ends[row, 0]), int(self.ends[row, 1])

    def downward(self) -> Iterator[tuple[int, int, int]]:
        """Rows from the jack to the pads: lever, what hangs inboard, what hangs outboard."""
        for row in range(self.n_levers):
            yield row, int(self.ends[row, 0]), int(self.ends[row, 1])


def quotient(upper: Floats, lower: Floats) -> Floats:
    """upper / lower, infinite where lower is not above zero."""
    result = np.full(np.shape(lower), np.inf)
    np.divide(upper, lower, out=result, where=np.asarray(lower) > 0)
    return result


@dataclass(frozen=True)
class Levers:
    """Loads, places and arms of the levers of a wiring, all (n_levers,): `load` [N], `pivot` [m], `a`, `b` [m].

    a runs from the pivot to the inboard end, b to the outboard end.
    """

    load: Floats
    pivot: Floats
    a: Floats
    b: Floats

    @property
    def length(self) -> Floats:
        """Distance between the end pins [m]."""
        return self.a + self.b

    @property
    def ratio(self) -> Floats:
        """Longer arm over shorter arm; infinite where an arm is zero."""
        shorter = np.minimum(self.a, self.b)
        return quotient(np.maximum(self.a, self.b), shorter)

    @property
    def steel_estimate(self) -> float:
        """Σ (P·ab/(a+b))^(2/3)·(a+b) over the levers [N^(2/3)·m^(5/3)]."""
        length = self.length
        bending = np.divide(self.load * self.a * self.b, length, out=np.zeros(length.shape), where=length > 0)
        return float(np.sum(np.cbrt(bending * bending) * length))


def ideal_levers(wiring: Wiring, x: Floats, force: Floats) -> Levers:
    """Levers whose pivots stand at the force centroids of what hangs from them.

    `x` [m] and `force` [N], both (n_pads,); forces count as positive.
    """
    load, pivot = np.zeros(wiring.n_levers), np.zeros(wiring.n_levers)
    a, b = np.zeros(wiring.n_levers), np.zeros(wiring.n_levers)
    for row, *ends in wiring.upward():
        places = [float(x[-1 - end]) if end < 0 else float(pivot[end]) for end in ends]
        forces = [abs(float(force[-1 - end])) if end < 0 else float(load[end]) for end in ends]
        load[row] = forces[0] + forces[1]
        length = places[1] - places[0]
        a[row], b[row] = length * forces[1] / load[row], length * forces[0] / load[row]
        pivot[row] = places[0] + a[row]
    return Levers(load, pivot, a, b)


def from_pairs(n_pads: int, top: object, halves: Callable[[object], tuple[object, object] | int]) -> Wiring:
    """Number a tree tier by tier.

    `halves(group)` gives the inboard and the outboard half of a group, or the pad (from 0) that it is.
    """
    ends: list[list[int]] = []
    tiers: list[int] = []
    waiting: list[tuple[object, int, int]] = [(top, -1, 0)]
    tier = 1
    while waiting:
        below: list[tuple[object, int, int]] = []
        for group, parent, side in waiting:
            parts = halves(group)
            if isinstance(parts, int):
                name = -1 - parts
            else:
                name = len(ends)
                ends.append([0, 0])
                tiers.append(tier)
                below += [(parts[0], name, 0), (parts[1], name, 1)]
            if parent >= 0:
                ends[parent][side] = name
        waiting, tier = below, tier + 1
    return Wiring(n_pads, np.array(ends, dtype=np.int64).reshape(-1, 2), np.array(tiers, dtype=np.int64))


def from_grouping(grouping: Grouping | int, x: Floats, force: Floats) -> Wiring:
    """Wiring of nested pairs of pad numbers (from 1), each pair's half with the lesser centroid inboard.

    Raises ValueError where a pair is no pair, or where the numbers are not those of the pads, each once.
    """
    _refuse_wrong_pads(grouping, x.size)

    def centroid(group: Grouping | int) -> float:
        under = np.array(_named(group)) - 1
        return float((np.abs(force[under]) * x[under]).sum() / np.abs(force[under]).sum())

    def halves(group: object) -> tuple[object, object] | int:
        if isinstance(group, int):
            return group - 1
        assert isinstance(group, tuple)
        one, other = group
        return (one, other) if centroid(one) <= centroid(other) else (other, one)

    return in_order(from_pairs(x.size, grouping, halves), x, force)


def _refuse_wrong_pads(grouping: Grouping | int, count: int) -> None:
    """Raise ValueError unless the groups are pairs and every pad is named once."""
    named = sorted(_named(grouping))
    unknown = [pad for pad in named if not 1 <= pad <= count]
    if unknown:
        raise ValueError(f"pad {unknown[0]} is named, the pads are 1 to {count}")
    twice = sorted({one for one, other in pairwise(named) if one == other})
    missing = sorted(set(range(1, count + 1)) - set(named))
    if twice or missing:
        what = f"named twice: pad {_list(twice)}" if twice else f"not named: pad {_list(missing)}"
        raise ValueError(f"every pad must be named once, but {what}")


def _named(grouping: Grouping | int) -> list[int]:
    """Pads that a group names, in its order."""
    if isinstance(grouping, int):
        return [grouping]
    if len(grouping) != 2:
        raise ValueError(f"a lever joins two things, and {_words(grouping)} names {len(grouping)}")
    return [*_named(grouping[0]), *_named(grouping[1])]


def in_order(wiring: Wiring, x: Floats, force: Floats) -> Wiring:
    """Renumber so that levers of one tier stand inboard to outboard by their pivots."""
    if not wiring.n_levers:
        return wiring
    order = np.lexsort((ideal_levers(wiring, x, force).pivot, wiring.tier))
    new_row = np.empty_like(order)
    new_row[order] = np.arange(order.size)
    ends = wiring.ends[order]
    return Wiring(wiring.n_pads, np.where(ends < 0, ends, new_row[np.maximum(ends, 0)]), wiring.tier[order])


def _list(numbers: list[int]) -> str:
    return ", ".join(str(number) for number in numbers)


def _words(group: Grouping | int) -> str:
    return str(group) if isinstance(group, int) else "[" + ", ".join(_words(part) for part in group) + "]"
