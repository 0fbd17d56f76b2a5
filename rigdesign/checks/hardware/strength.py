"""Every strength check of every member, at the peak of the test.

Loads are those of the jacks' forces at the peak with the overshoot, and of the rig's own weight as it is; a link takes
the larger of its two ends.  The rules, with their design factor, are those that the brief chooses.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from functools import cached_property
from math import inf

import numpy as np

from rigdesign.checks.hardware import states
from rigdesign.checks.hardware.loads import Hanging, link_forces
from rigdesign.checks.hardware.model import Loads, StrengthRow
from rigdesign.checks.measures import arms
from rigdesign.hardware.model import End, Hardware, JackStack, Link
from rigdesign.hardware.rules import rule_set
from rigdesign.hardware.rules.model import Result, RuleSet
from rigdesign.levers.model import Piece
from rigdesign.target.curve import Floats


def strength(hardware: Hardware, hung: Hanging, loads: Loads, jack: Floats) -> tuple[StrengthRow, ...]:
    """Return all strength checks under jack forces (n_trees,) [N], overshoot included: pieces, links, pads, jacks.

    Raises
    ------
    ValueError
        Where the brief's rules are not known.
    """
    upper, lower = link_forces(loads, jack)
    members = _Members(hardware, hung, rule_set(hardware.rig.plan.target.brief.hardware), upper, lower)
    rows: list[StrengthRow] = []
    for piece in hardware.pieces:
        rows += members.plate_rows(piece) if piece.kind == "plate" else members.lever_rows(piece)
    for link in hardware.links:
        rows += members.link_rows(link)
    for link in hardware.links:
        rows += members.lug_rows(link)
    for stack, force in zip(hardware.stacks, jack, strict=True):
        rows += _machine_rows(stack, abs(float(force)))
    return tuple(rows)


@dataclass(frozen=True)
class _Members:
    """The members under one load, and the rules that hold for them; forces in links (n_links,) [N]."""

    hardware: Hardware
    hung: Hanging
    rules: RuleSet
    upper: Floats
    lower: Floats

    @cached_property
    def load(self) -> Floats:
        """The larger magnitude of both ends of each link [N], (n_links,)."""
        return np.maximum(np.abs(self.upper), np.abs(self.lower))

    def pivot_load(self, piece: Piece) -> float:
        """What a piece hands on at its pivot, or what its ends carry together where that is more [N]."""
        ends = sum(float(self.upper[self.hung.link_at(piece.name, hole.name)]) for hole in piece.ends)
        return max(float(self.load[self.hung.link_at(piece.name, "pivot")]), abs(ends))

    def lever_rows(self, piece: Piece) -> Iterator[StrengthRow]:
        """Bending, shear, buckling and deflection of a lever, and its three holes."""
        load = self.pivot_load(piece)
        if min(arms(piece)) > 0:
            yield from _rows(piece.name, load, self.rules.lever(states.bar(self.hardware, piece, load)))
        else:
            yield _impossible(piece.name, "bending at the pivot", load, "the pivot is not between holes A and B")
        for hole in piece.holes:
            pull = load if hole.name == "pivot" else float(self.load[self.hung.link_at(piece.name, hole.name)])
            state = states.lever_hole(self.hardware, piece, hole, pull)
            yield from _rows(piece.name, pull, self.rules.hole(state), f"hole {hole.name}")

    def plate_rows(self, piece: Piece) -> Iterator[StrengthRow]:
        """Bending of a plate about its worst line, and punching."""
        load = self.pivot_load(piece)
        pull = np.array([self.upper[self.hung.link_at(piece.name, hole.name)] for hole in piece.ends])
        # magnitudes, a point that acts against the others keeping its sign
        state = states.plate(self.hardware, piece, load, pull * np.sign(pull.sum()))
        yield from _rows(piece.name, load, self.rules.plate(state))

    def link_rows(self, link: Link) -> Iterator[StrengthRow]:
        """The link itself, and the pin and fitting at both ends."""
        load = float(self.load[link.number - 1])
        pushed = self.hardware.side * float(self.lower[link.number - 1]) < 0
        if link.kind == "rod":
            yield from _rows(link.name, load, self.rules.rod(states.rod(link, load, pushed)))
        elif pushed:
            yield _impossible(link.name, "compression", load, f"a link of {link.kind} cannot push")
        elif link.kind == "strap":
            yield from _rows(link.name, load, self.rules.strap(states.strap(link, load)))
        else:
            yield from _rows(link.name, load, self.rules.webbing(states.webbing(link, load)))
        for end in (link.upper, link.lower):
            yield from self.end_rows(link, end, load)

    def end_rows(self, link: Link, end: End, load: float) -> Iterator[StrengthRow]:
        """Pin and fitting at one end of a link."""
        place = f"{end.to} hole {end.at}" if end.at else end.to
        if end.fitting == "stud":
            state = states.stud(link, end, load)
            if state is not None:
                yield from _rows(link.name, load, self.rules.rod(state), f"stud at {place}")
            return
        yield from _rows(link.name, load, self.rules.pin(states.pin(self.hardware, link, end, load)), f"at {place}")
        if end.fitting != "loop":
            yield from _rows(
                link.name, load, self.rules.hole(states.fitting(link, end, load)), f"{end.fitting} at {place}"
            )

    def lug_rows(self, link: Link) -> Iterator[StrengthRow]:
        """The lugs of the pad that hangs on a link, if one does."""
        if link.lower.to.startswith("pad ") and link.lower.fitting in ("eye", "loop"):
            load = float(self.load[link.number - 1])
            yield from _rows(link.lower.to, load, self.rules.hole(states.lugs(link, link.lower, load)), "lugs")


def _rows(piece: str, load: float, results: Iterable[Result], where: str = "") -> Iterator[StrengthRow]:
    for result in results:
        yield StrengthRow(
            piece=piece,
            check=f"{result.check}, {where}" if where else result.check,
            clause=result.clause,
            load=load,
            value=result.value,
            limit=result.limit,
            unit=result.unit,
            utilisation=result.utilisation,
            working=result.working,
        )


def _impossible(piece: str, check: str, load: float, why: str) -> StrengthRow:
    return StrengthRow(piece, check, why, load, load, 0.0, "N", inf, (("P", load, "N"),))


def _machine_rows(stack: JackStack, load: float) -> Iterator[StrengthRow]:
    """What jack and cell may bear by their makers."""
    for what, machine in (("jack", stack.machine), ("load cell", stack.cell)):
        use = load / machine.force if machine.force > 0 else inf
        working = (("F", load, "N"), ("rated", machine.force, "N"))
        yield StrengthRow(
            stack.jack, f"rated force of the {what}", f"{machine.name}, maker's rating", load, load, machine.force, "N",
            use, working,
        )  # fmt: skip
