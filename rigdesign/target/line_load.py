"""A running load along a line in plan, and sums of plan loads."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from rigdesign.brief.model import Line
from rigdesign.target.curve import Curve, Floats
from rigdesign.target.plan_load import ALONG_X, Direction, PlanLoad, Projection, Sums
from rigdesign.target.sums import Combined

if TYPE_CHECKING:
    from shapely import Polygon

NO_CURVE = Combined((), ())
"""The curve of no load at all."""


@dataclass(frozen=True)
class LineLoad:
    """A load `curve` over x that acts along a `line` in plan."""

    curve: Curve
    line: Line

    def along(self, direction: Direction) -> Projection:
        """The load seen along a direction."""
        if direction != ALONG_X or self.line.y.any():
            raise NotImplementedError
        return Projection(self.curve, NO_CURVE)

    @property
    def sums(self) -> Sums:
        """Sum and first moments."""
        seen = self.along(ALONG_X)
        return Sums(seen.force.total, seen.force.first_moment, seen.turning.total)

    def inside(self, areas: Sequence[Polygon]) -> Floats:
        """Force [N] in each of the areas."""
        raise NotImplementedError


@dataclass(frozen=True)
class PlanSum:
    """Σ factor · load; without parts it is no load at all."""

    parts: tuple[PlanLoad, ...]
    factors: tuple[float, ...]

    @cached_property
    def _seen(self) -> dict[Direction, Projection]:
        return {}

    def along(self, direction: Direction) -> Projection:
        """The load seen along a direction."""
        if direction not in self._seen:
            seen = [part.along(direction) for part in self.parts]
            self._seen[direction] = Projection(
                Combined(tuple(one.force for one in seen), self.factors),
                Combined(tuple(one.turning for one in seen), self.factors),
            )
        return self._seen[direction]

    @cached_property
    def sums(self) -> Sums:
        """Sum and first moments."""
        rows = [part.sums for part in self.parts]
        return Sums(*(sum(f * row[k] for f, row in zip(self.factors, rows, strict=True)) for k in range(3)))

    def inside(self, areas: Sequence[Polygon]) -> Floats:
        """Force [N] in each of the areas."""
        result = np.zeros(len(areas))
        for part, factor in zip(self.parts, self.factors, strict=True):
            result += factor * part.inside(areas)
        return result
