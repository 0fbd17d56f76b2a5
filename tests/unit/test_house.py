"""The house rules that a reader of DEVELOPERS.md relies on: who imports whom, and what the package exports."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

import rigdesign

PACKAGE = Path(rigdesign.__file__).parent
UNDER_ALL = {"units", "unit_factors", "display", "errors", "findings", "words"}
STAGES = ["brief", "target", "pads", "levers", "hardware", "checks", "record", "chain", "report", "command"]
SHOWN_ONLY = {"matplotlib", "rich", "click"}
COUNTERS = {"Count", "Session"}
"""Dataclasses that one search or one run fills as it goes; they are never handed on."""
EVERY = sorted(PACKAGE.rglob("*.py"))
MODULES = sorted(path for path in PACKAGE.rglob("*.py") if path.parent != PACKAGE)


def stage_of(path: Path) -> str:
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


def imports_of(path: Path) -> set[str]:
    """Every module that a file imports, wherever the import stands; all are named in full."""
    names = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            names |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path.name}: a relative import hides the stage that it goes to"
            names |= {f"{node.module}.{alias.name}" for alias in node.names}
    return names


@pytest.mark.parametrize("path", MODULES, ids=[str(path.relative_to(PACKAGE)) for path in MODULES])
def test_a_stage_imports_none_that_comes_after_it(path):
    own = STAGES.index(stage_of(path))
    for name in imports_of(path):
        parts = name.split(".")
        if parts[0] == "rigdesign" and len(parts) > 1 and parts[1] in STAGES:
            assert STAGES.index(parts[1]) <= own, f"{path.name} imports {name}"


@pytest.mark.parametrize("path", EVERY, ids=[str(path.relative_to(PACKAGE)) for path in EVERY])
def test_only_report_and_command_know_pictures_and_terminals(path):
    known = {name.split(".")[0] for name in imports_of(path)} & SHOWN_ONLY
    assert not known or stage_of(path) in ("report", "command"), f"{path.name} imports {known}"


@pytest.mark.parametrize("path", EVERY, ids=[str(path.relative_to(PACKAGE)) for path in EVERY])
def test_every_dataclass_is_frozen(path):
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.ClassDef) and node.name not in COUNTERS:
            plain = [d for d in node.decorator_list if ast.unparse(d).startswith("dataclass")]
            assert all("frozen=True" in ast.unparse(d) for d in plain), f"{node.name} can be changed"


@pytest.mark.parametrize(
    ("module", "heavy"),
    [
        ("rigdesign", {"numpy", "scipy", "networkx", "shapely", "pydantic", "pint", *SHOWN_ONLY}),
        ("rigdesign.chain", {"numpy", "scipy", *SHOWN_ONLY}),
        ("rigdesign.command.commands", {"numpy", "scipy", "matplotlib", "rich"}),
        ("rigdesign.checks", {"pydantic", "pint", *SHOWN_ONLY}),
        ("rigdesign.report.writing", {"numpy", "matplotlib"}),
        ("rigdesign.record.rig_json", {"matplotlib", "rich", "click"}),
    ],
)
def test_what_an_import_does_not_load(module, heavy):
    """In a process of its own: what other tests have loaded does not count."""
    code = f"import sys; import {module}; print(*sorted({heavy!r} & set(sys.modules)))"
    ran = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert ran.stdout.split() == []


@pytest.mark.parametrize("name", sorted(UNDER_ALL))
def test_what_lies_under_all_imports_no_stage(name):
    for imported in imports_of(PACKAGE / f"{name}.py"):
        parts = imported.split(".")
        assert not (parts[0] == "rigdesign" and len(parts) > 1 and parts[1] in STAGES)


def test_every_exported_name_is_there_and_no_other_is_promised():
    for name in rigdesign.__all__:
        assert getattr(rigdesign, name) is not None
    assert dir(rigdesign) == sorted(rigdesign.__all__)
    with pytest.raises(AttributeError, match="no attribute 'desing'"):
        _ = rigdesign.desing


def test_nothing_that_a_user_gets_is_without_its_words():
    for name in set(rigdesign.__all__) - {"__version__"}:
        assert getattr(rigdesign, name).__doc__
