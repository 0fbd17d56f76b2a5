"""A rig whose steel is cut under another target: which pivots to drill anew, and what that achieves."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from typing import Literal

import numpy as np

from rigdesign.brief.model import Acceptance, BandRule
from rigdesign.display import show
from rigdesign.errors import InputError
from rigdesign.findings import Refusal, numbered
from rigdesign.levers.drilled import BROKEN
from rigdesign.levers.keep.drilling import Drill, Holes
from rigdesign.levers.keep.model import Kept, MovedPivot
from rigdesign.levers.keep.pivots import misfit_rows, pivots_of
from rigdesign.levers.keep.programme import Choice, Programme, Within
from rigdesign.levers.keep.remarks import APART, none_possible, remarks, words_of
from rigdesign.levers.keep.settled import settled
from rigdesign.levers.keep.sight import shares, sight_of
from rigdesign.levers.keep.standing import branches_of_rig, only_tree
from rigdesign.levers.marks.exact import Exact
from rigdesign.levers.model import Rig
from rigdesign.pads.limits import force_limits
from rigdesign.pads.model import LEAST_SHARE, PadPlan, Proof
from rigdesign.target.model import Target

MARGIN = 1e-3
"""Part of the band that is kept free, so that the check, which looks between the stations too, agrees."""

EASE = 0.01
"""Where no pivots keep the bands, those count that come within this part of the least band use."""

MORE = 3
"""So many more pivots are tried than are proven to be needed where the drill step leaves fewer outside the bands."""

LEAST_PAD = 1e-3
"""Every pad carries at least this part of the mean force: one that carries nothing is no pad."""

SIDES: tuple[Literal["under", "over"], ...] = ("under", "over")

METHOD = "linear programme over the forces of the pads where they are, whatever the pivots"


@dataclass(frozen=True)
class _Task:
    """A rig to be kept, what its pivots say, and how it is judged and drilled."""

    old: Rig
    target: Target
    drill: Drill
    programme: Programme
    exact: Exact

    def use(self, holes: Holes) -> float:
        """Band use of pivots as drilled, judged at many stations."""
        return self.exact.use(self.old.pad_x, self.old.pad_y, holes.force)

    def is_accepted(self, holes: Holes) -> bool:
        """Whether pads and pivots keep bands and limits."""
        # an unmoved plate that is too small for the new limits stays so whatever is drilled
        rows = tuple(k for k, pivot in enumerate(self.drill.pivots) if pivot.is_lever or np.any(holes.shifts[k]))
        if self.drill.missed(holes.force[None])[0] > 0 or not self.drill.keeps(holes.shifts[None], rows)[0]:
            return False
        missed = self.exact.shares_missed(self.old.pad_x, self.old.pad_y, holes.force)
        return self.use(holes) <= 1.0 and missed <= 1e-9


def keep_rig(
    old: Rig, target: Target, hole_distance: float | None, hole_diameters: Mapping[str, float]
) -> Kept | Refusal:
    """Hold a rig that exists to another target: pads, levers and outer holes stay, few pivots are drilled anew.

    Parameters
    ----------
    old
        The rig whose steel is cut, with one jack.
    target
        What the specimen must feel now, with the limits of its brief.
    hole_distance
        What a new pivot must keep from the old one, centre to centre [m]; None: two diameters of the piece's holes.
    hole_diameters
        Diameter of the holes [m] by the name of the piece ("lever 5").

    Returns
    -------
    The rig with as few new pivots as the bands need, and among those of least band use as drilled; where no pivots
    keep the bands, the best that was found, which the check does not accept.  A Refusal where the limits of pads and
    levers leave no forces at all.

    Raises
    ------
    InputError
        Where the pads stand off the new specimen, the rig has several jacks, or a hole's diameter is not known and no
        distance is given.
    """
    _require_places(old, target)
    task = _task(old, target, _distances(old, hole_distance, hole_diameters))
    free = task.programme.least_use()
    if free is None:
        return none_possible(task.drill)
    undrilled = task.drill.undrilled()
    before = task.use(undrilled)
    if task.is_accepted(undrilled) or not task.drill.pivots:
        choice = Choice(undrilled.force, before, (), (), 0.0, free.rows)
        return _kept(task, choice, undrilled, free, before, 0, hole_diameters)
    limit = _limit(free.use)
    within = Within(limit, reaches=task.programme.reaches(limit, free.rows))
    fewest = task.programme.fewest(within, free.rows) or replace(free, bound=0.0)
    proven = int(np.ceil(fewest.bound - 1e-6))
    choice, holes = _best(task, fewest, within)
    return _kept(task, choice, holes, free, before, proven, hole_diameters)


def _limit(least: float) -> float:
    """Band use that pivots may reach, where the least is as given."""
    if least > 1.0:
        return least * (1.0 + EASE)
    return 1.0 - MARGIN if least <= 1.0 - 2 * MARGIN else 1.0


def _best(task: _Task, fewest: Choice, within: Within) -> tuple[Choice, Holes]:
    """Pivots as drilled: with the fewest moves that end within the bands, or else of least band use."""
    start = task.programme.unknowns.price * len(fewest.near) + len(fewest.moved)
    found: list[tuple[float, int, Choice, Holes]] = []
    for cost in range(start, start + MORE + 1):
        for choice in _choices(task, fewest, replace(within, cost=cost)):
            holes = task.drill.drilled(choice)
            if holes is None:
                continue
            if task.is_accepted(holes):
                return choice, holes
            missed = float(task.drill.missed(holes.force[None])[0])
            found.append((task.use(holes) + BROKEN * missed, cost, choice, holes))
        if within.use > 1.0:
            break
    if not found:
        return replace(fewest, moved=(), near=()), task.drill.undrilled()
    _, _, choice, holes = min(found, key=lambda item: item[:2])
    return choice, holes


def _choices(task: _Task, fewest: Choice, within: Within) -> Iterator[Choice]:
    """Choices of one cost: that whose links lean least, with half of the room inside the bands given up; least use."""
    best = task.programme.least_use_within(within, fewest.rows) or fewest
    if within.use <= 1.0:
        rows = misfit_rows(task.old, task.drill.branches, task.drill.pivots, best.force)
        half = max(best.use, 0.5 * (best.use + within.use))
        plumb = task.programme.plumbest(replace(within, use=half, misfits=rows), best.rows) if len(rows) else None
        if plumb is not None:
            yield plumb
    yield best


def _task(old: Rig, target: Target, distances: dict[str, float]) -> _Task:
    branches, rules = branches_of_rig(old), target.brief.levers
    pivots = pivots_of(old, branches, rules, distances)
    sight = sight_of(target, old.pad_x, old.pad_y)
    total = abs(target.net_plan.sums.force)
    least, largest = force_limits(target)
    return _Task(
        old,
        target,
        Drill(branches, pivots, sight, rules, total, least, largest),
        Programme(sight, pivots, total, max(least, LEAST_PAD * total / old.pad_x.size), largest),
        Exact(target),
    )


def _kept(
    task: _Task, choice: Choice, holes: Holes, free: Choice, before: float, proven: int, diameters: Mapping[str, float]
) -> Kept:
    after = task.use(holes)
    moved = _moved(task, holes)
    plan = _plan(task, choice, free)
    drill = task.drill
    rig = settled(task.old, drill.branches, drill.pivots, holes.shifts, holes.force, plan)
    least = divmod(proven, task.programme.unknowns.price)
    words = words_of(moved, (before, after), free, least, len(drill.pivots))
    rig = replace(rig, words=words, findings=numbered(remarks(task.old, rig, moved, diameters)))
    return Kept(rig, moved, before, after, *least, words)


def _moved(task: _Task, holes: Holes) -> tuple[MovedPivot, ...]:
    result = []
    for pivot, shift in zip(task.drill.pivots, holes.shifts, strict=True):
        away = float(np.hypot(*shift))
        if away > 0:
            old = -pivot.holes[0]
            new = old + shift
            old_u, old_v, new_u, new_v = (float(value) for value in (*old, *new))
            result.append(MovedPivot(pivot.name, "pivot", old_u, old_v, new_u, new_v, away, pivot.distance))
    return tuple(result)


def _plan(task: _Task, choice: Choice, free: Choice) -> PadPlan:
    """The plan of the pads where they are: forces before drilling, and what is proven of any pivots."""
    old, target = task.old, task.target
    sign = 1.0 if target.resultant >= 0 else -1.0
    x, y, force = old.pad_x, old.pad_y, choice.force
    own = shares(target, x, y)
    uneven = float((np.abs(force - own) / np.maximum(np.abs(own), LEAST_SHARE * abs(float(own.mean())))).max())
    use = task.exact.use(x, y, force)
    proof = Proof(
        band_use=use,
        band_use_least=float(min(free.bound, use)),
        moment_error_least=_moment_least(task),
        method=METHOD,
        words="the pads are those of a rig that exists",
        evenness=uneven,
        evenness_before=uneven,
        band_use_found=use,
    )
    total = float(force.sum())
    return PadPlan(
        target=target,
        x=x,
        y=y,
        force=sign * force,
        share=sign * own,
        jack_x=float((force * x).sum()) / total,
        jack_y=float((force * y).sum()) / total,
        may_move=False,
        proof=proof,
        findings=(),
    )


def _moment_least(task: _Task) -> float:
    """Moment error that no forces of these pads go below, as a fraction of the peak of the target's moment."""
    rules = tuple(BandRule("moment", side, 1.0, False, "peak") for side in SIDES)
    brief = replace(task.target.brief, acceptance=Acceptance(rules, (), defaulted=False))
    sight = sight_of(replace(task.target, brief=brief), task.old.pad_x, task.old.pad_y)
    least = replace(task.programme, sight=sight).least_use()
    return 0.0 if least is None else max(least.bound, 0.0)


def _distances(old: Rig, distance: float | None, diameters: Mapping[str, float]) -> dict[str, float]:
    """What a new pivot of each piece must keep from the old one [m]."""
    result = {}
    for piece in only_tree(old).pieces:
        if distance is None and piece.name not in diameters:
            raise InputError(
                "the diameter of the holes is not known, so that nothing says how far a new hole must be from an old",
                where=f"kept rig, {piece.name}",
                remedy='give "hole_distance" in [keep]',
            )
        result[piece.name] = APART * diameters[piece.name] if distance is None else distance
    return result


def _require_places(old: Rig, target: Target) -> None:
    """Every pad of the old rig stands on the new specimen."""
    specimen = target.brief.specimen
    x, y = old.pad_x, old.pad_y
    near = 1e-9 * (specimen.right - specimen.left)
    if specimen.outline is not None:
        import shapely

        on = shapely.intersects_xy(specimen.outline.polygon.buffer(near), x, y)
        limit = "on the outline"
    else:
        on = (x >= specimen.left - near) & (x <= specimen.right + near) & (np.abs(y) <= near)
        limit = f"{show(specimen.left, 'length', unit='m')} to {show(specimen.right, 'length', unit='m')}, y = 0"
    if not on.all():
        pad = int(np.argmin(on))
        at = f"x = {show(float(x[pad]), 'length', unit='m')}, y = {show(float(y[pad]), 'length', unit='m')}"
        raise InputError(
            "a pad of the kept rig stands off the specimen",
            where=f"kept rig, pad {pad + 1}",
            value=at,
            limit=limit,
            remedy="keep a rig of this specimen, or design a new one",
        )
