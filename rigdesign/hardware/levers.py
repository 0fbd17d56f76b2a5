"""Levers: the lightest section of the stock, and with it the smallest pins, that pass every check.

A lever is given by its arms and by the loads on its pins at pivot, A and B.  Sections are tried from the lightest on.
For each, the smallest pin of each hole is found, all eyes in a lever having one thickness; a hollow section is tried
without side plates and then with thicker and thicker ones.  What is found is therefore the least in this order:
section, side plates, pins.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, field, replace
from itertools import pairwise
from math import ceil, inf
from typing import Literal

import numpy as np

from rigdesign.brief.model_hardware import Build
from rigdesign.hardware.joints import (
    SIDE_PLAY,
    Joint,
    Shop,
    Strap,
    eye_between,
    eye_radius,
    eye_state,
    fork_outside,
    passes,
    pin_state,
    soft_between,
    worst,
)
from rigdesign.hardware.model import Section
from rigdesign.hardware.rules.model import Bar, PlateHole, Result
from rigdesign.levers.model import HoleName

HOLES: tuple[HoleName, ...] = ("pivot", "A", "B")

PROFILE: dict[Build, Literal["flat", "channel", "hollow"]] = {
    "twin flats": "flat",
    "twin channels": "channel",
    "hollow section": "hollow",
}
"""What each build is made of."""

SPACER_PITCH = 0.3
"""Twin profiles are held together at least so often [m]; common practice."""

BESIDE = 0.002
"""Clear distance between two eyes inside one lever [m]; set here."""

END_STEP = 0.005
"""Overhangs are multiples of this [m]."""

STRONGEST = 3
"""Where nothing passes, so many of the strongest sections are looked at for what comes closest."""

SIDE_PLATE = 2.5
"""Width of a side plate over the diameter of its hole; common practice."""


@dataclass(frozen=True)
class LeverTask:
    """What a lever must bear: arms [m] to A and B, loads [N] on its pins, how it is built, and what lies on its pins.

    `inner` holds the thickness of what lies on each pin where that is given, straps or webbing, else it is empty; at
    the holes of `eyes` there is the eye of a rod even so.  Of levers made alike it is the thinnest, and `widest` the
    widest on any pin of theirs (0: that of `inner`).  `straps` are those on each pin.
    """

    a: float
    b: float
    loads: Mapping[HoleName, float]
    build: Build
    inner: Mapping[HoleName, float]
    deflection: float
    eyes: frozenset[HoleName] = frozenset()
    widest: float = 0.0
    straps: Mapping[HoleName, tuple[Strap, ...]] = field(default_factory=dict)

    @property
    def has_eyes(self) -> bool:
        """Whether eyes whose thickness is chosen lie between its profiles."""
        return self.build != "hollow section" and (not self.inner or bool(self.eyes))


@dataclass(frozen=True)
class SizedLever:
    """A lever's section, its gap, overhang and side plates [m], its joints, and why it fails (None where it passes)."""

    section: Section
    gap: float
    overhang: float
    side_plate: float
    joints: Mapping[HoleName, Joint]
    failure: Result | None


def overhang(depth: float) -> float:
    """Steel beyond an end hole [m]: half the depth, so that a hole has as much steel beyond it as above it.

    >>> overhang(0.05)
    0.025
    """
    return ceil(round(depth / 2 / END_STEP, 6)) * END_STEP


def side_width(hole: float) -> float:
    """Width [m] along the lever of a side plate about a hole of this diameter, a multiple of 5 mm.

    A side plate is as deep as its section.

    >>> round(side_width(0.0205), 4)
    0.055
    """
    return ceil(round(SIDE_PLATE * hole / END_STEP, 6)) * END_STEP


def spacer_places(a: float, b: float) -> tuple[float, ...]:
    """Places u [m] of spacers between the holes of twin profiles, whole millimetres, `SPACER_PITCH` apart at most.

    >>> [round(u, 3) for u in spacer_places(0.2, 0.7)]
    [0.233, 0.467]
    """
    places = []
    for start, end in ((-a, 0.0), (0.0, b)):
        parts = ceil(round((end - start) / SPACER_PITCH, 9))
        places += [round(start + (end - start) * i / parts, 3) for i in range(1, parts)]
    return tuple(places)


def braced(a: float, b: float) -> float:
    """Largest distance between two places at which twin profiles are held together [m]."""
    held = sorted([-a, 0.0, b, *spacer_places(a, b)])
    return max(right - left for left, right in pairwise(held))


def bar_state(task: LeverTask, section: Section, holes: Mapping[HoleName, float], side: float, shop: Shop) -> Bar:
    """The lever as a beam; `holes` are diameters [m]."""
    twin = task.build != "hollow section"
    return Bar(
        load=task.loads["pivot"],
        a=task.a,
        b=task.b,
        section=section,
        count=2 if twin else 1,
        material=shop.steel,
        pivot_hole=holes["pivot"],
        end_hole=max(holes["A"], holes["B"]),
        side_plate=side,
        braced=braced(task.a, task.b) if twin else task.a + task.b,
        deflection_limit=task.deflection,
    )


def hole_state(task: LeverTask, section: Section, hole: HoleName, joint: Joint, side: float, shop: Shop) -> PlateHole:
    """A pin through the two profiles, or through the two webs and side plates, of a lever.

    The load acts across the lever.  The steel beyond is half the depth; that beside goes to the lever's end, or as far
    as a hole of this size in the nearest other place.
    """
    beyond = section.depth / 2
    near = (min(task.a, task.b) if hole == "pivot" else {"A": task.a, "B": task.b}[hole]) - joint.hole / 2
    beside = near if hole == "pivot" else min(near, overhang(section.depth))
    thickness = section.web + side
    return PlateHole(
        load=task.loads[hole],
        count=2,
        thickness=thickness,
        material=shop.steel,
        pin=joint.pin,
        hole=joint.hole,
        side=beside - joint.hole / 2,
        beyond=beyond - joint.hole / 2,
        radius=beyond,
        round_edge=False,
    )


def size_lever(task: LeverTask, stock: tuple[Section, ...], shop: Shop) -> SizedLever:
    """Return the lightest lever that passes; where none does, the one that comes closest, with the check that fails."""
    for section in promising(task, stock, shop) if _may_have_room(task, shop) else ():
        for side in _side_plates(task, shop):
            sized = _sized(task, section, side, shop)
            if sized is not None:
                return sized
    return _closest(task, stock, shop)


def _may_have_room(task: LeverTask, shop: Shop) -> bool:
    """Whether eyes on the smallest pins keep clear of each other: arms too short for them fail with any section."""
    least = eye_radius(shop.pins[0] + shop.play)
    return min(task.a, task.b) >= 2 * least + BESIDE


def promising(task: LeverTask, stock: Iterable[Section], shop: Shop) -> Iterator[Section]:
    """Sections that pass as beams with holes of the smallest pin, in their order: pins are only looked for in these."""
    least = shop.pins[0] + shop.play
    holes: dict[HoleName, float] = dict.fromkeys(HOLES, least)
    for section in stock:
        if section.depth > least and passes(shop.rules.lever(bar_state(task, section, holes, 0.0, shop))):
            yield section


def _side_plates(task: LeverTask, shop: Shop) -> tuple[float, ...]:
    return (0.0, *shop.plates) if task.build == "hollow section" else (0.0,)


def _sized(task: LeverTask, section: Section, side: float, shop: Shop) -> SizedLever | None:
    """The lever of a section with the smallest pins, None where it fails.

    All eyes of one lever have one thickness, so that its profiles are one gap apart: that with the smallest pins is
    taken, of equal ones the thinnest.
    """
    best: SizedLever | None = None
    least = inf
    for eye in shop.plates if task.has_eyes else (0.0,):
        joints = _smallest_joints(task, section, side, eye, shop)
        if joints is None:
            continue
        total = sum(joint.pin for joint in joints.values())
        if total < least - 1e-9:
            sized = _with_joints(task, section, side, joints, shop)
            if sized.failure is None:
                best, least = sized, total
    return best


def _smallest_joints(
    task: LeverTask, section: Section, side: float, eye: float, shop: Shop
) -> dict[HoleName, Joint] | None:
    """The smallest joint of each hole, None where a hole has none."""
    joints: dict[HoleName, Joint] = {}
    for hole in HOLES:
        joint = _smallest_joint(task, section, hole, side, eye, shop)
        if joint is None:
            return None
        joints[hole] = joint
    return joints


def _smallest_joint(
    task: LeverTask, section: Section, hole: HoleName, side: float, eye: float, shop: Shop
) -> Joint | None:
    for pin in shop.pins:
        if pin + shop.play >= section.depth:
            return None
        joint = _joint(task, section, hole, pin, side, eye, shop)
        if joint is not None and passes(shop.rules.hole(hole_state(task, section, hole, joint, side, shop))):
            return joint
    return None


def _joint(
    task: LeverTask, section: Section, hole: HoleName, pin: float, side: float, eye: float, shop: Shop
) -> Joint | None:
    """The joint of one pin at a hole, None where pin, eye or cheeks fail."""
    load = task.loads[hole]
    if task.build == "hollow section":
        return fork_outside(load, pin, section.width + 2 * side, 2 * (section.web + side), shop)
    if task.inner:
        is_eye, straps = hole in task.eyes, task.straps.get(hole, ())
        inner, widest = eye if is_eye else task.inner[hole], max(task.widest, eye, *task.inner.values())
        return soft_between(load, pin, section.web, inner, widest, shop, is_eye=is_eye, straps=straps)
    return eye_between(load, pin, section.web, eye, shop)


def _with_joints(
    task: LeverTask, section: Section, side: float, joints: Mapping[HoleName, Joint], shop: Shop
) -> SizedLever:
    """The lever with these joints, its gap worked out, and the worst check of those that are left."""
    holes: dict[HoleName, float] = {hole: joint.hole for hole, joint in joints.items()}
    results = [*shop.rules.lever(bar_state(task, section, holes, side, shop)), *_room(task, joints)]
    failing = worst(results)
    hollow = task.build == "hollow section"
    gap = 0.0 if hollow else max(joint.inner + 2 * joint.gap for joint in joints.values())
    return SizedLever(
        section, gap, overhang(section.depth), side, joints, failing if failing.utilisation > 1.0 else None
    )


def _room(task: LeverTask, joints: Mapping[HoleName, Joint]) -> list[Result]:
    """Whether the eyes or cheeks on neighbouring pins keep clear of each other."""
    results = []
    ends: tuple[tuple[HoleName, float], ...] = (("A", task.a), ("B", task.b))
    for hole, arm in ends:
        needed = eye_radius(joints["pivot"].hole) + eye_radius(joints[hole].hole) + BESIDE
        working = (("R pivot", joints["pivot"].radius, "m"), (f"R {hole}", joints[hole].radius, "m"))
        results.append(
            Result("room between pins", "common practice", needed, arm, "m", needed / arm if arm > 0 else inf, working)
        )
    return results


def _closest(task: LeverTask, stock: tuple[Section, ...], shop: Shop) -> SizedLever:
    """What is drawn where nothing passes: the lever of least utilisation among the strongest sections."""
    found = [
        _forced(task, section, shop) for section in sorted(stock, key=lambda section: -section.modulus)[:STRONGEST]
    ]
    return min(found, key=lambda sized: 0.0 if sized.failure is None else sized.failure.utilisation)


def _forced(task: LeverTask, section: Section, shop: Shop) -> SizedLever:
    """A lever of a section whatever fails, with the joints that come closest, and the worst check."""
    hollow = task.build == "hollow section"
    side = shop.plates[-1] if hollow else 0.0
    joints: dict[HoleName, Joint] = {}
    uses: list[Result] = []
    for hole in HOLES:
        tried = [
            (worst(results), joint)
            for pin in shop.pins
            if pin + shop.play < section.depth
            for joint, results in _rough_joints(task, section, hole, pin, side, shop)
        ]
        if not tried:  # not even the smallest pin has steel about it
            pin = shop.pins[0]
            tried = [(worst(results), joint) for joint, results in _rough_joints(task, section, hole, pin, side, shop)]
        use, joints[hole] = min(tried, key=lambda pair: pair[0].utilisation)
        uses.append(use)
    inner = max(joint.inner for joint in joints.values())
    if not hollow and not task.inner:  # one gap, one thickness of eyes
        joints = {hole: replace(joint, inner=inner) for hole, joint in joints.items()}
    sized = _with_joints(task, section, side, joints, shop)
    failing = worst([*uses, *([] if sized.failure is None else [sized.failure])])
    return replace(sized, failure=failing if failing.utilisation > 1.0 else None)


def _rough_joints(
    task: LeverTask, section: Section, hole: HoleName, pin: float, side: float, shop: Shop
) -> Iterator[tuple[Joint, list[Result]]]:
    """Joints of one pin that may fail, with all their checks."""
    load, diameter = task.loads[hole], pin + shop.play
    given = hole in task.inner
    for plate in shop.plates[:1] if given else shop.plates[::2]:
        hollow = task.build == "hollow section"
        inner = section.width + 2 * side if hollow else task.inner.get(hole, plate)
        joint = Joint(pin, diameter, inner, plate if hollow else section.web, SIDE_PLAY, eye_radius(diameter))
        bearing = 2 * (section.web + side) if hollow else None
        results = [*shop.rules.pin(pin_state(load, joint, shop, bearing))]
        results += shop.rules.hole(hole_state(task, section, hole, joint, side, shop))
        if not given:
            results += shop.rules.hole(eye_state(load, 2 if hollow else 1, plate, pin, diameter, shop.steel))
        yield joint, results


def remedy(failure: Result, build: Build) -> str:
    """What would do where no section of the stock passes a check."""
    if failure.check == "room between pins":
        return "longer arms ([levers] shortest_arm), or stronger pins"
    if "pin" in failure.check or "bearing" in failure.check:
        return f"larger pins in [hardware] pins, or thicker {PROFILE[build]}s in the stock"
    other = next(kind for kind in ("hollow section", "twin channels") if kind != build)
    # a grade does nothing for stiffness
    grade = "" if "deflection" in failure.check else " a stronger grade,"
    return f'deeper or thicker {PROFILE[build]}s in the stock, build = "{other}",{grade} or shorter levers'


def bending_capacity(section: Section, build: Build, shop: Shop, arm: float) -> float:
    """Return the bending moment at the pivot [N·m] that a lever of a section bears, with arms of `arm` [m] each.

    Its pivot has a hole of a quarter of its depth; shear, deflection and pins are not looked at.
    """
    holes: dict[HoleName, float] = dict.fromkeys(HOLES, section.depth / 4)
    task = LeverTask(arm, arm, dict.fromkeys(HOLES, 1.0), build, {}, 1.0)
    results = shop.rules.lever(bar_state(task, section, holes, 0.0, shop))
    use = max(result.utilisation for result in results if "deflection" not in result.check)
    # one newton bends the lever by arm/2
    return float(np.divide(arm / 2, use)) if use > 0 else inf
