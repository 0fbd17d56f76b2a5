"""From sizes to members: bodies, links with their ends, pads, masses, all with their places."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.brief.model_hardware import Surface
from rigdesign.hardware import levers, weighing
from rigdesign.hardware.catalogue import material, threads, webbings
from rigdesign.hardware.joints import Joint, pin_length, strap_end
from rigdesign.hardware.levels import Block, Shape
from rigdesign.hardware.links import ADJUST, ROD_GRADE, SHANK, STUD, TURNBUCKLE, LinkSize, screw_for
from rigdesign.hardware.model import Body, End, Fitting, Link, LinkKind, Mass, PadBody
from rigdesign.hardware.sizing import Bench, Sizes, inner_of
from rigdesign.hardware.wiring import LinkPlace, Place, Wired
from rigdesign.levers.model import HoleName
from rigdesign.target.curve import Floats
from rigdesign.words import ROUNDING

LEAST_ROD = 0.02
"""Free rod between two fittings [m], for a spanner; common practice."""

MACHINE_WIDTH = 2.5
"""Width of jacks and cells over their pin; common practice."""

Counterweights = Mapping[str, Mapping[HoleName, float]]


def surface_heights(surface: Surface | None, side: int, x: Floats, y: Floats) -> Floats:
    """Return the heights [m] of the specimen's surface at x, y (n,) [m], towards the rig.

    Linear between the points that the brief gives, beyond them the value of the nearest.
    """
    if surface is None:
        return np.zeros(x.size)
    if surface.y.size == 0:
        return np.asarray(side * np.interp(x, surface.x, surface.z))
    from scipy.interpolate import LinearNDInterpolator, NearestNDInterpolator

    points = np.column_stack([surface.x, surface.y])
    at = np.column_stack([x, y])
    inside = LinearNDInterpolator(points, surface.z)(at)
    return np.asarray(side * np.where(np.isnan(inside), NearestNDInterpolator(points, surface.z)(at), inside))


def off_surface(surface: Surface | None, x: Floats, y: Floats) -> list[int]:
    """Return the numbers of the places x, y (n,) [m], from 1, that lie beyond what the brief tells of the surface."""
    if surface is None:
        return []
    if surface.y.size == 0:
        beyond = (x < surface.x.min() - ROUNDING) | (x > surface.x.max() + ROUNDING)
    else:
        from shapely import MultiPoint, intersects_xy

        beyond = ~intersects_xy(MultiPoint(np.column_stack([surface.x, surface.y])).convex_hull.buffer(ROUNDING), x, y)
    return [int(pad) + 1 for pad in np.flatnonzero(beyond)]


def pad_bodies(brief: Brief, side: int, x: Floats, y: Floats) -> tuple[PadBody, ...]:
    """Return the pads with the heights of surface and pin."""
    rules = brief.hardware
    heights = surface_heights(rules.surface, side, x, y)
    return tuple(PadBody(i + 1, rules.pad_mass, rules.pad_height, float(h)) for i, h in enumerate(heights))


def bodies_of(bench: Bench, sizes: Sizes, counterweights: Counterweights) -> dict[str, Body]:
    """Return what each lever and plate is made of, in the rig's order."""
    bodies = {}
    for name, piece in bench.wiring.pieces.items():
        hung = dict(counterweights.get(name, {}))
        if name in sizes.plates:
            plate = sizes.plates[name]
            bodies[name] = Body(
                name, "plate", plate.section, bench.shop.steel, 1, 0.0, plate.radius, 0.0, (), plate.outline, hung
            )
            continue
        lever, build = sizes.levers[name], bench.build_of(piece)
        twin = build != "hollow section"
        arms = {hole.name: float(np.hypot(hole.u - piece.pivot.u, hole.v - piece.pivot.v)) for hole in piece.ends}
        spacers = levers.spacer_places(arms["A"], arms["B"]) if twin else ()
        bodies[name] = Body(
            name, build, lever.section, bench.shop.steel, 2 if twin else 1, lever.gap, lever.overhang,
            lever.side_plate, spacers, np.empty((0, 2)), hung,
        )  # fmt: skip
    return bodies


def shapes_of(sizes: Sizes, bodies: Mapping[str, Body]) -> dict[str, Shape]:
    """Return what each piece, and each jack with its cell, needs in height and in plan."""
    shapes = {name: _shape(body, sizes) for name, body in bodies.items()}
    for name, stack in sizes.stacks.items():
        lowest = stack.cell if stack.cell.length > 0 else stack.machine
        shapes[name] = Shape(0.0, MACHINE_WIDTH / 2 * lowest.pin, 0.0)
    return shapes


def _shape(body: Body, sizes: Sizes) -> Shape:
    half = body.section.depth / 2
    pins = {hole: joint.pin for (name, hole), joint in sizes.joints.items() if name == body.piece}
    stands = {hole: half + (STUD * pin if body.build == "plate" else 0.0) for hole, pin in pins.items()}
    lengths = {hole: weighing.weight_length(mass) for hole, mass in body.counterweights.items()}
    blocks = {
        hole: Block(stands[hole] + length, weighing.WEIGHT_SHAPE / 2 * length) for hole, length in lengths.items()
    }
    if body.build != "plate":
        return Shape(half, body.across / 2, body.overhang, blocks)
    # nuts and washers stand on both sides of a plate
    return Shape(half + STUD * max(pins.values()), body.overhang, body.overhang, blocks)


def fitting_need(bench: Bench, sizes: Sizes, link: LinkPlace, load: float) -> float:
    """Return what a link's fittings and adjuster need between its pins [m]."""
    size = sizes.links[link.name]
    joints = [(place, sizes.joints[place]) for place in (link.upper, link.lower)]
    if size.kind == "rod":
        need = 2 * ADJUST * size.width + LEAST_ROD
        for place, joint in joints:
            if _fitting(bench, sizes, place, size.kind) == "stud":
                need += joint.inner / 2 + STUD * size.width
            else:
                reach = weighing.FORK_DEPTH if _fitting(bench, sizes, place, size.kind) == "fork" else 1.0
                need += reach * joint.radius + SHANK * size.width
        return need
    need = sum(end_radius(size, joint) for _, joint in joints) + LEAST_ROD
    return need + (TURNBUCKLE * _screw(bench, load) if has_turnbuckle(bench, link) else 0.0)


def end_radius(size: LinkSize, joint: Joint) -> float:
    """From a hole's centre to the end of what a link has there [m]: a strap may reach further than an eye."""
    return strap_end(size.width, joint.hole) if size.kind == "strap" else joint.radius


def lug_reach(sizes: Sizes, pads: tuple[PadBody, ...], wiring: Wired) -> dict[str, float]:
    """Return how far each pad's lugs and the link's end between them stand up over its pin [m], by name."""
    names = [f"pad {pad.pad}" for pad in pads]
    return {name: end_radius(sizes.links[wiring.above[name].name], sizes.joints[name, ""]) for name in names}


def has_turnbuckle(bench: Bench, link: LinkPlace) -> bool:
    """Whether a link has a turnbuckle: rods turn in their fittings, others have one where they carry a pad."""
    return bench.kind_of(link) != "rod" and link.lower[0].startswith("pad ")


def _screw(bench: Bench, load: float) -> float:
    return screw_for(load, threads(), material(ROD_GRADE), bench.shop.rules).nominal


def _fitting(bench: Bench, sizes: Sizes, place: Place, kind: LinkKind) -> Fitting:
    """What a link of a kind ends in at a place."""
    name = place[0]
    if name in sizes.plates:
        return "stud"
    if kind == "webbing":
        return "loop"
    if name in sizes.levers and bench.build_of(bench.wiring.pieces[name]) == "hollow section":
        return "fork"
    return "eye"


def links_of(bench: Bench, sizes: Sizes, lengths: Mapping[str, float], loads: Mapping[str, float]) -> tuple[Link, ...]:
    """Return the links with their ends, lengths and masses."""
    made = []
    for place in bench.wiring.links:
        size = sizes.links[place.name]
        upper, lower = (_end(bench, sizes, at, size) for at in (place.upper, place.lower))
        turnbuckle = has_turnbuckle(bench, place)
        screw = _screw(bench, loads[place.name]) if turnbuckle else 0.0
        adjust = ADJUST * size.width if size.kind == "rod" else TURNBUCKLE / 4 * screw
        link = Link(
            place.number, size.kind, size.size, size.width, size.thickness, size.stress_area, size.material,
            bench.shop.steel, bench.shop.pin_steel, upper, lower, lengths[place.name], adjust, 0.0,
        )  # fmt: skip
        line_mass = next((w.mass for w in webbings() if w.name == size.size), 0.0)
        mass = weighing.link_mass(link, sizes.straps.get(place.name), line_mass, turnbuckle, screw)
        made.append(replace(link, mass=mass))
    return tuple(made)


def _end(bench: Bench, sizes: Sizes, place: Place, size: LinkSize) -> End:
    joint: Joint = sizes.joints[place]
    name, hole = place
    fitting, radius = _fitting(bench, sizes, place, size.kind), end_radius(size, joint)
    grip = 0.0 if fitting == "stud" else joint.inner + 2 * (joint.gap + joint.outer)
    length = 0.0 if fitting == "stud" else pin_length(joint.pin, grip)
    # levers made alike may carry straps of unequal thickness: washers fill what is left
    inner = inner_of(size) or joint.inner
    gap = joint.gap + (joint.inner - inner) / 2
    return End(fitting, name, hole, joint.pin, joint.hole, length, inner, joint.outer, gap, radius)


def masses_of(
    bench: Bench, sizes: Sizes, bodies: Mapping[str, Body], links: tuple[Link, ...], pads: tuple[PadBody, ...]
) -> dict[str, Mass]:
    """Return mass and centre of every lever, plate, link and pad by name."""
    masses = {}
    for name, piece in bench.wiring.pieces.items():
        holes: dict[HoleName, float] = {hole.name: sizes.joints[name, hole.name].hole for hole in piece.holes}
        if bodies[name].build == "plate":
            masses[name] = weighing.plate_mass(piece, bodies[name], holes)
        else:
            masses[name] = weighing.lever_mass(piece, bodies[name], holes)
    masses |= {link.name: Mass(link.mass, 0.0, 0.0) for link in links}
    masses |= {f"pad {pad.pad}": Mass(pad.mass, 0.0, 0.0) for pad in pads}
    return masses
