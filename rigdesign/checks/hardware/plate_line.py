"""The straight line through a plate's pivot about which its forces bend it worst.

About a line of direction θ the forces on one side have the moment m(θ), and the steel along it the width w(θ), holes
left out; bending stress goes with m/w.  Between directions in which the line passes a corner, the centre of a hole or
the edge of one, m is a sine and w a sum of secants less chords: m is concave, w convex, m/w has one peak.  So every
such stretch is closed in on, and the largest of all is the answer.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.target.curve import Floats

POINTS, ROUNDS = 9, 18  # each round leaves a quarter of a stretch: 1e-11 of it after all
NO_STEEL = 1e-9  # m: a line along which less is left is no line of steel


@dataclass(frozen=True)
class Line:
    """A line through the pivot: its direction [rad], the moment about it [N·m] and the steel along it [m]."""

    angle: float
    moment: float
    width: float


def worst_line(places: Floats, forces: Floats, holes: Floats, pivot_hole: float, outline: Floats) -> Line:
    """Return the line of the largest moment over width.

    Parameters
    ----------
    places, forces, holes
        Places u, v of the outer holes seen from the pivot [m] (n, 2), the forces there [N] (n,), their diameters [m].
    pivot_hole
        Diameter of the pivot's hole [m].
    outline
        Corners of the plate seen from the pivot [m] (k, 2), in order, the pivot inside.
    """
    angles = _turning_points(places, holes, outline)
    ends = np.append(angles, angles[0] + np.pi)
    low, high = ends[:-1], ends[1:]
    best = 0.5 * (low + high)
    for _ in range(ROUNDS):
        tried = np.linspace(low, high, POINTS)
        ratio = _ratio(tried.ravel(), places, forces, holes, pivot_hole, outline)[0].reshape(tried.shape)
        top = np.argmax(ratio, axis=0)
        column = np.arange(low.size)
        best = tried[top, column]
        low, high = tried[np.maximum(top - 1, 0), column], tried[np.minimum(top + 1, POINTS - 1), column]
    ratio, moment, width = _ratio(best, places, forces, holes, pivot_hole, outline)
    worst = int(np.argmax(ratio))
    return Line(float(best[worst] % np.pi), float(moment[worst]), float(width[worst]))


def _turning_points(places: Floats, holes: Floats, outline: Floats) -> Floats:
    """Directions in [0, π) in which a line through the pivot passes a corner, a hole's centre or a hole's edge."""
    to_hole = np.arctan2(places[:, 1], places[:, 0])
    far = np.hypot(places[:, 0], places[:, 1])
    reach = np.arcsin(np.minimum(holes / 2 / np.maximum(far, holes / 2), 1.0))
    corners = np.arctan2(outline[:, 1], outline[:, 0])
    return np.unique(np.concatenate([corners, to_hole, to_hole + reach, to_hole - reach]) % np.pi)


def _ratio(
    angle: Floats, places: Floats, forces: Floats, holes: Floats, pivot_hole: float, outline: Floats
) -> tuple[Floats, Floats, Floats]:
    """Moment over width, moment [N·m] and width [m] of lines (n,)."""
    along = np.stack([np.cos(angle), np.sin(angle)])
    off = -along[1] * places[:, :1] + along[0] * places[:, 1:]
    turning = forces[:, None] * off
    moment = np.maximum(np.where(off > 0, turning, 0.0).sum(axis=0), np.where(off < 0, -turning, 0.0).sum(axis=0))
    chord = 2 * np.sqrt(np.maximum((holes[:, None] / 2) ** 2 - off**2, 0.0))
    width = _reach(along, outline) + _reach(-along, outline) - chord.sum(axis=0) - pivot_hole
    ratio = np.where(width > NO_STEEL, moment / np.maximum(width, NO_STEEL), np.inf)
    return ratio, moment, np.maximum(width, 0.0)


def _reach(along: Floats, outline: Floats) -> Floats:
    """How far it is from the pivot to the outline in directions (2, n) [m], (n,): to the first edge met."""
    edge = np.roll(outline, -1, axis=0) - outline
    across = along[0] * edge[:, 1:] - along[1] * edge[:, :1]
    with np.errstate(divide="ignore", invalid="ignore"):
        distance = (outline[:, :1] * edge[:, 1:] - outline[:, 1:] * edge[:, :1]) / across
        part = (outline[:, :1] * along[1] - outline[:, 1:] * along[0]) / across
    slack = 1e-12  # a line through a corner meets one of its edges, whatever rounding says
    met = (across != 0) & (distance > 0) & (part >= -slack) & (part <= 1 + slack)
    nearest = np.where(met, distance, np.inf).min(axis=0)
    return np.where(np.isfinite(nearest), nearest, 0.0)
