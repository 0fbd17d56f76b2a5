"""Remarks of the stage "statics" that plan rigs alone need: plates, tributary shares, the jack's place in plan."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from rigdesign.checks.entry import layout
from rigdesign.checks.measures import length, unevenness
from rigdesign.checks.model import Check
from rigdesign.checks.remedies import jack_remedy
from rigdesign.checks.statics import link_fractions
from rigdesign.checks.text import also, listed, percent
from rigdesign.display import System, show
from rigdesign.findings import Finding, Severity
from rigdesign.levers.model import Piece
from rigdesign.words import LOAD_CELL_FLOOR

FLAT = 0.05
"""A plate whose least height is below this part of its longest side has its points nearly on one line: a small error
of a hole then moves most of its load."""
SAME_PLACE = 1e-6  # m: below what any hole is drilled to
USE_SLACK = 1e-9  # forces that the search puts exactly on the band must not fail by rounding


def _remark(severity: Severity, where: str, text: str, value: str = "", limit: str = "", remedy: str = "") -> Finding:
    return Finding("statics", severity, where, text, value, limit, remedy)


def plate_fractions(check: Check) -> dict[Piece, tuple[float, ...]]:
    """Return what part of its load each plate hands to its holes A, B and C."""
    tree = layout(check.rig)
    fractions = link_fractions(tree)
    parts = (fractions[start:end] for start, end in zip(tree.first[:-1], tree.first[1:], strict=True))
    pairs = zip(tree.pieces, parts, strict=True)
    return {piece: tuple(float(f) for f in own) for piece, own in pairs if piece.kind == "plate"}


def height(piece: Piece) -> float:
    """Return the least height of a plate's triangle [m]."""
    a, b, c = piece.ends
    twice_area = abs((b.u - a.u) * (c.v - a.v) - (c.u - a.u) * (b.v - a.v))
    return twice_area / length(piece)


def plate_remarks(check: Check) -> Iterator[Finding]:
    """Plates whose pivot is not inside the triangle of their points, and plates that are nearly a line."""
    fractions = plate_fractions(check)
    outside = {piece: min(own) for piece, own in fractions.items() if min(own) <= 0}
    if outside:
        worst = min(outside, key=lambda piece: outside[piece])
        hole = worst.ends[int(np.argmin(fractions[worst]))]
        others = also(piece.name for piece in outside if piece is not worst)
        yield _remark(
            "failure",
            worst.name,
            f"the plate's pivot is not inside the triangle of its points: hole {hole.name} would have to act against "
            f"the others, or carry nothing{others}",
            f"hole {hole.name} takes {percent(outside[worst])} of the plate's load",
            "above 0 %",
            "drill the pivot inside the triangle",
        )
    flat = {piece: height(piece) / length(piece) for piece in fractions if height(piece) < FLAT * length(piece)}
    if flat:
        worst = min(flat, key=lambda piece: flat[piece])
        others = also(piece.name for piece in flat if piece is not worst)
        yield _remark(
            "failure",
            worst.name,
            f"the plate's three points lie nearly on one line: a small error of a hole moves much of its load{others}",
            f"least height {show(height(worst), 'length')}, {percent(flat[worst])} of its longest side",
            percent(FLAT),
            "join other pads with the plate, or use levers",
        )


def share_remarks(check: Check) -> Iterator[Finding]:
    """Pads of a panel whose force is too far from their tributary share, where the brief has them judged."""
    accept = check.rig.plan.target.brief.acceptance
    if accept.share is None:
        return
    off = unevenness(check.statics.pad_force, check.share_of_curve)
    broken = np.flatnonzero(off > accept.share * (1 + USE_SLACK))
    if not broken.size:
        return
    worst = check.uneven_pad - 1
    others = also(f"pad {i + 1}" for i in broken if i != worst)
    force, share = float(check.statics.pad_force[worst]), float(check.share_of_curve[worst])
    asked = ", the default" if accept.share_defaulted else ""
    yield _remark(
        "failure",
        f"pad {worst + 1}",
        "the pad's force is too far from its tributary share, the load that is nearest to it: between the pads the "
        f"panel would bend as it does not under its load{others}",
        f"{show(force, 'force')} for a share of {show(share, 'force')}, {percent(float(off[worst]))} off",
        f"{percent(accept.share)} of the share{asked}",
        'place pads so that each carries what is nearest to it, take aim = "even", or a larger "share" in [acceptance]',
    )


def jack_offset_in_plan(check: Check) -> Iterator[Finding]:
    """A jack that does not stand at the resultant of what the pads must bring."""
    x, y = check.jack_offset, check.jack_offset_y
    if np.hypot(x, y) <= SAME_PLACE:
        return
    net = abs(check.rig.plan.target.net.total)
    costs, seen = [], False
    for offset, quantity, words in ((x, "moment", "moment"), (y, "torsion", "torsion about the x direction")):
        errors = check.errors["moment" if quantity == "moment" else "torsion"]
        cost = abs(offset) * net
        if abs(offset) > SAME_PLACE:
            costs.append(f"a {words} of {show(cost, 'moment')}, {percent(cost / errors.reference)} of {errors.of},")
            seen = seen or cost > LOAD_CELL_FLOOR * errors.reference
    yield _remark(
        "warning" if seen else "note",
        "jack 1" if len(check.rig.trees) == 1 else "jacks",
        f"the jack stands {offset_words(check)} of the resultant; that costs {listed(costs).rstrip(',')}, which the "
        "errors include",
        show(float(np.hypot(x, y)), "length"),
        "at the resultant",
        jack_remedy(check),
    )


def offset_words(check: Check, system: System = "SI") -> str:
    """Where the jack stands as seen from the resultant, in words: "3.00 mm outboard and 1.20 mm towards greater y"."""
    x, y = check.jack_offset, check.jack_offset_y
    parts = []
    if abs(x) > SAME_PLACE:
        parts.append(f"{show(abs(x), 'length', system)} {'outboard' if x > 0 else 'inboard'}")
    if abs(y) > SAME_PLACE:
        parts.append(f"{show(abs(y), 'length', system)} towards {'greater' if y > 0 else 'lesser'} y")
    return " and ".join(parts)
