"""The links of a rig and what they join: numbered from the jack, and the forces in them with the rig's own weight.

The builder's road from holes to forces: it walks down the tree piece by piece.  The check has a road of its own.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Literal

import numpy as np

from rigdesign.hardware.model import Mass
from rigdesign.levers.model import HoleName, Piece, Rig, Tree
from rigdesign.words import STANDARD_GRAVITY

Place = tuple[str, HoleName | Literal[""]]
"""What a link is pinned to and its hole there, "" at pads and jacks."""


@dataclass(frozen=True)
class LinkPlace:
    """A link by its number: what it hangs on (`upper`) and what hangs on it (`lower`); `tree` counts from 0."""

    number: int
    upper: Place
    lower: Place
    tree: int

    @property
    def name(self) -> str:
        """As tables call it: "link 5"."""
        return f"link {self.number}"


@dataclass(frozen=True)
class LinkForce:
    """Force in a link, signed along z [N]: `rate` · jack force + `upper` or `lower` at that end."""

    rate: float
    upper: float
    lower: float


@dataclass(frozen=True)
class Wired:
    """A rig with its links in their order."""

    rig: Rig
    links: tuple[LinkPlace, ...]

    @cached_property
    def pieces(self) -> dict[str, Piece]:
        """Levers and plates by name."""
        return {piece.name: piece for tree in self.rig.trees for piece in tree.pieces}

    @cached_property
    def above(self) -> dict[str, LinkPlace]:
        """The link that a piece or pad hangs by, by the name of what hangs."""
        return {link.lower[0]: link for link in self.links}

    @cached_property
    def below(self) -> dict[Place, LinkPlace]:
        """The link that hangs on a place."""
        return {link.upper: link for link in self.links}

    def place_of(self, name: str) -> tuple[float, float]:
        """Return x, y [m] in plan of a pad, of a jack, or of a piece's pivot."""
        if name.startswith("pad "):
            pad = int(name[4:]) - 1
            return float(self.rig.pad_x[pad]), float(self.rig.pad_y[pad])
        if name.startswith("jack "):
            jack = next(tree.jack for tree in self.rig.trees if tree.jack.name == name)
            return jack.x, jack.y
        return self.pieces[name].pivot.x, self.pieces[name].pivot.y


def wired(rig: Rig) -> Wired:
    """Return the rig with its links: jack to piece first, then piece by piece, holes A, B, C; jack after jack."""
    links: list[LinkPlace] = []
    for index, tree in enumerate(rig.trees):
        links.append(LinkPlace(len(links) + 1, (tree.jack.name, ""), _lower(tree.jack.carries), index))
        for piece in tree.pieces:
            for hole in piece.ends:
                links.append(LinkPlace(len(links) + 1, (piece.name, hole.name), _lower(hole.joins), index))
    return Wired(rig, tuple(links))


def side_of(rig: Rig) -> int:
    """Return the side of the specimen on which a rig stands: +1 that of +z, −1 that of −z."""
    pull = 1 if rig.plan.target.brief.pads.action == "pull" else -1
    return pull * (1 if float(rig.jack_forces.sum()) >= 0 else -1)


def weights_rise(rig: Rig) -> bool:
    """Whether gravity pulls from the specimen towards the jack, as it does where the rig stands below."""
    return side_of(rig) * rig.plan.target.brief.specimen.gravity > 0


def _lower(name: str) -> Place:
    return (name, "" if name.startswith("pad ") else "pivot")


def link_forces(wiring: Wired, masses: Mapping[str, Mass]) -> dict[str, LinkForce]:
    """Return the force in every link by its name; members without an entry in `masses` have no weight."""
    gravity = wiring.rig.plan.target.brief.specimen.gravity * STANDARD_GRAVITY
    forces: dict[str, LinkForce] = {}
    handed: dict[Place, tuple[float, float]] = {(tree.jack.name, ""): (1.0, 0.0) for tree in wiring.rig.trees}
    for link in wiring.links:  # a piece stands before what hangs on it
        rate, fixed = handed[link.upper]
        lower = fixed + gravity * _mass(masses, link.name).mass
        forces[link.name] = LinkForce(rate, fixed, lower)
        piece = wiring.pieces.get(link.lower[0])
        if piece is not None:
            own = _mass(masses, piece.name)
            parts = _split(piece, rate, lower, gravity * own.mass, own)
            handed |= {(piece.name, hole.name): part for hole, part in zip(piece.ends, parts, strict=True)}
    return forces


def _mass(masses: Mapping[str, Mass], name: str) -> Mass:
    return masses.get(name, _NO_MASS)


_NO_MASS = Mass(0.0, 0.0, 0.0)


def _split(piece: Piece, rate: float, fixed: float, weight: float, own: Mass) -> list[tuple[float, float]]:
    """What each end gets of the load at the pivot and of the piece's own weight: (rate, fixed) each.

    A lever's moments close along its own line, a plate's about both axes of its frame.
    """
    u = np.array([hole.u - piece.pivot.u for hole in piece.ends])
    v = np.array([hole.v - piece.pivot.v for hole in piece.ends])
    if len(piece.ends) == 2:
        along = np.array([u[1] - u[0], v[1] - v[0]])
        along = along / np.hypot(along[0], along[1])
        s = u * along[0] + v * along[1]
        centre = own.u * along[0] + own.v * along[1]
        system = np.array([[1.0, 1.0], s])
        right = np.array([[rate, fixed + weight], [0.0, weight * centre]])
    else:
        system = np.array([np.ones(3), u, v])
        right = np.array([[rate, fixed + weight], [0.0, weight * own.u], [0.0, weight * own.v]])
    return [(float(row[0]), float(row[1])) for row in np.linalg.solve(system, right)]


def tree_weight(tree: Tree, links: tuple[LinkPlace, ...], index: int, masses: Mapping[str, Mass]) -> float:
    """Return what all that hangs on a tree's jack weighs [N]: its pieces, links and pads."""
    names = [piece.name for piece in tree.pieces]
    for link in links:
        if link.tree == index:
            names.append(link.name)
            if link.lower[0].startswith("pad "):
                names.append(link.lower[0])
    return STANDARD_GRAVITY * sum(_mass(masses, name).mass for name in names)


def peak_jacks(wiring: Wired, masses: Mapping[str, Mass]) -> list[float]:
    """Return the jacks' forces [N] at which the pads together bring what the peak of the test asks of them.

    The jacks carry the trees as well, and keep the ratio that they have at the brief's load.
    """
    rig, target = wiring.rig, wiring.rig.plan.target
    weight = sum(tree_weight(tree, wiring.links, index, masses) for index, tree in enumerate(rig.trees))
    wanted = target.brief.peak * target.resultant - target.gravity.total
    factor = (wanted - target.brief.specimen.gravity * weight) / float(rig.jack_forces.sum())
    return [factor * tree.force for tree in rig.trees]


def design_loads(wiring: Wired, masses: Mapping[str, Mass], jacks: Sequence[float]) -> dict[str, float]:
    """Return the load of every link [N] as a magnitude under the jacks' forces [N], the larger of its two ends."""
    forces = link_forces(wiring, masses)
    loads = {}
    for link in wiring.links:
        force = forces[link.name]
        part = force.rate * jacks[link.tree]
        loads[link.name] = max(abs(part + force.upper), abs(part + force.lower))
    return loads
