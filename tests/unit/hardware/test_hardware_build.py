"""Hardware of a whole rig: rounds settle, heights and weights add up, marks tell pieces apart."""

from dataclasses import replace

import numpy as np
import pytest
from factories import array, make_acceptance, make_brief, make_hardware, make_pads, shape_load
from hand_plan_rigs import make_plan_rig
from hand_rigs import make_rig

from rigdesign.brief.model_hardware import Surface
from rigdesign.checks.hardware.space import space
from rigdesign.hardware import build_hardware, stock_line
from rigdesign.hardware.members import off_surface, surface_heights
from rigdesign.hardware.model import Mass
from rigdesign.hardware.owning import bands_of, pad_forces
from rigdesign.hardware.sizing import make_shop
from rigdesign.hardware.wiring import design_loads, side_of, wired
from rigdesign.words import STANDARD_GRAVITY

X, FORCE = [0.5, 1.1, 2.0, 2.6], [1300.0, 900.0, 700.0, 400.0]


def rig(**changes):
    pads = changes.pop("pads", make_pads(count=4))
    return make_rig(X, FORCE, brief=make_brief(pads=pads, **changes))


def test_heights_add_up_along_every_link():
    made = build_hardware(rig())
    level = dict(made.heights) | {f"pad {pad.pad}": pad.pin_height for pad in made.pads}
    for link in made.links:
        assert level[link.upper.to] - level[link.lower.to] == pytest.approx(link.length, abs=1e-12)
        assert link.length > 0


def test_what_was_sized_was_sized_for_the_loads_that_it_has():
    made = build_hardware(rig(peak=1.5))
    loads = design_loads(wired(made.rig), made.masses, bands_of(wired(made.rig)).held_jacks(made.masses))
    shop = make_shop(made.rig.plan.target.brief.hardware)
    from rigdesign.hardware.catalogue import threads
    from rigdesign.hardware.links import rod_state

    for link in made.links:
        state = rod_state(loads[link.name], next(t for t in threads() if t.name == link.size), link.material, 0, False)
        assert max(r.utilisation for r in shop.rules.rod(state)) <= 1.0


def test_a_lever_weighs_its_steel_less_its_holes():
    made = build_hardware(rig())
    body, piece = made.bodies["lever 1"], made.pieces[0]
    length = abs(piece.ends[0].u) + abs(piece.ends[1].u) + 2 * body.overhang
    spacer = body.spacer
    assert (spacer.tube, spacer.bore, spacer.bolt) == (0.025, 0.0135, 0.012)
    holes = sum(np.pi / 4 * made.end_at("lever 1", hole.name).hole ** 2 for hole in piece.holes)
    holes += len(body.spacers) * np.pi / 4 * spacer.bore**2
    flats = 2 * 7850.0 * (length * body.section.depth - holes) * body.section.width
    tube = 7850.0 * np.pi / 4 * (0.025**2 - 0.0135**2) * body.gap
    bolt = 7850.0 * np.pi / 4 * 0.012**2 * (body.gap + 2 * body.section.width + 0.020)
    expected = flats + len(body.spacers) * (tube + bolt)
    assert made.masses["lever 1"].mass == pytest.approx(expected, rel=1e-9)


def test_marks_are_shared_by_identical_pieces_and_not_by_mirrored_ones():
    even = make_rig([0.4, 0.8, 1.6, 2.0], [500.0] * 4, brief=make_brief(pads=make_pads(count=4)))
    made = build_hardware(even)
    assert made.marks["lever 2"] == made.marks["lever 3"] != made.marks["lever 1"]
    # arms 0.1 and 0.3 here, 0.3 and 0.1 there
    mirrored = make_rig([0.4, 0.8, 1.6, 2.0], [750.0, 250.0, 250.0, 750.0], brief=make_brief(pads=make_pads(count=4)))
    made = build_hardware(mirrored)
    assert made.bodies["lever 2"].section == made.bodies["lever 3"].section
    assert made.marks["lever 2"] != made.marks["lever 3"]


@pytest.mark.parametrize(("action", "total", "side"), [("pull", 5.4e3, 1), ("push", 5.4e3, -1), ("push", -5.4e3, 1)])
def test_the_side_on_which_it_stands(action, total, side):
    force = [total * part for part in (0.4, 0.3, 0.2, 0.1)]
    brief = make_brief(pads=make_pads(count=4, action=action), loads=(shape_load(total=total),))
    assert side_of(make_rig(X, force, brief=brief)) == side


def test_pushed_rods_are_thicker_than_pulled_ones():
    long = make_hardware(link_length=0.9)
    pulled = build_hardware(rig(hardware=long))
    pushed = build_hardware(rig(hardware=long, pads=make_pads(count=4, action="push")))
    assert pushed.links[-1].width > pulled.links[-1].width
    assert min(link.length for link in pushed.links) >= 0.9 - 1e-12


def test_heights_follow_the_specimens_surface():
    surface = Surface(array([0.0, 4.0]), array([0.0, 0.2]))
    made = build_hardware(rig(hardware=make_hardware(surface=surface)))
    flat = build_hardware(rig())
    assert [pad.surface for pad in made.pads] == pytest.approx([0.05 * x for x in X])
    assert made.heights["jack 1"] > flat.heights["jack 1"]
    # the rig on the other side looks at the same surface from below
    assert surface_heights(surface, -1, array([2.0]), array([0.0]))[0] == pytest.approx(-0.1)
    in_plan = Surface(array([0, 1, 0, 1]), array([0, 1, 2, 3]), array([0, 0, 1, 1]))
    assert surface_heights(in_plan, 1, array([0.25, 3.0]), array([0.5, 0.9])) == pytest.approx([1.25, 3.0])


def test_counterweights_balance_every_lever():
    made = build_hardware(rig(hardware=make_hardware(balance="counterweights")))
    assert any(body.counterweights for body in made.bodies.values())
    assert any(finding.object == "counterweights" for finding in made.findings)
    led, fixed = pad_forces(wired(made.rig), made.masses)
    # forces from weight are in the ratio of those from the jack, to the rounding of a few sums
    assert fixed / fixed.sum() == pytest.approx(led / led.sum(), rel=1e-9)
    total = sum(mass.mass for mass in made.masses.values())
    assert fixed.sum() == pytest.approx(-total * STANDARD_GRAVITY, rel=1e-9)


@pytest.mark.parametrize(("action", "total"), [("pull", 5.4e3), ("pull", -5.4e3), ("push", 5.4e3), ("push", -5.4e3)])
def test_links_leave_room_for_counterweights_and_for_levers_that_turn_under_the_jack(action, total):
    # pads of unequal force far apart need large counterweights; they hang down on either side of the specimen
    force = [total * part for part in (0.5, 0.3, 0.15, 0.05)]
    hardware = make_hardware(balance="counterweights", clearance=0.04, turn=0.2, pad_mass=8.0)
    brief = make_brief(pads=make_pads(count=4, action=action), loads=(shape_load(total=total),), hardware=hardware)
    made = build_hardware(make_rig(X, force, brief=brief))
    assert any(body.counterweights for body in made.bodies.values())
    near = min(space(made).closest, key=lambda pair: pair.distance)
    assert near.distance >= 0.04 - 1e-9, near


def test_own_weight_that_breaks_a_band_is_balanced_without_being_asked():
    heavy = make_hardware(density=80000.0)
    brief = make_brief(pads=make_pads(count=4), hardware=heavy)
    target_free = make_rig(X, FORCE, brief=brief)
    loose = build_hardware(target_free)
    without = bands_of(wired(loose.rig)).use({})
    # four lumped pads miss the bands by themselves, so nothing is put on
    assert without > 1.0
    assert not any(body.counterweights for body in loose.bodies.values())


def test_what_no_stock_carries_is_told_by_member_and_check():
    brief = make_brief(pads=make_pads(count=4), loads=(shape_load(total=5.4e8),))
    made = build_hardware(make_rig(X, [1e5 * f for f in FORCE], brief=brief))
    short = {one.piece: one for one in made.shortfalls}
    assert {"lever 1", "link 1", "jack 1"} <= set(short)
    assert all(one.utilisation > 1.0 and one.remedy for one in made.shortfalls)


def test_builds_by_tier():
    made = build_hardware(rig(hardware=make_hardware(builds=("hollow section", "twin flats"))))
    assert [made.bodies[f"lever {n}"].build for n in (1, 2, 3)] == ["hollow section", "twin flats", "twin flats"]
    ends = {(link.upper.fitting, link.lower.fitting) for link in made.links[1:3]}
    assert ends == {("fork", "eye")}


@pytest.mark.parametrize("kind", ["rod", "strap", "webbing"])
def test_every_branch_has_an_adjuster(kind):
    made = build_hardware(rig(hardware=make_hardware(links=kind)))
    assert {link.kind for link in made.links[1:]} == {kind}
    assert made.links[0].kind == "rod"
    assert all(link.adjust > 0 for link in made.links if link.lower.to.startswith("pad "))
    assert not made.shortfalls


def test_plates_stand_on_studs():
    x, y, force = [0.3, 0.9, 0.5, 1.6], [0.1, -0.2, 0.3, 0.0], [300.0, 500.0, 400.0, 700.0]
    made = build_hardware(make_plan_rig(x, y, force, group=((1, 2, 3), 4)))
    plates = [piece for piece in made.pieces if piece.kind == "plate"]
    assert plates
    for piece in plates:
        ends = [made.end_at(piece.name, hole.name) for hole in piece.holes]
        assert {end.fitting for end in ends} == {"stud"}
        assert all(end.inner == made.bodies[piece.name].section.depth for end in ends)


def test_stock_weighs_more_for_larger_moments_and_less_far_below_the_peak():
    line = stock_line(make_brief())
    assert np.all(np.diff(line.moments) > 0)
    assert np.all(np.diff(line.masses) >= 0)
    at_peak = stock_line(make_brief(peak=1.5))
    assert at_peak.moments == pytest.approx(line.moments / 1.5)


def test_same_rig_same_hardware():
    one, other = build_hardware(rig()), build_hardware(rig())
    assert [replace(link) for link in one.links] == list(other.links)
    assert dict(one.marks) == dict(other.marks)


def test_pads_beyond_the_table_of_the_surface_are_named():
    surface = Surface(array([0.4, 2.2]), array([0.0, 0.1]))
    made = build_hardware(rig(hardware=make_hardware(surface=surface)))
    told = [finding for finding in made.findings if "does not reach so far" in finding.text]
    assert [(finding.object, finding.value) for finding in told] == [("pad 4", "1 pad: 4")]
    in_plan = Surface(array([0, 1, 0, 1]), array([0, 1, 2, 3]), array([0, 0, 1, 1]))
    assert off_surface(in_plan, array([0.5, 1.2, 1.0]), array([0.5, 0.5, 1.0])) == [2]


def test_the_jack_of_a_rig_far_heavier_than_its_load_is_found():
    """A rig of 10 kN under a load of 5.4 kN: the jack pulls more than three times what it would without weight."""
    brief = make_brief(pads=make_pads(count=4), acceptance=make_acceptance(moment=None, shear=5.0))
    heavy = make_rig(X, FORCE, brief=brief)
    wiring = wired(heavy)
    masses = {name: Mass(340.0, 0.0, 0.0) for name in wiring.pieces}
    bands = bands_of(wiring)
    led, fixed = pad_forces(wiring, masses)
    tried = np.linspace(0.0, 12.0, 4801)
    errors = bands.matrix @ (led[:, None] * tried + fixed[:, None]) - bands.rows.wanted[:, None]
    uses = np.maximum(errors / bands.rows.above[:, None], -errors / bands.rows.below[:, None]).max(axis=0)
    best = int(np.argmin(uses))
    assert tried[best] > 3.5
    # no nearer than the grid, whose least use lies a step away at most
    assert bands.use(masses) <= uses[best]
    assert bands.use(masses) == pytest.approx(uses[best], rel=5e-3)
