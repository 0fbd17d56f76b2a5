"""The brief's file as it is laid out: every table and key with its default and description.

The JSON Schema is generated from these models.  They check the structure and each value by itself; what concerns
several keys at once, and the tables, is checked in `rigdesign.brief.build`.  Values are in SI once read.
"""

from __future__ import annotations

from typing import Annotated

from pydantic import Discriminator, Tag

from rigdesign.brief import fields as f
from rigdesign.brief.keys import Table
from rigdesign.brief.keys import key as _key
from rigdesign.brief.keys import needed as _needed
from rigdesign.brief.layout_hardware import HardwareTable, KeepTable
from rigdesign.brief.surface import fields as plan


class SpecimenTable(Table):
    """The thing under test."""

    support: f.SupportWord = _needed("How the specimen is held.")
    root: f.Length | None = _key("Cantilever: station at which it is held.")
    tip: f.Length | None = _key("Cantilever: station of its free end, outboard of the root.")
    ends: f.TwoLengths | None = _key("Two supports: stations of the two ends of the specimen.")
    supports: f.TwoLengths | None = _key("Two supports: stations of the supports.")
    weight: f.Text | None = _key(
        "Table of the specimen's mass: x [m], mass [kg/m]. The target then includes its weight."
    )
    point_masses: f.Text | None = _key("Table of point masses: x [m], mass [kg].")
    gravity: f.GravityWord = _key("Gravity acts against z (along −z) or with it (along +z).", "against")
    outline: f.Text | None = _key("Table of the outline in plan, which makes it a plan rig: corners x [m], y [m].")
    axis: plan.OneLine | None = _key("Plan rigs: reference axis, from end to end; default: y = 0.")
    cut: plan.CutWord | None = _key('Plan rigs: how V, M and T are cut; default "square to x".')
    weight_line: plan.OneLine | None = _key("Plan rigs: where the weight acts; default: on the axis.")


class LoadEntry(Table):
    """What every load has."""

    times: f.Factor = _key("Factor on this load.", 1.0)


class Stretch(LoadEntry):
    """A load over a stretch of the span."""

    from_: f.Length | None = _key("Inboard end of the load; default: that of the specimen.", alias="from")
    to: f.Length | None = _key("Outboard end of the load; default: that of the specimen.")


class ShapeEntry(Stretch):
    """A running load of a named shape."""

    shape: f.ShapeWord = _needed("Name of the shape.")
    total: f.Force | None = _key("Sum of the load along z; every shape but linear needs it.")
    start: f.RunningLoad | None = _key("Linear: running load at the inboard end.")
    end: f.RunningLoad | None = _key("Linear: running load at the outboard end.")
    greatest: f.EndWord | None = _key('Triangular: the end with the greatest load; default "root".')
    exponent: f.PositiveNumber | None = _key("Power: exponent of (1 − ξ).")
    chord: f.Text | None = _key("Schrenk: table of the chord: x [m], chord [m].")
    line: plan.OneLine | None = _key("Plan rigs: where the load acts; default: on the axis.")


class TableEntry(LoadEntry):
    """A running load as a table."""

    table: f.Text = _needed("Table of the running load: x [m], load [N/m].")
    line: plan.OneLine | None = _key("Plan rigs: where the load acts; default: on the axis.")


class InternalEntry(LoadEntry):
    """A table of shear and moment, cantilevers only."""

    internal: f.Text = _needed("Table: x [m], shear [N], moment [N*m]; plan rigs: torsion [N*m] too.")
    reverse: f.Columns = _key("Columns whose sign is opposite to the conventions.", [])
    stations_from: f.OriginWord | None = _key('"tip" if x counts from the tip inboard, rows in that order.')


class ForcesEntry(LoadEntry):
    """A table of point loads."""

    forces: f.Text = _needed("Table of point loads: x [m], force [N]; plan rigs: y [m] too.")


class PointEntry(LoadEntry):
    """One point load."""

    point: f.Force = _needed("A point load along z.")
    at: plan.PlaceOrStation = _needed("Station of the point load; plan rigs: or x and y.")


class InertiaEntry(LoadEntry):
    """Inertia of the specimen's weight table."""

    inertia: f.Factor = _needed("Load factor: so many g times the weight table, along +z when positive.")


class PressureEntry(LoadEntry):
    """A pressure map; plan rigs."""

    pressure: f.Text = _needed("Plan rigs: table of a pressure map: x [m], y [m], pressure [Pa].")


class TorqueEntry(LoadEntry):
    """A running torque as a table; plan rigs."""

    torque: f.Text = _needed("Plan rigs: table of a running torque: x [m], torque [N*m/m].")


class CoupleEntry(LoadEntry):
    """One point couple; plan rigs."""

    couple: plan.Couple = _needed("Plan rigs: a point couple, positive where it raises the side of greater y.")
    at: f.Length = _needed("Station of the couple.")


LOAD_ENTRIES: dict[str, type[LoadEntry]] = {
    "shape": ShapeEntry,
    "table": TableEntry,
    "internal": InternalEntry,
    "forces": ForcesEntry,
    "point": PointEntry,
    "inertia": InertiaEntry,
    "pressure": PressureEntry,
    "torque": TorqueEntry,
    "couple": CoupleEntry,
}
"""The kinds of [[load]], by the key that tells them apart."""


def load_kind(value: object) -> str | None:
    """Return the one key that tells what kind of load this is; None where there is none, or more than one."""
    kinds = [kind for kind in LOAD_ENTRIES if isinstance(value, dict) and kind in value]
    return kinds[0] if len(kinds) == 1 else None


LoadUnion = Annotated[
    Annotated[ShapeEntry, Tag("shape")]
    | Annotated[TableEntry, Tag("table")]
    | Annotated[InternalEntry, Tag("internal")]
    | Annotated[ForcesEntry, Tag("forces")]
    | Annotated[PointEntry, Tag("point")]
    | Annotated[InertiaEntry, Tag("inertia")]
    | Annotated[PressureEntry, Tag("pressure")]
    | Annotated[TorqueEntry, Tag("torque")]
    | Annotated[CoupleEntry, Tag("couple")],
    Discriminator(load_kind),
]


class TestTable(Table):
    """How the test is run."""

    __test__ = False  # not a test, whatever its name says to pytest
    peak: f.Percentage = _key("Highest load of the test, of the brief's load; limits are held at it.", "100 %")


class PadsTable(Table):
    """The pads."""

    count: f.Count | None = _key('Number of pads, or "fewest". Fixed places: default all stations.')
    places: f.PlacesWord = _key("Where pads may sit.", "free")
    stations: f.Lengths | None = _key("Stations of fixed pads or hard points, in order.")
    table: f.Text | None = _key("Table of the stations instead: x [m]; plan rigs: y [m] and turn [deg] too.")
    spars: plan.Lines | None = _key("Plan rigs: lines whose crossings with the ribs are the places.")
    ribs: plan.Ribs | None = _key("Plan rigs: the ribs, by their stations or as lines.")
    rows: plan.Lines | None = _key("Plan rigs, free places: lines on which pads may sit; default: anywhere.")
    length: f.PositiveLength | None = _key("Footprint along x; default: a point.")
    width: f.PositiveLength | None = _key("Footprint across.")
    turn: plan.Turn | None = _key('Plan rigs: direction of the length: "along x" (default), "along axis", or an angle.')
    edge: f.LengthOrZero | None = _key("Plan rigs: least distance from footprint to outline; default: 0 m.")
    gap: f.LengthOrZero = _key("Least clear distance between two footprints.", "0 m")
    largest_force: f.PositiveForce | None = _key("Most that a pad may carry at the peak of the test.")
    least_force: f.ForceOrZero = _key("Least that a pad must carry at the peak of the test.", "0 N")
    largest_pressure: f.PositivePressure | None = _key("Most pressure under a footprint at the peak of the test.")
    keep_out: f.Pairs = _key("Stretches where no pad may sit: a list of pairs of stations.", [])
    keep_out_areas: f.Text | None = _key("Plan rigs: table of areas where no pad may sit: area, x [m], y [m].")
    action: f.ActionWord = _key("pull: links in tension; push: in compression.", "pull")
    aim: f.AimWord = _key(
        "closest: least band use, then even forces within `ease`; even: as even as the bands allow.", "closest"
    )
    ease: f.PercentageOrZero = _key("How much band use may be given up for even forces, of the least.", "2 %")


class LeversTable(Table):
    """The levers."""

    drill_step: f.PositiveLength = _key("Arms are whole multiples of it.", "1 mm")
    ratio_limit: f.Ratio = _key("Greatest ratio of longer to shorter arm.", 5.0)
    shortest_arm: f.LengthOrZero = _key("Shortest arm; default: none.", "0 m")
    longest: f.PositiveLength | None = _key("Greatest distance between outer holes; default: none.")
    tiers: f.Whole | None = _key("Most levers between jack and pad; default: none.")
    grouping: f.Groups | None = _key("Who hangs with whom, nested pairs of pad numbers; otherwise it is found.")
    plates: plan.Flag | None = _key("Plan rigs: whether three-point plates are allowed; default: false.")
    pair: plan.PairWord | None = _key('Plan rigs: which pads hang together first; default "any".')
    clearance: f.LengthOrZero | None = _key("Plan rigs: least clearance between pieces of a tier; default 30 mm.")


class JackTable(Table):
    """Where the jack can stand; default: at the resultant."""

    at: plan.PlaceOrStation | None = _key("Its station; plan rigs: or x and y.")
    step: f.PositiveLength | None = _key("It can stand at multiples of this, counted from x = 0; plan rigs: y too.")


class Bands(Table):
    """Accepted errors."""

    moment: f.MomentBand | None = _key("Band on the moment, both sides.")
    moment_under: f.MomentBand | None = _key("Band on under-test of the moment; overrides `moment`.")
    moment_over: f.MomentBand | None = _key("Band on over-test of the moment; overrides `moment`.")
    shear: f.ShearBand | None = _key("Band on the shear, both sides.")
    shear_under: f.ShearBand | None = _key("Band on under-test of the shear; overrides `shear`.")
    shear_over: f.ShearBand | None = _key("Band on over-test of the shear; overrides `shear`.")
    torsion: f.MomentBand | None = _key("Plan rigs: band on the torsion, both sides.")
    torsion_under: f.MomentBand | None = _key("Band on under-test of the torsion; overrides `torsion`.")
    torsion_over: f.MomentBand | None = _key("Band on over-test of the torsion; overrides `torsion`.")
    of: f.OfWord | None = _key("What percentages are of: the peak of the target's curve (default) or its local value.")


class RegionTable(Bands):
    """Accepted errors between two stations; what is not named here holds as for the whole span."""

    from_: f.Length = _needed("Inboard end of the region.", alias="from")
    to: f.Length = _needed("Outboard end of the region.")


class AcceptanceTable(Bands):
    """Accepted errors; default: moment 2 % of the peak of the target's curve, and on plan rigs torsion 5 %."""

    across: plan.AcrossBand | None = _key("Plan rigs, panels: band on shear and moment cut square to y, both sides.")
    across_under: plan.AcrossBand | None = _key("Band on under-test of what is cut across; overrides `across`.")
    across_over: plan.AcrossBand | None = _key("Band on over-test of what is cut across; overrides `across`.")
    share: f.Percentage | None = _key(
        "Plan rigs, panels: how far a pad's force may be from its share of the load around it, of that share; "
        "default: 25 % where `across` is given."
    )
    region: list[RegionTable] = _key("Regions with bands of their own.", [])


class BriefFile(Table):
    """What is to be tested and within which limits."""

    title: f.Title | None = _key("Title of the test; default: the name of the file.")
    specimen: SpecimenTable = _needed("The thing under test.")
    load: list[LoadUnion] = _needed("The loads; several add up to the target.", min_length=1)
    test: TestTable = _key("How the test is run.", {})
    pads: PadsTable = _needed("The pads.")
    levers: LeversTable = _key("The levers.", {})
    jack: JackTable = _key("Where the jack can stand.", {})
    acceptance: AcceptanceTable | None = _key("Accepted errors.")
    hardware: HardwareTable = _key("What the rig is made of.", {})
    keep: KeepTable | None = _key("A rig whose steel is cut: its pads and levers stay.")


TABLES: dict[str, type[Table]] = {
    "specimen": SpecimenTable,
    "test": TestTable,
    "pads": PadsTable,
    "levers": LeversTable,
    "jack": JackTable,
    "acceptance": AcceptanceTable,
    "hardware": HardwareTable,
    "keep": KeepTable,
}
"""The single tables of a brief by name."""

_SIDED = ("", "_under", "_over")
PLAN_KEYS = {
    "specimen": {"axis", "cut", "weight_line"},
    "load": {"line", "pressure", "torque", "couple"},
    "pads": {"spars", "ribs", "rows", "turn", "edge", "keep_out_areas"},
    "levers": {"plates", "pair", "clearance"},
    "acceptance": {f"{quantity}{side}" for quantity in ("torsion", "across") for side in _SIDED} | {"share"},
}
"""Keys that only plan rigs have, by table; [specimen] outline makes one."""
