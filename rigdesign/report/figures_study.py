"""The study in one picture: errors, band use and effort against the number of pads."""

from __future__ import annotations

from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.ticker import FuncFormatter, MaxNLocator

from rigdesign.chain import Study
from rigdesign.checks.model import Check
from rigdesign.findings import Refusal
from rigdesign.report.figures_sheet import A4, BLUE, GREEN, GREY, INK, VERMILION, new_sheet, panel, styled


@styled
def study_sheet(study: Study) -> Figure:
    """Return the sheet of a study: filled marks are accepted rigs, hollow ones are not, crosses have no rig."""
    fewest = study.fewest
    words = "no number of pads tried is accepted" if fewest is None else f"fewest pads accepted: {fewest.pads}"
    words += "; filled marks: accepted, hollow marks: not accepted, crosses: no rig"
    figure = new_sheet(A4, f"{study.brief.title}: study of the number of pads", words)
    width = (A4[0] - 24.0 - 26.0 - 14.0) / 2
    _errors(panel(figure, 24.0, 24.0, width, 160.0), study)
    _use(panel(figure, 50.0 + width, 109.0, width, 75.0), study)
    _steel(panel(figure, 50.0 + width, 24.0, width, 67.0), study)
    return figure


def _checked(study: Study) -> list[tuple[int, Check]]:
    return [(row.pads, row.answer) for row in study.rows if not isinstance(row.answer, Refusal)]


def _frame(axes: Axes, study: Study) -> None:
    """Whole numbers of pads along x; rows without a rig as crosses on the axis; the fewest accepted as a line."""
    counts = [row.pads for row in study.rows]
    axes.set_xlim(min(counts) - 0.6, max(counts) + 0.6)
    axes.xaxis.set_major_locator(MaxNLocator(integer=True))
    axes.set_xlabel("pads", size=8, labelpad=1.5)
    none = [row.pads for row in study.rows if isinstance(row.answer, Refusal)]
    axes.plot(none, [0.02] * len(none), "x", color=INK, transform=axes.get_xaxis_transform(), clip_on=False)
    if study.fewest is not None:
        axes.axvline(study.fewest.pads, color=GREY, linewidth=0.8, linestyle=(0, (6, 3)))


def _line(axes: Axes, study: Study, values: list[float], color: str, shape: str, label: str) -> None:
    """A thin line through all rows, its marks filled where the rig is accepted."""
    rows = _checked(study)
    axes.plot([pads for pads, _ in rows], values, color=color, linewidth=1.0, label=label, marker=shape, markersize=4.5)
    for (pads, check), value in zip(rows, values, strict=True):
        if not check.accepted:
            axes.plot([pads], [value], shape, color="white", markeredgecolor=color, markersize=4.5)


def _bound(axes: Axes, study: Study, least: list[float], color: str, label: str) -> None:
    """A dotted line through what is proven; none where a surface's bounds are all zero and say nothing."""
    if study.brief.specimen.is_surface and not any(value > 0 for value in least):
        return
    axes.plot([pads for pads, _ in _checked(study)], least, color=color, linestyle=":", label=label)


def _errors(axes: Axes, study: Study) -> None:
    checks = [check for _, check in _checked(study)]
    if checks:
        axes.set_yscale("log")
        axes.yaxis.set_major_formatter(FuncFormatter(lambda value, _: f"{value:g}"))
    _line(axes, study, [100 * check.shear_error_peak for check in checks], VERMILION, "s", "shear, drilled")
    _line(axes, study, [100 * check.moment_error_peak for check in checks], BLUE, "o", "moment, drilled")
    if study.brief.specimen.is_surface and checks:
        of = checks[0].errors["torsion"].of
        words = "" if of == "peak target torsion" else f" [% of {of}]"
        torsion = [100 * check.errors["torsion"].peak for check in checks]
        _line(axes, study, torsion, GREEN, "^", f"torsion, drilled{words}")
    least = [100 * check.rig.plan.proof.moment_error_least for check in checks]
    _bound(axes, study, least, BLUE, "moment, proven least")
    hand = [100 * check.hand_moment for check in checks if check.hand_moment is not None]
    if not study.brief.specimen.is_surface:  # strips are no layout of pads in plan
        axes.plot(
            [pads for pads, _ in _checked(study)], hand, color=GREY, linestyle="--", label="moment, strips by hand"
        )
    _frame(axes, study)
    axes.set_ylabel("largest error [% of peak target value]", size=8)
    if study.brief.specimen.is_surface and checks:
        low, high = axes.get_ylim()
        axes.set_ylim(low, high * (high / low) ** 0.18)  # room for the key above the curves
    axes.legend(loc="upper right", fontsize=7, framealpha=0.9, edgecolor="none")


def _use(axes: Axes, study: Study) -> None:
    checks = [check for _, check in _checked(study)]
    _line(axes, study, [check.band_use for check in checks], INK, "o", "drilled")
    least = [check.rig.plan.proof.band_use_least for check in checks]
    _bound(axes, study, least, INK, "proven least")
    axes.axhline(1.0, color=VERMILION, linewidth=0.9)
    _frame(axes, study)
    top = min(max([1.2, *(1.1 * check.band_use for check in checks)]), 4.0)
    # more pads need not use less of the bands of a surface: room for the key above the curve
    axes.set_ylim(0.0, 1.25 * top if study.brief.specimen.is_surface else top)
    axes.set_ylabel("band use (1 or less passes)", size=8)
    axes.legend(loc="upper right", fontsize=7, framealpha=0.9, edgecolor="none")


def _steel(axes: Axes, study: Study) -> None:
    checks = [check for _, check in _checked(study)]
    _line(axes, study, [check.steel_estimate for check in checks], GREEN, "o", "steel estimate")
    _frame(axes, study)
    axes.set_ylim(0.0, 1.1 * max([0.1, *(check.steel_estimate for check in checks)]))
    axes.set_ylabel("steel estimate [N$^{2/3}$ m$^{5/3}$]", size=8)
