"""From planned pads to a drilled lever tree."""

from __future__ import annotations

import numpy as np

from rigdesign.display import show, show_steel
from rigdesign.findings import Refusal
from rigdesign.levers.drilled import Drilled
from rigdesign.levers.drilling_fixed import drill_fixed
from rigdesign.levers.drilling_free import drill_free
from rigdesign.levers.geometry import build_tree
from rigdesign.levers.grouping import group_pads
from rigdesign.levers.hanging import hang_fixed, hang_free
from rigdesign.levers.model import Rig
from rigdesign.levers.weighing import StockLine
from rigdesign.levers.wiring import Wiring, ideal_levers
from rigdesign.pads.model import PadPlan
from rigdesign.pads.outcome import Progress
from rigdesign.pads.tube import Tube, build_tube


def build_rig(plan: PadPlan, progress: Progress | None = None, stock: StockLine | None = None) -> Rig | Refusal:
    """Join the pads of a plan by levers and drill them.

    Parameters
    ----------
    plan
        Places and wanted forces of the pads.
    progress
        Called now and then with the part done, 0 to 1, and a word for what is being done.
    stock
        What levers weigh; without it the grouping goes by the steel estimate.

    Returns
    -------
    The rig as drilled: free pads moved under their pins with the jack exactly where planned; pads that stay, with the
    jack over the drilled top pivot.  Where the limits of the levers or the drill step leave no tree, a Refusal names
    what binds and what would help.

    Raises
    ------
    BriefError
        A prescribed grouping does not name every pad once in nested pairs.
    """
    if plan.target.brief.specimen.is_surface:
        # imported late: a line rig does not wait for it
        from rigdesign.levers.surface.build import build_in_plan

        return build_in_plan(plan, progress, stock)
    if progress is not None:
        progress(0.0, "grouping")
    wiring = group_pads(plan, stock)
    if isinstance(wiring, Refusal):
        return wiring
    tube = build_tube(plan.target, plan.jack_x, plan.n_pads)
    step = plan.target.brief.levers.drill_step
    if not wiring.n_levers:
        drilled: Drilled | Refusal = _alone(plan, wiring, tube)
    else:
        drilled = (drill_free if plan.may_move else drill_fixed)(plan, wiring, tube, progress)
    if isinstance(drilled, Refusal):
        return drilled
    tree = build_tree(wiring, drilled, step, tube.sign * tube.total)
    if progress is not None:
        progress(1.0, "drilled")
    words = f"{_grouping_words(plan, wiring, stock)}; {drilled.words}"
    return Rig(plan, drilled.hung.pad_x[0].copy(), np.zeros(plan.n_pads), (tree,), words, ())


def _alone(plan: PadPlan, wiring: Wiring, tube: Tube) -> Drilled:
    """One pad hangs on the jack itself."""
    none = np.empty((1, 0), dtype=np.int64)
    if plan.may_move:
        hung = hang_free(wiring, none, 1.0, tube.jack_x, tube.total)
    else:
        hung = hang_fixed(wiring, none, 1.0, plan.x, tube.total)
    use = float(tube.use(hung.pad_x, hung.pad_force)[0])
    return Drilled(hung, np.empty((0, 2), dtype=np.int64), use, "nothing to drill")


def _grouping_words(plan: PadPlan, wiring: Wiring, stock: StockLine | None) -> str:
    if not wiring.n_levers:
        return "grouping: the one pad hangs on the jack itself"
    levers = ideal_levers(wiring, plan.x, np.abs(plan.force))
    if stock is None:
        steel = f"steel estimate {show_steel(levers.steel_estimate)} before drilling"
    else:
        steel = f"{show(float(stock.levers_mass(levers.load, levers.a, levers.b).sum()), 'mass')} of levers from stock"
    if plan.target.brief.levers.grouping is not None:
        return f"grouping: as prescribed, {wiring.n_levers} levers in {wiring.depth} tiers, {steel}"
    return (
        f"grouping: {wiring.n_levers} levers in {wiring.depth} tiers, {steel}, the least of all neighbour groupings "
        "within the limits"
    )
