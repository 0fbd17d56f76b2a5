"""Free pads: every arm a whole number of drill steps, pads under their pins, the jack exactly where planned.

The first moment stays exact whatever the arms are, so only the shape of the path is at stake.  A branch and bound
(branching.py) finds the best arms in a window around the plan; a descent over single steps and pairs of steps, judged
with pad limits and gaps and no further than a few steps away, finishes.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Brief
from rigdesign.findings import Refusal
from rigdesign.levers.arms import Arms, search_arms
from rigdesign.levers.branching import Pins, Search
from rigdesign.levers.descent import Descended, all_pairs, descend, descend_again, moves_of, near_pairs
from rigdesign.levers.drilled import BROKEN, REACH, Drilled, coarse, judged, weighed
from rigdesign.levers.grouping import allowed, millimetres
from rigdesign.levers.hanging import hang_free, metres
from rigdesign.levers.judging import Judge, Lines, build_judge
from rigdesign.levers.wiring import Ints, Wiring, ideal_levers
from rigdesign.pads.limits import violations
from rigdesign.pads.model import PadPlan
from rigdesign.pads.outcome import Progress
from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

JUDGED = 8_000_000
"""Rigs times pads that a descent may judge."""

ALL_PAIRS = 32
"""Up to so many arms the descent tries every pair of them; beyond, pairs of levers that are kin."""


def drill_free(plan: PadPlan, wiring: Wiring, tube: Tube, progress: Progress | None = None) -> Drilled | Refusal:
    """Drill the levers of free pads; Refusal where the drill step leaves a lever without an arm within its limits."""
    brief = plan.target.brief
    step = brief.levers.drill_step
    levers = ideal_levers(wiring, plan.x, np.abs(plan.force))
    refusal = coarse(wiring, levers.a, levers.b, step)
    if refusal is not None:
        return refusal
    aimed = weighed(tube, plan.x, np.abs(plan.force))
    judge = build_judge(aimed)
    found = _searched(plan, wiring, tube, judge, progress) if wiring.is_neighbourly else None
    start = found.steps.reshape(-1) if found is not None else _rounded(brief, levers.a, levers.b, step)
    if start is None:
        return _no_side(step)
    value = _value(plan.target, wiring, tube, judge, start)
    pairs = all_pairs(start.size) if start.size <= ALL_PAIRS else near_pairs(wiring, 2)
    moves = moves_of(start.size, pairs)
    most = max(1, JUDGED // (plan.n_pads * len(moves))) * len(moves)
    descended = descend(start, moves, value, most)
    if descended.value >= BROKEN:
        # pads that stand close leave few choices that keep them apart, and single moves may not lead to one
        descended = descend_again(descended, moves, value, most)
    hung = hang_free(wiring, descended.steps[None], step, tube.jack_x, tube.total)
    use = float(tube.use(hung.pad_x, hung.pad_force)[0])
    return Drilled(hung, descended.steps.reshape(-1, 2), use, _words(found, descended, aimed is tube))


def _value(target: Target, wiring: Wiring, tube: Tube, judge: Judge, start: Ints) -> Callable[[Ints], Floats]:
    """Band use of rows of steps; far larger where pad limits are missed, infinite where a lever breaks a limit."""
    brief, step = target.brief, target.brief.levers.drill_step

    def value(rows: Ints) -> Floats:
        result = np.full(len(rows), np.inf)
        a, b = metres(rows[:, 0::2], step), metres(rows[:, 1::2], step)
        near = (np.abs(rows - start) <= REACH).all(axis=1)
        kept = np.flatnonzero(near & allowed(a, b, brief.levers).all(axis=1))
        if kept.size:
            hung = hang_free(wiring, rows[kept], step, tube.jack_x, tube.total)
            result[kept] = judged(target, judge, hung.pad_x, hung.pad_force)
        return result

    return value


def _searched(plan: PadPlan, wiring: Wiring, tube: Tube, judge: Judge, progress: Progress | None) -> Arms | None:
    """Arms by branch and bound."""
    brief, force = plan.target.brief, np.abs(plan.force)
    load = np.append(np.cumsum(force[::-1])[::-1], 0.0)
    first = np.append(np.cumsum((force * plan.x)[::-1])[::-1], 0.0)

    def pads_kept(x: Floats, pull: Floats) -> NDArray[np.bool_]:
        return np.asarray(violations(plan.target, x[:, None], pull[:, None]) == 0)

    def arms_kept(a: Floats, b: Floats) -> NDArray[np.bool_]:
        return allowed(a, b, brief.levers)

    lines, step = Lines(load, first), brief.levers.drill_step
    search = Search(wiring, judge, step, lines, plan.x, tube.displacement, pads_kept, arms_kept)
    jack = Pins(np.array([tube.total]), np.array([tube.jack_x]), Lines(np.zeros(1), np.zeros(1)))
    return search_arms(search, jack, float(judge.use(plan.x[None], force[None])[0]), progress)


def _rounded(brief: Brief, a: Floats, b: Floats, step: float) -> Ints | None:
    """Arms rounded to the nearest steps that keep the limits of the lever; None where a lever has none nearby."""
    reach = np.arange(-3, 4)
    offsets = np.stack(np.meshgrid(reach, reach, indexing="ij"), axis=-1).reshape(-1, 2)
    steps = np.zeros((a.size, 2), dtype=np.int64)
    for row in range(a.size):
        exact = np.array([a[row], b[row]]) / step
        tried = np.rint(exact).astype(np.int64) + offsets
        kept = tried[allowed(metres(tried[:, 0], step), metres(tried[:, 1], step), brief.levers)]
        if not len(kept):
            return None
        steps[row] = kept[np.argmin(np.abs(kept - exact).sum(axis=1))]
    return steps.reshape(-1)


def _no_side(step: float) -> Refusal:
    return Refusal(
        "levers",
        "with arms in whole drill steps no lever tree keeps the limits of the levers",
        f"drill_step {millimetres(step)}",
        "the arms before drilling keep the limits, none within two steps of them does",
        "choose a finer drill_step or ease the limits of the levers",
    )


def _words(found: Arms | None, descended: Descended, is_proof: bool) -> str:
    if found is None:
        head = "drilling: arms rounded, then moved"
    elif not is_proof:
        head = (
            f"drilling: {found.nodes} choices of arms looked at, for the quantity that the plan keeps inside its band "
            "not to leave it for the sake of the other"
        )
    elif found.window:
        head = (
            f"drilling: {found.nodes} choices of arms looked at; proven: no arms up to {steps_of(found.window)} either "
            f"side of those that give back the planned pads have a band use below {found.least:.4g}"
        )
    else:
        head = f"drilling: {found.nodes} choices of arms looked at, too few to prove which are best"
    end = "no small move improves it" if descended.is_settled else "stopped by its work limit"
    return f"{head}; then a descent over {descended.judged} rigs: {end}"


def steps_of(count: int) -> str:
    """A number of drill steps in words."""
    return "1 drill step" if count == 1 else f"{count} drill steps"
