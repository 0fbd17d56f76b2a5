"""What every load along the span can tell about itself."""

from __future__ import annotations

from typing import Literal, Protocol

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Side = Literal["inboard", "outboard"]


class Curve(Protocol):
    """A load along the span that can be integrated exactly: running load plus point loads.

    Every method takes x [m] of shape (n,) and returns (n,).  `side` tells which value holds at a jump: the one just
    inboard of x or just outboard of it.  Support reactions are no part of a curve.
    """

    def running(self, x: Floats, side: Side) -> Floats:
        """Running load w [N/m]."""

    def force_beyond(self, x: Floats, side: Side) -> Floats:
        """Sum of the load outboard of x [N]; a point load at x counts on its inboard side."""

    def moment_beyond(self, x: Floats) -> Floats:
        """First moment ∫ (s − x) dF(s) of the load outboard of x [N·m]."""

    @property
    def total(self) -> float:
        """Sum of the load [N]."""

    @property
    def first_moment(self) -> float:
        """First moment of the load about x = 0 [N·m]."""

    @property
    def breaks(self) -> Floats:
        """Stations (k,) where w or its slope jumps, point loads among them, sorted, ends included."""

    @property
    def points(self) -> tuple[Floats, Floats]:
        """Point loads: stations (k,) [m], sorted and distinct, and forces (k,) [N]."""
