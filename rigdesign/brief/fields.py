"""The leaves of the brief: how one value of the TOML file is read, and how the JSON Schema describes it.

Every leaf is checked here by our own functions, so that every message is ours; pydantic sees to the structure alone.
The functions raise InputError without a place; `rigdesign.brief.messages` adds it.
"""

from __future__ import annotations

import difflib
import math
import re
from collections.abc import Callable
from typing import Annotated, Any, Literal, NamedTuple

from pydantic import PlainValidator, WithJsonSchema

from rigdesign.brief.model import Floats, Grouping
from rigdesign.errors import InputError
from rigdesign.units import KINDS, in_words, quantities, quantity
from rigdesign.words import LARGEST_NUMBER, MOST_PADS

_NUMBER = r"[+-]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][+-]?[0-9]+)?"
_PLAIN = re.compile(rf"\s*{_NUMBER}\s*")
_LENGTH, _FORCE, _TIMES = "(mm|cm|m|km|in|ft)", "(mN|N|kN|MN|kgf|lbf|kip)", "[*·. -]?"
_MASS = "(kg|g|t|lb|slug)"
LONGEST_TITLE = 200
_UNITS = {
    "length": _LENGTH,
    "force": _FORCE,
    "running load": f"{_FORCE}/{_LENGTH}",
    "moment": f"({_FORCE}{_TIMES}{_LENGTH}|{_LENGTH}{_TIMES}{_FORCE})",
    "pressure": f"(Pa|kPa|MPa|GPa|bar|psi|ksi|psf|{_FORCE}/{_LENGTH}(\\^?2|²))",
    "angle": "(deg|rad)",
    "mass": _MASS,
    "density": f"{_MASS}/{_LENGTH}(\\^?3|³)",
    "fraction": "%",
}


def pattern(kind: str) -> dict[str, Any]:
    """JSON Schema of one quantity."""
    return {"type": "string", "pattern": rf"^\s*{_NUMBER}\s*{_UNITS[kind]}\s*$", "examples": [KINDS[kind].example]}


def checked(value: float, written: object, *, above: float | None, least: float | None, shown: str) -> float:
    """Return the value if it lies above `above` or is at least `least`; raise InputError otherwise."""
    if above is not None and not value > above:
        raise InputError("the value is too small", value=in_words(written), limit=f"more than {shown}")
    if least is not None and not value >= least:
        raise InputError("the value is too small", value=in_words(written), limit=f"{shown} or more")
    return value


def one_quantity(kind: str, *, above: float | None = None, least: float | None = None) -> Any:
    """The pair of reader and schema for one quantity, optionally bounded (a bound of 0 needs no unit)."""

    def read(value: object) -> float:
        return checked(quantity(value, kind), value, above=above, least=least, shown="0")

    return PlainValidator(read), WithJsonSchema(pattern(kind))


def number(*, above: float | None = None, least: float | None = None, nonzero: bool = False) -> Any:
    """The pair of reader and schema for a plain number without unit."""
    limits = {"exclusiveMinimum": above} if above is not None else {"minimum": least} if least is not None else {}

    def read(value: object) -> float:
        if isinstance(value, bool) or not isinstance(value, int | float):
            remedy = "write it without quotes" if isinstance(value, str) and _PLAIN.fullmatch(value) else ""
            raise InputError("a plain number is due", value=in_words(value), limit="such as 1.5", remedy=remedy)
        if not math.isfinite(value):
            raise InputError("a finite number is due", value=in_words(value))
        if abs(value) > LARGEST_NUMBER:
            raise InputError("the number is too large", value=in_words(value), limit=f"up to {LARGEST_NUMBER:g}")
        if nonzero and value == 0:
            raise InputError("the number must not be zero: it would leave no load", value=in_words(value))
        shown = f"{above if above is not None else least if least is not None else 0:g}"
        return checked(float(value), value, above=above, least=least, shown=shown)

    return PlainValidator(read), WithJsonSchema({"type": "number", **limits})


def choice(*words: str) -> Any:
    """The pair of reader and schema for one word out of several."""

    def read(value: object) -> str:
        if value in words:
            return str(value)
        lowered = {word.lower(): word for word in words}
        near = difflib.get_close_matches(value.lower(), lowered, n=1) if isinstance(value, str) else []
        remedy = f'did you mean "{lowered[near[0]]}"?' if near else ""
        raise InputError("this is none of the words due", value=in_words(value), limit=_either(words), remedy=remedy)

    return PlainValidator(read), WithJsonSchema({"type": "string", "enum": list(words)})


def _either(words: tuple[str, ...]) -> str:
    quoted = [f'"{word}"' for word in words]
    return " or ".join(([", ".join(quoted[:-1])] if len(quoted) > 1 else []) + quoted[-1:])


def _text(value: object) -> str:
    if not isinstance(value, str) or not value.strip():
        raise InputError("a text in quotes is due", value=in_words(value))
    return value


def _title(value: object) -> str:
    """Read a title: one line, since it stands on a terminal, in figures and in tables."""
    text = _text(value)
    if not text.isprintable() or len(text) > LONGEST_TITLE:
        what = "a title is one line of plain text" if not text.isprintable() else "the title is too long"
        raise InputError(what, value=in_words(text), limit=f"up to {LONGEST_TITLE} characters, without line ends")
    return text


def _whole(value: object) -> int:
    if isinstance(value, bool) or not isinstance(value, int):
        raise InputError("a whole number is due", value=in_words(value), limit="1 or more")
    if value < 1:
        raise InputError("the number is too small", value=str(value), limit="1 or more")
    return value


def _count(value: object) -> int | Literal["fewest"]:
    if value == "fewest":
        return "fewest"
    limit = f'a whole number from 1 to {MOST_PADS}, or "fewest"'
    try:
        count = _whole(value)
    except InputError as error:
        raise InputError(error.what, value=error.value, limit=limit) from None
    if count > MOST_PADS:
        raise InputError("these are more pads than a rig can have here", value=in_words(count), limit=limit)
    return count


def several(count: int | None = None) -> Callable[[object], Floats]:
    """A reader of a list of lengths, of a given number if `count` is given."""

    def read(value: object) -> Floats:
        result = quantities(value, "length")
        if count is not None and result.size != count:
            raise InputError(
                f"{count} lengths are due, and this holds {result.size}",
                value=in_words(value),
                limit='such as ["0.4 m", "5.6 m"]',
            )
        result.setflags(write=False)
        return result

    return read


def _pairs(value: object) -> tuple[tuple[float, float], ...]:
    if not isinstance(value, list):
        raise InputError("a list of pairs is due", value=in_words(value), limit='such as [["1.40 m", "1.52 m"]]')
    if value and all(isinstance(item, str) for item in value):
        raise InputError(
            "a list of pairs is due, each in its own brackets",
            value=in_words(value),
            limit='such as [["1.40 m", "1.52 m"]]',
        )
    pairs = [several(2)(item) for item in value]
    return tuple((float(start), float(end)) for start, end in pairs)


def _reversed_columns(value: object) -> tuple[str, ...]:
    names = value if isinstance(value, list) else [value]
    for name in names:
        if name not in ("shear", "moment", "torsion"):
            raise InputError(
                "this is no column whose sign can be reversed",
                value=in_words(name),
                limit='a list of "shear" and "moment"',
            )
    return tuple(dict.fromkeys(names))


def _grouping(value: object) -> Grouping:
    """Read nested groups of two or three pad numbers, each pad used once."""
    seen: set[int] = set()
    result = _group(value, seen)
    if isinstance(result, int):
        raise InputError("a list of two is due", value=in_words(value), limit="such as [[1, 2], [3, [4, 5]]]")
    return result


def _group(value: object, seen: set[int]) -> int | Grouping:
    if isinstance(value, list):
        if len(value) not in (2, 3):
            raise InputError(
                f"a lever joins two and a plate three, and this group holds {len(value)}",
                value=in_words(value),
                limit="such as [[1, 2], [3, [4, 5]]]",
            )
        return tuple(_group(item, seen) for item in value)
    if isinstance(value, bool) or not isinstance(value, int) or value < 1:
        raise InputError("a group holds pad numbers and groups", value=in_words(value), limit="pad numbers from 1")
    if value in seen:
        raise InputError("each pad hangs in one place only, and this one is named twice", value=f"pad {value}")
    seen.add(value)
    return value


class Amount(NamedTuple):
    """An accepted error: a fraction, or a quantity in SI where `absolute`."""

    value: float
    absolute: bool


def band(kind: str) -> Any:
    """The pair of reader and schema for a band: a percentage, or a quantity of `kind`."""

    def read(value: object) -> Amount:
        is_fraction = isinstance(value, str) and value.rstrip().endswith("%")
        try:
            amount = quantity(value, "fraction" if is_fraction else kind)
        except InputError as error:
            limit = f'a percentage such as "2 %", or a {kind} such as "{KINDS[kind].example}"'
            raise InputError(error.what, value=error.value, limit=limit, remedy=error.remedy) from None
        return Amount(checked(amount, value, above=None, least=0.0, shown="0"), not is_fraction)

    return PlainValidator(read), WithJsonSchema({"anyOf": [pattern("fraction"), pattern(kind)]})


_lengths_schema = {"anyOf": [{"type": "string"}, {"type": "array", "items": pattern("length"), "minItems": 1}]}
_pair_schema = {"type": "array", "items": pattern("length"), "minItems": 2, "maxItems": 2}
_group_schema = {"type": "array", "minItems": 2, "maxItems": 3, "items": {"type": ["integer", "array"]}}

Text = Annotated[str, PlainValidator(_text), WithJsonSchema({"type": "string", "minLength": 1})]
Title = Annotated[
    str, PlainValidator(_title), WithJsonSchema({"type": "string", "minLength": 1, "maxLength": LONGEST_TITLE})
]
Length = Annotated[float, *one_quantity("length")]
PositiveLength = Annotated[float, *one_quantity("length", above=0.0)]
LengthOrZero = Annotated[float, *one_quantity("length", least=0.0)]
Force = Annotated[float, *one_quantity("force")]
PositiveForce = Annotated[float, *one_quantity("force", above=0.0)]
ForceOrZero = Annotated[float, *one_quantity("force", least=0.0)]
RunningLoad = Annotated[float, *one_quantity("running load")]
PositivePressure = Annotated[float, *one_quantity("pressure", above=0.0)]
Percentage = Annotated[float, *one_quantity("fraction", above=0.0)]
PercentageOrZero = Annotated[float, *one_quantity("fraction", least=0.0)]
Factor = Annotated[float, *number(nonzero=True)]
PositiveNumber = Annotated[float, *number(above=0.0)]
Ratio = Annotated[float, *number(least=1.0)]
Whole = Annotated[int, PlainValidator(_whole), WithJsonSchema({"type": "integer", "minimum": 1})]
Count = Annotated[
    int | Literal["fewest"],
    PlainValidator(_count),
    WithJsonSchema({"anyOf": [{"type": "integer", "minimum": 1, "maximum": MOST_PADS}, {"const": "fewest"}]}),
]
Lengths = Annotated[Any, PlainValidator(several()), WithJsonSchema(_lengths_schema)]
TwoLengths = Annotated[Any, PlainValidator(several(2)), WithJsonSchema({"anyOf": [{"type": "string"}, _pair_schema]})]
Pairs = Annotated[
    tuple[tuple[float, float], ...],
    PlainValidator(_pairs),
    WithJsonSchema({"type": "array", "items": _pair_schema}),
]
Columns = Annotated[
    tuple[str, ...],
    PlainValidator(_reversed_columns),
    WithJsonSchema({"type": "array", "items": {"enum": ["shear", "moment", "torsion"]}}),
]
Groups = Annotated[Any, PlainValidator(_grouping), WithJsonSchema(_group_schema)]
MomentBand = Annotated[Amount, *band("moment")]
ShearBand = Annotated[Amount, *band("force")]
SupportWord = Annotated[Literal["cantilever", "two supports"], *choice("cantilever", "two supports")]
GravityWord = Annotated[Literal["against", "with"], *choice("against", "with")]
ShapeWord = Annotated[
    Literal["uniform", "linear", "triangular", "elliptical", "parabolic", "power", "sine", "schrenk"],
    *choice("uniform", "linear", "triangular", "elliptical", "parabolic", "power", "sine", "schrenk"),
]
EndWord = Annotated[Literal["root", "tip"], *choice("root", "tip")]
OriginWord = Annotated[Literal["root", "tip"], *choice("root", "tip")]
PlacesWord = Annotated[Literal["free", "fixed", "hard points"], *choice("free", "fixed", "hard points")]
ActionWord = Annotated[Literal["pull", "push"], *choice("pull", "push")]
AimWord = Annotated[Literal["closest", "even"], *choice("closest", "even")]
OfWord = Annotated[Literal["peak", "local"], *choice("peak", "local")]
