"""V, M and T of target and rig in plan: by their definitions, at every jump, every peak found; across as well."""

from __future__ import annotations

from dataclasses import replace
from itertools import pairwise

import numpy as np
import pytest
from factories import array, band_rules, make_brief, make_weight, point_loads, shape_load
from hand_plan_rigs import accept, forces, line, line_load, make_plan_rig, outline, panel, plan_brief, pressure, surface
from hand_rigs import make_rig

from rigdesign.brief.model import CoupleLoad, Region, TorqueLoad
from rigdesign.checks import check
from rigdesign.checks.curves import curves
from rigdesign.checks.errors import reference
from rigdesign.checks.samplers import sampler
from rigdesign.checks.sampling import local_errors
from rigdesign.checks.surface.stations import sampler_in_plan
from rigdesign.target import build_target
from rigdesign.target.cuts import ACROSS

X = np.array([0.52, 0.61, 1.43, 1.66, 2.71, 2.93])
Y = np.array([-0.21, 0.33, -0.36, 0.17, -0.52, -0.29])
FORCE = np.array([700.0, 640.0, 450.0, 380.0, 260.0, 150.0])
GROUP = ((1, 2), (3, 4, (5, 6)))
KINKED = line((0.2, 0.10), (1.9, -0.05), (3.4, -0.50))
LOCAL = accept(
    regions=(
        Region("0.8 m to 2.1 m", 0.8, 2.1, band_rules("torsion", 0.3, 0.5, of="local")),
        Region("1.2 m to 3.0 m", 1.2, 3.0, band_rules("shear", 0.5, 0.6, of="local")),
    ),
    across=0.05,
)
TORQUE = TorqueLoad(array([0.2, 1.0, 3.4]), array([90.0, 60.0, -20.0]), 1.0, "piece.toml, [[load]] torque")
COUPLE = CoupleLoad(1.25, 130.0, 1.0, "piece.toml, [[load]] couple")
BRIEFS = {
    "pressure": plan_brief(acceptance=LOCAL),
    "points": plan_brief(loads=(forces([0.7, 1.9, 2.6], [0.2, -0.1, -0.4], [900.0, 700.0, 400.0]),), acceptance=LOCAL),
    "kinked axis, square to it": plan_brief(
        surface(axis=KINKED, cut="square to axis"), loads=(pressure(800.0, -100.0), TORQUE, COUPLE), acceptance=LOCAL
    ),
    "weight on a line": plan_brief(
        surface(
            axis=KINKED,
            weight=make_weight([0.2, 1.4, 3.4], [31.0, 12.0, 7.0], [0.9], [8.0]),
            weight_line=line((0.2, 0.0), (3.4, -0.45)),
        ),
        loads=(line_load(2600.0, line((0.2, 0.07), (3.4, -0.44))), COUPLE),
        acceptance=LOCAL,
    ),
    "two supports": plan_brief(panel(axis=line((0.0, 0.1), (2.0, 0.2))), acceptance=LOCAL),
    "two supports, square to the axis": plan_brief(
        panel(axis=line((0.0, 0.1), (1.1, 0.15), (2.0, 0.05)), cut="square to axis"), acceptance=LOCAL
    ),
}


def places(brief):
    """The pads of a brief: six on the wing; on the panel, which is shorter, the same drawn in."""
    if brief.specimen.supports:
        return 0.6 * X - 0.1, Y + 0.2
    return X, Y


@pytest.fixture(params=BRIEFS, scope="module")
def known(request):
    """Target, pads (x, y, force), and the checked rig."""
    brief = BRIEFS[request.param]
    target = build_target(brief)
    x, y = places(brief)
    force = FORCE * target.net.total / FORCE.sum()
    return target, x, y, force, check(make_plan_rig(x, y, force, group=GROUP, target=target))


def by_definition(specimen, quantity, at, side, x, y, force):
    """V, M or T of point loads by the definition, one cut after the other; reactions left out."""
    axis = specimen.reference_axis
    result = []
    for station in at:
        if quantity in ACROSS:
            ax, ay, px, py = 0.0, 1.0, 0.0, station
        else:
            slope = np.diff(axis.y) / np.diff(axis.x)
            rows = (
                np.flatnonzero(axis.x[:-1] < station) if side == "inboard" else np.flatnonzero(axis.x[:-1] <= station)
            )
            row = rows[-1] if rows.size else 0
            px, py = station, axis.y[row] + slope[row] * (station - axis.x[row])
            ax, ay = (
                (1.0, 0.0) if specimen.cut == "square to x" else np.array([1, slope[row]]) / np.hypot(1, slope[row])
            )
        total = 0.0
        for one_x, one_y, one in zip(x, y, force, strict=True):
            d = (one_x - px) * ax + (one_y - py) * ay
            if d > 1e-8 or (abs(d) <= 1e-8 and side == "inboard"):
                left = (one_y - py) * ax - (one_x - px) * ay
                total += one * {"shear": 1.0, "moment": d, "torsion": left}[quantity.split()[0]]
        result.append(total)
    return np.array(result)


@pytest.mark.parametrize("cut", ["square to x", "square to axis"])
def test_curves_are_what_the_definition_says_at_every_row(cut):
    brief = plan_brief(surface(axis=KINKED, cut=cut), loads=BRIEFS["points"].loads)
    target = build_target(brief)
    found = check(make_plan_rig(X, Y, FORCE, group=GROUP, target=target))
    (load,) = brief.loads
    for quantity in ("shear", "moment", "torsion", "shear across", "moment across"):
        rows = found.curves_of(quantity)
        for outboard, side in ((False, "inboard"), (True, "outboard")):
            at = rows.x[rows.outboard == outboard]
            for values, loads in ((rows.rig, (X, Y, FORCE)), (rows.target, (load.x, load.y, load.force))):
                expected = by_definition(brief.specimen, quantity, at, side, *loads)
                # cuts at jumps stand 3 nm off them, which is worth 1e-5 N·m where some 2 kN lie beyond
                assert values[quantity][rows.outboard == outboard] == pytest.approx(expected, abs=2e-5), quantity


def test_no_dense_sampling_finds_a_higher_peak(known):
    target, x, y, force, found = known
    specimen = target.brief.specimen
    for rows, quantities in ((found.curves, ("shear", "moment", "torsion")), (found.across, ACROSS)):
        sample = sampler_in_plan(target, x, y, force, quantities)
        at = np.linspace(rows.x[0], rows.x[-1], 40_001)
        # not on a jump, where the side matters and not the place
        at = at[np.abs(at[:, None] - sample.jump).min(axis=1) > 1e-8 * (specimen.right - specimen.left)]
        dense = sample.rows(at, np.ones(at.size, bool))
        for quantity in quantities:
            size = reference(target, quantity).size
            for name, many, few in (
                ("error", np.abs(dense.error(quantity)), np.abs(rows.error(quantity))),
                ("use", dense.use(quantity), rows.use(quantity)),
                ("local", local_errors(dense, quantity, size), local_errors(rows, quantity, size)),
            ):
                # closed in on to rounding of these values; cuts at jumps stand 1e-9 of the span off
                assert many.max() <= few.max() * (1 + 1e-7), (quantity, name)
                # and no peak is made up: dense samples come as near as their spacing, a tenth of a millimetre, allows
                assert many.max() >= few.max() * (1 - 5e-3), (quantity, name)
            assert found.errors[quantity].peak == pytest.approx(np.abs(rows.error(quantity)).max() / size, rel=1e-12)


def test_the_torsion_s_error_is_found_where_it_turns_between_stations_though_nothing_judges_it():
    brief = plan_brief(
        surface(axis=line((0.2, -0.3), (3.4, 0.2))),
        loads=(pressure(900.0, -150.0, -400.0),),
        acceptance=accept(torsion=None),
    )
    target = build_target(brief)
    x, y, force = np.array([0.9, 2.4]), np.array([0.0, -0.3]), np.array([0.6, 0.4]) * target.net.total
    rows = curves(target, x, force, y)
    error = np.abs(rows.error("torsion"))
    at = rows.x[np.argmax(error)]
    assert 0.8 < at < 0.88
    close = np.linspace(at - 2e-3, at + 2e-3, 4001)
    dense = sampler(target, x, force, y).rows(close, np.ones(close.size, bool))
    # even stations are 8 mm apart: the nearest of them would miss by a part in a million
    assert np.abs(dense.error("torsion")).max() <= error.max() * (1 + 1e-10)


def test_a_couple_is_a_jump_of_the_torsion_with_both_its_sides():
    target = build_target(BRIEFS["weight on a line"])
    rows = curves(target, X, FORCE, Y)
    at = np.flatnonzero(rows.x == 1.25)
    assert rows.outboard[at].tolist() == [False, True]
    assert np.diff(rows.target["torsion"][at]) == pytest.approx(-130.0, abs=1e-4)
    assert np.diff(rows.target["shear"][at]) == pytest.approx(0.0, abs=1e-4)


def test_the_area_between_the_shear_curves_is_its_integral(known):
    target, x, y, force, found = known
    sample = sampler_in_plan(target, x, y, force, ("shear", "moment", "torsion"))
    edges = sample.jump
    total = 0.0
    for low, high in pairwise(edges):
        middle = low + (np.arange(4000) + 0.5) / 4000 * (high - low)
        error = sample.rows(middle, np.ones(middle.size, bool), ("shear",)).error("shear")
        total += np.abs(error).mean() * (high - low)
    # midpoints of 4000 strips a stretch miss by about 1e-7 of it
    assert found.shear_area == pytest.approx(total, rel=1e-5)


def test_band_use_is_the_largest_of_all_that_is_judged(known):
    found = known[-1]
    uses = [found.curves_of(q).use(q).max() for q in ("shear", "moment", "torsion", *ACROSS)]
    assert found.band_use == pytest.approx(max(uses), rel=1e-12)
    assert {row.quantity for row in found.regions if row.name == "whole width"} == set(ACROSS)
    whole = [row.quantity for row in found.regions if row.name == "whole span"]
    assert whole == ["shear", "moment", "torsion"]
    assert found.across.x[0] == pytest.approx(found.rig.plan.target.brief.specimen.outline.y.min())
    assert found.across.x[-1] == pytest.approx(found.rig.plan.target.brief.specimen.outline.y.max())


def test_torsion_alone_can_break_the_bands_and_so_can_what_is_cut_across():
    brief = plan_brief(acceptance=accept(9.0, 9.0, 0.05))
    assert not check(make_plan_rig(X, Y + 0.1, FORCE, brief, GROUP)).accepted
    brief = plan_brief(acceptance=accept(9.0, 9.0, None, across=0.05))
    found = check(make_plan_rig(X, Y, FORCE, brief, GROUP))
    assert not found.accepted
    assert found.band_use == max(row.use for row in found.regions if row.quantity in ACROSS)
    assert check(make_plan_rig(X, Y, FORCE, plan_brief(acceptance=accept(9.0, 9.0, None)), GROUP)).accepted


@pytest.mark.parametrize("cut", ["square to x", "square to axis"])
def test_pads_of_one_rib_are_on_one_cut_whatever_the_last_digit(cut):
    """Two pads that balance each other about the axis make no torsion, even where rounding puts one of them first."""
    specimen = panel(support="cantilever", supports=(), axis=line((0.0, 0.1), (2.0, 0.1)), cut=cut)
    brief = plan_brief(specimen, loads=(pressure(1000.0),), acceptance=accept(torsion=0.05))
    x = np.array([0.5, 0.5 + 1e-15, 1.5 * (1 + 2**-52), 1.5])
    y = np.array([-0.2, 0.4, -0.2, 0.4])
    found = check(make_plan_rig(x, y, np.full(4, 600.0), brief))
    # two rows a rib, and that for its two pads together
    assert [int((np.abs(found.curves.x - rib) < 1e-9).sum()) for rib in (0.5, 1.5)] == [2, 2]
    # 2 nm times 600 N at most
    assert np.abs(found.curves.error("torsion")).max() < 1e-5
    # a uniform pressure has no torsion about the middle: errors are fractions of what would be one
    assert found.errors["torsion"].of == "the resultant times the outline's mean width"
    assert found.errors["torsion"].reference == pytest.approx(2400.0 * 1.2)
    assert found.errors["torsion"].local is None
    # 1 kN at 0.06 m off the axis twists by 60 N·m, 2 % of 2880
    twisted = check(make_plan_rig(x[2:], y[2:] + 0.05, np.full(2, 1200.0), brief))
    assert twisted.torsion_error_peak == pytest.approx(2400 * 0.05 / 2880)


def test_a_line_rig_has_no_torsion_and_nothing_across():
    found = check(make_rig([0.9, 2.1], [3000.0, 2400.0]))
    assert (found.across, found.torsion_error_peak, found.across_error_peak, found.share_error) == (None,) * 4
    assert set(found.errors) == {"shear", "moment"}
    with pytest.raises(KeyError, match="torsion"):
        found.curves_of("torsion")


def test_shares_are_those_of_the_pads_cells():
    """A quarter of the panel to each of four pads at the centres of its quarters; moved off, the borders move."""
    brief = plan_brief(panel(), loads=(pressure(1000.0),), acceptance=accept(share=0.1))
    x, y = np.array([0.5, 0.5, 1.5, 1.5]), np.array([-0.2, 0.4, -0.2, 0.4])
    found = check(make_plan_rig(x, y, np.full(4, 600.0), brief))
    assert found.share_of_curve == pytest.approx(np.full(4, 600.0))
    assert found.share_error == pytest.approx(0.0, abs=1e-12)
    moved = check(make_plan_rig([0.5, 0.5, 1.3, 1.3], y, np.full(4, 600.0), brief))
    # the border moves from 1.0 to 0.9 m: 0.9 m times 0.6 m inboard, 1.1 m outboard
    assert moved.share_of_curve == pytest.approx([540.0, 540.0, 660.0, 660.0])
    assert moved.share_error == pytest.approx(60 / 540)
    assert moved.share_error_pad in (1, 2)


def test_with_every_y_zero_the_numbers_are_the_line_rig_s():
    x = np.array([0.5, 0.97, 1.6, 2.0, 2.9])
    force = np.array([1800.0, 1190.0, 1120.0, 900.0, 390.0])
    loads = (shape_load(), point_loads([1.1, 1.6], [350.0, -220.0]))
    flat = outline(((0.2, -0.3), (3.4, -0.3), (3.4, 0.3), (0.2, 0.3)))
    regions = (Region("0.8 m to 2.1 m", 0.8, 2.1, band_rules("moment", 0.04, 0.06, of="local")),)
    brief = make_brief(loads=loads, acceptance=accept(torsion=None, regions=regions))
    in_plan = replace(brief, specimen=replace(brief.specimen, outline=flat))
    force *= build_target(brief).net.total / force.sum()
    group = ((1, 2), (3, (4, 5)))
    one, other = check(make_rig(x, force, brief, group)), check(make_plan_rig(x, 0 * x, force, in_plan, group))
    assert other.statics.share == pytest.approx(one.statics.share, rel=1e-12)
    assert other.share_of_curve == pytest.approx(one.share_of_curve, rel=1e-9)
    for name in ("moment_error_peak", "shear_error_peak", "moment_error_local", "shear_error_local", "band_use",
                 "shear_area", "steel_estimate", "evenness"):  # fmt: skip
        # cuts at jumps stand 3 nm off them on a surface
        assert getattr(other, name) == pytest.approx(getattr(one, name), rel=1e-7), name
    assert (other.jack_offset, other.jack_offset_y) == pytest.approx((one.jack_offset, 0.0), abs=1e-12)
    assert np.abs(other.curves.rig["torsion"]).max() < 1e-9
    assert other.torsion_error_peak < 1e-12
    for quantity in ("shear", "moment"):
        at = np.linspace(0.21, 3.39, 57)
        sides = np.ones(at.size, bool)
        line_rows = sampler(one.rig.plan.target, x, force).rows(at, sides)
        plan_rows = sampler(other.rig.plan.target, x, force, 0 * x).rows(at, sides)
        assert plan_rows.rig[quantity] == pytest.approx(line_rows.rig[quantity], rel=1e-9, abs=1e-9)
        assert plan_rows.target[quantity] == pytest.approx(line_rows.target[quantity], rel=1e-9, abs=1e-9)


def test_the_jack_s_offset_in_plan_and_the_sums():
    brief = plan_brief()
    rig = make_plan_rig(X, Y, FORCE, brief, GROUP)
    sums = rig.plan.target.net_plan.sums
    found = check(rig)
    assert found.jack_offset == pytest.approx(X @ FORCE / FORCE.sum() - sums.first_x / sums.force)
    assert found.jack_offset_y == pytest.approx(Y @ FORCE / FORCE.sum() - sums.first_y / sums.force)
    assert max(found.sum_residual, found.moment_sum_residual) < 1e-14
    moved = check(replace(rig, pad_y=rig.pad_y + np.array([0, 0, 0.01, 0, 0, 0])))
    # pad 3 alone is 10 mm from where its plate thinks: its force times that over all forces times the span
    assert moved.moment_sum_residual == pytest.approx(0.01 * FORCE[2] / FORCE.sum() / 3.2)


def test_curves_of_pads_alone_take_their_places_across():
    target = build_target(BRIEFS["pressure"])
    rows = curves(target, X, FORCE, Y)
    assert rows.rig["torsion"].max() != curves(target, X, FORCE, -Y).rig["torsion"].max()
