"""The whole check: statics, curves, verdicts, figures, remarks."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.checks import measures
from rigdesign.checks.curves import curves, jumps
from rigdesign.checks.model import Check
from rigdesign.checks.regions import verdicts
from rigdesign.checks.remarks_practice import practice_remarks
from rigdesign.checks.remarks_statics import statics_remarks
from rigdesign.checks.sampling import rig_loads
from rigdesign.checks.statics import solve_statics
from rigdesign.checks.thin import thinned
from rigdesign.findings import Finding, numbered
from rigdesign.levers.model import Rig
from rigdesign.target.bands import bands
from rigdesign.target.curve import Floats


def check(rig: Rig, extra: tuple[Finding, ...] = ()) -> Check:
    """Check a rig against its target, from hole positions and jack forces only.

    Parameters
    ----------
    rig
        The rig.  Neither the wanted pad forces nor anything that the builder computed enters the result.
    extra
        Remarks of the caller's own, of the stages "statics" or "practice", to be numbered with the check's.

    Returns
    -------
    Check
        Its findings are those of the target, the pads and the levers, and then the check's own.

    Raises
    ------
    InputError
        Where the rig's trees are no trees from jack to pads, or a piece of them cannot stand.
    """
    solved = solve_statics(rig)
    target = rig.plan.target
    full = curves(target, rig.pad_x, solved.pad_force)
    rows = verdicts(target, full)
    moment, moment_x = measures.peak_error(full, "moment", target.moment_peak)
    shear, shear_x = measures.peak_error(full, "shear", target.shear_peak)
    moment_local, moment_local_x = measures.local_error(full, "moment", target.moment_peak)
    shear_local, shear_local_x = measures.local_error(full, "shear", target.shear_peak)
    hand_moment, hand_shear = measures.hand_errors(target, int(rig.pad_x.size))
    sum_left, moment_left = measures.sum_residuals(rig, solved)
    share = measures.shares_of_curve(target.net, rig.pad_x)
    result = Check(
        rig=rig,
        statics=solved,
        curves=thinned(full, _kept(rig, solved.pad_force)),
        regions=rows,
        moment_error_peak=moment,
        moment_error_x=moment_x,
        shear_error_peak=shear,
        shear_error_x=shear_x,
        moment_error_local=moment_local,
        moment_error_local_x=moment_local_x,
        shear_error_local=shear_local,
        shear_error_local_x=shear_local_x,
        band_use=max((row.use for row in rows if row.use is not None), default=0.0),
        shear_area=measures.shear_area(full),
        hand_moment=hand_moment,
        hand_shear=hand_shear,
        jack_offset=measures.jack_offset(rig),
        sum_residual=sum_left,
        moment_sum_residual=moment_left,
        steel_estimate=measures.steel_estimate(rig, solved),
        share_of_curve=share,
        evenness=measures.evenness(solved.pad_force, share),
        findings=(),
    )
    earlier = target.findings + rig.plan.findings + rig.findings
    own = [*extra, *statics_remarks(result), *practice_remarks(result)]
    # the caller's remarks first, inside their stage
    own.sort(key=lambda finding: finding.stage != "statics")
    return replace(result, findings=numbered([*earlier, *own]))


def _kept(rig: Rig, pad_force: Floats) -> Floats:
    """Stations [m] that stay in the table however many there are: pads, supports, ends of the span and of regions.

    Jumps of the target stay too, unless there are more of them than pads could ever follow.
    """
    target = rig.plan.target
    loads = rig_loads(target, rig.pad_x, pad_force)
    every = jumps(target, loads.at, bands(target).values())
    if every.size <= loads.at.size + 1000:
        return every
    edges = np.concatenate([band.edges for band in bands(target).values()])
    return np.unique(np.concatenate([loads.at, edges, every[[0, -1]]]))
