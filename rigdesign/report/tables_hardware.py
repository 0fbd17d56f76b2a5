"""The tables of the hardware, as bytes: parts, strength, links, pins, own weight, cut and drill lists, masses.

Cells are those of `tables`.  Lengths are in m but where a heading says mm: lists that a workshop works from.

Depends on: lists, tables, and the models below them.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.hardware.model import Link
from rigdesign.report.csv_cells import Cell, csv_bytes
from rigdesign.report.lists import centres, cut_plans, drill_rows, link_rows, part_rows, pin_rows
from rigdesign.report.lists.model import PER_METRE, StockCut

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck


def hardware_tables(result: HardwareCheck) -> dict[str, bytes]:
    """Return every CSV of the hardware by file name."""
    return {
        "parts.csv": parts_csv(result),
        "strength.csv": strength_csv(result),
        "links.csv": links_csv(result),
        "pins.csv": pins_csv(result),
        "tare.csv": tare_csv(result),
        "cut_list.csv": cut_list_csv(result),
        "drill_list.csv": drill_list_csv(result),
        "masses.csv": masses_csv(result),
    }


def parts_csv(result: HardwareCheck) -> bytes:
    """A row a part mark; masses are of one, totals of all."""
    rows: list[list[Cell]] = [
        [row.mark, row.kind, row.quantity, row.section, row.material, row.length, row.mass, row.total,
         "; ".join(row.members)]
        for row in part_rows(result)
    ]  # fmt: skip
    head = ["mark", "kind", "quantity", "section", "material", "length_m", "mass_kg", "total_kg", "members"]
    return csv_bytes(head, rows)


def strength_csv(result: HardwareCheck) -> bytes:
    """A row a strength check of a member, with the working in the source's own symbols."""
    marks = result.hardware.marks
    rows: list[list[Cell]] = [
        [
            row.piece,
            row.check,
            row.clause,
            row.load,
            _maybe_infinite(row.value),
            row.limit,
            row.unit,
            _maybe_infinite(row.utilisation),
            marks.get(row.piece, ""),
            "; ".join(f"{symbol} = {value:.6g} {unit}".rstrip() for symbol, value, unit in row.working),
        ]
        for row in result.strength
    ]
    head = ["piece", "check", "clause", "load_N", "value", "limit", "unit", "utilisation", "mark", "working"]
    return csv_bytes(head, rows)


def _maybe_infinite(value: float) -> Cell:
    """A check that no steel at all could pass says so in words: an empty cell would read as not checked."""
    return "infinite" if math.isinf(value) else value


def links_csv(result: HardwareCheck) -> bytes:
    """A row a link, from the jack's side to the pad's."""
    links: dict[int, Link] = {link.number: link for link in result.hardware.links}
    rows: list[list[Cell]] = []
    for row in link_rows(result):
        link = links[row.number]
        rows.append([
            row.number, link.upper.to, link.lower.to, row.length, row.load, math.degrees(row.swing), link.upper.at,
            link.lower.at, row.mark, row.kind, row.size, row.material, row.peak_load, row.adjust, row.upper_end,
            row.lower_end, row.upper_pin, row.lower_pin, row.mass,
        ])  # fmt: skip
    head = ["link", "from", "to", "length_m", "load_N", "swing_deg", "from_hole", "to_hole", "mark", "kind", "size",
            "material", "peak_load_N", "adjust_m", "upper_fitting", "lower_fitting", "upper_pin", "lower_pin",
            "mass_kg"]  # fmt: skip
    return csv_bytes(head, rows)


def pins_csv(result: HardwareCheck) -> bytes:
    """A row a pin mark: size, number, and where each goes."""
    rows: list[list[Cell]] = [
        [row.mark, PER_METRE * row.diameter, PER_METRE * row.length, PER_METRE * row.grip, row.material, row.quantity,
         row.mass, "; ".join(row.places)]
        for row in pin_rows(result)
    ]  # fmt: skip
    head = ["pin", "diameter_mm", "length_mm", "grip_mm", "material", "quantity", "mass_kg", "where"]
    return csv_bytes(head, rows)


def tare_csv(result: HardwareCheck) -> bytes:
    """A row a pad: share, force at zero jack force, and force at each step of the test, as the specimen feels it."""
    tare = result.tare
    columns = [result.check.statics.share, tare.pad_tare, *(step.pad_force for step in tare.steps)]
    table = np.column_stack(columns)
    rows = [[k + 1, *row] for k, row in enumerate(table.tolist())]
    return csv_bytes(["pad", "share", "tare_N", *(step_column(step.level) for step in tare.steps)], rows)


def step_column(level: float) -> str:
    """Heading of the forces at a step.

    >>> step_column(0.2), step_column(1.5)
    ('force_20pct_N', 'force_150pct_N')
    """
    return f"force_{100 * level:.6g}pct_N"


def cut_list_csv(result: HardwareCheck) -> bytes:
    """A row a cut: bars numbered within their section; what no bar can give has no bar."""
    rows: list[list[Cell]] = []
    for stock in cut_plans(result):
        for number, bar in enumerate(stock.plan.bars, start=1):
            rows += [_cut_row(stock, number, cut.mark, cut.length, cut.count, bar.offcut) for cut in bar.cuts]
        rows += [_cut_row(stock, None, cut.mark, cut.length, cut.count, None) for cut in stock.plan.too_long]
    head = ["section", "material", "bar", "mark", "length_m", "count", "offcut_m", "bar_m", "kerf_m", "note"]
    return csv_bytes(head, rows)


def _cut_row(
    stock: StockCut, number: int | None, mark: str, length: float, count: int, offcut: float | None
) -> list[Cell]:
    note = "" if number is not None else "longer than a bar"
    return [stock.section, stock.material, number, mark, length, count, offcut, stock.bar, stock.kerf, note]


def drill_list_csv(result: HardwareCheck) -> bytes:
    """A row a hole of each mark, in running dimensions from the datum end."""
    rows: list[list[Cell]] = [
        [row.mark, row.hole, PER_METRE * row.along, PER_METRE * row.across, PER_METRE * row.diameter,
         PER_METRE * row.pin, row.note]
        for row in drill_rows(result)
    ]  # fmt: skip
    head = ["mark", "hole", "from_datum_mm", "across_mm", "diameter_mm", "pin_mm", "note"]
    return csv_bytes(head, rows)


def masses_csv(result: HardwareCheck) -> bytes:
    """A row a member, and one a tree: mass and centre of mass, counterweights among them."""
    rows: list[list[Cell]] = [
        [row.name, row.mark, row.mass, row.x, row.y, row.height, row.u, row.v] for row in centres(result)
    ]  # fmt: skip
    return csv_bytes(["member", "mark", "mass_kg", "x_m", "y_m", "height_m", "u_m", "v_m"], rows)
