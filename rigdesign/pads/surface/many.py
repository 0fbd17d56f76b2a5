"""More places than one mixed-integer programme can prove in seconds: bounded and found level by level.

At a band use the question is how few pads keep it.  `pads_needed` answers from below: where it asks for more pads than
there are, that band use is out of reach.  `few_pads` answers from above, with sets of pads whose forces of least band
use a linear programme then finds; exchanges with neighbouring places where the errors are largest make the best of them
better.  Where cuts or bands are not of the kind that these two follow, a relaxation in which parts of pads count takes
their place, its weights set anew so that it comes to use few places, thinned out a window of places at a time.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.pads.outcome import Progress
from rigdesign.pads.surface.beam import few_pads
from rigdesign.pads.surface.choice_model import Choice, Chosen, Indices, Truths
from rigdesign.pads.surface.jumps import JumpLimits, jump_limits
from rigdesign.pads.surface.program import Programme
from rigdesign.pads.surface.sparse import SparseChoice
from rigdesign.pads.surface.states import pads_needed
from rigdesign.target.curve import Floats

RISE = 1.08
"""From one level of band use to the next while pads are too few for it."""
RISES, HALVINGS = 40, 2
BEAM_RISE, BEAM_LEVELS, AFTER = 1.03, 16, 3
"""Levels at which sets of pads are looked for, and how many more once some are found."""
FAR_RISE, FAR_LEVELS = 1.15, 30
"""Levels beyond these, for few pads whose best band use is many times what is proven."""
MEET = 0.005
"""The search ends where what is found is this close to what is proven."""
TRIES, CLOSE, NEIGHBOURS = 60, 3, 4
"""Exchanges that are tried at most, with the pads closest to the largest errors and their neighbouring places."""
WEIGHTS, WINDOW, NODES = 4, 40, 20
"""Where the relaxation takes over: times its weights are set anew, places in a window, nodes a window."""


def choose_of_many(choice: Choice, least: float, progress: Progress | None) -> Chosen:
    """Return a good choice with a proven bound; `least` is a band use that is proven already."""
    search = Search(choice, SparseChoice(choice), jump_limits(choice), progress)
    relaxed = search.sparse.solve(search.top, use=None, jumps=search.jumps, relaxed=True)
    if relaxed.status == 2:
        return Chosen(None, np.inf, True)
    low = max(least, float(relaxed.fun)) if relaxed.fun is not None else least
    low = search.raised(low)
    best, high = search.found(low)
    if best is not None and high > low * (1 + MEET):
        best, high = search.polished(best, high)
        middle = float(np.sqrt(low * high))
        if search.needed(middle) > choice.count:
            low = middle
    return Chosen(best, low, False)


@dataclass(frozen=True)
class Search:
    """The search of one choice."""

    choice: Choice
    sparse: SparseChoice
    jumps: JumpLimits
    progress: Progress | None

    @property
    def top(self) -> Floats:
        """Most that each pad can carry whatever the band use (n,) [N]."""
        left = self.choice.balance.total - (self.choice.count - 1) * self.choice.least
        return np.full(self.choice.x.size, min(self.choice.largest, left))

    def at(self, use: float) -> Floats:
        """Most that each pad can carry at a band use (n,) [N]."""
        return np.minimum(self.top, self.jumps.at(use))

    def needed(self, use: float) -> int:
        """Return a number of pads that nothing within a band use goes below."""
        return pads_needed(self.choice, use, self.at(use))

    def raised(self, low: float) -> float:
        """Return the largest band use, `low` or above, for which the pads are shown to be too few."""
        level = max(low, 1e-9) * 1.01
        reached: float | None = None
        for rise in range(RISES):
            self._tell(0.3 * rise / RISES, "proving what so few pads cannot keep")
            if self.needed(level) <= self.choice.count:
                reached = level
                break
            low, level = level, level * RISE
        for _ in range(HALVINGS if reached is not None and reached > low * 1.01 else 0):
            middle = float(np.sqrt(low * (reached or low)))
            if self.needed(middle) > self.choice.count:
                low = middle
            else:
                reached = middle
        return low

    def found(self, low: float) -> tuple[Indices | None, float]:
        """Return the best pads of the levels above `low`, and their band use."""
        best, high = self.by_beam(low)
        return (best, high) if best is not None else self._by_relaxation(low)

    def by_beam(self, low: float) -> tuple[Indices | None, float]:
        """Return the best pads that the beam finds at levels above `low`, and their band use."""
        best, high, left = None, np.inf, AFTER
        level = max(low, 1e-9) * (1 + MEET)
        for step in range(BEAM_LEVELS + FAR_LEVELS):
            part = min(step / BEAM_LEVELS, 1.0)
            self._tell(0.3 + 0.5 * part, f"choosing {self.choice.count} of {self.choice.x.size} places")
            for pads in few_pads(self.choice, level, self.at(level)):
                filled, use = self._filled(pads)
                if filled is not None and use < high:
                    best, high = filled, use
            left -= best is not None
            level *= BEAM_RISE if step < BEAM_LEVELS else FAR_RISE
            if not left or level >= high or high <= low * (1 + MEET):
                break
        return best, high

    def _filled(self, pads: Indices) -> tuple[Indices | None, float]:
        """Return as many pads as are wanted, these among them, and their least band use."""
        choice, chosen = self.choice, list(pads)
        if not chosen:  # where nothing is judged along the span, nothing asks for a pad
            chosen = [int(np.argmin(np.hypot(choice.x - choice.balance.x, choice.y - choice.balance.y)))]
        while len(chosen) < choice.count:
            away = np.hypot(choice.x[:, None] - choice.x[chosen], choice.y[:, None] - choice.y[chosen]).min(axis=1)
            fits: Truths = np.all(choice.compatible[:, chosen], axis=1) & (away > 0)
            if not fits.any():
                return None, np.inf
            chosen.append(int(np.argmax(np.where(fits, away, -1.0))))
        if not _apart(choice, chosen):
            return None, np.inf
        return self._judged(np.array(sorted(chosen), dtype=np.intp))

    def _judged(self, pads: Indices) -> tuple[Indices | None, float]:
        forces = self._programme(pads).least_use()
        return (None, np.inf) if forces is None else (pads, forces.use)

    def _programme(self, pads: Indices) -> Programme:
        choice = self.choice
        return Programme(choice.rows, choice.balance, choice.x[pads], choice.y[pads], choice.least, choice.largest)

    def polished(self, pads: Indices, use: float) -> tuple[Indices, float]:
        """Exchange the pads closest to the largest errors with neighbouring places while the band use falls."""
        tried: set[tuple[int, ...]] = set()
        while len(tried) < TRIES:
            better = None
            for exchanged in self._exchanges(pads):
                key = tuple(int(pad) for pad in exchanged)
                if key in tried or len(tried) >= TRIES:
                    continue
                tried.add(key)
                _, own = self._judged(exchanged)
                if own < use * (1 - 1e-4):
                    better, use = exchanged, own
                    break
            if better is None:
                break
            pads = better
        return pads, use

    def _exchanges(self, pads: Indices) -> list[Indices]:
        choice, own = self.choice, self._programme(pads)
        forces = own.least_use()
        if forces is None:
            return []
        uses = choice.rows.uses(own.x, own.y, forces.force)
        at = np.concatenate([block.at for block in choice.rows.blocks])[uses >= uses.max() * (1 - 1e-6)]
        close = [np.argsort(np.abs(own.x - station), kind="stable")[:CLOSE] for station in np.unique(at)]
        result = []
        for k in dict.fromkeys(int(i) for i in np.concatenate(close)):
            others = np.delete(pads, k)
            fits: Truths = np.all(choice.compatible[:, others], axis=1) & ~np.isin(np.arange(choice.x.size), pads)
            away = np.where(fits, np.hypot(choice.x - own.x[k], choice.y - own.y[k]), np.inf)
            for place in np.argsort(away, kind="stable")[:NEIGHBOURS]:
                if fits[place]:
                    result.append(np.sort(np.append(others, place)))
        return result

    # -- where states and beams do not apply -----------------------------------------------------------------------

    def _by_relaxation(self, low: float) -> tuple[Indices | None, float]:
        """Return pads found by thinning out what a relaxation uses, level by level."""
        level = max(low, 1e-9) * 1.05
        for step in range(BEAM_LEVELS):
            self._tell(0.3 + 0.5 * step / BEAM_LEVELS, f"choosing {self.choice.count} of {self.choice.x.size} places")
            chosen = self._relaxed(level)
            if chosen is not None:
                pads = self._thinned(chosen, level)
                if pads.size <= self.choice.count:
                    filled, use = self._filled(pads)
                    if filled is not None:
                        return filled, use
            level *= 1.0 + 0.1 * 1.3**step
        return None, np.inf

    def _relaxed(self, use: float) -> Truths | None:
        n, top = self.choice.x.size, self.at(use)
        weight, chosen = np.ones(n), None
        for _ in range(WEIGHTS):
            found = self.sparse.solve(top, use=use, jumps=self.jumps, weight=weight, relaxed=True)
            if found.x is None:
                break
            force = found.x[:n]
            chosen = force > 1e-7
            weight = 1.0 / (force / force.max() + 0.02)
            weight *= n / weight.sum()
        return chosen

    def _thinned(self, chosen: Truths, use: float) -> Indices:
        """Take out pads, a window of places at a time, as long as the band use can be kept."""
        n, top = self.choice.x.size, self.at(use)
        for start in range(0, n, WINDOW // 2):
            inside: Truths = (np.arange(n) >= start) & (np.arange(n) < start + WINDOW)
            found = self.sparse.solve(
                top,
                use=use,
                jumps=self.jumps,
                may=chosen | inside,
                must=chosen & ~inside,
                options={"node_limit": NODES},
            )
            if found.x is not None:
                now: Truths = found.x[n + 1 : 2 * n + 1] > 0.5
                chosen = now if now.sum() < chosen.sum() else chosen
            if chosen.sum() <= self.choice.count:
                break
        return np.flatnonzero(chosen)

    def _tell(self, part: float, words: str) -> None:
        if self.progress is not None:
            self.progress(0.05 + 0.75 * part, words)


def _apart(choice: Choice, chosen: list[int]) -> bool:
    own = choice.compatible[np.ix_(chosen, chosen)] | np.eye(len(chosen), dtype=bool)
    return bool(own.all())
