"""BTH-1, check by check, against numbers worked in mm, N and MPa on paper's own terms."""

from __future__ import annotations

from math import cos, inf, pi, radians, sin, sqrt

import pytest
from rule_states import (
    make_bar,
    make_channel,
    make_flat,
    make_hole,
    make_hollow,
    make_pin,
    make_plate,
    make_rod,
    make_strap,
)

from rigdesign.hardware.rules.bth import Bth, bars, pins, rods
from rigdesign.hardware.rules.common import wall

ND = 2.0
FY, FU, E = 355.0, 470.0, 210e3


def told(result, value, limit, scale=1e-6):
    """Value and limit, those of the paper in MPa (or in N with a scale of 1)."""
    assert result.value * scale == pytest.approx(value, rel=1e-9)
    assert result.limit * scale == pytest.approx(limit, rel=1e-9)


def test_bending_of_twin_flats():
    inertia = 2 * 10 * (80**3 - 25.5**3) / 12
    told(bars.bending(make_bar(), ND), 8000 * 240 * 40 / inertia, 1.25 * FY / ND)


def test_bending_of_shapes():
    """1.10 where the walls are compact; two webs of the hollow section lose the hole."""
    channel, hollow = make_channel(), make_hollow()
    lost = 2 * 7 * 25.5**3 / 12
    told(
        bars.bending(make_bar(section=channel), ND),
        1.92e6 * 60 / (2e12 * channel.inertia - lost),
        1.10 * FY / ND,
    )
    lost = 2 * 5 * 25.5**3 / 12
    told(
        bars.bending(make_bar(section=hollow, count=1), ND),
        1.92e6 * 60 / (1e12 * hollow.inertia - lost),
        1.10 * FY / ND,
    )


@pytest.mark.parametrize(
    ("section", "factor"),
    [
        (make_flat(0.3, 0.005), 1.25),
        (make_channel(0.120, 0.055, 0.007, 0.009), 1.10),  # flange 6.1
        (make_channel(0.120, 0.085, 0.007, 0.009), 1.0),  # 9.44
        (make_hollow(0.120, 0.100, 0.0035), 1.10),  # flange 26.6
        (make_hollow(0.120, 0.110, 0.0035), 1.0),  # 29.4
    ],
)
def test_compactness(section, factor):
    """0.38 √(E/Fy) = 9.24, 0.83 √ = 20.2; 1.12 √ = 27.2, 1.40 √ = 34.1; 3.76 √ = 91.4, 5.70 √ = 138.6."""
    assert bars.compactness(section, 355e6, 210e9) == factor


def test_slender_webs_and_flanges():
    assert bars.compactness(make_hollow(0.250, 0.060, 0.0025), 355e6, 210e9) == 1.0  # web 98
    assert bars.compactness(make_hollow(0.400, 0.060, 0.0025), 355e6, 210e9) == 0.0  # web 158
    assert bars.compactness(make_hollow(0.100, 0.100, 0.0025), 355e6, 210e9) == 0.0  # flange 38
    assert bars.compactness(make_channel(0.120, 0.090, 0.007, 0.004), 355e6, 210e9) == 0.0  # flange 22.5


def test_shear():
    told(bars.shear(make_bar(), ND), 4800 / (2 * 10 * (80 - 25.5)), FY / sqrt(3) / ND)
    assert bars.shear(make_bar(section=make_flat(0.4, 0.006)), ND).utilisation == inf  # h/t 66.7 of 59.6


@pytest.mark.parametrize(
    ("depth", "t", "length", "stress"),
    [
        (80, 10, 50, 1.25 * FY / ND),  # s = 40 of 47.3
        (80, 10, 300, 1.25 * FY / ND),  # s = 240: 1.409, capped
        (80, 10, 1000, (1.52 - 0.274 * 800 * FY / E) * FY / ND),
        (80, 10, 2000, 1.9 * E / 1600 / ND),
    ],
)
def test_buckling_of_flats(depth, t, length, stress):
    bar = make_bar(section=make_flat(depth / 1e3, t / 1e3), braced=length / 1e3)
    told(bars.buckling(bar, ND), 1.92e6 / (2 * t * depth**2 / 6), stress)


def test_buckling_of_channels():
    """ry 16.6 mm: 1.76 ry √(E/Fy) = 0.71 m rules over 0.67 E Af/(Fy d) = 1.63 m."""
    section = make_channel()
    braced = 1.76 * sqrt(section.inertia_weak / section.area * E / FY)
    assert 0.5 < braced < 1.0
    stress = 1.92e6 / (2e9 * section.modulus)
    told(bars.buckling(make_bar(section=section, braced=braced * 0.999), ND), stress, 1.10 * FY / ND)
    told(bars.buckling(make_bar(section=section, braced=braced * 1.001), ND), stress, FY / ND)
    told(bars.buckling(make_bar(section=section, braced=3.0), ND), stress, 0.66 * E * (55 * 9) / 120 / 3000 / ND)


def test_buckling_of_hollow_sections():
    section = make_hollow(0.120, 0.040, 0.005)
    Z, S = section.plastic * 1e9, section.modulus * 1e9
    stiff = E * sqrt(section.inertia_weak * section.torsion) * 1e12
    Lp, Lr = 0.13 * stiff / (FY * Z), 2 * stiff / (0.7 * FY * S)
    for length, stress in (
        (0.9 * Lp, 1.10 * FY),
        ((Lp + Lr) / 2, 0.90 * FY),
        (Lr, 0.70 * FY),
        (1.5 * Lr, 0.70 * FY / 1.5),
    ):
        bar = make_bar(section=section, count=1, braced=length / 1e3)
        told(bars.buckling(bar, ND), 1.92e6 / S, stress / ND)


def test_deflection():
    """The longer arm, 600 mm: F_A a²/(3 E I)."""
    result = Bth(ND).lever(make_bar())[3]
    told(result, 3200 * 600**2 / (3 * E * 2 * 10 * 80**3 / 12), 0.005, 1)
    swapped = Bth(ND).lever(make_bar(a=0.4, b=0.6))[3]
    assert swapped.value == pytest.approx(result.value, rel=1e-12)


def test_plate():
    """20 mm: 345 MPa."""
    told(bars.plate_bending(make_plate(), ND), 500e3 / (150 * 20**2 / 6), 1.25 * 345 / ND)
    told(bars.punching(make_plate(), ND), 6000, pi * 50 * 20 * 345 / sqrt(3) / ND, 1)


def test_hole():
    """Twin plates; b_eff is 30 of 30, 40 and 0.6·30·1.324·√(25.5/30) = 22.0 mm."""
    hole, rupture = make_hole(), 2 * FU / (1.2 * ND)
    width = 0.6 * 30 * FU / FY * sqrt(25.5 / 30)
    told(pins.net_tension(hole, ND), 8000, rupture * 2 * 10 * width, 1)
    told(pins.dishing(hole, ND), 8000, rupture * 2 * 10 * 40, 1)
    told(pins.fracture(hole, ND), 8000, rupture * (1.13 * 27.25 + 0.92 * 30 / (1 + 30 / 25.5)) * 10, 1)
    angle = radians(55 * 25 / 25.5)
    told(pins.tear_out(hole, ND), 8000, rupture * 0.7 * 2 * (27.25 + 12.5 * (1 - cos(angle))) * 10, 1)
    told(pins.bearing(hole, ND), 8000, 2 * 1.25 * FY / ND * 25 * 10, 1)


def test_a_round_edge_and_a_loose_pin_bear_less():
    straight, round_edge = (pins.tear_out(make_hole(round_edge=edge), ND).limit for edge in (False, True))
    fallen = 40 - sqrt(40**2 - (12.5 * sin(radians(55 * 25 / 25.5))) ** 2)
    assert straight - round_edge == pytest.approx(2 * 0.7 * FU / (1.2 * ND) * 2 * fallen * 10, rel=1e-9)
    loose = make_hole(pin=0.020)
    reduced = 1 - 0.275 * sqrt(1 - (20 / 25.5) ** 2)
    for check in (pins.net_tension, pins.dishing, pins.fracture):
        assert check(loose, ND).limit == pytest.approx(reduced * check(make_hole(), ND).limit, rel=1e-12)


def test_a_thin_wide_plate_counts_4t_only():
    wide = make_hole(side=0.5, thickness=0.008)
    assert pins.net_tension(wide, ND).limit == pins.dishing(wide, ND).limit


def test_pin():
    """25 mm of 750 MPa: M = 8000/8 (20 + 4 + 20)."""
    fb, fv = 8000 / 8 * 44 / (pi * 25**3 / 32), 8000 / 2 / (pi * 25**2 / 4)
    Fb, Fv = 1.25 * 750 / ND, 750 / sqrt(3) / ND
    told(pins.pin_bending(make_pin(), ND), fb, Fb)
    told(pins.pin_shear(make_pin(), ND), fv, Fv)
    told(pins.pin_both(make_pin(), ND), sqrt((fb / Fb) ** 2 + (fv / Fv) ** 2), 1, 1)


def test_rod():
    told(rods.rod_yield(make_rod(), ND), 8000, 156.67 * 640 / ND, 1)
    told(rods.rod_rupture(make_rod(), ND), 8000, 156.67 * 800 / 1.2 / ND, 1)


@pytest.mark.parametrize("length", [0.15, 0.35])
def test_strut(length):
    """Cc = √(2π²E/Fy) = 80.5: KL/r = 44.3 is below it, 103 above."""
    rod = make_rod(compressed=True, load=3000.0, length=length)
    area, slenderness = pi * 13.546**2 / 4, length * 1e3 / (13.546 / 4)
    Cc = sqrt(2 * pi**2 * E / 640)
    euler = pi**2 * E / slenderness**2 / 1.15 / ND
    if slenderness < Cc:
        safety = 1 + 9 / 40 * slenderness / Cc - 3 / 40 * (slenderness / Cc) ** 3
        Fa = 640 / ND / safety * (1 - slenderness**2 / 2 / Cc**2)
    else:
        Fa = euler
    told(rods.rod_buckling(rod, ND), 3000 / area, Fa)
    fb, Fb = 3000 * 1.5 / (pi * 13.546**3 / 32), 1.25 * 640 / ND
    amplified = 3000 / area / Fa + fb / (1 - 3000 / area / euler) / Fb
    told(rods.rod_both(rod, ND), max(amplified, 3000 / area / (640 / ND) + fb / Fb), 1, 1)


def test_strap():
    told(rods.strap_yield(make_strap(), ND), 8000, 40 * 8 * FY / ND, 1)
    told(rods.strap_rupture(make_strap(), ND), 8000, (40 - 16.5) * 8 * FU / 1.2 / ND, 1)


def test_the_thickest_wall_says_how_strong_the_steel_is():
    thick = make_channel(0.200, 0.080, 0.010, 0.018)
    assert wall(thick) == 0.018
    assert bars.bending(make_bar(section=thick), ND).limit == pytest.approx(1.10 * 345e6 / ND)
