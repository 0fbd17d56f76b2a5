"""Hardware: seconds of building, checking and drawing it, and the largest memory of a process that does all of it.

Measured and printed, never asserted.  Run with ``pytest -m bench -s tests/bench/test_bench_hardware.py``.  Each rig has
a process of its own, so that memory is its own; forces and spacing of the pads are the same for every number of them.
"""

from __future__ import annotations

import subprocess
import sys
from itertools import pairwise

import pytest
from factories import make_brief, make_hardware, make_levers, make_pads, make_specimen, shape_load
from journey import ROOT

pytestmark = pytest.mark.bench

SPACING = 0.12
"""Span over the number of pads [m]."""

FORCE = 200.0
"""Total over the number of pads [N]; the catalogue's sections bear that, in bars of 24 m, up to 200 pads."""

PATHS = "import sys; sys.path[:0] = ['tests', 'tests/bench']"
WORK = f"{PATHS}; from test_bench_hardware import measure; measure(int(sys.argv[1]))"


def brief_of(count: int):
    """A cantilever with an elliptical load and so many free pads."""
    span = SPACING * count
    return make_brief(
        specimen=make_specimen(left=0.0, right=span),
        pads=make_pads(count=count, length=0.05, gap=0.01),
        loads=(shape_load(total=FORCE * count, start_x=0.0, end_x=span),),
        levers=make_levers(shortest_arm=0.03),
        hardware=make_hardware(bar=24.0, deflection=0.02),
    )


def measure(count: int) -> None:
    """Print seconds of each part and the largest memory of this process."""
    import resource
    import time

    from rigdesign.chain import arrange_target
    from rigdesign.checks.hardware import check_hardware
    from rigdesign.hardware import build_hardware, stock_line
    from rigdesign.report.sheets import drawings_pdf
    from rigdesign.target import build_target

    brief = brief_of(count)
    laps = [time.perf_counter()]
    arranged = arrange_target(build_target(brief), None, stock_line(brief))
    laps.append(time.perf_counter())
    hardware = build_hardware(arranged.rig)
    laps.append(time.perf_counter())
    result = check_hardware(arranged, hardware)
    laps.append(time.perf_counter())
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    pdf = drawings_pdf(result)
    laps.append(time.perf_counter())
    drawn = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    arranging, building, checking, drawing = (after - before for before, after in pairwise(laps))
    print(
        f"{count} pads: arranged {arranging:.2f} s, hardware {building:.2f} s, its check {checking:.2f} s "
        f"({memory:.0f} MB), {pdf.count(b'/Type /Page ')} sheets {drawing:.1f} s ({drawn:.0f} MB); "
        f"{'accepted' if result.accepted else 'not accepted'}, utilisation {result.utilisation:.3f}, "
        f"{len(hardware.shortfalls)} shortfalls"
    )


@pytest.mark.parametrize("count", [12, 40, 200])
def test_hardware_of_many_pads(count):
    ended = subprocess.run([sys.executable, "-c", WORK, str(count)], capture_output=True, text=True, cwd=ROOT)
    assert ended.returncode == 0, ended.stderr
    print(f"\n{ended.stdout.strip()}")
