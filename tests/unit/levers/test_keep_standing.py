"""A rig as the arrays that drilling works with, and back."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hand_rigs import make_rig
from lever_plans import best_plan, brief_of
from plan_trees import scattered
from test_marks_few import spaced_rig

from rigdesign.checks import check
from rigdesign.errors import InputError
from rigdesign.levers import build_rig
from rigdesign.levers.keep.pivots import forces_of, misfit_rows, pivots_of
from rigdesign.levers.keep.standing import branches_of_rig, directions, rebuilt, steps_of_rig
from rigdesign.levers.model import Rig
from rigdesign.levers.surface.hanging import HungInPlan, hang_moving, hang_staying


def rigs() -> list[Rig]:
    """Free and staying pads, on a line and in plan, levers and plates."""
    made = [build_rig(best_plan(brief_of(7), 7)), spaced_rig()]
    made += [build_rig(scattered(8, 3, may_move=may_move, plates=True)) for may_move in (True, False)]
    assert all(isinstance(rig, Rig) for rig in made)
    return made  # type: ignore[return-value]


def hung(rig: Rig, steps: np.ndarray) -> HungInPlan:
    tree, step = rig.trees[0], rig.plan.target.brief.levers.drill_step
    branches, total = branches_of_rig(rig), abs(tree.force)
    if not rig.plan.may_move:
        return hang_staying(branches, steps[None], step, rig.pad_x, rig.pad_y, total)
    jack = tree.jack.x, tree.jack.y
    return hang_moving(branches, steps[None], step, directions(rig), jack, total, rig.pad_x, rig.pad_y)


@pytest.mark.parametrize("index", range(4))
def test_a_rig_is_hung_again_where_it_was(index):
    rig = rigs()[index]
    now = hung(rig, steps_of_rig(rig))
    again = rebuilt(rig, branches_of_rig(rig), now)
    for old, new in zip(rig.trees[0].pieces, again.trees[0].pieces, strict=True):
        assert replace(old, holes=()) == replace(new, holes=())
        for one, other in zip(old.holes, new.holes, strict=True):
            assert (one.name, one.joins) == (other.name, other.joins)
            np.testing.assert_allclose((other.u, other.v, other.x, other.y), (one.u, one.v, one.x, one.y), atol=1e-12)
    np.testing.assert_allclose(now.pad_force[0], np.abs(check(rig).statics.pad_force), rtol=1e-9)


@pytest.mark.parametrize("index", range(4))
def test_moved_steps_are_those_of_the_rebuilt_rig(index):
    rig = rigs()[index]
    steps = steps_of_rig(rig)
    steps = steps + np.where(np.arange(steps.size) % 3 == 1, 2, -1)
    again = rebuilt(rig, branches_of_rig(rig), hung(rig, steps))
    np.testing.assert_array_equal(steps_of_rig(again), steps)
    np.testing.assert_allclose(
        np.abs(check(again).statics.pad_force), hung(rig, steps).pad_force[0], rtol=1e-9, atol=1e-9
    )


@pytest.mark.parametrize("index", range(4))
def test_shifted_pivots_give_the_forces_that_the_check_solves(index):
    rig = rigs()[index]
    branches, rules = branches_of_rig(rig), rig.plan.target.brief.levers
    pieces = rig.trees[0].pieces
    pivots = pivots_of(rig, branches, rules, dict.fromkeys([piece.name for piece in pieces], 0.02))
    shifts = 0.004 * np.cos(np.arange(2.0 * len(pieces))).reshape(-1, 2)
    for row, pivot in enumerate(pivots):
        shifts[row, 1] *= not pivot.is_lever
    force = forces_of(branches, pivots, shifts[None], abs(rig.trees[0].force))[0]
    moved = tuple(
        replace(piece, holes=(piece.holes[0], *(replace(h, u=h.u - s[0], v=h.v - s[1]) for h in piece.ends)))
        for piece, s in zip(pieces, shifts, strict=True)
    )
    again = replace(rig, trees=(replace(rig.trees[0], pieces=moved),))
    np.testing.assert_allclose(force, np.abs(check(again).statics.pad_force), rtol=1e-9)
    # the equation of each pivot: its moment over its load is its shift
    for pivot, shift in zip(pivots, shifts, strict=True):
        np.testing.assert_allclose(pivot.moments @ force / (pivot.load @ force), shift, atol=1e-12)


def test_misfits_are_what_places_of_pivots_change_apart():
    rig = spaced_rig()
    branches = branches_of_rig(rig)
    pieces = rig.trees[0].pieces
    pivots = pivots_of(rig, branches, rig.plan.target.brief.levers, {p.name: 0.0 for p in pieces})
    force = np.abs(check(rig).statics.pad_force)
    rows = misfit_rows(rig, branches, pivots, force)
    np.testing.assert_allclose(rows @ force / force.mean(), 0.0, atol=1e-12)
    # pads 1 and 2 hang from one lever: what one loses and the other gains moves its pivot by ΔF · 0.4 m / load
    more = force + np.array([-10.0, 10.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0])
    expected = 10.0 * 0.4 / force[:2].sum()
    found = np.abs(rows @ more / force.mean())
    assert found.max() == pytest.approx(expected, rel=1e-9)


def test_several_jacks_and_holes_off_the_step_are_refused():
    rig = make_rig([0.5, 1.1, 2.3], [300.0, 500.0, 217.3])
    with pytest.raises(InputError, match="not on the drill step"):
        steps_of_rig(rig)
    with pytest.raises(InputError, match="2 jacks"):
        branches_of_rig(replace(rig, trees=rig.trees * 2))
