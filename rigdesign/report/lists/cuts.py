"""The cut list: levers' profiles and straps, cut from stock bars."""

from __future__ import annotations

from typing import TYPE_CHECKING

from rigdesign.hardware.model import Hardware
from rigdesign.report.lists.members import by_mark, pieces_by_name, steel_length
from rigdesign.report.lists.model import StockCut

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

_Key = tuple[str, str, float]


def cut_plans(result: HardwareCheck) -> tuple[StockCut, ...]:
    """Return a cutting plan for each section that comes in bars: profiles of levers, and straps.

    Plates come from sheet, rods and pins at their length, side plates and spacers from offcuts.
    """
    from rigdesign.hardware.cutting import cut_list

    hardware = result.hardware
    kerf = hardware.rig.plan.target.brief.hardware.kerf
    return tuple(
        StockCut(section, material, bar, kerf, cut_list(pieces, bar, kerf))
        for (section, material, bar), pieces in bar_pieces(hardware).items()
    )


def bar_pieces(hardware: Hardware) -> dict[_Key, list[tuple[str, float, int]]]:
    """Return what is cut from bars: mark, length [m] and number, by section, material and length of bar [m]."""
    wanted: dict[_Key, list[tuple[str, float, int]]] = {}
    pieces, links = pieces_by_name(hardware), {link.name: link for link in hardware.links}
    for mark, members in by_mark(hardware, pieces).items():
        body = hardware.bodies[members[0]]
        if body.build != "plate":
            key = (body.section.name, body.material.name, body.section.bar)
            count = body.profiles * len(members)
            wanted.setdefault(key, []).append((mark, steel_length(pieces[members[0]], body), count))
    bar = hardware.rig.plan.target.brief.hardware.bar
    for mark, members in by_mark(hardware, links).items():
        link = links[members[0]]
        if link.kind == "strap":
            length = link.length + link.upper.radius + link.lower.radius
            wanted.setdefault((link.size, link.material.name, bar), []).append((mark, length, len(members)))
    return wanted
