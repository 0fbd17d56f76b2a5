"""The cut list: everything cut once, bars never overfilled, as few bars as possible, and the bound proven."""

from __future__ import annotations

from collections import Counter
from functools import cache
from itertools import pairwise
from pathlib import Path

import pulp
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rigdesign.hardware.cutting import Cut, CutPlan, cut_list
from rigdesign.hardware.cutting_patterns import Stock, counting_bound, fewest_bars

BAR, KERF = 6.0, 0.003
TENTH = 1e-4  # m: sizes are taken to this

LEVERS = [("L1", 2.412, 2), ("L2", 1.736, 4), ("L3", 1.180, 4), ("L4", 0.655, 6), ("L5", 0.655, 2), ("L6", 0.492, 8)]

rows = st.lists(
    st.tuples(st.sampled_from(["L1", "L2", "L3", "K1"]), st.integers(300, 70_000), st.integers(0, 5)), max_size=9
)


def counted(cuts: list[Cut] | tuple[Cut, ...]) -> Counter[tuple[str, float]]:
    """Pieces by mark and length."""
    found: Counter[tuple[str, float]] = Counter()
    for cut in cuts:
        found[cut.mark, cut.length] += cut.count
    return found


def hold(plan: CutPlan, pieces: list[tuple[str, float, int]]) -> None:
    """Assert all that holds of every plan."""
    inside = counted([cut for bar in plan.bars for cut in bar.cuts])
    assert inside + counted(plan.too_long) == counted([Cut(*piece) for piece in pieces if piece[2]])
    assert all(cut.length > plan.bar for cut in plan.too_long)
    for bar in plan.bars:
        used = sum(cut.count * cut.length for cut in bar.cuts)
        assert bar.pieces >= 1
        assert used + (bar.pieces - 1) * plan.kerf <= plan.bar + 1e-9
        assert bar.offcut == pytest.approx(max(0.0, plan.bar - used - bar.pieces * plan.kerf), abs=1e-9)
    assert plan.least_bars <= plan.n_bars
    offcuts = [bar.offcut for bar in plan.bars]
    # bars stand by what tenths of a millimetre leave, so that offcuts may be a piece's rounding apart
    assert all(b >= a - 20 * TENTH for a, b in pairwise(offcuts))


def fewest_by_trying(sizes: tuple[int, ...], capacity: int) -> int:
    """Fewest bars by dynamic programming over all sets of pieces: bars used and room in the last one."""

    @cache
    def best(taken: int) -> tuple[int, int]:
        if not taken:
            return (1, -capacity)
        found = []
        for i, size in enumerate(sizes):
            if taken >> i & 1:
                bars, minus_room = best(taken & ~(1 << i))
                fits = -minus_room >= size
                found.append((bars, minus_room + size) if fits else (bars + 1, size - capacity))
        return min(found)

    return best((1 << len(sizes)) - 1)[0]


def fewest_by_another_solver(stock: Stock) -> int:
    """Fewest bars with one variable for each size and bar, by CBC."""
    most = sum(stock.demand)
    problem = pulp.LpProblem("bars", pulp.LpMinimize)
    used = [pulp.LpVariable(f"u{b}", cat="Binary") for b in range(most)]
    taken = [[pulp.LpVariable(f"n{k}_{b}", 0, cat="Integer") for b in range(most)] for k in range(len(stock.sizes))]
    problem += pulp.lpSum(used)
    for b in range(most):
        problem += pulp.lpSum(s * row[b] for s, row in zip(stock.sizes, taken, strict=True)) <= stock.capacity * used[b]
        if b:
            problem += used[b] <= used[b - 1]
    for row, wanted in zip(taken, stock.demand, strict=True):
        problem += pulp.lpSum(row) == wanted
    assert problem.solve(pulp.PULP_CBC_CMD(msg=False)) == pulp.LpStatusOptimal
    return round(pulp.value(problem.objective))


def test_a_rigs_levers():
    """26 pieces of 25.66 m need five bars; nearly all that is left of them is in one piece."""
    plan = cut_list(LEVERS, BAR, KERF)
    hold(plan, LEVERS)
    total = sum(length * count for _, length, count in LEVERS)
    assert (plan.n_bars, plan.least_bars, plan.proven) == (5, 5, True)
    kerfs = sum(count for _, _, count in LEVERS) * KERF
    assert plan.offcut == pytest.approx(5 * BAR - total - kerfs - sum(b.offcut for b in plan.bars[:-1]), abs=1e-9)
    assert plan.offcut > 0.75 * (5 * BAR - total - kerfs)  # most of what is left is in one piece


def test_the_example_of_the_page_holds():
    page = (Path(__file__).parents[3] / "docs" / "catalogue.md").read_text(encoding="utf-8")
    block = page.split("```python\n")[1].split("```")[0]
    assert "assert (plan.n_bars, plan.least_bars" in block
    exec(block, {})


def test_the_kerf_is_not_taken_where_the_bar_ends():
    assert cut_list([("L1", 1.998, 3)], 6.0, 0.003).n_bars == 1  # two kerfs, then the end
    assert cut_list([("L1", 1.998, 3)], 6.0, 0.003).offcut == 0.0
    assert cut_list([("L1", 1.9981, 3)], 6.0, 0.003).n_bars == 2
    assert cut_list([("L1", 6.0, 2)], 6.0, 0.003).n_bars == 2


def test_less_than_a_kerf_is_no_offcut():
    plan = cut_list([("L1", 1.9975, 3)], 6.0, 0.003)
    assert (plan.n_bars, plan.offcut) == (1, 0.0)


@pytest.mark.parametrize(("length", "count", "bar"), [(1.104, 5, 5.52), (1.1, 1, 1.2 - 0.1)])
def test_lengths_that_no_binary_number_holds_still_fit(length, count, bar):
    """1.104 m are 11040.000000000002 tenths of a millimetre, 1.2 m less 0.1 m are 10999.999999999998."""
    assert cut_list([("L1", length, count)], bar, 0.0).n_bars == 1


def test_what_no_bar_can_give_is_listed_apart():
    plan = cut_list([("L1", 6.001, 2), ("L2", 2.5, 1), ("L3", 7.2, 0)], 6.0, 0.003)
    assert plan.too_long == (Cut("L1", 6.001, 2),)
    assert [bar.cuts for bar in plan.bars] == [(Cut("L2", 2.5, 1),)]


def test_nothing_to_cut_needs_no_bar():
    plan = cut_list([], 6.0, 0.003)
    assert (plan.bars, plan.least_bars, plan.too_long, plan.offcut, plan.proven) == ((), 0, (), 0.0, True)


def test_marks_of_one_length_come_in_the_order_that_they_were_given_in():
    plan = cut_list([("L7", 1.5, 1), ("L2", 1.5, 2)], 6.0, 0.003)
    assert plan.bars[0].cuts == (Cut("L7", 1.5, 1), Cut("L2", 1.5, 2))


def test_bars_that_are_cut_alike_stand_beside_each_other():
    plan = cut_list([("L1", 3.1, 3), ("L2", 2.8, 3), ("L3", 4.4, 2), ("L4", 1.5, 2)], 6.0, 0.003)
    assert [tuple(cut.mark for cut in bar.cuts) for bar in plan.bars] == [("L3", "L4")] * 2 + [("L1", "L2")] * 3


@pytest.mark.parametrize(
    ("pieces", "bar", "kerf"),
    [
        ([("L1", 0.0, 1)], 6.0, 0.003),
        ([("L1", float("nan"), 1)], 6.0, 0.003),
        ([("L1", 1.0, -1)], 6.0, 0.003),
        ([("L1", 1.0, 1)], 0.0, 0.003),
        ([("L1", 1.0, 1)], 6.0, -0.001),
        ([("L1", 1.0, 1)], float("inf"), 0.003),
    ],
)
def test_sizes_out_of_range_are_refused(pieces, bar, kerf):
    with pytest.raises(ValueError, match="to cut"):
        cut_list(pieces, bar, kerf)


@settings(deadline=None, derandomize=True, max_examples=60)
@given(rows, st.sampled_from([0.0, 0.003, 0.0127]))
def test_everything_is_cut_once_and_no_bar_is_overfilled(pieces, kerf):
    metres = [(mark, length * TENTH, count) for mark, length, count in pieces]
    plan = cut_list(metres, BAR, kerf)
    hold(plan, metres)
    assert plan == cut_list(metres, BAR, kerf)


@settings(deadline=None, derandomize=True, max_examples=60)
@given(st.lists(st.integers(8, 60), min_size=1, max_size=9), st.integers(60, 97))
def test_as_few_bars_as_trying_everything_finds(lengths, capacity):
    counts = Counter(lengths)
    sizes = tuple(sorted(counts, reverse=True))
    packing, least = fewest_bars(Stock(sizes, tuple(counts[size] for size in sizes), capacity))
    assert len(packing) == least == fewest_by_trying(tuple(lengths), capacity)


@settings(deadline=None, derandomize=True, max_examples=40)
@given(rows)
def test_a_longer_bar_or_a_thinner_saw_never_needs_more_bars(pieces):
    metres = [(mark, length * TENTH, count) for mark, length, count in pieces if length <= 60_000]
    plan = cut_list(metres, 6.0, 0.004)
    assert cut_list(metres, 6.5, 0.004).least_bars <= plan.n_bars
    assert cut_list(metres, 6.0, 0.002).least_bars <= plan.n_bars


SEEN_THROUGH = {
    "a bound that counting misses": (Stock((51, 47, 32, 28, 26), (4, 1, 1, 4, 3), 100), 5, 6),
    "a packing that no simple rule finds": (
        Stock((41, 39, 38, 37, 35, 31, 24, 22, 21), (2, 4, 2, 2, 1, 3, 3, 4, 1), 100),
        7,
        7,
    ),
    "a packing that cuts too much at first": (Stock((29, 24, 23, 22, 16, 15), (3, 4, 3, 4, 3, 3), 60), 8, 8),
    "a bound that only all patterns give": (
        Stock((31, 30, 26, 22, 16, 13, 12, 11, 9), (3, 3, 3, 2, 1, 1, 2, 3, 3), 60),
        7,
        8,
    ),
}


@pytest.mark.parametrize(("stock", "counted_bars", "bars"), SEEN_THROUGH.values(), ids=SEEN_THROUGH.keys())
def test_hard_cases_are_closed(stock, counted_bars, bars):
    assert counting_bound(stock) == counted_bars
    packing, least = fewest_bars(stock)
    assert len(packing) == least == bars
    assert tuple(map(sum, zip(*packing, strict=True))) == stock.demand
    assert all(stock.filled(pattern) <= stock.capacity for pattern in packing)


@pytest.mark.parametrize(
    ("stock", "bars", "last"),
    [
        # another rule packs as few bars, but its emptiest one holds 28
        (Stock((47, 37, 14), (2, 2, 3), 100), 3, 14),
        # 43 before pieces are moved out of the emptiest bar
        (Stock((28, 25, 23, 18, 13, 8), (1, 2, 1, 2, 1, 1), 60), 3, 41),
    ],
)
def test_what_is_left_is_left_in_one_bar(stock, bars, last):
    packing, _ = fewest_bars(stock)
    assert (len(packing), min(map(stock.filled, packing))) == (bars, last)


MANY = {
    "the linear programme's bound": (
        [
            202,
            201,
            199,
            198,
            197,
            192,
            188,
            187,
            179,
            175,
            174,
            173,
            172,
            169,
            168,
            167,
            163,
            162,
            157,
            144,
            143,
            138,
            136,
            134,
            133,
            128,
            126,
        ],
        [2, 2, 2, 2, 2, 2, 2, 1, 1, 2, 1, 2, 2, 2, 1, 1, 1, 2, 1, 1, 1, 1, 1, 2, 1, 2, 2],
        601,
        (12, 13),
    ),
    "the integer programme's packing": (
        [
            392,
            388,
            381,
            374,
            364,
            353,
            349,
            341,
            328,
            327,
            324,
            319,
            314,
            298,
            281,
            278,
            270,
            269,
            262,
            253,
            252,
            250,
            233,
            227,
            226,
            224,
            220,
            217,
            210,
        ],
        [2, 1, 2, 1, 1, 1, 2, 2, 1, 1, 2, 2, 2, 2, 1, 1, 1, 1, 2, 1, 1, 1, 2, 1, 1, 1, 1, 1, 1],
        997,
        (12, 12),
    ),
}


@pytest.mark.parametrize(("sizes", "demand", "capacity", "bars"), MANY.values(), ids=MANY.keys())
def test_what_closes_cases_with_too_many_patterns_to_list(sizes, demand, capacity, bars):
    """Counting gives the first number of bars; without what the case is named after, a gap would be left."""
    stock = Stock(tuple(sizes), tuple(demand), capacity)
    packing, least = fewest_bars(stock)
    assert (counting_bound(stock), len(packing), least) == (*bars, bars[1])


@pytest.mark.filterwarnings("ignore::DeprecationWarning:pulp")
@pytest.mark.parametrize(
    ("stock", "bars"),
    [
        (Stock((51, 47, 32, 28, 26), (4, 1, 1, 4, 3), 100), 6),
        (Stock((43, 38, 33, 29, 17), (2, 3, 1, 4, 2), 97), 5),
        (Stock((59, 37, 22, 19), (1, 2, 5, 2), 80), 4),
    ],
)
def test_another_solver_finds_no_fewer(stock, bars):
    assert len(fewest_bars(stock)[0]) == fewest_by_another_solver(stock) == bars
