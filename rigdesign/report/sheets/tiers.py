"""Tier sheets: each tier's levers and plates in elevation and plan, with the places of their pivots and their links."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from rigdesign.checks.hardware.model import HardwareCheck
from rigdesign.hardware.model import Link
from rigdesign.levers.model import Piece
from rigdesign.report.sheets import side_views, specimen_views
from rigdesign.report.sheets.arrange_plan import keep_off_bars, plan_bounds
from rigdesign.report.sheets.dimensions import running_row
from rigdesign.report.sheets.frame import FIELD
from rigdesign.report.sheets.labels import keep_off_steel, name_mark
from rigdesign.report.sheets.paper import BODY, HATCH, HEAD, Box, Paper
from rigdesign.report.sheets.plan_views import draw_plan
from rigdesign.report.sheets.sizes import Sizes, round_scale, scale_words
from rigdesign.report.sheets.steel import depth_of, height_of, place_of
from rigdesign.report.sheets.tables import Table
from rigdesign.report.sheets.views import View, is_up, rise_of, seen_words

LABELS, AIR = 12.0, 6.0
"""Room for marks around a view, and between views [mm]."""
TITLE = 9.0
STUB = 14.0
"""How much of the links above and below a tier is drawn [mm]."""


@dataclass(frozen=True)
class Tier:
    """One tier of a tree: the tree's jack, its number, its pieces, and the links that end at them."""

    jack: str
    number: int
    pieces: tuple[Piece, ...]
    above: tuple[Link, ...]
    below: tuple[Link, ...]

    @property
    def words(self) -> str:
        """What a sheet calls it."""
        return f"tier {self.number}"


def tiers_of(result: HardwareCheck) -> list[Tier]:
    """Return the tiers of all trees, each from its jack on."""
    hardware = result.hardware
    found = []
    for tree in hardware.rig.trees:
        for number in sorted({piece.tier for piece in tree.pieces}):
            pieces = tuple(piece for piece in tree.pieces if piece.tier == number)
            names = {piece.name for piece in pieces}
            above = tuple(link for link in hardware.links if link.lower.to in names)
            below = tuple(link for link in hardware.links if link.upper.to in names)
            found.append(Tier(tree.jack.name, number, pieces, above, below))
    return found


def tier_sheets(result: HardwareCheck, sizes: Sizes) -> Iterator[tuple[Paper, str, str]]:
    """Yield the sheets of all tiers, as many on a sheet as fit, each with its name and scale."""
    tiers = tiers_of(result)
    if not tiers:
        return
    ratio = _ratio(result)
    need = [_needed(result, tier, ratio) for tier in tiers]
    row = 0
    while row < len(tiers):
        last = row + 1
        while (
            last < len(tiers)
            and tiers[last].jack == tiers[row].jack
            and sum(need[row : last + 1]) <= FIELD.height - 4.0
        ):
            last += 1
        paper = Paper()
        spare = max(0.0, FIELD.height - 4.0 - sum(need[row:last])) / (last - row)
        top = FIELD.high
        for k in range(row, last):
            high = need[k] + spare
            box = Box(FIELD.left, top - high, FIELD.width, high)
            _draw_tier(paper, box, result, tiers[k], ratio, sizes)
            if k > row:
                paper.line((FIELD.left, top), (FIELD.right, top), weight=HATCH)
            top -= high
        name = _sheet_name([tier.number for tier in tiers[row:last]])
        if len(result.hardware.rig.trees) > 1:
            name += f" at {tiers[row].jack}"
        yield paper, name, scale_words(ratio)
        row = last


def _sheet_name(tiers: list[int]) -> str:
    """What a sheet of these tiers is called.

    >>> _sheet_name([3]), _sheet_name([1, 2]), _sheet_name([1, 2, 3])
    ('Tier 3', 'Tiers 1 and 2', 'Tiers 1 to 3')
    """
    if len(tiers) == 1:
        return f"Tier {tiers[0]}"
    return f"Tiers {tiers[0]} {'and' if len(tiers) == 2 else 'to'} {tiers[-1]}"


def _ratio(result: HardwareCheck) -> float:
    """One scale for all tiers: the plan fits the width, and a tier's two views fit a sheet."""
    x, y = plan_bounds(result)
    depth = max(depth_of(result.hardware, piece) for piece in result.hardware.pieces)
    rest = FIELD.height - _stations_room(result) - 4 * LABELS - 2 * STUB - AIR - TITLE - 10.0
    return round_scale(1000.0 * max((x[1] - x[0]) / (FIELD.width - 40.0), (y[1] - y[0] + depth) / rest))


def _stations_room(result: HardwareCheck) -> float:
    """Room for the row of the pivots' places [mm]: x, and on a surface y as well."""
    return 20.0 if result.check.rig.plan.target.brief.specimen.is_surface else 14.0


def _needed(result: HardwareCheck, tier: Tier, ratio: float) -> float:
    """Height that a tier takes on the sheet [mm]."""
    _, y = plan_bounds(result)
    depth = max(depth_of(result.hardware, piece) for piece in tier.pieces)
    high = (depth + y[1] - y[0]) * 1000.0 / ratio
    return TITLE + _stations_room(result) + 2 * STUB + 3 * LABELS + AIR + high


def _draw_tier(paper: Paper, box: Box, result: HardwareCheck, tier: Tier, ratio: float, sizes: Sizes) -> None:
    """Elevation with the pivots' stations above it, plan beneath, or the other way round where seen from below."""
    x, y = plan_bounds(result)
    mm = 1000.0 / ratio
    left = box.left + (box.width - (x[1] - x[0]) * mm) / 2
    height = result.hardware.heights[tier.pieces[0].name]
    depth = max(depth_of(result.hardware, piece) for piece in tier.pieces)
    wide = (y[1] - y[0]) * mm
    spare = max(0.0, box.height - _needed(result, tier, ratio)) / 3
    upper = _stations_room(result) + STUB + LABELS / 2 + depth / 2 * mm
    if is_up(result):
        middle = box.high - TITLE - spare - upper
        low = middle - depth / 2 * mm - STUB - LABELS - AIR - spare - wide
        room = Box(box.left, box.low, box.width, low + wide + LABELS - box.low)
    else:  # first angle: what is seen from below stands above
        low = box.high - TITLE - spare - LABELS - wide
        middle = low - LABELS - AIR - spare - upper
        room = Box(box.left, low - LABELS, box.width, wide + 2 * LABELS)
    side = View(ratio, left, middle, x[0], height, rise_of(result))
    plan = View(ratio, left, low, x[0], y[0])
    seen, above = seen_words(result)
    words = f"{tier.words}: elevation {seen}, plan {above}; pivots at height {sizes.length(height)}"
    paper.text(box.left + 5, box.high - 5, words, HEAD, bold=True)
    _side(paper, side, result, tier, sizes, box, middle + depth / 2 * mm + STUB + LABELS / 2)
    _plan(paper, plan, result, tier, room)


def _side(paper: Paper, view: View, result: HardwareCheck, tier: Tier, sizes: Sizes, box: Box, line: float) -> None:
    """The tier from the side: its steel, stubs of the links above and below, stations of the pivots."""
    hardware = result.hardware
    height = hardware.heights[tier.pieces[0].name]
    depth = max(depth_of(hardware, piece) for piece in tier.pieces) / 2
    for link, upwards in [(link, True) for link in tier.above] + [(link, False) for link in tier.below]:
        end = link.lower if upwards else link.upper
        x, y = place_of(hardware, end.to, end.at)
        reach = (depth + (STUB - 4.0) / view.mm) * (1.0 if upwards else -1.0)
        far = (x, height + reach)
        upper, lower = (far, (x, height)) if upwards else ((x, height), far)
        side_views.draw_stub(paper, view, link, upper, lower, upwards, side_views.near(result, y))
    side_views.draw_pieces(paper, view, result, tier.pieces)
    is_surface = result.check.rig.plan.target.brief.specimen.is_surface
    top = view.y(height) + depth * view.mm
    features = [(view.x(piece.pivot.x), _pivot(piece, is_surface, sizes), top) for piece in tier.pieces]
    what = f"x, y [{sizes.unit}]" if is_surface else f"x [{sizes.unit}]"
    running_row(paper, _once(features), line, 1.0, (box.left + 16, box.right - 4), datum=False)
    paper.text(max(box.left + 2, min(place for place, _, _ in features) - 20.0), line, what, BODY)
    paper.confine(Box(box.left + 2.0, view.low - depth * view.mm - STUB - LABELS, box.width - 4.0,
                      line - 2.0 - (view.low - depth * view.mm - STUB - LABELS)))  # fmt: skip
    keep_off_steel(paper, view, result, tier.pieces, ())
    for piece in tier.pieces:
        at = view.at(piece.pivot.x, height)
        name_mark(
            paper, "lever", piece.number, hardware.marks[piece.name], at, depth_of(hardware, piece) / 2 * view.mm + 1
        )
    for link, upwards in [(link, True) for link in tier.above] + [(link, False) for link in tier.below]:
        end = link.lower if upwards else link.upper
        x = place_of(hardware, end.to, end.at)[0]
        way = view.rise * (1.0 if upwards else -1.0)
        at = view.x(x), view.y(height) + way * (depth * view.mm + STUB - 5.0)
        name_mark(paper, "link", link.number, hardware.marks[link.name], at, 1.2)


def _pivot(piece: Piece, is_surface: bool, sizes: Sizes) -> str:
    """Where a pivot is: x, and y as well on a surface."""
    x, y = sizes.length(piece.pivot.x), sizes.length(piece.pivot.y)
    return f"{x}, {y}" if is_surface else x


def _once(features: list[tuple[float, str, float]]) -> list[tuple[float, str, float]]:
    """Features of one text at one place only once, the one whose line is longest."""
    found: dict[tuple[float, str], float] = {}
    for place, words, start in features:
        key = (round(place, 2), words)
        found[key] = min(found.get(key, start), start)
    return [(place, words, start) for (place, words), start in found.items()]


def _plan(paper: Paper, view: View, result: HardwareCheck, tier: Tier, room: Box) -> None:
    """The tier in plan, the specimen in phantom lines; pads where their links hang on this tier."""
    hardware = result.hardware
    specimen_views.draw_plan(paper, view, result.check.rig.plan.target.brief)
    pads = [int(link.lower.to.split()[1]) - 1 for link in tier.below if link.lower.to.startswith("pad ")]
    draw_plan(paper, view, result, tier.pieces, pads)
    paper.confine(room.less(2.0, 1.0, 2.0, 1.0))
    keep_off_bars(paper, view, result, tier.pieces)
    for piece in tier.pieces:
        at = view.at(piece.pivot.x, piece.pivot.y)
        name_mark(paper, "lever", piece.number, hardware.marks[piece.name], at, 2.5)
    for pad in pads:
        at = view.at(float(result.check.rig.pad_x[pad]), float(result.check.rig.pad_y[pad]))
        name_mark(paper, "pad", pad + 1, "", at, 2.0)


def places_table(result: HardwareCheck, sizes: Sizes) -> Table:
    """Where the pivot and the outer holes of every lever and plate are at rest."""
    hardware = result.hardware
    is_surface = result.check.rig.plan.target.brief.specimen.is_surface

    def place(x: float, y: float) -> str:
        return f"{sizes.length(x)}, {sizes.length(y)}" if is_surface else sizes.length(x)

    rows = []
    for piece in hardware.pieces:
        ends = [place(hole.x, hole.y) for hole in piece.ends]
        joins = ", ".join(f"{hole.name}: {hole.joins}" for hole in piece.ends)
        rows.append(
            (str(piece.number), hardware.marks[piece.name], str(piece.tier), place(piece.pivot.x, piece.pivot.y),
             sizes.length(height_of(hardware, piece.name)), *[*ends, ""][:3], joins)
        )  # fmt: skip
    what = f"x, y [{sizes.unit}]" if is_surface else f"x [{sizes.unit}]"
    heads = ("lever", "mark", "tier", f"pivot at\n{what}", f"height\n[{sizes.unit}]", f"A at\n{what}", f"B at\n{what}",
             f"C at\n{what}", "what hangs there")  # fmt: skip
    return Table("Places of levers and plates", heads, tuple(rows), "rlrrrrrrl", None)
