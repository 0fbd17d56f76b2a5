"""Fewer stations, every peak kept: what goes into a table must stay readable when a load has a million rows."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from rigdesign.checks.model import Curves
from rigdesign.checks.sampling import local_errors
from rigdesign.target.curve import Floats

MOST_ROWS = 4000
BUCKETS = 200


def thinned(curves: Curves, keep: Floats) -> Curves:
    """Return the curves with at most a few thousand stations.

    Where there are more than `MOST_ROWS`, the rows at the stations `keep` (k,) [m] stay, and of each small stretch
    of the span the rows where an error, a band use, a local error or a target is greatest or least.
    """
    if curves.x.size <= MOST_ROWS:
        return curves
    rows = np.isin(curves.x, keep)
    edges = np.union1d(keep[:: max(keep.size // BUCKETS, 1)], np.linspace(curves.x[0], curves.x[-1], BUCKETS))
    # a row inboard of an edge belongs to the stretch before it
    bucket = 2 * np.searchsorted(edges, curves.x, side="left") + (np.isin(curves.x, edges) & curves.outboard)
    starts = np.flatnonzero(np.diff(bucket, prepend=-1))
    for measure in _measures(curves):
        rows[_greatest(measure, starts)] = True
        rows[_greatest(-measure, starts)] = True
    rows[[0, -1]] = True
    return _chosen(curves, rows)


def _measures(curves: Curves) -> list[Floats]:
    measures: list[Floats] = []
    for quantity, target in curves.target.items():
        local = local_errors(curves, quantity, float(np.abs(target).max()))
        measures += [curves.error(quantity), curves.use(quantity), local, target]
    return measures


def _greatest(measure: Floats, starts: NDArray[np.int64]) -> NDArray[np.int64]:
    """The first row of each bucket at which the measure is greatest."""
    top = np.maximum.reduceat(measure, starts)
    count = np.diff(np.append(starts, measure.size))
    is_top = np.flatnonzero(measure == np.repeat(top, count))
    owner = np.searchsorted(starts, is_top, side="right")
    return is_top[np.unique(owner, return_index=True)[1]]


def _chosen(curves: Curves, rows: NDArray[np.bool_]) -> Curves:
    return Curves(
        x=curves.x[rows],
        outboard=curves.outboard[rows],
        target={q: v[rows] for q, v in curves.target.items()},
        rig={q: v[rows] for q, v in curves.rig.items()},
        below={q: v[rows] for q, v in curves.below.items()},
        above={q: v[rows] for q, v in curves.above.items()},
    )
