"""Remarks on a target: what supports must hold, loads of both signs, and sizes that look like a slip.

Depends on the curves alone.  Thresholds are wide: a remark is worth reading only if it is rare.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from rigdesign.brief.model import Brief, InertiaLoad, InternalLoad, Load, Specimen
from rigdesign.display import show
from rigdesign.findings import Finding, Severity
from rigdesign.target.curve import Curve, Floats
from rigdesign.target.cuts import reactions_in_plan
from rigdesign.target.internal import reactions
from rigdesign.target.internal_table import stepped_curve
from rigdesign.target.model import Target
from rigdesign.target.peaks import Parts, signed_parts
from rigdesign.target.plan_load import ALONG_X, PlanLoad
from rigdesign.target.plan_loads import table_along_x
from rigdesign.target.plan_remarks import plan_remarks, torsion_remarks
from rigdesign.target.sums import Combined
from rigdesign.target.table_remarks import table_remarks
from rigdesign.words import STANDARD_GRAVITY

# Load of the other sign: below the first part of the whole it is not worth a word, below the second a note.
_OTHER_SIGN_LEAST, _OTHER_SIGN_SMALL = 0.001, 0.01
# A reaction below this part of the resultant is the rounding of a support that carries nothing.
_NO_REACTION = 1e-9
# Sizes of structural tests, from a model's rib to a large blade; common practice, drawn wide.
_SPANS = (0.02, 300.0)
_TOTALS = (1.0, 100e6)
_RUNNING = (0.1, 10e6)
_MASSES = (0.001, 20e3)
_LARGEST_FACTOR = 15.0
# Up to this many g along gravity, inertia is the specimen's dead load with its factor.
_DEAD_LOAD = 1.5
# One load this many times smaller than the largest is more often a slip of unit than a load.
_DWARFED = 2000.0
# More stretches than these are counted, not listed.
_FEW = 3


def remarks(target: Target) -> Iterator[Finding]:
    """Yield the findings of the target stage, not numbered yet: the gravest kinds first."""
    brief, total, gravity, net = target.brief, target.total, target.gravity, target.net
    curves = [part.along(ALONG_X).force for part in target.total_plan.parts]
    surface = brief.specimen.is_surface
    yield from _net_against_total(total, gravity, net)
    for number, load in enumerate(brief.loads, 1):
        if isinstance(load, InternalLoad):
            along_x = table_along_x(load, brief.specimen)
            yield from table_remarks(along_x, f"load {number}", brief.specimen.right)
            yield from torsion_remarks(load, f"load {number}", brief.specimen)
    yield from _other_sign(target, curves)
    yield from plan_remarks(target) if surface else _centroid(brief, total, net)
    yield from _supports(target)
    yield from _against_the_rest(brief.loads, curves, brief.specimen.gravity)
    yield from _sizes(brief, total, gravity)
    yield from _dwarfed(curves)


def along(force: float) -> str:
    """The direction of a force in words: "along +z" or "along −z"."""
    return "along +z" if force > 0 else "along −z"


def _remark(severity: Severity, what: str, text: str, value: str = "", limit: str = "", remedy: str = "") -> Finding:
    return Finding("target", severity, what, text, value, limit, remedy)


def _net_against_total(total: Curve, gravity: Curve, net: Curve) -> Iterator[Finding]:
    """Gravity brings more than the whole target, or all of it."""
    if net.total * total.total > 0:
        return
    text = (f"gravity alone brings more than the target: the target is {show(abs(total.total), 'force')} "
            f"{along(total.total)}, the specimen's weight {show(abs(gravity.total), 'force')} {along(gravity.total)}; "
            f"the pads would have to act {along(-total.total)}")  # fmt: skip
    remedy = (
        'check the units of the weight and the total; if both are right, test the other way up (gravity = "against" or '
        '"with"), or carry part of the weight by counterweights and leave it out of the weight table'
    )
    yield _remark("warning", "weight", text, show(net.total, "force"), f"pads that act {along(total.total)}", remedy)


def _other_sign(target: Target, curves: list[Curve]) -> Iterator[Finding]:
    """Stretches where what the pads bring acts against its own sum, a table of V and M judged by its rows alone."""
    brief = target.brief
    judged = [
        Combined((stepped_curve(load),), (load.times,)) if isinstance(load, InternalLoad) else curve
        for load, curve in zip(brief.loads, curves, strict=True)
    ]
    net = Combined((*judged, target.gravity), (*(1.0 for _ in judged), -1.0))
    parts = signed_parts(net, brief.specimen.left, brief.specimen.right)
    if not parts.force.size or net.total == 0:
        return
    sign = float(np.sign(net.total))
    other = parts.of_sign(-sign)
    amount = other.gross
    if amount <= _OTHER_SIGN_LEAST * parts.gross:
        return
    severity: Severity = "note" if amount <= _OTHER_SIGN_SMALL * parts.gross else "warning"
    brought = "the target" if brief.specimen.weight is None else "what the pads bring (the target less gravity)"
    text = (f"{brought} changes sign along the span: {show(amount, 'force')} of it acts {along(-sign)}, "
            f"{_places(other)}, against {show(parts.of_sign(sign).gross, 'force')} {along(sign)}; "
            "the pads of one tree all act one way and cannot follow it there")  # fmt: skip
    value = f"{show(amount / parts.gross, 'fraction')} of the load, both signs added up"
    remedy = (
        "if it is not meant, check the signs and the tables there; if it is, give each sign a rig and a jack of its "
        "own, hang the opposite loads as dead weights, or accept the error there"
    )
    yield _remark(severity, "target", text, value, "one sign all along", remedy)


def _places(parts: Parts) -> str:
    """The stretches in words: each one where they are few, else their number and how far they reach."""
    count = parts.force.size
    if count > _FEW:
        between = f"between {show(float(parts.start[0]), 'length')} and {show(float(parts.end[-1]), 'length')}"
        return f"on {count} stretches {between}"
    return " and ".join(_place(float(a), float(b)) for a, b in zip(parts.start, parts.end, strict=True))


def _place(start: float, end: float) -> str:
    if start == end:
        return f"at {show(start, 'length')}"
    return f"from {show(start, 'length')} to {show(end, 'length')}"


def _centroid(brief: Brief, total: Curve, net: Curve) -> Iterator[Finding]:
    """A resultant that acts beside the specimen: no jack with pads of one sign can stand there."""
    left, right = brief.specimen.left, brief.specimen.right
    for curve, what in ((total, "the target"), (net, "what the pads bring")):
        if curve.total == 0:
            continue
        place = curve.first_moment / curve.total
        if left <= place <= right:
            continue
        text = f"the resultant of {what} acts beside the specimen: its loads of both signs nearly cancel"
        limit = f"{show(left, 'length')} to {show(right, 'length')}"
        remedy = "check the signs of the loads; if they are right, give each sign a rig of its own"
        yield _remark("warning", "resultant", text, show(place, "length"), limit, remedy)
        return


def _supports(target: Target) -> Iterator[Finding]:
    """Supports that must do more than bear: act with the load, or hold the specimen down against it."""
    brief, total = target.brief, target.total
    specimen = brief.specimen
    at, force = support_forces(specimen, target.total_plan)
    if not at.size:
        return
    sign = float(np.sign(total.total))
    lifted = force * sign > _NO_REACTION * abs(total.total)
    for x, reaction in zip(at[lifted], force[lifted], strict=True):
        yield _with_the_load(brief, float(x), float(reaction))
    down = float(specimen.gravity)
    if not lifted.any() and sign != down:
        _, dead = support_forces(specimen, target.gravity_plan)
        yield _held_down(brief, at, force, dead)


def support_forces(specimen: Specimen, load: PlanLoad) -> tuple[Floats, Floats]:
    """Return stations (k,) [m] and forces (k,) [N] of the supports' answer to a load; k = 0 for a cantilever."""
    if specimen.is_surface:
        answer = reactions_in_plan(specimen, *load.sums)
        return answer.x, answer.force
    curve = load.along(ALONG_X).force
    return reactions(specimen, curve.total, curve.first_moment)


def _with_the_load(brief: Brief, x: float, reaction: float) -> Finding:
    """One support: the load on the far side of the other one turns the specimen off it."""
    specimen = brief.specimen
    bears = reaction * specimen.gravity < 0
    other = next(s for s in specimen.supports if s != x)
    text = f"the support at {show(x, 'length')} must act {along(reaction)}, the same way as the load: "
    if bears:
        text += (
            "the load beyond the other support presses the specimen onto it, and a tie that only holds down goes slack"
        )
        remedy = (
            f"let it bear as well as hold down, or move the support at {show(other, 'length')} towards the resultant"
        )
    else:
        text += "the specimen lifts off a plain rest"
        remedy = f"hold it down there, or move the support at {show(other, 'length')} towards the resultant"
    if specimen.weight is None:
        text += "; the specimen's own weight is not in the brief and comes on top"
        remedy += ", or give the specimen's weight if that is what holds it"
    else:
        text += ", the specimen's weight counted"
    limit = "a reaction against the load at both supports"
    return _remark("warning", f"support at {show(x, 'length')}", text, show(abs(reaction), "force"), limit, remedy)


def _held_down(brief: Brief, at: Floats, force: Floats, dead: Floats) -> Finding:
    """Both supports hold the specimen against a load that lifts it."""
    specimen = brief.specimen
    forces = " and ".join(
        f"{show(abs(float(f)), 'force')} at {show(float(x), 'length')}" for x, f in zip(at, force, strict=True)
    )
    text = f"the target lifts the specimen off its supports, which must hold it down with {forces}"
    if specimen.weight is not None:
        text += ", its weight counted"
        part = float(np.min(dead / (dead - force)))
        if 0 < part < 1:
            text += f"; the first support lets go at {show(part, 'fraction')} of the pads' load"
    remedy = "tie both supports down for the peak of the test, with the play taken out before the zero readings"
    return _remark("note", "supports", text, "", "", remedy)


def _against_the_rest(loads: tuple[Load, ...], curves: list[Curve], gravity: int) -> Iterator[Finding]:
    """One load against all others, and inertia that adds to the load instead of relieving it."""
    totals = np.array([curve.total for curve in curves])
    for number, (load, own) in enumerate(zip(loads, totals, strict=True), 1):
        rest = float(totals.sum() - own)
        if isinstance(load, InertiaLoad):
            if own * rest > 0 and not 0 < load.factor * load.times * gravity <= _DEAD_LOAD:
                text = (f"the inertia acts {along(own)}, the same way as the other loads, and adds to them; "
                        "inertia mostly relieves")  # fmt: skip
                remedy = "if relief is meant, turn the sign of the load factor"
                value, limit = show(float(own), "force"), f"{show(rest, 'force')} of all others"
                yield _remark("note", f"load {number}", text, value, limit, remedy)
            continue
        others = [t for i, t in enumerate(totals, 1) if i != number and not isinstance(loads[i - 1], InertiaLoad)]
        if len(others) < 1 or own == 0 or any(own * t >= 0 for t in others):
            continue
        if len(others) == 1 and abs(own) > abs(others[0]):
            continue  # of two opposite loads the smaller one is named
        text = f"it acts {along(own)}, against all other loads: a load of its own, or a slip of sign"
        remedy = "if it is a slip, turn the sign of its total or table (times = -1)"
        limit = f"{show(float(sum(others)), 'force')} of the others"
        yield _remark("note", f"load {number}", text, show(float(own), "force"), limit, remedy)


def _sizes(brief: Brief, total: Curve, gravity: Curve) -> Iterator[Finding]:
    """Lengths, forces, masses and load factors outside anything that is tested on a whiffletree."""
    specimen = brief.specimen
    span = specimen.right - specimen.left
    yield from _outside(span, _SPANS, "length", "specimen", "the span", "the units of its ends")
    yield from _outside(abs(total.total), _TOTALS, "force", "target", "its total", "the units of the loads")
    if _TOTALS[0] <= abs(total.total) <= _TOTALS[1] and _SPANS[0] <= span <= _SPANS[1]:
        mean = abs(total.total) / span
        yield from _outside(mean, _RUNNING, "running load", "target", "its mean running load", "the units of the loads")
    if specimen.weight is not None:
        heavy = abs(gravity.total)
        mass = heavy / STANDARD_GRAVITY / span
        yield from _outside(
            mass, _MASSES, "mass per length", "weight", "the mean mass per length", "the weight's units"
        )
        if gravity.total * total.total < 0 and heavy > 2.0 * abs(total.total):
            text = (f"the specimen weighs {heavy / abs(total.total):.1f} times the target, and the pads must lift it "
                    "before they bring any of the target")  # fmt: skip
            remedy = "check the units of the weight; if they are right, consider the test the other way up"
            yield _remark("warning", "weight", text, show(heavy, "force"), show(abs(total.total), "force"), remedy)
    for number, load in enumerate(brief.loads, 1):
        if isinstance(load, InertiaLoad) and abs(load.factor * load.times) > _LARGEST_FACTOR:
            text = "an unusually large load factor: inertia counts in g, not in m/s²"
            value, limit = f"{load.factor * load.times:g} g", f"up to {_LARGEST_FACTOR:g} g as a rule"
            yield _remark("note", f"load {number}", text, value, limit, "check the factor")


def _outside(
    value: float, limits: tuple[float, float], kind: str, what: str, name: str, check: str
) -> Iterator[Finding]:
    low, high = limits
    if low <= value <= high:
        return
    text = f"{name} is unusually {'small' if value < low else 'large'}: a slip of unit?"
    limit = f"{show(low, kind)} to {show(high, kind)} as a rule"
    yield _remark("warning", what, text, show(value, kind), limit, f"check {check}")


def _dwarfed(curves: list[Curve]) -> Iterator[Finding]:
    """A load beside which the largest one is thousands of times bigger."""
    totals = np.abs([curve.total for curve in curves])
    largest = int(np.argmax(totals))
    for i in np.flatnonzero((totals > 0) & (totals * _DWARFED < totals[largest])):
        text = (
            f"it is {totals[largest] / totals[i]:.0f} times smaller than load {largest + 1}: a slip of unit, N for kN?"
        )
        limit = f"load {largest + 1} is {show(float(totals[largest]), 'force')}"
        remedy = "check the units of both loads"
        yield _remark("note", f"load {i + 1}", text, show(float(totals[i]), "force"), limit, remedy)
