"""[hardware] as it is read: every key, its default, and its unit."""

from __future__ import annotations

import math
import tomllib

import jsonschema
import pytest
from factories import make_hardware

from rigdesign.brief import brief_from_source, schema
from rigdesign.brief.model import Brief
from rigdesign.units import KINDS, quantity


def with_hardware(read, lines: str, **tables: str) -> Brief:
    return read(("", f"[hardware]\n{lines}"), **tables)


def test_without_hardware_every_key_has_its_documented_default(read) -> None:
    assert read().hardware == make_hardware()
    assert with_hardware(read, "").hardware == make_hardware()
    assert read().keep is None


@pytest.mark.parametrize(
    ("line", "field", "value"),
    [
        ('headroom = "1.9 m"', "headroom", 1.9),
        ('clearance = "1 in"', "clearance", 0.0254),
        ('clearance = "0 mm"', "clearance", 0.0),
        ('build = "hollow section"', "builds", ("hollow section",)),
        ('build = ["twin channels", "twin flats"]', "builds", ("twin channels", "twin flats")),
        ('grade = "6082-T6"', "grade", "6082-T6"),
        ('pin_grade = "C45"', "pin_grade", "C45"),
        ("design_factor = 2.6", "design_factor", 2.6),
        ("design_factor = 1", "design_factor", 1.0),
        ("over_people = true", "design_factor", 3.0),
        ("over_people = true\ndesign_factor = 5.0", "design_factor", 5.0),
        ("over_people = false", "design_factor", 2.0),
        ('rules = "EN 1993"', "load_factor", 1.5),
        ('rules = "EN 1993"\nload_factor = 1.7', "load_factor", 1.7),
        ('rules = "EN 1993"\nover_people = false', "rules", "EN 1993"),
        ('rules = "AISC 360"', "rules", "AISC 360"),
        ("overshoot = 1", "overshoot", 1.0),
        ('pins = "8, 10, 12 mm"', "pins", (0.008, 0.01, 0.012)),
        ('pins = ["0.5 in", "20 mm"]', "pins", (0.0127, 0.02)),
        ('pins = "16 mm"', "pins", (0.016,)),
        ('play = "0 mm"', "play", 0.0),
        ('play = "1 mm"', "play", 0.001),
        ('links = "strap"', "links", "strap"),
        ('links = "webbing"', "links", "webbing"),
        ('link_length = "350 mm"', "link_length", 0.35),
        ('turn = "20 deg"', "turn", math.radians(20)),
        ('swing = "0.1 rad"', "swing", 0.1),
        ('deflection = "1.5 %"', "deflection", 0.015),
        ('density = "7.7 g/cm^3"', "density", 7700.0),
        ('density = "0.1 lb/in³"', "density", 0.1 * 0.45359237 / 0.0254**3),
        ('pad_mass = "2.5 lb"', "pad_mass", 2.5 * 0.45359237),
        ('pad_mass = "0 kg"', "pad_mass", 0.0),
        ('pad_height = "85 mm"', "pad_height", 0.085),
        ('part_marks = "few"', "marks", "few"),
        ('part_marks = "few"\nmark_tolerance = "4 mm"', "mark_tolerance", 0.004),
        ('balance = "counterweights"', "balance", "counterweights"),
        ('balance = "none"', "balance", "none"),
        ('bar = "20 ft"', "bar", 6.096),
        ('kerf = "0 mm"', "kerf", 0.0),
        ('revision = "C, as built"', "revision", "C, as built"),
    ],
)
def test_each_key_changes_its_own_field_alone(read, line: str, field: str, value: object) -> None:
    expected = make_hardware() if "rules" not in line else make_hardware(rules=tomllib.loads(line)["rules"])
    if "few" in line:
        expected = make_hardware(marks="few")
    brief = with_hardware(read, line)
    found = getattr(brief.hardware, field)
    if isinstance(value, float):
        # what is quoted here has been multiplied out once more than what is read
        assert found == pytest.approx(value, rel=1e-15)
    else:
        assert found == value
    others = {name: getattr(brief.hardware, name) for name in vars(brief.hardware) if name != field}
    assert others == {name: getattr(expected, name) for name in others}
    jsonschema.Draft202012Validator(schema()).validate(tomllib.loads(brief.source.texts["foil.toml"]))


def test_straps_join_pulling_line_rigs_and_webbing_plan_rigs_too(read, read_plan) -> None:
    assert with_hardware(read, 'links = "strap"\nbuild = ["twin channels", "twin flats"]').hardware.links == "strap"
    assert with_hardware(read_plan, 'links = "webbing"').hardware.links == "webbing"


def test_a_pushing_rig_has_rods(read) -> None:
    brief = read(("count = 6", 'count = 6\naction = "push"'), ("", '[hardware]\nlinks = "rod"'))
    assert brief.hardware.links == "rod"


@pytest.mark.parametrize("written", ["7850 kg/m^3", "7.85 t/m³", "7850 kg/m3", "7.85 g/cm^3"])
def test_a_density_is_written_in_many_ways(written: str) -> None:
    assert quantity(written, "density") == pytest.approx(7850.0, rel=1e-15)
    assert KINDS["density"].article == "a density"


def test_hardware_and_its_tables_are_read_again_from_the_kept_texts(read) -> None:
    brief = with_hardware(
        read,
        'stock = "steel.csv"\ncells = "cells.csv"\nsurface = "top.csv"',
        steel="section,kind,depth [mm],width [mm]\nFL 60x8,flat,60,8\n",
        cells="cell,force [kN],length [mm],mass [kg],pin [mm]\nC 20,20,110,1.3,20\n",
        top="x [m],z [mm]\n0.2,30\n3.4,12\n",
    )
    assert {"steel.csv", "cells.csv", "top.csv"} < set(brief.source.texts)
    again = brief_from_source(brief.source).hardware
    assert (again.stock, again.cells) == (brief.hardware.stock, brief.hardware.cells)
    assert again.surface is not None
    assert again.surface.z.tolist() == [0.03, 0.012]
