"""The brief as the later stages see it: validated, frozen, in SI units, tables read.

Arrays are float64, read-only, in the order of their table.  `None` means "not given in the brief".

A specimen with an outline is a surface, its rig a plan rig.  A line rig is a plan rig with y = 0 throughout: the same
classes, with the fields that speak of y left at their defaults.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from typing import TYPE_CHECKING, Literal

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model_hardware import HardwareRules, KeptRig

if TYPE_CHECKING:
    from shapely import Polygon

Floats = NDArray[np.float64]
Shape = Literal["uniform", "linear", "triangular", "elliptical", "parabolic", "power", "sine", "schrenk"]


def _nothing() -> Floats:
    return np.empty(0)


@dataclass(frozen=True)
class Line:
    """A line in plan, straight between its points: x, y [m] (n,), n ≥ 2, x in order and distinct."""

    x: Floats
    y: Floats

    def at(self, x: Floats) -> Floats:
        """Return y [m] at x [m], any shape; beyond its ends the line goes on as its last stretch does."""
        row = np.clip(np.searchsorted(self.x, x, side="right") - 1, 0, self.x.size - 2)
        slope = np.diff(self.y) / np.diff(self.x)
        return np.asarray(self.y[row] + slope[row] * (x - self.x[row]))


@dataclass(frozen=True)
class Outline:
    """A simple polygon in plan: corners x, y [m] (n,), counter-clockwise, the first not repeated.

    `name` is how messages call it.
    """

    x: Floats
    y: Floats
    name: str = ""

    @cached_property
    def polygon(self) -> Polygon:
        """The same as shapely's polygon."""
        from shapely import Polygon

        return Polygon(np.column_stack([self.x, self.y]))


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

    A surface has an `outline`.  `axis` is the reference axis, which covers left to right, None for y = 0; `cut` says
    how V, M and T are cut; `weight_line` is where the weight acts, None for on the axis.
    """

    support: Literal["cantilever", "two supports"]
    left: float
    right: float
    supports: tuple[float, ...]
    weight: Weight | None
    gravity: int
    outline: Outline | None = None
    axis: Line | None = None
    cut: Literal["square to x", "square to axis"] = "square to x"
    weight_line: Line | None = None

    @property
    def is_surface(self) -> bool:
        """Whether the specimen is given by its outline, so that its rig is a plan rig."""
        return self.outline is not None

    @cached_property
    def reference_axis(self) -> Line:
        """The reference axis: the brief's, or y = 0 from left to right."""
        return self.axis or Line(np.array([self.left, self.right]), np.zeros(2))

    @property
    def mean_width(self) -> float:
        """Area of the outline over the span [m]; 0 where there is no outline."""
        return 0.0 if self.outline is None else float(self.outline.polygon.area) / (self.right - self.left)


@dataclass(frozen=True)
class ShapeLoad:
    """A running load of a named shape between `start_x` and `end_x` [m].

    Either `total` [N] is given, or (linear alone) `start` and `end` [N/m]; `total` is then None.
    `exponent` belongs to power, `greatest` to triangular, `chord_x` and `chord` [m] to schrenk (else empty).
    It acts along `line`, None for on the reference axis.
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
    line: Line | None = None


@dataclass(frozen=True)
class TableLoad:
    """A running load as a table: x [m] (n,), load [N/m] (n,), straight between rows; two rows at one x are a jump.

    It acts along `line`, None for on the reference axis.
    """

    x: Floats
    load: Floats
    times: float
    where: str
    line: Line | None = None


@dataclass(frozen=True)
class InternalLoad:
    """A table of shear V [N] and moment M [N·m] by station x [m], all (n,), signs of conventions (reversals done).

    `torsion` T [N·m] (n,) about the reference axis, empty where the table has none.  The digits are the units in which
    the columns are rounded.
    """

    x: Floats
    shear: Floats
    moment: Floats
    shear_digit: float
    moment_digit: float
    times: float
    where: str
    torsion: Floats = field(default_factory=_nothing)
    torsion_digit: float = 0.0


@dataclass(frozen=True)
class PointLoads:
    """Point loads: x [m] (n,), force [N] (n,); one `point` of the brief or a `forces` table.

    `y` [m] (n,), empty for loads on the reference axis.
    """

    x: Floats
    force: Floats
    times: float
    where: str
    y: Floats = field(default_factory=_nothing)


@dataclass(frozen=True)
class InertiaLoad:
    """`factor` times g times the specimen's weight table, along +z when positive."""

    factor: float
    times: float
    where: str


@dataclass(frozen=True)
class PressureLoad:
    """A pressure map: x, y [m] and pressure [Pa], all (n,), not on one line; along +z where positive.

    Linear between the points; beyond them each place has the value of the nearest place of the area that they cover.
    """

    x: Floats
    y: Floats
    pressure: Floats
    times: float
    where: str


@dataclass(frozen=True)
class TorqueLoad:
    """A running torque as a table: x [m] (n,), torque [N·m/m] (n,), straight between rows, two rows at one x a jump.

    Positive as torsion is: it raises the side of greater y.  It turns about the x direction, or about the reference
    axis where the cut is square to the axis.
    """

    x: Floats
    torque: Floats
    times: float
    where: str


@dataclass(frozen=True)
class CoupleLoad:
    """A point couple [N·m] at x [m]; sign and direction as of a running torque."""

    x: float
    couple: float
    times: float
    where: str


Load = ShapeLoad | TableLoad | InternalLoad | PointLoads | InertiaLoad | PressureLoad | TorqueLoad | CoupleLoad
Grouping = tuple["int | Grouping", ...]


@dataclass(frozen=True)
class PadRules:
    """What [pads] asks for.  Forces [N] and pressures [Pa] are limits at the peak of the test, lengths [m].

    `stations` (n,) [m] are the places of fixed pads or hard points, empty for free places.

    On a surface they have `y` (n,) [m] (empty: all on y = 0) and stand root to tip (by x, then y).  `turns` (n,) [rad]
    are the directions of the footprints' lengths where a table gives them, else `turn` holds for all: along x, along
    the reference axis, or an angle [rad], counter-clockwise from x.  Free pads sit on `rows`, or anywhere where there
    are none.  `edge` is the least distance from footprint to outline.
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
    y: Floats = field(default_factory=_nothing)
    turn: Literal["along x", "along axis"] | float = "along x"
    turns: Floats = field(default_factory=_nothing)
    rows: tuple[Line, ...] = ()
    edge: float = 0.0
    keep_out_areas: tuple[Outline, ...] = ()


@dataclass(frozen=True)
class LeverRules:
    """What [levers] asks for: lengths [m]; `longest` is infinite and `tiers` is None where not given.

    On a surface: whether three-point `plates` are allowed, which pads `pair` first (those across the span, those along
    it), and the least `clearance` in plan between the centre lines of pieces of one tier.
    """

    drill_step: float
    ratio_limit: float
    shortest_arm: float
    longest: float
    tiers: int | None
    grouping: Grouping | None
    plates: bool = False
    pair: Literal["across first", "along first", "any"] = "any"
    clearance: float = 0.0


@dataclass(frozen=True)
class JackRules:
    """Where the jack can stand: at one place, or on multiples of a step [m]; both None: at the resultant.

    On a surface `at_y` goes with `at` (None: on the reference axis), and the step holds along x and y.
    """

    at: float | None
    step: float | None
    at_y: float | None = None


Quantity = Literal["shear", "moment", "torsion", "shear across", "moment across"]
"""What can have a band.  "across" is cut the other way, square to y, and has no regions."""


@dataclass(frozen=True)
class BandRule:
    """One side of one band between two stations: `amount` is a fraction, or a quantity in N or N·m if `absolute`.

    `of` says what a fraction is of: the peak of the target's curve, or its local value.
    """

    quantity: Quantity
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
    """Band rules for the whole span, the regions that override them in order, and whether they are the defaults.

    `share` is how far a pad's force may be from its tributary share of a panel's load, as a fraction of that share;
    None where pads are not judged one by one.
    """

    rules: tuple[BandRule, ...]
    regions: tuple[Region, ...]
    defaulted: bool
    share: float | None = None
    share_defaulted: bool = False


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
    hardware: HardwareRules
    keep: KeptRig | None = None
