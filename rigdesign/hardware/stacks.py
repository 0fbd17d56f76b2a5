"""Jack and load cell of a tree: the smallest that bear its force at the peak of the test with overshoot."""

from __future__ import annotations

from collections.abc import Callable

from rigdesign.brief.model_hardware import HardwareRules
from rigdesign.display import show
from rigdesign.hardware.catalogue import cells, jacks, smallest
from rigdesign.hardware.model import JackStack, Machine, Shortfall


def stack_for(
    jack: str, force: float, rules: HardwareRules, holds: Callable[[Machine], bool]
) -> tuple[JackStack, list[Shortfall]]:
    """Return the jack and cell for a force [N], and what of them is too weak where none is strong enough.

    A cell larger than its force asks for is taken where the link's eye only `holds` on the pin of that.
    """
    short: list[Shortfall] = []

    def choose(machines: tuple[Machine, ...], what: str, key: str) -> Machine:
        found = smallest(machines, lambda machine: machine.force >= force)
        if found is not None:
            return found
        strongest = machines[-1]
        remedy = f"a {what} of {show(force, 'force')} or more, in the table that [hardware] {key} names"
        short.append(Shortfall(jack, f"force of the {what}", force / strongest.force, remedy))
        return strongest

    cell = smallest(cells(rules), lambda cell: cell.force >= force and holds(cell))
    stack = JackStack(jack, choose(jacks(rules), "jack", "jacks"), cell or choose(cells(rules), "load cell", "cells"))
    return stack, short
