"""Members as solids: sizes, places and volumes against what the hardware says."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from factories import make_brief, make_pads, make_specimen
from hand_hardware import make_hardware_for
from hand_plan_rigs import make_plan_rig, plan_brief
from hand_rigs import make_rig
from scipy.spatial import ConvexHull
from shapely import MultiPoint, Point, Polygon

from rigdesign.checks.hardware.solids import members
from rigdesign.hardware.levers import side_width

PRISM = 16 / math.pi * math.tan(math.pi / 16)  # area of a 16-sided prism about a cylinder, over the cylinder's


def line_rig(**changes):
    return make_rig([0.3, 0.7, 1.0, 1.5], [300, 500, 700, 400], make_brief(**changes), (1, ((2, 3), 4)))


def plan_rig():
    x, y = [0.3, 0.75, 0.5, 1.25, 1.4], [0.0, 0.02, 0.35, 0.0, 0.3]
    return make_plan_rig(x, y, [300, 500, 400, 450, 350], plan_brief(), ((1, 2, 3), (4, 5)))


def by_name(hardware):
    return {member.name: member for member in members(hardware)}


def volume(solids):
    return sum(ConvexHull(solid).volume for solid in solids)


def reach(member, axis):
    corners = np.vstack(member.solids) @ np.asarray(axis, dtype=float)
    return corners.min(), corners.max()


@pytest.mark.parametrize("build", ["twin flats", "twin channels", "hollow section"])
def test_levers_have_the_volume_of_their_sections(build):
    hardware = make_hardware_for(line_rig(), build)
    piece, body = hardware.pieces[0], hardware.bodies["lever 1"]
    member = by_name(hardware)["lever 1"]
    length = piece.ends[1].u - piece.ends[0].u + 2 * body.overhang
    if build == "hollow section":
        plates = sum(side_width(hardware.end_at("lever 1", hole.name).hole) for hole in piece.holes)
        steel = body.section.depth * (body.section.width * length + 2 * body.side_plate * plates)
    else:
        across = body.gap + 2 * (body.section.web + 0.01)
        spacers = len(body.spacers) * PRISM * math.pi / 4 * body.spacer.tube**2 * across
        # the web's box runs through the flanges of a channel
        doubled = 4 * body.section.web * body.section.flange if build == "twin channels" else 0.0
        steel = (2 * body.section.area + doubled) * length + spacers
    assert volume(member.solids) == pytest.approx(steel, rel=1e-9)
    assert reach(member, [1, 0, 0]) == pytest.approx((piece.ends[0].u - body.overhang, piece.ends[1].u + body.overhang))
    assert reach(member, [0, 0, 1]) == pytest.approx((-body.section.depth / 2, body.section.depth / 2))
    profiles = replace(member, solids=tuple(s for s in member.solids if len(s) == 8))
    assert reach(profiles, [0, 1, 0]) == pytest.approx((-body.across / 2, body.across / 2))
    assert member.place == pytest.approx([piece.pivot.x, 0.0, hardware.heights["lever 1"]])


def test_between_two_profiles_the_gap_is_clear():
    hardware = make_hardware_for(line_rig(), "twin channels")
    body, member = hardware.bodies["lever 2"], by_name(hardware)["lever 2"]
    sides = [s[:, 1] for s in member.solids if len(s) == 8]
    assert all(s.min() >= body.gap / 2 - 1e-12 or s.max() <= -body.gap / 2 + 1e-12 for s in sides)
    webs = [s for s in sides if np.ptp(s) < body.section.width / 2]
    assert sorted(np.ptp(s) for s in webs) == pytest.approx([body.section.web] * 2)
    assert sorted(abs(s).min() for s in sides) == pytest.approx([body.gap / 2] * 6)


def test_slanted_levers_and_plates_lie_on_their_holes():
    hardware = make_hardware_for(plan_rig())
    found = by_name(hardware)
    lever = next(piece for piece in hardware.pieces if piece.kind == "lever" and piece.tier == 2)
    a, b = lever.ends
    along = np.array([b.x - a.x, b.y - a.y, 0.0]) / math.hypot(b.x - a.x, b.y - a.y)
    low, high = reach(found[lever.name], along)
    overhang = hardware.bodies[lever.name].overhang
    at_a, at_b = (np.array([h.x - lever.pivot.x, h.y - lever.pivot.y, 0.0]) @ along for h in (a, b))
    assert (low, high) == pytest.approx((at_a - overhang, at_b + overhang))
    plate = next(piece for piece in hardware.pieces if piece.kind == "plate")
    body, member = hardware.bodies[plate.name], found[plate.name]
    assert volume(member.solids) == pytest.approx(Polygon(body.outline).area * body.section.depth, rel=1e-9)
    shape = MultiPoint(member.solids[0][:, :2]).convex_hull
    for hole in plate.holes:
        place = Point(hole.x - plate.pivot.x, hole.y - plate.pivot.y)
        assert shape.buffer(-0.9 * body.overhang).contains(place) or hole.name == "pivot"
    assert np.linalg.norm(member.axes, axis=1) == pytest.approx(np.ones(3))
    edge = np.array([plate.ends[2].x - plate.ends[1].x, plate.ends[2].y - plate.ends[1].y, 0.0])
    assert np.linalg.norm(np.cross(member.axes[1], edge)) == pytest.approx(0.0, abs=1e-12)


def test_links_run_from_hole_to_hole_and_pins_lie_across():
    hardware = make_hardware_for(line_rig())
    found = by_name(hardware)
    for link in hardware.links:
        member = found[link.name]
        low, high = reach(member, [0, 0, 1])
        # eyes stand out by their radius, pins by half their width
        assert high >= link.upper.radius - 1e-12
        assert high <= 1.02 * max(link.upper.radius, link.upper.pin)
        assert low == pytest.approx(-link.length - link.lower.radius, abs=0.02 * link.lower.radius)
        longest = max(link.upper.pin_length, link.lower.pin_length) / 2
        assert reach(member, [0, 1, 0]) == pytest.approx((-longest, longest))
        assert found[link.lower.to].place[:2] == pytest.approx(member.place[:2])


@pytest.mark.parametrize(("kind", "along", "across"), [("strap", "width", "thickness"), ("webbing", "", "width")])
def test_straps_and_webbing_lie_about_their_pins(kind, along, across):
    hardware = make_hardware_for(line_rig(), links=kind)
    link = hardware.links[2]
    band, *_, turnbuckle = by_name(hardware)[link.name].solids
    wide = getattr(link, along) if along else max(link.upper.pin, link.lower.pin) + 2 * link.thickness
    assert np.ptp(band[:, 0]) == pytest.approx(wide)
    assert np.ptp(band[:, 1]) == pytest.approx(getattr(link, across))
    assert np.ptp(band[:, 2]) > link.length
    assert np.ptp(turnbuckle[:, 2]) == pytest.approx(4 * link.adjust)
    assert turnbuckle[:, 2].mean() == pytest.approx(-link.length / 2)


def test_forks_straddle_hollow_levers():
    hardware = make_hardware_for(line_rig(), "hollow section")
    link = next(link for link in hardware.links if link.upper.fitting == link.lower.fitting == "fork")
    upper, half = link.upper, hardware.bodies[link.upper.to].section.depth / 2
    cheeks = [s for s in by_name(hardware)[link.name].solids if len(s) == 8 and s[:, 2].max() == upper.radius]
    assert len(cheeks) == 2
    inside = upper.inner / 2 + upper.gap
    assert sorted((s[:, 1].min(), s[:, 1].max()) for s in cheeks) == [
        pytest.approx((-inside - upper.outer, -inside)), pytest.approx((inside, inside + upper.outer)),
    ]  # fmt: skip
    assert all(s[:, 2].min() < -half for s in cheeks)
    bridges = [s for s in by_name(hardware)[link.name].solids if len(s) == 8 and np.ptp(s[:, 1]) > 2 * inside]
    assert len(bridges) == 2
    assert max(s[:, 2].max() for s in bridges) < -half


def test_studs_stand_through_plates_with_washers_and_nuts():
    hardware = make_hardware_for(plan_rig())
    link = next(link for link in hardware.links if link.upper.fitting == "stud")
    end = link.upper
    solids = by_name(hardware)[link.name].solids
    _, high = reach(replace(by_name(hardware)[link.name], solids=solids[:2]), [0, 0, 1])
    assert high == pytest.approx(end.inner / 2 + 2 * end.pin)
    assert np.hypot(*solids[0][:, :2].T).max() == pytest.approx(end.radius / math.cos(math.pi / 16))


def test_pads_stand_on_the_surface_with_their_footprint():
    rig = line_rig(pads=make_pads(length=0.14, width=0.09))
    hardware = make_hardware_for(rig)
    pads = tuple(replace(pad, surface=0.02 * pad.pad, height=0.05) for pad in hardware.pads)
    hardware = replace(hardware, pads=pads)
    member = by_name(hardware)["pad 3"]
    plate = member.solids[0]
    assert plate.max(axis=0) == pytest.approx([0.07, 0.045, 0.0])
    assert (member.place + plate).min(axis=0) == pytest.approx([1.0 - 0.07, -0.045, 0.06])
    end = hardware.link_above["pad 3"].lower
    assert reach(member, [0, 0, 1]) == pytest.approx((-0.05, end.radius))
    without = by_name(make_hardware_for(line_rig(pads=make_pads(length=0.0))))["pad 3"].solids[0]
    assert np.ptp(without, axis=0)[:2] == pytest.approx([0.1, 0.1])


def test_cell_and_jack_stand_one_on_the_other():
    hardware = make_hardware_for(line_rig())
    cell, jack = by_name(hardware)["jack 1"].solids
    stack = hardware.stacks[0]
    assert (cell[:, 2].min(), cell[:, 2].max()) == pytest.approx((0.0, stack.cell.length))
    top = stack.cell.length + stack.machine.length + stack.machine.stroke / 2
    assert (jack[:, 2].min(), jack[:, 2].max()) == pytest.approx((stack.cell.length, top))


@pytest.mark.parametrize(("gravity", "down"), [(-1, -1), (1, 1)])
def test_counterweights_hang_below_the_steel_on_the_side_that_gravity_pulls_to(gravity, down):
    rig = line_rig(specimen=make_specimen(gravity=gravity))
    hardware = make_hardware_for(rig, counterweights={"lever 1": {"B": 9.0, "pivot": 2.0}})
    assert hardware.side == 1
    found = by_name(hardware)
    block = found["counterweight at hole B of lever 1"]
    assert volume(block.solids) * 7850 == pytest.approx(9.0 * PRISM)
    half = hardware.bodies["lever 1"].section.depth / 2
    low, high = reach(block, [0, 0, 1])
    nearest, farthest = (low, high) if down > 0 else (-high, -low)
    assert nearest == pytest.approx(half)
    assert farthest - nearest == pytest.approx((9.0 / 7850 / (math.pi / 4 * 1.44)) ** (1 / 3))
    hole = rig.trees[0].pieces[0].ends[1]
    assert block.place == pytest.approx([hole.x, 0.0, hardware.heights["lever 1"]])
    assert block.above == "lever 1"
    assert "counterweight of lever 1" in found
