"""Every member of a rig as convex solids of true size, at rest, and what it hangs by.

Places are x, y in plan and h towards the jack, z = side · h [m].  What is drawn of what:

- a lever of twin flats: two boxes; of twin channels: web and flanges, a box each; of a hollow section: a box, and its
  side plates, as deep as the section; its spacers, cylinders that stand out 10 mm on either side for the heads
  and washers of their bolts;
- a plate: its outline, or the least convex one about it, through its thickness;
- a counterweight: two halves about the link at its hole that make up a cylinder of steel, 1.2 times as wide as long,
  hung plumb below the steel that it hangs at, on the side that gravity pulls to;
- a link: its rod as a cylinder, its strap or webbing as a box with a turnbuckle, where it has one, in the middle; eyes
  as discs, forks as two cheeks and the bridge that joins them beyond the steel that they straddle, their sockets twice
  as wide as the rod; studs with washers (0.7 of the stud's diameter high on each face) and what stands out beyond (1.3
  of it high, 1.8 of it wide, as the nut is); pins as cylinders of their grip length, without heads;
- a pad: its footprint (100 mm where the brief gives no length or width) from the surface to its pin, and its lugs;
- a jack with its cell: two cylinders 2.5 times as wide as their pins, the jack at half its stroke.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from rigdesign.checks.hardware.shapes import box, cylinder, prism
from rigdesign.hardware.levers import side_width
from rigdesign.hardware.model import Body, End, Hardware, JackStack, Link, PadBody
from rigdesign.hardware.weighing import WEIGHT_SHAPE, weight_length
from rigdesign.levers.model import HoleName, Piece, Tree
from rigdesign.pads.surface.footprints import turns
from rigdesign.target.curve import Floats

NO_FOOTPRINT = 0.1  # m, of a pad whose length or width the brief does not give
HEAD = 0.010  # m, how far the head of a bolt stands out
WASHER, STUD_END, NUT_WIDTH = 0.7, 1.3, 1.8  # of a stud's diameter
CHEEK = 2.0  # length of a fork's cheeks over the radius of their round end, where the steel needs no longer ones
BRIDGE_GAP = 0.005  # m, from the steel that a fork straddles to its bridge
SOCKET_LENGTH, SOCKET_WIDTH = 2.5, 2.0  # of an eye or fork, over the rod's diameter
TURNBUCKLE = 4.0  # length of a turnbuckle over what it adjusts either way, which is its width
MACHINE_WIDTH = 2.5  # of jacks and cells, over their pin

UP = np.array([0.0, 0.0, 1.0])


@dataclass(frozen=True)
class Member:
    """A member: its solids' corners (k, 3) [m], seen from its `place` (3,), and how it moves.

    `above` is the lever or plate that it hangs by ("" on the jack's side), `end` the index of that piece's hole (A 0),
    `arm` (3,) [m] from that piece's pivot to the hole.  `axes` (n, 3) are the level unit vectors about which it turns:
    one of a lever, three of a plate, none of all else.  `joined` are the names of those it is pinned to, `beside`
    those of links in other holes of the same pieces.
    """

    name: str
    place: Floats
    solids: tuple[Floats, ...]
    above: str
    end: int
    arm: Floats
    axes: Floats
    joined: frozenset[str]
    beside: frozenset[str] = frozenset()


_Spot = tuple[str, int, Floats]


def members(hardware: Hardware) -> tuple[Member, ...]:
    """Return all members, tree by tree, each before what hangs on it, the links first that hold it."""
    return tuple(member for number, tree in enumerate(hardware.rig.trees) for member in _Parts(hardware, tree, number))


class _Parts:
    """The members of one tree in order of depth, from the jack."""

    def __init__(self, hardware: Hardware, tree: Tree, number: int) -> None:
        self.hardware, self.tree, self.stack = hardware, tree, hardware.stacks[number]
        self.pieces = {piece.name: piece for piece in tree.pieces}
        self.frames = {piece.name: _frame(piece) for piece in tree.pieces}
        brief = hardware.rig.plan.target.brief
        self.turns = turns(brief, hardware.rig.pad_x, hardware.rig.pad_y)
        self.links_of = {
            name: [hardware.link_above[joined].name for joined in (name, *(hole.joins for hole in piece.ends))]
            for name, piece in self.pieces.items()
        }
        self.down = hardware.side * brief.specimen.gravity

    def __iter__(self) -> Iterator[Member]:
        jack = self.tree.jack
        place = np.array([jack.x, jack.y, self.hardware.heights[jack.name]])
        none = np.zeros(3)
        joined = frozenset({self.hardware.link_above[jack.carries].name})
        yield Member(jack.name, place, tuple(_machines(self.stack)), "", 0, none, np.empty((0, 3)), joined)
        yield from self._hung(jack.carries, place, ("", 0, none))

    def _hung(self, name: str, hole: Floats, spot: _Spot) -> Iterator[Member]:
        """What hangs at a place (3,): the link, and the piece or pad that it carries with all below."""
        link = self.hardware.link_above[name]
        above, end, arm = spot
        still = np.empty((0, 3))
        joined = frozenset({link.upper.to, link.lower.to})
        beside = frozenset(name for piece in joined for name in self.links_of.get(piece, ())) - {link.name}
        yield Member(link.name, hole, tuple(self._link(link)), above, end, arm, still, joined, beside)
        if name in self.pieces:
            yield from self._piece(self.pieces[name], link, spot)
            return
        pad = self.hardware.pads[int(name.split()[1]) - 1]
        foot = np.array([self.hardware.rig.pad_x[pad.pad - 1], self.hardware.rig.pad_y[pad.pad - 1], pad.pin_height])
        yield Member(name, foot, tuple(self._pad(pad, link.lower)), above, end, arm, still, frozenset({link.name}))

    def _piece(self, piece: Piece, link: Link, spot: _Spot) -> Iterator[Member]:
        axes, body = self.frames[piece.name], self.hardware.bodies[piece.name]
        place = np.array([piece.pivot.x, piece.pivot.y, self.hardware.heights[piece.name]])
        turning = _plate_axes(piece, axes) if piece.kind == "plate" else axes[1:2]
        solids = tuple(self._piece_solids(piece, body, axes))
        yield Member(piece.name, place, solids, *spot, turning, frozenset(self.links_of[piece.name]))
        weights = dict(body.counterweights)
        if weights.get("pivot"):
            yield self._weight(piece, "pivot", weights["pivot"], link, place, spot)
        for i, hole in enumerate(piece.ends):
            arm = np.array([hole.x - piece.pivot.x, hole.y - piece.pivot.y, 0.0])
            yield from self._hung(hole.joins, place + arm, (piece.name, i, arm))
            if weights.get(hole.name):
                held = self.hardware.link_above[hole.joins]
                at: _Spot = (piece.name, i, arm)
                yield self._weight(piece, hole.name, weights[hole.name], held, place + arm, at)

    def _piece_solids(self, piece: Piece, body: Body, axes: Floats) -> Iterator[Floats]:
        """A lever's or plate's solids, seen from its pivot."""
        half = 0.5 * body.section.depth
        if piece.kind == "plate":
            yield prism(body.outline, axes, -half, half)
            return
        u = [hole.u - piece.pivot.u for hole in piece.ends]
        yield from _profile(body, axes, min(u) - body.overhang, max(u) + body.overhang)
        yield from _spacers(body, axes)
        inner = 0.5 * body.section.width
        for hole in piece.holes if body.side_plate > 0 else ():
            at, long = hole.u - piece.pivot.u, 0.5 * side_width(self.hardware.end_at(piece.name, hole.name).hole)
            for sided in _both_sides(axes):
                yield box(sided, (at - long, inner, -half), (at + long, inner + body.side_plate, half))

    def _weight(self, piece: Piece, hole: HoleName, mass: float, link: Link, place: Floats, spot: _Spot) -> Member:
        length = weight_length(mass)
        end = self.hardware.end_at(piece.name, hole)
        start = self.down * (self._half_depth(piece.name) + (_stud_reach(end) if end.fitting == "stud" else 0.0))
        block = cylinder(start * UP, (start + self.down * length) * UP, 0.5 * WEIGHT_SHAPE * length)
        name = f"counterweight at hole {hole} of {piece.name}" if hole != "pivot" else f"counterweight of {piece.name}"
        return Member(name, place, (block,), *spot, np.empty((0, 3)), frozenset({piece.name, link.name}))

    def _half_depth(self, name: str) -> float:
        """Half the height of a piece's steel [m]; of pads and jacks none counts."""
        return 0.5 * self.hardware.bodies[name].section.depth if name in self.hardware.bodies else 0.0

    def _link(self, link: Link) -> Iterator[Floats]:
        """A link's solids, seen from its upper hole."""
        axes = self._across(link)
        lower = -link.length * UP
        if link.kind != "rod":
            yield _band(link, axes[0])
            yield _pin(link.upper, axes[0], np.zeros(3))
            yield _pin(link.lower, axes[1], lower)
            if link.adjust > 0:
                middle, half = 0.5 * lower, 0.5 * TURNBUCKLE * link.adjust * UP
                yield cylinder(middle - half, middle + half, 0.5 * link.adjust)
            return
        yield from self._fitting(link.upper, axes[0], np.zeros(3), -1)
        yield from self._fitting(link.lower, axes[1], lower, 1)
        start, end = -self._rod_start(link.upper), self._rod_start(link.lower) - link.length
        if start > end:
            yield cylinder(start * UP, end * UP, 0.5 * link.width)
            long = min(SOCKET_LENGTH * link.width, start - end)
            if link.upper.fitting != "stud":
                yield cylinder(start * UP, (start - long) * UP, 0.5 * SOCKET_WIDTH * link.width)
            if link.lower.fitting != "stud":
                yield cylinder(end * UP, (end + long) * UP, 0.5 * SOCKET_WIDTH * link.width)

    def _across(self, link: Link) -> tuple[Floats, Floats]:
        """Directions of the link's two pins, (3,) each: square to levers; where there is none, as at its other end."""
        upper, lower = (
            self.frames[end.to][1] if end.to in self.frames and end.fitting != "stud" else None
            for end in (link.upper, link.lower)
        )
        given = next((axis for axis in (upper, lower) if axis is not None), np.array([0.0, 1.0, 0.0]))
        return (given if upper is None else upper), (given if lower is None else lower)

    def _rod_start(self, end: End) -> float:
        """How far the rod begins from the hole [m]."""
        if end.fitting == "fork":
            return self._cheek(end) + end.outer
        return 0.0 if end.fitting == "stud" else 0.9 * end.radius

    def _cheek(self, end: End) -> float:
        """From a fork's hole to its bridge [m]."""
        return max(self._half_depth(end.to) + BRIDGE_GAP, CHEEK * end.radius)

    def _fitting(self, end: End, across: Floats, at: Floats, towards: int) -> Iterator[Floats]:
        """One end of a rod at a hole (3,), the rod going up (+1) or down (−1) from there."""
        if end.fitting == "stud":
            washer, reach = 0.5 * end.inner + WASHER * end.pin, _stud_reach(end)
            yield cylinder(at - washer * UP, at + washer * UP, end.radius)
            yield cylinder(at - reach * UP, at + reach * UP, 0.5 * NUT_WIDTH * end.pin)
            return
        yield _pin(end, across, at)
        if end.fitting != "fork":
            yield cylinder(at - 0.5 * end.inner * across, at + 0.5 * end.inner * across, end.radius)
            return
        axes = np.array([np.cross(across, UP), across, towards * UP])
        inside, reach = 0.5 * end.inner + end.gap, self._cheek(end)
        outside = inside + end.outer
        for low, high in ((-outside, -inside), (inside, outside)):
            yield at + box(axes, (-end.radius, low, -end.radius), (end.radius, high, reach))
        yield at + box(axes, (-end.radius, -outside, reach), (end.radius, outside, reach + end.outer))

    def _pad(self, pad: PadBody, end: End) -> Iterator[Floats]:
        """A pad seen from its pin."""
        rules = self.hardware.rig.plan.target.brief.pads
        cos, sin = math.cos(self.turns[pad.pad - 1]), math.sin(self.turns[pad.pad - 1])
        axes = np.array([[cos, sin, 0.0], [-sin, cos, 0.0], UP])
        long, wide = 0.5 * (rules.length or NO_FOOTPRINT), 0.5 * (rules.width or NO_FOOTPRINT)
        yield box(axes, (-long, -wide, -pad.height), (long, wide, 0.0))
        across = self._across(self.hardware.link_above[f"pad {pad.pad}"])[1]
        lugs, half = np.array([np.cross(across, UP), across, UP]), 0.5 * end.inner + end.gap + end.outer
        yield box(lugs, (-end.radius, -half, -pad.height), (end.radius, half, end.radius))


def _frame(piece: Piece) -> Floats:
    """Unit vectors (3, 3) of a piece: u from A to B in plan, v to its left, and up."""
    a, b = piece.ends[:2]
    size = math.hypot(b.x - a.x, b.y - a.y)
    u, v = (b.x - a.x) / size, (b.y - a.y) / size
    return np.array([[u, v, 0.0], [-v, u, 0.0], UP])


def _plate_axes(piece: Piece, axes: Floats) -> Floats:
    """The directions of a plate's edges from point to point, (3, 3)."""
    flat = np.array([[hole.u, hole.v] for hole in piece.ends])
    edges = np.roll(flat, -1, axis=0) - flat
    return np.asarray((edges / np.linalg.norm(edges, axis=1)[:, None]) @ axes[:2])


def _profile(body: Body, axes: Floats, low: float, high: float) -> Iterator[Floats]:
    """A lever's one or two profiles, seen from its pivot, between two u [m]."""
    half, section = 0.5 * body.section.depth, body.section
    if body.profiles == 1:
        yield box(axes, (low, -0.5 * section.width, -half), (high, 0.5 * section.width, half))
        return
    inner = 0.5 * body.gap
    for sided in _both_sides(axes):
        if section.kind != "channel":
            yield box(sided, (low, inner, -half), (high, inner + section.width, half))
            continue
        yield box(sided, (low, inner, -half), (high, inner + section.web, half))
        for bottom in (-half, half - section.flange):
            yield box(sided, (low, inner, bottom), (high, inner + section.width, bottom + section.flange))


def _spacers(body: Body, axes: Floats) -> Iterator[Floats]:
    """Spacers and their bolts, seen from the pivot."""
    across = (0.5 * body.gap + body.section.web + HEAD) * axes[1]
    for at in body.spacers:
        yield cylinder(at * axes[0] - across, at * axes[0] + across, 0.5 * body.spacer.tube)


def _both_sides(axes: Floats) -> tuple[Floats, Floats]:
    return axes * np.array([[1.0], [-1.0], [1.0]]), axes


def _band(link: Link, across: Floats) -> Floats:
    """A strap, its thickness along the pins, or the two legs of webbing about them, its width along the pins."""
    axes = np.array([np.cross(across, UP), across, UP])
    if link.kind == "strap":
        half, wide = 0.5 * link.width, 0.5 * link.thickness
        beyond = max(link.upper.radius, link.lower.radius, half)
    else:
        half, wide = 0.5 * max(link.upper.pin, link.lower.pin) + link.thickness, 0.5 * link.width
        beyond = half
    return box(axes, (-half, -wide, -link.length - beyond), (half, wide, beyond))


def _pin(end: End, across: Floats, at: Floats) -> Floats:
    half = 0.5 * end.pin_length * across
    return cylinder(at - half, at + half, 0.5 * end.pin)


def _stud_reach(end: End) -> float:
    """How far a stud and its nut stand out from the middle of the plate [m]."""
    return 0.5 * end.inner + (WASHER + STUD_END) * end.pin


def _machines(stack: JackStack) -> Iterator[Floats]:
    """Cell and jack, seen from the cell's pin."""
    top = stack.cell.length + stack.machine.length + 0.5 * stack.machine.stroke
    if stack.cell.length > 0:
        yield cylinder(np.zeros(3), stack.cell.length * UP, 0.5 * MACHINE_WIDTH * stack.cell.pin)
    yield cylinder(stack.cell.length * UP, top * UP, 0.5 * MACHINE_WIDTH * stack.machine.pin)
