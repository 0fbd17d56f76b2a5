"""The target of a surface in sentences: its place in plan, what it does at the root, which way it twists."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import InertiaLoad, Line, Load, PointLoads, ShapeLoad, TableLoad
from rigdesign.display import System, counted, show
from rigdesign.target.cuts import ACROSS, reactions_in_plan
from rigdesign.target.model import Target
from rigdesign.target.plan_load import PlanLoad
from rigdesign.target.plan_loads import weight_line
from rigdesign.target.remarks import along
from rigdesign.target.words import direction, kind, peak_of_test
from rigdesign.words import ROUNDING, STANDARD_GRAVITY

LEADING_EDGE = ", the leading edge of a right wing seen from above"

# A torsion below this part of the resultant times the span is rounding.
_NO_TORSION = 1e-9


def echo_in_plan(target: Target, system: System) -> list[str]:
    """Return the target of a surface in sentences, one a line."""
    return [
        _resultant(target, system),
        _at_root(target, system),
        *_whole(target, system),
        *_supports(target, system),
        _peaks(target, system),
        *_across(target, system),
        *_weight(target, system),
        *peak_of_test(target, system),
        *(_load(number, load, target, system) for number, load in enumerate(target.brief.loads, 1)),
        _accuracy(target),
    ]


def place(x: float, y: float, system: System) -> str:
    """A place in words: "x = 1.358 m, y = −0.040 m"."""
    unit = "m" if system == "SI" else None
    at_x, at_y = (show(at if abs(at) > ROUNDING else 0.0, "length", system, unit=unit) for at in (x, y))
    return f"x = {at_x}, y = {at_y}"


def twist(torsion: float, supported: bool = False) -> str:
    """Which side a torsion lifts; on two supports no side is a leading edge.

    Examples
    --------
    >>> twist(-3.0)
    'lowers the side of greater y (+y, the leading edge of a right wing seen from above)'
    """
    return f"{'raises' if torsion > 0 else 'lowers'} the side of greater y (+y{'' if supported else LEADING_EDGE})"


def _resultant(target: Target, system: System) -> str:
    specimen, total = target.brief.specimen, target.resultant
    x, y = target.centroid, target.centroid_y
    away, offset = x - specimen.left, y - float(specimen.reference_axis.at(np.array([x]))[0])
    end = "the left end" if specimen.supports else "the root"
    side = "inboard of" if away < 0 else "from"
    ahead = f"{show(abs(offset), 'length', system)} {'ahead of' if offset > 0 else 'behind'} the reference axis"
    if abs(offset) <= _NO_TORSION * (specimen.right - specimen.left):
        ahead = "on the reference axis"
    else:
        ahead += f" ({'+y' if offset > 0 else '−y'})"
    where = f"{place(x, y, system)}: {show(abs(away), 'length', system)} {side} {end}, {ahead}"
    return f"The target is {show(abs(total), 'force', system)} {direction(total)}. It acts at {where}."


def _held(target: Target) -> str:
    return "the first support" if target.brief.specimen.supports else "the root"


def _cut(target: Target) -> str:
    return "square to x" if target.brief.specimen.cut == "square to x" else "square to the reference axis"


def _at_root(target: Target, system: System) -> str:
    """V, M and T just outboard of the root or of the first support."""
    at = np.array([target.about])
    shear = show(float(target.shear(at, "outboard")[0]), "force", system)
    bending = show(float(target.moment(at, "outboard")[0]), "moment", system)
    where = f"{_held(target)} at {show(target.about, 'length', system)}, cut {_cut(target)}"
    torsion = _torsion(float(target.torsion(at, "outboard")[0]), target, system)
    return f"Just outboard of {where}: shear {shear}, bending moment {bending}, {torsion}."


def _torsion(torsion: float, target: Target, system: System) -> str:
    if abs(torsion) <= _NO_TORSION * abs(target.resultant) * (target.brief.specimen.right - target.brief.specimen.left):
        return "no torsion about the reference axis"
    which = twist(torsion, bool(target.brief.specimen.supports))
    return f"torsion {show(torsion, 'moment', system)} about the reference axis, which {which}"


def _whole(target: Target, system: System) -> list[str]:
    """The three moments of the whole target about where the specimen is held, whatever the cuts leave out."""
    force, first_x, first_y = target.total_plan.sums
    x = target.about
    y = float(target.brief.specimen.reference_axis.at(np.array([x]))[0])
    bending, twisting = first_x - force * x, first_y - force * y
    nothing = _NO_TORSION * abs(force) * (target.brief.specimen.right - target.brief.specimen.left)
    turns = "none about x"
    if abs(twisting) > nothing:
        turns = (
            f"{show(twisting, 'moment', system)} about x, which {'raises' if twisting > 0 else 'lowers'} the +y side"
        )
    return [
        f"The whole target has three moments about the axis at {_held(target)} ({place(x, y, system)}): "
        f"{show(bending, 'moment', system)} of bending along x, {turns}, and none about z."
    ]


def _supports(target: Target, system: System) -> list[str]:
    answer = reactions_in_plan(target.brief.specimen, *target.total_plan.sums)
    if not answer.x.size:
        return []
    first, second = (
        f"{show(abs(float(f)), 'force', system)} {along(float(f))} at {show(float(x), 'length', system)}"
        for x, f in zip(answer.x, answer.force, strict=True)
    )
    span = target.brief.specimen.right - target.brief.specimen.left
    held = ""
    if abs(answer.couple) > _NO_TORSION * abs(target.resultant) * span:
        held = f"; the first alone holds the torsion, with {show(answer.couple, 'moment', system)}"
    return [f"The supports answer with {first} and {second}{held}."]


def _peaks(target: Target, system: System) -> str:
    shear, moment, torsion = (target.peaks[quantity] for quantity in ("shear", "moment", "torsion"))
    bending = _signed(target, "moment", moment.at)
    text = (
        f"The largest shear is {show(shear.value, 'force', system)} at {show(shear.at, 'length', system)}, "
        f"the largest bending moment {show(bending, 'moment', system)} at {show(moment.at, 'length', system)}"
    )
    span = target.brief.specimen.right - target.brief.specimen.left
    if torsion.value <= _NO_TORSION * abs(target.resultant) * span:
        return f"{text}; there is no torsion."
    twisting = _signed(target, "torsion", torsion.at)
    return f"{text}, the largest torsion {show(twisting, 'moment', system)} at {show(torsion.at, 'length', system)}."


def _signed(target: Target, quantity: str, at: float) -> float:
    """The value of larger size on the two sides of a station."""
    x = np.array([at])
    of = target.torsion if quantity == "torsion" else target.moment
    return max((float(of(x, "inboard")[0]), float(of(x, "outboard")[0])), key=abs)


def _across(target: Target, system: System) -> list[str]:
    """Shear and moment cut the other way, where the brief judges them."""
    if not any(rule.quantity in ACROSS for rule in target.brief.acceptance.rules):
        return []
    shear, moment = target.peaks["shear across"], target.peaks["moment across"]
    return [
        "Cut the other way, square to y, with all that lies at greater y counted and the supports' answer left out: "
        f"largest shear {show(shear.value, 'force', system)} at y = {show(shear.at, 'length', system)}, largest moment "
        f"{show(moment.value, 'moment', system)} at y = {show(moment.at, 'length', system)}."
    ]


def _weight(target: Target, system: System) -> list[str]:
    if target.brief.specimen.weight is None:
        return ["No weight is given: the pads bring the whole target, on top of whatever hangs there."]
    mass = show(abs(target.gravity.total) / STANDARD_GRAVITY, "mass", system)
    line = "its line" if target.brief.specimen.weight_line is not None else "the reference axis"
    weighs = f"The specimen weighs {mass} along {line}, which brings {_acts(target.gravity_plan, system)} by itself"
    return [f"{weighs}; the pads bring {_acts(target.net_plan, system)}."]


def _acts(load: PlanLoad, system: System) -> str:
    """Size, direction and place of a load's resultant; what it turns where there is none."""
    force, first_x, first_y = load.sums
    if force != 0:
        size = f"{show(abs(force), 'force', system)} {along(force)}"
        return f"{size} at {place(first_x / force, first_y / force, system)}"
    if first_x == 0 and first_y == 0:
        return "no force and no moment in sum"
    if abs(first_x) <= _NO_TORSION * abs(first_y):
        side = "raises" if first_y > 0 else "lowers"
        return f"{show(first_y, 'moment', system)} about x in all, which {side} the side of greater y"
    about, bending = show(first_y, "moment", system), show(first_x, "moment", system)
    return f"no force in sum, {about} about x and {bending} of bending along x in all"


def _load(number: int, load: Load, target: Target, system: System) -> str:
    times = "" if load.times == 1.0 else f" (times {load.times:g})".replace("-", "−")
    part = target.total_plan.parts[number - 1]
    return (
        f"Load {number}: {kind(load, target, system)}{_along_what(load, target, system)}{times}: {_acts(part, system)}."
    )


def _along_what(load: Load, target: Target, system: System) -> str:
    """The line that a load acts along."""
    if isinstance(load, ShapeLoad | TableLoad):
        return ", on the reference axis" if load.line is None else f", along {_line(load.line, system)}"
    if isinstance(load, PointLoads):
        return "" if load.y.size else ", on the reference axis"
    if isinstance(load, InertiaLoad):
        return f", along {_line(weight_line(target.brief.specimen), system)}"
    return ""


def _line(line: Line, system: System) -> str:
    start, end = (place(float(line.x[i]), float(line.y[i]), system) for i in (0, -1))
    bent = "" if line.x.size == 2 else f" by way of {counted(line.x.size - 2, 'point')} between"
    return f"the line from {start} to {end}{bent}"


def _accuracy(target: Target) -> str:
    return ("V, M and T are exact integrals of all this, pressures over the outline included, to within one part in a "
            "thousand million of what the loads add up to.")  # fmt: skip
