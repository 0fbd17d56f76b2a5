"""Plan loads as multiples and sums of others."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.target.curve import Floats
from rigdesign.target.plan_load import Direction, PlanLoad, Projected, Projection, Sums
from rigdesign.target.sums import NO_CURVE, Combined, Summed

if TYPE_CHECKING:
    from shapely import Polygon


@dataclass(frozen=True)
class PlanSum(Projected):
    """Σ factor · load; without parts it is no load at all."""

    parts: tuple[PlanLoad, ...]
    factors: tuple[float, ...]

    def _project(self, direction: Direction) -> Projection:
        seen = [part.along(direction) for part in self.parts]
        turning = [(one.turning, f) for one, f in zip(seen, self.factors, strict=True) if one.turning is not NO_CURVE]
        return Projection(
            Combined(tuple(one.force for one in seen), self.factors),
            Summed(tuple(part for part, _ in turning), tuple(f for _, f in turning)),
        )

    @cached_property
    def sums(self) -> Sums:
        """Sum and first moments."""
        rows = [part.sums for part in self.parts]
        return Sums(*(sum(f * row[k] for f, row in zip(self.factors, rows, strict=True)) for k in range(3)))

    def inside(self, areas: Sequence[Polygon]) -> Floats:
        """Force [N] in each of the areas (k,)."""
        result = np.zeros(len(areas))
        for part, factor in zip(self.parts, self.factors, strict=True):
            result += factor * part.inside(areas)
        return result
