"""Unit factors against their definitions.

International yard and pound agreement (1959): 1 yd = 0.9144 m, 1 lb = 0.45359237 kg; standard acceleration of free
fall 9.80665 m/s² (3rd General Conference on Weights and Measures, 1901).  All are exact by definition; quoted from
memory.  The derived decimals below are those products and quotients, rounded once to a double.
"""

from __future__ import annotations

from fractions import Fraction

import pytest

from rigdesign.unit_factors import unit_factor
from rigdesign.units import column_fraction, quantity

POUND, INCH, GRAVITY = Fraction("0.45359237"), Fraction("0.9144") / 36, Fraction("9.80665")
LBF = POUND * GRAVITY


@pytest.mark.parametrize(
    ("unit", "decimal", "definition"),
    [
        ("in", 0.0254, INCH),
        ("ft", 0.3048, 12 * INCH),
        ("lb", 0.45359237, POUND),
        ("lbf", 4.4482216152605, LBF),
        ("kgf", 9.80665, GRAVITY),
        ("kip", 4448.2216152605, 1000 * LBF),
        ("psi", 6894.757293168362, LBF / INCH**2),
        ("ksi", 6894757.293168361, 1000 * LBF / INCH**2),
        ("psf", 47.880258980335846, LBF / (12 * INCH) ** 2),
        ("lbf/in", 175.1268352464764, LBF / INCH),
        ("in*lbf", 0.1129848290276167, INCH * LBF),
        ("lbf*ft", 1.3558179483314004, 12 * INCH * LBF),
        ("lbf*in^2", 0.002869814657301464, LBF * INCH**2),
        ("slug", 14.593902937206364, LBF / (12 * INCH)),
        ("lb/ft", 1.4881639435695537, POUND / (12 * INCH)),
        ("bar", 1e5, Fraction(100_000)),
        ("t", 1000.0, Fraction(1000)),
        ("km", 1000.0, Fraction(1000)),
        ("cm", 0.01, Fraction(1, 100)),
    ],
)
def test_factor_is_exact(unit: str, decimal: float, definition: Fraction) -> None:
    assert unit_factor(unit)[0] == definition
    assert float(unit_factor(unit)[0]) == decimal


def test_quantities_and_headings_use_the_same_factors() -> None:
    assert quantity("1 psi", "pressure") == 6894.757293168362
    assert float(column_fraction("moment [in*lbf]", "moment")) == 0.1129848290276167


def test_a_degree_is_the_nearest_double_to_pi_over_180() -> None:
    # the only factor that cannot be exact; π/180 to 20 figures, from memory
    assert quantity("1 deg", "angle") == 0.017453292519943295
