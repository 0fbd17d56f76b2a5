"""From the file's [keep] to the rig that is kept: that its folder holds a rig.json, as a text.

Here it is only held to be JSON with a schema number; what the rig itself says is read where rigs are read.
"""

from __future__ import annotations

import json
from typing import Any

from rigdesign.brief.context import Context
from rigdesign.brief.layout_hardware import KeepTable
from rigdesign.brief.model_hardware import KeptRig
from rigdesign.errors import BriefError

RIG_FILE = "rig.json"
_REMEDY = f'name a folder that "rigdesign design" wrote, with its {RIG_FILE} as it was'


def kept(table: KeepTable | None, context: Context) -> KeptRig | None:
    """Return the kept rig, None without [keep]; raise BriefError where the folder or its rig.json is none."""
    if table is None:
        return None
    folder, where = table.rig.rstrip("/") or "/", context.places.where("keep", "rig")
    name = f"{folder}/{RIG_FILE}"
    text = context.texts.rig(folder, name, where)
    content = _parsed(text, name)
    number = content.get("schema_number") if isinstance(content, dict) else None
    if isinstance(number, bool) or not isinstance(number, int):
        what = "this is no rig: it holds no whole number as schema_number"
        raise BriefError(what, where=where, value=f'"{name}"', remedy=_REMEDY)
    return KeptRig(folder, text, where, table.hole_distance)


def _parsed(text: str, name: str) -> Any:
    """Return the content of a JSON text; raise BriefError with line and column where it is none."""
    try:
        return json.loads(text)
    except json.JSONDecodeError as error:
        reason, where = error.msg, f"{name}, line {error.lineno}, column {error.colno}"
        what = f"the kept rig is not JSON: {reason[:1].lower()}{reason[1:]}"
        raise BriefError(what, where=where, remedy=_REMEDY) from None
    except (ValueError, RecursionError):  # numbers of thousands of digits, brackets nested by thousands
        raise BriefError("the kept rig is not JSON that can be read", where=name, remedy=_REMEDY) from None
