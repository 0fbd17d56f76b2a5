"""The page of the brief speaks the truth of [hardware] and [keep]: every key, default, example and table is tried."""

from __future__ import annotations

import re
from collections.abc import Iterator
from pathlib import Path

import pytest
from factories import make_hardware

from rigdesign.brief.keys import keys_of
from rigdesign.brief.layout_hardware import HardwareTable, KeepTable

PAGE = (Path(__file__).resolve().parents[3] / "docs" / "brief.md").read_text(encoding="utf-8")
HARDWARE = PAGE[PAGE.index("### [hardware]") : PAGE.index("#### Stock")]
KEEP = PAGE[PAGE.index("### [keep]") : PAGE.index("## Surfaces")]
WITH = {
    "load_factor": 'rules = "EN 1993"\n',
    "mark_tolerance": 'part_marks = "few"\n',
}
"""What a key's example needs beside it."""


def rows(section: str) -> dict[str, tuple[str, str]]:
    """The rows of a table of keys: default and meaning by key, two keys in a row apart."""
    found = {}
    for line in section.splitlines():
        if line.startswith("| `"):
            names, default, meaning = (cell.strip() for cell in line.strip("|").split("|"))
            for name in names.split(", "):
                found[name.strip("`")] = (default, meaning)
    return found


def examples() -> Iterator[tuple[str, str]]:
    for key, (_, meaning) in rows(HARDWARE).items():
        for written in re.findall(r"`(\w+ = [^`]+)`", meaning):
            if written.split(" = ")[0] == key:
                yield key, written


def tables() -> dict[str, str]:
    """The tables of the page by the first heading of each."""
    blocks = re.findall(r"(?:^    .+\n)+", PAGE[PAGE.index("#### Stock") : PAGE.index("## Keep")], re.MULTILINE)
    texts = [re.sub(r"^    ", "", block, flags=re.MULTILINE) for block in blocks]
    return {text.split(",")[0]: text for text in texts}


SHIPPED = {
    "stock": tables()["section"],
    "jacks": tables()["jack"],
    "cells": tables()["cell"],
    "skin": tables()["x [m]"],
}


def test_every_key_has_a_row_with_an_example() -> None:
    assert list(rows(HARDWARE)) == keys_of(HardwareTable)
    assert list(rows(KEEP)) == keys_of(KeepTable)
    assert {key for key, _ in examples()} == set(keys_of(HardwareTable))


@pytest.mark.parametrize(("key", "written"), list(examples()))
def test_every_example_is_read_and_says_something(read, key: str, written: str) -> None:
    beside = WITH.get(key, "")
    with_it = read(("", f"[hardware]\n{beside}{written}"), **SHIPPED).hardware
    without = read(("", f"[hardware]\n{beside}"), **SHIPPED).hardware
    assert repr(with_it) != repr(without)


def test_every_default_of_the_page_is_the_default(read) -> None:
    lines = []
    for key, (default, _) in rows(HARDWARE).items():
        if re.fullmatch(r"`.+`|[0-9.]+", default) and key not in WITH:
            lines.append(f"{key} = {default.strip('`')}")
    assert len(lines) > 18
    assert read(("", "[hardware]\n" + "\n".join(lines))).hardware == make_hardware()
    assert [rows(HARDWARE)[key][0] for key in WITH] == ["1.5", '`"10 mm"`']
    assert read(("", '[hardware]\nrules = "EN 1993"\nload_factor = 1.5')).hardware == make_hardware(rules="EN 1993")
    few = read(("", '[hardware]\npart_marks = "few"\nmark_tolerance = "10 mm"')).hardware
    assert few == make_hardware(marks="few")
    pins = re.search(r"ISO 2341 from 8 mm on: ([0-9, ]+ mm)", HARDWARE)
    assert pins is not None
    assert read(("", f'[hardware]\npins = "{pins.group(1)}"')).hardware == make_hardware()


def test_the_tables_of_the_page_are_read(read) -> None:
    lines = 'stock = "stock.csv"\njacks = "jacks.csv"\ncells = "cells.csv"\nsurface = "skin.csv"'
    for build in ("twin flats", "twin channels", "hollow section"):
        hardware = read(("", f'[hardware]\n{lines}\nbuild = "{build}"'), **SHIPPED).hardware
        assert {row.kind for row in hardware.stock} == {"flat", "channel", "hollow", "plate"}
        assert [row.force for row in hardware.jacks] == [row.force for row in hardware.cells] == [1e4, 2.5e4]
        assert hardware.surface is not None
        assert hardware.surface.z.tolist() == [0.048, 0.035, 0.012]


def test_the_example_of_a_kept_rig_is_read(read, tmp_path: Path) -> None:
    block = "\n".join(line[4:] for line in KEEP.splitlines() if line.startswith("    "))
    folder = re.search(r'rig += "(\w+)"', block)
    assert folder is not None
    (tmp_path / folder.group(1)).mkdir()
    (tmp_path / folder.group(1) / "rig.json").write_text('{"schema_number": 1}')
    keep = read(("", block)).keep
    assert (keep.folder, keep.hole_distance) == (folder.group(1), 0.04)
