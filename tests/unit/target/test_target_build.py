"""From brief to target: sums, weight, peaks, and loads that add up to nothing."""

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

from rigdesign.errors import BriefError
from rigdesign.target import build_target
from rigdesign.target.peaks import signed_parts

G = 9.80665
WEIGHT = make_weight([LEFT, 1.5, RIGHT], [14.0, 9.0, 4.0], [2.2], [6.5])
MASS = (14 + 9) / 2 * 1.3 + (9 + 4) / 2 * 1.9 + 6.5


def sampled_peaks(target):
    """Largest |V| and |M| on a fine grid and at both sides of every break: never above the true peaks."""
    specimen = target.brief.specimen
    x = np.unique(np.concatenate([np.linspace(LEFT, RIGHT, 200_001), target.total.breaks, specimen.supports]))
    shear = max(np.abs(target.shear(x, side)).max() for side in ("inboard", "outboard"))
    return shear, np.abs(target.moment(x)).max()


WAVES = np.linspace(LEFT, RIGHT, 301)
CASES = {
    "cantilever": (make_specimen(), (shape_load(), point_loads([1.0, 2.6], [-900.0, 250.0]))),
    "two supports": (
        two_supports(LEFT, 0.8, 2.9, RIGHT),
        (shape_load("sine", -4000.0), point_loads(3.3, -700.0)),
    ),
    "both signs": (
        two_supports(LEFT, 0.4, 3.1, RIGHT),
        (shape_load("elliptical", 3000.0), table_load([LEFT, 2.0, RIGHT], [-500.0, 0.0, -2500.0])),
    ),
    "wavy": (make_specimen(), (shape_load("sine", 3000.0), shape_load("parabolic", -2900.0), point_loads(2.0, 40.0))),
    "fine table": (two_supports(LEFT, 0.4, 3.1, RIGHT), (table_load(WAVES, 500 + 900 * np.sin(12.5 * WAVES)),)),
}


@pytest.mark.parametrize("case", CASES)
def test_peaks_against_a_fine_grid(case):
    specimen, loads = CASES[case]
    target = build_target(make_brief(specimen=specimen, loads=loads))
    shear, moment = sampled_peaks(target)
    # the grid of 16 µm misses a rounded peak by w (16 µm)²/8 and the like
    assert shear * (1 - 1e-13) <= target.shear_peak <= shear * (1 + 1e-8)
    assert moment * (1 - 1e-13) <= target.moment_peak <= moment * (1 + 1e-8)
    at = np.array([target.shear_peak_x, target.moment_peak_x])
    sides = [abs(target.shear(at, side)[0]) for side in ("inboard", "outboard")]
    assert max(sides) == pytest.approx(target.shear_peak, rel=1e-11)
    assert abs(target.moment(at)[1]) == pytest.approx(target.moment_peak, rel=1e-11)


def test_peak_moment_between_supports_in_closed_form():
    """Uniform load without overhang: w L²/8 in the middle, and the shear's peak at the first of two equal places."""
    specimen = two_supports(0.0, 0.0, 3.0, 3.0)
    target = build_target(
        make_brief(specimen=specimen, loads=(shape_load("uniform", -2400.0, start_x=0.0, end_x=3.0),))
    )
    assert target.moment_peak == pytest.approx(2400 * 3 / 8, rel=1e-15)
    assert target.moment_peak_x == pytest.approx(1.5, rel=1e-8)
    assert (target.shear_peak, target.shear_peak_x) == (pytest.approx(1200.0, rel=1e-15), 0.0)


def test_peak_where_the_shear_passes_zero():
    """A triangle between supports at its ends: W L · 2/(9 √3)... at L/√3 from the light end."""
    specimen = two_supports(0.0, 0.0, 3.0, 3.0)
    load = shape_load("triangular", -900.0, greatest="tip", start_x=0.0, end_x=3.0)
    target = build_target(make_brief(specimen=specimen, loads=(load,)))
    assert target.moment_peak == pytest.approx(2 * 900 * 3 / (9 * np.sqrt(3)), rel=1e-14)
    assert target.moment_peak_x == pytest.approx(3 / np.sqrt(3), rel=1e-8)


def test_peak_of_the_shear_where_the_load_passes_zero_twice():
    """3 kN of sine less 2 kN of uniform load: w is negative at both ends and positive between."""
    target = build_target(make_brief(loads=(shape_load("sine", 3000.0), shape_load("uniform", -2000.0))))
    xi = np.arcsin(4 / (3 * np.pi)) / np.pi
    assert target.shear_peak == pytest.approx(1500 * (1 + np.cos(np.pi * xi)) - 2000 * (1 - xi), rel=1e-13)
    assert target.shear_peak_x == pytest.approx(LEFT + 3.2 * xi, rel=1e-8)


def test_a_point_load_at_the_root_counts():
    target = build_target(make_brief(loads=(shape_load("uniform", 1000.0), point_loads(LEFT, 300.0))))
    assert (target.shear_peak, target.shear_peak_x) == (pytest.approx(1300.0), LEFT)


@pytest.mark.parametrize("overhang", [0.3, 0.7, 1.1])
def test_of_equal_peaks_the_most_inboard_is_named(overhang):
    specimen = two_supports(0.1, 0.1 + overhang, 7.3 - overhang, 7.3)
    target = build_target(make_brief(specimen=specimen, loads=(shape_load("uniform", -777.7, start_x=0.1, end_x=7.3),)))
    assert target.shear_peak_x == pytest.approx(0.1 + overhang)


def test_moment_is_positive_for_a_positive_load_and_negative_between_supports():
    load = shape_load("uniform", 1000.0)
    middle = np.array([1.8])
    assert build_target(make_brief(loads=(load,))).moment(middle)[0] > 0
    assert (
        build_target(make_brief(specimen=two_supports(LEFT, LEFT, RIGHT, RIGHT), loads=(load,))).moment(middle)[0] < 0
    )


def test_shear_falls_and_moment_follows():
    """dV/dx = −w and dM/dx = −V, by central differences, supports included."""
    specimen, loads = CASES["both signs"]
    target = build_target(make_brief(specimen=specimen, loads=loads))
    x, d = np.linspace(0.5, 2.9, 40), 1e-5
    slope_v = (target.shear(x + d, "inboard") - target.shear(x - d, "inboard")) / (2 * d)
    slope_m = (target.moment(x + d) - target.moment(x - d)) / (2 * d)
    assert slope_v == pytest.approx(-target.total.running(x, "inboard"), abs=1e-4)  # rounding over d, and kinks
    assert slope_m == pytest.approx(-target.shear(x, "inboard"), abs=1e-4)


def test_weight_gravity_and_net():
    for gravity in (-1, 1):
        specimen = make_specimen(weight=WEIGHT, gravity=gravity)
        target = build_target(make_brief(specimen=specimen, loads=(shape_load(), inertia_load(-3.8, times=1.5))))
        assert target.gravity.total == pytest.approx(gravity * G * MASS, rel=1e-14)
        assert target.resultant == pytest.approx(5400 - 5.7 * G * MASS, rel=1e-14)
        assert target.net.total == pytest.approx(target.resultant - gravity * G * MASS, rel=1e-14)
        x = np.array([1.0, 2.2, 3.0])
        whole = target.net.force_beyond(x, "inboard") + target.gravity.force_beyond(x, "inboard")
        assert whole == pytest.approx(target.total.force_beyond(x, "inboard"), rel=1e-12)
        # the peaks are those of what the specimen feels
        assert target.moment_peak == pytest.approx(target.total.moment_beyond(np.array([LEFT]))[0], rel=1e-14)


def test_without_weight_the_pads_bring_it_all():
    target = build_target(make_brief())
    assert target.gravity.total == 0.0
    assert target.net.total == target.total.total == pytest.approx(5400.0)


def test_where_the_moment_is_taken():
    target = build_target(make_brief())
    assert (target.about, target.moment_about) == (LEFT, pytest.approx(target.moment(np.array([LEFT]))[0]))
    held = build_target(make_brief(specimen=two_supports(LEFT, 0.9, 3.0, RIGHT)))
    assert held.about == 0.9
    assert held.moment_about == pytest.approx(5400 * (held.centroid - 0.9))


@pytest.mark.parametrize(
    "loads",
    [
        (shape_load("uniform", 0.0),),
        (shape_load("elliptical", 5400.0), shape_load("sine", -2700.0, times=2.0)),
        (table_load([LEFT, RIGHT], [0.0, 0.0]),),
        (point_loads([1.0, 2.0], [50.0, -50.0]),),
        (internal_load([LEFT, 2.0, RIGHT], [0.0, 100.0, 0.0], [50.0, 40.0, 0.0]),),
    ],
)
def test_loads_that_add_up_to_nothing(loads):
    with pytest.raises(BriefError, match="add up to nothing") as caught:
        build_target(make_brief(loads=loads))
    assert caught.value.where == "[[load]]"


@pytest.mark.parametrize("force", [4e-13, 3e15])
def test_loads_beyond_all_reason(force):
    with pytest.raises(BriefError, match="of a size that no rig can bring") as caught:
        build_target(make_brief(loads=(shape_load("sine", force / 8, times=8.0),)))
    assert caught.value.value == f"{force:.3g} N"
    assert build_target(make_brief(loads=(shape_load("sine", 2e-12),))).total.total == pytest.approx(2e-12, rel=1e-9)


@pytest.mark.parametrize(
    ("specimen", "x", "held"),
    [(make_specimen(), LEFT, "root"), (two_supports(LEFT, 0.8, 2.9, RIGHT), [0.8, 2.9], "supports")],
)
def test_loads_that_go_straight_into_the_supports(specimen, x, held):
    forces = [700.0, 300.0] if held == "supports" else 700.0
    with pytest.raises(BriefError, match=f"act at the {held} alone, so that they bend the specimen nowhere"):
        build_target(make_brief(specimen=specimen, loads=(point_loads(x, forces),)))


def test_inertia_needs_a_weight():
    with pytest.raises(BriefError, match="needs the specimen's weight"):
        build_target(make_brief(loads=(shape_load(), inertia_load(2.0))))


def test_a_weight_table_of_one_row():
    with pytest.raises(BriefError, match="two stations") as caught:
        build_target(make_brief(specimen=make_specimen(weight=make_weight([1.0], [5.0]))))
    assert caught.value.where == "[specimen] weight"


def test_point_masses_alone_are_a_weight():
    specimen = make_specimen(weight=make_weight(point_x=[1.1, 2.0], point_mass=[3.0, 8.0]))
    assert build_target(make_brief(specimen=specimen)).gravity.total == pytest.approx(-11 * G, rel=1e-15)


def test_load_split_by_its_sign():
    """A straight line through zero at 2.2 m, and a point load against its surroundings."""
    loads = (table_load([LEFT, RIGHT], [1000.0, -600.0]), point_loads(1.0, -30.0))
    target = build_target(make_brief(loads=loads))
    parts = signed_parts(target.total, LEFT, RIGHT)
    assert parts.start == pytest.approx([LEFT, 1.0, 1.0, 2.2], rel=1e-14)
    assert parts.end == pytest.approx([1.0, 1.0, 2.2, RIGHT], rel=1e-14)
    w = 1000 - 500 * 0.8
    assert parts.force == pytest.approx([(1000 + w) / 2 * 0.8, -30.0, w * 1.2 / 2, -600 * 1.2 / 2], rel=1e-12)
    assert parts.gross == pytest.approx(np.abs(parts.force).sum())
    assert parts.of_sign(-1.0).start == pytest.approx([1.0, 2.2])


def test_a_load_of_one_sign_is_one_part():
    target = build_target(make_brief(loads=(table_load([LEFT, 1.0, 2.0, RIGHT], [1.0, 900.0, 40.0, 70.0]),)))
    parts = signed_parts(target.total, LEFT, RIGHT)
    assert (parts.start.tolist(), parts.end.tolist()) == ([LEFT], [RIGHT])
    assert parts.force[0] == pytest.approx(target.resultant)


def test_same_brief_same_target():
    first, second = (build_target(make_brief(loads=(shape_load(), point_loads(1.0, -30.0)))) for _ in range(2))
    assert first.findings == second.findings
    assert (first.moment_peak, first.shear_peak_x) == (second.moment_peak, second.shear_peak_x)
