"""From points with a pressure to pieces of the plan, a linear pressure on each.

A complete grid is split cell by cell into four triangles about the cell's centre, which has the mean of the cell's four
values, so that a symmetric map stays symmetric.  Scattered points become Delaunay triangles.  Beyond them every place
has the value of the nearest place of the covered area: constant across outside each edge of its border, constant
in the wedge outside each corner.  All of this is linear piece by piece, and so is its integral exact.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import PressureLoad
from rigdesign.errors import BriefError
from rigdesign.target.curve import Floats

Ints = NDArray[np.intp]

# Grid lines this near to each other, as a part of the map's size, are one line with rounded coordinates.
_SAME_LINE = 1e-9
# A triangle at the border lower than this part of its outer edge comes from points on a line that rounding has bent:
# it is left out, and the points inside it stand on the border like their neighbours.
_FLAT = 5e-3
_ROUNDED = 1e-9
# Pieces beyond the covered area reach this much further than the outline does.
_REACH = 1.01


@dataclass(frozen=True)
class Mesh:
    """The covered area: places x, y [m] and pressure [Pa] of its nodes, all (n,), triangles (k, 3) of them counter-
    clockwise, and the nodes of its border (m,), counter-clockwise, the first not repeated.
    """

    x: Floats
    y: Floats
    pressure: Floats
    triangles: Ints
    border: Ints


class Pieces(NamedTuple):
    """Convex pieces of the plan: corners as a list of (m, 2) [m]; pressure p = `level` + `slope`·(r − `origin`), kept
    between `low` and `high` against rounding; `level`, `low`, `high` [Pa] are (k,), `slope` [Pa/m], `origin` (k, 2).
    """

    corners: list[Floats]
    origin: Floats
    level: Floats
    slope: Floats
    low: Floats
    high: Floats


def mesh_of(load: PressureLoad, reach: float) -> Mesh:
    """Return the covered area of a map whose border can be carried on by `reach` [m].

    Raises
    ------
    BriefError
        If the points stand on one line, or two of them at one place with different pressures.
    """
    places, first, which = np.unique(np.column_stack([load.x, load.y]), axis=0, return_index=True, return_inverse=True)
    if places.shape[0] < load.x.size:
        _refuse_two_values(load, first[which.ravel()])
    x, y, pressure = places[:, 0], places[:, 1], load.pressure[first]
    lines_x, lines_y = _lines(x), _lines(y)
    if lines_x[0].size >= 2 and lines_y[0].size >= 2 and lines_x[0].size * lines_y[0].size == x.size:
        return _grid(lines_x, lines_y, pressure)
    return _scattered(load, x, y, pressure, reach)


def _refuse_two_values(load: PressureLoad, same: Ints) -> None:
    differs = np.flatnonzero(load.pressure != load.pressure[same])
    if differs.size:
        i = int(differs[0])
        raise BriefError("two pressures stand at one place", where=load.where,
                         value=f"{load.pressure[same[i]]:g} Pa and {load.pressure[i]:g} Pa at "
                               f"x = {load.x[i]:g} m, y = {load.y[i]:g} m",
                         limit="one row for each place", remedy="delete one of the rows")  # fmt: skip


def _lines(values: Floats) -> tuple[Floats, Ints]:
    """The grid lines of coordinates (n,), and the line that each stands on (n,)."""
    order = np.argsort(values, kind="stable")
    steps = np.diff(values[order])
    number = np.append(0, np.cumsum(steps > _SAME_LINE * (values[order[-1]] - values[order[0]])))
    first = np.flatnonzero(np.append(True, np.diff(number) > 0))
    which = np.empty(values.size, dtype=np.intp)
    which[order] = number
    return values[order][first], which


def _grid(lines_x: tuple[Floats, Ints], lines_y: tuple[Floats, Ints], pressure: Floats) -> Mesh:
    """A complete grid: nodes and, after them, the centres of the cells."""
    (x, column), (y, row) = lines_x, lines_y
    values = np.empty((x.size, y.size))
    values[column, row] = pressure
    centre = (values[:-1, :-1] + values[1:, :-1] + values[:-1, 1:] + values[1:, 1:]) / 4.0
    node = np.arange(x.size * y.size).reshape(x.size, y.size)
    middle = node.size + np.arange(centre.size).reshape(centre.shape)
    around = (node[:-1, :-1], node[1:, :-1], node[1:, 1:], node[:-1, 1:])
    triangles = [np.stack([around[k], around[(k + 1) % 4], middle], axis=-1).reshape(-1, 3) for k in range(4)]
    all_x = np.concatenate([np.repeat(x, y.size), np.repeat((x[:-1] + x[1:]) / 2.0, y.size - 1)])
    all_y = np.concatenate([np.tile(y, x.size), np.tile((y[:-1] + y[1:]) / 2.0, x.size - 1)])
    border = np.concatenate([node[:-1, 0], node[-1, :-1], node[:0:-1, -1], node[0, :0:-1]])
    return Mesh(all_x, all_y, np.append(values.ravel(), centre.ravel()), np.concatenate(triangles), border)


def _scattered(load: PressureLoad, x: Floats, y: Floats, pressure: Floats, reach: float) -> Mesh:
    """Delaunay triangles; flat ones at the border are left out where the border can still be carried on."""
    from scipy.spatial import Delaunay, QhullError

    # about the middle and of size 1, so that the triangles do not depend on where the plan's origin is
    scale = max(float(np.ptp(x)), float(np.ptp(y)), 1e-300)
    places = np.column_stack([(x - x.mean()) / scale, (y - y.mean()) / scale])
    try:
        found = Delaunay(places) if x.size >= 3 else None
    except QhullError:
        found = None
    if found is None:
        raise BriefError("the pressure map spans no area", where=load.where, value=f"{x.size} points, all on one line",
                         limit="three points or more that are not on one line",
                         remedy="add points beside the line, or give a running load with its line")  # fmt: skip
    for flat in (_FLAT, _ROUNDED):
        triangles, border = _peeled(x, y, found.simplices.astype(np.intp), found.neighbors.astype(np.intp), flat)
        mesh = Mesh(x, y, pressure, triangles, border)
        if flat == _ROUNDED or not _overlaps(mesh, reach):
            return mesh
    raise AssertionError("unreachable")


def _peeled(x: Floats, y: Floats, triangles: Ints, neighbours: Ints, flat: float) -> tuple[Ints, Ints]:
    """Triangles without the flat ones at the border, counter-clockwise, and the border's nodes."""
    area = _double_area(x, y, triangles)
    alive = np.abs(area) > 0
    while True:
        outer = (neighbours < 0) | ~alive[neighbours]
        outer &= alive[:, None]
        # the outer edge lies opposite to corner k
        a, b = np.roll(triangles, -1, axis=1), np.roll(triangles, -2, axis=1)
        length = np.hypot(x[b] - x[a], y[b] - y[a])
        on_border = np.zeros(x.size, bool)
        on_border[a[outer]] = on_border[b[outer]] = True
        low = outer & (np.abs(area)[:, None] <= flat * length**2) & (outer.sum(axis=1) == 1)[:, None]
        low &= ~on_border[triangles]
        row, corner = np.nonzero(low)
        # two flat triangles may share their inner node: the first goes now, the other is looked at again
        _, first = np.unique(triangles[row, corner], return_index=True)
        if not first.size:
            break
        alive[row[first]] = False
    turned = np.where(area[:, None] > 0, triangles, triangles[:, ::-1])
    forward = area[:, None] > 0
    start, end = np.where(forward, a, b)[outer], np.where(forward, b, a)[outer]
    following = np.full(x.size, -1)
    following[start] = end
    border = [int(start.min())]
    while (node := int(following[border[-1]])) != border[0]:
        border.append(node)
    return turned[alive], np.array(border)


def _double_area(x: Floats, y: Floats, triangles: Ints) -> Floats:
    a, b, c = triangles.T
    return np.asarray((x[b] - x[a]) * (y[c] - y[a]) - (x[c] - x[a]) * (y[b] - y[a]))


class _Border(NamedTuple):
    """The border as edges: ends `start`, unit vectors along `along` and out of `out`, all (m, 2), lengths (m,).

    `turn` (m,) is the tangent of half the angle by which the border turns left at the start of each edge.
    """

    start: Floats
    along: Floats
    out: Floats
    length: Floats
    turn: Floats


def _border(mesh: Mesh) -> _Border:
    start = np.column_stack([mesh.x[mesh.border], mesh.y[mesh.border]])
    step = np.roll(start, -1, axis=0) - start
    length = np.hypot(step[:, 0], step[:, 1])
    along = step / length[:, None]
    before = np.roll(along, 1, axis=0)
    cross = before[:, 0] * along[:, 1] - before[:, 1] * along[:, 0]
    dot = (before * along).sum(axis=1)
    out = np.column_stack([along[:, 1], -along[:, 0]])
    return _Border(start, along, out, length, cross / np.maximum(1.0 + dot, 1e-300))


def _overlaps(mesh: Mesh, reach: float) -> bool:
    """Whether the strips outside a border that bends inward meet within reach."""
    border = _border(mesh)
    inward = np.maximum(-border.turn, 0.0)
    return bool(np.any(_REACH * reach * (inward + np.roll(inward, -1)) >= border.length))


def covered_pieces(mesh: Mesh) -> Pieces:
    """Return the triangles of the covered area."""
    corners = np.stack([mesh.x[mesh.triangles], mesh.y[mesh.triangles]], axis=-1)
    values = mesh.pressure[mesh.triangles]
    area = _double_area(mesh.x, mesh.y, mesh.triangles)
    u, v = corners[:, 1] - corners[:, 0], corners[:, 2] - corners[:, 0]
    p, q = values[:, 1] - values[:, 0], values[:, 2] - values[:, 0]
    slope = np.column_stack([p * v[:, 1] - q * u[:, 1], q * u[:, 0] - p * v[:, 0]]) / area[:, None]
    return Pieces(list(corners), corners[:, 0], values[:, 0], slope, values.min(axis=1), values.max(axis=1))


def carried_on(mesh: Mesh, reach: float) -> Pieces:
    """Return the pieces beyond the covered area, as far as `reach` [m] from it."""
    border = _border(mesh)
    far = _REACH * reach
    value = mesh.pressure[mesh.border]
    following = np.roll(value, -1)
    # where the border bends inward, neighbouring strips meet on the line half way between them
    inward = np.maximum(-border.turn, 0.0)[:, None]
    first = border.start + far * (border.out + inward * border.along)
    second = np.roll(border.start, -1, axis=0) + far * (border.out - np.roll(inward, -1, axis=0) * border.along)
    strips = np.stack([border.start, first, second, np.roll(border.start, -1, axis=0)], axis=1)
    slope = ((following - value) / border.length)[:, None] * border.along
    low, high = np.minimum(value, following), np.maximum(value, following)
    wedge = np.flatnonzero(border.turn > 0)
    one, two = np.roll(border.out, 1, axis=0)[wedge], border.out[wedge]
    half = one + two
    half /= np.hypot(half[:, 0], half[:, 1])[:, None]
    at = border.start[wedge]
    # a wedge turns by less than half a circle: with 1.5 times the reach its chords stay outside the circle of the reach
    wedges = np.stack([at, at + 1.5 * far * one, at + 1.5 * far * half, at + 1.5 * far * two], axis=1)
    level = value[wedge]
    return Pieces(
        [*strips, *wedges],
        np.concatenate([border.start, at]),
        np.concatenate([value, level]),
        np.concatenate([slope, np.zeros((wedge.size, 2))]),
        np.concatenate([low, level]),
        np.concatenate([high, level]),
    )
