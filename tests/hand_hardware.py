"""Hardware put together by hand for tests of what comes after the hardware stage: sensible sizes, without a search.

Import with ``from hand_hardware import make_hardware_for``.  Every size follows from the load by a rule of thumb that a
workshop would use; nothing is taken from the package's own sizing, catalogue or rules.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import Any

import numpy as np

from rigdesign.checks.statics import solve_statics
from rigdesign.hardware.model import (
    Body,
    End,
    Hardware,
    JackStack,
    Link,
    Machine,
    Mass,
    Material,
    PadBody,
    Section,
)
from rigdesign.levers.model import Hole, Piece, Rig

G = 9.80665
STEEL = Material(
    "S355", (0.016, 0.04, 0.063), (355e6, 345e6, 335e6), (470e6, 470e6, 470e6), 210e9, 7850.0, "EN 10025-2, Table 7"
)
PIN_STEEL = Material("42CrMo4", (0.04, 0.1), (750e6, 650e6), (1000e6, 900e6), 210e9, 7850.0, "made up")
ROD_STEEL = Material("8.8", (math.inf,), (640e6,), (800e6,), 210e9, 7850.0, "made up")
PINS = (0.010, 0.012, 0.016, 0.020, 0.025, 0.030, 0.036, 0.045, 0.060, 0.080, 0.100)
DEPTHS = (0.05, 0.06, 0.08, 0.1, 0.12, 0.15, 0.2, 0.25, 0.3, 0.4, 0.5)
PLAY, GAP, STEP = 0.0005, 0.001, 0.32


def flat(depth: float, thickness: float) -> Section:
    """A flat standing upright."""
    area = depth * thickness
    return Section(
        f"{1e3 * depth:.0f}×{1e3 * thickness:.0f}", "flat", depth, thickness, thickness, thickness, area,
        thickness * depth**3 / 12, depth * thickness**3 / 12, depth * thickness**3 / 3 * (1 - 0.63 * thickness / depth),
        thickness * depth**2 / 6, thickness * depth**2 / 4, area * STEEL.density, 6.0, "by hand",
    )  # fmt: skip


def channel(depth: float) -> Section:
    """A channel of sharp corners, about as slender as rolled ones."""
    width, web, flange = 0.45 * depth + 0.01, 0.006 + 0.01 * depth, 0.008 + 0.01 * depth
    clear = depth - 2 * flange
    area = 2 * width * flange + clear * web
    inertia = (width * depth**3 - (width - web) * clear**3) / 12
    centre = (width * flange * width + clear * web**2 / 2) / area
    weak = (2 * flange * width**3 + clear * web**3) / 3 - area * centre**2
    plastic = width * flange * (depth - flange) + web * clear**2 / 4
    torsion = (2 * width * flange**3 + clear * web**3) / 3
    return Section(
        f"C {1e3 * depth:.0f}", "channel", depth, width, web, flange, area, inertia, weak, torsion,
        2 * inertia / depth, plastic, area * STEEL.density, 6.0, "by hand",
    )  # fmt: skip


def hollow(depth: float) -> Section:
    """A hollow section of sharp corners, twice as deep as wide."""
    width, t = depth / 2, 0.004 + 0.02 * depth
    area = depth * width - (depth - 2 * t) * (width - 2 * t)
    inertia = (width * depth**3 - (width - 2 * t) * (depth - 2 * t) ** 3) / 12
    weak = (depth * width**3 - (depth - 2 * t) * (width - 2 * t) ** 3) / 12
    plastic = (width * depth**2 - (width - 2 * t) * (depth - 2 * t) ** 2) / 4
    torsion = 2 * t * ((depth - t) * (width - t)) ** 2 / (depth + width - 2 * t)
    return Section(
        f"{1e3 * depth:.0f}×{1e3 * width:.0f}×{1e3 * t:.1f}", "hollow", depth, width, t, t, area, inertia, weak,
        torsion, 2 * inertia / depth, plastic, area * STEEL.density, 6.0, "by hand",
    )  # fmt: skip


def thick_plate(thickness: float) -> Section:
    """Plate of a thickness; properties are those of a metre of its width."""
    return replace(
        flat(1.0, thickness), name=f"plate {1e3 * thickness:.0f}", kind="plate", depth=thickness, width=thickness
    )


def pin_for(load: float) -> float:
    """The smallest pin [m] whose shear in two planes stays below 60 MPa, bending left to the gaps."""
    need = math.sqrt(2 * max(load, 1.0) / (math.pi * 60e6))
    return next((pin for pin in PINS if pin >= need), PINS[-1])


def make_hardware_for(rig: Rig, build: str = "twin flats", links: str = "rod", **changes: Any) -> Hardware:
    """Sensible steel for a rig: levers of one build, links of one kind, and any field of `Hardware` changed by name.

    `pad_mass` [kg] and `counterweights` ({"lever 2": {"A": 3.0}}, [kg]) may be given too.
    """
    pad_mass = changes.pop("pad_mass", 1.0)
    counterweights = changes.pop("counterweights", {})
    peak = rig.plan.target.brief.peak
    solved = solve_statics(rig)
    load = {name: 1.1 * peak * abs(value) for name, value in solved.piece_load.items()}
    load |= {f"pad {i + 1}": 1.1 * peak * abs(float(f)) for i, f in enumerate(solved.pad_force)}
    pieces = [piece for tree in rig.trees for piece in tree.pieces]
    bodies = {p.name: replace(_body(p, load, build), counterweights=counterweights.get(p.name, {})) for p in pieces}
    heights = _heights(rig)
    pads = tuple(PadBody(i + 1, pad_mass, 0.06, 0.0) for i in range(rig.pad_x.size))
    made = _links(rig, load, bodies, heights | {f"pad {pad.pad}": pad.pin_height for pad in pads}, links)
    masses = {piece.name: _piece_mass(piece, bodies[piece.name], made) for piece in pieces}
    masses |= {link.name: Mass(link.mass, 0.0, 0.0) for link in made}
    masses |= {f"pad {pad.pad}": Mass(pad.mass, 0.0, 0.0) for pad in pads}
    names = [*masses, *(tree.jack.name for tree in rig.trees)]
    letters = {"lever": "L", "link": "K", "pad": "D", "jack": "J"}
    marks = {name: letters[name.split()[0]] + name.split()[1] for name in names}
    marks |= {p.name: f"P{p.number}" for p in pieces if p.kind == "plate"}
    pull = 1 if rig.plan.target.brief.pads.action == "pull" else -1
    fields: dict[str, Any] = {
        "rig": rig,
        "side": pull * (1 if rig.jack_forces.sum() > 0 else -1),
        "bodies": bodies,
        "links": made,
        "pads": pads,
        "stacks": tuple(_stack(tree.jack.name, peak * abs(tree.force)) for tree in rig.trees),
        "heights": heights,
        "marks": marks,
        "masses": masses,
        "shortfalls": (),
        "words": "sizes by hand",
    }
    unknown = set(changes) - {*fields, "findings"}
    if unknown:
        raise TypeError(f"no such field: {', '.join(sorted(unknown))}")
    return Hardware(**{**fields, **changes})


def hung_weight(hardware: Hardware) -> float:
    """All that hangs on the jacks [N], summed member by member."""
    return G * sum(mass.mass for mass in hardware.masses.values())


def _stack(jack: str, force: float) -> JackStack:
    size = next(size for size in (5e3, 10e3, 25e3, 50e3, 100e3, 500e3, 2e6, 1e9) if size >= 1.2 * force)
    pin = pin_for(size)
    return JackStack(
        jack,
        Machine(f"jack {size / 1e3:.0f} kN", size, 0.5, 0.25, 12.0 + size / 2e3, pin, "by hand"),
        Machine(f"cell {size / 1e3:.0f} kN", size, 0.12, 0.0, 1.0 + size / 2e4, pin, "by hand"),
    )


def _heights(rig: Rig) -> dict[str, float]:
    """A step of 320 mm a tier, the lowest pieces 320 mm over the pads' pins at 60 mm."""
    heights: dict[str, float] = {}
    for tree in rig.trees:
        tiers = max((piece.tier for piece in tree.pieces), default=0)
        heights |= {piece.name: 0.06 + STEP * (tiers - piece.tier + 1) for piece in tree.pieces}
        heights[tree.jack.name] = 0.06 + STEP * (tiers + 1)
    return heights


def _reach(hole: Hole, piece: Piece) -> float:
    return math.hypot(hole.u - piece.pivot.u, hole.v - piece.pivot.v)


def _body(piece: Piece, load: dict[str, float], build: str) -> Body:
    pin = pin_for(load[piece.name])
    moment = max(load[hole.joins] * _reach(hole, piece) for hole in piece.ends)
    if piece.kind == "plate":
        return _plate_body(piece, moment, pin)
    # a design factor of 2 and some more on yield, and room for the pivot's hole
    need = moment / 120e6
    eye = max(pin, 0.012)
    if build == "twin flats":
        for depth in DEPTHS:
            section = flat(depth, max(0.006, round(depth / 10, 3)))
            if 2 * section.modulus >= need and depth >= 3.2 * pin:
                break
    else:
        for depth in DEPTHS:
            section = channel(depth) if build == "twin channels" else hollow(depth)
            if section.modulus * (2 if build == "twin channels" else 1) >= need and depth >= 3.2 * pin:
                break
    a, b = piece.ends
    profiles = 1 if build == "hollow section" else 2
    return Body(
        piece.name, build, section, STEEL, profiles,  # type: ignore[arg-type]
        eye + 2 * GAP if profiles == 2 else 0.0, 2.5 * pin, 0.01 if profiles == 1 else 0.0,
        (0.5 * a.u, 0.5 * b.u) if profiles == 2 else (), np.empty((0, 2)),
    )  # fmt: skip


def _plate_body(piece: Piece, moment: float, pin: float) -> Body:
    from shapely import MultiPoint

    radius = 2.5 * pin
    turns = np.arange(8) * np.pi / 4 + np.pi / 8
    ring = radius / math.cos(np.pi / 8) * np.stack([np.cos(turns), np.sin(turns)], axis=1)
    corners = np.concatenate([np.array([hole.u, hole.v]) + ring for hole in piece.ends])
    hull = MultiPoint(corners).convex_hull
    outline = np.array(hull.exterior.coords)[:-1]
    if not hull.exterior.is_ccw:
        outline = outline[::-1]
    width = math.sqrt(hull.area) / 3
    need = math.sqrt(6 * moment / (120e6 * width))
    thickness = next((t for t in (0.012, 0.016, 0.02, 0.025, 0.03, 0.04, 0.05, 0.06) if t >= need), 0.08)
    return Body(piece.name, "plate", thick_plate(thickness), STEEL, 1, 0.0, radius, 0.0, (), outline)


def _piece_mass(piece: Piece, body: Body, links: tuple[Link, ...]) -> Mass:
    """Steel less its holes, and counterweights at their holes."""
    parts: list[tuple[float, float, float]] = []
    density = body.material.density
    if piece.kind == "plate":
        from shapely import Polygon

        shape = Polygon(body.outline)
        parts.append((shape.area * body.section.depth * density, shape.centroid.x, shape.centroid.y))
        through = body.section.depth
    else:
        a, b = piece.ends
        length = b.u - a.u + 2 * body.overhang
        parts.append((body.profiles * body.section.area * length * density, 0.5 * (a.u + b.u), 0.0))
        through = 2 * body.section.web
        spacer = math.pi / 4 * 0.03**2 * body.gap * density
        parts += [(spacer, at, 0.0) for at in body.spacers]
        side = 2 * body.side_plate * (0.8 * body.section.depth) ** 2 * density
        parts += [(side, hole.u, 0.0) for hole in piece.holes if body.side_plate]
        through += 2 * body.side_plate
    for hole in piece.holes:
        diameter = next(e.hole for k in links for e in (k.upper, k.lower) if (e.to, e.at) == (piece.name, hole.name))
        parts.append((-math.pi / 4 * diameter**2 * through * density, hole.u, hole.v))
    places = {hole.name: hole for hole in piece.holes}
    parts += [(kg, places[name].u, places[name].v) for name, kg in body.counterweights.items()]
    total = sum(m for m, _, _ in parts)
    return Mass(total, sum(m * u for m, u, _ in parts) / total, sum(m * v for m, _, v in parts) / total)


def _links(
    rig: Rig, load: dict[str, float], bodies: dict[str, Body], heights: dict[str, float], kind: str
) -> tuple[Link, ...]:
    made: list[Link] = []

    def link(upper: str, hole: str, lower: str, jack_load: float) -> None:
        pull = max(load.get(lower, 0.0), jack_load)
        ends = (_end(upper, hole, pull, bodies, kind), _end(lower, "pivot", pull, bodies, kind))
        length = heights[upper] - heights[lower]
        made.append(_link(len(made) + 1, kind, pull, ends, length))

    for tree in rig.trees:
        link(tree.jack.name, "", tree.jack.carries, load[tree.jack.carries])
        for piece in tree.pieces:
            for hole in piece.ends:
                link(piece.name, hole.name, hole.joins, 0.0)
    return tuple(made)


def _end(to: str, hole: str, pull: float, bodies: dict[str, Body], kind: str) -> End:
    pin = pin_for(pull)
    eye, radius = max(pin, 0.012), 1.6 * pin
    body = bodies.get(to)
    if body is None:
        at: Any = ""
        fitting, inner, outer, gap = "loop" if kind == "webbing" else "eye", eye, max(0.6 * pin, 0.008), GAP
    elif body.build == "plate":
        at, fitting, inner, outer, gap, radius = hole, "stud", body.section.depth, 0.3 * pin, 0.0, pin
    elif body.build == "hollow section":
        at, fitting, gap = hole, "fork", GAP
        inner, outer = body.across, max(0.6 * pin, 0.008)
    else:
        at, fitting, inner, outer = hole, "eye", eye, body.section.web
        gap = (body.gap - eye) / 2
    return End(fitting, to, at, pin, pin + PLAY, inner + 2 * outer + 2 * gap, inner, outer, gap, radius)  # type: ignore[arg-type]


def _link(number: int, kind: str, pull: float, ends: tuple[End, End], length: float) -> Link:
    pin = ends[0].pin
    if kind == "rod":
        size = next((d for d in (0.012, 0.016, 0.02, 0.024, 0.03, 0.036, 0.048) if 0.75 * d**2 * 200e6 >= pull), 0.064)
        pitch = 0.125 * size
        area = math.pi / 4 * (size - 0.9382 * pitch) ** 2
        name, width, thickness, mass = f"M{1e3 * size:.0f}", size, size, area * length * 7850 + 40 * pin**2 * 10
    elif kind == "strap":
        width, thickness = 3 * pin, max(0.006, round(0.4 * pin, 3))
        area = width * thickness
        name, mass = f"{1e3 * width:.0f}×{1e3 * thickness:.0f}", area * length * 7850
    else:
        width, thickness = 0.06, 0.006
        area, name, mass = width * thickness, "60 mm webbing", 0.4 * length + 0.2
    material = ROD_STEEL if kind == "rod" else STEEL
    return Link(
        number,
        kind,
        name,
        width,
        thickness,
        area,
        material,
        STEEL,
        PIN_STEEL,
        *ends,
        length,
        0.02,
        mass,  # type: ignore[arg-type]
    )
