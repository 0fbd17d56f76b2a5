"""Files that cannot be read, and briefs that are not TOML."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from rigdesign.brief import brief_from_source, read_brief
from rigdesign.brief.model import Source
from rigdesign.errors import BriefError, InputError, TableError

ELLIPTICAL = 'shape = "elliptical"\ntotal = "5.4 kN"'


def test_a_brief_that_is_missing(tmp_path: Path) -> None:
    (tmp_path / "foil.toml").write_text("", encoding="utf-8")
    with pytest.raises(
        BriefError, match=r'fiol.toml: the brief does not exist: "fiol.toml"; did you mean "foil.toml"\?'
    ):
        read_brief(tmp_path / "fiol.toml")
    with pytest.raises(BriefError, match=r"the brief does not exist.*check the name and the folder"):
        read_brief(tmp_path / "no folder" / "foil.toml")


def test_a_brief_that_is_a_folder(tmp_path: Path) -> None:
    with pytest.raises(BriefError, match="the brief is a folder, not a file"):
        read_brief(tmp_path)


def test_a_brief_that_may_not_be_read(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def refuse(path: Path) -> bytes:
        raise PermissionError(13, os.strerror(13), str(path))

    # the file's mode would not stop a superuser
    monkeypatch.setattr(Path, "read_bytes", refuse)
    with pytest.raises(BriefError, match=r"foil.toml: the brief cannot be read: permission denied"):
        read_brief(tmp_path / "foil.toml")


def test_names_that_are_no_text(read, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    for name in ("fo\udcffil.toml", "fo\x1b[1mil.toml"):
        with pytest.raises(BriefError, match="the name of the brief is not plain text") as caught:
            read_brief(tmp_path / name)
        assert str(caught.value).isprintable()

    def encode(path: Path) -> bytes:
        return path.name.encode("ascii")

    # as on a machine whose file names are ASCII
    monkeypatch.setattr(Path, "read_bytes", encode)
    with pytest.raises(BriefError, match=r"a name that this machine cannot write.*set a UTF-8 locale"):
        read_brief(tmp_path / "flügel.toml")


def test_a_brief_that_is_not_utf8(tmp_path: Path) -> None:
    (tmp_path / "foil.toml").write_bytes(b'title = "a"\n# Fl\xfcgel\n')
    with pytest.raises(BriefError, match=r"foil.toml, line 2: the brief is not UTF-8 text; save it as UTF-8"):
        read_brief(tmp_path / "foil.toml")


def test_a_brief_with_a_byte_order_mark_is_read(read, tmp_path: Path) -> None:
    read()
    text = (tmp_path / "foil.toml").read_bytes()
    (tmp_path / "foil.toml").write_bytes(b"\xef\xbb\xbf" + text.replace(b"\n", b"\r\n"))
    brief = read_brief(tmp_path / "foil.toml")
    assert brief.title == "Test foil"
    assert brief.source.texts["foil.toml"].startswith("title")


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        (("[pads]", "[pads"), ["foil.toml, line 12, column 6: the brief is not TOML: expected ']'"]),
        (
            ('"5.4 kN"', "5.4 kN"),
            ["foil.toml, line 10", "not TOML", 'a quantity is written in quotes: total = "5.4 kN"'],
        ),
        (("count = 6", "count = 6\ncount = 7"), ["foil.toml, line 14", "not TOML: cannot overwrite a value"]),
        (("count = 6", 'count = "6'), ["foil.toml, line 13", "not TOML"]),
        (("count = 6", "count = [6,"), ["foil.toml, at its end", "not TOML"]),
        (("count = 6", "grouping = " + "[" * 5000), ["foil.toml", "nests its brackets too deeply"]),
    ],
)
def test_a_brief_that_is_not_toml(refusal, edit, parts) -> None:
    message = refusal(edit)
    assert message.startswith("BriefError: ")
    for part in parts:
        assert part in message


def test_an_empty_brief(tmp_path: Path) -> None:
    (tmp_path / "foil.toml").write_text("", encoding="utf-8")
    with pytest.raises(BriefError, match=r"foil.toml: the table \[specimen\] is missing; add \[specimen\]"):
        read_brief(tmp_path / "foil.toml")


@pytest.mark.parametrize("name", ["../net.csv", "sub/../../net.csv", "/elsewhere/net.csv"])
def test_a_table_outside_the_folder(refusal, name: str) -> None:
    message = refusal((ELLIPTICAL, f'table = "{name}"'))
    assert "BriefError: foil.toml, line 9, [[load]] 1, table: the table lies outside the folder of the brief" in message
    assert f'"{name}"' in message
    assert "copy it beside the brief" in message


def test_a_table_below_the_folder_is_read(read, tmp_path: Path) -> None:
    (tmp_path / "loads").mkdir()
    (tmp_path / "loads" / "net.csv").write_text("x [m],load [N/m]\n1,5\n2,7\n", encoding="utf-8")
    for name in ("loads/net.csv", "loads/../loads/net.csv", str(tmp_path / "loads" / "net.csv").replace("\\", "/")):
        brief = read((ELLIPTICAL, f'table = "{name}"'))
        assert name in brief.source.texts
        assert brief.loads[0].load.tolist() == [5.0, 7.0]


def test_a_table_that_is_missing_a_folder_or_not_utf8(refusal, tmp_path: Path) -> None:
    edit = (ELLIPTICAL, 'table = "net.csv"')
    (tmp_path / "nets.csv").write_text("", encoding="utf-8")
    message = refusal(edit)
    assert 'TableError: foil.toml, line 9, [[load]] 1, table: the table does not exist: "net.csv"' in message
    assert 'did you mean "nets.csv"?' in message
    (tmp_path / "net.csv").mkdir()
    assert 'the table is a folder, not a file: "net.csv"' in refusal(edit)
    (tmp_path / "net.csv").rmdir()
    (tmp_path / "net.csv").write_bytes(b"x [m],load [N/m]\n1,2\n2,\xff\n")
    assert "TableError: net.csv, line 3: the table is not UTF-8 text" in refusal(edit)


def test_kept_texts_that_are_incomplete(read) -> None:
    source = read((ELLIPTICAL, 'table = "net.csv"'), net="x [m],load [N/m]\n1,5\n2,7\n").source
    with pytest.raises(TableError, match=r'table: the text of this table is not among those kept: "net.csv"'):
        brief_from_source(Source("foil.toml", {"foil.toml": source.texts["foil.toml"]}))
    with pytest.raises(InputError, match=r'the text of the brief is not among those kept: "foil.toml"'):
        brief_from_source(Source("foil.toml", {}))
