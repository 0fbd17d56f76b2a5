"""Pads at free places.

With one curve to follow, the moment, the exact optimum comes from the path of fewest links (see `path`).  It stands
also under pad limits and a shear band where it happens to keep them.  Otherwise the places are searched (see
`search`) from several starts, against a proven lower bound: the larger of the path's and the stair's least band use.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.pads.forces import evenness, wishes
from rigdesign.pads.limits import TOUCH, allowed_stretches, fitted, force_limits, packed, violations, with_room
from rigdesign.pads.outcome import Outcome, Progress, held_apart, moment_floor, use_given_up_to
from rigdesign.pads.path import COARSE, FINE, MANY, Path, least_use_path
from rigdesign.pads.search import Arrangement, Limits, Search
from rigdesign.pads.stair import least_use_stair
from rigdesign.pads.tube import Tube, build_tube
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

# Grid on which starts are fitted into the allowed stretches, points a span.
START_GRID = 4000
# Up to so many pads every start is refined.
MANY_STARTS = 40
# Where nothing is asked, searched pads keep apart by this part of their mean pitch: two at one place are one.
APART = 1e-3
SEARCH_STATIONS, SEARCH_STATIONS_MANY = 40, 16
# A band use this far above its bound reaches it.
REACHED = 1e-6
PATH_METHOD = "exact optimum: path of fewest links in the tube around the moment, bisected on its width"


class FreePlaces:
    """The choice of `count` pads at free places for one target and jack."""

    def __init__(self, target: Target, jack_x: float, count: int, progress: Progress | None) -> None:
        """Prepare fine and coarse tubes."""
        brief = target.brief
        self.target, self.brief, self.count, self.progress = target, brief, count, progress
        self.fine = build_tube(target, jack_x, count, FINE if count <= MANY else COARSE)
        least, largest = force_limits(target)
        apart = APART * (brief.specimen.right - brief.specimen.left) / count
        stretches, pitch = with_room(brief, count)
        self.limits = Limits(least, largest, max(pitch, apart), stretches)
        self.allowed = allowed_stretches(brief)
        self.start, self.end = float(self.allowed[0, 0]), float(self.allowed[-1, 1])

    def choose(self) -> Outcome | None:
        """Pads of least band use, or None if no search found forces within the limits."""
        path, path_least = least_use_path(self.fine, self.count, self.start, self.end)
        least = max(path_least if self.fine.is_judged[0] else 0.0, least_use_stair(self.fine, self.allowed, self.count))
        moment_least = moment_floor(
            self.fine,
            self.target.moment_peak,
            path_least,
            lambda plain: least_use_path(plain, self.count, self.start, self.end)[1],
        )
        if path is not None and path.x.size == self.count and self._path_is_best(path, least):
            use, even = float(self.fine.use(path.x, path.force)), evenness(self.fine, path.x, path.force)
            words = f"{self.count} pads, no search needed"
            return Outcome(path.x, path.force, least, use, moment_least, even, PATH_METHOD, words)
        return self._search(path, least, moment_least)

    def _path_is_best(self, path: Path, least: float) -> bool:
        """Whether the path keeps the limits, its forces can be joined by levers, and no band but the moment's binds."""
        if self.brief.pads.aim != "closest" or violations(self.target, path.x, path.force) > 0:
            return False
        step = path.force[1:] / path.force[:-1]
        if np.any(np.maximum(step, 1 / step) > self.brief.levers.ratio_limit):
            return False
        return not self.fine.is_judged[1] or float(self.fine.use(path.x, path.force)) <= least * (1 + REACHED)

    # -- under limits or several bands ---------------------------------------------------------------------------------

    def _search(self, path: Path | None, least: float, moment_least: float) -> Outcome | None:
        per_pad = SEARCH_STATIONS if self.count <= MANY else SEARCH_STATIONS_MANY
        tube = build_tube(self.target, self.fine.jack_x, self.count, per_pad)
        search = Search(tube, self.limits)
        found = self._best_of(search, self._starts(path))
        if found is None:
            return None
        use = float(self.fine.use(found.x, found.forces.force))
        method = "lower bound: path of fewest links for the moment, stair of fewest steps for the shear"
        even = self._more_even(tube, found)
        stretches = self.limits.stretches.shape[0]
        words = f"places searched step by step over {stretches} allowed stretch{'es' if stretches > 1 else ''}"
        return Outcome(even.x, even.forces.force, least, use, moment_least, found.forces.evenness, method, words)

    def _starts(self, path: Path | None) -> list[Floats]:
        """Places to start from: the path's, places of equal load, and half-way, fitted into the allowed stretches."""
        tube, n = self.fine, self.count
        falling = np.minimum.accumulate(np.clip(tube.shear_wanted, 0, tube.total))
        levels = tube.total * (1 - (np.arange(n) + 0.5) / n)
        wishes = [np.interp(-levels, -falling, tube.x)]
        if path is not None:
            places = (
                np.interp(np.linspace(0, 1, n), np.linspace(0, 1, path.x.size), path.x)
                if path.x.size > 1
                else wishes[0]
            )
            wishes += [places, (wishes[0] + places) / 2]
        return self._fit(wishes)

    def _fit(self, wishes: list[Floats]) -> list[Floats]:
        """Places nearest to the wishes (n,) that the stretches and the least pitch allow, where there are any."""
        tube, n, ends = self.fine, self.count, self.limits.stretches
        pieces = [np.linspace(a, b, max(2, int(START_GRID * (b - a) / (tube.x[-1] - tube.x[0])))) for a, b in ends]
        # the tightest packings from either end, so that pads which just fit find a place
        slack = TOUCH * (tube.x[-1] - tube.x[0])
        inboard = packed(ends, self.limits.pitch, n, slack)
        outboard = -packed(-ends[::-1, ::-1], self.limits.pitch, n, slack)
        grid = np.unique(np.concatenate([*pieces, inboard, outboard]))
        fits = [fitted(np.sort(wish), grid, self.limits.pitch) for wish in wishes]
        return [fit for fit in fits if fit is not None]

    def _best_of(self, search: Search, starts: list[Floats]) -> Arrangement | None:
        """Refine the starts, the most promising first (only two of them for many pads), and keep the best."""
        uses = {k: _use(search, x) for k, x in enumerate(starts)}
        ranked = [starts[k] for k in sorted(uses, key=lambda k: uses[k])]
        if not np.isfinite(min(uses.values(), default=np.inf)):
            # a jack far from the load asks for pads near both ends
            even = self._fit([np.linspace(self.start, self.end, self.count)])
            ranked = even + ranked
        found = []
        for k, start in enumerate(ranked if self.count <= MANY_STARTS else ranked[:2]):
            self._report(0.1 + 0.25 * k, "searching places")
            found.append(search.refine(start))
        kept = [arrangement for arrangement in found if arrangement is not None]
        return min(kept, key=lambda arrangement: arrangement.forces.use) if kept else None

    def _more_even(self, tube: Tube, found: Arrangement) -> Arrangement:
        """Second stage: forces as close to the pads' shares as the band use given up for it allows."""
        limit = use_given_up_to(self.brief.pads, found.forces.use)
        self._report(0.9, "evening out the forces")
        for held in held_apart(tube, found.x, found.forces.force, limit):
            for wish in wishes(self.brief.levers.ratio_limit, self.limits.least, tube.total / self.count):
                search = Search(held, replace(self.limits, least=wish.least), use_limit=limit, ratio=wish.ratio)
                # where the wish cannot be had at these places, places of least band use under it may allow it
                near = None if search.forces(found.x) is not None else replace(search, use_limit=None).refine(found.x)
                even = search.refine(found.x if near is None else near.x)
                if even is not None:
                    return even
        return found

    def _report(self, fraction: float, words: str) -> None:
        if self.progress:
            self.progress(fraction, words)


def _use(search: Search, x: Floats) -> float:
    forces = search.forces(x)
    return np.inf if forces is None else forces.use
