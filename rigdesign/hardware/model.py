"""What the rig is made of: sections, pins, links, pads, jack and cell, with their sizes, heights and masses.

All in SI.  Heights are counted from the plane z = 0 of the specimen towards the jack, whichever side that is on:
`Hardware.side` is +1 where the rig stands on the side of +z, −1 where it stands on the side of −z.  A height h is at
z = side · h.  The three holes of a piece lie at one height at rest, the height of the piece.

Nothing here is checked by being here: the check reads sizes, places and masses, and works out forces, strength and
clearances anew.  Masses it takes as they are.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from functools import cached_property
from typing import Literal

import numpy as np

from rigdesign.brief.model_hardware import Build
from rigdesign.findings import Finding
from rigdesign.levers.model import HoleName, Piece, Rig
from rigdesign.target.curve import Floats

SectionKind = Literal["flat", "channel", "hollow", "round", "plate"]
Fitting = Literal["eye", "fork", "stud", "loop"]
LinkKind = Literal["rod", "strap", "webbing"]


def _no_places() -> Floats:
    return np.empty((0, 2))


PartKind = Literal["lever", "plate", "link", "pin", "pad", "jack", "cell", "spacer", "counterweight"]


@dataclass(frozen=True)
class Material:
    """A grade: yield and ultimate strength [Pa] by thickness up to `limits` [m], modulus [Pa], density [kg/m³].

    `limits`, `yields`, `ultimates` go together, limits rising, the last maybe infinite.
    """

    name: str
    limits: tuple[float, ...]
    yields: tuple[float, ...]
    ultimates: tuple[float, ...]
    modulus: float
    density: float
    source: str

    def row(self, thickness: float) -> int:
        """Return which thickness range holds `thickness` [m]; the last one beyond them all."""
        return next((i for i, most in enumerate(self.limits) if thickness <= most + 1e-9), len(self.limits) - 1)

    def fy(self, thickness: float) -> float:
        """Yield strength [Pa] at a thickness [m]."""
        return self.yields[self.row(thickness)]

    def fu(self, thickness: float) -> float:
        """Ultimate strength [Pa] at a thickness [m]."""
        return self.ultimates[self.row(thickness)]


@dataclass(frozen=True)
class Section:
    """One profile of the stock; bending in the lever's plane is about the strong axis (depth upright).

    `depth` and `width` are the outer sizes [m]: of a flat its depth and thickness, of a round both its diameter.
    `web` and `flange` are thicknesses [m], of a flat and a hollow section equal.  `area` [m²], `inertia`,
    `inertia_weak`, `torsion` [m⁴], `modulus`, `plastic` (elastic and plastic, strong axis) [m³], `mass` [kg/m].
    `bar` is the length in which it is sold [m].
    """

    name: str
    kind: SectionKind
    depth: float
    width: float
    web: float
    flange: float
    area: float
    inertia: float
    inertia_weak: float
    torsion: float
    modulus: float
    plastic: float
    mass: float
    bar: float
    source: str


@dataclass(frozen=True)
class Spacer:
    """A tube across the gap of twin profiles with a bolt through it: diameters of tube, bore and bolt [m].

    The bore is that of the holes in the profiles as well.
    """

    tube: float
    bore: float
    bolt: float


_SPACERS = ((0.035, Spacer(0.012, 0.0066, 0.006)), (0.055, Spacer(0.016, 0.009, 0.008)))
_LARGE_SPACER = Spacer(0.025, 0.0135, 0.012)
# bores of ISO 273, medium (from memory); none takes more than a third of the depth, where a lever is bent less than at
# its pivot


@dataclass(frozen=True)
class Body:
    """What a lever or plate is made of.

    A lever: `profiles` (2 for twin flats and twin channels, 1 for a hollow section) of `section`, `gap` [m] clear
    between two profiles (0 for one), `overhang` [m] from the end holes A and B to the ends of the steel, side plates
    of thickness `side_plate` [m] welded outside on both webs of a hollow section at each hole (0 for none), and
    spacers at `spacers` [m], their u in the piece's frame.  A plate: `section` is the plate of its thickness (kind
    "plate", depth = thickness), `outline` its corners u, v [m] (n, 2) counter-clockwise, `overhang` the radius about
    its holes.  `counterweights` are masses [kg] by the hole that they hang at.  `old_pivots` (n, 2) [m] are u, v of
    pivots of an earlier drilling, holes of the pivot's diameter that stay open.
    """

    piece: str
    build: Build | Literal["plate"]
    section: Section
    material: Material
    profiles: int
    gap: float
    overhang: float
    side_plate: float
    spacers: tuple[float, ...]
    outline: Floats
    counterweights: Mapping[HoleName, float] = field(default_factory=dict)
    old_pivots: Floats = field(default_factory=_no_places)

    @property
    def spacer(self) -> Spacer:
        """What holds its profiles apart, by their depth."""
        return next((spacer for depth, spacer in _SPACERS if self.section.depth <= depth), _LARGE_SPACER)

    @property
    def across(self) -> float:
        """Outer size across the lever's plane [m]; of a plate its thickness."""
        return self.profiles * self.section.width + self.gap + 2 * self.side_plate


@dataclass(frozen=True)
class End:
    """One end of a link: what it is pinned to, by which pin, and what lies on that pin.

    `to` is "lever 5", "pad 3" or "jack 1", `at` the hole there ("" at pads and jacks).  `pin` is the pin's diameter,
    `hole` that of the holes (pin plus play), `pin_length` the pin's whole length, `inner` the thickness of what lies in
    the middle of the pin, `outer` that of each of the two on its outsides, `gap` the clear distance between inner and
    outer on each side, `radius` from the hole's centre to the edge of the link's fitting; all [m].

    "eye": the link's eye lies inside, the piece or lugs outside.  "fork": the link's two cheeks lie outside.
    "stud": a threaded end of diameter `pin` stands through the hole of a plate of thickness `inner`, on spherical
    washers of diameter 2 · `radius`.  "loop": webbing round the pin.
    """

    fitting: Fitting
    to: str
    at: HoleName | Literal[""]
    pin: float
    hole: float
    pin_length: float
    inner: float
    outer: float
    gap: float
    radius: float


@dataclass(frozen=True)
class Link:
    """A link, from the jack's side (`upper`) to the pad's (`lower`), `length` pin to pin [m] at rest.

    `size` is what the parts list calls it ("M16", "40×8", "50 mm webbing").  `width`, `thickness` [m] are those of a
    strap or webbing, both the diameter of a rod; `stress_area` [m²] is where it is weakest (a rod's thread).
    `mass` [kg] is all of it, fittings, pins and adjuster among it.  `adjust` [m] is how far it can be made longer or
    shorter each way.
    """

    number: int
    kind: LinkKind
    size: str
    width: float
    thickness: float
    stress_area: float
    material: Material
    fitting_material: Material
    pin_material: Material
    upper: End
    lower: End
    length: float
    adjust: float
    mass: float

    @property
    def name(self) -> str:
        """As tables call it: "link 5"."""
        return f"link {self.number}"


@dataclass(frozen=True)
class Machine:
    """A jack or a load cell: force that it may bear, length pin to pin (of a jack, closed) and stroke, mass."""

    name: str
    force: float
    length: float
    stroke: float
    mass: float
    pin: float
    source: str

    @property
    def standing(self) -> float:
        """Length pin to pin as the rig is set up [m]: of a jack with its rod half out."""
        return self.length + 0.5 * self.stroke


@dataclass(frozen=True)
class JackStack:
    """What stands on one tree: jack and load cell.  None of either is chosen where none is strong enough."""

    jack: str
    machine: Machine
    cell: Machine


@dataclass(frozen=True)
class PadBody:
    """A pad: `mass` [kg], and `height` [m] from the specimen's surface to its pin; `surface` [m], a height."""

    pad: int
    mass: float
    height: float
    surface: float

    @property
    def pin_height(self) -> float:
        """Height of its pin [m]."""
        return self.surface + self.height


@dataclass(frozen=True)
class Shortfall:
    """What no stock can carry, or what does not fit: the member, the check that fails, by how much, what would do."""

    piece: str
    check: str
    utilisation: float
    remedy: str


@dataclass(frozen=True)
class Mass:
    """Mass [kg] of one member and its centre u, v in its own frame [m], counterweights among it."""

    mass: float
    u: float
    v: float


@dataclass(frozen=True)
class Hardware:
    """All steel of a rig.

    `bodies` by the piece's name, `links` numbered from the jack, tier by tier, `pads` in their order, `stacks` one a
    tree, `heights` [m] of pieces and of "jack 1" (its lower pin) by name.  `marks` gives the part mark of every
    member by its name ("lever 5", "link 3", "pad 2", "jack 1").  `shortfalls` tell what is drawn though it fails.
    `words` say what the search did.
    """

    rig: Rig
    side: int
    bodies: Mapping[str, Body]
    links: tuple[Link, ...]
    pads: tuple[PadBody, ...]
    stacks: tuple[JackStack, ...]
    heights: Mapping[str, float]
    marks: Mapping[str, str]
    masses: Mapping[str, Mass]
    shortfalls: tuple[Shortfall, ...]
    words: str
    findings: tuple[Finding, ...] = ()

    @cached_property
    def pieces(self) -> tuple[Piece, ...]:
        """Levers and plates of all trees in their order."""
        return tuple(piece for tree in self.rig.trees for piece in tree.pieces)

    @cached_property
    def link_above(self) -> Mapping[str, Link]:
        """The link that each piece and pad hangs by, by the name of the piece or pad."""
        return {link.lower.to: link for link in self.links}

    def end_at(self, piece: str, hole: HoleName) -> End:
        """Return the link's end that is pinned to a hole of a piece.

        Raises
        ------
        KeyError
            Where no link is pinned there.
        """
        for link in self.links:
            for end in (link.upper, link.lower):
                if end.to == piece and end.at == hole:
                    return end
        raise KeyError(piece, hole)
