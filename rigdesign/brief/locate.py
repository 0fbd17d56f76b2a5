"""Where a key of the brief stands in its file.

The TOML reader of the standard library keeps no line numbers; a light scan over the text finds the line of each key
that is written in the plain way.  Where a key is written otherwise (inline tables), its table's line is given.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

Path = tuple[str | int, ...]

_TABLES = ("specimen", "load", "test", "pads", "levers", "jack", "acceptance", "hardware", "keep")
_HEADER = re.compile(r"\s*(\[\[?)\s*([A-Za-z][A-Za-z0-9_.\- ]*?)\s*\]\]?\s*(?:#.*)?")
_KEY = re.compile(r"""\s*["']?([A-Za-z0-9_.\-]+)["']?\s*=(.*)""")


def key_lines(text: str) -> dict[Path, int]:
    """Return the line, counted from 1, of each table and key of a TOML text.

    Examples
    --------
    >>> key_lines("title = 'a'\\n[[load]]\\n[[load]]\\npoint = '3 N'\\n")
    {('title',): 1, ('load', 0): 2, ('load', 1): 3, ('load', 1, 'point'): 4}
    """
    lines: dict[Path, int] = {}
    counts: dict[Path, int] = {}
    table: Path = ()
    quote = ""
    for number, line in enumerate(text.splitlines(), start=1):
        if quote:
            quote = "" if quote in line else quote
            continue
        if header := _HEADER.fullmatch(line):
            table = tuple(part.strip() for part in header.group(2).split("."))
            if header.group(1) == "[[":
                counts[table] = counts.get(table, -1) + 1
                table = (*table, counts[table])
            lines.setdefault(table, number)
        elif key := _KEY.fullmatch(line):
            lines.setdefault((*table, *key.group(1).split(".")), number)
            quote = _left_open(key.group(2))
    return lines


def _left_open(value: str) -> str:
    """Return the quotes that a text over several lines leaves open, or nothing."""
    for quote in ('"""', "'''"):
        if value.count(quote) % 2:
            return quote
    return ""


def label(path: Path) -> str:
    """Return how messages call a table or key.

    Examples
    --------
    >>> label(("pads", "count")), label(("load", 1, "total")), label(("acceptance", "region", 0)), label(("title",))
    ('[pads] count', '[[load]] 2, total', '[[acceptance.region]] 1', 'title')
    """
    if len(path) > 1 and isinstance(path[1], int):
        table, rest = f"[[{path[0]}]] {path[1] + 1}", path[2:]
    elif len(path) > 2 and isinstance(path[2], int):
        table, rest = f"[[{path[0]}.{path[1]}]] {path[2] + 1}", path[3:]
    elif len(path) > 1 or path[0] in _TABLES:
        return f"[{path[0]}]" + (f" {path[1]}" if len(path) > 1 else "")
    else:
        return str(path[0])
    return table + (f", {rest[0]}" if rest else "")


@dataclass(frozen=True)
class Places:
    """The places in one brief: its file name and the lines of its keys."""

    name: str
    lines: dict[Path, int]

    def where(self, *path: str | int) -> str:
        """Return the place of a table or key for a message: file, line where known, table and key."""
        if not path:
            return self.name
        line = next((self.lines[path[:n]] for n in range(len(path), 0, -1) if path[:n] in self.lines), None)
        return ", ".join([self.name, *([f"line {line}"] if line else []), label(path)])
