"""Places and forces of free pads moved together, by linear programmes in a trust region.

A step makes the errors linear in forces and places, keeps what the ground and the other pads leave each pad, and solves
for the best move of at most so far.  It counts only if the true value falls: the band use, or how uneven the forces
are within given band uses.  What is found is local.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray
from scipy.optimize import linprog

from rigdesign.pads.model import LEAST_SHARE
from rigdesign.pads.surface.balance import Balance
from rigdesign.pads.surface.ground import Ground, MoveLimits, nearest_rows, rows_at
from rigdesign.pads.surface.moving import Errors
from rigdesign.pads.surface.program import SOLVER_TOLERANCE
from rigdesign.pads.surface.share_slopes import ShareSlopes
from rigdesign.target.curve import Floats

FIRST_MOVE, LAST_MOVE = 0.35, 5e-4
"""The trust region starts at this part of the pads' mean pitch, and the search ends below the other."""
IDLE = 0.4
"""Rows that are used less than this part of the most used one are left out of a step."""
FORCE_MOVE = 1.0
"""A step may change forces by so many times the part of their mean that it may change places of the pitch."""
ROUNDS, MISSED = 8, 1e-3
"""Times that rows are taken on in a step, and by what part of the value sought they may be missed."""
LEAST_GAIN = 1e-5
"""Smallest gain, as a fraction, that a step must bring."""
INSIDE = 1e-3
"""A step keeps this far inside the band use that it must not exceed, so that its curvature does not spoil it."""

Shares = Callable[[Floats, Floats], Floats]
Refill = Callable[[Floats, Floats], Floats | None]


@dataclass(frozen=True)
class Standing:
    """Pads at x, y (n,) [m] with forces (n,) [N] > 0; `value` is what is to be least."""

    x: Floats
    y: Floats
    force: Floats
    value: float


@dataclass(frozen=True)
class Search:
    """A search over places: least band use, or, with `limit`, most even forces within these band uses.

    `limit` (q,) is in the order of the errors' quantities.  With `share_limit` forces keep within that part of the
    pads' own shares of the load; `slopes` tells how these change.  `refill` gives the best forces at given places, for
    steps whose own forces miss a limit.
    """

    errors: Errors
    ground: Ground
    balance: Balance
    least: float
    largest: float
    shares: Shares | None = None
    slopes: ShareSlopes | None = None
    share_limit: float | None = None
    limit: Floats | None = None
    refill: Refill | None = None

    def value(self, x: Floats, y: Floats, force: Floats) -> float:
        """Return what is to be least; infinite where a limit is missed."""
        slack = 1e-9 * self.balance.total
        if force.min() < self.least - slack or force.max() > self.largest + slack:
            return np.inf
        uses = self.errors.uses(x, y, force)
        if self.limit is None and self.share_limit is None:
            return float(uses.max(initial=0.0))
        if self.limit is not None and np.any(uses > self.limit * (1 + 1e-9) + 1e-12):
            return np.inf
        off = self._uneven(x, y, force)
        if self.share_limit is not None and off > self.share_limit * (1 + 1e-6):
            return np.inf
        return off if self.limit is not None else float(uses.max(initial=0.0))

    def _uneven(self, x: Floats, y: Floats, force: Floats) -> float:
        assert self.shares is not None
        share = self.shares(x, y)
        return float(np.max(np.abs(force - share) / self._scale(share)))

    def _scale(self, share: Floats) -> Floats:
        return np.maximum(share, LEAST_SHARE * float(share.mean()))

    def refined(self, start: Standing, steps: int, enough: float = 0.0) -> Standing:
        """Return the best standing found from a start within so many steps; ends at a value of `enough`."""
        best, move, turned = start, FIRST_MOVE, False
        for _ in range(steps):
            if best.value <= enough or move < LAST_MOVE:
                break
            tried = self._step(best, move * self.ground.pitch, turned)
            if tried is not None and tried.value < best.value * (1 - LEAST_GAIN):
                best, move, turned = tried, min(1.5 * move, FIRST_MOVE), False
                continue
            # pads at nearly one station are made to change places before the moves are made smaller
            turned = not turned and self.errors.has_near(best.x, best.y)
            move = move if turned else move / 2.5
        return best

    def _step(self, now: Standing, reach: float, turned: bool) -> Standing | None:
        """Places and forces after the best linearised move of at most `reach` [m]; None if there is none."""
        x, y = self.errors.told_apart(now.x, now.y, turned)
        now = replace(now, x=x, y=y)
        limits = self.ground.moves(now.x, now.y, reach)
        found = self._solved(now, limits, reach)
        if found is None:
            return None
        n = now.x.size
        x, y = now.x + found[n : 2 * n], now.y + found[2 * n :]
        rows = self.ground.brief.pads.rows
        if rows:
            y = rows_at(rows, x, nearest_rows(rows, now.x, now.y))
        if not self.ground.keeps(x, y):
            x, y = self.ground.room.nearest(x, y)
            if not self.ground.keeps(x, y):
                return None
        if not self.errors.are_apart(x, y):
            return None
        force = self.balance.hit_within(x, y, now.force + found[:n], self.least, self.largest)
        value = self.value(x, y, force)
        if value == np.inf and self.refill is not None:
            best = self.refill(x, y)
            if best is not None:
                force, value = best, self.value(x, y, best)
        return Standing(x, y, force, value)

    def _solved(self, now: Standing, limits: MoveLimits, reach: float) -> Floats | None:
        """Changes of forces [N] and places [m], stacked (3 n,).

        Rows of the errors are taken on as they turn out to bind, those that are most used first.
        """
        n, mean = now.x.size, self.balance.total / now.x.size
        unit = np.concatenate([np.full(n, mean), np.full(2 * n, reach)])
        linear = self.errors.linear(now.x, now.y, now.force, reach)
        change = np.concatenate([linear.by_force, linear.by_x, linear.by_y], axis=1) * unit
        most = np.full(linear.use.size, np.nan) if self.limit is None else self.limit[linear.quantity]
        chosen = linear.use >= IDLE * (linear.use.max(initial=0.0) if self.limit is None else most)
        programme = self._programme(now, limits, unit, reach)
        found = None
        for _ in range(ROUNDS):
            found = programme.solved(change[chosen], linear.use[chosen], most[chosen])
            if found is None:
                return None
            now_used = linear.use + (change * found[:-1]).sum(axis=1)
            allowed = found[-1] if self.limit is None else most * (1 - INSIDE)
            beyond = now_used - allowed > MISSED * max(float(np.max(allowed)), 1e-12)
            beyond &= ~chosen
            if not beyond.any():
                break
            chosen |= beyond
        if found is None or (self.limit is None and found[-1] >= now.value * (1 - LEAST_GAIN)):
            return None
        return np.asarray(found[:-1] * unit)

    def _programme(self, now: Standing, limits: MoveLimits, unit: Floats, reach: float) -> _Programme:
        """What a step must keep whatever the errors: room, gaps, order, shares, balance, bounds."""
        n = now.x.size
        a, b = [], []
        for rows, least in ((limits.rows, limits.least), self.errors.orders(now.x, now.y, reach)):
            a.append(np.hstack([np.zeros((least.size, n)), -rows, np.zeros((least.size, 1))]))
            b.append(-least / reach)
        if self.shares is not None and (self.limit is not None or self.share_limit is not None):
            rows, values = self._share_rows(now, unit)
            a.append(rows)
            b.append(values)
        low, high = self._force_bounds(now, unit[0], reach)
        free = np.full(n, np.inf if self.ground.brief.pads.rows else 1.0)
        lowest = np.concatenate([low, limits.low / reach, -free, [0.0]])
        highest = np.concatenate([high, limits.high / reach, free, [np.inf]])
        equal, value = self._equal(now, limits, unit)
        return _Programme(np.concatenate(a), np.concatenate(b), equal, value, np.column_stack([lowest, highest]))

    def _share_rows(self, now: Standing, unit: Floats) -> tuple[Floats, Floats]:
        """Rows on forces over their shares: the value sought, or the share limit."""
        assert self.shares is not None
        n = now.x.size
        share = self.shares(now.x, now.y)
        scale = self._scale(share)
        own = np.zeros((n, 3 * n))
        own[:, :n] = np.diag(unit[:n] / scale)
        if self.slopes is not None:
            own[:, n:] = -np.hstack(self.slopes.at(now.x, now.y)) * unit[n:] / scale[:, None]
        off = (now.force - share) / scale
        a, b = [], []
        if self.limit is not None:
            a += [np.hstack([sign * own, -np.ones((n, 1))]) for sign in (1.0, -1.0)]
            b += [-off, off]
        if self.share_limit is not None:
            a += [np.hstack([sign * own, np.zeros((n, 1))]) for sign in (1.0, -1.0)]
            most = self.share_limit * (1 - INSIDE)
            b += [np.maximum(most - off, 0.0), np.maximum(most + off, 0.0)]
        return np.concatenate(a), np.concatenate(b)

    def _equal(self, now: Standing, limits: MoveLimits, unit: Floats) -> tuple[Floats, Floats]:
        """Sum and first moments kept to first order, and pads kept on their rows."""
        n, even = now.x.size, self.balance
        zero = np.zeros(n)
        by_force = even.rows(now.x, now.y) / even.total
        by_x = np.stack([zero, now.force / even.size, zero]) / even.total
        by_y = np.stack([zero, zero, now.force / even.size]) / even.total
        rows = [np.hstack([np.concatenate([by_force, by_x, by_y], axis=1) * unit * n, np.zeros((3, 1))])]
        on = np.flatnonzero(np.isfinite(limits.slope))
        held = np.zeros((on.size, 3 * n + 1))
        held[np.arange(on.size), n + on] = -limits.slope[on]
        held[np.arange(on.size), 2 * n + on] = 1.0
        return np.concatenate([*rows, held]), np.zeros(3 + on.size)

    def _force_bounds(self, now: Standing, mean: float, reach: float) -> tuple[Floats, Floats]:
        """Least and largest change of each force over their mean: within limits, no more than a move allows."""
        most = FORCE_MOVE * reach / self.ground.pitch
        low, high = (self.least - now.force) / mean, (self.largest - now.force) / mean
        return np.clip(low, -most, 0.0), np.clip(high, 0.0, most)


@dataclass(frozen=True)
class _Programme:
    """A step but for the errors: a · z ≤ b, equal · z = value, and bounds (k, 2) of z; the last of z is the value."""

    a: Floats
    b: Floats
    equal: Floats
    value: Floats
    bounds: Floats

    def solved(self, change: Floats, use: Floats, most: Floats) -> Floats | None:
        """Return the z of least value; rows `use` + `change` · z keep to that value, or to `most` where it is known."""
        sought = np.isnan(most)
        rows = np.hstack([change, np.where(sought, -1.0, 0.0)[:, None]])
        # a start a hair outside a limit has no room rather than less than none
        room = np.where(sought, -use, np.maximum(most * (1 - INSIDE) - use, 0.0))
        options = {"primal_feasibility_tolerance": SOLVER_TOLERANCE, "dual_feasibility_tolerance": SOLVER_TOLERANCE}
        result = linprog(
            np.append(np.zeros(change.shape[1]), 1.0),
            A_ub=np.concatenate([self.a, rows]),
            b_ub=np.concatenate([self.b, room]),
            A_eq=self.equal,
            b_eq=self.value,
            bounds=self.bounds,
            method="highs",
            options=options,
        )
        return np.asarray(result.x) if result.status == 0 else None


def with_limits(search: Search, limit: Floats) -> Search:
    """Return the search for even forces within band uses `limit` (q,)."""
    return replace(search, limit=limit)


def order(x: Floats, y: Floats) -> NDArray[np.intp]:
    """Return the order root to tip: by x, then y."""
    return np.lexsort((y, x))
