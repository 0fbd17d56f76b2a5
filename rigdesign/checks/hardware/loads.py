"""Forces with the rig's own weight, from hole positions, masses and jack forces alone.

A piece that hands P on from its pivot and weighs w, its centre at (u_c, v_c) from the pivot, is cut free:

    ΣF_i = P + γ w,   ΣF_i u_i = γ w u_c,   ΣF_i v_i = γ w v_c

with γ the sign of gravity along z.  A lever takes the first equation and moments along its own line.  A link adds its
weight on its own line.  Everything is linear: each force is a fixed part plus a rate times its own jack's force.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.checks.entry import Layout, layout
from rigdesign.checks.hardware.model import Loads
from rigdesign.checks.statics import along_lever, lever_directions, link_fractions, node_shares
from rigdesign.errors import InputError
from rigdesign.hardware.model import Mass
from rigdesign.levers.model import Rig
from rigdesign.target.curve import Floats
from rigdesign.words import STANDARD_GRAVITY

Integers = NDArray[np.int64]


@dataclass(frozen=True)
class Hanging:
    """Who hangs by which link, as arrays: pads and pieces are nodes, pads first, as in `Layout`.

    Links are in the order of their numbers: each jack's own, then those of its pieces, hole by hole.  `upper`, `hole`
    and `lower` name what a link joins; `tree` (n_links,) counts trees from 0; `node` (n_links,) is the node that hangs
    by the link and `link_of` (n_nodes,) the link that a node hangs by; `outer` (n_links,) is the place of a link among
    those of `Layout`, −1 for a jack's own.
    """

    layout: Layout
    upper: tuple[str, ...]
    hole: tuple[str, ...]
    lower: tuple[str, ...]
    tree: Integers
    node: Integers
    link_of: Integers
    outer: Integers

    @property
    def pad_link(self) -> Integers:
        """The link of each pad, (n_pads,)."""
        return self.link_of[: self.layout.n_pads]

    def link_at(self, piece: str, hole: str) -> int:
        """The link, counted from 0, that is pinned to a hole of a piece."""
        if hole == "pivot":
            return self.lower.index(piece)
        return next(
            i for i, (name, at) in enumerate(zip(self.upper, self.hole, strict=True)) if (name, at) == (piece, hole)
        )


def hanging(rig: Rig) -> Hanging:
    """Return who hangs by which link.

    Raises
    ------
    InputError
        Where the rig's trees are no trees.
    """
    tree = layout(rig)
    node = {f"pad {i + 1}": i for i in range(tree.n_pads)}
    node |= {piece.name: tree.n_pads + i for i, piece in enumerate(tree.pieces)}
    rows: list[tuple[str, str, str, int, int]] = []
    outer = 0
    for number, one in enumerate(rig.trees):
        rows.append((one.jack.name, "", one.jack.carries, number, -1))
        for piece in one.pieces:
            for hole in piece.ends:
                rows.append((piece.name, hole.name, hole.joins, number, outer))
                outer += 1
    lower = np.array([node[row[2]] for row in rows], dtype=np.int64)
    link_of = np.empty(tree.n_nodes, dtype=np.int64)
    link_of[lower] = np.arange(len(rows))
    return Hanging(
        layout=tree,
        upper=tuple(row[0] for row in rows),
        hole=tuple(row[1] for row in rows),
        lower=tuple(row[2] for row in rows),
        tree=np.array([row[3] for row in rows], dtype=np.int64),
        node=lower,
        link_of=link_of,
        outer=np.array([row[4] for row in rows], dtype=np.int64),
    )


def own_weight(rig: Rig, masses: Mapping[str, Mass]) -> Loads:
    """Return pad and link forces with own weight, affine in the jack forces.

    Parameters
    ----------
    rig
        The rig; gravity is that of its brief's specimen.
    masses
        Mass [kg] and centre [m] of every member by name: "lever 5", "link 3", "pad 2".  A centre is seen in the
        member's own frame.

    Raises
    ------
    InputError
        Where a member has no mass, or one that is negative or not finite, or the rig's trees are no trees.
    """
    hung = hanging(rig)
    tree, fractions = hung.layout, link_fractions(hung.layout)
    gravity = STANDARD_GRAVITY * rig.plan.target.brief.specimen.gravity
    link_weight = gravity * _mass(masses, [f"link {i + 1}" for i in range(len(hung.lower))])
    pad_weight = gravity * _mass(masses, [f"pad {i + 1}" for i in range(tree.n_pads)])
    piece_weight = gravity * _mass(masses, [piece.name for piece in tree.pieces])
    per_weight = _weight_fractions(tree, masses)
    upper = np.zeros(len(hung.lower))
    hung_in = np.flatnonzero(hung.outer >= 0)
    for link in hung_in[np.argsort(tree.tier[hung.outer[hung_in]], kind="stable")]:
        outer = hung.outer[link]
        above = hung.link_of[tree.upper[outer]]
        own = piece_weight[tree.upper[outer] - tree.n_pads]
        upper[link] = fractions[outer] * (upper[above] + link_weight[above]) + per_weight[outer] * own
    shares = node_shares(tree, fractions)
    rate = shares[hung.node, hung.tree]
    lower = upper + link_weight
    weight = np.zeros(len(rig.trees))
    np.add.at(weight, hung.tree, link_weight)
    np.add.at(weight, hung.tree[hung.link_of], np.concatenate([pad_weight, piece_weight]))
    return Loads(
        pad_rate=rate[hung.pad_link],
        pad_fixed=lower[hung.pad_link] + pad_weight,
        link_rate=rate,
        upper_fixed=upper,
        lower_fixed=lower,
        tree=tuple(int(number) for number in hung.tree),
        weight=weight,
    )


def pad_forces(loads: Loads, hung: Hanging, jack: Floats) -> Floats:
    """Return what the specimen feels at each pad [N], (n_pads,), under jack forces (n_trees,) [N]."""
    return loads.pad_rate * jack[hung.tree[hung.pad_link]] + loads.pad_fixed


def link_forces(loads: Loads, jack: Floats) -> tuple[Floats, Floats]:
    """Return the forces [N] at the upper and lower end of each link, (n_links,) each, under jack forces (n_trees,)."""
    pulled = loads.link_rate * jack[np.array(loads.tree)]
    return pulled + loads.upper_fixed, pulled + loads.lower_fixed


def _mass(masses: Mapping[str, Mass], names: list[str]) -> Floats:
    for name in names:
        if name not in masses:
            raise InputError("a member has no mass", where=f"hardware, {name}")
        mass = masses[name]
        if not (np.isfinite([mass.mass, mass.u, mass.v]).all() and mass.mass >= 0):
            raise InputError(
                "a member's mass or centre is no number that can be used",
                where=f"hardware, {name}",
                value=f"{mass.mass} kg at {mass.u} m, {mass.v} m",
                limit="a finite mass, 0 kg or more, with a finite centre",
            )
    return np.array([masses[name].mass for name in names], dtype=float)


def _weight_fractions(tree: Layout, masses: Mapping[str, Mass]) -> Floats:
    """The part of its piece's own weight that each outer hole carries, (n_links of the layout,)."""
    result = np.empty(tree.u.size)
    if not tree.pieces:
        return result
    along, (to_u, to_v) = along_lever(tree), lever_directions(tree)
    for i, piece in enumerate(tree.pieces):
        rows = slice(int(tree.first[i]), int(tree.first[i + 1]))
        centre = masses[piece.name]
        if piece.kind == "lever":
            at = (centre.u - piece.pivot.u) * to_u[i] + (centre.v - piece.pivot.v) * to_v[i]
            low, high = along[rows]
            result[rows] = (high - at) / (high - low), (at - low) / (high - low)
        else:
            system = np.stack([np.ones(3), tree.u[rows], tree.v[rows]])
            result[rows] = np.linalg.solve(system, np.array([1.0, centre.u - piece.pivot.u, centre.v - piece.pivot.v]))
    return result
