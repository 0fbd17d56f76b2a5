"""The target as the later stages see it."""

from __future__ import annotations

from dataclasses import dataclass

from rigdesign.brief.model import Brief
from rigdesign.findings import Finding
from rigdesign.target import internal
from rigdesign.target.curve import Curve, Floats, Side


@dataclass(frozen=True)
class Target:
    """What the specimen must feel (`total`), what gravity already brings (`gravity`), and what the pads bring (`net`).

    net = total − gravity.  Without a `weight` in the brief gravity is an empty curve.  `shear_peak` [N] and
    `moment_peak` [N·m] are the largest |V| and |M| of the total anywhere on the span, at `shear_peak_x` and
    `moment_peak_x` [m].  `findings` are numbered.
    """

    brief: Brief
    total: Curve
    gravity: Curve
    net: Curve
    shear_peak: float
    shear_peak_x: float
    moment_peak: float
    moment_peak_x: float
    findings: tuple[Finding, ...]

    @property
    def resultant(self) -> float:
        """Sum of the target [N]."""
        return self.total.total

    @property
    def centroid(self) -> float:
        """Station of the resultant [m]."""
        return self.total.first_moment / self.total.total

    @property
    def about(self) -> float:
        """Station of the root, or of the first of two supports [m]: where `moment_about` is taken."""
        specimen = self.brief.specimen
        return specimen.supports[0] if specimen.supports else specimen.left

    @property
    def moment_about(self) -> float:
        """First moment of the target about the root or the first support [N·m], reactions left out."""
        return self.total.first_moment - self.total.total * self.about

    def shear(self, x: Floats, side: Side) -> Floats:
        """Shear V of the whole target [N] at stations x (n,), reactions included."""
        return internal.shear(self.total, self.brief.specimen, x, side)

    def moment(self, x: Floats) -> Floats:
        """Bending moment M of the whole target [N·m] at stations x (n,), reactions included."""
        return internal.moment(self.total, self.brief.specimen, x)
