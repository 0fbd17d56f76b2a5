"""The commands and their options.  What each does is a few calls to the chain and to the report."""

from __future__ import annotations

import json
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

from rigdesign import __version__
from rigdesign.command import ACCEPTED, LIMITS
from rigdesign.command.counts import read_counts
from rigdesign.command.pipe import reader_may_leave
from rigdesign.command.session import Session
from rigdesign.display import counted

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck
    from rigdesign.checks.model import Check
    from rigdesign.command.terminal import Terminal
    from rigdesign.display import System
    from rigdesign.findings import Refusal
    from rigdesign.target.model import Target

_OUT: Any = {"type": click.Path(path_type=Path), "metavar": "FOLDER"}
_JSON = click.option("--json", "as_json", is_flag=True, help="Print one JSON object for scripts, and nothing else.")
_US = click.option(
    "--us", is_flag=True, help="US customary units on the terminal and in figures; tables keep those of their headings."
)
_REPLACE = click.option("--replace", is_flag=True, help="Replace the folder or figure of an earlier run.")
_PNG = click.option("--png", is_flag=True, help="Write the figures as PNG as well.")
_NO_FIGURES = click.option("--no-figures", is_flag=True, help="Write no figures and no drawings.pdf.")
_BRIEF = click.argument("brief", type=click.Path(path_type=Path), metavar="BRIEF")


@click.group(
    invoke_without_command=True, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100}
)
@click.version_option(__version__, "--version", prog_name="rigdesign", message="%(prog)s %(version)s")
@click.pass_context
def rigdesign(context: click.Context) -> None:
    """Design whiffletrees for structural tests: from one brief to a checked lever tree.

    Exit codes: 0 accepted; 1 not accepted, or no rig within the limits; 2 the input cannot be used or the output
    cannot be written; 130 interrupted.
    """
    context.ensure_object(Session)
    context.obj.command = context.invoked_subcommand or ""
    if context.invoked_subcommand is None:
        click.echo(context.get_help())


@rigdesign.command()
@_BRIEF
@click.option("--out", help="Where to write; default: the brief's name plus _rig, in this folder.", **_OUT)
@_REPLACE
@_PNG
@_NO_FIGURES
@_JSON
@_US
@click.pass_obj
def design(
    session: Session, brief: Path, out: Path | None, replace: bool, png: bool, no_figures: bool, as_json: bool, us: bool
) -> int:
    """Design a rig for BRIEF and write its folder."""
    from rigdesign.brief import read_brief
    from rigdesign.chain import design_target
    from rigdesign.command.progress import progress
    from rigdesign.report.folder import require_free
    from rigdesign.target import build_target

    system = _system(us)
    folder = out if out is not None else Path(f"{brief.stem}_rig")
    target = build_target(read_brief(brief))
    require_free(folder, replace)
    _require_not_kept(brief, folder, target)
    terminal = None if as_json else _echoed(target, system)
    with progress() as tell:
        answer = design_target(target, tell)
    return _finish(session, answer, terminal, _Wanted(folder, replace, not no_figures, png, system))


def _require_not_kept(brief: Path, folder: Path, target: Target) -> None:
    """The rig that is kept is not written over: its steel is cut."""
    from rigdesign.errors import OutputError

    keep = target.brief.keep
    if keep is not None and (brief.parent / keep.folder).resolve() == folder.resolve():
        raise OutputError(f"{folder}: this folder holds the rig that is kept; name another with --out")


@dataclass(frozen=True)
class _Wanted:
    """What is to be written for an answer, and where; no folder where nothing is."""

    folder: Path | None
    replace: bool
    figures: bool
    png: bool
    system: System

    def write(self, answer: HardwareCheck | Check) -> Path | None:
        """Write the rig folder if one is wanted, and return where it is."""
        from rigdesign.report.folder import write_folder
        from rigdesign.report.writing import rig_files

        if self.folder is None:
            return None
        write_folder(
            rig_files(answer, figures=self.figures, png=self.png, system=self.system), self.folder, self.replace
        )
        return self.folder


def _finish(
    session: Session, answer: HardwareCheck | Check | Refusal, terminal: Terminal | None, wanted: _Wanted
) -> int:
    """Write the folder, then say the answer, and return the exit code."""
    from rigdesign.findings import Refusal
    from rigdesign.report.tables import summary

    if isinstance(answer, Refusal):
        if terminal is None:
            _print_json(_refusal_object(answer))
        else:
            terminal.refusal(answer)
            terminal.lines(["", "Nothing was written."])
        return LIMITS
    session.written = wanted.write(answer)
    if terminal is None:
        _print_json(summary(answer))
    else:
        terminal.check(answer)
        if session.written is not None:
            terminal.lines(["", _written_words(session.written)])
    return ACCEPTED if answer.accepted else LIMITS


def _written_words(folder: Path) -> str:
    """Where the rig was written, and what in it a workshop starts from."""
    cutting = len(list(folder.glob("dxf/*.dxf")))
    shop = ["drawings.pdf"] if (folder / "drawings.pdf").exists() else []
    shop += [f"dxf/ with {counted(cutting, 'cutting file')}"] if cutting else []
    return f"Written to {folder}" + (f"; for the workshop: {', '.join(shop)}" if shop else "")


@rigdesign.command()
@_BRIEF
@click.option(
    "--pads",
    "counts",
    callback=read_counts,
    required=True,
    metavar="NUMBERS",
    help="Numbers of pads to try: 4..24, or 6,8,12.",
)
@click.option("--out", help="Write study.csv, study.json and study.svg to a new folder.", **_OUT)
@_REPLACE
@_PNG
@_JSON
@_US
@click.pass_obj
def study(
    session: Session,
    brief: Path,
    counts: tuple[int, ...],
    out: Path | None,
    replace: bool,
    png: bool,
    as_json: bool,
    us: bool,
) -> int:
    """Design rigs for BRIEF with several numbers of pads and compare them."""
    from rigdesign.brief import read_brief
    from rigdesign.chain import study_target
    from rigdesign.command.progress import progress
    from rigdesign.report.folder import require_free, write_folder
    from rigdesign.report.study_files import study_files, study_object
    from rigdesign.target import build_target

    target = build_target(read_brief(brief))
    if out is not None:
        require_free(out, replace)
    terminal = None if as_json else _echoed(target, _system(us))
    with progress() as tell:
        result = study_target(target, counts, tell)
    if out is not None:
        write_folder(study_files(result, png=png), out, replace)
        session.written = out
    if terminal is None:
        _print_json(study_object(result))
    else:
        terminal.study(result)
        terminal.lines(["", f"Written to {out}" if out is not None else "Nothing was written; --out FOLDER writes it."])
    return ACCEPTED if result.fewest is not None else LIMITS


@rigdesign.command()
@click.argument("rig", type=click.Path(path_type=Path), metavar="RIG")
@click.option(
    "--holes", type=click.Path(path_type=Path), metavar="FILE", help="Holes as built, in the layout of holes.csv."
)
@click.option(
    "--brief", type=click.Path(path_type=Path), metavar="BRIEF", help="Assess against another brief's target."
)
@click.option("--out", help="Write the assessed rig to a folder of its own.", **_OUT)
@_REPLACE
@_PNG
@_NO_FIGURES
@_JSON
@_US
@click.pass_obj
def assess(
    session: Session,
    rig: Path,
    holes: Path | None,
    brief: Path | None,
    out: Path | None,
    replace: bool,
    png: bool,
    no_figures: bool,
    as_json: bool,
    us: bool,
) -> int:
    """Check RIG (a rig folder or its rig.json) again: as it is, with other holes, or against another brief."""
    from rigdesign import chain
    from rigdesign.brief import read_brief
    from rigdesign.checks.model import Check
    from rigdesign.report.folder import require_free
    from rigdesign.report.writing import read_rig_with_hardware

    known, hardware = read_rig_with_hardware(rig)
    other = read_brief(brief) if brief is not None else None
    if out is not None:
        require_free(out, replace)
    answer: HardwareCheck | Check
    if hardware is None:
        answer = chain.assess(known, holes, other)
    else:
        answer = chain.assess(known, holes, other, hardware=hardware)
    check = answer if isinstance(answer, Check) else answer.check
    terminal = None if as_json else _echoed(check.rig.plan.target, _system(us))
    return _finish(session, answer, terminal, _Wanted(out, replace, not no_figures, png, _system(us)))


@rigdesign.command()
@_BRIEF
@click.option("--figure", type=click.Path(path_type=Path), metavar="FILE", help="Draw it to a new file, .svg or .png.")
@_REPLACE
@_JSON
@_US
@click.pass_obj
def target(session: Session, brief: Path, figure: Path | None, replace: bool, as_json: bool, us: bool) -> int:
    """Say what BRIEF asks for, before anything is designed."""
    from rigdesign.brief import read_brief
    from rigdesign.command.target_answer import target_object, write_figure
    from rigdesign.target import build_target

    wanted = build_target(read_brief(brief))
    if figure is not None:
        write_figure(wanted, figure, replace, _system(us))
        session.written = figure
    if as_json:
        _print_json(target_object(wanted))
    else:
        terminal = _echoed(wanted, _system(us))
        terminal.findings(wanted.findings)
        if figure is not None:
            terminal.lines(["", f"Written to {figure}"])
    return ACCEPTED


@rigdesign.command()
def schema() -> int:
    """Print the JSON Schema of the brief, for editors that complete and check it."""
    from rigdesign.brief import schema as brief_schema

    _print_json(brief_schema())
    return ACCEPTED


def _system(us: bool) -> System:
    return "us" if us else "SI"


def _echoed(target: Target, system: System) -> Terminal:
    """Say in words what is asked for, before anything is designed, and return the terminal for the rest."""
    from rigdesign.command.terminal import Terminal
    from rigdesign.target.words import echo

    terminal = Terminal(system)
    terminal.title(target.brief.title)
    terminal.lines(echo(target, system))
    return terminal


def _refusal_object(refusal: Refusal) -> dict[str, Any]:
    return {
        "verdict": "no rig",
        "stage": refusal.stage,
        "text": refusal.text,
        "limit": refusal.limit,
        "best": refusal.best,
        "remedy": refusal.remedy,
    }


def _print_json(value: object) -> None:
    with reader_may_leave():
        click.echo(json.dumps(value, indent=2, ensure_ascii=False))
