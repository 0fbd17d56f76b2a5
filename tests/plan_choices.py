"""Choices of hard points on a tapered, swept surface, for tests and benches of the pads in plan.

Import with ``from plan_choices import make_choice``.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from factories import array, make_brief, make_pads, make_specimen

from rigdesign.brief.model import Acceptance, BandRule, Line, Outline, ShapeLoad
from rigdesign.pads.surface.choice_model import Choice
from rigdesign.pads.surface.given import choice_of
from rigdesign.pads.surface.refusals import jack_place_in_plan
from rigdesign.target import build_target
from rigdesign.target.model import Target

SPAN, SWEEP = 4.0, -0.3


def middle(x: np.ndarray) -> np.ndarray:
    """y of the reference axis, halfway between the edges [m]."""
    return SWEEP * x / SPAN


def places(count: int, seed: int, spars: int = 0, stagger: float = 0.0) -> tuple[np.ndarray, np.ndarray]:
    """Hard points: scattered over the surface, or on so many spars; ribs that slant by `stagger` [m per m]."""
    rng = np.random.default_rng(seed)
    if not spars:
        x = (np.arange(count) + 0.5) * SPAN / count + rng.uniform(-0.25, 0.25, count) * SPAN / count
        y = middle(x) + rng.uniform(-0.45, 0.45, count) * (1 - 0.5 * x / SPAN)
    else:
        ribs = count // spars
        rib = (np.arange(ribs) + 0.5) * SPAN / ribs + rng.uniform(-0.2, 0.2, ribs) * SPAN / ribs
        x = np.repeat(rib, spars)
        y = middle(x) + np.tile(np.linspace(-0.4, 0.4, spars), ribs) * (1 - 0.5 * x / SPAN)
        x = np.clip(x - stagger * (y - middle(x)), 0.01, SPAN - 0.01)
    order = np.lexsort((y, x))
    return x[order], y[order]


def make_target(x: np.ndarray, y: np.ndarray, count: int, **changes: object) -> Target:
    """An elliptical load ahead of the axis; bands of shear, moment and torsion by name, None for none."""
    bands = {"shear": 0.12, "moment": 0.02, "torsion": 0.05} | {
        key: value for key, value in changes.items() if key in ("shear", "moment", "torsion")
    }
    rules = tuple(
        BandRule(quantity, side, float(width), False, "peak")  # type: ignore[arg-type]
        for quantity, width in bands.items()
        if width is not None
        for side in ("under", "over")
    )
    outline = Outline(array([0.0, SPAN, SPAN, 0.0]), array([-0.5, SWEEP - 0.25, SWEEP + 0.25, 0.5]))
    axis = Line(array([0.0, SPAN]), array([0.0, SWEEP]))
    line = Line(array([0.0, SPAN]), array([0.1, SWEEP + 0.05]))
    load = ShapeLoad(
        "elliptical", 0.0, SPAN, 8000.0, None, None, 1.0, "root", array([]), array([]), 1.0, "load 1", line
    )
    pads = make_pads(
        count=count,
        places="hard points",
        stations=array(x),
        length=0.0,
        width=None,
        gap=0.0,
        keep_out=(),
        largest_force=float(changes.get("largest", np.inf)),  # type: ignore[arg-type]
        least_force=float(changes.get("least", 0.0)),  # type: ignore[arg-type]
    )
    brief = make_brief(
        specimen=replace(
            make_specimen(left=0.0, right=SPAN), outline=outline, axis=axis, cut=changes.get("cut", "square to x")
        ),
        loads=(load,),
        pads=replace(pads, y=array(y)),
        acceptance=Acceptance(rules, (), False),
    )
    return build_target(brief)


def make_choice(count: int, of: int, seed: int, spars: int = 0, stagger: float = 0.0, **changes: object) -> Choice:
    """The choice of `count` of so many places; see `places` and `make_target`."""
    x, y = places(of, seed, spars, stagger)
    target = make_target(x, y, count, **changes)
    return choice_of(target, jack_place_in_plan(target), x, y, count)
