"""Few different parts: which levers and plates are the same part, and how more of them can be.

Comes in: a drilled `Rig` and a tolerance.

Goes out: `alike`, the groups of pieces that share a part mark as they are; `few_marks`, a `FewMarks` whose rig has as
few different pieces as were found, with every limit and band kept, and what that cost.

How:

- A lower bound (bound).  Pieces that no holes within the tolerance could make alike need marks of their own: the fewest
  cliques that cover the rest, by an integer programme.
- A search (merging).  Groups are merged two at a time and all holes drilled anew together, judged many at a time
  (trials) and to the last doubt (exact) before a merge is kept.

Depends on: what drilling shares (descent, judging, surface), levers.keep.standing, pads, target, display.
"""

from rigdesign.levers.marks.alike import alike as alike
from rigdesign.levers.marks.few import few_marks as few_marks
from rigdesign.levers.marks.model import FewMarks as FewMarks
from rigdesign.levers.marks.model import Tally as Tally
