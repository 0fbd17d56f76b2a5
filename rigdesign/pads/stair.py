"""The shear alone: how few steps a stair needs to keep a tube, as a bound on what N pads can do.

The shear of the pads is a stair that starts at R, ends at zero and falls at each pad.  Because it falls, it keeps
below the running least of the upper edge and above the running greatest (from the tip) of the lower edge.  Each level
covers a stretch of stations, and the longest stretch that one level can cover is the one whose intervals still have a
point in common; its end is moved back to where a pad may stand.  So covering from the left with the longest stretches
needs the fewest levels.  The first moment and the pads' force limits are not asked for: they can only cost more, so
the band use found is a proven least.
"""

from __future__ import annotations

import numpy as np

from rigdesign.pads.tube import Tube
from rigdesign.target.curve import Floats

BISECT_TOLERANCE = 1e-6
# A band use above this counts as "no band use is enough".
FAR = 1e9


def fewest_steps(tube: Tube, use: float, stretches: Floats, most: int) -> int | None:
    """Fewest pads whose shear can keep its band at band use `use`, or None if more than `most` are needed.

    Pads stand in the stretches (k, 2) [m], sorted.
    """
    high = np.minimum.accumulate(tube.shear_wanted + use * tube.shear_above)
    low = np.maximum.accumulate((tube.shear_wanted - use * tube.shear_below)[::-1])[::-1]
    last_needed = int(np.flatnonzero(low > 0)[-1]) if low[0] > 0 else -1
    if last_needed >= 0 and tube.x[last_needed] > stretches[-1, 1]:
        return None  # no pad may stand where the shear must still be held
    start, steps = _covered(low, high, 0, tube.total), 1
    while start <= last_needed:
        place = _last_allowed(float(tube.x[start]), stretches)
        if place == -np.inf:
            return None  # nor may one stand where the shear must fall already
        restart = int(np.searchsorted(tube.x, place, side="left"))
        # a pad at the station itself leaves its inboard side to the level before
        restart = min(start, restart + int(place == tube.x[restart] and not tube.outboard[restart]))
        after = _covered(low, high, restart, None)
        steps += 1
        if after <= start or steps > most:
            return None
        start = after
    return steps


def _last_allowed(x: float, stretches: Floats) -> float:
    """The place at or inboard of x where a pad may stand, −∞ if there is none."""
    before = stretches[stretches[:, 0] <= x]
    return float(min(before[-1, 1], x)) if len(before) else -np.inf


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


def least_use_stair(tube: Tube, stretches: Floats, count: int) -> float:
    """Band use of the shear that no `count` pads can go below (infinite if no band use is enough)."""
    if not tube.is_judged[1]:
        return 0.0
    low, high = 0.0, 1.0
    while fewest_steps(tube, high, stretches, count) is None:
        low, high = high, 2 * high
        if high > FAR:
            return float("inf")
    while high - low > BISECT_TOLERANCE * high and high > 1e-12:
        middle = (low + high) / 2
        if fewest_steps(tube, middle, stretches, count) is None:
            low = middle
        else:
            high = middle
    return low
