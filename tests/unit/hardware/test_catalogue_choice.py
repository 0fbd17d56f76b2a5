"""What the catalogue offers: the brief's own stock first, in rising order, a source in every row."""

from __future__ import annotations

from math import isfinite

import pytest
from factories import make_hardware

from rigdesign.brief.model_hardware import MachineRow, StockRow
from rigdesign.errors import InputError
from rigdesign.hardware.catalogue import (
    cells,
    flat,
    grades,
    hollow,
    jacks,
    material,
    sections,
    smallest,
    threads,
    webbings,
    with_density,
)
from rigdesign.hardware.catalogue.reading import rows
from rigdesign.words import GRADES, PIN_GRADES, STANDARD_GRAVITY

KINDS = ("flat", "channel", "hollow", "plate")
TABLES = ("flats", "channels", "hollows", "plates", "materials", "threads", "webbings", "machines")


def stock_row(name: str, kind: str, depth: float, width: float, web: float, flange: float, **rest) -> StockRow:
    """A row of a brief's stock, sizes in mm."""
    sizes = (size / 1e3 for size in (depth, width, web, flange))
    return StockRow(name, kind, *sizes, **({"bar": None, "where": f"stock.csv, {name}"} | rest))


OWN = (
    stock_row("flat 65×12", "flat", 65, 12, 0, 0, bar=4.0),
    stock_row("flat 40×8", "flat", 40, 8, 0, 0),
    stock_row("box 90×45×4", "hollow", 90, 45, 4, 4),
    stock_row("U 100", "channel", 100, 50, 6, 8.5),
    stock_row("U 90", "channel", 90, 45, 5, 8),
)


@pytest.mark.parametrize("kind", KINDS)
def test_lightest_first_and_all_there(kind):
    found = sections(make_hardware(), kind)
    masses = [round(s.mass, 9) for s in found]  # 0.005 × 0.04 and 0.01 × 0.02 differ in the last bit
    assert masses == sorted(masses)
    assert len({s.name for s in found}) == len(found) > 10
    for s in found:
        numbers = (
            s.depth,
            s.width,
            s.web,
            s.flange,
            s.area,
            s.inertia,
            s.inertia_weak,
            s.torsion,
            s.modulus,
            s.plastic,
        )
        assert all(isfinite(value) and value > 0 for value in numbers)
        assert s.kind == kind
        assert s.mass == pytest.approx(7850 * s.area)
        assert s.bar == (3.0 if kind == "plate" else 6.0)
        assert s.source


def test_of_equally_heavy_ones_the_deeper_comes_first():
    names = [s.name for s in sections(make_hardware(), "flat")]
    assert names.index("flat 80×10") + 1 == names.index("flat 40×20")


def test_a_plates_thickness_is_all_its_sizes_and_its_mass_is_per_area():
    plate = smallest(sections(make_hardware(), "plate"), lambda s: s.depth >= 0.013)
    assert (plate.name, plate.width, plate.web, plate.flange) == ("plate 15", 0.015, 0.015, 0.015)
    assert plate.mass == pytest.approx(0.015 * 7850)
    assert plate.plastic == pytest.approx(0.015**2 / 4)  # of a strip 1 m wide


@pytest.mark.parametrize(("kind", "names"), [("flat", ["flat 40×8", "flat 65×12"]), ("hollow", ["box 90×45×4"])])
def test_the_briefs_own_stock_takes_the_place_of_the_catalogue(kind, names):
    assert [s.name for s in sections(make_hardware(stock=OWN), kind)] == names


def test_a_kind_that_the_stock_does_not_hold_comes_from_the_catalogue():
    assert sections(make_hardware(stock=OWN), "plate") == sections(make_hardware(), "plate")


def test_own_profiles_have_their_own_sizes_bars_and_properties():
    rules = make_hardware(stock=OWN, bar=7.5)
    small, large = sections(rules, "flat")
    assert (large.depth, large.width, large.web, large.flange, large.bar) == (0.065, 0.012, 0.012, 0.012, 4.0)
    assert (small.bar, small.inertia) == (7.5, flat(0.04, 0.008).inertia)
    (box,) = sections(rules, "hollow")
    assert box.torsion == hollow(0.09, 0.045, 0.004, 0.008).torsion
    assert box.source == "the brief's stock"


def test_an_own_channel_of_a_listed_size_has_the_tables_properties():
    table = next(s for s in sections(make_hardware(), "channel") if s.name == "UPN 100")
    u90, u100 = sections(make_hardware(stock=OWN), "channel")
    assert (u100.area, u100.plastic, u100.torsion) == (table.area, table.plastic, table.torsion)
    assert u100.source == "the brief's stock, properties of UPN 100"
    assert (u90.area, u90.source) == (pytest.approx(2 * 45e-3 * 8e-3 + 74e-3 * 5e-3), "the brief's stock")


def test_masses_follow_the_density():
    steel = sections(make_hardware(), "hollow")[0]
    assert sections(make_hardware(grade="6082-T6"), "hollow")[0].mass == pytest.approx(2700 * steel.area)
    assert sections(make_hardware(density=8010.0), "hollow")[0].mass == pytest.approx(8010 * steel.area)
    assert sections(make_hardware(), "hollow", density=7700.0)[0].mass == pytest.approx(7700 * steel.area)


def test_every_grade_that_a_brief_may_name_is_there():
    assert set(GRADES) | set(PIN_GRADES) | {"8.8"} == set(grades())
    for name in grades():
        grade = material(name)
        assert list(grade.limits) == sorted(set(grade.limits))
        assert len(grade.limits) == len(grade.yields) == len(grade.ultimates)
        assert all(0 < fy < fu for fy, fu in zip(grade.yields, grade.ultimates, strict=True))
        assert list(grade.yields) == sorted(grade.yields, reverse=True) or name == "6082-T6"


def test_an_unknown_grade_says_which_there_are():
    with pytest.raises(InputError, match=r"no such grade: S350 \(accepted: S235, S275, S355, 6082-T6, C45"):
        material("S350")


def test_a_density_of_ones_own_changes_nothing_else():
    steel = material("S275")
    heavy = with_density(steel, 7900.0)
    assert (heavy.density, heavy.yields, steel.density) == (7900.0, steel.yields, 7850.0)
    assert with_density(steel, None) is steel


def test_threads_and_webbings_rise():
    for sizes in ([t.nominal for t in threads()], [t.stress_area for t in threads()], [t.root for t in threads()]):
        assert sizes == sorted(sizes)
    assert (threads()[0].name, threads()[-1].name) == ("M8", "M64")
    assert [w.breaking for w in webbings()] == sorted(w.breaking for w in webbings())
    assert webbings()[1].name == "60 mm webbing"
    assert webbings()[1].breaking == pytest.approx(7 * 2000 * STANDARD_GRAVITY)


@pytest.mark.parametrize(("offer", "kind"), [(jacks, "jack"), (cells, "load cell")])
def test_machines_rise_in_every_respect(offer, kind):
    found = offer(make_hardware())
    assert [m.force / 1e3 for m in found] == [5, 10, 25, 50, 100, 160, 250, 500, 1000, 2000]
    for sizes in ([m.length for m in found], [m.mass for m in found], [m.pin for m in found]):
        assert sizes == sorted(sizes)
    assert all((m.stroke > 0) == (kind == "jack") for m in found)
    assert smallest(found, lambda m: m.force >= 26e3).name == f"{kind} 50 kN"
    # the pin in double shear at the rated force, mean stress: no more than a common pin bears twice over
    assert all(m.force / (2 * 3.1416 / 4 * m.pin**2) < 140e6 for m in found)


def test_own_machines_take_the_place_of_the_catalogue_in_rising_order():
    strong, weak = MachineRow("big", 80e3, 0.6, 0.2, 40.0, 0.03), MachineRow("small", 12e3, 0.4, 0.2, 9.0, 0.016)
    found = jacks(make_hardware(jacks=(strong, weak)))
    assert [m.name for m in found] == ["small", "big"]
    assert (found[1].force, found[1].length, found[1].stroke, found[1].mass, found[1].pin) == (
        80e3,
        0.6,
        0.2,
        40.0,
        0.03,
    )
    assert cells(make_hardware(jacks=(strong,))) == cells(make_hardware())


@pytest.mark.parametrize("table", TABLES)
def test_every_row_of_a_table_is_whole_and_different(table):
    found = rows(table)
    assert len({tuple(row.values()) for row in found}) == len(found) > 5
    for row in found:
        assert None not in row  # no cell beyond the headings
        assert all(isinstance(text, str) and text for text in row.values())


def test_nothing_fits():
    assert smallest(threads(), lambda thread: thread.nominal >= 0.065) is None
