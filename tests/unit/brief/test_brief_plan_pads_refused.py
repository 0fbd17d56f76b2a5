"""Every fault of a surface's pads, levers, jack and bands, with the telling parts of its message."""

from __future__ import annotations

import pytest
from plan_briefs import FREE, RIBS, SPARS, told

PLACES = f"{SPARS}\n{RIBS}"
TABLE = (PLACES, 'table = "t.csv"')
AREAS = (FREE[1], FREE[1] + '\nkeep_out_areas = "t.csv"')


@pytest.mark.parametrize(
    ("edits", "table", "parts"),
    [
        ([(RIBS, "")], "", ["[pads] spars", '"spars" goes with "ribs"', 'give "ribs"']),
        ([(SPARS, "")], "", ["[pads] ribs", '"ribs" goes with "spars"']),
        (
            [(PLACES, "")],
            "",
            ['places = "hard points" needs the places once', '"spars" with "ribs", "table", or "stations"'],
        ),
        ([(RIBS, RIBS + '\ntable = "t.csv"')], "", ["needs the places once: table, spars, ribs"]),
        ([('places = "hard points"\n', "")], "", ['places = "free" goes without "spars"']),
        (
            [('places = "hard points"', 'places = "fixed"')],
            "",
            ["fixed pads are as many as there are places: 4", "(accepted: 6)"],
        ),
        ([("count = 4\n", "")], "", ['the key "count" is missing']),
        ([(RIBS, 'ribs = "0.5, 0.1 m"')], "", ["in order of x, each once"]),
        ([(RIBS, 'ribs = "0.1, 0.5 m"')], "", ["[pads] ribs", "the rib at 0.100 m lies off the specimen"]),
        (
            [('["3.4 m", "-0.25 m"]', '["1.5 m", "-0.25 m"]'), ('["3.4 m", "-0.45 m"]', '["1.6 m", "-0.45 m"]')],
            "",
            ["rib 3 (x = 1.700 m) meets no spar"],
        ),
        ([('["0.2 m", "0.2 m"]', '["2.2 m", "0 m"]')], "", ["[pads] spars: spar 1 meets no rib"]),
        ([('["0.2 m", "-0.2 m"], ["3.4 m", "-0.45 m"]', '["0.2 m", "0.2 m"], ["3.4 m", "-0.3 m"]')], "", []),
        (
            [('["0.2 m", "-0.2 m"], ["3.4 m", "-0.45 m"]', '["0.2 m", "-0.4 m"], ["3.4 m", "-0.1 m"]')],
            "",
            ["[pads] spars: the crossing of spar 2 and rib 1 lies off the outline: x = 0.500 m", "mm off"],
        ),
        (
            [
                (
                    '["0.2 m", "-0.2 m"], ["3.4 m", "-0.45 m"]',
                    '["0.2 m", "-0.2 m"], ["1 m", "0.0875 m"], ["3.4 m", "-0.45 m"]',
                )
            ],
            "",
            ["the crossing of spar 2 and rib 2", "the crossing of spar 1 and rib 2", "are one place: at x = 1.000 m"],
        ),
        (
            [(SPARS, 'spars = [["0.2 m", "0 m"], ["3.4 m", "0 m"]]')],
            "",
            ["a list of lines is due, and this is one line", "brackets"],
        ),
        (
            [(SPARS, 'spars = [[["0.2 m", "0 m"], ["0.2 m", "0.1 m"]]]')],
            "",
            ["line 1: the line turns back at its point 2"],
        ),
        (
            [(RIBS, 'ribs = [[["1 m", "0.2 m"], ["1.1 m", "-0.3 m"], ["1.2 m", "0 m"]]]')],
            "",
            ["[pads] ribs: line 1: the rib turns back at its point 3", "y rises, or falls"],
        ),
        (
            [(RIBS, 'ribs = [[["0.2 m", "0.2 m"], ["3.4 m", "-0.25 m"]]]')],
            "",
            ["[pads] ribs: spar 1 and rib 1 run along each other"],
        ),
        ([TABLE], "x [m],y [m]\n1,0\n2,0.9\n", ["t.csv, line 3: the row lies off the outline: x = 2 m, y = 0.9 m"]),
        ([TABLE], "x [m],y [m]\n1,0\n2,0\n1,0\n", ["t.csv, line 4: two rows stand at one place", "as on line 2"]),
        (
            [(PLACES, 'table = "t.csv"\nturn = "12 deg"')],
            "x [m],y [m],turn [deg]\n1,0,3\n",
            ["[pads] turn", "given twice"],
        ),
        ([TABLE], "x [m],y [m],turn [m]\n1,0,3\n", ["column turn", "an angle is due"]),
        ([(RIBS, RIBS + '\nturn = "along y"')], "", ["[pads] turn", '"along x", "along axis", or an angle']),
        (
            [(RIBS, RIBS + '\nrows = [[["1 m", "0 m"], ["2 m", "0 m"]]]')],
            "",
            ['"rows" are for free places', 'places = "free"'],
        ),
        ([(RIBS, RIBS + '\nlargest_pressure = "3 kPa"\nlength = "10 mm"')], "", ["give length and width"]),
        (
            [FREE, ("count = 4", 'count = 4\nrows = [[["1 m", "0 m"], ["2 m", "0.4 m"]]]')],
            "",
            ["[pads] rows: row 1 leaves the outline", "x = 2.000 m"],
        ),
        (
            [FREE, ("count = 4", 'count = 4\nrows = [[["2 m", "0 m"], ["1 m", "0 m"]]]')],
            "",
            ["turns back at its point 2"],
        ),
        (
            [FREE, AREAS],
            "area,x [m],y [m]\na,1,0\na,2,0.1\na,2,0\na,1,0.1\n",
            ['t.csv: the keep-out area "a" crosses', "lines 2 and 3 and between lines 4 and 5"],
        ),
        ([FREE, AREAS], "area,x [m],y [m]\na,1,0\na,2,0.1\n", ['the keep-out area "a" has 2 corners']),
        (
            [FREE, AREAS],
            "area,x [m],y [m]\na,1,0\na,2,0\na,2,1\nb,1,0\nb,2,0\nb,2,1\na,1,1\n",
            ["t.csv, line 8, column area", "do not stand together", '"a" again'],
        ),
        ([FREE, AREAS], "area,x [m],y [m]\n ,1,0\n ,2,0\n", ["line 2, column area: the cell is empty"]),
        ([FREE, AREAS], "x [m],y [m]\n1,0\n", ['"area" is missing', "area, x [unit of length]"]),
    ],
)
def test_pads(plan_refusal, read_plan, edits, table, parts) -> None:
    if not parts:
        assert read_plan(*edits).pads.stations.size == 6
        return
    told(plan_refusal(*edits, t=table), parts)


@pytest.mark.parametrize(
    ("keys", "parts"),
    [
        ("[levers]\nplates = 1", ["[levers] plates", "true or false is due"]),
        ('[levers]\npair = "across"', ["[levers] pair", '"across first", "along first" or "any"']),
        ('[levers]\nclearance = "-1 mm"', ["[levers] clearance", "0 or more"]),
        ("[levers]\ngrouping = [[1, 2, 3], 4]", ["joins two, and this group holds 3", "plates = true"]),
        ("[levers]\nplates = true\ngrouping = [1, 2, 3, 4]", ["a lever joins two and a plate three", "holds 4"]),
        ('[jack]\nat = ["1 m", "2 m"]', ["[jack] at", "beside the specimen", "y from −0.500 m to 0.300 m"]),
        ('[jack]\nat = ["4 m", "0 m"]', ["the jack lies off the specimen"]),
        ('[acceptance]\nacross = "50 N"', ["[acceptance] across", "a percentage is due"]),
        ('[acceptance]\ntorsion = "50 N"', ["[acceptance] torsion", "a moment is due"]),
        ('[acceptance]\nshare = "0 %"', ["[acceptance] share", "more than 0"]),
        ("[acceptance]", ["names no band", "moment, shear or torsion"]),
        (
            '[[acceptance.region]]\nfrom = "1 m"\nto = "2 m"\nacross = "2 %"',
            ["[[acceptance.region]] 1, across", "is no key of [[acceptance.region]]", "it belongs to [acceptance]"],
        ),
    ],
)
def test_levers_jack_and_acceptance(plan_refusal, keys, parts) -> None:
    told(plan_refusal(("", keys)), parts)
