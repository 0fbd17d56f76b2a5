"""Where the V, M and T of a load in plan are smooth, and where they are largest."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Quantity, Specimen
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import ACROSS, stretch_at, stretch_directions
from rigdesign.target.peaks import peak, stretches
from rigdesign.target.plan_load import ALONG_X, ALONG_Y, Direction, PlanLoad, Projection, directions, loads_at


def ends_of(specimen: Specimen, quantity: Quantity) -> tuple[float, float]:
    """Return the first and the last station of a quantity [m]: the span; across it the lowest and highest y.

    A line rig has no breadth: across, both are 0.
    """
    if quantity not in ACROSS:
        return specimen.left, specimen.right
    if specimen.outline is None:
        return 0.0, 0.0
    return float(specimen.outline.y.min()), float(specimen.outline.y.max())


def smooth_stretches(load: PlanLoad, specimen: Specimen, quantity: Quantity) -> Floats:
    """Return the ends (k,) [m] of the stretches within which a quantity of a load is smooth, first to last station."""
    left, right = ends_of(specimen, quantity)
    if quantity in ACROSS:
        return stretches(_breaks(load.along(ALONG_Y)), left, right, np.empty(0))
    supports = np.array(specimen.supports)
    kinks = specimen.reference_axis.x[1:-1]
    if specimen.cut == "square to x":
        return stretches(np.concatenate([_breaks(load.along(ALONG_X)), kinks]), left, right, supports)
    found = [kinks, supports]
    for row, direction in enumerate(directions(specimen)):
        found.append(_stations(specimen, row, direction, _breaks(load.along(direction))))
    return stretches(np.concatenate(found), left, right, np.empty(0))


def _breaks(seen: Projection) -> Floats:
    return np.union1d(seen.force.breaks, seen.turning.breaks)


def _stations(specimen: Specimen, row: int, direction: Direction, s: Floats) -> Floats:
    """The stations (k,) [m] on one stretch of the axis whose cuts pass through s (n,) [m] of its direction."""
    axis = specimen.reference_axis
    start = axis.x[row] * direction.a_x + axis.y[row] * direction.a_y
    x = axis.x[row] + (s - start) * direction.a_x
    return np.asarray(x[(x > axis.x[row]) & (x < axis.x[row + 1])])


def largest(load: PlanLoad, specimen: Specimen, quantity: Quantity) -> tuple[float, float]:
    """Return the largest magnitude of a quantity [N or N·m] and its station [m], reactions included.

    Exact to rounding where the quantity's slope changes sign no more than once between two samples (`peaks`).
    """

    def value(at: Floats, side: Side) -> Floats:
        return loads_at(load, specimen, quantity, at, side)

    def slope(at: Floats, side: Side) -> Floats:
        return _slope(load, specimen, quantity, at, side)

    return peak(value, slope, smooth_stretches(load, specimen, quantity))


def _slope(load: PlanLoad, specimen: Specimen, quantity: Quantity, at: Floats, side: Side) -> Floats:
    """A positive or negative multiple of a quantity's slope at stations `at` (n,)."""
    if quantity in ("moment", "moment across"):
        return loads_at(load, specimen, "shear across" if quantity == "moment across" else "shear", at, side)
    if quantity == "shear across":
        return load.along(ALONG_Y).force.running(at, side)
    if specimen.cut == "square to x":
        running = _running(load, specimen, quantity, at, side, ALONG_X)
    else:
        running = np.zeros(at.shape)
        rows = stretch_at(specimen, at, side)
        for row, direction in enumerate(directions(specimen)):
            on = rows == row
            running[on] = _running(load, specimen, quantity, at[on], side, direction)
    if quantity == "torsion" and specimen.cut == "square to x":
        a_x, a_y = stretch_directions(specimen)
        sweep = (a_y / a_x)[stretch_at(specimen, at, side)]
        return np.asarray(running + sweep * loads_at(load, specimen, "shear", at, side))
    return running


def _running(
    load: PlanLoad, specimen: Specimen, quantity: Quantity, at: Floats, side: Side, direction: Direction
) -> Floats:
    """What the cuts at stations `at` (n,) pass over per length: load, or load times its distance from the axis."""
    seen = load.along(direction)
    y = specimen.reference_axis.at(at)
    s, n = at * direction.a_x + y * direction.a_y, y * direction.a_x - at * direction.a_y
    force = seen.force.running(s, side)
    return seen.turning.running(s, side) - n * force if quantity == "torsion" else force
