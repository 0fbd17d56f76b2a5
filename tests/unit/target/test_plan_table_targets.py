"""Tables of V, M and T: couples at jumps and at the last row, both cuts, remarks on T."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import LEFT, RIGHT, array, internal_load
from plan_targets import KINKED, SWEPT, line, surface_target

from rigdesign.errors import BriefError
from rigdesign.target.closed import ClosedForm, Elliptical
from rigdesign.target.curve import Curve
from rigdesign.target.plan_load import ALONG_X

X = np.linspace(LEFT, RIGHT, 17)


def vmt(x, torsion, curve: Curve | None = None, **changes):
    """A table whose V and M are those of an ellipse, and any T."""
    curve = curve or ClosedForm(Elliptical(), LEFT, RIGHT, 5400.0)
    x = np.asarray(x, dtype=float)
    shear, moment = curve.force_beyond(x, "outboard"), curve.moment_beyond(x)
    return replace(internal_load(x, shear, moment), torsion=array(torsion), **changes)


def findings(target, severity):
    return [finding for finding in target.findings if finding.severity == severity]


def test_a_jump_of_torsion_is_a_couple():
    x = [LEFT, 1.4, 1.4, RIGHT]
    target = surface_target(vmt(x, [300.0, 180.0, -50.0, 0.0]), axis=line((LEFT, 0.1), (RIGHT, 0.1)))
    at = np.array([1.4])
    assert target.torsion(at, "inboard")[0] == pytest.approx(180.0, abs=1e-9)
    assert target.torsion(at, "outboard")[0] == pytest.approx(-50.0, abs=1e-9)
    assert target.torsion(np.array([0.8]), "outboard")[0] == pytest.approx(240.0, abs=1e-9)
    assert target.peaks["torsion"] == pytest.approx((300.0, LEFT), abs=1e-9)


@pytest.mark.parametrize("axis", [SWEPT, KINKED], ids=["straight", "kinked"])
def test_what_is_left_at_the_last_row_is_a_couple_there_and_said(axis):
    x = np.linspace(LEFT, 3.0, 8)
    target = surface_target(vmt(x, np.linspace(400.0, 90.0, 8)), axis=axis)
    assert target.torsion(np.array([3.0]), "inboard")[0] == pytest.approx(90.0, abs=1e-8)
    assert target.torsion(np.array([3.0]), "outboard")[0] == pytest.approx(0.0, abs=1e-8)
    (note,) = [one for one in findings(target, "note") if "torsion" in one.text and "last row" in one.text]
    assert note.object == "load 1"
    assert note.text.startswith("a torsion of 90.0 N·m is left at its last row at 3.000 m")
    assert "let the table run to the tip at 3.400 m" in note.remedy


def test_inboard_of_the_first_row_no_torque_is_added():
    """The load goes on twisting by the sweep of the axis, as a load there would."""
    x = np.linspace(1.0, RIGHT, 9)
    given = vmt(x, np.linspace(200.0, 0.0, 9), ClosedForm(Elliptical(), 1.0, RIGHT, 5400.0))
    target = surface_target(given, axis=SWEPT)
    slope = (SWEPT.y[1] - SWEPT.y[0]) / (SWEPT.x[1] - SWEPT.x[0])
    found = target.torsion(np.array([0.5]), "outboard")[0]
    assert found == pytest.approx(200.0 + 0.5 * slope * given.shear[0], abs=1e-8)


def test_cut_square_to_a_straight_axis():
    """V as it stands, M along the axis, T as it stands."""
    cosine = (RIGHT - LEFT) / np.hypot(RIGHT - LEFT, SWEPT.y[1] - SWEPT.y[0])
    plain = vmt(X, 0.04 * np.linspace(1.0, 0.0, 17) * 5400.0)
    given = replace(plain, moment=array(plain.moment / cosine))
    target = surface_target(given, axis=SWEPT, cut="square to axis")
    assert target.shear(X, "outboard") == pytest.approx(given.shear, abs=1e-8)
    assert target.moment(X, "outboard") == pytest.approx(given.moment, abs=1e-8)
    assert target.torsion(X[:-1], "outboard") == pytest.approx(given.torsion[:-1], abs=1e-8)
    # the same table, once the moments are for cuts square to x, is consistent with its shears
    assert not [one for one in target.findings if one.object == "load 1" and one.severity != "note"]


def test_a_kinked_axis_with_cuts_square_to_it_is_refused():
    with pytest.raises(BriefError, match="a straight axis") as caught:
        surface_target(vmt(X, np.zeros(17)), axis=KINKED, cut="square to axis")
    assert "piece.toml, [[load]] internal" in str(caught.value)


def test_torsion_in_another_unit():
    """N·mm for N·m: thousands of specimen widths of arm."""
    target = surface_target(vmt(X, 1000.0 * np.linspace(300.0, 0.0, 17)))
    table, resultant, whole = findings(target, "warning")
    assert (table.object, resultant.object, whole.object) == ("load 1", "resultant", "torsion")
    assert "a slip of unit" in table.text
    assert table.value == "300 kN·m"
    assert "slip of unit" in whole.text


@pytest.mark.parametrize("axis", [SWEPT, KINKED], ids=["straight", "kinked"])
def test_the_running_torque_is_the_slope_of_the_torque_beyond(axis):
    target = surface_target(vmt(X, 0.04 * np.linspace(1.0, 0.0, 17) ** 2 * 5400.0), axis=axis)
    turning, step = target.total_plan.along(ALONG_X).turning, 1e-6
    x = np.array([0.47, 1.13, 2.21, 3.09])
    slope = (turning.force_beyond(x - step, "outboard") - turning.force_beyond(x + step, "outboard")) / (2.0 * step)
    assert turning.running(x, "outboard") == pytest.approx(slope, rel=1e-6)  # of the differences


def test_a_table_without_torsion_lies_on_the_axis():
    given = replace(vmt(X, []), torsion=array([]))
    target = surface_target(given, axis=line((LEFT, 0.1), (RIGHT, 0.1)))
    assert target.torsion_peak == pytest.approx(0.0, abs=1e-9)
