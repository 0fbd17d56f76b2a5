"""The choice of pads in plan, put a second time to another optimiser through another front end.

Solver: CBC (COIN-OR branch and cut), through PuLP.  The programmes are written out here from their definition:

    least u  with  −u · below ≤ A f − w ≤ u · above,  Σ f = F,  Σ f x = F_x,  Σ f y = F_y,
             least · z ≤ f ≤ largest · z,  Σ z = count,  z_i + z_j ≤ 1 for pads that collide

with A from responses of single forces, for loads that are many small forces, so that nothing of the target's own
integrals has a part in it.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations

import numpy as np
import pulp
import pytest
from numpy.typing import NDArray
from scipy.optimize import linprog

from rigdesign.brief.model import Line, Outline, Specimen
from rigdesign.pads.surface.balance import Balance
from rigdesign.pads.surface.choice import Choice, choose
from rigdesign.pads.surface.error_rows import Block, ErrorRows
from rigdesign.pads.surface.program import Programme
from rigdesign.target.cuts import responses

# PuLP 3 announces its version 4 on every call that both understand
pytestmark = pytest.mark.filterwarnings("ignore::DeprecationWarning:pulp")

Floats = NDArray[np.float64]
Sums = tuple[float, float, float]


def second_optimum(
    matrix: Floats,
    wanted: Floats,
    below: Floats,
    above: Floats,
    x: Floats,
    y: Floats,
    sums: Sums,
    count: int,
    f_min: float,
    f_max: float,
    conflicts: Sequence[tuple[int, int]],
) -> tuple[float, list[int]]:
    """Return the least band use of `count` of the places x, y (n,) and which they are; infinite, none: there are none.

    `matrix` (m, n), `wanted`, `below`, `above` (m,) judge forces; `sums` are Σ F, Σ F x, Σ F y of the load, F > 0.
    """
    problem = pulp.LpProblem("places", pulp.LpMinimize)
    use, force = _judged(problem, matrix, wanted, below, above, x, y, sums)
    most = min(f_max, sums[0] - (count - 1) * f_min) / (sums[0] / x.size)
    taken = [pulp.LpVariable(f"z{i}", cat="Binary") for i in range(x.size)]
    problem += pulp.lpSum(taken) == count
    for f, z in zip(force, taken, strict=True):
        problem += f <= most * z
        problem += f >= f_min / (sums[0] / x.size) * z
    for i, j in conflicts:
        problem += taken[i] + taken[j] <= 1
    # gaps are zero: the optimum itself, not one near it
    status = problem.solve(pulp.PULP_CBC_CMD(msg=False, gapRel=0.0, gapAbs=0.0))
    if status != pulp.LpStatusOptimal:
        return float("inf"), []
    return float(use.value()), [i for i, z in enumerate(taken) if z.value() > 0.5]


def second_forces(
    matrix: Floats,
    wanted: Floats,
    below: Floats,
    above: Floats,
    x: Floats,
    y: Floats,
    sums: Sums,
    f_min: float,
    f_max: float,
) -> tuple[float, Floats]:
    """Return the least band use of pads at all of the places x, y (n,), and their forces (n,); infinite: none."""
    problem = pulp.LpProblem("forces", pulp.LpMinimize)
    use, force = _judged(problem, matrix, wanted, below, above, x, y, sums)
    mean = sums[0] / x.size
    for f in force:
        problem += f >= f_min / mean
        if np.isfinite(f_max):
            problem += f <= f_max / mean
    if problem.solve(pulp.PULP_CBC_CMD(msg=False)) != pulp.LpStatusOptimal:
        return float("inf"), np.empty(0)
    return float(use.value()), mean * np.array([f.value() for f in force])


def _judged(
    problem: pulp.LpProblem,
    matrix: Floats,
    wanted: Floats,
    below: Floats,
    above: Floats,
    x: Floats,
    y: Floats,
    sums: Sums,
) -> tuple[pulp.LpVariable, list[pulp.LpVariable]]:
    """Band use and forces over sum/n, judged and in balance."""
    mean = sums[0] / x.size
    use = pulp.LpVariable("use", 0)
    force = [pulp.LpVariable(f"f{i}", 0) for i in range(x.size)]
    problem += use
    for row, aim, under, over in zip(matrix * mean, wanted, below, above, strict=True):
        brought = [(f, float(r)) for f, r in zip(force, row, strict=True) if r]
        problem += pulp.LpAffineExpression([(f, r / over) for f, r in brought]) - aim / over <= use
        problem += aim / under - pulp.LpAffineExpression([(f, r / under) for f, r in brought]) <= use
    # moments about the load's own centre, where their sum is nothing
    for arm, total in ((np.ones(x.size), x.size), (x - sums[1] / sums[0], 0.0), (y - sums[2] / sums[0], 0.0)):
        problem += pulp.lpSum(f * float(a) for f, a in zip(force, arm, strict=True)) == total
    return use, force


# -- cases -------------------------------------------------------------------------------------------------------------


@dataclass(frozen=True)
class Case:
    """Places, rows and balance of one question, and the same as plain arrays."""

    x: Floats
    y: Floats
    rows: ErrorRows
    balance: Balance
    sums: Sums

    @property
    def arrays(self) -> tuple[Floats, Floats, Floats, Floats, Floats, Floats, Sums]:
        rows = self.rows
        return rows.matrix(self.x, self.y), rows.wanted, rows.below, rows.above, self.x, self.y, self.sums


def make_case(seed: int, n: int, moment: float = 0.02, torsion: float = 0.05) -> Case:
    """A swept surface under 300 small forces, seven stations a quantity, bands narrower below than above."""
    draw = np.random.default_rng(seed)
    corners = np.array([[0.0, -0.4], [3.2, -0.8], [3.2, -0.4], [0.0, 0.5]])
    axis = Line(np.array([0.0, 1.4, 3.2]), np.array([0.05, -0.1, -0.6]))
    specimen = Specimen("cantilever", 0.0, 3.2, (), None, -1, Outline(*corners.T), axis)

    def places(count: int) -> tuple[Floats, Floats]:
        at, part = draw.uniform(0.1, 3.1, count), draw.uniform(0.05, 0.95, count)
        return at, (1 - part) * np.interp(at, [0, 3.2], [-0.4, -0.8]) + part * np.interp(at, [0, 3.2], [0.5, -0.4])

    x, y = places(n)
    load_x, load_y = places(300)
    load = draw.uniform(5.0, 25.0, 300) * np.sqrt(1.01 - (load_x / 3.2) ** 2)
    blocks = []
    for quantity, band in (("shear", 0.2), ("moment", moment), ("torsion", torsion)):
        at = np.linspace(0.05, 2.9, 7)
        wanted = responses(specimen, quantity, at, "outboard", load_x, load_y) @ load  # type: ignore[arg-type]
        width = np.full(at.size, band * np.abs(wanted).max())
        blocks.append(Block(quantity, "outboard", at, wanted, 0.6 * width, width))  # type: ignore[arg-type]
    sums = float(load.sum()), float(load @ load_x), float(load @ load_y)
    balance = Balance(sums[0], sums[1] / sums[0], sums[2] / sums[0], 3.2)
    return Case(x, y, ErrorRows(specimen, tuple(blocks)), balance, sums)


def colliding(case: Case, gap: float) -> list[tuple[int, int]]:
    away = np.hypot(case.x[:, None] - case.x, case.y[:, None] - case.y)
    return [(int(i), int(j)) for i, j in np.argwhere(np.triu(away < gap, 1))]


def compatible(case: Case, conflicts: list[tuple[int, int]]) -> NDArray[np.bool_]:
    goes = np.ones((case.x.size, case.x.size), bool)
    for i, j in conflicts:
        goes[i, j] = goes[j, i] = False
    return goes


# limits on a pad's force as parts of the mean force, and the tolerance of both solvers on a band use of order one
LIMITS = [(0.0, np.inf), (0.0, 1.6), (0.4, 1.9)]
SOLVED = 2e-6


@pytest.mark.parametrize(("least", "largest"), LIMITS)
@pytest.mark.parametrize("seed", [1, 2, 3])
def test_forces_at_given_places(seed: int, least: float, largest: float) -> None:
    case = make_case(seed, 9)
    mean = case.sums[0] / 9
    own = Programme(case.rows, case.balance, case.x, case.y, least * mean, largest * mean).least_use()
    use, force = second_forces(*case.arrays, least * mean, largest * mean)
    if own is None:
        assert use == float("inf")
        return
    assert own.use == pytest.approx(use, rel=SOLVED, abs=SOLVED)
    # both answers keep what was asked, each by its own numbers
    for answer in (own.force, force):
        assert answer.sum() == pytest.approx(case.sums[0], rel=1e-7)
        assert answer @ case.y == pytest.approx(case.sums[2], rel=1e-6)
        assert answer.min() >= (least - 1e-7) * mean
        assert answer.max() <= (largest + 1e-7) * mean


@pytest.mark.parametrize(("least", "largest"), LIMITS)
@pytest.mark.parametrize("seed", [5, 6, 9, 13])
def test_which_places_and_forces(seed: int, least: float, largest: float) -> None:
    case, count = make_case(seed, 14), 6
    mean = case.sums[0] / count
    conflicts = colliding(case, 0.35)
    assert len(conflicts) > 3
    use, chosen = second_optimum(*case.arrays, count, least * mean, largest * mean, conflicts)
    own = choose(
        Choice(
            case.rows, case.balance, case.x, case.y, count, least * mean, largest * mean, compatible(case, conflicts)
        ),
        nodes=100_000,
    )
    assert own.is_proven
    if own.pads is None:
        assert use == float("inf")
        return
    assert len(chosen) == count == own.pads.size
    assert not any(i in own.pads and j in own.pads for i, j in conflicts)
    # the choice counts as found within 0.1 %
    assert own.bound <= use * (1 + SOLVED) + SOLVED
    assert own.bound == pytest.approx(use, rel=1.1e-3)
    at = own.pads
    best = Programme(case.rows, case.balance, case.x[at], case.y[at], least * mean, largest * mean).least_use()
    assert best is not None
    assert best.use == pytest.approx(use, rel=1.1e-3)


def test_ten_of_thirty_places() -> None:
    case, count = make_case(6, 30), 10
    mean, conflicts = case.sums[0] / count, colliding(case, 0.3)
    use, _ = second_optimum(*case.arrays, count, 0.4 * mean, 1.9 * mean, conflicts)
    choice = Choice(case.rows, case.balance, case.x, case.y, count, 0.4 * mean, 1.9 * mean, compatible(case, conflicts))
    assert choose(choice, nodes=100_000).bound == pytest.approx(use, rel=1.1e-3)


@pytest.mark.parametrize("count", [1, 2, 3, 4])
def test_the_second_optimiser_is_right_itself(count: int) -> None:
    """All choices of places, one by one, each by a third solver: the linear programme alone, without switches."""
    case = make_case(2, 7)
    conflicts, mean = colliding(case, 0.5), case.sums[0] / count
    matrix, wanted, below, above, x, y, sums = case.arrays
    best = np.inf
    for chosen in combinations(range(7), count):
        if any(i in chosen and j in chosen for i, j in conflicts):
            continue
        at = np.array(chosen)
        rows = np.vstack([matrix[:, at] / above[:, None], -matrix[:, at] / below[:, None]]) * mean
        found = linprog(
            np.append(np.zeros(count), 1.0),
            A_ub=np.column_stack([rows, -np.ones(len(rows))]),
            b_ub=np.concatenate([wanted / above, -wanted / below]),
            A_eq=np.column_stack([np.vstack([np.ones(count), x[at], y[at]]), np.zeros(3)]),
            b_eq=np.array(sums) / mean,
            bounds=[(0.2, 2.0)] * count + [(0, None)],
        )
        best = min(best, found.fun if found.status == 0 else np.inf)
    use, _ = second_optimum(*case.arrays, count, 0.2 * mean, 2.0 * mean, conflicts)
    assert use == pytest.approx(best, rel=SOLVED)
    assert (best < np.inf) == (count > 2)
