"""Lateral-torsional buckling and warping against solutions that share no formula with the rules.

Sources
-------
The differential equation of a bar under an even moment, E Iw φ'''' − G It φ'' − (M²/E Iz) φ = 0 with φ = φ'' = 0 at its
ends (Timoshenko & Gere, Theory of Elastic Stability), as an eigenvalue problem in finite differences.
sectionproperties, a finite-element library for cross sections: the warping constant of a channel.
"""

from __future__ import annotations

import numpy as np
import pytest
from rule_states import make_channel, make_flat
from sectionproperties.analysis import Section as MeshedSection
from sectionproperties.pre.library import channel_section

from rigdesign.hardware.rules.common import channel_warping
from rigdesign.hardware.rules.en.bars import critical_moment

E = 210e9
G = E / 2.6


def least_moment(Iz: float, It: float, Iw: float, L: float) -> float:
    """Least M of the differential equation, 200 points."""
    n = 200
    step = L / (n + 1)
    second = (np.diag(np.full(n, -2.0)) + np.diag(np.ones(n - 1), 1) + np.diag(np.ones(n - 1), -1)) / step**2
    stiffness = E * Iw * second @ second - G * It * second
    return float(np.sqrt(E * Iz * np.linalg.eigvalsh(stiffness)[0]))


@pytest.mark.parametrize("length", [0.4, 1.1, 2.7])
@pytest.mark.parametrize("section", [make_flat(), make_channel()])
def test_critical_moment(section, length):
    """Finite differences of second order on 200 points: 2e-4 at most."""
    warping = channel_warping(section) if section.kind == "channel" else 0.0
    ours = critical_moment(E, section.inertia_weak, section.torsion, warping, length)
    assert ours == pytest.approx(least_moment(section.inertia_weak, section.torsion, warping, length), rel=2e-4)


def test_warping_of_a_channel():
    """The formula is of thin walls, the mesh of the true section, and the walls here are thin: 0.3 %."""
    section = make_channel(depth=0.160, width=0.060, web=0.0015, flange=0.0025)
    shape = channel_section(d=160, b=60, t_f=2.5, t_w=1.5, r=0, n_r=2)
    mesh = MeshedSection(shape.create_mesh(mesh_sizes=[3]))
    mesh.calculate_geometric_properties()
    mesh.calculate_warping_properties()
    assert channel_warping(section) == pytest.approx(mesh.get_gamma() * 1e-18, rel=0.003)
