"""The catalogue: what steel, rods, webbing, jacks and load cells there are to choose from.

Comes in: the brief's `HardwareRules`, with stock, jacks and load cells of its own where it has them.

Goes out: materials, sections, threads, webbings and machines, each kind in rising order, so that the first that fits
is the smallest (`smallest`).

How: CSV tables beside the code, a source in every row.  Properties of flats, hollow sections and plates are computed
from their geometry (`geometry`); those of rolled channels stand in their table, because tapered flanges and roundings
are not worth a formula.  Tables are read once and when first asked for.

Depends on: brief (model), hardware (model), errors, words.
"""

from rigdesign.hardware.catalogue.choosing import smallest as smallest
from rigdesign.hardware.catalogue.fasteners import Thread as Thread
from rigdesign.hardware.catalogue.fasteners import Webbing as Webbing
from rigdesign.hardware.catalogue.fasteners import threads as threads
from rigdesign.hardware.catalogue.fasteners import webbings as webbings
from rigdesign.hardware.catalogue.geometry import channel as channel
from rigdesign.hardware.catalogue.geometry import flat as flat
from rigdesign.hardware.catalogue.geometry import hollow as hollow
from rigdesign.hardware.catalogue.geometry import outer_radius as outer_radius
from rigdesign.hardware.catalogue.machines import cells as cells
from rigdesign.hardware.catalogue.machines import jacks as jacks
from rigdesign.hardware.catalogue.materials import grades as grades
from rigdesign.hardware.catalogue.materials import material as material
from rigdesign.hardware.catalogue.materials import with_density as with_density
from rigdesign.hardware.catalogue.sections import sections as sections
