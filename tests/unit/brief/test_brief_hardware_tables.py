"""The tables that [hardware] names: profiles, jacks, load cells and the loaded surface, read and refused."""

from __future__ import annotations

from collections.abc import Callable

import pytest

from rigdesign.brief.hardware_tables import MOST_ROWS
from rigdesign.brief.model_hardware import MachineRow, StockRow

STEEL = '[hardware]\nstock = "steel.csv"'
HEADING = "section,kind,depth [mm],width [mm],web [mm],flange [mm],bar [m]\n"
FLAT = "FL 60x8,flat,60,8,,,\n"


def test_each_kind_of_profile(read) -> None:
    rows = (
        FLAT
        + "FL 80x12,flat,80,12,12,12,3\n"
        + "SQ 40,flat,40,40,,,\n"
        + "U 100,channel,100,50,6,8.5,12\n"
        + "Q 60x40x3,hollow,60,40,3,,\n"
        + "Q 50x3,hollow,50,50,3,3,6.1\n"
        + "PL 20,plate,20,,,,\n"
        + "PL 25,plate,25,25,,,2\n"
    )
    stock = read(("", STEEL), steel=HEADING + rows).hardware.stock
    assert [type(row) for row in stock] == [StockRow] * 8
    found = [(row.name, row.kind, row.depth, row.width, row.web, row.flange, row.bar) for row in stock]
    assert found == [
        ("FL 60x8", "flat", 0.06, 0.008, 0.008, 0.008, None),
        ("FL 80x12", "flat", 0.08, 0.012, 0.012, 0.012, 3.0),
        ("SQ 40", "flat", 0.04, 0.04, 0.04, 0.04, None),
        ("U 100", "channel", 0.1, 0.05, 0.006, 0.0085, 12.0),
        ("Q 60x40x3", "hollow", 0.06, 0.04, 0.003, 0.003, None),
        ("Q 50x3", "hollow", 0.05, 0.05, 0.003, 0.003, 6.1),
        ("PL 20", "plate", 0.02, 0.02, 0.02, 0.02, None),
        ("PL 25", "plate", 0.025, 0.025, 0.025, 0.025, 2.0),
    ]
    assert stock[4].where == "steel.csv, line 6"


def test_columns_in_any_order_and_units_without_those_that_are_not_needed(read) -> None:
    steel = "kind,width [in],note,section,depth [in]\nflat,0.5,old rack,2 x 1/2,2\n"
    (row,) = read(("", STEEL), steel=steel).hardware.stock
    assert (row.name, row.kind, row.bar) == ("2 x 1/2", "flat", None)
    assert (row.depth, row.width, row.web) == (0.0508, 0.0127, 0.0127)


@pytest.mark.parametrize(
    ("rows", "message"),
    [
        ("A,flat,-60,8,,,\n", "line 2, column depth: the depth is negative: depth = -60 mm (accepted: more than 0)"),
        ("A,flat,60,-8,,,\n", "line 2, column width: the width is negative: width = -8 mm (accepted: more than 0)"),
        ("A,flat,0,8,,,\n", "line 2, column depth: the depth is zero: depth = 0 mm (accepted: more than 0)"),
        ("A,flat,,8,,,\n", "line 2, column depth: the cell is empty; write it in the unit of the heading"),
        ("A,flat,60,,,,\n", "line 2, column width: the cell is empty; write the width of the flat"),
        (
            "A,flat,8,60,,,\n",
            "line 2, column width: a flat stands upright, and its width is its thickness: width = 60 mm "
            "(accepted: up to its depth, 8.00 mm); write the longer side as depth",
        ),
        (
            "A,flat,60,10,8,,\n",
            "line 2, column web: a flat has one thickness, its width: web = 8 mm (accepted: 10.0 mm); leave web empty",
        ),
        (
            FLAT + "U,channel,100,50,26,8,\n",
            "line 3, column web: the web is too thick for the channel: web = 26 mm "
            "(accepted: less than half its width, 25.0 mm); check the columns and the unit in the heading",
        ),
        (
            FLAT + "U,channel,100,60,6,50,\n",
            "line 3, column flange: the flange is too thick for the channel: flange = 50 mm "
            "(accepted: less than half its depth, 50.0 mm); check the columns and the unit in the heading",
        ),
        (FLAT + "U,channel,100,50,-6,8,\n", "line 3, column web: the web is negative: web = -6 mm "
         "(accepted: more than 0)"),
        (FLAT + "U,channel,100,50,,8,\n", "line 3, column web: the cell is empty; "
         "write the thickness of the channel's web"),
        (FLAT + "U,channel,100,50,6,,\n", "line 3, column flange: the cell is empty; "
         "write the thickness of its flanges"),
        (
            FLAT + "Q,hollow,60,40,20,,\n",
            "line 3, column web: the web is too thick for the hollow section: web = 20 mm "
            "(accepted: less than half its width, 20.0 mm); check the columns and the unit in the heading",
        ),
        (
            FLAT + "Q,hollow,30,60,16,,\n",
            "line 3, column web: the web is too thick for the hollow section: web = 16 mm "
            "(accepted: less than half its depth, 15.0 mm); check the columns and the unit in the heading",
        ),
        (
            FLAT + "Q,hollow,60,40,3,4,\n",
            "line 3, column flange: a hollow section has one thickness, its web: flange = 4 mm (accepted: 3.00 mm); "
            "leave flange empty",
        ),
        (
            FLAT + "P,plate,20,300,,,\n",
            "line 3, column width: a plate has one thickness, its depth: width = 300 mm (accepted: 20.0 mm); "
            "leave width empty",
        ),
        (
            FLAT + "B,beam,3,3,3,3,\n",
            'line 3, column kind: this is no kind of profile: "beam" (accepted: flat, channel, hollow, plate)',
        ),
        (
            FLAT + "B,Flat,30,3,,,\n",
            'line 3, column kind: this is no kind of profile: "Flat" (accepted: flat, channel, hollow, plate); '
            'did you mean "flat"?',
        ),
        (FLAT + "B,,30,3,,,\n", "line 3, column kind: the cell is empty (accepted: flat, channel, hollow, plate)"),
        (
            FLAT + "B,flat,30,3,,,\n" + FLAT,
            'line 4, column section: two rows have one name, here and on line 2: "FL 60x8"; '
            "give each row its own name",
        ),
        (",flat,60,8,,,\n", "line 2, column section: the cell is empty; write a name"),
        (
            "=1+1,flat,60,8,,,\n",
            "line 2, column section: a name begins with none of = + - − @, which start a formula in a spreadsheet: "
            '"=1+1"; begin with a letter',
        ),
        (
            FLAT + '"a\nb",flat,60,8,,,\n',
            r'line 4, column section: a name is one line of plain text: "a\nb" '
            "(accepted: up to 40 characters, without line ends)",
        ),
        ("A,flat,sixty,8,,,\n", 'line 2, column depth: this is not a number: "sixty" '
         "(accepted: a finite number with a decimal point)"),
        ("A,flat,60,nan,,,\n", 'line 2, column width: this is not a number: "nan" '
         "(accepted: a finite number with a decimal point)"),
        ("A,flat,60,8,,,0\n", "line 2, column bar: the bar is zero: bar = 0 m (accepted: more than 0)"),
        (
            "A,flat,60,8,,,0.003\n",
            "line 2, column bar: the bar is too short: bar = 0.003 m (accepted: more than the kerf, 3.00 mm)",
        ),
        ("A,flat,60,8\n", "line 2: the row has 4 cells and the heading 7: A,flat,60,8"),
    ],
)  # fmt: skip
def test_a_row_of_stock_that_cannot_be_used(refusal, rows: str, message: str) -> None:
    assert refusal(("", STEEL), steel=HEADING + rows) == f"TableError: steel.csv, {message}"


@pytest.mark.parametrize("sign", ["+", "-", "−", "@"])
def test_names_that_would_start_a_formula(refusal, sign: str) -> None:
    assert "which start a formula in a spreadsheet" in refusal(("", STEEL), steel=f"{HEADING}{sign}4,flat,60,8,,,\n")


def test_a_name_that_is_too_long_and_a_stock_that_is(refusal, read) -> None:
    assert "the name is too long" in refusal(("", STEEL), steel=HEADING + "x" * 41 + ",flat,60,8,,,\n")
    rows = [f"F{k},flat,{60 + k},8,,,\n" for k in range(MOST_ROWS + 1)]
    assert refusal(("", STEEL), steel=HEADING + "".join(rows)) == (
        "TableError: steel.csv: the table has 1001 rows (accepted: up to 1000)"
    )
    stock = read(("", STEEL), steel=HEADING + "x" * 40 + ",flat,60,8,,,\n" + "".join(rows[1:-1])).hardware.stock
    assert len(stock) == MOST_ROWS


def test_a_column_that_a_kind_needs_and_that_is_not_there(refusal) -> None:
    steel = "section,kind,depth [mm],width [mm]\nA,flat,60,8\nQ,hollow,60,40\n"
    assert refusal(("", STEEL), steel=steel) == (
        'TableError: steel.csv, line 3: the column "web" is missing; write the thickness of the hollow section\'s web'
    )
    message = refusal(("", STEEL), steel="section,kind,depth,width [mm]\nA,flat,60,8\n")
    assert "steel.csv, line 1, column depth: the heading carries no unit" in message
    assert "this table has no such column" in refusal(("", STEEL), steel="section,kind,wall [mm]\nA,flat,60\n")


@pytest.mark.parametrize(
    ("builds", "rows", "words"),
    [
        (
            '"twin flats"',
            "U,channel,100,50,6,8,\n",
            'no flat, and the build is "twin flats": "steel.csv"; add one, or write build = "twin channels"',
        ),
        (
            '["twin channels", "twin flats"]',
            FLAT,
            'no channel, and the build is "twin channels": "steel.csv"; add one, or write build = "twin flats"',
        ),
        (
            '"hollow section"',
            "P,plate,20,,,,\n",
            'no hollow section, and the build is "hollow section": "steel.csv"; add one',
        ),
    ],
)
def test_a_stock_without_the_profile_for_the_build(refusal, builds: str, rows: str, words: str) -> None:
    message = refusal(("", f"{STEEL}\nbuild = {builds}"), steel=HEADING + rows)
    assert message == f"BriefError: foil.toml, line 15, [hardware] stock: the stock holds {words}"


def test_jacks_and_load_cells(read) -> None:
    hardware = read(
        ("", '[hardware]\njacks = "jacks.csv"\ncells = "cells.csv"'),
        jacks="jack,force [kN],length [m],stroke [mm],mass [kg],pin [mm]\n"
        "J 20,20,0.62,300,14,25\nJ 5,5,0.4,150,3.5,16\n",
        cells="cell,pin [in],force [lbf],length [mm],mass [g]\nC 1,0.5,1000,90,850\n",
    ).hardware
    assert hardware.jacks == (
        MachineRow("J 20", 20000.0, 0.62, 0.3, 14.0, 0.025),
        MachineRow("J 5", 5000.0, 0.4, 0.15, 3.5, 0.016),
    )
    assert hardware.cells == (MachineRow("C 1", 4448.2216152605, 0.09, 0.0, 0.85, 0.0127),)


@pytest.mark.parametrize(
    ("row", "message"),
    [
        ("J,-2,0.6,0.3,12,25\n", "line 2, column force: the force is negative: force = -2 kN (accepted: more than 0)"),
        ("J,20,0,0.3,12,25\n", "line 2, column length: the length is zero: length = 0 m (accepted: more than 0)"),
        ("J,20,0.6,0,12,25\n", "line 2, column stroke: the stroke is zero: stroke = 0 m (accepted: more than 0)"),
        ("J,20,0.6,0.3,-12,25\n", "line 2, column mass: the mass is negative: mass = -12 kg (accepted: more than 0)"),
        ("J,20,0.6,0.3,12,\n", "line 2, column pin: the cell is empty; write it in the unit of the heading"),
        ("J,20,0.6,0.3,,25\n", "line 2, column mass: the cell is empty; write it in the unit of the heading"),
        ("@J,20,0.6,0.3,12,25\n", "line 2, column jack: a name begins with none of = + - − @, which start a formula "
         'in a spreadsheet: "@J"; begin with a letter'),
        ("J,20,0.6,0.3,12,25\nJ,30,0.6,0.3,12,25\n", "line 3, column jack: two rows have one name, here and on line 2: "
         '"J"; give each row its own name'),
    ],
)  # fmt: skip
def test_a_jack_that_cannot_be_used(refusal, row: str, message: str) -> None:
    heading = "jack,force [kN],length [m],stroke [m],mass [kg],pin [mm]\n"
    found = refusal(("", '[hardware]\njacks = "jacks.csv"'), jacks=heading + row)
    assert found == f"TableError: jacks.csv, {message}"


def test_a_table_of_cells_has_no_stroke(refusal) -> None:
    heading = "cell,force [kN],length [m],stroke [m],mass [kg],pin [mm]\n"
    message = refusal(("", '[hardware]\ncells = "cells.csv"'), cells=heading + "C,20,0.1,0.1,1,20\n")
    assert message.startswith('TableError: cells.csv, line 1: this table has no such column: "stroke [m]"')


SURFACE = ("", '[hardware]\nsurface = "top.csv"')


def test_the_loaded_surface_of_a_line_rig(read) -> None:
    surface = read(SURFACE, top="x [m],z [mm]\n0.2,30\n1.7,-4\n3.4,12\n").hardware.surface
    assert surface.x.tolist() == [0.2, 1.7, 3.4]
    assert surface.z.tolist() == [0.03, -0.004, 0.012]
    assert surface.y.size == 0
    assert not surface.z.flags.writeable


def test_the_loaded_surface_of_a_plan_rig(read_plan: Callable) -> None:
    points = read_plan(SURFACE, top="x [m],y [m],z [mm]\n3.4,0,12\n0.2,0.1,30\n1.7,-0.2,-4\n").hardware.surface
    assert points.x.tolist() == [3.4, 0.2, 1.7]
    assert points.y.tolist() == [0.0, 0.1, -0.2]
    along = read_plan(SURFACE, top="x [m],z [mm]\n0.2,30\n3.4,12\n").hardware.surface
    assert along.y.size == 0


@pytest.mark.parametrize(
    ("rows", "message"),
    [
        ("3.4,12\n0.2,30\n", "line 3: the rows are not in order of x: x = 0.2 m after x = 3.4 m; sort the table"),
        ("0.4,12\n0.4,30\n", "line 3: two rows stand at one x: x = 0.4 m; write them as one row"),
        ("0.4,\n", "line 2, column z: the cell is empty; write the number, 0 if it is zero"),
    ],
)
def test_a_surface_that_cannot_be_used(refusal, rows: str, message: str) -> None:
    assert refusal(SURFACE, top="x [m],z [mm]\n" + rows) == f"TableError: top.csv, {message}"


def test_y_belongs_to_plan_rigs(refusal) -> None:
    message = refusal(SURFACE, top="x [m],y [m],z [mm]\n0.2,0,30\n3.4,0,12\n1,1,1\n")
    assert 'top.csv, line 1: the column "y" belongs to plan rigs' in message


@pytest.mark.parametrize(
    ("rows", "message"),
    [
        ("0.2,0,30\n3.4,0,12\n", ": the surface has 2 points (accepted: 3 to 200000)"),
        (
            "0.2,0,30\n3.4,0,12\n1,0,4\n",
            ": all points of the surface lie on one line; add points beside it, or leave out y where z only varies "
            "along x",
        ),
        (
            "0.2,0,30\n3.4,0,12\n1,0.2,4\n0.2,0,31\n",
            ", line 5: two rows stand at one place: x = 0.2 m, y = 0 m, as on line 2; write them as one row",
        ),
    ],
)
def test_a_surface_in_plan_that_cannot_be_used(plan_refusal, rows: str, message: str) -> None:
    assert plan_refusal(SURFACE, top="x [m],y [m],z [mm]\n" + rows) == f"TableError: top.csv{message}"
