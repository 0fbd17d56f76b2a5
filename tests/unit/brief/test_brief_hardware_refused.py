"""[hardware] that cannot be used: what is said, word for word where several keys contradict each other."""

from __future__ import annotations

import tomllib

import jsonschema
import pytest

from rigdesign.brief import schema

UNITS = {
    "headroom": ('"2 kg"', "a length is due, and kg is a unit of mass"),
    "clearance": ("25", "a length is due with its unit, and this is a bare number"),
    "pins": ('"8, 10 kN"', "a length is due, and kN is a unit of force"),
    "play": ('"0.5 deg"', "a length is due, and deg is a unit of angle"),
    "link_length": ('"300 N"', "a length is due, and N is a unit of force"),
    "turn": ('"5 mm"', "an angle is due, and mm is a unit of length"),
    "swing": ("10", "an angle is due with its unit, and this is a bare number"),
    "deflection": ("0.005", "a percentage is due with its per cent sign, and this is a bare number"),
    "density": ('"7850 kg"', "a density is due, and kg is a unit of mass"),
    "pad_mass": ('"9 N"', "a mass is due, and N is a unit of force"),
    "pad_height": ('"60"', "a length is due with its unit, and this is a bare number"),
    "bar": ('"6 m^2"', "a length is due"),
    "kerf": ('"3 s"', "a length is due, and s is a unit of time"),
    "mark_tolerance": ('"5 %"', "a length is due, and the unit is %"),
}


@pytest.mark.parametrize("key", UNITS)
def test_a_slip_of_the_unit(refusal, key: str) -> None:
    written, words = UNITS[key]
    message = refusal(("", f"[hardware]\n{key} = {written}"))
    assert message.startswith(f"BriefError: foil.toml, line 15, [hardware] {key}: {words}")
    if key != "pins":  # the schema leaves the reading of a list in one text to us
        fits = jsonschema.Draft202012Validator(schema()["$defs"]["HardwareTable"]).is_valid
        assert not fits(tomllib.loads(f"{key} = {written}"))


@pytest.mark.parametrize(
    ("lines", "words"),
    [
        ('headroom = "0 m"', 'headroom: the value is too small: "0 m" (accepted: more than 0)'),
        ('clearance = "-1 mm"', 'clearance: the value is too small: "-1 mm" (accepted: 0 or more)'),
        (
            'build = "twin flat"',
            'build: this is none of the words due: "twin flat" (accepted: "twin flats", "twin channels" or '
            '"hollow section"); did you mean "twin flats"?',
        ),
        (
            'build = ["twin flats", "I beam"]',
            'build: this is none of the words due: "I beam" (accepted: "twin flats", "twin channels" or '
            '"hollow section")',
        ),
        (
            "build = []",
            "build: at least one build is due, and this is empty: [] "
            '(accepted: such as ["twin channels", "twin flats"], from the jack)',
        ),
        (
            'grade = "S 355"',
            'grade: this is none of the words due: "S 355" (accepted: "S235", "S275", "S355" or "6082-T6"); '
            'did you mean "S355"?',
        ),
        (
            'pin_grade = "S235"',
            'pin_grade: this is none of the words due: "S235" (accepted: "S355", "C45" or "42CrMo4"); '
            'did you mean "S355"?',
        ),
        (
            'rules = "EN 13155"',
            'rules: this is none of the words due: "EN 13155" (accepted: "BTH-1", "EN 1993" or "AISC 360"); '
            'did you mean "EN 1993"?',
        ),
        ("design_factor = 0.9", "design_factor: the value is too small: 0.9 (accepted: 1 or more)"),
        (
            'design_factor = "2"',
            'design_factor: a plain number is due: "2" (accepted: such as 1.5); write it without quotes',
        ),
        ('overshoot = "105 %"', 'overshoot: a plain number is due: "105 %" (accepted: such as 1.5)'),
        ("overshoot = 0.99", "overshoot: the value is too small: 0.99 (accepted: 1 or more)"),
        (
            'pins = "12, 10 mm"',
            'pins: the pins must be in rising order, each diameter once: "12, 10 mm" '
            '(accepted: such as "8, 10, 12 mm")',
        ),
        (
            'pins = "10, 10 mm"',
            'pins: the pins must be in rising order, each diameter once: "10, 10 mm" '
            '(accepted: such as "8, 10, 12 mm")',
        ),
        ('pins = "0, 10 mm"', 'pins: a pin has a diameter above zero: "0, 10 mm" (accepted: more than 0)'),
        (
            'play = "9 mm"',
            'play: the play is too large: "9 mm" (accepted: less than the smallest pin, 8.00 mm)',
        ),
        (
            'pins = "8, 10 mm"\nplay = "8 mm"',
            'play: the play is too large: "8 mm" (accepted: less than the smallest pin, 8.00 mm)',
        ),
        ('links = "chain"', 'links: this is none of the words due: "chain" (accepted: "rod", "strap" or "webbing")'),
        ('link_length = "0 mm"', 'link_length: the value is too small: "0 mm" (accepted: more than 0)'),
        ('turn = "0 deg"', 'turn: the angle is too small: "0 deg" (accepted: more than 0, up to 20 deg)'),
        ('turn = "20.1 deg"', 'turn: the angle is too large: "20.1 deg" (accepted: more than 0, up to 20 deg)'),
        ('swing = "60 deg"', 'swing: the angle is too large: "60 deg" (accepted: more than 0, up to 45 deg)'),
        ('deflection = "0 %"', 'deflection: the value is too small: "0 %" (accepted: more than 0)'),
        ('density = "0 kg/m^3"', 'density: the value is too small: "0 kg/m^3" (accepted: more than 0)'),
        ('pad_mass = "-1 kg"', 'pad_mass: the value is too small: "-1 kg" (accepted: 0 or more)'),
        ('pad_height = "0 mm"', 'pad_height: the value is too small: "0 mm" (accepted: more than 0)'),
        (
            'part_marks = "fewest"',
            'part_marks: this is none of the words due: "fewest" (accepted: "as drilled" or "few"); '
            'did you mean "few"?',
        ),
        (
            'balance = "yes"',
            'balance: this is none of the words due: "yes" (accepted: "as needed", "none" or "counterweights")',
        ),
        ('bar = "0 m"', 'bar: the value is too small: "0 m" (accepted: more than 0)'),
        ('kerf = "6 m"', 'kerf: the kerf is too large: "6 m" (accepted: less than the bar, 6.000 m)'),
        (
            'revision = " "',
            'revision: a short text in quotes is due: " " (accepted: up to 20 characters in quotes, such as "B")',
        ),
        (
            'revision = "for the second wing 2"',
            'revision: the revision is too long: "for the second wing 2" '
            '(accepted: up to 20 characters in quotes, such as "B")',
        ),
        (
            'revision = "A\\nB"',
            r'revision: a revision is one line of plain text: "A\nB" '
            '(accepted: up to 20 characters in quotes, such as "B")',
        ),
        ('over_people = "yes"', 'over_people: true or false is due, without quotes: "yes"'),
        ("stock = 3", "stock: a text in quotes is due: 3"),
        ('headrom = "1 m"', 'headrom: "headrom" is no key of [hardware]; did you mean "headroom"?'),
        ('action = "push"', 'action: "action" is no key of [hardware]; it belongs to [pads]'),
    ],
)
def test_a_value_that_cannot_be_used(refusal, lines: str, words: str) -> None:
    line = 14 + len(lines.splitlines())
    assert refusal(("", f"[hardware]\n{lines}")) == f"BriefError: foil.toml, line {line}, [hardware] {words}"


@pytest.mark.parametrize(
    ("lines", "words"),
    [
        (
            'rules = "EN 1993"\ndesign_factor = 2.0',
            'design_factor: "design_factor" belongs to the rules BTH-1, and the rules are EN 1993: 2.0; '
            'delete it, or write rules = "BTH-1"',
        ),
        (
            'rules = "AISC 360"\nover_people = true',
            'over_people: "over_people" belongs to the rules BTH-1, and the rules are AISC 360: true; '
            'delete it, or write rules = "BTH-1"',
        ),
        (
            "load_factor = 1.5",
            'load_factor: "load_factor" belongs to the rules EN 1993, and the rules are BTH-1: 1.5; '
            'delete it, or write rules = "EN 1993"',
        ),
        (
            'rules = "AISC 360"\nload_factor = 1.5',
            'load_factor: "load_factor" belongs to the rules EN 1993, and the rules are AISC 360: 1.5; '
            'delete it, or write rules = "EN 1993"',
        ),
        (
            "over_people = true\ndesign_factor = 2.9",
            "design_factor: the design factor is too small: 2.9 (accepted: 3 or more over people); "
            "write design_factor = 3.0, or delete it, or over_people",
        ),
        (
            'mark_tolerance = "5 mm"',
            'mark_tolerance: "mark_tolerance" belongs to part_marks = "few", and part_marks is "as drilled": "5 mm"; '
            'delete it, or write part_marks = "few"',
        ),
    ],
)
def test_a_key_that_does_not_belong_to_another(refusal, lines: str, words: str) -> None:
    line = 14 + len(lines.splitlines())
    assert refusal(("", f"[hardware]\n{lines}")) == f"BriefError: foil.toml, line {line}, [hardware] {words}"


@pytest.mark.parametrize("links", ["strap", "webbing"])
def test_links_that_cannot_push(refusal, links: str) -> None:
    push = ("count = 6", 'count = 6\naction = "push"')
    assert refusal(push, ("", f'[hardware]\nlinks = "{links}"')) == (
        f'BriefError: foil.toml, line 16, [hardware] links: links of {links} cannot push, and [pads] action is "push": '
        f'"{links}"; write links = "rod", or action = "pull"'
    )


def test_straps_on_a_plan_rig(plan_refusal) -> None:
    message = plan_refusal(("", '[hardware]\nlinks = "strap"'))
    assert message.endswith(
        "[hardware] links: a flat strap keeps the pins at its ends parallel, and levers of a plan rig run in any "
        'direction: "strap"; write links = "rod" or "webbing"'
    )


def test_pounds_of_force_per_volume_are_no_density(refusal) -> None:
    message = refusal(("", '[hardware]\ndensity = "0.284 lbf/in^3"'))
    assert message.endswith("lbf is always a force; if lb is meant, write lb/in^3")


def test_hardware_that_is_no_table(refusal) -> None:
    message = refusal(("", '[[hardware]]\nlinks = "rod"'))
    assert "[hardware] is a table" in message
    assert message.endswith("write [hardware] above its keys")
    assert 'did you mean "hardware"?' in refusal(("", '[hardwear]\nlinks = "rod"'))
