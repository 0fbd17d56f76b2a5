"""The whole rig for a brief, checked with its hardware: `design`."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from rigdesign.chain.arranging import arrange_target
from rigdesign.chain.progress import Progress, share
from rigdesign.display import counted, show
from rigdesign.errors import BriefError, InputError
from rigdesign.findings import Finding, Refusal, numbered

if TYPE_CHECKING:
    from rigdesign.brief.model import Brief
    from rigdesign.checks.hardware.model import HardwareCheck
    from rigdesign.checks.model import Check
    from rigdesign.hardware.model import Hardware
    from rigdesign.target.model import Target

RIG_PART = 0.8  # of a whole design, as progress shows it; hardware is the rest


def design(brief: Brief, progress: Progress | None = None) -> HardwareCheck | Refusal:
    """Return the whole rig for a brief, checked with its hardware, or the refusal that says which limit leaves none.

    Raises
    ------
    InputError
        Where the brief contradicts itself in a way that only its target or the rig that it keeps shows.
    """
    from rigdesign.target import build_target

    return design_target(build_target(brief), progress)


def design_target(target: Target, progress: Progress | None = None) -> HardwareCheck | Refusal:
    """Like `design`, for a target that has been built already."""
    from rigdesign.hardware import stock_line

    rules = target.brief.hardware
    if target.brief.keep is not None:
        return _kept(target, progress)
    arranged = arrange_target(target, share(progress, 0.0, RIG_PART), stock_line(target.brief))
    if isinstance(arranged, Refusal):
        return arranged
    if rules.marks == "few":
        arranged = _with_few_marks(arranged)
    return _equipped(arranged, share(progress, RIG_PART, 1.0))


def _equipped(arranged: Check, progress: Progress | None) -> HardwareCheck | Refusal:
    """A checked rig with its hardware, checked; refused where holes leave nothing of a lever that could be drawn."""
    from rigdesign.checks.hardware import check_hardware
    from rigdesign.hardware import build_hardware

    hardware = build_hardware(arranged.rig, progress)
    return _without_steel(hardware) or check_hardware(arranged, hardware)


def _without_steel(hardware: Hardware) -> Refusal | None:
    """The refusal where a lever's holes are wider than it is deep, or weigh more than its steel."""
    for piece in hardware.pieces:
        section = hardware.bodies[piece.name].section
        hole = max(hardware.end_at(piece.name, each.name).hole for each in piece.holes)
        if hardware.masses[piece.name].mass > 0 and (piece.kind == "plate" or hole < section.depth):
            continue
        smallest, size, depth = (
            show(length, "length", unit="mm")
            for length in (hardware.rig.plan.target.brief.hardware.pins[0], hole, section.depth)
        )
        return Refusal(
            "strength",
            f"the holes leave no steel of {piece.name}",
            f"smallest pin {smallest}",
            f"a hole of {size} in {section.name}, {depth} deep",
            "smaller [hardware] pins, deeper profiles in the stock, or longer arms ([levers] shortest_arm)",
        )
    return None


def _with_few_marks(arranged: Check) -> Check:
    """The rig with levers and plates made alike, and a remark on what that costs."""
    from rigdesign.checks import check
    from rigdesign.checks.text import percent
    from rigdesign.hardware import build_hardware
    from rigdesign.levers.marks import few_marks

    few = few_marks(arranged.rig, arranged.rig.plan.target.brief.hardware.mark_tolerance)
    before, after = build_hardware(arranged.rig), build_hardware(few.rig)
    masses = [sum(hardware.masses[piece.name].mass for piece in hardware.pieces) for hardware in (before, after)]
    marks = [len({hardware.marks[piece.name] for piece in hardware.pieces}) for hardware in (before, after)]
    checked = check(few.rig)
    remark = Finding(
        "levers",
        "note",
        "part marks",
        f"levers and plates were made alike: {marks[0]} part marks before and "
        f"{marks[1]} after; the largest moment error went from "
        f"{percent(arranged.moment_error_peak)} to {percent(checked.moment_error_peak)} of the peak, the band use from "
        f"{arranged.band_use:.3g} to {checked.band_use:.3g}, the mass of levers and plates from "
        f"{show(masses[0], 'mass')} to {show(masses[1], 'mass')}",
        counted(marks[1], "part mark"),
        f"no fewer than {few.least} by the tolerance alone",
    )
    rig = replace(few.rig, findings=numbered((*few.rig.findings, remark)))
    return check(rig)


def _kept(target: Target, progress: Progress | None) -> HardwareCheck | Refusal:
    """A rig whose steel is cut, with as few pivots drilled anew as the target asks for."""
    from rigdesign.checks import check
    from rigdesign.checks.hardware import check_hardware
    from rigdesign.hardware import build_hardware, keep_hardware
    from rigdesign.levers.keep import keep_rig
    from rigdesign.record.hardware_json import hardware_from_json
    from rigdesign.record.rig_json import rig_from_json

    keep = target.brief.keep
    assert keep is not None
    try:
        old = rig_from_json(keep.text)
        steel = hardware_from_json(keep.text, old)
    except InputError as error:
        raise BriefError(
            f"the kept rig cannot be used: {error.what}", where=f"{keep.where}: {keep.folder}/rig.json, {error.where}",
            value=error.value, limit=error.limit, remedy=error.remedy,
        ) from error  # fmt: skip
    diameters = {} if steel is None else {piece.name: steel.end_at(piece.name, "pivot").hole for piece in steel.pieces}
    kept = keep_rig(old, target, keep.hole_distance, diameters)
    if isinstance(kept, Refusal):
        return kept
    part = share(progress, RIG_PART, 1.0)
    hardware = build_hardware(kept.rig, part) if steel is None else keep_hardware(steel, kept)
    return check_hardware(check(kept.rig), hardware)
