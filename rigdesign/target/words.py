"""The target in sentences, before anything is designed.

A slip of sign, side or unit is caught here or not at all, so every number comes with its direction, its place and what
it is of.
"""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import (
    InertiaLoad,
    InternalLoad,
    Load,
    PointLoads,
    PressureLoad,
    ShapeLoad,
    TableLoad,
    TorqueLoad,
)
from rigdesign.display import System, show
from rigdesign.target.curve import Curve
from rigdesign.target.internal import reactions
from rigdesign.target.loads import load_curve
from rigdesign.target.model import Target
from rigdesign.target.remarks import along
from rigdesign.words import STANDARD_GRAVITY


def echo(target: Target, system: System = "SI") -> list[str]:
    """Return the target in sentences, one a line.

    Parameters
    ----------
    target
        What the specimen must feel.
    system
        Units to show: "SI" or "us" (US customary).
    """
    if target.brief.specimen.is_surface:
        from rigdesign.target.plan_words import echo_in_plan

        return echo_in_plan(target, system)
    return [
        _resultant(target, system),
        _moment(target, system),
        *_supports(target, system),
        _peaks(target, system),
        *_weight(target, system),
        *peak_of_test(target, system),
        *(_load(number, load, target, system) for number, load in enumerate(target.brief.loads, 1)),
    ]


def direction(force: float) -> str:
    """Return which way a force acts, in plain words.

    Examples
    --------
    >>> direction(-350.0)
    'along −z, onto the loaded surface'
    """
    return f"{along(force)}, {'out of' if force > 0 else 'onto'} the loaded surface"


def _end(target: Target) -> str:
    return "the left end" if target.brief.specimen.supports else "the root"


def _resultant(target: Target, system: System) -> str:
    total, left = target.resultant, target.brief.specimen.left
    away = target.centroid - left
    place = "" if left == 0 else f"at {show(target.centroid, 'length', system)}, "
    side = "inboard of" if away < 0 else "from"
    where = f"{place}{show(abs(away), 'length', system)} {side} {_end(target)}"
    return f"The target is {show(abs(total), 'force', system)} {direction(total)}. It acts {where}."


def _moment(target: Target, system: System) -> str:
    about, moment = target.about, target.moment_about
    what = "the first support" if target.brief.specimen.supports else "the root"
    return f"Its moment about {what} at {show(about, 'length', system)} is {show(moment, 'moment', system)}."


def _supports(target: Target, system: System) -> list[str]:
    at, force = reactions(target.brief.specimen, target.total.total, target.total.first_moment)
    if not at.size:
        return []
    each = [
        f"{show(abs(float(f)), 'force', system)} {along(float(f))} at {show(float(x), 'length', system)}"
        for x, f in zip(at, force, strict=True)
    ]
    return [f"The supports answer with {each[0]} and {each[1]}."]


def _peaks(target: Target, system: System) -> str:
    at = target.moment_peak_x
    bending = float(target.moment(np.array([at]))[0])
    shear = f"{show(target.shear_peak, 'force', system)} at {show(target.shear_peak_x, 'length', system)}"
    moment = f"{show(bending, 'moment', system)} at {show(at, 'length', system)}"
    return f"The largest shear is {shear}, the largest bending moment {moment}."


def _weight(target: Target, system: System) -> list[str]:
    if target.brief.specimen.weight is None:
        return ["No weight is given: the pads bring the whole target, on top of whatever hangs there."]
    gravity, net = target.gravity, target.net
    mass = show(abs(gravity.total) / STANDARD_GRAVITY, "mass", system)
    weighs = f"The specimen weighs {mass}, which brings {_force_at(gravity, system)} by itself"
    return [f"{weighs}; the pads bring {_force_at(net, system)}."]


def _force_at(curve: Curve, system: System) -> str:
    """Size, direction and place of a curve's resultant."""
    total = curve.total
    if total == 0:
        return "no force in sum"
    force = f"{show(abs(total), 'force', system)} {along(total)}"
    return f"{force} at {show(curve.first_moment / total, 'length', system)}"


def peak_of_test(target: Target, system: System) -> list[str]:
    """How far the test goes beyond the brief's load."""
    peak = target.brief.peak
    highest = show(abs(target.resultant) * peak, "force", system)
    level = show(peak, "fraction", system)
    return [f"The test goes up to {level} of this load: {highest}."]


def _load(number: int, load: Load, target: Target, system: System) -> str:
    curve = load_curve(load, target.brief.specimen)
    times = "" if load.times == 1.0 else f" (times {load.times:g})"
    return f"Load {number}: {kind(load, target, system)}{times}: {_force_at(curve, system)}."


def kind(load: Load, target: Target, system: System) -> str:
    """What a load is and where it reaches, its size left out."""
    if isinstance(load, ShapeLoad):
        return f"{_shape(load)} {_stretch(load.start_x, load.end_x, system)}"
    if isinstance(load, TableLoad):
        return f"a table of running load, {load.x.size} rows {_stretch(float(load.x[0]), float(load.x[-1]), system)}"
    if isinstance(load, InternalLoad):
        rows = f"{load.x.size} rows {_stretch(float(load.x[0]), float(load.x[-1]), system)}"
        columns = "shear, moment and torsion" if load.torsion.size else "shear and moment"
        return f"a table of {columns}, {rows}"
    if isinstance(load, PointLoads):
        if load.x.size == 1:
            return "a point load"
        return f"{load.x.size} point loads {_stretch(float(load.x.min()), float(load.x.max()), system)}"
    if isinstance(load, InertiaLoad):
        return _inertia(load, target, system)
    if isinstance(load, PressureLoad):
        least, most = (show(float(p), "pressure", system) for p in (load.pressure.min(), load.pressure.max()))
        values = least if least == most else f"{least} to {most}"
        return f"a pressure map of {load.x.size} points, {values}"
    if isinstance(load, TorqueLoad):
        stretch = _stretch(float(load.x[0]), float(load.x[-1]), system)
        return f"a table of running torque, {load.x.size} rows {stretch}"
    return f"a couple at {show(load.x, 'length', system)}"


def _shape(load: ShapeLoad) -> str:
    if load.shape == "power":
        return f"power shape with exponent {load.exponent:g}"
    if load.shape == "triangular":
        return f"triangular, greatest at the {'tip' if load.greatest == 'tip' else 'root'},"
    return f"{load.shape} shape"


def _inertia(load: InertiaLoad, target: Target, system: System) -> str:
    mass = show(abs(target.gravity.total) / STANDARD_GRAVITY, "mass", system)
    return f"inertia at {load.factor:g} g of {mass}".replace("-", "−")


def _stretch(start: float, end: float, system: System) -> str:
    return f"from {show(start, 'length', system)} to {show(end, 'length', system)}"
