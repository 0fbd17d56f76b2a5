"""Quantities with their unit, one by one and in lists, and the headings of columns."""

from __future__ import annotations

import numpy as np
import pytest

from rigdesign.errors import InputError
from rigdesign.units import KINDS, column_fraction, exact_factor, quantities, quantity, scaled


@pytest.mark.parametrize(
    ("text", "kind", "value"),
    [
        ("5.4 kN", "force", 5400.0),
        ("5.4kN", "force", 5400.0),
        ("  -.5e1 N ", "force", -5.0),
        ("−350 N", "force", -350.0),
        ("1.1 mN", "force", 0.0011),
        ("1.1 MN", "force", 1.1e6),
        ("300 mm", "length", 0.3),
        ("0.3 m", "length", 0.3),
        ("700 mm", "length", 0.7),
        ("48 in", "length", 1.2192),
        ("7 N*m", "moment", 7.0),
        ("7 N·m", "moment", 7.0),
        ("7 Nm", "moment", 7.0),
        ("7 kN.m", "moment", 7000.0),
        ("10 ft-lbf", "moment", 13.558179483314004),
        ("10 lbf ft", "moment", 13.558179483314004),
        ("2 kN/m", "running load", 2000.0),
        ("2 N/mm", "running load", 2000.0),
        ("3 N/mm²", "pressure", 3e6),
        ("3 kN/m2", "pressure", 3000.0),
        ("3 kN/m^2", "pressure", 3000.0),
        ("180 °", "angle", np.pi),
        ("2 %", "fraction", 0.02),
        ("150%", "fraction", 1.5),
        ("4 lb/ft", "mass per length", 5.952655774278215),
        ("3 s", "time", 3.0),
    ],
)
def test_a_quantity_is_read(text: str, kind: str, value: float) -> None:
    assert quantity(text, kind) == value


@pytest.mark.parametrize(
    ("value", "kind", "parts"),
    [
        (3, "force", ["a force is due with its unit", "bare number: 3", 'unit of force, such as "5.4 kN"']),
        ("-3.5", "length", ["a length is due with its unit", "-3.5", 'such as "1.2 m"']),
        (0.02, "fraction", ["a percentage is due with its per cent sign", "0.02", 'such as "2 %"']),
        ("0.02", "fraction", ["a percentage is due", 'such as "2 %"']),
        ("", "force", ["a force with its unit is due, and this is empty"]),
        (True, "force", ["a force with its unit is due: true"]),
        ([1], "force", ["a force with its unit is due: [1]"]),
        ("nan N", "force", ["one number and its unit", "nan N"]),
        ("inf N", "force", ["one number and its unit", "inf N"]),
        ("1e400 N", "force", ["too large", "1e400 N", "up to 1e+15"]),
        ("1e9999999999 N", "force", ["too large"]),
        ("2+3 N", "force", ["nothing is calculated", "2+3 N"]),
        ("2*3 N", "force", ["nothing is calculated"]),
        ("1/2 in", "length", ["nothing is calculated"]),
        ("5 ft 3 in", "length", ["one number and one unit", "5 ft 3 in"]),
        ("0x10 N", "force", ["one number and one unit"]),
        ("1_000 N", "force", ["one number and one unit"]),
        ("0,3 m", "length", ["a decimal point and no commas", "0,3 m"]),
        ("3 lb", "force", ["lb is a unit of mass", "lb is always a mass", "write lbf"]),
        ("3 kg", "force", ["kg is a unit of mass", "write kgf"]),
        ("3 lbf", "mass", ["lbf is a unit of force", "write lb"]),
        ("3 lb/ft", "running load", ["mass per length", "write lbf/ft"]),
        ("3 ft-lb", "moment", ["another kind of unit", "write ft-lbf"]),
        ("3 N", "length", ["a length is due, and N is a unit of force", '"3 N"']),
        ("3 m²", "length", ["another kind of unit"]),
        ("2 %", "force", ["a force is due, and the unit is %"]),
        ("3 N", "fraction", ["a percentage is due, and the unit is N"]),
        ("3 KN", "force", ['"KN" is no known unit', "did you mean kN?"]),
        ("3 mpa", "pressure", ["did you mean MPa?"]),
        ("3 inches", "length", ['"inches" is no known unit', "write in"]),
        ("3 lbs", "force", ["write lb (mass) or lbf (force)"]),
        ("12'", "length", ["write ft"]),
        ("3 furlongs", "length", ["the known units are bar, cm, deg"]),
        ("3 N/m/s", "force", ["one division and one unit below it", "3 N/m/s"]),
        ("5 N/m*s", "force", ["one division and one unit below it"]),
        ("5 N*", "force", ["this is no unit"]),
    ],
)
def test_what_is_no_quantity_is_refused_with_a_reason(value: object, kind: str, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        quantity(value, kind, "foil.toml, line 3, [pads] gap")
    message = str(caught.value)
    assert message.startswith("foil.toml, line 3, [pads] gap: ")
    for part in parts:
        assert part in message


def test_every_kind_reads_its_own_example() -> None:
    for kind in KINDS.values():
        assert quantity(kind.example, kind.name) > 0


@pytest.mark.parametrize(
    ("value", "metres"),
    [
        ("0.30, 0.61, 0.95 m", [0.3, 0.61, 0.95]),
        ("12 in, 0.5 m", [0.3048, 0.5]),
        (["300 mm", "2 ft"], [0.3, 0.6096]),
        ("3.1 m", [3.1]),
    ],
)
def test_several_quantities(value: object, metres: list[float]) -> None:
    assert quantities(value, "length").tolist() == metres


@pytest.mark.parametrize(
    ("value", "part"),
    [
        ([], "at least one length is due"),
        ("", "at least one length is due"),
        ([0.3, 0.6], "bare number: 0.3"),
        ("0.3, 0.6", "bare number: 0.3"),
        (["0.3", "0.6 m"], "bare number: 0.3"),
        ("0.3 m, 0.5, 0.9 m", "bare number: 0.5"),
        ("0.3,, 0.9 m", "this is empty"),
        ("0.3, nan, 0.9 m", 'a length is one number and its unit: " nan"'),
        (5, "bare number: 5"),
    ],
)
def test_lists_are_refused_with_a_reason(value: object, part: str) -> None:
    with pytest.raises(InputError, match="length") as caught:
        quantities(value, "length")
    assert part in str(caught.value)


def test_columns_scale_like_quantities() -> None:
    # 126 in and 700 mm are the kind of value where a rounded factor goes wrong by one in the last place
    for number, unit in ((126.0, "in"), (700.0, "mm"), (3.0, "mm"), (1430.0, "mm")):
        column = scaled(np.array([number]), exact_factor(unit, "length"))
        assert column[0] == quantity(f"{number} {unit}", "length")


def test_a_heading_without_unit_is_refused() -> None:
    with pytest.raises(InputError, match=r'the heading carries no unit: "x" .*such as "x \[m\]"'):
        column_fraction("x", "length")
    with pytest.raises(InputError, match=r'a length is due, and N is a unit of force: "x \[N\]"'):
        column_fraction("x [N]", "length")


def test_advice_on_pounds_is_given_only_where_it_helps() -> None:
    with pytest.raises(InputError) as caught:
        quantity("3 lb", "length")
    assert "lb is a unit of mass" in str(caught.value)
    assert str(caught.value).endswith('(accepted: a number with a unit of length, such as "1.2 m")')


def test_an_unknown_unit_is_answered_with_the_kind_that_is_due() -> None:
    with pytest.raises(InputError, match=r'"KN" is no known unit: "3 KN" \(accepted: a number with a unit of force'):
        quantity("3 KN", "force")
