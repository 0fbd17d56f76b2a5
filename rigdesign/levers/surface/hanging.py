"""Where everything hangs in plan and what it carries, for many choices of drilled steps at once.

A choice is a row of whole numbers of drill steps.

Pads that stay: one number a lever, from hole A to the pivot along the line to B; two a plate, from hole A to the pivot
along its u and v.  Places follow from the pads up.

Free pads: two numbers a lever, its arms to A and B; five a plate, u of A, u of B, v of both, u and v of C, seen from
the pivot.  Directions are those planned; places follow from the jack down.

Loads always follow from the jack down: a piece hands its load on so that ΣF u = 0 and ΣF v = 0 about its pivot.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import LeverRules
from rigdesign.levers.grouping import LIMIT_SLACK
from rigdesign.levers.grouping import allowed as levers_allowed
from rigdesign.levers.hanging import metres
from rigdesign.levers.surface.limits import is_flat
from rigdesign.levers.surface.wiring import Branches, Planned
from rigdesign.levers.wiring import Ints
from rigdesign.target.curve import Floats

LEAST_PART = 1e-6
"""The least part of its load that a plate may hand to a point: with none, the pivot is at the rim."""


@dataclass(frozen=True)
class PieceHung:
    """One piece in all choices: pivot `x`, `y`, outer holes `u`, `v` (k, 2 or 3) [m], and the `part` each hands on.

    The frame's u axis lies along (`cos`, `sin`) in plan, (k,).
    """

    x: Floats
    y: Floats
    u: Floats
    v: Floats
    part: Floats
    cos: Floats
    sin: Floats

    def end(self, index: int) -> tuple[Floats, Floats]:
        """Place of an outer hole in plan."""
        u, v = self.u[:, index], self.v[:, index]
        return self.x + self.cos * u - self.sin * v, self.y + self.sin * u + self.cos * v

    def kept(self, rules: LeverRules) -> NDArray[np.bool_]:
        """Whether the piece keeps its limits and its pivot lies between its outer holes, (k,)."""
        if self.u.shape[1] == 2:
            return levers_allowed(-self.u[:, 0], self.u[:, 1], rules)
        slack = 1.0 + LIMIT_SLACK
        reach = np.hypot(self.u, self.v).min(axis=1)
        side = np.hypot(self.u - np.roll(self.u, 1, axis=1), self.v - np.roll(self.v, 1, axis=1)).max(axis=1)
        kept = (reach * slack >= rules.shortest_arm) & (side <= rules.longest * slack)
        return np.asarray(kept & (self.part > LEAST_PART).all(axis=1) & ~is_flat(self.u, self.v))


@dataclass(frozen=True)
class HungInPlan:
    """Hung trees, one a row: pads `pad_x`, `pad_y`, `pad_force` (k, n_pads) and the pieces in order; [m], [N] > 0."""

    pad_x: Floats
    pad_y: Floats
    pad_force: Floats
    pieces: tuple[PieceHung, ...]
    jack_x: Floats
    jack_y: Floats

    def kept(self, rules: LeverRules) -> NDArray[np.bool_]:
        """Whether all pieces keep their limits, (k,)."""
        result = np.ones(len(self.pad_x), bool)
        for piece in self.pieces:
            result &= piece.kept(rules)
        return result


def columns_of(branches: Branches, may_move: bool) -> list[slice]:
    """Which numbers of a row belong to which piece."""
    result, start = [], 0
    for ends in branches.ends:
        count = ((2, 5) if may_move else (1, 2))[len(ends) - 2]
        result.append(slice(start, start + count))
        start += count
    return result


def hang_staying(branches: Branches, steps: Ints, step: float, x: Floats, y: Floats, total: float) -> HungInPlan:
    """Hang pads that stay at x, y (n_pads,) [m]; the jack stands over the top pivot and pulls `total` [N]."""
    rows = len(steps)
    place: dict[int, tuple[Floats, Floats]] = {
        -1 - pad: (np.full(rows, x[pad]), np.full(rows, y[pad])) for pad in range(branches.n_pads)
    }
    columns = columns_of(branches, False)
    pieces: dict[int, PieceHung] = {}
    for row, ends in branches.upward():
        piece = _from_below([place[end] for end in ends], metres(steps[:, columns[row]], step))
        pieces[row], place[row] = piece, (piece.x, piece.y)
    hung = tuple(pieces[row] for row in range(branches.n_pieces))
    force = _forces(branches, hung, rows, total)
    ones = np.ones((rows, 1))
    return HungInPlan(x * ones, y * ones, force, hung, *place[branches.top])


def _from_below(ends: list[tuple[Floats, Floats]], pivot: Floats) -> PieceHung:
    """The piece over two or three places, its pivot (k, 1 or 2) seen from hole A."""
    (a_x, a_y), (b_x, b_y) = ends[:2]
    length = np.hypot(b_x - a_x, b_y - a_y)
    cos, sin = (b_x - a_x) / length, (b_y - a_y) / length
    p = pivot[:, 0]
    q = pivot[:, 1] if len(ends) == 3 else np.zeros(p.size)
    u, v = [-p, length - p], [-q, -q]
    if len(ends) == 3:
        away_x, away_y = ends[2][0] - a_x, ends[2][1] - a_y
        u.append(away_x * cos + away_y * sin - p)
        v.append(away_y * cos - away_x * sin - q)
    return _piece(a_x + p * cos - q * sin, a_y + p * sin + q * cos, u, v, cos, sin)


def hang_moving(
    branches: Branches, steps: Ints, step: float, planned: Planned, jack: tuple[float, float], total: float,
    x: Floats, y: Floats,
) -> HungInPlan:  # fmt: skip
    """Hang free pads, planned at x, y (n_pads,) [m], under a jack at `jack` [m] that pulls `total` [N]."""
    rows = len(steps)
    place = {branches.top: (np.full(rows, jack[0]), np.full(rows, jack[1]))}
    columns = columns_of(branches, True)
    pieces = []
    for row, ends in branches.downward():
        (a_x, a_y), (b_x, b_y) = (planned.place(end, x, y) for end in ends[:2])
        length = float(np.hypot(b_x - a_x, b_y - a_y))
        cos, sin = (np.full(rows, part / length) for part in (b_x - a_x, b_y - a_y))
        numbers = metres(steps[:, columns[row]].T, step)
        zero = np.zeros(rows)
        if len(ends) == 2:
            u, v = [-numbers[0], numbers[1]], [zero, zero]
        else:
            u, v = [numbers[0], numbers[1], numbers[3]], [numbers[2], numbers[2], numbers[4]]
        piece = _piece(*place[row], u, v, cos, sin)
        pieces.append(piece)
        for index, end in enumerate(ends):
            place[end] = piece.end(index)
    hung = tuple(pieces)
    pads = [place[-1 - pad] for pad in range(branches.n_pads)]
    force = _forces(branches, hung, rows, total)
    pad_x, pad_y = (np.stack([pad[axis] for pad in pads], axis=1) for axis in (0, 1))
    return HungInPlan(pad_x, pad_y, force, hung, *place[branches.top])


def _piece(x: Floats, y: Floats, u: list[Floats], v: list[Floats], cos: Floats, sin: Floats) -> PieceHung:
    outer_u, outer_v = np.stack(u, axis=1), np.stack(v, axis=1)
    return PieceHung(x, y, outer_u, outer_v, handed_on(outer_u, outer_v), cos, sin)


def handed_on(u: Floats, v: Floats) -> Floats:
    """The part of its load that a piece hands to each outer hole, (k, 2 or 3), from holes seen from the pivot [m].

    >>> handed_on(np.array([[-0.2, 0.3]]), np.zeros((1, 2)))
    array([[0.6, 0.4]])
    """
    if u.shape[1] == 2:
        length = u[:, 1] - u[:, 0]
        safe = np.where(length > 0, length, np.inf)
        return np.stack([u[:, 1] / safe, -u[:, 0] / safe], axis=1)
    areas = [u[:, i] * v[:, j] - u[:, j] * v[:, i] for i, j in ((1, 2), (2, 0), (0, 1))]
    whole = sum(areas)
    safe = np.where(np.asarray(whole) > 0, whole, np.inf)
    return np.stack([area / safe for area in areas], axis=1)


def _forces(branches: Branches, pieces: tuple[PieceHung, ...], rows: int, total: float) -> Floats:
    """Pad forces (k, n_pads) down the tree."""
    load = {branches.top: np.full(rows, total)}
    for row, ends in branches.downward():
        for index, end in enumerate(ends):
            load[end] = load[row] * pieces[row].part[:, index]
    return np.stack([load[-1 - pad] for pad in range(branches.n_pads)], axis=1)
