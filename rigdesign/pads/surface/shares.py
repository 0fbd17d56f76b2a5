"""What of the target is nearest to each pad: its tributary share.

A pad's cell holds what is nearer to it than to any other pad.  Cells go as far as the load does, beyond the outline
too, so that the shares sum to the target.  A panel's pads are judged against their shares one by one, and even forces
are those closest to them.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from rigdesign.target.curve import Floats
from rigdesign.target.model import Target
from rigdesign.target.plan_load import PlanLoad
from rigdesign.target.plan_sum import PlanSum

if TYPE_CHECKING:
    from shapely import Geometry, Polygon

# Pads nearer to each other than this part of the span share one place, and its share.
SAME_PLACE = 1e-9
# Borders between cells are moved by this part of the span to split what lies on them.
HAIR = 1e-8
# Four steps, one into each quarter of the plan: borders along x or y are crossed to both sides evenly.
ASKEW = np.sqrt(0.5) * np.array([[1.0, 1.0], [-1.0, 1.0], [-1.0, -1.0], [1.0, -1.0]])


def tributary_shares(target: Target, x: Floats, y: Floats) -> Floats:
    """Return the net target's own load nearest to each of the pads at x, y (n,) [m], (n,) [N].

    What lies half-way between pads, a line load between two rows say, is split between them.  On a line rig the load
    is split half-way between neighbours.  Pads at one place share its part evenly.
    """
    places, which, pads_there = _distinct(target, x, y)
    own = _of_cells(target, places) if target.brief.specimen.is_surface else _along_line(target, places[:, 0])
    return np.asarray((own / pads_there)[which])


def cells(target: Target, x: Floats, y: Floats) -> list[Geometry]:
    """Return the part of the outline nearest to each of the pads at x, y (n,) [m]: polygons, or several of them.

    A pad whose place another has taken has the same cell; a pad far off the outline may have an empty one.
    """
    import shapely

    outline = target.brief.specimen.outline
    assert outline is not None
    places, which, _ = _distinct(target, x, y)
    own = shapely.intersection(np.array(_nearest_areas(target, places), dtype=object), outline.polygon)
    return [own[k] for k in which]


def _distinct(target: Target, x: Floats, y: Floats) -> tuple[Floats, NDArray[np.intp], Floats]:
    """Distinct places (k, 2), which of them each pad stands at (n,), and how many stand at each (k,)."""
    near = SAME_PLACE * (target.brief.specimen.right - target.brief.specimen.left)
    away = np.hypot(x[:, None] - x, y[:, None] - y)
    first = np.argmax(away <= near, axis=1)
    kept, which = np.unique(first, return_inverse=True)
    return np.column_stack([x[kept], y[kept]]), which, np.bincount(which).astype(float)


def _along_line(target: Target, x: Floats) -> Floats:
    order = np.argsort(x, kind="stable")
    middle = (x[order][1:] + x[order][:-1]) / 2
    beyond = target.net.force_beyond(middle, "outboard")
    own = np.empty(x.size)
    own[order] = -np.diff(np.concatenate([[target.net.total], beyond, [0.0]]))
    return own


def _of_cells(target: Target, places: Floats) -> Floats:
    """What lies in each cell [N]; of line and point loads the mean of four: with cells a hair to each side."""
    areas, lines = _pressures_and_others(target.net_plan)
    own = areas.inside(_nearest_areas(target, places)) if areas.parts else np.zeros(places.shape[0])
    if not lines.parts:
        return own
    hair = HAIR * (target.brief.specimen.right - target.brief.specimen.left)
    beside = [lines.inside(_nearest_areas(target, places + hair * step)) for step in ASKEW]
    return np.asarray(own + sum(beside) / len(beside))


def _pressures_and_others(load: PlanLoad) -> tuple[PlanSum, PlanSum]:
    """Split a load into pressures, which leave nothing on a border between cells, and what may lie on one."""
    from rigdesign.target.surface.pressure import Pressure

    found: tuple[list[tuple[PlanLoad, float]], list[tuple[PlanLoad, float]]] = ([], [])
    left = [(load, 1.0)]
    while left:
        part, factor = left.pop(0)
        if isinstance(part, PlanSum):
            left += [(one, factor * times) for one, times in zip(part.parts, part.factors, strict=True)]
        else:
            found[0 if isinstance(part, Pressure) else 1].append((part, factor))
    areas, lines = (PlanSum(tuple(p for p, _ in kind), tuple(f for _, f in kind)) for kind in found)
    return areas, lines


def _nearest_areas(target: Target, places: Floats) -> list[Polygon]:
    """The convex cells (k,) of distinct places (k, 2) in a box that reaches a span beyond specimen and pads."""
    from shapely import Polygon

    outline, specimen = target.brief.specimen.outline, target.brief.specimen
    assert outline is not None
    span = specimen.right - specimen.left
    low = np.minimum([outline.x.min(), outline.y.min()], places.min(axis=0)) - span
    high = np.maximum([outline.x.max(), outline.y.max()], places.max(axis=0)) + span
    box = np.array([low, [high[0], low[1]], high, [low[0], high[1]]])
    return [Polygon(_cell(places, k, box)) for k in range(places.shape[0])]


def _cell(places: Floats, k: int, box: Floats) -> Floats:
    """Corners (m, 2) of what of a convex box is nearest to place k: cut half-way to the others, the nearest first."""
    cell, step = box, places - places[k]
    away = np.hypot(step[:, 0], step[:, 1])
    for other in np.argsort(away, kind="stable"):
        if other == k:
            continue
        # beyond twice the cell's reach no place can cut it
        if away[other] > 2 * np.hypot(*(cell - places[k]).T).max():
            break
        cell = _cut(cell, ((cell - places[k]) * (step[other] / away[other])).sum(axis=1) - away[other] / 2)
    return cell


def _cut(cell: Floats, beyond: Floats) -> Floats:
    """Cut a convex polygon (m, 2) along a line that its corners lie `beyond` (m,) [m]; what is not beyond stays."""
    if (beyond <= 0).all():
        return cell
    corners = []
    for a, b, d_a, d_b in zip(cell, np.roll(cell, -1, axis=0), beyond, np.roll(beyond, -1), strict=True):
        if d_a <= 0:
            corners.append(a)
        if (d_a <= 0) != (d_b <= 0):
            corners.append(a + (b - a) * (d_a / (d_a - d_b)))
    return np.array(corners)
