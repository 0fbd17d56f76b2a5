"""The option --pads: numbers of pads as people write them."""

from __future__ import annotations

import re

import click

from rigdesign.words import MOST_PADS


def read_counts(_context: click.Context, _option: click.Parameter, value: str) -> tuple[int, ...]:
    """Return the numbers that the option's text names; a mistake is told with what would be accepted."""
    try:
        return parse_counts(value)
    except ValueError as error:
        raise click.BadParameter(str(error)) from error


def parse_counts(text: str) -> tuple[int, ...]:
    """Return the numbers that a text names, sorted, each once.

    Raises
    ------
    ValueError
        With a message for the user, where the text cannot be read or a number is out of range.

    Examples
    --------
    >>> parse_counts("4..6"), parse_counts("12, 8, 8..9")
    ((4, 5, 6), (8, 9, 12))
    """
    numbers: set[int] = set()
    for part in text.split(","):
        match = re.fullmatch(r"\s*(\d{1,9})\s*(?:\.\.\s*(\d{1,9})\s*)?", part, flags=re.ASCII)
        if match is None:
            raise ValueError(f"{part.strip()!r} is not a number of pads; write 8, or 4..24, or 4,6,8")
        low, high = int(match[1]), int(match[2] or match[1])
        if low < 1 or high > MOST_PADS:
            raise ValueError(f"{part.strip()!r} is out of range; numbers of pads go from 1 to {MOST_PADS}")
        if low > high:
            raise ValueError(f"{part.strip()!r} runs backwards; write {high}..{low}")
        numbers.update(range(low, high + 1))
    return tuple(sorted(numbers))
