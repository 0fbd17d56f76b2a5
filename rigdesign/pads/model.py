"""What the pads stage hands on."""

from __future__ import annotations

from dataclasses import dataclass

from rigdesign.findings import Finding
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

LEAST_SHARE = 0.1
"""A pad's share of the curve counts as at least this part of the mean force when deviations are compared: a share of
next to nothing would make every force look uneven."""


@dataclass(frozen=True)
class Proof:
    """How good the pads are, and what is proven.

    `band_use` is the largest error over its band that this plan reaches before drilling, `band_use_least` what no
    arrangement of this many pads under these rules can go below, `moment_error_least` the same for the largest moment
    error alone, as a fraction of the peak target moment.  `method` says in words how the bounds were proven, `words`
    what the search did (bounded by counted work, or stopped early).
    `band_use_found` is the least band use found before anything was given up for even forces.
    `evenness` is the largest |force − share of the curve| over that share among the pads; `evenness_before` what it
    was at the least band use.
    """

    band_use: float
    band_use_least: float
    moment_error_least: float
    method: str
    words: str
    evenness: float
    evenness_before: float
    band_use_found: float

    @property
    def gap(self) -> float:
        """Least band use found above the proven least, as a fraction of it; 0 when both are zero."""
        if self.band_use_found <= self.band_use_least:
            return 0.0
        return self.band_use_found / self.band_use_least - 1.0 if self.band_use_least > 0 else float("inf")


@dataclass(frozen=True)
class PadPlan:
    """Places and wanted forces before drilling: `x`, `y` [m], `force` [N], all (n_pads,), root to tip (by x, then y).

    Forces carry the sign of the load (against z negative) and are those at the brief's load; they sum to the net
    target, with their first moments such that the jack stands at `jack_x`, `jack_y` [m].  `share` (n_pads,) is the
    target's own load nearest to each pad [N].  `may_move` tells whether drilling may shift the pads (free places).  On
    a line rig every y is 0.
    """

    target: Target
    x: Floats
    y: Floats
    force: Floats
    share: Floats
    jack_x: float
    jack_y: float
    may_move: bool
    proof: Proof
    findings: tuple[Finding, ...]

    @property
    def n_pads(self) -> int:
        """Number of pads."""
        return int(self.x.size)
