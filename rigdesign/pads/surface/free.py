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
from rigdesign.pads.outcome import Outcome, Progress, use_given_up_to
from rigdesign.pads.surface.balance import Balance, balance
from rigdesign.pads.surface.choice import choose
from rigdesign.pads.surface.error_rows import error_rows
from rigdesign.pads.surface.evening import limits, more_even
from rigdesign.pads.surface.given import (
    LINE_METHOD,
    PROVEN,
    Placed,
    best_of_places,
    choice_of,
    programme,
    shares,
)
from rigdesign.pads.surface.ground import Ground, with_room
from rigdesign.pads.surface.line_bounds import line_bounds
from rigdesign.pads.surface.many import choose_of_many
from rigdesign.pads.surface.moving import Errors
from rigdesign.pads.surface.places import Room, free_candidates
from rigdesign.pads.surface.program import Programme
from rigdesign.pads.surface.refine import INSIDE, Search, Standing
from rigdesign.pads.surface.row_changes import with_rows_changed
from rigdesign.pads.surface.share_slopes import ShareSlopes
from rigdesign.pads.surface.starts import Starts
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

GRID = 3.0
"""Places of the grid a pad; at least `PROVEN` in all, at most `MOST`."""
MOST = 240
NODES = 1_000
STATIONS = 16
"""Stations a pad at which errors are looked at while pads move."""
HEATS = ((5, 8), (3, 10), (2, 40))
HEATS_MANY = ((4, 8), (2, 40))
"""So many starts are refined by so many steps each, the best first; of more than `MANY` pads fewer."""
MANY = 24
EVEN_STEPS, EVEN_STEPS_MANY, EVEN_START = 25, 25, 8
"""Steps towards even forces: at the end, of more than `MANY` pads, and of a start that strays from its shares."""
EVEN_ENOUGH = 1e-3
MOST_EVENED = 6
"""Of so many of the best found the most even is taken."""
STEPS_APART, MOST_APART = 4.0, 0.2
"""Where torsion is judged, pads keep so many drill steps apart along the span, at most this part of their pitch."""
SHARE_KEPT = 0.92
"""Pads judged against their shares keep to this part of what is allowed, so that the drilling has room."""
KNOWN = 8
ANYTHING = 1e6
"""A band use that allows everything."""
ENOUGH = 1.005
"""The search ends at this many times the proven least."""

_Start = tuple[Ground, Standing]

IN_LINE = 61
"""Places along the span that two pads are chosen from: few enough to be proven at once."""


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
        line_use, moment_least = line_bounds(self.target, (self.jack_x, self.jack_y), self.count)
        share = self.target.brief.acceptance.share
        limit = None if share is None else SHARE_KEPT * share
        field, words = self._found(limit, line_use)
        if limit is not None and (not field or field[0].value > 1):
            # the shares cannot be kept within the bands: then the bands come first
            free, free_words = self._found(None, line_use)
            if not field or (free and free[0].value <= 1):
                field, words, limit = free, free_words, None
        if not field and self.count == 2 and not self.target.brief.pads.rows:
            return self._two_in_line(line_use)
        return self._evened(field, limit, line_use, moment_least, words) if field else None

    def _two_in_line(self, least: float) -> Outcome | None:
        """Two pads balance the target only in line with the jack: the best two along the span through it."""
        x = np.linspace(self.target.brief.specimen.left, self.target.brief.specimen.right, IN_LINE)
        y = np.full(x.size, self.jack_y)
        allowed = Room(self.target.brief).allowed(x, y)
        jack = self.jack_x, self.jack_y
        found = best_of_places(self.target, jack, x[allowed], y[allowed], 2, self.progress)
        if found is None:
            return None
        words = f"2 of {int(allowed.sum())} places in line along the span through the jack; no others were looked at"
        return replace(found, use_least=least, method=LINE_METHOD, words=words)

    def _found(self, share_limit: float | None, least: float) -> tuple[list[Standing], str]:
        """The pads that were found, those of least band use first, and how."""
        self._tell(0.02, f"looking for starts of {self.count} pads")
        starts = self._starts(share_limit)
        if starts:
            words = f"{len(starts)} starts, places and forces moved together step by step"
            return self._refined(starts, share_limit, least), words
        if share_limit is not None:
            return [], ""
        found = self._on_grid(least)
        words = "a start on a grid of places, moved step by step"
        return ([], words) if found is None else (self._refined([found], None, least), words)

    # -- search --------------------------------------------------------------------------------------------------------

    @cached_property
    def _ground(self) -> Ground:
        """Where pads may stand, with a drill step of room for the drilling to use up."""
        return Ground(with_room(self.target.brief, self.target.brief.levers.drill_step), self.count)

    @cached_property
    def _balance(self) -> Balance:
        return balance(self.target, self.jack_x, self.jack_y)

    @cached_property
    def _errors(self) -> Errors:
        brief = self.target.brief
        most = MOST_APART * (brief.specimen.right - brief.specimen.left) / self.count
        return Errors(self.target, STATIONS * self.count, min(STEPS_APART * brief.levers.drill_step, most))

    @cached_property
    def _slopes(self) -> ShareSlopes:
        return ShareSlopes(self.target)

    def _shares(self, x: Floats, y: Floats) -> Floats:
        """Tributary shares (n,) [N]; those of the places last asked for are kept, as a step asks for them again."""
        known, place = self._known_shares, x.tobytes() + y.tobytes()
        if place not in known:
            if len(known) >= KNOWN:
                known.pop(next(iter(known)))
            known[place] = shares(self.target, x, y)
        return known[place]

    @cached_property
    def _known_shares(self) -> dict[bytes, Floats]:
        return {}

    def _search(self, ground: Ground, share_limit: float | None) -> Search:
        least, largest = force_limits(self.target)

        def refill(x: Floats, y: Floats) -> Floats | None:
            forces = self._best_forces(x, y, share_limit)
            return None if forces is None else forces.force

        search = Search(self._errors, ground, self._balance, least, largest, self._shares, refill=refill)
        return search if share_limit is None else replace(search, slopes=self._slopes, share_limit=share_limit)

    def _programme(self, x: Floats, y: Floats, per_pad: int) -> Programme:
        rows = error_rows(self.target, x, y, max(100, per_pad * self.count))
        return programme(self.target, self._balance, x, y, rows)

    def _best_forces(self, x: Floats, y: Floats, share_limit: float | None) -> Forces | None:
        """Forces of least band use at places x, y (n,) [m], judged at few stations."""
        near = None if share_limit is None else self._shares(x, y)
        return self._programme(x, y, STATIONS // 2).least_use(near, share_limit or 0.0)

    def _starts(self, share_limit: float | None) -> list[_Start]:
        """Starts with forces of least band use, the best first; with less room where there are none with it."""
        for ground in (self._ground, Ground(self.target.brief, self.count)):
            if ground.room.places.is_empty:
                continue
            tried = (
                self._start(ground, x, y, share_limit)
                for _, x, y in Starts(self.target, ground, self._errors, self.jack_x).all()
            )
            found = [(ground, start) for start in tried if start is not None]
            if found:
                return sorted(found, key=lambda one: one[1].value)
        return []

    def _start(self, ground: Ground, x: Floats, y: Floats, share_limit: float | None) -> Standing | None:
        """Forces of least band use at places x, y (n,) [m]; places moved first where forces stray from their shares."""
        if share_limit is None:
            forces = self._programme(x, y, STATIONS // 2).least_use()
            return None if forces is None else Standing(x, y, forces.force, forces.use)
        for turn in range(2):
            own, share = self._programme(x, y, STATIONS // 2), self._shares(x, y)
            forces = own.least_use(share, share_limit)
            if forces is not None:
                return Standing(x, y, forces.force, forces.use)
            anything = np.full(len(own.rows.quantities), np.inf)
            even = own.most_even(np.full(anything.size, ANYTHING), share)
            if turn or even is None:
                break
            search = replace(self._search(ground, None), limit=anything, slopes=self._slopes, refill=None)
            moved = search.refined(Standing(x, y, even.force, even.evenness), EVEN_START, 0.9 * share_limit)
            x, y = moved.x, moved.y
        return None

    def _refined(self, starts: list[_Start], share_limit: float | None, least: float) -> list[Standing]:
        field = starts
        heats = HEATS if self.count <= MANY else HEATS_MANY
        for heat, (size, steps) in enumerate(heats):
            self._tell(0.1 + 0.6 * heat / len(heats), "moving pads and forces")
            field = [
                (ground, self._search(ground, share_limit).refined(one, steps, least * ENOUGH))
                for ground, one in field[:size]
            ]
            field = sorted(field, key=lambda one: one[1].value)
            if field[0][1].value <= least * ENOUGH:
                break
        found = [one for _, one in field]
        if len(self.target.brief.pads.rows) > 1 and self.count <= MANY and found[0].value > least * ENOUGH:
            found = [self._on_other_rows(field[0][0], found[0], share_limit, least), *found]
        return found

    def _on_other_rows(self, ground: Ground, best: Standing, share_limit: float | None, least: float) -> Standing:
        """The best pads with rows changed, moved on from there."""
        self._tell(0.7, "changing rows")
        search = self._search(ground, share_limit)

        def filled(x: Floats, y: Floats) -> Standing | None:
            forces = self._best_forces(x, y, share_limit)
            return None if forces is None else Standing(x, y, forces.force, forces.use)

        changed = with_rows_changed(ground, best, filled, lambda one, steps: search.refined(one, steps, least * ENOUGH))
        return search.refined(changed, HEATS[-1][1], least * ENOUGH) if changed is not best else best

    def _on_grid(self, least: float) -> _Start | None:
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

    def _evened(
        self, field: list[Standing], share_limit: float | None, line_use: float, moment_least: float, words: str
    ) -> Outcome | None:
        """The most even of what was found, of those within what may be given up of the least band use."""
        self._tell(0.75, "evening out the forces")
        rules = self.target.brief.pads
        found = [self._filled(one, share_limit) for one in field[:MOST_EVENED]]
        able = [(own, forces) for own, forces in found if forces is not None]
        if not able:
            return None
        own, best = min(able, key=lambda pair: pair[1].use)
        before = own.judged(best.force, self._shares(own.x, own.y)).evenness
        tried = []
        for own, forces in able:
            if forces.use <= use_given_up_to(rules, best.use) * (1 + 1e-9):
                limit = limits(rules, own, Forces(forces.force, best.use, np.inf))
                share = self._shares(own.x, own.y)
                tried.append((Placed(own.x, own.y, more_even(own, forces, limit, share), share), limit))
        placed = self._moved_even(*min(tried, key=lambda pair: pair[0].forces.evenness))
        return Outcome(
            placed.x, placed.forces.force, line_use, best.use, moment_least, before, LINE_METHOD, words, placed.y
        )

    def _filled(self, one: Standing, share_limit: float | None) -> tuple[Programme, Forces | None]:
        """The programme over the places found, judged at many stations, and its forces of least band use."""
        own = programme(self.target, self._balance, one.x, one.y)
        if share_limit is None:
            return own, own.least_use()
        return own, own.least_use(self._shares(one.x, one.y), share_limit * (1 + 1e-6))

    def _moved_even(self, placed: Placed, limit: Floats) -> Placed:
        """Pads moved as long as forces become more even within the band uses `limit`."""
        ground = self._ground if self._ground.keeps(placed.x, placed.y) else Ground(self.target.brief, self.count)

        def refill(x: Floats, y: Floats) -> Floats | None:
            forces = self._programme(x, y, STATIONS // 2).most_even(limit * (1 - INSIDE), self._shares(x, y))
            return None if forces is None else forces.force

        search = replace(self._search(ground, None), limit=limit, slopes=self._slopes, refill=refill)
        start = Standing(placed.x, placed.y, placed.forces.force, placed.forces.evenness)
        found = search.refined(start, EVEN_STEPS if self.count <= MANY else EVEN_STEPS_MANY, EVEN_ENOUGH)
        if found is start:
            return placed
        fine = programme(self.target, self._balance, found.x, found.y)
        share = self._shares(found.x, found.y)
        began = Forces(found.force, float(fine.uses(found.force).max(initial=0.0)), np.inf)
        forces = more_even(fine, began, limit, share)
        # judged at more stations they may break a limit by a little: then the first stay
        kept = np.all(fine.uses(forces.force) <= limit * (1 + 1e-6))
        if not kept or forces.evenness >= placed.forces.evenness:
            return placed
        return Placed(found.x, found.y, forces, share)

    def _tell(self, part: float, words: str) -> None:
        if self.progress is not None:
            self.progress(part, words)
