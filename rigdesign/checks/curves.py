"""V and M of target and rig along the span, at stations among which every peak is found.

    rig = what the pads bring + the supports' answer to the pads + what gravity brings

Stations are both sides of every jump (pads, point loads, supports, ends of regions), a few in between, and what is
then looked for: places where the shear error passes through zero (there the moment error peaks), where the target
passes through zero (there under and over change places), and where an error over its band, or over the local target,
has a peak between stations.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.checks.model import Curves
from rigdesign.target import internal
from rigdesign.target.bands import Band, Quantity, bands
from rigdesign.target.curve import Floats, Side
from rigdesign.target.model import Target
from rigdesign.words import SMALL_TARGET

QUANTITIES: tuple[Quantity, ...] = ("shear", "moment")
EVEN_STATIONS = 401  # over the span, besides the jumps
INNER_STATIONS = 3  # at least so many inside each stretch between jumps, so that each peak has neighbours
CLOSE = 1e-12  # of the span: nearer stations than this are one
BISECTIONS = 40  # leave 1e-12 of a stretch
ZOOMS, ZOOM_POINTS, ZOOM_PEAKS = 8, 9, 40  # each zoom narrows a peak's place to a quarter; flat peaks need no more

Curve = Callable[[Floats, NDArray[np.bool_]], Floats]


@dataclass(frozen=True)
class RigLoads:
    """Everything that acts on the specimen: pads and the supports' answer to them as point loads, and gravity.

    `at` [m], `force` [N] are (n_points,), pads first.
    """

    target: Target
    at: Floats
    force: Floats

    def shear(self, x: Floats, side: Side) -> Floats:
        """Shear of the rig [N] at stations x (n,)."""
        gravity = internal.shear(self.target.gravity, self.target.brief.specimen, x, side)
        return internal.points_beyond(x, self.at, self.force, side)[0] + gravity

    def moment(self, x: Floats) -> Floats:
        """Bending moment of the rig [N·m] at stations x (n,)."""
        gravity = internal.moment(self.target.gravity, self.target.brief.specimen, x)
        return internal.points_beyond(x, self.at, self.force, "inboard")[1] + gravity


def rig_loads(target: Target, pad_x: Floats, pad_force: Floats) -> RigLoads:
    """Return what pads of `pad_force` (n_pads,) [N] at `pad_x` (n_pads,) [m] do to the target's specimen."""
    total, first_moment = float(pad_force.sum()), float((pad_force * pad_x).sum())
    support_x, support_force = internal.reactions(target.brief.specimen, total, first_moment)
    return RigLoads(target, np.concatenate([pad_x, support_x]), np.concatenate([pad_force, support_force]))


@dataclass(frozen=True)
class Sampler:
    """Target, rig and bands at any stations x (n,) and sides `outboard` (n,)."""

    target: Target
    rig: RigLoads
    bands: dict[Quantity, Band]

    def target_value(self, quantity: Quantity, x: Floats, outboard: NDArray[np.bool_]) -> Floats:
        """Shear [N] or moment [N·m] of the target (n,)."""
        if quantity == "moment":
            return self.target.moment(x)
        return by_side(self.target.shear, x, outboard)

    def error(self, quantity: Quantity, x: Floats, outboard: NDArray[np.bool_]) -> Floats:
        """Rig minus target (n,)."""
        if quantity == "moment":
            return self.rig.moment(x) - self.target.moment(x)
        return by_side(self.rig.shear, x, outboard) - by_side(self.target.shear, x, outboard)

    def use(self, quantity: Quantity, x: Floats, outboard: NDArray[np.bool_]) -> Floats:
        """Error over its band (n,), zero where nothing is asked."""
        error = self.error(quantity, x, outboard)
        below, above = self.widths(quantity, x, outboard)
        return np.abs(error) / np.where(error < 0, below, above)

    def local(self, quantity: Quantity, x: Floats, outboard: NDArray[np.bool_]) -> Floats:
        """Error over the local target (n,), zero where the target is below 5 % of its peak."""
        value = np.abs(self.target_value(quantity, x, outboard))
        counts = value >= SMALL_TARGET * self.bands[quantity].peak
        error = np.abs(self.error(quantity, x, outboard))
        return np.where(counts, error / np.where(counts, value, 1.0), 0.0)

    def widths(self, quantity: Quantity, x: Floats, outboard: NDArray[np.bool_]) -> tuple[Floats, Floats]:
        """The band's widths below and above zero error (n,) each."""
        below, above = np.empty(x.shape), np.empty(x.shape)
        for mask, side in _sides(outboard):
            if mask.any():
                below[mask], above[mask] = self.bands[quantity].widths(x[mask], side)
        return below, above


def sampler(target: Target, pad_x: Floats, pad_force: Floats) -> Sampler:
    """Return a sampler of the target and of pads (n_pads,) [m], [N] on its specimen."""
    return Sampler(target, rig_loads(target, pad_x, pad_force), bands(target))


def by_side(function: Callable[[Floats, Side], Floats], x: Floats, outboard: NDArray[np.bool_]) -> Floats:
    """Return the function at stations x (n,), each on its own side."""
    result = np.empty(x.shape)
    for mask, side in _sides(outboard):
        if mask.any():
            result[mask] = function(x[mask], side)
    return result


def _sides(outboard: NDArray[np.bool_]) -> tuple[tuple[NDArray[np.bool_], Side], tuple[NDArray[np.bool_], Side]]:
    return (~outboard, "inboard"), (outboard, "outboard")


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
    x, outboard = _grid(target, sample.rig.at, sample.bands.values())
    x, outboard = _with_crossings(sample, x, outboard)
    x, outboard = _with_peaks(sample, x, outboard)
    values = {q: sample.target_value(q, x, outboard) for q in QUANTITIES}
    widths = {q: sample.widths(q, x, outboard) for q in QUANTITIES}
    return Curves(
        x=x,
        outboard=outboard,
        target=values,
        rig={"shear": by_side(sample.rig.shear, x, outboard), "moment": sample.rig.moment(x)},
        below={q: widths[q][0] for q in QUANTITIES},
        above={q: widths[q][1] for q in QUANTITIES},
    )


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
    inner = np.linspace(jump[:-1], jump[1:], INNER_STATIONS + 2)[1:-1].ravel()
    even = np.linspace(jump[0], jump[-1], EVEN_STATIONS)
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


def _inserted(x: Floats, outboard: NDArray[np.bool_], more: Floats) -> tuple[Floats, NDArray[np.bool_]]:
    """The rows with smooth stations `more` (k,) added, none of them at a row's own x."""
    more = np.unique(more)
    more = more[~np.isin(more, x)]
    at = np.searchsorted(x, more)
    return np.insert(x, at, more), np.insert(outboard, at, True)


def _with_crossings(sample: Sampler, x: Floats, outboard: NDArray[np.bool_]) -> tuple[Floats, NDArray[np.bool_]]:
    """Add the zeros of the shear error, and both sides of where a target passes zero."""
    more = [_crossings(lambda s, o: sample.error("shear", s, o), x, outboard)[0]]
    for quantity in QUANTITIES:
        value: Curve = lambda s, o, q=quantity: sample.target_value(q, s, o)  # type: ignore[misc]  # noqa: E731
        more.extend(_crossings(value, x, outboard))
    return _inserted(x, outboard, np.concatenate(more))


def _crossings(function: Curve, x: Floats, outboard: NDArray[np.bool_]) -> tuple[Floats, Floats]:
    """Where the function passes zero inside a stretch: the last stations found before and after it, (k,) each."""
    value = function(x, outboard)
    start = np.flatnonzero((x[:-1] < x[1:]) & (value[:-1] * value[1:] < 0))
    low, high, sign = x[start], x[start + 1], np.sign(value[start])
    inside = np.ones(start.size, bool)
    for _ in range(BISECTIONS if start.size else 0):
        middle = 0.5 * (low + high)
        before = sign * function(middle, inside) > 0
        low, high = np.where(before, middle, low), np.where(before, high, middle)
    return low, high


def _with_peaks(sample: Sampler, x: Floats, outboard: NDArray[np.bool_]) -> tuple[Floats, NDArray[np.bool_]]:
    """Add the peaks, between stations, of band use, of the local error and of the shear error."""
    more: list[Floats] = []
    for quantity in QUANTITIES:
        measures: list[Curve] = [lambda s, o, q=quantity: sample.local(q, s, o)]  # type: ignore[misc]
        if sample.bands[quantity].is_judged:
            measures.append(lambda s, o, q=quantity: sample.use(q, s, o))  # type: ignore[misc]
        if quantity == "shear":
            measures.append(lambda s, o: np.abs(sample.error("shear", s, o)))
        more.extend(_zoomed(measure, x, outboard) for measure in measures)
    return _inserted(x, outboard, np.concatenate(more))


def _zoomed(measure: Curve, x: Floats, outboard: NDArray[np.bool_]) -> Floats:
    """Where the measure peaks between stations, (k,): the highest few, each found by sampling ever closer."""
    value = measure(x, outboard)
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
        value = measure(points.ravel(), np.ones(points.size, bool)).reshape(points.shape)
        top = np.clip(np.argmax(value, axis=0), 1, ZOOM_POINTS - 2)
        columns = np.arange(peak.size)
        low, best, high = points[top - 1, columns], points[top, columns], points[top + 1, columns]
    return best
