"""A rig with few different parts: levers and plates within a tolerance of one another get the same holes."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from rigdesign.display import counted, show
from rigdesign.levers.marks.alike import alike
from rigdesign.levers.marks.model import FewMarks, Tally
from rigdesign.levers.model import Rig

if TYPE_CHECKING:
    from rigdesign.levers.marks.trials import Trials

MARGIN = 1e-3
"""Part of the band that is kept free, so that the check, which looks between the stations too, agrees."""


def few_marks(rig: Rig, tolerance: float, limit: float = 1.0) -> FewMarks:
    """Make levers and plates of a rig alike where that leaves it accepted.

    Parameters
    ----------
    rig
        The rig as drilled, with one jack, its holes on the drill step.
    tolerance
        How far each hole may move as seen from its pivot [m]: of a lever, each arm; of a plate, u and v of each hole.
    limit
        Band use that may be reached.  A rig that is above it already is not made worse.

    Returns
    -------
    The rig with as few different pieces as were found, all limits of pads and levers kept, and what it cost.  Free pads
    move with their end pins and the jack stays, so that the first moment stays exact.  Where pads stay, outer holes
    stay with them, and only pieces whose outer holes agree are made alike.

    Raises
    ------
    InputError
        Where the rig has several jacks, or holes that are not on the drill step.
    """
    # imported late: every rig is asked for pieces that are alike, few for more of them
    from rigdesign.levers.marks.bound import could_be_alike, fewest_groups
    from rigdesign.levers.marks.merging import search
    from rigdesign.levers.marks.trials import Trials

    trials = Trials(rig, tolerance, limit * (1.0 - MARGIN))
    before = _tally(trials, rig)
    if not trials.branches.n_pieces or trials.reach < 1:
        words = f"part marks: nothing to make alike within {show(tolerance, 'length', unit='mm')}"
        return FewMarks(rig, alike(rig), before, before, before.different, words)
    least, fewest = fewest_groups(could_be_alike(trials))
    found = search(trials, fewest if rig.plan.may_move else ())
    after_rig = rig
    if len(found.groups) < before.different and trials.is_accepted(found.steps, found.groups):
        after_rig = trials.rebuilt(found.steps)
    groups = alike(after_rig)
    after = _tally(trials, after_rig)
    words = _words(before, after, least, tolerance, found.judged)
    return FewMarks(replace(after_rig, words=f"{rig.words}; {words}"), groups, before, after, least, words)


def _tally(trials: Trials, rig: Rig) -> Tally:
    own = replace(trials, rig=rig)
    hung = own.hang(own.drilled[None])
    pads = hung.pad_x[0], hung.pad_y[0], hung.pad_force[0]
    errors = trials.exact.errors(*pads)
    return Tally(
        different=len(alike(rig)),
        band_use=trials.exact.use(*pads),
        moment=errors["moment"],
        shear=errors["shear"],
        torsion=errors.get("torsion"),
    )


def _words(before: Tally, after: Tally, least: int, tolerance: float, judged: int) -> str:
    """What was done, what it cost and what is proven."""
    within, what = show(tolerance, "length", unit="mm"), counted(before.different, "different piece")
    if after.different < before.different:
        head = f"part marks: {what} made {after.different}, holes moved by up to {within} as seen from the pivot"
        cost = f"band use {before.band_use:.3g} before and {after.band_use:.3g} after as the search judges"
    else:
        head = f"part marks: {what}, and no way found to make more of them alike within {within}"
        cost = f"band use {after.band_use:.3g} as the search judges"
    if after.different <= least:
        proof = "proven the fewest within the tolerance"
    else:
        proof = f"proven: within the tolerance no fewer than {least}, whatever the bands"
    return f"{head}; {cost}; {counted(judged, 'rig')} judged; {proof}"
