"""What is odd about a table of shear and moment: slips of sign or unit, envelopes, rows that contradict each other.

dM/dx = −V must hold for one load case.  The commonest reasons why a table breaks it, in the order looked for: one
column has the other sign or another unit; the table is an envelope, its shear from one case and its moment from
another; single rows are wrong; rows are too coarse, or rounded too far, for the load that they imply.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import InternalLoad
from rigdesign.display import show
from rigdesign.findings import Finding, Severity
from rigdesign.target.curve import Floats
from rigdesign.target.internal_table import Steps, jumps_of, steps_of

# A slip multiplies every step alike: so many of the steps agree with one factor to this part of their change of M, and
# the factor is at least this far from 1 (ft·lbf for N·m is 1.36).  Few rows and steep loads blur single steps.
_SLIP_STEPS, _SLIP_REST, _SLIP_LEAST = 0.75, 0.1, 1.25
# Below this part of the greatest moment a sum of disagreements is not worth a word about envelopes.
_ENVELOPE_LEAST = 0.005
# Steps in a row that must disagree the same way: a single wrong row makes two.
_ENVELOPE_RUN = 3
# Up to this part of the greatest moment a couple left out is a warning, above it a failure.
_COUPLE_SMALL = 0.005
# A running load of the other sign counts once it exceeds this part of the table's greatest.
_SWING_LEAST = 0.01


@dataclass(frozen=True)
class _View:
    """A table under inspection: its steps, and how findings call it."""

    load: InternalLoad
    steps: Steps
    name: str

    @property
    def peak(self) -> float:
        """Greatest |M| of the table [N·m]."""
        return float(np.abs(self.load.moment).max())

    @property
    def one_signed(self) -> NDArray[np.bool_]:
        """Whether a step and its two neighbours carry load of one sign (n,)."""
        sign = np.sign(self.steps.load)
        before, after = np.append(sign[:1], sign[:-1]), np.append(sign[1:], sign[-1:])
        return np.asarray((sign * before >= 0) & (sign * after >= 0))

    @property
    def curvature(self) -> Floats:
        """What the bending of the shear's own curve between the rows adds to the change of M (n,) [N·m]."""
        s = self.steps
        slope, h = -s.load / s.width, s.width
        joined = (slope[:-1] * h[1:] + slope[1:] * h[:-1]) / (h[:-1] + h[1:])
        at_rows = np.concatenate([slope[:1], joined, slope[-1:]])
        return np.asarray(-(h**2) / 12.0 * np.diff(at_rows))

    @property
    def impossible(self) -> NDArray[np.bool_]:
        """Steps (n,) whose change of M no load of one sign between the rows explains, rounding granted."""
        s = self.steps
        size = np.abs(s.load) / s.width
        around = np.maximum(size, np.maximum(np.append(size[:1], size[:-1]), np.append(size[1:], size[-1:])))
        granted = np.where(self.one_signed, size, around) * s.width**2 / 2.0
        return np.asarray(np.abs(s.defect) > s.allowed + granted)

    @property
    def turning(self) -> NDArray[np.bool_]:
        """Steps (n,) within which the curve's running load changes sign though the steps around carry one sign."""
        s = self.steps
        mean = np.abs(s.load) / s.width
        wrong = 6.0 * np.abs(s.defect) / s.width**2 - mean
        return np.asarray(self.one_signed & (wrong > _SWING_LEAST * mean.max()))


def table_remarks(load: InternalLoad, name: str, right: float) -> list[Finding]:
    """Return what is odd about a table of V and M.

    Parameters
    ----------
    load
        The table.
    name
        How findings call it, such as "load 2".
    right
        Outboard end of the specimen [m].
    """
    view = _View(load, steps_of(load), name)
    slip = _slip(view)
    if slip:
        return slip
    return _couples(view, right) + _left_shear(view, right) + (_envelope(view) or _disagreements(view) + _turns(view))


def _finding(view: _View, severity: Severity, text: str, value: str, limit: str, remedy: str) -> Finding:
    return Finding("target", severity, view.name, text, value, limit, remedy)


def _slip(view: _View) -> list[Finding]:
    """One factor other than 1 between all changes of M and what the shear gives: a sign, an end, or a unit."""
    steps = view.steps
    given = steps.straight + view.curvature
    if steps.width.size < 3 or not np.any(given):
        return []
    factor = float((steps.drop * given).sum() / (given * given).sum())
    alike = np.abs(steps.drop - factor * given) <= _SLIP_REST * np.abs(steps.drop) + steps.allowed
    if alike.mean() < _SLIP_STEPS or 1 / _SLIP_LEAST < factor < _SLIP_LEAST:
        return []
    limit = "1: the moment falls outboard by the integral of the shear, dM/dx = −V"
    if factor > 0:
        text = "the moment changes from row to row by a constant multiple of what the shear gives: a slip of unit"
        remedy = "check the units in the headings of the shear, moment and x columns"
        return [_finding(view, "failure", text, f"{factor:.4g} times", limit, remedy)]
    value = f"{factor:.4g} times"
    if abs(view.load.moment[-1]) > abs(view.load.moment[0]):
        text = "the moment grows outboard where the shear makes it fall: the stations seem to count from the tip"
        remedy = 'give stations_from = "tip", or put the rows in order from the root'
    else:
        text = "the moment and the shear have opposite signs"
        remedy = 'give reverse = ["moment"] or reverse = ["shear"], whichever column differs from the conventions'
    return [_finding(view, "failure", text, value, limit, remedy)]


def _couples(view: _View, right: float) -> list[Finding]:
    """Moments that jump, and the one left at the last row: no force on the span makes them."""
    x, shear, couple = jumps_of(view.load)
    real = np.abs(couple) > view.load.moment_digit + 1e-9 * view.peak
    findings = []
    for at, force, moment in zip(x[real], shear[real], couple[real], strict=True):
        last = at == x[-1]
        severity: Severity = "warning" if abs(moment) <= _COUPLE_SMALL * view.peak else "failure"
        kind = "is left at its last row" if last else "is the jump between its two rows"
        text = (f"a moment of {show(float(moment), 'moment')} {kind} at {show(float(at), 'length')}; forces on "
                "the span cannot make it, and the target leaves it out at every station inboard")  # fmt: skip
        value = f"{show(abs(float(moment)) / view.peak, 'fraction')} of the table's greatest moment"
        remedy = "check the row" if not last else _end_remedy(float(at), float(force), float(moment), right)
        findings.append(_finding(view, severity, text, value, "zero, within the table's rounding", remedy))
    return findings


def _end_remedy(at: float, force: float, moment: float, right: float) -> str:
    if force and 0 < moment / force <= right - at + 1e-9 * abs(right):
        return (
            f"let the table run to the tip, or add a row at {show(at + moment / force, 'length')}, where the load "
            "beyond the last row must act, with the same shear and no moment"
        )
    return "let the table run on until the moment is zero, and check its last row"


def _left_shear(view: _View, right: float) -> list[Finding]:
    """A shear left at the last row: taken as a point load there, and said."""
    at, left = float(view.load.x[-1]), float(view.load.shear[-1])
    if abs(left) <= view.load.shear_digit + 1e-9 * float(np.abs(view.load.shear).max()):
        return []
    text = (f"a shear of {show(left, 'force')} is left at its last row at {show(at, 'length')}; "
            "the target takes it as a point load there")  # fmt: skip
    remedy = "nothing, if there is such a load"
    if at < right - 1e-9 * abs(right):
        remedy += f"; otherwise let the table run to the tip at {show(right, 'length')}"
    return [_finding(view, "note", text, show(left, "force"), "zero where no point load acts", remedy)]


def _envelope(view: _View) -> list[Finding]:
    """Shear that is too large for the moment, row after row: values of several cases in one table."""
    steps, bend = view.steps, view.curvature
    missing = (steps.straight + bend - steps.drop) * np.sign(steps.straight)
    doubtful = np.abs(missing) > steps.allowed + np.abs(bend)
    same_way = doubtful & (missing > 0)
    total, other_way = float(missing[same_way].sum()), float(-missing[doubtful & ~same_way].sum())
    if _longest_run(same_way) < _ENVELOPE_RUN or total < _ENVELOPE_LEAST * view.peak or other_way > 0.1 * total:
        return []
    if not np.any(same_way & (view.impossible | view.turning)):
        return []  # a load of one sign explains every step: strips lumped off their middles
    worst = int(np.argmax(np.where(same_way, missing, 0.0)))
    text = (f"the shear is too large for the moment{_count(same_way)} between {_stretch(steps, worst)}: the sign "
            "of an envelope of several cases, which no single load can follow")  # fmt: skip
    value = f"{show(total, 'moment')} too much, {show(total / view.peak, 'fraction')} of the greatest moment"
    remedy = "ask for the shear and the moment of one case at a time, and give each case its own brief"
    return [_finding(view, "warning", text, value, "the integral of the shear is the change of the moment", remedy)]


def _disagreements(view: _View) -> list[Finding]:
    """Steps where dM/dx and −V disagree beyond rounding and beyond what any load of one sign explains."""
    wrong = view.impossible
    if not wrong.any():
        return []
    steps = view.steps
    worst = int(np.argmax(np.where(wrong, np.abs(steps.defect), 0.0)))
    drop, given, rounding = (float(column[worst]) for column in (steps.drop, steps.straight, steps.allowed))
    text = (f"dM/dx and −V disagree{_count(wrong)} between {_stretch(steps, worst)}: the moment falls by "
            f"{show(drop, 'moment')} there, the shear gives {show(given, 'moment')}")  # fmt: skip
    value = show(abs(drop - given), "moment")
    size = float(np.abs(steps.load[worst]) * steps.width[worst] / 2.0)
    limit = f"{show(size + rounding, 'moment')}, rounding and any one-signed load between the rows granted"
    remedy = (
        "check both rows; a point load between them needs two rows at its station; rows of several cases do not mix"
    )
    return [_finding(view, "warning", text, value, limit, remedy)]


def _turns(view: _View) -> list[Finding]:
    """Steps within which the curve's running load turns over though the rows around do not."""
    wrong = view.impossible
    near = wrong | np.append(wrong[1:], False) | np.append(False, wrong[:-1])
    turning = view.turning & ~near  # a wrong row swings its neighbours too, and has been named
    if not turning.any():
        return []
    steps = view.steps
    mean, swing = steps.load / steps.width, 6.0 * np.abs(steps.defect) / steps.width**2
    excess = np.where(turning, swing - np.abs(mean), 0.0)
    worst = int(np.argmax(excess))
    rounded = bool(np.all((6.0 * steps.allowed / steps.width**2)[turning] >= excess[turning]))
    text = (f"the running load behind the table changes sign{_count(turning)} between "
            f"{_stretch(steps, worst)}, though the shears do not; V and M are followed all the same")  # fmt: skip
    value = show(-float(np.sign(mean[worst]) * excess[worst]), "running load")
    limit = f"{show(float(mean[worst]), 'running load')} on average there"
    remedy = "the table's rounding explains it: ask for more digits" if rounded else (
        "check both rows, ask for more between them, and for two rows at the station of a point load")  # fmt: skip
    return [_finding(view, "note", text, value, limit, remedy)]


def _stretch(steps: Steps, i: int) -> str:
    return f"{show(float(steps.start[i]), 'length')} and {show(float(steps.end[i]), 'length')}"


def _count(which: NDArray[np.bool_]) -> str:
    """Nothing for a single step; else how many, leading on to the worst one."""
    count = int(which.sum())
    return "" if count == 1 else f" over {count} of {which.size} steps between rows, most"


def _longest_run(which: NDArray[np.bool_]) -> int:
    ends = np.flatnonzero(np.concatenate([[True], ~which, [True]]))
    return int(np.diff(ends).max()) - 1
