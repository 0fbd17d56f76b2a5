"""The target of a surface: peaks, bands, what it says in words and what it remarks on."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import (
    LEFT,
    RIGHT,
    inertia_load,
    make_brief,
    make_specimen,
    make_weight,
    point_loads,
    shape_load,
    table_load,
)
from plan_targets import (
    KINKED,
    PLANFORM,
    SWEPT,
    couple_load,
    line,
    outline,
    plan_forces,
    pressure_map,
    scattered_map,
    surface_target,
    torque_load,
)

from rigdesign.brief.model import Acceptance, BandRule, Region
from rigdesign.command.target_answer import target_object
from rigdesign.errors import BriefError
from rigdesign.target import build_target
from rigdesign.target.bands import bands
from rigdesign.target.plan_remarks import place_in_plan
from rigdesign.target.plan_stations import smooth_stretches
from rigdesign.target.words import echo

QUANTITIES = ("shear", "moment", "torsion", "shear across", "moment across")
ALONG_LINE = replace(shape_load(), line=line((LEFT, 0.1), (RIGHT, -0.5)))
EVERY_KIND = (
    scattered_map(300),
    ALONG_LINE,
    table_load([0.5, 2.0, 3.1], [-40.0, 90.0, 30.0]),
    torque_load([LEFT, RIGHT], [60.0, -150.0]),
    couple_load(1.1, -170.0),
    plan_forces([1.0, 2.0, 2.6], [-0.5, 0.1, -0.6], [-200.0, 330.0, 90.0]),
)


def asked(**amounts: float) -> Acceptance:
    """Bands of the peak, both sides: ``asked(torsion=0.05)``."""
    rules = [BandRule(q.replace("_", " "), s, a, False, "peak") for q, a in amounts.items() for s in ("under", "over")]
    return Acceptance(tuple(rules), (), defaulted=False)


@pytest.mark.parametrize("cut", ["square to x", "square to axis"])
@pytest.mark.parametrize("axis", [SWEPT, KINKED], ids=["straight", "kinked"])
@pytest.mark.parametrize("supports", [(), (0.5, 3.0)], ids=["cantilever", "two supports"])
def test_peaks_are_those_of_a_fine_look(cut, axis, supports):
    target = surface_target(*EVERY_KIND, cut=cut, axis=axis, supports=supports)
    for quantity in QUANTITIES:
        low, high = (LEFT, RIGHT) if "across" not in quantity else (-0.85, 0.40)
        at = np.union1d(
            np.linspace(low, high, 4001), smooth_stretches(target.total_plan, target.brief.specimen, quantity)
        )
        found = target.peaks[quantity]
        values = np.array([np.abs(target.value(quantity, at, side)) for side in ("inboard", "outboard")])
        assert found.value >= values.max() * (1.0 - 1e-12)
        assert found.value <= values.max() * (1.0 + 1e-5)  # of the distance of the stations looked at
        own = [abs(float(target.value(quantity, np.array([found.at]), side)[0])) for side in ("inboard", "outboard")]
        assert max(own) == pytest.approx(found.value, rel=1e-9)


def test_a_torsion_peak_between_the_breaks_of_a_swept_axis():
    """Uniform w and a uniform torque t per x about an axis of slope k, cut square to x: T = t u + k w u²/2 with
    u = L − x, whose slope is zero at u = −t/(k w).
    """
    slope, w, t = -0.5 / 3.2, 500.0, 130.0
    target = surface_target(shape_load("uniform", 3.2 * w), torque_load([LEFT, RIGHT], [t, t]))
    u = -t / (slope * w)
    assert 1.0 < u < 2.0
    assert target.peaks["torsion"] == pytest.approx((t * u / 2.0, RIGHT - u), rel=1e-9)


def test_parts_add_up():
    whole, parts = (
        surface_target(*EVERY_KIND),
        [surface_target(ALONG_LINE, load).total_plan.parts[1] for load in EVERY_KIND],
    )
    assert len(whole.total_plan.parts) == len(EVERY_KIND)
    assert np.sum([part.sums for part in parts], axis=0) == pytest.approx(whole.total_plan.sums, rel=1e-12)
    assert whole.centroid_y == pytest.approx(whole.total_plan.sums.first_y / whole.resultant)


def test_weight_acts_on_its_line_and_so_does_inertia():
    weight = make_weight([LEFT, RIGHT], [20.0, 5.0], [2.0], [3.0])
    own = line((LEFT, -0.1), (RIGHT, -0.6))
    target = surface_target(ALONG_LINE, inertia_load(-1.5), weight=weight, weight_line=own)
    mass = 12.5 * 3.2 + 3.0
    force, _, first_y = target.gravity_plan.sums
    assert force == pytest.approx(-9.80665 * mass)
    # the straight taper's centre is a third of the way beyond 20, 5: (20 + 2·5)/(3·25) of the span
    x = LEFT + 3.2 * 30.0 / 75.0
    assert first_y / -9.80665 == pytest.approx(40.0 * own.at(np.array([x]))[0] + 3.0 * own.at(np.array([2.0]))[0])
    assert target.total_plan.parts[1].sums == pytest.approx([1.5 * value for value in target.gravity_plan.sums])
    assert target.net_plan.sums == pytest.approx(np.subtract(target.total_plan.sums, target.gravity_plan.sums))
    on_axis = surface_target(ALONG_LINE, inertia_load(-1.5), weight=weight)
    assert on_axis.gravity_plan.along((1.0, 0.0)).turning.total == pytest.approx(
        -9.80665 * (40.0 * SWEPT.at(np.array([x]))[0] + 3.0 * SWEPT.at(np.array([2.0]))[0])
    )


def test_a_line_rig_is_a_surface_on_y_zero():
    """The same numbers, with no torsion at all."""
    loads = (shape_load(), point_loads(1.3, -250.0), table_load([0.5, 2.0, 3.1], [-40.0, 90.0, 30.0]))
    lines = build_target(make_brief(specimen=make_specimen(), loads=loads))
    plan = surface_target(*loads, axis=None, outline=outline((LEFT, -0.3), (RIGHT, -0.3), (RIGHT, 0.2), (LEFT, 0.2)))
    x = np.linspace(LEFT, RIGHT, 77)
    for side in ("inboard", "outboard"):
        assert (lines.shear(x, side) == plan.shear(x, side)).all()
        assert (lines.moment(x, side) == plan.moment(x, side)).all()
        assert (plan.torsion(x, side) == 0.0).all()
    assert lines.shear_peak == pytest.approx(plan.shear_peak, rel=1e-14)
    assert lines.moment_peak == pytest.approx(plan.moment_peak, rel=1e-14)
    assert set(bands(lines)) == {"moment", "shear"}
    assert lines.torsion_peak == 0.0


def test_five_bands_with_torsion_no_narrower_than_its_arm():
    target = surface_target(ALONG_LINE, acceptance=asked(torsion=0.03, shear_across=0.08))
    found = bands(target)
    assert set(found) == set(QUANTITIES)
    width = PLANFORM.polygon.area / 3.2
    x = np.array([LEFT, 1.9, RIGHT])
    below, above = found["torsion"].widths(x, "outboard")
    assert below == pytest.approx(np.full(3, 5400.0 * 0.01 * width), rel=1e-9)
    assert above == pytest.approx(below)
    assert 0.03 * target.torsion_peak < below[0]
    across = found["shear across"]
    assert (across.stretches[0], across.stretches[-1]) == (-0.85, 0.40)
    assert across.widths(np.array([-0.2]), "outboard")[0] == pytest.approx(0.08 * 5400.0)
    assert not found["moment"].is_judged


def test_a_torsion_band_wide_enough_is_left_alone():
    target = surface_target(ALONG_LINE, couple_load(2.9, 3000.0), acceptance=asked(torsion=0.05))
    assert bands(target)["torsion"].widths(np.array([1.0]), "inboard")[0] == pytest.approx(0.05 * target.torsion_peak)
    assert not [one for one in target.findings if "narrower" in one.text]


def test_bands_at_a_kink_follow_the_side():
    """Of the local value, with cuts square to a kinked axis: M has a value on each side of the kink."""
    region = Region("middle", LEFT, RIGHT, tuple(BandRule("moment", s, 0.1, False, "local") for s in ("under", "over")))
    target = surface_target(ALONG_LINE, axis=KINKED, cut="square to axis",
                            acceptance=Acceptance((), (region,), defaulted=False))  # fmt: skip
    kink = np.array([1.6])
    widths = [bands(target)["moment"].widths(kink, side)[0][0] for side in ("inboard", "outboard")]
    moments = [float(target.moment(kink, side)[0]) for side in ("inboard", "outboard")]
    assert widths == pytest.approx([0.1 * moment for moment in moments])
    assert abs(moments[0] / moments[1] - 1.0) > 1e-3


def test_where_torsion_is_at_its_floor_a_note_says_so():
    target = surface_target(ALONG_LINE, acceptance=asked(torsion=0.03))
    (note,) = [one for one in target.findings if one.object == "torsion"]
    assert note.severity == "note"
    assert note.text.startswith("between 0.200 m and 3.400 m the band asked for is narrower")
    assert note.value == f"{0.03 * target.torsion_peak:.3g} N·m"
    assert note.limit.endswith("N·m, the resultant at 1 % of the outline's mean width")


def test_rounding_is_said_to_be_zero():
    # a load symmetric about its axis has its centre there and no torsion, but for the last digits
    shape = outline((LEFT, -0.3), (RIGHT, -0.3), (RIGHT, 0.3), (LEFT, 0.3))
    load = pressure_map([0.0, 4.0, 0.0, 4.0], [-1.0, -1.0, 1.0, 1.0], [900.0, 1100.0, 900.0, 1100.0])
    target = surface_target(load, outline=shape, axis=None, acceptance=asked(torsion=0.05))
    assert abs(target.centroid_y) < 1e-12
    assert "y = 0 m: " in echo(target)[0]
    (note,) = [one for one in target.findings if one.object == "torsion"]
    assert note.value == "0 N·m"
    assert place_in_plan(1.0, 3e-17) == "x = 1.000 m, y = 0 m"


def one_finding(target, what):
    (found,) = [finding for finding in target.findings if what in finding.text]
    return found


def test_what_rests_on_values_beyond_the_map():
    x, y = (axis.ravel() for axis in np.meshgrid([0.2, 1.8, 3.4], [-0.84, -0.1, 0.39], indexing="ij"))
    little = surface_target(pressure_map(x, y, np.full(9, 700.0)))
    assert one_finding(little, "beyond the outermost points").severity == "note"
    much = surface_target(pressure_map(x, 0.6 * y, np.full(9, 700.0)))
    found = one_finding(much, "beyond the outermost points")
    assert (found.severity, found.object) == ("warning", "load 1")
    share = much.total_plan.parts[0].share_beyond
    assert share > 0.1
    assert found.value.startswith(f"{100 * share:.1f} %")
    x, y = (axis.ravel() for axis in np.meshgrid([0.2, 3.4], [-0.85, 0.40], indexing="ij"))
    assert not [one for one in surface_target(pressure_map(x, y, [600.0] * 4)).findings if "beyond" in one.text]


def test_pressure_of_both_signs():
    x, y = (axis.ravel() for axis in np.meshgrid([0.2, 3.4], [-0.85, 0.40], indexing="ij"))
    found = one_finding(surface_target(pressure_map(x, y, [300.0, -500.0, 300.0, 900.0])), "over the surface")
    assert found.severity == "warning"
    assert "acts along −z" in found.text
    turned = one_finding(surface_target(pressure_map(x, y, [-300.0, 500.0, -300.0, -900.0])), "over the surface")
    assert "acts along +z" in turned.text
    assert turned.value == found.value


@pytest.mark.parametrize(("scale", "word"), [(1e-4, "small"), (1e5, "large")])
def test_pressures_of_no_sensible_size(scale, word):
    x, y = (axis.ravel() for axis in np.meshgrid([0.2, 3.4], [-0.85, 0.40], indexing="ij"))
    found = one_finding(
        surface_target(pressure_map(x, y, np.array([900.0, 500.0, 300.0, 700.0]) * scale)), "greatest pressure"
    )
    assert word in found.text


def test_a_centre_beside_the_outline():
    """Two forces of opposite sign: the resultant lies beyond them both."""
    target = surface_target(plan_forces([1.0, 2.0], [-0.5, 0.1], [500.0, -300.0]))
    found = one_finding(target, "beside the outline")
    # (500·1 − 300·2)/200, (500·(−0.5) − 300·0.1)/200
    assert found.value == "x = −0.500 m, y = −1.400 m"
    assert "cannot carry it, wherever they stand" in found.text
    notched = outline(
        (LEFT, -0.9), (RIGHT, -0.9), (RIGHT, 0.5), (2.4, 0.5), (2.3, -0.4), (1.1, -0.3), (1.0, 0.5), (LEFT, 0.5)
    )
    around = surface_target(plan_forces([0.5, 3.0], [0.3, 0.3], [300.0, 300.0]), outline=notched, axis=None)
    found = one_finding(around, "beside the outline")
    assert "pads of one sign around it can still carry it" in found.text
    assert not [one for one in surface_target(ALONG_LINE).findings if "beside" in one.text]


def test_torsion_with_an_arm_longer_than_the_specimen_is_wide():
    found = one_finding(surface_target(ALONG_LINE, couple_load(2.0, 9000.0)), "longer than the specimen is wide")
    assert found.severity == "warning"
    assert found.object == "torsion"


def test_torque_alone_is_no_target():
    with pytest.raises(BriefError, match="add up to nothing"):
        surface_target(couple_load(1.0, 50.0))


def test_words_of_a_wing():
    loads = (pressure_map([0.2, 3.4, 3.4, 0.2], [-0.85, -0.85, 0.4, 0.4], [500.0] * 4),
             replace(shape_load("uniform", 600.0), line=line((LEFT, 0.1), (RIGHT, -0.5))),
             plan_forces([1.0], [0.2], [-150.0]), couple_load(1.1, -70.0, times=-2.0))  # fmt: skip
    target = surface_target(*loads)
    said = echo(target)
    text = "\n".join(said)
    place = f"x = {target.centroid:.3f} m, y = {target.centroid_y:.3f} m".replace("-", "−")
    assert said[0].startswith(f"The target is {target.resultant / 1e3:.2f} kN along +z, out of the loaded surface.")
    assert place in said[0]
    assert "behind the reference axis (−y)" in said[0] or "ahead of the reference axis (+y)" in said[0]
    torsion = float(target.torsion(np.array([LEFT]), "outboard")[0])
    side = "raises" if torsion > 0 else "lowers"
    assert f"{side} the side of greater y (+y, the leading edge of a right wing seen from above)" in said[1]
    assert "cut square to x" in said[1]
    assert "none about z" in said[2]
    assert "Load 1: a pressure map of 4 points, 500 Pa: " in text
    assert "Load 2: uniform shape from 0.200 m to 3.400 m, along the line from x = 0.200 m, y = 0.100 m" in text
    bent = replace(loads[1], line=line((LEFT, 0.1), (1.0, 0.05), (RIGHT, -0.5)))
    assert "y = −0.500 m by way of 1 point between: " in "\n".join(echo(surface_target(bent)))
    assert "Load 3: a point load: 150 N along −z at x = 1.000 m, y = 0.200 m." in text
    assert "Load 4: a couple at 1.100 m (times −2): 140 N·m about x in all, which raises the side of greater y." in text
    assert "Cut the other way" not in text
    assert "lbf" in "\n".join(echo(target, "us"))


def test_words_of_a_turned_load_change_side():
    up, down = (surface_target(replace(ALONG_LINE, times=times)) for times in (1.0, -1.0))
    ahead, behind = echo(up)[1], echo(down)[1]
    assert ("raises" in ahead) != ("raises" in behind)
    assert "−5.40 kN" not in echo(down)[0]
    assert "onto the loaded surface" in echo(down)[0]


def test_words_of_a_panel_on_two_supports():
    target = surface_target(scattered_map(30), supports=(0.5, 3.0), acceptance=asked(moment_across=0.05),
                            cut="square to axis", weight=make_weight([LEFT, RIGHT], [20.0, 5.0]))  # fmt: skip
    text = "\n".join(echo(target))
    assert "Just outboard of the first support at 0.500 m, cut square to the reference axis" in text
    assert "leading edge" not in text
    assert "the first alone holds the torsion" in text
    assert "Cut the other way, square to y" in text
    assert "The specimen weighs 40.0 kg along the reference axis" in text


def test_the_command_answers_with_the_plan():
    target = surface_target(*EVERY_KIND)
    answer = target_object(target)
    assert answer["centroid_y_m"] == target.centroid_y
    assert answer["torsion_at_root_Nm"] == pytest.approx(
        float(target.value("torsion", np.array([LEFT]), "outboard")[0])
    )
    assert answer["root_torsion_Nm"] == pytest.approx(answer["torsion_at_root_Nm"], rel=1e-9)
    assert answer["torsion_peak_Nm"] == target.torsion_peak
    assert answer["moment_across_peak_Nm"] == target.peaks["moment across"].value
    lines = target_object(build_target(make_brief()))
    assert "cut" not in lines
