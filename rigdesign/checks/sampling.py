"""Target, rig and bands at any station and side.

rig = what the pads bring + the supports' answer to the pads + what gravity brings
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity, Specimen
from rigdesign.checks.model import Curves
from rigdesign.target import internal
from rigdesign.target.bands import Band
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import ACROSS, ALONG
from rigdesign.target.model import Target
from rigdesign.words import SMALL_TARGET

ON_LINES: tuple[Quantity, ...] = ("shear", "moment")
"""What is cut of a specimen without an outline."""


def along_span(specimen: Specimen) -> tuple[Quantity, ...]:
    """Return the quantities of cuts along the span: torsion too where the specimen is a surface."""
    return ALONG if specimen.is_surface else ON_LINES


def across_span(specimen: Specimen) -> tuple[Quantity, ...]:
    """Return the quantities of cuts square to y: none but on surfaces."""
    return ACROSS if specimen.is_surface else ()


class Loads(Protocol):
    """What acts on the specimen in the rig."""

    def value(self, quantity: Quantity, at: Floats, side: Side) -> Floats:
        """A quantity of the rig [N or N·m] at stations (n,), reactions included."""


@dataclass(frozen=True)
class RigLoads:
    """All that acts on a specimen along a line: pads and the supports' answer to them as point loads, and gravity.

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

    def value(self, quantity: Quantity, at: Floats, side: Side) -> Floats:
        """Shear or moment at stations (n,)."""
        return self.moment(at) if quantity == "moment" else self.shear(at, side)


def rig_loads(target: Target, pad_x: Floats, pad_force: Floats) -> RigLoads:
    """Return what pads of `pad_force` (n_pads,) [N] at `pad_x` (n_pads,) [m] do to a specimen along a line."""
    total, first_moment = float(pad_force.sum()), float((pad_force * pad_x).sum())
    support_x, support_force = internal.reactions(target.brief.specimen, total, first_moment)
    return RigLoads(target, np.concatenate([pad_x, support_x]), np.concatenate([pad_force, support_force]))


@dataclass(frozen=True)
class Sampler:
    """Target, rig and bands of some quantities, to be asked at any stations.

    `jump` (k,) [m] are the stations where one of the quantities or a band may jump, the first and last station among
    them; `own` [m] those of pads and supports; `breaks` (m,) [m] those where a curve may kink.  Cuts at jumps stand
    `near` [m] off them.
    """

    target: Target
    rig: Loads
    bands: dict[Quantity, Band]
    quantities: tuple[Quantity, ...]
    jump: Floats
    own: Floats
    breaks: Floats
    near: float = 0.0

    def rows(self, x: Floats, outboard: NDArray[np.bool_], only: tuple[Quantity, ...] | None = None) -> Curves:
        """Return everything, or some quantities `only`, at stations x (n,), on the sides `outboard` (n,)."""
        wanted = only or self.quantities
        widths = {q: self._widths(q, x, outboard) for q in wanted}
        return Curves(
            x=x,
            outboard=outboard,
            target={q: self._values(self.target, q, x, outboard) for q in wanted},
            rig={q: self._values(self.rig, q, x, outboard) for q in wanted},
            below={q: widths[q][0] for q in wanted},
            above={q: widths[q][1] for q in wanted},
        )

    def _values(self, loads: Loads, quantity: Quantity, x: Floats, outboard: NDArray[np.bool_]) -> Floats:
        if quantity == "moment" and not self.target.brief.specimen.is_surface:
            return loads.value(quantity, x, "outboard")  # along a line no moment jumps
        return by_side(lambda at, side: loads.value(quantity, at, side), x, outboard)

    def _widths(self, quantity: Quantity, x: Floats, outboard: NDArray[np.bool_]) -> tuple[Floats, Floats]:
        below, above = np.full(x.shape, np.inf), np.full(x.shape, np.inf)
        if self.bands[quantity].is_judged:
            for mask, side in _sides(outboard):
                if mask.any():
                    below[mask], above[mask] = self.bands[quantity].widths(x[mask], side)
        return below, above


def jumps(target: Target, at: Floats, judged: Iterable[Band]) -> Floats:
    """Return the stations (k,) where V or a band may jump: pads and supports `at`, point loads, ends of regions."""
    points = [curve.points[0] for curve in (target.total, target.gravity, target.net)]
    edges = [band.edges for band in judged]
    specimen = target.brief.specimen
    ends = np.array([specimen.left, specimen.right])
    every = np.unique(np.concatenate([at, *points, *edges, ends]))
    low, high = min(specimen.left, at.min()), max(specimen.right, at.max())
    return np.asarray(every[(every >= low) & (every <= high)])


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
    counts = (size >= SMALL_TARGET * peak) & (size > 0)
    return np.where(counts, np.abs(rows.error(quantity)) / np.where(counts, size, 1.0), 0.0)
