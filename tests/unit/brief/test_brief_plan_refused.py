"""Every fault of a surface's brief, with the telling parts of its message."""

from __future__ import annotations

import pytest
from plan_briefs import AXIS, LOAD, PRESSURE, told

HEAD = "x [m],y [m]\n"


@pytest.mark.parametrize(
    ("table", "parts"),
    [
        (HEAD + "0.2,0\n3.4,0\n", ["outline.csv, line 2: the outline has 2 corners", "3 or more"]),
        (HEAD + "0.2,0\n3.4,0\n0.2,0\n", ["the outline has 2 corners"]),
        (HEAD + "0.2,0.1\n1,0.2\n3.4,0.5\n", ["the outline has no area", "on one line"]),
        (
            HEAD + "0.2,0.3\n3.4,-0.5\n3.4,-0.2\n0.2,-0.35\n",
            [
                "outline.csv: the outline crosses or touches itself: at x = ",
                "lines 2 and 3",
                "lines 4 and 5",
                "in order",
            ],
        ),
        (
            HEAD + "0.2,0.3\n3.4,0.3\n3.4,-0.5\n1.8,0.3\n0.2,-0.5\n",
            ["crosses or touches itself: at x = 1.800 m, y = 0.300 m", "lines 2 and 3"],
        ),
        (
            HEAD + "0.2,0.3\n3.4,0.3\n3.4,-0.5\n0.2,-0.5\n0.2,0.3\n1,0\n1,0.1\n1.2,0\n1,0\n",
            [
                "line 6: a corner of the outline is there twice, first on line 2",
                "one ring without holes",
                "keep_out_areas",
            ],
        ),
        (
            HEAD + "0.2,0.3\n0.2,0.3\n3.4,0\n0.2,-0.3\n",
            ["line 3: two corners of the outline in a row are one", "delete one"],
        ),
        (HEAD + "0.2,0.3\n3.4,nan\n0.2,-0.3\n", ["line 3, column y", 'not a number: "nan"']),
        (
            HEAD + "0.5,0.3\n3.4,0\n0.5,-0.3\n",
            ["line 2: the outline does not reach the root: x = 0.5 m (0.300 m short)", "0.200 m"],
        ),
        (
            HEAD + "0.2,0.3\n3.1,0\n0.2,-0.3\n",
            ["line 3: the outline does not reach the tip: x = 3.1 m", "3.400 m, the tip"],
        ),
        (HEAD + "0.1,0.3\n3.4,0\n0.1,-0.3\n", ["line 2: the outline goes beyond the root: x = 0.1 m (0.100 m beyond)"]),
        (HEAD + "0.2,0.3\n4.4,0\n0.2,-0.3\n", ["line 3: the outline goes beyond the tip: x = 4.4 m (1.000 m beyond)"]),
        ("x [m],z [m]\n0.2,0.3\n", ['no such column: "z [m]"']),
        ("x [m]\n0.2\n", ['the column "y" is missing']),
    ],
)
def test_outlines(plan_refusal, table, parts) -> None:
    message = plan_refusal(outline=table)
    assert message.startswith("TableError: outline.csv")
    told(message, parts)


def test_an_outline_of_too_many_corners(plan_refusal, read_plan) -> None:
    rows = [f"{0.2 + 3.2 * k / 998:.6f},{0.9 - 0.2 * (k / 998) ** 2:.6f}\n" for k in range(999)]
    many = HEAD + "".join(rows) + "3.4,-0.5\n0.2,-0.5\n"
    told(plan_refusal(outline=many), ["the outline has 1001 corners", "up to 1000", "leave out"])
    assert read_plan(outline=many.replace(rows[500], "")).specimen.outline.x.size == 1000


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        ((AXIS, 'axis = "0 m"'), ["line 8, [specimen] axis", "a line is a list of points", '[["0 m", "0 m"]']),
        ((AXIS, 'axis = [["0.2 m", "0 m"]]'), ["two points or more"]),
        ((AXIS, 'axis = [["0.2 m"], ["3.4 m"]]'), ["2 lengths are due, and this holds 1"]),
        ((AXIS, 'axis = [["0.2 m", 0], ["3.4 m", 0]]'), ["bare number: 0"]),
        (
            (AXIS, 'axis = [["0.2 m", "0 m"], ["2 m", "0 m"], ["1.9 m", "0 m"], ["3.4 m", "-0.3 m"]]'),
            ["[specimen] axis: the line turns back at its point 3", '["1.9 m", "0 m"] after ["2 m", "0 m"]'],
        ),
        (
            (AXIS, 'axis = [["0.2 m", "0 m"], ["3.4 m", "0 m"]]'),
            ["the reference axis leaves the outline: at x = 3.400 m, y = 0 m it is 0.198 m off", "move its points"],
        ),
        (
            (AXIS, 'axis = [["0.2 m", "0 m"], ["3 m", "-0.3 m"]]'),
            ["the reference axis must run from end to end", "0.200 m to 3.000 m", "at least 0.200 m to 3.400 m"],
        ),
        (
            (AXIS, 'axis = [["0 m", "0 m"], ["3.4 m", "-0.3 m"]]'),
            ["the reference axis leaves the outline: at x = 0 m", "0.200 m off"],
        ),
        ((AXIS, AXIS + '\ncut = "square"'), ["[specimen] cut", '"square to x" or "square to axis"']),
        (
            (AXIS, AXIS + '\nweight_line = [["0.2 m", "0 m"], ["3.4 m", "-0.3 m"]]'),
            ['"weight_line" goes with the weight'],
        ),
        (('"outline.csv"', '"outlin.csv"'), ["the table does not exist", 'did you mean "outline.csv"?']),
    ],
)
def test_specimens(plan_refusal, edit, parts) -> None:
    told(plan_refusal(edit), parts)


WEIGHT = "x [m],mass [kg/m]\n0.2,3\n3.4,1\n"


@pytest.mark.parametrize(
    ("keys", "parts"),
    [
        (
            'weight = "w.csv"\nweight_line = [["0.2 m", "0 m"], ["3.4 m", "0.1 m"]]',
            ["[specimen] weight_line: the line of the weight leaves the outline", "x = 3.400 m, y = 0.100 m"],
        ),
        (
            'weight = "w.csv"\nweight_line = [["0.2 m", "0 m"], ["3 m", "0 m"]]',
            ["the line of the weight must run all along the weight", "at least 0.200 m to 3.400 m"],
        ),
        (
            'point_masses = "m.csv"\nweight_line = [["0.2 m", "0 m"], ["1 m", "0 m"]]',
            ["[specimen] weight_line: a point mass stands beyond the line of the weight: 3.000 m"],
        ),
        (
            'point_masses = "m.csv"\nweight_line = [["0.2 m", "0 m"], ["3.4 m", "0 m"]]',
            ["a point mass lies off the outline: x = 3.000 m, y = 0 m", "0.136 m off"],
        ),
    ],
)
def test_weights(plan_refusal, keys, parts) -> None:
    told(plan_refusal((AXIS, f"{AXIS}\n{keys}"), w=WEIGHT, m="x [m],mass [kg]\n0.5,3\n3,1\n"), parts)


def test_what_acts_on_a_default_axis_off_the_outline(plan_refusal, read_plan) -> None:
    no_axis = (AXIS + "\n", "")
    assert read_plan(no_axis).specimen.axis is None
    told(
        plan_refusal(no_axis, (LOAD, 'shape = "sine"\ntotal = "1 N"')),
        [
            "[[load]] 1: the reference axis, along which the load acts, leaves the outline",
            "x = 3.400 m",
            'say by "line"',
        ],
    )
    told(
        plan_refusal((AXIS, 'weight = "w.csv"'), w=WEIGHT),
        ["[specimen] weight: the reference axis, along which the weight acts, leaves", 'say by "weight_line"'],
    )
    told(
        plan_refusal(no_axis, (LOAD, 'point = "1 N"\nat = "3 m"')),
        [
            "[[load]] 1, at: the point load acts on the reference axis, and there it lies off the outline",
            "give x and y",
        ],
    )
    told(
        plan_refusal(no_axis, (LOAD, 'forces = "f.csv"'), f="x [m],force [N]\n1,2\n3,2\n"),
        ["f.csv, line 3: the row stands on the reference axis, which lies off the outline", "add a column y"],
    )
    held = 'support = "two supports"\nends = ["0.2 m", "3.4 m"]\nsupports = ["0.5 m", "3 m"]'
    told(
        plan_refusal(no_axis, ('support = "cantilever"\nroot = "0.2 m"\ntip = "3.4 m"', held)),
        [
            "[specimen] supports: a support bears on the reference axis, and there it lies off the outline",
            "x = 3.000 m",
        ],
    )


@pytest.mark.parametrize(
    ("table", "parts"),
    [
        ("x [m],y [m],pressure [Pa]\n1,0,5\n2,0.1,6\n", ["map.csv: the pressure map has 2 points", "3 to 200000"]),
        ("x [m],y [m],pressure [Pa]\n1,0,5\n2,0.1,6\n3,0.2,7\n", ["all points of the pressure map lie on one line"]),
        ("x [m],y [m],pressure [Pa]\n1,0,5\n2,0.1,6\n3,nan,7\n", ["map.csv, line 4, column y", "not a number"]),
        (
            "x [m],y [m],pressure [Pa]\n1,0,5\n2,0.1,6\n3,0.1,4\n1,0,7\n",
            ["map.csv, line 5: two rows stand at one place: x = 1 m, y = 0 m, as on line 2", "one row"],
        ),
        (
            "x [m],y [m],pressure [Pa]\n3,0.1,5\n1,0,6\n3,0.1,4\n1,0,7\n",
            ["map.csv, line 4: two rows stand at one place: x = 3 m, y = 0.1 m, as on line 2"],
        ),
        (PRESSURE.replace("[Pa]", "[N]"), ["column pressure", "a pressure is due, and N is a unit of force"]),
        ("x [m],y [m],pressure [Pa]\n1,0,0\n2,0.1,0\n3,0.1,0\n", ["the pressure of every row is zero"]),
        ("x [m],pressure [Pa]\n1,0\n", ['the column "y" is missing']),
    ],
)
def test_pressure_maps(plan_refusal, table, parts) -> None:
    message = plan_refusal(map=table)
    assert message.startswith("TableError: map.csv")
    told(message, parts)


def test_a_pressure_map_of_too_many_points(plan_refusal) -> None:
    rows = "".join(f"{k % 1000},{k // 1000},1\n" for k in range(200_001))
    told(plan_refusal(map="x [mm],y [mm],pressure [Pa]\n" + rows), ["has 200001 points", "3 to 200000"])


@pytest.mark.parametrize(
    ("keys", "table", "parts"),
    [
        (
            'point = "3 N"\nat = ["1 m", "0.9 m"]',
            "",
            ["[[load]] 1, at: the point load lies off the outline", "y = 0.900 m"],
        ),
        ('point = "3 N"\nat = ["1 m", "0 m", "0 m"]', "", ["a place is a station, or x and y"]),
        ('point = "3 N"\nat = ["4 m", "0 m"]', "", ["the point load lies off the specimen"]),
        ('couple = "0 N*m"\nat = "1 m"', "", ["a couple of zero loads nothing"]),
        ('couple = "3 N"\nat = "1 m"', "", ["a moment is due, and N is a unit of force"]),
        ('couple = "3 N*m"\nat = "5 m"', "", ["the couple lies off the specimen"]),
        ('couple = "3 N*m"', "", ['the key "at" is missing']),
        ('torque = "t.csv"', "x [m],torque [N*m/m]\n1,0\n2,0\n", ["the torque of every row is zero"]),
        (
            'torque = "t.csv"',
            "x [m],torque [N*m]\n1,1\n2,0\n",
            ["a running torque is due, and N*m is a unit of moment"],
        ),
        ('torque = "t.csv"', "x [m],torque [N*m/m]\n1,1\n4,0\n", ["t.csv, line 3", "off the specimen"]),
        ('forces = "t.csv"', "x [m],y [m],force [N]\n1,0,0\n", ["the force of every row is zero"]),
        (
            'forces = "t.csv"',
            "x [m],y [m],force [N]\n1,0,3\n1.00,0.9,2\n",
            ["t.csv, line 3: the row lies off the outline: x = 1.00 m, y = 0.9 m (", "origin of x and y"],
        ),
        (
            'forces = "t.csv"',
            "x [m],y [m],force [N]\n2,0,3\n1,0,3\n2,0,2\n",
            ["t.csv, line 4: two rows stand at one place", "as on line 2"],
        ),
        ('forces = "t.csv"', "x [m],force [N]\n2,1\n1,1\n", ["line 3", "not in order of x"]),
        (
            'internal = "t.csv"',
            "x [m],shear [N],moment [N*m],torsion [N*m]\n1,0,0,0\n2,0,0,0\n",
            ["shear and moment and torsion"],
        ),
        (
            'shape = "sine"\ntotal = "1 N"\nline = [["0.2 m", "0 m"], ["3.4 m", "0.2 m"]]',
            "",
            ["[[load]] 1, line: the line of the load leaves the outline", "x = 3.400 m, y = 0.200 m", "0.395 m off"],
        ),
        (
            'table = "t.csv"\nline = [["1 m", "0 m"], ["2 m", "-0.1 m"]]',
            "x [m],load [N/m]\n0.5,1\n1.8,2\n",
            ["the line of the load must run all along the load", "1.000 m to 2.000 m", "at least 0.500 m to 1.800 m"],
        ),
        (
            'table = "t.csv"\nline = [["0.2 m", "0 m"], ["3.4 m", "-0.3 m"]]',
            "x [m],y [m],load [N/m]\n0.5,0,1\n1.8,0,2\n",
            ["t.csv, line 1", 'no such column: "y [m]"'],
        ),
        (
            'shape = "sine"\ntotal = "1 N"\nline = [["2 m", "0 m"], ["1 m", "0 m"]]',
            "",
            ["line: the line turns back at its point 2"],
        ),
        (
            'point = "3 N"\nat = "1 m"\nline = [["0.2 m", "0 m"], ["3.4 m", "0 m"]]',
            "",
            ['"line" is no key of a [[load]] with "point"'],
        ),
    ],
)
def test_loads(plan_refusal, keys, table, parts) -> None:
    told(plan_refusal((LOAD, keys), t=table), parts)


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        (("[specimen]", "[specimen]\noutlin = 3"), ['did you mean "outline"?']),
        (
            ('outline = "outline.csv"\n', ""),
            ["line 7, [specimen] axis", '"axis" belongs to plan rigs', "give [specimen] outline"],
        ),
        (('outline = "outline.csv"\n' + AXIS, ""), ["[[load]] 1, pressure", '"pressure" belongs to plan rigs']),
    ],
)
def test_plan_keys_without_an_outline(plan_refusal, edit, parts) -> None:
    message = plan_refusal(edit)
    assert message.startswith("BriefError: plane.toml")
    told(message, parts)


def test_a_place_just_off_the_outline_is_on_it_by_rounding_alone(read_plan, plan_refusal) -> None:
    """The upper edge stands at y = 0.1791 m at x = 0.974 m, which printed to two places is 0.18."""
    keys = (LOAD, 'forces = "f.csv"')
    heading = "x [m],y [m],force [N]\n"
    assert read_plan(keys, f=heading + "0.974,0.18,5\n").loads[0].y.tolist() == [0.18]
    told(plan_refusal(keys, f=heading + "0.974,0.180,5\n"), ["off the outline", "y = 0.180 m (0.926 mm off)"])
    # half of the last digits is more than 20 mm here, and no row may be off by more than 1.6 mm
    told(plan_refusal(keys, f="x [ft],y [ft],force [N]\n3.2,0.6,5\n"), ["off the outline", "y = 0.6 ft (3.98 mm off)"])
