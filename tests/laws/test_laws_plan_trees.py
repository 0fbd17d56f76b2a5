"""Laws of trees in plan: with every y = 0 they are those of a line; shifting, turning and mirroring change nothing."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import make_brief, make_levers, make_pads, make_specimen
from hand_plan_rigs import forces, outline
from hypothesis import given, settings
from hypothesis import strategies as st

from rigdesign.checks.statics import solve_statics
from rigdesign.levers import build_rig
from rigdesign.levers.grouping import group_pads
from rigdesign.levers.model import Rig
from rigdesign.levers.surface.grouping import Grouped, group_in_plan
from rigdesign.levers.surface.wiring import Planned, branches_of
from rigdesign.levers.wiring import Wiring, ideal_levers
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.target import build_target

few = settings(max_examples=12, deadline=None, derandomize=True)
WIDE = outline(((-9.0, -9.0), (9.0, -9.0), (9.0, 9.0), (-9.0, 9.0)), "plate.csv")


def plan_with(x, y, force, is_surface: bool, **levers) -> PadPlan:
    """Pads that stay, on a wide surface or on a line."""
    x, y, force = (np.array(column, dtype=float) for column in (x, y, force))
    pads = make_pads(count=x.size, places="fixed", stations=x, length=0.0, gap=0.0)
    specimen = replace(make_specimen(left=-9.0, right=9.0), outline=WIDE if is_surface else None)
    brief = make_brief(specimen=specimen, pads=pads, levers=make_levers(), loads=(forces(x, y, force),))
    target = build_target(replace(brief, levers=replace(brief.levers, **levers)))
    jack = float((force * x).sum() / force.sum()), float((force * y).sum() / force.sum())
    return PadPlan(target, x, y, force, force, *jack, False, Proof(0.0, 0.0, 0.0, "", "", 0.0, 0.0, 0.0), ())


def grouped(plan: PadPlan) -> Grouped:
    answer = group_in_plan(plan)
    assert isinstance(answer, Grouped), answer
    return answer


def sets_of(answer: Grouped) -> set[int]:
    return {node.mask for node, _ in answer.root.pieces()}


@st.composite
def rows(draw):
    """Places along a line at unequal pitches, forces, and a random grouping in nested pairs."""
    count = draw(st.integers(2, 8))
    x = np.cumsum(draw(st.lists(st.floats(0.2, 0.7), min_size=count, max_size=count)))
    force = draw(st.lists(st.floats(80.0, 300.0), min_size=count, max_size=count))
    groups = list(range(1, count + 1))
    while len(groups) > 2:
        k = draw(st.integers(0, len(groups) - 2))
        groups[k : k + 2] = [(groups[k], groups[k + 1])]
    return x, np.array(force), tuple(groups)


@few
@given(rows())
def test_on_a_line_the_tree_is_that_of_the_line(row):
    x, force, grouping = row
    rules = {"grouping": grouping, "ratio_limit": np.inf, "drill_step": 1e-5}
    line, surface = (plan_with(x, 0 * x, force, flag, **rules) for flag in (False, True))
    wiring, answer = group_pads(line), grouped(surface)
    assert isinstance(wiring, Wiring)
    levers = ideal_levers(wiring, x, force)
    branches = branches_of(answer.root, x.size, 1e-9)
    planned = Planned.of(branches, x, 0 * x, force)
    assert [tuple(ends) for ends in wiring.ends.tolist()] == list(branches.ends)
    assert wiring.tier.tolist() == list(branches.tier)
    assert planned.x == pytest.approx(levers.pivot, rel=1e-12)
    assert planned.load == pytest.approx(levers.load, rel=1e-12)
    assert answer.steel == pytest.approx(levers.steel_estimate, rel=1e-9)
    one, other = build_rig(line), build_rig(surface)
    assert isinstance(one, Rig)
    assert isinstance(other, Rig)
    for upper, lower in zip(one.trees[0].pieces, other.trees[0].pieces, strict=True):
        assert [h.joins for h in upper.holes] == [h.joins for h in lower.holes]
        # both descend from the nearest step of 0.01 mm, by no more than 4 steps a lever
        assert [h.u for h in upper.holes] == pytest.approx([h.u for h in lower.holes], abs=1e-3)
    assert solve_statics(one).pad_force == pytest.approx(solve_statics(other).pad_force, rel=5e-3)


@st.composite
def scatters(draw):
    """Unequal pads scattered over a square, no two at one place."""
    seed, count = draw(st.integers(1, 10_000)), draw(st.integers(3, 8))
    random = np.random.default_rng(seed)
    return random.uniform(0, 2, count), random.uniform(0, 2, count), random.uniform(100, 300, count)


@few
@given(scatters(), st.floats(-3.0, 3.0), st.floats(-4.0, 4.0), st.floats(-4.0, 4.0), st.booleans())
def test_shifted_and_turned_pads_hang_alike(pads, angle, dx, dy, plates):
    x, y, force = pads
    cos, sin = np.cos(angle), np.sin(angle)
    turned = dx + x * cos - y * sin, dy + x * sin + y * cos
    rules = {"plates": plates, "clearance": 0.05}
    one, other = grouped(plan_with(x, y, force, True, **rules)), grouped(plan_with(*turned, force, True, **rules))
    assert sets_of(one) == sets_of(other)
    assert other.steel == pytest.approx(one.steel, rel=1e-9)


@few
@given(scatters(), st.booleans())
def test_mirrored_pads_hang_alike_and_share_alike(pads, plates):
    x, y, force = pads
    rigs = [build_rig(plan_with(x, sign * y, force, True, plates=plates, drill_step=1e-5)) for sign in (1, -1)]
    one, other = rigs
    assert isinstance(one, Rig)
    assert isinstance(other, Rig)
    assert len(one.trees[0].pieces) == len(other.trees[0].pieces)
    # whole steps of 0.01 mm from another hole A, on arms of centimetres
    assert solve_statics(one).pad_force == pytest.approx(solve_statics(other).pad_force, rel=0.02)


@few
@given(scatters())
def test_plates_never_cost_steel(pads):
    x, y, force = pads
    with_levers, with_plates = (grouped(plan_with(x, y, force, True, plates=flag)) for flag in (False, True))
    assert with_plates.steel <= with_levers.steel * (1 + 1e-9)
