"""DXF files for cutting and drilling: one for each distinct flat or plate, in millimetres, 1:1, named by its mark.

Layers: OUTLINE has the closed outline, HOLES true circles of the holes for pins, SPACERS those for the bolts of
spacers, OLD those of pivots of an earlier drilling, MARK the words beside it: mark, material, thickness, quantity, and
where the datum is.  The datum is the drawing's origin.

Version R2010, units millimetres.  The files hold neither date nor chance: the same rig gives the same bytes.

Depends on: lists; ezdxf is loaded when a file is written.
"""

from __future__ import annotations

import io
from collections.abc import Iterator
from contextlib import contextmanager
from typing import TYPE_CHECKING

from rigdesign.report.lists.drilling import OLD_PIVOT, SPACER
from rigdesign.report.lists.flats import Flat, flat_shapes
from rigdesign.report.lists.model import PER_METRE

if TYPE_CHECKING:
    from ezdxf.document import Drawing

    from rigdesign.checks.hardware.model import HardwareCheck

VERSION = "R2010"
LAYERS = {"OUTLINE": 7, "HOLES": 1, "SPACERS": 5, "OLD": 8, "MARK": 3}
"""Layers and the numbers of their colours."""

HOLE_LAYERS = {SPACER: "SPACERS", OLD_PIVOT: "OLD"}
"""Layers of holes that are not for pins; a machine that drills pins' holes needs HOLES alone."""

LETTERS = 0.06
"""Height of letters over the larger side of the outline, between the two limits."""

LEAST_LETTERS, LARGEST_LETTERS = 5.0, 25.0  # [mm]
LINES = 1.6
"""From one line of words to the next, over their height."""


def dxf_files(result: HardwareCheck) -> dict[str, bytes]:
    """Return a DXF for each flat and plate by its name in the rig folder, such as "dxf/L1.dxf"."""
    return {f"dxf/{flat.mark}.dxf": dxf_bytes(flat) for flat in flat_shapes(result)}


def dxf_bytes(flat: Flat) -> bytes:
    """Return a flat or plate as a DXF file in mm."""
    import ezdxf
    from ezdxf.units import MM

    with _same_bytes():
        drawing = ezdxf.new(VERSION, units=MM)
        for name, colour in LAYERS.items():
            drawing.layers.add(name, color=colour)
        _draw(drawing, flat)
        # left to itself the library adds these in the order of a set, which is another one in every process
        for kind in sorted(drawing.entitydb.dxf_types_in_use()):
            drawing.classes.add_class(kind)
        out = io.StringIO()
        drawing.write(out)
    return out.getvalue().encode("utf-8")


@contextmanager
def _same_bytes() -> Iterator[None]:
    """While files are made, dates and random identities are left out of them; the setting is put back afterwards."""
    from ezdxf import options

    before = options.write_fixed_meta_data_for_testing
    options.write_fixed_meta_data_for_testing = True
    try:
        yield
    finally:
        options.write_fixed_meta_data_for_testing = before


def _draw(drawing: Drawing, flat: Flat) -> None:
    space = drawing.modelspace()
    corners = PER_METRE * flat.outline
    space.add_lwpolyline([(float(x), float(y)) for x, y in corners], close=True, dxfattribs={"layer": "OUTLINE"})
    for hole in flat.holes:
        centre = (PER_METRE * hole.x, PER_METRE * hole.y)
        layer = HOLE_LAYERS.get(hole.name, "HOLES")
        space.add_circle(centre, PER_METRE * hole.diameter / 2, dxfattribs={"layer": layer})
    low, high = corners.min(axis=0), corners.max(axis=0)
    size = min(max(LETTERS * float(max(high - low)), LEAST_LETTERS), LARGEST_LETTERS)
    # words stand beneath the outline, so that nothing of them is in the way of a cutter
    for k, line in enumerate(mark_lines(flat), start=1):
        text = space.add_text(line, height=size, dxfattribs={"layer": "MARK"})
        text.set_placement((float(low[0]), float(low[1]) - k * LINES * size))


def mark_lines(flat: Flat) -> list[str]:
    """Return the words beside an outline: mark, material and thickness, quantity, datum."""
    return [
        flat.mark,
        f"{flat.material}, {PER_METRE * flat.thickness:.6g} mm thick",
        f"quantity {flat.quantity}",
        f"{flat.datum}; dimensions in mm",
    ]
