"""What the check of the hardware found: strength, clearances, heights, own weight, and the verdict on all of it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal

from rigdesign.brief.model import Quantity
from rigdesign.checks.model import Check
from rigdesign.findings import Finding
from rigdesign.hardware.model import Hardware
from rigdesign.levers.model import HoleName
from rigdesign.target.curve import Floats


@dataclass(frozen=True)
class Loads:
    """Forces with the rig's own weight, signed along z [N]; each is fixed + rate · (its jack's force).

    `pad_rate`, `pad_fixed` (n_pads,) are what the specimen feels at each pad, the pad's own weight among it.
    `upper_fixed`, `lower_fixed` (n_links,) are what a link has at its upper and lower end at zero jack force,
    `link_rate` (n_links,) what it has of the jack's; `tree` (n_links,) says of which tree, counted from 0.
    `weight` (n_trees,) is all that hangs on or stands under each jack's cell, as a force along z (signed).
    """

    pad_rate: Floats
    pad_fixed: Floats
    link_rate: Floats
    upper_fixed: Floats
    lower_fixed: Floats
    tree: tuple[int, ...]
    weight: Floats


@dataclass(frozen=True)
class StrengthRow:
    """One strength check of one member: `load` [N] at peak with overshoot, `value` and `limit` in `unit`.

    `utilisation` is 1 or less where it passes: value over limit, where the limit holds the design factor already.
    `working` are the intermediate values in the source's own symbols, with their units, in the order of the formula.
    """

    piece: str
    check: str
    clause: str
    load: float
    value: float
    limit: float
    unit: str
    utilisation: float
    working: tuple[tuple[str, float, str], ...]


@dataclass(frozen=True)
class Clearance:
    """Least distance of one pair of members [m], where they come closest, and in which state of the levers."""

    first: str
    second: str
    distance: float
    state: Literal["at rest", "turned"]


@dataclass(frozen=True)
class Space:
    """How high the rig stands and how near its members come to each other.

    `heights` [m] are levels over the plane z = 0, by name, from the pads to the jack's upper pin, in rising order;
    `total` [m] is the highest.  `closest` are the nearest pairs at rest and with the levers turned, nearest first;
    `required` [m] is what the brief asks for.  `swings` (n_links,) [rad] are the links' largest angles.
    """

    heights: tuple[tuple[str, float], ...]
    total: float
    closest: tuple[Clearance, ...]
    required: float
    swings: Floats


@dataclass(frozen=True)
class Step:
    """One step of the test with the rig's own weight: `level` of the brief's load, jack forces (n_trees,) [N].

    The jacks' forces are those of least band use at the step, all scaled alike.  `pad_force` (n_pads,) [N] is what the
    specimen feels.  `errors` are the largest errors by quantity over the peak of the step's own target, `band_use` is
    of the bands at this step's target.  `slack` are the pads whose links would carry nothing or the wrong way.
    """

    level: float
    jack: Floats
    pad_force: Floats
    errors: Mapping[Quantity, float]
    band_use: float
    slack: tuple[int, ...]


@dataclass(frozen=True)
class Zeros:
    """Readings of one jack's load cell [N], positive where the tree is loaded as in the test, in three states.

    `apart`: cell disconnected.  `hung`: tree on the jack, pads slack, None where the tree cannot hang or stand on its
    jack alone.  `supported`: the specimen's own weight just carried by the pads, None where the brief gives no
    weight or the pads act along gravity.
    """

    jack: str
    apart: float
    hung: float | None
    supported: float | None


@dataclass(frozen=True)
class Remedy:
    """Counterweights [kg] by piece and hole, their total, and the band use and errors that remain at 100 %.

    `kind` "balanced levers": each piece's own centre at its pivot; "counterweights": all that hangs on it as well.
    """

    kind: Literal["balanced levers", "counterweights"]
    masses: tuple[tuple[str, HoleName, float], ...]
    total: float
    band_use: float
    errors: Mapping[Quantity, float]


@dataclass(frozen=True)
class Tare:
    """What the rig's own weight does: pad forces at zero jack force (n_pads,) [N], steps, zeros, remedies."""

    pad_tare: Floats
    steps: tuple[Step, ...]
    zeros: tuple[Zeros, ...]
    remedies: tuple[Remedy, ...]

    def step(self, level: float) -> Step:
        """Return the step at a level of the brief's load.

        Raises
        ------
        KeyError
            Where there is no such step.
        """
        for step in self.steps:
            if abs(step.level - level) < 1e-9:
                return step
        raise KeyError(level)


@dataclass(frozen=True)
class HardwareCheck:
    """The whole answer: the check of the rig, its hardware, and what the check of the hardware found.

    `findings` holds those of `check` first, and then those of space, strength and behaviour, numbered on.
    """

    check: Check
    hardware: Hardware
    loads: Loads
    strength: tuple[StrengthRow, ...]
    space: Space
    tare: Tare
    findings: tuple[Finding, ...]

    @property
    def accepted(self) -> bool:
        """Whether the check accepts the rig and no finding on its hardware is a failure."""
        return self.check.accepted and not any(finding.severity == "failure" for finding in self.findings)

    @property
    def utilisation(self) -> float:
        """Largest utilisation of all strength checks; 0 where there is none."""
        return max((row.utilisation for row in self.strength), default=0.0)
