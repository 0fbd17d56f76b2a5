"""The leaves of a brief that speak of plan: a place, a line, ribs, a direction."""

from __future__ import annotations

from typing import Annotated, Any, Literal, NamedTuple

import numpy as np
from pydantic import PlainValidator, WithJsonSchema

from rigdesign.brief.fields import Amount, checked, choice, one_quantity, pattern, several
from rigdesign.brief.model import Floats, Line
from rigdesign.errors import InputError
from rigdesign.units import in_words, quantities, quantity

_LINE_EXAMPLE = 'such as [["0 m", "0 m"], ["3.2 m", "-0.20 m"]]'


class Place(NamedTuple):
    """A place as a brief writes it: a station x [m], and y [m] where it is given."""

    x: float
    y: float | None


class Points(NamedTuple):
    """Points of a rib that is given as a line: x, y [m], (n,) each, y rising or falling from point to point."""

    x: Floats
    y: Floats


def _place(value: object) -> Place:
    if isinstance(value, list):
        if len(value) != 2:
            limit = 'such as "1.1 m", or on a surface ["1.1 m", "0.05 m"]'
            raise InputError("a place is a station, or x and y", value=in_words(value), limit=limit)
        x, y = (quantity(item, "length") for item in value)
        return Place(x, y)
    return Place(quantity(value, "length"), None)


def _points(value: object) -> tuple[Floats, Floats]:
    """Read a list of points as x, y (n,) each."""
    if not isinstance(value, list) or not value or not all(isinstance(item, list) for item in value):
        raise InputError("a line is a list of points, each x and y", value=in_words(value), limit=_LINE_EXAMPLE)
    if len(value) < 2:
        raise InputError("a line has two points or more", value=in_words(value), limit=_LINE_EXAMPLE)
    pairs = np.array([several(2)(item) for item in value])
    x, y = pairs[:, 0].copy(), pairs[:, 1].copy()
    x.setflags(write=False)
    y.setflags(write=False)
    return x, y


def _line(value: object) -> Line:
    """Read a line whose x rises from point to point."""
    x, y = _points(value)
    back = np.flatnonzero(np.diff(x) <= 0)
    if back.size:
        assert isinstance(value, list)
        number = int(back[0]) + 1
        raise InputError(
            f"the line turns back at its point {number + 1}",
            value=f"{in_words(value[number])} after {in_words(value[number - 1])}",
            limit="x greater from point to point",
        )
    return Line(x, y)


def _lines(value: object) -> tuple[Line, ...]:
    """Read a list of lines; one line alone is answered with its missing brackets."""
    if not isinstance(value, list) or not value:
        raise InputError("a list of lines is due", value=in_words(value), limit=f"lines {_LINE_EXAMPLE}")
    if all(isinstance(item, list) and item and isinstance(item[0], str) for item in value):
        raise InputError(
            "a list of lines is due, and this is one line",
            value=in_words(value),
            remedy="put one more pair of brackets around it",
        )
    return tuple(_named(_line, item, number) for number, item in enumerate(value, start=1))


def _named(read: Any, item: object, number: int) -> Any:
    """Read one line of several; a message says which."""
    try:
        return read(item)
    except InputError as error:
        raise InputError(
            f"line {number}: {error.what}", value=error.value, limit=error.limit, remedy=error.remedy
        ) from None


def _rib(value: object) -> Points:
    """Read a rib's line, which goes across: y rises or falls from point to point."""
    x, y = _points(value)
    step = np.diff(y)
    turned = np.flatnonzero(step * np.sign(step[0]) <= 0)
    if turned.size:
        assert isinstance(value, list)
        number = int(turned[0]) + 1
        raise InputError(
            f"the rib turns back at its point {number + 1}",
            value=f"{in_words(value[number])} after {in_words(value[number - 1])}",
            limit="y rises, or falls, from point to point",
        )
    return Points(x, y)


def _ribs(value: object) -> Floats | tuple[Points, ...]:
    """Read ribs: stations (n,) [m] in order, or lines."""
    if isinstance(value, list) and value and all(isinstance(item, list) for item in value):
        return tuple(_named(_rib, item, number) for number, item in enumerate(value, start=1))
    stations = quantities(value, "length")
    if np.any(np.diff(stations) <= 0):
        raise InputError("the stations of the ribs must be in order of x, each once", value=in_words(value))
    stations.setflags(write=False)
    return stations


def _turn(value: object) -> Literal["along x", "along axis"] | float:
    """Read the direction of a footprint: one of two words, or an angle [rad]."""
    if value == "along x":
        return "along x"
    if value == "along axis":
        return "along axis"
    try:
        return quantity(value, "angle")
    except InputError as error:
        limit = '"along x", "along axis", or an angle such as "12 deg"'
        raise InputError(error.what, value=error.value, limit=limit, remedy=error.remedy) from None


def _percentage_band(value: object) -> Amount:
    """Read a band that is a percentage, since it holds for a force and a moment at once."""
    return Amount(checked(quantity(value, "fraction"), value, above=None, least=0.0, shown="0"), False)


def _flag(value: object) -> bool:
    if not isinstance(value, bool):
        raise InputError("true or false is due, without quotes", value=in_words(value))
    return value


_pair_schema = {"type": "array", "items": pattern("length"), "minItems": 2, "maxItems": 2}
_points_schema = {"type": "array", "items": _pair_schema, "minItems": 2}
_line_list_schema = {"type": "array", "items": _points_schema, "minItems": 1}
_ribs_schema = {
    "anyOf": [
        {"type": "string"},
        {"type": "array", "items": pattern("length"), "minItems": 1},
        _line_list_schema,
    ]
}
_turn_schema = {"anyOf": [{"enum": ["along x", "along axis"]}, pattern("angle")]}

PlaceOrStation = Annotated[Place, PlainValidator(_place), WithJsonSchema({"anyOf": [pattern("length"), _pair_schema]})]
OneLine = Annotated[Line, PlainValidator(_line), WithJsonSchema(_points_schema)]
Lines = Annotated[tuple[Line, ...], PlainValidator(_lines), WithJsonSchema(_line_list_schema)]
Ribs = Annotated[Any, PlainValidator(_ribs), WithJsonSchema(_ribs_schema)]
Turn = Annotated[Literal["along x", "along axis"] | float, PlainValidator(_turn), WithJsonSchema(_turn_schema)]
AcrossBand = Annotated[Amount, PlainValidator(_percentage_band), WithJsonSchema(pattern("fraction"))]
Flag = Annotated[bool, PlainValidator(_flag), WithJsonSchema({"type": "boolean"})]
Couple = Annotated[float, *one_quantity("moment")]
CutWord = Annotated[Literal["square to x", "square to axis"], *choice("square to x", "square to axis")]
PairWord = Annotated[Literal["across first", "along first", "any"], *choice("across first", "along first", "any")]
