"""Lever trees and rigs on two supports against independent solvers.

Sources
-------
anastruct, a general frame solver: the whole lever tree as bars with pins at its links, and the specimen as a beam.
sympy, its beam module: the specimen on two supports by singularity functions.
Both know nothing of arms or shares; a tree there is bars, hinges and a force on the topmost.
"""

from __future__ import annotations

import warnings
from itertools import pairwise

import numpy as np
import pytest
import sympy
from factories import make_acceptance, make_brief, point_loads, shape_load, two_supports
from hand_rigs import make_rig
from sympy.physics.continuum_mechanics.beam import Beam

from rigdesign.checks import check, solve_statics
from rigdesign.levers.model import Rig

with warnings.catch_warnings():
    warnings.simplefilter("ignore")  # the solver's own imports warn of their futures
    from anastruct import SystemElements

X = np.array([0.41, 0.97, 1.55, 2.02, 2.93, 3.2])
FORCE = np.array([1310.0, 930.0, 1720.0, 840.0, 390.0, 210.0])
GROUPS = [((1, 2), (3, (4, (5, 6)))), (1, ((2, 3), ((4, 5), 6)))]
STIFF = {"EI": 1e9, "EA": 1e9}
LINK = 0.7  # m: length of every link in the frame


def frame_pad_forces(rig: Rig) -> np.ndarray:
    """Forces on the pads, as that solver reports them at its supports, when the tree is solved as a frame.

    Every lever is two bars joined rigidly at its pivot, every link a bar with a hinge at either end; pads are pinned
    supports and the jack a point load.  A link of a pulling tree, drawn upwards, holds sideways only by rollers, so a
    lever is kept from sliding by a support that holds sideways alone.
    """
    tree = rig.trees[0]
    frame = SystemElements()
    level = {piece.name: 2 * LINK * (len(tree.pieces) - piece.tier) for piece in tree.pieces}
    node_of_pad: dict[int, int] = {}
    pivots: dict[str, tuple[float, float]] = {p.name: (p.pivot.x, level[p.name]) for p in tree.pieces}
    for piece in tree.pieces:
        z = level[piece.name]
        for hole in piece.ends:
            frame.add_element([[pivots[piece.name][0], z], [pivots[piece.name][0] + hole.u, z]], **STIFF)
    for piece in tree.pieces:
        z = level[piece.name]
        frame.add_support_roll(frame.find_node_id((pivots[piece.name][0], z)), direction=1)
        for hole in piece.ends:
            end = (pivots[piece.name][0] + hole.u, z)
            if hole.joins.startswith("pad"):
                pad = int(hole.joins.split()[1])
                foot = (end[0], -2 * LINK)
                frame.add_truss_element([end, foot], EA=STIFF["EA"])
                node_of_pad[pad] = frame.find_node_id(foot)
                frame.add_support_hinged(node_of_pad[pad])
            else:
                frame.add_truss_element([end, pivots[hole.joins]], EA=STIFF["EA"])
    top = tree.pieces[0]
    frame.point_load(frame.find_node_id(pivots[top.name]), Fy=tree.force)
    frame.solve()
    return np.array([frame.get_node_results_system(node_of_pad[i + 1])["Fy"] for i in range(rig.pad_x.size)])


@pytest.mark.parametrize("group", GROUPS)
def test_pad_forces_against_a_frame(group):
    rig = make_rig(X, FORCE, group=group)
    solved = solve_statics(rig)
    # a solution by stiffnesses: it closes to about 2e-6 of a small pad's force
    assert frame_pad_forces(rig) == pytest.approx(solved.pad_force, rel=1e-5)


SUPPORTS = (0.5, 2.7)
SUPPORTED = make_brief(
    specimen=two_supports(0.0, *SUPPORTS, 3.6),
    loads=(shape_load("uniform", -4200.0, start_x=0.0, end_x=3.6), point_loads(3.0, -600.0)),
    acceptance=make_acceptance(0.9, 0.9),
)


def test_rig_on_two_supports_against_a_frame():
    found = check(make_rig(X, -FORCE, SUPPORTED)).curves
    stations = np.unique(np.concatenate([[0.0, *SUPPORTS, 3.6], X]))
    frame = SystemElements()
    for start, end in pairwise(stations):
        frame.add_element([[start, 0.0], [end, 0.0]], **STIFF)
    frame.add_support_hinged(frame.find_node_id((SUPPORTS[0], 0.0)))
    frame.add_support_roll(frame.find_node_id((SUPPORTS[1], 0.0)))
    for x, force in zip(X, -FORCE, strict=True):
        frame.point_load(frame.find_node_id((x, 0.0)), Fy=force)
    frame.solve()
    for element, (start, end) in enumerate(pairwise(stations), start=1):
        result = frame.get_element_results(element, verbose=True)
        outboard, inboard = (found.x == start) & found.outboard, (found.x == end) & ~found.outboard
        # that solver takes hogging moments as positive here, and as shear the slope of its moment, which is our V;
        # it closes to about 1e-8 of the largest moment, 1 kN·m
        ours = [found.rig["moment"][row][0] for row in (outboard, inboard)]
        assert -np.asarray(result["M"])[[0, -1]] == pytest.approx(ours, abs=1e-4)
        ours = [found.rig["shear"][row][0] for row in (outboard, inboard)]
        assert np.asarray(result["Q"])[[0, -1]] == pytest.approx(ours, abs=1e-3)


def test_rig_on_two_supports_against_sympy():
    """That module counts loads downward: ours go in with their sign turned, and its shear is minus ours."""
    found = check(make_rig(X, -FORCE, SUPPORTED)).curves
    beam = Beam(sympy.Rational(36, 10), 1, 1)
    left, right = sympy.symbols("left right")
    for x, force in zip(X, -FORCE, strict=True):
        beam.apply_load(sympy.Rational(str(-force)), sympy.Rational(str(x)), -1)
    places = [sympy.Rational(str(at)) for at in SUPPORTS]
    beam.apply_load(left, places[0], -1)
    beam.apply_load(right, places[1], -1)
    beam.bc_deflection = [(place, 0) for place in places]
    beam.solve_for_reaction_loads(left, right)
    shear, moment = beam.shear_force(), beam.bending_moment()
    stations = found.x[~np.isin(found.x, [*X, *SUPPORTS])][5:-5:40]
    assert stations.size > 8
    for station in stations:
        row = found.x == station
        at = {beam.variable: sympy.Rational(float(station))}
        assert found.rig["shear"][row][0] == pytest.approx(-float(shear.subs(at)), abs=1e-9)
        assert found.rig["moment"][row][0] == pytest.approx(float(moment.subs(at)), abs=1e-9)
