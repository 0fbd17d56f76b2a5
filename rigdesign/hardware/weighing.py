"""What every member weighs, and where its centre is.

Steel is weighed net of its holes.  A lever: its profiles, spacers (tube and bolt) and side plates.  A link: rod, strap
or webbing between its fittings, the fittings, both pins, and its turnbuckle where it has one.  Nuts of rods, washers,
split pins and paint are left out.
"""

from __future__ import annotations

from collections.abc import Iterable
from math import pi

import numpy as np

from rigdesign.hardware.levers import side_width
from rigdesign.hardware.links import SHANK, STUD, TURNBUCKLE, round_area
from rigdesign.hardware.model import Body, End, Link, Mass, Section
from rigdesign.levers.model import HoleName, Piece
from rigdesign.target.curve import Floats

BOLT_ENDS = 0.020
"""The bolt of a spacer stands out of the profiles by so much in all [m], for head and nut."""

STEEL_DENSITY = 7850.0
"""Density of spacers, bolts and turnbuckles [kg/m³]."""

FORK_DEPTH = 2.0
"""Length of a fork's cheeks over the radius of their round end; common practice."""

WEIGHT_SHAPE = 1.2
"""Width of a counterweight, a cylinder of steel, over its length; set here."""


def lever_mass(piece: Piece, body: Body, holes: dict[HoleName, float]) -> Mass:
    """Return a lever's mass and centre in the piece's frame.

    `holes` are diameters [m] by the hole's name.
    """
    u = {hole.name: hole.u - piece.pivot.u for hole in piece.holes}
    first, last = u["A"] - body.overhang, u["B"] + body.overhang
    density, section = body.material.density, body.section
    parts = [(body.profiles * section.mass * (last - first), (first + last) / 2)]
    webs = 2 * section.web if body.build == "hollow section" else body.profiles * section.web
    parts += [(-density * webs * round_area(diameter), u[name]) for name, diameter in holes.items()]
    parts += [(-density * webs * round_area(holes["pivot"]), float(place)) for place, _ in body.old_pivots]
    if body.side_plate > 0:
        area = {name: side_width(diameter) * section.depth - round_area(diameter) for name, diameter in holes.items()}
        parts += [(2 * density * body.side_plate * area[name], u[name]) for name in holes]
    bored = density * body.profiles * section.web * round_area(body.spacer.bore)
    parts += [(spacer_mass(body) - bored, place) for place in body.spacers]
    return _summed(parts, [(mass, u[name]) for name, mass in body.counterweights.items()])


def spacer_mass(body: Body) -> float:
    """Mass of one spacer of a lever [kg]: a tube across the gap and a bolt through it."""
    spacer = body.spacer
    tube = round_area(spacer.tube) - round_area(spacer.bore)
    return STEEL_DENSITY * (body.gap * tube + (body.across + BOLT_ENDS) * round_area(spacer.bolt))


def weight_length(mass: float) -> float:
    """Length [m] of a counterweight of `mass` [kg], which is `WEIGHT_SHAPE` times as wide.

    >>> round(weight_length(STEEL_DENSITY * pi / 4 * WEIGHT_SHAPE**2 * 0.1**3), 6)
    0.1
    """
    return float((mass / (STEEL_DENSITY * round_area(WEIGHT_SHAPE))) ** (1 / 3))


def plate_mass(piece: Piece, body: Body, holes: dict[HoleName, float]) -> Mass:
    """Return a plate's mass and centre in the piece's frame, counterweights among it."""
    area, centre = _polygon(body.outline)
    density, thickness = body.material.density, body.section.depth
    places = {hole.name: np.array([hole.u - piece.pivot.u, hole.v - piece.pivot.v]) for hole in piece.holes}
    parts = [(density * thickness * area, centre)]
    parts += [(-density * thickness * round_area(diameter), places[name]) for name, diameter in holes.items()]
    parts += [(-density * thickness * round_area(holes["pivot"]), place) for place in body.old_pivots]
    parts += [(mass, places[name]) for name, mass in body.counterweights.items()]
    weights, at = np.array([mass for mass, _ in parts]), np.array([place for _, place in parts])
    total = weights.sum()
    middle = (weights[:, None] * at).sum(axis=0) / total
    return Mass(float(total), float(middle[0]), float(middle[1]))


def link_mass(link: Link, section: Section | None, line_mass: float, has_turnbuckle: bool, screw: float) -> float:
    """Return the mass of a link [kg] with its fittings, pins and turnbuckle.

    `section` is that of a strap, `line_mass` [kg/m] that of webbing; a rod needs neither.
    """
    reach = sum(fitting_length(link, end) for end in (link.upper, link.lower))
    between = max(link.length - reach, 0.0)
    if link.kind == "rod":
        body = link.material.density * round_area(link.width) * (between + _threaded(link))
    elif link.kind == "strap":
        assert section is not None
        body = section.mass * (link.length + link.upper.radius + link.lower.radius)
        body -= link.material.density * link.thickness * sum(round_area(end.hole) for end in (link.upper, link.lower))
    else:
        body = line_mass * (link.length + pi / 2 * (link.upper.pin + link.lower.pin))
    fittings = 0.0
    if link.kind == "rod":
        fittings = sum(link.fitting_material.density * _fitting_volume(link, end) for end in (link.upper, link.lower))
    pins = sum(
        link.pin_material.density * round_area(end.pin) * end.pin_length
        for end in (link.upper, link.lower)
        if end.fitting != "stud"
    )
    turnbuckle = STEEL_DENSITY * 3 * round_area(screw) * TURNBUCKLE * screw if has_turnbuckle else 0.0
    return float(body + fittings + pins + turnbuckle)


def fitting_length(link: Link, end: End) -> float:
    """Length of a fitting from its pin to where it holds a rod [m]; of a stud half the plate's thickness."""
    if link.kind != "rod":
        return end.radius
    if end.fitting == "stud":
        return end.inner / 2
    return end.radius * (FORK_DEPTH if end.fitting == "fork" else 1.0) + SHANK * link.width


def _threaded(link: Link) -> float:
    """Rod inside its fittings and beyond its nuts [m]."""
    inside = 0.0
    for end in (link.upper, link.lower):
        inside += end.inner + 2 * STUD * link.width if end.fitting == "stud" else SHANK * link.width
    return inside


def _fitting_volume(link: Link, end: End) -> float:
    """Steel of an eye or fork [m³]: its round plates net of the hole, and a socket of twice the rod's diameter."""
    if end.fitting == "stud":
        return 0.0
    socket = SHANK * link.width * (round_area(2 * link.width) - round_area(link.width))
    if end.fitting == "fork":
        cheek = pi / 2 * end.radius**2 + 2 * end.radius * (FORK_DEPTH - 1.0) * end.radius - round_area(end.hole)
        return socket + 2 * end.outer * cheek
    return socket + end.inner * (pi * end.radius**2 - round_area(end.hole))


def _polygon(corners: Floats) -> tuple[float, Floats]:
    """Area [m²] and centre (2,) [m] of a polygon."""
    x, y = corners[:, 0], corners[:, 1]
    cross = x * np.roll(y, -1) - np.roll(x, -1) * y
    area = float(cross.sum()) / 2
    centre = np.array([((x + np.roll(x, -1)) * cross).sum(), ((y + np.roll(y, -1)) * cross).sum()]) / (6 * area)
    return area, centre


def _summed(*groups: Iterable[tuple[float, float]]) -> Mass:
    """Mass and centre along a lever of parts (mass, place)."""
    parts = [part for group in groups for part in group]
    total = sum(mass for mass, _ in parts)
    return Mass(total, sum(mass * place for mass, place in parts) / total, 0.0)
