"""What summary.json says of the hardware.

Depends on: lists, and the models below them.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from rigdesign.record.objects import finding_object
from rigdesign.report.lists.masses import tree_mass

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import Clearance, HardwareCheck, Step


def hardware_summary(result: HardwareCheck) -> dict[str, Any]:
    """Return the keys that hardware adds to summary.json, its verdict and findings in place of the rig's alone.

    None says "not limited", "not asked for" or "not found".
    """
    return {
        **_sizes(result),
        **_strength(result),
        **_space(result),
        **_own_weight(result),
        "verdict": "accepted" if result.accepted else "not accepted",
        "findings": [finding_object(finding) for finding in result.findings],
    }


def _sizes(result: HardwareCheck) -> dict[str, Any]:
    hardware = result.hardware
    heaviest = max(hardware.pieces, key=lambda piece: hardware.masses[piece.name].mass, default=None)
    return {
        "mass_kg": tree_mass(hardware),
        "heaviest_lever": None if heaviest is None else heaviest.number,
        "heaviest_lever_kg": None if heaviest is None else hardware.masses[heaviest.name].mass,
        "part_marks": part_marks(result),
        "counterweights_kg": counterweights(result),
    }


def part_marks(result: HardwareCheck) -> int:
    """How many different levers and plates there are to make."""
    return len({result.hardware.marks[piece.name] for piece in result.hardware.pieces})


def counterweights(result: HardwareCheck) -> float:
    """Mass of all counterweights [kg]."""
    return math.fsum(mass for body in result.hardware.bodies.values() for mass in body.counterweights.values())


def _strength(result: HardwareCheck) -> dict[str, Any]:
    most = max(result.strength, key=lambda row: row.utilisation, default=None)
    return {
        "utilisation_max": result.utilisation,
        "utilisation_max_piece": None if most is None else most.piece,
        "utilisation_max_check": None if most is None else most.check,
        "shortfalls": [f"{shortfall.piece}: {shortfall.check}" for shortfall in result.hardware.shortfalls],
    }


def _space(result: HardwareCheck) -> dict[str, Any]:
    closest = closest_pair(result)
    return {
        "height_m": result.space.total,
        "headroom_m": result.hardware.rig.plan.target.brief.hardware.headroom,
        "clearance_least_m": None if closest is None else closest.distance,
        "clearance_between": None if closest is None else [closest.first, closest.second],
        "clearance_state": None if closest is None else closest.state,
        "clearance_required_m": result.space.required,
        "swing_max_deg": math.degrees(float(result.space.swings.max(initial=0.0))),
    }


def closest_pair(result: HardwareCheck) -> Clearance | None:
    """The two members that come nearest to each other, None where no two are looked at."""
    return min(result.space.closest, key=lambda pair: pair.distance, default=None)


def _own_weight(result: HardwareCheck) -> dict[str, Any]:
    full = result.tare.step(1.0)
    return {
        "tare_N": float(result.tare.pad_tare.sum()),
        "tare_of_load": tare_of_load(result),
        "own_weight_band_use": full.band_use,
        **{f"{quantity.replace(' ', '_')}_error_with_weight": error for quantity, error in full.errors.items()},
        "jack_force_with_weight_N": full.jack.tolist(),
        "steps": [_step(step) for step in result.tare.steps],
        "zeros": [
            {"jack": zeros.jack, "apart_N": zeros.apart, "hung_N": zeros.hung, "supported_N": zeros.supported}
            for zeros in result.tare.zeros
        ],
    }


def _step(step: Step) -> dict[str, Any]:
    return {
        "level": step.level,
        "jack_force_N": step.jack.tolist(),
        "band_use": step.band_use if math.isfinite(step.band_use) else None,
        "slack_pads": list(step.slack),
    }


def tare_of_load(result: HardwareCheck) -> float:
    """The rig's own weight over what the pads bring together at the brief's load."""
    return abs(float(result.tare.pad_tare.sum())) / abs(result.check.rig.plan.target.net.total)
