"""Every fault of a table that a brief names, with the telling parts of its message."""

from __future__ import annotations

import pytest

from rigdesign.brief.tables import read_table

ELLIPTICAL = 'shape = "elliptical"\ntotal = "5.4 kN"'
TABLE = (ELLIPTICAL, 'table = "net.csv"')
CANTILEVER = 'support = "cantilever"\nroot = "0.2 m"\ntip = "3.4 m"'


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("", ["net.csv: the table is empty"]),
        ("\n \n", ["net.csv: the table is empty"]),
        ("x [m],load [N/m]\n", ["net.csv: the table has a heading and no rows"]),
        ("1,5\n2,7\n", ["net.csv, line 1", "a heading with units, and this is a number: 1", "x [unit of length]"]),
        ("x [m];load [N/m]\n1;5\n", ["net.csv, line 1", "columns are separated by commas"]),
        ("x [m]\n1\n", ["net.csv, line 1", 'the column "load" is missing', "load [unit of running load]"]),
        (
            "x [m],laod [N/m]\n1,2\n",
            ["net.csv, line 1", "no such column", '"laod [N/m]"', 'did you mean "load"?', 'headed "note"'],
        ),
        ("x [m],load [N/m],rib\n1,2,3\n", ["no such column", '"rib"']),
        ("x [m],y [m],load [N/m]\n1,0,2\n", ['"y" belongs to plan rigs', "delete the column"]),
        ("x [m],x [m],load [N/m]\n1,1,2\n", ['two columns have one name: "x"']),
        ("x,load [N/m]\n1,2\n", ["net.csv, line 1, column x", "the heading carries no unit", '"x [m]"']),
        ("x (m),load [N/m]\n1,2\n", ["no such column", '"x (m)"']),
        ("x [m],load [lb/ft]\n1,2\n", ["line 1, column load", "lb/ft is a unit of mass per length", "write lbf/ft"]),
        ("x [m],load [N]\n1,2\n", ["column load", "a running load is due, and N is a unit of force"]),
        ("x [m],load [N/m]\n1,2\n2,3,4\n3,5\n", ["net.csv, line 3", "the row has 3 cells and the heading 2: 2,3,4"]),
        ("x [m],load [N/m]\n1,2\n\n2\n3,5\n", ["net.csv, line 4", "the row has 1 cell and the heading 2"]),
        ("x [m],load [N/m]\n1,2\n2,\n3,5\n", ["net.csv, line 3, column load", "the cell is empty", "0 if it is zero"]),
        ("x [m],load [N/m]\n1,2\n2,abc\n3,5\n", ["net.csv, line 3, column load", 'not a number: "abc"']),
        ("x [m],load [N/m]\n1,2\n2,nan\n3,5\n", ["line 3, column load", 'not a number: "nan"', "finite"]),
        ("x [m],load [N/m]\n1,2\n2,-inf\n3,5\n", ["line 3, column load", '"-inf"']),
        ("x [m],load [N/m]\n1,2\n2,1e999\n3,5\n", ["line 3, column load", '"1e999"']),
        ("x [m],load [N/m]\n1,2\n2,1_0\n3,5\n", ["line 3, column load", '"1_0"']),
        ("x [m],load [N/m]\n1,2\n2,5 N/m\n3,5\n", ["line 3, column load", '"5 N/m"']),
        ("x [m],load [N/m]\n1,2\n2,=A1+3\n3,5\n", ["line 3, column load", '"=A1+3"']),
        ('x [m],load [N/m]\n1,2\n2,"1,5"\n3,5\n', ["line 3, column load", '"1,5"', "decimal point"]),
        ('x [m],load [N/m]\n1,2\n2,"15\n3,5\n', ["net.csv, line 4", "cannot be read as CSV"]),
        ("x [m],load [N/m]\n1,2\n3,5\n2,7\n", ["net.csv, line 4", "not in order of x: x = 2 m after x = 3 m", "sort"]),
        (
            "x [m],load [N/m]\n1,2\n2,5\n2,7\n2.0,9\n3,1\n",
            ["net.csv, line 5", "three rows stand at one x: x = 2.0 m", "a jump"],
        ),
        (
            "x [in],load [N/m]\n10,2\n130,5\n340,7\n",
            [
                "net.csv, line 4",
                "the row lies off the specimen: x = 340 in (8.636 m",
                "0.200 m to 3.400 m",
                "unit in the heading",
            ],
        ),
        ("x [m],load [N/m]\n0.1,2\n3,5\n", ["net.csv, line 2", "x = 0.1 m"]),
        ("x [m],load [N/m]\n1,2\n1,5\n", ["net.csv: the table needs rows at two different x"]),
        ("x [m],load [N/m]\n1,2\n", ["net.csv: the table needs rows at two different x"]),
        ("x [m],load [N/m]\n1,0\n2,0.0\n", ["net.csv: the load of every row is zero"]),
    ],
)
def test_a_running_load_table_is_refused(refusal, text, parts) -> None:
    message = refusal(TABLE, net=text)
    assert message.startswith("TableError: net.csv")
    for part in parts:
        assert part in message


@pytest.mark.parametrize(
    ("edits", "table", "parts"),
    [
        (
            [(ELLIPTICAL, 'forces = "t.csv"')],
            "x [m],force [N]\n1,2\n1,3\n",
            ["line 3", "two rows stand at one x", "one row"],
        ),
        ([(ELLIPTICAL, 'forces = "t.csv"')], "x [m],force [N]\n1,0\n2,0\n", ["the force of every row is zero"]),
        ([(ELLIPTICAL, 'internal = "t.csv"')], "x [m],shear [N]\n1,2\n", ['the column "moment" is missing']),
        ([(ELLIPTICAL, 'internal = "t.csv"')], "x [m],shear [N],moment [N]\n1,2,3\n", ["a moment is due, and N"]),
        (
            [(ELLIPTICAL, 'internal = "t.csv"')],
            "x [m],shear [N],moment [N*m]\n1,0,0\n2,0,0\n",
            ["the shear and moment of every row is zero"],
        ),
        ([(ELLIPTICAL, 'internal = "t.csv"')], "x [m],shear [N],moment [N*m]\n1,1,0\n", ["rows at two different x"]),
        (
            [(ELLIPTICAL, 'internal = "t.csv"')],
            "x [m],shear [N],moment [N*m],torsion [N*m]\n1,2,3,0\n2,3,4,0.5\n",
            ["line 3", "pads on one line bring no torsion", "torsion = 0.5 N*m", "plan rigs", "delete the column"],
        ),
        (
            [(ELLIPTICAL, 'internal = "t.csv"\nstations_from = "tip"')],
            "x [m],shear [N],moment [N*m]\n0,0,0\n3.3,2,3\n",
            ["line 3", "x = 3.3 m (0.100 m from x = 0, 0.100 m off the end)", "off the specimen"],
        ),
        (
            [(ELLIPTICAL, 'shape = "schrenk"\ntotal = "1 N"\nchord = "t.csv"')],
            "x [m],chord [m]\n0.2,1\n3.3,0.5\n",
            ["t.csv: the chord must be known all along the load", "0.200 m to 3.300 m", "at least 0.200 m to 3.400 m"],
        ),
        (
            [(ELLIPTICAL, 'shape = "schrenk"\ntotal = "1 N"\nchord = "t.csv"')],
            "x [m],chord [m]\n0.2,1\n3.4,-0.5\n",
            ["line 3", "the chord is negative: chord = -0.5 m", "0 or more"],
        ),
        (
            [(CANTILEVER, CANTILEVER + '\nweight = "t.csv"')],
            "x [m],mass [kg]\n1,2\n2,3\n",
            ["a mass per length is due, and kg"],
        ),
        (
            [(CANTILEVER, CANTILEVER + '\nweight = "t.csv"')],
            "x [m],mass [kg/m]\n1,2\n2,-3\n",
            ["line 3", "the mass is negative"],
        ),
        (
            [(CANTILEVER, CANTILEVER + '\npoint_masses = "t.csv"')],
            "x [m],mass [kg/m]\n1,2\n",
            ["a mass is due, and kg/m"],
        ),
        (
            [(CANTILEVER, CANTILEVER + '\npoint_masses = "t.csv"')],
            "x [m],mass [lbf]\n1,2\n",
            ["if lb is meant, write lb"],
        ),
        (
            [(CANTILEVER, CANTILEVER + '\npoint_masses = "t.csv"')],
            "x [m],mass [kg]\n4,2\n",
            ["line 2", "off the specimen"],
        ),
        (
            [("count = 6", 'count = 2\nplaces = "hard points"\ntable = "t.csv"')],
            "x [m]\n0.3\n0.3\n",
            ["two rows stand at one x"],
        ),
        ([("count = 6", 'count = 2\nplaces = "hard points"\ntable = "t.csv"')], "x [m],y [m]\n0.3,1\n", ["plan rigs"]),
        ([("count = 6", 'places = "fixed"\ntable = "t.csv"')], "x [m]\n0.3\n3.5\n", ["line 3", "x = 3.5 m"]),
    ],
)
def test_other_tables_are_refused(refusal, edits, table, parts) -> None:
    message = refusal(*edits, t=table)
    assert message.startswith("TableError: t.csv")
    for part in parts:
        assert part in message


def test_a_fault_deep_in_a_long_table_is_named_by_its_line() -> None:
    rows = [f"{number},{number % 7}.5" for number in range(5000)]
    rows[4321] = "4321,4.5.6"
    with pytest.raises(ValueError, match=r'long.csv, line 4323, column load: this is not a number: "4.5.6"'):
        read_table(
            "x [m],load [N/m]\n" + "\n".join(rows), "long.csv", {"x": "length", "load": "running load"}, repeats="jump"
        )


@pytest.mark.parametrize("ending", ["\n", "\r\n", "\r"])
def test_line_endings_of_every_system(ending: str) -> None:
    text = ending.join(["x [mm],force [N]", "10,-2.5", "20,4", ""])
    table = read_table(text, "t.csv", {"x": "length", "force": "force"}, repeats="none")
    assert table["x"].tolist() == [0.01, 0.02]
    assert table["force"].tolist() == [-2.5, 4.0]
    assert table.where(1) == "t.csv, line 3"


def test_typographic_minus_signs_are_numbers() -> None:
    table = read_table("x [m],force [N]\n1,−2.5\n2,3\n", "t.csv", {"x": "length", "force": "force"}, repeats="none")
    assert table["force"].tolist() == [-2.5, 3.0]


@pytest.mark.parametrize(
    ("table", "part"),
    [
        ("x [in],load [N/m]\n8,0\n133.92,5\n", "x = 133.92 in (3.402 m from x = 0, 1.57 mm off the end)"),
        # half of the last digit is 15 mm here, and no row may be off by more than 1.6 mm
        ("x [ft],load [N/m]\n1,0\n11.2,5\n", "x = 11.2 ft (3.414 m from x = 0, 13.8 mm off the end)"),
    ],
)
def test_a_row_off_by_more_than_its_printed_rounding_is_refused_with_the_distance(refusal, table, part) -> None:
    assert part in refusal((ELLIPTICAL, 'table = "load.csv"'), load=table)
