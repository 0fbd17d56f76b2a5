"""Running loads with a closed form that is no polynomial: elliptical, power and sine.

With s = (x_right − x)/L, the distance from the outboard end over the length, every form is written so that it goes to
zero there without the difference of two nearly equal numbers; where the closed form has one, its power series is used.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import factorial
from typing import Protocol

import numpy as np

from rigdesign.target.curve import Floats, Side

# Terms up to the 27th power: below 1e-16 of the sum for every angle at which the series are used.
_TERMS = range(1, 14)
# φ − sin φ = φ³ (1/3! − φ²/5! + …)
_ANGLE_LESS_SINE = np.array([(-1.0) ** (k + 1) / factorial(2 * k + 1) for k in _TERMS])
# ∫ ½(θ − sin θ cos θ) sin θ dθ = θ⁵ (8/5! − …), from 3/8 sin θ + 1/24 sin 3θ − ½ θ cos θ term by term
_ELLIPTIC_MOMENT = np.array(
    [(-1.0) ** k / factorial(2 * k + 1) * (3 / 8 + 3.0 ** (2 * k + 1) / 24 - (2 * k + 1) / 2) for k in range(2, 14)]
)


class _Form(Protocol):
    """A shape over s from 0 (outboard end) to 1: its value and its first and second integral from 0."""

    def value(self, s: Floats) -> Floats: ...
    def first(self, s: Floats) -> Floats: ...
    def second(self, s: Floats) -> Floats: ...


@dataclass(frozen=True)
class Elliptical:
    """√(1 − ξ²), a quarter ellipse with its greatest value at the inboard end."""

    def value(self, s: Floats) -> Floats:
        """The shape itself; 1 − ξ² = s (2 − s)."""
        return np.sqrt(s * (2.0 - s))

    def first(self, s: Floats) -> Floats:
        """½ (θ − sin θ cos θ) with cos θ = ξ; π/4 at s = 1."""
        return _angle_less_sine(2.0 * _angle(s)) / 4.0

    def second(self, s: Floats) -> Floats:
        """⅜ sin θ + ¹⁄₂₄ sin 3θ − ½ θ cos θ; ⅓ at s = 1."""
        theta = _angle(s)
        small = np.minimum(theta, 0.8)
        series = small**5 * _horner(_ELLIPTIC_MOMENT, small * small)
        closed = 0.375 * np.sin(theta) + np.sin(3.0 * theta) / 24.0 - 0.5 * theta * np.cos(theta)
        return np.where(theta <= 0.8, series, closed)


@dataclass(frozen=True)
class Power:
    """(1 − ξ)^k for any k ≥ 0; k = 0 is uniform, k = 1 a triangle."""

    exponent: float

    def value(self, s: Floats) -> Floats:
        """s^k."""
        return np.asarray(s**self.exponent)

    def first(self, s: Floats) -> Floats:
        """s^(k+1)/(k+1)."""
        return np.asarray(s ** (self.exponent + 1.0) / (self.exponent + 1.0))

    def second(self, s: Floats) -> Floats:
        """s^(k+2)/((k+1)(k+2))."""
        return np.asarray(s ** (self.exponent + 2.0) / ((self.exponent + 1.0) * (self.exponent + 2.0)))


@dataclass(frozen=True)
class Sine:
    """sin πξ, zero at both ends."""

    def value(self, s: Floats) -> Floats:
        """The shape itself: sin πs = sin πξ; counted from the nearer end, so that it is zero at both."""
        return np.sin(np.pi * np.minimum(s, 1.0 - s))

    def first(self, s: Floats) -> Floats:
        """(1 − cos πs)/π."""
        return np.asarray(2.0 / np.pi * np.sin(0.5 * np.pi * s) ** 2)

    def second(self, s: Floats) -> Floats:
        """(πs − sin πs)/π²."""
        return _angle_less_sine(np.pi * s) / np.pi**2


def _angle(s: Floats) -> Floats:
    """Angle θ with cos θ = 1 − s, exact for small s."""
    return 2.0 * np.arcsin(np.sqrt(0.5 * s))


def _angle_less_sine(phi: Floats) -> Floats:
    small = np.minimum(phi, 1.6)
    series = small**3 * _horner(_ANGLE_LESS_SINE, small * small)
    return np.where(phi <= 1.6, series, phi - np.sin(phi))


def _horner(coefficients: Floats, z: Floats) -> Floats:
    total = np.zeros_like(z)
    for c in coefficients[::-1]:
        total = total * z + c
    return total


@dataclass(frozen=True)
class ClosedForm:
    """A running load of a closed form over [start_x, end_x] [m], scaled to `total` [N].

    Examples
    --------
    >>> curve = ClosedForm(Power(2.0), 0.0, 3.0, 600.0)
    >>> round(curve.first_moment / curve.total, 12)
    0.75
    """

    form: _Form
    start_x: float
    end_x: float
    total: float

    @property
    def _length(self) -> float:
        return self.end_x - self.start_x

    @property
    def _greatest(self) -> float:
        """Running load [N/m] where the form is 1."""
        return self.total / (float(self.form.first(np.ones(1))[0]) * self._length)

    def _s(self, x: Floats) -> Floats:
        return np.clip((self.end_x - x) / self._length, 0.0, 1.0)

    def running(self, x: Floats, side: Side) -> Floats:
        """Running load w [N/m]."""
        a, b = self.start_x, self.end_x
        inside = (x > a) & (x <= b) if side == "inboard" else (x >= a) & (x < b)
        return np.where(inside, self._greatest * self.form.value(self._s(x)), 0.0)

    def force_beyond(self, x: Floats, side: Side) -> Floats:
        """Sum of the load outboard of x [N]."""
        return self._greatest * self._length * self.form.first(self._s(x))

    def moment_beyond(self, x: Floats) -> Floats:
        """First moment about x of the load outboard of x [N·m]."""
        own = self._greatest * self._length**2 * self.form.second(self._s(x))
        return np.asarray(own + self.total * np.maximum(self.start_x - x, 0.0))

    @property
    def first_moment(self) -> float:
        """First moment of the load about x = 0 [N·m]."""
        return float(self.moment_beyond(np.array([self.start_x]))[0]) + self.total * self.start_x

    @property
    def breaks(self) -> Floats:
        """Both ends."""
        return np.array([self.start_x, self.end_x])

    @property
    def points(self) -> tuple[Floats, Floats]:
        """No point loads."""
        return np.empty(0), np.empty(0)
