"""The tables of the rig folder and summary.json, as bytes.

Tables of the rig are here, those of its hardware in `tables_hardware`, cells in `csv_cells`.

Depends on: checks, and the models below it.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from typing import TYPE_CHECKING, Any

import numpy as np

from rigdesign.checks.measures import dot, length, ratio
from rigdesign.checks.model import Check, Curves
from rigdesign.checks.remarks_practice import pressures
from rigdesign.checks.text import UNIT_KIND
from rigdesign.levers.model import Piece
from rigdesign.record.objects import finding_object, json_bytes
from rigdesign.report.csv_cells import csv_bytes

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

COLUMN_UNIT = {"force": "N", "moment": "Nm"}


def table_files(answer: Check | HardwareCheck) -> dict[str, bytes]:
    """Return summary.json and every CSV of a checked rig by file name, those of its hardware where there is any."""
    if isinstance(answer, Check):
        return {"summary.json": json_bytes(summary(answer)), **_rig_tables(answer, None)}
    from rigdesign.report.tables_hardware import hardware_tables

    rig_tables = _rig_tables(answer.check, answer.hardware.marks)
    return {"summary.json": json_bytes(summary(answer)), **rig_tables, **hardware_tables(answer)}


def _rig_tables(check: Check, marks: Mapping[str, str] | None) -> dict[str, bytes]:
    return {
        "pads.csv": pads_csv(check),
        "levers.csv": levers_csv(check, marks),
        "holes.csv": holes_csv(check),
        "jacks.csv": jacks_csv(check),
        "stations.csv": stations_csv(check),
        "regions.csv": regions_csv(check),
        **({} if check.across is None else {"across.csv": across_csv(check)}),
    }


def pads_csv(check: Check) -> bytes:
    """A row a pad: place, force as drilled and as wanted, share of its jack, pressure, and the lever it hangs on.

    On surfaces also the direction of its footprint's length.
    """
    rig, solved = check.rig, check.statics
    hangs = {hole.joins: piece.number for piece in _pieces(check) for hole in piece.ends}
    pressure = pressures(check)
    rows = [
        [
            i + 1,
            float(rig.pad_x[i]),
            float(rig.pad_y[i]),
            float(solved.pad_force[i]),
            float(rig.plan.force[i]),
            float(solved.share[i]),
            None if pressure is None else float(pressure[i]),
            hangs.get(f"pad {i + 1}"),
            float(check.share_of_curve[i]),
        ]
        for i in range(rig.pad_x.size)
    ]
    head = ["pad", "x_m", "y_m", "force_N", "wanted_N", "share", "pressure_Pa", "lever", "share_of_curve_N"]
    if check.across is not None:
        from rigdesign.pads.surface.places import turns

        turned = np.degrees(turns(rig.plan.target.brief, rig.pad_x, rig.pad_y))
        rows, head = [[*row, float(turn)] for row, turn in zip(rows, turned, strict=True)], [*head, "turn_deg"]
    return csv_bytes(head, rows)


def levers_csv(check: Check, marks: Mapping[str, str] | None = None) -> bytes:
    """A row a lever or plate: where it hangs, its pivot, its load and its size; its mark where there are any."""
    rows = [
        [
            piece.number,
            piece.tier,
            piece.parent,
            piece.kind,
            piece.pivot.x,
            piece.pivot.y,
            check.statics.piece_load[piece.name],
            length(piece),
            ratio(piece) if piece.kind == "lever" else None,
            *([] if marks is None else [marks[piece.name]]),
        ]
        for piece in _pieces(check)
    ]
    head = ["lever", "tier", "parent", "kind", "x_m", "y_m", "load_N", "length_m", "ratio"]
    return csv_bytes(head if marks is None else [*head, "mark"], rows)


def holes_csv(check: Check) -> bytes:
    """A row a hole: what it joins, its place in the piece's own frame and in plan."""
    rows = [
        [piece.number, hole.name, hole.joins, hole.u, hole.v, hole.x, hole.y]
        for piece in _pieces(check)
        for hole in piece.holes
    ]
    return csv_bytes(["lever", "hole", "joins", "u_m", "v_m", "x_m", "y_m"], rows)


def jacks_csv(check: Check) -> bytes:
    """A row a jack: place and force at the brief's load."""
    rows = [[tree.jack.number, tree.jack.x, tree.jack.y, tree.force] for tree in check.rig.trees]
    return csv_bytes(["jack", "x_m", "y_m", "force_N"], rows)


def stations_csv(check: Check) -> bytes:
    """V, M and on surfaces T of target and rig by station, and how far the error may go below and above zero."""
    return _curves_csv(check.curves, "x_m", ("inboard", "outboard"))


def across_csv(check: Check) -> bytes:
    """Shear and moment cut the other way by station y, on surfaces; the side is that of lesser or of greater y."""
    assert check.across is not None
    return _curves_csv(check.across, "y_m", ("lesser y", "greater y"))


def _curves_csv(curves: Curves, station: str, sides: tuple[str, str]) -> bytes:
    columns, head = [curves.x], [station, "side"]
    for quantity in curves.target:
        name, unit = quantity.replace(" ", "_"), COLUMN_UNIT[UNIT_KIND[quantity]]
        columns += [curves.target[quantity], curves.rig[quantity]]
        head += [f"{name}_target_{unit}", f"{name}_rig_{unit}"]
    for quantity in curves.target:
        name, unit = quantity.replace(" ", "_"), COLUMN_UNIT[UNIT_KIND[quantity]]
        columns += [curves.below[quantity], curves.above[quantity]]
        head += [f"{name}_band_below_{unit}", f"{name}_band_above_{unit}"]
    rows = zip(*(column.tolist() for column in columns), strict=True)
    named = ((x, sides[int(out)], *rest) for (x, *rest), out in zip(rows, curves.outboard, strict=True))
    return csv_bytes(head, named)


def regions_csv(check: Check) -> bytes:
    """A row a stretch and quantity: largest under- and over-test as magnitudes, where, bands, band use, verdict.

    Of what is cut across, from, to and where are y.
    """
    units = {"force": "N", "moment": "N*m"}
    words = {None: "not judged", True: "accepted", False: "not accepted"}
    rows = [
        [
            row.start_x,
            row.end_x,
            row.name,
            row.quantity,
            units[UNIT_KIND[row.quantity]],
            row.under,
            row.over,
            row.band_under,
            row.band_over,
            row.under_x,
            row.over_x,
            row.use,
            words[row.accepted],
        ]
        for row in check.regions
    ]
    head = ["from_m", "to_m", "region", "quantity", "unit", "under", "over", "band_under", "band_over"]
    return csv_bytes([*head, "under_at_m", "over_at_m", "use", "verdict"], rows)


def summary(answer: Check | HardwareCheck) -> dict[str, Any]:
    """Return the answer at one glance: what summary.json holds, of the hardware too where there is any.

    Errors, uses and shares are fractions, forces at the brief's load; null says "not limited" or "not known".
    """
    check = answer if isinstance(answer, Check) else answer.check
    parts = _target_part(check) | _rig_part(check)
    if check.across is not None:
        from rigdesign.report.plan_summary import with_plan_part

        parts = with_plan_part(check, parts)
    if not isinstance(answer, Check):
        from rigdesign.report.summary_hardware import hardware_summary

        del parts["findings"]  # those of the hardware are more, and stay last
        parts |= hardware_summary(answer)
    return {key: _plain(value) for key, value in parts.items()}


def _target_part(check: Check) -> dict[str, Any]:
    target = check.rig.plan.target
    return {
        "title": target.brief.title,
        "verdict": "accepted" if check.accepted else "not accepted",
        "resultant_N": target.resultant,
        "centroid_x_m": target.centroid,
        "root_moment_Nm": target.moment_about,
        "moment_about_m": target.about,
        "shear_peak_N": target.shear_peak,
        "shear_peak_x_m": target.shear_peak_x,
        "moment_peak_Nm": target.moment_peak,
        "moment_peak_x_m": target.moment_peak_x,
        "test_peak": target.brief.peak,
    }


def _rig_part(check: Check) -> dict[str, Any]:
    rig, proof = check.rig, check.rig.plan.proof
    force = check.statics.pad_force
    return {
        "pads": int(rig.pad_x.size),
        "levers": sum(len(tree.pieces) for tree in rig.trees),
        "tiers": max((piece.tier for piece in _pieces(check)), default=0),
        "pads_resultant_N": float(force.sum()),
        "pads_centroid_x_m": dot(force, rig.pad_x) / float(force.sum()),
        "jack_x_m": [tree.jack.x for tree in rig.trees],
        "jack_force_N": [tree.force for tree in rig.trees],
        "jack_force_at_test_peak_N": [tree.force * rig.plan.target.pads_peak for tree in rig.trees],
        "jack_offset_m": check.jack_offset,
        "moment_error_peak": check.moment_error_peak,
        "moment_error_x_m": check.moment_error_x,
        "moment_error_least": proof.moment_error_least,
        "moment_error_local": check.moment_error_local,
        "moment_error_local_x_m": check.moment_error_local_x,
        "moment_error_by_hand": check.hand_moment,
        "shear_error_peak": check.shear_error_peak,
        "shear_error_x_m": check.shear_error_x,
        "shear_error_local": check.shear_error_local,
        "shear_error_local_x_m": check.shear_error_local_x,
        "shear_error_by_hand": check.hand_shear,
        "shear_area_Nm": check.shear_area,
        "band_use": check.band_use,
        "band_use_planned": proof.band_use,
        "band_use_found": proof.band_use_found,
        "band_use_least": proof.band_use_least,
        "band_use_gap": proof.gap,
        "proof": proof.method,
        "evenness": check.evenness,
        "evenness_planned": proof.evenness,
        "evenness_before": proof.evenness_before,
        "steel_estimate": check.steel_estimate,
        "force_residual": check.statics.force_residual,
        "moment_residual": check.statics.moment_residual,
        "sum_residual": check.sum_residual,
        "moment_sum_residual": check.moment_sum_residual,
        "findings": [finding_object(finding) for finding in check.findings],
    }


def _pieces(check: Check) -> Iterable[Piece]:
    return (piece for tree in check.rig.trees for piece in tree.pieces)


def _plain(value: Any) -> Any:
    """A number of Python's own; null for what is infinite."""
    if isinstance(value, (float, np.floating)):
        return float(value) + 0.0 if math.isfinite(value) else None
    if isinstance(value, list):
        return [_plain(item) for item in value]
    return value
