"""Flats and plates as they are cut and drilled: outline and holes of each mark, seen from its datum."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.hardware.model import Body, Hardware
from rigdesign.levers.model import Piece
from rigdesign.report.lists.drilling import from_datum
from rigdesign.report.lists.members import by_mark, ends_by_place, pieces_by_name, steel_length
from rigdesign.target.curve import Floats

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck


@dataclass(frozen=True)
class RoundHole:
    """A hole of a flat: its name, place `x`, `y` from the datum and diameters of hole and pin [m]."""

    name: str
    x: float
    y: float
    diameter: float
    pin: float


@dataclass(frozen=True)
class Flat:
    """A flat or plate: its outline's corners (n, 2) [m], counter-clockwise, its holes, and what it is made from.

    Of a lever's flat x runs along u from the datum end, the end beyond hole A, and y across from mid depth.  Of a
    plate x runs along u from its least u, y along v from its least v.  `quantity` is how many the rig needs,
    `thickness` [m], `density` [kg/m³].
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
        holes = _holes(hardware, piece, body)
        if body.build == "twin flats":
            shapes.append(_lever_flat(mark, piece, body, holes, len(members)))
        elif body.build == "plate":
            shapes.append(_plate(mark, body, holes, len(members)))
    return tuple(shapes)


def _holes(hardware: Hardware, piece: Piece, body: Body) -> tuple[RoundHole, ...]:
    ends = ends_by_place(hardware.links)
    rows = []
    for hole in sorted(piece.holes, key=lambda hole: (hole.u, hole.v)):
        end = ends[f"{piece.name} {hole.name}"]
        rows.append(RoundHole(hole.name, *from_datum(piece, body, hole), end.hole, end.pin))
    return tuple(rows)


def _lever_flat(mark: str, piece: Piece, body: Body, holes: tuple[RoundHole, ...], count: int) -> Flat:
    long, half = steel_length(piece, body), 0.5 * body.section.depth
    outline = np.array([[0.0, -half], [long, -half], [long, half], [0.0, half]])
    return Flat(mark, outline, holes, body.section.width, body.material.name, body.material.density,
                body.profiles * count, "datum: end beyond hole A, mid depth")  # fmt: skip


def _plate(mark: str, body: Body, holes: tuple[RoundHole, ...], count: int) -> Flat:
    outline = body.outline - body.outline.min(axis=0)
    return Flat(mark, outline, holes, body.section.depth, body.material.name, body.material.density, count,
                "datum: left and lower edge, u to the right")  # fmt: skip
