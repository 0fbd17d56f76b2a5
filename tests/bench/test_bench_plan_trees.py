"""Trees in plan: seconds with proof for a dozen pads, and what a search of seconds lacks of one of ten minutes.

Measured and printed, never asserted.  Run with ``pytest -m bench -s tests/bench/test_bench_plan_trees.py``; the long
searches take ten minutes each.
"""

from __future__ import annotations

import time
from dataclasses import replace

import numpy as np
import pytest
from factories import make_brief, make_levers, make_pads, make_specimen
from hand_plan_rigs import forces, outline

from rigdesign.levers.surface.grouping import Grouped, group_in_plan
from rigdesign.levers.surface.limits import field_of, limits_of
from rigdesign.levers.surface.nodes import Maker
from rigdesign.levers.surface.search import Search, first_tree
from rigdesign.levers.surface.subsets import partners
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.target import build_target

pytestmark = pytest.mark.bench

LONG = 600.0
"""Seconds of a long search."""


def plan_with(x, y, force, **levers) -> PadPlan:
    """Fixed pads on a wide surface."""
    corners = ((-1.0, -1.0), (4.0, -1.0), (4.0, 2.0), (-1.0, 2.0))
    specimen = replace(make_specimen(left=-1.0, right=4.0), outline=outline(corners))
    pads = make_pads(count=x.size, places="fixed", stations=x, length=0.0, gap=0.0)
    brief = make_brief(specimen=specimen, pads=pads, levers=make_levers(), loads=(forces(x, y, force),))
    target = build_target(replace(brief, levers=replace(brief.levers, **levers)))
    jack = float((force * x).sum() / force.sum()), float((force * y).sum() / force.sum())
    return PadPlan(target, x, y, force, force, *jack, False, Proof(0.0, 0.0, 0.0, "", "", 0.0, 0.0, 0.0), ())


def scattered(count: int, seed: int, **levers) -> PadPlan:
    """Unequal pads scattered over 2.4 m × 0.8 m, 60 mm apart or more."""
    random = np.random.default_rng(seed)
    places: list[np.ndarray] = []
    while len(places) < count:
        place = random.uniform((0.0, 0.0), (2.4, 0.8))
        if all(np.hypot(*(place - other)) > 0.06 for other in places):
            places.append(place)
    x, y = np.array(sorted(map(tuple, places))).T
    return plan_with(x, y, random.uniform(150.0, 450.0, count), **levers)


def ribs_and_spars(**levers) -> PadPlan:
    """64 pads at the crossings of 16 ribs and 4 spars of a swept wing, under a load that falls to the tip."""
    along, across = (grid.ravel() for grid in np.meshgrid(np.arange(16) / 15, np.arange(4) / 3, indexing="ij"))
    x, y = 3.2 * along + 0.12 * across, (1.0 - 0.5 * along) * (across - 0.4) - 0.2 * along
    force = 400.0 * np.sqrt(1.05 - along**2) * (1.2 - 0.6 * across)
    return plan_with(x, y, force, **levers)


@pytest.mark.parametrize(
    "levers", [{}, {"plates": True}, {"plates": True, "tiers": 4}, {"plates": True, "clearance": 0.05}]
)
def test_a_dozen_pads_with_proof(levers):
    seconds, above = [], []
    for seed in range(1, 6):
        start = time.perf_counter()
        answer = group_in_plan(scattered(12, seed, **levers))
        seconds.append(time.perf_counter() - start)
        assert isinstance(answer, Grouped)
        above.append(f"{100 * answer.above:.2g} %{'' if answer.is_best else ' (not proven)'}")
    print(f"\n12 pads, {levers}: {max(seconds):.2f} s at most; above the proven least: {', '.join(above)}")


CASES = [
    ("scattered", {}),
    ("scattered", {"plates": True, "clearance": 0.02}),
    ("ribs and spars", {"clearance": 0.03}),
    ("ribs and spars", {"plates": True, "clearance": 0.03}),
]


@pytest.mark.parametrize(("kind", "levers"), CASES)
def test_sixty_four_pads_against_a_long_search(kind, levers):
    plan = scattered(64, 1, **levers) if kind == "scattered" else ribs_and_spars(**levers)
    start = time.perf_counter()
    answer = group_in_plan(plan)
    seconds = time.perf_counter() - start
    assert isinstance(answer, Grouped)
    field = field_of(plan)
    limits = limits_of(plan.target.brief.levers, field.extent)
    maker = Maker(field, limits, partners(field.x, field.y, limits.pair))
    trial = Search(maker, first_tree(maker), 4_000_000)
    start = time.perf_counter()
    trial.run()
    rate = trial.work / (time.perf_counter() - start)
    start = time.perf_counter()
    long = Search(maker, first_tree(maker), int(rate * LONG)).run()
    more = time.perf_counter() - start
    print(
        f"\n64 pads, {kind}, {levers}: {seconds:.1f} s, {answer.clashes} clashes, steel "
        f"{answer.root.value / long.value - 1:+.2%} against {more:.0f} s"
    )
