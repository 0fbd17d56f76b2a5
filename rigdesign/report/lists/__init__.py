"""Lists: parts, links, pins, holes to drill, bars to cut, masses and their centres, as rows.

In: a `HardwareCheck`.  Out: frozen rows in SI, in a fixed order; `report.tables_hardware` writes them as CSV, the
sheets draw them, the DXF files are named by their marks.

    part_rows      a row a part mark: levers, plates, links, pins, spacers, counterweights, pads, cells, jacks
    link_rows      a row a link
    pin_rows       a row a pin mark
    drill_rows     a row a hole of each lever's and plate's mark
    cut_plans      a plan for each section that is cut from bars
    flat_shapes    outline and holes of each flat and plate
    centres        mass and centre of each member, of each tree, and of all

Depends on: hardware, checks.
"""

from rigdesign.report.lists.cuts import cut_plans as cut_plans
from rigdesign.report.lists.drilling import drill_rows as drill_rows
from rigdesign.report.lists.flats import Flat as Flat
from rigdesign.report.lists.flats import flat_shapes as flat_shapes
from rigdesign.report.lists.links import link_rows as link_rows
from rigdesign.report.lists.masses import centres as centres
from rigdesign.report.lists.model import Centre as Centre
from rigdesign.report.lists.model import DrillRow as DrillRow
from rigdesign.report.lists.model import LinkRow as LinkRow
from rigdesign.report.lists.model import PartRow as PartRow
from rigdesign.report.lists.model import PinRow as PinRow
from rigdesign.report.lists.model import StockCut as StockCut
from rigdesign.report.lists.parts import part_rows as part_rows
from rigdesign.report.lists.pins import pin_rows as pin_rows
