"""What one run of the command knows about itself."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path


@dataclass
class Session:
    """One run: which command it is, and what it has written so far; for the message if something stops it."""

    command: str = ""
    written: Path | None = None

    @property
    def what_was_written(self) -> str:
        """What stands on the disk, for the message of a run that was stopped."""
        return f"{self.written} had been written" if self.written else "nothing was written"

    @property
    def name_for_help(self) -> str:
        """The command's name with a space behind it, or nothing before a command is known."""
        return f"{self.command} " if self.command else ""
