"""What leaves no pads at all on a surface: each limit alone, with its numbers; and where the jack stands."""

from __future__ import annotations

import re
from dataclasses import replace
from typing import Any

import numpy as np
import pytest
from factories import array, band_rules
from pad_surfaces import hard_points, line, outline, surface_brief

from rigdesign.brief.model import Acceptance, JackRules, Region
from rigdesign.findings import Refusal
from rigdesign.pads.surface.refusals import (
    for_the_count,
    jack_place_in_plan,
    place_words,
    unbalanced,
    whatever_the_count,
)
from rigdesign.pads.surface.remarks import torsion_on_one_line
from rigdesign.pads.surface.spread import one_line, outside_hull
from rigdesign.target.model import Peak, Target
from rigdesign.target.plan_points import PlanPoints
from rigdesign.target.plan_sum import PlanSum

SHAPE = outline((0.0, -0.4), (3.2, -0.75), (3.2, -0.45), (1.5, 0.1), (0.0, 0.4))
AXIS = line((0.0, 0.05), (3.2, -0.6))
# sum −1000 N
LOAD = PlanPoints(array([0.5, 1.0, 2.25]), array([0.1, -0.1, -0.32]), array([-200.0, -300.0, -500.0]))
CENTRE = (1.525, -0.17)
POINTS = hard_points([0.3, 0.4, 1.2, 1.3, 2.0, 2.9], [-0.2, 0.2, -0.4, 0.0, -0.2, -0.6], count=4, width=0.1)
TORSION = Acceptance((*band_rules("moment", 0.02, 0.02), *band_rules("torsion", 0.05, 0.05)), (), False)


def target_of(load: PlanPoints = LOAD, gravity: PlanPoints | None = None, **changes: Any) -> Target:
    brief = surface_brief(SHAPE, AXIS, **changes)
    net = PlanSum((load,) if gravity is None else (load, gravity), (1.0,) if gravity is None else (1.0, -1.0))
    peaks = {"torsion": Peak(400.0, 0.0)}
    return Target(brief, load, gravity or PlanSum((), ()), net, peaks, ())  # type: ignore[arg-type]


def refused(target: Target) -> Refusal:
    refusal = whatever_the_count(target, *jack_place_in_plan(target))
    assert refusal is not None
    return refusal


def test_nothing_is_refused_where_the_places_surround_the_load() -> None:
    target = target_of(pads=POINTS)
    assert whatever_the_count(target, *jack_place_in_plan(target)) is None
    assert for_the_count(target, 4) is None
    free = target_of(pads={"width": 0.1})
    assert whatever_the_count(free, *jack_place_in_plan(free)) is None
    assert for_the_count(free, 12) is None


# -- where the jack stands ---------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("rules", "place"),
    [
        (JackRules(None, None), CENTRE),
        (JackRules(None, 0.05), (1.5, -0.15)),
        (JackRules(1.6, None), (1.6, 0.05 - 0.65 / 3.2 * 1.6)),
        (JackRules(1.6, None, -0.12), (1.6, -0.12)),
    ],
    ids=["at the resultant", "on a step", "on the axis", "at a place"],
)
def test_where_the_jack_stands(rules: JackRules, place: tuple[float, float]) -> None:
    if rules.step:
        # 1.525 m is as near to 1.50 m as to 1.55 m, and −0.170 m nearer to −0.15 m: move the load to tell
        moved = replace(LOAD, x=LOAD.x - 0.002)
        assert jack_place_in_plan(target_of(moved, jack=rules)) == pytest.approx(place, rel=1e-14)
        return
    assert jack_place_in_plan(target_of(jack=rules)) == pytest.approx(place, rel=1e-14)


# -- whatever the count ------------------------------------------------------------------------------------------------


def test_refuses_when_gravity_brings_more_than_the_target() -> None:
    refusal = refused(target_of(gravity=replace(LOAD, force=1.2 * LOAD.force), pads=POINTS))
    assert "other way" in refusal.text


def test_refuses_hard_points_that_take_no_pad() -> None:
    pads = {
        **POINTS,
        "keep_out": ((0.2, 2.0),),
        "keep_out_areas": (outline((1.9, -0.8), (3.2, -0.8), (3.2, 0), (1.9, 0)),),
    }
    refusal = refused(target_of(pads=pads))
    assert refusal.text == "no hard point takes a pad on the specimen and clear of the keep-outs"
    assert refusal.best == "0 of 6 hard points can be used"
    assert "move the hard points" in refusal.remedy


def test_refuses_a_footprint_larger_than_the_specimen() -> None:
    refusal = refused(target_of(pads={"width": 0.9, "edge": 0.02}))
    assert refusal.text == "no pad fits on the specimen"
    assert refusal.limit == "footprint 0.120 m by 0.900 m, 20.0 mm from the outline"


def test_refuses_a_load_beside_all_places_and_says_what_the_others_would_pull() -> None:
    x, y = [0.3, 0.4, 1.2, 0.9], [-0.2, 0.2, -0.2, 0.1]
    refusal = refused(target_of(pads=hard_points(x, y, width=0.1)))
    assert refusal.text.startswith("the load's centre lies outside the area")
    assert refusal.limit == "nearest place that pads of one sign can balance: x 1.200 m, y −0.200 m"
    # the nearest place is a corner: square to the way there the pads reach back to pad 1 or 2
    out = np.array(CENTRE) - [1.2, -0.2]
    distance = float(np.hypot(*out))
    depth = max(float(([1.2, -0.2] - np.array(p)) @ out / distance) for p in zip(x, y, strict=True))
    assert f"{1000 * distance / depth:.3g} N of the other sign" in refusal.best
    assert refusal.best.startswith("the load's centre at x 1.525 m, y −0.170 m, 0.326 m outside")
    for remedy in ("two rigs", "counterweight", "beyond x 1.200 m", "[jack] at"):
        assert remedy in refusal.remedy
    lone = replace(LOAD, force=-LOAD.force)
    assert f"at least −{1000 * distance / depth:.3g} N" in refused(target_of(lone, pads=hard_points(x, y))).best


def test_the_other_sign_is_what_statics_ask_for() -> None:
    """Least sum of forces of the other sign, by a linear programme over the places."""
    from scipy.optimize import linprog

    # a side of the hull is seen, whose far corner is a single place
    x, y = array([0.3, 1.2, 2.9, 2.0]), array([0.2, 0.1, -0.35, -0.08])
    found = outside_hull(x, y, *CENTRE)
    assert found is not None
    sums = np.vstack([np.ones(4), x, y])
    least = linprog(
        np.repeat([0.0, 1.0], 4), A_eq=np.hstack([sums, -sums]), b_eq=1000 * np.array([1.0, *CENTRE]), bounds=(0, None)
    )
    # never more than statics ask for
    assert 0 < 1000 * found.distance / found.depth <= least.fun * (1 + 1e-9)
    assert 1000 * found.distance / found.depth > 0.5 * least.fun


def test_refuses_a_jack_outside_by_its_own_name() -> None:
    refusal = refused(target_of(pads=POINTS, jack=JackRules(3.1, None, -0.6)))
    assert refusal.text.startswith("the jack lies outside")
    assert "x 3.100 m, y −0.600 m, 0.200 m outside" in refusal.best


def test_free_pads_span_what_their_rows_allow() -> None:
    rows = (line((0.1, -0.2), (3.0, -0.6)), line((0.1, -0.3), (3.0, -0.65)))
    assert "outside" in refused(target_of(pads={"width": 0.05, "rows": rows})).text
    rows = (*rows, line((0.2, 0.2), (2.5, -0.2)))
    target = target_of(pads={"width": 0.05, "rows": rows})
    assert whatever_the_count(target, *jack_place_in_plan(target)) is None


def test_refuses_torsion_asked_of_pads_in_one_line() -> None:
    x = array([0.3, 1.0, 1.9, 2.5])
    refusal = refused(target_of(pads=hard_points(x, -0.1 - 0.1 * x, width=0.1)))
    assert "stands in one line" in refusal.text
    assert "torsion about that line" in refusal.text
    # the centre is at −0.170 m, the line there at −0.2525 m, sloping by 0.1
    off = (0.2525 - 0.17) / np.hypot(1.0, 0.1)
    assert f"{1e3 * off:.1f} mm off the line: {1e3 * off:.1f} N·m are left over" in refusal.best
    assert "x 0.300 m, y −0.130 m to x 2.500 m, y −0.350 m" in refusal.limit
    across = refused(target_of(pads=hard_points([1.2, 1.2, 1.2], [-0.3, -0.1, 0.1], width=0.1)))
    assert "moment about that line" in across.text


def test_pads_in_line_with_the_load_can_balance_it() -> None:
    x = array([0.3, 1.0, 1.9, 2.8])
    target = target_of(pads=hard_points(x, CENTRE[1] - 0.1 * (x - CENTRE[0]), width=0.05))
    assert whatever_the_count(target, *jack_place_in_plan(target)) is None
    short = target_of(pads=hard_points(x[:2], CENTRE[1] - 0.1 * (x[:2] - CENTRE[0]), width=0.05))
    assert "outside the area" in refused(short).text


# -- numbers of pads ---------------------------------------------------------------------------------------------------


def refused_for(wanted: int, **pads: Any) -> Refusal:
    refusal = for_the_count(target_of(pads=pads), wanted)
    assert refusal is not None
    return refusal


def test_refuses_more_pads_than_usable_hard_points() -> None:
    assert for_the_count(target_of(pads={**POINTS, "keep_out": ((0.2, 0.5),)}), 4) is None
    refusal = refused_for(5, **POINTS, keep_out=((0.2, 0.5),))
    assert refusal.text == "5 pads are asked for, but there are 4 usable hard points"


def test_refuses_hard_points_too_close_for_so_many() -> None:
    refusal = refused_for(5, **{**POINTS, "width": 0.1, "length": 0.12, "gap": 0.31})
    assert refusal.text == "5 pads do not fit side by side on the hard points"
    assert refusal.best == "at most 4 pads could fit"
    assert "gap 0.310 m, 6 usable hard points" in refusal.limit


def test_refuses_free_pads_that_do_not_fit() -> None:
    area = SHAPE.polygon.area
    refusal = refused_for(60, width=0.2, length=0.2, gap=0.0)
    assert refusal.text == "60 pads do not fit side by side"
    most = int(refusal.best.split()[2])
    assert most <= area / 0.04
    assert for_the_count(target_of(pads={"width": 0.2, "length": 0.2, "gap": 0.0}), most) is None


def test_fixed_places_are_taken_as_they_are() -> None:
    fixed = {**POINTS, "places": "fixed"}
    assert "there are 6 fixed places" in refused_for(5, **fixed).text
    assert for_the_count(target_of(pads=fixed), 6) is None
    refusal = refused_for(6, **{**fixed, "gap": 0.31})
    assert (
        refusal.text
        == "the footprints of pads 1 and 2 are closer than the gap, or overlap; so are those of 1 other pair"
    )
    assert refusal.best == "pad 1 at x 0.300 m, y −0.200 m, pad 2 at x 0.400 m, y 0.200 m"


def test_refuses_forces_that_cannot_make_the_total() -> None:
    assert "too weak" in refused_for(4, **POINTS, largest_force=249.0).text
    assert "least force" in refused_for(4, **POINTS, least_force=251.0).text
    assert for_the_count(target_of(pads={**POINTS, "largest_force": 250.0, "least_force": 250.0}), 4) is None


def test_unbalanced_names_the_limits() -> None:
    target = target_of(pads={**POINTS, "largest_force": 400.0, "least_force": 20.0})
    refusal = unbalanced(target, *CENTRE, 4)
    assert refusal.limit.startswith("largest pad force 400 N at the peak of the test, least pad force 20.0 N")
    assert refusal.best == "−1.00 kN at x 1.525 m, y −0.170 m from 4 pads of one sign"


def test_places_in_words() -> None:
    assert place_words(1.5, 1e-17) == "x 1.500 m, y 0 m"
    assert place_words(1.5, -0.0004) == "x 1.500 m, y −0.400 mm"


# -- hulls and lines ---------------------------------------------------------------------------------------------------


def test_not_outside_the_hull_means_that_forces_of_one_sign_balance() -> None:
    from scipy.optimize import linprog

    draw = np.random.default_rng(11)
    answers = set()
    for _ in range(60):
        x, y = draw.uniform(0, 3, 5), draw.uniform(-1, 1, 5)
        px, py = draw.uniform(0.5, 2.5), draw.uniform(-0.7, 0.7)
        found = linprog(np.zeros(5), A_eq=np.vstack([np.ones(5), x, y]), b_eq=[1.0, px, py], bounds=(0, None))
        assert (outside_hull(x, y, px, py) is None) == (found.status == 0)
        answers.add(found.status == 0)
    assert answers == {True, False}


def test_the_hull_of_a_line_and_of_one_place() -> None:
    x, y = array([0.1, 0.7, 2.2]), array([0.3, 0.9, 2.4])
    assert outside_hull(x, y, 1.3, 1.5) is None
    assert outside_hull(x, y, 1.3, 1.5001) is not None
    assert outside_hull(x, y, 2.3, 2.5) is not None
    assert outside_hull(x[:1], y[:1], 0.1, 0.3) is None
    assert outside_hull(x[:1], y[:1], 0.1, 0.4) is not None


def test_one_line_allows_for_a_millionth_of_the_span() -> None:
    x = array([0.3, 1.0, 1.9, 2.8])
    y = 0.2 - 0.3 * x
    assert one_line(x, y + array([0, 2e-6, 0, 0]), 3.2) is not None
    assert one_line(x, y + array([0, 2e-5, 0, 0]), 3.2) is None
    assert one_line(x[:1], y[:1], 3.2) is None
    found = one_line(x, y, 3.2)
    assert found is not None
    # a place straight above the line is off it by the cosine of its slope, to the left
    assert found.left(2.0, -0.4 + 0.1) == pytest.approx(0.1 / np.hypot(1.0, 0.3), rel=1e-12)


# -- remarks -----------------------------------------------------------------------------------------------------------


def test_torsion_that_one_line_cannot_bring_is_remarked_on() -> None:
    x = array([0.3, 1.0, 1.9, 2.8])
    y = CENTRE[1] - 0.1 * (x - CENTRE[0])
    finding = torsion_on_one_line(target_of(acceptance=TORSION), x, y)
    assert finding is not None
    # moments of the loads about the line beyond the first, the second and the third of them
    about = LOAD.force * (LOAD.y - (CENTRE[1] - 0.1 * (LOAD.x - CENTRE[0])))
    beyond = np.abs(np.cumsum(about[::-1])[::-1])
    largest = int(np.argmax(beyond))
    moment, percent = re.findall(r"off by ([\d.]+) N·m \(([\d.]+) % of the peak torsion\)", finding.value)[0]
    # three digits are shown
    assert [float(moment), float(percent)] == pytest.approx([beyond[largest], beyond[largest] / 4], rel=5e-3)
    # beyond the load before it, up to it
    assert finding.value.endswith(f"at {[0.0, *LOAD.x][largest]:.3f} m")


def test_torsion_that_is_not_judged_or_follows_anyway_is_not_remarked_on() -> None:
    x = array([0.3, 1.0, 1.9, 2.8])
    y = -0.1 - 0.1 * x
    assert torsion_on_one_line(target_of(), x, y) is None
    assert torsion_on_one_line(target_of(acceptance=TORSION), x, y + array([0, 0.1, 0, 0])) is None
    on_line = replace(LOAD, y=-0.1 - 0.1 * LOAD.x)
    assert torsion_on_one_line(target_of(on_line, acceptance=TORSION), x, y) is None
    region = Acceptance((), (Region("region 1", 0.3, 1.0, band_rules("torsion", 0.05, 0.05)),), False)
    assert torsion_on_one_line(target_of(acceptance=region), x, y) is not None
