"""How good drilled rigs in plan are: the largest error over its band, for many rigs at once."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from rigdesign.pads.model import PadPlan
from rigdesign.pads.surface.error_rows import ErrorRows, error_rows
from rigdesign.target.curve import Floats

EVEN_STAYING, EVEN_MOVING = 80, 40
"""Stations along the span at which rigs are judged, besides those of pads and bands: pads that stay, pads that move."""

DIGITS = 10
"""Decimals of a band use that decide: beyond them the same sum may come out otherwise elsewhere in memory."""

BLOCK = 4_000_000
"""Most numbers in one block of rigs that are judged together: keeps memory small."""

Use = Callable[[Floats, Floats, Floats], Floats]
"""`use(pad_x, pad_y, force)`, each (k, n_pads), gives the band use of k rigs, (k,)."""


def judge_of(plan: PadPlan) -> Use:
    """The judge of a plan's rigs: pads that stay share one matrix, for pads that move it is made anew."""
    rows = error_rows(plan.target, plan.x, plan.y, EVEN_MOVING if plan.may_move else EVEN_STAYING)
    return _moving(rows) if plan.may_move else _staying(rows, plan.x, plan.y)


def _staying(rows: ErrorRows, x: Floats, y: Floats) -> Use:
    matrix = rows.matrix(x, y)

    def use(pad_x: Floats, pad_y: Floats, force: Floats) -> Floats:
        # no BLAS product: how that sums depends on where in memory its arrays happen to lie
        return _largest(rows, np.einsum("kn,mn->km", force, matrix))

    return use


def _moving(rows: ErrorRows) -> Use:
    def use(pad_x: Floats, pad_y: Floats, force: Floats) -> Floats:
        count, n_pads = pad_x.shape
        block = max(1, BLOCK // (n_pads * max(1, rows.wanted.size)))
        parts = []
        for start in range(0, count, block):
            x, y, f = (values[start : start + block] for values in (pad_x, pad_y, force))
            matrix = rows.matrix(x.ravel(), y.ravel()).reshape(-1, *x.shape)
            parts.append(_largest(rows, (matrix * f).sum(axis=2).T))
        return np.concatenate(parts)

    return use


def _largest(rows: ErrorRows, brought: Floats) -> Floats:
    """Largest error over its band of what rigs bring to each row, (k, m)."""
    error = brought - rows.wanted
    use = np.maximum(error / rows.above, -error / rows.below).max(axis=1, initial=0.0)
    return np.asarray(np.round(use, DIGITS))
