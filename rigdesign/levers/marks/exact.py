"""The last judge before the check: errors of one rig at many stations, and figures of them."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from rigdesign.brief.model import Acceptance, BandRule, Quantity
from rigdesign.levers.judging import build_judge
from rigdesign.pads.model import LEAST_SHARE
from rigdesign.pads.surface.error_rows import error_rows
from rigdesign.pads.tube import build_tube
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target
from rigdesign.words import TORSION_ARM

PER_PAD = 100
"""Stations a pad on a line, besides all jumps: the error that they miss between them is below 1e-4 of a band."""

EVEN = 640
"""Stations along the span of a surface, besides all jumps."""


@dataclass(frozen=True)
class Exact:
    """The judge of pads under a target; forces are multiplied by the target's sign, so that they are positive."""

    target: Target

    def use(self, x: Floats, y: Floats, force: Floats) -> float:
        """Largest error over its band of pads at x, y (n,) [m] with forces (n,) [N]."""
        if self.target.brief.specimen.is_surface:
            return error_rows(self.target, x, y, EVEN).use(x, y, force)
        jack_x = float((force * x).sum() / force.sum())
        tube = build_tube(self.target, jack_x, x.size, PER_PAD, extra=x)
        quick = build_judge(tube).use(x[None], force[None])
        return float(max(quick[0], tube.use(x[None], force[None])[0]))

    def shares_missed(self, x: Floats, y: Floats, force: Floats) -> float:
        """How far the worst pad is beyond what it may be off its tributary share, where pads are judged by that."""
        share = self.target.brief.acceptance.share
        if share is None:
            return 0.0
        # imported late: cells in plan are for panels alone
        from rigdesign.pads.surface.shares import tributary_shares

        sign = 1.0 if self.target.resultant >= 0 else -1.0
        own = sign * tributary_shares(self.target, x, y)
        off = np.abs(force - own) / np.maximum(np.abs(own), LEAST_SHARE * abs(float(own.mean())))
        return max(0.0, float(off.max()) - share)

    def errors(self, x: Floats, y: Floats, force: Floats) -> dict[Quantity, float]:
        """Largest errors of moment, shear and, on surfaces, torsion, as fractions of the peaks of their curves."""
        every: tuple[Quantity, ...] = ("moment", "shear")
        if self.target.brief.specimen.is_surface:
            every += ("torsion",)
        rules = tuple(BandRule(q, side, 1.0, False, "peak") for q in every for side in ("under", "over"))
        brief = replace(self.target.brief, acceptance=Acceptance(rules, (), defaulted=False))
        rows = error_rows(replace(self.target, brief=brief), x, y, EVEN)
        uses = np.abs((rows.matrix(x, y) * force).sum(axis=1) - rows.wanted)
        return {
            q: float(uses[rows.quantity == rows.quantities.index(q)].max()) / self._reference(q)
            for q in every
        }  # fmt: skip

    def _reference(self, quantity: Quantity) -> float:
        """What errors are fractions of; a torsion next to nothing counts as the resultant times the mean width."""
        peak = self.target.peaks[quantity].value
        if quantity != "torsion":
            return peak
        lever = abs(self.target.resultant) * self.target.brief.specimen.mean_width
        return lever if peak < TORSION_ARM * lever else peak
