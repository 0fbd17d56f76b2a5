"""The drawings: what stands where on every page, that nothing overlaps, and that the PDF is what a printer needs."""

from __future__ import annotations

import io
import math
import re
from functools import cache

import numpy as np
import pytest
from matplotlib.backends.backend_pdf import PdfFile, RendererPdf
from numpy.typing import NDArray
from sheet_cases import case

from rigdesign.report.figures_sheet import MM_PER_POINT, styled
from rigdesign.report.lists import drill_rows, link_rows, part_rows, pin_rows
from rigdesign.report.sheets import drawings_pdf
from rigdesign.report.sheets.frame import FIELD, FRAME, NOT_ACCEPTED, STRIP
from rigdesign.report.sheets.pages import framed, sheets
from rigdesign.report.sheets.paper import Paper
from rigdesign.report.sheets.sizes import Sizes
from rigdesign.report.sheets.texts import Words

CASES = ["line 1", "line 2", "line 12", "line 24", "line 40", "plates", "surface 24", "hollow", "channels", "below"]
TOUCH = 0.05
"""Boxes may touch by this much [mm]: less than the width of a thin line."""


@cache
def pages_of(name: str) -> list[Paper]:
    """The framed pages of a case, drawn once."""
    return framed(case(name))


def boxes(texts: list[Words]) -> NDArray[np.float64]:
    """Left, low, right, high of texts (n, 4) [mm]; they are held against what matplotlib measures, below."""
    return np.array([text.box for text in texts])


def overlaps(texts: list[Words]) -> list[tuple[str, str]]:
    """Pairs of texts whose boxes overlap."""
    edge = boxes(texts)
    common = np.minimum(edge[:, None, 2:], edge[None, :, 2:]) - np.maximum(edge[:, None, :2], edge[None, :, :2])
    found = np.argwhere(np.triu((common > TOUCH).all(axis=2), 1))
    return [(texts[i].words, texts[j].words) for i, j in found]


@styled
def measured(paper: Paper) -> NDArray[np.float64]:
    """Left, low, right, high of a page's texts [mm] as matplotlib's own text objects have them."""
    width, height = paper.figure.get_size_inches()
    paper.figure.set_dpi(72)
    renderer = RendererPdf(PdfFile(io.BytesIO()), 72, height, width)
    result = []
    for text in paper.texts:
        turned = {"rotation": 90 if text.upright else 0, "rotation_mode": "anchor"}
        artist = paper.axes.text(
            text.x, text.y, text.words, size=text.size, weight="bold" if text.bold else "normal", va="baseline",
            parse_math=False, **turned,
        )  # fmt: skip
        extent = artist.get_window_extent(renderer)
        result.append([side / paper.figure.dpi * 25.4 for side in (extent.x0, extent.y0, extent.x1, extent.y1)])
        artist.remove()
    return np.array(result)


@pytest.mark.parametrize("name", CASES)
def test_no_two_texts_overlap_and_none_leaves_the_frame(name: str) -> None:
    """On every page of small and large rigs."""
    for number, paper in enumerate(pages_of(name), start=1):
        assert overlaps(paper.texts) == [], f"page {number}"
        edge = boxes(paper.texts)
        assert edge[:, 0].min() > FRAME.left - STRIP
        assert edge[:, 1].min() > FRAME.low - STRIP
        assert edge[:, 2].max() < FRAME.right + STRIP
        assert edge[:, 3].max() < FRAME.high + STRIP
        assert min(text.size for text in paper.texts) >= 6.0


@pytest.mark.parametrize("name", ["line 1", "line 12", "plates", "hollow", "below"])
def test_what_is_drawn_stays_clear_of_title_block_and_border(name: str) -> None:
    """Before it is framed, a page holds nothing outside its field: texts, lines and shapes."""
    for paper, title, _ in styled(lambda: list(sheets(case(name), Sizes())))():
        points = [line for lines in paper._lines.values() for line in lines]
        points += [path.vertices for paths in paper._shapes.values() for path in paths]
        drawn = np.concatenate([*points, boxes(paper.texts)[:, :2], boxes(paper.texts)[:, 2:]])
        low, high = drawn.min(axis=0), drawn.max(axis=0)
        # lines of cells lie on the field's own edges
        assert np.all(low >= np.array([FIELD.left, FIELD.low]) - 1e-6), title
        assert np.all(high <= np.array([FIELD.right, FIELD.high]) + 1e-6), title


@pytest.mark.parametrize("name", ["line 12", "plates"])
def test_boxes_hold_what_matplotlib_measures(name: str) -> None:
    """The boxes that the tests above go by are those of matplotlib's own text objects, as its PDF writer measures them.

    Letters that overhang their advance come to less than a third of a millimetre, kerning to some parts in a
    hundred of a short line.
    """
    for paper in pages_of(name):
        own, true = boxes(paper.texts), measured(paper)
        length = np.max(own[:, 2:] - own[:, :2], axis=1, keepdims=True)
        assert np.all(np.abs(own - true) <= 0.3 + 0.015 * length)


def test_pdf_is_a3_vector_with_embedded_fonts_and_the_same_each_time() -> None:
    """No raster image, no date; every page landscape A3."""
    pdfium = pytest.importorskip("pypdfium2")
    data = drawings_pdf(case("line 2"))
    assert data == drawings_pdf(case("line 2"))
    assert b"/FontFile2" in data
    assert b"/Subtype /Image" not in data
    assert b"/CreationDate" not in data
    document = pdfium.PdfDocument(data)
    for page in document:
        assert [25.4 / 72 * side for side in page.get_size()] == pytest.approx([420.0, 297.0], abs=0.01)


def test_texts_stand_in_the_pdf_where_the_page_says() -> None:
    """Read back: the first sign of each text begins at its place, and every text is there to be searched for."""
    pdfium = pytest.importorskip("pypdfium2")
    document = pdfium.PdfDocument(drawings_pdf(case("line 2")))
    for page, paper in zip(document, pages_of("line 2"), strict=True):
        reader = page.get_textpage()
        whole = re.sub(r"\s+", "", reader.get_text_range())
        for text in paper.texts:
            assert re.sub(r"\s+", "", text.words) in whole
        places = np.array([reader.get_charbox(k, loose=True) for k in range(reader.count_chars())]) * 25.4 / 72
        for text in paper.texts:
            if not text.upright:
                # a loose box begins at the sign's origin, its height that of the font: 0.24 below the line
                near = np.abs(places[:, 0] - text.x) + np.abs(places[:, 1] + 0.236 * text.size * MM_PER_POINT - text.y)
                assert near.min() < 0.15, text.words


def test_verdict_is_across_every_sheet_of_a_rig_that_is_not_accepted() -> None:
    """In words in the title block, in large letters across the field; not on a rig that is accepted."""
    for paper in pages_of("plates"):
        assert NOT_ACCEPTED in [text.words for text in paper.texts]
        large = [patch for patch in paper.axes.patches if patch.get_zorder() == 9.0]
        assert len(large) == 1
        extent = large[0].get_path().get_extents()
        assert extent.width > 0.7 * FIELD.width
        assert extent.height > 0.6 * FIELD.height
    for paper in pages_of("line 2"):
        words = [text.words for text in paper.texts]
        assert NOT_ACCEPTED not in words
        assert "accepted by the check" in words
        assert not paper.axes.patches
    assert NOT_ACCEPTED in [text.words for text in pages_of("plates")[-1].texts if text.size > 8.0 and text.bold]


def test_title_blocks_count_the_sheets() -> None:
    """Sheet n of m, title, revision, units and projection on each."""
    pages = pages_of("line 12")
    for number, paper in enumerate(pages, start=1):
        words = [text.words for text in paper.texts]
        assert f"{number} of {len(pages)}" in words
        for expected in ("Test piece", "A", "dimensions in mm", "licensed engineer"):
            assert expected in words


def test_us_drawings_say_inches() -> None:
    """Lengths in inches, and none in millimetres."""
    papers = framed(case("line 2"), "us")
    words = [text.words for paper in papers for text in paper.texts]
    assert "dimensions in inches" in words
    assert not [text for text in words if "[mm]" in text]
    assert f"{case('line 2').check.rig.pad_x[1] / 0.0254:.3f}" in words


@pytest.mark.parametrize("name", ["line 12", "plates", "hollow"])
def test_every_part_and_hole_is_on_the_sheets(name: str) -> None:
    """Marks, running dimensions and diameters of all details; rows of all lists."""
    result, sizes = case(name), Sizes()
    papers = pages_of(name)
    words = [[text.words for text in paper.texts] for paper in papers]
    flat = [text for page in words for text in page]
    for row in part_rows(result):
        assert row.mark in flat
    details = [page for page in words if any(text.startswith("Detail") for text in page)]
    for hole in drill_rows(result):
        if "_" in hole.mark:
            continue
        page = next(page for page in details if hole.mark in page)
        assert sizes.length(hole.along) in page
        assert sizes.hole(hole.diameter) in page
    for pin in pin_rows(result):
        assert pin.mark in flat
    settings = next(page for page in words if "Link settings" in page)
    for link in link_rows(result):
        for text in (link.mark, link.upper, link.lower, sizes.length(link.length)):
            assert text in settings


def test_rigging_sheet_names_zeros_and_common_practice() -> None:
    """Numbers of the zeros as the check has them; assembly begins with the pads and ends with the slings."""
    result = case("below")
    paper = next(paper for paper in pages_of("below") if any(text.words == "Rigging" for text in paper.texts))
    whole = " ".join(text.words for text in paper.texts)
    assert whole.index("Fix the pads") < whole.index("Tier 3:") < whole.index("Tier 1:") < whole.index("Catch slings")
    zeros = result.tare.zeros[0]
    for value in (zeros.hung, zeros.supported):
        if value is not None:
            assert Sizes().force(value) in whole
    zone = math.ceil(result.space.total / 0.5 - 1e-9) * 0.5
    for expected in ("5 % of the load", "20–30 %", "Survey at 40 %", "1.1 to 1.25", f"taken as {zone:g} m", "codes"):
        assert expected in whole
