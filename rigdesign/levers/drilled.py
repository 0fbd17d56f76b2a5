"""What drilling hands on, and what both ways of drilling share."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from rigdesign.findings import Refusal
from rigdesign.levers.grouping import joined, millimetres
from rigdesign.levers.hanging import Hung
from rigdesign.levers.judging import Judge
from rigdesign.levers.wiring import Ints, Wiring
from rigdesign.pads.limits import violations
from rigdesign.pads.tube import Tube, Widths
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

BROKEN = 1e6
"""Added to the band use of a rig that misses a pad limit: any rig that keeps them all is better."""

REACH = 4
"""Steps that a descent may move an arm or a pivot: places and forces stay what the plan chose them for."""


ALONE = ((True, False), (False, True))
"""What is judged: the moment alone, the shear alone."""


@dataclass(frozen=True)
class Drilled:
    """A drilled tree: how it hangs (one row), its steps, its band use, and what was searched, in words.

    `steps` (n_levers, 2) are the arms a, b of free pads, (n_levers, 1) the distance from hole A to the pivot where
    pads stay.
    """

    hung: Hung
    steps: Ints
    use: float
    words: str


def judged(target: Target, judge: Judge, pad_x: Floats, force: Floats) -> Floats:
    """Band use of rigs with pads at `pad_x` (k, n_pads), far larger where pad limits are missed; (k,)."""
    missed = violations(target, pad_x, force)
    return judge.use(pad_x, force) + np.where(missed > 0, BROKEN * (1.0 + missed), 0.0)


def weighed(tube: Tube, x: Floats, force: Floats) -> Tube:
    """The tube by which drilling is judged, for planned pads at `x` [m] with `force` [N] > 0, both (n_pads,).

    Where the plan cannot keep one quantity inside its band but keeps the other, the first one's band is widened to
    what the plan needs.  Otherwise its excess would be leave to take the other one out of its band as well.
    """
    if not all(tube.is_judged):
        return tube
    moment, shear = (float(replace(tube, is_judged=one).use(x[None], force[None])[0]) for one in ALONE)
    if not min(moment, shear) <= 1.0 < max(moment, shear):
        return tube
    if moment > shear:
        return replace(tube, moment_width=_wider(tube.moment_width, moment))
    return replace(tube, shear_width=_wider(tube.shear_width, shear))


def _wider(widths: Widths, factor: float) -> Widths:
    return Widths(widths.below * factor, widths.above * factor)


def coarse(wiring: Wiring, a: Floats, b: Floats, step: float) -> Refusal | None:
    """Refusal where an arm before drilling rounds to no drill step at all."""
    shorter = np.minimum(a, b)
    bad = np.flatnonzero(np.rint(shorter / step) < 1)
    if not bad.size:
        return None
    row = int(bad[np.argmin(shorter[bad])])
    arm = millimetres(float(shorter[row]))
    return Refusal(
        "levers",
        "the drill step is so coarse that an arm would be zero",
        f"drill_step {millimetres(step)}",
        f"lever {row + 1}, which joins {joined(wiring, row)}, needs an arm of {arm}",
        f"choose a drill_step below {millimetres(2 * float(shorter[row]))}, or fewer pads",
    )
