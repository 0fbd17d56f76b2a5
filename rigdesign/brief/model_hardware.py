"""What the brief says of hardware and of a rig that is kept, as the later stages see it; part of `brief.model`."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]


def _nothing() -> Floats:
    return np.empty(0)


Build = Literal["twin flats", "twin channels", "hollow section"]
"""How levers are built."""


@dataclass(frozen=True)
class StockRow:
    """A profile of the brief's own stock: outer sizes and thicknesses [m].

    Of a flat `width`, `web` and `flange` are its thickness, of a plate `depth` too; of a hollow section `web` and
    `flange` are its wall.
    `bar` is the length in which it is sold [m], None for that of the brief; `where` is its row for messages.
    """

    name: str
    kind: Literal["flat", "channel", "hollow", "plate"]
    depth: float
    width: float
    web: float
    flange: float
    bar: float | None
    where: str


@dataclass(frozen=True)
class MachineRow:
    """A jack or load cell of the brief's own: force [N], length pin to pin and stroke [m] (0 for cells), mass [kg]."""

    name: str
    force: float
    length: float
    stroke: float
    mass: float
    pin: float


@dataclass(frozen=True)
class Surface:
    """The loaded surface: z [m] at x, y [m], all (n,), linear between; y is empty where z only varies along x."""

    x: Floats
    z: Floats
    y: Floats = field(default_factory=_nothing)


@dataclass(frozen=True)
class HardwareRules:
    """What [hardware] asks for.  Lengths and diameters [m], angles [rad], masses [kg]; every field has a default.

    `headroom` is infinite where not given.  `builds` holds a build for each tier from the jack, the last one holding
    for all further tiers.  `design_factor` is that of BTH-1, `load_factor` the factor on loads of EN 1993; only that of
    the chosen rules counts, and AISC 360 has neither.  Strength is held at the test's
    peak times `overshoot`.  `pins` are diameters in rising order.  `play` is how much a hole is larger than its pin.
    `turn` is the angle by which every lever may turn, `swing` the largest angle of a link.  `link_length` is the least
    length of links pin to pin, 0 for as short as fits.  `deflection` is the largest deflection of a lever's end over
    its arm.  `density` [kg/m³] overrides that of the grade where given.  `stock`, `jacks`, `cells` are empty for the
    catalogues that ship.  `surface` None: z = 0.  With `marks` "few", levers whose arms differ by at most
    `mark_tolerance` may be made alike.  `balance` says whether counterweights are put on.  `bar` and `kerf` are for
    the cut list; `revision` for the sheets.
    """

    headroom: float
    clearance: float
    builds: tuple[Build, ...]
    grade: str
    pin_grade: str
    rules: Literal["BTH-1", "EN 1993", "AISC 360"]
    design_factor: float
    load_factor: float
    overshoot: float
    pins: tuple[float, ...]
    play: float
    links: Literal["rod", "strap", "webbing"]
    link_length: float
    turn: float
    swing: float
    deflection: float
    density: float | None
    pad_mass: float
    pad_height: float
    stock: tuple[StockRow, ...]
    jacks: tuple[MachineRow, ...]
    cells: tuple[MachineRow, ...]
    surface: Surface | None
    marks: Literal["as drilled", "few"]
    mark_tolerance: float
    balance: Literal["as needed", "none", "counterweights"]
    bar: float
    kerf: float
    revision: str


@dataclass(frozen=True)
class KeptRig:
    """A rig whose steel is cut: the folder as the brief writes it, the text of its rig.json, and where messages say it.

    Pads, levers and their lengths stay; only pivots may be drilled anew, and where they are, no nearer to the old hole
    than `hole_distance` [m], centre to centre (None: twice the hole's diameter).
    """

    folder: str
    text: str
    where: str
    hole_distance: float | None
