"""The most that a single pad can carry within a band use, whatever the other pads do.

At a pad shear and torsion jump by what it carries, and both sides of the jump must be inside the band.  The moment of
pads that all act one way is a convex path, so that the tube around the wanted moment bounds how much its slope can
change at one place.  Such limits make a mixed-integer programme tight.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from rigdesign.pads.surface.choice_model import Choice, Indices, Truths, station_numbers
from rigdesign.target.curve import Floats
from rigdesign.target.cuts import SAME_PLACE, cuts_at, reaction_loads, reactions_in_plan

SAME = 1e-9
"""Of the largest response: a smaller jump is rounding."""


@dataclass(frozen=True)
class JumpLimits:
    """Most that each place's pad can carry [N], (n,), from its jumps, as `start` + `per_use` · band use.

    Pads at one station can hide each other's jumps where they jump both ways.  `alone` (n,) is what a pad that is the
    only one at its station can carry per unit of band use; a pad counts as at least `per_pad` (n,) of the pads at its
    station: Σ force / per_pad at one station is at most the number of its pads times the band use.
    `station` (n,) numbers the stations.
    """

    choice: Choice
    start: Floats
    per_use: Floats
    per_pad: Floats
    station: Indices

    def at(self, use: float) -> Floats:
        """Return the limits (n,) [N] at a band use, those of the moment's tube among them."""
        by_jump = np.where(np.isinf(self.per_use), np.inf, self.start + np.minimum(self.per_use, 1e300) * use)
        return np.minimum(by_jump, _by_path(self.choice, use))


def jump_limits(choice: Choice) -> JumpLimits:
    """Return what the jumps of shear and torsion at the places themselves allow."""
    n = choice.x.size
    station = station_numbers(choice.x, choice.balance.size)
    start, per_use = np.zeros(n), np.full(n, np.inf)
    alone, together = np.full(n, np.inf), np.full(n, np.inf)
    from_zero = np.ones(n, bool)
    for jump, up, down, wanted in _jumps(choice):
        row, pad = np.nonzero(jump)
        if not row.size:
            continue
        # where pads jump both ways, they may hide each other
        one_way: Truths = ~(np.any(jump > 0, axis=1) & np.any(jump < 0, axis=1))
        size, is_up = np.abs(jump[row, pad]), jump[row, pad] > 0
        rise = np.where(is_up, up[row], down[row]) / size
        base = np.maximum(np.where(is_up, wanted[row], -wanted[row]) / size, 0.0)
        from_zero[pad[base > SAME * choice.balance.total]] = False
        # of a support's jump every pad has a part: those elsewhere may hide what a pad does to it
        own: Truths = one_way | _at_one_station(jump, station)
        np.minimum.at(alone, pad[own[row]], rise[own[row]])
        for k, more, offset in zip(pad[one_way[row]], rise[one_way[row]], base[one_way[row]], strict=True):
            if more < per_use[k]:
                start[k], per_use[k] = offset, more
        # all of one size and way, as the shear's jumps are: the pads at a station share one limit
        if np.ptp(size) <= SAME * size.max() and one_way.all():
            np.minimum.at(together, pad, rise)
    crowd = np.bincount(station)[station]
    # one pad carries what it can alone; of two or more each at most half of what they can together
    most = np.where(crowd == 1, alone, np.maximum(alone, together / 2))
    return JumpLimits(choice, start, per_use, np.where(from_zero, most, np.inf), station)


def _at_one_station(jump: Floats, station: Indices) -> Truths:
    """Whether all that jumps in each row of jumps (k, n) stands at one of the stations (n,), (k,)."""
    numbers = np.broadcast_to(station, jump.shape)
    first = np.where(jump != 0, numbers, station.size).min(axis=1)
    last = np.where(jump != 0, numbers, -1).max(axis=1)
    return np.asarray(first >= last)


def _jumps(choice: Choice) -> Iterator[tuple[Floats, Floats, Floats, Floats]]:
    """Yield, a quantity at a time, the jumps at stations (k, n), how far they may go up and down, and the target's."""
    every = choice.rows.matrix(choice.x, choice.y)
    first = np.cumsum([0, *(block.at.size for block in choice.rows.blocks)])
    by_side = {(b.quantity, b.side): (b, int(k)) for b, k in zip(choice.rows.blocks, first[:-1], strict=True)}
    for quantity in choice.rows.quantities:
        if quantity not in ("shear", "torsion") or choice.rows.specimen.cut != "square to x":
            continue
        if (quantity, "outboard") not in by_side or (quantity, "inboard") not in by_side:
            continue
        (inner, a), (outer, b) = by_side[quantity, "inboard"], by_side[quantity, "outboard"]
        _, i, o = np.intersect1d(inner.at, outer.at, return_indices=True)
        jump = every[a + i] - every[b + o]
        jump = np.where(np.abs(jump) > SAME * max(float(np.abs(every).max()), 1e-300), jump, 0.0)
        yield jump, inner.above[i] + outer.below[o], inner.below[i] + outer.above[o], inner.wanted[i] - outer.wanted[o]


def _by_path(choice: Choice, use: float) -> Floats:
    """Most that the convex path of the moment lets a pad carry at each place (n,) [N]; infinite where not judged."""
    rows, specimen = choice.rows, choice.rows.specimen
    blocks = [block for block in rows.blocks if block.quantity == "moment" and block.side == "inboard"]
    if specimen.cut != "square to x" or not blocks:
        return np.full(choice.x.size, np.inf)
    block = blocks[0]
    even, at = choice.balance, block.at
    cuts = cuts_at(specimen, "moment", at, "inboard")
    answer = reactions_in_plan(specimen, even.total, even.total * even.x, even.total * even.y)
    path = block.wanted - reaction_loads(specimen, "moment", cuts, answer)
    low, high = path - use * block.below, path + use * block.above
    away = at[None, :] - choice.x[:, None]
    close = SAME_PLACE * even.size
    # the path falls to zero: at a place it is no lower than anywhere further out, be the place itself judged or not
    own_low = np.where(away >= -close, low, 0.0).max(axis=1, initial=0.0)
    steepest = np.where(away > close, (high - own_low[:, None]) / np.where(away > close, away, 1.0), np.inf)
    flattest = np.where(away < -close, (high - own_low[:, None]) / np.where(away < -close, away, 1.0), -np.inf)
    after = np.minimum(steepest.min(axis=1), 0.0)
    before = np.maximum(flattest.max(axis=1), -even.total)
    return np.asarray(np.maximum(after - before, 0.0))
