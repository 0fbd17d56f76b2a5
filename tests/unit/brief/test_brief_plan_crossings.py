"""Where spars and ribs cross, against closed forms, and an outline read without shapely for line rigs."""

from __future__ import annotations

import subprocess
import sys

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from plan_briefs import PLAN

from rigdesign.brief.model import Line
from rigdesign.brief.surface.crossings import crossings
from rigdesign.brief.surface.fields import Points
from rigdesign.errors import InputError
from rigdesign.words import MOST_PADS

SPAN = 3.0


def line(*points: tuple[float, float]) -> Line:
    x, y = np.array(points, dtype=float).T
    return Line(x, y)


def rib(*points: tuple[float, float]) -> Points:
    return Points(*np.array(points, dtype=float).T)


def cross(spars, ribs):
    return crossings(tuple(spars), ribs, SPAN, lambda error, key: InputError(f"{key}: {error.what}"))


def test_a_kink_on_a_crossing_is_one_place() -> None:
    """Both lines have a corner at (1, 0.5), which four pairs of stretches share."""
    found = cross([line((0, 0), (1, 0.5), (2, 0))], (rib((0.8, 1), (1, 0.5), (1.3, -1)),))
    assert (found.x.tolist(), found.y.tolist()) == ([1.0], [0.5])


def test_a_spar_that_bends_meets_a_rib_more_than_once() -> None:
    """A roof over the rib from (0, 0.1) to (2, 0.3): met where 0.5 x and 1 - 0.5 x equal 0.1 + 0.1 x."""
    found = cross([line((0, 0), (1, 0.5), (2, 0))], (rib((0, 0.1), (2, 0.3)),))
    assert found.x.tolist() == pytest.approx([0.25, 1.5], abs=1e-15)
    assert found.y.tolist() == pytest.approx([0.125, 0.25], abs=1e-15)
    assert (found.spar, found.rib) == ((0, 0), (0, 0))
    assert found.called(1) == "the crossing of spar 1 and rib 1"


def test_lines_that_end_on_each_other_meet() -> None:
    """0.1 + 0.2 is more than 0.3 in floats: the spar ends short of the rib by rounding alone."""
    found = cross([line((0, 0), (0.3, 0.1))], np.array([0.1 + 0.2]))
    assert found.x.tolist() == [0.1 + 0.2]
    found = cross([line((0, 0), (2, 0))], (rib((0.7, 0.0), (0.8, 1.0)),))
    assert (found.x.tolist(), found.y.tolist()) == ([0.7], [0.0])
    found = cross([line((0.75, 0), (2, 0))], (rib((0.75, 1.0), (0.75, -1.0)),))
    assert (found.x.tolist(), found.y.tolist()) == ([0.75], [0.0])
    with pytest.raises(InputError, match="spars: spar 1 meets no rib"):
        cross([line((0, 0), (0.3, 0.1))], np.array([0.3 + 1e-8]))
    for y in ((-1.0, -1e-8), (1e-8, 1.0)):
        with pytest.raises(InputError, match="spars: spar 1 meets no rib"):
            cross([line((0, 0), (2, 0))], (rib((0.7, y[0]), (0.8, y[1])),))


def test_ribs_that_only_nearly_run_along_a_spar_cross_it() -> None:
    found = cross([line((0, 0), (2, 0))], (rib((0, -1e-4), (2, 1e-4)),))
    assert found.x.tolist() == pytest.approx([1.0])
    with pytest.raises(InputError, match="run along each other"):
        cross([line((0, 0), (2, 1))], (rib((1, 0.5), (3, 1.5)),))
    # on one line, but one ends before the other begins; side by side
    for points in (((1.2, 0.6), (3, 1.5)), ((0.5, 0.5), (1, 0.75))):
        with pytest.raises(InputError, match="meets no rib"):
            cross([line((0, 0), (1, 0.5))], (rib(*points),))


def test_more_crossings_than_can_be_designed_for() -> None:
    spars = [line((0, 0.1 * k), (2, 0.1 * k)) for k in range(40)]
    assert cross(spars, np.linspace(0.1, 1.9, 25)).x.size == MOST_PADS
    with pytest.raises(InputError, match="ribs: spars and ribs cross in 1040 places"):
        cross(spars, np.linspace(0.1, 1.9, 26))
    with pytest.raises(InputError, match="ribs: there are 1001 ribs"):
        cross(spars, np.linspace(0.1, 1.9, 1001))


numbers = st.floats(0.05, 0.95)


@given(numbers, numbers, numbers, numbers)
def test_a_crossing_lies_on_both_lines(left, right, low, high) -> None:
    """Inside the unit square a line from left to right and one from bottom to top always cross, and once."""
    found = cross([line((0, left), (1, right))], (rib((low, 0), (high, 1)),))
    (x,), (y,) = found.x, found.y
    assert y == pytest.approx(left + (right - left) * x, abs=1e-12)
    assert x == pytest.approx(low + (high - low) * y, abs=1e-12)


@pytest.mark.parametrize("outline", [True, False])
def test_shapely_is_loaded_for_surfaces_alone(tmp_path, outline) -> None:
    """In a process of its own: what other tests have loaded does not count."""
    tables = {"outline.csv": "x [m],y [m]\n0.2,0.3\n3.4,0.1\n3.4,-0.4\n0.2,-0.5\n"}
    text = (
        PLAN if outline else PLAN.split("outline =")[0] + '[[load]]\nshape = "sine"\ntotal = "1 N"\n[pads]\ncount = 6\n'
    )
    text = text.replace('pressure = "map.csv"', 'point = "1 N"\nat = "1 m"')
    for name, table in {**tables, "plane.toml": text}.items():
        (tmp_path / name).write_text(table, encoding="utf-8")
    code = (
        "import sys; from rigdesign.brief import read_brief; read_brief('plane.toml'); print('shapely' in sys.modules)"
    )
    ran = subprocess.run([sys.executable, "-c", code], cwd=tmp_path, capture_output=True, text=True, check=True)
    assert ran.stdout.strip() == str(outline)
