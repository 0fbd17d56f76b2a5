"""The lever tree as drilled, and the rig that holds it.

The tree is a networkx DiGraph from the jack to the pads.  Its nodes are the names that tables use, "jack 1",
"lever 5", "pad 3"; its edges are the links, each with the hole of the upper piece that it hangs in.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import networkx as nx
import numpy as np

from rigdesign.findings import Finding
from rigdesign.pads.model import PadPlan
from rigdesign.target.curve import Floats

HoleName = Literal["pivot", "A", "B", "C"]


@dataclass(frozen=True)
class Hole:
    """A hole of a piece: what it joins ("pad 3", "lever 5", "jack 1"), u, v [m] in its frame, x, y [m] in plan."""

    name: HoleName
    joins: str
    u: float
    v: float
    x: float
    y: float


@dataclass(frozen=True)
class Piece:
    """A lever or plate: its number, tier, what it hangs on, and its holes, the pivot first, then A (inboard), B, …"""

    number: int
    kind: Literal["lever", "plate"]
    tier: int
    parent: str
    holes: tuple[Hole, ...]

    @property
    def name(self) -> str:
        """As tables call it: "lever 5"."""
        return f"lever {self.number}"

    @property
    def pivot(self) -> Hole:
        """The hole it hangs by."""
        return self.holes[0]

    @property
    def ends(self) -> tuple[Hole, ...]:
        """The outer holes."""
        return self.holes[1:]


@dataclass(frozen=True)
class Jack:
    """A jack: its number, place [m] and what hangs on it."""

    number: int
    x: float
    y: float
    carries: str

    @property
    def name(self) -> str:
        """As tables call it: "jack 1"."""
        return f"jack {self.number}"


@dataclass(frozen=True)
class Tree:
    """All that hangs on one jack.  `force` [N] is the jack's, signed as the load is, at the brief's load."""

    jack: Jack
    force: float
    pieces: tuple[Piece, ...]

    @cached_property
    def graph(self) -> nx.DiGraph:
        """The tree as a directed graph, jack to pads; each edge holds the upper piece's `hole` ("" at the jack)."""
        graph = nx.DiGraph()
        graph.add_edge(self.jack.name, self.jack.carries, hole="")
        for piece in self.pieces:
            for hole in piece.ends:
                graph.add_edge(piece.name, hole.joins, hole=hole.name)
        return graph


@dataclass(frozen=True)
class Rig:
    """The whole design: the pad plan it came from, where the pads sit as drilled, and a tree for each jack.

    `pad_x`, `pad_y` [m] are (n_pads,).  `words` says what the search for grouping and holes did, `findings` what it
    remarks.
    """

    plan: PadPlan
    pad_x: Floats
    pad_y: Floats
    trees: tuple[Tree, ...]
    words: str
    findings: tuple[Finding, ...]

    @property
    def jack_forces(self) -> Floats:
        """Force of each jack [N], (n_trees,)."""
        return np.array([tree.force for tree in self.trees])
