"""The lightest lever and the smallest pins that pass: nothing lighter or smaller does."""

from dataclasses import replace
from itertools import pairwise

import pytest
from factories import make_hardware

from rigdesign.hardware import levers
from rigdesign.hardware.catalogue import sections
from rigdesign.hardware.joints import eye_in_lugs, eye_on, passes, pin_state
from rigdesign.hardware.levers import LeverTask, braced, size_lever, spacer_places
from rigdesign.hardware.sizing import make_shop

BUILDS = ("twin flats", "twin channels", "hollow section")
SETS = ("BTH-1", "EN 1993", "AISC 360")


def task(build="twin flats", load=9000.0, a=0.41, b=0.66, **changes):
    loads = {"pivot": load, "A": load * b / (a + b), "B": load * a / (a + b)}
    return LeverTask(a, b, loads, build, changes.pop("inner", {}), changes.pop("deflection", 0.005))


def stock(build, rules):
    return sections(rules, levers.PROFILE[build])


@pytest.mark.parametrize("rules", SETS)
@pytest.mark.parametrize("build", BUILDS)
def test_no_lighter_section_passes_and_no_smaller_pin(build, rules):
    hardware = make_hardware(rules=rules)
    shop, asked = make_shop(hardware), task(build)
    found = size_lever(asked, stock(build, hardware), shop)
    assert found.failure is None
    lighter = tuple(s for s in stock(build, hardware) if s.mass < found.section.mass - 1e-9)
    if lighter:
        assert size_lever(asked, lighter, shop).failure is not None
    for hole, joint in found.joints.items():
        smaller = [pin for pin in shop.pins if pin < joint.pin]
        if smaller:
            less = levers._joint(asked, found.section, hole, smaller[-1], found.side_plate, joint.inner, shop)
            fails = less is None or not passes(
                shop.rules.hole(levers.hole_state(asked, found.section, hole, less, found.side_plate, shop))
            )
            assert fails, hole


@pytest.mark.parametrize("build", ["twin flats", "twin channels"])
def test_the_gap_holds_the_eyes_which_have_one_thickness(build):
    found = size_lever(task(build), stock(build, make_hardware()), make_shop(make_hardware()))
    assert len({joint.inner for joint in found.joints.values()}) == 1
    assert found.gap == pytest.approx(found.joints["A"].inner + 2 * found.joints["A"].gap, abs=1e-12)


def test_straps_of_different_thickness_are_kept_in_the_middle():
    inner = {"pivot": 0.012, "A": 0.006, "B": 0.008}
    found = size_lever(task(inner=inner), stock("twin flats", make_hardware()), make_shop(make_hardware()))
    for hole, joint in found.joints.items():
        assert joint.inner == inner[hole]
        assert joint.inner + 2 * joint.gap == pytest.approx(found.gap, abs=1e-12)


def test_a_wide_pin_bearing_on_webs_alone_is_smaller_than_on_the_whole_width():
    shop = make_shop(make_hardware())
    found = size_lever(task("hollow section"), stock("hollow section", make_hardware()), shop)
    joint = found.joints["pivot"]
    webs = 2 * (found.section.web + found.side_plate)
    assert webs < joint.inner
    assert passes(shop.rules.pin(pin_state(9000.0, joint, shop, webs)))


def test_a_stiffer_lever_is_asked_for_by_a_smaller_deflection():
    shop, profiles = make_shop(make_hardware()), stock("twin flats", make_hardware())
    soft, stiff = (size_lever(task(deflection=limit), profiles, shop) for limit in (0.05, 0.0005))
    assert stiff.section.inertia > 4 * soft.section.inertia


def test_where_nothing_passes_the_closest_is_drawn_with_what_fails():
    found = size_lever(task(load=9e6), stock("twin flats", make_hardware()), make_shop(make_hardware()))
    assert found.failure is not None
    assert found.failure.utilisation > 1.0
    assert found.section.modulus > 0.3 * max(s.modulus for s in stock("twin flats", make_hardware()))


def test_eyes_that_meet_inside_a_short_lever_do_not_pass():
    found = size_lever(task(a=0.012, b=0.02), stock("twin flats", make_hardware()), make_shop(make_hardware()))
    assert found.failure is not None
    assert found.failure.check == "room between pins"
    assert "longer arms" in levers.remedy(found.failure, "twin flats")


def test_spacers_leave_no_stretch_longer_than_their_pitch():
    places = spacer_places(0.75, 1.31)
    held = sorted([-0.75, 0.0, 1.31, *places])
    gaps = [right - left for left, right in pairwise(held)]
    assert max(gaps) <= levers.SPACER_PITCH + 1e-9
    assert braced(0.75, 1.31) == pytest.approx(max(gaps))
    assert len(places) == 2 + 4


def test_lugs_and_a_cells_pin():
    shop = make_shop(make_hardware())
    joint, use = eye_in_lugs(14000.0, shop)
    assert use <= 1.0
    below = [pin for pin in shop.pins if pin < joint.pin]
    assert eye_in_lugs(14000.0, replace(shop, pins=(below[-1],)))[1] > 1.0
    on_cell, use = eye_on(4000.0, 0.016, shop)
    assert (on_cell.pin, use <= 1.0) == (0.016, True)
    assert eye_on(4e6, 0.016, shop)[1] > 1.0


def test_arms_too_short_for_two_eyes_are_not_looked_for_in_every_section(monkeypatch):
    hardware = make_hardware()
    tried = []
    monkeypatch.setattr(levers, "_sized", lambda *arguments: tried.append(arguments))
    found = size_lever(task(a=0.019, b=0.3), stock("twin flats", hardware), make_shop(hardware))
    assert (found.failure.check, tried) == ("room between pins", [])
