"""Deflections of beams, from the bending moments that the target stage gives.

The project does not compute deflections yet.  What it does give is M at any station, and each deflection below is an
integral of M (unit-load theorem, curvature M/EI), so a wrong M, sign or lever arm shows as a wrong deflection.

Sources
-------
Cantilevers: formulas common to every handbook of beams.  Overhang: seen in a published table of beam formulas.  Quarter
ellipse: computed independently.
Large deflection of a cantilever with a dead tip load (elastica): Mattiasson, Int. J. Numer. Meth. Eng. 17 (1981)
145-153, Table 1, for k = P L²/EI = 1, 2, 5, 10; k = 0.2 and 3 computed independently.
Shortening and swing of a deflected specimen, lever with its own weight: hand figures of statics.
"""

from __future__ import annotations

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_specimen, point_loads, shape_load, two_supports
from scipy.integrate import cumulative_trapezoid, simpson

from rigdesign.brief.model import Load, Specimen
from rigdesign.target import build_target
from rigdesign.target.internal import points_beyond, reactions

L, EI = 2.6, 4.1e3


def moments(specimen: Specimen, load: Load, x: np.ndarray) -> np.ndarray:
    """M at stations x (n,) [N·m]."""
    target = build_target(make_brief(specimen=specimen, loads=(load,), acceptance=make_acceptance(0.02, None)))
    return target.moment(x)


def tip_deflection(load: Load) -> float:
    """Deflection of a cantilever's tip [m] by a unit load there: ∫ M (L − x) dx / EI."""
    x = np.linspace(0, L, 20001)
    return float(simpson(moments(make_specimen(left=0.0, right=L), load, x) * (L - x), x=x)) / EI


def load_of(shape: str, greatest_load: float, part: float, **changes: object) -> Load:
    """A shape whose greatest running load is given; `part` is its total over that times the length."""
    return shape_load(shape, greatest_load * L * part, start_x=0.0, end_x=L, **changes)


@pytest.mark.parametrize(
    ("load", "deflection"),
    [
        (point_loads(L, 310.0), 310.0 * L**3 / (3 * EI)),
        (load_of("uniform", 200.0, 1.0), 200.0 * L**4 / (8 * EI)),
        (load_of("triangular", 200.0, 0.5), 200.0 * L**4 / (30 * EI)),
        (load_of("triangular", 200.0, 0.5, greatest="tip"), 11 * 200.0 * L**4 / (120 * EI)),
        (load_of("elliptical", 200.0, np.pi / 4), 0.0759525482 * 200.0 * L**4 / EI),
    ],
    ids=["tip load", "uniform", "greatest at root", "greatest at tip", "quarter ellipse"],
)
def test_tip_deflection_of_a_cantilever(load: Load, deflection: float) -> None:
    # Simpson's rule over 20 000 steps; the ellipse has a root at the tip
    assert tip_deflection(load) == pytest.approx(deflection, rel=1e-8)


def test_tip_slope_under_a_quarter_ellipse() -> None:
    x = np.linspace(0, L, 20001)
    moment = moments(make_specimen(left=0.0, right=L), load_of("elliptical", 200.0, np.pi / 4), x)
    assert simpson(moment, x=x) / EI == pytest.approx(np.pi / 32 * 200.0 * L**3 / EI, rel=1e-8)


def test_tip_deflection_of_an_overhang() -> None:
    """Overhang a beyond a span, P at its tip: P a² (span + a)/(3 EI), the moment of the unit load by the same code."""
    span, a, force = 1.9, 0.7, 310.0
    x = np.unique(np.concatenate([np.linspace(0, span, 4001), np.linspace(span, span + a, 4001)]))
    beam = two_supports(0.0, 0.0, span, span + a)
    moment, unit = (moments(beam, point_loads(span + a, value), x) for value in (force, 1.0))
    # piecewise quadratic, the kink at a station: the rule over both smooth parts is exact
    parts = [x <= span, x >= span]
    found = sum(float(simpson((moment * unit)[part], x=x[part])) for part in parts) / EI
    assert found == pytest.approx(force * a**2 * (span + a) / (3 * EI), rel=1e-9)


ELASTICA = {
    0.2: (0.066364482, 0.002646548),
    1.0: (0.301720774, 0.056433236),
    2.0: (0.493457480, 0.160641721),
    3.0: (0.603253441, 0.254420185),
    5.0: (0.713791524, 0.387628361),
    10.0: (0.810609025, 0.554995598),
}


@pytest.mark.parametrize("k", ELASTICA)
def test_elastica_with_moments_in_the_deformed_shape(k: float) -> None:
    """Curvature k M(x) along the bent cantilever of length 1, M of the dead load where its tip has come to."""
    s = np.linspace(0, 1, 8001)

    def shape(tip: float) -> tuple[np.ndarray, np.ndarray]:
        angle, x = s, s * tip
        for _ in range(400):
            bend = k * points_beyond(x, np.array([tip]), np.array([1.0]), "inboard")[1]
            new = cumulative_trapezoid(bend, s, initial=0.0)
            moved = np.max(np.abs(new - angle))
            angle = 0.5 * (angle + new)
            x = cumulative_trapezoid(np.cos(angle), s, initial=0.0)
            if moved < 1e-12:
                break
        return x, cumulative_trapezoid(np.sin(angle), s, initial=0.0)

    low, high = 0.05, 1.0
    for _ in range(45):
        tip = 0.5 * (low + high)
        low, high = (tip, high) if shape(tip)[0][-1] > tip else (low, tip)
    x, drop = shape(0.5 * (low + high))
    # trapezoids over 8000 steps
    assert drop[-1] == pytest.approx(ELASTICA[k][0], abs=2e-7)
    assert 1 - x[-1] == pytest.approx(ELASTICA[k][1], abs=2e-7)


def test_shortening_and_swing_of_a_specimen_bent_by_a_uniform_load() -> None:
    """Shortening 0.571 δ²/L; links of 0.15 L swing by 0.5, 2.2, 4.9, 8.8 degrees at δ/L of 5, 10, 15, 20 %."""
    x = np.linspace(0, L, 4001)
    moment = moments(make_specimen(left=0.0, right=L), load_of("uniform", 200.0, 1.0), x)
    slope = cumulative_trapezoid(moment, x, initial=0.0)
    deflection = cumulative_trapezoid(slope, x, initial=0.0)
    factor = 0.5 * simpson(slope**2, x=x) / deflection[-1] ** 2 * L
    assert factor == pytest.approx(0.571, abs=5e-4)
    swing = np.degrees(np.arcsin(factor * np.array([0.05, 0.10, 0.15, 0.20]) ** 2 / 0.15))
    np.testing.assert_allclose(swing, [0.5, 2.2, 4.9, 8.8], atol=0.06)


@pytest.mark.parametrize(("pull", "first", "second"), [(10_000.0, -3.75, -2.5), (1_000.0, -37.5, -25.0)])
def test_a_lever_with_its_own_weight_is_a_beam_on_two_supports(pull: float, first: float, second: float) -> None:
    """a = 600, b = 400 mm, w = 300 N, centred 100 mm from the pivot towards end 1: per cent of the light lever."""
    a, b, weight, towards = 0.6, 0.4, 300.0, 0.1
    beam = two_supports(-a, -a, b, b)
    light = -reactions(beam, pull, 0.0)[1]
    heavy = -reactions(beam, pull - weight, weight * towards)[1]
    np.testing.assert_allclose(light, [pull * b / (a + b), pull * a / (a + b)])
    np.testing.assert_allclose(100 * (heavy / light - 1), [first, second], atol=1e-9)
    # by formula: F1 = ((R − w) b − w g)/(a + b), F2 = ((R − w) a + w g)/(a + b)
    assert heavy[0] == pytest.approx(((pull - weight) * b - weight * towards) / (a + b))
    assert heavy[1] == pytest.approx(((pull - weight) * a + weight * towards) / (a + b))
