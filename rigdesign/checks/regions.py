"""Verdicts by stretch of the span: largest under- and over-test, the bands they are held to, band use."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity
from rigdesign.checks.model import Curves, RegionVerdict
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

USE_SLACK = 1e-9  # pads that the search puts exactly on the band must not fail by rounding
WHOLE_SPAN = "whole span"
WHOLE_WIDTH = "whole width"
WHOLES = (WHOLE_SPAN, WHOLE_WIDTH)


@dataclass(frozen=True)
class Sides:
    """Errors of one quantity as magnitudes: `under`, `over` and the bands they are held to, (n_stations,) each."""

    under: Floats
    over: Floats
    band_under: Floats
    band_over: Floats


def sides(curves: Curves, quantity: Quantity) -> Sides:
    """Turn signed errors and widths into under- and over-test: under means that the rig's magnitude is smaller."""
    negative = curves.target[quantity] < 0
    error = curves.error(quantity) * np.where(negative, -1.0, 1.0)
    below, above = curves.below[quantity], curves.above[quantity]
    return Sides(
        under=np.maximum(-error, 0.0),
        over=np.maximum(error, 0.0),
        band_under=np.where(negative, above, below),
        band_over=np.where(negative, below, above),
    )


def inside(curves: Curves, start_x: float, end_x: float) -> NDArray[np.bool_]:
    """Return which rows lie in the stretch: its ends with their inner sides, (n_stations,).

    A stretch that reaches an end of the span has both sides of that end, as its band does.
    """
    x, outboard = curves.x, curves.outboard
    after_start = (x > start_x) | ((x == start_x) & outboard) | (start_x <= x[0])
    before_end = (x < end_x) | ((x == end_x) & ~outboard) | (end_x >= x[-1])
    return np.asarray(after_start & before_end)


def verdicts(target: Target, curves: Curves, across: Curves | None = None) -> tuple[RegionVerdict, ...]:
    """Return a verdict for the whole span and then for each region, for every quantity of the curves.

    The whole span is held to the band in force at each station, regions included.  What is cut across comes last, over
    the whole width.
    """
    rows = _whole(curves, WHOLE_SPAN)
    for region in target.brief.acceptance.regions:
        mask = inside(curves, region.start_x, region.end_x)
        start, end = region.start_x, region.end_x
        rows += [verdict(curves, quantity, mask, start, end, region.name) for quantity in curves.target if mask.any()]
    return (*rows, *([] if across is None else _whole(across, WHOLE_WIDTH)))


def _whole(curves: Curves, name: str) -> list[RegionVerdict]:
    everywhere = np.ones(curves.x.size, bool)
    low, high = float(curves.x[0]), float(curves.x[-1])
    return [verdict(curves, quantity, everywhere, low, high, name) for quantity in curves.target]


def verdict(
    curves: Curves, quantity: Quantity, mask: NDArray[np.bool_], start_x: float, end_x: float, name: str
) -> RegionVerdict:
    """Return the verdict on one quantity over the rows of `mask` (n_stations,).

    The bands given are those in force where the largest under- and over-test are; the band use is the largest at
    any station, which is another one where the band changes along the stretch.
    """
    side = sides(curves, quantity)
    rows = np.flatnonzero(mask)
    under, over = rows[np.argmax(side.under[rows])], rows[np.argmax(side.over[rows])]
    is_judged = bool(np.isfinite(side.band_under[rows]).any() or np.isfinite(side.band_over[rows]).any())
    use = float(curves.use(quantity)[rows].max()) if is_judged else None
    return RegionVerdict(
        start_x=start_x,
        end_x=end_x,
        name=name,
        quantity=quantity,
        under=float(side.under[under]),
        under_x=float(curves.x[under]),
        over=float(side.over[over]),
        over_x=float(curves.x[over]),
        band_under=float(side.band_under[under]),
        band_over=float(side.band_over[over]),
        use=use,
        accepted=None if use is None else use <= 1.0 + USE_SLACK,
    )
