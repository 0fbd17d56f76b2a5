"""DXF files: layers, units, the same bytes, and words beside the outline."""

from __future__ import annotations

import io
import os
import subprocess
import sys
import time
from dataclasses import replace

import ezdxf
import numpy as np
import pytest
from ezdxf import options
from hand_results import alike, line_result, plan_result

from rigdesign.report.dxf import dxf_bytes, dxf_files
from rigdesign.report.lists import drill_rows, flat_shapes


def opened(content: bytes):
    drawing = ezdxf.read(io.StringIO(content.decode("utf-8")))
    assert not drawing.audit().has_errors
    return drawing


def test_a_file_for_every_flat_and_plate_named_by_its_mark():
    assert sorted(dxf_files(plan_result())) == ["dxf/L1.dxf", "dxf/L2.dxf", "dxf/P3.dxf"]
    assert sorted(dxf_files(alike(line_result(), "lever 3", "lever 4"))) == ["dxf/L1.dxf", "dxf/L2.dxf", "dxf/L3.dxf"]
    assert dxf_files(line_result("twin channels")) == {}
    assert all("_side" in name for name in dxf_files(line_result("hollow section")))


@pytest.mark.parametrize("result", [line_result(), plan_result(), line_result("hollow section")])
def test_outline_and_holes_as_the_flat_has_them(result):
    for flat in flat_shapes(result):
        drawing = opened(dxf_bytes(flat))
        assert drawing.dxfversion == "AC1024"  # R2010
        assert drawing.units == ezdxf.units.MM
        space = drawing.modelspace()
        (outline,) = space.query('LWPOLYLINE[layer=="OUTLINE"]')
        assert outline.closed
        assert np.allclose(np.array(outline.get_points("xy")), 1000 * flat.outline, rtol=0, atol=1e-9)
        for layer, holes in (
            ("HOLES", [hole for hole in flat.holes if hole.name != "spacer"]),
            ("SPACERS", [hole for hole in flat.holes if hole.name == "spacer"]),
        ):
            circles = space.query(f'CIRCLE[layer=="{layer}"]')
            drawn = sorted((c.dxf.center.x, c.dxf.center.y, 2 * c.dxf.radius) for c in circles)
            wanted = sorted((1000 * hole.x, 1000 * hole.y, 1000 * hole.diameter) for hole in holes)
            assert np.allclose(np.array(drawn), np.array(wanted), rtol=0, atol=1e-9)
        assert {entity.dxf.layer for entity in space} <= {"OUTLINE", "HOLES", "SPACERS", "OLD", "MARK"}


def test_words_stand_clear_of_the_outline_and_say_what_it_is():
    (flat, *_) = flat_shapes(line_result())
    space = opened(dxf_bytes(flat)).modelspace()
    texts = list(space.query('TEXT[layer=="MARK"]'))
    assert [text.dxf.text for text in texts] == [
        "L1", "S355, 6 mm thick", "quantity 2", "datum: end beyond hole A, mid depth; dimensions in mm",
    ]  # fmt: skip
    low = 1000 * flat.outline[:, 1].min()
    assert all(text.dxf.insert.y + text.dxf.height < low for text in texts)


def test_the_same_flat_gives_the_same_bytes_later():
    (flat, *_) = flat_shapes(line_result())
    first = dxf_bytes(flat)
    time.sleep(1.1)  # dates in these files are told to the second
    assert dxf_bytes(flat) == first


def test_the_same_flat_gives_the_same_bytes_in_every_process():
    """Sets of texts have another order with another hash seed; six seeds would hide that once in 32 times."""
    code = (
        "import hashlib, numpy as np\n"
        "from rigdesign.report.dxf import dxf_bytes\n"
        "from rigdesign.report.lists.flats import Flat, RoundHole\n"
        "corners = np.array([[0, -0.03], [0.5, -0.03], [0.5, 0.03], [0, 0.03]])\n"
        "hole = RoundHole('A', 0.03, 0, 0.0105, 0.01)\n"
        "flat = Flat('L1', corners, (hole,), 0.01, 'S355', 7850.0, 2, 'datum')\n"
        "print(hashlib.sha256(dxf_bytes(flat)).hexdigest())"
    )
    runs = [
        subprocess.Popen(
            [sys.executable, "-c", code], stdout=subprocess.PIPE, env={**os.environ, "PYTHONHASHSEED": seed}
        )
        for seed in "123456"
    ]
    assert len({run.communicate()[0] for run in runs}) == 1


def test_the_setting_that_leaves_dates_out_is_put_back():
    assert options.write_fixed_meta_data_for_testing is False
    dxf_files(line_result())
    assert options.write_fixed_meta_data_for_testing is False


def test_pivots_of_an_earlier_drilling_are_apart_from_holes_for_pins():
    result = line_result()
    body = replace(result.hardware.bodies["lever 2"], old_pivots=np.array([[-0.031, 0.0]]))
    bodies = {**result.hardware.bodies, "lever 2": body}
    drilled = replace(result, hardware=replace(result.hardware, bodies=bodies))
    (flat,) = [flat for flat in flat_shapes(drilled) if flat.mark == "L2"]
    space = opened(dxf_bytes(flat)).modelspace()
    (old,) = space.query('CIRCLE[layer=="OLD"]')
    pins = sorted(circle.dxf.center.x for circle in space.query('CIRCLE[layer=="HOLES"]'))
    assert len(pins) == 3
    assert old.dxf.center.x == pytest.approx(pins[1] - 31)
    (row,) = [row for row in drill_rows(drilled) if row.hole == "old pivot"]
    assert row.along == pytest.approx(old.dxf.center.x / 1000)
