"""Pads in plan to join and to drill, and all trees over a few of them, told apart from the package's own search."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from itertools import combinations
from typing import Any

import numpy as np
import shapely
from factories import make_levers, make_pads
from hand_plan_rigs import forces, outline, plan_brief, surface
from numpy.typing import ArrayLike

from rigdesign.brief.model import Brief
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.target import build_target

Nest = Any

WIDE = outline(((-1.0, -4.0), (6.0, -4.0), (6.0, 4.0), (-1.0, 4.0)), "plate.csv")


def brief_for(x: ArrayLike, y: ArrayLike, force: ArrayLike, **changes: Any) -> Brief:
    """A brief for a wide surface whose target are these forces; `pads` and the rest are changes of [levers]."""
    pads = changes.pop("pads", {})
    brief = plan_brief(
        surface(outline=WIDE, left=-1.0, right=6.0, axis=None),
        loads=(forces(x, y, force),),
        pads=make_pads(**{"places": "fixed", "length": 0.01, "width": 0.01, "gap": 0.0, **pads}),
        levers=make_levers(),
    )
    return replace(brief, levers=replace(brief.levers, **changes))


def plan_of(x: ArrayLike, y: ArrayLike, force: ArrayLike, may_move: bool = False, **changes: Any) -> PadPlan:
    """A plan with given pads whose jack stands at their force centroid."""
    x, y, force = (np.array(column, dtype=float) for column in (x, y, force))
    target = build_target(brief_for(x, y, force, **changes))
    jack = float((force * x).sum() / force.sum()), float((force * y).sum() / force.sum())
    proof = Proof(0.0, 0.0, 0.0, "", "", 0.0, 0.0, 0.0)
    return PadPlan(target, x, y, force, force, *jack, may_move, proof, ())


def scattered(count: int, seed: int, **changes: Any) -> PadPlan:
    """Unequal pads, scattered over 2 m × 0.8 m, root to tip."""
    random = np.random.default_rng(seed)
    x, y = random.uniform(0.0, 2.0, count), random.uniform(-0.3, 0.5, count)
    order = np.lexsort((y, x))
    return plan_of(x[order], y[order], random.uniform(100.0, 300.0, count), **changes)


def gridded(rows: int, columns: int, pitch: float = 0.6, **changes: Any) -> PadPlan:
    """Equal pads on a grid of `rows` along x and `columns` along y."""
    x, y = (grid.ravel() for grid in np.meshgrid(np.arange(rows) * pitch, np.arange(columns) * pitch, indexing="ij"))
    return plan_of(x, y, np.full(x.size, 120.0), **changes)


def every_tree(pads: tuple[int, ...], plates: bool) -> Iterator[Nest]:
    """Every tree over some pads, as nested tuples, groups of two and, with plates, of three."""
    if len(pads) == 1:
        yield pads[0]
        return
    first, rest = pads[0], pads[1:]
    for parts in _parts(rest, plates):
        mine = (first, *parts[0])
        for one in every_tree(mine, plates):
            for others in _products(parts[1:], plates):
                yield (one, *others)


def _parts(rest: tuple[int, ...], plates: bool) -> Iterator[tuple[tuple[int, ...], ...]]:
    """Ways to split what stands beside the first pad: its own companions, then one or two other groups."""
    for size in range(len(rest)):
        for own in combinations(rest, size):
            others = tuple(pad for pad in rest if pad not in own)
            yield own, others
            if plates and len(others) > 1:
                for more in range(len(others) - 1):
                    for second in combinations(others[1:], more):
                        third = tuple(pad for pad in others[1:] if pad not in second)
                        yield own, (others[0], *second), third


def _products(groups: tuple[tuple[int, ...], ...], plates: bool) -> Iterator[tuple[Nest, ...]]:
    if not groups:
        yield ()
        return
    for one in every_tree(groups[0], plates):
        for others in _products(groups[1:], plates):
            yield (one, *others)


class Looked:
    """A tree looked at by definition: steel, tiers, shapes by tier, and the limits that its pieces need."""

    def __init__(self, plan: PadPlan, nest: Nest) -> None:
        self.plan, self.nest = plan, nest
        self.steel, self.depth, self.ratio, self.longest = 0.0, 0, 1.0, 0.0
        self.shortest, self.flattest = np.inf, np.inf
        self.lonely = 0
        self.shapes: dict[int, list[Any]] = {}
        self._look(nest, 1)

    def _look(self, nest: Nest, tier: int) -> tuple[float, np.ndarray]:
        plan = self.plan
        if isinstance(nest, int):
            return float(plan.force[nest]), np.array([plan.x[nest], plan.y[nest]])
        ends = [self._look(part, tier + 1) for part in nest]
        places = np.array([place for _, place in ends])
        load = np.array([force for force, _ in ends])
        pivot = (load[:, None] * places).sum(axis=0) / load.sum()
        reach = np.linalg.norm(places - pivot, axis=1)
        self.depth = max(self.depth, tier)
        self.shortest = min(self.shortest, reach.min())
        sides = [np.linalg.norm(p - q) for p, q in combinations(places, 2)]
        self.longest = max(self.longest, *sides)
        if len(nest) == 2:
            a, b = reach
            self.ratio = max(self.ratio, max(a, b) / min(a, b))
            self.steel += (load.sum() * a * b / (a + b)) ** (2 / 3) * (a + b)
            self.shapes.setdefault(tier, []).append(shapely.LineString(places))
        else:
            self.steel += float(((load * reach) ** (2 / 3) * reach).sum())
            self.flattest = min(self.flattest, 2 * shapely.Polygon(places).area / max(sides) ** 2)
            self.shapes.setdefault(tier, []).append(shapely.Polygon(places))
        self.lonely += self._without_partner([part for part in nest if isinstance(part, int)])
        return float(load.sum()), pivot

    def _without_partner(self, pads: list[int]) -> int:
        x, y = self.plan.x, self.plan.y
        return sum(
            not any(p != q and abs(y[p] - y[q]) >= abs(x[p] - x[q]) for q in pads)
            for p in pads
        )  # fmt: skip

    @property
    def closest(self) -> float:
        """Least distance between two pieces of one tier [m]."""
        pairs = [(p, q) for shapes in self.shapes.values() for p, q in combinations(shapes, 2)]
        return min((p.distance(q) for p, q in pairs), default=np.inf)

    def keeps(self) -> bool:
        """Whether the tree keeps the limits of the brief."""
        rules = self.plan.target.brief.levers
        return (
            self.ratio <= rules.ratio_limit
            and self.shortest >= max(rules.shortest_arm, rules.drill_step)
            and self.longest <= rules.longest
            and (rules.tiers is None or self.depth <= rules.tiers)
            and self.flattest >= 0.05
        )


def all_looked(plan: PadPlan) -> list[Looked]:
    """All trees over the pads of a plan that keep the limits of its brief."""
    trees = every_tree(tuple(range(plan.n_pads)), plan.target.brief.levers.plates)
    looked = (Looked(plan, nest) for nest in trees)
    return [tree for tree in looked if tree.keeps()]
