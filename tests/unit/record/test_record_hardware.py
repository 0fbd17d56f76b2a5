"""The hardware in rig.json: there and back to the last bit, and texts whose hardware is not that of their rig."""

from __future__ import annotations

import json
import math
from dataclasses import fields, is_dataclass, replace

import numpy as np
import pytest
from factories import make_brief, make_hardware, make_pads
from hand_hardware import make_hardware_for
from hand_plan_rigs import make_plan_rig
from hand_rigs import make_rig

from rigdesign.checks import check
from rigdesign.errors import InputError
from rigdesign.findings import Finding
from rigdesign.hardware import build_hardware
from rigdesign.hardware.model import Hardware, Shortfall
from rigdesign.record.fields import read_object
from rigdesign.record.hardware_json import hardware_from_json, hardware_object
from rigdesign.record.rig_json import rig_to_json

REMARK = Finding("strength", "warning", "lever 2", "thin", "3 mm", "5 mm", "thicker", number=1)


def line_hardware(**changes: object) -> Hardware:
    rig = make_rig([0.31, 0.9, 1.72, 2.3, 2.9], [410.0, 520.0, 333.0, 250.0, 170.0])
    return make_hardware_for(rig, counterweights={"lever 2": {"A": 3.1}}, pad_mass=1.3, **changes)


def plan_hardware() -> Hardware:
    rig = make_plan_rig(
        [0.5, 0.9, 1.4, 2.1, 2.6], [0.1, -0.3, 0.05, -0.2, -0.5], [310.0, 220.0, 260.0, 140.0, 90.0],
        group=((1, 2), (3, 4, 5)),
    )  # fmt: skip
    return make_hardware_for(rig, "hollow section", "strap")


def as_text(hardware: Hardware) -> str:
    """As rig.json has it, with a rig in it that is enough for reading the hardware."""
    return json.dumps({"schema_number": 1, "hardware": hardware_object(hardware)}, allow_nan=False)


def require_equal(one: object, other: object, where: str) -> None:
    if isinstance(one, np.ndarray):
        assert one.shape == other.shape, where  # type: ignore[attr-defined]
        assert (one == other).all(), where
    elif is_dataclass(one):
        assert type(one) is type(other)
        for field in fields(one):
            if field.name != "rig":
                require_equal(getattr(one, field.name), getattr(other, field.name), f"{where}.{field.name}")
    elif isinstance(one, dict):
        assert list(one) == list(other), where  # type: ignore[call-overload]
        for key in one:
            require_equal(one[key], other[key], f"{where}[{key}]")  # type: ignore[index]
    elif isinstance(one, tuple):
        assert len(one) == len(other), where  # type: ignore[arg-type]
        for k, (a, b) in enumerate(zip(one, other, strict=True)):  # type: ignore[call-overload]
            require_equal(a, b, f"{where}[{k}]")
    else:
        assert one == other, where


@pytest.mark.parametrize(
    "hardware",
    [
        line_hardware(shortfalls=(Shortfall("lever 1", "bending", math.inf, "deeper"),), findings=(REMARK,)),
        plan_hardware(),
    ],
    ids=["line", "plan"],
)
def test_there_and_back(hardware):
    again = hardware_from_json(as_text(hardware), hardware.rig)
    require_equal(hardware, again, "hardware")
    assert again.rig is hardware.rig


def test_materials_of_one_name_are_told_apart():
    hardware = line_hardware()
    first = hardware.links[0]
    lighter = replace(first.material, density=2700.5)
    links = (replace(first, material=lighter), *hardware.links[1:])
    other = replace(hardware, links=links)
    assert "8.8 (2)" in hardware_object(other)["materials"]
    require_equal(other, hardware_from_json(as_text(other), other.rig), "hardware")


def test_a_rig_without_hardware_has_none():
    rig = make_rig([0.4, 1.9], [300.0, 200.0], brief=make_brief(pads=make_pads(count=2)))
    text = rig_to_json(check(rig))
    assert "hardware" not in json.loads(text)
    assert hardware_from_json(text, rig) is None


def test_published_keys():
    data = hardware_object(line_hardware())
    assert list(data) == [
        "side", "materials", "sections", "bodies", "links", "pads", "stacks", "heights_m", "marks", "masses",
        "shortfalls", "words", "findings",
    ]  # fmt: skip
    assert list(data["bodies"][0]) == [
        "piece", "build", "profiles", "gap_m", "overhang_m", "side_plate_m", "spacers_m", "outline_m",
        "old_pivots_m", "counterweights_kg", "section", "material",
    ]  # fmt: skip
    assert list(data["links"][0]) == [
        "link", "kind", "size", "width_m", "thickness_m", "stress_area_m2", "length_m", "adjust_m", "mass_kg",
        "material", "fitting_material", "pin_material", "upper", "lower",
    ]  # fmt: skip
    assert list(data["links"][0]["upper"]) == [
        "fitting", "to", "at", "pin_m", "hole_m", "pin_length_m", "inner_m", "outer_m", "gap_m", "radius_m",
    ]  # fmt: skip
    assert data["links"][2]["upper"]["to"] == "lever 1"
    assert data["bodies"][1]["counterweights_kg"] == {"A": 3.1}


def edited(*keys: object, value: object = None, drop: bool = False) -> str:
    data = json.loads(as_text(line_hardware()))
    place = data["hardware"]
    for key in keys[:-1]:
        place = place[key]
    if drop:
        del place[keys[-1]]
    else:
        place[keys[-1]] = value
    return json.dumps(data)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (edited("links", 2, "upper", "pin_m", drop=True), r"hardware.links\[2\].upper.pin_m: .*missing"),
        (edited("links", 2, "upper", "pin_m", value="8"), r"links\[2\].upper.pin_m: .*wrong kind: \"8\""),
        (edited("links", 2, "upper", "fitting", value="hook"), r"fitting: .*\"hook\" .accepted: eye, fork, stud, loop"),
        (edited("links", 3, "material", value="9.9"), r"links\[3\].material: this rig has no material of this name"),
        (edited("bodies", 1, "section", value="x"), r"bodies\[1\].section: this rig has no section of this name"),
        (edited("bodies", 1, "spacers_m", value=[True]), r"bodies\[1\].spacers_m: .*accepted: a list of numbers"),
        (edited("bodies", 1, "outline_m", value=[[1]]), r"outline_m: .*accepted: a list of pairs of numbers"),
        (edited("bodies", 1, "overhang_m", value=0.0), r"bodies\[1\].overhang_m: this size must be positive: 0.0"),
        (edited("bodies", 1, "piece", value="lever 9"), "hardware.bodies: the hardware lacks .*: lever 2"),
        (edited("side", value=0), "hardware.side: the side of the rig is not one: 0 .accepted: 1 or -1"),
        (
            edited("pads", value=[]),
            "hardware.pads: the hardware lacks what the rig has: pad 1, pad 2, pad 3 and 2 more",
        ),
        (edited("heights_m", "lever 9", value=1.0), "heights_m: the hardware has what the rig has not: lever 9"),
        (edited("heights_m", "lever 2", value=None), "heights_m.lever 2: .*accepted: a finite number"),
        (edited("marks", "link 4", drop=True), "hardware.marks: no part mark is given for link 4"),
        (edited("masses", "pad 2", drop=True), "hardware.masses: the hardware lacks what the rig has: pad 2"),
        (
            edited("links", 4, "upper", "at", value="pivot"),
            r"links\[4\].upper: a link is pinned .*: lever 2 pivot .accepted: lever 2 B",
        ),
        (edited("links", 1, "link", value=3), "hardware.links: the hardware lacks what the rig has: link 2"),
    ],
)
def test_hardware_that_is_not_the_rig_s(text, message):
    with pytest.raises(InputError, match=message):
        hardware_from_json(text, line_hardware().rig)


def test_every_number_may_be_asked_for_as_infinite_only_where_it_may_be():
    data = read_object('{"a": "infinite", "b": [1, "infinite"], "c": {"d": "infinite"}}')
    assert data.size("a") == math.inf
    assert data.sizes("b") == [1.0, math.inf]
    with pytest.raises(InputError, match=r"c\.d: .*accepted: a finite number"):
        data.amounts("c")


@pytest.mark.parametrize("links", ["rod", "strap", "webbing"])
def test_what_the_builder_makes_is_read_back(links):
    brief = make_brief(pads=make_pads(count=3), hardware=make_hardware(links=links, balance="counterweights"))
    built = build_hardware(make_rig([0.5, 1.1, 2.0], [1300.0, 900.0, 700.0], brief=brief))
    require_equal(built, hardware_from_json(as_text(built), built.rig), "hardware")


def test_what_the_builder_makes_of_plates_is_read_back():
    x, y, force = [0.3, 0.9, 0.5, 1.6], [0.1, -0.2, 0.3, 0.0], [300.0, 500.0, 400.0, 700.0]
    built = build_hardware(make_plan_rig(x, y, force, group=((1, 2, 3), 4)))
    require_equal(built, hardware_from_json(as_text(built), built.rig), "hardware")
