"""The JSON Schema of the brief's file, generated from its layout.

``python -m rigdesign.brief.describe`` writes it beside this file; a test holds the two together.
"""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

from rigdesign.brief import SCHEMA_FILE
from rigdesign.brief.layout import BriefFile

DIALECT = "https://json-schema.org/draft/2020-12/schema"


def brief_schema() -> dict[str, Any]:
    """Return the schema with its dialect and a title."""
    described = _plain(BriefFile.model_json_schema())
    return {"$schema": DIALECT, **described, "title": "A brief of rigdesign"}


def _plain(node: Any) -> Any:
    """Return the schema without pydantic's generated titles and without null, which TOML cannot write."""
    if isinstance(node, list):
        return [_plain(item) for item in node]
    if not isinstance(node, dict):
        return node
    result = {key: _plain(value) for key, value in node.items() if not (key == "title" and isinstance(value, str))}
    if result.get("default", 0) is None:
        del result["default"]
    options = [option for option in result.get("anyOf", ()) if option != {"type": "null"}]
    if len(options) == 1 and len(result["anyOf"]) == 2:
        del result["anyOf"]
        result = {**options[0], **result}
    elif options:
        result["anyOf"] = options
    return result


def schema_text() -> str:
    """Return the schema as the shipped file holds it."""
    return json.dumps(brief_schema(), indent=2, ensure_ascii=False) + "\n"


if __name__ == "__main__":
    Path(__file__).with_name(SCHEMA_FILE).write_text(schema_text(), encoding="utf-8")
