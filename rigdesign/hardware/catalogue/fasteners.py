"""Threaded rods and webbing to choose from, smallest first."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from math import pi

from rigdesign.hardware.catalogue.reading import rows
from rigdesign.words import STANDARD_GRAVITY

WEBBING_FACTOR = 7.0
"""Breaking load of new webbing over its working load limit; EN 1492-1, from memory."""


@dataclass(frozen=True)
class Thread:
    """A metric thread: nominal diameter and pitch [m], as "M16"."""

    name: str
    nominal: float
    pitch: float
    source: str

    @property
    def stress_area(self) -> float:
        """Tensile stress area [m²], π/4 (d − 0.9382 p)²: ISO 898-1.

        >>> round(Thread("M16", 0.016, 0.002, "").stress_area * 1e6, 1)  # mm²
        156.7
        """
        return pi / 4 * (self.nominal - 0.9382 * self.pitch) ** 2

    @property
    def root(self) -> float:
        """Diameter at the thread's root [m], d − 1.2269 p: ISO 68-1.

        >>> round(Thread("M16", 0.016, 0.002, "").root * 1e3, 3)  # mm
        13.546
        """
        return self.nominal - 1.2269 * self.pitch


@dataclass(frozen=True)
class Webbing:
    """A sling of webbing: width, thickness [m], the load at which it breaks when new [N], mass [kg/m]."""

    name: str
    width: float
    thickness: float
    breaking: float
    mass: float
    source: str


@cache
def threads() -> tuple[Thread, ...]:
    """Return the threads of rods in rising order; the rods are of grade 8.8."""
    return tuple(
        Thread(f"M{row['nominal_mm']}", float(row["nominal_mm"]) / 1e3, float(row["pitch_mm"]) / 1e3, row["source"])
        for row in rows("threads")
    )


@cache
def webbings() -> tuple[Webbing, ...]:
    """Return the webbings in rising order; a straight pull breaks them at seven times their working load limit."""
    return tuple(
        Webbing(
            name=f"{row['width_mm']} mm webbing",
            width=float(row["width_mm"]) / 1e3,
            thickness=float(row["thickness_mm"]) / 1e3,
            breaking=WEBBING_FACTOR * float(row["working_mass_kg"]) * STANDARD_GRAVITY,
            mass=float(row["mass_kg_m"]),
            source=row["source"],
        )
        for row in rows("webbings")
    )
