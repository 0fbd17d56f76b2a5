"""Steepest descent over whole numbers: the best of many small moves is made until none helps or the work is done.

Where no move helps, the most promising ones are tried two at a time before the descent counts as settled.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.wiring import Ints, Wiring
from rigdesign.target.curve import Floats

GAIN = 1e-9
"""A move must gain this fraction, so that round-off does not keep a descent alive."""


Moves = NDArray[np.int8]

BLOCK = 2_000_000
"""Most numbers in one block of rows that are judged together: keeps the memory of large trees small."""

COMBINED = 40
"""So many of the moves that lost least are tried two at a time."""


KICKS, KICK = 40, 5
"""A descent is repeated at most so many times, each time from so many moves away."""

MULTIPLIER, MODULUS = 48271, 2**31 - 1
"""The multiplicative congruential sequence that picks those moves: Park and Miller, Communications of the ACM 36
(1993) 105-110, from memory."""


@dataclass(frozen=True)
class Descended:
    """The best row of steps found (q,), its value, how many rows were judged, and whether no move helps any more."""

    steps: Ints
    value: float
    judged: int
    is_settled: bool


def descend(steps: Ints, moves: Moves, value: Callable[[Ints], Floats], most: int) -> Descended:
    """Descend from `steps` (q,) by `moves` (k, q) with the values (k,) that `value` gives rows of steps.

    At most `most` rows are judged, the last sweep completed.
    """
    best = float(value(steps[None])[0])
    judged = 1
    tried, combined = moves, False
    while judged < most and len(moves):
        values = _values(steps, tried, value)
        judged += len(tried)
        row = int(np.argmin(values))
        if values[row] < best * (1.0 - GAIN):
            steps, best = steps + tried[row], float(values[row])
            tried, combined = moves, False
        elif combined:
            return Descended(steps, best, judged, True)
        else:
            tried, combined = _two_at_a_time(moves, values), True
    return Descended(steps, best, judged, not len(moves))


def _values(steps: Ints, moves: Moves, value: Callable[[Ints], Floats]) -> Floats:
    """Values (k,) of the rows that `moves` (k, q) lead to, a block at a time."""
    block = max(1, BLOCK // steps.size)
    return np.concatenate([value(steps + moves[start : start + block]) for start in range(0, len(moves), block)])


def descend_again(found: Descended, moves: Moves, value: Callable[[Ints], Floats], most: int) -> Descended:
    """Descend again and again from places a few moves away from the best one so far, and return the best of all.

    Up to `KICKS` times, as long as fewer than `most` rows are judged.  Which moves lead away follows from a fixed
    rule, so that the outcome is always the same.
    """
    best, judged, number = found, found.judged, 1
    for _ in range(KICKS if len(moves) else 0):
        if judged >= found.judged + most:
            break
        away = np.zeros_like(best.steps)
        for _ in range(KICK):
            number = number * MULTIPLIER % MODULUS
            away = away + moves[number % len(moves)]
        again = descend(best.steps + away, moves, value, found.judged + most - judged)
        judged += again.judged
        if again.value < best.value * (1.0 - GAIN):
            best = again
    return Descended(best.steps, best.value, judged, best.is_settled)


def _two_at_a_time(moves: Moves, values: Floats) -> Moves:
    """Sums of two of the moves that lost least."""
    likely = moves[np.argsort(values, kind="stable")[:COMBINED]]
    first, second = np.triu_indices(len(likely))
    return likely[first] + likely[second]


def moves_of(size: int, pairs: Ints, far: int = 2) -> Moves:
    """Moves of one number by up to `far` steps either way, and of the given pairs (k, 2) of numbers by one each."""
    single = [np.eye(size, dtype=np.int8) * np.int8(reach) for reach in (*range(1, far + 1), *range(-far, 0))]
    double = []
    for first in (1, -1):
        for second in (1, -1):
            rows = np.zeros((len(pairs), size), dtype=np.int8)
            rows[np.arange(len(pairs)), pairs[:, 0]] = first
            rows[np.arange(len(pairs)), pairs[:, 1]] = second
            double.append(rows)
    return np.concatenate([*single, *double])


def all_pairs(size: int) -> Ints:
    """Every pair of numbers, (k, 2)."""
    return np.stack(np.triu_indices(size, 1), axis=1).astype(np.int64)


def near_pairs(wiring: Wiring, per_lever: int) -> Ints:
    """Pairs of numbers of one lever, and of levers that hang from one another or side by side, (k, 2)."""
    kin = [(row, row) for row in range(wiring.n_levers)]
    for row, inboard, outboard in wiring.downward():
        below = [end for end in (inboard, outboard) if end >= 0]
        kin += [(row, end) for end in below]
        if len(below) == 2:
            kin.append((below[0], below[1]))
    pairs = {
        (min(p, q), max(p, q))
        for one, other in kin
        for p in range(one * per_lever, (one + 1) * per_lever)
        for q in range(other * per_lever, (other + 1) * per_lever)
        if p != q
    }
    return np.array(sorted(pairs), dtype=np.int64).reshape(-1, 2)
