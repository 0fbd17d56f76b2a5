"""Shear V and bending moment M from loads, reactions of two supports included (conventions: cut square to x).

Everything with x_i > x counts: V = Σ F_i, M = Σ F_i (x_i − x).  A cantilever is held at its inboard end, so nothing
but the load lies outboard of a cut.  On two supports the reactions follow from the load's sum and first moment.
"""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Specimen
from rigdesign.target.curve import Curve, Floats, Side


def reactions(specimen: Specimen, total: float, first_moment: float) -> tuple[Floats, Floats]:
    """Return stations (k,) [m] and forces (k,) [N] on the specimen of its simple supports; k = 0 for a cantilever."""
    if not specimen.supports:
        return np.empty(0), np.empty(0)
    a, b = specimen.supports
    right = -(first_moment - total * a) / (b - a)
    return np.array([a, b]), np.array([-total - right, right])


def points_beyond(x: Floats, at: Floats, force: Floats, side: Side) -> tuple[Floats, Floats]:
    """Shear (n,) [N] and moment (n,) [N·m] at stations x (n,) of point loads `force` (k,) at `at` (k,).

    The moment is summed from the outermost load inward, so that near it nothing large cancels.
    """
    if not at.size:
        return np.zeros(x.shape), np.zeros(x.shape)
    order = np.argsort(at, kind="stable")
    return sums_beyond(x, at[order], sums_at(at[order], force[order]), side)


def sums_at(at: Floats, force: Floats) -> tuple[Floats, Floats]:
    """Shear and moment just inboard of each of the point loads `force` (k,) at `at` (k,), in order; (k + 1,) each.

    The last is zero, for "none left".  There must be a load.
    """
    shear = np.append(np.cumsum(force[::-1])[::-1], 0.0)
    step = np.diff(at) * shear[1:-1]
    return shear, np.append(np.cumsum(np.append(step, 0.0)[::-1])[::-1], 0.0)


def sums_beyond(x: Floats, at: Floats, sums: tuple[Floats, Floats], side: Side) -> tuple[Floats, Floats]:
    """`points_beyond` of loads at `at` (k,), in order, whose `sums_at` are known."""
    first = np.searchsorted(at, x, side="left" if side == "inboard" else "right")
    distance = at[np.minimum(first, at.size - 1)] - x
    shear = sums[0][first]
    return shear, sums[1][first] + shear * distance


def shear(curve: Curve, specimen: Specimen, x: Floats, side: Side) -> Floats:
    """Shear V [N] at stations x (n,) on one side."""
    at, force = reactions(specimen, curve.total, curve.first_moment)
    return curve.force_beyond(x, side) + points_beyond(x, at, force, side)[0]


def moment(curve: Curve, specimen: Specimen, x: Floats) -> Floats:
    """Bending moment M [N·m] at stations x (n,)."""
    at, force = reactions(specimen, curve.total, curve.first_moment)
    return curve.moment_beyond(x) + points_beyond(x, at, force, "inboard")[1]
