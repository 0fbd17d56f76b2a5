"""Bending and torsion about a swept axis, from components worked out by hand (C).

The axis runs from (0, 0) to (4, −3): its direction is a = (0.8, −0.6), so that hand arithmetic stays exact.  Cut square
to it, a force F at d from the axis' point has the moment F (0.8 d_x − 0.6 d_y) and the torsion F (0.8 d_y + 0.6 d_x);
cut square to x, F d_x and F d_y.  The two are components of one couple: M' = M a_x + T a_y and T' = T a_x − M a_y.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import shape_load, table_load
from plan_targets import couple_load, line, outline, plan_forces, surface_target, torque_load

from rigdesign.brief.model import ShapeLoad
from rigdesign.target import Target

PLAN = outline((0.0, -4.0), (4.0, -4.0), (4.0, 1.0), (0.0, 1.0))
AXIS = line((0.0, 0.0), (4.0, -3.0))
# a kink at x = 2: straight along x first, then down the same slope
BENT = line((0.0, 0.0), (2.0, 0.0), (4.0, -1.5))
EXACT = 1e-9  # N and N·m, of loads of some 1000 N


def swept(*loads, cut="square to axis", axis=AXIS, **changes) -> Target:
    return surface_target(*loads, outline=PLAN, axis=axis, cut=cut, left=0.0, right=4.0, **changes)


def at(target: Target, x: float, side: str = "outboard") -> tuple[float, float, float]:
    where = np.array([x])
    return tuple(float(of(where, side)[0]) for of in (target.shear, target.moment, target.torsion))


def uniform(total: float, start: float = 0.0, end: float = 4.0, **changes) -> ShapeLoad:
    return replace(shape_load("uniform", total, start_x=start, end_x=end), **changes)


def test_a_force_beside_the_axis():
    """100 N at (2.9, −1.2), cut at x = 1.2: the axis' point is (1.2, −0.9), d = (1.7, −0.3)."""
    force = plan_forces([2.9], [-1.2], [100.0])
    assert at(swept(force), 1.2) == pytest.approx((100.0, 154.0, 78.0), abs=EXACT)
    assert at(swept(force, cut="square to x"), 1.2) == pytest.approx((100.0, 170.0, -30.0), abs=EXACT)


def test_which_side_of_the_cut_a_force_is_on():
    """(1.5, 0.6) lies outboard of x = 1.2, but inboard of the cut square to the axis there: d = (0.3, 1.5) gives
    d·a = 0.24 − 0.9.
    """
    force = plan_forces([1.5], [0.6], [100.0])
    anchor = plan_forces([3.9], [-2.9], [50.0])
    d = (2.7, -2.0)
    only = (50.0, 50.0 * (0.8 * d[0] - 0.6 * d[1]), 50.0 * (0.8 * d[1] + 0.6 * d[0]))
    assert at(swept(force, anchor), 1.2) == pytest.approx(only, abs=EXACT)
    assert at(swept(force, anchor, cut="square to x"), 1.2)[0] == 150.0


def test_the_jump_stands_where_the_cut_passes_through_the_force():
    """(2.9, −1.2) lies 0.8·2.9 + 0.6·1.2 = 3.04 along the axis: station 0.8·3.04 = 2.432."""
    target = swept(plan_forces([2.9], [-1.2], [100.0]))
    # its distance to the left: 0.8·(−1.2) + 0.6·2.9
    assert at(target, 2.432, "inboard") == pytest.approx((100.0, 0.0, 78.0), abs=1e-7)
    assert at(target, 2.432, "outboard") == pytest.approx((0.0, 0.0, 0.0), abs=1e-7)


def test_a_uniform_load_on_the_axis():
    """w per x on the axis: square to it no torsion, M = w (L − x)²/2 over cos Λ; square to x T is the slope times M."""
    w, x = 150.0, 1.0
    bending = w * 3.0**2 / 2.0
    assert at(swept(uniform(600.0)), x) == pytest.approx((450.0, bending / 0.8, 0.0), abs=EXACT)
    assert at(swept(uniform(600.0), cut="square to x"), x) == pytest.approx(
        (450.0, bending, -0.75 * bending), abs=EXACT
    )


def test_a_load_along_a_line_of_its_own():
    """Uniform along y = 0.2 − 0.5 x, cut square to x at x = 1: T = ∫ (0.2 − 0.5 s + 0.75) w ds over 1 < s < 4
    = w (0.95·3 − 0.25·15) = −0.9 w.
    """
    load = uniform(600.0, line=line((0.0, 0.2), (4.0, -1.8)))
    assert at(swept(load, cut="square to x"), 1.0) == pytest.approx((450.0, 675.0, -135.0), abs=EXACT)


def test_a_load_along_a_line_square_to_a_swept_cut():
    """The same, cut square to the axis at its point (1, −0.75), which lies 1.25 along.  The line's places lie
    0.8 s − 0.6 (0.2 − 0.5 s) = 1.1 s − 0.12 along, so what counts begins at s = 1.37/1.1; and
    0.8 (0.2 − 0.5 s) + 0.6 s = 0.16 + 0.2 s to the left.
    """
    w, first = 150.0, 1.37 / 1.1
    load = uniform(600.0, line=line((0.0, 0.2), (4.0, -1.8)))
    reach = 4.0 - first
    expected = (w * reach, w * 1.1 * reach**2 / 2.0, w * (0.16 * reach + 0.1 * (16.0 - first**2)))
    assert at(swept(load), 1.0) == pytest.approx(expected, abs=1e-8)


def test_both_cuts_see_one_couple():
    """What lies wholly beyond both cuts: the two sets of components turn into each other."""
    loads = (plan_forces([3.2, 2.9], [-2.6, -1.9], [140.0, -60.0]), table_load([2.9, 3.6], [80.0, 210.0]))
    along, across = at(swept(*loads), 0.7), at(swept(*loads, cut="square to x"), 0.7)
    assert along[0] == pytest.approx(across[0], rel=1e-12)
    assert along[1] == pytest.approx(across[1] * 0.8 - across[2] * 0.6, rel=1e-12)
    assert along[2] == pytest.approx(across[2] * 0.8 + across[1] * 0.6, rel=1e-12)


@pytest.mark.parametrize("cut", ["square to x", "square to axis"])
def test_moving_the_axis_changes_torsion_by_shear_times_the_offset(cut):
    """An axis 0.3 m further ahead, every place measured to it: T falls by V times the offset square to the cut."""
    loads = (
        plan_forces([3.3, 2.9], [-2.3, -1.9], [140.0, 60.0]),
        uniform(300.0, 3.0, 4.0, line=line((3.0, -2.0), (4.0, -2.5))),
    )
    ahead = line((0.0, 0.3), (4.0, -2.7))
    here, moved = at(swept(*loads, cut=cut), 0.5), at(swept(*loads, cut=cut, axis=ahead), 0.5)
    offset = 0.3 if cut == "square to x" else 0.3 * 0.8
    along = 0.0 if cut == "square to x" else -0.3 * -0.6
    assert moved[0] == pytest.approx(here[0])
    assert moved[2] - here[2] == pytest.approx(-here[0] * offset, rel=1e-12)
    assert here[1] - moved[1] == pytest.approx(here[0] * -along, rel=1e-9, abs=1e-9)


def test_a_kink():
    """200 N at (3.0, −0.9): from x = 1 on the straight part d = (2, −0.9); from x = 2.4, y = −0.3 beyond the kink
    d = (0.6, −0.6).
    """
    target = swept(plan_forces([3.0], [-0.9], [200.0]), axis=BENT)
    assert at(target, 1.0) == pytest.approx((200.0, 400.0, -180.0), abs=EXACT)
    bending, twisting = 200.0 * (0.48 + 0.36), 200.0 * (-0.48 + 0.36)
    assert at(target, 2.4) == pytest.approx((200.0, bending, twisting), abs=EXACT)


def test_at_a_kink_each_side_has_the_direction_of_its_stretch():
    """From (2, 0): d = (1, −0.9); along x 1 and −0.9, along a 0.8 + 0.54 and −0.72 + 0.6."""
    target = swept(plan_forces([3.0], [-0.9], [200.0]), axis=BENT)
    assert at(target, 2.0, "inboard") == pytest.approx((200.0, 200.0, -180.0), abs=EXACT)
    assert at(target, 2.0, "outboard") == pytest.approx((200.0, 268.0, -24.0), abs=EXACT)


def test_couples_and_torques_about_x_and_about_the_axis():
    """A couple of 60 N·m at x = 3 and 25 N·m/m over 1 < x < 3, cut at x = 2: 60 + 25 beyond it."""
    loads = (uniform(400.0), couple_load(3.0, 60.0), torque_load([1.0, 3.0], [25.0, 25.0]))
    for cut in ("square to x", "square to axis"):
        plain, twisted = at(swept(loads[0], cut=cut), 2.0), at(swept(*loads, cut=cut), 2.0)
        assert np.subtract(twisted, plain) == pytest.approx([0.0, 0.0, 85.0], abs=EXACT)


def test_a_couple_beyond_a_kink_bends_the_straight_part():
    """60 N·m about a = (0.8, −0.6) seen from a cut square to x: T = 0.8·60, M = 60 (0.8·0 + 0.6·1)."""
    plain, twisted = (
        at(swept(*loads, axis=BENT), 1.0) for loads in ((uniform(400.0),), (uniform(400.0), couple_load(3.0, 60.0)))
    )
    assert np.subtract(twisted, plain) == pytest.approx([0.0, 36.0, 48.0], abs=EXACT)
    at_kink = [
        at(swept(uniform(400.0), couple_load(2.0, 60.0), axis=BENT), 2.0, side) for side in ("inboard", "outboard")
    ]
    bare = [at(swept(uniform(400.0), axis=BENT), 2.0, side) for side in ("inboard", "outboard")]
    # at the kink the couple turns about the outboard stretch; outboard of it nothing is left
    assert np.subtract(at_kink, bare) == pytest.approx(np.array([[0.0, 36.0, 48.0], [0.0, 0.0, 0.0]]), abs=EXACT)


def test_two_supports_on_a_swept_axis():
    """120 N at (2, 0.5) between supports at x = 1 and x = 3, cut square to x: R2 = −60 N, R1 = −60 N.

    The first holds ΣT about x: forces 120·0.5 − 60·(−0.75) − 60·(−2.25) = 240, so its couple is −240 N·m.  Between
    the load and the second support only R2 lies outboard; at x = 2.5, y = −1.875, T = −60 (−2.25 + 1.875).
    """
    target = swept(plan_forces([2.0], [0.5], [120.0]), cut="square to x", supports=(1.0, 3.0))
    assert at(target, 2.5) == pytest.approx((-60.0, -30.0, 22.5), abs=EXACT)
    # at x = 1.5, y = −1.125: 120 (0.5 + 1.125) − 60 (−2.25 + 1.125)
    assert at(target, 1.5) == pytest.approx((60.0, -30.0, 262.5), abs=EXACT)
    assert at(target, 0.5) == pytest.approx((0.0, 0.0, 0.0), abs=EXACT)
