"""What other steps for the holes of a rig are worth: many at a time, and one to the last doubt.

A row of whole steps is tried as drilling tries it.  It is worth its band use; far more where pad limits are missed,
and infinite where a piece breaks a limit, leaves the tolerance, or no longer is like those it must be like.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.levers.drilled import BROKEN
from rigdesign.levers.judging import build_judge
from rigdesign.levers.keep.standing import branches_of_rig, directions, only_tree, rebuilt, steps_of_rig
from rigdesign.levers.marks.alike import SAME, outer_holes
from rigdesign.levers.marks.exact import Exact
from rigdesign.levers.model import Rig
from rigdesign.levers.surface.build import close_pieces
from rigdesign.levers.surface.hanging import HungInPlan, columns_of, hang_moving, hang_staying
from rigdesign.levers.surface.judging import judge_of
from rigdesign.levers.surface.pad_limits import PadLimits
from rigdesign.levers.surface.wiring import Branches
from rigdesign.levers.wiring import Ints
from rigdesign.pads.limits import violations
from rigdesign.pads.tube import build_tube
from rigdesign.target.curve import Floats

ROUNDING = 1e-9
"""What rounding may add to a tolerance [m]."""

Groups = tuple[tuple[int, ...], ...]
"""Pieces, by row, that are to be alike; each in one group."""

Judge = Callable[[Floats, Floats, Floats], Floats]


@dataclass(frozen=True)
class Trials:
    """A drilled rig, how far each hole may move in its piece, `tolerance` [m], and up to which band use, `limit`."""

    rig: Rig
    tolerance: float
    limit: float

    @cached_property
    def branches(self) -> Branches:
        """Who hangs with whom."""
        return branches_of_rig(self.rig)

    @cached_property
    def drilled(self) -> Ints:
        """Steps as drilled, (q,)."""
        return steps_of_rig(self.rig)

    @cached_property
    def columns(self) -> list[slice]:
        """Which steps belong to which piece."""
        return columns_of(self.branches, self.rig.plan.may_move)

    @property
    def step(self) -> float:
        """The drill step [m]."""
        return self.rig.plan.target.brief.levers.drill_step

    @property
    def reach(self) -> int:
        """The tolerance in whole steps."""
        return int((self.tolerance + ROUNDING) / self.step)

    def hang(self, rows: Ints) -> HungInPlan:
        """Hang rows of steps (k, q)."""
        rig, tree = self.rig, only_tree(self.rig)
        total = abs(tree.force)
        if not rig.plan.may_move:
            return hang_staying(self.branches, rows, self.step, rig.pad_x, rig.pad_y, total)
        jack = tree.jack.x, tree.jack.y
        return hang_moving(self.branches, rows, self.step, directions(rig), jack, total, rig.pad_x, rig.pad_y)

    def values(self, rows: Ints, groups: Groups) -> Floats:
        """What rows of steps (k, q) are worth, (k,), `groups` being alike."""
        result = np.full(len(rows), np.inf)
        hung = self.hang(rows)
        kept = hung.kept(self.rig.plan.target.brief.levers) & self._within(hung) & self._same(hung, groups)
        if kept.any():
            pads = hung.pad_x[kept], hung.pad_y[kept], hung.pad_force[kept]
            missed = np.maximum(self._missed(*pads) - self._missed_before, 0.0)
            result[kept] = self._judge(*pads) + np.where(missed > 0, BROKEN * (1.0 + missed), 0.0)
        return result

    def same_holes(self, row: Ints) -> list[tuple[float, ...]]:
        """What pieces must share to be alike that is not in their own steps: for pads that stay, the outer holes.

        Seen from hole A, in units that swallow rounding; empty for free pads.
        """
        if self.rig.plan.may_move:
            return [()] * self.branches.n_pieces
        hung = self.hang(row[None])
        return [
            tuple(float(value) for part in (p.u[0, 1:] - p.u[0, 0], p.v[0, 1:] - p.v[0, 0]) for value in part)
            for p in hung.pieces
        ]

    def is_accepted(self, row: Ints, groups: Groups) -> bool:
        """Whether a row of steps keeps everything, judged at many stations and as the check will see it."""
        if self.values(row[None], groups)[0] > self.top:
            return False
        hung = self.hang(row[None])
        pads = hung.pad_x[0], hung.pad_y[0], hung.pad_force[0]
        if self.exact.use(*pads) > self.top or self.exact.shares_missed(*pads) > self._shares_before + ROUNDING:
            return False
        if not self.rig.plan.target.brief.specimen.is_surface:
            return True
        return set(self._close(self.rebuilt(row))) <= set(self._close_before)

    def rebuilt(self, row: Ints) -> Rig:
        """The rig with a row of steps."""
        return rebuilt(self.rig, self.branches, self.hang(row[None]))

    @cached_property
    def exact(self) -> Exact:
        """The judge at many stations."""
        return Exact(self.rig.plan.target)

    @cached_property
    def use_before(self) -> float:
        """Band use as drilled."""
        return self.exact.use(*self._pads)

    @property
    def top(self) -> float:
        """Band use that may be reached: the limit, or what the rig had before."""
        return max(self.limit, self.use_before * (1 + ROUNDING))

    @cached_property
    def _pads(self) -> tuple[Floats, Floats, Floats]:
        hung = self.hang(self.drilled[None])
        return hung.pad_x[0], hung.pad_y[0], hung.pad_force[0]

    @cached_property
    def _shares_before(self) -> float:
        return self.exact.shares_missed(*self._pads)

    @cached_property
    def _missed_before(self) -> float:
        x, y, force = self._pads
        return float(self._missed(x[None], y[None], force[None])[0]) + ROUNDING

    @cached_property
    def _close_before(self) -> list[tuple[str, str]]:
        return self._close(self.rig)

    def _close(self, rig: Rig) -> list[tuple[str, str]]:
        return close_pieces(only_tree(rig), rig.plan.target.brief.levers.clearance)

    @cached_property
    def _judge(self) -> Judge:
        plan = self.rig.plan
        if plan.target.brief.specimen.is_surface:
            return judge_of(plan)
        quick = build_judge(build_tube(plan.target, plan.jack_x, plan.n_pads))
        return lambda x, y, force: quick.use(x, force)

    @cached_property
    def _missed(self) -> Judge:
        brief = self.rig.plan.target.brief
        if brief.specimen.is_surface:
            return PadLimits(self.rig.plan, self.branches).missed
        return lambda x, y, force: violations(self.rig.plan.target, np.sort(x, axis=1), force)

    @cached_property
    def _holes(self) -> list[Floats]:
        return [outer_holes(piece) for piece in only_tree(self.rig).pieces]

    def _within(self, hung: HungInPlan) -> NDArray[np.bool_]:
        """Whether every hole is within the tolerance of where it was drilled in its piece, and the jack where it must.

        A jack that the brief places stays.
        """
        near = self.tolerance + ROUNDING
        kept = np.ones(len(hung.pad_x), bool)
        for piece, holes in zip(hung.pieces, self._holes, strict=True):
            off = np.maximum(np.abs(piece.u - holes[:, 0]), np.abs(piece.v - holes[:, 1]))
            kept &= off.max(axis=1) <= near
        jack, rules = only_tree(self.rig).jack, self.rig.plan.target.brief.jack
        if rules.at is not None or rules.step is not None:
            kept &= np.hypot(hung.jack_x - jack.x, hung.jack_y - jack.y) <= SAME
        return kept

    def _same(self, hung: HungInPlan, groups: Groups) -> NDArray[np.bool_]:
        """Whether the pieces of each group have the same holes."""
        kept = np.ones(len(hung.pad_x), bool)
        for first, *others in groups:
            one = hung.pieces[first]
            for row in others:
                piece = hung.pieces[row]
                off = np.maximum(np.abs(piece.u - one.u), np.abs(piece.v - one.v))
                kept &= off.max(axis=1) <= SAME
        return kept
