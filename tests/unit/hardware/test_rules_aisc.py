"""AISC 360, check by check, against numbers worked in mm, N and MPa on paper's own terms."""

from __future__ import annotations

from itertools import pairwise
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

from rigdesign.hardware.rules.aisc import bars, pins, rods

FY, FU, E = 355.0, 470.0, 210e3


def told(result, value, limit, scale=1.0):
    assert result.value * scale == pytest.approx(value, rel=1e-9)
    assert result.limit * scale == pytest.approx(limit, rel=1e-9)


def test_bending_of_flats_is_plastic_and_capped():
    """Z_net/S_net is 1.40 with a hole of 25.5 mm, below the cap of 1.6."""
    told(bars.bending(make_bar()), 1.92e6, FY * 2 * 10 * (80**2 - 25.5**2) / 4 / 1.67, 1e3)
    assert bars.plastic_moment(355.0, 100.0, 50.0) == 355.0 * 80.0


def test_bending_of_shapes():
    section = make_channel()
    plastic = 2e9 * section.plastic - 2 * 7 * 25.5**2 / 4
    told(bars.bending(make_bar(section=section)), 1.92e6, FY * plastic / 1.67, 1e3)


@pytest.mark.parametrize(
    ("section", "left"),
    [
        (make_flat(0.3, 0.005), "all"),
        (make_channel(0.120, 0.055, 0.007, 0.009), "all"),  # flange 6.1 of 9.24
        (make_channel(0.120, 0.055, 0.007, 0.005), "some"),  # 11
        (make_channel(0.120, 0.075, 0.007, 0.003), "none"),  # 25 of 24.3
        (make_hollow(0.120, 0.080, 0.005), "all"),
        (make_hollow(0.120, 0.095, 0.003), "some"),  # flange 29.7 of 27.2
        (make_hollow(0.120, 0.110, 0.003), "none"),  # 34.7 of 34.1
        (make_hollow(0.200, 0.060, 0.003), "some"),  # web 64.7 of 58.9
        (make_hollow(0.430, 0.060, 0.003), "none"),  # web 141 of 138.6
    ],
)
def test_compactness(section, left):
    part = {"all": 1.0, "some": 0.7 * section.modulus / section.plastic, "none": 0.0}[left]
    assert bars.compactness(section, 355e6, 210e9) == pytest.approx(part, rel=1e-12)


def test_shear():
    told(bars.shear(make_bar()), 4800, 0.6 * FY * 2 * 10 * (80 - 25.5) / 1.67)
    assert bars.shear(make_bar(section=make_flat(0.400, 0.006))).utilisation == inf  # 66.7 of 61.8


@pytest.mark.parametrize(
    ("length", "moment"),
    [
        (50, 16000 * FY),
        (300, (1.52 - 0.274 * 240 * FY / E) * 80**2 * 10 / 6 * FY),
        (2000, 1.9 * E / 1600 * 80**2 * 10 / 6),
    ],
)
def test_buckling_of_flats(length, moment):
    told(bars.buckling(make_bar(braced=length / 1e3)), 1.92e6, 2 * moment / 1.67, 1e3)


def test_buckling_of_hollow_sections():
    section = make_hollow(0.120, 0.040, 0.005)
    most, least = FY * section.plastic * 1e9, 0.7 * FY * section.modulus * 1e9
    stiff = E * sqrt(section.inertia_weak * section.torsion) * 1e12
    Lp, Lr = 0.13 * stiff / most, 2 * stiff / least
    for length, moment in (
        (0.9 * Lp, most),
        ((Lp + Lr) / 2, (most + least) / 2),
        (Lr, least),
        (1.5 * Lr, least / 1.5),
    ):
        told(bars.buckling(make_bar(section=section, count=1, braced=length / 1e3)), 1.92e6, moment / 1.67, 1e3)


def test_channels_meet_at_both_limits():
    """The straight line ends where the elastic formula begins: both at 0.7 Fy S."""
    section = make_channel()
    moments = [bars.channel_moment(355e6, 210e9, 0.01 * i, section) for i in range(2000)]
    drops = [first - second for first, second in pairwise(moments)]
    assert min(drops) >= 0
    assert max(drops) < 0.01 * moments[0]


def test_plate():
    told(bars.plate_bending(make_plate()), 500e3, 345 * 150 * 20**2 / 4 / 1.67, 1e3)
    told(bars.punching(make_plate()), 6000, 0.6 * pi * 50 * 20 * min(345 / 1.5, 470 / 2.0))


def test_hole():
    hole = make_hole()
    told(pins.net_tension(hole), 8000, 2 * FU * 2 * 10 * 30 / 2)
    told(pins.net_tension(make_hole(side=0.1)), 8000, 2 * FU * 2 * 10 * 36 / 2)
    told(pins.dishing(hole), 8000, 2 * FU * 2 * 10 * 36 / 2)
    told(pins.fracture(hole), 8000, 2 * FU * 2 * 10 * 27.25 / 1.33 / 2)
    told(pins.tear_out(hole), 8000, 2 * 0.6 * FU * 2 * 10 * (27.25 + 12.5) / 2)
    told(pins.bearing(hole), 8000, 2 * 1.8 * FY * 25 * 10 / 2)


def test_pin():
    """Z = d³/6 is 1.70 S: the cap of 1.6 S rules."""
    told(pins.pin_bending(make_pin()), 8000 / 8 * 44, 1.6 * 750 * pi * 25**3 / 32 / 1.67, 1e3)
    told(pins.pin_shear(make_pin()), 4000, 0.6 * 750 * pi * 25**2 / 4 / 1.67)


def test_rod():
    told(rods.rod_yield(make_rod()), 8000, 156.67 * 640 / 1.67)
    told(rods.rod_rupture(make_rod()), 8000, 156.67 * 800 / 2)


@pytest.mark.parametrize(("length", "load"), [(0.15, 9000.0), (0.35, 3000.0), (0.35, 400.0)])
def test_strut(length, load):
    """Stocky and slender; bending and compression, and bending with little compression (below 0.2 Pc)."""
    rod = make_rod(compressed=True, load=load, length=length)
    area, modulus = pi * 13.546**2 / 4, pi * 13.546**3 / 32
    euler = pi**2 * E / (length * 1e3 / (13.546 / 4)) ** 2
    critical = 640 * 0.658 ** (640 / euler) if 640 / euler <= 2.25 else 0.877 * euler
    told(rods.rod_buckling(rod), load, critical * area / 1.67)
    axial = load / (critical * area / 1.67)
    bent = load * 1.5 / (1 - 1.6 * load / (euler * area)) / (1.6 * 640 * modulus / 1.67)
    told(rods.rod_both(rod), axial + 8 / 9 * bent if axial >= 0.2 else axial / 2 + bent, 1)


def test_strap():
    told(rods.strap_yield(make_strap()), 8000, 40 * 8 * FY / 1.67)
    told(rods.strap_rupture(make_strap()), 8000, (40 - 16.5) * 8 * FU / 2)
