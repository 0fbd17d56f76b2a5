"""Drilled trees in plan: frames, whole steps, statics, by hand and against the check's own statics."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import make_pads
from hand_plan_rigs import panel, plan_brief, pressure
from plan_trees import Looked, gridded, plan_of, scattered

from rigdesign.checks.geometry import leans
from rigdesign.checks.measures import steel_estimate
from rigdesign.checks.statics import solve_statics
from rigdesign.findings import Refusal
from rigdesign.levers import build_rig
from rigdesign.levers.model import Piece, Rig
from rigdesign.levers.surface.build import close_pieces
from rigdesign.levers.surface.drilling import drill_in_plan
from rigdesign.levers.surface.grouping import Grouped, group_in_plan
from rigdesign.levers.surface.hanging import handed_on, hang_staying
from rigdesign.levers.surface.nodes import Node
from rigdesign.levers.surface.pad_limits import PadLimits
from rigdesign.levers.surface.wiring import branches_of
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.target import build_target


def built(plan: PadPlan) -> Rig:
    rig = build_rig(plan)
    assert isinstance(rig, Rig), rig
    return rig


def outer(piece: Piece) -> dict[str, tuple[float, float]]:
    return {hole.name: (hole.u, hole.v) for hole in piece.ends}


def is_whole(value: float, step: float) -> bool:
    return abs(value / step - round(value / step)) < 1e-6


def test_a_slanted_lever_by_hand():
    # 3 : 2 on a lever 0.5 m long: pivot 0.2 m from A, along (0.6, 0.8)
    rig = built(plan_of([0.0, 0.3], [0.0, 0.4], [300.0, 200.0]))
    (lever,) = rig.trees[0].pieces
    assert outer(lever) == {"A": pytest.approx((-0.2, 0.0)), "B": pytest.approx((0.3, 0.0))}
    assert (lever.pivot.x, lever.pivot.y) == pytest.approx((0.12, 0.16))
    assert (lever.pivot.u, lever.pivot.v) == (0.0, 0.0)
    assert [hole.joins for hole in lever.holes] == ["jack 1", "pad 1", "pad 2"]
    assert (rig.trees[0].jack.x, rig.trees[0].jack.y) == pytest.approx((0.12, 0.16))


def test_a_plate_by_hand():
    # 2 : 3 : 5 at (0, 0), (0.6, 0), (0.2, 0.5): centroid (0.28, 0.25); counter-clockwise the far pad is B
    rig = built(plan_of([0.0, 0.2, 0.6], [0.0, 0.5, 0.0], [200.0, 500.0, 300.0], plates=True, tiers=1))
    (plate,) = rig.trees[0].pieces
    assert plate.kind == "plate"
    assert [hole.joins for hole in plate.ends] == ["pad 1", "pad 3", "pad 2"]
    assert outer(plate)["A"] == pytest.approx((-0.28, -0.25))
    assert outer(plate)["B"] == pytest.approx((0.32, -0.25))
    assert outer(plate)["C"] == pytest.approx((-0.08, 0.25))
    assert solve_statics(rig).pad_force == pytest.approx([200.0, 500.0, 300.0])


def test_a_plate_whose_frame_is_turned_by_hand():
    # the same plate turned by a right angle: A is now the corner of least x
    turned = plan_of([-0.5, 0.0, 0.0], [0.2, 0.0, 0.6], [500.0, 200.0, 300.0], plates=True, tiers=1)
    (plate,) = built(turned).trees[0].pieces
    assert [hole.joins for hole in plate.ends] == ["pad 1", "pad 2", "pad 3"]
    a_to_b = np.array([0.5, -0.2]) / np.hypot(0.5, 0.2)
    away = np.array([-0.25, 0.28]) - np.array([-0.5, 0.2])
    pivot = away @ a_to_b, away @ np.array([-a_to_b[1], a_to_b[0]])
    assert outer(plate)["A"] == pytest.approx((-pivot[0], -pivot[1]), abs=0.0011)
    assert is_whole(outer(plate)["A"][0], 0.001)
    assert is_whole(outer(plate)["A"][1], 0.001)


def test_levers_across_have_their_lower_end_as_a():
    # equal x: A is the end of lesser y, whatever rounding makes of x
    rig = built(plan_of([0.3, 0.3 + 1e-13], [0.4, -0.2], [100.0, 130.0]))
    assert [hole.joins for hole in rig.trees[0].pieces[0].ends] == ["pad 2", "pad 1"]


@pytest.mark.parametrize("may_move", [False, True])
@pytest.mark.parametrize("plates", [False, True])
def test_frames_and_steps_of_a_larger_rig(plates, may_move):
    step = 0.005
    plan = scattered(9, 4, may_move=may_move, plates=plates, drill_step=step, pads={"places": "free"})
    rig = built(plan)
    assert max(lean.size for lean in leans(rig)) < 1e-9
    numbers = [piece.number for piece in rig.trees[0].pieces]
    assert numbers == list(range(1, len(numbers) + 1))
    place = {piece.name: (piece.pivot.x, piece.pivot.y) for piece in rig.trees[0].pieces}
    place |= {f"pad {k + 1}": (rig.pad_x[k], rig.pad_y[k]) for k in range(9)}
    for piece in rig.trees[0].pieces:
        ends = piece.ends
        assert ends[0].v == ends[1].v
        assert ends[0].u < ends[1].u
        assert ends[0].x <= min(hole.x for hole in ends) + step
        for hole in piece.holes[1:]:
            assert (hole.x, hole.y) == pytest.approx(place[hole.joins], abs=1e-12)
        if piece.kind == "plate":
            assert ends[2].v > ends[0].v, "A, B, C run counter-clockwise"
        holes = [(hole.u, hole.v) for hole in ends] if may_move else [(ends[0].u, ends[0].v)]
        assert all(is_whole(value, step) for hole in holes for value in hole)
    if not may_move:
        assert np.array_equal(rig.pad_x, plan.x)
        assert np.array_equal(rig.pad_y, plan.y)


def test_free_pads_keep_the_resultant_exactly():
    plan = scattered(9, 4, may_move=True, plates=True, drill_step=0.01, pads={"places": "free"})
    rig = built(plan)
    force = solve_statics(rig).pad_force
    assert (rig.trees[0].jack.x, rig.trees[0].jack.y) == (plan.jack_x, plan.jack_y)
    assert force.sum() == pytest.approx(plan.force.sum(), rel=1e-12)
    assert (force * rig.pad_x).sum() == pytest.approx((plan.force * plan.x).sum(), rel=1e-12)
    assert (force * rig.pad_y).sum() == pytest.approx((plan.force * plan.y).sum(), rel=1e-12)


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_the_drilled_rig_brings_what_was_planned(sign):
    plan = scattered(10, 2, plates=True)
    plan = plan_of(plan.x, plan.y, sign * plan.force, plates=True)
    rig = built(plan)
    statics = solve_statics(rig)
    assert statics.pad_force == pytest.approx(plan.force, rel=0.05)
    assert statics.force_residual < 1e-12
    assert statics.moment_residual < 1e-12
    tree = rig.trees[0]
    # within a step and a half of the resultant: the nearest place is never further than 0.71 steps
    assert np.hypot(tree.jack.x - plan.jack_x, tree.jack.y - plan.jack_y) < 0.0015
    assert tree.force == pytest.approx(plan.force.sum())


def test_finer_steps_come_closer_to_the_plan():
    plan = scattered(8, 6, plates=True)
    off = []
    for step in (0.02, 0.002, 0.0002):
        brief = plan.target.brief
        target = replace(plan.target, brief=replace(brief, levers=replace(brief.levers, drill_step=step)))
        off.append(np.abs(solve_statics(built(replace(plan, target=target))).pad_force / plan.force - 1).max())
    assert off[2] < 0.002
    assert off[2] < off[1] < off[0]


@pytest.mark.parametrize("plates", [False, True])
def test_the_checks_steel_is_the_groupings(plates):
    plan = scattered(9, 3, plates=plates, drill_step=1e-7)
    rig = built(plan)
    grouped = group_in_plan(plan)
    assert isinstance(grouped, Grouped)
    # a step of 0.1 µm on arms of 0.1 m
    assert steel_estimate(rig, solve_statics(rig)) == pytest.approx(grouped.steel, rel=1e-5)
    assert f"steel estimate {grouped.steel:.4g}" in rig.words


@pytest.mark.parametrize(("rows", "columns"), [(2, 2), (4, 4), (2, 4)])
def test_equal_pads_on_a_grid_of_even_numbers_share_alike(rows, columns):
    # halves of halves: every pivot in the middle, on whole steps
    rig = built(gridded(rows, columns))
    statics = solve_statics(rig)
    assert statics.pad_force == pytest.approx(np.full(rows * columns, 120.0), rel=1e-9)
    assert statics.moment_residual < 1e-12


@pytest.mark.parametrize("plates", [False, True])
def test_nine_equal_pads_hang_in_balance(plates):
    rig = built(gridded(3, 3, plates=plates))
    statics = solve_statics(rig)
    # slanted levers put pivots up to half a step of 1 mm off, on arms of 0.2 m and more
    assert statics.pad_force == pytest.approx(np.full(9, 120.0), rel=0.01)
    assert statics.force_residual < 1e-12
    assert statics.moment_residual < 1e-12


def test_one_pad_hangs_on_the_jack():
    rig = built(plan_of([0.4], [0.2], [150.0]))
    assert rig.trees[0].jack.carries == "pad 1"
    assert rig.trees[0].pieces == ()
    assert (rig.trees[0].jack.x, rig.trees[0].jack.y) == (0.4, 0.2)


def test_a_step_too_coarse_is_refused():
    answer = build_rig(plan_of([0.0, 0.3], [0.0, 0.4], [300.0, 200.0], drill_step=0.3))
    assert isinstance(answer, Refusal)
    assert answer.stage == "levers"


def test_limits_hold_as_drilled():
    plan = scattered(12, 8, plates=True, drill_step=0.01, ratio_limit=2.0, longest=1.4, shortest_arm=0.05)
    for piece in built(plan).trees[0].pieces:
        reach = [np.hypot(hole.u, hole.v) for hole in piece.ends]
        assert min(reach) >= 0.05 - 1e-9
        if piece.kind == "lever":
            assert max(reach) <= 2.0 * min(reach) * (1 + 1e-9)
        for one in piece.ends:
            for other in piece.ends:
                assert np.hypot(one.u - other.u, one.v - other.v) <= 1.4 + 1e-9


def test_what_a_plate_hands_on_by_hand():
    # pivot a third of the way along one median: 1/2, 1/4, 1/4
    u, v = np.array([[0.0, -0.4, 0.4]]), np.array([[0.3, -0.3, -0.3]])
    assert handed_on(u, v)[0] == pytest.approx([0.5, 0.25, 0.25])


def free_pads() -> PadPlan:
    """Twelve free pads of 0.46 × 0.28 m on a panel of 2 × 1.2 m: 30 mm apart and 30 mm from the outline."""
    pads = make_pads(count=12, places="free", length=0.46, width=0.28, gap=0.03)
    pads = replace(pads, edge=0.03)
    brief = plan_brief(panel(), pads=pads, loads=(pressure(1000.0, 150.0, 90.0),))
    target = build_target(brief)
    x, y = (g.ravel() for g in np.meshgrid(0.26 + 0.4933 * np.arange(4), -0.33 + 0.43 * np.arange(3), indexing="ij"))
    force = 200.0 * (1 + 0.15 * x + 0.09 * y)
    jack = (force * x).sum() / force.sum(), (force * y).sum() / force.sum()
    return PadPlan(target, x, y, force, force, *jack, True, Proof(0.0, 0.0, 0.0, "", "", 0.0, 0.0, 0.0), ())


def test_free_pads_stay_on_the_outline_and_apart():
    plan = free_pads()
    brief = plan.target.brief
    plan = replace(
        plan, target=replace(plan.target, brief=replace(brief, levers=replace(brief.levers, drill_step=0.004)))
    )
    rig = built(plan)
    grouped = group_in_plan(plan)
    assert isinstance(grouped, Grouped)
    limits = PadLimits(plan, branches_of(grouped.root, 12, 0.004))
    force = solve_statics(rig).pad_force
    assert limits.missed(rig.pad_x[None], rig.pad_y[None], force[None])[0] == 0.0
    # every hole of three tiers or more within a step or two of its plan
    assert np.hypot(rig.pad_x - plan.x, rig.pad_y - plan.y).max() < 0.02
    # what the measure says of pads that are moved together, and of one that is moved off
    near, off = rig.pad_x.copy(), rig.pad_y.copy()
    near[4] -= 0.02
    off[0] -= 0.05
    assert limits.missed(near[None], rig.pad_y[None], force[None])[0] > 0
    assert limits.missed(rig.pad_x[None], off[None], force[None])[0] > 0


def test_the_jack_stays_at_its_place_though_errors_could_be_smaller_elsewhere():
    # these pads leave errors of several bands, and a jack some steps away would make them smaller
    plan = replace(free_pads(), may_move=False)
    levers = replace(plan.target.brief.levers, drill_step=0.01)
    rig = built(replace(plan, target=replace(plan.target, brief=replace(plan.target.brief, levers=levers))))
    jack = rig.trees[0].jack
    # a fifth of a step: several tiers of slanted pieces offer many places of the top pivot near the planned one
    assert np.hypot(jack.x - plan.jack_x, jack.y - plan.jack_y) < 0.002


def test_a_plates_points_keep_the_shortest_arm():
    plan = plan_of([0.0, 0.2, 0.6], [0.0, 0.5, 0.0], [200.0, 500.0, 300.0], plates=True, tiers=1)
    branches = branches_of(group_in_plan(plan).root, 3, 1e-3)
    (plate,) = hang_staying(branches, np.array([[280, 250]]), 0.001, plan.x, plan.y, 1000.0).pieces
    nearest = np.hypot(0.08, 0.25)  # of the pad at (0.2, 0.5)
    for arm, is_kept in ((nearest * 1.001, False), (nearest * 0.999, True)):
        assert plate.kept(replace(plan.target.brief.levers, shortest_arm=arm))[0] == is_kept


def test_pieces_too_close_are_told_in_a_finding():
    plan = plan_of([0.0, 0.0, 1.0, 1.0], [0.0, 1.0, 0.1, 1.2], [100.0, 210.0, 190.0, 110.0], grouping=((1, 4), (2, 3)))
    rig = built(plan)
    assert close_pieces(rig.trees[0], 0.0) == [("lever 2", "lever 3")]
    (finding,) = rig.findings
    assert (finding.stage, finding.severity) == ("levers", "warning")
    assert "lever 2 and lever 3" in finding.text
    assert "group the pads otherwise" in finding.remedy


def test_pieces_planned_at_the_clearance_itself_are_far_enough():
    # two levers side by side, exactly the clearance apart: their own pads fix them, and they stay
    plan = plan_of([0.0, 0.0, 0.4, 0.4], [0.0, 0.1, 0.0, 0.1], [100.0, 120.0, 110.0, 130.0], clearance=0.4)
    assert built(plan).findings == ()


def test_drilling_that_brings_pieces_too_close_looks_for_more_room():
    # the clearance is what the planned tree has to spare: with steps of 10 mm the drilled one lacks some of it
    close = []
    for seed in range(1, 9):
        plan = scattered(9, seed, drill_step=0.01)
        tight = closest(plan)
        rig = built(scattered(9, seed, drill_step=0.01, clearance=tight))
        close += [len(close_pieces(rig.trees[0], tight))]
    assert sum(close) == 0


def closest(plan: PadPlan) -> float:
    """Least distance of two pieces of one tier before drilling [m]."""
    answer = group_in_plan(plan)
    assert isinstance(answer, Grouped)
    return Looked(plan, nest_of(answer.root)).closest


def nest_of(node: Node):
    return tuple(nest_of(kid) for kid in node.kids) if node.kids else node.pad


def test_the_words_say_what_is_proven():
    assert "proven: the least within the limits" in built(scattered(6, 1)).words
    assert "above the proven least without regard to crossings" in built(scattered(6, 35, clearance=0.3)).words
    assert "not proven to be the least" in built(scattered(15, 1)).words
    assert "as prescribed" in built(scattered(3, 1, grouping=((1, 2), 3))).words


def test_the_same_plan_gives_the_same_rig():
    plan = scattered(14, 9, plates=True)
    one, other = built(plan), built(plan)
    assert one.trees[0].pieces == other.trees[0].pieces
    assert one.words == other.words


def test_a_tree_at_its_limits_makes_way_for_one_with_room(monkeypatch):
    # the first tree cannot be drilled, whatever it is; the next is grouped within closer limits and says so
    plan = scattered(7, 4, shortest_arm=0.03)
    refused = Refusal("levers", "no", "no", "no", "no")
    asked: list[float] = []

    def drilled(own, branches):
        return refused if len(asked) == 1 else drill_in_plan(own, branches)

    def grouped(own, *rest, **more):
        asked.append(own.target.brief.levers.shortest_arm)
        return group_in_plan(own, *rest, **more)

    monkeypatch.setattr("rigdesign.levers.surface.build.drill_in_plan", drilled)
    monkeypatch.setattr("rigdesign.levers.surface.build.group_in_plan", grouped)
    rig = build_rig(plan)
    assert isinstance(rig, Rig)
    step = plan.target.brief.levers.drill_step
    assert asked == pytest.approx([0.03, 0.03 + step])
    assert "limits 1 drill step closer" in rig.words
