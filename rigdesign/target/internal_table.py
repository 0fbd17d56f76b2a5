"""The load behind a table of shear V and moment M.

Between two rows the curve through M is a cubic whose slope at both rows is −V, so the running load is a straight line:
with h the distance of the rows, P = V_in − V_out the load between them and d = (M_in − M_out) − h (V_in + V_out)/2 the
part of the moment's change that the shear's two values do not explain,

    w at the inboard row = P/h − 6 d/h²,    w at the outboard row = P/h + 6 d/h².

Inboard of the first row there is no load.  A jump of V between two rows at one x, and a shear left at the last row, are
point loads.  A moment left at the last row, or a jump of M, is a couple; forces on the span cannot make one, so the
curve keeps every change of M between rows and leaves the couple out (`table_remarks` says so).
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from rigdesign.brief.model import InternalLoad
from rigdesign.errors import BriefError
from rigdesign.target.curve import Curve, Floats
from rigdesign.target.polynomial import Polynomials
from rigdesign.target.sums import Combined, Points


@dataclass(frozen=True)
class Steps:
    """The steps between rows at different stations, all (n,): `start`, `end` [m], the shear just outboard of `start`
    and just inboard of `end` [N], the change of M [N·m] and `allowed`, how much of it rounding explains [N·m].
    """

    start: Floats
    end: Floats
    shear_in: Floats
    shear_out: Floats
    drop: Floats
    allowed: Floats

    @property
    def width(self) -> Floats:
        """Distance of the rows h [m]."""
        return self.end - self.start

    @property
    def load(self) -> Floats:
        """Load between the rows P [N]."""
        return self.shear_in - self.shear_out

    @property
    def straight(self) -> Floats:
        """Change of M if V were straight between the rows [N·m]."""
        return self.width * (self.shear_in + self.shear_out) / 2.0

    @property
    def defect(self) -> Floats:
        """The part d of the change of M that the two shears do not explain [N·m]."""
        return self.drop - self.straight


def steps_of(load: InternalLoad) -> Steps:
    """Return the steps of a table; raise BriefError where it has no two stations."""
    real = np.diff(load.x) > 0
    if not real.any():
        raise BriefError("a table of shear and moment needs two stations at least", where=load.where,
                         value=f"{np.unique(load.x).size} station", remedy="add its other rows")  # fmt: skip
    rows = np.flatnonzero(real)
    width = np.diff(load.x)[real]
    # Both moments, and both shears, are off by up to half a digit; sums of floats by a little more.
    allowed = load.moment_digit + width * load.shear_digit / 2.0 + 1e-9 * float(np.abs(load.moment).max())
    return Steps(
        start=load.x[rows],
        end=load.x[rows + 1],
        shear_in=load.shear[rows],
        shear_out=load.shear[rows + 1],
        drop=load.moment[rows] - load.moment[rows + 1],
        allowed=allowed,
    )


def jumps_of(load: InternalLoad) -> tuple[Floats, Floats, Floats]:
    """Return the rows at one x and the last row: station [m], jump of V [N] and of M [N·m], inboard minus outboard."""
    same = np.flatnonzero(np.diff(load.x) == 0)
    x = np.append(load.x[same], load.x[-1])
    shear = np.append(load.shear[same] - load.shear[same + 1], load.shear[-1])
    moment = np.append(load.moment[same] - load.moment[same + 1], load.moment[-1])
    return x, shear, moment


def internal_curve(load: InternalLoad) -> Curve:
    """Return the load that has the table's shear at its rows and the table's change of moment between them.

    Raises
    ------
    BriefError
        If the table has no two stations.
    """
    steps = steps_of(load)
    return _with_points(load, steps, 6.0 * steps.defect / steps.width**2)


def stepped_curve(load: InternalLoad) -> Curve:
    """Return the load that has the table's shear at its rows, spread evenly between them.

    It misses the table's moments by little and shows what the table's own rows say of the load's sign, free of the
    swings that rounding makes within a step.  Raises BriefError as `internal_curve` does.
    """
    steps = steps_of(load)
    return _with_points(load, steps, np.zeros(steps.start.size))


def torque_curve(load: InternalLoad) -> Curve:
    """Return the torque that has the table's torsion at its rows, spread evenly between them [N·m/m, N·m].

    A jump of T between two rows at one x, and a torsion left at the last row, are couples.  Raises BriefError as
    `internal_curve` does.
    """
    steps = steps_of(load)
    rows = np.flatnonzero(np.diff(load.x) > 0)
    even = (load.torsion[rows] - load.torsion[rows + 1]) / steps.width
    running = Polynomials(np.append(steps.start, steps.end[-1]), even, np.zeros(even.size), np.zeros(even.size))
    same = np.flatnonzero(np.diff(load.x) == 0)
    x = np.append(load.x[same], load.x[-1])
    couple = np.append(load.torsion[same] - load.torsion[same + 1], load.torsion[-1])
    real = couple != 0
    if not real.any():
        return running
    return Combined((running, Points.gathered(x[real], couple[real])), (1.0, 1.0))


def _with_points(load: InternalLoad, steps: Steps, swing: Floats) -> Curve:
    """The running load P/h ∓ swing from row to row, and the point loads of the table."""
    running = Polynomials(
        x=np.append(steps.start, steps.end[-1]),
        a0=steps.load / steps.width + swing,
        a1=-2.0 * swing / steps.width,
        a2=np.zeros(swing.size),
    )
    x, shear, _ = jumps_of(load)
    real = shear != 0
    if not real.any():
        return running
    return Combined((running, Points.gathered(x[real], shear[real])), (1.0, 1.0))
