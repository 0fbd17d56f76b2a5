"""From metres of the rig to millimetres of the paper: one scale a view, and which way is up.

Elevations are drawn with the ground at the bottom.  They are seen along +y where +z is up, along −y where gravity acts
along +z; x goes to the right in both.  Plans are drawn x to the right, y up, z towards the reader.  First angle: a plan
seen from above stands below its elevation, one seen from below stands above it.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.report.sheets.paper import Box
from rigdesign.report.sheets.sizes import round_scale
from rigdesign.target.curve import Floats


@dataclass(frozen=True)
class View:
    """A scale 1 : `ratio`, and where x = `x0`, second coordinate `y0` [m] lies on the paper: `left`, `low` [mm].

    `rise` is +1 where the second coordinate grows upwards on the paper, −1 where it grows downwards.
    """

    ratio: float
    left: float
    low: float
    x0: float
    y0: float
    rise: float = 1.0

    @property
    def mm(self) -> float:
        """Millimetres of the paper for a metre."""
        return 1000.0 / self.ratio

    def x(self, x: float) -> float:
        """Place across the paper [mm] of x [m]."""
        return self.left + (float(x) - self.x0) * self.mm

    def y(self, y: float) -> float:
        """Place up the paper [mm] of the second coordinate [m]."""
        return self.low + self.rise * (float(y) - self.y0) * self.mm

    def at(self, x: float, y: float) -> tuple[float, float]:
        """Place on the paper [mm] of a point [m]."""
        return self.x(x), self.y(y)

    def points(self, points: ArrayLike) -> Floats:
        """Places (n, 2) on the paper [mm] of points (n, 2) [m]."""
        rows = np.asarray(points, dtype=float)
        return np.column_stack(
            [self.left + (rows[:, 0] - self.x0) * self.mm, self.low + self.rise * (rows[:, 1] - self.y0) * self.mm]
        )


def fitted(room: Box, x: tuple[float, float], y: tuple[float, float], rise: float = 1.0, ratio: float = 0.0) -> View:
    """Return the view of the stretch x by y [m] in the middle of a box at the largest scale of the series that fits."""
    wide, high = x[1] - x[0], y[1] - y[0]
    if not ratio:
        ratio = round_scale(1000.0 * max(wide / room.width, high / room.height, 1e-9))
    mm = 1000.0 / ratio
    left = room.left + (room.width - wide * mm) / 2
    low = room.low + (room.height - high * mm) / 2
    return View(ratio, left, low, x[0], y[0] if rise > 0 else y[1], rise)


def is_up(result: HardwareCheck) -> bool:
    """Whether +z is up where the test stands."""
    return result.check.rig.plan.target.brief.specimen.gravity < 0


def rise_of(result: HardwareCheck) -> float:
    """+1 where the rig stands above the specimen, so that heights grow upwards on the paper; −1 where it is below."""
    return float(result.hardware.side) * (1.0 if is_up(result) else -1.0)


def seen_words(result: HardwareCheck) -> tuple[str, str]:
    """How elevations and plans are seen, in words."""
    if is_up(result):
        return "seen along +y", "seen from above, against z"
    return "seen along −y, z downwards", "seen from below, against z"
