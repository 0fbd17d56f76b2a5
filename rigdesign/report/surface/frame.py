"""From metres in plan to millimetres on the paper: one scale for x and y, a round one, written on the sheet."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.ticker import MaxNLocator
from numpy.typing import ArrayLike

from rigdesign.brief.model import Brief
from rigdesign.display import System
from rigdesign.report.figures_sheet import panel
from rigdesign.report.scales import scale
from rigdesign.target.curve import Floats

_ROUND = (1.0, 1.25, 1.5, 2.0, 2.5, 3.0, 4.0, 5.0, 6.0, 7.5, 8.0, 10.0)
MARGIN = 9.0
"""Clear paper around the outline, for supports and labels [mm]."""


@dataclass(frozen=True)
class Frame:
    """A part of the sheet at a scale 1 : `ratio`.

    `left`, `low`, `width`, `height` [mm] are its place on the sheet; `origin_x`, `origin_y` [m] is what lies in its
    lower left corner.
    """

    left: float
    low: float
    width: float
    height: float
    origin_x: float
    origin_y: float
    ratio: float

    @property
    def mm_per_m(self) -> float:
        """Millimetres on the paper for a metre in plan."""
        return 1000.0 / self.ratio

    def x(self, x: ArrayLike) -> Floats:
        """Place on the sheet [mm] of x [m], any shape."""
        return self.left + (np.asarray(x, dtype=float) - self.origin_x) * self.mm_per_m

    def y(self, y: ArrayLike) -> Floats:
        """Place on the sheet [mm] of y [m], any shape."""
        return self.low + (np.asarray(y, dtype=float) - self.origin_y) * self.mm_per_m

    def at(self, x: float, y: float) -> tuple[float, float]:
        """Place on the sheet [mm] of one point [m]."""
        return float(self.x(x)), float(self.y(y))

    def nearest(self, x: float, y: float) -> tuple[float, float]:
        """The place on this part of the sheet nearest to a place [mm], a little off its edges; itself where inside."""
        across = min(max(x, self.left + 1.0), self.left + self.width - 1.0)
        return across, min(max(y, self.low + 1.0), self.low + self.height - 1.0)

    def points(self, points: ArrayLike) -> Floats:
        """Places on the sheet (n, 2) [mm] of points (n, 2) [m]."""
        rows = np.asarray(points, dtype=float)
        return np.column_stack([self.x(rows[:, 0]), self.y(rows[:, 1])])


def round_ratio(least: float) -> float:
    """Return the smallest round n of a scale 1 : n that is at least `least`.

    >>> round_ratio(6.3), round_ratio(0.09), round_ratio(10.1)
    (7.5, 0.1, 12.5)
    """
    tens = 10.0 ** np.floor(np.log10(least))
    return next(float(round(n * tens, 9)) for n in (*_ROUND, 12.5) if n * tens >= least * (1 - 1e-9))


def bounds(brief: Brief) -> tuple[float, float, float, float]:
    """Return what a drawing in plan shows: least x, least y, greatest x, greatest y of the outline [m]."""
    outline = brief.specimen.outline
    if outline is None:
        raise ValueError("only a specimen with an outline is drawn in plan")
    return float(outline.x.min()), float(outline.y.min()), float(outline.x.max()), float(outline.y.max())


def fitted(brief: Brief, left: float, top: float, width: float, height: float, ratio: float = 0.0) -> Frame:
    """Return the frame of the outline in a part of the sheet below `top` that is at most so wide and high [mm].

    The frame is as large as the outline needs and lies in the middle of the width.  `ratio` is the scale, else the
    largest round one that fits.
    """
    x0, y0, x1, y1 = bounds(brief)
    least = max((x1 - x0) / (width - 2 * MARGIN), (y1 - y0) / (height - 2 * MARGIN)) * 1000.0
    ratio = ratio or round_ratio(least)
    tall = (y1 - y0) * 1000.0 / ratio + 2 * MARGIN
    wide = (x1 - x0) * 1000.0 / ratio + 2 * MARGIN
    margin = MARGIN * ratio / 1000.0
    return Frame(left + (width - wide) / 2, top - tall, wide, tall, x0 - margin, y0 - margin, ratio)


def plan_panel(figure: Figure, frame: Frame, system: System, ticks: bool = True) -> Axes:
    """Return axes over the frame whose coordinates are millimetres of the sheet and whose ticks say x and y."""
    axes = panel(figure, frame.left, frame.low, frame.width, frame.height)
    axes.set_xlim(frame.left, frame.left + frame.width)
    axes.set_ylim(frame.low, frame.low + frame.height)
    axes.grid(False)
    if not ticks:
        axes.axis("off")
        return axes
    place = scale("length", 1.0, system)
    for axis, start, length, name in (
        (axes.xaxis, frame.origin_x, frame.width, "x"),
        (axes.yaxis, frame.origin_y, frame.height, "y"),
    ):
        ends = start / place.size, (start + length * frame.ratio / 1000.0) / place.size
        wanted = max(2, int(length / 26.0))
        values = [
            v for v in MaxNLocator(wanted, steps=[1, 2, 2.5, 5, 10]).tick_values(*ends) if ends[0] <= v <= ends[1]
        ]
        seen = frame.x if name == "x" else frame.y
        axis.set_ticks([float(seen(v * place.size)) for v in values])
        axis.set_ticklabels([f"{v:.6g}".replace("-", "−") for v in values])
        axis.set_label_text(f"{name} [{place.unit}]", size=8)
    axes.xaxis.labelpad = 1.5
    return axes
