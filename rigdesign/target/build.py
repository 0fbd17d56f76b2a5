"""From the brief to its target: curves, peaks, and what is worth a remark."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.brief.model import Brief, Quantity
from rigdesign.display import show
from rigdesign.errors import BriefError
from rigdesign.findings import numbered
from rigdesign.target import internal
from rigdesign.target.curve import Curve
from rigdesign.target.cuts import ACROSS, ALONG
from rigdesign.target.model import Peak, Target
from rigdesign.target.peaks import peak, stretches
from rigdesign.target.plan_load import ALONG_X, PlanLoad
from rigdesign.target.plan_loads import gravity_load, plan_load
from rigdesign.target.plan_stations import largest
from rigdesign.target.plan_sum import PlanSum
from rigdesign.target.remarks import remarks
from rigdesign.target.sums import NO_CURVE
from rigdesign.words import LARGEST_NUMBER, SMALLEST_TOTAL

# A sum below this part of the largest force beyond any station, or of the loads one by one, is the rounding of loads
# that cancel.
_CANCELLED = 1e-9
# Stations over the loaded span at which that largest force is looked for, besides the breaks.
_LOOKED_AT = 65


def build_target(brief: Brief) -> Target:
    """Return what the specimen must feel, what gravity brings of it and what the pads bring, with remarks.

    Raises
    ------
    BriefError
        If the loads add up to nothing or bend nothing, or one of them cannot be made into a load (see `plan_load`).

    Notes
    -----
    The curves are exact: closed forms for the shapes, piecewise polynomials for tables and, to 1e-9 of what a map's
    pressures add up to, for pressures.  The peaks are found to rounding, about 1e-12 of their value.
    """
    specimen = brief.specimen
    plans = tuple(plan_load(load, specimen) for load in brief.loads)
    total_plan = PlanSum(plans, (1.0,) * len(plans))
    total = total_plan.along(ALONG_X).force
    _refuse_nothing(total, sum(abs(plan.along(ALONG_X).force.total) for plan in plans))
    gravity_plan = gravity_load(brief)
    gravity = gravity_plan.curve
    net_plan: PlanLoad = total_plan if gravity is NO_CURVE else PlanSum((total_plan, gravity_plan), (1.0, -1.0))
    peaks = _peaks(brief, total_plan)
    _refuse_unbent(brief, total, peaks["moment"].value)
    target = Target(
        brief=brief,
        total_plan=total_plan,
        gravity_plan=gravity_plan,
        net_plan=net_plan,
        peaks=peaks,
        findings=(),
    )
    return replace(target, findings=numbered(remarks(target)))


def _refuse_nothing(total: Curve, apart: float) -> None:
    """Raise BriefError where the loads cancel, or come to a size beyond all reason: there is no place for a jack.

    `apart` is what the loads come to one by one, signs left aside [N].
    """
    # between the breaks as well: a load that changes sign in a stretch may cancel itself there
    breaks = total.breaks
    x = np.union1d(breaks, np.linspace(breaks[0], breaks[-1], _LOOKED_AT)) if breaks.size else breaks
    most = float(np.abs(total.force_beyond(x, "inboard")).max(initial=0.0))
    if abs(total.total) <= _CANCELLED * max(most, apart):
        raise BriefError(
            "the loads add up to nothing, so that no jack can bring them",
            where="[[load]]",
            value=show(0.0, "force"),
            limit="a total other than zero",
            remedy="check their totals and signs; loads of both signs need a rig for each sign",
        )
    if not SMALLEST_TOTAL <= most <= LARGEST_NUMBER:
        raise BriefError(
            "the loads are of a size that no rig can bring",
            where="[[load]]",
            value=f"{most:.3g} N",
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


def _peaks(brief: Brief, load: PlanLoad) -> dict[Quantity, Peak]:
    """The largest magnitude of each internal load of the whole target, with its station."""
    specimen = brief.specimen
    if not specimen.is_surface:
        return {**_line_peaks(brief, load.along(ALONG_X).force), "torsion": Peak(0.0, specimen.left)}
    return {quantity: Peak(*largest(load, specimen, quantity)) for quantity in (*ALONG, *ACROSS)}


def _line_peaks(brief: Brief, total: Curve) -> dict[Quantity, Peak]:
    """Largest |V| and |M| of a line rig's target, by the shortest road."""
    specimen = brief.specimen
    edges = stretches(total.breaks, specimen.left, specimen.right, np.array(specimen.supports))
    shear = peak(lambda x, side: internal.shear(total, specimen, x, side), total.running, edges)
    moment = peak(
        lambda x, side: internal.moment(total, specimen, x),
        lambda x, side: internal.shear(total, specimen, x, side),
        edges,
    )
    return {"shear": Peak(*shear), "moment": Peak(*moment)}
