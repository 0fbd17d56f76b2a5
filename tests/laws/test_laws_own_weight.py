"""Laws of own weight, over random trees, masses and attitudes."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hand_hardware import make_hardware_for
from hand_plan_rigs import plan_brief, plan_tree, surface
from hand_rigs import Group, make_plan
from hypothesis import given, settings
from hypothesis import strategies as st

from rigdesign.checks import solve_statics
from rigdesign.checks.hardware.loads import hanging, link_forces, own_weight, pad_forces
from rigdesign.hardware.balance import counterweights, with_counterweights
from rigdesign.hardware.model import Mass
from rigdesign.levers.model import Rig
from rigdesign.target import build_target

FEW = settings(max_examples=20, deadline=None, derandomize=True)
TARGETS = {gravity: build_target(plan_brief(specimen=surface(gravity=gravity))) for gravity in (-1, 1)}


@st.composite
def grouped(draw: st.DrawFn, first: int, last: int) -> Group:
    """Any grouping of neighbours by two or three."""
    if first == last:
        return first
    if last - first >= 2 and draw(st.booleans()):
        cuts = sorted(draw(st.sets(st.integers(first, last - 1), min_size=2, max_size=2)))
        return tuple(draw(grouped(*ends)) for ends in ((first, cuts[0]), (cuts[0] + 1, cuts[1]), (cuts[1] + 1, last)))
    split = draw(st.integers(first, last - 1))
    return (draw(grouped(first, split)), draw(grouped(split + 1, last)))


@st.composite
def rigs(draw: st.DrawFn) -> Rig:
    """A plan rig of up to nine pads in any grouping; no three points of a plate lie on one line but by rare chance."""
    count = draw(st.integers(2, 9))
    seed = draw(st.integers(0, 2**16))
    random = np.random.default_rng(seed)
    x, y = np.sort(random.uniform(0.3, 3.2, count)), random.uniform(-0.6, 0.5, count)
    force = random.uniform(200.0, 2000.0, count)
    target = TARGETS[draw(st.sampled_from([-1, 1]))]
    tree = plan_tree(x, y, force, draw(grouped(1, count)))
    return Rig(make_plan(target, x, force), x, y, (tree,), "by hand", ())


@st.composite
def weighed_rigs(draw: st.DrawFn) -> tuple[Rig, dict[str, Mass]]:
    """A rig and masses that have nothing to do with its steel."""
    rig = draw(rigs())
    random = np.random.default_rng(draw(st.integers(0, 2**16)))
    hung = hanging(rig)
    masses = {f"link {i + 1}": Mass(float(random.uniform(0, 5)), 0.0, 0.0) for i in range(len(hung.lower))}
    masses |= {f"pad {i + 1}": Mass(float(random.uniform(0, 5)), 0.0, 0.0) for i in range(rig.pad_x.size)}
    for piece in rig.trees[0].pieces:
        masses[piece.name] = Mass(*map(float, random.uniform([1.0, -0.3, -0.3], [60.0, 0.3, 0.3])))
    return rig, masses


@FEW
@given(weighed_rigs(), st.floats(-2e4, 2e4))
def test_force_and_both_moments_of_the_whole_rig_close(known, pull):
    """Jack, weights at their places in plan, and pads: a road that knows no tree."""
    rig, masses = known
    felt = pad_forces(own_weight(rig, masses), hanging(rig), np.array([pull]))
    weight = 9.80665 * rig.plan.target.brief.specimen.gravity
    hung, jack = hanging(rig), rig.trees[0].jack
    acting = [(pull, jack.x, jack.y)]
    places = {f"pad {i + 1}": (rig.pad_x[i], rig.pad_y[i]) for i in range(rig.pad_x.size)}
    for piece in rig.trees[0].pieces:
        a, b = piece.ends[:2]
        along = np.array([b.x - a.x, b.y - a.y]) / np.hypot(b.x - a.x, b.y - a.y)
        left = np.array([-along[1], along[0]])
        mass = masses[piece.name]
        # across its own line a lever hands nothing on: it counts as if its weight were on that line
        v = mass.v if piece.kind == "plate" else 0.0
        at = np.array([piece.pivot.x, piece.pivot.y]) + mass.u * along + v * left
        acting.append((weight * mass.mass, *at))
        places[piece.name] = (piece.pivot.x, piece.pivot.y)
    acting += [(weight * masses[f"link {i + 1}"].mass, *places[name]) for i, name in enumerate(hung.lower)]
    acting += [(weight * masses[name].mass, *at) for name, at in places.items() if name.startswith("pad")]
    force, x, y = np.array(acting).T
    size = np.abs(force).sum() + np.abs(felt).sum()
    assert felt.sum() - force.sum() == pytest.approx(0.0, abs=1e-12 * size)
    # near-flat plates cost digits
    assert felt @ rig.pad_x - force @ x == pytest.approx(0.0, abs=1e-8 * size)
    assert felt @ rig.pad_y - force @ y == pytest.approx(0.0, abs=1e-8 * size)


@FEW
@given(weighed_rigs())
def test_fully_balanced_pads_share_all_weight_as_they_share_the_jacks_force(known):
    rig, masses = known
    links = make_hardware_for(rig).links
    loads = own_weight(rig, with_counterweights(rig, masses, counterweights(rig, masses, links, whole=True)))
    # all that weighs, counterweights too, reaches the pads in proportion to their shares
    assert loads.pad_fixed == pytest.approx(loads.pad_rate * loads.weight[0], abs=1e-8 * abs(loads.weight[0]))


@FEW
@given(weighed_rigs())
def test_without_weight_nothing_but_the_jack_is_left(known):
    rig, masses = known
    loads = own_weight(rig, {name: replace(mass, mass=0.0) for name, mass in masses.items()})
    assert not loads.pad_fixed.any()
    assert not loads.lower_fixed.any()
    assert loads.pad_rate == pytest.approx(solve_statics(rig).share, rel=1e-12)


@FEW
@given(weighed_rigs(), st.floats(-2e4, 2e4), st.floats(0.1, 3.0))
def test_forces_are_linear_in_masses_and_jack_together(known, pull, scale):
    rig, masses = known
    more = {name: replace(mass, mass=scale * mass.mass) for name, mass in masses.items()}
    one, other = own_weight(rig, masses), own_weight(rig, more)
    for first, second in zip(
        link_forces(one, np.array([pull])), link_forces(other, np.array([scale * pull])), strict=True
    ):
        assert second == pytest.approx(scale * first, rel=1e-9, abs=1e-6)
