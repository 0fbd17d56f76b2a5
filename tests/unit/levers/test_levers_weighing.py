"""Grouping by what stock weighs: the lightest of all trees, each weighed by definition."""

import numpy as np
import pytest
import shapely
from factories import make_brief, make_levers, make_pads
from hand_rigs import make_plan
from plan_trees import all_looked, every_tree, plan_of, scattered

from rigdesign.levers.grouping import group_pads
from rigdesign.levers.surface.grouping import Grouped, group_in_plan
from rigdesign.levers.weighing import StockLine
from rigdesign.levers.wiring import ideal_levers
from rigdesign.target import build_target

# few sections far apart, so that steps and not a smooth curve decide; the second is much heavier than the first
STOCK = StockLine(np.array([60.0, 90.0, 420.0, 900.0]), np.array([1.5, 6.0, 7.0, 19.0]), 0.04, 0.9, 40.0)


def line_mass(moment):
    for most, mass in zip(STOCK.moments, STOCK.masses, strict=True):
        if moment <= most:
            return mass
    return STOCK.masses[-1] * (moment / STOCK.moments[-1]) ** (2 / 3)


def weighed(nest, x, y, force):
    """Mass of a nested tree, with load and place of its pivot."""
    if isinstance(nest, int):
        return 0.0, force[nest], np.array([x[nest], y[nest]])
    masses, load, places = zip(*(weighed(part, x, y, force) for part in nest), strict=True)
    load, places = np.array(load), np.array(places)
    pivot = load @ places / load.sum()
    reach = np.linalg.norm(places - pivot, axis=1)
    if len(nest) == 2:
        own = sum(line_mass(f * r) * (r + STOCK.overhang) for f, r in zip(load, reach, strict=True))
    else:
        triangle = shapely.Polygon(places)
        steel = triangle.area + triangle.length * STOCK.overhang + np.pi * STOCK.overhang**2
        worst = max(f * r * (r + STOCK.overhang) for f, r in zip(load, reach, strict=True))
        own = max(STOCK.plate * np.sqrt(steel * worst), STOCK.thinnest * steel)
    return sum(masses) + own, load.sum(), pivot


def neighbourly(nest):
    """Whether a nested tree joins neighbours alone; pads in order."""
    if isinstance(nest, int):
        return [nest]
    parts = [neighbourly(part) for part in nest]
    if any(part is None for part in parts):
        return None
    flat = [pad for part in sorted(parts) for pad in part]
    return flat if flat == list(range(flat[0], flat[0] + len(flat))) else None


@pytest.mark.parametrize("seed", [1, 2, 3, 4])
def test_along_a_line_no_neighbour_grouping_is_lighter(seed):
    rng = np.random.default_rng(seed)
    x, force = np.sort(rng.uniform(0.3, 3.3, 6)), rng.uniform(80.0, 400.0, 6)
    brief = make_brief(pads=make_pads(count=6), levers=make_levers(ratio_limit=np.inf))
    plan = make_plan(build_target(brief), x, force)
    wiring = group_pads(plan, STOCK)
    levers = ideal_levers(wiring, x, force)
    found = float(STOCK.levers_mass(levers.load, levers.a, levers.b).sum())
    trees = [nest for nest in every_tree(tuple(range(6)), False) if neighbourly(nest) is not None]
    assert len(trees) == 42  # Catalan
    assert found == pytest.approx(min(weighed(nest, x, 0 * x, force)[0] for nest in trees), rel=1e-9)


@pytest.mark.parametrize(("count", "plates"), [(5, True), (6, False)])
def test_in_plan_no_tree_is_lighter(count, plates):
    for seed in (1, 2, 3):
        plan = scattered(count, seed, plates=plates)
        answer = group_in_plan(plan, stock=STOCK)
        assert isinstance(answer, Grouped)
        assert answer.least is not None
        force = np.abs(plan.force)
        keeping = all_looked(plan)
        assert keeping
        least = min(weighed(tree.nest, plan.x, plan.y, force)[0] for tree in keeping)
        unit = STOCK.mass_unit(answer.maker.field.total * answer.maker.field.extent, answer.maker.field.extent)
        assert answer.maker.steel(answer.least) * unit == pytest.approx(least, rel=1e-9)


def closest(nest, x, y, force):
    """Least distance in plan of pieces of one tier, and of pads' links from the pieces in the tiers that they pass."""
    pieces, links = [], []

    def look(nest, tier):
        if isinstance(nest, int):
            links.append((tier, shapely.Point(x[nest], y[nest])))
            return force[nest], np.array([x[nest], y[nest]])
        ends = [look(part, tier + 1) for part in nest]
        load, places = np.array([f for f, _ in ends]), np.array([place for _, place in ends])
        shape = shapely.LineString(places) if len(nest) == 2 else shapely.Polygon(places)
        pieces.append((tier, shape))
        return load.sum(), load @ places / load.sum()

    look(nest, 1)
    apart = [a.distance(b) for i, (at, a) in enumerate(pieces) for tier, b in pieces[:i] if tier == at]
    apart += [piece.distance(point) for tier, point in links for at, piece in pieces if at >= tier]
    return min(apart, default=np.inf)


@pytest.mark.parametrize(("count", "plates", "seeds"), [(5, True, (1, 4, 24)), (6, False, (3, 26, 35))])
def test_links_of_pads_keep_clear_of_what_they_pass(count, plates, seeds):
    cost = []
    for seed in seeds:
        plan = scattered(count, seed, plates=plates, clearance=0.2)
        answer = group_in_plan(plan, stock=STOCK)
        assert isinstance(answer, Grouped)
        force = np.abs(plan.force)
        nests = [tree.nest for tree in all_looked(plan)]
        clear = [nest for nest in nests if closest(nest, plan.x, plan.y, force) >= 0.2]
        masses = [weighed(nest, plan.x, plan.y, force)[0] for nest in nests]
        if clear:
            least = min(weighed(nest, plan.x, plan.y, force)[0] for nest in clear)
            assert answer.clashes == 0
            assert answer.mass(STOCK) == pytest.approx(least, rel=1e-9)
            cost.append(least / min(masses))
        else:
            assert answer.clashes > 0
    assert max(cost) > 1.0001


def test_a_plate_is_weighed_as_a_plate():
    plan = plan_of([0.0, 1.0, 0.4], [0.0, 0.1, 0.8], [200.0, 300.0, 250.0], plates=True)
    answer = group_in_plan(plan, stock=STOCK)
    trees = {nest: weighed(nest, plan.x, plan.y, np.abs(plan.force))[0] for nest in every_tree((0, 1, 2), True)}
    assert answer.mass(STOCK) == pytest.approx(min(trees.values()), rel=1e-9)


def test_scalars_weigh_as_arrays_do():
    moments, arms = np.array([1.0, 60.0, 60.1, 2000.0]), np.array([0.1, 0.2, 0.3, 0.4])
    for moment, arm, mass in zip(moments, arms, STOCK.side_mass(moments, arms), strict=True):
        assert STOCK.side_mass_of(moment, arm) == pytest.approx(mass, rel=1e-14)
