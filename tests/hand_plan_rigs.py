"""Plan rigs put together by hand: surfaces, pads in plan, trees with levers in any direction and three-point plates.

Import with ``from hand_plan_rigs import make_plan_rig``.  Pivots stand at the centres of what they carry, so that the
pads carry the forces asked for.
"""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import numpy as np
from factories import array, band_rules, make_brief, make_pads, make_specimen, shape_load
from hand_rigs import Group, halves
from numpy.typing import ArrayLike

from rigdesign.brief.model import Acceptance, Brief, Line, Outline, PointLoads, PressureLoad, ShapeLoad, Specimen
from rigdesign.levers.model import Hole, Jack, Piece, Rig, Tree
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.target import build_target
from rigdesign.target.model import Target

CORNERS = ((0.2, -0.5), (3.4, -0.75), (3.4, -0.15), (0.2, 0.6))
"""The default outline: a swept wing from 0.2 m to 3.4 m, 1.1 m wide at the root and 0.6 m at the tip."""


def line(*points: tuple[float, float]) -> Line:
    """A line in plan through points."""
    return Line(array([x for x, _ in points]), array([y for _, y in points]))


def outline(corners: ArrayLike = CORNERS, name: str = "planform.csv") -> Outline:
    """An outline through its corners, counter-clockwise."""
    places = np.asarray(corners, dtype=float)
    return Outline(array(places[:, 0]), array(places[:, 1]), name)


def surface(**changes: Any) -> Specimen:
    """A swept wing held at its root, its reference axis from y = 0.05 m at the root to −0.40 m at the tip."""
    fields: dict[str, Any] = {"outline": outline(), "axis": line((0.2, 0.05), (3.4, -0.40))}
    return replace(make_specimen(), **{**fields, **changes})


def panel(**changes: Any) -> Specimen:
    """A rectangle from 0 to 2 m, 1.2 m wide about y = 0.1 m, on two supports."""
    fields: dict[str, Any] = {
        "support": "two supports", "left": 0.0, "right": 2.0, "supports": (0.1, 1.8),
        "outline": outline(((0.0, -0.5), (2.0, -0.5), (2.0, 0.7), (0.0, 0.7))), "axis": None,
    }  # fmt: skip
    return replace(make_specimen(), **{**fields, **changes})


def pressure(value: float = 1000.0, slope_x: float = 0.0, slope_y: float = 0.0, times: float = 1.0) -> PressureLoad:
    """A pressure [Pa] that is linear all over, given at the corners of a large rectangle."""
    x, y = np.array([-1.0, 5.0, -1.0, 5.0]), np.array([-3.0, -3.0, 3.0, 3.0])
    load = value + slope_x * x + slope_y * y
    return PressureLoad(array(x), array(y), array(load), times, "piece.toml, [[load]] pressure")


def forces(x: ArrayLike, y: ArrayLike, force: ArrayLike, times: float = 1.0) -> PointLoads:
    """Point loads in plan [N]."""
    columns = (array(np.atleast_1d(np.asarray(column, dtype=float))) for column in (x, force, y))
    at, value, across = columns
    return PointLoads(at, value, times, "piece.toml, [[load]] forces", across)


def accept(moment: float = 0.02, shear: float = 0.12, torsion: float | None = 0.05, **more: Any) -> Acceptance:
    """Bands of the peak on a surface; `across`, `share` and `regions` by name."""
    across, share, regions = more.get("across"), more.get("share"), more.get("regions", ())
    rules = band_rules("moment", moment, moment) + band_rules("shear", shear, shear)
    rules += band_rules("torsion", torsion, torsion) if torsion is not None else ()
    for quantity in ("shear across", "moment across") if across is not None else ():
        rules += band_rules(quantity, across, across)
    return Acceptance(rules, regions, defaulted=False, share=share)


def plan_brief(specimen: Specimen | None = None, **changes: Any) -> Brief:
    """A brief for a surface: a linear pressure, pads of 120 × 80 mm at fixed places."""
    fields: dict[str, Any] = {
        "specimen": specimen if specimen is not None else surface(),
        "loads": (pressure(900.0, -150.0, 200.0),),
        "pads": make_pads(width=0.08, places="fixed"),
        "acceptance": accept(),
    }
    brief = make_brief(**{**fields, **changes})
    return brief if "levers" in changes else replace(brief, levers=replace(brief.levers, plates=True, clearance=0.03))


def plan_tree(x: ArrayLike, y: ArrayLike, force: ArrayLike, group: Group | None = None) -> Tree:
    """A tree whose levers (groups of two) and plates (groups of three) hand pads these forces.

    Ends are in the order of the group but for plates, which go counter-clockwise.
    """
    x, y, force = (np.asarray(column, dtype=float) for column in (x, y, force))
    pieces: list[Any] = []

    def hang(group: Group, parent: str, tier: int) -> tuple[str, np.ndarray, float]:
        if isinstance(group, int):
            return f"pad {group}", np.array([x[group - 1], y[group - 1]]), float(force[group - 1])
        place = len(pieces)
        pieces.append(None)
        ends = [hang(part, f"lever {place + 1}", tier + 1) for part in group]
        load = sum(f for _, _, f in ends)
        pivot = sum(f * at for _, at, f in ends) / load
        if len(ends) == 3:
            (_, a, _), (_, b, _), (_, c, _) = ends
            if (b - a)[0] * (c - a)[1] < (b - a)[1] * (c - a)[0]:
                ends = [ends[0], ends[2], ends[1]]
        along = (ends[1][1] - ends[0][1]) / np.linalg.norm(ends[1][1] - ends[0][1])
        left = np.array([-along[1], along[0]])
        holes = [Hole("pivot", parent, 0.0, 0.0, *map(float, pivot))]
        for name, (joins, at, _) in zip("ABC", ends, strict=False):
            off = at - pivot
            holes.append(Hole(name, joins, float(off @ along), float(off @ left), *map(float, at)))
        pieces[place] = Piece(place + 1, "lever" if len(ends) == 2 else "plate", tier, parent, tuple(holes))
        return f"lever {place + 1}", pivot, load

    carries, at, total = hang(group if group is not None else halves(1, x.size), "jack 1", 1)
    return Tree(Jack(1, float(at[0]), float(at[1]), carries), total, tuple(pieces))


def make_plan_rig(
    x: ArrayLike, y: ArrayLike, force: ArrayLike, brief: Brief | None = None, group: Group | None = None,
    target: Target | None = None,
) -> Rig:  # fmt: skip
    """A rig with one tree whose pads at x, y [m] carry `force` [N], against the brief's target."""
    target = target if target is not None else build_target(brief if brief is not None else plan_brief())
    x, y, force = (np.asarray(column, dtype=float) for column in (x, y, force))
    tree = plan_tree(x, y, force, group)
    proof = Proof(0.61, 0.52, 0.0031, "a made-up proof", "no search", 0.12, 0.34, 0.6)
    jack = tree.jack
    plan = PadPlan(target, x, y, force, 1.01 * force, jack.x, jack.y, False, proof, ())
    return Rig(plan, x, y, (tree,), "by hand", ())


def line_load(total: float, at: Line | None = None, **changes: Any) -> ShapeLoad:
    """A running load along a line in plan."""
    return replace(shape_load(total=total), line=at, **changes)
