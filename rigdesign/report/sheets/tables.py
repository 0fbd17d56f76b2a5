"""Tables on sheets: columns as wide as what is in them, headings repeated where a table goes on, several to a sheet."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field

from rigdesign.report.sheets.frame import FIELD
from rigdesign.report.sheets.paper import BODY, HATCH, HEAD, MEDIUM, Box, Paper
from rigdesign.report.sheets.texts import broken, shortened, text_width

ROW, NEXT_LINE = 4.3, 3.1
"""Height of a row of one line, and of each further line [mm]."""
PAD = 1.4
"""Clear width on both sides of what stands in a cell [mm]."""
TITLE_ROOM, GAP = 9.0, 7.0
"""Height of a table's title, and distance of tables and of blocks of a table [mm]."""
FEWEST = 3
"""A table does not begin at the foot of a sheet with fewer rows than this, or than it has."""
WIDEST = 110.0
"""The widest that the column of long texts gets, unless it is given all the room there is [mm]."""


@dataclass(frozen=True)
class Table:
    """A table: title, headings (a line break makes two lines), rows of texts, "l" or "r" a column, and notes.

    Texts of the column `long` are broken to several lines; those of all others are not.
    """

    title: str
    heads: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    sides: str
    long: int | None = None
    notes: tuple[str, ...] = field(default=())


def table_sheets(tables: Sequence[Table]) -> Iterator[tuple[Paper, str, str]]:
    """Yield sheets that hold all tables in their order, each with its name and scale; empty tables are left out."""
    paper, top, titles = Paper(), FIELD.high - 4.0, list[str]()
    for table in tables:
        start = 0
        while start < len(table.rows):
            room = Box(FIELD.left + 6.0, FIELD.low + 4.0, FIELD.width - 12.0, top - FIELD.low - 4.0)
            end, used = draw_table(paper, room, table, start)
            if end > start:
                titles += [] if table.title in titles else [table.title]
                start, top = end, top - used - GAP
            if start < len(table.rows):
                if titles:
                    yield paper, _joined(titles), "none"
                paper, top, titles = Paper(), FIELD.high - 4.0, []
    if titles:
        yield paper, _joined(titles), "none"


def _joined(titles: Sequence[str]) -> str:
    first = titles[0]
    rest = [title[0].lower() + title[1:] for title in titles[1:]]
    return ", ".join([first, *rest])


def draw_table(paper: Paper, room: Box, table: Table, start: int) -> tuple[int, float]:
    """Draw a table from row `start` on into a room, in blocks side by side where it is narrow.

    Return the first row that found no place, and the height used [mm]; nothing is drawn where hardly a row fits.
    """
    widths = column_widths(table, room.width)
    wide = sum(widths)
    blocks = max(1, int((room.width + GAP) // (wide + GAP)))
    cells = [_cells(table, row, widths) for row in table.rows[start:]]
    heights = [_height(row) for row in cells]
    head = _head_height(table)
    free = room.height - TITLE_ROOM - head - (NEXT_LINE * len(table.notes) + 2.0 if table.notes else 0.0)
    if sum(heights[: min(FEWEST, len(heights))]) > free:
        return start, 0.0
    limit = min(free, max(sum(heights) / blocks + max(heights), sum(heights[:FEWEST])))
    title = table.title if start == 0 else f"{table.title}, continued"
    paper.text(room.left, room.high - 3.0, title, HEAD, bold=True)
    row, deepest, top = 0, 0.0, room.high - TITLE_ROOM + 2.0
    for block in range(blocks):
        if row == len(cells):
            break
        last = row
        while last < len(cells) and (last == row or sum(heights[row : last + 1]) <= limit):
            last += 1
        left = room.left + block * (wide + GAP)
        _block(paper, left, top, table, widths, cells[row:last], heights[row:last])
        deepest = max(deepest, head + sum(heights[row:last]))
        row = last
    used = TITLE_ROOM - 2.0 + deepest
    if start + row == len(table.rows):
        for note in table.notes:
            used += NEXT_LINE + 0.4
            paper.text(room.left, room.high - used - 0.6, shortened(note, room.width, BODY), BODY)
    return start + row, used


def draw_whole(paper: Paper, room: Box, table: Table) -> float:
    """Draw a table if all of it fits into a room; return the height used [mm], 0 where it does not fit."""
    if not table.rows:
        return 0.0
    trial = Paper(paper.size)
    end, used = draw_table(trial, room, table, 0)
    if end < len(table.rows):
        return 0.0
    draw_table(paper, room, table, 0)
    return used


def column_widths(table: Table, most: float) -> list[float]:
    """Return the widths of the columns [mm]; the column of long texts takes what is left, if it needs it."""
    widths = []
    for k, head in enumerate(table.heads):
        wide = max(text_width(part, BODY, True) for part in head.split("\n"))
        wide = max([wide, *(text_width(row[k], BODY) for row in table.rows if k != table.long)])
        widths.append(wide + 2 * PAD)
    if table.long is not None:
        left = most - sum(width for k, width in enumerate(widths) if k != table.long)
        need = max(text_width(row[table.long], BODY) for row in table.rows) + 2 * PAD + 0.1
        widths[table.long] = max(widths[table.long], min(need, left))
    return widths


def _cells(table: Table, row: Sequence[str], widths: Sequence[float]) -> list[list[str]]:
    """Return the lines of every cell of a row."""
    return [broken(text, widths[k] - 2 * PAD, BODY) if k == table.long else [text] for k, text in enumerate(row)]


def _height(cells: Sequence[Sequence[str]]) -> float:
    return ROW + NEXT_LINE * (max(max(len(lines) for lines in cells), 1) - 1)


def _head_height(table: Table) -> float:
    return ROW + NEXT_LINE * (max(head.count("\n") for head in table.heads))


def _block(
    paper: Paper, left: float, top: float, table: Table, widths: Sequence[float],
    rows: Sequence[Sequence[Sequence[str]]], heights: Sequence[float],
) -> None:  # fmt: skip
    """Draw headings and rows of one block, with lines around and between."""
    edges = [left]
    for width in widths:
        edges.append(edges[-1] + width)
    head = _head_height(table)
    for k, words in enumerate(table.heads):
        _cell(paper, edges[k], edges[k + 1], top, words.split("\n"), "l", True)
    y = top - head
    paper.line((left, y), (edges[-1], y), weight=MEDIUM)
    for row, height in zip(rows, heights, strict=True):
        for k, lines in enumerate(row):
            _cell(paper, edges[k], edges[k + 1], y, lines, table.sides[k], False)
        y -= height
        paper.line((left, y), (edges[-1], y), weight=HATCH)
    paper.box(Box(left, y, edges[-1] - left, top - y), MEDIUM)
    for edge in edges[1:-1]:
        paper.line((edge, y), (edge, top), weight=HATCH)


def _cell(paper: Paper, left: float, right: float, top: float, lines: Sequence[str], side: str, bold: bool) -> None:
    for k, line in enumerate(lines):
        y = top - ROW / 2 - k * NEXT_LINE
        if side == "r":
            paper.text(right - PAD, y, line, BODY, ha="right", bold=bold)
        else:
            paper.text(left + PAD, y, line, BODY, bold=bold)
