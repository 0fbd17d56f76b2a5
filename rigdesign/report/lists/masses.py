"""Masses and their centres: of each member, of each tree, and of all trees together."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING

from rigdesign.hardware.model import Hardware, Mass
from rigdesign.levers.model import Piece, Tree
from rigdesign.report.lists.model import Centre

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck


def centres(result: HardwareCheck) -> tuple[Centre, ...]:
    """Return mass and centre of levers and plates, links and pads tree by tree, each tree, and all where several."""
    return centres_of(result.hardware)


def centres_of(hardware: Hardware) -> tuple[Centre, ...]:
    """Like `centres`, from the hardware alone."""
    rows: list[Centre] = []
    trees: list[Centre] = []
    for tree in hardware.rig.trees:
        own = _members(hardware, tree)
        rows += own
        trees.append(_together(f"tree {tree.jack.number}", own))
    rows += trees
    return (*rows, _together("rig", trees)) if len(trees) > 1 else tuple(rows)


def tree_mass(hardware: Hardware) -> float:
    """Mass of all that hangs on the cells [kg], counterweights among it."""
    return math.fsum(mass.mass for mass in hardware.masses.values())


def _members(hardware: Hardware, tree: Tree) -> list[Centre]:
    """Pieces, then links, then pads of one tree."""
    at = _places(hardware, tree)
    pieces = [_piece(hardware, piece) for piece in tree.pieces]
    names = {tree.jack.name, *(piece.name for piece in tree.pieces)}
    links, pads = [], []
    for link in hardware.links:
        if link.upper.to not in names:
            continue
        x, y, lower = at[link.lower.to]
        height = 0.5 * (hardware.heights[link.upper.to] + lower)
        links.append(
            Centre(link.name, hardware.marks[link.name], hardware.masses[link.name].mass, x, y, height, None, None)
        )
        if link.lower.to.startswith("pad "):
            pad = hardware.pads[int(link.lower.to.split()[1]) - 1]
            mass = hardware.masses[link.lower.to].mass
            height = pad.surface + 0.5 * pad.height
            pads.append(Centre(link.lower.to, hardware.marks[link.lower.to], mass, x, y, height, None, None))
    return [*pieces, *links, *pads]


def _places(hardware: Hardware, tree: Tree) -> Mapping[str, tuple[float, float, float]]:
    """Where the links' lower ends are: x, y and height [m] of pivots and pads."""
    rig = hardware.rig
    places = {piece.name: (piece.pivot.x, piece.pivot.y, hardware.heights[piece.name]) for piece in tree.pieces}
    pads = {
        f"pad {pad.pad}": (float(rig.pad_x[pad.pad - 1]), float(rig.pad_y[pad.pad - 1]), pad.pin_height)
        for pad in hardware.pads
    }
    return places | pads


def _piece(hardware: Hardware, piece: Piece) -> Centre:
    mass: Mass = hardware.masses[piece.name]
    a, b = piece.ends[0], piece.ends[1]
    size = math.hypot(b.x - a.x, b.y - a.y)
    along = ((b.x - a.x) / size, (b.y - a.y) / size)
    x = piece.pivot.x + mass.u * along[0] - mass.v * along[1]
    y = piece.pivot.y + mass.u * along[1] + mass.v * along[0]
    height = hardware.heights[piece.name]
    return Centre(piece.name, hardware.marks[piece.name], mass.mass, x, y, height, mass.u, mass.v)


def _together(name: str, rows: Sequence[Centre]) -> Centre:
    total = math.fsum(row.mass for row in rows)

    def mean(values: Sequence[float]) -> float:
        return math.fsum(row.mass * value for row, value in zip(rows, values, strict=True)) / total

    x, y = mean([row.x for row in rows]), mean([row.y for row in rows])
    return Centre(name, "", total, x, y, mean([row.height for row in rows]), None, None)
