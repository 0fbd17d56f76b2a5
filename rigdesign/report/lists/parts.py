"""The parts list: a row a mark, with quantities and masses that add up to the whole."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from rigdesign.hardware.model import Body, Hardware, Machine, PartKind, Spacer
from rigdesign.hardware.weighing import spacer_mass
from rigdesign.report.lists.flats import side_plates_of
from rigdesign.report.lists.members import by_mark, material_of, pieces_by_name, steel_length
from rigdesign.report.lists.model import PartRow
from rigdesign.report.lists.pins import pin_mass, pin_rows_of

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck


def part_rows(result: HardwareCheck) -> tuple[PartRow, ...]:
    """Return a row a part mark: levers, plates, links, pins, spacers, counterweights, pads, load cells, jacks.

    The mass of a lever is that of its profiles, net of holes; side plates, spacers and counterweights have rows of
    their own, and so have the pins, which are not in the mass of a link.  All totals, less cells and jacks, make the
    mass of the trees.
    """
    hardware = result.hardware
    return (
        *_piece_rows(hardware),
        *_side_plate_rows(hardware),
        *_link_rows(hardware),
        *_pin_rows(hardware),
        *_spacer_rows(hardware),
        *_counterweight_rows(hardware),
        *_pad_rows(hardware),
        *_cell_rows(hardware),
        *_jack_rows(hardware),
    )


def profile_words(body: Body) -> str:
    """What a lever or plate is made from: "2 × flat 80×10", "RHS 100×60×5", "plate 20"."""
    return body.section.name if body.profiles == 1 else f"{body.profiles} × {body.section.name}"


def _piece_rows(hardware: Hardware) -> list[PartRow]:
    pieces = pieces_by_name(hardware)
    rows = []
    for mark, members in by_mark(hardware, pieces).items():
        first = members[0]
        body = hardware.bodies[first]
        kind: PartKind = "plate" if pieces[first].kind == "plate" else "lever"
        length = steel_length(pieces[first], body)
        rows.append(
            PartRow(mark, kind, len(members), profile_words(body), body.material.name, length,
                    profile_mass(hardware, first), members)
        )  # fmt: skip
    # levers before plates, each in the order of their marks
    return sorted(rows, key=lambda row: row.kind)


def profile_mass(hardware: Hardware, name: str) -> float:
    """Mass of the profiles of a lever, or of a plate, net of holes [kg]: without all that is put on it."""
    body = hardware.bodies[name]
    mass = hardware.masses[name].mass - math.fsum(body.counterweights.values())
    mass -= len(body.spacers) * spacer_mass(body) if body.spacers else 0.0
    if body.side_plate <= 0:
        return mass
    own = hardware.marks[name]
    members = by_mark(hardware, hardware.bodies)[own]
    sides = [flat for flat in side_plates_of(hardware) if flat.mark.split("_")[0] == own]
    return mass - math.fsum(flat.quantity // len(members) * flat.mass for flat in sides)


def _link_rows(hardware: Hardware) -> list[PartRow]:
    links = {link.name: link for link in hardware.links}
    rows = []
    for mark, members in by_mark(hardware, links).items():
        link = links[members[0]]
        pins = sum(pin_mass(end, link.pin_material) for end in (link.upper, link.lower))
        size = link.size if link.kind == "webbing" else f"{link.kind} {link.size}"
        rows.append(
            PartRow(mark, "link", len(members), size, material_of(link), link.length, link.mass - pins, members)
        )
    return rows


def _pin_rows(hardware: Hardware) -> list[PartRow]:
    return [
        PartRow(row.mark, "pin", row.quantity, f"⌀{1e3 * row.diameter:.4g}", row.material, row.length, row.mass,
                row.places)
        for row in pin_rows_of(hardware)
    ]  # fmt: skip


def _side_plate_rows(hardware: Hardware) -> list[PartRow]:
    """Plates welded on the webs of hollow sections, by the mark of their lever."""
    rows = []
    for flat in side_plates_of(hardware):
        long, deep = (1e3 * size for size in flat.outline.max(axis=0) - flat.outline.min(axis=0))
        members = by_mark(hardware, hardware.bodies)[flat.mark.split("_")[0]]
        section = f"side plate {long:.4g} × {deep:.4g} × {1e3 * flat.thickness:.4g}"
        rows.append(PartRow(flat.mark, "plate", flat.quantity, section, flat.material, 1e-3 * long, flat.mass, members))
    return rows


def _spacer_rows(hardware: Hardware) -> list[PartRow]:
    """Spacers with their bolts, by the gap that they fill and what the bolt goes through."""
    owners: dict[tuple[Spacer, float, float], list[str]] = {}
    for name, body in hardware.bodies.items():
        if body.spacers:
            key = (body.spacer, round(body.gap, 9), round(body.across, 9))
            owners.setdefault(key, []).extend([name] * len(body.spacers))
    return [
        PartRow(f"S{number}", "spacer", len(names), _spacer_size(spacer), "steel", gap,
                spacer_mass(hardware.bodies[names[0]]), tuple(dict.fromkeys(names)))
        for number, ((spacer, gap, _), names) in enumerate(owners.items(), start=1)
    ]  # fmt: skip


def _spacer_size(spacer: Spacer) -> str:
    return f"tube ⌀{1e3 * spacer.tube:g}/{1e3 * spacer.bore:g} with bolt M{1e3 * spacer.bolt:g}"


def _counterweight_rows(hardware: Hardware) -> list[PartRow]:
    places: dict[float, list[str]] = {}
    for name, body in hardware.bodies.items():
        for hole, mass in body.counterweights.items():
            places.setdefault(round(mass, 9), []).append(f"{name} {hole}")
    return [
        PartRow(f"W{number}", "counterweight", len(where), f"hung at {', '.join(where)}", "", None, mass, tuple(where))
        for number, (mass, where) in enumerate(places.items(), start=1)
    ]


def _pad_rows(hardware: Hardware) -> list[PartRow]:
    pads = {f"pad {pad.pad}": pad for pad in hardware.pads}
    return [
        PartRow(mark, "pad", len(members), f"{1e3 * pads[members[0]].height:.4g} mm from the surface to its pin", "",
                None, pads[members[0]].mass, members)
        for mark, members in by_mark(hardware, pads).items()
    ]  # fmt: skip


def _jack_rows(hardware: Hardware) -> list[PartRow]:
    jacks = {stack.jack: stack.machine for stack in hardware.stacks}
    return [
        _machine_row(mark, "jack", jacks[members[0]], members) for mark, members in by_mark(hardware, jacks).items()
    ]


def _cell_rows(hardware: Hardware) -> list[PartRow]:
    """Load cells by what they are; they belong to their jacks and have no names of their own."""
    jacks: dict[Machine, list[str]] = {}
    for stack in hardware.stacks:
        jacks.setdefault(stack.cell, []).append(stack.jack)
    return [
        _machine_row(f"C{number}", "cell", cell, tuple(members))
        for number, (cell, members) in enumerate(jacks.items(), start=1)
    ]


def _machine_row(mark: str, kind: PartKind, machine: Machine, members: tuple[str, ...]) -> PartRow:
    return PartRow(mark, kind, len(members), machine.name, "", machine.length, machine.mass, members)
