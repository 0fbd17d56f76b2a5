"""Free pads in plan: on rows, or anywhere on the outline.

A grid of allowed places is searched as hard points are; then places and forces are moved together, by linear programmes
in a trust region, as long as the band use falls.  What is proven is what holds for free pads on a line.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.pads.outcome import Outcome, Progress
from rigdesign.pads.surface.choice import choose
from rigdesign.pads.surface.evening import limits
from rigdesign.pads.surface.given import (
    LINE_METHOD,
    PROVEN,
    choice_of,
    evened,
    exchanged,
    programme,
)
from rigdesign.pads.surface.line_bounds import line_bounds
from rigdesign.pads.surface.many import choose_of_many
from rigdesign.pads.surface.places import free_candidates
from rigdesign.target.model import Target

GRID = 3.0
"""Places of the grid a pad; at least `PROVEN` in all, at most `MOST`."""
MOST = 240
NODES = 1_000


@dataclass(frozen=True)
class FreeInPlan:
    """The search for `count` free pads under a jack at jack_x, jack_y [m]."""

    target: Target
    jack_x: float
    jack_y: float
    count: int
    progress: Progress | None

    def choose(self) -> Outcome | None:
        """Best pads with their proof; None where none were found that balance the target."""
        target, jack = self.target, (self.jack_x, self.jack_y)
        x, y = free_candidates(target.brief, int(np.clip(GRID * self.count, PROVEN - 4, MOST)))
        if x.size < self.count:
            return None
        choice = choice_of(target, jack, x, y, self.count)
        self._tell(0.02, f"choosing {self.count} of {x.size} places of a grid")
        line_use, moment_least = line_bounds(target, self.jack_x, self.count)
        small = x.size <= PROVEN
        found = choose(choice, NODES) if small else choose_of_many(choice, line_use, self.progress)
        if found.pads is None:
            return None
        own = programme(target, choice.balance, x[found.pads], y[found.pads])
        best = own.least_use()
        if best is None:
            return None
        first = evened(target, own, best)
        before = own.judged(best.force, first.share).evenness
        placed, _ = exchanged(choice, target, found.pads, first, limits(target.brief.pads, own, best))
        words = f"{self.count} free pads from a grid of {x.size} places"
        return Outcome(
            placed.x, placed.forces.force, line_use, best.use, moment_least, before, LINE_METHOD, words, placed.y
        )

    def _tell(self, part: float, words: str) -> None:
        if self.progress is not None:
            self.progress(part, words)
