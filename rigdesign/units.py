"""Units at the edges: quantities written with their unit become plain SI floats, and SI floats become text for people.

Inside rigdesign everything is a float in N, m, kg, Pa, rad.  A quantity in a brief is a string, "5.4 kN"; a column of
a table carries its unit in the heading, "x [in]"; a fraction is a percentage, "2 %".  Only the units of the trade are
known (units.txt).  `lb` is a mass and `lbf` a force, `kg` a mass and `kgf` a force: nothing is guessed between them.

Factors are kept as exact fractions, so "300 mm" and "0.3 m" give the same float, and so do 126 inches written in a
brief and in a column headed "x [in]".

Depends on: errors, unit_factors, display, words.
"""

from __future__ import annotations

import json
import re
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING

from rigdesign.display import show as show
from rigdesign.errors import InputError
from rigdesign.unit_factors import Dimensions, unit_factor
from rigdesign.words import LARGEST_NUMBER

if TYPE_CHECKING:
    import numpy as np
    from numpy.typing import NDArray


@dataclass(frozen=True)
class Kind:
    """A kind of quantity: its SI unit as rigdesign writes it, and an example as a brief writes it."""

    name: str
    unit: str
    example: str

    @property
    def article(self) -> str:
        """The kind with its article, for messages: "a force", "an angle"."""
        return "a percentage" if self.unit == "%" else ("an " if self.name[0] in "aeiou" else "a ") + self.name

    @property
    def accepted(self) -> str:
        """What is accepted, for messages."""
        if self.unit == "%":
            return f'a percentage, such as "{self.example}"'
        return f'a number with a unit of {self.name}, such as "{self.example}"'


KINDS = {
    kind.name: kind
    for kind in (
        Kind("length", "m", "1.2 m"),
        Kind("force", "N", "5.4 kN"),
        Kind("mass", "kg", "12 kg"),
        Kind("mass per length", "kg/m", "7.5 kg/m"),
        Kind("density", "kg/m^3", "7850 kg/m^3"),
        Kind("running load", "N/m", "1.8 kN/m"),
        Kind("moment", "N*m", "50 N*m"),
        Kind("pressure", "Pa", "60 kPa"),
        Kind("running torque", "N*m/m", "90 N*m/m"),
        Kind("angle", "rad", "5 deg"),
        Kind("time", "s", "3 s"),
        Kind("fraction", "%", "2 %"),
    )
}
"""Every kind of quantity that a brief or a table can hold, by name."""

NUMBER = r"[+\-−]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+\-−]?[0-9]+)?"
"""A number as a brief may write it: digits, a decimal point, a power of ten; no spaces or commas within."""

_QUANTITY = re.compile(rf"\s*({NUMBER})\s*(.*?)\s*", re.DOTALL)
_HEADING = re.compile(r"\s*([^\[\]]*?)\s*(?:\[\s*([^\[\]]*?)\s*\])?\s*")
_MASS_AND_FORCE = (("lb", "lbf"), ("kg", "kgf"))
# beyond these the exact product is pointless and its integers would be huge
_EXACT_FROM, _EXACT_TO = 1e-60, 1e60


def exact_factor(unit: str, kind: str, where: str = "", value: str = "") -> Fraction:
    """Return what one `unit` is in the SI unit of `kind`, exactly; `where` and `value` are for the message.

    Raises
    ------
    InputError
        If the unit is missing, unknown, or not one of this kind.

    Examples
    --------
    >>> float(exact_factor("lbf/in", "running load"))
    175.1268352464764
    """
    wanted = KINDS[kind]
    if kind == "fraction" and unit == "%":
        return Fraction(1, 100)
    try:
        if kind == "fraction" or unit == "%":
            raise InputError(f"{wanted.article} is due, and the unit is {unit}", limit=wanted.accepted)
        factor, dimensions = unit_factor(unit)
        if dimensions != unit_factor(wanted.unit)[1]:
            raise _wrong_kind(unit, dimensions, wanted)
    except InputError as error:
        limit = error.limit or wanted.accepted
        raise InputError(
            error.what, where=where, value=value or error.value, limit=limit, remedy=error.remedy
        ) from None
    return factor


def _wrong_kind(unit: str, dimensions: Dimensions, wanted: Kind) -> InputError:
    """Return the error for a unit of another kind; pounds and kilograms of mass and of force get their own advice."""
    due = unit_factor(wanted.unit)[1]
    measured = [kind for kind in KINDS.values() if kind.unit != "%" and unit_factor(kind.unit)[1] == dimensions]
    found = f"a unit of {measured[0].name}" if measured else "another kind of unit"
    remedy = ""
    for mass, force in _MASS_AND_FORCE:
        for written, other, meaning in ((mass, force, "mass"), (force, mass, "force")):
            replaced = re.sub(rf"\b{written}\b", other, unit)
            if replaced != unit and unit_factor(replaced)[1] == due:
                remedy = f"{written} is always a {meaning}; if {other} is meant, write {replaced}"
    return InputError(f"{wanted.article} is due, and {unit} is {found}", limit=wanted.accepted, remedy=remedy)


def quantity(value: object, kind: str, where: str = "") -> float:
    """Return a quantity written with its unit as an SI float.

    Parameters
    ----------
    value
        What the file holds; a string with one number and one unit, such as "5.4 kN".  A fraction is a percentage.
    kind
        A name of `KINDS`.
    where
        The place in the file, for the message.

    Raises
    ------
    InputError
        If it is a bare number, empty, not finite, an arithmetic expression, or of another kind.

    Examples
    --------
    >>> quantity("5.4 kN", "force"), quantity("12 in", "length"), quantity("2 %", "fraction")
    (5400.0, 0.3048, 0.02)
    """
    number, unit = _number_and_unit(value, KINDS[kind], where)
    if not unit:
        raise _bare(number, KINDS[kind], where)
    return _scale(number, exact_factor(unit, kind, where, f'"{value}"'), str(value), where)


def _number_and_unit(value: object, kind: Kind, where: str) -> tuple[str, str]:
    """Split "5.4 kN" into number and unit, the unit maybe empty; raise InputError where it is no quantity at all."""
    if isinstance(value, int | float) and not isinstance(value, bool):
        raise _bare(repr(value), kind, where)
    limit = kind.accepted
    if not isinstance(value, str):
        raise InputError(f"{kind.article} with its unit is due", where=where, value=in_words(value), limit=limit)
    if not value.strip():
        raise InputError(f"{kind.article} with its unit is due, and this is empty", where=where, limit=limit)
    match = _QUANTITY.fullmatch(value)
    if match is None:
        raise InputError(f"{kind.article} is one number and its unit", where=where, value=f'"{value}"', limit=limit)
    number, unit = match.groups()
    if re.match(r",\s*[0-9]", unit):
        what = f"{kind.article} is one number and its unit, with a decimal point and no commas"
        raise InputError(what, where=where, value=f'"{value}"', limit=limit)
    if unit[:1] in tuple("+-−*/^(=") or re.search(r"(?<![A-Za-z^*])[0-9]|[+()=]", unit):
        what = f"{kind.article} is one number and one unit; nothing is calculated here"
        raise InputError(what, where=where, value=f'"{value}"', limit=limit)
    return number.replace("−", "-"), unit


def _bare(number: str, kind: Kind, where: str) -> InputError:
    """Return the error for a number without its unit."""
    missing = "per cent sign" if kind.name == "fraction" else "unit"
    what = f"{kind.article} is due with its {missing}, and this is a bare number"
    return InputError(what, where=where, value=number, limit=kind.accepted)


def in_words(value: object) -> str:
    """Return a value of a file for a message, much as the file writes it and not too long."""
    text = json.dumps(value, ensure_ascii=False, default=str)
    return text if len(text) <= 60 else text[:57] + "..."


def _scale(number: str, factor: Fraction, written: str, where: str) -> float:
    """Return number times factor, rounded once."""
    plain = float(number)
    is_exact = _EXACT_FROM < abs(plain) < _EXACT_TO
    result = float(Fraction(number) * factor) if is_exact else plain * float(factor)
    if not abs(result) <= LARGEST_NUMBER:
        limit = f"up to {LARGEST_NUMBER:g} in SI units"
        raise InputError("the number is too large", where=where, value=f'"{written}"', limit=limit)
    return result


def quantities(value: object, kind: str, where: str = "") -> NDArray[np.float64]:
    """Return several quantities as an SI array (n,): a list of strings, or one string such as "0.30, 0.61, 0.95 m".

    In one string, either the last number alone carries the unit, which then holds for all, or each number carries its
    own.  Raises InputError as `quantity` does, and for an empty list.

    Examples
    --------
    >>> quantities("0.30, 0.61, 0.95 m", "length").tolist()
    [0.3, 0.61, 0.95]
    >>> quantities(["12 in", "0.5 m"], "length").tolist()
    [0.3048, 0.5]
    """
    import numpy as np

    wanted = KINDS[kind]
    items: Sequence[object]
    if isinstance(value, str):
        items = value.split(",")
    elif isinstance(value, list | tuple):
        items = value
    else:
        items = [value]  # a bare number: answered as one
    if not items or items == [""]:
        raise InputError(f"at least one {kind} is due, and this is empty", where=where)
    split = [_number_and_unit(item, wanted, where) for item in items]
    units = [unit for _, unit in split]
    if isinstance(value, str) and units[-1] and not any(units[:-1]):
        units = [units[-1]] * len(units)
    for (number, _), unit in zip(split, units, strict=True):
        if not unit:
            raise _bare(number, wanted, where)
    written = [f"{number} {unit}" for (number, _), unit in zip(split, units, strict=True)]
    factors = [exact_factor(unit, kind, where, f'"{text}"') for unit, text in zip(units, written, strict=True)]
    parts = zip(split, factors, written, strict=True)
    return np.array([_scale(number, factor, text, where) for (number, _), factor, text in parts])


def split_heading(heading: str) -> tuple[str, str | None]:
    """Split a column's heading into name and unit, None where it carries none.

    Examples
    --------
    >>> split_heading("moment [in*lbf]"), split_heading("note")
    (('moment', 'in*lbf'), ('note', None))
    """
    match = _HEADING.fullmatch(heading)
    return (match.group(1), match.group(2) or None) if match else (heading.strip(), None)


def column_fraction(heading: str, kind: str, where: str = "") -> Fraction:
    """Return what one in a column headed "x [in]" is in SI, exactly; for `scaled`.

    Raises
    ------
    InputError
        If the heading carries no unit, or one of another kind.

    Examples
    --------
    >>> float(column_fraction("x [in]", "length"))
    0.0254
    """
    name, unit = split_heading(heading)
    if unit is None:
        limit = f'a unit of {kind} in brackets, such as "{name} [{KINDS[kind].unit}]"'
        raise InputError("the heading carries no unit", where=where, value=f'"{heading.strip()}"', limit=limit)
    return exact_factor(unit, kind, where, f'"{heading.strip()}"')


def scaled(values: NDArray[np.float64], factor: Fraction) -> NDArray[np.float64]:
    """Return a column (n,) in SI, by whole numerator and denominator: 700 mm is 0.7 m to the last digit."""
    return values * float(factor.numerator) / float(factor.denominator)
