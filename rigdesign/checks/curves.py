"""V and M of target and rig along the span, at stations among which every peak is found.

Stations are both sides of every jump (pads, point loads, supports, ends of regions), a few in between, and what is
then looked for: places where the shear error passes through zero (there the moment error peaks), where the target
passes through zero (there under and over change places), and where an error over its band, or over the local target,
has a peak between stations.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable

import numpy as np
from numpy.typing import NDArray

from rigdesign.checks.model import Curves
from rigdesign.checks.sampling import QUANTITIES, Sampler, local_errors, sampler
from rigdesign.target.bands import Band, Quantity
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

EVEN_STATIONS = 401  # over the span, besides the jumps
INNER_STATIONS = 3  # at least so many inside each stretch between jumps, so that each peak has neighbours
CLOSE = 1e-12  # of the span: nearer stations than this are one
BISECTIONS = 40  # leave 1e-12 of a stretch
ZOOMS, ZOOM_POINTS, ZOOM_PEAKS = 8, 9, 40  # each zoom narrows a peak's place to a quarter; flat peaks need no more

Measure = Callable[[Curves], Floats]


def curves(target: Target, pad_x: Floats, pad_force: Floats) -> Curves:
    """Return V and M of target and rig at stations among which every peak of error, band use and local error is.

    Parameters
    ----------
    target
        The target, with its bands.
    pad_x, pad_force
        Places [m] and forces [N] of the pads, (n_pads,).
    """
    sample = sampler(target, pad_x, pad_force)
    rows = sample.rows(*_grid(target, sample.rig.at, sample.bands.values()))
    rows = _with_stations(sample, rows, _all_crossings(sample, rows))
    return _with_stations(sample, rows, _all_peaks(sample, rows))


def jumps(target: Target, at: Floats, judged: Iterable[Band]) -> Floats:
    """Return the stations (k,) where V or a band may jump: pads and supports `at`, point loads, ends of regions."""
    points = [curve.points[0] for curve in (target.total, target.gravity, target.net)]
    edges = [band.edges for band in judged]
    specimen = target.brief.specimen
    ends = np.array([specimen.left, specimen.right])
    every = np.unique(np.concatenate([at, *points, *edges, ends]))
    low, high = min(specimen.left, at.min()), max(specimen.right, at.max())
    return np.asarray(every[(every >= low) & (every <= high)])


def _grid(target: Target, at: Floats, judged: Iterable[Band]) -> tuple[Floats, NDArray[np.bool_]]:
    """Both sides of every jump, even stations, breaks of the curves and a few inside each stretch, in order."""
    jump = jumps(target, at, judged)
    even = np.linspace(jump[0], jump[-1], EVEN_STATIONS)
    # stretches far narrower than the even pitch hold no peak of their own worth looking for
    wide = np.flatnonzero(np.diff(jump) > 0.01 * (even[1] - even[0]))
    inner = np.linspace(jump[wide], jump[wide + 1], INNER_STATIONS + 2)[1:-1].ravel()
    smooth = np.unique(np.concatenate([inner, even, target.total.breaks, target.gravity.breaks]))
    return _ordered(jump, smooth[(smooth > jump[0]) & (smooth < jump[-1])])


def _ordered(jump: Floats, smooth: Floats) -> tuple[Floats, NDArray[np.bool_]]:
    """Rows in order of x, inboard before outboard: both sides at the jumps, one row at smooth stations.

    A smooth station that is as good as a jump, or as the smooth one before it, is left out.
    """
    close = CLOSE * (jump[-1] - jump[0])
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

    def merged(old: dict[Quantity, Floats], new: dict[Quantity, Floats]) -> dict[Quantity, Floats]:
        return {q: np.insert(old[q], at, new[q]) for q in QUANTITIES}

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
    more = [_crossings(sample, rows, lambda at: at.error("shear"))[0]]
    for quantity in QUANTITIES:
        value: Measure = lambda at, q=quantity: at.target[q]  # type: ignore[misc]  # noqa: E731
        more.extend(_crossings(sample, rows, value))
    return np.concatenate(more)


def _crossings(sample: Sampler, rows: Curves, measure: Measure) -> tuple[Floats, Floats]:
    """Where the measure passes zero inside a stretch: the last stations found before and after it, (k,) each."""
    value = measure(rows)
    start = np.flatnonzero((rows.x[:-1] < rows.x[1:]) & (value[:-1] * value[1:] < 0))
    low, high, sign = rows.x[start], rows.x[start + 1], np.sign(value[start])
    inside = np.ones(start.size, bool)
    for _ in range(BISECTIONS if start.size else 0):
        middle = 0.5 * (low + high)
        before = sign * measure(sample.rows(middle, inside)) > 0
        low, high = np.where(before, middle, low), np.where(before, high, middle)
    return low, high


def _all_peaks(sample: Sampler, rows: Curves) -> Floats:
    """Where band use, local error or shear error peak between stations, (k,)."""
    more = [_peaks(sample, rows, lambda at: np.abs(at.error("shear")))]
    for quantity in QUANTITIES:
        band = sample.bands[quantity]
        measures: list[Measure] = [lambda at, q=quantity, peak=band.peak: local_errors(at, q, peak)]  # type: ignore[misc]
        if band.is_judged:
            measures.append(lambda at, q=quantity: at.use(q))  # type: ignore[misc]
        more.extend(_peaks(sample, rows, measure) for measure in measures)
    return np.concatenate(more)


def _peaks(sample: Sampler, rows: Curves, measure: Measure) -> Floats:
    """Where the measure peaks between stations, (k,): the highest few, each found by sampling ever closer."""
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
        value = measure(sample.rows(points.ravel(), np.ones(points.size, bool))).reshape(points.shape)
        top = np.clip(np.argmax(value, axis=0), 1, ZOOM_POINTS - 2)
        columns = np.arange(peak.size)
        low, best, high = points[top - 1, columns], points[top, columns], points[top + 1, columns]
    return best
