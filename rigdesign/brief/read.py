"""From a path, or from kept texts, to a Brief."""

from __future__ import annotations

import re
import tomllib
from pathlib import Path
from typing import Any

from pydantic import ValidationError

from rigdesign.brief.build import build
from rigdesign.brief.context import Context
from rigdesign.brief.layout import BriefFile
from rigdesign.brief.locate import Places, key_lines
from rigdesign.brief.messages import brief_error, plan_error
from rigdesign.brief.model import Brief, Source
from rigdesign.brief.sources import FolderTexts, KeptTexts, Texts
from rigdesign.errors import BriefError

_AT = re.compile(r"(.*?) \(at (?:line (\d+), column (\d+)|end of document)\)", re.DOTALL)
_UNQUOTED = re.compile(r"\s*([A-Za-z0-9_-]+)\s*=\s*([+-]?[0-9.][0-9.eE+-]*\s*[A-Za-z%][^\"'#]*?)\s*(?:#.*)?")


def read_from_folder(path: Path) -> Brief:
    """Read the brief at `path` and the tables beside it."""
    texts = FolderTexts(path)
    return _read(path.name, texts.used()[path.name], texts)


def read_from_source(source: Source) -> Brief:
    """Read a brief again from the texts that were kept."""
    texts = KeptTexts(source)
    return _read(source.brief_name, source.texts[source.brief_name], texts)


def _read(name: str, text: str, texts: Texts) -> Brief:
    raw = _parsed(text, name)
    places = Places(name, key_lines(text))
    try:
        file = BriefFile.model_validate(raw)
    except ValidationError as error:
        raise brief_error(error, raw, places) from None
    if (plan := plan_error(raw, places)) is not None:
        raise plan
    return build(file, Context(raw, places, texts))


def _parsed(text: str, name: str) -> dict[str, Any]:
    """Return the content of a TOML text; raise BriefError with line and column where it is none."""
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        match = _AT.fullmatch(str(error))
        reason, line, column = match.groups() if match else (str(error), None, None)
        where = f"{name}, line {line}, column {column}" if line else f"{name}, at its end" if match else name
        raise BriefError(
            f"the brief is not TOML: {reason[:1].lower()}{reason[1:]}",
            where=where,
            remedy=_quotes(text, int(line)) if line else "",
        ) from None
    except ValueError:  # tomllib reads no whole number of more than 4300 digits and says so in its own way
        raise BriefError("the brief holds a whole number of thousands of digits", where=name) from None
    except RecursionError:
        raise BriefError("the brief nests its brackets too deeply", where=name) from None


def _quotes(text: str, line: int) -> str:
    """Return advice where a quantity stands without quotes."""
    lines = text.splitlines()
    match = _UNQUOTED.fullmatch(lines[line - 1]) if line <= len(lines) else None
    return f'a quantity is written in quotes: {match.group(1)} = "{match.group(2)}"' if match else ""
