"""Heights, swings, the pairs that are listed, and what the remarks say of them."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from factories import make_brief, make_hardware
from hand_hardware import make_hardware_for
from hand_rigs import make_rig

from rigdesign.checks.hardware.model import Clearance
from rigdesign.checks.hardware.remarks_space import space_remarks
from rigdesign.checks.hardware.space import side_by_side, space

X, FORCE, GROUP = [0.3, 0.7, 1.0, 1.5], [300, 500, 700, 400], (1, ((2, 3), 4))


def hardware_for(group=GROUP, x=X, **rules):
    rig = make_rig(x, FORCE[: len(x)], make_brief(hardware=make_hardware(**rules)), group)
    return make_hardware_for(rig)


def remarks(hardware, **changes):
    return space_remarks(hardware, replace(space(hardware), **changes))


def test_levels_rise_from_the_pads_to_the_jack():
    hardware = hardware_for()
    found = space(hardware)
    stack = hardware.stacks[0]
    above = stack.cell.length + stack.machine.length + stack.machine.stroke / 2
    steps = [("pad pins", 0.06), ("tier 3", 0.38), ("tier 2", 0.70), ("tier 1", 1.02), ("jack's lower pin", 1.34)]
    assert [name for name, _ in found.heights] == [name for name, _ in steps] + ["jack's upper pin"]
    assert [height for _, height in found.heights[:-1]] == pytest.approx([height for _, height in steps])
    assert found.total == pytest.approx(1.34 + above)
    assert found.heights[-1][1] == found.total


def test_the_highest_pad_counts():
    hardware = hardware_for()
    pads = tuple(replace(pad, surface=0.01 * pad.pad) for pad in hardware.pads)
    assert dict(space(replace(hardware, pads=pads)).heights)["pad pins"] == pytest.approx(0.10)


def test_swings_follow_from_arm_turn_and_length():
    turn = math.radians(7.0)
    hardware = hardware_for(turn=turn)
    found = space(hardware).swings
    assert found[0] == 0.0
    lever = hardware.pieces[0]
    for hole, link in zip(lever.ends, hardware.links[1:3], strict=True):
        assert link.upper.at == hole.name
        # by the circle that the hole runs on: it ends beside where it began
        beside = abs(hole.u) - abs(hole.u) * math.cos(turn)
        assert math.tan(found[link.number - 1]) == pytest.approx(beside / link.length)
    assert abs(lever.ends[0].u) > 1.2 * abs(lever.ends[1].u)


def test_ten_pairs_at_rest_and_ten_turned_nearest_first():
    found = space(hardware_for())
    assert [sum(c.state == state for c in found.closest) for state in ("at rest", "turned")] == [10, 10]
    assert [c.distance for c in found.closest] == sorted(c.distance for c in found.closest)
    rest = {(c.first, c.second): c.distance for c in found.closest if c.state == "at rest"}
    turned = {(c.first, c.second): c.distance for c in found.closest if c.state == "turned"}
    both = set(rest) & set(turned)
    assert len(both) > 5
    assert all(turned[pair] <= rest[pair] for pair in both)


def test_a_rig_that_fits_gets_one_note_with_its_least_clearance():
    hardware = hardware_for(swing=math.radians(20.0))
    (note,) = remarks(hardware)
    nearest = space(hardware).closest[0]
    assert (note.stage, note.severity, note.object) == ("space", "note", f"{nearest.first} and {nearest.second}")
    assert f"{1e3 * nearest.distance:.1f}" in note.value or f"{1e3 * nearest.distance:.0f}" in note.value
    assert "not looked at" in note.text


def test_a_clearance_that_is_too_small_names_pair_state_and_remedy():
    near = (
        Clearance("lever 1", "lever 2", 0.011, "turned"),
        Clearance("lever 1", "lever 2", 0.013, "at rest"),
        Clearance("link 2", "pad 3", 0.019, "turned"),
        Clearance("link 2", "pad 4", 0.0249995, "turned"),
    )
    failure, *_ = remarks(hardware_for(), closest=near, required=0.025)
    assert (failure.severity, failure.object, failure.value) == ("failure", "lever 1 and lever 2", "11.0 mm")
    assert failure.limit == "clearance 25.0 mm"
    assert "turned" in failure.text
    assert "so too link 2 and pad 3;" in failure.text
    assert "pad 4" not in failure.text
    assert "less turning" in failure.remedy
    meeting = (Clearance("lever 1", "lever 2", 0.0, "at rest"), *near[2:])
    failure, *_ = remarks(hardware_for(), closest=meeting, required=0.025)
    assert failure.text.startswith("the two meet, at rest")
    assert "turning" not in failure.remedy


def test_where_every_listed_pair_is_too_near_there_may_be_more():
    near = tuple(Clearance(f"lever {i}", f"lever {i + 20}", 0.001 * i, "turned") for i in range(1, 11))
    failure, *_ = remarks(hardware_for(), closest=near, required=0.025)
    assert "perhaps pairs that are not listed" in failure.text


@pytest.mark.parametrize(
    ("headroom", "first"),
    [(2.0, "jack's upper pin"), (1.2, "jack's lower pin"), (0.9, "tier 1"), (0.5, "tier 2"), (0.05, "pad pins")],
)
def test_headroom_names_the_level_that_breaks_it(headroom, first):
    hardware = hardware_for(headroom=headroom, swing=math.radians(20.0))
    failure, _ = remarks(hardware)
    assert (failure.severity, failure.object) == ("failure", first)
    assert failure.limit.startswith("headroom ")
    assert "tier 2 320 mm" in failure.text.replace("0.320 m", "320 mm")
    assert space(hardware).total > 2.0


def test_headroom_that_is_just_enough_is_enough():
    total = space(hardware_for()).total
    rules = {"swing": math.radians(20.0)}
    assert len(remarks(hardware_for(headroom=total, **rules))) == 1
    assert len(remarks(hardware_for(headroom=total - 1e-4, **rules))) == 2


def test_links_that_swing_too_far_are_named_with_the_length_that_would_do():
    hardware = hardware_for(turn=math.radians(8.0), swing=math.radians(0.3))
    found = space(hardware).swings
    worst = int(np.argmax(found))
    failure = next(f for f in remarks(hardware) if f.object.startswith("link") and "swings" in f.text)
    assert failure.severity == "failure"
    assert failure.object == f"link {worst + 1}"
    assert failure.limit == "swing 0.300 deg"
    link = hardware.links[worst]
    longer = link.length * math.tan(found[worst]) / math.tan(math.radians(0.3))
    assert f"{longer:.3f} m" in failure.remedy
    others = [i + 1 for i in range(found.size) if found[i] > math.radians(0.3) and i != worst]
    assert all(f"link {i}" in failure.text for i in others)


def test_fittings_in_one_lever_need_room_and_no_more():
    """Two pads 5 cm apart: eyes of 16 mm radius about holes 2 to 3 cm from the pivot overlap."""
    wide = hardware_for((1, (2, 3)), [0.3, 0.7, 0.9])
    assert side_by_side(wide)[0].distance > 0.002
    assert not [f for f in remarks(wide) if "fittings" in f.text]
    tight = hardware_for((1, (2, 3)), [0.3, 0.7, 0.75])
    assert side_by_side(tight)[0].distance < 0.002
    failure = next(f for f in remarks(tight) if "fittings" in f.text)
    assert failure.severity == "failure"
    assert failure.object.startswith("link ")
    assert failure.limit == "2.00 mm, set here"


def test_a_pad_on_the_jack_itself():
    rig = make_rig([1.2], [500.0], make_brief(), 1)
    found = space(make_hardware_for(rig))
    assert [name for name, _ in found.heights] == ["pad pins", "jack's lower pin", "jack's upper pin"]
    assert found.swings.tolist() == [0.0]
    assert {(c.first, c.second) for c in found.closest} == {("jack 1", "pad 1")}
