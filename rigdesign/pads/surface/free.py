"""Free pads in plan: on rows, or anywhere on the outline.

Many starts (see `starts`) are refined together with their forces (see `refine`) for a few steps, the better half of
them goes on, and so on.  Where none can be set up, a grid of allowed places is searched as hard points are.  Then
forces are made even, places moving along.  What is proven is what holds for free pads on a line.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np

from rigdesign.pads.forces import Forces
from rigdesign.pads.limits import force_limits
from rigdesign.pads.outcome import Outcome, Progress
from rigdesign.pads.surface.balance import Balance, balance
from rigdesign.pads.surface.choice import choose
from rigdesign.pads.surface.error_rows import error_rows
from rigdesign.pads.surface.evening import limits
from rigdesign.pads.surface.given import (
    LINE_METHOD,
    PROVEN,
    Placed,
    choice_of,
    evened,
    programme,
    shares,
)
from rigdesign.pads.surface.ground import Ground, with_room
from rigdesign.pads.surface.line_bounds import line_bounds
from rigdesign.pads.surface.many import choose_of_many
from rigdesign.pads.surface.moving import Errors
from rigdesign.pads.surface.places import free_candidates
from rigdesign.pads.surface.program import Programme
from rigdesign.pads.surface.refine import Search, Standing
from rigdesign.pads.surface.starts import Starts
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

GRID = 3.0
"""Places of the grid a pad; at least `PROVEN` in all, at most `MOST`."""
MOST = 240
NODES = 1_000
STATIONS = 16
"""Stations a pad at which errors are looked at while pads move."""
HEATS = ((8, 8), (4, 12), (2, 60))
HEATS_MANY = ((4, 6), (1, 40))
"""So many starts are refined by so many steps each, the best first; of more than `MANY` pads fewer."""
MANY = 24
EVEN_STEPS, EVEN_STEPS_MANY = 12, 4
ENOUGH = 1.005
"""The search ends at this many times the proven least."""


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
        line_use, moment_least = line_bounds(self.target, self.jack_x, self.count)
        self._tell(0.02, f"looking for starts of {self.count} pads")
        starts = self._starts()
        words = f"{len(starts)} starts, places and forces moved together step by step"
        if starts:
            best = self._refined(starts, line_use)
        else:
            found = self._on_grid(line_use)
            if found is None:
                return None
            best, words = self._refined([found], line_use), "a start on a grid of places, moved step by step"
        return self._evened(best, line_use, moment_least, words)

    # -- search --------------------------------------------------------------------------------------------------------

    @cached_property
    def _ground(self) -> Ground:
        """Where pads may stand, with a drill step of room for the drilling to use up."""
        return Ground(with_room(self.target.brief, self.target.brief.levers.drill_step), self.count)

    @cached_property
    def _balance(self) -> Balance:
        return balance(self.target, self.jack_x, self.jack_y)

    def _search(self, ground: Ground) -> Search:
        least, largest = force_limits(self.target.brief)
        return Search(Errors(self.target, STATIONS * self.count), ground, self._balance, least, largest)

    def _programme(self, x: Floats, y: Floats, per_pad: int) -> Programme:
        rows = error_rows(self.target, x, y, max(100, per_pad * self.count))
        return programme(self.target, self._balance, x, y, rows)

    def _starts(self) -> list[tuple[Ground, Standing]]:
        """Starts with forces of least band use, the best first; with less room where there are none with it."""
        for ground in (self._ground, Ground(self.target.brief, self.count)):
            if ground.room.places.is_empty:
                continue
            found = []
            for _, x, y in Starts(self.target, ground, self.jack_x).all():
                forces = self._programme(x, y, STATIONS // 2).least_use()
                if forces is not None:
                    found.append((ground, Standing(x, y, forces.force, forces.use)))
            if found:
                return sorted(found, key=lambda one: one[1].value)
        return []

    def _refined(self, starts: list[tuple[Ground, Standing]], least: float) -> Standing:
        field = starts
        heats = HEATS if self.count <= MANY else HEATS_MANY
        for heat, (size, steps) in enumerate(heats):
            self._tell(0.1 + 0.6 * heat / len(heats), "moving pads and forces")
            field = [(ground, self._search(ground).refined(one, steps, least * ENOUGH)) for ground, one in field[:size]]
            field = sorted(field, key=lambda one: one[1].value)
            if field[0][1].value <= least * ENOUGH:
                break
        return field[0][1]

    def _on_grid(self, least: float) -> tuple[Ground, Standing] | None:
        """A start among the places of a grid."""
        target = self.target
        x, y = free_candidates(target.brief, int(np.clip(GRID * self.count, PROVEN - 4, MOST)))
        if x.size < self.count:
            return None
        choice = choice_of(target, (self.jack_x, self.jack_y), x, y, self.count)
        small = x.size <= PROVEN
        found = choose(choice, NODES) if small else choose_of_many(choice, least, self.progress)
        if found.pads is None:
            return None
        x, y = x[found.pads], y[found.pads]
        forces = self._programme(x, y, STATIONS).least_use()
        if forces is None:
            return None
        return Ground(target.brief, self.count), Standing(x, y, forces.force, forces.use)

    # -- even forces ---------------------------------------------------------------------------------------------------

    def _evened(self, best: Standing, line_use: float, moment_least: float, words: str) -> Outcome | None:
        self._tell(0.75, "evening out the forces")
        target = self.target
        own = programme(target, self._balance, best.x, best.y)
        forces = own.least_use()
        if forces is None:
            return None
        limit = limits(target.brief.pads, own, forces)
        placed = evened(target, own, forces)
        before = own.judged(forces.force, placed.share).evenness
        placed = self._moved_even(placed, limit)
        return Outcome(
            placed.x, placed.forces.force, line_use, forces.use, moment_least, before, LINE_METHOD, words, placed.y
        )

    def _moved_even(self, placed: Placed, limit: Floats) -> Placed:
        """Pads moved as long as forces become more even within the band uses `limit`."""
        ground = self._ground if self._ground.keeps(placed.x, placed.y) else Ground(self.target.brief, self.count)
        search = replace(
            self._search(ground),
            limit=limit,
            shares=lambda x, y: shares(self.target, x, y),
        )
        start = Standing(placed.x, placed.y, placed.forces.force, placed.forces.evenness)
        found = search.refined(start, EVEN_STEPS if self.count <= MANY else EVEN_STEPS_MANY, 1e-3)
        if found is start:
            return placed
        fine = programme(self.target, self._balance, found.x, found.y)
        share = shares(self.target, found.x, found.y)
        forces = fine.most_even(limit, share)
        if forces is None or forces.evenness >= placed.forces.evenness:
            return placed
        return Placed(found.x, found.y, Forces(forces.force, forces.use, forces.evenness), share)

    def _tell(self, part: float, words: str) -> None:
        if self.progress is not None:
            self.progress(part, words)
