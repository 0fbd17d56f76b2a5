"""Stage: command.  The `rigdesign` command: arguments in, files, words on the terminal and an exit code out.

    design BRIEF    from a brief to a rig folder, hardware and drawings in it
    study BRIEF     pads and levers for several numbers of pads, as a table and a picture
    assess RIG      a rig that exists, its hardware where it has any, with other holes or against another brief
    target BRIEF    what the brief asks for, in words and in a picture, before anything is designed
    schema          the JSON Schema of the brief

In: the command line.  Out: the exit code: 0 accepted, 1 a matter of limits (not accepted, or no rig at all), 2 bad
input or an output that cannot be written, 130 interrupted.  Depends on every stage, and is the only one that prints,
draws progress or ends the process.  Heavy libraries are imported inside the commands that need them, so that
`rigdesign --help` answers at once.
"""

from __future__ import annotations

import os
import signal
import sys
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from types import FrameType

ACCEPTED, LIMITS, BAD_INPUT, INTERRUPTED = 0, 1, 2, 130


def main() -> None:
    """Run the command and end the process with its exit code."""
    for stream in ("stdout", "stderr"):
        if getattr(sys, stream) is None:  # closed by who started this process: what is said there is said to nobody
            setattr(sys, stream, open(os.devnull, "w"))  # noqa: SIM115 - open to the end of the process
    sys.exit(run(sys.argv[1:]))


def run(arguments: Sequence[str]) -> int:
    """Run the command with these arguments and return its exit code; one plain message for whatever stops it."""
    import click

    from rigdesign.command.commands import rigdesign
    from rigdesign.command.pipe import say_no_more
    from rigdesign.command.session import Session
    from rigdesign.errors import RigdesignError

    session = Session()
    try:
        with _termination_interrupts():
            code = rigdesign(args=list(arguments), prog_name="rigdesign", standalone_mode=False, obj=session)
        return code if isinstance(code, int) else ACCEPTED
    except RigdesignError as error:
        _complain(str(error))
        return BAD_INPUT
    except click.ClickException as error:
        _complain(f"{error.format_message().rstrip('.')}; see rigdesign {session.name_for_help}--help")
        return BAD_INPUT
    except OSError as error:  # of the standard output, such as a full disk behind it
        say_no_more()
        _complain(f"the answer cannot be printed: {error.strerror or error}; {session.what_was_written}")
        return BAD_INPUT
    except (KeyboardInterrupt, click.Abort):
        _complain(f"interrupted; {session.what_was_written}")
        return INTERRUPTED


def _complain(message: str) -> None:
    """One plain message on the standard error, in a single line."""
    print("rigdesign: " + " ".join(message.split()), file=sys.stderr)


@contextmanager
def _termination_interrupts() -> Iterator[None]:
    """While inside, being told to terminate, or losing the terminal, is being interrupted: what was begun is undone."""

    def interrupt(_signal: int, _frame: FrameType | None) -> None:
        raise KeyboardInterrupt

    # what is ignored stays so, as under nohup; not every system knows the second
    names = [name for name in ("SIGTERM", "SIGHUP") if hasattr(signal, name)]
    heard = [getattr(signal, name) for name in names]
    before = {number: signal.getsignal(number) for number in heard if signal.getsignal(number) != signal.SIG_IGN}
    try:
        for number in before:
            signal.signal(number, interrupt)
    except ValueError:  # not in the main thread, where nobody can be told
        yield
        return
    try:
        yield
    finally:
        for number, handler in before.items():
            signal.signal(number, handler)
