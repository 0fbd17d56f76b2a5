"""Pressures over triangles, trapezoids and ellipses, with closed forms of the force and of the centre of pressure.

Centroids of areas: F. P. Beer, E. R. Johnston et al., Vector Mechanics for Engineers: Statics, Fig. 5.8A (triangle h/3
from its base, semiellipse 4b/3π from its diameter, quarter ellipse 4a/3π and 4b/3π); the same book's section on
submerged surfaces gives the centre of pressure of a rectangle with its edge in the surface, two thirds of its depth.
What is marked C was worked out here: with a pressure p = k d that grows with the depth d the force is k ∫ d dA and the
centre of pressure lies at ∫ d² dA / ∫ d dA.
"""

from __future__ import annotations

import numpy as np
import pytest
from plan_targets import outline, pressure_map, towards

from rigdesign.brief.model import Outline
from rigdesign.target.plan_load import ALONG_X
from rigdesign.target.surface.pressure import Pressure, pressure_over

# Rounding alone: the integrals are exact on polygons.
EXACT = 1e-12
# Places at which each field is given: beyond all outlines, so that nothing rests on values carried on.
CORNERS = (np.array([-5.0, 5.0, 5.5, -4.0]), np.array([-5.0, -4.5, 5.0, 5.5]))


def under(area: Outline, level: float, by_x: float = 0.0, by_y: float = 0.0) -> Pressure:
    """The pressure level + by_x x + by_y y over an area."""
    x, y = CORNERS
    found = pressure_over(pressure_map(x, y, level + by_x * x + by_y * y), area)
    assert found.share_beyond == 0.0
    return found


def centre(load: Pressure) -> tuple[float, float]:
    force, first_x, first_y = load.sums
    return first_x / force, first_y / force


def seen_centre(load: Pressure, degrees: float) -> tuple[float, float]:
    """The same from the curves along a direction."""
    direction = towards(degrees)
    seen = load.along(direction)
    s, n = seen.force.first_moment / seen.force.total, seen.turning.total / seen.force.total
    return s * direction.a_x - n * direction.a_y, s * direction.a_y + n * direction.a_x


def test_uniform_over_a_triangle():
    """S: a third of the height from the base, wherever the apex; here base 2.4 m, height 1.5 m, apex aside."""
    load = under(outline((0.3, 0.0), (2.7, 0.0), (0.9, 1.5)), 800.0)
    assert load.sums.force == pytest.approx(800.0 * 1.8, rel=EXACT)
    assert centre(load) == pytest.approx(((0.3 + 2.7 + 0.9) / 3.0, 0.5), rel=EXACT)
    for degrees in (0.0, 90.0, 33.0):
        assert seen_centre(load, degrees) == pytest.approx((1.3, 0.5), rel=1e-11)


def test_shear_and_moment_of_a_uniform_triangle_at_every_cut():
    """C: beyond x the triangle that tapers to a point has the area b (L − x)²/2L; moment a third of what is left."""
    base, length, p = 1.2, 3.0, 650.0
    load = under(outline((0.0, -0.7), (length, 0.1), (0.0, 0.5)), p)
    x = np.linspace(0.0, 3.0, 13)
    seen = load.along(ALONG_X)
    force = p * base * (length - x) ** 2 / (2.0 * length)
    assert seen.force.force_beyond(x, "inboard") == pytest.approx(force, abs=1e-9)
    assert seen.force.moment_beyond(x) == pytest.approx(force * (length - x) / 3.0, abs=1e-9)
    # its middle line runs from y = −0.1 at the base to 0.1 at the apex: the centroid of what is left lies a third along
    middle = -0.1 + 0.2 * (x + (length - x) / 3.0) / length
    assert seen.turning.force_beyond(x, "inboard") == pytest.approx(force * middle, abs=1e-9)


def test_water_on_a_rectangle_with_its_edge_in_the_surface():
    """S: force k w h²/2, centre of pressure at two thirds of the depth."""
    wide, high, k = 1.6, 2.1, 9806.65
    load = under(outline((0.4, -high), (0.4 + wide, -high), (0.4 + wide, 0.0), (0.4, 0.0)), 0.0, by_y=-k)
    assert load.sums.force == pytest.approx(k * wide * high**2 / 2.0, rel=EXACT)
    assert centre(load) == pytest.approx((0.4 + wide / 2.0, -2.0 * high / 3.0), rel=EXACT)


@pytest.mark.parametrize(("apex_down", "area_depth", "centre_depth"), [(True, 1 / 3, 1 / 2), (False, 2 / 3, 3 / 4)])
def test_water_on_a_triangle(apex_down, area_depth, centre_depth):
    """C: base in the surface, centre of pressure at half the depth; apex in the surface, at three quarters of it."""
    wide, high, k = 1.4, 0.9, 5000.0
    corners = [(0.2, 0.0), (1.0, -high), (0.2 + wide, 0.0)] if apex_down else [(0.5, 0.0), (0.1, -high), (1.5, -high)]
    load = under(outline(*corners), 0.0, by_y=-k)
    assert load.sums.force == pytest.approx(k * wide * high / 2.0 * area_depth * high, rel=EXACT)
    assert centre(load)[1] == pytest.approx(-centre_depth * high, rel=EXACT)
    assert seen_centre(load, -71.0)[1] == pytest.approx(-centre_depth * high, rel=1e-11)


def test_uniform_and_growing_over_a_trapezoid():
    """C: chords c0 at the root and c1 at the tip, L apart; ∫x dA = L² (c0 + 2 c1)/6 and ∫x² dA = L³ (c0 + 3 c1)/12."""
    root, tip, span = 1.1, 0.4, 2.5
    area = outline((0.0, -0.8), (span, -0.6), (span, -0.6 + tip), (0.0, -0.8 + root))
    force, first = 300.0 * span * (root + tip) / 2.0, 300.0 * span**2 * (root + 2.0 * tip) / 6.0
    uniform = under(area, 300.0)
    assert uniform.sums[:2] == pytest.approx((force, first), rel=EXACT)
    growing = under(area, 0.0, by_x=120.0)
    first, second = 120.0 * span**2 * (root + 2.0 * tip) / 6.0, 120.0 * span**3 * (root + 3.0 * tip) / 12.0
    assert growing.sums[:2] == pytest.approx((first, second), rel=EXACT)
    assert seen_centre(growing, 17.0)[0] == pytest.approx(second / first, rel=1e-11)


def half_ellipse(a: float, b: float, sides: int) -> Outline:
    """The half y ≥ 0 of an ellipse as a polygon with its corners on it."""
    theta = np.linspace(0.0, np.pi, sides + 1)
    return Outline(a * np.cos(theta), b * np.sin(theta))


def polygon_moments(area: Outline) -> tuple[float, float, float]:
    """A polygon's area, ∫y dA and ∫y² dA from its corners (Green's theorem; C)."""
    x, y = area.x, area.y
    x_next, y_next = np.roll(x, -1), np.roll(y, -1)
    cross = x * y_next - x_next * y
    first = (y + y_next) * cross / 6.0
    second = (y**2 + y * y_next + y_next**2) * cross / 12.0
    return float(cross.sum() / 2.0), float(first.sum()), float(second.sum())


@pytest.mark.parametrize("sides", [7, 50, 400])
def test_half_an_ellipse_as_a_polygon(sides):
    """C: the polygon's own formula, to rounding, whatever the number of corners."""
    area = half_ellipse(1.7, 0.6, sides)
    size, first, second = polygon_moments(area)
    uniform, growing = under(area, 250.0), under(area, 0.0, by_y=900.0)
    assert uniform.sums[::2] == pytest.approx((250.0 * size, 250.0 * first), rel=EXACT)
    assert growing.sums[::2] == pytest.approx((900.0 * first, 900.0 * second), rel=EXACT)
    assert growing.along(towards(41.0)).force.total == pytest.approx(900.0 * first, rel=1e-11)


def test_an_outline_with_deep_notches():
    """C: the polygon's own formula again; its pieces are far from convex."""
    area = outline(
        (0.0, -1.0), (3.0, -1.2), (3.1, 0.9), (2.6, -0.9), (2.2, 1.0), (1.7, -0.8), (1.2, 0.7), (0.4, -0.7), (0.1, 0.8)
    )
    size, first, second = polygon_moments(area)
    uniform, growing = under(area, 250.0), under(area, 0.0, by_y=900.0)
    assert uniform.sums[::2] == pytest.approx((250.0 * size, 250.0 * first), rel=EXACT)
    assert growing.sums[::2] == pytest.approx((900.0 * first, 900.0 * second), rel=EXACT)
    assert growing.along(towards(41.0)).force.total == pytest.approx(900.0 * first, rel=1e-11)
    assert (growing.triangles.sign < 0).any()


def test_polygons_converge_to_the_ellipse():
    """S: centroid of the semiellipse 4b/3π.  C: centre of pressure of water on it 3πb/16.  Errors fall with the square
    of the number of sides.
    """
    a, b = 1.7, 0.6
    errors = []
    for sides in (40, 80, 160):
        area = half_ellipse(a, b, sides)
        uniform, growing = under(area, 250.0), under(area, 0.0, by_y=900.0)
        errors.append(
            [
                uniform.sums.force / (250.0 * np.pi * a * b / 2.0) - 1.0,
                centre(uniform)[1] / (4.0 * b / (3.0 * np.pi)) - 1.0,
                centre(growing)[1] / (3.0 * np.pi * b / 16.0) - 1.0,
            ]
        )
    ratio = np.array(errors[:-1]) / np.array(errors[1:])
    assert ratio == pytest.approx(np.full((2, 3), 4.0), rel=0.01)
    assert np.abs(errors[-1]).max() < 1e-4  # (π/160)²/6


def test_a_quarter_ellipse_of_running_load():
    """S: a uniform pressure over a quarter ellipse is an elliptical running load: centroid 4L/3π along, 4b/3π across.

    C: its shear at ξ = x/L is that of the closed form, θ − sin θ cos θ over π/2 with cos θ = ξ.
    """
    span, chord = 3.0, 0.8
    theta = np.linspace(0.0, np.pi / 2.0, 1001)
    area = Outline(np.append(span * np.cos(theta), 0.0), np.append(chord * np.sin(theta), 0.0))
    load = under(area, 400.0)
    size = np.pi / 4.0 * span * chord * 400.0
    # of a polygon of 1000 sides: (π/2000)²/6 = 4e-7
    assert load.sums.force == pytest.approx(size, rel=1e-6)
    assert centre(load) == pytest.approx((4.0 * span / (3.0 * np.pi), 4.0 * chord / (3.0 * np.pi)), rel=1e-6)
    x = np.array([0.6, 1.5, 2.7])
    angle = np.arccos(x / span)
    shear = size * (angle - np.sin(angle) * np.cos(angle)) / (np.pi / 2.0)
    assert load.along(ALONG_X).force.force_beyond(x, "inboard") == pytest.approx(shear, abs=1e-6 * size)


def test_a_map_of_a_smooth_pressure_converges():
    """C: p = p0 sin(πx/L) sin(πy/b) over a rectangle has the total 4 p0 L b/π²; a map's error falls with the square of
    the distance of its points.
    """
    span, wide, p0 = 2.0, 0.9, 700.0
    errors = []
    for n in (12, 24, 48):
        x, y = (axis.ravel() for axis in np.meshgrid(np.linspace(0, span, n + 1), np.linspace(0, wide, n + 1)))
        area = outline((0.0, 0.0), (span, 0.0), (span, wide), (0.0, wide))
        load = pressure_over(pressure_map(x, y, p0 * np.sin(np.pi * x / span) * np.sin(np.pi * y / wide)), area)
        errors.append(load.sums.force / (4.0 * p0 * span * wide / np.pi**2) - 1.0)
    assert np.array(errors[:-1]) / np.array(errors[1:]) == pytest.approx([4.0, 4.0], rel=0.02)
    assert abs(errors[-1]) < 1e-3
