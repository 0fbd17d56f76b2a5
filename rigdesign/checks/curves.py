"""V, M and T of target and rig along the span, at stations among which every peak is found.

Stations are both sides of every jump (pads, point loads, supports, ends of regions), a few in between, and what is
then looked for: places where the shear error passes through zero (there the moment error peaks), where the target
passes through zero (there under and over change places), and where an error over its band, or over the local target,
has a peak between stations.  On surfaces dM/dx = −V does not hold at a kink of an axis that cuts are square to, and T
has no such rule at all: there the peaks of every error are looked for themselves.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity
from rigdesign.checks.errors import reference
from rigdesign.checks.model import Curves
from rigdesign.checks.samplers import sampler
from rigdesign.checks.sampling import Sampler, local_errors
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

EVEN_STATIONS = 401  # over the span, besides the jumps
INNER_STATIONS = 3  # at least so many inside each stretch between jumps, so that each peak has neighbours
CLOSE = 1e-12  # of the span: nearer stations than this are one
BISECTIONS = 40  # leave 1e-12 of a stretch
ZOOMS, ZOOM_POINTS, ZOOM_PEAKS = 8, 9, 40  # each zoom narrows a peak's place to a quarter; flat peaks need no more
ROUNDING = 1e-9  # of a quantity's reference: a target that is smaller everywhere has no zeros worth finding

Measure = Callable[[Curves], Floats]


def curves(target: Target, pad_x: Floats, pad_force: Floats, pad_y: Floats | None = None) -> Curves:
    """Return V, M (and T) of target and rig at stations among which every peak of error, use and local error is.

    Parameters
    ----------
    target
        The target, with its bands.
    pad_x, pad_force
        Places [m] and forces [N] of the pads, (n_pads,).
    pad_y
        Their places across the span [m], which count on surfaces alone; None for every y = 0.
    """
    return searched(sampler(target, pad_x, pad_force, pad_y))


def searched(sample: Sampler) -> Curves:
    """Return what a sampler gives at the stations that matter: its jumps, a few between, zeros and peaks."""
    x, outboard = _grid(sample)
    rows = _sampled(sample, x, outboard)
    rows = _with_stations(sample, rows, _all_crossings(sample, rows))
    return _with_stations(sample, rows, _all_peaks(sample, rows))


def _sampled(sample: Sampler, x: Floats, outboard: NDArray[np.bool_]) -> Curves:
    """The grid's rows; both sides of a jump stand off it by what counts as on it."""
    if not sample.near:
        return sample.rows(x, outboard)
    off = np.where(np.isin(x, sample.jump), np.where(outboard, sample.near, -sample.near), 0.0)
    return replace(sample.rows(x + off, outboard), x=x)


def _grid(sample: Sampler) -> tuple[Floats, NDArray[np.bool_]]:
    """Both sides of every jump, even stations, breaks of the curves and a few inside each stretch, in order."""
    jump = sample.jump
    even = np.linspace(jump[0], jump[-1], EVEN_STATIONS)
    # stretches far narrower than the even pitch hold no peak of their own worth looking for
    wide = np.flatnonzero(np.diff(jump) > 0.01 * (even[1] - even[0]))
    inner = np.linspace(jump[wide], jump[wide + 1], INNER_STATIONS + 2)[1:-1].ravel()
    smooth = np.unique(np.concatenate([inner, even, sample.breaks]))
    smooth = smooth[(smooth > jump[0]) & (smooth < jump[-1])]
    return _ordered(jump, smooth, max(CLOSE * (jump[-1] - jump[0]), 2.0 * sample.near))


def _ordered(jump: Floats, smooth: Floats, close: float) -> tuple[Floats, NDArray[np.bool_]]:
    """Rows in order of x, inboard before outboard: both sides at the jumps, one row at smooth stations.

    A smooth station that is nearer than `close` [m] to a jump, or to the smooth one before it, is left out.
    """
    place = np.searchsorted(jump, smooth)
    nearest = np.minimum(smooth - jump[place - 1], jump[np.minimum(place, jump.size - 1)] - smooth)
    smooth = smooth[nearest > close]
    smooth = smooth[np.diff(smooth, prepend=-np.inf) > close]
    x = np.concatenate([jump, jump, smooth])
    outboard = np.concatenate([np.zeros(jump.size, bool), np.ones(jump.size + smooth.size, bool)])
    order = np.lexsort((outboard, x))
    return x[order], outboard[order]


def _with_stations(sample: Sampler, rows: Curves, more: Floats) -> Curves:
    """The rows with those at smooth stations `more` (k,) added, none of them at a row's own x."""
    more = np.unique(more)
    at = np.searchsorted(rows.x, more)
    is_new = rows.x[np.minimum(at, rows.x.size - 1)] != more
    more, at = more[is_new], at[is_new]
    added = sample.rows(more, np.ones(more.size, bool))

    def merged(old: Mapping[Quantity, Floats], new: Mapping[Quantity, Floats]) -> dict[Quantity, Floats]:
        return {q: np.insert(old[q], at, new[q]) for q in sample.quantities}

    return Curves(
        x=np.insert(rows.x, at, more),
        outboard=np.insert(rows.outboard, at, True),
        target=merged(rows.target, added.target),
        rig=merged(rows.rig, added.rig),
        below=merged(rows.below, added.below),
        above=merged(rows.above, added.above),
    )


def _all_crossings(sample: Sampler, rows: Curves) -> Floats:
    """Zeros of the shear error, and both sides of where a target passes zero, (k,)."""
    shear = sample.quantities[0]
    more = [_crossings(sample, rows, shear, lambda at: at.error(shear))[0]]
    for quantity in sample.quantities:
        if np.abs(rows.target[quantity]).max() > ROUNDING * reference(sample.target, quantity).size:
            value: Measure = lambda at, q=quantity: at.target[q]  # type: ignore[misc]  # noqa: E731
            more.extend(_crossings(sample, rows, quantity, value))
    return np.concatenate(more)


def _crossings(sample: Sampler, rows: Curves, quantity: Quantity, measure: Measure) -> tuple[Floats, Floats]:
    """Where a measure of a quantity passes zero inside a stretch: the last stations before and after it, (k,) each."""
    value = measure(rows)
    start = np.flatnonzero((rows.x[:-1] < rows.x[1:]) & (value[:-1] * value[1:] < 0))
    low, high, sign = rows.x[start], rows.x[start + 1], np.sign(value[start])
    inside = np.ones(start.size, bool)
    for _ in range(BISECTIONS if start.size else 0):
        middle = 0.5 * (low + high)
        before = sign * measure(sample.rows(middle, inside, (quantity,))) > 0
        low, high = np.where(before, middle, low), np.where(before, high, middle)
    return low, high


def _all_peaks(sample: Sampler, rows: Curves) -> Floats:
    """Where band use, local error or an error itself peak between stations, (k,)."""
    more: list[Floats] = []
    for quantity in sample.quantities:
        size = reference(sample.target, quantity).size
        measures: list[Measure] = [lambda at, q=quantity, size=size: local_errors(at, q, size)]  # type: ignore[misc]
        if sample.bands[quantity].is_judged:
            measures.append(lambda at, q=quantity: at.use(q))  # type: ignore[misc]
        # along a line the moment's error peaks where the shear's is zero
        if quantity == sample.quantities[0] or sample.target.brief.specimen.is_surface:
            measures.append(lambda at, q=quantity: np.abs(at.error(q)))  # type: ignore[misc]
        more.extend(_peaks(sample, rows, quantity, measure) for measure in measures)
    return np.concatenate(more)


def _peaks(sample: Sampler, rows: Curves, quantity: Quantity, measure: Measure) -> Floats:
    """Where a measure of a quantity peaks between stations, (k,): the highest few, found by sampling ever closer."""
    x, value = rows.x, measure(rows)
    single = np.diff(x) > 0
    peak = 1 + np.flatnonzero(
        single[:-1] & single[1:] & (value[1:-1] >= value[:-2]) & (value[1:-1] >= value[2:]) & (value[1:-1] > 0)
    )
    # lower peaks cannot overtake: between neighbouring stations a measure moves far less than by a fifth
    peak = peak[value[peak] > 0.8 * value.max(initial=0.0)]
    peak = peak[np.argsort(-value[peak], kind="stable")[:ZOOM_PEAKS]]
    low, high = x[peak - 1], x[peak + 1]
    # keep off the ends: they may be the inboard side of a jump, where this side's value does not hold
    low, high = low + 1e-9 * (high - low), high - 1e-9 * (high - low)
    best = np.asarray(x[peak])
    for _ in range(ZOOMS if peak.size else 0):
        points = np.linspace(low, high, ZOOM_POINTS)
        value = measure(sample.rows(points.ravel(), np.ones(points.size, bool), (quantity,))).reshape(points.shape)
        top = np.clip(np.argmax(value, axis=0), 1, ZOOM_POINTS - 2)
        columns = np.arange(peak.size)
        low, best, high = points[top - 1, columns], points[top, columns], points[top + 1, columns]
    return best
