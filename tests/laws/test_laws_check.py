"""Laws of the check, over random trees and loads."""

from __future__ import annotations

import numpy as np
import pytest
from factories import band_rules, make_acceptance, make_brief, make_specimen, shape_load, two_supports
from hand_rigs import Group, make_rig
from hypothesis import given, settings
from hypothesis import strategies as st

from rigdesign.brief.model import Acceptance
from rigdesign.checks import check, share_matrix, solve_statics

FEW = settings(max_examples=25, deadline=None, derandomize=True)
# a band that differs by side and follows the local value, so that a mistaken sign or station shows
ACCEPT = Acceptance(
    band_rules("moment", 0.1, 0.2, of="local") + band_rules("shear", 0.3, 0.2), regions=(), defaulted=False
)


@st.composite
def grouped(draw: st.DrawFn, first: int, last: int) -> Group:
    """Any grouping of neighbours."""
    if first == last:
        return first
    split = draw(st.integers(first, last - 1))
    return (draw(grouped(first, split)), draw(grouped(split + 1, last)))


@st.composite
def pads(draw: st.DrawFn) -> tuple[np.ndarray, np.ndarray, Group]:
    """Places in a span of 3.2 m from 0.2 m, forces, and a grouping."""
    count = draw(st.integers(1, 9))
    gaps = draw(st.lists(st.integers(1, 9), min_size=count + 1, max_size=count + 1))
    force = draw(st.lists(st.integers(1, 40), min_size=count, max_size=count))
    x = 0.2 + 3.2 * np.cumsum(gaps)[:-1] / sum(gaps)
    return x, np.array(force, dtype=float) * 5400.0 / sum(force), draw(grouped(1, count))


@FEW
@given(pads())
def test_statics_closes_and_gives_back_what_the_pivots_were_drilled_for(known):
    x, force, group = known
    found = check(make_rig(x, force, make_brief(acceptance=ACCEPT), group))
    # a chain of nine levers loses a few digits of sixteen
    assert found.statics.pad_force == pytest.approx(force, rel=1e-9)
    assert max(found.statics.force_residual, found.statics.moment_residual) < 1e-12
    assert max(found.sum_residual, found.moment_sum_residual) < 1e-12
    assert found.statics.share.sum() == pytest.approx(1.0, abs=1e-12)


@FEW
@given(pads(), st.sampled_from([-1.0, 0.37, 25.0]))
def test_forces_scale_with_the_load_and_shares_do_not(known, scale):
    x, force, group = known
    one = check(make_rig(x, force, make_brief(acceptance=ACCEPT), group))
    brief = make_brief(loads=(shape_load(total=5400.0 * scale),), acceptance=ACCEPT)
    other = check(make_rig(x, force * scale, brief, group))
    assert other.statics.pad_force == pytest.approx(scale * one.statics.pad_force, rel=1e-9)
    assert share_matrix(other.rig) == pytest.approx(share_matrix(one.rig))
    assert other.band_use == pytest.approx(one.band_use, rel=1e-6)
    assert other.moment_error_peak == pytest.approx(one.moment_error_peak, rel=1e-6)


@FEW
@given(pads(), st.sampled_from([-7.5, 0.81, 40.0]))
def test_a_shifted_origin_shifts_the_places_and_nothing_else(known, shift):
    x, force, group = known
    one = check(make_rig(x, force, make_brief(acceptance=ACCEPT), group))
    brief = make_brief(
        specimen=make_specimen(left=0.2 + shift, right=3.4 + shift),
        loads=(shape_load(start_x=0.2 + shift, end_x=3.4 + shift),),
        acceptance=ACCEPT,
    )
    other = check(make_rig(x + shift, force, brief, group))
    assert other.band_use == pytest.approx(one.band_use, rel=1e-6)
    assert other.shear_area == pytest.approx(one.shear_area, rel=1e-6)
    assert other.jack_offset == pytest.approx(one.jack_offset, abs=1e-9)
    assert other.moment_error_peak == pytest.approx(one.moment_error_peak, rel=1e-6)


@FEW
@given(pads())
def test_a_mirrored_specimen_on_two_supports_has_the_same_errors(known):
    x, force, group = known
    load = {"start_x": 0.5, "end_x": 3.1}
    accept = make_acceptance(0.1, 0.3)
    brief = make_brief(
        specimen=two_supports(0.2, 0.6, 2.5, 3.4),
        loads=(shape_load("triangular", 5400.0, greatest="root", **load),),
        acceptance=accept,
    )
    mirrored = make_brief(
        specimen=two_supports(-3.4, -2.5, -0.6, -0.2),
        loads=(shape_load("triangular", 5400.0, greatest="tip", start_x=-3.1, end_x=-0.5),),
        acceptance=accept,
    )
    one = check(make_rig(x, force, brief, group))
    other = check(make_rig(-x[::-1], force[::-1], mirrored, _mirrored(group, x.size)))
    for quantity in ("moment_error_peak", "shear_error_peak", "band_use", "shear_area"):
        assert getattr(other, quantity) == pytest.approx(getattr(one, quantity), rel=1e-6), quantity
    assert other.statics.pad_force[::-1] == pytest.approx(one.statics.pad_force)


def _mirrored(group: Group, count: int) -> Group:
    if isinstance(group, int):
        return count + 1 - group
    return (_mirrored(group[1], count), _mirrored(group[0], count))


@FEW
@given(pads())
def test_jacks_forces_enter_linearly(known):
    x, force, group = known
    rig = make_rig(x, force, make_brief(acceptance=ACCEPT), group)
    assert share_matrix(rig) @ rig.jack_forces == pytest.approx(solve_statics(rig).pad_force, rel=1e-12)
