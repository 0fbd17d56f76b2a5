"""The fewest free pads: counted up from what is proven, in steps that grow, and back again.

A number of pads whose bound is above one band is never tried.  A search may miss its best pads, so a number that was
found wanting is taken for too few, and so are those below it.
"""

from __future__ import annotations

from collections.abc import Callable

from rigdesign.findings import Refusal
from rigdesign.pads.model import PadPlan
from rigdesign.pads.surface.line_bounds import LineBounds

CLOSE = 1.01
"""Where no number of pads can keep the bands, the fewest whose bound is this close to that of the most are taken."""

Answer = PadPlan | Refusal


def fewest_free(bounds: LineBounds, first: int, most: int, planned: Callable[[int], Answer]) -> Answer:
    """Return the plan with the fewest free pads, from `first` to `most`, that keeps the bands, or the best found.

    `planned` gives the plan of so many pads.
    """
    first, floor = min(first, most), bounds.least_use(most)
    if floor > 1:
        return _first_plan(planned, first, _fewest_close(bounds, first, most, floor))
    first = min(max(first, bounds.fewest(most)), most)
    found: dict[int, Answer] = {}

    def keeps(count: int) -> bool:
        found[count] = planned(count)
        return _use(found[count]) <= 1

    low, high, step = first - 1, first, 1
    while not keeps(high):
        if high == most:
            return min(found.values(), key=_use)
        low, high, step = high, min(high + step, most), 2 * step
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (low, middle) if keeps(middle) else (middle, high)
    return found[high]


def _first_plan(planned: Callable[[int], Answer], least: int, count: int) -> Answer:
    """The plan of `count` pads, or of half-way fewer again and again where so many cannot be set up."""
    answer = planned(count)
    while isinstance(answer, Refusal) and count > least:
        count = (least + count) // 2
        answer = planned(count)
    return answer


def _use(answer: Answer) -> float:
    return answer.proof.band_use if isinstance(answer, PadPlan) else float("inf")


def _fewest_close(bounds: LineBounds, low: int, high: int, floor: float) -> int:
    """The fewest pads, from `low` to `high`, whose bound is close to `floor`, that of `high`."""
    while low < high:
        middle = (low + high) // 2
        if bounds.least_use(middle) <= CLOSE * floor:
            high = middle
        else:
            low = middle + 1
    return low
