"""Where everything goes on the sheet of the tree: a plan in millimetres, made before anything is drawn.

Terms: `reach` is the distance on the paper from the specimen's loaded face towards the jack, so that one layout serves
trees above and below the specimen.  A `lane` is a row inside a tier, for levers that lie over one another.  Stations
are to scale along the sheet, heights are not.  The tree of a plan rig is drawn branch by branch instead.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from itertools import pairwise

from rigdesign.checks.measures import reaches
from rigdesign.checks.model import Check
from rigdesign.display import System
from rigdesign.levers.model import Piece, Rig
from rigdesign.report.figures_parts import MARK
from rigdesign.report.figures_sheet import A3, A4, MM_PER_POINT, text_width
from rigdesign.report.scales import Scale, arm_scale, scale

MARGIN = 16.0
"""Free margin left and right of the specimen [mm]."""
HEAD, FOOT = 24.0, 22.0
"""Heights kept for titles, and for key and caution [mm]."""
FAR_SIDE = 36.0
"""Height of the specimen and of what is written on its far side [mm]: two rows of numbers."""
FAR_SIDE_PLAN = 50.0
"""The same for a plan rig: three rows of numbers [mm]."""
JACK_LINK = 12.0
"""From the uppermost lever to the middle of the jack's mark [mm]."""
JACK_ARROW = 14.0
"""Height of the arrow beyond the jack's mark [mm]."""
AIR = 0.8
"""Clear distance between two texts [mm]."""
SMALL_SHEET_PADS, LARGE_SHEET_PADS = 12, 40
"""Up to so many pads an A4 sheet is used, up to so many A3, beyond that a longer one."""
SPARE_IN_TIER = 18.0
"""At most so much of the sheet's spare height goes into each tier [mm]."""


@dataclass(frozen=True)
class Frame:
    """Scales of the sheet: stations [m] to millimetres, font size [pt], units of arms and loads."""

    left_station: float
    mm_per_m: float
    font: float
    arms: Scale
    loads: Scale

    def at(self, station: float) -> float:
        """Place on the sheet [mm] of a station [m]."""
        return MARGIN + (float(station) - self.left_station) * self.mm_per_m

    @property
    def line(self) -> float:
        """Height of a line of text [mm]."""
        return self.font * MM_PER_POINT


@dataclass(frozen=True)
class Label:
    """A text: its centre x and reach [mm] (from its bar, or from the specimen's face), and its size as it stands."""

    text: str
    x: float
    reach: float
    upright: bool
    width: float
    height: float

    @property
    def depth(self) -> float:
        """How far it goes from its bar towards the specimen [mm]."""
        return self.height / 2.0 - self.reach


@dataclass(frozen=True)
class Bar:
    """A lever or plate on the sheet: pivot and ends [mm] with what hangs there, its reach, and its labels."""

    number: int
    pivot_x: float
    ends: tuple[tuple[str, float], ...]
    reach: float
    labels: tuple[Label, ...]
    is_plate: bool = False


@dataclass(frozen=True)
class Layout:
    """The whole sheet: paper [mm], pads' x and rows of marks, every lever, the jack, and the height of the far side."""

    size: tuple[float, float]
    frame: Frame
    pad_x: tuple[float, ...]
    pad_rows: tuple[int, ...]
    bars: tuple[Bar, ...]
    jack_x: float
    jack_reach: float
    far_side: float = FAR_SIDE


def plan_sheet(check: Check, system: System = "SI") -> Layout:
    """Return the layout of the tree of a checked rig with one jack; that of a plan rig goes branch by branch."""
    rig, far_side = check.rig, FAR_SIDE
    if rig.plan.target.brief.specimen.is_surface:
        from rigdesign.report.surface.branches import in_branches

        rig, far_side = in_branches(rig), FAR_SIDE_PLAN
    width, height = _paper(rig.plan.n_pads)
    frame = _frame(rig, width, system)
    pad_x = tuple(frame.at(x) for x in rig.pad_x)
    rows = _mark_rows(pad_x)
    room = height - HEAD - FOOT - far_side - JACK_LINK - JACK_ARROW
    bars, top = _bars(rig, check, frame, 4.0 + (max(rows) + 1) * (MARK + AIR), room)
    jack_reach = top + JACK_LINK
    tall = max(height, jack_reach + JACK_ARROW + HEAD + FOOT + far_side)
    return Layout((width, tall), frame, pad_x, rows, bars, frame.at(rig.trees[0].jack.x), jack_reach, far_side)


def _paper(n_pads: int) -> tuple[float, float]:
    if n_pads <= SMALL_SHEET_PADS:
        return A4
    return A3[0] * max(1.0, n_pads / LARGE_SHEET_PADS), A3[1]


def _frame(rig: Rig, width: float, system: System) -> Frame:
    specimen = rig.plan.target.brief.specimen
    mm_per_m = (width - 2 * MARGIN) / (specimen.right - specimen.left)
    pad_x = sorted(rig.pad_x)
    pitch = min((b - a for a, b in pairwise(pad_x)), default=1e9) * mm_per_m
    arms = arm_scale(rig.plan.target.brief.levers.drill_step, system)
    loads = scale("force", abs(rig.trees[0].force), system)
    return Frame(specimen.left, mm_per_m, 7.0 if pitch >= 9.0 else 6.0, arms, loads)


def _mark_rows(pad_x: tuple[float, ...]) -> tuple[int, ...]:
    """Row of each pad's mark: the nearest to the specimen in which it does not touch the mark before it."""
    last: list[float] = []
    rows = [0] * len(pad_x)
    for k in sorted(range(len(pad_x)), key=lambda k: pad_x[k]):
        x = pad_x[k]
        rows[k] = next((r for r, taken in enumerate(last) if x - taken >= MARK + AIR / 2), len(last))
        last[rows[k] : rows[k] + 1] = [x]
    return tuple(rows)


def _lanes(pieces: tuple[Piece, ...]) -> dict[str, tuple[int, int]]:
    """Tier and lane of each lever by name; lane 0 unless it would lie over another lever of its tier."""
    lanes: dict[str, tuple[int, int]] = {}
    taken: dict[int, list[float]] = {}
    for piece in sorted(pieces, key=lambda piece: (piece.tier, piece.ends[0].x)):
        used = taken.setdefault(piece.tier, [])
        lane = next((k for k, end in enumerate(used) if piece.ends[0].x > end), len(used))
        used[lane : lane + 1] = [piece.ends[-1].x]
        lanes[piece.name] = (piece.tier, lane)
    return lanes


def _bars(rig: Rig, check: Check, frame: Frame, start: float, room: float) -> tuple[tuple[Bar, ...], float]:
    """Return every lever at its height, deepest tier nearest to the specimen, and the reach of the uppermost."""
    pieces = rig.trees[0].pieces
    lanes = _lanes(pieces)
    labels = {piece.name: _labels(piece, check.statics.piece_load[piece.name], frame) for piece in pieces}
    depth: dict[tuple[int, int], float] = {}
    for name, lane in lanes.items():
        depth[lane] = max([depth.get(lane, 0.0), *(label.depth for label in labels[name])])
    needed = start + sum(depth.values()) + len(depth) * (MARK / 2 + 2 * AIR)
    spare = max(0.0, min(SPARE_IN_TIER, (room - needed) / max(len(depth), 1)))
    reach, level = {}, start
    for lane in sorted(depth, reverse=True):
        reach[lane] = level + depth[lane] + 2 * AIR + spare
        level = reach[lane] + MARK / 2
    bars = tuple(_bar(piece, reach[lanes[piece.name]], labels[piece.name], frame) for piece in pieces)
    return bars, level


def _bar(piece: Piece, reach: float, labels: tuple[Label, ...], frame: Frame) -> Bar:
    ends = tuple((hole.joins, frame.at(hole.x)) for hole in piece.ends)
    placed = tuple(replace(label, reach=reach + label.reach) for label in labels)
    return Bar(piece.number, frame.at(piece.pivot.x), ends, reach, placed, piece.kind == "plate")


def _labels(piece: Piece, load: float, frame: Frame) -> tuple[Label, ...]:
    """Arms beneath the bar, side by side where they fit, and the load beneath them; reach is from the bar."""
    if piece.kind == "plate":
        return _plate_labels(piece, load, frame)
    low, high = frame.at(piece.ends[0].x) + AIR, frame.at(piece.ends[-1].x) - AIR
    pivot = frame.at(piece.pivot.x)
    texts = [frame.arms.show(arm) for arm in reaches(piece)]
    wanted = [(pivot + frame.at(hole.x)) / 2 for hole in piece.ends]
    widths = [text_width(text, frame.font) for text in texts]
    flat = sum(widths) + AIR * (len(texts) - 1) <= high - low
    beside = flat or len(texts) * (frame.line + AIR) <= high - low + AIR
    start = -MARK / 2 - AIR / 2
    result = []
    if beside:
        across = widths if flat else [frame.line] * len(texts)
        for text, width, x in zip(texts, widths, _side_by_side(wanted, across, low, high), strict=True):
            result.append(_label(text, x, start, not flat, width, frame))
        start = min(-label.depth for label in result) - AIR
    else:
        for text, width in zip(texts, widths, strict=True):
            result.append(_label(text, (low + high) / 2, start, True, width, frame))
            start = -result[-1].depth - AIR
    return (*result, _load_label(load, pivot, (low, high), start, frame))


def _load_label(load: float, pivot: float, room: tuple[float, float], start: float, frame: Frame) -> Label:
    """The load near the pivot, between these edges, upright where it is too wide for them."""
    low, high = room
    shown = frame.loads.show(load)
    width = text_width(shown, frame.font)
    upright = width > high - low
    half = (frame.line if upright else width) / 2
    x = (low + high) / 2 if 2 * half > high - low else min(max(pivot, low + half), high - half)
    return _label(shown, x, start, upright, width, frame)


def _plate_labels(piece: Piece, load: float, frame: Frame) -> tuple[Label, ...]:
    """Distances beside the links of their holes, those of A and B to the right, that of C to the left; the load."""
    a, b, c = (frame.at(hole.x) for hole in piece.ends)
    texts = [frame.arms.show(reach) for reach in reaches(piece)]
    widths = [text_width(text, frame.font) for text in texts]
    upright = widths[0] > b - a - 2 * AIR or widths[1] + widths[2] > c - b - 3 * AIR
    start = -MARK / 2 - AIR / 2
    result = []
    for text, width, link, way in zip(texts, widths, (a, b, c), (1.0, 1.0, -1.0), strict=True):
        across = frame.line if upright else width
        result.append(_label(text, link + way * (AIR + across / 2), start, upright, width, frame))
    start = min(-label.depth for label in result) - AIR
    return (*result, _load_label(load, frame.at(piece.pivot.x), (a + AIR, b - AIR), start, frame))


def _label(text: str, x: float, start: float, upright: bool, width: float, frame: Frame) -> Label:
    """A label whose upper edge is at reach `start` from the bar."""
    across, down = (frame.line, width) if upright else (width, frame.line)
    return Label(text, x, start - down / 2, upright, across, down)


def _side_by_side(wanted: list[float], widths: list[float], low: float, high: float) -> list[float]:
    """Centres near the wanted ones that keep order, distance and the edges; the widths must fit between these."""
    centres: list[float] = []
    edge = low
    for k, (place, width) in enumerate(zip(wanted, widths, strict=True)):
        rest = sum(widths[k + 1 :]) + AIR * (len(widths) - k - 1)
        centre = min(max(place, edge + width / 2), high - rest - width / 2)
        centres.append(centre)
        edge = centre + width / 2 + AIR
    return centres
