"""V and M of target and rig by station: every peak is found, both sides of every jump, regions, single figures."""

from __future__ import annotations

import numpy as np
import pytest
from factories import (
    band_rules,
    make_acceptance,
    make_brief,
    make_specimen,
    make_weight,
    point_loads,
    shape_load,
    table_load,
    two_supports,
)
from hand_rigs import lumped, make_rig

from rigdesign.brief.model import Acceptance, Region
from rigdesign.checks import check
from rigdesign.checks.curves import curves
from rigdesign.checks.measures import hand_errors, hand_pads, peak_error
from rigdesign.checks.regions import inside, sides, verdicts
from rigdesign.checks.samplers import sampler
from rigdesign.checks.sampling import local_errors
from rigdesign.checks.thin import MOST_ROWS, thinned
from rigdesign.target import build_target

X = np.array([0.5, 0.97, 1.6, 2.0, 2.9])
FORCE = np.array([1800.0, 1190.0, 1120.0, 900.0, 390.0])
LOCAL = Acceptance(
    rules=band_rules("moment", 0.03, 0.07) + band_rules("shear", 0.2, 0.3),
    regions=(
        Region("0.8 m to 2.1 m", 0.8, 2.1, band_rules("moment", 0.04, 0.06, of="local")),
        Region("2.0 m to 3.0 m", 2.0, 3.0, band_rules("shear", 0.5, 0.6, of="local")),
    ),
    defaulted=False,
)
BRIEFS = {
    "cantilever": make_brief(),
    "local bands": make_brief(acceptance=LOCAL),
    "point loads": make_brief(loads=(shape_load(), point_loads([1.1, 1.6], [350.0, -220.0])), acceptance=LOCAL),
    "both signs": make_brief(loads=(shape_load("linear", None, start=2900.0, end=-700.0),), acceptance=LOCAL),
    "two supports": make_brief(
        specimen=two_supports(
            0.2, 0.7, 2.6, 3.4, weight=make_weight([0.2, 1.4, 3.4], [31.0, 12.0, 17.0], [0.9], [8.0])
        ),
        loads=(shape_load("sine", -4100.0, start_x=0.4, end_x=3.1),),
        acceptance=LOCAL,
    ),
}


@pytest.fixture(params=BRIEFS, scope="module")
def known(request):
    """Target, pads and curves of one brief."""
    target = build_target(BRIEFS[request.param])
    force = FORCE * target.net.total / FORCE.sum()
    return target, force, curves(target, X, force)


def test_no_dense_sampling_finds_a_higher_peak(known):
    target, force, found = known
    sample = sampler(target, X, force)
    x = np.linspace(0.2, 3.4, 200_001)
    rows = sample.rows(x, np.ones(x.size, bool))
    for quantity in ("shear", "moment"):
        peak = target.moment_peak if quantity == "moment" else target.shear_peak
        size = np.abs(found.target[quantity])
        counts = size >= 0.05 * peak
        local = (np.abs(found.error(quantity))[counts] / size[counts]).max()
        for name, dense, best in (
            ("error", np.abs(rows.error(quantity)), np.abs(found.error(quantity)).max()),
            ("use", rows.use(quantity), found.use(quantity).max()),
            ("local", local_errors(rows, quantity, peak), local),
        ):
            # what 200 000 samples miss between them is of the order of the rounding of these values
            assert dense.max() <= best * (1 + 1e-9), (quantity, name)
            # and no peak is made up: dense samples come as near as their spacing, 16 µm, allows
            assert dense.max() >= best * (1 - 1e-3), (quantity, name)


def test_both_sides_of_every_jump(known):
    target, force, found = known
    jumps = [*X, *target.brief.specimen.supports, *target.total.points[0]]
    for region in target.brief.acceptance.regions:
        jumps += [region.start_x, region.end_x]
    for x in jumps:
        assert list(found.outboard[found.x == x]) == [False, True], x
    for x, step in zip(X, force, strict=True):
        inboard, outboard = found.rig["shear"][found.x == x]
        assert inboard - outboard == pytest.approx(step, rel=1e-9)


def test_rows_are_in_order_and_no_more_than_needed(known):
    _, _, found = known
    rows = list(zip(found.x, found.outboard, strict=True))
    assert rows == sorted(set(rows))
    assert 300 < len(rows) < 900


def test_rig_and_target_agree_beyond_the_last_load_and_in_their_sums(known):
    target, force, found = known
    first, last = found.error("shear")[[0, -1]]
    assert first == pytest.approx(0.0, abs=1e-9 * target.shear_peak)
    assert last == pytest.approx(0.0, abs=1e-9 * target.shear_peak)
    # the pads' first moment is not the target's here: a cantilever's root shows it, two supports do not
    missed = force @ X - target.net.first_moment - 0.2 * (force.sum() - target.net.total)
    if not target.brief.specimen.supports:
        assert found.error("moment")[0] == pytest.approx(missed, rel=1e-9)
    else:
        assert found.error("moment")[0] == pytest.approx(0.0, abs=1e-9 * target.moment_peak)


def test_gravity_is_part_of_both():
    # pads that bring exactly the net load's strips: the weight cancels in the error
    brief = BRIEFS["two supports"]
    heavy = build_target(brief)
    pads, forces = lumped(heavy, np.linspace(0.2, 3.4, 41).tolist())
    found = curves(heavy, *hand_pads(heavy.net, 400))
    assert np.abs(found.error("moment")).max() < 1e-4 * heavy.moment_peak
    assert forces.sum() != pytest.approx(heavy.total.total, rel=0.1)
    assert pads.size == 40


def test_local_errors_are_judged_down_to_five_per_cent_of_the_peak():
    found = check(make_rig(X, FORCE))
    sample = sampler(found.rig.plan.target, X, FORCE)
    x = np.linspace(0.2, 3.4, 200_001)
    rows = sample.rows(x, np.ones(x.size, bool))
    for quantity, error, at in (
        ("moment", found.moment_error_local, found.moment_error_local_x),
        ("shear", found.shear_error_local, found.shear_error_local_x),
    ):
        size = np.abs(rows.target[quantity])
        counts = size >= 0.05 * size.max()
        dense = np.where(counts, np.abs(rows.error(quantity)) / size.clip(1e-9), 0.0)
        # outboard sides alone, 16 µm apart
        assert error == pytest.approx(dense.max(), rel=1e-3)
        assert at == pytest.approx(x[np.argmax(dense)], abs=2e-5)


def test_area_between_the_shear_curves():
    found = check(make_rig(X, FORCE))
    target = found.rig.plan.target
    sample = sampler(target, X, FORCE)
    edges = np.linspace(0.2, 3.4, 400_001)
    middle = 0.5 * (edges[1:] + edges[:-1])
    area = np.abs(sample.rows(middle, np.ones(middle.size, bool)).error("shear")).sum() * (edges[1] - edges[0])
    # midpoint sum: its error is below one cell at each of some ten zeros and jumps
    assert found.shear_area == pytest.approx(area, rel=1e-5)


def test_under_and_over_change_places_with_the_sign_of_the_target():
    up, down = (
        check(make_rig(X, sign * FORCE, make_brief(loads=(shape_load(total=sign * 5400.0),), acceptance=LOCAL)))
        for sign in (1.0, -1.0)
    )
    for one, other in zip(up.regions, down.regions, strict=True):
        assert (one.under, one.over) == pytest.approx((other.under, other.over))
        assert (one.band_under, one.band_over) == pytest.approx((other.band_under, other.band_over))
        assert one.use == pytest.approx(other.use)
    assert up.regions[1].under != pytest.approx(up.regions[1].over)


def test_regions_whole_span_first_then_each():
    target = build_target(BRIEFS["local bands"])
    rows = verdicts(target, curves(target, X, FORCE))
    assert [(row.name, row.quantity) for row in rows] == [
        ("whole span", "shear"),
        ("whole span", "moment"),
        ("0.8 m to 2.1 m", "shear"),
        ("0.8 m to 2.1 m", "moment"),
        ("2.0 m to 3.0 m", "shear"),
        ("2.0 m to 3.0 m", "moment"),
    ]
    whole = {row.quantity: row for row in rows[:2]}
    assert whole["moment"].use == pytest.approx(max(row.use for row in rows if row.quantity == "moment"))
    assert (rows[2].start_x, rows[2].end_x) == (0.8, 2.1)
    for row in rows[2:]:
        assert row.start_x <= row.under_x <= row.end_x
        assert row.under <= whole[row.quantity].under


def test_a_quantity_without_a_band_is_shown_and_not_judged():
    found = check(make_rig(X, FORCE, make_brief(acceptance=make_acceptance(moment=0.5, shear=None))))
    shear, moment = found.regions
    assert (shear.use, shear.accepted, shear.band_under) == (None, None, float("inf"))
    assert shear.under > 100
    assert moment.accepted is True
    assert found.band_use == moment.use
    assert found.accepted


def test_only_a_region_is_judged_where_only_it_has_a_band():
    region = Region("tip half", 1.8, 3.4, band_rules("moment", 0.001, 0.5))
    acceptance = make_acceptance(moment=None, shear=None, regions=(region,))
    found = check(make_rig(X, FORCE, make_brief(acceptance=acceptance)))
    by_name = {(row.name, row.quantity): row for row in found.regions}
    assert by_name["whole span", "moment"].accepted is False
    assert by_name["tip half", "moment"].accepted is False
    assert by_name["tip half", "moment"].use == found.band_use > 1
    assert by_name["tip half", "shear"].accepted is None
    assert not found.accepted


def test_the_inner_side_of_a_region_end_counts():
    # a pad at 2.0 m, where a shear region begins: its inboard side belongs to the stretch before
    target = build_target(BRIEFS["local bands"])
    found = curves(target, X, FORCE)
    rows = inside(found, 2.0, 3.0)
    assert list(rows[found.x == 2.0]) == [False, True]
    assert list(rows[found.x == 3.0]) == [True, False]
    assert inside(found, 0.2, 3.4).all()


def test_sides_are_magnitudes():
    target = build_target(BRIEFS["both signs"])
    found = curves(target, X, FORCE * target.net.total / FORCE.sum())
    side = sides(found, "shear")
    magnitude = np.abs(found.rig["shear"]) - np.abs(found.target["shear"])
    same_sign = found.rig["shear"] * found.target["shear"] > 0
    assert same_sign.sum() > 20
    assert (side.over - side.under)[same_sign] == pytest.approx(magnitude[same_sign], abs=1e-9)
    assert (side.over * side.under == 0).all()


def test_hand_pads_against_a_fine_sum():
    target = build_target(make_brief(loads=(shape_load(), shape_load("triangular", 800.0, start_x=1.0))))
    x, force = hand_pads(target.net, 5)
    expected_x, expected_force = lumped(target, np.linspace(0.2, 3.4, 6).tolist())
    # the fine sum of the elliptical load's steep end is good to 1e-6
    assert x == pytest.approx(expected_x, rel=1e-5)
    assert force == pytest.approx(expected_force, rel=1e-5)
    assert force.sum() == pytest.approx(6200.0)
    assert force @ x == pytest.approx(target.net.first_moment)


def test_hand_pads_leave_strips_without_load_out():
    target = build_target(make_brief(loads=(table_load([0.4, 0.8, 0.8, 2.0, 2.0, 2.8], [90, 90, 0, 0, 40, 10]),)))
    x, force = hand_pads(target.net, 6)
    assert x.size == 3
    assert force.sum() == pytest.approx(target.net.total)
    points = build_target(make_brief(loads=(point_loads([0.5, 1.1, 3.0], [100.0, 300.0, 70.0]),)))
    x, force = hand_pads(points.net, 5)
    # edges at 0.5, 1.0, 1.5, …: the load at 0.5 is in the first strip, that at 3.0 in the last
    assert x == pytest.approx([0.5, 1.1, 3.0])
    assert force == pytest.approx([100.0, 300.0, 70.0])


def test_the_hand_method_is_judged_as_the_rig_is():
    target = build_target(BRIEFS["two supports"])
    pads, force = hand_pads(target.net, 7)
    found = check(make_rig(pads, force, target=target))
    assert hand_errors(target, 7) == pytest.approx((found.moment_error_peak, found.shear_error_peak), rel=1e-9)
    assert found.hand_moment == pytest.approx(found.moment_error_peak, rel=1e-9)


def test_thousands_of_point_loads_are_thinned_and_every_peak_stays():
    rng = np.random.default_rng(11)
    x = np.sort(rng.uniform(0.2, 3.4, 20_000))
    loads = point_loads(x, rng.uniform(0.05, 0.5, x.size))
    brief = make_brief(loads=(loads,), acceptance=LOCAL)
    target = build_target(brief)
    force = FORCE * target.net.total / FORCE.sum()
    full = curves(target, X, force)
    found = check(make_rig(X, force, target=target))
    assert full.x.size > 40_000
    assert found.curves.x.size < MOST_ROWS
    few = verdicts(target, found.curves)
    assert few == found.regions
    assert peak_error(found.curves, "shear", target.shear_peak)[0] == found.shear_error_peak
    for jump in (*X, 0.8, 2.1, 3.0):
        assert list(found.curves.outboard[found.curves.x == jump]) == [False, True]


def test_thinning_keeps_both_signs_where_nothing_is_judged():
    rng = np.random.default_rng(12)
    x = np.sort(rng.uniform(0.2, 3.4, 5000))
    brief = make_brief(loads=(point_loads(x, rng.uniform(0.05, 0.5, x.size)),), acceptance=make_acceptance(None, None))
    target = build_target(brief)
    full = curves(target, X, FORCE * target.net.total / FORCE.sum())
    few = thinned(full, X)
    assert few.x.size < MOST_ROWS < full.x.size
    for quantity in ("shear", "moment"):
        assert few.error(quantity).max() == full.error(quantity).max()
        assert few.error(quantity).min() == full.error(quantity).min()


def test_few_rows_are_left_alone():
    target = build_target(make_brief())
    full = curves(target, X, FORCE)
    assert thinned(full, X) is full


def test_a_pad_off_the_specimen_still_has_curves():
    found = check(make_rig([0.5, 3.6], [3000.0, 2400.0], make_brief(specimen=make_specimen())))
    assert found.curves.x[-1] == 3.6
    assert found.statics.pad_force == pytest.approx([3000.0, 2400.0])
