"""The pads and the limits of the pieces, scaled so that numbers are near one whatever the rig's size.

Lengths count in `extent`, the larger side of the rectangle around the pads, and forces as shares of the jack's: twice
the load or other units must not decide a tie.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import LeverRules
from rigdesign.levers.weighing import StockLine
from rigdesign.pads.model import PadPlan
from rigdesign.target.curve import Floats

LIMIT_SLACK = 1e-9
"""A piece that misses a limit by less than this fraction keeps it: the sums that it comes from are rounded."""

FLATTEST = 0.05
"""A plate's least height over its longest side: points nearer to one line hold nothing across it."""


@dataclass(frozen=True)
class Field:
    """Pads to be joined: `x`, `y` in extents from the first pad, `share`, all (n_pads,); `extent` [m], `total` [N]."""

    x: Floats
    y: Floats
    share: Floats
    extent: float
    total: float

    @property
    def n_pads(self) -> int:
        """Number of pads."""
        return int(self.x.size)

    @property
    def steel_unit(self) -> float:
        """What a scaled steel estimate of 1 is in N^(2/3)·m^(5/3)."""
        return float(np.cbrt(self.total) ** 2 * self.extent * np.cbrt(self.extent) ** 2)

    @cached_property
    def near(self) -> NDArray[np.int64]:
        """The other pads in order of their distance from each pad, (n_pads, n_pads − 1)."""
        away = np.hypot(self.x[:, None] - self.x, self.y[:, None] - self.y)
        np.fill_diagonal(away, -1.0)
        return np.argsort(away, axis=1, kind="stable")[:, 1:]


def field_of(plan: PadPlan) -> Field:
    """The pads of a plan, scaled."""
    force = np.abs(plan.force)
    extent = float(max(np.ptp(plan.x), np.ptp(plan.y))) or 1.0
    total = float(force.sum())
    return Field((plan.x - plan.x[0]) / extent, (plan.y - plan.y[0]) / extent, force / total, extent, total)


@dataclass(frozen=True)
class Limits:
    """What the pieces must keep, lengths in extents.

    `least` is the length below which an arm is none: a drill step.  `ratio` is that of levers alone; `shortest` holds
    for arms of levers and for the distances of a plate's points from its pivot, `longest` for the largest distance
    between two outer holes.  `stock` is what pieces weigh, scaled as they are; None: the steel estimate.
    With `links`, links of pads keep clear of the pieces in all tiers that they run through.
    """

    ratio: float
    shortest: float
    longest: float
    tiers: int | None
    least: float
    plates: bool
    pair: str
    clearance: float
    stock: StockLine | None = None
    links: bool = False

    def steel(self, load: Floats, r: Floats) -> Floats:
        """Steel of a piece from its pivot to an end at a distance r that bears `load`, any shape."""
        if self.stock is not None:
            return self.stock.side_mass(load * r, r)
        return np.asarray(np.cbrt((load * r) ** 2) * r)

    def plate_steel(self, load: Floats, r: Floats, x: Floats, y: Floats) -> Floats:
        """Steel of whole plates with `load` at points x, y, at distances r from the pivot, (..., 3) each; (...)."""
        if self.stock is None:
            return np.asarray(self.steel(load, r).sum(axis=-1))
        to_x, to_y = np.roll(x, -1, axis=-1) - x, np.roll(y, -1, axis=-1) - y
        area = np.abs(to_x[..., 0] * to_y[..., 1] - to_x[..., 1] * to_y[..., 0]) / 2
        return self.stock.plate_mass(load * r, r, area, np.hypot(to_x, to_y).sum(axis=-1))

    def without(self, key: str) -> Limits:
        """The same with one limit lifted, by its key in the brief."""
        lifted = {
            "ratio_limit": replace(self, ratio=np.inf),
            "shortest_arm": replace(self, shortest=0.0),
            "longest": replace(self, longest=np.inf),
            "tiers": replace(self, tiers=None),
            "drill_step": replace(self, least=0.0),
        }
        return lifted[key]


def limits_of(rules: LeverRules, extent: float) -> Limits:
    """The limits of a brief for pads of this extent [m]."""
    slack = 1.0 + LIMIT_SLACK
    return Limits(
        rules.ratio_limit * slack,
        rules.shortest_arm / extent / slack,
        rules.longest / extent * slack,
        rules.tiers,
        rules.drill_step / extent / slack,
        rules.plates,
        rules.pair,
        rules.clearance / extent / slack,
    )


def is_flat(x: Floats, y: Floats) -> NDArray[np.bool_]:
    """Whether triangles with corners x, y (..., 3) are too near to a line for a plate; (...)."""
    side_x, side_y = x - np.roll(x, 1, axis=-1), y - np.roll(y, 1, axis=-1)
    longest_squared = (side_x**2 + side_y**2).max(axis=-1)
    twice_area = np.abs(side_x[..., 1] * side_y[..., 2] - side_x[..., 2] * side_y[..., 1])
    return np.asarray(twice_area < FLATTEST * longest_squared)
