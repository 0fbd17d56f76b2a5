"""Remarks of the stage "strength": what fails and what would do, what is used most, what is not looked at."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator

import numpy as np

from rigdesign.checks.hardware.model import StrengthRow
from rigdesign.checks.text import also, percent
from rigdesign.display import show
from rigdesign.findings import Finding, Severity
from rigdesign.hardware.model import Hardware, Shortfall
from rigdesign.levers.model import Piece
from rigdesign.words import ROUNDING

ALUMINIUM = ("6082-T6",)
"""Grades to which rules for steel only apply in part."""

USE_SLACK = 1e-9  # members are built right at their limits, and must not fail by rounding


def strength_remarks(hardware: Hardware, rows: tuple[StrengthRow, ...]) -> Iterator[Finding]:
    """Yield the remarks of this stage, not numbered yet, in a fixed order."""
    worst = _worst_of_each(rows)
    yield from _failures(hardware, worst)
    yield from _other_shortfalls(hardware, worst)
    yield from _most_used(hardware, worst)
    yield from _density(hardware)
    yield from _too_long(hardware)
    yield from _not_steel(hardware)
    yield _remark(
        "note",
        "rig",
        "twin profiles are taken as held sideways at their spacers, whose bolts must be tight, and not as buckling "
        "together between their pins; strength is not looked at for welds, fatigue, impact (a pad that lets go), load "
        "from the side, heads of pins, split pins, spacers, nuts, turnbuckles and whatever makers of jacks, cells and "
        "bearings rate themselves",
        remedy="have a licensed engineer look at them, by the codes that hold locally; inspect welds before every test",
    )


def is_over(use: float) -> bool:
    """Whether a utilisation fails."""
    return use > 1 + USE_SLACK


def _remark(severity: Severity, where: str, text: str, value: str = "", limit: str = "", remedy: str = "") -> Finding:
    return Finding("strength", severity, where, text, value, limit, remedy)


def _worst_of_each(rows: Iterable[StrengthRow]) -> dict[str, StrengthRow]:
    """The most used check of each member, of equal ones the first."""
    worst: dict[str, StrengthRow] = {}
    for row in rows:
        if row.piece not in worst or row.utilisation > worst[row.piece].utilisation:
            worst[row.piece] = row
    return worst


def _failures(hardware: Hardware, worst: dict[str, StrengthRow]) -> Iterator[Finding]:
    """One for each member that fails; identical members that fail by the same check share one."""
    groups: dict[tuple[str, str], list[StrengthRow]] = {}
    for name, row in worst.items():
        if is_over(row.utilisation):
            groups.setdefault((hardware.marks.get(name, name), _kind(row.check)), []).append(row)
    for rows in groups.values():
        row = max(rows, key=lambda row: row.utilisation)
        yield _remark(
            "failure",
            row.piece,
            f"{row.check}, with {show(row.load, 'force')} at the peak of the test and its overshoot: "
            + _too_much(row)
            + also(other.piece for other in rows if other is not row),
            f"utilisation {used(row.utilisation)}",
            "1",
            _remedy(hardware, row),
        )


def _too_much(row: StrengthRow) -> str:
    if row.check.startswith("deflection"):
        return f"the deflection is more than the brief allows ({row.clause})"
    return f"the load effect is more than {row.clause} leaves"


def _kind(check: str) -> str:
    """A check without the member at which it is made.

    >>> _kind("bearing, eye at lever 12 hole A"), _kind("bearing, hole A")
    ('bearing, eye at ', 'bearing, hole A')
    """
    return re.sub(r"(lever|pad|jack) \d+( hole \w+)?", "", check)


def used(use: float) -> str:
    """A utilisation in words.

    >>> used(0.98765), used(float("inf"))
    ('0.988', 'beyond all limits')
    """
    return f"{use:.3g}" if use < 1e6 else "beyond all limits"


def _remedy(hardware: Hardware, row: StrengthRow) -> str:
    """What the builder says would do, or what such a check wants as a rule."""
    for shortfall in hardware.shortfalls:
        if shortfall.piece == row.piece and shortfall.remedy:
            return shortfall.remedy
    kind = row.piece.split()[0]
    if row.check.startswith("rated force"):
        return "a larger jack and load cell: give them as jacks and cells in [hardware]"
    if kind == "link":
        return "a larger link or pin, thicker eyes, or more pads to share the load"
    if kind == "pad":
        return "thicker lugs or a larger pin at the pad"
    grade = "" if "deflection" in row.check else "a stronger grade, "
    return f"a larger section or pin, {grade}shorter arms, or more pads to share the load"


def _other_shortfalls(hardware: Hardware, worst: dict[str, StrengthRow]) -> Iterator[Finding]:
    """What the builder could not do, where no strength check of the same member says so already."""
    failing = {name for name, row in worst.items() if is_over(row.utilisation)}
    alike: dict[tuple[str, str], list[Shortfall]] = {}
    for shortfall in hardware.shortfalls:
        if shortfall.piece not in failing:
            mark = hardware.marks.get(shortfall.piece, shortfall.piece)
            alike.setdefault((mark, shortfall.check), []).append(shortfall)
    for group in alike.values():
        first = max(group, key=lambda one: one.utilisation)
        yield _remark(
            "failure",
            first.piece,
            f"no size to choose from does: {first.check}{also(one.piece for one in group if one is not first)}",
            # the sizing's own number, where no check of this road has one
            f"utilisation {used(first.utilisation)} as sized",
            "1",
            first.remedy,
        )


def _most_used(hardware: Hardware, worst: dict[str, StrengthRow]) -> Iterator[Finding]:
    """Which member is nearest to its limit, where all pass."""
    if not worst or any(is_over(row.utilisation) for row in worst.values()):
        return
    rules = hardware.rig.plan.target.brief.hardware
    row = max(worst.values(), key=lambda row: row.utilisation)
    factor = {
        "BTH-1": f" with a design factor of {rules.design_factor:g}",
        "EN 1993": f" with a load factor of {rules.load_factor:g} and its partial factors",
        "AISC 360": " with its safety factors",
    }[rules.rules]
    yield _remark(
        "note",
        row.piece,
        f"of all members this one is used most: {row.check}, {show(row.load, 'force')} at the peak of the test times "
        f"{rules.overshoot:g} for overshoot, by {rules.rules}{factor}",
        f"{percent(row.utilisation)} of what the rules leave",
        "100 %",
    )


def _too_long(hardware: Hardware) -> Iterator[Finding]:
    """One remark for levers that no stock bar gives in one piece."""
    lengths = {piece.name: _steel_length(hardware, piece) for piece in hardware.pieces if piece.kind == "lever"}
    long = {name: length for name, length in lengths.items() if length > hardware.bodies[name].section.bar + ROUNDING}
    if long:
        name = max(long, key=lambda name: long[name])
        bar = hardware.bodies[name].section.bar
        yield _remark(
            "failure",
            name,
            "the lever is longer than the bars that its section comes in"
            + also(other for other in long if other != name),
            show(long[name], "length", unit="m"),
            f"bars of {show(bar, 'length', unit='m')}",
            "longer bars ([hardware] bar), or shorter levers ([levers] longest)",
        )


def _steel_length(hardware: Hardware, piece: Piece) -> float:
    first, last = piece.ends
    return float(np.hypot(last.u - first.u, last.v - first.v)) + 2 * hardware.bodies[piece.name].overhang


def _not_steel(hardware: Hardware) -> Iterator[Finding]:
    grade = hardware.rig.plan.target.brief.hardware.grade
    if any(body.material.name in ALUMINIUM for body in hardware.bodies.values()):
        rules = hardware.rig.plan.target.brief.hardware.rules
        yield _remark(
            "warning",
            "rig",
            f"the rules {rules} are written for steel and are used here with the strengths of {grade}: heat of "
            "welding, fatigue and bearing of aluminium are judged otherwise",
            remedy="have strength checked by EN 1999 or the rules for aluminium that hold locally; weld nothing",
        )


def _density(hardware: Hardware) -> Iterator[Finding]:
    """Say where the brief's density stands in place of the grade's."""
    rules = hardware.rig.plan.target.brief.hardware
    if rules.density is None:
        return
    yield _remark(
        "note",
        "rig",
        f"weights are worked out with the brief's density in place of that of {rules.grade}",
        f"{rules.density:.4g} kg/m³",
    )
