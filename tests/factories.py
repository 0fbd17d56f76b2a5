"""Small briefs for tests: everything has a sensible, unsymmetric default, and any field can be changed by name.

Import with ``from factories import make_brief`` (the tests folder is on pytest's path).  The default is a cantilever
from 0.2 m to 3.4 m under an elliptical load of 5.4 kN, six free pads, bands of 2 % on the moment and 12 % on the shear.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from rigdesign.brief.model import (
    Acceptance,
    BandRule,
    Brief,
    Floats,
    InertiaLoad,
    InternalLoad,
    JackRules,
    LeverRules,
    PadRules,
    PointLoads,
    Region,
    ShapeLoad,
    Source,
    Specimen,
    TableLoad,
    Weight,
)
from rigdesign.brief.model_hardware import HardwareRules

LEFT, RIGHT = 0.2, 3.4
CLEVIS_PINS = (8, 10, 12, 14, 16, 18, 20, 22, 24, 27, 30, 33, 36, 40, 45, 50, 55, 60, 70, 80, 90, 100)
"""Diameters of ISO 2341 [mm]."""


def array(values: ArrayLike) -> Floats:
    """A read-only float array, as the brief stage hands on."""
    result = np.array(values, dtype=float)
    result.setflags(write=False)
    return result


def make_brief(**changes: Any) -> Brief:
    """The default brief with the named fields of `Brief` changed."""
    fields: dict[str, Any] = {
        "title": "Test piece",
        "specimen": make_specimen(),
        "loads": (shape_load(),),
        "peak": 1.0,
        "pads": make_pads(),
        "levers": make_levers(),
        "jack": JackRules(at=None, step=None),
        "acceptance": make_acceptance(),
        "source": Source(brief_name="piece.toml", texts={"piece.toml": "title = 'Test piece'\n"}),
        "hardware": make_hardware(),
        "keep": None,
    }
    return Brief(**_changed(fields, changes))


def make_specimen(**changes: Any) -> Specimen:
    """A cantilever from 0.2 m to 3.4 m without weight; gravity against z."""
    fields: dict[str, Any] = {
        "support": "cantilever",
        "left": LEFT,
        "right": RIGHT,
        "supports": (),
        "weight": None,
        "gravity": -1,
    }
    return Specimen(**_changed(fields, changes))


def two_supports(left: float, first: float, second: float, right: float, **changes: Any) -> Specimen:
    """A specimen from `left` to `right` [m] on supports at `first` and `second` [m]."""
    fields: dict[str, Any] = {"support": "two supports", "left": left, "right": right, "supports": (first, second)}
    return make_specimen(**_changed(fields, changes, known=False))


def make_weight(x: ArrayLike = (), mass: ArrayLike = (), point_x: ArrayLike = (), point_mass: ArrayLike = ()) -> Weight:
    """A weight table [kg/m] and point masses [kg] from plain lists."""
    return Weight(x=array(x), mass=array(mass), point_x=array(point_x), point_mass=array(point_mass))


def shape_load(shape: str = "elliptical", total: float | None = 5400.0, **changes: Any) -> ShapeLoad:
    """A running load of a shape over the default span: ``shape_load("power", -300.0, exponent=0.5)``."""
    fields: dict[str, Any] = {
        "shape": shape,
        "start_x": LEFT,
        "end_x": RIGHT,
        "total": total,
        "start": None,
        "end": None,
        "exponent": 1.0,
        "greatest": "root",
        "chord_x": array([]),
        "chord": array([]),
        "times": 1.0,
        "where": f"piece.toml, [[load]] shape {shape}",
    }
    return ShapeLoad(**_changed(fields, changes))


def table_load(x: ArrayLike, load: ArrayLike, times: float = 1.0) -> TableLoad:
    """A running load [N/m] as a table."""
    return TableLoad(x=array(x), load=array(load), times=times, where="piece.toml, [[load]] table")


def internal_load(
    x: ArrayLike,
    shear: ArrayLike,
    moment: ArrayLike,
    *,
    shear_digit: float = 0.0,
    moment_digit: float = 0.0,
    times: float = 1.0,
) -> InternalLoad:
    """A table of shear [N] and moment [N·m]; the digits are the steps to which its columns are rounded."""
    return InternalLoad(
        x=array(x),
        shear=array(shear),
        moment=array(moment),
        shear_digit=shear_digit,
        moment_digit=moment_digit,
        times=times,
        where="piece.toml, [[load]] internal",
    )


def point_loads(x: ArrayLike, force: ArrayLike, times: float = 1.0) -> PointLoads:
    """Point loads [N]; x and force may be single numbers."""
    return PointLoads(
        x=array(np.atleast_1d(x)), force=array(np.atleast_1d(force)), times=times, where="piece.toml, [[load]] point"
    )


def inertia_load(factor: float, times: float = 1.0) -> InertiaLoad:
    """`factor` times g times the weight table."""
    return InertiaLoad(factor=factor, times=times, where="piece.toml, [[load]] inertia")


def make_pads(**changes: Any) -> PadRules:
    """Six free pads, 120 mm long, 40 mm apart, pulling, no limits on force or pressure."""
    fields: dict[str, Any] = {
        "count": 6,
        "places": "free",
        "stations": array([]),
        "length": 0.12,
        "width": None,
        "gap": 0.04,
        "largest_force": float("inf"),
        "least_force": 0.0,
        "largest_pressure": float("inf"),
        "keep_out": (),
        "action": "pull",
        "aim": "closest",
        "ease": 0.02,
    }
    return PadRules(**_changed(fields, changes))


def make_levers(**changes: Any) -> LeverRules:
    """Drill step 1 mm, ratio limit 5, nothing else asked."""
    fields: dict[str, Any] = {
        "drill_step": 0.001,
        "ratio_limit": 5.0,
        "shortest_arm": 0.0,
        "longest": float("inf"),
        "tiers": None,
        "grouping": None,
    }
    return LeverRules(**_changed(fields, changes))


def make_hardware(**changes: Any) -> HardwareRules:
    """What a brief without [hardware] asks for: the documented defaults."""
    fields: dict[str, Any] = {
        "headroom": float("inf"),
        "clearance": 0.025,
        "builds": ("twin flats",),
        "grade": "S355",
        "pin_grade": "42CrMo4",
        "rules": "BTH-1",
        "design_factor": 2.0,
        "load_factor": 1.5,
        "overshoot": 1.05,
        "pins": tuple(diameter / 1000 for diameter in CLEVIS_PINS),
        "play": 0.0005,
        "links": "rod",
        "link_length": 0.0,
        "turn": float(np.deg2rad(5)),
        "swing": float(np.deg2rad(10)),
        "deflection": 0.005,
        "density": None,
        "pad_mass": 1.0,
        "pad_height": 0.06,
        "stock": (),
        "jacks": (),
        "cells": (),
        "surface": None,
        "marks": "as drilled",
        "mark_tolerance": 0.01,
        "balance": "as needed",
        "bar": 6.0,
        "kerf": 0.003,
        "revision": "A",
    }
    return HardwareRules(**_changed(fields, changes))


def band_rules(quantity: str, under: float, over: float, **changes: Any) -> tuple[BandRule, BandRule]:
    """Both sides of one band, a fraction of the peak unless changed (``absolute=True``, ``of="local"``)."""
    fields: dict[str, Any] = {"absolute": False, "of": "peak"}
    fields = _changed(fields, changes)
    return (
        BandRule(quantity=quantity, side="under", amount=under, **fields),  # type: ignore[arg-type]
        BandRule(quantity=quantity, side="over", amount=over, **fields),  # type: ignore[arg-type]
    )


def make_acceptance(
    moment: float | None = 0.02, shear: float | None = 0.12, regions: tuple[Region, ...] = ()
) -> Acceptance:
    """Bands of the peak, the same under and over; None: no band on that quantity."""
    rules: tuple[BandRule, ...] = ()
    for quantity, amount in (("moment", moment), ("shear", shear)):
        if amount is not None:
            rules += band_rules(quantity, amount, amount)
    return Acceptance(rules=rules, regions=regions, defaulted=False)


def _changed(fields: dict[str, Any], changes: dict[str, Any], known: bool = True) -> dict[str, Any]:
    unknown = set(changes) - set(fields)
    if known and unknown:
        raise TypeError(f"no such field: {', '.join(sorted(unknown))}")
    return {**fields, **changes}
