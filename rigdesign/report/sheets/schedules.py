"""The lists of a rig as tables for the sheets: parts, links, pins, pads, bars to cut, holes to drill."""

from __future__ import annotations

from collections.abc import Sequence
from math import degrees

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.display import counted
from rigdesign.hardware.model import End, Link
from rigdesign.report.lists import centres, cut_plans, drill_rows, link_rows, part_rows, pin_rows
from rigdesign.report.sheets.sizes import Sizes
from rigdesign.report.sheets.tables import Table


def schedules(result: HardwareCheck, sizes: Sizes) -> tuple[Table, ...]:
    """Return all tables in the order of the sheets."""
    return (
        parts_table(result, sizes),
        links_table(result, sizes),
        pins_table(result, sizes),
        cuts_table(result, sizes),
        drill_table(result, sizes),
    )


def numbers(names: Sequence[str]) -> str:
    """Names of members in short, in the order of their numbers; holes go with the pieces that have just these.

    >>> numbers(("lever 4", "lever 1", "lever 2", "lever 3", "lever 7")), numbers(("link 2",))
    ('levers 1–4, 7', 'link 2')
    >>> numbers(("lever 1 A", "lever 1 B", "lever 2 A", "lever 2 B", "pad 2"))
    'levers 1, 2: A, B; pad 2'
    """
    holes: dict[tuple[str, int], list[str]] = {}
    for name in names:
        kind, number, *hole = name.split()
        holes.setdefault((kind, int(number)), []).extend(hole)
    alike: dict[tuple[str, tuple[str, ...]], list[int]] = {}
    for (kind, value), at in sorted(holes.items()):
        alike.setdefault((kind, tuple(at)), []).append(value)
    parts = []
    for (kind, where), own in alike.items():
        words = f"{kind} {own[0]}" if len(own) == 1 else f"{kind}s {ranges(own)}"
        parts.append(f"{words}: {', '.join(where)}" if where else words)
    return "; ".join(parts)


def ranges(values: Sequence[int]) -> str:
    """Rising numbers in short.

    >>> ranges([1, 2, 3, 5, 6, 9])
    '1–3, 5, 6, 9'
    """
    runs: list[list[int]] = []
    for value in values:
        if runs and value == runs[-1][-1] + 1:
            runs[-1].append(value)
        else:
            runs.append([value])
    return ", ".join(f"{run[0]}–{run[-1]}" if len(run) > 2 else ", ".join(map(str, run)) for run in runs)


def parts_table(result: HardwareCheck, sizes: Sizes) -> Table:
    """The parts list, with masses and centres of mass beneath."""
    rows = []
    for row in part_rows(result):
        length = "" if row.length is None else sizes.length(row.length)
        each = "" if row.mass is None else sizes.mass(row.mass)
        total = "" if row.total is None else sizes.mass(row.total)
        where = "see the schedule of pins" if row.kind == "pin" else numbers(row.members)
        rows.append((row.mark, row.kind, str(row.quantity), row.section, row.material, length, each, total, where))
    heads = ("mark", "part", "quantity", "section, size", "material", f"length\n[{sizes.unit}]", "mass\neach",
             "mass\nin all", "which")  # fmt: skip
    notes = []
    for centre in centres(result):
        if centre.name.startswith(("tree", "rig")):
            place = f"x = {sizes.length(centre.x)}, y = {sizes.length(centre.y)}, height {sizes.length(centre.height)}"
            notes.append(
                f"{centre.name} without jack and load cell: {sizes.mass(centre.mass)}, centre of mass at {place}"
            )
    notes.append("mass of levers: their profiles; of links: without pins; side plates, spacers and pins have own rows")
    return Table("Parts list", heads, tuple(rows), "llrllrrrl", 8, tuple(notes))


def links_table(result: HardwareCheck, sizes: Sizes) -> Table:
    """The schedule of links, a row a mark."""
    hardware = result.hardware
    links = {link.name: link for link in hardware.links}
    by_mark: dict[str, list[str]] = {}
    for name in links:
        by_mark.setdefault(hardware.marks[name], []).append(name)
    pins = {row.number: (row.upper_pin, row.lower_pin) for row in link_rows(result)}
    rows = []
    for mark, names in by_mark.items():
        link = links[names[0]]
        upper, lower = pins[link.number]
        rows.append(
            (mark, str(len(names)), link_size(link), link.material.name, sizes.length(link.length),
             f"±{sizes.length(link.adjust)}", fitting(link.upper, sizes), upper or "stud", fitting(link.lower, sizes),
             lower or "stud", sizes.mass(link.mass), numbers(names))
        )  # fmt: skip
    heads = ("mark", "quantity", "size", "material", f"pin to pin\n[{sizes.unit}]", f"adjuster\n[{sizes.unit}]",
             "upper end", "upper\npin", "lower end", "lower\npin", "mass, pins\namong it", "which")  # fmt: skip
    return Table("Schedule of links", heads, tuple(rows), "lrllrrllllrl", 11)


def link_size(link: Link) -> str:
    """Kind and size of a link: "rod M16", "strap 40×8", "50 mm webbing"."""
    return link.size if link.kind == "webbing" else f"{link.kind} {link.size}"


def fitting(end: End, sizes: Sizes) -> str:
    """What an end of a link is, with its thickness."""
    if end.fitting == "eye":
        return f"eye, {sizes.length(end.inner)} thick"
    if end.fitting == "fork":
        return f"fork, cheeks {sizes.length(end.outer)}"
    if end.fitting == "stud":
        return "stud, spherical washers and nuts"
    return "loop"


def pins_table(result: HardwareCheck, sizes: Sizes) -> Table:
    """The schedule of pins, a row a mark."""
    unit = sizes.unit
    rows = tuple(
        (row.mark, sizes.pin(row.diameter), sizes.length(row.length), sizes.length(row.grip), row.material,
         str(row.quantity), sizes.mass(row.mass), numbers(row.places))
        for row in pin_rows(result)
    )  # fmt: skip
    heads = ("mark", f"⌀\n[{unit}]", f"length\n[{unit}]", f"grip\n[{unit}]", "material", "quantity", "mass\neach",
             "where")  # fmt: skip
    notes = ("length: grip, and at each end a washer and a split pin",)
    return Table("Schedule of pins", heads, rows, "lrrrlrrl", 7, notes)


def pads_table(result: HardwareCheck, sizes: Sizes) -> Table:
    """The schedule of pads: places, forces and the links that they hang on."""
    hardware, rig = result.hardware, result.check.rig
    full = result.tare.step(1.0).pad_force if any(abs(step.level - 1) < 1e-9 for step in result.tare.steps) else None
    force = result.check.statics.pad_force if full is None else full
    is_surface = rig.plan.target.brief.specimen.is_surface
    rows = []
    for k, pad in enumerate(hardware.pads):
        y = (sizes.length(float(rig.pad_y[k])),) if is_surface else ()
        link = hardware.link_above[f"pad {pad.pad}"]
        rows.append(
            (str(pad.pad), hardware.marks[f"pad {pad.pad}"], sizes.length(float(rig.pad_x[k])), *y,
             sizes.length(pad.surface), sizes.length(pad.pin_height), sizes.force(float(force[k])), str(link.number),
             hardware.marks[link.name])
        )  # fmt: skip
    unit = sizes.unit
    across = (f"y\n[{unit}]",) if is_surface else ()
    heads = ("pad", "mark", f"x\n[{unit}]", *across, f"surface\n[{unit}]", f"pin at\n[{unit}]", "force at\n100 %",
             "link", "its\nmark")  # fmt: skip
    notes = ("surface and pin: heights over z = 0 towards the jack; force at 100 % of the brief's load, own weight "
             "among it, along z",)  # fmt: skip
    return Table("Schedule of pads", heads, tuple(rows), "rl" + "r" * (5 + is_surface) + "l", None, notes)


def cuts_table(result: HardwareCheck, sizes: Sizes) -> Table:
    """The cut list, a row a bar, equal bars together."""
    rows = []
    notes = []
    for stock in cut_plans(result):
        alike: dict[tuple[tuple[str, float, int], ...], tuple[int, float]] = {}
        for bar in stock.plan.bars:
            key = tuple((cut.mark, cut.length, cut.count) for cut in bar.cuts)
            alike[key] = (alike.get(key, (0, 0.0))[0] + 1, bar.offcut)
        for cuts, (count, offcut) in alike.items():
            words = ", ".join(f"{n} × {sizes.length(length)} ({mark})" for mark, length, n in cuts)
            rows.append(
                (stock.section, stock.material, sizes.length(stock.bar), str(count), words, sizes.length(offcut))
            )
        for cut in stock.plan.too_long:
            words = f"{cut.count} × {sizes.length(cut.length)} ({cut.mark}): longer than the bar, order at length"
            rows.append((stock.section, stock.material, sizes.length(stock.bar), "–", words, "–"))
        if not stock.plan.proven:
            bars = counted(stock.plan.n_bars, "bar")
            notes.append(f"{stock.section}: {bars} where at least {stock.plan.least_bars} are needed")
    if rows:
        kerf = sizes.length(result.check.rig.plan.target.brief.hardware.kerf)
        rest = "of all other sections" if notes else "of any section"
        notes.append(f"no fewer bars {rest} will do; the saw takes {kerf} a cut")
    unit = sizes.unit
    heads = ("section", "material", f"bar\n[{unit}]", "bars", "cuts from each bar", f"offcut\n[{unit}]")
    return Table("Cut list", heads, tuple(rows), "llrrlr", 4, tuple(notes))


def drill_table(result: HardwareCheck, sizes: Sizes) -> Table:
    """The drill list, a row a hole, each mark's holes from its datum on."""
    unit = sizes.unit
    rows = drill_rows(result)
    plates = any(row.across for row in rows)
    texts = []
    for row in rows:
        across = (sizes.length(row.across) if row.across else "–",) if plates else ()
        texts.append(
            (row.mark, row.hole, sizes.length(row.along), *across, sizes.hole(row.diameter),
             sizes.pin(row.pin), row.note)
        )  # fmt: skip
    heads = ("mark", "hole", f"from datum\n[{unit}]", *((f"across\n[{unit}]",) if plates else ()), f"⌀\n[{unit}]",
             f"pin ⌀\n[{unit}]", "note")  # fmt: skip
    notes = ["running dimensions from the datum end: of a lever the end of its steel at hole A, holes at mid depth"]
    if plates:
        notes.append("of a plate from the left and from the lower edge of its blank, see its detail")
    return Table("Drill list", heads, tuple(texts), "ll" + "r" * (1 + plates) + "lrl", None, tuple(notes))


def settings_table(result: HardwareCheck, sizes: Sizes) -> Table:
    """What every link joins, the length it is set to, and what it carries at 100 % and at the peak."""
    rows = tuple(
        (str(row.number), row.mark, row.upper, row.lower, sizes.length(row.length), sizes.force(row.load),
         sizes.force(row.peak_load), f"{degrees(row.swing):.1f}°")
        for row in link_rows(result)
    )  # fmt: skip
    heads = ("link", "mark", "from", "to", f"set to\n[{sizes.unit}]", "load at\n100 %", "load at\nthe peak", "swing")
    notes = ("length pin to pin; loads with own weight, pull positive; at the peak with the overshoot",)
    return Table("Link settings", heads, rows, "rlllrrrr", None, notes)
