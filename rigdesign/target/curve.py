"""What every load along the span can tell about itself."""

from __future__ import annotations

from typing import Literal, Protocol

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Side = Literal["inboard", "outboard"]


class Distribution(Protocol):
    """A quantity spread over stations, with jumps, whose sums are exact: a load [N/m, N], or what turns [N, N·m].

    Every method takes x [m] of shape (n,) and returns (n,).  `side` tells which value holds at a jump: the one just
    inboard of x or just outboard of it.  Support reactions are no part of it.
    """

    def running(self, x: Floats, side: Side) -> Floats:
        """Amount per length; running load w [N/m] of a load."""

    def force_beyond(self, x: Floats, side: Side) -> Floats:
        """Sum of the amount outboard of x [N]; a point load at x counts on its inboard side."""

    @property
    def total(self) -> float:
        """Sum of the whole [N]."""

    @property
    def breaks(self) -> Floats:
        """Stations (k,) where the running amount or its slope jumps, points among them, sorted, ends included."""

    @property
    def points(self) -> tuple[Floats, Floats]:
        """What acts at single stations: stations (k,) [m], sorted and distinct, and amounts (k,) [N]."""


class Curve(Distribution, Protocol):
    """A load along the span that can be integrated exactly: running load plus point loads."""

    def moment_beyond(self, x: Floats) -> Floats:
        """First moment ∫ (s − x) dF(s) of the load outboard of x [N·m]."""

    @property
    def first_moment(self) -> float:
        """First moment of the load about x = 0 [N·m]."""
