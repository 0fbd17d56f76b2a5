"""Bands: sides by the sign of the target, the 5 % rule, the floor, regions, local and absolute amounts."""

from __future__ import annotations

import numpy as np
import pytest
from factories import (
    LEFT,
    RIGHT,
    band_rules,
    make_acceptance,
    make_brief,
    make_specimen,
    point_loads,
    shape_load,
    table_load,
    two_supports,
)

from rigdesign.brief.model import Acceptance, Region
from rigdesign.target import build_target
from rigdesign.target.bands import bands


def band_of(quantity, rules, regions=(), **changes):
    accept = Acceptance(rules=tuple(rules), regions=tuple(regions), defaulted=False)
    return bands(build_target(make_brief(acceptance=accept, **changes)))[quantity]


def widths(band, x, side="outboard"):
    return band.widths(np.atleast_1d(np.asarray(x, dtype=float)), side)


def region(start, end, rules, name="spar"):
    return Region(name=name, start_x=start, end_x=end, rules=tuple(rules))


def test_a_fraction_of_the_peak():
    band = band_of("moment", band_rules("moment", 0.01, 0.04))
    below, above = widths(band, [0.5, 1.5])
    assert band.peak == pytest.approx(5400 * 4 / (3 * np.pi) * 3.2)
    assert below == pytest.approx(0.01 * band.peak)
    assert above == pytest.approx(0.04 * band.peak)


@pytest.mark.parametrize("total", [5400.0, -5400.0])
def test_sides_change_places_where_the_target_is_negative(total):
    band = band_of("shear", band_rules("shear", 0.03, 0.11), loads=(shape_load(total=total),))
    below, above = widths(band, 1.0)
    under, over = (below, above) if total > 0 else (above, below)  # under-test: towards zero
    assert under[0] == pytest.approx(0.03 * 5400)
    assert over[0] == pytest.approx(0.11 * 5400)


def test_sides_follow_a_target_of_both_signs():
    """Shear of a uniform load on supports at the ends passes from one sign to the other in the middle."""
    ends = two_supports(LEFT, LEFT, RIGHT, RIGHT)
    band = band_of("shear", band_rules("shear", 0.03, 0.11), specimen=ends, loads=(shape_load("uniform", -1000.0),))
    below, above = widths(band, [1.0, 2.6])
    # outboard of 1 m the load −750 N and the right reaction 500 N: V = −250 N; outboard of 2.6 m V = +250 N
    assert band.value(np.array([1.0, 2.6]), "outboard") == pytest.approx([-250.0, 250.0])
    assert below == pytest.approx([0.11 * 500, 0.03 * 500])
    assert above == pytest.approx([0.03 * 500, 0.11 * 500])


def test_near_zero_the_wider_side_holds_for_both():
    band = band_of("shear", band_rules("shear", 0.03, 0.11), loads=(shape_load("uniform", 1000.0),))
    near, far = RIGHT - 0.0499 * 3.2, RIGHT - 0.0501 * 3.2  # 4.99 % and 5.01 % of the peak
    below, above = widths(band, [near, far])
    assert below == pytest.approx([110.0, 30.0])
    assert above == pytest.approx([110.0, 110.0])


def test_no_band_is_narrower_than_the_floor():
    band = band_of("moment", band_rules("moment", 0.0, 0.0001))
    below, above = widths(band, [0.5, 3.3])
    assert below == pytest.approx(0.0005 * band.peak)
    assert above == pytest.approx(0.0005 * band.peak)


def test_of_the_local_value():
    band = band_of("moment", band_rules("moment", 0.02, 0.05, of="local"), loads=(shape_load("uniform", 1000.0),))
    # M = w t²/2 with w = 312.5 N/m
    x = np.array([1.4, 2.4])
    local = 312.5 * (RIGHT - x) ** 2 / 2
    below, above = widths(band, x)
    assert below == pytest.approx(0.02 * local)
    assert above == pytest.approx(0.05 * local)
    # at the tip nothing is left of it but the floor
    assert widths(band, RIGHT)[0][0] == pytest.approx(0.0005 * 1600)


def test_of_the_local_value_takes_the_side_of_a_jump():
    loads = (shape_load("uniform", 1000.0), point_loads(2.0, 400.0))
    band = band_of("shear", band_rules("shear", 0.1, 0.1, of="local"), loads=loads)
    outboard = 312.5 * 1.4
    assert widths(band, 2.0, "outboard")[0][0] == pytest.approx(0.1 * outboard)
    assert widths(band, 2.0, "inboard")[0][0] == pytest.approx(0.1 * (outboard + 400))


def test_a_quantity():
    band = band_of("moment", band_rules("moment", 50.0, 75.0, absolute=True))
    assert [w[0] for w in widths(band, 1.0)] == [50.0, 75.0]


def test_a_quantity_below_the_floor():
    band = band_of("moment", band_rules("moment", 1.0, 75.0, absolute=True))
    assert widths(band, 1.0)[0][0] == pytest.approx(0.0005 * band.peak)


def test_regions_override_what_they_name_in_order():
    rules = band_rules("moment", 0.05, 0.05)
    first = region(0.6, 2.0, band_rules("moment", 0.01, 0.02))
    second = region(1.5, 2.5, band_rules("moment", 0.0, 0.03)[1:])  # over alone
    shear_only = region(0.0, 3.4, band_rules("shear", 0.3, 0.3))
    band = band_of("moment", rules, (first, second, shear_only))
    x = [0.4, 1.0, 1.8, 2.2, 2.6]
    assert band.under_over(np.array(x), "outboard")[0] == pytest.approx(np.array([5, 1, 1, 5, 5]) * 0.01 * band.peak)
    assert band.under_over(np.array(x), "outboard")[1] == pytest.approx(np.array([5, 2, 3, 3, 5]) * 0.01 * band.peak)
    assert band.edges.tolist() == pytest.approx(sorted([0.6, 1.5, 2.0, 2.5, _five_percent()]), rel=1e-9)


def _five_percent():
    """Where the elliptical load's moment is 5 % of that at the root, by bisection on the formula."""
    from scipy.optimize import brentq

    def moment(t):
        return 0.375 * np.sin(t) + np.sin(3 * t) / 24 - t * np.cos(t) / 2

    return LEFT + 3.2 * np.cos(brentq(lambda t: moment(t) - 0.05 / 3, 0.1, 1.5, xtol=1e-14))


def test_the_end_of_a_region_belongs_to_both_sides():
    band = band_of("moment", band_rules("moment", 0.05, 0.05), (region(0.6, 2.0, band_rules("moment", 0.01, 0.01)),))
    inner, outer = 0.01 * band.peak, 0.05 * band.peak
    assert widths(band, [0.6, 2.0], "inboard")[0] == pytest.approx([outer, inner])
    assert widths(band, [0.6, 2.0], "outboard")[0] == pytest.approx([inner, outer])


def test_a_region_at_the_end_of_the_specimen_holds_on_both_sides_of_it():
    whole = region(LEFT, RIGHT, band_rules("shear", 0.2, 0.2))
    band = band_of("shear", band_rules("shear", 0.05, 0.05), (whole,))
    for side in ("inboard", "outboard"):
        assert widths(band, [LEFT, RIGHT], side)[0] == pytest.approx([1080.0, 1080.0])


def test_what_is_not_asked_is_not_judged():
    band = band_of("shear", band_rules("moment", 0.02, 0.02))
    assert not band.is_judged
    assert np.isinf(widths(band, 1.0)[0][0])
    assert band.edges.size == 0
    only_in_region = band_of("shear", (), (region(0.6, 2.0, band_rules("shear", 0.1, 0.1)),))
    assert only_in_region.is_judged
    assert np.isinf(widths(only_in_region, 2.5)[0][0])
    assert widths(only_in_region, 1.0)[0][0] == pytest.approx(540.0)


def test_one_side_alone():
    band = band_of("moment", band_rules("moment", 0.02, 0.0)[:1])
    below, above = widths(band, 1.0)
    assert below[0] == pytest.approx(0.02 * band.peak)
    assert np.isinf(above[0])


def test_edges_where_small_targets_begin():
    """Only where under and over differ; on both sides of zero."""
    ends = two_supports(LEFT, LEFT, RIGHT, RIGHT)
    loads = (shape_load("uniform", -1000.0),)
    equal = band_of("shear", band_rules("shear", 0.1, 0.1), specimen=ends, loads=loads)
    assert equal.edges.size == 0
    unequal = band_of("shear", band_rules("shear", 0.1, 0.2), specimen=ends, loads=loads)
    # V passes ±25 N (5 % of 500 N) at 0.08 m from the middle
    assert unequal.edges == pytest.approx([1.72, 1.88], rel=1e-12)


def test_bands_of_the_default_acceptance():
    both = bands(build_target(make_brief(acceptance=make_acceptance())))
    assert set(both) == {"moment", "shear"}
    assert widths(both["shear"], 1.0)[0][0] == pytest.approx(0.12 * 5400)
    assert both["shear"].value(np.array([1.0]), "inboard")[0] < 5400


def test_peaks_are_those_of_the_whole_target():
    """With weight the specimen feels the total: bands are of that, not of what the pads bring."""
    from factories import make_weight

    specimen = make_specimen(weight=make_weight([LEFT, RIGHT], [30.0, 30.0]))
    load = table_load([LEFT, RIGHT], [1000.0, 1000.0])
    band = band_of("shear", band_rules("shear", 0.1, 0.1), specimen=specimen, loads=(load,))
    assert widths(band, 1.0)[1][0] == pytest.approx(320.0)
