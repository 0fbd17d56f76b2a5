"""The levers turned: where members come to lie against one another, and which pairs come closest.

Model.  The tree hangs on its jack, which stands still.  Every lever turns about its pivot by any angle from −φ to φ,
each for itself, φ being what the brief allows; plates tilt about each of their three edges.  Links stay plumb: what
hangs at a hole moves with it, upwards, downwards and a little sideways, and does not turn with the lever.  So do pads:
what a lever turns for is that the specimen bends, and its pads go with it.  Two pads are never set against each other
here, nor what is pinned together.  Links in two holes of one piece keep the distance of these holes however it turns:
they are a class of their own.

Of each pair the turns −φ, 0 and φ of the two members are taken as they are (plates: about each edge; all 49 of two
plates), and so is the place of all that hangs below one on the other.  The levers that lie between the two, and the
one that both hang on, move one against the other anywhere in a box: by at most r sin φ up and down and by r (1 − cos φ)
inwards each, r being their arm.  The box holds all angles between as well, and a little more: distances can come out
too small by at most the boxes' Σ r (1 − cos φ).  Trees of different jacks move apart from each other.
"""

from __future__ import annotations

import math
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.checks.hardware.solids import Member
from rigdesign.target.curve import Floats

Whole = NDArray[np.intp]
Truths = NDArray[np.bool_]
MOST_STATES = 7
"""At rest, and turned either way about three axes."""


def rotation(axis: Floats, angle: float) -> Floats:
    """Return the matrix (3, 3) that turns row vectors, v @ matrix, by an angle [rad] about a unit axis (3,).

    >>> (np.array([1.0, 0.0, 0.0]) @ rotation(np.array([0.0, 0.0, 1.0]), math.pi / 2)).round(12).tolist()
    [0.0, 1.0, 0.0]
    """
    x, y, z = axis
    cross = np.array([[0.0, z, -y], [-z, 0.0, x], [y, -x, 0.0]])
    return np.asarray(np.eye(3) + math.sin(angle) * cross + (1 - math.cos(angle)) * cross @ cross)


def states(member: Member, turn: float) -> Floats:
    """Return the turns of a member (n, 3, 3): as it is at rest, then by ± `turn` [rad] about each of its axes."""
    turned = [rotation(axis, sign * turn) for axis in member.axes for sign in (-1.0, 1.0)] if turn else []
    return np.array([np.eye(3), *turned])


def play(member: Member, arm: Floats, turn: float) -> Floats:
    """The box (2, 3) [m] in which a hole at `arm` (3,) from the pivot moves, or the one of two holes against another.

    About one axis the arm's part across it turns.  About a level axis in any direction it is some part of the arm, so
    that the sideways movement lies on a circle which has −arm (1 − cos φ) for a diameter.
    """
    box = np.zeros((2, 3))
    if not turn or not len(member.axes):
        return box
    if len(member.axes) == 1:
        across = arm - (arm @ member.axes[0]) * member.axes[0]
        inward = -(1 - math.cos(turn)) * across
        box[0], box[1] = np.minimum(inward, 0.0), np.maximum(inward, 0.0)
    else:
        across = arm
        inward = -(1 - math.cos(turn)) * arm
        size = 0.5 * float(np.hypot(inward[0], inward[1])) * np.array([1.0, 1.0, 0.0])
        box[0], box[1] = 0.5 * inward - size, 0.5 * inward + size
    rise = float(np.hypot(across[0], across[1])) * math.sin(turn)
    box[:, 2] = -rise, rise
    return box


class Moves:
    """How each pair of members may move one against the other, beyond their own turns.

    `low`, `high` (n, n, 3) [m] bound the movement of the second against the first (first < second in the list).  Where
    the first carries the second, the movement of the hole is among it; `via` (n, n) is then that hole's index, −1 else,
    and `hole_boxes`, `hole_shifts` say what of it comes from the first one's own turn.
    """

    def __init__(self, listed: tuple[Member, ...], turn: float) -> None:
        """Work out the boxes of all members with every lever turned by up to `turn` [rad]."""
        self.listed, self.turn = listed, turn
        n = len(listed)
        self.index = {member.name: i for i, member in enumerate(listed)}
        self.place = np.array([member.place for member in listed])
        self.apart, self.beside = _apart(listed, self.index)
        self.via = np.full((n, n), -1, dtype=np.int8)
        self.hole_boxes, self.hole_shifts = self._holes()
        self.total = self._totals()
        self.low = self.total[None, :, 0] - self.total[:, None, 1]
        self.high = self.total[None, :, 1] - self.total[:, None, 0]
        if turn:
            for i, member in enumerate(listed):
                if len(member.axes):
                    self._below(i)

    def _totals(self) -> Floats:
        """The box (n, 2, 3) in which each member's place moves in all, the jack standing still."""
        total = np.zeros((len(self.listed), 2, 3))
        for i, member in enumerate(self.listed):
            if member.above:
                above = self.index[member.above]
                total[i] = total[above] + self.hole_boxes[above, member.end]
        return total

    @cached_property
    def _ends(self) -> Whole:
        """Index (n,) of the first member after all that hangs on each: those that hang on it follow it in the list."""
        ends = np.arange(1, len(self.listed) + 1)
        for i in range(len(self.listed) - 1, -1, -1):
            above = self.listed[i].above
            if above:
                ends[self.index[above]] = max(ends[self.index[above]], ends[i])
        return ends

    def groups(self, i: int) -> tuple[tuple[int, int, int], ...]:
        """The hole, first and last + 1 index of what hangs at each hole of a piece."""
        first: dict[int, list[int]] = {}
        for j in range(i + 1, int(self._ends[i])):
            if self.listed[j].above == self.listed[i].name:
                first.setdefault(self.listed[j].end, []).append(j)
        return tuple((end, own[0], int(max(self._ends[own]))) for end, own in first.items())

    def _below(self, i: int) -> None:
        """Bound the movements of all pairs that have this piece, or what hangs at its holes, for their nearest tie."""
        groups, total = self.groups(i), self.total
        for end, start, stop in groups:
            self.via[i, start:stop] = end
            self.low[i, start:stop] = total[start:stop, 0] - total[i, 0]
            self.high[i, start:stop] = total[start:stop, 1] - total[i, 1]
        for _, start, stop in groups:
            for _, other, last in groups:
                # what hangs at one hole has no arm from the one to the other
                box = play(self.listed[i], self.listed[other].arm - self.listed[start].arm, self.turn)
                own, others = total[start:stop] - total[start], total[other:last] - total[other]
                self.low[start:stop, other:last] = others[None, :, 0] - own[:, None, 1] + box[0]
                self.high[start:stop, other:last] = others[None, :, 1] - own[:, None, 0] + box[1]

    def own_turn(self, first: Whole, second: Whole, state: Whole) -> tuple[Floats, Floats]:
        """What of the movement comes from the first one's own turn: its box (m, 2, 3), and where it is (m, 3) [m]."""
        via = self.via[first, second]
        carried = via >= 0
        boxes = np.where(carried[:, None, None], self.hole_boxes[first, via], 0.0)
        return boxes, np.where(carried[:, None], self.hole_shifts[first, via, state], 0.0)

    def _holes(self) -> tuple[Floats, Floats]:
        """Of each member's holes A, B, C the box (n, 3, 2, 3) in which it moves, its shift (n, 3, 7, 3) by state."""
        n = len(self.listed)
        boxes, shifts = np.zeros((n, 3, 2, 3)), np.zeros((n, 3, MOST_STATES, 3))
        for member in self.listed:
            if member.above:
                i = self.index[member.above]
                boxes[i, member.end] = play(self.listed[i], member.arm, self.turn)
                turned = states(self.listed[i], self.turn)
                shifts[i, member.end, : len(turned)] = member.arm @ turned - member.arm
        return boxes, shifts


def _apart(listed: tuple[Member, ...], index: dict[str, int]) -> tuple[Truths, Truths]:
    """Which pairs (n, n), first < second, are to keep apart, and which sit side by side in one piece."""
    n = len(listed)
    apart, beside = np.ones((n, n), dtype=bool), np.zeros((n, n), dtype=bool)
    for i, member in enumerate(listed):
        for name in member.joined:
            apart[i, index[name]] = apart[index[name], i] = False
        for name in member.beside:
            beside[i, index[name]] = beside[index[name], i] = True
    pads = np.flatnonzero([member.name.startswith("pad ") for member in listed])
    apart[np.ix_(pads, pads)] = False
    return np.triu(apart & ~beside, 1), np.triu(beside, 1)
