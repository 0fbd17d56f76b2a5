"""Rigs checked again: with holes as built, and against another target."""

from __future__ import annotations

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_pads, shape_load
from hand_rigs import make_rig, with_hole

from rigdesign.checks import check, check_with_holes, check_with_table, recheck, solve_statics
from rigdesign.checks.holes_table import holes_from_text
from rigdesign.checks.measures import shares_of_curve
from rigdesign.errors import TableError
from rigdesign.report.tables import holes_csv
from rigdesign.target import build_target

X = np.array([0.5, 0.9, 1.6, 2.0, 2.9])
FORCE = np.array([1300.0, 1100.0, 1700.0, 800.0, 500.0])
BRIEF = make_brief(acceptance=make_acceptance(0.5, 0.6))


def rig():
    return make_rig(X, FORCE, BRIEF)


def built(text: str):
    return check_with_table(rig(), holes_from_text(text, "built.csv"))


def test_the_rigs_own_table_changes_nothing(tmp_path):
    known = rig()
    own = check(known)
    file = tmp_path / "holes.csv"
    file.write_bytes(holes_csv(own))
    again = check_with_holes(known, file)
    assert (again.statics.pad_force == own.statics.pad_force).all()
    assert again.regions == own.regions
    note = next(f for f in again.findings if f.object == "holes")
    assert note.text == "12 of the rig's 12 holes are in the table; none is elsewhere in its lever than in the rig"


def test_a_spreadsheets_byte_order_mark_and_line_ends_are_read(tmp_path):
    file = tmp_path / "holes.csv"
    file.write_bytes(b"\xef\xbb\xbf" + holes_csv(check(rig())).replace(b"\n", b"\r\n") + b"\r\n")
    assert (check_with_holes(rig(), file).statics.pad_force == solve_statics(rig()).pad_force).all()


def test_a_hole_as_built_moves_load_and_is_said():
    known = rig()
    piece = known.trees[0].pieces[1]
    a = next(h for h in piece.ends if h.name == "A")
    found = built(f"lever,hole,u_m,v_m\n2,A,{a.u - 0.01},0\n")
    expected = solve_statics(with_hole(known, 2, "A", u=a.u - 0.01)).pad_force
    assert found.statics.pad_force == pytest.approx(expected)
    note = next(f for f in found.findings if f.object == "lever 2 hole A" and f.severity == "note")
    change = np.abs(expected / FORCE - 1)
    assert note.value == "10.0 mm"
    assert note.text.startswith("1 of the rig's 12 holes are in the table; the others are taken as drilled; 1 are")
    assert f"at pad {int(np.argmax(change)) + 1}" in note.text
    assert f"{100 * change.max():.2f} % of their own" in note.text
    assert found.rig.words == "the holes are as built, from a table"
    # the pads stay where they are on the specimen
    assert (found.rig.pad_x == X).all()


def test_v_counts_as_well():
    found = built("lever,hole,u_m,v_m\n2,pivot,0,0.004\n")
    assert found.rig.trees[0].pieces[1].pivot.v == 0.004
    assert any("off the line of the end pins" in f.text for f in found.findings)


def test_places_in_plan_are_reported_and_do_not_count():
    known = rig()
    a = known.trees[0].pieces[1].ends[0]
    found = built(f"lever,hole,u_m,v_m,x_m,y_m\n2,A,{a.u!r},0,{a.x + 0.004},0\n")
    assert (found.statics.pad_force == solve_statics(known).pad_force).all()
    note = next(f for f in found.findings if "x_m or y_m" in f.text)
    assert (note.object, note.value) == ("lever 2 hole A", "4.00 mm")


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", "built.csv: the table of holes is empty"),
        ("lever,hole,u_m,v_m\n", "has no rows"),
        ("lever,hole,u_m\n1,A,0\n", "line 1: the table of holes lacks a column: v_m"),
        ("lever;hole;u_m;v_m\n1;A;0,1;0\n", "commas between the columns and a full stop as decimal sign"),
        ("lever,hole,u_mm,u_m,v_m\n1,A,0,0,0\n", "not known: u_mm"),
        ("lever,hole,u_m,v_m\n9,A,0.1,0\n", "line 2: the rig has no such lever: lever 9 .accepted: 1 to 4."),
        ("lever,hole,u_m,v_m\n1,C,0.1,0\n", "the lever has no such hole: C .accepted: A, B, pivot."),
        ("lever,hole,u_m,v_m\n1,A,0.1\n", "line 2: a row has the wrong number of cells: 3 .accepted: 4"),
        ("lever,hole,u_m,v_m\n1,A,ten,0\n", "line 2, u_m: a cell is not a number: ten"),
        ("lever,hole,u_m,v_m\n1,A,-0.3,1e300\n", "line 2, v_m: the number is too large: 1e300"),
        ("lever,hole,u_m,v_m\n1,A,nan,0\n", "not a number: nan"),
        ("lever,hole,u_m,v_m\n1,A,,0\n", "not a number: an empty cell"),
        ("lever,hole,u_m,v_m\nlever 1,A,0.1,0\n", "named by its number: lever 1"),
        ("lever,hole,u_m,v_m\n1,A,-0.1,0\n1,A,-0.2,0\n", "line 3: a hole is given twice: lever 1 hole A"),
        ("lever,hole,joins,u_m,v_m\n1,A,pad 4,-0.1,0\n", "joins something else in the rig: pad 4 .accepted: lever 2"),
        ("lever,hole,u_m,u_m,v_m\n1,A,0,0,0\n", "a column twice"),
    ],
)
def test_tables_that_cannot_be_used(text, message):
    with pytest.raises(TableError, match=message):
        built(text)


def test_files_that_cannot_be_read(tmp_path):
    with pytest.raises(TableError, match="is not there"):
        check_with_holes(rig(), tmp_path / "none.csv")
    with pytest.raises(TableError, match="cannot be read"):
        check_with_holes(rig(), tmp_path)
    (tmp_path / "odd.csv").write_bytes(b"lever,hole,u_m,v_m\n1,A,\xff,0\n")
    with pytest.raises(TableError, match="not text in UTF-8"):
        check_with_holes(rig(), tmp_path / "odd.csv")


def test_another_target_scales_the_jack_and_judges_anew():
    other = make_brief(
        loads=(shape_load("triangular", 9000.0),), pads=make_pads(count=7), acceptance=make_acceptance(0.9, 0.9)
    )
    found = recheck(rig(), other)
    assert found.statics.pad_force == pytest.approx(FORCE * 9000 / FORCE.sum())
    target = build_target(other)
    assert found.rig.plan.target.resultant == pytest.approx(9000.0)
    assert found.moment_error_peak == pytest.approx(np.abs(found.curves.error("moment")).max() / target.moment_peak)
    # the triangle's resultant stands further in than the ellipse's: the jack does not move
    assert found.jack_offset == pytest.approx(X @ FORCE / FORCE.sum() - target.net.first_moment / target.net.total)
    texts = [f.text for f in found.findings]
    assert any("with 5.40 kN on the jack; that is scaled to this target" in text for text in texts)
    assert any("asks for 7 pads, the rig has another number" in text for text in texts)
    # the stage's remarks stay together, and nothing is said of an aim that was another's
    assert [f.stage for f in found.findings] == sorted((f.stage for f in found.findings), reverse=True)
    assert not any("the aim" in text for text in texts)


def test_another_target_has_no_proof():
    other = make_brief(loads=(shape_load("triangular", 9000.0),), acceptance=make_acceptance(0.9, 0.9))
    found = recheck(rig(), other)
    proof = found.rig.plan.proof
    assert (proof.band_use_least, proof.moment_error_least) == (0.0, 0.0)
    assert proof.method.startswith("nothing is proven")
    # wanted forces are those of the drilled holes here
    assert proof.band_use == pytest.approx(found.band_use)
    share = found.rig.plan.share
    assert share.sum() == pytest.approx(9000.0)
    assert proof.evenness == pytest.approx(np.abs(found.rig.plan.force / share - 1).max())


def test_the_same_brief_again_changes_nothing():
    known = check(rig())
    again = recheck(rig(), BRIEF)
    assert again.statics.pad_force == pytest.approx(known.statics.pad_force, rel=1e-12)
    assert again.band_use == pytest.approx(known.band_use, rel=1e-9)


def test_a_target_the_other_way_is_a_warning():
    found = recheck(rig(), make_brief(loads=(shape_load(total=-5400.0),)))
    scaled = next(f for f in found.findings if "scaled" in f.text)
    assert scaled.severity == "warning"
    assert scaled.text.endswith("and acts the other way")
    assert (found.statics.pad_force < 0).all()


def test_shares_of_the_curve_belong_to_the_nearest_pad():
    target = build_target(make_brief())
    order = np.array([3, 0, 4, 1, 2])
    share = shares_of_curve(target.net, X)
    assert shares_of_curve(target.net, X[order]) == pytest.approx(share[order])
    middle = np.array([1.25])
    beyond = target.net.force_beyond(middle, "inboard")[0]
    assert share[2:].sum() == pytest.approx(beyond)
