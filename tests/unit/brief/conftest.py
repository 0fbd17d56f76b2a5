"""A small brief that each test changes in one place, written to a folder of its own and read."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import pytest
from plan_briefs import PLAN, TEXTS

from rigdesign.brief import read_brief
from rigdesign.brief.model import Brief

BASE = """\
title = "Test foil"

[specimen]
support = "cantilever"
root = "0.2 m"
tip = "3.4 m"

[[load]]
shape = "elliptical"
total = "5.4 kN"

[pads]
count = 6
"""

Edit = tuple[str, str]
Read = Callable[..., Brief]


def edited(*edits: Edit) -> str:
    """The base brief with each first text replaced by the second; an empty first text appends."""
    text = BASE
    for old, new in edits:
        assert old in text
        text = text.replace(old, new, 1) if old else text + new + "\n"
    return text


@pytest.fixture
def read(tmp_path: Path) -> Read:
    """Write the edited base brief and its tables, and read it, as in ``read(("6", "7"), ribs="x [m]\\n1\\n")``."""

    def write_and_read(*edits: Edit, **tables: str) -> Brief:
        (tmp_path / "foil.toml").write_text(edited(*edits), encoding="utf-8")
        for name, text in tables.items():
            (tmp_path / f"{name}.csv").write_text(text, encoding="utf-8", newline="")
        return read_brief(tmp_path / "foil.toml")

    return write_and_read


@pytest.fixture
def refusal(read: Read) -> Callable[..., str]:
    """Like `read`, for a brief that must be refused: returns the message, with the error's class in front."""
    from rigdesign.errors import InputError

    def message(*edits: Edit, **tables: str) -> str:
        with pytest.raises(InputError) as caught:
            read(*edits, **tables)
        return f"{type(caught.value).__name__}: {caught.value}"

    return message


@pytest.fixture
def read_plan(tmp_path: Path) -> Read:
    """Like `read`, for the brief of a surface in plan_briefs; its tables are there unless others are given."""

    def write_and_read(*edits: Edit, **tables: str) -> Brief:
        text = PLAN
        for old, new in edits:
            assert old in text
            text = text.replace(old, new, 1) if old else text + new + "\n"
        (tmp_path / "plane.toml").write_text(text, encoding="utf-8")
        for name, table in {**TEXTS, **tables}.items():
            (tmp_path / f"{name}.csv").write_text(table, encoding="utf-8", newline="")
        return read_brief(tmp_path / "plane.toml")

    return write_and_read


@pytest.fixture
def plan_refusal(read_plan: Read) -> Callable[..., str]:
    """Like `refusal`, for the brief of a surface."""
    from rigdesign.errors import InputError

    def message(*edits: Edit, **tables: str) -> str:
        with pytest.raises(InputError) as caught:
            read_plan(*edits, **tables)
        return f"{type(caught.value).__name__}: {caught.value}"

    return message
