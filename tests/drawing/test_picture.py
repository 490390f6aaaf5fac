"""Pictures show what is drawn, as it is plotted, and the same bytes for the same drawing."""

from __future__ import annotations

import subprocess
import sys
import time
from typing import TYPE_CHECKING

import pypdfium2
import pytest

from dxfcable.drawing.picture import Kind, draw_picture, picture
from dxfcable.errors import DrawingError, DxfcableError
from tests.drawing.pictures import RELEASES, Shot, blank, saved
from tests.laws.corpus import drawings

if TYPE_CHECKING:
    from pathlib import Path

WHITE = (255, 255, 255)
KINDS: tuple[Kind, ...] = ("svg", "pdf", "png")


def test_a_hole_in_a_hatch_stays_white() -> None:
    doc = blank()
    hatch = doc.modelspace().add_hatch(color=1)
    hatch.paths.add_polyline_path([(1, 1), (9, 1), (9, 9), (1, 9)], is_closed=True, flags=1)
    hatch.paths.add_polyline_path([(3, 3), (7, 3), (7, 7), (3, 7)], is_closed=True, flags=0)
    shot = Shot(doc)
    assert shot.colour(5, 5) == WHITE
    assert shot.colour(2, 5) == (255, 0, 0)


def test_a_mirrored_block_is_mirrored() -> None:
    doc = blank()
    block = doc.blocks.new("FLAG")
    block.add_solid([(0, 0), (3, 0), (0, 3), (3, 3)], dxfattribs={"color": 5})
    outer = doc.blocks.new("OUTER")
    outer.add_blockref("FLAG", (0, 0))
    doc.modelspace().add_blockref("OUTER", (5, 5), dxfattribs={"xscale": -1})
    shot = Shot(doc)
    assert shot.colour(3.5, 6.5) == (0, 0, 255)
    assert shot.colour(6.5, 6.5) == WHITE


@pytest.mark.parametrize("release", RELEASES)
def test_colour_7_is_black_in_every_release(release: str) -> None:
    doc = blank(release)
    doc.modelspace().add_solid([(2, 2), (8, 2), (2, 8), (8, 8)], dxfattribs={"color": 7})
    shot = Shot(doc)
    assert shot.colour(5, 5) == (0, 0, 0)
    assert shot.colour(1, 5) == WHITE


def test_a_layer_that_is_not_listed_is_black() -> None:
    doc = blank()
    doc.modelspace().add_solid([(2, 2), (8, 2), (2, 8), (8, 8)], dxfattribs={"layer": "X-NONE"})
    assert Shot(doc).colour(5, 5) == (0, 0, 0)


@pytest.mark.parametrize("state", ["off", "frozen", "unplotted"])
def test_what_is_off_or_frozen_or_not_plotted_is_not_drawn(state: str) -> None:
    doc = blank()
    layer = doc.layers.add("HIDDEN", plot=state != "unplotted")
    if state == "off":
        layer.off()
    elif state == "frozen":
        layer.freeze()
    doc.modelspace().add_solid([(2, 2), (8, 2), (2, 8), (8, 8)], dxfattribs={"layer": "HIDDEN"})
    assert Shot(doc).colour(5, 5) == WHITE


def test_a_block_inserted_on_a_frozen_layer_is_not_drawn() -> None:
    doc = blank()
    doc.layers.add("FROZEN").freeze()
    doc.layers.add("SEEN")
    block = doc.blocks.new("PATCH")
    block.add_solid([(0, 0), (6, 0), (0, 6), (6, 6)], dxfattribs={"layer": "SEEN"})
    doc.modelspace().add_blockref("PATCH", (2, 2), dxfattribs={"layer": "FROZEN"})
    assert Shot(doc).colour(5, 5) == WHITE


def test_a_dashed_line_has_gaps_and_a_wide_one_is_wide() -> None:
    doc = blank()
    space = doc.modelspace()
    space.add_line((1, 3), (9, 3), dxfattribs={"linetype": "DASHED", "lineweight": 100})
    space.add_line((1, 7), (9, 7), dxfattribs={"lineweight": 100})
    doc.header["$LTSCALE"] = 1.0
    shot = Shot(doc)
    assert 0.3 < shot.ink(1, 2.97, 9, 3.03) < 0.9
    assert shot.ink(1, 6.97, 9, 7.03) > 0.95


def test_a_line_type_too_fine_to_be_seen_is_solid() -> None:
    doc = blank()
    doc.header["$LTSCALE"] = 1e-6
    doc.modelspace().add_line((1, 3), (9, 3), dxfattribs={"linetype": "DASHED", "lineweight": 100})
    assert Shot(doc).ink(1, 2.97, 9, 3.03) > 0.95


@pytest.mark.parametrize(
    ("typed", "meant"),
    [
        (r"\U+2205 12", "\u2205 12"),
        ("%%c12", "\u00d812"),
        ("45%%d", "45\u00b0"),
        ("%%127", "\u00b0"),
    ],
)
def test_codes_in_texts_show_the_character_they_mean(typed: str, meant: str) -> None:
    shots = []
    for text in (typed, meant):
        doc = blank("R2010")
        doc.modelspace().add_text(text, height=3).set_placement((1, 2))
        shots.append(Shot(doc).pixels)
    assert (shots[0] == shots[1]).all()


def test_a_rotated_formatted_text_stands_where_it_is_drawn() -> None:
    doc = blank()
    text = doc.modelspace().add_mtext(r"{\C1;MMMM}\P\S1/2;", dxfattribs={"char_height": 1.0})
    text.set_location((6, 1), rotation=90, attachment_point=7)
    shot = Shot(doc)
    assert shot.ink(2, 1, 6, 6.5) > 0.05
    assert shot.ink(6.3, 0.5, 9.5, 9.5) == 0.0


def test_a_text_with_a_background_covers_what_is_beneath() -> None:
    doc = blank()
    doc.modelspace().add_solid([(1, 1), (9, 1), (1, 9), (9, 9)], dxfattribs={"color": 5})
    text = doc.modelspace().add_mtext("I", dxfattribs={"char_height": 2.0})
    text.set_location((4, 6))
    text.set_bg_color(2, scale=1.5)
    shot = Shot(doc)
    assert shot.colour(3.5, 6.5) == (255, 255, 0)
    assert shot.colour(2, 2) == (0, 0, 255)


def test_an_oblique_text_leans() -> None:
    shots = []
    for oblique in (0, 45):
        doc = blank()
        text = doc.modelspace().add_text("I", height=4, dxfattribs={"oblique": oblique})
        text.set_placement((2, 2))
        shots.append(Shot(doc))
    upper_right = (4.5, 4.5, 8, 6.5)
    assert shots[0].ink(*upper_right) == 0.0
    assert shots[1].ink(*upper_right) > 0.02


def test_characters_that_no_face_has_are_told() -> None:
    doc = blank()
    doc.modelspace().add_text("P1 \ue123", height=1).set_placement((1, 2))
    made = draw_picture(saved(doc), "svg")
    assert [f.text for f in made.findings] == [
        "shown as boxes, since no face on this machine has them: U+E123"
    ]


def test_a_dimension_shows_its_block() -> None:
    doc = blank()
    doc.modelspace().add_linear_dim(base=(5, 6), p1=(2, 4), p2=(8, 4), dimstyle="EZDXF").render()
    assert Shot(doc).ink(1, 3, 9, 8) > 0.01


def test_a_constant_attribute_shows_in_every_insert_of_its_block() -> None:
    doc = blank()
    block = doc.blocks.new("TAGGED")
    block.add_attdef("KIND", (1, 4), "FIXED", dxfattribs={"height": 2, "flags": 2})
    block.add_attdef("SPARE", (1, 7), "HIDDEN", dxfattribs={"height": 2, "flags": 3})
    doc.modelspace().add_blockref("TAGGED", (0, 0))
    shot = Shot(doc)
    assert shot.ink(1, 4, 9, 6) > 0.1
    assert shot.ink(1, 6.6, 9, 9.5) == 0.0


def test_lines_without_end_cross_the_picture_and_do_not_stretch_it() -> None:
    doc = blank()
    doc.modelspace().add_xline((5, 5), (1, 0))
    doc.modelspace().add_ray((5, 5), (0, 1))
    shot = Shot(doc)
    assert shot.ink(0.5, 4.8, 9.5, 5.2) > 0.05
    assert shot.ink(4.8, 5.5, 5.2, 9.5) > 0.05
    assert shot.ink(4.8, 0.5, 5.2, 4.5) == 0.0


@pytest.mark.parametrize("slip", ["nan", "1e300", "-inf"])
def test_a_slip_of_a_coordinate_costs_that_entity_alone(slip: str) -> None:
    doc = blank()
    doc.modelspace().add_circle((5, 5), 2)
    doc.modelspace().add_line((4321, 0), (5, 5))
    data = saved(doc).replace(b"4321.0", slip.encode())
    made = draw_picture(data, "png", size=200)
    assert [f.code for f in made.findings] == ["picture-not-drawn"]
    assert Shot(data).ink(2.5, 2.5, 7.5, 7.5) > 0.005


def test_a_block_that_holds_itself_is_drawn_once_and_told() -> None:
    doc = blank()
    block = doc.blocks.new("LOOP")
    block.add_solid([(0, 0), (4, 0), (0, 4), (4, 4)])
    block.add_blockref("LOOP", (1, 1))
    block.add_blockref("LOOP", (2, 2))
    doc.modelspace().add_blockref("LOOP", (2, 2))
    made = draw_picture(saved(doc), "svg")
    assert "holds itself" in made.findings[0].text


def test_a_dense_hatch_is_a_tint_and_takes_no_time() -> None:
    doc = blank()
    hatch = doc.modelspace().add_hatch(color=1)
    hatch.set_pattern_fill("ANSI31", color=1, scale=1e-5)
    hatch.paths.add_polyline_path([(1, 1), (9, 1), (9, 9), (1, 9)], is_closed=True)
    begin = time.perf_counter()
    red, green, blue = Shot(doc).colour(5, 5)
    assert time.perf_counter() - begin < 3
    assert red == 255
    assert 100 < green == blue < 220


@pytest.mark.parametrize("kind", KINDS)
def test_the_same_drawing_gives_the_same_bytes_twice(kind: Kind) -> None:
    doc = blank()
    hatch = doc.modelspace().add_hatch(color=3)
    hatch.set_pattern_fill("ANSI31", scale=0.5)
    hatch.paths.add_polyline_path([(1, 1), (9, 1), (9, 9), (1, 9)], is_closed=True)
    doc.modelspace().add_text("P1 = 18 kip", height=1).set_placement((2, 4))
    data = saved(doc)
    assert picture(data, kind) == picture(data, kind)


def test_svg_and_pdf_say_their_size() -> None:
    data = saved(blank())
    assert b'width="211.7mm" height="211.7mm"' in picture(data, "svg", size=800)
    width, height = pypdfium2.PdfDocument(picture(data, "pdf", size=800))[0].get_size()
    assert (width, height) == pytest.approx((600, 600), abs=0.2)  # 800 pixels of 1/96 inch


def test_a_layout_keeps_the_size_of_its_paper() -> None:
    doc = blank()
    sheet = doc.layouts.new("Sheet 1")
    sheet.page_setup(size=(36, 24), margins=(0.5,) * 4, units="inch", scale=(1, 1))
    sheet.add_line((0, 0), (35, 23))
    viewport = sheet.add_viewport((10, 10), (8, 8), (5, 5), 10)
    viewport.dxf.status = 2
    data = saved(doc)
    pdf = pypdfium2.PdfDocument(picture(data, "pdf", layout="sheet 1"))
    assert pdf[0].get_size() == pytest.approx((36 * 72, 24 * 72), abs=0.2)
    image = pdf[0].render(scale=1 / 7.2).to_numpy()  # ten pixels an inch
    frame = image[240 - 109 : 240 - 101, 61:69]  # lower left corner of the viewport's content
    assert frame.min() < 240
    with pytest.raises(DxfcableError, match="no layout") as caught:
        picture(data, "pdf", layout="Sheet 9")
    assert "Sheet 1" in caught.value.remedy


def test_an_empty_drawing_is_told_so() -> None:
    from ezdxf.filemanagement import new

    with pytest.raises(DrawingError, match="model space is empty"):
        picture(saved(new("R2010")), "svg")


def test_a_drawing_all_hidden_is_told_so() -> None:
    doc = blank()
    doc.layers.get("0").off()
    with pytest.raises(DrawingError, match="shows nothing: all 4 entities"):
        picture(saved(doc), "svg")


@pytest.mark.parametrize(
    ("before", "ends"), [(b"\xef\xbb\xbf", b"\n"), (b"\n \n", b"\r\n"), (b"999\nnote\n", b"\r")]
)
def test_marks_and_blank_lines_before_and_line_ends_do_not_matter(
    before: bytes, ends: bytes
) -> None:
    doc = blank("R2007")
    doc.modelspace().add_solid([(2, 2), (8, 2), (2, 8), (8, 8)])
    data = (before + saved(doc)).replace(b"\n", ends)
    assert Shot(data).colour(5, 5) == (0, 0, 0)


def test_light_polylines_in_a_drawing_without_header_are_drawn() -> None:
    # Hobby exporters write R12 with newer entities and leave the subclass markers out.
    points = "".join(f"10\n{x}\n20\n{y}\n" for x, y in [(0, 0), (10, 0), (10, 10), (0, 10)])
    body = f"0\nLWPOLYLINE\n8\n0\n90\n4\n70\n1\n{points}"
    data = f"0\nSECTION\n2\nENTITIES\n{body}0\nENDSEC\n0\nEOF\n".encode()
    made = draw_picture(data, "svg")
    assert [f.code for f in made.findings] == ["picture-mended"]
    assert Shot(data).ink(-0.2, 2, 0.2, 8) > 0.05


def test_a_file_that_is_no_drawing_is_refused_in_one_sentence() -> None:
    for data in (b"", b"AC1015 a DWG", b"%PDF-1.4 nothing of a drawing", b"0\nSECTION\n"):
        with pytest.raises(DrawingError) as caught:
            picture(data, "svg")
        assert "\n" not in caught.value.message


@pytest.mark.parametrize(
    ("kind", "module", "library"),
    [
        ("svg", "PIL", "pillow"),
        ("pdf", "reportlab", "reportlab"),
        ("png", "pypdfium2", "pypdfium2"),
    ],
)
def test_a_missing_library_is_named_with_the_command_that_installs_it(
    kind: Kind, module: str, library: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setitem(sys.modules, module, None)
    with pytest.raises(DxfcableError, match=library) as caught:
        picture(saved(blank()), kind)
    assert caught.value.code == "picture-extra"
    assert "pip install 'dxfcable[picture]'" in caught.value.remedy


@pytest.mark.parametrize("wrong", [(10, 0.03), (10**6, 0.03), (800, -1.0)])
def test_a_size_that_gives_no_picture_is_refused(wrong: tuple[int, float]) -> None:
    size, margin = wrong
    with pytest.raises(DxfcableError) as caught:
        picture(saved(blank()), "svg", size=size, margin=margin)
    assert caught.value.code == "usage"


def test_importing_the_rooms_of_pictures_loads_no_drawing_library() -> None:
    code = (
        "import sys, dxfcable.drawing.picture, dxfcable.drawing.overlay;"
        "print([m for m in sys.modules if m.startswith(('ezdxf.addons', 'reportlab', 'PIL'))])"
    )
    done = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, text=True, check=True, timeout=60
    )
    assert done.stdout.strip() == "[]"


def _open_or_broken(least: int, below: int) -> list[Path]:
    """Return real drawings of some size."""
    found = [*drawings("open"), *drawings("broken")]
    return [path for path in found if least <= path.stat().st_size < below]


@pytest.mark.parametrize("path", _open_or_broken(0, 250_000), ids=lambda path: path.stem)
def test_a_real_drawing_gives_a_picture_or_one_sentence(
    path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    _picture_or_sentence(path)
    captured = capsys.readouterr()
    assert not captured.out
    assert not captured.err


@pytest.mark.slow
@pytest.mark.parametrize("path", _open_or_broken(250_000, 1 << 30), ids=lambda path: path.stem)
def test_a_large_real_drawing_gives_a_picture_or_one_sentence(
    path: Path, request: pytest.FixtureRequest
) -> None:
    if "slow" not in request.config.getoption("markexpr"):
        pytest.skip("takes seconds; run with -m slow")
    begin = time.perf_counter()
    _picture_or_sentence(path)
    assert time.perf_counter() - begin < 30


def _picture_or_sentence(path: Path) -> None:
    """Make a picture; where it is refused, check that it is in one plain sentence."""
    refusal: DrawingError | None = None
    try:
        data = picture(path.read_bytes(), "pdf", size=800)
    except DrawingError as error:
        refusal = error
    if refusal is None:
        assert data.startswith(b"%PDF")
    else:
        assert refusal.remedy
        assert "\n" not in refusal.message
