"""Pin-connected plates, bars and struts of AISC 360 against published design examples.

Sources
-------
AISC Design Examples, Example D.7: plate 1/2 × 4 1/4 in of A36 with a pin of 1 in: tension rupture 93.4 kip, shear
rupture 95.7, bearing 32.4 (governs), available 16.2 (allowable strength design).
AISC Design Examples, Example F.11: bar 5 × 3 in of A36, Mp = 56.25 kip·ft, available 33.7 (from memory).
AISC Design Examples, Example F.2-2: channel C15×33.9 of A36, Zx 50.8 in³, braced every 5 ft: Mp 152 kip·ft, Lp 3.75 ft,
Lr 14.5 ft, Mn 145 kip·ft, available 86.6 (Zx and the bracing as a published verification quotes them; the rest from
memory).
"""

from __future__ import annotations

import pytest
from rule_states import make_flat

from rigdesign.hardware.model import Material, Section
from rigdesign.hardware.rules.aisc.bars import OMEGA, buckling, channel_moment, rectangular_bar_moment
from rigdesign.hardware.rules.aisc.pins import bearing, dishing, fracture, net_tension, tear_out
from rigdesign.hardware.rules.model import Bar, PlateHole
from rigdesign.words import INCH, POUND_FORCE

KIP = 1000 * POUND_FORCE
KSI = KIP / INCH**2
KIP_FOOT = KIP * 12 * INCH
A36 = Material("A36", (1.0,), (36 * KSI,), (58 * KSI,), 29000 * KSI, 7850.0, "as the examples give it")
PLATE = PlateHole(
    load=10 * KIP,
    count=1,
    thickness=0.5 * INCH,
    material=A36,
    pin=1.0 * INCH,
    hole=1.03 * INCH,
    side=1.61 * INCH,
    beyond=2.25 * INCH,
    radius=(2.25 + 1.03 / 2) * INCH,
    round_edge=False,
)


@pytest.mark.parametrize(("check", "nominal"), [(net_tension, 93.4), (tear_out, 95.7), (bearing, 32.4)])
def test_example_d7(check, nominal):
    """Nominal strengths to the three figures printed; Ω is 2.00 on each."""
    assert check(PLATE).limit * 2.00 / KIP == pytest.approx(nominal, abs=0.05)


def test_example_d7_bearing_governs():
    results = [check(PLATE) for check in (net_tension, tear_out, bearing, fracture, dishing)]
    worst = max(results, key=lambda result: result.utilisation)
    assert worst.check == "bearing"
    assert worst.limit / KIP == pytest.approx(16.2, abs=0.05)


def test_example_d7_extension():
    """The example finds a = 2.25 ≥ 1.33 be = 2.14 in: the steel beyond the pin does not govern over that beside it."""
    assert fracture(PLATE).limit / net_tension(PLATE).limit == pytest.approx(2.25 / (1.33 * 1.61), rel=1e-9)


def test_example_f11():
    bar = make_flat(5.0 * INCH, 3.0 * INCH)
    nominal = rectangular_bar_moment(36 * KSI, 29000 * KSI, 20 * INCH, bar.depth, bar.web)
    assert nominal / KIP_FOOT == pytest.approx(56.25, rel=1e-9)
    lever = Bar(1.0, 1.0, 1.0, bar, 1, A36, 0.0, 0.0, 0.0, 20 * INCH, 0.005)
    assert buckling(lever).limit / KIP_FOOT == pytest.approx(33.7, abs=0.05)


def test_example_f2_2():
    """With the shape's tabulated properties; rts and Cw are worked out from its sizes, hence 1 %."""
    shape = Section(
        name="C15×33.9",
        kind="channel",
        depth=15.0 * INCH,
        width=3.40 * INCH,
        web=0.400 * INCH,
        flange=0.650 * INCH,
        area=10.0 * INCH**2,
        inertia=315 * INCH**4,
        inertia_weak=8.07 * INCH**4,
        torsion=1.01 * INCH**4,
        modulus=42.0 * INCH**3,
        plastic=50.8 * INCH**3,
        mass=50.4,
        bar=6.0,
        source="AISC Manual (from memory)",
    )

    def moment(feet):
        return channel_moment(36 * KSI, 29000 * KSI, feet * 12 * INCH, shape) / KIP_FOOT

    assert moment(3.7) == pytest.approx(152, abs=0.5)
    assert moment(5.0) == pytest.approx(145, rel=0.01)
    assert moment(5.0) / OMEGA == pytest.approx(86.6, rel=0.01)
    assert moment(14.5) == pytest.approx(0.7 * 36 * 42.0 / 12, rel=0.01)
