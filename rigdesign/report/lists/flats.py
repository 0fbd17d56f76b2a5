"""Flats and plates as they are cut and drilled: outline and holes of each mark, seen from its datum."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.hardware.levers import side_width
from rigdesign.hardware.model import Body, Hardware
from rigdesign.levers.model import Piece
from rigdesign.report.lists.drilling import piece_drill_rows
from rigdesign.report.lists.members import by_mark, ends_by_place, pieces_by_name, steel_length
from rigdesign.target.curve import Floats

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck


DATUM_LEVER = "datum: end beyond hole A, mid depth"
DATUM_PLATE = "datum: left and lower edge, u to the right"
DATUM_SIDE = "datum: left end, mid depth"


@dataclass(frozen=True)
class RoundHole:
    """A hole of a flat: its name, place `x`, `y` from the datum, its diameter and that of its pin or bolt [m].

    The name is that of the lever's hole, "spacer" where the bolt of a spacer goes through, or "old pivot".
    """

    name: str
    x: float
    y: float
    diameter: float
    pin: float


@dataclass(frozen=True)
class Flat:
    """A flat or plate: its outline's corners (n, 2) [m], counter-clockwise, its holes, and what it is made from.

    Of a lever's flat x runs along u from the datum end, the end beyond hole A, and y across from mid depth; so too of
    a side plate, from its own end.  Of a plate x runs along u from its least u, y along v from its least v.
    `quantity` is how many the rig needs, `thickness` [m], `density` [kg/m³]; `datum` says in words where x and y start.
    """

    mark: str
    outline: Floats
    holes: tuple[RoundHole, ...]
    thickness: float
    material: str
    density: float
    quantity: int
    datum: str

    @property
    def area(self) -> float:
        """Area of its face less its holes [m²]."""
        x, y = self.outline.T
        whole = 0.5 * float(x @ np.roll(y, -1) - y @ np.roll(x, -1))
        return whole - math.fsum(math.pi / 4 * hole.diameter**2 for hole in self.holes)

    @property
    def mass(self) -> float:
        """Mass of one [kg]."""
        return self.area * self.thickness * self.density


def flat_shapes(result: HardwareCheck) -> tuple[Flat, ...]:
    """Return the shape of each mark that is cut from flat or plate: levers of twin flats, plates, side plates.

    Channels and hollow sections have no shape here: their holes are in the drill list.
    """
    return flat_shapes_of(result.hardware)


def flat_shapes_of(hardware: Hardware) -> tuple[Flat, ...]:
    """Like `flat_shapes`, from the hardware alone."""
    pieces = pieces_by_name(hardware)
    shapes = []
    for mark, members in by_mark(hardware, pieces).items():
        piece, body = pieces[members[0]], hardware.bodies[members[0]]
        if body.build == "twin flats":
            shapes.append(_lever_flat(hardware, mark, piece, len(members)))
        elif body.build == "plate":
            shapes.append(_plate(hardware, mark, piece, len(members)))
    return (*shapes, *side_plates_of(hardware))


def side_plates_of(hardware: Hardware) -> tuple[Flat, ...]:
    """Return the plates that are welded on the webs of hollow sections, two at each hole.

    They are "L1_side" where all of a lever are alike, else "L1_side_pivot" and so on, by the first hole of a size.
    """
    pieces, ends = pieces_by_name(hardware), ends_by_place(hardware.links)
    shapes = []
    for mark, members in by_mark(hardware, pieces).items():
        piece, body = pieces[members[0]], hardware.bodies[members[0]]
        if body.side_plate <= 0:
            continue
        sizes: dict[float, list[str]] = {}
        for hole in piece.holes:
            sizes.setdefault(ends[f"{piece.name} {hole.name}"].hole, []).append(hole.name)
        for diameter, names in sizes.items():
            name = f"{mark}_side" if len(sizes) == 1 else f"{mark}_side_{names[0]}"
            pin = ends[f"{piece.name} {names[0]}"].pin
            shapes.append(_side_plate(name, body, diameter, pin, 2 * len(names) * len(members)))
    return tuple(shapes)


def _holes(hardware: Hardware, piece: Piece, body: Body) -> tuple[RoundHole, ...]:
    """Holes for pins and for the bolts of spacers, from the datum on."""
    rows = [
        RoundHole(row.hole, row.along, row.across, row.diameter, row.pin)
        for row in piece_drill_rows(hardware, piece, body)
    ]
    return tuple(rows)


def _lever_flat(hardware: Hardware, mark: str, piece: Piece, count: int) -> Flat:
    body = hardware.bodies[piece.name]
    long, half = steel_length(piece, body), 0.5 * body.section.depth
    outline = np.array([[0.0, -half], [long, -half], [long, half], [0.0, half]])
    return Flat(mark, outline, _holes(hardware, piece, body), body.section.width, body.material.name,
                body.material.density, body.profiles * count, DATUM_LEVER)  # fmt: skip


def _plate(hardware: Hardware, mark: str, piece: Piece, count: int) -> Flat:
    body = hardware.bodies[piece.name]
    outline = body.outline - body.outline.min(axis=0)
    return Flat(mark, outline, _holes(hardware, piece, body), body.section.depth, body.material.name,
                body.material.density, count, DATUM_PLATE)  # fmt: skip


def _side_plate(mark: str, body: Body, diameter: float, pin: float, count: int) -> Flat:
    long, half = side_width(diameter), 0.5 * body.section.depth
    outline = np.array([[0.0, -half], [long, -half], [long, half], [0.0, half]])
    hole = RoundHole("pin", 0.5 * long, 0.0, diameter, pin)
    return Flat(mark, outline, (hole,), body.side_plate, body.material.name, body.material.density, count, DATUM_SIDE)
