"""The brief as the later stages see it: validated, frozen, in SI units, tables read.

Arrays are float64, read-only, in the order of their table.  `None` means "not given in the brief".
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Shape = Literal["uniform", "linear", "triangular", "elliptical", "parabolic", "power", "sine", "schrenk"]


@dataclass(frozen=True)
class Weight:
    """Mass of the specimen along the span: x [m] (n,), mass per length [kg/m] (n,), straight between rows.

    Two rows at one x are a jump.  Point masses: `point_x` [m] (k,), `point_mass` [kg] (k,).
    """

    x: Floats
    mass: Floats
    point_x: Floats
    point_mass: Floats


@dataclass(frozen=True)
class Specimen:
    """The thing under test.

    `left`, `right` [m] are root and tip of a cantilever, or the ends of a specimen on two supports; left < right.
    `supports` [m] is empty for a cantilever, which is held at `left`, and holds two stations otherwise.
    `gravity` is the sign of gravity along z: −1 against (along −z), +1 with.
    """

    support: Literal["cantilever", "two supports"]
    left: float
    right: float
    supports: tuple[float, ...]
    weight: Weight | None
    gravity: int


@dataclass(frozen=True)
class ShapeLoad:
    """A running load of a named shape between `start_x` and `end_x` [m].

    Either `total` [N] is given, or (linear alone) `start` and `end` [N/m]; `total` is then None.
    `exponent` belongs to power, `greatest` to triangular, `chord_x` and `chord` [m] to schrenk (else empty).
    """

    shape: Shape
    start_x: float
    end_x: float
    total: float | None
    start: float | None
    end: float | None
    exponent: float
    greatest: Literal["root", "tip"]
    chord_x: Floats
    chord: Floats
    times: float
    where: str


@dataclass(frozen=True)
class TableLoad:
    """A running load as a table: x [m] (n,), load [N/m] (n,), straight between rows; two rows at one x are a jump."""

    x: Floats
    load: Floats
    times: float
    where: str


@dataclass(frozen=True)
class InternalLoad:
    """A table of shear V [N] and moment M [N·m] by station x [m], all (n,), signs of conventions (reversals done)."""

    x: Floats
    shear: Floats
    moment: Floats
    shear_digit: float
    moment_digit: float
    times: float
    where: str


@dataclass(frozen=True)
class PointLoads:
    """Point loads: x [m] (n,), force [N] (n,); one `point` of the brief or a `forces` table."""

    x: Floats
    force: Floats
    times: float
    where: str


@dataclass(frozen=True)
class InertiaLoad:
    """`factor` times g times the specimen's weight table, along +z when positive."""

    factor: float
    times: float
    where: str


Load = ShapeLoad | TableLoad | InternalLoad | PointLoads | InertiaLoad
Grouping = tuple["int | Grouping", ...]


@dataclass(frozen=True)
class PadRules:
    """What [pads] asks for.  Forces [N] and pressures [Pa] are limits at the peak of the test, lengths [m].

    `stations` (n,) [m] are the places of fixed pads or hard points, empty for free places.
    """

    count: int | Literal["fewest"]
    places: Literal["free", "fixed", "hard points"]
    stations: Floats
    length: float
    width: float | None
    gap: float
    largest_force: float
    least_force: float
    largest_pressure: float
    keep_out: tuple[tuple[float, float], ...]
    action: Literal["pull", "push"]
    aim: Literal["closest", "even"]
    ease: float


@dataclass(frozen=True)
class LeverRules:
    """What [levers] asks for: lengths [m]; `longest` is infinite and `tiers` is None where not given."""

    drill_step: float
    ratio_limit: float
    shortest_arm: float
    longest: float
    tiers: int | None
    grouping: Grouping | None


@dataclass(frozen=True)
class JackRules:
    """Where the jack can stand: at one place, or on multiples of a step [m]; both None: at the resultant."""

    at: float | None
    step: float | None


@dataclass(frozen=True)
class BandRule:
    """One side of one band between two stations: `amount` is a fraction, or a quantity in N or N·m if `absolute`.

    `of` says what a fraction is of: the peak of the target's curve, or its local value.
    """

    quantity: Literal["shear", "moment"]
    side: Literal["under", "over"]
    amount: float
    absolute: bool
    of: Literal["peak", "local"]


@dataclass(frozen=True)
class Region:
    """A stretch of the span [m] with the band rules that it names; `name` is how messages call it."""

    name: str
    start_x: float
    end_x: float
    rules: tuple[BandRule, ...]


@dataclass(frozen=True)
class Acceptance:
    """Band rules for the whole span, the regions that override them in order, and whether they are the defaults."""

    rules: tuple[BandRule, ...]
    regions: tuple[Region, ...]
    defaulted: bool


@dataclass(frozen=True)
class Source:
    """The texts that the brief came from, by file name; `brief_name` is the brief's own.  rig.json keeps them."""

    brief_name: str
    texts: dict[str, str]


@dataclass(frozen=True)
class Brief:
    """What is to be tested and within which limits.  `peak` is the highest load as a multiple of the brief's load."""

    title: str
    specimen: Specimen
    loads: tuple[Load, ...]
    peak: float
    pads: PadRules
    levers: LeverRules
    jack: JackRules
    acceptance: Acceptance
    source: Source
