"""Hard points of a panel whose pads keep to their tributary shares.

The choice of least band use knows nothing of shares, and may put pads where each would have to carry far more than what
is nearest to it.  Here the pads are spread over the load instead: every pad moves to the place nearest to the centre of
its own cell, again and again; then places are exchanged with their neighbours while the band use falls that forces
within the shares can reach.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from rigdesign.pads.forces import Forces
from rigdesign.pads.surface.choice_model import Choice, Indices, Truths
from rigdesign.pads.surface.lumps import Lumps
from rigdesign.pads.surface.program import Programme

ROUNDS = 12
"""Times that pads move to the centres of their cells."""
SEEDS = 3
"""Starts: the first pad at the place nearest to the tip, to the middle, and to the root."""
TRIED, NEAREST = 160, 5
"""Exchanges that are looked at in all, for pads in turn with so many neighbours each."""
ANYTHING, BROKEN = 1e6, 1e3
"""A band use that allows everything, and what a set counts as whose forces cannot keep to the shares."""


@dataclass(frozen=True)
class SharesKept:
    """The search for places whose forces keep `within` that part of the pads' shares of the load in `lumped`."""

    choice: Choice
    lumped: Lumps
    within: float

    def best(self, known: Indices) -> Indices | None:
        """Return the places (count,) of least band use that were found; None where none keep both shares and bands.

        Places `known` (count,) are a start as well.
        """
        starts = [start for start in map(self._spread, self._seeds) if start is not None]
        chosen = self._exchanged(min([*starts, known.tolist()], key=self._value))
        return np.array(sorted(chosen), dtype=np.intp) if self._value(chosen) <= 1 else None

    @cached_property
    def _seeds(self) -> list[int]:
        x = self.choice.x
        wanted = np.linspace(x.max(), x.min(), SEEDS)
        return list(dict.fromkeys(int(np.argmin(np.abs(x - at))) for at in wanted))

    def _spread(self, seed: int) -> list[int] | None:
        """Places far apart, then nearest to the centres of their cells; None if so many do not go together."""
        choice = self.choice
        chosen = [seed]
        while len(chosen) < choice.count:
            free = self._fitting(chosen)
            if not free.any():
                return None
            away = np.hypot(choice.x[:, None] - choice.x[chosen], choice.y[:, None] - choice.y[chosen]).min(axis=1)
            chosen.append(int(np.argmax(np.where(free, away, -np.inf))))
        best = list(chosen)
        for _ in range(ROUNDS):
            moved = self._centred(chosen)
            if moved == chosen:
                break
            chosen = moved
            if self._uneven(chosen) < self._uneven(best):
                best = list(chosen)
        return best

    def _fitting(self, chosen: list[int]) -> Truths:
        """Which places (n,) go together with those chosen, and are not among them."""
        fits: Truths = np.all(self.choice.compatible[:, chosen], axis=1)
        return fits & ~np.isin(np.arange(fits.size), chosen)

    def _centred(self, chosen: list[int]) -> list[int]:
        """Every pad in turn at the place nearest to the centre of its cell, the others where they are."""
        choice, load = self.choice, self.lumped
        weight = np.abs(load.force)
        away = (load.x[:, None] - choice.x[chosen]) ** 2 + (load.y[:, None] - choice.y[chosen]) ** 2
        own = np.argmin(away, axis=1)
        result = list(chosen)
        for k in range(len(chosen)):
            mine = weight * (own == k)
            if mine.sum() <= 0:
                continue
            at_x, at_y = float((mine * load.x).sum() / mine.sum()), float((mine * load.y).sum() / mine.sum())
            others = result[:k] + result[k + 1 :]
            free = self._fitting(others)
            near = np.where(free, np.hypot(choice.x - at_x, choice.y - at_y), np.inf)
            if np.isfinite(near.min()):
                result[k] = int(np.argmin(near))
        return result

    def _uneven(self, chosen: list[int]) -> float:
        share = self.lumped.shares(self.choice.x[chosen], self.choice.y[chosen])
        return float(np.abs(share / share.mean() - 1).max())

    # -- exchanges -----------------------------------------------------------------------------------------------------

    def _value(self, chosen: list[int]) -> float:
        """Band use of the best forces within the shares; more than any where there are none."""
        known, key = self._known, tuple(sorted(chosen))
        if key not in known:
            known[key] = self._worked_out(list(key))
        return known[key]

    @cached_property
    def _known(self) -> dict[tuple[int, ...], float]:
        return {}

    def _worked_out(self, chosen: list[int]) -> float:
        choice = self.choice
        x, y = choice.x[chosen], choice.y[chosen]
        own = Programme(choice.rows, choice.balance, x, y, choice.least, choice.largest)
        share = self.lumped.shares(x, y)
        forces: Forces | None = own.least_use(share, self.within)
        if forces is not None:
            return forces.use
        even = own.most_even(np.full(len(choice.rows.quantities), ANYTHING), share)
        return np.inf if even is None else BROKEN * (1 + even.evenness)

    def _exchanged(self, chosen: list[int]) -> list[int]:
        """Places exchanged with near ones, one at a time, as long as that makes the value less."""
        choice, left, pad, idle = self.choice, TRIED, 0, 0
        while left > 0 and idle < len(chosen):
            others = chosen[:pad] + chosen[pad + 1 :]
            free = self._fitting(others)
            free[chosen[pad]] = False
            away = np.hypot(choice.x - choice.x[chosen[pad]], choice.y - choice.y[chosen[pad]])
            near = [int(place) for place in np.argsort(away, kind="stable") if free[place]][:NEAREST]
            left -= len(near)
            tried = [[*chosen[:pad], place, *chosen[pad + 1 :]] for place in near]
            best = min(tried, key=self._value, default=chosen)
            if self._value(best) < self._value(chosen) * (1 - 1e-3):
                chosen, idle = best, 0
            else:
                idle += 1
            pad = (pad + 1) % len(chosen)
        return chosen
