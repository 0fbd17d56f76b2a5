"""What pads on a line cannot better, as a bound on pads in plan."""

from __future__ import annotations

from dataclasses import replace
from itertools import combinations

import numpy as np
import pytest
from plan_choices import make_target, places

from rigdesign.brief.model import Acceptance, BandRule, Line, Quantity, Region
from rigdesign.pads.surface.given import choice_of
from rigdesign.pads.surface.line_bounds import LineBounds, line_bounds
from rigdesign.pads.surface.program import Programme
from rigdesign.pads.surface.refusals import jack_place_in_plan
from rigdesign.target import build_target
from rigdesign.target.bands import bands
from rigdesign.target.model import Target

SLANTED = Line(np.array([0.0, 4.0]), np.array([0.137, -0.263]))


def rules(widths: dict[Quantity, float]) -> tuple[BandRule, ...]:
    return tuple(
        BandRule(quantity, side, width, False, "peak")
        for quantity, width in widths.items()
        for side in ("under", "over")
    )


def held_to(widths: dict[Quantity, float], regions: tuple[Region, ...] = (), **specimen: object) -> Target:
    """A target over 12 hard points with these bands."""
    target = make_target(*places(12, 3, spars=3), 4)
    own = replace(target.brief.specimen, **specimen)  # type: ignore[arg-type]
    return build_target(replace(target.brief, specimen=own, acceptance=Acceptance(rules(widths), regions, False)))


def best_of_all(target: Target, count: int) -> float:
    """The least band use of so many of the 12 hard points."""
    choice = choice_of(target, jack_place_in_plan(target), *places(12, 3, spars=3), count)
    uses = []
    for pads in combinations(range(12), count):
        x, y = choice.x[[*pads]], choice.y[[*pads]]
        forces = Programme(choice.rows, choice.balance, x, y, 0.0, np.inf).least_use()
        uses.append(np.inf if forces is None else forces.use)
    return min(uses)


BANDS: list[dict[Quantity, float]] = [
    {"shear": 0.1},
    {"moment": 0.02},
    {"shear across": 0.2, "moment across": 0.1},
]


@pytest.mark.parametrize("specimen", [{}, {"axis": SLANTED, "cut": "square to axis"}, {"supports": (0.7, 3.1)}])
@pytest.mark.parametrize("widths", BANDS)
def test_no_choice_of_places_goes_below(widths: dict[Quantity, float], specimen: dict[str, object]) -> None:
    if "supports" in specimen:
        specimen = {**specimen, "support": "two supports"}
    target = held_to(widths, **specimen)
    least, _ = line_bounds(target, jack_place_in_plan(target), 3)
    assert 0 < least <= best_of_all(target, 3)


def test_square_to_a_slanted_axis_the_moment_error_is_bounded_too() -> None:
    target = held_to({"moment": 0.02}, axis=SLANTED, cut="square to axis")
    use, moment = line_bounds(target, jack_place_in_plan(target), 3)
    # the same path, once over its band of 2 % of peak, once over the peak; pads stand within the hard points alone
    assert moment == pytest.approx(0.02 * use, rel=1e-4)
    kinked = Line(np.array([0.0, 2.0, 4.0]), np.array([0.137, 0.0, -0.263]))
    bent = held_to({"moment": 0.02}, axis=kinked, cut="square to axis")
    assert line_bounds(bent, jack_place_in_plan(bent), 4) == (0.0, 0.0)


def test_widths_at_the_end_of_a_region_are_those_of_each_side() -> None:
    edges = np.arange(0.2, 3.9, 0.1)
    tight = rules({"shear": 0.05})
    regions = tuple(
        Region(f"region {k}", float(a), float(b), tight)
        for k, (a, b) in enumerate(zip(edges[::2], edges[1::2], strict=False), 1)
    )
    # so steep an axis that stations worked out from places along it are rounded
    steep = Line(np.array([0.0, 4.0]), np.array([0.45, -2.1]))
    target = held_to({"shear": 0.3}, regions, axis=steep, cut="square to axis")
    lines, band = LineBounds(target, jack_place_in_plan(target)), bands(target)["shear"]
    tube = lines._tube(*lines._directions[0], 4)
    wide = tube.shear_width.below > 0.2 * band.peak
    # wide outside regions: its station is single there, and each end of a region has one wide and one tight side
    ends = np.flatnonzero(np.diff(tube.x) == 0)
    changes = np.flatnonzero(wide[1:] != wide[:-1])
    assert band.edges.size == 2 * len(regions)
    assert np.isin(changes, ends).all()
