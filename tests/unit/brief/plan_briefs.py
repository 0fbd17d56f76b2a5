"""A small brief of a surface that each test changes in one place; import with ``from plan_briefs import ...``."""

from __future__ import annotations

OUTLINE = "x [m],y [m]\n0.2,0.3\n3.4,-0.2\n3.4,-0.5\n0.2,-0.35\n"
"""A swept, tapered surface from 0.2 m to 3.4 m, corners clockwise."""

AXIS = 'axis = [["0.2 m", "0 m"], ["1.5 m", "-0.1 m"], ["3.4 m", "-0.4 m"]]'
SPARS = 'spars = [[["0.2 m", "0.2 m"], ["3.4 m", "-0.25 m"]], [["0.2 m", "-0.2 m"], ["3.4 m", "-0.45 m"]]]'
RIBS = 'ribs = "0.5, 1.0, 1.7 m"'
PRESSURE = "x [m],y [m],pressure [Pa]\n0.2,-0.3,800\n0.2,0.3,900\n3.4,-0.2,100\n3.4,-0.5,90\n1.1,0,700\n"
TEXTS = {"outline": OUTLINE, "map": PRESSURE}

PLAN = f"""\
title = "Swept plane"

[specimen]
support = "cantilever"
root = "0.2 m"
tip = "3.4 m"
outline = "outline.csv"
{AXIS}

[[load]]
pressure = "map.csv"

[pads]
count = 4
places = "hard points"
{SPARS}
{RIBS}
"""

LOAD = 'pressure = "map.csv"'
FREE = (f'count = 4\nplaces = "hard points"\n{SPARS}\n{RIBS}', "count = 4")
"""An edit: free places instead of hard points."""


def told(message: str, parts: list[str]) -> None:
    """Assert that a message holds each part."""
    for part in parts:
        assert part in message
