"""What the search for few part marks hands on."""

from __future__ import annotations

from dataclasses import dataclass

from rigdesign.levers.model import Rig


@dataclass(frozen=True)
class Tally:
    """How many different levers and plates a rig has, and how well it follows its target.

    `band_use` is the largest error over its band; `moment`, `shear` and `torsion` are the largest errors as fractions
    of the peaks of the target's curves, torsion None on line rigs.  They are those of this stage's own judge; the check
    has the last word.
    """

    different: int
    band_use: float
    moment: float
    shear: float
    torsion: float | None


@dataclass(frozen=True)
class FewMarks:
    """A rig whose levers and plates were made alike where that could be.

    `groups` holds the names of pieces that are alike, in the order of the rig, single ones among them.  `least` is a
    number of different pieces below which no arms within the tolerance can go, proven.  `words` says what was done and
    what it cost.
    """

    rig: Rig
    groups: tuple[tuple[str, ...], ...]
    before: Tally
    after: Tally
    least: int
    words: str
