"""Plans to group and drill: made by hand, or the exact optimum of one curve."""

from __future__ import annotations

from dataclasses import fields
from typing import Any

import numpy as np
from factories import LEFT, RIGHT, make_acceptance, make_brief, make_levers, make_pads, shape_load
from numpy.typing import ArrayLike

from rigdesign.brief.model import Brief
from rigdesign.levers.model import Rig
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.pads.path import least_use_path
from rigdesign.pads.tube import build_tube
from rigdesign.target import build_target

SPAN = RIGHT - LEFT


def brief_of(count: int, shape: str = "elliptical", shear: float | None = None, **changes: Any) -> Brief:
    """A cantilever brief with small footprints; `levers`, `pads` are changes of [levers] and [pads]."""
    levers, pads = changes.pop("levers", {}), changes.pop("pads", {})
    changes.setdefault("loads", (shape_load(shape),))
    changes.setdefault("acceptance", make_acceptance(0.02, shear))
    return make_brief(
        pads=make_pads(**{"count": count, "length": 0.01, "gap": 0.0, **pads}), levers=make_levers(**levers), **changes
    )


def proof(use: float, least: float) -> Proof:
    """A proof of which only the band use and its proven least matter here."""
    values: dict[str, Any] = {field.name: "" if field.type == "str" else 0.0 for field in fields(Proof)}
    return Proof(**{**values, "band_use": use, "band_use_least": least})


def plan_by_hand(brief: Brief, x: ArrayLike, force: ArrayLike, may_move: bool = True) -> PadPlan:
    """A plan with given pads; the jack stands at their force centroid."""
    x, force = np.array(x, dtype=float), np.array(force, dtype=float)
    target = build_target(brief)
    jack_x = float((x * force).sum() / force.sum())
    return PadPlan(
        target, x, 0 * x, force, force, jack_x, 0.0, may_move, Proof(1.0, 0.0, 0.0, "", "", 0.0, 0.0, 0.0), ()
    )


def uniform_plan(brief: Brief, count: int) -> PadPlan:
    """Exact optimum of the moment for a uniform load on the default span, from its closed form.

    With the pitch s = 1/(N − 1 + 1/√2) of the span, the inner pads carry s and the least error is s²/16 (of R·L).
    """
    pitch = 1.0 / (count - 1 + 1.0 / np.sqrt(2.0))
    ends = (1.0 - (count - 2) * pitch) / 2
    force = np.full(count, pitch)
    force[[0, -1]] = ends
    x = (1.0 - (count - 1) * pitch) / 2 + pitch * np.arange(count)
    plan = plan_by_hand(brief, LEFT + SPAN * x, 5400.0 * force)
    # band of 2 % of the peak moment R·L/2
    least = (pitch**2 / 16) / (0.02 * 0.5)
    return PadPlan(
        plan.target,
        plan.x,
        plan.y,
        plan.force,
        plan.share,
        LEFT + SPAN / 2,
        0.0,
        True,
        Proof(least, least, 0.0, "", "", 0.0, 0.0, 0.0),
        (),
    )


def best_plan(brief: Brief, count: int, may_move: bool = True) -> PadPlan:
    """Exact optimum of the moment for one curve: the path of fewest links."""
    target = build_target(brief)
    tube = build_tube(target, target.net.first_moment / target.net.total, count, per_pad=400)
    path, least = least_use_path(tube, count, brief.specimen.left, brief.specimen.right)
    assert path is not None
    sign = tube.sign
    return PadPlan(
        target,
        path.x,
        0 * path.x,
        sign * path.force,
        sign * path.force,
        tube.jack_x,
        0.0,
        may_move,
        Proof(path.use, least, 0.0, "", "", 0.0, 0.0, 0.0),
        (),
    )


def arms(rig: Rig) -> tuple[np.ndarray, np.ndarray]:
    """Arms a, b [m] of the levers of a rig's one tree, from its holes."""
    pieces = rig.trees[0].pieces
    return np.array([-piece.ends[0].u for piece in pieces]), np.array([piece.ends[1].u for piece in pieces])
