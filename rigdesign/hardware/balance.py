"""Counterweights: masses at the holes of levers and plates that bring what hangs on them into balance.

With p the holes seen from the pivot, W_i what hangs at each, m the piece's own mass with its centre at c, a piece is
in balance where

    m c + Σ W_i p_i = 0

Where it is not, mass goes to the end hole of a lever's lighter side, or to the one or two holes of a plate that need
least of it.  From the bottom up, as a counterweight hangs on all pieces above it.  With every piece in balance, the
pads share what weighs on them just as they share the jack's force.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from itertools import combinations

import numpy as np

from rigdesign.hardware.model import Link, Mass
from rigdesign.levers.model import HoleName, Piece, Rig
from rigdesign.target.curve import Floats

ROUNDING = 1e-12
"""Of what weighs on a piece times its size: a moment below this is no moment."""


def counterweights(
    rig: Rig, masses: Mapping[str, Mass], links: Sequence[Link], *, whole: bool
) -> dict[str, dict[HoleName, float]]:
    """Return the masses [kg] by piece and hole that bring every piece into balance about its pivot.

    Parameters
    ----------
    rig
        The rig.
    masses
        Mass and centre of every member by name, counterweights that it has already among them.
    links
        The rig's links, as `Hardware.links`.
    whole
        Whether all that hangs on a piece is balanced, links and pads among it, or just the piece's own steel.

    Returns
    -------
    dict
        Only pieces that need some, in the rig's order.  A plate whose pivot lies outside the triangle of its holes may
        have no mass that would do; it is left out.
    """
    hangs_by = {(link.upper.to, link.upper.at): link for link in links}
    pieces = {piece.name: piece for tree in rig.trees for piece in tree.pieces}
    total: dict[str, float] = {}
    found: dict[str, dict[HoleName, float]] = {}
    for piece in sorted(pieces.values(), key=lambda piece: -piece.tier):
        hung = []
        for hole in piece.ends:
            link = hangs_by[(piece.name, hole.name)]
            below = total[hole.joins] if hole.joins in total else masses[hole.joins].mass
            hung.append(masses[link.name].mass + below)
        own = _balancing(piece, masses[piece.name], np.array(hung) if whole else np.zeros(len(hung)))
        total[piece.name] = masses[piece.name].mass + sum(hung) + sum(own.values())
        if own:
            found[piece.name] = own
    return {name: found[name] for name in pieces if name in found}


def with_counterweights(
    rig: Rig, masses: Mapping[str, Mass], added: Mapping[str, Mapping[HoleName, float]]
) -> dict[str, Mass]:
    """Return the masses with counterweights [kg] by piece and hole added to their pieces."""
    result = dict(masses)
    for tree in rig.trees:
        for piece in tree.pieces:
            for hole in piece.holes:
                more = added.get(piece.name, {}).get(hole.name, 0.0)
                if more > 0:
                    result[piece.name] = _joined(result[piece.name], Mass(more, hole.u, hole.v))
    return result


def _joined(one: Mass, other: Mass) -> Mass:
    mass = one.mass + other.mass
    return Mass(
        mass, (one.mass * one.u + other.mass * other.u) / mass, (one.mass * one.v + other.mass * other.v) / mass
    )


def _balancing(piece: Piece, mass: Mass, hung: Floats) -> dict[HoleName, float]:
    """Masses at the outer holes of one piece, at which `hung` (n_ends,) [kg] hangs already; none where it balances."""
    places = np.array([[hole.u - piece.pivot.u, hole.v - piece.pivot.v] for hole in piece.ends])
    centre = np.array([mass.u - piece.pivot.u, mass.v - piece.pivot.v])
    if piece.kind == "lever":
        # moments count along the line from A to B alone
        line = places[1] - places[0]
        line = line / np.hypot(line[0], line[1])
        places, centre = (places @ line)[:, None], np.array([centre @ line])
    moment = mass.mass * centre + hung @ places
    size = (mass.mass + float(hung.sum())) * float(np.abs(places).max())
    if np.abs(moment).max() <= ROUNDING * size:
        return {}
    best: tuple[float, dict[HoleName, float]] | None = None
    for holes in combinations(range(len(piece.ends)), places.shape[1]):
        arms = places[list(holes)].T
        if abs(np.linalg.det(arms)) <= ROUNDING * float(np.abs(places).max()) ** len(holes):
            continue
        need = np.linalg.solve(arms, -moment)
        if (need >= -ROUNDING * abs(need).max()).all():
            least = float(need.sum())
            if best is None or least < best[0] * (1 - ROUNDING):
                named = {piece.ends[i].name: float(m) for i, m in zip(holes, need, strict=True)}
                best = (least, {name: m for name, m in named.items() if m > ROUNDING * least})
    return {} if best is None else best[1]
