"""[hardware] and [keep] as they are laid out: keys with defaults and descriptions; part of `brief.layout`."""

from __future__ import annotations

from rigdesign.brief import fields as f
from rigdesign.brief import fields_hardware as h
from rigdesign.brief.keys import Table, key, needed
from rigdesign.brief.surface import fields as plan

PIN_SERIES = "8, 10, 12, 14, 16, 18, 20, 22, 24, 27, 30, 33, 36, 40, 45, 50, 55, 60, 70, 80, 90, 100 mm"
"""Diameters of clevis pins of ISO 2341 from 8 mm on; smaller ones are too easily bent and lost."""


class HardwareTable(Table):
    """What the rig is made of; every key has a default."""

    headroom: f.PositiveLength | None = key("Height from z = 0 within which the whole rig stands; default: no limit.")
    clearance: f.LengthOrZero = key("Least distance between two members, at rest and with every lever turned.", "25 mm")
    build: h.Builds = key("How levers are built: one word, or a list tier by tier from the jack.", "twin flats")
    grade: h.GradeWord = key("Grade of levers, plates, straps and fittings.", "S355")
    pin_grade: h.PinGradeWord = key("Grade of the pins.", "42CrMo4")
    rules: h.RulesWord = key("Rules that strength is held to.", "BTH-1")
    design_factor: h.FactorOnStrength | None = key("BTH-1: design factor; default 2.0, and 3.0 over people.")
    over_people: plan.Flag | None = key("BTH-1: whether people stand beneath under load; default: false.")
    load_factor: h.FactorOnStrength | None = key("EN 1993: factor on loads; default 1.5.")
    overshoot: h.FactorOnStrength = key("Strength is held at the peak of the test times this.", 1.05)
    pins: h.Diameters = key("Diameters of pins to choose from, rising; default: ISO 2341, 8 to 100 mm.", PIN_SERIES)
    play: f.LengthOrZero = key("By how much a hole is larger than its pin.", "0.5 mm")
    links: h.LinksWord = key("Kind of link: rods with clevises, flat straps, or webbing.", "rod")
    link_length: f.PositiveLength | None = key("Least length of links, pin to pin; default: as short as fits.")
    turn: h.Turn = key("Angle by which every lever may turn to either side.", "5 deg")
    swing: h.Swing = key("Largest angle of a link from plumb.", "10 deg")
    deflection: f.Percentage = key("Largest deflection of a lever's end, of its arm.", "0.5 %")
    density: h.Density | None = key("Density of levers and plates; default: that of the grade.")
    pad_mass: h.MassOrZero = key("Mass of one pad.", "1 kg")
    pad_height: f.PositiveLength = key("Height of a pad: from the surface to its pin.", "60 mm")
    stock: f.Text | None = key(
        "Table of profiles to choose from: section, kind, depth [mm], width [mm], web [mm], flange [mm], bar [m]."
    )
    jacks: f.Text | None = key("Table of jacks: jack, force [kN], length [m], stroke [m], mass [kg], pin [mm].")
    cells: f.Text | None = key("Table of load cells: cell, force [kN], length [m], mass [kg], pin [mm].")
    surface: f.Text | None = key("Table of the loaded surface: x [m], z [m]; plan rigs: y [m] too; default: z = 0.")
    part_marks: h.MarksWord = key("few: levers whose arms nearly agree are made alike.", "as drilled")
    mark_tolerance: f.LengthOrZero | None = key("few: by how much arms may be changed; default 10 mm.")
    balance: h.BalanceWord = key("Whether counterweights are put on against the rig's own weight.", "as needed")
    bar: f.PositiveLength = key("Length of stock bars for the cut list.", "6 m")
    kerf: f.LengthOrZero = key("Width of a saw cut.", "3 mm")
    revision: h.Revision = key("Revision in the title block of the sheets.", "A")


class KeepTable(Table):
    """A rig whose steel is cut: its pads and levers stay, and pivots may be drilled anew."""

    rig: f.Text = needed("Folder of the rig, which holds its rig.json.")
    hole_distance: f.PositiveLength | None = key(
        "Least distance between an old and a new hole, centre to centre; default: twice the hole's diameter."
    )
