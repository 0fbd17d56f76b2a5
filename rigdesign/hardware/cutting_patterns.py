"""Fewest bars for pieces of whole sizes: packings by simple rules, lower bounds, and programmes over patterns.

    pattern     how many pieces of each size one bar gives
    fill        what a pattern takes of the bar's capacity; kerfs are in sizes and capacity already

Simple rules and a bound by counting nearly always meet, and then the answer is proven without any programme.  Where
they do not, patterns are generated for the linear programme (minimise bars, each size cut often enough), whose value
rounded up is a bound, and the integer programme over them looks for a better packing.  Where that still leaves a gap
and all full patterns can be listed, the integer programme over all of them decides.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from itertools import islice
from math import ceil
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

Pattern = tuple[int, ...]

MOST_PATTERNS = 4000
"""So many full patterns are handed to the integer programme at most; more would make it slow."""

MOST_LISTED = 20_000
"""So many patterns are looked at while full ones are listed."""

MOST_NODES = 5000
"""So many nodes does the integer programme look at."""

MOST_ROUNDS = 400
"""So many rounds of the linear programme; its bound is valid after each of them."""

BELOW_WHOLE = 1e-6
"""A bound this little above a whole number is that number: the programmes are solved to about 1e-7."""


@dataclass(frozen=True)
class Stock:
    """Sizes that differ, falling; how many of each are wanted, at least 1; capacity of a bar, at least each size."""

    sizes: tuple[int, ...]
    demand: tuple[int, ...]
    capacity: int

    def filled(self, pattern: Pattern) -> int:
        """Return what a pattern takes of a bar's capacity."""
        return sum(size * count for size, count in zip(self.sizes, pattern, strict=True))


def fewest_bars(stock: Stock) -> tuple[list[Pattern], int]:
    """Return one pattern for each bar, together exactly what is wanted, and the proven least number of bars.

    >>> fewest_bars(Stock(sizes=(6, 4, 3), demand=(1, 1, 2), capacity=10))
    ([(1, 1, 0), (0, 0, 2)], 2)
    """
    if not stock.sizes:
        return [], 0
    best = _better(stock, *(_settled(stock, list(rule(stock))) for rule in (_longest_first, _with_longest, _fullest)))
    least = counting_bound(stock)
    if len(best) > least:
        patterns, bound = _generated(stock, best)
        least = max(least, bound)
        if len(best) > least:
            best = _better(stock, best, _chosen(stock, patterns)[0])
        if len(best) > least:
            full = _full_patterns(stock)
            if full is not None:
                found, bound = _chosen(stock, full)
                best, least = _better(stock, best, found), max(least, bound)
    return best, least


def counting_bound(stock: Stock) -> int:
    """Return a number of bars below which no packing can be: Martello and Toth's bound L2 (1990), from memory.

    Pieces above half a bar each need one of their own; what small pieces, from a threshold on, do not find beside
    those needs further bars.  The best threshold counts.  Beside it, no bar gives more than k pieces that are longer
    than its (k + 1)th part.
    """
    half, bars = stock.capacity / 2, 0
    pairs = list(zip(stock.sizes, stock.demand, strict=True))
    for least in {0, *(size for size in stock.sizes if size <= half)}:
        alone = sum(count for size, count in pairs if size > stock.capacity - least)
        large = [(size, count) for size, count in pairs if half < size <= stock.capacity - least]
        small = sum(size * count for size, count in pairs if least <= size <= half)
        room = sum((stock.capacity - size) * count for size, count in large)
        extra = max(0, -((room - small) // stock.capacity))
        bars = max(bars, alone + sum(count for _, count in large) + extra)
    for most in range(1, stock.capacity // stock.sizes[-1] + 1):
        long = sum(count for size, count in pairs if size * (most + 1) > stock.capacity)
        bars = max(bars, -(-long // most))
    return bars


def _better(stock: Stock, *packings: list[Pattern] | None) -> list[Pattern]:
    """Of packings, that with the fewest bars, then that with the emptiest single bar, then the first."""
    found = [packing for packing in packings if packing is not None]
    return min(found, key=lambda packing: (len(packing), min(stock.filled(pattern) for pattern in packing)))


# ---- packings by simple rules ----------------------------------------------------------------------------------------


def _longest_first(stock: Stock) -> Iterator[Pattern]:
    """Each piece, longest first, into the first bar that has room for it."""
    bars: list[list[int]] = []
    left: list[int] = []
    for kind, (size, count) in enumerate(zip(stock.sizes, stock.demand, strict=True)):
        for _ in range(count):
            place = next((i for i, room in enumerate(left) if room >= size), len(bars))
            if place == len(bars):
                bars.append([0] * len(stock.sizes))
                left.append(stock.capacity)
            bars[place][kind] += 1
            left[place] -= size
    return map(tuple, bars)


def _with_longest(stock: Stock) -> Iterator[Pattern]:
    """Bar by bar: the longest piece that is left, with what fills the bar best beside it."""
    return _bar_by_bar(stock, lambda left: next(kind for kind, count in enumerate(left) if count))


def _fullest(stock: Stock) -> Iterator[Pattern]:
    """Bar by bar: what fills it best."""
    return _bar_by_bar(stock, lambda left: None)


def _bar_by_bar(stock: Stock, first: Callable[[list[int]], int | None]) -> Iterator[Pattern]:
    left = list(stock.demand)
    while any(left):
        kind = first(left)
        room = stock.capacity
        if kind is not None:
            left[kind] -= 1
            room -= stock.sizes[kind]
        pattern = list(_best_fill(stock.sizes, left, room))
        left = [have - count for have, count in zip(left, pattern, strict=True)]
        if kind is not None:
            pattern[kind] += 1
        yield tuple(pattern)


def _best_fill(sizes: tuple[int, ...], left: list[int] | Pattern, room: int) -> Pattern:
    """The pieces of those left that fill `room` best, long ones rather than short.

    Bit k of `reached` says whether the pieces so far can fill exactly k; whole numbers of any length make one shift
    and one "or" of each piece.
    """
    mask = (1 << (room + 1)) - 1
    kinds = [kind for kind in reversed(range(len(sizes))) for _ in range(min(left[kind], room // sizes[kind]))]
    reached = [1]
    for kind in kinds:  # short ones first, so that the way back meets the long ones first
        reached.append((reached[-1] | (reached[-1] << sizes[kind])) & mask)
    fill = reached[-1].bit_length() - 1
    pattern = [0] * len(sizes)
    for before, kind in zip(reversed(reached[:-1]), reversed(kinds), strict=True):
        if fill >= sizes[kind] and before >> (fill - sizes[kind]) & 1:
            pattern[kind] += 1
            fill -= sizes[kind]
    return tuple(pattern)


def _settled(stock: Stock, packing: list[Pattern]) -> list[Pattern]:
    """Move pieces out of the emptiest bar for as long as another bar can be filled better with them.

    Each bar and the emptiest one are packed again together: the bar as full as can be, the rest into the emptiest,
    which then holds less than before.  An empty bar is left out.
    """
    bars = sorted(packing, key=stock.filled, reverse=True)
    moved = True
    while moved and len(bars) > 1:
        moved = False
        for i in range(len(bars) - 1):
            both = tuple(a + b for a, b in zip(bars[i], bars[-1], strict=True))
            refilled = _best_fill(stock.sizes, both, stock.capacity)
            if stock.filled(refilled) > stock.filled(bars[i]):
                bars[i], moved = refilled, True
                bars[-1] = tuple(a - b for a, b in zip(both, refilled, strict=True))
        if not any(bars[-1]):
            bars.pop()
        bars.sort(key=stock.filled, reverse=True)
    return bars


# ---- programmes over patterns ----------------------------------------------------------------------------------------


def _generated(stock: Stock, packing: list[Pattern]) -> tuple[list[Pattern], int]:
    """Patterns with which the linear programme of fewest bars is solved, and its bound rounded up.

    Begins with the patterns of a packing; each round adds the pattern that the prices of the sizes call for.  With z
    the worth of the best pattern at these prices, the worth of all that is wanted over z is a valid bound in every
    round (Farley 1990, from memory).
    """
    import numpy as np

    demand = np.array(stock.demand, dtype=float)
    patterns, bound = list(dict.fromkeys(packing)), 0.0
    for _ in range(MOST_ROUNDS):
        prices = _prices(np.array(patterns, dtype=float).T, demand)
        pattern, worth = _dearest(stock, prices)
        bound = max(bound, float(prices @ demand) / max(worth, 1.0))
        if worth <= 1 + BELOW_WHOLE / 10 or pattern in patterns:
            break
        patterns.append(pattern)
    return patterns, ceil(bound - BELOW_WHOLE)


def _prices(columns: Floats, demand: Floats) -> Floats:
    """Prices of the sizes: duals of "fewest bars so that each size is cut often enough", none below 0."""
    import numpy as np
    from scipy.optimize import linprog

    from rigdesign.pads.surface.quiet import quiet

    with quiet():
        solved = linprog(np.ones(columns.shape[1]), A_ub=-columns, b_ub=-demand, method="highs")
    prices: Floats = np.maximum(0.0, -np.asarray(solved.ineqlin.marginals, dtype=float))
    return prices


def _dearest(stock: Stock, prices: Floats) -> tuple[Pattern, float]:
    """The pattern worth most at these prices, no size more often than wanted; by dynamic programming over the fill."""
    import numpy as np

    worth = np.zeros(stock.capacity + 1)
    steps: list[tuple[int, int, NDArray[np.bool_]]] = []
    for kind, (size, most) in enumerate(zip(stock.sizes, stock.demand, strict=True)):
        for count in _doubling(min(most, stock.capacity // size)):
            weight = size * count
            taking = worth[:-weight] + count * prices[kind]
            better = taking > worth[weight:] + 1e-12  # else rounding would take pieces that are worth nothing
            worth[weight:] = np.where(better, taking, worth[weight:])
            steps.append((kind, count, better))
    pattern, fill = [0] * len(stock.sizes), int(np.argmax(worth))
    for kind, count, better in reversed(steps):
        weight = stock.sizes[kind] * count
        if fill >= weight and better[fill - weight]:
            pattern[kind] += count
            fill -= weight
    return tuple(pattern), float(worth.max())


def _doubling(most: int) -> Iterator[int]:
    """1, 2, 4 … and a rest: sums of some of them make every number up to `most`, and none above."""
    count = 1
    while most > 0:
        yield min(count, most)
        most, count = most - count, 2 * count


def _full_patterns(stock: Stock) -> list[Pattern] | None:
    """All patterns to which no further piece can be added; None where there are too many."""

    def extended(kind: int, room: int, head: Pattern) -> Iterator[Pattern]:
        if kind == len(stock.sizes):
            yield head
            return
        size = stock.sizes[kind]
        for count in range(min(stock.demand[kind], room // size), -1, -1):
            yield from extended(kind + 1, room - count * size, (*head, count))

    def is_full(pattern: Pattern) -> bool:
        room = stock.capacity - stock.filled(pattern)
        kinds = zip(pattern, stock.demand, stock.sizes, strict=True)
        return not any(count < wanted and size <= room for count, wanted, size in kinds)

    listed = list(islice(extended(0, stock.capacity, ()), MOST_LISTED + 1))
    full = [pattern for pattern in listed if is_full(pattern)]
    return full if len(listed) <= MOST_LISTED and len(full) <= MOST_PATTERNS else None


def _chosen(stock: Stock, patterns: list[Pattern]) -> tuple[list[Pattern] | None, int]:
    """Packing with the fewest bars of these patterns, None where none was found, and the bound for these patterns."""
    import numpy as np
    from scipy.optimize import Bounds, LinearConstraint, milp

    from rigdesign.pads.surface.quiet import quiet

    columns = np.array(patterns, dtype=float).T
    one = np.ones(len(patterns))
    enough = LinearConstraint(columns, np.array(stock.demand, dtype=float), np.inf)
    options = {"node_limit": MOST_NODES, "mip_rel_gap": 0.0}
    with quiet():
        solved = milp(one, constraints=enough, bounds=Bounds(0, np.inf), integrality=one, options=options)
    bound = solved.get("mip_dual_bound")
    least = ceil(bound - BELOW_WHOLE) if bound is not None and np.isfinite(bound) else 0
    if solved.x is None:
        return None, least
    times = np.rint(solved.x).astype(int)
    bars = [pattern for pattern, count in zip(patterns, times, strict=True) for _ in range(count)]
    return _settled(stock, _exactly(stock, bars)), least


def _exactly(stock: Stock, bars: list[Pattern]) -> list[Pattern]:
    """Bars without what they give beyond what is wanted, taken from the last bars."""
    left = list(stock.demand)
    kept = []
    for bar in sorted(bars, key=stock.filled, reverse=True):
        pattern = tuple(min(have, count) for have, count in zip(left, bar, strict=True))
        left = [have - count for have, count in zip(left, pattern, strict=True)]
        if any(pattern):
            kept.append(pattern)
    return kept
