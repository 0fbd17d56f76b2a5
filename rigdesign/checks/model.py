"""What the check found, and every number that is shown to a user."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from rigdesign.brief.model import Quantity
from rigdesign.findings import Finding
from rigdesign.levers.model import Rig
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
    """V, M and, on surfaces, T of target and rig at stations: x [m] and `outboard` (bool), all (n_stations,).

    Jumps have both sides.  Of what is cut across, stations are y [m], and outboard means the side of greater y.
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
class Errors:
    """Largest errors of one quantity, as magnitudes.

    `peak` is a fraction of `reference` [N or N·m], which `of` says in words: the peak of the target's curve, or, for a
    torsion next to nothing, the resultant times the outline's mean width.  `local` is a fraction of the local target,
    over the stations where that is at least 5 % of `reference`; None where there is no such station.  `at`, `local_at`
    are their stations [m]: x, or y for what is cut across.
    """

    peak: float
    at: float
    local: float | None
    local_at: float | None
    reference: float
    of: str


@dataclass(frozen=True)
class RegionVerdict:
    """One quantity in one stretch: largest under- and over-test, the bands they are held to, band use, verdict.

    Stations are x, or y for what is cut across.
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

    `across` holds shear and moment cut the other way, `curves` all else; it is None on line rigs.  `errors` has an
    entry for every quantity of the curves.  `band_use` is the largest error over its band of all that is judged.
    `shear_area` is ∫|V_rig − V_target| dx [N·m].  `hand_moment`, `hand_shear` are the peak errors of as many strips of
    equal width lumped at their centroids; None on surfaces, where strips are no layout of pads.  `jack_offset`,
    `jack_offset_y` [m] are from the resultant to the jack, along x and y.
    `sum_residual`, `moment_sum_residual` close ΣF, ΣFx and ΣFy of the pads against the jacks.  `share_of_curve`
    (n_pads,) [N] is the net target's own load nearest to each pad as drilled, on a surface its tributary share;
    `evenness` the largest |force − share| over that share (at least a tenth of the mean share), at pad `uneven_pad`.
    """

    rig: Rig
    statics: Statics
    curves: Curves
    across: Curves | None
    regions: tuple[RegionVerdict, ...]
    errors: Mapping[Quantity, Errors]
    band_use: float
    shear_area: float
    hand_moment: float | None
    hand_shear: float | None
    jack_offset: float
    jack_offset_y: float
    sum_residual: float
    moment_sum_residual: float
    steel_estimate: float
    share_of_curve: Floats
    evenness: float
    uneven_pad: int
    findings: tuple[Finding, ...]

    @property
    def accepted(self) -> bool:
        """Whether every band is kept and no finding is a failure."""
        judged = all(region.accepted is not False for region in self.regions)
        return judged and not any(finding.severity == "failure" for finding in self.findings)

    def curves_of(self, quantity: Quantity) -> Curves:
        """The curves that hold a quantity: those along the span, or those cut across.

        Raises
        ------
        KeyError
            Where neither holds it: torsion and what is cut across belong to surfaces.
        """
        if self.across is not None and quantity in self.across.target:
            return self.across
        if quantity not in self.curves.target:
            raise KeyError(quantity)
        return self.curves

    @property
    def moment_error_peak(self) -> float:
        """Largest moment error over the peak target moment."""
        return self.errors["moment"].peak

    @property
    def moment_error_x(self) -> float:
        """Station of the largest moment error [m]."""
        return self.errors["moment"].at

    @property
    def shear_error_peak(self) -> float:
        """Largest shear error over the peak target shear."""
        return self.errors["shear"].peak

    @property
    def shear_error_x(self) -> float:
        """Station of the largest shear error [m]."""
        return self.errors["shear"].at

    @property
    def moment_error_local(self) -> float:
        """Largest moment error over the local target moment, where that is at least 5 % of its peak."""
        return self._local("moment")[0]

    @property
    def moment_error_local_x(self) -> float:
        """Its station [m]."""
        return self._local("moment")[1]

    @property
    def shear_error_local(self) -> float:
        """Largest shear error over the local target shear, where that is at least 5 % of its peak."""
        return self._local("shear")[0]

    @property
    def shear_error_local_x(self) -> float:
        """Its station [m]."""
        return self._local("shear")[1]

    def _local(self, quantity: Quantity) -> tuple[float, float]:
        errors = self.errors[quantity]
        # the station of the target's own peak always counts
        assert errors.local is not None
        assert errors.local_at is not None
        return errors.local, errors.local_at

    @property
    def torsion_error_peak(self) -> float | None:
        """Largest torsion error over `errors["torsion"].of`; None on line rigs."""
        return self.errors["torsion"].peak if "torsion" in self.errors else None

    @property
    def across_error_peak(self) -> float | None:
        """Largest error of shear or moment across, over the peak of its target curve; None on line rigs."""
        return (
            max((self.errors[quantity].peak for quantity in self.across.target), default=None) if self.across else None
        )

    @property
    def share_error(self) -> float | None:
        """Largest |force − share| of a pad over its tributary share where pads are judged one by one, else None."""
        return None if self.rig.plan.target.brief.acceptance.share is None else self.evenness

    @property
    def share_error_pad(self) -> int | None:
        """The number of that pad."""
        return None if self.share_error is None else self.uneven_pad
