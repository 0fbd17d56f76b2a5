"""Grouping in plan: compared with every possible tree, and with what is seen by hand."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
import shapely
from plan_trees import Looked, all_looked, every_tree, gridded, plan_of, scattered

from rigdesign.errors import BriefError
from rigdesign.findings import Refusal
from rigdesign.levers.surface.clashes import clash, clashing
from rigdesign.levers.surface.grouping import Grouped, group_in_plan
from rigdesign.levers.surface.limits import field_of, limits_of
from rigdesign.levers.surface.nodes import Maker, Node, items_of
from rigdesign.levers.surface.search import Search, clash_count, first_tree
from rigdesign.levers.surface.subsets import BROKEN, Problem, partners, steel_rule


def grouped(plan) -> Grouped:
    answer = group_in_plan(plan)
    assert isinstance(answer, Grouped), answer
    return answer


def nest_of(node: Node):
    return tuple(nest_of(kid) for kid in node.kids) if node.kids else node.pad


def test_trees_are_counted_right():
    # (2n − 3)!! binary trees; with groups of three too: 1, 1, 4, 25, 220 (every root splits in two or in three)
    assert [sum(1 for _ in every_tree(tuple(range(n)), False)) for n in (2, 3, 4, 5)] == [1, 3, 15, 105]
    assert [sum(1 for _ in every_tree(tuple(range(n)), True)) for n in (2, 3, 4)] == [1, 4, 25]


LIMITS = [
    {},
    {"ratio_limit": 1.8},
    {"shortest_arm": 0.12},
    {"longest": 0.9},
    {"tiers": 3},
    {"ratio_limit": 2.5, "shortest_arm": 0.05, "longest": 1.2, "tiers": 3},
]


@pytest.mark.parametrize("limits", LIMITS, ids=lambda limits: ",".join(limits) or "none")
@pytest.mark.parametrize(("count", "plates"), [(3, True), (5, True), (6, False), (5, False)])
def test_the_least_steel_of_all_trees(count, plates, limits):
    for seed in (1, 2, 3):
        plan = scattered(count, seed, plates=plates, **limits)
        trees, answer = all_looked(plan), group_in_plan(plan)
        if not trees:
            assert isinstance(answer, Refusal)
            continue
        least = min(tree.steel for tree in trees)
        assert isinstance(answer, Grouped)
        assert answer.least is not None
        assert answer.maker.steel(answer.least) * answer.maker.field.steel_unit == pytest.approx(least, rel=1e-9)
        assert Looked(plan, nest_of(answer.root)).keeps()


@pytest.mark.parametrize(("count", "plates", "seeds"), [(5, True, (1, 24)), (6, False, (26, 35, 36))])
def test_the_least_steel_of_all_trees_that_keep_clear(count, plates, seeds):
    for seed in seeds:
        plan = scattered(count, seed, plates=plates, clearance=0.3)
        clear = [tree.steel for tree in all_looked(plan) if tree.closest >= 0.3]
        answer = grouped(plan)
        assert answer.is_best
        assert answer.clashes == 0
        assert answer.steel == pytest.approx(min(clear), rel=1e-9)
    # the last case is one where keeping clear costs something
    assert answer.above > 1e-5


def test_where_nothing_keeps_clear_the_fewest_clashes_are_proven():
    # four pads in one spot, four in another: levers of tier 2 and 3 must come closer than the clearance
    x = [0.0, 0.1, 0.02, 0.13, 2.0, 2.1, 2.03, 2.16]
    y = [0.0, 0.01, 0.1, 0.12, 0.0, 0.02, 0.11, 0.1]
    plan = plan_of(x, y, [100.0, 110.0, 120.0, 130.0, 105.0, 115.0, 125.0, 135.0], clearance=0.5, tiers=3)
    answer = grouped(plan)
    assert answer.is_best
    assert answer.clashes > 0


def test_six_pads_with_plates_against_every_tree():
    plan = scattered(6, 11, plates=True, ratio_limit=3.0, clearance=0.1)
    trees = all_looked(plan)
    answer = grouped(plan)
    assert answer.steel == pytest.approx(min(tree.steel for tree in trees if tree.closest >= 0.1), rel=1e-9)


@pytest.mark.parametrize("plates", [False, True])
def test_pads_pair_across_first(plates):
    for seed in (1, 4):
        plan = scattered(5, seed, plates=plates, pair="across first", ratio_limit=np.inf)
        best = min((tree.lonely, tree.steel) for tree in all_looked(plan))
        answer = grouped(plan)
        assert answer.lonely == best[0]
        assert answer.steel == pytest.approx(best[1], rel=1e-9)


def test_pairs_along_are_those_across_turned():
    plan = scattered(6, 3, pair="along first")
    turned = plan_of(-plan.y, plan.x, plan.force, pair="across first")
    one, other = grouped(plan), grouped(turned)
    assert nest_of(one.root) == nest_of(other.root)
    assert one.steel == pytest.approx(other.steel, rel=1e-12)


def test_a_ladder_pairs_across_or_along():
    # rungs 0.5 m wide, 0.4 m apart: along is cheaper, across is asked for
    across, along = (grouped(gridded_ladder(pair=pair)) for pair in ("across first", "any"))
    assert set(map(frozenset, pairs(across.root))) == {frozenset((0, 1)), frozenset((2, 3)), frozenset((4, 5))}
    assert along.steel < across.steel


def gridded_ladder(**changes):
    x, y = np.repeat([0.0, 0.4, 0.8], 2), np.tile([0.0, 0.5], 3)
    return plan_of(x, y, [100.0, 110.0, 105.0, 95.0, 100.0, 90.0], **changes)


def pairs(root: Node):
    return [nest_of(node) for node, _ in root.pieces() if all(not kid.kids for kid in node.kids)]


def test_crossing_levers_by_hand():
    # a prescribed grouping whose two lower levers are the diagonals of a trapezium
    plan = plan_of([0.0, 0.0, 1.0, 1.0], [0.0, 1.0, 0.1, 1.2], [100.0, 210.0, 190.0, 110.0], grouping=((1, 4), (2, 3)))
    crossed = grouped(plan)
    assert crossed.clashes == 1
    free = grouped(plan_of(plan.x, plan.y, plan.force))
    assert free.clashes == 0


def test_clashes_agree_with_shapely():
    random = np.random.default_rng(5)
    shapes = [tuple(map(tuple, random.uniform(0, 1, (int(k), 2)))) for k in random.integers(2, 4, 60)]
    made = [shapely.LineString(s) if len(s) == 2 else shapely.Polygon(s) for s in shapes]
    for clearance in (0.0, 0.05, 0.3):
        found = clashing(shapes, clearance)
        wanted = [
            (i, j) for i in range(60) for j in range(i + 1, 60) if made[i].distance(made[j]) < max(clearance, 1e-12)
        ]
        assert found == wanted


def test_what_clashes_by_hand():
    level, upright = ((0.0, 0.0), (1.0, 0.0)), ((0.5, 0.03), (0.5, 1.0))
    assert clash(level, upright, 0.031)
    assert not clash(level, upright, 0.03)
    triangle, inside = ((0.0, 0.0), (1.0, 0.0), (0.0, 1.0)), ((0.2, 0.2), (0.3, 0.3))
    assert clash(triangle, inside, 0.0)
    assert clash(level, ((1.0, 0.0), (2.0, 0.0)), 0.0), "end pins at one place are in each other's way"


def maker_of(plan) -> Maker:
    field = field_of(plan)
    limits = limits_of(plan.target.brief.levers, field.extent)
    return Maker(field, limits, partners(field.x, field.y, limits.pair))


@pytest.mark.parametrize("limits", [{}, {"plates": True}, {"tiers": 4}, {"shortest_arm": 0.08, "pair": "across first"}])
def test_the_search_finds_what_is_proven_for_twelve_pads(limits):
    for seed in (1, 2, 3):
        maker = maker_of(scattered(12, seed, **limits))
        pads = [maker.pad(k) for k in range(12)]
        least = Problem(items_of(pads), maker.limits, steel_rule(maker.limits), maker.partner).solve(maker.limits.tiers)
        found = Search(maker, first_tree(maker), 2_000_000).run()
        # clearance 0: what crosses may cost a little
        assert found.value >= least.value * (1 - 1e-9)
        if not clash_count(maker.nested(least.nest, pads), replace(maker.limits, clearance=0.0)):
            assert found.value == pytest.approx(least.value, rel=1e-9)


def test_a_tree_is_worth_its_steel_and_what_it_breaks():
    plan = plan_of([0.0, 0.5, 1.0], [0.0, 0.3, 0.1], [100.0, 150.0, 120.0], ratio_limit=2.0, tiers=1)
    maker = maker_of(plan)
    pads = [maker.pad(k) for k in range(3)]
    inner = maker.piece((pads[0], pads[1]))
    chain = maker.piece((inner, pads[2]))
    assert inner.value < 1
    # 250 : 120 is a ratio of 2.08
    assert chain.value == pytest.approx(BROKEN + maker.steel(chain))
    # and it stands in two tiers where one is allowed
    assert Search(maker, chain, 0).value == pytest.approx(2 * BROKEN + maker.steel(chain))


def test_many_pads_keep_all_limits_and_clear_of_each_other():
    plan = scattered(40, 7, plates=True, clearance=0.02, tiers=6, ratio_limit=3.0, longest=1.5)
    one, again = grouped(plan), grouped(plan)
    assert nest_of(one.root) == nest_of(again.root)
    looked = Looked(plan, nest_of(one.root))
    assert looked.keeps()
    assert one.clashes == 0
    assert looked.closest >= 0.02
    assert one.least is None
    assert one.steel == pytest.approx(looked.steel, rel=1e-9)


@pytest.mark.parametrize(
    ("key", "limits"),
    [
        ("ratio_limit", {"ratio_limit": 1.05}),
        ("shortest_arm", {"shortest_arm": 0.3, "ratio_limit": np.inf}),
        ("longest", {"longest": 0.5, "ratio_limit": np.inf}),
    ],
)
def test_a_refusal_says_what_the_limit_would_have_to_be(key, limits):
    plan = scattered(7, 1, **limits)
    answer = group_in_plan(plan)
    assert isinstance(answer, Refusal)
    assert key in answer.limit
    asked = answer.remedy.split(f"{key} to ")[1].split(",")[0]
    value = float(asked.removesuffix(" mm")) * (1e-3 if asked.endswith(" mm") else 1)
    value = int(value) if key == "tiers" else value
    assert isinstance(group_in_plan(scattered(7, 1, **{**limits, key: value})), Grouped)
    less = value - 1 if key == "tiers" else value * (1.01 if key == "shortest_arm" else 0.99)
    assert isinstance(group_in_plan(scattered(7, 1, **{**limits, key: less})), Refusal)


def test_a_refusal_says_how_many_tiers_a_chain_needs():
    # each force as large as all before together: within a ratio of 1.05 only a chain of levers joins them
    force = [100.0, 101.0, 202.0, 403.0, 807.0]
    plan = plan_of([0.0, 0.4, 0.9, 1.3, 2.0], [0.0, 0.3, -0.1, 0.2, 0.1], force, ratio_limit=1.05, tiers=3)
    answer = group_in_plan(plan)
    assert isinstance(answer, Refusal)
    assert "raise tiers to 4" in answer.remedy
    assert isinstance(group_in_plan(plan_of(plan.x, plan.y, force, ratio_limit=1.05, tiers=4)), Grouped)


def test_too_few_tiers_are_refused_at_once():
    answer = group_in_plan(scattered(20, 1, tiers=4))
    assert isinstance(answer, Refusal)
    assert answer.best == "4 tiers of levers hold 16 pads at most"
    assert "raise tiers to 5 or more" in answer.remedy
    assert isinstance(group_in_plan(scattered(9, 1, tiers=2, plates=False)), Refusal)
    one = group_in_plan(scattered(3, 1, tiers=1, plates=False))
    assert isinstance(one, Refusal)
    assert one.best == "1 tier of levers holds 2 pads at most"


def test_a_drill_step_longer_than_any_arm_is_named():
    """No other limit helps, and the remedy does."""
    x, y, force = [0.0, 0.4, 0.9, 1.3], [0.0, 0.3, -0.1, 0.2], [100.0, 150.0, 120.0, 90.0]
    answer = group_in_plan(plan_of(x, y, force, drill_step=2.0))
    assert isinstance(answer, Refusal)
    assert answer.limit == "drill_step 2000 mm"
    assert answer.best.startswith("with the other limits kept, drill_step would have to be ")
    step = float(answer.remedy.removeprefix("lower drill_step to ").split(" mm")[0]) / 1000.0
    assert 0.005 < step < 0.05
    assert isinstance(group_in_plan(plan_of(x, y, force, drill_step=step)), Grouped)


def test_points_in_one_line_make_no_plate():
    plan = plan_of([0.0, 0.5, 1.0], [0.0, 0.3, 0.6], [100.0, 150.0, 120.0], plates=True)
    assert len(grouped(plan).root.kids) == 2
    # height 4.9 % and 5.1 % of the longest side
    for height, kids in ((0.049, 2), (0.051, 3)):
        near = plan_of([0.0, 0.3, 1.0], [0.0, height, 0.0], [100.0, 100.0, 100.0], plates=True, tiers=1)
        answer = group_in_plan(near)
        assert isinstance(answer, Refusal) if kids == 2 else len(grouped(near).root.kids) == 3


def test_a_prescribed_grouping_is_obeyed_and_held_to_the_limits():
    plan = scattered(5, 2, plates=True, grouping=((1, 2, 4), (5, 3)), ratio_limit=np.inf)
    looked = Looked(plan, ((0, 1, 3), (4, 2)))
    answer = grouped(plan)
    assert answer.steel == pytest.approx(looked.steel, rel=1e-12)
    refusal = group_in_plan(scattered(5, 2, plates=True, grouping=((1, 2, 4), (5, 3)), tiers=1, ratio_limit=np.inf))
    assert isinstance(refusal, Refusal)
    assert refusal.limit == "tiers 1"
    assert "raise tiers to 2" in refusal.remedy
    assert "the lever that joins pad 3 and pad 5" in refusal.best or "the plate that joins" in refusal.best


@pytest.mark.parametrize(
    ("grouping", "words"),
    [
        (((1, 2), 3), "not named: pad 4"),
        (((1, 2), (3, 5)), "pad 5 is named"),
        (((1, 2, 3, 4), 3), "a group holds 4"),
        (((1, 2), (3, (4, 2))), "named twice: pad 2"),
    ],
)
def test_a_wrong_grouping_is_an_error(grouping, words):
    with pytest.raises(BriefError, match=words):
        group_in_plan(scattered(4, 2, grouping=grouping))


def test_a_pad_that_carries_nothing_is_refused():
    answer = group_in_plan(plan_of([0.0, 0.5, 1.0], [0.0, 0.3, 0.1], [100.0, 0.0, 120.0]))
    assert isinstance(answer, Refusal)
    assert "pad 2 carries nothing" in answer.text


def test_size_and_load_do_not_decide():
    plan = scattered(9, 5, plates=True)
    large = plan_of(40 * plan.x, 40 * plan.y, 1e4 * plan.force, plates=True, drill_step=0.04)
    assert nest_of(grouped(large).root) == nest_of(grouped(plan).root)


def test_a_grid_of_equal_pads_is_grouped_at_once():
    answer = grouped(gridded(2, 2))
    assert answer.root.height == 2
    assert answer.is_best
