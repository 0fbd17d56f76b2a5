"""What keeping a rig hands on."""

from __future__ import annotations

from dataclasses import dataclass

from rigdesign.levers.model import Rig


@dataclass(frozen=True)
class MovedPivot:
    """A pivot that is drilled anew: places [m] in the old piece's frame, counted from hole A along u and v.

    `distance` [m] is from the old hole to the new one, centre to centre, and `required` [m] what there must be between
    them for the steel to be used again.  Where it is not kept a new piece of the same outer holes is needed.
    """

    piece: str
    hole: str
    old_u: float
    old_v: float
    new_u: float
    new_v: float
    distance: float
    required: float

    @property
    def keeps_distance(self) -> bool:
        """Whether the steel can be drilled anew."""
        # a hole drilled right at the distance must not fail by rounding
        return self.distance >= self.required * (1 - 1e-9)


@dataclass(frozen=True)
class Kept:
    """A rig that exists under a new target: same pads, levers and lengths, and as few pivots drilled anew as found.

    `before` is the band use of the old pivots under the new target, `after` that of the rig as drilled anew, both as
    this stage judges them; the check has the last word.  Proven before drilling: the bands ask for at least
    `fewest_new` pieces made new, and, with no more than these, for at least `fewest_moved` pivots drilled anew in old
    steel; where no pivots at all keep the bands, that is what it takes to come close to the least band use.  `words`
    says what was done and proven.
    """

    rig: Rig
    moved: tuple[MovedPivot, ...]
    before: float
    after: float
    fewest_new: int
    fewest_moved: int
    words: str
