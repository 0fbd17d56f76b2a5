"""Every fault of a brief's own keys, with the telling parts of its message."""

from __future__ import annotations

import pytest

ELLIPTICAL = 'shape = "elliptical"\ntotal = "5.4 kN"'
CANTILEVER = 'support = "cantilever"\nroot = "0.2 m"\ntip = "3.4 m"'
ON_TWO = 'support = "two supports"\nends = ["0 m", "6 m"]\nsupports = ["0.4 m", "5.6 m"]'
FIXED = 'places = "fixed"\nstations = "0.30, 0.61, 0.95 m"'
PLAN = "belongs to plan rigs, whose specimen is given by an outline"


def refused_in(refusal, edits, parts) -> None:
    message = refusal(*edits)
    assert message.startswith("BriefError: foil.toml")
    for part in parts:
        assert part in message


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        (("count = 6", "cuont = 6"), ["line 13, [pads] cuont", '"cuont" is no key of [pads]', 'did you mean "count"?']),
        (("count = 6", "drill_step = 6"), ['"drill_step" is no key of [pads]', "it belongs to [levers]"]),
        (("count = 6", "exponent = 6"), ['it belongs to [[load]] with "shape"']),
        (("count = 6", "xyzzy = 6"), ["no key of [pads]", "count, places, stations"]),
        (("[pads]", "[pad]"), ["line 12, [pad]", '"pad" is no key of a brief', 'did you mean "pads"?']),
        (("total =", "totl ="), ["line 10, [[load]] 1, totl", 'no key of a [[load]] with "shape"', 'mean "total"?']),
        (("total =", 'at = "1 m"\ntotal ='), ["[[load]] 1, at", 'it belongs to [[load]] with "point"']),
        (("", '[acceptance]\nmomnet = "2 %"'), ["line 15, [acceptance] momnet", 'did you mean "moment"?']),
        (
            ("", '[[acceptance.region]]\nfrom = "1 m"\nto = "2 m"\nshaer = "2 %"'),
            ["line 17, [[acceptance.region]] 1, shaer", "no key of [[acceptance.region]]", 'did you mean "shear"?'],
        ),
        (("count = 6", 'edge = "30 mm"'), ["[pads] edge", f'"edge" {PLAN}']),
        (("support =", 'cut = "square to axis"\nsupport ='), ["[specimen] cut", PLAN, "give [specimen] outline"]),
        ((ELLIPTICAL, 'pressure = "p.csv"'), ["line 9, [[load]] 1, pressure", f'"pressure" {PLAN}']),
        ((ELLIPTICAL, ELLIPTICAL + '\nline = "p.csv"'), [f'"line" {PLAN}']),
        ((ELLIPTICAL, 'point = "3 N"\nat = ["1 m", "0.1 m"]'), ["[[load]] 1, at", f"a place given by x and y {PLAN}"]),
        (("", '[acceptance]\ntorsion = "5 %"'), [f'"torsion" {PLAN}']),
        (("", "[levers]\nplates = true"), ["[levers] plates", PLAN]),
        (
            ("", '[[acceptance.region]]\nfrom = "1 m"\nto = "2 m"\ntorsion = "2 %"'),
            ["line 17, [[acceptance.region]] 1, torsion", PLAN],
        ),
        (("", '[jack]\nat = ["1 m", "0 m"]'), ["[jack] at", f"a place given by x and y {PLAN}", "or x alone"]),
    ],
)
def test_unknown_keys(refusal, edit, parts) -> None:
    refused_in(refusal, [edit], parts)


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        (("[pads]\ncount = 6\n", ""), ["the table [pads] is missing", "add [pads]"]),
        (("[[load]]\n" + ELLIPTICAL, ""), ["the table [[load]] is missing", "add [[load]]"]),
        (("[specimen]\n" + CANTILEVER, ""), ["the table [specimen] is missing"]),
        (('support = "cantilever"\n', ""), ["line 3, [specimen]", 'the key "support" is missing']),
        (("", '[[acceptance.region]]\nfrom = "1 m"\nmoment = "2 %"'), ["[[acceptance.region]] 1", '"to" is missing']),
        (('root = "0.2 m"\n', ""), ["line 3, [specimen]", 'support = "cantilever" needs the key "root"']),
        (("count = 6", ""), ["[pads]", 'the key "count" is missing', 'a whole number, or "fewest"']),
        (('total = "5.4 kN"', ""), ["line 8, [[load]] 1", 'shape = "elliptical" needs the key "total"']),
        ((ELLIPTICAL, 'shape = "linear"\nstart = "1 N/m"'), ['shape = "linear" needs the key "end"']),
        ((ELLIPTICAL, 'shape = "power"\ntotal = "1 N"'), ['shape = "power" needs the key "exponent"']),
        ((ELLIPTICAL, 'shape = "schrenk"\ntotal = "1 N"'), ['shape = "schrenk" needs the key "chord"']),
        ((ELLIPTICAL, 'point = "1 N"'), ["[[load]] 1", 'the key "at" is missing']),
        ((CANTILEVER, 'support = "two supports"\nends = "0, 6 m"'), ['needs the key "supports"']),
    ],
)
def test_missing_keys(refusal, edit, parts) -> None:
    refused_in(refusal, [edit], parts)


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        (("[pads]\ncount = 6", "[levers]\npads = 3"), ['"pads" is no key of [levers]']),
        (('title = "Test foil"', "levers = 3"), ["line 1, [levers]", "[levers] is a table: 3", "write [levers] above"]),
        (("[[load]]", "[load]"), ["line 8, [load]", "[[load]] has double brackets"]),
        (("", '[acceptance.region]\nfrom = "1 m"'), ["[[acceptance.region]] has double brackets"]),
        (('title = "Test foil"', "title = 3"), ["line 1, title", "a text in quotes is due: 3"]),
        (('title = "Test foil"', 'title = " "'), ["a text in quotes is due"]),
    ],
)
def test_structure(refusal, edit, parts) -> None:
    message = refusal(edit)
    assert all(part in message for part in parts)


def test_an_empty_list_of_loads(refusal) -> None:
    edits = [('title = "Test foil"', 'title = "Test foil"\nload = []'), ("[[load]]\n" + ELLIPTICAL, "")]
    refused_in(refusal, edits, ["line 2, [load]", "there is no load", "add a [[load]]"])


def test_a_load_that_is_no_table(refusal) -> None:
    edits = [('title = "Test foil"', 'title = "Test foil"\nload = [3]'), ("[[load]]\n" + ELLIPTICAL, "")]
    refused_in(refusal, edits, ["line 2, [[load]] 1", "a load is a table: 3"])


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        (
            (ELLIPTICAL, 'total = "5.4 kN"'),
            ["line 8, [[load]] 1", "does not say what it is", "exactly one of shape, table"],
        ),
        ((ELLIPTICAL, 'shpae = "elliptical"'), ["does not say what it is", 'did you mean "shape"?']),
        ((ELLIPTICAL, ELLIPTICAL + '\npoint = "3 N"'), ["a load is one thing, and this one names 2", "shape, point"]),
        (
            ('"elliptical"', '"eliptical"'),
            [
                "line 9, [[load]] 1, shape",
                'none of the words due: "eliptical"',
                '"schrenk"',
                'did you mean "elliptical"?',
            ],
        ),
        (('"5.4 kN"', "5.4"), ["line 10, [[load]] 1, total", "a force is due with its unit", "bare number: 5.4"]),
        (('"5.4 kN"', '"5.4 m"'), ["[[load]] 1, total", "a force is due, and m is a unit of length"]),
        (('"5.4 kN"', '"0 N"'), ["[[load]] 1, total", 'a total of zero loads nothing: "0 N"']),
        ((ELLIPTICAL, 'shape = "linear"\nstart = "0 N/m"\nend = "0 N/m"'), ["from zero to zero loads nothing"]),
        ((ELLIPTICAL, 'shape = "linear"\ntotal = "1 N"\nstart = "0 N/m"\nend = "1 N/m"'), ['"start" and "end" alone']),
        (
            (ELLIPTICAL, ELLIPTICAL + '\nstart = "1 N/m"'),
            ['"start" belongs to shape = "linear"', 'this one is "elliptical"'],
        ),
        ((ELLIPTICAL, ELLIPTICAL + '\ngreatest = "tip"'), ['"greatest" belongs to shape = "triangular"']),
        ((ELLIPTICAL, ELLIPTICAL + "\nexponent = 2"), ['"exponent" belongs to shape = "power"']),
        ((ELLIPTICAL, ELLIPTICAL + '\nchord = "c.csv"'), ['"chord" belongs to shape = "schrenk"']),
        ((ELLIPTICAL, 'shape = "power"\ntotal = "1 N"\nexponent = 0'), ["[[load]] 1, exponent", "more than 0"]),
        ((ELLIPTICAL, ELLIPTICAL + '\nto = "3.5 m"'), ['"to" lies off the specimen: "3.5 m"', "0.200 m to 3.400 m"]),
        ((ELLIPTICAL, ELLIPTICAL + '\nfrom = "0.1 m"'), ['"from" lies off the specimen: "0.1 m"']),
        (
            (ELLIPTICAL, ELLIPTICAL + '\nfrom = "2 m"\nto = "1 m"'),
            ["[[load]] 1, to", '"from" must lie inboard of "to"'],
        ),
        ((ELLIPTICAL, ELLIPTICAL + "\ntimes = 0"), ["[[load]] 1, times", "must not be zero"]),
        ((ELLIPTICAL, ELLIPTICAL + '\ntimes = "2"'), ["a plain number is due", "without quotes"]),
        ((ELLIPTICAL, ELLIPTICAL + "\ntimes = nan"), ["a finite number is due: NaN"]),
        ((ELLIPTICAL, 'point = "0 N"\nat = "1 m"'), ["a point load of zero loads nothing"]),
        (
            (ELLIPTICAL, 'point = "3 N"\nat = "4 m"'),
            ["line 10, [[load]] 1, at", "the point load lies off the specimen"],
        ),
        ((ELLIPTICAL, "inertia = -3.8"), ["[[load]] 1, inertia", "needs the specimen's weight"]),
        ((ELLIPTICAL, 'inertia = "3 N"'), ["[[load]] 1, inertia", "a plain number is due"]),
        (
            (ELLIPTICAL, 'internal = "o.csv"\nreverse = ["load"]'),
            ["[[load]] 1, reverse", '"load"', '"shear" and "moment"'],
        ),
        ((ELLIPTICAL, 'internal = "o.csv"\nstations_from = "end"'), ["stations_from", '"root" or "tip"']),
    ],
)
def test_loads(refusal, edit, parts) -> None:
    refused_in(refusal, [edit], parts)


def test_a_table_of_shear_and_moment_needs_a_cantilever(refusal) -> None:
    edits = [(CANTILEVER, ON_TWO), (ELLIPTICAL, 'internal = "o.csv"')]
    refused_in(refusal, edits, ["[[load]] 1, internal", "needs a cantilever", "running load"])


@pytest.mark.parametrize(
    ("edit", "parts"),
    [
        (('"cantilever"', '"cantilver"'), ["line 4, [specimen] support", 'did you mean "cantilever"?']),
        (('tip = "3.4 m"', 'tip = "0.1 m"'), ["line 6, [specimen] tip", "tip must lie outboard", '"0.1 m"', "0.200 m"]),
        (
            ('tip = "3.4 m"', 'tip = "3.4 m"\nends = "0, 3 m"'),
            ['"ends" does not go with support = "cantilever"', "root and tip"],
        ),
        ((CANTILEVER, ON_TWO + '\ntip = "3 m"'), ['"tip" does not go with support = "two supports"']),
        ((CANTILEVER, ON_TWO.replace('"0 m", "6 m"', '"6 m", "0 m"')), ["two ends must be in order"]),
        ((CANTILEVER, ON_TWO.replace('"0 m", "6 m"', '"0 m"')), ["2 lengths are due, and this holds 1"]),
        ((CANTILEVER, ON_TWO.replace("5.6", "6.6")), ["a support lies off the specimen", "6.6 m", "0 m to 6.000 m"]),
        ((CANTILEVER, ON_TWO.replace("5.6", "0.4")), ["two supports must be in order"]),
        (("[pads]", 'gravity = "up"\n[pads]'), ["gravity"]),
        ((CANTILEVER, CANTILEVER + '\ngravity = "up"'), ["[specimen] gravity", '"against" or "with"']),
        (("", '[test]\npeak = "0 %"'), ["[test] peak", "too small", "more than 0"]),
        (("", "[test]\npeak = 1.5"), ["[test] peak", "a percentage is due", 'such as "2 %"']),
    ],
)
def test_specimen_and_test(refusal, edit, parts) -> None:
    refused_in(refusal, [edit], parts)


@pytest.mark.parametrize(
    ("keys", "parts"),
    [
        ("count = 0", ["line 13, [pads] count", "too small: 0", 'a whole number from 1 to 1000, or "fewest"']),
        ("count = 2.5", ["a whole number is due: 2.5"]),
        ("count = true", ["a whole number is due: true"]),
        ('count = "few"', ['a whole number is due: "few"', '"fewest"']),
        ('count = 6\nplaces = "hardpoints"', ["[pads] places", 'did you mean "hard points"?']),
        ('count = 6\nstations = "1, 2 m"', ["[pads] stations", 'places = "free" goes without "stations"']),
        ('places = "fixed"', ["[pads] places", 'places = "fixed" needs the stations once', '"stations" or "table"']),
        (FIXED + '\ntable = "ribs.csv"', ["needs the stations once", "not both"]),
        (FIXED + "\ncount = 4", ["[pads] count", "as many as there are stations: 4", "(accepted: 3)"]),
        (FIXED + '\ncount = "fewest"', ["as many as there are stations"]),
        (FIXED.replace("0.95", "9.5"), ["the station lies off the specimen", "9.5 m", "0.200 m to 3.400 m"]),
        (FIXED.replace("0.61", "0.30"), ["in order of x, each once"]),
        (FIXED.replace("fixed", "hard points"), ['the key "count" is missing']),
        (
            'count = 6\nlargest_force = "60 N"\nleast_force = "60 N"',
            ["[pads] largest_force", '"60 N"', "more than 60.0 N"],
        ),
        (
            'count = 6\nlargest_pressure = "60 kPa"\nlength = "1 in"',
            ["a largest pressure needs the footprint", "length and width"],
        ),
        ('count = 6\ngap = "-1 mm"', ["[pads] gap", 'too small: "-1 mm"', "0 or more"]),
        ('count = 6\nlength = "0 m"', ["[pads] length", "more than 0"]),
        ('count = 6\nease = "-1 %"', ["[pads] ease", "0 or more"]),
        ("count = 6\nease = 0.02", ["[pads] ease", "a percentage is due", "0.02"]),
        ('count = 6\nkeep_out = ["1.4 m", "1.5 m"]', ["[pads] keep_out", "each in its own brackets"]),
        ('count = 6\nkeep_out = "1.4, 1.5 m"', ["a list of pairs is due"]),
        ('count = 6\nkeep_out = [["1.4 m"]]', ["2 lengths are due, and this holds 1"]),
        ('count = 6\nkeep_out = [["1.5 m", "1.4 m"]]', ["keep-out 1 must be in order of x"]),
        ('count = 6\nkeep_out = [["1 m", "1.2 m"], ["3 m", "4 m"]]', ["keep-out 2 lies off the specimen"]),
        ('count = 6\naction = "shove"', ["[pads] action", '"pull" or "push"']),
        ('count = 6\naim = "evn"', ['did you mean "even"?']),
    ],
)
def test_pads(refusal, keys, parts) -> None:
    refused_in(refusal, [("count = 6", keys)], parts)


@pytest.mark.parametrize(
    ("keys", "parts"),
    [
        ('[levers]\ndrill_step = "0 mm"', ["[levers] drill_step", "more than 0"]),
        ("[levers]\nratio_limit = 0.5", ["line 15, [levers] ratio_limit", "0.5", "1 or more"]),
        ("[levers]\nratio_limit = inf", ["a finite number is due"]),
        ("[levers]\ntiers = 0", ["[levers] tiers", "too small: 0"]),
        ("[levers]\ntiers = 2.0", ["a whole number is due: 2.0"]),
        (
            '[levers]\nshortest_arm = "0.2 m"\nlongest = "0.3 m"',
            ["[levers] longest", "two of the shortest", "0.400 m or more"],
        ),
        ("[levers]\ngrouping = 3", ["[levers] grouping", "a list of two is due: 3"]),
        ("[levers]\ngrouping = [1, 2, 3]", ["joins two, and this group holds 3", "[1, 2, 3]"]),
        ("[levers]\ngrouping = [[1, 2], [3, [4, [5, 5]]]]", ["named twice: pad 5"]),
        ('[levers]\ngrouping = [1, "2"]', ["a group holds pad numbers and groups"]),
        ("[levers]\ngrouping = [[1, 2], [3, [4, 6]]]", ["the grouping leaves out pad 5", "pads 1 to 6"]),
        ("[levers]\ngrouping = [[1, 2], [[3, 7], [4, [6, 5]]]]", ["the grouping names pad 7, and there are 6 pads"]),
        ('[jack]\nat = "1 m"\nstep = "50 mm"', ["[jack] step", "a place or a step, not both"]),
        ('[jack]\nat = "4 m"', ["[jack] at", "the jack lies off the specimen", "4 m"]),
        ('[jack]\nstep = "0 m"', ["[jack] step", "more than 0"]),
        ("[acceptance]", ["line 14, [acceptance]", "names no band"]),
        ('[acceptance]\nmoment = "-2 %"', ["[acceptance] moment", "0 or more"]),
        ('[acceptance]\nmoment = "50 N"', ["[acceptance] moment", "a moment is due", 'a percentage such as "2 %"']),
        ('[acceptance]\nshear = "50 N*m"', ["[acceptance] shear", "a force is due"]),
        ("[acceptance]\nmoment = 2", ["bare number: 2", 'a percentage such as "2 %", or a moment such as "50 N*m"']),
        ('[acceptance]\nmoment = "2 %"\nof = "here"', ["[acceptance] of", '"peak" or "local"']),
        ('[[acceptance.region]]\nfrom = "1 m"\nto = "2 m"', ["line 14, [[acceptance.region]] 1", "names no band"]),
        ('[[acceptance.region]]\nfrom = "2 m"\nto = "1 m"\nmoment = "2 %"', ["region]] 1, to", "must lie inboard"]),
        ('[[acceptance.region]]\nfrom = "0.1 m"\nto = "1 m"\nmoment = "2 %"', ["region]] 1, from", "off the specimen"]),
    ],
)
def test_levers_jack_and_acceptance(refusal, keys, parts) -> None:
    refused_in(refusal, [("", keys)], parts)


def test_a_fewest_count_checks_the_grouping_as_far_as_it_goes(refusal) -> None:
    edits = [("count = 6", 'count = "fewest"'), ("", "[levers]\ngrouping = [1, [2, 4]]")]
    refused_in(refusal, edits, ["leaves out pad 3", "pads 1 to 4"])


def test_of_two_faults_the_unknown_key_is_reported(refusal) -> None:
    message = refusal(('"0.2 m"', "3"), ("count = 6", "cuont = 6"))
    assert '"cuont"' in message


def test_of_two_wrong_values_the_first_in_the_file_is_reported(refusal) -> None:
    message = refusal(('"5.4 kN"', '"5.4 m"'), ("count = 6", "count = 0"))
    assert "line 10, [[load]] 1, total" in message


def test_a_message_is_one_line_whatever_the_file_holds(refusal) -> None:
    message = refusal(('"5.4 kN"', '"5.4\\n\\u001b[31mkN"'))
    assert message.isprintable()
    assert r"5.4\n\x1b[31mkN" in message
    assert refusal(("count = 6", '"co\\nunt" = 6')).isprintable()


@pytest.mark.parametrize(
    ("edits", "part"),
    [
        ([('"3.4 m"', '"0.2 m"')], "the tip must lie outboard of the root"),
        ([(CANTILEVER, ON_TWO.replace('"6 m"', '"0 m"'))], "the two ends must be in order"),
        ([(ELLIPTICAL, ELLIPTICAL + '\nfrom = "1 m"\nto = "1 m"')], '"from" must lie inboard of "to"'),
        ([("count = 6", 'count = 6\nkeep_out = [["1.4 m", "1.4 m"]]')], "keep-out 1 must be in order of x"),
    ],
)
def test_stretches_without_length(refusal, edits, part) -> None:
    refused_in(refusal, edits, [part])
