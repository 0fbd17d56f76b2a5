"""Pads and levers for a brief, checked: `arrange`."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from rigdesign.chain.progress import Progress, share
from rigdesign.findings import Finding, Refusal, numbered

if TYPE_CHECKING:
    from rigdesign.brief.model import Brief
    from rigdesign.checks.model import Check
    from rigdesign.levers.weighing import StockLine
    from rigdesign.target.model import Target

MORE_PADS = 4
"""With `count = "fewest"`, so many more pads are tried at most when what drilling costs breaks a band."""

FEWER_PADS = 40
"""With `count = "fewest"`, so many fewer pads are tried at most when levers cannot join those that bands ask for."""

PADS_PART = 0.6  # of the whole work, as progress shows it: choosing pads takes longer than levers and check


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
    first = arrange_count(target, None, progress, stock)
    if target.brief.pads.count == "fewest" and isinstance(first, Refusal) and first.stage == "levers":
        return _most_that_levers_join(target, first, progress, stock)
    if target.brief.pads.count != "fewest" or isinstance(first, Refusal) or first.accepted:
        return first
    best, planned = first, first.rig.plan.n_pads
    for count in range(planned + 1, planned + 1 + MORE_PADS):
        answer = arrange_count(target, count, progress, stock, (_more_than_planned(planned, count),))
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
        answer = arrange_count(target, count, progress, stock, (remark,))
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


def arrange_count(
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

    plan = plan_pads(target, count, share(progress, 0.0, PADS_PART))
    if isinstance(plan, Refusal):
        return plan
    plan = replace(plan, findings=numbered((*plan.findings, *remarks)))
    rig = build_rig(plan, share(progress, PADS_PART, 1.0), stock)
    return rig if isinstance(rig, Refusal) else check(rig)
