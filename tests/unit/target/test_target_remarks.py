"""Remarks on a target: each one provoked alone, and a sound brief that has none."""

from __future__ import annotations

import numpy as np
import pytest
from factories import (
    LEFT,
    RIGHT,
    inertia_load,
    internal_load,
    make_brief,
    make_specimen,
    make_weight,
    point_loads,
    shape_load,
    table_load,
    two_supports,
)

from rigdesign.target import build_target
from rigdesign.target.internal import reactions


def findings(**changes):
    return build_target(make_brief(**changes)).findings


def only(**changes):
    (finding,) = findings(**changes)
    return finding


HELD = two_supports(LEFT, 1.0, 3.0, RIGHT)
LIGHT = make_weight([LEFT, RIGHT], [6.0, 3.0])


def test_sound_briefs_have_none():
    assert findings() == ()
    assert findings(loads=(shape_load("sine", -800.0),)) == ()
    assert findings(specimen=HELD, loads=(shape_load("uniform", -3000.0),)) == ()
    assert findings(specimen=make_specimen(weight=LIGHT), loads=(shape_load(), inertia_load(-3.8))) == ()


def test_findings_are_numbered():
    found = findings(specimen=HELD, loads=(point_loads([0.3, 1.9], [-900.0, 200.0]),))
    assert len(found) > 1
    assert [finding.name for finding in found] == [f"target {i}" for i in range(1, len(found) + 1)]


def test_uplift_under_a_load_downward():
    """Load on the left overhang alone: the right support must pull down, along the load."""
    finding = only(specimen=HELD, loads=(point_loads(0.4, -700.0),))
    assert (finding.severity, finding.object) == ("warning", "support at 3.000 m")
    assert "must act along −z, the same way as the load: the specimen lifts off a plain rest" in finding.text
    assert "own weight is not in the brief" in finding.text
    assert finding.value == "210 N"  # 700 · 0.6/2
    assert "hold it down there, or move the support at 1.000 m towards the resultant" in finding.remedy


def test_a_load_upward_that_presses_one_support():
    """Load upward on the left overhang: the left support holds down, the right one must bear."""
    finding = only(specimen=HELD, loads=(point_loads(0.4, 700.0),))
    assert finding.object == "support at 3.000 m"
    assert "must act along +z" in finding.text
    assert "a tie that only holds down goes slack" in finding.text
    assert "let it bear as well as hold down" in finding.remedy


def test_hanging_upside_down_turns_the_meaning():
    """Gravity along +z: what acts along +z presses onto rests; a load along −z lifts off."""
    turned = two_supports(LEFT, 1.0, 3.0, RIGHT, gravity=1)
    assert findings(specimen=turned, loads=(shape_load("uniform", 3000.0),)) == ()
    assert "lifts the specimen off" in only(specimen=turned, loads=(shape_load("uniform", -3000.0),)).text
    assert "lifts off a plain rest" in only(specimen=turned, loads=(point_loads(0.4, 700.0),)).text


def test_the_weight_counts_against_uplift():
    """The target includes the weight: with it inside the loads the support at 3 m stays pressed."""
    weight = make_weight([LEFT, RIGHT], [60.0, 30.0])
    held = two_supports(LEFT, 1.0, 3.0, RIGHT, weight=weight)
    assert findings(specimen=held, loads=(point_loads(0.4, -700.0), inertia_load(-1.0))) == ()
    finding = next(f for f in findings(specimen=held, loads=(point_loads(0.4, -700.0),)) if "support" in f.object)
    assert "the specimen's weight counted" in finding.text


def test_a_target_that_lifts_both_supports():
    weight = make_weight([LEFT, RIGHT], [20.0, 5.0])
    held = two_supports(LEFT, 1.0, 3.0, RIGHT, weight=weight)
    load = shape_load("uniform", 3000.0)
    target = build_target(make_brief(specimen=held, loads=(load,)))
    (finding,) = target.findings
    _, whole = reactions(held, target.total.total, target.total.first_moment)
    _, dead = reactions(held, target.gravity.total, target.gravity.first_moment)
    _, pads = reactions(held, target.net.total, target.net.first_moment)
    assert finding.severity == "note"
    assert f"{abs(whole[0]) / 1e3:.2f} kN at 1.000 m and {abs(whole[1]) / 1e3:.2f} kN at 3.000 m" in finding.text
    part = float(np.min(-dead / pads))  # dead + part · pads = 0
    assert f"the first support lets go at {100 * part:.3g}" in finding.text


def test_change_of_sign_says_where_how_much_and_what_to_do():
    """Triangles of 1200 N and −120 N that meet at 2.6 m."""
    finding = only(loads=(table_load([LEFT, 2.6, RIGHT], [1000.0, 0.0, -300.0]),))
    assert (finding.severity, finding.object) == ("warning", "target")
    assert "the target changes sign along the span: 120 N of it acts along −z, from 2.600 m to 3.400 m" in finding.text
    assert "against 1.20 kN along +z" in finding.text
    assert finding.value.startswith("9.09 % of")  # 120/1320
    assert "give each sign a rig" in finding.remedy


def test_a_point_load_against_the_rest():
    found = findings(loads=(shape_load(), point_loads(1.1, -350.0)))
    sign = next(f for f in found if f.object == "target")
    assert "350 N of it acts along −z, at 1.100 m," in sign.text
    against = next(f for f in found if f.object == "load 2")
    assert (against.severity, against.value) == ("note", "−350 N")
    assert "against all other loads" in against.text


def test_the_change_of_sign_is_that_of_the_pads():
    """Inertia makes the target change sign; gravity against it makes what the pads bring one-signed."""
    weight = make_weight([LEFT, 1.0, 1.0, RIGHT], [60.0, 60.0, 1.0, 1.0])
    loads = (shape_load("uniform", 1600.0), inertia_load(-1.0))
    held = make_specimen(weight=weight)
    target = build_target(make_brief(specimen=held, loads=loads))
    assert target.total.running(np.array([0.5]), "outboard")[0] < 0
    assert target.findings == ()
    bare = build_target(make_brief(specimen=make_specimen(weight=weight, gravity=1), loads=loads))
    assert any("what the pads bring (the target less gravity) changes sign" in f.text for f in bare.findings)


def test_many_stretches_are_counted():
    x = np.linspace(LEFT, RIGHT, 33)
    finding = only(loads=(table_load(x, 300 + 500.0 * (-1.0) ** np.arange(33)),))
    assert "on 16 stretches between" in finding.text


def test_a_trace_of_the_other_sign_is_no_remark_and_a_little_a_note():
    assert findings(loads=(table_load([LEFT, 3.35, RIGHT], [1000.0, 30.0, -30.0]),)) == ()
    assert only(loads=(table_load([LEFT, 3.0, RIGHT], [1000.0, 100.0, -100.0]),)).severity == "note"


def test_gravity_brings_more_than_the_target():
    heavy = make_weight([LEFT, RIGHT], [90.0, 60.0])
    first = findings(specimen=make_specimen(weight=heavy), loads=(shape_load("uniform", -800.0),))[0]
    assert (first.severity, first.object) == ("warning", "weight")
    assert "gravity alone brings more than the target" in first.text
    assert "the pads would have to act along +z" in first.text
    weight = 75 * 3.2 * 9.80665
    assert first.value == f"{(weight - 800) / 1e3:.2f} kN"


def test_the_specimen_outweighs_an_upward_target():
    heavy = make_weight([LEFT, RIGHT], [90.0, 60.0])
    finding = only(specimen=make_specimen(weight=heavy), loads=(shape_load("uniform", 800.0),))
    assert "weighs 2.9 times the target" in finding.text


def test_the_resultant_beside_the_specimen():
    found = findings(loads=(table_load([LEFT, RIGHT], [1000.0, -900.0]),))
    finding = next(f for f in found if f.object == "resultant")
    assert finding.severity == "warning"
    moment = 1000 * 3.2**2 / 6 - 900 * 3.2**2 / 3
    assert finding.value == f"{LEFT + moment / 160:.3f} m".replace("-", "−")


def test_inertia_that_adds():
    finding = only(specimen=make_specimen(weight=LIGHT), loads=(shape_load(), inertia_load(3.8)))
    assert finding.object == "load 2"
    assert "adds to them" in finding.text


def test_the_dead_load_as_inertia_is_no_slip():
    """−1.35 g against z on a deck loaded downward: its own weight, with its factor."""
    held = two_supports(LEFT, 1.0, 3.0, RIGHT, weight=LIGHT)
    assert findings(specimen=held, loads=(shape_load("uniform", -3000.0), inertia_load(-1.35))) == ()


@pytest.mark.parametrize(
    ("changes", "words", "value"),
    [
        ({"specimen": make_specimen(left=0.0, right=0.016), "loads": (shape_load(start_x=0.0, end_x=0.016),)},
         "the span is unusually small", "16.0 mm"),
        ({"specimen": make_specimen(left=0.0, right=3200.0), "loads": (shape_load(start_x=0.0, end_x=3200.0),)},
         "the span is unusually large", "3200.000 m"),
        ({"loads": (shape_load(total=0.54),)}, "its total is unusually small", "0.540 N"),
        ({"loads": (shape_load(total=5.4e8),)}, "its total is unusually large", "540 MN"),
        ({"loads": (shape_load(total=5e7),)}, "its mean running load is unusually large", "15.6 MN/m"),
        ({"specimen": make_specimen(weight=make_weight([LEFT, RIGHT], [9e4, 6e4])),
          "loads": (shape_load(total=5e6),)}, "the mean mass per length is unusually large", "75000 kg/m"),
    ],
)  # fmt: skip
def test_sizes_that_look_like_a_slip(changes, words, value):
    finding = only(**changes)
    assert finding.severity == "warning"
    assert words in finding.text
    assert finding.value == value


def test_a_load_factor_in_metres_per_second_squared():
    found = findings(specimen=make_specimen(weight=LIGHT), loads=(shape_load(total=9000.0), inertia_load(-37.3)))
    assert any("counts in g" in finding.text and finding.value == "-37.3 g" for finding in found)


def test_newtons_for_kilonewtons():
    finding = only(loads=(shape_load(), point_loads(1.1, 0.9)))
    assert (finding.object, finding.severity) == ("load 2", "note")
    assert "6000 times smaller than load 1" in finding.text


def test_remarks_on_tables_carry_their_load():
    table = internal_load([LEFT, 2.0, RIGHT], [900.0, 500.0, 100.0], [1650.0, 420.0, 0.0])
    found = findings(loads=(shape_load(), table))
    assert [(f.object, f.severity) for f in found] == [("load 2", "note")]
