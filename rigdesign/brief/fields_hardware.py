"""The leaves of [hardware] and [keep]."""

from __future__ import annotations

from typing import Annotated, Any, Literal

import numpy as np
from pydantic import PlainValidator, WithJsonSchema

from rigdesign.brief.fields import choice, number, one_quantity, pattern
from rigdesign.brief.model_hardware import Build
from rigdesign.errors import InputError
from rigdesign.units import in_words, quantities, quantity
from rigdesign.words import GRADES, PIN_GRADES

BUILDS: tuple[Build, ...] = ("twin flats", "twin channels", "hollow section")
LONGEST_REVISION = 20


def _angle_up_to(most: str) -> Any:
    """The pair of reader and schema for an angle above zero, up to `most`."""
    largest = quantity(most, "angle")

    def read(value: object) -> float:
        angle = quantity(value, "angle")
        if not 0 < angle <= largest:
            what = "the angle is too large" if angle > 0 else "the angle is too small"
            raise InputError(what, value=in_words(value), limit=f"more than 0, up to {most}")
        return angle

    return PlainValidator(read), WithJsonSchema(pattern("angle"))


def _builds(value: object) -> tuple[Build, ...]:
    """Read one build, or a list of builds tier by tier."""
    listed = value if isinstance(value, list) else [value]
    if not listed:
        limit = 'such as ["twin channels", "twin flats"], from the jack'
        raise InputError("at least one build is due, and this is empty", value="[]", limit=limit)
    read = choice(*BUILDS)[0].func
    return tuple(read(item) for item in listed)


def _diameters(value: object) -> tuple[float, ...]:
    """Read diameters in rising order."""
    result = quantities(value, "length")
    if not (result > 0).all():
        raise InputError("a pin has a diameter above zero", value=in_words(value), limit="more than 0")
    if (np.diff(result) <= 0).any():
        what = "the pins must be in rising order, each diameter once"
        raise InputError(what, value=in_words(value), limit='such as "8, 10, 12 mm"')
    return tuple(float(diameter) for diameter in result)


def _revision(value: object) -> str:
    """Read a short text: it stands in the title block of every sheet."""
    limit = f'up to {LONGEST_REVISION} characters in quotes, such as "B"'
    if not isinstance(value, str) or not value.strip():
        raise InputError("a short text in quotes is due", value=in_words(value), limit=limit)
    if not value.isprintable() or len(value) > LONGEST_REVISION:
        is_long = value.isprintable()
        what = "the revision is too long" if is_long else "a revision is one line of plain text"
        raise InputError(what, value=in_words(value), limit=limit)
    return value


_build_schema = choice(*BUILDS)[1].json_schema
_lengths_schema = {"anyOf": [{"type": "string"}, {"type": "array", "items": pattern("length"), "minItems": 1}]}

Builds = Annotated[
    Any,
    PlainValidator(_builds),
    WithJsonSchema({"anyOf": [_build_schema, {"type": "array", "items": _build_schema, "minItems": 1}]}),
]
GradeWord = Annotated[str, *choice(*GRADES)]
PinGradeWord = Annotated[str, *choice(*PIN_GRADES)]
RulesWord = Annotated[Literal["BTH-1", "EN 1993", "AISC 360"], *choice("BTH-1", "EN 1993", "AISC 360")]
LinksWord = Annotated[Literal["rod", "strap", "webbing"], *choice("rod", "strap", "webbing")]
MarksWord = Annotated[Literal["as drilled", "few"], *choice("as drilled", "few")]
BalanceWord = Annotated[Literal["as needed", "none", "counterweights"], *choice("as needed", "none", "counterweights")]
FactorOnStrength = Annotated[float, *number(least=1.0)]
Diameters = Annotated[Any, PlainValidator(_diameters), WithJsonSchema(_lengths_schema)]
Turn = Annotated[float, *_angle_up_to("20 deg")]
Swing = Annotated[float, *_angle_up_to("45 deg")]
Density = Annotated[float, *one_quantity("density", above=0.0)]
MassOrZero = Annotated[float, *one_quantity("mass", least=0.0)]
Revision = Annotated[
    str, PlainValidator(_revision), WithJsonSchema({"type": "string", "minLength": 1, "maxLength": LONGEST_REVISION})
]
