"""Remarks on places in plan that leave a design, but not the one that the bands ask for."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Quantity
from rigdesign.display import show
from rigdesign.findings import Finding
from rigdesign.pads.surface.spread import OneLine, one_line
from rigdesign.target.curve import Floats, Side
from rigdesign.target.model import Target
from rigdesign.target.plan_load import ALONG_X

# Stations at which the torsion about the pads' line is looked at, besides those where the load breaks.
STATIONS = 401
# Torsion below this part of load times span is rounding.
NO_TORSION = 1e-9


def torsion_on_one_line(target: Target, x: Floats, y: Floats) -> Finding | None:
    """Remark on pads at x, y (n,) [m] in one line where torsion has a band; None if they are not, or bring it anyway.

    Pads in line bring the torsion that their shear and moment dictate.  If both follow the target's, the torsion is
    off by the moment of the target about the pads' line, which is the number that is given.
    """
    specimen = target.brief.specimen
    line = one_line(x, y, specimen.right - specimen.left)
    if line is None or abs(line.a_x) < abs(line.a_y) or not _is_judged(target, "torsion"):
        return None
    left_over, at = _largest_about(target, line)
    if left_over <= NO_TORSION * abs(target.resultant) * (specimen.right - specimen.left):
        return None
    of = f" ({show(left_over / target.torsion_peak, 'fraction')} of the peak torsion)" if target.torsion_peak else ""
    return Finding(
        "pads",
        "warning",
        "pads",
        "the pads stand in one line, so their torsion follows from their shear and moment and cannot be set apart",
        value=f"with shear and moment met, torsion off by {show(left_over, 'moment')}{of} at {show(at, 'length')}",
        limit="the band on torsion",
        remedy="let pads stand on both sides of the line",
    )


def _is_judged(target: Target, quantity: Quantity) -> bool:
    asked = target.brief.acceptance
    rules = [*asked.rules, *(rule for region in asked.regions for rule in region.rules)]
    return any(rule.quantity == quantity for rule in rules)


def _largest_about(target: Target, line: OneLine) -> tuple[float, float]:
    """Largest moment of the net target's load beyond a station about the line, cut square to x [N·m], and where [m]."""
    specimen, seen = target.brief.specimen, target.net_plan.along(ALONG_X)
    slope = line.a_y / line.a_x
    at = np.union1d(np.linspace(specimen.left, specimen.right, STATIONS), seen.force.breaks)
    # ∫ (y − y_line(s)) dF(s) with y_line(s) = y_line(x) + slope (s − x); the same at neighbours but for rounding
    sides: tuple[Side, ...] = ("inboard", "outboard")
    off = np.zeros(at.shape)
    for side in sides:
        on_line = (line.y + slope * (at - line.x)) * seen.force.force_beyond(at, side)
        on_line = on_line + slope * seen.force.moment_beyond(at)
        off = np.maximum(off, np.abs(seen.turning.force_beyond(at, side) - on_line))
    largest = float(off.max())
    return largest, float(at[np.argmax(off >= largest * (1 - NO_TORSION))])
