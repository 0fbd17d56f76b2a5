"""Even forces in plan: how much of each band they may take."""

from __future__ import annotations

from types import SimpleNamespace
from typing import Any

import numpy as np
import pytest
from factories import make_pads

from rigdesign.pads.forces import Forces
from rigdesign.pads.surface.evening import limits


def taken(uses: list[float], **rules: Any) -> list[float]:
    """What may be taken where the best forces use so much of each quantity's band."""
    programme: Any = SimpleNamespace(uses=lambda force: np.array(uses))
    return list(limits(make_pads(**rules), programme, Forces(np.ones(3), max(uses), 0.0)))


@pytest.mark.parametrize(("places", "most"), [("hard points", 0.99), ("fixed", 0.99), ("free", 0.97)])
def test_even_forces_leave_a_part_of_the_bands_to_drilling(places: str, most: float) -> None:
    assert taken([0.3, 0.8], places=places, aim="even") == [most, most]
    # eased to the whole band, they stop short of it as well; what takes more already keeps what it has
    assert taken([0.3, 0.965], places=places, aim="closest", ease=0.5) == [most, most]
    assert taken([0.3, 0.995], places=places, aim="even") == [most, 0.995]


def test_a_band_that_cannot_be_kept_is_no_leave_to_break_another() -> None:
    assert taken([0.3, 1.2], places="free", aim="closest", ease=0.05) == pytest.approx([0.97, 1.26])
    assert taken([0.3, 0.5], places="free", aim="closest", ease=0.02) == pytest.approx([0.51, 0.51])
