"""Sheets: the drawings that a workshop builds from and a crew rigs by, as one PDF of A3 pages.

In: a `HardwareCheck`.  Out: the bytes of drawings.pdf; the same answer gives the same bytes.

    arrange_elevation, arrange_plan   general arrangement from the side and in plan
    tiers                             each tier in elevation and plan
    details                           one detail a part mark of levers and plates
    schedules                         parts, links, pins, pads, cut and drill lists as tables
    rigging                           order of assembly, settings, checks, zeros, cautions

A sheet is drawn in millimetres of the paper (`paper`), inside a frame with its title block (`frame`).  Sizes and places
are read from the hardware, lists from `report.lists`; nothing is worked out anew here.  Labels are placed clear of one
another (`labels`, `report.surface.labels`).  Terms: a `mark` is a number in a shape that says of what, a `part mark`
("L3") the name of equal parts, a `running` dimension one of several from a common datum.

Depends on: checks, hardware, report.lists, matplotlib.
"""

from __future__ import annotations

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.display import System


def drawings_pdf(result: HardwareCheck, system: System = "SI") -> bytes:
    """Return the drawings of a rig as PDF; where it is not accepted every sheet says so across its drawing."""
    from rigdesign.report.sheets.pages import pdf_bytes

    return pdf_bytes(result, system)
