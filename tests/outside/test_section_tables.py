"""Section properties against published tables, against polygons, and against a finite-element section solver.

Sources
- Cold formed hollow sections, EN 10219-2: properties in three figures from steel section tables, and in two decimals
  from a table computed with the radii of EN 10219-2 (torsion included).
- Channels with tapered flanges, DIN 1026-1 / EN 10365: properties as steel section tables print them; slope of the
  flanges 8 %, flange thickness measured at half the width (from memory).
- The sectionproperties package: an independent mesh solver.
"""

from __future__ import annotations

from functools import cache

import numpy as np
import pytest
from factories import make_hardware
from shapely import Polygon, box
from shapely.affinity import scale

from rigdesign.hardware.catalogue import hollow, outer_radius, sections
from rigdesign.hardware.catalogue.reading import rows
from rigdesign.hardware.model import Section

THREE_FIGURES = [  # depth, width, wall [mm]; kg/m, cm², cm⁴, cm³, cm³ plastic
    (50, 50, 3, 4.25, 5.41, 19.5, 7.79, 9.39),
    (80, 80, 4, 9.22, 11.7, 111, 27.8, 33.1),
    (100, 100, 5, 14.4, 18.4, 271, 54.2, 64.6),
    (60, 40, 3, 4.25, 5.41, 25.4, 8.46, 10.5),
    (100, 60, 5, 11.3, 14.4, 181, 36.2, 45.6),
    (150, 100, 6, 21.7, 27.6, 835, 111, 137),
    (200, 100, 8, 33.9, 43.2, 2090, 209, 267),
]
TWO_DECIMALS = [  # depth, width, wall [mm]; cm², I, W, Wpl, I weak, It
    (40, 20, 2, 2.14, 4.05, 2.02, 2.61, 1.34, 3.45),
    (40, 30, 3, 3.61, 7.27, 3.63, 4.61, 4.60, 9.72),
    (50, 30, 3, 4.21, 12.83, 5.13, 6.57, 5.70, 13.53),
    (50, 30, 4, 5.35, 15.25, 6.10, 8.05, 6.69, 16.53),
    (60, 40, 2.5, 4.59, 22.07, 7.36, 9.06, 11.74, 25.14),
    (60, 40, 3, 5.41, 25.38, 8.46, 10.53, 13.44, 29.28),
]
CHANNELS = {  # kg/m, cm², cm⁴, cm³, cm³ plastic
    "UPN 80": (8.6, 11.0, 106, 26.5, 32.3),
    "UPN 100": (10.6, 13.5, 206, 41.2, 49.0),
    "UPN 120": (13.4, 17.0, 364, 60.7, 72.6),
    "UPN 140": (16.0, 20.4, 605, 86.4, 103),
    "UPN 160": (18.8, 24.0, 925, 116, 138),
    "UPN 200": (25.3, 32.2, 1910, 191, 228),
}
SLOPE = 0.08
FINE = 64
"""Segments to a quarter of a circle: arcs are short of their circles by 1e-4 of themselves."""


@cache
def catalogue(kind: str) -> dict[str, Section]:
    return {section.name: section for section in sections(make_hardware(), kind)}


@pytest.mark.parametrize("row", THREE_FIGURES, ids=str)
def test_hollow_sections_in_three_figures(row):
    depth, width, wall, mass, *listed = row
    found = hollow(depth / 1e3, width / 1e3, wall / 1e3, outer_radius(wall / 1e3))
    ours = (found.area * 1e4, found.inertia * 1e8, found.modulus * 1e6, found.plastic * 1e6)
    assert ours == pytest.approx(listed, rel=6e-3)  # half a unit of three figures
    assert found.area * 7850 == pytest.approx(mass, rel=6e-3)


@pytest.mark.parametrize("row", TWO_DECIMALS, ids=str)
def test_hollow_sections_in_two_decimals(row):
    depth, width, wall, *listed = row
    f = hollow(depth / 1e3, width / 1e3, wall / 1e3, outer_radius(wall / 1e3))
    ours = (f.area * 1e4, f.inertia * 1e8, f.modulus * 1e6, f.plastic * 1e6, f.inertia_weak * 1e8, f.torsion * 1e8)
    assert ours == pytest.approx(listed, abs=0.0051)  # half of the last decimal, and the float that holds it


@pytest.mark.parametrize("name", CHANNELS)
def test_channels_as_printed(name):
    mass, *listed = CHANNELS[name]
    found = catalogue("channel")[name]
    ours = (found.area * 1e4, found.inertia * 1e8, found.modulus * 1e6, found.plastic * 1e6)
    assert ours == pytest.approx(listed)
    assert found.mass == pytest.approx(mass, rel=6e-3)  # three figures, and two for that of UPN 80


def moments(shape: Polygon) -> tuple[float, float, float]:
    """Area, second moments about the level and the upright axis through the centroid: Green's theorem on the edges."""
    area, up, across = 0.0, 0.0, 0.0
    for hole, ring in enumerate((shape.exterior, *shape.interiors)):
        x, y = np.asarray(ring.coords).T
        x, y = x - shape.centroid.x, y - shape.centroid.y
        turn = x[:-1] * y[1:] - x[1:] * y[:-1]
        sign = 1.0 if (hole == 0) == (turn.sum() > 0) else -1.0
        area += sign * turn.sum() / 2
        up += sign * (turn * (y[:-1] ** 2 + y[:-1] * y[1:] + y[1:] ** 2)).sum() / 12
        across += sign * (turn * (x[:-1] ** 2 + x[:-1] * x[1:] + x[1:] ** 2)).sum() / 12
    return area, up, across


def plastic(shape: Polygon, depth: float) -> float:
    """Twice the first moment of the upper half; the shape lies from 0 to its depth and is symmetric in it."""
    half = shape.intersection(box(-1e3, depth / 2, 1e3, depth))
    return 2 * half.area * (half.centroid.y - depth / 2)


def tapered_channel(row: dict[str, str]) -> Polygon:
    """The outline of a rolled channel [mm]: its lower half with root filled and toe rounded, and that mirrored."""
    names = ("depth", "width", "web", "flange", "root_radius", "toe_radius")
    d, b, s, t, root, toe = (float(row[f"{name}_mm"]) for name in names)

    def top(x: float) -> float:
        return t + SLOPE * (b / 2 - x)

    far = b + 3 * root
    room = Polygon([(s, top(s)), (far, top(far)), (far, d - top(far)), (s, d - top(s))])
    steel = box(0, 0, b, d / 2).difference(room.buffer(-root, quad_segs=FINE).buffer(root, quad_segs=FINE))
    near = b - 4 * toe
    flange = Polygon([(near, -4 * toe), (b, -4 * toe), (b, top(b)), (near, top(near))])
    rounded = flange.buffer(-toe, quad_segs=FINE).buffer(toe, quad_segs=FINE)
    end = box(b - 1.5 * toe, 0, b, d / 2)
    half = steel.difference(end).union(rounded.intersection(end))
    return half.union(scale(half, yfact=-1, origin=(0, d / 2))).buffer(0)


def tube(section: Section) -> Polygon:
    """The outline of a hollow section [mm], from boxes with rounded corners."""
    d, b, t = (1e3 * size for size in (section.depth, section.width, section.web))
    radius = 1e3 * outer_radius(section.web)

    def rounded(off: float, r: float) -> Polygon:
        return box(off + r, off + r, b - off - r, d - off - r).buffer(r, quad_segs=FINE)

    return rounded(0.0, radius).difference(rounded(t, radius - t))


@pytest.mark.parametrize("row", rows("channels"), ids=lambda row: row["name"])
def test_every_channel_from_its_outline(row):
    found, shape = catalogue("channel")[row["name"]], tapered_channel(row)
    area, up, across = moments(shape)
    # 0.7 %: three figures, and radii that rolling keeps only roughly
    assert found.area * 1e6 == pytest.approx(area, rel=7e-3)
    assert found.inertia * 1e12 == pytest.approx(up, rel=7e-3)
    assert found.inertia_weak * 1e12 == pytest.approx(across, rel=7e-3)
    assert found.modulus * 1e9 == pytest.approx(up / (found.depth * 1e3 / 2), rel=7e-3)
    # 1.3 %: of UPN 80, whose table has 32.3 cm³ where its outline has 31.9; all others are within 0.4 %
    assert found.plastic * 1e9 == pytest.approx(plastic(shape, found.depth * 1e3), rel=1.3e-2)


def test_every_hollow_section_from_its_outline():
    for found in catalogue("hollow").values():
        shape = tube(found)
        ours = (found.area * 1e6, found.inertia * 1e12, found.inertia_weak * 1e12, found.plastic * 1e9)
        outline = (*moments(shape), plastic(shape, found.depth * 1e3))
        assert ours == pytest.approx(outline, rel=2e-4), found.name  # arcs in segments


@pytest.mark.parametrize("kind", ["flat", "plate"])
def test_every_flat_and_plate_from_its_outline(kind):
    for found in catalogue(kind).values():
        d, b = 1e3 * found.depth, 1e3 * (found.width if kind == "flat" else 1.0)
        shape = box(0, 0, b, d)
        ours = (found.area * 1e6, found.inertia * 1e12, found.inertia_weak * 1e12, found.plastic * 1e9)
        assert ours == pytest.approx((*moments(shape), plastic(shape, d)))
        assert found.modulus * 1e9 == pytest.approx(moments(shape)[1] / (d / 2))


@pytest.mark.parametrize("name", ["flat 60×25", "flat 120×10", "RHS 60×40×3", "RHS 150×100×8", "SHS 120×120×10"])
def test_torsion_by_a_mesh_solver(name):
    """Saint-Venant's torsion on a mesh."""
    found = catalogue("flat" if name.startswith("flat") else "hollow")[name]
    # 0.5 %: what the formula of flats promises; Bredt with the wall's own part is as near
    assert found.torsion * 1e12 == pytest.approx(meshed_torsion(outline_of(found)), rel=5e-3)


@pytest.mark.parametrize("name", ["UPN 80", "UPN 160", "UPN 240"])
def test_torsion_of_channels_by_a_mesh_solver(name):
    row = next(row for row in rows("channels") if row["name"] == name)
    # 2 %: the tables' It is from an approximate formula
    assert catalogue("channel")[name].torsion * 1e12 == pytest.approx(meshed_torsion(tapered_channel(row)), rel=2e-2)


def outline_of(section: Section) -> Polygon:
    """A flat or a hollow section in mm."""
    if section.kind == "flat":
        return box(0, 0, 1e3 * section.width, 1e3 * section.depth)
    return tube(section)


def meshed_torsion(shape: Polygon) -> float:
    """Torsion constant [mm⁴] of an outline, by sectionproperties."""
    from sectionproperties.analysis import Section as Meshed
    from sectionproperties.pre import Geometry

    geometry = Geometry(shape.simplify(0.01)).create_mesh(mesh_sizes=[shape.area / 150])
    solved = Meshed(geometry)
    solved.calculate_geometric_properties()
    solved.calculate_warping_properties()
    return solved.get_j()
