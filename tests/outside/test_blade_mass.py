"""A blade's distributed mass: the specimen's weight, and inertia in proportion to it.

Source
------
Jonkman, J., Butterfield, S., Musial, W. and Scott, G., *Definition of a 5-MW Reference Wind Turbine for Offshore System
Development*, NREL/TP-500-38060 (2009).  Table 2-1, distributed blade structural properties: data/blade_5mw.csv (49
stations, radius from 1.5 m, length 61.5 m).  Table 2-2, undistributed ones: mass 17 740 kg and second moment about the
root 11 776 047 kg·m²; first moment 363 231 kg·m and centre of mass 20.475 m are quoted from memory and not asserted.
The source scales the table by 1.04536 to reach its mass.

The integrals of the straight-line interpolant were computed independently of this project: 17 608.830 kg,
361 351.70 kg·m about the root, and 11 695 850.0 kg·m².
"""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from factories import inertia_load, make_brief, make_specimen, make_weight

from rigdesign.target import build_target
from rigdesign.target.loads import mass_curve

GRAVITY = 9.80665
FACTOR = 1.04536
ROOT = 1.5
PUBLISHED_MASS = 17_740.0
MASS, FIRST, SECOND = 17_608.830, 361_351.70, 11_695_850.0


@pytest.fixture(scope="module")
def blade():
    data = np.loadtxt(Path(__file__).parent / "data" / "blade_5mw.csv", delimiter=",", skiprows=1)
    assert data.shape == (49, 6)
    weight = make_weight(data[:, 1], FACTOR * data[:, 2])
    return make_specimen(left=ROOT, right=63.0, weight=weight)


def test_mass_and_first_moment(blade):
    mass = mass_curve(blade.weight)
    assert mass.total == pytest.approx(MASS, abs=5e-4)  # the digits that were computed
    assert mass.first_moment - ROOT * mass.total == pytest.approx(FIRST, abs=5e-3)
    # The source's own sum differs: it integrates its table in its own way.
    assert mass.total == pytest.approx(PUBLISHED_MASS, rel=0.0075)


def test_second_moment(blade):
    """∫ m r² dx = 2 ∫ (first moment beyond x) dx, which integrates the curve once more."""
    mass = mass_curve(blade.weight)
    node, factor = np.polynomial.legendre.leggauss(3)  # exact for the cubics between rows
    a, b = mass.breaks[:-1, None], mass.breaks[1:, None]
    x = (a + b) / 2 + (b - a) / 2 * node
    beyond = mass.moment_beyond(x.ravel()).reshape(x.shape)
    second = 2 * float((beyond * factor * (b - a) / 2).sum())
    assert second == pytest.approx(SECOND, abs=0.1)  # the digits that were computed
    # and by the closed form of ∫ m r² over a straight piece from r, p to s, q
    r, p, s, q = (c[k] for k in (slice(-1), slice(1, None)) for c in (blade.weight.x - ROOT, blade.weight.mass))
    pieces = (s - r) / 12 * (p * (3 * r**2 + 2 * r * s + s**2) + q * (r**2 + 2 * r * s + 3 * s**2))
    assert second == pytest.approx(float(pieces.sum()), rel=1e-12)


def test_gravity_and_inertia_are_multiples_of_it(blade):
    target = build_target(make_brief(specimen=blade, loads=(inertia_load(-3.8, times=1.5),)))
    assert target.resultant == pytest.approx(-3.8 * 1.5 * GRAVITY * MASS, rel=1e-7)
    assert target.gravity.total == pytest.approx(-GRAVITY * MASS, rel=1e-7)
    assert target.net.total == pytest.approx(-4.7 * GRAVITY * MASS, rel=1e-7)
    root = np.array([ROOT])
    assert target.moment(root)[0] == pytest.approx(-5.7 * GRAVITY * FIRST, rel=1e-7)
    assert target.net.moment_beyond(root)[0] == pytest.approx(-4.7 * GRAVITY * FIRST, rel=1e-7)
