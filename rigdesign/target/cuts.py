"""Where the specimen is cut for V, M and T, and what a force anywhere in plan brings to a cut.

A cut goes through a point p of the reference axis, square to a unit vector a: the x direction, or the axis' own
(conventions).  What lies beyond it, d = place − p with d·a > 0, counts:

    V = Σ F        M = Σ F d·a        T = Σ F (d_y a_x − d_x a_y)

so that a couple C about a unit vector b brings T = C a·b and M = C (b_x a_y − b_y a_x).  Across, a cut at y goes
square to the y direction, and the supports' answers are left out: how a panel is held across its span is not in the
brief.

Two supports bear on the reference axis; the first of them alone holds torsion, as a root would.  Their forces follow
from the balance along x, or along the line through both of them where the cuts are square to the axis.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity, Specimen
from rigdesign.target.curve import Floats, Side
from rigdesign.target.internal import points_beyond

SAME_PLACE = 1e-12
"""Of the span: what is nearer to a cut stands on it."""

ALONG: tuple[Quantity, ...] = ("shear", "moment", "torsion")
"""What is cut at stations along the span."""

ACROSS: tuple[Quantity, ...] = ("shear across", "moment across")
"""What is cut the other way, at stations y."""


@dataclass(frozen=True)
class Cuts:
    """Cuts through the points x, y [m], square to the unit vectors a_x, a_y, on one side of each point; all (n,)."""

    x: Floats
    y: Floats
    a_x: Floats
    a_y: Floats
    side: Side


@dataclass(frozen=True)
class Reactions:
    """What supports answer: forces [N] at x, y [m], (k,) each, and a couple [N·m] about `direction` at the first."""

    x: Floats
    y: Floats
    force: Floats
    couple: float
    direction: tuple[float, float]


def cuts_at(specimen: Specimen, quantity: Quantity, at: Floats, side: Side) -> Cuts:
    """Return the cuts for a quantity at stations `at` (n,) [m]: x of points on the axis, or y for what is cut across.

    At a kink of the axis the side tells whose direction holds.
    """
    none, one = np.zeros(at.shape), np.ones(at.shape)
    if quantity in ACROSS:
        return Cuts(none, at, none, one, side)
    axis = specimen.reference_axis
    if specimen.cut == "square to x":
        return Cuts(at, axis.at(at), one, none, side)
    row = stretch_at(specimen, at, side)
    a_x, a_y = stretch_directions(specimen)
    return Cuts(at, axis.at(at), a_x[row], a_y[row], side)


def stretch_at(specimen: Specimen, at: Floats, side: Side) -> NDArray[np.intp]:
    """Return the stretch of the axis that holds at stations `at` (n,) [m]; at a kink, that of the side."""
    axis = specimen.reference_axis
    found = np.searchsorted(axis.x, at, side="left" if side == "inboard" else "right") - 1
    return np.clip(found, 0, axis.x.size - 2)


def stretch_directions(specimen: Specimen) -> tuple[Floats, Floats]:
    """Return the unit vectors a_x, a_y of the axis' stretches, (k,) each."""
    axis = specimen.reference_axis
    d_x, d_y = np.diff(axis.x), np.diff(axis.y)
    length = np.hypot(d_x, d_y)
    return d_x / length, d_y / length


def reactions_in_plan(specimen: Specimen, force: float, first_x: float, first_y: float) -> Reactions:
    """Return what the supports answer to loads of sum `force` [N] and first moments ΣFx, ΣFy [N·m].

    No forces and no couple for a cantilever, where nothing but the load lies outboard of a cut.
    """
    if not specimen.supports:
        return Reactions(np.empty(0), np.empty(0), np.empty(0), 0.0, (1.0, 0.0))
    x = np.array(specimen.supports)
    y = specimen.reference_axis.at(x)
    b_x, b_y = _balance_direction(specimen, x, y)
    along, left = x * b_x + y * b_y, y * b_x - x * b_y
    first_along, first_left = first_x * b_x + first_y * b_y, first_y * b_x - first_x * b_y
    second = -(first_along - force * along[0]) / (along[1] - along[0])
    answer = np.array([-force - second, second])
    return Reactions(x, y, answer, -(first_left + float((answer * left).sum())), (b_x, b_y))


def _balance_direction(specimen: Specimen, x: Floats, y: Floats) -> tuple[float, float]:
    if specimen.cut == "square to x":
        return 1.0, 0.0
    length = float(np.hypot(x[1] - x[0], y[1] - y[0]))
    return float(x[1] - x[0]) / length, float(y[1] - y[0]) / length


def counts(specimen: Specimen, cuts: Cuts, x: Floats, y: Floats) -> tuple[NDArray[np.bool_], Floats, Floats]:
    """Return what lies beyond each cut of places x, y (k,) [m], and how far along and to the left of it: (n, k) each.

    What stands on a cut counts on its inboard side.
    """
    d_x, d_y = x[None, :] - cuts.x[:, None], y[None, :] - cuts.y[:, None]
    along = d_x * cuts.a_x[:, None] + d_y * cuts.a_y[:, None]
    left = d_y * cuts.a_x[:, None] - d_x * cuts.a_y[:, None]
    close = SAME_PLACE * (specimen.right - specimen.left)
    beyond = along >= -close if cuts.side == "inboard" else along > close
    return beyond, along, left


def responses(specimen: Specimen, quantity: Quantity, at: Floats, side: Side, x: Floats, y: Floats) -> Floats:
    """Return what unit forces at places x, y (k,) [m] bring to a quantity at stations `at` (n,), reactions included.

    The result is (n, k): V, M or T [N or N·m] per newton; linear, so that the quantity is this matrix times forces.
    """
    cuts = cuts_at(specimen, quantity, at, side)
    result = _direct(specimen, quantity, cuts, x, y)
    if not specimen.supports or quantity in ACROSS:
        return result
    # the answer to a unit force at each place is linear in that place: three unit loads tell all
    zero = _answer(specimen, quantity, cuts, 1.0, 0.0, 0.0)
    by_x = _answer(specimen, quantity, cuts, 0.0, 1.0, 0.0)
    by_y = _answer(specimen, quantity, cuts, 0.0, 0.0, 1.0)
    return np.asarray(result + zero[:, None] + by_x[:, None] * x + by_y[:, None] * y)


def _direct(specimen: Specimen, quantity: Quantity, cuts: Cuts, x: Floats, y: Floats) -> Floats:
    beyond, along, left = counts(specimen, cuts, x, y)
    if quantity in ("shear", "shear across"):
        return beyond.astype(float)
    return np.where(beyond, left if quantity == "torsion" else along, 0.0)


def _answer(specimen: Specimen, quantity: Quantity, cuts: Cuts, force: float, first_x: float, first_y: float) -> Floats:
    return reaction_loads(specimen, quantity, cuts, reactions_in_plan(specimen, force, first_x, first_y))


def reaction_loads(specimen: Specimen, quantity: Quantity, cuts: Cuts, answer: Reactions) -> Floats:
    """Return what the supports' answer brings to a quantity at cuts, (n,)."""
    if not answer.x.size or quantity in ACROSS:
        return np.zeros(cuts.x.shape)
    if specimen.cut == "square to x" and quantity != "torsion":
        # summed from the outermost support inward, so that near it nothing large cancels
        beyond = points_beyond(cuts.x, answer.x, answer.force, cuts.side)
        return beyond[0] if quantity == "shear" else beyond[1]
    brought = (_direct(specimen, quantity, cuts, answer.x, answer.y) * answer.force).sum(axis=1)
    if quantity == "shear":
        return np.asarray(brought)
    held, _, _ = counts(specimen, cuts, answer.x[:1], answer.y[:1])
    b_x, b_y = answer.direction
    turned = b_x * cuts.a_x + b_y * cuts.a_y if quantity == "torsion" else b_x * cuts.a_y - b_y * cuts.a_x
    return np.asarray(brought + answer.couple * np.where(held[:, 0], turned, 0.0))


def jump_stations(specimen: Specimen, quantity: Quantity, x: Floats, y: Floats) -> Floats:
    """Return the stations (k,) [m], sorted, whose cut goes through one of the places x, y (n,): there V and T jump.

    Square to a kinked axis a place can stand on no cut, or on two; the kinks themselves are stations too.
    """
    if quantity in ACROSS:
        return np.unique(y)
    if specimen.cut == "square to x":
        return np.unique(x)
    axis = specimen.reference_axis
    a_x, a_y = stretch_directions(specimen)
    along = (x[:, None] - axis.x[:-1]) * a_x + (y[:, None] - axis.y[:-1]) * a_y
    station = axis.x[:-1] + along * a_x
    close = SAME_PLACE * (specimen.right - specimen.left)
    inside = (station >= axis.x[:-1] - close) & (station <= axis.x[1:] + close)
    inside[:, 0] |= station[:, 0] < axis.x[0]
    inside[:, -1] |= station[:, -1] > axis.x[-1]
    return np.unique(np.concatenate([station[inside], axis.x[1:-1]]))
