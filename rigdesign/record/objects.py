"""What findings and numbers look like in JSON."""

from __future__ import annotations

import json
import math
from typing import Any

from rigdesign.findings import Finding

INFINITE = "infinite"
"""How an infinite number is written."""


def json_bytes(value: Any) -> bytes:
    """Return JSON for people and programs: indented, keys in their own order, letters as they are."""
    return (json.dumps(value, indent=2, ensure_ascii=False, allow_nan=False) + "\n").encode()


def number_object(value: float) -> float | str:
    """Return a number as JSON holds it: the same float when it is read, "infinite" where it is.

    >>> number_object(float("inf")), number_object(0.1)
    ('infinite', 0.1)
    """
    return INFINITE if value == math.inf else float(value)


def finding_object(finding: Finding) -> dict[str, Any]:
    """Return a finding as an object for JSON."""
    return {
        "stage": finding.stage,
        "number": finding.number,
        "severity": finding.severity,
        "object": finding.object,
        "text": finding.text,
        "value": finding.value,
        "limit": finding.limit,
        "remedy": finding.remedy,
    }
