"""Choosing among given places in plan: the sparse programme, its bounds, and what takes over where places are many."""

from __future__ import annotations

from dataclasses import replace
from itertools import combinations

import numpy as np
import pytest
from plan_choices import make_choice, make_target, places

from rigdesign.brief.model import Acceptance, BandRule, Region
from rigdesign.pads import plan_pads
from rigdesign.pads.model import PadPlan
from rigdesign.pads.surface.beam import few_pads
from rigdesign.pads.surface.choice import choose, fewest, largest
from rigdesign.pads.surface.choice_model import Choice, cliques
from rigdesign.pads.surface.error_rows import band_use
from rigdesign.pads.surface.fewest import fewest_hard_points
from rigdesign.pads.surface.given import choice_of
from rigdesign.pads.surface.jumps import jump_limits
from rigdesign.pads.surface.many import BEAM_LEVELS, Search, choose_of_many
from rigdesign.pads.surface.program import Programme
from rigdesign.pads.surface.refusals import jack_place_in_plan
from rigdesign.pads.surface.sparse import SparseChoice
from rigdesign.pads.surface.states import pads_needed
from rigdesign.target import build_target


def least_use(choice: Choice, pads: object) -> float:
    """Band use of a set of places, by the dense programme over its forces."""
    chosen = np.asarray(pads)
    forces = Programme(
        choice.rows, choice.balance, choice.x[chosen], choice.y[chosen], choice.least, choice.largest
    ).least_use()
    return np.inf if forces is None else forces.use


def limits_at(choice: Choice, use: float) -> np.ndarray:
    return np.minimum(largest(choice), jump_limits(choice).at(use))


@pytest.mark.parametrize("changes", [{}, {"shear": None}, {"torsion": None}, {"least": 600.0, "largest": 2600.0}])
def test_the_choice_is_the_best_of_all(changes: dict[str, object]) -> None:
    choice = make_choice(4, 11, 3, **changes)
    uses = {pads: least_use(choice, pads) for pads in combinations(range(11), 4)}
    best = min(uses.values())
    found = choose(choice, 20_000)
    assert found.is_proven
    assert found.pads is not None
    # the programme's own relative gap is 1e-3
    assert uses[tuple(int(k) for k in found.pads)] <= best * (1 + 1.1e-3)
    assert found.bound <= best * (1 + 1e-6)
    assert found.bound >= best * (1 - 1.1e-3)


def test_places_that_collide_are_not_chosen_together() -> None:
    choice = make_choice(4, 11, 3)
    free = choose(choice, 20_000)
    assert free.pads is not None
    compatible = choice.compatible.copy()
    a, b = int(free.pads[0]), int(free.pads[1])
    compatible[a, b] = compatible[b, a] = False
    held = choose(replace(choice, compatible=compatible), 20_000)
    assert held.pads is not None
    assert not {a, b} <= {int(k) for k in held.pads}
    assert held.bound > free.bound


def test_cliques_cover_every_collision() -> None:
    rng = np.random.default_rng(5)
    compatible = rng.uniform(size=(14, 14)) > 0.4
    compatible &= compatible.T
    np.fill_diagonal(compatible, True)
    sets = cliques(compatible)
    for i, j in combinations(range(14), 2):
        assert (not compatible[i, j]) == any(i in clique and j in clique for clique in sets)


@pytest.mark.parametrize("support", ["square to x", "square to axis"])
def test_the_chain_says_what_the_responses_say(support: str) -> None:
    choice = make_choice(11, 12, 8, spars=3)
    choice = replace(choice, rows=replace(choice.rows, specimen=replace(choice.rows.specimen, cut=support)))
    pads = np.delete(np.arange(12), 7)
    must = np.isin(np.arange(12), pads)
    found = SparseChoice(choice).solve(largest(choice), use=None, may=must, must=must)
    assert found.fun == pytest.approx(least_use(choice, pads), rel=1e-6)  # the solvers' tolerance


# seeds with single places at each station, and with ribs whose pads share one
CASES = [(16, 5, 0, 0.0), (16, 5, 4, 0.0), (16, 6, 4, 0.25), (20, 5, 2, 0.0)]


@pytest.mark.parametrize(("of", "count", "spars", "stagger"), CASES)
@pytest.mark.parametrize("seed", [1, 2, 3])
def test_no_fewer_pads_than_needed_keep_a_band_use(of: int, count: int, spars: int, stagger: float, seed: int) -> None:
    choice = make_choice(count, of, seed, spars, stagger)
    best = choose(choice, 20_000)
    assert best.pads is not None
    use = least_use(choice, best.pads)
    # what can be kept by so many pads is never called out of reach ...
    assert pads_needed(choice, use * (1 + 1e-6), limits_at(choice, use * (1 + 1e-6))) <= count
    # ... nor are its pads' forces
    forces = Programme(choice.rows, choice.balance, choice.x[best.pads], choice.y[best.pads], 0.0, np.inf).least_use()
    assert forces is not None
    assert np.all(forces.force <= limits_at(choice, use)[best.pads] * (1 + 1e-6))


def test_a_band_use_far_below_is_shown_to_need_more_pads() -> None:
    choice = make_choice(6, 24, 1)
    best = choose(choice, 20_000)
    assert best.pads is not None
    use = least_use(choice, best.pads)
    assert pads_needed(choice, 0.6 * use, limits_at(choice, 0.6 * use)) > 6


def test_too_many_pads_are_never_called_necessary() -> None:
    choice = make_choice(6, 24, 4, spars=3)
    best = choose(choice, 20_000)
    assert best.pads is not None
    use = least_use(choice, best.pads) * 1.3
    exact = fewest(choice, use, 20_000)
    assert pads_needed(choice, use, limits_at(choice, use)) <= exact <= 6


def test_the_beam_finds_sets_that_about_keep_the_band_use() -> None:
    choice = make_choice(10, 40, 2)
    best = choose(choice, 20_000)
    use = best.bound * 1.15
    sets = few_pads(choice, use, limits_at(choice, use))
    assert sets
    assert all(pads.size <= 10 for pads in sets)
    # sum and moments are closed by the linear programme alone, which costs a little
    assert min(least_use(choice, pads) for pads in sets) < 1.25 * use


@pytest.mark.parametrize(("spars", "stagger"), [(0, 0.0), (5, 0.2), (10, 0.0)])
def test_many_places_with_a_small_gap(spars: int, stagger: float) -> None:
    choice = make_choice(16, 100, 1, spars, stagger)
    found = choose_of_many(choice, 0.0, None)
    assert found.pads is not None
    assert found.pads.size == 16
    assert found.bound * (1 - 1e-9) <= least_use(choice, found.pads) <= 1.1 * found.bound


def test_few_of_many_far_from_what_is_proven(monkeypatch: pytest.MonkeyPatch) -> None:
    """Six pads on two spars twist the surface far more than the bound knows: the beam goes on to such levels."""
    monkeypatch.setattr(Search, "_by_relaxation", lambda *_: pytest.fail("minutes of programmes are not needed"))
    choice = make_choice(6, 60, 1, spars=2, shear=None, torsion=0.01)
    found = choose_of_many(choice, 0.0, None)
    assert found.pads is not None
    assert found.pads.size == 6
    assert found.bound * 1.03**BEAM_LEVELS < least_use(choice, found.pads) < np.inf


def test_many_places_where_the_cuts_are_square_to_the_axis() -> None:
    choice = make_choice(8, 70, 1, spars=7, cut="square to axis")
    found = choose_of_many(choice, 0.0, None)
    assert found.pads is not None
    assert found.pads.size == 8
    assert 0 < found.bound * (1 - 1e-9) <= least_use(choice, found.pads) < 1.5 * found.bound


def test_no_choice_balances_pads_on_one_side_of_the_load() -> None:
    x, y = places(12, 1)
    choice = make_choice(4, 12, 1)
    one_side = replace(choice, y=y + 2.0)
    assert choose(one_side, 1000).pads is None
    assert choose_of_many(one_side, 0.0, None).bound == np.inf
    assert fewest(one_side, 1.0, 1000) == x.size + 1


def test_the_plan_of_hard_points_in_plan() -> None:
    x, y = places(30, 6, spars=3)
    target = make_target(x, y, 10, least=100.0, largest=2500.0)
    plan = plan_pads(target)
    assert isinstance(plan, PadPlan)
    sums = target.net_plan.sums
    assert plan.force.sum() == pytest.approx(sums.force, rel=1e-12)
    assert (plan.force * plan.x).sum() == pytest.approx(sums.first_x, rel=1e-12)
    # the first moment about y = 0 is small beside force times span
    assert (plan.force * plan.y).sum() == pytest.approx(sums.first_y, abs=1e-12 * sums.force * 4)
    assert plan.force.min() >= 100.0 * (1 - 1e-9)
    assert plan.force.max() <= 2500.0 * (1 + 1e-9)
    assert np.all(np.diff(plan.x) >= 0)
    use = band_use(target, plan.x, plan.y, plan.force, 800)
    assert use <= plan.proof.band_use * (1 + 1e-4)  # as many stations again find hardly more
    assert plan.proof.band_use_least <= plan.proof.band_use_found <= use * (1 + 1e-6)
    assert use <= plan.proof.band_use_found * 1.02 * (1 + 1e-3)  # ease, judged at more stations
    assert plan.proof.evenness < plan.proof.evenness_before


def test_the_fewest_pads_in_plan() -> None:
    x, y = places(30, 6, spars=3)
    target = make_target(x, y, 10, shear=0.2, torsion=0.1, moment=0.05)
    pads = replace(target.brief.pads, count="fewest")
    fewer = plan_pads(replace(target, brief=replace(target.brief, pads=pads)))
    assert isinstance(fewer, PadPlan)
    assert fewer.proof.band_use <= 1.0
    one_less = plan_pads(target, fewer.n_pads - 1)
    assert not isinstance(one_less, PadPlan) or one_less.proof.band_use_least > 1.0


def test_the_fewest_of_many_are_bounded_as_those_of_few(monkeypatch: pytest.MonkeyPatch) -> None:
    x, y = places(36, 1, spars=6)
    target = make_target(x, y, 10, shear=0.25, torsion=0.1, moment=0.05)
    jack = jack_place_in_plan(target)
    exact = fewest_hard_points(target, jack)
    monkeypatch.setattr("rigdesign.pads.surface.fewest.PROVEN", 20)
    bound = fewest_hard_points(target, jack)
    assert exact - 1 <= bound <= exact
    assert exact > 4


def test_the_same_brief_gives_the_same_pads() -> None:
    x, y = places(80, 2, spars=8)
    first, second = (plan_pads(make_target(x, y, 12)) for _ in range(2))
    assert isinstance(first, PadPlan)
    assert isinstance(second, PadPlan)
    assert np.array_equal(first.force, second.force)
    assert np.array_equal(first.y, second.y)


def in_region(start: float, end: float, most: int = 4, supports: tuple[float, ...] = ()) -> Choice:
    """The choice of some of 11 places under bands between two stations alone; with supports, on the shear alone."""
    x, y = places(11, 1)
    brief = make_target(x, y, most).brief
    rules = tuple(
        BandRule(quantity, side, width, False, "peak")
        for quantity, width in (("shear", 0.12), ("moment", 0.02), ("torsion", 0.05))[: 1 if supports else 3]
        for side in ("under", "over")
    )
    held = replace(brief.specimen, support="two supports", supports=supports) if supports else brief.specimen
    region = Region("region 1", start, end, rules)
    target = build_target(replace(brief, specimen=held, acceptance=Acceptance((), (region,), False)))
    return choice_of(target, jack_place_in_plan(target), x, y, most)


@pytest.mark.parametrize("supports", [(), (1.0, 2.0)])
def test_what_pads_beyond_a_region_carry_is_not_limited_by_what_is_judged_in_it(supports: tuple[float, ...]) -> None:
    choice = in_region(0.5, 1.5, supports=supports)
    limits = jump_limits(choice)
    for pads in combinations(range(11), 4):
        forces = Programme(choice.rows, choice.balance, choice.x[[*pads]], choice.y[[*pads]], 0.0, np.inf).least_use()
        if forces is None:
            continue
        # within the solver's tolerance
        assert np.all(forces.force <= limits.at(forces.use * (1 + 1e-6))[[*pads]] + 1e-6 * choice.balance.total)
        assert np.all(forces.force <= limits.per_pad[[*pads]] * forces.use * (1 + 1e-6) + 1e-6 * choice.balance.total)


def test_a_region_without_any_place_limits_no_pad() -> None:
    choice = in_region(3.9, 3.99)
    assert np.all(choice.x < 3.9)
    assert np.all(np.isinf(jump_limits(choice).per_pad))


def test_beyond_a_region_that_ends_at_a_place_nothing_is_followed() -> None:
    x, _ = places(11, 1)
    choice = in_region(0.0, float(x[-1]), 9)
    assert pads_needed(choice, 1e-3, largest(choice)) == 1
    assert pads_needed(in_region(0.0, 4.0, 9), 1e-3, largest(choice)) > 9


def test_bands_of_one_side_alone_are_followed() -> None:
    choice = make_choice(5, 16, 1)
    endless = tuple(replace(block, above=np.full(block.at.size, 1e12)) for block in choice.rows.blocks)
    one_sided = replace(choice, rows=replace(choice.rows, blocks=endless))
    best = choose(one_sided, 20_000)
    assert best.pads is not None
    use = least_use(one_sided, best.pads) * (1 + 1e-6)
    assert pads_needed(one_sided, use, limits_at(one_sided, use)) <= 5
    assert pads_needed(one_sided, 0.1 * use, limits_at(one_sided, 0.1 * use)) > 1


def test_even_forces_leave_a_little_of_the_bands_to_drilling() -> None:
    x, y = places(20, 3, spars=2)
    target = make_target(x, y, 8, shear=0.3, moment=0.08, torsion=0.3)
    target = replace(target, brief=replace(target.brief, pads=replace(target.brief.pads, aim="even")))
    plan = plan_pads(target)
    assert isinstance(plan, PadPlan)
    assert plan.proof.band_use_found < 0.9  # there was room to give up, and forces took it
    assert 0.98 < plan.proof.band_use < 0.992  # 0.99, judged at more stations


def test_pads_that_were_found_are_never_proven_impossible(monkeypatch: pytest.MonkeyPatch) -> None:
    # limits on single pads that are wrong leave nothing: then no more is proven than the relaxation says
    choice = make_choice(5, 16, 2)
    exact = choose(choice, 20_000)
    assert exact.pads is not None
    monkeypatch.setattr("rigdesign.pads.surface.many.Search.at", lambda search, use: np.full(16, 1e-3))
    monkeypatch.setattr(
        "rigdesign.pads.surface.many.Search.by_beam", lambda search, low: (exact.pads, least_use(choice, exact.pads))
    )
    found = choose(choice, 20_000)
    assert not found.is_proven
    assert np.array_equal(found.pads, exact.pads)
    assert found.bound <= exact.bound
