"""A rig that is kept: steel that is cut serves another target, with few pivots drilled anew.

Comes in: a `Rig` that exists, a `Target`, and how far a new hole must be from an old one.

Goes out: a `Kept`, whose rig has the same pads, levers and outer holes, or a `Refusal`.

How:

- An unmoved pivot is a linear equation between pad forces, a moved one a linear inequality (pivots).  A mixed-integer
  programme (programme) finds the fewest pivots to move within the bands, with proof, and then those of least band use.
- Moved pivots are put on the drill step by a descent over the largest error over its band (drilling).
- The rig is laid out as it then hangs (settled), and what is too close is said (remarks).

Depends on: what levers share (descent, surface, marks.exact), pads (limits, surface.error_rows), target, display.
"""

from rigdesign.levers.keep.kept import keep_rig as keep_rig
from rigdesign.levers.keep.model import Kept as Kept
from rigdesign.levers.keep.model import MovedPivot as MovedPivot
