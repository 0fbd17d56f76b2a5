"""The target as the later stages see it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from typing import NamedTuple

import numpy as np

from rigdesign.brief.model import Brief, Quantity
from rigdesign.findings import Finding
from rigdesign.target.curve import Curve, Floats, Side
from rigdesign.target.cuts import cuts_at
from rigdesign.target.plan_load import ALONG_X, PlanLoad, loads_at
from rigdesign.target.plan_sum import PlanSum


class Peak(NamedTuple):
    """The largest magnitude of a quantity [N or N·m] and the station where it is [m]."""

    value: float
    at: float


@dataclass(frozen=True)
class Target:
    """What the specimen must feel (`total_plan`), what gravity already brings, and what the pads bring (`net_plan`).

    `total_plan` has one part for each [[load]], in order.  net = total − gravity; without a `weight` in the brief
    gravity is no load at all.  `peaks` holds the largest magnitudes of the total's internal loads: shear, moment and
    torsion anywhere on the span and, on a surface, shear and moment across.  `findings` are numbered.

    `total`, `gravity` and `net` are the same loads as curves along the span, whatever their y: on a line rig they say
    everything.
    """

    brief: Brief
    total_plan: PlanSum
    gravity_plan: PlanLoad
    net_plan: PlanLoad
    peaks: Mapping[Quantity, Peak]
    findings: tuple[Finding, ...]

    @cached_property
    def total(self) -> Curve:
        """The target along the span."""
        return self.total_plan.along(ALONG_X).force

    @cached_property
    def gravity(self) -> Curve:
        """What gravity already brings of it, along the span."""
        return self.gravity_plan.along(ALONG_X).force

    @cached_property
    def net(self) -> Curve:
        """What the pads bring, along the span."""
        return self.net_plan.along(ALONG_X).force

    @property
    def pads_peak(self) -> float:
        """What the pads bring at the peak of the test, over what they bring at the brief's load.

        The specimen must feel its target times the peak; what gravity brings of that does not grow with the load.
        """
        brought = self.resultant - self.gravity.total
        return (self.brief.peak * self.resultant - self.gravity.total) / brought

    @property
    def shear_peak(self) -> float:
        """Largest |V| anywhere on the span [N]."""
        return self.peaks["shear"].value

    @property
    def shear_peak_x(self) -> float:
        """Station of the largest |V| [m]."""
        return self.peaks["shear"].at

    @property
    def moment_peak(self) -> float:
        """Largest |M| anywhere on the span [N·m]."""
        return self.peaks["moment"].value

    @property
    def moment_peak_x(self) -> float:
        """Station of the largest |M| [m]."""
        return self.peaks["moment"].at

    @property
    def torsion_peak(self) -> float:
        """Largest |T| anywhere on the span [N·m]; zero on a line rig."""
        return self.peaks["torsion"].value

    @property
    def resultant(self) -> float:
        """Sum of the target [N]."""
        return self.total.total

    @property
    def centroid(self) -> float:
        """Station of the resultant [m]."""
        return self.total.first_moment / self.total.total

    @property
    def centroid_y(self) -> float:
        """Place of the resultant across the span, y [m]."""
        return self.total_plan.sums.first_y / self.total_plan.sums.force

    @property
    def about(self) -> float:
        """Station of the root, or of the first of two supports [m]: where `moment_about` is taken."""
        specimen = self.brief.specimen
        return specimen.supports[0] if specimen.supports else specimen.left

    @property
    def moment_about(self) -> float:
        """First moment of the target about the root or the first support [N·m], reactions left out."""
        return self.total.first_moment - self.total.total * self.about

    @property
    def torsion_about(self) -> float:
        """First moment of the target about the cut's own direction there [N·m], reactions left out."""
        specimen, at = self.brief.specimen, np.array([self.about])
        cut, sums = cuts_at(specimen, "torsion", at, "outboard"), self.total_plan.sums
        left, along = sums.first_y - sums.force * cut.y[0], sums.first_x - sums.force * cut.x[0]
        return float(left * cut.a_x[0] - along * cut.a_y[0])

    def value(self, quantity: Quantity, at: Floats, side: Side) -> Floats:
        """A quantity of the whole target at stations `at` (n,) [m], reactions included; at is y for what is across."""
        return loads_at(self.total_plan, self.brief.specimen, quantity, at, side)

    def shear(self, x: Floats, side: Side) -> Floats:
        """Shear V of the whole target [N] at stations x (n,), reactions included."""
        return self.value("shear", x, side)

    def moment(self, x: Floats, side: Side = "outboard") -> Floats:
        """Bending moment M of the whole target [N·m] at stations x (n,), reactions included.

        The side matters only where an axis has a kink, a couple stands, and the cuts are square to the axis.
        """
        return self.value("moment", x, side)

    def torsion(self, x: Floats, side: Side) -> Floats:
        """Torsion T of the whole target about the reference axis [N·m] at stations x (n,), reactions included."""
        return self.value("torsion", x, side)
