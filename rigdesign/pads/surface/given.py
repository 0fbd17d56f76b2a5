"""Pads at given places in plan: at all of them (fixed), or at the best of them (hard points)."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.pads.forces import Forces
from rigdesign.pads.limits import force_limits
from rigdesign.pads.model import LEAST_SHARE
from rigdesign.pads.outcome import Outcome, Progress
from rigdesign.pads.surface.balance import Balance, balance
from rigdesign.pads.surface.choice import choose
from rigdesign.pads.surface.choice_model import Choice, Indices, Truths
from rigdesign.pads.surface.error_rows import ErrorRows, error_rows
from rigdesign.pads.surface.evening import limits, more_even
from rigdesign.pads.surface.keep_shares import SharesKept
from rigdesign.pads.surface.line_bounds import line_bounds
from rigdesign.pads.surface.lumps import Lumps, lumps
from rigdesign.pads.surface.many import choose_of_many
from rigdesign.pads.surface.places import compatible, given_places, usable_points
from rigdesign.pads.surface.program import Programme
from rigdesign.pads.surface.shares import tributary_shares
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

PROVEN = 64
"""Up to so many places one mixed-integer programme finds the best choice and proves it; more are a search."""
NODES = 8_000
FINE = 40
"""Stations a pad at which forces are worked out and judged."""
WORST, NEAREST, EXCHANGES = 8, 4, 1600
"""Exchanges for even forces: of the pads that deviate most, with the nearest places each, so many over the number of
pads in all (a programme over many pads takes its time)."""

SHARE_KEPT = 0.95
"""Pads judged against their shares are sought within this part of what is allowed, as the load is lumped there."""

FIXED_METHOD = "linear programme over the forces at the fixed places"
CHOICE_METHOD = "mixed-integer programme over places and forces, branch and bound"
MANY_METHOD = (
    "a relaxation in which parts of pads count and, where shear and torsion are judged at cuts square to x, "
    "all that pads at these places could do to both, followed from tip to root"
)
LINE_METHOD = "free pads on a line, whose shear and moment no pads in plan can better"


@dataclass(frozen=True)
class Placed:
    """Pads at x, y (n,) [m] with forces and their tributary shares (n,) [N], all positive."""

    x: Floats
    y: Floats
    forces: Forces
    share: Floats


def sign_of(target: Target) -> float:
    """Return the sign of the target: forces here are multiplied by it."""
    return 1.0 if target.resultant >= 0 else -1.0


def shares(target: Target, x: Floats, y: Floats) -> Floats:
    """Return the tributary shares (n,) [N], times the sign of the target."""
    return sign_of(target) * tributary_shares(target, x, y)


def programme(target: Target, even: Balance, x: Floats, y: Floats, rows: ErrorRows | None = None) -> Programme:
    """Return the programmes over pads at x, y (n,) [m], judged at rows of their own unless some are given."""
    least, largest = force_limits(target)
    if rows is None:
        rows = error_rows(target, x, y, max(200, FINE * x.size))
    return Programme(rows, even, x, y, least, largest)


def evened(target: Target, own: Programme, best: Forces) -> Placed:
    """Return the pads of a programme with forces as even as the brief lets them be."""
    share = shares(target, own.x, own.y)
    return Placed(own.x, own.y, more_even(own, best, limits(target.brief.pads, own, best), share), share)


def choose_fixed(target: Target, jack_x: float, jack_y: float) -> Outcome | None:
    """Forces at the brief's places; None where no forces within the limits balance the target."""
    x, y = given_places(target.brief)
    own = programme(target, balance(target, jack_x, jack_y), x, y)
    best = own.least_use()
    if best is None:
        return None
    placed = evened(target, own, best)
    _, moment_least = line_bounds(target, (jack_x, jack_y), x.size)
    before = own.judged(best.force, placed.share).evenness
    words = f"{x.size} fixed places"
    return Outcome(
        x, placed.forces.force, best.use * (1 - 1e-9), best.use, moment_least, before, FIXED_METHOD, words, y
    )


@dataclass(frozen=True)
class HardPlaces:
    """The search over hard points for `count` pads under a jack at jack_x, jack_y [m]."""

    target: Target
    jack_x: float
    jack_y: float
    count: int
    progress: Progress | None

    def choose(self) -> Outcome | None:
        """Best pads with their proof; None where no choice balances the target within the limits."""
        usable = usable_points(self.target.brief)
        x, y = (places[usable] for places in given_places(self.target.brief))
        return best_of_places(self.target, (self.jack_x, self.jack_y), x, y, self.count, self.progress)


def choice_of(target: Target, jack: tuple[float, float], x: Floats, y: Floats, count: int) -> Choice:
    """Return the problem of choosing `count` of the places x, y (n,) [m]."""
    least, largest = force_limits(target)
    rows, pads = error_rows(target, x, y), compatible(target.brief, x, y)
    return Choice(rows, balance(target, *jack), x, y, count, least, largest, pads)


def best_of_places(
    target: Target, jack: tuple[float, float], x: Floats, y: Floats, count: int, progress: Progress | None
) -> Outcome | None:
    """Choose `count` of the places x, y (n,) [m]: least band use, then even forces; None where nothing balances."""
    choice = choice_of(target, jack, x, y, count)
    _tell(progress, 0.02, f"choosing {count} of {x.size} places")
    line_use, moment_least = line_bounds(target, jack, count)
    if x.size <= PROVEN:
        found = choose(choice, NODES)
        words = f"{count} of {x.size} places, branch and bound"
    else:
        found = choose_of_many(choice, line_use, progress)
        words = f"{count} of {x.size} places, searched level by level of band use"
    if found.pads is None:
        return None
    bound = max(found.bound * (1 - 1e-6), line_use)
    own_method = CHOICE_METHOD if x.size <= PROVEN else MANY_METHOD
    method = own_method if found.bound * (1 - 1e-6) >= line_use else LINE_METHOD
    own = programme(target, choice.balance, x[found.pads], y[found.pads])
    best = own.least_use()
    if best is None:
        return None
    _tell(progress, 0.85, "evening out the forces")
    first = evened(target, own, best)
    before = own.judged(best.force, first.share).evenness
    placed, sweeps = exchanged(choice, target, found.pads, first, limits(target.brief.pads, own, best))
    words += f"; {sweeps} sweeps of exchanges for even forces"
    kept = _shares_kept(choice, target, found.pads, placed, best.use)
    if kept is not None:
        placed, words = kept, words + "; places spread out so that pads keep to their shares"
    return Outcome(placed.x, placed.forces.force, bound, best.use, moment_least, before, method, words, placed.y)


def _shares_kept(choice: Choice, target: Target, pads: Indices, placed: Placed, use: float) -> Placed | None:
    """Other places whose forces keep the pads' shares, where those are judged and broken; None if there are none."""
    share_limit = target.brief.acceptance.share
    if share_limit is None or placed.forces.evenness <= share_limit or use > 1:
        return None
    chosen = SharesKept(choice, lumps(target, sign_of(target)), SHARE_KEPT * share_limit).best(pads)
    if chosen is None:
        return None
    own = programme(target, choice.balance, choice.x[chosen], choice.y[chosen])
    forces = own.least_use(shares(target, own.x, own.y), share_limit)
    # judged at more stations, and by the exact shares
    return None if forces is None or forces.use > 1 else evened(target, own, forces)


def exchanged(choice: Choice, target: Target, pads: Indices, first: Placed, limit: Floats) -> tuple[Placed, int]:
    """Exchange places with their neighbours while the forces become more even within the band uses `limit`.

    Exchanges are compared by shares from lumps of the load; what comes of them is judged by the exact shares.
    """
    lumped, chosen, left, sweeps = lumps(target, sign_of(target)), list(pads), max(16, EXCHANGES // pads.size), 0
    best = _tried(choice, target, chosen, limit, lumped)
    while best is not None and left > 0:
        deviation = np.abs(best.forces.force - best.share) / np.maximum(best.share, LEAST_SHARE * best.share.mean())
        better, swapped = best, chosen
        for k in np.argsort(-deviation, kind="stable")[:WORST]:
            for place in _neighbours(choice, chosen, int(k))[: max(left, 0)]:
                left -= 1
                tried = _tried(choice, target, [*chosen[:k], place, *chosen[k + 1 :]], limit, lumped)
                if tried is not None and tried.forces.evenness < better.forces.evenness * (1 - 1e-3):
                    better, swapped = tried, [*chosen[:k], place, *chosen[k + 1 :]]
        if better is best:
            break
        best, chosen, sweeps = better, swapped, sweeps + 1
    if best is None or not sweeps:
        return first, sweeps
    order = np.lexsort((choice.y[chosen], choice.x[chosen]))
    x, y = choice.x[chosen][order], choice.y[chosen][order]
    fine, share = programme(target, choice.balance, x, y), shares(target, x, y)
    again = more_even(fine, Forces(best.forces.force[order], best.forces.use, np.inf), limit, share)
    # judged at more stations, or by the exact shares, it may be no better after all: then the first stays
    if np.any(fine.uses(again.force) > limit * (1 + 1e-6)) or again.evenness >= first.forces.evenness:
        return first, sweeps
    return Placed(x, y, again, share), sweeps


def _neighbours(choice: Choice, chosen: list[int], k: int) -> list[int]:
    """The nearest places that pad k could take with the others where they are."""
    others = [place for i, place in enumerate(chosen) if i != k]
    fits: Truths = np.all(choice.compatible[:, others], axis=1) & ~np.isin(np.arange(choice.x.size), chosen)
    away = np.hypot(choice.x - choice.x[chosen[k]], choice.y - choice.y[chosen[k]])
    return [int(i) for i in np.argsort(away, kind="stable") if fits[i]][:NEAREST]


def _tried(choice: Choice, target: Target, chosen: list[int], limit: Floats, lumped: Lumps) -> Placed | None:
    x, y = choice.x[chosen], choice.y[chosen]
    share = lumped.shares(x, y)
    # of many places most rows are at stations where these pads have no jump
    rows = choice.rows if choice.x.size <= PROVEN else error_rows(target, x, y)
    forces = programme(target, choice.balance, x, y, rows).most_even(limit, share)
    return None if forces is None else Placed(x, y, forces, share)


def _tell(progress: Progress | None, part: float, words: str) -> None:
    if progress is not None:
        progress(part, words)
