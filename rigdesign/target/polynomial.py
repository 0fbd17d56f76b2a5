"""Running loads that are polynomials between stations: tables, straight lines, parabolas, tables of V and M.

On each piece the running load is counted from the piece's outboard end, t = x_right − x:

    w = a0 + a1 t + a2 t²,    F = F_right + a0 t + a1 t²/2 + a2 t³/3,
    M = M_right + F_right t + a0 t²/2 + a1 t³/6 + a2 t⁴/12.

Counting from the tip keeps small numbers exact: near the tip F and M are sums of small terms, never the difference
of two large ones.  A percentage of the local moment means something only then.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from rigdesign.target.curve import Floats, Side


@dataclass(frozen=True)
class Polynomials:
    """A running load of quadratic pieces between the stations `x` (n + 1,) [m], strictly increasing.

    `a0` [N/m], `a1` [N/m²], `a2` [N/m³] are (n,), see the module.  There is no load outside the stations.
    """

    x: Floats
    a0: Floats
    a1: Floats
    a2: Floats

    @classmethod
    def from_table(cls, x: Floats, load: Floats) -> Polynomials:
        """Return the curve straight between rows x [m] (n,), load [N/m] (n,); two rows at one x are a jump.

        Examples
        --------
        >>> curve = Polynomials.from_table(np.array([0.0, 2.0]), np.array([300.0, 0.0]))
        >>> curve.total, curve.first_moment
        (300.0, 200.0)
        """
        width = np.diff(x)
        real = width > 0
        stations = np.append(x[:-1][real], x[-1:])
        width, inner, outer = width[real], load[:-1][real], load[1:][real]
        return cls(stations, outer, (inner - outer) / width, np.zeros(width.size))

    @cached_property
    def _width(self) -> Floats:
        return np.diff(self.x)

    @cached_property
    def _force_at(self) -> Floats:
        """Load outboard of each station (n + 1,), summed from the tip."""
        h = self._width
        own = h * (self.a0 + h * (self.a1 / 2 + h * (self.a2 / 3)))
        return np.append(np.cumsum(own[::-1])[::-1], 0.0)

    @cached_property
    def _moment_at(self) -> Floats:
        """First moment of the load outboard of each station about it (n + 1,), summed from the tip."""
        h = self._width
        own = h * h * (self.a0 / 2 + h * (self.a1 / 6 + h * (self.a2 / 12)))
        return np.append(np.cumsum((own + self._force_at[1:] * h)[::-1])[::-1], 0.0)

    def _piece(self, x: Floats, side: Side) -> tuple[NDArray[np.intp], Floats]:
        """Piece of each station and the distance from its outboard end; stations off the pieces go to the ends."""
        found = np.searchsorted(self.x, x, side="left" if side == "inboard" else "right") - 1
        piece = np.clip(found, 0, self.a0.size - 1)
        return piece, self.x[piece + 1] - np.clip(x, self.x[0], self.x[-1])

    def running(self, x: Floats, side: Side) -> Floats:
        """Running load w [N/m]."""
        piece, t = self._piece(x, side)
        w = self.a0[piece] + t * (self.a1[piece] + t * self.a2[piece])
        first, last = self.x[0], self.x[-1]
        inside = (x > first) & (x <= last) if side == "inboard" else (x >= first) & (x < last)
        return np.where(inside, w, 0.0)

    def force_beyond(self, x: Floats, side: Side) -> Floats:
        """Sum of the load outboard of x [N]."""
        piece, t = self._piece(x, side)
        own = t * (self.a0[piece] + t * (self.a1[piece] / 2 + t * (self.a2[piece] / 3)))
        return np.asarray(self._force_at[piece + 1] + own)

    def moment_beyond(self, x: Floats) -> Floats:
        """First moment about x of the load outboard of x [N·m]."""
        piece, t = self._piece(x, "outboard")
        own = t * (self.a0[piece] / 2 + t * (self.a1[piece] / 6 + t * (self.a2[piece] / 12)))
        moment = self._moment_at[piece + 1] + t * (self._force_at[piece + 1] + own)
        return np.asarray(moment + self.total * np.maximum(self.x[0] - x, 0.0))

    @property
    def total(self) -> float:
        """Sum of the load [N]."""
        return float(self._force_at[0])

    @property
    def first_moment(self) -> float:
        """First moment of the load about x = 0 [N·m]."""
        return float(self._moment_at[0] + self._force_at[0] * self.x[0])

    @property
    def breaks(self) -> Floats:
        """The stations between the pieces, ends included."""
        return self.x

    @property
    def points(self) -> tuple[Floats, Floats]:
        """No point loads."""
        return np.empty(0), np.empty(0)
