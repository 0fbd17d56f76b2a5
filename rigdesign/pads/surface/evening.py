"""Even forces in plan: as close to the pads' tributary shares as what is given up of the band use allows.

First the largest deviation is made least (a linear programme), then, among all forces that reach it, the sum of the
squares: that choice is unique, so that what is symmetric stays so.  The second step is a least distance problem in the
null space of sum and moments (Lawson and Hanson, Solving Least Squares Problems, 1974, chapter 23: by non-negative
least squares; from memory).
"""

from __future__ import annotations

import numpy as np
from scipy.linalg import null_space
from scipy.optimize import nnls

from rigdesign.brief.model import PadRules
from rigdesign.pads.forces import WORTH_A_PAD, Forces
from rigdesign.pads.model import LEAST_SHARE
from rigdesign.pads.outcome import use_given_up_to
from rigdesign.pads.surface.program import Programme
from rigdesign.target.curve import Floats

ROOM = 1e-7
"""Slack in units of deviation and band use that the first step leaves to the second."""

FOR_DRILLING, FOR_MOVING = 0.99, 0.97
"""Of a band that is kept, even forces take no more than this: holes on whole drill steps need a little as well, and
free pads, which drilling moves, a little more."""


def limits(rules: PadRules, programme: Programme, best: Forces) -> Floats:
    """Return the band use that each quantity of the rows may take, in their order.

    Where one band cannot be kept, that is no leave to break another: what keeps its band goes on keeping it, with
    a little left for drilling.
    """
    most = use_given_up_to(rules, best.use)
    own, whole = programme.uses(best.force), FOR_MOVING if rules.places == "free" else FOR_DRILLING
    return np.where(own <= 1.0, np.minimum(most, np.maximum(own, whole)), most)


def more_even(programme: Programme, best: Forces, limit: Floats, share: Floats) -> Forces:
    """Return the most even forces within the limits, unique; the best ones themselves where none are found."""
    found = programme.most_even(limit, share)
    if found is None:
        return programme.judged(best.force, share)
    closest = _closest(programme, found, limit, share)
    if closest is None or closest.evenness > found.evenness + 100 * ROOM:
        return found
    return closest


def _closest(programme: Programme, found: Forces, limit: Floats, share: Floats) -> Forces | None:
    """Least sum of squared deviations among forces no less even than those found."""
    mean = programme.mean
    scale = np.maximum(share, LEAST_SHARE * mean)
    rows = programme.balance.rows(programme.x, programme.y) * scale
    size = np.linalg.norm(rows, axis=1, keepdims=True)
    # with all pads on a line through the jack nothing is asked of the moment about it
    free = null_space(rows / np.where(size > 0, size, 1.0))
    start = (found.force - share) / scale
    # unknown: the deviations d = start + free q, of least sum of squares
    d_0 = start - (free * (free * start[:, None]).sum(axis=0)).sum(axis=1)
    g, h = _inequalities(programme, found, limit, share, scale)
    inner = (g[:, :, None] * free[None, :, :]).sum(axis=1) if free.size else np.zeros((len(g), 0))
    q = _least_distance(inner, h - (g * d_0).sum(axis=1))
    if q is None:
        return None
    force = share + scale * (d_0 + (free * q).sum(axis=1))
    force = programme.balance.hit(programme.x, programme.y, force)
    judged = programme.judged(force, share)
    within = np.all(programme.uses(force) <= limit + 10 * ROOM)
    inside = force.min() >= programme.least - 1e-9 * mean and force.max() <= programme.largest + 1e-9 * mean
    return judged if within and inside else None


def _inequalities(
    programme: Programme, found: Forces, limit: Floats, share: Floats, scale: Floats
) -> tuple[Floats, Floats]:
    """Rows g and values h such that g · deviations ≥ h says: bands, force limits and the deviation found are kept."""
    a, c = programme.edges
    mean = programme.mean
    allowed = np.tile(limit[programme.rows.quantity], 2) + ROOM
    one = np.eye(share.size)
    most = found.evenness + ROOM
    least = max(programme.least, min(WORTH_A_PAD * mean, float(found.force.min())))
    g = [-a * (scale / mean), one, -one, one * (scale / mean)[:, None]]
    h = [(a * (share / mean)).sum(axis=1) - c - allowed, np.full(share.size, -most), np.full(share.size, -most)]
    h.append((least * (1 - ROOM) - share) / mean)
    if np.isfinite(programme.largest):
        g.append(-one * (scale / mean)[:, None])
        h.append((share - programme.largest * (1 + ROOM * ROOM)) / mean)
    return np.concatenate(g), np.concatenate(h)


def _least_distance(g: Floats, h: Floats) -> Floats | None:
    """Return the q of least norm with g q ≥ h, None where there is none or the solver gives up."""
    if not g.shape[1]:
        return np.empty(0)
    if np.all(h <= 0):
        return np.zeros(g.shape[1])
    a = np.vstack([g.T, h])
    b = np.append(np.zeros(g.shape[1]), 1.0)
    try:
        u, _ = nnls(a, b)
    except RuntimeError:
        return None
    r = (a * u).sum(axis=1) - b
    return None if abs(r[-1]) < 1e-12 else -r[:-1] / r[-1]
