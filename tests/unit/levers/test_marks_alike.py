"""Which pieces are the same part."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from hand_plan_rigs import make_plan_rig
from hand_rigs import make_rig, with_hole

from rigdesign.levers.marks import alike
from rigdesign.levers.marks.alike import SAME


def rig_of_three():
    """Three levers; those under the top one join pads 0.4 m apart that carry 1 : 3 and 1 : 3."""
    return make_rig([0.5, 0.9, 1.9, 2.3], [300.0, 900.0, 150.0, 450.0])


def test_levers_with_the_same_arms_are_one_part_and_the_order_is_the_rigs():
    assert alike(rig_of_three()) == (("lever 1",), ("lever 2", "lever 3"))


def test_a_lever_turned_end_for_end_is_another_part():
    rig = make_rig([0.5, 0.9, 1.9, 2.3], [300.0, 900.0, 450.0, 150.0])
    a, b = (np.abs([hole.u for hole in piece.ends]) for piece in rig.trees[0].pieces[1:])
    np.testing.assert_allclose(a, b[::-1])
    assert alike(rig) == (("lever 1",), ("lever 2",), ("lever 3",))


def test_holes_that_differ_by_less_than_can_be_drilled_are_one():
    rig = rig_of_three()
    u = rig.trees[0].pieces[2].ends[0].u
    assert len(alike(with_hole(rig, 3, "A", u=u + 0.5 * SAME))) == 2
    assert len(alike(with_hole(rig, 3, "A", u=u + 2 * SAME))) == 3
    assert len(alike(with_hole(rig, 3, "B", v=2 * SAME))) == 3


def test_where_the_frame_has_its_origin_does_not_matter():
    rig = rig_of_three()
    pieces = rig.trees[0].pieces
    moved = replace(pieces[2], holes=tuple(replace(hole, u=hole.u + 0.37) for hole in pieces[2].holes))
    again = replace(rig, trees=(replace(rig.trees[0], pieces=(*pieces[:2], moved)),))
    assert alike(again) == alike(rig)


def test_plates_are_alike_in_their_own_frames_and_mirrored_ones_are_not():
    x = np.array([0.6, 1.0, 0.9, 2.1, 2.5, 2.4])
    y = np.array([-0.2, -0.1, 0.25, -0.3, -0.2, 0.15])
    force = np.array([300.0, 500.0, 200.0, 450.0, 750.0, 300.0])
    group = ((1, 2, 3), (4, 5, 6))
    rig = make_plan_rig(x, y, force, group=group)
    assert alike(rig) == (("lever 1",), ("lever 2", "lever 3"))
    mirrored = make_plan_rig(x, np.concatenate([y[:3], -0.5 - y[3:]]), force, group=group)
    assert len(alike(mirrored)) == 3
