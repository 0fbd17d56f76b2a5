"""Shear and moment of target and rig, and beneath each its error with the band that it is held to."""

from __future__ import annotations

from typing import Any

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from rigdesign.checks.model import Check
from rigdesign.display import System
from rigdesign.report.figures_sheet import A3, BLUE, GREY, INK, VERMILION, new_sheet, panel, styled
from rigdesign.report.scales import Scale, scale
from rigdesign.target.bands import Quantity
from rigdesign.target.curve import Floats

_SYMBOL: dict[Quantity, str] = {"shear": "V", "moment": "M"}


@styled
def shear_and_moment(check: Check, system: System = "SI") -> Figure:
    """Return the sheet of V and M by station with their errors; the saw-tooth of the rig's shear is drawn as it is."""
    target = check.rig.plan.target
    verdict = "accepted" if check.accepted else "not accepted"
    words = (
        f"largest error of the moment {100 * check.moment_error_peak:.3g} % of peak target moment, "
        f"of the shear {100 * check.shear_error_peak:.3g} % of peak target shear; "
        f"largest band use {check.band_use:.3g}: {verdict}"
    )
    figure = new_sheet(A3, f"{target.brief.title}: shear and moment", words)
    width = (A3[0] - 26.0 - 30.0 - 14.0) / 2
    for left, quantity in ((26.0, "shear"), (56.0 + width, "moment")):
        _curves(panel(figure, left, 140.0, width, 125.0), check, quantity, system)  # type: ignore[arg-type]
        _errors(panel(figure, left, 24.0, width, 92.0), check, quantity, system)  # type: ignore[arg-type]
    return figure


def _peak(check: Check, quantity: Quantity) -> float:
    target = check.rig.plan.target
    return target.shear_peak if quantity == "shear" else target.moment_peak


def _unit(check: Check, quantity: Quantity, system: System) -> Scale:
    return scale("force" if quantity == "shear" else "moment", _peak(check, quantity), system)


def _frame(axes: Axes, check: Check, system: System) -> float:
    """Set the station axis, mark pads, supports and regions; return metres in its unit."""
    brief = check.rig.plan.target.brief
    place = scale("length", 1.0, system)
    axes.set_xlim(brief.specimen.left / place.size, brief.specimen.right / place.size)
    axes.axhline(0.0, color=INK, linewidth=0.8)
    axes.set_xlabel(f"x [{place.unit}]", size=8, labelpad=1.5)
    for region in brief.acceptance.regions:
        for edge in (region.start_x, region.end_x):
            axes.axvline(edge / place.size, color=GREY, linewidth=0.8, linestyle=(0, (6, 3)))
    return place.size


def _curves(axes: Axes, check: Check, quantity: Quantity, system: System) -> None:
    curves, unit = check.curves, _unit(check, quantity, system)
    metre = _frame(axes, check, system)
    x = curves.x / metre
    target, rig = curves.target[quantity] / unit.size, curves.rig[quantity] / unit.size
    axes.plot(x, target, color=BLUE, linewidth=2.6, alpha=0.55, label="target")
    axes.plot(x, rig, color=INK, linewidth=0.9, label="rig as drilled")
    low, high = axes.get_ylim()
    axes.set_ylim(low, high + 0.08 * (high - low))
    at = np.interp(check.rig.pad_x, curves.x, curves.rig[quantity]) / unit.size
    if quantity == "moment":
        axes.plot(check.rig.pad_x / metre, at, "o", color="white", markeredgecolor=INK, markersize=3.5, label="pads")
    axes.set_ylabel(f"{_SYMBOL[quantity]} [{unit.unit}]", size=8)
    axes.set_title(f"{quantity} {_SYMBOL[quantity]}", size=9, loc="left", pad=4, weight="bold")
    axes.legend(loc="best", fontsize=7.5, frameon=False)
    _name_regions(axes, check, metre)


def _name_regions(axes: Axes, check: Check, metre: float) -> None:
    """Number the regions along the upper edge, between their dashed lines."""
    for k, region in enumerate(check.rig.plan.target.brief.acceptance.regions, 1):
        middle = (region.start_x + region.end_x) / 2 / metre
        axes.text(middle, 1.01, f"region {k}", transform=axes.get_xaxis_transform(), size=7, ha="center", va="bottom")


def _errors(axes: Axes, check: Check, quantity: Quantity, system: System) -> None:
    """Draw the error in per cent of the peak, the band as a grey field, and the largest error."""
    curves, peak = check.curves, _peak(check, quantity)
    metre = _frame(axes, check, system)
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
    words = f"largest: {error[worst]:+.3g} % at x = {place.show(float(curves.x[worst]))} {place.unit}".replace("-", "−")
    style: Any = {"color": "white", "markeredgecolor": INK, "markersize": 5, "zorder": 5}
    axes.plot([x[worst]], [error[worst]], "D", label=words, **style)
    axes.set_ylim(-reach, reach)
    axes.set_ylabel(f"error of {_SYMBOL[quantity]} [% of peak target {quantity}]", size=8)
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
