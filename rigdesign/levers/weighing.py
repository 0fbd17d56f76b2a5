"""What levers and plates weigh, as the grouping asks: the mass per length that stock has for a bending moment.

A plate of area A whose points bend it by the moments M_i = F_i r_i is about A/r_i wide across its arm i, so that its
thickness goes with √(max(M_i r_i)/A), and its mass with √(A max(M_i r_i)).

Without stock the grouping takes the steel estimate, in which a lever's mass per length goes with its bending moment to
the power 2/3, as that of similar sections does.
"""

from __future__ import annotations

from bisect import bisect_left
from dataclasses import dataclass
from functools import cached_property
from math import cbrt

import numpy as np

from rigdesign.target.curve import Floats


@dataclass(frozen=True)
class StockLine:
    """The lightest levers of a stock by what they bear.

    `moments` (k,) [N·m], rising, are the bending moments at the pivot, at the brief's load, up to which a lever of
    `masses` (k,) [kg/m], rising, is enough.  Beyond the last, masses go on with the moment to the power 2/3.
    `overhang` [m] is the steel beyond each end hole, `least_arm` [m] the shortest arm with room for two eyes beside
    each other.  A plate's mass is `plate` √(A max(M_i r_i)) [kg/(N^½ m²)], with A and r_i to its edges, at least
    `thinnest` A [kg/m²].
    """

    moments: Floats
    masses: Floats
    overhang: float
    plate: float
    thinnest: float
    least_arm: float = 0.0

    def line_mass(self, moment: Floats) -> Floats:
        """Return the mass per length [kg/m] of levers with the bending moment [N·m] at their pivot, any shape.

        >>> stock = StockLine(np.array([100.0, 300.0]), np.array([2.0, 5.0]), 0.03, 1.0, 50.0)
        >>> stock.line_mass(np.array([50.0, 100.0, 101.0]))
        array([2., 2., 5.])
        """
        row = np.searchsorted(self.moments, moment)
        last = self.moments.size - 1
        beyond = np.maximum(np.asarray(moment) / self.moments[-1], 1.0)
        return np.asarray(self.masses[np.minimum(row, last)] * np.cbrt(beyond * beyond))

    def scaled(self, moment: float, length: float) -> StockLine:
        """The same with moments in units of `moment` [N·m], lengths in `length` [m], masses in `mass_unit` of them."""
        unit = self.mass_unit(moment, length) / length
        return StockLine(
            self.moments / moment,
            self.masses / unit,
            self.overhang / length,
            self.plate * float(np.sqrt(moment * length)) / unit,
            self.thinnest * length / unit,
            self.least_arm / length,
        )

    def mass_unit(self, moment: float, length: float) -> float:
        """What `length` [m] of the lever for a `moment` [N·m] weighs [kg]."""
        return float(self.line_mass(np.array(moment))) * length

    def side_mass(self, moment: Floats, arm: Floats) -> Floats:
        """Return the mass [kg] of one side of levers, from the pivot to beyond the end hole an `arm` [m] away."""
        return np.asarray(self.line_mass(moment) * (arm + self.overhang))

    def side_mass_of(self, moment: float, arm: float) -> float:
        """Return the same as `side_mass` for one number each, without arrays."""
        moments, masses = self._lists
        row = min(bisect_left(moments, moment), len(moments) - 1)
        beyond = max(moment / moments[-1], 1.0)
        return masses[row] * cbrt(beyond * beyond) * (arm + self.overhang)

    @cached_property
    def _lists(self) -> tuple[list[float], list[float]]:
        return self.moments.tolist(), self.masses.tolist()

    def plate_mass(self, moment: Floats, arm: Floats, area: Floats, around: Floats) -> Floats:
        """Return the mass [kg] of three-point plates.

        Parameters
        ----------
        moment, arm
            Bending moment F r [N·m] and distance from the pivot r [m] of each point, (..., 3).
        area, around
            Area [m²] of the triangle of the points and the sum of its sides [m], (...).
        """
        steel = area + around * self.overhang + np.pi * self.overhang**2
        worst = (moment * (arm + self.overhang)).max(axis=-1)
        return np.asarray(np.maximum(self.plate * np.sqrt(steel * worst), self.thinnest * steel))

    def levers_mass(self, load: Floats, a: Floats, b: Floats) -> Floats:
        """Return the mass [kg] of levers with `load` [N] at the pivot and arms a, b [m], any shape."""
        return self.side_mass(load * a * b / (a + b), a) + self.side_mass(load * a * b / (a + b), b)
