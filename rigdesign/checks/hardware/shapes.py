"""The convex solids of which members are made: boxes, cylinders and prisms, as corners [m].

A cylinder is the prism of 16 sides that is circumscribed about it: nothing of the cylinder sticks out, and distances
come out too small by less than 2 % of its radius (1/cos(π/16) − 1 = 1.96 %), which is the safe side.
"""

from __future__ import annotations

import math

import numpy as np

from rigdesign.target.curve import Floats

SIDES = 16
"""Sides of the prism that stands for a cylinder."""

_SIGNS = np.array([[i, j, k] for i in (-1.0, 1.0) for j in (-1.0, 1.0) for k in (-1.0, 1.0)])
_TURNS = (np.arange(SIDES) + 0.5) * (2 * math.pi / SIDES)
_RING = np.column_stack([np.cos(_TURNS), np.sin(_TURNS)]) / math.cos(math.pi / SIDES)


def box(axes: Floats, low: tuple[float, float, float], high: tuple[float, float, float]) -> Floats:
    """Return the eight corners (8, 3) of a box between two corners that are given along `axes` (3, 3), unit rows.

    >>> box(np.eye(3), (0, 0, 0), (1, 2, 3)).max(axis=0).tolist()
    [1.0, 2.0, 3.0]
    """
    lower, upper = np.array(low, dtype=float), np.array(high, dtype=float)
    return np.asarray((0.5 * (lower + upper) + 0.5 * _SIGNS * (upper - lower)) @ axes)


def cylinder(start: Floats, end: Floats, radius: float) -> Floats:
    """Return the corners (32, 3) of the prism about a cylinder between the middles of its two ends (3,).

    >>> bar = cylinder(np.zeros(3), np.array([0.0, 0.0, 2.0]), 0.1)
    >>> bool(np.hypot(bar[:, 0], bar[:, 1]).max() < 0.102)
    True
    """
    x, y, z = (float(part) for part in (end - start) / math.dist(start, end))
    # square to the direction and to the axis that lies most across it, so that it is well found
    least = min(abs(x), abs(y), abs(z))
    a, b, c = (0.0, z, -y) if abs(x) == least else (-z, 0.0, x) if abs(y) == least else (y, -x, 0.0)
    size = math.hypot(a, b, c)
    a, b, c = a / size, b / size, c / size
    ring = radius * _RING @ np.array([[a, b, c], [y * c - z * b, z * a - x * c, x * b - y * a]])
    return np.vstack([start + ring, end + ring])


def prism(corners: Floats, axes: Floats, low: float, high: float) -> Floats:
    """Return the corners (2n, 3) of a prism: its outline (n, 2) along the first two `axes`, from low to high the third.

    >>> prism(np.array([[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]]), np.eye(3), -0.1, 0.1).shape
    (6, 3)
    """
    flat = corners @ axes[:2]
    return np.vstack([flat + low * axes[2], flat + high * axes[2]])
