"""The JSON Schema: shipped as generated, valid, and of one mind with the reader."""

from __future__ import annotations

import tomllib
from pathlib import Path

import jsonschema
import pytest

import rigdesign.brief
from rigdesign.brief import SCHEMA_FILE, schema
from rigdesign.brief.describe import schema_text
from rigdesign.brief.fields import pattern
from rigdesign.units import KINDS, quantity

BASE = 'title = "Test foil"\n[specimen]\nsupport = "cantilever"\nroot = "0.2 m"\ntip = "3.4 m"\n'
PADS = "[pads]\ncount = 6\n"


def test_the_shipped_schema_is_up_to_date() -> None:
    shipped = Path(rigdesign.brief.__file__).with_name(SCHEMA_FILE).read_text(encoding="utf-8")
    assert shipped == schema_text(), "write it anew: python -m rigdesign.brief.describe"


def test_the_schema_is_a_schema_and_describes_every_key() -> None:
    jsonschema.Draft202012Validator.check_schema(schema())
    tables = [schema(), *schema()["$defs"].values()]
    for table in tables:
        assert table["additionalProperties"] is False
        for name, key in table["properties"].items():
            assert key.get("description") or "$ref" in key, name


def verdict(text: str) -> bool:
    return jsonschema.Draft202012Validator(schema()).is_valid(tomllib.loads(text))


@pytest.mark.parametrize(
    "rest",
    [
        '[[load]]\nshape = "elliptical"\ntotal = "5.4 kN"\nfrom = "8 in"\n' + PADS,
        '[[load]]\ninertia = -3.8\n[[load]]\npoint = "1 lbf"\nat = "2 ft"\n' + PADS + 'keep_out = [["1 m", "2 m"]]\n',
        '[[load]]\ninternal = "o.csv"\nreverse = ["shear"]\n[pads]\ncount = "fewest"\nstations = "1, 2 m"\n',
        '[[load]]\ntable = "t.csv"\n'
        + PADS
        + "[levers]\ngrouping = [[1, 2], [3, [4, 5]]]\ntiers = 5\nratio_limit = 4\n",
        '[[load]]\nforces = "t.csv"\n'
        + PADS
        + '[acceptance]\nmoment = "2 %"\nshear = "50 N"\nmoment_over = "5 ft-lbf"\n'
        '[[acceptance.region]]\nfrom = "1 m"\nto = "2 m"\nmoment = "1 %"\nof = "local"\n',
        '[[load]]\npressure = "p.csv"\n[[load]]\ntorque = "t.csv"\n[[load]]\ncouple = "-3 N*m"\nat = "1 m"\n'
        '[[load]]\npoint = "1 N"\nat = ["1 m", "0 m"]\n'
        '[[load]]\ntable = "l.csv"\nline = [["0 m", "0 m"], ["1 m", "1 m"]]\n'
        + PADS
        + 'spars = [[["0 m", "0 m"], ["1 m", "1 m"]]]\nribs = "0.3, 0.6 m"\nturn = "12 deg"\nedge = "3 mm"\n'
        '[levers]\nplates = true\npair = "any"\nclearance = "1 in"\ngrouping = [[1, 2, 3], 4]\n'
        '[jack]\nat = ["1 m", "0 m"]\n[acceptance]\ntorsion = "5 %"\nacross_over = "5 %"\nshare = "20 %"\n',
    ],
)
def test_good_briefs_fit_the_schema(rest: str) -> None:
    jsonschema.Draft202012Validator(schema()).validate(tomllib.loads(BASE + rest))


@pytest.mark.parametrize(
    "rest",
    [
        PADS,
        '[[load]]\nshape = "eliptical"\ntotal = "5.4 kN"\n' + PADS,
        '[[load]]\nshape = "elliptical"\ntotal = 5.4\n' + PADS,
        '[[load]]\nshape = "elliptical"\ntotal = "5.4 m"\n' + PADS,
        '[[load]]\nshape = "elliptical"\ntotal = "5.4 kN"\npoint = "3 N"\nat = "1 m"\n' + PADS,
        "[[load]]\ninertia = 2\n[pads]\ncuont = 6\n",
        "[[load]]\ninertia = 2\n[pads]\ncount = 0\n",
        '[[load]]\ninertia = 2\n[pads]\ncount = 6\nease = "2 m"\n',
        '[[load]]\ninertia = 2\n[pads]\ncount = 6\nturn = "along y"\n',
        '[[load]]\ninertia = 2\n[pads]\ncount = 6\nrows = [["0 m", "0 m"], ["1 m", "1 m"]]\n',
        '[[load]]\npoint = "3 N"\nat = ["1 m"]\n' + PADS,
    ],
)
def test_bad_briefs_do_not(rest: str) -> None:
    assert not verdict(BASE + rest)


@pytest.mark.parametrize(
    "kind", ["length", "force", "running load", "moment", "pressure", "angle", "fraction", "mass", "density"]
)
def test_patterns_and_reader_agree(kind: str) -> None:
    fits = jsonschema.Draft202012Validator(pattern(kind)).is_valid
    texts = {
        "length": ["1.2 m", "-3 in", ".5ft"],
        "force": ["5.4 kN", "1e3 lbf"],
        "running load": ["3 lbf/ft"],
        "moment": ["5 ft-lbf", "5 N·m", "5 Nm", "3 kip*in"],
        "pressure": ["3 psi", "3 N/mm²", "3 kN/m^2"],
        "angle": ["-12 deg", "0.2 rad"],
        "fraction": ["2 %", "150%"],
        "mass": ["2.5 lb", "900 g", "0 kg"],
        "density": ["7.85 g/cm^3", "0.284 lb/in³", "7850 kg/m3"],
    }
    for text in [*texts[kind], KINDS[kind].example]:
        quantity(text, kind)
        assert fits(text), text
    for text in ("3", "nan m", "3 s", "1,2 m", "2 kN + 1 N"):
        assert not fits(text), text
