"""What a detail says of one part mark of levers or plates: members, steel, holes, pins, mass, and its mirror image."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.hardware.model import Body, End, Hardware, Mass
from rigdesign.levers.model import Piece
from rigdesign.report.lists import DrillRow, PartRow, drill_rows, part_rows, pin_rows
from rigdesign.report.sheets.schedules import numbers

ALIKE = 0.5e-4
"""Arms that agree to this are those of one shape [m]: less than any hole's tolerance."""


@dataclass(frozen=True)
class PartFacts:
    """A part mark: its row of the parts list, one of its pieces with body and mass, its holes, and more.

    `pins` gives the pin's mark by hole ("" at studs), `mirror` the mark that is its mirror image ("" for none), and
    `spacer` the mark of its spacers ("" for none).  `pivot_end` is the link's end at the
    pivot, `sides` are the rows of its side plates.
    """

    row: PartRow
    piece: Piece
    body: Body
    mass: Mass
    holes: tuple[DrillRow, ...]
    pins: Mapping[str, str]
    mirror: str
    spacer: str
    pivot_end: End
    sides: tuple[PartRow, ...]

    @property
    def members(self) -> str:
        """Which levers it is, in words: "lever 3", "levers 3, 7".

        The numbers of plates are among those of levers.
        """
        words = numbers(self.row.members)
        return words if self.row.kind == "lever" else words.replace("lever", "plate")


def detailed_parts(result: HardwareCheck) -> tuple[PartFacts, ...]:
    """Return the marks of levers, then those of plates, as they are detailed."""
    hardware = result.hardware
    rows = part_rows(result)
    pins = {where: row.mark for row in pin_rows(result) for where in row.places}
    spacers = {name: row.mark for row in rows if row.kind == "spacer" for name in row.members}
    holes: dict[str, list[DrillRow]] = {}
    for hole in drill_rows(result):
        holes.setdefault(hole.mark, []).append(hole)
    pieces = {piece.name: piece for piece in hardware.pieces}
    own = [row for row in rows if row.kind in ("lever", "plate") and row.mark == hardware.marks[row.members[0]]]
    sides = {row.mark: row for row in rows if row.kind == "plate" and row not in own}
    shapes = {row.mark: _shape(hardware, pieces[row.members[0]]) for row in own}
    found = []
    for row in own:
        name = row.members[0]
        at = {str(hole.name): pins.get(f"{name} {hole.name}", "") for hole in pieces[name].holes}
        found.append(
            PartFacts(row, pieces[name], hardware.bodies[name], hardware.masses[name], tuple(holes[row.mark]), at,
                      _mirror(row.mark, shapes), spacers.get(name, ""), hardware.end_at(name, "pivot"),
                      tuple(side for mark, side in sides.items() if mark.startswith(f"{row.mark}_")))
        )  # fmt: skip
    return tuple(found)


def _shape(hardware: Hardware, piece: Piece) -> tuple[str, tuple[float, ...]]:
    """What makes a piece's shape: section, and the places of its outer holes and pivot."""
    body = hardware.bodies[piece.name]
    places = [(hole.u, hole.v) for hole in piece.holes]
    return f"{piece.kind} {body.build} {body.section.name}", tuple(np.array(places).ravel().tolist())


def _mirror(mark: str, shapes: dict[str, tuple[str, tuple[float, ...]]]) -> str:
    """The mark of the same steel whose holes are the mirror image of this one's, "" where there is none."""
    steel, places = shapes[mark]
    own = np.array(places).reshape(-1, 2)
    if own.shape[0] == 3 and abs(own[1, 0] + own[2, 0]) < ALIKE:
        return ""  # its own mirror image
    for other, (other_steel, other_places) in shapes.items():
        theirs = np.array(other_places).reshape(-1, 2)
        if other == mark or other_steel != steel or theirs.shape != own.shape:
            continue
        if own.shape[0] == 3:
            if np.allclose(own[[1, 2], 0], -theirs[[2, 1], 0], atol=ALIKE):
                return other
        elif _mirrored_triangle(own[1:], theirs[1:]):
            return other
    return ""


def _mirrored_triangle(own: NDArray[np.float64], theirs: NDArray[np.float64]) -> bool:
    """Whether two triangles about their pivots are mirror images and not the same when turned."""
    sides, far = _sides(own), np.hypot(own[:, 0], own[:, 1])
    other_sides, other_far = _sides(theirs)[::-1], np.hypot(theirs[:, 0], theirs[:, 1])[[1, 0, 2]]
    for turn in range(3):
        if np.allclose(sides, np.roll(_sides(theirs), turn), atol=ALIKE):
            return False
    # backwards round: corners B, A, C have the sides AB, AC … in the other order
    return any(
        np.allclose(sides, np.roll(np.roll(other_sides, 1), turn), atol=ALIKE)
        and np.allclose(far, np.roll(other_far, turn), atol=ALIKE)
        for turn in range(3)
    )


def _sides(corners: NDArray[np.float64]) -> NDArray[np.float64]:
    """Lengths of the sides AB, BC, CA."""
    return np.asarray(np.hypot(*(np.roll(corners, -1, axis=0) - corners).T))
