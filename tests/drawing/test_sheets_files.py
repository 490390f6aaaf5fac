"""The files of sheets: true size, pens and texts alike in DXF, PDF and SVG, the same again."""

from __future__ import annotations

import io
from functools import cache
from typing import TYPE_CHECKING
from xml.etree import ElementTree as ET

import pypdfium2
import pytest
from ezdxf.filemanagement import read

from dxfcable.drawing.items import (
    Align,
    CircleItem,
    Item,
    LineItem,
    PolylineItem,
    TextItem,
    TriangleItem,
    VAlign,
)
from dxfcable.drawing.sheeting.papers import paper
from dxfcable.drawing.sheeting.pens import LOOKS, pen_of
from dxfcable.drawing.sheeting.sheet_dxf import sheet_dxf
from dxfcable.drawing.sheeting.sheet_pdf import sheets_pdf, unshown
from dxfcable.drawing.sheeting.sheet_svg import sheet_svg
from dxfcable.drawing.sheeting.words import plain
from dxfcable.drawing.sheets import Fields, Sheet
from dxfcable.settings import Settings
from tests.drawing.painter_cases import layout_of
from tests.drawing.sheet_cases import invented, made, texts_of

if TYPE_CHECKING:
    from ezdxf.document import Drawing
    from ezdxf.layouts.layout import Paperspace

SETTINGS = Settings()
SVG = "{http://www.w3.org/2000/svg}"
SIZES_MM = {  # ISO 216 and the usual sizes in inches (MEM)
    "A0": (1189, 841),
    "A1": (841, 594),
    "A2": (594, 420),
    "A3": (420, 297),
    "A4": (297, 210),
    "ANSI-B": (17 * 25.4, 11 * 25.4),
    "ARCH-D": (36 * 25.4, 24 * 25.4),
    "ARCH-E1": (42 * 25.4, 30 * 25.4),
}


@cache
def example(size: str = "A3") -> Sheet:
    return made(*layout_of(invented(5, 1)), size)[0]


def opened(sheet: Sheet) -> tuple[Drawing, Paperspace]:
    """Open a sheet's DXF as any reader would."""
    doc = read(io.StringIO(sheet_dxf(sheet, SETTINGS).decode("utf-8")))
    names = [name for name in doc.layout_names() if name != "Model"]
    assert len(names) == 1
    layout = doc.layouts.get(names[0])
    return doc, layout  # type: ignore[return-value]  # not the model space


def blank(size: str, *items: Item) -> Sheet:
    fields = Fields(title="T", number="FD-001")
    return Sheet(stem="s", paper=paper(size, SETTINGS.show), fields=fields, items=items)


@pytest.mark.parametrize("size", SIZES_MM)
def test_the_layout_the_page_and_the_picture_have_the_papers_true_size(size: str) -> None:
    width, height = SIZES_MM[size]
    sheet = blank(size, LineItem(id="l", layer="table", part="l", start=(20, 20), end=(90, 20)))
    _, layout = opened(sheet)
    plot = layout.dxf_layout.dxf
    assert (plot.paper_width, plot.paper_height) == pytest.approx((width, height))
    assert plot.plot_paper_units == (0 if "-" in size else 1)  # inches, millimetres
    assert plot.scale_numerator / plot.scale_denominator == pytest.approx(1.0)
    unit = 25.4 if "-" in size else 1.0
    assert tuple(plot.limmax)[:2] == pytest.approx((width / unit, height / unit))
    page = pypdfium2.PdfDocument(sheets_pdf([sheet], "t"))[0]
    assert page.get_size() == pytest.approx((width * 72 / 25.4, height * 72 / 25.4), abs=0.01)
    root = ET.fromstring(sheet_svg(sheet, SETTINGS))
    assert float(root.get("width", "").removesuffix("mm")) == pytest.approx(width, abs=1e-3)
    assert float(root.get("height", "").removesuffix("mm")) == pytest.approx(height, abs=1e-3)


def test_an_independent_reader_finds_no_fault_in_the_dxf() -> None:
    doc, layout = opened(example())
    auditor = doc.audit()
    assert not auditor.errors
    assert not auditor.fixes
    assert len(doc.modelspace()) == 0
    assert doc.header["$TILEMODE"] == 0
    kinds = {entity.dxftype() for entity in layout}
    assert {"LINE", "LWPOLYLINE", "TEXT", "SOLID", "CIRCLE"} <= kinds


def test_all_three_files_show_the_same_texts() -> None:
    sheet = example()
    wanted = sorted(plain(t.text) for t in texts_of(sheet))
    assert any("\u00b0" in text for text in wanted)
    _, layout = opened(sheet)
    assert sorted(plain(e.dxf.text) for e in layout.query("TEXT")) == wanted
    root = ET.fromstring(sheet_svg(sheet, SETTINGS))
    assert sorted(e.text or "" for e in root.iter(f"{SVG}text")) == wanted
    page = pypdfium2.PdfDocument(sheets_pdf([sheet], "t"))[0]
    words = page.get_textpage().get_text_range()
    assert {w for text in wanted for w in text.split()} <= set(words.split())


def test_texts_stand_in_the_dxf_where_and_as_high_as_on_the_sheet() -> None:
    sheet = example("ANSI-B")
    _, layout = opened(sheet)
    found = {(e.dxf.text, round(e.dxf.height * 25.4, 3)) for e in layout.query("TEXT")}
    assert found == {(t.text, round(t.height, 3)) for t in texts_of(sheet)}
    entity = next(e for e in layout.query("TEXT") if e.dxf.text == "FORCE DIAGRAM C1")
    item = next(t for t in texts_of(sheet) if t.text == "FORCE DIAGRAM C1")
    assert tuple(entity.dxf.insert)[:2] == pytest.approx([v / 25.4 for v in item.at], abs=1e-6)


def test_the_profile_is_heavy_and_rays_and_load_line_are_thin() -> None:
    # Line groups of ISO 128: 1 to 2 to 4 about (common practice).
    for size, thin, profile in (("A1", 0.25, 1.0), ("A3", 0.18, 0.7)):
        chosen = paper(size, SETTINGS.show)
        assert pen_of("force_diagram", chosen) == thin
        assert pen_of("profile", chosen) == profile
        assert pen_of("closing_string", chosen) == thin
    doc, layout = opened(example())
    profile_layer = next(e for e in layout if e.dxf.layer == "S-CABL-PROF").dxf.layer
    assert doc.layers.get(profile_layer).dxf.lineweight == 70
    assert doc.layers.get("S-CABL-FORC").dxf.lineweight == 18


def test_the_closing_string_is_chain_dashed_in_all_three_files() -> None:
    sheet = example()
    string = next(i for i in sheet.items if i.id == "C1/closing-string/1")
    assert isinstance(string, LineItem)
    assert string.is_chain
    doc, layout = opened(sheet)
    chains = [e for e in layout.query("LINE") if e.dxf.get("linetype") == "SHEET-CHAIN"]
    assert any(tuple(e.dxf.start)[:2] == pytest.approx(string.start, abs=1e-6) for e in chains)
    assert "SHEET-CHAIN" in doc.linetypes
    assert b'stroke-dasharray="12 1.5 1.5 1.5"' in sheet_svg(sheet, SETTINGS)


def test_the_same_sheet_gives_the_same_bytes() -> None:
    first, second = made(*layout_of(invented(5, 1)), "A3")[0], example()
    assert sheet_dxf(first, SETTINGS) == sheet_dxf(second, SETTINGS)
    assert sheets_pdf([first], "t") == sheets_pdf([second], "t")
    assert sheet_svg(first, SETTINGS) == sheet_svg(second, SETTINGS)


def test_a_page_of_the_pdf_shows_lines_where_the_sheet_has_them() -> None:
    box = PolylineItem(
        id="b",
        layer="border",
        part="b",
        points=((50.0, 50.0), (250.0, 50.0), (250.0, 150.0), (50.0, 150.0)),
        is_closed=True,
    )
    spot = TriangleItem(
        id="t", layer="table", part="t", points=((100.0, 80.0), (140.0, 80.0), (120.0, 120.0))
    )
    ring = CircleItem(id="c", layer="support", part="c", center=(200.0, 100.0), radius=10.0)
    text = TextItem(id="x", layer="note", part="x", text="|", at=(170.0, 140.0), height=5.0)
    page = pypdfium2.PdfDocument(sheets_pdf([blank("A4", box, spot, ring, text)], "t"))[0]
    image = page.render(scale=72 / 25.4 * 2).to_pil().convert("L")  # 4 pixels a millimetre
    scale = image.width / 297.0

    def is_dark(x: float, y: float) -> bool:
        return bool(image.getpixel((int(x * scale), int((210.0 - y) * scale))) < 128)

    assert is_dark(50.0, 100.0)
    assert is_dark(120.0, 90.0)
    assert is_dark(190.0, 100.0)
    assert not is_dark(200.0, 100.0)
    assert not is_dark(30.0, 30.0)


def test_a_turned_text_is_read_from_the_right_in_the_pdf() -> None:
    text = TextItem(
        id="x",
        layer="note",
        part="x",
        text="UPRIGHT",
        at=(100.0, 100.0),
        height=2.5,
        rotation=90.0,
        align=Align.CENTER,
        valign=VAlign.MIDDLE,
    )
    page = pypdfium2.PdfDocument(sheets_pdf([blank("A4", text)], "t"))[0]
    boxes = [page.get_textpage().get_charbox(k) for k in range(len("UPRIGHT"))]
    bottoms = [bottom for _, bottom, _, _ in boxes]
    assert bottoms == sorted(bottoms)  # the first letter is lowest
    middle = 0.5 * (boxes[0][1] + boxes[-1][3]) * 25.4 / 72
    assert middle == pytest.approx(100.0, abs=0.5)


def test_characters_beyond_the_pdfs_face_are_named_and_kept_elsewhere() -> None:
    text = TextItem(id="x", layer="note", part="x", text="\\U+0416 1%%d", at=(50, 50), height=2.5)
    sheet = blank("A4", text)
    assert unshown(text.text) == {"\u0416"}
    assert "\u0416 1\u00b0".encode() in sheet_svg(sheet, SETTINGS)
    assert b"\\U+0416" in sheet_dxf(sheet, SETTINGS)
    assert sheets_pdf([sheet], "t").startswith(b"%PDF")


def test_each_role_of_an_item_has_a_look_and_a_layer() -> None:
    doc, layout = opened(example())
    assert {item.layer for item in example().items} <= set(LOOKS)
    assert all(entity.dxf.layer in doc.layers for entity in layout)
