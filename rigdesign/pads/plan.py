"""From the target to the pads: where they sit and how hard each pulls."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.findings import Finding, Refusal, numbered
from rigdesign.pads.fixed import choose_fixed
from rigdesign.pads.forces import evenness, shares
from rigdesign.pads.free import FreePlaces
from rigdesign.pads.hard import HardPoints, usable_points
from rigdesign.pads.limits import allowed_stretches, force_limits, least_pitch, most_that_fit
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.pads.outcome import Outcome, Progress
from rigdesign.pads.path import COARSE, fewest_pads
from rigdesign.pads.stair import fewest_steps
from rigdesign.pads.tube import build_tube
from rigdesign.target.model import Target
from rigdesign.units import show

# "fewest" tries no more pads than this.
MOST_PADS = 200
# A gap between what was found and what is proven is remarked on above this.
GAP_REMARK = 0.005


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
    wanted = brief.pads.count if count is None else count
    jack_x = jack_place(target)
    refusal = _no_place(target, jack_x)
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
    refusal = _too_many_or_weak(target, count)
    if refusal is not None:
        return refusal
    outcome = _choose(target, jack_x, count, progress)
    if outcome is None:
        return _unbalanced(target, jack_x, count)
    return _plan(target, jack_x, outcome)


def _choose(target: Target, jack_x: float, count: int, progress: Progress | None) -> Outcome | None:
    places = target.brief.pads.places
    if places == "fixed":
        return choose_fixed(target, jack_x)
    if places == "hard points":
        return HardPoints(target, jack_x, usable_points(target), count, progress).choose()
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
    fit = most_that_fit(target.brief)
    most = MOST_PADS if fit is None else min(fit, MOST_PADS)
    if target.brief.pads.places == "hard points":
        most = min(most, usable_points(target).size)
    least, _ = force_limits(target.brief)
    return min(most, int(abs(target.net.total) / least * (1 + 1e-9))) if least > 0 else most


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
    _, largest = force_limits(brief)
    if np.isfinite(largest):
        counts.append(int(np.ceil(abs(target.net.total) / largest * (1 - 1e-9))))
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
        force=fine.sign * outcome.force,
        share=fine.sign * shares(fine, outcome.x),
        jack_x=jack_x,
        may_move=target.brief.pads.places == "free",
        proof=proof,
        findings=numbered(_remarks(proof)),
    )


def _remarks(proof: Proof) -> list[Finding]:
    findings = []
    if proof.gap > GAP_REMARK:
        findings.append(
            Finding(
                "pads",
                "note",
                "pads",
                f"the band use found is {proof.gap:.1%} above the proven least",
                value=f"{proof.band_use_found:.4g}",
                limit=f"{proof.band_use_least:.4g}",
                remedy="a better arrangement may exist, by at most this much",
            )
        )
    return findings


# -- matters of limits -------------------------------------------------------------------------------------------------


def _no_place(target: Target, jack_x: float) -> Refusal | None:
    """Refusals that no number of pads can cure."""
    brief = target.brief
    if target.net.total * target.resultant <= 0:
        pulls = show(target.net.total, "force")
        return Refusal(
            "pads",
            "gravity already brings more than the target asks for, so the pads would have to act the other way",
            limit=f"target {show(target.resultant, 'force')}, gravity brings {show(target.gravity.total, 'force')}",
            best=f"the pads would have to bring {pulls}",
            remedy="turn the specimen over (gravity), raise the target, or take weight off with counterweights",
        )
    stretches = allowed_stretches(brief)
    if not stretches.size or (brief.pads.places == "hard points" and not usable_points(target).size):
        return Refusal(
            "pads",
            "no pad fits on the specimen clear of the keep-outs",
            limit=f"footprint {show(brief.pads.length, 'length')} long",
            best="0 pads fit",
            remedy="shorten the footprint or the keep-outs",
        )
    x = usable_points(target) if brief.pads.places == "hard points" else brief.pads.stations
    start, end = (float(x[0]), float(x[-1])) if x.size else (float(stretches[0, 0]), float(stretches[-1, 1]))
    if not start <= jack_x <= end:
        return Refusal(
            "pads",
            "the jack stands off the stretch where pads can sit, so pads of one sign cannot balance it",
            limit=f"pads from {show(start, 'length')} to {show(end, 'length')}",
            best=f"jack at {show(jack_x, 'length')}",
            remedy="move the jack, or let pads sit on both sides of it",
        )
    return None


def _too_many_or_weak(target: Target, count: int) -> Refusal | None:
    """Refusals that depend on the number of pads."""
    brief, total = target.brief, abs(target.net.total)
    places = usable_points(target).size if brief.pads.places == "hard points" else brief.pads.stations.size
    if brief.pads.places != "free" and (count > places or (brief.pads.places == "fixed" and count != places)):
        return Refusal(
            "pads",
            f"{count} pads are asked for, but there are {places} usable {_kind(brief)}",
            limit=f"{places} {_kind(brief)}, keep-outs and the footprint considered",
            best=f"{places} pads",
            remedy=f"ask for {places} pads{'' if brief.pads.places == 'fixed' else ' or fewer'}, or add places",
        )
    fit = most_that_fit(brief)
    if brief.pads.places == "free" and fit is not None and count > fit:
        return Refusal(
            "pads",
            f"{count} pads do not fit side by side",
            limit=f"footprint and gap take {show(least_pitch(brief), 'length')} a pad",
            best=f"{fit} pads fit",
            remedy="use fewer pads, a shorter footprint or a smaller gap",
        )
    least, largest = force_limits(brief)
    if count * largest < total * (1 - 1e-9):
        return Refusal(
            "pads",
            f"{count} pads are too weak for the total",
            limit=f"largest pad force {show(largest * brief.peak, 'force')} at the peak of the test",
            best=f"{show(count * largest, 'force')} of {show(total, 'force')} at the brief's load",
            remedy=f"use at least {int(np.ceil(total / largest * (1 - 1e-9)))} pads, or larger ones",
        )
    if count * least > total * (1 + 1e-9):
        return Refusal(
            "pads",
            f"{count} pads cannot all carry the least force",
            limit=f"least pad force {show(least * brief.peak, 'force')} at the peak of the test",
            best=f"{show(total, 'force')} to share among {count} pads",
            remedy=f"use at most {int(total / least * (1 + 1e-9))} pads, or lower least_force",
        )
    return None


def _kind(brief: Brief) -> str:
    return "fixed places" if brief.pads.places == "fixed" else "hard points"


def _unbalanced(target: Target, jack_x: float, count: int) -> Refusal:
    """No forces within the limits balance the target: say which of the pad limits would have to give way."""
    brief = target.brief
    least, largest = force_limits(brief)
    asked = []
    if np.isfinite(largest):
        asked.append(f"largest pad force {show(largest * brief.peak, 'force')}")
    if least > 0:
        asked.append(f"least pad force {show(least * brief.peak, 'force')}")
    if least_pitch(brief) > 0:
        asked.append(f"footprint and gap {show(least_pitch(brief), 'length')}")
    if brief.pads.keep_out:
        asked.append("keep-outs")
    limits = ", ".join(asked) or "pads of one sign at these places"
    return Refusal(
        "pads",
        f"no forces of {count} pads within the limits have the target's sum and centre",
        limit=limits,
        best=f"{show(target.net.total, 'force')} at {show(jack_x, 'length')} from {count} pads of one sign",
        remedy="widen the limits one at a time, change the number of pads, or move places towards the resultant",
    )
