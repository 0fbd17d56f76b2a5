"""What the builder takes for strong enough is strong enough for the check, which has its own road to every load."""

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_hardware, make_pads, shape_load
from hand_rigs import make_rig

from rigdesign.checks import check
from rigdesign.checks.hardware import check_hardware
from rigdesign.checks.hardware.loads import hanging
from rigdesign.checks.hardware.tare import sampled, weighed
from rigdesign.hardware import build_hardware
from rigdesign.hardware.owning import bands_of
from rigdesign.hardware.wiring import wired

X = [0.42, 0.97, 1.52, 2.31, 2.83]
FORCE = [1900.0, 1430.0, 1010.0, 620.0, 280.0]


def rig(factor=1.0, action="pull", acceptance=None, **hardware):
    more = {} if acceptance is None else {"acceptance": acceptance}
    brief = make_brief(
        pads=make_pads(count=5, action=action),
        loads=(shape_load(total=factor * sum(FORCE)),),
        hardware=make_hardware(**hardware),
        peak=1.4,
        **more,
    )
    return make_rig(X, [factor * force for force in FORCE], brief=brief)


@pytest.mark.parametrize("rules", ["BTH-1", "EN 1993", "AISC 360"])
@pytest.mark.parametrize("links", ["rod", "strap", "webbing"])
@pytest.mark.parametrize("factor", [1.0, -3.7])
def test_the_check_finds_no_member_weak_where_the_builder_finds_none(rules, links, factor):
    made = build_hardware(rig(factor, rules=rules, links=links))
    assert made.shortfalls == ()
    found = check_hardware(check(made.rig), made)
    worst = max(found.strength, key=lambda row: row.utilisation)
    # sizes are the least that pass, so something is well used
    assert 0.5 < worst.utilisation <= 1.0 + 1e-9, worst


@pytest.mark.parametrize(("rules", "factor"), [("AISC 360", 9.5), ("BTH-1", 4.0), ("BTH-1", 6.0), ("EN 1993", 12.0)])
def test_straps_and_pins_do_not_chase_each_other(rules, factor):
    # loads at which the lightest strap asks for another pin, and that pin for another strap
    made = build_hardware(rig(factor, rules=rules, links="strap"))
    assert not made.findings
    assert max(row.utilisation for row in check_hardware(check(made.rig), made).strength) <= 1.0 + 1e-9


def test_a_larger_cell_is_taken_for_the_sake_of_its_pin():
    # the pin of the cell for this force bends too far under EN 1993; that of the next one does not
    made = build_hardware(rig(12.25, rules="EN 1993", links="strap"))
    cell, jack = made.stacks[0].cell, made.stacks[0].machine
    assert made.shortfalls == ()
    assert cell.force > jack.force
    assert max(row.utilisation for row in check_hardware(check(made.rig), made).strength) <= 1.0 + 1e-9


@pytest.mark.parametrize("overshoot", [1.0, 1.05])
def test_members_are_sized_for_the_jack_force_that_the_check_holds(overshoot):
    # heavy levers against wide bands: with weight the least band use needs more than the even jack force
    wide = make_acceptance(moment=0.4, shear=0.9)
    made = build_hardware(rig(acceptance=wide, overshoot=overshoot, density=60000.0, balance="none"))
    found = check_hardware(check(made.rig), made)
    state = weighed(sampled(found.check), hanging(made.rig), found.loads)
    held = state.held_at(1.4, overshoot)
    assert found.check.band_use < 1
    assert np.abs(held).sum() > 1.001 * overshoot * abs(state.even_factor(1.4) * state.jack.sum())
    # both look at the same bands at stations of their own
    assert bands_of(wired(made.rig)).held_jacks(made.masses) == pytest.approx(held, rel=1e-3)
