"""What to do about an error beyond its band, and about a jack away from the resultant: what binds decides."""

from __future__ import annotations

from rigdesign.brief.model import Quantity
from rigdesign.checks.model import Check
from rigdesign.checks.text import NOT_PROVEN
from rigdesign.display import show
from rigdesign.target.cuts import ACROSS

MUCH = 0.5  # of an error: what causes so much of it is the first thing to change
DRILLED_WELL = 1.02  # times the plan's band use: a finer drill step would not bring more than that


def jack_remedy(check: Check) -> str:
    """What brings the jack to the resultant: the brief's place or step for it, or finer holes."""
    plan = check.rig.plan
    rules = plan.target.brief.jack
    if plan.proof.method == NOT_PROVEN:
        return "design a rig for this target: the pivots of this one hold the jack where it is"
    if rules.at is not None:
        return 'let the jack stand at the resultant: another "at" in [jack], or none'
    if rules.step is not None:
        return 'let the jack stand at the resultant: a smaller "step" in [jack], or none'
    return "let the jack stand at the resultant, or take a smaller drill step"


def band_remedy(check: Check, quantity: Quantity, x: float, size: float) -> str:
    """What would bring an error of `size` [N or N·m] at a station [m] (x, or y for what is cut across) inside its band.

    More pads are of no use where the jack's place makes the error, nor beside a stretch where no pad may sit.
    """
    target = check.rig.plan.target
    offset = {"moment": check.jack_offset, "torsion": check.jack_offset_y, "moment across": check.jack_offset_y}
    if abs(offset.get(quantity, 0.0) * target.net.total) > MUCH * size:
        return f"the jack's place alone makes more than half of it; {jack_remedy(check)}"
    reach = target.brief.pads.length / 2 + target.brief.levers.drill_step
    for low, high in () if quantity in ACROSS else target.brief.pads.keep_out:
        if low - reach <= x <= high + reach:
            stretch = f"{show(low, 'length', unit='m')} to {show(high, 'length', unit='m')}"
            return f"the keep-out from {stretch} binds here: shorten it, take shorter pads beside it or a wider band"
    if target.brief.specimen.is_surface and check.band_use <= DRILLED_WELL * check.rig.plan.proof.band_use:
        return "more pads, other places for them or a wider band"
    return "more pads, other places for them, a smaller drill step or a wider band"
