"""Which subsets a set has, and in which two or three parts it can be split: index tables, made once for each size.

A subset of n items is a mask: bit i for item i.  The parts of a subset of k items are known by local masks, bit j for
its j-th item in order, so that all subsets of one size share one table of splits.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache, cached_property
from itertools import combinations
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

Masks = NDArray[np.int64]


class Singles(NamedTuple):
    """Splits with parts of one item: whether each split is one (n_splits,), and for those that are the item's place.

    `position` (n_single, parts) counts from 0 in the order of the items; −1 is a part of several items.
    """

    split: NDArray[np.bool_]
    position: Masks


@dataclass(frozen=True)
class Splits:
    """Splits of k items: local masks of `pairs` (n_pairs, 2) and of `triples` (n_triples, 3), the most even first."""

    pairs: Masks
    triples: Masks

    @cached_property
    def single_pairs(self) -> Singles:
        """Which pairs have a part of one item."""
        return _singles(self.pairs)

    @cached_property
    def single_triples(self) -> Singles:
        """Which triples have a part of one item."""
        return _singles(self.triples)


@dataclass(frozen=True)
class Ring:
    """All subsets of `size` items.

    `members` (n_subsets, size) are their items, `masks` (n_subsets,) their masks, `spread` (n_subsets, 2^size) the
    masks of their own subsets by local mask.
    """

    size: int
    members: Masks
    masks: Masks
    spread: Masks


@cache
def splits_of(size: int) -> Splits:
    """Every split of `size` items into two and into three parts, each once; the part with the first item stands first.

    >>> splits_of(3).pairs.tolist(), splits_of(3).triples.tolist()
    ([[1, 6], [3, 4], [5, 2]], [[1, 2, 4]])
    """
    whole = (1 << size) - 1
    first = np.arange(1, whole, 2, dtype=np.int64)
    pairs = np.stack([first, whole - first], axis=1)
    triples = [np.empty((0, 3), dtype=np.int64)]
    for one in first.tolist():
        rest = whole - one
        if rest.bit_count() < 2:
            continue
        lowest = rest & -rest
        others = rest - lowest
        second = _subsets(others)[:-1] + lowest
        triples.append(np.stack([np.full(second.size, one), second, rest - second], axis=1))
    return Splits(_even_first(pairs), _even_first(np.concatenate(triples)))


def _singles(parts: Masks) -> Singles:
    single = (parts & (parts - 1)) == 0
    split = single.any(axis=1)
    bit = np.log2(parts[split]).astype(np.int64)
    return Singles(split, np.where(single[split], bit, -1))


def _subsets(mask: int) -> Masks:
    """Subsets of a mask, ascending, the whole mask last."""
    result = np.zeros(1, dtype=np.int64)
    for bit in range(mask.bit_length()):
        if mask >> bit & 1:
            result = np.concatenate([result, result + (1 << bit)])
    return result


def _even_first(parts: Masks) -> Masks:
    counts = np.sort(popcount(parts), axis=1)
    order = np.lexsort((parts[:, 0], counts[:, -1] - counts[:, 0]))
    parts = np.ascontiguousarray(parts[order])
    parts.setflags(write=False)
    return parts


def popcount(masks: Masks) -> Masks:
    """Number of items in each mask, any shape."""
    result = np.zeros(masks.shape, dtype=np.int64)
    for bit in range(int(masks.max(initial=0)).bit_length()):
        result += masks >> bit & 1
    return result


@cache
def ring(n_items: int, size: int) -> Ring:
    """All subsets of `size` of `n_items` items."""
    members = np.array(list(combinations(range(n_items), size)), dtype=np.int64)
    spread = np.zeros((len(members), 1), dtype=np.int64)
    for column in members.T:
        spread = np.concatenate([spread, spread + (1 << column)[:, None]], axis=1)
    return Ring(size, members, np.ascontiguousarray(spread[:, -1]), spread)


def rings(n_items: int) -> Iterator[Ring]:
    """The subsets of two items and more, smaller ones first."""
    for size in range(2, n_items + 1):
        yield ring(n_items, size)
