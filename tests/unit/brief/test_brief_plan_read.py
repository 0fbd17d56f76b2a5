"""What the brief of a surface becomes: every key, every default, every table."""

from __future__ import annotations

import inspect
import math
import re
from pathlib import Path

import numpy as np
import pytest
from plan_briefs import AXIS, FREE, LOAD, OUTLINE, PRESSURE, RIBS, SPARS

from rigdesign.brief import brief_from_source, read_brief
from rigdesign.brief.model import CoupleLoad, InternalLoad, PointLoads, PressureLoad, ShapeLoad, TableLoad, TorqueLoad

CORNERS = {(0.2, 0.3), (3.4, -0.2), (3.4, -0.5), (0.2, -0.35)}


def load_of(read_plan, keys, **tables):
    (load,) = read_plan((LOAD, keys), **tables).loads
    return load


def test_a_surface_gets_every_default(read_plan) -> None:
    brief = read_plan((AXIS + "\n", ""), FREE)
    piece, pads = brief.specimen, brief.pads
    assert piece.is_surface
    assert (piece.axis, piece.cut, piece.weight_line) == (None, "square to x", None)
    assert piece.reference_axis.at(np.array([0.2, 1.0, 3.4])).tolist() == [0, 0, 0]
    assert (pads.stations.size, pads.y.size, pads.turns.size, pads.rows) == (0, 0, 0, ())
    assert (pads.turn, pads.edge, pads.keep_out_areas) == ("along x", 0.0, ())
    assert (brief.levers.plates, brief.levers.pair, brief.levers.clearance) == (False, "any", 0.03)
    assert (brief.jack.at, brief.jack.at_y, brief.jack.step) == (None, None, None)
    bands = [(rule.quantity, rule.side, rule.amount, rule.of) for rule in brief.acceptance.rules]
    assert bands == [
        ("moment", "under", 0.02, "peak"),
        ("moment", "over", 0.02, "peak"),
        ("torsion", "under", 0.05, "peak"),
        ("torsion", "over", 0.05, "peak"),
    ]
    assert brief.acceptance.defaulted
    assert (brief.acceptance.share, brief.acceptance.share_defaulted) == (None, False)


@pytest.mark.parametrize("closed", [True, False])
@pytest.mark.parametrize("reverse", [True, False])
def test_an_outline_is_counter_clockwise_whichever_way_it_is_written(read_plan, closed, reverse) -> None:
    heading, *rows = OUTLINE.splitlines()
    rows = rows[::-1] if reverse else rows
    rows += rows[:1] if closed else []
    outline = read_plan(outline="\n".join([heading, *rows])).specimen.outline
    assert set(zip(outline.x.tolist(), outline.y.tolist(), strict=True)) == CORNERS
    assert outline.x.size == 4
    assert outline.polygon.exterior.is_ccw
    assert outline.polygon.area == pytest.approx(3.2 * (0.65 + 0.3) / 2, rel=1e-12)
    with pytest.raises(ValueError, match="read-only"):
        outline.x[0] = 1.0


def test_corners_off_an_end_by_their_rounding_stand_on_it(read_plan) -> None:
    """133.86 in is 3.400044 m: 0.044 mm beyond the tip, less than half of the last digit."""
    table = "x [in],y [in]\n7.87,11.81\n133.86,-7.87\n133.86,-19.69\n7.87,-13.78\n"
    outline = read_plan((AXIS + "\n", ""), FREE, outline=table).specimen.outline
    assert (outline.x.min(), outline.x.max()) == (0.2, 3.4)


def test_axis_cut_and_weight_line(read_plan) -> None:
    line = '[["0.2 m", "2 in"], ["3.4 m", "-0.42 m"]]'
    edit = (AXIS, f'{AXIS}\ncut = "square to axis"\nweight = "w.csv"\npoint_masses = "m.csv"\nweight_line = {line}')
    piece = read_plan(edit, w="x [m],mass [kg/m]\n0.2,3\n3.4,1\n", m="x [m],mass [kg]\n1.2,4\n").specimen
    assert piece.cut == "square to axis"
    assert piece.axis.x.tolist() == [0.2, 1.5, 3.4]
    assert piece.axis.y.tolist() == [0.0, -0.1, -0.4]
    assert piece.weight_line.y.tolist() == [0.0508, -0.42]
    assert piece.weight.point_mass.tolist() == [4.0]


def test_the_axis_of_two_supports(read_plan) -> None:
    held = 'support = "two supports"\nends = ["0.2 m", "3.4 m"]\nsupports = ["0.5 m", "3 m"]'
    piece = read_plan(('support = "cantilever"\nroot = "0.2 m"\ntip = "3.4 m"', held)).specimen
    assert piece.supports == (0.5, 3.0)
    assert piece.is_surface


def test_a_pressure_map(read_plan) -> None:
    load = read_plan((LOAD, LOAD + "\ntimes = -1.5")).loads[0]
    assert isinstance(load, PressureLoad)
    assert load.x.tolist() == [0.2, 0.2, 3.4, 3.4, 1.1]
    assert load.y.tolist() == [-0.3, 0.3, -0.2, -0.5, 0.0]
    assert load.pressure.tolist() == [800, 900, 100, 90, 700]
    assert load.times == -1.5
    assert load.where == "plane.toml, line 10, [[load]] 1, map.csv"


def test_running_loads_and_their_lines(read_plan) -> None:
    line = 'line = [["0.2 m", "0.1 m"], ["3.4 m", "-0.3 m"]]'
    shape = load_of(read_plan, f'shape = "sine"\ntotal = "2 kN"\nfrom = "0.5 m"\n{line}')
    assert isinstance(shape, ShapeLoad)
    assert (shape.line.x.tolist(), shape.line.y.tolist()) == ([0.2, 3.4], [0.1, -0.3])
    table = load_of(read_plan, f'table = "t.csv"\n{line}', t="x [m],load [N/m]\n0.2,30\n3.4,10\n")
    assert isinstance(table, TableLoad)
    assert table.line.y.tolist() == [0.1, -0.3]
    assert load_of(read_plan, 'shape = "sine"\ntotal = "2 kN"').line is None


def test_a_line_is_looked_at_where_its_load_acts_alone(read_plan) -> None:
    line = 'line = [["0 m", "0.9 m"], ["1 m", "0 m"], ["2 m", "0 m"]]'
    keys = f'shape = "sine"\ntotal = "2 kN"\nfrom = "1 m"\nto = "2 m"\n{line}'
    assert load_of(read_plan, keys).line.y.tolist() == [0.9, 0.0, 0.0]


def test_running_torques_and_couples(read_plan) -> None:
    torque = load_of(read_plan, 'torque = "t.csv"', t="x [m],torque [kN*m/m]\n0.2,0.03\n2,0.02\n2,0\n3.4,-0.01\n")
    assert isinstance(torque, TorqueLoad)
    assert torque.torque.tolist() == [30, 20, 0, -10]
    couple = load_of(read_plan, 'couple = "-100 in*lbf"\nat = "1.1 m"')
    assert couple == CoupleLoad(1.1, -100 * 0.0254 * 4.4482216152605, 1.0, "plane.toml, line 10, [[load]] 1")


def test_point_loads_in_plan(read_plan) -> None:
    pair = load_of(read_plan, 'point = "350 N"\nat = ["1.1 m", "0.05 m"]')
    assert isinstance(pair, PointLoads)
    assert (pair.x.tolist(), pair.y.tolist(), pair.force.tolist()) == ([1.1], [0.05], [350.0])
    on_axis = load_of(read_plan, 'point = "350 N"\nat = "2.45 m"')
    assert on_axis.y.tolist() == pytest.approx([-0.25], abs=1e-15)  # halfway between the axis' last two points


def test_a_table_of_forces_may_stand_in_any_order(read_plan) -> None:
    keys = 'forces = "f.csv"'
    load = load_of(read_plan, keys, f="x [m],y [m],force [N]\n2,0,30\n2,-0.2,10\n1,0,20\n")
    assert (load.x.tolist(), load.y.tolist(), load.force.tolist()) == ([1, 2, 2], [0, -0.2, 0], [20, 10, 30])
    load = load_of(read_plan, keys, f="x [m],force [N]\n1.5,20\n3.4,10\n")
    assert load.y.tolist() == pytest.approx([-0.1, -0.4], abs=1e-15)


def test_an_internal_table_with_torsion(read_plan) -> None:
    table = "x [m],shear [N],moment [N*m],torsion [N*m]\n0,0,0,0\n1.2,80,30.5,-2.25\n3.2,300,400,25\n"
    load = load_of(read_plan, 'internal = "i.csv"\nreverse = ["torsion"]\nstations_from = "tip"', i=table)
    assert isinstance(load, InternalLoad)
    assert load.x.tolist() == pytest.approx([0.2, 2.2, 3.4])
    assert load.torsion.tolist() == [-25, 2.25, 0]
    assert load.moment.tolist() == [400, 30.5, 0]
    assert load.torsion_digit == 0.01
    bare = load_of(read_plan, 'internal = "i.csv"', i="x [m],shear [N],moment [N*m]\n0.2,300,400\n3.4,0,0\n")
    assert (bare.torsion.size, bare.torsion_digit) == (0, 0.0)
    pure = load_of(
        read_plan,
        'internal = "i.csv"\nstations_from = "tip"',
        i=table.replace("80,30.5", "0,0").replace("300,400", "0,0"),
    )
    assert pure.torsion.any()


def test_crossings_are_the_places_by_x_then_y(read_plan) -> None:
    """The upper spar falls by 0.45 m over 3.2 m, the lower one by 0.25 m."""
    pads = read_plan().pads
    assert pads.count == 4
    assert pads.stations.tolist() == [0.5, 0.5, 1.0, 1.0, 1.7, 1.7]
    lower, upper = (
        [start - fall * (x - 0.2) / 3.2 for x in (0.5, 1, 1.7)] for start, fall in ((-0.2, 0.25), (0.2, 0.45))
    )
    assert pads.y[::2].tolist() == pytest.approx(lower, abs=1e-15)
    assert pads.y[1::2].tolist() == pytest.approx(upper, abs=1e-15)


def test_ribs_as_lines_cross_the_spars_askew(read_plan) -> None:
    """A rib from (1, 0.5) to (1.4, -0.5) meets y = 0.1 at x = 1.16 and y = -0.2 at x = 1.28."""
    spars = 'spars = [[["0.2 m", "0.1 m"], ["1.5 m", "0.1 m"]], [["0.2 m", "-0.2 m"], ["2 m", "-0.2 m"]]]'
    ribs = 'ribs = [[["1 m", "0.5 m"], ["1.4 m", "-0.5 m"]], [["0.6 m", "-0.3 m"], ["0.6 m", "0.2 m"]]]'
    pads = read_plan((SPARS, spars), (RIBS, ribs)).pads
    assert pads.stations.tolist() == pytest.approx([0.6, 0.6, 1.16, 1.28], abs=1e-15)
    assert pads.y.tolist() == pytest.approx([-0.2, 0.1, 0.1, -0.2], abs=1e-15)


def test_all_crossings_are_the_pads_of_fixed_places(read_plan) -> None:
    assert read_plan(('count = 4\nplaces = "hard points"', 'places = "fixed"')).pads.count == 6


def test_places_from_a_table(read_plan) -> None:
    edit = (f"{SPARS}\n{RIBS}", 'table = "c.csv"')
    table = "x [m],y [m],turn [deg],note\n2,0,30,b\n1,0.05,-10,a\n2,-0.3,0,c\n"
    pads = read_plan(edit, c=table).pads
    assert (pads.stations.tolist(), pads.y.tolist()) == ([1, 2, 2], [0.05, -0.3, 0])
    assert pads.turns.tolist() == pytest.approx([math.radians(turn) for turn in (-10, 0, 30)])
    pads = read_plan(edit, c="x [m]\n0.85\n1.5\n").pads
    assert pads.y.tolist() == pytest.approx([-0.05, -0.1], abs=1e-15)
    assert pads.turns.size == 0
    pads = read_plan((f"{SPARS}\n{RIBS}", 'stations = "0.85, 1.5 m"')).pads
    assert pads.y.tolist() == pytest.approx([-0.05, -0.1], abs=1e-15)


@pytest.mark.parametrize(
    ("turn", "value"), [("along axis", "along axis"), ("along x", "along x"), ("-12 deg", -12 * math.pi / 180)]
)
def test_turned_footprints(read_plan, turn, value) -> None:
    read = read_plan(("", f'turn = "{turn}"')).pads.turn
    assert read == (pytest.approx(value, rel=1e-15) if isinstance(value, float) else value)


def test_rows_edge_and_keep_out_areas(read_plan) -> None:
    more = (
        'rows = [[["0.4 m", "0.1 m"], ["3 m", "-0.3 m"]]]\nedge = "30 mm"\nkeep_out_areas = "k.csv"\n'
        'keep_out = [["2 m", "2.1 m"]]'
    )
    table = "area,x [m],y [m]\n7,1,0\n7,1,0.1\n7,1.2,0\naft hatch,0,0\naft hatch,1.1,0\naft hatch,1.1,2\n"
    pads = read_plan((FREE[0], f"count = 4\n{more}"), k=table).pads
    assert pads.rows[0].y.tolist() == [0.1, -0.3]
    assert (pads.edge, pads.keep_out) == (0.03, ((2.0, 2.1),))
    first, second = pads.keep_out_areas
    assert (first.name, second.name) == ('the keep-out area "7"', 'the keep-out area "aft hatch"')
    assert first.polygon.area == pytest.approx(0.01)
    assert first.polygon.exterior.is_ccw
    assert second.x.tolist() == [0, 1.1, 1.1]


def test_levers_and_jack(read_plan) -> None:
    more = (
        '[levers]\nplates = true\npair = "across first"\nclearance = "1 in"\ngrouping = [[1, 3, 2], 4]\n'
        '[jack]\nat = ["1.5 m", "-0.1 m"]'
    )
    brief = read_plan(("", more))
    assert (brief.levers.plates, brief.levers.pair, brief.levers.clearance) == (True, "across first", 0.0254)
    assert brief.levers.grouping == ((1, 3, 2), 4)
    assert (brief.jack.at, brief.jack.at_y, brief.jack.step) == (1.5, -0.1, None)
    assert read_plan(("", '[jack]\nat = "1.5 m"')).jack.at_y is None


def test_bands_of_a_surface(read_plan) -> None:
    more = """[acceptance]
moment = "2 %"
torsion = "40 N*m"
torsion_over = "6 %"
across = "5 %"
across_under = "3 %"
[[acceptance.region]]
from = "1 m"
to = "2 m"
torsion = "4 %"
"""
    found = read_plan(("", more)).acceptance
    rules = {(rule.quantity, rule.side): (rule.amount, rule.absolute) for rule in found.rules}
    assert rules == {
        ("moment", "under"): (0.02, False),
        ("moment", "over"): (0.02, False),
        ("torsion", "under"): (40.0, True),
        ("torsion", "over"): (0.06, False),
        ("moment across", "under"): (0.03, False),
        ("moment across", "over"): (0.05, False),
        ("shear across", "under"): (0.03, False),
        ("shear across", "over"): (0.05, False),
    }
    assert [(rule.quantity, rule.amount) for rule in found.regions[0].rules] == [("torsion", 0.04)] * 2
    assert (found.share, found.share_defaulted, found.defaulted) == (0.25, True, False)
    told = read_plan(("", '[acceptance]\nacross = "5 %"\nshare = "18 %"')).acceptance
    assert (told.share, told.share_defaulted) == (0.18, False)


def test_a_surface_is_read_again_from_the_texts_kept(read_plan) -> None:
    brief = read_plan()
    again = brief_from_source(brief.source)
    assert sorted(brief.source.texts) == ["map.csv", "outline.csv", "plane.toml"]
    assert again.pads.y.tolist() == brief.pads.y.tolist()
    assert again.specimen.outline.x.tolist() == brief.specimen.outline.x.tolist()


def test_the_example_of_the_page_is_a_brief(tmp_path) -> None:
    page = (Path(__file__).parents[3] / "docs" / "brief.md").read_text(encoding="utf-8")
    text, outline, areas = re.findall(r"(?:^    .*\n|^\n)+", page.split("### An example of a surface")[1], re.M)[:3]
    (tmp_path / "tail.toml").write_text(inspect.cleandoc("\n" + text), encoding="utf-8")
    tables = {
        "tailplane": inspect.cleandoc("\n" + outline),
        "tailplane_hatches": inspect.cleandoc("\n" + areas),
        "tailplane_weight": "x [m],mass [kg/m]\n0.15,4\n2.35,2\n",
        "tailplane_pressure": PRESSURE,
    }
    for name, table in tables.items():
        (tmp_path / f"{name}.csv").write_text(table + "\n", encoding="utf-8")
    brief = read_brief(tmp_path / "tail.toml")
    assert brief.pads.stations.size == 12
    assert brief.pads.keep_out_areas[0].x.tolist() == [0.85, 0.98, 0.98, 0.85]
