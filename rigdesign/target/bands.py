"""The accepted error of V, M and T as numbers along the span, and on a surface of V and M across it.

A band is asked for as a per cent of the peak, of the local value, or as a quantity; here it becomes two widths at
every station: how far the error may go below zero and above.  Errors are rig − target; "under" means that the rig's
magnitude is smaller, so the sides change places where the target is negative.  Where |target| is below 5 % of its
peak the wider side holds for both; no width is below 0.05 % of the peak, and none on torsion below the resultant times
1 % of the outline's mean width.  Where nothing is asked the width is infinite.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Acceptance, BandRule, Quantity, Region
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import ACROSS
from rigdesign.target.model import Target
from rigdesign.target.peaks import crossings
from rigdesign.target.plan_stations import smooth_stretches
from rigdesign.words import BAND_FLOOR, SMALL_TARGET, TORSION_ARM


@dataclass(frozen=True)
class Band:
    """Band of one quantity.  `peak` is the largest |target| [N or N·m]; `value(x, side)` gives the target (n,).

    `stretches` (k,) [m] are the ends of the specimen and, between them, the stations where the target's curve jumps or
    kinks; across the span they are places y.  A region that reaches an end of the specimen holds on both sides of it.
    `least` is the least width [N or N·m].
    """

    quantity: Quantity
    peak: float
    acceptance: Acceptance
    value: Callable[[Floats, Side], Floats]
    stretches: Floats
    least: float

    @property
    def is_judged(self) -> bool:
        """Whether anything at all is asked of this quantity."""
        rules = [*self.acceptance.rules, *(r for region in self.acceptance.regions for r in region.rules)]
        return any(rule.quantity == self.quantity for rule in rules)

    @cached_property
    def edges(self) -> Floats:
        """Stations (k,) at which the band may jump: the ends of the regions that name this quantity, and, where under
        and over differ, the places where |target| passes 5 % of its peak.
        """
        named = [region for region in self.acceptance.regions if self._names(region)]
        ends = np.array([end for region in named for end in (region.start_x, region.end_x)], dtype=float)
        if not self._sides_differ:
            return np.unique(ends)
        level = SMALL_TARGET * self.peak
        above = crossings(lambda x, side: self.value(x, side) - level, self.stretches)
        below = crossings(lambda x, side: self.value(x, side) + level, self.stretches)
        return np.unique(np.concatenate([ends, above, below]))

    @property
    def _sides_differ(self) -> bool:
        for rules in (self.acceptance.rules, *(region.rules for region in self.acceptance.regions)):
            asked = [(r.side, r.amount, r.absolute, r.of) for r in rules if r.quantity == self.quantity]
            if {a[1:] for a in asked if a[0] == "under"} != {a[1:] for a in asked if a[0] == "over"}:
                return True
        return False

    def _names(self, region: Region) -> bool:
        return any(rule.quantity == self.quantity for rule in region.rules)

    def widths(self, x: Floats, side: Side) -> tuple[Floats, Floats]:
        """How far the error may go below and above zero at stations x (n,): two arrays (n,), positive, maybe infinite.

        At the end of a region `side` tells which stretch the station counts to.
        """
        target = self.value(x, side)
        under, over = self.under_over(x, side)
        negative = target < 0
        below, above = np.where(negative, over, under), np.where(negative, under, over)
        small = np.abs(target) < SMALL_TARGET * self.peak
        wider = np.maximum(below, above)
        below, above = np.where(small, wider, below), np.where(small, wider, above)
        return np.maximum(below, self.least), np.maximum(above, self.least)

    def under_over(self, x: Floats, side: Side) -> tuple[Floats, Floats]:
        """The widths asked for, under and over, before the rules on small targets and the floor: (n,) each."""
        local = np.abs(self.value(x, side))
        width = {"under": np.full(x.shape, np.inf), "over": np.full(x.shape, np.inf)}
        for rule in self.acceptance.rules:
            if rule.quantity == self.quantity:
                width[rule.side] = self._amount(rule, local)
        for region in self.acceptance.regions:
            inside = self._inside(region, x, side)
            for rule in region.rules:
                if rule.quantity == self.quantity:
                    width[rule.side] = np.where(inside, self._amount(rule, local), width[rule.side])
        return width["under"], width["over"]

    def _amount(self, rule: BandRule, local: Floats) -> Floats:
        if rule.absolute:
            return np.full(local.shape, rule.amount)
        return rule.amount * (np.full(local.shape, self.peak) if rule.of == "peak" else local)

    def _inside(self, region: Region, x: Floats, side: Side) -> NDArray[np.bool_]:
        start = -np.inf if region.start_x <= self.stretches[0] else region.start_x
        end = np.inf if region.end_x >= self.stretches[-1] else region.end_x
        if side == "inboard":
            return (x > start) & (x <= end)
        return (x >= start) & (x < end)


def bands(target: Target) -> dict[Quantity, Band]:
    """Return the bands of the target's moment and shear and, on a surface, of its torsion, and of both across."""
    quantities: tuple[Quantity, ...] = ("moment", "shear")
    if target.brief.specimen.is_surface:
        quantities = ("moment", "shear", "torsion", *ACROSS)
    return {quantity: _band(target, quantity) for quantity in quantities}


def _band(target: Target, quantity: Quantity) -> Band:
    def value(at: Floats, side: Side) -> Floats:
        return target.value(quantity, at, side)

    specimen, peak = target.brief.specimen, target.peaks[quantity].value
    least = BAND_FLOOR * peak
    if quantity == "torsion":
        least = max(least, torsion_least(target))
    ends = smooth_stretches(target.total_plan, specimen, quantity)
    return Band(quantity, peak, target.brief.acceptance, value, ends, least)


def torsion_least(target: Target) -> float:
    """Return the least width of a torsion band that follows from the outline [N·m]; 0 on a line rig."""
    return abs(target.resultant) * TORSION_ARM * target.brief.specimen.mean_width
