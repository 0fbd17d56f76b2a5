"""The family of exceptions that rigdesign raises.

    RigdesignError
    ├── InputError (ValueError)     the brief, a table, a rig file or an option cannot be used
    │   ├── BriefError              something in the brief itself
    │   └── TableError              something in a table that the brief names
    └── OutputError (OSError)       a folder or file cannot be written

They are for bad input alone.  That no acceptable design exists is a matter of limits and is an answer, not an
exception: see `rigdesign.findings.Refusal`.
"""

from __future__ import annotations


class RigdesignError(Exception):
    """Base of every exception that rigdesign raises on purpose."""


class InputError(RigdesignError, ValueError):
    """Input that cannot be used: what is wrong, where, the value, the limit and what to do.

    Parameters
    ----------
    what
        What is wrong, a sentence without its full stop.
    where
        The place: file, line, table and key, such as ``"wing.toml, line 12, [pads] count"``.
    value
        The offending value with its unit, as it stands in the file.
    limit
        What would be accepted.
    remedy
        What to do about it.

    Examples
    --------
    >>> str(InputError("the station is off the specimen", where="wing.toml, [pads] stations",
    ...                value="3.4 m", limit="0 m to 3.2 m", remedy="move or delete it"))
    'wing.toml, [pads] stations: the station is off the specimen: 3.4 m (accepted: 0 m to 3.2 m); move or delete it'
    """

    def __init__(self, what: str, *, where: str = "", value: str = "", limit: str = "", remedy: str = "") -> None:
        """Keep the parts and compose the message."""
        self.what, self.where, self.value, self.limit, self.remedy = what, where, value, limit, remedy
        super().__init__(self._message())

    def _message(self) -> str:
        text = f"{self.where}: {self.what}" if self.where else self.what
        if self.value:
            text += f": {self.value}"
        if self.limit:
            text += f" (accepted: {self.limit})"
        if self.remedy:
            text += f"; {self.remedy}"
        # a value from a file may hold line ends or terminal codes; the message stays one line of plain text
        return "".join(char if char.isprintable() else repr(char)[1:-1] for char in text)


class BriefError(InputError):
    """The brief cannot be read, contradicts itself, or names what is not there."""


class TableError(InputError):
    """A table that the brief names, or a holes file, cannot be used."""


class OutputError(RigdesignError, OSError):
    """A folder or file cannot be written; what was there before is still there."""
