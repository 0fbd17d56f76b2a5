"""The parts list: a row a mark, with quantities and masses that add up to the whole."""

from __future__ import annotations

from collections import Counter
from typing import TYPE_CHECKING

from rigdesign.hardware.model import Body, Hardware, Machine, PartKind
from rigdesign.report.lists.members import by_mark, own_mass, pieces_by_name, steel_length
from rigdesign.report.lists.model import PartRow
from rigdesign.report.lists.pins import pin_mass, pin_rows_of

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

_BUILDS = {"twin flats": "2 flats", "twin channels": "2 channels", "hollow section": "hollow section"}


def part_rows(result: HardwareCheck) -> tuple[PartRow, ...]:
    """Return a row a part mark: levers, plates, links, pins, spacers, counterweights, pads, load cells, jacks.

    The mass of a lever is without counterweights and with its spacers; that of a link without its pins, which have
    rows of their own.  All totals, less cells and jacks, make the mass of the trees.
    """
    hardware = result.hardware
    return (
        *_piece_rows(hardware),
        *_link_rows(hardware),
        *_pin_rows(hardware),
        *_spacer_rows(hardware),
        *_counterweight_rows(hardware),
        *_pad_rows(hardware),
        *_machine_rows(hardware, "cell"),
        *_machine_rows(hardware, "jack"),
    )


def profile_words(body: Body) -> str:
    """What a lever or plate is made from: "2 flats 80×10", "hollow section 100×60×5", "plate 20"."""
    return body.section.name if body.build == "plate" else f"{_BUILDS[body.build]} {body.section.name}"


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
                    own_mass(hardware, first), members)
        )  # fmt: skip
    # levers before plates, each in the order of their marks
    return sorted(rows, key=lambda row: row.kind)


def _link_rows(hardware: Hardware) -> list[PartRow]:
    links = {link.name: link for link in hardware.links}
    rows = []
    for mark, members in by_mark(hardware, links).items():
        link = links[members[0]]
        pins = sum(pin_mass(end, link.pin_material) for end in (link.upper, link.lower))
        size = f"{link.kind} {link.size}" if link.kind != "webbing" else link.size
        rows.append(
            PartRow(mark, "link", len(members), size, link.material.name, link.length, link.mass - pins, members)
        )
    return rows


def _pin_rows(hardware: Hardware) -> list[PartRow]:
    return [
        PartRow(row.mark, "pin", row.quantity, f"⌀{1e3 * row.diameter:.4g}", row.material, row.length, row.mass,
                row.places)
        for row in pin_rows_of(hardware)
    ]  # fmt: skip


def _spacer_rows(hardware: Hardware) -> list[PartRow]:
    """Spacers by the gap that they fill; their mass is in that of their levers."""
    owners: dict[tuple[float, str], list[str]] = {}
    for name, body in hardware.bodies.items():
        if body.spacers:
            key = (round(body.gap, 9), body.material.name)
            owners.setdefault(key, []).extend([name] * len(body.spacers))
    return [
        PartRow(f"S{number}", "spacer", len(names), "between the profiles", material, gap, None,
                tuple(dict.fromkeys(names)))
        for number, ((gap, material), names) in enumerate(owners.items(), start=1)
    ]  # fmt: skip


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


def _machine_rows(hardware: Hardware, kind: PartKind) -> list[PartRow]:
    """Jacks and load cells by what they are; a mark a kind of machine, in the order of the trees."""
    machines: dict[str, Machine] = {}
    counts: Counter[str] = Counter()
    trees: dict[str, list[str]] = {}
    for stack in hardware.stacks:
        machine = stack.machine if kind == "jack" else stack.cell
        machines[machine.name] = machine
        counts[machine.name] += 1
        trees.setdefault(machine.name, []).append(stack.jack)
    letter = "J" if kind == "jack" else "C"
    return [
        PartRow(f"{letter}{number}", kind, counts[name], name, "", machine.length, machine.mass, tuple(trees[name]))
        for number, (name, machine) in enumerate(machines.items(), start=1)
    ]
