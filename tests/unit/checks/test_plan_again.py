"""Plan rigs checked again: against another surface's target, and against a brief that knows no places across."""

from __future__ import annotations

import numpy as np
import pytest
from factories import make_brief, shape_load
from hand_plan_rigs import accept, forces, make_plan_rig, plan_brief, pressure, surface
from hand_rigs import make_rig

from rigdesign.checks import check, recheck
from rigdesign.checks.text import NOT_PROVEN
from rigdesign.errors import InputError
from rigdesign.pads.surface.shares import tributary_shares

X = np.array([0.52, 0.61, 1.43, 1.66, 2.71, 2.93])
Y = np.array([-0.21, 0.33, -0.36, 0.17, -0.52, -0.29])
FORCE = np.array([700.0, 640.0, 450.0, 380.0, 260.0, 150.0])
GROUP = ((1, 2), (3, 4, (5, 6)))


def test_another_target_scales_the_jack_and_takes_its_own_shares_and_bands():
    rig = make_plan_rig(X, Y, FORCE, group=GROUP)
    other = plan_brief(
        surface(cut="square to axis"), loads=(pressure(400.0, 0.0, -300.0),), acceptance=accept(across=0.1)
    )
    found = recheck(rig, other)
    target = found.rig.plan.target
    assert found.statics.pad_force == pytest.approx(FORCE * target.net.total / FORCE.sum())
    assert found.rig.plan.share == pytest.approx(tributary_shares(target, X, Y))
    assert found.rig.plan.proof.method == NOT_PROVEN
    # no drilling lies between the plan's places and these: the plan's use is the rig's, across included
    assert found.rig.plan.proof.band_use == pytest.approx(found.band_use, rel=1e-12)
    assert found.band_use == max(row.use for row in found.regions if row.use is not None)
    assert not any("drill step" in finding.text for finding in found.findings if finding.stage == "practice")


def test_the_plan_s_own_use_counts_what_is_cut_across():
    rig = make_plan_rig(X, Y, FORCE, group=GROUP)
    other = plan_brief(acceptance=accept(9.0, 9.0, None, across=0.01))
    found = recheck(rig, other)
    assert found.rig.plan.proof.band_use == pytest.approx(found.across.use("moment across").max()) or (
        found.rig.plan.proof.band_use == pytest.approx(found.across.use("shear across").max())
    )


def test_a_plan_rig_cannot_be_checked_against_a_brief_without_an_outline():
    with pytest.raises(InputError, match=r"rig, pad 5: .* without an outline: y = −0.520 m .*outline in the brief"):
        recheck(make_plan_rig(X, Y, FORCE, group=GROUP), make_brief())
    # on the line it can
    flat = make_plan_rig(X, 0 * X, FORCE, group=((1, 2), ((3, 4), (5, 6))))
    assert recheck(flat, make_brief(loads=(shape_load(total=2000.0),))).errors.keys() == {"shear", "moment"}


def test_a_line_rig_against_a_surface_is_judged_for_torsion():
    found = recheck(
        make_rig([0.9, 2.1], [3000.0, 2400.0]), plan_brief(loads=(forces([0.9, 2.1], [0.1, 0.1], [300.0, 240.0]),))
    )
    # the pads pull on y = 0, the load acts 0.1 m beside it
    assert found.torsion_error_peak > 0.1
    assert check(found.rig).band_use == found.band_use
