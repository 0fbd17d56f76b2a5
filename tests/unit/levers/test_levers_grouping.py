"""Grouping: equal to brute force over all neighbour groupings; refusals name the limit and what it would need."""

from __future__ import annotations

from dataclasses import replace
from functools import cache

import numpy as np
import pytest
from factories import make_levers
from lever_plans import brief_of, plan_by_hand

from rigdesign.errors import BriefError
from rigdesign.findings import Refusal
from rigdesign.levers.grouping import LIMITS, cheapest, group_pads, joined, least_of, why_none
from rigdesign.levers.neighbours import Stretches, _choose
from rigdesign.levers.wiring import Wiring, ideal_levers


@cache
def all_trees(first: int, last: int):
    """Every binary tree over pads first … last as nested pairs; a pad is its number."""
    if first == last:
        return (first,)
    return tuple(
        (inner, outer)
        for middle in range(first, last)
        for inner in all_trees(first, middle)
        for outer in all_trees(middle + 1, last)
    )


def levers_of(tree, x, force):
    """Load, centroid, tiers and the levers (load, a, b) of a tree, written apart from the code under test."""
    if isinstance(tree, int):
        return force[tree], x[tree], 0, []
    p, u, s, one = levers_of(tree[0], x, force)
    q, v, t, two = levers_of(tree[1], x, force)
    middle = (p * u + q * v) / (p + q)
    return p + q, middle, 1 + max(s, t), [*one, *two, (p + q, middle - u, v - middle)]


def cost(levers):
    return sum((p * a * b / (a + b)) ** (2 / 3) * (a + b) for p, a, b in levers)


def keeps(levers, tiers, rules):
    """Whether all limits are kept, with the same slack for rounding."""
    slack = 1 + 1e-9
    return (rules.tiers is None or tiers <= rules.tiers) and all(
        max(a, b) <= rules.ratio_limit * min(a, b) * slack
        and min(a, b) * slack >= rules.shortest_arm
        and a + b <= rules.longest * slack
        for _, a, b in levers
    )


def brute_force(x, force, rules):
    """Least steel estimate over every tree that keeps the limits; infinite where none does."""
    best = np.inf
    for tree in all_trees(0, len(x) - 1):
        _, _, tiers, levers = levers_of(tree, x, force)
        if keeps(levers, tiers, rules):
            best = min(best, cost(levers))
    return best


def some_pads(seed, count):
    rng = np.random.default_rng(seed)
    return np.sort(rng.uniform(0.2, 3.4, count)), rng.uniform(0.3, 2.0, count) * 1000


def some_rules(seed):
    """Limits that sometimes bind, sometimes leave nothing, sometimes do not matter."""
    rng = np.random.default_rng(1000 + seed)
    return make_levers(
        ratio_limit=rng.choice([1.6, 3.0, 5.0, np.inf]),
        shortest_arm=rng.choice([0.0, 0.03, 0.1]),
        longest=rng.choice([np.inf, 2.0, 1.0]),
        tiers=[None, 2, 3, 4, 6][rng.integers(5)],
    )


@pytest.mark.parametrize("count", [2, 3, 4, 5, 6, 7, 8])
@pytest.mark.parametrize("seed", range(12))
def test_equals_brute_force(count, seed):
    """The dynamic programme finds the least of all neighbour groupings, with and without limits that bind."""
    x, force = some_pads(100 * seed + count, count)
    for rules in (make_levers(ratio_limit=np.inf), some_rules(100 * seed + count)):
        expected = brute_force(x, force, rules)
        best = cheapest(Stretches(x, force), rules)
        if not np.isfinite(expected):
            assert best.wiring is None
            continue
        # the same sums in another order
        assert best.value == pytest.approx(expected, rel=1e-12)
        levers = ideal_levers(best.wiring, x, force)
        assert levers.steel_estimate == pytest.approx(expected, rel=1e-12)
        assert best.wiring.is_neighbourly
        assert keeps(list(zip(levers.load, levers.a, levers.b, strict=True)), best.wiring.depth, rules)


def test_both_outcomes_occur_in_the_comparison():
    """The random limits above leave something in many cases and nothing in many others."""
    found = [
        np.isfinite(brute_force(*some_pads(100 * seed + count, count), some_rules(100 * seed + count)))
        for seed in range(12)
        for count in (3, 5, 7)
    ]
    assert 8 <= sum(found) <= 28


@pytest.mark.parametrize("seed", range(30))
def test_refusal_gives_what_each_limit_would_need(seed):
    """A limit set to the value that the refusal asks for leaves a tree, and set a little tighter leaves none."""
    x, force = some_pads(seed, 6)
    rules = make_levers(ratio_limit=2.0, shortest_arm=0.08, longest=1.5, tiers=3)
    pads = Stretches(x, force)
    if cheapest(pads, rules).wiring is not None:
        return
    for limit in LIMITS:
        best = least_of(pads, rules, limit)
        if best.wiring is None:
            assert cheapest(pads, limit.lifted(rules)).wiring is None
            continue
        tight, loose = best.value - 1e-6 * abs(best.value), best.value + 1e-6 * abs(best.value)
        if limit.key == "tiers":
            tight, loose = best.value - 1, best.value
        assert cheapest(pads, with_limit(rules, limit.key, loose)).wiring is not None
        assert cheapest(pads, with_limit(rules, limit.key, tight)).wiring is None


def with_limit(rules, key, value):
    changed = {"tiers": int(value), "shortest_arm": -value}.get(key, value)
    return replace(rules, **{key: changed})


def test_refusal_names_the_ratio_and_the_lever():
    """Pad 2 carries eight times what pad 1 does, and nothing else can be joined to pad 1 within the limit."""
    x, force = np.array([0.3, 0.6, 0.65, 2.3]), np.array([1.0, 8.0, 1.0, 3.0])
    refusal = why_none(Stretches(x, force), make_levers(ratio_limit=2.0, tiers=3))
    assert refusal.limit == "ratio_limit 2"
    assert "ratio_limit would have to be 8 at the lever that joins pad 1 and pad 2" in refusal.best
    assert refusal.remedy.startswith("raise ratio_limit to 8.0")
    assert refusal.stage == "levers"


def test_refusal_where_no_limit_alone_helps():
    x, force = np.array([0.3, 0.6, 0.65, 2.3]), np.array([1.0, 8.0, 1.0, 3.0])
    refusal = why_none(Stretches(x, force), make_levers(ratio_limit=2.0, longest=0.5))
    assert "lifting one of them alone does not help" in refusal.text
    assert refusal.limit == "ratio_limit 2 with longest 500 mm"
    assert "even without any other limit ratio_limit would have to be 8" in refusal.best
    assert "longest would have to be" in refusal.best


def test_refusal_of_tiers():
    """Eight pads need three tiers at least."""
    x, force = some_pads(5, 8)
    refusal = why_none(Stretches(x, force), make_levers(ratio_limit=np.inf, tiers=2))
    assert refusal.limit == "tiers 2"
    assert "tiers would have to be 3" in refusal.best


def test_limit_met_exactly_is_kept():
    """Loads 5 to 1 under a ratio limit of 5, whatever rounding does to the quotient."""
    for x in ([0.3, 0.7], [0.1, 1.3], [1.0 / 3.0, 0.7]):
        assert (
            cheapest(Stretches(np.array(x), np.array([500.0, 100.0])), make_levers(ratio_limit=5.0)).wiring is not None
        )


def test_ties_take_the_lower_then_the_more_balanced_tree():
    """Equal to 1e-12 counts as equal; a difference of 1e-9 does not."""
    equal = np.array([[1.0], [1.0 + 1e-14], [1.0 - 1e-14]])
    assert _choose(equal, np.array([[3.0], [2.0], [3.0]]))[0] == 1
    assert _choose(equal, np.array([[2.0], [2.0], [2.0]]))[0] == 1
    assert _choose(equal, np.array([[2.0], [3.0], [2.0]]))[0] == 0
    assert _choose(np.array([[1.0], [1.0], [1.0 - 1e-9]]), np.array([[2.0], [2.0], [5.0]]))[0] == 2


def test_symmetric_pads_are_grouped_the_same_whatever_the_rounding():
    """Three equal pads can be joined from either side: the inboard part with fewer pads is taken."""
    for start in (0.0, 0.1, 1.0 / 3.0, 2.7):
        wiring = cheapest(Stretches(start + np.array([0.0, 0.1, 0.2]), np.array([1.0, 1.0, 1.0])), make_levers()).wiring
        assert wiring is not None
        assert joined(wiring, 0) == "pad 1 and pads 2 to 3"


def test_levers_are_numbered_tier_by_tier():
    """From the jack, inboard to outboard inside a tier."""
    x, force = some_pads(9, 40)
    wiring = cheapest(Stretches(x, force), make_levers()).wiring
    assert wiring is not None
    assert np.all(np.diff(wiring.tier) >= 0)
    pivot = ideal_levers(wiring, x, force).pivot
    for tier in range(1, wiring.depth + 1):
        assert np.all(np.diff(pivot[wiring.tier == tier]) > 0)
    assert wiring.n_levers == 39


# --- prescribed groupings


def grouped(grouping, x=(0.4, 0.9, 1.7, 2.6), force=(400.0, 300.0, 200.0, 100.0), **limits):
    levers = {"grouping": grouping, **limits}
    return group_pads(plan_by_hand(brief_of(len(x), levers=levers), x, force))


def test_prescribed_pairs_have_their_pivots_at_the_centroids():
    """Pads 4, 3, 2, 1 kN at 1, 2, 3, 4 m, paired: pivots 10/7 and 10/3 m, jack at 2 m (computed by hand)."""
    x, force = np.array([1.0, 2.0, 3.0, 4.0]), np.array([4000.0, 3000.0, 2000.0, 1000.0])
    wiring = group_pads(plan_by_hand(brief_of(4, levers={"grouping": ((1, 2), (3, 4))}), x, force))
    assert isinstance(wiring, Wiring)
    levers = ideal_levers(wiring, x, force)
    np.testing.assert_allclose(levers.pivot, [2.0, 10 / 7, 10 / 3], rtol=1e-12)
    np.testing.assert_allclose(levers.load, [10000.0, 7000.0, 3000.0])


def test_prescribed_grouping_may_join_pads_that_are_no_neighbours():
    wiring = grouped(((1, 3), (2, 4)), force=(400.0, 300.0, 350.0, 250.0))
    assert isinstance(wiring, Wiring)
    assert not wiring.is_neighbourly
    assert joined(wiring, 0) == "pads 1, 3 and pads 2, 4"


def test_prescribed_halves_may_stand_in_any_order():
    """The half with the lesser centroid hangs inboard."""
    wiring = grouped(((4, 3), (2, 1)))
    assert isinstance(wiring, Wiring)
    assert [joined(wiring, row) for row in range(3)] == [
        "pads 1 to 2 and pads 3 to 4",
        "pad 1 and pad 2",
        "pad 3 and pad 4",
    ]
    assert wiring.is_neighbourly


@pytest.mark.parametrize(
    ("limits", "limit", "remedy"),
    [
        ({"ratio_limit": 1.9}, "ratio_limit 1.9", "raise ratio_limit to"),
        ({"shortest_arm": 0.25}, "shortest_arm 250 mm", "lower shortest_arm to"),
        ({"longest": 0.8}, "longest 800 mm", "raise longest to"),
        ({"tiers": 1}, "tiers 1", "raise tiers to 2"),
    ],
)
def test_prescribed_grouping_that_breaks_a_limit_names_the_lever(limits, limit, remedy):
    refusal = grouped(((1, 2), (3, 4)), **limits)
    assert isinstance(refusal, Refusal)
    assert refusal.limit == limit
    assert refusal.best.startswith("lever ")
    assert "which joins pad" in refusal.best
    assert refusal.remedy.startswith(remedy)


@pytest.mark.parametrize(
    ("grouping", "words"),
    [
        (((1, 2), (3, 5)), "pad 5 is named, the pads are 1 to 4"),
        (((1, 2), 3), "not named: pad 4"),
        (((1, 2), (3, (4, 2))), "named twice: pad 2"),
        (((1, 2, 3), 4), "[1, 2, 3] names 3"),
    ],
)
def test_prescribed_grouping_of_the_wrong_pads_is_bad_input(grouping, words):
    with pytest.raises(BriefError) as caught:
        grouped(grouping)
    assert words in str(caught.value)
    assert "[levers] grouping" in str(caught.value)


def test_one_pad_hangs_on_the_jack():
    plan = plan_by_hand(brief_of(1), [1.5], [5400.0])
    wiring = group_pads(plan)
    assert isinstance(wiring, Wiring)
    assert wiring.n_levers == 0


def test_a_pad_that_carries_nothing_is_refused():
    refusal = group_pads(plan_by_hand(brief_of(3), [0.5, 1.0, 2.0], [2000.0, 0.0, 3400.0]))
    assert isinstance(refusal, Refusal)
    assert "pad 2 carries nothing" in refusal.text


def test_prescribed_levers_of_one_tier_are_numbered_inboard_to_outboard():
    """The lever of pads 6 and 7 hangs from an inboard lever, that of pads 2 and 3 from an outboard one."""
    x = (0.3, 0.6, 0.8, 1.5, 2.0, 2.2, 2.4)
    wiring = grouped(((1, (5, 6)), ((2, 3), (4, 7))), x=x, force=(900.0, 100.0, 100.0, 300.0, 200.0, 100.0, 400.0))
    assert isinstance(wiring, Wiring)
    third = [joined(wiring, row) for row in np.flatnonzero(wiring.tier == 3)]
    assert third == ["pad 2 and pad 3", "pad 4 and pad 7", "pad 5 and pad 6"]
