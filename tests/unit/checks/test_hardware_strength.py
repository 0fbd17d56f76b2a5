"""Strength: which states the rules are asked about, with which sizes and loads; a plate's worst line."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import make_brief, make_hardware, make_pads, make_specimen, shape_load
from hand_hardware import make_hardware_for
from hand_plan_rigs import make_plan_rig
from hand_rigs import make_rig, with_hole
from shapely import LineString, Polygon

from rigdesign.checks.hardware import states
from rigdesign.checks.hardware.loads import hanging, link_forces, own_weight
from rigdesign.checks.hardware.plate_line import worst_line
from rigdesign.checks.hardware.strength import strength
from rigdesign.hardware.rules import rule_set

X, FORCE = np.array([0.5, 1.1, 1.7, 2.6, 3.1]), np.array([1500.0, 1300.0, 1200.0, 900.0, 500.0])
Y = np.array([0.1, -0.2, 0.1, -0.3, -0.4])
JACK = np.array([7000.0])


def line_rig(**changes):
    return make_rig(X, FORCE, make_brief(**changes), group=((1, 2), (3, (4, 5))))


def plan_rig():
    return make_plan_rig(X, Y, FORCE, group=((1, 2, 3), (4, 5)))


def rows_of(hardware, jack=JACK):
    rig = hardware.rig
    return strength(hardware, hanging(rig), own_weight(rig, hardware.masses), jack)


def end_of(hardware, link, which):
    return getattr(hardware.links[link - 1], which)


def test_every_member_is_held_to_every_check_that_concerns_it():
    hardware = make_hardware_for(line_rig())
    rows = rows_of(hardware)
    names = {}
    for row in rows:
        names.setdefault(row.piece, []).append(row.check)
    assert list(names) == [
        *(f"lever {i}" for i in range(1, 5)), *(f"link {i}" for i in range(1, 10)), *(f"pad {i}" for i in range(1, 6)),
        "jack 1",
    ]  # fmt: skip
    rules = rule_set(hardware.rig.plan.target.brief.hardware)
    state = states.lever_hole(hardware, hardware.pieces[0], hardware.pieces[0].holes[0], 1.0)
    n_hole = len(rules.hole(state))
    n_pin = len(rules.pin(states.pin(hardware, hardware.links[0], hardware.links[0].upper, 1.0)))
    assert len(names["lever 3"]) == 4 + 3 * n_hole
    assert len(names["link 3"]) == 2 + 2 * (n_pin + n_hole)
    assert names["pad 4"] == [f"{one.check}, lugs" for one in rules.hole(state)]
    assert names["jack 1"] == ["rated force of the jack", "rated force of the load cell"]
    assert "pin shear, at lever 1 hole B" in names["link 3"]
    assert "bearing, eye at lever 3 hole pivot" in names["link 3"]
    assert "bearing, hole pivot" in names["lever 3"]


def test_loads_are_those_of_the_jack_and_of_weight():
    rig = line_rig()
    hardware = make_hardware_for(rig)
    upper, lower = link_forces(own_weight(rig, hardware.masses), JACK)
    # pulled up against gravity, a link carries most at its upper end
    assert (upper > lower).all()
    by_piece = {
        row.piece: row.load for row in rows_of(hardware) if "hole A" not in row.check and "hole B" not in row.check
    }
    assert by_piece["link 4"] == pytest.approx(upper[3])
    assert by_piece["lever 1"] == pytest.approx(upper[0])
    assert by_piece["jack 1"] == 7000.0
    at_a = [row.load for row in rows_of(hardware) if row.piece == "lever 1" and row.check.endswith("hole A")]
    assert at_a == [pytest.approx(upper[1])] * len(at_a)
    assert at_a


def test_under_the_specimen_a_lever_carries_what_its_ends_do():
    """Pulled down with gravity, weight adds on the way to the pads: the ends together carry more than the pivot."""
    brief = make_brief(specimen=make_specimen(), loads=(shape_load(total=-5400.0),))
    rig = make_rig(X, -FORCE, brief, group=((1, 2), (3, (4, 5))))
    hardware = make_hardware_for(rig)
    upper, lower = link_forces(own_weight(rig, hardware.masses), -JACK)
    bending = next(row for row in rows_of(hardware, -JACK) if (row.piece, row.check[:7]) == ("lever 1", "bending"))
    assert bending.load == pytest.approx(abs(upper[1] + upper[2]))
    assert bending.load > abs(lower[0]) + 1.0


def test_a_lever_as_a_beam():
    hardware = make_hardware_for(line_rig(hardware=make_hardware(deflection=0.004)))
    piece = hardware.pieces[1]
    body = replace(hardware.bodies[piece.name], spacers=(-0.05, 0.1))
    hardware = replace(hardware, bodies={**hardware.bodies, piece.name: body})
    a, b = -piece.ends[0].u, piece.ends[1].u
    state = states.bar(hardware, piece, 1234.0)
    assert (state.load, state.a, state.b) == (1234.0, pytest.approx(a), pytest.approx(b))
    assert (state.count, state.section, state.deflection_limit) == (2, body.section, 0.004)
    assert state.pivot_hole == hardware.end_at(piece.name, "pivot").hole
    assert state.end_hole == max(hardware.end_at(piece.name, name).hole for name in ("A", "B"))
    assert state.braced == pytest.approx(max(a - 0.05, b - 0.1))
    alone = replace(body, profiles=1, spacers=())
    hollow = replace(hardware, bodies={**hardware.bodies, piece.name: alone})
    assert states.bar(hollow, piece, 1.0).braced == pytest.approx(a + b)


def test_a_hole_of_a_lever():
    hardware = make_hardware_for(line_rig())
    piece = hardware.pieces[0]
    body = hardware.bodies[piece.name]
    hole = hardware.end_at(piece.name, "A")
    state = states.lever_hole(hardware, piece, piece.ends[0], 900.0)
    assert (state.load, state.count, state.thickness, state.round_edge) == (900.0, 2, body.section.web, False)
    assert state.side == pytest.approx(body.overhang - hole.hole / 2)
    assert state.beyond == pytest.approx((body.section.depth - hole.hole) / 2)
    assert state.radius == body.section.depth / 2
    assert (state.pin, state.hole) == (hole.pin, hole.hole)
    # at the pivot the steel goes as far as the next hole's edge; at an end too, where that is nearer than the end
    pivot = states.lever_hole(hardware, piece, piece.pivot, 900.0)
    near, far = sorted(abs(end.u) for end in piece.ends)
    assert far > near
    end = hardware.end_at(piece.name, min(piece.ends, key=lambda end: abs(end.u)).name)
    assert pivot.side == pytest.approx(near - end.hole / 2 - pivot.hole / 2)
    long = replace(hardware, bodies={**hardware.bodies, piece.name: replace(body, overhang=5.0)})
    assert states.lever_hole(long, piece, piece.ends[0], 1.0).side == pytest.approx(
        abs(piece.ends[0].u) - pivot.hole / 2 - hole.hole / 2
    )


def test_pins_and_fittings_of_a_hollow_lever():
    hardware = make_hardware_for(line_rig(), build="hollow section")
    link = hardware.links[1]
    end, body = link.upper, hardware.bodies["lever 1"]
    assert end.fitting == "fork"
    pin = states.pin(hardware, link, end, 5000.0)
    # the pin bears on webs and side plates alone: cheek to web is the arm of each half
    arm = end.outer / 2 + end.gap + (body.section.web + body.side_plate) / 2
    assert (pin.inner + 4 * pin.gap + 2 * pin.outer) / 8 * 5000.0 == pytest.approx(2500.0 * arm)
    cheeks = states.fitting(link, end, 5000.0)
    assert (cheeks.count, cheeks.thickness, cheeks.round_edge) == (2, end.outer, True)
    assert cheeks.side == cheeks.beyond == pytest.approx(end.radius - end.hole / 2)
    webs = states.lever_hole(hardware, hardware.pieces[0], hardware.pieces[0].ends[0], 5000.0)
    assert (webs.count, webs.thickness) == (2, body.section.web + body.side_plate)


def test_an_eye_a_strap_and_lugs():
    hardware = make_hardware_for(line_rig(), links="strap")
    link = hardware.links[3]
    eye = states.fitting(link, link.lower, 700.0)
    assert (eye.count, eye.thickness, eye.material) == (1, link.lower.inner, link.material)
    narrow = replace(link, width=link.lower.hole + 0.004)
    assert states.fitting(narrow, link.lower, 700.0).side == pytest.approx(0.002)
    lugs = states.lugs(link, link.lower, 700.0)
    assert (lugs.count, lugs.thickness, lugs.load) == (2, link.lower.outer, 700.0)
    strap = states.strap(replace(link, upper=replace(link.upper, hole=0.02)), 700.0)
    assert (strap.hole, strap.width, strap.thickness) == (0.02, link.width, link.thickness)


def test_a_rod_s_root_follows_from_its_stress_area():
    """M16: pitch 2 mm, stress area 156.7 mm², root 13.546 mm (ISO 898-1, ISO 68-1)."""
    link = replace(
        make_hardware_for(line_rig()).links[0], thickness=0.016, width=0.016, stress_area=156.668e-6, length=0.5
    )
    pulled, pushed = states.rod(link, 1e3, False), states.rod(link, 1e3, True)
    assert pulled.root == pytest.approx(0.013546, abs=1e-6)
    assert pulled.eccentricity == 0.0
    # a five-hundredth of the length and a millimetre
    assert pushed.eccentricity == pytest.approx(0.002)
    assert (pulled.compressed, pushed.compressed) == (False, True)


def test_rods_are_compressed_where_the_tree_pushes():
    brief = make_brief(pads=make_pads(action="push"))
    pushed = make_hardware_for(make_rig(X, FORCE, brief, group=((1, 2), (3, (4, 5)))))
    pulled = make_hardware_for(line_rig())
    for hardware, word in ((pushed, "buckling"), (pulled, "tension")):
        rods = [row.check for row in rows_of(hardware) if row.check.startswith("rod")]
        assert len(rods) == 2 * len(hardware.links)
        assert any(word in check for check in rods)
        assert not any(({"buckling", "tension"} - {word}).pop() in check for check in rods)


def test_webbing_by_its_name():
    hardware = make_hardware_for(line_rig(), links="webbing")
    assert states.webbing(hardware.links[0], 1.0).breaking == pytest.approx(7 * 2000 * 9.80665)
    unknown = replace(hardware, links=(replace(hardware.links[0], size="string"), *hardware.links[1:]))
    rows = [row for row in rows_of(unknown) if row.piece == "link 1" and "webbing" in row.check]
    assert [row.utilisation for row in rows] == [np.inf]
    assert not any("loop" in row.check for row in rows_of(hardware))


def test_studs_that_are_the_rod_itself_are_checked_once():
    hardware = make_hardware_for(plan_rig())
    link = next(link for link in hardware.links if link.upper.fitting == "stud")
    same = replace(link, upper=replace(link.upper, pin=link.thickness))
    assert states.stud(same, same.upper, 1.0) is None
    other = states.stud(link, replace(link.upper, pin=0.0170), 5.0)
    # the largest thread in 17 mm is M16
    assert other.stress_area == pytest.approx(156.7e-6, rel=1e-3)
    assert states.stud(link, replace(link.upper, pin=0.001), 5.0).stress_area == 0.0
    checks = [row.check for row in rows_of(hardware) if row.piece == link.name]
    assert any(check.endswith(f"stud at {link.upper.to} hole {link.upper.at}") for check in checks)


def test_a_lever_whose_pivot_is_outside_cannot_pass():
    rig = line_rig()
    rig = with_hole(with_hole(rig, 2, "A", u=0.05), 2, "B", u=0.4)
    rows = rows_of(replace(make_hardware_for(line_rig()), rig=rig))
    worst = max((row for row in rows if row.piece == "lever 2"), key=lambda row: row.utilisation)
    assert worst.utilisation == np.inf
    assert worst.clause == "the pivot is not between holes A and B"


def test_machines_are_held_to_their_ratings():
    hardware = make_hardware_for(line_rig())
    stack = replace(hardware.stacks[0], cell=replace(hardware.stacks[0].cell, force=5600.0))
    rows = rows_of(replace(hardware, stacks=(stack,)))[-2:]
    assert [row.utilisation for row in rows] == [pytest.approx(7000.0 / stack.machine.force), pytest.approx(1.25)]


def stressed(places, forces, holes, pivot_hole, outline, angle):
    """Moment over width of one line by shapely and plain sums."""
    along, normal = np.array([np.cos(angle), np.sin(angle)]), np.array([-np.sin(angle), np.cos(angle)])
    off = places @ normal
    moment = max((forces * off)[off > 0].sum(), -(forces * off)[off < 0].sum())
    line = LineString([-9 * along, 9 * along]).intersection(Polygon(outline))
    chords = [2 * np.sqrt(max((d / 2) ** 2 - o**2, 0.0)) for d, o in zip(holes, off, strict=True)]
    return moment / (line.length - pivot_hole - sum(chords)), moment


@pytest.mark.parametrize("seed", range(6))
def test_the_worst_line_against_every_direction(seed):
    random = np.random.default_rng(seed)
    turns = np.sort(random.uniform(0, 2 * np.pi, 3)) + np.array([0.0, 0.3, 0.6])
    places = random.uniform(0.3, 0.9, (3, 1)) * np.stack([np.cos(turns), np.sin(turns)], axis=1)
    forces, holes = random.uniform(500, 4000, 3), random.uniform(0.01, 0.05, 3)
    outline = np.array(Polygon(places).buffer(0.08, quad_segs=3).convex_hull.exterior.coords)[:-1]
    if (
        not Polygon(outline).contains(Polygon(outline).centroid)
        or Polygon(outline).distance(LineString([(0, 0), (0, 1e-9)])) > 0
    ):
        outline = np.array(Polygon([*places, (0.0, 0.0)]).convex_hull.buffer(0.08).exterior.coords)[:-1]
    found = worst_line(places, forces, holes, 0.03, outline)
    every = np.linspace(0, np.pi, 4001)
    fine = max(stressed(places, forces, holes, 0.03, outline, angle)[0] for angle in every)
    ratio, moment = stressed(places, forces, holes, 0.03, outline, found.angle)
    assert found.moment == pytest.approx(moment, rel=1e-9)
    assert found.moment / found.width == pytest.approx(ratio, rel=1e-7)
    # the fine search misses the peak by a little, and never exceeds it
    assert fine <= found.moment / found.width * (1 + 1e-9)
    assert fine >= found.moment / found.width * (1 - 1e-3)


def test_a_plate_s_worst_washer_and_line():
    hardware = make_hardware_for(plan_rig())
    piece = next(piece for piece in hardware.pieces if piece.kind == "plate")
    loads = np.array([1500.0, 1300.0, 1200.0])
    state = states.plate(hardware, piece, 4000.0, loads)
    pivot = hardware.end_at(piece.name, "pivot")
    assert (state.load, state.washer, state.hole) == (4000.0, 2 * pivot.radius, pivot.hole)
    assert state.thickness == hardware.bodies[piece.name].section.depth
    assert 0 < state.width < 2.0
    upper = replace(hardware, links=tuple(
        replace(k, upper=replace(k.upper, radius=0.002)) if (k.upper.to, k.upper.at) == (piece.name, "B") else k
        for k in hardware.links
    ))  # fmt: skip
    assert states.plate(upper, piece, 4000.0, loads).load == 1300.0
    # the frame's origin is of no account
    holes = tuple(replace(hole, u=hole.u + 0.2, v=hole.v - 0.1) for hole in piece.holes)
    body = replace(hardware.bodies[piece.name], outline=hardware.bodies[piece.name].outline + np.array([0.2, -0.1]))
    moved = replace(hardware, bodies={**hardware.bodies, piece.name: body})
    found = states.plate(moved, replace(piece, holes=holes), 4000.0, loads)
    assert (found.moment, found.width) == (pytest.approx(state.moment), pytest.approx(state.width))


def test_a_line_that_meets_no_steel_is_beyond_all_limits():
    places = np.array([[0.1, 0.0], [-0.1, 0.0]])
    outline = np.array([[-0.2, -0.02], [0.2, -0.02], [0.2, 0.02], [-0.2, 0.02]])
    found = worst_line(places, np.array([1e3, 1e3]), np.array([0.01, 0.01]), 0.05, outline)
    # nothing but rounding is left
    assert found.width < 1e-8
