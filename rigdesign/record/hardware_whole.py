"""Whether hardware that was read from rig.json is all that its rig needs: every member has its sizes, and no other.

A file that was edited by hand, or holds the hardware of another rig, is refused here rather than fails later.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from rigdesign.brief.hardware_tables import LONGEST_BAR
from rigdesign.errors import InputError
from rigdesign.hardware.model import Hardware
from rigdesign.record.fields import Fields

_LIST = 3
"""So many names are told at most."""


def require_whole(hardware: Hardware, fields: Fields) -> None:
    """Raise unless the hardware belongs to its rig.

    Raises
    ------
    InputError
        Where a member is missing, comes twice, is not one of the rig's, or a size is not positive.
    """
    rig = hardware.rig
    pieces = [piece.name for piece in hardware.pieces]
    pads = [f"pad {i + 1}" for i in range(rig.pad_x.size)]
    jacks = [tree.jack.name for tree in rig.trees]
    links = [f"link {k + 1}" for k in range(len(pieces) + len(pads))]
    if hardware.side not in (1, -1):
        fields.refuse("side", "the side of the rig is not one", limit="1 or -1")
    _require_same(fields, "bodies", [item.text("piece") for item in fields.objects("bodies")], pieces)
    _require_same(fields, "links", [link.name for link in hardware.links], links)
    _require_same(fields, "pads", [f"pad {pad.pad}" for pad in hardware.pads], pads)
    _require_same(fields, "stacks", [stack.jack for stack in hardware.stacks], jacks)
    _require_same(fields, "heights_m", sorted(hardware.heights), sorted(pieces + jacks))
    _require_same(fields, "masses", sorted(hardware.masses), sorted(pieces + links + pads))
    _require_marks(fields, hardware, [*pieces, *links, *pads, *jacks])
    _require_joined(fields, hardware)
    _require_sizes(hardware, fields)


def _require_same(fields: Fields, key: str, found: Sequence[str], wanted: Sequence[str]) -> None:
    if list(found) == list(wanted):
        return
    missing, strange = _without(wanted, found), _without(found, wanted)
    if missing:
        what = "the hardware lacks what the rig has"
    elif strange:
        what = "the hardware has what the rig has not"
    else:
        what = "the hardware has something twice or in another order than the rig"
    raise InputError(what, where=f"hardware.{key}", value=_told(missing or strange or found), limit=_told(wanted))


def _require_marks(fields: Fields, hardware: Hardware, members: Sequence[str]) -> None:
    if missing := _without(members, hardware.marks):
        fields.refuse("marks", f"no part mark is given for {_told(missing)}")


def _require_joined(fields: Fields, hardware: Hardware) -> None:
    """Each link joins a hole or jack above to the piece or pad that hangs there."""
    wanted = []
    for tree in hardware.rig.trees:
        wanted.append(((tree.jack.name, ""), tree.jack.carries))
        wanted += [((piece.name, hole.name), hole.joins) for piece in tree.pieces for hole in piece.ends]
    for k, (link, (above, below)) in enumerate(zip(hardware.links, wanted, strict=True)):
        at = "" if below.startswith("pad ") else "pivot"
        for key, end, joint in (("upper", link.upper, above), ("lower", link.lower, (below, at))):
            if (end.to, end.at) != joint:
                raise InputError(
                    "a link is pinned to something else than in the rig",
                    where=f"hardware.links[{k}].{key}",
                    value=f"{end.to} {end.at}".strip(),
                    limit=" ".join(joint).strip(),
                )


LARGEST_SIZE = 1e15
"""No size, force or stress in SI units is larger, as in a brief."""

_END = ("pin_m", "hole_m", "inner_m", "radius_m"), ("outer_m", "gap_m")
_MACHINE = ("force_N", "length_m", "mass_kg", "pin_m"), ("stroke_m",)
_SIZES = {
    "bodies": (("overhang_m",), ("gap_m", "side_plate_m")),
    "links": (("width_m", "thickness_m", "stress_area_m2", "length_m"), ("adjust_m", "mass_kg")),
    "pads": (("height_m",), ("mass_kg",)),
}
"""Sizes that statics, strength or drawings divide by, and are positive, and others that are not negative, by list."""

_SECTION = ("area_m2", "inertia_m4", "inertia_weak_m4", "torsion_m4", "modulus_m3", "plastic_m3", "mass_kg_m", "bar_m")


def _require_sizes(hardware: Hardware, fields: Fields) -> None:
    """Every size, mass, force and strength is one that a thing can have."""
    for key, (positive, others) in _SIZES.items():
        for item in fields.objects(key):
            _require_numbers(item, positive, others)
    for item in fields.objects("links"):
        for end in ("upper", "lower"):
            _require_numbers(item.object(end), *_END)
            # a stud is the rod itself, without a pin
            length = ("pin_length_m",)
            is_stud = item.object(end).text("fitting") == "stud"
            _require_numbers(item.object(end), () if is_stud else length, length if is_stud else ())
    for item in fields.objects("stacks"):
        for machine in ("machine", "cell"):
            _require_numbers(item.object(machine), *_MACHINE)
    for item in fields.of_each("sections").values():
        _require_numbers(item, ("depth_m", "width_m", "web_m", "flange_m", *_SECTION), ())
        if item.number("bar_m") > LONGEST_BAR:
            item.refuse("bar_m", "no bar is so long", limit=f"up to {LONGEST_BAR:g}")
    for item in fields.of_each("materials").values():
        _require_material(item)
    for item in fields.objects("bodies"):
        _require_body(item)
    places = [(fields.object("heights_m"), tuple(hardware.heights))]
    places += [(item, ("surface_m",)) for item in fields.objects("pads")]
    places += [(item, ("u_m", "v_m")) for item in fields.of_each("masses").values()]
    for item, names in places:
        for name in names:
            if not abs(item.number(name)) <= LARGEST_SIZE:
                item.refuse(name, "nothing can be there", limit=f"up to {LARGEST_SIZE:g}")


def _require_body(fields: Fields) -> None:
    """As many profiles as the build has, and counterweights that pull down."""
    wanted = 2 if fields.text("build").startswith("twin") else 1
    if fields.whole("profiles") != wanted:
        fields.refuse("profiles", "this build has another number of profiles", limit=str(wanted))
    hung = fields.object("counterweights_kg")
    _require_numbers(hung, (), hung.values)


def _require_material(fields: Fields) -> None:
    """Ranges of thickness that rise, each with its strengths."""
    _require_numbers(fields, ("modulus_Pa", "density_kg_m3"), ())
    limits = fields.sizes("limits_m")
    if not limits or sorted({0.0, *limits})[1:] != limits:
        fields.refuse("limits_m", "the ranges of thickness must rise from zero")
    for key in ("yields_Pa", "ultimates_Pa"):
        strengths = fields.sizes(key)
        if len(strengths) != len(limits) or not all(0 < each <= LARGEST_SIZE for each in strengths):
            limit = f"a number above 0, up to {LARGEST_SIZE:g}, for each of limits_m"
            fields.refuse(key, "these are no strengths of a material", limit=limit)


def _require_numbers(fields: Fields, positive: Iterable[str], others: Iterable[str]) -> None:
    """Raise InputError unless these are above zero and those not negative, and all within reason."""
    for name in (*positive, *others):
        size = fields.number(name)
        if size <= 0 and name in positive:
            fields.refuse(name, "this size must be positive", limit="more than 0")
        if not 0 <= size <= LARGEST_SIZE:
            fields.refuse(name, "no such size can be", limit=f"0 to {LARGEST_SIZE:g}")


def _without(names: Iterable[str], others: Iterable[str]) -> list[str]:
    known = set(others)
    return [name for name in names if name not in known]


def _told(names: Sequence[str]) -> str:
    more = f" and {len(names) - _LIST} more" if len(names) > _LIST else ""
    return ", ".join(names[:_LIST]) + more
