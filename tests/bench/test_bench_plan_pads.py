"""Measured, not asserted: choosing hard points in plan, its time, gap and method."""

from __future__ import annotations

import time

import pytest
from plan_choices import make_target, places

from rigdesign.findings import Refusal
from rigdesign.pads import plan_pads

pytestmark = pytest.mark.bench

BANDS = {
    "loose": {"shear": 0.12, "moment": 0.02, "torsion": 0.05},
    "tight": {"shear": 0.05, "moment": 0.005, "torsion": 0.02},
    "no shear": {"shear": None, "moment": 0.02, "torsion": 0.05},
}
KINDS = {"scattered": (0, 0.0), "4 spars": (4, 0.0), "4 spars, slanting ribs": (4, 0.25), "8 spars": (8, 0.0)}


@pytest.mark.parametrize("seed", [1, 2, 3])
@pytest.mark.parametrize("bands", BANDS)
@pytest.mark.parametrize("kind", KINDS)
def test_16_of_40(kind: str, bands: str, seed: int, capsys: pytest.CaptureFixture[str]) -> None:
    measured(16, 40, kind, bands, seed, capsys)


@pytest.mark.parametrize("bands", ["loose", "tight"])
@pytest.mark.parametrize("kind", KINDS)
def test_64_of_400(kind: str, bands: str, capsys: pytest.CaptureFixture[str]) -> None:
    measured(64, 400, kind, bands, 1, capsys)


def measured(count: int, of: int, kind: str, bands: str, seed: int, capsys: pytest.CaptureFixture[str]) -> None:
    """Plan the pads and say what came of it."""
    x, y = places(of, seed, *KINDS[kind])
    target = make_target(x, y, count, **BANDS[bands])
    start = time.perf_counter()
    plan = plan_pads(target)
    taken = time.perf_counter() - start
    with capsys.disabled():
        if isinstance(plan, Refusal):
            print(f"\n{count} of {of}, {kind}, {bands}, seed {seed}: {plan.text}")
            return
        proof = plan.proof
        print(f"\n{count} of {of}, {kind}, {bands}, seed {seed}: {taken:.1f} s, band use {proof.band_use_found:.4f}, "
              f"gap {100 * proof.gap:.2f} %; {proof.method}")  # fmt: skip
