"""What a brief becomes: every key, every default, every table."""

from __future__ import annotations

import dataclasses
import math
from pathlib import Path

import numpy as np
import pytest

from rigdesign.brief import brief_from_source, read_brief
from rigdesign.brief.model import (
    BandRule,
    Brief,
    InertiaLoad,
    InternalLoad,
    JackRules,
    LeverRules,
    PointLoads,
    Region,
    ShapeLoad,
    Specimen,
    TableLoad,
)

CANTILEVER = 'support = "cantilever"\nroot = "0.2 m"\ntip = "3.4 m"'
TWO_SUPPORTS = 'support = "two supports"\nends = ["0 m", "236 in"]\nsupports = "0.4, 5.6 m"\ngravity = "with"'
ELLIPTICAL = 'shape = "elliptical"\ntotal = "5.4 kN"'


def test_a_short_brief_gets_every_default(read) -> None:
    brief = read()
    assert brief.title == "Test foil"
    assert brief.specimen == Specimen("cantilever", 0.2, 3.4, (), None, -1)
    assert brief.peak == 1.0
    pads = brief.pads
    assert (pads.count, pads.places, pads.stations.size) == (6, "free", 0)
    assert (pads.length, pads.width, pads.gap, pads.keep_out) == (0.0, None, 0.0, ())
    assert (pads.largest_force, pads.least_force, pads.largest_pressure) == (math.inf, 0.0, math.inf)
    assert (pads.action, pads.aim, pads.ease) == ("pull", "closest", 0.02)
    assert brief.levers == LeverRules(0.001, 5.0, 0.0, math.inf, None, None)
    assert brief.jack == JackRules(None, None)
    assert brief.acceptance.defaulted
    assert brief.acceptance.regions == ()
    assert brief.acceptance.rules == tuple(BandRule("moment", s, 0.02, False, "peak") for s in ("under", "over"))


def test_an_untitled_brief_takes_the_name_of_its_file(read) -> None:
    assert read(('title = "Test foil"\n', "")).title == "foil"


def test_every_key_is_read(read) -> None:
    brief = read(
        ("", '[test]\npeak = "150 %"'),
        (
            "count = 6",
            'count = "fewest"\nlength = "120 mm"\nwidth = "8 in"\ngap = "40 mm"\nlargest_force = "900 N"\n'
            'least_force = "60 N"\nlargest_pressure = "60 kPa"\nkeep_out = [["2 m", "2.5 m"], ["1.40 m", "1.52 m"]]\n'
            'action = "push"\naim = "even"\nease = "3 %"',
        ),
        (
            "",
            '[levers]\ndrill_step = "25 mm"\nratio_limit = 4\nshortest_arm = "60 mm"\nlongest = "1.5 m"\ntiers = 5\n'
            'grouping = [[1, 2], [3, [4, 5]]]\n[jack]\nstep = "50 mm"',
        ),
    )
    pads = brief.pads
    assert brief.peak == 1.5
    assert (pads.count, pads.length, pads.width, pads.gap) == ("fewest", 0.12, 0.2032, 0.04)
    assert (pads.largest_force, pads.least_force, pads.largest_pressure) == (900.0, 60.0, 60e3)
    assert pads.keep_out == ((1.4, 1.52), (2.0, 2.5))
    assert (pads.action, pads.aim, pads.ease) == ("push", "even", 0.03)
    assert brief.levers == LeverRules(0.025, 4.0, 0.06, 1.5, 5, ((1, 2), (3, (4, 5))))
    assert brief.jack == JackRules(None, 0.05)


def test_two_supports(read) -> None:
    specimen = read((CANTILEVER, TWO_SUPPORTS)).specimen
    assert specimen == Specimen("two supports", 0.0, 5.9944, (0.4, 5.6), None, 1)


def test_the_jack_can_be_given_a_place(read) -> None:
    assert read(("", '[jack]\nat = "1.36 m"')).jack == JackRules(1.36, None)


def test_shapes(read) -> None:
    brief = read(
        (
            ELLIPTICAL,
            'shape = "triangular"\ntotal = "-5.4 kN"\ngreatest = "tip"\nfrom = "0.5 m"\nto = "3 m"\ntimes = 1.5',
        ),
        ("", '[[load]]\nshape = "linear"\nstart = "2 kN/m"\nend = "-500 N/m"'),
        ("", '[[load]]\nshape = "power"\ntotal = "1 kN"\nexponent = 2'),
        ("", '[[load]]\nshape = "schrenk"\ntotal = "1 kip"\nchord = "chord.csv"'),
        chord="chord [mm],x [m]\n400,0.2\n250,3.4\n",
    )
    first, linear, power, schrenk = brief.loads
    assert isinstance(first, ShapeLoad)
    assert (first.shape, first.total, first.greatest, first.times) == ("triangular", -5400.0, "tip", 1.5)
    assert (first.start_x, first.end_x, first.where) == (0.5, 3.0, "foil.toml, line 8, [[load]] 1")
    assert isinstance(linear, ShapeLoad)
    assert (linear.total, linear.start, linear.end) == (None, 2000.0, -500.0)
    assert (linear.start_x, linear.end_x) == (0.2, 3.4)
    assert isinstance(power, ShapeLoad)
    assert power.exponent == 2.0
    assert isinstance(schrenk, ShapeLoad)
    assert schrenk.chord_x.tolist() == [0.2, 3.4]
    assert schrenk.chord.tolist() == [0.4, 0.25]


def test_weight_and_inertia(read) -> None:
    brief = read(
        (CANTILEVER, CANTILEVER + '\nweight = "mass.csv"\npoint_masses = "engine.csv"'),
        ("", "[[load]]\ninertia = -3.8\ntimes = 2"),
        mass="x [m],mass [kg/m],note\n0.2,12,\n1.5,8.5,spar ends\n1.5,6,\n3.4,2,\n",
        engine="x [m],mass [lb]\n1,20\n",
    )
    weight = brief.specimen.weight
    assert weight is not None
    assert weight.x.tolist() == [0.2, 1.5, 1.5, 3.4]
    assert weight.mass.tolist() == [12, 8.5, 6, 2]
    assert weight.point_x.tolist() == [1.0]
    assert weight.point_mass.tolist() == [9.0718474]
    assert brief.loads[1] == InertiaLoad(-3.8, 2.0, "foil.toml, line 16, [[load]] 2")


def test_a_running_load_table(read) -> None:
    load = read(
        (ELLIPTICAL, 'table = "net.csv"'), net="load [lbf/in],x [in]\r\n12,10\r\n\r\n8.5,60\r\n6,60\r\n0,133\r\n"
    ).loads[0]
    assert isinstance(load, TableLoad)
    assert load.x.tolist() == [0.254, 1.524, 1.524, 3.3782]
    # one rounding more in the expected value
    np.testing.assert_allclose(load.load, np.array([12, 8.5, 6, 0]) * 4.4482216152605 / 0.0254, rtol=1e-15)
    assert load.where == "foil.toml, line 8, [[load]] 1, net.csv"


def test_tables_and_points_of_force(read) -> None:
    brief = read((ELLIPTICAL, 'forces = "panel.csv"'), ("", '[[load]]\npoint = "-350 N"\nat = "1.1 m"'),
                 panel="\ufeffx [mm],force [N]\n500,12\n3400,-8.5\n")  # fmt: skip
    table, point = brief.loads
    assert isinstance(table, PointLoads)
    assert isinstance(point, PointLoads)
    assert (table.x.tolist(), table.force.tolist()) == ([0.5, 3.4], [12.0, -8.5])
    assert (point.x.tolist(), point.force.tolist()) == ([1.1], [-350.0])


INTERNAL = (ELLIPTICAL, 'internal = "office.csv"\nreverse = ["moment"]')
OFFICE = "x [in],shear [lbf],moment [in*lbf]\n10,300,-9000.5\n40,120.5,-1.2e3\n40,100,-1200\n130,0,0\n"


def test_a_table_of_shear_and_moment(read) -> None:
    load = read(INTERNAL, office=OFFICE).loads[0]
    assert isinstance(load, InternalLoad)
    assert load.x.tolist() == [0.254, 1.016, 1.016, 3.302]
    np.testing.assert_allclose(load.shear, np.array([300, 120.5, 100, 0]) * 4.4482216152605, rtol=1e-15)
    np.testing.assert_allclose(load.moment, np.array([9000.5, 1200, 1200, 0]) * 0.1129848290276167, rtol=1e-15)
    # the columns show tenths at their finest
    assert load.shear_digit == pytest.approx(0.44482216152605, rel=1e-12)
    assert load.moment_digit == pytest.approx(0.01129848290276167, rel=1e-12)


def test_stations_from_the_tip_are_turned_round_with_their_rows(read) -> None:
    office = "x [in],shear [lbf],moment [in*lbf]\n0,0,0\n40,100,1200\n40,120.5,1200\n120,300,9000\n"
    load = read((ELLIPTICAL, 'internal = "office.csv"\nstations_from = "tip"'), office=office).loads[0]
    assert isinstance(load, InternalLoad)
    np.testing.assert_allclose(load.x, [3.4 - 3.048, 3.4 - 1.016, 3.4 - 1.016, 3.4], rtol=1e-15)
    # signs as given; the jump's outboard row came first from the tip, so its inboard row is first now
    np.testing.assert_allclose(load.shear / 4.4482216152605, [300, 120.5, 100, 0], rtol=1e-15)
    assert load.moment[0] > load.moment[-1] == 0


def test_whole_numbers_are_rounded_to_ones_and_powers_of_ten_to_their_last_digit(read) -> None:
    office = "x [m],shear [N],moment [N*m],torsion [N*m]\n0.2,1.2e3,300,0\n3.4,1E2,15,0\n"
    load = read(INTERNAL, office=office).loads[0]
    assert isinstance(load, InternalLoad)
    assert (load.shear_digit, load.moment_digit) == (100.0, 1.0)


def test_stations_on_the_end_are_on_the_specimen_in_any_unit(read) -> None:
    brief = read(
        ('"3.4 m"', '"133.7 in"'), (ELLIPTICAL, 'forces = "panel.csv"'), panel="x [mm],force [N]\n500,3\n3395.98,8\n"
    )
    assert brief.loads[0].x[-1] == brief.specimen.right


def test_a_station_off_the_end_by_its_printed_rounding_alone_is_on_the_end(read) -> None:
    # 3.2 m are 125.984 in: 125.98 in and 126.0 in are that, printed with two decimals and with one
    office = "x [in],shear [lbf],moment [in*lbf]\n0,0,0\n40,100,1200\n126.0,300,9000\n"
    load = read((ELLIPTICAL, 'internal = "office.csv"\nstations_from = "tip"'), office=office).loads[0]
    assert load.x[0] == 0.2


def test_fixed_pads_count_their_stations(read) -> None:
    pads = read(("count = 6", 'places = "fixed"\nstations = "0.30, 0.61, 0.95 m"')).pads
    assert pads.count == 3
    assert pads.stations.tolist() == [0.3, 0.61, 0.95]


def test_hard_points_come_from_a_table(read) -> None:
    pads = read(
        ("count = 6", 'count = 2\nplaces = "hard points"\ntable = "ribs.csv"'), ribs="x [mm]\n300\n 610 \n950\n"
    ).pads
    assert (pads.count, pads.stations.tolist()) == (2, [0.3, 0.61, 0.95])


def test_bands_of_sides_regions_and_quantities(read) -> None:
    acceptance = read(
        (
            "",
            '[acceptance]\nmoment = "2 %"\nmoment_over = "50 N*m"\nshear_under = "12 %"\nof = "local"\n'
            '[[acceptance.region]]\nfrom = "0.3 m"\nto = "1.4 m"\nmoment_under = "0 %"\nof = "peak"\n'
            '[[acceptance.region]]\nfrom = "1.4 m"\nto = "2 m"\nshear = "3 %"',
        )
    ).acceptance
    assert not acceptance.defaulted
    assert acceptance.rules == (
        BandRule("moment", "under", 0.02, False, "local"),
        BandRule("moment", "over", 50.0, True, "local"),
        BandRule("shear", "under", 0.12, False, "local"),
    )
    assert acceptance.regions == (
        Region("region 1", 0.3, 1.4, (BandRule("moment", "under", 0.0, False, "peak"),)),
        Region("region 2", 1.4, 2.0, tuple(BandRule("shear", s, 0.03, False, "local") for s in ("under", "over"))),
    )


def test_the_kept_texts_make_the_same_brief_again(read, tmp_path: Path) -> None:
    brief = read(INTERNAL, ("count = 6", 'count = 2\nplaces = "hard points"\ntable = "./ribs.csv"'),
                 office=OFFICE, ribs="x [m]\n0.3\n0.6\n0.9\n")  # fmt: skip
    assert brief.source.brief_name == "foil.toml"
    assert list(brief.source.texts) == ["foil.toml", "office.csv", "./ribs.csv"]
    assert brief.source.texts["office.csv"] == OFFICE
    for file in tmp_path.iterdir():
        file.unlink()
    assert same(brief_from_source(brief.source), brief)


def same(one: object, other: object) -> bool:
    """Whether two parts of a brief are equal, arrays included."""
    if isinstance(one, np.ndarray):
        return np.array_equal(one, other)
    if dataclasses.is_dataclass(one):
        return type(one) is type(other) and all(
            same(getattr(one, field.name), getattr(other, field.name)) for field in dataclasses.fields(one)
        )
    if isinstance(one, tuple):
        return len(one) == len(other) and all(map(same, one, other))
    return one == other


def test_arrays_are_read_only(read) -> None:
    brief: Brief = read(INTERNAL, office=OFFICE)
    for array in (brief.loads[0].x, brief.loads[0].shear, brief.loads[0].moment, brief.pads.stations):
        assert not array.flags.writeable


def test_a_long_table_is_read_like_a_short_one(read, tmp_path: Path) -> None:
    x = np.linspace(0.2, 3.4, 20_001)
    load = 900.0 * np.cos(x)
    rows = "\n".join(f"{a:.6f},{b:.3f}" for a, b in zip(x, load, strict=True))
    brief = read((ELLIPTICAL, 'table = "net.csv"'), net="x [m],load [N/m]\n" + rows)
    again = read((ELLIPTICAL, 'table = "net.csv"'), net='"x [m]",load [N/m]\n' + rows)
    assert np.array_equal(brief.loads[0].load, again.loads[0].load)
    np.testing.assert_allclose(brief.loads[0].load, load, atol=5e-4)  # printed to 3 decimals


def test_a_path_may_be_a_string(read, tmp_path: Path) -> None:
    read()
    assert read_brief(str(tmp_path / "foil.toml")).title == "Test foil"


def test_what_lies_right_on_a_limit_is_accepted(read) -> None:
    brief = read(
        (CANTILEVER, CANTILEVER + '\nweight = "mass.csv"'),
        ("", '[levers]\nshortest_arm = "75 mm"\nlongest = "150 mm"\nratio_limit = 1'),
        mass="x [m],mass [kg/m]\n0.2,12\n3.4,0\n",
    )
    assert brief.specimen.weight is not None
    assert brief.specimen.weight.mass.tolist() == [12.0, 0.0]
    assert (brief.levers.longest, brief.levers.ratio_limit) == (0.15, 1.0)


def test_bands_may_be_given_for_the_whole_span_or_for_a_region_alone(read) -> None:
    whole = read(("", '[acceptance]\nshear = "5 %"')).acceptance
    assert [rule.quantity for rule in whole.rules] == ["shear", "shear"]
    assert whole.regions == ()
    stretch = read(("", '[[acceptance.region]]\nfrom = "1 m"\nto = "3 m"\nmoment_over = "5 %"')).acceptance
    assert stretch.rules == ()
    assert stretch.regions == (Region("region 1", 1.0, 3.0, (BandRule("moment", "over", 0.05, False, "peak"),)),)
    assert not stretch.defaulted
