"""Numbers as the sheets write them: lengths in millimetres or inches without their unit, scales, tolerances.

The title block says once what dimensions are in; masses and forces carry their units.
"""

from __future__ import annotations

from dataclasses import dataclass

from rigdesign.display import System, show
from rigdesign.words import INCH

HOLE_TOLERANCE = 0.2e-3
"""How much larger than drawn a hole may be [m]; none may be smaller.  Set here; a drill holds it."""
PLACE_TOLERANCE = 0.5e-3
"""How far a hole's centre may be from its dimension from the datum [m], either way.  Set here."""
GENERAL_TOLERANCE = 1.0e-3
"""Of all other dimensions [m], either way.  Set here."""
SERIES = (1.0, 2.0, 5.0, 10.0, 15.0, 20.0, 25.0, 50.0)
"""Scales are 1 to one of these, or to ten, a hundred, … times one from 10 on: those recommended by ISO 5455, and two
that steel drawings are made at beside them (both from memory)."""


@dataclass(frozen=True)
class Sizes:
    """How lengths are written: SI in millimetres, else inches."""

    system: System = "SI"

    @property
    def unit(self) -> str:
        """Unit of lengths."""
        return "mm" if self.system == "SI" else "in"

    def length(self, value: float) -> str:
        """A length [m] to a tenth of a millimetre, a whole one without decimals, or to a thousandth of an inch.

        >>> Sizes().length(0.3041), Sizes().length(-1.25), Sizes("us").length(0.3048)
        ('304.1', '−1250', '12.000')
        """
        text = f"{1e3 * value:.1f}".removesuffix(".0") if self.system == "SI" else f"{value / INCH:.3f}"
        return text.lstrip("-") if float(text) == 0.0 else text.replace("-", "−")

    def hole(self, diameter: float) -> str:
        """A hole's diameter [m] with its tolerance.

        >>> Sizes().hole(0.0255)
        '⌀25.5 +0.2/0'
        """
        return f"⌀{self.length(diameter)} +{self.length(HOLE_TOLERANCE)}/0"

    def pin(self, diameter: float) -> str:
        """A pin's diameter [m], to a hundredth of a millimetre where it is no whole tenth.

        >>> Sizes().pin(0.016), Sizes().pin(0.015875)
        ('16', '15.88')
        """
        if self.system != "SI" or abs(1e4 * diameter - round(1e4 * diameter)) < 1e-6:
            return self.length(diameter)
        return f"{1e3 * diameter:.2f}"

    def plain_hole(self, diameter: float) -> str:
        """A hole's diameter [m] alone."""
        return f"⌀{self.length(diameter)}"

    def mass(self, value: float) -> str:
        """A mass [kg] with its unit."""
        return show(value, "mass", self.system)

    def force(self, value: float) -> str:
        """A force [N] with its unit."""
        return show(value, "force", self.system)

    @property
    def tolerances(self) -> tuple[str, ...]:
        """What the title block says of tolerances."""
        return (
            f"holes from the datum ±{self.length(PLACE_TOLERANCE)}, not adding up",
            f"hole diameters +{self.length(HOLE_TOLERANCE)}/0, all others ±{self.length(GENERAL_TOLERANCE)}",
        )


def round_scale(least: float) -> float:
    """Return the smallest n of a scale 1 : n in the series that is at least `least`, and at least 1.

    >>> round_scale(6.3), round_scale(0.2), round_scale(10.01), round_scale(20.0), round_scale(51.0)
    (10.0, 1.0, 15.0, 20.0, 100.0)
    """
    tens = 1.0
    while True:
        for step in SERIES if tens == 1.0 else SERIES[3:]:
            if step * tens >= least * (1 - 1e-9):
                return step * tens
        tens *= 10.0


def scale_words(ratio: float) -> str:
    """A scale as it is written.

    >>> scale_words(20.0)
    '1:20'
    """
    return f"1:{ratio:.0f}"
