"""Moment, shear and deflection of levers against a frame solver, net sections against a sum of fibres.

Sources
-------
anastruct, a general frame solver: the lever on supports at its end holes with the load at its pivot, and clamped at its
pivot with the end forces on it.  It knows no arms and no formulas of cantilevers.
The net section is summed up from a thousand fibres that know only where there is steel.
"""

from __future__ import annotations

import warnings

import numpy as np
import pytest
from rule_states import make_bar, make_channel, make_flat, make_hollow

from rigdesign.hardware.rules.bth import Bth
from rigdesign.hardware.rules.common import lever_forces, net_section

with warnings.catch_warnings():
    warnings.simplefilter("ignore")  # the solver's own imports warn of their futures
    from anastruct import SystemElements

LEVERS = [(0.6, 0.4, 8000.0), (0.21, 0.97, 1730.0), (0.345, 0.35, 41000.0)]


@pytest.mark.parametrize(("a", "b", "load"), LEVERS)
def test_forces_and_moment(a, b, load):
    frame = SystemElements()
    frame.add_element([[0, 0], [a, 0]], EI=1e6, EA=1e9)
    frame.add_element([[a, 0], [a + b, 0]], EI=1e6, EA=1e9)
    frame.add_support_hinged(1)
    frame.add_support_roll(3)
    frame.point_load(2, Fy=-load)
    frame.solve()
    ends = [abs(frame.get_node_results_system(node)["Fy"]) for node in (1, 3)]
    moment = max(abs(frame.get_element_results(1)["Mmin"]), abs(frame.get_element_results(1)["Mmax"]))
    assert lever_forces(make_bar(a=a, b=b, load=load)) == pytest.approx((*ends, moment), rel=1e-6)


@pytest.mark.parametrize(("a", "b", "load"), LEVERS)
@pytest.mark.parametrize("section", [make_flat(0.100, 0.012), make_channel(), make_hollow()])
def test_stresses_and_deflection(a, b, load, section):
    """Bending and shear stress and the larger end deflection over its arm, as the check of BTH-1 tells them."""
    count = 1 if section.kind == "hollow" else 2
    bar = make_bar(a=a, b=b, load=load, section=section, count=count)
    bending, shear, _, deflection = Bth(2.0).lever(bar)
    stiffness = count * section.inertia * 210e9
    frame = SystemElements()
    frame.add_element([[0, 0], [a, 0]], EI=stiffness, EA=1e12)
    frame.add_element([[a, 0], [a + b, 0]], EI=stiffness, EA=1e12)
    frame.add_support_fixed(2)
    frame.point_load(1, Fy=load * b / (a + b))
    frame.point_load(3, Fy=load * a / (a + b))
    frame.solve()
    first, second = (frame.get_element_results(element) for element in (1, 2))
    moment = max(abs(first["Mmin"]), abs(first["Mmax"]))
    force = max(abs(result[key]) for result in (first, second) for key in ("Qmin", "Qmax"))
    slopes = [abs(frame.get_node_results_system(node)["uy"]) / arm for node, arm in ((1, a), (3, b))]
    inertia, area = fibres(bar)
    # a thousand fibres miss the edges of hole and flange by half a fibre: 2e-3 of I at most
    assert bending.value == pytest.approx(moment * section.depth / 2 / inertia, rel=2e-3)
    assert shear.value == pytest.approx(force / area, rel=5e-3)
    assert deflection.value == pytest.approx(max(slopes), rel=1e-6)


def fibres(bar) -> tuple[float, float]:
    """I of the net section less what rounded corners differ, and the net area of the webs, from fibres.

    A fibre is as wide as the steel there.  The corners of a hollow section are known only to its table: the hole's part
    is summed up and taken from the section's own I.
    """
    section, n = bar.section, 1000
    webs = bar.count * (2 if section.kind == "hollow" else 1)
    height = (np.arange(n) + 0.5) / n * section.depth - section.depth / 2
    step = section.depth / n
    in_hole = abs(height) < bar.pivot_hole / 2
    lost = webs * section.web * float(np.sum(height[in_hole] ** 2)) * step
    in_web = abs(height) > max(bar.pivot_hole, bar.end_hole) / 2
    return bar.count * section.inertia - lost, webs * section.web * float(np.sum(in_web)) * step


@pytest.mark.parametrize("section", [make_flat(0.100, 0.012), make_channel()])
def test_net_moduli_of_whole_sections_by_fibres(section):
    """I and plastic modulus wholly from fibres, where the section has square corners."""
    bar = make_bar(section=section)
    n = 20_000
    height = (np.arange(n) + 0.5) / n * section.depth - section.depth / 2
    width = np.full(n, section.web)
    if section.kind == "channel":
        width[abs(height) > section.depth / 2 - section.flange] = section.width
    width[abs(height) < bar.pivot_hole / 2] = 0.0
    step = bar.count * section.depth / n
    inertia, modulus, plastic = net_section(bar)
    assert inertia == pytest.approx(np.sum(width * height**2) * step, rel=1e-3)
    assert plastic == pytest.approx(np.sum(width * abs(height)) * step, rel=1e-3)
    assert modulus == pytest.approx(2 * inertia / section.depth, rel=1e-12)
