"""DXF files read back as a cutting machine reads them, and held against the tables of the same rig folder.

The format: Autodesk, DXF Reference (group codes of LWPOLYLINE and CIRCLE: 8 layer, 10 and 20 place, 40 radius, 70
closed).  The reader below is written for this test from the group codes and knows nothing of the writer.
"""

from __future__ import annotations

import csv
import io
import json
import math

import numpy as np
import pytest

from rigdesign.brief import brief_from_source
from rigdesign.brief.model import Source
from rigdesign.chain import design
from rigdesign.findings import Refusal
from rigdesign.report.writing import rig_files

EXACT = 1e-6  # [mm]: a micrometre's thousandth; tables have twelve digits
SAME_MASS = 1e-9  # relative: tables have twelve digits

LINE = """\
title = "Reed boat keel"
[specimen]
support = "cantilever"
root = "0.2 m"
tip = "3.4 m"
[[load]]
shape = "elliptical"
total = "7.3 kN"
[pads]
count = 7
[acceptance]
moment = "5 %"
shear = "30 %"
"""

SURFACE = """\
title = "Lagoon fence panel"
[specimen]
support = "cantilever"
root = "0 m"
tip = "2.4 m"
outline = "plan.csv"
[[load]]
pressure = "map.csv"
[pads]
count = 6
places = "hard points"
table = "points.csv"
[levers]
plates = true
[acceptance]
moment = "25 %"
shear = "60 %"
torsion = "40 %"
"""

TEXTS = {
    "plan.csv": "x [m],y [m]\n0,-0.5\n2.4,-0.4\n2.4,0.3\n0,0.6\n",
    "map.csv": "x [m],y [m],pressure [Pa]\n0,-0.5,2100\n2.4,-0.5,1300\n2.4,0.6,1100\n0,0.6,2600\n",
    "points.csv": "x [m],y [m]\n0.3,-0.3\n0.35,0.35\n1.1,-0.25\n1.2,0.25\n2.0,-0.25\n2.05,0.15\n",
}


def designed(text: str, hardware: str) -> dict[str, bytes]:
    source = Source("brief.toml", {"brief.toml": f"{text}[hardware]\n{hardware}", **TEXTS})
    answer = design(brief_from_source(source))
    assert not isinstance(answer, Refusal), answer
    return rig_files(answer, figures=False)


FOLDERS = {
    "twin flats": (LINE, 'play = "0.7 mm"\n', 0.7),
    "few marks": (LINE, 'part_marks = "few"\nmark_tolerance = "60 mm"\n', 0.5),
    "hollow sections": (LINE.replace("7.3 kN", "146 kN"), 'build = "hollow section"\n', 0.5),
    "plates": (SURFACE, 'grade = "6082-T6"\n', 0.5),
}


@pytest.fixture(params=FOLDERS, name="folder", scope="module")
def _folder(request):
    text, hardware, play = FOLDERS[request.param]
    return designed(text, hardware), play


def entities(content: bytes, kind: str, layer: str) -> list[dict[int, list[str]]]:
    """All entities of a kind on a layer: their values by group code."""
    lines = content.decode("utf-8").splitlines()
    pairs = [(int(code), value.strip()) for code, value in zip(lines[0::2], lines[1::2], strict=True)]
    start = pairs.index((2, "ENTITIES"))
    end = pairs.index((0, "ENDSEC"), start)
    found: list[dict[int, list[str]]] = []
    for code, value in pairs[start + 1 : end]:
        if code == 0:
            found.append({0: [value]})
        elif found:
            found[-1].setdefault(code, []).append(value)
    return [entity for entity in found if entity[0] == [kind] and entity[8] == [layer]]


def circles(content: bytes, layer: str) -> np.ndarray:
    """x, y and diameter of each circle [mm], by x."""
    rows = [
        [float(entity[10][0]), float(entity[20][0]), 2 * float(entity[40][0])]
        for entity in entities(content, "CIRCLE", layer)
    ]
    return np.array(sorted(rows)).reshape(-1, 3)


def outline(content: bytes) -> np.ndarray:
    (entity,) = entities(content, "LWPOLYLINE", "OUTLINE")
    assert int(entity[70][0]) & 1, "the outline is not closed"
    return np.array([[float(x), float(y)] for x, y in zip(entity[10], entity[20], strict=True)])


def table(folder: dict[str, bytes], name: str) -> list[dict[str, str]]:
    return list(csv.DictReader(io.StringIO(folder[name].decode())))


def pins(folder: dict[str, bytes]) -> dict[str, float]:
    """Diameter of the pin or of the stud [mm] in every hole, by "lever 5 A", from the schedules alone."""
    found = {
        place: float(row["diameter_mm"]) for row in table(folder, "pins.csv") for place in row["where"].split("; ")
    }
    for row in table(folder, "links.csv"):
        if row["upper_fitting"] == "stud":
            found[f"{row['from']} {row['from_hole']}"] = float(row["size"].removeprefix("M"))
        if row["lower_fitting"] == "stud":
            found[f"{row['to']} {row['to_hole']}"] = float(row["size"].removeprefix("M"))
    return found


def test_holes_are_where_the_table_has_them_and_as_large_as_pin_and_play(folder):
    files, play = folder
    known = pins(files)
    for lever in table(files, "levers.csv"):
        name = f"dxf/{lever['mark']}.dxf"
        if name not in files:
            continue
        holes = [row for row in table(files, "holes.csv") if row["lever"] == lever["lever"]]
        first = next(row for row in holes if row["hole"] == "A")
        wanted = np.array(sorted(
            [1000 * (float(row["u_m"]) - float(first["u_m"])), 1000 * (float(row["v_m"]) - float(first["v_m"])),
             known[f"lever {row['lever']} {row['hole']}"] + play]
            for row in holes
        ))  # fmt: skip
        drawn = circles(files[name], "HOLES")
        # both seen from the first hole in x: where the datum is, the next test looks at
        assert drawn.shape == wanted.shape
        assert np.allclose(drawn[:, :2] - drawn[0, :2], wanted[:, :2] - wanted[0, :2], rtol=0, atol=EXACT)
        assert np.allclose(drawn[:, 2], wanted[:, 2], rtol=0, atol=EXACT)


def test_side_plates_have_their_hole_in_the_middle(folder):
    files, play = folder
    for row in table(files, "parts.csv"):
        if "_side" not in row["mark"]:
            continue
        content = files[f"dxf/{row['mark']}.dxf"]
        ((x, y, diameter),) = circles(content, "HOLES")
        corners = outline(content)
        assert [x, y] == pytest.approx(corners.mean(axis=0), abs=EXACT)
        lever = next(lever for lever in table(files, "levers.csv") if lever["mark"] == row["mark"].split("_")[0])
        sizes = {size + play for place, size in pins(files).items() if place.startswith(f"lever {lever['lever']} ")}
        assert min(abs(diameter - size) for size in sizes) < EXACT


def test_drill_list_and_dxf_count_from_one_datum(folder):
    files, _ = folder
    for mark in {row["mark"] for row in table(files, "drill_list.csv")}:
        if f"dxf/{mark}.dxf" not in files:
            continue
        content = files[f"dxf/{mark}.dxf"]
        assert outline(content)[:, 0].min() == pytest.approx(0.0, abs=EXACT)
        for layer, is_spacer in (("HOLES", False), ("SPACERS", True)):
            rows = [
                [float(row[key]) for key in ("from_datum_mm", "across_mm", "diameter_mm")]
                for row in table(files, "drill_list.csv")
                if row["mark"] == mark and (row["hole"] == "spacer") is is_spacer
            ]
            assert np.allclose(circles(content, layer), np.array(sorted(rows)).reshape(-1, 3), rtol=0, atol=EXACT)


def test_area_times_thickness_times_density_is_the_mass(folder):
    """Net of holes for pins and bolts: what lies on the scales."""
    files, _ = folder
    density = {"S355": 7850e-9, "6082-T6": 2700e-9}  # [kg/mm³], EN 1993-1-1 3.2.6 and EN 1999-1-1 3.2.5
    for part in table(files, "parts.csv"):
        if part["kind"] not in ("lever", "plate") or f"dxf/{part['mark']}.dxf" not in files:
            continue
        content = files[f"dxf/{part['mark']}.dxf"]
        x, y = outline(content).T
        area = 0.5 * abs(float(x @ np.roll(y, -1) - y @ np.roll(x, -1)))
        holes = np.concatenate([circles(content, layer) for layer in ("HOLES", "SPACERS")])
        area -= math.pi / 4 * float((holes[:, 2] ** 2).sum())
        (said,) = [entity[1][0] for entity in entities(content, "TEXT", "MARK") if "mm thick" in entity[1][0]]
        thickness = float(said.split(", ")[1].split()[0])
        count = 2 if part["section"].startswith("2 ×") else 1
        mass = count * area * thickness * density[part["material"]]
        assert mass == pytest.approx(float(part["mass_kg"]), rel=SAME_MASS)


def test_a_profile_and_its_side_plates_make_the_lever(folder):
    """What is left of a lever's mass without all that is put on it is its section's mass, net of holes in the webs."""
    files, play = folder
    hardware = json.loads(files["rig.json"])["hardware"]
    known = pins(files)
    parts = {row["mark"]: row for row in table(files, "parts.csv")}
    for body in hardware["bodies"]:
        if body["build"] == "plate":
            continue
        section = hardware["sections"][body["section"]]
        part = parts[hardware["marks"][body["piece"]]]
        holes = [(size + play) / 1000 for place, size in known.items() if place.startswith(f"{body['piece']} ")]
        # bolts M6, M8 or M12 by the depth, in medium holes of ISO 273
        bore = 0.0066 if section["depth_m"] <= 0.035 else 0.009 if section["depth_m"] <= 0.055 else 0.0135
        holes += [bore] * len(body["spacers_m"])
        drilled = 2 * section["web_m"] * sum(math.pi / 4 * hole**2 for hole in holes)
        density = hardware["materials"][body["material"]]["density_kg_m3"]
        mass = body["profiles"] * section["mass_kg_m"] * float(part["length_m"]) - drilled * density
        assert mass == pytest.approx(float(part["mass_kg"]), rel=SAME_MASS)


def test_every_flat_and_plate_has_its_file(folder):
    files, _ = folder
    marks = {
        row["mark"]
        for row in table(files, "parts.csv")
        if row["kind"] == "plate" or (row["kind"] == "lever" and "flat" in row["section"])
    }
    assert marks == {name.removeprefix("dxf/").removesuffix(".dxf") for name in files if name.startswith("dxf/")}
    assert marks
