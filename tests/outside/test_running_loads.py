"""Resultant, centroid and first moment of running loads, and Schrenk's approximation.

Sources
-------
Areas and centroids of plane shapes: Beer, F. P. and Johnston, E. R., *Vector Mechanics for Engineers: Statics*,
Fig. 5.8A (rectangle, triangle, quarter ellipse, parabolic spandrels, sine by its own integral).
The table's closed forms were checked again by integrating the formulas with sympy (`test_table_is_right`).

Schrenk, O., *A Simple Approximation Method for Obtaining the Spanwise Lift Distribution*, NACA TM 948 (1940): the
running load is the mean of the chord and of the ellipse that carries the same total.  The numbers for straight tapers
were computed from that method and are no quotation.
"""

from __future__ import annotations

import numpy as np
import pytest
import sympy as sp
from factories import make_brief, make_specimen, shape_load, table_load

from rigdesign.target import build_target

ROOT, L, W0 = 0.7, 3.2, 850.0
TIP = ROOT + L
W1, W2 = 300.0, 1150.0
PI = np.pi

# Ours are closed forms as well, so only rounding separates them.
ROUNDING = 1e-13


def _span(shape, total, **changes):
    return shape_load(shape, total, start_x=ROOT, end_x=TIP, **changes)


def _linear(start, end):
    return _span("linear", None, start=start, end=end)


# name, load, R, centroid from the root, first moment about the root, running load at xi = 0.3
TABLE = [
    ("uniform", _span("uniform", W0 * L), W0 * L, L / 2, W0 * L**2 / 2, W0),
    ("triangle, root", _span("triangular", W0 * L / 2), W0 * L / 2, L / 3, W0 * L**2 / 6, 0.7 * W0),
    ("triangle, tip", _span("triangular", W0 * L / 2, greatest="tip"), W0 * L / 2, 2 * L / 3, W0 * L**2 / 3, 0.3 * W0),
    ("trapezoid", _linear(W1, W2), L * (W1 + W2) / 2, L * (W1 + 2 * W2) / (3 * (W1 + W2)), L**2 * (W1 + 2 * W2) / 6,
     W1 + 0.3 * (W2 - W1)),
    ("quarter ellipse", _span("elliptical", PI * W0 * L / 4), PI * W0 * L / 4, 4 * L / (3 * PI), W0 * L**2 / 3,
     W0 * np.sqrt(0.91)),
    ("half parabola", _span("parabolic", 2 * W0 * L / 3), 2 * W0 * L / 3, 3 * L / 8, W0 * L**2 / 4, 0.91 * W0),
    ("spandrel", _span("power", W0 * L / 3, exponent=2.0), W0 * L / 3, L / 4, W0 * L**2 / 12, 0.49 * W0),
    ("half sine", _span("sine", 2 * W0 * L / PI), 2 * W0 * L / PI, L / 2, W0 * L**2 / PI, W0 * np.sin(0.3 * PI)),
]  # fmt: skip


@pytest.mark.parametrize(("load", "resultant", "centroid", "moment", "running"), [row[1:] for row in TABLE],
                         ids=[row[0] for row in TABLE])  # fmt: skip
def test_resultant_centroid_and_moment(load, resultant, centroid, moment, running):
    target = build_target(make_brief(specimen=make_specimen(left=ROOT, right=TIP), loads=(load,)))
    assert target.resultant == pytest.approx(resultant, rel=ROUNDING)
    assert target.centroid - ROOT == pytest.approx(centroid, rel=ROUNDING)
    assert target.moment(np.array([ROOT]))[0] == pytest.approx(moment, rel=ROUNDING)
    assert target.moment_about == pytest.approx(moment, rel=1e-12)  # a difference of two moments about x = 0
    at = np.array([ROOT + 0.3 * L])
    assert target.total.running(at, "outboard")[0] == pytest.approx(running, rel=ROUNDING)


def test_table_is_right():
    """The rows above by symbolic integration of their own shapes."""
    x = sp.symbols("x", positive=True)
    shapes = [sp.Integer(1), 1 - x, x, None, sp.sqrt(1 - x**2), 1 - x**2, (1 - x) ** 2, sp.sin(sp.pi * x)]
    for (name, _, resultant, centroid, moment, _), shape in zip(TABLE, shapes, strict=True):
        w = sp.Rational(300) + 850 * x if shape is None else 850 * shape
        area, first = sp.integrate(w, (x, 0, 1)), sp.integrate(w * x, (x, 0, 1))
        assert resultant == pytest.approx(float(area) * L, rel=1e-14), name
        assert centroid == pytest.approx(float(first / area) * L, rel=1e-14), name
        assert moment == pytest.approx(float(first) * L**2, rel=1e-14), name


# R, centroid and first moment of the two rows that no named shape of a brief gives; here as fine tables.
FORMULAS = [
    ("full parabola", lambda xi: 4 * W0 * xi * (1 - xi), 2 * W0 * L / 3, L / 2, W0 * L**2 / 3),
    (
        "cosine",
        lambda xi: W0 * np.cos(PI * xi / 2),
        2 * W0 * L / PI,
        L * (PI - 2) / PI,
        2 * W0 * L**2 * (PI - 2) / PI**2,
    ),
]


@pytest.mark.parametrize(("formula", "resultant", "centroid", "moment"), [r[1:] for r in FORMULAS],
                         ids=[r[0] for r in FORMULAS])  # fmt: skip
def test_tables_of_formulas(formula, resultant, centroid, moment):
    xi = np.linspace(0.0, 1.0, 20_001)
    load = table_load(ROOT + L * xi, formula(xi))
    target = build_target(make_brief(specimen=make_specimen(left=ROOT, right=TIP), loads=(load,)))
    # Chords of a curve: (step)² w''/12 of the load is missing, 2e-9 of it and less.
    assert target.resultant == pytest.approx(resultant, rel=3e-9)
    assert target.centroid - ROOT == pytest.approx(centroid, rel=3e-9)
    assert target.moment_about == pytest.approx(moment, rel=3e-9)


SCHRENK = {
    0.0: (0.3788732575, 1.6366198),
    0.25: (0.4122065908, 1.4366198),
    0.5: (0.4344288130, 1.3032864),
    1.0: (0.4622065908, 1.1366198),
}


@pytest.mark.parametrize("taper", SCHRENK)
def test_schrenk_on_a_straight_taper(taper):
    centroid, at_root = SCHRENK[taper]
    total = 7300.0
    load = _span("schrenk", total, chord_x=np.array([ROOT, TIP]), chord=np.array([1.3, 1.3 * taper]))
    target = build_target(make_brief(specimen=make_specimen(left=ROOT, right=TIP), loads=(load,)))
    assert target.resultant == pytest.approx(total, rel=ROUNDING)
    assert (target.centroid - ROOT) / L == pytest.approx(centroid, abs=6e-11)  # the digits of the table
    over_mean = target.total.running(np.array([ROOT, ROOT + L / 2]), "outboard") / (total / L)
    assert over_mean == pytest.approx([at_root, 1.0513289], abs=6e-8)  # the digits of the table
