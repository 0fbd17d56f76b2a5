"""Hardware of every demo: what passes, that nothing could be smaller, and distances by another solver.

Distances: the nearest points of two convex hulls as least squares over the weights of their corners, none negative, by
an active set (C. L. Lawson and R. J. Hanson, Solving Least Squares Problems, 1974), where the package itself walks from
simplex to simplex.
"""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from pathlib import Path

import numpy as np
import pytest
from scipy.optimize import nnls

from rigdesign.brief import read_brief
from rigdesign.chain import design
from rigdesign.checks.hardware.loads import hanging, own_weight
from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.checks.hardware.solids import members
from rigdesign.checks.hardware.strength import strength
from rigdesign.checks.hardware.tare import sampled, weighed
from rigdesign.hardware.catalogue import sections
from rigdesign.hardware.levers import PROFILE, overhang
from rigdesign.report.lists import cut_plans

HEAVY = 1e5
"""Weight of the rows that hold sums to one; distances are in millimetres beside it."""

DEMOS = sorted(Path(__file__).parents[2].glob("demo_rigs/*/*.toml"))
DESIGNED = [path for path in DEMOS if path.name == "brief.toml"]
NAMES = [f"{path.parent.name}/{path.stem}" for path in DEMOS]


@cache
def designed(path: Path) -> HardwareCheck:
    answer = design(read_brief(path))
    assert isinstance(answer, HardwareCheck)
    return answer


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


class Judge:
    """The check's strength of a design, asked again for changed members under the loads that it has."""

    def __init__(self, answer: HardwareCheck) -> None:
        rig, rules = answer.check.rig, answer.check.rig.plan.target.brief.hardware
        self.hardware, self.hung = answer.hardware, hanging(rig)
        self.loads = own_weight(rig, answer.hardware.masses)
        with_weight = weighed(sampled(answer.check), self.hung, self.loads)
        self.jack = with_weight.held_at(rig.plan.target.brief.peak, rules.overshoot)
        assert strength(self.hardware, self.hung, self.loads, self.jack) == answer.strength

    def fails(self, **changes) -> bool:
        rows = strength(replace(self.hardware, **changes), self.hung, self.loads, self.jack)
        return max(row.utilisation for row in rows) > 1.0


@pytest.mark.parametrize("path", DESIGNED, ids=lambda path: path.parent.name)
def test_no_section_and_no_pin_could_be_a_size_smaller(path):
    brief = read_brief(path)
    answer = design(replace(brief, hardware=replace(brief.hardware, marks="as drilled")))
    assert isinstance(answer, HardwareCheck)
    hardware, rules, judge = answer.hardware, brief.hardware, Judge(answer)
    for name, body in hardware.bodies.items():
        kind = "plate" if body.build == "plate" else PROFILE[body.build]
        lighter = [s for s in sections(rules, kind) if s.mass < body.section.mass - 1e-9]
        if lighter:
            less = replace(body, section=lighter[-1])
            less = less if kind == "plate" else replace(less, overhang=overhang(lighter[-1].depth))
            assert judge.fails(bodies={**hardware.bodies, name: less}), name
    for i, link in enumerate(hardware.links):
        for side in ("upper", "lower"):
            end = getattr(link, side)
            smaller = [pin for pin in rules.pins if pin < end.pin - 1e-9]
            if end.fitting == "stud" or end.to.startswith("jack ") or not smaller:
                continue
            hole = smaller[-1] + rules.play
            thin = replace(end, pin=smaller[-1], hole=hole, radius=np.ceil(round(1250 * hole, 6)) / 1000)
            links = (*hardware.links[:i], replace(link, **{side: thin}), *hardware.links[i + 1 :])
            # an eye thicker than three pins is none: the pin would only be bent
            assert judge.fails(links=links) or end.inner > 3 * smaller[-1], (link.name, side)


def hulls_apart(first: np.ndarray, second: np.ndarray) -> float:
    """Distance of two convex hulls [m]: weights ≥ 0 of the corners, a heavy row each holding their sums to one."""
    middle = first.mean(axis=0)
    n, m = len(first), len(second)
    points = 1000 * np.vstack([first - middle, middle - second])
    sums = HEAVY * np.array([[1.0] * n + [0.0] * m, [0.0] * n + [1.0] * m])
    weights, _ = nnls(np.vstack([points.T, sums]), np.array([0.0, 0.0, 0.0, HEAVY, HEAVY]), maxiter=2000)
    # brought back to sums of exactly one, the two points lie in the hulls
    weights[:n], weights[n:] = weights[:n] / weights[:n].sum(), weights[n:] / weights[n:].sum()
    return float(np.linalg.norm(weights @ points)) / 1000


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
        found = min(
            hulls_apart(a, b) for a in solids[pair.first] for b in solids[pair.second] if boxes_apart(a, b) < 0.2
        )
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
