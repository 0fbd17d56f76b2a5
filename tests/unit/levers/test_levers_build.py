"""The rig that comes out: an arborescence whose holes, places and numbers agree."""

from __future__ import annotations

import networkx as nx
import numpy as np
import pytest
from factories import shape_load
from lever_plans import best_plan, brief_of, plan_by_hand

from rigdesign.levers import Rig, build_rig


@pytest.fixture(params=[True, False], ids=["free", "staying"])
def rig(request) -> Rig:
    """Eleven pads under a load against z."""
    brief = brief_of(11, levers={"drill_step": 0.01}, loads=(shape_load("parabolic", -3600.0),))
    result = build_rig(best_plan(brief, 11, may_move=request.param))
    assert isinstance(result, Rig)
    return result


def test_is_an_arborescence_from_the_jack_to_the_pads(rig):
    graph = rig.trees[0].graph
    assert nx.is_arborescence(graph)
    assert [node for node, degree in graph.in_degree() if degree == 0] == ["jack 1"]
    leaves = {node for node, degree in graph.out_degree() if degree == 0}
    assert leaves == {f"pad {number}" for number in range(1, 12)}
    # n pads on one jack need n − 1 levers
    assert len(rig.trees[0].pieces) == 10


def test_holes_stand_over_what_they_join(rig):
    places = {f"pad {number + 1}": x for number, x in enumerate(rig.pad_x)}
    places |= {piece.name: piece.pivot.x for piece in rig.trees[0].pieces}
    assert rig.trees[0].jack.x == rig.trees[0].pieces[0].pivot.x
    for piece in rig.trees[0].pieces:
        assert [hole.name for hole in piece.holes] == ["pivot", "A", "B"]
        assert piece.pivot.joins == piece.parent
        assert piece.pivot.u == 0.0
        for hole in piece.holes:
            assert hole.v == 0.0
            assert hole.y == 0.0
            assert hole.x == pytest.approx(piece.pivot.x + hole.u, abs=1e-12)
        for hole in piece.ends:
            assert hole.x == pytest.approx(places[hole.joins], abs=1e-12)
        assert piece.ends[0].u < 0 < piece.ends[1].u


def test_numbers_run_tier_by_tier(rig):
    pieces = rig.trees[0].pieces
    assert [piece.number for piece in pieces] == list(range(1, 11))
    tiers = [piece.tier for piece in pieces]
    assert tiers == sorted(tiers)
    by_name = {piece.name: piece for piece in pieces}
    for piece in pieces[1:]:
        assert piece.tier == by_name[piece.parent].tier + 1
    assert rig.trees[0].jack.carries == "lever 1"
    assert pieces[0].parent == "jack 1"


def test_the_jack_pulls_with_the_load(rig):
    assert rig.trees[0].force == pytest.approx(-3600.0, rel=1e-12)


def test_words_say_what_was_searched(rig):
    assert "10 levers" in rig.words
    assert "the least of all neighbour groupings" in rig.words
    assert "drilling:" in rig.words


@pytest.mark.parametrize("may_move", [True, False])
def test_one_pad_hangs_on_the_jack(may_move):
    plan = plan_by_hand(brief_of(1), [1.56], [5400.0], may_move)
    rig = build_rig(plan)
    assert isinstance(rig, Rig)
    assert rig.trees[0].pieces == ()
    assert rig.trees[0].jack.carries == "pad 1"
    assert rig.trees[0].jack.x == 1.56
    np.testing.assert_array_equal(rig.pad_x, [1.56])
    assert nx.is_arborescence(rig.trees[0].graph)


def test_progress_runs_from_nothing_to_all():
    seen: list[float] = []
    build_rig(best_plan(brief_of(6), 6), lambda part, word: seen.append(part))
    assert seen[0] == 0.0
    assert seen[-1] == 1.0
    assert seen == sorted(seen)
