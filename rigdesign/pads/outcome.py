"""What each way of choosing pads hands to the plan."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field, replace

import numpy as np

from rigdesign.brief.model import PadRules
from rigdesign.pads.tube import Tube, Widths
from rigdesign.target.curve import Floats

Progress = Callable[[float, str], None]


@dataclass(frozen=True)
class Outcome:
    """Pads `x` [m] and `force` [N] (n,), both root to tip and forces positive, and what is proven about them.

    `y` [m] (n,) on a surface, empty on a line rig.

    `use_least` and `moment_least` are lower bounds that no arrangement of as many pads can go below: the band use, and
    the largest moment error as a fraction of the peak.  `use_found` is the least band use found,
    before forces were made even.  `evenness_before` is that of the forces of least band use.
    """

    x: Floats
    force: Floats
    use_least: float
    use_found: float
    moment_least: float
    evenness_before: float
    method: str
    words: str
    y: Floats = field(default_factory=lambda: np.empty(0))


def moment_alone(tube: Tube, peak: float) -> Tube:
    """The tube whose moment band is the whole peak on both sides, so that band use is the error over the peak."""
    width = np.full(tube.x.shape, peak)
    return replace(tube, moment_width=Widths(width, width), is_judged=(True, False))


def use_given_up_to(rules: PadRules, use: float) -> float:
    """Band use that even forces may take, where `use` is the least found: all of the bands, or a part more (ease).

    What keeps the bands goes on keeping them.
    """
    if use > 1:
        return use * (1 + rules.ease)
    return 1.0 if rules.aim == "even" else min(use * (1 + rules.ease), 1.0)


def held_apart(tube: Tube, x: Floats, force: Floats, limit: float) -> tuple[Tube, ...]:
    """Tubes in which to even forces out within `limit`, in the order in which they are given up.

    Where one band cannot be kept, that is no leave to break the other: the tube of the band which binds less is made
    so much narrower that `limit` is one whole band of it.
    """
    if limit <= 1 or tube.is_judged != (True, True):
        return (tube,)
    alone = [replace(tube, is_judged=judged) for judged in ((True, False), (False, True))]
    moment_use, shear_use = (float(one.use(x, force)) for one in alone)
    if moment_use < shear_use:
        return replace(tube, moment_width=Widths(*(width / limit for width in tube.moment_width))), tube
    return replace(tube, shear_width=Widths(*(width / limit for width in tube.shear_width))), tube


def moment_floor(tube: Tube, peak: float, use_least: float, least: Callable[[Tube], float]) -> float:
    """Largest moment error that cannot be gone below, over the `peak` target moment [N·m].

    Where one plain moment band is all that is judged it follows from the least band use; else `least` is asked for the
    least band use in the tube of the moment alone.
    """
    amount = _plain_amount(tube, peak)
    return use_least * amount if amount is not None else least(moment_alone(tube, peak))


def _plain_amount(tube: Tube, peak: float) -> float | None:
    """The band as a fraction of the peak, if it is the same everywhere and on both sides and is all that is judged."""
    if tube.is_judged != (True, False):
        return None
    low, high = (np.array([width.min(), width.max()]) for width in tube.moment_width)
    widths = np.concatenate([low, high])
    return float(widths[0] / peak) if np.ptp(widths) <= 1e-12 * widths[0] else None
