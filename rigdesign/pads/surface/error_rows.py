"""Errors of pads in plan as linear functions of their forces.

At a station, on one side, a quantity's error is its row of `matrix` times the forces less what is wanted of the pads.
Reactions, and what gravity brings, are inside: both are linear.  Everything is multiplied by the sign of the target, so
that the pads' forces are positive.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity, Specimen
from rigdesign.target.bands import Band, bands
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import jump_stations, responses
from rigdesign.target.model import Target
from rigdesign.target.peaks import stretches
from rigdesign.target.plan_load import loads_at
from rigdesign.words import DEFAULT_MOMENT_BAND

EVEN = 160
"""Stations along the span, besides the jumps, at which errors are looked at, as a rule."""

MOST_BREAKS = 400
"""Of so many stations at which the target's curves break the rest is left out: the even ones stand close to them."""

SIDES: tuple[Side, Side] = ("inboard", "outboard")


@dataclass(frozen=True)
class Block:
    """One quantity on one side at stations `at`: what is wanted of the pads, and widths of the band; all (m,)."""

    quantity: Quantity
    side: Side
    at: Floats
    wanted: Floats
    below: Floats
    above: Floats


@dataclass(frozen=True)
class ErrorRows:
    """Everything that has a band, at stations among which the pads of some places have all their jumps."""

    specimen: Specimen
    blocks: tuple[Block, ...]

    def matrix(self, x: Floats, y: Floats) -> Floats:
        """Return what unit forces at places x, y (n,) [m] bring to each row, (m, n)."""
        parts = [responses(self.specimen, b.quantity, b.at, b.side, x, y) for b in self.blocks]
        return np.concatenate(parts) if parts else np.empty((0, x.size))

    @cached_property
    def wanted(self) -> Floats:
        """What the pads should bring to each row, (m,)."""
        return np.concatenate([np.empty(0), *(block.wanted for block in self.blocks)])

    @cached_property
    def below(self) -> Floats:
        """How far an error may go below zero at band use 1, (m,)."""
        return np.concatenate([np.empty(0), *(block.below for block in self.blocks)])

    @cached_property
    def above(self) -> Floats:
        """How far an error may go above zero at band use 1, (m,)."""
        return np.concatenate([np.empty(0), *(block.above for block in self.blocks)])

    @cached_property
    def quantity(self) -> NDArray[np.int_]:
        """Which of `quantities` each row is of, (m,)."""
        index = [np.full(block.at.size, self.quantities.index(block.quantity)) for block in self.blocks]
        return np.concatenate([np.empty(0, dtype=int), *index])

    @cached_property
    def quantities(self) -> tuple[Quantity, ...]:
        """The quantities that are judged, in order."""
        return tuple(dict.fromkeys(block.quantity for block in self.blocks))

    def uses(self, x: Floats, y: Floats, force: Floats) -> Floats:
        """Return each row's error over its band, (m,), for pads at x, y (n,) [m] with forces (n,) [N] > 0."""
        error = (self.matrix(x, y) * force).sum(axis=1) - self.wanted
        return np.asarray(np.maximum(error / self.above, -error / self.below))

    def use(self, x: Floats, y: Floats, force: Floats) -> float:
        """Return the largest error over its band of pads at x, y (n,) [m] with forces (n,) [N] > 0."""
        return float(self.uses(x, y, force).max(initial=0.0))


def error_rows(target: Target, x: Floats, y: Floats, even: int = EVEN) -> ErrorRows:
    """Return the rows at which pads anywhere among the places x, y (n,) [m] are to be judged.

    Shear and torsion are looked at on both sides of every place where they can jump, everything at `even` stations,
    at the ends of bands and where the target breaks.  Without any band the moment is judged, in equal measure
    everywhere.
    """
    specimen, sign = target.brief.specimen, 1.0 if target.resultant >= 0 else -1.0
    every = bands(target)
    judged = [band for band in every.values() if band.is_judged]
    blocks: list[Block] = []
    for band in judged:
        for side, at in zip(SIDES, _stations(target, band, x, y, even), strict=True):
            blocks.append(block_at(target, band, side, at, sign))
    if not judged:
        blocks.append(_without_bands(target, every["moment"], x, y, even, sign))
    return ErrorRows(specimen, tuple(blocks))


def band_use(target: Target, x: Floats, y: Floats, force: Floats, even: int = EVEN) -> float:
    """Return the largest error over its band of pads at x, y (n,) [m] with forces (n,) [N] > 0."""
    return error_rows(target, x, y, even).use(x, y, force)


def _stations(target: Target, band: Band, x: Floats, y: Floats, even: int) -> tuple[Floats, Floats]:
    """Stations to be looked at on the inboard and on the outboard side."""
    specimen, quantity = target.brief.specimen, band.quantity
    low, high = float(band.stretches[0]), float(band.stretches[-1])
    breaks = band.stretches
    if breaks.size > MOST_BREAKS:
        breaks = breaks[np.unique(np.linspace(0, breaks.size - 1, MOST_BREAKS).astype(int))]
    jumps = jump_stations(specimen, quantity, x, y)
    both = stretches(np.concatenate([jumps, band.edges, breaks]), low, high, np.empty(0))
    smooth = np.setdiff1d(np.linspace(low, high, even), both)
    steps = quantity in ("shear", "torsion", "shear across") or specimen.cut == "square to axis"
    local = bool(band.edges.size) or any(rule.of == "local" for rule in target.brief.acceptance.rules)
    if steps or local:
        return both, np.union1d(both, smooth)
    return np.union1d(both, smooth), np.empty(0)


def block_at(target: Target, band: Band, side: Side, at: Floats, sign: float) -> Block:
    """Return a quantity's rows at those of the stations `at` (n,) [m] where it has a band; `sign` is the target's."""
    below, above = band.widths(at, side)
    asked = np.isfinite(below) | np.isfinite(above)
    at, below, above = at[asked], below[asked], above[asked]
    # keeps infinities out of programmes: nothing exceeds it; a target of nothing still has a least width
    most = 1e9 * max(band.peak, band.least, 1e-300)
    below, above = np.minimum(below, most), np.minimum(above, most)
    wanted = sign * loads_at(target.net_plan, target.brief.specimen, band.quantity, at, side)
    return Block(band.quantity, side, at, wanted, *((below, above) if sign > 0 else (above, below)))


def _without_bands(target: Target, band: Band, x: Floats, y: Floats, even: int, sign: float) -> Block:
    at = np.union1d(*_stations(target, band, x, y, even))
    wanted = sign * loads_at(target.net_plan, target.brief.specimen, "moment", at, "outboard")
    width = np.full(at.size, DEFAULT_MOMENT_BAND * target.moment_peak)
    return Block("moment", "outboard", at, wanted, width, width)
