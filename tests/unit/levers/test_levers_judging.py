"""The quick judge against the tube's own, which looks at every station."""

from __future__ import annotations

import numpy as np
import pytest
from factories import (
    LEFT,
    RIGHT,
    array,
    band_rules,
    make_acceptance,
    make_brief,
    make_specimen,
    make_weight,
    point_loads,
    shape_load,
    table_load,
    two_supports,
)

from rigdesign.brief.model import Region
from rigdesign.levers.judging import build_judge
from rigdesign.pads.tube import build_tube
from rigdesign.target import build_target

REGION = Region("middle", 0.9, 1.7, band_rules("moment", 0.01, 0.04, of="local"))
SLOPE = table_load([0.2, 1.0, 1.0, 3.4], [2600.0, 1900.0, 1200.0, 300.0])
CASES = {
    "elliptical, moment alone": make_brief(acceptance=make_acceptance(0.02, None)),
    "elliptical, both bands": make_brief(),
    "negative load": make_brief(loads=(shape_load("parabolic", -4000.0),)),
    "point loads": make_brief(loads=(shape_load(), point_loads([1.1, 2.0], [900.0, 400.0]))),
    "jump of the load": make_brief(loads=(SLOPE,)),
    "region with local bands": make_brief(acceptance=make_acceptance(0.02, 0.12, (REGION,))),
    "two supports": make_brief(specimen=two_supports(LEFT, 0.6, 2.9, RIGHT), loads=(SLOPE,)),
    "weight": make_brief(specimen=make_specimen(weight=make_weight(array([0.2, 3.4]), array([40.0, 5.0])))),
    "shear alone": make_brief(acceptance=make_acceptance(None, 0.12)),
}


def rigs(tube, count, rows, seed, free_moment):
    """Random rigs near strips of the load; with the tube's first moment unless it is free."""
    rng = np.random.default_rng(seed)
    cuts = np.linspace(LEFT, RIGHT, count + 1)
    x = (cuts[:-1] + cuts[1:]) / 2 + rng.normal(0, 0.02, (rows, count))
    force = np.maximum(-np.diff(np.interp(cuts, tube.x, tube.shear)), 1.0) * rng.uniform(0.9, 1.1, (rows, count))
    force *= tube.total / force.sum(axis=1, keepdims=True)
    if not free_moment:
        x += tube.jack_x - (force * x).sum(axis=1, keepdims=True) / tube.total
    return x, force


@pytest.mark.parametrize("name", CASES)
@pytest.mark.parametrize("free_moment", [False, True])
def test_agrees_with_the_tube(name, free_moment):
    """Equal to the tube's own judgement, but for interpolation between stations."""
    target = build_target(CASES[name])
    # stations six times as dense as usual, so that the tube's straight lines between them do not matter
    tube = build_tube(target, target.net.first_moment / target.net.total, 6, per_pad=600)
    x, force = rigs(tube, 6, 40, 3, free_moment)
    quick, full = build_judge(tube).use(x, force), tube.use(x, force)
    # 1 %: the places looked at between two pads are a tenth of their distance from the worst at most
    np.testing.assert_allclose(quick, full, rtol=0.01)
    # never above: 1e-4 for the interpolation
    assert np.all(quick <= full * (1 + 1e-4))


def test_displaced_jack_on_two_supports():
    """Reactions answer a jack off the resultant; both judges must say so alike."""
    target = build_target(CASES["two supports"])
    tube = build_tube(target, target.net.first_moment / target.net.total + 0.05, 5, per_pad=600)
    x, force = rigs(tube, 5, 20, 8, False)
    np.testing.assert_allclose(build_judge(tube).use(x, force), tube.use(x, force), rtol=0.01)


def test_pads_in_any_order():
    """A grouping of pads that are no neighbours may let two pads change places."""
    target = build_target(make_brief())
    tube = build_tube(target, target.net.first_moment / target.net.total, 6)
    x, force = rigs(tube, 6, 3, 4, False)
    mixed = np.array([3, 0, 5, 1, 4, 2])
    judge = build_judge(tube)
    np.testing.assert_allclose(judge.use(x[:, mixed], force[:, mixed]), judge.use(x, force), rtol=1e-12)
