"""What follows from a section's geometry: area, second moments, moduli, torsion constant.

All lengths in m.  The strong axis is level, the depth stands upright: `inertia`, `modulus` and `plastic` are of bending
in the upright plane, `inertia_weak` of bending sideways.
"""

from __future__ import annotations

from dataclasses import dataclass
from math import pi
from typing import NamedTuple


@dataclass(frozen=True)
class Properties:
    """`area` [m²]; `inertia`, `inertia_weak`, `torsion` [m⁴]; `modulus`, `plastic` (strong axis) [m³]."""

    area: float
    inertia: float
    inertia_weak: float
    torsion: float
    modulus: float
    plastic: float


def flat(depth: float, thickness: float) -> Properties:
    """Return the properties of a flat that stands on edge.

    A = d t, I = t d³/12, W = t d²/6, Wpl = t d²/4, and with the larger side c and the smaller e the torsion constant
    c e³ [1/3 − 0.21 e/c (1 − e⁴/(12 c⁴))].

    Parameters
    ----------
    depth, thickness
        Both above 0 [m]; either may be the larger.

    Raises
    ------
    ValueError
        Where a size is not above 0.

    Notes
    -----
    The torsion constant: Young & Budynas, Roark's Formulas for Stress and Strain (from memory); within 0.5 % of
    Saint-Venant's series for every ratio of the sides.

    Examples
    --------
    >>> round(flat(0.1, 0.01).modulus * 1e6, 3)  # cm³
    16.667
    """
    _above_zero(depth=depth, thickness=thickness)
    long, short = max(depth, thickness), min(depth, thickness)
    return Properties(
        area=depth * thickness,
        inertia=thickness * depth**3 / 12,
        inertia_weak=depth * thickness**3 / 12,
        torsion=long * short**3 * (1 / 3 - 0.21 * short / long * (1 - short**4 / (12 * long**4))),
        modulus=thickness * depth**2 / 6,
        plastic=thickness * depth**2 / 4,
    )


def outer_radius(thickness: float) -> float:
    """Return the outer corner radius [m] that goes with a wall [m] of a cold formed hollow section.

    2 t up to 6 mm, 2.5 t up to 10 mm, 3 t above: EN 10219-2, on which section tables are computed.

    >>> outer_radius(0.008)
    0.02
    """
    _above_zero(thickness=thickness)
    if thickness <= 0.006:
        return 2.0 * thickness
    return (2.5 if thickness <= 0.010 else 3.0) * thickness


def hollow(depth: float, width: float, thickness: float, radius: float) -> Properties:
    """Return the properties of a rectangular hollow section.

    Rectangle less corners outside, less the same inside: A = Ao − Ai, I = Io − Ii and so on, the inner corner radius
    being the outer one less the wall (0 where the outer one is smaller).  Torsion by Bredt with the wall's own part,
    It = 4 Am² t/s + s t³/3, Am enclosed by the wall's middle line of length s.

    Parameters
    ----------
    depth, width
        Outer sizes [m].
    thickness
        Of the wall [m], less than half of either.
    radius
        Outer corner radius [m], from 0 to half of the smaller side.

    Raises
    ------
    ValueError
        Where a size is not above 0, nothing would be hollow, or the corners do not fit.

    Notes
    -----
    EN 10219-2, Annex B computes the same way.

    Examples
    --------
    >>> tube = hollow(0.06, 0.04, 0.003, 0.006)
    >>> round(tube.area * 1e4, 2), round(tube.inertia * 1e8, 2), round(tube.torsion * 1e8, 1)  # cm², cm⁴, cm⁴
    (5.41, 25.38, 29.3)
    """
    _above_zero(depth=depth, width=width, thickness=thickness)
    if 2 * thickness >= min(depth, width) or not 0 <= radius <= min(depth, width) / 2:
        raise ValueError(f"no hollow section: {depth} × {width} × {thickness} m, corner radius {radius} m")
    inner_sizes, inner_radius = (depth - 2 * thickness, width - 2 * thickness), max(radius - thickness, 0.0)
    outer, inner = _rounded(depth, width, radius), _rounded(*inner_sizes, inner_radius)
    middle = (radius + inner_radius) / 2
    length = 2 * (depth + width - 2 * thickness) - (8 - 2 * pi) * middle
    enclosed = (depth - thickness) * (width - thickness) - (4 - pi) * middle**2
    inertia = outer.inertia - inner.inertia
    return Properties(
        area=outer.area - inner.area,
        inertia=inertia,
        inertia_weak=outer.inertia_weak - inner.inertia_weak,
        torsion=4 * enclosed**2 * thickness / length + length * thickness**3 / 3,
        modulus=inertia / (depth / 2),
        plastic=outer.plastic - inner.plastic,
    )


def channel(depth: float, width: float, web: float, flange: float) -> Properties:
    """Return the properties of a channel whose flanges are parallel, without roundings or fillets.

    Two flanges of `width` × `flange` and a web of `web` × (depth − 2 flange); the weak axis goes through the centre,
    and It = Σ b t³/3 over the three, which leaves the fillets' help out.

    Parameters
    ----------
    depth, width
        Outer sizes [m].
    web, flange
        Thicknesses [m]; the web less than the width, the flange less than half the depth.

    Raises
    ------
    ValueError
        Where a size is not above 0 or no channel is left.

    Examples
    --------
    >>> c = channel(0.1, 0.05, 0.006, 0.0085)  # the sizes of a UPN 100, in tables 13.5 cm² and 206 cm⁴
    >>> round(c.area * 1e4, 2), round(c.inertia * 1e8, 1)
    (13.48, 207.0)
    """
    _above_zero(depth=depth, width=width, web=web, flange=flange)
    if web >= width or 2 * flange >= depth:
        raise ValueError(f"no channel: {depth} × {width} m, web {web} m, flange {flange} m")
    clear = depth - 2 * flange
    area = 2 * width * flange + clear * web
    centre = (width**2 * flange + clear * web**2 / 2) / area  # from the web's back
    inertia = (width * depth**3 - (width - web) * clear**3) / 12
    about_back = (2 * flange * width**3 + clear * web**3) / 3
    return Properties(
        area=area,
        inertia=inertia,
        inertia_weak=about_back - area * centre**2,
        torsion=(2 * width * flange**3 + clear * web**3) / 3,
        modulus=inertia / (depth / 2),
        plastic=width * flange * (depth - flange) + web * clear**2 / 4,
    )


class _Solid(NamedTuple):
    """Area [m²], second moments [m⁴] and plastic modulus [m³] of what has no hollow."""

    area: float
    inertia: float
    inertia_weak: float
    plastic: float


def _rounded(depth: float, width: float, radius: float) -> _Solid:
    """A rectangle with rounded corners: the rectangle less its four spandrels."""
    spandrel = (1 - pi / 4) * radius**2
    off = (10 - 3 * pi) / (12 - 3 * pi) * radius  # the spandrel's centre from either side
    own = (1 / 3 - pi / 16 - 1 / (9 * (4 - pi))) * radius**4
    up, across = depth / 2 - off, width / 2 - off
    return _Solid(
        area=depth * width - 4 * spandrel,
        inertia=width * depth**3 / 12 - 4 * (own + spandrel * up**2),
        inertia_weak=depth * width**3 / 12 - 4 * (own + spandrel * across**2),
        plastic=width * depth**2 / 4 - 4 * spandrel * up,
    )


def _above_zero(**sizes: float) -> None:
    for name, size in sizes.items():
        if not size > 0:
            raise ValueError(f"{name} must be above 0 m, not {size} m")
