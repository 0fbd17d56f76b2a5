"""Good trees over many pads: open a branch down to a few items, join them anew in the best way, again and again.

The items are chosen around two pads that are neighbours in plan but hang far apart in the tree: the branch that holds
both is opened along the way to each, and the rest stays as it is.  What is found in this way for one set of items is
the best there is for it (subsets.py), so it is never tried twice.  When nothing improves any more, a branch is joined
in a slightly wrong way and the search goes on from there; it returns to the best tree if that leads nowhere.

Work is counted, never timed; which pads are tried follows a fixed sequence, so the same pads give the same tree.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import NamedTuple

import numpy as np

from rigdesign.levers.descent import MODULUS, MULTIPLIER
from rigdesign.levers.surface.clashes import Shape, clashing_in_tiers
from rigdesign.levers.surface.lattice import splits_of
from rigdesign.levers.surface.limits import Limits
from rigdesign.levers.surface.nodes import Maker, Node, items_of, pads_of
from rigdesign.levers.surface.repair import CLASH, Repair
from rigdesign.levers.surface.subsets import BROKEN, Problem, Solved, steel_rule
from rigdesign.target.curve import Floats

MOST_ITEMS, MOST_ITEMS_PLATES = 10, 9
"""So many items are joined anew at a time, without and with plates."""

NEAREST = 8
"""The partner of a pad is one of so many nearest ones."""

GAIN = 1e-9
"""What is improved must improve by this fraction of the steel, so that rounding cannot keep the search going."""

PATIENCE = 3
"""A search that has not improved for this many tries a pad starts again from a tree that is slightly wrong."""

NOISE = 0.35
"""How far a wrong tree may be off: the fraction by which what links cost is changed."""

REPAIRS = 60
"""Unfinished trees that are looked at to find a branch that keeps clear of the others."""

OVERHEAD = 4_000
"""What one try costs whatever its size, in splits looked at."""


WHOLE = 20
"""What it costs to look at a whole tree, in splits a pad."""


class Sequence:
    """A fixed sequence of numbers that look like chance: Park and Miller, as in `rigdesign.levers.descent`."""

    def __init__(self, start: int = 1) -> None:
        """Start the sequence from a number above zero."""
        self._state = start

    def below(self, count: int) -> int:
        """A number from 0 to count − 1."""
        self._state = self._state * MULTIPLIER % MODULUS
        return self._state % count

    def fractions(self, count: int) -> Floats:
        """Numbers from 0 to 1, (count,)."""
        return np.array([self.below(10_000) / 9_999 for _ in range(count)])


class Found(NamedTuple):
    """The best tree of a search, its value with clashes, and the work done in splits looked at."""

    root: Node
    value: float
    work: int
    tries: int


class _Opened(NamedTuple):
    """A branch opened down to items: its piece, the tier it stands in, and the items."""

    top: Node
    tier: int
    items: list[Node]


class Placed(NamedTuple):
    """A piece, or the link of a pad where links count: its tier, its shape, and the pads under it as a mask."""

    tier: int
    shape: Shape
    mask: int


def clash_count(root: Node, limits: Limits) -> int:
    """Number of pairs of pieces of one tier, and of links and pieces where links count, that clash."""
    return len(clashing_pairs(placed(root, limits.links), limits.clearance))


def clashing_pairs(shapes: list[Placed], clearance: float) -> list[tuple[int, int]]:
    """Pairs of placed shapes that clash, in order."""
    return clashing_in_tiers([one.tier for one in shapes], [one.shape for one in shapes], clearance)


def placed(root: Node, links: bool, without: Node | None = None, tier: int = 1) -> list[Placed]:
    """All pieces of a tree whose top stands in `tier`, and links of pads where they count, one branch left out."""
    result = []
    waiting = [(root, tier)]
    while waiting:
        node, at = waiting.pop()
        if node is without:
            continue
        if node.kids:
            result.append(Placed(at, node.shape, node.mask))
            waiting += [(kid, at + 1) for kid in node.kids]
        elif links:
            result.append(Placed(at, ((node.x, node.y),), node.mask))
    return result


class Search:
    """A search over the trees of one field of pads, from a first tree on."""

    def __init__(self, maker: Maker, root: Node, most_work: int) -> None:
        """Start from a tree and look at no more than so many splits."""
        self.maker, self.root, self.most_work = maker, root, most_work
        self.sequence = Sequence()
        self.value = self._full_value(self.root)
        self.work, self.tries = 0, 0
        self._clashing: list[int] = []
        self._known: dict[frozenset[int], float] = {}

    def run(self, progress: Callable[[float], None] | None = None) -> Found:
        """Search until the work is used up or, for few pads, until all was tried."""
        best, stale = (self.root, self.value), 0
        patience = PATIENCE * self.maker.field.n_pads
        while self.work < self.most_work:
            stale = 0 if self._try() else stale + 1
            if stale >= patience:
                if self.value < best[1] - GAIN * (best[1] % CLASH):
                    best = self.root, self.value
                else:
                    self.root, self.value = best
                    self._note_clashes()
                self._disturb()
                stale = 0
            if progress is not None and self.tries % 50 == 0:
                progress(min(1.0, self.work / self.most_work))
        if self.value < best[1]:
            best = self.root, self.value
        return Found(*best, self.work, self.tries)

    def _full_value(self, root: Node) -> float:
        tiers = self.maker.limits.tiers
        over = 0 if tiers is None else max(0, root.height - tiers)
        return root.value + CLASH * clash_count(root, self.maker.limits) + BROKEN * over

    def _try(self) -> bool:
        """Join some items anew; whether the tree became better."""
        self.tries += 1
        opened = self._opened()
        self.work += OVERHEAD // 8
        key = frozenset(item.mask for item in opened.items)
        inner = sum(item.value for item in opened.items)
        small = GAIN * (self.value % CLASH)
        if len(opened.items) < 3 or self._known.get(key, -np.inf) > opened.top.value - inner - small:
            return False
        solved = self._solved(opened)
        if self.maker.limits.tiers is None:
            self._known[key] = solved.value - inner
        if not solved.value < opened.top.value - small:
            return False
        branch = self.maker.nested(solved.nest, opened.items)
        if self._taken(opened, branch, small):
            return True
        return self._repaired(opened, solved, small)

    def _taken(self, opened: _Opened, branch: Node, small: float) -> bool:
        """Whether a branch makes the tree better; it is then in the tree."""
        self.work += WHOLE * self.maker.field.n_pads
        root = self.maker.replaced(self.root, branch)
        value = self._full_value(root)
        if not value < self.value - small:
            return False
        self.root, self.value = root, value
        self._note_clashes()
        return True

    def _note_clashes(self) -> None:
        """Note the pads under pieces that clash: they are where to look first."""
        self._clashing = []
        if self.value % BROKEN < CLASH:
            return
        shapes = placed(self.root, self.maker.limits.links)
        for pair in clashing_pairs(shapes, self.maker.limits.clearance):
            self._clashing += [pad for k in pair for pad in pads_of(shapes[k].mask)]

    def _repaired(self, opened: _Opened, solved: Solved, small: float) -> bool:
        """Take the best branch that keeps clear of the others, if there is one."""
        limits = self.maker.limits
        rest = placed(self.root, limits.links, opened.top)
        others = len(clashing_pairs(rest, limits.clearance))
        limit = self.value - CLASH * others - (self.root.value - opened.top.value) - small
        beside = [(one.tier, one.shape) for one in rest]
        repair = Repair(solved, opened.items, opened.tier, beside, limits.clearance, limits.links)
        found = repair.best(limit, REPAIRS)
        self.work += found.looked_at * OVERHEAD // 8
        if found.nest is None:
            return False
        return self._taken(opened, self.maker.nested(found.nest, opened.items), small)

    def _solved(self, opened: _Opened, noise: Floats | None = None) -> Solved:
        maker = self.maker
        items = items_of(opened.items)
        partner = None
        if maker.partner is not None:
            pads = np.array([item.pad for item in opened.items])
            partner = maker.partner[np.ix_(pads, pads)] & items.is_pad & items.is_pad[:, None]
        tiers = None if maker.limits.tiers is None else max(0, maker.limits.tiers - opened.tier + 1)
        problem = Problem(items, maker.limits, steel_rule(maker.limits), partner, noise)
        table = splits_of(items.count)
        splits = 2 * len(table.pairs) + (3 * len(table.triples) if maker.limits.plates else 0)
        self.work += OVERHEAD + splits * (1 if tiers is None else 1 + tiers // 2)
        return problem.solve(tiers)

    def _disturb(self) -> None:
        """Join some items in a slightly wrong way."""
        opened = self._opened()
        if len(opened.items) < 3:
            return
        noise = 1.0 + NOISE * self.sequence.fractions(1 << len(opened.items))
        nest = self._solved(opened, noise)
        if np.isfinite(nest.value):
            self.root = self.maker.replaced(self.root, self.maker.nested(nest.nest, opened.items))
            self.value = self._full_value(self.root)
            self._note_clashes()

    def _opened(self) -> _Opened:
        """Open the branch around a pad and one of its neighbours."""
        field, sequence = self.maker.field, self.sequence
        most = MOST_ITEMS_PLATES if self.maker.limits.plates else MOST_ITEMS
        one = sequence.below(field.n_pads)
        if self._clashing and sequence.below(2):
            one = self._clashing[sequence.below(len(self._clashing))]
        other = int(field.near[one, sequence.below(min(NEAREST, field.n_pads - 1))])
        top, tier = self.root, 1
        while True:
            both = [kid for kid in top.kids if kid.mask >> one & 1 and kid.mask >> other & 1]
            # small branches say little: stay where there are enough pads
            if not both or both[0].mask.bit_count() < most or sequence.below(4) == 0:
                break
            top, tier = both[0], tier + 1
        items = list(top.kids)
        wanted = (1 << one) | (1 << other)
        while len(items) < most:
            open_now = [k for k, item in enumerate(items) if item.kids and item.mask & wanted]
            if not open_now or sequence.below(6) == 0:
                open_now = [k for k, item in enumerate(items) if item.kids]
            if not open_now:
                break
            k = open_now[sequence.below(len(open_now))]
            if len(items) - 1 + len(items[k].kids) > most:
                break
            items[k : k + 1] = items[k].kids
        return _Opened(top, tier, items)


def first_tree(maker: Maker) -> Node:
    """A first tree: the pads halved by load again and again, across their longer side, as evenly as the tiers ask."""
    tiers = maker.limits.tiers
    kinds = 3 if maker.limits.plates else 2
    count = maker.field.n_pads
    least = int(np.ceil(np.log(count) / np.log(kinds) - 1e-9)) if count > 1 else 0
    return _halved(maker, list(range(count)), max(least, tiers if tiers is not None else count))


def _halved(maker: Maker, pads: list[int], tiers: int) -> Node:
    if len(pads) == 1:
        return maker.pad(pads[0])
    field = maker.field
    x, y, share = field.x[pads], field.y[pads], field.share[pads]
    keys = (y, x) if np.ptp(x) >= np.ptp(y) else (x, y)
    order = np.lexsort(keys)
    parts = _cut(share[order], tiers, maker.limits.plates)
    kids = [_halved(maker, [pads[k] for k in order[start:end]], tiers - 1) for start, end in parts]
    return maker.piece(tuple(kids))


def _cut(share: Floats, tiers: int, plates: bool) -> list[tuple[int, int]]:
    """Where to cut a row of shares into two, or into three where the tiers left hold no more than plates can join."""
    count = share.size
    most = (3 if plates else 2) ** min(tiers - 1, 40)
    if count > 2 * most:
        third = -(-count // 3)
        return [(0, third), (third, 2 * third), (2 * third, count)]
    low, high = max(1, count - most), min(count - 1, most)
    halves = np.cumsum(share)[low - 1 : high]
    middle = low + int(np.argmin(np.abs(halves - share.sum() / 2)))
    return [(0, middle), (middle, count)]
