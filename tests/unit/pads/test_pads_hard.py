"""Hard points: the proven optimum against all choices, and against a second optimiser."""

from __future__ import annotations

from itertools import combinations

import numpy as np
import pulp
import pytest
from factories import make_acceptance, make_brief, make_pads, make_specimen, shape_load, two_supports
from scipy.optimize import linprog

from rigdesign.brief.model import Floats
from rigdesign.pads import PadPlan, lines, plan_pads
from rigdesign.pads.limits import force_limits
from rigdesign.pads.tube import Tube, build_tube
from rigdesign.target import build_target
from rigdesign.target.model import Target


def irregular(count: int, seed: int, length: float = 3.2) -> Floats:
    """Places at irregular pitches between 0.2 and 3.4 m."""
    gaps = np.random.default_rng(seed).uniform(0.2, 1.8, count + 1)
    return 0.2 + np.cumsum(gaps)[:-1] / gaps.sum() * length


def target_of(places: Floats, count: int, shear: float | None = None, **pads: object) -> Target:
    """An elliptical load on hard points, pads without a footprint unless told."""
    fields = {"length": 0.0, "gap": 0.0, **pads}
    return build_target(
        make_brief(
            pads=make_pads(count=count, places="hard points", stations=places, **fields),
            acceptance=make_acceptance(moment=0.02, shear=shear),
        )
    )


def least_use_of(tube: Tube, x: Floats, least: float, largest: float) -> float:
    """Least band use of pads at x by a dense programme in the forces themselves: not the project's formulation."""
    n = x.size
    rows, values = [], []
    reach = np.maximum(x[None, :] - tube.x[:, None], 0.0)
    beyond = np.where(tube.outboard[:, None], x[None, :] > tube.x[:, None], x[None, :] >= tube.x[:, None])
    # at a pad the shear is judged on both sides, between jumps of the target too
    at = np.searchsorted(tube.x, x, side="right") - 1
    inboard = (x[None, :] >= x[:, None]) * 1.0
    judged = [(reach, tube.moment, tube.moment_width), (beyond * 1.0, tube.shear, tube.shear_width)]
    for is_judged, (matrix, wanted, (below, above)) in zip(tube.is_judged, judged, strict=True):
        if is_judged:
            rows += [np.c_[matrix, -above] / above[:, None], np.c_[-matrix, -below] / below[:, None]]
            values += [wanted / above, -wanted / below]
    if tube.is_judged[1]:
        below, above = tube.shear_below[at], tube.shear_above[at]
        rows += [np.c_[inboard, -above] / above[:, None], np.c_[-inboard, -below] / below[:, None]]
        values += [tube.shear[at] / above, -tube.shear[at] / below]
    result = linprog(
        np.r_[np.zeros(n), 1],
        A_ub=np.concatenate(rows),
        b_ub=np.concatenate(values),
        A_eq=np.array([np.r_[np.ones(n), 0], np.r_[x, 0]]),
        b_eq=[tube.total, tube.first_moment],
        bounds=[(least, None if np.isinf(largest) else largest)] * n + [(0, None)],
        method="highs",
    )
    return float(result.x[-1]) if result.status == 0 else np.inf


@pytest.mark.parametrize(
    ("seed", "shear", "limits"),
    [
        (1, None, {}),
        (2, 0.12, {}),
        (3, None, {"largest_force": 1500.0}),
        (4, 0.12, {"least_force": 700.0}),
        (7, None, {"length": 0.20, "gap": 0.15}),
    ],
)
def test_least_band_use_equals_all_choices(seed: int, shear: float | None, limits: dict[str, float]) -> None:
    places = irregular(10, seed)
    target = target_of(places, 5, shear, **limits)
    plan = plan_pads(target)
    assert isinstance(plan, PadPlan)
    tube = build_tube(target, plan.jack_x, places.size, 20, extra=places)
    least, largest = force_limits(target)
    pitch = limits.get("length", 0.0) + limits.get("gap", 0.0)
    half = limits.get("length", 0.0) / 2
    usable = places[(places >= 0.2 + half) & (places <= 3.4 - half)]
    best = min(
        least_use_of(tube, np.array(chosen), least, largest)
        for chosen in combinations(usable, 5)
        if np.diff(chosen).min() >= pitch
    )
    # bound and design meet within a thousandth; stations of the two tubes differ by as much again
    assert plan.proof.band_use_found == pytest.approx(best, rel=2e-3)
    assert plan.proof.band_use_least <= best * (1 + 1e-3)
    assert plan.proof.gap <= 1.1e-3


# PuLP 3 announces its version 4 on every call that both understand
@pytest.mark.filterwarnings("ignore::DeprecationWarning:pulp")
def test_least_band_use_equals_a_mixed_integer_programme() -> None:
    """The same question put to another optimiser as a mixed-integer programme with one switch a hard point."""
    places = irregular(14, 6)
    target = target_of(places, 6, 0.12)
    plan = plan_pads(target)
    assert isinstance(plan, PadPlan)
    tube = build_tube(target, plan.jack_x, places.size, 12, extra=places)
    problem = pulp.LpProblem("pads", pulp.LpMinimize)
    force = [pulp.LpVariable(f"f{i}", 0) for i in range(places.size)]
    taken = [pulp.LpVariable(f"z{i}", cat="Binary") for i in range(places.size)]
    use = pulp.LpVariable("use", 0)
    problem += use
    problem += pulp.lpSum(taken) == 6
    problem += pulp.lpSum(force) == tube.total
    problem += pulp.lpSum(f * x for f, x in zip(force, places, strict=True)) == tube.first_moment
    for f, z in zip(force, taken, strict=True):
        problem += f <= 0.5 * tube.total * z
    for k, x in enumerate(tube.x):
        path = pulp.lpSum(f * max(p - x, 0.0) for f, p in zip(force, places, strict=True)) - tube.moment[k]
        beyond = [f for f, p in zip(force, places, strict=True) if (p > x if tube.outboard[k] else p >= x)]
        if x in places:
            inboard = pulp.lpSum(f for f, p in zip(force, places, strict=True) if p >= x) - tube.shear[k]
            here = taken[int(np.searchsorted(places, x))]
            # judged on its inboard side only where a pad stands: elsewhere both sides are the same
            problem += inboard - tube.total * (1 - here) <= use * tube.shear_above[k]
        stair = pulp.lpSum(beyond) - tube.shear[k]
        problem += path <= use * tube.moment_above[k]
        problem += -path <= use * tube.moment_below[k]
        problem += stair <= use * tube.shear_above[k]
        problem += -stair <= use * tube.shear_below[k]
    assert problem.solve(pulp.PULP_CBC_CMD(msg=False)) == pulp.LpStatusOptimal
    assert plan.proof.band_use_found == pytest.approx(float(use.value()), rel=2e-3)


def test_twelve_of_forty_are_proven_to_a_thousandth() -> None:
    plan = plan_pads(target_of(irregular(40, 2), 12, 0.12))
    assert isinstance(plan, PadPlan)
    assert plan.n_pads == 12
    # bound and design count as meeting at 1e-3; the fine tube of the plan may judge by as much again
    assert plan.proof.gap <= 1.2e-3
    assert plan.proof.method.startswith("sets of lines")


def test_even_forces_cost_no_more_than_ease_and_can_be_joined() -> None:
    """24 ribs, elliptical, bands of 2 % and 12 %."""
    ribs = np.linspace(0.27, 3.33, 24)
    brief = make_brief(
        pads=make_pads(count=24, places="fixed", stations=ribs, length=0.08, gap=0.02),
        acceptance=make_acceptance(moment=0.02, shear=0.12),
    )
    plan = plan_pads(build_target(brief))
    assert isinstance(plan, PadPlan)
    proof = plan.proof
    assert proof.evenness < 0.25 * proof.evenness_before
    assert proof.band_use <= proof.band_use_found * 1.02 * (1 + 1e-6)
    step = plan.force[1:] / plan.force[:-1]
    assert np.maximum(step, 1 / step).max() <= 5.0 * (1 + 1e-6)
    assert plan.force.min() > 0.01 * plan.force.mean()


def test_hard_points_on_two_supports_with_load_against_z() -> None:
    places = irregular(9, 8, length=5.6)
    brief = make_brief(
        specimen=two_supports(0.0, 0.7, 5.2, 6.0),
        loads=(shape_load("linear", None, start=-900.0, end=-2100.0, start_x=0.0, end_x=6.0),),
        pads=make_pads(count=4, places="hard points", stations=places, length=0.0, gap=0.0, ease=0.0),
        acceptance=make_acceptance(moment=0.05, shear=0.2),
    )
    target = build_target(brief)
    plan = plan_pads(target)
    assert isinstance(plan, PadPlan)
    tube = build_tube(target, plan.jack_x, places.size, 20, extra=places)
    best = min(least_use_of(tube, np.array(chosen), 0.0, np.inf) for chosen in combinations(places, 4))
    assert plan.proof.band_use_found == pytest.approx(best, rel=2e-3)
    assert (plan.force < 0).all()
    assert plan.force.sum() == pytest.approx(target.net.total, rel=1e-12)
    assert plan.force @ plan.x == pytest.approx(target.net.first_moment, rel=1e-12)


def test_fewest_is_the_first_count_that_the_bands_allow() -> None:
    places = irregular(16, 9)
    fewest = plan_pads(target_of(places, "fewest", 0.25))  # type: ignore[arg-type]
    assert isinstance(fewest, PadPlan)
    assert fewest.proof.band_use <= 1
    one_less = plan_pads(target_of(places, fewest.n_pads - 1, 0.25))
    assert isinstance(one_less, PadPlan)
    assert one_less.proof.band_use_least > 1


def test_specimen_of_the_default_brief_is_what_the_places_assume() -> None:
    specimen = make_specimen()
    assert (specimen.left, specimen.right) == (0.2, 3.4)


def test_too_many_places_to_prove_over_are_answered_with_the_gap() -> None:
    places = np.linspace(0.21, 3.39, 420)
    plan = plan_pads(target_of(places, 20))
    assert isinstance(plan, PadPlan)
    assert np.isin(plan.x, places).all()
    # the sets of lines would go through more pairs of places than they may: the bound is that of free places
    assert 0 < plan.proof.band_use_least < plan.proof.band_use_found < 1.3 * plan.proof.band_use_least


def test_fewest_over_too_many_places_counts_up_from_the_bound_of_free_places(monkeypatch) -> None:
    target = target_of(irregular(16, 5), "fewest")
    proven = plan_pads(target)
    monkeypatch.setattr(lines, "MOST_PAIRS", 10)
    counted = plan_pads(target)
    assert isinstance(proven, PadPlan)
    assert isinstance(counted, PadPlan)
    assert counted.proof.band_use <= 1
    assert counted.n_pads == proven.n_pads
