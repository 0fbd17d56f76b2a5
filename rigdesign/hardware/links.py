"""Rods, straps and webbing: the smallest size that bears a link's load, and how short a link can be.

A rod is threaded steel of grade 8.8 with a fitting on each end; turning it sets its length.  Straps and webbing get a
turnbuckle where they carry a pad, so that every branch has an adjuster.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import pi

from rigdesign.hardware.catalogue import Thread, Webbing
from rigdesign.hardware.model import LinkKind, Material
from rigdesign.hardware.rules.model import RodState, RuleSet, WebbingState

ROD_GRADE = "8.8"

SHANK = 2.5
"""Length of the threaded shank of an eye or fork over the rod's diameter; common practice."""

STUD = 2.0
"""Height of nut and spherical washers on a plate over the rod's diameter; common practice."""

ADJUST = 1.0
"""How far a rod can be made longer or shorter, over its diameter; common practice."""

TURNBUCKLE = 8.0
"""Length of a turnbuckle over the diameter of its screws; common practice."""

ECCENTRICITY = 0.002
"""Part of its length by which a compressed rod is taken to be loaded off its centre line; see also `ROD_PLAY`."""

ROD_PLAY = 0.001
"""What a compressed rod is off its centre line besides [m]; set here."""


@dataclass(frozen=True)
class LinkSize:
    """What a link is made of: kind, name, width and thickness [m], stress area [m²], screw [m], utilisation."""

    kind: LinkKind
    size: str
    width: float
    thickness: float
    stress_area: float
    screw: float
    material: Material
    utilisation: float


def rod_state(load: float, thread: Thread, material: Material, length: float, compressed: bool) -> RodState:
    """A rod under load [N]; `length` [m] pin to pin counts where it is compressed."""
    off = ECCENTRICITY * length + ROD_PLAY if compressed else 0.0
    return RodState(load, thread.stress_area, thread.root, length, off, material, compressed)


def rod(
    load: float, threads: tuple[Thread, ...], material: Material, rules: RuleSet, length: float, compressed: bool
) -> LinkSize:
    """Smallest rod that bears `load` [N]; the largest, with its utilisation, where none does."""
    for thread in threads:
        state = rod_state(load, thread, material, length, compressed)
        use = max(result.utilisation for result in rules.rod(state))
        if use <= 1.0:
            break
    return LinkSize(
        "rod", thread.name, thread.nominal, thread.nominal, thread.stress_area, thread.nominal, material, use
    )


def webbing(load: float, sizes: tuple[Webbing, ...], material: Material, rules: RuleSet) -> LinkSize:
    """Narrowest webbing that bears `load` [N]; the strongest, with its utilisation, where none does."""
    for size in sizes:
        use = max(result.utilisation for result in rules.webbing(WebbingState(load, size.breaking)))
        if use <= 1.0:
            break
    return LinkSize("webbing", size.name, size.width, size.thickness, size.width * size.thickness, 0.0, material, use)


def screw_for(load: float, threads: tuple[Thread, ...], material: Material, rules: RuleSet) -> Thread:
    """Smallest thread whose turnbuckle bears `load` [N]; the largest where none does."""
    for thread in threads:
        if all(result.utilisation <= 1.0 for result in rules.rod(rod_state(load, thread, material, 0.0, False))):
            return thread
    return threads[-1]


def round_area(diameter: float) -> float:
    """Area of a circle [m²]."""
    return pi / 4 * diameter**2
