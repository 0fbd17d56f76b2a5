"""A quick judge of many rigs at once: their errors at the stations that can hold the largest, and nowhere else.

The path of the pads alone, P(x) = Σ F_i (x_i − x) over x_i > x, is a chain of lines, one between each two neighbouring
pads; a line is written y = K − S·x with the load S and the first moment K of what lies outboard.  Its error against
the target is least (most under-test) at the pads and largest in between, where the target's shear equals S; jumps of
target or band are looked at by themselves.  What the quick judge finds is never above what `Tube.use` finds over all
stations, apart from interpolation between them, and on smooth targets equals it.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Literal, NamedTuple

import numpy as np
from numpy.typing import NDArray

from rigdesign.pads.tube import Tube, Widths
from rigdesign.target.curve import Floats
from rigdesign.words import DEFAULT_MOMENT_BAND

Side = Literal["left", "right"]

FRACTIONS = np.array([0.2, 0.4, 0.6, 0.8])
"""Where between two pads the path is looked at beside the tangent if the band varies: it moves the worst place."""


class Lines(NamedTuple):
    """Lines y = K − S·x of any shape: load S [N] and first moment K [N·m] of what lies outboard."""

    load: Floats
    first: Floats

    def value(self, x: Floats) -> Floats:
        """Ordinates at x."""
        return self.first - self.load * x


@dataclass(frozen=True)
class Judge:
    """Target and bands as polynomials between stations `x` (m,).

    `moment` (4, m − 1) holds the coefficients of a cubic in the distance from the station inboard, `moment_widths` and
    `shear_widths` (4, m − 1) those of the straight lines of the widths below and above, (4, 1) where they never vary,
    and `units` (3, m − 1) those of what reactions answer to a unit of first moment.  `tangent_load`, `tangent_x` give
    the station at which the target's shear falls to a load, `fractions` the further places between two pads that are
    looked at, and `jumps` (j,) the stations at which target or band jumps.
    """

    x: Floats
    moment: Floats
    moment_widths: Floats
    shear_widths: Floats
    units: Floats
    tangent_load: Floats
    tangent_x: Floats
    jumps: Floats
    first_moment: float
    ends: tuple[float, float]
    is_judged: tuple[bool, bool]
    has_reactions: bool
    fractions: Floats

    def tangent(self, load: Floats) -> Floats:
        """Station at which the target's shear falls to `load`: there its line errs most to the over side."""
        return np.asarray(np.interp(load, self.tangent_load, self.tangent_x))

    def moment_use(self, x: Floats, y: Floats, moved: Floats | float, side: Side = "right") -> Floats:
        """Error over its band of a path that has the moment y [N·m] at x, any shape.

        `moved` is the first moment that the rig has beyond the target's [N·m]; `side` tells which side of a jump.
        """
        row, t = self._row(x, side)
        c0, c1, c2, c3 = (part[row] for part in self.moment)
        error = y - (c0 + t * (c1 + t * (c2 + t * c3)))
        if self.has_reactions:
            error = error + moved * (self.units[0][row] + t * self.units[1][row])
        return _use(error, *_widths(self.moment_widths, row, t))

    def shear_use(self, x: Floats, outboard: Floats, force: Floats, moved: Floats | float) -> Floats:
        """Error over its band of the shear at pads at x, the larger of both sides.

        `outboard` is the load beyond each pad and `force` its own [N].
        """
        inner = self._shear_use(x, outboard + force, "left", moved)
        return np.asarray(np.maximum(inner, self._shear_use(x, outboard, "right", moved)))

    def _shear_use(self, x: Floats, shear: Floats, side: Side, moved: Floats | float) -> Floats:
        row, t = self._row(x, side)
        c1, c2, c3 = (part[row] for part in self.moment[1:])
        error = shear + c1 + t * (2 * c2 + t * 3 * c3)
        if self.has_reactions:
            error = error + moved * self.units[2][row]
        return _use(error, *_widths(self.shear_widths, row, t))

    def _row(self, x: Floats, side: Side) -> tuple[np.ndarray, Floats]:
        row = np.clip(np.searchsorted(self.x, x, side=side) - 1, 0, self.x.size - 2)
        return row, x - self.x[row]

    def pad_use(self, x: Floats, force: Floats, right: Lines, moved: Floats | float) -> Floats:
        """Largest error over its band at pads at x with `force`, `right` being the line outboard of each."""
        use = np.zeros(np.shape(x))
        if self.is_judged[0]:
            use = self.moment_use(x, right.value(x), moved)
        if self.is_judged[1]:
            use = np.maximum(use, self.shear_use(x, right.load, force, moved))
        return use

    def line_use(self, line: Lines, moved: Floats | float) -> Floats:
        """Error over its band of lines where they come closest to the over side, 0 where they keep below the target."""
        if not self.is_judged[0]:
            return np.zeros(np.shape(line.load))
        x = self.tangent(line.load)
        return self.moment_use(x, line.value(x), moved)

    def use(self, pad_x: Floats, force: Floats) -> Floats:
        """Largest error over its band of rigs with pads at `pad_x` (k, n), `force` (k, n) > 0; (k,)."""
        if np.any(pad_x[:, 1:] < pad_x[:, :-1]):
            order = np.argsort(pad_x, axis=1, kind="stable")
            pad_x, force = np.take_along_axis(pad_x, order, 1), np.take_along_axis(force, order, 1)
        first = force * pad_x
        moved = (first.sum(axis=1) - self.first_moment)[:, None] if self.has_reactions else 0.0
        load_beyond = np.cumsum(force[:, ::-1], axis=1)[:, ::-1]
        first_beyond = np.cumsum(first[:, ::-1], axis=1)[:, ::-1]
        use = self.pad_use(pad_x, force, Lines(load_beyond - force, first_beyond - first), moved).max(axis=1)
        if not self.is_judged[0]:
            return np.asarray(use)
        inner = Lines(load_beyond[:, 1:], first_beyond[:, 1:])
        tangent = np.clip(self.tangent(inner.load), pad_x[:, :-1], pad_x[:, 1:])
        use = np.maximum(use, self.moment_use(tangent, inner.value(tangent), moved).max(axis=1, initial=0.0))
        span = np.diff(pad_x, axis=1)
        for fraction in self.fractions:
            x = pad_x[:, :-1] + fraction * span
            use = np.maximum(use, self.moment_use(x, inner.value(x), moved).max(axis=1, initial=0.0))
        return np.asarray(np.maximum(use, self._use_at_jumps(pad_x, force, moved)))

    def _use_at_jumps(self, pad_x: Floats, force: Floats, moved: Floats | float) -> Floats:
        """Errors at jumps of target or band and at both ends of the specimen, both sides of each."""
        use = np.zeros(len(pad_x))
        for station in (*self.jumps, *self.ends):
            away = pad_x - station
            x = np.full((len(pad_x), 1), station)
            path = np.einsum("kn,kn->k", np.maximum(away, 0.0), force)[:, None]
            sides: tuple[tuple[Side, NDArray[np.bool_]], ...] = (("left", away >= 0), ("right", away > 0))
            for side, beyond in sides:
                use = np.maximum(use, self.moment_use(x, path, moved, side)[:, 0])
                if self.is_judged[1]:
                    shear = np.einsum("kn,kn->k", beyond, force)[:, None]
                    use = np.maximum(use, self._shear_use(x, shear, side, moved)[:, 0])
        return use


def _widths(edges: Floats, row: NDArray[np.intp], t: Floats) -> tuple[Floats, Floats]:
    """Widths below and above at a distance t from the stations of `row`; (1,) where they never vary."""
    below, below_rise, above, above_rise = edges
    if edges.shape[1] == 1:
        return below, above
    return below[row] + t * below_rise[row], above[row] + t * above_rise[row]


def _use(error: Floats, below: Floats, above: Floats) -> Floats:
    return np.asarray(np.maximum(error / above, -error / below))


def _lines(pair: Widths, inner: NDArray[np.intp], h: Floats) -> Floats:
    """Straight lines of the widths below and above between stations, (4, stretches); (4, 1) where they never vary."""
    if all(np.ptp(edge) == 0 for edge in pair):
        return np.array([[pair.below[0]], [0.0], [pair.above[0]], [0.0]])
    return np.stack([part for edge in pair for part in (edge[inner], (edge[inner + 1] - edge[inner]) / h)])


def build_judge(tube: Tube) -> Judge:
    """Make the quick judge of a tube.

    Where the brief asks for no band at all, the moment is judged in equal measure everywhere: the rig is then the one
    of least moment error.
    """
    if not any(tube.is_judged):
        flat = np.full(tube.x.shape, DEFAULT_MOMENT_BAND * np.abs(tube.moment).max())
        tube = replace(tube, is_judged=(True, False), moment_width=Widths(flat, flat))
    keep = np.append(np.diff(tube.x) > 0, False)
    inner = np.flatnonzero(keep)
    outer = inner + 1
    h = tube.x[outer] - tube.x[inner]
    rise, s0, s1 = tube.moment[outer] - tube.moment[inner], -tube.shear[inner], -tube.shear[outer]
    # cubic through both moments with both slopes
    cubic = np.stack([tube.moment[inner], s0, (3 * rise / h - 2 * s0 - s1) / h, (s0 + s1 - 2 * rise / h) / h**2])
    edges = (*tube.moment_width, *tube.shear_width)
    widths = [_lines(pair, inner, h) for pair in (tube.moment_width, tube.shear_width)]
    unit = tube.moment_unit
    units = np.stack([unit[inner], (unit[outer] - unit[inner]) / h, tube.shear_unit[inner]])
    falling = np.minimum.accumulate(tube.shear)[::-1]
    double = np.flatnonzero(np.diff(tube.x) == 0)
    jump = np.zeros(double.size, dtype=bool)
    for values in (tube.shear, *edges):
        jump |= np.abs(values[double + 1] - values[double]) > 1e-9 * np.abs(values).max()
    return Judge(
        x=np.append(tube.x[inner], tube.x[-1]),
        moment=cubic,
        moment_widths=widths[0],
        shear_widths=widths[1],
        units=units,
        tangent_load=falling,
        tangent_x=tube.x[::-1],
        jumps=tube.x[double[jump]],
        first_moment=tube.first_moment,
        ends=(float(tube.x[0]), float(tube.x[-1])),
        is_judged=tube.is_judged,
        has_reactions=bool(np.any(tube.moment_unit)),
        fractions=FRACTIONS if widths[0].shape[1] > 1 else np.empty(0),
    )
