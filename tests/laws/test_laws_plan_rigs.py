"""Laws of plan rigs, over random briefs taken through the whole chain: shifted, turned, mirrored, and every y zero.

The specimen is a kite that is pointed at its root and at its tip, with the reference axis from point to point: turned
by a few degrees it still runs from end to end.  Briefs are written as TOML, so that rig.json can keep them.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace

import numpy as np
import pytest
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from rigdesign.brief import brief_from_source
from rigdesign.brief.model import Brief, Floats, Source
from rigdesign.chain import arrange
from rigdesign.checks import check
from rigdesign.checks.model import Check
from rigdesign.findings import Refusal
from rigdesign.record.rig_json import rig_from_json, rig_to_json
from rigdesign.report.tables import table_files

few = settings(max_examples=4, deadline=None, suppress_health_check=list(HealthCheck), derandomize=True)

ROOT, TIP = np.array([0.0, 0.05]), np.array([3.2, -0.10])
KITE = np.array([ROOT, [1.1, -0.75], [2.5, -0.70], TIP, [2.2, 0.52], [0.9, 0.80]])
LOWER, UPPER = KITE[:4], KITE[[0, 5, 4, 3]]
STATIONS, PARTS = np.repeat([0.55, 1.05, 1.6, 2.15, 2.6], 3), np.tile([0.2, 0.5, 0.8], 5)
GRID = np.column_stack([STATIONS, (1 - PARTS) * np.interp(STATIONS, *LOWER.T) + PARTS * np.interp(STATIONS, *UPPER.T)])


@dataclass(frozen=True)
class Move:
    """A plan turned by an angle [rad], after being mirrored in y where asked, and shifted [m]."""

    shift: tuple[float, float] = (0.0, 0.0)
    angle: float = 0.0
    mirrored: bool = False

    @property
    def matrix(self) -> Floats:
        """What turns and mirrors, (2, 2)."""
        cos, sin = np.cos(self.angle), np.sin(self.angle)
        return np.array([[cos, -sin], [sin, cos]]) @ np.diag([1.0, -1.0 if self.mirrored else 1.0])

    def __call__(self, places: Floats) -> Floats:
        """Places (n, 2) [m] moved."""
        return np.asarray(places @ self.matrix.T + self.shift)

    def back(self, places: Floats) -> Floats:
        """Moved places (n, 2) [m] as they were."""
        return np.asarray((places - self.shift) @ self.matrix)


STAY = Move()


@dataclass(frozen=True)
class Draw:
    """Numbers of a brief: lengths in m, forces in N, pressures in Pa, the moment's band in per cent.

    The torsion's band is `torsion` [m] times more than the load: a percentage may mean one of the mean width, which is
    the area over the span along x and so turns with no plan.
    """

    pressure: tuple[float, float, float]
    point: tuple[float, float]
    jitter: tuple[float, ...]
    count: int
    places: str
    plates: bool
    cut: str
    moment: float
    torsion: float
    move: Move = field(default=STAY)

    @property
    def candidates(self) -> Floats:
        """Places on an irregular grid, (n, 2)."""
        return GRID + 0.03 * np.array(self.jitter[: GRID.size]).reshape(GRID.shape)

    def texts(self) -> dict[str, str]:
        """The brief and its tables."""
        move, tables = self.move, {"outline": KITE[:: -1 if self.move.mirrored else 1]}
        kept = self.candidates if self.places == "hard points" else self.candidates[:: 3 if self.count < 5 else 2]
        tables["places"] = kept
        root, tip = move(np.array([ROOT, TIP])).tolist()
        at = move(ROOT + (TIP - ROOT) * self.point[0] + np.array([0.0, 0.2])).tolist()
        p_0, by_x, by_y = self.pressure
        loaded = "".join(
            f"{x!r},{y!r},{p_0 * (1 + by_x * was[0] + by_y * was[1])!r}\n"
            for was, (x, y) in zip(KITE.tolist(), move(KITE).tolist(), strict=True)
        )
        text = (
            f'title = "Drawn"\n[specimen]\nsupport = "cantilever"\nroot = "{root[0]!r} m"\ntip = "{tip[0]!r} m"\n'
            f'outline = "outline.csv"\ncut = "{self.cut}"\n'
            f'axis = [["{root[0]!r} m", "{root[1]!r} m"], ["{tip[0]!r} m", "{tip[1]!r} m"]]\n'
            f'[[load]]\npressure = "map.csv"\n'
            f'[[load]]\npoint = "{self.point[1]!r} N"\nat = ["{at[0]!r} m", "{at[1]!r} m"]\n'
            f'[pads]\nplaces = "{self.places}"\ntable = "places.csv"\nlength = "0.1 m"\nwidth = "0.06 m"\n'
            f'turn = "along axis"\nleast_force = "10 N"\n'
            + (f"count = {self.count}\n" if self.places == "hard points" else f"count = {len(kept)}\n")
            + f'[levers]\ndrill_step = "1 mm"\nratio_limit = 12\nplates = {str(self.plates).lower()}\n'
            'clearance = "0 m"\n'
            f'[acceptance]\nmoment = "{self.moment!r} %"\ntorsion = "{self.torsion * (3.1 * p_0 + 400.0)!r} N*m"\n'
        )
        files = {f"{name}.csv": _csv(move(places)) for name, places in tables.items()}
        return {"drawn.toml": text, "map.csv": "x [m],y [m],pressure [Pa]\n" + loaded, **files}

    def brief(self) -> Brief:
        """The brief as read from its texts."""
        return brief_from_source(Source("drawn.toml", self.texts()))


def _csv(places: Floats) -> str:
    return "x [m],y [m]\n" + "".join(f"{x!r},{y!r}\n" for x, y in places.tolist())


def draws(places: str | None = None, cut: str | None = None) -> st.SearchStrategy[Draw]:
    """Random briefs of the kite."""
    part = st.floats(-1.0, 1.0).map(lambda v: round(v, 3))
    return st.builds(
        Draw,
        pressure=st.tuples(st.floats(300.0, 2000.0), st.floats(-0.25, 0.0), st.floats(-0.4, 0.4)),
        point=st.tuples(st.floats(0.2, 0.7), st.floats(50.0, 400.0)),
        jitter=st.lists(part, min_size=GRID.size, max_size=GRID.size).map(tuple),
        count=st.integers(4, 6),
        places=st.just(places) if places else st.sampled_from(["fixed", "hard points"]),
        plates=st.booleans(),
        cut=st.just(cut) if cut else st.sampled_from(["square to x", "square to axis"]),
        moment=st.floats(2.0, 8.0),
        torsion=st.floats(0.015, 0.06),
    )


def designed(draw: Draw) -> Check:
    answer = arrange(draw.brief())
    assume(not isinstance(answer, Refusal))
    assert isinstance(answer, Check)
    return answer


def as_it_was(found: Check, move: Move) -> tuple[Floats, Floats, Floats, Floats]:
    """Pads as planned and as drilled, (n, 3) each, pivots (k, 2) and arms, all moved back and sorted by place."""
    rig, plan = found.rig, found.rig.plan
    pieces = rig.trees[0].pieces
    planned = np.column_stack([move.back(np.column_stack([plan.x, plan.y])), plan.force])
    drilled = np.column_stack([move.back(np.column_stack([rig.pad_x, rig.pad_y])), found.statics.pad_force])
    pivots = move.back(np.array([(piece.pivot.x, piece.pivot.y) for piece in pieces]))
    arms = np.sort([np.hypot(hole.u, hole.v) for piece in pieces for hole in piece.ends])
    return _sorted(planned), _sorted(drilled), _sorted(pivots), arms


def _sorted(rows: Floats) -> Floats:
    near = np.round(rows[:, :2], 6)
    return rows[np.lexsort((near[:, 1], near[:, 0]))]


def groups(found: Check, move: Move) -> set[frozenset[tuple[float, ...]]]:
    """The places of the pads below each piece, moved back."""
    places = move.back(np.column_stack([found.rig.plan.x, found.rig.plan.y])).round(6) + 0.0
    below: dict[str, frozenset[tuple[float, ...]]] = {
        f"pad {number}": frozenset([tuple(place.tolist())]) for number, place in enumerate(places, start=1)
    }
    # pieces are numbered from the jack on, so that what hangs on one comes after it
    for piece in reversed(found.rig.trees[0].pieces):
        below[piece.name] = frozenset().union(*(below[hole.joins] for hole in piece.ends))
    return {below[piece.name] for piece in found.rig.trees[0].pieces}


def same_plans(one: Check, other: Check, move: Move) -> None:
    """Assert that the other plan is the first one moved, and its pads are joined alike.

    Where bound and design of hard points meet within a thousandth, or neighbours are exchanged for even forces, another
    numbering may end with other pads: then only what is proven and found of the band use is the same.
    """
    first, second = one.rig.plan.proof, other.rig.plan.proof
    assert second.band_use_least == pytest.approx(first.band_use_least, rel=2e-3, abs=1e-9)
    assert second.band_use_found == pytest.approx(first.band_use_found, rel=2e-3, abs=1e-9)
    if one.rig.plan.target.brief.pads.places == "fixed":
        # forces come from linear programmes, which stop at 1e-7 of what they are scaled by
        np.testing.assert_allclose(as_it_was(other, move)[0], as_it_was(one, STAY)[0], rtol=1e-5, atol=1e-6)
        assert groups(other, move) == groups(one, STAY)


shifts = st.tuples(st.floats(-4.0, 4.0), st.floats(-4.0, 4.0)).map(lambda s: (round(s[0], 3), round(s[1], 3)))


@few
@given(draws(), shifts)
def test_a_shifted_plan_gives_the_shifted_rig(draw: Draw, shift: tuple[float, float]) -> None:
    move = Move(shift)
    one, other = designed(draw), designed(replace(draw, move=move))
    for was, now in zip(as_it_was(one, STAY), as_it_was(other, move), strict=True):
        np.testing.assert_allclose(now, was, rtol=1e-6, atol=1e-7)
    # cuts at jumps stand 1e-10 of the span off
    assert other.band_use == pytest.approx(one.band_use, rel=1e-6)


@few
@given(draws(cut="square to axis"), st.floats(-22.0, 22.0), shifts)
def test_a_turned_plan_gives_the_turned_rig(draw: Draw, degrees: float, shift: tuple[float, float]) -> None:
    """All but the last drill steps: they are looked for in the order of the pads' numbers, which turn with no plan."""
    move = Move(shift, float(np.radians(degrees)))
    one, other = designed(draw), designed(replace(draw, move=move))
    same_plans(one, other, move)
    if draw.places == "fixed":
        assert other.band_use == pytest.approx(one.band_use, abs=0.02)


@few
@given(draws())
def test_a_plan_mirrored_across_the_span_has_the_same_band_use(draw: Draw) -> None:
    move = Move(mirrored=True)
    same_plans(designed(draw), designed(replace(draw, move=move)), move)


@few
@given(draws())
def test_sums_close_at_every_pivot_and_over_the_whole_rig(draw: Draw) -> None:
    found = designed(draw)
    assert found.statics.force_residual <= 1e-9
    assert found.statics.moment_residual <= 1e-9
    assert found.sum_residual <= 1e-9
    assert found.moment_sum_residual <= 1e-9
    rig, force = found.rig, found.statics.pad_force
    jack = rig.trees[0].jack
    for at, pads in ((jack.x, rig.pad_x), (jack.y, rig.pad_y)):
        assert force @ (pads - at) == pytest.approx(0.0, abs=1e-9 * force.sum() * 3.2)


@few
@given(draws())
def test_rig_json_brings_back_the_same_rig_and_the_same_brief_the_same_bytes(draw: Draw) -> None:
    found = designed(draw)
    text = rig_to_json(found)
    again = check(rig_from_json(text))
    assert rig_to_json(again) == text
    assert again.findings == found.findings
    assert table_files(again) == table_files(found) == table_files(designed(draw))


def on_a_line(surface: bool, stations: list[float], group: object, load: str) -> Check:
    """The rig of pads on the axis under a running load, with or without an outline round it."""
    outline = 'outline = "outline.csv"\n' if surface else ""
    places = ", ".join(repr(x) for x in stations)
    text = (
        f'title = "Drawn"\n[specimen]\nsupport = "cantilever"\nroot = "0.2 m"\ntip = "3.4 m"\n{outline}[[load]]\n{load}'
        f'[pads]\nplaces = "fixed"\nstations = "{places} m"\ncount = {len(stations)}\nlength = "0.05 m"\n'
        + ('width = "0.05 m"\n' if surface else "")
        + f'[levers]\ndrill_step = "1 mm"\nratio_limit = 50\ngrouping = {group}\n'
        '[acceptance]\nmoment = "3 %"\nshear = "15 %"\n'
    )
    texts = {"drawn.toml": text, "outline.csv": "x [m],y [m]\n0.2,-0.3\n3.4,-0.3\n3.4,0.3\n0.2,0.3\n"}
    answer = arrange(brief_from_source(Source("drawn.toml", texts)))
    assume(not isinstance(answer, Refusal))
    assert isinstance(answer, Check)
    return answer


def halves(first: int, last: int) -> object:
    """A grouping of pads first to last by halves."""
    if first == last:
        return first
    middle = (first + last) // 2
    return [halves(first, middle), halves(middle + 1, last)]


@few
@given(
    st.lists(st.floats(-0.3, 0.3), min_size=3, max_size=8),
    st.sampled_from(['shape = "elliptical"\n', 'shape = "triangular"\ngreatest = "root"\n']),
)
def test_with_every_y_zero_the_rig_is_the_line_rig(jitter: list[float], load: str) -> None:
    count = len(jitter)
    stations = [round(0.2 + 3.2 * (k + 0.4 + j) / count, 4) for k, j in enumerate(jitter)]
    load += 'total = "5.4 kN"\n'
    one, other = (on_a_line(surface, stations, halves(1, count), load) for surface in (False, True))
    first, second = one.rig.plan, other.rig.plan
    # a line rig's shares are read off rows of its shear, straight between them
    np.testing.assert_allclose(second.share, first.share, rtol=2e-4)
    assert not second.y.any()
    assert not other.rig.pad_y.any()
    # bisections and linear programmes stop at 1e-9 or so of what they are scaled by
    assert second.proof.band_use_found == pytest.approx(first.proof.band_use_found, rel=1e-6)
    # the largest deviation is made least on both roads, what else is even is the plan's alone
    assert second.proof.evenness == pytest.approx(first.proof.evenness, rel=0.02, abs=1e-4)
    np.testing.assert_allclose(second.force, first.force, atol=0.02 * first.force.mean())
    # the same holes have the same numbers, whichever the brief
    same = check(replace(one.rig, plan=second))
    for name in ("band_use", "moment_error_peak", "shear_error_peak", "steel_estimate", "evenness", "shear_area"):
        # cuts at jumps stand 1e-10 of the span off on surfaces
        assert getattr(same, name) == pytest.approx(getattr(one, name), rel=1e-6), name
    np.testing.assert_allclose(same.statics.pad_force, one.statics.pad_force, rtol=1e-12)
    np.testing.assert_allclose(same.share_of_curve, one.share_of_curve, rtol=1e-6)
