"""The hardware inside rig.json, and back.

    hardware    side                +1 or −1: the side of the specimen that the rig is on
                materials, sections by the name that bodies and links call them by
                bodies              a list, levers and plates in their order, each with its section and material
                links               a list, from the jack down, each with its materials and its ends, upper and lower
                pads                a list: pad, mass_kg, height_m, surface_m
                stacks              a list, one a tree: jack, machine (the jack), cell
                heights_m           by name
                marks               by name of a member
                masses              by name: mass_kg, u_m, v_m
                shortfalls          what is drawn though it fails
                words, findings     of the hardware stage

Keys are in `hardware_layout`.  Two materials or sections of one name that are not the same have " (2)" added.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any, TypeVar

from rigdesign.hardware.model import (
    Body,
    End,
    Hardware,
    JackStack,
    Link,
    Machine,
    Mass,
    Material,
    PadBody,
    Section,
    Shortfall,
)
from rigdesign.levers.model import Rig
from rigdesign.record import hardware_layout as keys
from rigdesign.record.fields import Fields, read_object
from rigdesign.record.findings import read_findings
from rigdesign.record.hardware_whole import require_whole
from rigdesign.record.objects import finding_object

_LINK_MATERIALS = ("material", "fitting_material", "pin_material")

Thing = TypeVar("Thing", Material, Section)


def hardware_object(hardware: Hardware) -> dict[str, Any]:
    """Return the hardware as an object for JSON."""
    bodies = [hardware.bodies[piece.name] for piece in hardware.pieces]
    sections = _by_name(body.section for body in bodies)
    materials = _by_name(
        [body.material for body in bodies] + [getattr(link, key) for link in hardware.links for key in _LINK_MATERIALS]
    )
    return {
        "side": hardware.side,
        "materials": {name: keys.MATERIAL.written(thing) for name, thing in materials.items()},
        "sections": {name: keys.SECTION.written(thing) for name, thing in sections.items()},
        "bodies": [_body_object(body, materials, sections) for body in bodies],
        "links": [_link_object(link, materials) for link in hardware.links],
        "pads": [keys.PAD.written(pad) for pad in hardware.pads],
        "stacks": [
            {
                "jack": stack.jack,
                "machine": keys.MACHINE.written(stack.machine),
                "cell": keys.MACHINE.written(stack.cell),
            }
            for stack in hardware.stacks
        ],
        "heights_m": {name: float(height) for name, height in hardware.heights.items()},
        "marks": dict(hardware.marks),
        "masses": {name: keys.MASS.written(mass) for name, mass in hardware.masses.items()},
        "shortfalls": [keys.SHORTFALL.written(shortfall) for shortfall in hardware.shortfalls],
        "words": hardware.words,
        "findings": [finding_object(finding) for finding in hardware.findings],
    }


def _by_name(things: Iterable[Thing]) -> dict[str, Thing]:
    """Return different things by name, in their order; a number tells those of one name apart."""
    named: dict[str, Thing] = {}
    for thing in things:
        number, name = 1, thing.name
        while named.setdefault(name, thing) != thing:
            number += 1
            name = f"{thing.name} ({number})"
    return named


def _name(thing: Thing, named: Mapping[str, Thing]) -> str:
    return next(name for name, known in named.items() if known == thing)


def _body_object(body: Body, materials: Mapping[str, Material], sections: Mapping[str, Section]) -> dict[str, Any]:
    names = {"section": _name(body.section, sections), "material": _name(body.material, materials)}
    return keys.BODY.written(body) | names


def _link_object(link: Link, materials: Mapping[str, Material]) -> dict[str, Any]:
    names = {key: _name(getattr(link, key), materials) for key in _LINK_MATERIALS}
    ends = {"upper": keys.END.written(link.upper), "lower": keys.END.written(link.lower)}
    return keys.LINK.written(link) | names | ends


def hardware_from_json(text: str, rig: Rig) -> Hardware | None:
    """Return the hardware of a rig.json; None where it holds a rig without hardware.

    Parameters
    ----------
    text
        The text of rig.json.
    rig
        The rig that `rig_from_json` read from it.

    Raises
    ------
    InputError
        Where the text cannot be read, or its hardware is not all that the rig needs.
    """
    outermost = read_object(text)
    if "hardware" not in outermost.values:
        return None
    fields = outermost.object("hardware")
    materials = {name: Material(**keys.MATERIAL.read(item)) for name, item in fields.of_each("materials").items()}
    sections = {name: Section(**keys.SECTION.read(item)) for name, item in fields.of_each("sections").items()}
    bodies = [_body(item, materials, sections) for item in fields.objects("bodies")]
    hardware = Hardware(
        rig=rig,
        side=fields.whole("side"),
        bodies={body.piece: body for body in bodies},
        links=tuple(_link(item, materials) for item in fields.objects("links")),
        pads=tuple(PadBody(**keys.PAD.read(item)) for item in fields.objects("pads")),
        stacks=tuple(_stack(item) for item in fields.objects("stacks")),
        heights=fields.amounts("heights_m"),
        marks=fields.texts("marks"),
        masses={name: Mass(**keys.MASS.read(item)) for name, item in fields.of_each("masses").items()},
        shortfalls=tuple(Shortfall(**keys.SHORTFALL.read(item)) for item in fields.objects("shortfalls")),
        words=fields.text("words"),
        findings=read_findings(fields),
    )
    require_whole(hardware, fields)
    return hardware


def _body(fields: Fields, materials: dict[str, Material], sections: dict[str, Section]) -> Body:
    section, material = _named(fields, "section", sections), _named(fields, "material", materials)
    return Body(**keys.BODY.read(fields), section=section, material=material)


def _link(fields: Fields, materials: dict[str, Material]) -> Link:
    named: dict[str, Any] = {key: _named(fields, key, materials) for key in _LINK_MATERIALS}
    upper, lower = (End(**keys.END.read(fields.object(key))) for key in ("upper", "lower"))
    return Link(**keys.LINK.read(fields), **named, upper=upper, lower=lower)


def _stack(fields: Fields) -> JackStack:
    machine, cell = (Machine(**keys.MACHINE.read(fields.object(key))) for key in ("machine", "cell"))
    return JackStack(fields.text("jack"), machine, cell)


def _named(fields: Fields, key: str, things: dict[str, Thing]) -> Thing:
    name = fields.text(key)
    if name not in things:
        fields.refuse(key, f"this rig has no {key.replace('_', ' ')} of this name", limit=_listed(things))
    return things[name]


def _listed(names: Iterable[str]) -> str:
    return ", ".join(names) or "none is given"
