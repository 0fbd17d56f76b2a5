"""Steepest descent over whole numbers: the best of many small moves is made until none helps or the work is done."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from rigdesign.levers.wiring import Ints, Wiring
from rigdesign.target.curve import Floats

GAIN = 1e-9
"""A move must gain this fraction, so that round-off does not keep a descent alive."""


@dataclass(frozen=True)
class Descended:
    """The best row of steps found (q,), its value, how many rows were judged, and whether no move helps any more."""

    steps: Ints
    value: float
    judged: int
    is_settled: bool


def descend(steps: Ints, moves: Ints, value: Callable[[Ints], Floats], most: int) -> Descended:
    """Descend from `steps` (q,) by `moves` (k, q) with the values (k,) that `value` gives rows of steps.

    At most `most` rows are judged, the last sweep completed.
    """
    best = float(value(steps[None])[0])
    judged = 1
    while judged < most and len(moves):
        rows = steps + moves
        values = value(rows)
        judged += len(rows)
        row = int(np.argmin(values))
        if not values[row] < best * (1.0 - GAIN):
            return Descended(steps, best, judged, True)
        steps, best = rows[row], float(values[row])
    return Descended(steps, best, judged, not len(moves))


def moves_of(size: int, pairs: Ints, far: int = 2) -> Ints:
    """Moves of one number by up to `far` steps either way, and of the given pairs (k, 2) of numbers by one each."""
    single = [np.eye(size, dtype=np.int64) * reach for reach in (*range(1, far + 1), *range(-far, 0))]
    double = []
    for first in (1, -1):
        for second in (1, -1):
            rows = np.zeros((len(pairs), size), dtype=np.int64)
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
