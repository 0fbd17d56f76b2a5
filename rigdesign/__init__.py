"""rigdesign: whiffletrees for structural tests, from one brief to a checked lever tree and the steel it is made of.

    import rigdesign

    brief = rigdesign.read_brief("brief.toml")
    answer = rigdesign.design(brief)                  # a HardwareCheck, or a Refusal that says what leaves no rig
    if not isinstance(answer, rigdesign.Refusal):
        rigdesign.write(answer, "brief_rig")

`arrange` stops at pads and levers, and its `Check` is the `check` of a `HardwareCheck`.  The other words are those of
the command: `build_target`, `study`, `assess`, `write`, `read_rig`, `read_rig_with_hardware`.  Importing this package
loads nothing heavy; each name is fetched from its stage when it is first used.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from rigdesign.brief import read_brief
    from rigdesign.chain import Study, arrange, assess, design, study
    from rigdesign.checks.hardware.model import HardwareCheck
    from rigdesign.checks.model import Check
    from rigdesign.errors import BriefError, InputError, OutputError, RigdesignError, TableError
    from rigdesign.findings import Finding, Refusal
    from rigdesign.report.writing import read_rig, read_rig_with_hardware, write
    from rigdesign.target import build_target

__version__ = "0.1.0"

__all__ = [
    "BriefError",
    "Check",
    "Finding",
    "HardwareCheck",
    "InputError",
    "OutputError",
    "Refusal",
    "RigdesignError",
    "Study",
    "TableError",
    "__version__",
    "arrange",
    "assess",
    "build_target",
    "design",
    "read_brief",
    "read_rig",
    "read_rig_with_hardware",
    "study",
    "write",
]

_HOME = {
    "read_brief": "rigdesign.brief",
    "build_target": "rigdesign.target",
    "arrange": "rigdesign.chain",
    "design": "rigdesign.chain",
    "study": "rigdesign.chain",
    "assess": "rigdesign.chain",
    "Study": "rigdesign.chain",
    "write": "rigdesign.report.writing",
    "read_rig": "rigdesign.report.writing",
    "read_rig_with_hardware": "rigdesign.report.writing",
    "Check": "rigdesign.checks.model",
    "HardwareCheck": "rigdesign.checks.hardware.model",
    "Finding": "rigdesign.findings",
    "Refusal": "rigdesign.findings",
    **dict.fromkeys(("BriefError", "InputError", "OutputError", "RigdesignError", "TableError"), "rigdesign.errors"),
}


def __getattr__(name: str) -> object:
    """Fetch a public name from its stage when it is first used."""
    if name not in _HOME:
        raise AttributeError(f"module 'rigdesign' has no attribute {name!r}")
    value: object = getattr(import_module(_HOME[name]), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return sorted(__all__)
