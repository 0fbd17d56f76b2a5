"""Places for labels among what is drawn already.

A label is tried on rings around its object.  Places that touch another label are out; among the rest the one wins that
is near and covers least of what is drawn.  All sizes are in millimetres of the sheet.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

AIR = 0.5
"""Clear distance kept between two labels [mm]."""
COVERED = 0.8
"""A point of a drawn line that a label covers weighs as much as so many millimetres of distance."""
_STEP = 1.2  # between rings, and between points of a drawn line
_RINGS = 40
# to the right first, then above, to the left, beneath, and what is between them
_TURNS = np.radians([0, 90, 180, 270, 45, 135, 225, 315, 22.5, 67.5, 112.5, 157.5, 202.5, 247.5, 292.5, 337.5])


class Board:
    """What is taken of a part of the sheet, from `left`, `low` to `right`, `high` [mm]: labels, and lines drawn."""

    def __init__(self, left: float, low: float, right: float, high: float) -> None:
        """Start with nothing taken."""
        self._edges = (left, low, right, high)
        self._boxes: list[tuple[float, float, float, float]] = []
        self._points: list[Floats] = []

    def take(self, x: float, y: float, width: float, height: float) -> None:
        """No later label touches a box of this centre and size."""
        self._boxes.append((x - width / 2, y - height / 2, x + width / 2, y + height / 2))

    def draw_line(self, x: Floats, y: Floats) -> None:
        """Later labels keep off a line through these points (n,) where they can."""
        for k in range(len(x) - 1):
            parts = max(2, int(np.hypot(x[k + 1] - x[k], y[k + 1] - y[k]) / _STEP) + 1)
            self._points.append(
                np.column_stack([np.linspace(x[k], x[k + 1], parts), np.linspace(y[k], y[k + 1], parts)])
            )

    def place(
        self, x: float, y: float, width: float, height: float, start: float = 0.0, covered: float = COVERED
    ) -> tuple[float, float]:
        """Return the centre of a label of this size for an object at x, y, and take the place.

        `start` is how far from the object the label begins; 0 tries a label on the object itself first.  `covered` is
        the weight of a point of a drawn line under the label, in millimetres of distance.
        """
        centre_x, centre_y, far = _candidates(x, y, width, height, start)
        overlap = self._overlap(centre_x, centre_y, width, height)
        cost = far + covered * self._covered(centre_x, centre_y, width, height)
        # where every place touches something the smallest overlap wins
        best = int(np.lexsort((np.arange(cost.size), cost, np.round(overlap, 6)))[0])
        place = float(centre_x[best]), float(centre_y[best])
        self.take(*place, width, height)
        return place

    def _overlap(self, x: Floats, y: Floats, width: float, height: float) -> Floats:
        """Area of each candidate (n,) that touches labels or leaves the sheet's part [mm²]."""
        left, low, right, high = self._edges
        across = np.maximum(0, left - (x - width / 2)) + np.maximum(0, x + width / 2 - right)
        up = np.maximum(0, low - (y - height / 2)) + np.maximum(0, y + height / 2 - high)
        result = across * height + up * width
        if self._boxes:
            boxes = np.array(self._boxes)
            common_x = np.minimum(x[:, None] + width / 2 + AIR, boxes[:, 2]) - np.maximum(
                x[:, None] - width / 2 - AIR, boxes[:, 0]
            )
            common_y = np.minimum(y[:, None] + height / 2 + AIR, boxes[:, 3]) - np.maximum(
                y[:, None] - height / 2 - AIR, boxes[:, 1]
            )
            result = result + (np.maximum(common_x, 0) * np.maximum(common_y, 0)).sum(axis=1)
        return np.asarray(result)

    def _covered(self, x: Floats, y: Floats, width: float, height: float) -> Floats:
        """How many points of drawn lines each candidate (n,) covers."""
        if not self._points:
            return np.zeros(x.shape)
        points = np.concatenate(self._points)
        inside = (np.abs(points[:, 0] - x[:, None]) < width / 2 + AIR) & (
            np.abs(points[:, 1] - y[:, None]) < height / 2 + AIR
        )
        return np.asarray(inside.sum(axis=1, dtype=float))


def _candidates(x: float, y: float, width: float, height: float, start: float) -> tuple[Floats, Floats, Floats]:
    """Centres on rings around a place, and how far each ring is: (n,) each."""
    far = np.repeat(start + _STEP * np.arange(_RINGS), _TURNS.size)
    turn = np.tile(_TURNS, _RINGS)
    centre_x = x + np.cos(turn) * (far + width / 2)
    centre_y = y + np.sin(turn) * (far + height / 2)
    if start > 0:
        return centre_x, centre_y, far - start
    return np.append(x, centre_x), np.append(y, centre_y), np.append(0.0, far + _STEP)
