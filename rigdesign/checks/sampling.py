"""Target, rig and bands at any station and side.

rig = what the pads bring + the supports' answer to the pads + what gravity brings
"""

from __future__ import annotations

from collections.abc import Callable
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
    """Target, rig and bands, to be asked at any stations."""

    target: Target
    rig: RigLoads
    bands: dict[Quantity, Band]

    def rows(self, x: Floats, outboard: NDArray[np.bool_]) -> Curves:
        """Return everything at stations x (n,), on the sides `outboard` (n,)."""
        widths = {q: self._widths(q, x, outboard) for q in QUANTITIES}
        return Curves(
            x=x,
            outboard=outboard,
            target={"shear": by_side(self.target.shear, x, outboard), "moment": self.target.moment(x)},
            rig={"shear": by_side(self.rig.shear, x, outboard), "moment": self.rig.moment(x)},
            below={q: widths[q][0] for q in QUANTITIES},
            above={q: widths[q][1] for q in QUANTITIES},
        )

    def _widths(self, quantity: Quantity, x: Floats, outboard: NDArray[np.bool_]) -> tuple[Floats, Floats]:
        below, above = np.full(x.shape, np.inf), np.full(x.shape, np.inf)
        if self.bands[quantity].is_judged:
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


def local_errors(rows: Curves, quantity: Quantity, peak: float) -> Floats:
    """Return |error| over the local |target|, (n_stations,), zero where that is below 5 % of `peak` [N or N·m]."""
    size = np.abs(rows.target[quantity])
    counts = size >= SMALL_TARGET * peak
    return np.where(counts, np.abs(rows.error(quantity)) / np.where(counts, size, 1.0), 0.0)
