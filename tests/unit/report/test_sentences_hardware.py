"""The answer on the hardware in sentences."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest
from hand_results import alike, line_result, plan_result, steel_weight

from rigdesign.checks.text import percent
from rigdesign.command.terminal import Terminal
from rigdesign.command.terminal_hardware import made_table
from rigdesign.display import show
from rigdesign.report.sentences import answer, verdict
from rigdesign.report.sentences_hardware import CAUTION_HARDWARE, hardware_answer


def line_with(result, words, system="SI"):
    (line,) = [line for line in hardware_answer(result, system) if line.startswith(words)]
    return line


def test_the_most_used_check_with_its_load_and_of_what():
    result = line_result()
    most = max(result.strength, key=lambda row: row.utilisation)
    line = line_with(result, "Strength")
    assert line.startswith("Strength, at 150 % of the brief's load times 1.05: the check that is used most is ")
    assert f"{most.piece}, {most.check} ({most.clause}), with {show(most.load, 'force')}" in line
    assert line.endswith(f"it takes {percent(most.utilisation)} of its limit.")
    hopeless = replace(most, utilisation=math.inf)
    assert line_with(replace(result, strength=(hopeless,)), "Strength").endswith("it passes in no size.")


def test_height_and_what_remains_of_the_headroom():
    result = line_result()
    total = result.space.total
    assert f"Height: {show(total, 'length')} from z = 0" in line_with(result, "Height")
    assert f"of the headroom of 2.500 m, {show(2.5 - total, 'length')} remains." in line_with(result, "Height")
    high = replace(result, space=replace(result.space, total=2.75))
    assert line_with(high, "Height").endswith("of the headroom of 2.500 m, 0.250 m is missing.")
    assert line_with(plan_result(), "Height").endswith("no headroom is given, so none is held.")
    assert " in from z = 0" in line_with(result, "Height", "us")


def test_the_nearest_pair_and_its_state():
    result = line_result()
    nearest = min(result.space.closest, key=lambda pair: pair.distance)
    line = line_with(result, "Clearance")
    assert f"{nearest.first} and {nearest.second} come nearest, to {show(nearest.distance, 'length')}" in line
    assert line.endswith("25.0 mm is asked for.")
    resting = replace(nearest, state="at rest", distance=0.001)
    line = line_with(replace(result, space=replace(result.space, closest=(nearest, resting))), "Clearance")
    assert "to 1.00 mm, at rest;" in line
    touching = replace(nearest, distance=0.0)
    line = line_with(replace(result, space=replace(result.space, closest=(touching,))), "Clearance")
    assert f"{nearest.first} and {nearest.second} meet, with levers turned" in line


def test_mass_and_marks():
    result = line_result()
    line = line_with(result, "Mass")
    assert show(steel_weight(result) / 9.80665, "mass") in line
    assert f"lever 1 (L1) with {show(result.hardware.masses['lever 1'].mass, 'mass')}" in line
    assert line.endswith("To make: 4 levers, all different.")
    assert line_with(alike(result, "lever 3", "lever 4"), "Mass").endswith("To make: 4 levers, 3 part marks in all.")


def test_own_weight_says_of_what_and_what_it_costs():
    result = line_result()
    full = result.tare.step(1.0)
    line = line_with(result, "Own weight")
    assert f"Own weight: {show(steel_weight(result), 'force')}, " in line
    assert (
        f"{percent(steel_weight(result) / abs(result.check.rig.plan.target.net.total))} of what the pads bring" in line
    )
    assert f"{show(full.jack[0], 'force')} on jack 1" in line
    without = result.check.errors["moment"].peak
    assert f"moment {percent(full.errors['moment'])} ({percent(without)} without)" in line
    assert f"band use {full.band_use:.3f} ({result.check.band_use:.3f} without)" in line


def test_slack_pads_by_step():
    result = line_result()
    assert line_with(result, "No pad hangs slack")
    steps = tuple(replace(step, slack=(2, 5) if step.level < 0.5 else ()) for step in result.tare.steps)
    line = line_with(replace(result, tare=replace(result.tare, steps=steps)), "Slack")
    assert "at 20.0 % pad 2 and pad 5; at 40.0 % pad 2 and pad 5 (percentages of the brief's load)" in line


def test_counterweights_only_where_there_are_any():
    assert line_with(line_result(), "Counterweights") == "Counterweights: 3.10 kg in 1 place."
    assert not [line for line in hardware_answer(plan_result()) if line.startswith("Counterweights")]


def test_bars_to_buy():
    line = line_with(line_result(), "Stock")
    assert line == "Stock: 2 bars in 2 sections, no cut list needs fewer."


def test_the_verdict_is_on_rig_and_hardware():
    result = line_result()
    regions = tuple(replace(row, accepted=None if row.use is None else True) for row in result.check.regions)
    good = replace(result, check=replace(result.check, regions=regions, findings=()), findings=())
    assert verdict(good).endswith(f", the most used member {percent(result.utilisation)} of its limit.")
    failing = replace(good, findings=tuple(f for f in result.findings if f.stage == "strength"))
    first = next(f for f in failing.findings if f.severity == "failure")
    assert verdict(failing).startswith("Not accepted: 5 pads on 4 levers; ")
    assert f"{first.object}: {first.text.split(';')[0]} ({first.name})" in verdict(failing)
    longer = replace(first, text="breaks; and much more is said of it")
    assert f"{first.object}: breaks ({first.name})" in verdict(replace(good, findings=(longer,)))
    assert answer(failing)[0] == verdict(failing)


@pytest.mark.parametrize("system", ["SI", "us"])
def test_the_terminal_shows_hardware_and_its_caution(capsys, system):
    Terminal(system).check(line_result())
    shown = capsys.readouterr().out
    for heading in ("\nHardware\n", "\nParts to make\n", "\nCaution\n"):
        assert heading in shown
    assert "strength 1 (failure)" in shown
    assert "free of friction. Strength, clearances and own weight" in " ".join(shown.split())
    assert CAUTION_HARDWARE.split(". ")[-1] in " ".join(shown.split())


def test_the_table_of_parts_has_the_most_used_check_of_all_members_of_a_mark():
    result = alike(line_result(), "lever 3", "lever 4")
    headings, rows = made_table(result, "SI")
    assert headings[0] == "mark"
    (row,) = [row for row in rows if row[0] == "L3"]
    most = max(r.utilisation for r in result.strength if r.piece in ("lever 3", "lever 4"))
    assert row[1] == "2"
    assert row[-2:] == [f"{100 * most:.0f} %", "levers 3, 4"]
