"""The target in sentences: every number with its direction and place."""

from __future__ import annotations

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
from rigdesign.target.words import echo


def said(system="SI", **changes):
    return echo(build_target(make_brief(**changes)), system)


def test_a_cantilever():
    # centroid 4/(3π) of 3.2 m from the root, moment 5400 N · 1.358 m
    assert said(peak=1.5) == [
        "The target is 5.40 kN along +z, out of the loaded surface. It acts at 1.558 m, 1.358 m from the root.",
        "Its moment about the root at 0.200 m is 7.33 kN·m.",
        "The largest shear is 5.40 kN at 0.200 m, the largest bending moment 7.33 kN·m at 0.200 m.",
        "No weight is given: the pads bring the whole target, on top of whatever hangs there.",
        "The test goes up to 150 % of this load: 8.10 kN.",
        "Load 1: elliptical shape from 0.200 m to 3.400 m: 5.40 kN along +z at 1.558 m.",
    ]


def test_two_supports_and_a_load_downward():
    held = two_supports(LEFT, 0.6, 3.0, RIGHT)
    lines = said(specimen=held, loads=(shape_load("triangular", -3000.0),))
    # resultant a third of 3.2 m from the left end; reactions by moments about the supports
    assert lines[0] == (
        "The target is 3.00 kN along −z, onto the loaded surface. It acts at 1.267 m, 1.067 m from the left end."
    )
    assert lines[1] == "Its moment about the first support at 0.600 m is −2.00 kN·m."
    assert lines[2] == "The supports answer with 2.17 kN along +z at 0.600 m and 833 N along +z at 3.000 m."


def test_moment_carries_its_sign_between_supports():
    ends = two_supports(LEFT, LEFT, RIGHT, RIGHT)
    lines = said(specimen=ends, loads=(shape_load("uniform", -1000.0),))
    assert "the largest bending moment 400 N·m at 1.800 m" in lines[3]
    lines = said(specimen=ends, loads=(shape_load("uniform", 1000.0),))
    assert "the largest bending moment −400 N·m at 1.800 m" in lines[3]


def test_weight_and_what_the_pads_bring():
    weight = make_weight([LEFT, RIGHT], [10.0, 10.0], [3.0], [8.0])
    lines = said(specimen=make_specimen(weight=weight), loads=(shape_load(), inertia_load(-2.0)))
    # 40 kg: 392 N down; inertia −784.5 N; target 4615.5 N, pads 5007.7 N
    assert lines[3].startswith("The specimen weighs 40.0 kg, which brings 392 N along −z at 2.040 m by itself;")
    assert "the pads bring 5.01 kN along +z at" in lines[3]
    assert lines[-1] == "Load 2: inertia at −2 g of 40.0 kg: 785 N along −z at 2.040 m."


def test_every_load_in_one_line():
    loads = (
        shape_load("power", 300.0, exponent=1.5),
        shape_load("triangular", 300.0, greatest="tip", start_x=1.0),
        table_load([LEFT, 1.0, RIGHT], [90.0, 90.0, 90.0], times=1.5),
        internal_load([LEFT, RIGHT], [90.0, 0.0], [144.0, 0.0]),
        point_loads(1.1, 350.0),
        point_loads([1.1, 0.7, 2.0], [35.0, 35.0, 35.0]),
        point_loads([1.0, 2.0], [35.0, -35.0]),
    )
    lines = said(loads=loads)[-len(loads) :]
    assert lines == [
        "Load 1: power shape with exponent 1.5 from 0.200 m to 3.400 m: 300 N along +z at 1.114 m.",
        "Load 2: triangular, greatest at the tip, from 1.000 m to 3.400 m: 300 N along +z at 2.600 m.",
        "Load 3: a table of running load, 3 rows from 0.200 m to 3.400 m (times 1.5): 432 N along +z at 1.800 m.",
        "Load 4: a table of shear and moment, 2 rows from 0.200 m to 3.400 m: 90.0 N along +z at 1.800 m.",
        "Load 5: a point load: 350 N along +z at 1.100 m.",
        "Load 6: 3 point loads from 0.700 m to 2.000 m: 105 N along +z at 1.267 m.",
        "Load 7: 2 point loads from 1.000 m to 2.000 m: no force in sum.",
    ]


def test_stations_from_the_root_itself_are_said_once():
    ground = make_specimen(left=0.0, right=3.0)
    lines = said(specimen=ground, loads=(shape_load("uniform", 60.0, start_x=0.0, end_x=3.0),))
    assert lines[0].endswith("It acts 1.500 m from the root.")


def test_us_customary():
    lines = said("us")
    assert lines[0].startswith("The target is 1214 lbf along +z")
    assert "61.34 in, 53.47 in from the root" in lines[0]


def test_a_resultant_inboard_of_the_root():
    lines = said(loads=(table_load([LEFT, RIGHT], [1000.0, -900.0]),))
    assert lines[0].endswith("m inboard of the root.")
