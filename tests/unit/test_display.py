"""Numbers as people see them."""

from __future__ import annotations

import pytest

from rigdesign.display import System, show


@pytest.mark.parametrize(
    ("value", "kind", "system", "text"),
    [
        (5400.0, "force", "SI", "5.40 kN"),
        (-5400.0, "force", "SI", "−5.40 kN"),
        (999.96, "force", "SI", "1.00 kN"),
        (999.4, "force", "SI", "999 N"),
        (0.35, "force", "SI", "0.350 N"),
        (2.5e6, "force", "SI", "2.50 MN"),
        (12345.6, "force", "SI", "12.3 kN"),
        (5400.0, "force", "us", "1214 lbf"),
        (54000.0, "force", "us", "12.1 kip"),
        (1.3581, "length", "SI", "1.358 m"),
        (12.3456, "length", "SI", "12.346 m"),
        (0.04, "length", "SI", "40.0 mm"),
        (1.3581, "length", "us", "53.47 in"),
        (1800.0, "running load", "SI", "1.80 kN/m"),
        (1800.0, "running load", "us", "10.3 lbf/in"),
        (7336.4, "moment", "SI", "7.34 kN·m"),
        (7336.4, "moment", "us", "64933 in·lbf"),
        (60e3, "pressure", "SI", "60.0 kPa"),
        (60e3, "pressure", "us", "8.70 psi"),
        (0.0213, "fraction", "SI", "2.13 %"),
        (12.0, "mass", "us", "26.5 lb"),
        (0.1, "angle", "SI", "5.73 deg"),
        (0.0, "force", "SI", "0 N"),
        (0.0, "length", "SI", "0 m"),
        (0.0, "force", "us", "0 lbf"),
        (-1e-12, "length", "SI", "−1.00e-09 mm"),
        (float("inf"), "force", "SI", "no limit"),
        (float("nan"), "force", "SI", "not a number"),
    ],
)
def test_shown(value: float, kind: str, system: System, text: str) -> None:
    assert show(value, kind, system) == text


def test_digits_and_unit_can_be_chosen() -> None:
    assert show(5412.34, "force", digits=5) == "5.4123 kN"
    assert show(0.04, "length", unit="m") == "0.040 m"
    assert show(0.0, "length", unit="mm") == "0 mm"
