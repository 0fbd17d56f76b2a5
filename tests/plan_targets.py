"""Targets of surfaces for tests: a swept, tapered surface with an axis of its own, and loads in plan.

Import with ``from plan_targets import make_surface``.  Everything is unsymmetric by default.
"""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np
from factories import LEFT, RIGHT, array, make_brief, make_specimen
from numpy.typing import ArrayLike

from rigdesign.brief.model import (
    CoupleLoad,
    Floats,
    Line,
    Outline,
    PointLoads,
    PressureLoad,
    Specimen,
    TorqueLoad,
)
from rigdesign.target import Target, build_target
from rigdesign.target.plan_load import Direction


def line(*places: tuple[float, float]) -> Line:
    """A line through places."""
    x, y = zip(*places, strict=True)
    return Line(array(x), array(y))


def outline(*corners: tuple[float, float]) -> Outline:
    """An outline through corners, counter-clockwise."""
    x, y = zip(*corners, strict=True)
    return Outline(array(x), array(y), "planform.csv")


PLANFORM = outline((LEFT, -0.62), (RIGHT, -0.85), (RIGHT, -0.31), (LEFT, 0.40))
SWEPT = line((LEFT, 0.05), (RIGHT, -0.45))
KINKED = line((LEFT, 0.05), (1.6, -0.05), (RIGHT, -0.5))


def make_surface(**changes: Any) -> Specimen:
    """A cantilever over `PLANFORM` with the axis `SWEPT`, cut square to x."""
    fields: dict[str, Any] = {"outline": PLANFORM, "axis": SWEPT, **changes}
    if "supports" in fields:
        fields["support"] = "two supports"
    return replace(make_specimen(), **fields)


def surface_target(*loads: Any, **changes: Any) -> Target:
    """The target of loads on `make_surface` with the named fields of the specimen, or of the brief, changed."""
    brief = {key: changes.pop(key) for key in ("acceptance", "peak") if key in changes}
    return build_target(make_brief(specimen=make_surface(**changes), loads=loads, **brief))


def pressure_map(x: ArrayLike, y: ArrayLike, pressure: ArrayLike, times: float = 1.0) -> PressureLoad:
    """A pressure map [Pa]."""
    return PressureLoad(array(x), array(y), array(pressure), times, "piece.toml, [[load]] pressure")


def scattered_map(points: int, seed: int = 5) -> PressureLoad:
    """Random points over most of `PLANFORM`, with a pressure that is positive all over and not smooth."""
    rng = np.random.default_rng(seed)
    x, y = rng.uniform(LEFT, RIGHT, points), rng.uniform(-0.8, 0.35, points)
    return pressure_map(x, y, 900.0 + 400.0 * np.cos(1.3 * x) + 350.0 * y + 60.0 * rng.normal(size=points))


def plan_forces(x: ArrayLike, y: ArrayLike, force: ArrayLike, times: float = 1.0) -> PointLoads:
    """Forces [N] at places in plan."""
    return PointLoads(array(x), array(force), times, "piece.toml, [[load]] forces", array(y))


def torque_load(x: ArrayLike, torque: ArrayLike, times: float = 1.0) -> TorqueLoad:
    """A running torque [N·m/m]."""
    return TorqueLoad(array(x), array(torque), times, "piece.toml, [[load]] torque")


def couple_load(x: float, couple: float, times: float = 1.0) -> CoupleLoad:
    """A couple [N·m]."""
    return CoupleLoad(x, couple, times, "piece.toml, [[load]] couple")


def towards(degrees: float) -> Direction:
    """The unit vector at an angle from x, counter-clockwise."""
    return Direction(float(np.cos(np.radians(degrees))), float(np.sin(np.radians(degrees))))


def beyond(direction: Direction, s: float, size: float = 50.0) -> Floats:
    """The corners (4, 2) of a large rectangle with all that lies beyond s along a direction."""
    a = np.array(direction)
    left = np.array([-a[1], a[0]])
    return np.array(
        [s * a - size * left, (s + size) * a - size * left, (s + size) * a + size * left, s * a + size * left]
    )
