"""Links numbered from the jack, and the forces in them with own weight: the builder's road."""

import numpy as np
import pytest
from factories import array, make_brief, make_hardware, make_pads, make_specimen
from hand_rigs import make_rig

from rigdesign.brief.model import Weight
from rigdesign.checks.statics import solve_statics
from rigdesign.hardware.model import Mass
from rigdesign.hardware.owning import bands_of
from rigdesign.hardware.wiring import design_loads, link_forces, peak_jacks, tree_weight, wired
from rigdesign.words import STANDARD_GRAVITY

X, FORCE = [0.5, 1.1, 2.0, 2.6], [1300.0, 900.0, 700.0, 400.0]


def rig(**changes):
    return make_rig(X, FORCE, brief=make_brief(pads=make_pads(count=4), **changes))


def test_links_count_from_the_jack_then_piece_by_piece():
    links = wired(rig()).links
    assert [link.number for link in links] == list(range(1, 8))
    assert [(link.upper[0], link.upper[1], link.lower[0]) for link in links] == [
        ("jack 1", "", "lever 1"),
        ("lever 1", "A", "lever 2"),
        ("lever 1", "B", "lever 3"),
        ("lever 2", "A", "pad 1"),
        ("lever 2", "B", "pad 2"),
        ("lever 3", "A", "pad 3"),
        ("lever 3", "B", "pad 4"),
    ]


def test_without_weight_links_carry_what_the_check_says():
    made = rig()
    solved = solve_statics(made)
    forces = link_forces(wired(made), {})
    jack = made.trees[0].force
    for pad, number in enumerate((4, 5, 6, 7)):
        assert forces[f"link {number}"].rate * jack == pytest.approx(solved.pad_force[pad], rel=1e-12)
        assert forces[f"link {number}"].lower == 0.0


def test_weight_of_a_lever_splits_by_its_centre():
    made = rig()
    lever = made.trees[0].pieces[1]
    a, b = abs(lever.ends[0].u), abs(lever.ends[1].u)
    # 30 kg with its centre a fifth of arm a inboard of the pivot: by moments about either end
    forces = link_forces(wired(made), {"lever 2": Mass(30.0, -a / 5, 0.0)})
    weight = -30.0 * STANDARD_GRAVITY  # gravity acts against z
    assert forces["link 4"].lower == pytest.approx(weight * (b + a / 5) / (a + b), rel=1e-12)
    assert forces["link 5"].lower == pytest.approx(weight * (a - a / 5) / (a + b), rel=1e-12)
    assert forces["link 6"].lower == 0.0


def test_all_weight_reaches_the_pads_or_the_jack():
    made = rig()
    links = wired(made)
    masses = {name: Mass(3.0 + i, 0.0, 0.0) for i, name in enumerate(links.pieces)}
    masses |= {link.name: Mass(0.5 * link.number, 0.0, 0.0) for link in links.links}
    forces = link_forces(links, masses)
    hung = -STANDARD_GRAVITY * sum(mass.mass for mass in masses.values())
    assert sum(forces[f"link {n}"].lower for n in (4, 5, 6, 7)) == pytest.approx(hung, rel=1e-12)
    assert tree_weight(made.trees[0], links.links, 0, masses) == pytest.approx(-hung, rel=1e-12)


def test_at_the_peak_the_jack_carries_the_tree_as_well():
    # 5.4 kN asked for, with a specimen that weighs 8 kg/m over 3.2 m and pulls against the load
    weight = Weight(array([0.2, 3.4]), array([8.0, 8.0]), array([]), array([]))
    made = rig(peak=1.5, specimen=make_specimen(weight=weight))
    masses = {"lever 1": Mass(40.0, 0.0, 0.0)}
    (jack,) = peak_jacks(wired(made), masses)
    assert jack == pytest.approx(1.5 * 5400.0 + (8.0 * 3.2 + 40.0) * STANDARD_GRAVITY, rel=1e-9)


def test_design_loads_take_overshoot_on_the_jacks_part_alone():
    made = rig(peak=1.2, hardware=make_hardware(overshoot=1.1))
    masses = {"link 4": Mass(10.0, 0.0, 0.0)}
    (jack,) = peak_jacks(wired(made), masses)
    loads = design_loads(wired(made), masses, bands_of(wired(made)).held_jacks(masses))
    forces = link_forces(wired(made), masses)
    # its own weight hangs on its upper end alone
    assert loads["link 4"] == pytest.approx(forces["link 4"].rate * jack * 1.1, rel=1e-12)
    assert loads["link 4"] > 1.2 * FORCE[0]
    assert np.all([load > 0 for load in loads.values()])
