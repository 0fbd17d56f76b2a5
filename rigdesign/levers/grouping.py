"""Who hangs with whom: the grouping of least steel estimate within the limits of the levers, or the prescribed one."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np

from rigdesign.brief.model import LeverRules
from rigdesign.errors import BriefError
from rigdesign.findings import Refusal
from rigdesign.levers.neighbours import Best, Join, Stretches, added, best_tree, stacked, worst
from rigdesign.levers.weighing import StockLine
from rigdesign.levers.wiring import Levers, Wiring, from_grouping, ideal_levers, quotient
from rigdesign.pads.model import PadPlan
from rigdesign.target.curve import Floats

LIMIT_SLACK = 1e-9
"""A lever that misses a limit by less than this fraction keeps it: the sums that it comes from are rounded."""

EMPTY_PAD = 1e-9
"""A pad with less than this fraction of the mean force carries nothing, and no lever can hold it."""


def group_pads(plan: PadPlan, stock: StockLine | None = None) -> Wiring | Refusal:
    """Join the pads of a plan by levers.

    Without a prescribed grouping, the neighbour grouping of least steel estimate
    Σ (P·ab/(a+b))^(2/3)·(a+b), or with a stock of least mass, among all that keep ratio limit, shortest arm, longest
    lever and tiers; it is the optimum, not a guess.  A prescribed one is obeyed and held to the same limits.  Raises
    BriefError where it names the wrong pads.
    """
    rules, x, force = plan.target.brief.levers, plan.x, np.abs(plan.force)
    empty = np.flatnonzero(force <= EMPTY_PAD * force.mean())
    if empty.size and plan.n_pads > 1:
        return empty_pad(int(empty[0]) + 1)
    if rules.grouping is not None:
        return _prescribed(plan, rules)
    # shares rather than forces: twice the load must not decide a tie otherwise
    pads = Stretches(x, force / force.sum())
    best = Best(np.inf, None)
    if stock is not None:
        # arms with room for their eyes, if there can be any
        roomy = replace(rules, shortest_arm=max(rules.shortest_arm, min(stock.least_arm, rules.longest / 2)))
        best = cheapest(pads, roomy, stock.scaled(float(force.sum()), 1.0))
    if best.wiring is None:
        best = cheapest(pads, rules, None if stock is None else stock.scaled(float(force.sum()), 1.0))
    return best.wiring if best.wiring is not None else why_none(pads, rules)


def cheapest(pads: Stretches, rules: LeverRules, stock: StockLine | None = None) -> Best:
    """Neighbour grouping of least steel estimate, or of least mass out of a stock, within the limits."""

    def own(length: int) -> Floats:
        value = pads.steel(length) if stock is None else pads.mass(length, stock)
        return np.where(allowed(*pads.arms(length), rules), value, np.inf)

    best = best_tree(pads.x.size, own, added)
    if rules.tiers is None or (best.wiring is not None and best.wiring.depth <= rules.tiers):
        return best
    return best_tree(pads.x.size, own, added, rules.tiers)


def allowed(a: Floats, b: Floats, rules: LeverRules) -> np.ndarray:
    """Whether levers of arms a, b [m], any shape, keep ratio limit, shortest arm and longest lever; no arm is zero."""
    shorter, longer = np.minimum(a, b), np.maximum(a, b)
    slack = 1.0 + LIMIT_SLACK
    return np.asarray(
        (shorter > 0)
        & (longer <= rules.ratio_limit * shorter * slack)
        & (shorter * slack >= rules.shortest_arm)
        & (a + b <= rules.longest * slack)
    )


@dataclass(frozen=True)
class Limit:
    """One limit of the levers: its key, its words, how to lift it, and how to ask what it would have to be.

    `measure(a, b)` gives the value of a lever that is to be made small, `shown` puts the limit or a needed value into
    words.
    """

    key: str
    lifted: Callable[[LeverRules], LeverRules]
    is_given: Callable[[LeverRules], bool]
    measure: Callable[[Floats, Floats], Floats]
    join: Join
    value: Callable[[LeverRules], float]
    shown: Callable[[float], str]
    verb: str


def _ratio(a: Floats, b: Floats) -> Floats:
    return quotient(np.maximum(a, b), np.minimum(a, b))


def millimetres(length: float) -> str:
    """A length of a lever in words [given in m]: "60 mm"."""
    value = 1000 * length
    return f"{value:.4g} mm" if value < 1e4 else f"{value:.0f} mm"


LIMITS = (
    Limit(
        "ratio_limit",
        lambda rules: replace(rules, ratio_limit=np.inf),
        lambda rules: bool(np.isfinite(rules.ratio_limit)),
        _ratio,
        worst,
        lambda rules: rules.ratio_limit,
        lambda value: f"{value:.4g}",
        "raise",
    ),
    Limit(
        "shortest_arm",
        lambda rules: replace(rules, shortest_arm=0.0),
        lambda rules: rules.shortest_arm > 0,
        lambda a, b: -np.minimum(a, b),
        worst,
        lambda rules: -rules.shortest_arm,
        lambda value: millimetres(-value),
        "lower",
    ),
    Limit(
        "longest",
        lambda rules: replace(rules, longest=np.inf),
        lambda rules: bool(np.isfinite(rules.longest)),
        lambda a, b: a + b,
        worst,
        lambda rules: rules.longest,
        millimetres,
        "raise",
    ),
    Limit(
        "tiers",
        lambda rules: replace(rules, tiers=None),
        lambda rules: rules.tiers is not None,
        lambda a, b: np.ones(np.shape(a)),
        stacked,
        lambda rules: float(rules.tiers or 0),
        lambda value: f"{value:.0f}",
        "raise",
    ),
)


def least_of(pads: Stretches, rules: LeverRules, limit: Limit) -> Best:
    """Tree that needs the least of one limit while the others hold; its value is what that limit would have to be."""
    lifted = limit.lifted(rules)

    def own(length: int) -> Floats:
        a, b = pads.arms(length)
        return np.where(allowed(a, b, lifted), limit.measure(a, b), np.inf)

    # a single pad has no lever, so it needs less than any lever does
    alone = 0.0 if limit.join is stacked else -np.inf
    return best_tree(pads.x.size, own, limit.join, lifted.tiers, alone)


def why_none(pads: Stretches, rules: LeverRules) -> Refusal:
    """Say which limit leaves no grouping: each is lifted in turn, and what it would have to be is found exactly."""
    given = [limit for limit in LIMITS if limit.is_given(rules)]
    helps = [(limit, best) for limit in given if (best := least_of(pads, rules, limit)).wiring is not None]
    limits = [f"{limit.key} {limit.shown(limit.value(rules))}" for limit in given]
    text = f"no neighbour grouping of the {pads.x.size} pads keeps the limits of the levers"
    if not helps:
        return Refusal(
            "levers",
            f"{text}, and lifting one of them alone does not help",
            " with ".join(limits) if limits else "arms above zero",
            _each_alone(pads, rules, given),
            "ease two of these limits at once, change the number of pads, or ask for more even pad forces",
        )
    needed = "; ".join(
        f"with the other limits kept, {limit.key} would have to be {limit.shown(best.value)}{_where(pads, limit, best)}"
        for limit, best in helps
    )
    ways = [f"{limit.verb} {limit.key} to {limit.shown(_eased(limit, best.value))}" for limit, best in helps]
    return Refusal(
        "levers",
        text,
        " or ".join(f"{limit.key} {limit.shown(limit.value(rules))}" for limit, _ in helps),
        needed,
        ", or ".join(ways) + ", or change the number of pads",
    )


def _each_alone(pads: Stretches, rules: LeverRules, given: list[Limit]) -> str:
    """What each limit would have to be if there were no other; only those that even then are broken."""
    broken = []
    for limit in given:
        free = rules
        for other in LIMITS:
            free = other.lifted(free)
        best = least_of(pads, free, limit)
        if best.wiring is not None and best.value > limit.value(rules) * (1 + LIMIT_SLACK):
            broken.append(f"{limit.key} would have to be {limit.shown(best.value)}{_where(pads, limit, best)}")
    if not broken:
        return "each of these limits can be kept by itself, but not all together"
    return "even without any other limit " + ", and ".join(broken)


def _eased(limit: Limit, value: float) -> float:
    """A needed value with 0.1 % to spare, so that the printed digits suffice; tiers are whole."""
    return value if limit.key == "tiers" else value + 1e-3 * abs(value)


def _where(pads: Stretches, limit: Limit, best: Best) -> str:
    """The lever at which the tree needs the value."""
    if limit.key == "tiers" or best.wiring is None:
        return ""
    levers = ideal_levers(best.wiring, pads.x, pads.force)
    row = int(np.argmax(limit.measure(levers.a, levers.b)))
    return f" at the lever that joins {joined(best.wiring, row)}"


def joined(wiring: Wiring, row: int) -> str:
    """What a lever joins, in words: "pads 1 to 3 and pad 4"."""
    return " and ".join(pads_in_words(wiring.pads_under(int(end))) for end in wiring.ends[row])


def pads_in_words(pads: np.ndarray) -> str:
    """Pads (from 0, in order) in words: "pads 1 to 3"."""
    numbers = pads + 1
    if numbers.size == 1:
        return f"pad {numbers[0]}"
    if numbers[-1] - numbers[0] + 1 == numbers.size:
        return f"pads {numbers[0]} to {numbers[-1]}"
    return "pads " + ", ".join(str(number) for number in numbers)


def _prescribed(plan: PadPlan, rules: LeverRules) -> Wiring | Refusal:
    force = np.abs(plan.force)
    grouping = rules.grouping
    assert grouping is not None
    try:
        # one pad alone may be written [1]: it hangs on the jack
        wiring = from_grouping(grouping[0] if plan.n_pads == 1 and len(grouping) == 1 else grouping, plan.x, force)
    except ValueError as error:
        where = f"{plan.target.brief.source.brief_name}, [levers] grouping"
        raise BriefError(str(error), where=where, remedy="name the pads 1 to the pad count in nested pairs") from error
    broken = broken_limit(wiring, ideal_levers(wiring, plan.x, force), rules)
    return broken if broken is not None else wiring


def broken_limit(wiring: Wiring, levers: Levers, rules: LeverRules) -> Refusal | None:
    """Refusal that names the first lever of a prescribed grouping that breaks a limit; None where all keep them."""
    text = "the prescribed grouping breaks a limit of the levers"
    for row in range(wiring.n_levers):
        a, b = levers.a[row], levers.b[row]
        for limit in LIMITS:
            value, bound = float(limit.measure(a, b)), limit.value(rules)
            given = limit.is_given(rules) or limit.key == "ratio_limit"
            if limit.key == "tiers":
                value = float(wiring.tier[row])
            if given and not value <= bound + LIMIT_SLACK * abs(bound):
                name = f"lever {row + 1}, which joins {joined(wiring, row)}"
                remedy = f"{limit.verb} {limit.key} to {limit.shown(_eased(limit, value))} or group the pads otherwise"
                has = f"{name}, needs {limit.key} {limit.shown(value)}"
                return Refusal("levers", text, f"{limit.key} {limit.shown(bound)}", has, remedy)
        if min(a, b) <= 0:
            name = f"lever {row + 1}, which joins {joined(wiring, row)}"
            return Refusal("levers", text, "arms above zero", f"{name}, has no length", "group the pads otherwise")
    return None


def empty_pad(pad: int) -> Refusal:
    """Refusal for a pad (from 1) that carries nothing."""
    return Refusal(
        "levers",
        f"pad {pad} carries nothing, and no lever can hang a pad that carries nothing",
        "every pad carries a force",
        f"pad {pad} with 0 N",
        "ask for fewer pads, for a least_force, or for more ease",
    )
