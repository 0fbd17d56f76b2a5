"""The samplers of a rig: along the span, on a line or in plan, and across it."""

from __future__ import annotations

import numpy as np

from rigdesign.brief.model import Quantity
from rigdesign.checks.sampling import ON_LINES, Sampler, across_span, along_span, jumps, rig_loads
from rigdesign.checks.surface.stations import sampler_in_plan
from rigdesign.target.bands import Band, bands
from rigdesign.target.curve import Floats
from rigdesign.target.model import Target


def sampler(target: Target, pad_x: Floats, pad_force: Floats, pad_y: Floats | None = None) -> Sampler:
    """Return a sampler along the span of the target and of pads (n_pads,) [m], [N] on its specimen.

    `pad_y` [m] counts on surfaces alone, None for every y = 0.
    """
    if target.brief.specimen.is_surface:
        y = np.zeros(pad_x.shape) if pad_y is None else pad_y
        return sampler_in_plan(target, pad_x, y, pad_force, along_span(target.brief.specimen))
    judged: dict[Quantity, Band] = {**bands(target)}
    loads = rig_loads(target, pad_x, pad_force)
    breaks = np.concatenate([target.total.breaks, target.gravity.breaks])
    return Sampler(target, loads, judged, ON_LINES, jumps(target, loads.at, judged.values()), loads.at, breaks)


def across_sampler(target: Target, pad_x: Floats, pad_y: Floats, pad_force: Floats) -> Sampler | None:
    """Return a sampler of what is cut the other way, of pads (n_pads,) [m], [N]; None where it is not a surface."""
    quantities = across_span(target.brief.specimen)
    return sampler_in_plan(target, pad_x, pad_y, pad_force, quantities) if quantities else None
