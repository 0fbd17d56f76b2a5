"""Pads that stay where they are: only the pivots are on the drill step, counted from hole A.

Every pivot stands at the place of the pad at the end of its chain of A holes plus a whole number of steps, the top
pivot too: the jack can only stand on a row of places one step apart.  The descent is started for the places nearest to
where the jack should stand, and keeps each of them by moving pivots of that chain against one another.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from itertools import pairwise

import numpy as np

from rigdesign.brief.model import LeverRules
from rigdesign.findings import Refusal
from rigdesign.levers.descent import Descended, Moves, all_pairs, descend, descend_again, moves_of, near_pairs
from rigdesign.levers.drilled import REACH, Drilled, coarse, judged
from rigdesign.levers.grouping import allowed, millimetres
from rigdesign.levers.hanging import hang_fixed
from rigdesign.levers.judging import Judge, build_judge
from rigdesign.levers.wiring import Ints, Wiring, ideal_levers
from rigdesign.pads.model import PadPlan
from rigdesign.pads.outcome import Progress
from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

Value = Callable[[Ints], Floats]

NEAR_EQUAL = 0.01
"""Band uses within this fraction of the least count as equal: then the jack's distance decides."""

PLACES = (0, -1, 1)
"""Places of the jack that are tried, in drill steps from the one nearest to where it should stand."""

JUDGED = 4_000_000
"""Rigs times pads that the descent from one place of the jack may judge."""

JUDGED_AGAIN = 250_000
"""Rigs times pads that the repeated descents from the chosen place may judge."""

AT_ONE_PLACE = 1e-6
"""Distance [m] below which the jack stands where it was planned: far less than a hole can be drilled to."""

ALL_PAIRS = 32
"""Up to so many levers the descent tries every pair of them; beyond, pairs of levers that are kin."""


def drill_fixed(plan: PadPlan, wiring: Wiring, tube: Tube, progress: Progress | None = None) -> Drilled | Refusal:
    """Drill the levers of pads that stay; Refusal where no pivots on the step keep the limits of the levers."""
    step = plan.target.brief.levers.drill_step
    levers = ideal_levers(wiring, plan.x, np.abs(plan.force))
    refusal = coarse(wiring, levers.a, levers.b, step)
    if refusal is not None:
        return refusal
    judge = build_judge(tube)
    chain = _chain(wiring)
    moves = _moves(wiring, chain)
    most = max(1, JUDGED // (plan.n_pads * max(1, len(moves)))) * max(1, len(moves))
    found: list[tuple[float, float, Descended]] = []
    judged = 0
    for turn, start in enumerate(_starts(plan, wiring, chain, step)):
        descended = descend(start, moves, _value(plan, wiring, tube, judge, start), most)
        judged += descended.judged
        if np.isfinite(descended.value):
            away = abs(
                float(hang_fixed(wiring, descended.steps[None], step, plan.x, tube.total).jack_x[0]) - plan.jack_x
            )
            found.append((descended.value, away, descended))
        if progress is not None:
            progress((turn + 1) / len(PLACES), "drilling")
    if not found:
        return _no_pivots(step)
    least = min(use for use, _, _ in found)
    _, away, best = min((item for item in found if item[0] <= least * (1 + NEAR_EQUAL)), key=lambda item: item[1])
    again = max(1, JUDGED_AGAIN // plan.n_pads)
    best = descend_again(best, moves, _value(plan, wiring, tube, judge, best.steps), again)
    judged += best.judged
    hung = hang_fixed(wiring, best.steps[None], step, plan.x, tube.total)
    use = float(tube.use(hung.pad_x, hung.pad_force)[0])
    return Drilled(hung, best.steps[:, None], use, _words(len(found), judged, best, away))


def _chain(wiring: Wiring) -> Ints:
    """Levers from the top one down along the A holes: the sum of their steps tells where the jack stands."""
    rows, row = [], 0
    while row >= 0:
        rows.append(row)
        row = int(wiring.ends[row, 0])
    return np.array(rows, dtype=np.int64)


def _moves(wiring: Wiring, chain: Ints) -> Moves:
    """Moves that leave the top pivot where it is.

    A lever in the chain moves only together with the one above or below it, the other way round.
    """
    size = wiring.n_levers
    pairs = all_pairs(size) if size <= ALL_PAIRS else near_pairs(wiring, 1)
    moves = moves_of(size, pairs)
    swaps = np.zeros((4 * max(0, chain.size - 1), size), dtype=np.int8)
    for index, (upper, lower) in enumerate(pairwise(chain)):
        for turn, reach in enumerate((1, -1, 2, -2)):
            swaps[4 * index + turn, [upper, lower]] = reach, -reach
    still = moves[moves[:, chain].sum(axis=1) == 0]
    triples = [swap + single for swap in swaps for single in _singles(size, chain)] if size <= ALL_PAIRS else []
    return np.unique(np.concatenate([still, swaps, np.array(triples, dtype=np.int8).reshape(-1, size)]), axis=0)


def _singles(size: int, chain: Ints) -> Iterator[Moves]:
    """One step either way of each lever outside the chain."""
    for row in np.setdiff1d(np.arange(size), chain):
        for reach in (1, -1):
            single = np.zeros(size, dtype=np.int8)
            single[row] = reach
            yield single


def _value(plan: PadPlan, wiring: Wiring, tube: Tube, judge: Judge, start: Ints) -> Value:
    """Band use of rows of steps; far larger where pad limits are missed, infinite where a lever breaks a limit."""
    brief, step = plan.target.brief, plan.target.brief.levers.drill_step

    def value(rows: Ints) -> Floats:
        result = np.full(len(rows), np.inf)
        hung = hang_fixed(wiring, np.maximum(rows, 1), step, plan.x, tube.total)
        kept = (rows > 0).all(axis=1) & (hung.b > 0).all(axis=1) & (np.abs(rows - start) <= REACH).all(axis=1)
        kept &= allowed(hung.a, hung.b, brief.levers).all(axis=1)
        if kept.any():
            result[kept] = judged(plan.target, judge, hung.pad_x[kept], hung.pad_force[kept])
        return result

    return value


def _starts(plan: PadPlan, wiring: Wiring, chain: Ints, step: float) -> Iterator[Ints]:
    """Steps to start from: each pivot nearest to the force centroid, the top one at each place of the jack."""
    force = np.abs(plan.force)
    rules = plan.target.brief.levers
    place = {-1 - pad: (float(plan.x[pad]), float(force[pad])) for pad in range(plan.n_pads)}
    steps = np.zeros(wiring.n_levers, dtype=np.int64)
    for row, inboard, outboard in wiring.upward():
        (start, inner), (end, outer) = place[inboard], place[outboard]
        exact = (end - start) * outer / (inner + outer) / step
        steps[row] = _allowed_step(exact, (end - start) / step, step, rules)
        place[row] = (start + float(steps[row]) * step, inner + outer)
    origin = place[0][0] - float(steps[chain].sum()) * step
    nearest = int(np.rint((plan.jack_x - origin) / step))
    for away in PLACES:
        moved = steps.copy()
        moved[0] += nearest + away - int(steps[chain].sum())
        yield moved


def _allowed_step(exact: float, length: float, step: float, rules: LeverRules) -> int:
    """Whole step nearest to `exact` that keeps the limits of a lever of `length` steps; the nearest if none does."""
    tried = np.rint(exact) + np.array([0, 1, -1, 2, -2, 3, -3])
    tried = tried[np.argsort(np.abs(tried - exact), kind="stable")]
    kept = tried[allowed(tried * step, (length - tried) * step, rules)]
    return int(kept[0]) if kept.size else max(1, int(tried[0]))


def _no_pivots(step: float) -> Refusal:
    return Refusal(
        "levers",
        "with pivots in whole drill steps no lever tree keeps the limits of the levers",
        f"drill_step {millimetres(step)}",
        "the pivots before drilling keep the limits, none of those tried near them does",
        "choose a finer drill_step or ease the limits of the levers",
    )


def _words(starts: int, judged: int, best: Descended, away: float) -> str:
    end = "no small move improves it" if best.is_settled else "stopped by its work limit"
    where = f"{millimetres(away)} from where" if away > AT_ONE_PLACE else "where"
    tried = "1 place" if starts == 1 else f"{starts} places"
    return (
        f"drilling: {tried} of the jack tried, {judged} rigs judged; from the chosen one {end}; "
        f"the jack stands {where} it was planned"
    )
