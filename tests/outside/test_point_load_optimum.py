"""How well N point loads can follow a load curve, sum and first moment exact.

Sources
-------
Uniform load: least peak moment error 1/(16 (N − 1 + 1/√2)²) of w L², with places and forces to five digits; computed
here and elsewhere by independent methods.  For N = 2 the places are the classical two supports of least greatest
moment, 0.2071 L from the ends: Hicks, Civil Engineering Formulas, Table 2.3.
Other loads, w ≥ 0: J²/(16 (N − 1 + 1/√2)²) with J = ∫√w dx is asymptotic; the constant follows Burchard & Hale,
J. Approx. Theory 14 (1975) 128-147 (from memory, not confirmed).
The exact least for any w ≥ 0 is confirmed by shooting: for a trial error e the corners and tangents follow one another
by scalar root finding on closed forms, without stations, hulls or bisection over paths; and a general-purpose
optimiser (SLSQP) started from the optimum and from perturbed places finds nothing better.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_pads, make_specimen, shape_load
from scipy.optimize import brentq, minimize

from rigdesign.pads import PadPlan, plan_pads
from rigdesign.target import build_target

UNIFORM = {
    1: ([0.5], [1.0]),
    2: ([0.2071068, 0.7928932], [0.5, 0.5]),
    3: ([0.13060, 0.5, 0.86940], [0.31530, 0.36940, 0.31530]),
    4: ([0.09537, 0.36512, 0.63488, 0.90463], [0.23025, 0.26975, 0.26975, 0.23025]),
    8: (
        [0.04587, 0.17562, 0.30537, 0.43512, 0.56488, 0.69463, 0.82438, 0.95413],
        [0.11075, *[0.12975] * 6, 0.11075],
    ),
}
UNIFORM_LEAST = {1: 0.125, 2: 0.021446609, 3: 0.008528433, 4: 0.004547889, 8: 0.001052197}


def plan_of(count: int, shape: str = "uniform", **changes: float) -> PadPlan:
    """Plan for a unit load on a unit span, judged on its moment alone, pads without a footprint."""
    brief = make_brief(
        specimen=make_specimen(left=0.0, right=1.0),
        loads=(shape_load(shape, 1.0, start_x=0.0, end_x=1.0, **changes),),
        pads=make_pads(count=count, length=0.0, gap=0.0),
        acceptance=make_acceptance(moment=0.02, shear=None),
    )
    plan = plan_pads(build_target(brief))
    assert isinstance(plan, PadPlan)
    return plan


def peak_error(plan: PadPlan) -> float:
    """Largest moment error [N·m] before drilling."""
    return plan.proof.band_use * 0.02 * plan.target.moment_peak


@pytest.mark.parametrize("count", UNIFORM)
def test_uniform_places_and_forces_to_five_digits(count: int) -> None:
    plan = plan_of(count)
    places, forces = UNIFORM[count]
    # the table is rounded to five decimals
    np.testing.assert_allclose(plan.x, places, atol=6e-6)
    np.testing.assert_allclose(plan.force, forces, atol=6e-6)
    # stations of the tube leave at most 2e-5 of the error
    assert peak_error(plan) == pytest.approx(UNIFORM_LEAST[count], rel=2e-5)


@pytest.mark.parametrize("count", [5, 16, 32])
def test_uniform_least_by_formula(count: int) -> None:
    least = 1 / (16 * (count - 1 + 1 / np.sqrt(2)) ** 2)
    assert peak_error(plan_of(count)) == pytest.approx(least, rel=2e-5)


# -- other loads: the exact least by shooting --------------------------------------------------------------------------


@dataclass(frozen=True)
class ClosedForm:
    """A unit load on a unit span: load beyond x and its first moment, and J = ∫√w."""

    shape: str
    changes: dict[str, float]
    shear: Callable[[float], float]
    moment: Callable[[float], float]
    j: float


def _ellipse_shear(x: float) -> float:
    return float((np.arccos(x) - x * np.sqrt(1 - x * x)) * 2 / np.pi)


def _ellipse_moment(x: float) -> float:
    return float(4 / np.pi * (1 - x * x) ** 1.5 / 3 - x * _ellipse_shear(x))


SHAPES = [
    ClosedForm("triangular", {}, lambda x: (1 - x) ** 2, lambda x: (1 - x) ** 3 / 3, 2 / 3 * np.sqrt(2)),
    # w = 4/π √(1 − x²); ∫ (1 − x²)^(1/4) dx = √π Γ(5/4) / (2 Γ(7/4)) = 0.8740191847
    ClosedForm("elliptical", {}, _ellipse_shear, _ellipse_moment, np.sqrt(4 / np.pi) * 0.8740191847),
    ClosedForm("power", {"exponent": 2.0}, lambda x: (1 - x) ** 3, lambda x: (1 - x) ** 4 / 4, np.sqrt(3) / 2),
]
NAMES = [shape.shape for shape in SHAPES]


def least_by_shooting(form: ClosedForm, count: int) -> float:
    """Smallest peak moment error for which `count` pads are enough."""
    low, high = 1e-7, 0.2
    for _ in range(60):
        middle = np.sqrt(low * high)
        if shooting_fits(form, middle, count):
            high = middle
        else:
            low = middle
    return high


def shooting_fits(form: ClosedForm, error: float, count: int) -> bool:
    """Whether a path with `count` corners keeps within `error`: follow the longest links from the root."""
    end = 1 - 1e-13
    total, root = form.shear(0.0), form.moment(0.0)
    start = (0.0, root, -total)  # a point of the line and its slope
    foot = brentq(lambda x: form.moment(x) - error, 0.0, end, xtol=1e-15)
    for _ in range(count - 1):
        x0, y0, slope = start

        def gap(x: float, x0: float = x0, y0: float = y0, slope: float = slope) -> float:
            return form.moment(x) - error - (y0 + slope * (x - x0))

        # the line leaves the tube beyond the place where it runs closest to the lower edge
        parallel = brentq(lambda x, s=slope: -form.shear(x) - s, 0.0, end, xtol=1e-15) if slope > -total else 0.0
        if gap(end) < 0:
            return True  # the link stays in the tube to the tip
        corner = brentq(gap, parallel, end, xtol=1e-15)
        level = form.moment(corner) - error

        def touching(t: float, corner: float = corner, level: float = level) -> float:
            return form.moment(t) + error - form.shear(t) * (corner - t) - level

        if touching(end) > 0:
            return True  # the link can run straight to the tip
        touch = brentq(touching, corner, end, xtol=1e-15)
        slope = -form.shear(touch)
        if level + slope * (1 - corner) > 0:
            return True  # so can one that would still be above the axis there
        start = (corner, level, slope)
    x0, y0, slope = start
    return bool(slope < 0 and x0 - y0 / slope >= foot and x0 - y0 / slope <= 1.0 + 1e-12)


@pytest.mark.parametrize("count", [2, 3, 7, 16, 32])
@pytest.mark.parametrize("form", SHAPES, ids=NAMES)
def test_least_error_within_a_thousandth_of_shooting(form: ClosedForm, count: int) -> None:
    plan = plan_of(count, form.shape, **form.changes)
    exact = least_by_shooting(form, count)
    found = peak_error(plan)
    assert found == pytest.approx(exact, rel=1e-3)
    assert plan.proof.moment_error_least * plan.target.moment_peak <= exact * (1 + 1e-6)


@pytest.mark.parametrize("form", SHAPES, ids=NAMES)
def test_asymptotic_constant(form: ClosedForm) -> None:
    # second-order terms are a few per cent at 32 pads where the load falls to zero at the tip
    assert peak_error(plan_of(32, form.shape, **form.changes)) == pytest.approx(
        form.j**2 / (16 * (31 + 1 / np.sqrt(2)) ** 2), rel=0.04
    )


@pytest.mark.parametrize("form", SHAPES, ids=NAMES)
def test_a_general_optimiser_finds_nothing_better(form: ClosedForm) -> None:
    plan = plan_of(4, form.shape, **form.changes)
    x = np.linspace(0, 1, 801)
    wanted = np.array([form.moment(min(v, 1 - 1e-13)) for v in x])
    total, first = 1.0, form.moment(0.0)

    def errors(z: np.ndarray) -> np.ndarray:
        place, force = z[:4], z[4:8]
        return np.maximum(place[None, :] - x[:, None], 0) @ force - wanted

    def solved(start: np.ndarray) -> float:
        result = minimize(
            lambda z: z[8],
            np.append(start, np.abs(errors(start)).max()),
            constraints=[
                {"type": "ineq", "fun": lambda z: z[8] - errors(z)},
                {"type": "ineq", "fun": lambda z: z[8] + errors(z)},
                {"type": "eq", "fun": lambda z: [z[4:8].sum() - total, z[4:8] @ z[:4] - first]},
            ],
            bounds=[(0, 1)] * 4 + [(0, 1)] * 4 + [(0, 1)],
            options={"maxiter": 200, "ftol": 1e-12},
        )
        return float(np.abs(errors(result.x[:8])).max()) if result.success else np.inf

    best = np.concatenate([plan.x, plan.force])
    shifts = [np.zeros(8), np.concatenate([[0.03, -0.02, 0.04, -0.01], np.zeros(4)])]
    # corners between stations 1/800 apart hide up to a quarter of a force times the distance, 8e-5 of about 4e-3
    assert min(solved(best + shift) for shift in shifts) > peak_error(plan) * (1 - 0.02)


def test_shear_of_any_rig_is_bounded() -> None:
    """No rig of N pads has a peak shear error below R/(2N); the stair proves it where the shear alone is judged."""
    brief = make_brief(
        specimen=make_specimen(left=0.0, right=1.0),
        loads=(shape_load("triangular", 1.0, start_x=0.0, end_x=1.0),),
        pads=make_pads(count=5, length=0.0, gap=0.0),
        acceptance=make_acceptance(moment=None, shear=0.12),
    )
    plan = plan_pads(build_target(brief))
    assert isinstance(plan, PadPlan)
    # the bound is taken at 400 stations a pad: the shear moves by up to 2/400 of a step between two of them
    assert plan.proof.band_use_least * 0.12 == pytest.approx(1 / 10, rel=5e-3)
    assert plan.proof.band_use * 0.12 >= 1 / 10


def test_one_pad_under_a_triangle_costs_more_shear_than_the_bound() -> None:
    """Triangle, N = 1: the exact first moment puts the pad at L/3, where the shear error is 0.556 R, not 0.5 R."""
    brief = make_brief(
        specimen=make_specimen(left=0.0, right=1.0),
        loads=(shape_load("triangular", 1.0, start_x=0.0, end_x=1.0),),
        pads=make_pads(count=1, length=0.0, gap=0.0),
        acceptance=make_acceptance(moment=None, shear=0.12),
    )
    plan = plan_pads(build_target(brief))
    assert isinstance(plan, PadPlan)
    assert plan.x[0] == pytest.approx(1 / 3)
    assert plan.proof.band_use * 0.12 == pytest.approx(5 / 9, rel=1e-3)
