"""The worked page of the docs: each line follows from its own arithmetic, and the program says the same within 1 %."""

from __future__ import annotations

import re
from math import cos, pi, sin, sqrt
from pathlib import Path

import pytest
from factories import make_hardware

from rigdesign.hardware.catalogue import flat, material
from rigdesign.hardware.model import Section
from rigdesign.hardware.rules import rule_set
from rigdesign.hardware.rules.model import Bar, PinState, PlateHole, Result

PAGE = Path(__file__).parents[3] / "docs" / "worked_pivot.md"
UNITS = {"N": 1, "N·mm": 1e-3, "mm": 1e-3, "mm²": 1e-6, "mm³": 1e-9, "mm⁴": 1e-12, "MPa": 1e6, "deg": 1, "": 1}
ROUNDED = 6e-4
"""Results on the page have four figures."""


def lines() -> list[tuple[str, str, str, float, float, str]]:
    """Check, symbol, arithmetic, result as printed and in SI, and what the program calls it, of every line."""
    found, check = [], ""
    for line in PAGE.read_text(encoding="utf-8").splitlines():
        if line.startswith("## "):
            check = line.removeprefix("## ")
        cells = [cell.strip() for cell in line.strip("|").split("|")] if line.startswith("| ") else []
        if len(cells) == 5 and cells[1] != "formula":
            number, _, unit = cells[3].partition(" ")
            found.append((check, cells[0], cells[2], float(number), float(number) * UNITS[unit], cells[4]))
    return found


LINES = lines()


def arithmetic(text: str) -> float:
    """What a cell of numbers comes to."""
    for sign, code in {"×": "*", "−": "-", "²": "**2", "³": "**3", "√": "sqrt", "π": "pi"}.items():
        text = text.replace(sign, code)
    text = re.sub(r"([\d.]+)°", r"\1*pi/180", text)
    assert re.fullmatch(r"(?:[\d.+*/(), -]|sqrt|sin|cos|min|pi)+", text), text
    value = eval(text, {"__builtins__": {}, "sqrt": sqrt, "sin": sin, "cos": cos, "min": min, "pi": pi})
    return float(value)


def program() -> dict[str, Result]:
    """Every check of the page, by its heading."""
    rules = rule_set(make_hardware(rules="BTH-1", design_factor=2.0))
    steel, of = material("S355"), flat(0.080, 0.010)
    section = Section(
        name="80×10",
        kind="flat",
        depth=0.080,
        width=0.010,
        web=0.010,
        flange=0.010,
        area=of.area,
        inertia=of.inertia,
        inertia_weak=of.inertia_weak,
        torsion=of.torsion,
        modulus=of.modulus,
        plastic=of.plastic,
        mass=6.28,
        bar=6.0,
        source="EN 10058",
    )
    lever = Bar(8000.0, 0.6, 0.4, section, 2, steel, 0.0255, 0.0205, 0.0, 0.3, 0.005)
    hole = PlateHole(8000.0, 2, 0.010, steel, 0.025, 0.0255, 0.4 - 0.01275, 0.02725, 0.040, False)
    eye = PlateHole(8000.0, 1, 0.020, steel, 0.025, 0.0255, 0.01725, 0.01725, 0.030, True)
    pin = PinState(8000.0, 0.025, material("42CrMo4"), 0.020, 0.010, 0.001)
    told = {result.check: result for result in (*rules.lever(lever), *rules.hole(hole), *rules.pin(pin))}
    return told | {f"eye: {result.check}": result for result in rules.hole(eye)}


def test_the_page_has_every_check_and_is_read_whole():
    headings = {check for check, *_ in LINES}
    assert headings == set(program()) - {"eye: dishing"}
    assert len(LINES) > 60
    uses = [check for check, *_, name in LINES if name == "utilisation"]
    assert sorted(uses) == sorted(headings)


@pytest.mark.parametrize("line", LINES, ids=[f"{check}, {symbol}" for check, symbol, *_ in LINES])
def test_each_line(line):
    check, _, numbers, printed, in_si, name = line
    assert arithmetic(numbers) == pytest.approx(printed, rel=ROUNDED)
    if name != "-":
        result = program()[check]
        told = {symbol: value for symbol, value, _ in result.working}
        told |= {"value": result.value, "limit": result.limit, "utilisation": result.utilisation}
        assert told[name] == pytest.approx(in_si, rel=0.01)
