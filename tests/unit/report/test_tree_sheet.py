"""The sheet of the tree: nothing overlaps, whatever the number of pads."""

from __future__ import annotations

from itertools import combinations, pairwise

import pytest
from factories import make_brief, make_levers, make_pads, make_specimen, shape_load, two_supports
from hand_rigs import make_rig, with_hole
from matplotlib.textpath import TextPath

from rigdesign import checks
from rigdesign.chain import arrange
from rigdesign.findings import Refusal
from rigdesign.report.figures_parts import MARK
from rigdesign.report.figures_sheet import MM_PER_POINT, SMALLEST_FONT, spread, text_width
from rigdesign.report.figures_tree import elevation
from rigdesign.report.tree_layout import FAR_SIDE, FOOT, HEAD, Layout, plan_sheet

# a text may come this close to a line or another text [mm]
CLEAR = 0.15


def checked(n_pads: int, **changes):
    answer = arrange(make_brief(pads=make_pads(count=n_pads, length=0.01, gap=0.005), **changes))
    assert not isinstance(answer, Refusal)
    return answer


def boxes(layout: Layout):
    """Every label of a lever as (left, right, near, far) [mm], with its bar."""
    for bar in layout.bars:
        for label in bar.labels:
            half, tall = label.width / 2, label.height / 2
            yield bar, (label.x - half, label.x + half, label.reach - tall, label.reach + tall)


def links(layout: Layout):
    """Every link as (x, near, far) [mm]."""
    hangs = {name: (x, bar.reach) for bar in layout.bars for name, x in bar.ends}
    for number, x in enumerate(layout.pad_x, 1):
        yield x, 0.0, hangs.get(f"pad {number}", (x, layout.jack_reach))[1]
    for bar in layout.bars:
        yield bar.pivot_x, bar.reach, hangs.get(f"lever {bar.number}", (0.0, layout.jack_reach))[1]


def overlap(a, b) -> bool:
    return a[0] < b[1] - CLEAR and b[0] < a[1] - CLEAR and a[2] < b[3] - CLEAR and b[2] < a[3] - CLEAR


@pytest.mark.parametrize("n_pads", [2, 3, 8, 12, 13, 24, 40, 61])
def test_labels_touch_neither_each_other_nor_links_nor_bars(n_pads):
    layout = plan_sheet(checked(n_pads))
    every = list(boxes(layout))
    for (_, a), (_, b) in combinations(every, 2):
        assert not overlap(a, b)
    for _, box in every:
        for x, near, far in links(layout):
            assert not overlap(box, (x - CLEAR, x + CLEAR, near, far))
        for bar in layout.bars:
            places = [x for _, x in bar.ends]
            assert not overlap(box, (min(places), max(places), bar.reach - 0.4, bar.reach + 0.4))
            assert not overlap(box, (bar.pivot_x - MARK / 2, bar.pivot_x + MARK / 2, bar.reach - 2.0, bar.reach + 2.0))


@pytest.mark.parametrize("n_pads", [1, 2, 12, 13, 40, 61])
def test_everything_is_on_the_paper(n_pads):
    layout = plan_sheet(checked(n_pads))
    assert min(layout.pad_x) > MARK / 2
    assert max(layout.pad_x) < layout.size[0] - MARK / 2
    assert layout.jack_reach + MARK + FAR_SIDE + HEAD + FOOT <= layout.size[1]
    tiers = sorted({bar.reach for bar in layout.bars})
    assert all(b - a >= MARK for a, b in pairwise(tiers))
    assert all(reach < layout.jack_reach for reach in tiers)


def test_marks_of_crowded_pads_stand_in_rows():
    # pads of a steep load crowd at the root
    layout = plan_sheet(checked(40, loads=(shape_load("power", 5400.0, exponent=2.0),)))
    for (i, a), (j, b) in combinations(enumerate(layout.pad_x), 2):
        if layout.pad_rows[i] == layout.pad_rows[j]:
            assert abs(a - b) >= MARK


def test_stations_are_to_scale():
    check = checked(7)
    layout = plan_sheet(check)
    metre = layout.frame.at(1.0) - layout.frame.at(0.0)
    assert layout.pad_x[4] - layout.pad_x[1] == pytest.approx(metre * (check.rig.pad_x[4] - check.rig.pad_x[1]))
    bar = layout.bars[0]
    piece = check.rig.trees[0].pieces[0]
    assert bar.pivot_x - bar.ends[0][1] == pytest.approx(metre * -piece.ends[0].u)


def test_labels_say_arms_then_load():
    check = checked(5, levers=make_levers(drill_step=0.0005))
    bar = plan_sheet(check).bars[0]
    piece = check.rig.trees[0].pieces[0]
    arms = [f"{abs(hole.u) * 1e3:.1f}" for hole in piece.ends]
    assert [label.text for label in bar.labels] == [*arms, f"{check.statics.piece_load['lever 1']:.0f}"]


def test_levers_that_lie_over_one_another_get_lanes_of_their_own():
    # 1 with 3 and 2 with 4: both levers of tier 2 cover the stretch between pads 2 and 3
    check = checked(4, levers=make_levers(grouping=((1, 3), (2, 4))))
    reaches = [bar.reach for bar in plan_sheet(check).bars]
    assert len(set(reaches)) == 3


@pytest.mark.parametrize("action", ["pull", "push"])
@pytest.mark.parametrize("total", [5400.0, -5400.0])
def test_the_tree_stands_on_the_side_that_the_pads_act_on(action, total):
    answer = arrange(make_brief(pads=make_pads(count=3, action=action), loads=(shape_load("triangular", total),)))
    assert not isinstance(answer, Refusal)
    figure = elevation(answer)
    texts = {text.get_text(): text.get_position()[1] for text in figure.axes[0].texts}
    jack = next(y for words, y in texts.items() if words.startswith("jack ") and words.endswith(("up", "down")))
    strip = figure.axes[0].patches[0].get_y()
    assert (jack > strip) == ((total > 0) == (action == "pull"))


def test_no_text_is_below_six_points_and_every_key_is_there():
    specimen = two_supports(0.2, 0.7, 2.9, 3.4)
    for check in (checked(24), checked(9, specimen=specimen)):
        texts = [text for axes in elevation(check).axes for text in axes.texts]
        assert min(text.get_fontsize() for text in texts) >= SMALLEST_FONT
        words = " ".join(text.get_text() for text in texts)
        assert all(key in words for key in ("pad", "lever, at its pivot", "jack", "arms", "force"))


@pytest.mark.parametrize("text", ["1.253", "−0.821", "1004", "13.572", "0.05", "118"])
def test_the_width_of_a_text_is_not_underestimated(text):
    for size in (6.0, 7.0):
        true = TextPath((0, 0), text, size=size).get_extents().width * MM_PER_POINT
        assert true <= text_width(text, size) <= 1.5 * true


def test_spread_moves_crowded_places_and_no_others():
    assert spread([1.0, 1.5, 2.0, 9.0], 2.0, 0.2, 20.0) == pytest.approx([0.2, 2.2, 4.2, 9.0])
    assert spread([5.0, 5.5, 9.0], 2.0, 0.2, 20.0) == pytest.approx([4.25, 6.25, 9.0])
    assert spread([19.0, 19.5], 2.0, 0.0, 20.0) == [18.0, 20.0]


def test_a_specimen_far_from_the_origin_is_drawn_on_the_sheet():
    specimen = make_specimen(left=40.2, right=43.4)
    answer = arrange(make_brief(specimen=specimen, loads=(shape_load(start_x=40.2, end_x=43.4),)))
    assert not isinstance(answer, Refusal)
    layout = plan_sheet(answer)
    assert 0 < min(layout.pad_x) < max(layout.pad_x) < layout.size[0]


def test_arms_are_measured_from_the_pivot_wherever_the_frame_has_its_origin():
    """A survey may count u from anywhere: all holes of lever 1 moved alike are the same lever."""
    found = checks.check(make_rig([0.5, 0.9, 1.6], [1300.0, 1100.0, 700.0]))
    moved = found.rig
    for hole in found.rig.trees[0].pieces[0].holes:
        moved = with_hole(moved, 1, hole.name, u=hole.u + 0.05)
    texts = [[[label.text for label in bar.labels] for bar in plan_sheet(c).bars] for c in (found, checks.check(moved))]
    assert texts[0] == texts[1]
    arms = [sorted(abs(hole.u) for hole in piece.ends) for piece in found.rig.trees[0].pieces]
    assert sorted(texts[0][0][:2]) == sorted(f"{1000 * arm:.0f}" for arm in arms[0])
