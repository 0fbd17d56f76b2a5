"""The command as a person runs it, for tests: arguments in; exit code, words and files out."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

import pytest

from rigdesign.command import run

ROOT = Path(__file__).resolve().parent.parent
DEMOS = sorted((ROOT / "demo_rigs").glob("*/brief.toml"))

SMALL = """
title = "Small fin, gust from the side"

[specimen]
support = "cantilever"
root    = "0.1 m"
tip     = "1.7 m"

[[load]]
shape = "triangular"
total = "1.9 kN"

[pads]
count  = 5
places = "free"

[acceptance]
moment = "3 %"
"""
"""A brief that ends accepted at once; tests change one thing in it."""


@dataclass(frozen=True)
class Ended:
    """How a command ended."""

    code: int
    out: str
    err: str


Rigdesign = Callable[..., Ended]


def runner(capsys: pytest.CaptureFixture[str]) -> Rigdesign:
    """Return a function that runs the command inside this process."""

    def rigdesign(*arguments: object) -> Ended:
        capsys.readouterr()
        code = run([str(argument) for argument in arguments])
        out, err = capsys.readouterr()
        return Ended(code, out, err)

    return rigdesign


def changed(text: str, **replacements: str) -> str:
    """Return the brief's text with lines replaced: ``count="count = 7"`` replaces the line of the key `count`."""
    lines = text.splitlines()
    for key, line in replacements.items():
        places = [k for k, old in enumerate(lines) if old.split("=")[0].strip() == key]
        assert len(places) == 1, f"{key} stands {len(places)} times in the brief"
        lines[places[0]] = line
    return "\n".join(lines) + "\n"


def files_under(folder: Path) -> dict[str, bytes]:
    """Every file under a folder by its relative path, with its content."""
    return {str(path.relative_to(folder)): path.read_bytes() for path in sorted(folder.rglob("*")) if path.is_file()}
