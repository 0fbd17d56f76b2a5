"""Remarks of the stage "practice": the limits of the brief and what the trade is used to.

Pad forces and pressures are held to their limits at the peak of the test.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator

import numpy as np

from rigdesign.brief.model import LeverRules
from rigdesign.checks.measures import length, ratio, reaches
from rigdesign.checks.model import Check
from rigdesign.checks.remarks_places import failure, place_remarks, worst_pad
from rigdesign.checks.text import NOT_PROVEN, also, percent
from rigdesign.display import show
from rigdesign.findings import Finding
from rigdesign.levers.model import Piece
from rigdesign.target.curve import Floats

USUAL_RATIO = 4.0  # common practice: 4 is accepted, above 5 avoided
IDLE_PAD = 0.05  # of the mean pad force: such a pad is hardware for nothing
NEAR_PIVOT = 0.032  # [m] from pivot to hole: four diameters of an 8 mm hole, common practice
COSTLY_DRILLING, COSTLY_USE = 1.2, 0.5  # drilling is remarked on where it raises the band use so much, to above this
LIMIT_SLACK = 2e-9  # of a limit: a lever that was built right at it must not fail by rounding
FORCE_SLACK = 1e-9  # of the limit: nor a pad


def practice_remarks(check: Check) -> Iterator[Finding]:
    """Yield the remarks of this stage, not numbered yet, in a fixed order."""
    yield from _pad_forces(check)
    # in plan the stage "space" says where footprints may be
    yield from () if check.rig.plan.target.brief.specimen.is_surface else place_remarks(check)
    yield from _levers(check)
    yield from _idle_pads(check)
    yield from _pushing(check)
    yield from _drilling(check)
    yield from _aim(check)


def pressures(check: Check) -> Floats | None:
    """Return the pressure under each pad [Pa] at the brief's load, (n_pads,); None where the pads have no width."""
    rules = check.rig.plan.target.brief.pads
    if rules.width is None or rules.length <= 0:
        return None
    return np.asarray(np.abs(check.statics.pad_force) / (rules.length * rules.width))


def _pad_forces(check: Check) -> Iterator[Finding]:
    brief = check.rig.plan.target.brief
    rules, top = brief.pads, check.rig.plan.target.pads_peak
    peak = f"at {percent(brief.peak)} of the brief's load, the peak of the test"
    force = np.abs(check.statics.pad_force) * top
    if (force > rules.largest_force * (1 + FORCE_SLACK)).any():
        worst, others = worst_pad(force - rules.largest_force * (1 + FORCE_SLACK))
        yield failure(
            f"pad {worst + 1}",
            f"the pad force is above largest_force, {peak}{others}",
            show(float(force[worst]), "force"),
            show(rules.largest_force, "force"),
            "more pads, or pads that bear more",
        )
    if (force < rules.least_force * (1 - FORCE_SLACK)).any():
        worst, others = worst_pad(rules.least_force * (1 - FORCE_SLACK) - force)
        yield failure(
            f"pad {worst + 1}",
            f"the pad force is below least_force, {peak}{others}",
            show(float(force[worst]), "force"),
            show(rules.least_force, "force"),
            "fewer pads, or other places for them",
        )
    pressure = pressures(check)
    if pressure is not None and (pressure * top > rules.largest_pressure * (1 + FORCE_SLACK)).any():
        worst, others = worst_pad(pressure * top - rules.largest_pressure * (1 + FORCE_SLACK))
        yield failure(
            f"pad {worst + 1}",
            f"the pressure under the pad is above largest_pressure, {peak}{others}",
            show(float(pressure[worst] * top), "pressure"),
            show(rules.largest_pressure, "pressure"),
            "larger or more pads",
        )


def _levers(check: Check) -> Iterator[Finding]:
    rules = check.rig.plan.target.brief.levers
    pieces = [piece for tree in check.rig.trees for piece in tree.pieces]
    yield from _ratios([piece for piece in pieces if piece.kind == "lever"], rules.ratio_limit)
    yield from _plates(check)
    yield from _sizes(pieces, rules)
    tiers = max((piece.tier for piece in pieces), default=0)
    if rules.tiers is not None and tiers > rules.tiers:
        deepest = next(piece for piece in pieces if piece.tier == tiers)
        yield failure(
            deepest.name, "the tree has too many tiers", str(tiers), str(rules.tiers), "group the pads otherwise"
        )


def _sizes(pieces: list[Piece], rules: LeverRules) -> Iterator[Finding]:
    short = {piece: _shortest(piece) for piece in pieces if _shortest(piece) < rules.shortest_arm * (1 - LIMIT_SLACK)}
    if short:
        worst = min(short, key=lambda piece: short[piece])
        yield failure(
            worst.name,
            f"the shortest arm is too short{_others(short, worst)}",
            show(short[worst], "length"),
            show(rules.shortest_arm, "length"),
            "join other pads, or move them apart",
        )
    long = {piece: length(piece) for piece in pieces if length(piece) > rules.longest * (1 + LIMIT_SLACK)}
    if long:
        worst = max(long, key=lambda piece: long[piece])
        yield failure(
            worst.name,
            f"the {worst.kind} is too long{_others(long, worst)}",
            show(long[worst], "length"),
            show(rules.longest, "length"),
            "more jacks, or a longer lever allowed",
        )


def _ratios(levers: list[Piece], limit: float) -> Iterator[Finding]:
    over = {piece: ratio(piece) for piece in levers if ratio(piece) > limit * (1 + FORCE_SLACK)}
    if over:
        worst = max(over, key=lambda piece: over[piece])
        yield failure(
            worst.name,
            f"the lever ratio is above ratio_limit{_others(over, worst)}",
            f"{over[worst]:.3g}" if np.isfinite(over[worst]) else "the pivot is not between the end pins",
            f"{limit:.3g}",
            "group the pads otherwise, or even out their forces",
        )
    high = {p: ratio(p) for p in levers if p not in over and ratio(p) > USUAL_RATIO * (1 + FORCE_SLACK)}
    if high:
        worst = max(high, key=lambda piece: high[piece])
        yield Finding(
            "practice",
            "note",
            worst.name,
            f"the lever ratio is higher than is usual, though within the brief's limit{_others(high, worst)}",
            f"{high[worst]:.3g}",
            f"{USUAL_RATIO:.0f} by common practice",
            "a small error of the pivot's place moves much load on such a lever; drill it with care",
        )


def _plates(check: Check) -> Iterator[Finding]:
    """Plates that hand one point much more than another: what a high ratio is to a lever."""
    if not any(piece.kind == "plate" for tree in check.rig.trees for piece in tree.pieces):
        return
    from rigdesign.checks.surface.remarks import plate_fractions

    fractions = plate_fractions(check)
    yield from _near_pivot(fractions, check.rig.plan.target.brief.levers)
    high = {p: max(own) / min(own) for p, own in fractions.items() if min(own) > 0}
    high = {piece: spread for piece, spread in high.items() if spread > USUAL_RATIO * (1 + FORCE_SLACK)}
    if high:
        worst = max(high, key=lambda piece: high[piece])
        yield Finding(
            "practice",
            "note",
            worst.name,
            f"the plate's points share its load very unequally{_others(high, worst)}",
            f"the largest share is {high[worst]:.3g} times the smallest",
            f"{USUAL_RATIO:.0f} by common practice for levers",
            "a small error of the pivot's place moves much load on such a plate; drill it with care",
        )


def _near_pivot(plates: Iterable[Piece], rules: LeverRules) -> Iterator[Finding]:
    """Plates with a hole so near the pivot that two pins hardly fit, where the brief sets no shortest arm."""
    near = {piece: _shortest(piece) for piece in plates if _shortest(piece) < NEAR_PIVOT}
    if near and rules.shortest_arm <= 0:
        worst = min(near, key=lambda piece: near[piece])
        yield Finding(
            "practice",
            "warning",
            worst.name,
            f"a hole of the plate is so near its pivot that their pins hardly fit side by side{_others(near, worst)}",
            show(near[worst], "length"),
            f"{show(NEAR_PIVOT, 'length')}, four holes of 8 mm by common practice",
            'set "shortest_arm" in [levers]',
        )


def _shortest(piece: Piece) -> float:
    return min(reaches(piece))


def _others(breakers: dict[Piece, float], worst: Piece) -> str:
    return also(piece.name for piece in breakers if piece is not worst)


def _pushing(check: Check) -> Iterator[Finding]:
    if check.rig.plan.target.brief.pads.action == "push" and check.rig.trees[0].pieces:
        yield Finding(
            "practice",
            "warning",
            "rig",
            "a tree that pushes is not stable: its levers topple and its links fold unless they are guided",
            'action "push"',
            "",
            "guide every lever and link sideways and against turning over, or turn the rig round so that it pulls",
        )


def _idle_pads(check: Check) -> Iterator[Finding]:
    force = np.abs(check.statics.pad_force)
    share = force / force.mean()
    if (share < IDLE_PAD).any():
        worst, others = worst_pad(IDLE_PAD - share)
        yield Finding(
            "practice",
            "warning",
            f"pad {worst + 1}",
            f"the pad carries next to nothing{others}",
            f"{show(float(force[worst]), 'force')}, {percent(float(share[worst]))} of the mean pad force",
            f"{percent(IDLE_PAD)} of the mean pad force, by common practice",
            'leave the pad out, or let the forces be more even: aim = "even", or more ease',
        )


def _drilling(check: Check) -> Iterator[Finding]:
    """What whole drill steps, or holes as built, cost of the bands, where it matters for acceptance."""
    plan = check.rig.plan
    before, use, step = plan.proof.band_use, check.band_use, plan.target.brief.levers.drill_step
    if plan.proof.method == NOT_PROVEN or use <= max(COSTLY_DRILLING * before, COSTLY_USE):
        return
    spoiled = before <= 1.0 < use
    yield Finding(
        "practice",
        "warning" if spoiled else "note",
        "rig",
        "holes on whole drill steps take the rig out of its bands"
        if spoiled
        else "holes on whole drill steps cost much of the bands",
        f"band use {use:.3g} as drilled, {before:.3g} before drilling",
        f"drill_step {show(step, 'length', unit='mm')}",
        "choose a finer drill_step",
    )


def _aim(check: Check) -> Iterator[Finding]:
    plan = check.rig.plan
    if plan.proof.method == NOT_PROVEN or plan.target.brief.keep is not None:
        return  # these pads strove for another target
    rules, is_surface = plan.target.brief.pads, plan.target.brief.specimen.is_surface
    share = "tributary share" if is_surface else "share of the curve"
    strove = {
        "closest": f"least band use first, then forces as even as {percent(rules.ease)} more band use allows",
        "even": f"forces as close to each pad's {share} as the bands allow",
    }[rules.aim]
    if (
        not is_surface
        and rules.places == "free"
        and rules.aim == "closest"
        and plan.proof.band_use_found >= plan.proof.band_use
    ):
        strove = "least band use; free places that follow one curve leave no choice of forces beyond that"
    evenness = f"up to {percent(check.evenness)} of its {share}"
    yield Finding(
        "practice", "note", "pads", f'the aim "{rules.aim}" was {strove}', f"a pad's force is off by {evenness}"
    )
