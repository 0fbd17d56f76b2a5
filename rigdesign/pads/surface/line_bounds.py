"""What no pads in plan can do better than, because no pads on a line can.

Seen along the span, pads in plan are pads on a line: their shear and their moment cut square to x do not know their y.
So what is proven for as many free pads on a line holds for them wherever they stand.
"""

from __future__ import annotations

import numpy as np

from rigdesign.pads.outcome import moment_alone
from rigdesign.pads.path import COARSE, least_use_path
from rigdesign.pads.stair import least_use_stair
from rigdesign.pads.tube import build_tube
from rigdesign.target.model import Target

SAFE = 1.0 - 1e-6
"""A bound is taken by so much lower than the search along the line gives it: its stations are interpolated."""


def line_bounds(target: Target, jack_x: float, count: int) -> tuple[float, float]:
    """Return the least band use of moment and shear, and the least moment error over its peak, of `count` pads.

    Both are 0 where the cuts are square to the axis: the pads' places along it are not their x.
    """
    specimen = target.brief.specimen
    if specimen.cut != "square to x":
        return 0.0, 0.0
    tube = build_tube(target, jack_x, count, COARSE)
    left, right = specimen.left, specimen.right
    use = 0.0
    if tube.is_judged[0]:
        use = least_use_path(tube, count, left, right)[1]
    if tube.is_judged[1]:
        use = max(use, least_use_stair(tube, np.array([[left, right]]), count))
    moment = least_use_path(moment_alone(tube, target.moment_peak), count, left, right)[1]
    return max(use, 0.0) * SAFE, max(moment, 0.0) * SAFE
