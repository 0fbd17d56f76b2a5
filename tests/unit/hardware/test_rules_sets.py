"""Laws that every set of rules keeps, check by check: loads, thicknesses, impossible states, what a result says."""

from __future__ import annotations

from dataclasses import replace
from math import inf, isfinite, isnan

import pytest
from factories import make_hardware
from rule_states import (
    RULES,
    STEEL,
    make_bar,
    make_channel,
    make_flat,
    make_hole,
    make_hollow,
    make_pin,
    make_plate,
    make_rod,
    make_strap,
    make_webbing,
)

from rigdesign.hardware.model import Material
from rigdesign.hardware.rules import rule_set

STATES = {
    "twin flats": ("lever", make_bar()),
    "twin channels": ("lever", make_bar(section=make_channel())),
    "hollow section": ("lever", make_bar(section=make_hollow(), count=1, side_plate=0.006, braced=1.0)),
    "flat's hole": ("hole", make_hole()),
    "eye": ("hole", make_hole(count=1, round_edge=True, radius=0.040)),
    "pin": ("pin", make_pin()),
    "rod": ("rod", make_rod()),
    "strut": ("rod", make_rod(compressed=True, load=2000.0)),
    "strap": ("strap", make_strap()),
    "webbing": ("webbing", make_webbing()),
    "plate": ("plate", make_plate()),
}
EVERY = pytest.mark.parametrize("kind", STATES)
EACH = pytest.mark.parametrize("rules", RULES, ids=[rules.name for rules in RULES])


def results(rules, kind, **changes):
    method, state = STATES[kind]
    return getattr(rules, method)(replace(state, **changes))


def scaled(state, factor):
    """The state under so much of its load."""
    changes = {"load": state.load * factor}
    if hasattr(state, "moment"):
        changes["moment"] = state.moment * factor
    return replace(state, **changes)


@EACH
@EVERY
def test_what_a_result_says(rules, kind):
    for result in results(rules, kind):
        assert result.check
        assert result.clause
        assert result.utilisation == pytest.approx(result.value / result.limit, rel=1e-12)
        assert 0 < result.utilisation < 1, f"{result.check} of these sizes passes"
        assert len({symbol for symbol, _, _ in result.working}) == len(result.working), "a symbol stands twice"
        assert all(isfinite(value) for _, value, _ in result.working)


@EACH
@EVERY
@pytest.mark.parametrize("factor", [1.37, 4.2])
def test_more_load_is_more_use(rules, kind, factor):
    """In proportion, but for a strut that bends as it is compressed: more than in proportion there."""
    method, state = STATES[kind]
    less, more = getattr(rules, method)(state), getattr(rules, method)(scaled(state, factor))
    for first, second in zip(less, more, strict=True):
        if first.check == "rod compression and bending":
            assert second.utilisation > factor * first.utilisation
        elif first.check == "bending at the pivot" and rules.name == "EN 1993":
            assert second.utilisation >= factor * first.utilisation * (1 - 1e-12)  # shear takes a part of the strength
        else:
            assert second.utilisation == pytest.approx(factor * first.utilisation, rel=1e-12)


@EACH
@EVERY
def test_no_load_is_no_use(rules, kind):
    method, state = STATES[kind]
    assert all(result.utilisation == 0 for result in getattr(rules, method)(scaled(state, 0.0)))


@EACH
@EVERY
@pytest.mark.parametrize("load", [-1.0, float("nan")])
def test_a_negative_load_is_refused(rules, kind, load):
    changes = {"load": load, "moment": load} if kind == "plate" else {"load": load}
    with pytest.raises(ValueError, match="magnitude"):
        results(rules, kind, **changes)


@EACH
@pytest.mark.parametrize("kind", ["flat's hole", "eye", "strap", "plate"])
def test_thicker_is_less_used(rules, kind):
    """Within one strength of the steel: up to 16 mm, and from 20 mm on for the plate."""
    _, state = STATES[kind]
    for first, second in zip(results(rules, kind), results(rules, kind, thickness=state.thickness * 1.25), strict=True):
        assert second.utilisation < first.utilisation


@EACH
def test_a_thicker_or_deeper_flat_is_less_used(rules):
    first = results(rules, "twin flats")
    for section in (make_flat(0.080, 0.012), make_flat(0.100, 0.010)):
        for thin, thick in zip(first, results(rules, "twin flats", section=section), strict=True):
            assert thick.utilisation < thin.utilisation


@EACH
@pytest.mark.parametrize("section", [make_flat(), make_channel(), make_hollow(0.100, 0.040, 0.003)])
def test_a_longer_unbraced_length_never_bears_more(rules, section):
    """From a stub to 60 m, in small steps: over every limit of slenderness."""
    last = 0.0
    for step in range(400):
        bar = make_bar(section=section, braced=0.15 * step)
        use = rules.lever(bar)[2].utilisation
        assert isfinite(use)
        assert use >= last * (1 - 1e-12)
        last = use
    assert last > 1.5 * rules.lever(make_bar(section=section, braced=0.0))[2].utilisation


@EACH
@pytest.mark.parametrize(
    ("kind", "changes", "failing"),
    [
        ("twin flats", {"pivot_hole": 0.080}, {"bending at the pivot", "shear"}),
        ("twin flats", {"end_hole": 0.090}, {"shear"}),
        ("twin channels", {"pivot_hole": 0.102}, {"bending at the pivot", "shear"}),
        ("hollow section", {"pivot_hole": 0.110}, {"bending at the pivot", "shear"}),
        ("flat's hole", {"side": 0.0}, {"tension beside the hole"}),
        ("flat's hole", {"beyond": -0.001, "radius": 0.010}, {"fracture beyond the hole", "tear-out"}),
        ("eye", {"pin": 0.026}, {"bearing"}),
        ("strap", {"hole": 0.040}, {"strap tension beside the hole"}),
        ("strap", {"hole": 0.055}, {"strap tension beside the hole"}),
        ("plate", {"washer": 0.020}, {"punching at the washer"}),
        ("plate", {"width": 0.0}, {"plate bending"}),
        ("strut", {"load": 1e6}, {"rod compression and bending"}),
    ],
)
def test_what_cannot_be_is_used_without_end(rules, kind, changes, failing):
    told = {result.check: result.utilisation for result in results(rules, kind, **changes)}
    assert {check for check, use in told.items() if use == inf} >= failing
    assert not any(isnan(use) for use in told.values())


@EACH
def test_a_hole_that_just_fits_leaves_something(rules):
    """Between the flanges of the channel are 102 mm; arms may be short."""
    for state in (make_bar(section=make_channel(), pivot_hole=0.1019), make_bar(a=0.010, b=0.013, load=1.0)):
        assert all(isfinite(result.utilisation) for result in rules.lever(state))


@EACH
def test_walls_too_slender_for_the_rules_are_not_passed(rules):
    thin = make_hollow(0.200, 0.200, 0.002)
    assert rules.lever(make_bar(load=1.0, section=thin, count=1))[0].utilisation == inf


@EACH
@pytest.mark.parametrize("changes", [{"a": 0.0}, {"b": -0.2}, {"a": float("nan")}])
def test_arms_are_positive(rules, changes):
    with pytest.raises(ValueError, match="arms are positive"):
        rules.lever(make_bar(**changes))


@EACH
def test_a_lever_is_not_made_of_a_round_bar(rules):
    with pytest.raises(ValueError, match="not of a round"):
        rules.lever(make_bar(section=replace(make_flat(), kind="round")))


@EACH
def test_profiles_plates_and_webs_share(rules):
    """Two profiles, or two plates, are used half as much as one."""
    for method, one, two in (
        ("lever", make_bar(count=1, load=3000.0), make_bar(count=2, load=3000.0)),
        ("hole", make_hole(count=1), make_hole(count=2)),
    ):
        for single, double in zip(getattr(rules, method)(one), getattr(rules, method)(two), strict=True):
            assert double.utilisation == pytest.approx(single.utilisation / 2, rel=1e-12)


@EACH
def test_thick_steel_is_weaker(rules):
    """A plate of more than 16 mm is held to 345 MPa, not 355."""
    bearing = [rules.hole(make_hole(thickness=t))[0] for t in (0.016, 0.020)]
    assert bearing[1].utilisation == pytest.approx(bearing[0].utilisation * 0.016 / 0.020 * 355 / 345, rel=1e-12)


@EACH
def test_aluminium_bends_three_times_as_much(rules):
    soft = Material("6082-T6", (0.15,), (260e6,), (310e6,), 70e9, 2700.0, "a test")
    steel, aluminium = rules.lever(make_bar())[3], rules.lever(make_bar(material=soft))[3]
    assert aluminium.utilisation == pytest.approx(3 * steel.utilisation, rel=1e-12)


@EACH
def test_webbing_bears_a_seventh_of_what_it_breaks_at(rules):
    assert rules.webbing(make_webbing(load=10e3, breaking=70e3))[0].utilisation == pytest.approx(1.0)


def test_the_brief_chooses_the_rules():
    chosen = {name: rule_set(make_hardware(rules=name)) for name in ("BTH-1", "EN 1993", "AISC 360")}
    assert {name: rules.name for name, rules in chosen.items()} == {name: name for name in chosen}
    with pytest.raises(ValueError, match="no rules called 'folklore'"):
        rule_set(make_hardware(rules="folklore"))


def test_factors_are_those_of_the_brief():
    """Every use but that of webbing and of the deflection grows with the design factor or the factor on loads."""
    for name, key in (("BTH-1", "design_factor"), ("EN 1993", "load_factor")):
        low, high = (rule_set(make_hardware(**{"rules": name, key: value})) for value in (1.2, 1.8))
        for kind in STATES:
            for first, second in zip(results(low, kind), results(high, kind), strict=True):
                ratio = second.utilisation / first.utilisation
                if first.check in ("deflection", "webbing tension"):
                    assert ratio == 1
                elif first.check == "rod compression and bending":
                    assert ratio > 1.5
                else:
                    assert ratio == pytest.approx(1.5, rel=1e-12)


def test_steel_of_the_states():
    """What the numbers of the other tests rest on."""
    assert (STEEL.fy(0.016), STEEL.fy(0.0161), STEEL.fu(0.03)) == (355e6, 345e6, 470e6)
