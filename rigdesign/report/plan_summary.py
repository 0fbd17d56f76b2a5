"""What summary.json holds of a plan rig besides.

Depends on: checks, and the models below it.
"""

from __future__ import annotations

from typing import Any

from rigdesign.checks.measures import dot
from rigdesign.checks.model import Check


def with_plan_part(check: Check, parts: dict[str, Any]) -> dict[str, Any]:
    """Return the summary with what surfaces have besides, each beside what it belongs with; findings stay last."""
    target, rig, errors = check.rig.plan.target, check.rig, check.errors
    force, torsion = check.statics.pad_force, errors["torsion"]
    pieces = [piece for tree in rig.trees for piece in tree.pieces]
    after: dict[str, dict[str, Any]] = {
        "centroid_x_m": {"centroid_y_m": target.centroid_y},
        "moment_about_m": {"root_torsion_Nm": target.torsion_about},
        "moment_peak_x_m": {
            "torsion_peak_Nm": target.torsion_peak,
            "torsion_peak_x_m": target.peaks["torsion"].at,
            "shear_across_peak_N": target.peaks["shear across"].value,
            "shear_across_peak_y_m": target.peaks["shear across"].at,
            "moment_across_peak_Nm": target.peaks["moment across"].value,
            "moment_across_peak_y_m": target.peaks["moment across"].at,
        },
        "levers": {"plates": sum(piece.kind == "plate" for piece in pieces)},
        "pads_centroid_x_m": {"pads_centroid_y_m": dot(force, rig.pad_y) / float(force.sum())},
        "jack_x_m": {"jack_y_m": [tree.jack.y for tree in rig.trees]},
        "jack_offset_m": {"jack_offset_y_m": check.jack_offset_y},
        "shear_error_by_hand": {
            "torsion_error_peak": torsion.peak,
            "torsion_error_of": torsion.of,
            "torsion_error_x_m": torsion.at,
            "torsion_error_local": torsion.local,
            "torsion_error_local_x_m": torsion.local_at,
            "across_error_peak": check.across_error_peak,
            "shear_across_error_peak": errors["shear across"].peak,
            "shear_across_error_y_m": errors["shear across"].at,
            "moment_across_error_peak": errors["moment across"].peak,
            "moment_across_error_y_m": errors["moment across"].at,
            "share_error": check.share_error,
            "share_error_pad": check.share_error_pad,
        },
    }
    return {name: value for key, own in parts.items() for name, value in {key: own, **after.get(key, {})}.items()}
