"""How long things take: measured and printed, never asserted.  Run with ``pytest -m bench -s tests/bench``.

Times are the best of three, of whole processes where a person would wait for a process.
"""

from __future__ import annotations

import subprocess
import sys
import time

import numpy as np
import pytest
from factories import make_acceptance, make_brief, make_levers, make_pads, shape_load
from journey import ROOT

from rigdesign.chain import arrange
from rigdesign.checks import check
from rigdesign.findings import Refusal

pytestmark = pytest.mark.bench

BRIEF = ROOT / "demo_rigs" / "cutter_rudder" / "brief.toml"
IMPORTS = "import numpy, scipy.optimize, networkx, shapely, matplotlib.pyplot"
COMMAND = "import sys; from rigdesign.command import run; sys.exit(run(sys.argv[1:]))"


def best_of_three(work) -> float:
    """Seconds of the fastest of three runs."""
    times = []
    for _ in range(3):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


def process(folder, *arguments):
    """A run of a Python process."""

    def work():
        subprocess.run([sys.executable, *map(str, arguments)], check=True, capture_output=True, cwd=folder)

    return work


def test_the_whole_command_against_its_imports(tmp_path):
    imports = best_of_three(process(tmp_path, "-c", IMPORTS))
    print(f"\na process that imports numpy, scipy.optimize, networkx, shapely, matplotlib.pyplot: {imports:.2f} s")
    arguments = ["-c", COMMAND, "design", BRIEF, "--out", "rig", "--replace"]
    for name, more in (("without figures", ["--no-figures"]), ("with figures", []), ("with PNG as well", ["--png"])):
        seconds = best_of_three(process(tmp_path, *arguments, *more))
        print(f"design of 12 pads {name}: {seconds:.2f} s, {seconds / imports:.2f} times the imports")


@pytest.mark.parametrize("n_pads", [12, 25, 50, 100, 200, 500])
def test_a_design_of_many_pads(n_pads):
    levers = make_levers(drill_step=1e-4)
    pads = make_pads(count=n_pads, length=0.0, gap=0.0)
    bands = make_acceptance(shear=None)
    brief = make_brief(pads=pads, levers=levers, acceptance=bands, loads=(shape_load("parabolic", 54_000.0),))
    start = time.perf_counter()
    answer = arrange(brief)
    seconds = time.perf_counter() - start
    words = answer.text if isinstance(answer, Refusal) else f"band use {answer.band_use:.4f}"
    print(f"\n{n_pads} pads arranged and checked: {seconds:.2f} s ({words})")


@pytest.mark.parametrize(("n_points", "n_pads"), [(40, 12), (80, 24)])
@pytest.mark.parametrize("bands", [(0.02, None), (0.02, 0.12), (0.002, 0.06)], ids=["moment", "loose", "tight"])
def test_a_proof_over_hard_points(n_points, n_pads, bands):
    from rigdesign.pads import plan_pads
    from rigdesign.target import build_target

    for seed in (1, 2, 3):
        gaps = np.random.default_rng(seed).uniform(0.2, 1.8, n_points + 1)
        places = 0.2 + np.cumsum(gaps)[:-1] / gaps.sum() * 3.2
        pads = make_pads(count=n_pads, places="hard points", stations=places, length=0.0, gap=0.0)
        target = build_target(make_brief(pads=pads, acceptance=make_acceptance(*bands)))
        start = time.perf_counter()
        plan = plan_pads(target)
        seconds = time.perf_counter() - start
        print(f"\n{n_pads} of {n_points} hard points, seed {seed}: {seconds:.2f} s, gap {100 * plan.proof.gap:.3f} %")


def test_a_check_of_two_thousand_pads():
    rig = big_rig(2000)
    seconds = best_of_three(lambda: check(rig))
    result = check(rig)
    print(f"\ncheck of {rig.pad_x.size} pads at {result.curves.x.size} stations: {seconds:.2f} s")


def big_rig(n_pads: int):
    """A rig of many equal pads under uniform load, levers by halves."""
    from rigdesign.levers import Hole, Jack, Piece, Rig, Tree
    from rigdesign.pads.model import PadPlan, Proof
    from rigdesign.target import build_target

    target = build_target(make_brief(loads=(shape_load("uniform", 5400.0),), pads=make_pads(count=n_pads)))
    edges = np.linspace(0.2, 3.4, n_pads + 1)
    x = (edges[1:] + edges[:-1]) / 2
    force = np.full(n_pads, 5400.0 / n_pads)
    proof = Proof(1.0, 0.0, 0.0, "nothing", "nothing", 0.0, 0.0, 1.0)
    plan = PadPlan(target, x, 0 * x, force, force, 1.8, 0.0, True, proof, ())
    pieces, level, tier = [], [(0, n_pads, "jack 1")], 1
    while level:
        below = []
        for low, high, parent in level:
            if high - low == 1:
                continue
            number = len(pieces) + 1
            middle = (low + high) // 2
            pivot, ends = x[low:high].mean(), (x[low:middle].mean(), x[middle:high].mean())
            pieces.append((number, tier, parent, pivot, ends, (low, middle, high)))
            below += [(low, middle, f"lever {number}"), (middle, high, f"lever {number}")]
        level, tier = below, tier + 1
    names = {(p[5][0], p[5][2]): f"lever {p[0]}" for p in pieces} | {(k, k + 1): f"pad {k + 1}" for k in range(n_pads)}
    built = tuple(
        Piece(number, "lever", tier, parent, (
            Hole("pivot", parent, 0.0, 0.0, pivot, 0.0),
            Hole("A", names[(low, middle)], ends[0] - pivot, 0.0, ends[0], 0.0),
            Hole("B", names[(middle, high)], ends[1] - pivot, 0.0, ends[1], 0.0),
        ))
        for number, tier, parent, pivot, ends, (low, middle, high) in pieces
    )  # fmt: skip
    return Rig(plan, x, np.zeros(n_pads), (Tree(Jack(1, 1.8, 0.0, "lever 1"), 5400.0, built),), "by halves", ())
