"""One wing described four ways has one V, one M and one T."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from four_ways import AXES, SPAN, by_line, by_pressure, by_table, by_torque, loaded, table


@pytest.mark.parametrize("axis", AXES.values(), ids=AXES.keys())
@pytest.mark.parametrize("described", [by_pressure, by_table, by_torque])
def test_the_same_shear_moment_and_torsion(described, axis):
    reference, other = by_line(axis), described(axis)
    x = np.linspace(0.0, SPAN, 157)
    for quantity in ("shear", "moment", "torsion"):
        for side in ("inboard", "outboard"):
            error = other.value(quantity, x, side) - reference.value(quantity, x, side)
            assert np.abs(error).max() <= 1e-3 * reference.peaks[quantity].value
    assert reference.torsion_peak > 50.0
    assert other.torsion_peak == pytest.approx(reference.torsion_peak, rel=1e-3)


@pytest.mark.parametrize("axis", AXES.values(), ids=AXES.keys())
def test_the_table_itself_is_met_at_its_rows(axis):
    """The load on a swept axis twists by itself; the torque is what is left, so that T is the table's to rounding."""
    given = table(axis, 21)
    target = loaded(replace(given, times=-2.0), axis=axis)
    for side in ("inboard", "outboard"):
        assert target.shear(given.x, side)[1:-1] == pytest.approx(-2.0 * given.shear[1:-1], abs=1e-8)
        assert target.moment(given.x, side) == pytest.approx(-2.0 * given.moment, abs=1e-8)
        assert target.torsion(given.x, side)[1:-1] == pytest.approx(-2.0 * given.torsion[1:-1], abs=1e-8)
    # straight between the rows
    middle = (given.x[1:] + given.x[:-1]) / 2.0
    expected = -(given.torsion[1:] + given.torsion[:-1])
    assert target.torsion(middle, "outboard") == pytest.approx(expected, abs=1e-8)
