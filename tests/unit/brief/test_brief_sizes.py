"""Sizes beyond all reason, in a brief and in its tables: said plainly, before anything is worked out with them."""

from __future__ import annotations

import pytest


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        (("count = 6", "count = 1001"), ["line 13, [pads] count", "more pads", "1001", '1 to 1000, or "fewest"']),
        (("count = 6", "count = 100000000000"), ["more pads", "100000000000"]),
        (("count = 6", "count = " + 5000 * "9"), ["a whole number of thousands of digits"]),
        (("5.4 kN", "1e13 kN"), ["[[load]] 1, total", "too large", "1e13 kN", "up to 1e+15 in SI units"]),
        (("total =", "times = 1e300\ntotal ="), ["[[load]] 1, times", "too large", "1e+300", "up to 1e+15"]),
        (('title = "Test foil"', 'title = "a\\u001b[31mb"'), ["line 1, title", "one line of plain text"]),
        (('title = "Test foil"', 'title = "a\\nb"'), ["one line of plain text", "without line ends"]),
        (('title = "Test foil"', 'title = "' + 201 * "x" + '"'), ["the title is too long", "up to 200 characters"]),
        (
            ('root = "0.2 m"\ntip = "3.4 m"', 'root = "1e9 m"\ntip = "1000000003.4 m"'),
            ["line 6, [specimen] tip", "too short for where it stands", "count x from nearer by"],
        ),
    ],
)
def test_a_brief_of_impossible_sizes(refusal, edit, parts) -> None:
    message = refusal(edit)
    assert message.startswith("BriefError: foil.toml")
    for part in parts:
        assert part in message


@pytest.mark.parametrize("places", ["fixed", "hard points"])
def test_more_stations_than_can_be_designed_for(refusal, read, places) -> None:
    keys = f'places = "{places}"\ntable = "ribs.csv"' + ("" if places == "fixed" else "\ncount = 6")
    rows = [f"{0.2 + 0.003 * k:.4f}\n" for k in range(1001)]
    message = refusal(("count = 6", keys), ribs="x [m]\n" + "".join(rows))
    assert "[pads] table: 1001 stations are more than can be designed for" in message
    assert "up to 1000" in message
    assert read(("count = 6", keys), ribs="x [m]\n" + "".join(rows[1:])).pads.stations.size == 1000


def test_sizes_right_on_the_limits_are_read(read) -> None:
    assert read(("count = 6", "count = 1000")).pads.count == 1000
    assert read(("Test foil", 200 * "ü")).title == 200 * "ü"
    far = read(('root = "0.2 m"\ntip = "3.4 m"', 'root = "10000000 m"\ntip = "10000003.2 m"')).specimen
    assert far.right - far.left == pytest.approx(3.2, abs=2e-9)  # floats near 1e7 stand 1.9e-9 apart


def test_a_cell_too_large_to_be_worked_with(refusal) -> None:
    edit = ('shape = "elliptical"\ntotal = "5.4 kN"', 'table = "load.csv"')
    message = refusal(edit, load="x [m],load [kN/m]\n0.2,1\n1,1e13\n3.4,0\n")
    assert "load.csv, line 3: the number is too large: load = 1e13 kN/m (accepted: up to 1e+15" in message
