"""The proven least number of different pieces."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
import pytest
from lever_plans import best_plan, brief_of

from rigdesign.levers import build_rig
from rigdesign.levers.marks import bound
from rigdesign.levers.marks.trials import Trials


def partitions(items: list[int]) -> Iterator[list[list[int]]]:
    """All ways to put items into groups."""
    if not items:
        yield []
        return
    first, *rest = items
    for groups in partitions(rest):
        yield [[first], *groups]
        for k in range(len(groups)):
            yield [*groups[:k], [first, *groups[k]], *groups[k + 1 :]]


def fewest_by_hand(centres: np.ndarray, reach: int) -> int:
    """Fewest groups of boxes (n, d) of half width `reach` about whole numbers that have a whole point in common."""
    return min(
        len(groups)
        for groups in partitions(list(range(len(centres))))
        if all((np.ptp(centres[group], axis=0) <= 2 * reach).all() for group in groups)
    )


@pytest.mark.parametrize("seed", range(6))
def test_the_bound_is_the_fewest_groups_of_boxes_that_meet(seed):
    centres = np.random.default_rng(seed).integers(0, 30, (7, 2))
    reach = 4
    apart = np.abs(centres[:, None] - centres[None]).max(axis=2)
    least, groups = bound.fewest_groups(apart <= 2 * reach)
    assert least == fewest_by_hand(centres, reach) == len(groups)
    assert sorted(row for group in groups for row in group) == list(range(7))
    # boxes that meet pairwise have a point in common
    assert all((np.ptp(centres[list(group)], axis=0) <= 2 * reach).all() for group in groups)


def test_with_too_many_cliques_the_bound_is_smaller_but_still_one(monkeypatch):
    centres = np.random.default_rng(1).integers(0, 30, (7, 2))
    compatible = np.abs(centres[:, None] - centres[None]).max(axis=2) <= 8
    exact, _ = bound.fewest_groups(compatible)
    monkeypatch.setattr(bound, "CLIQUES", 1)
    least, groups = bound.fewest_groups(compatible)
    assert groups == ()
    assert 1 <= least <= exact


def test_levers_are_compatible_within_twice_the_tolerance_in_whole_steps():
    rig = build_rig(best_plan(brief_of(8, levers={"drill_step": 0.004}), 8))
    pieces = rig.trees[0].pieces
    arms = np.array([(-p.ends[0].u, p.ends[1].u) for p in pieces])
    # a tolerance of 22 mm is 5 steps of 4 mm
    found = bound.could_be_alike(Trials(rig, 0.022, 1.0))
    off = np.abs(arms[:, None] - arms[None]).max(axis=2)
    assert np.array_equal(found, off <= 2 * 0.020 + 1e-6)
    assert found.any(axis=1).all()
    assert not found.all()
