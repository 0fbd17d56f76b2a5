"""The shear alone: how few steps a stair needs to keep a tube, as a bound on what N pads can do.

The shear of the pads is a stair that starts at R, ends at zero and falls at each pad.  Each level covers a stretch of
stations, and the longest stretch that one level can cover is the one whose intervals still have a point in common; so
covering from the left with the longest stretches needs the fewest levels.  The first moment is not asked for, nor that
the stair falls: both can only cost more, so the band use found is a proven least.
"""

from __future__ import annotations

import numpy as np

from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

BISECT_TOLERANCE = 1e-6


def fewest_steps(tube: Tube, use: float, most: int) -> int | None:
    """Fewest pads whose shear can keep its band at band use `use`, or None if more than `most` are needed."""
    low = tube.shear_wanted - use * tube.shear_below
    high = tube.shear_wanted + use * tube.shear_above
    start = _covered(low, high, 0, tube.total)
    end_kept = (low <= 0) & (high >= 0)
    last_needed = -1 if end_kept.all() else low.size - 1 - int(np.argmin(end_kept[::-1]))
    steps = 1
    while start <= last_needed:
        steps += 1
        if steps > most:
            return None
        after = _covered(low, high, start, None)
        if after == start:
            return None
        start = after
    return steps


def _covered(low: Floats, high: Floats, start: int, level: float | None) -> int:
    """First station after `start` that one level cannot cover together with all since `start`."""
    chunk = 512
    floor, ceiling = (-np.inf, np.inf) if level is None else (level, level)
    slack = 1e-12 * max(float(np.max(np.abs(high))), 1e-300)
    while start < low.size:
        floors = np.maximum(np.maximum.accumulate(low[start : start + chunk]), floor)
        ceilings = np.minimum(np.minimum.accumulate(high[start : start + chunk]), ceiling)
        out = floors > ceilings + slack
        if out.any():
            return start + int(np.argmax(out))
        floor, ceiling, start, chunk = float(floors[-1]), float(ceilings[-1]), start + chunk, 2 * chunk
    return int(low.size)


def least_use_stair(tube: Tube, count: int) -> float:
    """Band use of the shear that no `count` pads can go below (infinite if no band use is enough)."""
    if not tube.is_judged[1]:
        return 0.0
    low, high = 0.0, 1.0
    while fewest_steps(tube, high, count) is None:
        low, high = high, 2 * high
        if high > 1e9:
            return float("inf")
    while high - low > BISECT_TOLERANCE * high and high > 1e-12:
        middle = (low + high) / 2
        if fewest_steps(tube, middle, count) is None:
            low = middle
        else:
            high = middle
    return low
