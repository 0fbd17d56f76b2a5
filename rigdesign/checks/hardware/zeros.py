"""Three zeros of a load cell that must not be mixed up: cell disconnected, tree hung, specimen just supported."""

from __future__ import annotations

import numpy as np

from rigdesign.checks.hardware.model import Zeros
from rigdesign.checks.hardware.tare import Weighed


def zeros(weighed: Weighed) -> tuple[Zeros, ...]:
    """Return the three readings [N] of each jack's cell, positive where its tree is loaded as in the test.

    A tree hangs (or, pushing from below, stands) on its jack alone where the test loads it against gravity; the cell
    then reads all of its weight.  The specimen is just supported where all pads together bring its own weight and no
    more, the jacks' forces in the ratio of the test; pads that would have to pull it down cannot do that.
    """
    rig = weighed.sampled.check.rig
    specimen = rig.plan.target.brief.specimen
    factor = None if specimen.weight is None else weighed.even_factor(0.0)
    rows = []
    for tree, weight in zip(rig.trees, weighed.loads.weight, strict=True):
        against = tree.force * specimen.gravity < 0
        rows.append(
            Zeros(
                jack=tree.jack.name,
                apart=0.0,
                hung=float(-np.sign(tree.force) * weight) if against else None,
                supported=None if factor is None or not against else float(factor * abs(tree.force)),
            )
        )
    return tuple(rows)
