"""Findings read from rig.json."""

from __future__ import annotations

from typing import get_args

from rigdesign.findings import Finding, Severity, Stage
from rigdesign.record.fields import Fields


def read_findings(fields: Fields, key: str = "findings") -> tuple[Finding, ...]:
    """Return the findings that a list of objects holds.

    Raises
    ------
    InputError
        Where a stage or severity is unknown, or something is missing.
    """
    return tuple(_finding(finding) for finding in fields.objects(key))


def _finding(fields: Fields) -> Finding:
    stage: Stage = fields.one_of("stage", get_args(Stage))  # type: ignore[assignment]
    severity: Severity = fields.one_of("severity", get_args(Severity))  # type: ignore[assignment]
    texts = {key: fields.text(key) for key in ("object", "text", "value", "limit", "remedy")}
    return Finding(stage, severity, **texts, number=fields.whole("number"))
