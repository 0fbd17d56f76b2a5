"""From the target to the pads: where they sit and how hard each pulls."""

from __future__ import annotations

import numpy as np

from rigdesign.findings import Refusal, numbered
from rigdesign.pads.fixed import choose_fixed
from rigdesign.pads.forces import evenness, shares
from rigdesign.pads.free import FreePlaces
from rigdesign.pads.hard import HardPoints
from rigdesign.pads.limits import allowed_stretches, force_limits, most_that_fit, usable_points
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.pads.outcome import Outcome, Progress
from rigdesign.pads.path import COARSE, fewest_pads
from rigdesign.pads.refusals import for_the_count, unbalanced, whatever_the_count
from rigdesign.pads.remarks import doubts, proof_remarks
from rigdesign.pads.stair import fewest_steps
from rigdesign.pads.tube import build_tube
from rigdesign.target.model import Target

# "fewest" tries no more pads than this.
MOST_PADS = 200


def plan_pads(target: Target, count: int | None = None, progress: Progress | None = None) -> PadPlan | Refusal:
    """Choose the pads: least band use first, then forces as even as `ease` (or `aim = "even"`) allows.

    Parameters
    ----------
    target
        What the specimen must feel.
    count
        Number of pads; None takes the brief's, "fewest" included.
    progress
        Called with a fraction from 0 to 1 and words on what is being done.

    Returns
    -------
    The plan, with what is proven about it, or a `Refusal` that names the limit which leaves no pads at all.
    A plan whose band use is above 1 is still a plan: the best there is.
    """
    brief = target.brief
    if brief.specimen.is_surface:
        # imported late: a line rig has no use for mixed-integer programmes and geometry in plan
        from rigdesign.pads.surface.plan import plan_in_plan

        return plan_in_plan(target, count, progress)
    wanted = brief.pads.count if count is None else count
    jack_x = jack_place(target)
    refusal = whatever_the_count(target, jack_x)
    if refusal is not None:
        return refusal
    if wanted == "fewest":
        return _fewest(target, jack_x, progress)
    return _planned(target, jack_x, int(wanted), progress)


def jack_place(target: Target) -> float:
    """Where the jack stands [m]: the brief's place, the multiple of its step nearest to the resultant, or there."""
    rules = target.brief.jack
    if rules.at is not None:
        return rules.at
    resultant = target.net.first_moment / target.net.total if target.net.total else 0.0
    if rules.step is not None:
        return round(resultant / rules.step) * rules.step
    return resultant


def _planned(target: Target, jack_x: float, count: int, progress: Progress | None) -> PadPlan | Refusal:
    refusal = for_the_count(target, count)
    if refusal is not None:
        return refusal
    outcome = _choose(target, jack_x, count, progress)
    if outcome is None:
        return unbalanced(target, jack_x, count)
    return _plan(target, jack_x, outcome)


def _choose(target: Target, jack_x: float, count: int, progress: Progress | None) -> Outcome | None:
    places = target.brief.pads.places
    if places == "fixed":
        return choose_fixed(target, jack_x)
    if places == "hard points":
        return HardPoints(target, jack_x, usable_points(target.brief), count, progress).choose()
    return FreePlaces(target, jack_x, count, progress).choose()


def _fewest(target: Target, jack_x: float, progress: Progress | None) -> PadPlan | Refusal:
    """Plan with the fewest pads whose band use is at most 1, or the best plan with the most pads that there can be."""
    if target.brief.pads.places == "fixed":
        return _planned(target, jack_x, target.brief.pads.stations.size, progress)
    most = _most_pads(target)
    count = min(_fewest_possible(target, jack_x, most), most)
    best: PadPlan | Refusal | None = None
    while count <= most:
        plan = _planned(target, jack_x, count, progress)
        if isinstance(plan, PadPlan) and plan.proof.band_use <= 1:
            return plan
        if (
            best is None
            or isinstance(best, Refusal)
            or (isinstance(plan, PadPlan) and plan.proof.band_use < best.proof.band_use)
        ):
            best = plan
        count += 1
    assert best is not None
    return best


def _most_pads(target: Target) -> int:
    """Most pads that fit and that can all carry the least force; one at least, so that a refusal can say what binds."""
    fit = most_that_fit(target.brief)
    most = MOST_PADS if fit is None else min(fit, MOST_PADS)
    if target.brief.pads.places == "hard points":
        most = min(most, usable_points(target.brief).size)
    least, _ = force_limits(target)
    return max(1, min(most, int(abs(target.net.total) / least * (1 + 1e-9)))) if least > 0 else most


def _fewest_possible(target: Target, jack_x: float, most: int) -> int:
    """A number of pads that no arrangement within the bands and the largest force can go below."""
    brief = target.brief
    tube = build_tube(target, jack_x, min(most, 64), COARSE)
    stretches = allowed_stretches(brief)
    counts = [1]
    if tube.is_judged[0]:
        counts.append(fewest_pads(tube, float(stretches[0, 0]), float(stretches[-1, 1]), most) or most)
    if tube.is_judged[1]:
        counts.append(fewest_steps(tube, 1.0, stretches, most) or most)
    _, largest = force_limits(target)
    if np.isfinite(largest):
        counts.append(int(np.ceil(abs(target.net.total) / largest * (1 - 1e-9))))
    if brief.pads.places == "hard points":
        counts.append(HardPoints(target, jack_x, usable_points(brief), max(counts), None).fewest_possible())
    return max(counts)


def _plan(target: Target, jack_x: float, outcome: Outcome) -> PadPlan:
    """The plan with signs put back, judged on a fine tube, with remarks."""
    fine = build_tube(target, jack_x, outcome.x.size, COARSE, extra=outcome.x)
    use = float(fine.use(outcome.x, outcome.force))
    proof = Proof(
        band_use=use,
        band_use_least=float(min(outcome.use_least, use)),
        moment_error_least=float(outcome.moment_least),
        method=outcome.method,
        words=outcome.words,
        evenness=evenness(fine, outcome.x, outcome.force),
        evenness_before=float(outcome.evenness_before),
        band_use_found=float(max(min(outcome.use_found, use), min(outcome.use_least, use))),
    )
    return PadPlan(
        target=target,
        x=outcome.x,
        y=np.zeros(outcome.x.size),
        force=fine.sign * outcome.force,
        share=fine.sign * shares(fine, outcome.x),
        jack_x=jack_x,
        jack_y=0.0,
        may_move=target.brief.pads.places == "free",
        proof=proof,
        findings=numbered((*doubts(outcome, use), *proof_remarks(proof))),
    )
