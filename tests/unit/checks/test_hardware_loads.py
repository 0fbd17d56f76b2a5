"""Forces with own weight: every piece in balance, several trees, plates, and what is refused."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import make_brief
from hand_hardware import hung_weight, make_hardware_for
from hand_plan_rigs import make_plan_rig
from hand_rigs import make_rig, make_tree, with_hole

from rigdesign.checks import solve_statics
from rigdesign.checks.hardware.loads import hanging, link_forces, own_weight, pad_forces
from rigdesign.errors import InputError
from rigdesign.hardware.model import Mass

X, FORCE = np.array([0.5, 1.1, 1.7, 2.6, 3.1]), np.array([1500.0, 1300.0, 1200.0, 900.0, 500.0])
Y = np.array([0.1, -0.2, 0.1, -0.3, -0.4])
G = 9.80665


def line_rig():
    return make_rig(X, FORCE, group=((1, 2), (3, (4, 5))))


def plan_rig():
    return make_plan_rig(X, Y, FORCE, group=((1, 2, 3), (4, 5)))


def two_trees():
    first, second = make_tree(X, FORCE, (1, 2)), make_tree(X, FORCE, (3, (4, 5)), jack=2)

    def moved(name):
        return f"lever {int(name.split()[1]) + 1}" if name.startswith("lever") else name

    pieces = [
        replace(
            piece,
            number=piece.number + 1,
            parent=moved(piece.parent),
            holes=tuple(replace(hole, joins=moved(hole.joins)) for hole in piece.holes),
        )
        for piece in second.pieces
    ]
    second = replace(second, jack=replace(second.jack, carries=moved(second.jack.carries)), pieces=tuple(pieces))
    return replace(line_rig(), trees=(first, second))


def off_line():
    """A lever whose pivot stands off the line of its ends: moments close along that line alone."""
    return with_hole(line_rig(), 2, "A", v=0.08)


RIGS = {"line": line_rig, "plates": plan_rig, "two jacks": two_trees, "off line": off_line}


def uneven_masses(rig):
    """Masses that have nothing in common, centres off the pivot both ways."""
    random = np.random.default_rng(4)
    names = [f"link {i + 1}" for i in range(len(hanging(rig).lower))] + [f"pad {i + 1}" for i in range(X.size)]
    masses = {name: Mass(float(random.uniform(0.5, 4.0)), 0.0, 0.0) for name in names}
    for tree in rig.trees:
        for piece in tree.pieces:
            masses[piece.name] = Mass(*map(float, random.uniform([5.0, -0.2, -0.1], [40.0, 0.3, 0.2])))
    return masses


@pytest.mark.parametrize("build", RIGS.values(), ids=RIGS.keys())
def test_every_piece_is_in_balance_with_all_that_weighs_on_it(build):
    rig = build()
    masses, hung = uneven_masses(rig), hanging(rig)
    loads = own_weight(rig, masses)
    jack = np.array([4321.0, -987.0])[: len(rig.trees)]
    upper, lower = link_forces(loads, jack)
    pieces = [piece for tree in rig.trees for piece in tree.pieces]
    for piece in pieces:
        on_pivot = lower[hung.link_at(piece.name, "pivot")]
        ends = np.array([upper[hung.link_at(piece.name, hole.name)] for hole in piece.ends])
        weight, centre = -G * masses[piece.name].mass, masses[piece.name]
        assert ends.sum() - on_pivot - weight == pytest.approx(0.0, abs=1e-9)
        places = np.array([[hole.u, hole.v] for hole in piece.ends])
        left = ends @ places - weight * np.array([centre.u, centre.v])
        if piece.kind == "lever":
            along = (places[1] - places[0]) / np.linalg.norm(places[1] - places[0])
            left = left @ along
        assert left == pytest.approx(0 * left, abs=1e-9)
    for i, name in enumerate(f"link {i + 1}" for i in range(upper.size)):
        assert lower[i] - upper[i] == pytest.approx(-G * masses[name].mass, abs=1e-9)
    felt = pad_forces(loads, hung, jack)
    pads = np.array([masses[f"pad {i + 1}"].mass for i in range(X.size)])
    assert felt - lower[hung.pad_link] == pytest.approx(-G * pads, abs=1e-9)
    # all that is pulled and all that weighs arrives at the pads
    assert felt.sum() == pytest.approx(jack.sum() - G * sum(mass.mass for mass in masses.values()), abs=1e-9)


@pytest.mark.parametrize("build", RIGS.values(), ids=RIGS.keys())
def test_without_weight_the_forces_are_those_of_the_statics(build):
    rig = build()
    loads = own_weight(rig, {name: replace(mass, mass=0.0) for name, mass in uneven_masses(rig).items()})
    solved = solve_statics(rig)
    assert loads.pad_rate == pytest.approx(solved.share, rel=1e-14)
    assert pad_forces(loads, hanging(rig), rig.jack_forces) == pytest.approx(solved.pad_force, rel=1e-14)
    assert not loads.pad_fixed.any()
    upper, lower = link_forces(loads, rig.jack_forces)
    assert (upper == lower).all()
    for link, name in enumerate(hanging(rig).lower):
        if name in solved.piece_load:
            assert upper[link] == pytest.approx(solved.piece_load[name], rel=1e-13)


def test_weight_is_kept_apart_by_trees():
    rig = two_trees()
    masses, loads = uneven_masses(rig), own_weight(rig, uneven_masses(rig))
    first = ["lever 1", "link 1", "link 2", "link 3", "pad 1", "pad 2"]
    assert loads.weight[0] == pytest.approx(-G * sum(masses[name].mass for name in first))
    assert loads.tree == (0, 0, 0, 1, 1, 1, 1, 1)
    assert loads.weight.sum() == pytest.approx(-G * sum(mass.mass for mass in masses.values()))


def test_a_pad_on_the_jack_itself_has_but_its_link():
    rig = make_rig([1.4], [5400.0])
    loads = own_weight(rig, {"link 1": Mass(3.0, 0.0, 0.0), "pad 1": Mass(2.0, 0.0, 0.0)})
    assert loads.pad_fixed == pytest.approx([-5 * G])
    assert loads.lower_fixed == pytest.approx([-3 * G])
    assert loads.upper_fixed.tolist() == [0.0]


def test_a_centre_is_seen_from_the_pivot():
    """Moving a piece's whole frame, pivot and centre alike, changes nothing."""
    rig = plan_rig()
    masses = uneven_masses(rig)
    piece = rig.trees[0].pieces[1]
    moved = replace(piece, holes=tuple(replace(hole, u=hole.u + 0.3, v=hole.v - 0.2) for hole in piece.holes))
    tree = replace(rig.trees[0], pieces=tuple(moved if p is piece else p for p in rig.trees[0].pieces))
    old = masses[piece.name]
    masses_moved = masses | {piece.name: Mass(old.mass, old.u + 0.3, old.v - 0.2)}
    found = own_weight(replace(rig, trees=(tree,)), masses_moved)
    assert found.pad_fixed == pytest.approx(own_weight(rig, masses).pad_fixed, rel=1e-12)


def test_hardware_by_hand_weighs_what_its_members_do():
    rig = plan_rig()
    hardware = make_hardware_for(rig)
    assert -own_weight(rig, hardware.masses).weight.sum() == pytest.approx(hung_weight(hardware))


@pytest.mark.parametrize(
    ("mass", "words"),
    [
        (None, "hardware, lever 2: a member has no mass"),
        (Mass(-1.0, 0.0, 0.0), "hardware, lever 2: a member's mass or centre is no number that can be used: -1.0 kg"),
        (Mass(1.0, float("nan"), 0.0), "at nan m, 0.0 m"),
        (Mass(float("inf"), 0.0, 0.0), "inf kg"),
    ],
)
def test_masses_that_cannot_be(mass, words):
    rig = make_rig(X, FORCE, make_brief())
    masses = uneven_masses(rig)
    del masses["lever 2"]
    masses |= {} if mass is None else {"lever 2": mass}
    with pytest.raises(InputError, match=words.replace("(", r"\(")):
        own_weight(rig, masses)
