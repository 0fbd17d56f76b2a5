"""From a brief to a checked rig, in one call: the stages in their order, and what connects them.

    arrange  brief  →  target  →  pads  →  levers  →  check
    design   arrange  →  hardware  →  check of the hardware
    study    arrange for several numbers of pads
    assess   a rig that exists, with other holes or against another target

Depends on: brief, target, pads, levers, hardware, checks, record.  `rigdesign.report` and `rigdesign.command` depend on
it.  Like the stages it knows no files, pictures or terminal; progress is told to a callback `progress(part, words)`,
part in 0..1.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from rigdesign.errors import BriefError
from rigdesign.findings import Finding, Refusal, numbered

if TYPE_CHECKING:
    from pathlib import Path

    from rigdesign.brief.model import Brief
    from rigdesign.checks.hardware.model import HardwareCheck
    from rigdesign.checks.model import Check
    from rigdesign.levers.model import Rig
    from rigdesign.levers.weighing import StockLine
    from rigdesign.target.model import Target

Progress = Callable[[float, str], None]

MORE_PADS = 4
"""With `count = "fewest"`, so many more pads are tried at most when what drilling costs breaks a band."""

FEWER_PADS = 40
"""With `count = "fewest"`, so many fewer pads are tried at most when levers cannot join those that bands ask for."""

_RIG_PART = 0.8  # of a whole design, as progress shows it; hardware is the rest
_PADS_PART = 0.6  # of the whole work, as progress shows it: choosing pads takes longer than levers and check


@dataclass(frozen=True)
class StudyRow:
    """One number of pads and what came of it: a checked rig, or the refusal that says why there is none."""

    pads: int
    answer: Check | Refusal

    @property
    def accepted(self) -> bool:
        """Whether there is a rig and its check accepts it."""
        return not isinstance(self.answer, Refusal) and self.answer.accepted


@dataclass(frozen=True)
class Study:
    """Rigs for several numbers of pads, in their order."""

    brief: Brief
    rows: tuple[StudyRow, ...]

    @property
    def fewest(self) -> StudyRow | None:
        """The accepted row with the fewest pads, None where no row is accepted."""
        return min((row for row in self.rows if row.accepted), key=lambda row: row.pads, default=None)


def design(brief: Brief, progress: Progress | None = None) -> HardwareCheck | Refusal:
    """Return the whole rig for a brief, checked with its hardware, or the refusal that says which limit leaves none.

    Raises
    ------
    InputError
        Where the brief contradicts itself in a way that only its target or the rig that it keeps shows.
    """
    from rigdesign.target import build_target

    return design_target(build_target(brief), progress)


def design_target(target: Target, progress: Progress | None = None) -> HardwareCheck | Refusal:
    """Like `design`, for a target that has been built already."""
    from rigdesign.checks import check
    from rigdesign.hardware import stock_line

    rules = target.brief.hardware
    if target.brief.keep is not None:
        return _kept(target, progress)
    arranged = arrange_target(target, _share(progress, 0.0, _RIG_PART), stock_line(target.brief))
    if isinstance(arranged, Refusal):
        return arranged
    if rules.marks == "few":
        from rigdesign.levers.marks import few_marks

        few = few_marks(arranged.rig, rules.mark_tolerance)
        arranged = check(few.rig)
    return _equipped(arranged, _share(progress, _RIG_PART, 1.0))


def _equipped(arranged: Check, progress: Progress | None) -> HardwareCheck:
    """A checked rig with its hardware, checked."""
    from rigdesign.checks.hardware import check_hardware
    from rigdesign.hardware import build_hardware

    return check_hardware(arranged, build_hardware(arranged.rig, progress))


def _kept(target: Target, progress: Progress | None) -> HardwareCheck | Refusal:
    """A rig whose steel is cut, with as few pivots drilled anew as the target asks for."""
    raise NotImplementedError


def arrange(brief: Brief, progress: Progress | None = None, stock: StockLine | None = None) -> Check | Refusal:
    """Return pads and levers for a brief, checked, or the refusal that says which limit leaves none.

    `stock` tells the grouping what levers weigh; without it the grouping is that of the least steel estimate.

    With `count = "fewest"` the pads stage says how many the bands need before drilling.  Where the drilled rig then
    breaks a band, up to `MORE_PADS` more pads are tried, and the best answer is returned.

    Raises
    ------
    InputError
        Where the brief contradicts itself in a way that only its target shows, such as a total of zero.
    """
    from rigdesign.target import build_target

    return arrange_target(build_target(brief), progress, stock)


def arrange_target(target: Target, progress: Progress | None = None, stock: StockLine | None = None) -> Check | Refusal:
    """Like `arrange`, for a target that has been built already."""
    first = _arrange(target, None, progress, stock)
    if target.brief.pads.count == "fewest" and isinstance(first, Refusal) and first.stage == "levers":
        return _most_that_levers_join(target, first, progress, stock)
    if target.brief.pads.count != "fewest" or isinstance(first, Refusal) or first.accepted:
        return first
    best, planned = first, first.rig.plan.n_pads
    for count in range(planned + 1, planned + 1 + MORE_PADS):
        answer = _arrange(target, count, progress, stock, (_more_than_planned(planned, count),))
        if isinstance(answer, Refusal):
            break
        if answer.accepted:
            return answer
        if answer.band_use < best.band_use:
            best = answer
    return best


def _most_that_levers_join(
    target: Target, refusal: Refusal, progress: Progress | None, stock: StockLine | None
) -> Check | Refusal:
    """Return the rig with the most pads, below the number wanted, that levers can join; the refusal if none."""
    from rigdesign.pads import plan_pads

    plan = plan_pads(target)
    wanted = 1 if isinstance(plan, Refusal) else plan.n_pads
    for count in range(wanted - 1, max(0, wanted - 1 - FEWER_PADS), -1):
        remark = Finding(
            "levers",
            "failure",
            "rig",
            f"the bands ask for {wanted} pads, and no levers join so many within their limits: {refusal.best}",
            f"{count} pads",
            refusal.limit,
            refusal.remedy,
        )
        answer = _arrange(target, count, progress, stock, (remark,))
        if not isinstance(answer, Refusal):
            return answer
    return refusal


def _more_than_planned(planned: int, count: int) -> Finding:
    return Finding(
        "pads",
        "note",
        "pads",
        f"before drilling {planned} pads keep the bands, as drilled they do not; up to {MORE_PADS} more were tried",
        f"{count} pads",
        f"fewest before drilling: {planned}",
        "a smaller drill step may save pads",
    )


def _arrange(
    target: Target,
    count: int | None,
    progress: Progress | None,
    stock: StockLine | None = None,
    remarks: tuple[Finding, ...] = (),
) -> Check | Refusal:
    """One rig for one number of pads, None for what the brief says; remarks join those of the plan."""
    from rigdesign.checks import check
    from rigdesign.levers import build_rig
    from rigdesign.pads import plan_pads

    plan = plan_pads(target, count, _share(progress, 0.0, _PADS_PART))
    if isinstance(plan, Refusal):
        return plan
    plan = replace(plan, findings=numbered((*plan.findings, *remarks)))
    rig = build_rig(plan, _share(progress, _PADS_PART, 1.0), stock)
    return rig if isinstance(rig, Refusal) else check(rig)


def _share(progress: Progress | None, start: float, end: float) -> Progress | None:
    """Return a callback that fills the part of the whole work from start to end."""
    if progress is None:
        return None
    return lambda part, words: progress(start + part * (end - start), words)


def study(brief: Brief, counts: Iterable[int], progress: Progress | None = None) -> Study:
    """Return the rigs for each number of pads in `counts`, everything else as the brief says.

    Raises
    ------
    ValueError
        If `counts` is empty or holds a number below 1.
    BriefError
        If the brief prescribes a grouping, which can fit one number of pads only, and `counts` holds several.
    """
    from rigdesign.target import build_target

    return study_target(build_target(brief), counts, progress)


def study_target(target: Target, counts: Iterable[int], progress: Progress | None = None) -> Study:
    """Like `study`, for a target that has been built already."""
    wanted = sorted(set(counts))
    if not wanted or wanted[0] < 1:
        raise ValueError("numbers of pads must be 1 or more, and at least one must be given")
    if len(wanted) > 1 and target.brief.levers.grouping is not None:
        raise BriefError(
            "a study compares several numbers of pads, and a prescribed grouping fits one of them",
            where=f"{target.brief.source.brief_name}, [levers] grouping",
            remedy="delete the grouping for the study",
        )
    rows = []
    for done, count in enumerate(wanted):
        part = _share(progress, done / len(wanted), (done + 1) / len(wanted))
        named = None if part is None else _named(part, f"{count} pads")
        rows.append(StudyRow(count, _arrange(target, count, named)))
    return Study(target.brief, tuple(rows))


def _named(progress: Progress, name: str) -> Progress:
    return lambda part, words: progress(part, f"{name}: {words}")


def assess(rig: Rig, holes: Path | None = None, brief: Brief | None = None) -> Check:
    """Return the check of a rig that exists: as it is, with other holes, against another brief's target, or both.

    Parameters
    ----------
    rig
        The rig, as `read_rig` gives it.
    holes
        A table of holes (the layout of holes.csv) to take instead of the rig's own.
    brief
        A brief to take instead of the rig's own: its target, bands and limits.

    Raises
    ------
    TableError
        Where the table of holes cannot be used.
    """
    from rigdesign.checks import check, check_with_holes, recheck

    if brief is not None:
        checked = recheck(rig, brief)
        return check_with_holes(checked.rig, holes) if holes is not None else checked
    return check_with_holes(rig, holes) if holes is not None else check(rig)
