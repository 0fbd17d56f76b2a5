"""From a drilled rig to its steel: sizes, heights and weights, round by round until nothing changes.

Sizes depend on loads, loads on weights, weights on sizes; compressed rods on lengths, lengths on depths.  Each round
sizes everything for the loads and lengths of the round before, and the search ends when a round changes nothing: then
every member is the least for the very loads that it has.  A strap and its pins can chase each other in a circle, each
the least for the other of the round before: after half of the rounds straps stay that pass.  Should sizes not settle
even so, those of the last round are kept, and it is said.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.display import counted
from rigdesign.findings import Finding
from rigdesign.hardware.balance import counterweights
from rigdesign.hardware.catalogue import sections
from rigdesign.hardware.joints import eye_radius
from rigdesign.hardware.levels import Levels, stand
from rigdesign.hardware.levers import BESIDE, PROFILE, bending_capacity
from rigdesign.hardware.marking import marks_of
from rigdesign.hardware.members import (
    Counterweights,
    bodies_of,
    fitting_need,
    links_of,
    lug_reach,
    masses_of,
    off_surface,
    pad_bodies,
    shapes_of,
)
from rigdesign.hardware.model import Body, Hardware, Link, Mass, PadBody
from rigdesign.hardware.rules.model import PlateBending
from rigdesign.hardware.sizing import Bench, Sizes, make_bench, make_shop, size_all
from rigdesign.hardware.wiring import design_loads, side_of, wired
from rigdesign.levers.marks import alike
from rigdesign.levers.model import Rig
from rigdesign.levers.weighing import StockLine
from rigdesign.pads.outcome import Progress

MOST_ROUNDS = 12
"""Rounds of sizing at most."""

LATE = 6
"""From this round on, counted from 0, straps that pass are not made lighter."""

TYPICAL_ARM = 0.3
"""Arms of the levers for which the stock's bending moments are worked out for the grouping [m]."""

TYPICAL_OVERHANG = 0.03
"""Steel beyond an end hole, as the grouping weighs it [m]."""


def stock_line(brief: Brief) -> StockLine | None:
    """Return what levers of a brief's stock weigh for a bending moment at the brief's load, for the grouping.

    None where nothing in the stock bears any: then the grouping has only its own estimate.

    They are of the build of the lowest tiers, with arms of `TYPICAL_ARM`; pins and deflection are not looked at.
    """
    rules = brief.hardware
    shop = make_shop(rules)
    build = rules.builds[-1]
    moments, masses = [0.0], [0.0]
    for section in sections(rules, PROFILE[build], shop.steel.density):
        moment = bending_capacity(section, build, shop, TYPICAL_ARM) / (brief.peak * rules.overshoot)
        if moment > moments[-1]:
            moments.append(moment)
            masses.append((1 if build == "hollow section" else 2) * section.mass)
    if len(moments) == 1:
        return None
    plates = sections(rules, "plate", shop.steel.density)
    # a plate of thickness t and width w bears M = stress · w t²/6, with the stress that the rules leave a typical one
    typical = plates[len(plates) // 2].depth
    state = PlateBending(0.0, 1.0, 1.0, typical, 0.1, 0.01, shop.steel)
    stress = 6 / typical**2 / shop.rules.plate(state)[0].utilisation / (brief.peak * rules.overshoot)
    plate = shop.steel.density * float(np.sqrt(6 / stress))
    return StockLine(
        np.array(moments[1:]),
        np.array(masses[1:]),
        TYPICAL_OVERHANG,
        plate,
        shop.steel.density * plates[0].depth,
        2 * eye_radius(shop.pins[0] + shop.play) + BESIDE,
    )


@dataclass(frozen=True)
class Round:
    """What one round of sizing made."""

    sizes: Sizes
    levels: Levels
    bodies: Mapping[str, Body]
    links: tuple[Link, ...]
    pads: tuple[PadBody, ...]
    masses: Mapping[str, Mass]


def build_hardware(rig: Rig, progress: Progress | None = None) -> Hardware:
    """Choose sections, pins, links, jack and cell of a rig, and work out heights, weights and marks.

    Parameters
    ----------
    rig
        The rig as drilled, on whichever side of its specimen.
    progress
        Called now and then with the part done, 0 to 1, and a word for what is being done.

    Returns
    -------
    Hardware
        Where no stock can carry a member, what comes closest is drawn and `shortfalls` say so.
    """
    rules = rig.plan.target.brief.hardware
    wiring = wired(rig)
    groups = alike(rig) if rules.marks == "few" else tuple((name,) for name in wiring.pieces)
    bench = make_bench(wiring, groups)
    found, settled = _settle(bench, progress)
    findings = _beyond_surface(rig)
    without = with_weight = 0.0
    if rules.balance == "as needed":
        without, with_weight = bench.bands.use({}), bench.bands.use(found.masses)
    if rules.balance == "counterweights" or (with_weight > 1.0 >= without):
        found, hung, settled = _balanced(bench, found)
        findings += _balance_words(hung, rules.balance == "as needed")
    if not settled:
        findings.append(_unsettled())
    if progress is not None:
        progress(1.0, "hardware")
    return _hardware(bench, found, tuple(findings))


def _settle(bench: Bench, progress: Progress | None) -> tuple[Round, bool]:
    """Size until a round changes nothing; whether it ended so."""
    masses: Mapping[str, Mass] = {}
    before: Round | None = None
    for number in range(MOST_ROUNDS):
        if progress is not None:
            progress(0.9 * number / MOST_ROUNDS, "sections and pins")
        found = _one_round(bench, masses, before, {}, is_late=number >= LATE)
        if before is not None and _same(found, before, masses):
            return found, True
        masses, before = found.masses, found
    assert before is not None
    return before, False


def _one_round(
    bench: Bench, masses: Mapping[str, Mass], before: Round | None, hung: Counterweights, *, is_late: bool
) -> Round:
    rig = bench.wiring.rig
    jacks = bench.bands.held_jacks(masses)
    loads = design_loads(bench.wiring, masses, jacks)
    lengths = {} if before is None else before.levels.lengths
    sizes = size_all(bench, loads, jacks, None if before is None else before.sizes, lengths, keep_straps=is_late)
    bodies = bodies_of(bench, sizes, hung)
    pads = pad_bodies(rig.plan.target.brief, side_of(rig), rig.pad_x, rig.pad_y)
    pins = {f"pad {pad.pad}": pad.pin_height for pad in pads}
    levels = stand(
        bench.wiring,
        shapes_of(sizes, bodies),
        pins,
        lug_reach(sizes, pads, bench.wiring),
        lambda link: fitting_need(bench, sizes, link, loads[link.name]),
    )
    links = links_of(bench, sizes, levels.lengths, loads)
    return Round(sizes, levels, bodies, links, pads, masses_of(bench, sizes, bodies, links, pads))


def _same(found: Round, before: Round, masses: Mapping[str, Mass]) -> bool:
    """Whether a round changed nothing, neither sizes nor heights nor the masses that its loads were worked out with."""
    return found.sizes.key == before.sizes.key and found.levels == before.levels and found.masses == masses


def _balanced(bench: Bench, found: Round) -> tuple[Round, Counterweights, bool]:
    """Hang counterweights until sizes, heights and weights agree: heavier levers need others; whether they do."""
    hung: Counterweights = {}
    for number in range(MOST_ROUNDS):
        before = found
        bare = masses_of(bench, before.sizes, bodies_of(bench, before.sizes, {}), before.links, before.pads)
        hung = counterweights(bench.wiring.rig, bare, before.links, whole=True)
        masses = masses_of(bench, before.sizes, bodies_of(bench, before.sizes, hung), before.links, before.pads)
        found = _one_round(bench, masses, before, hung, is_late=number >= LATE)
        if _same(found, before, masses):
            return found, hung, True
    return found, hung, False


def _hardware(bench: Bench, found: Round, findings: tuple[Finding, ...]) -> Hardware:
    rig = bench.wiring.rig
    stacks = tuple(found.sizes.stacks[tree.jack.name] for tree in rig.trees)
    holes = {
        name: {hole.name: found.sizes.joints[name, hole.name].hole for hole in piece.holes}
        for name, piece in bench.wiring.pieces.items()
    }
    lugs = {link.lower.to: link.lower for link in found.links if link.lower.to.startswith("pad ")}
    marks = marks_of(bench.wiring.pieces.values(), found.bodies, holes, found.links, found.pads, lugs, stacks)
    return Hardware(
        rig=rig,
        side=side_of(rig),
        bodies=found.bodies,
        links=found.links,
        pads=found.pads,
        stacks=stacks,
        heights=found.levels.heights,
        marks=marks,
        masses=found.masses,
        shortfalls=found.sizes.shortfalls,
        words=_words(bench),
        findings=findings,
    )


def _words(bench: Bench) -> str:
    rules = bench.rules
    factor = {
        "BTH-1": f"ASME BTH-1, design factor {rules.design_factor:g}",
        "EN 1993": f"EN 1993, load factor {rules.load_factor:g}",
        "AISC 360": "AISC 360, allowable strength",
    }[rules.rules]
    alike_words = ", pieces of one mark sized for the most loaded of them" if rules.marks == "few" else ""
    return (
        f"sections: the lightest of the stock, then the smallest pins, that pass under {factor}, at the test's peak "
        f"times {rules.overshoot:g}{alike_words}"
    )


def _balance_words(hung: Counterweights, needed: bool) -> list[Finding]:
    """Why counterweights are put on; their masses, and what they do, are told by the check."""
    if not hung:
        return []
    why = (
        "own weight would break a band at the brief's load, whatever the jack's force, so counterweights are put on"
        if needed
        else "counterweights are put on, as the brief asks"
    )
    remedy = 'balance = "none" leaves them off' if needed else ""
    return [Finding("behaviour", "note", "counterweights", why, remedy=remedy)]


def _unsettled() -> Finding:
    return Finding(
        "strength",
        "warning",
        "rig",
        f"sizes and weights did not settle in {MOST_ROUNDS} rounds; those of the last round are kept, and some may be "
        "a size larger than needed, or a little too weak for the check",
    )


def _beyond_surface(rig: Rig) -> list[Finding]:
    off = off_surface(rig.plan.target.brief.hardware.surface, rig.pad_x, rig.pad_y)
    if not off:
        return []
    text = "the table of the loaded surface does not reach so far; there the height of its nearest row is taken"
    pads = ", ".join(str(pad) for pad in off[:6]) + (", …" if len(off) > 6 else "")
    return [
        Finding(
            "space", "warning", f"pad {off[0]}", text, f"{counted(len(off), 'pad')}: {pads}", "", "rows for all pads"
        )
    ]
