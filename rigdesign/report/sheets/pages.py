"""All sheets of a rig in their order, framed and numbered, as one PDF."""

from __future__ import annotations

import io
import warnings
from collections.abc import Iterator
from typing import Any

from matplotlib import rc_context
from matplotlib.backends.backend_pdf import PdfPages

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.display import System
from rigdesign.report.figures_sheet import styled
from rigdesign.report.sheets.arrange_elevation import elevation_sheet
from rigdesign.report.sheets.arrange_plan import plan_sheet
from rigdesign.report.sheets.details import detail_sheets
from rigdesign.report.sheets.frame import Facts, Sheet, draw_frame
from rigdesign.report.sheets.paper import HATCH, Paper
from rigdesign.report.sheets.rigging import rigging_sheets
from rigdesign.report.sheets.schedules import pads_table, schedules
from rigdesign.report.sheets.sizes import Sizes
from rigdesign.report.sheets.tables import table_sheets
from rigdesign.report.sheets.tiers import places_table, tier_sheets

Page = tuple[Paper, str, str]
"""A sheet before it is framed: what is drawn, its name and its scale."""
_EMBEDDED: Any = {"pdf.fonttype": 42, "hatch.linewidth": HATCH / 25.4 * 72.0, "pdf.compression": 6}


def sheets(result: HardwareCheck, sizes: Sizes) -> Iterator[Page]:
    """Yield all sheets, unframed, in their order."""
    yield elevation_sheet(result, sizes)
    places = [pads_table(result, sizes), places_table(result, sizes)]
    paper, name, scale, rest = plan_sheet(result, sizes, places)
    yield paper, name, scale
    yield from tier_sheets(result, sizes)
    yield from detail_sheets(result, sizes)
    yield from table_sheets([*rest, *schedules(result, sizes)])
    yield from rigging_sheets(result, sizes)


@styled
def framed(result: HardwareCheck, system: System = "SI") -> list[Paper]:
    """Return all sheets with their frames; what the frame says is known when all are drawn."""
    sizes = Sizes(system)
    pages = list(sheets(result, sizes))
    facts = facts_of(result, sizes)
    for k, (paper, name, scale) in enumerate(pages):
        draw_frame(paper, Sheet(name, scale, k + 1, len(pages)), facts)
    return [paper for paper, _, _ in pages]


def facts_of(result: HardwareCheck, sizes: Sizes) -> Facts:
    """What all title blocks say."""
    brief = result.check.rig.plan.target.brief
    grades = sorted({body.material.name for body in result.hardware.bodies.values()}) or [brief.hardware.grade]
    return Facts(brief.title, brief.hardware.revision, " and ".join(grades), result.accepted, sizes)


@styled
def pdf_bytes(result: HardwareCheck, system: System = "SI") -> bytes:
    """Return the drawings as PDF, fonts embedded, without dates."""
    pages = framed(result, system)
    buffer = io.BytesIO()
    title = result.check.rig.plan.target.brief.title
    metadata = {"CreationDate": None, "Producer": None, "Creator": "rigdesign", "Title": title}
    with warnings.catch_warnings(), rc_context(_EMBEDDED):
        # a title in a script that the font lacks shows boxes, as in all figures
        warnings.filterwarnings("ignore", message=r"Glyph \d+ .* missing from font")
        with PdfPages(buffer, metadata=metadata) as pdf:
            for paper in pages:
                pdf.savefig(paper.finished())
    return buffer.getvalue()
