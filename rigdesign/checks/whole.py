"""The whole check: statics, curves, verdicts, figures, remarks."""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from rigdesign.checks import measures
from rigdesign.checks.curves import searched
from rigdesign.checks.errors import largest_errors
from rigdesign.checks.model import Check
from rigdesign.checks.regions import verdicts
from rigdesign.checks.remarks_practice import practice_remarks
from rigdesign.checks.remarks_statics import statics_remarks
from rigdesign.checks.samplers import across_sampler, sampler
from rigdesign.checks.sampling import Sampler
from rigdesign.checks.statics import solve_statics
from rigdesign.checks.thin import thinned
from rigdesign.findings import Finding, Stage, numbered
from rigdesign.levers.model import Rig
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target

OWN_STAGES: tuple[Stage, ...] = ("statics", "space", "practice")
"""The stages of the check's own remarks, in their order."""


def check(rig: Rig, extra: tuple[Finding, ...] = ()) -> Check:
    """Check a rig against its target, from hole positions and jack forces only.

    Parameters
    ----------
    rig
        The rig.  Neither the wanted pad forces nor anything that the builder computed enters the result.
    extra
        Remarks of the caller's own, of the stages "statics", "space" or "practice", to be numbered with the check's.

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
    specimen = target.brief.specimen
    along = sampler(target, rig.pad_x, solved.pad_force, rig.pad_y)
    full = searched(along)
    crosswise = across_sampler(target, rig.pad_x, rig.pad_y, solved.pad_force)
    across = None if crosswise is None else searched(crosswise)
    rows = verdicts(target, full, across)
    hand_moment, hand_shear = (None, None) if specimen.is_surface else measures.hand_errors(target, int(rig.pad_x.size))
    sum_left, moment_left = measures.sum_residuals(rig, solved)
    share = measures.shares_of_pads(target, rig.pad_x, rig.pad_y)
    uneven = measures.unevenness(solved.pad_force, share)
    result = Check(
        rig=rig,
        statics=solved,
        curves=thinned(full, _kept(along)),
        across=None if crosswise is None or across is None else thinned(across, _kept(crosswise)),
        regions=rows,
        errors=largest_errors(target, full) | ({} if across is None else largest_errors(target, across)),
        band_use=max((row.use for row in rows if row.use is not None), default=0.0),
        shear_area=measures.shear_area(full, specimen),
        hand_moment=hand_moment,
        hand_shear=hand_shear,
        jack_offset=measures.jack_offset(rig),
        jack_offset_y=measures.jack_offset_y(rig),
        sum_residual=sum_left,
        moment_sum_residual=moment_left,
        steel_estimate=measures.steel_estimate(rig, solved),
        share_of_curve=share,
        evenness=float(uneven.max()),
        uneven_pad=measures.first_largest(uneven) + 1,
        findings=(),
    )
    earlier = target.findings + rig.plan.findings + rig.findings
    own = [*extra, *statics_remarks(result), *_space_remarks(result), *practice_remarks(result)]
    # the caller's remarks first, inside their stage
    own.sort(key=lambda finding: OWN_STAGES.index(finding.stage))
    return replace(result, findings=numbered([*earlier, *own]))


def band_use(target: Target, pad_x: Floats, pad_y: Floats, force: Floats) -> float:
    """Return the largest error over its band of pads (n_pads,) [m], [N], zero where nothing is judged."""
    every = [searched(sampler(target, pad_x, force, pad_y))]
    across = across_sampler(target, pad_x, pad_y, force)
    every += [] if across is None else [searched(across)]
    return max(float(curves.use(quantity).max()) for curves in every for quantity in curves.target)


def _space_remarks(check: Check) -> list[Finding]:
    """What stands in whose way in plan; along a line "practice" says it."""
    if not check.rig.plan.target.brief.specimen.is_surface:
        return []
    from rigdesign.checks.surface.space import space_remarks

    return list(space_remarks(check))


def _kept(sample: Sampler) -> Floats:
    """Stations [m] that stay in the table however many there are: pads, supports, ends of the span and of regions.

    Jumps of the target stay too, unless there are more of them than pads could ever follow.
    """
    if sample.jump.size <= sample.own.size + 1000:
        return sample.jump
    edges = np.concatenate([band.edges for band in sample.bands.values()])
    return np.unique(np.concatenate([sample.own, edges, sample.jump[[0, -1]]]))
