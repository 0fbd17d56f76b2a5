"""States of members for the tests of strength rules: unequal arms, unlike thicknesses."""

from __future__ import annotations

from rigdesign.hardware.catalogue import channel, flat, hollow
from rigdesign.hardware.catalogue.geometry import Properties
from rigdesign.hardware.model import Material, Section
from rigdesign.hardware.rules.aisc import Aisc
from rigdesign.hardware.rules.bth import Bth
from rigdesign.hardware.rules.en import En
from rigdesign.hardware.rules.model import (
    Bar,
    PinState,
    PlateBending,
    PlateHole,
    RodState,
    RuleSet,
    StrapState,
    WebbingState,
)

STEEL = Material("S355", (0.016, 0.040), (355e6, 345e6), (470e6, 470e6), 210e9, 7850.0, "EN 10025-2, Table 7")
PIN_STEEL = Material("42CrMo4", (0.016, 0.040), (900e6, 750e6), (1100e6, 1000e6), 210e9, 7850.0, "EN ISO 683-2")
ROD_STEEL = Material("8.8", (0.1,), (640e6,), (800e6,), 210e9, 7850.0, "ISO 898-1")

RULES: tuple[RuleSet, ...] = (Bth(2.0), En(1.5), Aisc())


def section(kind: str, depth: float, width: float, web: float, flange: float, of: Properties) -> Section:
    """A section of given sizes [m] with the properties that go with them."""
    return Section(
        name=f"{kind} {depth}",
        kind=kind,
        depth=depth,
        width=width,
        web=web,
        flange=flange,
        area=of.area,
        inertia=of.inertia,
        inertia_weak=of.inertia_weak,
        torsion=of.torsion,
        modulus=of.modulus,
        plastic=of.plastic,
        mass=of.area * 7850.0,
        bar=6.0,
        source="a test",
    )


def make_flat(depth: float = 0.080, thickness: float = 0.010) -> Section:
    """A flat on edge."""
    return section("flat", depth, thickness, thickness, thickness, flat(depth, thickness))


def make_channel(depth: float = 0.120, width: float = 0.055, web: float = 0.007, flange: float = 0.009) -> Section:
    """A channel with flanges of even thickness."""
    return section("channel", depth, width, web, flange, channel(depth, width, web, flange))


def make_hollow(depth: float = 0.120, width: float = 0.080, wall: float = 0.005) -> Section:
    """A rectangular hollow section."""
    return section("hollow", depth, width, wall, wall, hollow(depth, width, wall, 2 * wall))


def make_bar(**changes: object) -> Bar:
    """A lever of twin flats, arms 0.6 and 0.4 m."""
    fields: dict[str, object] = {
        "load": 8000.0,
        "a": 0.6,
        "b": 0.4,
        "section": make_flat(),
        "count": 2,
        "material": STEEL,
        "pivot_hole": 0.0255,
        "end_hole": 0.0205,
        "side_plate": 0.0,
        "braced": 0.3,
        "deflection_limit": 0.005,
    }
    return Bar(**{**fields, **changes})  # type: ignore[arg-type]


def make_hole(**changes: object) -> PlateHole:
    """The pivot's hole in two flats."""
    fields: dict[str, object] = {
        "load": 8000.0,
        "count": 2,
        "thickness": 0.010,
        "material": STEEL,
        "pin": 0.025,
        "hole": 0.0255,
        "side": 0.030,
        "beyond": 0.02725,
        "radius": 0.040,
        "round_edge": False,
    }
    return PlateHole(**{**fields, **changes})  # type: ignore[arg-type]


def make_pin(**changes: object) -> PinState:
    """The pivot's pin."""
    fields: dict[str, object] = {
        "load": 8000.0,
        "pin": 0.025,
        "material": PIN_STEEL,
        "inner": 0.020,
        "outer": 0.010,
        "gap": 0.001,
    }
    return PinState(**{**fields, **changes})  # type: ignore[arg-type]


def make_rod(**changes: object) -> RodState:
    """An M16 rod in tension."""
    fields: dict[str, object] = {
        "load": 8000.0,
        "stress_area": 156.67e-6,
        "root": 0.013546,
        "length": 0.35,
        "eccentricity": 0.0015,
        "material": ROD_STEEL,
        "compressed": False,
    }
    return RodState(**{**fields, **changes})  # type: ignore[arg-type]


def make_strap(**changes: object) -> StrapState:
    """A strap 40 × 8 mm."""
    fields: dict[str, object] = {"load": 8000.0, "width": 0.040, "thickness": 0.008, "hole": 0.0165, "material": STEEL}
    return StrapState(**{**fields, **changes})  # type: ignore[arg-type]


def make_webbing(**changes: object) -> WebbingState:
    """A sling that breaks at 70 kN."""
    return WebbingState(**{"load": 8000.0, "breaking": 70e3, **changes})  # type: ignore[arg-type]


def make_plate(**changes: object) -> PlateBending:
    """A three-point plate of 20 mm."""
    fields: dict[str, object] = {
        "load": 6000.0,
        "moment": 500.0,
        "width": 0.15,
        "thickness": 0.020,
        "washer": 0.050,
        "hole": 0.0205,
        "material": STEEL,
    }
    return PlateBending(**{**fields, **changes})  # type: ignore[arg-type]
