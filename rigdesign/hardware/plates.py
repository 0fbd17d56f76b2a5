"""Three-point plates: level steel plates through which threaded rods stand, on spherical washers.

The outline is the hull of circles about the pivot and the three points.  Bending is looked at about every straight line
through the pivot: the forces on one side of it, and the steel along it less the holes that it cuts.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import ceil

import numpy as np

from rigdesign.hardware.joints import Shop, passes, worst
from rigdesign.hardware.model import Section
from rigdesign.hardware.rules.model import PlateBending, Result
from rigdesign.target.curve import Floats

WASHER = 2.2
"""Diameter of a spherical washer over that of its rod; common practice (DIN 6319 is a little less)."""

EDGE = 1.5
"""From a hole's centre to the plate's edge, over the washer's radius; common practice."""

CORNERS = 16
"""The edge about a hole is drawn as a polygon with so many corners to the full circle, around the circle."""

DIRECTIONS = 360
"""Lines through the pivot that are looked at, over half a turn, besides those through the points."""


@dataclass(frozen=True)
class PlateTask:
    """What a plate must bear: its holes u, v [m] (4, 2), pivot first, loads [N] (4,), rods' diameters [m] (4,)."""

    holes: Floats
    loads: Floats
    rods: Floats


@dataclass(frozen=True)
class SizedPlate:
    """A plate's section (its thickness), outline (n, 2) [m], radius about its holes [m], and why it fails."""

    section: Section
    outline: Floats
    radius: float
    failure: Result | None


def edge_radius(rods: Floats) -> float:
    """Radius of the plate about its holes [m], a multiple of 5 mm."""
    return ceil(round(EDGE * WASHER / 2 * float(rods.max()) / 0.005, 6)) * 0.005


def outline(holes: Floats, radius: float) -> Floats:
    """Corners (n, 2) [m] of the hull of polygons about circles of `radius` [m] at the holes, counter-clockwise."""
    from shapely import MultiPoint

    angles = 2 * np.pi * np.arange(CORNERS) / CORNERS
    around = radius / np.cos(np.pi / CORNERS) * np.column_stack([np.cos(angles), np.sin(angles)])
    points = (holes[:, None, :] + around[None, :, :]).reshape(-1, 2)
    hull = np.array(MultiPoint(points).convex_hull.exterior.coords)[:-1]
    doubled = np.roll(hull, -1, axis=0)
    area = float((hull[:, 0] * doubled[:, 1] - hull[:, 1] * doubled[:, 0]).sum())
    return hull if area > 0 else hull[::-1].copy()


def worst_line(task: PlateTask, corners: Floats, diameters: Floats) -> tuple[float, float]:
    """Return moment [N·m] and width of steel [m] of the line through the pivot with the largest moment over width."""
    pivot, ends = task.holes[0], task.holes[1:] - task.holes[0]
    through = np.arctan2(ends[:, 1], ends[:, 0])
    angles = np.concatenate([np.pi * np.arange(DIRECTIONS) / DIRECTIONS, through, through + 1e-6, through - 1e-6])
    normal = np.stack([-np.sin(angles), np.cos(angles)])
    moment = np.maximum(normal.T @ ends.T, 0.0) @ task.loads[1:]
    widths = np.array([_width(corners - pivot, ends, diameters, angle) for angle in angles])
    ratio = np.where(widths > 0, moment / np.maximum(widths, 1e-12), np.inf)
    pick = int(np.argmax(ratio))
    return float(moment[pick]), float(widths[pick])


def _width(corners: Floats, ends: Floats, diameters: Floats, angle: float) -> float:
    """Steel along a line through the origin of a convex outline, less the holes that it cuts."""
    along, normal = np.array([np.cos(angle), np.sin(angle)]), np.array([-np.sin(angle), np.cos(angle)])
    off, place = (corners * normal).sum(axis=1), (corners * along).sum(axis=1)
    after, place_after = np.roll(off, -1), np.roll(place, -1)
    crossing = (off >= 0) != (after >= 0)
    t = off[crossing] / (off[crossing] - after[crossing])
    reached = place[crossing] + t * (place_after[crossing] - place[crossing])
    width = float(np.ptp(reached)) - diameters[0]
    for (u, v), diameter in zip(ends, diameters[1:], strict=True):
        distance = abs(float(u * normal[0] + v * normal[1]))
        if distance < diameter / 2:
            width -= 2 * float(np.sqrt((diameter / 2) ** 2 - distance**2))
    return float(width)


def plate_state(
    task: PlateTask, corners: Floats, section: Section, shop: Shop, line: tuple[float, float]
) -> PlateBending:
    """The plate about its worst line, and at the hole that is punched worst."""
    hole = int(np.argmax(task.loads / task.rods))
    return PlateBending(
        load=float(task.loads[hole]),
        moment=line[0],
        width=line[1],
        thickness=section.depth,
        washer=WASHER * float(task.rods[hole]),
        hole=float(task.rods[hole]) + shop.play,
        material=shop.steel,
    )


def size_plate(task: PlateTask, stock: tuple[Section, ...], shop: Shop) -> SizedPlate:
    """Return the thinnest plate that passes; the thickest, with the check that fails, where none does."""
    radius = edge_radius(task.rods)
    corners = outline(task.holes, radius)
    line = worst_line(task, corners, task.rods + shop.play)
    results: tuple[Result, ...] = ()
    for section in stock:
        results = shop.rules.plate(plate_state(task, corners, section, shop, line))
        if passes(results):
            return SizedPlate(section, corners, radius, None)
    return SizedPlate(stock[-1], corners, radius, worst(results))
