"""[keep]: a rig whose steel is cut, named by its folder; here its rig.json is a text that must be JSON."""

from __future__ import annotations

from pathlib import Path

import pytest

from rigdesign.brief import brief_from_source
from rigdesign.brief.model import KeptRig, Source
from rigdesign.errors import BriefError

KEEP = ("", '[keep]\nrig = "old_rig"')
RIG = '{"schema_number": 1, "note": "kept"}\n'
AS_IT_WAS = 'name a folder that "rigdesign design" wrote, with its rig.json as it was'


@pytest.fixture
def old_rig(tmp_path: Path) -> Path:
    """A folder beside the brief that holds a rig.json."""
    (tmp_path / "old_rig").mkdir()
    (tmp_path / "old_rig" / "rig.json").write_text(RIG)
    return tmp_path / "old_rig"


def test_a_kept_rig_is_taken_along_as_a_text(read, old_rig) -> None:
    brief = read(KEEP)
    assert brief.keep == KeptRig("old_rig", RIG, "foil.toml, line 15, [keep] rig", None)
    assert brief.source.texts["old_rig/rig.json"] == RIG
    (old_rig / "rig.json").unlink()
    assert brief_from_source(brief.source).keep == brief.keep


def test_a_trailing_slash_a_folder_below_and_a_hole_distance(read, old_rig, tmp_path) -> None:
    (tmp_path / "rigs").mkdir()
    old_rig.rename(tmp_path / "rigs" / "june")
    brief = read(("", '[keep]\nrig = "rigs/june/"\nhole_distance = "1.5 in"'))
    assert (brief.keep.folder, brief.keep.hole_distance) == ("rigs/june", 0.0381)
    assert "rigs/june/rig.json" in brief.source.texts


def test_texts_without_the_kept_rig(read, old_rig) -> None:
    source = read(KEEP).source
    texts = {name: text for name, text in source.texts.items() if name != "old_rig/rig.json"}
    with pytest.raises(BriefError, match=r'rig: the text of this rig is not among those kept: "old_rig/rig.json"'):
        brief_from_source(Source(source.brief_name, texts))


@pytest.mark.parametrize(
    ("named", "message"),
    [
        ("old_rigg", 'the folder of the kept rig does not exist: "old_rigg"; did you mean "old_rig"?'),
        ("elsewhere", 'the folder of the kept rig does not exist: "elsewhere"; check the name and the folder'),
        (
            "old_rig/rig.json",
            'a kept rig is named by its folder, and this is a file: "old_rig/rig.json"; write rig = "old_rig"',
        ),
        ("foil.toml", 'a kept rig is named by its folder, and this is a file: "foil.toml"'),
        (
            "empty",
            'the folder holds no rig.json, so it is no rig: "empty"; name a folder that "rigdesign design" wrote',
        ),
        (
            "../old_rig",
            'the kept rig lies outside the folder of the brief: "../old_rig"; copy its folder beside the brief',
        ),
        ("/", 'the kept rig lies outside the folder of the brief: "/"; copy its folder beside the brief'),
        ("odd", 'the kept rig is a folder, not a file: "odd/rig.json"'),
        ("x" * 300, f'the folder of the kept rig does not exist: "{"x" * 300}"; check the name and the folder'),
    ],
)
def test_a_folder_that_is_no_rig(refusal, old_rig, tmp_path, named: str, message: str) -> None:
    (tmp_path / "empty").mkdir()
    (tmp_path / "odd" / "rig.json").mkdir(parents=True)
    found = refusal(("", f'[keep]\nrig = "{named}"'))
    assert found == f"BriefError: foil.toml, line 15, [keep] rig: {message}"


@pytest.mark.parametrize("text", ["{}", "[1]", '"rig"', '{"schema_number": "1"}', '{"schema_number": true}'])
def test_a_text_that_is_no_rig(refusal, old_rig, text: str) -> None:
    (old_rig / "rig.json").write_text(text)
    assert refusal(KEEP) == (
        "BriefError: foil.toml, line 15, [keep] rig: this is no rig: it holds no whole number as schema_number: "
        f'"old_rig/rig.json"; {AS_IT_WAS}'
    )


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", f"old_rig/rig.json, line 1, column 1: the kept rig is not JSON: expecting value; {AS_IT_WAS}"),
        ('{"a":\n x}', f"old_rig/rig.json, line 2, column 2: the kept rig is not JSON: expecting value; {AS_IT_WAS}"),
        ("[" * 100_000, f"old_rig/rig.json: the kept rig is not JSON that can be read; {AS_IT_WAS}"),
        ("1" * 5000, f"old_rig/rig.json: the kept rig is not JSON that can be read; {AS_IT_WAS}"),
    ],
)
def test_a_text_that_is_not_json(refusal, old_rig, text: str, message: str) -> None:
    (old_rig / "rig.json").write_text(text)
    assert refusal(KEEP) == f"BriefError: {message}"


def test_a_text_that_is_not_utf8(refusal, old_rig) -> None:
    (old_rig / "rig.json").write_bytes(b'{"schema_number": 1,\n "title": "fl\xfc"}')
    assert "old_rig/rig.json, line 2: the kept rig is not UTF-8 text; save it as UTF-8" in refusal(KEEP)


@pytest.mark.parametrize(
    ("lines", "message"),
    [
        ('hole_distance = "3 mm"', 'foil.toml, line 14, [keep]: the key "rig" is missing'),
        (
            'rig = "old_rig"\nhole_distance = "0 mm"',
            'foil.toml, line 16, [keep] hole_distance: the value is too small: "0 mm" (accepted: more than 0)',
        ),
        (
            'rig = "old_rig"\npins = "8 mm"',
            'foil.toml, line 16, [keep] pins: "pins" is no key of [keep]; it belongs to [hardware]',
        ),
        ("rig = 3", "foil.toml, line 15, [keep] rig: a text in quotes is due: 3"),
    ],
)
def test_keys_that_cannot_be_used(refusal, old_rig, lines: str, message: str) -> None:
    assert refusal(("", f"[keep]\n{lines}")) == f"BriefError: {message}"
