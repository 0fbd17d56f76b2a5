"""What is said of a rig that is kept: which pivots move, what is too close, what is proven."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

import numpy as np

from rigdesign.display import counted, show
from rigdesign.findings import Finding, Refusal
from rigdesign.levers.keep.drilling import Drill
from rigdesign.levers.keep.model import MovedPivot
from rigdesign.levers.keep.programme import Choice
from rigdesign.levers.keep.standing import only_tree
from rigdesign.levers.model import Piece, Rig

APART = 2.0
"""Hole diameters, centre to centre, below which two holes of a piece are too close; common practice."""

SAME_PLACE = 1e-6
"""Places that agree to this [m] are one: no pad is set nearer than that."""

MOST_NAMES = 8
"""So many pivots are named in one sentence."""


def remarks(
    old: Rig, rig: Rig, moved: Sequence[MovedPivot], diameters: Mapping[str, float]
) -> Iterator[Finding]:  # fmt: skip
    """Yield what is to be said of a rig that was kept, not numbered yet."""
    yield from _other_brief(old, rig)
    pieces = {piece.name: piece for piece in only_tree(rig).pieces}
    if not moved:
        as_it_is = "the kept rig stays as it is: no pivot is drilled anew"
        yield Finding("levers", "note", "rig", as_it_is, remedy="the verdict says whether it serves this target")
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


def _other_brief(old: Rig, rig: Rig) -> Iterator[Finding]:
    """What the brief asks for and the kept rig has otherwise."""
    was, now = only_tree(old).force, only_tree(rig).force
    if was * now < 0:
        yield Finding(
            "levers",
            "warning",
            "jack 1",
            "the target acts the other way than the one that the kept rig was built for",
            show(now, "force"),
            show(was, "force"),
            "turn the rig round, or make sure that pads and links bear this way",
        )
    rules, has = rig.plan.target.brief.pads, rig.plan.n_pads
    if rules.count not in ("fewest", has):
        text = f"the brief asks for {rules.count} pads, and those of the kept rig stay"
        yield Finding("levers", "note", "pads", text, counted(has, "pad"))
    if rules.places == "fixed" and _elsewhere(rig):
        yield Finding(
            "levers",
            "warning",
            "pads",
            "the brief's places of pads are not those of the kept rig, which stay",
            remedy="give the kept rig's places in [pads], or design a new rig",
        )


def _elsewhere(rig: Rig) -> bool:
    """Whether the brief's fixed places are not those of the pads."""
    rules = rig.plan.target.brief.pads
    y = rules.y if rules.y.size else np.zeros(rules.stations.size)
    if rules.stations.size != rig.pad_x.size:
        return True
    return bool(max(np.abs(rules.stations - rig.pad_x).max(), np.abs(y - rig.pad_y).max()) > SAME_PLACE)


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
    moved: Sequence[MovedPivot], use: tuple[float, float], free: Choice, least: tuple[int, int], pieces: int
) -> str:  # fmt: skip
    """What keeping the rig did, and what is proven.

    `use` is the band use before and after, `least` the fewest new pieces and, with these, the fewest pivots in old
    steel, `free` the forces of least band use.
    """
    head = f"kept rig: {counted(len(moved), 'pivot')} of {pieces} drilled anew"
    head += f", band use {use[0]:.3g} before and {use[1]:.3g} after as the search judges"
    if not moved:
        head = f"kept rig: no pivot drilled anew, band use {use[1]:.3g} as the search judges"
    new = sum(not pivot.keeps_distance for pivot in moved)
    if new:
        head += f"; {counted(new, 'piece')} to be made new, as old and new hole would be too close"
    if free.use > 1.0:
        return f"{head}; proven: no pivots of these pieces bring the band use below {free.bound:.3g}"
    return f"{head}; {_proof(len(moved) - new, new, *least)}" if moved else head


def _proof(moved: int, new: int, least_new: int, least_moved: int) -> str:
    """What is proven, before drilling, of pieces made new and pivots moved in old steel."""
    if (new, moved) == (least_new, least_moved):
        return "proven: no fewer keep the bands"
    if least_new:
        return f"proven: fewer than {counted(least_new, 'new piece')} do not keep the bands"
    if least_moved:
        return f"proven: fewer than {counted(least_moved, 'new pivot')} do not keep the bands"
    return "not proven to be the fewest"


def none_possible(drill: Drill) -> Refusal:
    """Why the pads of a kept rig cannot bring the target at all."""
    return Refusal(
        "levers",
        "no pivots of the kept rig bring the target's sum within the limits of its pads and levers",
        f"pads between {show(drill.least, 'force')} and {show(drill.largest, 'force')}, and the limits in [levers]",
        f"{drill.branches.n_pads} pads for {show(drill.total, 'force')}",
        "ease the limits, or design a new rig",
    )
