"""The search: pieces are merged into groups two groups at a time, all holes being drilled anew together.

From two starts: for free pads, from the fewest groups that the tolerance leaves, from which pieces are taken out until
the rig is accepted; and, unless that took none out, from the rig as drilled, the merge of least band use first.  The
start that ends with fewer groups, then less band use, wins.  Work is counted in rigs times pads.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from itertools import pairwise

import numpy as np

from rigdesign.levers.descent import Moves, all_pairs, descend, moves_of
from rigdesign.levers.drilled import BROKEN
from rigdesign.levers.marks.alike import SAME, alike_rows
from rigdesign.levers.marks.trials import Groups, Trials
from rigdesign.levers.wiring import Ints
from rigdesign.target.curve import Floats

PAIRS = 300
"""No more pairs of groups than this, those whose holes are nearest, are tried for one merge."""

TRIED = 6
"""So many of the best merges are held to the exact judge, or drilled anew where none is within the limit."""

ALL_PAIRS = 24
"""Up to so many numbers a descent tries all pairs of them; beyond, pairs of one group alone."""

WORK_MOVING, WORK_STAYING = 6_000_000, 3_000_000
"""Rigs times pads that a search from one start may judge."""

IN_PLAN = 0.1
"""Part of that for surfaces, whose rigs cost more to judge."""

SWEEPS = 4
"""Sweeps of the descent that tries to bring one merge within the limit."""


@dataclass(frozen=True)
class State:
    """Groups of pieces that are alike, the steps (q,) that make them so, their worth, and the rigs judged so far."""

    groups: Groups
    steps: Ints
    value: float
    judged: int


def search(trials: Trials, fewest: Groups) -> State:
    """Find few groups; `fewest` are those that the tolerance alone would leave, empty where none are known."""
    best, judged = None, 0
    if fewest:
        best = _from_few(trials, fewest)
        judged = best.judged
    # fewer than the fewest need not be looked for
    if best is None or len(best.groups) > len(fewest):
        other = _merged(trials, _as_drilled(trials))
        judged += other.judged
        if best is None or (len(other.groups), other.value) < (len(best.groups), best.value):
            best = other
    return _polished(trials, replace(best, judged=judged))


def _as_drilled(trials: Trials) -> State:
    """Pieces that are alike already; where pads stay, only those over pads, since others may move with these."""
    pieces = list(trials.rig.trees[0].pieces)
    groups: list[tuple[int, ...]] = []
    for group in alike_rows(pieces):
        low = trials.rig.plan.may_move or all(_height(trials, row) == 1 for row in group)
        groups += [tuple(group)] if low else [(row,) for row in group]
    value = float(trials.values(trials.drilled[None], tuple(groups))[0])
    return State(tuple(groups), trials.drilled, value, 1)


def _height(trials: Trials, row: int) -> int:
    """Tiers from a piece down to the pads, itself among them."""
    return 1 + max((_height(trials, end) for end in trials.branches.ends[row] if end >= 0), default=0)


def _work(trials: Trials) -> int:
    """Rigs that may be judged."""
    plan = trials.rig.plan
    work = WORK_MOVING if plan.may_move else WORK_STAYING
    part = IN_PLAN if plan.target.brief.specimen.is_surface else 1.0
    return int(work * part) // plan.n_pads


def _merged(trials: Trials, state: State) -> State:
    """Merge as long as some merge is accepted."""
    most = state.judged + _work(trials)
    while state.judged < most:
        after = _one_merge(trials, state)
        if len(after.groups) == len(state.groups):
            return after
        state = after
    return state


def _one_merge(trials: Trials, state: State) -> State:
    """The best accepted merge of two groups, or the same groups."""
    pairs, rows = _candidates(trials, state)
    if not len(rows):
        return state
    values = trials.values(rows, state.groups)
    judged = state.judged + len(rows)
    height = np.array([_height(trials, state.groups[i][0]) for i, _ in pairs])
    if trials.rig.plan.may_move:
        height[:] = 0
    # where pads stay, what is below comes first: what is above follows it
    order = np.lexsort((values, height))
    order = order[np.isfinite(values[order])]
    for k in [k for k in order if values[k] <= trials.top][:TRIED]:
        groups = _joined(state.groups, pairs[k])
        if trials.is_accepted(rows[k], groups):
            return State(groups, rows[k], float(values[k]), judged)
    for k in [k for k in order if values[k] > trials.top][:TRIED]:
        groups = _joined(state.groups, pairs[k])
        after = _drilled_anew(trials, State(groups, rows[k], float(values[k]), judged), SWEEPS)
        judged = after.judged
        if after.value <= trials.top and trials.is_accepted(after.steps, groups):
            return after
    return State(state.groups, state.steps, state.value, judged)


def _joined(groups: Groups, pair: tuple[int, int]) -> Groups:
    first, second = pair
    both = tuple(sorted((*groups[first], *groups[second])))
    return tuple(sorted((both, *(group for k, group in enumerate(groups) if k not in pair))))


def _candidates(trials: Trials, state: State) -> tuple[list[tuple[int, int]], Ints]:
    """Pairs of groups that the tolerance lets merge, and rows of steps that do so: a few for each pair."""
    same = trials.same_holes(state.steps)
    low, high = trials.drilled - trials.reach, trials.drilled + trials.reach
    found: list[tuple[int, tuple[int, int], list[Ints]]] = []
    for j, group in enumerate(state.groups):
        for i in range(j):
            one, other = state.groups[i], group
            if not _could(trials, same, one[0], other[0]):
                continue
            members = [*one, *other]
            columns = np.array([range(trials.columns[row].start, trials.columns[row].stop) for row in members])
            least, most = low[columns].max(axis=0), high[columns].min(axis=0)
            if (least > most).any():
                continue
            away = int(np.abs(state.steps[columns[0]] - state.steps[columns[-1]]).sum())
            found.append((away, (i, j), _common(trials, state, columns, len(one), least, most)))
    found.sort(key=lambda item: item[:2])
    pairs = [pair for _, pair, rows in found[:PAIRS] for _ in rows]
    every = [row for _, _, rows in found[:PAIRS] for row in rows]
    return pairs, np.array(every, dtype=np.int64).reshape(-1, state.steps.size)


def _could(trials: Trials, same: list[tuple[float, ...]], i: int, j: int) -> bool:
    """Whether two pieces are of one kind and, where pads stay, have the same outer holes."""
    if len(trials.branches.ends[i]) != len(trials.branches.ends[j]):
        return False
    return all(abs(p - q) <= SAME for p, q in zip(same[i], same[j], strict=True))


def _common(trials: Trials, state: State, columns: Ints, split: int, least: Ints, most: Ints) -> list[Ints]:
    """Rows of steps with common numbers for some pieces: the mean as drilled, and what either group has."""
    wishes = [
        np.rint(trials.drilled[columns].mean(axis=0)).astype(np.int64),
        state.steps[columns[0]],
        state.steps[columns[split]],
    ]
    rows: list[Ints] = []
    for wish in wishes:
        row = state.steps.copy()
        row[columns] = np.clip(wish, least, most)
        if not any(np.array_equal(row, other) for other in rows):
            rows.append(row)
    return rows


def _moves(trials: Trials, groups: Groups) -> Moves:
    """Moves of the numbers of groups, all members together."""
    numbers = []
    ends = [0]
    for group in groups:
        columns = np.array([range(trials.columns[row].start, trials.columns[row].stop) for row in group])
        for column in columns.T:
            number = np.zeros(trials.drilled.size, dtype=np.int8)
            number[column] = 1
            numbers.append(number)
        ends.append(len(numbers))
    size = len(numbers)
    pairs = all_pairs(size) if size <= ALL_PAIRS else np.concatenate([all_pairs(b - a) + a for a, b in pairwise(ends)])
    small = moves_of(size, pairs)
    return np.asarray(small @ np.array(numbers), dtype=np.int8)


def _drilled_anew(trials: Trials, state: State, sweeps: int | None = None) -> State:
    """The same groups with their holes drilled anew for least band use."""
    moves = _moves(trials, state.groups)
    low, high = trials.drilled - trials.reach, trials.drilled + trials.reach

    def value(rows: Ints) -> Floats:
        result = np.full(len(rows), np.inf)
        near = np.flatnonzero(((rows >= low) & (rows <= high)).all(axis=1))
        if near.size:
            result[near] = trials.values(rows[near], state.groups)
        return result

    most = _work(trials) if sweeps is None else sweeps * len(moves)
    found = descend(state.steps, moves, value, most)
    return State(state.groups, found.steps, found.value, state.judged + found.judged)


def _polished(trials: Trials, state: State) -> State:
    """The holes of least band use for the groups found, if the exact judge accepts them too."""
    after = _drilled_anew(trials, state)
    if trials.is_accepted(after.steps, state.groups):
        return after
    return State(state.groups, state.steps, state.value, after.judged)


def _from_few(trials: Trials, fewest: Groups) -> State:
    """Start from few groups, take pieces out of them until the rig is accepted, and merge again what can be."""
    steps = trials.drilled.copy()
    for group in fewest:
        columns = np.array([range(trials.columns[row].start, trials.columns[row].stop) for row in group])
        own = trials.drilled[columns]
        steps[columns] = np.clip(
            np.rint(own.mean(axis=0)), (own - trials.reach).max(axis=0), (own + trials.reach).min(axis=0)
        )
    groups = tuple(sorted(fewest))
    state = State(groups, steps, float(trials.values(steps[None], groups)[0]), 1)
    most = _work(trials)
    while state.judged < most:
        state = _drilled_anew(trials, state, SWEEPS)
        if state.value <= trials.top and trials.is_accepted(state.steps, state.groups):
            return _merged(trials, state)
        apart = _taken_out(trials, state)
        if apart is None:
            break
        state = apart
    return State(state.groups, state.steps, BROKEN * BROKEN, state.judged)


def _taken_out(trials: Trials, state: State) -> State | None:
    """The state with that piece as drilled again, alone, which helps most; None where all are alone."""
    rows, after = [], []
    for k, group in enumerate(state.groups):
        for row in group if len(group) > 1 else ():
            steps = state.steps.copy()
            steps[trials.columns[row]] = trials.drilled[trials.columns[row]]
            rest = tuple(other for other in group if other != row)
            rows.append(steps)
            after.append(tuple(sorted((rest, (row,), *(g for i, g in enumerate(state.groups) if i != k)))))
    if not rows:
        return None
    values = trials.values(np.array(rows), ())
    best = int(np.argmin(values))
    return State(after[best], rows[best], float(values[best]), state.judged + len(rows))
