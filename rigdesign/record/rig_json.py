"""rig.json: the whole rig as one text, and back.

Layout number 1.  Every number is written so that the same float is read again; keys come in the order given here.

    schema_number   1
    title           the brief's
    brief           name, texts: the brief and its tables as they were read, by file name
    pads            a list, root to tip: pad, x_m, y_m, wanted_x_m, wanted_N, share_of_curve_N, and force_N as checked;
                    on surfaces wanted_y_m too
    plan            jack_x_m, on surfaces jack_y_m too, may_move, proof (band_use, band_use_least, moment_error_least,
                    evenness, evenness_before, band_use_found, method, words; "infinite" where a number is), findings
    trees           a list, a jack each: jack, x_m, y_m, force_N, carries, and levers, a list: lever, kind, tier,
                    parent, load_N as checked, and holes, a list: hole, joins, u_m, v_m, x_m, y_m
    words           what the search for grouping and holes did
    findings        of the levers stage
    hardware        what it is made of, see `hardware_json`; not there in a rig that was only arranged
    check           verdict, moment_error_peak, shear_error_peak, band_use, on surfaces torsion_error_peak: for readers;
                    never read back

A line rig without wanted_y_m and jack_y_m has them at 0; a surface's must be there.  force_N of a pad, load_N of a
lever and `check` are results of the check.  Whoever reads a rig recomputes them.

Depends on: brief, target, pads, levers, hardware, checks.
"""

from __future__ import annotations

import json
import math
from typing import TYPE_CHECKING, Any, get_args

import numpy as np

from rigdesign.brief.model import Source
from rigdesign.checks.model import Check
from rigdesign.errors import InputError
from rigdesign.levers.model import Hole, HoleName, Jack, Piece, Rig, Tree
from rigdesign.pads.model import PadPlan, Proof
from rigdesign.record.fields import Fields, read_object
from rigdesign.record.findings import read_findings
from rigdesign.record.objects import INFINITE, finding_object, json_bytes, number_object
from rigdesign.target.model import Target
from rigdesign.words import SCHEMA_NUMBER

if TYPE_CHECKING:
    from rigdesign.checks.hardware.model import HardwareCheck

_PROOF_NUMBERS = ("band_use", "band_use_least", "moment_error_least", "evenness", "evenness_before", "band_use_found")


def rig_to_json(answer: Check | HardwareCheck) -> str:
    """Return the checked rig as the text of rig.json, its hardware among it where there is any."""
    from rigdesign.record.hardware_json import hardware_object

    hardware = None if isinstance(answer, Check) else answer.hardware
    check = answer if isinstance(answer, Check) else answer.check
    rig, plan = check.rig, check.rig.plan
    source, is_surface = plan.target.brief.source, plan.target.brief.specimen.is_surface
    return json_bytes(
        {
            "schema_number": SCHEMA_NUMBER,
            "title": plan.target.brief.title,
            "brief": {"name": source.brief_name, "texts": dict(sorted(source.texts.items()))},
            "pads": _pad_objects(check),
            "plan": {
                "jack_x_m": plan.jack_x,
                **({"jack_y_m": plan.jack_y} if is_surface else {}),
                "may_move": plan.may_move,
                "proof": _proof_object(plan.proof),
                "findings": [finding_object(finding) for finding in plan.findings],
            },
            "trees": [_tree_object(tree, check) for tree in rig.trees],
            "words": rig.words,
            "findings": [finding_object(finding) for finding in rig.findings],
            **({} if hardware is None else {"hardware": hardware_object(hardware)}),
            "check": {
                "verdict": "accepted" if answer.accepted else "not accepted",
                "moment_error_peak": check.moment_error_peak,
                "shear_error_peak": check.shear_error_peak,
                "band_use": number_object(check.band_use),
                **({"torsion_error_peak": check.torsion_error_peak} if is_surface else {}),
            },
        }
    ).decode()


def _pad_objects(check: Check) -> list[dict[str, Any]]:
    rig, plan = check.rig, check.rig.plan
    columns = {"x_m": rig.pad_x, "y_m": rig.pad_y, "wanted_x_m": plan.x}
    if plan.target.brief.specimen.is_surface:
        columns["wanted_y_m"] = plan.y
    columns |= {"wanted_N": plan.force, "share_of_curve_N": plan.share, "force_N": check.statics.pad_force}
    rows = zip(*(column.tolist() for column in columns.values()), strict=True)
    return [{"pad": i + 1, **dict(zip(columns, row, strict=True))} for i, row in enumerate(rows)]


def _proof_object(proof: Proof) -> dict[str, Any]:
    numbers = {name: number_object(getattr(proof, name)) for name in _PROOF_NUMBERS}
    return {**numbers, "method": proof.method, "words": proof.words}


def _tree_object(tree: Tree, check: Check) -> dict[str, Any]:
    jack = tree.jack
    return {
        "jack": jack.number,
        "x_m": float(jack.x),
        "y_m": float(jack.y),
        "force_N": float(tree.force),
        "carries": jack.carries,
        "levers": [_piece_object(piece, check) for piece in tree.pieces],
    }


def _piece_object(piece: Piece, check: Check) -> dict[str, Any]:
    holes = [
        {
            "hole": hole.name,
            "joins": hole.joins,
            "u_m": float(hole.u),
            "v_m": float(hole.v),
            "x_m": float(hole.x),
            "y_m": float(hole.y),
        }
        for hole in piece.holes
    ]
    return {
        "lever": piece.number,
        "kind": piece.kind,
        "tier": piece.tier,
        "parent": piece.parent,
        "load_N": check.statics.piece_load[piece.name],
        "holes": holes,
    }


def rig_from_json(text: str) -> Rig:
    """Return the rig of a rig.json, its brief and target rebuilt from the texts inside.

    Raises
    ------
    InputError
        Where the text is not a rig, has another layout number than this version reads, or lacks something.
    BriefError, TableError
        Where a text of the brief inside was changed into something that cannot be used.
    """
    from rigdesign.brief import brief_from_source
    from rigdesign.target import build_target

    fields = _entered(text)
    brief = fields.object("brief")
    source = Source(brief_name=brief.text("name"), texts=brief.texts("texts"))
    target = build_target(brief_from_source(source))
    pads = [
        [*pad.numbers("x_m", "y_m", "wanted_x_m", "wanted_N", "share_of_curve_N"), _across(target, pad, "wanted_y_m")]
        for pad in fields.objects("pads")
    ]
    if not pads:
        raise InputError("the rig has no pads", where="pads")
    _require_order(fields)
    x, y, wanted_x, wanted, share, wanted_y = np.array(pads).T.copy()
    plan_fields = fields.object("plan")
    plan = PadPlan(
        target=target,
        x=wanted_x,
        y=wanted_y,
        force=wanted,
        share=share,
        jack_x=plan_fields.number("jack_x_m"),
        jack_y=_across(target, plan_fields, "jack_y_m"),
        may_move=plan_fields.flag("may_move"),
        proof=_proof(plan_fields.object("proof")),
        findings=read_findings(plan_fields),
    )
    trees = tuple(_tree(tree) for tree in fields.objects("trees"))
    if not trees:
        raise InputError("the rig has no jack", where="trees")
    return Rig(plan, x, y, trees, fields.text("words"), read_findings(fields))


def _across(target: Target, fields: Fields, key: str) -> float:
    """A place across the span [m]: a surface's must be there, a line rig's counts as 0 where it is not."""
    is_needed = target.brief.specimen.is_surface or key in fields.values
    return fields.number(key) if is_needed else 0.0


def _require_order(fields: Fields) -> None:
    """Pads are known by their place in the list: numbers that say otherwise are an error, not passed over."""
    for place, pad in enumerate(fields.objects("pads"), start=1):
        if (number := pad.whole("pad")) != place:
            raise InputError(
                "the pads are not in the order of their numbers",
                where=f"pads[{place - 1}].pad",
                value=f"pad {number}",
                limit=f"pad {place}",
            )


def _entered(text: str) -> Fields:
    """The outermost object, when it is a rig in the layout that this version reads."""
    fields = read_object(text)
    if "schema_number" not in fields.values:
        raise InputError("this is not a rig: it has no schema_number", remedy="name the rig.json of a rig folder")
    number = fields.values["schema_number"]
    if number != SCHEMA_NUMBER or isinstance(number, bool):
        raise InputError(
            "this rig has a layout that this version does not read",
            where="schema_number",
            value=json.dumps(number),
            limit=str(SCHEMA_NUMBER),
            remedy="design the rig again from its brief, or use the version that wrote it",
        )
    return fields


def _proof(fields: Fields) -> Proof:
    numbers = {
        name: math.inf if fields.values.get(name) == INFINITE else fields.number(name) for name in _PROOF_NUMBERS
    }
    return Proof(**numbers, method=fields.text("method"), words=fields.text("words"))


def _tree(fields: Fields) -> Tree:
    jack = Jack(fields.whole("jack"), fields.number("x_m"), fields.number("y_m"), fields.text("carries"))
    return Tree(jack, fields.number("force_N"), tuple(_piece(piece) for piece in fields.objects("levers")))


def _piece(fields: Fields) -> Piece:
    return Piece(
        number=fields.whole("lever"),
        kind="plate" if fields.one_of("kind", ("lever", "plate")) == "plate" else "lever",
        tier=fields.whole("tier"),
        parent=fields.text("parent"),
        holes=tuple(_hole(hole) for hole in fields.objects("holes")),
    )


def _hole(fields: Fields) -> Hole:
    name: HoleName = fields.one_of("hole", get_args(HoleName))  # type: ignore[assignment]
    return Hole(name, fields.text("joins"), *fields.numbers("u_m", "v_m", "x_m", "y_m"))
