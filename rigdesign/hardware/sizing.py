"""One round of sizing: from the loads in the links to the sizes of every member.

Order: links by their load (compressed rods by their length as well), then levers with the joints at their holes, then
plates, then the joints at pads and jacks.  Lengths and hole sizes that a size depends on come from the round before.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from functools import partial
from math import hypot

import numpy as np

from rigdesign.brief.model_hardware import Build, HardwareRules
from rigdesign.hardware import levers, links, plates
from rigdesign.hardware.catalogue import material, sections, threads, webbings, with_density
from rigdesign.hardware.joints import Joint, Shop, Strap, eye_in_lugs, eye_on, strap_hole
from rigdesign.hardware.model import JackStack, LinkKind, Machine, Section, Shortfall
from rigdesign.hardware.owning import Bands, bands_of
from rigdesign.hardware.rules import rule_set
from rigdesign.hardware.rules.model import StrapState
from rigdesign.hardware.stacks import stack_for
from rigdesign.hardware.wiring import LinkPlace, Place, Wired
from rigdesign.levers.model import HoleName, Piece

FIRST_LENGTH = 0.3
"""Length of a compressed rod in the first round [m], before heights are known."""


@dataclass(frozen=True)
class Bench:
    """What sizing works with: the rig's links and bands, the brief's rules, what joints are made from, and groups.

    `groups` are names of pieces that are made alike, every piece in one of them.
    """

    wiring: Wired
    bands: Bands
    rules: HardwareRules
    shop: Shop
    groups: tuple[tuple[str, ...], ...]

    @property
    def compressed(self) -> bool:
        """Whether links are pushed."""
        return self.wiring.rig.plan.target.brief.pads.action == "push"

    def kind_of(self, link: LinkPlace) -> LinkKind:
        """What a link is: the one on a load cell's pin, too thin for anything wide, is always a rod."""
        return "rod" if link.upper[0].startswith("jack ") else self.rules.links

    def build_of(self, piece: Piece) -> Build:
        """How a lever is built: by its tier, the last build holding for all further tiers."""
        builds = self.rules.builds
        return builds[min(piece.tier, len(builds)) - 1]


@dataclass(frozen=True)
class Sizes:
    """Sizes of everything by name: links, levers, plates, joints by place, stacks by jack, and what falls short."""

    links: Mapping[str, links.LinkSize]
    straps: Mapping[str, Section]
    levers: Mapping[str, levers.SizedLever]
    plates: Mapping[str, plates.SizedPlate]
    joints: Mapping[Place, Joint]
    stacks: Mapping[str, JackStack]
    shortfalls: tuple[Shortfall, ...]

    @property
    def key(self) -> object:
        """What tells two rounds apart."""
        return (
            tuple((name, size.size) for name, size in self.links.items()),
            tuple((name, size.section.name, size.gap, size.side_plate) for name, size in self.levers.items()),
            tuple((name, size.section.name, size.radius) for name, size in self.plates.items()),
            tuple(self.joints.items()),
            tuple((name, stack.machine.name, stack.cell.name) for name, stack in self.stacks.items()),
        )


def make_bench(wiring: Wired, groups: tuple[tuple[str, ...], ...]) -> Bench:
    """Return what sizing works with for a rig."""
    rules = wiring.rig.plan.target.brief.hardware
    return Bench(wiring, bands_of(wiring), rules, make_shop(rules), groups)


def make_shop(rules: HardwareRules) -> Shop:
    """Return what joints are made from under a brief."""
    return Shop(
        rules=rule_set(rules),
        steel=with_density(material(rules.grade), rules.density),
        pin_steel=material(rules.pin_grade),
        pins=rules.pins,
        plates=tuple(section.depth for section in sections(rules, "plate")),
        play=rules.play,
    )


def size_all(
    bench: Bench,
    loads: Mapping[str, float],
    jacks: Iterable[float],
    before: Sizes | None,
    lengths: Mapping[str, float],
    *,
    keep_straps: bool = False,
) -> Sizes:
    """Return the sizes for the loads of the links [N] by name and the jacks' forces [N], overshoot included.

    `before` and `lengths` [m] are those of the round before, None and empty in the first.  With
    `keep_straps` the straps of the round before stay where they pass, though with other pins a lighter one may do.
    """
    sized, straps = _links(bench, loads, before, lengths, keep_straps)
    short = [
        Shortfall(name, "strength of the link", size.utilisation, _LINK_REMEDY[size.kind])
        for name, size in sized.items()
        if size.utilisation > 1.0
    ]
    joints: dict[Place, Joint] = {}
    found: dict[str, levers.SizedLever] = {}
    flat: dict[str, plates.SizedPlate] = {}
    for group in bench.groups:
        pieces = [bench.wiring.pieces[name] for name in group]
        if pieces[0].kind == "plate":
            flat |= _plate_group(bench, pieces, loads, sized, joints, short)
        else:
            found |= _lever_group(bench, pieces, loads, sized, joints, short)
    stacks = {}
    for tree, force in zip(bench.wiring.rig.trees, jacks, strict=True):
        top = bench.wiring.above[tree.jack.carries]
        holds = partial(_holds, bench, loads[top.name], inner_of(sized[top.name]))
        stacks[tree.jack.name], lacking = stack_for(tree.jack.name, abs(force), bench.rules, holds)
        short += lacking
    for link in bench.wiring.links:
        _outer_joints(bench, link, loads[link.name], sized[link.name], stacks, joints, short)
    return Sizes(sized, straps, found, flat, joints, stacks, tuple(short))


def _holds(bench: Bench, load: float, inner: float | None, cell: Machine) -> bool:
    """Whether a link of this load [N] holds on a cell's pin."""
    return eye_on(load, cell.pin, bench.shop, inner)[1] <= 1.0


_LINK_REMEDY = {
    "rod": "more pads, or shorter links where they are pushed",
    "strap": 'deeper or thicker flats in the stock, or links = "rod"',
    "webbing": 'links = "rod", or more pads',
}


def _links(
    bench: Bench, loads: Mapping[str, float], before: Sizes | None, lengths: Mapping[str, float], keep_straps: bool
) -> tuple[dict[str, links.LinkSize], dict[str, Section]]:
    """Sizes of all links, and the flats of straps."""
    rules, steel = bench.shop.rules, bench.shop.steel
    sized: dict[str, links.LinkSize] = {}
    straps: dict[str, Section] = {}
    for link in bench.wiring.links:
        load = loads[link.name]
        if bench.kind_of(link) == "rod":
            length = lengths.get(link.name, FIRST_LENGTH)
            sized[link.name] = links.rod(load, threads(), material(links.ROD_GRADE), rules, length, bench.compressed)
        elif bench.rules.links == "webbing":
            sized[link.name] = links.webbing(load, webbings(), steel, rules)
        else:
            holes = _strap_holes(bench, link, before)
            first = (before.straps[link.name],) if keep_straps and before is not None else ()
            sized[link.name], straps[link.name] = _strap(bench, load, holes, first)
    return sized, straps


def _strap_holes(bench: Bench, link: LinkPlace, before: Sizes | None) -> list[Joint]:
    return [] if before is None else [before.joints[place] for place in (link.upper, link.lower)]


def _strap(
    bench: Bench, load: float, joints: list[Joint], first: tuple[Section, ...]
) -> tuple[links.LinkSize, Section]:
    """The first of these, else the lightest flat, that bears a load as a strap with the holes of the round before."""
    least = bench.shop.pins[0] + bench.shop.play
    pairs = [(joint.pin, joint.hole) for joint in joints] or [(bench.shop.pins[0], least)]
    best: tuple[links.LinkSize, Section] | None = None
    for section in (*first, *sections(bench.rules, "flat", bench.shop.steel.density)):
        hole = max(diameter for _, diameter in pairs)
        state = StrapState(load, section.depth, section.width, hole, bench.shop.steel)
        results = [*bench.shop.rules.strap(state)]
        for pin, diameter in pairs:
            strap = Strap(load, section.depth, section.width)
            results += bench.shop.rules.hole(strap_hole(strap, pin, diameter, bench.shop))
        use = max(result.utilisation for result in results)
        name = section.name.removeprefix("flat ")
        size = links.LinkSize(
            "strap", name, section.depth, section.width, section.area - section.width * hole, 0.0, bench.shop.steel, use
        )
        if use <= 1.0:
            return size, section
        if best is None or use < best[0].utilisation:
            best = size, section
    assert best is not None
    return best


def inner_of(size: links.LinkSize) -> float | None:
    """What a link that has no eyes of its own puts on a pin [m]; None for a rod, whose eyes are sized."""
    if size.kind == "rod":
        return None
    return size.thickness if size.kind == "strap" else size.width


def straps_of(size: links.LinkSize, load: float) -> tuple[Strap, ...]:
    """The strap that a link puts on its pins, none where it is a rod or webbing."""
    return (Strap(load, size.width, size.thickness),) if size.kind == "strap" else ()


def _lever_group(
    bench: Bench,
    pieces: list[Piece],
    loads: Mapping[str, float],
    sized: Mapping[str, links.LinkSize],
    joints: dict[Place, Joint],
    short: list[Shortfall],
) -> dict[str, levers.SizedLever]:
    """Size levers that are made alike, for the largest load at each hole."""
    first = pieces[0]
    ends = {hole.name: hypot(hole.u - first.pivot.u, hole.v - first.pivot.v) for hole in first.ends}
    through = [_links_of(bench.wiring, piece) for piece in pieces]
    most: dict[HoleName, float] = {hole: max(loads[own[hole].name] for own in through) for hole in levers.HOLES}
    # where the lever's own weight adds to what its ends carry, its pivot section bears that
    most["pivot"] = max(most["pivot"], *(loads[own["A"].name] + loads[own["B"].name] for own in through))
    build = bench.build_of(first)
    task = levers.LeverTask(ends["A"], ends["B"], most, build, {}, bench.rules.deflection)
    if bench.rules.links != "rod":
        task = _soft_task(bench, task, through, loads, sized)
    kind = levers.PROFILE[build]
    result = levers.size_lever(task, sections(bench.rules, kind, bench.shop.steel.density), bench.shop)
    for piece in pieces:
        for hole in levers.HOLES:
            joints[piece.name, hole] = result.joints[hole]
        if result.failure is not None:
            remedy = levers.remedy(result.failure, build)
            short.append(Shortfall(piece.name, result.failure.check, result.failure.utilisation, remedy))
    return {piece.name: result for piece in pieces}


def _soft_task(
    bench: Bench,
    task: levers.LeverTask,
    through: list[dict[HoleName, LinkPlace]],
    loads: Mapping[str, float],
    sized: Mapping[str, links.LinkSize],
) -> levers.LeverTask:
    """The task of levers made alike with straps or webbing on their pins, and maybe a rod on one."""
    soft = [hole for hole in levers.HOLES if bench.kind_of(through[0][hole]) != "rod"]
    eyes = frozenset(levers.HOLES) - frozenset(soft)
    lying = {hole: [inner_of(sized[own[hole].name]) or 0.0 for own in through] for hole in soft}
    straps = {
        hole: tuple(strap for own in through for strap in straps_of(sized[own[hole].name], loads[own[hole].name]))
        for hole in soft
    }
    inner = {hole: min(found) for hole, found in lying.items()}
    return replace(task, inner=inner, eyes=eyes, widest=max(map(max, lying.values())), straps=straps)


def _links_of(wiring: Wired, piece: Piece) -> dict[HoleName, LinkPlace]:
    """The links on a piece's holes."""
    below: dict[HoleName, LinkPlace] = {hole.name: wiring.below[piece.name, hole.name] for hole in piece.ends}
    return {"pivot": wiring.above[piece.name], **below}


def _plate_group(
    bench: Bench,
    pieces: list[Piece],
    loads: Mapping[str, float],
    sized: Mapping[str, links.LinkSize],
    joints: dict[Place, Joint],
    short: list[Shortfall],
) -> dict[str, plates.SizedPlate]:
    """Size plates that are made alike, for the largest load and rod at each hole."""
    first = pieces[0]
    names = [hole.name for hole in first.holes]
    through = [_links_of(bench.wiring, piece) for piece in pieces]
    holes = np.array([[hole.u - first.pivot.u, hole.v - first.pivot.v] for hole in first.holes])
    task = plates.PlateTask(
        holes=holes,
        loads=np.array([max(loads[own[name].name] for own in through) for name in names]),
        rods=np.array([max(sized[own[name].name].screw for own in through) for name in names]),
    )
    result = plates.size_plate(task, sections(bench.rules, "plate", bench.shop.steel.density), bench.shop)
    for piece in pieces:
        for name, rod in zip(names, task.rods, strict=True):
            joints[piece.name, name] = Joint(
                float(rod), float(rod) + bench.shop.play, result.section.depth, 0.0, 0.0, plates.WASHER * float(rod) / 2
            )
        if result.failure is not None:
            short.append(
                Shortfall(piece.name, result.failure.check, result.failure.utilisation, "thicker plates in the stock")
            )
    return {piece.name: result for piece in pieces}


def _outer_joints(
    bench: Bench,
    link: LinkPlace,
    load: float,
    size: links.LinkSize,
    stacks: Mapping[str, JackStack],
    joints: dict[Place, Joint],
    short: list[Shortfall],
) -> None:
    """Joints at the jack's cell and at a pad."""
    inner = inner_of(size)
    if link.upper[0] in stacks:
        joint, use = eye_on(load, stacks[link.upper[0]].cell.pin, bench.shop, inner)
        joints[link.upper] = joint
        if use > 1.0:
            short.append(Shortfall(link.name, "eye on the load cell's pin", use, "a load cell with a thicker pin"))
    if link.lower[0].startswith("pad "):
        joint, use = eye_in_lugs(load, bench.shop, inner, straps_of(size, load))
        joints[link.lower] = joint
        if use > 1.0:
            short.append(Shortfall(link.name, f"pin at {link.lower[0]}", use, "larger pins in [hardware] pins"))
