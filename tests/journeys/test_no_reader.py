"""Outputs that nobody reads or that are full, and terminals that go away: a process of its own each time."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import time

import pytest
from journey import SMALL, files_under

RUN = "import sys; from rigdesign.command import main; sys.argv[0] = 'rigdesign'; main()"


@pytest.fixture
def brief(here):
    (here / "fin.toml").write_text(SMALL)
    return here


def test_a_closed_output_stops_nothing(brief):
    ended = subprocess.run(
        [sys.executable, "-c", RUN, "design", "fin.toml", "--no-figures"],
        cwd=brief,
        stderr=subprocess.PIPE,
        preexec_fn=lambda: os.close(1),
        check=False,
    )
    assert (ended.returncode, ended.stderr) == (0, b"")
    assert (brief / "fin_rig" / "rig.json").exists()


@pytest.mark.skipif(not os.path.exists("/dev/full"), reason="needs a device that is always full")
@pytest.mark.parametrize(
    ("arguments", "written"),
    [
        (["design", "fin.toml", "--no-figures", "--json"], "fin_rig had been written"),
        (["schema"], "nothing was written"),
        (["--help"], "nothing was written"),
    ],
)
def test_a_full_disk_behind_the_output_is_said_plainly(brief, arguments, written):
    with open("/dev/full", "w") as full:
        ended = subprocess.run(
            [sys.executable, "-c", RUN, *arguments], cwd=brief, stdout=full, stderr=subprocess.PIPE, check=False
        )
    assert ended.returncode == 2
    message = f"rigdesign: the answer cannot be printed: No space left on device; {written}\n"
    assert ended.stderr.decode() == message


@pytest.mark.skipif(not hasattr(signal, "SIGHUP"), reason="needs a terminal that can go away")
@pytest.mark.parametrize("name", ["SIGINT", "SIGTERM", "SIGHUP"])
def test_being_stopped_in_the_middle_leaves_nothing(brief, name):
    (brief / "fin.toml").write_text(SMALL.replace("count  = 5", "count  = 500"))
    before = files_under(brief)
    process = subprocess.Popen(
        [sys.executable, "-c", RUN, "design", "fin.toml"],
        cwd=brief,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        preexec_fn=lambda: signal.signal(signal.SIGINT, signal.default_int_handler),
    )
    assert process.stdout is not None
    process.stdout.readline()  # it has begun
    time.sleep(0.3)
    process.send_signal(getattr(signal, name))
    _, said = process.communicate(timeout=60)
    assert process.returncode == 130
    assert said.decode().strip().endswith("rigdesign: interrupted; nothing was written")
    assert files_under(brief) == before
