"""Rigs for several numbers of pads: `study`."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import TYPE_CHECKING

from rigdesign.chain.arranging import arrange_count
from rigdesign.chain.progress import Progress, named, share
from rigdesign.errors import BriefError
from rigdesign.findings import Refusal

if TYPE_CHECKING:
    from rigdesign.brief.model import Brief
    from rigdesign.checks.model import Check
    from rigdesign.target.model import Target


@dataclass(frozen=True)
class StudyRow:
    """One number of pads and what came of it: a checked rig, or the refusal that says why there is none."""

    pads: int
    answer: Check | Refusal

    @property
    def accepted(self) -> bool:
        """Whether there is a rig and its check accepts it."""
        return not isinstance(self.answer, Refusal) and self.answer.accepted


@dataclass(frozen=True)
class Study:
    """Rigs for several numbers of pads, in their order."""

    brief: Brief
    rows: tuple[StudyRow, ...]

    @property
    def fewest(self) -> StudyRow | None:
        """The accepted row with the fewest pads, None where no row is accepted."""
        return min((row for row in self.rows if row.accepted), key=lambda row: row.pads, default=None)


def study(brief: Brief, counts: Iterable[int], progress: Progress | None = None) -> Study:
    """Return the rigs for each number of pads in `counts`, everything else as the brief says.

    Raises
    ------
    ValueError
        If `counts` is empty or holds a number below 1.
    BriefError
        If the brief prescribes a grouping, which can fit one number of pads only, and `counts` holds several.
    """
    from rigdesign.target import build_target

    return study_target(build_target(brief), counts, progress)


def study_target(target: Target, counts: Iterable[int], progress: Progress | None = None) -> Study:
    """Like `study`, for a target that has been built already."""
    wanted = sorted(set(counts))
    if not wanted or wanted[0] < 1:
        raise ValueError("numbers of pads must be 1 or more, and at least one must be given")
    if len(wanted) > 1 and target.brief.levers.grouping is not None:
        raise BriefError(
            "a study compares several numbers of pads, and a prescribed grouping fits one of them",
            where=f"{target.brief.source.brief_name}, [levers] grouping",
            remedy="delete the grouping for the study",
        )
    rows = []
    for done, count in enumerate(wanted):
        part = share(progress, done / len(wanted), (done + 1) / len(wanted))
        told = None if part is None else named(part, f"{count} pads")
        rows.append(StudyRow(count, arrange_count(target, count, told)))
    return Study(target.brief, tuple(rows))
