"""The answer in sentences: what the check says about a rig, largest things first.

Every number comes from the check or, where it is said to be proven, from the pads' proof.
"""

from __future__ import annotations

from rigdesign.checks.model import Check, RegionVerdict
from rigdesign.checks.text import NOT_PROVEN, percent
from rigdesign.display import System, counted, show
from rigdesign.findings import Finding, Refusal
from rigdesign.target.bands import Quantity
from rigdesign.words import LOAD_CELL_FLOOR

CAUTION = (
    "The check takes levers and links as rigid, weightless and free of friction; strength, clearances and deflections "
    "are not checked. Before anything is built or loaded from these files, have it reviewed by a licensed engineer "
    "under the codes and safety rules that hold where you are."
)

MOST_REASONS = 3
"""So many failures apart from the bands are named in the verdict."""

_AT_ONE_PLACE = 1e-6  # [m]: far below what a drawing or a survey can tell


def answer(check: Check, system: System = "SI") -> list[str]:
    """Return the sentences on a checked rig: verdict, errors, what is proven, jack, and what a load cell sees."""
    lines = [verdict(check)]
    lines += [error_line(check, "moment", system), error_line(check, "shear", system)]
    lines += [_local_line(check), _proven_line(check), _search_line(check), _hand_line(check), _even_line(check)]
    lines += [_jack_line(check, system), _floor_line(check)]
    return [line for line in lines if line]


def verdict(check: Check) -> str:
    """The verdict in one sentence, with what binds where a rig is not accepted."""
    pads, levers = check.rig.plan.n_pads, sum(len(tree.pieces) for tree in check.rig.trees)
    size = f"{counted(pads, 'pad')} on {counted(levers, 'lever')}"
    use = f"the largest error takes {percent(check.band_use)} of its band"
    if check.accepted:
        judged = use if any(region.use is not None for region in check.regions) else "no band was asked for"
        return f"Accepted: {size}; {judged}."
    broken = [region for region in check.regions if region.accepted is False]
    failures = [finding for finding in check.findings if finding.severity == "failure"]
    reasons = [
        f"{region.quantity} over {region.name} takes {percent(region.use or 0.0)} of its band" for region in broken
    ]
    # what breaks a band is a finding of the statics as well, and said already
    others = [finding for finding in failures if not (broken and finding.stage == "statics")]
    reasons += [f"{finding.object}: {finding.text.rstrip('.')} ({finding.name})" for finding in others[:MOST_REASONS]]
    if len(others) > MOST_REASONS:
        reasons.append(f"{len(others) - MOST_REASONS} more among the findings")
    return f"Not accepted: {size}; " + "; ".join(reasons) + "."


def _whole(check: Check, quantity: Quantity) -> RegionVerdict:
    """The row over the whole span, which comes first."""
    return next(region for region in check.regions if region.quantity == quantity)


def error_line(check: Check, quantity: Quantity, system: System = "SI") -> str:
    """The largest under- and over-test of a quantity, in per cent of the peak of the target, and where."""
    target = check.rig.plan.target
    peak = target.moment_peak if quantity == "moment" else target.shear_peak
    row = _whole(check, quantity)
    sides = []
    for size, x, words in ((row.under, row.under_x, "under-test"), (row.over, row.over_x, "over-test")):
        if size > 1e-9 * peak:
            sides.append(f"{percent(size / peak)} {words} at x = {show(x, 'length', system)}")
        else:
            sides.append(f"no {words}")
    kind = "force" if quantity == "shear" else "moment"
    judged = "not judged" if row.use is None else f"band use {row.use:.3f}"
    return (
        f"Largest errors of the {quantity}, per cent of peak target {quantity} "
        f"({show(peak, kind, system)}): {sides[0]}, {sides[1]}; {judged}."
    )


def _local_line(check: Check) -> str:
    return (
        "Per cent of the local value, where that is at least 5 % of the peak: "
        f"moment {percent(check.moment_error_local)}, shear {percent(check.shear_error_local)}."
    )


def _proven_line(check: Check) -> str:
    proof = check.rig.plan.proof
    if proof.method == NOT_PROVEN:
        return "Nothing is proven here: the rig was designed for another target."
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


def _search_line(check: Check) -> str:
    words = [check.rig.plan.proof.words, check.rig.words]
    return "Search: " + "; ".join(word.rstrip(".") for word in words if word) + "."


def _hand_line(check: Check) -> str:
    if check.hand_moment <= 0:
        return ""
    return (
        f"By hand, {counted(check.rig.plan.n_pads, 'strip')} of equal width lumped at the centroid, wherever that lies "
        "and without drilling, would give "
        f"{percent(check.hand_moment)} for the moment and {percent(check.hand_shear)} for the shear; "
        f"this rig gives {percent(check.moment_error_peak)} and {percent(check.shear_error_peak)}."
    )


def _even_line(check: Check) -> str:
    proof = check.rig.plan.proof
    text = f"No pad's force differs by more than {percent(check.evenness)} from its share of the curve"
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
    peak = check.rig.plan.target.brief.peak
    top = f", {show(abs(tree.force) * peak, 'force', system)} at the peak of the test" if peak != 1.0 else ""
    way = "up (+z)" if tree.force > 0 else "down (−z)"
    if abs(check.jack_offset) < _AT_ONE_PLACE:
        place = "at the resultant of what the pads bring"
    else:
        side = "outboard" if check.jack_offset > 0 else "inboard"
        place = f"{show(abs(check.jack_offset), 'length', system)} {side} of the resultant of what the pads bring"
    return f"Jack 1 acts {way} with {force}{top}, at x = {at}, {place}."


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
