"""One wing described four ways ends in one rig.

Source: the closed forms of the wing in four_ways.py, of which pressure map, running load with its line, table of V, M
and T, and running load with torque are descriptions.  V, M and T of all of them agree within 0.1 % of peak; where the
best choice among hard points is well apart from the next one, the pads are the same.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from factories import array, band_rules, make_levers
from four_ways import AXES, SPAN, by_line, by_pressure, by_table, by_torque

from rigdesign.brief.model import Acceptance
from rigdesign.chain import arrange_target
from rigdesign.checks.model import Check
from rigdesign.target import Target, build_target

WAYS = {"line": by_line, "pressure": by_pressure, "table": by_table, "torque": by_torque}
RIBS, BEHIND = (0.3, 0.75, 1.2, 1.7, 2.2, 2.7), (0.15, 0.45)


def asked(described: Target) -> Target:
    """The target with six pads wanted at crossings of two spars and six ribs."""
    brief = described.brief
    x, behind = np.repeat(RIBS, 2), np.tile(BEHIND, 6)
    y = 0.3 - 0.2 * x - 0.8 * behind
    order = np.lexsort((y, x))
    pads = replace(
        brief.pads,
        count=6,
        places="hard points",
        stations=array(x[order]),
        y=array(y[order]),
        width=0.06,
        least_force=60.0,
    )
    rules = band_rules("moment", 0.04, 0.04) + band_rules("torsion", 0.1, 0.1)
    return build_target(
        replace(
            brief, pads=pads, acceptance=Acceptance(rules, (), defaulted=False), levers=make_levers(ratio_limit=20.0)
        )
    )


@pytest.fixture(scope="module")
def rigs() -> dict[str, Check]:
    found = {name: arrange_target(asked(way(AXES["kinked"]))) for name, way in WAYS.items()}
    assert all(isinstance(check, Check) for check in found.values())
    return found  # type: ignore[return-value]


def test_targets_agree_to_a_thousandth_of_the_peak(rigs):
    reference = rigs["line"].rig.plan.target
    x = np.linspace(0.0, SPAN, 97)
    for check in rigs.values():
        for quantity in ("shear", "moment", "torsion"):
            off = check.rig.plan.target.value(quantity, x, "outboard") - reference.value(quantity, x, "outboard")
            assert np.abs(off).max() <= 1e-3 * reference.peaks[quantity].value


@pytest.mark.parametrize("name", ["pressure", "table", "torque"])
def test_the_same_pads_with_the_same_band_use(rigs, name):
    """Forces are evened towards shares, and where a load stands in plan is what the descriptions differ in."""
    one, other = rigs["line"].rig.plan, rigs[name].rig.plan
    assert np.column_stack([other.x, other.y]) == pytest.approx(np.column_stack([one.x, one.y]), abs=1e-12)
    # a thousandth of the peak is a fortieth of the narrowest band; the targets agree far better
    assert other.proof.band_use_found == pytest.approx(one.proof.band_use_found, rel=2e-3)
    assert len(set(one.y - 0.3 + 0.2 * one.x)) > 1
