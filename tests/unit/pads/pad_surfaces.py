"""Briefs of surfaces for tests of pads in plan."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from factories import array, make_brief, make_pads, make_specimen
from numpy.typing import ArrayLike

from rigdesign.brief.model import Brief, Line, Outline


def line(*points: tuple[float, float]) -> Line:
    return Line(array([x for x, _ in points]), array([y for _, y in points]))


def outline(*points: tuple[float, float]) -> Outline:
    return Outline(array([x for x, _ in points]), array([y for _, y in points]))


def surface_brief(shape: Outline, axis: Line | None = None, **changes: Any) -> Brief:
    """A cantilevered surface from the least to the greatest x of its outline; `pads` changes `make_pads`."""
    specimen = replace(make_specimen(left=float(shape.x.min()), right=float(shape.x.max())), outline=shape, axis=axis)
    pads = pad_rules(**changes.pop("pads", {}))
    return make_brief(specimen=specimen, pads=pads, **changes)


def pad_rules(**changes: Any):  # type: ignore[no-untyped-def]
    """`make_pads` with the fields of surfaces as well."""
    own = {key: changes.pop(key) for key in ("y", "turn", "turns", "rows", "edge", "keep_out_areas") if key in changes}
    return replace(make_pads(**changes), **own)


def hard_points(x: ArrayLike, y: ArrayLike, **changes: Any) -> dict[str, Any]:
    """Changes of pad rules for hard points at x, y [m]."""
    return {"places": "hard points", "stations": array(x), "y": array(y), **changes}
