"""Input of a plan rig that cannot be used: one plain message, exit code 2, nothing written."""

from __future__ import annotations

import pytest
from journey import files_under

OUTLINE = "x [m],y [m]\n0.1,0.25\n2.3,-0.05\n2.3,-0.4\n0.1,-0.3\n"
PRESSURE = "x [m],y [m],pressure [kPa]\n0.1,0.25,1.9\n0.1,-0.3,1.1\n2.3,-0.05,0.6\n2.3,-0.4,0.3\n"
SURFACE = """
title = "Petrel stabiliser, gust"

[specimen]
support = "cantilever"
root    = "0.1 m"
tip     = "2.3 m"
outline = "outline.csv"
axis    = [["0.1 m", "0 m"], ["2.3 m", "-0.2 m"]]

[[load]]
pressure = "pressure.csv"

[pads]
count  = 6
places = "hard points"
spars  = [[["0.1 m", "0.15 m"], ["2.3 m", "-0.1 m"]], [["0.1 m", "-0.2 m"], ["2.3 m", "-0.3 m"]]]
ribs   = "0.4, 0.9, 1.4, 1.9 m"
"""
LOAD = 'pressure = "pressure.csv"'
HEAD = "x [m],y [m]\n"
PLACES = SURFACE[SURFACE.index("spars  =") :]


CASES = {
    "an outline that crosses itself": (
        "",
        "",
        {"outline": HEAD + "0.1,0.25\n2.3,-0.4\n2.3,-0.05\n0.1,-0.3\n"},
        ["outline.csv", "crosses", "x = ", "lines 2 and 3"],
    ),
    "an outline with a hole": (
        "",
        "",
        {"outline": OUTLINE + "0.1,0.25\n1,-0.1\n1.2,-0.1\n1.1,0\n1,-0.1\n"},
        ["outline.csv, line 6", "twice", "without holes", "keep_out_areas"],
    ),
    "an outline without area": ("", "", {"outline": HEAD + "0.1,0.2\n1.2,0.1\n2.3,0\n"}, ["outline.csv", "no area"]),
    "an outline of two corners": (
        "",
        "",
        {"outline": HEAD + "0.1,0.2\n2.3,0\n"},
        ["outline.csv", "2 corners", "3 or more"],
    ),
    "an outline with NaN": (
        "",
        "",
        {"outline": OUTLINE.replace("-0.05", "nan")},
        ["outline.csv, line 3, column y", "nan"],
    ),
    "an outline short of the tip": (
        'tip     = "2.3 m"',
        'tip     = "2.6 m"',
        {},
        ["outline.csv, line 3", "does not reach the tip", "2.600 m"],
    ),
    "an axis off the outline": (
        '["2.3 m", "-0.2 m"]]',
        '["2.3 m", "0.2 m"]]',
        {},
        ["[specimen] axis", "leaves the outline", "x = 2.300 m, y = 0.200 m"],
    ),
    "an axis that doubles back": (
        '["2.3 m", "-0.2 m"]]',
        '["1.8 m", "-0.1 m"], ["1.7 m", "-0.1 m"], ["2.3 m", "-0.2 m"]]',
        {},
        ["[specimen] axis", "turns back at its point 3"],
    ),
    "an axis that ends early": (
        '["2.3 m", "-0.2 m"]]',
        '["2 m", "-0.2 m"]]',
        {},
        ["[specimen] axis", "2.000 m", "2.300 m"],
    ),
    "too few pressure points": (
        "",
        "",
        {"pressure": "x [m],y [m],pressure [Pa]\n1,0,3\n2,0,4\n"},
        ["pressure.csv", "2 points", "3 to"],
    ),
    "pressure points in line": (
        "",
        "",
        {"pressure": "x [m],y [m],pressure [Pa]\n1,0,3\n2,0,4\n3,0,4\n"},
        ["pressure.csv", "one line"],
    ),
    "a pressure of NaN": (
        "",
        "",
        {"pressure": PRESSURE.replace("1.1", "NaN")},
        ["pressure.csv, line 3, column pressure", "NaN"],
    ),
    "two pressures at one place": (
        "",
        "",
        {"pressure": PRESSURE + "0.1,-0.3,2\n"},
        ["pressure.csv, line 6", "one place", "line 3"],
    ),
    "candidates off the outline": (
        PLACES,
        'table = "ribs.csv"\n',
        {"ribs": HEAD + "0.5,0\n1.2,0.3\n"},
        ["ribs.csv, line 3", "off the outline", "y = 0.3 m", "0.198 m off"],
    ),
    "a rib that meets no spar": (
        '["2.3 m", "-0.1 m"]], [["0.1 m", "-0.2 m"], ["2.3 m", "-0.3 m"]]]',
        '["1.6 m", "-0.1 m"]]]',
        {},
        ["[pads] ribs", "rib 4", "1.900 m", "meets no spar"],
    ),
    "a spar that meets no rib": (
        '[["0.1 m", "-0.2 m"], ["2.3 m", "-0.3 m"]]',
        '[["2 m", "-0.2 m"], ["2.3 m", "-0.3 m"]]',
        {},
        ["[pads] spars", "spar 2 meets no rib"],
    ),
    "a keep-out that crosses itself": (
        PLACES,
        PLACES + 'keep_out_areas = "areas.csv"\n',
        {"areas": "area,x [m],y [m]\n1,1,0\n1,1.2,0.1\n1,1.2,0\n1,1,0.1\n"},
        ["areas.csv", '"1" crosses'],
    ),
    "a couple of zero": (LOAD, 'couple = "0 N*m"\nat = "1 m"', {}, ["[[load]] 1, couple", "zero"]),
    "a torque of zero": (
        LOAD,
        'torque = "torque.csv"',
        {"torque": "x [m],torque [N]\n1,0\n2,0\n"},
        ["torque.csv", "zero"],
    ),
    "a point load off the outline": (
        LOAD,
        'point = "50 N"\nat = ["1 m", "0.4 m"]',
        {},
        ["[[load]] 1, at", "off the outline", "0.400 m"],
    ),
    "a force off the outline": (
        LOAD,
        'forces = "forces.csv"',
        {"forces": "x [m],y [m],force [N]\n1,0,30\n1,-0.9,20\n"},
        ["forces.csv, line 3", "off the outline"],
    ),
    "a line of a load that leaves the outline": (
        LOAD,
        'shape = "uniform"\ntotal = "90 N"\nline = [["0.1 m", "0 m"], ["2.3 m", "0 m"]]',
        {},
        ["[[load]] 1, line", "leaves the outline"],
    ),
    "a line of a load that is too short": (
        LOAD,
        'shape = "uniform"\ntotal = "90 N"\nline = [["0.1 m", "0 m"], ["2 m", "-0.1 m"]]',
        {},
        ["[[load]] 1, line", "all along the load"],
    ),
    "an outline more than a million times its size away": (
        "",
        "",
        {"outline": HEAD + "0.1,9e6\n2.3,9e6\n2.3,9000001\n0.1,9000001\n"},
        ["outline.csv, line ", "too far from x = 0, y = 0", "y = 9000001 m", "count x and y from a place near"],
    ),
    "loads that cancel each other": (
        LOAD,
        LOAD + '\n[[load]]\npressure = "pressure.csv"\ntimes = -0.999999999999',
        {},
        ["the loads add up to nothing"],
    ),
    "plan keys without an outline": (
        'outline = "outline.csv"\n',
        "",
        {},
        ["[specimen] axis", "plan rigs", "give [specimen] outline"],
    ),
    "an unknown word": ("[pads]", '[levers]\npair = "sideways"\n[pads]', {}, ["[levers] pair", '"across first"']),
}


@pytest.mark.parametrize("command", ["design", "target"])
@pytest.mark.parametrize("name", CASES)
def test_a_surface_that_cannot_be_used(rigdesign, here, name, command):
    old, new, tables, words = CASES[name]
    assert old in SURFACE
    (here / "fin.toml").write_text(SURFACE.replace(old, new, 1) if old else SURFACE)
    for table, text in {"outline": OUTLINE, "pressure": PRESSURE, **tables}.items():
        (here / f"{table}.csv").write_text(text)
    before = files_under(here)
    ended = rigdesign(command, "fin.toml")
    assert (ended.code, ended.out) == (2, "")
    assert ended.err.startswith("rigdesign: ")
    assert ended.err.count("\n") == 1
    for word in words:
        assert word in ended.err
    assert files_under(here) == before


@pytest.mark.parametrize("bands", ['across_under = "5 %"', 'torsion = "300 N*m"', 'shear_over = "40 %"'])
def test_bands_of_one_kind_alone_end_in_a_rig(rigdesign, here, bands):
    """Whatever is judged, and be it nothing along the span, pads are chosen from the hard points."""
    (here / "fin.toml").write_text(f"{SURFACE}\n[levers]\nratio_limit = 20\n[acceptance]\n{bands}\n")
    (here / "outline.csv").write_text(OUTLINE)
    (here / "pressure.csv").write_text(PRESSURE)
    ended = rigdesign("design", "fin.toml", "--no-figures")
    assert ended.code in (0, 1)
    assert ended.err == ""
    assert "6 pads on 5 levers" in ended.out
