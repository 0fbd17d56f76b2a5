"""How high everything stands: tier by tier, from the pads to the jack.

All pieces of one tier of a tree stand at one height.  A tier stands as low as its links allow: fittings need room, and
levers that turn by their allowed angle must keep the clearance from what hangs below them.  What a link needs is the
largest of

    its fittings and adjuster;
    half the depths of both pieces, the clearance, and what turning brings them nearer;
    the length at which its swing stays in the brief's limit when its upper piece turns;
    the brief's own least length.

Turning: with the upper piece turned by φ and the lower one by −φ, a point of the lower one at a distance s from its
pivot under the upper one comes nearer by s · tan 2φ.  Only where one lies over the other in plan, or nearer to it
than the clearance, does s count.  A jack stands still: the piece under it comes nearer by s · tan φ.

Counterweights hang plumb at their holes, on the side that gravity pulls to.  Above the specimen that is over what the
same hole carries; below it, towards the jack, under the piece that theirs hangs by.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from math import ceil, cos, hypot, sin, tan

from rigdesign.brief.model_hardware import HardwareRules
from rigdesign.hardware.wiring import LinkPlace, Wired, weights_rise
from rigdesign.levers.model import Hole, HoleName, Piece

LEVEL_STEP = 0.005
"""Links between tiers are multiples of this [m], so that a workshop cuts round lengths."""

DUST = 9
"""Decimals to which heights are rounded [m], so that sums of round lengths are round."""

NO_TURN = 1e-9
"""Directions closer to one line than this [rad] are parallel."""


@dataclass(frozen=True)
class Block:
    """A counterweight: how far it ends from its hole's height, and its radius [m]."""

    reach: float
    radius: float


@dataclass(frozen=True)
class Shape:
    """What a piece or jack needs in height: half its depth, half its width and its overhang [m], and counterweights."""

    half_depth: float
    half_width: float
    overhang: float
    blocks: Mapping[HoleName, Block] = field(default_factory=dict)


@dataclass(frozen=True)
class Levels:
    """Heights [m] of pieces and jacks by name, and lengths of links [m] by name."""

    heights: Mapping[str, float]
    lengths: Mapping[str, float]


def stand(
    wiring: Wired,
    shapes: Mapping[str, Shape],
    pins: Mapping[str, float],
    lugs: Mapping[str, float],
    fittings: Callable[[LinkPlace], float],
) -> Levels:
    """Return how high every piece and jack stands.

    Parameters
    ----------
    shapes
        By name of the piece, and of the jack with its cell.
    pins
        Height of each pad's pin by name [m].
    lugs
        How far each pad's lugs stand up over its pin, by name [m].
    fittings
        What a link's own parts need, pin to pin [m].
    """
    rules = wiring.rig.plan.target.brief.hardware
    heights = dict(pins)
    for index, tree in enumerate(wiring.rig.trees):
        own = [link for link in wiring.links if link.tree == index]
        tiers = max((piece.tier for piece in tree.pieces), default=0)
        for tier in range(tiers, -1, -1):
            names = {piece.name for piece in tree.pieces if piece.tier == tier} if tier else {tree.jack.name}
            links = [link for link in own if link.upper[0] in names]
            levels = [
                heights[link.lower[0]] + needed(wiring, link, shapes, lugs, fittings(link), rules) for link in links
            ]
            heights |= dict.fromkeys(sorted(names), max(levels))
    lengths = {link.name: round(heights[link.upper[0]] - heights[link.lower[0]], DUST) for link in wiring.links}
    return Levels({name: height for name, height in heights.items() if name not in pins}, lengths)


def needed(
    wiring: Wired,
    link: LinkPlace,
    shapes: Mapping[str, Shape],
    lugs: Mapping[str, float],
    fittings: float,
    rules: HardwareRules,
) -> float:
    """Return the least length of a link [m], a multiple of `LEVEL_STEP`."""
    upper, lower = wiring.pieces.get(link.upper[0]), wiring.pieces.get(link.lower[0])
    below = shapes[lower.name].half_depth if lower is not None else lugs[link.lower[0]]
    over = shapes[link.upper[0]]
    nearing = _nearing(upper, lower, over, shapes, rules)
    wants = [fittings, rules.link_length, over.half_depth + below + rules.clearance + nearing]
    if upper is not None:
        hole = next(hole for hole in upper.ends if hole.name == link.upper[1])
        wants.append(_arm(upper, hole) * (1.0 - cos(rules.turn)) / tan(rules.swing))
        if lower is not None and weights_rise(wiring.rig):
            wants += _under_upper(upper, lower, shapes, rules)
        elif hole.name in over.blocks:
            block, turn = over.blocks[hole.name], 0.0 if lower is None else rules.turn
            wants.append(block.reach + below + rules.clearance + (block.radius + rules.clearance) * tan(turn))
    return ceil(round(max(wants) / LEVEL_STEP, 6)) * LEVEL_STEP


def _arm(piece: Piece, hole: Hole) -> float:
    """From a piece's pivot to a hole [m]."""
    return hypot(hole.u - piece.pivot.u, hole.v - piece.pivot.v)


def _under_upper(upper: Piece, lower: Piece, shapes: Mapping[str, Shape], rules: HardwareRules) -> list[float]:
    """Lengths [m] that keep counterweights, which stand up from the lower piece, clear of the upper one over them."""
    wants = []
    over = shapes[upper.name]
    for hole in lower.ends:
        block = shapes[lower.name].blocks.get(hole.name)
        if block is None:
            continue
        near = block.radius + rules.clearance
        if _beside(upper, (hole.x, hole.y)) <= max(over.half_width, over.overhang) + near:
            nearing = _arm(lower, hole) * tan(2 * rules.turn) + near * tan(rules.turn)
            wants.append(over.half_depth + block.reach + rules.clearance + nearing)
    return wants


def _beside(piece: Piece, place: tuple[float, float]) -> float:
    """Distance in plan of a place from a lever's line between its end holes [m]; of a plate none."""
    if piece.kind == "plate":
        return 0.0
    first, last = piece.ends[0], piece.ends[-1]
    dx, dy = last.x - first.x, last.y - first.y
    part = ((place[0] - first.x) * dx + (place[1] - first.y) * dy) / (dx * dx + dy * dy)
    part = min(1.0, max(0.0, part))
    return hypot(place[0] - first.x - part * dx, place[1] - first.y - part * dy)


def _nearing(
    upper: Piece | None, lower: Piece | None, over: Shape, shapes: Mapping[str, Shape], rules: HardwareRules
) -> float:
    """What turning brings two joined members nearer to each other [m]."""
    if upper is None:
        return (over.half_width + rules.clearance) * tan(rules.turn) if lower is not None else 0.0
    if lower is None:
        return over.overhang * sin(rules.turn)
    reach = max(
        _under(upper, lower, (end.x - lower.pivot.x, end.y - lower.pivot.y), shapes, rules.clearance)
        for end in lower.ends
    )
    return reach * tan(2 * rules.turn)


def _under(
    upper: Piece, lower: Piece, end: tuple[float, float], shapes: Mapping[str, Shape], clearance: float
) -> float:
    """How far along its arm to `end` (from the pivot, [m]) the lower piece lies under the upper one or near it."""
    dx, dy = end
    arm = hypot(dx, dy) + shapes[lower.name].overhang
    if upper.kind == "plate" or lower.kind == "plate":
        return arm
    first, last = upper.ends[0], upper.ends[-1]
    along_x, along_y = last.x - first.x, last.y - first.y
    inward_x, inward_y = upper.pivot.x - lower.pivot.x, upper.pivot.y - lower.pivot.y
    length = hypot(along_x, along_y)
    across = abs(along_x * dy - along_y * dx) / (length * max(hypot(dx, dy), NO_TURN))
    band = shapes[upper.name].half_width + shapes[lower.name].half_width + clearance
    crossed = arm if across < NO_TURN else min(arm, band / across)
    if dx * inward_x + dy * inward_y > 0:
        return crossed
    # an arm that points away from the upper pivot lies under its overhang alone
    return min(crossed, shapes[upper.name].overhang + band)
