"""Where spars and ribs cross.

A spar is a line outboard, a rib a station, which is the line x = const, or a line across.  Two straight stretches from
p along r and from q along s cross where p + t r = q + u s with t and u from 0 to 1; with d = q − p and the product
a × b = a_x b_y − a_y b_x that is t = d × s / r × s and u = d × r / r × s.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from rigdesign.brief.context import frozen
from rigdesign.brief.model import Floats, Line
from rigdesign.brief.surface.fields import Points
from rigdesign.brief.surface.within import place
from rigdesign.display import counted, show
from rigdesign.errors import InputError
from rigdesign.words import MOST_PADS

CLOSE = 1e-9
"""Of the span: crossings nearer to each other are one, and a spar that ends so near to a rib meets it."""


@dataclass(frozen=True)
class Crossings:
    """Crossings by x, then y: x, y [m] (n,), and the numbers, from 0, of the spar and the rib of each (n,)."""

    x: Floats
    y: Floats
    spar: tuple[int, ...]
    rib: tuple[int, ...]

    def called(self, row: int) -> str:
        """How messages call a crossing: "the crossing of spar 1 and rib 3"."""
        return f"the crossing of spar {self.spar[row] + 1} and rib {self.rib[row] + 1}"


def crossings(
    spars: tuple[Line, ...],
    ribs: Floats | tuple[Points, ...],
    span: float,
    error: Callable[[InputError, str], InputError],
) -> Crossings:
    """Return where spars and ribs cross.

    Parameters
    ----------
    spars, ribs
        The spars, and the stations (n,) [m] or the lines of the ribs.
    span
        The specimen's span [m], which tolerances are of.
    error
        Adds the place in the brief to an error; called with the error and the key, "spars" or "ribs".

    Raises
    ------
    InputError
        If a spar meets no rib, a rib no spar, a spar and a rib run along each other, or two crossings are one.
    """
    for key, number in (("spars", len(spars)), ("ribs", len(ribs))):
        if number > MOST_PADS:
            raise error(InputError(f"there are {counted(number, key[:-1])}", limit=f"up to {MOST_PADS}"), key)
    found: list[tuple[float, float, int, int]] = []
    for number, spar in enumerate(spars):
        found += [(x, y, number, rib) for x, y, rib in _along(spar, number, ribs, span, error)]
    _check_all_meet(found, len(spars), ribs, error)
    found.sort()
    x, y = (frozen(np.array([row[k] for row in found])) for k in (0, 1))
    result = Crossings(x, y, tuple(row[2] for row in found), tuple(row[3] for row in found))
    if x.size > MOST_PADS:
        what = f"spars and ribs cross in {x.size} places, more than can be designed for"
        raise error(InputError(what, limit=f"up to {MOST_PADS}"), "ribs")
    _check_apart(result, span, error)
    return result


def _along(
    spar: Line,
    number: int,
    ribs: Floats | tuple[Points, ...],
    span: float,
    error: Callable[[InputError, str], InputError],
) -> list[tuple[float, float, int]]:
    """Return the crossings of one spar: x, y [m] and the rib's number from 0."""
    if isinstance(ribs, np.ndarray):
        met = np.flatnonzero((ribs >= spar.x[0] - CLOSE * span) & (ribs <= spar.x[-1] + CLOSE * span))
        return [(float(ribs[k]), float(spar.at(ribs[k : k + 1])[0]), int(k)) for k in met]
    result = []
    for rib, points in enumerate(ribs):
        places = _meet(spar, points, span)
        if places is None:
            what = f"spar {number + 1} and rib {rib + 1} run along each other"
            raise error(InputError(what, remedy="a rib goes across the spars"), "ribs")
        result += [(x, y, rib) for x, y in places]
    return result


def _meet(spar: Line, rib: Points, span: float) -> list[tuple[float, float]] | None:
    """Return where two lines cross, each place once; None where they run along each other."""
    p_x, p_y, r_x, r_y = spar.x[:-1, None], spar.y[:-1, None], np.diff(spar.x)[:, None], np.diff(spar.y)[:, None]
    q_x, q_y, s_x, s_y = rib.x[:-1], rib.y[:-1], np.diff(rib.x), np.diff(rib.y)
    d_x, d_y = q_x - p_x, q_y - p_y
    turn = r_x * s_y - r_y * s_x
    lengths = np.hypot(r_x, r_y) * np.hypot(s_x, s_y)
    is_parallel = np.abs(turn) <= CLOSE * lengths
    close = CLOSE * span
    if (is_parallel & _share_a_stretch(d_x, d_y, r_x, r_y, s_x, s_y, close)).any():
        return None
    safe = np.where(is_parallel, 1.0, turn)
    t, u = (d_x * s_y - d_y * s_x) / safe, (d_x * r_y - d_y * r_x) / safe
    slack_t, slack_u = close / np.hypot(r_x, r_y), close / np.hypot(s_x, s_y)
    hits = ~is_parallel & (t >= -slack_t) & (t <= 1 + slack_t) & (u >= -slack_u) & (u <= 1 + slack_u)
    places: list[tuple[float, float]] = []
    for i, j in np.argwhere(hits):
        x, y = float(p_x[i, 0] + t[i, j] * r_x[i, 0]), float(p_y[i, 0] + t[i, j] * r_y[i, 0])
        if all(np.hypot(x - other_x, y - other_y) > close for other_x, other_y in places):
            places.append((x, y))
    return places


def _share_a_stretch(
    d_x: Floats, d_y: Floats, r_x: Floats, r_y: Floats, s_x: Floats, s_y: Floats, close: float
) -> np.ndarray[tuple[int, ...], np.dtype[np.bool_]]:
    """Return whether pairs of stretches (n, k), taken to be parallel, lie on one line and overlap."""
    length = np.hypot(r_x, r_y)
    apart = np.abs(d_x * r_y - d_y * r_x) / length
    begins = (d_x * r_x + d_y * r_y) / length
    ends = begins + (s_x * r_x + s_y * r_y) / length
    overlap = np.minimum(np.maximum(begins, ends), length) - np.maximum(np.minimum(begins, ends), 0.0)
    return np.asarray((apart <= close) & (overlap > close))


def _check_all_meet(
    found: list[tuple[float, float, int, int]],
    spars: int,
    ribs: Floats | tuple[Points, ...],
    error: Callable[[InputError, str], InputError],
) -> None:
    """Raise InputError naming the first spar that meets no rib, or the first rib that meets no spar."""
    met_spars, met_ribs = {row[2] for row in found}, {row[3] for row in found}
    for number in range(spars):
        if number not in met_spars:
            raise error(InputError(f"spar {number + 1} meets no rib", remedy="lengthen it or delete it"), "spars")
    for number in range(len(ribs)):
        if number not in met_ribs:
            at = f" (x = {show(float(ribs[number]), 'length', unit='m')})" if isinstance(ribs, np.ndarray) else ""
            what = f"rib {number + 1}{at} meets no spar"
            raise error(InputError(what, remedy="move it or delete it"), "ribs")


def _check_apart(found: Crossings, span: float, error: Callable[[InputError, str], InputError]) -> None:
    """Raise InputError where two crossings are one place."""
    near = np.hypot(found.x[:, None] - found.x, found.y[:, None] - found.y) <= CLOSE * span
    pairs = np.argwhere(np.triu(near, 1))
    if pairs.size:
        one, other = (int(row) for row in pairs[0])
        what = f"{found.called(one)} and {found.called(other)} are one place"
        value = f"at {place(float(found.x[one]), float(found.y[one]))}"
        raise error(InputError(what, value=value, remedy="let each pair cross in a place of its own"), "ribs")
