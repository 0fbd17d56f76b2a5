"""What the terminal shows: sentences first, then tables; plain text where the output is not a terminal."""

from __future__ import annotations

import math
import re
import sys
import textwrap
from collections.abc import Iterable, Sequence
from typing import TYPE_CHECKING

from rich.console import Console, RenderableType
from rich.table import Table
from rich.text import Text

from rigdesign.chain import Study
from rigdesign.checks.measures import ratio, reaches
from rigdesign.checks.model import Check
from rigdesign.checks.remarks_practice import pressures
from rigdesign.checks.text import UNIT_KIND, percent
from rigdesign.command.pipe import reader_may_leave
from rigdesign.command.terminal_hardware import made_table
from rigdesign.display import System, counted, show
from rigdesign.findings import Finding, Refusal
from rigdesign.report.scales import arm_scale, scale
from rigdesign.report.sentences import CAUTION, answer, finding_lines, refusal_lines, verdict
from rigdesign.report.sentences_hardware import CAUTION_HARDWARE, hardware_answer

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

PLAIN_WIDTH = 100
"""Columns where the output is a file or a pipe."""
_COLOURS = {"failure": "bold red", "warning": "yellow", "note": ""}


class _Console(Console):
    """A console that says so when its reader has gone, instead of ending the process."""

    def on_broken_pipe(self) -> None:
        raise BrokenPipeError


class Terminal:
    """The place where a command speaks to a person."""

    def __init__(self, system: System = "SI") -> None:
        """Set the units and find out how wide the output is."""
        for stream in (sys.stdout, sys.stderr):
            if hasattr(stream, "reconfigure"):  # a terminal that cannot show "−" or "·" shows "?"
                stream.reconfigure(errors="replace")
        is_terminal = sys.stdout.isatty()
        self.system = system
        self._console = _Console(width=None if is_terminal else PLAIN_WIDTH, highlight=False, emoji=False, markup=False)

    def lines(self, lines: Iterable[str], style: str = "") -> None:
        """Print sentences, each a paragraph of its own, wrapped at the width and never between number and unit."""
        for line in lines:
            for part in wrapped(line, self._console.width):
                self._print(Text(part, style=style))

    def title(self, words: str) -> None:
        """Print the first line of all."""
        self._print(Text(words, style="bold"))

    def heading(self, words: str) -> None:
        """Print a heading after a free line."""
        self._print("")
        self._print(Text(words, style="bold"))

    def table(self, headings: Sequence[str], rows: Iterable[Sequence[str]]) -> None:
        """Print a table; the first column and every one of words stand left, numbers right."""
        rows = [tuple(row) for row in rows]
        table = Table(box=None, pad_edge=False, padding=(0, 2, 0, 0), header_style="underline")
        for k, heading in enumerate(headings):
            numbers = all(_is_number(row[k]) for row in rows)
            # the unit under its name keeps columns narrow; cells are never broken, a table may be wider than the output
            table.add_column(heading.replace(" [", "\n["), justify="right" if numbers else "left", no_wrap=True)
        for row in rows:
            table.add_row(*row)
        width = self._console.width
        needed = self._console.measure(table, options=self._console.options.update(width=100 * PLAIN_WIDTH)).maximum
        self._console.width = max(needed, width)
        self._print(table)
        self._console.width = width

    def _print(self, what: RenderableType) -> None:
        with reader_may_leave():
            self._console.print(what, soft_wrap=isinstance(what, Text))

    def check(self, result: Check | HardwareCheck) -> None:
        """Print everything on a checked rig: sentences, pads, levers, regions, findings, caution."""
        check = result if isinstance(result, Check) else result.check
        self.heading("Answer")
        verdict, *others = answer(result, self.system)
        self.lines([verdict], style="bold green" if result.accepted else "bold red")
        self.lines(others)
        if not isinstance(result, Check):
            self.heading("Hardware")
            self.lines(hardware_answer(result, self.system))
        self.heading("Pads")
        self.table(*_pad_table(check, self.system))
        if any(tree.pieces for tree in check.rig.trees):
            has_plates = any(piece.kind == "plate" for tree in check.rig.trees for piece in tree.pieces)
            self.heading("Levers and plates" if has_plates else "Levers")
            self.table(*_lever_table(check, self.system))
        if not isinstance(result, Check):
            self.heading("Parts to make")
            self.table(*made_table(result, self.system))
        self.heading("Errors by stretch")
        self.table(*_region_table(check, self.system))
        self.findings(result.findings)
        self.heading("Caution")
        self.lines([CAUTION if isinstance(result, Check) else CAUTION_HARDWARE])

    def findings(self, findings: tuple[Finding, ...]) -> None:
        """Print the findings, failures and warnings in colour."""
        # a finding keeps its value as words: they are those of the rig folder, whatever the terminal's units
        self.heading("Findings" if self.system == "SI" else "Findings, in SI units")
        if not findings:
            self.lines(["None."])
        for finding, line in zip(findings, finding_lines(findings), strict=True):
            self.lines([line], style=_COLOURS[finding.severity])

    def refusal(self, refusal: Refusal) -> None:
        """Print why there is no rig."""
        self.heading("Answer")
        first, *others = refusal_lines(refusal)
        self.lines([first], style="bold red")
        self.lines(others)

    def study(self, study: Study) -> None:
        """Print a study: the fewest accepted first, then a row a number of pads."""
        self.heading("Answer")
        fewest = study.fewest
        if fewest is None:
            self.lines(["None of these numbers of pads gives an accepted rig."], style="bold red")
        else:
            self.lines([f"The fewest pads that are accepted: {fewest.pads}."], style="bold green")
        self.heading("Study")
        self.table(*_study_table(study))
        for row in study.rows:
            if isinstance(row.answer, Refusal):
                self.lines([f"{counted(row.pads, 'pad')}: " + " ".join(refusal_lines(row.answer))])
            elif not row.accepted:
                self.lines([verdict(row.answer)])
        peaks = "moment, shear and torsion" if study.brief.specimen.is_surface else "moment and shear"
        self.lines(["", f"Errors are per cent of peak target {peaks}, as drilled.", CAUTION])


def wrapped(line: str, width: int) -> list[str]:
    """Return the lines of a paragraph, the second and further ones indented; a number stays with its unit.

    >>> wrapped("Under-test 0.25 % at x = 1.2 m, as drilled.", 24)
    ['Under-test 0.25 % at', '  x = 1.2 m, as drilled.']
    """
    bound = re.sub(r"(?<=\d) (?=[%A-Za-z])|(?<=\b[xyFN]) (?==)|(?<==) (?=[\d−-])", "\N{NO-BREAK SPACE}", line)
    parts = textwrap.wrap(bound, width, subsequent_indent="  ", break_long_words=False, break_on_hyphens=False)
    return [part.replace("\N{NO-BREAK SPACE}", " ") for part in parts] or [""]


def _is_number(text: str) -> bool:
    return text in ("", "none") or text[0].isdigit() or (text[0] in "−-+" and len(text) > 1)


def _pad_table(check: Check, system: System) -> tuple[list[str], list[list[str]]]:
    rig = check.rig
    force = scale("force", max(abs(float(f)) for f in check.statics.pad_force), system)
    place = scale("length", 1.0, system)
    hangs = {hole.joins: piece.name for tree in rig.trees for piece in tree.pieces for hole in piece.ends}
    is_surface = rig.plan.target.brief.specimen.is_surface
    headings = [
        "pad",
        f"x [{place.unit}]",
        *([f"y [{place.unit}]"] if is_surface else []),
        f"force [{force.unit}]",
        f"wanted [{force.unit}]",
        "share of jack",
        "hangs on",
    ]
    pressure = pressures(check)
    bears = None if pressure is None else scale("pressure", float(pressure.max()), system, 2 if system == "SI" else 3)
    if bears is not None:
        headings.insert(-1, f"pressure [{bears.unit}]")
    rows = []
    for k, (x, f) in enumerate(zip(rig.pad_x, check.statics.pad_force, strict=True)):
        row = [str(k + 1), place.show(float(x)), *([place.show(float(rig.pad_y[k]))] if is_surface else [])]
        row += [force.show(float(f)), force.show(float(rig.plan.force[k]))]
        row += [f"{100 * float(check.statics.share[k]):.2f} %"]
        row += [bears.show(float(pressure[k]))] if bears is not None and pressure is not None else []
        rows.append([*row, hangs.get(f"pad {k + 1}", "jack 1")])
    return headings, rows


def _lever_table(check: Check, system: System) -> tuple[list[str], list[list[str]]]:
    brief = check.rig.plan.target.brief
    arms, place = arm_scale(brief.levers.drill_step, system), scale("length", 1.0, system)
    loads = scale("force", max(abs(tree.force) for tree in check.rig.trees), system)
    pieces = [piece for tree in check.rig.trees for piece in tree.pieces]
    is_surface = brief.specimen.is_surface
    most = max(len(piece.ends) for piece in pieces)
    headings = ["lever", "tier", "hangs on", f"pivot x [{place.unit}]"]
    headings += [f"pivot y [{place.unit}]"] if is_surface else []
    headings += [f"load [{loads.unit}]"]
    for name in "ABC"[:most]:
        headings += [f"arm {name} [{arms.unit}]", "holds"]
    rows = []
    for piece in pieces:
        row = [str(piece.number), str(piece.tier), piece.parent, place.show(piece.pivot.x)]
        row += [place.show(piece.pivot.y)] if is_surface else []
        row.append(loads.show(check.statics.piece_load[piece.name]))
        for hole, arm in zip(piece.ends, reaches(piece), strict=True):
            row += [arms.show(arm), hole.joins]
        row += [""] * 2 * (most - len(piece.ends))
        rows.append([*row, f"{ratio(piece):.2f}" if piece.kind == "lever" else "plate"])
    return [*headings, "ratio"], rows


def _region_table(check: Check, system: System) -> tuple[list[str], list[list[str]]]:
    headings = ["stretch", "quantity", "under-test", "over-test", "band under", "band over", "band use", "verdict"]
    rows = []
    for region in check.regions:
        kind, peak = UNIT_KIND[region.quantity], check.errors[region.quantity].reference
        # what is left of exact zeros after rounding is zero
        sizes = [show(size if size > 1e-9 * peak else 0.0, kind, system) for size in (region.under, region.over)]
        bands = [
            "none" if math.isinf(band) else show(band, kind, system) for band in (region.band_under, region.band_over)
        ]
        judged = {None: "not judged", True: "accepted", False: "not accepted"}[region.accepted]
        use = "" if region.use is None else f"{region.use:.3f}"
        rows.append([region.name, region.quantity, *sizes, *bands, use, judged])
    return headings, rows


def _study_table(study: Study) -> tuple[list[str], list[list[str]]]:
    is_surface = study.brief.specimen.is_surface
    headings = [
        "pads",
        "moment error",
        "shear error",
        *(["torsion error"] if is_surface else []),
        "band use",
        "proven least",
        "levers",
        "steel estimate",
        "verdict",
    ]
    rows = []
    for row in study.rows:
        if isinstance(row.answer, Refusal):
            rows.append([str(row.pads), *[""] * (len(headings) - 2), "no rig"])
            continue
        check = row.answer
        mark = "  fewest" if study.fewest is row else ""
        torsion = [] if check.torsion_error_peak is None else [percent(check.torsion_error_peak)]
        rows.append([
            str(row.pads), percent(check.moment_error_peak), percent(check.shear_error_peak), *torsion,
            f"{check.band_use:.3f}", f"{check.rig.plan.proof.band_use_least:.3f}",
            str(sum(len(tree.pieces) for tree in check.rig.trees)), f"{check.steel_estimate:.1f}",
            ("accepted" if row.accepted else "not accepted") + mark,
        ])  # fmt: skip
    return headings, rows
