"""What the lists share: members by their mark, ends by the hole they are pinned to, names of places, lengths."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from rigdesign.hardware.model import Body, End, Hardware, Link
from rigdesign.levers.model import Piece


def by_mark(hardware: Hardware, names: Iterable[str]) -> dict[str, tuple[str, ...]]:
    """Return the names of members by their mark, marks in the order in which they first come."""
    groups: dict[str, list[str]] = {}
    for name in names:
        groups.setdefault(hardware.marks[name], []).append(name)
    return {mark: tuple(members) for mark, members in groups.items()}


def pieces_by_name(hardware: Hardware) -> Mapping[str, Piece]:
    """Levers and plates by their names."""
    return {piece.name: piece for piece in hardware.pieces}


def ends_by_place(links: Iterable[Link]) -> dict[str, End]:
    """Return the links' ends by what they are pinned to ("lever 5 A", "pad 3", "jack 1")."""
    return {place(end): end for link in links for end in (link.upper, link.lower)}


def place(end: End) -> str:
    """What a link's end is pinned to, with the hole where it has one: "lever 5 A", "pad 3"."""
    return f"{end.to} {end.at}" if end.at else end.to


def material_of(link: Link) -> str:
    """What a link is made of, for lists; webbing is no steel, whatever its fittings are."""
    return "polyester" if link.kind == "webbing" else link.material.name


def steel_length(piece: Piece, body: Body) -> float:
    """Length of a lever's profiles over all, or of a plate along u [m]."""
    if piece.kind == "plate":
        along = body.outline[:, 0]
        return float(along.max() - along.min())
    first, last = piece.ends
    return last.u - first.u + 2 * body.overhang


def numbers(members: Iterable[str]) -> str:
    """Numbers of members of one kind, runs of three and more drawn together.

    >>> numbers(["link 4", "link 5", "link 7", "link 8", "link 9"])
    '4, 5, 7–9'
    """
    runs: list[list[int]] = []
    for number in (int(member.split()[1]) for member in members):
        if runs and number == runs[-1][-1] + 1:
            runs[-1].append(number)
        else:
            runs.append([number])
    return ", ".join(
        f"{run[0]}–{run[-1]}" if len(run) > 2 else ", ".join(str(number) for number in run) for run in runs
    )
