"""Holes on the drill step in plan, chosen together by a descent over the largest error of the drilled rig.

The numbers of steps start nearest to what the plan wants, from the pads up (pads that stay) or from the jack down (free
pads), and change by single steps and pairs of steps as long as the largest error over its band falls.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from itertools import product

import numpy as np

from rigdesign.findings import Refusal
from rigdesign.levers.descent import all_pairs, descend, descend_again, moves_of
from rigdesign.levers.drilled import BROKEN, REACH
from rigdesign.levers.grouping import millimetres
from rigdesign.levers.surface.hanging import (
    HungInPlan,
    columns_of,
    hang_moving,
    hang_staying,
)
from rigdesign.levers.surface.judging import Use, judge_of
from rigdesign.levers.surface.pad_limits import PadLimits
from rigdesign.levers.surface.wiring import Branches, Planned
from rigdesign.levers.wiring import Ints
from rigdesign.pads.model import PadPlan
from rigdesign.target.curve import Floats

ALL_PAIRS = 24
"""Up to so many numbers the descent tries every pair of them; beyond, pairs of one piece and of pieces that are kin."""

JUDGED, JUDGED_AGAIN = 1_500_000, 250_000
"""Rigs times pads that the descent, and the repeated descents, may judge."""

MOVING_COST = 12
"""A rig whose pads move costs so many times more to judge than one whose pads stay."""

AWAY = 5.0
"""Part of the planned band use that may be given up to bring the jack nearer to its planned place by the extent of the
pads: 0.02 % of the extent counts as 1 % of a pad's force."""

A_STEP_AWAY = 1.0
"""The same for each drill step beyond the first: a place within a step of the planned one is always near."""

OFF_PLAN = 0.1
"""Part of the planned band use that may be given up to bring the force that is furthest off its plan by its whole size
nearer to it: once errors are as small as planned, the forces that the plan chose are what counts."""

LEAST_PLANNED = 0.05
"""A planned band use below this counts as this: errors of a twentieth of their bands are good enough."""


@dataclass(frozen=True)
class DrilledInPlan:
    """A drilled tree: how it hangs (one row), its steps (q,), its band use, and what was searched, in words."""

    hung: HungInPlan
    steps: Ints
    use: float
    words: str


Hang = Callable[[Ints], HungInPlan]


def drill_in_plan(plan: PadPlan, branches: Branches) -> DrilledInPlan | Refusal:
    """Drill the pieces of a tree; Refusal where no steps near the plan keep the limits of the levers."""
    step, total = plan.target.brief.levers.drill_step, float(np.abs(plan.force).sum())
    planned = Planned.of(branches, plan.x, plan.y, np.abs(plan.force))
    jack = plan.jack_x, plan.jack_y

    def hang(steps: Ints) -> HungInPlan:
        if plan.may_move:
            return hang_moving(branches, steps, step, planned, jack, total, plan.x, plan.y)
        return hang_staying(branches, steps, step, plan.x, plan.y, total)

    judge = judge_of(plan)
    start = _start(plan, branches, planned, hang) if branches.n_pieces else np.zeros(0, dtype=np.int64)
    if not branches.n_pieces:
        hung = hang(start[None])
        use = float(judge(hung.pad_x, hung.pad_y, hung.pad_force)[0])
        return DrilledInPlan(hung, start, use, "nothing to drill")
    value = _value(PadLimits(plan, branches), hang, judge, start)
    if not np.isfinite(value(start[None])[0]):
        return _no_steps(step)
    size = start.size
    moves = moves_of(size, all_pairs(size) if size <= ALL_PAIRS else near_columns(branches, plan.may_move))
    cost = plan.n_pads * (MOVING_COST if plan.may_move else 1)
    found = descend(start, moves, value, max(len(moves), JUDGED // cost))
    found = descend_again(found, moves, value, max(len(moves), JUDGED_AGAIN // cost))
    hung = hang(found.steps[None])
    use = float(judge(hung.pad_x, hung.pad_y, hung.pad_force)[0])
    end = "no small move improves it" if found.is_settled else "stopped by its work limit"
    away = float(np.hypot(hung.jack_x[0] - plan.jack_x, hung.jack_y[0] - plan.jack_y))
    where = "" if plan.may_move else f"; the jack stands {millimetres(away)} from where it was planned"
    return DrilledInPlan(hung, found.steps, use, f"drilling: a descent over {found.judged} rigs, {end}{where}")


def _value(limits: PadLimits, hang: Hang, judge: Use, start: Ints) -> Callable[[Ints], Floats]:
    """What rows of steps are worth: the band use, but none below the plan's, and what is lost of the plan itself.

    Far larger where pad limits are missed, infinite where a piece breaks a limit.
    """
    plan = limits.plan
    brief, wanted = plan.target.brief, np.abs(plan.force)
    extent = max(np.ptp(plan.x), np.ptp(plan.y))
    step = brief.levers.drill_step / extent
    planned = max(LEAST_PLANNED, float(judge(plan.x[None], plan.y[None], wanted[None])[0]))

    def value(rows: Ints) -> Floats:
        result = np.full(len(rows), np.inf)
        near = np.flatnonzero((np.abs(rows - start) <= REACH).all(axis=1))
        if not near.size:
            return result
        hung = hang(rows[near])
        kept = hung.kept(brief.levers)
        if not kept.any():
            return result
        pads = hung.pad_x[kept], hung.pad_y[kept], hung.pad_force[kept]
        use = judge(*pads)
        away = np.hypot(hung.jack_x - plan.jack_x, hung.jack_y - plan.jack_y)[kept] / extent
        off = np.abs(pads[2] / wanted - 1.0).max(axis=1)
        lost = AWAY * away + A_STEP_AWAY * np.maximum(away / step - 1.0, 0.0) + OFF_PLAN * off
        excess = limits.missed(*pads)
        missed = np.where(excess > 0, BROKEN * (1.0 + excess), 0.0)
        result[near[kept]] = np.maximum(use, planned) + planned * lost + missed
        return result

    return value


def near_columns(branches: Branches, may_move: bool) -> Ints:
    """Pairs of numbers of one piece, and of pieces that hang from one another or side by side, (k, 2)."""
    columns = [list(range(part.start, part.stop)) for part in columns_of(branches, may_move)]
    kin = [(row, row) for row in range(branches.n_pieces)]
    for row, ends in branches.downward():
        below = [end for end in ends if end >= 0]
        kin += [(row, end) for end in below]
        kin += [(one, other) for k, one in enumerate(below) for other in below[:k]]
    pairs = {(min(p, q), max(p, q)) for one, other in kin for p, q in product(columns[one], columns[other]) if p != q}
    return np.array(sorted(pairs), dtype=np.int64).reshape(-1, 2)


def _start(plan: PadPlan, branches: Branches, planned: Planned, hang: Hang) -> Ints:
    """Steps nearest to the plan, piece by piece, that keep the limits of the piece where some nearby do."""
    columns = columns_of(branches, plan.may_move)
    steps = np.ones(columns[-1].stop, dtype=np.int64)
    order = branches.downward() if plan.may_move else branches.upward()
    for row, _ in order:
        part = columns[row]
        exact = _exact(plan, branches, planned, row, hang, steps)
        tried = _around(exact)
        rows = np.repeat(steps[None], len(tried), axis=0)
        rows[:, part] = tried
        kept = hang(rows).pieces[row].kept(plan.target.brief.levers)
        steps[part] = tried[int(np.argmax(kept))]
    return steps


def _around(exact: Floats) -> Ints:
    """Whole numbers around exact ones, the nearest first, (k, q)."""
    reach = np.array(list(product((0, 1, -1), repeat=exact.size)))
    tried = np.rint(exact).astype(np.int64) + reach
    tried = tried[np.argsort(np.abs(tried - exact).sum(axis=1), kind="stable")]
    return np.asarray(tried)


def _exact(plan: PadPlan, branches: Branches, planned: Planned, row: int, hang: Hang, steps: Ints) -> Floats:
    """What the numbers of a piece would be without a drill step."""
    step, force, ends = plan.target.brief.levers.drill_step, np.abs(plan.force), branches.ends[row]
    if plan.may_move:
        places = np.array([planned.place(end, plan.x, plan.y) for end in ends])
        u, v = _in_frame(places, np.array([planned.x[row], planned.y[row]]))
        numbers = (-u[0], u[1]) if len(ends) == 2 else (u[0], u[1], 0.5 * (v[0] + v[1]), u[2], v[2])
        return np.array(numbers) / step
    hung = hang(steps[None])
    places = np.array([
        (hung.pieces[end].x[0], hung.pieces[end].y[0]) if end >= 0 else (plan.x[-1 - end], plan.y[-1 - end])
        for end in ends
    ])  # fmt: skip
    load = np.array([planned.load[end] if end >= 0 else force[-1 - end] for end in ends])
    u, v = _in_frame(places, places[0])
    pivot = np.array([(load * u).sum(), (load * v).sum()]) / load.sum()
    return np.asarray(pivot[: len(ends) - 1] / step)


def _in_frame(places: Floats, origin: Floats) -> tuple[Floats, Floats]:
    """u, v of places (k, 2) seen from an origin, u along the line from the first to the second."""
    along = places[1] - places[0]
    cos, sin = along / np.hypot(*along)
    x, y = (places - origin).T
    return x * cos + y * sin, y * cos - x * sin


def _no_steps(step: float) -> Refusal:
    return Refusal(
        "levers",
        "with holes on whole drill steps no tree keeps the limits of the levers",
        f"drill_step {millimetres(step)}",
        "the tree before drilling keeps the limits, none of the steps tried near it does",
        "choose a finer drill_step or ease the limits of the levers",
    )
