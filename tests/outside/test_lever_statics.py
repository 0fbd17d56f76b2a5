"""Statics of levers, and of strips lumped at their centroids.

Sources
-------
Equilibrium of a lever worked by hand for given numbers (the paired tree of four pads, the drift of a lever with its
pivot off the line of its end pins, the number of levers that n pads need), and the errors of n equal strips under a
uniform load from the integrals of w over each strip.  They were computed apart from this package.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_specimen, shape_load
from hand_rigs import make_rig, make_tree

from rigdesign.checks import check, solve_statics
from rigdesign.checks.curves import curves
from rigdesign.checks.measures import hand_errors, hand_pads
from rigdesign.checks.statics import lever_fractions
from rigdesign.target import build_target


def test_four_pads_paired():
    # pads of 4, 3, 2, 1 kN at 1, 2, 3, 4 m: pivots 1.428571, 3.333333, jack at 2.0 m
    specimen = make_specimen(left=0.0, right=4.5)
    brief = make_brief(specimen=specimen, loads=(shape_load(total=10e3, start_x=0.0, end_x=4.5),))
    rig = make_rig([1.0, 2.0, 3.0, 4.0], [4e3, 3e3, 2e3, 1e3], brief, ((1, 2), (3, 4)))
    pivots = {piece.number: piece.pivot.x for piece in rig.trees[0].pieces}
    assert [pivots[2], pivots[3]] == pytest.approx([1.428571, 3.333333], abs=5e-7)
    assert rig.trees[0].jack.x == pytest.approx(2.0)
    solved = solve_statics(rig)
    assert solved.pad_force == pytest.approx([4e3, 3e3, 2e3, 1e3], rel=1e-13)
    assert solved.piece_load == pytest.approx({"lever 1": 10e3, "lever 2": 7e3, "lever 3": 3e3})
    found = check(rig)
    assert found.curves.rig["moment"][0] == pytest.approx(20e3, rel=1e-12)
    assert found.curves.rig["shear"][0] == pytest.approx(10e3, rel=1e-12)


@pytest.mark.parametrize(
    ("h", "turn", "ratio"),
    [(0.020, 5.0, 1.0087873), (0.040, 10.0, 1.0358984), (0.0, 17.0, 1.0)],
)
def test_a_turned_lever_drifts_only_if_its_holes_are_not_in_line(h, turn, ratio):
    one, two = lever_fractions(np.array([0.4]), np.array([0.4]), h, math.radians(turn))
    assert one / two == pytest.approx([ratio], abs=5e-8)
    assert one + two == pytest.approx([1.0], abs=1e-15)


@pytest.mark.parametrize("n_pads", [1, 2, 5, 12, 31])
def test_n_pads_on_one_jack_need_n_minus_one_levers(n_pads):
    tree = make_tree(np.linspace(0.3, 3.1, n_pads), np.arange(1.0, n_pads + 1))
    assert len(tree.pieces) == n_pads - 1


UNIFORM = make_brief(
    specimen=make_specimen(left=0.0, right=1.0),
    loads=(shape_load("uniform", 1.0, start_x=0.0, end_x=1.0),),
    acceptance=make_acceptance(0.9, 0.9),
)


@pytest.mark.parametrize("n_strips", [1, 3, 8, 20])
def test_equal_strips_of_a_uniform_load(n_strips):
    """Under-test at every pad by w s²/8, over-test nowhere; the shear is off by w s/2 on both sides of a pad."""
    target = build_target(UNIFORM)
    x, force = hand_pads(target.net, n_strips)
    s = 1.0 / n_strips
    assert x == pytest.approx((np.arange(n_strips) + 0.5) * s)
    assert force == pytest.approx(np.full(n_strips, s))
    found = curves(target, x, force)
    error = found.error("moment")
    at_pads = np.isin(found.x, x)
    assert error[at_pads] == pytest.approx(np.full(2 * n_strips, -(s**2) / 8), rel=1e-9)
    assert error.min() == pytest.approx(-(s**2) / 8, rel=1e-9)
    assert error.max() == pytest.approx(0.0, abs=1e-12)
    moment, shear = hand_errors(target, n_strips)
    # per cent of the peaks: root moment w L²/2, root shear w L
    assert moment == pytest.approx(s**2 / 4, rel=1e-9)
    assert shear == pytest.approx(s / 2, rel=1e-9)


@pytest.mark.parametrize("n_strips", [4, 9])
def test_local_errors_of_equal_strips(n_strips):
    """At the k-th pad from the tip the moment is off by 1/(2k−1)², the shear by ±1/(2k−1) of the local target."""
    target = build_target(UNIFORM)
    x, force = hand_pads(target.net, n_strips)
    found = curves(target, x, force)
    for k in range(1, n_strips + 1):
        rows = found.x == x[-k]
        moment = found.error("moment")[rows] / found.target["moment"][rows]
        shear = found.error("shear")[rows] / found.target["shear"][rows]
        assert moment == pytest.approx([-1 / (2 * k - 1) ** 2] * 2, rel=1e-9)
        assert shear == pytest.approx([1 / (2 * k - 1), -1 / (2 * k - 1)], rel=1e-9)


@pytest.mark.parametrize("shape", ["triangular", "elliptical", "parabolic"])
def test_lumped_strips_never_exceed_the_target_and_stay_within_a_bound(shape):
    """Strips of equal width at their centroids: under-test between strip ends, by at most about max(w) s²/8."""
    brief = make_brief(
        specimen=make_specimen(left=0.0, right=2.4), loads=(shape_load(shape, 700.0, start_x=0.0, end_x=2.4),)
    )
    target = build_target(brief)
    for n_strips in (3, 7, 16):
        s = 2.4 / n_strips
        found = curves(target, *hand_pads(target.net, n_strips))
        error = found.error("moment")
        ends = np.isin(np.round(found.x, 9), np.round(np.linspace(0, 2.4, n_strips + 1), 9))
        assert error.max() < 1e-10 * target.moment_peak
        # these loads are greatest at the root, where w varies little or linearly in a strip
        greatest = target.net.running(np.array([0.0]), "outboard")[0]
        assert error.min() > -greatest * s**2 / 8
        assert error.min() < -0.8 * greatest * s**2 / 8
        assert np.abs(error[ends]).max(initial=0.0) < 1e-9 * target.moment_peak
