"""Counterweights: where they go, how little of them does, and what balance means."""

from __future__ import annotations

import numpy as np
import pytest
from hand_hardware import make_hardware_for
from hand_plan_rigs import make_plan_rig
from hand_rigs import make_rig, with_hole
from scipy.optimize import linprog

from rigdesign.hardware.balance import counterweights, with_counterweights
from rigdesign.hardware.model import Mass

X, FORCE = np.array([0.5, 1.1, 1.7, 2.6, 3.1]), np.array([1500.0, 1300.0, 1200.0, 900.0, 500.0])
Y = np.array([0.1, -0.2, 0.1, -0.3, -0.4])


def hung_on(rig, masses, hardware, name):
    """Mass of a piece or pad with all that hangs on it, its own link left out."""
    total = masses[name].mass
    for tree in rig.trees:
        for piece in tree.pieces:
            if piece.name == name:
                for hole in piece.ends:
                    link = next(k for k in hardware.links if (k.upper.to, k.upper.at) == (name, hole.name))
                    total += masses[link.name].mass + hung_on(rig, masses, hardware, hole.joins)
    return total


def moment(rig, masses, hardware, piece, *, whole):
    """Σ m p about the pivot [kg·m], along u and v."""
    own = masses[piece.name]
    left = own.mass * np.array([own.u, own.v])
    for hole in piece.ends if whole else ():
        link = next(k for k in hardware.links if (k.upper.to, k.upper.at) == (piece.name, hole.name))
        left += (masses[link.name].mass + hung_on(rig, masses, hardware, hole.joins)) * np.array([hole.u, hole.v])
    return left


@pytest.mark.parametrize("whole", [True, False])
@pytest.mark.parametrize(
    "rig",
    [make_rig(X, FORCE, group=((1, 2), (3, (4, 5)))), make_plan_rig(X, Y, FORCE, group=((1, 2, 3), (4, 5)))],
    ids=["line", "plates"],
)
def test_every_piece_is_balanced_with_the_least_mass(rig, whole):
    hardware = make_hardware_for(rig)
    added = counterweights(rig, hardware.masses, hardware.links, whole=whole)
    assert added
    masses = with_counterweights(rig, hardware.masses, added)
    for piece in rig.trees[0].pieces:
        left = moment(rig, masses, hardware, piece, whole=whole)
        left = left[:1] if piece.kind == "lever" else left
        assert left == pytest.approx(0 * left, abs=1e-11)
        own = added.get(piece.name, {})
        assert all(mass > 0 for mass in own.values())
        assert len(own) <= (1 if piece.kind == "lever" else 2)
        # a linear programme over all three holes finds no less
        before = moment(rig, masses, hardware, piece, whole=whole)
        before -= sum(
            (m * np.array([h.u, h.v]) for h in piece.ends for n, m in own.items() if n == h.name), np.zeros(2)
        )
        places = np.array([[hole.u, hole.v] for hole in piece.ends]).T
        rows = 1 if piece.kind == "lever" else 2
        best = linprog(np.ones(places.shape[1]), A_eq=places[:rows], b_eq=-before[:rows])
        assert sum(own.values()) == pytest.approx(best.fun, rel=1e-9)


def test_the_lighter_side_gets_the_mass():
    rig = make_rig([1.0, 2.0], [4000.0, 6000.0])
    hardware = make_hardware_for(rig)
    masses = {name: Mass(0.0, 0.0, 0.0) for name in hardware.masses} | {"lever 1": Mass(30.0, -0.1, 0.0)}
    # 30 kg 100 mm towards A are 3 kg·m: B, 0.4 m away, wants 7.5 kg
    assert counterweights(rig, masses, hardware.links, whole=False) == {"lever 1": {"B": pytest.approx(7.5)}}
    masses["pad 2"] = Mass(10.0, 0.0, 0.0)
    assert counterweights(rig, masses, hardware.links, whole=True) == {"lever 1": {"A": pytest.approx(1.0 / 0.6)}}
    assert counterweights(rig, masses, hardware.links, whole=False) == {"lever 1": {"B": pytest.approx(7.5)}}


def test_what_is_in_balance_gets_none():
    rig = make_rig([1.0, 2.0], [4000.0, 6000.0])
    hardware = make_hardware_for(rig)
    masses = {name: Mass(0.0, 0.0, 0.0) for name in hardware.masses} | {"lever 1": Mass(30.0, 0.0, 0.02)}
    assert counterweights(rig, masses, hardware.links, whole=True) == {}


def test_counterweights_once_on_leave_nothing_to_add():
    rig = make_plan_rig(X, Y, FORCE, group=((1, 2, 3), (4, 5)))
    hardware = make_hardware_for(rig)
    masses = with_counterweights(rig, hardware.masses, counterweights(rig, hardware.masses, hardware.links, whole=True))
    again = counterweights(rig, masses, hardware.links, whole=True)
    assert sum(mass for holes in again.values() for mass in holes.values()) < 1e-9


def test_pieces_are_told_in_the_order_of_the_rig():
    rig = make_rig(X, FORCE)
    hardware = make_hardware_for(rig)
    names = list(counterweights(rig, hardware.masses, hardware.links, whole=True))
    assert names == [piece.name for piece in rig.trees[0].pieces if piece.name in names]


def test_a_plate_with_its_pivot_outside_may_have_no_balance():
    rig = make_plan_rig(X[:3], Y[:3], FORCE[:3], group=(1, 2, 3))
    hardware = make_hardware_for(rig)
    piece = rig.trees[0].pieces[0]
    far = max(hole.u for hole in piece.ends) + 1.0
    # seen from the new pivot all holes lie on one side, and so does the plate
    for hole in piece.holes[1:]:
        rig = with_hole(rig, 1, hole.name, u=hole.u - far)
    masses = hardware.masses | {"lever 1": Mass(20.0, -far, 0.0)}
    assert counterweights(rig, masses, hardware.links, whole=True) == {}


def test_adding_mass_moves_the_centre():
    rig = make_rig([1.0, 2.0], [4000.0, 6000.0])
    masses = with_counterweights(rig, {"lever 1": Mass(30.0, -0.1, 0.01)}, {"lever 1": {"B": 10.0}})
    assert masses["lever 1"].mass == 40.0
    assert [masses["lever 1"].u, masses["lever 1"].v] == pytest.approx([(30 * -0.1 + 10 * 0.4) / 40, 0.3 / 40])


def test_pairs_of_holes_that_stand_in_line_with_the_pivot_do_not_count():
    """Hole C lies straight across the pivot from A: those two alone cannot balance what lies beside their line."""
    rig = make_plan_rig(X[:3], Y[:3], FORCE[:3], group=(1, 2, 3))
    hardware = make_hardware_for(rig)
    places = {"A": (-0.3, 0.0), "B": (0.1, -0.4), "C": (0.3, 0.0)}
    for name, (u, v) in places.items():
        rig = with_hole(rig, 1, name, u=u, v=v)
    masses = {name: Mass(0.0, 0.0, 0.0) for name in hardware.masses} | {"lever 1": Mass(20.0, 0.02, 0.05)}
    found = counterweights(rig, masses, hardware.links, whole=False)["lever 1"]
    # across: 20 · 0.05 = 0.4 B;  along: 20 · 0.02 + 0.1 B = 0.3 A
    assert found == {"A": pytest.approx(0.65 / 0.3), "B": pytest.approx(2.5)}


def test_of_several_ways_to_balance_the_least_mass_is_taken():
    """The pivot outside the triangle: B and C would do, and so would A and C with other masses."""
    rig = make_plan_rig(X[:3], Y[:3], FORCE[:3], group=(1, 2, 3))
    hardware = make_hardware_for(rig)
    places = {"A": (0.2, 0.3), "B": (0.5, 0.1), "C": (0.3, -0.5)}
    for name, (u, v) in places.items():
        rig = with_hole(rig, 1, name, u=u, v=v)
    masses = {name: Mass(0.0, 0.0, 0.0) for name in hardware.masses} | {"lever 1": Mass(20.0, -0.1, 0.01)}
    found = counterweights(rig, masses, hardware.links, whole=False)["lever 1"]
    best = linprog(np.ones(3), A_eq=np.array(list(places.values())).T, b_eq=[2.0, -0.2])
    assert sum(found.values()) == pytest.approx(best.fun, rel=1e-9)
    assert set(found) == {"B", "C"}
