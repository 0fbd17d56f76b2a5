"""What pydantic finds wrong with a brief, said in one plain message.

A file can have several faults; the one reported is an unknown key if there is one, because a misspelt key makes others
seem missing, and otherwise the first in the file.
"""

from __future__ import annotations

import difflib
from collections.abc import Iterator
from typing import Any

from pydantic import ValidationError

from rigdesign.brief.keys import Table, keys_of
from rigdesign.brief.layout import LOAD_ENTRIES, PLAN_KEYS, TABLES, BriefFile, RegionTable, load_kind
from rigdesign.brief.locate import Path, Places
from rigdesign.errors import BriefError, InputError
from rigdesign.units import in_words

PLAN_RIG = "belongs to plan rigs, whose specimen is given by an outline"
_AT_END = 10**9


def brief_error(error: ValidationError, raw: dict[str, Any], places: Places) -> BriefError:
    """Return the one message for what pydantic found in the file's content `raw`."""
    faults = [(_path(fault["loc"]), fault) for fault in error.errors(include_url=False)]

    def rank(item: tuple[Path, Any]) -> tuple[bool, int]:
        path, fault = item
        return fault["type"] != "extra_forbidden", places.lines.get(path, _AT_END)

    path, fault = min(faults, key=rank)
    kind = fault["type"]
    if kind == "extra_forbidden":
        return _unknown_key(path, raw, places)
    if (plan := plan_error(raw, places)) is not None:
        return plan
    if kind == "missing":
        return _missing(path, places)
    if kind == "union_tag_not_found":
        return _what_load(path, fault["input"], places)
    inner = fault.get("ctx", {}).get("error")
    if isinstance(inner, InputError):
        return placed(inner, places.where(*path))
    return _structure(path, fault, places)


def placed(error: InputError, where: str) -> BriefError:
    """Return a BriefError with the place added."""
    return BriefError(error.what, where=where, value=error.value, limit=error.limit, remedy=error.remedy)


def is_plan(raw: dict[str, Any]) -> bool:
    """Whether the brief is one of a plan rig: its specimen has an outline."""
    specimen = raw.get("specimen")
    return isinstance(specimen, dict) and "outline" in specimen


def plan_error(raw: dict[str, Any], places: Places) -> BriefError | None:
    """Return the message for the first key in the file that needs an outline where there is none, or None."""
    if is_plan(raw) or not isinstance(raw.get("specimen"), dict):
        return None
    found = list(_plan_paths(raw))
    if not found:
        return None
    path = min(found, key=lambda path: places.lines.get(path, _AT_END))
    if path[-1] == "at":
        what, remedy = f"a place given by x and y {PLAN_RIG}", "give [specimen] outline, or x alone"
    else:
        what, remedy = f'"{path[-1]}" {PLAN_RIG}', "give [specimen] outline, or delete it to design a line rig"
    return BriefError(what, where=places.where(*path), remedy=remedy)


def _plan_paths(raw: dict[str, Any]) -> Iterator[Path]:
    """Yield the path of each key that needs an outline; the file may be out of shape otherwise."""
    for path, table in _plain_tables(raw):
        home = str(path[0])
        for key, value in table.items():
            is_pair = home in ("load", "jack") and key == "at" and isinstance(value, list) and len(value) == 2
            if key in PLAN_KEYS.get(home, ()) or is_pair:
                yield (*path, key)


def _plain_tables(raw: dict[str, Any]) -> Iterator[tuple[Path, dict[str, Any]]]:
    """Yield the tables of the file that are tables, each load and region among them, with their paths."""
    for home, table in raw.items():
        if isinstance(table, dict):
            yield (home,), table
    acceptance = raw.get("acceptance")
    regions = acceptance.get("region") if isinstance(acceptance, dict) else None
    for path, entries in ((("load",), raw.get("load")), (("acceptance", "region"), regions)):
        for number, entry in enumerate(entries if isinstance(entries, list) else ()):
            if isinstance(entry, dict):
                yield (*path, number), entry


def _path(loc: tuple[int | str, ...]) -> Path:
    """Return the path in the file: without the kind of load that pydantic puts behind its number, or list positions."""
    if loc[0] == "load" and len(loc) > 2:
        return (*loc[:2], *loc[3:4])
    return loc[:4] if loc[:2] == ("acceptance", "region") else loc[:2]


def _table_at(path: Path, raw: dict[str, Any]) -> type[Table]:
    """Return the model of the table that holds the key at `path`."""
    if len(path) == 1:
        return BriefFile
    if path[0] == "load":
        return LOAD_ENTRIES[load_kind(raw["load"][path[1]]) or "shape"]
    return RegionTable if len(path) == 4 else TABLES[str(path[0])]


def _unknown_key(path: Path, raw: dict[str, Any], places: Places) -> BriefError:
    """Return the message for a key that this table does not have."""
    key, home = str(path[-1]), str(path[0])
    where = places.where(*path)
    if len(path) == 1 and isinstance(raw[key], dict):
        where = where.removesuffix(key) + f"[{key}]"
    known = keys_of(_table_at(path, raw))
    table = "a brief" if len(path) == 1 else _called(path, raw)
    what = f'"{key}" is no key of {table}'
    others = [f'[[load]] with "{kind}"' for kind, model in LOAD_ENTRIES.items() if key in keys_of(model)]
    if not (others and home == "load"):
        others = [f"[{name}]" for name, model in TABLES.items() if key in keys_of(model)] + others
    if others:
        return BriefError(what, where=where, remedy=f"it belongs to {' or '.join(others)}")
    near = difflib.get_close_matches(key.lower(), known, n=1, cutoff=0.6)
    if near:
        return BriefError(what, where=where, remedy=f'did you mean "{near[0]}"?')
    return BriefError(what, where=where, limit=", ".join(known))


def _called(path: Path, raw: dict[str, Any]) -> str:
    if path[0] == "load":
        return f'a [[load]] with "{load_kind(raw["load"][path[1]])}"'
    return "[[acceptance.region]]" if len(path) == 4 else f"[{path[0]}]"


def _missing(path: Path, places: Places) -> BriefError:
    """Return the message for a key or table that must be there."""
    key = str(path[-1])
    if len(path) > 1:
        return BriefError(f'the key "{key}" is missing', where=places.where(*path[:-1]))
    form = "[[load]]" if key == "load" else f"[{key}]"
    return BriefError(f"the table {form} is missing", where=places.name, remedy=f"add {form}")


def _what_load(path: Path, value: object, places: Places) -> BriefError:
    """Return the message for a load that says not what it is, or says two things."""
    where, kinds = places.where(*path), ", ".join(LOAD_ENTRIES)
    if not isinstance(value, dict):
        return BriefError(
            "a load is a table", where=where, value=in_words(value), remedy="write [[load]] above its keys"
        )
    given = [kind for kind in LOAD_ENTRIES if kind in value]
    if given:
        what = f"a load is one thing, and this one names {len(given)}"
        return BriefError(what, where=where, value=", ".join(given), remedy="write a [[load]] for each; they are added")
    near = [
        match
        for key in value
        for match in difflib.get_close_matches(str(key).lower(), list(LOAD_ENTRIES), n=1, cutoff=0.7)
    ]
    remedy = f'did you mean "{near[0]}"?' if near else ""
    return BriefError("the load does not say what it is", where=where, limit=f"exactly one of {kinds}", remedy=remedy)


def _structure(path: Path, fault: Any, places: Places) -> BriefError:
    """Return the message for a table where there is none, and the like."""
    where = places.where(*path)
    if path == ("load",) or path[:2] == ("acceptance", "region"):
        form = "[[load]]" if path == ("load",) else "[[acceptance.region]]"
        if fault["type"] == "too_short":
            return BriefError("there is no load", where=where, remedy="add a [[load]]")
        return BriefError(f"{form} has double brackets", where=where, remedy=f"write {form} above each")
    form = f"[{path[0]}]"
    return BriefError(
        f"{form} is a table", where=where, value=in_words(fault["input"]), remedy=f"write {form} above its keys"
    )
