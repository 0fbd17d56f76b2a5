"""Why no tree is possible: which limit binds, what it would have to be, and what would help."""

from __future__ import annotations

from dataclasses import dataclass, replace
from math import hypot

import numpy as np

from rigdesign.findings import Refusal
from rigdesign.levers.grouping import millimetres, pads_in_words
from rigdesign.levers.surface.limits import FLATTEST, Limits, is_flat
from rigdesign.levers.surface.nodes import Maker, Node, items_of, pads_of
from rigdesign.levers.surface.subsets import BROKEN, NOTHING, Problem, Rule, steel_rule
from rigdesign.target.curve import Floats

SPARE = 1e-3
"""A remedy asks for this fraction more than what is needed, so that the printed digits suffice."""

STEPS_IN_ARM = 10
"""A remedy asks for a drill step that goes so many times into the shortest arm, so that rounding moves few forces."""

MORE_TIERS = 12
"""A remedy looks for up to so many tiers."""


@dataclass(frozen=True)
class Miss:
    """A limit that a piece does not keep: its key, the piece's value and the limit, both as told."""

    key: str
    value: str
    limit: str
    needed: float


def why_none(maker: Maker, pads: list[Node], best: Node | None = None) -> Refusal:
    """Say which limit leaves no tree.

    For few pads each limit is lifted in turn, and what it would have to be is found exactly; for many, `best` is the
    best tree that was found and what it breaks is said.
    """
    text = f"no tree over the {len(pads)} pads keeps the limits of the levers"
    if best is not None:
        return _found_broken(maker, best, f"{text}, as far as was searched (not proven)")
    limits = maker.limits
    keys = [key for key, given in _given(limits).items() if given]
    helps = [(key, need) for key in keys if (need := _needed(maker, pads, key)) is not None]
    if not helps and (need := _needed(maker, pads, "drill_step")):
        keys, helps = ["drill_step"], [("drill_step", need)]
    shown = {key: _shown(maker, key, _value(limits, key)) for key in keys}
    if not helps:
        all_of = " with ".join(f"{key} {shown[key]}" for key in keys)
        remedy = "ease two of these limits at once, change the number of pads, or ask for more even pad forces"
        remedy = remedy if limits.plates else f"{remedy}; plates = true may help"
        return Refusal("levers", f"{text}, and lifting one of them alone does not help", all_of, "none", remedy)
    best_words = "; ".join(
        f"with the other limits kept, {key} would have to be {_shown(maker, key, need)}" for key, need in helps
    )
    ways = [f"{_VERB[key]} {key} to {_shown(maker, key, _eased(key, need))}" for key, need in helps]
    if not limits.plates:
        ways.append("allow plates (plates = true)")
    limit = " or ".join(f"{key} {shown[key]}" for key, _ in helps)
    return Refusal("levers", text, limit, best_words, ", or ".join([*ways, "change the number of pads"]))


def too_few_tiers(maker: Maker) -> Refusal:
    """Refusal where the pads are more than so many tiers can have."""
    tiers, plates, count = maker.limits.tiers or 0, maker.limits.plates, maker.field.n_pads
    kinds = 3 if plates else 2
    needed = next(more for more in range(tiers + 1, 64) if kinds**more >= count)
    remedy = f"raise tiers to {needed} or more, or take fewer pads"
    return Refusal(
        "levers",
        f"{count} pads are more than hang on so few tiers",
        f"tiers {tiers}",
        f"{tiers} {'tier' if tiers == 1 else 'tiers'} of {'plates' if plates else 'levers'} "
        f"{'holds' if tiers == 1 else 'hold'} {kinds**tiers} pads at most",
        remedy if plates else f"{remedy}, or allow plates (plates = true)",
    )


_VERB = {"ratio_limit": "raise", "shortest_arm": "lower", "longest": "raise", "tiers": "raise", "drill_step": "lower"}


def _given(limits: Limits) -> dict[str, bool]:
    return {
        "ratio_limit": bool(np.isfinite(limits.ratio)),
        "shortest_arm": limits.shortest > 0,
        "longest": bool(np.isfinite(limits.longest)),
        "tiers": limits.tiers is not None,
    }


def _value(limits: Limits, key: str) -> float:
    names = {"ratio_limit": limits.ratio, "shortest_arm": limits.shortest, "longest": limits.longest}
    names["drill_step"] = limits.least
    return names[key] if key in names else float(limits.tiers or 0)


def _shown(maker: Maker, key: str, value: float) -> str:
    if key == "tiers":
        return f"{value:.0f}"
    return f"{value:.4g}" if key == "ratio_limit" else millimetres(value * maker.field.extent)


def _eased(key: str, value: float) -> float:
    if key == "tiers":
        return value
    if key == "drill_step":
        return value / STEPS_IN_ARM
    return value * (1 - SPARE) if key == "shortest_arm" else value * (1 + SPARE)


def _needed(maker: Maker, pads: list[Node], key: str) -> float | None:
    """What a limit would have to be while the others hold; None where no tree keeps the others."""
    lifted = maker.limits.without(key)
    items = items_of(pads)
    if key == "tiers":
        for tiers in range((maker.limits.tiers or 0) + 1, min(len(pads), MORE_TIERS)):
            if Problem(items, lifted, steel_rule(lifted)).solve(tiers).value < BROKEN:
                return float(tiers)
        return None
    none = np.full(items.count, NOTHING)
    solved = Problem(replace(items, value=none), lifted, _least_of(lifted, key)).solve(lifted.tiers)
    if not np.isfinite(solved.value):
        return None
    return -solved.value if key in ("shortest_arm", "drill_step") else solved.value


def _least_of(limits: Limits, key: str) -> Rule:
    """The rule under which a tree's value is what it needs of one limit; infinite where it breaks another."""

    def link(load: Floats, r: Floats) -> Floats:
        own = -r if key in ("shortest_arm", "drill_step") else np.full(r.shape, NOTHING)
        return np.where(r < limits.shortest, np.inf, own)

    def lever(ratio: Floats, length: Floats) -> Floats:
        own = ratio if key == "ratio_limit" else length if key == "longest" else np.full(ratio.shape, NOTHING)
        return np.where((ratio > limits.ratio) | (length > limits.longest), np.inf, own)

    def plate(length: Floats) -> Floats:
        own = length if key == "longest" else np.full(length.shape, NOTHING)
        return np.where(length > limits.longest, np.inf, own)

    return Rule(link, lever, plate, np.maximum)


def joins(node: Node) -> str:
    """A piece in words: "the lever that joins pads 1 to 3 and pad 4"."""
    kind = "plate" if len(node.kids) == 3 else "lever"
    return f"the {kind} that joins " + " and ".join(pads_in_words(_pads(kid)) for kid in node.kids)


def _pads(node: Node) -> np.ndarray:
    return np.array(pads_of(node.mask))


def broken_prescription(maker: Maker, root: Node) -> Refusal | None:
    """Refusal that names the first piece of a prescribed grouping that breaks a limit; None where all keep them."""
    text = "the prescribed grouping breaks a limit of the levers"
    for node, tier in sorted(root.pieces(), key=lambda item: (item[1], item[0].x, item[0].y)):
        for miss in misses(maker, node, tier):
            remedy = "group the pads otherwise"
            if miss.key in _VERB:
                needed = _shown(maker, miss.key, _eased(miss.key, miss.needed))
                remedy = f"{_VERB[miss.key]} {miss.key} to {needed} or {remedy}"
            return Refusal("levers", text, f"{miss.key} {miss.limit}", f"{joins(node)} has {miss.value}", remedy)
    return None


def _found_broken(maker: Maker, root: Node, text: str) -> Refusal:
    """Refusal that names what the best tree found breaks."""
    broken = [(node, miss) for node, tier in root.pieces() for miss in misses(maker, node, tier)]
    keys = sorted({miss.key for _, miss in broken})
    limit = " and ".join(f"{key} {next(miss.limit for _, miss in broken if miss.key == key)}" for key in keys)
    node, miss = broken[0]
    best = f"in the best tree found {len(broken)} limits are missed, the first by {joins(node)}: {miss.value}"
    remedy = f"ease {' or '.join(key for key in keys if key in _VERB) or 'the limits'}, or change the number of pads"
    return Refusal("levers", text, limit, best, remedy if maker.limits.plates else f"{remedy}; plates = true may help")


def misses(maker: Maker, node: Node, tier: int) -> list[Miss]:
    """The limits that a piece in a tier does not keep."""
    limits, kids = maker.limits, node.kids
    reach = [hypot(kid.x - node.x, kid.y - node.y) for kid in kids]
    length = max(hypot(one.x - other.x, one.y - other.y) for one in kids for other in kids)
    result = []

    def miss(key: str, value: float) -> None:
        limit = _shown(maker, key, _value(limits, key))
        result.append(Miss(key, f"{_NAMES[key]} {_shown(maker, key, value)}", limit, value))

    if min(reach) < limits.least:
        arm = millimetres(min(reach) * maker.field.extent)
        limit = millimetres(limits.least * maker.field.extent)
        result.append(Miss("drill_step", f"an arm of {arm}", f"{limit}, the least that an arm can be", 0.0))
    elif min(reach) < limits.shortest:
        miss("shortest_arm", min(reach))
    if len(kids) == 2 and min(reach) > 0 and max(reach) > limits.ratio * min(reach):
        miss("ratio_limit", max(reach) / min(reach))
    if length > limits.longest:
        miss("longest", length)
    if limits.tiers is not None and tier > limits.tiers:
        miss("tiers", float(tier))
    if len(kids) == 3 and is_flat(np.array([kid.x for kid in kids]), np.array([kid.y for kid in kids])):
        result.append(
            Miss(
                "plate",
                "its points nearly in one line",
                f"height {100 * FLATTEST:.0f} % of its longest side or more",
                0.0,
            )
        )
    return result


_NAMES = {"ratio_limit": "a ratio of", "shortest_arm": "an arm of", "longest": "a length of", "tiers": "tier"}
