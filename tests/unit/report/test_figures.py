"""Every figure: texts clear of one another, on the paper, large enough; what it shows is the check's; same bytes."""

from __future__ import annotations

import re
from dataclasses import replace
from itertools import combinations

import numpy as np
import pytest
from factories import make_brief, make_pads, make_specimen, make_weight, shape_load, two_supports
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.text import Text

from rigdesign.chain import Study, StudyRow, arrange
from rigdesign.findings import Refusal
from rigdesign.report import figures_sheet
from rigdesign.report.figures_curves import shear_and_moment
from rigdesign.report.figures_load import load_and_pads, target_sheet
from rigdesign.report.figures_sheet import SMALLEST_FONT
from rigdesign.report.figures_study import study_sheet
from rigdesign.report.figures_tree import elevation

WEIGHT = make_weight([0.2, 1.4, 3.4], [31.0, 22.0, 6.0])
LOADS = (shape_load("triangular", 5100.0), shape_load("sine", -900.0, start_x=1.1, end_x=1.9))


def checked(n_pads: int, **changes):
    changes = {"specimen": make_specimen(weight=WEIGHT), "loads": LOADS, "peak": 1.5, **changes}
    answer = arrange(make_brief(pads=make_pads(count=n_pads, length=0.03), **changes))
    assert not isinstance(answer, Refusal)
    return answer


def sheets(check):
    """Every figure of a rig folder by name."""
    return {
        "target": target_sheet(check.rig.plan.target),
        "load_and_pads": load_and_pads(check),
        "shear_and_moment": shear_and_moment(check),
        "tree": elevation(check),
    }


def texts_of(figure):
    """Every text that is drawn with its box on the paper [pixels]: titles, labels, numbers on the axes, legends."""
    drawn = []
    plain = Text.draw

    def recorded(self, renderer):
        if self.get_visible() and self.get_text():
            drawn.append((self, self.get_window_extent(renderer)))
        plain(self, renderer)

    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(Text, "draw", recorded)
        FigureCanvasAgg(figure).draw()
    return drawn


CASES = {
    "1 pad": lambda: checked(1),
    "2 pads": lambda: checked(2),
    "12 pads": lambda: checked(12),
    "24 pads": lambda: checked(24),
    "40 pads, down, on two supports": lambda: checked(
        40, specimen=two_supports(0.2, 0.9, 2.6, 3.4), loads=(shape_load("parabolic", -18_000.0),)
    ),
}


@pytest.mark.parametrize("case", CASES)
def test_texts_are_clear_of_one_another_and_on_the_paper(case):
    for name, figure in sheets(CASES[case]()).items():
        width, height = figure.canvas.get_width_height()
        found = texts_of(figure)
        for text, box in found:
            assert box.x0 >= 0, (name, text)
            assert box.y0 >= 0, (name, text)
            assert box.x1 <= width, (name, text)
            assert box.y1 <= height, (name, text)
            assert text.get_fontsize() >= SMALLEST_FONT, (name, text)
        for (a, box_a), (b, box_b) in combinations(found, 2):
            # one pixel of the frame that every text has around it
            apart = (
                box_a.x1 - 1 <= box_b.x0
                or box_b.x1 - 1 <= box_a.x0
                or box_a.y1 - 1 <= box_b.y0
                or box_b.y1 - 1 <= box_a.y0
            )
            assert apart, (name, a.get_text(), b.get_text())


def test_the_same_figure_gives_the_same_bytes_without_a_date():
    first, second = sheets(checked(7)), sheets(checked(7))
    for name in first:
        svg = figures_sheet.svg(first[name])
        assert svg == figures_sheet.svg(second[name])
        assert figures_sheet.png(first[name]) == figures_sheet.png(second[name])
        assert not re.search(rb"<dc:date>|20\d\d-\d\d-\d\dT", svg)


def test_drawing_changes_no_settings_and_obeys_none():
    import matplotlib

    check = checked(3)
    plain = figures_sheet.svg(elevation(check))
    before = dict(matplotlib.rcParams)
    with matplotlib.rc_context({"font.size": 23.0, "font.family": ["serif"], "axes.unicode_minus": False}):
        assert figures_sheet.svg(elevation(check)) == plain
    assert dict(matplotlib.rcParams) == before


def test_a_title_in_a_script_that_the_fonts_lack_is_drawn_without_a_warning():
    check = checked(3)  # warnings are errors here
    brief = replace(check.rig.plan.target.brief, title="翼 試験")
    sheet = target_sheet(replace(check.rig.plan.target, brief=brief))
    assert figures_sheet.svg(sheet)
    assert figures_sheet.png(sheet)


def test_the_curves_are_those_of_the_check():
    check = checked(6)
    figure = shear_and_moment(check)
    by_title = {axes.get_title(loc="left"): axes for axes in figure.axes}
    rig = next(line for line in by_title["moment M"].lines if line.get_label() == "rig as drilled")
    np.testing.assert_allclose(rig.get_ydata(), check.curves.rig["moment"])
    error = next(line for line in by_title["error of the shear"].lines if str(line.get_label()).startswith("error"))
    peak = check.rig.plan.target.shear_peak
    np.testing.assert_allclose(error.get_ydata(), 100 * check.curves.error("shear") / peak)
    largest = next(
        line.get_label() for line in by_title["error of the moment"].lines if "largest" in str(line.get_label())
    )
    assert f"{100 * check.moment_error_peak:.3g} %" in largest


def test_pad_forces_are_drawn_to_scale():
    check = checked(5)
    figure = load_and_pads(check)
    arrows = [text for text in figure.axes[-1].texts if getattr(text, "arrow_patch", None) is not None]
    lengths = [abs(text.xy[1] - text.xyann[1]) for text in arrows][:5]
    force = np.abs(check.statics.pad_force)
    np.testing.assert_allclose(np.array(lengths) / lengths[0], force / force[0], rtol=1e-9)


def test_a_study_shows_rigs_and_refusals():
    brief = make_brief(pads=make_pads(count=3))
    rows = [StudyRow(n, arrange(make_brief(pads=make_pads(count=n)))) for n in (1, 2, 3, 5, 8)]
    none = Refusal("pads", "9 pads do not fit", "footprint 400 mm", "8 pads", "fewer")
    study = Study(brief, (*rows, StudyRow(9, none)))
    figure = study_sheet(study)
    errors = figure.axes[0]
    drilled = next(line for line in errors.lines if line.get_label() == "moment, drilled")
    assert list(drilled.get_xdata()) == [1, 2, 3, 5, 8]
    np.testing.assert_allclose(drilled.get_ydata(), [100 * row.answer.moment_error_peak for row in rows])
    crosses = [line for line in errors.lines if line.get_marker() == "x"]
    assert [list(line.get_xdata()) for line in crosses] == [[9]]
    for (a, box_a), (b, box_b) in combinations(texts_of(figure), 2):
        assert not box_a.overlaps(box_b), (a.get_text(), b.get_text())


def test_a_study_without_any_rig_is_drawn():
    none = Refusal("pads", "do not fit", "footprint 400 mm", "", "fewer")
    study = Study(make_brief(), (StudyRow(8, none), StudyRow(9, none)))
    assert figures_sheet.svg(study_sheet(study)).startswith(b"<?xml")
