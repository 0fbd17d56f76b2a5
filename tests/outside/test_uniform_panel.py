"""Uniform pressure on a rectangle with 2 × 2, 3 × 3 and 4 × 4 given places.

Source: symmetry and the equations of equilibrium alone.  Each place has the same part of the area, so that all
tributary shares are the pressure times the area over the number of places; what symmetry of the panel and its supports
maps onto one another has the same force; and each pivot carries what hangs on it, without moments about it.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import array, band_rules, make_brief, make_levers, make_pads, make_specimen
from hand_plan_rigs import outline, pressure

from rigdesign.brief.model import Acceptance, Brief
from rigdesign.chain import arrange
from rigdesign.checks.model import Check

LENGTH, WIDTH, PRESSURE = 2.4, 1.2, 1500.0  # m, m, Pa
EDGE = ((0.0, -0.6), (LENGTH, -0.6), (LENGTH, 0.6), (0.0, 0.6))


def panel(side: int, plates: bool) -> Brief:
    """The brief for side × side places in the middles of equal rectangles."""
    x, y = np.meshgrid((np.arange(side) + 0.5) * LENGTH / side, (np.arange(side) + 0.5) * WIDTH / side - 0.6)
    order = np.lexsort((y.ravel(), x.ravel()))
    specimen = make_specimen(support="two supports", left=0.0, right=LENGTH, supports=(0.2, LENGTH - 0.2))
    pads = make_pads(places="fixed", count=side**2, stations=array(x.ravel()[order]), width=0.08)
    rules = band_rules("moment", 0.05, 0.05) + band_rules("shear", 0.2, 0.2) + band_rules("shear across", 0.2, 0.2)
    return make_brief(
        specimen=replace(specimen, outline=outline(EDGE)),
        loads=(pressure(PRESSURE),),
        pads=replace(pads, y=array(y.ravel()[order])),
        levers=replace(make_levers(), plates=plates),
        acceptance=Acceptance(rules, (), defaulted=False, share=0.25),
    )


@pytest.fixture(scope="module", params=[(2, False), (3, True), (3, False), (4, True)], ids=str)
def found(request) -> Check:
    answer = arrange(panel(*request.param))
    assert isinstance(answer, Check)
    return answer


def test_shares_are_equal(found):
    plan = found.rig.plan
    assert plan.share == pytest.approx(np.full(plan.n_pads, PRESSURE * LENGTH * WIDTH / plan.n_pads), rel=1e-9)


def test_forces_are_as_symmetric_as_the_panel(found):
    """Also along the span, since the supports stand alike and nothing asks for torsion."""
    plan = found.rig.plan
    side = round(plan.n_pads**0.5)
    force = plan.force.reshape(side, side)
    # the least sum of squares is found to 1e-9 of the mean force at best, evenness to 1e-7
    np.testing.assert_allclose(force, force[:, ::-1], rtol=1e-5)
    np.testing.assert_allclose(force, force[::-1, :], rtol=1e-5)
    if side == 2:
        np.testing.assert_allclose(force, PRESSURE * LENGTH * WIDTH / 4.0, rtol=1e-6)


def test_drilled_forces_are_the_planned_ones_to_the_drill_step(found):
    """1 mm on arms of 200 mm and more is half a per cent, three times over in a row of pieces."""
    assert found.statics.pad_force == pytest.approx(found.rig.plan.force, rel=0.02)
    assert found.statics.pad_force.sum() == pytest.approx(PRESSURE * LENGTH * WIDTH, rel=1e-12)


def test_every_pivot_is_in_balance(found):
    """From the holes and the pads' forces alone, bottom to top."""
    (tree,) = found.rig.trees
    load = {f"pad {k}": force for k, force in enumerate(found.statics.pad_force, start=1)}
    for piece in reversed(tree.pieces):
        ends = [(load[hole.joins], hole.x - piece.pivot.x, hole.y - piece.pivot.y) for hole in piece.ends]
        size = sum(abs(force) * np.hypot(x, y) for force, x, y in ends)
        assert abs(sum(force * x for force, x, _ in ends)) <= 1e-9 * size
        assert abs(sum(force * y for force, _, y in ends)) <= 1e-9 * size
        load[piece.name] = sum(force for force, _, _ in ends)
    assert load[tree.jack.carries] == pytest.approx(tree.force, rel=1e-12)
    top = tree.pieces[0].pivot
    assert (tree.jack.x, tree.jack.y) == pytest.approx((top.x, top.y), abs=1e-9)
