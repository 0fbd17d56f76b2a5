"""Statics down the tree, from hole positions and jack forces alone.

Each piece is cut free.  With P the load at its pivot, F_i those at its outer holes and (u_i, v_i) the holes seen from
the pivot:

    ΣF_i = P,   ΣF_i u_i = 0,   ΣF_i v_i = 0

A lever takes the first equation and moments along its own line; a plate all three.  Across a lever's own line moments
close where its three holes are in line; where they are not, it rolls, which is a remark.  So each link carries a fixed
fraction of what its piece carries, and pad forces are a matrix times jack forces.
"""

from __future__ import annotations

import numpy as np

from rigdesign.checks.entry import Layout, layout
from rigdesign.checks.model import Statics
from rigdesign.errors import InputError
from rigdesign.levers.model import Rig
from rigdesign.target.curve import Floats


def lever_fractions(a: Floats, b: Floats, h: float = 0.0, turn: float = 0.0) -> tuple[Floats, Floats]:
    """Return the fractions of its load that a lever hands to its ends 1 and 2, links parallel.

        F1 / F2 = (b + h tan φ) / (a − h tan φ),   F1 + F2 = P

    Parameters
    ----------
    a, b
        Arms from the pivot to ends 1 and 2 [m], measured along the lever, (n,).
    h
        Distance of the pivot off the line of the end pins, in the plane in which the lever turns [m].
    turn
        Angle φ by which the lever has turned [rad].  With h = 0 the fractions do not depend on it.

    Examples
    --------
    >>> lever_fractions(np.array([0.6]), np.array([0.4]))
    (array([0.4]), array([0.6]))
    """
    drift = h * np.tan(turn)
    return (b + drift) / (a + b), (a - drift) / (a + b)


def link_fractions(tree: Layout) -> Floats:
    """Return the fraction of its piece's load that each link carries, (n_links,).

    Raises
    ------
    InputError
        Where the end pins of a lever coincide or the three points of a plate lie on one line.
    """
    fractions = np.empty(tree.u.size)
    counts = np.diff(tree.first)
    levers = np.flatnonzero(counts == 2)
    if levers.size:
        along = along_lever(tree)
        a_links, b_links = tree.first[levers], tree.first[levers] + 1
        fractions[a_links], fractions[b_links] = lever_fractions(-along[a_links], along[b_links])
    plates = np.flatnonzero(counts == 3)
    if plates.size:
        links = tree.first[plates][:, None] + np.arange(3)
        system = np.stack([np.ones(links.shape), tree.u[links], tree.v[links]], axis=1)
        _require_area(tree, plates, system)
        wanted = np.broadcast_to(np.array([[1.0], [0.0], [0.0]]), (plates.size, 3, 1))
        fractions[links] = np.linalg.solve(system, wanted)[:, :, 0]
    return fractions


def along_lever(tree: Layout) -> Floats:
    """Return where each outer hole lies along its piece's line from A to B, seen from the pivot [m], (n_links,).

    For plates it is the hole's place along their line from A to B; nothing but levers needs it.
    """
    piece = np.repeat(np.arange(len(tree.pieces)), np.diff(tree.first))
    to_u, to_v = lever_directions(tree)
    return tree.u * to_u[piece] + tree.v * to_v[piece]


def off_line(tree: Layout) -> Floats:
    """Return how far each piece's pivot lies off the line through its holes A and B [m], (n_pieces,), signed."""
    to_u, to_v = lever_directions(tree)
    start = tree.first[:-1]
    return tree.u[start] * to_v - tree.v[start] * to_u


def lever_directions(tree: Layout) -> tuple[Floats, Floats]:
    """Return the unit vector from hole A to hole B of each piece, in its frame: (n_pieces,) each.

    Raises
    ------
    InputError
        Where they coincide.
    """
    start = tree.first[:-1]
    du, dv = tree.u[start + 1] - tree.u[start], tree.v[start + 1] - tree.v[start]
    length = np.hypot(du, dv)
    if (length == 0).any():
        piece = tree.pieces[int(np.argmin(length))]
        raise InputError("two holes of a piece coincide", where=f"rig, {piece.name}", value="A and B")
    return du / length, dv / length


def _require_area(tree: Layout, plates: np.ndarray[tuple[int], np.dtype[np.int64]], system: Floats) -> None:
    """Three points in line (to a millionth of the plate's size) hold a plate in no direction across that line."""
    size = np.max(np.hypot(system[:, 1], system[:, 2]), axis=1)
    flat = np.abs(np.linalg.det(system)) < 1e-6 * size**2
    if flat.any():
        piece = tree.pieces[int(plates[np.argmax(flat)])]
        raise InputError(
            "the three points of a plate lie on one line", where=f"rig, {piece.name}", remedy="use levers instead"
        )


def node_shares(tree: Layout, fractions: Floats) -> Floats:
    """Return the share of each jack's force that reaches each node, pads first: (n_nodes, n_trees)."""
    shares = np.zeros((tree.n_nodes, tree.tops.size))
    shares[tree.tops, np.arange(tree.tops.size)] = 1.0
    for tier in range(1, int(tree.tier.max(initial=0)) + 1):
        links = np.flatnonzero(tree.tier == tier)
        shares[tree.lower[links]] = fractions[links, None] * shares[tree.upper[links]]
    return shares


def share_matrix(rig: Rig) -> Floats:
    """Return the matrix that turns jack forces into pad forces: (n_pads, n_trees)."""
    tree = layout(rig)
    return node_shares(tree, link_fractions(tree))[: tree.n_pads]


def solve_statics(rig: Rig) -> Statics:
    """Solve the statics down every tree of the rig from holes and jack forces, and close them at every pivot.

    Raises
    ------
    InputError
        Where the trees are no trees (see `rigdesign.checks.entry.layout`) or a piece cannot stand.
    """
    tree = layout(rig)
    shares = node_shares(tree, link_fractions(tree))
    jacks = rig.jack_forces
    load = shares @ jacks
    force_left, moment_left = _residuals(tree, load)
    return Statics(
        pad_force=load[: tree.n_pads],
        share=shares[: tree.n_pads].sum(axis=1),
        piece_load={piece.name: float(load[tree.n_pads + i]) for i, piece in enumerate(tree.pieces)},
        force_residual=float(np.max(np.abs(force_left), initial=0.0) / np.max(np.abs(jacks))),
        moment_residual=float(np.max(np.abs(moment_left), initial=0.0)),
    )


def _residuals(tree: Layout, load: Floats) -> tuple[Floats, Floats]:
    """What ΣF [N] and ΣM [over load times length] leave at each pivot: (n_pieces,) and (2, n_pieces), or empty.

    Moments of a lever are taken along its own line, those of a plate about both axes of its frame.
    """
    if not tree.pieces:
        return np.empty(0), np.empty(0)
    start = tree.first[:-1]
    pull = load[tree.lower]
    on_pivot = load[tree.n_pads :]
    force_left = np.add.reduceat(pull, start) - on_pivot
    is_plate = np.repeat(np.diff(tree.first) == 3, np.diff(tree.first))
    lines = np.stack([np.where(is_plate, tree.u, along_lever(tree)), np.where(is_plate, tree.v, 0.0)])
    moments = np.add.reduceat(lines * pull, start, axis=1)
    size = np.maximum.reduceat(np.hypot(tree.u, tree.v), start)
    # a piece that carries nothing leaves nothing over; the divisor only has to be positive there
    scale = np.where(on_pivot == 0, 1.0, np.abs(on_pivot)) * size
    return force_left, moments / scale
