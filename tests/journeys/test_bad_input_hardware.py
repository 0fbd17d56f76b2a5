"""Hardware and kept rigs that cannot be used: exactly this one message, exit code 2, nothing written."""

from __future__ import annotations

import pytest
from journey import SMALL, changed, files_under
from test_bad_input_plan import OUTLINE, PRESSURE, SURFACE

FIRST = len(SMALL.splitlines()) + 2
"""The line of the first key that a case adds to the small brief."""
PUSHING = changed(SMALL, count='count  = 5\naction = "push"')
STEEL = 'stock = "steel.csv"\n'
HEADING = "section,kind,depth [mm],width [mm],web [mm],flange [mm]\n"
FLATS = "FL 60x8,flat,60,8,,\nFL 40x6,flat,40,6,,\n"
NO_RIG = 'name a folder that "rigdesign design" wrote'

KEYS = {
    "an unknown grade": (
        'grade = "S460"\n',
        'grade: this is none of the words due: "S460" (accepted: "S235", "S275", "S355" or "6082-T6")',
    ),
    "an unknown grade of pins": (
        'pin_grade = "10.9"\n',
        'pin_grade: this is none of the words due: "10.9" (accepted: "S355", "C45" or "42CrMo4")',
    ),
    "an unknown build": (
        'build = ["twin flats", "twin angles"]\n',
        'build: this is none of the words due: "twin angles" (accepted: "twin flats", "twin channels" or '
        '"hollow section"); did you mean "twin channels"?',
    ),
    "a factor on loads under rules without one": (
        "load_factor = 1.5\n",
        'load_factor: "load_factor" belongs to the rules EN 1993, and the rules are BTH-1: 1.5; delete it, or write '
        'rules = "EN 1993"',
    ),
    "a design factor under rules without one": (
        'design_factor = 3.0\nrules = "EN 1993"\n',
        'design_factor: "design_factor" belongs to the rules BTH-1, and the rules are EN 1993: 3.0; delete it, or '
        'write rules = "BTH-1"',
    ),
    "too small a factor over people": (
        "design_factor = 2.0\nover_people = true\n",
        "design_factor: the design factor is too small: 2.0 (accepted: 3 or more over people); write "
        "design_factor = 3.0, or delete it, or over_people",
    ),
    "a lever that turns too far": (
        'turn = "25 deg"\n',
        'turn: the angle is too large: "25 deg" (accepted: more than 0, up to 20 deg)',
    ),
    "negative headroom": ('headroom = "-2 m"\n', 'headroom: the value is too small: "-2 m" (accepted: more than 0)'),
    "headroom as a mass": (
        'headroom = "2 kg"\n',
        'headroom: a length is due, and kg is a unit of mass: "2 kg" (accepted: a number with a unit of length, such '
        'as "1.2 m")',
    ),
    "play as wide as the smallest pin": (
        'play = "8 mm"\npins = "8, 12 mm"\n',
        'play: the play is too large: "8 mm" (accepted: less than the smallest pin, 8.00 mm)',
    ),
    "pins out of order": (
        'pins = "12, 8 mm"\n',
        'pins: the pins must be in rising order, each diameter once: "12, 8 mm" (accepted: such as "8, 10, 12 mm")',
    ),
    "a tolerance without few marks": (
        'mark_tolerance = "5 mm"\n',
        'mark_tolerance: "mark_tolerance" belongs to part_marks = "few", and part_marks is "as drilled": "5 mm"; '
        'delete it, or write part_marks = "few"',
    ),
    "a key that is none": ('stocks = "steel.csv"\n', 'stocks: "stocks" is no key of [hardware]; did you mean "stock"?'),
    "a stock that is not there": (
        'stock = "steal.csv"\n',
        'stock: the table does not exist: "steal.csv"; did you mean "steel.csv"?',
    ),
    "a stock outside the folder": (
        'stock = "../steel.csv"\n',
        'stock: the table lies outside the folder of the brief: "../steel.csv"; copy it beside the brief, so that the '
        "folder holds all of it",
    ),
    "a stock without the profile": (
        STEEL + 'build = "hollow section"\n',
        'stock: the stock holds no hollow section, and the build is "hollow section": "steel.csv"; add one, or write '
        'build = "twin flats"',
    ),
}  # fmt: skip

ROWS = {
    "negative thickness": (
        "FL 80x8,flat,80,-8,,\n",
        "steel.csv, line 4, column width: the width is negative: width = -8 mm (accepted: more than 0)",
    ),
    "a web thicker than half the width": (
        "C 100,channel,100,50,27,8\n",
        "steel.csv, line 4, column web: the web is too thick for the channel: web = 27 mm (accepted: less than half "
        "its width, 25.0 mm); check the columns and the unit in the heading",
    ),
    "an unknown kind": (
        "L 60,angle,60,60,6,6\n",
        'steel.csv, line 4, column kind: this is no kind of profile: "angle" (accepted: flat, channel, hollow, plate)',
    ),
    "a name that stands twice": (
        "FL 40x6,flat,40,6,,\n",
        'steel.csv, line 4, column section: two rows have one name, here and on line 3: "FL 40x6"; give each row its '
        "own name",
    ),
    "an empty cell": (
        "FL 80x8,flat,80,,,\n",
        "steel.csv, line 4, column width: the cell is empty; write the width of the flat",
    ),
    "no name": (
        ",flat,80,8,,\n",
        "steel.csv, line 4, column section: the cell is empty; write a name",
    ),
    "a formula for a name": (
        '"=HYPERLINK(1)",flat,80,8,,\n',
        "steel.csv, line 4, column section: a name begins with none of = + - − @, which start a formula in a "
        'spreadsheet: "=HYPERLINK(1)"; begin with a letter',
    ),
    "a word for a number": (
        "FL 80x8,flat,80,eight,,\n",
        'steel.csv, line 4, column width: this is not a number: "eight" (accepted: a finite number with a decimal '
        "point)",
    ),
    "a row too short": (
        "FL 80x8,flat,80\n",
        "steel.csv, line 4: the row has 3 cells and the heading 6: FL 80x8,flat,80",
    ),
}

KEEPS = {
    "no such folder": (
        "old_rigs",
        'fin.toml, line {line}, [keep] rig: the folder of the kept rig does not exist: "old_rigs"; did you mean '
        '"old_rig"?',
    ),
    "a folder that is no rig": (
        "old_rig",
        f'fin.toml, line {{line}}, [keep] rig: the folder holds no rig.json, so it is no rig: "old_rig"; {NO_RIG}',
    ),
    "a rig.json of something else": (
        "page",
        "fin.toml, line {line}, [keep] rig: this is no rig: it holds no whole number as schema_number: "
        f'"page/rig.json"; {NO_RIG}, with its rig.json as it was',
    ),
    "a rig.json that is cut off": (
        "half",
        "half/rig.json, line 2, column 1: the kept rig is not JSON: expecting property name enclosed in double "
        f"quotes; {NO_RIG}, with its rig.json as it was",
    ),
}


def refused(rigdesign, here) -> str:
    """Run the command, hold it to the rules for bad input, and return its message."""
    before = files_under(here)
    ended = rigdesign("design", "fin.toml")
    assert (ended.code, ended.out) == (2, "")
    assert "Traceback" not in ended.err
    assert files_under(here) == before
    assert sorted(path.name for path in here.iterdir() if path.name.endswith("fin_rig")) == []
    return ended.err


def expected(message: str) -> str:
    return f"rigdesign: {message}\n"


@pytest.mark.parametrize("name", KEYS)
def test_hardware_that_cannot_be_used(rigdesign, here, name):
    lines, message = KEYS[name]
    (here / "fin.toml").write_text(SMALL + "[hardware]\n" + lines)
    (here / "steel.csv").write_text(HEADING + FLATS)
    assert refused(rigdesign, here) == expected(f"fin.toml, line {FIRST}, [hardware] {message}")


@pytest.mark.parametrize("name", ROWS)
def test_a_row_of_stock_that_cannot_be_used(rigdesign, here, name):
    row, message = ROWS[name]
    (here / "fin.toml").write_text(SMALL + "[hardware]\n" + STEEL)
    (here / "steel.csv").write_text(HEADING + FLATS + row)
    assert refused(rigdesign, here) == expected(message)


@pytest.mark.parametrize("links", ["strap", "webbing"])
def test_links_that_cannot_push(rigdesign, here, links):
    (here / "fin.toml").write_text(PUSHING + f'[hardware]\nlinks = "{links}"\n')
    assert refused(rigdesign, here) == expected(
        f'fin.toml, line {FIRST + 1}, [hardware] links: links of {links} cannot push, and [pads] action is "push": '
        f'"{links}"; write links = "rod", or action = "pull"'
    )


@pytest.mark.parametrize("links", ["strap", "webbing"])
def test_links_between_profiles_in_hollow_sections(rigdesign, here, links):
    (here / "fin.toml").write_text(SMALL + f'[hardware]\nlinks = "{links}"\nbuild = ["twin flats", "hollow section"]\n')
    assert refused(rigdesign, here) == expected(
        f"fin.toml, line {FIRST}, [hardware] links: links of {links} lie between two profiles, and a hollow section "
        f'has none: "{links}"; write links = "rod", or build = "twin flats" or "twin channels"'
    )


def test_webbing_on_plates(rigdesign, here):
    (here / "fin.toml").write_text(SURFACE + '[levers]\nplates = true\n[hardware]\nlinks = "webbing"\n')
    (here / "outline.csv").write_text(OUTLINE)
    (here / "pressure.csv").write_text(PRESSURE)
    line = len(SURFACE.splitlines()) + 4
    assert refused(rigdesign, here) == expected(
        f"fin.toml, line {line}, [hardware] links: three-point plates hang on threaded rods, and [levers] plates is "
        'true: "webbing"; write links = "rod", or plates = false'
    )


def test_straps_on_a_plan_rig(rigdesign, here):
    (here / "fin.toml").write_text(SURFACE + '[hardware]\nlinks = "strap"\n')
    (here / "outline.csv").write_text(OUTLINE)
    (here / "pressure.csv").write_text(PRESSURE)
    line = len(SURFACE.splitlines()) + 2
    assert refused(rigdesign, here) == expected(
        f"fin.toml, line {line}, [hardware] links: a flat strap keeps the pins at its ends parallel, and levers of a "
        'plan rig run in any direction: "strap"; write links = "rod" or "webbing"'
    )


@pytest.mark.parametrize("name", KEEPS)
def test_a_kept_rig_that_is_none(rigdesign, here, name):
    folder, message = KEEPS[name]
    for other, text in (("old_rig", None), ("page", '{"title": "a page"}'), ("half", '{"schema_number": 1,\n')):
        (here / other).mkdir()
        if text is not None:
            (here / other / "rig.json").write_text(text)
    (here / "fin.toml").write_text(SMALL + f'[keep]\nrig = "{folder}"\n')
    assert refused(rigdesign, here) == expected(message.format(line=FIRST))
