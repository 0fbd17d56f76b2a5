"""From the brief to its target: curves, peaks, and what is worth a remark."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.display import show
from rigdesign.errors import BriefError
from rigdesign.findings import numbered
from rigdesign.target import internal
from rigdesign.target.curve import Curve
from rigdesign.target.line_load import LineLoad
from rigdesign.target.loads import gravity_curve, load_curve
from rigdesign.target.model import Peak, Target
from rigdesign.target.peaks import peak, stretches
from rigdesign.target.plan_load import ALONG_X
from rigdesign.target.plan_sum import PlanSum
from rigdesign.target.remarks import remarks
from rigdesign.target.sums import NO_CURVE
from rigdesign.words import LARGEST_NUMBER, SMALLEST_TOTAL

# A sum below this part of the largest force beyond any station is the rounding of loads that cancel.
_CANCELLED = 1e-9
# Stations over the loaded span at which that largest force is looked for, besides the breaks.
_LOOKED_AT = 65


def build_target(brief: Brief) -> Target:
    """Return what the specimen must feel, what gravity brings of it and what the pads bring, with remarks.

    Raises
    ------
    BriefError
        If the loads add up to nothing or bend nothing, or one of them cannot be made into a curve (see `load_curve`).

    Notes
    -----
    The curves are exact: closed forms for the shapes, piecewise polynomials for tables.  The peaks are found to
    rounding, about 1e-12 of their value.
    """
    axis = brief.specimen.reference_axis
    total_plan = PlanSum(
        tuple(LineLoad(load_curve(load, brief.specimen), axis) for load in brief.loads), (1.0,) * len(brief.loads)
    )
    total = total_plan.along(ALONG_X).force
    _refuse_nothing(total)
    gravity = gravity_curve(brief)
    gravity_plan = LineLoad(gravity, axis)
    net_plan = total_plan if gravity is NO_CURVE else PlanSum((total_plan, gravity_plan), (1.0, -1.0))
    net = net_plan.along(ALONG_X).force
    shear, moment = (Peak(*found) for found in _peaks(brief, total))
    _refuse_unbent(brief, total, moment.value)
    return Target(
        brief=brief,
        total_plan=total_plan,
        gravity_plan=gravity_plan,
        net_plan=net_plan,
        peaks={"shear": shear, "moment": moment, "torsion": Peak(0.0, brief.specimen.left)},
        findings=numbered(remarks(brief, total, gravity, net)),
    )


def _refuse_nothing(total: Curve) -> None:
    """Raise BriefError where the loads cancel, or come to a size beyond all reason: there is no place for a jack."""
    # between the breaks as well: a load that changes sign in a stretch may cancel itself there
    x = np.union1d(total.breaks, np.linspace(total.breaks[0], total.breaks[-1], _LOOKED_AT))
    largest = float(np.abs(total.force_beyond(x, "inboard")).max(initial=0.0))
    if abs(total.total) <= _CANCELLED * largest:
        raise BriefError(
            "the loads add up to nothing, so that no jack can bring them",
            where="[[load]]",
            value=show(0.0, "force"),
            limit="a total other than zero",
            remedy="check their totals and signs; loads of both signs need a rig for each sign",
        )
    if not SMALLEST_TOTAL <= largest <= LARGEST_NUMBER:
        raise BriefError(
            "the loads are of a size that no rig can bring",
            where="[[load]]",
            value=f"{largest:.3g} N",
            limit=f"{SMALLEST_TOTAL:g} N to {LARGEST_NUMBER:g} N",
            remedy="check their units and times",
        )


def _refuse_unbent(brief: Brief, total: Curve, moment_peak: float) -> None:
    """Raise BriefError where the loads go straight into the supports: no error of the moment could be judged."""
    if moment_peak > _CANCELLED * abs(total.total) * (brief.specimen.right - brief.specimen.left):
        return
    held = "root" if brief.specimen.support == "cantilever" else "supports"
    raise BriefError(
        f"the loads act at the {held} alone, so that they bend the specimen nowhere",
        where="[[load]]",
        value=f"largest moment {show(0.0, 'moment')}",
        limit="a moment other than zero",
        remedy="check their stations",
    )


def _peaks(brief: Brief, total: Curve) -> tuple[tuple[float, float], tuple[float, float]]:
    """Largest |V| and |M| of the whole target with their stations."""
    specimen = brief.specimen
    edges = stretches(total.breaks, specimen.left, specimen.right, np.array(specimen.supports))
    return (
        peak(lambda x, side: internal.shear(total, specimen, x, side), total.running, edges),
        peak(lambda x, side: internal.moment(total, specimen, x),
             lambda x, side: internal.shear(total, specimen, x, side), edges),
    )  # fmt: skip
