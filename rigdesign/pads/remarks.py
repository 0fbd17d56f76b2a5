"""Remarks on how good the pads are, on line rigs and surfaces alike."""

from __future__ import annotations

from rigdesign.findings import Finding
from rigdesign.pads.model import Proof
from rigdesign.pads.outcome import Outcome

# A gap between what was found and what is proven is remarked on above this.
GAP_REMARK = 0.005
# Bounds and designs are taken at different stations and may differ by this fraction.
BOUND_TOLERANCE = 1e-3


def doubts(outcome: Outcome, use: float) -> list[Finding]:
    """A bound above what was found cannot be a bound: said, not smoothed over."""
    if outcome.use_least <= use * (1 + BOUND_TOLERANCE):
        return []
    return [
        Finding(
            "pads",
            "warning",
            "pads",
            "the pads found are better than what the bound calls possible, so the bound is not to be trusted",
            value=f"band use {use:.4g}",
            limit=f"bound {outcome.use_least:.4g}",
            remedy="the pads and their check stand; take the proven least as not proven, and report the brief",
        )
    ]


def proof_remarks(proof: Proof) -> list[Finding]:
    """A gap between what was found and what is proven."""
    findings = []
    if proof.gap == float("inf"):
        findings.append(
            Finding(
                "pads",
                "note",
                "pads",
                "nothing is proven of how small the band use of so many pads could be",
                value=f"{proof.band_use_found:.4g} found",
                limit="no bound above zero",
                remedy="a better arrangement may exist: try more pads, or given places, whose choice can be proven",
            )
        )
    elif proof.gap > GAP_REMARK:
        findings.append(
            Finding(
                "pads",
                "note",
                "pads",
                f"the band use found is {100 * proof.gap:.2g} % above the proven least",
                value=f"{proof.band_use_found:.4g}",
                limit=f"{proof.band_use_least:.4g}",
                remedy="a better arrangement may exist, by at most this much",
            )
        )
    return findings
