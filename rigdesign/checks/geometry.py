"""Whether the links hang plumb: the holes as the pieces' frames give them against what they join, in plan."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from rigdesign.levers.model import Hole, Piece, Rig


@dataclass(frozen=True)
class Lean:
    """How far a link leans: from a hole of `upper` to what it joins, `dx`, `dy` [m] in plan."""

    upper: str
    hole: str
    joins: str
    dx: float
    dy: float

    @property
    def size(self) -> float:
        """Distance in plan [m]."""
        return float(np.hypot(self.dx, self.dy))

    @property
    def where(self) -> str:
        """The link in words."""
        start = f"{self.upper} hole {self.hole}" if self.hole else self.upper
        return f"the link from {start} to {self.joins}"


def leans(rig: Rig) -> tuple[Lean, ...]:
    """Return the lean of every link of the rig, jack links included, tree by tree.

    A piece is laid where its pivot is in plan, along the line from its hole A to its hole B in plan, and its outer
    holes follow from its own frame; they are compared with the pivots and pads that they join.
    """
    return tuple(_leans(rig))


def _leans(rig: Rig) -> Iterator[Lean]:
    for tree in rig.trees:
        place = {piece.name: (piece.pivot.x, piece.pivot.y) for piece in tree.pieces}
        place |= {
            f"pad {i + 1}": (float(x), float(y)) for i, (x, y) in enumerate(zip(rig.pad_x, rig.pad_y, strict=True))
        }
        jack = tree.jack
        x, y = place[jack.carries]
        yield Lean(jack.name, "", jack.carries, x - jack.x, y - jack.y)
        for piece in tree.pieces:
            for hole in piece.ends:
                hole_x, hole_y = laid(piece, hole)
                x, y = place[hole.joins]
                yield Lean(piece.name, hole.name, hole.joins, x - hole_x, y - hole_y)


def laid(piece: Piece, hole: Hole) -> tuple[float, float]:
    """Return where a hole of a piece is in plan [m], from its u and v and the piece's pivot and direction."""
    a, b = piece.ends[:2]
    frame, plan = np.arctan2(b.v - a.v, b.u - a.u), np.arctan2(b.y - a.y, b.x - a.x)
    turn = plan - frame
    cos, sin = (1.0, 0.0) if turn == 0 else (np.cos(turn), np.sin(turn))
    u, v = hole.u - piece.pivot.u, hole.v - piece.pivot.v
    return float(piece.pivot.x + cos * u - sin * v), float(piece.pivot.y + sin * u + cos * v)
