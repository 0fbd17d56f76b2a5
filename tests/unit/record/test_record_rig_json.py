"""rig.json there and back, and texts that are no rig."""

from __future__ import annotations

import json
import math
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from hand_rigs import make_rig

from rigdesign.brief import brief_from_source
from rigdesign.brief.model import Source
from rigdesign.checks import check
from rigdesign.checks.measures import hand_pads
from rigdesign.errors import InputError
from rigdesign.findings import Finding
from rigdesign.record.rig_json import rig_from_json, rig_to_json
from rigdesign.target import build_target

BRIEF = """\
title = "Reed boat keel, grounded on a ridge"
[specimen]
support = "cantilever"
root = "0.3 m"
tip = "2.9 m"
weight = "mass.csv"
[[load]]
shape = "triangular"
total = "2.4 kN"
[[load]]
table = "tables/extra.csv"
[pads]
count = 5
length = "100 mm"
[acceptance]
moment = "40 %"
shear = "60 %"
"""
TEXTS = {
    "reed.toml": BRIEF,
    "mass.csv": "x [m], mass [kg/m]\n0.3, 8\n2.9, 3\n",
    "tables/extra.csv": "x [m], load [N/m]\n0.3, 210\n1.7, 90\n1.7, 40\n2.9, 0\n",
}


def known_check():
    target = build_target(brief_from_source(Source("reed.toml", TEXTS)))
    x, force = hand_pads(target.net, 5)
    rig = make_rig(x, force * (1 + 0.01 * np.array([1, -2, 3, 1, -1])), target=target)
    remark = Finding("levers", "note", "lever 2", "tall", "3", "2", "lower it", number=1)
    proof = replace(rig.plan.proof, evenness_before=math.inf)
    plan = replace(rig.plan, proof=proof, findings=(replace(remark, stage="pads"),))
    return check(replace(rig, plan=plan, findings=(remark,), words="searched 12 trees"))


CHECK = known_check()
TEXT = rig_to_json(CHECK)


def test_there_and_back():
    rig = rig_from_json(TEXT)
    old = CHECK.rig
    for name in ("x", "force", "share"):
        assert (getattr(rig.plan, name) == getattr(old.plan, name)).all(), name
    assert (rig.pad_x == old.pad_x).all()
    assert (rig.pad_y == old.pad_y).all()
    assert rig.trees == old.trees
    assert (rig.words, rig.findings) == (old.words, old.findings)
    assert (rig.plan.proof, rig.plan.findings) == (old.plan.proof, old.plan.findings)
    assert (rig.plan.jack_x, rig.plan.may_move) == (old.plan.jack_x, old.plan.may_move)
    assert rig.plan.target.brief.source == old.plan.target.brief.source
    assert rig.plan.target.moment_peak == old.plan.target.moment_peak


def test_the_check_of_what_is_read_is_the_same_to_the_last_bit():
    again = check(rig_from_json(TEXT))
    assert rig_to_json(again) == TEXT
    assert again.regions == CHECK.regions
    assert again.findings == CHECK.findings


def test_published_keys():
    data = json.loads(TEXT)
    assert list(data) == [
        "schema_number", "title", "brief", "pads", "plan", "trees", "words", "findings", "check"
    ]  # fmt: skip
    assert data["schema_number"] == 1
    assert data["brief"] == {"name": "reed.toml", "texts": TEXTS}
    assert list(data["pads"][0]) == ["pad", "x_m", "y_m", "wanted_x_m", "wanted_N", "share_of_curve_N", "force_N"]
    assert list(data["trees"][0]) == ["jack", "x_m", "y_m", "force_N", "carries", "levers"]
    lever = data["trees"][0]["levers"][0]
    assert list(lever) == ["lever", "kind", "tier", "parent", "load_N", "holes"]
    assert list(lever["holes"][0]) == ["hole", "joins", "u_m", "v_m", "x_m", "y_m"]
    assert data["plan"]["proof"]["evenness_before"] == "infinite"
    assert data["pads"][2]["force_N"] == float(CHECK.statics.pad_force[2])


def test_results_inside_are_not_believed():
    data = json.loads(TEXT)
    data["pads"][0]["force_N"] = 1.0
    data["check"]["verdict"] = "accepted"
    again = check(rig_from_json(json.dumps(data)))
    assert (again.statics.pad_force == CHECK.statics.pad_force).all()


def edited(*keys: object, value: object = None, drop: bool = False) -> str:
    data = json.loads(TEXT)
    place = data
    for key in keys[:-1]:
        place = place[key]
    if drop:
        del place[keys[-1]]
    else:
        place[keys[-1]] = value
    return json.dumps(data)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", "not a rig: it is not JSON"),
        ("title = 3", "line 1: this is not a rig: it is not JSON"),
        ("[1, 2]", "not a rig: it is JSON, but not an object"),
        ('{"verdict": "accepted"}', "not a rig: it has no schema_number"),
        ("[" * 100_000, "not a rig"),
        (TEXT.replace('"title"', '"words"', 1), "a key comes twice: words"),
        (TEXT[:-40], "not JSON"),
        (edited("schema_number", value=2), "schema_number: this rig has a layout that this version does not read: 2"),
        (edited("schema_number", value=True), "does not read: true"),
        (edited("trees", 0, "levers", 2, "holes", 1, "u_m", drop=True), r"trees\[0\].levers\[2\].holes\[1\].u_m"),
        (edited("trees", 0, "levers", 2, "holes", 1, "u_m", value="0.2"), 'wrong kind: "0.2" .accepted: a finite'),
        (edited("trees", 0, "levers", 1, "kind", value="rod"), 'levers.1..kind: .* "rod" .accepted: lever, plate'),
        (edited("trees", 0, "force_N", value=float("nan")), "trees.0..force_N: .*NaN .accepted: a finite number"),
        (edited("pads", value=[]), "pads: the rig has no pads"),
        (edited("pads", 1, "pad", value=3), r"pads\[1\].pad: the pads are not in the order .*: pad 3 .accepted: pad 2"),
        (edited("pads", 0, "y_m", value=1e300), r"pads\[0\].y_m: .*accepted: a finite number up to 1e\+100"),
        (edited("pads", 0, "x_m", value=10**400), r"pads\[0\].x_m: .*accepted: a finite number"),
        (TEXT.replace('"schema_number": 1', '"schema_number": ' + 5000 * "9"), "a whole number of thousands of digits"),
        (edited("pads", value=[3]), "pads: .*accepted: a list of objects"),
        (edited("trees", value=[]), "trees: the rig has no jack"),
        (edited("plan", "may_move", value=1), "plan.may_move: .*accepted: true or false"),
        (edited("trees", 0, "jack", value=1.5), "trees.0..jack: .*accepted: a whole number"),
        (edited("brief", "texts", "mass.csv", value=7), "brief.texts: .*accepted: texts by name"),
        (edited("brief", "name", value="other.toml"), "other.toml"),
        (edited("brief", "texts", "reed.toml", value="title = "), "reed.toml"),
    ],
)
def test_what_is_no_rig(text, message):
    with pytest.raises(InputError, match=message):
        rig_from_json(text)


def test_no_path_of_a_machine_is_inside():
    assert str(Path.cwd()) not in TEXT
