"""Free pads: how the branch and bound is asked for the best whole arms.

First in the smallest window, where the outcome can nearly always be proven; then in a wider one with what was found
as the bound; then, for large trees, again and again below single levers, from the one that errs most upwards.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.levers.branching import Pins, Search, rows_under
from rigdesign.levers.judging import Lines
from rigdesign.levers.wiring import Ints
from rigdesign.pads.outcome import Progress
from rigdesign.target.curve import Floats

WINDOW, WIDE, MENDING = 1, 2, 3
"""Steps to either side of the planned arms: in the first search, in the second, and below single levers."""

FIRST_LOSS, PASSES = 0.01, 20
"""A first pass allows a band use above the plan's by this fraction; each further one, so many, twice the loss."""

LEAST_PLANNED = 1e-6
"""A planned band use below this counts as this: bounds grow from it by factors."""

FOLLOWED = 60_000
"""Choices that a pass may follow at all levers together."""

MENDED_PER_PAD = 5_000
"""Choices that mending may look at, for each pad."""

MENDING_GAIN = 1e-4
"""Fraction of the band use that mending must gain each time."""


@dataclass(frozen=True)
class Arms:
    """Arms found: steps (n_levers, 2), their band use, and the number of choices looked at.

    `window` is the number of steps to either side of the planned lines within which no arms have a band use below
    `least`, proven; 0 where nothing is proven.
    """

    steps: Ints
    use: float
    nodes: int
    window: int
    least: float


def search_arms(search: Search, jack: Pins, planned: float, progress: Progress | None = None) -> Arms | None:
    """Find the best arms of a whole tree; None where none in the windows keep the limits.

    `planned` is the band use before drilling.
    """
    most = max(16, FOLLOWED // search.wiring.n_levers)
    planned = max(planned, LEAST_PLANNED)
    narrow = _first_found(search, jack, _Pass(planned, np.inf, WINDOW, most))
    if progress is not None:
        progress(0.3, "drilling")
    wide = _first_found(search, jack, _Pass(planned, narrow.use, WIDE, most))
    best = min(narrow, wide, key=lambda arms: arms.use)
    if not np.isfinite(best.use):
        return None
    proof = wide if wide.window else narrow
    # where the wide search finds nothing below its limit, the limit itself is proven
    least = min(proof.least, narrow.use)
    best = Arms(best.steps, best.use, narrow.nodes + wide.nodes, proof.window, least)
    return mended(search, jack, best, progress)


@dataclass(frozen=True)
class _Pass:
    """Bounds from the planned band use up to `limit`, within a window, following at most `most` choices a lever."""

    planned: float
    limit: float
    window: int
    most: int


def _first_found(search: Search, jack: Pins, task: _Pass) -> Arms:
    """Let the bound out until arms are found, or up to the limit.

    A tight bound leaves little to follow, so the first arms found are nearly always the best of all, with proof.  Where
    nothing is below the limit, and all was followed, that is proven too.
    """
    none = np.zeros((search.wiring.n_levers, 2), dtype=np.int64)
    nodes = 0
    for turn in range(PASSES + 1):
        bound = task.planned * (1.0 + FIRST_LOSS * 2.0**turn) if turn < PASSES else np.inf
        last = bound >= task.limit or turn == PASSES
        use, steps, count = search.best(0, jack, min(bound, task.limit), task.window, task.most)
        nodes += count.nodes
        if np.isfinite(use) or last:
            return Arms(steps, use, nodes, task.window if count.is_complete else 0, use)
        if not count.is_complete and np.isfinite(task.limit):
            break
    return Arms(none, np.inf, nodes, 0, np.inf)


def mended(search: Search, jack: Pins, arms: Arms, progress: Progress | None = None) -> Arms:
    """Better arms below the levers that err most, as long as some can be found."""
    most = MENDED_PER_PAD * search.wiring.n_pads
    steps, nodes, parent = arms.steps, arms.nodes, _parents(search)
    while nodes - arms.nodes < most:
        pins, own = _pins(search, jack, steps)
        row = int(np.argmax(own))
        use = float(own[row])
        better = None
        while row >= 0 and better is None and nodes - arms.nodes < most:
            under = rows_under(search.wiring, row)
            follow = max(16, FOLLOWED // len(under))
            pin = pins.taken(np.array([row]))
            found, below, count = search.best(row, pin, use * (1 - MENDING_GAIN), MENDING, follow)
            nodes += count.nodes
            if np.isfinite(found):
                better = steps.copy()
                better[under] = below
            row = parent[row]
        if better is None:
            break
        steps = better
        if progress is not None:
            progress(0.3 + 0.5 * min(1.0, (nodes - arms.nodes) / most), "drilling")
    use = float(_pins(search, jack, steps)[1].max())
    return Arms(steps, use, nodes, arms.window, arms.least)


def _parents(search: Search) -> list[int]:
    """Row of the lever above each lever, −1 for the top one."""
    parent = [-1] * search.wiring.n_levers
    for row, *ends in search.wiring.downward():
        for end in ends:
            if end >= 0:
                parent[end] = row
    return parent


def _pins(search: Search, jack: Pins, steps: Ints) -> tuple[Pins, Floats]:
    """Pins that all levers hang from, and the largest error over its band of each lever's line and own pads."""
    size = search.wiring.n_levers
    load, place, right = np.zeros(size), np.zeros(size), Lines(np.zeros(size), np.zeros(size))
    load[0], place[0] = jack.load[0], jack.place[0]
    right.load[0], right.first[0] = jack.right.load[0], jack.right.first[0]
    own = np.zeros(size)
    for row, *ends in search.wiring.downward():
        here = np.array([row])
        halves = search.halves(Pins(load, place, right).taken(here), steps[here])
        own[row] = search.judge.line_use(halves[0].right, search.displacement)[0]
        for end, half in zip(ends, halves, strict=True):
            if end >= 0:
                load[end], place[end] = half.load[0], half.place[0]
                right.load[end], right.first[end] = half.right.load[0], half.right.first[0]
            else:
                use = search.judge.pad_use(half.place, half.load, half.right, search.displacement)
                own[row] = max(own[row], use[0])
    return Pins(load, place, right), own
