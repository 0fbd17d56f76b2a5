"""Rigs that are kept: what stays, where new pivots are, what is said, and what cannot be kept."""

from __future__ import annotations

from dataclasses import replace
from functools import cache

import numpy as np
import pytest
from factories import array, make_acceptance, make_brief, make_pads, make_specimen, point_loads, shape_load, table_load
from hand_plan_rigs import accept, forces, make_plan_rig, outline, panel, plan_brief, pressure
from lever_plans import best_plan, brief_of, plan_by_hand

from rigdesign.brief.model import Brief
from rigdesign.checks import check
from rigdesign.checks.geometry import leans
from rigdesign.errors import InputError
from rigdesign.findings import Refusal
from rigdesign.levers import build_rig
from rigdesign.levers.keep import Kept, keep_rig
from rigdesign.levers.model import Rig
from rigdesign.pads.surface.shares import tributary_shares
from rigdesign.target import build_target


@cache
def old_rig(count: int = 8) -> Rig:
    """Free pads under an elliptical load of 5.4 kN."""
    rig = build_rig(best_plan(brief_of(count, shear=0.12), count))
    assert isinstance(rig, Rig)
    return rig


def heavier_tip(part: float, total: float = 5400.0, **changes: object) -> Brief:
    """The same with a point load near the tip of this part of the total."""
    loads = (shape_load(total=total), point_loads(2.9, part * total))
    return brief_of(8, shear=0.12, **{"loads": loads, **changes})


def kept_of(rig: Rig, brief: Brief, distance: float | None = 0.03, **diameters: float) -> Kept:
    kept = keep_rig(rig, build_target(brief), distance, {name.replace("_", " "): d for name, d in diameters.items()})
    assert isinstance(kept, Kept)
    return kept


def test_an_unchanged_target_moves_nothing():
    rig = old_rig()
    kept = kept_of(rig, rig.plan.target.brief)
    assert kept.moved == ()
    assert kept.before == kept.after == pytest.approx(check(rig).band_use, rel=1e-3)
    for old, new in zip(rig.trees[0].pieces, kept.rig.trees[0].pieces, strict=True):
        assert (old.name, old.tier, old.parent) == (new.name, new.tier, new.parent)
        for one, other in zip(old.holes, new.holes, strict=True):
            assert (one.name, one.joins) == (other.name, other.joins)
            np.testing.assert_allclose((other.u, other.v, other.x, other.y), (one.u, one.v, one.x, one.y), atol=1e-12)
    assert kept.rig.trees[0].force == pytest.approx(rig.trees[0].force, rel=1e-12)
    assert "no pivot is drilled anew" in kept.rig.findings[0].text
    assert kept.words == f"kept rig: no pivot drilled anew, band use {kept.after:.3g} as the search judges"


def test_more_of_the_same_load_moves_nothing_and_pulls_harder():
    kept = kept_of(old_rig(), brief_of(8, shear=0.12, loads=(shape_load(total=7020.0),)))
    assert kept.moved == ()
    assert kept.rig.trees[0].force == pytest.approx(7020.0, rel=1e-9)
    assert check(kept.rig).accepted


@pytest.mark.parametrize("part", [0.03, 0.08])
def test_new_pivots_are_on_the_step_apart_from_the_old_and_outer_holes_stay(part):
    rig = old_rig()
    kept = kept_of(rig, heavier_tip(part))
    checked = check(kept.rig)
    assert kept.before > 1.0
    assert check(kept.rig).accepted
    assert checked.band_use == pytest.approx(kept.after, rel=1e-3)
    assert 0 < len(kept.moved) < len(rig.trees[0].pieces)
    np.testing.assert_array_equal(kept.rig.pad_x, rig.pad_x)
    moved = {pivot.piece: pivot for pivot in kept.moved}
    for old, new in zip(rig.trees[0].pieces, kept.rig.trees[0].pieces, strict=True):
        length = old.ends[1].u - old.ends[0].u
        assert new.ends[1].u - new.ends[0].u == pytest.approx(length, abs=1e-12)
        if new.name not in moved:
            assert new.ends[0].u == pytest.approx(old.ends[0].u, abs=1e-12)
            continue
        pivot = moved[new.name]
        assert (pivot.hole, pivot.old_v, pivot.new_v) == ("pivot", 0.0, 0.0)
        assert pivot.old_u == pytest.approx(-old.ends[0].u, abs=1e-12)
        assert pivot.new_u == pytest.approx(-new.ends[0].u, abs=1e-12)
        assert pivot.distance == pytest.approx(abs(pivot.new_u - pivot.old_u))
        assert pivot.keeps_distance
        assert pivot.distance >= 0.03 - 1e-12
        assert pivot.new_u * 1e3 == pytest.approx(round(pivot.new_u * 1e3), abs=1e-6)


def pulls(rig: Rig) -> np.ndarray:
    """What the leans of each piece's lower links, times their forces, do to it: sums along x and y, turn; (n, 3)."""
    statics = check(rig).statics
    load = dict(statics.piece_load) | {f"pad {i + 1}": f for i, f in enumerate(statics.pad_force)}
    pieces = {piece.name: piece for piece in rig.trees[0].pieces}
    result = {name: np.zeros(3) for name in pieces}
    for lean in leans(rig):
        if lean.upper in pieces:
            piece = pieces[lean.upper]
            hole = next(hole for hole in piece.ends if hole.name == lean.hole)
            x, y = hole.x - piece.pivot.x, hole.y - piece.pivot.y
            result[lean.upper] += load[lean.joins] * np.array([lean.dx, lean.dy, x * lean.dy - y * lean.dx])
    return np.array(list(result.values()))


def test_the_rig_hangs_in_balance_where_it_is_drawn():
    """Jack and pads are in balance in plan, and the leans of a piece's links neither pull nor turn it."""
    kept = kept_of(old_rig(), heavier_tip(0.08))
    assert check(kept.rig).moment_sum_residual < 1e-12
    # holes are rounded to 1e-12 m, under some kN
    assert np.abs(pulls(kept.rig)).max() < 1e-8
    assert leans(kept.rig)[0].size < 1e-12


def test_plates_hang_in_balance_too():
    kept = kept_of(panel_rig(), panel_brief(600.0, 900.0, share=0.1), 0.0)
    assert len(kept.moved) > 2
    assert max(lean.size for lean in leans(kept.rig)) > 0.005
    # holes are rounded to 1e-12 m, under some kN
    assert np.abs(pulls(kept.rig)).max() < 1e-8
    assert check(kept.rig).moment_sum_residual < 1e-12


def test_the_plan_is_the_new_targets_with_pads_where_they_are():
    rig = old_rig()
    kept = kept_of(rig, heavier_tip(0.08))
    plan = kept.rig.plan
    np.testing.assert_array_equal(plan.x, rig.pad_x)
    assert not plan.may_move
    assert plan.target.resultant == pytest.approx(5400.0 * 1.08)
    assert plan.force.sum() == pytest.approx(5400.0 * 1.08)
    assert plan.share.sum() == pytest.approx(5400.0 * 1.08)
    # drilled forces are those that were wanted, within what a step of 1 mm does
    np.testing.assert_allclose(check(kept.rig).statics.pad_force, plan.force, rtol=0.05)
    assert 0 < plan.proof.band_use_least <= plan.proof.band_use <= 1.0
    assert 0 < plan.proof.moment_error_least <= check(kept.rig).moment_error_peak


def test_two_hole_diameters_are_kept_where_no_distance_is_given():
    pieces = [piece.name.replace(" ", "_") for piece in old_rig().trees[0].pieces]
    kept = kept_of(old_rig(), heavier_tip(0.03), None, **dict.fromkeys(pieces, 0.026))
    assert kept.moved
    assert all(pivot.required == pytest.approx(0.052) for pivot in kept.moved)
    assert all(pivot.distance >= 0.052 - 1e-12 for pivot in kept.moved)
    assert check(kept.rig).accepted


def test_a_pivot_near_an_outer_hole_is_told():
    pieces = [piece.name.replace(" ", "_") for piece in old_rig().trees[0].pieces]
    kept = kept_of(old_rig(), heavier_tip(0.08), 0.01, **dict.fromkeys(pieces, 0.5))
    assert any("too close to hole" in f.text and f.limit.startswith("1000 mm") for f in kept.rig.findings)
    assert not any("too close to hole" in f.text for f in kept_of(old_rig(), heavier_tip(0.08), 0.01).rig.findings)


def test_ratio_limit_and_pad_limits_hold_for_new_pivots():
    free = check(kept_of(old_rig(), heavier_tip(0.08)).rig)
    largest = float(free.statics.pad_force.max())
    brief = heavier_tip(0.08, pads={"largest_force": 0.99 * largest})
    limited = kept_of(old_rig(), brief)
    assert check(limited.rig).statics.pad_force.max() <= 0.99 * largest * (1 + 1e-9)
    assert check(limited.rig).accepted
    ratios = [max(-p.ends[0].u, p.ends[1].u) / min(-p.ends[0].u, p.ends[1].u) for p in free.rig.trees[0].pieces]
    tight = kept_of(old_rig(), heavier_tip(0.08, levers={"ratio_limit": 0.98 * max(ratios)}))
    assert not any(f.severity == "failure" for f in check(tight.rig).findings)


def test_a_load_the_other_way_is_told():
    kept = kept_of(old_rig(), brief_of(8, shear=0.12, loads=(shape_load(total=-5400.0),)))
    assert kept.moved == ()
    assert kept.rig.trees[0].force == pytest.approx(-5400.0)
    assert [f.object for f in kept.rig.findings if f.severity == "warning"] == ["jack 1"]
    assert check(kept.rig).accepted


def test_what_the_brief_asks_otherwise_is_told():
    other = make_brief(
        pads=make_pads(count=5, places="fixed", stations=array([0.5, 1.0, 1.5, 2.0, 3.0]), length=0.01),
        loads=(shape_load(),),
        acceptance=make_acceptance(0.02, 0.12),
    )
    texts = [f.text for f in kept_of(old_rig(), other).rig.findings]
    assert any("the brief asks for 5 pads" in text for text in texts)
    assert any("places of pads are not those of the kept rig" in text for text in texts)


def test_two_supports_answer_for_a_jack_off_the_resultant():
    specimen = make_specimen(support="two supports", left=0.0, right=4.0, supports=(0.4, 3.5))
    changes = {"specimen": specimen, "acceptance": make_acceptance(0.08, 0.3)}
    load = table_load([0.0, 4.0], [900.0, 1500.0])
    old, new = (brief_of(7, loads=(load, *more), **changes) for more in ((), (point_loads(3.7, 600.0),)))
    target = build_target(old)
    x = np.array([0.3, 0.9, 1.4, 2.1, 2.6, 3.1, 3.7])
    middle = np.concatenate([[0.0], 0.5 * (x[1:] + x[:-1]), [4.0]])
    share = -np.diff(target.net.force_beyond(middle, "outboard"))
    rig = build_rig(plan_by_hand(old, x, share, may_move=False))
    assert isinstance(rig, Rig)
    kept = kept_of(rig, new)
    assert kept.before > 2.0
    assert len(kept.moved) == 2
    assert check(kept.rig).accepted
    assert abs(check(kept.rig).jack_offset) > 1e-3
    assert check(kept.rig).band_use == pytest.approx(kept.after, rel=1e-3)


def panel_brief(slope_x: float, slope_y: float = 30.0, share: float | None = None) -> Brief:
    """A panel of 2 m × 1.2 m on two supports under a pressure that grows along x and y."""
    bands = accept(moment=0.2, shear=0.5, torsion=0.3, share=share)
    return plan_brief(panel(), loads=(pressure(1000.0, slope_x, slope_y),), acceptance=bands)


def panel_rig() -> Rig:
    """Nine pads on three plates that a plate joins, drilled exactly for the tributary shares of 1000 Pa and a slope."""
    x, y = (grid.ravel() for grid in np.meshgrid([0.35, 1.0, 1.65], [-0.3, 0.1, 0.5], indexing="ij"))
    x = x + np.tile([0.0, 0.08, 0.0], 3)
    brief = panel_brief(0.0)
    share = tributary_shares(build_target(brief), x, y)
    return make_plan_rig(x, y, share, brief=brief, group=((1, 2, 3), ((4, 5, 6), (7, 8, 9))))


def test_plates_pivots_move_in_their_plane():
    rig = panel_rig()
    assert check(rig).band_use < 1.0
    kept = kept_of(rig, panel_brief(420.0), 0.02)
    assert kept.before > 1.0
    assert kept.moved
    checked = check(kept.rig)
    assert checked.band_use <= 1.0
    assert checked.band_use == pytest.approx(kept.after, rel=1e-3)
    assert checked.moment_sum_residual < 1e-12
    for old, new in zip(rig.trees[0].pieces, kept.rig.trees[0].pieces, strict=True):
        for i in (1, len(old.ends) - 1):
            one, other = (np.hypot(p.ends[i].u - p.ends[0].u, p.ends[i].v - p.ends[0].v) for p in (old, new))
            assert one == pytest.approx(other, abs=1e-12)


def test_a_plates_distance_is_kept_in_any_direction():
    """A load whose centre moves across alone moves pivots along v."""
    kept = kept_of(panel_rig(), panel_brief(0.0, 1200.0), 0.05)
    assert kept.before > 1.5
    assert len(kept.moved) == kept.fewest_moved == 1
    assert abs(kept.moved[0].new_v - kept.moved[0].old_v) > 0.03
    assert kept.moved[0].distance >= 0.05 - 1e-9
    assert check(kept.rig).band_use <= 1.0


def test_shares_of_a_panels_pads_are_kept():
    kept, free = (kept_of(panel_rig(), panel_brief(420.0, share=share), 0.02) for share in (0.12, None))
    assert check(kept.rig).evenness <= 0.12 * (1 + 1e-9)
    assert check(free.rig).evenness > 0.12
    assert len(kept.moved) > len(free.moved)


def test_one_pad_on_the_jack_has_no_pivot():
    rig = build_rig(best_plan(brief_of(1, acceptance=make_acceptance(2.0, None)), 1))
    assert isinstance(rig, Rig)
    kept = kept_of(rig, brief_of(1, acceptance=make_acceptance(0.01, None), loads=(point_loads(1.1, 900.0),)))
    assert kept.moved == ()
    assert kept.rig.trees[0].force == pytest.approx(900.0)
    assert not check(kept.rig).accepted


def test_pads_off_the_new_specimen_are_refused():
    brief = brief_of(8)
    short = replace(
        brief,
        specimen=make_specimen(left=0.2, right=3.0),
        loads=(table_load([0.2, 3.0], [900.0, 500.0]),),
    )
    with pytest.raises(InputError, match=r"kept rig, pad 8: .* off the specimen: x = 3\.\d+ m"):
        keep_rig(old_rig(), build_target(short), 0.03, {})
    narrow = replace(panel_brief(0.0), specimen=panel(right=1.5, supports=(0.1, 1.4)))
    narrow = replace(narrow, loads=(forces([0.5], [0.1], [900.0]),))
    corners = ((0.0, -0.5), (1.5, -0.5), (1.5, 0.7), (0.0, 0.7))
    narrow = replace(narrow, specimen=replace(narrow.specimen, outline=outline(corners)))
    with pytest.raises(InputError, match=r"kept rig, pad 7: .*accepted: on the outline"):
        keep_rig(panel_rig(), build_target(narrow), 0.03, {})


def test_a_plan_rig_cannot_be_kept_on_a_line():
    with pytest.raises(InputError, match="pad 1: a pad of the kept rig stands off the specimen"):
        keep_rig(panel_rig(), build_target(brief_of(8)), 0.03, {})


def test_without_diameters_a_distance_must_be_given():
    with pytest.raises(InputError, match='give "hole_distance" in'):
        keep_rig(old_rig(), build_target(heavier_tip(0.03)), None, {"lever 1": 0.02})


def test_several_jacks_are_refused():
    rig = old_rig()
    with pytest.raises(InputError, match="one jack alone: 2 jacks"):
        keep_rig(replace(rig, trees=rig.trees * 2), rig.plan.target, 0.03, {})


def test_pads_too_weak_for_the_sum_are_a_refusal():
    refusal = keep_rig(old_rig(), build_target(heavier_tip(0.03, pads={"largest_force": 300.0})), 0.03, {})
    assert isinstance(refusal, Refusal)
    assert refusal.best == "8 pads for 5.56 kN"


def test_twenty_four_pads_with_more_load_on_the_outer_third():
    """Everything outboard of two thirds of the span grows by 12 %: one pivot does, and it is found with proof."""
    x = np.linspace(0.2, 3.4, 161)
    load = 2150.0 * np.sqrt(np.maximum(1.0 - ((x - 0.2) / 3.2) ** 2, 0.0))
    old, new = (
        brief_of(24, loads=(table_load(x, load * np.where(x > 0.2 + 3.2 * 2 / 3, 1.0 + grown, 1.0)),),
                 acceptance=make_acceptance(0.01, 0.12))
        for grown in (0.0, 0.12)
    )  # fmt: skip
    rig = build_rig(best_plan(old, 24))
    assert isinstance(rig, Rig)
    kept = kept_of(rig, new, 0.02)
    assert kept.before > 2.0
    assert len(kept.moved) == kept.fewest_moved == 1
    assert check(kept.rig).accepted
    assert kept.words.endswith("proven: no fewer keep the bands")
