"""Laws of the check in plan, over random pads, trees and plans that are shifted, turned and mirrored."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import array, make_brief, shape_load
from hand_plan_rigs import CORNERS, accept, forces, line, make_plan_rig, outline, plan_brief, surface
from hand_rigs import Group, make_rig
from hypothesis import given, settings
from hypothesis import strategies as st

from rigdesign.checks import check

FEW = settings(max_examples=12, deadline=None, derandomize=True)
AXIS = np.array([[0.2, 0.05], [3.4, -0.40]])
LOAD = np.array([[0.5, 0.2], [1.4, -0.3], [2.2, 0.1], [3.1, -0.5]])
LOAD_FORCE = np.array([1900.0, 1500.0, 1100.0, 700.0])
ACCEPT = accept(0.07, 0.3, 0.2, across=0.3)


@st.composite
def trees(draw: st.DrawFn) -> tuple[np.ndarray, np.ndarray, Group]:
    """Places inside the outline on a fine grid, forces, and a grouping of pairs and threes."""
    count = draw(st.integers(2, 8))
    spots = draw(
        st.lists(st.tuples(st.integers(0, 40), st.integers(0, 20)), min_size=count, max_size=count, unique=True)
    )
    x, part = 0.3 + np.array([s for s, _ in spots]) * 0.075, np.array([p for _, p in spots]) / 20.0
    low, high = -0.45 - 0.078 * (x - 0.2), 0.55 - 0.234 * (x - 0.2)
    force = np.array(draw(st.lists(st.integers(1, 30), min_size=count, max_size=count)), dtype=float)
    return (
        np.column_stack([x, low + part * (high - low)]),
        force * LOAD_FORCE.sum() / force.sum(),
        draw(grouped(1, count)),
    )


@st.composite
def grouped(draw: st.DrawFn, first: int, last: int) -> Group:
    """Any grouping of neighbours in pairs: threes may stand in one line, which is not this law's matter."""
    if first == last:
        return first
    split = draw(st.integers(first, last - 1))
    return (draw(grouped(first, split)), draw(grouped(split + 1, last)))


def checked(known, moved=lambda places: places, cut="square to x"):
    """The check of a rig whose whole plan is moved: outline, axis, loads and pads."""
    places, force, group = known
    axis, corners, load, pads = (moved(np.asarray(one, dtype=float)) for one in (AXIS, CORNERS, LOAD, places))
    if np.linalg.det(np.column_stack([corners[1] - corners[0], corners[2] - corners[0]])) < 0:
        corners = corners[::-1]
    specimen = surface(
        outline=outline(corners), axis=line(*map(tuple, axis)), cut=cut, left=float(axis[0, 0]), right=float(axis[1, 0])
    )
    brief = plan_brief(specimen, loads=(forces(load[:, 0], load[:, 1], LOAD_FORCE),), acceptance=ACCEPT)
    return check(make_plan_rig(pads[:, 0], pads[:, 1], force, brief, group))


def same(one, other, *names):
    for name in names:
        # cuts at jumps stand 1e-10 of the span off; local errors near a zero of the target magnify that
        assert getattr(other, name) == pytest.approx(getattr(one, name), rel=1e-6), name


@FEW
@given(trees(), st.sampled_from([(-7.5, 0.8), (0.81, -40.0)]), st.sampled_from(["square to x", "square to axis"]))
def test_a_shifted_plan_shifts_the_places_and_nothing_else(known, shift, cut):
    one, other = checked(known, cut=cut), checked(known, lambda places: places + shift, cut)
    same(one, other, "band_use", "moment_error_peak", "shear_error_peak", "torsion_error_peak", "across_error_peak",
         "shear_area", "steel_estimate")  # fmt: skip
    assert (other.jack_offset, other.jack_offset_y) == pytest.approx((one.jack_offset, one.jack_offset_y), abs=1e-9)


@FEW
@given(trees())
def test_a_plan_mirrored_across_the_span_has_the_same_errors_and_the_other_torsion(known):
    one, other = checked(known), checked(known, lambda places: places * np.array([1.0, -1.0]))
    same(one, other, "moment_error_peak", "shear_error_peak", "torsion_error_peak", "shear_area", "steel_estimate")
    uses = [[row.use for row in found.regions if row.name == "whole span"] for found in (one, other)]
    assert uses[1] == pytest.approx(uses[0], rel=1e-6)
    assert np.sort(other.curves.rig["torsion"])[[0, -1]] == pytest.approx(
        -np.sort(one.curves.rig["torsion"])[[-1, 0]], abs=1e-4
    )


@FEW
@given(trees(), st.sampled_from([-25.0, 8.0, 40.0]))
def test_a_plan_turned_with_its_axis_feels_the_same_where_cuts_are_square_to_that(known, degrees):
    turn = np.radians(degrees)
    matrix = np.array([[np.cos(turn), -np.sin(turn)], [np.sin(turn), np.cos(turn)]])
    one = checked(known, cut="square to axis")
    other = checked(known, lambda places: places @ matrix.T, "square to axis")
    same(one, other, "moment_error_peak", "shear_error_peak", "torsion_error_peak", "steel_estimate")
    # stations are x of the axis: they come closer together as it turns away from x
    slopes = [np.diff(found.rig.plan.target.brief.specimen.axis.x)[0] for found in (one, other)]
    assert other.shear_area / slopes[1] == pytest.approx(one.shear_area / slopes[0], rel=1e-6)
    sizes = [np.hypot(found.jack_offset, found.jack_offset_y) for found in (one, other)]
    assert sizes[1] == pytest.approx(sizes[0], abs=1e-9)


@FEW
@given(trees())
def test_with_every_y_zero_a_plan_rig_s_numbers_are_the_line_rig_s(known):
    places, force, group = known
    x, force = np.unique(places[:, 0], return_index=True)[0], force
    force = force[: x.size] * 5400.0 / force[: x.size].sum()
    group = _trimmed(group, x.size)
    brief = make_brief(loads=(shape_load(),), acceptance=accept(0.05, 0.3, None))
    flat = outline(((0.2, -0.3), (3.4, -0.3), (3.4, 0.3), (0.2, 0.3)))
    in_plan = replace(brief, specimen=replace(brief.specimen, outline=flat))
    one, other = check(make_rig(x, force, brief, group)), check(make_plan_rig(x, array(0 * x), force, in_plan, group))
    assert other.statics.share == pytest.approx(one.statics.share, rel=1e-9)
    assert other.share_of_curve == pytest.approx(one.share_of_curve, rel=1e-9)
    same(one, other, "band_use", "moment_error_peak", "shear_error_peak", "shear_area", "steel_estimate", "evenness")
    assert other.torsion_error_peak < 1e-12


def _trimmed(group: Group, count: int) -> Group:
    """The grouping without pads beyond a count."""
    if isinstance(group, int):
        return group if group <= count else None
    kept = [part for part in (_trimmed(part, count) for part in group) if part is not None]
    return kept[0] if len(kept) == 1 else tuple(kept) if kept else None
