"""Single figures out of the curves: peak and local errors, the area between the shear curves, steel, hand method."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Specimen
from rigdesign.checks.curves import curves
from rigdesign.checks.errors import peak_error
from rigdesign.checks.model import Curves, Statics
from rigdesign.levers.model import Piece, Rig
from rigdesign.pads.model import LEAST_SHARE
from rigdesign.target.curve import Curve, Floats
from rigdesign.target.cuts import stretch_at, stretch_directions
from rigdesign.target.model import Target


def shear_area(curves: Curves, specimen: Specimen) -> float:
    """Return ∫ |V_rig − V_target| dx over the span [N·m].

    Between two stations dM/ds = −V, s counted along the direction of the cuts, and every zero of the shear error is a
    station.  So it is the sum of the moment error's changes from station to station, each times dx/ds.  Between the
    two sides of one station lie no dx: there the moment jumps at kinks of an axis that cuts are square to.
    """
    change = np.abs(np.diff(curves.error("moment")))
    if not specimen.is_surface:
        return float(change.sum())
    slope = np.ones(change.size)
    if specimen.cut == "square to axis":
        middle = 0.5 * (curves.x[1:] + curves.x[:-1])
        slope = stretch_directions(specimen)[0][stretch_at(specimen, middle, "outboard")]
    return float((change * slope)[np.diff(curves.x) > 0].sum())


def hand_pads(curve: Curve, n_strips: int) -> tuple[Floats, Floats]:
    """Lump strips of equal width at their centroids: places [m] and forces [N] of the strips that carry load.

    The strips divide the loaded span, and a point load between two strips goes to the outer one.
    """
    breaks = curve.breaks
    edges = np.linspace(breaks[0], breaks[-1], n_strips + 1)
    beyond, moment = curve.force_beyond(edges, "inboard"), curve.moment_beyond(edges)
    beyond[-1] = 0.0
    moment[-1] = 0.0
    force = beyond[:-1] - beyond[1:]
    width = np.diff(edges)
    first_moment = moment[:-1] - moment[1:] - width * beyond[1:]
    carries = np.abs(force) > 1e-12 * np.abs(force).max()
    return edges[:-1][carries] + first_moment[carries] / force[carries], force[carries]


def hand_errors(target: Target, n_pads: int) -> tuple[float, float]:
    """Return the peak errors of moment and shear, as fractions of the target's peaks, of the usual hand method.

    As many strips of equal width as there are pads, each lumped at its centroid, judged as the rig is.
    """
    lumped = curves(target, *hand_pads(target.net, n_pads))
    moment, _ = peak_error(lumped, "moment", target.moment_peak)
    shear, _ = peak_error(lumped, "shear", target.shear_peak)
    return moment, shear


def shares_of_pads(target: Target, pad_x: Floats, pad_y: Floats) -> Floats:
    """Return the part of the net load that is nearest to each pad [N], (n_pads,): in plan, its tributary share."""
    if not target.brief.specimen.is_surface:
        return shares_of_curve(target.net, pad_x)
    from rigdesign.pads.surface.shares import tributary_shares

    return tributary_shares(target, pad_x, pad_y)


def shares_of_curve(curve: Curve, pad_x: Floats) -> Floats:
    """Return the part of the load that is nearest to each pad [N], (n_pads,); boundaries lie midway between pads."""
    order = np.argsort(pad_x, kind="stable")
    middle = 0.5 * (pad_x[order][1:] + pad_x[order][:-1])
    beyond = np.concatenate([[curve.total], curve.force_beyond(middle, "inboard"), [0.0]])
    share = np.empty(pad_x.size)
    share[order] = beyond[:-1] - beyond[1:]
    return share


def unevenness(force: Floats, share: Floats) -> Floats:
    """Return |force − share| over |share| of each pad, all (n_pads,) [N].

    A share counts as at least `LEAST_SHARE` of the mean share.

    >>> unevenness(np.array([110.0, 290.0]), np.array([100.0, 300.0])).round(4).tolist()
    [0.1, 0.0333]
    """
    least = LEAST_SHARE * abs(float(share.mean()))
    return np.asarray(np.abs(force - share) / np.maximum(np.abs(share), least))


def first_largest(values: Floats) -> int:
    """Return the index of the largest value (n,) ≥ 0, of several that agree to rounding the first.

    >>> first_largest(np.array([0.1, 0.3 - 1e-15, 0.3]))
    1
    """
    return int(np.flatnonzero(values >= values.max() * (1.0 - 1e-9))[0])


def evenness(force: Floats, share: Floats) -> float:
    """Return the largest of `unevenness` among pads.

    >>> evenness(np.array([110.0, 290.0]), np.array([100.0, 300.0]))
    0.1
    """
    return float(unevenness(force, share).max())


def arms(piece: Piece) -> tuple[float, float]:
    """Return the arms of a lever from its pivot to ends A and B [m], along the line of its end pins.

    >>> from rigdesign.levers.model import Hole
    >>> pivot = Hole("pivot", "jack 1", 0, 0, 1, 0)
    >>> ends = Hole("A", "pad 1", -0.3, 0, 0.7, 0), Hole("B", "pad 2", 0.2, 0, 1.2, 0)
    >>> arms(Piece(1, "lever", 1, "jack 1", (pivot, *ends)))
    (0.3, 0.2)
    """
    pivot, (a, b) = piece.pivot, piece.ends[:2]
    length = float(np.hypot(b.u - a.u, b.v - a.v))
    along_u, along_v = (b.u - a.u) / length, (b.v - a.v) / length
    to_a = (pivot.u - a.u) * along_u + (pivot.v - a.v) * along_v
    return float(to_a), float((b.u - pivot.u) * along_u + (b.v - pivot.v) * along_v)


def reaches(piece: Piece) -> tuple[float, ...]:
    """Return how far each outer hole of a piece is from its pivot [m]: a lever's arms, a plate's distances."""
    if piece.kind == "lever":
        return arms(piece)
    return tuple(float(np.hypot(hole.u - piece.pivot.u, hole.v - piece.pivot.v)) for hole in piece.ends)


def length(piece: Piece) -> float:
    """Return the largest distance between two outer holes of a piece [m]."""
    ends = piece.ends
    return max(float(np.hypot(p.u - q.u, p.v - q.v)) for i, p in enumerate(ends) for q in ends[:i])


def ratio(piece: Piece) -> float:
    """Return a lever's longer arm over its shorter one, infinite where its pivot is not between its end pins."""
    shorter, longer = sorted(arms(piece))
    return longer / shorter if shorter > 0 else float("inf")


def steel_estimate(rig: Rig, statics: Statics) -> float:
    """Return Σ (P ab/(a+b))^(2/3) (a+b) over levers plus Σ (F r)^(2/3) r over the points of plates.

    P, F are loads [N] at the brief's load, a, b arms, r distances from the pivot [m]; unit N^(2/3) m^(5/3).  A lever
    that bends under P ab/(a+b) needs a section modulus, and so an area to the power 3/2, in proportion to it.
    """
    total = 0.0
    for tree in rig.trees:
        for piece in tree.pieces:
            load = abs(statics.piece_load[piece.name])
            if piece.kind == "lever":
                a, b = arms(piece)
                total += abs(load * a * b / (a + b)) ** (2 / 3) * (a + b)
            else:
                total += _plate_steel(piece, statics)
    return total


def _plate_steel(piece: Piece, statics: Statics) -> float:
    total = 0.0
    for hole, r in zip(piece.ends, reaches(piece), strict=True):
        kind, number = hole.joins.split()
        force = statics.pad_force[int(number) - 1] if kind == "pad" else statics.piece_load[hole.joins]
        total += abs(force * r) ** (2 / 3) * r
    return total


def dot(a: Floats, b: Floats) -> float:
    """Return Σ a b of two arrays (n,), the same to the last bit in every process.

    A BLAS product is not: how it sums depends on where in memory its arrays happen to lie.

    >>> dot(np.array([1.0, 2.0]), np.array([3.0, 4.0]))
    11.0
    """
    return float((a * b).sum())


def jack_offset(rig: Rig) -> float:
    """Return how far the jacks' resultant stands outboard of the resultant that the pads must bring [m]."""
    force = rig.jack_forces
    jack_x = np.array([tree.jack.x for tree in rig.trees])
    net = rig.plan.target.net
    return dot(force, jack_x) / float(force.sum()) - net.first_moment / net.total


def jack_offset_y(rig: Rig) -> float:
    """Return how far the jacks' resultant stands along y from the resultant that the pads must bring [m]."""
    force = rig.jack_forces
    jack_y = np.array([tree.jack.y for tree in rig.trees])
    sums = rig.plan.target.net_plan.sums
    return dot(force, jack_y) / float(force.sum()) - sums.first_y / sums.force


def sum_residuals(rig: Rig, statics: Statics) -> tuple[float, float]:
    """Return what is left of ΣF [of the jacks' force] and of ΣFx and ΣFy [of that force times the span].

    Pads against jacks; the moments as one vector's length.
    """
    force, pads = rig.jack_forces, statics.pad_force
    specimen = rig.plan.target.brief.specimen
    span, size = specimen.right - specimen.left, float(np.abs(force).sum())
    moments = []
    for pad, jack in (
        (rig.pad_x, np.array([tree.jack.x for tree in rig.trees])),
        (rig.pad_y, np.array([tree.jack.y for tree in rig.trees])),
    ):
        # about the first jack, so that the place of the origin does not cost digits
        about = jack[0]
        moments.append(dot(pads, pad - about) - dot(force, jack - about))
    return abs(float(pads.sum() - force.sum())) / size, float(np.hypot(moments[0], moments[1])) / (size * span)
