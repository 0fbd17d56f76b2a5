"""Section properties from geometry: what is known of rectangles, what adds up, what must not be possible."""

from __future__ import annotations

from dataclasses import astuple
from math import pi, tanh

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rigdesign.hardware.catalogue.geometry import channel, flat, hollow, outer_radius

POWERS = (2, 4, 4, 4, 3, 3)
"""Area, three second moments and two moduli grow with these powers of the size."""


def saint_venant(long: float, short: float) -> float:
    """Torsion constant of a rectangle by the series; 60 terms are exact to 1e-7."""
    odd = range(1, 120, 2)
    return (
        long * short**3 * (1 / 3 - 64 / pi**5 * short / long * sum(tanh(n * pi * long / short / 2) / n**5 for n in odd))
    )


@pytest.mark.parametrize("ratio", [1.0, 1.3, 2.0, 4.0, 25.0])
def test_torsion_of_a_flat_follows_the_exact_series(ratio):
    # 0.5 %: what the formula promises; it is closest for slender flats
    assert flat(0.01 * ratio, 0.01).torsion == pytest.approx(saint_venant(0.01 * ratio, 0.01), rel=5e-3)
    assert flat(0.01, 0.01 * ratio).torsion == flat(0.01 * ratio, 0.01).torsion


def test_a_flat_by_hand():
    """90 × 12 mm: 10.8 cm², 72.9 and 1.296 cm⁴, 16.2 and 24.3 cm³."""
    found = flat(0.09, 0.012)
    assert found.area == pytest.approx(10.8e-4)
    assert (found.inertia, found.inertia_weak) == pytest.approx((72.9e-8, 1.296e-8))
    assert (found.modulus, found.plastic) == pytest.approx((16.2e-6, 24.3e-6))


def test_a_channel_by_hand():
    """100 × 60 mm, web 8, flanges 10: flanges of 6 cm² 45 mm off, web of 6.4 cm²; centre 19.56 mm from its back."""
    found = channel(0.1, 0.06, 0.008, 0.010)
    assert found.area == pytest.approx(18.4e-4)
    assert found.inertia == pytest.approx((2 * (600 * 45**2 + 60 * 10**3 / 12) + 8 * 80**3 / 12) * 1e-12)
    centre = (2 * 600 * 30 + 640 * 4) / 1840
    weak = 2 * (10 * 60**3 / 12 + 600 * (30 - centre) ** 2) + 80 * 8**3 / 12 + 640 * (centre - 4) ** 2
    assert found.inertia_weak == pytest.approx(weak * 1e-12)
    assert found.plastic == pytest.approx(2 * (600 * 45 + 320 * 20) * 1e-9)
    assert found.torsion == pytest.approx((2 * 60 * 10**3 + 80 * 8**3) / 3 * 1e-12)


def test_sharp_corners_make_a_box():
    """140 × 80 mm with 6 mm walls and no radius, as the difference of two rectangles."""
    found = hollow(0.14, 0.08, 0.006, 0.0)
    outer, inner = flat(0.14, 0.08), flat(0.128, 0.068)
    assert found.area == pytest.approx(outer.area - inner.area)
    assert found.inertia == pytest.approx(outer.inertia - inner.inertia)
    assert found.inertia_weak == pytest.approx(outer.inertia_weak - inner.inertia_weak)
    assert found.plastic == pytest.approx(outer.plastic - inner.plastic)
    enclosed, length = 134 * 74, 2 * (134 + 74)
    assert found.torsion == pytest.approx((4 * enclosed**2 * 6 / length + length * 6**3 / 3) * 1e-12)


def test_all_corner_makes_a_round_tube():
    """Depth = width = twice the radius: π/64 (D⁴ − d⁴), twice that in torsion but for Bredt's thin wall."""
    found = hollow(0.1, 0.1, 0.004, 0.05)
    tube = pi / 64 * (0.1**4 - 0.092**4)
    assert found.area == pytest.approx(pi / 4 * (0.1**2 - 0.092**2))
    assert (found.inertia, found.inertia_weak) == pytest.approx((tube, tube))
    assert found.plastic == pytest.approx((0.1**3 - 0.092**3) / 6)
    assert found.torsion == pytest.approx(2 * tube, rel=2e-3)  # (t/D)² = 0.16 %: what a thin wall leaves out


@settings(deadline=None, derandomize=True, max_examples=40)
@given(st.floats(0.02, 0.4), st.floats(1.05, 4.0), st.floats(0.02, 0.24), st.floats(1.1, 5.0))
def test_sizes_scale_and_weak_is_weak(depth, slender, wall, factor):
    width, t = depth / slender, wall * depth / slender
    for make, sizes in ((flat, (depth, t)), (channel, (depth, width, t, t)), (hollow, (depth, width, t, 2 * t))):
        found, larger = make(*sizes), make(*(factor * size for size in sizes))
        scaled = [value * factor**power for value, power in zip(astuple(found), POWERS, strict=True)]
        assert astuple(larger) == pytest.approx(scaled, rel=1e-9)
        assert found.inertia_weak < found.inertia
        assert found.modulus < found.plastic < 2 * found.modulus
        assert found.modulus == pytest.approx(found.inertia / (depth / 2))


@pytest.mark.parametrize(("wall", "radius"), [(3, 6), (6, 12), (6.3, 15.75), (10, 25), (12.5, 37.5)])
def test_corner_radii_of_cold_formed_sections(wall, radius):
    assert outer_radius(wall / 1e3) * 1e3 == pytest.approx(radius)


@pytest.mark.parametrize(
    ("make", "sizes", "says"),
    [
        (flat, (0.0, 0.01), "depth must be above 0"),
        (flat, (0.1, -0.01), "thickness must be above 0"),
        (hollow, (0.1, 0.05, 0.025, 0.0), "no hollow section"),
        (hollow, (0.1, 0.05, 0.004, 0.026), "no hollow section"),
        (hollow, (0.1, 0.05, 0.004, -0.001), "no hollow section"),
        (channel, (0.1, 0.05, 0.05, 0.008), "no channel"),
        (channel, (0.1, 0.05, 0.006, 0.05), "no channel"),
        (channel, (0.1, 0.05, float("nan"), 0.008), "web must be above 0"),
        (outer_radius, (0.0,), "thickness must be above 0"),
    ],
)
def test_sizes_that_make_no_section_are_refused(make, sizes, says):
    with pytest.raises(ValueError, match=says):
        make(*sizes)
