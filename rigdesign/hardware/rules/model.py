"""What a strength check is given and what it answers.  All in SI.  Loads are magnitudes at the test's peak times the
overshoot, without any design factor: the rules hold that, in the limit or, in EN 1993, on the load.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal, Protocol

from rigdesign.hardware.model import Material, Section

Working = tuple[tuple[str, float, str], ...]


@dataclass(frozen=True)
class Result:
    """One check: `value` against `limit` in `unit`; it passes where `utilisation`, value over limit, is 1 or less.

    `clause` cites rule and clause; `working` are the intermediate values in the source's symbols, each with its unit,
    in the order of the formula.  A check that cannot pass at all (no steel left beside a hole) has an infinite
    utilisation.
    """

    check: str
    clause: str
    value: float
    limit: float
    unit: str
    utilisation: float
    working: Working


@dataclass(frozen=True)
class Bar:
    """A lever as a beam: `load` [N] at the pivot, arms `a`, `b` [m] to holes A and B, of `count` profiles of `section`.

    `pivot_hole`, `end_hole` are the largest hole diameters [m] at pivot and ends, all at mid depth.  `side_plate` [m]
    is the thickness of plates welded on each web at the holes (0 for none).  `braced` [m] is the distance between
    spacers or other places where the compressed edge is held sideways; `deflection_limit` the largest deflection of an
    end over its arm.
    """

    load: float
    a: float
    b: float
    section: Section
    count: int
    material: Material
    pivot_hole: float
    end_hole: float
    side_plate: float
    braced: float
    deflection_limit: float


@dataclass(frozen=True)
class PlateHole:
    """A pin through a plate: one of `count` equal plates that share `load` [N]; all lengths [m].

    `side` is the clear distance from the hole's edge to the plate's edge across the load (the lesser of both sides),
    `beyond` that in the direction of the load, `radius` from the hole's centre to the edge in the direction of the
    load.  `round_edge` tells whether the edge beyond is round about the hole (an eye) or straight (a flat).
    """

    load: float
    count: int
    thickness: float
    material: Material
    pin: float
    hole: float
    side: float
    beyond: float
    radius: float
    round_edge: bool


@dataclass(frozen=True)
class PinState:
    """A pin of diameter `pin` [m] in double shear under `load` [N]: inner plate, gap, outer plate on each side."""

    load: float
    pin: float
    material: Material
    inner: float
    outer: float
    gap: float


@dataclass(frozen=True)
class RodState:
    """A threaded rod: `load` [N], `stress_area` [m²] and `root` diameter [m] of its thread, `length` [m] pin to pin.

    `eccentricity` [m] is how far off its centre line the load acts; it counts in compression alone.
    """

    load: float
    stress_area: float
    root: float
    length: float
    eccentricity: float
    material: Material
    compressed: bool


@dataclass(frozen=True)
class StrapState:
    """A flat strap in tension between two pins: width, thickness [m], and its largest hole [m]."""

    load: float
    width: float
    thickness: float
    hole: float
    material: Material


@dataclass(frozen=True)
class WebbingState:
    """A sling of webbing: `load` [N] and the load [N] at which it breaks."""

    load: float
    breaking: float


@dataclass(frozen=True)
class PlateBending:
    """A three-point plate about the worst straight line through its pivot.

    `moment` [N·m] of the forces on one side of the line, `width` [m] the steel along the line less the holes that it
    cuts, `thickness` [m]; `load` [N] at the hole that is punched worst, `washer` [m] the diameter that bears there.
    """

    load: float
    moment: float
    width: float
    thickness: float
    washer: float
    hole: float
    material: Material


class RuleSet(Protocol):
    """The checks of one set of rules."""

    @property
    def name(self) -> Literal["BTH-1", "EN 1993", "AISC 360"]:
        """As the brief calls them."""

    def lever(self, bar: Bar) -> tuple[Result, ...]:
        """Bending on the net section at the pivot, shear, lateral-torsional buckling, deflection."""

    def hole(self, hole: PlateHole) -> tuple[Result, ...]:
        """Bearing, net tension, fracture beyond the hole, tear-out (double shear), dishing."""

    def pin(self, pin: PinState) -> tuple[Result, ...]:
        """Shear, bending, and both together where the rules ask for it."""

    def rod(self, rod: RodState) -> tuple[Result, ...]:
        """Tension at the thread's root, or buckling with eccentricity where it is compressed."""

    def strap(self, strap: StrapState) -> tuple[Result, ...]:
        """Tension on the gross and on the net section."""

    def webbing(self, webbing: WebbingState) -> tuple[Result, ...]:
        """The load against the breaking load."""

    def plate(self, plate: PlateBending) -> tuple[Result, ...]:
        """Bending about the worst line, punching at the washer."""
