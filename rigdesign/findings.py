"""Remarks on a design, and the answer "there is none".

A `Finding` is one numbered remark of a check.  A `Refusal` says which limit leaves no design at all, how close the
best attempt came, and what would help.  Neither is an exception.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from typing import Literal

Severity = Literal["note", "warning", "failure"]
Stage = Literal["target", "pads", "levers", "statics", "space", "strength", "behaviour", "practice"]


@dataclass(frozen=True)
class Finding:
    """One remark: what was found on which object, its value, the limit, and what to do.

    `number` counts from 1 inside the stage, see `numbered`; 0 means "not numbered yet" inside a stage's own code.
    A `failure` makes the verdict "not accepted"; a `warning` wants a decision; a `note` informs.
    """

    stage: Stage
    severity: Severity
    object: str
    text: str
    value: str = ""
    limit: str = ""
    remedy: str = ""
    number: int = 0

    @property
    def name(self) -> str:
        """Stage and number, as people quote it: "target 3"."""
        return f"{self.stage} {self.number}"


def numbered(findings: Iterable[Finding]) -> tuple[Finding, ...]:
    """Return the findings in order, numbered from 1 inside each stage."""
    counts: dict[str, int] = {}
    result = []
    for finding in findings:
        counts[finding.stage] = counts.get(finding.stage, 0) + 1
        result.append(replace(finding, number=counts[finding.stage]))
    return tuple(result)


@dataclass(frozen=True)
class Refusal:
    """No rig at all is possible: the limit that binds, its value, the best that was found, and what would help."""

    stage: Stage
    text: str
    limit: str
    best: str
    remedy: str
