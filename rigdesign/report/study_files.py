"""The files of a study: a row a number of pads as CSV and as JSON, and its picture."""

from __future__ import annotations

from typing import Any

from rigdesign.chain import Study, StudyRow
from rigdesign.findings import Refusal
from rigdesign.record.objects import json_bytes
from rigdesign.report.csv_cells import Cell, csv_bytes

COLUMNS = (
    "pads", "verdict", "moment_error_peak", "moment_error_least", "shear_error_peak", "band_use", "band_use_least",
    "levers", "steel_estimate", "fewest_accepted", "what_binds",
)  # fmt: skip


def columns(study: Study) -> tuple[str, ...]:
    """The columns of a study: on surfaces with the torsion's error."""
    if not study.brief.specimen.is_surface:
        return COLUMNS
    after = COLUMNS.index("shear_error_peak") + 1
    return (*COLUMNS[:after], "torsion_error_peak", *COLUMNS[after:])


def study_object(study: Study) -> dict[str, Any]:
    """Return the study as an object for JSON; errors are fractions of the peak target value."""
    fewest = study.fewest
    return {
        "title": study.brief.title,
        "fewest_accepted": None if fewest is None else fewest.pads,
        "rows": [_row(study, row) for row in study.rows],
    }


def _row(study: Study, row: StudyRow) -> dict[str, Any]:
    if isinstance(row.answer, Refusal):
        binds = "; ".join(part.rstrip(".") for part in (row.answer.text, row.answer.limit) if part)
        return {
            **dict.fromkeys(columns(study)),
            "pads": row.pads,
            "verdict": "no rig",
            "fewest_accepted": False,
            "what_binds": binds,
        }
    check = row.answer
    proof = check.rig.plan.proof
    failures = [f"{finding.object}: {finding.text}" for finding in check.findings if finding.severity == "failure"]
    values: dict[str, Any] = {
        "pads": row.pads,
        "verdict": "accepted" if row.accepted else "not accepted",
        "moment_error_peak": check.moment_error_peak,
        "moment_error_least": proof.moment_error_least,
        "shear_error_peak": check.shear_error_peak,
        "torsion_error_peak": check.torsion_error_peak,
        "band_use": check.band_use,
        "band_use_least": proof.band_use_least,
        "levers": sum(len(tree.pieces) for tree in check.rig.trees),
        "steel_estimate": check.steel_estimate,
        "fewest_accepted": study.fewest is row,
        "what_binds": "; ".join(failures),
    }
    return {name: values[name] for name in columns(study)}


def study_csv(study: Study) -> bytes:
    """Return the study as a table; what is not known for a row without a rig stays empty."""
    rows = [[_cell(row[column]) for column in columns(study)] for row in study_object(study)["rows"]]
    return csv_bytes(columns(study), rows)


def _cell(value: Cell) -> Cell:
    return ("yes" if value else "no") if isinstance(value, bool) else value


def study_files(study: Study, *, png: bool = False) -> dict[str, bytes]:
    """Return study.csv, study.json and the picture, by file name."""
    from rigdesign.report.figures_study import study_sheet
    from rigdesign.report.writing import drawn

    tables = {"study.csv": study_csv(study), "study.json": json_bytes(study_object(study))}
    return tables | drawn({"study": study_sheet(study)}, png=png)
