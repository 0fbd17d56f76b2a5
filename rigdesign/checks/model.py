"""What the check found, and every number that is shown to a user."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.findings import Finding
from rigdesign.levers.model import Rig
from rigdesign.target.bands import Quantity
from rigdesign.target.curve import Floats


@dataclass(frozen=True)
class Statics:
    """Forces solved down the tree from holes and jack forces alone.

    `pad_force` (n_pads,) [N]; `share` (n_pads,) of its own jack's force; `piece_load` [N] by piece name;
    `force_residual`, `moment_residual` are the largest force [as a fraction of the jack's] and moment [over load times
    length] left over at any pivot.
    """

    pad_force: Floats
    share: Floats
    piece_load: dict[str, float]
    force_residual: float
    moment_residual: float


@dataclass(frozen=True)
class Curves:
    """V and M of target and rig at stations: x [m] and `outboard` (bool), all (n_stations,); jumps have both sides.

    `below`, `above` are the band's widths for the error (infinite where nothing is asked): (n_stations,) by quantity.
    """

    x: Floats
    outboard: NDArray[np.bool_]
    target: dict[Quantity, Floats]
    rig: dict[Quantity, Floats]
    below: dict[Quantity, Floats]
    above: dict[Quantity, Floats]

    def error(self, quantity: Quantity) -> Floats:
        """Rig minus target (n_stations,) [N or N·m]."""
        return self.rig[quantity] - self.target[quantity]

    def use(self, quantity: Quantity) -> Floats:
        """Error over its band (n_stations,), zero where nothing is asked."""
        error = self.error(quantity)
        width = np.where(error < 0, self.below[quantity], self.above[quantity])
        return np.asarray(np.abs(error) / width)


@dataclass(frozen=True)
class RegionVerdict:
    """One quantity in one stretch: largest under- and over-test, the bands they are held to, band use, verdict.

    `under`, `over` are magnitudes [N or N·m], at `under_x`, `over_x` [m]; a band is infinite where nothing is asked.
    `use` and `accepted` are None where the stretch has no band ("not judged").
    """

    start_x: float
    end_x: float
    name: str
    quantity: Quantity
    under: float
    under_x: float
    over: float
    over_x: float
    band_under: float
    band_over: float
    use: float | None
    accepted: bool | None


@dataclass(frozen=True)
class Check:
    """Everything that the check says about a rig against its target.

    Errors are fractions: `moment_error_peak` and `shear_error_peak` of the peak of the target's curve,
    `moment_error_local`, `shear_error_local` of the local value where it is at least 5 % of the peak.
    `shear_area` is ∫|V_rig − V_target| dx [N·m].  `hand_moment`, `hand_shear` are the peak errors of as many strips of
    equal width lumped at their centroids.  `jack_offset` [m] is from the resultant to the jack.
    `sum_residual`, `moment_sum_residual` close ΣF and ΣFx of the pads against the jacks.  `share_of_curve` (n_pads,)
    [N] is the net target's own load nearest to each pad as drilled, `evenness` the largest |force − share| over that
    share.
    """

    rig: Rig
    statics: Statics
    curves: Curves
    regions: tuple[RegionVerdict, ...]
    moment_error_peak: float
    moment_error_x: float
    shear_error_peak: float
    shear_error_x: float
    moment_error_local: float
    moment_error_local_x: float
    shear_error_local: float
    shear_error_local_x: float
    band_use: float
    shear_area: float
    hand_moment: float
    hand_shear: float
    jack_offset: float
    sum_residual: float
    moment_sum_residual: float
    steel_estimate: float
    share_of_curve: Floats
    evenness: float
    findings: tuple[Finding, ...]

    @property
    def accepted(self) -> bool:
        """Whether every band is kept and no finding is a failure."""
        judged = all(region.accepted is not False for region in self.regions)
        return judged and not any(finding.severity == "failure" for finding in self.findings)
