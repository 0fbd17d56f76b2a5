"""Pads at fixed places: only the forces are open, and a linear programme finds the best ones."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.pads.forces import ForceProgramme, Forces, shares, wishes
from rigdesign.pads.limits import force_limits, least_pitch
from rigdesign.pads.outcome import Outcome, held_apart, moment_floor, use_given_up_to
from rigdesign.pads.tube import Tube, build_tube
from rigdesign.target.model import Target

STATIONS_A_PAD = 60
METHOD = "linear programme over the forces at the fixed places"


def choose_fixed(target: Target, jack_x: float) -> Outcome | None:
    """Forces of least band use at the brief's stations, then more even ones; None if none within the limits balance."""
    brief = target.brief
    x = brief.pads.stations
    if x.size > 1 and np.diff(x).min() < least_pitch(brief) * (1 - 1e-9):
        return None
    tube = build_tube(target, jack_x, x.size, STATIONS_A_PAD, extra=x)
    least, largest = force_limits(target)
    programme = ForceProgramme(tube, x, least, largest, shares(tube, x))
    best = programme.least_use()
    if best is None:
        return None
    limit = use_given_up_to(brief.pads, best.use)
    even = _more_even(programme, best, limit, brief.levers.ratio_limit)

    def least_alone(plain: Tube) -> float:
        alone = replace(programme, tube=plain).least_use()
        return alone.use if alone is not None else 0.0

    moment_least = moment_floor(tube, target.moment_peak, best.use, least_alone)
    return Outcome(x, even.force, best.use, best.use, moment_least, best.evenness, METHOD, f"{x.size} fixed places")


def _more_even(programme: ForceProgramme, best: Forces, limit: float, ratio_limit: float) -> Forces:
    """Forces as close to the pads' shares as the band use `limit` allows; the best ones themselves if none are."""
    tube, x = programme.tube, programme.x
    for held in held_apart(tube, x, best.force, limit):
        for wish in wishes(ratio_limit, programme.least, tube.total / x.size):
            tried = replace(programme, tube=held, least=wish.least).most_even(limit, wish.ratio)
            if tried is not None:
                return tried
    return best
