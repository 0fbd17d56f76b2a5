"""From a brief to a checked rig, in one call: the stages in their order, and what connects them.

    arrange  brief  →  target  →  pads  →  levers  →  check
    design   arrange  →  hardware  →  check of the hardware
    study    arrange for several numbers of pads
    assess   a rig that exists, with other holes or against another target

Depends on: brief, target, pads, levers, hardware, checks, record.  `rigdesign.report` and `rigdesign.command` depend on
it.  Like the stages it knows no files, pictures or terminal; progress is told to a callback `progress(part, words)`,
part in 0..1.
"""

from rigdesign.chain.arranging import arrange as arrange
from rigdesign.chain.arranging import arrange_target as arrange_target
from rigdesign.chain.assessing import assess as assess
from rigdesign.chain.designing import design as design
from rigdesign.chain.designing import design_target as design_target
from rigdesign.chain.progress import Progress as Progress
from rigdesign.chain.studying import Study as Study
from rigdesign.chain.studying import StudyRow as StudyRow
from rigdesign.chain.studying import study as study
from rigdesign.chain.studying import study_target as study_target
