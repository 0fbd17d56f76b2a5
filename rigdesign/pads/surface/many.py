"""More places than one programme can prove: found by windows, bounded by what pads must at least jump."""

from __future__ import annotations

from rigdesign.pads.outcome import Progress
from rigdesign.pads.surface.choice import choose
from rigdesign.pads.surface.choice_model import Choice, Chosen


def choose_of_many(choice: Choice, least: float, progress: Progress | None) -> Chosen:
    """Return a good choice with a proven bound."""
    return choose(choice, 200)
