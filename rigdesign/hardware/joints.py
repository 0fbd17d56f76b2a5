"""Pins and what lies on them: the smallest pin, and the thinnest eyes, cheeks and lugs, that pass every check.

A joint is one pin with an inner part and two outer ones.  What is sized here depends on who brings what:

    a link's eye between two profiles of a lever    eye sized, profiles given
    a link's fork outside a hollow lever            cheeks sized, webs and side plates given
    a link's eye between lugs of a pad              both sized
    a link's eye in the fork of a cell              eye sized, pin given by the cell
    a strap or a loop of webbing                    inner part given, outer part as above

Eyes and cheeks are round about the hole, with a radius of `EYE` times the hole, rounded up to a millimetre.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from math import ceil

from rigdesign.hardware.model import Material
from rigdesign.hardware.rules.common import BEARING
from rigdesign.hardware.rules.model import PinState, PlateHole, Result, RuleSet

EYE = 1.25
"""Radius of an eye over the diameter of its hole; common practice."""

SIDE_PLAY = 0.001
"""Clear distance on each side between what lies on one pin [m]; common practice."""

PIN_ENDS, PIN_ENDS_STEEPER = 0.008, 0.6
"""A pin is longer than its grip by so much [m] and this part of its diameter, for head, washers and split pin; common
practice."""

THICKEST = 3.0
"""An eye is no thicker than so many pin diameters: a thicker one only bends the pin."""


def passes(results: Iterable[Result]) -> bool:
    """Whether every check passes."""
    return all(result.utilisation <= 1.0 for result in results)


def worst(results: Iterable[Result]) -> Result:
    """The check with the largest utilisation."""
    return max(results, key=lambda result: result.utilisation)


@dataclass(frozen=True)
class Shop:
    """What joints are made from: rules, materials, pins and plates [m] in rising order, play of holes [m]."""

    rules: RuleSet
    steel: Material
    pin_steel: Material
    pins: tuple[float, ...]
    plates: tuple[float, ...]
    play: float


def eye_radius(hole: float) -> float:
    """Radius of an eye about a hole of this diameter [m], rounded up to a millimetre.

    >>> eye_radius(0.0125)
    0.016
    """
    return ceil(round(EYE * hole * 1000, 6)) / 1000


def pin_length(pin: float, grip: float) -> float:
    """Whole length of a pin [m] whose grip is `grip` [m].

    >>> round(pin_length(0.020, 0.0305), 4)
    0.051
    """
    return ceil(round((grip + PIN_ENDS + PIN_ENDS_STEEPER * pin) * 1000, 6)) / 1000


def eye_state(load: float, count: int, thickness: float, pin: float, hole: float, steel: Material) -> PlateHole:
    """A pin through an eye, cheek or lug with a round edge; `count` of them share the load."""
    radius = eye_radius(hole)
    clear = radius - hole / 2
    return PlateHole(load, count, thickness, steel, pin, hole, clear, clear, radius, True)


@dataclass(frozen=True)
class Strap:
    """A strap on a pin: its load [N], width and thickness [m]."""

    load: float
    width: float
    thickness: float


def strap_end(width: float, hole: float) -> float:
    """From a hole's centre to where a strap is cut square [m]: half its width, or as far as an eye would reach.

    >>> strap_end(0.04, 0.0125), strap_end(0.03, 0.0145)
    (0.02, 0.019)
    """
    return max(width / 2, eye_radius(hole))


def strap_hole(strap: Strap, pin: float, hole: float, shop: Shop) -> PlateHole:
    """A pin through the end of a strap."""
    radius = strap_end(strap.width, hole)
    side, beyond = (strap.width - hole) / 2, radius - hole / 2
    return PlateHole(strap.load, 1, strap.thickness, shop.steel, pin, hole, side, beyond, radius, round_edge=False)


def strap_bearing(straps: Iterable[Strap], pin: float, hole: float, shop: Shop) -> list[Result]:
    """How a pin bears on straps, which asks for large pins; what asks for small ones is the strap's to choose by."""
    results = [result for strap in straps for result in shop.rules.hole(strap_hole(strap, pin, hole, shop))]
    return [result for result in results if result.check == BEARING]


def thinnest(load: float, count: int, pin: float, hole: float, shop: Shop) -> float | None:
    """Thinnest plate of which `count` round eyes about a pin pass; None where no plate does."""
    for thickness in shop.plates:
        if thickness > THICKEST * pin:
            return None
        if passes(shop.rules.hole(eye_state(load, count, thickness, pin, hole, shop.steel))):
            return thickness
    return None


@dataclass(frozen=True)
class Joint:
    """One pin: diameters of pin and hole, thickness of inner and of each outer part, gap, eye's radius [m]."""

    pin: float
    hole: float
    inner: float
    outer: float
    gap: float
    radius: float


def pin_state(load: float, joint: Joint, shop: Shop, bearing: float | None = None) -> PinState:
    """The pin of a joint; `bearing` [m] is on how much of the inner part the pin bears, all of it where not given."""
    return PinState(
        load, joint.pin, shop.pin_steel, joint.inner if bearing is None else bearing, joint.outer, joint.gap
    )


def eye_between(load: float, pin: float, outer: float, eye: float, shop: Shop) -> Joint | None:
    """Joint of a pin with an eye of given thickness between two outer parts, None where pin or eye fails."""
    if eye > THICKEST * pin:
        return None
    hole = pin + shop.play
    joint = Joint(pin, hole, eye, outer, SIDE_PLAY, eye_radius(hole))
    if not passes(shop.rules.pin(pin_state(load, joint, shop))):
        return None
    return joint if passes(shop.rules.hole(eye_state(load, 1, eye, pin, hole, shop.steel))) else None


def soft_between(
    load: float,
    pin: float,
    outer: float,
    inner: float,
    widest: float,
    shop: Shop,
    *,
    is_eye: bool,
    straps: Iterable[Strap] = (),
) -> Joint | None:
    """Joint of a pin with a strap or webbing of thickness `inner` between two outer parts, None where the pin fails.

    Where another pin of the lever carries a wider one, `widest`, washers keep this one in the middle.  The pin must
    bear on the `straps`, and the eye of a rod in such a lever must pass.
    """
    hole = pin + shop.play
    if is_eye and inner > THICKEST * pin:
        return None
    if not passes(strap_bearing(straps, pin, hole, shop)):
        return None
    joint = Joint(pin, hole, inner, outer, SIDE_PLAY + (widest - inner) / 2, eye_radius(hole))
    if is_eye and not passes(shop.rules.hole(eye_state(load, 1, inner, pin, hole, shop.steel))):
        return None
    return joint if passes(shop.rules.pin(pin_state(load, joint, shop))) else None


def fork_outside(load: float, pin: float, inner: float, bearing: float, shop: Shop) -> Joint | None:
    """Joint of a pin through an inner part of width `inner` on whose `bearing` [m] it bears, a cheek on each side."""
    hole = pin + shop.play
    cheek = thinnest(load, 2, pin, hole, shop)
    if cheek is None:
        return None
    joint = Joint(pin, hole, inner, cheek, SIDE_PLAY, eye_radius(hole))
    return joint if passes(shop.rules.pin(pin_state(load, joint, shop, bearing))) else None


def eye_in_lugs(
    load: float, shop: Shop, inner: float | None = None, straps: tuple[Strap, ...] = ()
) -> tuple[Joint, float]:
    """Smallest joint of an eye between two lugs, both sized, and its utilisation.

    `inner` is the thickness of a strap or webbing in place of the eye; the pin must bear on the `straps` as well.
    Where no pin of the series does, the joint of least utilisation.
    """
    best: tuple[Joint, float] | None = None
    for pin in shop.pins:
        hole = pin + shop.play
        lug, eye = thinnest(load, 2, pin, hole, shop), inner or thinnest(load, 1, pin, hole, shop)
        sized = lug is not None and eye is not None
        joint = Joint(pin, hole, eye or shop.plates[-1], lug or shop.plates[-1], SIDE_PLAY, eye_radius(hole))
        results = [*shop.rules.pin(pin_state(load, joint, shop))]
        results += shop.rules.hole(eye_state(load, 2, joint.outer, pin, hole, shop.steel))
        if inner is None:
            results += shop.rules.hole(eye_state(load, 1, joint.inner, pin, hole, shop.steel))
        results += strap_bearing(straps, pin, hole, shop)
        use = worst(results).utilisation
        if sized and use <= 1.0:
            return joint, use
        if best is None or use < best[1]:
            best = joint, use
    assert best is not None
    return best


def eye_on(load: float, pin: float, shop: Shop, inner: float | None = None) -> tuple[Joint, float]:
    """Joint of an eye on a given pin, such as a cell's, and its utilisation; the fork is the cell's maker's."""
    hole = pin + shop.play
    eye = inner or thinnest(load, 1, pin, hole, shop) or THICKEST * pin
    joint = Joint(pin, hole, eye, max(eye / 2, shop.plates[0]), SIDE_PLAY, eye_radius(hole))
    results = [*shop.rules.pin(pin_state(load, joint, shop))]
    if inner is None:
        results += shop.rules.hole(eye_state(load, 1, eye, pin, hole, shop.steel))
    return joint, worst(results).utilisation
