"""The answer on the hardware in sentences: strength, height, clearance, masses, own weight, and what there is to make.

Every number is the check's or the lists'; where it is a percentage it is said of what.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from rigdesign.checks.text import listed, percent
from rigdesign.display import System, counted, show
from rigdesign.report.lists import cut_plans
from rigdesign.report.lists.masses import tree_mass
from rigdesign.report.sentences import pieces_words
from rigdesign.report.summary_hardware import closest_pair, counterweights, part_marks, tare_of_load

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck, Step

CAUTION_HARDWARE = (
    "The check takes levers and links as rigid and free of friction. Strength, clearances and own weight are checked "
    "as the findings say; welds, fatigue, impact, the specimen, its support and whatever bears the jacks are not. "
    "Before anything is built or loaded from these files, have it reviewed by a licensed engineer under the codes and "
    "safety rules that hold where you are."
)

FULL = 1.0
"""The step at which the verdict on own weight is given: the whole of the brief's load."""


def hardware_answer(result: HardwareCheck, system: System = "SI") -> list[str]:
    """Return the sentences on the hardware, largest things first."""
    lines = [
        _strength_line(result, system),
        _height_line(result, system),
        _clearance_line(result, system),
        _mass_line(result, system),
        _weight_line(result, system),
        _slack_line(result),
        _counterweight_line(result, system),
        _stock_line(result),
    ]
    return [line for line in lines if line]


def _strength_line(result: HardwareCheck, system: System) -> str:
    most = max(result.strength, key=lambda row: row.utilisation, default=None)
    if most is None:
        return "Strength: nothing was checked."
    brief = result.hardware.rig.plan.target.brief
    used = "passes in no size" if math.isinf(most.utilisation) else f"takes {percent(most.utilisation)} of its limit"
    return (
        f"Strength, at {percent(brief.peak)} of the brief's load times {brief.hardware.overshoot:g}: the check that is "
        f"used most is {most.piece}, {most.check} ({most.clause}), with {show(most.load, 'force', system)}; it {used}."
    )


def _height_line(result: HardwareCheck, system: System) -> str:
    total = result.space.total
    headroom = result.hardware.rig.plan.target.brief.hardware.headroom
    text = f"Height: {show(total, 'length', system)} from z = 0 to the jack's upper pin, the jack at half its stroke"
    if math.isinf(headroom):
        return f"{text}; no headroom is given, so none is held."
    left = headroom - total
    room = f"{show(abs(left), 'length', system)} {'remains' if left >= 0 else 'is missing'}"
    return f"{text}; of the headroom of {show(headroom, 'length', system)}, {room}."


def _clearance_line(result: HardwareCheck, system: System) -> str:
    closest = closest_pair(result)
    if closest is None:
        return ""
    turn = show(result.hardware.rig.plan.target.brief.hardware.turn, "angle")
    state = "at rest" if closest.state == "at rest" else f"with levers turned by up to {turn}"
    near = f"come nearest, to {show(closest.distance, 'length', system)}" if closest.distance > 0 else "meet"
    required = show(result.space.required, "length", system)
    return f"Clearance: {closest.first} and {closest.second} {near}, {state}; {required} is asked for."


def _mass_line(result: HardwareCheck, system: System) -> str:
    hardware = result.hardware
    what = "jack" if len(hardware.rig.trees) == 1 else "jacks"
    text = f"Mass: {show(tree_mass(hardware), 'mass', system)} beyond the load cell of the {what}"
    heaviest = max(hardware.pieces, key=lambda piece: hardware.masses[piece.name].mass, default=None)
    if heaviest is None:
        return f"{text}."
    mass = show(hardware.masses[heaviest.name].mass, "mass", system)
    count, marks = len(hardware.pieces), part_marks(result)
    made = "all different" if marks == count > 1 else f"{counted(marks, 'part mark')} in all"
    return (
        f"{text}; the heaviest piece to lift is {heaviest.name} ({hardware.marks[heaviest.name]}) with {mass}. "
        f"To make: {pieces_words(result.check)}, {made}."
    )


def _weight_line(result: HardwareCheck, system: System) -> str:
    full = result.tare.step(FULL)
    weight = show(abs(float(result.tare.pad_tare.sum())), "force", system)
    errors = [
        f"{quantity} {percent(error)} ({percent(result.check.errors[quantity].peak)} without)"
        for quantity, error in full.errors.items()
    ]
    return (
        f"Own weight: {weight}, {percent(tare_of_load(result))} of what the pads bring at the brief's load. With it, "
        f"and {_jacks(result, full, system)}, the largest errors there, per cent of the target's peaks, are "
        f"{', '.join(errors)}; band use {full.band_use:.3f} ({result.check.band_use:.3f} without)."
    )


def _jacks(result: HardwareCheck, step: Step, system: System) -> str:
    names = [tree.jack.name for tree in result.hardware.rig.trees]
    return listed(f"{show(abs(float(f)), 'force', system)} on {name}" for name, f in zip(names, step.jack, strict=True))


def _slack_line(result: HardwareCheck) -> str:
    slack = [step for step in result.tare.steps if step.slack]
    if not slack:
        return "No pad hangs slack at any step of the test."
    words = [f"at {percent(step.level)} {listed(f'pad {pad}' for pad in step.slack)}" for step in slack]
    return f"Slack under the rig's own weight: {'; '.join(words)} (percentages of the brief's load)."


def _counterweight_line(result: HardwareCheck, system: System) -> str:
    total = counterweights(result)
    places = sum(len(body.counterweights) for body in result.hardware.bodies.values())
    return f"Counterweights: {show(total, 'mass', system)} in {counted(places, 'place')}." if total > 0 else ""


def _stock_line(result: HardwareCheck) -> str:
    plans = cut_plans(result)
    if not plans:
        return ""
    bars = sum(stock.plan.n_bars for stock in plans)
    least = sum(stock.plan.least_bars for stock in plans)
    proven = "no cut list needs fewer" if bars == least else f"no cut list needs fewer than {least}"
    too_long = [cut.mark for stock in plans for cut in stock.plan.too_long]
    joined = f"; longer than a bar: {listed(too_long)}" if too_long else ""
    return f"Stock: {counted(bars, 'bar')} in {counted(len(plans), 'section')}, {proven}{joined}."
