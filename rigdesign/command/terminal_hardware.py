"""What the terminal shows of the hardware besides sentences: a row a mark of what a workshop makes."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from rigdesign.display import System, show
from rigdesign.report.lists import PartRow, part_rows
from rigdesign.report.lists.members import numbers

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

MADE = ("lever", "plate", "link")
"""Kinds of part that are told on the terminal; all others are in parts.csv."""


def made_table(result: HardwareCheck, system: System) -> tuple[list[str], list[list[str]]]:
    """Return headings and rows of the levers, plates and links to make, with their most used check."""
    most: dict[str, float] = {}
    for row in result.strength:
        most[row.piece] = max(most.get(row.piece, 0.0), row.utilisation)
    headings = ["mark", "number", "made from", "material", "length", "mass each", "most used", "for"]
    rows = []
    for part in part_rows(result):
        if part.kind not in MADE:
            continue
        use = max((most.get(member, 0.0) for member in part.members), default=0.0)
        length = "" if part.length is None else show(part.length, "length", system)
        mass = "" if part.mass is None else show(part.mass, "mass", system)
        rows.append([part.mark, str(part.quantity), part.section, part.material, length, mass, _percent(use),
                     _for(part)])  # fmt: skip
    return headings, rows


def _percent(use: float) -> str:
    """A utilisation as whole per cents; infinite where no size at all would do."""
    return "infinite" if math.isinf(use) else f"{100 * use:.0f} %"


def _for(part: PartRow) -> str:
    """Which members a mark stands for; a three-point plate is counted among the levers."""
    kind = part.members[0].split()[0]
    return f"{kind} {numbers(part.members)}" if len(part.members) == 1 else f"{kind}s {numbers(part.members)}"
