"""The rig folder: every file of a checked rig as bytes, written whole or not at all, and read back.

Depends on: the tables, rig.json and the folder of this stage; the figures are loaded only when they are asked for.
"""

from __future__ import annotations

import os
from pathlib import Path
from typing import TYPE_CHECKING

from rigdesign.errors import InputError
from rigdesign.findings import Refusal

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from rigdesign.checks.hardware.model import HardwareCheck
    from rigdesign.checks.model import Check
    from rigdesign.display import System
    from rigdesign.hardware.model import Hardware
    from rigdesign.levers.model import Rig


def write(
    answer: HardwareCheck | Check | Refusal,
    folder: str | os.PathLike[str],
    *,
    replace: bool = False,
    figures: bool = True,
    png: bool = False,
) -> Path:
    """Write the rig folder of a checked rig, whole or not at all, and return its path.

    Parameters
    ----------
    answer
        What `design`, `arrange` or `assess` returned.
    folder
        Where to write; left alone if it exists, unless `replace`.
    figures, png
        Whether to draw the figures (SVG) and the sheets (drawings.pdf), and whether to add the figures as PNG.

    Raises
    ------
    InputError
        If the answer is a refusal: there is no rig to write.
    OutputError
        If the folder exists or cannot be written; what was there before is still there.
    """
    from rigdesign.report.folder import write_folder

    if isinstance(answer, Refusal):
        raise InputError("there is no rig to write", value=answer.text, remedy="look at the refusal's limit and remedy")
    files = rig_files(answer, figures=figures, png=png)
    write_folder(files, Path(folder), replace)
    return Path(folder)


def rig_files(
    answer: HardwareCheck | Check, *, figures: bool = True, png: bool = False, system: System = "SI"
) -> dict[str, bytes]:
    """Return every file of the rig folder by name; those of the hardware where the answer has any."""
    from rigdesign.checks.model import Check
    from rigdesign.record.rig_json import rig_to_json
    from rigdesign.report.tables import table_files

    files = {"rig.json": rig_to_json(answer).encode(), **table_files(answer)}
    check = answer if isinstance(answer, Check) else answer.check
    if figures or png:
        files |= figure_files(check, svg=figures, png=png, system=system)
    if not isinstance(answer, Check):
        files |= shop_files(answer, sheets=figures, system=system)
    return files


def shop_files(result: HardwareCheck, *, sheets: bool = True, system: System = "SI") -> dict[str, bytes]:
    """Return what a workshop builds from: a DXF for each flat and plate, and the sheets as drawings.pdf."""
    from rigdesign.report.dxf import dxf_files

    files = dxf_files(result)
    if sheets:
        from rigdesign.report.sheets import drawings_pdf

        files["drawings.pdf"] = drawings_pdf(result, system)
    return files


def figure_files(check: Check, *, svg: bool = True, png: bool = False, system: System = "SI") -> dict[str, bytes]:
    """Return the figures by file name."""
    from rigdesign.report.figures_curves import across, shear_and_moment
    from rigdesign.report.figures_load import load_and_pads, target_sheet
    from rigdesign.report.figures_tree import elevation
    from rigdesign.target.cuts import ACROSS

    sheets = {
        "target": target_sheet(check.rig.plan.target, system),
        "load_and_pads": load_and_pads(check, system),
        "shear_and_moment": shear_and_moment(check, system),
        "tree": elevation(check, system),
    }
    brief = check.rig.plan.target.brief
    if brief.specimen.is_surface:
        from rigdesign.report.surface.figures_plan import plan_sheet

        sheets["plan"] = plan_sheet(check, system)
    if any(rule.quantity in ACROSS for rule in brief.acceptance.rules):
        sheets["across"] = across(check, system)
    return drawn(sheets, svg=svg, png=png)


def drawn(sheets: dict[str, Figure], *, svg: bool = True, png: bool = False) -> dict[str, bytes]:
    """Return figures as files, by name with its ending."""
    from rigdesign.report import figures_sheet

    files = {}
    for name, figure in sheets.items():
        if svg:
            files[f"{name}.svg"] = figures_sheet.svg(figure)
        if png:
            files[f"{name}.png"] = figures_sheet.png(figure)
    return files


def read_rig(path: str | os.PathLike[str]) -> Rig:
    """Return the rig of a rig folder, or of its rig.json.

    Raises
    ------
    InputError
        If there is no rig at this path, or it cannot be read.
    """
    return read_rig_with_hardware(path)[0]


def read_rig_with_hardware(path: str | os.PathLike[str]) -> tuple[Rig, Hardware | None]:
    """Return the rig of a rig folder, or of its rig.json, and its hardware; None for a rig that has none.

    Raises
    ------
    InputError
        If there is no rig at this path, or it cannot be read.
    """
    from rigdesign.record.hardware_json import hardware_from_json
    from rigdesign.record.rig_json import rig_from_json

    file, text = _rig_text(path)
    try:
        rig = rig_from_json(text)
        return rig, hardware_from_json(text, rig)
    except InputError as error:
        raise InputError(error.what, where=f"{file}, {error.where}" if error.where else str(file), value=error.value,
                         limit=error.limit, remedy=error.remedy) from error  # fmt: skip


def _rig_text(path: str | os.PathLike[str]) -> tuple[Path, str]:
    place = Path(path)
    file = place / "rig.json" if place.is_dir() else place
    try:
        return file, file.read_bytes().decode("utf-8")
    except FileNotFoundError as error:
        raise InputError(
            "there is no rig here", where=str(path), remedy="name a rig folder, or the rig.json in it"
        ) from error
    except UnicodeDecodeError as error:
        raise InputError("this is not a rig: it is not text in UTF-8", where=str(file)) from error
    except OSError as error:
        raise InputError(f"the rig cannot be read: {error.strerror}", where=str(file)) from error
