"""What the terminal shows, and what it does not."""

from __future__ import annotations

import io
import sys

import pytest
from factories import make_brief, make_levers, make_pads
from hand_rigs import make_rig, with_hole

from rigdesign import checks
from rigdesign.chain import arrange
from rigdesign.checks.model import Check
from rigdesign.command import progress as bars
from rigdesign.command.terminal import PLAIN_WIDTH, Terminal, wrapped


@pytest.fixture(scope="module")
def check() -> Check:
    """A checked rig of five pads."""
    answer = arrange(make_brief(pads=make_pads(count=5, width=0.2), levers=make_levers(drill_step=0.0005)))
    assert isinstance(answer, Check)
    return answer


def test_tables_hold_what_the_check_found(check, capsys):
    Terminal().check(check)
    lines = capsys.readouterr().out.splitlines()
    start = next(k for k, line in enumerate(lines) if line.startswith("pad "))
    third = lines[start + 3].split()
    assert third[0] == "3"
    assert float(third[1]) == pytest.approx(check.rig.pad_x[2], abs=5e-4)
    assert float(third[2]) == pytest.approx(check.statics.pad_force[2], abs=0.5)
    assert float(third[6]) == pytest.approx(check.statics.pad_force[2] / (0.12 * 0.2) / 1e3, rel=0.01)
    start = next(k for k, line in enumerate(lines) if line.startswith("lever "))
    piece = check.rig.trees[0].pieces[1]
    words = lines[start + 2].split()
    assert words[:2] == ["2", "2"]
    assert float(words[6]) == pytest.approx(1e3 * abs(piece.ends[0].u), abs=0.05)


def test_us_units_show_pressures_with_their_digits_and_say_where_findings_are_in_si(check, capsys):
    Terminal("us").check(check)
    text = capsys.readouterr().out
    lines = text.splitlines()
    start = next(k for k, line in enumerate(lines) if line.startswith("pad "))
    psi = check.statics.pad_force[2] / (0.12 * 0.2) / 6894.757293168362
    assert float(lines[start + 3].split()[6]) == pytest.approx(psi, rel=0.01)
    assert "Findings, in SI units" in lines
    Terminal().check(check)
    assert "Findings" in capsys.readouterr().out.splitlines()


def test_nothing_is_wider_than_the_output(check, capsys):
    Terminal().check(check)
    assert max(len(line) for line in capsys.readouterr().out.splitlines()) <= PLAIN_WIDTH


def test_a_terminal_that_lacks_a_sign_shows_another(check, monkeypatch):
    raw = io.BytesIO()
    monkeypatch.setattr(sys, "stdout", io.TextIOWrapper(raw, encoding="ascii"))
    Terminal().lines(["5.4 N·m under −z"])
    sys.stdout.flush()
    assert raw.getvalue() == b"5.4 N?m under ?z\n"


def test_numbers_stay_with_their_units():
    text = "0.25 % under-test at x = 1.25 m and then 12.5 kN"
    for width in range(12, 60):
        for line in wrapped(text, width):
            assert not line.endswith(("0.25", "x", "x =", "1.25", "12.5"))
    assert " ".join(" ".join(wrapped(text, 20)).split()) == text


def test_square_brackets_are_text(capsys):
    Terminal().lines(["x [m] and [bold]this[/bold]"])
    assert capsys.readouterr().out == "x [m] and [bold]this[/bold]\n"


class _Screen(io.StringIO):
    def isatty(self) -> bool:
        return True


def test_no_bar_where_nobody_looks(monkeypatch):
    monkeypatch.setattr(sys, "stderr", io.StringIO())
    with bars.progress() as tell:
        assert tell is None


@pytest.mark.parametrize(("seconds", "shown"), [(0.0, False), (bars.PATIENCE + 0.1, True)])
def test_a_bar_only_for_what_takes_long(monkeypatch, seconds, shown):
    screen = _Screen()
    monkeypatch.setattr(sys, "stderr", screen)
    clock = [100.0]
    monkeypatch.setattr(bars.time, "monotonic", lambda: clock[0])
    with bars.progress() as tell:
        assert tell is not None
        clock[0] += seconds
        tell(0.5, "choosing pads")
    assert ("choosing pads" in screen.getvalue()) == shown


def test_a_lever_whose_pivot_is_beyond_its_pins_does_not_look_sound(capsys):
    """Ratio and arms are the check's: a pivot 20 mm inboard of hole A has a negative arm and no finite ratio."""
    rig = make_rig([0.5, 0.9], [1300.0, 1100.0])
    hole = rig.trees[0].pieces[0].ends[0]
    Terminal().check(checks.check(with_hole(rig, 1, "pivot", u=hole.u - 0.02)))
    line = next(line for line in capsys.readouterr().out.splitlines() if line.split()[:3] == ["1", "1", "jack"])
    assert "−20" in line
    assert line.split()[-1] == "inf"
