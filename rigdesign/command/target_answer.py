"""The command `target`: the target as an object for scripts, and its picture."""

from __future__ import annotations

from dataclasses import asdict
from pathlib import Path
from typing import TYPE_CHECKING, Any

from rigdesign.errors import InputError, OutputError

if TYPE_CHECKING:
    from rigdesign.display import System
    from rigdesign.target.model import Target


def target_object(target: Target) -> dict[str, Any]:
    """Return what `target --json` prints: resultant, moments, peaks, sentences and findings."""
    import numpy as np

    from rigdesign.target.words import echo

    specimen = target.brief.specimen
    in_plan = _in_plan(target) if specimen.is_surface else {}
    return {
        "title": target.brief.title,
        "resultant_N": target.resultant,
        "centroid_x_m": target.centroid,
        "root_moment_Nm": target.moment_about,
        "moment_about_m": target.about,
        "pads_resultant_N": target.net.total,
        "shear_peak_N": target.shear_peak,
        "shear_peak_x_m": target.shear_peak_x,
        "moment_peak_Nm": target.moment_peak,
        "moment_peak_x_m": target.moment_peak_x,
        "moment_at_root_Nm": float(target.moment(np.array([specimen.left]))[0]),
        **in_plan,
        "test_peak": target.brief.peak,
        "words": echo(target),
        "findings": [{"name": finding.name, **asdict(finding)} for finding in target.findings],
    }


def _in_plan(target: Target) -> dict[str, Any]:
    """What a surface adds: the centre's y, torsion, what is cut across."""
    import numpy as np

    left = np.array([target.brief.specimen.left])
    across = {quantity: target.peaks[quantity] for quantity in ("shear across", "moment across")}
    return {
        "cut": target.brief.specimen.cut,
        "centroid_y_m": target.centroid_y,
        "root_torsion_Nm": target.torsion_about,
        "torsion_at_root_Nm": float(target.torsion(left, "outboard")[0]),
        "torsion_peak_Nm": target.torsion_peak,
        "torsion_peak_x_m": target.peaks["torsion"].at,
        "shear_across_peak_N": across["shear across"].value,
        "shear_across_peak_y_m": across["shear across"].at,
        "moment_across_peak_Nm": across["moment across"].value,
        "moment_across_peak_y_m": across["moment across"].at,
    }


def write_figure(target: Target, file: Path, replace: bool, system: System) -> None:
    """Draw the target to a file whose ending says the kind; an existing one is left alone unless `replace`.

    Raises
    ------
    InputError
        If the ending is neither .svg nor .png.
    OutputError
        If the file exists or cannot be written.
    """
    from rigdesign.report import figures_sheet
    from rigdesign.report.figures_load import target_sheet

    kinds = {".svg": figures_sheet.svg, ".png": figures_sheet.png}
    if file.suffix.lower() not in kinds:
        raise InputError(
            "the figure's ending says no known kind", where="--figure", value=str(file), limit=".svg or .png"
        )
    if file.exists() and not replace:
        raise OutputError(f"{file} exists already; give another name, or --replace")
    content = kinds[file.suffix.lower()](target_sheet(target, system))
    try:
        file.write_bytes(content)
    except OSError as error:
        raise OutputError(f"{file} cannot be written: {error.strerror}") from error
