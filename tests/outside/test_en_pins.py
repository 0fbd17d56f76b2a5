"""Pins, plates about pins, and buckling curves of EN 1993 against published values.

Sources
-------
EN 1993-1-8 (2005), Tables 3.9 and 3.10, Figure 3.11, as quoted in published copies; numbers worked from them apart.
A calculation sheet "Pin connection dimensioning as per Eurocode" (scribd document 406810866): pin of 16 mm, fyp 235,
fup 360 MPa: Wel 402.124 mm³, shear 35 kN a plane.
EN 1993-1-1 (2005), Table 6.1 (imperfection factors) and the buckling curves c and d as tabulated in handbooks (χ from
memory).
"""

from __future__ import annotations

import pytest
from rule_states import STEEL, make_hole, make_pin

from rigdesign.hardware.model import Material
from rigdesign.hardware.rules.common import round_modulus
from rigdesign.hardware.rules.en.bars import CURVE_D, reduction
from rigdesign.hardware.rules.en.pins import bearing, dishing, fracture, net_tension, pin_bending, pin_both, pin_shear
from rigdesign.hardware.rules.en.rods import CURVE_C

PIN = Material("a pin", (1.0,), (640e6,), (800e6,), 210e9, 7850.0, "EN 1993-1-8, Table 3.1, class 8.8")
STATE = make_pin(load=100e3, pin=0.030, material=PIN, inner=0.020, outer=0.010, gap=0.002)


def test_table_3_10_pin():
    """F 100 kN, a 10, b 20, c 2, d 30 mm; γM0 1.0, γM2 1.25; the factor on loads is in F already."""
    bending, shear, both = pin_bending(STATE, 1.0), pin_shear(STATE, 1.0), pin_both(STATE, 1.0)
    assert bending.value == pytest.approx(600.0, abs=1e-9)
    assert bending.limit == pytest.approx(2544.690, abs=5e-4)
    assert shear.value == pytest.approx(50e3)
    assert shear.limit / 1e3 == pytest.approx(271.434, abs=5e-4)
    assert {name: value for name, value, _ in both.working}["sum of squares"] == pytest.approx(0.0895269, abs=5e-8)
    assert both.utilisation == pytest.approx(0.0895269**0.5, abs=1e-7)


def test_table_3_10_bearing():
    """Fb,Rd = 1.5 t d fy/γM0 of the inner plate, 20 mm of fy 345 (over 16 mm): 310.5 kN."""
    assert bearing(make_hole(count=1, thickness=0.020, pin=0.030, hole=0.031), 1.0).limit / 1e3 == pytest.approx(310.5)


def test_a_published_sheet():
    """Wel and the shear resistance, to the figures printed (35 kN)."""
    pin = make_pin(load=5e3, pin=0.016, material=Material("S235", (1.0,), (235e6,), (360e6,), 210e9, 7850.0, ""))
    assert round_modulus(0.016) * 1e9 == pytest.approx(402.124, abs=5e-4)
    assert pin_shear(pin, 1.0).limit / 1e3 == pytest.approx(35, abs=0.5)


@pytest.mark.parametrize("load", [40e3, 90e3])
def test_table_3_9_type_a(load):
    """A plate of exactly the least a and c that Table 3.9 asks for is used to the full."""
    t, d0, fy = 0.010, 0.0255, 355e6
    a, c = load / (2 * t * fy) + 2 * d0 / 3, load / (2 * t * fy) + d0 / 3
    plate = make_hole(load=load, count=1, side=c, beyond=a)
    assert fracture(plate, 1.0).utilisation == pytest.approx(1.0, rel=1e-12)
    assert net_tension(plate, 1.0).utilisation == pytest.approx(1.0, rel=1e-12)


def test_table_3_9_thickness():
    """t ≥ 0.7 √(F γM0/fy): 72.449 kN for 10 mm of S355; two plates bear twice that."""
    assert dishing(make_hole(count=1, material=STEEL), 1.0).limit / 1e3 == pytest.approx(72.449, abs=5e-4)
    assert dishing(make_hole(count=2, material=STEEL), 1.5).limit / 1e3 == pytest.approx(144.898, abs=1e-3)


@pytest.mark.parametrize(
    ("slenderness", "curve", "chi"),
    [
        (0.5, CURVE_C, 0.8430),
        (1.0, CURVE_C, 0.5399),
        (2.0, CURVE_C, 0.1962),
        (0.5, CURVE_D, 0.7793),
        (1.0, CURVE_D, 0.4671),
        (2.0, CURVE_D, 0.1766),
    ],
)
def test_buckling_curves(slenderness, curve, chi):
    """To the four figures that tables print (from memory)."""
    assert reduction(slenderness, curve) == pytest.approx(chi, abs=5e-5)
