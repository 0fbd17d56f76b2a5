"""Remarks of the stage "practice" on where pads stand along a line; in plan the stage "space" has them."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from functools import partial

import numpy as np

from rigdesign.checks.model import Check
from rigdesign.checks.text import also
from rigdesign.display import show
from rigdesign.findings import Finding
from rigdesign.target.curve import Floats

LENGTH_SLACK = 1e-9  # m: a pad at its limit must not fail by rounding


def failure(where: str, text: str, value: str, limit: str, remedy: str) -> Finding:
    """Return a failure of the stage "practice", not numbered yet."""
    return Finding("practice", "failure", where, text, value, limit, remedy)


def worst_pad(excess: Floats) -> tuple[int, str]:
    """Return the pad that breaks a limit most, counted from 0, and the others in words; excess (n_pads,) > 0 breaks."""
    worst = int(np.argmax(excess))
    return worst, also(f"pad {i + 1}" for i in np.flatnonzero(excess > 0) if i != worst)


def place_remarks(check: Check) -> Iterator[Finding]:
    """Yield remarks on footprints off the specimen, in keep-outs, or too close to one another."""
    brief = check.rig.plan.target.brief
    half, specimen, x = brief.pads.length / 2, brief.specimen, check.rig.pad_x

    def off(places: Floats) -> Floats:
        return np.maximum(specimen.left - places, places - specimen.right) + half - LENGTH_SLACK

    if (off(x) > 0).any():
        worst, others = worst_pad(off(x))
        yield failure(
            f"pad {worst + 1}",
            f"the pad's footprint reaches off the specimen{others}",
            _stretch(x[worst] - half, x[worst] + half),
            _stretch(specimen.left, specimen.right),
            _place_remedy(check, off, "move the pad or make it shorter"),
        )
    for low, high in brief.pads.keep_out:
        into = partial(_into, low, high, half)
        if (into(x) > 0).any():
            worst, others = worst_pad(into(x))
            yield failure(
                f"pad {worst + 1}",
                f"the pad's footprint reaches into the keep-out from {_stretch(low, high)}{others}",
                _stretch(x[worst] - half, x[worst] + half),
                "clear of it",
                _place_remedy(check, into, "move the pad"),
            )
    yield from _gaps(check, x)


def _into(low: float, high: float, half: float, x: Floats) -> Floats:
    """How far footprints of pads at x reach into a keep-out [m]."""
    return np.minimum(x + half - low, high - x + half) - LENGTH_SLACK


def _place_remedy(check: Check, missed: Callable[[Floats], Floats], otherwise: str) -> str:
    """What to do about a place: a smaller drill step where `missed(x)` [m] says that only drilling moved it there."""
    plan = check.rig.plan
    if plan.may_move and not (missed(plan.x) > 0).any():
        return "choose a smaller drill step, or leave the pads more room: before drilling they kept clear"
    return otherwise


def _gaps(check: Check, x: Floats) -> Iterator[Finding]:
    rules = check.rig.plan.target.brief.pads

    def missing(places: Floats) -> Floats:
        return rules.gap + rules.length - np.diff(np.sort(places)) - LENGTH_SLACK

    if (missing(x) > 0).any():
        order = np.argsort(x, kind="stable")
        least = int(np.argmax(missing(x)))
        first, second = order[least] + 1, order[least + 1] + 1
        others = int((missing(x) > 0).sum()) - 1
        yield failure(
            f"pad {first} and pad {second}",
            "the gap between the pads is too small" + (f"; so too {others} more" if others else ""),
            show(float(np.diff(x[order])[least] - rules.length), "length"),
            show(rules.gap, "length"),
            _place_remedy(check, missing, "move the pads apart, make them shorter or take fewer"),
        )


def _stretch(start: float, end: float) -> str:
    return f"{show(float(start), 'length', unit='m')} to {show(float(end), 'length', unit='m')}"
