"""What is said of a rig that is kept: which pivots move, what is too close, what is proven."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

import numpy as np

from rigdesign.display import counted, show
from rigdesign.findings import Finding, Refusal
from rigdesign.levers.keep.model import MovedPivot
from rigdesign.levers.keep.programme import Choice, Programme
from rigdesign.levers.keep.standing import only_tree
from rigdesign.levers.model import Piece, Rig

APART = 2.0
"""Hole diameters, centre to centre, below which two holes of a piece are too close; common practice."""

MOST_NAMES = 8
"""So many pivots are named in one sentence."""


def remarks(rig: Rig, moved: Sequence[MovedPivot], diameters: Mapping[str, float]) -> Iterator[Finding]:
    """Yield what is to be said of a kept rig's pivots, not numbered yet."""
    pieces = {piece.name: piece for piece in only_tree(rig).pieces}
    if not moved:
        yield Finding("levers", "note", "rig", "the kept rig serves this target as it is: no pivot is drilled anew")
        return
    named = ", ".join(_move(pivot, pieces[pivot.piece]) for pivot in moved[:MOST_NAMES])
    more = f" and {len(moved) - MOST_NAMES} more" if len(moved) > MOST_NAMES else ""
    yield Finding(
        "levers",
        "note",
        "rig",
        f"the kept rig gets {counted(len(moved), 'new pivot')}: {named}{more}",
        counted(len(moved), "new pivot"),
        f"{counted(len(pieces), 'piece')}",
        "mark the old holes as out of use; links lean by what pivots moved",
    )
    for pivot in moved:
        if not pivot.keeps_distance:
            yield _too_near_old(pivot, pieces[pivot.piece])
        yield from _too_near_outer(pivot, pieces[pivot.piece], diameters)


def _move(pivot: MovedPivot, piece: Piece) -> str:
    """A moved pivot in words: how far, and towards which hole."""
    away = show(pivot.distance, "length", unit="mm")
    if piece.kind == "lever":
        return f"{pivot.piece} by {away} towards {'B' if pivot.new_u > pivot.old_u else 'A'}"
    return f"{pivot.piece} by {away}"


def _too_near_old(pivot: MovedPivot, piece: Piece) -> Finding:
    return Finding(
        "levers",
        "warning",
        pivot.piece,
        "the new pivot is so near the old one that the holes would weaken each other: a new "
        f"{piece.kind} with the same outer holes is needed",
        show(pivot.distance, "length", unit="mm"),
        f"{show(pivot.required, 'length', unit='mm')} centre to centre",
        f"make a new {piece.kind}, or weld the old hole up and have it approved",
    )


def _too_near_outer(pivot: MovedPivot, piece: Piece, diameters: Mapping[str, float]) -> Iterator[Finding]:
    """A remark where the new pivot is too close to an outer hole."""
    if pivot.piece not in diameters:
        return
    least = APART * diameters[pivot.piece]
    for hole in piece.ends:
        away = float(np.hypot(hole.u - piece.pivot.u, hole.v - piece.pivot.v))
        if away < least * (1 - 1e-9):
            yield Finding(
                "levers",
                "warning",
                pivot.piece,
                f"the new pivot is too close to hole {hole.name}",
                show(away, "length", unit="mm"),
                f"{show(least, 'length', unit='mm')}, two hole diameters",
                f'a new {piece.kind}, or a larger "shortest_arm" in [levers]',
            )


def words_of(
    moved: Sequence[MovedPivot], before: float, after: float, free: Choice, proven: int, pieces: int
) -> str:  # fmt: skip
    """What keeping the rig did, and what is proven."""
    if not moved:
        return f"kept rig: no pivot drilled anew, band use {after:.3g}"
    head = f"kept rig: {counted(len(moved), 'pivot')} of {pieces} drilled anew"
    head += f", band use {before:.3g} before and {after:.3g} after"
    new = sum(not pivot.keeps_distance for pivot in moved)
    if new:
        head += f"; {counted(new, 'piece')} to be made new, as old and new hole would be too close"
    return f"{head}; {_proof(len(moved), new, free, proven, pieces)}"


def _proof(moved: int, new: int, free: Choice, proven: int, pieces: int) -> str:
    """What is proven, before drilling, of pivots moved and pieces made new."""
    if free.use > 1.0:
        return f"proven: no pivots of these pieces bring the band use below {free.bound:.3g}"
    # a new piece counts as more than all moved pivots
    least_new = proven // (pieces + 1)
    if least_new:
        same = "so few" if least_new == new else counted(least_new, "new piece")
        return f"proven: without {same} no pivots that keep their distance from the old ones keep the bands"
    if proven >= moved:
        return "the fewest that keep the bands, proven"
    return f"proven: fewer than {counted(proven, 'new pivot')} do not keep the bands"


def none_possible(programme: Programme) -> Refusal:
    """Why the pads of a kept rig cannot bring the target at all."""
    largest = show(programme.largest, "force")
    return Refusal(
        "levers",
        "no pivots of the kept rig bring the target's sum within the limits of its pads and levers",
        f"pads between {show(programme.least, 'force')} and {largest}, and the limits in [levers]",
        f"{programme.n_pads} pads for {show(programme.total, 'force')}",
        "ease the limits, or design a new rig",
    )
