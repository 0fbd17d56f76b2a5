"""A folder is written whole or not at all, and nothing that was there is lost."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from rigdesign.errors import OutputError
from rigdesign.report import folder as module
from rigdesign.report.folder import require_free, write_folder

FILES = {"rig.json": b"{}\n", "summary.json": b"{1}\n", "pads.csv": b"pad\n", "tree.svg": b"<svg/>"}
OTHER = {"rig.json": b"{2}\n", "summary.json": b"{3}\n"}


def contents(folder: Path) -> dict[str, bytes]:
    return {path.name: path.read_bytes() for path in folder.iterdir()}


def test_written_whole_and_nothing_beside_it(tmp_path):
    write_folder(FILES, tmp_path / "fin_rig")
    assert contents(tmp_path / "fin_rig") == FILES
    assert os.listdir(tmp_path) == ["fin_rig"]


def test_rights_are_those_of_any_new_folder(tmp_path):
    (tmp_path / "plain").mkdir()
    write_folder(FILES, tmp_path / "rig")
    assert (tmp_path / "rig").stat().st_mode == (tmp_path / "plain").stat().st_mode


def test_an_existing_folder_is_left_alone(tmp_path):
    write_folder(FILES, tmp_path / "rig")
    with pytest.raises(OutputError, match="rig: this folder exists and is left alone; use --replace"):
        write_folder(OTHER, tmp_path / "rig")
    assert contents(tmp_path / "rig") == FILES


def test_replaced_when_asked(tmp_path):
    write_folder(FILES, tmp_path / "rig")
    write_folder(OTHER, tmp_path / "rig", replace=True)
    assert contents(tmp_path / "rig") == OTHER
    assert os.listdir(tmp_path) == ["rig"]


def test_names_as_long_as_they_can_be(tmp_path):
    write_folder(FILES, tmp_path / (255 * "n"))
    write_folder(OTHER, tmp_path / (255 * "n"), replace=True)
    assert contents(tmp_path / (255 * "n")) == OTHER
    with pytest.raises(OutputError, match="cannot be written: File name too long"):
        require_free(tmp_path / (256 * "n"), replace=False)
    assert os.listdir(tmp_path) == [255 * "n"]


def test_study_folders_are_replaced_too(tmp_path):
    study = {"study.csv": b"1", "study.json": b"2", "study.svg": b"3"}
    write_folder(study, tmp_path / "study")
    write_folder({**study, "study.csv": b"4"}, tmp_path / "study", replace=True)
    assert (tmp_path / "study" / "study.csv").read_bytes() == b"4"


@pytest.mark.parametrize("names", [[], ["notes.txt"], ["rig.json"], ["summary.json", "pads.csv"]])
def test_a_folder_of_others_is_never_replaced(tmp_path, names):
    (tmp_path / "mine").mkdir()
    for name in names:
        (tmp_path / "mine" / name).write_text("mine")
    with pytest.raises(OutputError, match="not a folder that rigdesign wrote"):
        write_folder(FILES, tmp_path / "mine", replace=True)
    assert sorted(os.listdir(tmp_path / "mine")) == sorted(names)


@pytest.mark.parametrize("name", ["survey.csv", "photo.png", "sub"])
def test_a_rig_folder_with_something_of_the_users_is_not_replaced(tmp_path, name):
    write_folder(FILES, tmp_path / "rig")
    if name == "sub":
        (tmp_path / "rig" / name).mkdir()
    else:
        (tmp_path / "rig" / name).write_bytes(b"mine")
    with pytest.raises(OutputError, match=f"did not write: {name}; replacing would lose it"):
        write_folder(OTHER, tmp_path / "rig", replace=True)
    assert contents_names(tmp_path / "rig") == sorted([*FILES, name])


@pytest.mark.parametrize("name", ["plan.svg", "dxf/L9.dxf"])
def test_a_folder_of_the_users_is_not_taken_for_a_file_of_its_name(tmp_path, name):
    write_folder(FILES, tmp_path / "rig")
    (tmp_path / "rig" / name).mkdir(parents=True)
    (tmp_path / "rig" / name / "mine.txt").write_text("mine")
    with pytest.raises(OutputError, match=f"did not write: {name}; replacing would lose it"):
        write_folder(OTHER, tmp_path / "rig", replace=True)
    assert (tmp_path / "rig" / name / "mine.txt").read_text() == "mine"


def contents_names(folder: Path) -> list[str]:
    return sorted(os.listdir(folder))


def test_a_file_in_the_way(tmp_path):
    (tmp_path / "rig").write_text("a file")
    for replace in (False, True):
        with pytest.raises(OutputError, match="a file of this name is in the way"):
            write_folder(FILES, tmp_path / "rig", replace)
    assert (tmp_path / "rig").read_text() == "a file"


def test_a_link_is_not_followed(tmp_path):
    write_folder(FILES, tmp_path / "rig")
    (tmp_path / "link").symlink_to(tmp_path / "rig")
    with pytest.raises(OutputError, match="this is a link"):
        write_folder(OTHER, tmp_path / "link", replace=True)
    assert contents(tmp_path / "rig") == FILES


def test_no_folder_above(tmp_path):
    with pytest.raises(OutputError, match="the folder above it does not exist"):
        require_free(tmp_path / "none" / "rig", False)
    (tmp_path / "file").write_text("")
    with pytest.raises(OutputError, match="is not a folder"):
        require_free(tmp_path / "file" / "rig", False)
    assert os.listdir(tmp_path) == ["file"]


def test_a_folder_above_that_cannot_be_written(tmp_path, monkeypatch):
    # a superuser may write anywhere, so the answer of the system is put in its place
    monkeypatch.setattr(module.os, "access", lambda path, mode: False)
    with pytest.raises(OutputError, match="the folder above it cannot be written"):
        require_free(tmp_path / "rig", False)


@pytest.mark.parametrize("replace", [False, True])
@pytest.mark.parametrize("error", [KeyboardInterrupt(), OSError(28, "No space left on device")])
def test_nothing_is_left_of_an_interrupted_write(tmp_path, monkeypatch, replace, error):
    if replace:
        write_folder(FILES, tmp_path / "rig")

    class Late(dict):
        def items(self):
            yield "rig.json", b"half"
            raise error

    expected = KeyboardInterrupt if isinstance(error, KeyboardInterrupt) else OutputError
    with pytest.raises(expected) as raised:
        write_folder(Late(), tmp_path / "rig", replace)
    assert os.listdir(tmp_path) == (["rig"] if replace else [])
    if replace:
        assert contents(tmp_path / "rig") == FILES
    if expected is OutputError:
        assert "No space left on device; nothing was changed" in str(raised.value)


@pytest.mark.parametrize("error", [KeyboardInterrupt(), OSError(13, "Permission denied")])
@pytest.mark.parametrize("at", [0, 1])
def test_the_old_folder_comes_back_if_the_new_one_cannot_take_its_name(tmp_path, monkeypatch, error, at):
    write_folder(FILES, tmp_path / "rig")
    renames = iter(range(9))
    rename = os.rename

    def failing(source, goal):
        if next(renames) == at:
            raise error
        rename(source, goal)

    monkeypatch.setattr(module.os, "rename", failing)
    with pytest.raises((KeyboardInterrupt, OutputError)):
        write_folder(OTHER, tmp_path / "rig", replace=True)
    assert contents(tmp_path / "rig") == FILES
    assert os.listdir(tmp_path) == ["rig"]


def test_an_interruption_after_the_new_folder_stands_keeps_it(tmp_path, monkeypatch):
    write_folder(FILES, tmp_path / "rig")
    rename = os.rename

    def late(source, goal):
        rename(source, goal)
        if Path(source).suffix == ".new":
            raise KeyboardInterrupt

    monkeypatch.setattr(module.os, "rename", late)
    with pytest.raises(KeyboardInterrupt):
        write_folder(OTHER, tmp_path / "rig", replace=True)
    assert contents(tmp_path / "rig") == OTHER
    assert os.listdir(tmp_path) == ["rig"]


SHOP = {**FILES, "drawings.pdf": b"%PDF", "dxf/L1.dxf": b"0", "dxf/P12.dxf": b"1", "dxf/L2_side_pivot.dxf": b"2"}


def test_cutting_files_stand_in_a_folder_of_their_own(tmp_path):
    write_folder(SHOP, tmp_path / "rig")
    assert contents_names(tmp_path / "rig") == sorted([*FILES, "drawings.pdf", "dxf"])
    assert contents(tmp_path / "rig" / "dxf") == {"L1.dxf": b"0", "P12.dxf": b"1", "L2_side_pivot.dxf": b"2"}
    assert (tmp_path / "rig" / "dxf").stat().st_mode == (tmp_path / "rig").stat().st_mode


def test_cutting_files_of_an_older_rig_go_with_it(tmp_path):
    write_folder(SHOP, tmp_path / "rig")
    write_folder({**OTHER, "dxf/L9.dxf": b"9"}, tmp_path / "rig", replace=True)
    assert contents(tmp_path / "rig" / "dxf") == {"L9.dxf": b"9"}
    write_folder(OTHER, tmp_path / "rig", replace=True)
    assert contents(tmp_path / "rig") == OTHER


@pytest.mark.parametrize("name", ["L1.dwg", "bracket.dxf", "L1_other.dxf", "old"])
def test_what_others_put_among_the_cutting_files_is_not_lost(tmp_path, name):
    write_folder(SHOP, tmp_path / "rig")
    (tmp_path / "rig" / "dxf" / name).write_bytes(b"mine")
    with pytest.raises(OutputError, match=f"did not write: dxf/{name}; replacing would lose it"):
        write_folder(OTHER, tmp_path / "rig", replace=True)
    assert (tmp_path / "rig" / "dxf" / name).read_bytes() == b"mine"


def test_a_link_in_the_place_of_the_cutting_files_is_not_ours(tmp_path):
    write_folder(FILES, tmp_path / "rig")
    (tmp_path / "elsewhere").mkdir()
    (tmp_path / "rig" / "dxf").symlink_to(tmp_path / "elsewhere")
    with pytest.raises(OutputError, match="did not write: dxf; replacing would lose it"):
        write_folder(OTHER, tmp_path / "rig", replace=True)
