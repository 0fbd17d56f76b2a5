"""Tables of shear and moment: round trips, jumps, couples, and every way in which a table contradicts itself."""

from __future__ import annotations

import numpy as np
import pytest
from factories import LEFT, RIGHT, internal_load, make_brief, make_specimen, point_loads, shape_load, table_load

from rigdesign.errors import BriefError
from rigdesign.target import build_target
from rigdesign.target.internal_table import internal_curve, jumps_of, stepped_curve, steps_of
from rigdesign.target.loads import load_curve
from rigdesign.target.sums import Combined
from rigdesign.target.table_remarks import table_remarks


def curve_of(*loads):
    parts = tuple(load_curve(load, make_specimen()) for load in loads)
    return Combined(parts, (1.0,) * len(parts))


def table_of(curve, x, shear_digit=0.0, moment_digit=0.0):
    """V and M of a curve at stations, two rows at each of its point loads, rounded to digits."""
    at = curve.points[0]
    x = np.sort(np.concatenate([x, at, at]))
    outboard = np.concatenate([[False], np.diff(x) == 0])
    shear = np.where(outboard, curve.force_beyond(x, "outboard"), curve.force_beyond(x, "inboard"))
    moment = curve.moment_beyond(x)
    if shear_digit:
        shear = np.round(shear / shear_digit) * shear_digit
    if moment_digit:
        moment = np.round(moment / moment_digit) * moment_digit
    return x, shear, moment


def remarks_of(x, shear, moment, digits=(0.0, 0.0)):
    load = internal_load(x, shear, moment, shear_digit=digits[0], moment_digit=digits[1])
    return table_remarks(load, "load 1", RIGHT)


STATIONS = np.array([LEFT, 0.5, 0.9, 1.1, 1.8, 2.3, 2.9, 3.2, RIGHT])
FINE = np.linspace(LEFT, RIGHT, 173)


def test_round_trip_of_straight_pieces_is_exact():
    """A running load straight between the rows, jumps at rows, point loads with two rows: the cubic is the truth."""
    pieces = table_load([LEFT, 0.9, 0.9, 2.3, RIGHT], [900.0, 400.0, 1500.0, 700.0, 50.0])
    truth = curve_of(pieces, point_loads([1.4, 2.9], [-350.0, 120.0]))
    load = internal_load(*table_of(truth, STATIONS))
    found = internal_curve(load)
    scale = truth.total
    assert found.force_beyond(FINE, "outboard") == pytest.approx(
        truth.force_beyond(FINE, "outboard"), abs=1e-12 * scale
    )
    assert found.force_beyond(FINE, "inboard") == pytest.approx(truth.force_beyond(FINE, "inboard"), abs=1e-12 * scale)
    assert found.moment_beyond(FINE) == pytest.approx(truth.moment_beyond(FINE), abs=1e-12 * scale)
    assert found.running(FINE, "outboard") == pytest.approx(truth.running(FINE, "outboard"), abs=1e-9 * scale)
    at, force = found.points
    real = np.abs(force) > 1e-9
    assert at[real].tolist() == [1.4, 2.9]
    assert force[real] == pytest.approx([-350.0, 120.0], rel=1e-12)
    assert table_remarks(load, "load 1", RIGHT) == []


def test_round_trip_of_a_curved_load():
    """Between rows a cubic through M: off by h⁴ w''/384 at most, and V by its slope, h³ w''/(72 √3) or less."""
    truth = curve_of(shape_load("sine", 4000.0))
    x = np.linspace(LEFT, RIGHT, 25)
    load = internal_load(*table_of(truth, x))
    found = internal_curve(load)
    h, span = x[1] - x[0], RIGHT - LEFT
    bend = 4000 * np.pi / (2 * span) * (np.pi / span) ** 2
    moment_off = np.abs(found.moment_beyond(FINE) - truth.moment_beyond(FINE)).max()
    shear_off = np.abs(found.force_beyond(FINE, "outboard") - truth.force_beyond(FINE, "outboard")).max()
    assert 0 < moment_off <= 1.02 * bend * h**4 / 384  # w'' is greatest in mid-step only to second order
    assert 0 < shear_off <= 1.02 * bend * h**3 / (72 * np.sqrt(3))
    assert found.force_beyond(x, "inboard") == pytest.approx(load.shear, abs=1e-10)
    assert found.moment_beyond(x) == pytest.approx(load.moment, abs=1e-9)


def test_rounded_tables_are_followed_as_they_stand():
    truth = curve_of(shape_load("elliptical"))
    x, shear, moment = table_of(truth, STATIONS, 10.0, 100.0)
    found = internal_curve(internal_load(x, shear, moment, shear_digit=10.0, moment_digit=100.0))
    assert found.force_beyond(x, "inboard") == pytest.approx(shear, abs=1e-9)
    assert found.moment_beyond(x) == pytest.approx(moment, abs=1e-9)


def test_ends_of_a_table():
    """Two rows at the first station, no load inboard of it, and a shear left at the last row."""
    load = internal_load([1.0, 1.0, 2.0, 3.0], [900.0, 700.0, 500.0, 200.0], [950.0, 950.0, 350.0, 0.0])
    found = internal_curve(load)
    assert found.points[0].tolist() == [1.0, 3.0]
    assert found.points[1].tolist() == [200.0, 200.0]
    assert found.force_beyond(np.array([0.3, 1.0]), "inboard").tolist() == [900.0, 900.0]
    assert found.running(np.array([0.3, 0.99]), "outboard").tolist() == [0.0, 0.0]
    assert found.moment_beyond(np.array([0.3]))[0] == pytest.approx(950 + 0.7 * 900)
    remark = table_remarks(load, "load 2", RIGHT)[0]
    assert (remark.severity, remark.object, remark.value) == ("note", "load 2", "200 N")
    assert "left at its last row at 3.000 m" in remark.text
    assert "tip at 3.400 m" in remark.remedy


def test_a_shear_of_one_digit_at_the_last_row_is_rounding():
    table = [1.0, 2.0, 3.0], [700.0, 300.0, 10.0], [660.0, 160.0, 0.0]
    assert len(remarks_of(*table, digits=(1.0, 10.0))) == 1
    assert remarks_of(*table, digits=(10.0, 10.0)) == []


def test_a_couple_is_left_out_and_named():
    truth = curve_of(shape_load("elliptical"))
    x, shear, moment = table_of(truth, STATIONS)
    moment = moment + 20.0
    found = internal_curve(internal_load(x, shear, moment))
    assert found.moment_beyond(x) == pytest.approx(moment - 20.0, abs=1e-9)
    for size, severity in ((20.0, "warning"), (200.0, "failure")):  # 0.3 % and 2.7 % of the greatest moment
        (remark,) = remarks_of(x, shear, moment - 20.0 + size)
        assert remark.severity == severity
        assert "is left at its last row at 3.400 m" in remark.text
        assert "greatest moment" in remark.value
    # within the rounding of the table it is none
    assert remarks_of(x, shear, moment, digits=(1.0, 25.0)) == []


def test_a_jump_of_the_moment_is_a_couple_too():
    x, shear, moment = table_of(curve_of(shape_load("elliptical"), point_loads(1.4, -300.0)), STATIONS)
    row = int(np.flatnonzero(np.diff(x) == 0)[0])
    moment[: row + 1] += 90.0
    (remark,) = remarks_of(x, shear, moment)
    assert "90.0 N·m is the jump between its two rows at 1.400 m" in remark.text
    assert jumps_of(internal_load(x, shear, moment))[2][0] == pytest.approx(90.0)


def test_a_table_cut_short_says_where_the_rest_acts():
    truth = curve_of(shape_load("elliptical"))
    x = np.linspace(LEFT, 2.9, 12)
    couple, left = remarks_of(*table_of(truth, x))
    beyond = truth.moment_beyond(x[-1:])[0] / truth.force_beyond(x[-1:], "outboard")[0]
    assert f"add a row at {2.9 + beyond:.3f} m" in couple.remedy
    assert left.severity == "note"
    # the remedy works: the same shear and no moment there
    x, shear, moment = table_of(truth, x)
    longer = remarks_of(np.append(x, 2.9 + beyond), np.append(shear, shear[-1]), np.append(moment, 0.0))
    assert [remark.severity for remark in longer] == ["note"]


@pytest.mark.parametrize("rows", [6, 13, 40])
@pytest.mark.parametrize("shape", ["elliptical", "uniform", "parabolic", "triangular", "sine"])
def test_sound_tables_pass(rows, shape):
    """Whatever the digits, no warning: rounding is granted, and at most its swings are noted."""
    truth = curve_of(shape_load(shape, -5400.0))
    x = np.linspace(LEFT, RIGHT, rows)
    assert remarks_of(*table_of(truth, x)) == []
    for digits in ((1.0, 1.0), (10.0, 100.0)):
        remarks = remarks_of(*table_of(truth, x, *digits), digits=digits)
        assert all(remark.severity == "note" and "rounding explains it" in remark.remedy for remark in remarks)


def test_a_wrong_row_is_named_with_station_and_size():
    x, shear, moment = table_of(curve_of(shape_load("elliptical")), np.linspace(LEFT, RIGHT, 21), 0.1, 0.1)
    moment[8] *= 1.04
    (remark,) = remarks_of(x, shear, moment, digits=(0.1, 0.1))
    assert remark.severity == "warning"
    assert "dM/dx and −V disagree over 2 of 20 steps between rows, most between" in remark.text
    assert f"{x[8]:.3f} m" in remark.text
    off = 0.04 / 1.04 * moment[8]
    assert float(remark.value.removesuffix(" N·m")) == pytest.approx(off, rel=0.02)  # 3 digits, and the curve's bend
    assert remark.remedy.startswith("check both rows")


def test_a_wrong_shear_is_one_finding():
    """Both steps at the row disagree with the moment; the swings that come of it are not told apart from it."""
    x, shear, moment = table_of(curve_of(shape_load("elliptical")), np.linspace(LEFT, RIGHT, 11), 0.1, 0.1)
    shear[3] *= 1.1
    (remark,) = remarks_of(x, shear, moment, digits=(0.1, 0.1))
    assert remark.severity == "warning"
    assert f"disagree between {x[2]:.3f} m and {x[3]:.3f} m" in remark.text


def test_an_envelope_of_two_cases_is_found():
    x = np.linspace(LEFT, RIGHT, 33)
    inboard = table_of(curve_of(shape_load("power", 9000.0, exponent=2.0)), x)
    outboard = table_of(curve_of(shape_load("sine", 5100.0)), x)
    shear, moment = np.maximum(inboard[1], outboard[1]), np.maximum(inboard[2], outboard[2])
    (remark,) = remarks_of(x, shear, moment)
    assert remark.severity == "warning"
    assert "envelope of several cases" in remark.text
    assert f"most between {x[0]:.3f} m and {x[1]:.3f} m" in remark.text
    assert "one case at a time" in remark.remedy
    # the same the other way up
    (turned,) = remarks_of(x, -shear, -moment)
    assert turned.text == remark.text
    # and either case alone is sound
    assert remarks_of(*inboard) == [] == remarks_of(*outboard)


def test_a_steep_load_on_few_rows_is_no_envelope():
    """The shear bends so much between rows that straight lines through it give too much, always the same way."""
    x = np.linspace(LEFT, RIGHT, 5)
    (remark,) = remarks_of(*table_of(curve_of(shape_load("power", 5400.0, exponent=8.0)), x))
    assert remark.severity == "note"
    assert "changes sign" in remark.text


def test_strips_lumped_off_their_middles_are_no_envelope():
    edges = np.linspace(LEFT, RIGHT, 17)
    strips = curve_of(table_load([LEFT, RIGHT], [2000.0, 600.0]))
    force = -np.diff(strips.force_beyond(edges, "inboard"))
    lumps = curve_of(point_loads(edges[:-1] + 0.42 * np.diff(edges), force))
    shear = lumps.force_beyond(edges, "inboard")
    assert remarks_of(edges, shear, lumps.moment_beyond(edges)) == []


X = np.linspace(LEFT, RIGHT, 15)
SOUND = table_of(curve_of(shape_load("elliptical")), X)


@pytest.mark.parametrize(
    ("table", "text", "value", "remedy"),
    [
        ((X, SOUND[1], 12 * SOUND[2]), "a slip of unit", "12 times", "units in the headings"),
        ((X, SOUND[1], SOUND[2] / 1.3558), "a slip of unit", "0.7376 times", "units in the headings"),
        ((X, SOUND[1], -SOUND[2]), "opposite signs", "-1 times", 'reverse = ["moment"]'),
        ((X, SOUND[1][::-1], SOUND[2][::-1]), "count from the tip", "-1 times", 'stations_from = "tip"'),
    ],
)
def test_slips_that_run_through_a_table(table, text, value, remedy):
    (remark,) = remarks_of(*table)
    assert remark.severity == "failure"
    assert text in remark.text
    assert remark.value.startswith(value)
    assert remedy in remark.remedy


@pytest.mark.parametrize("rows", [5, 6, 9])
@pytest.mark.parametrize("exponent", [3.0, 12.0])
def test_steep_loads_on_few_rows_are_no_slip(rows, exponent):
    truth = curve_of(shape_load("power", 5400.0, exponent=exponent))
    remarks = remarks_of(*table_of(truth, np.linspace(LEFT, RIGHT, rows)))
    assert not any(remark.severity == "failure" for remark in remarks)


def test_a_load_that_begins_between_rows_swings():
    truth = curve_of(shape_load("uniform", 5000.0, start_x=0.37, end_x=2.91))
    x = np.linspace(LEFT, RIGHT, 11)
    load = internal_load(*table_of(truth, x))
    (remark,) = table_remarks(load, "load 1", RIGHT)
    assert remark.severity == "note"
    assert "changes sign over 2 of 10 steps between rows, most between 2.760 m and 3.080 m" in remark.text
    least = internal_curve(load).running(np.linspace(2.76, 3.08, 999)[1:-1], "outboard").min()
    assert float(remark.value.removesuffix(" N/m").replace("−", "-")) == pytest.approx(least, rel=0.01)
    assert "more between them" in remark.remedy


def test_swings_of_rounding_are_no_change_of_sign():
    """A fine table with few digits: the curve's running load swings wildly, its rows' shears do not."""
    truth = curve_of(shape_load("elliptical"))
    x, shear, moment = table_of(truth, np.linspace(LEFT, RIGHT, 60), 10.0, 100.0)
    load = internal_load(x, shear, moment, shear_digit=10.0, moment_digit=100.0)
    assert internal_curve(load).running(FINE, "outboard").min() < -10_000
    assert stepped_curve(load).running(FINE, "outboard").min() >= -1e-9
    (remark,) = build_target(make_brief(loads=(load,))).findings
    assert "rounding explains it" in remark.remedy


def test_steps_skip_jumps():
    load = internal_load([0.0, 1.0, 1.0, 3.0], [9.0, 8.0, 5.0, 1.0], [20.0, 11.5, 11.5, 5.5])
    steps = steps_of(load)
    assert steps.start.tolist() == [0.0, 1.0]
    assert steps.shear_in.tolist() == [9.0, 5.0]
    assert steps.shear_out.tolist() == [8.0, 1.0]
    assert steps.drop.tolist() == [8.5, 6.0]
    assert steps.defect.tolist() == [0.0, 0.0]


def test_one_station_is_no_table():
    with pytest.raises(BriefError, match="two stations") as caught:
        build_target(make_brief(loads=(internal_load([1.0, 1.0], [50.0, 0.0], [0.0, 0.0]),)))
    assert caught.value.where == "piece.toml, [[load]] internal"
