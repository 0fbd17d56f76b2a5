"""More places than one programme can prove: found level by level, bounded by what pads must at least jump.

At a given band use the question is how few pads keep it.  Its relaxation, in which parts of pads count, bounds their
number from below: where it asks for more than there are, that band use is out of reach.  A set of pads that keeps the
band use comes from the relaxation too, its weights set anew so that it comes to use few places, and is then thinned out
a window of places at a time, the other pads kept, by branch and bound.  Where few enough are left, their forces of
least band use are an answer.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.pads.outcome import Progress
from rigdesign.pads.surface.choice_model import Choice, Chosen, Indices, Truths
from rigdesign.pads.surface.jumps import JumpLimits, jump_limits
from rigdesign.pads.surface.sparse import SparseChoice
from rigdesign.target.curve import Floats

LEVELS = 8
"""Levels of band use that are tried at most."""
MEET = 0.02
"""The search ends where what is found is this close to what is proven."""
STEP = 1.06
"""From a level that could not be kept to the next."""
WEIGHTS = 4
"""Times that the relaxation's weights are set anew."""
WINDOW, NODES = 70, 60
"""Places in a window, and nodes that its branch and bound may take."""
PASSES = 2


def choose_of_many(choice: Choice, least: float, progress: Progress | None) -> Chosen:
    """Return a good choice with a proven bound; `least` is a band use that is proven already."""
    search = _Search(choice, SparseChoice(choice), jump_limits(choice), progress)
    relaxed = search.sparse.solve(search.top, use=None, jumps=search.jumps, relaxed=True)
    if relaxed.status == 2:
        return Chosen(None, np.inf, True)
    low = max(least, float(relaxed.fun)) if relaxed.fun is not None else least
    best, high, level = None, np.inf, low * (1 + MEET / 2)
    for question in range(LEVELS):
        search.tell(question / LEVELS, f"choosing {choice.count} of {choice.x.size} places")
        needed, pads = search.at(level)
        if needed > choice.count:
            low = max(low, level)
        if pads is not None and pads.size <= choice.count:
            filled, use = search.filled(pads)
            if filled is not None and use < high:
                best, high = filled, use
        if high <= low * (1 + MEET):
            break
        if pads is not None and pads.size <= choice.count:
            level = np.sqrt(max(low, level / STEP) * min(high, level)) if level > low else low
        else:
            low_tried = level
            level = min(level * STEP, np.sqrt(low_tried * high)) if np.isfinite(high) else level * STEP
        if not low < level < high:
            break
    return Chosen(best, low, False)


@dataclass(frozen=True)
class _Search:
    choice: Choice
    sparse: SparseChoice
    jumps: JumpLimits
    progress: Progress | None

    @property
    def top(self) -> Floats:
        """Most that each pad can carry whatever the band use (n,) [N]."""
        left = self.choice.balance.total - (self.choice.count - 1) * self.choice.least
        return np.full(self.choice.x.size, min(self.choice.largest, left))

    def tell(self, part: float, words: str) -> None:
        """Report progress."""
        if self.progress is not None:
            self.progress(0.05 + 0.75 * part, words)

    def at(self, use: float) -> tuple[int, Indices | None]:
        """Return how many pads a band use needs at least, and few pads that keep it (None: none found)."""
        n = self.choice.x.size
        top = np.minimum(self.top, self.jumps.at(use))
        weight, needed = np.ones(n), 0
        for turn in range(WEIGHTS):
            found = self.sparse.solve(top, use=use, jumps=self.jumps, weight=weight, relaxed=True)
            if found.x is None:
                return (n + 1, None) if found.status == 2 else (needed, None)
            force = found.x[:n]
            if turn == 0:
                needed = int(np.ceil(found.fun - 1e-6))
                if needed > self.choice.count:
                    return needed, None
            weight = 1.0 / (force / force.max() + 0.02)
            weight *= n / weight.sum()
        chosen = force > 1e-7
        return needed, self._thinned(chosen, top, use)

    def _thinned(self, chosen: Truths, top: Floats, use: float) -> Indices:
        """Take out pads, a window of places at a time, as long as the band use can be kept."""
        n = self.choice.x.size
        for _ in range(PASSES):
            before = int(chosen.sum())
            for start in range(0, n, WINDOW // 2):
                inside = np.zeros(n, bool)
                inside[start : start + WINDOW] = True
                found = self.sparse.solve(
                    top,
                    use=use,
                    jumps=self.jumps,
                    may=chosen | inside,
                    must=chosen & ~inside,
                    options={"node_limit": NODES},
                )
                if found.x is not None:
                    now = found.x[n + 1 : 2 * n + 1] > 0.5
                    if now.sum() < chosen.sum():
                        chosen = now
                if chosen.sum() <= self.choice.count:
                    return np.flatnonzero(chosen)
            if chosen.sum() == before:
                break
        return np.flatnonzero(chosen)

    def filled(self, pads: Indices) -> tuple[Indices | None, float]:
        """Return as many pads as are wanted, these among them, and their least band use."""
        n = self.choice.x.size
        must = np.zeros(n, bool)
        must[pads] = True
        may = must.copy()
        if pads.size < self.choice.count:
            away = np.hypot(self.choice.x[:, None] - self.choice.x[pads], self.choice.y[:, None] - self.choice.y[pads])
            fits = self.choice.compatible[:, pads].all(axis=1) & ~must
            far = np.argsort(np.where(fits, -away.min(axis=1), np.inf), kind="stable")
            may[far[: 4 * (self.choice.count - pads.size)]] = True
        found = self.sparse.solve(self.top, use=None, may=may, must=must, options={"node_limit": NODES})
        if found.x is None:
            return None, np.inf
        return np.flatnonzero(found.x[n + 1 : 2 * n + 1] > 0.5), float(found.fun)
