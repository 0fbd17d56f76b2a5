"""The texts of a brief and of its tables: from the folder of the brief, or from what rig.json keeps."""

from __future__ import annotations

import difflib
import os
from collections.abc import Iterator
from pathlib import Path
from typing import Protocol

from rigdesign.brief.model import Source
from rigdesign.errors import BriefError, InputError, TableError
from rigdesign.units import in_words


class Texts(Protocol):
    """Gives the text of a table by its name as the brief writes it."""

    def table(self, name: str, where: str) -> str:
        """Return the text of the table `name`, named by the brief at `where`."""

    def rig(self, folder: str, name: str, where: str) -> str:
        """Return the text `name` of a rig in `folder`, named by the brief at `where`."""

    def used(self) -> dict[str, str]:
        """Return the texts given so far by name, the brief's own among them."""


class FolderTexts:
    """Texts from the folder that the brief lies in; nothing outside it is read."""

    def __init__(self, brief: Path) -> None:
        """Read the brief itself; raise BriefError if it cannot be read."""
        self.folder = brief.parent
        if not brief.name.isprintable():  # it stands in messages, figures and rig.json; bytes that are no text too
            raise BriefError("the name of the brief is not plain text", value=in_words(brief.name), remedy="rename it")
        # a path such as "." has no name of its own and is called what it was called
        self._texts = {brief.name: _read(brief, brief.name or str(brief), BriefError, "", what="the brief")}

    def table(self, name: str, where: str) -> str:
        """Return the text of a table; raise BriefError if it lies outside, TableError if it cannot be read."""
        if name not in self._texts:
            path = self._inside(
                name, where, "the table", "copy it beside the brief, so that the folder holds all of it"
            )
            self._texts[name] = _read(path, name, TableError, where, what="the table")
        return self._texts[name]

    def rig(self, folder: str, name: str, where: str) -> str:
        """Return the text of a rig that lies in a folder; raise BriefError if there is none, or it lies outside."""
        if name not in self._texts:
            path = self._inside(folder, where, "the kept rig", "copy its folder beside the brief")
            _check_rig(path, folder, Path(name).name, where)
            self._texts[name] = _read(path / Path(name).name, name, BriefError, where, what="the kept rig")
        return self._texts[name]

    def used(self) -> dict[str, str]:
        """Return the texts read so far by name."""
        return dict(self._texts)

    def _inside(self, name: str, where: str, what: str, remedy: str) -> Path:
        """Return the path of a table or folder, which must stay inside the brief's folder as it is written."""
        home = os.path.abspath(self.folder)
        path = os.path.normpath(os.path.join(home, name))
        if "\0" in name or os.path.commonpath([home, path]) != home:
            raise BriefError(
                f"{what} lies outside the folder of the brief",
                where=where,
                value=f'"{name}"',
                remedy=remedy,
            )
        return Path(path)


class KeptTexts:
    """Texts that were kept with an earlier reading."""

    def __init__(self, source: Source) -> None:
        """Take what was kept; raise InputError if the brief is not among it."""
        self._source = source
        if source.brief_name not in source.texts:
            raise InputError("the text of the brief is not among those kept", value=f'"{source.brief_name}"')

    def table(self, name: str, where: str) -> str:
        """Return the text of a table; raise TableError if it was not kept."""
        if name not in self._source.texts:
            raise TableError("the text of this table is not among those kept", where=where, value=f'"{name}"')
        return self._source.texts[name]

    def rig(self, folder: str, name: str, where: str) -> str:
        """Return the text of a rig; raise BriefError if it was not kept."""
        if name not in self._source.texts:
            raise BriefError("the text of this rig is not among those kept", where=where, value=f'"{name}"')
        return self._source.texts[name]

    def used(self) -> dict[str, str]:
        """Return the texts kept."""
        return dict(self._source.texts)


def _check_rig(path: Path, folder: str, file: str, where: str) -> None:
    """Raise BriefError unless the path is a folder that holds a rig's file."""
    # os.path answers "no" to names that no file can have, where a Path's own methods raise
    if os.path.isfile(path):
        home = os.path.dirname(folder) or "."
        remedy = f'write rig = "{home}"' if path.name == file else ""
        what = "a kept rig is named by its folder, and this is a file"
        raise BriefError(what, where=where, value=f'"{folder}"', remedy=remedy)
    if not os.path.isdir(path):
        what = "the folder of the kept rig does not exist"
        raise BriefError(what, where=where, value=f'"{folder}"', remedy=_near(path))
    if not os.path.exists(path / file):
        what, remedy = f"the folder holds no {file}, so it is no rig", 'name a folder that "rigdesign design" wrote'
        raise BriefError(what, where=where, value=f'"{folder}"', remedy=remedy)


def _read(path: Path, name: str, error: type[InputError], where: str, *, what: str) -> str:
    """Return the text of a file, without its byte order mark; raise `error` saying why it cannot be read."""
    place = where or name
    named = f'"{name}"'
    try:
        data = path.read_bytes()
    except IsADirectoryError:
        raise error(f"{what} is a folder, not a file", where=place, value=named) from None
    except (FileNotFoundError, NotADirectoryError):
        raise error(f"{what} does not exist", where=place, value=named, remedy=_near(path)) from None
    except UnicodeEncodeError:
        what_to_do = "set a UTF-8 locale, or use plain names"
        raise error(
            f"{what} has a name that this machine cannot write", where=place, value=named, remedy=what_to_do
        ) from None
    except OSError as problem:
        reason = (problem.strerror or "unknown reason").lower()
        raise error(f"{what} cannot be read: {reason}", where=place, value=named) from None
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as problem:
        line = data.count(b"\n", 0, problem.start) + 1
        raise error(f"{what} is not UTF-8 text", where=f"{name}, line {line}", remedy="save it as UTF-8") from None


def _near(path: Path) -> str:
    """Return advice about a missing file: the nearest name in its folder."""
    names = sorted(_names(path.parent))
    near = difflib.get_close_matches(path.name, names, n=1)
    return f'did you mean "{near[0]}"?' if near else "check the name and the folder"


def _names(folder: Path) -> Iterator[str]:
    try:
        yield from os.listdir(folder)
    except OSError:
        return
