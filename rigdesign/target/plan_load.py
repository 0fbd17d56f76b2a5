"""What every load in plan can tell about itself, and what it brings to a cut.

A load is looked at along a direction: s = x a_x + y a_y counts along it, n = y a_x − x a_y to its left.  Along x, s is
x and n is y.  Whatever the load is made of, seen along one direction it is two curves over s: its force, and its force
times n, which turns the specimen.  V, M and T at any cut square to the direction follow from them.
"""

from __future__ import annotations

from abc import ABC, abstractmethod
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, NamedTuple, Protocol

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity, Specimen
from rigdesign.target.curve import Curve, Distribution, Floats, Side
from rigdesign.target.cuts import (
    ACROSS,
    cuts_at,
    reaction_loads,
    reactions_in_plan,
    stretch_at,
    stretch_directions,
)

if TYPE_CHECKING:
    from shapely import Polygon


class Direction(NamedTuple):
    """A unit vector in plan."""

    a_x: float
    a_y: float


ALONG_X = Direction(1.0, 0.0)
ALONG_Y = Direction(0.0, 1.0)


class Sums(NamedTuple):
    """Sum of a load F [N] and its first moments ΣFx, ΣFy about the origin of the plan [N·m], couples included."""

    force: float
    first_x: float
    first_y: float


@dataclass(frozen=True)
class Projection:
    """A load seen along one direction: curves over s [m].

    `force` is the load itself [N/m, N].  `turning` is the load times n, and couples: its `running` is in N, its
    `force_beyond` Σ F n in N·m.  A couple about another axis than the direction adds to `force.moment_beyond` alone.
    """

    force: Curve
    turning: Distribution


class PlanLoad(Protocol):
    """A load in plan that can be integrated exactly: pressures over areas, running loads along lines, points, couples.

    Support reactions are no part of it.
    """

    def along(self, direction: Direction) -> Projection:
        """The load seen along a direction (the same object when asked again)."""

    @property
    def sums(self) -> Sums:
        """Sum and first moments."""

    def inside(self, areas: Sequence[Polygon]) -> Floats:
        """Force [N] in each of the areas (k,), which do not overlap; on a common border it goes to the first.

        What acts beside all of them is in none.
        """


class Projected(ABC):
    """A load that is projected once for each direction along which it is looked at."""

    @cached_property
    def _seen(self) -> dict[Direction, Projection]:
        return {}

    def along(self, direction: Direction) -> Projection:
        """The load seen along a direction."""
        if direction not in self._seen:
            self._seen[direction] = self._project(direction)
        return self._seen[direction]

    @abstractmethod
    def _project(self, direction: Direction) -> Projection:
        """The load seen along a direction, worked out."""


def loads_at(load: PlanLoad, specimen: Specimen, quantity: Quantity, at: Floats, side: Side) -> Floats:
    """Return what a load and the supports' answer to it bring to a quantity at stations `at` (n,) [m], (n,)."""
    cuts = cuts_at(specimen, quantity, at, side)
    result = np.zeros(at.shape)
    for mask, direction in _by_direction(specimen, quantity, at, side):
        seen = load.along(direction)
        s = cuts.x[mask] * direction.a_x + cuts.y[mask] * direction.a_y
        n = cuts.y[mask] * direction.a_x - cuts.x[mask] * direction.a_y
        if quantity in ("moment", "moment across"):
            result[mask] = seen.force.moment_beyond(s)
            continue
        beyond = seen.force.force_beyond(s, side)
        result[mask] = seen.turning.force_beyond(s, side) - n * beyond if quantity == "torsion" else beyond
    if specimen.supports and quantity not in ACROSS:
        result = result + reaction_loads(specimen, quantity, cuts, reactions_in_plan(specimen, *load.sums))
    return result


def directions(specimen: Specimen) -> tuple[Direction, ...]:
    """Return the directions of the cuts along the span: x, or those of the axis' stretches, root to tip."""
    if specimen.cut == "square to x":
        return (ALONG_X,)
    return tuple(Direction(float(x), float(y)) for x, y in zip(*stretch_directions(specimen), strict=True))


def _by_direction(
    specimen: Specimen, quantity: Quantity, at: Floats, side: Side
) -> Iterator[tuple[NDArray[np.bool_], Direction]]:
    """Yield masks (n,) of the stations that share a direction of their cuts, with that direction."""
    every = np.ones(at.shape, bool)
    if quantity in ACROSS:
        yield every, ALONG_Y
    elif specimen.cut == "square to x":
        yield every, ALONG_X
    else:
        row = stretch_at(specimen, at, side)
        for k, direction in enumerate(directions(specimen)):
            if (row == k).any():
                yield row == k, direction
