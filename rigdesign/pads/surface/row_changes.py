"""Pads that change to a neighbouring row: a move that no small step can make.

Every pad is tried on the rows beside its own, at its station, with the forces of least band use.  The most promising
changes are refined for a few steps, and the best of them is kept if it is better; then all is tried again.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator

import numpy as np

from rigdesign.pads.surface.ground import Ground, nearest_rows
from rigdesign.pads.surface.refine import Standing
from rigdesign.target.curve import Floats

SWEEPS = 4
"""Times that every pad is tried."""
REFINED, STEPS = 3, 10
"""So many changes of a sweep are refined, by so many steps each."""
LEAST_GAIN = 1e-3
"""Smallest gain, as a fraction, that a change must bring."""

Filled = Callable[[Floats, Floats], Standing | None]
Refined = Callable[[Standing, int], Standing]


def with_rows_changed(ground: Ground, best: Standing, filled: Filled, refined: Refined) -> Standing:
    """Return the best standing found by changes of rows, or the one given.

    `filled` puts forces to places, None where there are none; `refined` moves a standing for so many steps.
    """
    for _ in range(SWEEPS):
        tried = [filled(x, y) for x, y in _changes(ground, best)]
        able = sorted((one for one in tried if one is not None), key=lambda one: one.value)
        found = [refined(one, STEPS) for one in able[:REFINED]]
        better = min(found, key=lambda one: one.value, default=best)
        if better.value >= best.value * (1 - LEAST_GAIN):
            break
        best = better
    return best


def _changes(ground: Ground, now: Standing) -> Iterator[tuple[Floats, Floats]]:
    """Places with one pad on the next row to either side, those that keep room and gaps."""
    rows = ground.brief.pads.rows
    own = nearest_rows(rows, now.x, now.y)
    every = np.stack([row.at(now.x) for row in rows])
    for pad in range(now.x.size):
        by_y = np.argsort(every[:, pad], kind="stable")
        at = int(np.flatnonzero(by_y == own[pad])[0])
        for beside in (at - 1, at + 1):
            if 0 <= beside < len(rows):
                y = now.y.copy()
                y[pad] = every[by_y[beside], pad]
                if ground.keeps(now.x, y):
                    yield now.x, y
