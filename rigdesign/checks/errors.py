"""Largest errors of a quantity, and what they are fractions of."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from rigdesign.brief.model import Quantity
from rigdesign.checks.model import Curves, Errors
from rigdesign.checks.sampling import local_errors
from rigdesign.target.model import Target
from rigdesign.words import SMALL_TARGET, TORSION_ARM


class Reference(NamedTuple):
    """What errors of a quantity are fractions of: its size [N or N·m], and how sentences call it."""

    size: float
    words: str


def reference(target: Target, quantity: Quantity) -> Reference:
    """Return what errors of a quantity are fractions of: the peak of the target's curve, as a rule.

    A target without torsion worth the name has pads that may still twist it; their errors are fractions of the
    resultant times the outline's mean width.
    """
    peak = target.peaks[quantity].value
    if quantity == "torsion":
        lever = abs(target.resultant) * target.brief.specimen.mean_width
        if peak < TORSION_ARM * lever:
            return Reference(lever, "the resultant times the outline's mean width")
    return Reference(peak, f"peak target {quantity}")


def largest_errors(target: Target, curves: Curves) -> dict[Quantity, Errors]:
    """Return the largest errors of every quantity of the curves."""
    return {quantity: _largest(target, curves, quantity) for quantity in curves.target}


def _largest(target: Target, curves: Curves, quantity: Quantity) -> Errors:
    size, words = reference(target, quantity)
    peak, at = peak_error(curves, quantity, size)
    is_large = np.abs(curves.target[quantity]) >= SMALL_TARGET * size
    if not is_large.any():
        return Errors(peak, at, None, None, size, words)
    local, local_at = local_error(curves, quantity, size)
    return Errors(peak, at, local, local_at, size, words)


def peak_error(curves: Curves, quantity: Quantity, peak: float) -> tuple[float, float]:
    """Return the largest |error| as a fraction of the peak target `peak` [N or N·m], and its station [m]."""
    error = np.abs(curves.error(quantity))
    row = int(np.argmax(error))
    return float(error[row] / peak), float(curves.x[row])


def local_error(curves: Curves, quantity: Quantity, peak: float) -> tuple[float, float]:
    """Return the largest |error| as a fraction of the local target, and its station [m].

    Only stations count at which |target| is at least 5 % of its peak `peak` [N or N·m].
    """
    error = local_errors(curves, quantity, peak)
    row = int(np.argmax(error))
    return float(error[row]), float(curves.x[row])
