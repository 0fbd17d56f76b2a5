"""What could be done about the rig's own weight, and how much of its error would remain."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Literal

from rigdesign.checks.hardware.loads import own_weight
from rigdesign.checks.hardware.model import Remedy
from rigdesign.checks.hardware.tare import Weighed, weighed
from rigdesign.hardware.balance import counterweights, with_counterweights
from rigdesign.hardware.model import Hardware

KINDS: tuple[tuple[Literal["balanced levers", "counterweights"], bool], ...] = (
    ("balanced levers", False),
    ("counterweights", True),
)


def remedies(hardware: Hardware, now: Weighed) -> tuple[Remedy, ...]:
    """Return what balanced levers and counterweights would weigh, and the errors that remain with them at 100 %.

    Both come on top of the counterweights that the hardware has already; the jacks' forces are then at their best.
    """
    return tuple(_remedies(hardware, now))


def _remedies(hardware: Hardware, now: Weighed) -> Iterator[Remedy]:
    rig = hardware.rig
    for kind, whole in KINDS:
        added = counterweights(rig, hardware.masses, hardware.links, whole=whole)
        loads = own_weight(rig, with_counterweights(rig, hardware.masses, added))
        step = weighed(now.sampled, now.hung, loads).step(1.0)
        masses = tuple((piece, hole, mass) for piece, holes in added.items() for hole, mass in holes.items())
        yield Remedy(kind, masses, sum(mass for _, _, mass in masses), step.band_use, step.errors)
