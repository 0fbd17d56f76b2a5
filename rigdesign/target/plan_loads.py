"""One [[load]] of the brief, or what gravity brings, as a load in plan."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.brief.model import (
    Brief,
    CoupleLoad,
    InertiaLoad,
    InternalLoad,
    Line,
    Load,
    PointLoads,
    PressureLoad,
    Specimen,
    TorqueLoad,
)
from rigdesign.errors import BriefError
from rigdesign.target.curve import Distribution
from rigdesign.target.internal_table import torque_curve
from rigdesign.target.line_load import LineLoad
from rigdesign.target.loads import gravity_curve, load_curve, table_curve
from rigdesign.target.plan_load import ALONG_X, PlanLoad
from rigdesign.target.plan_points import PlanPoints
from rigdesign.target.plan_sum import PlanSum
from rigdesign.target.sums import Combined, Points, Summed
from rigdesign.target.torque import SweepTorque, Torque

# A kink of the axis below this slope is rounding.
_STRAIGHT = 1e-9


def plan_load(load: Load, specimen: Specimen) -> PlanLoad:
    """Return one load of the brief in plan, its `times` included.

    Raises
    ------
    BriefError
        As `load_curve` and `pressure_over` do; where a pressure map comes without an outline; where a table of shear
        and moment comes with cuts square to an axis that is not straight.
    """
    axis = specimen.reference_axis
    if isinstance(load, PressureLoad):
        return _pressure(load, specimen)
    if isinstance(load, TorqueLoad):
        return Torque(Combined((table_curve(load.x, load.torque, load.where),), (load.times,)), axis, _about(specimen))
    if isinstance(load, CoupleLoad):
        couple = Points(np.array([load.x]), np.array([load.times * load.couple]))
        return Torque(couple, axis, _about(specimen))
    if isinstance(load, InternalLoad):
        return _internal(load, specimen)
    if isinstance(load, PointLoads):
        if load.y.size:
            return PlanPoints(load.x, load.y, load.times * load.force)
        return LineLoad(load_curve(load, specimen), axis)
    if isinstance(load, InertiaLoad):
        return LineLoad(load_curve(load, specimen), weight_line(specimen))
    return LineLoad(load_curve(load, specimen), load.line or axis)


def weight_line(specimen: Specimen) -> Line:
    """Return the line along which the specimen's weight acts."""
    return specimen.weight_line or specimen.reference_axis


def gravity_load(brief: Brief) -> LineLoad:
    """Return what gravity already brings: no load where the brief gives no weight."""
    return LineLoad(gravity_curve(brief), weight_line(brief.specimen))


def _about(specimen: Specimen) -> bool:
    """Whether torques turn about the axis' own direction."""
    return specimen.cut == "square to axis"


def _pressure(load: PressureLoad, specimen: Specimen) -> PlanLoad:
    if specimen.outline is None:
        raise BriefError("a pressure map needs the specimen's outline, and none is given", where=load.where,
                         remedy="name the outline's table in [specimen] outline")  # fmt: skip
    from rigdesign.target.surface.pressure import pressure_over

    return pressure_over(load, specimen.outline)


def table_along_x(load: InternalLoad, specimen: Specimen) -> InternalLoad:
    """Return a table of shear and moment as it stands for cuts square to x.

    Cut square to a straight axis the moment counts distances along the axis: times the cosine of the sweep it is that
    of the same load cut square to x.

    Raises
    ------
    BriefError
        If the cuts are square to an axis that is not straight: some load then lies outboard of no cut, or of two.
    """
    if specimen.cut == "square to x":
        return load
    axis = specimen.reference_axis
    slope = np.diff(axis.y) / np.diff(axis.x)
    if np.ptp(slope) > _STRAIGHT:
        raise BriefError("a table of shear and moment cut square to an axis with kinks does not say where its load is",
                         where=load.where, value=f"an axis of {slope.size} stretches", limit="a straight axis",
                         remedy='give the table for cut = "square to x", or the running load itself')  # fmt: skip
    cosine = float(1.0 / np.hypot(1.0, slope[0]))
    return replace(load, moment=load.moment * cosine, moment_digit=load.moment_digit * cosine)


def _internal(load: InternalLoad, specimen: Specimen) -> PlanLoad:
    """The table's load on the axis, and the torque that its torsion asks for besides."""
    axis = specimen.reference_axis
    curve = load_curve(table_along_x(load, specimen), specimen)
    on_axis = LineLoad(curve, axis)
    if not load.torsion.size:
        return on_axis
    torque: Distribution = Combined((torque_curve(load),), (load.times,))
    if specimen.cut == "square to x" and np.ptp(axis.y) > 0:
        turning = on_axis.along(ALONG_X).turning
        by_sweep = SweepTorque(curve, turning, axis, float(load.x[0]), float(load.x[-1]))
        torque = Summed((torque, by_sweep), (1.0, -1.0))
    return PlanSum((on_axis, Torque(torque, axis, _about(specimen))), (1.0, 1.0))
