"""The whole check of the hardware: own weight, strength, space, remarks."""

from __future__ import annotations

from dataclasses import replace

from rigdesign.checks.hardware.loads import Hanging, hanging, own_weight
from rigdesign.checks.hardware.model import HardwareCheck, Tare
from rigdesign.checks.hardware.remarks_space import space_remarks
from rigdesign.checks.hardware.remarks_strength import strength_remarks
from rigdesign.checks.hardware.remarks_weight import weight_remarks
from rigdesign.checks.hardware.remedies import remedies
from rigdesign.checks.hardware.space import space
from rigdesign.checks.hardware.strength import strength
from rigdesign.checks.hardware.tare import sampled, steps, weighed
from rigdesign.checks.hardware.zeros import zeros
from rigdesign.checks.model import Check
from rigdesign.checks.remarks_statics import left_out
from rigdesign.errors import InputError
from rigdesign.findings import Finding, Stage, numbered
from rigdesign.hardware.model import Hardware

OWN_STAGES: tuple[Stage, ...] = ("space", "strength", "behaviour")
"""The stages of this check's own remarks, in their order."""


def check_hardware(check: Check, hardware: Hardware) -> HardwareCheck:
    """Check the hardware of a rig that has been checked.

    Parameters
    ----------
    check
        The check of the rig, which says how well it meets its target without weight.
    hardware
        Its hardware, for the same rig.  Nothing of what its builder worked out enters the result but sizes, places and
        masses; its findings and shortfalls are told.

    Returns
    -------
    HardwareCheck
        Its findings are those of the check, and then those of hardware, space, strength and own weight.

    Raises
    ------
    InputError
        Where the hardware is not that of the rig: members are missing, links join what the rig does not join, or it
        stands on the other side of the specimen.
    """
    rig = check.rig
    hung = hanging(rig)
    _require_same(hardware, hung)
    _require_side(hardware)
    loads = own_weight(rig, hardware.masses)
    with_weight = weighed(sampled(check), hung, loads)
    peak, overshoot = rig.plan.target.brief.peak, rig.plan.target.brief.hardware.overshoot
    tare = Tare(loads.pad_fixed, steps(with_weight, peak), zeros(with_weight), remedies(hardware, with_weight))
    rows = strength(hardware, hung, loads, with_weight.held_at(peak, overshoot))
    room = space(hardware)
    own = [
        *hardware.findings,
        *space_remarks(hardware, room),
        *strength_remarks(hardware, rows),
        *weight_remarks(check, hardware, with_weight, tare),
    ]
    # findings of a stage stand together; the builder's come first in theirs
    own.sort(key=lambda finding: OWN_STAGES.index(finding.stage) if finding.stage in OWN_STAGES else -1)
    return HardwareCheck(check, hardware, loads, rows, room, tare, numbered([*_earlier(check), *own]))


def _earlier(check: Check) -> list[Finding]:
    """The check's findings; what is not checked is less now."""
    before, after = left_out(check), left_out(check, with_hardware=True)
    return [after if replace(finding, number=0) == before else finding for finding in check.findings]


def _require_side(hardware: Hardware) -> None:
    """The rig stands on the side of the specimen on which its brief wants it."""
    rig = hardware.rig
    action = rig.plan.target.brief.pads.action
    wanted = (1 if action == "pull" else -1) * (1 if float(rig.jack_forces.sum()) >= 0 else -1)
    if hardware.side != wanted:
        sides = {1: "on the side of +z", -1: "on the side of −z"}
        raise InputError(
            "the hardware stands on the other side of the specimen than the brief asks for",
            where="hardware",
            value=sides[hardware.side],
            limit=f"{sides[wanted]}, for a load along {'+z' if wanted * (1 if action == 'pull' else -1) > 0 else '−z'} "
            f'with [pads] action = "{action}"',
            remedy="give a brief with the action and the direction of load that the rig was made for",
        )


def _require_same(hardware: Hardware, hung: Hanging) -> None:
    """Pieces, links and pads of the hardware are those of the rig."""
    wanted = list(zip(hung.upper, hung.hole, hung.lower, strict=True))
    found = [(link.upper.to, link.upper.at, link.lower.to) for link in hardware.links]
    if len(found) != len(wanted):
        raise InputError(
            "the hardware has not the links of the rig", where="hardware", value=str(len(found)), limit=str(len(wanted))
        )
    for link, has, wants in zip(hardware.links, found, wanted, strict=True):
        if has != wants:
            raise InputError(
                "a link joins what the rig does not join there",
                where=f"hardware, {link.name}",
                value=" ".join(part for part in has if part),
                limit=" ".join(part for part in wants if part),
            )
    for piece in hung.layout.pieces:
        if piece.name not in hardware.bodies:
            raise InputError("a piece of the rig has no body", where=f"hardware, {piece.name}")
    if len(hardware.pads) != hung.layout.n_pads:
        raise InputError(
            "the hardware has not the pads of the rig",
            where="hardware",
            value=str(len(hardware.pads)),
            limit=str(hung.layout.n_pads),
        )
