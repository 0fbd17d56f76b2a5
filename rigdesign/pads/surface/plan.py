"""From the target to the pads in plan."""

from __future__ import annotations

import numpy as np

from rigdesign.findings import Finding, Refusal, numbered
from rigdesign.pads.limits import force_limits
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.pads.outcome import Outcome, Progress
from rigdesign.pads.remarks import doubts, proof_remarks
from rigdesign.pads.surface.error_rows import error_rows
from rigdesign.pads.surface.fewest import fewest_hard_points
from rigdesign.pads.surface.fewest_free import fewest_free
from rigdesign.pads.surface.free import FreeInPlan
from rigdesign.pads.surface.given import FINE, HardPlaces, choose_fixed, shares, sign_of
from rigdesign.pads.surface.line_bounds import LineBounds
from rigdesign.pads.surface.places import most_that_fit, usable_points
from rigdesign.pads.surface.program import unevenness
from rigdesign.pads.surface.refusals import for_the_count, jack_place_in_plan, unbalanced, whatever_the_count
from rigdesign.pads.surface.remarks import torsion_on_one_line
from rigdesign.target.model import Target

MOST_PADS = 100
"""With `count = "fewest"` no more pads than this are tried."""


def plan_in_plan(target: Target, count: int | None, progress: Progress | None) -> PadPlan | Refusal:
    """Choose the pads of a surface; what `plan_pads` says holds here."""
    wanted = target.brief.pads.count if count is None else count
    jack = jack_place_in_plan(target)
    refusal = whatever_the_count(target, *jack)
    if refusal is not None:
        return refusal
    if wanted == "fewest":
        return _fewest(target, jack, progress)
    return _planned(target, jack, int(wanted), progress)


def _planned(target: Target, jack: tuple[float, float], count: int, progress: Progress | None) -> PadPlan | Refusal:
    refusal = for_the_count(target, count)
    if refusal is not None:
        return refusal
    outcome = _choose(target, jack, count, progress)
    return unbalanced(target, *jack, count) if outcome is None else _plan(target, jack, outcome)


def _choose(target: Target, jack: tuple[float, float], count: int, progress: Progress | None) -> Outcome | None:
    places = target.brief.pads.places
    if places == "fixed":
        return choose_fixed(target, *jack)
    if places == "hard points":
        return HardPlaces(target, *jack, count, progress).choose()
    return FreeInPlan(target, *jack, count, progress).choose()


def _fewest(target: Target, jack: tuple[float, float], progress: Progress | None) -> PadPlan | Refusal:
    """Plan with the fewest pads whose band use is at most 1, or the best plan found."""
    brief = target.brief
    if brief.pads.places == "fixed":
        return _planned(target, jack, brief.pads.stations.size, progress)
    most = _most_pads(target)
    first = 1
    if brief.pads.places == "hard points":
        first = min(fewest_hard_points(target, jack), most)
    _, largest = force_limits(target)
    if np.isfinite(largest):
        first = max(first, int(np.ceil(abs(target.net_plan.sums.force) / largest * (1 - 1e-9))))
    if brief.pads.places == "free":
        bounds = LineBounds(target, jack)
        return fewest_free(bounds, first, most, lambda count: _planned(target, jack, count, progress))
    best: PadPlan | Refusal | None = None
    for count in range(min(first, most), most + 1):
        plan = _planned(target, jack, count, progress)
        if isinstance(plan, PadPlan) and plan.proof.band_use <= 1:
            return plan
        if not isinstance(best, PadPlan) or (isinstance(plan, PadPlan) and plan.proof.band_use < best.proof.band_use):
            best = plan
    assert best is not None
    return best


def _most_pads(target: Target) -> int:
    brief = target.brief
    fit = most_that_fit(brief)
    most = MOST_PADS if fit is None else min(fit, MOST_PADS)
    if brief.pads.places == "hard points":
        most = min(most, usable_points(brief).size)
    least, _ = force_limits(target)
    total = abs(target.net_plan.sums.force)
    return max(1, min(most, int(total / least * (1 + 1e-9)))) if least > 0 else max(1, most)


def _plan(target: Target, jack: tuple[float, float], outcome: Outcome) -> PadPlan:
    """The plan with signs put back, judged at many stations, with remarks."""
    order = np.lexsort((outcome.y, outcome.x))
    x, y, force = outcome.x[order], outcome.y[order], outcome.force[order]
    use = error_rows(target, x, y, max(400, FINE * x.size)).use(x, y, force)
    share = shares(target, x, y)
    proof = Proof(
        band_use=use,
        band_use_least=float(min(outcome.use_least, use)),
        moment_error_least=float(outcome.moment_least),
        method=outcome.method,
        words=outcome.words,
        evenness=unevenness(force, share),
        evenness_before=float(outcome.evenness_before),
        band_use_found=float(max(min(outcome.use_found, use), min(outcome.use_least, use))),
    )
    findings: list[Finding] = [*doubts(outcome, use), *proof_remarks(proof)]
    on_one_line = torsion_on_one_line(target, x, y)
    if on_one_line is not None:
        findings.append(on_one_line)
    return PadPlan(
        target=target,
        x=x,
        y=y,
        force=sign_of(target) * force,
        share=sign_of(target) * share,
        jack_x=jack[0],
        jack_y=jack[1],
        may_move=target.brief.pads.places == "free",
        proof=proof,
        findings=numbered(findings),
    )
