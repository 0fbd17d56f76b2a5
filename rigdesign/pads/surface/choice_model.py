"""The problem of choosing places, and which of them exclude each other."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.pads.surface.balance import Balance
from rigdesign.pads.surface.error_rows import ErrorRows
from rigdesign.target.curve import Floats
from rigdesign.target.cuts import SAME_PLACE

Truths = NDArray[np.bool_]
Indices = NDArray[np.intp]


@dataclass(frozen=True)
class Choice:
    """Places x, y (n,) [m] of which `count` get pads, forces between `least` and `largest` [N]; n × n `compatible`."""

    rows: ErrorRows
    balance: Balance
    x: Floats
    y: Floats
    count: int
    least: float
    largest: float
    compatible: Truths


@dataclass(frozen=True)
class Chosen:
    """The places that got pads (None: none were found), and the proven least band use (infinite: none can be)."""

    pads: Indices | None
    bound: float
    is_proven: bool


def station_numbers(x: Floats, span: float) -> Indices:
    """Return the number of the station at which each place x (n,) [m] stands, (n,), counted from the root.

    Places that one cut goes through share a station, as `counts` sees it.

    >>> station_numbers(np.array([1.0, 0.2, 1.0 + 1e-14, 3.0]), 4.0)
    array([1, 0, 1, 2])
    """
    order = np.argsort(x, kind="stable")
    numbers = np.empty(x.size, dtype=np.intp)
    numbers[order] = np.cumsum(np.diff(x[order], prepend=-np.inf) > SAME_PLACE * span) - 1
    return numbers


def cliques(compatible: Truths) -> list[list[int]]:
    """Return sets of places of which one alone can have a pad, such that every colliding pair is in one of them.

    >>> cliques(np.array([[True, False, True], [False, True, True], [True, True, True]]))
    [[0, 1]]
    """
    collide = ~compatible
    np.fill_diagonal(collide, False)
    left = np.triu(collide)
    found = []
    for i in range(len(collide)):
        for j in np.flatnonzero(left[i]):
            if not left[i, j]:
                continue
            clique = [i, int(j)]
            for k in np.flatnonzero(collide[i] & collide[j]):
                if all(collide[k, member] for member in clique):
                    clique.append(int(k))
            clique.sort()
            for member in clique:
                left[member, clique] = False
            found.append(clique)
    return found
