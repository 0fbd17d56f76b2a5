"""Own weight of a lever, worked by hand.

Source
------
Equilibrium of one lever of weight w whose centre lies a distance g from its pivot towards end 1, under a pull R at the
pivot, worked by hand apart from this package:

    F1 = ((R − w) b − w g)/(a + b),   F2 = ((R − w) a + w g)/(a + b)

With a = 600 mm, b = 400 mm, w = 300 N and g = 100 mm the ends feel 3.75 % and 2.5 % less than R b/(a + b) and
R a/(a + b) at R = 10 kN, and 37.5 % and 25 % less at 1 kN.
"""

from __future__ import annotations

import numpy as np
import pytest
from factories import make_brief, make_specimen, shape_load
from hand_rigs import make_rig

from rigdesign.checks.hardware.loads import hanging, link_forces, own_weight, pad_forces
from rigdesign.hardware.model import Mass
from rigdesign.words import STANDARD_GRAVITY

ARM_1, ARM_2, WEIGHT, OFF = 0.6, 0.4, 300.0, 0.1
NOTHING = Mass(0.0, 0.0, 0.0)


def lever(gravity=-1, pull=1.0):
    """A lever on pads at 1.0 m and 2.0 m, its pivot at 1.6 m; no member but the lever weighs anything."""
    specimen = make_specimen(gravity=gravity)
    brief = make_brief(specimen=specimen, loads=(shape_load(total=pull * 10e3),))
    rig = make_rig([1.0, 2.0], [pull * 4e3, pull * 6e3], brief)
    masses = dict.fromkeys(("link 1", "link 2", "link 3", "pad 1", "pad 2"), NOTHING)
    return rig, masses | {"lever 1": Mass(WEIGHT / STANDARD_GRAVITY, -OFF, 0.0)}


@pytest.mark.parametrize(("pull", "first", "second"), [(10e3, -0.0375, -0.025), (1e3, -0.375, -0.25)])
def test_a_pulled_lever_hands_on_less(pull, first, second):
    rig, masses = lever()
    loads, hung = own_weight(rig, masses), hanging(rig)
    felt = pad_forces(loads, hung, np.array([pull]))
    without = pull * np.array([ARM_2, ARM_1]) / (ARM_1 + ARM_2)
    # the pivot of the hand rig is drilled to full digits, so rounding is all that is left
    assert felt / without - 1 == pytest.approx([first, second], rel=1e-12)
    by_hand = [(pull - WEIGHT) * ARM_2 - WEIGHT * OFF, (pull - WEIGHT) * ARM_1 + WEIGHT * OFF]
    assert felt == pytest.approx(by_hand, rel=1e-12)


def test_a_lever_that_is_loaded_along_gravity_hands_on_more():
    """The same numbers with the signs turned: load and weight along −z."""
    rig, masses = lever(pull=-1.0)
    felt = pad_forces(own_weight(rig, masses), hanging(rig), np.array([-10e3]))
    assert felt == pytest.approx([-(10e3 + 300) * 0.4 - 30, -(10e3 + 300) * 0.6 + 30], rel=1e-12)


def test_gravity_along_z_turns_the_sign_of_weight_alone():
    rig, masses = lever(gravity=1)
    felt = pad_forces(own_weight(rig, masses), hanging(rig), np.array([10e3]))
    assert felt == pytest.approx([(10e3 + 300) * 0.4 + 30, (10e3 + 300) * 0.6 - 30], rel=1e-12)


def test_links_and_pads_weigh_on_their_own_line_alone():
    rig, masses = lever()
    masses |= {"link 1": Mass(1.0, 0.0, 0.0), "link 2": Mass(2.0, 0.0, 0.0), "pad 2": Mass(4.0, 0.0, 0.0)}
    loads = own_weight(rig, masses)
    g = STANDARD_GRAVITY
    felt = pad_forces(loads, hanging(rig), np.array([10e3]))
    pull = 10e3 - g
    first, second = (pull - 300) * 0.4 - 30, (pull - 300) * 0.6 + 30
    assert felt == pytest.approx([first - 2 * g, second - 4 * g], rel=1e-12)
    upper, lower = link_forces(loads, np.array([10e3]))
    assert upper == pytest.approx([10e3, first, second], rel=1e-12)
    assert lower == pytest.approx([pull, first - 2 * g, second], rel=1e-12)
    assert loads.weight == pytest.approx([-(300 + 7 * g)], rel=1e-12)
