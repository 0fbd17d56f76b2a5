"""Rows of the parts list, of the schedules of links and pins, and of the drill and cut lists.

All in SI; tables and sheets turn them into what their headings say.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from rigdesign.hardware.model import LinkKind, PartKind

if TYPE_CHECKING:
    from rigdesign.hardware.cutting import CutPlan

PER_METRE = 1000.0
"""Millimetres in a metre: what tables and cutting files are written in."""


@dataclass(frozen=True)
class PartRow:
    """A part mark: `quantity` equal parts, `mass` [kg] of each (None where not known), `length` [m] where it has one.

    `section` says what it is made from or which size it has, `material` its grade, both empty where there is none.
    `members` are the members of the rig that the mark stands for ("lever 3", "link 7"); of a pin, spacer or
    counterweight those that it belongs to, each once.
    """

    mark: str
    kind: PartKind
    quantity: int
    section: str
    material: str
    length: float | None
    mass: float | None
    members: tuple[str, ...]

    @property
    def total(self) -> float | None:
        """Mass of all of them [kg]."""
        return None if self.mass is None else self.quantity * self.mass


@dataclass(frozen=True)
class LinkRow:
    """A link from the jack's side to the pad's.

    `upper`, `lower` say what it joins ("lever 5 A", "pad 3"), `length` [m] pin to pin at rest, `adjust` [m] each way.
    `load` [N] is what it carries at the brief's load, own weight among it, the larger of its ends, tension positive;
    `peak_load` [N] the same at the peak of the test with the overshoot: what its strength is held to.  `swing` [rad]
    is its largest angle.  `upper_pin`, `lower_pin` are the marks of its pins, empty at studs, and `upper_end`,
    `lower_end` its fittings.
    """

    number: int
    mark: str
    kind: LinkKind
    size: str
    material: str
    upper: str
    lower: str
    length: float
    adjust: float
    load: float
    peak_load: float
    swing: float
    upper_end: str
    lower_end: str
    upper_pin: str
    lower_pin: str
    mass: float

    @property
    def name(self) -> str:
        """As tables call it: "link 5"."""
        return f"link {self.number}"


@dataclass(frozen=True)
class PinRow:
    """A pin mark: `diameter`, overall `length` and `grip` [m], `mass` [kg] of each, and where each of them goes.

    `places` has an entry a pin: the hole or lug it goes through ("lever 5 A", "pad 3", "jack 1").
    """

    mark: str
    diameter: float
    length: float
    grip: float
    material: str
    mass: float
    places: tuple[str, ...]

    @property
    def quantity(self) -> int:
        """How many there are."""
        return len(self.places)


@dataclass(frozen=True)
class DrillRow:
    """A hole of a part mark: `along` [m] from the datum end, and `diameter`, `pin` [m].

    `hole` is that of the piece, "spacer" for the bolt of one, or "old pivot" for one of an earlier drilling.

    Of a lever `along` runs from the end of the steel beyond hole A, and `across` [m] is from mid depth: 0.  Of a plate
    `along` runs from its least u, `across` from its least v, both edges of the plate's own frame.
    """

    mark: str
    hole: str
    along: float
    across: float
    diameter: float
    pin: float
    note: str


@dataclass(frozen=True)
class StockCut:
    """How the bars of one section are cut: its material, bar length and kerf [m], and the plan."""

    section: str
    material: str
    bar: float
    kerf: float
    plan: CutPlan


@dataclass(frozen=True)
class Centre:
    """Mass [kg] and centre of mass of a member, of a tree ("tree 1") or of the whole rig ("rig").

    `x`, `y` [m] in plan and `height` [m] over z = 0 towards the jack; `u`, `v` [m] in the frame of a lever or plate,
    None of all else.  Trees are without jack and load cell, which hang on what holds them.
    """

    name: str
    mark: str
    mass: float
    x: float
    y: float
    height: float
    u: float | None
    v: float | None
