"""Lists of parts, links, pins, holes, bars and masses, held against the members themselves."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hand_results import alike, line_result, plan_result
from shapely import Point, Polygon

from rigdesign.report.lists import (
    centres,
    cut_plans,
    drill_rows,
    flat_shapes,
    link_rows,
    part_rows,
    pin_rows,
)

RESULTS = {
    "line flats": line_result,
    "line channels": lambda: line_result("twin channels"),
    "line hollow": lambda: line_result("hollow section"),
    "line straps": lambda: line_result("twin flats", "strap"),
    "line webbing": lambda: line_result("twin channels", "webbing"),
    "plan": plan_result,
    "plan hollow": lambda: plan_result("hollow section"),
}


@pytest.fixture(params=RESULTS, name="result")
def _result(request):
    return RESULTS[request.param]()


def rows_of(result, kind):
    return [row for row in part_rows(result) if row.kind == kind]


def test_the_parts_weigh_what_the_members_weigh(result):
    hardware = result.hardware
    total = math.fsum(row.total for row in part_rows(result))
    machines = sum(stack.machine.mass + stack.cell.mass for stack in hardware.stacks)
    assert total == pytest.approx(sum(mass.mass for mass in hardware.masses.values()) + machines, rel=1e-12)


def test_every_member_has_one_part(result):
    hardware = result.hardware
    for kind, names in (
        ("link", [link.name for link in hardware.links]),
        ("pad", [f"pad {pad.pad}" for pad in hardware.pads]),
    ):
        assert sorted(name for row in rows_of(result, kind) for name in row.members) == sorted(names)
        assert sum(row.quantity for row in rows_of(result, kind)) == len(names)
    made = [row for row in rows_of(result, "lever") + rows_of(result, "plate") if "_side" not in row.mark]
    assert sorted(name for row in made for name in row.members) == sorted(hardware.bodies)
    marks = [row.mark for row in part_rows(result)]
    assert len(marks) == len(set(marks))


def test_jack_and_cell_are_bought_by_name():
    result = line_result()
    (stack,) = result.hardware.stacks
    rows = {row.kind: row for row in part_rows(result)}
    assert (rows["jack"].mark, rows["jack"].section, rows["jack"].members) == ("J1", stack.machine.name, ("jack 1",))
    assert (rows["cell"].mark, rows["cell"].section, rows["cell"].mass) == ("C1", stack.cell.name, stack.cell.mass)


def test_members_of_one_mark_are_one_row():
    result = alike(line_result(), "lever 3", "lever 4")
    (row,) = [row for row in part_rows(result) if row.mark == "L3"]
    assert row.quantity == 2
    assert row.members == ("lever 3", "lever 4")
    assert row.total == pytest.approx(2 * row.mass)
    (cut,) = [cut for stock in cut_plans(result) for bar in stock.plan.bars for cut in bar.cuts if cut.mark == "L3"]
    assert cut.count == 4
    (flat,) = [flat for flat in flat_shapes(result) if flat.mark == "L3"]
    assert flat.quantity == 4
    assert [row.hole for row in drill_rows(result) if row.mark == "L3"].count("pivot") == 1


def test_counterweights_spacers_and_their_numbers():
    result = line_result()
    (weight,) = rows_of(result, "counterweight")
    assert (weight.mark, weight.mass, weight.members) == ("W1", 3.1, ("lever 2 A",))
    spacers = rows_of(result, "spacer")
    assert sum(row.quantity for row in spacers) == sum(len(body.spacers) for body in result.hardware.bodies.values())
    assert {row.length for row in spacers} == {body.gap for body in result.hardware.bodies.values()}


def test_a_pin_for_every_end_but_studs(result):
    rows = pin_rows(result)
    ends = [end for link in result.hardware.links for end in (link.upper, link.lower) if end.fitting != "stud"]
    places = [place for row in rows for place in row.places]
    assert len(places) == len(set(places)) == len(ends) == sum(row.quantity for row in rows)
    assert [row.mark for row in rows] == [f"N{k + 1}" for k in range(len(rows))]
    by_place = {place: row for row in rows for place in row.places}
    for end in ends:
        row = by_place[f"{end.to} {end.at}".strip()]
        assert row.diameter == end.pin
        assert row.length == end.pin_length
        assert row.grip >= end.inner + 2 * (end.outer + end.gap) - 1e-12
        assert row.mass == pytest.approx(math.pi / 4 * end.pin**2 * end.pin_length * 7850)


def test_plates_have_studs_and_no_pins():
    result = plan_result()
    plate = next(piece for piece in result.hardware.pieces if piece.kind == "plate")
    assert not any(plate.name in place for row in pin_rows(result) for place in row.places)
    rows = [row for row in link_rows(result) if row.upper.startswith(plate.name)]
    assert {(row.upper_end, row.upper_pin) for row in rows} == {("stud", "")}
    assert all(row.lower_pin.startswith("N") for row in rows)


@pytest.mark.parametrize("make", [line_result, plan_result])
def test_a_link_s_load_is_what_hangs_below_it(make):
    """By the pads: what the specimen feels there, less the pad's own weight, is the link's lower end."""
    result = make()
    hardware, full = result.hardware, result.tare.step(1.0)
    gravity = 9.80665 * hardware.rig.plan.target.brief.specimen.gravity
    for row in link_rows(result):
        if row.lower.startswith("pad "):
            k = int(row.lower.split()[1]) - 1
            lower = hardware.side * (full.pad_force[k] - gravity * hardware.masses[row.lower].mass)
            upper = lower - hardware.side * gravity * hardware.masses[row.name].mass
            assert row.load == pytest.approx(max(lower, upper, key=abs), rel=1e-9)
    # the topmost has all of it, its own weight among it
    top = link_rows(result)[0]
    jack = hardware.side * float(full.jack[0])
    assert top.load == pytest.approx(
        max(jack, jack + hardware.side * gravity * hardware.masses["link 1"].mass, key=abs)
    )


def test_peak_loads_are_those_that_strength_is_held_at():
    result = line_result()
    strength = {row.piece: abs(row.load) for row in result.strength if row.piece.startswith("link ")}
    for row in link_rows(result):
        assert abs(row.peak_load) == pytest.approx(strength[row.name], rel=1e-9)
        assert row.peak_load / row.load > 1.05
    assert [row.swing for row in link_rows(result)] == list(result.space.swings)


def test_drill_list_of_a_lever_in_running_dimensions(result):
    for piece in result.hardware.pieces:
        if piece.kind == "plate":
            continue
        body = result.hardware.bodies[piece.name]
        rows = [row for row in drill_rows(result) if row.mark == result.hardware.marks[piece.name]]
        assert rows == sorted(rows, key=lambda row: row.along)
        place = {row.hole: row for row in rows}
        assert place["A"].along == pytest.approx(body.overhang, abs=1e-12)
        a, b = (math.dist((hole.x, hole.y), (piece.pivot.x, piece.pivot.y)) for hole in piece.ends)
        assert place["pivot"].along - place["A"].along == pytest.approx(a, abs=1e-9)
        assert place["B"].along - place["pivot"].along == pytest.approx(b, abs=1e-9)
        assert all(row.across == 0 for row in rows)
        assert sum(row.hole == "spacer" for row in rows) == len(body.spacers)
        for name in ("A", "B", "pivot"):
            end = result.hardware.end_at(piece.name, name)
            assert (place[name].diameter, place[name].pin) == (end.hole, end.pin)


def test_flats_are_inside_their_outline_and_weigh_what_the_plate_does(result):
    for flat in flat_shapes(result):
        shape = Polygon(flat.outline)
        assert shape.exterior.is_ccw
        assert flat.outline.min(axis=0)[0] == pytest.approx(0.0, abs=1e-12)
        drilled = shape
        for hole in flat.holes:
            circle = Point(hole.x, hole.y).buffer(hole.diameter / 2, 200)
            assert circle.within(shape)
            drilled = drilled.difference(circle)
        assert flat.area == pytest.approx(drilled.area, rel=1e-5)  # circles of 800 corners
    plates = [flat for flat in flat_shapes(result) if flat.mark.startswith("P")]
    hardware = result.hardware
    for flat in plates:
        name = next(name for name, mark in hardware.marks.items() if mark == flat.mark)
        assert flat.mass == pytest.approx(hardware.masses[name].mass, rel=1e-9)
    builds = [body.build for body in hardware.bodies.values()]
    expected = builds.count("twin flats") + builds.count("plate")
    assert sum("_side" not in flat.mark for flat in flat_shapes(result)) == expected


def test_side_plates_lie_at_every_hole_of_a_hollow_lever():
    result = line_result("hollow section")
    sides = [flat for flat in flat_shapes(result) if "_side" in flat.mark]
    assert sum(flat.quantity for flat in sides) == 2 * 3 * len(result.hardware.bodies)
    for flat in sides:
        (hole,) = flat.holes
        assert hole.x == pytest.approx(flat.outline[:, 0].max() / 2)
    rows = {row.mark: row for row in part_rows(result)}
    for flat in sides:
        assert rows[flat.mark].total == pytest.approx(flat.quantity * flat.mass)


def test_bars_give_every_profile_and_strap(result):
    hardware = result.hardware
    wanted = sum(body.profiles for body in hardware.bodies.values() if body.build != "plate")
    wanted += sum(link.kind == "strap" for link in hardware.links)
    plans = cut_plans(result)
    assert sum(cut.count for stock in plans for bar in stock.plan.bars for cut in bar.cuts) == wanted
    for stock in plans:
        assert not stock.plan.too_long
        for bar in stock.plan.bars:
            assert sum(cut.count * cut.length for cut in bar.cuts) <= stock.bar


def test_centres_of_levers_by_their_holes(result):
    """Between holes A and B in plan, as far along as u says: an own road that needs no direction."""
    hardware = result.hardware
    rows = {row.name: row for row in centres(result)}
    for piece in hardware.pieces:
        if piece.kind == "plate":
            continue
        a, b = piece.ends
        along = (hardware.masses[piece.name].u - a.u) / (b.u - a.u)
        row = rows[piece.name]
        assert row.x == pytest.approx(a.x + along * (b.x - a.x), abs=1e-9)
        assert row.y == pytest.approx(a.y + along * (b.y - a.y), abs=1e-9)
        assert row.height == hardware.heights[piece.name]


def test_the_centre_of_a_tree_balances_its_members(result):
    rows = centres(result)
    tree, members = rows[-1], rows[:-1]
    assert tree.name == "tree 1"
    assert len(members) == len(result.hardware.masses)
    assert tree.mass == pytest.approx(sum(mass.mass for mass in result.hardware.masses.values()))
    for name in ("x", "y", "height"):
        about = sum(row.mass * (getattr(row, name) - getattr(tree, name)) for row in members)
        assert about == pytest.approx(0.0, abs=1e-9 * tree.mass)


def test_the_centre_of_a_plate_lies_in_its_plane_turned_as_its_holes_are():
    result = plan_result()
    hardware = result.hardware
    piece = next(piece for piece in hardware.pieces if piece.kind == "plate")
    row = {row.name: row for row in centres(result)}[piece.name]
    # an affine map from u, v to x, y, fitted to the holes, takes the centre along
    places = np.array([[hole.u, hole.v, 1.0] for hole in piece.holes])
    plan = np.array([[hole.x, hole.y] for hole in piece.holes])
    fitted, *_ = np.linalg.lstsq(places, plan, rcond=None)
    mass = hardware.masses[piece.name]
    assert [row.x, row.y] == pytest.approx(np.array([mass.u, mass.v, 1.0]) @ fitted, abs=1e-9)
