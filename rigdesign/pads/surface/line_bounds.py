"""What no pads in plan can do better than, because no pads on a line can.

Shear and moment at cuts square to one direction know of a pad only how far along that direction it stands.  So N pads
anywhere in plan have the shear and the moment of N pads on a line, each at its place along the direction, several of
them at one place perhaps; and what is proven for at most N pads on a line holds for every arrangement of N pads.  That
is so along x, along the reference axis where it is straight and the cuts are square to it, and along y for what is cut
across.  Torsion, gaps and limits on forces are left out: they can only cost more.

Besides, at a cut that no pad can stand beyond, or inboard of, nothing is left to choose.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity
from rigdesign.pads.outcome import moment_alone
from rigdesign.pads.path import COARSE, fewest_lines, least_use_path
from rigdesign.pads.stair import fewest_steps, least_use_stair
from rigdesign.pads.surface.error_rows import SIDES, ErrorRows, error_rows
from rigdesign.pads.surface.footprints import given_places
from rigdesign.pads.surface.room import Room
from rigdesign.pads.tube import UNBOUNDED, Tube, Widths, build_tube
from rigdesign.target.bands import Band, bands
from rigdesign.target.curve import Floats
from rigdesign.target.cuts import ACROSS, SAME_PLACE, cuts_at, stretch_directions
from rigdesign.target.internal import points_beyond
from rigdesign.target.model import Target
from rigdesign.target.plan_load import ALONG_X, ALONG_Y, Direction

SAFE = 1.0 - 1e-6
"""A bound is taken by so much lower than the search along the line gives it: its stations are interpolated."""
STRAIGHT = 1e-12
"""Directions of an axis' stretches that differ by less are one."""


def line_bounds(target: Target, jack: tuple[float, float], count: int) -> tuple[float, float]:
    """Return the least band use of moments and shears, and the least moment error over its peak, of `count` pads.

    The jack stands at x, y [m].  The moment error is 0 where the cuts are square to an axis with a kink.
    """
    lines = LineBounds(target, jack)
    return lines.least_use(count), lines.least_moment(count)


@dataclass(frozen=True)
class LineBounds:
    """Bounds for any number of pads of a target under a jack at x, y [m]."""

    target: Target
    jack: tuple[float, float]

    def least_use(self, count: int) -> float:
        """Return a band use that no arrangement of `count` pads goes below."""
        use = 0.0
        for direction, across in self._directions:
            tube, stretches = self._tube(direction, across, count), self._stretches(direction)
            if tube.is_judged[0]:
                use = max(use, least_use_path(tube, count, *_ends(stretches))[1])
            if tube.is_judged[1]:
                use = max(use, least_use_stair(tube, stretches, count))
            use = max(use, self._out_of_reach(direction, across))
        return use * SAFE

    def least_moment(self, count: int) -> float:
        """Return a largest moment error, over the peak moment, that no arrangement of `count` pads goes below."""
        for direction, across in self._directions:
            if not across:
                tube = moment_alone(self._tube(direction, across, count), self.target.moment_peak)
                return max(least_use_path(tube, count, *_ends(self._stretches(direction)))[1], 0.0) * SAFE
        return 0.0

    def fewest(self, most: int) -> int:
        """Return a number of pads, at most `most`, that no arrangement within all bands goes below."""
        fewest = 1
        for direction, across in self._directions:
            tube, stretches = self._tube(direction, across, most), self._stretches(direction)
            # a hair more than the band, as bounds are taken a hair lower
            use = 1.0 / SAFE
            if tube.is_judged[0]:
                lines = fewest_lines(tube, use, *_ends(stretches), most)
                fewest = max(fewest, most if lines is None else len(lines) - 1)
            if tube.is_judged[1]:
                fewest = max(fewest, fewest_steps(tube, use, stretches, most) or most)
        return fewest

    def _out_of_reach(self, direction: Direction, across: bool) -> float:
        """Band use where no pad can change anything: at cuts beyond which all pads stand, or none can.

        There whatever is judged, torsion too, follows from the sum and the moments: one pad under the jack tells.
        """
        target, specimen = self.target, self.target.brief.specimen
        first, last = _ends(self._stretches(direction))
        rows, use = error_rows(target, np.empty(0), np.empty(0)), 0.0
        x, y = np.array([self.jack[0]]), np.array([self.jack[1]])
        force = np.array([abs(target.net_plan.sums.force)])
        for block in rows.blocks:
            if (block.quantity in ACROSS) != across or not block.at.size:
                continue
            cuts = cuts_at(specimen, block.quantity, block.at, block.side)
            s = cuts.x * direction.a_x + cuts.y * direction.a_y
            out = (s < first) | (s > last)
            uses = ErrorRows(specimen, (block,)).uses(x, y, force)
            use = max(use, float(uses[out].max(initial=0.0)))
        return use

    @cached_property
    def _directions(self) -> list[tuple[Direction, bool]]:
        """Directions along which pads in plan are pads on a line; whether it is what is cut across."""
        specimen = self.target.brief.specimen
        found: list[tuple[Direction, bool]] = []
        if specimen.cut == "square to x":
            found.append((ALONG_X, False))
        else:
            a_x, a_y = stretch_directions(specimen)
            if np.ptp(a_x) <= STRAIGHT and np.ptp(a_y) <= STRAIGHT:
                found.append((Direction(float(a_x[0]), float(a_y[0])), False))
        return [*found, (ALONG_Y, True)]

    def _stretches(self, direction: Direction) -> Floats:
        """Where pads may stand along a direction (k, 2) [m], sorted, at least one stretch."""
        import shapely

        brief = self.target.brief
        if brief.pads.places == "free":
            parts = shapely.get_parts(Room(brief).places)
            places = [shapely.get_coordinates(part) for part in parts if not part.is_empty]
        else:
            places = list(np.stack(given_places(brief), axis=-1)[:, None, :])
        along = [place[:, 0] * direction.a_x + place[:, 1] * direction.a_y for place in places]
        hair = 1e-9 * (brief.specimen.right - brief.specimen.left)
        ends = sorted((float(s.min()) - hair, float(s.max()) + hair) for s in along)
        merged = [list(ends[0])]
        for start, end in ends[1:]:
            if start <= merged[-1][1]:
                merged[-1][1] = max(merged[-1][1], end)
            else:
                merged.append([start, end])
        return np.array(merged)

    def _tube(self, direction: Direction, across: bool, count: int) -> Tube:
        if not across and self.target.brief.specimen.cut == "square to x":
            return build_tube(self.target, self.jack[0], count, COARSE)
        every = bands(self.target)
        names: tuple[Quantity, Quantity] = ("moment across", "shear across") if across else ("moment", "shear")
        return self._tube_along(direction, every[names[0]], every[names[1]], across, count)

    def _tube_along(self, direction: Direction, moment: Band, shear: Band, across: bool, count: int) -> Tube:
        """The tube of what is cut square to a direction, over s along it."""
        target, specimen = self.target, self.target.brief.specimen
        curve, sign = target.net_plan.along(direction).force, 1 if target.resultant >= 0 else -1
        # stations of the cuts are y across, and x of points on the axis along it
        axis = specimen.reference_axis
        scale = 1.0 if across else 1.0 / direction.a_x
        start = 0.0 if across else float(axis.x[0] * direction.a_x + axis.y[0] * direction.a_y - axis.x[0] * scale)
        ends = moment.stretches[[0, -1]]
        edges = np.concatenate([moment.stretches, shear.stretches, moment.edges, shear.edges])
        low, high = start + scale * float(ends[0]), start + scale * float(ends[1])
        known = np.unique(np.concatenate([start + scale * edges, curve.breaks, [low, high]]))
        first, last = _ends(self._stretches(direction))
        s, outboard = _stations(known, min(low, first), max(high, last), max(COARSE * count, 600))
        at = _back_on(np.unique(edges), np.clip((s - start) / scale, *ends))
        # pads may stand beyond the first and the last cut, where nothing is asked
        cut = (s >= low) & (s <= high) & ~((s == low) & ~outboard & (first < low)) & ~((s == high) & outboard)
        widths = [_widths(band, at, outboard, cut, sign) for band in (moment, shear)]
        force = np.where(outboard, curve.force_beyond(s, "outboard"), curve.force_beyond(s, "inboard"))
        shear_unit, moment_unit = np.zeros(s.size), np.zeros(s.size)
        if specimen.supports and not across:
            held = start + scale * np.array(specimen.supports)
            answer = np.array([1.0, -1.0]) / (held[1] - held[0])
            inner, outer = (points_beyond(s, held, answer, side) for side in SIDES)
            shear_unit, moment_unit = np.where(outboard, outer[0], inner[0]), inner[1]
        return Tube(
            sign=sign,
            total=sign * curve.total,
            first_moment=sign * curve.first_moment,
            jack_x=self.jack[0] * direction.a_x + self.jack[1] * direction.a_y,
            x=s,
            outboard=outboard,
            moment=sign * curve.moment_beyond(s),
            moment_width=widths[0],
            moment_unit=moment_unit,
            shear=sign * force,
            shear_width=widths[1],
            shear_unit=shear_unit,
            is_judged=(moment.is_judged, shear.is_judged),
        )


def _ends(stretches: Floats) -> tuple[float, float]:
    return float(stretches[0, 0]), float(stretches[-1, 1])


def _stations(known: Floats, low: float, high: float, even: int) -> tuple[Floats, NDArray[np.bool_]]:
    """Stations (m,) [m] from low to high, and which are the outboard side: those known twice, even ones between."""
    jump = np.union1d(known[(known >= low) & (known <= high)], [low, high])
    single = np.setdiff1d(np.linspace(low, high, even), jump)
    s = np.concatenate([jump, jump, single])
    outboard = np.concatenate([np.zeros(jump.size, bool), np.ones(jump.size + single.size, bool)])
    order = np.lexsort((outboard, s))
    return s[order], outboard[order]


def _back_on(edges: Floats, at: Floats) -> Floats:
    """Stations `at` (m,) [m], those that rounding has put beside one of the edges (k,) on it: there bands jump."""
    place = np.clip(np.searchsorted(edges, at), 1, edges.size - 1)
    nearest = np.where(at - edges[place - 1] < edges[place] - at, edges[place - 1], edges[place])
    return np.where(np.abs(at - nearest) <= SAME_PLACE * (edges[-1] - edges[0]), nearest, at)


def _widths(band: Band, at: Floats, outboard: NDArray[np.bool_], cut: NDArray[np.bool_], sign: int) -> Widths:
    """Widths of a band at stations `at` (m,), as of positive pads; where no cut is they are as good as infinite."""
    inner, outer = (band.widths(at, side) for side in SIDES)
    most = UNBOUNDED * max(band.peak, band.least, 1e-300)
    below, above = (
        np.where(cut, np.minimum(np.where(outboard, o, i), most), most) for i, o in zip(inner, outer, strict=True)
    )
    return Widths(below, above) if sign > 0 else Widths(above, below)
