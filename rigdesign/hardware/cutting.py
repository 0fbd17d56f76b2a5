"""The cut list: which pieces come out of which stock bar, so that as few bars as possible are bought.

A saw takes its kerf after every piece; where a bar ends with the piece there is nothing to saw, and where less than a
kerf is left the saw takes all of it.  So pieces fit a bar when the sum of their lengths and of the kerfs between them
is at most its length.  Sizes are taken to a tenth of a millimetre, pieces and kerf rounded up, bars down.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from math import ceil, floor, gcd, isfinite

from rigdesign.hardware.cutting_patterns import Pattern, Stock, fewest_bars

PER_METRE = 10_000
"""Sizes are whole tenths of a millimetre."""

ROUNDING = 1e-6
"""A size nearer than this to a whole tenth of a millimetre, in tenths, is that tenth: 0.3 m is 2999.9999999999995."""

NOTHING = 1e-9
"""An offcut shorter than this [m] is rounding."""


@dataclass(frozen=True)
class Cut:
    """So many pieces of one mark, each of `length` [m]."""

    mark: str
    length: float
    count: int


@dataclass(frozen=True)
class StockBar:
    """One bar: what is cut from it, longest piece first, and the `offcut` [m] that is left behind the last kerf."""

    cuts: tuple[Cut, ...]
    offcut: float

    @property
    def pieces(self) -> int:
        """Number of pieces that come out of the bar."""
        return sum(cut.count for cut in self.cuts)


@dataclass(frozen=True)
class CutPlan:
    """A cut list for bars of length `bar` [m] and a saw that takes `kerf` [m].

    `bars` stand in order of their offcuts, shortest first, bars that are cut alike beside each other.  No arrangement
    needs fewer than `least_bars`.  `too_long` are the pieces that no bar can give; they are in no bar.
    """

    bar: float
    kerf: float
    bars: tuple[StockBar, ...]
    least_bars: int
    too_long: tuple[Cut, ...]

    @property
    def n_bars(self) -> int:
        """Number of bars to buy."""
        return len(self.bars)

    @property
    def proven(self) -> bool:
        """Whether no arrangement needs fewer bars."""
        return self.n_bars == self.least_bars

    @property
    def offcut(self) -> float:
        """Longest offcut [m]; 0 without bars."""
        return max((bar.offcut for bar in self.bars), default=0.0)


def cut_list(pieces: Sequence[tuple[str, float, int]], bar: float, kerf: float) -> CutPlan:
    """Return which pieces to cut from which bar so that few bars are needed.

    The number of bars is the least possible or, where the search was not able to close the gap, not more than what
    `least_bars` leaves open: that is a proven bound, of the linear programme over cutting patterns or better.  Among
    arrangements with that many bars, one with a long single offcut is sought, without proof.  The same pieces in the
    same order give the same plan.

    Parameters
    ----------
    pieces
        Mark, length [m] above 0 and quantity of each; a mark may stand in several rows.
    bar
        Length of a stock bar [m], above 0.
    kerf
        Width that the saw takes [m], 0 or more.

    Raises
    ------
    ValueError
        Where a length, a quantity, the bar or the kerf is out of range.

    Examples
    --------
    >>> plan = cut_list([("L1", 2.9, 2), ("L2", 1.45, 3)], bar=6.0, kerf=0.003)
    >>> plan.n_bars, plan.least_bars, round(plan.offcut, 3)
    (2, 2, 1.644)
    >>> plan.bars[1].cuts
    (Cut(mark='L1', length=2.9, count=1), Cut(mark='L2', length=1.45, count=1))
    """
    _check(pieces, bar, kerf)
    whole_bar, whole_kerf = floor(bar * PER_METRE + ROUNDING), _tenths(kerf)
    queues: dict[int, list[tuple[str, float]]] = defaultdict(list)
    too_long = []
    for mark, length, quantity in pieces:
        if _tenths(length) > whole_bar:
            too_long.append(Cut(mark, length, quantity))
        else:
            queues[_tenths(length) + whole_kerf] += [(mark, length)] * quantity
    sizes = sorted((size for size, queue in queues.items() if queue), reverse=True)
    # one step for all: lengths in whole millimetres make the programmes ten times smaller
    step = gcd(*sizes) if sizes else 1
    stock = Stock(
        sizes=tuple(size // step for size in sizes),
        demand=tuple(len(queues[size]) for size in sizes),
        capacity=(whole_bar + whole_kerf) // step,
    )
    patterns, least = fewest_bars(stock)
    waiting = [list(queues[size]) for size in sizes]
    bars = [_bar(pattern, waiting, bar, kerf) for pattern in _in_order(patterns, stock)]
    return CutPlan(bar, kerf, tuple(bars), least, tuple(cut for cut in too_long if cut.count))


def _check(pieces: Sequence[tuple[str, float, int]], bar: float, kerf: float) -> None:
    if not (isfinite(bar) and bar > 0) or not (isfinite(kerf) and kerf >= 0):
        raise ValueError(f"no bar to cut from: {bar} m long, kerf {kerf} m")
    for mark, length, quantity in pieces:
        if not (isfinite(length) and length > 0) or quantity < 0:
            raise ValueError(f"{mark}: nothing to cut: {quantity} pieces of {length} m")


def _tenths(length: float) -> int:
    """A length [m] in tenths of a millimetre, rounded up."""
    return ceil(length * PER_METRE - ROUNDING)


def _in_order(patterns: Iterable[Pattern], stock: Stock) -> list[Pattern]:
    """Patterns by what they leave, least first; like ones beside each other, those with the longest pieces first."""
    return sorted(patterns, key=lambda pattern: (-stock.filled(pattern), [-count for count in pattern]))


def _bar(pattern: Pattern, waiting: list[list[tuple[str, float]]], bar: float, kerf: float) -> StockBar:
    """Take the pieces of one pattern off the lists of those that wait."""
    taken: dict[tuple[str, float], int] = defaultdict(int)
    for queue, count in zip(waiting, pattern, strict=True):
        for piece in queue[:count]:
            taken[piece] += 1
        del queue[:count]
    cuts = tuple(Cut(mark, length, count) for (mark, length), count in taken.items())
    rest = bar - sum(cut.count * (cut.length + kerf) for cut in cuts)
    return StockBar(cuts, rest if rest > NOTHING else 0.0)  # below 0 the bar ends with the piece or inside the kerf
