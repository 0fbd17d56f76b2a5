"""One unit for a whole column."""

import pytest

from rigdesign.report.scales import arm_scale, scale


@pytest.mark.parametrize(
    ("kind", "largest", "system", "unit", "shown", "value"),
    [
        ("force", 987.6, "SI", "N", "123.5", 123.45),
        ("force", 9_600.0, "SI", "N", "−812", -812.4),
        ("force", 36_700.0, "SI", "kN", "−0.812", -812.4),
        ("force", 36_700.0, "us", "lbf", "183", 812.4),
        ("moment", 11_840.0, "SI", "kN·m", "11.840", 11_840.0),
        ("moment", 8.9, "SI", "N·m", "8.900", 8.9),
        ("length", 3.2, "SI", "m", "1.358", 1.3581),
        ("length", 3.2, "us", "in", "53.47", 1.3581),
        ("pressure", 60_000.0, "SI", "kPa", "41.231", 41_231.0),
        ("pressure", 4_100.0, "us", "psi", "0.4351", 3_000.0),
        ("running load", 2_000.0, "us", "lbf/in", "11.42", 2_000.0),
    ],
)
def test_unit_and_digits_follow_the_largest_value(kind, largest, system, unit, shown, value):
    chosen = scale(kind, largest, system)
    assert (chosen.unit, chosen.show(value)) == (unit, shown)


def test_a_rounded_zero_has_no_sign():
    assert scale("force", 500.0).show(-1e-9) == "0.0"


def test_a_column_of_zeros_has_a_unit():
    assert scale("force", 0.0).unit == "N"


@pytest.mark.parametrize(
    ("step", "system", "unit", "shown"),
    [
        (0.001, "SI", "mm", "117"),
        (0.0005, "SI", "mm", "117.5"),
        (0.05 * 0.0254, "SI", "mm", "117.48"),
        (0.05 * 0.0254, "us", "in", "4.63"),
        (0.125 * 0.0254, "us", "in", "4.625"),
        (0.025, "SI", "mm", "117"),
    ],
)
def test_arms_show_the_decimals_of_the_drill_step(step, system, unit, shown):
    chosen = arm_scale(step, system)
    assert (chosen.unit, chosen.show(0.11748)) == (unit, shown)
