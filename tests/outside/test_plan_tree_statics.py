"""Statics of trees in plan against two ways of solving them that share nothing with the package.

Source: the equations of equilibrium alone, for any statics textbook (three for a body whose loads are all normal to
one plane: ΣF = 0, ΣFx = 0, ΣFy = 0), and the direct stiffness method for grillages, with the slope-deflection
coefficients 12EI/L³, 6EI/L², 4EI/L, 2EI/L of a beam that is fixed at both ends, and GJ/L for its torsion (C: derived
from the beam equation; both solvers are written here).

One hundred random trees, levers in any direction and three-point plates, pivots anywhere between or inside their
points, drawn from fixed seeds:

- all link forces as unknowns of one sparse system of equations, solved at once rather than tier by tier;
- the tree as it would hang: pieces of stiff beams with pinned links of finite stiffness between them, the pads on
  springs.  A tree is statically determinate, so that forces do not depend on any stiffness.
"""

from __future__ import annotations

import numpy as np
import pytest
from hand_plan_rigs import plan_brief
from scipy.sparse import coo_matrix
from scipy.sparse.linalg import spsolve

from rigdesign.checks import solve_statics
from rigdesign.levers.model import Hole, Jack, Piece, Rig, Tree
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.target import build_target

TREES = range(100)
JACK = 8300.0  # N


@pytest.fixture(scope="module")
def target():
    return build_target(plan_brief())


def draw(seed: int, target) -> Rig:
    """A random tree over 2 to 24 pads, joined two or three at a time, whoever they are."""
    random = np.random.default_rng(seed)
    n_pads = int(random.integers(2, 25))
    pads = random.uniform((0.3, -0.5), (3.3, 0.4), size=(n_pads, 2))
    hanging = [(f"pad {i + 1}", place) for i, place in enumerate(pads)]
    joined: dict[str, tuple[list, np.ndarray]] = {}
    while len(hanging) > 1:
        members = [hanging.pop(int(random.integers(len(hanging)))) for _ in range(_size(random, len(hanging)))]
        places = np.array([place for _, place in members])
        while len(members) == 3 and _is_flat(places):
            hanging.append(members.pop())
            places = places[:2]
        # no point takes less than a tenth, so that nothing but the solvers decides the accuracy
        parts = 0.1 + (1 - 0.1 * len(members)) * random.dirichlet(np.ones(len(members)))
        name = f"part {len(joined)}"
        joined[name] = (members, parts @ places)
        hanging.append((name, parts @ places))
    return _rig(target, pads, joined, hanging[0][0])


def _size(random: np.random.Generator, left: int) -> int:
    return min(left, int(random.choice([2, 3])))


def _is_flat(places: np.ndarray) -> bool:
    (ax, ay), (bx, by) = places[1] - places[0], places[2] - places[0]
    longest = max(np.linalg.norm(places[i] - places[j]) for i, j in ((0, 1), (0, 2), (1, 2)))
    return abs(ax * by - ay * bx) < 0.05 * longest**2


def _rig(target, pads: np.ndarray, joined: dict, top: str) -> Rig:
    order, tier, parent = [top], {top: 1}, {top: "jack 1"}
    for name in order:
        for member, _ in joined[name][0]:
            if member in joined:
                order.append(member)
                tier[member], parent[member] = tier[name] + 1, name
    called = {name: f"lever {k + 1}" for k, name in enumerate(order)} | {"jack 1": "jack 1"}
    pieces = tuple(
        _piece(k + 1, tier[name], called[parent[name]], joined[name], called) for k, name in enumerate(order)
    )
    jack = Jack(1, *map(float, joined[top][1]), "lever 1")
    proof = Proof(0.0, 0.0, 0.0, "none", "none", 0.0, 0.0, 0.0)
    force = np.full(len(pads), JACK / len(pads))
    plan = PadPlan(target, pads[:, 0], pads[:, 1], force, force, jack.x, jack.y, False, proof, ())
    return Rig(plan, pads[:, 0], pads[:, 1], (Tree(jack, JACK, pieces),), "drawn", ())


def _piece(number: int, tier: int, parent: str, group: tuple[list, np.ndarray], called: dict[str, str]) -> Piece:
    members, pivot = group
    along = members[1][1] - members[0][1]
    along = along / np.linalg.norm(along)
    holes = [Hole("pivot", parent, 0.0, 0.0, *map(float, pivot))]
    for name, (member, place) in zip("ABC", members, strict=False):
        off = place - pivot
        u, v = off @ along, off @ np.array([-along[1], along[0]])
        holes.append(Hole(name, called.get(member, member), float(u), float(v), *map(float, place)))
    return Piece(number, "lever" if len(members) == 2 else "plate", tier, parent, tuple(holes))


def all_at_once(rig: Rig) -> dict[str, float]:
    """The load in the link above each pad and piece, by one system of equations with places in plan alone.

    Three equations a piece, two of which hold the unknowns where its holes lie in one line; that one is then left over
    and checked afterwards.
    """
    (tree,) = rig.trees
    names = [f"pad {i + 1}" for i in range(rig.pad_x.size)] + [piece.name for piece in tree.pieces]
    column = {name: k for k, name in enumerate(names)}
    size = float(np.ptp(rig.pad_x))
    taken, left_over, wanted = [], [], [(0, JACK)]
    taken.append({column["lever 1"]: 1.0})
    for piece in tree.pieces:
        own, pivot = column[piece.name], piece.pivot
        equations = [{own: -1.0}, {}, {}]
        for hole in piece.ends:
            below = column[hole.joins]
            equations[0][below] = 1.0
            equations[1][below] = (hole.x - pivot.x) / size
            equations[2][below] = (hole.y - pivot.y) / size
        if piece.kind == "lever":
            reach = [max(abs(value) for value in equation.values()) for equation in equations[1:]]
            left_over.append(equations.pop(1 + int(np.argmin(reach))))
        taken += equations
    rows, columns, values = zip(
        *((k, c, value) for k, equation in enumerate(taken) for c, value in equation.items()), strict=True
    )
    right = np.zeros(len(names))
    right[wanted[0][0]] = wanted[0][1]
    solved = spsolve(coo_matrix((values, (rows, columns)), shape=(len(taken), len(names))).tocsc(), right)
    for equation in left_over:
        assert abs(sum(value * solved[c] for c, value in equation.items())) < 1e-9 * JACK
    return dict(zip(names, solved.tolist(), strict=True))


@pytest.mark.parametrize("seed", TREES)
def test_every_link_carries_what_one_system_of_equations_says(seed, target):
    rig = draw(seed, target)
    solved, known = solve_statics(rig), all_at_once(rig)
    for i, force in enumerate(solved.pad_force):
        # both are exact but for rounding: a tree of a dozen tiers loses three digits of sixteen
        assert force == pytest.approx(known[f"pad {i + 1}"], rel=1e-9)
    for name, load in solved.piece_load.items():
        assert load == pytest.approx(known[name], rel=1e-9)
    assert max(solved.force_residual, solved.moment_residual) < 1e-12


def beam(length_x: float, length_y: float, bending: float, torsion: float) -> np.ndarray:
    """Stiffness (6, 6) of a beam in plan: deflection and turns about x and y at each end, in the plan's directions."""
    length = np.hypot(length_x, length_y)
    c, s = length_x / length, length_y / length
    # own directions: deflection, turn about its own line, turn about the line to its left
    a, b, d, e = 12 / length**3, 6 / length**2, 4 / length, 2 / length
    t = torsion / bending / length
    # a turn about the left-hand line by φ lowers what lies ahead by φ times the distance
    own = bending * np.array(
        [
            [a, 0, -b, -a, 0, -b],
            [0, t, 0, 0, -t, 0],
            [-b, 0, d, b, 0, e],
            [-a, 0, b, a, 0, b],
            [0, -t, 0, 0, t, 0],
            [-b, 0, e, b, 0, d],
        ]
    )
    turn = np.array([[1, 0, 0], [0, c, s], [0, -s, c]])
    both = np.kron(np.eye(2), turn)
    return both.T @ own @ both


class Grillage:
    """Deflections of nodes with three freedoms each: stiffness is added part by part and solved at the end."""

    def __init__(self, n_nodes: int) -> None:
        self.size, self.rows, self.columns, self.values = 3 * n_nodes, [], [], []

    def add(self, freedoms: np.ndarray, stiffness: np.ndarray) -> None:
        row, column = np.meshgrid(freedoms, freedoms, indexing="ij")
        self.rows += row.ravel().tolist()
        self.columns += column.ravel().tolist()
        self.values += stiffness.ravel().tolist()

    def solve(self, load: np.ndarray) -> np.ndarray:
        return spsolve(coo_matrix((self.values, (self.rows, self.columns)), shape=(self.size, self.size)).tocsc(), load)


def as_a_grillage(rig: Rig, seed: int) -> np.ndarray:
    """Pad forces of the tree as stiff beams, links and pads as springs of whatever stiffness."""
    random = np.random.default_rng(1000 + seed)
    (tree,) = rig.trees
    node: dict[tuple[str, str], int] = {}
    for piece in tree.pieces:
        for hole in piece.holes:
            node[piece.name, hole.name] = len(node)
    frame = Grillage(len(node))
    pads = {}
    for piece in tree.pieces:
        middle = node[piece.name, "pivot"]
        for hole in piece.ends:
            end = node[piece.name, hole.name]
            freedoms = np.concatenate([3 * middle + np.arange(3), 3 * end + np.arange(3)])
            off = hole.x - piece.pivot.x, hole.y - piece.pivot.y
            frame.add(freedoms, beam(*off, 2.0e6 * random.uniform(0.5, 2), 8.0e5))
            spring = 1.0e6 * random.uniform(0.5, 2)
            if hole.joins.startswith("pad"):
                frame.add(np.array([3 * end]), np.array([[spring]]))
                pads[int(hole.joins.split()[1]) - 1] = (3 * end, spring)
            else:
                below = node[hole.joins, "pivot"]
                frame.add(np.array([3 * end, 3 * below]), spring * np.array([[1.0, -1.0], [-1.0, 1.0]]))
        if piece.kind == "lever":
            # three holes in line hold no turn about that line: a guide does, and carries nothing
            a, b = piece.ends
            line = np.array([b.x - a.x, b.y - a.y]) / np.hypot(b.x - a.x, b.y - a.y)
            frame.add(3 * middle + np.array([1, 2]), 1.0e5 * np.outer(line, line))
    load = np.zeros(frame.size)
    load[3 * node["lever 1", "pivot"]] = JACK
    deflection = frame.solve(load)
    return np.array([spring * deflection[freedom] for _, (freedom, spring) in sorted(pads.items())])


@pytest.mark.parametrize("seed", TREES)
def test_pads_carry_what_a_grillage_of_beams_and_springs_gives(seed, target):
    rig = draw(seed, target)
    # a dozen tiers in series and stiffnesses four decades apart cost a solver of sixteen digits up to ten of them
    assert solve_statics(rig).pad_force == pytest.approx(as_a_grillage(rig, seed), rel=1e-6)


def test_the_grillage_s_beam_bends_as_a_cantilever_does_in_any_direction():
    length, load, bending = 1.3, 240.0, 7.0e3
    for angle in (0.0, 0.7, 2.4):
        stiffness = beam(length * np.cos(angle), length * np.sin(angle), bending, 1.0e3)[3:, 3:]
        deflection, turn_x, turn_y = np.linalg.solve(stiffness, [load, 0.0, 0.0])
        assert deflection == pytest.approx(load * length**3 / (3 * bending))
        # it rises outward: the turn about the line to its left is −PL²/2EI, about its own line nothing
        slope = load * length**2 / (2 * bending)
        assert (turn_x, turn_y) == pytest.approx((slope * np.sin(angle), -slope * np.cos(angle)), abs=1e-12)


def test_the_hundred_trees_hold_levers_in_every_direction_and_plates(target):
    pieces = [piece for seed in TREES for piece in draw(seed, target).trees[0].pieces]
    plates = sum(piece.kind == "plate" for piece in pieces)
    steep = sum(abs(p.ends[1].y - p.ends[0].y) > abs(p.ends[1].x - p.ends[0].x) for p in pieces if p.kind == "lever")
    assert plates > 100
    assert steep > 50
    assert max(piece.tier for piece in pieces) >= 6
