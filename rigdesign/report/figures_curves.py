"""Shear, moment and torsion of target and rig, and beneath each its error with the band that it is held to."""

from __future__ import annotations

from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from rigdesign.brief.model import Quantity
from rigdesign.checks.model import Check
from rigdesign.display import System
from rigdesign.report.figures_sheet import A3, BLUE, GREY, INK, VERMILION, new_sheet, panel, styled
from rigdesign.report.scales import Scale, scale
from rigdesign.target.curve import Floats
from rigdesign.target.cuts import ACROSS

_SYMBOL: dict[Quantity, str] = {"shear": "V", "moment": "M", "torsion": "T", "shear across": "V", "moment across": "M"}


@styled
def shear_and_moment(check: Check, system: System = "SI") -> Figure:
    """Return the sheet of V and M by station with their errors; the saw-tooth of the rig's shear is drawn as it is."""
    words = (
        f"largest error of the moment {100 * check.moment_error_peak:.3g} % of peak target moment, "
        f"of the shear {100 * check.shear_error_peak:.3g} % of peak target shear; "
    )
    quantities: tuple[Quantity, ...] = ("shear", "moment")
    if "torsion" in check.errors:
        torsion = check.errors["torsion"]
        words = words[:-2] + f", of the torsion {100 * torsion.peak:.3g} % of {torsion.of}; "
        quantities = (*quantities, "torsion")
    name = "shear and moment" if len(quantities) == 2 else "shear, moment and torsion"
    return _sheet(check, quantities, name, words, system)


@styled
def across(check: Check, system: System = "SI") -> Figure:
    """Return the sheet of what is cut across, square to y, of a surface: shear and moment with their errors."""
    words = "cut square to y, what has more y counts, supports left out; largest error of the "
    named = [
        f"{quantity} {100 * check.errors[quantity].peak:.3g} % of {check.errors[quantity].of}" for quantity in ACROSS
    ]
    return _sheet(check, ACROSS, "shear and moment across", words + ", of the ".join(named) + "; ", system)


def _sheet(check: Check, quantities: tuple[Quantity, ...], name: str, words: str, system: System) -> Figure:
    """A column for each quantity, curves above and errors beneath."""
    verdict = "accepted" if check.accepted else "not accepted"
    words += f"largest band use {check.band_use:.3g}: {verdict}"
    figure = new_sheet(A3, f"{check.rig.plan.target.brief.title}: {name}", words)
    n = len(quantities)
    width = (A3[0] - 26.0 - 30.0 * (n - 1) - 14.0) / n
    for k, quantity in enumerate(quantities):
        left = 26.0 + k * (30.0 + width)
        _curves(panel(figure, left, 140.0, width, 125.0), check, quantity, system)
        _errors(panel(figure, left, 24.0, width, 92.0), check, quantity, system)
    return figure


def _unit(check: Check, quantity: Quantity, system: System) -> Scale:
    peak = check.rig.plan.target.peaks[quantity].value
    return scale("force" if quantity.startswith("shear") else "moment", peak, system)


def _frame(axes: Axes, check: Check, quantity: Quantity, system: System) -> float:
    """Set the station axis, mark supports and regions; return metres in its unit."""
    brief = check.rig.plan.target.brief
    place = scale("length", 1.0, system)
    axes.axhline(0.0, color=INK, linewidth=0.8)
    if quantity in ACROSS:
        y = check.curves_of(quantity).x
        axes.set_xlim(float(y.min()) / place.size, float(y.max()) / place.size)
        axes.set_xlabel(f"y [{place.unit}]", size=8, labelpad=1.5)
        return place.size
    axes.set_xlim(brief.specimen.left / place.size, brief.specimen.right / place.size)
    axes.set_xlabel(f"x [{place.unit}]", size=8, labelpad=1.5)
    for region in brief.acceptance.regions:
        for edge in (region.start_x, region.end_x):
            axes.axvline(edge / place.size, color=GREY, linewidth=0.8, linestyle=(0, (6, 3)))
    return place.size


def _curves(axes: Axes, check: Check, quantity: Quantity, system: System) -> None:
    curves, unit = check.curves_of(quantity), _unit(check, quantity, system)
    metre = _frame(axes, check, quantity, system)
    x = curves.x / metre
    target, rig = curves.target[quantity] / unit.size, curves.rig[quantity] / unit.size
    axes.plot(x, target, color=BLUE, linewidth=2.6, alpha=0.55, label="target")
    axes.plot(x, rig, color=INK, linewidth=0.9, label="rig as drilled")
    low, high = axes.get_ylim()
    axes.set_ylim(low, high + 0.08 * (high - low))
    if quantity in ("moment", "moment across"):
        pads = check.rig.pad_y if quantity in ACROSS else check.rig.pad_x
        at = np.interp(pads, curves.x, curves.rig[quantity]) / unit.size
        axes.plot(pads / metre, at, "o", color="white", markeredgecolor=INK, markersize=3.5, label="pads")
    axes.set_ylabel(f"{_SYMBOL[quantity]} [{unit.unit}]", size=8)
    axes.set_title(f"{quantity} {_SYMBOL[quantity]}", size=9, loc="left", pad=4, weight="bold")
    axes.legend(loc="best", fontsize=7.5, frameon=False)
    if quantity not in ACROSS:
        _name_regions(axes, check, metre)


def _name_regions(axes: Axes, check: Check, metre: float) -> None:
    """Number the regions along the upper edge, between their dashed lines."""
    for k, region in enumerate(check.rig.plan.target.brief.acceptance.regions, 1):
        middle = (region.start_x + region.end_x) / 2 / metre
        axes.text(middle, 1.01, f"region {k}", transform=axes.get_xaxis_transform(), size=7, ha="center", va="bottom")


def _errors(axes: Axes, check: Check, quantity: Quantity, system: System) -> None:
    """Draw the error in per cent of the peak, the band as a grey field, and the largest error."""
    curves, peak, of = check.curves_of(quantity), check.errors[quantity].reference, check.errors[quantity].of
    metre = _frame(axes, check, quantity, system)
    x, error = curves.x / metre, 100 * curves.error(quantity) / peak
    below, above = 100 * curves.below[quantity] / peak, 100 * curves.above[quantity] / peak
    reach = _reach(error, below, above)
    judged = np.isfinite(below) | np.isfinite(above)
    if judged.any():
        lower, upper = np.maximum(-below, -2 * reach), np.minimum(above, 2 * reach)
        axes.fill_between(x, lower, upper, where=judged, color="#E4E4E4", linewidth=0, label="band")
        for edge in (lower, upper):
            axes.plot(x, np.where(judged, edge, np.nan), color=GREY, linewidth=0.8)
    axes.plot(x, error, color=VERMILION, linewidth=1.0, label="error, rig − target")
    worst = int(np.argmax(np.abs(error)))
    place = scale("length", 1.0, system)
    name = "y" if quantity in ACROSS else "x"
    words = f"largest: {error[worst]:+.3g} % at {name} = {place.show(float(curves.x[worst]))} {place.unit}".replace(
        "-", "−"
    )
    style: Any = {"color": "white", "markeredgecolor": INK, "markersize": 5, "zorder": 5}
    axes.plot([x[worst]], [error[worst]], "D", label=words, **style)
    axes.set_ylim(-reach, reach)
    axes.set_ylabel(f"error of {_SYMBOL[quantity]} [% of {of}]", size=8)
    note = "" if judged.any() else " (no band asked for: not judged)"
    axes.set_title(f"error of the {quantity}{note}", size=9, loc="left", pad=14, weight="bold")
    axes.legend(loc="lower left", bbox_to_anchor=(0.0, 0.995), ncols=3, fontsize=7, frameon=False, borderaxespad=0.0)


def _reach(error: Floats, below: Floats, above: Floats) -> float:
    """Half the height of the error's axis [%]: the error, and the bands unless these are far wider."""
    largest = float(np.max(np.abs(error), initial=0.0))
    widths = np.concatenate([below, above])
    bands = widths[np.isfinite(widths)]
    widest = float(bands.max()) if bands.size else 0.0
    return 1.15 * max(largest, min(widest, 8.0 * largest), 1e-6)
