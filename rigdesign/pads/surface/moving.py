"""Errors of pads that move: what they change by as forces and places change.

Rows are of two kinds.  Those at fixed stations see a place only in what its force brings.  Those at the pads' own
stations, on both sides, move with their pads: there shear and torsion jump, and there the error also changes by what
the curves change along the span.  Between them the fixed rows find where errors turn, and an error that turns does not
mind where it is looked at.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from rigdesign.pads.surface.error_rows import SIDES, Block, block_at, error_rows
from rigdesign.target.bands import Band, bands
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import (
    ACROSS,
    counts,
    cuts_at,
    reaction_loads,
    reactions_in_plan,
    responses,
    stretch_directions,
)
from rigdesign.target.model import Target
from rigdesign.target.plan_load import loads_at

NEAR = 1e-8
"""Of the span: by so much stations are moved to see how an error changes along it."""
TOLD_APART = 1e-6
"""Of the span: pads keep at least so far apart, so that each of their jumps is seen on its own."""
CLOSE = 1.5
"""Pads whose stations are nearer than so many times what keeps them apart may change places."""
STEPS = ("shear", "torsion", "shear across")
"""Quantities that jump at a pad."""

NOWHERE = np.empty(0)


class Linear(NamedTuple):
    """Error over band of rows (m,) as `use` + `by_force` · df + `by_x` · dx + `by_y` · dy; which quantity each is of.

    For forces in N and moves in m; the three matrices are (m, n).
    """

    use: Floats
    by_force: Floats
    by_x: Floats
    by_y: Floats
    quantity: NDArray[np.int_]


class _Tied(NamedTuple):
    """Stations (k,) [m] that move with pads `pad` (k,): by `by_x`, `by_y` (k,) per metre of theirs."""

    at: Floats
    pad: NDArray[np.intp]
    by_x: Floats
    by_y: Floats

    def where(self, kept: NDArray[np.bool_]) -> _Tied:
        """Some of them."""
        return _Tied(self.at[kept], self.pad[kept], self.by_x[kept], self.by_y[kept])


@dataclass(frozen=True)
class Errors:
    """Errors over their bands, for any places, looked at from `even` fixed stations and from the pads' own.

    Pads to both sides of the axis can hide their jumps of torsion from one another where they share a station.  What
    shifts a pad by a little lays them bare, so pads that move keep `apart` [m] along the span where torsion is judged.
    """

    target: Target
    even: int
    apart: float = 0.0

    @property
    def sign(self) -> float:
        """Sign of the target."""
        return 1.0 if self.target.resultant >= 0 else -1.0

    @property
    def _span(self) -> float:
        return self.target.brief.specimen.right - self.target.brief.specimen.left

    @cached_property
    def _fixed(self) -> tuple[Block, ...]:
        return error_rows(self.target, NOWHERE, NOWHERE, self.even).blocks

    @cached_property
    def _bands(self) -> list[Band]:
        return [band for band in bands(self.target).values() if band.is_judged]

    @cached_property
    def _quantities(self) -> tuple[str, ...]:
        """Quantities judged, in the order of the rows of `error_rows`."""
        return tuple(dict.fromkeys(block.quantity for block in self._fixed))

    def uses(self, x: Floats, y: Floats, force: Floats) -> Floats:
        """Return the band use of each quantity of pads at x, y (n,) [m] with forces (n,) [N] > 0."""
        found = np.zeros(len(self._quantities))
        for block in [*self._fixed, *(own for own, _ in self._own(x, y))]:
            if block.at.size:
                k = self._quantities.index(block.quantity)
                found[k] = max(found[k], float(self._use(block, x, y, force).max()))
        return found

    @cached_property
    def _along(self) -> tuple[float, float]:
        """The direction in which stations count, from the axis' first point to its last; x for cuts square to x."""
        specimen = self.target.brief.specimen
        if specimen.cut == "square to x":
            return 1.0, 0.0
        axis = specimen.reference_axis
        d_x, d_y = float(axis.x[-1] - axis.x[0]), float(axis.y[-1] - axis.y[0])
        return d_x / float(np.hypot(d_x, d_y)), d_y / float(np.hypot(d_x, d_y))

    @property
    def _counted(self) -> list[tuple[tuple[float, float], float]]:
        """Directions along which something jumps, and how far apart two pads must stand along each [m]."""
        found = []
        if "torsion" in self._quantities:
            found.append((self._along, max(self.apart, TOLD_APART * self._span)))
        elif "shear" in self._quantities:
            found.append((self._along, TOLD_APART * self._span))
        if "shear across" in self._quantities:
            found.append(((0.0, 1.0), TOLD_APART * self._span))
        return found

    def told_apart(self, x: Floats, y: Floats, turned: bool) -> tuple[Floats, Floats]:
        """Return the places x, y (n,) [m] with pads at one station apart; `turned` those at near ones change places."""
        for (a_x, a_y), hair in self._counted:
            count, beside = x * a_x + y * a_y, y * a_x - x * a_y
            step = _spread(count, _order(count, beside, hair, turned), hair) - count
            x, y = x + step * a_x, y + step * a_y
        return x, y

    def are_apart(self, x: Floats, y: Floats) -> bool:
        """Return whether no two pads at x, y (n,) [m] share a station at which torsion jumps, or nearly."""
        return all(
            np.diff(np.sort(x * a_x + y * a_y)).min(initial=np.inf) >= hair * 0.99
            for (a_x, a_y), hair in self._counted[:1]
        )

    def has_near(self, x: Floats, y: Floats) -> bool:
        """Return whether pads at x, y (n,) [m] stand so near one another's stations that they could change places."""
        return any(
            np.diff(np.sort(x * a_x + y * a_y)).min(initial=np.inf) < CLOSE * hair for (a_x, a_y), hair in self._counted
        )

    def orders(self, x: Floats, y: Floats, reach: float) -> tuple[Floats, Floats]:
        """Return rows on moves (k, 2 n) and the least value of each [m]: pads keep their order along the span.

        The errors are linear as long as no two pads pass at what jumps.  For moves of at most `reach` [m].
        """
        n = x.size
        rows, least = [np.empty((0, 2 * n))], [NOWHERE]
        for (a_x, a_y), hair in self._counted:
            count = x * a_x + y * a_y
            rank = np.argsort(count, kind="stable")
            gap = np.diff(count[rank])
            near = np.flatnonzero(gap < hair + 3 * reach)
            own, each = np.zeros((near.size, 2 * n)), np.arange(near.size)
            for pads, sign in ((rank[near + 1], 1.0), (rank[near], -1.0)):
                own[each, pads], own[each, n + pads] = sign * a_x, sign * a_y
            rows.append(own)
            least.append(hair - gap[near])
        return np.concatenate(rows), np.concatenate(least)

    def linear(self, x: Floats, y: Floats, force: Floats, reach: float) -> Linear:
        """Return the rows that tell about moves of at most `reach` [m], both sides of each band.

        Fixed rows of what jumps are left out near pads, whose own rows tell better.
        """
        parts = [self._linear_block(block, None, x, y, force) for block in self._away(x, y, reach)]
        for block, tie in self._own(x, y):
            if block.at.size:
                parts.append(self._linear_block(block, tie, x, y, force))
        return Linear(*(np.concatenate(list(column)) for column in zip(*parts, strict=True)))

    # -- rows ----------------------------------------------------------------------------------------------------------

    def _own(self, x: Floats, y: Floats) -> list[tuple[Block, _Tied]]:
        """Rows at the pads' own stations."""
        found = []
        for band in self._bands:
            tied = _tied(self.target, band, x, y)
            sides: tuple[Side, ...] = SIDES if band.quantity in STEPS or band.edges.size else SIDES[:1]
            for side in sides:
                block, tie = block_at(self.target, band, side, tied.at, self.sign), tied
                if block.at.size < tied.at.size:
                    below, above = band.widths(tied.at, side)
                    tie = tied.where(np.isfinite(below) | np.isfinite(above))
                found.append((block, tie))
        return found

    def _away(self, x: Floats, y: Floats, reach: float) -> list[Block]:
        """Fixed rows; those of what jumps only where no pad is within reach."""
        found = []
        for block in self._fixed:
            kept = np.ones(block.at.size, bool)
            if block.quantity in STEPS:
                band = next(band for band in self._bands if band.quantity == block.quantity)
                own = _tied(self.target, band, x, y).at
                kept = np.abs(block.at[:, None] - own).min(axis=1, initial=np.inf) > reach
            found.append(Block(block.quantity, block.side, *(c[kept] for c in _columns(block))))
        return [block for block in found if block.at.size]

    def _error(self, block: Block, x: Floats, y: Floats, force: Floats) -> Floats:
        matrix = responses(self.target.brief.specimen, block.quantity, block.at, block.side, x, y)
        return np.asarray((matrix * force).sum(axis=1) - block.wanted)

    def _use(self, block: Block, x: Floats, y: Floats, force: Floats) -> Floats:
        error = self._error(block, x, y, force)
        return np.asarray(np.maximum(error / block.above, -error / block.below))

    def _linear_block(self, block: Block, tie: _Tied | None, x: Floats, y: Floats, force: Floats) -> Linear:
        specimen = self.target.brief.specimen
        matrix = responses(specimen, block.quantity, block.at, block.side, x, y)
        error = (matrix * force).sum(axis=1) - block.wanted
        by_x, by_y = (part * force for part in self._slopes(block, x, y))
        if tie is not None:
            along = self._by_station(block, x, y, force, error)
            each = np.arange(block.at.size)
            by_x[each, tie.pad] += along * tie.by_x
            by_y[each, tie.pad] += along * tie.by_y
        quantity = np.full(2 * error.size, self._quantities.index(block.quantity))
        over, under = 1.0 / block.above, -1.0 / block.below
        use = np.concatenate([error * over, error * under])
        by_force, by_x, by_y = (
            np.concatenate([part * over[:, None], part * under[:, None]]) for part in (matrix, by_x, by_y)
        )
        return Linear(use, by_force, by_x, by_y, quantity)

    def _by_station(self, block: Block, x: Floats, y: Floats, force: Floats, error: Floats) -> Floats:
        """Slopes of the errors along the span on the rows' side of their stations, pads where they are."""
        specimen, at = self.target.brief.specimen, block.at
        step = NEAR * self._span * (-1.0 if block.side == "inboard" else 1.0)
        matrix = responses(specimen, block.quantity, at + step, block.side, x, y)
        wanted = self.sign * loads_at(self.target.net_plan, specimen, block.quantity, at + step, block.side)
        return np.asarray(((matrix * force).sum(axis=1) - wanted - error) / step)

    def _slopes(self, block: Block, x: Floats, y: Floats) -> tuple[Floats, Floats]:
        """What rows change by as places of unit forces move along x and along y: (m, n) each."""
        specimen, quantity = self.target.brief.specimen, block.quantity
        cuts = cuts_at(specimen, quantity, block.at, block.side)
        beyond, _, _ = counts(specimen, cuts, x, y)
        a_x, a_y = cuts.a_x[:, None], cuts.a_y[:, None]
        if quantity in ("shear", "shear across"):
            by_x, by_y = np.zeros(beyond.shape), np.zeros(beyond.shape)
        elif quantity == "torsion":
            by_x, by_y = -a_y * beyond, a_x * beyond
        else:
            by_x, by_y = a_x * beyond, a_y * beyond
        if not specimen.supports or quantity in ACROSS:
            return by_x, by_y
        answers = (reactions_in_plan(specimen, 0.0, 1.0, 0.0), reactions_in_plan(specimen, 0.0, 0.0, 1.0))
        first, second = (reaction_loads(specimen, quantity, cuts, one)[:, None] for one in answers)
        return by_x + first, by_y + second


def _order(count: Floats, beside: Floats, hair: float, turned: bool) -> NDArray[np.intp]:
    """Order of pads by where they count (n,); those nearer than a hair from outside in, or those that are near turned.

    Taken from outside in, one side and the other by turns, the torsion of pads at one station stays small between them.
    """
    rank = np.argsort(count, kind="stable")
    ends = np.flatnonzero(np.diff(count[rank]) >= (CLOSE if turned else 0.5) * hair) + 1
    groups = []
    for group in np.split(rank, ends):
        if turned:
            groups.append(group[::-1])
            continue
        side = group[np.argsort(beside[group], kind="stable")]
        both = np.empty_like(side)
        both[0::2], both[1::2] = side[: (side.size + 1) // 2], side[(side.size + 1) // 2 :][::-1]
        groups.append(both)
    return np.concatenate(groups)


def _spread(value: Floats, order: NDArray[np.intp], hair: float) -> Floats:
    """Values (n,) with successive ones, in an order, at least a hair apart: the middle of a group stays."""
    wanted = np.maximum.accumulate(value[order])
    step = hair * np.arange(value.size)
    up = np.maximum.accumulate(wanted - step) + step
    down = np.minimum.accumulate((wanted - step)[::-1])[::-1] + step
    result = np.empty(value.size)
    result[order] = (up + down) / 2
    return result


def _columns(block: Block) -> tuple[Floats, Floats, Floats, Floats]:
    return block.at, block.wanted, block.below, block.above


def _tied(target: Target, band: Band, x: Floats, y: Floats) -> _Tied:
    """Stations of the cuts through the pads, those on the span, and how they move with their pads."""
    specimen = target.brief.specimen
    every = np.arange(x.size)
    low, high = float(band.stretches[0]), float(band.stretches[-1])
    if band.quantity in ACROSS:
        found = _Tied(y, every, np.zeros(x.size), np.ones(x.size))
    elif specimen.cut == "square to x":
        found = _Tied(x, every, np.ones(x.size), np.zeros(x.size))
    else:
        axis = specimen.reference_axis
        a_x, a_y = stretch_directions(specimen)
        along = (x[:, None] - axis.x[:-1]) * a_x + (y[:, None] - axis.y[:-1]) * a_y
        station = axis.x[:-1] + along * a_x
        inside = (station >= axis.x[:-1]) & (station <= axis.x[1:])
        pad, row = np.nonzero(inside)
        found = _Tied(station[pad, row], pad, a_x[row] ** 2, a_x[row] * a_y[row])
    return found.where((found.at > low) & (found.at < high))
