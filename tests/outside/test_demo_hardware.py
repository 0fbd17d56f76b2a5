"""Hardware of every demo: what passes, that nothing could be smaller, and distances by another solver.

Distances: the nearest points of two convex hulls as a quadratic programme over the weights of their corners, by the
sequential least squares of SciPy (D. Kraft, DFVLR-FB 88-28, 1988), where the package itself walks from simplex to
simplex.
"""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from pathlib import Path

import numpy as np
import pytest
from scipy.optimize import minimize

from rigdesign.brief import read_brief
from rigdesign.chain import design
from rigdesign.checks.hardware import check_hardware
from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.checks.hardware.solids import members
from rigdesign.hardware.catalogue import sections
from rigdesign.hardware.levers import PROFILE, overhang
from rigdesign.report.lists import cut_plans

DEMOS = sorted(Path(__file__).parents[2].glob("demo_rigs/*/*.toml"))
NAMES = [f"{path.parent.name}/{path.stem}" for path in DEMOS]


@cache
def designed(path: Path) -> HardwareCheck:
    answer = design(read_brief(path))
    assert isinstance(answer, HardwareCheck)
    return answer


def kept(path: Path) -> bool:
    return designed(path).check.rig.plan.target.brief.keep is not None


@pytest.mark.parametrize("path", DEMOS, ids=NAMES)
def test_every_member_passes_and_the_cut_list_is_proven(path):
    answer = designed(path)
    assert answer.accepted
    assert 0.5 < answer.utilisation <= 1.0
    for one in cut_plans(answer):
        plan = one.plan
        assert plan.n_bars == plan.least_bars
        assert not plan.too_long
        for bar in plan.bars:
            pieces = [cut.length for cut in bar.cuts for _ in range(cut.count)]
            kerfs = plan.kerf * len(pieces)
            assert sum(pieces) + kerfs - plan.kerf <= plan.bar + 1e-9
            assert bar.offcut == pytest.approx(max(0.0, plan.bar - sum(pieces) - kerfs), abs=1e-9)


def fails(answer: HardwareCheck, **changes) -> bool:
    """Whether the check finds a member of the changed hardware above its limit."""
    return check_hardware(answer.check, replace(answer.hardware, **changes)).utilisation > 1.0


@pytest.mark.parametrize("path", [path for path in DEMOS if path.name == "brief.toml"], ids=lambda path: path.parent.name)
def test_no_section_and_no_pin_could_be_a_size_smaller(path):
    brief = read_brief(path)
    answer = design(replace(brief, hardware=replace(brief.hardware, marks="as drilled")))
    assert isinstance(answer, HardwareCheck)
    hardware, rules = answer.hardware, brief.hardware
    for name, body in hardware.bodies.items():
        kind = "plate" if body.build == "plate" else PROFILE[body.build]
        lighter = [s for s in sections(rules, kind) if s.mass < body.section.mass - 1e-9]
        if lighter:
            less = replace(body, section=lighter[-1])
            less = less if kind == "plate" else replace(less, overhang=overhang(lighter[-1].depth))
            assert fails(answer, bodies={**hardware.bodies, name: less}), name
    for i, link in enumerate(hardware.links):
        for side in ("upper", "lower"):
            end = getattr(link, side)
            smaller = [pin for pin in rules.pins if pin < end.pin - 1e-9]
            if end.fitting == "stud" or end.to.startswith("jack ") or not smaller:
                continue
            hole = smaller[-1] + rules.play
            thin = replace(end, pin=smaller[-1], hole=hole, radius=np.ceil(round(1250 * hole, 6)) / 1000)
            links = (*hardware.links[:i], replace(link, **{side: thin}), *hardware.links[i + 1 :])
            assert fails(answer, links=links) or end.inner > 3 * smaller[-1], (link.name, side)


def hulls_apart(first: np.ndarray, second: np.ndarray) -> float:
    """Distance of two convex hulls [m] by a quadratic programme, in millimetres so that its tolerances fit."""
    middle = first.mean(axis=0)
    points = 1000 * np.vstack([first - middle, middle - second])
    n, m = len(first), len(second)
    sums = [
        {"type": "eq", "fun": lambda w: w[:n].sum() - 1, "jac": lambda w: np.r_[np.ones(n), np.zeros(m)]},
        {"type": "eq", "fun": lambda w: w[n:].sum() - 1, "jac": lambda w: np.r_[np.zeros(n), np.ones(m)]},
    ]
    start = np.r_[np.full(n, 1 / n), np.full(m, 1 / m)]
    found = minimize(
        lambda w: float((w @ points) @ (w @ points)), start, jac=lambda w: 2 * points @ (w @ points), method="SLSQP",
        bounds=[(0, 1)] * (n + m), constraints=sums, options={"ftol": 1e-10, "maxiter": 500},
    )  # fmt: skip
    return float(np.linalg.norm(found.x @ points)) / 1000


def boxes_apart(first: np.ndarray, second: np.ndarray) -> float:
    gap = np.maximum(first.min(axis=0) - second.max(axis=0), second.min(axis=0) - first.max(axis=0))
    return float(np.linalg.norm(np.maximum(gap, 0.0)))


@pytest.mark.parametrize("path", DEMOS, ids=NAMES)
def test_the_least_clearance_at_rest_by_another_solver(path):
    answer = designed(path)
    solids = {member.name: [member.place + solid for solid in member.solids] for member in members(answer.hardware)}
    joined = {member.name: member.joined for member in members(answer.hardware)}
    at_rest = [pair for pair in answer.space.closest if pair.state == "at rest"]
    least = at_rest[0].distance
    for pair in at_rest[:3]:
        found = min(hulls_apart(a, b) for a in solids[pair.first] for b in solids[pair.second] if boxes_apart(a, b) < 0.2)
        # a millionth of a millimetre in the programme's objective leaves about a micrometre
        assert pair.distance == pytest.approx(found, abs=2e-6)
    names = list(solids)
    pinned = {frozenset(ends) for name in names for ends in [(name, other) for other in joined[name]]}
    for i, one in enumerate(names):
        for other in names[i + 1 :]:
            if frozenset((one, other)) in pinned or (one.startswith("pad") and other.startswith("pad")):
                continue
            if joined[one] & joined[other] and one.startswith("link") and other.startswith("link"):
                continue  # two links in one piece
            for a in solids[one]:
                for b in solids[other]:
                    if boxes_apart(a, b) < least - 1e-6:
                        assert hulls_apart(a, b) >= least - 2e-6, (one, other)
