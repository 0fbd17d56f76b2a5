"""Target and rig in plan, and the stations where their curves may jump or kink.

A station is where a cut goes through a place: a pad, a support, a point load.  Pads of one rib are hardly ever on one
cut to the last digit, and between two that are a rounding apart the torsion of one of them alone would look like an
error.  So places that are next to one another are on one cut, and its two sides stand off it a little.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from rigdesign.brief.model import Quantity, Specimen
from rigdesign.checks.sampling import Sampler
from rigdesign.target.bands import Band, bands
from rigdesign.target.curve import Floats, Side
from rigdesign.target.cuts import ACROSS, jump_stations, stretch_directions
from rigdesign.target.model import Target
from rigdesign.target.plan_load import ALONG_X, ALONG_Y, Direction, PlanLoad, loads_at
from rigdesign.target.plan_points import PlanPoints
from rigdesign.target.plan_stations import ends_of, smooth_stretches
from rigdesign.target.plan_sum import PlanSum

NEAR = 1e-10
"""Of the span: how far a cut's sides stand off it; places nearer than half of it are on one cut.  A running load adds
a part in 1e10 over that distance."""


@dataclass(frozen=True)
class PlanLoads:
    """All that acts on a surface: pads at x, y [m] with `force` [N], (n_pads,) each, and gravity."""

    target: Target
    x: Floats
    y: Floats
    force: Floats

    @cached_property
    def load(self) -> PlanLoad:
        """Pads and gravity as one load in plan; the supports' answer to it is worked out with every cut."""
        return PlanSum((PlanPoints(self.x, self.y, self.force), self.target.gravity_plan), (1.0, 1.0))

    def value(self, quantity: Quantity, at: Floats, side: Side) -> Floats:
        """A quantity of the rig [N or N·m] at stations (n,), reactions included."""
        return loads_at(self.load, self.target.brief.specimen, quantity, at, side)


def sampler_in_plan(
    target: Target, pad_x: Floats, pad_y: Floats, pad_force: Floats, quantities: tuple[Quantity, ...]
) -> Sampler:
    """Return a sampler of the target and of pads (n_pads,) [m], [N]: of what is cut along the span, or across it."""
    specimen = target.brief.specimen
    judged: dict[Quantity, Band] = {
        quantity: band for quantity, band in bands(target).items() if quantity in quantities
    }
    first, last = _ends(specimen, quantities[0], pad_x)
    own = jump_stations(specimen, quantities[0], *_places(specimen, quantities[0], pad_x, pad_y))
    own = _between(own, first, last)
    points = _load_stations(target, quantities[0])
    breaks = [
        smooth_stretches(load, specimen, quantity)
        for load in (target.total_plan, target.gravity_plan)
        for quantity in quantities
    ]
    edges = np.concatenate([[first, last], *(band.edges for band in judged.values())])
    near = NEAR * (specimen.right - specimen.left)
    jump = _distinct(_between(edges, first, last), _between(np.concatenate([own, *points]), first, last), 0.5 * near)
    loads = PlanLoads(target, pad_x, pad_y, pad_force)
    return Sampler(target, loads, judged, quantities, jump, _nearest(jump, own), np.concatenate(breaks), near)


def _nearest(stations: Floats, at: Floats) -> Floats:
    """The station nearest to each place `at` (k,) [m]."""
    place = np.clip(np.searchsorted(stations, at), 1, stations.size - 1)
    before, after = stations[place - 1], stations[place]
    return np.where(at - before < after - at, before, after)


def _ends(specimen: Specimen, quantity: Quantity, pad_x: Floats) -> tuple[float, float]:
    """The first and last station; cut square to x, a pad beyond the specimen is within them."""
    first, last = ends_of(specimen, quantity)
    if quantity in ACROSS or specimen.cut == "square to axis":
        return first, last
    return min(first, float(pad_x.min())), max(last, float(pad_x.max()))


def _places(specimen: Specimen, quantity: Quantity, pad_x: Floats, pad_y: Floats) -> tuple[Floats, Floats]:
    """Where point forces of the rig act: pads and, for what is cut along the span, supports; x, y [m]."""
    if quantity in ACROSS:
        return pad_x, pad_y
    x = np.array(specimen.supports)
    return np.concatenate([pad_x, x]), np.concatenate([pad_y, specimen.reference_axis.at(x)])


def _load_stations(target: Target, quantity: Quantity) -> Iterator[Floats]:
    """Stations [m] of the target's point loads and couples, as cuts see them."""
    for load in (target.total_plan, target.gravity_plan):
        for direction, start, end, offset in _stretches(target.brief.specimen, quantity):
            seen = load.along(direction)
            slope = direction.a_y if quantity in ACROSS else direction.a_x
            for curve in (seen.force, seen.turning):
                # straight along the stretch, whose own points lie at offset + s · slope
                yield _between(offset + curve.points[0] * slope, start, end)


def _stretches(specimen: Specimen, quantity: Quantity) -> Iterator[tuple[Direction, float, float, float]]:
    """Directions of cuts, the stations [m] between which each holds, and the station of s = 0."""
    if quantity in ACROSS:
        yield ALONG_Y, -np.inf, np.inf, 0.0
    elif specimen.cut == "square to x":
        yield ALONG_X, -np.inf, np.inf, 0.0
    else:
        axis = specimen.reference_axis
        ends = np.concatenate([[-np.inf], axis.x[1:-1], [np.inf]])
        for k, (a_x, a_y) in enumerate(zip(*stretch_directions(specimen), strict=True)):
            s = axis.x[k] * a_x + axis.y[k] * a_y
            yield Direction(float(a_x), float(a_y)), ends[k], ends[k + 1], float(axis.x[k] - s * a_x)


def _between(stations: Floats, first: float, last: float) -> Floats:
    return np.asarray(stations[(stations >= first) & (stations <= last)])


def _distinct(kept: Floats, others: Floats, close: float) -> Floats:
    """Stations in order, of which the `others` are nearer than `close` to none before them; those `kept` stay."""
    kept, others = np.unique(kept), np.unique(others)
    others = others[np.diff(others, prepend=-np.inf) > close]
    place = np.searchsorted(kept, others)
    before, after = kept[np.maximum(place - 1, 0)], kept[np.minimum(place, kept.size - 1)]
    is_new = np.minimum(np.abs(others - before), np.abs(others - after)) > close
    return np.union1d(kept, others[is_new])
