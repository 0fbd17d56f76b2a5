"""The option --pads."""

import re

import pytest

from rigdesign.command.counts import parse_counts
from rigdesign.words import MOST_PADS


@pytest.mark.parametrize(
    ("text", "numbers"),
    [("8", (8,)), ("4..6", (4, 5, 6)), (" 4 .. 6 ", (4, 5, 6)), ("12,8,8..9", (8, 9, 12)), ("7..7", (7,))],
)
def test_numbers_come_in_order_and_once(text, numbers):
    assert parse_counts(text) == numbers


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("", "not a number of pads"),
        ("4-6", "'4-6' is not a number of pads; write 8, or 4..24"),
        ("4..", "not a number"),
        ("-3", "not a number"),
        ("3.5", "not a number"),
        ("٣", "not a number"),
        ("0", "go from 1 to"),
        (f"4..{MOST_PADS + 1}", f"go from 1 to {MOST_PADS}"),
        ("9..3", "runs backwards; write 3..9"),
        ("4,,6", "not a number"),
    ],
)
def test_mistakes_are_told_with_what_to_write(text, words):
    with pytest.raises(ValueError, match=re.escape(words)):
        parse_counts(text)
