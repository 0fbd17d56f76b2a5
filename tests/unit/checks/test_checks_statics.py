"""Statics down the tree: forces from holes alone, closure, and trees that are none."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import make_brief
from hand_rigs import make_rig, make_tree, with_hole

from rigdesign.checks import share_matrix, solve_statics
from rigdesign.checks.entry import layout
from rigdesign.checks.geometry import leans
from rigdesign.checks.measures import steel_estimate, sum_residuals
from rigdesign.checks.statics import _residuals, along_lever, lever_fractions, link_fractions, node_shares, off_line
from rigdesign.errors import InputError
from rigdesign.levers.model import Hole, Jack, Piece, Rig, Tree

X = np.array([0.5, 0.9, 1.6, 2.0, 2.9])
FORCE = np.array([1300.0, 900.0, 1700.0, 800.0, 400.0])
GROUP = ((1, 2), (3, (4, 5)))


def rig() -> Rig:
    return make_rig(X, FORCE, group=GROUP)


def test_pads_get_the_forces_for_which_the_pivots_were_drilled():
    solved = solve_statics(rig())
    assert solved.pad_force == pytest.approx(FORCE, rel=1e-13)
    assert solved.share == pytest.approx(FORCE / FORCE.sum(), rel=1e-13)
    assert solved.piece_load == pytest.approx(
        {"lever 1": 5100.0, "lever 2": 2200.0, "lever 3": 2900.0, "lever 4": 1200.0}, rel=1e-13
    )


def test_wanted_forces_do_not_enter():
    known = rig()
    lied = replace(known, plan=replace(known.plan, force=known.plan.force[::-1].copy()))
    assert (solve_statics(lied).pad_force == solve_statics(known).pad_force).all()


def test_a_moved_hole_moves_load_as_the_arms_say():
    # lever 2 holds pads 1 and 2: B from 0.4 m to 0.5 m between the end pins
    known = rig()
    pivot_to_a = 900.0 / 2200.0 * 0.4
    moved = with_hole(known, 2, "B", u=0.5 - pivot_to_a)
    assert solve_statics(moved).pad_force[:2] == pytest.approx([2200 * (1 - pivot_to_a / 0.5), 2200 * pivot_to_a / 0.5])
    assert solve_statics(moved).pad_force[2:] == pytest.approx(FORCE[2:], rel=1e-13)


def test_only_places_seen_from_the_pivot_count():
    known = rig()
    moved = known
    for name in ("pivot", "A", "B"):
        hole = next(h for h in known.trees[0].pieces[2].holes if h.name == name)
        moved = with_hole(moved, 3, name, u=hole.u + 0.7, v=hole.v - 0.2)
    assert solve_statics(moved).pad_force == pytest.approx(FORCE, rel=1e-13)


def test_forces_follow_the_jack():
    known = rig()
    tree = replace(known.trees[0], force=-2.0 * known.trees[0].force)
    assert solve_statics(replace(known, trees=(tree,))).pad_force == pytest.approx(-2.0 * FORCE, rel=1e-13)


def test_a_lever_with_its_holes_not_quite_in_line_takes_moments_along_its_line():
    # A at (−0.3, 0), B at (0.5, 0.06): the line of the end pins runs past the pivot
    known = with_hole(with_hole(rig(), 4, "A", u=-0.3), 4, "B", u=0.5, v=0.06)
    tree = layout(known)
    along = along_lever(tree)[tree.first[3] : tree.first[4]]
    length = np.hypot(0.8, 0.06)
    assert along == pytest.approx([-0.3 * 0.8 / length, (0.5 * 0.8 + 0.06**2) / length])
    assert abs(off_line(tree)[3]) == pytest.approx(0.3 * 0.06 / length)
    share = link_fractions(tree)[tree.first[3] : tree.first[4]]
    assert share.sum() == pytest.approx(1.0, abs=1e-15)
    assert share @ along == pytest.approx(0.0, abs=1e-16)


def plate_rig() -> Rig:
    """One plate with points at (−0.3, −0.1), (0.5, −0.2), (0.1, 0.4) from its pivot, its third end a lever."""
    plate = Piece(
        1,
        "plate",
        1,
        "jack 1",
        (
            Hole("pivot", "jack 1", 0.0, 0.0, 1.2, 0.0),
            Hole("A", "pad 1", -0.3, -0.1, 0.9, -0.1),
            Hole("B", "pad 2", 0.5, -0.2, 1.7, -0.2),
            Hole("C", "lever 2", 0.1, 0.4, 1.3, 0.4),
        ),
    )
    lever = Piece(
        2,
        "lever",
        2,
        "lever 1",
        (
            Hole("pivot", "lever 1", 0.0, 0.0, 1.3, 0.4),
            Hole("A", "pad 3", -0.2, 0.0, 1.1, 0.4),
            Hole("B", "pad 4", 0.3, 0.0, 1.6, 0.4),
        ),
    )
    tree = Tree(Jack(1, 1.2, 0.0, "lever 1"), 3000.0, (plate, lever))
    base = make_rig(X[:4], FORCE[:4])
    pad_x, pad_y = np.array([0.9, 1.7, 1.1, 1.6]), np.array([-0.1, -0.2, 0.4, 0.4])
    return replace(base, pad_x=pad_x, pad_y=pad_y, trees=(tree,))


def test_a_plate_takes_three_equations():
    known = plate_rig()
    force = solve_statics(known).pad_force
    assert force.sum() == pytest.approx(3000.0)
    # moments about the jack, both ways: what no other split of the load satisfies
    assert force @ (known.pad_x - 1.2) == pytest.approx(0.0, abs=1e-9)
    assert force @ known.pad_y == pytest.approx(0.0, abs=1e-9)
    assert force[2] / force[3] == pytest.approx(1.5)
    assert solve_statics(known).moment_residual < 1e-13


def test_a_plate_with_its_points_in_line_is_refused():
    flat = with_hole(plate_rig(), 1, "C", u=1.3, v=-0.3)
    with pytest.raises(InputError, match="lever 1: the three points of a plate lie on one line"):
        solve_statics(flat)


def test_coinciding_end_pins_are_refused():
    known = rig()
    with pytest.raises(InputError, match="lever 4: two holes of a piece coincide"):
        solve_statics(with_hole(known, 4, "A", u=known.trees[0].pieces[3].ends[1].u))


def test_two_jacks_share_nothing():
    base = make_rig(X, FORCE)
    first, second = make_tree(X, FORCE, (1, 2)), make_tree(X, FORCE, (3, (4, 5)), jack=2)
    renumbered = {"lever 1": "lever 2", "lever 2": "lever 3"}
    pieces = [
        replace(
            piece,
            number=piece.number + 1,
            parent=renumbered.get(piece.parent, piece.parent),
            holes=tuple(replace(hole, joins=renumbered.get(hole.joins, hole.joins)) for hole in piece.holes),
        )
        for piece in second.pieces
    ]
    second = replace(second, jack=replace(second.jack, carries="lever 2"), pieces=tuple(pieces))
    matrix = share_matrix(replace(base, trees=(first, second)))
    expected = np.zeros((5, 2))
    expected[:2, 0] = FORCE[:2] / 2200
    expected[2:, 1] = FORCE[2:] / 2900
    assert matrix == pytest.approx(expected, abs=1e-14)
    assert solve_statics(replace(base, trees=(first, second))).pad_force == pytest.approx(FORCE)


def test_one_pad_hangs_on_the_jack_itself():
    solved = solve_statics(make_rig([1.3], [5400.0]))
    assert solved.pad_force == pytest.approx([5400.0])
    assert solved.piece_load == {}
    assert (solved.force_residual, solved.moment_residual) == (0.0, 0.0)


def test_residuals_are_of_rounding_size_in_a_deep_tree():
    rng = np.random.default_rng(7)
    x, force = np.sort(rng.uniform(0.3, 3.3, 300)), rng.uniform(1.0, 90.0, 300)
    solved = solve_statics(make_rig(x, force))
    assert solved.pad_force == pytest.approx(force, rel=1e-10)
    assert solved.force_residual < 1e-14
    assert 0 < solved.moment_residual < 1e-14


def test_residuals_see_a_wrong_solution(monkeypatch):
    import rigdesign.checks.statics as module

    def wrong(a, b, h=0.0, turn=0.0):
        return 1.01 * b / (a + b), a / (a + b)

    monkeypatch.setattr(module, "lever_fractions", wrong)
    solved = module.solve_statics(rig())
    assert solved.force_residual > 1e-3
    assert solved.moment_residual > 1e-3


@pytest.mark.parametrize("axis", [0, 1])
def test_residuals_of_a_plate_are_seen_about_both_axes(axis):
    tree = layout(plate_rig())
    load = node_shares(tree, link_fractions(tree))[:, 0] * 3000.0
    assert np.abs(_residuals(tree, load)[1]).max() < 1e-13
    # shift load between the plate's points so that ΣF and one of the moments stay closed
    corners = np.stack([np.ones(3), tree.u[:3], tree.v[:3]])
    shift = np.linalg.solve(corners, np.eye(3)[1 + axis])
    off = load.copy()
    off[tree.lower[:3]] += 30.0 * shift
    force, moment = _residuals(tree, off)
    assert force[0] == pytest.approx(0.0, abs=1e-9)
    size = np.hypot(tree.u[:3], tree.v[:3]).max()
    assert abs(moment[axis, 0]) == pytest.approx(30.0 / (3000.0 * size))
    assert abs(moment[1 - axis, 0]) < 1e-13


def test_pads_moment_against_the_jack():
    known = rig()
    solved = solve_statics(known)
    assert max(sum_residuals(known, solved)) < 1e-15
    moved = replace(known, pad_x=known.pad_x + np.array([0, 0, 0.02, 0, 0]))
    force, moment = sum_residuals(moved, solved)
    assert force < 1e-15
    # of the jack's force times the span of 3.2 m
    assert moment == pytest.approx(1700.0 * 0.02 / (5100.0 * 3.2))


def test_links_of_turned_pieces_hang_plumb():
    known = plate_rig()
    assert max(lean.size for lean in leans(known)) < 1e-15
    plate, lever = known.trees[0].pieces
    # the plate's frame turned by 30° against the plan: same places in plan, other u and v
    cos, sin = np.cos(np.pi / 6), np.sin(np.pi / 6)
    holes = tuple(replace(h, u=cos * h.u + sin * h.v, v=-sin * h.u + cos * h.v) for h in plate.holes)
    turned = replace(known, trees=(replace(known.trees[0], pieces=(replace(plate, holes=holes), lever)),))
    assert max(lean.size for lean in leans(turned)) < 1e-15
    assert solve_statics(turned).pad_force == pytest.approx(solve_statics(known).pad_force)
    off = replace(known, trees=(replace(known.trees[0], jack=Jack(1, 1.23, 0.0, "lever 1")),))
    worst = max(leans(off), key=lambda lean: lean.size)
    assert (worst.where, worst.dx) == ("the link from jack 1 to lever 1", pytest.approx(-0.03))


def test_steel_of_a_plate():
    known = plate_rig()
    solved = solve_statics(known)
    forces = [solved.pad_force[0], solved.pad_force[1], solved.piece_load["lever 2"]]
    radii = [np.hypot(0.3, 0.1), np.hypot(0.5, 0.2), np.hypot(0.1, 0.4)]
    expected = sum((f * r) ** (2 / 3) * r for f, r in zip(forces, radii, strict=True))
    expected += (forces[2] * 0.2 * 0.3 / 0.5) ** (2 / 3) * 0.5
    assert steel_estimate(known, solved) == pytest.approx(expected)


def test_arms_may_be_arrays():
    one, two = lever_fractions(np.array([0.2, 0.3]), np.array([0.6, 0.1]))
    assert one == pytest.approx([0.75, 0.25])
    assert two == pytest.approx([0.25, 0.75])


def _joined(rig: Rig, lever: int, hole: str, joins: str) -> Rig:
    return with_hole(rig, lever, hole, joins=joins)


@pytest.mark.parametrize(
    ("broken", "message"),
    [
        (lambda r: _joined(r, 4, "A", "pad 5"), "not a tree"),
        (lambda r: _joined(r, 4, "A", "pad 1"), "not a tree"),
        (lambda r: _joined(r, 4, "A", "lever 1"), "not a tree"),
        (lambda r: _joined(r, 4, "A", "pad 9"), "joins what is not there: pad 9"),
        (lambda r: _joined(r, 3, "A", "lever 2"), "not a tree"),
        (lambda r: with_hole(r, 3, "A", u=float("nan")), "lever 3 hole A"),
        (lambda r: replace(r, pad_x=np.append(r.pad_x, 3.0), pad_y=np.zeros(6)), "hangs on nothing: pad 6"),
        (lambda r: replace(r, trees=(replace(r.trees[0], force=0.0),)), "jack 1: the jack has no force"),
        (lambda r: _piece(r, 2, tier=3), "lever 2: a piece's parent or tier"),
        (lambda r: _piece(r, 2, parent="lever 3"), "lever 2: a piece's parent or tier"),
        (lambda r: _joined(r, 2, "pivot", "lever 3"), "lever 2 hole pivot: a pivot joins another .*: lever 3"),
        (lambda r: _piece(r, 2, number=3), "share a number"),
        (lambda r: _piece(r, 2, kind="plate"), "wrong holes: pivot, A, B .accepted: pivot, A, B, C"),
        (lambda r: replace(r, trees=(r.trees[0], _second())), "hangs on two jacks' trees: pad 4"),
    ],
)
def test_what_is_no_tree_is_refused(broken, message):
    with pytest.raises(InputError, match=message):
        layout(broken(rig()))


def _second() -> Tree:
    return Tree(Jack(2, 2.0, 0.0, "pad 4"), 100.0, ())


def _piece(rig: Rig, which: int, /, **changes: object) -> Rig:
    pieces = [replace(p, **changes) if p.number == which else p for p in rig.trees[0].pieces]  # type: ignore[arg-type]
    return replace(rig, trees=(replace(rig.trees[0], pieces=tuple(pieces)),))


def test_the_brief_does_not_matter_to_statics():
    other = make_rig(X, FORCE, brief=make_brief(peak=1.5), group=GROUP)
    assert (solve_statics(other).pad_force == solve_statics(rig()).pad_force).all()
