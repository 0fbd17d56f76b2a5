"""The rigging sheet: in which order the rig is put together, what is set and checked, and what nobody may forget."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from math import ceil, isfinite

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.report.figures_sheet import MM_PER_POINT
from rigdesign.report.lists import centres
from rigdesign.report.sheets.frame import FIELD, NOT_ACCEPTED
from rigdesign.report.sheets.paper import BODY, HEAD, Box, Paper
from rigdesign.report.sheets.schedules import numbers, settings_table
from rigdesign.report.sheets.sizes import Sizes
from rigdesign.report.sheets.tables import draw_whole, table_sheets
from rigdesign.report.sheets.texts import broken
from rigdesign.report.sheets.tiers import Tier, tiers_of
from rigdesign.words import STANDARD_GRAVITY

PROOF = 1.1, 1.25
"""Proof load of the rig over its peak; common practice, from memory."""
SLACK, PRELOAD, SURVEY, NOBODY = 0.05, (0.2, 0.3), 0.4, 0.2
"""Parts of the load at which links are set taut, the rig is settled, the survey is made, and the space beneath is
cleared; common practice, from memory."""
ROUND_UP = 0.5
"""The exclusion zone is rounded up to this [m]."""
COLUMNS, GUTTER = 2, 10.0
TOP, STEP = FIELD.high - 6.0, BODY * MM_PER_POINT * 1.45

Section = tuple[str, tuple[str, ...]]


def rigging_sheets(result: HardwareCheck, sizes: Sizes) -> Iterator[tuple[Paper, str, str]]:
    """Yield the rigging sheet, with the link settings where they fit, and further sheets where they do not."""
    wide = (FIELD.width - 14.0 - GUTTER * (COLUMNS - 1)) / COLUMNS
    paper, column, y = Paper(), 0, TOP
    for heading, paragraphs in _sections(result, sizes):
        for k, words in enumerate(paragraphs):
            lines = broken(words, wide - 7.0, BODY)
            need = len(lines) * STEP + 1.0 + (8.0 if k == 0 else 0.0)
            if y - need < FIELD.low + 3.0:
                column, y = column + 1, TOP
            if column == COLUMNS:
                yield paper, "Rigging", "none"
                paper, column = Paper(), 0
            at = FIELD.left + 7.0 + column * (wide + GUTTER), y
            y = _paragraph(paper, at, heading if k == 0 else "", k + 1, lines)
        y -= 3.0
    settings = settings_table(result, sizes)
    for place in range(column, COLUMNS):
        top = y - 2.0 if place == column else TOP
        room = Box(FIELD.left + 7.0 + place * (wide + GUTTER), FIELD.low + 3.0, wide, top - FIELD.low - 3.0)
        if settings.rows and draw_whole(paper, room, settings):
            settings = replace(settings, rows=())
    yield paper, "Rigging", "none"
    yield from table_sheets([settings])


def _paragraph(paper: Paper, place: tuple[float, float], heading: str, number: int, lines: Sequence[str]) -> float:
    """Write a numbered paragraph, beneath its section's heading where it is the first; return where it ends [mm]."""
    left, y = place
    if heading:
        paper.text(left, y - 2.5, heading, HEAD, bold=True)
        y -= 7.0
    paper.text(left, y - STEP / 2, f"{number}", BODY)
    for line in lines:
        paper.text(left + 6.0, y - STEP / 2, line, BODY)
        y -= STEP
    return y - 1.0


def _sections(result: HardwareCheck, sizes: Sizes) -> Sequence[Section]:
    sections: list[Section] = []
    if not result.accepted:
        failures = [f"{finding.object}: {finding.text}" for finding in result.findings if finding.severity == "failure"]
        sections.append((NOT_ACCEPTED, tuple(failures) or ("the check does not accept this rig: see its report",)))
    sections += [
        ("Order of assembly, from the specimen on", _assembly(result, sizes)),
        ("Settings", _settings(result, sizes)),
        ("Checks before loading", _checks(result, sizes)),
        ("Three zeros of the load cell, never to be mixed", _zeros(result, sizes)),
        ("Safety", _safety(result, sizes)),
        ("Release", _release(result)),
    ]
    return sections


def _assembly(result: HardwareCheck, sizes: Sizes) -> tuple[str, ...]:
    hardware = result.hardware
    hold = "Prop" if hardware.side * result.check.rig.plan.target.brief.specimen.gravity > 0 else "Hold"

    def at(tier: Tier) -> str:
        return f" at {tier.jack}" if len(hardware.rig.trees) > 1 else ""

    steps = ["Lay out all parts by their marks against the parts list; weigh each, write its mass beside it."]
    steps.append("Fix the pads at their stations (schedule of pads), within 1 mm; check each footprint and its bond.")
    for tier in sorted(tiers_of(result), key=lambda tier: -tier.number):
        levers = numbers(tuple(piece.name for piece in tier.pieces))
        below = numbers(tuple(link.name for link in tier.below))
        steps.append(
            f"Tier {tier.number}{at(tier)}: pin {below} below, set to length, then {levers}; hole A inboard, marks "
            f"readable from one side; secure every pin with its split pin. {hold} each until it hangs."
        )
    for tree, stack in zip(hardware.rig.trees, hardware.stacks, strict=True):
        link = next(link for link in hardware.links if link.upper.to == stack.jack)
        place = f"x = {sizes.length(tree.jack.x)}"
        if result.check.rig.plan.target.brief.specimen.is_surface:
            place += f", y = {sizes.length(tree.jack.y)}"
        steps.append(
            f"{stack.jack.capitalize()} ({stack.machine.name}) and its cell ({stack.cell.name}) plumb over the pivot "
            f"at {place}; cell read before it is connected (first zero), then {link.name}."
        )
    steps.append("Catch slings on every lever, to the structure and slack, short enough that none falls on another.")
    return tuple(steps)


def _settings(result: HardwareCheck, sizes: Sizes) -> tuple[str, ...]:
    links = result.hardware.links
    adjust = min((link.adjust for link in links if link.adjust > 0), default=0.0)
    words = [
        f"Links to the lengths of the table of link settings, pin to pin, within {sizes.length(1e-3)}; levers level, "
        "links plumb.",
    ]
    if adjust > 0:
        words.append(
            f"Adjusters stand in the middle of their ±{sizes.length(adjust)} (the smallest of them) when the rig is "
            "level; no thread may be at its end."
        )
    tare = result.tare
    weights = [
        f"{sizes.mass(mass)} at {piece} {hole}"
        for piece, body in result.hardware.bodies.items()
        for hole, mass in body.counterweights.items()
    ]
    if weights:
        words.append(f"Counterweights: {'; '.join(weights)}.")
    slack = sorted({pad for step in tare.steps if step.level <= 0.4 for pad in step.slack})
    if slack:
        words.append(
            f"Below 40 % of the load the own weight lets {numbers(tuple(f'pad {pad}' for pad in slack))} hang slack: "
            "readings there count from the step at which they carry."
        )
    return tuple(words)


def _checks(result: HardwareCheck, sizes: Sizes) -> tuple[str, ...]:
    total = sum(mass.mass for mass in result.hardware.masses.values())
    clearance = min((near.distance for near in result.space.closest), default=None)
    words = [
        f"Weighed parts add up to {sizes.mass(total)} within 3 %; if not, tell whoever calculates the own weight.",
        "A second person reads every mark, pin, split pin and lock nut against the sheets.",
        f"At {100 * SLACK:.0f} % of the load take up the slack: every link is taut, every lever level.",
        f"Preload to {100 * PRELOAD[0]:.0f}–{100 * PRELOAD[1]:.0f} %, back to {100 * SLACK:.0f} %, twice; set links "
        "again where levers are off level.",
        f"Survey at {100 * SURVEY:.0f} % going up and coming down: every instrumented link against its expected "
        "reading; then go or no go.",
    ]
    if clearance is not None and isfinite(clearance):
        near = min(result.space.closest, key=lambda found: found.distance)
        state = "at rest" if near.state == "at rest" else "with levers turned"
        words.append(
            f"Nearest members: {near.first} and {near.second}, {sizes.length(near.distance)} clear {state}; look there "
            "first at every step."
        )
    return tuple(words)


def _zeros(result: HardwareCheck, sizes: Sizes) -> tuple[str, ...]:
    words = []
    for zeros in result.tare.zeros:
        jack = zeros.jack
        words.append(f"{jack}: cell disconnected reads {_force(zeros.apart, sizes)}.")
        hung = "the tree cannot hang or stand on its jack alone" if zeros.hung is None else _force(zeros.hung, sizes)
        words.append(f"{jack}: tree on the jack, pads slack: {hung}.")
        borne = (
            "the brief gives no weight of the specimen, so it is not known here"
            if zeros.supported is None
            else _force(zeros.supported, sizes)
        )
        words.append(f"{jack}: specimen's own weight just borne by the pads: {borne}.")
    words.append("Loads of the test count from the first zero. The own weight of the rig is never zeroed away.")
    return tuple(words)


def _force(value: float, sizes: Sizes) -> str:
    return sizes.force(0.0 if abs(value) < 1e-9 else value)


def _safety(result: HardwareCheck, sizes: Sizes) -> tuple[str, ...]:
    brief = result.check.rig.plan.target.brief
    zone = ceil(result.space.total / ROUND_UP - 1e-9) * ROUND_UP
    top = max(result.tare.steps, key=lambda step: step.level)
    forces = ", ".join(
        f"{sizes.force(abs(float(force)))} at {tree.jack.name}"
        for force, tree in zip(top.jack, result.check.rig.trees, strict=True)
    )
    weights = " and ".join(
        f"{centre.mass * STANDARD_GRAVITY / 1e3:.2f} kN" for centre in centres(result) if centre.name.startswith("tree")
    )
    return (
        f"Proof load of the rig before its first test: {PROOF[0]:g} to {PROOF[1]:g} times its peak "
        f"({forces} at {100 * top.level:.0f} % of the load), held by the structure in the specimen's place.",
        f"Exclusion zone on all sides: at least the rig's height, {sizes.length(result.space.total)} {sizes.unit}, "
        f"taken as {zone:g} m; screens where it cannot be kept.",
        f"Nobody beneath the rig or the specimen above {100 * NOBODY:.0f} % of the load. No hand on a link under load.",
        "Stored energy is half of jack force times its travel: a specimen that breaks lets all of it go at once. Know "
        "it before the test, and let no one stand in line with a link or lever.",
        "A pad that lets go drops its neighbours and turns its lever to its stop: catch slings and stops hold every "
        f"lever for its own mass and that fall. Levers weigh up to {_heaviest(result, sizes)}, a tree {weights}.",
        f"Links may swing up to {_swing(brief.hardware.swing)}; stop where one touches anything.",
        "Relief valve and load limit set above the peak by no more than the overshoot of the strength check, "
        f"{100 * (brief.hardware.overshoot - 1):.0f} %; higher for the proof load alone, and set back after it.",
    )


def _heaviest(result: HardwareCheck, sizes: Sizes) -> str:
    masses = [result.hardware.masses[piece.name].mass for piece in result.hardware.pieces]
    return sizes.mass(max(masses)) if masses else "nothing"


def _swing(angle: float) -> str:
    return f"{angle * 57.29577951308232:.0f}°"


def _release(result: HardwareCheck) -> tuple[str, ...]:
    return (
        "These sheets are calculated, not released. Local codes for lifting gear, pressure and work at height hold "
        "before anything written here.",
        "A licensed engineer reviews design, steel, welds and fittings, and signs every sheet before anything is cut; "
        "a competent person inspects the rig before every test.",
        "Design factors, grades and rules are those of the brief: "
        + _rules(result)
        + "; a change of any part needs the check to be run again.",
    )


def _rules(result: HardwareCheck) -> str:
    rules = result.check.rig.plan.target.brief.hardware
    factor = (
        f"load factor {rules.load_factor:g}" if rules.rules == "EN 1993" else f"design factor {rules.design_factor:g}"
    )
    return f"{rules.rules}, {factor}, {rules.grade}, pins {rules.pin_grade}"
