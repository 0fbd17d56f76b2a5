"""One [[load]] of the brief, or the specimen's weight, as a curve."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import (
    Brief,
    InertiaLoad,
    InternalLoad,
    Load,
    PointLoads,
    ShapeLoad,
    Specimen,
    TableLoad,
    Weight,
)
from rigdesign.errors import BriefError
from rigdesign.target.closed import ClosedForm, Elliptical, Power, Sine
from rigdesign.target.curve import Curve, Floats
from rigdesign.target.internal_table import internal_curve
from rigdesign.target.polynomial import Polynomials
from rigdesign.target.sums import NO_CURVE, Combined, Points
from rigdesign.words import STANDARD_GRAVITY

# Ends of a chord table and of the load that agree to this part of the load's length count as the same station.
_SAME_STATION = 1e-9


def load_curve(load: Load, specimen: Specimen) -> Curve:
    """Return the curve over x of one load that acts along a line, its `times` included.

    Torques and couples bring no force; a pressure map is no such load (`plan_loads`).

    Raises
    ------
    BriefError
        If a table has fewer than two stations, a chord table does not cover its load or has no area, or an inertia
        load has no weight table to act on.
    """
    return Combined((_unscaled(load, specimen),), (load.times,))


def _unscaled(load: Load, specimen: Specimen) -> Curve:
    if isinstance(load, ShapeLoad):
        return shape_curve(load)
    if isinstance(load, TableLoad):
        return table_curve(load.x, load.load, load.where)
    if isinstance(load, InternalLoad):
        return internal_curve(load)
    if isinstance(load, PointLoads):
        return Points.gathered(load.x, load.force)
    if not isinstance(load, InertiaLoad):
        return NO_CURVE
    if specimen.weight is None:
        raise BriefError("an inertia load needs the specimen's weight, and none is given", where=load.where,
                         remedy="name the weight table in [specimen] weight")  # fmt: skip
    return Combined((mass_curve(specimen.weight),), (load.factor * STANDARD_GRAVITY,))


def mass_curve(weight: Weight) -> Curve:
    """Return the specimen's mass as a curve: kg/m for N/m, kg for N; its total is the mass [kg]."""
    parts: list[Curve] = []
    if weight.x.size:
        parts.append(table_curve(weight.x, weight.mass, "[specimen] weight"))
    if weight.point_x.size:
        parts.append(Points.gathered(weight.point_x, weight.point_mass))
    return Combined(tuple(parts), (1.0,) * len(parts))


def gravity_curve(brief: Brief) -> Curve:
    """Return what gravity already brings [N/m, N]: no load where the brief gives no weight."""
    specimen = brief.specimen
    if specimen.weight is None:
        return NO_CURVE
    return Combined((mass_curve(specimen.weight),), (specimen.gravity * STANDARD_GRAVITY,))


def table_curve(x: Floats, load: Floats, where: str) -> Curve:
    """Return the curve straight between rows; raise BriefError where there are no two stations."""
    if np.unique(x).size < 2:
        raise BriefError("a table along the span needs two stations at least", where=where,
                         value=f"{np.unique(x).size} station", remedy="add its other rows")  # fmt: skip
    return Polynomials.from_table(x, load)


def shape_curve(load: ShapeLoad) -> Curve:
    """Return the running load of a named shape, without `times`: the formulas in ξ of the brief's manual.

    Raises
    ------
    BriefError
        If the chord table of a schrenk load does not cover it, or has no area.
    """
    a, b = load.start_x, load.end_x
    if load.shape == "linear" and load.start is not None and load.end is not None:
        return Polynomials.from_table(np.array([a, b]), np.array([load.start, load.end]))
    if load.total is None:
        raise BriefError(f"a {load.shape} load needs its total", where=load.where, remedy='give total = "… N"')
    total, length = load.total, b - a
    if load.shape == "uniform":
        return ClosedForm(Power(0.0), a, b, total)
    if load.shape == "power":
        return ClosedForm(Power(load.exponent), a, b, total)
    if load.shape == "elliptical":
        return ClosedForm(Elliptical(), a, b, total)
    if load.shape == "sine":
        return ClosedForm(Sine(), a, b, total)
    if load.shape == "parabolic":
        greatest = 1.5 * total / length
        # 1 − ξ² = 2 s − s² with s = t/L
        return _quadratic(a, b, 0.0, 2.0 * greatest / length, -greatest / length**2)
    if load.shape == "schrenk":
        return Combined((_chord(load, total), ClosedForm(Elliptical(), a, b, total)), (0.5, 0.5))
    slope = 2.0 * total / length**2
    if load.shape == "triangular" and load.greatest == "tip":
        return _quadratic(a, b, 2.0 * total / length, -slope, 0.0)
    if load.shape == "triangular":
        return _quadratic(a, b, 0.0, slope, 0.0)
    raise BriefError("a linear load needs its running load at both ends", where=load.where,
                     remedy='give start = "… N/m" and end = "… N/m"')  # fmt: skip


def _quadratic(a: float, b: float, a0: float, a1: float, a2: float) -> Curve:
    return Polynomials(np.array([a, b]), np.array([a0]), np.array([a1]), np.array([a2]))


def _chord(load: ShapeLoad, total: float) -> Curve:
    """The chord between the load's ends as a running load that carries the total."""
    a, b = load.start_x, load.end_x
    slack = _SAME_STATION * (b - a)
    whole = table_curve(load.chord_x, load.chord, load.where)
    first, last = load.chord_x[0], load.chord_x[-1]
    if first > a + slack or last < b - slack:
        raise BriefError("the chord table does not cover its load", where=load.where,
                         value=f"{first:g} m to {last:g} m", limit=f"{a:g} m to {b:g} m",
                         remedy="add rows to the table, or shorten the load with from and to")  # fmt: skip
    if np.any(load.chord < 0):
        raise BriefError("a chord is negative", where=load.where, value=f"{load.chord.min():g} m",
                         limit="0 m or more", remedy="correct the chord table")  # fmt: skip
    inside = (load.chord_x > a + slack) & (load.chord_x < b - slack)
    ends = [float(whole.running(np.array([max(a, first)]), "outboard")[0]),
            float(whole.running(np.array([min(b, last)]), "inboard")[0])]  # fmt: skip
    x = np.concatenate([[a], load.chord_x[inside], [b]])
    chord = Polynomials.from_table(x, np.concatenate([ends[:1], load.chord[inside], ends[1:]]))
    if chord.total <= 0:
        raise BriefError(
            "the chord table has no area under its load", where=load.where, remedy="correct the chord table"
        )
    return Combined((chord,), (total / chord.total,))
