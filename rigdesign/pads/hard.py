"""Pads on hard points: which of the places to take, proven.

A lower bound on the band use is raised, and a design lowered, until they meet: sets of lines prove that no choice of
N places keeps the bands at some band use (see `lines`), or give places whose best forces a linear programme finds
(see `forces`).  Afterwards places are exchanged with their neighbours for more even forces within `ease`.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import NamedTuple

import numpy as np

from rigdesign.pads.forces import ForceProgramme, Forces, Wish, shares, wishes
from rigdesign.pads.limits import fitted, force_limits, least_pitch
from rigdesign.pads.lines import LineSets, Places, TooManySetsError
from rigdesign.pads.outcome import Outcome, Progress, held_apart, moment_floor, use_given_up_to
from rigdesign.pads.path import least_use_path
from rigdesign.pads.stair import least_use_stair
from rigdesign.pads.tube import Tube, build_tube
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

# Bound and design meet when they differ by less than this fraction, or after so many questions to the sets.
MEET, MOST_QUESTIONS = 1e-3, 40
# The moment alone is only quoted: its bound is raised until it meets to this fraction.
ROUGHLY = 0.02
# The path's bound is taken between stations a trifle below: it is found by bisection and rounding.
SAFE = 1 - 1e-6
# A band use is asked for at most this factor above the bound, where the sets are small and the answer quick.
NEAR = 1.1
# Without a design yet, band uses are asked for that grow by this factor, and the factor by this power.
FIRST_FACTOR, GROWTH = 1.05, 1.6
STATIONS_A_GAP = 12
# Sets of lines are told apart by at most so many places before.
MOST_MEMORY = 4
# Sweeps of the exchange for even forces, each over every pad's two neighbouring places.
MOST_SWEEPS = 12
# Band uses below and above which nothing is asked.
SMALL, FAR = 1e-3, 1e6


SETS_METHOD = "sets of lines over the hard points (dynamic programming), confirmed by a linear programme"
FREE_METHOD = "lower bound of free places: path of fewest links for the moment, stair of fewest steps for the shear"


class _Bound(NamedTuple):
    """Best choice found, proven lower bound on the band use, and whether the sets of lines proved it."""

    best: _Choice | None
    low: float
    by_sets: bool


@dataclass(frozen=True)
class _Choice:
    """Places taken, as indices of the hard points, and their forces."""

    pads: tuple[int, ...]
    forces: Forces


class HardPoints:
    """The choice of `count` of the places `x` (n,) [m] for one target and jack."""

    def __init__(self, target: Target, jack_x: float, x: Floats, count: int, progress: Progress | None) -> None:
        """Prepare the tube over the places."""
        self.target, self.brief, self.x, self.count, self.progress = target, target.brief, x, count, progress
        self.least, self.largest = force_limits(target)
        self.pitch = least_pitch(target.brief)
        self.tube = build_tube(target, jack_x, x.size, STATIONS_A_GAP, extra=x)

    def choose(self) -> Outcome | None:
        """Pads of least band use, then more even ones; None if no choice within the limits balances the target."""
        found, least, by_sets = self._least(self.tube)
        if found is None:
            return None
        peak = self.target.moment_peak
        moment_least = moment_floor(self.tube, peak, least, lambda plain: self._least(plain, ROUGHLY).low)
        even, sweeps = self._more_even(found)
        method = SETS_METHOD if by_sets else FREE_METHOD
        words = f"{self.count} of {self.x.size} hard points; {sweeps} sweeps of exchanges for even forces"
        x = self.x[list(even.pads)]
        return Outcome(
            x, even.forces.force, least, found.forces.use, moment_least, found.forces.evenness, method, words
        )

    def fewest_possible(self) -> int:
        """Number of pads that no choice within the bands and limits can go below; all hard points if there is none.

        1 where the hard points are too many to tell.
        """
        try:
            pads = self._sets(self.tube).reach(1.0, self.x.size, exact=False)
        except TooManySetsError:
            return 1
        return self.x.size if pads is None else len(pads)

    def _sets(self, tube: Tube) -> LineSets:
        return LineSets(tube, Places(self.x, self.least, self.largest, self.pitch), self.count)

    def _programme(self, tube: Tube, pads: tuple[int, ...]) -> ForceProgramme:
        x = self.x[list(pads)]
        return ForceProgramme(tube, x, self.least, self.largest, shares(tube, x))

    # -- least band use ---------------------------------------------------------------------------------------

    def _least(self, tube: Tube, meet: float = MEET) -> _Bound:
        """Best choice found and proven lower bound on the band use in a tube."""
        start, end = float(self.x[0]), float(self.x[-1])
        low = max(least_use_path(tube, self.count, start, end)[1] if tube.is_judged[0] else 0.0, 0.0)
        low = max(low * SAFE, least_use_stair(tube, np.stack([self.x, self.x], axis=1), self.count))
        if not np.isfinite(low):
            return _Bound(None, low, False)
        sets, by_sets = self._sets(tube), False
        best = self._nearest(tube)
        high = best.forces.use if best else np.inf
        factor, memory = FIRST_FACTOR, 1
        for question in range(MOST_QUESTIONS):
            if high <= low * (1 + meet) + 1e-12 or low > FAR:
                break
            self._report(min(0.8, 0.02 + 0.04 * question), "proving the best choice of hard points")
            if np.isfinite(high):
                above = max(low, SMALL * high)
                middle = min(np.sqrt(above * high), NEAR * above)
            else:
                middle, factor = max(low, SMALL) * factor, factor**GROWTH
            try:
                pads = sets.reach(float(middle), self.count, memory=memory)
            except TooManySetsError:
                break
            if pads is None:
                low, by_sets = float(middle), True
                continue
            forces = self._programme(tube, pads).least_use()
            if forces is not None and (best is None or forces.use < best.forces.use):
                best, high = _Choice(pads, forces), forces.use
            elif middle < high:
                # the sets let lines in that no pads can follow: merge fewer of them, or report the gap
                memory += 1
                if memory > MOST_MEMORY:
                    break
        return _Bound(best, low, by_sets)

    def _nearest(self, tube: Tube) -> _Choice | None:
        """Hard points nearest to the best free places, as a start."""
        path, _ = least_use_path(tube, self.count, float(self.x[0]), float(self.x[-1]))
        levels = tube.total * (1 - (np.arange(self.count) + 0.5) / self.count)
        falling = np.minimum.accumulate(np.clip(tube.shear_wanted, 0, tube.total))
        wishes = [np.interp(-levels, -falling, tube.x)]
        if path is not None and path.x.size == self.count and tube.is_judged[0]:
            wishes.append(path.x)
        choices = []
        for wish in wishes:
            places = fitted(wish, self.x, max(self.pitch, 1e-12))
            if places is not None:
                pads = tuple(int(i) for i in np.searchsorted(self.x, places))
                forces = self._programme(tube, pads).least_use()
                if forces is not None:
                    choices.append(_Choice(pads, forces))
        return min(choices, key=lambda choice: choice.forces.use) if choices else None

    # -- even forces ------------------------------------------------------------------------------------------

    def _more_even(self, found: _Choice) -> tuple[_Choice, int]:
        """Exchange places with their neighbours while the forces become more even within the band use given up."""
        limit = use_given_up_to(self.brief.pads, found.forces.use)
        best, tube, wish = self._first_even(found, limit)
        if best is None:
            return found, 0
        for sweep in range(MOST_SWEEPS):
            self._report(0.8 + 0.2 * sweep / MOST_SWEEPS, "evening out the forces")
            better = best
            for pads_tried in self._exchanges(best.pads):
                tried = self._even(tube, pads_tried, limit, wish)
                if tried is not None and tried.forces.evenness < better.forces.evenness * (1 - 1e-6):
                    better = tried
            if better is best:
                return best, sweep
            best = better
        return best, MOST_SWEEPS

    def _first_even(self, found: _Choice, limit: float) -> tuple[_Choice | None, Tube, Wish]:
        """Even forces at the places found, with the tube and the wish that allow them; None where nothing does."""
        mean = self.tube.total / self.count
        for tube in held_apart(self.tube, self.x[list(found.pads)], found.forces.force, limit):
            for wish in wishes(self.brief.levers.ratio_limit, self.least, mean):
                best = self._even(tube, found.pads, limit, wish)
                if best is not None:
                    return best, tube, wish
        return None, self.tube, Wish(None, self.least)

    def _even(self, tube: Tube, pads: tuple[int, ...], limit: float, wish: Wish) -> _Choice | None:
        programme = replace(self._programme(tube, pads), least=wish.least)
        forces = programme.most_even(limit, wish.ratio)
        return None if forces is None else _Choice(pads, forces)

    def _exchanges(self, pads: tuple[int, ...]) -> list[tuple[int, ...]]:
        """All choices with one pad moved to a neighbouring place, least pitch kept."""
        result = []
        for k in range(len(pads)):
            for move in (-1, 1):
                tried = (*pads[:k], pads[k] + move, *pads[k + 1 :])
                if 0 <= tried[k] < self.x.size and len(set(tried)) == len(tried):
                    x = self.x[list(tried)]
                    if np.all(np.diff(x) >= self.pitch * (1 - 1e-9)):
                        result.append(tried)
        return result

    def _report(self, fraction: float, words: str) -> None:
        if self.progress:
            self.progress(fraction, words)
