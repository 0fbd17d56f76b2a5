"""Where everything hangs and what it carries, for many choices of drilled steps at once.

A choice is a row of whole numbers of drill steps.  Free pads: two a lever, its arms a and b, in the order of the
levers; places follow from the jack down.  Pads that stay: one a lever, from hole A to the pivot; places follow from
the pads up.  Loads always follow from the jack down.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.levers.wiring import Ints, Wiring
from rigdesign.target.curve import Floats


@dataclass(frozen=True)
class Hung:
    """Hung trees, one a row: pads (k, n_pads), levers (k, n_levers), `jack_x` (k,); in m and N, forces positive."""

    pad_x: Floats
    pad_force: Floats
    pivot: Floats
    a: Floats
    b: Floats
    jack_x: Floats


def hang_free(wiring: Wiring, steps: Ints, step: float, jack_x: float, total: float) -> Hung:
    """Hang free pads under a jack at `jack_x` [m] that pulls `total` [N].

    `steps` (k, 2 · n_levers) are the arms a, b of each lever in drill steps of `step` [m].
    """
    rows = len(steps)
    a, b = metres(steps[:, 0::2].T, step), metres(steps[:, 1::2].T, step)
    pivot, load = np.full((wiring.n_levers, rows), jack_x), np.full((wiring.n_levers, rows), total)
    pad_x, pad_force = np.full((wiring.n_pads, rows), jack_x), np.full((wiring.n_pads, rows), total)
    for row, inboard, outboard in wiring.downward():
        outer_force = load[row] * a[row] / (a[row] + b[row])
        ends = ((inboard, pivot[row] - a[row], load[row] - outer_force), (outboard, pivot[row] + b[row], outer_force))
        for end, place, force in ends:
            (pad_x if end < 0 else pivot)[_row(end)] = place
            (pad_force if end < 0 else load)[_row(end)] = force
    return Hung(pad_x.T, pad_force.T, pivot.T, a.T, b.T, np.full(rows, jack_x))


def hang_fixed(wiring: Wiring, steps: Ints, step: float, x: Floats, total: float) -> Hung:
    """Hang pads that stay at `x` (n_pads,) [m]; the jack stands over the top pivot.

    `steps` (k, n_levers) are the distances from hole A to the pivot in drill steps of `step` [m].
    """
    rows = len(steps)
    a, b = metres(steps.T, step), np.zeros((wiring.n_levers, rows))
    pivot, load = np.zeros((wiring.n_levers, rows)), np.full((wiring.n_levers, rows), total)
    pad_x = np.repeat(x[:, None], rows, axis=1)
    pad_force = np.full((wiring.n_pads, rows), total)
    for row, inboard, outboard in wiring.upward():
        places = [(pad_x if end < 0 else pivot)[_row(end)] for end in (inboard, outboard)]
        pivot[row] = places[0] + a[row]
        b[row] = places[1] - pivot[row]
    for row, inboard, outboard in wiring.downward():
        outer_force = load[row] * a[row] / (a[row] + b[row])
        for end, force in ((inboard, load[row] - outer_force), (outboard, outer_force)):
            (pad_force if end < 0 else load)[_row(end)] = force
    jack_x = pivot[0] if wiring.n_levers else pad_x[0]
    return Hung(pad_x.T, pad_force.T, pivot.T, a.T, b.T, jack_x)


def metres(steps: Ints, step: float) -> Floats:
    """Lengths [m] of whole numbers of drill steps, any shape."""
    return np.asarray(steps * step, dtype=np.float64)


def _row(end: int) -> int:
    return end if end >= 0 else -1 - end
