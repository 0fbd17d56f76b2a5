"""The nearest pairs of small rigs against every combination of turns, moved by a road of its own."""

from __future__ import annotations

import math
from itertools import product

import numpy as np
import pytest
from factories import make_brief, make_hardware
from hand_hardware import make_hardware_for
from hand_plan_rigs import make_plan_rig, plan_brief
from hand_rigs import make_rig
from scipy.optimize import nnls
from scipy.spatial.transform import Rotation

from rigdesign.checks.hardware import closest
from rigdesign.checks.hardware.closest import nearest
from rigdesign.checks.hardware.solids import members

TURN = math.radians(6.0)
WITHIN = 1e-6  # m: the distances of these tests come from least squares with heavy rows


def line_hardware(**changes):
    """Five pads; pad 1 on the top lever, then levers of unequal arms: four in all, three tiers on one side."""
    rig = make_rig([0.3, 0.7, 1.0, 1.5, 1.9], [300, 500, 700, 400, 600], make_brief(), (1, ((2, 3), (4, 5))))
    return make_hardware_for(rig, **changes)


def plan_hardware():
    """A lever over a plate of three pads and a slanted lever of two."""
    x, y = [0.3, 0.75, 0.5, 1.25, 1.4], [0.0, 0.02, 0.35, 0.0, 0.3]
    rig = make_plan_rig(x, y, [300, 500, 400, 450, 350], plan_brief(hardware=make_hardware()), ((1, 2, 3), (4, 5)))
    return make_hardware_for(rig)


def hulls_apart(first, second):
    """Distance of two hulls by weights on both, each summing to 1 by a heavy row."""
    heavy = 1e3
    rows = np.zeros((5, len(first) + len(second)))
    rows[:3, : len(first)], rows[:3, len(first) :] = first.T, -second.T
    rows[3, : len(first)], rows[4, len(first) :] = heavy, heavy
    weights, _ = nnls(rows, np.array([0, 0, 0, heavy, heavy]))
    one, two = weights[: len(first)], weights[len(first) :]
    return float(np.linalg.norm(one @ first / one.sum() - two @ second / two.sum()))


def boxes_apart(first, second):
    gap = np.maximum(second.min(axis=0) - first.max(axis=0), first.min(axis=0) - second.max(axis=0))
    return float(np.linalg.norm(np.maximum(gap, 0.0)))


def plan_axes(piece):
    """Directions about which a piece turns, from its holes in plan: across a lever, along the edges of a plate."""
    at = np.array([[hole.x, hole.y, 0.0] for hole in piece.ends])
    if piece.kind == "lever":
        along = at[1] - at[0]
        return [np.array([-along[1], along[0], 0.0]) / np.linalg.norm(along)]
    edges = [at[1] - at[0], at[2] - at[1], at[0] - at[2]]
    return [edge / np.linalg.norm(edge) for edge in edges]


def moved(hardware, listed, turns):
    """Every member's solids in space with the pieces turned by a rotation vector each, hung hole by hole."""
    turned = {name: Rotation.from_rotvec(vector) for name, vector in turns.items()}
    shift = {}

    def hang(name, offset):
        shift[hardware.link_above[name].name] = shift[name] = offset
        piece = next((p for p in hardware.pieces if p.name == name), None)
        for hole in piece.ends if piece else ():
            arm = np.array([hole.x - piece.pivot.x, hole.y - piece.pivot.y, 0.0])
            hang(hole.joins, offset + turned[name].apply(arm) - arm)

    for tree in hardware.rig.trees:
        shift[tree.jack.name] = np.zeros(3)
        hang(tree.jack.carries, np.zeros(3))
    return {
        member.name: [
            member.place + shift[member.name] + (turned[member.name].apply(s) if member.name in turned else s)
            for s in member.solids
        ]
        for member in listed
    }


def pinned(hardware):
    """Pairs that do not count: what a link is pinned to, and pads among themselves."""
    pairs = {frozenset((link.name, end.to)) for link in hardware.links for end in (link.upper, link.lower)}
    pads = [f"pad {pad.pad}" for pad in hardware.pads]
    return pairs | {frozenset(pair) for pair in product(pads, pads)}


def side_by_side(hardware):
    """Pairs of links in two holes of one piece."""
    rows = [[k.name for k in hardware.links if p.name in (k.upper.to, k.lower.to)] for p in hardware.pieces]
    return {frozenset(pair) for row in rows for pair in product(row, row)}


def every_state(hardware, angles):
    axes = [
        [angle * axis for axis in plan_axes(p) for angle in angles if angle] + [np.zeros(3)] for p in hardware.pieces
    ]
    for combination in product(*axes):
        yield {p.name: vector for p, vector in zip(hardware.pieces, combination, strict=True)}


def brute_force(hardware, angles, only=None):
    """Least distance of each pair of members that counts, over every combination of turns."""
    best, skip, listed = {}, pinned(hardware) | side_by_side(hardware), members(hardware)
    for turns in every_state(hardware, angles):
        placed = moved(hardware, listed, turns)
        names = list(placed)
        for i, one in enumerate(names):
            for two in names[i + 1 :]:
                pair = frozenset((one, two))
                if pair in skip if only is None else pair not in only:
                    continue
                for first, second in product(placed[one], placed[two]):
                    if boxes_apart(first, second) < best.get(pair, math.inf):
                        best[pair] = min(hulls_apart(first, second), best.get(pair, math.inf))
    return best


def found_by_program(hardware, turn):
    listed = members(hardware)
    pairs = nearest(listed, turn, len(listed) ** 2)
    return {frozenset((listed[p.first].name, listed[p.second].name)): p.distance for p in pairs}


def direct(hardware):
    """Pairs of a piece and what hangs at its own holes."""
    return {
        frozenset((piece.name, name))
        for piece in hardware.pieces
        for hole in piece.ends
        for name in (hole.joins, hardware.link_above[hole.joins].name)
    } - pinned(hardware)


@pytest.mark.parametrize("make", [line_hardware, plan_hardware])
def test_every_pair_at_rest(make):
    hardware = make()
    expected, found = brute_force(hardware, [0.0]), found_by_program(hardware, 0.0)
    assert set(found) == set(expected)
    assert len(found) > 70
    for pair, distance in expected.items():
        assert found[pair] == pytest.approx(distance, abs=WITHIN), sorted(pair)


@pytest.mark.parametrize("make", [line_hardware, plan_hardware])
def test_what_hangs_on_a_piece_itself_is_exact_and_nothing_is_ever_nearer(make):
    hardware = make()
    expected, found = brute_force(hardware, [-TURN, TURN]), found_by_program(hardware, TURN)
    assert set(found) == set(expected)
    exact = direct(hardware)
    assert len(exact) >= 4
    for pair, distance in expected.items():
        assert found[pair] <= distance + WITHIN, sorted(pair)
        if pair in exact:
            assert found[pair] == pytest.approx(distance, abs=WITHIN), sorted(pair)
    # turning matters: the same pairs are farther apart at rest
    rest = found_by_program(hardware, 0.0)
    assert all(found[pair] < rest[pair] - 1e-3 for pair in exact)


def test_the_boxes_of_levers_between_add_little():
    """Of a line rig whose levers lie between take many angles, no pair comes out nearer than the boxes' inward play."""
    hardware = line_hardware()
    found = found_by_program(hardware, TURN)
    near = set(sorted(found, key=lambda pair: found[pair])[:12])
    expected = brute_force(hardware, [-TURN, -TURN / 2, TURN / 2, TURN], near)
    arms = [sum(abs(hole.u) for hole in piece.ends) for piece in hardware.pieces]
    play = sum(arms) * (1 - math.cos(TURN))
    for pair in near:
        assert found[pair] >= expected[pair] - play - WITHIN, sorted(pair)
    assert play < 0.015


def test_links_in_one_lever_are_a_class_of_their_own():
    hardware = line_hardware()
    listed, pairs = members(hardware), side_by_side(hardware)
    for turn in (0.0, TURN):
        found = nearest(listed, turn, 1000, beside=True)
        by_name = {frozenset((listed[p.first].name, listed[p.second].name)): p.distance for p in found}
        assert set(by_name) == {pair for pair in pairs if len(pair) == 2}
        assert not set(by_name) & set(found_by_program(hardware, turn))
        if not turn:
            expected = brute_force(hardware, [0.0], set(by_name))
            assert by_name == {pair: pytest.approx(distance, abs=WITHIN) for pair, distance in expected.items()}


def test_only_so_many_are_listed_and_they_are_the_nearest():
    hardware = line_hardware()
    listed = members(hardware)
    every, few = nearest(listed, TURN, 1000), nearest(listed, TURN, 7)
    assert few == every[:7]
    assert [pair.distance for pair in every] == sorted(pair.distance for pair in every)


def test_no_two_that_are_pinned_together_and_no_two_pads_are_listed():
    hardware = line_hardware(counterweights={"lever 2": {"A": 4.0}, "lever 1": {"pivot": 2.0}})
    found = found_by_program(hardware, TURN)
    assert not set(found) & pinned(hardware)
    below = hardware.rig.trees[0].pieces[1].ends[0].joins
    weight, own = "counterweight at hole A of lever 2", hardware.link_above[below].name
    assert not {frozenset((weight, "lever 2")), frozenset((weight, own))} & set(found)
    assert frozenset((weight, below)) in found
    # the weight moves with the hole, as the link there does: what hangs there too keeps its distance to it
    if below.startswith("pad"):
        assert found[frozenset((weight, below))] == pytest.approx(
            found_by_program(hardware, 0.0)[frozenset((weight, below))]
        )


def test_pairs_of_many_solids_are_worked_out_in_parts(monkeypatch):
    rig = make_rig([0.3, 0.7, 1.0, 1.5, 1.9], [300, 500, 700, 400, 600], make_brief(), (1, ((2, 3), (4, 5))))
    listed = members(make_hardware_for(rig))
    whole = nearest(listed, math.radians(5.0), 6)
    monkeypatch.setattr(closest, "MOST_ROWS", 7)
    assert nearest(listed, math.radians(5.0), 6) == whole
