"""From planned pads in plan to a drilled tree of levers and plates."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.display import counted, show, show_steel
from rigdesign.findings import Finding, Refusal, numbered
from rigdesign.levers.drilled import REACH
from rigdesign.levers.grouping import millimetres
from rigdesign.levers.model import Rig, Tree
from rigdesign.levers.surface.clashes import Shape, clashing
from rigdesign.levers.surface.drilling import DrilledInPlan, drill_in_plan
from rigdesign.levers.surface.grouping import Grouped, group_in_plan
from rigdesign.levers.surface.pieces import tree_in_plan
from rigdesign.levers.surface.wiring import Branches, branches_of
from rigdesign.levers.weighing import StockLine
from rigdesign.pads.model import PadPlan
from rigdesign.pads.outcome import Progress

MARGINS = (1, 3, 8)
"""Drill steps by which the limits of levers are drawn closer in turn where drilling cannot keep them."""

RATIO_MARGIN = 0.02
"""Part of the ratio limit that goes with each of these steps."""


def build_in_plan(plan: PadPlan, progress: Progress | None = None, stock: StockLine | None = None) -> Rig | Refusal:
    """Join the pads of a plan in plan by levers and plates, and drill them; see `rigdesign.levers.build_rig`.

    Where drilling brings pieces of one tier closer than the clearance, a tree with more room between them is looked
    for; if there is none, the first one is kept and a finding says so.
    """

    def grouping(part: float) -> None:
        if progress is not None:
            progress(0.6 * part, "grouping")

    grouping(0.0)
    grouped = group_in_plan(plan, progress=grouping, stock=stock)
    if isinstance(grouped, Refusal):
        return grouped
    rig = _drilled(plan, grouped, stock)
    for margin in MARGINS if plan.target.brief.levers.grouping is None else ():
        if not isinstance(rig, Refusal):
            break
        # the best tree stands so close to a limit that no holes on the drill step keep it: one with room is asked for
        roomier = group_in_plan(_with_margin(plan, margin), progress=grouping, stock=stock)
        if not isinstance(roomier, Refusal):
            grouped, rig = roomier, _drilled(plan, roomier, stock, margin)
    if isinstance(rig, Refusal):
        return rig
    rules = plan.target.brief.levers
    if not grouped.clashes and rig.findings and rules.grouping is None:
        roomy = group_in_plan(plan, rules.clearance + 2 * REACH * rules.drill_step, grouping, stock)
        if not isinstance(roomy, Refusal) and not roomy.clashes:
            again = _drilled(plan, roomy, stock)
            if not isinstance(again, Refusal) and not again.findings:
                rig = again
    if progress is not None:
        progress(1.0, "drilled")
    return rig


def _with_margin(plan: PadPlan, steps: int) -> PadPlan:
    """The plan with limits of its levers drawn closer by so many drill steps."""
    brief = plan.target.brief
    rules = brief.levers
    closer = replace(
        rules,
        shortest_arm=rules.shortest_arm + steps * rules.drill_step,
        longest=max(rules.longest - 2 * steps * rules.drill_step, 0.5 * rules.longest),
        ratio_limit=1.0 + (rules.ratio_limit - 1.0) * (1.0 - RATIO_MARGIN * steps),
    )
    return replace(plan, target=replace(plan.target, brief=replace(brief, levers=closer)))


def _drilled(plan: PadPlan, grouped: Grouped, stock: StockLine | None, margin: int = 0) -> Rig | Refusal:
    """The rig of one grouping, which kept limits closer by so many drill steps than the brief's."""
    step = plan.target.brief.levers.drill_step / grouped.maker.field.extent
    branches = branches_of(grouped.root, plan.n_pads, step)
    drilled = drill_in_plan(plan, branches)
    if isinstance(drilled, Refusal):
        return drilled
    tree = tree_in_plan(branches, drilled.hung, float(plan.force.sum()))
    findings = numbered(_findings(plan, grouped, tree))
    words = _words(plan, grouped, branches, drilled, stock)
    if margin:
        closer = counted(margin, "drill step")
        words += f"; grouped with limits {closer} closer than the brief's, so that drilling keeps these"
    return Rig(plan, *_pads(drilled), (tree,), words, findings)


def _pads(drilled: DrilledInPlan) -> tuple[np.ndarray, np.ndarray]:
    return drilled.hung.pad_x[0].copy(), drilled.hung.pad_y[0].copy()


def close_pieces(tree: Tree, clearance: float) -> list[tuple[str, str]]:
    """Pairs of pieces of one tier that cross, touch or come closer in plan than the clearance [m], by name."""
    result = []
    for tier in sorted({piece.tier for piece in tree.pieces}):
        pieces = [piece for piece in tree.pieces if piece.tier == tier]
        shapes: list[Shape] = [tuple((hole.x, hole.y) for hole in piece.ends) for piece in pieces]
        result += [(pieces[i].name, pieces[j].name) for i, j in clashing(shapes, clearance)]
    return result


def _findings(plan: PadPlan, grouped: Grouped, tree: Tree) -> list[Finding]:
    """A remark on pieces of one tier that are too close."""
    rules = plan.target.brief.levers
    close = close_pieces(tree, rules.clearance)
    if not close:
        return []
    pairs = "1 pair of pieces" if len(close) == 1 else f"{len(close)} pairs of pieces"
    named = ", ".join(f"{one} and {other}" for one, other in close[:3]) + (", …" if len(close) > 3 else "")
    if rules.grouping is not None:
        why, remedy = "in the prescribed grouping", "group the pads otherwise"
    elif grouped.clashes:
        proof = "proven" if grouped.is_best else "as far as was searched, not proven"
        why = f"no tree within the limits keeps all pieces of one tier clear of one another ({proof}): in the best one"
        remedy = "allow other pads" if rules.plates else "plates = true, or other pads"
    else:
        why, remedy = "as drilled", "a finer drill_step"
    return [
        Finding(
            "levers",
            "warning",
            "rig",
            f"{why} {pairs} of one tier cross or come too close in plan: {named}",
            pairs,
            f"clearance {millimetres(rules.clearance)}",
            f"a smaller clearance, or {remedy}",
        )
    ]


def _words(plan: PadPlan, grouped: Grouped, branches: Branches, drilled: DrilledInPlan, stock: StockLine | None) -> str:
    return f"{_grouping_words(plan, grouped, branches, stock)}; {drilled.words}"


def _grouping_words(plan: PadPlan, grouped: Grouped, branches: Branches, stock: StockLine | None) -> str:
    """What the search for a grouping did, and what is proven of it."""
    if not branches.n_pieces:
        return grouped.words
    if stock is None:
        steel = f"steel estimate {show_steel(grouped.steel)} before drilling"
    else:
        steel = f"{show(grouped.mass(stock), 'mass')} of pieces from stock"
    head = f"{_counted(branches)} in {_tiers(branches.depth)}, {steel}"
    if plan.target.brief.levers.grouping is not None:
        return f"grouping: as prescribed, {head}"
    lonely, within = grouped.lonely, "within the limits"
    if lonely:
        first = plan.target.brief.levers.pair
        head += f', pads that hang without a partner ("{first}"): {lonely}'
    if grouped.least is None:
        return f"grouping: {head}, the best found ({grouped.words}); not proven to be the least"
    more = lonely - grouped.maker.lonely(grouped.least)
    if grouped.root is grouped.least:
        proven = f"the fewest such pads and the least steel {within}" if lonely else f"the least {within}"
        return f"grouping: {head}, proven: {proven}, whether pieces cross or not"
    best = ", and the least of all that keep clear" if grouped.is_best else ""
    above = f"{100 * grouped.above:.2g} % above" if grouped.above > 0 else f"{-100 * grouped.above:.2g} % below"
    pads = f" (with {more} more pads without a partner)" if more else ""
    return f"grouping: {head}, {above} the proven least without regard to crossings{pads}{best}"


def _counted(branches: Branches) -> str:
    plates = branches.n_plates
    levers = branches.n_pieces - plates
    parts = [
        f"{count} {name}{'' if count == 1 else 's'}" for count, name in ((levers, "lever"), (plates, "plate")) if count
    ]
    return " and ".join(parts)


def _tiers(count: int) -> str:
    return "1 tier" if count == 1 else f"{count} tiers"
