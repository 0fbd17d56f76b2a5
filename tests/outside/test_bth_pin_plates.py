"""Pin-connected plates of ASME BTH-1, 3-3.3, against published calculation sheets.

Sources
-------
Lug A, lug B: worked examples of 3-3.3, inch and kip, Fy 36 ksi, Fu 58 ksi, as quoted in published calculation sheets;
lug B is "Lifting Lug Design Per ASME BTH-1-2005" (scribd document 339233703).
Lug C: "Lifting Lug Design Per ASME BTH-1-2005" (scribd document 355418702), the lines headed "Pin Diameter Effect",
which follow D. Duerr, Practice Periodical on Structural Design and Construction 13 (2008) 53-58, and became part of
later editions of the standard.

The sheet of lug B gives Pv = 145.46 kip without the later edition's angle φ = 55° Dp/Dh: that one number is not held.
"""

from __future__ import annotations

import pytest

from rigdesign.hardware.model import Material
from rigdesign.hardware.rules.bth.pins import (
    bearing,
    effective_width,
    fracture,
    net_tension,
    strength_reduction,
    tear_out,
)
from rigdesign.hardware.rules.model import PlateHole
from rigdesign.words import INCH, POUND_FORCE

KIP = 1000 * POUND_FORCE
KSI = KIP / INCH**2
A36 = Material("A36", (1.0,), (36 * KSI,), (58 * KSI,), 29000 * KSI, 7850.0, "as the sheets give it")

LUGS = {
    # thickness, pin, hole, be, a, R [in], and whether the edge is round
    "A": (0.75, 0.75, 0.875, 1.0625, 1.0625, 1.5, True),
    "B": (1.25, 2.75, 3.0, 3.0, 3.0, 4.5, False),
    "C": (0.75, 1.375, 1.6875, 1.66, 3.3125, 4.15625, True),
}


def lug(name: str) -> PlateHole:
    """A lug of the sheets, in SI."""
    *sizes, round_edge = LUGS[name]
    thickness, pin, hole, side, beyond, radius = (size * INCH for size in sizes)
    return PlateHole(10 * KIP, 1, thickness, A36, pin, hole, side, beyond, radius, round_edge)


def working(result, symbol):
    return next(value for name, value, _ in result.working if name == symbol)


@pytest.mark.parametrize(
    ("name", "Nd", "check", "kips", "rounding"),
    [
        ("A", 3.0, net_tension, 19.3343, 1e-4),
        ("A", 3.0, fracture, 17.0312, 1e-4),
        ("B", 2.0, net_tension, 175.21, 0.005),
        ("B", 2.0, fracture, 144.09, 0.005),
        ("B", 2.0, bearing, 77.34, 0.005),
        ("C", 2.0, net_tension, 49.30, 0.005),
        ("C", 2.0, fracture, 68.76, 0.005),
        ("C", 2.0, tear_out, 88.41, 0.005),
        ("C", 2.0, bearing, 23.20, 0.005),
    ],
)
def test_allowable_loads(name, Nd, check, kips, rounding):
    """To the last digit that the sheet prints."""
    result = check(lug(name), Nd)
    assert result.limit / KIP == pytest.approx(kips, abs=rounding + 1e-9)
    assert result.utilisation == pytest.approx(10 / kips, rel=5e-4)


def test_what_stands_between():
    """Cr, b_eff, φ and Z' of the sheets."""
    assert strength_reduction(0.75, 0.875) == pytest.approx(0.8583533, abs=5e-8)
    assert strength_reduction(2.75, 3.0) == 1.0
    assert strength_reduction(1.375, 1.6875) == pytest.approx(0.841, abs=5e-4)
    assert effective_width(1.0625, 0.75, 0.875, 36.0, 58.0) == pytest.approx(0.9321, abs=5e-5)
    assert effective_width(1.66, 0.75, 1.6875, 36.0, 58.0) == pytest.approx(1.62, abs=5e-3)
    assert working(tear_out(lug("A"), 3.0), "φ") == pytest.approx(47.142857, abs=5e-7)
    third = tear_out(lug("C"), 2.0)
    assert working(third, "φ") == pytest.approx(44.815, abs=5e-4)
    assert working(third, "Z'") / INCH == pytest.approx(0.028, abs=5e-4)
    assert working(third, "Av") / INCH**2 == pytest.approx(5.23, abs=5e-3)
