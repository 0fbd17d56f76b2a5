"""CSV as the rig folder has it.

UTF-8 with commas, a full stop as decimal sign and one heading line.  Numbers have twelve significant digits: more than
any instrument, and few enough that 0.1 + 0.2 reads 0.3.  What is not limited, not judged or not known is an empty cell.
No text cell can act as a formula in a spreadsheet.
"""

from __future__ import annotations

import csv
import io
import math
from collections.abc import Iterable, Sequence

Cell = str | int | float | None
FORMULA_STARTS = ("=", "+", "-", "−", "@", "\t", "\r", "\n")
DIGITS = 12


def csv_bytes(head: Sequence[str], rows: Iterable[Sequence[Cell]]) -> bytes:
    r"""Return a table as CSV.

    >>> csv_bytes(["pad", "x_m", "note"], [[1, 0.1 + 0.2, "=1+1"], [2, -0.0, None]])
    b"pad,x_m,note\n1,0.3,'=1+1\n2,0,\n"
    """
    out = io.StringIO(newline="")
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(head)
    writer.writerows([cell(value) for value in row] for row in rows)
    return out.getvalue().encode()


def cell(value: Cell) -> str:
    """Return a cell as text: a number with its digits, a text that no spreadsheet takes for a formula.

    >>> cell(1e-20), cell(float("inf")), cell("@pad"), cell(12), cell(-2.5)
    ('1e-20', '', "'@pad", '12', '-2.5')
    """
    if value is None:
        return ""
    if isinstance(value, str):
        return f"'{value}" if value.startswith(FORMULA_STARTS) else value
    if isinstance(value, int):
        return str(value)
    # + 0.0 turns a negative zero into zero
    return f"{float(value) + 0.0:.{DIGITS}g}" if math.isfinite(value) else ""
