"""Where the tree enters the check: is it a tree at all, and what does it look like as arrays?

Nothing that the levers stage computed is taken over but what a drawing shows: which hole joins what, and where the
holes are in each piece's own frame.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import networkx as nx
import numpy as np
from numpy.typing import NDArray

from rigdesign.errors import InputError
from rigdesign.levers.model import Piece, Rig, Tree
from rigdesign.target.curve import Floats

Integers = NDArray[np.int64]
END_NAMES = ("A", "B", "C")


@dataclass(frozen=True)
class Layout:
    """The trees as arrays.

    Nodes are the pads, 0 to n_pads − 1, then the pieces.  A link runs from each outer hole to the node below it, the
    links of a piece side by side.  `tops` (n_trees,) is the node on each jack; `first` (n_pieces + 1,) the index of
    each piece's first link; `upper`, `lower`, `tier` (n_links,) the nodes a link joins and its piece's tier; `u`, `v`
    (n_links,) [m] the hole seen from its piece's pivot, in the piece's frame.
    """

    n_pads: int
    pieces: tuple[Piece, ...]
    tops: Integers
    first: Integers
    upper: Integers
    lower: Integers
    tier: Integers
    u: Floats
    v: Floats

    @property
    def n_nodes(self) -> int:
        """Number of pads and pieces."""
        return self.n_pads + len(self.pieces)


def layout(rig: Rig) -> Layout:
    """Return the rig's trees as arrays.

    Raises
    ------
    InputError
        Where a tree is not an arborescence from its jack to its pads, a pad hangs nowhere or twice, a piece has
        the wrong number of holes, or a number is not finite.
    """
    n_pads = int(rig.pad_x.size)
    pieces = tuple(piece for tree in rig.trees for piece in tree.pieces)
    node = {f"pad {i + 1}": i for i in range(n_pads)}
    for piece in pieces:
        if piece.name in node:
            raise InputError("two pieces of one rig share a number", where=f"rig, {piece.name}")
        node[piece.name] = len(node)
    for piece in pieces:
        _require_holes(piece)
    for tree in rig.trees:
        _require_tree(tree, node)
    _require_all_pads(rig, n_pads)
    return _arrays(rig, pieces, node, n_pads)


def _arrays(rig: Rig, pieces: tuple[Piece, ...], node: dict[str, int], n_pads: int) -> Layout:
    counts = [len(piece.ends) for piece in pieces]
    ends = [(piece, hole) for piece in pieces for hole in piece.ends]
    return Layout(
        n_pads=n_pads,
        pieces=pieces,
        tops=np.array([node[tree.jack.carries] for tree in rig.trees], dtype=np.int64),
        first=np.concatenate([[0], np.cumsum(counts, dtype=np.int64)]).astype(np.int64),
        upper=np.array([node[piece.name] for piece, _ in ends], dtype=np.int64),
        lower=np.array([node[hole.joins] for _, hole in ends], dtype=np.int64),
        tier=np.array([piece.tier for piece, _ in ends], dtype=np.int64),
        u=np.array([hole.u - piece.pivot.u for piece, hole in ends], dtype=float),
        v=np.array([hole.v - piece.pivot.v for piece, hole in ends], dtype=float),
    )


def _require_holes(piece: Piece) -> None:
    """A lever has a pivot, A and B, a plate C too, all at finite places."""
    wanted = END_NAMES[: 2 if piece.kind == "lever" else 3]
    names = tuple(hole.name for hole in piece.holes)
    if names != ("pivot", *wanted):
        raise InputError(
            f"a {piece.kind} has the wrong holes",
            where=f"rig, {piece.name}",
            value=", ".join(names),
            limit=", ".join(("pivot", *wanted)),
        )
    for hole in piece.holes:
        if not np.isfinite([hole.u, hole.v, hole.x, hole.y]).all():
            raise InputError("a hole has no finite place", where=f"rig, {piece.name} hole {hole.name}")


def _require_tree(tree: Tree, node: dict[str, int]) -> None:
    """The graph is an arborescence from the jack, its leaves pads, its tiers and parents as the pieces say."""
    where = f"rig, {tree.jack.name}"
    graph = tree.graph
    for name in _joined(tree):
        if name not in node:
            raise InputError("a hole joins what is not there", where=where, value=name)
    links = 1 + sum(len(piece.ends) for piece in tree.pieces)
    if graph.number_of_edges() != links or not nx.is_arborescence(graph):
        raise InputError(
            "what hangs on the jack is not a tree",
            where=where,
            limit="every lever and pad hangs on exactly one hole, and all on the jack",
            remedy="look for a pad or lever that is joined twice, or to itself, or not at all",
        )
    if tree.jack.name not in graph or graph.in_degree(tree.jack.name) != 0:
        raise InputError("the tree does not start at the jack", where=where)
    depth = nx.single_source_shortest_path_length(graph, tree.jack.name)
    for piece in tree.pieces:
        parent = next(iter(graph.predecessors(piece.name)))
        if parent != piece.parent or depth[piece.name] != piece.tier:
            raise InputError(
                "a piece's parent or tier is not what the holes say",
                where=f"rig, {piece.name}",
                value=f"{piece.parent}, tier {piece.tier}",
                limit=f"{parent}, tier {depth[piece.name]}",
            )
        pivot = next(hole for hole in piece.holes if hole.name == "pivot")
        if pivot.joins != parent:
            raise InputError(
                "a pivot joins another than what the piece hangs on",
                where=f"rig, {piece.name} hole pivot",
                value=pivot.joins,
                limit=parent,
            )
    pieces = {piece.name for piece in tree.pieces}
    for name in graph.nodes:
        if name.startswith("lever") and name not in pieces:
            raise InputError("a lever hangs on another jack's tree than its own", where=where, value=name)


def _joined(tree: Tree) -> Iterator[str]:
    yield tree.jack.carries
    for piece in tree.pieces:
        for hole in piece.ends:
            yield hole.joins


def _require_all_pads(rig: Rig, n_pads: int) -> None:
    """Every pad hangs on exactly one hole or jack of the whole rig, and every jack pulls with some force."""
    hung = [name for tree in rig.trees for name in _joined(tree) if name.startswith("pad")]
    missing = sorted(set(range(1, n_pads + 1)) - {int(name.split()[1]) for name in hung})
    if missing:
        raise InputError("a pad hangs on nothing", where="rig", value=f"pad {missing[0]}")
    if len(hung) != n_pads:
        twice = next(name for name in hung if hung.count(name) > 1)
        raise InputError("a pad hangs on two jacks' trees", where="rig", value=twice)
    for tree in rig.trees:
        if not np.isfinite(tree.force) or tree.force == 0:
            raise InputError("the jack has no force", where=f"rig, {tree.jack.name}", value=f"{tree.force} N")
    if not (np.isfinite(rig.pad_x).all() and np.isfinite(rig.pad_y).all()):
        raise InputError("a pad has no finite place", where="rig")
