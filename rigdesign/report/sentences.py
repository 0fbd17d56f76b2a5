"""The answer in sentences: what the check says about a rig, largest things first.

Every number comes from the check or, where it is said to be proven, from the pads' proof.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from rigdesign.brief.model import Quantity
from rigdesign.checks.model import Check, RegionVerdict
from rigdesign.checks.regions import WHOLES
from rigdesign.checks.surface.remarks import offset_words
from rigdesign.checks.text import NOT_PROVEN, UNIT_KIND, percent
from rigdesign.display import System, counted, show
from rigdesign.findings import Finding, Refusal
from rigdesign.target.cuts import ACROSS
from rigdesign.words import LOAD_CELL_FLOOR, ROUNDING

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

CAUTION = (
    "The check takes levers and links as rigid, weightless and free of friction; strength, clearances and deflections "
    "are not checked. Before anything is built or loaded from these files, have it reviewed by a licensed engineer "
    "under the codes and safety rules that hold where you are."
)

MOST_REASONS = 3
"""So many failures apart from the bands are named in the verdict."""

_AT_ONE_PLACE = 1e-6  # [m]: far below what a drawing or a survey can tell


def answer(result: Check | HardwareCheck, system: System = "SI") -> list[str]:
    """Return the sentences on a checked rig: verdict, errors, what is proven, jack, and what a load cell sees.

    Those on its hardware are `sentences_hardware.hardware_answer`'s; the verdict is on both.
    """
    check = result if isinstance(result, Check) else result.check
    lines = [verdict(result)]
    quantities = [row.quantity for row in check.regions if row.name in WHOLES and _is_told(row)]
    # the moment first: it is what a test is judged by
    quantities.sort(key=lambda quantity: quantity != "moment")
    lines += [error_line(check, quantity, system) for quantity in quantities]
    lines += [_local_line(check), _share_line(check, system), _proven_line(check), _search_line(check)]
    lines += [_hand_line(check), _even_line(check), *_plan_lines(check, system), _jack_line(check, system)]
    lines += [_floor_line(check)]
    return [line for line in lines if line]


def _is_told(row: RegionVerdict) -> bool:
    """Whether the answer has a sentence on it: what is cut across only where it is judged."""
    return row.quantity not in ACROSS or row.use is not None


def _is_surface(check: Check) -> bool:
    return check.rig.plan.target.brief.specimen.is_surface


def verdict(result: Check | HardwareCheck) -> str:
    """The verdict in one sentence, with what binds where a rig is not accepted."""
    check = result if isinstance(result, Check) else result.check
    size = f"{counted(check.rig.plan.n_pads, 'pad')} on {pieces_words(check)}"
    use = f"the largest error takes {percent(check.band_use)} of its band"
    if result.accepted:
        judged = use if any(region.use is not None for region in check.regions) else "no band was asked for"
        steel = (
            "" if isinstance(result, Check) else f", the most used member {percent(result.utilisation)} of its limit"
        )
        return f"Accepted: {size}; {judged}{steel}."
    broken = [region for region in check.regions if region.accepted is False]
    failures = [finding for finding in result.findings if finding.severity == "failure"]
    reasons = [
        f"{region.quantity} over {region.name} takes {_beyond(region.use or 0.0)} of its band" for region in broken
    ]
    # what breaks a band is a finding of the statics as well, and said already
    said = {region.name for region in broken} if _is_surface(check) else None
    others = [
        finding
        for finding in failures
        if not (broken and finding.stage == "statics" and (said is None or finding.object in said))
    ]
    # the first clause says what is wrong; the rest stands among the findings
    reasons += [
        f"{finding.object}: {finding.text.split(';')[0].rstrip('.')} ({finding.name})"
        for finding in others[:MOST_REASONS]
    ]
    if len(others) > MOST_REASONS:
        reasons.append(f"{len(others) - MOST_REASONS} more among the findings")
    return f"Not accepted: {size}; " + "; ".join(reasons) + "."


def _beyond(use: float) -> str:
    """A band use above 1 in per cent, never such that it reads as if the band were kept.

    >>> _beyond(1.186), _beyond(1.0003)
    ('119 %', 'a little more than 100 %')
    """
    return percent(use) if percent(use) != percent(1.0) else f"a little more than {percent(1.0)}"


def pieces_words(check: Check) -> str:
    """How many levers, and plates where there are any: "9 levers and 2 plates"."""
    pieces = [piece for tree in check.rig.trees for piece in tree.pieces]
    plates = sum(piece.kind == "plate" for piece in pieces)
    levers = counted(len(pieces) - plates, "lever")
    if not plates:
        return levers
    return f"{levers} and {counted(plates, 'plate')}" if plates < len(pieces) else counted(plates, "plate")


def _whole(check: Check, quantity: Quantity) -> RegionVerdict:
    """The row over the whole span, which comes first."""
    return next(region for region in check.regions if region.quantity == quantity)


def error_line(check: Check, quantity: Quantity, system: System = "SI") -> str:
    """The largest under- and over-test of a quantity, in per cent of the peak of the target, and where."""
    errors, row = check.errors[quantity], _whole(check, quantity)
    name = "y" if quantity in ACROSS else "x"
    sides = []
    for size, at, words in ((row.under, row.under_x, "under-test"), (row.over, row.over_x, "over-test")):
        if size > 1e-9 * errors.reference:
            sides.append(f"{percent(size / errors.reference)} {words} at {name} = {show(at, 'length', system)}")
        else:
            sides.append(f"no {words}")
    judged = "not judged" if row.use is None else f"band use {row.use:.3f}"
    return (
        f"Largest errors of the {quantity}, per cent of {errors.of} "
        f"({show(errors.reference, UNIT_KIND[quantity], system)}): {sides[0]}, {sides[1]}; {judged}."
    )


def _local_line(check: Check) -> str:
    locals_ = [("moment", check.moment_error_local), ("shear", check.shear_error_local)]
    if "torsion" in check.errors and (torsion := check.errors["torsion"].local) is not None:
        locals_.append(("torsion", torsion))
    said = ", ".join(f"{quantity} {percent(error)}" for quantity, error in locals_)
    return f"Per cent of the local value, where that is at least 5 % of the peak: {said}."


def _share_line(check: Check, system: System) -> str:
    """How far a panel's pads are from their tributary shares, beside what is allowed."""
    accept = check.rig.plan.target.brief.acceptance
    if accept.share is None or check.share_error is None:
        return ""
    k = check.uneven_pad - 1
    force, share = float(check.statics.pad_force[k]), float(check.share_of_curve[k])
    kept = "within" if check.share_error <= accept.share * (1 + 1e-9) else "beyond"
    default = " (the default)" if accept.share_defaulted else ""
    return (
        f"Pad by pad: pad {check.uneven_pad} is farthest from its tributary share, with {show(force, 'force', system)} "
        f"for {show(share, 'force', system)}, {percent(check.share_error)} off, {kept} the {percent(accept.share)} "
        f"allowed{default}."
    )


def _plan_lines(check: Check, system: System) -> list[str]:
    """The target's centre in plan, and what hangs the pads."""
    if not _is_surface(check):
        return []
    target, rig = check.rig.plan.target, check.rig
    x, y = (show(at if abs(at) > ROUNDING else 0.0, "length", system) for at in (target.centroid, target.centroid_y))
    tiers = max((piece.tier for tree in rig.trees for piece in tree.pieces), default=0)
    return [
        f"The target's resultant, {show(target.resultant, 'force', system)}, acts at x = {x}, y = {y}; "
        f"{counted(rig.plan.n_pads, 'pad')} bring it by {pieces_words(check)} in {counted(tiers, 'tier')}."
    ]


def _proven_line(check: Check) -> str:
    proof = check.rig.plan.proof
    if proof.method == NOT_PROVEN:
        return "Nothing is proven here: the rig was designed for another target."
    if proof.band_use_least <= 0 < proof.band_use_found:
        return _unproven_line(check)
    gap = f"the best found is {percent(proof.gap)} above that" if proof.gap > 5e-4 else "the best found reaches that"
    if proof.band_use > proof.band_use_found * (1 + 5e-4):
        gap += f", {percent(proof.band_use / proof.band_use_found - 1)} more is given up for even forces"
    drilled = check.band_use / proof.band_use if proof.band_use > 0 else 1.0
    below = ""
    if check.band_use < proof.band_use_least * (1 - 1e-6):
        below = ", below the bound, which holds for the resultant met exactly and every limit kept, before drilling"
    least = f"no arrangement of so many pads under these rules can go below a band use of {proof.band_use_least:.3f}"
    return (
        f"Proven ({proof.method}): {least}; {gap}, and drilling takes it to {drilled:.3f} times the plan's{below}. "
        f"The moment's error alone cannot go below {percent(proof.moment_error_least)} of peak target moment."
    )


def _unproven_line(check: Check) -> str:
    """Where the bound is zero it says nothing, and a gap over it has no size."""
    proof = check.rig.plan.proof
    given = ""
    if proof.band_use > proof.band_use_found * (1 + 5e-4):
        given = f", {percent(proof.band_use / proof.band_use_found - 1)} more is given up for even forces"
    drilled = f"{check.band_use / proof.band_use:.3f}" if proof.band_use > 0 else "1.000"
    return (
        f"Nothing is proven here of how small the band use of so many pads could be ({proof.method}: no bound above "
        f"zero); the least found is {proof.band_use_found:.3f}{given}, and drilling takes it to {drilled} times the "
        "plan's."
    )


def _search_line(check: Check) -> str:
    words = [check.rig.plan.proof.words, check.rig.words]
    return "Search: " + "; ".join(word.rstrip(".") for word in words if word) + "."


def _hand_line(check: Check) -> str:
    if check.hand_moment is None or check.hand_shear is None or check.hand_moment <= 0:
        return ""
    return (
        f"By hand, {counted(check.rig.plan.n_pads, 'strip')} of equal width lumped at the centroid, wherever that lies "
        "and without drilling, would give "
        f"{percent(check.hand_moment)} for the moment and {percent(check.hand_shear)} for the shear; "
        f"this rig gives {percent(check.moment_error_peak)} and {percent(check.shear_error_peak)}."
    )


def _even_line(check: Check) -> str:
    proof = check.rig.plan.proof
    share = "tributary share" if _is_surface(check) else "share of the curve"
    text = f"No pad's force differs by more than {percent(check.evenness)} from its {share}"
    if proof.evenness_before > proof.evenness * 1.005:
        text += (
            f" ({percent(proof.evenness)} before drilling, "
            f"{percent(proof.evenness_before)} before the forces were made even)"
        )
    return text + "."


def _jack_line(check: Check, system: System) -> str:
    tree = check.rig.trees[0]
    at = show(tree.jack.x, "length", system)
    force = show(abs(tree.force), "force", system)
    peak = check.rig.plan.target.pads_peak
    top = f", {show(abs(tree.force) * peak, 'force', system)} at the peak of the test" if peak != 1.0 else ""
    way = "up (+z)" if tree.force > 0 else "down (−z)"
    at = f"x = {at}, y = {show(tree.jack.y, 'length', system)}" if _is_surface(check) else f"x = {at}"
    return f"Jack 1 acts {way} with {force}{top}, at {at}, {_jack_place(check, system)}."


def _jack_place(check: Check, system: System) -> str:
    if abs(check.jack_offset) < _AT_ONE_PLACE and abs(check.jack_offset_y) < _AT_ONE_PLACE:
        return "at the resultant of what the pads bring"
    if _is_surface(check):
        return f"{offset_words(check, system)} of the resultant of what the pads bring"
    side = "outboard" if check.jack_offset > 0 else "inboard"
    return f"{show(abs(check.jack_offset), 'length', system)} {side} of the resultant of what the pads bring"


def _floor_line(check: Check) -> str:
    floor = percent(LOAD_CELL_FLOOR)
    if check.moment_error_peak < LOAD_CELL_FLOOR:
        return f"The moment's error is below what a load cell can see ({floor} of reading): more pads would not show."
    return f"A load cell cannot see less than {floor} of its reading."


def finding_lines(findings: tuple[Finding, ...]) -> list[str]:
    """Each finding as one paragraph: name, severity, object, text, value, limit, what to do."""
    lines = []
    for finding in findings:
        text = f"{finding.name} ({finding.severity}), {finding.object}: {finding.text.rstrip('.')}"
        text += f"; {finding.value}" if finding.value else ""
        text += f" (limit {finding.limit})" if finding.limit else ""
        lines.append(text + (f"; {finding.remedy.rstrip('.')}." if finding.remedy else "."))
    return lines


def refusal_lines(refusal: Refusal) -> list[str]:
    """Why there is no rig, what binds, the best that was found, and what would help."""
    lines = [f"No rig ({refusal.stage}): {refusal.text.rstrip('.')}."]
    for name, text in (
        ("What binds", refusal.limit),
        ("Best found", refusal.best),
        ("What would help", refusal.remedy),
    ):
        if text:
            lines.append(f"{name}: {text.rstrip('.')}.")
    return lines
