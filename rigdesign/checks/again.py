"""Checks of a rig that exists: with holes as built, or against another brief's target."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import numpy as np

from rigdesign.brief.model import Brief
from rigdesign.checks.holes_table import HolesTable, read_holes, with_holes
from rigdesign.checks.measures import evenness, length, shares_of_pads
from rigdesign.checks.model import Check
from rigdesign.checks.statics import solve_statics
from rigdesign.checks.text import NOT_PROVEN, percent
from rigdesign.checks.whole import band_use, check
from rigdesign.display import show
from rigdesign.errors import InputError
from rigdesign.findings import Finding
from rigdesign.levers.model import Hole, Piece, Rig
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

SAME_LINE = 1e-9  # m: pads that are nearer to y = 0 stand on it


def check_with_holes(rig: Rig, holes: Path) -> Check:
    """Return the check of a rig with the holes of a table (the layout of holes.csv) in place of its own.

    Raises
    ------
    TableError
        Where the table cannot be read, or names what the rig does not have.
    """
    return check_with_table(rig, read_holes(holes))


def check_with_table(rig: Rig, table: HolesTable) -> Check:
    """Return the check of a rig with the holes of a table that has been read; says what they change.

    Raises
    ------
    TableError
        Where the table names what the rig does not have.
    """
    built = with_holes(rig, table)
    if built.trees != rig.trees:
        # nor is what the search for holes did true of other holes
        built = replace(built, words="the holes are as built, from a table")
    return check(built, tuple(_hole_remarks(rig, built, table)))


def _hole_remarks(rig: Rig, built: Rig, table: HolesTable) -> Iterator[Finding]:
    pairs = list(_pairs(rig, built))
    moved = [
        (np.hypot(*_seen(new_piece, new) - _seen(old_piece, old)), new_piece, new)
        for old_piece, old, new_piece, new in pairs
    ]
    moved = [entry for entry in moved if entry[0] > 0]
    given = f"{len(table.rows)} of the rig's {len(pairs)} holes are in the table"
    rest = "" if len(table.rows) == len(pairs) else "; the others are taken as drilled"
    if not moved:
        yield Finding("statics", "note", "holes", f"{given}{rest}; none is elsewhere in its lever than in the rig")
    else:
        size, piece, hole = max(moved, key=lambda entry: float(entry[0]))
        before, after = solve_statics(rig).pad_force, solve_statics(built).pad_force
        change = after / before - 1.0
        worst = int(np.argmax(np.abs(change)))
        yield Finding(
            "statics",
            "note",
            f"{piece.name} hole {hole.name}",
            f"{given}{rest}; {len(moved)} are elsewhere as seen from their pivots, this one by most; pad forces change "
            f"by up to {percent(abs(float(change[worst])))} of their own, at pad {worst + 1}",
            show(float(size), "length"),
        )
    plan = [max(abs(new.x - old.x), abs(new.y - old.y)) for _, old, _, new in pairs]
    if max(plan, default=0.0) > 0:
        _, old, piece, _ = pairs[int(np.argmax(plan))]
        yield Finding(
            "statics",
            "note",
            f"{piece.name} hole {old.name}",
            f"{_count(sum(size > 0 for size in plan))} in the table whose x_m or y_m is not the rig's; statics takes "
            "u_m and v_m alone",
            show(max(plan), "length"),
        )


def _count(holes: int) -> str:
    return "1 hole" if holes == 1 else f"{holes} holes"


def _pairs(rig: Rig, built: Rig) -> Iterator[tuple[Piece, Hole, Piece, Hole]]:
    for old_tree, new_tree in zip(rig.trees, built.trees, strict=True):
        for old, new in zip(old_tree.pieces, new_tree.pieces, strict=True):
            for old_hole, new_hole in zip(old.holes, new.holes, strict=True):
                yield old, old_hole, new, new_hole


def _seen(piece: Piece, hole: Hole) -> Floats:
    """A hole as seen from its pivot [m], (2,): moving all holes of a piece alike changes nothing."""
    return np.array([hole.u - piece.pivot.u, hole.v - piece.pivot.v])


def recheck(rig: Rig, brief: Brief) -> Check:
    """Return the check of the same pads, levers and holes against another brief's target, bands and limits.

    The jacks' forces are scaled together to the new net target.  What was proven of the pads held for the old target;
    in its place stand the trivial bound and the errors of the old wanted forces, scaled likewise.

    Raises
    ------
    InputError
        Where the rig's jacks pull nothing together, so that they cannot be scaled, or pads stand off the line y = 0
        of a brief without an outline.
    """
    from rigdesign.target import build_target

    _require_outline(rig, brief)
    target = build_target(brief)
    total = float(rig.jack_forces.sum())
    if total == 0:
        raise InputError("the jacks of this rig pull nothing together, so it cannot be scaled to another target")
    scale = target.net.total / total
    trees = tuple(replace(tree, force=tree.force * scale) for tree in rig.trees)
    plan = _rescaled(rig.plan, target, scale)
    # what the searches did and remarked was about the old target
    moved = replace(rig, plan=plan, trees=trees, words="the levers are those of a rig that exists", findings=())
    return check(moved, tuple(_target_remarks(rig, moved, scale)))


def _require_outline(rig: Rig, brief: Brief) -> None:
    """A brief without an outline knows nothing of places across the span: torsion would be passed over."""
    off = np.abs(rig.pad_y)
    if brief.specimen.is_surface or off.max() <= SAME_LINE:
        return
    worst = int(np.argmax(off))
    raise InputError(
        "a plan rig cannot be checked against a brief without an outline",
        where=f"rig, pad {worst + 1}",
        value=f"y = {show(float(rig.pad_y[worst]), 'length', unit='m')}",
        limit="y = 0 for every pad",
        remedy="give [specimen] outline in the brief",
    )


def _rescaled(plan: PadPlan, target: Target, scale: float) -> PadPlan:
    force = plan.force * scale
    share = shares_of_pads(target, plan.x, plan.y)
    use = band_use(target, plan.x, plan.y, force)
    uneven = evenness(force, share)
    proof = Proof(
        band_use=use,
        band_use_least=0.0,
        moment_error_least=0.0,
        method=NOT_PROVEN,
        words="the pads are those of a rig that exists",
        evenness=uneven,
        evenness_before=uneven,
        band_use_found=use,
    )
    return replace(plan, target=target, force=force, share=share, proof=proof, findings=())


def _target_remarks(rig: Rig, moved: Rig, scale: float) -> Iterator[Finding]:
    brief = moved.plan.target.brief
    yield Finding(
        "statics",
        "warning" if scale < 0 else "note",
        "jack 1" if len(rig.trees) == 1 else "jacks",
        f"the rig was designed for another target, with {show(float(rig.jack_forces.sum()), 'force')} on the jack; "
        "that is scaled to this target" + (", and acts the other way" if scale < 0 else ""),
        show(float(moved.jack_forces.sum()), "force"),
    )
    wanted, has = brief.pads.count, moved.plan.n_pads
    if wanted not in ("fewest", has):
        yield Finding(
            "practice", "note", "pads", f"the brief asks for {wanted} pads, the rig has another number", str(has)
        )
    longest = max((length(piece) for tree in moved.trees for piece in tree.pieces), default=0.0)
    span = brief.specimen.right - brief.specimen.left
    if longest > span:
        text = "a lever is longer than the brief's whole specimen: is it the right brief?"
        yield Finding("practice", "warning", "rig", text, show(longest, "length"), show(span, "length"))
