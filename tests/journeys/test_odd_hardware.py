"""Hardware at its limits: stock that bears nothing, pins wider than levers, odd names, rigs edited by hand."""

from __future__ import annotations

import json

import pytest
from journey import SMALL, files_under

HEADING = "section,kind,depth [mm],width [mm],web [mm],flange [mm],bar [m]\n"
STOCK = 'stock = "steel.csv"\n'


@pytest.fixture(name="design")
def _design(rigdesign, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)

    def run(keys, stock="", *options):
        (tmp_path / "fin.toml").write_text(f"{SMALL}\n[hardware]\n{keys}")
        (tmp_path / "steel.csv").write_text(HEADING + stock)
        return rigdesign("design", "fin.toml", *(options or ("--no-figures",)))

    return run


@pytest.mark.parametrize(
    ("keys", "stock"),
    [
        (STOCK, "thin,flat,200,0.1,,,6\n"),
        (STOCK + 'build = "hollow section"\n', "thick,hollow,20,20,9.99,,6\n"),
        ('rules = "EN 1993"\nload_factor = 1e9\n', ""),
    ],
    ids=["thin", "thick", "factor"],
)
def test_stock_that_bears_nothing_is_drawn_and_not_accepted(design, tmp_path, keys, stock):
    ended = design(keys, stock)
    assert (ended.code, ended.err) == (1, "")
    assert "Not accepted" in ended.out
    assert "strength 1 (failure)" in ended.out
    assert json.loads((tmp_path / "fin_rig" / "summary.json").read_text())["verdict"] == "not accepted"


@pytest.mark.parametrize(("keys", "stock"), [('pins = "900 mm"\n', ""), (STOCK, "wire,flat,8.5,1,,,6\n")])
def test_holes_wider_than_any_lever_leave_no_rig(design, tmp_path, keys, stock):
    ended = design(keys, stock)
    assert (ended.code, ended.err) == (1, "")
    assert "No rig (strength): the holes leave no steel of lever" in ended.out
    assert not (tmp_path / "fin_rig").exists()


def test_signs_that_the_font_lacks_are_drawn_as_boxes(design, tmp_path):
    ended = design(STOCK + 'revision = "第2版"\n', "板 60×8,flat,60,8,,,6\n板 90×12,flat,90,12,,,6\n", "--us")
    assert ended.code in (0, 1)
    assert ended.err == ""
    assert (tmp_path / "fin_rig" / "drawings.pdf").read_bytes().startswith(b"%PDF")


@pytest.mark.parametrize(("keys", "stock"), [('bar = "101 m"\n', ""), (STOCK, "long,flat,60,8,,,6000\n")])
def test_bars_longer_than_can_be_carried_are_a_slip(design, tmp_path, keys, stock):
    ended = design(keys, stock)
    assert (ended.code, ended.out) == (2, "")
    assert "bar: the bar is too long: " in ended.err
    assert "(accepted: up to 100.000 m)" in ended.err
    assert not (tmp_path / "fin_rig").exists()


BAD = {
    "yield": (("materials", "S355", "yields_Pa", 0), 0.0, "yields_Pa: these are no strengths of a material"),
    "modulus": (("materials", "S355", "modulus_Pa"), -2.1e11, "modulus_Pa: this size must be positive"),
    "strong": (("materials", "S355", "ultimates_Pa", 0), 1e90, "ultimates_Pa: these are no strengths of a material"),
    "ranges": (("materials", "S355", "limits_m", 0), -1.0, "limits_m: the ranges of thickness must rise from zero"),
    "profiles": (("bodies", 0, "profiles"), 0, "hardware.bodies[0].profiles: this build has another number"),
    "gap": (("bodies", 0, "gap_m"), -0.01, "hardware.bodies[0].gap_m: no such size can be"),
    "pin": (("links", 0, "upper", "pin_m"), 0, "hardware.links[0].upper.pin_m: this size must be positive"),
    "hole": (("links", 2, "lower", "hole_m"), -0.01, "hardware.links[2].lower.hole_m: this size must be positive"),
    "weight": (("links", 1, "mass_kg"), -1.0, "hardware.links[1].mass_kg: no such size can be"),
    "long": (("links", 1, "length_m"), 1e90, "hardware.links[1].length_m: no such size can be"),
    "cell": (("stacks", 0, "cell", "length_m"), 0, "hardware.stacks[0].cell.length_m: this size must be positive"),
    "height": (("heights_m", "jack 1"), 1e90, "hardware.heights_m.jack 1: nothing can be there"),
    "centre": (("masses", "lever 1", "v_m"), 1e90, "hardware.masses.lever 1.v_m: nothing can be there"),
}


@pytest.mark.parametrize("case", [*BAD, "section"])
def test_hardware_edited_by_hand_is_refused_by_what_is_wrong(design, rigdesign, tmp_path, case):
    design("")
    path = tmp_path / "fin_rig" / "rig.json"
    rig = json.loads(path.read_text())
    first = next(iter(rig["hardware"]["sections"]))
    place = ("sections", first, "modulus_m3"), 0.0, f"hardware.sections.{first}.modulus_m3: this size must be positive"
    keys, value, message = BAD.get(case, place)
    inner = rig["hardware"]
    for key in keys[:-1]:
        inner = inner[key]
    inner[keys[-1]] = value
    path.write_text(json.dumps(rig))
    before = files_under(tmp_path)
    ended = rigdesign("assess", "fin_rig", "--out", "again", "--no-figures")
    assert (ended.code, ended.out) == (2, "")
    assert message in ended.err
    assert ended.err.count("\n") == 1
    assert files_under(tmp_path) == before


def test_a_pivot_with_no_steel_beside_it_is_used_without_end(rigdesign, tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    (tmp_path / "mite.toml").write_text(
        '[specimen]\nsupport = "cantilever"\nroot = "0 m"\ntip = "20 mm"\n[[load]]\nshape = "elliptical"\n'
        'total = "5.4 kN"\n[pads]\ncount = 2\nlength = "0.5 mm"\n[hardware]\npins = "12 mm"\n'
    )
    ended = rigdesign("design", "mite.toml", "--no-figures")
    assert (ended.code, ended.err) == (1, "")
    assert " infinite " in ended.out
    assert "inf %" not in ended.out
