"""EN 1993, check by check, against numbers worked in mm, N and MPa on paper's own terms; factor on loads 1.5."""

from __future__ import annotations

from math import inf, pi, sqrt

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

from rigdesign.hardware.rules.en import bars, pins, rods

GF = 1.5
FY, FU, E, G = 355.0, 470.0, 210e3, 210e3 / 2.6


def told(result, value, limit, scale=1.0):
    assert result.value * scale == pytest.approx(value, rel=1e-9)
    assert result.limit * scale == pytest.approx(limit, rel=1e-9)


def test_bending_is_plastic_on_the_net_section():
    told(bars.bending(make_bar(), GF), 1.5 * 1.92e6, 2 * 10 * (80**2 - 25.5**2) / 4 * FY, 1e3)


def test_bending_of_class_3_is_elastic():
    """Flange 48/4 = 12 of 8.14 and 11.4: class 4; 10.5: class 3."""
    section = make_channel(0.120, 0.049, 0.007, 0.004)
    assert bars.section_class(section, 355e6, 210e9) == 3
    inertia = 2e12 * section.inertia - 2 * 7 * 25.5**3 / 12
    told(bars.bending(make_bar(section=section), GF), 1.5 * 1.92e6, inertia / 60 * FY, 1e3)
    told(bars.buckling(make_bar(section=section, braced=0.0), GF), 1.5 * 1.92e6, 2e9 * section.modulus * FY, 1e3)


@pytest.mark.parametrize(
    ("section", "kind"),
    [
        (make_flat(0.300, 0.006), 2),
        (make_channel(0.120, 0.039, 0.007, 0.004), 2),  # flange 8.0 of 8.14
        (make_channel(0.120, 0.041, 0.007, 0.004), 3),  # 8.5
        (make_channel(0.120, 0.054, 0.007, 0.004), 4),  # 11.75 of 11.39
        (make_hollow(0.120, 0.080, 0.0025), 2),  # flange 30 of 30.9
        (make_hollow(0.120, 0.084, 0.0025), 3),  # 31.6
        (make_hollow(0.120, 0.092, 0.0025), 4),  # 34.8 of 34.2
        (make_hollow(0.180, 0.050, 0.0025), 3),  # web 70 of 67.5
        (make_hollow(0.270, 0.050, 0.0025), 4),  # 106 of 100.9
    ],
)
def test_classes(section, kind):
    """ε = √(235/355) = 0.8136."""
    assert bars.section_class(section, 355e6, 210e9) == kind


def test_shear():
    told(bars.shear(make_bar(), GF), 1.5 * 4800, 2 * 10 * (80 - 25.5) * FY / sqrt(3))
    section = make_hollow()
    area = 1e6 * section.area * 120 / 200 - 2 * 5 * 25.5
    told(bars.shear(make_bar(section=section, count=1), GF), 1.5 * 4800, area * FY / sqrt(3))
    assert bars.shear(make_bar(section=make_hollow(0.180, 0.050, 0.0025), count=1), GF).utilisation == inf  # 70 of 58.6


def test_much_shear_takes_from_bending():
    """V/Vpl = 0.75 gives ρ = 0.25; at half and below nothing is taken."""
    area = 2 * 10 * (80 - 25.5)
    force = 0.75 * area * FY / sqrt(3) / 1.5
    net = 2 * 10 * (80**2 - 25.5**2) / 4 * FY / 1e3
    assert bars.bending(make_bar(load=force / 0.6), GF).limit == pytest.approx(0.75 * net, rel=1e-9)
    assert bars.bending(make_bar(load=force / 0.6 * 2 / 3 * 0.999), GF).limit == pytest.approx(net, rel=1e-9)


@pytest.mark.parametrize("length", [300, 1500])
def test_buckling_of_flats(length):
    section = make_flat()
    critical = pi / length * sqrt(E * 80 * 10**3 / 12 * G * section.torsion * 1e12)
    slenderness = sqrt(16000 * FY / critical)
    phi = 0.5 * (1 + 0.76 * (slenderness - 0.2) + slenderness**2)
    chi = 1 / (phi + sqrt(phi**2 - slenderness**2))
    told(bars.buckling(make_bar(braced=length / 1e3), GF), 1.5 * 1.92e6, 2 * chi * 16000 * FY, 1e3)


def test_channels_buckle_later_for_their_warping():
    told_moment = {symbol: value for symbol, value, _ in bars.buckling(make_bar(section=make_channel()), GF).working}
    section = make_channel()
    without = bars.critical_moment(210e9, section.inertia_weak, section.torsion, 0.0, 0.3)
    assert told_moment["Mcr"] > 1.5 * without


def test_plate():
    told(bars.plate_bending(make_plate(), GF), 1.5 * 500e3, 150 * 20**2 / 4 * 345, 1e3)
    told(bars.punching(make_plate(), GF), 1.5 * 6000, 0.6 * pi * 50 * 20 * 470 / 1.25)


def test_hole():
    hole = make_hole()
    told(pins.net_tension(hole, GF), 12e3, 2 * min(2 * 10 * FY * (30 - 8.5), 0.9 * 2 * 30 * 10 * FU / 1.25))
    told(pins.fracture(hole, GF), 12e3, 2 * 2 * 10 * FY * (27.25 - 17))
    told(pins.tear_out(hole, GF), 12e3, 2 * 2 * 27.25 * 10 * FY / sqrt(3))
    told(pins.bearing(hole, GF), 12e3, 2 * 1.5 * 10 * 25 * FY)
    told(pins.dishing(hole, GF), 12e3, 2 * (10 / 0.7) ** 2 * FY)


def test_a_wide_plate_is_held_by_its_net_section():
    """Beyond c = 190 mm or so the area beside the hole rules over Table 3.9."""
    told(pins.net_tension(make_hole(side=0.300), GF), 12e3, 2 * 0.9 * 2 * 300 * 10 * FU / 1.25)


def test_pin():
    """25 mm: fyp 750, fup 1000."""
    moment, force = 1.5 * 8000 / 8 * 44, 1.5 * 4000
    strong, shear = 1.5 * pi * 25**3 / 32 * 750, 0.6 * pi * 25**2 / 4 * 1000 / 1.25
    told(pins.pin_bending(make_pin(), GF), moment, strong, 1e3)
    told(pins.pin_shear(make_pin(), GF), force, shear)
    told(pins.pin_both(make_pin(), GF), sqrt((moment / strong) ** 2 + (force / shear) ** 2), 1)


def test_rod():
    told(rods.rod_yield(make_rod(), GF), 12e3, 156.67 * 640)
    told(rods.rod_rupture(make_rod(), GF), 12e3, 0.9 * 156.67 * 800 / 1.25)


def test_strut():
    rod = make_rod(compressed=True, load=3000.0)
    area, inertia, modulus = pi * 13.546**2 / 4, pi * 13.546**4 / 64, pi * 13.546**3 / 32
    critical = pi**2 * E * inertia / 350**2
    slenderness = sqrt(area * 640 / critical)
    phi = 0.5 * (1 + 0.49 * (slenderness - 0.2) + slenderness**2)
    strong = area * 640 / (phi + sqrt(phi**2 - slenderness**2))
    told(rods.rod_buckling(rod, GF), 4500, strong)
    told(rods.rod_both(rod, GF), 4500 / strong + 4500 * 1.5 / (1 - 4500 / critical) / (modulus * 640), 1)


def test_strap():
    told(rods.strap_yield(make_strap(), GF), 12e3, 40 * 8 * FY)
    told(rods.strap_rupture(make_strap(), GF), 12e3, 0.9 * (40 - 16.5) * 8 * FU / 1.25)
