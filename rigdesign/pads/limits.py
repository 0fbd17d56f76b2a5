"""Limits that a single pad or a pair of neighbours must keep.

Forces here are multiplied by the sign of the target (positive) and are those at the brief's load; the limits of the
brief hold at the peak of the test, so they are divided by what that is to the pads (`Target.pads_peak`).
"""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

# Lengths that agree to this part of the span count as equal, and forces to this part of their limit: a footprint may
# touch its neighbour, and a pad that a programme puts exactly on its limit keeps it.
TOUCH = 1e-9


def force_limits(target: Target) -> tuple[float, float]:
    """Least and largest force of a pad [N] at the brief's load, the pressure limit included."""
    pads, peak = target.brief.pads, target.pads_peak
    largest = pads.largest_force
    if np.isfinite(pads.largest_pressure) and pads.width is not None:
        largest = min(largest, pads.largest_pressure * pads.length * pads.width)
    return pads.least_force / peak, largest / peak


def least_pitch(brief: Brief) -> float:
    """Least distance [m] between the centres of neighbouring pads."""
    return brief.pads.length + brief.pads.gap


def allowed_stretches(brief: Brief) -> Floats:
    """Stretches (k, 2) [m] where the centre of a pad may stand: on the specimen and clear of keep-outs."""
    half = brief.pads.length / 2
    start, end = brief.specimen.left + half, brief.specimen.right - half
    stretches = []
    for a, b in sorted(brief.pads.keep_out):
        if a - half >= start:
            stretches.append((start, min(a - half, end)))
        start = max(start, b + half)
    stretches.append((start, end))
    kept = [(a, b) for a, b in stretches if b >= a]
    return np.array(kept, dtype=float).reshape(-1, 2)


def usable_points(brief: Brief) -> Floats:
    """Hard points (k,) [m] whose footprint lies on the specimen and clear of keep-outs."""
    x, stretches = brief.pads.stations, allowed_stretches(brief)
    slack = TOUCH * (brief.specimen.right - brief.specimen.left)
    inside = (x[:, None] >= stretches[:, 0] - slack) & (x[:, None] <= stretches[:, 1] + slack)
    return x[inside.any(axis=1)]


def violations(target: Target, pad_x: Floats, force: Floats) -> Floats:
    """How far rigs with pads `pad_x`, `force` (..., n), root to tip, miss the pad limits: (...), 0 where all hold.

    The sum of the relative excesses of forces, and of lengths over the span.
    """
    brief = target.brief
    span = brief.specimen.right - brief.specimen.left
    least, largest = force_limits(target)
    scale = np.abs(force).mean(axis=-1)
    missing = (np.maximum(least * (1 - TOUCH) - force, 0.0).sum(axis=-1)) / scale
    if np.isfinite(largest):
        missing = missing + np.maximum(force - largest * (1 + TOUCH), 0.0).sum(axis=-1) / scale
    missing = missing + np.maximum(-force, 0.0).sum(axis=-1) / scale
    pitch = np.diff(pad_x, axis=-1)
    lengths = np.maximum(least_pitch(brief) - TOUCH * span - pitch, 0.0).sum(axis=-1)
    return np.asarray(missing + (lengths + _off_stretches(brief, pad_x, TOUCH * span).sum(axis=-1)) / span)


def _off_stretches(brief: Brief, pad_x: Floats, slack: float) -> Floats:
    stretches = allowed_stretches(brief)
    if not stretches.size:
        return np.ones(pad_x.shape)
    away = np.maximum(stretches[:, 0] - pad_x[..., None], pad_x[..., None] - stretches[:, 1]).min(axis=-1)
    return np.where(away > slack, away, 0.0)


def most_that_fit(brief: Brief) -> int | None:
    """How many pads the allowed stretches hold; None if there is no least pitch."""
    pitch = least_pitch(brief)
    if pitch <= 0:
        return None if allowed_stretches(brief).size else 0
    span = brief.specimen.right - brief.specimen.left
    count, free_from = 0, -np.inf
    for a, b in allowed_stretches(brief):
        first = max(float(a), free_from)
        if first <= b + TOUCH * span:
            more = int(np.floor((b - first) / pitch + TOUCH * span / pitch)) + 1
            count, free_from = count + more, first + more * pitch
    return count


def packed(stretches: Floats, pitch: float, count: int, slack: float) -> Floats:
    """The first `count` places [m] that stand as far inboard as the stretches (k, 2) and the pitch allow, or fewer.

    Lengths that agree to `slack` [m] count as equal.
    """
    places: list[float] = []
    for a, b in stretches:
        x = float(a) if not places else max(float(a), places[-1] + pitch)
        while x <= b + slack and len(places) < count:
            places.append(min(x, float(b)))
            x = places[-1] + pitch
    return np.array(places)


def with_room(brief: Brief, count: int) -> tuple[Floats, float]:
    """Stretches (k, 2) and least pitch [m] for free pads, with a drill step of room for the drilling to use up.

    Where `count` pads would not fit with that room, they are the allowed stretches and the least pitch themselves.
    """
    stretches, pitch = allowed_stretches(brief), least_pitch(brief)
    room = brief.levers.drill_step
    inner = stretches + np.array([room, -room])
    inner = inner[inner[:, 1] > inner[:, 0]]
    slack = TOUCH * (brief.specimen.right - brief.specimen.left)
    if len(inner) == len(stretches) and packed(inner, pitch + room, count, slack).size >= count:
        return inner, pitch + room
    return stretches, pitch


def fitted(wish: Floats, grid: Floats, pitch: float) -> Floats | None:
    """Places of the grid (g,) nearest to the wishes (n,), all [m] and sorted, at least `pitch` apart; None if none fit.

    Least sum of distances, exact by dynamic programming.
    """
    before = np.zeros(grid.size)
    reach = np.searchsorted(grid, grid - pitch * (1 - TOUCH), side="right" if pitch > 0 else "left") - 1
    choices = []
    for k, place in enumerate(wish):
        cost = before + np.abs(grid - place)
        lowest = np.minimum.accumulate(cost)
        which = np.maximum.accumulate(np.where(cost <= lowest, np.arange(grid.size), 0))
        choices.append(which)
        if k + 1 < wish.size:
            before = np.where(reach >= 0, lowest[np.maximum(reach, 0)], np.inf)
    if not np.isfinite(lowest[-1]):
        return None
    places, last = [], int(which[-1])
    for k in range(wish.size - 1, -1, -1):
        places.append(last)
        if k:
            last = int(choices[k - 1][reach[last]])
    return grid[places[::-1]]
