"""Where the steel of a rig is: outlines of levers, plates, pads and links in metres, in plan and seen from the side."""

from __future__ import annotations

import numpy as np

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.hardware.model import Hardware
from rigdesign.levers.model import Hole, Piece
from rigdesign.target.curve import Floats


def direction(piece: Piece) -> tuple[float, float]:
    """Return the direction of a piece's u axis in plan, from hole A to hole B."""
    a, b = piece.ends[0], piece.ends[1]
    far = float(np.hypot(b.x - a.x, b.y - a.y))
    return ((b.x - a.x) / far, (b.y - a.y) / far) if far > 0 else (1.0, 0.0)


def in_plan(piece: Piece, u: Floats, v: Floats) -> Floats:
    """Return places x, y (n, 2) [m] of points u, v (n,) [m] in a piece's frame."""
    ax, ay = direction(piece)
    pivot = piece.pivot
    return np.column_stack([pivot.x + u * ax - v * ay, pivot.y + u * ay + v * ax])


def bars(hardware: Hardware, piece: Piece) -> list[Floats]:
    """Return the outlines (n, 2) [m] in plan of a piece's profiles, one or two with a gap between, or of a plate."""
    body = hardware.bodies[piece.name]
    if piece.kind == "plate":
        return [in_plan(piece, body.outline[:, 0], body.outline[:, 1])]
    low, high = ends_of(hardware, piece)
    width = body.section.width + (body.side_plate if body.profiles == 2 else 0.0)
    if body.profiles == 1:
        strips = [(-body.across / 2, body.across / 2)]
    else:
        strips = [(body.gap / 2, body.gap / 2 + width), (-body.gap / 2 - width, -body.gap / 2)]
    u = np.array([low, high, high, low])
    return [in_plan(piece, u, np.array([a, a, b, b])) for a, b in strips]


def ends_of(hardware: Hardware, piece: Piece) -> tuple[float, float]:
    """Return u [m] of both ends of a lever's steel."""
    overhang = hardware.bodies[piece.name].overhang
    places = [hole.u for hole in piece.ends]
    return min(places) - overhang, max(places) + overhang


def reach_along_x(hardware: Hardware, piece: Piece) -> tuple[float, float]:
    """Return the least and the greatest x [m] of a piece's steel."""
    x = np.concatenate([bar[:, 0] for bar in bars(hardware, piece)])
    return float(x.min()), float(x.max())


def depth_of(hardware: Hardware, piece: Piece) -> float:
    """Return how deep a piece's steel is, upright [m]."""
    return hardware.bodies[piece.name].section.depth


def place_of(hardware: Hardware, name: str, hole: str) -> tuple[float, float]:
    """Return x, y [m] of what a link's end is pinned to: a hole of a piece, a pad, or a jack."""
    kind, number = name.split()
    if kind == "pad":
        row = int(number) - 1
        return float(hardware.rig.pad_x[row]), float(hardware.rig.pad_y[row])
    if kind == "jack":
        jack = next(tree.jack for tree in hardware.rig.trees if tree.jack.name == name)
        return jack.x, jack.y
    found = hole_of(hardware, name, hole)
    return found.x, found.y


def hole_of(hardware: Hardware, name: str, hole: str) -> Hole:
    """Return a hole of a piece."""
    piece = next(piece for piece in hardware.pieces if piece.name == name)
    return next(found for found in piece.holes if found.name == hole)


def height_of(hardware: Hardware, name: str) -> float:
    """Return the height [m] of a piece's holes, of a pad's pin, or of the lower pin of a jack's cell."""
    if name.startswith("pad "):
        return hardware.pads[int(name.split()[1]) - 1].pin_height
    return hardware.heights[name]


def footprints(result: HardwareCheck) -> list[Floats]:
    """Return the corners (4, 2) [m] in plan of every pad's footprint; without a width it is half as wide as long."""
    brief, rig = result.check.rig.plan.target.brief, result.check.rig
    length = brief.pads.length or 0.02
    width = brief.pads.width or length / 2
    if brief.specimen.is_surface:
        from rigdesign.pads.surface.footprints import turns

        turn = turns(brief, rig.pad_x, rig.pad_y)
    else:
        turn = np.zeros(rig.pad_x.size)
    along = length / 2 * np.array([-1.0, 1.0, 1.0, -1.0])
    left = width / 2 * np.array([-1.0, -1.0, 1.0, 1.0])
    cos, sin = np.cos(turn)[:, None], np.sin(turn)[:, None]
    x = rig.pad_x[:, None] + along * cos - left * sin
    y = rig.pad_y[:, None] + along * sin + left * cos
    return list(np.stack([x, y], axis=2))


def top_height(result: HardwareCheck) -> float:
    """Return the greatest height of the rig [m], jacks among it."""
    hardware = result.hardware
    heights = [
        height_of(hardware, stack.jack) + stack.cell.length + stack.machine.standing for stack in hardware.stacks
    ]
    return max([result.space.total, *heights])
