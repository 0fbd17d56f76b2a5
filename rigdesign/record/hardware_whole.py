"""Whether hardware that was read from rig.json is all that its rig needs: every member has its sizes, and no other.

A file that was edited by hand, or holds the hardware of another rig, is refused here rather than fails later.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence

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
    _require_sizes(fields)


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


_POSITIVE = {
    "bodies": ("overhang_m",),
    "links": ("length_m", "stress_area_m2"),
    "pads": ("height_m",),
}


def _require_sizes(fields: Fields) -> None:
    """Sizes that statics, strength or drawings divide by are positive."""
    for key, names in _POSITIVE.items():
        for item in fields.objects(key):
            for name in names:
                if not item.size(name) > 0:
                    item.refuse(name, "this size must be positive", limit="more than 0")


def _without(names: Iterable[str], others: Iterable[str]) -> list[str]:
    known = set(others)
    return [name for name in names if name not in known]


def _told(names: Sequence[str]) -> str:
    more = f" and {len(names) - _LIST} more" if len(names) > _LIST else ""
    return ", ".join(names[:_LIST]) + more
