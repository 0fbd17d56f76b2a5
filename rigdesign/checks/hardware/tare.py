"""What the rig's own weight does to the error at each step of the test.

Errors are linear in the pad forces, and those in one factor on all jack forces: at every sampled station

    error = s · rate + fixed − f · target

with f the step's level and s the factor.  The factor of least band use makes the largest of so many straight lines
least; where that is, is found exactly.  Bands shrink with the step's load, whatever they are asked for in.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from rigdesign.brief.model import Quantity
from rigdesign.checks.errors import reference
from rigdesign.checks.hardware.loads import Hanging, link_forces, pad_forces
from rigdesign.checks.hardware.model import Loads, Step
from rigdesign.checks.model import Check, Curves
from rigdesign.checks.sampling import Loads as OnSpecimen
from rigdesign.checks.sampling import by_side, rig_loads
from rigdesign.checks.surface.stations import NEAR, PlanLoads
from rigdesign.target.curve import Floats
from rigdesign.words import LOAD_STEPS

MOST_ROUNDS = 1000  # each leaves out a line for good; no rig comes near
SAME = 1e-12  # of a band: lines that meet closer than this meet
BAND_SLACK = 1e-9  # of a band: what the search puts right on it must not fail by rounding
NOTHING = 1e-9  # of the largest link force at the brief's load: a link that carries less carries nothing


@dataclass(frozen=True)
class Sampled:
    """Stations of a rig's curves, and what its loads make there; every array (n_stations,) [N or N·m].

    By quantity: `target`, at the brief's load; `gravity`, what the specimen's weight brings; `below`, `above`, the
    bands' widths at the brief's load, infinite where nothing is asked; `size`, what errors are fractions of.
    """

    check: Check
    target: Mapping[Quantity, Floats]
    gravity: Mapping[Quantity, Floats]
    below: Mapping[Quantity, Floats]
    above: Mapping[Quantity, Floats]
    size: Mapping[Quantity, float]

    def of_pads(self, force: Floats) -> dict[Quantity, Floats]:
        """What pad forces (n_pads,) [N] alone bring to every quantity, supports' answer included."""
        found = _values(self.check, force)
        return {quantity: found[quantity] - self.gravity[quantity] for quantity in self.target}


def sampled(check: Check) -> Sampled:
    """Return the stations of a check's curves, made ready for other pad forces."""
    every = _curves(check)
    target = check.rig.plan.target
    return Sampled(
        check=check,
        target={q: rows.target[q] for rows in every for q in rows.target},
        gravity=_values(check, np.zeros(check.rig.pad_x.size)),
        below={q: rows.below[q] for rows in every for q in rows.target},
        above={q: rows.above[q] for rows in every for q in rows.target},
        size={q: reference(target, q).size for rows in every for q in rows.target},
    )


def _curves(check: Check) -> list[Curves]:
    return [check.curves] if check.across is None else [check.curves, check.across]


def _values(check: Check, force: Floats) -> dict[Quantity, Floats]:
    """Every quantity at the check's stations under pad forces and gravity."""
    target, rig = check.rig.plan.target, check.rig
    specimen = target.brief.specimen
    loads: OnSpecimen
    if specimen.is_surface:
        loads, near = PlanLoads(target, rig.pad_x, rig.pad_y, force), NEAR * (specimen.right - specimen.left)
    else:
        loads, near = rig_loads(target, rig.pad_x, force), 0.0
    result: dict[Quantity, Floats] = {}
    for rows in _curves(check):
        # in plan the two sides of a jump stand a little off it, as they did when the check sampled them; at other
        # stations that little changes nothing that counts
        x = rows.x + np.where(rows.outboard, near, -near)
        for quantity in rows.target:
            result[quantity] = by_side(lambda at, side, q=quantity: loads.value(q, at, side), x, rows.outboard)  # type: ignore[misc]
    return result


@dataclass(frozen=True)
class Weighed:
    """A rig's errors with its own weight as lines over the factor on its jack forces, at the sampled stations.

    `rate` and `fixed` by quantity, (n_stations,): what the pads bring for each unit of the factor, and without it.
    `jack` (n_trees,) [N] are the jacks' forces at the factor 1: those of the rig.
    """

    sampled: Sampled
    hung: Hanging
    loads: Loads
    jack: Floats
    rate: Mapping[Quantity, Floats]
    fixed: Mapping[Quantity, Floats]

    def errors(self, level: float, factor: float) -> dict[Quantity, Floats]:
        """Rig minus the step's target at the stations, by quantity."""
        at, s = self.sampled, factor
        return {q: s * self.rate[q] + self.fixed[q] + at.gravity[q] - level * at.target[q] for q in self.rate}

    def best_factor(self, level: float) -> float:
        """The factor of least band use at a step; where no band is asked, that at which the resultant is right."""
        slopes, starts = [], []
        at = self.sampled
        for quantity, rate in self.rate.items():
            start = self.errors(level, 0.0)[quantity]
            for width, sign in ((at.above[quantity], 1.0), (at.below[quantity], -1.0)):
                judged = np.isfinite(width)
                slopes.append(sign * rate[judged] / width[judged])
                starts.append(sign * start[judged] / width[judged])
        return lowest(np.concatenate(slopes), np.concatenate(starts), self.even_factor(level))

    def even_factor(self, level: float) -> float:
        """The factor at which all pads together bring what the step asks of them."""
        target = self.sampled.check.rig.plan.target
        wanted = level * target.total.total - target.gravity.total
        return (wanted - float(self.loads.pad_fixed.sum())) / float(self.pull.sum())

    def held_at(self, level: float, overshoot: float) -> Floats:
        """The jacks' forces that members must bear at a step, overshoot included [N], (n_trees,).

        Those at which the pads together bring what the step asks of them, times the overshoot; or those of the step,
        where least band use asks for more than that.  Of a rig that is out of its bands without any weight, the jack
        force of least band use says nothing of what it must bear.
        """
        even, best = overshoot * self.even_factor(level), self.best_factor(level)
        keeps_bands = self.sampled.check.band_use <= 1 + BAND_SLACK
        return (best if keeps_bands and abs(best) > abs(even) else even) * self.jack

    @property
    def pull(self) -> Floats:
        """Pad forces for each unit of the factor [N], (n_pads,)."""
        return self.loads.pad_rate * self.jack[self.hung.tree[self.hung.pad_link]]

    def step(self, level: float) -> Step:
        """The step at a level of the brief's load, jack forces at their best."""
        return self.step_at(level, self.best_factor(level))

    def step_at(self, level: float, factor: float) -> Step:
        """The step at a level with a factor on the jack forces."""
        at, errors = self.sampled, self.errors(level, factor)
        use = 0.0
        for quantity, error in errors.items():
            width = np.where(error < 0, at.below[quantity], at.above[quantity])
            use = max(use, float((np.abs(error) / width).max()) / level)
        jack = factor * self.jack
        return Step(
            level=level,
            jack=jack,
            pad_force=pad_forces(self.loads, self.hung, jack),
            errors={q: float(np.abs(error).max()) / (level * at.size[q]) for q, error in errors.items()},
            band_use=use,
            slack=self.slack(jack),
        )

    def slack(self, jack: Floats) -> tuple[int, ...]:
        """The pads whose links would carry nothing or the wrong way under jack forces (n_trees,) [N], by number."""
        carried = self.right_way(jack)[self.hung.pad_link]
        least = NOTHING * float(np.abs(self.loads.link_rate * self.jack[self.hung.tree]).max())
        return tuple(int(i) + 1 for i in np.flatnonzero(carried <= least))

    def right_way(self, jack: Floats) -> Floats:
        """What each link carries at its lower end [N], positive where it acts as in the test, (n_links,)."""
        total = float(self.jack.sum())
        return np.asarray(link_forces(self.loads, jack)[1] * np.sign(total))


def weighed(at: Sampled, hung: Hanging, loads: Loads) -> Weighed:
    """Return a rig's errors with its own weight, ready for any step."""
    rig = at.check.rig
    jack = rig.jack_forces
    pull = loads.pad_rate * jack[hung.tree[hung.pad_link]]
    return Weighed(at, hung, loads, jack, rate=at.of_pads(pull), fixed=at.of_pads(loads.pad_fixed))


def steps(weighed_rig: Weighed, peak: float) -> tuple[Step, ...]:
    """Return the steps of the test: those of common practice and the test's peak, in rising order."""
    levels = [*LOAD_STEPS, *([] if min(abs(peak - level) for level in LOAD_STEPS) < SAME else [peak])]
    return tuple(weighed_rig.step(level) for level in sorted(levels))


def lowest(slope: Floats, start: Floats, first: float) -> float:
    """Return where the largest of the lines start + slope · s, (n,) each, is least; `first` where no line is given.

    Two lines that meet, one falling and one rising, bound the least from below; the highest line where they meet takes
    the place of the one that it goes with, until none is higher.  Where the least is reached along a stretch, `first`
    is returned if it lies there, else some place of the stretch.

    >>> lowest(np.array([1.0, -2.0, 0.5]), np.array([0.0, 3.0, -9.0]), 0.0)
    1.0
    >>> lowest(np.array([1.0, -1.0, 0.0]), np.array([0.0, 0.0, 2.0]), 1.5)
    1.5
    """
    if not slope.size or slope.min() >= 0 or slope.max() <= 0:
        return first  # no line at all, or all rise or all fall: nothing holds the factor on one side
    top = int(np.argmax(start + slope * first))
    if slope[top] == 0:
        return first
    rising, falling = (top, int(np.argmin(slope))) if slope[top] > 0 else (int(np.argmax(slope)), top)
    at = first
    for _ in range(MOST_ROUNDS):
        at = float((start[falling] - start[rising]) / (slope[rising] - slope[falling]))
        height = start[rising] + slope[rising] * at
        every = start + slope * at
        top = int(np.argmax(every))
        if slope[top] == 0 or every[top] <= height + SAME * (1.0 + abs(height)):
            break
        rising, falling = (top, falling) if slope[top] > 0 else (rising, top)
    return at
