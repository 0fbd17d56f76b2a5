"""Stage hardware: what the rig is made of, how high it stands and what it weighs.

Comes in: a `Rig`, its trees as drilled, with the brief's [hardware].

Goes out: `Hardware`: sections, pins, links, pads, jack and cell, heights, masses and part marks; what no stock can
carry is drawn all the same and stands among its `shortfalls`.

How:

- Forces in links with the members' weight (wiring); the check has a road of its own.
- Strength rules (rules) and what there is to choose from (catalogue): pure functions and tables with sources.
- Sizes (sizing): links (links), levers (levers), plates (plates), pins and what lies on them (joints), jacks and cells
  (stacks); in rounds with heights (levels) and weights (weighing) until nothing changes (build).
- What own weight does to the bands, and the jack forces that members are sized for (owning); where it breaks a band,
  counterweights (balance).
- Part marks (marking); the cut list (cutting).
- The hardware of a rig that is kept (keeping): its steel, with pivots drilled anew.

Depends on: levers, pads, target, brief, findings, errors, display, words.
"""

from rigdesign.hardware.build import build_hardware as build_hardware
from rigdesign.hardware.build import stock_line as stock_line
from rigdesign.hardware.keeping import keep_hardware as keep_hardware
from rigdesign.hardware.model import Hardware as Hardware
