"""Remarks of the stage "behaviour": what the rig's own weight does to the test, and what could be done about it."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from rigdesign.checks.hardware.model import Remedy, Step, Tare
from rigdesign.checks.hardware.tare import BAND_SLACK, Weighed
from rigdesign.checks.measures import unevenness
from rigdesign.checks.model import Check
from rigdesign.checks.text import also, percent
from rigdesign.display import show
from rigdesign.findings import Finding, Severity
from rigdesign.hardware.model import Hardware

LEVEL_ROUNDS = 30  # halve the stretch between two steps: 1e-9 of the brief's load
ALL_OF_IT = 1.0


def weight_remarks(check: Check, hardware: Hardware, weighed: Weighed, tare: Tare) -> Iterator[Finding]:
    """Yield the remarks of this stage, not numbered yet, in a fixed order."""
    full = tare.step(ALL_OF_IT)
    yield from _bands(check, weighed, tare)
    yield from _shares(check, full)
    yield from _lower_steps(check, tare)
    yield from _slack(weighed, tare)
    yield from _counterweights(hardware)
    yield from _zeros(tare)


def _remark(severity: Severity, where: str, text: str, value: str = "", limit: str = "", remedy: str = "") -> Finding:
    return Finding("behaviour", severity, where, text, value, limit, remedy)


def _bands(check: Check, weighed: Weighed, tare: Tare) -> Iterator[Finding]:
    """What own weight is, and what it does at the whole of the brief's load; a failure where only it breaks a band."""
    full = tare.step(ALL_OF_IT)
    weight, load = float(np.abs(weighed.loads.weight).sum()), abs(check.rig.plan.target.net.total)
    text = (
        f"the rig's own weight is {show(weight, 'force')}, {percent(weight / load)} of what the pads bring at 100 % of "
        f"the brief's load; with it and the best jack force, {_jacks(check, full)}, errors are " + _errors(check, full)
    )
    value = f"band use {full.band_use:.3g} with own weight, {check.band_use:.3g} without"
    if full.band_use > 1 + BAND_SLACK and check.band_use <= 1 + BAND_SLACK:
        yield _remark("failure", "rig", f"the rig's own weight breaks a band: {text}", value, "1", _what_to_do(tare))
    else:
        yield _remark("note", "rig", text, value, "1")


def _jacks(check: Check, step: Step) -> str:
    names = [tree.jack.name for tree in check.rig.trees]
    return ", ".join(f"{show(float(f), 'force')} on {name}" for name, f in zip(names, step.jack, strict=True))


def _errors(check: Check, step: Step) -> str:
    """Errors with own weight and without, as percentages of what each is a fraction of."""
    parts = [
        f"{quantity} {percent(step.errors[quantity])} ({percent(error.peak)} without weight) of {_the(error.of)}"
        for quantity, error in check.errors.items()
    ]
    return "; ".join(parts)


def _the(words: str) -> str:
    return words if words.startswith("the ") else f"the {words}"


def _what_to_do(tare: Tare) -> str:
    """The remedies that bring the rig back into its bands with their masses, else how far each goes."""
    words = [_remedy_words(remedy) for remedy in tare.remedies]
    doing = [text for remedy, text in zip(tare.remedies, words, strict=True) if remedy.band_use <= 1 + BAND_SLACK]
    if doing:
        return f"{' or '.join(doing)} (see tare.csv for the forces at each step)"
    return f"lighter levers, shorter ones or a wider band; alone, {' and '.join(words)}"


def _remedy_words(remedy: Remedy) -> str:
    what = "counterweights that balance all that hangs" if remedy.kind == "counterweights" else "levers balanced alone"
    return f"{what}, {show(remedy.total, 'mass')} in all, leave a band use of {remedy.band_use:.3g}"


def _shares(check: Check, full: Step) -> Iterator[Finding]:
    """Pads judged one by one, which own weight takes from their shares."""
    allowed = check.rig.plan.target.brief.acceptance.share
    if allowed is None:
        return
    off = unevenness(full.pad_force, check.share_of_curve)
    over = np.flatnonzero(off > allowed + BAND_SLACK)
    if not over.size or check.evenness > allowed + BAND_SLACK:
        return
    worst = int(np.argmax(off))
    yield _remark(
        "failure",
        f"pad {worst + 1}",
        "with the rig's own weight, at 100 % of the brief's load, the pad's force is too far from its tributary share"
        + also(f"pad {i + 1}" for i in over if i != worst),
        f"{percent(float(off[worst]))} of the share",
        f"{percent(allowed)} of the share",
        "counterweights, lighter levers or a wider share",
    )


def _lower_steps(check: Check, tare: Tare) -> Iterator[Finding]:
    """Steps other than 100 % at which own weight breaks a band that the rig keeps without it."""
    if check.band_use > 1 + BAND_SLACK or tare.step(ALL_OF_IT).band_use > 1 + BAND_SLACK:
        return
    over = [step for step in tare.steps if step.band_use > 1 + BAND_SLACK]
    if not over:
        return
    worst = max(over, key=lambda step: step.band_use)
    levels = ", ".join(_level(step.level) for step in over)
    yield _remark(
        "note",
        "rig",
        f"own weight does not scale with the jack: at steps of {levels} of the brief's load, bands taken of the step's "
        f"own target would be broken, most at {_level(worst.level)}; readings at these steps are to be compared with "
        "the forces in tare.csv, not with the target",
        f"band use {worst.band_use:.3g} at {_level(worst.level)}",
        "1",
        "" if not tare.remedies else _remedy_words(tare.remedies[-1]) + " at 100 %",
    )


def _slack(weighed: Weighed, tare: Tare) -> Iterator[Finding]:
    """Pads whose links hang slack, or push where they should pull, at some step."""
    slack = [step for step in tare.steps if step.slack]
    if not slack:
        return
    worst = max(slack, key=lambda step: len(step.slack))
    first, others = worst.slack[0], worst.slack[1:]
    at_full = any(step.level >= ALL_OF_IT for step in slack)
    levels = ", ".join(_level(step.level) for step in slack)
    yield _remark(
        "failure" if at_full else "warning",
        f"pad {first}",
        f"the rig's own weight takes all load off the pad's link at {levels} of the brief's load"
        + also(f"pad {number}" for number in others),
        f"{_plural(len(worst.slack))} slack at {_level(worst.level)}",
        "none",
        "counterweights or lighter levers" if at_full else _all_pull(weighed, tare),
    )


def _level(level: float) -> str:
    """A step's level as people call it.

    >>> _level(0.2), _level(1.125)
    ('20 %', '112.5 %')
    """
    return f"{100 * level:.4g} %"


def _plural(pads: int) -> str:
    return "1 link" if pads == 1 else f"{pads} links"


def _all_pull(weighed: Weighed, tare: Tare) -> str:
    """From which level on no link is slack."""
    low = max(step.level for step in tare.steps if step.slack)
    high = min(step.level for step in tare.steps if step.level > low)
    for _ in range(LEVEL_ROUNDS):
        middle = 0.5 * (low + high)
        is_slack = weighed.slack(weighed.best_factor(middle) * weighed.jack)
        low, high = (middle, high) if is_slack else (low, middle)
    level = np.ceil(round(100 * high, 6)) / 100
    return f"from {_level(float(level))} of the brief's load on every link pulls its way; or put counterweights on"


def _counterweights(hardware: Hardware) -> Iterator[Finding]:
    on = [(name, hole, mass) for name, body in hardware.bodies.items() for hole, mass in body.counterweights.items()]
    if not on:
        return
    total = sum(mass for _, _, mass in on)
    listed = ", ".join(f"{show(mass, 'mass')} at {name} hole {hole}" for name, hole, mass in on[:8])
    more = f" and {len(on) - 8} more" if len(on) > 8 else ""
    yield _remark(
        "note", "rig", f"counterweights bring the levers into balance: {listed}{more}", f"{show(total, 'mass')} in all"
    )


def _zeros(tare: Tare) -> Iterator[Finding]:
    """The three zeros, so that none is taken for another on the day."""
    for zero in tare.zeros:
        hung = "the tree cannot hang on its jack alone" if zero.hung is None else show(zero.hung, "force")
        carried = "not told without the specimen's weight"
        if zero.supported is not None:
            carried = show(zero.supported, "force")
        yield _remark(
            "note",
            zero.jack,
            f"three zeros of the load cell, not to be mixed up: disconnected 0 N; tree hung and pads slack: {hung}; "
            f"specimen just supported: {carried}. Jack forces here are readings over the first of them",
        )
