"""Figures of plan rigs: texts clear of one another, everything to scale, what is shown is the check's."""

from __future__ import annotations

import re
from dataclasses import replace
from itertools import combinations

import numpy as np
import pytest
from factories import make_pads, make_weight
from hand_plan_rigs import accept, forces, line, line_load, make_plan_rig, outline, panel, plan_brief, pressure, surface
from hand_rigs import make_rig
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.patches import Circle, PathPatch
from matplotlib.text import Text
from shapely import LineString, union_all

from rigdesign import checks
from rigdesign.brief.model import CoupleLoad, Outline
from rigdesign.chain import Study, StudyRow
from rigdesign.report import figures_sheet
from rigdesign.report.figures_curves import across, shear_and_moment
from rigdesign.report.figures_load import load_and_pads, target_sheet
from rigdesign.report.figures_sheet import SMALLEST_FONT
from rigdesign.report.figures_study import study_sheet
from rigdesign.report.figures_tree import elevation
from rigdesign.report.surface import pieces
from rigdesign.report.surface.branches import in_branches
from rigdesign.report.surface.figures_plan import plan_sheet
from rigdesign.report.surface.frame import fitted
from rigdesign.report.surface.labels import Board
from rigdesign.report.surface.pressure_map import pressure_at
from rigdesign.report.writing import figure_files

KEEP_OUT = (Outline(np.array([1.0, 1.3, 1.3, 1.0]), np.array([-0.1, -0.1, 0.0, 0.05]), "hatch"),)


def grouped(x, y, members):
    """Group pads by halves, or by thirds where three stand apart, along the longer side."""
    if len(members) == 1:
        return members[0] + 1
    ordered = sorted(members, key=lambda k: (x[k] if np.ptp(x[members]) > np.ptp(y[members]) else y[k], k))
    if len(members) == 3:
        a, b, c = ordered
        if abs((x[b] - x[a]) * (y[c] - y[a]) - (y[b] - y[a]) * (x[c] - x[a])) > 0.01:
            return tuple(k + 1 for k in ordered)
    half = len(members) // 2
    return (grouped(x, y, ordered[:half]), grouped(x, y, ordered[half:]))


def checked(n_pads: int, specimen=None, **changes):
    """A check of so many pads in unequal rows over a wing (or another surface), forces unequal."""
    specimen = specimen or surface(
        weight=make_weight([0.2, 3.4], [21.0, 8.0]), weight_line=line((0.2, 0.1), (3.4, -0.5))
    )
    shape = specimen.outline.polygon
    rows = max(1, round((n_pads / 2.2) ** 0.5))
    left, _, right, _ = shape.bounds
    along = np.linspace(left + 0.12, right - 0.12, -(-n_pads // rows))
    places = []
    for k, at in enumerate(along):
        low, high = (float(np.interp(at, *side)) for side in _sides(specimen.outline))
        part = (np.arange(rows) + 0.5 + 0.04 * ((k % 3) - 1)) / rows
        places += [(at + 0.011 * row, low + p * (high - low)) for row, p in enumerate(part)]
    x, y = np.array(sorted(places[:n_pads])).T
    force = 200.0 + 130.0 * np.cos(1.7 * np.arange(n_pads)) + 15.0 * np.arange(n_pads)[::-1]
    free = {"stations": np.append(x, x[0] + 0.07), "y": np.append(y, y[0] + 0.05), "keep_out_areas": KEEP_OUT}
    rules = replace(make_pads(count=n_pads, places="hard points", length=0.07, width=0.05), **free)
    along_line = line_load(700.0, line((0.2, 0.2), (3.4, -0.2)))
    loads = (pressure(900.0, -150.0, 200.0), along_line, forces([1.4], [-0.2], [-90.0]), CoupleLoad(0.9, 35.0, 1.0, ""))
    if specimen.left < 0.2:
        loads = (pressure(-900.0, 0.0, -400.0),)
        force = -force
    brief = plan_brief(
        specimen, loads=loads, pads=replace(rules, keep_out=((1.9, 2.0),)), acceptance=accept(across=0.2), **changes
    )
    rig = make_plan_rig(x, y, force, brief, grouped(x, y, list(range(n_pads))))
    return checks.check(rig)


def _sides(shape):
    """Lower and upper side of an outline of four corners, as x and y each."""
    x, y = shape.x, shape.y
    return (x[[0, 1]], y[[0, 1]]), (x[[3, 2]], y[[3, 2]])


def sheets(check):
    """Every figure of a rig folder by name."""
    return {
        "target": target_sheet(check.rig.plan.target),
        "load_and_pads": load_and_pads(check),
        "shear_and_moment": shear_and_moment(check),
        "tree": elevation(check),
        "plan": plan_sheet(check),
        "across": across(check),
    }


def texts_of(figure):
    """Every text that is drawn with its box on the paper [pixels]."""
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


def of_any_shape(n_pads: int, corners, loads=None):
    """A check of pads in two rows over a surface of four corners, fixed places."""
    shape = outline(corners)
    left, right = shape.x.min(), shape.x.max()
    specimen = surface(left=float(left), right=float(right), outline=shape, axis=None, cut="square to axis")
    size = right - left
    along = np.linspace(left + 0.05 * size, right - 0.05 * size, n_pads // 2)
    places = []
    for at in along:
        low, high = (float(np.interp(at, *side)) for side in _sides(shape))
        places += [(at, low + part * (high - low)) for part in (0.2, 0.7)]
    x, y = np.array(sorted(places)).T
    rules = replace(make_pads(count=n_pads, places="fixed", length=0.02 * size, width=0.01 * size, stations=x), y=y)
    brief = plan_brief(specimen, loads=loads or (pressure(900.0),), pads=rules, acceptance=accept(across=0.2))
    force = 2000.0 + 1300.0 * np.cos(1.7 * np.arange(n_pads))
    return checks.check(make_plan_rig(x, y, force, brief, grouped(x, y, list(range(n_pads)))))


CASES = {
    "slender, far off": lambda: of_any_shape(40, [(40.0, -5.45), (52.6, -5.18), (52.6, -4.91), (40.0, -4.5)]),
    "broad": lambda: of_any_shape(20, [(0.0, -1.5), (0.8, -1.2), (0.8, 1.0), (0.0, 1.6)]),
    "resultant beyond": lambda: of_any_shape(
        6,
        [(0.2, -0.5), (3.4, -0.7), (3.4, -0.1), (0.2, 0.6)],
        (
            pressure(-4000.0, 2500.0),
            forces([1.0, 1.05, 1.1, 1.2], [-0.1, -0.12, 0.0, 0.1], [300.0, -200.0, 50.0, 900.0]),
        ),
    ),
    "1 pad": lambda: checked(1),
    "2 pads": lambda: checked(2),
    "5 pads": lambda: checked(5),
    "12 pads": lambda: checked(12),
    "24 pads, panel, down": lambda: checked(24, panel()),
    "40 pads": lambda: checked(40),
    "40 pads, panel, down": lambda: checked(40, panel()),
}


@pytest.mark.parametrize("case", CASES)
def test_texts_are_clear_of_one_another_and_on_the_paper(case):
    for name, figure in sheets(CASES[case]()).items():
        width, height = figure.canvas.get_width_height()
        found = texts_of(figure)
        for text, box in found:
            words = (name, text.get_text())
            assert box.x0 >= 0 and box.y0 >= 0 and box.x1 <= width and box.y1 <= height, words  # noqa: PT018
            assert text.get_fontsize() >= SMALLEST_FONT, words
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
        assert not re.search(rb"<dc:date>|20\d\d-\d\d-\d\dT", svg)


def test_a_plan_rig_has_its_own_sheets_and_a_line_rig_has_not():
    check = checked(5)
    assert set(figure_files(check)) == {f"{name}.svg" for name in sheets(check)}
    brief = replace(check.rig.plan.target.brief, acceptance=accept())
    not_judged = replace(check.rig.plan, target=replace(check.rig.plan.target, brief=brief))
    across_not_judged = replace(check, rig=replace(check.rig, plan=not_judged))
    assert set(figure_files(check)) - set(figure_files(across_not_judged)) == {"across.svg"}
    straight = checks.check(make_rig([0.5, 0.9, 1.6], [1300.0, 1100.0, 700.0]))
    assert set(figure_files(straight)) == {"target.svg", "load_and_pads.svg", "shear_and_moment.svg", "tree.svg"}


def test_plan_is_to_scale_and_says_which():
    check = checked(12)
    frame = fitted(check.rig.plan.target.brief, 10.0, 200.0, 380.0, 150.0)
    a, b = frame.points([(0.3, -0.4), (1.1, 0.2)])
    assert np.hypot(*(b - a)) == pytest.approx(1000.0 * np.hypot(0.8, 0.6) / frame.ratio)
    figure = plan_sheet(check)
    said = re.search(r"scale 1 : ([\d.]+)", figure.texts[1].get_text())
    assert said is not None
    axes = next(axes for axes in figure.axes if axes.get_xlabel() == "x [m]")
    ticks = [float(text.get_text().replace("−", "-")) for text in axes.get_xticklabels()]
    np.testing.assert_allclose(np.diff(axes.get_xticks()), 1000.0 * np.diff(ticks) / float(said[1]), rtol=1e-9)
    # the axes' own coordinates are millimetres of the sheet
    pixels = axes.transData.transform([(0.0, 0.0), (100.0, 100.0)])
    np.testing.assert_allclose(pixels[1] - pixels[0], 100.0 / 25.4 * figure.dpi)


def test_the_area_of_a_disc_goes_with_the_force_and_its_scale_is_shown():
    check = checked(9)
    figure = plan_sheet(check)
    axes = next(axes for axes in figure.axes if axes.get_xlabel() == "x [m]")
    radii = np.array([patch.radius for patch in axes.patches if isinstance(patch, Circle)])
    assert radii.size == 9
    force = np.abs(check.statics.pad_force)
    np.testing.assert_allclose(radii**2 / radii[0] ** 2, force / force[0], rtol=1e-9)
    key = next(axes for axes in figure.axes if any("pad force by area" in text.get_text() for text in axes.texts))
    shown = next(patch.radius for patch in key.patches if isinstance(patch, Circle))
    words = next(text.get_text() for text in key.texts if "pad force by area" in text.get_text())
    value = float(words.split()[-2])
    assert shown**2 / radii[0] ** 2 == pytest.approx(value / force[0])


def test_every_lever_and_plate_has_its_number_in_the_panel_of_its_tier():
    check = checked(24)
    figure = plan_sheet(check)
    for tier, members in pieces.tiers(check.rig).items():
        heading = f"{pieces.tier_letter(tier)}: tier {tier}, "
        axes = next(a for a in figure.axes if any(text.get_text().startswith(heading) for text in a.texts))
        texts = [text.get_text() for text in axes.texts]
        wanted = [str(piece.number) for piece in members]
        wanted += [hole.joins.split()[1] for piece in members for hole in piece.ends]
        assert sorted(texts[:-1]) == sorted(wanted)


def test_tiers_differ_in_more_than_colour():
    styles = [pieces.tier_style(tier) for tier in range(1, 8)]
    assert len({style["color"] for style in styles}) == 1
    assert len({(str(style["linestyle"]), style["linewidth"]) for style in styles}) == 7
    assert len({pieces.tier_letter(tier) for tier in range(1, 60)}) == 59


def test_footprints_are_drawn_at_their_size():
    check = checked(4)
    figure = plan_sheet(check)
    axes = next(axes for axes in figure.axes if axes.get_xlabel() == "x [m]")
    ratio = float(re.search(r"scale 1 : ([\d.]+)", figure.texts[1].get_text())[1])
    sizes = [np.ptp(patch.get_path().vertices, axis=0) for patch in axes.patches if isinstance(patch, PathPatch)]
    wanted = np.array([70.0, 50.0]) / ratio
    assert sum(np.allclose(size, wanted) for size in sizes) == 4


def test_force_and_share_stand_at_every_pad():
    check = checked(12)
    figure = load_and_pads(check)
    texts = [text.get_text() for axes in figure.axes for text in axes.texts]
    for force, share in zip(check.statics.pad_force, check.share_of_curve, strict=True):
        assert f"{force:.1f}\n({share:.1f})".replace("-", "−") in texts


def test_the_curves_are_those_of_the_check():
    check = checked(6)
    for figure, name, quantity in (
        (shear_and_moment(check), "torsion T", "torsion"),
        (across(check), "shear across V", "shear across"),
    ):
        by_title = {axes.get_title(loc="left"): axes for axes in figure.axes}
        rig = next(line for line in by_title[name].lines if line.get_label() == "rig as drilled")
        np.testing.assert_allclose(rig.get_ydata(), check.curves_of(quantity).rig[quantity])
        error = next(a for title, a in by_title.items() if title.startswith(f"error of the {quantity}"))
        drawn = next(line for line in error.lines if str(line.get_label()).startswith("error"))
        size = check.errors[quantity].reference
        np.testing.assert_allclose(drawn.get_ydata(), 100 * check.curves_of(quantity).error(quantity) / size)


def test_the_pressure_drawn_is_linear_between_points_and_the_nearest_beyond():
    brief = plan_brief()
    load = replace(pressure(700.0, -150.0, 200.0, times=1.5))
    x, y = np.array([0.4, 1.7, 9.0]), np.array([-0.2, 0.1, 0.5])
    # the map ends at x = 5 m
    wanted = 1.5 * (700.0 - 150.0 * np.array([0.4, 1.7, 5.0]) + 200.0 * y)
    np.testing.assert_allclose(pressure_at(load, brief, x, y), wanted, rtol=1e-12)


def test_the_pressure_s_bar_has_round_numbers_of_its_own_unit():
    for system, unit in (("SI", "Pa"), ("us", "psi")):
        figure = target_sheet(checked(6).rig.plan.target, system)
        (bar,) = (axes for axes in figure.axes if axes.get_ylabel().startswith("pressure"))
        assert f"[{unit}]" in bar.get_ylabel()
        ticks = [text.get_text() for text in bar.get_yticklabels()]
        assert len(ticks) > 3
        assert all(len(tick.lstrip("−0.").replace(".", "").rstrip("0")) <= 3 for tick in ticks), ticks


def test_a_border_between_pads_is_drawn_once():
    """Twice, its dashes would fill each other's gaps: neighbours find it each for itself, and a last digit apart."""
    x, y = np.repeat([0.19, 0.57, 0.95, 1.33, 1.71], 3), np.tile([-0.4, 0.0, 0.4], 5)
    edge = outline(((0.0, -0.6), (1.9, -0.6), (1.9, 0.6), (0.0, 0.6)))
    brief = plan_brief(
        panel(outline=edge, right=1.9, supports=(0.15, 1.75)),
        loads=(pressure(-900.0),),
        pads=replace(make_pads(count=15), y=y),
    )
    rig = make_plan_rig(x, y, np.full(15, -144.0), brief, grouped(x, y, list(range(15))))
    figure = load_and_pads(checks.check(rig))
    dashed = [curve for curve in figure.axes[0].get_lines() if curve.is_dashed() and curve.get_linewidth() == 0.9]
    borders = [LineString(curve.get_xydata()) for curve in dashed if len(curve.get_xdata()) > 1]
    assert len(borders) > 20
    drawn = sum(border.length for border in borders)
    assert union_all(borders, grid_size=1e-3).length == pytest.approx(drawn, rel=1e-3)


def test_a_study_of_plan_rigs_shows_torsion_too():
    check = checked(8)
    figure = study_sheet(Study(check.rig.plan.target.brief, (StudyRow(8, check),)))
    curves = {curve.get_label(): curve.get_ydata() for curve in figure.axes[0].get_lines()}
    assert curves["torsion, drilled"] == pytest.approx([100 * check.torsion_error_peak])


def test_a_study_without_a_bound_shows_none_and_its_key_is_clear_of_the_curve():
    check = checked(8)
    plan = check.rig.plan
    for least, shown in ((0.0, False), (0.4, True)):
        proof = replace(plan.proof, band_use_least=least, moment_error_least=least / 100)
        bound = replace(check, band_use=3.8, rig=replace(check.rig, plan=replace(plan, proof=proof)))
        figure = study_sheet(Study(plan.target.brief, (StudyRow(8, bound), StudyRow(12, bound))))
        labels = {
            text.get_text() for axes in figure.axes if axes.get_legend() for text in axes.get_legend().get_texts()
        }
        assert {"proven least" in labels, "moment, proven least" in labels} == {shown}
        use = next(axes for axes in figure.axes if "band use" in axes.get_ylabel())
        figure.draw(FigureCanvasAgg(figure).get_renderer())
        key = use.get_legend().get_window_extent()
        top = max(line.get_ydata()[0] for line in use.lines if line.get_label() == "drilled")
        assert use.transData.transform((12, top))[1] < key.y0


def test_branches_keep_who_hangs_with_whom_and_never_cross():
    check = checked(24)
    drawn = in_branches(check.rig)
    assert sorted(np.round(np.diff(np.sort(drawn.pad_x)), 9)) == pytest.approx([3.2 / 24] * 23)
    for old, new in zip(check.rig.trees[0].pieces, drawn.trees[0].pieces, strict=True):
        assert [hole.joins for hole in old.holes] == [hole.joins for hole in new.holes]
        assert [(hole.u, hole.v) for hole in old.holes] == [(hole.u, hole.v) for hole in new.holes]
        ends = [hole.x for hole in new.ends]
        assert ends == sorted(ends)
        assert ends[0] < new.pivot.x < ends[-1]
    spans = {}
    for piece in drawn.trees[0].pieces:
        spans.setdefault(piece.tier, []).append((piece.ends[0].x, piece.ends[-1].x))
    for members in spans.values():
        for (a, b), (c, d) in combinations(members, 2):
            assert b < c or d < a


def test_labels_take_the_object_itself_then_places_beside_it():
    board = Board(0.0, 0.0, 100.0, 100.0)
    assert board.place(50.0, 50.0, 10.0, 4.0) == (50.0, 50.0)
    x, y = board.place(50.0, 50.0, 10.0, 4.0)
    assert abs(x - 50.0) >= 10.0 or abs(y - 50.0) >= 4.0
    assert np.hypot(x - 50.0, y - 50.0) < 15.0


def test_labels_keep_off_lines_and_stay_inside():
    board = Board(0.0, 0.0, 100.0, 100.0)
    board.draw_line(np.array([50.0, 100.0]), np.array([50.0, 50.0]))
    x, _ = board.place(50.0, 50.0, 8.0, 3.0, 1.0)
    assert x <= 50.0
    for _ in range(20):
        x, y = board.place(99.0, 99.0, 8.0, 3.0, 1.0)
        assert 4.0 <= x <= 96.0
        assert 1.5 <= y <= 98.5
