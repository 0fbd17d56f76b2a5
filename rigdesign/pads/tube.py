"""The target as the pads must follow it: a tube around the shear and the moment of the pads alone.

A rig differs from its target by E = rig − target.  Gravity and, as long as the pads keep the target's sum and first
moment, the reactions drop out of E, so it is enough to compare the pads with the net target, both counted from the
outboard end alone:

    P(x) = Σ F_i (x_i − x)  over x_i > x        against  G(x) = ∫ (s − x) dF(s)  over s > x.

Where the jack stands off the resultant the first moment differs by D = Σ F_i x_i − G's.  A cantilever then shows D
in E itself; two supports answer with reactions, and E gains D times the functions `moment_unit` and `shear_unit`.

Everything is multiplied by the sign of the target, so that the pads' forces are positive.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity
from rigdesign.target.bands import bands
from rigdesign.target.curve import Floats, Side
from rigdesign.target.internal import points_beyond, reactions
from rigdesign.target.model import Target

# A width that nothing exceeds, as a multiple of the peak: keeps infinities out of interpolation and programmes.
# Of so many stations where the target breaks the rest is left out: a table of a million rows must not take minutes.
MOST_BREAKS = 2000
UNBOUNDED = 1e9
# What a tube holds: on a surface there is torsion besides, which no line of pads can answer for.
TUBE_QUANTITIES: tuple[Quantity, Quantity] = ("moment", "shear")
# Most numbers in one block of a batched evaluation; keeps a batch below about 100 MB.
BLOCK = 4_000_000


class Widths(NamedTuple):
    """How far an error may go below and above zero, (m,) each, positive."""

    below: Floats
    above: Floats


@dataclass(frozen=True)
class Tube:
    """Net target and bands at stations `x` (m,), sorted; a jump stands twice, inboard (`outboard` False) first.

    `moment` [N·m] and `shear` [N] are G and its slope −G' of the net target; the widths are those of the bands at
    band use 1.  `total` [N] is the pads' sum (positive), `first_moment` [N·m] the target's own, `jack_x` [m] where
    the jack stands, so that Σ F_i x_i = total · jack_x.
    """

    sign: int
    total: float
    first_moment: float
    jack_x: float
    x: Floats
    outboard: NDArray[np.bool_]
    moment: Floats
    moment_width: Widths
    moment_unit: Floats
    shear: Floats
    shear_width: Widths
    shear_unit: Floats
    is_judged: tuple[bool, bool]

    @property
    def moment_below(self) -> Floats:
        """Width of the moment band below zero (m,) [N·m]."""
        return self.moment_width.below

    @property
    def moment_above(self) -> Floats:
        """Width of the moment band above zero (m,) [N·m]."""
        return self.moment_width.above

    @property
    def shear_below(self) -> Floats:
        """Width of the shear band below zero (m,) [N]."""
        return self.shear_width.below

    @property
    def shear_above(self) -> Floats:
        """Width of the shear band above zero (m,) [N]."""
        return self.shear_width.above

    @property
    def displacement(self) -> float:
        """First moment that a jack off the resultant adds, D [N·m]."""
        return self.total * self.jack_x - self.first_moment

    @property
    def moment_wanted(self) -> Floats:
        """What P(x) should be (m,): the net target less what reactions answer to the displaced jack."""
        return self.moment - self.displacement * self.moment_unit

    @property
    def shear_wanted(self) -> Floats:
        """What the pads' own shear should be (m,)."""
        return self.shear - self.displacement * self.shear_unit

    def with_stations(self, x: Floats) -> Tube:
        """The tube with stations x (k,) [m] more, interpolated; they must not be stations already."""
        order = np.argsort(np.concatenate([self.x, x]), kind="stable")

        def grown(values: Floats) -> Floats:
            return np.concatenate([values, np.interp(x, self.x, values)])[order]

        return replace(
            self,
            x=np.concatenate([self.x, x])[order],
            outboard=np.concatenate([self.outboard, np.ones(x.size, bool)])[order],
            moment=grown(self.moment),
            moment_width=Widths(*map(grown, self.moment_width)),
            moment_unit=grown(self.moment_unit),
            shear=grown(self.shear),
            shear_width=Widths(*map(grown, self.shear_width)),
            shear_unit=grown(self.shear_unit),
        )

    def use(self, pad_x: Floats, force: Floats) -> Floats:
        """Return the largest error over its band of rigs with pads at `pad_x` (..., n) pulling `force` (..., n) > 0.

        Judged at every station and, both sides, at every pad; the result has the leading shape (...).
        """
        lead = pad_x.shape[:-1]
        flat_x = pad_x.reshape(-1, pad_x.shape[-1])
        flat_force = np.broadcast_to(force, pad_x.shape).reshape(flat_x.shape)
        rows = max(1, BLOCK // (flat_x.shape[1] * (self.x.size + flat_x.shape[1])))
        parts = [
            self._use_block(flat_x[start : start + rows], flat_force[start : start + rows])
            for start in range(0, len(flat_x), rows)
        ]
        return np.concatenate(parts).reshape(lead) if parts else np.zeros(lead)

    def _use_block(self, pad_x: Floats, force: Floats) -> Floats:
        moved = (force * pad_x).sum(axis=1) - self.first_moment
        use = np.zeros(len(pad_x))
        distance = pad_x[:, None, :] - self.x[None, :, None]
        own = pad_x[:, None, :] - pad_x[:, :, None]
        if self.is_judged[0]:
            path = np.einsum("kmn,kn->km", np.maximum(distance, 0.0), force)
            error = path - self.moment + moved[:, None] * self.moment_unit
            use = np.maximum(use, _largest(error, *self.moment_width))
            path = np.einsum("kmn,kn->km", np.maximum(own, 0.0), force)
            for outboard in (False, True):
                value, below, above, unit = self._moment_at(pad_x, outboard)
                use = np.maximum(use, _largest(path - value + moved[:, None] * unit, below, above))
        if self.is_judged[1]:
            counts = np.where(self.outboard[None, :, None], distance > 0, distance >= 0)
            error = np.einsum("kmn,kn->km", counts, force) - self.shear + moved[:, None] * self.shear_unit
            use = np.maximum(use, _largest(error, *self.shear_width))
            for outboard in (False, True):
                value, below, above, unit = self._shear_at(pad_x, outboard)
                beyond = np.einsum("kmn,kn->km", own > 0 if outboard else own >= 0, force)
                use = np.maximum(use, _largest(beyond - value + moved[:, None] * unit, below, above))
        return use

    def _moment_at(self, x: Floats, outboard: bool) -> tuple[Floats, ...]:
        """Moment, widths below and above, and unit function at stations x of any shape, on one side of jumps."""
        rows = (self.moment, *self.moment_width, self.moment_unit)
        return tuple(self._interpolated(row, x, outboard) for row in rows)

    def _shear_at(self, x: Floats, outboard: bool) -> tuple[Floats, ...]:
        """Shear, widths below and above, and unit function at stations x of any shape, on one side of jumps."""
        rows = (self.shear, *self.shear_width, self.shear_unit)
        return tuple(self._interpolated(row, x, outboard) for row in rows)

    def _interpolated(self, row: Floats, x: Floats, outboard: bool) -> Floats:
        # of two stations at one x, interpolation takes the last: the outboard side, or turned round the inboard one
        if outboard:
            return np.interp(x, self.x, row)
        return np.interp(-x, -self.x[::-1], row[::-1])


def _largest(error: Floats, below: Floats, above: Floats) -> Floats:
    return np.asarray(np.max(np.where(error < 0, -error / below, error / above), axis=1))


def build_tube(target: Target, jack_x: float, count: int, per_pad: int = 40, extra: Floats | None = None) -> Tube:
    """Return the tube of `target` for `count` pads hung on a jack at `jack_x` [m].

    Stations: `per_pad` a pad, half of them even along the span and half even in ∫√|w| dx, as the pads of a good rig
    are, with every jump, support, band edge and `extra` station (k,) [m].
    """
    specimen = target.brief.specimen
    sign = 1 if target.resultant >= 0 else -1
    x, outboard = _stations(target, max(per_pad * count, 600), extra)
    judged = bands(target)
    widths = {}
    for quantity in TUBE_QUANTITIES:
        band = judged[quantity]
        inboard_widths, outboard_widths = band.widths(x, "inboard"), band.widths(x, "outboard")
        below, above = (
            np.minimum(np.where(outboard, o, i), UNBOUNDED * band.peak)
            for o, i in zip(outboard_widths, inboard_widths, strict=True)
        )
        widths[quantity] = Widths(below, above) if sign > 0 else Widths(above, below)
    shear = np.where(outboard, target.net.force_beyond(x, "outboard"), target.net.force_beyond(x, "inboard"))
    shear_unit, moment_unit = np.zeros(x.shape), np.zeros(x.shape)
    if specimen.supports:
        at, force = reactions(specimen, 0.0, 1.0)
        sides: tuple[Side, Side] = ("inboard", "outboard")
        inboard, outboard_side = (points_beyond(x, at, force, side) for side in sides)
        shear_unit, moment_unit = np.where(outboard, outboard_side[0], inboard[0]), inboard[1]
    return Tube(
        sign=sign,
        total=sign * target.net.total,
        first_moment=sign * target.net.first_moment,
        jack_x=jack_x,
        x=x,
        outboard=outboard,
        moment=sign * target.net.moment_beyond(x),
        moment_width=widths["moment"],
        moment_unit=moment_unit,
        shear=sign * shear,
        shear_width=widths["shear"],
        shear_unit=shear_unit,
        is_judged=(judged["moment"].is_judged, judged["shear"].is_judged),
    )


def _breaks(target: Target) -> Floats:
    """Stations (k,) [m] where the target's curves break; of very many, those with the largest steps of the shear.

    A station left out takes a constraint away: what is proven over the others stands, and a table so fine has its
    other rows close to stations that are looked at.
    """
    x = np.union1d(target.net.breaks, target.total.breaks)
    if x.size <= MOST_BREAKS:
        return x
    step = np.abs(target.net.force_beyond(x, "inboard") - target.net.force_beyond(x, "outboard"))
    # steps that differ by rounding alone count as equal, so that twice the load keeps the very same stations
    rank = np.round(step / (step.max() or 1.0), 6)
    largest = np.argsort(-rank, kind="stable")[: MOST_BREAKS // 2]
    even = np.linspace(0, x.size - 1, MOST_BREAKS // 2).astype(int)
    return np.asarray(x[np.union1d(largest, even)])


def _stations(target: Target, count: int, extra: Floats | None) -> tuple[Floats, NDArray[np.bool_]]:
    specimen = target.brief.specimen
    left, right = specimen.left, specimen.right
    even = np.linspace(left, right, count // 2 + 1)
    fine = np.linspace(left, right, 4 * count + 1)
    load = np.abs(target.net.running(fine, "outboard"))
    # of the greatest load, so that twice the load has the very same stations
    root = np.sqrt(load / (load.max() or 1.0))
    grown = np.concatenate([[0.0], np.cumsum((root[1:] + root[:-1]) / 2)])
    by_load = np.interp(np.linspace(0, grown[-1], count // 2 + 1), grown, fine) if grown[-1] > 0 else even
    jumps = [_breaks(target), np.array(specimen.supports, dtype=float)]
    jumps += [band.edges for quantity, band in bands(target).items() if quantity in TUBE_QUANTITIES]
    jump = np.unique(np.concatenate(jumps))
    jump = jump[(jump >= left) & (jump <= right)]
    single = np.concatenate([even, by_load, extra if extra is not None else np.empty(0)])
    single = np.setdiff1d(single[(single >= left) & (single <= right)], jump)
    x = np.concatenate([jump, jump, single])
    outboard = np.concatenate([np.zeros(jump.size, bool), np.ones(jump.size + single.size, bool)])
    order = np.lexsort((outboard, x))
    return x[order], outboard[order]
