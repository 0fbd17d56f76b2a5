"""Who hangs with whom in plan: the tree of least steel estimate, or the prescribed one."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np

from rigdesign.errors import BriefError
from rigdesign.findings import Refusal
from rigdesign.levers.grouping import EMPTY_PAD, empty_pad
from rigdesign.levers.surface.limits import Field, Limits, field_of, limits_of
from rigdesign.levers.surface.nodes import Maker, Node, items_of
from rigdesign.levers.surface.refusals import broken_prescription, too_few_tiers, why_none
from rigdesign.levers.surface.repair import CLASH, Repair
from rigdesign.levers.surface.search import Search, clash_count, first_tree
from rigdesign.levers.surface.subsets import BROKEN, Problem, partners, steel_rule
from rigdesign.levers.surface.wiring import node_of_grouping
from rigdesign.levers.weighing import StockLine
from rigdesign.pads.model import PadPlan

EXACT, EXACT_PLATES = 14, 13
"""Up to so many pads the best tree is found with proof, without and with plates."""

UNFINISHED = 20_000
"""Unfinished trees that are looked at to find, with proof, the best tree whose pieces keep clear of one another."""

WORK, WORK_PER_PAD, MOST_PADS_WORKED = 4_000_000, 200_000, 120
"""Splits that a search over many pads looks at: at least so many, and so many a pad for up to so many pads."""


@dataclass(frozen=True)
class Grouped:
    """A tree over the pads.

    `least` is the best tree without regard to clearance, proven, None where nothing is proven; `clashes` the number of
    pairs of pieces of one tier that are too close; `is_best` whether no tree is better that keeps clear.
    """

    maker: Maker
    root: Node
    least: Node | None
    clashes: int
    is_best: bool
    words: str

    @property
    def steel(self) -> float:
        """Steel estimate before drilling [N^(2/3)·m^(5/3)]."""
        return self.maker.steel(self.root) * self.maker.field.steel_unit

    def mass(self, stock: StockLine) -> float:
        """Mass of the pieces out of the stock that the grouping went by [kg]."""
        field = self.maker.field
        return self.maker.steel(self.root) * stock.mass_unit(field.total * field.extent, field.extent)

    @property
    def lonely(self) -> int:
        """How many pads hang without a partner."""
        return self.maker.lonely(self.root)

    @property
    def above(self) -> float:
        """Steel above that of the proven least tree, as a fraction; 0 where nothing is proven."""
        return 0.0 if self.least is None else self.maker.steel(self.root) / self.maker.steel(self.least) - 1.0


def group_in_plan(
    plan: PadPlan,
    clearance: float | None = None,
    progress: Callable[[float], None] | None = None,
    stock: StockLine | None = None,
) -> Grouped | Refusal:
    """Join the pads of a plan by levers and plates.

    `clearance` [m] replaces the brief's; `stock` is what pieces weigh, without it the steel estimate counts.  Raises
    BriefError where a prescribed grouping names the wrong pads.
    """
    field = field_of(plan)
    limits = limits_of(plan.target.brief.levers, field.extent)
    if clearance is not None:
        limits = replace(limits, clearance=clearance / field.extent)
    if stock is None:
        return _grouped(plan, field, limits, progress)
    scaled = stock.scaled(field.total * field.extent, field.extent)
    limits = replace(limits, stock=scaled, links=True)
    # arms with room for their eyes, if there can be any
    roomy = replace(limits, shortest=max(limits.shortest, min(scaled.least_arm, limits.longest / 2)))
    answer = _grouped(plan, field, roomy, progress)
    return _grouped(plan, field, limits, progress) if isinstance(answer, Refusal) else answer


def _grouped(
    plan: PadPlan, field: Field, limits: Limits, progress: Callable[[float], None] | None
) -> Grouped | Refusal:
    """Join the pads of a plan within limits."""
    rules = plan.target.brief.levers
    empty = np.flatnonzero(field.share <= EMPTY_PAD / field.n_pads)
    if empty.size and plan.n_pads > 1:
        return empty_pad(int(empty[0]) + 1)
    maker = Maker(field, limits, partners(field.x, field.y, limits.pair))
    if plan.n_pads == 1:
        return Grouped(maker, maker.pad(0), None, 0, True, "grouping: the one pad hangs on the jack itself")
    if rules.grouping is not None:
        return _prescribed(plan, replace(maker, partner=None))
    if limits.tiers is not None and (3 if limits.plates else 2) ** min(limits.tiers, 40) < plan.n_pads:
        return too_few_tiers(maker)
    exact = EXACT_PLATES if limits.plates else EXACT
    return _exact(maker) if plan.n_pads <= exact else _searched(maker, progress)


def _exact(maker: Maker) -> Grouped | Refusal:
    """The best tree of few pads."""
    field, limits = maker.field, maker.limits
    pads = [maker.pad(index) for index in range(field.n_pads)]
    solved = Problem(items_of(pads), limits, steel_rule(limits), maker.partner).solve(None)
    best = maker.nested(solved.nest, pads) if np.isfinite(solved.value) else None
    if best is None or (limits.tiers is not None and best.height > limits.tiers):
        solved = Problem(items_of(pads), limits, steel_rule(limits), maker.partner).solve(limits.tiers)
        best = maker.nested(solved.nest, pads) if np.isfinite(solved.value) else None
    if best is None or solved.value >= BROKEN:
        return why_none(maker, pads)
    clashes, is_best, least = clash_count(best, limits), True, best
    if clashes:
        if limits.tiers is not None and len(solved.best) == 1:
            solved = solved.problem.solve(limits.tiers)
        best, is_best = _kept_clear(maker, Repair(solved, pads, 1, (), limits.clearance, limits.links), best)
        clashes = clash_count(best, limits)
    return Grouped(maker, best, least, clashes, is_best, "")


def _kept_clear(maker: Maker, repair: Repair, best: Node) -> tuple[Node, bool]:
    """The best tree whose pieces keep clear, or else the one with the fewest clashes found; whether it is proven."""
    repaired = repair.best(np.inf, UNFINISHED)
    if repaired.nest is not None:
        return maker.nested(repaired.nest, list(repair.nodes)), True
    found = Search(maker, best, WORK).run()
    return found.root, False


def _searched(maker: Maker, progress: Callable[[float], None] | None) -> Grouped | Refusal:
    """A good tree of many pads."""
    work = WORK + WORK_PER_PAD * min(maker.field.n_pads, MOST_PADS_WORKED)
    found = Search(maker, first_tree(maker), work).run(progress)
    clashes = clash_count(found.root, maker.limits)
    tiers = maker.limits.tiers
    if found.value - CLASH * clashes >= BROKEN or (tiers is not None and found.root.height > tiers):
        return why_none(maker, [maker.pad(index) for index in range(maker.field.n_pads)], found.root)
    words = f"{found.tries} branches joined anew"
    return Grouped(maker, found.root, None, clashes, False, words)


def _prescribed(plan: PadPlan, maker: Maker) -> Grouped | Refusal:
    rules = plan.target.brief.levers
    assert rules.grouping is not None
    try:
        root = node_of_grouping(maker, rules.grouping)
    except ValueError as error:
        where = f"{plan.target.brief.source.brief_name}, [levers] grouping"
        remedy = "name the pads 1 to the pad count in nested groups of two (levers) and three (plates)"
        raise BriefError(str(error), where=where, remedy=remedy) from error
    broken = broken_prescription(maker, root)
    if broken is not None:
        return broken
    clashes = clash_count(root, maker.limits)
    return Grouped(maker, root, None, clashes, False, "as prescribed")
